"""One variable spacing against its two ends alone, and against a grid of spacings 0.1 m apart."""

from __future__ import annotations

from dataclasses import replace
from typing import TYPE_CHECKING

import numpy as np
import pytest
from benchmarks.ratios import IN_PROCESS, Course, raced
from benchmarks.spans import span_of

from movload.files.library import read_vehicle, vehicle_names
from movload.peaks.extremes import static_extremes
from movload.peaks.gaps import gap_extremes
from movload.statics.influence import influence_lines
from movload.traffic.crossing import Train, whole_trains

if TYPE_CHECKING:
    from pytest_benchmark.fixture import BenchmarkFixture

    from movload.traffic.vehicle import Vehicle

pytestmark = IN_PROCESS

PANELS = 20
WIDER = 5.0  # m: about what the rear spacing of the standard HS20 truck may grow by, 14 to 30 ft
STEP = 0.1  # m
ROUND_OFF = 1e-12  # of the row's peak: the same sums in another order
MISSED = 0.01  # of the row's peak: half a step of spacing moves one group by 50 mm on panels of 4 to 5 m


def widened(vehicle: Vehicle) -> Vehicle:
    """Return a vehicle whose middle spacing may be up to ``WIDER`` more, all others the least they may be."""
    spacings: list[float | tuple[float, float]] = [float(np.min(gap)) for gap in vehicle.spacings]
    least = float(np.min(vehicle.spacings[len(spacings) // 2]))
    spacings[len(spacings) // 2] = (least, least + WIDER)
    return replace(vehicle, spacings=spacings)


def settled(train: Train, spacing: float) -> Train:
    """Return the train with its variable spacing made one number."""
    fixed = [spacing if isinstance(gap, tuple) else gap for gap in train.vehicle.spacings]
    return replace(train, vehicle=replace(train.vehicle, spacings=fixed))


def with_spacings(train: Train, step: float) -> list[Train]:
    """Return the train with every spacing of its range, ``step`` apart and both ends."""
    (least, greatest), *_ = [gap for gap in train.vehicle.spacings if isinstance(gap, tuple)]
    count = round((greatest - least) / step) + 1
    return [settled(train, spacing) for spacing in np.linspace(least, greatest, count).tolist()]


def library_trains() -> list[Train]:
    """Return the first 20 vehicles of the library that are axles alone, each with one spacing that varies."""
    vehicles = [case.moving for name in vehicle_names() for case in read_vehicle(name).cases[:1]]
    some = [one for one in vehicles if one is not None and one.loads.size > 1 and not one.strips and one.tail is None]
    return [train for vehicle in some[:20] for train in whole_trains(widened(vehicle))]


@pytest.mark.parametrize("count", [20, 1])
def test_one_variable_spacing(benchmark: BenchmarkFixture, count: int) -> None:
    """At most 3 times as long as the two ends, and 20 vehicles at least 8 times faster than the grid.

    One alone is measured against the grid but not held to it: that side's 51 vehicles share the cost of a call.

    Theirs: the rigid vehicles with the least and the greatest spacing in one batch; those with every spacing of a grid,
    51 a vehicle, in one batch. All rows of 20 panels, lines given, both headings.
    """
    span, course = span_of(PANELS), Course(rounds=9)
    lines = influence_lines(span.truss, span.panel_points)
    trains = library_trains()[-count:]
    ends = [end for train in trains for end in with_spacings(train, WIDER)]
    grid = [one for train in trains for one in with_spacings(train, STEP)]
    theirs = {"two ends": lambda: static_extremes(lines, ends), "grid": lambda: static_extremes(lines, grid)}
    race = raced(benchmark, lambda: gap_extremes(lines, trains), theirs, course)
    highest, lowest = race.ours
    size = np.maximum(highest, -lowest)
    for name in ("two ends", "grid"):
        by_spacing = [one.reshape(len(trains), -1, size.shape[1]) for one in race.theirs[name]]
        for missed in (highest - by_spacing[0].max(axis=1), by_spacing[1].min(axis=1) - lowest):
            assert (missed >= -ROUND_OFF * size).all()
            assert (missed <= MISSED * size).all() or name == "two ends"
    race.require_no_slower("two ends", 3)
    if count == 20:
        race.require_faster("grid", 8)
