"""Allowable stress and load factor strengths (MBE 6B) against hand figures.

The standard's equations are from memory (see the module); bars are invented. kip and inch, as in the standard.
"""

from __future__ import annotations

import math
from dataclasses import replace
from typing import Final

import pytest
from numpy.testing import assert_allclose

from movload.errors import InputError, MissingDataError
from movload.strength import aashto_lrfd
from movload.strength.aashto_floor import Beam, Lateral, Web, elastic_moment
from movload.strength.aashto_lrfd import Tie
from movload.strength.beam_column import Column, Torsion
from movload.strength.mbe_stress import bending, compression, shear, tension
from movload.units import unit_factor

KIP, KSI, INCH = unit_factor("kip", "force"), unit_factor("ksi", "stress"), unit_factor("in", "section")
INVENTORY: Final = {"tension": 0.55, "fracture": 0.50, "compression": 1 / 2.12, "moment": 0.55, "shear": 0.33 / 0.58}
LOAD_FACTOR: Final = {"tension": 1.0, "fracture": 1.0, "compression": 0.85, "moment": 1.0, "shear": 1.0}
HAND: Final = 1e-12  # relative: the hand formulas carry all digits
BARS: Final = Tie(gross=10 * INCH**2, net=5 * INCH**2, fy=30 * KSI, fu=60 * KSI, shear_lag=1.0, punched=True)
POST: Final = Column(
    area=10 * INCH**2, gross=9 * INCH**2, kl_x=200 * INCH, kl_y=150 * INCH, r_x=4 * INCH, r_y=2 * INCH, fy=30 * KSI,
    modulus=29000 * KSI, torsion=None,
)  # fmt: skip
JOIST: Final = Beam(
    s_c=50 * INCH**3, s_t=55 * INCH**3, z=58 * INCH**3, flange_ratio=7.0, web_ratio=45.0, fy=30 * KSI,
    modulus=29000 * KSI, lateral=None,
)  # fmt: skip
WEB: Final = Web(depth=18 * INCH, thickness=0.4 * INCH, fy=30 * KSI, modulus=29000 * KSI, stiffeners=None)


def test_tension_is_the_lesser_of_gross_and_net() -> None:
    """0.55 30 10 = 165 kip of gross section, 0.50 60 5 = 150 kip of net section: no 0.90 for punched holes here."""
    found = tension(BARS, INVENTORY)
    assert_allclose(found.value, 150 * KIP, rtol=HAND)
    assert "fracture of the net section" in found.steps[-1].equation
    wider = tension(replace(BARS, net=6 * INCH**2), INVENTORY)
    assert_allclose(wider.value, 165 * KIP, rtol=HAND)
    assert "yield of the gross section" in wider.steps[-1].equation


def test_asks_for_net_section_and_its_factor() -> None:
    with pytest.raises(MissingDataError, match=r"^net: the net area at the connection is needed by MBE 6B"):
        tension(replace(BARS, net=None), INVENTORY)
    with pytest.raises(MissingDataError, match=r"^resistance\.fracture: the level gives no"):
        tension(BARS, {"tension": 0.55})


def test_a_column_below_the_limit_follows_the_parabola() -> None:
    """K l / r 75: Fcr = 30 (1 - 30 75^2/(4 pi^2 29000)) = 25.578 ksi."""
    stress = 30 * (1 - 30 * 75**2 / (4 * math.pi**2 * 29000))
    assert_allclose(stress, 25.578, rtol=0, atol=5e-4)  # half the last digit written above
    assert_allclose(compression(POST, INVENTORY).value, stress * 10 / 2.12 * KIP, rtol=HAND)
    assert_allclose(compression(POST, LOAD_FACTOR).value, 0.85 * stress * 10 * KIP, rtol=HAND)


def test_a_column_above_the_limit_follows_euler() -> None:
    found = compression(replace(POST, kl_y=400 * INCH), INVENTORY)
    assert_allclose(found.value, math.pi**2 * 29000 / 200**2 * 10 / 2.12 * KIP, rtol=HAND)
    assert any("above Cc" in step.equation for step in found.steps)


def test_curves_meet_at_half_of_yield() -> None:
    """At Cc = sqrt(2 pi^2 E/Fy) both give Fy/2."""
    limit = math.pi * math.sqrt(2 * 29000 / 30)
    for side in (1 - 1e-9, 1 + 1e-9):
        found = compression(replace(POST, kl_y=side * limit * 2 * INCH), LOAD_FACTOR)
        assert_allclose(found.value, 0.85 * 15 * 10 * KIP, rtol=1e-8)  # a hair beside the limit


