"""Where a load is adverse: lines cut at their zero crossings, their areas by sign, and lines that leave out relief.

A row's highest value is made where its ordinates are positive, its lowest where they are negative. A diagonal's line
changes sign inside a panel, so a load that fills the bridge must end there and not at the panel point.
"""

from __future__ import annotations

from functools import lru_cache
from typing import TYPE_CHECKING, Final

import numpy as np

from movload.arrays import Floats, Ints, held
from movload.errors import InputError
from movload.statics.influence import InfluenceLines

if TYPE_CHECKING:
    from movload.statics.part import AtStations

_MERGED: Final = 1e-12  # of the span: zero crossings no further apart are one station
_NOISE: Final = 2e-13  # of the row's largest ordinate: round-off, as in `movload.statics.influence`
_TIE: Final = 1e-12  # of the row's largest ordinate: stations that differ by less are equally bad
OFF: Final = -1  # the station of a load that is better left off the bridge


def ordinates_of(lines: AtStations) -> Floats:
    """Return the ordinates (R, B) of a response that multiplies: its lines, or its answer to a unit load a station."""
    if isinstance(lines, InfluenceLines):
        return lines.ordinates
    return _without_noise(np.array(lines.under(np.eye(lines.stations.size))))


@lru_cache(maxsize=32)  # every train of a crossing asks about the same few responses
def refined(lines: AtStations) -> InfluenceLines:
    """Return the same lines with a station more at every zero crossing inside a panel.

    The crossing of y1 and y2 of opposite sign over a panel from x1, L long, is x1 + L y1 / (y1 - y2); there the row's
    ordinate is exactly 0. Crossings no further than 1e-12 of the span from another, or from a station, are one with it.

    Parameters
    ----------
    lines
        A response that multiplies, of R rows over B stations.

    Returns
    -------
    InfluenceLines
        The rows over the union (B + crossings,).
    """
    stations, ordinates = lines.stations, ordinates_of(lines)
    crossing = _crossings(stations, ordinates)
    least = _MERGED * float(stations[-1] - stations[0])
    added = _apart(stations, crossing[np.isfinite(crossing)], least)
    if not added.size and isinstance(lines, InfluenceLines):
        return lines
    panel = np.searchsorted(stations, added, side="right") - 1
    along = (added - stations[panel]) / np.diff(stations)[panel]
    between = ordinates[:, panel] * (1.0 - along) + ordinates[:, panel + 1] * along
    between[np.abs(crossing[:, panel] - added) <= least] = 0.0
    between[np.abs(between) <= _NOISE * np.abs(ordinates).max(axis=1, keepdims=True)] = 0.0
    order = np.argsort(np.concatenate((stations, added)), kind="stable")
    every = np.concatenate((ordinates, between), axis=1)[:, order]
    return InfluenceLines(lines.effects, held(np.concatenate((stations, added))[order]), held(every))


@lru_cache(maxsize=32)  # as above
def biased(lines: AtStations, relieving: float) -> tuple[InfluenceLines, InfluenceLines]:
    """Return the lines for every row's highest and for its lowest, with what relieves multiplied by ``relieving``.

    Any load that is 0 or more, swept over them, counts in full where it is adverse and ``relieving`` times where it
    relieves. Both are zero beyond the end stations, where they may jump as the lines do.

    Parameters
    ----------
    relieving
        0 drops what relieves, 1 changes nothing; between them for loads known within a tolerance.

    Returns
    -------
    tuple
        Lines over the refined stations, of which the highest, and of which the lowest values count.

    Raises
    ------
    InputError
        ``relieving`` outside 0 to 1.
    """
    if not 0.0 <= relieving <= 1.0:
        raise InputError(f"what counts where it relieves is 0 to 1, got {relieving:g}", place="relieving")
    cut = refined(lines)
    if relieving == 1.0:
        return cut, cut
    y = cut.ordinates
    less = relieving * y + 0.0  # no -0
    return (
        InfluenceLines(cut.effects, cut.stations, held(np.where(y < 0.0, less, y))),
        InfluenceLines(cut.effects, cut.stations, held(np.where(y > 0.0, less, y))),
    )


