"""Traffic that stands beside the vehicle asked about and is held fixed: RF = (R - a D - f F) / (b L).

An invented bridge of two lanes over the Alderwater, trusses 8 m apart.
"""

from __future__ import annotations

from dataclasses import replace
from itertools import product
from typing import TYPE_CHECKING, Final

import numpy as np
import pytest
from hypothesis import given
from hypothesis import strategies as st
from numpy.testing import assert_allclose
from oracles.trusses import bottom, pratt, simple_span

from movload import Bridge, Deck, Loading, Member, Truss, Vehicle, rate
from movload.bridge.floor import Floor, Floorbeams, Planks, Stringers
from movload.bridge.permanent import Item, PermanentItems
from movload.bridge.roadway import Roadway
from movload.bridge.strengths import TypedStrength, permitted
from movload.errors import InputError, MissingDataError
from movload.files.factor_sets import read_factor_set
from movload.peaks.governing import formation_extremes
from movload.rating.judge import judge
from movload.rating.solved import solve
from movload.review.hand import explained
from movload.statics.part import row_of
from movload.traffic.abreast import shares_at
from movload.traffic.crossing import Crossing, Train

if TYPE_CHECKING:
    from collections.abc import Callable

    from movload.rating.ratings import Ratings

HAND: Final = 1e-12  # relative: the hand formulas carry all digits
ROUND_OFF: Final = 1e-9  # relative: sums over axles and trains in another order
HALF: Final = 4.0
STRINGERS: Final = (-3.0, -1.5, 0.0, 1.5, 3.0)
WAGON: Final = Loading.of(Vehicle("wagon", [40e3, 60e3], [3.0], gauges=(2.0, 2.0)), "permit")
TRUCK: Final = Loading.of(Vehicle("truck", [100e3], [], gauges=(1.8,)), "legal")
TRAM: Final = Loading.of(Vehicle("tram", [9e3], [], gauges=(1.4,)), "rail")
STRONG: Final = {"L1-L2": permitted(900e3, 900e3), "U1-L2": permitted(700e3, 700e3), "U1-L1": permitted(500e3, 500e3)}
STEEL: Final = TypedStrength({"moment": 400e3, "shear": 300e3, "hogging": 90e3})


def two_lanes(*, floor: bool = True, **changes: object) -> Bridge:
    """Return the bridge; a wheel keeps 0.6 m from the kerbs at +-3.4 m and 1.2 m from its neighbour's."""
    joints, ends = pratt((4.0, 4.0, 4.0, 4.0), [3.0] * 3)
    truss = Truss(joints, [Member(start, end, 5e-3, 200e9, density=0.0) for start, end in ends], simple_span(4))
    beams = Floor(
        Stringers(STRINGERS, strength=STEEL), Floorbeams(strength=STEEL),
        Planks(0.25, 0.8, strength=TypedStrength({"moment": 40e3, "shear": 400e3})),
    )  # fmt: skip
    whole = Bridge(
        "Alderwater road bridge, invented", truss,
        Deck(tuple(bottom(4)), truss_spacing=2 * HALF, roadway=Roadway(-3.4, 3.4, clearance=0.6)),
        permanent=PermanentItems((Item("deck", "components", line=8e3, low=-3.4, high=3.4),)),
        strengths=STRONG, floor=beams if floor else Floor(), impact=0.25,
    )  # fmt: skip
    return replace(whole, **changes)  # type: ignore[arg-type]  # fields by name


def lrfr_bridge() -> Bridge:
    """Return the bridge with one nominal strength, its traffic unknown."""
    strengths = {"L1-L2": TypedStrength(nominal={"tension": 900e3}, condition="good", system="other")}
    return two_lanes(floor=False, impact=None, surface="minor", traffic=float("inf"), strengths=strengths)


def beside(place: str = "anywhere", traffic: Loading = TRUCK, bridge: Bridge | None = None, **more: object) -> Ratings:
    """Return the wagon's ratings with a truck beside it."""
    return rate(bridge or two_lanes(), [Crossing(WAGON, place, beside=traffic, **more)])  # type: ignore[arg-type]


