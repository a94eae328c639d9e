"""Levels and factor sets: which margin is put on what, and what can be none."""

from __future__ import annotations

import math
import pickle

import pytest
from hypothesis import given
from hypothesis import strategies as st
from numpy.testing import assert_allclose

from movload.errors import InputError, UnknownNameError
from movload.rating.factor_sets import PERMITTED, FactorSet, Level, capacity_factor, condition_factor, sign_weight

ROUNDED = 1e-15  # relative: one product or one division
BY_TRAFFIC = Level(
    "legal", by_traffic=((1000.0, 1.3), (5000.0, 1.45)), by_kind={"crowd": 1.6}, kinds=("legal", "crowd")
)
RULES = FactorSet(
    "Alder valley rules",
    (BY_TRAFFIC, Level("permit", live=1.2, kinds=("permit",)), Level("any")),
    "Invented.",
    "invented",
    multiple_presence=(1.2, 1.0, 0.85),
    presence_by_kind={"permit": (1.0,)},
    condition={"good": 1.0, "fair": 0.95, "poor": 0.85},
    measured_gain=0.05,
    sources={"live": "sheet 2, read", "presence": "a table, from memory", "relief": "own choice, no source"},
)


def test_permitted_forces_bring_no_factor_at_all() -> None:
    (level,) = PERMITTED.levels
    assert (level.permanent, level.live, level.relieving, level.posting) == (1.0, 1.0, 1.0, "weight x RF")
    assert (level.needs_traffic, level.condition_factors, level.resistance) == (False, False, {})
    assert (PERMITTED.name, PERMITTED.strengths, PERMITTED.impact) == ("permitted", ("permitted",), "")
    assert [PERMITTED.presence("routine", count) for count in (1, 2, 7)] == [1.0, 1.0, 1.0]
    assert PERMITTED.levels_for("rail") == (0,)
    assert PERMITTED.from_memory == ()


@pytest.mark.parametrize(
    ("traffic", "margin"),
    [(0.0, 1.3), (1000.0, 1.3), (2000.0, 1.3375), (3000.0, 1.375), (5000.0, 1.45), (9000.0, 1.45), (None, 1.45)],
)
def test_live_margins_by_traffic_are_straight_between_and_level_outside(traffic: float | None, margin: float) -> None:
    """1.30 + 0.15 (2000 - 1000) / 4000 = 1.3375; unknown traffic takes the greatest."""
    assert BY_TRAFFIC.needs_traffic
    assert_allclose(BY_TRAFFIC.live_margin("legal", traffic), margin, rtol=ROUNDED)
    assert BY_TRAFFIC.live_margin("crowd", traffic) == 1.6


def test_unknown_traffic_takes_the_greatest_wherever_it_stands() -> None:
    falling = Level("falling", by_traffic=((10.0, 1.8), (50.0, 1.4)))
    assert falling.live_margin("farm") == 1.8
    assert falling.live_margin("farm", math.inf) == 1.4


def test_a_level_says_which_kinds_it_rates() -> None:
    assert [level.rates("permit") for level in RULES.levels] == [False, True, True]
    assert [RULES.levels_for(kind) for kind in ("legal", "permit", "rail")] == [(0, 2), (1, 2), (2,)]
    assert FactorSet("no any", RULES.levels[:2], "Invented.", "invented").levels_for("rail") == ()


def test_multiple_presence_by_number_abreast_and_by_kind() -> None:
    assert [RULES.presence("legal", count) for count in (1, 2, 3, 4, 9)] == [1.2, 1.0, 0.85, 0.85, 0.85]
    assert [RULES.presence("permit", count) for count in (1, 2)] == [1.0, 1.0]
    with pytest.raises(InputError, match=r'^factor set "Alder valley rules": at least one is abreast, got 0$'):
        RULES.presence("legal", 0)


def test_what_was_recalled_is_told_by_its_source() -> None:
    assert RULES.from_memory == ("presence",)


@pytest.mark.parametrize(
    ("condition", "measured", "factor"),
    [("good", False, 1.0), ("good", True, 1.0), ("fair", False, 0.95), ("fair", True, 1.0), ("poor", False, 0.85),
     ("poor", True, 0.9)],
)  # fmt: skip
def test_a_measured_loss_raises_the_condition_factor_to_one_at_most(
    condition: str, measured: bool, factor: float
) -> None:
    assert condition_factor(RULES, condition, measured=measured) == factor


def test_an_unknown_condition_and_the_nearest() -> None:
    with pytest.raises(UnknownNameError, match=r'^condition: "pour" is not one of good, .* \(nearest: "poor"\)$'):
        condition_factor(RULES, "pour", measured=False)


@given(st.floats(0.1, 1.0), st.floats(0.1, 1.0))
def test_condition_and_system_together_never_fall_below_the_floor(of_condition: float, of_system: float) -> None:
    both = capacity_factor(of_condition, of_system)
    assert both >= 0.85
    assert both in {0.85, of_condition * of_system}


@pytest.mark.parametrize(
    ("factor", "weight"), [(0.0, 0.0), (0.29, 0.0), (0.3, 0.0), (0.65, 50e3), (1.0, 100e3), (1.5, 150e3)]
)
def test_the_legal_curve_runs_from_nothing_at_0_3_to_the_weight_at_1(factor: float, weight: float) -> None:
    """W (RF - 0.3) / 0.7 with W = 100 kN: 0.65 leaves half of it; from 1 on W RF."""
    legal = Level("legal", posting="legal curve")
    assert_allclose(sign_weight(legal, factor, 100e3), weight, rtol=1e-14)  # a difference near 0.3, and a division


