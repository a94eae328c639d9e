"""The one rating equation, as arrays.

RF = (R - s a D) / (b L), with s = +1 for tension and -1 for compression, D the permanent effect (tension positive), a
and b the level's factors, and L the live effect's magnitude in that sense, impact included.
"""

from __future__ import annotations

from typing import TYPE_CHECKING, Final

import numpy as np

from movload.arrays import Floats, held

if TYPE_CHECKING:
    from movload.rating.factor_sets import Level

SIGNS: Final = np.array([1.0, -1.0])  # tension, compression


def spare_strength(strength: Floats, permanent: Floats, level: Level) -> Floats:
    """Return R - s a D (R, 2) [N]: what permanent load leaves; 0 or less when it alone uses all."""
    spare: Floats = strength - SIGNS * level.permanent * permanent[:, None]
    return spare


def rating_factors(spare: Floats, live: Floats, level: Level) -> Floats:
    """Return RF (R, 2).

    0 where permanent load alone uses all strength, even where the live effect is zero; infinite where there is
    strength to spare and no live effect; nan where no strength is known.

    Parameters
    ----------
    spare
        R - s a D (R, 2) [N].
    live
        L (R, 2) [N], magnitudes with impact.
    """
    factors = np.full(spare.shape, np.inf)
    felt = live > 0
    factors[felt] = spare[felt] / (level.live * live[felt])
    factors[spare <= 0] = 0.0
    factors[np.isnan(spare)] = np.nan
    return held(factors)
