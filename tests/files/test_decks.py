"""A file's width, floor and weights become a bridge: every key by value, values with their own units; what may wait."""

from __future__ import annotations

import math
import re

import pytest
from cli.across import ACROSS
from cli_run import BY_JOINTS, CART, changed
from numpy.testing import assert_allclose

from movload.bridge.floor import Floor
from movload.bridge.roadway import BETWEEN
from movload.errors import MissingDataError
from movload.files.read import bridge_from, vehicle_from
from movload.rating.solved import solve

GRAVITY = 9.80665  # m/s2, standard (NIST SP 811, B.8, from memory)
KERBS = "kerbs = [-3.0, 3.0]"


def test_the_deck() -> None:
    deck = bridge_from(ACROSS, "across.toml").deck
    assert (deck.kind, deck.bears_on, deck.chord_bending) == ("pony", "floorbeams", "")
    assert (deck.truss_share, deck.truss_spacing) == (None, 6.4)
    roadway = deck.roadway
    assert roadway is not None
    assert (roadway.right, roadway.left, roadway.clearance) == (-3.0, 3.0, 0.4)
    assert (roadway.between, roadway.keeps) == (BETWEEN, "right")
    more = '\nbetween = "3 ft"\nkeeps = "left"\nbears_on = "chord"\nchord_bending = "A. Alder: 0.7"'
    other = bridge_from(changed(ACROSS, (KERBS, f"{KERBS}{more}")), "across.toml").deck
    assert other.roadway is not None
    assert_allclose(other.roadway.between, 0.9144, rtol=1e-15)
    assert (other.roadway.keeps, other.bears_on, other.chord_bending) == ("left", "chord", "A. Alder: 0.7")


def test_the_floor() -> None:
    extra = changed(
        ACROSS, ("weight = 0.5", 'weight = 0.5\nfraction = "45 %"'), ("weight = 0.9", "weight = 0.9\nbrackets = [0, 1]")
    )
    floor = bridge_from(extra, "across.toml").floor
    stringers, beams, planks = floor.stringers, floor.floorbeams, floor.planks
    assert stringers is not None
    assert beams is not None
    assert planks is not None
    assert (stringers.z, stringers.fraction, stringers.weight) == ((-2.4, -0.8, 0.8, 2.4), 0.45, 500.0)
    assert (beams.brackets, beams.weight) == ((0.0, 1.0), 900.0)
    assert (planks.contact, planks.sharing) == (0.2, 0.7)
    assert dict(stringers.strength.permits) == {"moment": 60e3, "shear": 90e3}
    assert dict(beams.strength.nominal) == {"moment": 340e3, "shear": 300e3}
    assert (beams.strength.condition, beams.strength.system) == ("good", "floorbeams over 12 ft apart")
    assert [part.strength.timber for part in (stringers, beams, planks)] == [False, False, True]
    plain = bridge_from(ACROSS, "across.toml").floor
    assert plain.stringers is not None
    assert plain.floorbeams is not None
    assert (plain.stringers.fraction, plain.floorbeams.brackets) == (None, (0.0, 0.0))
    assert bridge_from(BY_JOINTS, "joints.toml").floor == Floor()


def test_the_members_state() -> None:
    text = changed(ACROSS, ('condition = "fair"', 'condition = "poor"\nmeasured = true\nreduced = { shear = 1 }'))
    with pytest.raises(ValueError, match=r'members."top chord".reduced: key "shear" is not known'):
        bridge_from(text, "across.toml")
    typed = bridge_from(changed(text, ("reduced = { shear = 1 }\n", "")), "across.toml").strengths["U1-U2"]
    assert (typed.condition, typed.measured, typed.system) == ("poor", True, "riveted members")
    assert dict(typed.permits) == {"tension": 200e3, "compression": 150e3}
    assert dict(typed.nominal) == {"tension": 360e3, "compression": 270e3}
    assert dict(typed.reduced) == {}


def test_weights_item_by_item() -> None:
    permanent = bridge_from(ACROSS, "across.toml").permanent
    assert permanent is not None
    planks, gravel, left, right, post = permanent.items
    assert permanent.detail_allowance == 0.1
    assert [item.kind for item in permanent.items] == ["components", "surfacing", "components", "components", "other"]
    assert [(item.low, item.high) for item in permanent.items] == [
        (-3.0, 3.0), (-2.5, 2.5), (3.0, 3.0), (-3.0, -3.0), (0.0, 0.0),
    ]  # fmt: skip
    # rtol: two or three multiplications
    assert_allclose(planks.line, 0.06 * 800 * GRAVITY * 6.0, rtol=1e-15)
    assert_allclose([gravel.line, left.line, right.line], [0.4e3 * 5.0, 0.3e3, 0.3e3], rtol=1e-15)
    assert (post.line, post.points) == (0.0, (("L1", 800.0),))


def test_a_whole_decks_weight_lies_from_kerb_to_kerb_before_the_items() -> None:
    permanent = bridge_from(changed(ACROSS, ("[permanent]", "[permanent]\ndeck = 5")), "across.toml").permanent
    assert permanent is not None
    first, second = permanent.items[:2]
    assert (first.kind, first.line, first.low, first.high) == ("components", 5e3, -3.0, 3.0)
    assert second.title == "planks"


