"""A whole command against an empty one: what movload adds to the libraries it stands on."""

from __future__ import annotations

import os
import subprocess
import sys
from functools import partial
from pathlib import Path
from typing import TYPE_CHECKING

from benchmarks.ratios import Course, raced

if TYPE_CHECKING:
    from pytest_benchmark.fixture import BenchmarkFixture

ROOT = Path(__file__).resolve().parents[2]

EMPTY_COMMAND = """
import typer

app = typer.Typer(add_completion=False)


@app.command()
def nothing():
    import scipy.linalg
    from pydantic import BaseModel
    from rich.console import Console
    from rich.table import Table

    table = Table("a", "b")
    table.add_row("1", "2")
    Console().print(table)


app()
"""


def test_rate_against_an_empty_command(benchmark: BenchmarkFixture) -> None:
    """At most 1.25 times the time of a command that only imports what any such command would.

    Theirs: a typer command that imports ``scipy.linalg`` and ``pydantic.BaseModel`` and prints one rich table. Ours:
    ``movload rate`` for one example and one vehicle, read, checked, solved, swept, rated and printed, no picture. Both
    are whole processes, started by turns.
    """
    ours = partial(_output, "-m", "movload", "rate", "examples/kettle_ford.toml", "tractor_slurry_tanker")
    course = Course(rounds=11, each=1, warmed=False)
    race = raced(benchmark, ours, {"empty command": partial(_output, "-c", EMPTY_COMMAND)}, course)
    assert "Kettle Ford farm bridge" in race.ours
    assert "2" in race.theirs["empty command"]
    race.require_no_slower("empty command", 1.25)


def _output(*arguments: str) -> str:
    """Return what a Python process prints; compiled modules are kept, as they are once a program is installed."""
    environment = {name: value for name, value in os.environ.items() if name != "PYTHONDONTWRITEBYTECODE"}
    environment |= {"OPENBLAS_NUM_THREADS": "1", "PYTHONIOENCODING": "utf-8", "COLUMNS": "120"}
    done = subprocess.run(
        [sys.executable, *arguments], cwd=ROOT, env=environment, capture_output=True, check=True, encoding="utf-8"
    )
    return done.stdout
