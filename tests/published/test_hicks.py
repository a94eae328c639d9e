"""Two Pratt trusses under a uniform load and under four wheels.

T. G. Hicks (ed.), *Handbook of Civil Engineering Calculations*, 2nd ed., McGraw-Hill 2007, pp. 1.70-1.75. READ.

The book measures from the right support, writes small letters for the bottom joints and capitals for the top ones,
and rounds csc to two decimals before multiplying. A kip is used as the unit of force and a foot as that of length:
determinate forces do not know the units.
"""

from __future__ import annotations

import itertools
import math
from typing import TYPE_CHECKING

import numpy as np
import pytest
from numpy.testing import assert_allclose
from oracles.trusses import bottom, pratt, simple_span, truss_of

from movload import InfluenceLines, Vehicle, influence_lines, sweep

if TYPE_CHECKING:
    from movload.statics.influence import InfluenceLine

CSC = math.hypot(20.0, 25.0) / 25.0  # 1.2806; the book prints 1.28
CSC_LONG = math.hypot(25.0, 30.0) / 30.0  # 1.3017; the book prints 1.30


def spanning(panels: int, length: float, depth: float) -> InfluenceLines:
    """Return the lines of a Pratt truss of equal panels."""
    truss = truss_of(pratt([length] * panels, [depth] * (panels - 1)), simple_span(panels))
    return influence_lines(truss, bottom(panels))


@pytest.fixture(scope="module")
def short() -> InfluenceLines:
    """P. 1.70: six panels of 20 ft, 25 ft deep."""
    return spanning(6, 20.0, 25.0)


@pytest.fixture(scope="module")
def long() -> InfluenceLines:
    """P. 1.72: eight panels of 25 ft, 30 ft deep."""
    return spanning(8, 25.0, 30.0)


def areas_by_sign(line: InfluenceLine) -> tuple[float, float]:
    """Return the area of a line above and below zero, cut exactly where it crosses."""
    above = below = 0.0
    for x1, x2, y1, y2 in zip(line.stations, line.stations[1:], line.ordinates, line.ordinates[1:], strict=False):
        crossings = [x1 - y1 * (x2 - x1) / (y2 - y1)] if y1 * y2 < 0 else []
        cuts = [x1, *crossings, x2]
        for left, right in itertools.pairwise(cuts):
            area = float((right - left) * line.at(0.5 * (left + right)))
            above, below = above + max(area, 0.0), below + min(area, 0.0)
    return above, below


def test_shear_in_the_third_panel(short: InfluenceLines) -> None:
    """P. 1.70, member Cd = U2-L3: panel shear V by distance s from the right support. READ.

    V = s/120 (s <= 60), 3 - s/24 (60 ... 80), s/120 - 1 (s >= 80); force = V csc. Closed formula: 1e-12.
    """
    s = np.linspace(0.0, 120.0, 241)
    shear = np.select([s <= 60.0, s <= 80.0], [s / 120.0, 3.0 - s / 24.0], s / 120.0 - 1.0)
    assert_allclose(short["U2-L3"].at(120.0 - s), CSC * shear, rtol=0.0, atol=1e-12)


def test_force_ordinates(short: InfluenceLines) -> None:
    """P. 1.70: force ordinates at 20 ... 100 ft, DERIVED from the book's V with csc unrounded; half a last digit."""
    expected = [0.0, -0.2134, -0.4269, 0.6403, 0.4269, 0.2134, 0.0]
    assert_allclose(short["U2-L3"].ordinates, expected, rtol=0.0, atol=5e-5)


def test_neutral_point(short: InfluenceLines) -> None:
    """P. 1.70: the neutral point stands at s = 72 ft, x = 48 ft. READ. A closed value: 1e-12."""
    assert_allclose(short["U2-L3"].at(48.0), 0.0, rtol=0.0, atol=1e-12)
    assert short["U2-L3"].at(47.9) < 0.0 < short["U2-L3"].at(48.1)


def test_uniform_load_over_each_sign(short: InfluenceLines) -> None:
    """P. 1.70: 2.3 kip/ft over each sign separately gives V = 41.4 kip and a force of +53.0 and -23.6 kip. READ.

    Half of the last printed digit, although the book multiplies by csc = 1.28: 53.02 and -23.56 are ours.
    """
    above, below = areas_by_sign(short["U2-L3"])
    assert_allclose(2.3 * above / CSC, 41.4, rtol=1e-12)
    assert_allclose(2.3 * above, 53.0, rtol=0.0, atol=0.05)
    assert_allclose(2.3 * below, -23.6, rtol=0.0, atol=0.05)


def test_uniform_load_over_the_whole_length_is_not_the_worst(short: InfluenceLines) -> None:
    """The same load everywhere gives the sum, 29.5 kip: about half of the true tension and no compression at all."""
    above, below = areas_by_sign(short["U2-L3"])
    everywhere = 2.3 * float(np.trapezoid(short["U2-L3"].ordinates, short["U2-L3"].stations))
    assert_allclose(everywhere, 2.3 * (above + below), rtol=1e-12)
    assert everywhere < 0.6 * 2.3 * above


def test_ordinates_of_de(long: InfluenceLines) -> None:
    """P. 1.72, member De = U3-L4. Geometry READ, ordinates DERIVED: -+ k/8 csc. Half of the last digit."""
    expected = [0.0, -0.1627, -0.3254, -0.4881, 0.6509, 0.4881, 0.3254, 0.1627, 0.0]
    assert_allclose(long["U3-L4"].ordinates, expected, rtol=0.0, atol=5e-5)


WHEELS = ([5.0, 12.0, 18.0, 15.0], [6.0, 10.0, 6.0])


@pytest.mark.parametrize(
    ("heading", "wheel", "shear"),
    [
        (-1, 2, 21.9),  # from right to left, wheel 2 at e
        (1, 4, 23.0),  # from left to right, wheel 4 at e: this governs
    ],
)
def test_four_wheels_each_way(long: InfluenceLines, heading: int, wheel: int, shear: float) -> None:
    """Pp. 1.72-73: wheels of 5, 12, 18, 15 kip at 0, 6, 16, 22 ft; V in panel de each way and the wheel at e. READ.

    V = force / csc. Half of the last printed digit: ours are 21.90 and exactly 22.95, which the book rounds up.
    """
    peak = sweep(long, Vehicle("four wheels", *WHEELS, headings=(heading,)))["U3-L4"].highest
    assert (peak.heading, peak.axle + 1, peak.station) == (heading, wheel, 4)
    assert_allclose(peak.placement.x[wheel - 1], 100.0, rtol=1e-12)
    assert_allclose(peak.value / CSC_LONG, shear, rtol=0.0, atol=0.05 + 1e-9)


def test_four_wheels_both_ways(long: InfluenceLines) -> None:
    """P. 1.73: De = 1.30 x 23.0 = 29.9 kip tension, going left to right. READ. The least, -21.74 kip, is DERIVED.

    Half of the last digit each: ours is 22.95 x 1.3017 = 29.87.
    """
    peaks = sweep(long, Vehicle("four wheels", *WHEELS))["U3-L4"]
    assert (peaks.highest.heading, peaks.highest.axle) == (1, 3)
    assert_allclose(peaks.highest.value, 29.9, rtol=0.0, atol=0.05)
    assert_allclose(peaks.lowest.value, -21.74, rtol=0.0, atol=0.005)
