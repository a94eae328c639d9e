"""A spoiled deck or floor in a bridge file: one line names file, key, rule, value and the nearest name."""

from __future__ import annotations

import re
from typing import TYPE_CHECKING

import pytest
from cli.across import ACROSS, assert_spoiled
from cli_run import BY_JOINTS, BY_LAYOUT, assert_refused, changed, movload, written

if TYPE_CHECKING:
    from pathlib import Path

DECK = {
    "crossed": (
        "kerbs = [-3.0, 3.0]", "kerbs = [3.0, -3.0]",
        "deck.kerbs: the kerbs cross: the right one stands at 3 m, the left one",
    ),
    "in one place": ("kerbs = [-3.0, 3.0]", "kerbs = [3.0, 3.0]", "deck.kerbs: the kerbs cross"),
    "three kerbs": ("kerbs = [-3.0, 3.0]", "kerbs = [-3.0, 0, 3.0]", "deck.kerbs: a list of 2 is asked for"),
    "one kerb": ("kerbs = [-3.0, 3.0]", "kerbs = [-3.0]", "deck.kerbs[1]: is missing"),
    "outside": (
        "kerbs = [-3.0, 3.0]", "kerbs = [-3.3, 3.0]",
        "deck.kerbs: kerbs at -3.3 and 3 m stand outside the trusses at -3.2 and",
    ),
    "outside, through": (
        'kind = "pony"', 'kind = "through"',
        "deck.kerbs: kerbs at -4 and 3 m", "a through truss has no",
    ),
    "outside, not said": (
        'kind = "pony"\n', "",
        "deck.kerbs: kerbs at -4 and 3 m", "a truss whose deck.kind is not said",
    ),
    "no clearance": (
        "clearance = 0.4\n", "",
        "deck.clearance: is needed beside deck.kerbs: the least distance from a",
    ),
    "no kerbs": ("kerbs = [-3.0, 3.0]\n", "", "deck.kerbs: is needed beside deck.clearance"),
    "no kerbs at all": (
        "kerbs = [-3.0, 3.0]\nclearance = 0.4\n", "",
        "deck.kerbs: is needed to know how wide permanent.items[0]",
    ),
    "keeps alone": (
        "kerbs = [-3.0, 3.0]\nclearance = 0.4", 'keeps = "right"',
        "deck.kerbs: is needed beside deck.keeps",
    ),
    "no spacing": ("truss_spacing = 6.4\n", "", "deck.truss_spacing: is needed beside deck.kerbs"),
    "spacing 0": (
        "truss_spacing = 6.4", "truss_spacing = 0",
        "deck.truss_spacing: the trusses stand more than 0 m apart",
    ),
    "clearance": ("clearance = 0.4", "clearance = -0.4", "deck.clearance: must be 0 or more, got -0.4 m"),
    "between": ("clearance = 0.4", "clearance = 0.4\nbetween = 0", "deck.between: must be above 0, got 0.0 m"),
    "keeps": (
        "clearance = 0.4", 'clearance = 0.4\nkeeps = "rihgt"',
        'deck.keeps: "rihgt" is neither right nor left (nearest: "right")',
    ),
    "kind": (
        'kind = "pony"', 'kind = "ponny"',
        'deck.kind: "ponny" is not one of through, pony, deck (nearest: "pony")',
    ),
    "bears on": (
        'kind = "pony"', 'bears_on = "chrod"',
        'deck.bears_on: "chrod" is not one of floorbeams, chord (nearest',
    ),
    "share twice": (
        "clearance = 0.4", "clearance = 0.4\ntruss_share = 0.6",
        "deck.truss_share: the share is given twice: typed, and by deck.truss_spacing",
    ),
    "share of the deck": (
        "[permanent]", "[permanent]\ndeck = 3\ntruss_share = 0.5",
        "permanent.truss_share: the share is given twice: typed, and by deck.truss_spacing",
    ),
    "share of nothing": (
        "[permanent]", "[permanent]\ntruss_share = 0.5",
        "permanent.truss_share: the share is given twice",
    ),
}  # fmt: skip

