"""A train with uniform loads walked over lines from one event to the next, all rows side by side.

Everything that moves is a source at a fixed distance behind the front: an axle is a load P, the front end of a uniform
load a beginning of +q, its rear end one of -q. An event is a source passing a station. With y a row's line, Y its
integral from before the bridge, p the front's place and d a source's distance,

    f(p)   = sum P y(p - d) + sum q Y(p - d)
    f'(p)  = sum P y'(p - d) + sum q y(p - d)
    f''(p) = sum q y'(p - d)        (between events)

y' changes at a station by the line's kink there, y at an end station by its jump; so from event to event value, slope
and bend go on in closed form, and where a slope changes sign between two events the value there is v - s^2 / (2 c).
"""

from __future__ import annotations

from dataclasses import dataclass
from functools import lru_cache
from typing import TYPE_CHECKING, Final

import numpy as np

from movload.errors import InputError
from movload.peaks.placement import edge

if TYPE_CHECKING:
    from collections.abc import Iterator

    from movload.arrays import Bools, Floats, Ints
    from movload.statics.part import AtStations
    from movload.traffic.crossing import Train

_IN_CACHE: Final = 40_000  # doubles of one array: some seven of them are worked on at a time


@dataclass(frozen=True, slots=True, eq=False)
class Lines:
    """Rows as lines seen along the direction of travel, stations first in memory.

    Attributes
    ----------
    stations
        (B,) [m], increasing in the direction of travel: -x where that is toward -x.
    kinks
        (B, R) slope after each station less slope before it, 0 outside the bridge.
    jumps
        (B, R) ordinate just after each station less that just before it: 0 except at the end stations.
    jump
        Whether any row jumps.
    """

    stations: Floats
    kinks: Floats
    jumps: Floats
    jump: bool


def lines_of(stations: Floats, ordinates: Floats, heading: int) -> Lines:
    """Return lines (B, R) as a train meets them that moves toward +x (heading 1) or -x (-1)."""
    if heading < 0:
        stations, ordinates = -stations[::-1], ordinates[::-1]
    slopes = np.diff(ordinates, axis=0) / np.diff(stations)[:, None]
    kinks, jumps = np.zeros_like(ordinates), np.zeros_like(ordinates)
    kinks[:-1] += slopes
    kinks[1:] -= slopes
    jumps[0] += ordinates[0]
    jumps[-1] -= ordinates[-1]
    return Lines(stations, np.ascontiguousarray(kinks), jumps, bool(jumps.any()))


@lru_cache(maxsize=32)  # a part meets many trains, and is asked about row by row
def ordinates_of(response: AtStations) -> Floats:
    """Return every row's ordinates, stations first (B, R)."""
    return np.ascontiguousarray(response.under(np.eye(response.stations.size)).T)


@lru_cache(maxsize=32)
def lines_of_response(response: AtStations, heading: int) -> Lines:
    """Return all rows of a response as a train meets them in a heading."""
    return lines_of(response.stations, ordinates_of(response), heading)


@dataclass(frozen=True, slots=True, eq=False)
class Sources:
    """What moves, front to back; what is at one distance is one source.

    Attributes
    ----------
    distance
        (N,) behind the front [m].
    point, uniform
        (N,) load of an axle [N], and of a uniform load that begins (+) or ends (-) there [N/m], as the part feels them.
    axle
        (N,) the foremost axle that is there; -1 where only a uniform load begins or ends.
    """

    distance: Floats
    point: Floats
    uniform: Floats
    axle: Ints


def uniform_loads(train: Train) -> tuple[Floats, Floats, Floats]:
    """Return where strips and tail begin and end behind the front [m], a tail at inf, and each one's share (S,).

    Raises
    ------
    InputError
        The train has not one share for each strip.
    """
    strips, tail, share = train.vehicle.strips, train.vehicle.tail, train.strip_shares
    if share.size != len(strips):
        raise InputError(f"one share for each of {len(strips)} strips, got {share.size}", place=train.vehicle.title)
    begins = [strip.start for strip in strips]
    ends = [strip.start + strip.length for strip in strips]
    if tail is None:
        return np.array(begins), np.array(ends), share
    return np.array([*begins, tail.start]), np.array([*ends, np.inf]), np.append(share, train.tail_share)


def whole_loads(train: Train) -> Floats:
    """Return the whole load of each strip and of the tail (S,) [N/m]."""
    tail = train.vehicle.tail
    loads = [strip.load for strip in train.vehicle.strips]
    return np.array(loads if tail is None else [*loads, tail.load])


