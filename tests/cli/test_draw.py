"""``movload draw``: joints, members, bearings and panel points as text, JSON and CSV."""

from __future__ import annotations

import csv
import math
from typing import TYPE_CHECKING

from cli_run import BY_JOINTS, BY_LAYOUT, EXAMPLES, changed, movload, written
from numpy.testing import assert_allclose

if TYPE_CHECKING:
    from pathlib import Path

FIELDS = ["format", "title", "units", "redundancy", "joints", "supports", "panel_points", "missing", "rows"]
ROW = ["row", "role", "length", "area", "modulus", "density", "permitted_tension", "permitted_compression"]
SUPPORT = ["joint", "slides", "settlement", "movement", "normal_stiffness", "slide_stiffness"]
HEADS = [
    "row", "role", "length [m]", "area [mm2]", "modulus [kN/mm2]", "density [kg/m3]", "permitted_tension [kN]",
    "permitted_compression [kN]",
]  # fmt: skip


def test_text(tmp_path: Path) -> None:
    out = movload("draw", written(tmp_path, BY_JOINTS)).out
    assert out.startswith("Alder footpath\n6 joints, 9 members, statically determinate; 9.600 m from end to end\n")
    for line in ("Panel points: L0, L1, L2, L3", "Bearing L0: pinned", "Bearing L3: slides along the bridge"):
        assert line in out.splitlines()
    assert "Lengths in m, areas in mm2, moduli in kN/mm2, densities in kg/m3, forces in kN." in out
    assert "7850" in out
    assert "still" not in out.lower()


def test_json_has_these_fields_in_si(tmp_path: Path) -> None:
    drawn = movload("draw", written(tmp_path, BY_JOINTS), "--json").json()
    assert list(drawn) == FIELDS
    assert drawn["format"] == "movload.truss/1"
    assert drawn["units"] == {
        "length": "m", "area": "m2", "modulus": "Pa", "density": "kg/m3", "force": "N", "stiffness": "N/m",
        "slides": "degrees",
    }  # fmt: skip
    assert drawn["joints"]["U2"] == [6.4, 2.3]
    assert all(list(support) == SUPPORT for support in drawn["supports"])
    assert [list(support.values()) for support in drawn["supports"]] == [
        ["L0", None, 0.0, None, None, None], ["L3", 0.0, 0.0, None, None, None],
    ]  # fmt: skip
    assert drawn["panel_points"] == ["L0", "L1", "L2", "L3"]
    assert drawn["redundancy"] == 0
    assert drawn["missing"] == []
    assert all(list(row) == ROW for row in drawn["rows"])
    chord = drawn["rows"][0]
    assert chord["row"] == "U1-U2"
    # rtol: each is a product or a square root of a few typed numbers
    expected = [math.hypot(3.3, 0.1), 2000e-6, 200e9, 7850, 200e3, 150e3]
    assert_allclose([chord[name] for name in ROW[2:]], expected, rtol=1e-14)


def test_csv_carries_units_and_the_numbers_of_the_json(tmp_path: Path) -> None:
    path, out = written(tmp_path, BY_JOINTS), tmp_path / "out.csv"
    drawn = movload("draw", path, "--json", "--csv", out).json()
    with out.open(encoding="utf-8", newline="") as file:
        heads, *rows = csv.reader(file)
    assert heads == HEADS
    scale = dict(zip(ROW[2:], (1.0, 1e-6, 1e9, 1.0, 1e3, 1e3), strict=True))
    for row, said in zip(rows, drawn["rows"], strict=True):
        assert row[:2] == [said["row"], said["role"]]
        read = [float(text) * scale[name] for name, text in zip(ROW[2:], row[2:], strict=True)]
        # rtol: one division and one multiplication by the unit
        assert_allclose(read, [said[name] for name in ROW[2:]], rtol=1e-15)


def test_what_is_not_typed_is_empty(tmp_path: Path) -> None:
    path, out = written(tmp_path, changed(BY_LAYOUT, ("density = 7850\n", ""))), tmp_path / "out.csv"
    chord = movload("draw", path, "--json", "--csv", out).json()["rows"][0]
    assert (chord["density"], chord["permitted_tension"], chord["permitted_compression"]) == (None, None, 250e3)
    assert out.read_text().splitlines()[1].endswith(",,,250.0")
    row = next(line for line in movload("draw", path).out.splitlines() if line.startswith("U1-U2 "))
    assert row.split()[-3:] == ["-", "-", "250.0"]


def test_abutments_bearings_and_redundancy_are_said(tmp_path: Path) -> None:
    text = changed(
        BY_JOINTS,
        ("{ slides = 0 }", "{ slides = 12, settlement = '15 mm', movement = '-3 mm', normal_stiffness = 50 }"),
        ("truss_share = 0.6", "truss_share = 0.6\nright_abutment = 9.9"),
        ('"U1-L2"]', '"U1-L2", "L1-U2"]'),
    )
    path = written(tmp_path, text)
    out = movload("draw", path).out
    assert "2 redundant" in out  # a bar more, and an imposed movement holds
    assert "Panel points: L0, L1, L2, L3, abutment at 9.900" in out
    assert (
        "Bearing L3: slides along a bed at 12 degrees, settles 15 mm square to its bed, imposed movement of -3 mm "
        "along its bed, spring of 50 kN/mm square to its bed"
    ) in " ".join(out.split())
    drawn = movload("draw", path, "--json").json()
    assert drawn["redundancy"] == 2
    assert drawn["panel_points"][-1] == 9.9
    assert list(drawn["supports"][1].values()) == ["L3", 12.0, 0.015, -0.003, 50e6, None]


def test_every_example_is_drawn_as_text() -> None:
    for path in sorted(EXAMPLES.glob("*.toml")):
        done = movload("draw", path)
        assert (done.code, done.err) == (0, "")


def test_joints_and_layout_give_the_same_drawing(tmp_path: Path) -> None:
    """A layout written out joint by joint and bar by bar is the same truss, row for row."""
    laid = movload("draw", written(tmp_path, BY_LAYOUT), "--json").json()
    joints = "\n".join(f"{name} = {point}" for name, point in laid["joints"].items())
    groups = {row["role"] for row in laid["rows"]}
    text = BY_LAYOUT[: BY_LAYOUT.index("[layout]")] + f"[joints]\n{joints}\n\n" + BY_LAYOUT[BY_LAYOUT.index("[supp") :]
    for role in groups:
        bars = [row["row"] for row in laid["rows"] if row["role"] == role]
        head = f'[members."{role}"]' if " " in role else f"[members.{role}]"
        text = changed(text, (head, f"{head}\nbars = {bars}"))
    text = changed(text, ("truss_share = 0.6", f"truss_share = 0.6\npanel_points = {laid['panel_points']}"))
    again = movload("draw", written(tmp_path, text, "joints.toml"), "--json").json()
    assert again == laid
    rated = [movload("rate", tmp_path / name, "h5", "--json").json()["rows"] for name in ("joints.toml", "bridge.toml")]
    assert rated[0] == rated[1]
