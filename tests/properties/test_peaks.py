"""Laws of peaks: no sampled position beats one, each stands where it says, and the batch changes nothing."""

from __future__ import annotations

import math
import pickle

import numpy as np
import pytest
from hypothesis import assume, given, settings
from hypothesis import strategies as st
from numpy.testing import assert_allclose
from oracles.stepping import extremes, passage, sampled, scales, stands
from oracles.trusses import bottom, pratt, simple_span, truss_of
from strategies import Laid, laid, vehicles

from movload import InfluenceLines, Peak, Support, Vehicle, effects_with_front_at, influence_lines, sweep
from movload.peaks.sweep import part_peaks
from movload.traffic.crossing import Train

EXACT = 1e-12  # of all axles on the row's largest ordinate: the same sum of at most 8 products, in another order
TIED = 1e-12  # of the row's largest value: the documented limit within which two positions are equally bad


def lines_of(bridge: Laid) -> InfluenceLines:
    """Return the lines of a drawn bridge."""
    return influence_lines(bridge.truss, bridge.panel_points)


@settings(max_examples=60)
@given(laid(), st.lists(vehicles(), min_size=1, max_size=3))
def test_peaks_are_the_extremes_over_all_stands(bridge: Laid, crossing: list[Vehicle]) -> None:
    lines = lines_of(bridge)
    for vehicle, peaks, size in zip(crossing, sweep(lines, crossing), scales(lines, crossing), strict=True):
        highest, lowest = extremes(lines, vehicle)
        assert (np.abs(peaks.highest - highest) <= EXACT * size).all()
        assert (np.abs(peaks.lowest - lowest) <= EXACT * size).all()
        assert (peaks.highest >= 0.0).all()
        assert (peaks.lowest <= 0.0).all()


@given(laid(), st.lists(vehicles(), min_size=2, max_size=5))
def test_one_batch_gives_exactly_what_one_by_one_does(bridge: Laid, crossing: list[Vehicle]) -> None:
    lines = lines_of(bridge)
    for vehicle, together in zip(crossing, sweep(lines, crossing), strict=True):
        alone = sweep(lines, vehicle)
        assert (together.highest == alone.highest).all()
        assert (together.lowest == alone.lowest).all()
        for number in range(len(lines.effects)):
            for side in (0, 1):
                one, other = together.peak(number, side), alone.peak(number, side)
                assert (one.value, one.heading, one.axle, one.station) == (
                    other.value, other.heading, other.axle, other.station,
                )  # fmt: skip
                assert_allclose(one.position, other.position, rtol=0.0, atol=0.0, equal_nan=True)


def test_a_one_way_vehicle_in_the_batch_changes_nothing_for_the_others() -> None:
    lines = influence_lines(truss_of(pratt([3.1] * 6, [3.7] * 5), simple_span(6)), bottom(6))
    free = Vehicle("both ways", [60.9e3, 31.5e3, 13.2e3, 11.3e3], [3.43, 3.73, 2.81])
    bound = Vehicle("one way", [47e3, 53e3], [2.9], headings=(1,))
    together, alone = sweep(lines, [free, bound])[0], sweep(lines, free)
    assert (together.highest == alone.highest).all()
    assert (together.lowest == alone.lowest).all()


@settings(max_examples=25)
@given(laid(), vehicles())
def test_sampled_positions_never_beat_a_peak(bridge: Laid, vehicle: Vehicle) -> None:
    lines = lines_of(bridge)
    peaks, size = sweep(lines, vehicle), scales(lines, [vehicle])[0][:, None]
    for heading in vehicle.headings:
        effects = sampled(lines, vehicle, passage(lines, vehicle, 400), heading)
        assert (effects <= peaks.highest[:, None] + EXACT * size).all()
        assert (effects >= peaks.lowest[:, None] - EXACT * size).all()


@settings(max_examples=25)
@given(laid(), vehicles(), st.floats(-60.0, 60.0), st.sampled_from([1, -1]))
def test_effects_with_the_front_axle_anywhere(bridge: Laid, vehicle: Vehicle, front: float, heading: int) -> None:
    lines = lines_of(bridge)
    x = front - heading * vehicle.distances
    from_ends = np.abs(x[:, None] - lines.stations[[0, -1]])
    assume(not ((from_ends > 0.0) & (from_ends < 1e-9)).any())  # so near an end an axle counts as standing on it
    expected = sampled(lines, vehicle, np.array([front]), heading)[:, 0]
    effects = effects_with_front_at(lines, vehicle, front, heading)
    assert (np.abs(effects - expected) <= EXACT * scales(lines, [vehicle])[0]).all()


