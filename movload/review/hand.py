"""A governing figure taken apart: axle load x share x (1 + I) x ordinate, line by line, with the sum."""

from __future__ import annotations

from dataclasses import dataclass
from typing import TYPE_CHECKING

import numpy as np

from movload.peaks.placement import panel_loads

if TYPE_CHECKING:
    from movload.peaks.peaks import Peaks


@dataclass(frozen=True, slots=True)
class Term:
    """One axle's part of a sum.

    ``axle`` counts from 1 at the front; ``x`` [m]; ``load`` [N]; ``share``, ``impact`` [-]; ``ordinate`` per unit load
    where the axle stands (0 off the bridge); ``effect`` is their product [N, m].
    """

    axle: int
    x: float
    load: float
    share: float
    impact: float
    ordinate: float
    effect: float


def terms(peaks: Peaks, row: int, side: int) -> tuple[Term, ...]:
    """Return the terms whose sum is a row's peak; none when the vehicle is off the bridge.

    Parameters
    ----------
    row, side
        Which peak: 0 highest, 1 lowest.
    """
    part, inside = peaks.part_of(row)
    placement = peaks.peak(row, side).placement
    if not placement.x.size:
        return ()
    unit = panel_loads(part.response.stations, placement.x[:, None], np.ones(1))
    ordinates = part.response.under(unit.T)[inside]
    effects = placement.load * placement.share * (1.0 + placement.impact) * ordinates
    columns = (placement.x, placement.load, placement.share, placement.impact, ordinates, effects)
    return tuple(Term(axle, *map(float, values)) for axle, values in enumerate(zip(*columns, strict=True), start=1))
