"""What cannot be rated across the deck: one line names file, key or option, rule, value and the nearest name.

Words on the command line first, then vehicles without room, then what a rule needs and nobody has typed. Spoiled bridge
files are in test_bad_floor.py and test_bad_weights.py.
"""

from __future__ import annotations

import re
from typing import TYPE_CHECKING, Any

import pytest
from cli.across import ACROSS
from cli_run import BY_JOINTS, CART, assert_refused, changed, movload, names_in, written

if TYPE_CHECKING:
    from pathlib import Path

PLACES = "anywhere, left kerb, right kerb, own lane, centre line"
NO_UNIT = 'has no unit; a length is asked for, e.g. "4.2 m"'


@pytest.fixture
def asked(tmp_path: Path) -> list[Any]:
    """Return the command's words."""
    return ["rate", written(tmp_path, ACROSS), written(tmp_path, CART, "cart.toml")]


OPTIONS = {
    "--at=offset": ("--at", 'say how far: --at "0.4 m"'),
    "--at=left kreb": ("--at", f'"left kreb" is none of {PLACES} and no offset (nearest: "left kerb")'),
    "--at=Own Lane": ("--at", '(nearest: "own lane")'),
    "--at=center line": ("--at", '(nearest: "centre line")'),
    "--at=": ("--at", f'"" is none of {PLACES} and no offset\n'),
    "--at=nan m": ("--at", f'"nan m" is none of {PLACES}'),
    "--at=0.4": ("--at", f'"0.4" {NO_UNIT}'),
    "--at=-1": ("--at", f'"-1" {NO_UNIT}'),
    "--at=0.4 kN": ("--at", '"0.4 kN" is a force; a length is asked for'),
    "--at=0.4 mtr": ("--at", 'unit "mtr" is not known for a length'),
    "--at=1e400 m": ("--at", '"1e400 m" is too large a number'),
    "--speed=5": ("--speed", '"5" has no unit; a speed is asked for, e.g. "8 km/h" or "5 mph"'),
    "--speed=5 m": ("--speed", '"5 m" is a length; a speed is asked for'),
    "--speed=8 kmh/h": ("--speed", 'unit "kmh/h" is not known for a speed (nearest: "km/h")'),
    "--speed=slow": ("--speed", '"slow" is not a number with a unit; a speed is asked for'),
    "--speed=0 mph": ("--speed", 'a speed must be above 0 and at most 360 km/h, got "0 mph"'),
    "--speed=-5 mph": ("--speed", 'a speed must be above 0 and at most 360 km/h, got "-5 mph"'),
    "--abreast=-1": ("--abreast", "0 to 6 may go abreast, got -1"),
    "--abreast=7": ("--abreast", "0 to 6 may go abreast, got 7"),
    "--wander=0.3": ("--wander", f'"0.3" {NO_UNIT}'),
    "--wander=3 kN": ("--wander", '"3 kN" is a force; a length is asked for'),
    "--wander=-1 m": ("--wander", 'only counts with --at "centre line"'),
    "--method=lrf": ("", 'factor set "lrf" is not known', "known: permitted, allowable_", '(nearest: "lrfr")'),
    "--method=": ("", 'factor set "" is not known'),
    "--method=allowable stresses": ("", '(nearest: "allowable_stress")'),
    "--method=/nowhere/lrfr.toml": ("/nowhere/lrfr.toml", 'no such file (nearest: "lrfr")'),
    "--impact=by loaded lengths": ("--impact", "is no fraction and none of", '(nearest: "by loaded length")'),
    "--impact=3": ("--impact", "impact must be 0 to 2 (30 % is 0.3), got 3.0"),
}  # fmt: skip


@pytest.mark.parametrize("option", OPTIONS)
def test_an_option_that_means_nothing(asked: list[Any], option: str) -> None:
    place, *parts = OPTIONS[option]
    folder = names_in(asked[1].parent)
    assert_refused(movload(*asked, option, "--csv", asked[1].with_name("new.csv")), *parts, place=place)
    assert names_in(asked[1].parent) == folder


def test_a_count_that_is_no_number_is_wrong_usage(asked: list[Any]) -> None:
    done = movload(*asked, "--abreast", "two")
    assert (done.code, done.out) == (2, "")
    assert "--abreast" in done.err


NOWHERE = {
    "--at=1.66 m": ("offset: its middle keeps between -1.65 and 1.65 m here, got 1.66 m",),
    "--at=-66 in": ("offset: its middle keeps between -1.65 and 1.65 m here, got -1.6764 m",),
    "--abreast=3": ("Alder hay cart: 3 abreast do not fit there; 2 may stand abreast",),
}


@pytest.mark.parametrize("option", NOWHERE)
def test_a_vehicle_that_does_not_fit_there(asked: list[Any], option: str) -> None:
    """Who and on which bridge: of several vehicles and places only one may be wrong."""
    done = movload(*asked[:2], "h5", asked[2], "--at=left kerb", "--at=0.1 m", option)
    if option.startswith("--abreast"):
        done = movload(*asked, option)
    assert_refused(done, *NOWHERE[option], place=f"{asked[2]} on {asked[1]}")


