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
    0 ... B-1 are the stations; where losing an axle may matter, B is just outside the first and B + 1 the last.

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
    may_lose
        Whether the two stops just outside the ends are made. An axle more on an end only raises the highest of a row
        that never changes sign, and its lowest is 0 anyway; so they matter only to rows that change sign and jump.
    """

    stations: Floats
    distances: Floats
    felt: Floats
    axles: Ints
    train: Ints
    heading: Ints
    axle: Ints
    may_lose: bool

    @property
    def stops(self) -> int:
        """How many stops a run makes."""
        return int(self.stations.size) + (2 if self.may_lose else 0)

    @property
    def _places(self) -> Floats:
        """Where the stops are [m]; just outside counts as the end itself."""
        ends = self.stations[[0, -1]] if self.may_lose else self.stations[:0]
        return np.concatenate((self.stations, ends))

    def fronts(self) -> Floats:
        """Return where the front axle stands at each stop of each run (N, stops) [m]; just outside is the end."""
        return self._places + (self.heading * self.distances[self.train, self.axle])[:, None]

    def standing(self, first: int, last: int) -> tuple[Floats, Floats]:
        """Return where axles stand (N, stops, A) [m] and what they weigh (N, 1, A) [N] in runs first ... last - 1.

        x = stop + heading (distance of the standing axle - distance of each axle).
        """
        train, axle = self.train[first:last], self.axle[first:last]
        width = self.axles[train].max()
        behind = self.distances[train, :width]
        ahead = self.heading[first:last, None] * (self.distances[train, axle][:, None] - behind)
        stations = self.stations
        x = self._places[None, :, None] + ahead[:, None, :]
        if not self.may_lose:
            return x, self.felt[train, None, :width]
        margin = edge(stations)
        x[:, -2][np.abs(x[:, -2] - stations[0]) <= margin] = stations[0] - LOST * margin
        x[:, -1][np.abs(x[:, -1] - stations[-1]) <= margin] = stations[-1] + LOST * margin
        return x, self.felt[train, None, :width]


def candidates_of(
    stations: Floats, trains: Sequence[Train], headings: tuple[int, ...] | None = None, *, may_lose: bool
) -> Candidates:
    """Return the candidates of trains; those with as many axles should stand together (padding costs).

    Parameters
    ----------
    headings
        The headings to try, with all trains; each train's own when left out.
    may_lose
        See `Candidates`.
    """
    axles = np.array([train.vehicle.loads.size for train in trains], dtype=np.intp)
    train, axle = _each_axle(axles)
    distances, felt = np.zeros((2, axles.size, int(axles.max())))
    distances[train, axle] = np.concatenate([train.vehicle.distances for train in trains])
    felt[train, axle] = np.concatenate([train.vehicle.loads for train in trains])
    felt[train, axle] *= np.concatenate([train.shares for train in trains])
    tried = [headings or train.headings for train in trains]
    run_train, run_axle = _each_axle(np.repeat(axles, [len(one) for one in tried]))
    of_group = np.array([(number, heading) for number, one in enumerate(tried) for heading in one], dtype=np.intp)
    return Candidates(
        stations,
        distances,
        felt,
        axles,
        train=of_group[run_train, 0],
        heading=of_group[run_train, 1],
        axle=run_axle,
        may_lose=may_lose,
    )


def _each_axle(counts: Ints) -> tuple[Ints, Ints]:
    """Return for every axle of groups with ``counts`` axles its group and its number in it."""
    group = np.repeat(np.arange(counts.size), counts)
    return group, np.arange(group.size) - np.repeat(np.cumsum(counts) - counts, counts)
