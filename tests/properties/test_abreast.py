"""Laws of the places across: none that was sampled beats those found, whatever the part's rows may be.

A row is stood in for by what is used of it: the greatest of a few linear functions of the axles' shares, and 0 (the
vehicle off the bridge). Vehicles abreast are each where they are worst along the bridge, so their values add.
"""

from __future__ import annotations

from dataclasses import dataclass
from itertools import combinations, pairwise
from typing import TYPE_CHECKING

import numpy as np
import pytest
from hypothesis import assume, example, given, settings
from hypothesis import strategies as st
from numpy.testing import assert_allclose

from movload.bridge.across import Across
from movload.bridge.roadway import PLACES, Roadway, span_of_place
from movload.errors import InputError
from movload.traffic.abreast import candidate_places, shares_at, worst_groups

if TYPE_CHECKING:
    from movload.arrays import Floats

EXACT = 1e-12  # of the greatest ordinate times the row's greatest weights: shares in one ratio "but for round-off"
HAIR = 1e-9  # m: two vehicles that near to their distance keep it

ordinates = st.sampled_from([0.0, 0.0, 1.0]) | st.floats(-0.6, 1.4)
gauges = st.lists(st.floats(0.5, 2.6), min_size=1, max_size=3)
weights = st.floats(-1.0, 1.0)


@dataclass(frozen=True, slots=True)
class Deck:
    """A line across, a vehicle on it, its room, and rows (M, A) of one part."""

    across: Across
    gauges: Floats
    left: Floats
    heading: int
    room: tuple[float, float]
    apart: float
    rows: Floats

    def shares(self, z: Floats) -> Floats:
        """Return the share of each axle at each z."""
        return shares_at(self.across, z, self.gauges, self.left, self.heading)

    def felt(self, z: Floats) -> Floats:
        """Return what the part feels of a vehicle at each z (K,)."""
        return np.maximum(self.shares(z) @ self.rows.T, 0.0).max(axis=1)

    @property
    def exact(self) -> float:
        """What round-off may make of the value of three vehicles."""
        return EXACT * (1.0 + 3.0 * np.abs(self.across.ordinate).max() * np.abs(self.rows).sum(axis=1).max())

    def worst(self, count: int) -> float:
        """Return the most that the sets found give; -1 where none fits."""
        z = candidate_places(self.across, self.room, self.gauges, apart=self.apart, most=count)
        assert (np.diff(z) > 0.0).all()
        assert z[0] == self.room[0]
        groups = worst_groups(self.shares(z), z, self.apart, count)
        assert groups == sorted(set(groups))
        for group in groups:
            assert len(group) == count
            assert all(z[b] - z[a] >= self.apart - HAIR for a, b in pairwise(group))
        return float(self.felt(z)[np.array(groups)].sum(axis=1).max()) if groups else -1.0


@st.composite
def decks(draw: st.DrawFn, *, alike: bool = False) -> Deck:
    """Draw stringers or trusses 0.4 to 2.3 m apart, straight stretches too, and what stands on them."""
    steps = draw(st.lists(st.floats(0.4, 2.3) | st.just(0.9), min_size=1, max_size=7))
    z = np.cumsum([-0.5 * sum(steps), *steps])
    line = draw(st.lists(ordinates, min_size=z.size, max_size=z.size))
    across = Across(z, np.array(line))
    axles = draw(gauges.map(lambda some: some[:1]) if alike else gauges)
    left = draw(st.just([0.5] * len(axles)) | st.lists(st.floats(0.2, 0.8), min_size=len(axles), max_size=len(axles)))
    low, high = z[0] + 0.5 * max(axles), z[-1] - 0.5 * max(axles)
    assume(high > low)
    apart = max(axles) + draw(st.floats(0.3, 1.2))
    rows = draw(st.lists(st.lists(weights, min_size=len(axles), max_size=len(axles)), min_size=1, max_size=4))
    heading = draw(st.sampled_from([1, -1]))
    return Deck(across, np.array(axles), np.array(left), heading, (float(low), float(high)), apart, np.array(rows))


def sampled(deck: Deck, size: int) -> Floats:
    """Return places all over the room [m]."""
    return np.linspace(*deck.room, size)


