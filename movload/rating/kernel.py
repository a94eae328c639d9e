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


def rating_factors(strength: Floats, permanent: Floats, live: Floats, level: Level) -> Floats:
    """Return RF, shape of ``live``.

    0 where permanent load alone uses all strength, even where the live effect is zero; infinite where there is
    strength to spare and no live effect; nan where no strength is known. A sense that neither permanent nor live load
    brings about needs no strength, so there a strength of 0 is enough.

    Parameters
    ----------
    strength
        R (R, 2) [N], magnitudes, tension then compression.
    permanent
        D (R,) [N], tension positive.
    live
        L (..., R, 2) [N], magnitudes with impact; leading axes are crossings.
    """
    pushed = SIGNS * level.permanent * permanent[:, None]
    spare = strength - pushed
    felt = live > 0
    factors = np.full(live.shape, np.inf)
    np.divide(spare, level.live * live, out=factors, where=felt)
    factors[(spare <= 0) & (felt | (pushed > 0))] = 0.0
    factors[..., np.isnan(spare)] = np.nan
    return held(factors)