def test_a_bottom_chord_by_hand() -> None:
    """L1-L2 of the left truss, the wagon at the left kerb: RF = (R - D - F)/L, all in kN.

    Four panels of 4 m, 3 m deep: L1-L2 pulls with the moment at U1 over 3 m; a load at L1 gives 12/16 x 4/3 = 1.

        D    deck 8 x 0.5 = 4 a metre of truss: 16 on each panel point, 16 x (1 + 2/3 + 1/3) = 32
        z    the wagon at 3.4 - 0.6 - 1.0 = 1.8: share 0.5 + 1.8/8 = 0.725; the truck at 1.8 - 1.0 - 1.2 - 0.9 = -1.3:
             0.5 - 1.3/8 = 0.3375
        L    60 at L1 x 1 + 40 at L1 - 3 m, 1 m from L0, x 0.25 = 70; or 60 at L1 and 40 at 7 m, x (1 - 3/12 = 0.75)
             = 90: 90 x 0.725 x 1.25 = 81.5625
        F    100 x 1 x 0.3375 x 1.25 = 42.1875
        RF   (900 - 32 - 42.1875)/81.5625 = 10.12490
    """
    ratings = beside("left kerb")
    row = row_of(ratings.solved.effects, ("left truss", "L1-L2"))
    told = explained(ratings, ratings.rating(0, row, 0))
    assert_allclose(told.used / 1e3, 32.0, rtol=HAND)
    assert_allclose((told.live / 1e3, told.held / 1e3), (81.5625, 42.1875), rtol=HAND)
    assert_allclose(told.rating.factor, (900 - 32 - 42.1875) / 81.5625, rtol=HAND)
    assert_allclose(told.rating.factor, 10.1249, atol=5e-5)  # half of the last decimal written above
    assert [(term.vehicle, term.axle, term.held) for term in told.terms] == [(1, 1, False), (1, 2, False), (2, 1, True)]
    assert_allclose([term.z for term in told.terms], [1.8, 1.8, -1.3], rtol=HAND)
    assert_allclose(sum(term.effect for term in told.terms if term.held) / 1e3, 42.1875, rtol=HAND)


def test_margins_and_impact_are_each_their_own() -> None:
    """LRFR, a permit wagon at a crawl beside a legal truck: the wagon's impact is dropped, the truck's is not.

    Its own margin on the legal truck at unknown traffic, 1.45 (from memory), stands beside the permit margin.
    """
    crossing = Crossing(WAGON, "left kerb", beside=TRUCK, speed=2.0)
    ratings = judge(solve(lrfr_bridge(), read_factor_set("lrfr")), [crossing])
    row = row_of(ratings.solved.effects, ("left truss", "L1-L2"))
    for level, title in enumerate(ratings.levels):
        if not ratings.rates(0, level):
            continue
        rating = ratings.rating(0, row, 0, level=level)
        assert_allclose(rating.live / 1e3, 90 * 0.725, rtol=HAND)
        assert_allclose(rating.held / 1e3, 100 * 0.3375 * 1.2, rtol=HAND)
        assert rating.held_factor == 1.45, title
        spare = 0.95 * 900e3 - 1.25 * 32e3 - 1.45 * rating.held
        assert_allclose(rating.factor, spare / (rating.live_factor * rating.live), rtol=HAND)
    assert any(ratings.rates(0, level) for level in range(len(ratings.levels)))


