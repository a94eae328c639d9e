"""Vehicles behind one another in a lane: never beaten by any headway tried, and attained by the vehicles that stand."""

from __future__ import annotations

import math
from dataclasses import replace
from itertools import pairwise, permutations, product
from typing import TYPE_CHECKING

import numpy as np
import pytest
from hypothesis import given, settings
from hypothesis import strategies as st
from numpy.testing import assert_allclose
from oracles.trusses import bottom, pratt, simple_span, truss_of
from strategies import Laid, laid, vehicles

from movload import InfluenceLines, Support, Vehicle, influence_lines
from movload.errors import InputError
from movload.peaks.extremes import static_extremes
from movload.peaks.gaps import gap_extremes
from movload.peaks.gaps_convoy import convoy_extremes, convoy_stand
from movload.peaks.placement import panel_loads
from movload.traffic.convoy import Convoy
from movload.traffic.crossing import Train, whole_trains
from movload.traffic.vehicle import Strip

if TYPE_CHECKING:
    from collections.abc import Iterator, Sequence

    from numpy.typing import NDArray

    Floats = NDArray[np.float64]

EXACT = 3e-12  # of all axles on the row's largest ordinate; see SHIFTED in tests/peaks/test_gaps.py
FOOT, KIP = 0.3048, 4448.2216152605

# Invented, in the Alder valley: two spans over a middle bearing, the ends overhanging, so that lines jump and change
# sign.
ALDER = truss_of(pratt([4.2, 3.9, 4.3, 4.1, 4.0, 4.4], [4.6] * 5), [Support("L1"), Support("L3", 0), Support("L5", 0)])
TRACTOR = Vehicle("tractor, invented", [31e3, 62e3], [2.8])
TRAILER = Vehicle("trailer train, invented", [41e3, 88e3, 85e3], [3.7, (1.3, 4.9)])
VAN = Vehicle("van, invented", [12e3, 19e3], [3.1])


def trains_of(convoy: Convoy) -> list[Train]:
    """Return the trains of whole axles, the same one for the same vehicle."""
    return [whole_trains(vehicle)[0] for vehicle in convoy.vehicles]


def scale_of(lines: InfluenceLines, trains: Sequence[Train]) -> Floats:
    """Return the most that any stand could give (R,)."""
    return np.asarray(sum(np.abs(one.felt).sum() for one in trains) * np.abs(lines.ordinates).max(axis=1))


def joined(members: Sequence[Vehicle], headways: Sequence[float]) -> Vehicle:
    """Return rigid vehicles one behind the other as one, the headway a spacing."""
    spacings = list(members[0].spacings)
    for one, headway in zip(members[1:], headways, strict=True):
        spacings += [headway, *one.spacings]
    return Vehicle("joined", np.concatenate([one.loads for one in members]), spacings)


def orders_of(convoy: Convoy) -> Iterator[tuple[Vehicle, ...]]:
    """Yield everybody who may be there, front to back."""
    numbers = range(len(convoy.vehicles))
    for count in range(1, min(convoy.most, len(convoy.vehicles)) + 1):
        for order in permutations(numbers, count):
            if not convoy.ordered or list(order) == sorted(order):
                yield tuple(convoy.vehicles[number] for number in order)


def by_trial(lines: InfluenceLines, convoy: Convoy, more: Floats, widths: int) -> tuple[Floats, Floats]:
    """Return the extremes over every order, headways of the least and ``more``, spacings in ``widths`` steps."""
    single = []
    for order in orders_of(convoy):
        gaps = [np.linspace(*gap, widths) if isinstance(gap, tuple) else [gap] for one in order for gap in one.spacings]
        for chosen in product(*gaps):
            left = iter(chosen)
            rigid = [replace(one, spacings=[float(next(left)) for _ in one.spacings]) for one in order]
            for headways in product(convoy.headway + more, repeat=len(order) - 1):
                single += whole_trains(joined(rigid, [float(one) for one in headways]))
    highest, lowest = static_extremes(lines, single)
    return highest.max(axis=0), lowest.min(axis=0)


def check_attained(lines: InfluenceLines, convoy: Convoy, extremes: tuple[Floats, Floats]) -> None:
    """Check that the vehicles that stand add up to every extreme and keep the rules of the convoy."""
    trains = trains_of(convoy)
    size = scale_of(lines, trains)
    for row, side in product(range(len(lines.effects)), (0, 1)):
        stands = convoy_stand(lines, convoy, trains, (row, side))
        numbers = [one.vehicle for one in stands]
        again = 0.0
        for one in stands:
            x = one.front - one.heading * one.distances
            felt = trains[one.vehicle].felt
            again += float(lines.under(panel_loads(lines.stations, x[None, :], felt).T)[row, 0])
        assert_allclose(again, extremes[side][row], rtol=0.0, atol=EXACT * size[row])
        assert len(set(numbers)) == len(numbers) <= convoy.most
        assert not convoy.ordered or numbers == sorted(numbers)
        for ahead, behind in pairwise(stands):
            assert ahead.heading == behind.heading
            assert ahead.heading * (ahead.front - behind.front) - ahead.distances[-1] >= convoy.headway - 1e-9