def test_several_abreast_have_no_single_place(asked: list[Any]) -> None:
    done = movload(*asked, "--at", "left kerb", "--abreast", "2")
    assert_refused(done, "2 abreast do not fit there; 1 may stand abreast", place=f"{asked[2]} on {asked[1]}")


WIDTHS = {
    "wider than the kerbs": (
        "gauge = 1.9 },\n  { load = 30", "gauge = 5.4 },\n  { load = 30",
        "anywhere",
        "deck.kerbs: wheels 5.4 m apart do not fit: 6 m between the kerbs less 0.4 m on either side leave 5.2 m",
    ),
    "wider than a lane": (
        "gauge = 1.9 },\n  { load = 30", "gauge = 2.4 },\n  { load = 30",
        "own lane",
        "own lane: wheels 2.4 m apart do not fit half of the roadway: 3 m less 0.4 m at the kerb and 0.6 m",
    ),
    "no gauge": (", gauge = 1.8", "", "anywhere", "axles[0].gauge: some axles have a gauge and this one has none"),
    "gauge 0": ("gauge = 1.8", "gauge = 0", "anywhere", "axles[0].gauge: a gauge must be above 0, got 0.0 m"),
    "gauge below 0": (
        "gauge = 1.8", "gauge = -1.8",
        "anywhere", "axles[0].gauge: a gauge must be above 0, got -1.8 m",
    ),
    "gauge in kN": ("gauge = 1.8", 'gauge = "1.8 kN"', "anywhere", 'axles[0].gauge: "1.8 kN" is a force; a length'),
    "left of 2": (
        "gauge = 1.8", "gauge = 1.8, left = 2",
        "anywhere", "axles[0].left: a left share is 0 to 1, got 2.0",
    ),
    "kind": ('kind = "farm"', 'kind = "frm"', "anywhere", '"frm"'),
}  # fmt: skip


@pytest.mark.parametrize(("old", "new", "place", "message"), WIDTHS.values(), ids=WIDTHS)
def test_a_vehicle_that_has_no_room(tmp_path: Path, old: str, new: str, place: str, message: str) -> None:
    bridge = written(tmp_path, ACROSS)
    cart = written(tmp_path, changed(CART, (old, new)), "cart.toml")
    done = movload("rate", bridge, cart, "--at", place)
    fits_nowhere = message.startswith(("deck.kerbs", "own lane"))
    assert_refused(done, message, place=f"{cart} on {bridge}" if fits_nowhere else cart)


def test_a_vehicle_without_gauges_has_no_place_across(tmp_path: Path) -> None:
    """It sweeps, and crosses a bridge with a typed share, but nobody knows where its wheels stand."""
    bare = re.sub(r", gauge = [\d.]+|gauge = [\d.]+, ", "", CART)
    cart, bridge = written(tmp_path, bare, "cart.toml"), written(tmp_path, ACROSS)
    done = movload("rate", bridge, cart)
    message = "axles[0].gauge: is needed to place it across the deck: type gauge (between wheel centres) on every axle"
    assert_refused(done, f"Alder hay cart: {message}", place=f"{cart} on {bridge}")
    assert movload("sweep", bridge, cart).code == 0
    assert movload("rate", written(tmp_path, BY_JOINTS, "share.toml"), cart).code == 0


@pytest.mark.parametrize(
    "option", ["--at=left kerb", "--at=own lane", "--at=centre line", "--at=0.3 m", "--at=0 m", "--abreast=2"]
)
def test_a_typed_share_has_no_places(tmp_path: Path, option: str) -> None:
    bridge, cart = written(tmp_path, BY_JOINTS), written(tmp_path, CART, "cart.toml")
    done = movload("rate", bridge, cart, option)
    message = "cannot be rated from one typed share; type deck.truss_spacing and deck.kerbs instead"
    assert_refused(done, message, place=f"{cart} on {bridge}: Alder hay cart")


ROWS = {
    "U1-U9": 'row "U1-U9" is not known (nearest: "U1-U2")',
    "": 'row "" is not known',
    "floorbeam L9 moment at S3": 'row "floorbeam L9 moment at S3" is not known (nearest: "floorbeam L',
    "stringer S5 L1-L2 moment": 'is not known (nearest: "stringer S',
    "left trus U1-L1": 'row "left trus U1-L1" is not known (nearest: "left truss U1-L1")',
    "plank moment": '(nearest: "planks moment")',
    "two\nlines": 'row "two\\nlines" is not known',
    "L1 down": "--explain L1 down: has no strength, so it is not rated",
    "L0 y": "--explain L0 y: has no strength, so it is not rated",
}


@pytest.mark.parametrize("row", ROWS, ids=repr)
def test_a_row_that_cannot_be_taken_apart(asked: list[Any], row: str) -> None:
    assert_refused(movload(*asked, "--explain", "U1-L1", "--explain", row), ROWS[row], place=asked[1])