def test_loss_at_the_end_squashes() -> None:
    found = compression(replace(POST, gross=3 * INCH**2), LOAD_FACTOR)
    assert_allclose(found.value, 0.85 * 30 * 3 * KIP, rtol=HAND)
    assert "squash of the least section" in found.steps[-1].equation


def test_twist_counts_as_slenderness() -> None:
    """Fcr = Fy (1 - Fy/(4 Fe)) with the elastic stress of the governing mode."""
    column = replace(POST, torsion=Torsion(kl_z=150 * INCH, j=0.5 * INCH**4, c_w=0.0, y0=2 * INCH))
    elastic = aashto_lrfd.elastic_buckling(column)[0] / (10 * INCH**2)
    assert elastic > 15 * KSI
    expected = 0.85 * 30 * KSI * (1 - 30 * KSI / (4 * elastic)) * 10 * INCH**2
    assert_allclose(compression(column, LOAD_FACTOR).value, expected, rtol=HAND)


def test_slender_plates_are_refused() -> None:
    with pytest.raises(InputError, match=r"^slender: slender plates are not covered by MBE 6B: Q must be 1, got 0\.9"):
        compression(replace(POST, slender=0.9), INVENTORY)


def test_bending_to_the_yield_moment() -> None:
    """0.55 30 50 = 825 kip in; load factor takes 30 58 = 1740 kip in of a compact section held all along."""
    assert_allclose(bending(JOIST, INVENTORY).value, 825 * KIP * INCH, rtol=HAND)
    assert_allclose(bending(JOIST, LOAD_FACTOR).value, 1500 * KIP * INCH, rtol=HAND)
    assert_allclose(bending(JOIST, LOAD_FACTOR, plastic=True).value, 1740 * KIP * INCH, rtol=HAND)


@pytest.mark.parametrize("change", [{"flange_ratio": 11.9}, {"web_ratio": 111.1}, {"z": None}])
def test_only_compact_sections_reach_the_plastic_moment(change: dict[str, float]) -> None:
    """2055/sqrt(30000) = 11.86 and 19230/sqrt(30000) = 111.02."""
    found = bending(replace(JOIST, **change), LOAD_FACTOR, plastic=True)
    assert_allclose(found.value, 1500 * KIP * INCH, rtol=HAND)


def test_sideways_buckling_is_the_standards_equation() -> None:
    """10.48.4.1: 91e6 Cb (Iyc/Lb) sqrt(0.772 J/Iyc + 9.87 (d/Lb)^2) in lb and inches, 91e6 being pi 29e6 = 91.1e6."""
    flange = Lateral.of_flange(240 * INCH, 10 * INCH**4, 0.8 * INCH**4, 17.5 * INCH)
    pounds = 91e6 * (10 / 240) * math.sqrt(0.772 * 0.8 / 10 + 9.87 * (17.5 / 240) ** 2)
    assert_allclose(elastic_moment(flange, 29000 * KSI), pounds / 1000 * KIP * INCH, rtol=3e-3)  # 91 and 0.772 rounded
    found = bending(replace(JOIST, lateral=flange), INVENTORY)
    assert "lateral-torsional buckling" in found.steps[-1].equation
    assert_allclose(found.value, 0.55 * pounds / 1000 * KIP * INCH, rtol=3e-3)


def test_a_wide_flange_is_refused() -> None:
    with pytest.raises(InputError, match=r"^flange_ratio: b/2t must be 12 at most \(AASHTO 10\.48\.2\.1\), got 13\.0"):
        bending(replace(JOIST, flange_ratio=13.0), INVENTORY)


def test_shear_of_a_stocky_web() -> None:
    """0.33 30 18 0.4 = 71.28 kip."""
    assert_allclose(shear(WEB, INVENTORY).value, 71.28 * KIP, rtol=HAND)


@pytest.mark.parametrize("slenderness", [70.0, 85.0, 120.0])
def test_shear_of_a_thin_web(slenderness: float) -> None:
    """10.48.8 in psi, Fy 30 000, k = 5: limits 6000 sqrt(5)/sqrt(Fy) = 77.5 and 7500 sqrt(5)/sqrt(Fy) = 96.8."""
    if slenderness < 6000 * math.sqrt(5 / 30000):
        share = 1.0
    elif slenderness < 7500 * math.sqrt(5 / 30000):
        share = 6000 * math.sqrt(5) / (slenderness * math.sqrt(30000))
    else:
        share = 4.5e7 * 5 / (slenderness**2 * 30000)
    found = shear(replace(WEB, thickness=18 / slenderness * INCH), LOAD_FACTOR)
    assert_allclose(found.value, share * 0.58 * 30 * 18 * 18 / slenderness * KIP, rtol=HAND)
    assert found.steps[-1].source == "MBE 6B"