@settings(max_examples=150)
@given(decks())
def test_no_sampled_place_beats_the_worst(deck: Deck) -> None:
    assert deck.felt(sampled(deck, 1009)).max() <= deck.worst(1) + deck.exact


@settings(max_examples=150)
@given(decks(), st.sampled_from([2, 3]))
def test_no_sampled_places_abreast_beat_the_worst(deck: Deck, count: int) -> None:
    """Every set of sampled places that keep apart, by a walk from right to left over what was best so far."""
    z = sampled(deck, 2003)
    felt = best = deck.felt(z)
    reach = np.searchsorted(z, z - deck.apart, side="right")
    for _ in range(count - 1):
        before = np.concatenate(([-np.inf], np.maximum.accumulate(best)))
        best = felt + before[reach]
    assert best.max() <= deck.worst(count) + deck.exact


@settings(max_examples=100)
@given(decks(), st.sampled_from([1, 2, 3]))
def test_the_few_sets_are_as_bad_as_all_sets(deck: Deck, count: int) -> None:
    z = candidate_places(deck.across, deck.room, deck.gauges, apart=deck.apart, most=count)
    assume(z.size < 70)
    felt = deck.felt(z)
    every = apart_by(z, deck.apart, count)
    most = max((float(felt[list(chosen)].sum()) for chosen in every), default=-1.0)
    assert_allclose(deck.worst(count), most, rtol=0.0, atol=deck.exact)


def apart_by(z: Floats, apart: float, count: int) -> list[tuple[int, ...]]:
    """Return all sets of places that keep apart, one by one."""
    return [
        chosen
        for chosen in combinations(range(z.size), count)
        if all(z[b] - z[a] >= apart - HAIR for a, b in pairwise(chosen))
    ]


@settings(max_examples=150)
@given(
    st.lists(st.tuples(st.floats(0.0, 1.5), st.integers(-8, 8)), max_size=11),
    st.sampled_from([1, 2, 3, 4]),
    st.floats(0.2, 2.0),
)
@example([(1.0, 8)] * 6, 3, 1.0)  # all alike: the first set
@example([(1.0, 5), (1.0, -3), (1.0, 5), (1.0, -3)], 2, 1.0)
def test_sets_of_alike_axles_are_the_unbeaten_of_all(places: list[tuple[float, int]], count: int, apart: float) -> None:
    """Shares in eighths of the greatest sum without round-off, so ties are exact: of equals the first set counts."""
    z = np.cumsum([0.01 + step for step, _ in (*places, (0.5, 8))])
    worth = np.array([eighths for _, eighths in (*places, (0.5, 8))]) / 8.0
    sums: dict[tuple[float, float], tuple[int, ...]] = {}
    for chosen in apart_by(z, apart, count):
        values = worth[list(chosen)]
        sums.setdefault((values[values > 0.0].sum(), -values[values < 0.0].sum()), chosen)
    unbeaten = [
        chosen
        for (up, down), chosen in sums.items()
        if not any(u >= up and d >= down and (u, d) != (up, down) for u, d in sums)
    ]
    for ratio in ([1.0], [1.0, 0.5, 0.25]):
        assert worst_groups(worth[:, None] * np.array(ratio), z, apart, count) == sorted(unbeaten)


@given(decks(), st.sampled_from([1, 2]))
def test_a_mirrored_deck_is_as_bad(deck: Deck, count: int) -> None:
    mirrored = Deck(
        Across(-deck.across.z[::-1], deck.across.ordinate[::-1]), deck.gauges, deck.left, -deck.heading,
        (-deck.room[1], -deck.room[0]), deck.apart, deck.rows,
    )  # fmt: skip
    assert_allclose(mirrored.worst(count), deck.worst(count), rtol=0.0, atol=deck.exact)


