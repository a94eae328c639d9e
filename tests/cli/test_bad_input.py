"""A spoiled bridge file: one line names file, place, rule, value and the nearest name, and nothing is written."""

from __future__ import annotations

from typing import TYPE_CHECKING

import pytest
from cli_run import BY_JOINTS, CART, assert_refused, changed, movload, names_in, without, written

if TYPE_CHECKING:
    from pathlib import Path

CHORD = 'members."top chord"'
SOFT = "too little beside"

NAMES = [
    ("joint in bars", '"U1-U2"]', '"U1-U9"]', (f'{CHORD}.bars[0]: joint "U9" is not defined', 'nearest: "U2"')),
    ("panel point", '["L0", "L1"', '["L0", "L9"', ('deck.panel_points[1]: joint "L9" is not defined', 'nearest: "L')),
    ("support", "L3 = { slides", "L33 = { slides", ('support L33: joint "L33" is not defined (nearest: "L3")',)),
    ("key", "truss_share = 0.6", "trus_share = 0.6", ('deck: key "trus_share" is not known (nearest: "truss_share")',)),
    ("table", "[deck]", "[dekc]", ('key "dekc" is not known (nearest: "deck")',)),
    ("units' key", "length =", "lenght =", ('units: key "lenght" is not known (nearest: "length")',)),
    ("group's key", "modulus = 200", "modulos = 200", (f'{CHORD}: key "modulos" is not known (nearest: "modulus")',)),
    (
        "permit",
        "tension = 200",
        "tensoin = 200",
        (f'{CHORD}.permits: key "tensoin" is not known (nearest: "tension")',),
    ),
    ("unit", "[3.1, 2.2]", '["3.1 mtr", 2.2]', ('joints.U1[0]: "3.1 mtr": unit "mtr" is not known', 'nearest: "m')),
    ("file's unit", '"kN"', '"kNn"', ('units.force: "kNn": unit "kNn" is not known', 'nearest: "kN"')),
    ("bearing", '"pinned"', '"pined"', ('supports.L0: a support is "pinned" or { slides = degrees }, got "pined"',)),
]

TWICE = [
    ("member", '["U1-U2"]', '["U1-U2", "U2-U1"]', (f'{CHORD}.bars[1]: bar "U2-U1" is given twice', "bars[0]")),
    ("member of two groups", '["U1-U2"]', '["U1-U2", "L0-L1"]', ('bar "L0-L1" is given twice', f"{CHORD}.bars[1]")),
    ("joint", "U1 = [3.1, 2.2]", "U1 = [3.1, 2.2]\nU1 = [3, 2]", ("is not TOML", "at line 14", ": U1 = [3, 2]")),
    ("support", 'L0 = "pinned"', 'L0 = "pinned"\nL0 = "pinned"', ("is not TOML", "at line 18", ': L0 = "pinned"')),
    ("table", "[deck]", "[joints]\nL9 = [1, 2]\n[deck]", ("is not TOML", "twice", ": [joints]")),
    ("inline key", "{ slides = 0 }", "{ slides = 0, slides = 1 }", ("is not TOML", "slides")),
    ("panel point", '"L0", "L1"', '"L0", "L0"', ("deck.panel_points[1]: ", '"L0" at x = 0 m after "L0" at x = 0 m')),
]