PARTS = {
    "one stringer": (
        "z = [-2.4, -0.8, 0.8, 2.4]", "z = [0]",
        "floor.stringers.z: at least 2 stringers carry a floor, got 1",
    ),
    "no stringers": (
        "z = [-2.4, -0.8, 0.8, 2.4]", "z = []",
        "floor.stringers.z: at least 2 stringers carry a floor, got 0",
    ),
    "from the left": (
        "z = [-2.4, -0.8, 0.8, 2.4]", "z = [2.4, -2.4]",
        "floor.stringers.z: stringers stand from right to left, z increasing, got 2.4, -2.4 m",
    ),
    "in one place ": (
        "z = [-2.4, -0.8, 0.8, 2.4]", "z = [-2.4, 0.8, 0.8]",
        "floor.stringers.z: stringers stand from right to left",
    ),
    "beyond the trusses": (
        "z = [-2.4,", "z = [-3.5,",
        "floor.floorbeams.brackets: stringer S1 at -3.5 m stands beyond the trusses at -3.2 and 3.2 m",
    ),
    "beyond the brackets": (
        "0.8, 2.4]\nweight = 0.5", "0.8, 3.8]\nweight = 0.5",
        "floor.floorbeams.brackets: stringer S4 at 3.8 m stands beyond the trusses",
    ),
    "no places": ("z = [-2.4, -0.8, 0.8, 2.4]\n", "", "floor.stringers.z: is missing"),
    "only beams": (
        "[floor.stringers]\nz = [-2.4, -0.8, 0.8, 2.4]", "[floor.stringers]",
        "floor.stringers.z: is missing",
    ),
    "run on": (
        "weight = 0.5", "continuous = true",
        "floor.stringers", "continuous: stringers that run on over floorbeams cannot be",
    ),
    "run on perhaps": ("weight = 0.5", 'continuous = "no"', "floor.stringers.continuous: true or false is asked for"),
    "fraction 0": (
        "weight = 0.5", "fraction = 0",
        "floor.stringers.fraction: must be above 0 and at most 2 of a whole axle",
    ),
    "fraction of 60": ("weight = 0.5", "fraction = 60", "floor.stringers.fraction: must be above 0", "got 60.0"),
    "fraction below": ("weight = 0.5", "fraction = -0.5", "floor.stringers.fraction: must be above 0", "got -0.5"),
    "light stringer": (
        "weight = 0.5", "weight = -0.5",
        "floor.stringers.weight: a weight must be 0 or more, got -500.0 N/m",
    ),
    "light beam": (
        "weight = 0.9", "weight = -0.9",
        "floor.floorbeams.weight: a weight must be 0 or more, got -900.0 N/m",
    ),
    "bracket": (
        "weight = 0.9", "brackets = [0, -1]",
        "floor.floorbeams.brackets[1]: a bracket reaches 0 or more beyond",
    ),
    "contact": ("contact = 0.2", "contact = -0.2", "floor.planks.contact: must be 0 or more, got -0.2 m"),
    "no contact": ("contact = 0.2\n", "", "floor.planks.contact: is missing"),
    "sharing 0": (
        "sharing = 0.7", "sharing = 0",
        "floor.planks.sharing: one plank takes above 0 and at most 1 of a wheel",
    ),
    "sharing 70": ("sharing = 0.7", "sharing = 70", "floor.planks.sharing: one plank takes above 0", "got 70.0"),
    "moment": ("{ moment = 60,", "{ moment = -60,", "floor.stringers: permits.moment: a strength must be 0 or more"),
    "moment in kN": (
        "{ moment = 60,", '{ moment = "60 kN",',
        'floor.stringers.permits.moment: "60 kN" is a force; a moment is asked for',
    ),
    "sense": (
        "{ moment = 60,", "{ momnet = 60,",
        'floor.stringers.permits: key "momnet" is not known (nearest: "moment")',
    ),
    "axial": ("{ moment = 60,", "{ tension = 60,", 'floor.stringers.permits: key "tension" is not known'),
    "twice": (
        "{ moment = 100, shear = 150 }", "{ moment = 100 }\nreduced = { moment = 9 }",
        "floor.stringers", "reduced.moment: the moment strength is given twice, nominal and reduced; keep one",
    ),
    "timber": ("timber = true", 'timber = "oak"', "floor.planks.timber: true or false is asked for"),
    "part": ("[floor.planks]", "[floor.plank]", 'floor: key "plank" is not known (nearest: "planks")'),
}  # fmt: skip


