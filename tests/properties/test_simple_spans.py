"""Laws of simple spans: no sampled position beats a maximum, each is reached where it says, and the batch adds nothing.

What is compared with are the statics of a beam on two supports, axle by axle, without any influence line.
"""

from __future__ import annotations

from typing import TYPE_CHECKING

import numpy as np
from hypothesis import given, settings
from hypothesis import strategies as st
from numpy.testing import assert_allclose
from strategies import vehicles

from movload.peaks.span_maxima import Stands, span_maxima, span_values

if TYPE_CHECKING:
    from movload.arrays import Floats
    from movload.traffic.vehicle import Vehicle

EXACT = 1e-12  # of all axles on midspan or at an end: sums of at most 8 products, in another order
spans = st.lists(st.floats(0.9, 31.0), min_size=1, max_size=4)  # m


def moment(length: float, x: Floats, loads: Floats, section: float) -> float:
    """Return the moment at a section under loads at x: left reaction times its arm, less the loads before it."""
    on = (x >= 0.0) & (x <= length)
    reaction = sum(load * (length - at) / length for at, load in zip(x[on], loads[on], strict=True))
    before = sum(load * (section - at) for at, load in zip(x[on], loads[on], strict=True) if at < section)
    return float(reaction * section - before)


def end_shear(length: float, x: Floats, loads: Floats, section: float) -> float:
    """Return the reaction of the end at ``section``, from moments about the other end."""
    on = (x >= 0.0) & (x <= length)
    other = length - section
    return float(sum(load * abs(at - other) for at, load in zip(x[on], loads[on], strict=True)) / length)


def sampled(length: float, vehicle: Vehicle, heading: int, count: int) -> tuple[float, float, float]:
    """Return the largest moment under any axle and end shear of a passage in ``count`` steps, and the step [m]."""
    d, loads = vehicle.distances, vehicle.loads
    fronts, step = np.linspace(-d[-1], length + d[-1], count, retstep=True)
    x = fronts[:, None] - heading * d
    on = (x >= 0.0) & (x <= length)
    left = np.where(on, loads * (1.0 - x / length), 0.0).sum(axis=1)
    right = np.where(on, loads, 0.0).sum(axis=1) - left
    arms = np.maximum(x[:, :, None] - x[:, None, :], 0.0)  # of every axle (last) about every axle
    moments = left[:, None] * x - (arms * np.where(on, loads, 0.0)[:, None, :]).sum(axis=2)
    return float(np.where(on, moments, 0.0).max()), float(max(left.max(), right.max())), float(step)


@settings(max_examples=60)
@given(st.floats(0.9, 31.0), vehicles())
def test_no_sampled_position_beats_a_maximum_and_some_come_close(length: float, vehicle: Vehicle) -> None:
    """Moving a train by half a step changes a moment by no more than all axles times that; a shear, by a step over L.

    A shear jumps where an axle leaves, so that only the step on one side of it is near.
    """
    maxima = span_maxima(np.array([length]), vehicle.distances, vehicle.loads, vehicle.headings)
    bending, shearing = float(maxima.moment[0]), float(maxima.shear[0])
    for heading in (1, -1):  # the values hold for both, whichever the vehicle may take
        moment_seen, shear_seen, step = sampled(length, vehicle, heading, 1501)
        assert moment_seen <= bending + EXACT * vehicle.gross * length
        assert shear_seen <= shearing + EXACT * vehicle.gross
        assert moment_seen >= bending - vehicle.gross * 0.5 * step
        assert shear_seen >= shearing - vehicle.gross * step / length


def standing(stands: Stands, span: int, vehicle: Vehicle) -> Floats:
    """Return where the axles stand [m], checked against the stated position, heading, axle and section."""
    heading, axle = int(stands.heading[span]), int(stands.axle[span])
    assert heading in vehicle.headings
    assert vehicle.loads[axle] > 0.0
    x = stands.section[span] + heading * (vehicle.distances[axle] - vehicle.distances)
    assert_allclose(stands.position[span] - heading * vehicle.distances, x, rtol=0.0, atol=1e-13 * (1.0 + abs(x).max()))
    return np.asarray(x)


