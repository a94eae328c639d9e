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
    """The candidate positions of V trains, as runs: one axle of one train in one heading making all its stops.

    Runs are counted train by train, then heading, then axle. A stop is a station, or an end station just lost: stops
    0 ... B-1 are the stations, B is just outside the first and B + 1 just outside the last.

    Attributes
    ----------
    stations
        (B,) [m].
    distances
        (V, A) distance of each axle behind the front one [m]; shorter trains are padded.
    felt
        (V, A) load of each axle as the part feels it [N], impact left out; 0 where padded.
    axles
        (V,) how many axles each train has.
    train, heading, axle
        (N,) whose run it is, in which heading (+1 or -1), and which axle makes the stops.
    """

    stations: Floats
    distances: Floats
    felt: Floats
    axles: Ints
    train: Ints
    heading: Ints
    axle: Ints

    @property
    def stops(self) -> int:
        """How many stops a run makes: the stations and the two just outside."""
        return int(self.stations.size) + 2

    def fronts(self) -> Floats:
        """Return where the front axle stands at each stop of each run (N, stops) [m]; just outside is the end."""
        stops = np.concatenate((self.stations, self.stations[[0, -1]]))
        return stops + (self.heading * self.distances[self.train, self.axle])[:, None]

    def standing(self, first: int, last: int) -> tuple[Floats, Floats]:
        """Return where axles stand (N, stops, A) [m] and what they weigh (N, 1, A) [N] in runs first ... last - 1.

        x = stop + heading (distance of the standing axle - distance of each axle).
        """
        train, axle = self.train[first:last], self.axle[first:last]
        width = self.axles[train].max()
        behind = self.distances[train, :width]
        ahead = self.heading[first:last, None] * (self.distances[train, axle][:, None] - behind)
        stations = self.stations
        stops = np.concatenate((stations, stations[[0, -1]]))
        x = stops[None, :, None] + ahead[:, None, :]
        margin = edge(stations)
        x[:, -2][np.abs(x[:, -2] - stations[0]) <= margin] = stations[0] - LOST * margin
        x[:, -1][np.abs(x[:, -1] - stations[-1]) <= margin] = stations[-1] + LOST * margin
        return x, self.felt[train, None, :width]


def candidates_of(stations: Floats, trains: Sequence[Train], headings: tuple[int, ...] | None = None) -> Candidates:
    """Return the candidates of trains; those with as many axles should stand together (padding costs).

    Parameters
    ----------
    headings
        The headings to try; each train's own when left out.
    """
    counts = [train.vehicle.loads.size for train in trains]
    distances, felt = np.zeros((2, len(trains), max(counts)))
    runs: list[tuple[int, int, int]] = []
    for number, (train, count) in enumerate(zip(trains, counts, strict=True)):
        distances[number, :count] = train.vehicle.distances
        distances[number, count:] = distances[number, count - 1]
        felt[number, :count] = train.vehicle.loads * train.shares
        runs += [(number, heading, axle) for heading in headings or train.headings for axle in range(count)]
    train_of, heading_of, axle_of = np.array(runs, dtype=np.intp).T
    return Candidates(
        stations, distances, felt, np.array(counts, dtype=np.intp), train_of, heading_of, np.ascontiguousarray(axle_of)
    )
