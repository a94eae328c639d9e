"""Where across a vehicle keeps, and what truss, floorbeam and stringer then feel: a small farm bridge worked by hand.

An invented bridge over the Alderwater: panels of 4.1, 3.7, 4.3 and 3.9 m, trusses 4.6 m apart (at z = +-2.3), kerbs at
+-1.9, wheels at least 0.35 m from a kerb (so within +-1.55), stringers at z = -1.6, -0.8, 0, 0.8 and 1.6. Everything by
the lever rule: statics, common practice, no source. No impact, no margins; kN and m in the docstrings.

One axle of 100 kN over L1 loads hanger U1-L1 and floorbeam L1 whole, so that what they feel is 100 x its share.
"""

from __future__ import annotations

from dataclasses import replace
from typing import TYPE_CHECKING, Final

import pytest
from numpy.testing import assert_allclose
from oracles.trusses import bottom
from rating.bridges import CART, brook_truss

from movload import Bridge, Crossing, Deck, Loading, Vehicle, influence_lines, rate, sweep
from movload.bridge.floor import Floor, Floorbeams, Stringers
from movload.bridge.permanent import Item, PermanentItems
from movload.bridge.roadway import Roadway
from movload.bridge.strengths import TypedStrength, permitted
from movload.rating.factor_sets import PERMITTED
from movload.statics.part import row_of

if TYPE_CHECKING:
    from movload import Ratings

HAND: Final = 1e-12  # relative: the hand formulas carry all digits
BEAM: Final = TypedStrength({"moment": 81e3, "hogging": 81e3, "shear": 150e3})
STRINGERS: Final = (-1.6, -0.8, 0.0, 0.8, 1.6)
KERBS: Final = Roadway(-1.9, 1.9, clearance=0.35)
HANGER, HANGERS = "U1-L1", {"U1-L1", "U3-L3"}


def farm_bridge(roadway: Roadway = KERBS, *items: Item, spacing: float = 4.6, floor: Floor | None = None) -> Bridge:
    """Return the bridge: hangers permitted 60 kN, other bars 150, a floorbeam 81 kN m; its bars weigh nothing."""
    truss = brook_truss(0.0)
    stringers = Stringers(STRINGERS, strength=TypedStrength({"moment": 70e3, "shear": 90e3}))
    return Bridge(
        "Alderwater farm bridge, invented",
        truss,
        Deck(tuple(bottom(4)), truss_spacing=spacing, roadway=roadway, kind="deck"),
        permanent=PermanentItems(items),
        strengths={bar.name: permitted(*[60e3 if bar.name in HANGERS else 150e3] * 2) for bar in truss.members},
        floor=floor or Floor(stringers, Floorbeams(strength=BEAM)),
        impact=0.0,
    )


def axle(gauge: float, *, left: float = 0.5, headings: tuple[int, ...] = (1, -1)) -> Loading:
    """Return one axle of 100 kN, its left wheels carrying a part of it."""
    return Loading.of(Vehicle("axle", [100e3], [], gauges=(gauge,), left_shares=(left,), headings=headings))


def live(ratings: Ratings, part: str, name: str, *, crossing: int = 0, side: int = 0) -> float:
    """Return a row's live effect [kN, kN m]."""
    return ratings.rating(crossing, row_of(ratings.solved.effects, (part, name)), side).live / 1e3


def on_trusses(ratings: Ratings, crossing: int = 0) -> tuple[float, float]:
    """Return what the left and the right truss's hanger feel [kN]."""
    left, right = (live(ratings, f"{side} truss", HANGER, crossing=crossing) for side in ("left", "right"))
    return left, right


@pytest.mark.parametrize("heading", [1, -1])
@pytest.mark.parametrize("z", [-0.6, -0.25, 0.0, 0.4, 0.6])
def test_two_trusses_carry_one_vehicle_between_them(z: float, heading: int) -> None:
    """Of an axle of gauge g, w of it on its own left, the left truss gets 1/2 + (z + h (w - 1/2) g)/4.6, h the heading.

    The right one gets the rest. Where axles are alike, both trusses' peaks sum to the whole vehicle's, row by row.
    """
    mixed = replace(CART, gauges=(1.5, 1.9), left_shares=(0.62, 0.45), headings=(heading,))
    alike = replace(mixed, left_shares=(0.62, 0.62), gauges=(1.9, 1.9))
    crossings = [Crossing(Loading.of(vehicle), "offset", z) for vehicle in (mixed, alike)]
    ratings = rate(farm_bridge(), crossings)
    left, right = (
        ratings.rating(0, row_of(ratings.solved.effects, (side, HANGER)), 0).peak.placement.share
        for side in ("left truss", "right truss")
    )
    by_hand = [0.5 + (z + heading * (w - 0.5) * g) / 4.6 for w, g in ((0.62, 1.5), (0.45, 1.9))]
    assert_allclose(left, by_hand, rtol=HAND)
    assert_allclose(left + right, [1.0, 1.0], rtol=HAND)
    whole = sweep(influence_lines(brook_truss(), bottom(4)), alike)
    for found, expected in ((ratings.peaks[1].highest, whole.highest), (ratings.peaks[1].lowest, whole.lowest)):
        of_trusses = found[: 2 * expected.size].reshape(2, -1)
        assert_allclose(of_trusses.sum(axis=0), expected, rtol=HAND, atol=1e-9)  # N; forces of 1e4 N