@pytest.mark.parametrize("posting", ["weight x RF", "", "legal curve"])
def test_no_live_effect_leaves_any_weight_and_no_rating_leaves_none(posting: str) -> None:
    level = Level("one", posting=posting)
    assert sign_weight(level, math.inf, 100e3) == math.inf
    assert sign_weight(level, math.inf, 0.0) == math.inf
    assert math.isnan(sign_weight(level, math.nan, 100e3))
    assert_allclose(sign_weight(level, 1.25, 100e3), 125e3, rtol=ROUNDED)


def test_weight_times_rating_factor_everywhere_but_on_the_legal_curve() -> None:
    assert_allclose(sign_weight(Level("one"), 0.2, 100e3), 20e3, rtol=ROUNDED)


@pytest.mark.parametrize("bad", [-0.1, math.nan, math.inf])
def test_a_margin_that_can_be_none_is_refused(bad: float) -> None:
    with pytest.raises(InputError, match=rf'^level "odd": permanent: must be finite and 0 or more, got {bad}$'):
        Level("odd", permanent=bad)
    with pytest.raises(InputError, match=rf'^level "odd": permanent: must be finite and 0 or more, got {bad}$'):
        Level("odd", relieving=bad)
    with pytest.raises(InputError, match=rf'^level "odd": live: must be finite and above 0, got {bad}$'):
        Level("odd", live=bad)


@pytest.mark.parametrize("bad", [-0.1, math.nan, math.inf])
def test_margins_of_single_classes_kinds_and_senses_are_checked_too(bad: float) -> None:
    with pytest.raises(InputError, match=r'^level "odd": permanent: must be finite and 0 or more'):
        Level("odd", by_class={"other": (1.0, bad)})
    with pytest.raises(InputError, match=r'^level "odd": live: must be finite and above 0'):
        Level("odd", by_kind={"farm": bad})
    with pytest.raises(InputError, match=r'^level "odd": live: must be finite and above 0'):
        Level("odd", by_traffic=((1.0, bad),))
    with pytest.raises(InputError, match=r'^level "odd": resistance: must be finite and above 0'):
        Level("odd", resistance={"shear": bad})


def test_no_margin_on_live_load_or_strength_is_refused_but_none_on_relief_is_a_choice() -> None:
    """With a live margin of 0 every rating would be infinite."""
    with pytest.raises(InputError, match=r"live: must be finite and above 0, got 0\.0$"):
        Level("odd", live=0.0)
    with pytest.raises(InputError, match=r"resistance: must be finite and above 0, got 0$"):
        Level("odd", resistance={"tension": 0})
    assert Level("no relief", relieving=0.0).permanent_margins(["components"]).tolist() == [[1.0, 0.0]]


@pytest.mark.parametrize("trucks", [(5.0, 5.0), (9.0, 5.0), (-1.0, 5.0), (1.0, math.inf), (math.nan, 5.0)])
def test_trucks_a_day_increase(trucks: tuple[float, ...]) -> None:
    with pytest.raises(InputError, match=r'^level "odd": trucks a day must be 0 or more and increase'):
        Level("odd", by_traffic=tuple((count, 1.3) for count in trucks))


@pytest.mark.parametrize("bad", [-0.1, math.nan, math.inf])
def test_a_set_checks_its_own_factors(bad: float) -> None:
    one = (Level("one"),)
    with pytest.raises(InputError, match=r'^factor set "odd": multiple presence: must be finite and above 0'):
        FactorSet("odd", one, "Odd.", "invented", multiple_presence=(1.0, bad))
    with pytest.raises(InputError, match=r'^factor set "odd": multiple presence: must be finite and above 0'):
        FactorSet("odd", one, "Odd.", "invented", presence_by_kind={"farm": (bad,)})
    with pytest.raises(InputError, match=r'^factor set "odd": condition and system: must be finite and above 0'):
        FactorSet("odd", one, "Odd.", "invented", condition={"good": bad})
    with pytest.raises(InputError, match=r'^factor set "odd": condition and system: must be finite and above 0'):
        FactorSet("odd", one, "Odd.", "invented", system={"truss": bad})
    with pytest.raises(InputError, match=r"impact, crawl speed and closure: must be finite and 0 or more"):
        FactorSet("odd", one, "Odd.", "invented", impact_values={"design": bad})


def test_a_set_has_levels_and_presence() -> None:
    with pytest.raises(InputError, match=r'^factor set "odd": needs at least one level$'):
        FactorSet("odd", (), "Odd.", "invented")
    with pytest.raises(InputError, match=r"multiple presence needs the factor of at least one abreast$"):
        FactorSet("odd", (Level("one"),), "Odd.", "invented", multiple_presence=())
    with pytest.raises(InputError, match=r"multiple presence needs the factor of at least one abreast$"):
        FactorSet("odd", (Level("one"),), "Odd.", "invented", presence_by_kind={"farm": ()})


def test_a_set_survives_pickling() -> None:
    assert pickle.loads(pickle.dumps(RULES)) == RULES  # noqa: S301  # bytes made on this line
