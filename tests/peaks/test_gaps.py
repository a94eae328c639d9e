"""Spacings that may vary: never beaten by a grid of spacings, and attained by the stand that is reported."""

from __future__ import annotations

from dataclasses import replace
from itertools import product
from typing import TYPE_CHECKING

import numpy as np
import pytest
from hypothesis import given, settings
from hypothesis import strategies as st
from numpy.testing import assert_allclose
from oracles.stepping import sampled
from oracles.trusses import bottom, pratt, simple_span, truss_of
from strategies import Laid, laid, vehicles

from movload import InfluenceLines, Support, Vehicle, influence_lines
from movload.errors import InputError
from movload.peaks.extremes import static_extremes
from movload.peaks.gaps import gap_extremes, gap_stand
from movload.peaks.gaps_bent import Ranges, bent
from movload.peaks.gaps_chain import chain
from movload.peaks.gaps_rows import Rows, groups_of, lines_of
from movload.peaks.placement import panel_loads
from movload.traffic.crossing import Train, whole_trains
from movload.traffic.vehicle import Strip

if TYPE_CHECKING:
    from collections.abc import Sequence

EXACT = 1e-12  # of all axles on the row's largest ordinate: the same sums of few products, in another order
SHIFTED = 3e-12  # of the same: a lost axle stands 1.5 edges out, 1.5e-13 of the last station, on panels of 1/20 of it
FOOT = 0.3048  # m

# Invented, in the Alder valley: two spans over a middle bearing, so that chords beside it feel both spans alike.
ALDER = truss_of(
    pratt([5.2, 4.9, 5.3, 5.1, 5.0, 5.4, 4.8, 5.2], [5.6] * 7),
    [Support("L0"), Support("L4", 0), Support("L8", 0)],
    lambda bar: 4e-3 + 1e-3 * (bar % 3),
)


def train_of(vehicle: Vehicle) -> Train:
    """Return the train of whole axles."""
    (train,) = whole_trains(vehicle)
    return train


def with_ranges(vehicle: Vehicle, widths: Sequence[float]) -> Vehicle:
    """Return a vehicle whose first spacings may be more by ``widths`` [m]."""
    gaps = [float(np.min(gap)) for gap in vehicle.spacings]
    wider = [(gap, gap + width) for gap, width in zip(gaps, widths, strict=False)]
    return replace(vehicle, spacings=[*wider, *gaps[len(wider) :]])


def settled(train: Train, count: int) -> list[Train]:
    """Return the rigid trains with ``count`` spacings from each range, in every combination."""
    choices = [np.linspace(*gap, count) if isinstance(gap, tuple) else [gap] for gap in train.vehicle.spacings]
    return [replace(train, vehicle=replace(train.vehicle, spacings=one)) for one in product(*choices)]


def scale_of(response: InfluenceLines, train: Train) -> np.ndarray[tuple[int], np.dtype[np.float64]]:
    """Return the most that any stand could give (R,): all axles on each row's largest ordinate."""
    return np.asarray(np.abs(train.felt).sum() * np.abs(response.ordinates).max(axis=1))


def check_not_beaten(response: InfluenceLines, train: Train, count: int) -> None:
    """Check that no combination of spacings beats the extremes, each at its own exact worst position."""
    highest, lowest = (one[0] for one in gap_extremes(response, [train]))
    by_grid = static_extremes(response, settled(train, count))
    size = scale_of(response, train)
    assert (by_grid[0] <= highest + SHIFTED * size).all()
    assert (by_grid[1] >= lowest - SHIFTED * size).all()