def test_ten_thousand_positions_never_beat_a_peak_and_come_close() -> None:
    lines = influence_lines(
        truss_of(
            pratt([3.17, 4.73, 3.89, 5.21, 2.77, 4.03], [3.9, 4.6, 5.1, 4.4, 3.7], crossed=(2, 3)),
            [Support("L1", 11.0), Support("L6")],
            lambda bar: 4e-3 + 1e-3 * (bar % 3),
        ),
        [-2.31, "L0", "L1", "L2", "L3", "L5", "L6"],
    )
    vehicle = Vehicle("invented", [61e3, 97e3, 83e3, 0.0, 71e3], [3.71, 1.37, 4.19, 1.29])
    peaks, size = sweep(lines, vehicle), scales(lines, [vehicle])[0][:, None]
    fronts = passage(lines, vehicle, 10_000)
    effects = np.concatenate([sampled(lines, vehicle, fronts, heading) for heading in (1, -1)], axis=1)
    assert (effects <= peaks.highest[:, None] + EXACT * size).all()
    assert (effects >= peaks.lowest[:, None] - EXACT * size).all()
    # a step of 5 mm cannot miss by more than half a step of the steepest slope: 5 mm / 2.77 m of the scale
    step = (fronts[1] - fronts[0]) / np.diff(lines.stations).min()
    assert (effects.max(axis=1) >= peaks.highest - step * size[:, 0]).all()
    assert (effects.min(axis=1) <= peaks.lowest + step * size[:, 0]).all()


def check_stated(lines: InfluenceLines, vehicle: Vehicle, row: int, peak: Peak) -> None:
    """Find a peak again from its placement, and from its position with plain np.interp."""
    size = scales(lines, [vehicle])[0][row]
    again = lines.ordinates[row] @ peak.placement.panel_loads(lines.stations)
    assert_allclose(again, peak.value, rtol=0.0, atol=EXACT * size)
    assert peak.heading in vehicle.headings
    assert_allclose(peak.spacings, vehicle.spacings, rtol=0.0, atol=1e-12 * (1.0 + sum(vehicle.spacings)))
    x = peak.position - peak.heading * np.concatenate(([0.0], np.cumsum(vehicle.spacings)))
    # the axle stands on its station, but for the shift (1e-12 of the last station) that puts a lost axle surely off
    assert_allclose(x[peak.axle], lines.stations[peak.station], rtol=0.0, atol=1e-10)
    by_hand = np.interp(x, lines.stations, lines.ordinates[row], left=0.0, right=0.0) @ vehicle.loads
    # that shift, 1e-10 m at most here, moves every axle along lines whose slope is at most 2 / 0.4 m of the scale
    assert_allclose(by_hand, peak.value, rtol=0.0, atol=1e-9 * size)


@given(laid(), vehicles())
def test_every_peak_is_reached_where_it_says(bridge: Laid, vehicle: Vehicle) -> None:
    lines = lines_of(bridge)
    peaks = sweep(lines, vehicle)
    for row in range(len(lines.effects)):
        for side, value in ((0, peaks.highest[row]), (1, peaks.lowest[row])):
            peak = peaks.peak(row, side)
            assert peak.value == value
            if value == 0.0:
                assert math.isnan(peak.position)
                assert (peak.heading, peak.axle, peak.station, peak.placement.x.size) == (0, -1, -1, 0)
            else:
                check_stated(lines, vehicle, row, peak)


@given(laid(), vehicles())
def test_of_equally_bad_positions_the_smallest_counts(bridge: Laid, vehicle: Vehicle) -> None:
    lines = lines_of(bridge)
    assume(lines.stations.size < 8)  # the loops below are slow
    peaks, standing = sweep(lines, vehicle), list(stands(lines, vehicle))
    values = np.array([stand.effects for stand in standing])
    for row in range(len(lines.effects)):
        for side, sign in ((0, 1.0), (1, -1.0)):
            peak = peaks.peak(row, side)
            if peak.heading:
                effect = sign * values[:, row]
                tied = np.flatnonzero(effect >= effect.max() - TIED * np.abs(effect).max())
                front, heading = min((round(standing[i].front, 9), -standing[i].heading) for i in tied)
                assert_allclose(peak.position, front, rtol=0.0, atol=2e-9)
                assert peak.heading == -heading