def least_by_search(bridge: Bridge, step: float) -> dict[str, float]:
    """Return the least RF of each member found by trying all places across a grid, of vehicle and truck alike."""
    solved = solve(bridge)
    found: dict[str, float] = {}
    first = 0
    for part in solved.parts[:2]:
        rows = slice(first, first + len(part.response.effects))
        first = rows.stop
        grids = [np.arange(-2.8 + half, 2.8 - half + 1e-9, step) for half in (1.0, 0.9)]
        for z, other in product(*grids):
            if abs(z - other) < 1.0 + 0.9 + 1.2 - 1e-9:
                continue
            trains = [
                Train(one.title, one.cases[0].moving, shares_at(part.across, np.array([at]), gauges, lefts, 1)[0])
                for one, at, gauges, lefts in (
                    (WAGON, z, np.array([2.0, 2.0]), np.full(2, 0.5)), (TRUCK, other, np.array([1.8]), np.full(1, 0.5)),
                )
            ]  # fmt: skip
            impact = np.full((2, rows.stop - rows.start, 2), 0.25)
            highest, lowest = formation_extremes(part.response, [(train,) for train in trains], impact)
            for row, effect in enumerate(part.response.effects):
                for side, live in enumerate((highest, -lowest)):
                    strength = solved.strength[0, first - (rows.stop - rows.start) + row, side]
                    if np.isnan(strength) or live[0, row] <= 0:
                        continue
                    push = (1, -1)[side] * solved.permanent[:, first - (rows.stop - rows.start) + row].sum()
                    factor = max(strength - push - live[1, row], 0.0) / live[0, row]
                    key = f"{part.title} {effect.name} {side}"
                    found[key] = min(found.get(key, np.inf), factor)
    return found


def test_no_place_of_either_gives_less() -> None:
    """A search over all places across 0.1 m apart: never less, and met where the grid holds the corners (it does)."""
    bridge = two_lanes(floor=False)
    ratings = beside(bridge=bridge)
    searched = least_by_search(bridge, 0.1)
    assert len(searched) >= 8
    for key, least in searched.items():
        part, name, side = key.rsplit(" ", 2)
        rating = ratings.rating(0, row_of(ratings.solved.effects, (part, name)), int(side))
        alone = rate(bridge, [Crossing(WAGON, lanes=1)])
        without = alone.rating(0, row_of(alone.solved.effects, (part, name)), int(side)).factor
        assert_allclose(rating.factor, min(least, without), rtol=ROUND_OFF, err_msg=key)


@given(st.lists(st.floats(0.0, 1.0), min_size=3, max_size=3), st.integers(0, 2))
def test_two_others_beside_it_wherever_they_stand(spread: list[float], place: int) -> None:
    """On a deck of three lanes: no places drawn at random, in any order, give less than the rating."""
    roadway = Roadway(-5.6, 5.6, clearance=0.6)
    bridge = two_lanes(floor=False, deck=Deck(tuple(bottom(4)), truss_spacing=12.0, roadway=roadway))
    ratings = beside(bridge=bridge)
    solved = ratings.solved
    gauges = [1.8, 1.8, 1.8]
    gauges[place] = 2.0
    free = 10.0 - sum(gauges) - 2 * 1.2
    cuts = sorted(spread)
    z = [-5.0 + free * cuts[n] + sum(gauges[:n]) + 1.2 * n + 0.5 * gauges[n] for n in range(3)]
    part = solved.parts[0]
    rows = len(part.response.effects)
    live = np.zeros((2, rows, 2))
    for at, gauge, number in zip(z, gauges, range(3), strict=True):
        who = WAGON if number == place else TRUCK
        moving = who.cases[0].moving
        every, lefts = np.full(moving.loads.size, gauge), np.full(moving.loads.size, 0.5)
        train = Train(who.title, moving, shares_at(part.across, np.array([at]), every, lefts, 1)[0])
        highest, lowest = formation_extremes(part.response, [(train,)], np.full((1, rows, 2), 0.25))
        live[int(number != place)] += np.stack((highest[0], -lowest[0]), axis=1)
    stands = solved.permanent[:, :rows].sum(axis=0)
    spare = solved.strength[0, :rows] - np.stack((stands, -stands), axis=1)
    felt = (live[0] > 0) & ~np.isnan(spare)
    drawn = np.maximum(spare - live[1], 0.0)[felt] / live[0][felt]
    assert felt.any()
    assert (ratings.factor[0, 0, :rows][felt] <= drawn * (1.0 + ROUND_OFF)).all()


