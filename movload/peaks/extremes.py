"""The exact highest and lowest value of every row under every train: one matrix product per batch of positions."""

from __future__ import annotations

from typing import TYPE_CHECKING, Final

import numpy as np

from movload.arrays import keep_memory_warm
from movload.peaks.candidates import Candidates, candidates_of
from movload.statics.condensed import Condensed, spread

if TYPE_CHECKING:
    from collections.abc import Sequence

    from movload.arrays import Floats
    from movload.statics.part import Response
    from movload.traffic.crossing import Train

_IN_CACHE: Final = 250_000  # doubles worked on at a time
_NOISE: Final = 1e-12  # of the row's largest value under the same train: round-off, no peak


def static_extremes(response: Response, trains: Sequence[Train]) -> tuple[Floats, Floats]:
    """Return the highest and lowest static value of each row under each train (V, R), both including 0.

    Parameters
    ----------
    response
        How R rows answer loads on B stations.
    trains
        V trains, all swept in one batch.
    """
    keep_memory_warm()
    highest, lowest = np.empty((2, len(trains), len(response.effects)))
    both_ways = [len(train.headings) == 2 for train in trains]
    for two in (True, False):  # apart, so that what a vehicle gets does not depend on which others are asked about
        group = [number for number, both in enumerate(both_ways) if both is two]
        if group:
            some = [trains[number] for number in group]
            highest[group], lowest[group] = _of_all_rows(response.condensed, some, mirrored=two)
    noise = _NOISE * np.maximum(np.abs(highest), np.abs(lowest))
    highest[highest <= noise] = 0.0
    lowest[lowest >= -noise] = 0.0
    return highest, lowest


def _of_all_rows(condensed: Condensed, trains: Sequence[Train], *, mirrored: bool) -> tuple[Floats, Floats]:
    """Return every row's extremes (V, R) from the distinct rows; of a symmetric bridge from one heading only."""
    one_heading = mirrored and condensed.symmetric
    highest, lowest = _batch(condensed, trains, (1,) if one_heading else None)
    if one_heading:
        other = spread(highest, lowest, condensed.mirror, condensed.mirror_scale)
        highest, lowest = np.maximum(highest, other[0]), np.minimum(lowest, other[1])
    highest, lowest = np.maximum(highest, 0.0), np.minimum(lowest, 0.0)
    return spread(highest, lowest, condensed.row, condensed.scale)


def _batch(condensed: Condensed, trains: Sequence[Train], headings: tuple[int, ...] | None) -> tuple[Floats, Floats]:
    """Return every distinct row's extremes (V, C), in the trains' own headings or in those given."""
    response = condensed.response
    candidates = candidates_of(response.stations, trains, headings, may_lose=condensed.jumps)
    by_run = _extremes_by_run(response, candidates)
    starts = np.searchsorted(candidates.runs.train, np.arange(len(trains)))
    return np.maximum.reduceat(by_run[0], starts, axis=0), np.minimum.reduceat(by_run[1], starts, axis=0)


def _extremes_by_run(response: Response, candidates: Candidates) -> Floats:
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


def runs_at_a_time(response: Response, candidates: Candidates) -> int:
    """Return how many runs make a piece that stays in cache."""
    widest = max(len(response.effects), candidates.stations.size)
    return max(1, _IN_CACHE // (candidates.stops * widest))
