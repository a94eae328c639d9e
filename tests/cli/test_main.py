"""What the program says of itself, and how its text fits a terminal."""

from __future__ import annotations

import os
import sys
from typing import TYPE_CHECKING
from unittest import mock

import pytest
from cli_run import BY_JOINTS, movload, written

import movload as package
from movload.cli import main

if TYPE_CHECKING:
    from pathlib import Path

    from rich.console import RenderableType

COMMANDS = ("start", "draw", "influence", "sweep", "rate", "vehicles", "schema")


def test_version() -> None:
    assert movload("--version").out == f"movload {package.__version__}\n"


def test_help_lists_every_command_and_the_exit_codes() -> None:
    done = movload("--help")
    assert done.code == movload().code == 0
    assert done.out.strip() == movload().out.strip()
    words = " ".join(done.out.split())
    assert "Exit codes: 0 done, 1 bad input, 2 wrong usage, 3 with --gate" in words
    for command in COMMANDS:
        assert f"│ {command} " in words


@pytest.mark.parametrize("command", COMMANDS)
def test_each_command_says_what_it_does(command: str) -> None:
    done = movload(command, "--help")
    assert done.code == 0
    assert f"Usage: movload {command}" in done.out
    assert done.err == ""


def test_an_error_of_ours_is_the_only_one_that_is_caught() -> None:
    """A defect keeps its traceback."""
    with mock.patch.object(main, "app", side_effect=ZeroDivisionError), pytest.raises(ZeroDivisionError):
        movload("draw", "x")


def test_an_interrupt_exits_with_130() -> None:
    with mock.patch.object(main, "app", side_effect=KeyboardInterrupt):
        assert movload("draw", "x").code == 130


def widths(text: str) -> set[int]:
    """Return how wide a text's lines are."""
    return {len(line) for line in text.splitlines()}


@pytest.mark.parametrize(("columns", "widest"), [("20", 40), ("1", 40), ("60", 60), ("nonsense", 80), ("0", 80)])
def test_text_keeps_within_the_columns_there_are(
    tmp_path: Path, monkeypatch: pytest.MonkeyPatch, columns: str, widest: int
) -> None:
    path = written(tmp_path, BY_JOINTS)
    pop = os.environ.pop
    with mock.patch.object(os.environ, "pop", lambda name, *rest: pop(name, *rest) if name != "COLUMNS" else None):
        monkeypatch.setenv("COLUMNS", columns)
        for words in (["rate", path, "h5", "--all"], ["sweep", path, "h5"], ["draw", path], ["influence", path]):
            done = movload(*words)
            assert done.code == 0
            assert max(widths(done.out)) <= widest


def test_piped_text_holds_no_colour_and_no_trailing_blanks(tmp_path: Path) -> None:
    path = written(tmp_path, BY_JOINTS)
    for words in (
        ["rate", path, "h5", "h10"],
        ["sweep", path, "h5"],
        ["draw", path],
        ["influence", path],
        ["vehicles"],
    ):
        out = movload(*words).out
        assert "\x1b" not in out
        assert all(line == line.rstrip() for line in out.splitlines())
        assert out.endswith("\n")
        assert max(widths(out)) <= 132


@pytest.mark.parametrize(("no_colour", "is_coloured"), [("1", False), ("0", False), ("", True), (None, True)])
def test_a_terminal_gets_colour_unless_it_asks_for_none(
    monkeypatch: pytest.MonkeyPatch, no_colour: str | None, is_coloured: bool
) -> None:
    """NO_COLOR counts when it is set and not empty, whatever it holds (no-color.org, from memory)."""
    from movload.cli import options

    if no_colour is None:
        monkeypatch.delenv("NO_COLOR", raising=False)
    else:
        monkeypatch.setenv("NO_COLOR", no_colour)
    monkeypatch.setenv("TERM", "xterm")
    shown: list[str] = []
    with mock.patch.object(sys, "stdout", mock.Mock(encoding="utf-8", write=shown.append, isatty=lambda: True)):
        options.deliver(text=lambda: [_table()], json=None, files={}, force=False)
    assert ("\x1b" in shown[0]) == is_coloured


def _table() -> RenderableType:
    """Return a table with a head, which is bold in colour."""
    from movload.report.table import grid

    return grid(["head"], [["cell"]], right=[False])
