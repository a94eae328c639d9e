"""Timber by the National Design Specification against sums by hand, and what is asked for or refused.

American Wood Council, NDS for Wood Construction, 2018: C_P of 3.7.1 read, every other equation and table from memory.
Sticks are invented, in the Alder valley; stresses are round numbers and no grade's. The example of 3.7.1 is in
tests/published/test_chi_and_cp.py.
"""

from __future__ import annotations

import math
from dataclasses import replace
from typing import TYPE_CHECKING, Any, Final

import pytest

from movload.bridge.material import STRESSES, Timber
from movload.errors import InputError, MissingDataError, UnknownNameError
from movload.strength import nds
from movload.strength.nds import (
    DURATIONS,
    FACTORS,
    Joist,
    Post,
    column_factor,
    duration_factor,
    effective_length,
    in_combination,
)

if TYPE_CHECKING:
    from movload.strength.strength import Strength

EXACT: Final = 1e-12  # relative: a few operations
MPA: Final = 1e6
PHI: Final = {"tension": 1.01, "compression": 1.02, "moment": 1.03, "hogging": 1.04, "shear": 1.05}
"""Each another number, so that a wrong one shows."""
STRESS: Final = {"tension": 5 * MPA, "compression": 8 * MPA, "bending": 9 * MPA, "shear": 1.2 * MPA,
                 "stability": 4000 * MPA}  # fmt: skip
SAWN: Final = Timber("sawn", STRESS, {
    "tension": {"CM": 0.91, "Ct": 0.92, "CF": 1.3, "Ci": 0.8},
    "compression": {"CM": 0.81, "Ct": 0.82, "CF": 1.1, "Ci": 0.83},
    "bending": {"CM": 0.85, "Ct": 0.86, "CF": 1.2, "Cfu": 1.05, "Ci": 0.87, "Cr": 1.15},
    "shear": {"CM": 0.97, "Ct": 0.98, "Ci": 0.84},
    "stability": {"CM": 0.9, "Ct": 0.95, "Ci": 0.96, "CT": 1.02},
})  # fmt: skip
GLUED: Final = Timber("glued laminated", STRESS, {
    "tension": {"CM": 0.8, "Ct": 0.9},
    "compression": {"CM": 0.73, "Ct": 0.9},
    "bending": {"CM": 0.8, "Ct": 0.9, "CV": 0.88, "Cfu": 1.0, "Cc": 0.97, "CI": 0.96},
    "shear": {"CM": 0.875, "Ct": 0.9, "Cvr": 0.72},
    "stability": {"CM": 0.833, "Ct": 0.9},
})  # fmt: skip
POST: Final = Post(area=0.040, net=0.038, depth=0.2, breadth=0.2, kl_x=4.0, kl_y=3.0)
JOIST: Final = Joist(depth=0.4, breadth=0.1, unbraced=3.0)


def symbols(found: Strength) -> dict[str, float]:
    """Return a strength's steps by symbol, the last of each."""
    return {step.symbol: step.value for step in found.steps}


def governs(found: Strength, state: str) -> bool:
    """Return whether the last step names a state and carries the value."""
    last = found.steps[-1]
    return last.value == found.value and last.equation.endswith(f": {state}")


def every(timber: Timber, use: str, duration: float = 1.15, phi: dict[str, float] = PHI) -> Strength:
    """Return the strength that asks for a reference stress."""
    if use == "tension":
        return nds.tension(timber, 0.038, duration, phi)
    if use in {"compression", "stability"}:
        return nds.compression(timber, POST, duration, phi)
    return (nds.bending if use == "bending" else nds.shear)(timber, JOIST, duration, phi)


def without(timber: Timber, use: str, symbol: str, **more: float) -> Timber:
    """Return a timber with one factor left out, and perhaps another there."""
    kept = {name: factor for name, factor in timber.factors[use].items() if name != symbol}
    return Timber(timber.product, timber.stresses, {**timber.factors, use: kept | more})


# --- durations


def test_the_shortest_load_sets_the_duration_factor() -> None:
    """Table 2.3.2, from memory: 0.9, 1.0, 1.15, 1.25, 1.6, 2.0."""
    assert tuple(DURATIONS.values()) == (0.9, 1.0, 1.15, 1.25, 1.6, 2.0)
    assert duration_factor(["permanent"], treated=False) == 0.9
    assert duration_factor(["permanent", "seven days", "two months"], treated=False) == 1.25
    assert duration_factor(["impact", "permanent"], treated=False) == 2.0
    assert duration_factor(["impact", "permanent"], treated=True) == 1.6
    assert duration_factor(["two months"], treated=True) == 1.15


