"""From solved bridge and crossings to ratings."""

from __future__ import annotations

import re
from typing import TYPE_CHECKING

import numpy as np

from movload.arrays import Floats, Ints, held
from movload.errors import InputError, Note
from movload.peaks.peaks import WORST, Peaks, Swept, stacked
from movload.peaks.sweep import swept_parts
from movload.rating.factor_sets import PERMITTED, FactorSet
from movload.rating.kernel import SIGNS, pushed_by_permanent, rating_factors
from movload.rating.ratings import Ratings, known_traffic
from movload.rating.solved import SolvedBridge, solve
from movload.traffic.crossing import Crossing
from movload.traffic.formations import formations_on
from movload.traffic.loading import Loading
from movload.traffic.vehicle import Vehicle

if TYPE_CHECKING:
    from collections.abc import Iterator, Sequence

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
    MissingDataError
        A rule needs something about a part in a sense that it feels, and nobody has typed it.
    """
    asked = tuple(_crossing(one) for one in crossings)
    if not asked:
        raise InputError("nothing crosses: at least one vehicle is needed", place="crossings")
    for crossing in asked:
        for one in (crossing.loading, *filter(None, [crossing.beside])):
            if not solved.method.levels_for(one.kind):
                raise InputError(
                    f'no level of "{solved.method.title}" rates a loading of kind "{one.kind}"', place=one.title
                )
    impact = np.stack([one.loading.dynamic * solved.impact.of(one.loading.kind, one.speed) for one in asked])
    peaks = _peaks(solved, asked, impact)
    live = SIGNS * np.stack([np.stack((one.highest, one.lowest), axis=1) for one in peaks])
    _require_asked(solved, live)
    factor, formation = _factors(solved, live, asked, peaks)
    return Ratings(
        solved,
        asked,
        tuple(level.title for level in solved.method.levels),
        peaks,
        held(impact),
        factor,
        (*solved.notes, *_notes([one.loading for one in asked] + [one.beside for one in asked if one.beside])),
        formation=formation,
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
    starts = _starts(solved)
    of_held = [
        None if one.beside is None else one.beside.dynamic * solved.impact.of(one.beside.kind, None)
        for one in crossings
    ]
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
        beside = [
            None if one is None else one[starts[number] : starts[number + 1]] for number in group for one in of_held
        ]
        found |= zip(keys, swept_parts(responses, formations, of_rows, beside), strict=True)
    effects = solved.effects
    return tuple(
        stacked(one.title, [found[number, crossing] for number in range(len(solved.parts))], effects)
        for crossing, one in enumerate(crossings)
    )


def _presence(solved: SolvedBridge, crossing: Crossing) -> tuple[float, ...]:
    """Return multiple presence by number abreast for a crossing."""
    method = solved.method
    return method.presence_by_kind.get(crossing.loading.kind, method.multiple_presence)


def _require_asked(solved: SolvedBridge, live: Floats) -> None:
    """Raise what a rule asks about a sense that a row now feels, from live load (C, R, 2) or for good."""
    stands = SIGNS * solved.permanent.sum(axis=0)[:, None]
    for row, side, error in solved.asked:
        if stands[row, side] > 0 or (live[:, row, side] > 0).any():
            raise error


def _starts(solved: SolvedBridge) -> Ints:
    """Return the number of each part's first row, and of all rows (P + 1,)."""
    return np.cumsum([0, *(len(part.response.effects) for part in solved.parts)])


def _factors(
    solved: SolvedBridge, live: Floats, crossings: Sequence[Crossing], peaks: Sequence[Peaks]
) -> tuple[Floats, Ints | None]:
    """Return RF (S, C, R, 2) under live effects (C, R, 2) given as magnitudes, and the formation that gives each.

    nan for levels that do not rate a kind. The formation is WORST where nothing is held fixed: the greatest live effect
    then gives the least RF. None where that is so everywhere.
    """
    if not np.isfinite(live).all():
        raise InputError("a live effect is not a finite number", place=solved.title)
    traffic = known_traffic(solved.traffic)
    kinds = [one.loading.kind for one in crossings]
    factors = np.empty((len(solved.method.levels), *live.shape))
    shared = any(one.beside is not None for one in crossings)
    formation = np.full(factors.shape if shared else 0, WORST)
    alone = np.full_like(solved.strength, np.inf) if solved.alone is None else solved.alone
    for number, (level, strength) in enumerate(zip(solved.method.levels, solved.strength, strict=True)):
        pushed = pushed_by_permanent(solved.permanent, level.permanent_margins(solved.classes))
        margins = np.array([level.live_margin(kind, traffic) for kind in kinds])
        factors[number] = rating_factors(strength, pushed, margins[:, None, None] * live, alone=alone[number])
        for crossing, one in enumerate(crossings):
            if one.beside is not None:
                both = margins[crossing], solved.method.beside_margin(level, one.beside.kind, traffic)
                limits = strength, pushed, alone[number]
                for rows, least, which in _beside(peaks[crossing], limits, both):
                    factors[number, crossing, rows], formation[number, crossing, rows] = least, which
        factors[number, [not level.rates(kind) for kind in kinds]] = np.nan
    return held(factors), formation if shared else None


def _beside(
    peaks: Peaks, limits: tuple[Floats, Floats, Floats], margins: tuple[float, float]
) -> Iterator[tuple[slice, Floats, Ints]]:
    """Yield for each part with traffic held fixed its rows, their least RF (R, 2), and the formation that gives it.

    ``limits`` are strength, what permanent load uses of it, and what it alone may use, each (R, 2).
    """
    first = 0
    for part in peaks.parts:
        rows = slice(first, first + part.highest.size)
        first = rows.stop
        if part.split is None:
            continue
        grows, stays = part.split
        strength, pushed, alone = (one[rows] for one in limits)
        factors = rating_factors(strength, pushed, margins[0] * grows, margins[1] * stays, alone=alone)
        rated = np.where(np.isnan(factors), np.inf, factors)
        which = np.asarray(rated.argmin(axis=0))
        yield rows, np.take_along_axis(factors, which[None], axis=0)[0], which


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
