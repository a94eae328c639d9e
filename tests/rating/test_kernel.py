"""The one rating equation, number by number and at its edges."""

from __future__ import annotations

import math

import numpy as np
import pytest
from hypothesis import given
from hypothesis import strategies as st
from numpy.testing import assert_allclose, assert_array_equal

from movload.rating.factor_sets import PERMITTED, FactorSet, Level
from movload.rating.kernel import pushed_by_permanent, rating_factors

PLAIN = PERMITTED.levels[0]
ROUNDED = 1e-14  # relative: the two or three operations of one rating

strengths = st.floats(0.0, 1e6)  # N
permanents = st.floats(-1e6, 1e6)  # N
lives = st.floats(1.0, 1e6)  # N
margins = st.floats(0.5, 3.0)


def factor(
    strength: tuple[float, float], permanent: float, live: tuple[float, float], level: Level = PLAIN
) -> tuple[float, float]:
    """Return RF in tension and in compression of one row with one class of permanent load."""
    pushed = pushed_by_permanent(np.array([[permanent]]), level.permanent_margins(["components"]))
    tension, compression = rating_factors(np.array([strength]), pushed, level.live * np.array([live]))[0]
    return float(tension), float(compression)


def test_tension_and_compression_are_rated_apart() -> None:
    """D = 30 kN of tension: (100 - 30) / 50 = 1.4 in tension, (80 + 30) / 40 = 2.75 in compression."""
    assert_allclose(factor((100e3, 80e3), 30e3, (50e3, 40e3)), (1.4, 2.75), rtol=ROUNDED)
    assert_allclose(factor((80e3, 100e3), -30e3, (40e3, 50e3)), (2.75, 1.4), rtol=ROUNDED)


def test_each_margin_multiplies_its_own_load() -> None:
    """(100 - 1.3 x 30) / (2.17 x 50) and (80 + 30) / (2.17 x 40): relief is not magnified, but may be cut to 0.9."""
    rated = factor((100e3, 80e3), 30e3, (50e3, 40e3), Level("lf inventory", 1.3, 2.17))
    assert_allclose(rated, (61 / 108.5, 110 / 86.8), rtol=ROUNDED)
    cut = factor((100e3, 80e3), 30e3, (50e3, 40e3), Level("lf inventory", 1.3, 2.17, relieving=0.9))
    assert_allclose(cut, (61 / 108.5, 107 / 86.8), rtol=ROUNDED)


TWO_CLASSES = Level("two classes", 1.25, 1.75, relieving=0.9, by_class={"settlement": (1.5, 0.0), "absent": (9.0, 9.0)})


def test_each_class_has_its_own_margins_pushing_and_relieving() -> None:
    """Rows of (components, settlement) in kN; components 1.25 or 0.9, settlement 1.5 or 0.

    (30, 20): tension 1.25 x 30 + 1.5 x 20 = 67.5, compression -0.9 x 30 - 0 x 20 = -27.
    (30, -20): tension 37.5 - 0 = 37.5, compression -27 + 30 = 3, though together they pull.
    (-8, 0): tension -7.2, compression 10.
    """
    margins = TWO_CLASSES.permanent_margins(["components", "settlement"])
    assert_array_equal(margins, [[1.25, 0.9], [1.5, 0.0]])
    permanent = np.array([[30e3, 30e3, -8e3], [20e3, -20e3, 0.0]])
    pushed = pushed_by_permanent(permanent, margins)
    assert_allclose(pushed, [[67.5e3, -27e3], [37.5e3, 3e3], [-7.2e3, 10e3]], rtol=ROUNDED)
    strength, live = np.full((3, 2), 100e3), np.full((3, 2), TWO_CLASSES.live * 20e3)
    factors = [[32.5 / 35, 127 / 35], [62.5 / 35, 97 / 35], [107.2 / 35, 90 / 35]]
    assert_allclose(rating_factors(strength, pushed, live), factors, rtol=ROUNDED)


