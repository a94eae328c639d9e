"""One variable gap: its two ends, and pairs of places where both rigid groups have an axle on a station.

Why nothing else needs looking at stands in `movload.peaks.gaps`. All of it is one matrix product of panel loads for
as many vehicles as stay in cache: two rigid vehicles and two groups each.
"""

from __future__ import annotations

from dataclasses import dataclass, replace
from functools import lru_cache
from typing import TYPE_CHECKING, Final

import numpy as np

from movload.arrays import keep_memory_warm
from movload.peaks.candidates import Candidates, candidates_of
from movload.peaks.extremes import may_lose, static_extremes
from movload.peaks.gaps_bent import JUMP, NEAR, Ranges, sort_keys
from movload.peaks.gaps_rows import groups_of, lines_of, over_headings
from movload.peaks.placement import edge

if TYPE_CHECKING:
    from collections.abc import Iterator, Sequence

    from movload.arrays import Floats, Ints
    from movload.statics.condensed import Condensed
    from movload.statics.part import AtStations
    from movload.traffic.crossing import Train

_IN_CACHE: Final = 120_000  # doubles of one array worked on at a time: half a dozen of them stay in cache
_TRAINS: Final = 4  # of each unit: least and greatest spacing, front group, rear group
_GREATER: Final = (np.maximum, np.minimum)


def one_gap_extremes(response: AtStations, units: Sequence[Train]) -> tuple[Floats, Floats]:
    """Return every row's extremes (U, R) under trains of one variable gap each, both including 0."""
    keep_memory_warm()
    highest, lowest = np.empty((2, len(units), len(response.effects)))
    kinds = [(bool(_groups(unit)), unit.headings, bool((unit.shares < 0.0).any())) for unit in units]
    for kind in dict.fromkeys(kinds):
        here = [number for number, one in enumerate(kinds) if one == kind]
        some = [units[number] for number in here]
        two_groups, _, lifting = kind
        found = _by_pairs(response.condensed, some, lifting=lifting) if two_groups else _by_ends(response, some)
        highest[here], lowest[here] = found
    return highest, lowest


@lru_cache(maxsize=256)  # one train meets many bridges and parts
def _ends(train: Train) -> tuple[Train, ...]:
    """Return a train of one variable gap with its least and with its greatest spacing."""
    vehicle = train.vehicle
    ends = [[gap[side] if isinstance(gap, tuple) else gap for gap in vehicle.spacings] for side in (0, 1)]
    return tuple(replace(train, vehicle=replace(vehicle, spacings=end)) for end in ends)


@lru_cache(maxsize=256)
def _groups(train: Train) -> tuple[Train, ...]:
    """Return the two groups of a train of one variable gap as trains; none where one of them has no load."""
    vehicle = train.vehicle
    cut = 1 + next(number for number, gap in enumerate(vehicle.spacings) if isinstance(gap, tuple))
    parts = [(slice(0, cut), vehicle.spacings[: cut - 1]), (slice(cut, None), vehicle.spacings[cut:])]
    if not all(vehicle.loads[axles].any() for axles, _ in parts):
        return ()
    return tuple(
        replace(
            train,
            vehicle=replace(vehicle, loads=vehicle.loads[axles], spacings=gaps, gauges=(), left_shares=()),
            shares=train.shares[axles],
        )
        for axles, gaps in parts
    )


@lru_cache(maxsize=256)
def _window(train: Train) -> tuple[float, float]:
    """Return least and greatest distance between the first axles of a train's two groups [m]."""
    return groups_of(train)[0].window


def _by_ends(response: AtStations, units: Sequence[Train]) -> tuple[Floats, Floats]:
    """Return every row's extremes (U, R) where only one group has loads, so that its spacing to the other is idle."""
    highest, lowest = static_extremes(response, [end for unit in units for end in _ends(unit)])
    return highest.reshape(len(units), 2, -1).max(axis=1), lowest.reshape(len(units), 2, -1).min(axis=1)