def areas(lines: AtStations) -> Floats:
    """Return the area of each row above zero and below it (R, 2), the second 0 or less, per unit of uniform load.

    Over a panel L long whose ends differ in sign, y1 > 0 > y2, the area above is L y1^2 / (2 (y1 - y2)).
    """
    ordinates, lengths = ordinates_of(lines), np.diff(lines.stations)
    above = _area_above(ordinates, lengths)
    return np.stack((above, 0.0 - _area_above(-ordinates, lengths)), axis=1)  # no -0


def stretches(lines: AtStations, row: int, side: int) -> tuple[tuple[float, float], ...]:
    """Return where a row is above zero (side 0) or below it (side 1): (from, to) [m] each, those that touch as one."""
    return above_level(lines.stations, (1.0, -1.0)[side] * ordinates_of(lines)[row], 0.0)


def above_level(stations: Floats, ordinates: Floats, level: float) -> tuple[tuple[float, float], ...]:
    """Return where a line of ordinates (B,) is above a level: (from, to) [m] each, those that touch as one."""
    found: list[tuple[float, float]] = []
    y = ordinates - level
    for panel in np.flatnonzero(np.maximum(y[:-1], y[1:]) > 0.0):
        start, end, first, last = (float(v) for v in (*stations[panel : panel + 2], *y[panel : panel + 2]))
        cut = start + (end - start) * first / (first - last) if first * last < 0.0 else start
        if first < 0.0:
            start = cut
        elif last < 0.0:
            end = cut
        if found and found[-1][1] == start:
            start = found.pop()[0]
        found.append((start, end))
    return tuple(found)


def extremes_of_line(lines: AtStations) -> tuple[Floats, Ints]:
    """Return the greatest and the least ordinate of each row (R, 2), both including 0, and their stations (R, 2).

    Of equally great ones the first counts. Where every load on the bridge is relieving, the ordinate is 0 and the
    station is ``OFF``.
    """
    ordinates = ordinates_of(lines)
    senses = np.stack((ordinates, -ordinates), axis=1)
    worst = np.maximum(senses.max(axis=2), 0.0)
    tie = _TIE * np.abs(ordinates).max(axis=1)[:, None, None]
    station: Ints = np.argmax(senses >= worst[:, :, None] - tie, axis=2)
    station[worst == 0.0] = OFF
    return worst * np.array([1.0, -1.0]) + 0.0, station


def _area_above(ordinates: Floats, lengths: Floats) -> Floats:
    """Return the area of each row's part above zero (R,)."""
    left, right = ordinates[:, :-1], ordinates[:, 1:]
    above = np.maximum(left, 0.0) + np.maximum(right, 0.0)
    spread = np.abs(left) + np.abs(right)
    # of the same sign spread = above and this is the trapezium; of opposite signs above is the positive one alone
    part = np.divide(above, spread, out=np.zeros_like(above), where=spread > 0.0)
    total: Floats = (0.5 * above * part) @ lengths
    return total


def _crossings(stations: Floats, ordinates: Floats) -> Floats:
    """Return where each row crosses zero inside each panel (R, B - 1) [m], nan where it does not."""
    left, right = ordinates[:, :-1], ordinates[:, 1:]
    crosses = np.sign(left) * np.sign(right) < 0.0
    part = np.divide(left, left - right, out=np.full(left.shape, np.nan), where=crosses)
    return np.asarray(stations[:-1] + part * np.diff(stations))


def _apart(stations: Floats, x: Floats, least: float) -> Floats:
    """Return the x in order that are more than ``least`` from the station, and from the x kept, before and after."""
    panel = np.clip(np.searchsorted(stations, x, side="right") - 1, 0, stations.size - 2)
    inside = (x - stations[panel] > least) & (stations[panel + 1] - x > least)
    kept: list[float] = []
    for one in np.unique(x[inside]).tolist():
        if not kept or one - kept[-1] > least:
            kept.append(one)
    return np.array(kept, dtype=np.float64)


def _without_noise(ordinates: Floats) -> Floats:
    """Return ordinates (R, B) with each row's round-off set to exactly zero, in place."""
    size = np.abs(ordinates)
    ordinates[size <= _NOISE * size.max(axis=1, keepdims=True)] = 0.0
    return ordinates
