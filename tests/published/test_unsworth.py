"""Influence lines of a truss whose top chord is not level.

J. F. Unsworth, *Design of Modern Steel Railway Bridges*, CRC 2010, ch. 5, the curved-chord example. READ.

Six panels of 40 ft; heights 28 ft at U1 and 36 ft at U2, symmetrical. The source prints values of the first three
panels only, and the height of U3 (36 or 40 ft here) does not affect the bars of panels 1 and 2. Two of its values
contradict statics and are named MISPRINT below; what statics asks for is DERIVED by moments about the point where
the chords meet. A foot is used as the unit of length: ordinates of determinate forces do not know it.
"""

from __future__ import annotations

import math

import pytest
from numpy.testing import assert_allclose
from oracles.trusses import bottom, pratt, simple_span, truss_of

from movload import InfluenceLines, influence_lines

HALF_DIGIT = 5e-5  # of ordinates written to four decimals
HALF_PRINTED = 5e-3  # of what the source prints, two decimals


def curved(middle: float) -> InfluenceLines:
    """Return the lines with U3 at a height of ``middle`` [ft]."""
    depths = [28.0, 36.0, middle, 36.0, 28.0]
    return influence_lines(truss_of(pratt([40.0] * 6, depths), simple_span(6)), bottom(6))


@pytest.mark.parametrize(
    ("bar", "middle", "expected"),
    [
        ("U1-U2", 36.0, [-0.7554, -1.5108, -1.1331, -0.7554, -0.3777]),
        ("U1-L2", 36.0, [-0.5490, 0.6458, 0.4844, 0.3229, 0.1615]),
        ("U2-L2", 36.0, [0.3148, 0.6296, -0.2778, -0.1852, -0.0926]),
        ("L1-L2", 36.0, [1.1905, 0.9524, 0.7143, 0.4762, 0.2381]),
        ("L2-L3", 36.0, [0.7407, 1.4815, 1.1111, 0.7407, 0.3704]),
        ("L0-U1", 36.0, [-1.4532, -1.1625, -0.8719, -0.5813, -0.2906]),
        ("U2-L3", 36.0, [-0.2491, -0.4983, 0.7474, 0.4983, 0.2491]),
        ("U2-L3", 40.0, [-0.3239, -0.6478, 0.5232, 0.3488, 0.1744]),
        ("U2-U3", 40.0, [-0.5025, -1.0050, -1.5075, -1.0050, -0.5025]),
        ("U3-L3", 40.0, [0.1, 0.2, 0.3, 0.2, 0.1]),
    ],
)
def test_ordinates(bar: str, middle: float, expected: list[float]) -> None:
    """Ordinates at L1 ... L5, DERIVED (U1-U2 agrees with the source's 1.51). Half of the last digit.

    U1-L2 at L2 reads 0.6460 when its arm is rounded to 103.2 ft first; here it is not.
    """
    assert_allclose(curved(middle)[bar].ordinates[1:-1], expected, rtol=0.0, atol=HALF_DIGIT)


def test_top_chord_as_printed() -> None:
    """U1-U2: the source prints 1.51 compression with the load at L2. READ. Half of the last printed digit."""
    assert_allclose(curved(36.0)["U1-U2"].ordinates[2], -1.51, rtol=0.0, atol=HALF_PRINTED)


def test_diagonal_u1_l2_is_misprinted() -> None:
    """U1-L2: the source prints -0.48 and +0.56. MISPRINT: its lever arm is 118.8 ft, statics asks for 103.2 ft.

    Chord U1-U2 meets the bottom chord 100 ft left of L0, 180 ft from L2; the diagonal falls by atan(28/40), so its
    arm about that point is 180 sin(atan(28/40)) = 103.2 ft and the ordinate at L2 is (160/240) 100/103.2.
    """
    arm = 180.0 * math.sin(math.atan2(28.0, 40.0))
    left, right = curved(36.0)["U1-L2"].ordinates[1:3]
    assert_allclose(arm, 103.2, rtol=0.0, atol=0.05)
    assert_allclose(right, 160.0 / 240.0 * 100.0 / arm, rtol=1e-12)
    assert_allclose(left, -40.0 / 240.0 * 340.0 / arm, rtol=1e-12)
    # with the arm of 118.8 ft the source's figures come out, so that is its slip
    assert_allclose([left * arm / 118.8, right * arm / 118.8], [-0.48, 0.56], rtol=0.0, atol=HALF_PRINTED)
    assert abs(left + 0.48) > 10 * HALF_PRINTED
    assert abs(right - 0.56) > 10 * HALF_PRINTED


def test_post_u2_l2_is_misprinted() -> None:
    """U2-L2: the source prints +1.42 and -0.63. MISPRINT: divided by 80 ft where statics asks for 180 ft.

    The cut through U1-U2, U2-L2 and L2-L3 leaves L2 on its left. Moments about the point where U1-U2 meets the bottom
    chord, 180 ft left of the post and 100 ft left of L0: a load at L2 is balanced from the right, (80/240) 340/180;
    one at L3 from the left, -(120/240) 100/180.
    """
    at_l2, at_l3 = curved(36.0)["U2-L2"].ordinates[2:4]
    assert_allclose(at_l2, 80.0 / 240.0 * 340.0 / 180.0, rtol=1e-12)
    assert_allclose(at_l3, -120.0 / 240.0 * 100.0 / 180.0, rtol=1e-12)
    assert_allclose([at_l2 * 180.0 / 80.0, at_l3 * 180.0 / 80.0], [1.42, -0.63], rtol=0.0, atol=HALF_PRINTED + 1e-9)
    assert abs(at_l2 - 1.42) > 10 * HALF_PRINTED
    assert abs(at_l3 + 0.63) > 10 * HALF_PRINTED


def test_the_height_of_the_middle_post_is_not_felt_in_panels_1_and_2() -> None:
    """The source leaves U3 open. Bars of panels 1 and 2 are found without it: equal to round-off."""
    one, other = curved(36.0), curved(40.0)
    for bar in ("L0-U1", "L0-L1", "L1-L2", "U1-U2", "U1-L1", "U1-L2"):
        assert_allclose(one[bar].ordinates, other[bar].ordinates, rtol=0.0, atol=1e-13)