def sources_of(train: Train, margin: float) -> Sources:
    """Return a train's sources; those less than ``margin`` [m] apart are one."""
    begin, end, share = uniform_loads(train)
    loads = whole_loads(train) * share * train.factor
    ending, axles = np.isfinite(end), train.vehicle.loads.size
    distance = np.concatenate((train.vehicle.distances[:axles], begin, end[ending]))
    order = np.argsort(distance, kind="stable")
    first = np.flatnonzero(np.diff(distance[order], prepend=-np.inf) > margin)
    felt = np.concatenate((train.felt, np.zeros(distance.size - axles)))
    uniform = np.concatenate((np.zeros(axles), loads, -loads[ending]))
    foremost = np.minimum.reduceat(order, first)  # axles are numbered before all else
    return Sources(
        distance[order][first], np.add.reduceat(felt[order], first), np.add.reduceat(uniform[order], first),
        np.where(foremost < axles, foremost, -1),
    )  # fmt: skip


@dataclass(frozen=True, slots=True, eq=False)
class Events:
    """Every source at every station (E,), in the order in which they come; a source that enters before one that leaves.

    Attributes
    ----------
    front
        Where the front is, along the direction of travel [m].
    onward, bending
        (E, 1) how far it is to the next event [m]; 0 for the last, and where no source, or no end of a uniform load, is
        on the bridge: nothing changes there, and round-off must not grow.
    station, source, point, uniform
        Which source is where, stations counted in the direction of travel; its loads as columns (E, 1).
    at_end
        Whether the station is an end station.
    """

    front: Floats
    onward: Floats
    bending: Floats
    station: Ints
    source: Ints
    point: Floats
    uniform: Floats
    at_end: Bools


def events_of(stations: Floats, sources: Sources) -> Events:
    """Return the events of sources at stations."""
    front = stations[:, None] + sources.distance
    sooner = np.zeros_like(stations)  # at once but for round-off: both stand on their end stations for that moment
    sooner[[0, -1]] = -0.5 * edge(stations), 0.5 * edge(stations)
    order = np.argsort(front + sooner[:, None], axis=None, kind="stable")
    station, source = np.divmod(order, sources.distance.size)
    front = front.reshape(-1)[order]
    onward = np.diff(front, append=front[-1:])
    entered = 1 * (station == 0) - (station == stations.size - 1)
    onward[np.cumsum(entered) == 0] = 0.0
    point, uniform = sources.point[source], sources.uniform[source]
    bending = np.where(np.cumsum(entered * (uniform != 0.0)) == 0, 0.0, onward)
    return Events(
        front, onward[:, None], bending[:, None], station, source, point[:, None], uniform[:, None], entered != 0
    )


@dataclass(frozen=True, slots=True, eq=False)
class Stretch:
    """Some events one after the other, and what every row feels.

    Attributes
    ----------
    first, after
        Number of the first event, and (E, R) value just after each [N, N m, m].
    ends, before
        (J,) which of them may jump, counted from the first, and (J, R) the value just before each of these.
    event, row, further, turn
        (T,) after which event, in which row and how much further on [m] a slope changes sign, and the value there.
    """

    first: int
    after: Floats
    ends: Ints
    before: Floats
    event: Ints
    row: Ints
    further: Floats
    turn: Floats


def walk(lines: Lines, events: Events) -> Iterator[Stretch]:
    """Yield what every row feels from event to event, in pieces that stay in cache."""
    coming = np.zeros((3, lines.kinks.shape[1]))
    step = 1 + _IN_CACHE // (1 + lines.kinks.shape[1])
    for first in range(0, events.front.size, step):
        stretch, coming = _stretch(lines, events, slice(first, first + step), coming)
        yield stretch


def _stretch(lines: Lines, events: Events, part: slice, coming: Floats) -> tuple[Stretch, Floats]:
    """Return a part of the events, from value, slope and bend (3, R) just before it; and those just after it."""
    point, uniform = events.point[part], events.uniform[part]
    kinks = lines.kinks.take(events.station[part], axis=0)
    ends = np.flatnonzero(events.at_end[part]) if lines.jump else np.zeros(0, dtype=np.intp)
    jumps = lines.jumps[events.station[part][ends]]
    bend = kinks * uniform
    bend[0] += coming[2]
    np.cumsum(bend, axis=0, out=bend)
    turned = bend * events.bending[part]  # by how much the slope changes up to the next event
    slope = kinks
    slope *= point
    slope[0] += coming[1]
    slope[1:] += turned[:-1]
    slope[ends] += uniform[ends] * jumps
    np.cumsum(slope, axis=0, out=slope)
    last_slope = np.add(slope, turned, out=turned)  # just before the next event
    risen = slope + last_slope
    risen *= 0.5 * events.onward[part]
    after = np.concatenate((coming[:1], risen[:-1]))
    after[ends] += point[ends] * jumps
    np.cumsum(after, axis=0, out=after)
    event, row = np.nonzero((slope < 0.0) != (last_slope < 0.0))
    further = -slope[event, row] / bend[event, row]
    turn = after[event, row] + 0.5 * slope[event, row] * further
    before = after[ends] - point[ends] * jumps
    stretch = Stretch(part.start, after, ends, before, event, row, further, turn)
    return stretch, np.stack((after[-1] + risen[-1], last_slope[-1], bend[-1]))