def test_a_class_that_its_margin_turns_pushes_though_the_sum_relieves() -> None:
    """10 kN of tension and 9 kN of compression, 1.25 on what pushes, 0.9 on what relieves: -9 + 11.25 = 2.25 kN."""
    pushed = pushed_by_permanent(np.array([[10e3], [-9e3]]), np.array([[1.25, 0.9], [1.25, 0.9]]))
    assert_allclose(pushed, [[4.4e3, 2.25e3]], rtol=ROUNDED)


def test_no_permanent_class_pushes_nothing() -> None:
    assert_array_equal(pushed_by_permanent(np.zeros((0, 3)), PLAIN.permanent_margins([])), np.zeros((3, 2)))


def test_a_kind_of_loading_may_have_a_live_margin_of_its_own() -> None:
    level = Level("lower", 1.25, 1.8, by_kind={"permit": 1.15})
    assert [level.live_margin(kind) for kind in ("permit", "farm", "routine")] == [1.15, 1.8, 1.8]


@given(st.lists(st.tuples(permanents, margins, st.floats(0.0, 1.0)), min_size=1, max_size=4))
def test_permanent_load_by_class_is_a_sum_written_out(drawn: list[tuple[float, float, float]]) -> None:
    """Against a plain loop: a class counts with one margin where it pushes and with the other where it relieves."""
    pushed = pushed_by_permanent(
        np.array([[effect] for effect, *_ in drawn]), np.array([[push, relieve] for _, push, relieve in drawn])
    )
    for side, sign in enumerate((1.0, -1.0)):
        parts = [(push if sign * effect > 0 else relieve) * sign * effect for effect, push, relieve in drawn]
        size = sum(abs(part) for part in parts)  # round-off is that of the terms, which may cancel
        assert_allclose(pushed[0, side], sum(parts), rtol=0.0, atol=ROUNDED * size)


@given(strengths, permanents, lives, st.floats(0.0, 1.0))
def test_published_allowable_stress_rating(capacity: float, dead: float, live: float, impact: float) -> None:
    """AASHTO Manual for Bridge Evaluation, allowable-stress rating, from memory: RF = (C - A1 D) / (A2 L (1 + I)).

    A1 = A2 = 1; D has the sense that is rated positive, so D < 0 relieves. A negative numerator is written as 0 here.
    """
    expected = max((capacity - dead) / (live * (1.0 + impact)), 0.0)
    (tension, _), (_, compression) = (
        factor((capacity, capacity), sign * dead, (live * (1.0 + impact),) * 2) for sign in (1.0, -1.0)
    )
    assert_allclose([tension, compression], expected, rtol=ROUNDED)


@pytest.mark.parametrize(("level", "live"), [("inventory", 2.17), ("operating", 1.3)])
def test_published_load_factor_rating(level: str, live: float) -> None:
    """The same source, load-factor rating, from memory: A1 = 1.3, A2 = 2.17 (inventory) or 1.3 (operating).

    C = 200, D = 60, L = 45 kip, I = 0.28: 122 / 124.992 = 0.97606 and 122 / 74.88 = 1.62927 (worked here).
    """
    rated, _ = factor((200.0, 200.0), 60.0, (45.0 * 1.28,) * 2, Level(level, 1.3, live))
    assert_allclose(rated, {"inventory": 0.97606, "operating": 1.62927}[level], rtol=5e-6)  # its last digit


@pytest.mark.parametrize("live", [0.0, 1e-9, 50e3])
@pytest.mark.parametrize("strength", [0.0, 29e3, 30e3])
def test_permanent_load_that_uses_all_strength_leaves_nothing(strength: float, live: float) -> None:
    assert factor((strength, 1e9), 30e3, (live, 0.0))[0] == 0.0
    assert factor((1e9, strength), -30e3, (0.0, live))[1] == 0.0


def test_the_levels_margin_decides_whether_permanent_load_uses_all() -> None:
    assert factor((100e3, 1.0), 80e3, (0.0, 0.0), Level("plain", 1.0, 1.0))[0] == math.inf
    assert factor((100e3, 1.0), 80e3, (0.0, 0.0), Level("with margin", 1.25, 1.0))[0] == 0.0


