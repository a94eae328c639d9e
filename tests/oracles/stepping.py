"""Moving loads by hand: every axle read off its influence line with ``np.interp``, at as many positions as one likes.

``sampled`` is the method that a peak must never lose to. ``stands`` is the classic criterion written as plain loops:
some axle on some station, each of the two headings; and, where a line jumps to zero at its end, the same stand with
the axles at that end already gone.
"""

from __future__ import annotations

from dataclasses import dataclass
from typing import TYPE_CHECKING

import numpy as np

if TYPE_CHECKING:
    from collections.abc import Iterator, Sequence

    from numpy.typing import NDArray

    from movload.statics.influence import InfluenceLines
    from movload.traffic.vehicle import Vehicle

    Floats = NDArray[np.float64]


def sampled(lines: InfluenceLines, vehicle: Vehicle, fronts: Floats, heading: int) -> Floats:
    """Return every row's effect (R, P) with the front axle at each of ``fronts`` (P,) [m]."""
    behind = np.concatenate(([0.0], np.cumsum(np.asarray(vehicle.spacings, dtype=np.float64))))
    x = fronts[:, None] - heading * behind
    return np.array(
        [np.interp(x, lines.stations, row, left=0.0, right=0.0) @ vehicle.loads for row in lines.ordinates]
    ).reshape(-1, fronts.size)


def passage(lines: InfluenceLines, vehicle: Vehicle, count: int) -> Floats:
    """Return ``count`` front-axle positions (P,) [m] from before the vehicle enters until after it has left."""
    length = float(np.sum(vehicle.spacings))
    return np.linspace(lines.stations[0] - length - 0.317, lines.stations[-1] + length + 0.271, count)


@dataclass(frozen=True, slots=True)
class Stand:
    """The vehicle standing still: front axle [m], heading, and every row's effect (R,)."""

    front: float
    heading: int
    effects: Floats


def stands(lines: InfluenceLines, vehicle: Vehicle) -> Iterator[Stand]:
    """Yield every stand with an axle on a station, axle by axle; at an end station also with that end just left."""
    behind = np.concatenate(([0.0], np.cumsum(np.asarray(vehicle.spacings, dtype=np.float64))))
    first, last = float(lines.stations[0]), float(lines.stations[-1])
    near = 1e-12 * max(abs(first), abs(last))  # summed spacings round: within this an axle stands on the end station
    for heading in vehicle.headings:
        for axle in range(behind.size):
            for station in lines.stations:
                x = station + heading * (behind[axle] - behind)
                x[np.abs(x - first) <= near] = first
                x[np.abs(x - last) <= near] = last
                yield Stand(float(x[0]), heading, _effects(lines, vehicle, x))
                if station in {first, last}:
                    gone = np.where(x == station, last + 1.0, x)
                    yield Stand(float(x[0]), heading, _effects(lines, vehicle, gone))


def extremes(lines: InfluenceLines, vehicle: Vehicle) -> tuple[Floats, Floats]:
    """Return every row's highest and lowest (R,) over all stands, the vehicle off the bridge included."""
    values = np.array([stand.effects for stand in stands(lines, vehicle)])
    return np.maximum(values.max(axis=0), 0.0), np.minimum(values.min(axis=0), 0.0)


def scales(lines: InfluenceLines, vehicles: Sequence[Vehicle]) -> Floats:
    """Return (V, R) the most that any stand could give: all axles on each row's largest ordinate."""
    gross = np.array([[float(vehicle.loads.sum())] for vehicle in vehicles])
    return np.asarray(gross * np.abs(lines.ordinates).max(axis=1))


def sizes(lines: InfluenceLines) -> Floats:
    """Return (R,) the largest ordinate of each row's kind, force or deflection: what a row that is 0 is measured by."""
    down = np.array([effect.kind == "down" for effect in lines.effects])
    largest = np.abs(lines.ordinates).max(axis=1)
    each: Floats = np.where(down, largest[down].max(initial=0.0), largest[~down].max(initial=0.0))
    return each


def _effects(lines: InfluenceLines, vehicle: Vehicle, x: Floats) -> Floats:
    total = np.zeros(len(lines.ordinates))
    for place, load in zip(x, vehicle.loads, strict=True):
        if lines.stations[0] <= place <= lines.stations[-1]:
            total += load * np.array([np.interp(place, lines.stations, row) for row in lines.ordinates])
    return total