def check_attained(response: InfluenceLines, train: Train) -> None:
    """Check that every row's extremes are reproduced by what their stand puts on the panel points."""
    extremes = [one[0] for one in gap_extremes(response, [train])]
    size = scale_of(response, train)
    for row, side in product(range(len(response.effects)), (0, 1)):
        stand = gap_stand(response, train, row, side)
        if extremes[side][row] == 0.0:
            assert abs(stand.value) <= SHIFTED * size[row]
            continue
        for found, asked in zip(np.diff(stand.distances), train.vehicle.spacings, strict=True):
            assert np.min(asked) - 1e-9 <= found <= np.max(asked) + 1e-9
        assert stand.heading in train.headings
        x = stand.front - stand.heading * stand.distances
        again = response.under(panel_loads(response.stations, x[None, :], train.felt).T)[row, 0]
        assert_allclose(again, stand.value, rtol=0.0, atol=EXACT * size[row])
        assert_allclose(again, extremes[side][row], rtol=0.0, atol=SHIFTED * size[row])
        assert_allclose(x[stand.axle], response.stations[stand.station], rtol=0.0, atol=1e-10)


widths = st.lists(st.floats(0.2, 6.0) | st.sampled_from([1.0, 5.0]), min_size=1, max_size=3)


@settings(max_examples=15, deadline=None)
@given(laid(), vehicles().filter(lambda one: one.loads.size > 1), widths)
def test_no_grid_of_spacings_beats_it_and_its_stand_attains_it(bridge: Laid, rigid: Vehicle, more: list[float]) -> None:
    lines = influence_lines(bridge.truss, bridge.panel_points)
    train = train_of(with_ranges(rigid, more))
    check_not_beaten(lines, train, 9 if len(train.vehicle.spacings) == 1 else 4)
    check_attained(lines, train)


@settings(max_examples=15, deadline=None)
@given(laid(), vehicles().filter(lambda one: one.loads.size > 1), st.floats(0.2, 6.0))
def test_pairs_of_places_and_carried_functions_agree(bridge: Laid, rigid: Vehicle, more: float) -> None:
    """One gap is found in two independent ways: pairs of breakpoints, and piecewise linear functions."""
    lines = influence_lines(bridge.truss, bridge.panel_points)
    train = train_of(with_ranges(rigid, [more]))
    signed = np.concatenate((lines_of(lines), -lines_of(lines)))
    by_heading = [
        chain(groups_of(train), Rows.seen(lines.stations, signed, heading), 1.0)[0].highest
        for heading in train.headings
    ]
    carried = np.maximum(np.max(by_heading, axis=0), 0.0)
    highest, lowest = gap_extremes(lines, [train])
    size = np.tile(scale_of(lines, train), 2)
    assert (np.abs(carried - np.concatenate((highest[0], -lowest[0]))) <= SHIFTED * size).all()


