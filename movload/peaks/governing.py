"""Which formation and which position gave each row's extremes, found again from the values."""

from __future__ import annotations

from functools import lru_cache
from typing import TYPE_CHECKING, Final

import numpy as np

from movload.peaks.any_train import extremes_of
from movload.peaks.candidates import Candidates, candidates_of
from movload.peaks.extremes import may_lose, runs_at_a_time, static_extremes

if TYPE_CHECKING:
    from collections.abc import Sequence

    from movload.arrays import Floats, Ints
    from movload.statics.part import AtStations
    from movload.traffic.crossing import Train
    from movload.traffic.formations import Formation

_TIE: Final = 1e-12  # of the row's largest value: positions whose effects differ by less are equally bad
_SAME_PLACE: Final = 9  # decimals of a metre to which positions count as equal when ties are broken


def formation_extremes(
    response: AtStations, formations: Sequence[Formation], impact: Floats, held_impact: Floats | None = None
) -> tuple[Floats, Floats]:
    """Return the highest and lowest value of each row under each formation (F, R), impact included.

    The vehicles of a formation stand abreast, each where it is worst: their extremes add.

    Parameters
    ----------
    impact
        (F, R, 2) dynamic allowance on highest and lowest, for the trains that are dynamic.
    held_impact
        The same for trains that are held fixed; None where there are none.
    """
    counts = [len(formation) for formation in formations]
    felt = _felt(response, formations, impact, held_impact)
    if sum(counts) > len(formations):
        starts = np.cumsum([0, *counts[:-1]])
        felt = [np.add.reduceat(one, starts, axis=0) for one in felt]
    return felt[0], felt[1]


def split_extremes(
    response: AtStations, formations: Sequence[Formation], impact: Floats, held_impact: Floats
) -> tuple[Floats, Floats]:
    """Return what grows with a rating and what is held fixed, of each row under each formation (F, R, 2), magnitudes.

    Parameters
    ----------
    impact, held_impact
        (R, 2) dynamic allowance of either.
    """
    every = [np.broadcast_to(one, (len(formations), *one.shape)) for one in (impact, held_impact)]
    highest, lowest = _felt(response, formations, every[0], every[1])
    felt = np.stack((highest, -lowest), axis=2)
    return split_up(formations, felt)


def split_up(formations: Sequence[Formation], felt: Floats) -> tuple[Floats, Floats]:
    """Return what each formation adds up to of what grows and of what is held fixed (F, ...), by train (T, ...)."""
    of_train = np.repeat(np.arange(len(formations)), [len(formation) for formation in formations])
    fixed = np.array([train.fixed for formation in formations for train in formation])
    grows, stays = np.zeros((2, len(formations), *felt.shape[1:]))
    np.add.at(grows, of_train[~fixed], felt[~fixed])
    np.add.at(stays, of_train[fixed], felt[fixed])
    return grows, stays


def _felt(
    response: AtStations, formations: Sequence[Formation], impact: Floats, held_impact: Floats | None
) -> list[Floats]:
    """Return each train's highest and lowest (T, R), impact included (see `formation_extremes`)."""
    counts = [len(formation) for formation in formations]
    trains = [train for formation in formations for train in formation]
    extremes = extremes_of(response, trains)
    dynamic = np.array([train.dynamic for train in trains])[:, None]
    of_train = impact if len(trains) == len(formations) else np.repeat(impact, counts, axis=0)
    if held_impact is not None:
        fixed = np.array([train.fixed for train in trains])[:, None, None]
        of_train = np.where(fixed, np.repeat(held_impact, counts, axis=0), of_train)
    return [extreme * (1.0 + dynamic * of_train[:, :, side]) for side, extreme in enumerate(extremes)]


def governing_formation(
    response: AtStations, formations: Sequence[Formation], impact: Floats, held_impact: Floats | None = None
) -> Ints:
    """Return which formation gives every row's highest and lowest (2, R); of equally bad ones the first.

    Parameters
    ----------
    impact, held_impact
        (R, 2), as in `formation_extremes`.
    """
    many = len(formations)
    of_held = None if held_impact is None else np.broadcast_to(held_impact, (many, *held_impact.shape))
    highest, lowest = formation_extremes(response, formations, np.broadcast_to(impact, (many, *impact.shape)), of_held)
    adverse = np.stack((highest, -lowest))
    worst = adverse.max(axis=1)
    first: Ints = np.argmax(adverse >= (worst - _TIE * worst.max(axis=0))[:, None], axis=1)
    return first


@lru_cache(maxsize=256)  # every row of a part asks about the same few trains
def worst_candidates(response: AtStations, train: Train) -> tuple[Candidates, Ints]:
    """Return a train's candidates, and which of them gives every row's highest and lowest static value (2, R).

    Of equally bad positions the smallest counts, then heading +1 before -1, then the axle nearest the front.
    """
    highest, lowest = (extreme[0] for extreme in static_extremes(response, [train]))
    reached = np.stack((highest, -lowest))
    floor = reached - _TIE * reached.max(axis=0)
    lost = may_lose(response.condensed, lifting=bool((train.shares < 0.0).any()))
    candidates = candidates_of(response.stations, [train], may_lose=lost)
    return candidates, _first_reaching(response, candidates, floor)


def _first_reaching(response: AtStations, candidates: Candidates, floor: Floats) -> Ints:
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
