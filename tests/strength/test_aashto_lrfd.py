"""Tension and compression by AASHTO LRFD against hand figures and against independent solutions of buckling.

The standard's equations are from memory (see the module); bars are invented. kip and inch, as in the standard.
"""

from __future__ import annotations

import math
from dataclasses import replace
from typing import Final

import numpy as np
import pytest
from hypothesis import given
from hypothesis import strategies as st
from numpy.testing import assert_allclose

from movload.errors import InputError, MissingDataError, UnknownNameError
from movload.strength.aashto_lrfd import (
    Plate,
    Tie,
    compression,
    elastic_buckling,
    lacing_stiffness,
    slender_reduction,
    tension,
)
from movload.strength.beam_column import Column, Torsion, flexural_loads
from movload.units import unit_factor

KIP, KSI, INCH = unit_factor("kip", "force"), unit_factor("ksi", "stress"), unit_factor("in", "section")
PHI: Final = {"tension": 0.95, "fracture": 0.80, "compression": 0.90}
HAND: Final = 1e-12  # relative: the hand formulas carry all digits
CHANNELS: Final = Tie(gross=10 * INCH**2, net=8 * INCH**2, fy=36 * KSI, fu=58 * KSI, shear_lag=0.85, punched=True)
POST: Final = Column(
    area=10 * INCH**2, gross=10 * INCH**2, kl_x=200 * INCH, kl_y=150 * INCH, r_x=4 * INCH, r_y=2 * INCH, fy=36 * KSI,
    modulus=29000 * KSI, torsion=None,
)  # fmt: skip


def euler(slenderness: float) -> float:
    """Return pi^2 E A / (K l / r)^2 [N] of POST's area."""
    return math.pi**2 * 29000 * KSI * 10 * INCH**2 / slenderness**2


def test_fracture_governs_a_net_section_with_punched_holes() -> None:
    """0.80 x 58 x 8 x 0.90 x 0.85 = 283.968 kip; yield 0.95 x 36 x 10 = 342 kip."""
    found = tension(CHANNELS, PHI)
    assert_allclose(found.value, 283.968 * KIP, rtol=HAND)
    assert "fracture of the net section" in found.steps[-1].equation
    assert found.steps[-1].value == found.value


def test_drilled_holes_and_full_connection_leave_yield_to_govern() -> None:
    found = tension(replace(CHANNELS, punched=False, shear_lag=1.0), PHI)
    assert_allclose(found.value, 342 * KIP, rtol=HAND)
    assert "yield of the gross section" in found.steps[-1].equation


@pytest.mark.parametrize(
    ("change", "message"),
    [
        ({"net": None}, r"^net: the net area at the connection is needed by AASHTO LRFD 6\.8\.2\.1"),
        ({"fu": None}, r"^fu: the ultimate strength is needed by AASHTO LRFD 6\.8\.2\.1"),
    ],
)
def test_asks_for_what_fracture_needs(change: dict[str, None], message: str) -> None:
    with pytest.raises(MissingDataError, match=message):
        tension(replace(CHANNELS, **change), PHI)


@pytest.mark.parametrize(
    ("change", "message"),
    [
        ({"gross": 0.0}, r"^gross: must be finite and above 0, got 0"),
        ({"net": -1.0}, r"^net: must be finite and above 0, got -1"),
        ({"fy": math.nan}, r"^fy: must be finite and above 0, got nan"),
        ({"fu": 30 * KSI}, r"^fu: must be at least the yield strength"),
        ({"shear_lag": 1.2}, r"^shear_lag: must be above 0 and at most 1, got 1\.2"),
    ],
)
def test_refuses_a_tie_that_cannot_be(change: dict[str, float], message: str) -> None:
    with pytest.raises(InputError, match=message):
        replace(CHANNELS, **change)


def test_asks_for_a_factor_that_the_level_does_not_give() -> None:
    with pytest.raises(MissingDataError, match=r'^resistance\.fracture: the level gives no resistance factor for "fra'):
        tension(CHANNELS, {"tension": 0.95})


