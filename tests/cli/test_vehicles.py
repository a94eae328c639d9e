"""``movload vehicles``: the library, and one vehicle axle by axle."""

from __future__ import annotations

import csv
from typing import TYPE_CHECKING, Any

import pytest
from cli_run import CART, changed, movload, written
from numpy.testing import assert_allclose

from movload.files.library import vehicle_names

if TYPE_CHECKING:
    from pathlib import Path

ROW = ["name", "title", "kind", "source", "weight", "cases"]
CASE = [
    "title", "loads", "spacings", "gauges", "headings", "strips", "tail", "fills", "factor", "relieving", "convoy",
    "above", "continuous",
]  # fmt: skip
BY_RULE = {"h20_lane", "hs20_lane", "lane_type_legal"}  # what they weigh is said, not summed


def test_the_list_names_every_vehicle_and_how_far_to_trust_it() -> None:
    out = movload("vehicles").out
    for name in vehicle_names():
        assert any(line.startswith(f"{name} ") for line in out.splitlines())
    assert "from memory" in out
    assert "invented" in out
    assert "Weigh a vehicle before a rating rests on it." in out


def test_json_has_these_fields_in_si() -> None:
    listed = movload("vehicles", "--json").json()
    assert list(listed) == ["format", "units", "rows"]
    assert listed["format"] == "movload.vehicles/1"
    assert listed["units"] == {"force": "N", "length": "m"}
    assert [row["name"] for row in listed["rows"]] == vehicle_names()
    for row in listed["rows"]:
        assert list(row) == ROW
        assert all(list(case) == CASE for case in row["cases"])
        assert row["source"]
        if row["name"] not in BY_RULE:
            assert_allclose(row["weight"], max(map(weight_of, row["cases"])), rtol=1e-14)


def weight_of(case: dict[str, Any]) -> float:
    """Return what a case's axles and strips weigh [N]."""
    weight: float = sum(case["loads"]) + sum(strip["load"] * strip["length"] for strip in case["strips"])
    return weight


def test_csv_of_the_list_carries_units_and_the_numbers_of_the_json(tmp_path: Path) -> None:
    out = tmp_path / "out.csv"
    listed = movload("vehicles", "--json", "--csv", out).json()["rows"]
    with out.open(encoding="utf-8", newline="") as file:
        rows = list(csv.DictReader(file))
    assert list(rows[0]) == ["name", "title", "kind", "axles", "weight [kN]", "source"]
    for read, said in zip(rows, listed, strict=True):
        assert [read[name] for name in ("name", "title", "kind", "source")] == [said[name] for name in ROW[:4]]
        assert int(read["axles"]) == max(len(case["loads"]) for case in said["cases"])
        # rtol: one division and one multiplication by the unit
        assert_allclose(float(read["weight [kN]"]) * 1e3, said["weight"], rtol=1e-15)


def test_one_vehicle_axle_by_axle(tmp_path: Path) -> None:
    path, out = written(tmp_path, CART, "cart.toml"), tmp_path / "out.csv"
    done = movload("vehicles", path, "--csv", out)
    assert done.out.startswith("Alder hay cart (farm), 95.0 kN, 9.6 t (10.6 short tons)\nSource: invented\n")
    assert "45.00 kN (10.12 kip)" in done.out
    assert "2.70 m (8.86 ft)" in done.out
    assert out.read_text().splitlines() == [
        "axle,load [kN],after [m],gauge [m],after_least [m],after_greatest [m]",
        "1,20.0,,1.8,,", "2,45.0,2.7,1.9,2.7,2.7", "3,30.0,4.1,1.9,4.1,4.1",
    ]  # fmt: skip
    (row,) = movload("vehicles", path, "--json").json()["rows"]
    assert row["cases"] == [
        {
            "title": "Alder hay cart", "loads": [20e3, 45e3, 30e3], "spacings": [2.7, 4.1], "gauges": [1.8, 1.9, 1.9],
            "headings": [1, -1], "strips": [], "tail": None, "fills": [], "factor": 1.0, "relieving": 1.0,
            "convoy": None, "above": 0.0, "continuous": False,
        }
    ]  # fmt: skip


