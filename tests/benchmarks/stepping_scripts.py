"""Peaks as stepping finds them: the vehicle moved on by a fixed step and the effects at each step looked at.

All start with the front axle on the end station it enters by and end once the last axle has reached the other, in
both headings.
"""

from __future__ import annotations

from dataclasses import dataclass
from typing import TYPE_CHECKING

import numpy as np

if TYPE_CHECKING:
    from collections.abc import Callable, Sequence

    from numpy.typing import NDArray

    from movload.traffic.vehicle import Vehicle

    Floats = NDArray[np.float64]
    Lines = tuple[Floats, Floats]  # stations (B,) and ordinates (R, B)
    Effects = Callable[[Floats, Floats, Floats, Floats], Floats]

STEP = 0.05  # m


@dataclass(frozen=True, slots=True)
class Stepped:
    """Highest and lowest (V, R) that were seen, both including 0."""

    highest: Floats
    lowest: Floats


def by_interpolation(lines: Lines, vehicles: Sequence[Vehicle], effects: Effects) -> Stepped:
    """Return the extremes of each vehicle and row with ``np.interp``, row by row, as ``effects`` adds the axles up."""
    stations, ordinates = lines
    highest, lowest = np.zeros((2, len(vehicles), len(ordinates)))
    for number, vehicle in enumerate(vehicles):
        for x in passages(stations, vehicle):
            for row, line in enumerate(ordinates):
                seen = effects(x, vehicle.loads, stations, line)
                highest[number, row] = max(highest[number, row], seen.max())
                lowest[number, row] = min(lowest[number, row], seen.min())
    return Stepped(highest, lowest)


def axle_by_axle(x: Floats, loads: Floats, stations: Floats, line: Floats) -> Floats:
    """Return effects (P,): each axle's load times the ordinates it runs over, added up."""
    total = np.zeros(len(x))
    for axle, load in enumerate(loads):
        total += load * np.interp(x[:, axle], stations, line, left=0.0, right=0.0)
    return total


def all_axles_at_once(x: Floats, loads: Floats, stations: Floats, line: Floats) -> Floats:
    """Return the same with one call of ``np.interp``: the leanest."""
    total: Floats = np.interp(x, stations, line, left=0.0, right=0.0) @ loads
    return total


def by_one_product(lines: Lines, vehicles: Sequence[Vehicle]) -> Stepped:
    """Return the same from hat weights: all steps of all vehicles as panel-point loads, one product, then extremes."""
    stations, ordinates = lines
    runs = [(x, vehicle.loads) for vehicle in vehicles for x in passages(stations, vehicle)]
    counts = [len(x) for x, _ in runs]
    x = np.concatenate([x.ravel() for x, _ in runs])
    load = np.concatenate([np.tile(loads, len(x)) for x, loads in runs])
    position = np.repeat(np.arange(sum(counts)), np.concatenate([np.full(len(x), x.shape[1]) for x, _ in runs]))
    effects = ordinates @ _panel_loads(stations, x, load, position).T
    ends = np.cumsum([0, *counts])
    spans = list(zip(ends[:-1:2], ends[2::2], strict=True))
    return Stepped(
        np.maximum([effects[:, first:last].max(axis=1) for first, last in spans], 0.0),
        np.minimum([effects[:, first:last].min(axis=1) for first, last in spans], 0.0),
    )


def by_product_a_passage(lines: Lines, vehicles: Sequence[Vehicle]) -> Stepped:
    """Return the same with a product for each vehicle and heading, whose arrays are small: the leanest of all."""
    by_vehicle = [
        [by_one_passage(lines, x, vehicle.loads) for x in passages(lines[0], vehicle)] for vehicle in vehicles
    ]
    return Stepped(
        np.maximum([np.max([highest for highest, _ in both], axis=0) for both in by_vehicle], 0.0),
        np.minimum([np.min([lowest for _, lowest in both], axis=0) for both in by_vehicle], 0.0),
    )


def by_one_passage(lines: Lines, x: Floats, loads: Floats) -> tuple[Floats, Floats]:
    """Return highest and lowest (R,) of one passage (P, A)."""
    stations, ordinates = lines
    position = np.repeat(np.arange(len(x)), loads.size)
    effects = ordinates @ _panel_loads(stations, x.ravel(), np.tile(loads, len(x)), position).T
    return effects.max(axis=1), effects.min(axis=1)


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
    return loads.astype(np.float64, copy=False).reshape(-1, stations.size)
