"""A square with both diagonals: the smallest truss that statics alone cannot solve.

"Indeterminate square truss", a teaching note without author or date. READ.

A (0, 0) pinned, B (0, L), C (L, L), D (L, 0) on a level roller; six bars of one E A; P along x at C.
"""

from __future__ import annotations

import math

from numpy.testing import assert_allclose

from movload import Member, Support, Truss, TrussState, state_under

P = 1000.0  # N


def loaded(side: float, area: float) -> TrussState:
    """Return the source's truss under its load."""
    joints = {"A": (0.0, 0.0), "B": (0.0, side), "C": (side, side), "D": (side, 0.0)}
    bars = ("AB", "BC", "CD", "DA", "AC", "BD")
    truss = Truss(joints, [Member(bar[0], bar[1], area, 2e11) for bar in bars], [Support("A"), Support("D", 0)])
    assert truss.redundancy == 1
    return state_under(truss, {"C": (P, 0.0)})


def test_redundant_bar_as_printed() -> None:
    """The redundant bar BD = -0.56 P. READ. Half of the last printed digit."""
    assert_allclose(loaded(3.0, 1e-3).forces["B-D"] / P, -0.56, rtol=0.0, atol=0.005)


def test_all_bars() -> None:
    """All six bars, recomputed by least work. Half of the last digit; the redundant bar in closed form to 1e-12.

    Without BD: AC = sqrt 2 P, CD = -P. BD = 1 gives -1/sqrt 2 in the sides and 1 in AC. So
    BD = -(2 + 1/sqrt 2) / (2 + 2 sqrt 2) P; the denominator is the source's 4.83. Neither the bars' stiffness, the
    same in all, nor the side may matter.
    """
    printed = {"A-B": 0.39645, "B-C": 0.39645, "D-A": 0.39645, "C-D": -0.60355, "A-C": 0.85355, "B-D": -0.56066}
    for side, area in ((3.0, 1e-3), (11.7, 4e-2)):
        forces = loaded(side, area).forces
        for bar, value in printed.items():
            assert_allclose(forces[bar] / P, value, rtol=0.0, atol=5e-6, err_msg=bar)
        exact = -(2.0 + 1.0 / math.sqrt(2.0)) / (2.0 + 2.0 * math.sqrt(2.0))
        assert_allclose(forces["B-D"] / P, exact, rtol=1e-12)
