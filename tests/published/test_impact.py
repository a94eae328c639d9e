"""Impact by loaded length on published influence lines, and the railway rule number by number.

AASHTO, *Standard Specifications for Highway Bridges*, 17th ed., art. 3.8.2: I = 50 / (L + 125) <= 0.30, L in ft, the
loaded length that gives the member's peak. FROM MEMORY.

AREMA, *Manual for Railway Engineering*, ch. 15, impact of rolling equipment without hammer blow: 40 - 3 L^2 / 1600 %
for L < 80 ft, 16 + 600 / (L - 30) % from there on; rocking effect 20 % of the wheel load as a couple on rails 5 ft
apart. FROM MEMORY.

T. G. Hicks (ed.), *Handbook of Civil Engineering Calculations*, 2nd ed., McGraw-Hill 2007, p. 1.70: neutral point of
U2-L3 in a Pratt truss of 6 x 20 ft. READ. MATHalino, "Influence lines for trusses": ordinates of member DK. READ.

The arithmetic with these numbers is ours.
"""

from __future__ import annotations

import numpy as np
import pytest
from numpy.testing import assert_allclose
from oracles.trusses import bottom, pratt, simple_span, truss_of

from movload import influence_lines
from movload.rating.impact import by_loaded_length, loaded_lengths, railway

FOOT = 0.3048  # m
ROUNDED = 1e-12  # relative: a closed formula of a few operations on solved ordinates


def test_a_zero_inside_a_panel_from_printed_ordinates() -> None:
    """MATHalino, member DK on 6 x 3 m: 0, .2357, .4714, .7071, -.4714, -.2357, 0. READ.

    Zero at 10.8 m: 9 + 3 x .7071/1.1785. Printed to four digits, which leaves 3 x 5e-5 / 1.1785 = 1.3e-4 m.
    """
    printed = np.array([[0.0, 0.2357, 0.4714, 0.7071, -0.4714, -0.2357, 0.0]])
    assert_allclose(loaded_lengths(3.0 * np.arange(7.0), printed)[0], [10.8, 7.2], rtol=0.0, atol=1.3e-4)


def test_a_hanger_does_not_take_the_span() -> None:
    """Common practice, no source: a span of 98 ft used for a hanger gives 1.224 where 1.30 is due.

    50/(98 + 125) = 0.2242, half of a last digit; the hanger's two panels of a sixth of the span, 32.7 ft, reach the
    cap (50/157.7 = 0.317).
    """
    assert_allclose(1.0 + by_loaded_length(98.0 * FOOT), 1.224, rtol=0.0, atol=5e-4)
    truss = truss_of(pratt([98.0 / 6 * FOOT] * 6, [18.0 * FOOT] * 5), simple_span(6))
    lines = influence_lines(truss, bottom(6))
    lengths = loaded_lengths(lines.stations, lines["U1-L1"].ordinates[None])
    assert_allclose(lengths[0, 0] / FOOT, 98.0 / 3, rtol=ROUNDED)
    assert_allclose(1.0 + by_loaded_length(lengths)[0, 0], 1.30, rtol=ROUNDED)


VERTICAL = [  # L [ft], per cent
    (0.0, 40.0), (20.0, 39.25), (40.0, 37.0), (60.0, 33.25), (80.0, 28.0),
    (85.0, 16.0 + 600.0 / 55.0), (90.0, 26.0), (130.0, 22.0), (180.0, 20.0), (330.0, 18.0),
]  # fmt: skip


@pytest.mark.parametrize(("length", "per_cent"), VERTICAL)
@pytest.mark.parametrize(("spacing", "rocking"), [(5.0, 20.0), (6.25, 16.0), (16.0, 6.25), (20.0, 5.0)])
def test_railway_impact_by_hand(length: float, per_cent: float, spacing: float, rocking: float) -> None:
    """AREMA ch. 15, FROM MEMORY. E.g. 60 ft: 40 - 3 x 3600/1600 = 33.25; 130 ft: 16 + 600/100 = 22."""
    found = railway(length * FOOT, spacing=spacing * FOOT)
    assert_allclose(100.0 * found, per_cent + rocking, rtol=ROUNDED)


def test_railway_impact_is_continuous_at_80_ft() -> None:
    """40 - 3 x 6400/1600 = 28 = 16 + 600/50: from memory, and the meeting of both halves speaks for the memory.

    A millionth of a foot to either side moves it by less than its slope, 0.30 % a foot.
    """
    below, above = railway(FOOT * np.array([80.0 - 1e-6, 80.0 + 1e-6]), spacing=16.0 * FOOT)
    assert_allclose(100.0 * np.array([below, above]), 28.0 + 6.25, rtol=0.0, atol=0.31e-6)
