"""Vehicles whose spacings may vary: the exact extremes over every spacing, and the spacings that give each.

Axles between variable gaps form rigid groups. With one variable gap the effect is F(s) + G(t), s and t the places of
the two groups along the direction of travel and s - t within a window. F and G are piecewise linear, with jumps at the
end stations (see `movload.peaks.candidates`). Cut the strip of all (s, t) at every place where F or G bends or jumps:
on each of the polygons that remain the effect is linear, so its extreme stands in a corner. A corner is a pair of
places where both groups have an axle on a station, or it lies on the strip's edge: the gap is then the least or the
greatest, and some axle is on a station. The second kind are two rigid vehicles; the first, for each place of the group
in front, is the greatest of G's places within a sliding window, found for all rows at once.

With more gaps, and with loads that count less where they relieve, functions are carried from group to group
(`movload.peaks.gaps_chain`).
"""

from __future__ import annotations

import math
from typing import TYPE_CHECKING, Final

import numpy as np

from movload.peaks.extremes import spread_over, static_extremes, unit_of
from movload.peaks.gaps_chain import TIE, chain, front_places, places, settled
from movload.peaks.gaps_pairs import one_gap_extremes
from movload.peaks.gaps_rows import Rows, groups_of, of_rows, over_headings, require_chained, row_seen, without_noise
from movload.peaks.stand import Stand

if TYPE_CHECKING:
    from collections.abc import Sequence

    from movload.arrays import Floats
    from movload.statics.condensed import Condensed
    from movload.statics.part import AtStations
    from movload.traffic.crossing import Train

_SAME_PLACE: Final = 9  # decimals of a metre to which positions count as equal when ties are broken


def gap_extremes(response: AtStations, trains: Sequence[Train]) -> tuple[Floats, Floats]:
    """Return the highest and lowest static value of each row under each train (V, R), both including 0.

    Parameters
    ----------
    response
        How R rows answer loads on B stations; it must be linear: groups are felt one by one.
    trains
        V trains; spacings that may vary take the worst of their ranges, row by row.

    Raises
    ------
    InputError
        Uniform loads that move with the vehicle. (`Vehicle` itself has at most 200 axles and 12 variable spacings.)
    """
    require_chained(trains)
    parts = [unit_of(train) if train.relieving == 1.0 else (train, 1.0) for train in trains]
    units = list(dict.fromkeys(unit for unit, _ in parts))
    found = {unit: number for number, unit in enumerate(units)}
    highest, lowest = _of_units(response, units)
    which = [found[unit] for unit, _ in parts]
    return spread_over(highest[which], lowest[which], np.array([scale for _, scale in parts]))


def gap_stand(response: AtStations, train: Train, row: int, side: int) -> Stand:
    """Return where a train stands, and with which spacings, for one row's highest (side 0) or lowest (side 1).

    Of equally bad stands the one with the smallest spacings, gap by gap from the front, then the smallest position,
    then heading +1. Where nothing of the row's sign is felt the vehicle is off: value 0, position nan, heading 0.

    Raises
    ------
    InputError
        See `gap_extremes`.
    """
    require_chained([train])
    groups, found = groups_of(train), []
    for heading in train.headings:
        values = chain(groups, row_seen(response, row, side, heading), train.relieving)
        found.append((float(values[0].highest[0]), heading, values))
    top = max(one[0] for one in found)
    if top <= 0.0:
        least = [gap[0] if isinstance(gap, tuple) else gap for gap in train.vehicle.spacings]
        return Stand(0.0, math.nan, 0, np.cumsum([0.0, *least]))
    stands = [
        settled(response, train, (row, side, heading), places(groups, values, front))
        for value, heading, values in found
        if value >= top * (1.0 - TIE)
        for front in front_places(values[0])
    ]
    return min(stands, key=_order_of_ties)


def _order_of_ties(stand: Stand) -> tuple[list[float], float, int]:
    """Return what equally bad stands are sorted by."""
    distances: list[float] = np.round(stand.distances, _SAME_PLACE).tolist()
    return distances, round(stand.front, _SAME_PLACE), -stand.heading


def _of_units(response: AtStations, units: Sequence[Train]) -> tuple[Floats, Floats]:
    """Return every row's extremes (U, R) under trains that must all be swept, each the quickest way there is."""
    kinds = [_kind(unit) for unit in units]
    highest, lowest = np.zeros((2, len(units), len(response.effects)))
    for kind in set(kinds):
        here = [number for number, one in enumerate(kinds) if one == kind]
        some = [units[number] for number in here]
        if kind == "rigid":
            highest[here], lowest[here] = static_extremes(response, some)
        elif kind == "one gap":
            highest[here], lowest[here] = one_gap_extremes(response, some)
        else:
            for number in here:
                highest[number], lowest[number] = _of_chain(response.condensed, units[number])
    return without_noise(highest, lowest)


def _kind(train: Train) -> str:
    """Return which way a train is swept."""
    gaps = sum(isinstance(gap, tuple) for gap in train.vehicle.spacings)
    if train.relieving != 1.0 or gaps > 1:
        return "chain"
    return "one gap" if gaps else "rigid"


def _of_chain(condensed: Condensed, train: Train) -> tuple[Floats, Floats]:
    """Return every row's extremes (R,) by functions carried from group to group."""
    groups = groups_of(train)

    def best(rows: Rows) -> Floats:
        return chain(groups, rows, train.relieving)[0].highest

    axles = train.vehicle.loads.size
    highest, lowest = over_headings(condensed, train.headings, lambda tried: of_rows(condensed, tried, best, axles))
    return highest[0], lowest[0]
