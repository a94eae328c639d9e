"""A rating taken apart, so that a reviewer re-adds it with a pocket calculator.

Live load axle by axle: load x factor x share x (1 + I) x ordinate. Permanent load class by class: effect x margin.
"""

from __future__ import annotations

from dataclasses import dataclass
from typing import TYPE_CHECKING

import numpy as np

from movload.rating.kernel import SIGNS

if TYPE_CHECKING:
    from movload.peaks.peaks import Peaks
    from movload.rating.rating import Rating
    from movload.rating.ratings import Ratings
    from movload.strength.strength import Strength


@dataclass(frozen=True, slots=True)
class Term:
    """One axle's part of a sum.

    ``vehicle`` and ``axle`` count from 1, the latter at the front; ``x``, ``z`` [m]; ``load`` [N]; ``share``,
    ``impact``, ``factor`` [-] (of the case and of multiple presence); ``ordinate`` per unit load where the axle stands
    (0 off the bridge); ``effect`` is load x factor x share x (1 + impact) x ordinate [N, N m, m].
    """

    vehicle: int
    axle: int
    x: float
    z: float
    load: float
    factor: float
    share: float
    impact: float
    ordinate: float
    effect: float


@dataclass(frozen=True, slots=True)
class PermanentTerm:
    """One class's part of what permanent load uses of a strength.

    ``effect`` as it acts (tension, sagging positive); ``pushed`` the same as it pushes in the rated sense, negative
    where it relieves; ``margin`` on it; ``used`` their product [N, N m].
    """

    title: str
    effect: float
    pushed: float
    margin: float
    used: float


@dataclass(frozen=True, slots=True)
class Explanation:
    """One rating from its inputs: RF = (strength - used by permanent load) / (live margin x live).

    ``live`` is a magnitude [N, N m]; ``spare`` is strength less what permanent load uses.
    """

    rating: Rating
    strength: Strength
    permanent: tuple[PermanentTerm, ...]
    terms: tuple[Term, ...]
    used: float
    spare: float
    live: float
    live_margin: float


def terms(peaks: Peaks, row: int, side: int) -> tuple[Term, ...]:
    """Return the terms whose sum is a row's peak; none when the vehicle is off the bridge.

    Parameters
    ----------
    row, side
        Which peak: 0 highest, 1 lowest.
    """
    part, inside = peaks.part_of(row)
    stands = peaks.peak(row, side).placement
    if not stands.x.size:
        return ()
    ordinates = part.ordinates(inside, side, stands)
    columns = (stands.x, stands.z, stands.load, stands.factor, stands.share, stands.impact, ordinates,
               stands.felt * ordinates)  # fmt: skip
    first = np.searchsorted(stands.vehicle, stands.vehicle)  # the number of each vehicle's front axle
    counted = np.arange(stands.x.size) - first
    return tuple(
        Term(int(vehicle) + 1, int(axle) + 1, *map(float, values))
        for vehicle, axle, *values in zip(stands.vehicle, counted, *columns, strict=True)
    )


def explained(ratings: Ratings, rating: Rating) -> Explanation:
    """Return a rating with everything it is made of."""
    solved, level = ratings.solved, ratings.levels.index(rating.level)
    margins = solved.method.levels[level].permanent_margins(solved.classes)
    sign = float(SIGNS[rating.side])
    permanent = tuple(
        PermanentTerm(title, float(effect), sign * float(effect), float(margin), sign * float(effect) * float(margin))
        for title, effect, (pushing, relieving) in zip(
            solved.classes, solved.permanent[:, rating.row], margins, strict=True
        )
        for margin in (pushing if sign * effect > 0 else relieving,)
        if effect != 0.0
    )
    used = float(sum(term.used for term in permanent))
    return Explanation(
        rating,
        solved.derived(level, rating.row, rating.side),
        permanent,
        terms(rating.peaks, rating.row, rating.side),
        used,
        rating.strength - used,
        abs(rating.live),
        rating.live_factor,
    )