GEOMETRY = [
    ("no length", "U2 = [6.4, 2.3]", "U2 = [3.1, 2.2]", ('U1-U2: has no length: joints "U1" and "U2"', "(3.1, 2.2) m")),
    ("hardly any", "U2 = [6.4, 2.3]", "U2 = [1e12, 2.3]", ("has no length to speak of, 3.1 m in a truss of 1e+12 m",)),
    ("no area", "area = 2000", "area = 0", (f"{CHORD}.bars[0]: member U1-U2: area must be above 0, got 0.0 m2",)),
    ("less than none", "area = 2000", "area = -2000", ("area must be above 0, got -0.002 m2",)),
    ("no modulus", "modulus = 200", "modulus = 0", ("member U1-U2: modulus must be above 0, got 0.0 Pa",)),
    ("lifts", "density = 7850", "density = -1", ("member U1-U2: density must be 0 or more, got -1.0 kg/m3",)),
    ("to itself", '"U1-U2"]', '"U1-U1"]', (f'{CHORD}.bars[0]: member U1-U1: joins joint "U1" to itself',)),
    ("lonely", "U1 = [3.1, 2.2]", "U1 = [3.1, 2.2]\nU7 = [5, 1]", ("joint U7: no member reaches it (nearest: ",)),
    ("soft", "area = 2000", "area = 1e-11", ("member U1-U2: E A / length is 6.06e-07 N/m", SOFT, "of member L0-L1")),
    ("stiff", "area = 2000", "area = 1e20", ("member U1-L2: E A / length", SOFT, "of member U1-U2")),
    ("soft spring", "slides = 0", "slides = 0, normal_stiffness = 1e-12", ("support L3: normal stiffness is", SOFT)),
    (
        "spring",
        "slides = 0",
        "slides = 0, normal_stiffness = -1",
        ("normal_stiffness must be above 0, got -1000000.0",),
    ),
    ("bed", "slides = 0", "slides = 1e5", ("support L3: a bed stands at -360 to 360 degrees, got 100000 degrees",)),
    ("no bars", '["U1-U2"]', "[]", (f"{CHORD}.bars: the list of bars is empty",)),
    ("one joint", '"U1-U2"]', '"U1"]', (f'{CHORD}.bars[0]: a bar is written as its two joints, "U1-L2", got "U1"',)),
    ("three joints", '"U1-U2"]', '"U1-U2-L2"]', (f"{CHORD}.bars[0]: a bar is written as its two joints",)),
    (
        "name with a space",
        "U1 = [3.1",
        '"U 1" = [0, 9]\nU1 = [3.1',
        ('may not be empty or hold a space or "-"', '"U 1"'),
    ),
    ("name with a dash", "U1 = [3.1", "U-1 = [0, 9]\nU1 = [3.1", ('may not be empty or hold a space or "-"', '"U-1"')),
    ("no name", "U1 = [3.1", '"" = [0, 9]\nU1 = [3.1', ('joints."": text that is not empty is asked for',)),
]

DECK = [
    ("one panel point", '["L0", "L1", "L2", "L3"]', '["L0"]', ("deck.panel_points: a deck needs at least 2", "got 1")),
    ("none", '["L0", "L1", "L2", "L3"]', "[]", ("deck.panel_points: the joints of the loaded chord are not said",)),
    ("not said", 'panel_points = ["L0", "L1", "L2", "L3"]\n', "", ("deck.panel_points: the joints of the loaded",)),
    ("order", '"L1", "L2"', '"L2", "L1"', ("deck.panel_points[2]: panel points must follow each other along +x",)),
    ("abutment", "truss_share = 0.6", "left_abutment = 4", ("deck.panel_points[0]: ", "after the abutment at x = 4 m")),
    (
        "abutment right",
        "truss_share = 0.6",
        "right_abutment = 4",
        ("deck.right_abutment: ", "got the abutment at x = 4 m"),
    ),
    ("behind abutment", '["L0", "L1"', '["L9", "L1"', ('deck.panel_points[0]: joint "L9" is not defined',)),
    ("share", "truss_share = 0.6", "truss_share = 0", ("deck.truss_share: must be above 0 and at most 2", "got 0.0")),
    ("share of 60", "truss_share = 0.6", "truss_share = 60", ("deck.truss_share: must be above 0", "got 60.0")),
    ("deck share", "truss_share = 0.5", "truss_share = 50", ("permanent.truss_share: must be 0 to 2", "got 50.0")),
    ("deck lifts", "deck = 4.0", "deck = -4.0", ("permanent.deck: must be 0 or more, got -4000.0 N/m",)),
    ("impact", "impact = 0.3", "impact = 30", ("rating.impact: impact must be 0 to 2 (30 % is 0.3), got 30.0",)),
    ("impact below 0", "impact = 0.3", "impact = -0.1", ("rating.impact: impact must be 0 to 2", "got -0.1")),
    (
        "permit",
        "compression = 150",
        "compression = -1",
        (f"{CHORD}: permits.compression: ", "0 or more, got -1000 N"),
    ),
]