def test_the_slenderer_plane_governs_a_column() -> None:
    """K l / r = 50 and 75: Pe = pi^2 29000 10 / 75^2 = 508.8 kip, Po = 360 kip."""
    found = compression(POST, PHI)
    assert_allclose(found.value, 0.90 * 0.658 ** (360 * KIP / euler(75)) * 360 * KIP, rtol=HAND)
    turned = replace(POST, kl_x=150 * INCH, kl_y=200 * INCH, r_x=2 * INCH, r_y=4 * INCH)
    assert_allclose(compression(turned, PHI).value, found.value, rtol=HAND)


def test_a_slender_column_buckles_elastically() -> None:
    found = compression(replace(POST, kl_y=400 * INCH), PHI)
    assert_allclose(found.value, 0.90 * 0.877 * euler(200), rtol=HAND)
    assert [step for step in found.steps if "6.9.4.1.1-2" in step.equation]


def test_loss_at_the_end_squashes_and_does_not_buckle() -> None:
    """4 in2 left at the end: 0.90 x 36 x 4 = 129.6 kip, less than what buckles at mid length."""
    found = compression(replace(POST, gross=4 * INCH**2), PHI)
    assert_allclose(found.value, 129.6 * KIP, rtol=HAND)
    assert "squash of the least section" in found.steps[-1].equation


def test_slender_plates_lower_the_squash_load() -> None:
    found = compression(replace(POST, slender=0.8), PHI)
    assert_allclose(found.value, 0.90 * 0.658 ** (288 * KIP / euler(75)) * 288 * KIP, rtol=HAND)


def test_one_axis_of_symmetry_is_the_standards_quadratic() -> None:
    """6.9.4.1.3-2: Pe = (Pey + Pez)/(2H) (1 - sqrt(1 - 4 Pey Pez H/(Pey + Pez)^2)), H = 1 - (y0/r0)^2."""
    twist = Torsion(kl_z=150 * INCH, j=0.5 * INCH**4, c_w=20 * INCH**6, y0=2.5 * INCH)
    polar = (2.5**2 + 4**2 + 2**2) * INCH**2
    about_y = euler(75)
    alone = (math.pi**2 * 29000 * KSI * 20 * INCH**6 / (150 * INCH) ** 2 + 0.385 * 29000 * KSI * 0.5 * INCH**4) / polar
    share = 1 - (2.5 * INCH) ** 2 / polar
    both = about_y + alone
    expected = both / (2 * share) * (1 - math.sqrt(1 - 4 * about_y * alone * share / both**2))
    load, _ = elastic_buckling(replace(POST, torsion=twist))
    assert expected < min(about_y, alone)
    assert_allclose(load, expected, rtol=1e-10)  # the quadratic loses some digits in 1 - sqrt(1 - small)


offsets = st.floats(-4.0, 4.0)


@given(offsets, offsets, st.floats(0.05, 50.0), st.floats(0.0, 500.0))
def test_no_axis_of_symmetry_is_the_cubics_lowest_root(x0: float, y0: float, j: float, c_w: float) -> None:
    """6.9.4.1.3-7 multiplied out and solved by companion matrix; inches."""
    twist = Torsion(kl_z=120 * INCH, j=j * INCH**4, c_w=c_w * INCH**6, x0=x0 * INCH, y0=y0 * INCH)
    column = replace(POST, torsion=twist)
    about_x, about_y, _ = flexural_loads(column)
    polar = (x0**2 + y0**2 + 4**2 + 2**2) * INCH**2
    alone = 29000 * KSI * (math.pi**2 * twist.c_w / twist.kl_z**2 + 0.385 * twist.j) / polar
    x, y = x0 * INCH / math.sqrt(polar), y0 * INCH / math.sqrt(polar)
    unit = np.array([about_x, about_y, alone]) / about_y  # about 1, so that the roots keep their digits
    cubic = np.poly(unit) - x**2 * np.array([1, -unit[1], 0, 0]) - y**2 * np.array([1, -unit[0], 0, 0])
    lowest = min(np.roots(cubic).real) * about_y
    assert_allclose(elastic_buckling(column)[0], lowest, rtol=1e-6)  # near-double roots keep half the digits


def test_twist_alone_governs_a_cruciform() -> None:
    """No offset, little J: Pe = G J / r0^2."""
    load, steps = elastic_buckling(replace(POST, torsion=Torsion(kl_z=1.0, j=0.05 * INCH**4, c_w=0.0)))
    assert_allclose(load, 0.385 * 29000 * KSI * 0.05 * INCH**2 / 20, rtol=HAND)
    assert steps[-1].value == load


