"""Which train and which position gave each row's extremes, found again from the values."""

from __future__ import annotations

from typing import TYPE_CHECKING, Final

import numpy as np

from movload.peaks.candidates import Candidates, candidates_of
from movload.peaks.extremes import runs_at_a_time, static_extremes

if TYPE_CHECKING:
    from collections.abc import Sequence

    from movload.arrays import Floats, Ints
    from movload.statics.part import Response
    from movload.traffic.crossing import Train

_TIE: Final = 1e-12  # of the row's largest value: positions whose effects differ by less are equally bad
_SAME_PLACE: Final = 9  # decimals of a metre to which positions count as equal when ties are broken


def governing_candidates(response: Response, trains: Sequence[Train], impact: Floats) -> tuple[Ints, Ints]:
    """Return the train and its candidate that give every row's highest and lowest, (2, R) each.

    Of equally bad trains the first counts; of equally bad positions the smallest, heading +1 before -1, then the axle
    nearest the front. ``impact`` (R, 2) makes the trains that are dynamic worse; it does not move their positions.
    """
    static = np.stack(static_extremes(response, trains))
    adverse = np.stack((static[0], -static[1]))
    dynamic = np.array([train.dynamic for train in trains])[:, None]
    felt = adverse * (1.0 + dynamic * impact.T[:, None, :])
    worst = felt.max(axis=1)
    train = np.argmax(felt >= (worst - _TIE * worst.max(axis=0))[:, None], axis=1)
    reached = np.take_along_axis(adverse, train[:, None], axis=1)[:, 0]
    floor = reached - _TIE * adverse.max(axis=(0, 1))
    where = np.zeros_like(train)
    for number in np.unique(train):
        candidates = candidates_of(response.stations, [trains[number]], may_lose=response.condensed.jumps)
        where = np.where(train == number, _first_reaching(response, candidates, floor), where)
    return train, where


def _first_reaching(response: Response, candidates: Candidates, floor: Floats) -> Ints:
    """Return the first candidate (2, R), in the order of ties, whose effect reaches ``floor`` (2, R) in each sense."""
    heading, axle = (np.tile(one, candidates.stops) for one in (candidates.runs.heading, candidates.runs.axle))
    order = np.lexsort((axle, -heading, np.round(candidates.fronts().reshape(-1), _SAME_PLACE)))
    rank = np.empty_like(order)
    rank[order] = np.arange(order.size)
    by_stop = rank.reshape(candidates.stops, -1)
    first = np.full(floor.shape, order.size - 1)
    step = runs_at_a_time(response, candidates)
    for run in range(0, candidates.runs.train.size, step):
        last = min(run + step, candidates.runs.train.size)
        values = response.under(candidates.panel_loads(run, last).T)
        ranks = by_stop[:, run:last].reshape(-1)
        for side, adverse in enumerate((values, -values)):
            reached = np.where(adverse >= floor[side][:, None], ranks, order.size - 1).min(axis=1)
            np.minimum(first[side], reached, out=first[side])
    return np.asarray(order[first])
