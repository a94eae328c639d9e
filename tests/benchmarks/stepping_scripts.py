"""Peaks as stepping finds them: the vehicle moved on by a fixed step and the effects at each step looked at.

Both start with the front axle on the end station it enters by and end with the last axle on the other, both headings.
"""

from __future__ import annotations

from dataclasses import dataclass
from typing import TYPE_CHECKING

import numpy as np

if TYPE_CHECKING:
    from collections.abc import Sequence

    from numpy.typing import NDArray

    from movload.traffic.vehicle import Vehicle

    Floats = NDArray[np.float64]

STEP = 0.05  # m


@dataclass(frozen=True, slots=True)
class Stepped:
    """Highest and lowest (V, R) that were seen, both including 0."""

    highest: Floats
    lowest: Floats


def by_interpolation(stations: Floats, ordinates: Floats, vehicles: Sequence[Vehicle]) -> Stepped:
    """Return the extremes of each vehicle and row: ``np.interp`` of all its axles at all its steps, row by row."""
    highest, lowest = np.zeros((len(vehicles), len(ordinates))), np.zeros((len(vehicles), len(ordinates)))
    for number, vehicle in enumerate(vehicles):
        for x in passages(stations, vehicle):
            for row, line in enumerate(ordinates):
                effects = np.interp(x, stations, line, left=0.0, right=0.0) @ vehicle.loads
                highest[number, row] = max(highest[number, row], effects.max())
                lowest[number, row] = min(lowest[number, row], effects.min())
    return Stepped(highest, lowest)


def by_one_product(stations: Floats, ordinates: Floats, vehicles: Sequence[Vehicle]) -> Stepped:
    """Return the same from hat weights: all steps of all vehicles as panel-point loads, one product, then extremes."""
    runs = [(x, vehicle.loads) for vehicle in vehicles for x in passages(stations, vehicle)]
    counts = [len(x) for x, _ in runs]
    x = np.concatenate([x.ravel() for x, _ in runs])
    load = np.concatenate([np.tile(loads, len(x)) for x, loads in runs])
    position = np.repeat(np.arange(sum(counts)), np.concatenate([np.full(len(x), x.shape[1]) for x, _ in runs]))
    effects = _panel_loads(stations, x, load, position) @ ordinates.T
    ends = np.cumsum([0, *counts])
    spans = list(zip(ends[:-1:2], ends[2::2], strict=True))
    return Stepped(
        np.maximum([effects[first:last].max(axis=0) for first, last in spans], 0.0),
        np.minimum([effects[first:last].min(axis=0) for first, last in spans], 0.0),
    )


def passages(stations: Floats, vehicle: Vehicle) -> tuple[Floats, Floats]:
    """Return where the axles stand (P, A) [m] step by step, moving toward +x and toward -x."""
    first, last, length = stations[0], stations[-1], vehicle.distances[-1]
    behind = np.arange(0.0, last - first + length + STEP, STEP)[:, None] - vehicle.distances
    return first + behind, last - behind


def _panel_loads(stations: Floats, x: Floats, load: Floats, position: NDArray[np.intp]) -> Floats:
    """Return panel-point loads (P, B) of single axles, each at x with its load in its position."""
    panel = np.clip(np.searchsorted(stations, x, side="right") - 1, 0, stations.size - 2)
    felt = load * ((x >= stations[0]) & (x <= stations[-1]))
    onward = felt * (x - stations[panel]) / np.diff(stations)[panel]
    place = position * stations.size + panel
    size = (int(position[-1]) + 1) * stations.size
    loads = np.bincount(place, felt - onward, size) + np.bincount(place + 1, onward, size)
    return loads.reshape(-1, stations.size)
