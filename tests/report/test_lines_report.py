"""Influence lines as tables, CSV and JSON: the ordinates, and the units they are in."""

from __future__ import annotations

import csv
import io
import json
import re
from typing import TYPE_CHECKING

import numpy as np
import pytest
from numpy.testing import assert_allclose, assert_array_equal
from rating.bridges import brook_truss

from movload import influence_lines
from movload.report.lines_report import lines_csv, lines_json, lines_tables, ordinate_factor, station_names
from movload.report.table import rendered
from movload.statics.part import Effect
from movload.units import UnitSystem

if TYPE_CHECKING:
    from movload.statics.influence import InfluenceLine

POINTS = ("L0", "L1", "L2", "L3", "L4")
US = UnitSystem("ft", "kip", "in")
KIP = 4448.2216152605  # N, exact (NIST SP 811, B.8, from memory)


def some(*names: str) -> list[InfluenceLine]:
    """Return lines of the brook truss."""
    lines = influence_lines(brook_truss(), POINTS)
    return [lines[name] for name in names]


def text(lines: list[InfluenceLine], units: UnitSystem) -> list[str]:
    """Return the tables as a wide terminal shows them."""
    return rendered(lines_tables("Brook bridge", lines, POINTS, units), width=200, colour=False).splitlines()


def test_an_abutment_is_called_so() -> None:
    assert station_names((-1.5, "L1", "L2", 9.0)) == ("abutment", "L1", "L2", "abutment")


@pytest.mark.parametrize(
    ("units", "factor", "unit"),
    [
        (UnitSystem(), 1e3 / 1e-3, "mm/kN"),
        (US, KIP / 0.0254, "in/kip"),
        (UnitSystem("m", "N", "m"), 1.0, "m/N"),
    ],
)
def test_a_deflection_per_force_is_in_the_files_units(units: UnitSystem, factor: float, unit: str) -> None:
    scale, said = ordinate_factor(Effect("truss", "L2 down", "down", "m"), units)
    assert_allclose(scale, factor, rtol=1e-14)
    assert said == unit
    assert ordinate_factor(Effect("truss", "U1-L2", "axial", "N"), units) == (1.0, "-")


def test_the_table_shows_each_station_with_its_name_and_signed_ordinates() -> None:
    """Chord L0-L1 by hand: M / 3.2 with M at L1 under a unit load there 4.1 x 11.9 / 16 = 3.0494: 0.9529."""
    lines = text(some("L0-L1", "U1-U2", "L2 down"), UnitSystem())
    assert lines[0] == "Brook bridge: influence lines, effect per unit downward load"
    assert lines[2].split() == ["L0-L1", "U1-U2", "L2", "down"]
    assert lines[3].split() == ["x", "[m]", "at", "[-]", "[-]", "[mm/kN]"]
    body = [line.split() for line in lines[5:10]]
    assert [cells[:2] for cells in body] == [
        ["0.000", "L0"], ["4.100", "L1"], ["7.800", "L2"], ["12.100", "L3"], ["16.000", "L4"],
    ]  # fmt: skip
    assert body[0][2:] == ["0", "0", "0"]
    assert body[1][2] == "+0.9529"
    assert all(cells[3].startswith("-") for cells in body[1:4])
    assert all(cells[4].startswith("+") for cells in body[1:4])
    assert "Member forces: + tension." in lines[-1]


def test_many_lines_are_told_a_few_at_a_time_and_none_is_lost() -> None:
    lines = influence_lines(brook_truss(), POINTS)
    names = [effect.name for effect in lines.effects if effect.kind == "axial"]
    shown = "\n".join(text(some(*names), UnitSystem()))
    assert shown.count("x [m]") == -(-len(names) // 7)
    for name in names:
        assert len(re.findall(rf"(?<!\S){name}(?!\S)", shown)) == 1


def test_the_table_in_us_units() -> None:
    lines = text(some("L0-L1", "L2 down"), US)
    assert lines[3].split() == ["x", "[ft]", "at", "[-]", "[in/kip]"]
    assert lines[6].split()[:3] == ["13.451", "L1", "+0.9529"]  # 4.1 m; force per force has no unit


def test_csv_is_unrounded_with_each_lines_unit() -> None:
    chosen = some("U1-L2", "L2 down")
    head, force, down = csv.reader(io.StringIO(lines_csv(chosen, UnitSystem())))
    assert head == ["part", "row", "kind", "unit", "x = 0 m", "x = 4.1 m", "x = 7.8 m", "x = 12.1 m", "x = 16 m"]
    assert force[:4] == ["truss", "U1-L2", "axial", "-"]
    assert_array_equal(np.array(force[4:], dtype=float), chosen[0].ordinates)
    assert down[:4] == ["truss", "L2 down", "down", "mm/kN"]
    assert_allclose(np.array(down[4:], dtype=float) * 1e-6, chosen[1].ordinates, rtol=1e-15)


def test_json_is_si_to_the_last_bit() -> None:
    chosen = some("U1-L2", "L0 y", "L2 down")
    read = json.loads(lines_json("Brook bridge", chosen, POINTS))
    assert list(read) == ["format", "title", "units", "stations", "rows"]
    assert read["format"] == "movload.influence/1"
    assert read["stations"] == [
        {"x": float(x), "name": name} for x, name in zip(chosen[0].stations, POINTS, strict=True)
    ]  # fmt: skip
    assert [(row["row"], row["kind"], row["unit"]) for row in read["rows"]] == [
        ("U1-L2", "axial", "N/N"), ("L0 y", "reaction", "N/N"), ("L2 down", "down", "m/N"),
    ]  # fmt: skip
    for row, line in zip(read["rows"], chosen, strict=True):
        assert row["ordinates"] == line.ordinates.tolist()


def test_no_lines_at_all() -> None:
    assert lines_csv([], UnitSystem()) == "part,row,kind,unit\n"
    assert json.loads(lines_json("Brook bridge", [], ()))["rows"] == []
    assert len(lines_tables("Brook bridge", [], (), UnitSystem())) == 3
