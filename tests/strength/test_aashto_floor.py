"""Stringers and floorbeams by AASHTO LRFD against hand figures and the standard's own form of the same equations.

The standard's equations are from memory (see the module). kip and inch, as in the standard.
"""

from __future__ import annotations

import math
from dataclasses import replace
from typing import Final

import pytest
from numpy.testing import assert_allclose

from movload.errors import InputError, MissingDataError
from movload.strength.aashto_floor import Beam, Lateral, Web, bending, elastic_moment, shear
from movload.units import unit_factor

KIP, KSI, INCH = unit_factor("kip", "force"), unit_factor("ksi", "stress"), unit_factor("in", "section")
FOOT: Final = 12 * INCH
KIP_INCH: Final = KIP * INCH
PHI: Final = {"moment": 1.0, "hogging": 0.9, "shear": 0.95}
HAND: Final = 1e-12  # relative: the hand formulas carry all digits
BRACES: Final = Lateral(unbraced=10 * FOOT, i_y=40.1 * INCH**4, j=1.24 * INCH**4, c_w=3040 * INCH**6)
STRINGER: Final = Beam(
    s_c=88.9 * INCH**3, s_t=88.9 * INCH**3, z=101 * INCH**3, flange_ratio=6.57, web_ratio=45.2, fy=36 * KSI,
    modulus=29000 * KSI, lateral=None,
)  # fmt: skip
PLATE: Final = Web(depth=60 * INCH, thickness=0.5 * INCH, fy=36 * KSI, modulus=29000 * KSI, stiffeners=None)


def step(beam: Beam, symbol: str) -> float:
    """Return a named step of a beam's bending."""
    return next(step.value for step in bending(beam, PHI).steps if step.symbol == symbol)


def test_a_compact_beam_held_all_along_reaches_its_plastic_moment() -> None:
    """36 x 101 = 3636 kip in; 0.9 of it hogging."""
    found = bending(STRINGER, PHI)
    assert_allclose(found.value, 3636 * KIP_INCH, rtol=HAND)
    assert found.steps[-1].value == found.value
    assert found.steps[-1].unit == "N m"
    assert_allclose(bending(STRINGER, PHI, "hogging").value, 0.9 * 3636 * KIP_INCH, rtol=HAND)


def test_without_a_plastic_modulus_the_lesser_flange_yields() -> None:
    """A corroded tension flange: 36 x 70 = 2520 kip in."""
    found = bending(replace(STRINGER, z=None, s_t=70 * INCH**3), PHI)
    assert_allclose(found.value, 2520 * KIP_INCH, rtol=HAND)


def test_a_noncompact_web_lies_between_plastic_and_yield_moment() -> None:
    """A6.2.2-4 written out with a web half-way between its limits."""
    root, plastic, yielding = math.sqrt(29000 / 36), 36 * 101, 36 * 88.9
    compact = root / (0.54 * plastic / yielding - 0.09) ** 2
    between = replace(STRINGER, web_ratio=0.5 * (compact + 5.7 * root))
    share = (1 - (1 - yielding / plastic) * 0.5) * plastic / yielding
    assert_allclose(bending(between, PHI).value, share * yielding * KIP_INCH, rtol=HAND)


def test_a_wide_flange_buckles_before_the_section_yields() -> None:
    """A6.3.2-2 half-way between 0.38 sqrt(E/Fy) and 0.95 sqrt(E kc/(0.7 Fy)), kc = 4/sqrt(45.2) = 0.595."""
    root, edge = math.sqrt(29000 / 36), 4 / math.sqrt(45.2)
    stocky, slender = 0.38 * root, 0.95 * root * math.sqrt(edge / 0.7)
    found = bending(replace(STRINGER, flange_ratio=0.5 * (stocky + slender)), PHI)
    assert_allclose(found.value, 0.5 * (3636 + 0.7 * 36 * 88.9) * KIP_INCH, rtol=HAND)
    assert "flange buckling" in found.steps[-1].equation
    with pytest.raises(InputError, match=r"^flange_ratio: b/2t must be 24\.9 at most \(AASHTO LRFD A6\.3\.2\), got 30"):
        bending(replace(STRINGER, flange_ratio=30.0), PHI)


def test_lateral_torsional_buckling_is_the_standards_own() -> None:
    """A6.3.3-8 and -5 with rt^2 = sqrt(Iy Cw)/Sxc and h from Cw = Iy h^2/4; E/G is 1/0.385 here, 0.078 there."""
    residual, height = 0.7 * 36, 2 * math.sqrt(3040 / 40.1)
    radius = math.sqrt(math.sqrt(40.1 * 3040) / 88.9)
    twisting = 1.24 / (88.9 * height)
    slender = 30 * 12 / radius
    stress = math.pi**2 * 29000 / slender**2 * math.sqrt(1 + 0.078 * twisting * slender**2)
    assert_allclose(
        elastic_moment(replace(BRACES, unbraced=30 * FOOT), 29000 * KSI), stress * 88.9 * KIP_INCH, rtol=2e-3
    )  # 4 0.385 / pi^2 / 2 = 0.07802
    inner = math.sqrt(1 + math.sqrt(1 + 6.76 * (residual / 29000 / twisting) ** 2))
    longest = 1.95 * radius * 29000 / residual * math.sqrt(twisting) * inner
    beam = replace(STRINGER, lateral=BRACES)
    assert_allclose(step(beam, "Lr"), longest * INCH, rtol=3e-3)  # 1.95 and 6.76 are rounded to three digits
    assert_allclose(step(beam, "Lp"), radius * math.sqrt(29000 / 36) * INCH, rtol=HAND)


