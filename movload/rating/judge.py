"""From solved bridge and crossings to ratings."""

from __future__ import annotations

import math
import re
from typing import TYPE_CHECKING

import numpy as np

from movload.arrays import Floats, held
from movload.errors import InputError, Note
from movload.peaks.peaks import Peaks, Swept, stacked
from movload.peaks.sweep import swept_parts
from movload.rating.factor_sets import PERMITTED, FactorSet
from movload.rating.kernel import SIGNS, pushed_by_permanent, rating_factors
from movload.rating.ratings import Ratings
from movload.rating.solved import SolvedBridge, solve
from movload.traffic.crossing import Crossing
from movload.traffic.formations import formations_on
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
    for one in asked:
        if not solved.method.levels_for(one.loading.kind):
            raise InputError(
                f'no level of "{solved.method.title}" rates a loading of kind "{one.loading.kind}"', place=one.title
            )
    impact = np.stack([one.loading.dynamic * solved.impact.of(one.loading.kind, one.speed) for one in asked])
    peaks = _peaks(solved, asked, impact)
    live = SIGNS * np.stack([np.stack((one.highest, one.lowest), axis=1) for one in peaks])
    return Ratings(
        solved,
        asked,
        tuple(level.title for level in solved.method.levels),
        peaks,
        held(impact),
        _factors(solved, live, [one.loading.kind for one in asked]),
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


def _peaks(solved: SolvedBridge, crossings: Sequence[Crossing], impact: Floats) -> tuple[Peaks, ...]:
    """Return the live peaks of every crossing, impact (C, R, 2) included, all parts stacked.

    Parts that answer alike (two trusses, sections of floorbeams) are swept together.
    """
    starts = np.cumsum([0, *(len(part.response.effects) for part in solved.parts)])
    groups: dict[object, list[int]] = {}
    for number, part in enumerate(solved.parts):
        groups.setdefault(part.response.alike, []).append(number)
    found: dict[tuple[int, int], Swept] = {}
    for group in groups.values():
        formations = [
            formations_on(solved.parts[number].across, one, solved.roadway, _presence(solved, one))
            for number in group
            for one in crossings
        ]
        of_rows = np.concatenate([impact[:, starts[number] : starts[number + 1]] for number in group])
        responses = [solved.parts[number].response for number in group for _ in crossings]
        keys = [(number, crossing) for number in group for crossing in range(len(crossings))]
        found |= zip(keys, swept_parts(responses, formations, of_rows), strict=True)
    effects = solved.effects
    return tuple(
        stacked(one.title, [found[number, crossing] for number in range(len(solved.parts))], effects)
        for crossing, one in enumerate(crossings)
    )


def _presence(solved: SolvedBridge, crossing: Crossing) -> tuple[float, ...]:
    """Return multiple presence by number abreast for a crossing."""
    method = solved.method
    return method.presence_by_kind.get(crossing.loading.kind, method.multiple_presence)


def _factors(solved: SolvedBridge, live: Floats, kinds: Sequence[str]) -> Floats:
    """Return RF (S, C, R, 2) under live effects (C, R, 2) given as magnitudes, of loadings of these kinds (C).

    nan for levels that do not rate a kind.
    """
    if not np.isfinite(live).all():
        raise InputError("a live effect is not a finite number", place=solved.title)
    traffic = None if solved.traffic is None or math.isinf(solved.traffic) else solved.traffic
    factors = []
    for level, strength in zip(solved.method.levels, solved.strength, strict=True):
        pushed = pushed_by_permanent(solved.permanent, level.permanent_margins(solved.classes))
        margins = np.array([level.live_margin(kind, traffic) for kind in kinds])
        one = np.array(rating_factors(strength, pushed, margins[:, None, None] * live))
        one[[not level.rates(kind) for kind in kinds]] = np.nan
        factors.append(one)
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
