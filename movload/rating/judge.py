"""From solved bridge and crossings to ratings."""

from __future__ import annotations

from typing import TYPE_CHECKING

import numpy as np

from movload.arrays import Floats, held
from movload.errors import InputError, Note
from movload.peaks.peaks import PartPeaks, Peaks, stacked
from movload.peaks.sweep import part_peaks
from movload.rating.factor_sets import PERMITTED, FactorSet
from movload.rating.kernel import SIGNS, rating_factors
from movload.rating.ratings import Ratings
from movload.rating.solved import SolvedBridge, solve
from movload.traffic.crossing import Crossing, trains_on
from movload.traffic.loading import Loading
from movload.traffic.vehicle import Vehicle

if TYPE_CHECKING:
    from collections.abc import Iterable, Sequence

    from movload.bridge.bridge import Bridge


def judge(solved: SolvedBridge, crossings: Sequence[Crossing | Loading | Vehicle]) -> Ratings:
    """Return the ratings of a solved bridge under crossings.

    Parameters
    ----------
    crossings
        Who crosses and how; a bare loading or vehicle crosses as the bridge file's shares say.

    Raises
    ------
    InputError
        No crossing, or a spacing that is a range.
    """
    asked = tuple(_crossing(one) for one in crossings)
    if not asked:
        raise InputError("nothing crosses: at least one vehicle is needed", place="crossings")
    peaks = _peaks(solved, asked)
    live = SIGNS * np.stack([np.stack((one.highest, one.lowest), axis=1) for one in peaks])
    return Ratings(
        solved,
        asked,
        tuple(level.title for level in solved.method.levels),
        peaks,
        held(np.repeat(solved.impact[None], len(asked), axis=0)),
        _factors(solved, live),
        (*solved.notes, *_notes(one.loading for one in asked)),
    )


def rate(bridge: Bridge, crossings: Sequence[Crossing | Loading | Vehicle], method: FactorSet = PERMITTED) -> Ratings:
    """Return the ratings of a bridge: `solve`, then `judge`."""
    return judge(solve(bridge, method), crossings)


def _crossing(one: Crossing | Loading | Vehicle) -> Crossing:
    """Return what was asked as a crossing."""
    if isinstance(one, Vehicle):
        one = Loading.of(one)
    return Crossing(one) if isinstance(one, Loading) else one


def _peaks(solved: SolvedBridge, crossings: Sequence[Crossing]) -> tuple[Peaks, ...]:
    """Return the live peaks of every crossing, impact included, all parts stacked."""
    by_crossing: list[list[PartPeaks]] = [[] for _ in crossings]
    first = 0
    for part in solved.parts:
        rows = slice(first, first + len(part.response.effects))
        trains = [trains_on(part.across, crossing) for crossing in crossings]
        for mine, peaks in zip(by_crossing, part_peaks(part.response, trains, solved.impact[rows]), strict=True):
            mine.append(peaks)
        first = rows.stop
    return tuple(stacked(one.title, parts) for one, parts in zip(crossings, by_crossing, strict=True))


def _factors(solved: SolvedBridge, live: Floats) -> Floats:
    """Return RF (S, C, R, 2) under live effects (C, R, 2) given as magnitudes."""
    permanent = solved.permanent.sum(axis=0)
    by_level = zip(solved.method.levels, solved.strength, strict=True)
    return held(np.array([rating_factors(strength, permanent, live, level) for level, strength in by_level]))


def _notes(loadings: Iterable[Loading]) -> list[Note]:
    """Return where each vehicle's numbers come from when that is less than a page read, once for each."""
    notes = (
        Note(
            "vehicle-source",
            loading.title,
            f"axles and spacings: {loading.source or 'source not said'}",
            loading.source,
        )
        for loading in loadings
        if not loading.source or "memory" in loading.source or "invented" in loading.source
    )
    return list(dict.fromkeys(notes))
