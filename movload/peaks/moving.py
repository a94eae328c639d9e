"""The exact highest and lowest of every row under trains whose uniform loads move with them, and where they stand.

The effect of strips and unending tails is piecewise quadratic in the train's place, so an extreme stands where an axle
or an end of a uniform load is on a station, or where the slope is 0 between two such places (see `moving_batch`). A
tail that never ends covers the whole bridge at last: that counts too.
"""

from __future__ import annotations

from dataclasses import dataclass
from functools import lru_cache
from typing import TYPE_CHECKING, Final

import numpy as np

from movload.arrays import held, keep_memory_warm
from movload.peaks.candidates import LOST
from movload.peaks.extremes import spread_over
from movload.peaks.moving_batch import (
    events_of,
    lines_of,
    lines_of_response,
    ordinates_of,
    sources_of,
    uniform_loads,
    walk,
    whole_loads,
)
from movload.peaks.patches import Patches
from movload.peaks.placement import edge, on_the_ends, panel_loads
from movload.peaks.stand import Stand
from movload.statics.condensed import Condensed, spread
from movload.traffic.crossing import Train

if TYPE_CHECKING:
    from collections.abc import Sequence

    from movload.arrays import Floats, Ints
    from movload.peaks.moving_batch import Events, Lines, Sources
    from movload.statics.part import AtStations
    from movload.traffic.vehicle import Vehicle

_NOISE: Final = 1e-12  # of the row's largest value under the same train: round-off, no peak
_TIE: Final = 1e-12  # of the row's largest value: positions whose effects differ by less are equally bad
_SAME_PLACE: Final = 9  # decimals of a metre to which positions count as equal when ties are broken


def moving_extremes(response: AtStations, trains: Sequence[Train]) -> tuple[Floats, Floats]:
    """Return the highest and lowest static value of each row under each train (V, R), both including 0.

    Every load counts fully, also where it relieves. Trains of one vehicle whose axles, strips and tail all have one
    share differ by that share only, so each vehicle is swept once for all of them.

    Parameters
    ----------
    response
        How R rows answer loads on B stations: linear, a line each.
    trains
        V trains, with strips, a tail, both or neither.

    Raises
    ------
    InputError
        A spacing is a range, or a train has not one share for each of its strips.
    """
    keep_memory_warm()
    found: dict[Train, int] = {}
    unit, scale = np.empty(len(trains), dtype=np.intp), np.empty(len(trains))
    for number, train in enumerate(trains):
        whole, scale[number] = _unit_of(train)
        unit[number] = found.setdefault(whole, len(found))
    highest, lowest = np.empty((2, len(found), len(response.effects)))
    for number, train in enumerate(found):
        highest[number], lowest[number] = _of_all_rows(response.condensed, train)
    noise = _NOISE * np.maximum(np.abs(highest), np.abs(lowest))
    highest[highest <= noise] = 0.0
    lowest[lowest >= -noise] = 0.0
    return spread_over(highest[unit], lowest[unit], scale)


def _unit_of(train: Train) -> tuple[Train, float]:
    """Return the train of whole loads that a train is so many times, where it has one share for all; or itself."""
    shares = np.concatenate((train.shares, uniform_loads(train)[2]))
    if (shares != shares[0]).any():
        return train, 1.0
    return _whole(train.vehicle, train.headings), float(shares[0]) * train.factor


@lru_cache(maxsize=256)
def _whole(vehicle: Vehicle, headings: tuple[int, ...]) -> Train:
    """Return the train of a vehicle's whole loads in the headings given, the same object for the same headings."""
    axles, strips = (held(np.ones(count)) for count in (vehicle.loads.size, len(vehicle.strips)))
    return Train(
        vehicle.title, vehicle, axles, headings=headings, even=True, strip_shares=strips,
        tail_share=0.0 if vehicle.tail is None else 1.0,
    )  # fmt: skip


def _of_all_rows(condensed: Condensed, train: Train) -> tuple[Floats, Floats]:
    """Return every row's extremes (R,) from the distinct rows; of a symmetric bridge from one heading only."""
    one_heading = condensed.symmetric and len(train.headings) == 2
    rows = condensed.response
    sources = sources_of(train, edge(rows.stations))
    extremes = np.zeros((2, 1, len(rows.effects)))
    for heading in (1,) if one_heading else train.headings:
        _widen(extremes[:, 0], lines_of_response(rows, heading), sources)
    highest, lowest = extremes
    if one_heading:
        other = spread(highest, lowest, condensed.mirror, condensed.mirror_scale)
        highest, lowest = np.maximum(highest, other[0]), np.minimum(lowest, other[1])
    highest, lowest = spread(highest, lowest, condensed.row, condensed.scale)
    return highest[0], lowest[0]


def _widen(extremes: Floats, lines: Lines, sources: Sources) -> None:
    """Take into the highest and lowest (2, R) what sources do to lines, in place."""
    highest, lowest = extremes
    for stretch in walk(lines, events_of(lines.stations, sources)):
        for values in (stretch.after, stretch.before):
            np.maximum(highest, values.max(axis=0, initial=0.0), out=highest)
            np.minimum(lowest, values.min(axis=0, initial=0.0), out=lowest)
        np.maximum.at(highest, stretch.row, stretch.turn)
        np.minimum.at(lowest, stretch.row, stretch.turn)