@pytest.mark.parametrize(
    "spacings",
    [
        [(2.9, 5.6), 1.3, (3.7, 6.4)],
        [(2.9, 3.4), (3.1, 5.2), (1.2, 4.9)],
        [(5.2, 41.2), (0.0, 5.3), 4.9],  # round with the panels, and axles that can coincide
    ],
)
def test_two_and_three_ranges_against_a_fine_grid(spacings: list[float | tuple[float, float]]) -> None:
    """Positions every 70 mm times spacings in 14 steps come within what half a step of either can change."""
    lines = influence_lines(ALDER, bottom(8))
    train = train_of(Vehicle("Alderwater log truck, invented", [52e3, 98e3, 91e3, 76e3], spacings))
    highest, lowest = (one[0] for one in gap_extremes(lines, [train]))
    size = scale_of(lines, train)
    grid = settled(train, 14 if sum(isinstance(gap, tuple) for gap in spacings) == 2 else 8)
    fronts = np.arange(-1.0, 90.0, 0.07)
    best = np.zeros((2, size.size))
    for one in grid[:: max(1, len(grid) // 30)]:  # a part of them at sampled positions, all at exact ones
        for heading in (1, -1):
            effects = sampled(lines, one.vehicle, fronts if heading == 1 else 41.0 - fronts, heading)
            best = np.array([np.maximum(best[0], effects.max(axis=1)), np.minimum(best[1], effects.min(axis=1))])
    assert (best[0] <= highest + SHIFTED * size).all()
    assert (best[1] >= lowest - SHIFTED * size).all()
    exact = static_extremes(lines, grid)
    assert (exact[0].max(axis=0) <= highest + SHIFTED * size).all()
    assert (exact[1].min(axis=0) >= lowest - SHIFTED * size).all()
    # half a step of each range moves a load by that much on panels of 4.8 m, over which no ordinate changes by more
    # than twice the largest
    step = max(np.ptp(gap) / 7.0 for gap in spacings if isinstance(gap, tuple))
    assert (exact[0].max(axis=0) >= highest - step / 4.8 * size).all()
    check_attained(lines, train)


def test_a_wide_rear_spacing_governs_where_both_spans_pull_alike() -> None:
    """HS20 with its rear axle 14 to 30 ft behind (from memory) on two spans of 11.6 m, invented.

    The top chord over the middle bearing feels loads in both spans alike, so its worst spacing is wide; the bottom
    chord in the middle of a span wants the axles close together, at the least.
    """
    panels = [2.9, 2.8, 3.0, 2.9, 2.9, 3.0, 2.8, 2.9]
    alder = truss_of(pratt(panels, [3.1] * 7), [Support("L0"), Support("L4", 0), Support("L8", 0)])
    lines = influence_lines(alder, bottom(8))
    kip = 4448.2216152605
    train = train_of(Vehicle("HS20", [8 * kip, 32 * kip, 32 * kip], [14 * FOOT, (14 * FOOT, 30 * FOOT)]))
    highest, lowest = (one[0] for one in gap_extremes(lines, [train]))
    names = [effect.name for effect in lines.effects]
    short, long = static_extremes(lines, settled(train, 2))[0]
    over, inside = names.index("U4-U5"), names.index("L1-L2")
    assert short[over] < long[over] <= highest[over] * (1.0 + EXACT)
    wide = gap_stand(lines, train, over, 0)
    assert np.diff(wide.distances)[1] > 20 * FOOT
    assert_allclose(wide.value, highest[over], rtol=EXACT)
    assert_allclose(np.diff(gap_stand(lines, train, inside, 0).distances)[1], 14 * FOOT, rtol=1e-14)
    assert short[inside] > long[inside]
    assert (lowest < 0.0).any()


def test_a_spacing_between_the_ends_can_be_the_worst() -> None:
    """Two axles that may stand 3 to 9 m apart over spans whose middles are 6 m apart: neither end gives the peak."""
    lines = influence_lines(
        truss_of(pratt([3.0] * 4, [3.0] * 3), [Support("L0"), Support("L2", 0), Support("L4", 0)]), bottom(4)
    )
    train = train_of(Vehicle("pair", [10e3, 10e3], [(3.0, 9.0)]))
    ends = static_extremes(lines, settled(train, 2))
    highest, _ = gap_extremes(lines, [train])
    row = int(np.argmax(highest[0] - ends[0].max(axis=0)))
    stand = gap_stand(lines, train, row, 0)
    assert highest[0][row] > 1.05 * ends[0].max(axis=0)[row]
    assert_allclose(stand.distances, [0.0, 6.0], rtol=0.0, atol=1e-9)


@given(laid(), vehicles().filter(lambda one: one.loads.size > 1))
@settings(max_examples=20, deadline=None)
def test_a_range_of_no_width_is_the_rigid_vehicle(bridge: Laid, rigid: Vehicle) -> None:
    lines = influence_lines(bridge.truss, bridge.panel_points)
    none = replace(rigid, spacings=[(gap, gap) for gap in rigid.spacings])  # type: ignore[misc]  # they are numbers
    hair = with_ranges(rigid, [1e-14])
    size = scale_of(lines, train_of(rigid))
    expected = static_extremes(lines, [train_of(rigid)])
    for one in (none, hair):
        for found, exact in zip(gap_extremes(lines, [train_of(one)]), expected, strict=True):
            assert (np.abs(found[0] - exact[0]) <= EXACT * size).all()


@pytest.mark.parametrize("relieving", [0.0, 0.4])
def test_loads_that_count_less_where_they_relieve(relieving: float) -> None:
    """Positions every 50 mm and spacings in 15 steps, each axle's effect multiplied where it relieves."""
    lines = influence_lines(ALDER, bottom(8))
    train = replace(train_of(Vehicle("HS", [35e3, 142e3, 142e3], [4.3, (4.3, 9.1)])), relieving=relieving)
    extremes = [one[0] for one in gap_extremes(lines, [train])]
    size = scale_of(lines, train)
    fronts = np.arange(-1.0, 60.0, 0.05)
    for side, sign in enumerate((1.0, -1.0)):
        best = np.zeros(size.size)
        for spacing, heading in product(np.linspace(4.3, 9.1, 15), (1, -1)):
            start = fronts if heading == 1 else 41.0 - fronts
            each = [lines[name].at(start - heading * d) for name in [e.name for e in lines.effects]
                    for d in (0.0, 4.3, 4.3 + spacing)]  # fmt: skip
            felt = sign * np.array(each).reshape(-1, 3, fronts.size) * train.felt[:, None]
            best = np.maximum(best, np.where(felt < 0.0, relieving * felt, felt).sum(axis=1).max(axis=1))
        exact = sign * extremes[side]
        assert (best <= exact + EXACT * size).all()
        assert (best >= exact - 0.05 * size).all()  # half a step of the spacing, 0.17 m, on panels of 4.8 m or more
        for row in range(size.size):
            assert_allclose(
                gap_stand(lines, train, row, side).value, extremes[side][row], rtol=0.0, atol=EXACT * size[row]
            )


def test_shares_of_either_sign_and_one_share_for_all() -> None:
    lines = influence_lines(ALDER, bottom(8))
    whole = train_of(Vehicle("three", [52e3, 98e3, 91e3], [3.1, (2.9, 7.7)]))
    uneven = replace(whole, shares=np.array([0.7, -0.2, 0.5]), even=False)
    check_not_beaten(lines, uneven, 12)
    check_attained(lines, uneven)
    lifted = replace(whole, shares=np.full(3, -0.5), factor=1.2)
    highest, lowest = gap_extremes(lines, [whole, lifted])
    assert_allclose(highest[1], -0.6 * lowest[0], rtol=1e-14)
    assert_allclose(lowest[1], -0.6 * highest[0], rtol=1e-14)


def test_of_equally_bad_spacings_the_smallest_is_reported() -> None:
    """One axle on the bridge at a time: every spacing is as bad, and the smallest counts."""
    lines = influence_lines(truss_of(pratt([4.0, 4.0], [3.0]), simple_span(2)), bottom(2))
    train = train_of(Vehicle("far apart", [10e3, 30e3, 10e3], [(9.0, 12.0), (8.5, 15.0)]))
    stand = gap_stand(lines, train, [e.name for e in lines.effects].index("U1-L1"), 0)
    assert (stand.heading, stand.front) == (-1, -5.0)  # the smaller position of the two headings'
    assert_allclose(stand.distances, [0.0, 9.0, 17.5], rtol=1e-15)
    assert (stand.axle, stand.station) == (1, 1)


def test_nothing_felt_is_off_the_bridge() -> None:
    lines = influence_lines(truss_of(pratt([4.0, 4.0], [3.0]), simple_span(2)), bottom(2))
    stand = gap_stand(lines, train_of(Vehicle("pair", [1e3, 1e3], [(2.0, 3.0)])), 0, 1)
    assert (stand.value, stand.heading) == (0.0, 0)
    assert np.isnan(stand.front)


def test_limits_are_errors_that_say_so() -> None:
    lines = influence_lines(ALDER, bottom(8))
    with pytest.raises(InputError, match="at most 200 axles, got 201"):
        Vehicle("long", np.full(201, 1e3), [(1.0, 2.0), *[1.0] * 199])
    with pytest.raises(InputError, match="at most 12 spacings may be ranges, got 13"):
        Vehicle("loose", np.full(14, 1e3), [(1.0, 2.0)] * 13)
    for spacing in ((2.0, 1.0), (-1.0, 1.0)):
        with pytest.raises(InputError, match=r"spacings\[0\]"):
            Vehicle("bad", [1e3, 1e3], [spacing])
    tracked = Vehicle("tracked", [1e3, 1e3], [(1.0, 2.0)], strips=(Strip(0.0, 2.0, 5e3),))
    with pytest.raises(InputError, match="tracked: uniform loads cannot move with a vehicle whose spacings vary"):
        gap_extremes(lines, [Train("tracked", tracked, np.ones(2))])


def test_twelve_ranges_that_all_differ_are_exact_and_take_no_age() -> None:
    lines = influence_lines(ALDER, bottom(8))
    spacings = [(1.0 + 0.07 * number, 1.6 + 0.13 * number) for number in range(12)]
    train = train_of(Vehicle("road train, invented", np.linspace(40e3, 90e3, 13), spacings))
    highest, lowest = (one[0] for one in gap_extremes(lines, [train]))
    size = scale_of(lines, train)
    corners = np.random.default_rng(5).integers(0, 2, (400, 12))
    for one in corners:  # of 4096
        gaps = [gap[side] for gap, side in zip(spacings, one.tolist(), strict=True)]
        some = static_extremes(lines, [replace(train, vehicle=replace(train.vehicle, spacings=gaps))])
        assert (some[0][0] <= highest + SHIFTED * size).all()
        assert (some[1][0] >= lowest - SHIFTED * size).all()
    stand = gap_stand(lines, train, 2, 0)
    assert_allclose(stand.value, highest[2], rtol=EXACT)


def test_greatest_within_a_window_bends_where_two_pieces_cross() -> None:
    """Peaks of 2 at u = 0 and 3 at u = 4, a valley of 0 at u = 2; the window holds the last 1 to 2 of u."""
    peaks = bent(
        np.zeros(5, dtype=np.intp), np.array([-1.0, 0.0, 2.0, 4.0, 7.0]), np.array([0.0, 2.0, 0.0, 3.0, 0.0]), 1e-9
    )
    best = peaks.within(1.0, 2.0)
    u = np.linspace(-2.0, 11.0, 1301)
    zero = np.zeros(1, dtype=np.intp)
    back = np.linspace(1.0, 2.0, 401)
    expected = [np.interp(one - back, peaks.u, peaks.value).max() for one in u]
    found = best.at(np.zeros(u.size, dtype=np.intp), u)
    assert (found >= np.array(expected) - 1e-12).all()
    assert_allclose(found, expected, rtol=0.0, atol=2.0 * 1.5 / 400)  # half a step of the window on a slope of 2
    # what leaves at u - 2, falling, meets what enters at u - 1, rising: 4 - u = 1.5 (u - 3)
    crossing = (2.0 + 2.0 + 1.5 * 3.0) / 2.5
    assert_allclose(best.at(zero, np.array([crossing])), [4.0 - crossing], rtol=1e-14)
    assert np.abs(best.u - crossing).min() < 1e-12


@given(st.lists(st.floats(-5.0, 5.0), min_size=1, max_size=40), st.data())
def test_greatest_and_least_of_ranges(values: list[float], data: st.DataObject) -> None:
    low = data.draw(st.integers(0, len(values) - 1))
    high = data.draw(st.integers(low + 1, len(values)))
    ranges = Ranges(np.array([low]), np.array([high]))
    assert ranges.best(np.array(values))[0] == max(values[low:high])
    assert ranges.best(np.array(values), np.minimum)[0] == min(values[low:high])
