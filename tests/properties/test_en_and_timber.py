"""Laws that every strength by partial factors and of timber keeps: more metal, less length and better stuff never hurt.

All numbers are drawn; none is a real section's or a real grade's.
"""

from __future__ import annotations

import math
from dataclasses import replace
from typing import TYPE_CHECKING, Final

import pytest
from hypothesis import assume, given
from hypothesis import strategies as st

from movload.bridge.material import Timber
from movload.strength import en_1993, nds
from movload.strength.aashto_floor import Beam, Lateral
from movload.strength.aashto_lrfd import Tie
from movload.strength.beam_column import Column, Torsion
from movload.strength.en_1993 import CURVES, chi
from movload.strength.nds import FACTORS, Joist, Post, column_factor

if TYPE_CHECKING:
    from movload.strength.strength import Strength

NOISE: Final = 1.0 + 1e-9  # relative: some ten operations, and eigenvalues of a matrix of three
STEP_OF_LE: Final = 1.001  # le of a beam falls from 14.42 d to 14.41 d where l/d passes 7, Table 3.3.3
ORDER: Final = list(CURVES)
PHI: Final = {"tension": 1.0, "fracture": 0.8, "compression": 0.9, "moment": 1.0, "hogging": 1.0, "shear": 1.0}

lengths = st.floats(0.3, 12.0)  # m
radii = st.floats(0.01, 0.25)  # m
areas = st.floats(5e-4, 5e-2)  # m2
yields = st.floats(150e6, 460e6)  # Pa
more = st.floats(1.0, 3.0)
curves = st.tuples(st.sampled_from(ORDER), st.sampled_from(ORDER))
twists = st.none() | st.builds(
    Torsion, kl_z=lengths, j=st.floats(1e-9, 1e-5), c_w=st.just(0.0) | st.floats(1e-10, 1e-6),
    x0=st.floats(-0.1, 0.1), y0=st.floats(-0.1, 0.1),
)  # fmt: skip
columns = st.builds(
    Column, area=areas, gross=areas, kl_x=lengths, kl_y=lengths, r_x=radii, r_y=radii, fy=yields,
    modulus=st.floats(160e9, 215e9), torsion=twists,
)  # fmt: skip
laterals = st.builds(
    Lateral, unbraced=lengths, i_y=st.floats(1e-7, 1e-4), j=st.floats(1e-9, 1e-5), c_w=st.floats(1e-10, 1e-6),
    c_b=st.floats(1.0, 2.3),
)  # fmt: skip
levers = st.floats(-0.2, 0.2)  # m


def pushed(column: Column, pair: tuple[str, str]) -> Strength:
    """Return a column's strength."""
    return en_1993.compression(column, PHI, curves=pair, plates=())


def bent(lateral: Lateral | None, fy: float, *, lever: float = 0.0, curve: str = "b") -> Strength:
    """Return the strength of a beam of class 1 at any yield stress drawn here."""
    beam = Beam(s_c=6e-4, s_t=6e-4, z=7e-4, flange_ratio=5.0, web_ratio=40.0, fy=fy, modulus=205e9, lateral=lateral)
    return en_1993.bending(beam, PHI, curve=curve, lever=lever)


# --- partial factors


@given(st.floats(0.0, 5.0), st.floats(0.0, 5.0), st.sampled_from(ORDER))
def test_chi_falls_with_slenderness_below_euler_and_squash(one: float, other: float, curve: str) -> None:
    less, greater = sorted((one, other))
    assert chi(greater, curve) <= chi(less, curve) * NOISE
    assert 0.0 < chi(less, curve) <= min(1.0, 1.0 / max(less, 1e-9) ** 2) * NOISE


@given(st.floats(0.2, 5.0))
def test_a_worse_curve_never_leaves_more(slenderness: float) -> None:
    left = [chi(slenderness, curve) for curve in ORDER]
    assert left == sorted(left, reverse=True)


@given(areas, areas, st.floats(0.1, 1.0), yields, more)
def test_a_tie_gains_by_area_and_stress(gross: float, net: float, shear_lag: float, fy: float, times: float) -> None:
    tie = Tie(gross=gross, net=net, fy=fy, fu=1.5 * fy, shear_lag=shear_lag, punched=False)
    before = en_1993.tension(tie, PHI).value
    for changed in (replace(tie, gross=times * gross), replace(tie, net=times * net), replace(tie, fu=times * tie.fu),
                    replace(tie, fy=times * fy, fu=times * tie.fu)):  # fmt: skip
        assert en_1993.tension(changed, PHI).value >= before
    assert before == pytest.approx(min(gross * fy, 0.8 * 0.9 * shear_lag * net * 1.5 * fy), rel=1e-12)


