"""The one rating equation, as arrays.

RF = (R - sum of a D - F) / (b L), each as it pushes in the rated sense: D the permanent effect of each class and a its
margin, F what live load that is held fixed takes (other traffic, its own margin and impact on it), b the margin on the
live effect L that scales, impact included. b L may be a sum over loads with margins of their own.
"""

from __future__ import annotations

from typing import Final

import numpy as np

from movload.arrays import Floats, held

SIGNS: Final = np.array([1.0, -1.0])  # tension, compression


def pushed_by_permanent(permanent: Floats, margins: Floats) -> Floats:
    """Return what permanent load uses of each sense's strength (R, 2) [N], its margins included; negative relieves.

    The margin is chosen for each row, class and sense by what the class's whole effect does there: push or relieve.

    Parameters
    ----------
    permanent
        D (K, R) [N] by class, tension positive.
    margins
        (K, 2): on a class that pushes and on one that relieves.
    """
    pushed = SIGNS * permanent[:, :, None]
    factored: Floats = np.where(pushed > 0, margins[:, None, None, 0], margins[:, None, None, 1]) * pushed
    used: Floats = factored.sum(axis=0)
    return used


def rating_factors(
    strength: Floats, pushed: Floats, live: Floats, fixed: Floats | float = 0.0, *, alone: Floats | float = np.inf
) -> Floats:  # fmt: skip
    """Return RF, shape of ``live``.

    0 where permanent load alone uses all strength or more than it alone may, even where the live effect is zero;
    infinite where there is strength to spare and no live effect; nan where no strength is known. A sense that neither
    permanent nor live load brings about needs no strength, so there a strength of 0 is enough.

    Parameters
    ----------
    strength
        R (R, 2) [N], magnitudes, tension then compression.
    pushed
        What permanent load uses of it (R, 2) [N], margins included (see `pushed_by_permanent`).
    live
        b L (..., R, 2) [N], magnitudes with impact and margin; leading axes are crossings.
    fixed
        F (..., R, 2) [N], what live load that does not scale takes; it never relieves.
    alone
        (R, 2) [N], the most that permanent load alone may use: timber carries less for good than for a while.
    """
    spare = strength - pushed - np.maximum(fixed, 0.0)
    felt = live > 0
    factors = np.full(live.shape, np.inf)
    np.divide(spare, live, out=factors, where=felt)
    factors[(spare <= 0) & (felt | (pushed + np.maximum(fixed, 0.0) > 0))] = 0.0
    factors[..., pushed > alone] = 0.0
    factors[..., np.isnan(spare)] = np.nan
    return held(factors)
