"""The exact highest and lowest value of every row under every train: one matrix product per batch of positions."""

from __future__ import annotations

from functools import lru_cache
from typing import TYPE_CHECKING, Final

import numpy as np

from movload.arrays import keep_memory_warm
from movload.peaks.candidates import Candidates, candidates_of
from movload.statics.condensed import Condensed, spread
from movload.traffic.crossing import whole_trains

if TYPE_CHECKING:
    from collections.abc import Sequence

    from movload.arrays import Floats, Ints
    from movload.statics.part import AtStations
    from movload.traffic.crossing import Train

_IN_CACHE: Final = 250_000  # doubles worked on at a time
_NOISE: Final = 1e-12  # of the row's largest value under the same train: round-off, no peak


def static_extremes(response: AtStations, trains: Sequence[Train]) -> tuple[Floats, Floats]:
    """Return the highest and lowest static value of each row under each train (V, R), both including 0.

    Trains of one vehicle whose axles all have one share differ by that share only; so each vehicle is swept once, with
    whole axles, for all parts and places that share this response.

    Parameters
    ----------
    response
        How R rows answer loads on B stations.
    trains
        V trains, all swept in one batch.
    """
    units, unit, scale = _units(trains)
    highest, lowest = _swept(response, units)
    if len(units) == len(trains) and (scale == 1.0).all():
        return highest, lowest
    return spread_over(highest[unit], lowest[unit], scale)


def spread_over(highest: Floats, lowest: Floats, scale: Floats) -> tuple[Floats, Floats]:
    """Return extremes (V, R) times a scale (V,) that may be negative: the lowest then makes the highest."""
    top, bottom = scale[:, None] * highest, scale[:, None] * lowest
    return np.maximum(top, bottom), np.minimum(top, bottom)


def _units(trains: Sequence[Train]) -> tuple[list[Train], Ints, Floats]:
    """Return the trains that must be swept, and for each train which of them it is and how many times it (V,)."""
    found: dict[Train, int] = {}
    unit, scale = np.empty(len(trains), dtype=np.intp), np.empty(len(trains))
    for number, train in enumerate(trains):
        whole, times = unit_of(train)
        unit[number] = found.setdefault(whole, len(found))
        scale[number] = times
    return list(found), unit, scale


def unit_of(train: Train) -> tuple[Train, float]:
    """Return the train of whole axles that a train is so many times, where all its axles have one share; or itself."""
    share = float(train.shares[0])
    if not train.even and (train.shares != share).any():
        return train, 1.0
    (whole,) = whole_trains(train.vehicle)
    return _heading_like(whole, train.headings), share * train.factor


@lru_cache(maxsize=512)
def _heading_like(whole: Train, headings: tuple[int, ...]) -> Train:
    """Return a train in the headings given, the same object for the same headings."""
    if whole.headings == headings:
        return whole
    return type(whole)(whole.case, whole.vehicle, whole.shares, headings=headings)


def _swept(response: AtStations, trains: Sequence[Train]) -> tuple[Floats, Floats]:
    """Return every row's extremes (V, R) under trains, all swept."""
    keep_memory_warm()
    highest, lowest = np.empty((2, len(trains), len(response.effects)))
    kinds = [(len(train.headings) == 2, bool((train.shares < 0.0).any())) for train in trains]
    for kind in dict.fromkeys(kinds):  # apart, so that what a vehicle gets does not depend on which others are asked
        group = [number for number, one in enumerate(kinds) if one == kind]
        some = [trains[number] for number in group]
        highest[group], lowest[group] = _of_all_rows(response.condensed, some, mirrored=kind[0], lifting=kind[1])
    noise = _NOISE * np.maximum(np.abs(highest), np.abs(lowest))
    highest[highest <= noise] = 0.0
    lowest[lowest >= -noise] = 0.0
    return highest, lowest


def may_lose(condensed: Condensed, *, lifting: bool) -> bool:
    """Return whether the positions just outside the ends can matter: to rows that change sign, or loads that lift."""
    return condensed.jumps or lifting


def _of_all_rows(
    condensed: Condensed, trains: Sequence[Train], *, mirrored: bool, lifting: bool
) -> tuple[Floats, Floats]:
    """Return every row's extremes (V, R) from the distinct rows; of a symmetric bridge from one heading only."""
    one_heading = mirrored and condensed.symmetric
    lost = may_lose(condensed, lifting=lifting)
    highest, lowest = _batch(condensed, trains, (1,) if one_heading else None, lost=lost)
    if one_heading:
        other = spread(highest, lowest, condensed.mirror, condensed.mirror_scale)
        highest, lowest = np.maximum(highest, other[0]), np.minimum(lowest, other[1])
    highest, lowest = np.maximum(highest, 0.0), np.minimum(lowest, 0.0)
    return spread(highest, lowest, condensed.row, condensed.scale)


def _batch(
    condensed: Condensed, trains: Sequence[Train], headings: tuple[int, ...] | None, *, lost: bool
) -> tuple[Floats, Floats]:
    """Return every distinct row's extremes (V, C), in the trains' own headings or in those given."""
    response = condensed.response
    candidates = candidates_of(response.stations, trains, headings, may_lose=lost)
    by_run = _extremes_by_run(response, candidates)
    starts = np.searchsorted(candidates.runs.train, np.arange(len(trains)))
    return np.maximum.reduceat(by_run[0], starts, axis=0), np.minimum.reduceat(by_run[1], starts, axis=0)


def _extremes_by_run(response: AtStations, candidates: Candidates) -> Floats:
    """Return each run's highest and lowest (2, N, R), in pieces that stay in cache."""
    rows, runs = len(response.effects), candidates.runs.train.size
    step = runs_at_a_time(response, candidates)
    extremes = np.empty((2, runs, rows))
    for first in range(0, runs, step):
        last = min(first + step, runs)
        values = response.under(candidates.panel_loads(first, last).T).T.reshape(candidates.stops, last - first, rows)
        values.max(axis=0, out=extremes[0, first:last])
        values.min(axis=0, out=extremes[1, first:last])
    return extremes


def runs_at_a_time(response: AtStations, candidates: Candidates) -> int:
    """Return how many runs make a piece that stays in cache."""
    widest = max(len(response.effects), candidates.stations.size)
    return max(1, _IN_CACHE // (candidates.stops * widest))
