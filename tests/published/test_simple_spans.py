"""HS20-44 on simple spans, found again as chord forces and reactions of trusses.

AASHTO, *Standard Specifications for Highway Bridges*, 17th ed., Appendix A: maximum moments and end shears of one
lane of HS20-44, without impact. FROM MEMORY, the table not read again; every value was recomputed by the closed
formulas below. Axles 8, 32, 32 kip, 14 ft apart (the rear spacing at its least, which is the worst here).

Two identities turn a beam table into a truss test. A chord force is the beam's moment at the opposite panel point
divided by the depth; and the moment line at a panel point is the same triangle with stringers as without. So the
beam's *absolute* maximum moment appears in a truss with a panel point where that maximum stands. An end reaction is
the end shear.
"""

from __future__ import annotations

import pytest
from numpy.testing import assert_allclose
from oracles.trusses import bottom, pratt, simple_span, truss_of

from movload import InfluenceLines, Peak, Vehicle, influence_lines, sweep

HS20 = Vehicle("HS20-44, axles from memory", [8.0, 32.0, 32.0], [14.0, 14.0])
DEPTH = 7.0  # ft; drops out

# Span, moment [kip ft], end shear [kip], and how far from midspan the absolute maximum stands [ft]: under the middle
# axle, 7/3 ft off, with all three axles on; 3.5 ft off with the two heavy ones alone; at midspan with one.
TABLE = [
    (10.0, 80.0, 32.0, 0.0),
    (20.0, 160.0, 41.6, 0.0),
    (30.0, 282.1, 49.6, 3.5),
    (35.0, 361.2, 52.8, 7 / 3),
    (40.0, 449.8, 55.2, 7 / 3),
    (50.0, 627.9, 58.5, 7 / 3),
    (60.0, 806.5, 60.8, 7 / 3),
    (80.0, 1164.9, 63.6, 7 / 3),
    (100.0, 1524.0, 65.3, 7 / 3),
    (120.0, 1883.3, 66.4, 7 / 3),
]
# Recalled values that contradict statics by a little more than half of their last digit: 627.84, 1523.92 and 58.56.
ROUGH = {(50.0, "moment"): 0.1, (100.0, "moment"): 0.1, (50.0, "shear"): 0.1}


def spanning(span: float, off: float) -> InfluenceLines:
    """Return a Pratt of four panels with its middle panel point ``off`` [ft] left of midspan."""
    panels = [span / 4, span / 4 - off, span / 4 + off, span / 4]
    return influence_lines(truss_of(pratt(panels, [DEPTH] * 3), simple_span(4)), bottom(4))


def moment_peak(span: float, off: float) -> Peak:
    """Return the least force of the chord opposite the middle panel point."""
    return sweep(spanning(span, off), HS20)["U1-U2"].lowest


@pytest.mark.parametrize(("span", "moment", "off"), [(span, moment, off) for span, moment, _, off in TABLE])
def test_absolute_maximum_moments(span: float, moment: float, off: float) -> None:
    """Appendix A, moments. FROM MEMORY. Half of the last digit, or a whole one where ROUGH names the value."""
    allowed = ROUGH.get((span, "moment"), 0.05)
    assert_allclose(-moment_peak(span, off).value * DEPTH, moment, rtol=0.0, atol=allowed)


@pytest.mark.parametrize("span", [span for span, _, _, off in TABLE if off == 7 / 3])
def test_absolute_maximum_moments_in_closed_form(span: float) -> None:
    """M = 72 (L/2 - 7/3)^2 / L - 8 x 14, the middle axle at L/2 - 7/3 (100 ft: 1523.92 kip ft). To 1e-12."""
    peak = moment_peak(span, 7 / 3)
    assert_allclose(-peak.value * DEPTH, 72.0 * (span / 2 - 7 / 3) ** 2 / span - 8.0 * 14.0, rtol=1e-12)
    assert (peak.axle, peak.station) == (1, 2)
    assert peak.heading == -1  # the light axle on the shorter side


def test_100_ft_by_its_panels() -> None:
    """100 ft in panels of 25, 22.667, 27.333, 25 ft: 1523.92 kip ft; at midspan only 1520. Half a last digit each."""
    assert_allclose(-moment_peak(100.0, 7 / 3).value * DEPTH, 1523.92, rtol=0.0, atol=0.005)
    assert_allclose(-moment_peak(100.0, 0.0).value * DEPTH, 1520.0, rtol=0.0, atol=0.5)


@pytest.mark.parametrize("span", [40.0, 60.0, 100.0])
def test_no_other_panel_point_gives_more(span: float) -> None:
    """The absolute maximum is one: a panel point half a foot to either side answers with less."""
    best = moment_peak(span, 7 / 3).value
    assert moment_peak(span, 7 / 3 + 0.5).value > best
    assert moment_peak(span, 7 / 3 - 0.5).value > best


@pytest.mark.parametrize(("span", "shear"), [(span, shear) for span, _, shear, _ in TABLE])
def test_end_shears(span: float, shear: float) -> None:
    """Appendix A, end shears, as reaction peaks at both ends. FROM MEMORY. Half of the last digit (see ROUGH)."""
    peaks = sweep(spanning(span, 0.0), HS20)
    allowed = ROUGH.get((span, "shear"), 0.05) + 1e-9
    for reaction in ("L0 y", "L4 normal"):
        assert_allclose(peaks[reaction].highest.value, shear, rtol=0.0, atol=allowed)
    if span > 28.0:
        assert_allclose(peaks["L0 y"].highest.value, 72.0 - 672.0 / span, rtol=1e-12)