def test_durations_that_are_none() -> None:
    with pytest.raises(MissingDataError, match=r"durations: NDS 2018 2.3.2 needs the duration of every load"):
        duration_factor([], treated=False)
    with pytest.raises(UnknownNameError, match=r'durations: "seven day" is not one of .* \(nearest: "seven days"\)'):
        duration_factor(["permanent", "seven day"], treated=False)


def test_permanent_load_alone_counts_at_its_own_duration() -> None:
    together, alone = in_combination(lambda duration: every(SAWN, "tension", duration), 1.25)
    assert together.value / alone.value == pytest.approx(1.25 / 0.9, rel=EXACT)
    assert (symbols(together)["CD"], symbols(alone)["CD"]) == (1.25, 0.9)


@pytest.mark.parametrize("duration", [0.89, 2.01, math.nan])
def test_a_duration_factor_that_the_table_cannot_have(duration: float) -> None:
    with pytest.raises(InputError, match=r"duration: C_D is 0.9 to 2 \(NDS 2018 Table 2.3.2\), got"):
        every(SAWN, "tension", duration)


# --- by hand


def test_tension_by_hand() -> None:
    """Ft' = 5 x 1.15 x 0.91 x 0.92 x 1.3 x 0.8; T = 1.01 Ft' x 0.038 m2."""
    found = every(SAWN, "tension")
    assert found.value == pytest.approx(1.01 * 5e6 * 1.15 * 0.91 * 0.92 * 1.3 * 0.8 * 0.038, rel=EXACT)
    assert {step.source for step in found.steps} == {"NDS 2018"}
    glued = every(GLUED, "tension")
    assert glued.value == pytest.approx(1.01 * 5e6 * 1.15 * 0.8 * 0.9 * 0.038, rel=EXACT)


@pytest.mark.parametrize(
    ("timber", "star", "modulus", "evenness"),
    [
        (SAWN, 8e6 * 1.15 * 0.81 * 0.82 * 1.1 * 0.83, 4e9 * 0.9 * 0.95 * 0.96 * 1.02, 0.8),
        (GLUED, 8e6 * 1.15 * 0.73 * 0.9, 4e9 * 0.833 * 0.9, 0.9),
    ],
    ids=["sawn", "glued laminated"],
)
def test_a_column_by_hand(timber: Timber, star: float, modulus: float, evenness: float) -> None:
    """le/d = 4.0/0.2 = 20; FcE = 0.822 Emin'/400; CP by (3.7-1) as printed, c = 0.8 or 0.9."""
    found = every(timber, "compression")
    ratio = 0.822 * modulus / 400 / star
    half = (1 + ratio) / (2 * evenness)
    factor = half - math.sqrt(half**2 - ratio / evenness)
    steps = symbols(found)
    assert steps["le/d"] == pytest.approx(20.0, rel=EXACT)
    assert steps["Emin'"] == pytest.approx(modulus, rel=EXACT)
    assert steps["CP"] == pytest.approx(factor, rel=EXACT)
    assert found.value == pytest.approx(1.02 * factor * star * 0.040, rel=EXACT)
    assert governs(found, "buckling")


def test_the_slenderer_plane_counts_with_its_own_side() -> None:
    flat = replace(POST, breadth=0.1, kl_y=3.0)
    assert symbols(nds.compression(SAWN, flat, 1.0, PHI))["le/d"] == pytest.approx(30.0, rel=EXACT)
    deep = replace(POST, depth=0.1, kl_x=3.5)
    assert symbols(nds.compression(SAWN, deep, 1.0, PHI))["le/d"] == pytest.approx(35.0, rel=EXACT)


def test_a_holed_post_is_crushed_at_its_net_section() -> None:
    found = nds.compression(SAWN, replace(POST, net=0.02, kl_x=0.5, kl_y=0.5), 1.15, PHI)
    star = 8e6 * 1.15 * 0.81 * 0.82 * 1.1 * 0.83
    assert found.value == pytest.approx(1.02 * star * 0.02, rel=EXACT)
    assert governs(found, "crushing of the net section")


def test_a_slender_posts_strength_is_the_elastic_one() -> None:
    """CP tends to FcE/Fc* from below: with FcE/Fc* = a small, 1 - CP/a is about a (1 - c)."""
    for ratio in (1e-3, 1e-2):
        assert 1 - column_factor(ratio, 0.8) / ratio == pytest.approx(0.2 * ratio, rel=0.1)
    assert column_factor(1e9, 0.8) == pytest.approx(1.0, abs=1e-8)


def test_load_duration_does_not_touch_the_modulus() -> None:
    assert symbols(every(SAWN, "compression", 0.9))["FcE"] == symbols(every(SAWN, "compression", 2.0))["FcE"]