@settings(max_examples=150)
@given(spans, vehicles())
def test_a_maximum_is_what_statics_give_where_it_says(lengths: list[float], vehicle: Vehicle) -> None:
    maxima = span_maxima(np.array(lengths), vehicle.distances, vehicle.loads, vehicle.headings)
    for span, length in enumerate(lengths):
        section = float(maxima.moment_stands.section[span])
        assert 0.0 < section < length
        there = moment(length, standing(maxima.moment_stands, span, vehicle), vehicle.loads, section)
        assert_allclose(there, maxima.moment[span], rtol=0.0, atol=EXACT * vehicle.gross * length)
        section = float(maxima.shear_stands.section[span])
        assert section in {0.0, length}
        there = end_shear(length, standing(maxima.shear_stands, span, vehicle), vehicle.loads, section)
        assert_allclose(there, maxima.shear[span], rtol=0.0, atol=EXACT * vehicle.gross)


def padded(crossing: list[Vehicle], columns: int) -> tuple[Floats, Floats]:
    """Return the distances and loads (V, columns) of vehicles, filled up with axles of 0 N."""
    distances, felt = np.zeros((2, len(crossing), columns))
    for number, vehicle in enumerate(crossing):
        distances[number, : vehicle.loads.size] = vehicle.distances
        felt[number, : vehicle.loads.size] = vehicle.loads
    return distances, felt


@given(spans, st.lists(vehicles(), min_size=1, max_size=5), st.integers(8, 11))
def test_one_batch_gives_exactly_what_one_by_one_does(
    lengths: list[float], crossing: list[Vehicle], columns: int
) -> None:
    together = span_values(np.array(lengths), *padded(crossing, columns))
    for number, vehicle in enumerate(crossing):
        alone = span_maxima(np.array(lengths), vehicle.distances, vehicle.loads, (1,))
        assert (together[0][number] == alone.moment).all()
        assert (together[1][number] == alone.shear).all()


@given(spans, vehicles())
def test_a_reversed_vehicle_is_as_bad(lengths: list[float], vehicle: Vehicle) -> None:
    """The last axle first: the mirror image. Each value to round-off of all axles on midspan."""
    ahead = span_values(np.array(lengths), vehicle.distances[None], vehicle.loads[None])
    turned = span_values(
        np.array(lengths), (vehicle.distances[-1] - vehicle.distances)[None, ::-1], vehicle.loads[None, ::-1]
    )
    assert_allclose(turned[0], ahead[0], rtol=0.0, atol=EXACT * vehicle.gross * max(lengths))
    assert_allclose(turned[1], ahead[1], rtol=0.0, atol=EXACT * vehicle.gross)


@given(spans, vehicles(), st.floats(0.1, 9.0), st.floats(0.1, 9.0))
def test_other_units_scale(lengths: list[float], vehicle: Vehicle, longer: float, heavier: float) -> None:
    plain = span_values(np.array(lengths), vehicle.distances[None], vehicle.loads[None])
    scaled = span_values(longer * np.array(lengths), longer * vehicle.distances[None], heavier * vehicle.loads[None])
    assert_allclose(scaled[0], longer * heavier * plain[0], rtol=1e-11)
    assert_allclose(scaled[1], heavier * plain[1], rtol=1e-11)


@given(spans, vehicles(), st.integers(0, 7), st.floats(0.0, 90e3))
def test_more_load_is_never_less_and_adds_no_more_than_itself(
    lengths: list[float], vehicle: Vehicle, axle: int, more: float
) -> None:
    """An axle heavier by p raises a moment by 0 to p L/4 and a shear by 0 to p."""
    span, heavier = np.array(lengths), vehicle.loads.copy()
    heavier[axle % heavier.size] += more
    before = span_values(span, vehicle.distances[None], vehicle.loads[None])
    after = span_values(span, vehicle.distances[None], heavier[None])
    slack = EXACT * heavier.sum()
    assert (after[0] >= before[0] - slack * span).all()
    assert (after[0] <= before[0] + 0.25 * more * span + slack * span).all()
    assert (after[1] >= before[1] - slack).all()
    assert (after[1] <= before[1] + more + slack).all()
