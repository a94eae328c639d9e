"""Built-up bars, axial force with bending, bowed and eccentric bars by closed forms, and slenderness notes.

Bars are invented. S. P. Timoshenko, J. M. Gere, *Theory of Elastic Stability*, 2nd ed.: 1.3 (eccentric, secant), 1.12
(bowed, Perry). FROM MEMORY, and derived again where a test says so.
"""

from __future__ import annotations

import math
from dataclasses import replace
from typing import Final

import numpy as np
import pytest
from numpy.testing import assert_allclose

from movload.errors import InputError, MissingDataError, Note
from movload.strength.beam_column import Bending, Column, Connectors, Lacing, flexural_loads, with_bending
from movload.strength.strength import Step, Strength
from movload.strength.warnings import slenderness_notes
from movload.units import unit_factor

HALVED: Final = 1e-12  # relative: the root is halved to the last digit, the closed forms carry all digits
AXIAL: Final = Strength(1e6, (Step("Pr", "typed", 1e6, "N", "invented"),))
MOMENT: Final = Strength(1e5, (Step("Mr", "typed", 1e5, "N m", "invented"),))
UNAMPLIFIED: Final = Bending(strength=MOMENT, elastic=math.inf)
KIP, KSI, INCH = unit_factor("kip", "force"), unit_factor("ksi", "stress"), unit_factor("in", "section")
POST: Final = Column(
    area=10 * INCH**2, gross=10 * INCH**2, kl_x=200 * INCH, kl_y=150 * INCH, r_x=4 * INCH, r_y=2 * INCH, fy=36 * KSI,
    modulus=29000 * KSI, torsion=None,
)  # fmt: skip


def euler(slenderness: float) -> float:
    """Return pi^2 E A / (K l / r)^2 [N] of POST's area."""
    return math.pi**2 * POST.modulus * POST.area / slenderness**2


def test_battens_make_a_bar_slenderer() -> None:
    """K l / r 75, a / rib = 30/0.8 = 37.5, alpha = 8/1.6 = 5: sqrt(75^2 + 0.82 25/26 37.5^2) = 82.06."""
    held = Connectors(axis="y", spacing=30 * INCH, radius=0.8 * INCH, apart=8 * INCH)
    _, about_y, steps = flexural_loads(replace(POST, built_up=held))
    modified = math.sqrt(75**2 + 0.82 * 25 / 26 * 37.5**2)
    assert_allclose(about_y, euler(modified), rtol=HALVED)
    assert_allclose(modified, 82.06, rtol=0, atol=0.005)  # half the last digit written in the docstring
    assert any(step.symbol == "(Kl/r)my" for step in steps)


def test_battens_too_far_apart_are_refused() -> None:
    held = Connectors(axis="y", spacing=60 * INCH, radius=0.8 * INCH, apart=8 * INCH)
    with pytest.raises(
        InputError, match=r"^spacing: a / ri of one part may be 3/4 .* 56\.2 .*6\.9\.4\.3\.1.*got 75\.0"
    ):
        flexural_loads(replace(POST, built_up=held))


def test_lacing_yields_as_a_spring_in_series() -> None:
    """1/P = 1/Pe + 1/Sv about the laced axis, nothing about the other."""
    stiffness = 900 * KIP
    about_x, about_y, _ = flexural_loads(replace(POST, built_up=Lacing(axis="y", stiffness=stiffness)))
    assert_allclose(1 / about_y, 1 / euler(75) + 1 / stiffness, rtol=HALVED)
    assert_allclose(about_x, euler(50), rtol=HALVED)


def test_refuses_lacing_and_battens_that_cannot_be() -> None:
    with pytest.raises(InputError, match=r"^stiffness: must be finite and above 0"):
        Lacing(axis="x", stiffness=0.0)
    with pytest.raises(InputError, match=r"^radius: must be finite and above 0"):
        Connectors(axis="x", spacing=1.0, radius=0.0, apart=0.2)


