"""From solved bridge and crossings to ratings."""

from __future__ import annotations

import re
from typing import TYPE_CHECKING

import numpy as np

from movload.arrays import Floats, held
from movload.errors import InputError, Note
from movload.peaks.peaks import PartPeaks, Peaks, stacked
from movload.peaks.sweep import part_peaks
from movload.rating.factor_sets import PERMITTED, FactorSet
from movload.rating.kernel import SIGNS, pushed_by_permanent, rating_factors
from movload.rating.ratings import Ratings
from movload.rating.solved import SolvedBridge, solve
from movload.traffic.crossing import Crossing, trains_on
from movload.traffic.loading import Loading
from movload.traffic.vehicle import Vehicle

if TYPE_CHECKING:
    from collections.abc import Sequence

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
    kinds = [one.loading.kind for one in asked]
    return Ratings(
        solved,
        asked,
        tuple(level.title for level in solved.method.levels),
        peaks,
        held(np.repeat(solved.impact[None], len(asked), axis=0)),
        _factors(solved, live, kinds),
        (*solved.notes, *_notes([one.loading for one in asked])),
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
        impact = np.repeat(solved.impact[None, rows], len(trains), axis=0)
        for mine, peaks in zip(by_crossing, part_peaks(part.response, trains, impact), strict=True):
            mine.append(peaks)
        first = rows.stop
    return tuple(stacked(one.title, parts) for one, parts in zip(crossings, by_crossing, strict=True))


def _factors(solved: SolvedBridge, live: Floats, kinds: Sequence[str]) -> Floats:
    """Return RF (S, C, R, 2) under live effects (C, R, 2) given as magnitudes, of loadings of these kinds (C)."""
    if not np.isfinite(live).all():
        raise InputError("a live effect is not a finite number", place=solved.title)
    factors = []
    for level, strength in zip(solved.method.levels, solved.strength, strict=True):
        pushed = pushed_by_permanent(solved.permanent, level.permanent_margins(solved.classes))
        margins = np.array([level.live_margin(kind) for kind in kinds])
        factors.append(rating_factors(strength, pushed, margins[:, None, None] * live))
    return held(np.array(factors))


def _notes(loadings: Sequence[Loading]) -> list[Note]:
    """Return what a reader must know of each vehicle, once: its source unless read, its own notes, one-way travel."""
    notes = [
        Note("vehicle-source", one.title, f"axles and spacings: {one.source or 'source not said'}", one.source)
        for one in loadings
        if re.search(r"\b(memory|invented)\b", one.source) or not one.source
    ]
    notes += [Note("vehicle", one.title, text) for one in loadings for text in one.notes]
    for one in loadings:
        headings = {heading for case in one.cases if case.moving for heading in case.moving.headings}
        if len(headings) == 1:
            way = "+x" if headings == {1} else "-x"
            notes.append(Note("one-way", one.title, f"crosses toward {way} only; not rated the other way."))
    return list(dict.fromkeys(notes))