def test_a_bar_that_takes_no_compression() -> None:
    """An eyebar: compression must first undo its permanent tension; without any it has nothing to give."""
    assert_allclose(factor((500e3, 0.0), 40e3, (90e3, 50e3))[1], 0.8, rtol=ROUNDED)
    assert factor((500e3, 0.0), 0.0, (90e3, 50e3))[1] == 0.0
    assert factor((500e3, 0.0), -1.0, (90e3, 0.0))[1] == 0.0


def test_a_sense_that_nothing_brings_about_needs_no_strength() -> None:
    assert factor((0.0, 0.0), 0.0, (0.0, 0.0)) == (math.inf, math.inf)
    assert factor((500e3, 0.0), 0.0, (90e3, 0.0))[1] == math.inf


def test_no_live_effect_is_infinite() -> None:
    assert factor((100e3, 80e3), 30e3, (0.0, 0.0)) == (math.inf, math.inf)


@pytest.mark.parametrize("live", [0.0, 50e3])
def test_an_unknown_strength_is_never_rated(live: float) -> None:
    tension, compression = factor((math.nan, 80e3), 90e3, (live, 40e3))
    assert math.isnan(tension)
    assert_allclose(compression, 170 / 40, rtol=ROUNDED)
    assert math.isnan(factor((80e3, math.nan), 0.0, (40e3, live))[1])


def test_crossings_are_leading_axes() -> None:
    strength = np.array([[100e3, 80e3], [math.nan, 60e3]])
    permanent = np.array([30e3, -10e3])
    live = np.array([[[50e3, 40e3], [1.0, 25e3]], [[0.0, 80e3], [7.0, 0.0]]])
    pushed = pushed_by_permanent(permanent[None], PLAIN.permanent_margins(["components"]))
    together = rating_factors(strength, pushed, live)
    assert together.shape == (2, 2, 2)
    for one, alone in zip(live, together, strict=True):
        assert_array_equal(alone, rating_factors(strength, pushed, one))
    assert_allclose(together[:, :, 1], [[2.75, 2.0], [1.375, math.inf]], rtol=ROUNDED)
    assert not together.flags.writeable


@given(strengths, permanents, lives, margins, margins)
def test_the_rated_load_uses_exactly_the_strength(
    strength: float, permanent: float, live: float, on_permanent: float, on_live: float
) -> None:
    """R - a s D - b RF L = 0 wherever permanent load leaves something, in both senses; a is 1 on what relieves."""
    level = Level("drawn", on_permanent, on_live)
    for sign, rated in zip((1.0, -1.0), factor((strength, strength), permanent, (live, live), level), strict=True):
        pushed = (on_permanent if sign * permanent > 0 else 1.0) * sign * permanent
        if strength > pushed:
            left = strength - pushed - on_live * rated * live
            assert abs(left) <= ROUNDED * (strength + abs(pushed))
        else:
            assert rated == 0.0


@given(strengths, permanents, lives, st.floats(0.0, 1.0))
def test_less_relief_never_rates_higher(strength: float, permanent: float, live: float, kept: float) -> None:
    """With less permanent load a sense that it relieves rates lower or alike, and the other higher or alike."""
    before = factor((strength, strength), permanent, (live, live))
    after = factor((strength, strength), kept * permanent, (live, live))
    relieved = 1 if permanent > 0 else 0
    assert after[relieved] <= before[relieved]
    assert after[1 - relieved] >= before[1 - relieved]


def test_permitted_forces_carry_no_margins() -> None:
    assert isinstance(PERMITTED, FactorSet)
    (level,) = PERMITTED.levels
    assert_array_equal(level.permanent_margins(["components", "settlement"]), np.ones((2, 2)))
    assert {level.live_margin(kind) for kind in ("routine", "permit")} == {1.0}
    assert "margin included" in PERMITTED.statement