def _by_pairs(condensed: Condensed, units: Sequence[Train], *, lifting: bool) -> tuple[Floats, Floats]:
    """Return every row's extremes (U, R) by the two ends of the gap and the pairs between."""
    stations, lines = condensed.response.stations, lines_of(condensed.response)
    lost = may_lose(condensed, lifting=lifting)
    trains = [train for unit in units for train in (*_ends(unit), *_groups(unit))]
    windows = np.array([_window(unit) for unit in units])

    def found(tried: tuple[int, ...]) -> tuple[Floats, Floats]:
        candidates = candidates_of(stations, trains, tried, may_lose=lost)
        batch = _Batch(candidates, lines, windows, _along(candidates))
        best = np.concatenate([batch.best(first, last) for first, last in batch.in_cache()], axis=1)
        return best[0], best[1]

    return over_headings(condensed, units[0].headings, found)


def _along(candidates: Candidates) -> Floats:
    """Return where front axles stand along the direction of travel (stops, N) [m], a lost axle surely off."""
    fronts = candidates.fronts()
    if candidates.may_lose:
        fronts[-2:] += JUMP * edge(candidates.stations) * np.array([[-1.0], [1.0]])
    along: Floats = candidates.runs.heading * fronts
    return along


@dataclass(frozen=True, slots=True, eq=False)
class _Batch:
    """Units on one bridge: their candidates, C rows' ordinates (C, B), windows (U, 2) and places along (stops, N)."""

    candidates: Candidates
    lines: Floats
    windows: Floats
    along: Floats

    def in_cache(self) -> Iterator[tuple[int, int]]:
        """Yield first and last (beyond) of the units that are worked on at a time."""
        ends = np.searchsorted(self.candidates.runs.train, np.arange(len(self.windows) + 1) * _TRAINS).tolist()
        most = _IN_CACHE // (self.candidates.stops * len(self.lines))
        first = 0
        for last in range(1, len(ends)):
            if last == len(ends) - 1 or ends[last + 1] - ends[first] > most:
                yield first, last
                first = last

    def best(self, first: int, last: int) -> Floats:
        """Return every row's highest and lowest (2, units, C) under units first ... last - 1."""
        runs = slice(*np.searchsorted(self.candidates.runs.train, (first * _TRAINS, last * _TRAINS)))
        unit, part = divmod(self.candidates.runs.train[runs] - first * _TRAINS, _TRAINS)
        values = self.candidates.panel_loads(runs.start, runs.stop) @ self.lines.T
        by_stop = values.reshape(self.candidates.stops, unit.size, -1)
        rigid = np.flatnonzero(part < 2)
        starts = np.searchsorted(unit[rigid], np.arange(last - first))
        best = np.array([greater.reduceat(greater.reduce(by_stop, axis=0)[rigid], starts) for greater in _GREATER])
        pairs = self._pairs(runs, unit + first, part)
        if pairs is not None:
            of_unit, front, rear, ranges = pairs
            starts = np.flatnonzero(np.diff(of_unit, prepend=-1))
            here = of_unit[starts] - first
            leading, following = values[front], values[rear]
            for side, greater in enumerate(_GREATER):
                sums = ranges.best(following, greater)
                sums += leading
                best[side, here] = greater(best[side, here], greater.reduceat(sums, starts))
        return best

    def _pairs(self, runs: slice, unit: Ints, part: Ints) -> tuple[Ints, Ints, Ints, Ranges] | None:
        """Return the pairs of some runs: each front place's unit and value's number, and the range of rear ones.

        Values are numbered stop by stop; rear ones stand in the order that ranges count in. None without any pair.
        """
        group = np.flatnonzero(part >= 2)
        number = (np.arange(self.candidates.stops)[:, None] * part.size + group).reshape(-1)
        heading = self.candidates.runs.heading[runs][group]
        keys = sort_keys(2 * unit[group] + (heading > 0), self.along[:, runs][:, group]).reshape(-1)
        order = np.argsort(keys, kind="stable")
        behind = np.tile(part[group] == 3, self.candidates.stops)[order]
        front, rear = order[~behind], order[behind]
        of_unit = np.tile(unit[group], self.candidates.stops)[front]
        window = self.windows[of_unit] + NEAR * edge(self.candidates.stations) * np.array([-1.0, 1.0])
        low = np.searchsorted(keys[rear], keys[front] - 1j * window[:, 1])
        high = np.searchsorted(keys[rear], keys[front] - 1j * window[:, 0], side="right")
        some = np.flatnonzero(high > low)
        if not some.size:
            return None
        return of_unit[some], number[front[some]], number[rear], Ranges(low[some], high[some])
