"""A governing figure taken apart: its terms are what a person would write down, and add up to it."""

from __future__ import annotations

import numpy as np
import pytest
from hypothesis import given, settings
from hypothesis import strategies as st
from numpy.testing import assert_allclose
from rating.bridges import CART, IMPACT, SHARE, TWO_TRUSSES, brook, part_of, solved_by_hand
from strategies import Laid, laid, vehicles

from movload import Crossing, Loading, Vehicle, influence_lines, judge, rate, sweep
from movload.bridge.across import Across
from movload.peaks.peaks import stacked
from movload.peaks.sweep import part_peaks
from movload.review.hand import terms
from movload.statics.part import row_of
from movload.traffic.crossing import Train

ADDED = 1e-12  # relative to the terms' sizes: round-off of at most 8 of them, and of a hundred-odd panels' shares


@settings(max_examples=15)  # every row of every truss, twice
@given(laid(), vehicles(), st.floats(0.0, 0.5), st.floats(0.1, 1.3))
def test_terms_add_up_to_every_peak(bridge: Laid, vehicle: Vehicle, impact: float, share: float) -> None:
    lines = influence_lines(bridge.truss, bridge.panel_points)
    allowance = np.outer(np.linspace(1.0, 0.3, len(lines.effects)), [impact, 0.5 * impact])
    train = Train("drawn", vehicle, np.full(vehicle.loads.size, share))
    (part,) = part_peaks(lines, [((train,),)], allowance[None])
    peaks = stacked("drawn", [part])
    for row in range(len(lines.effects)):
        for side in (0, 1):
            peak, summed = peaks.peak(row, side), terms(peaks, row, side)
            size = sum(abs(term.effect) for term in summed)
            assert_allclose(sum(term.effect for term in summed), peak.value, rtol=0.0, atol=ADDED * size)
            assert len(summed) == (vehicle.loads.size if peak.heading else 0)


@settings(max_examples=15)  # the same
@given(laid(), vehicles())
def test_each_term_is_a_product_read_off_the_line(bridge: Laid, vehicle: Vehicle) -> None:
    """Each effect is load x share x (1 + I) x ordinate, the ordinate as the line itself gives it, 0 off the bridge."""
    lines = influence_lines(bridge.truss, bridge.panel_points)
    peaks = sweep(lines, vehicle)
    first, last = lines.stations[0], lines.stations[-1]
    for row, effect in enumerate(lines.effects):
        largest = float(np.abs(lines.ordinates[row]).max())
        for side in (0, 1):
            for number, term in enumerate(terms(peaks, row, side), start=1):
                assert term.axle == number
                assert (term.load, term.share, term.impact) == (vehicle.loads[number - 1], 1.0, 0.0)
                assert term.effect == term.load * term.share * term.factor * (1.0 + term.impact) * term.ordinate
                beside_an_end = min(abs(term.x - first), abs(term.x - last)) < 1e-9
                if first < term.x < last and not beside_an_end:
                    expected = lines[effect.key].at(term.x)
                    assert_allclose(term.ordinate, expected, rtol=0.0, atol=ADDED * largest)
                elif not beside_an_end:
                    assert term.ordinate == 0.0


def test_the_terms_of_a_rating_carry_its_share_and_impact() -> None:
    """Hanger U1-L1: 50 kN on L1 (ordinate 1), 30 kN 2.1 m off in the 4.1 m panel (1 - 2.1 / 4.1 = 0.4878)."""
    ratings = rate(brook(), [CART])
    row = row_of(ratings.solved.effects, "U1-L1")
    front, rear = terms(ratings.peaks[0], row, 0)
    assert (front.load, front.share, front.impact) == (30e3, SHARE, IMPACT)
    assert_allclose([front.x, rear.x], [2.0, 4.1], rtol=1e-12)
    assert_allclose([front.ordinate, rear.ordinate], [1 - 2.1 / 4.1, 1.0], rtol=1e-12)
    assert_allclose([front.effect, rear.effect], [30e3 * 0.78 * (1 - 2.1 / 4.1), 50e3 * 0.78], rtol=1e-12)


def test_an_axle_on_the_last_station_counts_and_one_beyond_does_not() -> None:
    """The bearing at L4 carries an axle on it whole; the axle that has already left carries nothing."""
    ratings = rate(brook(), [Vehicle("long", [5e3, 70e3], [2.3], headings=(1,))])
    row = row_of(ratings.solved.effects, "L4 normal")
    left, standing = terms(ratings.peaks[0], row, 0)
    assert_allclose([left.x, standing.x], [18.3, 16.0], rtol=1e-12)
    assert (left.ordinate, left.effect) == (0.0, 0.0)
    assert_allclose(standing.ordinate, 1.0, rtol=1e-12)
    assert_allclose(standing.effect, ratings.rating(0, row, 0).live, rtol=1e-12)


def test_a_vehicle_longer_than_the_bridge() -> None:
    ratings = rate(brook(), [Vehicle("convoy", [30e3, 50e3, 40e3], [40.0, 40.0])])
    row = row_of(ratings.solved.effects, "U1-L1")
    assert [bool(term.ordinate) for term in terms(ratings.peaks[0], row, 0)] == [False, True, False]


def test_nothing_to_add_when_the_vehicle_is_off() -> None:
    ratings = rate(brook(), [CART])
    assert terms(ratings.peaks[0], row_of(ratings.solved.effects, "L0-L1"), 1) == ()


@pytest.mark.parametrize(
    ("row", "share", "impact", "x"), [(0, 0.75, 0.1, 4.0), (1, 0.75, 0.2, 4.0), (2, 0.25, 0.3, 7.0)]
)
def test_each_part_is_added_on_its_own_lines(row: int, share: float, impact: float, x: float) -> None:
    parts = [
        part_of("left", {"tie": [0.0, 1.5, 0.0], "strut": [0.0, -0.5, 0.0]}, [0.0, 4.0, 8.0],
                Across(np.array([-2.0, 2.0]), np.array([0.0, 1.0]))),
        part_of("right", {"tie": [0.0, 0.5, 2.0, 0.0]}, [-1.0, 3.0, 7.0, 12.0],
                Across(np.array([-2.0, 2.0]), np.array([1.0, 0.0]))),
    ]  # fmt: skip
    solved = solved_by_hand(parts, impact=[(0.1, 0.1), (0.2, 0.2), (0.3, 0.3)], roadway=TWO_TRUSSES)
    ratings = judge(solved, [Crossing(Loading.of(Vehicle("axle", [40e3], [], gauges=(0.6,))), "offset", 1.0)])
    side = 1 if row == 1 else 0
    (term,) = terms(ratings.peaks[0], row, side)
    assert_allclose([term.x, term.load, term.share, term.impact], [x, 40e3, share, impact], rtol=1e-12)
    assert_allclose(term.effect, ratings.rating(0, row, side).live, rtol=1e-12)
