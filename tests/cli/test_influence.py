"""``movload influence``: ordinates as text, JSON and CSV, against statics done by hand on a three-panel truss."""

from __future__ import annotations

import csv
from typing import TYPE_CHECKING

import pytest
from cli_run import BY_JOINTS, changed, movload, numbers_in, written
from numpy.testing import assert_allclose

if TYPE_CHECKING:
    from pathlib import Path

FIELDS = ["format", "title", "units", "stations", "rows"]
ROW = ["part", "row", "kind", "unit", "ordinates"]
ROWS = [
    "U1-U2", "L0-L1", "L1-L2", "L2-L3", "L0-U1", "U2-L3", "U1-L1", "U2-L2", "U1-L2",
    "L0 x", "L0 y", "L3 normal", "L0 down", "L1 down", "L2 down", "L3 down",
]  # fmt: skip
SPAN, FIRST, SECOND = 9.6, 3.1, 6.4
# By moments: about U1 for L0-L1, of the whole for the reactions; the hanger takes what stands under it.
BY_HAND: dict[str, list[float]] = {
    "L0-L1": [0, (SPAN - FIRST) / SPAN * FIRST / 2.2, (SPAN - SECOND) / SPAN * FIRST / 2.2, 0],
    "U1-L1": [0, 1, 0, 0],
    "L0 y": [1, (SPAN - FIRST) / SPAN, (SPAN - SECOND) / SPAN, 0],
    "L3 normal": [0, FIRST / SPAN, SECOND / SPAN, 1],
    "L0 x": [0, 0, 0, 0],
}


@pytest.fixture
def path(tmp_path: Path) -> Path:
    """Return the bridge's file."""
    return written(tmp_path, BY_JOINTS)


def test_json_has_these_fields_and_every_row(path: Path) -> None:
    lines = movload("influence", path, "--json").json()
    assert list(lines) == FIELDS
    assert lines["format"] == "movload.influence/1"
    assert lines["title"] == "Alder footpath"
    assert lines["stations"] == [
        {"x": 0.0, "name": "L0"}, {"x": 3.1, "name": "L1"}, {"x": 6.4, "name": "L2"}, {"x": 9.6, "name": "L3"},
    ]  # fmt: skip
    assert all(list(row) == ROW for row in lines["rows"])
    assert [row["row"] for row in lines["rows"]] == ROWS
    units = {row["kind"]: row["unit"] for row in lines["rows"]}
    assert units == {"axial": "N/N", "reaction": "N/N", "down": "m/N"}


@pytest.mark.parametrize("row", BY_HAND)
def test_ordinates_are_those_of_statics(path: Path, row: str) -> None:
    (line,) = movload("influence", path, row, "--json").json()["rows"]
    # atol: round-off of a solve with a handful of unknowns
    assert_allclose(line["ordinates"], BY_HAND[row], rtol=0, atol=1e-13)


def test_rows_come_as_asked_and_a_member_in_either_order(path: Path) -> None:
    asked = movload("influence", path, "L2 down", "U2-U1", "U1-U2", "--json").json()
    assert [row["row"] for row in asked["rows"]] == ["L2 down", "U1-U2", "U1-U2"]


def test_text_is_rounded_and_says_what_it_holds(path: Path) -> None:
    out = movload("influence", path, "L3 normal", "L1 down").out
    assert out.startswith("Alder footpath: influence lines, effect per unit downward load\n")
    assert "3.100   L1     +0.3229" in out
    assert "[mm/kN]" in out
    assert "Straight between stations, 0 beyond them. Member forces: + tension. [-] is force per force." in out
    for row in ROWS:
        assert row in movload("influence", path).out


def test_csv_carries_units_and_the_numbers_of_the_json(path: Path, tmp_path: Path) -> None:
    out = tmp_path / "out.csv"
    lines = movload("influence", path, "--json", "--csv", out).json()["rows"]
    with out.open(encoding="utf-8", newline="") as file:
        heads, *rows = csv.reader(file)
    assert heads == ["part", "row", "kind", "unit", "x = 0 m", "x = 3.1 m", "x = 6.4 m", "x = 9.6 m"]
    for row, line in zip(rows, lines, strict=True):
        assert row[:3] == [line["part"], line["row"], line["kind"]]
        assert row[3] == ("mm/kN" if line["kind"] == "down" else "-")
        scale = 1e-6 if line["kind"] == "down" else 1.0  # mm/kN = 1e-3 m / 1e3 N
        # rtol: one multiplication by the unit on each side
        assert_allclose([float(text) * scale for text in row[4:]], line["ordinates"], rtol=1e-15, atol=0)


def test_an_abutment_is_a_station_without_ordinates(tmp_path: Path) -> None:
    path = written(tmp_path, changed(BY_JOINTS, ("truss_share = 0.6", "left_abutment = -0.5")))
    lines = movload("influence", path, "--json").json()
    assert lines["stations"][0] == {"x": -0.5, "name": "abutment"}
    assert {row["ordinates"][0] for row in lines["rows"]} == {0.0}
    assert "abutment" in movload("influence", path, "L0 y").out


def test_the_same_question_has_the_same_bytes(path: Path) -> None:
    first = movload("influence", path, "--json")
    assert movload("influence", path, "--json").out == first.out
    assert all(abs(number) < 1e9 for number in numbers_in(first.json()))
