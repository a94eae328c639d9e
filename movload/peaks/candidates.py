"""Every position at which point axles on straight lines can be worst: some axle stands on a station.

Between two such positions the effect is a straight line in the position, so an extreme stands at one of them. At the
end stations a line may jump (a reaction): there the load just inside counts, and the position in which that axle has
just left (or not yet entered) is a candidate of its own, because losing it may be the worse.
"""

from __future__ import annotations

from dataclasses import dataclass
from typing import TYPE_CHECKING, Final

import numpy as np

from movload.peaks.placement import edge

if TYPE_CHECKING:
    from collections.abc import Sequence

    from movload.arrays import Floats, Ints
    from movload.traffic.crossing import Train

LOST: Final = 10.0  # edges outside an end station is where an axle is put that has just left, so that it is surely off


@dataclass(frozen=True, slots=True, eq=False)
class Candidates:
    """The candidate positions of trains with one number of axles and one set of headings.

    They are counted train by train, then heading, then axle, then stop. A stop is a station, or an end station just
    lost: stops 0 ... B-1 are the stations, B is just outside the first and B + 1 just outside the last.

    Attributes
    ----------
    stations
        (B,) [m].
    distances
        (V, A) distance of each axle behind the front one [m].
    felt
        (V, A) load of each axle as the part feels it [N], impact left out.
    headings
        (H,) +1 or -1.
    """

    stations: Floats
    distances: Floats
    felt: Floats
    headings: Ints

    @property
    def stops(self) -> int:
        """How many stops an axle makes: the stations and the two just outside."""
        return int(self.stations.size) + 2

    @property
    def per_train(self) -> int:
        """How many candidates one train has."""
        return int(self.headings.size * self.distances.shape[1]) * self.stops

    def axles_at(self, first: int, last: int) -> tuple[Floats, Floats]:
        """Return where axles stand (runs, stops, A) [m] and what they weigh (runs, 1, A) [N], runs first ... last - 1.

        A run is one axle of one train in one heading making all its stops.

        x = stop + heading (distance of the standing axle - distance of each axle).
        """
        runs = np.arange(first, last)
        axles = self.distances.shape[1]
        train, heading = runs // (axles * self.headings.size), runs // axles % self.headings.size
        behind = self.distances[train]
        ahead = self.headings[heading, None] * (behind[np.arange(runs.size), runs % axles, None] - behind)
        stations = self.stations
        stops = np.concatenate((stations, stations[[0, -1]]))
        x = stops[None, :, None] + ahead[:, None, :]
        margin = edge(stations)
        x[:, -2][np.abs(x[:, -2] - stations[0]) <= margin] = stations[0] - LOST * margin
        x[:, -1][np.abs(x[:, -1] - stations[-1]) <= margin] = stations[-1] + LOST * margin
        return x, self.felt[train, None, :]

    def described(self) -> tuple[Ints, Ints, Ints]:
        """Return heading, standing axle and stop of each candidate of one train, (per_train,) each."""
        shape = (self.headings.size, self.distances.shape[1], self.stops)
        heading, axle, stop = np.unravel_index(np.arange(self.per_train), shape)
        return self.headings[heading], np.asarray(axle), np.asarray(stop)


def candidates_of(stations: Floats, trains: Sequence[Train]) -> Candidates:
    """Return the candidates of trains that have the same number of axles and the same headings."""
    return Candidates(
        stations,
        np.array([train.vehicle.distances for train in trains]),
        np.array([train.vehicle.loads for train in trains]) * np.array([train.shares for train in trains]),
        np.array(trains[0].headings, dtype=np.intp),
    )


def alike(trains: Sequence[Train]) -> list[list[int]]:
    """Return the numbers of trains grouped by axle count and headings, so that each group is swept in one batch."""
    groups: dict[tuple[int, tuple[int, ...]], list[int]] = {}
    for number, train in enumerate(trains):
        groups.setdefault((train.vehicle.loads.size, train.headings), []).append(number)
    return list(groups.values())
