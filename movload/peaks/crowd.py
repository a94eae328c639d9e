"""A crowd whose density falls with the length that it loads: how long, and where, it is worst.

A patch from a to b counts q(b - a) times the integral of y from a to b. For one length L the worst patch ends where
y(a) = y(b), or at an end station where the line jumps; a set of patches is worst as the set on which y is above one
level. Either way the integral C(L) is a quadratic over each segment of lengths in which no end passes a kink, and the
greatest q C over all of them is sought.

That is found between bounds, for any q that falls and is convex between its kinks: the chord of q over a piece of a
segment is never below q, so the greatest value of chord times C, in closed form, is never below that of q C. A piece
whose bound does not beat the best value found is dropped, the others are cut where the bound is greatest. The error
of a chord falls with the square of its length, so a few rounds leave nothing above the last places.
"""

from __future__ import annotations

from dataclasses import dataclass, field
from typing import TYPE_CHECKING, Final

import numpy as np

from movload.arrays import Floats, Ints, frozen_floats, keep_memory_warm
from movload.errors import InputError
from movload.peaks.filling import TIE, Filled, Senses, stretch_loads
from movload.statics.adverse import above_level, areas, ordinates_of
from movload.traffic.fill import crowd_density

if TYPE_CHECKING:
    from collections.abc import Callable

    from movload.statics.part import AtStations

_CLOSED: Final = 1e-14  # of the best value: bounds no further above it are closed
_LEAST_CUT: Final = 0.05  # of a piece: it is cut no nearer to its ends, so that every round makes all pieces shorter
_CONVEX: Final = 1e-9  # of q: how far above a chord round-off may put it
_LAST_PLACES: Final = 1e-15  # of a segment: a piece no longer than this is one place
_SAME_PLACE: Final = 3  # decimals to which marks count as one when ties are broken: then the greatest value counts
_AT_A_TIME: Final = 100_000  # doubles


@dataclass(frozen=True, slots=True)
class Density:
    """A uniform load that falls with the loaded length.

    Parameters
    ----------
    law
        From loaded lengths [m], 0 or more, to loads [N/m2], elementwise: above 0, never rising, continuous, and
        convex between the kinks, as constants, straight lines and c / (L + d) are; finite at 0.
    kinks
        Lengths at which its slope jumps [m].
    """

    law: Callable[[Floats], Floats]
    kinks: tuple[float, ...] = field(default=(), kw_only=True)

    def at(self, length: Floats) -> Floats:
        """Return the density at loaded lengths [m].

        Raises
        ------
        InputError
            It is not above 0 there.
        """
        density = np.asarray(self.law(length), dtype=np.float64)
        if not (np.isfinite(density) & (density > 0.0)).all():
            raise InputError(f"a density must be above 0 at every length, got {np.min(density):g} N/m2", place="crowd")
        return density


EN_CROWD: Final = Density(crowd_density, kinks=(10.0, 210.0))
"""EN 1991-2, 5.3.2.1, from memory: full up to 10 m, least from 210 m."""


@dataclass(frozen=True, slots=True, eq=False)
class Scattered:
    """A crowd on every stretch where a row is above a level, all of it at the density of their total length.

    Attributes
    ----------
    values
        (R, 2) highest and lowest.
    load
        (R, 2) [N/m].
    level, length
        (R, 2) the size of ordinate that the line exceeds where the crowd stands, and the total length [m]; nan where
        nothing is adverse. Where the line is level just there, the crowd covers so much of it, from its left.
    """

    values: Floats
    load: Floats
    level: Floats
    length: Floats

    def __post_init__(self) -> None:
        """Copy read-only."""
        for name in ("values", "load", "level", "length"):
            object.__setattr__(self, name, frozen_floats(getattr(self, name)))

    def stretches(self, lines: AtStations, row: int, side: int) -> tuple[tuple[float, float], ...]:
        """Return where it stands on the lines it was found for: (from, to) [m] each."""
        if self.values[row, side] == 0.0:
            return ()
        y, stations = (1.0, -1.0)[side] * ordinates_of(lines)[row], lines.stations
        found = list(above_level(stations, y, float(self.level[row, side])))
        rest = float(self.length[row, side]) - sum(end - start for start, end in found)
        on_level = np.abs(y - self.level[row, side]) <= TIE * np.abs(y).max()
        for panel in np.flatnonzero(on_level[:-1] & on_level[1:]):
            start = float(stations[panel])
            end = min(float(stations[panel + 1]), start + rest)
            if rest > TIE * float(self.length[row, side]):
                found.append((start, end))
                rest -= end - start
        return tuple(sorted(found))


