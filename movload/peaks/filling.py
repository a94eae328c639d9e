"""Loads that fill rather than move: uniform wherever adverse, a knife edge, a patch, and load outside a vehicle.

All effects are static. Loads come as one part feels them, share and factor included [N/m] or [N]; a number, or one for
each row and sense (R, 2). Values are (R, 2): what is added to the highest, 0 or more, and to the lowest, 0 or less.

Over a stretch of positions in which nothing passes a kink, the effect is a quadratic in the position. Of
f(t) = f0 (1 - t) + f1 t - k t (1 - t) / 2, 0 <= t <= 1, the second derivative k is known from the slopes of the line;
if k < 0 and |f1 - f0| < -k / 2 its greatest value stands inside, at t = 1/2 - (f1 - f0) / k, else at an end.
"""

from __future__ import annotations

import math
from dataclasses import dataclass
from typing import TYPE_CHECKING, Final, TypeAlias

import numpy as np

from movload.arrays import Bools, Floats, Ints, frozen_floats, keep_memory_warm
from movload.errors import InputError
from movload.peaks.candidates import LOST
from movload.peaks.patches import spread
from movload.peaks.placement import edge, on_the_ends, panel_loads
from movload.statics.adverse import areas, extremes_of_line, ordinates_of, refined, stretches

if TYPE_CHECKING:
    from movload.statics.part import AtStations
    from movload.traffic.crossing import Train

Loads: TypeAlias = "float | Floats"

TIE: Final = 1e-12  # of the row's greatest value: places that differ by less are equally bad, and the first counts
SENSES: Final = np.array([1.0, -1.0])
_NOISE: Final = 1e-12  # of the row's larger value: round-off, as in `movload.peaks.extremes`
_SAME_PLACE: Final = 1e-9  # m: places no further apart count as one when ties are broken
_AT_A_TIME: Final = 100_000  # doubles: the dozen arrays of a search then stay in cache


@dataclass(frozen=True, slots=True, eq=False)
class Filled:
    """What one stretch of load adds to every row's highest and lowest.

    Attributes
    ----------
    values
        (R, 2) static effects, share and factor included: highest (0 or more), lowest (0 or less).
    load
        (R, 2) as it stands there [N/m]; of a knife edge [N].
    start, end
        (R, 2) the stretch, as far as it is on the bridge [m]; both the same of a knife edge; nan where nothing is
        better than something.
    """

    values: Floats
    load: Floats
    start: Floats
    end: Floats

    def __post_init__(self) -> None:
        """Copy read-only."""
        for name in ("values", "load", "start", "end"):
            object.__setattr__(self, name, frozen_floats(getattr(self, name)))


@dataclass(frozen=True, slots=True, eq=False)
class Outside:
    """A vehicle together with a uniform load outside it, wherever that is adverse.

    Attributes
    ----------
    values
        (R, 2) highest and lowest of both together.
    front, heading
        (R, 2) x of the front axle [m] and heading; nan and 0 where the uniform load alone is worse.
    lost
        (R, 2) whether an axle has just passed an end station: ``front`` is then a hair beyond the place.
    """

    values: Floats
    front: Floats
    heading: Ints
    lost: Bools


@dataclass(frozen=True, slots=True, eq=False)
class Senses:
    """The rows that must be searched: the distinct ones, each as it is and turned over, so that the most is sought.

    Attributes
    ----------
    stations
        (B,) [m].
    ordinates
        (N, B), first the distinct rows, then the same times -1.
    index, size
        (R, 2) which of them answers for a row's highest and lowest, and how many times it.
    """

    stations: Floats
    ordinates: Floats
    index: Ints
    size: Floats

    @classmethod
    def of(cls, lines: AtStations) -> Senses:
        """Return those of a response that multiplies."""
        few = lines.condensed
        distinct = ordinates_of(few.response)
        other = len(distinct) * np.stack((few.scale < 0.0, few.scale >= 0.0), axis=1)
        size = np.repeat(np.abs(few.scale)[:, None], 2, axis=1)
        ordinates = np.concatenate((distinct, -distinct))
        return cls(few.response.stations, ordinates, (few.row[:, None] + other).astype(np.intp), size)

    def values(self, most: Floats) -> Floats:
        """Return every row's values (R, 2) from the most of those searched (N,)."""
        return without_noise(most[self.index] * self.size * SENSES)

    def places(self, x: Floats, values: Floats) -> Floats:
        """Return where (R, 2) the values stand, nan where they are 0."""
        return np.asarray(np.where(values == 0.0, np.nan, x[self.index]))

    def filled(self, load: Loads, most: Floats, start: Floats, end: Floats) -> Filled:
        """Return a stretch of load from the most of 1 N/m on each searched row and its place (N,)."""
        loads = in_both_senses(load, len(self.index), "load")
        values = loads * self.values(most)
        inside = (np.clip(x, self.stations[0], self.stations[-1]) for x in (start, end))
        first, last = (self.places(x, values) for x in inside)
        return Filled(values, loads, first, last)


