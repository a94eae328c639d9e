"""Any number of vehicles over one response in one batch."""

from __future__ import annotations

from typing import TYPE_CHECKING, overload

import numpy as np

from movload.arrays import Floats, held
from movload.peaks.extremes import static_extremes
from movload.peaks.peaks import PartPeaks, Peaks, effects_at, stacked
from movload.traffic.crossing import whole_trains
from movload.traffic.loading import Loading
from movload.traffic.vehicle import Vehicle

if TYPE_CHECKING:
    from collections.abc import Sequence

    from movload.statics.part import Response
    from movload.traffic.crossing import Train


@overload
def sweep(lines: Response, vehicle: Vehicle | Loading) -> Peaks: ...
@overload
def sweep(lines: Response, vehicle: Sequence[Vehicle | Loading]) -> list[Peaks]: ...
def sweep(lines: Response, vehicle: Vehicle | Loading | Sequence[Vehicle | Loading]) -> Peaks | list[Peaks]:
    """Return the exact peaks of every row: whole axles on one line, no share, no impact.

    Parameters
    ----------
    lines
        Influence lines, or any other response.
    vehicle
        One vehicle or loading, or several: the answer is then a list in the same order, found in one batch.

    Raises
    ------
    InputError
        A spacing is a range.
    """
    if isinstance(vehicle, (Vehicle, Loading)):
        return sweep(lines, [vehicle])[0]
    trains = [whole_trains(one) for one in vehicle]
    no_impact = held(np.zeros((len(trains), len(lines.effects), 2)))
    swept = part_peaks(lines, trains, no_impact)
    return [stacked(one.title, [peaks]) for one, peaks in zip(vehicle, swept, strict=True)]


def part_peaks(response: Response, trains: Sequence[tuple[Train, ...]], impact: Floats) -> list[PartPeaks]:
    """Return the peaks of one part under each crossing's trains, impact included.

    Parameters
    ----------
    trains
        For each crossing the trains that the part feels.
    impact
        (C, R, 2) dynamic allowance on highest and lowest of every row, for trains that are dynamic.
    """
    flat = [train for one in trains for train in one]
    counts = [len(one) for one in trains]
    highest, lowest = static_extremes(response, flat)
    dynamic = np.array([train.dynamic for train in flat])[:, None]
    of_train = np.repeat(impact, counts, axis=0)
    highest *= 1.0 + dynamic * of_train[:, :, 0]
    lowest *= 1.0 + dynamic * of_train[:, :, 1]
    if max(counts, default=0) > 1:  # the envelope over each crossing's trains
        starts = np.cumsum([0, *counts[:-1]])
        highest = np.maximum.reduceat(highest, starts, axis=0)
        lowest = np.minimum.reduceat(lowest, starts, axis=0)
    highest, lowest = held(highest), held(lowest)
    return [PartPeaks(response, one, highest[row], lowest[row], impact[row]) for row, one in enumerate(trains)]


def effects_with_front_at(lines: Response, vehicle: Vehicle, position: float, heading: int = 1) -> Floats:
    """Return every row's effect (R,) with a vehicle standing with its front axle at x = ``position`` [m]."""
    (train,) = whole_trains(vehicle)
    return effects_at(lines, train, position, heading)
