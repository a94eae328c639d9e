"""A whole rating of a bridge file whose parts are sections and materials, by equations and by hand.

The small invented bridge of ``files.made``, of the Alder valley, with iron eyebars for its bottom chord: 26 and 48 ksi
(AASHTO, Manual for Bridge Evaluation, wrought iron of unknown strength, FROM MEMORY). 30 % of one eyebar's shank is
gone beside its head, in the left truss only.
"""

from __future__ import annotations

from typing import TYPE_CHECKING, Any, Final

import pytest
from cli.across import row_in
from cli_run import changed, movload, written
from files.made import MADE
from numpy.testing import assert_allclose

from movload import rate, read_bridge, read_vehicle
from movload.files.factor_sets import read_factor_set
from movload.review.hand import explained
from movload.statics.part import row_of
from movload.units import unit_factor

if TYPE_CHECKING:
    from pathlib import Path

    from movload.strength.strength import Strength

HAND: Final = 1e-12  # relative: the hand formulas carry all digits
KSI: Final = unit_factor("ksi", "stress")
LOSS: Final = '{ where = "start end", fraction = 0.3, part = "shank", truss = "left", bar = "L1-L2" }'
EYEBARS: Final = changed(
    MADE,
    ('shape = "threaded rod"\ndiameter = 32\nroot = 27',
     'shape = "eyebar"\nwidth = 100\nthickness = 25\nhead_width = 240\npin_hole = 90'),
    ('{ where = "middle", fraction = 0.2, truss = "left", bar = "L2-L1" }', LOSS),
    ("nominal = { tension = 330, compression = 75 }\n", ""),
)  # fmt: skip
SHANK: Final = 0.100 * 0.025  # m2; the head has (240 - 90) x 25 = 1.5 times as much beside its pin
METHODS: Final = {
    "lrfr": (0.855 * 0.95, 0.855 * 0.80), "load_factor": (1.0, 0.80), "allowable_stress": (0.55, 0.50),
    "en": (1.0, 0.9 / 1.25),
}  # fmt: skip
"""Of yield and of fracture, at the first level. LRFR: fair 0.95 x riveted 0.90 = 0.855. FROM MEMORY."""


def strength(path: Path, method: str, part: str, bar: str) -> Strength:
    """Return a bar's strength in tension at the first level, with its steps."""
    ratings = rate(read_bridge(path), [read_vehicle("h5")], read_factor_set(method))
    row = row_of(ratings.solved.effects, (part, bar))
    return explained(ratings, ratings.rating(0, row, 0, level=0)).strength


@pytest.mark.parametrize("method", METHODS)
def test_an_eyebar_lost_beside_its_head_yields(tmp_path: Path, method: str) -> None:
    """C = yield factor x 26 ksi x 0.7 x 2500 mm2; fracture, 48 ksi on what the shank has left at that end, is more."""
    path, (of_yield, of_fracture) = written(tmp_path, EYEBARS), METHODS[method]
    lost, whole = (strength(path, method, f"{side} truss", "L1-L2") for side in ("left", "right"))
    assert_allclose(lost.value, of_yield * 26 * KSI * 0.7 * SHANK, rtol=HAND)
    assert_allclose([lost.as_new, whole.value], of_yield * 26 * KSI * SHANK, rtol=HAND)
    assert "yield of the gross section" in lost.steps[-1].equation
    assert lost.value < of_fracture * 48 * KSI * 0.7 * SHANK
    (least,) = [step for step in lost.steps if step.symbol == "Ag"]
    assert "by its first joint" in least.equation
    assert_allclose(least.value, 0.7 * SHANK, rtol=HAND)


def test_a_slim_head_breaks_where_the_shank_is_whole(tmp_path: Path) -> None:
    """So yield is not what always comes first: a head of 150 mm has 60 x 25 mm2 beside its pin.

    0.80 x 48 x 1500 = 57 600 < 26 x 2500 = 65 000 (ksi mm2) in the right truss; in the left 26 x 1750 = 45 500 is less.
    """
    path = written(tmp_path, changed(EYEBARS, ("head_width = 240", "head_width = 150")))
    whole, lost = (strength(path, "load_factor", f"{side} truss", "L1-L2") for side in ("right", "left"))
    assert_allclose([whole.value, lost.value], [57.6e3 * KSI * 1e-6, 45.5e3 * KSI * 1e-6], rtol=HAND)
    assert "fracture of the net section" in whole.steps[-1].equation
    assert "yield of the gross section" in lost.steps[-1].equation


def table(path: Path, *words: str) -> Any:
    """Return the rating of a file as its JSON document."""
    done = movload("rate", path, "h5", "--json", *words)
    assert (done.code, done.err) == (0, "")
    return done.json()