@given(st.floats(2.0, 9.0), gauges, st.floats(0.2, 0.8), st.sampled_from([1, -1]), st.floats(-1.0, 1.0))
def test_two_trusses_carry_the_whole_of_every_axle(
    spacing: float, axles: list[float], left: float, heading: int, where: float
) -> None:
    trusses = np.array([-0.5 * spacing, 0.5 * spacing])
    room = 0.5 * (spacing - max(axles))
    assume(room >= 0.0)
    of_both = [
        shares_at(Across(trusses, ends), np.array([where * room]), np.array(axles), np.full(len(axles), left), heading)
        for ends in (np.array([0.0, 1.0]), np.array([1.0, 0.0]))
    ]
    assert_allclose(sum(of_both), 1.0, rtol=0.0, atol=1e-14)  # sums of metres divided by the spacing


@given(
    st.tuples(st.floats(-9.0, 2.0), st.floats(0.0, 0.9), st.floats(0.3, 1.5), st.floats(0.5, 3.0)),
    st.sampled_from([1, 2, 3, 4]),
    st.booleans(),
)
def test_as_many_as_fit_do_stand_abreast(
    measured: tuple[float, float, float, float], count: int, two_gauges: bool
) -> None:
    """A roadway just wide enough, by sums that round off: the count and the sets found agree."""
    right, clearance, between, gauge = measured
    left = right + clearance + count * gauge + (count - 1) * between + clearance
    roadway = Roadway(right, left, clearance=clearance, between=between)
    assert roadway.abreast(gauge) == count
    axles = np.array([gauge, 0.7 * gauge]) if two_gauges else np.array([gauge])
    apart = gauge + between
    line = Across(np.linspace(right - 0.1, left + 0.1, 6), np.array([0.1, 0.0, 0.7, 0.2, 1.1, -0.3]))
    z = candidate_places(line, roadway.room(gauge), axles, apart=apart, most=count)
    groups = worst_groups(shares_at(line, z, axles, np.full(axles.size, 0.5), 1), z, apart, count)
    wanted = roadway.right + clearance + 0.5 * gauge + apart * np.arange(count)
    assert groups
    for group in groups:
        assert_allclose(z[list(group)], wanted, rtol=0.0, atol=HAIR)


@given(
    st.tuples(st.floats(1.0, 9.0), st.floats(0.0, 0.6), st.floats(0.5, 3.0)),
    st.sampled_from(PLACES),
    st.sampled_from([1, -1]),
    st.floats(-3.0, 3.0),
    st.floats(0.0, 2.0),
)
def test_every_place_keeps_the_wheels_between_the_kerbs(
    measured: tuple[float, float, float], place: str, heading: int, z: float, wander: float
) -> None:
    width, clearance, gauge = measured
    roadway = Roadway(0.3 - 0.5 * width, 0.3 + 0.5 * width, clearance=clearance)
    try:
        low, high = span_of_place(roadway, place, gauge=gauge, heading=heading, z=z, wander=wander)
    except InputError:
        fits = width - 2.0 * clearance >= gauge
        assert not fits or place in {"own lane", "offset"}
        return
    assert low <= high
    assert low - 0.5 * gauge >= roadway.right + clearance - HAIR
    assert high + 0.5 * gauge <= roadway.left - clearance + HAIR


@given(decks(alike=True), st.sampled_from([1, 2, 3]))
def test_one_gauge_that_no_row_is_relieved_by_has_one_worst_set(deck: Deck, count: int) -> None:
    """Where no share is negative a truss, a stringer, a beam all need one set only."""
    up = Across(deck.across.z, np.abs(deck.across.ordinate))
    z = candidate_places(up, deck.room, deck.gauges, apart=deck.apart, most=count)
    shares = shares_at(up, z, deck.gauges, deck.left, deck.heading)
    assert len(worst_groups(shares, z, deck.apart, count)) == bool(apart_by(z, deck.apart, count))


def test_the_samples_can_tell() -> None:
    """Without one of the places found, a sampled one is worse: the laws above can fail."""
    line = Across(np.array([-3.0, -0.4, 3.0]), np.array([0.0, 1.0, 0.0]))
    deck = Deck(line, np.array([1.1]), np.array([0.7]), 1, (-2.4, 2.4), 1.7, np.array([[1.0]]))
    ends = np.array(deck.room)
    assert deck.felt(sampled(deck, 1009)).max() > deck.felt(ends).max() + 0.1
    assert deck.felt(sampled(deck, 1009)).max() == pytest.approx(deck.worst(1), abs=0.01)