@dataclass(frozen=True, slots=True, eq=False)
class _Segments:
    """S ranges of length over which what is loaded is a quadratic, each for one of a number of rows.

    ``row`` (S,) says whose; ``mark`` (the patch's start, or the level), ``length`` and ``integral`` (2, S) are its
    ends, between which the first two go straight; ``bend`` (S,) is the second derivative of the third over 0 to 1.
    """

    rows: int
    row: Ints
    mark: Floats
    length: Floats
    integral: Floats
    bend: Floats

    def between(self, ends: Floats, segment: Ints, along: Floats) -> Floats:
        """Return what goes straight from one of ``ends`` (2, S) to the other, part of the way along some segments."""
        return np.asarray(ends[0, segment] * (1.0 - along) + ends[1, segment] * along)

    def integral_at(self, segment: Ints, along: Floats) -> Floats:
        """Return the integral part of the way along some segments."""
        return self.between(self.integral, segment, along) - 0.5 * self.bend[segment] * along * (1.0 - along)


def crowd_in_one_stretch(lines: AtStations, density: Density, width: float) -> Filled:
    """Return the one stretch of crowd, of any length anywhere, that is worst for each row in each sense.

    Parameters
    ----------
    width
        How wide it stands [m], share and factor included: it counts width x density in N/m.

    Raises
    ------
    InputError
        A width below 0; a density that rises, is not convex between its kinks or not above 0.
    """
    senses = Senses.of(lines)
    _, start, length = _worst_of_all(senses, density, width, _pairs)
    end = start + length
    integral = (senses.ordinates * stretch_loads(senses.stations, start, end)).sum(axis=1)
    loads = density.at(length)
    values = width * senses.values(np.maximum(loads * integral, 0.0))
    load = np.where(values == 0.0, 0.0, width * loads[senses.index])
    return Filled(values, load, senses.places(start, values), senses.places(end, values))


def crowd_scattered(lines: AtStations, density: Density, width: float) -> Scattered:
    """Return the crowd on as many stretches as one likes that is worst; as `crowd_in_one_stretch`.

    It stands where a row is above some level: of all sets of one total length that one holds the most.
    """
    senses = Senses.of(lines)
    most, level, length = _worst_of_all(senses, density, width, _levels)
    values = width * senses.values(most)
    load = np.where(values == 0.0, 0.0, width * density.at(length)[senses.index])
    return Scattered(values, load, senses.places(level, values) * senses.size, senses.places(length, values))


def crowd_where_adverse(lines: AtStations, density: Density, width: float) -> Floats:
    """Return the values (R, 2) of a crowd on every adverse stretch, at the density of their total length."""
    _require_width(width)
    ordinates, lengths = ordinates_of(lines), np.diff(lines.stations)
    adverse = [_cover(sense, np.zeros((len(sense), 1)), lengths)[0, :, 0] for sense in (ordinates, -ordinates)]
    return np.asarray(width * density.at(np.stack(adverse, axis=1)) * areas(lines))


def crowd_full_length(lines: AtStations, density: Density, width: float) -> Floats:
    """Return the values (R, 2) of a crowd on the whole bridge at the density of its whole length; one of them is 0."""
    _require_width(width)
    both = areas(lines)
    net = both.sum(axis=1)
    net[np.abs(net) <= TIE * np.abs(both).max(axis=1)] = 0.0
    load = width * float(density.at(np.array([lines.stations[-1] - lines.stations[0]]))[0])
    return load * np.stack((np.maximum(net, 0.0), np.minimum(net, 0.0)), axis=1)