def test_half_and_eight_ninths_of_the_moment() -> None:
    """M/Mr = 0.45: P/Pr = 1 - 0.4 = 0.6; M/Mr = 0.95: P/Pr = 2 (1 - 0.95) = 0.1; M/Mr = 0.9: the corner, 0.2."""
    for share, expected in ((0.45, 0.6), (0.95, 0.1), (0.9, 0.2)):
        found = with_bending(AXIAL, [replace(UNAMPLIFIED, moment=share * 1e5)])
        assert_allclose(found.value, expected * 1e6, rtol=1e-9)  # 1 - 0.95 loses a digit or two
        assert found.steps[-1].value == found.value


def test_the_linear_form() -> None:
    found = with_bending(AXIAL, [replace(UNAMPLIFIED, moment=0.45e5)], linear=True)
    assert_allclose(found.value, 0.55e6, rtol=HALVED)
    assert found.steps[-1].source == "MBE 6B"


def test_both_planes_add() -> None:
    both = [replace(UNAMPLIFIED, moment=0.2e5), replace(UNAMPLIFIED, moment=0.25e5)]
    assert_allclose(with_bending(AXIAL, both).value, 0.6e6, rtol=HALVED)


def test_compression_amplifies_a_typed_moment() -> None:
    """Put back: at the load found 8/9 (M/Mr) / (1 - P/Pe) + P/Pr is 1, and less is carried than without."""
    plane = replace(UNAMPLIFIED, moment=0.3e5, elastic=2e6)
    load = with_bending(AXIAL, [plane]).value
    assert_allclose(load / 1e6 + 8 / 9 * 0.3 / (1 - load / 2e6), 1.0, rtol=HALVED)
    assert load < with_bending(AXIAL, [replace(plane, elastic=math.inf)]).value


def test_end_moments_are_never_amplified_downward() -> None:
    """Cm = 0.4: Cm/(1 - P/Pe) is below 1 here, so the typed moment counts whole."""
    plane = replace(UNAMPLIFIED, moment=0.45e5, elastic=2e6, evenness=0.4)
    assert_allclose(with_bending(AXIAL, [plane]).value, 0.6e6, rtol=HALVED)


def test_a_bowed_bar_is_perrys() -> None:
    """P/Pr + P a/(Mr (1 - P/Pe)) = 1 is a quadratic: P^2 - P (Pr + Pe (1 + Pr a/Mr)) + Pr Pe = 0."""
    axial, elastic, bow, moment = 1e6, 1.6e6, 0.02, 1e5
    smaller = min(np.roots([1.0, -(axial + elastic * (1 + axial * bow / moment)), axial * elastic]))
    found = with_bending(AXIAL, [replace(UNAMPLIFIED, bow=bow, elastic=elastic)], linear=True)
    assert_allclose(found.value, smaller, rtol=HALVED)