def uniform_where_adverse(lines: AtStations, load: Loads) -> Floats:
    """Return the values (R, 2) of a uniform load on every stretch where it is adverse: load x area (`stretches`)."""
    return in_both_senses(load, len(lines.effects), "load") * areas(lines)


def knife_edge(lines: AtStations, loads: Loads) -> Filled:
    """Return what one load on the greatest adverse ordinate adds.

    Parameters
    ----------
    loads
        [N]: a number, or one for each row (R,), because it may differ by kind of effect, or for each sense (R, 2).
    """
    ordinates, station = extremes_of_line(lines)
    load = in_both_senses(loads, len(lines.effects), "knife edge")
    x = np.where((station < 0) | (load == 0.0), np.nan, lines.stations[station])
    return Filled(load * ordinates, load, x, x)


def patch_at(lines: AtStations, load: Loads, start: float, end: float) -> Filled:
    """Return what a uniform load from ``start`` to ``end`` [m] adds; what lies off the bridge does nothing.

    It stands there or it does not: values of the other sense are 0.

    Raises
    ------
    InputError
        A patch that ends before it starts, or a load that is none.
    """
    if not (math.isfinite(start) and math.isfinite(end) and start <= end):
        raise InputError(f"a patch runs from its start to its end, got {start:g} to {end:g} m", place="patch")
    effects = ordinates_of(lines) @ stretch_loads(lines.stations, np.array([start]), np.array([end]))[0]
    loads = in_both_senses(load, len(lines.effects), "load")
    floor = _NOISE * np.abs(ordinates_of(lines)).max(axis=1) * (end - start)
    effects = np.where(np.abs(effects) <= floor, 0.0, effects)
    values = loads * np.stack((np.maximum(effects, 0.0), np.minimum(effects, 0.0)), axis=1)
    ends = (np.clip(x, lines.stations[0], lines.stations[-1]) for x in (start, end))
    first, last = (np.where(values == 0.0, np.nan, x) for x in ends)
    return Filled(values, loads, first, last)


def patch_anywhere(lines: AtStations, load: Loads, length: float) -> Filled:
    """Return what a uniform load of a fixed length adds where it is worst: an end at a station, or between exactly.

    It may reach over either end of the bridge; of equally bad places the smallest counts.

    Parameters
    ----------
    length
        [m], 0 or more: 0 is nothing, and one as long as the bridge is all of it or what is left at either end.
    """
    if not length >= 0:
        raise InputError(f"a length must be 0 or more, got {length:g} m", place="patch")
    senses = Senses.of(lines)
    stations = senses.stations
    reach = min(length, float(stations[-1] - stations[0]))
    most, start = best_of_length(stations, senses.ordinates, reach)
    return senses.filled(load, most, start, start + reach)


def best_of_length(stations: Floats, ordinates: Floats, length: float) -> tuple[Floats, Floats]:
    """Return the most (N,) that 1 N/m over a length [m] makes of each row, 0 or more, and the patch's start (N,)."""
    starts = np.unique(np.concatenate((stations, stations - length)))
    at = ordinates @ stretch_loads(stations, starts, starts + length).T
    middle, step = 0.5 * (starts[1:] + starts[:-1]), np.diff(starts)
    bend = (_slopes(stations, ordinates, middle + length) - _slopes(stations, ordinates, middle)) * step**2
    along, inside = vertices(at[:, :-1], at[:, 1:], bend)
    values, places = np.empty((2, len(ordinates), 2 * starts.size - 1))
    values[:, ::2], values[:, 1::2] = at, inside
    places[:, ::2], places[:, 1::2] = starts, starts[:-1] + along * step
    chosen = _first_worst(values)[:, None]
    most = np.take_along_axis(values, chosen, axis=1)[:, 0]
    return np.maximum(most, 0.0), np.take_along_axis(places, chosen, axis=1)[:, 0]