def test_two_trusses_that_differ_stand_in_one_table(tmp_path: Path) -> None:
    """L1-L2 is there twice, RF = (C - 1.3 D)/(2.17 L) of each; so is L0-L1, with one strength for both."""
    read = table(written(tmp_path, EYEBARS), "--method", "load_factor")
    rows = {side: row_in_level(read, f"{side} truss", "L1-L2", "inventory") for side in ("left", "right")}
    for side, share in (("left", 0.7), ("right", 1.0)):
        row = rows[side]
        assert row["stands_for"] == f"{side} truss"
        assert_allclose(row["strength"], share * 26 * KSI * SHANK, rtol=HAND)
        assert_allclose(row["as_new"], 26 * KSI * SHANK, rtol=HAND)
        factor = (row["strength"] - 1.3 * row["permanent"]) / (2.17 * row["live"])
        assert_allclose(row["factor"], factor, rtol=1e-10)
    assert_allclose(rows["left"]["live"], rows["right"]["live"], rtol=1e-10)  # the roadway is alike to both sides
    assert rows["left"]["factor"] < 0.7 * rows["right"]["factor"]
    sound = [row_in_level(read, f"{side} truss", "L0-L1", "inventory")["strength"] for side in ("left", "right")]
    assert sound[0] == sound[1]


def row_in_level(read: Any, part: str, name: str, level: str) -> Any:
    """Return the only row of a part, in tension, at a level."""
    return row_in({"rows": [row for row in read["rows"] if row["level"] == level]}, part, name, "tension")


def test_trusses_alike_are_one_row(tmp_path: Path) -> None:
    """Without the loss nothing tells them apart, and nothing is less than as new."""
    read = table(written(tmp_path, changed(EYEBARS, (f"losses = [{LOSS}]\n", ""))), "--method", "load_factor")
    (row,) = [row for row in read["rows"] if (row["row"], row["level"]) == ("L1-L2", "inventory")]
    assert row["stands_for"] == "either truss"
    assert row["as_new"] == row["strength"]


@pytest.mark.parametrize(
    ("kind", "year", "fy", "fu"),
    [
        ("wrought iron", 1779, 26, 48), ("wrought iron", 1905, 26, 48), ("steel", 1904, 26, 52),
        ("steel", 1905, 30, 60), ("steel", 1936, 30, 60), ("steel", 1937, 33, 66), ("steel", 1963, 33, 66),
        ("steel", 1964, 36, 66),
    ],
)  # fmt: skip
def test_a_metal_by_its_year_reaches_the_strength(tmp_path: Path, kind: str, year: int, fy: float, fu: float) -> None:
    """Manual for Bridge Evaluation, FROM MEMORY: unknown metals by year built, ksi, on the shank left; and it is said.

    1936 and 1963, which two periods share, take the weaker one.
    """
    path = written(tmp_path, changed(EYEBARS, ('"wrought iron"\nbuilt = 1887', f'"{kind}"\nbuilt = {year}')))
    found = strength(path, "load_factor", "left truss", "L1-L2")
    steps = {step.symbol: step for step in found.steps}
    assert_allclose([steps["Fy"].value, steps["Fu"].value], [fy * KSI, fu * KSI], rtol=HAND)
    assert "from memory" in steps["Fy"].source
    assert_allclose(found.value, fy * KSI * 0.7 * SHANK, rtol=HAND)
    notes = [note for note in table(path, "--method", "load_factor")["notes"] if note["code"] == "material-assumed"]
    assert [f"{kind} of unknown grade, {year}: strength assumed" in note["text"] for note in notes] == [True]


def test_the_answer_warns_of_slender_bars(tmp_path: Path) -> None:
    """End posts are pushed at K l/r above 120, the web's two angles pulled and pushed at l/r above 140.

    Limits of AASHTO LRFD 6.9.3 and 6.8.4, FROM MEMORY. Eyebars, as slender as they are, are not named.
    """
    notes = table(written(tmp_path, EYEBARS), "--method", "load_factor")["notes"]
    said = {(note["code"], note["subject"]) for note in notes if note["code"].startswith("slender")}
    assert ("slender-compression", "L0-U1") in said
    assert ("slender-tension", "U1-L1, U2-L2, U1-L2") in said
    assert not any("L1-L2" in subject.split(", ") for _, subject in said)


def test_explained_on_the_command_line(tmp_path: Path) -> None:
    """Every equation with its number, value and source; as new beside as found."""
    path = written(tmp_path, EYEBARS)
    done = movload("rate", path, "h5", "--method", "lrfr", "--explain", "left truss L1-L2")
    words = " ".join(done.out.split())
    for said in (
        "phi_y Fy Ag (6.8.2.1-1)", "phi_u Fu An Rp U (6.8.2.1-2)", "max(phi_c phi_s, 0.85) 0.855", "2500 mm2",
        "1750 mm2", "70 % is left", "least of the above: yield of the gross section", "from memory",
    ):  # fmt: skip
        assert said in words, said