@pytest.mark.parametrize(
    "convoy",
    [
        Convoy((TRACTOR, VAN), 2, 3.3),
        Convoy((TRACTOR, TRACTOR), 2, 0.0),
        Convoy((TRACTOR, TRAILER), 2, 6.1, ordered=True),
        Convoy((VAN, TRACTOR, TRACTOR), 2, 4.2),
        Convoy((VAN, TRACTOR, VAN), 3, 1.7, ordered=True),
    ],
)
def test_no_order_headway_or_spacing_tried_beats_a_convoy(convoy: Convoy) -> None:
    lines = influence_lines(ALDER, bottom(6))
    trains = trains_of(convoy)
    highest, lowest = convoy_extremes(lines, convoy, trains)
    more = np.concatenate((np.linspace(0.0, 24.0, 17 if convoy.most == 3 else 49), [40.0]))
    tried = by_trial(lines, convoy, more, 7)
    size = scale_of(lines, trains)
    assert (tried[0] <= highest + EXACT * size).all()
    assert (tried[1] >= lowest - EXACT * size).all()
    assert (
        tried[0] >= highest - 0.1 * size
    ).all()  # half a step of headway, 0.75 m at most, on panels of 3.9 m or more
    assert (tried[1] <= lowest + 0.1 * size).all()
    check_attained(lines, convoy, (highest, lowest))


@settings(max_examples=6, deadline=None)
@given(laid(), vehicles(), vehicles(), st.floats(0.0, 9.0) | st.sampled_from([0.0, 5.0]), st.booleans())
def test_two_drawn_vehicles(bridge: Laid, one: Vehicle, other: Vehicle, headway: float, ordered: bool) -> None:
    lines = influence_lines(bridge.truss, bridge.panel_points)
    both_ways = [replace(vehicle, headings=(1, -1)) for vehicle in (one, other)]
    convoy = Convoy(tuple(both_ways), 2, headway, ordered)
    trains = trains_of(convoy)
    extremes = convoy_extremes(lines, convoy, trains)
    tried = by_trial(lines, convoy, np.array([0.0, 0.7, 2.3, 6.1, 90.0]), 2)
    size = scale_of(lines, trains)
    assert (tried[0] <= extremes[0] + EXACT * size).all()
    assert (tried[1] >= extremes[1] - EXACT * size).all()
    check_attained(lines, convoy, extremes)


@settings(max_examples=12, deadline=None)
@given(laid(), st.lists(vehicles(), min_size=1, max_size=3), st.sampled_from([math.inf, 1e4, 60.0]))
def test_a_headway_beyond_the_deck_is_one_vehicle(bridge: Laid, some: list[Vehicle], headway: float) -> None:
    lines = influence_lines(bridge.truss, bridge.panel_points)  # the longest drawn deck is 61.1 m
    headway = max(headway, float(np.ptp(lines.stations)) + 0.1)
    convoy = Convoy(tuple(some), len(some), headway)
    trains = trains_of(convoy)
    highest, lowest = gap_extremes(lines, trains)
    found = convoy_extremes(lines, convoy, trains)
    size = scale_of(lines, trains)
    assert (np.abs(found[0] - highest.max(axis=0)) <= EXACT * size).all()
    assert (np.abs(found[1] - lowest.min(axis=0)) <= EXACT * size).all()


def test_a_vehicle_that_relieves_stays_away() -> None:
    """Two spans of 20 m and a headway of 20.5 m: one vehicle in the span asked about, and no other comes."""
    truss = truss_of(pratt([5.0] * 8, [5.6] * 7), [Support("L0"), Support("L4", 0), Support("L8", 0)])
    lines = influence_lines(truss, bottom(8))
    convoy = Convoy((VAN, TRACTOR), 2, 20.5)
    row = [effect.name for effect in lines.effects].index("L1-L2")
    (stand,) = convoy_stand(lines, convoy, trains_of(convoy), (row, 0))
    assert stand.vehicle == 1
    assert_allclose(stand.value, convoy_extremes(lines, convoy, trains_of(convoy))[0][row], rtol=1e-12)