def test_lacing_stiffness_is_a_sheared_panels_own() -> None:
    """One bar at 45 degrees spanning b = p: a shear V gives it V sqrt 2 and the panel slides 2 sqrt 2 V b/(E A).

    The angle is that slide over p = b, so Sv = E A/(2 sqrt 2); two bars carry twice that.
    """
    found, step = lacing_stiffness(2e-4, 0.3, 0.3, bars=2, modulus=2e11)
    assert_allclose(found, 2 * 2e11 * 2e-4 / (2 * math.sqrt(2)), rtol=HAND)
    assert step.value == found


@pytest.mark.parametrize(
    ("kind", "ratio", "expected"),
    [
        ("flange", 0.56, 1.0),
        ("flange", 0.80, 1.415 - 0.74 * 0.80),
        ("flange", 1.20, 0.69 / 1.44),
        ("angle leg", 0.60, 1.34 - 0.76 * 0.60),
        ("angle leg", 1.00, 0.53),
        ("stem", 0.90, 1.908 - 1.22 * 0.90),
        ("stem", 1.10, 0.69 / 1.21),
        ("web", 1.48, 1.0),
        ("cover", 1.39, 1.0),
    ],
)
def test_slender_plates(kind: str, ratio: float, expected: float) -> None:
    """``ratio`` is b/t sqrt(Fy/E); 9 mm plates of an area that only webs and covers ask for."""
    root = math.sqrt(2e11 / 250e6)
    found, _ = slender_reduction([Plate(kind, ratio * root * 0.009, 0.009)], 0.02, 250e6, 2e11)
    assert_allclose(found, expected, rtol=1e-10)


def test_a_slender_web_loses_its_middle() -> None:
    """b/t sqrt(Fy/E) = 2: be = 1.92 t sqrt(E/Fy) (1 - 0.34/2), so (2 - 1.92 0.83) t^2 sqrt(E/Fy) is lost, twice."""
    root = math.sqrt(2e11 / 250e6)
    web = Plate("web", 2 * root * 0.008, 0.008)
    found, steps = slender_reduction([web, web, Plate("flange", 0.05, 0.02)], 0.02, 250e6, 2e11)
    assert_allclose(found, 1 - 2 * (2 - 1.92 * 0.83) * 0.008**2 * root / 0.02, rtol=HAND)
    assert [step.symbol for step in steps] == ["Qs", "Qa", "Q"]


def test_refuses_plates_that_cannot_be() -> None:
    with pytest.raises(UnknownNameError, match=r'^kind: "flang" is not one of flange, .*nearest: "flange"'):
        Plate("flang", 0.1, 0.01)
    with pytest.raises(InputError, match=r"^area: must exceed what its slender plates lose"):
        slender_reduction([Plate("web", 3.0, 0.01)], 0.02, 250e6, 2e11)


@pytest.mark.parametrize(
    ("change", "message"),
    [
        ({"kl_x": 0.0}, r"^kl_x: must be finite and above 0, got 0"),
        ({"r_y": -0.01}, r"^r_y: must be finite and above 0"),
        ({"modulus": math.inf}, r"^modulus: must be finite and above 0, got inf"),
        ({"slender": 0.0}, r"^slender: must be above 0 and at most 1, got 0"),
    ],
)
def test_refuses_a_column_that_cannot_be(change: dict[str, float], message: str) -> None:
    with pytest.raises(InputError, match=message):
        replace(POST, **change)


def test_refuses_twist_that_cannot_be() -> None:
    with pytest.raises(InputError, match=r"^kl_z: must be finite and above 0, got 0"):
        Torsion(kl_z=0.0, j=1e-8, c_w=0.0)
    with pytest.raises(InputError, match=r"^c_w: must be finite and 0 or more, got -1"):
        Torsion(kl_z=1.0, j=1e-8, c_w=-1.0)


def test_every_step_names_its_source() -> None:
    steps = (*tension(CHANNELS, PHI).steps, *compression(POST, PHI).steps)
    assert {step.source for step in steps} == {"AASHTO LRFD"}
    assert all(step.symbol and step.equation and step.unit for step in steps)
