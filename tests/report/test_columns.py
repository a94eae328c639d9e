"""One list of columns feeds table, CSV and JSON: the same names, each in its own units and its own nothing."""

from __future__ import annotations

import csv
import io
import json
import math
from dataclasses import dataclass

import numpy as np
import pytest

from movload.report.columns import Column, csv_text, json_rows, json_text, jsonable
from movload.report.table import grid, rendered, table_of
from movload.units import UnitSystem


@dataclass(frozen=True)
class Bar:
    """One row."""

    name: str
    force: float
    shift: float | None
    kind: str = "axial"


COLUMNS: list[Column[Bar]] = [
    Column("row", "bar", lambda bar: bar.name),
    Column(
        "force", "force", lambda bar: bar.force, "force", right=True,
        text=lambda bar, units: f"{units.shown(bar.force, 'force'):.1f}",
    ),
    Column("shift", "shift", lambda bar: bar.shift, lambda bar: "section" if bar.kind == "down" else "length"),
    Column("share", "share", lambda _: 0.5, "fraction"),
]  # fmt: skip
BARS = [Bar("U1-L2", 212.4e3, 0.1), Bar("L0, 'end' \"post\"", -1 / 3, None, "down"), Bar("→", math.inf, 0.0254, "down")]
US = UnitSystem("ft", "kip", "in")


def test_csv_is_unrounded_in_the_files_units_with_the_unit_in_the_head() -> None:
    text = csv_text(COLUMNS, BARS, UnitSystem())
    head, *lines = csv.reader(io.StringIO(text))
    assert head == ["row", "force [kN]", "shift", "share"]
    assert lines == [
        ["U1-L2", "212.4", "0.1", "0.5"],
        ["L0, 'end' \"post\"", repr(-1 / 3 / 1e3), "", "0.5"],
        ["→", "inf", "25.4", "0.5"],
    ]  # fmt: skip
    assert text.endswith("\n")
    assert "\r" not in text


def test_csv_follows_the_units_of_the_file() -> None:
    head, first, *_, last = csv.reader(io.StringIO(csv_text(COLUMNS, BARS, US)))
    assert head[1] == "force [kip]"
    assert float(first[1]) == 212.4e3 / 4448.2216152605
    assert float(last[2]) == pytest.approx(1.0, rel=1e-15)


def test_csv_of_no_rows_is_its_head() -> None:
    assert csv_text(COLUMNS, [], UnitSystem()) == "row,force [kN],shift,share\n"


@pytest.mark.parametrize("nothing", [None, math.nan, float(np.float64("nan"))])
def test_nothing_is_an_empty_cell(nothing: float | None) -> None:
    column: Column[float | None] = Column("x", "x", lambda value: value, "length")
    assert column.number(nothing, UnitSystem()) == ""
    assert csv_text([column], [nothing], UnitSystem()).splitlines() == ["x [m]", '""']


def test_a_table_says_nothing_for_nothing() -> None:
    column: Column[Bar] = Column("shift", "shift", lambda bar: bar.shift)
    assert [column.shown(bar, UnitSystem()) for bar in BARS] == ["0.1", "", "0.0254"]


def test_json_is_si_and_unrounded() -> None:
    assert json_rows(COLUMNS, BARS) == [
        {"row": "U1-L2", "force": 212.4e3, "shift": 0.1, "share": 0.5},
        {"row": "L0, 'end' \"post\"", "force": -1 / 3, "shift": None, "share": 0.5},
        {"row": "→", "force": None, "shift": 0.0254, "share": 0.5},
    ]


@pytest.mark.parametrize(
    ("value", "expected"),
    [
        (math.nan, None),
        (-math.inf, None),
        (np.float64(1.5), 1.5),
        (np.float64("inf"), None),
        (np.int64(3), 3),
        (np.array([1.0, math.nan]), [1.0, None]),
        (np.array([[1, 2], [3, 4]]), [[1, 2], [3, 4]]),
        (("a", (1.0, math.inf)), ["a", [1.0, None]]),
        ({"x": np.array([2.0]), "y": {"z": math.nan}}, {"x": [2.0], "y": {"z": None}}),
        (True, True),
        (None, None),
        ("→", "→"),
    ],
)
def test_what_json_cannot_hold_becomes_null_and_arrays_become_lists(value: object, expected: object) -> None:
    assert jsonable(value) == expected
    assert json.loads(json_text({"value": value})) == {"value": expected}


def test_json_text_keeps_the_order_of_keys_and_the_letters() -> None:
    text = json_text({"b": 1, "a": "Brücke →"})
    assert text == '{\n "b": 1,\n "a": "Brücke →"\n}\n'


def test_numbers_survive_json_to_the_last_bit() -> None:
    for value in (1 / 3, math.pi * 1e5, 5e-324, 0.1 + 0.2):
        assert json.loads(json_text({"x": value}))["x"] == value


def test_the_same_rows_in_table_csv_and_json() -> None:
    table = rendered([table_of(COLUMNS, BARS, UnitSystem())], width=90, colour=False)
    assert table.splitlines()[0].split() == [column.title for column in COLUMNS]
    for bar, row in zip(BARS, json_rows(COLUMNS, BARS), strict=True):
        assert bar.name in table
        assert list(row) == [column.name for column in COLUMNS]


def test_numbers_stand_on_the_right() -> None:
    lines = rendered([grid(["name", "value"], [["a", "1.5"], ["long", "123.5"]], right=[False, True])],
                     width=60, colour=False).splitlines()  # fmt: skip
    ends = {len(line) for line in (lines[0], *lines[2:4])}
    assert len(ends) == 1
    assert lines[2].startswith("a ")


def test_text_in_cells_is_text_and_nothing_else() -> None:
    """Brackets are no markup and numbers get no colour; without colour there is no escape sequence."""
    parts = ["[bold]title[/bold] 12", grid(["[x]"], [["[red]1[/red]"]], right=[False])]
    plain = rendered(parts, width=60, colour=False)
    assert "[bold]title[/bold] 12" in plain
    assert "[red]1[/red]" in plain
    assert "\x1b" not in plain
    assert "\x1b[31m" not in rendered(parts, width=60, colour=True)


def test_no_line_ends_in_spaces_and_none_is_too_wide() -> None:
    rows = [["U1-L2 " * 8, "x" * 70]]
    lines = rendered([grid(["a", "b"], rows, right=[False, False])], width=60, colour=False).splitlines()
    assert all(line == line.rstrip() and len(line) <= 60 for line in lines)
    assert "".join(line.replace(" ", "") for line in lines).count("x") == 70