STABILITY = [
    ("two held", "L3 = { slides = 0 }\n", "", ("supports: 2 direction(s) held; a truss needs at least 3",)),
    ("none held", 'L0 = "pinned"\nL3 = { slides = 0 }\n', "", ("supports: 0 direction(s) held",)),
    ("all roll", '"pinned"', "{ slides = 0 }\nL1 = { slides = 0 }", ("is a mechanism", "along the bridge (x)")),
    ("one point", "slides = 0", "slides = 90", ("is a mechanism", "up and down (y)")),
    ("no diagonal", ', "U1-L2"]', "]", ("truss: is a mechanism: joint ", " can move ", "add a member or a support")),
    # As many bars as determinacy asks for, and still one panel can fold: its bar stands where none is needed.
    ("hidden", '"U1-L2"]', '"L1-L3"]', ("truss: is a mechanism: joint ", " can move ", "from +x without stretching")),
]
CASES = {
    "name": NAMES,
    "twice": TWICE,
    "geometry": GEOMETRY,
    "deck": DECK,
    "stability": STABILITY,
}


@pytest.mark.parametrize(
    ("old", "new", "parts"),
    [pytest.param(*case, id=f"{group}: {what}") for group, cases in CASES.items() for what, *case in cases],
)
def test_a_spoiled_bridge_is_refused(tmp_path: Path, old: str, new: str, parts: tuple[str, ...]) -> None:
    path = written(tmp_path, changed(BY_JOINTS, (old, new)))
    for words in (["rate", path, "h5", "--json"], ["sweep", path, "h5"], ["influence", path], ["draw", path]):
        assert_refused(movload(*words, "--csv", tmp_path / "new.csv"), *parts, place=path)
    assert names_in(tmp_path) == {path.name}


def test_the_unspoiled_bridge_is_taken(tmp_path: Path) -> None:
    """Or nothing above would prove anything."""
    path = written(tmp_path, BY_JOINTS)
    assert movload("rate", path, "h5").code == 0
    assert movload("draw", path).code == 0


@pytest.mark.parametrize("table", ["joints", "supports", "deck", "units", 'members."top chord"'])
def test_a_missing_table_is_refused(tmp_path: Path, table: str) -> None:
    path = written(tmp_path, without(BY_JOINTS, table))
    expected = {
        "joints": 'joint "U1" is not defined',
        "supports": "supports: is missing",
        "deck": "deck.panel_points: the joints of the loaded chord are not said",
        "units": "units: the units are not said; write units = {",
        'members."top chord"': "is a mechanism",
    }
    assert_refused(movload("draw", path), expected[table], place=path)


def test_a_joint_between_two_level_bars_is_named(tmp_path: Path) -> None:
    """The commonest mechanism: a hanger was forgotten, and nothing at all holds its lower joint up and down."""
    path = written(tmp_path, changed(BY_JOINTS, ('"U1-L1", ', "")))
    assert_refused(movload("draw", path), 'joint "L1" can move up and down (y)', "no other joint moves", place=path)


def test_a_vehicle_is_no_bridge_and_a_bridge_no_vehicle(tmp_path: Path) -> None:
    path = written(tmp_path, BY_JOINTS)
    assert_refused(movload("vehicles", path), 'key "joints" is not known', place=path)
    path = written(tmp_path, CART)
    assert_refused(movload("draw", path), 'key "kind" is not known', place=path)