def test_a_beam_held_all_along_by_hand() -> None:
    """Fb* = 9 x 1.15 x 0.85 x 0.86 x 1.2 x 0.87 x 1.15; Fb' = 1.05 Fb*; S = 0.1 x 0.16/6 m3."""
    found = nds.bending(SAWN, replace(JOIST, unbraced=None), 1.15, PHI)
    full = 9e6 * 1.15 * 0.85 * 0.86 * 1.2 * 0.87 * 1.15 * 1.05 * 0.1 * 0.16 / 6
    assert found.value == pytest.approx(1.03 * full, rel=EXACT)
    assert governs(found, "bending stress")
    assert symbols(found)["CL"] == 1.0
    hogging = nds.bending(SAWN, replace(JOIST, unbraced=None), 1.15, PHI, "hogging")
    assert hogging.value == pytest.approx(1.04 * full, rel=EXACT)


def test_a_beam_that_may_turn_over_by_hand() -> None:
    """l/d = 7.5: le = 1.63 x 3 + 3 x 0.4 = 6.09 m; RB^2 = 6.09 x 0.4/0.01 = 243.6; FbE = 1.2 Emin'/RB^2.

    CL by (3.3-6) as printed, with 1.9 and 0.95.
    """
    found = nds.bending(SAWN, JOIST, 1.15, PHI)
    star = 9e6 * 1.15 * 0.85 * 0.86 * 1.2 * 0.87 * 1.15
    ratio = 1.2 * 4e9 * 0.9 * 0.95 * 0.96 * 1.02 / 243.6 / star
    half = (1 + ratio) / 1.9
    factor = half - math.sqrt(half**2 - ratio / 0.95)
    steps = symbols(found)
    assert steps["le"] == pytest.approx(6.09, rel=EXACT)
    assert steps["RB"] == pytest.approx(math.sqrt(243.6), rel=EXACT)
    assert steps["CL"] == pytest.approx(factor, rel=EXACT)
    assert found.value == pytest.approx(1.03 * factor * star * 1.05 * 0.1 * 0.16 / 6, rel=EXACT)
    assert governs(found, "lateral stability")


@pytest.mark.parametrize(
    ("unbraced", "length"), [(2.0, 4.12), (3.5, 7.205), (5.0, 9.65), (7.15, 13.1545), (7.3, 13.432)]
)
def test_the_effective_length_under_any_loading(unbraced: float, length: float) -> None:
    """Footnote 1 of Table 3.3.3, from memory: 2.06 l below l/d = 7, 1.63 l + 3 d to 14.3, 1.84 l beyond; d = 0.5 m."""
    assert effective_length(unbraced, 0.5) == pytest.approx(length, rel=EXACT)


def test_a_beam_no_deeper_than_broad_does_not_turn_over() -> None:
    for depth, factor in ((0.1, 1.0), (0.101, 0.99)):
        found = nds.bending(SAWN, Joist(depth=depth, breadth=0.1, unbraced=6.0), 1.15, PHI)
        assert (symbols(found)["CL"] == 1.0) == (factor == 1.0)


def test_glued_timber_takes_the_lesser_of_stability_and_volume() -> None:
    """Fb* without CV = 9 x 1.15 x 0.8 x 0.9 x 0.97 x 0.96 MPa; CV 0.88 governs a short beam, CL a long one."""
    star = 9e6 * 1.15 * 0.8 * 0.9 * 0.97 * 0.96
    short = nds.bending(GLUED, replace(JOIST, unbraced=0.5), 1.15, PHI)
    assert governs(short, "volume")
    assert short.value == pytest.approx(1.03 * 0.88 * star * 0.1 * 0.16 / 6, rel=EXACT)
    long = nds.bending(GLUED, replace(JOIST, unbraced=9.0), 1.15, PHI)
    assert governs(long, "lateral stability")
    assert long.value == pytest.approx(1.03 * symbols(long)["CL"] * star * 0.1 * 0.16 / 6, rel=EXACT)


def test_shear_by_hand() -> None:
    """Fv' = 1.2 x 1.15 x 0.97 x 0.98 x 0.84 MPa; V = 1.05 x 2/3 Fv' x 0.4 x 0.1 m2."""
    expected = 1.05 * 2 / 3 * 1.2e6 * 1.15 * 0.97 * 0.98 * 0.84 * 0.04
    assert every(SAWN, "shear").value == pytest.approx(expected, rel=EXACT)
    glued = 1.05 * 2 / 3 * 1.2e6 * 1.15 * 0.875 * 0.9 * 0.72 * 0.04
    assert every(GLUED, "shear").value == pytest.approx(glued, rel=EXACT)


# --- nothing is 1 unsaid, nothing foreign is taken


