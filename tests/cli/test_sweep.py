"""``movload sweep``: whole axles on one truss, both headings, as text, JSON and CSV."""

from __future__ import annotations

import csv
from typing import TYPE_CHECKING

import pytest
from cli_run import BY_JOINTS, CART, changed, movload, written
from numpy.testing import assert_allclose

if TYPE_CHECKING:
    from pathlib import Path

FIELDS = ["format", "title", "units", "rows"]
ROW = [
    "vehicle", "part", "row", "kind", "unit",
    "highest", "highest_position", "highest_heading", "highest_axle", "highest_station_name",
    "lowest", "lowest_position", "lowest_heading", "lowest_axle", "lowest_station_name",
    "highest_placement", "lowest_placement",
]  # fmt: skip
PLACEMENT = ["x", "load", "share", "impact", "factor", "z", "vehicle", "held"]
HEADS = [
    "vehicle", "part", "row", "kind", "unit",
    "highest", "highest_position [m]", "highest_heading", "highest_axle", "highest_station_name",
    "lowest", "lowest_position [m]", "lowest_heading", "lowest_axle", "lowest_station_name",
]  # fmt: skip


@pytest.fixture
def asked(tmp_path: Path) -> list[object]:
    """Return the command's words."""
    return ["sweep", written(tmp_path, BY_JOINTS), written(tmp_path, CART, "cart.toml")]


def test_json_has_these_fields_of_every_row(asked: list[object]) -> None:
    swept = movload(*asked, "h5", "--json").json()
    assert list(swept) == FIELDS
    assert swept["format"] == "movload.peaks/1"
    assert swept["units"] == {"force": "N", "length": "m", "deflection": "m"}
    assert all(list(row) == ROW for row in swept["rows"])
    assert [row["vehicle"] for row in swept["rows"]] == ["Alder hay cart"] * 16 + ["H5 maintenance vehicle"] * 16
    placements = [row[f"{side}_placement"] for row in swept["rows"] for side in ("highest", "lowest")]
    assert all(placement is None or list(placement) == PLACEMENT for placement in placements)
    assert {number for placement in placements if placement for number in placement["share"]} == {1.0}
    assert {number for placement in placements if placement for number in placement["impact"]} == {0.0}
    assert {number for placement in placements if placement for number in placement["factor"]} == {1.0}
    assert {number for placement in placements if placement for number in placement["z"]} == {None}
    assert {number for placement in placements if placement for number in placement["vehicle"]} == {1}


def test_a_hanger_takes_the_axle_over_it_and_what_its_panels_bring(asked: list[object]) -> None:
    """U1-L1 under the cart: 45 kN on L1, and of the 20 kN 2.7 m away in the 3.3 m panel 0.6 / 3.3, nothing of 30 kN."""
    (row,) = movload(*asked, "--row", "L1-U1", "--json").json()["rows"]
    assert row["row"] == "U1-L1"
    assert_allclose(row["highest"], 45e3 + 20e3 * 0.6 / 3.3, rtol=1e-13)
    assert (row["highest_heading"], row["highest_axle"], row["highest_station_name"]) == (1, 2, "L1")
    assert row["unit"] == "N"
    assert_allclose(row["highest_placement"]["x"], [5.8, 3.1, -1.0], rtol=1e-14)
    assert row["highest_placement"]["load"] == [20e3, 45e3, 30e3]
    assert_allclose(row["highest_position"], 5.8, rtol=1e-14)


def test_a_row_that_feels_nothing_has_nulls(asked: list[object]) -> None:
    (row,) = movload(*asked, "--row", "U1-L1", "--json").json()["rows"]
    parts = ("", "_position", "_heading", "_axle", "_station_name", "_placement")
    assert [row[f"lowest{part}"] for part in parts] == [0, None, 0, None, None, None]


def test_text_has_one_table_a_vehicle(asked: list[object]) -> None:
    out = movload(*asked, "h5", "--row", "U1-U2", "--row", "L1 down").out
    assert out.startswith("Alder footpath\n")
    for title in ("Alder hay cart", "H5 maintenance vehicle"):
        assert f"{title}: whole axles on one truss, no share, no impact\n" in out
    assert "-54.7 C" in out
    assert "axle 2 on L2" in out
    assert "off the bridge" in out
    assert "L0-L1" not in out


def test_csv_carries_units_and_the_numbers_of_the_json(asked: list[object], tmp_path: Path) -> None:
    out = tmp_path / "out.csv"
    said = movload(*asked, "--json", "--csv", out).json()["rows"]
    with out.open(encoding="utf-8", newline="") as file:
        heads, *rows = csv.reader(file)
    assert heads == HEADS
    for texts, row in zip(rows, said, strict=True):
        read = dict(zip(HEADS, texts, strict=True))
        assert read["unit"] == ("mm" if row["kind"] == "down" else "kN")
        assert row["unit"] == ("m" if row["kind"] == "down" else "N")
        for side in ("highest", "lowest"):
            # rtol: one division and one multiplication by the unit
            scale = 1e-3 if row["kind"] == "down" else 1e3
            assert_allclose(float(read[side]) * scale, row[side], rtol=1e-15)
            position = row[f"{side}_position"]
            assert read[f"{side}_position [m]"] == ("" if position is None else str(position))
            assert read[f"{side}_heading"] == str(row[f"{side}_heading"])
            assert read[f"{side}_station_name"] == (row[f"{side}_station_name"] or "")


def test_one_heading_only_is_never_worse_than_both(asked: list[object], tmp_path: Path) -> None:
    both = movload(*asked, "--json").json()["rows"]
    one_way = written(tmp_path, changed(CART, ("kind =", 'headings = ["-x"]\nkind =')), "one_way.toml")
    one = movload(*asked[:2], one_way, "--json").json()["rows"]
    assert all(a["highest"] >= b["highest"] and a["lowest"] <= b["lowest"] for a, b in zip(both, one, strict=True))
    assert {row["highest_heading"] for row in one} == {0, -1}
    assert any(a["highest"] > b["highest"] for a, b in zip(both, one, strict=True))


def test_a_range_that_is_one_number_is_swept(asked: list[object], tmp_path: Path) -> None:
    same = written(tmp_path, changed(CART, ("after = 4.1", "after = [4.1, 4.1]")), "same.toml")
    assert movload(*asked[:2], same, "--json").out == movload(*asked, "--json").out
