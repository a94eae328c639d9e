"""A rating taken apart, so that a reviewer re-adds it with a pocket calculator.

Live load axle by axle: load x factor x share x (1 + I) x ordinate. Permanent load class by class: effect x margin.
"""

from __future__ import annotations

from dataclasses import dataclass, field
from typing import TYPE_CHECKING

import numpy as np

from movload.peaks.peaks import WORST
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
    (0 off the bridge); ``effect`` is load x factor x share x (1 + impact) x ordinate [N, N m, m]; ``held`` says that a
    rating holds it fixed.
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
    held: bool = field(default=False, kw_only=True)


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
    """One rating from its inputs: RF = (strength - used by permanent load - held margin x held) / (live margin x live).

    ``live``, which grows with RF, and ``held``, which does not, are magnitudes [N, N m]; ``spare`` is strength less
    what permanent load and held traffic use.
    """

    rating: Rating
    strength: Strength
    permanent: tuple[PermanentTerm, ...]
    terms: tuple[Term, ...]
    used: float
    spare: float
    live: float
    live_margin: float
    held: float = 0.0
    held_margin: float = 1.0


def terms(peaks: Peaks, row: int, side: int, formation: int = WORST) -> tuple[Term, ...]:
    """Return the terms whose sum is a row's peak; none when the vehicle is off the bridge.

    Parameters
    ----------
    row, side
        Which peak: 0 highest, 1 lowest.
    formation
        Under which formation; WORST is that of the greatest effect.
    """
    part, inside = peaks.part_of(row)
    stands = peaks.peak(row, side, formation).placement
    if not stands.x.size:
        return ()
    ordinates = part.ordinates(inside, side, stands, formation)
    columns = (stands.x, stands.z, stands.load, stands.factor, stands.share, stands.impact, ordinates,
               stands.felt * ordinates)  # fmt: skip
    first = np.searchsorted(stands.vehicle, stands.vehicle)  # the number of each vehicle's front axle
    counted = np.arange(stands.x.size) - first
    return tuple(
        Term(int(vehicle) + 1, int(axle) + 1, *map(float, values), held=bool(fixed))
        for vehicle, axle, fixed, *values in zip(stands.vehicle, counted, stands.fixed, *columns, strict=True)
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
    stays = abs(rating.held)
    return Explanation(
        rating,
        solved.derived(level, rating.row, rating.side),
        permanent,
        terms(rating.peaks, rating.row, rating.side, rating.formation),
        used,
        rating.strength - used - rating.held_factor * stays,
        abs(rating.live),
        rating.live_factor,
        stays,
        rating.held_factor,
    )
