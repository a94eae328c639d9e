"""What starting costs: neither ``import movload`` nor the command's help loads numpy, scipy or matplotlib."""

from __future__ import annotations

import json
import subprocess
import sys
from pathlib import Path

import pytest

ROOT = Path(__file__).resolve().parents[1]

# Runs as ``python -c``: does what its arguments say, then says on its last line which of the heavy modules are there.
PROBE = """
import json, runpy, sys

what, *arguments = sys.argv[1:]
sys.argv = ["movload", *arguments]
try:
    if what == "run":
        runpy.run_module("movload", run_name="__main__", alter_sys=True)
    else:
        exec(what)
except SystemExit as end:
    assert not end.code, end.code
print()
print(json.dumps(sorted(name for name in ("matplotlib", "numpy", "scipy") if name in sys.modules)))
"""


def loaded_by(*arguments: str) -> list[str]:
    """Return which heavy modules a fresh Python has loaded when it has done what it was told."""
    done = subprocess.run(
        [sys.executable, "-c", PROBE, *arguments], cwd=ROOT, capture_output=True, check=True, encoding="utf-8"
    )
    names: list[str] = json.loads(done.stdout.splitlines()[-1])
    return names


def test_the_probe_sees_what_is_loaded() -> None:
    assert loaded_by("import matplotlib, scipy") == ["matplotlib", "numpy", "scipy"]
    assert "numpy" in loaded_by("import movload; movload.Truss")


def test_import_loads_nothing_heavy() -> None:
    assert loaded_by("import movload") == []


@pytest.mark.parametrize(
    "arguments", [(), ("--help",), ("--version",), ("rate", "--help"), ("draw", "--help")], ids=" ".join
)
def test_help_loads_nothing_heavy(arguments: tuple[str, ...]) -> None:
    assert loaded_by("run", *arguments) == []


def test_rating_without_a_picture_does_not_load_matplotlib() -> None:
    names = loaded_by("run", "rate", "examples/kettle_ford.toml", "tractor_slurry_tanker")
    assert "numpy" in names
    assert "matplotlib" not in names
