"""The program as a process of its own: closed and full streams, a reader who leaves, terminals that show little."""

from __future__ import annotations

import json
import os
import subprocess
import sys
from pathlib import Path

import pytest
from cli_run import BY_JOINTS, ROOT, changed, movload, written

FULL = Path("/dev/full")
MOVLOAD = f"{sys.executable} -m movload"
VARIABLES = {name: value for name, value in os.environ.items() if name not in {"COLUMNS", "NO_COLOR", "FORCE_COLOR"}}


def shell(command: str, **variables: str) -> subprocess.CompletedProcess[str]:
    """Run a shell command; ``$MOVLOAD`` in it is the program."""
    return subprocess.run(
        ["/bin/sh", "-c", command],
        cwd=ROOT, capture_output=True, text=True, timeout=60, check=False,
        env=VARIABLES | {"MOVLOAD": MOVLOAD, "PYTHONPATH": str(ROOT), "OPENBLAS_NUM_THREADS": "1"} | variables,
    )  # fmt: skip


@pytest.fixture
def bridge(tmp_path: Path) -> Path:
    """Return a bridge whose title no narrow encoding can show."""
    return written(tmp_path, changed(BY_JOINTS, ("Alder footpath", "Älder 橋 😀")))


def test_python_m_movload_is_the_same_program(bridge: Path) -> None:
    done = shell(f"$MOVLOAD rate {bridge} h5 --gate --json", PYTHONIOENCODING="utf-8")
    here = movload("rate", bridge, "h5", "--gate", "--json")
    assert (done.returncode, done.stdout, done.stderr) == (here.code, here.out, here.err)


def test_closed_streams_swallow_and_the_exit_code_stands(bridge: Path) -> None:
    codes = shell(
        f"$MOVLOAD rate {bridge} hs20 --gate >&-; echo $?; $MOVLOAD rate {bridge} no 2>&-; echo $?; "
        f"$MOVLOAD draw {bridge} <&- >&- 2>&-; echo $?"
    )
    assert (codes.stdout.split(), codes.stderr) == (["3", "1", "0"], "")


def test_a_reader_who_leaves_is_no_error(bridge: Path) -> None:
    """`head` closes the pipe before, or while, it is written."""
    for command in (f"$MOVLOAD rate {bridge} h5 h10 --all | head -1", "$MOVLOAD vehicles --json | true"):
        done = shell(command)
        assert (done.returncode, done.stderr) == (0, "")


@pytest.mark.skipif(not FULL.exists(), reason="needs /dev/full")
@pytest.mark.parametrize("words", ["vehicles --json", "--help"])
def test_a_full_disk_under_stdout(words: str) -> None:
    done = shell(f"$MOVLOAD {words} > {FULL}")
    assert done.returncode == 1
    assert done.stderr == "movload: standard output: cannot be written: No space left on device\n"


@pytest.mark.parametrize("encoding", ["ascii", "latin-1:strict"])
def test_json_loses_no_sign_in_a_narrow_encoding(bridge: Path, encoding: str) -> None:
    done = shell(f"$MOVLOAD draw {bridge} --json", PYTHONIOENCODING=encoding)
    assert (done.returncode, done.stderr) == (0, "")
    assert json.loads(done.stdout)["title"] == "Älder 橋 😀"


def test_text_shows_question_marks_in_a_narrow_encoding(bridge: Path) -> None:
    done = shell(f"$MOVLOAD rate {bridge} h5", PYTHONIOENCODING="ascii")
    assert (done.returncode, done.stderr) == (0, "")
    assert done.stdout.startswith("?lder ? ?\n")


def test_python_is_not_told_to_ignore_anything(bridge: Path) -> None:
    """Warnings as errors: nothing warns, and nothing is left for stderr."""
    done = shell(f"{sys.executable} -X dev -W error -m movload rate {bridge} h5 --gate")
    assert (done.returncode, done.stderr) == (0, "")