@pytest.mark.parametrize(
    ("timber", "use", "symbol"),
    [(timber, use, one) for timber in (SAWN, GLUED) for use in STRESSES for one in FACTORS[timber.product][use]],
    ids=lambda value: value if isinstance(value, str) else value.product,
)
def test_every_factor_must_be_typed(timber: Timber, use: str, symbol: str) -> None:
    table = {"sawn": "4.3.1", "glued laminated": "5.3.1"}[timber.product]
    message = rf"^factors.{use}.{symbol}: NDS 2018 Table {table} asks for it; type 1 only where it is 1"
    with pytest.raises(MissingDataError, match=message):
        every(without(timber, use, symbol), use)


@pytest.mark.parametrize("use", STRESSES)
def test_every_reference_value_must_be_typed(use: str) -> None:
    less = Timber("sawn", {name: value for name, value in STRESS.items() if name != use}, SAWN.factors)
    with pytest.raises(MissingDataError, match=rf"^stresses.{use}: NDS 2018 needs this reference value"):
        every(less, use)


def test_a_beam_that_may_turn_over_asks_for_the_modulus_for_stability() -> None:
    less = Timber("sawn", {"bending": 9e6}, SAWN.factors)
    nds.bending(less, replace(JOIST, unbraced=None), 1.0, PHI)
    with pytest.raises(MissingDataError, match=r"^stresses.stability"):
        nds.bending(less, JOIST, 1.0, PHI)


@pytest.mark.parametrize("sense", ["tension", "compression", "moment", "shear"])
def test_no_margin_is_one_unsaid(sense: str) -> None:
    less = {name: factor for name, factor in PHI.items() if name != sense}
    with pytest.raises(MissingDataError, match=rf"^resistance.{sense}: the level gives no resistance factor"):
        every(SAWN, {"moment": "bending"}.get(sense, sense), phi=less)


@pytest.mark.parametrize(
    ("timber", "use", "more", "error", "message"),
    [
        (SAWN, "tension", {"CL": 0.9}, UnknownNameError, r"factors.tension.CL: .* has CM, Ct, CF, Ci here"),
        (SAWN, "tension", {"Cm": 0.9}, UnknownNameError, r'factors.tension.Cm: .* \(nearest: "CM"\)'),
        (GLUED, "bending", {"CF": 1.1}, UnknownNameError, r"factors.bending.CF: NDS 2018 Table 5.3.1 has CM, Ct, CV"),
        (SAWN, "compression", {"CF": 85.0}, InputError, r"factors.compression.CF: no factor of .* above 2, got 85"),
    ],
)
def test_a_factor_that_the_standard_does_not_have(
    timber: Timber, use: str, more: dict[str, float], error: type[InputError], message: str
) -> None:
    with pytest.raises(error, match=message):
        every(without(timber, use, "none", **more), use)


def test_a_factor_may_be_two() -> None:
    assert every(without(SAWN, "tension", "CF", CF=2.0), "tension").value > 0.0


# --- limits


def test_a_column_slenderer_than_fifty() -> None:
    nds.compression(SAWN, replace(POST, kl_x=10.0), 1.0, PHI)
    with pytest.raises(InputError, match=r"le/d: is 50 at most \(NDS 2018 3.7.1.4\), got 50.5"):
        nds.compression(SAWN, replace(POST, kl_x=10.1), 1.0, PHI)


def test_a_beam_slenderer_than_fifty() -> None:
    """RB^2 = 1.84 l d / b^2 = 2500: l = 33.97 m for 0.4 m x 0.1 m."""
    nds.bending(SAWN, replace(JOIST, unbraced=33.9), 1.0, PHI)
    with pytest.raises(InputError, match=r"R_B: is 50 at most \(NDS 2018 3.3.3.7\), got 50.1"):
        nds.bending(SAWN, replace(JOIST, unbraced=34.1), 1.0, PHI)


@pytest.mark.parametrize("name", ["area", "net", "depth", "breadth", "kl_x", "kl_y"])
@pytest.mark.parametrize("value", [0.0, -1.0, math.nan, math.inf])
def test_an_impossible_post(name: str, value: float) -> None:
    with pytest.raises(InputError, match=rf"^{name}: must be finite and above 0, got"):
        replace(POST, **{name: value})


@pytest.mark.parametrize("changes", [{"depth": 0.0}, {"breadth": -0.1}, {"unbraced": 0.0}])
def test_an_impossible_joist(changes: dict[str, Any]) -> None:
    with pytest.raises(InputError, match=rf"^{next(iter(changes))}: must be finite and above 0, got"):
        replace(JOIST, **changes)


def test_an_impossible_net_area() -> None:
    with pytest.raises(InputError, match=r"^net: must be finite and above 0, got 0"):
        nds.tension(SAWN, 0.0, 1.0, PHI)