@pytest.mark.parametrize("uneven", [1.0, 1.3])
def test_a_braced_length_between_the_limits(uneven: float) -> None:
    """A6.3.3-2: Cb (1 - (1 - 0.7 My/Mp) (Lb - Lp)/(Lr - Lp)) Mp, at most Mp."""
    beam = replace(STRINGER, lateral=replace(BRACES, c_b=uneven))
    short, long = step(beam, "Lp"), step(beam, "Lr")
    assert short < 10 * FOOT < long
    along = (10 * FOOT - short) / (long - short)
    expected = uneven * (1 - (1 - 0.7 * 36 * 88.9 / 3636) * along) * 3636
    assert_allclose(bending(beam, PHI).value, min(expected, 3636) * KIP_INCH, rtol=HAND)


def test_elastic_buckling_begins_where_the_straight_line_ends() -> None:
    longest = step(replace(STRINGER, lateral=BRACES), "Lr")
    beyond = bending(replace(STRINGER, lateral=replace(BRACES, unbraced=1.5 * longest)), PHI)
    at_limit = bending(replace(STRINGER, lateral=replace(BRACES, unbraced=longest)), PHI)
    assert_allclose(at_limit.value, 0.7 * 36 * 88.9 * KIP_INCH, rtol=1e-9)  # Lr is a root, found from squares
    expected = elastic_moment(replace(BRACES, unbraced=1.5 * longest), 29000 * KSI)
    assert_allclose(beyond.value, expected, rtol=HAND)
    assert "lateral-torsional buckling" in beyond.steps[-1].equation


def test_closely_braced_beams_lose_nothing() -> None:
    beam = replace(STRINGER, lateral=replace(BRACES, unbraced=2 * FOOT))
    assert bending(beam, PHI).value == bending(STRINGER, PHI).value
    assert step(beam, "Mn sideways") == step(beam, "Mp")  # the straight line is cut at the full section


def test_an_i_by_its_compression_flange() -> None:
    """Equal flanges: Iy = 2 Iyc and Cw = Iy h^2/4."""
    flange = Lateral.of_flange(10 * FOOT, 20.05 * INCH**4, 1.24 * INCH**4, 17.43 * INCH)
    assert_allclose(flange.i_y, 40.1 * INCH**4, rtol=HAND)
    assert_allclose(flange.c_w, 40.1 * 17.43**2 / 4 * INCH**6, rtol=HAND)


@pytest.mark.parametrize(
    ("depths", "stiffeners", "share"),
    [
        (60.0, None, 1.0),
        (80.0, None, 1.12 / (80 * math.sqrt(36 / 29000 / 5))),
        (120.0, None, 1.57 / (120 * math.sqrt(36 / 29000 / 5)) ** 2),
        (120.0, 60.0, 1.12 / (120 * math.sqrt(36 / 29000 / 10))),
        (120.0, 240.0, 1.57 / (120 * math.sqrt(36 / 29000 / 5)) ** 2),
    ],
)
def test_shear_by_web_slenderness(depths: float, stiffeners: float | None, share: float) -> None:
    """D/tw as named at D = 60 in; k = 5, 10 with stiffeners D apart, 5 with stiffeners beyond 3 D."""
    spacing = None if stiffeners is None else stiffeners * INCH
    found = shear(replace(PLATE, thickness=60 / depths * INCH, stiffeners=spacing), PHI)
    assert_allclose(found.value, 0.95 * share * 0.58 * 36 * 60 * (60 / depths) * KIP, rtol=HAND)
    assert ("web buckling" in found.steps[-1].equation) == (share < 1)


@pytest.mark.parametrize(
    ("change", "message"),
    [
        (
            {"web_ratio": 170.0},
            r"^web_ratio: 2 Dc/tw must be 161\.8 at most .*slender webs are not covered, got 170\.0",
        ),
        ({"z": 50 * INCH**3}, r"^z: a plastic modulus is at least the elastic one"),
        ({"s_c": 0.0}, r"^s_c: must be finite and above 0, got 0"),
    ],
)
def test_refuses_a_beam_that_cannot_be(change: dict[str, float], message: str) -> None:
    with pytest.raises(InputError, match=message):
        replace(STRINGER, **change)


def test_refuses_what_the_rules_do_not_cover() -> None:
    with pytest.raises(InputError, match=r"^fy: must be 70 ksi \(482\.6 MPa\) at most"):
        bending(replace(STRINGER, fy=100 * KSI), PHI)
    with pytest.raises(InputError, match=r"^c_b: Cb must be 1 to 2\.3 .*got 2\.5"):
        replace(BRACES, c_b=2.5)
    with pytest.raises(InputError, match=r"^unbraced: must be finite and above 0, got 0"):
        replace(BRACES, unbraced=0.0)
    with pytest.raises(InputError, match=r"^thickness: must be at most half the depth"):
        replace(PLATE, thickness=31 * INCH)


def test_asks_for_the_factor_of_a_sense() -> None:
    with pytest.raises(MissingDataError, match=r"^resistance\.hogging: the level gives no"):
        bending(STRINGER, {"moment": 1.0}, "hogging")
    with pytest.raises(MissingDataError, match=r"^resistance\.shear: the level gives no"):
        shear(PLATE, {"moment": 1.0})