def test_a_lopsided_cart_may_be_worse_with_the_smaller_share() -> None:
    """At 0.5, gauge 1.9, 52 % on its left; 100 in front, 60 behind by 2.1. Shear at the left end of floorbeam L0.

    Toward +x (0.5 + (0.5 + 0.038)/4.6) (60 + 100 x (1 - 2.1/4.1)) = 0.6170 x 108.78 = 67.11, the 60 over L0. Toward -x
    (0.5 + (0.5 - 0.038)/4.6) (100 + 60 x (1 - 2.1/4.1)) = 0.6004 x 129.27 = 77.62, the 100 over L0. Either way: 77.62.
    """
    cart = Vehicle("cart", [100e3, 60e3], [2.1], gauges=(1.9, 1.9), left_shares=(0.52, 0.52))
    ways = [Loading.of(replace(cart, headings=headings)) for headings in ((1,), (-1,), (1, -1))]
    ratings = rate(farm_bridge(), [Crossing(way, "offset", 0.5) for way in ways])
    along, back = (0.5 + 0.538 / 4.6) * (60 + 200 / 4.1), (0.5 + 0.462 / 4.6) * (100 + 120 / 4.1)
    found = [live(ratings, "floorbeam L0", "shear at left truss", crossing=number) for number in range(3)]
    assert_allclose(found, [along, back, max(along, back)], rtol=HAND)


def test_turning_round_changes_lanes_and_wheels_at_once() -> None:
    """Own lane, gauge 0.9, 60 % on its left wheels, traffic keeps right. 1.9 - 0.35 - 0.45 = 1.10 is the farthest.

    Toward +x its middle keeps from -1.10 to -(0.45 + 0.6) = -1.05 and its left is the bridge's: the right truss gets
    0.5 + (1.10 - 0.09)/4.6 = 0.7196. Toward -x it is its mirror image. Where traffic keeps left, heavy wheels are out:
    0.5 + (1.10 + 0.09)/4.6 = 0.7587 on the left truss toward +x.
    """
    ratings = rate(farm_bridge(), [Crossing(axle(0.9, left=0.6, headings=(way,)), "own lane") for way in (1, -1)])
    most, least = 50.0 + 101.0 / 4.6, 50.0 - 96.0 / 4.6
    assert_allclose(on_trusses(ratings, 0), [least, most], rtol=HAND)
    assert_allclose(on_trusses(ratings, 1), [most, least], rtol=HAND)
    keeps_left = farm_bridge(replace(KERBS, keeps="left"))
    ratings = rate(keeps_left, [Crossing(axle(0.9, left=0.6, headings=(1,)), "own lane")])
    assert_allclose(on_trusses(ratings)[0], 50.0 + 119.0 / 4.6, rtol=HAND)


def test_stringers_share_an_axle_by_the_lever_rule() -> None:
    """Axle at z = 0.4, gauge 1.9: 50 at 1.35, 0.25 right of S5, and 50 at -0.55, 0.25 left of S2, bays of 0.8 m.

    S5 and S2 get 50 x 0.55/0.8 = 34.375 each, S4 and S3 50 x 0.25/0.8 = 15.625, S1 nothing. On the span L0-L1 of 4.1 m
    the moment is that x 4.1/4. Of a gauge of 0.6 both wheels reach a stringer, one on it: 50 (1 + 0.2/0.8) = 62.5.
    """
    ratings = rate(farm_bridge(), [Crossing(axle(1.9), "offset", 0.4), axle(0.6)])
    shares = {"S1": 0.0, "S2": 34.375, "S3": 15.625, "S4": 15.625, "S5": 34.375}
    for name, share in shares.items():
        assert_allclose(live(ratings, f"stringer {name}", "L0-L1 shear"), share, rtol=HAND)
        assert_allclose(live(ratings, f"stringer {name}", "L0-L1 moment"), share * 4.1 / 4, rtol=HAND)
    assert_allclose(live(ratings, "stringer S4", "L1-L2 shear", crossing=1), 62.5, rtol=HAND)


