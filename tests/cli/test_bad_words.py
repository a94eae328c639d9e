"""Words on the command line that mean nothing: rows, allowances, suffixes, options; usage errors exit with 2."""

from __future__ import annotations

from typing import TYPE_CHECKING

import pytest
from cli_run import BY_JOINTS, assert_refused, movload, names_in, written

if TYPE_CHECKING:
    from pathlib import Path

ROWS = {
    "U1-U9": 'row "U1-U9" is not known (nearest: "U1-U2")',
    "L3 don": 'row "L3 don" is not known (nearest: "L3 down")',
    "l0 Y": 'row "l0 Y" is not known (nearest: "L0 y")',
    "two\nlines": 'row "two\\nlines" is not known',
    "U1-U2-L2": 'row "U1-U2-L2" is not known',
}


@pytest.mark.parametrize("row", ROWS, ids=repr)
def test_an_unknown_row_and_the_nearest(tmp_path: Path, row: str) -> None:
    path = written(tmp_path, BY_JOINTS)
    new = ("--csv", tmp_path / "new.csv", "--plot", tmp_path / "new.png")
    assert_refused(movload("influence", path, row, *new), ROWS[row], place=path)
    assert_refused(movload("sweep", path, "h5", "--row", row, *new), ROWS[row], place=path)
    assert_refused(movload("sweep", path, "h5", "--row", "U1-U2", "--row", row, "--json"), ROWS[row], place=path)
    assert names_in(tmp_path) == {path.name}


def test_an_empty_row(tmp_path: Path) -> None:
    path = written(tmp_path, BY_JOINTS)
    assert_refused(movload("influence", path, ""), 'row "" is not known', place=path)


IMPACTS = {
    "30": "impact must be 0 to 2 (30 % is 0.3), got 30.0",
    "-0.1": "impact must be 0 to 2 (30 % is 0.3), got -0.1",
    "1e308": "impact must be 0 to 2",
    "1e999": '"1e999" is too large a number',
    "nan": '"nan" is no fraction and none of by riding surface, by loaded length, railway',
    "inf": '"inf" is no fraction and none of',
    "much": '"much" is no fraction and none of',
    "": '"" is no fraction and none of',
    "%": '"%" is no fraction and none of',
    "typed": '"typed" is no fraction and none of',
    "by riding surfaces": 'and none of by riding surface, by loaded length, railway (nearest: "by riding surface")',
    "30 kN": '"30 kN" is a force; a fraction is asked for, e.g. "30 %"',
    "30 percent": 'unit "percent" is not known for a fraction',
}


@pytest.mark.parametrize("impact", IMPACTS)
def test_a_nonsensical_allowance(tmp_path: Path, impact: str) -> None:
    path = written(tmp_path, BY_JOINTS)
    assert_refused(movload("rate", path, "h5", f"--impact={impact}", "--json"), IMPACTS[impact], place="--impact")


SUFFIXES = {
    "x.gif": 'a picture ends in .png, .svg, .pdf, got ".gif"',
    "x.pgn": 'got ".pgn" (nearest: ".png")',
    "x": 'got ""',
    ".png": 'got ""',
    "x.png.txt": 'got ".txt"',
    "x.": "a picture ends in",
}


@pytest.mark.parametrize("name", SUFFIXES)
def test_a_picture_that_nobody_can_draw(tmp_path: Path, name: str) -> None:
    path = written(tmp_path, BY_JOINTS)
    new = ("--plot", tmp_path / name, "--csv", tmp_path / "new.csv")
    for words in (["draw", path], ["influence", path, "U1-U2"], ["rate", path, "h5"], ["sweep", path, "h5"]):
        assert_refused(movload(*words, *new), SUFFIXES[name], place=f"--plot {tmp_path / name}")
    assert names_in(tmp_path) == {path.name}


def test_a_drawing_needs_to_know_of_what(tmp_path: Path) -> None:
    path, new = written(tmp_path, BY_JOINTS), ("--plot", tmp_path / "new.png")
    assert_refused(movload("influence", path, *new), "name 1 to 6 rows to draw, got 0", place="--plot")
    assert_refused(movload("influence", path, *["U1-U2"] * 7, *new), "to draw, got 7", place="--plot")
    assert_refused(movload("sweep", path, "h5", *new), "say which row to draw: --row U1-L2", place="--plot")
    assert names_in(tmp_path) == {path.name}


USAGE = {
    "command": (["raet", "b.toml"], "No such command 'raet'"),
    "option": (["rate", "b.toml", "h5", "--jsn"], "No such option: --jsn"),
    "no value": (["rate", "b.toml", "h5", "--impact"], "--impact"),
    "no vehicle": (["rate", "b.toml"], "Missing argument 'VEHICLE"),
    "no bridge": (["draw", "--json"], "Missing argument 'BRIDGE'"),
    "too many": (["draw", "b.toml", "c.toml"], "unexpected extra argument"),
    "subject": (["schema", "brige"], "'brige' is not one of 'bridge'"),
    "negative allowance": (["rate", "b.toml", "h5", "-1"], "No such option: -1"),
    "nul": (["draw", "a\0b.toml"], "null byte"),
}


@pytest.mark.parametrize(("words", "message"), USAGE.values(), ids=USAGE)
def test_wrong_usage_exits_with_2_and_says_nothing_on_stdout(words: list[str], message: str) -> None:
    done = movload(*words)
    assert done.code == 2
    assert done.out == ""
    assert " Error " in done.err
    assert message in " ".join(done.err.replace("│", " ").split())
    assert "Traceback" not in done.err


@pytest.mark.parametrize("command", ["start", "draw", "influence", "sweep", "rate", "schema"])
def test_a_command_without_words_shows_its_help(command: str) -> None:
    done = movload(command)
    assert done.code == 2
    assert f"Usage: movload {command}" in done.out
    assert movload(command, "-h").out.strip() == movload(command, "--help").out.strip() == done.out.strip()
    assert movload(command, "--help").code == 0