@given(columns, curves, more)
def test_a_column_loses_by_length_and_by_a_worse_curve(column: Column, pair: tuple[str, str], times: float) -> None:
    before = pushed(column, pair).value
    longer = [replace(column, kl_x=times * column.kl_x), replace(column, kl_y=times * column.kl_y)]
    if column.torsion is not None:
        longer.append(replace(column, torsion=replace(column.torsion, kl_z=times * column.torsion.kl_z)))
    for changed in longer:
        assert pushed(changed, pair).value <= before * NOISE
    worst = pushed(column, ("d", "d")).value
    assert worst <= before * NOISE


@given(columns, curves, more)
def test_a_column_gains_by_metal_yield_and_modulus(column: Column, pair: tuple[str, str], times: float) -> None:
    """Radii stay; with twist J and Cw stay too, so that more area then need not help twisting but never hurts."""
    before = pushed(column, pair).value
    assume(times * column.fy < 1e9)
    for name in ("gross", "area", "fy", "modulus"):
        changed = replace(column, **{name: times * getattr(column, name)})
        assert pushed(changed, pair).value >= before / NOISE


@given(columns, curves)
def test_a_column_stays_below_squash_and_every_elastic_load(column: Column, pair: tuple[str, str]) -> None:
    value = pushed(column, pair).value
    assert value <= PHI["tension"] * column.gross * column.fy * NOISE
    assert value <= PHI["compression"] * column.area * column.fy * NOISE
    for length, radius in ((column.kl_x, column.r_x), (column.kl_y, column.r_y)):
        euler = math.pi**2 * column.modulus * column.area * (radius / length) ** 2
        assert value <= PHI["compression"] * euler * NOISE


@given(columns, curves)
def test_twist_never_adds_strength(column: Column, pair: tuple[str, str]) -> None:
    assert pushed(column, pair).value <= pushed(replace(column, torsion=None), pair).value * NOISE


@given(columns, curves)
def test_the_axes_may_change_places(column: Column, pair: tuple[str, str]) -> None:
    twist = column.torsion and replace(column.torsion, x0=column.torsion.y0, y0=column.torsion.x0)
    turned = replace(column, kl_x=column.kl_y, kl_y=column.kl_x, r_x=column.r_y, r_y=column.r_x, torsion=twist)
    assert pushed(turned, pair[::-1]).value == pytest.approx(pushed(column, pair).value, rel=NOISE - 1.0)


@given(laterals, levers, yields, more, st.sampled_from(ORDER[1:]))
def test_a_beam_loses_by_length_and_height_and_gains_by_yield(
    lateral: Lateral, lever: float, fy: float, times: float, curve: str
) -> None:
    before = bent(lateral, fy, lever=lever, curve=curve).value
    assert before <= bent(None, fy).value * NOISE
    assert bent(lateral, fy, lever=lever + 0.1 * (times - 1.0), curve=curve).value <= before * NOISE
    assert bent(lateral, fy, lever=lever, curve="d").value <= before * NOISE
    better = min(times, 460e6 / fy)
    assert bent(lateral, better * fy, lever=lever, curve=curve).value >= before / NOISE
    # Held at its centre or above: a load hung below holds a long beam up, and length may then not hurt.
    centre = bent(lateral, fy, lever=max(lever, 0.0), curve=curve).value
    longer = bent(replace(lateral, unbraced=times * lateral.unbraced), fy, lever=max(lever, 0.0), curve=curve).value
    assert longer <= centre * NOISE


# --- timber


@st.composite
def timbers(draw: st.DrawFn) -> Timber:
    """Draw reference stresses and factors of a product that is none."""
    product = draw(st.sampled_from(["sawn", "glued laminated"]))
    stresses = {use: draw(st.floats(1e6, 2e7)) for use in ("tension", "compression", "bending", "shear")}
    stresses["stability"] = draw(st.floats(2e9, 8e9))
    factors = {
        use: {symbol: draw(st.floats(0.5, 1.2)) for symbol in symbols} for use, symbols in FACTORS[product].items()
    }
    return Timber(product, stresses, factors)