def test_a_part_without_a_strength_cannot_be_taken_apart(asked: list[Any], tmp_path: Path) -> None:
    bare = changed(ACROSS, ("permits = { moment = 12, shear = 60 }", "permits = { moment = 12 }"))
    done = movload("rate", written(tmp_path, bare, "bare.toml"), asked[2], "--explain", "planks shear")
    assert_refused(done, "--explain planks shear: has no strength, so it is not rated", place=tmp_path / "bare.toml")


def test_a_deck_on_the_chord_needs_its_bending_checked(tmp_path: Path) -> None:
    """It draws and sweeps; its rating waits until somebody says who checked the chord's bending, and then says so."""
    text = changed(ACROSS, ('kind = "pony"', 'kind = "pony"\nbears_on = "chord"'))
    path = written(tmp_path, text)
    assert movload("sweep", path, "h5").code == 0
    done = movload("rate", path, "h5")
    message = "deck.chord_bending (who checked the chord's bending between joints, and the result)"
    assert_refused(done, "a rating needs data that is not there yet", message, place=path)
    bending = "A. Alder, by hand: 0.7 of what the chord may take"
    checked = written(tmp_path, changed(text, ("clearance", f'chord_bending = "{bending}"\nclearance')), "checked.toml")
    out = " ".join(movload("rate", checked, "h5").out.split())
    assert f"Note: The deck bears on the chord between joints; its bending: {bending}" in out


LRFR = ("--method", "lrfr")
BAR = 'condition = "fair"\nsystem = "riveted members"'
BEAM = 'condition = "good"\nsystem = "other"'
STATES = {
    "condition": (BAR, 'system = "riveted members"', "the condition of U1-U2 is needed (good, fair, poor) by"),
    "system": (BAR, 'condition = "fair"', 'the kind of system of U1-U2 is needed ("welded members", "riveted members"'),
    "stringer's condition": (BEAM, 'system = "other"', "the condition of stringer S1 is needed (good, fair, poor)"),
    "stringer's system": (BEAM, 'condition = "good"', "the kind of system of stringer S1 is needed"),
    "unknown condition": (BAR, BAR.replace("fair", "fiar"), '"fiar"', "good, fair, poor", '(nearest: "fair")'),
    "unknown system": (BAR, BAR.replace("riveted", "rivetted"), '"rivetted members"', '(nearest: "riveted members")'),
    "traffic": ("traffic = 100\n", "", 'rating.traffic (trucks a day one way, or "unknown")'),
}  # fmt: skip


@pytest.mark.parametrize("what", STATES)
def test_what_a_method_asks_and_nobody_has_typed(tmp_path: Path, what: str) -> None:
    old, new, *parts = STATES[what]
    path = written(tmp_path, changed(ACROSS, (old, new)))
    assert_refused(movload("rate", path, "h5", *LRFR), *parts, place=path)
    assert movload("rate", path, "h5").code == 0  # the permitted forces ask for none of it


@pytest.mark.parametrize("words", [LRFR, (*LRFR, "--impact", "by riding surface")], ids=["method's own", "asked for"])
def test_a_rule_by_riding_surface_needs_the_surface(tmp_path: Path, words: tuple[str, ...]) -> None:
    text = changed(ACROSS, ("impact = 0.3\n", "")) if "--impact" not in words else ACROSS
    path = written(tmp_path, changed(text, ('surface = "minor"\n', "")))
    message = 'rating.surface: is needed by the impact of "LRFR": smooth, minor, severe'
    assert_refused(movload("rate", path, "h5", *words), message, place=path)


def test_the_permitted_forces_have_no_impact_of_their_own(tmp_path: Path) -> None:
    path = written(tmp_path, changed(ACROSS, ("impact = 0.3\n", "")))
    message = "rating.impact (dynamic allowance, e.g. 0.30, and 0 only if a rule allows it)"
    assert_refused(movload("rate", path, "h5"), message, place=path)
    assert movload("rate", path, "h5", "--impact", "0.3").code == 0
    assert movload("rate", path, "h5", *LRFR).code == 0  # by riding surface


def test_nothing_permanent_is_assumed(tmp_path: Path) -> None:
    text = re.sub(r"(?ms)^\[\[permanent\.items\]\].*?(?=^\[rating\]$)", "", ACROSS)
    path = written(tmp_path, text)
    message = "permanent.items (what lies on the bridge, where across), or permanent.deck"
    assert_refused(movload("rate", path, "h5"), message, place=path)
    assert movload("rate", written(tmp_path, changed(text, ("[permanent]", "[permanent]\ndeck = 0"))), "h5").code == 0


@pytest.mark.parametrize("method", ["lrfr", "load_factor", "allowable_stress", "en"])
def test_a_method_that_finds_no_strength_it_can_use(tmp_path: Path, method: str) -> None:
    path = written(tmp_path, "\n".join(line for line in ACROSS.splitlines() if not line.startswith("nominal")))
    message = "reduced or nominal of at least one member group for method"
    assert_refused(movload("rate", path, "h5", "--method", method), message, place=path)
    permitted = written(tmp_path, "\n".join(line for line in ACROSS.splitlines() if not line.startswith("permits")))
    assert_refused(movload("rate", permitted, "h5"), "permits of at least one member group", place=permitted)
    assert movload("rate", permitted, "h5", "--method", method).code == 0