def _require_width(width: float) -> None:
    """Refuse a width that is none."""
    if not (np.isfinite(width) and width >= 0.0):
        raise InputError(f"a width must be 0 or more, got {width:g} m", place="crowd")


def _worst_of_all(
    senses: Senses, density: Density, width: float, segments: Callable[[Floats, Floats], _Segments]
) -> Floats:
    """Return the most of each searched row, its mark and its length (3, N), in pieces of rows."""
    _require_width(width)
    keep_memory_warm()
    step = max(1, _AT_A_TIME // senses.stations.size**2)
    pieces = [senses.ordinates[first : first + step] for first in range(0, len(senses.ordinates), step)]
    return np.concatenate([_worst(segments(senses.stations, one), density) for one in pieces], axis=1)


def _pairs(stations: Floats, ordinates: Floats) -> _Segments:
    """Return the segments of one stretch: its ends in two panels at one level, or one of them at an end of the bridge.

    Of stretches of one length the worst has its start on a line that rises more than the one under its end; a level
    below 0 never pays, because a shorter stretch is then also denser.
    """
    rise, length = np.diff(ordinates, axis=1), np.diff(stations)
    slope = rise / length
    low = np.maximum(np.minimum(ordinates[:, :-1], ordinates[:, 1:]), 0.0)
    high = np.maximum(ordinates[:, :-1], ordinates[:, 1:])
    level = np.stack((np.maximum(low[:, :, None], low[:, None]), np.minimum(high[:, :, None], high[:, None])))
    after = np.arange(length.size)[:, None] < np.arange(length.size)
    meets = (level[0] <= level[1]) & (slope[:, :, None] > slope[:, None]) & after
    row, left, right = np.nonzero(meets)
    start, end = (
        _at_level(stations, ordinates, (row, panel), level[:, row, left, right], turned=turned)
        for panel, turned in ((left, True), (right, False))
    )
    jumps = [np.repeat(np.flatnonzero(ordinates[:, side] > 0.0), length.size) for side in (0, -1)]
    panel = [np.tile(np.arange(length.size), one.size // length.size) for one in jumps]
    ends = [np.stack((stations[one], stations[one + 1])) for one in panel]
    fixed = [np.broadcast_to(stations[side], one.shape) for side, one in zip((0, -1), ends, strict=True)]
    rows, lefts = np.concatenate((row, *jumps)), np.concatenate((left, np.zeros_like(panel[0]), panel[1]))
    rights = np.concatenate((right, panel[0], np.full_like(panel[1], length.size - 1)))
    starts = np.concatenate((start, fixed[0], ends[1]), axis=1)
    stops = np.concatenate((end, ends[0], fixed[1]), axis=1)
    until, to = (_up_to(stations, ordinates, (rows, one), x) for one, x in ((lefts, starts), (rights, stops)))
    bend = slope[rows, rights] * np.diff(stops, axis=0)[0] ** 2 - slope[rows, lefts] * np.diff(starts, axis=0)[0] ** 2
    return _Segments(len(ordinates), rows, starts, stops - starts, to - until, bend)


def _at_level(stations: Floats, ordinates: Floats, where: tuple[Ints, Ints], level: Floats, *, turned: bool) -> Floats:
    """Return where rows are at two levels (2, S) within panels; of a level panel its two ends, turned or not."""
    row, panel = where
    left, right = stations[panel], stations[panel + 1]
    rise = ordinates[row, panel + 1] - ordinates[row, panel]
    flat = rise == 0.0
    part = (level - ordinates[row, panel]) / np.where(flat, 1.0, rise)
    ends = np.array([[1.0], [0.0]] if turned else [[0.0], [1.0]])
    part = np.where(flat, ends, np.clip(part, 0.0, 1.0))
    return np.asarray(left * (1.0 - part) + right * part)


def _up_to(stations: Floats, ordinates: Floats, where: tuple[Ints, Ints], x: Floats) -> Floats:
    """Return the integral of rows from the first station to x (2, S) within panels."""
    row, panel = where
    length, rise = np.diff(stations), np.diff(ordinates, axis=1)
    before = np.zeros_like(ordinates)
    before[:, 1:] = np.cumsum(0.5 * length * (ordinates[:, 1:] + ordinates[:, :-1]), axis=1)
    onward = x - stations[panel]
    return np.asarray(
        before[row, panel] + onward * (ordinates[row, panel] + 0.5 * (rise / length)[row, panel] * onward)
    )


def _levels(stations: Floats, ordinates: Floats) -> _Segments:
    """Return the segments of a crowd above a level: the level falls from one ordinate to the next, or stays on one."""
    level = -np.sort(-np.maximum(ordinates, 0.0), axis=1)
    level = np.concatenate((level, np.zeros((len(ordinates), 1))), axis=1)
    length, integral, flat = _cover(ordinates, level, np.diff(stations))
    flat = np.where(level > 0.0, flat, 0.0)
    with_flat = np.stack((length, length + flat)), np.stack((integral, integral + flat * level))
    falling = [np.stack((one[1][:, :-1], one[0][:, 1:])) for one in with_flat]
    bend = np.diff(level, axis=1) * (falling[0][1] - falling[0][0])
    row = np.arange(len(ordinates))[:, None]
    columns = (np.stack((level[:, :-1], level[:, 1:])), *falling)
    both = zip(columns, (np.stack((level, level)), *with_flat), strict=True)
    mark, length, integral = (np.concatenate((a.reshape(2, -1), b.reshape(2, -1)), axis=1) for a, b in both)
    rows = np.concatenate([np.broadcast_to(row, one.shape).reshape(-1) for one in (bend, level)])
    return _Segments(len(ordinates), rows, mark, length, integral, np.concatenate((bend.ravel(), np.zeros(level.size))))


def _cover(ordinates: Floats, level: Floats, lengths: Floats) -> Floats:
    """Return how long rows are above levels (N, K), the integral there, and how long they are just level (3, N, K)."""
    found = np.zeros((3, *level.shape))
    for panel, length in enumerate(lengths):
        low, high = (pick(ordinates[:, panel], ordinates[:, panel + 1])[:, None] for pick in (np.minimum, np.maximum))
        flat = low == high
        part = np.clip((high - level) / np.where(flat, 1.0, high - low), 0.0, 1.0)
        part = np.where(flat, high > level, part) * length
        found[0] += part
        found[1] += part * 0.5 * (high + np.maximum(level, low))
        found[2] += np.where(flat & (high == level), length, 0.0)
    return found


def _worst(segments: _Segments, density: Density) -> Floats:
    """Return the most of density x integral for each row, its mark and length (3, rows): between bounds, see above."""
    segment, first, last = _cut_at_kinks(segments, density.kinks)
    tried = [_values(segments, density, segment, along) for along in (first, last)]
    ends = np.concatenate((first, last)), np.concatenate([one[2] for one in tried])
    _require_falling(segments.between(segments.length, np.tile(segment, 2), ends[0]), ends[1])
    best = np.zeros(segments.rows)
    for one in tried:
        np.maximum.at(best, segments.row[segment], one[1])
    pool = [(segment, *one[:2]) for one in tried]
    while segment.size:
        top, bound = _bounds(segments, density, segment, first, last)
        kept = (bound > best[segments.row[segment]] * (1.0 + _CLOSED)) & (last - first > _LAST_PLACES)
        segment = segment[kept]
        first, last, top, bound = (one[kept] for one in (first, last, top, bound))
        top, value, _ = _values(segments, density, segment, top)
        if (value > bound * (1.0 + _CONVEX)).any():
            raise InputError("a density must be convex between its kinks, got one above its chord", place="crowd")
        np.maximum.at(best, segments.row[segment], value)
        pool.append((segment, top, value))
        least = _LEAST_CUT * (last - first)
        cut = np.clip(top, first + least, last - least)
        segment, first, last = np.tile(segment, 2), np.concatenate((first, cut)), np.concatenate((cut, last))
    return _chosen(segments, best, [np.concatenate(one) for one in zip(*pool, strict=True)])


def _values(segments: _Segments, density: Density, segment: Ints, along: Floats) -> tuple[Floats, Floats, Floats]:
    """Return places along segments, density x integral there, and the density."""
    load = density.at(segments.between(segments.length, segment, along))
    return along, load * segments.integral_at(segment, along), load


def _cut_at_kinks(segments: _Segments, kinks: tuple[float, ...]) -> tuple[Ints, Floats, Floats]:
    """Return pieces of all segments, none of which passes a kink of the density: segment, first and last place."""
    one = np.arange(segments.row.size)
    grows = segments.length[1] - segments.length[0]
    places = [np.zeros(one.size), np.ones(one.size)]
    for kink in kinks:
        part = np.divide(kink - segments.length[0], grows, out=np.zeros(one.size), where=grows != 0.0)
        places.append(np.clip(part, 0.0, 1.0))
    cuts = np.sort(np.stack(places), axis=0)
    segment, first, last = np.tile(one, len(cuts) - 1), cuts[:-1].reshape(-1), cuts[1:].reshape(-1)
    kept = last > first
    return segment[kept], first[kept], last[kept]


def _bounds(segments: _Segments, density: Density, segment: Ints, first: Floats, last: Floats) -> tuple[Floats, Floats]:
    """Return where on each piece chord of the density x integral is greatest, and how great: never below the truth.

    With u from 0 to 1 along a piece, q = q0 + dq u and C = C0 + r u - k u (1 - u) / 2, so the derivative is
    1.5 k dq u^2 + (2 dq (r - k / 2) + k q0) u + dq C0 + q0 (r - k / 2).
    """
    (_, _, load), (_, _, other) = (_values(segments, density, segment, along) for along in (first, last))
    base, fall = segments.integral_at(segment, first), other - load
    rise, bend = segments.integral_at(segment, last) - base, segments.bend[segment] * (last - first) ** 2
    start = rise - 0.5 * bend
    roots = _roots(1.5 * bend * fall, 2.0 * fall * start + bend * load, fall * base + load * start)
    u = np.concatenate((np.array([[0.0], [1.0]]) * np.ones(base.size), np.clip(roots, 0.0, 1.0)))
    bound = (load + fall * u) * (base + rise * u - 0.5 * bend * u * (1.0 - u))
    chosen = np.argmax(bound, axis=0)[None]
    at, most = (np.take_along_axis(one, chosen, axis=0)[0] for one in (u, bound))
    return first + at * (last - first), most


def _roots(square: Floats, linear: Floats, constant: Floats) -> Floats:
    """Return the real roots (2, S) of quadratics; 0 where there is none, which is tried anyway."""
    inside = linear * linear - 4.0 * square * constant
    half = -0.5 * (linear + np.copysign(np.sqrt(np.maximum(inside, 0.0)), linear))
    first = np.divide(half, square, out=np.zeros_like(half), where=np.abs(square) > np.abs(half))
    # outside 0 to 1 a root does not matter, so no quotient above 1 is formed
    other = np.divide(constant, half, out=np.zeros_like(half), where=np.abs(half) > np.abs(constant))
    return np.stack((first, other))


def _require_falling(length: Floats, load: Floats) -> None:
    """Refuse a density that rises with the loaded length."""
    order = np.argsort(length, kind="stable")
    rises = np.diff(load[order]) > _CONVEX * load[order][:-1]
    if rises.any():
        at = float(length[order][:-1][rises][0])
        raise InputError(f"a density must not rise with the loaded length, got a rise beyond {at:g} m", place="crowd")


def _chosen(segments: _Segments, best: Floats, pool: list[Floats]) -> Floats:
    """Return the most of each row, its mark and its length (3, rows), of equally bad ones the smallest mark."""
    segment, along, value = pool[0].astype(np.intp), pool[1], pool[2]
    row = segments.row[segment]
    equal = (value >= best[row] * (1.0 - TIE)) & (value > 0.0)
    segment, along, value, row = segment[equal], along[equal], value[equal], row[equal]
    mark, length = (segments.between(ends, segment, along) for ends in (segments.mark, segments.length))
    order = np.lexsort((-value, np.round(mark, _SAME_PLACE), row))
    rows, first = np.unique(row[order], return_index=True)
    found = np.zeros((3, segments.rows))
    found[:, rows] = np.stack((value, mark, length))[:, order[first]]
    return found