@dataclass(frozen=True, slots=True, eq=False)
class _Places:
    """Where a train may be worst for one row.

    Attributes
    ----------
    value
        (K,) what the row feels there.
    front, heading
        (K,) where its front is [m], just outside an end counting as the end itself, and which way it heads.
    source, station
        (K,) which source is on which station; -1 in between.
    outside
        (K,) -1 or +1 where that source stands just outside the first or the last station, 0 elsewhere.
    """

    value: Floats
    front: Floats
    heading: Ints
    source: Ints
    station: Ints
    outside: Ints


def moving_stand(response: AtStations, train: Train, row: int, side: int) -> tuple[Stand, Patches]:
    """Return where a train is worst for a row, and its uniform loads as they stand there, impact 0 in them.

    Of equally bad positions the smallest counts, then heading +1 before -1, then the axle nearest the front. A row that
    never feels the train in that sense has a value of 0, heading 0, a front that is nan, and no uniform loads.

    Parameters
    ----------
    response
        As in `moving_extremes`.
    train
        One of its trains.
    row
        Number of the row.
    side
        0 for its highest, 1 for its lowest.

    Raises
    ------
    InputError
        As in `moving_extremes`.
    """
    sources = sources_of(train, edge(response.stations))
    places = _places(response, train, row, sources)
    adverse = places.value * (1, -1)[side]
    worst, size = float(adverse.max(initial=0.0)), float(np.abs(places.value).max(initial=0.0))
    distances = train.vehicle.distances[: train.vehicle.loads.size]
    if worst <= _NOISE * size:
        return Stand(0.0, float("nan"), 0, distances), Patches.none()
    equal = np.flatnonzero(adverse >= worst - _TIE * size)
    axle = np.where(places.source < 0, -1, sources.axle[places.source])
    late = np.where(axle < 0, distances.size, axle)  # what no axle gives comes last
    keys = (places.outside != 0, late, -places.heading, np.round(places.front, _SAME_PLACE))
    chosen = int(equal[np.lexsort([key[equal] for key in keys])[0]])
    met = (int(axle[chosen]), int(places.station[chosen])) if axle[chosen] >= 0 else (-1, -1)
    outside, heading = int(places.outside[chosen]), int(places.heading[chosen])
    front = float(places.front[chosen]) + outside * LOST * edge(response.stations)
    patches = _patches(response.stations, train, front, heading)
    x = on_the_ends(response.stations, front - heading * distances)
    loads = patches.panel_loads(response.stations) + panel_loads(response.stations, x[None, :], train.felt)[0]
    value = float(response.under(loads[:, None])[row, 0])
    return Stand(value, front, heading, distances, *met, lost=outside != 0 and met[0] >= 0), patches


def _places(response: AtStations, train: Train, row: int, sources: Sources) -> _Places:
    """Return every place where a train may be worst for a row, in all its headings."""
    ordinates = ordinates_of(response)[:, [row]]
    columns = []
    for heading in train.headings:
        lines = lines_of(response.stations, ordinates, heading)
        columns.append(_of_heading(lines, events_of(lines.stations, sources), heading))
    return _Places(*(np.concatenate(column) for column in zip(*columns, strict=True)))


def _of_heading(lines: Lines, events: Events, heading: int) -> tuple[Floats | Ints, ...]:
    """Return the columns of `_Places` of one heading: on every station, just outside the ends, in between."""
    pieces = list(walk(lines, events))
    on = np.concatenate([piece.after[:, 0] for piece in pieces])
    ends = np.concatenate([piece.first + piece.ends for piece in pieces])
    before = np.concatenate([piece.before[:, 0] for piece in pieces])
    turning = np.concatenate([piece.first + piece.event for piece in pieces])
    further = np.concatenate([piece.further for piece in pieces])
    leaves = events.station[ends] > 0
    gone = np.where(leaves, on[ends], before)
    on[ends] = np.where(leaves, before, on[ends])
    nothing = np.full(turning.size, -1)
    count = lines.stations.size
    station = np.concatenate((events.station, events.station[ends]))
    return (
        np.concatenate((on, gone, *(piece.turn for piece in pieces))),
        heading * np.concatenate((events.front, events.front[ends], events.front[turning] + further)),
        np.full(station.size + turning.size, heading),
        np.concatenate((events.source, events.source[ends], nothing)),
        np.concatenate((station if heading > 0 else count - 1 - station, nothing)),
        heading * np.concatenate((0 * events.station, np.where(leaves, 1, -1), 0 * nothing)),
    )


def _patches(stations: Floats, train: Train, front: float, heading: int) -> Patches:
    """Return a train's uniform loads with its front at a place [m], as far as they stand between the end stations."""
    begin, end, share = uniform_loads(train)
    bounds = np.clip(front - heading * np.stack((begin, end)), stations[0], stations[-1])
    start, end = bounds[::-heading]  # where it begins behind the front is its greater x when it heads toward +x
    on = start < end
    every = np.ones(int(on.sum()))
    return Patches(
        start[on], end[on], whole_loads(train)[on], share[on], 0.0 * every, train.factor * every, train.z * every,
        np.zeros(every.size, dtype=np.intp), np.full(every.size, train.fixed),
    )  # fmt: skip