def test_peaks_come_back_from_pickle() -> None:
    lines = influence_lines(truss_of(pratt([4.1, 3.7], [3.0]), simple_span(2)), bottom(2))
    peaks = sweep(lines, Vehicle("pair", [10e3, 20e3], [1.3]))
    again = pickle.loads(pickle.dumps(peaks))  # noqa: S301 - our own bytes
    assert again.effects == peaks.effects
    assert (again.highest == peaks.highest).all()
    assert (again.lowest == peaks.lowest).all()
    one, other = again["U1-L1"].highest, peaks["U1-L1"].highest
    assert (one.value, one.position, one.heading, one.case) == (other.value, other.position, other.heading, other.case)
    alone = pickle.loads(pickle.dumps(other))  # noqa: S301 - our own bytes
    assert (alone.placement.x == other.placement.x).all()
    assert (alone.placement.panel_loads(lines.stations) == other.placement.panel_loads(lines.stations)).all()


def test_of_a_mixed_crossing_the_train_that_is_worst_with_impact_governs() -> None:
    """10 kN and 30 % of impact make 13 kN; 11 kN without impact are less: the placement must be the first's."""
    lines = influence_lines(truss_of(pratt([4.1, 3.7], [3.0]), simple_span(2)), bottom(2))
    light, heavy = Vehicle("light", [10e3], []), Vehicle("heavy", [11e3], [])
    trains = (Train("dynamic", light, np.ones(1)), Train("static", heavy, np.ones(1), dynamic=False))
    (peaks,) = part_peaks(lines, [tuple((train,) for train in trains)], np.full((1, len(lines.effects), 2), 0.3))
    row = [effect.name for effect in lines.effects].index("L0 y")
    peak = peaks.peak(row, 0)
    assert peak.value == pytest.approx(13e3, rel=1e-12)
    assert peak.case == "dynamic"
    again = lines.ordinates[row] @ peak.placement.panel_loads(lines.stations)
    assert again == pytest.approx(peak.value, rel=1e-12)


def test_each_crossing_has_its_own_impact_on_each_row_and_side() -> None:
    """Two trains, then one: values and placements carry the impact of their own crossing, row and side."""
    lines = influence_lines(truss_of(pratt([4.1, 3.7, 4.4], [3.0, 3.0]), simple_span(3)), bottom(3))
    light, heavy = Vehicle("light", [10e3], []), Vehicle("heavy", [20e3, 11e3], [1.7])
    one, two = Train("light", light, np.ones(1)), Train("heavy", heavy, np.ones(2))
    crossings = [((one,), (two,)), ((one,),)]
    impact = np.linspace(0.0, 0.7, 4 * len(lines.effects)).reshape(2, -1, 2)
    found = part_peaks(lines, crossings, impact)
    for peaks, static, mine in zip(found, (heavy, light), impact, strict=True):
        alone = sweep(lines, static)
        for side, felt, still in ((0, peaks.highest, alone.highest), (1, peaks.lowest, alone.lowest)):
            # the heavy vehicle is the light one and more, so it gives every peak; round-off of another batch
            assert_allclose(felt, still * (1 + mine[:, side]), rtol=1e-12)
            for row in np.flatnonzero(felt):
                assert set(peaks.peak(int(row), side).placement.impact) == {mine[row, side]}


def test_ties_by_hand() -> None:
    """Four stands load a hanger of two equal panels alike; the smallest front axle wins, then heading +1."""
    lines = influence_lines(truss_of(pratt([4.0, 4.0], [3.0]), simple_span(2)), bottom(2))
    pair = Vehicle("pair", [10e3, 10e3], [1.0])
    peak = sweep(lines, pair)["U1-L1"].highest
    assert peak.value == pytest.approx(10e3 * (1.0 + 0.75), rel=1e-12)
    assert (peak.position, peak.heading, peak.axle, peak.station) == (3.0, -1, 1, 1)
    single = sweep(lines, Vehicle("single", [10e3], []))["U1-L1"].highest
    assert (single.position, single.heading, single.axle, single.station) == (4.0, 1, 0, 1)


def test_a_stated_position_keeps_every_axle_on_the_bridge() -> None:
    """Six panels of 2.1 m and axles 4.2 m apart: the second stands on L6 = 12.6 m, which rounds just outside."""
    lines = influence_lines(truss_of(pratt([2.1] * 6, [3.0] * 5), simple_span(6)), bottom(6))
    pair = Vehicle("pair", [80e3, 110e3], [4.2])
    check_stated(
        lines, pair, [e.name for e in lines.effects].index("L6 normal"), sweep(lines, pair)["L6 normal"].highest
    )


def test_a_vehicle_off_the_bridge_loads_no_panel_point() -> None:
    lines = influence_lines(truss_of(pratt([4.0, 4.0], [3.0]), simple_span(2)), bottom(2))
    peak = sweep(lines, Vehicle("single", [10e3], []))["U1-L1"].lowest
    assert (peak.placement.panel_loads(lines.stations) == np.zeros(3)).all()