def outside_vehicle(  # noqa: PLR0913 - a vehicle, a load and how each counts
    lines: AtStations, train: Train, load: Loads, *,
    gaps: tuple[float, float] = (0.0, 0.0), impact: Loads = 0.0, relieving: float | None = None,
) -> Outside:  # fmt: skip
    """Return a vehicle together with a uniform load wherever it is adverse, but not on the vehicle's own length.

    Both are exact together: the vehicle stands where the two are worst, not where it is worst alone.

    Parameters
    ----------
    lines
        A response that multiplies.
    train
        Axles only; its factor and shares count.
    load
        [N/m] as the part feels it.
    gaps
        How far before the front and behind the rear axle the uniform load stays away [m], 0 or more.
    impact
        Dynamic allowance on the axles, for a train that is dynamic [-].
    relieving
        Part of each axle that counts where it relieves; the train's own when left out.

    Raises
    ------
    InputError
        Gaps below 0, a vehicle with uniform loads of its own, or a lifting axle that counts less where it relieves.
    """
    if not all(math.isfinite(gap) and gap >= 0 for gap in gaps):
        raise InputError(f"gaps are 0 or more, got {gaps[0]:g} and {gaps[1]:g} m", place=train.case)
    if train.vehicle.strips or train.vehicle.tail is not None:
        raise InputError("one uniform load counts here, got a vehicle with its own", place=train.vehicle.title)
    part = train.relieving if relieving is None else relieving
    if part != 1.0 and (train.shares < 0.0).any():
        raise InputError("an axle that lifts relieves where others load; it counts in full only", place=train.case)
    keep_memory_warm()
    rows = len(lines.effects)
    senses = Senses.of(refined(lines))
    counts = 1.0 + in_both_senses(impact, rows, "impact") * train.dynamic
    keys = np.stack((senses.index, counts, in_both_senses(load, rows, "load")), axis=2).reshape(-1, 3)
    some, which = np.unique(keys, axis=0, return_inverse=True)  # rows that differ by a number are searched once
    y = senses.ordinates[some[:, 0].astype(np.intp)]
    axles = np.asarray(np.where(y < 0.0, part * y, y) * some[:, 1:2], dtype=np.float64)
    fills = np.asarray(np.maximum(y, 0.0) * some[:, 2:], dtype=np.float64)
    found = _best_outside(senses.stations, axles, fills, train, gaps)
    most, front, heading, lost = found[:, which.reshape(rows, 2)]
    values = without_noise(most * senses.size * SENSES)
    off = (values == 0.0) | (heading == 0.0)
    return Outside(values, np.where(off, np.nan, front), np.where(off, 0, heading.astype(np.intp)), (lost > 0.0) & ~off)


def stretches_outside(
    lines: AtStations, row: int, side: int, hole: tuple[float, float]
) -> tuple[tuple[float, float], ...]:
    """Return where a row's highest (side 0) or lowest takes uniform load when none may stand in a hole (x0, x1) [m]."""
    left = [(start, min(end, hole[0])) for start, end in stretches(lines, row, side)]
    right = [(max(start, hole[1]), end) for start, end in stretches(lines, row, side)]
    return tuple((start, end) for start, end in sorted(left + right) if end > start)


def stretch_loads(stations: Floats, start: Floats, end: Floats) -> Floats:
    """Return the panel-point loads (K, B) of 1 N/m from ``start`` to ``end`` (K,) [m]; nothing off the bridge."""
    return spread(stations, start[:, None], end[:, None], np.ones(1))


def vertices(first: Floats, last: Floats, bend: Floats) -> tuple[Floats, Floats]:
    """Return where in 0 to 1 each quadratic has its greatest value inside, and that value; -inf where it has none."""
    rise = last - first
    has = (bend < 0.0) & (np.abs(rise) < -0.5 * bend)
    along = 0.5 - np.divide(rise, bend, out=np.zeros_like(rise), where=has)
    return along, np.where(has, first + rise * along - 0.5 * bend * along * (1.0 - along), -np.inf)


def without_noise(values: Floats) -> Floats:
    """Return values (R, 2) with round-off beside a row's larger one as 0."""
    least = _NOISE * np.abs(values).max(axis=1, keepdims=True)
    return np.asarray(np.where(np.abs(values) <= least, 0.0, values))


def in_both_senses(loads: Loads, rows: int, place: str) -> Floats:
    """Return a number, or one for each row (R,) or each row and sense (R, 2), as (R, 2); all 0 or more."""
    given = np.asarray(loads, dtype=np.float64)
    if given.shape not in {(), (rows,), (rows, 2)}:
        raise InputError(f"one number, or one for each of {rows} rows, got shape {given.shape}", place=place)
    if not (np.isfinite(given) & (given >= 0.0)).all():
        raise InputError(f"must be finite and 0 or more, got {float(np.min(given)):g}", place=place)
    return np.asarray(np.broadcast_to(given[:, None] if given.ndim == 1 else given, (rows, 2)))


def _first_worst(values: Floats) -> Ints:
    """Return the first of each row's values (N, K) that is greatest but for a tie."""
    worst = values.max(axis=1, keepdims=True)
    first: Ints = np.argmax(values >= worst - TIE * np.abs(worst), axis=1)
    return first


