"""Every position at which point axles on straight lines can be worst: some axle stands on a station.

Between two such positions the effect is a straight line in the position, so an extreme stands at one of them. At the
end stations a line may jump (a reaction): there the load just inside counts, and the position in which that axle has
just left (or not yet entered) is a candidate of its own, because losing it may be the worse.
"""

from __future__ import annotations

from dataclasses import dataclass
from functools import lru_cache
from typing import TYPE_CHECKING, Final

import numpy as np

from movload.arrays import held
from movload.peaks.placement import edge, scattered

if TYPE_CHECKING:
    from collections.abc import Sequence

    from movload.arrays import Floats, Ints
    from movload.traffic.crossing import Train

LOST: Final = 10.0  # edges outside an end station is where an axle is put that has just left, so that it is surely off


@dataclass(frozen=True, slots=True, eq=False)
class Runs:
    """The runs of V trains: one axle of one train in one heading, which will make all stops of a bridge.

    Runs are counted train by train, then heading, then axle. Each has a *pair* for every axle that stands around it.

    Attributes
    ----------
    train, heading, axle
        (N,) whose run it is, in which heading (+1 or -1), and which axle makes the stops.
    first
        (N + 1,) where each run's pairs begin, front axle first.
    ahead
        (Q,) how far toward +x of the stop each pair's axle stands [m]: heading (distance of the axle that makes the
        stop - its own distance).
    felt
        (Q,) its load as the part feels it [N], impact left out.
    """

    train: Ints
    heading: Ints
    axle: Ints
    first: Ints
    ahead: Floats
    felt: Floats


@lru_cache(maxsize=32)  # a truss, its other chord or the next bridge meets the same vehicles: made once for all
def runs_of(trains: tuple[Train, ...], headings: tuple[int, ...] | None = None) -> Runs:
    """Return the runs of trains in the headings given, or in each train's own."""
    tried = [headings or train.headings for train in trains]
    axles = np.array([train.vehicle.loads.size for train in trains], dtype=np.intp)
    distances = np.concatenate([train.vehicle.distances for train in trains])
    felt = np.concatenate([train.felt for train in trains])
    foremost = np.cumsum(axles) - axles  # number of each train's front axle
    group = np.array([(number, heading) for number, one in enumerate(tried) for heading in one], dtype=np.intp)
    member, axle = _counted(axles[group[:, 0]])
    train, heading = group[member].T
    run, around = _counted(axles[train])
    standing = distances[(foremost[train] + axle)[run]]
    other = foremost[train[run]] + around
    first = np.concatenate(([0], np.cumsum(axles[train])))
    return Runs(train, heading, axle, first, held(heading[run] * (standing - distances[other])), held(felt[other]))


def _counted(counts: Ints) -> tuple[Ints, Ints]:
    """Return for every member of groups with ``counts`` members its group and its number in it."""
    group = np.repeat(np.arange(counts.size), counts)
    return group, np.arange(group.size) - np.repeat(np.cumsum(counts) - counts, counts)


@dataclass(frozen=True, slots=True, eq=False)
class Candidates:
    """The candidate positions of V trains on one bridge: every run at every stop.

    A stop is a station, or an end station just lost: stops 0 ... B-1 are the stations; where losing an axle may matter,
    B is just outside the first and B + 1 the last. Candidates are counted stop by stop, so that extremes over the stops
    run along long stretches of memory.

    Attributes
    ----------
    stations
        (B,) [m].
    runs
        Who makes the stops.
    may_lose
        Whether the two stops just outside the ends are made. An axle more on an end only raises the highest of a row
        that never changes sign, and its lowest is 0 anyway; so they matter only to rows that change sign and jump.
    """

    stations: Floats
    runs: Runs
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
        """Return where the front axle stands at each stop of each run (stops, N) [m]; just outside is the end."""
        return self._places[:, None] + self.runs.ahead[self.runs.first[:-1]]

    def standing(self, first: int, last: int) -> Floats:
        """Return where the axles of runs first ... last - 1 stand at each stop (stops, pairs) [m]."""
        x = self._places[:, None] + self.runs.ahead[self.runs.first[first] : self.runs.first[last]]
        if self.may_lose:
            margin = edge(self.stations)
            x[-2][np.abs(x[-2] - self.stations[0]) <= margin] = self.stations[0] - LOST * margin
            x[-1][np.abs(x[-1] - self.stations[-1]) <= margin] = self.stations[-1] + LOST * margin
        return x

    def panel_loads(self, first: int, last: int) -> Floats:
        """Return the panel-point loads (stops x runs, B) [N] of runs first ... last - 1."""
        pairs = slice(self.runs.first[first], self.runs.first[last])
        run = np.repeat(np.arange(last - first), np.diff(self.runs.first[first : last + 1]))
        position = ((last - first) * np.arange(self.stops))[:, None] + run
        return scattered(self.stations, self.standing(first, last), self.runs.felt[pairs], position)


def candidates_of(
    stations: Floats, trains: Sequence[Train], headings: tuple[int, ...] | None = None, *, may_lose: bool
) -> Candidates:
    """Return the candidates of trains.

    Parameters
    ----------
    headings
        The headings to try, with all trains; each train's own when left out.
    may_lose
        See `Candidates`.
    """
    return Candidates(stations, runs_of(tuple(trains), headings), may_lose)
