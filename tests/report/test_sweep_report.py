"""Peaks of a sweep: table, CSV and JSON tell the same numbers, each in its units."""

from __future__ import annotations

import csv
import io
import json
import re
from typing import Any

import numpy as np
import pytest
from numpy.testing import assert_allclose
from rating.bridges import CART, brook

from movload import Peaks, Vehicle, influence_lines, sweep
from movload.peaks.placement import Placement
from movload.report.lines_report import station_names
from movload.report.sweep_report import (
    COLUMNS,
    Swept,
    placement_json,
    sweep_csv,
    sweep_json,
    sweep_tables,
    swept_rows,
)
from movload.report.table import rendered
from movload.units import UnitSystem

POINTS = ("L0", "L1", "L2", "L3", "L4")
US = UnitSystem("ft", "kip", "in")
KIP = 4448.2216152605  # N, exact (NIST SP 811, B.8, from memory)
LORRY = Vehicle("lorry", np.array([60e3, 90e3]), [3.3])


@pytest.fixture(scope="module")
def peaks() -> list[Peaks]:
    """Return the peaks of the brook bridge under two vehicles."""
    found = sweep(influence_lines(brook().truss, POINTS), [CART, LORRY])
    assert isinstance(found, list)
    return found


def rows_named(peaks: list[Peaks], *names: str) -> list[Swept]:
    """Return the report's rows of some effects."""
    effects = [effect.name for effect in peaks[0].effects]
    return swept_rows(peaks, station_names(POINTS), [effects.index(name) for name in names])


def table(peaks: list[Peaks], rows: list[Swept], units: UnitSystem) -> list[str]:
    """Return the tables as a wide terminal shows them."""
    return rendered(sweep_tables(peaks, rows, units), width=200, colour=False).splitlines()


def test_rows_go_vehicle_by_vehicle_in_the_order_asked(peaks: list[Peaks]) -> None:
    rows = rows_named(peaks, "U1-L2", "L2 down")
    assert [(row.vehicle, row.peaks.effect.name) for row in rows] == [
        ("cart", "U1-L2"), ("cart", "L2 down"), ("lorry", "U1-L2"), ("lorry", "L2 down"),
    ]  # fmt: skip


def test_json_is_si_to_the_last_bit_with_every_placement(peaks: list[Peaks]) -> None:
    rows = rows_named(peaks, "U1-L2", "L0-L1", "L2 down")
    read: dict[str, Any] = json.loads(sweep_json("Brook bridge", rows))
    assert list(read) == ["format", "title", "units", "rows"]
    assert (read["format"], read["title"]) == ("movload.peaks/1", "Brook bridge")
    assert read["units"] == {"force": "N", "length": "m", "deflection": "m"}
    assert list(read["rows"][0]) == [
        "vehicle", "part", "row", "kind", "unit", "highest", "highest_position", "highest_heading", "highest_axle",
        "highest_station_name", "lowest", "lowest_position", "lowest_heading", "lowest_axle", "lowest_station_name",
        "highest_placement", "lowest_placement",
    ]  # fmt: skip
    assert [said["unit"] for said in read["rows"][:3]] == ["N", "N", "m"]
    for said, row in zip(read["rows"], rows, strict=True):
        for extreme in ("highest", "lowest"):
            peak = getattr(row.peaks, extreme)
            assert said[extreme] == peak.value
            assert said[f"{extreme}_heading"] == peak.heading
            if peak.heading:
                assert said[f"{extreme}_axle"] == peak.axle + 1
                assert said[f"{extreme}_station_name"] == POINTS[peak.station]
                assert said[f"{extreme}_position"] == peak.position
                assert said[f"{extreme}_placement"]["x"] == peak.placement.x.tolist()
                assert said[f"{extreme}_placement"]["share"] == [1.0, 1.0]
            else:
                assert [said[f"{extreme}_{key}"] for key in ("position", "axle", "station_name", "placement")] == [
                    None
                ] * 4
    assert read["rows"][1]["lowest"] == 0.0  # a tie is never pushed


