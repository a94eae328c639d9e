"""What a tester met in sections, materials and losses: each was a traceback, the wrong place, or a silence once."""

from __future__ import annotations

from typing import TYPE_CHECKING

import pytest
from cli.across import assert_spoiled
from cli_run import EXAMPLES, KETTLE_FORD, assert_refused, changed, movload, written
from files.made import MADE

if TYPE_CHECKING:
    from pathlib import Path

WITHY_ISLAND = EXAMPLES / "withy_island.toml"
LARCH = 'durations = ["seven days"]\ntreated = false\n\n[materials.larch.factors]'
GLUED = 'durations = ["seven days"]\ntreated = false\n\n[materials."glued larch".factors]'

REFUSED = {
    "K of no bar": ("k_x = 1.0", "k_x = 1e-300", 'members."top chord".k_x: at least 0.1 is asked for, got 1e-300'),
    "millimetres for metres": (
        '"4.2 m"', '"4.2 mm"',
        'members."top chord".unbraced_y: at least 0.01 m is asked for, got 0.0042 m',
    ),
    "a beam's millimetres": (
        "unbraced = 1.2", 'unbraced = "1.2 mm"',
        "floor.stringers.unbraced: at least 0.01 m is asked for, got 0.0012 m",
    ),
    "ksi for MPa": (
        'fy = "230 MPa"\nfu = "380 MPa"', 'fy = "230 ksi"\nfu = "380 ksi"',
        "materials.steel.fy: a stress ", "to 1.5e+09 Pa is asked for, got 1.58579e+09 Pa",
    ),
    "timber's ksi for MPa": (
        'bending = "8.5 MPa"', 'bending = "8.5 ksi"',
        "materials.oak.stresses.bending: a stress ", "to 4e+07 Pa is asked for, got 5.86054e+07 Pa",
    ),
    "a metal's modulus": (
        "modulus = 200", "modulus = 0.2",
        "materials.steel.modulus: of steel a modulus ", "of 5e+10 to 2.5e+11 Pa is asked for, got 2e+08 Pa",
    ),
    "a timber's modulus": (
        "modulus = 9\n", "modulus = 200\n",
        "materials.oak.modulus: of timber a modulus ", "of 1e+09 to 3e+10 Pa is asked for, got 2e+11 Pa",
    ),
    "a factor misspelled": (
        "{ CM = 0.85, Ct", "{ Cm = 0.85, Ct",
        'materials.oak.factors.bending.Cm: "Cm" is not one of CM, Ct, CF, Cfu, Ci, Cr (nearest: "CM")',
    ),
    "a factor in per cent": (
        "{ CM = 0.85, Ct", "{ CM = 85, Ct",
        "materials.oak.factors.bending.CM: no factor is above 2, got 85",
    ),
    "steel said to be timber": (
        "lever = 120\n", "lever = 120\ntimber = true\n",
        "floor.stringers.timber: its material is steel: impact is left out on timber alone",
    ),
    "a part stiffer than the whole": (
        "radius = 11", "radius = 110",
        "members.web.joined.radius: the least radius of one part is at most that of the whole section, ", "got 0.11 m",
    ),
    "joined the other way": (
        'axis = "y", spacing = 500', 'axis = "x", spacing = 500',
        'members.web.joined.axis: its parts stand apart across "y" and not across "x"',
    ),
    "laced the other way": (
        'axis = "y", spacing = 300', 'axis = "x", spacing = 300',
        'members."top chord".joined.axis: its parts stand apart across "y" and not across "x"',
    ),
    "lacing of nothing": (
        "lacing_area = 400", "lacing_area = 0",
        'members."top chord".joined.lacing_area: must be above 0, got 0 m2',
    ),
}  # fmt: skip


@pytest.mark.parametrize("what", REFUSED)
def test_what_was_taken_in_silence_is_refused_at_its_place(tmp_path: Path, what: str) -> None:
    old, new, *parts = REFUSED[what]
    assert_spoiled(tmp_path, changed(MADE, (old, new)), *parts)


@pytest.mark.parametrize(
    ("old", "new", "said"),
    [
        ('condition = "fair"', 'condition = "fiar"', '(nearest: "fair")'),
        ('system = "riveted members"', 'system = "rivetted members"', '(nearest: "riveted members")'),
    ],
)
def test_a_word_misspelled_is_no_case_that_a_rule_leaves_out(tmp_path: Path, old: str, new: str, said: str) -> None:
    """It was a note, the bars not rated, and a rating of the rest."""
    path = written(tmp_path, changed(KETTLE_FORD.read_text(encoding="utf-8"), (old, new)))
    assert_refused(movload("rate", path, "h5", "--method", "lrfr"), 'members."top chord".', said)


@pytest.mark.parametrize("loss", ['part = "web", fraction = 1', "amount = 14.4"])
def test_a_beam_whose_web_is_gone_is_not_rated(tmp_path: Path, loss: str) -> None:
    """It was a division by zero."""
    text = changed(KETTLE_FORD.read_text(encoding="utf-8"), ("lever = 200", f"losses = [{{ {loss} }}]\nlever = 200"))
    done = movload("rate", written(tmp_path, text), "h5", "--method", "lrfr", "--gate")
    assert done.code == 3, done.err
    assert "not rated in moment: floor.floorbeams: floorbeam: nothing is left of its web: not covered" in " ".join(
        done.out.split()
    )


@pytest.mark.parametrize(
    ("old", "new", "place"),
    [
        (LARCH, LARCH.replace('durations = ["seven days"]\n', ""), "materials.larch.durations: NDS 2018 2.3.2 needs"),
        (LARCH, LARCH.replace("treated = false\n", ""), "materials.larch.treated: NDS 2018 2.3.2 needs whether"),
        (GLUED, GLUED.replace("treated = false\n", ""), 'materials."glued larch".treated: NDS 2018 2.3.2 needs'),
        ("CM = 0.85, ", "", "materials.larch.factors.bending.CM: NDS 2018 Table 4.3.1 asks for it"),
        ('bending = "8.3 MPa", ', "", "materials.larch.stresses.bending: NDS 2018 needs this reference value"),
        ('unbraced = "held"\npermits = { moment = 1.47', "permits = { moment = 1.47", "unbraced: bending needs"),
    ],
)  # fmt: skip
def test_what_the_timber_rule_asks_for_is_asked_where_it_is_typed(
    tmp_path: Path, old: str, new: str, place: str
) -> None:  # fmt: skip
    """They were asked for at the part, where the file takes none of them."""
    path = written(tmp_path, changed(WITHY_ISLAND.read_text(encoding="utf-8"), (old, new)))
    done = movload("rate", path, "h5", "--method", "allowable_stress")
    assert_refused(done, place, place=f"h5 on {path}")
    assert "floor.planks: materials" not in done.err
