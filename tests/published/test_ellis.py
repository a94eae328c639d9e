"""The greatest pull in a hanger under a locomotive.

C. A. Ellis, *Essentials in the Theory of Framed Structures*, McGraw-Hill 1922, pp. 165-166: Cooper's E40, one rail.
The two moment sums and the rule are READ; the spacings are fixed by those sums, the rest of the axle list is FROM
MEMORY. Kip and foot, as in the source.
"""

from __future__ import annotations

import numpy as np
from numpy.testing import assert_allclose
from oracles.trusses import bottom, pratt, simple_span, truss_of

from movload import Vehicle, influence_lines, sweep

# Half of a track's axles. The 2 kip/ft per rail that follows both locomotives gives a hanger at most 2 x 25 = 50 kip
# and cannot share its two panels with the worst wheels.
LOADS = np.array([20, 40, 40, 40, 40, 26, 26, 26, 26] * 2) / 2.0
SPACINGS = [8, 5, 5, 5, 9, 5, 6, 5, 8, 8, 5, 5, 5, 9, 5, 6, 5]
PANEL = 25.0


def moment_about(wheel: int) -> float:
    """Return the moment of the wheels up to ``wheel`` (1 = front) about it [kip ft]."""
    at = np.concatenate(([0.0], np.cumsum(SPACINGS)))
    return float(LOADS[:wheel] @ (at[wheel - 1] - at[:wheel]))


def test_moment_sums() -> None:
    """Pp. 165-166: wheels 1-8 about wheel 8 give 2851, wheels 1-4 about wheel 4 give 480 kip ft. READ.

    Whole numbers, so half of one.
    """
    assert_allclose([moment_about(8), moment_about(4)], [2851.0, 480.0], rtol=0.0, atol=0.5)


def test_hanger() -> None:
    """Pp. 165-166: hanger = (2851 - 2 x 480)/p with wheel 4 at L1; p = 25 ft gives 75.64 kip. READ.

    Half of the last digit. The second locomotive's wheel 4 (the 13th) is as bad as the first's.
    """
    lines = influence_lines(truss_of(pratt([PANEL] * 4, [PANEL] * 3), simple_span(4)), bottom(4))
    locomotives = Vehicle("two E40 locomotives, one rail, partly from memory", LOADS, SPACINGS)
    peak = sweep(lines, locomotives)["U1-L1"].highest
    assert_allclose(peak.value, 75.64, rtol=0.0, atol=0.005)
    assert_allclose(peak.value, (moment_about(8) - 2.0 * moment_about(4)) / PANEL, rtol=1e-12)
    assert peak.axle in {3, 12}
    assert peak.station == 1