durations = st.floats(0.9, 2.0)
sides = st.floats(0.1, 0.5)  # m
posts = st.builds(Post, area=areas, net=areas, depth=sides, breadth=sides, kl_x=st.floats(0.3, 4.0),
                  kl_y=st.floats(0.3, 4.0))  # fmt: skip
joists = st.builds(Joist, depth=sides, breadth=sides, unbraced=st.floats(0.5, 6.0))


def scaled(timber: Timber, use: str, times: float) -> Timber:
    """Return a timber with one reference value times a number."""
    return Timber(timber.product, {**timber.stresses, use: times * timber.stresses[use]}, timber.factors)


@given(st.floats(1e-3, 1e3), st.sampled_from([0.8, 0.85, 0.9, 0.95]), more)
def test_a_column_factor_grows_with_stiffness_below_both_limits(ratio: float, evenness: float, times: float) -> None:
    assert column_factor(ratio, evenness) <= column_factor(times * ratio, evenness) * NOISE
    assert 0.0 < column_factor(ratio, evenness) <= min(1.0, ratio) * NOISE


@given(timbers(), posts, durations, st.floats(1.0, 1.25))
def test_a_post(timber: Timber, post: Post, duration: float, times: float) -> None:
    """Length hurts; stuff, section and a shorter load help; never beyond crushing or Euler's load by E_min."""
    before = nds.compression(timber, post, duration, PHI).value
    for changed in (replace(post, kl_x=times * post.kl_x), replace(post, kl_y=times * post.kl_y)):
        assert nds.compression(timber, changed, duration, PHI).value <= before * NOISE
    for changed in (replace(post, area=times * post.area), replace(post, net=times * post.net),
                    replace(post, depth=times * post.depth), replace(post, breadth=times * post.breadth)):  # fmt: skip
        assert nds.compression(timber, changed, duration, PHI).value >= before / NOISE
    for use in ("compression", "stability"):
        assert nds.compression(scaled(timber, use, times), post, duration, PHI).value >= before / NOISE
    assert nds.compression(timber, post, 0.9, PHI).value <= before * NOISE
    steps = {step.symbol: step.value for step in nds.compression(timber, post, duration, PHI).steps}
    star = steps["F* compression"]
    assert before <= PHI["compression"] * star * min(post.net, post.area) * NOISE
    assert before <= PHI["compression"] * steps["FcE"] * post.area * NOISE


@given(timbers(), joists, durations, st.floats(1.0, 1.5))
def test_a_joist(timber: Timber, joist: Joist, duration: float, times: float) -> None:
    """Length hurts; stuff, breadth and a shorter load help; a held beam is the best there is."""
    before = nds.bending(timber, joist, duration, PHI).value
    assert before <= nds.bending(timber, replace(joist, unbraced=None), duration, PHI).value * NOISE
    longer = replace(joist, unbraced=times * joist.unbraced)
    assert nds.bending(timber, longer, duration, PHI).value <= before * STEP_OF_LE
    broader = replace(joist, breadth=times * joist.breadth)
    for rule in (nds.bending, nds.shear):
        own = rule(timber, joist, duration, PHI).value
        assert rule(timber, broader, duration, PHI).value >= own / NOISE
        assert rule(timber, joist, 0.9, PHI).value <= own * NOISE
    for use in ("bending", "stability"):
        assert nds.bending(scaled(timber, use, times), joist, duration, PHI).value >= before / NOISE


@given(timbers(), areas, joists, durations, more)
def test_stress_counts_in_proportion(timber: Timber, net: float, joist: Joist, duration: float, times: float) -> None:
    """In tension and shear, where nothing buckles: reference stress, load duration, area and margin alike."""
    pulled, sheared = nds.tension(timber, net, duration, PHI).value, nds.shear(timber, joist, duration, PHI).value
    margin = {sense: times * factor for sense, factor in PHI.items()}
    alike = pytest.approx(times, rel=1e-12)
    assert nds.tension(scaled(timber, "tension", times), net, duration, PHI).value / pulled == alike
    assert nds.tension(timber, times * net, duration, PHI).value / pulled == alike
    assert nds.tension(timber, net, duration, margin).value / pulled == alike
    assert nds.shear(scaled(timber, "shear", times), joist, duration, PHI).value / sheared == alike
    assert nds.shear(timber, joist, 0.9, PHI).value / sheared == pytest.approx(0.9 / duration, rel=1e-12)
