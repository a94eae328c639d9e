"""An unending tail and a very long train against the axles alone, and against sampling every 50 mm."""

from __future__ import annotations

from dataclasses import replace
from typing import TYPE_CHECKING

import numpy as np
import pytest
from benchmarks.ratios import IN_PROCESS, Course, raced
from benchmarks.spans import span_of
from benchmarks.stepping_scripts import STEP, Stepped

from movload.peaks.extremes import static_extremes
from movload.peaks.moving import moving_extremes
from movload.statics.influence import InfluenceLines, influence_lines
from movload.traffic.crossing import Train, even_train
from movload.traffic.vehicle import Tail, Vehicle

if TYPE_CHECKING:
    from pytest_benchmark.fixture import BenchmarkFixture

    from movload.arrays import Floats

pytestmark = IN_PROCESS

PANELS = 20
ROUND_OFF = 1e-12  # of the row's largest: what cumulated sums may differ by
STEPPED_PAST = 0.02  # of the row's largest: half a step, 25 mm, beside a kink of a line on panels of 4 to 5 m


@pytest.fixture(scope="module")
def lines() -> InfluenceLines:
    """Return the 101 rows of a 20-panel truss without symmetry."""
    span = span_of(PANELS)
    return influence_lines(span.truss, span.panel_points)


def vehicle_of(axles: int) -> Vehicle:
    """Return an invented vehicle of unequal axles 1.3 to 2.9 m apart."""
    numbers = np.arange(axles)
    return Vehicle("axles", 90e3 + 40e3 * np.cos(numbers), list(2.1 + 0.8 * np.sin(2.39996 * numbers[:-1])))


def with_tail(vehicle: Vehicle) -> Train:
    """Return a vehicle followed by 40 kN/m without end, from 1.5 m behind its last axle, whole."""
    longer = replace(vehicle, tail=Tail(float(vehicle.distances[-1]) + 1.5, 40e3))
    return Train("train", longer, np.ones(vehicle.loads.size), tail_share=1.0)


def sampled(lines: InfluenceLines, train: Train) -> Stepped:
    """Return the extremes at every step: all panel loads without a loop over steps, then one product a heading.

    The tail's come from the areas under the hats up to its end, straight lines that are integrated once.
    """
    stations, tail = lines.stations, train.vehicle.tail
    assert tail is not None
    highest, lowest = np.zeros((2, 1, len(lines.effects)))
    for heading in (1, -1):
        way = np.arange(0.0, float(np.ptp(stations)) + tail.start + STEP, STEP)
        front = stations[0] + way if heading > 0 else stations[-1] - way
        loads = axle_loads(stations, front[:, None] - heading * train.vehicle.distances, train.felt)
        area = areas(stations, front - heading * tail.start)
        loads += tail.load * (area if heading > 0 else areas(stations, stations[-1:]) - area)
        effects = loads @ lines.ordinates.T
        np.maximum(highest, effects.max(axis=0), out=highest)
        np.minimum(lowest, effects.min(axis=0), out=lowest)
    return Stepped(highest, lowest)


def axle_loads(stations: Floats, x: Floats, loads: Floats) -> Floats:
    """Return panel-point loads (P, B) of axles at x (P, A)."""
    panel = np.clip(np.searchsorted(stations, x, side="right") - 1, 0, stations.size - 2)
    felt = loads * ((x >= stations[0]) & (x <= stations[-1]))
    onward = felt * (x - stations[panel]) / np.diff(stations)[panel]
    place = (np.arange(len(x))[:, None] * stations.size + panel).ravel()
    size = len(x) * stations.size
    found = np.bincount(place, (felt - onward).ravel(), size) + np.bincount(place + 1, onward.ravel(), size)
    return np.asarray(found.reshape(-1, stations.size))


def areas(stations: Floats, x: Floats) -> Floats:
    """Return the area under every station's hat from the first station up to each x (P, B) [m]."""
    x = np.clip(x, stations[0], stations[-1])
    panel = np.clip(np.searchsorted(stations, x, side="right") - 1, 0, stations.size - 2)
    length = np.diff(stations)
    whole = np.zeros((stations.size, stations.size))  # area of each hat up to each station
    whole[1:, :-1] += np.tril(np.broadcast_to(length / 2, (length.size, length.size)))
    whole[1:, 1:] += np.tril(np.broadcast_to(length / 2, (length.size, length.size)))
    way, rows = x - stations[panel], np.arange(x.size)
    found = whole[panel]
    found[rows, panel] += way - way**2 / (2 * length[panel])
    found[rows, panel + 1] += way**2 / (2 * length[panel])
    return found


@pytest.mark.parametrize("axles", [1, 5, 18])
def test_a_tail_against_the_axles_alone(benchmark: BenchmarkFixture, lines: InfluenceLines, axles: int) -> None:
    """An unending tail costs at most 6 times `static_extremes` of the same axles."""
    vehicle = vehicle_of(axles)
    alone, followed = even_train("axles", vehicle, 1.0), with_tail(vehicle)
    race = raced(
        benchmark,
        lambda: moving_extremes(lines, [followed]),
        {"axles alone": lambda: static_extremes(lines, [alone])},
        Course(rounds=21),
    )
    assert (race.ours[0].max(axis=1) > race.theirs["axles alone"][0].max(axis=1)).all()
    race.require_no_slower("axles alone", 6)


@pytest.mark.parametrize("axles", [1, 5, 18])
def test_a_tail_against_sampling(benchmark: BenchmarkFixture, lines: InfluenceLines, axles: int) -> None:
    """At least 3 times faster than the leanest sampling every 50 mm, which never finds more, and nearly as much."""
    train = with_tail(vehicle_of(axles))
    race = raced(
        benchmark,
        lambda: moving_extremes(lines, [train]),
        {"every 50 mm": lambda: sampled(lines, train)},
        Course(rounds=7),
    )
    highest, lowest = race.ours
    stepped, size = race.theirs["every 50 mm"], np.maximum(highest, -lowest)
    for missed in (highest - stepped.highest, stepped.lowest - lowest):
        assert (missed >= -ROUND_OFF * size.max()).all()
        assert (missed <= STEPPED_PAST * size + ROUND_OFF * size.max()).all()
    race.require_faster("every 50 mm", 3)


def test_a_hundred_axles_and_a_tail(benchmark: BenchmarkFixture, lines: InfluenceLines) -> None:
    """100 axles with a tail, all 101 rows, take under 50 times the sweep of 5 axles."""
    few, train = even_train("five", vehicle_of(5), 1.0), with_tail(vehicle_of(100))
    race = raced(
        benchmark,
        lambda: moving_extremes(lines, [train]),
        {"5 axles": lambda: static_extremes(lines, [few])},
        Course(rounds=21),
    )
    assert (race.ours[0].max(axis=1) > race.theirs["5 axles"][0].max(axis=1)).all()
    race.require_no_slower("5 axles", 50)