def _slopes(stations: Floats, ordinates: Floats, x: Floats) -> Floats:
    """Return each row's slope at x (N, K); 0 off the bridge."""
    slopes = np.zeros((len(ordinates), stations.size + 1))
    slopes[:, 1:-1] = np.diff(ordinates, axis=1) / np.diff(stations)
    return slopes[:, np.searchsorted(stations, x)]


def _best_outside(stations: Floats, axles: Floats, fills: Floats, train: Train, gaps: tuple[float, float]) -> Floats:
    """Return the most of each row, the front's x, the heading and whether an axle is lost (4, N), in pieces of rows."""
    alone = fills @ stretch_loads(stations, stations[:1], stations[-1:])[0]
    best = np.stack((alone, np.full(alone.size, np.nan), np.zeros(alone.size), np.zeros(alone.size)))
    for heading in sorted(train.headings, reverse=True):
        stops = _Stops.of(stations, train, heading, gaps)
        step = max(1, _AT_A_TIME // stops.front.size)
        pieces = [stops.worst(axles[i : i + step], fills[i : i + step]) for i in range(0, len(axles), step)]
        found = np.concatenate(pieces, axis=1)
        found[0] += alone
        tie = TIE * np.abs(best[0])
        sooner = (best[2] != 0.0) & (found[0] >= best[0] - tie) & (found[1] < best[1] - _SAME_PLACE)
        best = np.where((found[0] > best[0] + tie) | sooner, found, best)
    return best


@dataclass(frozen=True, slots=True, eq=False)
class _Stops:
    """Where a front stands when an axle is on a station or an end of the gap in the uniform load is (K,), in order.

    ``stands`` are the panel loads (K, B) of the axles there, ``leaving`` and ``entered`` of those just before and just
    after it; ``hole`` are those of 1 N/m over the gap, which goes from ``front + ends[0]`` to ``front + ends[1]``.
    """

    stations: Floats
    heading: int
    front: Floats
    stands: tuple[Floats, Floats, Floats]
    hole: Floats
    ends: tuple[float, float]

    @classmethod
    def of(cls, stations: Floats, train: Train, heading: int, gaps: tuple[float, float]) -> _Stops:
        """Return the stops of a train in one heading."""
        behind = heading * train.vehicle.distances
        ends = sorted((heading * gaps[0], -float(behind[-1]) - heading * gaps[1]))
        every = np.sort((stations[:, None] + np.concatenate((behind, -np.array(ends)))).reshape(-1))
        margin = edge(stations)
        front = every[np.diff(every, prepend=-np.inf) > margin]
        x = on_the_ends(stations, front[:, None] - behind)
        just = [np.where(np.abs(x - end) <= margin, np.inf, x) for end in (stations[0], stations[-1])]
        at, before, after = (panel_loads(stations, np.clip(one, *_around(stations)), train.felt) for one in (x, *just))
        hole = stretch_loads(stations, front + ends[0], front + ends[1])
        return cls(stations, heading, front, (at, before, after), hole, (ends[0], ends[1]))

    def worst(self, axles: Floats, fills: Floats) -> Floats:
        """Return the most of axles less what the gap takes away, the front's x, heading, whether lost (4, N)."""
        gone = fills @ self.hole.T
        stands = [axles @ one.T - gone for one in self.stands]
        before, after = stands[1:]
        middle, step = 0.5 * (self.front[1:] + self.front[:-1]), np.diff(self.front)
        slopes = [_slopes(self.stations, fills, middle + end) for end in self.ends]
        along, inside = vertices(after[:, :-1], before[:, 1:], (slopes[0] - slopes[1]) * step**2)
        most = np.max([one.max(axis=1) for one in (*stands, inside)], axis=0)
        floor = (most - TIE * np.abs(most))[:, None]
        first = np.stack([np.argmax(one >= floor, axis=1) for one in (*stands, inside)])
        each = np.arange(most.size)
        value = np.stack([one[each, stop] for one, stop in zip((*stands, inside), first, strict=True)])
        place = self.front[first]
        place[3] += (along * step)[each, first[3]]
        kind = np.argmin(np.where(value >= floor.T, place, np.inf), axis=0)  # of one place, with all axles on it
        front = place[kind, each] + LOST * edge(self.stations) * np.array([0.0, -1.0, 1.0, 0.0])[kind]
        lost = ((kind == 1) | (kind == 2)).astype(np.float64)
        return np.stack((value[kind, each], front, np.full(each.size, float(self.heading)), lost))


def _around(stations: Floats) -> tuple[float, float]:
    """Return places off the bridge at either end, for what is far away [m]."""
    return float(stations[0]) - 1.0, float(stations[-1]) + 1.0