def test_a_bow_is_what_a_beam_equation_says() -> None:
    """E I (y - y0)'' = -P y under a sine bow, by finite differences: the middle moment is P a/(1 - P/Pe)."""
    load, elastic, bow, parts = 0.7e6, 1.6e6, 0.03, 400
    along = np.linspace(0, 1, parts + 1)[1:-1]  # length 1 m, so E I = Pe/pi^2
    second = (np.diag(np.full(parts - 2, 1.0), 1) + np.diag(np.full(parts - 2, 1.0), -1) - 2 * np.eye(parts - 1)) * (
        parts**2
    )
    first = bow * np.sin(math.pi * along)
    added = np.linalg.solve(second * elastic / math.pi**2 + load * np.eye(parts - 1), -load * first)
    middle = load * (first + added)[parts // 2 - 1]
    assert_allclose(replace(UNAMPLIFIED, bow=bow, elastic=elastic).under(load), middle, rtol=1e-4)  # h^2 of 400 parts


def test_an_eccentric_bar_is_the_secant_formula() -> None:
    """P/Pr + P e sec(pi/2 sqrt(P/Pe))/Mr = 1, put back."""
    plane = replace(UNAMPLIFIED, eccentricity=0.04, elastic=1.6e6)
    load = with_bending(AXIAL, [plane], linear=True).value
    secant = 1 / math.cos(math.pi / 2 * math.sqrt(load / 1.6e6))
    assert_allclose(load / 1e6 + load * 0.04 * secant / 1e5, 1.0, rtol=HALVED)


def test_an_eccentric_tie_is_not_amplified() -> None:
    """Linear: P (1/Pr + e/Mr) = 1."""
    found = with_bending(AXIAL, [replace(UNAMPLIFIED, eccentricity=0.1)], linear=True)
    assert_allclose(found.value, 0.5e6, rtol=HALVED)


def test_a_moment_too_great_leaves_nothing() -> None:
    found = with_bending(AXIAL, [replace(UNAMPLIFIED, moment=1.2e5, elastic=2e6)])
    assert found.value == 0.0
    assert "bending alone is too much" in found.steps[-1].equation


def test_a_plane_that_is_not_bent_takes_nothing() -> None:
    """Though its elastic load lies below the strength: buckling is the axial strength's own affair."""
    assert with_bending(AXIAL, [replace(UNAMPLIFIED, elastic=0.5e6)]).value == 1e6


def test_a_bent_bar_stays_below_its_elastic_load() -> None:
    found = with_bending(AXIAL, [replace(UNAMPLIFIED, bow=1e-9, elastic=0.5e6)])
    assert 0.499e6 < found.value < 0.5e6


def test_steps_hold_both_strengths_and_the_moment() -> None:
    found = with_bending(AXIAL, [replace(UNAMPLIFIED, moment=0.45e5)])
    symbols = [step.symbol for step in found.steps]
    assert symbols == ["Pr", "Mr", "M1", "M1/Mr", "P bent"]
    assert_allclose(found.steps[3].value, 0.45, rtol=HALVED)


@pytest.mark.parametrize(
    ("change", "message"),
    [
        ({"moment": -1.0}, r"^moment: must be finite and 0 or more, got -1"),
        ({"bow": math.nan}, r"^bow: must be finite and 0 or more, got nan"),
        ({"eccentricity": -0.1}, r"^eccentricity: must be finite and 0 or more"),
        ({"elastic": 0.0}, r"^elastic: must be above 0, got 0 N"),
        ({"evenness": 0.0}, r"^evenness: must be finite and above 0"),
        ({"strength": Strength(0.0, ())}, r"^strength: must be finite and above 0"),
    ],
)
def test_refuses_bending_that_cannot_be(change: dict[str, float], message: str) -> None:
    with pytest.raises(InputError, match=message):
        replace(UNAMPLIFIED, **change)


def test_asks_for_what_bends_the_bar() -> None:
    with pytest.raises(MissingDataError, match=r"^planes: what bends the bar is needed"):
        with_bending(AXIAL, [])


@pytest.mark.parametrize(
    ("slenderness", "sense", "bracing", "reverses", "limit"),
    [
        (121.0, "compression", False, False, 120),
        (141.0, "compression", True, False, 140),
        (201.0, "tension", False, False, 200),
        (141.0, "tension", False, True, 140),
        (241.0, "tension", True, False, 240),
    ],
)
def test_slenderness_is_warned_of(slenderness: float, sense: str, bracing: bool, reverses: bool, limit: int) -> None:
    """AASHTO LRFD 6.9.3 and 6.8.4, FROM MEMORY."""
    found = slenderness_notes("U1-U2", slenderness, sense, bracing=bracing, reverses=reverses)
    assert [(note.code, note.subject) for note in found] == [(f"slender-{sense}", "U1-U2")]
    assert f"is above {limit}" in found[0].text
    assert isinstance(found[0], Note)
    assert slenderness_notes("U1-U2", limit, sense, bracing=bracing, reverses=reverses) == ()


def test_slenderness_must_be_a_number() -> None:
    with pytest.raises(InputError, match=r"^slenderness: must be finite and above 0, got nan"):
        slenderness_notes("U1-U2", math.nan, "tension")
