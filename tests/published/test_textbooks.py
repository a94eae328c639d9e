"""Two examples recalled from a textbook of structural analysis.

R. C. Hibbeler, *Structural Analysis*, 8th ed. FROM MEMORY: the pages have not been read again; the numbers were
computed anew by statics.
"""

from __future__ import annotations

import math

import pytest
from numpy.testing import assert_allclose
from oracles.trusses import bottom, pratt, simple_span, truss_of

from movload import Member, Support, Truss, influence_lines, state_under


def test_diagonals_of_a_pratt_of_four_panels() -> None:
    """Influence lines (ch. 6). FROM MEMORY. Four panels of 6 m, 6 m deep, load on the bottom chord.

    A diagonal carries sqrt(2) times its panel's shear, so U1-L2 has -0.3536, +0.7071, +0.3536 at 6, 12 and 18 m, and
    a diagonal falling the other way the opposite. Half of the last digit; the closed formula to 1e-12.
    """
    lines = influence_lines(truss_of(pratt([6.0] * 4, [6.0] * 3), simple_span(4)), bottom(4))
    assert_allclose(lines["U1-L2"].ordinates, [0.0, -0.3536, 0.7071, 0.3536, 0.0], rtol=0.0, atol=5e-5)
    exact = math.sqrt(2.0) / 4.0
    assert_allclose(lines["U1-L2"].ordinates, [0.0, -exact, 2 * exact, exact, 0.0], rtol=0.0, atol=1e-12)
    # its mirror image, L2-U3, falls the other way: over the same panel 6-12 m a rising diagonal feels -V
    assert_allclose(lines["L2-U3"].ordinates, [0.0, exact, 2 * exact, -exact, 0.0], rtol=0.0, atol=1e-12)


@pytest.mark.parametrize(
    ("what", "printed"),
    [
        ("J1-J2", 37.5),
        ("J2-J3", -22.5),
        ("J1-J3", -22.5),
        ("J1 x", -7.5),
        ("J1 y", -22.5),
        ("J3 normal", 31.8),
        ("u2", 352.5),
        ("v2", -157.5),
        ("slide of 3", -127.3),
    ],
)
def test_roller_on_an_inclined_bed(what: str, printed: float) -> None:
    """Inclined roller (ch. 14). FROM MEMORY; recomputed exactly.

    Joints 1 (0, 0) pinned, 2 (4, 3), 3 (4, 0) m on a bed that rises at 45 degrees, its reaction along (-1, +1)/sqrt 2;
    +30 kN along x at joint 2. Moments about joint 1: R 4/sqrt 2 = 90, R = 31.8 kN. Forces in kN, movements times A E,
    half of the last digit each.
    """
    joints = {"J1": (0.0, 0.0), "J2": (4.0, 3.0), "J3": (4.0, 0.0)}
    members = [Member(start, end, 1.0, 1.0) for start, end in (("J1", "J2"), ("J2", "J3"), ("J1", "J3"))]
    state = state_under(Truss(joints, members, [Support("J1"), Support("J3", 45)]), {"J2": (30.0, 0.0)})
    (u2, v2), (u3, v3) = state.displacements["J2"], state.displacements["J3"]
    answers = {**state.forces, **state.reactions, "u2": u2, "v2": v2, "slide of 3": (u3 + v3) / math.sqrt(2.0)}
    assert_allclose(answers[what], printed, rtol=0.0, atol=0.05)
    assert_allclose(v3, u3, rtol=1e-12)  # it stays on its bed


def test_roller_on_an_inclined_bed_in_closed_form() -> None:
    """The same without rounding: R = 22.5 sqrt 2 kN; u2 = 352.5, v2 = -157.5, slide = -90 sqrt 2, over A E."""
    members = [Member("A", "B", 2e-3, 2e11), Member("B", "C", 2e-3, 2e11), Member("A", "C", 2e-3, 2e11)]
    joints = {"A": (0.0, 0.0), "B": (4.0, 3.0), "C": (4.0, 0.0)}
    state = state_under(Truss(joints, members, [Support("A"), Support("C", 45)]), {"B": (30e3, 0.0)})
    assert_allclose(state.reactions["C normal"], 22.5e3 * math.sqrt(2.0), rtol=1e-12)
    moved = 4e8 * state.displacements["B"][0], 4e8 * state.displacements["B"][1]
    assert_allclose(moved, (352.5e3, -157.5e3), rtol=1e-12)
    assert_allclose(4e8 * sum(state.displacements["C"]) / math.sqrt(2.0), -90e3 * math.sqrt(2.0), rtol=1e-12)