def test_a_wheel_beyond_the_outer_stringer() -> None:
    """Overhang: 50 at 1.75, 0.15 beyond S5: it gets 50 (1 + 0.15/0.8) = 59.375 and S4 is not pulled up, but bears 0.

    The right wheel at -0.15 is between S2 and S3. The floorbeam feels the overhang whole: shear 50 (4.05 + 2.15)/4.6.
    """
    ratings = rate(farm_bridge(replace(KERBS, clearance=0.15)), [Crossing(axle(1.9), "left kerb")])
    assert_allclose(live(ratings, "stringer S5", "L0-L1 shear"), 59.375, rtol=HAND)
    assert live(ratings, "stringer S4", "L0-L1 shear") == 0.0
    assert_allclose(live(ratings, "floorbeam L1", "shear at left truss"), 50 * (4.05 + 2.15) / 4.6, rtol=HAND)


def test_the_greatest_moment_of_a_stringer_under_two_axles() -> None:
    """30 and 60 kN 2 m apart, gauge 1.9; S4 gets half of each axle at most (one wheel on it, the other 1.9 off).

    The resultant of 90 is 30 x 2/90 = 2/3 from the 60, which is worst 1/3 from midspan: 90 (2.05 - 1/3)^2/4.1 = 64.69
    on L0-L1; the 60 alone at midspan gives 61.5. End shear: 60 + 30 (1 - 2/4.1) = 75.37.
    """
    ratings = rate(farm_bridge(), [Vehicle("cart", [30e3, 60e3], [2.0], gauges=(1.9, 1.9))])
    assert_allclose(live(ratings, "stringer S4", "L0-L1 moment"), 0.5 * 90 * (2.05 - 1 / 3) ** 2 / 4.1, rtol=HAND)
    assert_allclose(live(ratings, "stringer S4", "L0-L1 shear"), 0.5 * (60 + 30 * (1 - 2 / 4.1)), rtol=HAND)


def test_moments_and_shears_of_a_floorbeam() -> None:
    """Axle at z = 0.4, gauge 1.9, over L1. Left end 100 (0.5 + 0.4/4.6) = 58.6957, right end 41.3043.

    Its stringers press by 34.375 (S2, S5) and 15.625 (S3, S4), so from the nearer end

        M at S1 = 41.3043 x 0.7                  = 28.9130
        M at S2 = 41.3043 x 1.5                  = 61.9565
        M at S3 = 41.3043 x 2.3 - 34.375 x 0.8   = 67.5
        M at S4 = 58.6957 x 1.5 - 34.375 x 0.8   = 60.5435
        M at S5 = 58.6957 x 0.7                  = 41.0870
    """
    ratings = rate(farm_bridge(), [Crossing(axle(1.9), "offset", 0.4)])
    left, right = 50 + 40 / 4.6, 50 - 40 / 4.6
    moments = (right * 0.7, right * 1.5, right * 2.3 - 27.5, left * 1.5 - 27.5, left * 0.7)
    assert_allclose(moments, [28.9130, 61.9565, 67.5, 60.5435, 41.0870], rtol=0.0, atol=5e-5)  # the last digit written
    found = [live(ratings, "floorbeam L1", f"moment at S{number}") for number in range(1, 6)]
    assert_allclose(found, moments, rtol=HAND)
    shears = [live(ratings, "floorbeam L1", f"shear at {side} truss") for side in ("left", "right")]
    assert_allclose(shears, [left, right], rtol=HAND)


def test_the_centre_line_relieves_the_truss_and_loads_the_floorbeam_more() -> None:
    """A narrow machine, gauge 1.0. Against the left kerb its middle is at 1.55 - 0.5 = 1.05, its wheels at 1.55, 0.55.

    Kerb: hanger 50 + 105/4.6 = 72.83, 60 permitted, RF 0.82; floorbeam, worst at S4: right end 27.174 x 3.1 - 50 x 0.25
    = 71.74 (S3: 62.5), 81 permitted, RF 1.13. Centre line, strayed by 0.3: hanger 50 + 30/4.6 = 56.52, RF 1.06;
    floorbeam at S3, the same wherever one wheel is on either side: 50 x 2.3 - 50 x 0.5 = 90, RF 0.90, which governs.
    """
    ratings = rate(farm_bridge(), [Crossing(axle(1.0), place) for place in ("left kerb", "centre line", "anywhere")])
    assert_allclose(on_trusses(ratings, 0)[0], 50 + 105 / 4.6, rtol=HAND)
    assert_allclose(on_trusses(ratings, 1)[0], 50 + 30 / 4.6, rtol=HAND)
    at_s3 = [live(ratings, "floorbeam L1", "moment at S3", crossing=number) for number in range(3)]
    assert_allclose(at_s3, [62.5, 90.0, 90.0], rtol=HAND)
    beam = min(one.factor for one in ratings.rows(0) if one.effect.kind == "moment" and "floorbeam" in one.part)
    assert_allclose(beam, 81 / ((50 - 105 / 4.6) * 3.1 - 12.5), rtol=HAND)
    kerb, centre = ratings.governing(0), ratings.governing(1)
    assert kerb.effect.key == ("left truss", HANGER)
    assert_allclose(kerb.factor, 60 / (50 + 105 / 4.6), rtol=HAND)
    assert (centre.effect.part.partition(" ")[0], centre.effect.name) == ("floorbeam", "moment at S3")
    assert_allclose(centre.factor, 81 / 90, rtol=HAND)


