"""Influence lines of a Pratt truss, bottom loaded.

MATHalino, "Influence lines for trusses" (web page). READ.

The truss: six panels of 3 m, 3 m deep, diagonals falling toward midspan, joints A ... on a lower row and H ... above;
in the source's labels D is (9, 0), E (12, 0), J (9, 3) and K (12, 3). Here they are L3, L4, U3 and U4.
"""

from __future__ import annotations

import numpy as np
import pytest
from numpy.testing import assert_allclose
from oracles.trusses import bottom, pratt, simple_span, truss_of

from movload import InfluenceLines, influence_lines


@pytest.fixture(scope="module")
def lines() -> InfluenceLines:
    """Lines of the source's truss."""
    return influence_lines(truss_of(pratt([3.0] * 6, [3.0] * 5), simple_span(6)), bottom(6))


@pytest.mark.parametrize(
    ("bar", "printed"),
    [
        ("U3-U4", [0.0, -0.5, -1.0, -1.5, -1.0, -0.5, 0.0]),
        ("L3-L4", [0.0, 1 / 3, 2 / 3, 1.0, 4 / 3, 2 / 3, 0.0]),
        ("L3-U4", [0.0, 0.2357, 0.4714, 0.7071, -0.4714, -0.2357, 0.0]),
    ],
)
def test_ordinates_of_jk_de_and_dk(lines: InfluenceLines, bar: str, printed: list[float]) -> None:
    """Bars JK, DE and DK at x = 0, 3 ... 18 m. READ.

    JK = -M(D)/h, DE = M(K)/h, DK = -+ sqrt(2) V in panel 9-12. Half of the last printed digit, 5e-5; the fractions
    are exact and asked for to 1e-12.
    """
    exact = 1e-12 if bar != "L3-U4" else 5e-5
    assert_allclose(lines[bar].ordinates, printed, rtol=0.0, atol=exact)


def test_zero_crossing_of_dk(lines: InfluenceLines) -> None:
    """DK changes sign inside panel 9-12, at x = 10.8 m = 9 + 3 (0.7071)/(0.7071 + 0.4714). DERIVED."""
    # an ordinate of 1 that is exact to 1e-14 moves the crossing by 1e-14 of a panel at most
    assert_allclose(lines["L3-U4"].at(10.8), 0.0, rtol=0.0, atol=1e-13)
    assert np.sign(lines["L3-U4"].at(np.array([10.7, 10.9]))).tolist() == [1.0, -1.0]
