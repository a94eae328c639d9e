"""Bowed and eccentric columns as made: the secant formula by each standard, and a bar integrated for itself.

S. P. Timoshenko, J. M. Gere, *Theory of Elastic Stability*, 2nd ed., 1.3 (eccentric, secant) and 1.12 (bowed): the
middle of a bar is bent by P e sec(pi/2 sqrt(P/Pe)) and by P a/(1 - P/Pe). FROM MEMORY; found again here from the beam
equation. What of Pe each standard takes: 0.75 (AASHTO LRFD 4.5.3.2.2b), the column's own safety (Standard
Specifications 10.36), all of it (10.54.2). FROM MEMORY. Bars are invented.
"""

from __future__ import annotations

import math
from typing import TYPE_CHECKING, Final

import numpy as np
import pytest
from numpy.testing import assert_allclose

from movload.bridge.loss import AsFound, Loss
from movload.bridge.made import Bent, Held, Made
from movload.bridge.material import Material
from movload.bridge.section import Section
from movload.bridge.section_elements import Cut
from movload.bridge.section_piece import Piece
from movload.bridge.shapes import ISection
from movload.strength.parts import part_strength

if TYPE_CHECKING:
    from movload.strength.strength import Strength

HALVED: Final = 1e-9  # relative: the root is halved to the last digit; near Pe one digit of P moves the moment by more
MODULUS, FY = 200e9, 230e6  # Pa
LENGTH: Final = 4.0  # m
STEEL: Final = Material("steel", "steel", modulus=MODULUS, density=7850, source="invented", fy=FY, fu=410e6)
SECTION: Final = Section("post", (Piece(ISection(0.200, 0.180, 0.010, 0.014)),))
OURS: Final = SECTION.properties
PHI: Final = {"compression": 0.90, "moment": 0.95, "tension": 0.95, "fracture": 0.80}
MARGINS: Final = {"aashto_lrfd": 0.75, "mbe_allowable_stress": 0.90, "mbe_load_factor": 1.0}
INERTIA: Final = {"x": OURS.i_x, "y": OURS.i_y}
MODULI: Final = {"x": OURS.s_x, "y": min(OURS.s_y_left, OURS.s_y_right)}
HELD: Final = Held(unbraced_x=LENGTH, unbraced_y=LENGTH, k_x=1.0, k_y=1.0)


def strength(standard: str, *bent: Bent, losses: tuple[Loss, ...] = ()) -> Strength:
    """Return the post's strength in compression."""
    part = Made(section=AsFound(SECTION, losses), material=STEEL, held=HELD, bent=bent)
    return part_strength(part, "compression", standard, PHI, subject="post")


def euler(axis: str) -> float:
    """Return pi^2 E I/L^2 [N]."""
    return math.pi**2 * MODULUS * INERTIA[axis] / LENGTH**2


def used(standard: str, load: float, axial: float, bent: float) -> float:
    """Return what a load and its moments, over what each may be alone, use: 1 at the strength."""
    if standard != "aashto_lrfd":
        return load / axial + bent
    return max(load / axial / 2 + bent, load / axial + 8 / 9 * bent)


@pytest.mark.parametrize("axis", ["x", "y"])
@pytest.mark.parametrize("standard", MARGINS)
def test_an_eccentric_column_is_the_secant_formula(standard: str, axis: str) -> None:
    """P/Pr + P e sec(pi/2 sqrt(P/(margin Pe)))/(phi Fy S) = 1, 8/9 on the moment by LRFD, put back."""
    straight = strength(standard).value
    load = strength(standard, Bent(axis=axis, eccentricity=0.040)).value  # type: ignore[arg-type]  # "x" or "y"
    secant = 1 / math.cos(math.pi / 2 * math.sqrt(load / (MARGINS[standard] * euler(axis))))
    bent = load * 0.040 * secant / (0.95 * FY * MODULI[axis])
    assert_allclose(used(standard, load, straight, bent), 1.0, rtol=HALVED)
    assert secant > 1.02  # what the formula adds counts here
    assert 0.2 * straight < load < 0.75 * straight


@pytest.mark.parametrize("standard", MARGINS)
def test_a_column_bent_in_both_planes(standard: str) -> None:
    """Eccentric about x, bowed about y: each amplified by its own plane's load, both added."""
    straight = strength(standard).value
    load = strength(standard, Bent(axis="x", eccentricity=0.030), Bent(axis="y", bow=0.015)).value
    margin = MARGINS[standard]
    secant = 1 / math.cos(math.pi / 2 * math.sqrt(load / (margin * euler("x"))))
    bowed = load * 0.015 / (1 - load / (margin * euler("y")))
    bent = (load * 0.030 * secant / MODULI["x"] + bowed / MODULI["y"]) / (0.95 * FY)
    assert_allclose(used(standard, load, straight, bent), 1.0, rtol=HALVED)


@pytest.mark.parametrize("standard", MARGINS)
def test_a_typed_moment_beside_the_force(standard: str) -> None:
    """20 kN m about x as a chord loaded between its joints has: M Cm/(1 - P/(margin Pe)), Cm 1."""
    straight = strength(standard).value
    load = strength(standard, Bent(axis="x", moment=20e3)).value
    bent = 20e3 / (1 - load / (MARGINS[standard] * euler("x"))) / (0.95 * FY * MODULI["x"])
    assert_allclose(used(standard, load, straight, bent), 1.0, rtol=HALVED)
    assert load < straight


@pytest.mark.parametrize(("eccentricity", "bow"), [(0.040, 0.0), (0.0, 0.030), (0.020, 0.015)])
def test_the_middle_moment_is_a_bars_own(eccentricity: float, bow: float) -> None:
    """E I y'' = -P (y + e + a sin(pi x/L)) by finite differences at the load found: the same moment in the steps.

    Load factor, where nothing is taken off Pe. 600 parts: h^2 gives 1e-5 of relative error.
    """
    found = strength("mbe_load_factor", Bent(axis="y", eccentricity=eccentricity, bow=bow))
    (moment,) = [step.value for step in found.steps if step.symbol == "M1"]
    parts, load = 600, found.value
    step = LENGTH / parts
    first = eccentricity + bow * np.sin(math.pi * np.linspace(0, 1, parts + 1)[1:-1])
    second = (np.eye(parts - 1, k=1) + np.eye(parts - 1, k=-1) - 2 * np.eye(parts - 1)) / step**2
    added = np.linalg.solve(MODULUS * OURS.i_y * second + load * np.eye(parts - 1), -load * first)
    assert_allclose(moment, load * (first + added)[parts // 2 - 1], rtol=5e-5)


@pytest.mark.parametrize("standard", MARGINS)
def test_rust_at_the_middle_bends_more(standard: str) -> None:
    """S and I of the flanges, 10 of 14 mm thick at mid length, put back; rust at an end takes less."""
    bent = Bent(axis="x", eccentricity=0.040)
    middle, end = ((Loss(where, part="flange", amount=0.004),) for where in ("middle", "start end"))
    load = strength(standard, bent, losses=middle).value
    left = SECTION.with_cut("", Cut("flange", amount=0.004)).properties
    elastic = math.pi**2 * MODULUS * left.i_x / LENGTH**2
    secant = 1 / math.cos(math.pi / 2 * math.sqrt(load / (MARGINS[standard] * elastic)))
    moment = load * 0.040 * secant / (0.95 * FY * left.s_x)
    assert_allclose(used(standard, load, strength(standard, losses=middle).value, moment), 1.0, rtol=HALVED)
    assert load < strength(standard, bent, losses=end).value