def test_a_range_of_spacings_is_told_whole(tmp_path: Path) -> None:
    """14 to 30 ft are 4.2672 to 9.144 m."""
    ranged = changed(CART, ("after = 4.1", 'after = ["14 ft", "30 ft"]'))
    path, out = written(tmp_path, ranged, "cart.toml"), tmp_path / "out.csv"
    done = movload("vehicles", path, "--csv", out)
    assert "4.27 to 9.14 m (14.00 to 30.00 ft)" in done.out
    _, _, fixed, last = csv.reader(out.read_text().splitlines())
    assert fixed[2] == "2.7"
    assert last[2] == ""
    assert_allclose([float(end) for end in last[4:]], [4.2672, 9.144], rtol=1e-15)
    (row,) = movload("vehicles", path, "--json").json()["rows"]
    assert_allclose(row["cases"][0]["spacings"][1], [4.2672, 9.144], rtol=1e-15)


@pytest.mark.parametrize("name", ["HS20", "hs 20", "hs-20", "Hs_20"])
def test_a_library_name_in_any_spelling(name: str) -> None:
    assert movload("vehicles", name).out == movload("vehicles", "hs20").out


def test_a_vehicle_without_source_and_gauges_says_so(tmp_path: Path) -> None:
    bare = changed(
        CART, ('source = "invented"\n', ""), (", gauge = 1.8", ""), (", gauge = 1.9", ""), (", gauge = 1.9", "")
    )
    out = movload("vehicles", written(tmp_path, bare, "cart.toml")).out
    assert "Source: not said" in out
    assert out.splitlines()[-1].endswith("-")


def test_units_and_mixed_units_weigh_the_same(tmp_path: Path) -> None:
    """9.5 t is 9500 x 9.80665 N whatever the file's own units."""
    mixed = changed(CART, ("load = 45", 'load = "4.5 t"'), ("after = 2.7", 'after = "8\'-10 1/2\\""'))
    (row,) = movload("vehicles", written(tmp_path, mixed, "cart.toml"), "--json").json()["rows"]
    assert_allclose(row["cases"][0]["loads"][1], 4500 * 9.80665, rtol=1e-14)
    assert_allclose(row["cases"][0]["spacings"][0], 106.5 * 0.0254, rtol=1e-14)


def test_how_the_pieces_go_together() -> None:
    """HL-93: the worse of truck and tandem, each with the lane; impact on axles only; two trucks where continuous."""
    out = " ".join(movload("vehicles", "hl93").out.split())
    assert "The worst of 3 cases counts." in out
    assert out.count("what relieves is left out") == 3
    assert out.count("Filling: 9.34 kN/m (0.64 kip/ft), wherever adverse, in its lane,") == 3
    assert out.count("no impact on it") == 3
    assert "4.27 to 9.14 m (14.00 to 30.00 ft)" in out
    two = out[out.index("Case two trucks and lane:") :]
    assert "all of it x 0.9; only for trusses over more than two bearings; up to 2 of it in a lane, 15.24 m" in two


def test_json_has_the_loads_that_are_no_axles() -> None:
    """Cooper E80's tail begins 104 + 5 ft behind the front axle; LM71's uniform load 0.8 m beyond its outer axles."""
    (row,) = movload("vehicles", "cooper_e80", "--json").json()["rows"]
    assert_allclose(row["cases"][0]["tail"]["start"], 109 * 0.3048, rtol=1e-14)
    (row,) = movload("vehicles", "lm71", "--json").json()["rows"]
    (fill,) = row["cases"][0]["fills"]
    assert (fill["load"], fill["where"], fill["clear"], fill["web_load"]) == (80e3, "outside", [0.8, 0.8], None)
    assert row["cases"][0]["relieving"] == 0.0