def test_csv_has_one_unit_a_line_because_forces_and_deflections_share_a_column(peaks: list[Peaks]) -> None:
    rows = rows_named(peaks, "U1-L2", "L0 y", "L2 down")
    lines = list(csv.DictReader(io.StringIO(sweep_csv(rows, US))))
    heads = [re.sub(r" \[ft\]$", "", head) for head in lines[0]]
    names = [column.name for column in COLUMNS]
    assert heads == [*names[:4], "unit", *names[4:]]
    assert [head for head in lines[0] if "[" in head] == ["highest_position [ft]", "lowest_position [ft]"]
    assert [line["unit"] for line in lines[:3]] == ["kip", "kip", "in"]
    for line, row in zip(lines, rows, strict=True):
        unit = {"kip": KIP, "in": 0.0254}[line["unit"]]
        assert_allclose(float(line["highest"]) * unit, row.peaks.highest.value, rtol=1e-15)
        assert_allclose(float(line["lowest"]) * unit, row.peaks.lowest.value, rtol=1e-15)


def test_the_table_has_letters_places_and_the_axle_on_its_panel_point(peaks: list[Peaks]) -> None:
    """Chord L0-L1 under the lorry by hand: 90 kN on L1, 60 kN 3.3 m toward L4, or the other way round.

    M at L1: (90 x (16 - 4.1) + 60 x (16 - 7.4)) x 4.1 / 16 = 406.67 kNm, / 3.2 = 127.1 kN.
    """
    lines = table(peaks, rows_named(peaks, "L0-L1", "L0 y", "L2 down"), UnitSystem())
    assert lines[0] == "cart: whole axles on one truss, no share, no impact"
    head, _, tie, reaction, down = lines[10:15]
    assert lines[8] == "lorry: whole axles on one truss, no share, no impact"
    assert re.split(r"\s{2,}", head.strip()) == ["row", "highest", "front axle", "with", "lowest", "front axle", "with"]
    assert re.split(r"\s{2,}", tie) == ["L0-L1", "127.1 T", "7.40 m →", "axle 2 on L1", "0", "off the bridge"]
    assert re.split(r"\s{2,}", reaction)[1] == "137.6"  # 90 + 60 x (16 - 3.3) / 16, no letter
    assert re.split(r"\s{2,}", down)[0] == "L2 down"
    assert lines[-1] == "Forces and reactions [kN], T tension, C compression; deflections [mm], + down."


def test_the_table_in_us_units(peaks: list[Peaks]) -> None:
    lines = table(peaks, rows_named(peaks, "L0-L1"), US)
    assert re.split(r"\s{2,}", lines[4])[1:3] == [f"{peaks[0]['L0-L1'].highest.value / KIP:.1f} T", "20.34 ft →"]
    assert lines[-1] == "Forces and reactions [kip], T tension, C compression; deflections [in], + down."


def test_table_and_csv_and_json_have_the_same_rows(peaks: list[Peaks]) -> None:
    rows = rows_named(peaks, *(effect.name for effect in peaks[0].effects))
    read = json.loads(sweep_json("Brook bridge", rows))["rows"]
    sheet = list(csv.DictReader(io.StringIO(sweep_csv(rows, UnitSystem()))))
    keys = [(row.vehicle, row.peaks.effect.name) for row in rows]
    assert [(one["vehicle"], one["row"]) for one in read] == [(one["vehicle"], one["row"]) for one in sheet] == keys
    shown = [line.split("  ")[0] for line in table(peaks, rows, UnitSystem())]
    assert [name for name in shown if name in {name for _, name in keys}] == [name for _, name in keys]


def test_a_vehicle_off_the_bridge_has_no_placement() -> None:
    assert placement_json(Placement.off()) is None
    columns = [np.array([one]) for one in (4.0, 9e3, 0.5, 0.3, 1.2, 0.4)]
    said = placement_json(Placement(*columns, np.zeros(1, dtype=np.intp), np.zeros(1, dtype=np.bool_)))
    assert said is not None
    assert list(said) == ["x", "load", "share", "impact", "factor", "z", "vehicle", "held"]