def test_shares_and_headings_of_each_train_count() -> None:
    lines = influence_lines(ALDER, bottom(6))
    convoy = Convoy((TRACTOR, VAN), 2, 3.0)
    trains = trains_of(convoy)
    halves = [replace(one, shares=0.5 * one.shares) for one in trains]
    whole, half = (convoy_extremes(lines, convoy, some) for some in (trains, halves))
    assert_allclose(half, 0.5 * np.array(whole), rtol=1e-13, atol=1e-9)
    apart = [replace(trains[0], headings=(1,)), replace(trains[1], headings=(-1,))]  # they never head one way
    found = convoy_extremes(lines, convoy, apart)
    alone = gap_extremes(lines, apart)
    assert_allclose(found[0], alone[0].max(axis=0), rtol=1e-12)
    assert_allclose(found[1], alone[1].min(axis=0), rtol=1e-12)


def test_two_3s2_at_30_feet_raise_an_end_post_by_seven_per_cent() -> None:
    """Two 3S2 (72 k; 10, 4 x 15.5 k at 11, 4, 22, 4 ft, from memory) at 30 ft on 98 ft: 59.9 becomes 64.0 k, +7 %.

    From the job's notes, no source named: indicative only, for they state neither panels nor depth. An end post is the
    end panel's shear times its length over its depth, so the rise depends on the panels only; seven of 14 ft are taken.
    Tolerance: half of one per cent, the last digit given.
    """
    lines = influence_lines(truss_of(pratt([14 * FOOT] * 7, [16 * FOOT] * 6), simple_span(7)), bottom(7))
    truck = Vehicle("3S2", [10 * KIP, *[15.5 * KIP] * 4], [11 * FOOT, 4 * FOOT, 22 * FOOT, 4 * FOOT])
    convoy = Convoy((truck, truck), 2, 30 * FOOT)
    row = [effect.name for effect in lines.effects].index("L0-U1")
    together = convoy_extremes(lines, convoy, trains_of(convoy))[1][row]
    alone = static_extremes(lines, [*whole_trains(truck)])[1][0][row]
    assert_allclose(together / alone - 1.0, 0.07, rtol=0.0, atol=0.005)


def test_a_column_of_ten_alike_is_followed_in_any_order() -> None:
    """Alike vehicles in any order are one order: ten of them are eleven remainders, not a thousand."""
    lines = influence_lines(ALDER, bottom(6))
    free = Convoy((VAN,) * 10, 10, 2.0)
    ordered = Convoy((VAN,) * 10, 10, 2.0, ordered=True)
    trains = trains_of(free)
    assert_allclose(
        np.array(convoy_extremes(lines, free, trains)), np.array(convoy_extremes(lines, ordered, trains)), rtol=1e-12
    )


def test_bad_convoys_are_refused_by_name() -> None:
    with pytest.raises(InputError, match=r"convoy\.headway: a headway must be 0 or more, got -0\.5 m"):
        Convoy((VAN,), 1, -0.5)
    with pytest.raises(InputError, match=r"convoy\.headway: a headway must be 0 or more, got nan m"):
        Convoy((VAN,), 1, math.nan)
    with pytest.raises(InputError, match=r"convoy\.most: a convoy is of 1 or more, got at most 0"):
        Convoy((VAN,), 0, 5.0)
    with pytest.raises(InputError, match=r"convoy\.vehicles: a convoy needs at least one vehicle"):
        Convoy((), 1, 5.0)


def test_convoys_that_would_take_too_long_are_refused() -> None:
    lines = influence_lines(ALDER, bottom(6))
    long = Vehicle("long", np.full(101, 1e3), np.full(100, 1.0).tolist())
    loose = Vehicle("loose", np.full(8, 1e3), [(1.0, 2.0)] * 7)
    many = tuple(Vehicle(f"van {number}", [1e3], []) for number in range(7))
    for members, words in (
        ((long, long), "convoy: at most 200 axles together can be swept, got 202"),
        ((loose, loose), "convoy: at most 12 variable spacings together can be swept, got 14"),
        (many, r"convoy\.vehicles: in any order at most 64 sets .* got 128; state their order"),
    ):
        convoy = Convoy(members, 2, 5.0)
        with pytest.raises(InputError, match=words):
            convoy_extremes(lines, convoy, trains_of(convoy))
    with pytest.raises(InputError, match="convoy: a convoy of 2 needs the train of each"):
        convoy_extremes(lines, Convoy((VAN, TRACTOR), 2, 5.0), trains_of(Convoy((VAN,), 1, 5.0)))
    tracked = Vehicle("tracked", [1e3], [], strips=(Strip(0.0, 2.0, 5e3),))
    with pytest.raises(InputError, match="tracked: uniform loads cannot move"):
        convoy_extremes(lines, Convoy((tracked,), 1, 5.0), [Train("tracked", tracked, np.ones(1))])
