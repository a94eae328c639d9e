"""The exact highest and lowest value of every row under every train: one matrix product per batch of positions."""

from __future__ import annotations

from typing import TYPE_CHECKING, Final

import numpy as np

from movload.peaks.candidates import Candidates, alike, candidates_of
from movload.peaks.placement import panel_loads

if TYPE_CHECKING:
    from collections.abc import Sequence

    from movload.arrays import Floats
    from movload.statics.part import Response
    from movload.traffic.crossing import Train

_IN_CACHE: Final = 150_000  # doubles worked on at a time
_NOISE: Final = 1e-12  # of the row's largest value under the same train: round-off, no peak


def static_extremes(response: Response, trains: Sequence[Train]) -> tuple[Floats, Floats]:
    """Return the highest and lowest static value of each row under each train (V, R), both including 0.

    Parameters
    ----------
    response
        How R rows answer loads on B stations.
    trains
        V trains; those of one axle count are swept together.
    """
    rows = len(response.effects)
    highest, lowest = np.empty((len(trains), rows)), np.empty((len(trains), rows))
    for group in alike(trains):
        candidates = candidates_of(response.stations, [trains[number] for number in group])
        highest[group], lowest[group] = _group_extremes(response, candidates)
    noise = _NOISE * np.maximum(highest, -lowest)
    highest[highest <= noise] = 0.0
    lowest[lowest >= -noise] = 0.0
    return highest, lowest


def _group_extremes(response: Response, candidates: Candidates) -> tuple[Floats, Floats]:
    """Return highest and lowest (V, R) of one group, run by run in pieces that stay in cache."""
    trains, axles = candidates.distances.shape
    runs = trains * candidates.headings.size * axles
    widest = max(len(response.effects), response.stations.size)
    step = max(1, _IN_CACHE // (candidates.stops * widest))
    highest, lowest = np.empty((runs, len(response.effects))), np.empty((runs, len(response.effects)))
    for first in range(0, runs, step):
        last = min(first + step, runs)
        loads = panel_loads(candidates.stations, *candidates.axles_at(first, last))
        values = response.under(loads.T).T.reshape(last - first, candidates.stops, -1)
        values.max(axis=1, out=highest[first:last])
        values.min(axis=1, out=lowest[first:last])
    by_train = (trains, runs // trains, -1)
    return (
        np.maximum(highest.reshape(by_train).max(axis=1), 0.0),
        np.minimum(lowest.reshape(by_train).min(axis=1), 0.0),
    )