def test_both_trusses_are_shown_as_one_only_where_they_are_alike() -> None:
    """A pipe of 2 kN/m at z = 1.15: 0.75 of it is the left truss's; its hanger takes 3.9 m of it, 5.85 and 1.95."""
    even = rate(farm_bridge(), [axle(1.9)])
    assert even.alike
    assert {one.part for one in even.rows(0) if one.effect.kind == "axial"} == {"either truss"}
    pipe = Item("pipe", "other", line=2e3, low=1.15, high=1.15)
    eccentric = rate(farm_bridge(KERBS, pipe), [axle(1.9)])
    assert not eccentric.alike
    bars = [one for one in eccentric.rows(0) if one.effect.kind == "axial"]
    assert {one.part for one in bars} == {"left truss", "right truss"}
    assert len(bars) == 2 * len([one for one in even.rows(0) if one.effect.kind == "axial"])
    weights = {one.part: one.permanent / 1e3 for one in bars if one.effect.name == HANGER}
    assert_allclose([weights["left truss"], weights["right truss"]], [5.85, 1.95], rtol=HAND)
    lopsided = axle(1.9, left=0.6, headings=(1,))
    assert not rate(farm_bridge(), [lopsided]).alike
    assert not rate(farm_bridge(Roadway(-1.9, 1.7, clearance=0.35)), [axle(1.9)]).alike


@pytest.mark.parametrize(("presence", "abreast"), [((1.0,), 2), ((1.2, 1.0), 2), ((1.2, 0.8), 1)])
def test_two_abreast_add_with_multiple_presence(presence: tuple[float, ...], abreast: int) -> None:
    """Trusses 7 m apart, kerbs at +-3.2, gauge 1.9: middles within 3.2 - 0.35 - 0.95 = 1.90, 1.9 + 1.2 = 3.1 apart.

    One: 50 + 190/7 = 77.14. Two, at 1.90 and -1.20: 77.14 + 50 - 120/7 = 110. With 1.2 and 1.0 that is 92.57 and 110,
    with 1.2 and 0.8 92.57 and 88. Asked for one lane, or against a kerb, one crosses alone.
    """
    bridge = farm_bridge(Roadway(-3.2, 3.2, clearance=0.35), spacing=7.0)
    method = replace(PERMITTED, multiple_presence=presence)
    alone, two = presence[0] * (50 + 190 / 7), presence[-1] * 110.0
    ratings = rate(bridge, [axle(1.9), Crossing(axle(1.9), lanes=1), Crossing(axle(1.9), "left kerb")], method)
    assert_allclose(on_trusses(ratings), [max(alone, two)] * 2, rtol=HAND)
    assert ratings.rating(0, row_of(ratings.solved.effects, ("left truss", HANGER)), 0).abreast == abreast
    assert_allclose([on_trusses(ratings, 1)[0], on_trusses(ratings, 2)[0]], [alone, alone], rtol=HAND)


def test_brackets_outside_the_trusses() -> None:
    """Brackets of 0.8, stringers at 0, +-1.4, +-2.8; axle at z = 1.8, gauge 2: 50 at 2.8, 0.5 beyond the truss.

    Over the truss 50 x 0.5 = 25 hogs; the truss gets 50 + 180/4.6 = 89.13, the right one 10.87, 10.87 x 2.3 = 25 at S3.
    """
    floor = Floor(Stringers((-2.8, -1.4, 0.0, 1.4, 2.8)), Floorbeams((0.8, 0.8), strength=BEAM))
    bridge = farm_bridge(Roadway(-3.0, 3.0, clearance=0.2), floor=floor)
    ratings = rate(bridge, [Crossing(axle(2.0), "left kerb")])
    assert_allclose(live(ratings, "floorbeam L1", "moment over left truss", side=1), -25.0, rtol=HAND)
    assert_allclose(live(ratings, "floorbeam L1", "moment at S3"), 25.0, rtol=HAND)
    assert_allclose(live(ratings, "floorbeam L1", "shear of left bracket"), 50.0, rtol=HAND)
    assert_allclose(on_trusses(ratings), [50 + 180 / 4.6, 50 - 180 / 4.6], rtol=HAND)
    over = ratings.rating(0, row_of(ratings.solved.effects, ("floorbeam L1", "moment over left truss")), 1)
    assert_allclose(over.factor, 81 / 25, rtol=HAND)