@pytest.mark.parametrize("what", DECK)
def test_a_spoiled_deck(tmp_path: Path, what: str) -> None:
    old, new, *parts = DECK[what]
    kerbs = ("kerbs = [-3.0, 3.0]", "kerbs = [-4.0, 3.0]" if what.startswith("outside, ") else "kerbs = [-3.0, 3.0]")
    assert_spoiled(tmp_path, changed(ACROSS, kerbs, (old, new)), *parts)


@pytest.mark.parametrize("what", PARTS)
def test_a_spoiled_floor(tmp_path: Path, what: str) -> None:
    old, new, *parts = PARTS[what]
    assert_spoiled(tmp_path, changed(ACROSS, (old, new)), *parts)


def test_the_unspoiled_file_is_taken(tmp_path: Path) -> None:
    """Or nothing above would prove anything; brackets, or a deck on top, carry kerbs outside the trusses too."""
    outside = changed(ACROSS, ("kerbs = [-3.0, 3.0]", "kerbs = [-3.6, 3.6]"))
    brackets = changed(outside, ("weight = 0.9", "weight = 0.9\nbrackets = [0.5, 0.5]"))
    for text in (ACROSS, brackets, changed(outside, ('kind = "pony"', 'kind = "deck"'))):
        assert movload("rate", written(tmp_path, text), "h5").code == 0


def test_a_layouts_deck_is_not_contradicted(tmp_path: Path) -> None:
    for kind, message in (
        ("through", '"through" contradicts layout.deck = "pony"'),
        ("ponny", '"ponny" is not one of through, pony, deck (nearest: "pony")'),
    ):
        path = written(tmp_path, changed(BY_LAYOUT, ("[deck]", f'[deck]\nkind = "{kind}"')))
        assert_refused(movload("draw", path), f"deck.kind: {message}", place=path)


def test_planks_and_floorbeams_need_the_stringers(tmp_path: Path) -> None:
    for part, keys in (("planks", "contact = 0.2\nsharing = 0.7"), ("floorbeams", "weight = 0.9")):
        text = re.sub(r"(?ms)^\[floor\..*?(?=^\[permanent\]$)", f"[floor.{part}]\n{keys}\n", ACROSS)
        path = written(tmp_path, text)
        message = f"floor.{part}: needs the stringers' places: type floor.stringers.z (where the deck bears)"
        assert_refused(movload("rate", path, "h5"), message, place=path)


def test_a_floor_needs_the_trusses_spacing(tmp_path: Path) -> None:
    path = written(tmp_path, changed(BY_JOINTS, ("[permanent]", "[floor.stringers]\nz = [-1, 1]\n[permanent]")))
    message = "deck.truss_spacing: a floor is rated across the trusses: type it"
    assert_refused(movload("rate", path, "h5"), message, place=path)


def test_items_need_the_trusses_spacing(tmp_path: Path) -> None:
    item = '[[permanent.items]]\ntitle = "x"\nkind = "other"\nline = 1\nacross = 0\n'
    path = written(tmp_path, changed(BY_JOINTS, ("[rating]", f"{item}[rating]")))
    message = "deck.truss_spacing: is needed to take permanent.items to the trusses"
    assert_refused(movload("rate", path, "h5"), message, place=path)