WITH_UNITS = [
    ("truss_spacing = 6.4", 'truss_spacing = "6400 mm"'), (KERBS, 'kerbs = ["-300 cm", "300 cm"]'),
    ("clearance = 0.4", 'clearance = "400 mm"'), ("weight = 0.5", 'weight = "500 N/m"'),
    ("{ moment = 60, shear = 90 }", '{ moment = "60000 N m", shear = "90000 N" }'),
    ("contact = 0.2", 'contact = "20 cm"'),
    ("sharing = 0.7", 'sharing = "70 %"'), ('"10 %"', "0.1"), ("thickness = 60", 'thickness = "6 cm"'),
    ("per_area = 0.4", 'per_area = "400 N/m2"'), ("line = 0.3", 'line = "300 N/m"'),
    ("{ L1 = 0.8 }", '{ L1 = "800 N" }'), ("[-2.5, 2.5]", '["-2500 mm", "2.5 m"]'),
    ("across = 0\n", 'across = "0 mm"\n'),
]  # fmt: skip


def test_each_quantity_may_carry_its_unit() -> None:
    """The same bridge with a unit on every value of its width, its floor and its weights."""
    plain, typed = (bridge_from(text, "across.toml") for text in (ACROSS, changed(ACROSS, *WITH_UNITS)))
    one, other = solve(plain), solve(typed)
    # rtol: a unit is one multiplication more
    assert_allclose(other.permanent, one.permanent, rtol=1e-12, atol=1e-9)
    assert_allclose(other.strength, one.strength, rtol=1e-12)
    assert (plain.deck.roadway, plain.deck.truss_spacing) == (typed.deck.roadway, typed.deck.truss_spacing)
    for first, second in zip(one.parts, other.parts, strict=True):
        assert_allclose(second.across.ordinate, first.across.ordinate, rtol=1e-12)


def test_what_a_rating_takes_as_given() -> None:
    plain = bridge_from(ACROSS, "across.toml")
    assert (plain.impact, plain.impact_rule, plain.surface, plain.traffic) == (0.3, "", "minor", 100.0)
    assert plain.deflection_limit == 400.0
    text = changed(
        ACROSS, ("impact = 0.3", 'impact = "by loaded length"'), ("traffic = 100", 'traffic = "unknown"'),
        ('surface = "minor"\n', ""), ("deflection = 400\n", ""),
    )  # fmt: skip
    other = bridge_from(text, "across.toml")
    assert (other.impact, other.impact_rule, other.surface, other.traffic) == (None, "by loaded length", "", math.inf)
    assert other.deflection_limit is None
    assert bridge_from(changed(ACROSS, ("impact = 0.3", 'impact = "30 %"')), "across.toml").impact == 0.3


WAITING = {
    "deck.truss_spacing": ("truss_spacing = 6.4", 'truss_spacing = "?"'),
    "deck.kerbs": (KERBS, 'kerbs = "?"'),
    "deck.clearance": ("clearance = 0.4", 'clearance = "?"'),
    "floor.stringers.permits.moment": ("{ moment = 60,", '{ moment = "?",'),
    "floor.floorbeams.permits": ("permits = { moment = 190, shear = 170 }", 'permits = "?"'),
    "floor.planks.nominal.shear": ("shear = 100 }", 'shear = "?" }'),
    "floor.stringers.condition": ('condition = "good"', 'condition = "?"'),
    'members."top chord".system': ('system = "riveted members"', 'system = "?"'),
    'members."top chord".nominal.tension': ("{ tension = 360,", '{ tension = "?",'),
    "permanent.detail_allowance": ('"10 %"', '"?"'),
    "rating.surface": ('surface = "minor"', 'surface = "?"'),
    "rating.traffic": ("traffic = 100", 'traffic = "?"'),
    "rating.impact": ("impact = 0.3", 'impact = "?"'),
}


@pytest.mark.parametrize("place", WAITING)
def test_what_may_wait_is_asked_for_by_the_rating(place: str) -> None:
    bridge = bridge_from(changed(ACROSS, WAITING[place]), "across.toml")
    assert bridge.missing == (place,)
    with pytest.raises(MissingDataError, match="a rating needs data that is not there yet") as caught:
        solve(bridge)
    assert f'{place} (still holds "?")' in str(caught.value)


NEEDED = {
    "floor.stringers.z": ("z = [-2.4, -0.8, 0.8, 2.4]", 'z = "?"'),
    "floor.stringers.weight": ("weight = 0.5", 'weight = "?"'),
    "floor.planks.sharing": ("sharing = 0.7", 'sharing = "?"'),
    "permanent.items[0].kind": ('kind = "components"', 'kind = "?"'),
    "permanent.items[0].thickness": ("thickness = 60", 'thickness = "?"'),
    "permanent.items[0].across": ('across = "full width"', 'across = "?"'),
    "rating.deflection": ("deflection = 400", 'deflection = "?"'),
    "deck.kind": ('kind = "pony"', 'kind = "?"'),
}


@pytest.mark.parametrize("place", NEEDED)
def test_what_may_not_wait_says_so_at_once(place: str) -> None:
    message = f'across.toml: {place}: still holds "?" and is needed here'
    with pytest.raises(ValueError, match=f"^{re.escape(message)}$"):
        bridge_from(changed(ACROSS, NEEDED[place]), "across.toml")


def test_left_and_right_wheels_of_a_vehicle_file() -> None:
    """Half each where nothing is said; what one axle says leaves the others at half."""
    (plain,) = (case.moving for case in vehicle_from(CART, "cart.toml").cases)
    (lopsided,) = (
        case.moving
        for case in vehicle_from(
            changed(CART, ("load = 45,", 'load = 45, left = "60 %",')), "cart.toml"
        ).cases
    )  # fmt: skip
    assert plain is not None
    assert lopsided is not None
    assert (plain.gauges, plain.left_shares) == ((1.8, 1.9, 1.9), ())
    assert lopsided.left_shares == (0.5, 0.6, 0.5)