@given(st.floats(1e3, 400e3), st.sampled_from(["anywhere", "left kerb", "right kerb", "own lane"]))
def test_laws_of_what_is_held_fixed(weight: float, place: str) -> None:
    """Beside traffic no rating rises, beside more of it it falls; a vehicle times its RF rates 1 beside the same."""
    light = Loading.of(Vehicle("truck", [weight], [], gauges=(1.8,)), "legal")
    heavy = Loading.of(Vehicle("truck", [1.3 * weight], [], gauges=(1.8,)), "legal")
    bridge = two_lanes()
    solved = solve(bridge)
    alone = judge(solved, [Crossing(WAGON, place, lanes=1)])
    one, more = (judge(solved, [Crossing(WAGON, place, beside=traffic)]) for traffic in (light, heavy))
    rated = ~np.isnan(alone.factor)
    slack = 1.0 + ROUND_OFF
    assert (one.factor[rated] <= slack * alone.factor[rated]).all()
    assert (more.factor[rated] <= slack * one.factor[rated]).all()
    factor = one.governing(0).factor
    if factor > 0:
        moving = WAGON.cases[0].moving
        grown = Loading.of(Vehicle("wagon", factor * moving.loads, [3.0], gauges=(2.0, 2.0)), "permit")
        again = judge(solved, [Crossing(grown, place, beside=light)])
        assert_allclose(again.governing(0).factor, 1.0, rtol=ROUND_OFF)


def test_every_explanation_adds_up() -> None:
    """Each rated row's terms add up to its live and held effect, and those to its RF, floor included."""
    ratings = beside()
    seen = set()
    for rating in ratings.rows(0):
        told = explained(ratings, rating)
        grows = sum(term.effect for term in told.terms if not term.held)
        stays = sum(term.effect for term in told.terms if term.held)
        assert_allclose([grows, stays], [rating.live, rating.held], rtol=ROUND_OFF, atol=1e-6)
        if rating.live and rating.factor > 0:
            assert_allclose(rating.factor, told.spare / abs(rating.live), rtol=ROUND_OFF)
        if rating.held:
            seen.add(rating.effect.kind)
    assert seen == {"axial", "moment", "shear"}


def test_a_plank_bears_one_wheel_of_the_vehicle_asked_about() -> None:
    ratings = beside()
    rows = [rating for rating in ratings.rows(0) if rating.effect.part == "planks"]
    assert rows
    assert all(rating.held == 0.0 for rating in rows)


def test_traffic_that_leaves_nothing_says_so() -> None:
    """Where the traffic alone uses the strength RF is 0; the governing row says so (see phrases)."""
    heavy = Loading.of(Vehicle("truck", [4e6], [], gauges=(1.8,)), "legal")
    worst = beside(traffic=heavy).governing(0)
    assert worst.factor == 0.0
    assert worst.held != 0.0


@pytest.mark.parametrize(
    ("kind", "said", "make"),
    [
        (InputError, "barge does not fit beside it between the kerbs",
         lambda: beside(traffic=Loading.of(Vehicle("barge", [9e3], [], gauges=(3.0,)), "legal"))),
        (InputError, "with truck beside it one of it crosses, got 2 abreast", lambda: beside(lanes=2)),
        (MissingDataError, "truck beside it cannot be rated from one typed share",
         lambda: beside(bridge=two_lanes(
             floor=False, deck=Deck(tuple(bottom(4)), truss_share=0.6),
             permanent=PermanentItems((Item("deck", "components", line=8e3, share=0.5),))))),
        (MissingDataError, "type gauge",
         lambda: beside(traffic=Loading.of(Vehicle("truck", [9e3], []), "legal"))),
        (InputError, 'no level of "LRFR" rates a loading of kind "rail"',
         lambda: judge(solve(lrfr_bridge(), read_factor_set("lrfr")), [Crossing(WAGON, beside=TRAM)])),
    ],
)  # fmt: skip
def test_what_cannot_be_beside_is_refused(kind: type[Exception], said: str, make: Callable[[], object]) -> None:
    with pytest.raises(kind, match=said):
        make()
