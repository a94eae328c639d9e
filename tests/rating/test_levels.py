"""Methods with several levels: each has its margins, by class and by kind; the worst of all of them governs."""

from __future__ import annotations

import math
from dataclasses import replace

import numpy as np
import pytest
from numpy.testing import assert_allclose
from rating.bridges import CART, bars, brook, one_bar

from movload import Loading, Support, Truss, Vehicle, judge, solve
from movload.errors import MissingDataError
from movload.rating.factor_sets import FactorSet, Level

AXLE = Vehicle("axle", [40e3], [])
NAN = math.nan
HAND = 1e-12  # relative: the hand formulas carry all digits


def test_margins_by_class_and_kind_by_hand() -> None:
    """A prop at L2 sank 2 mm. Components count 1.25 or 0.9 times, settlement 1.5 or 0 times, a permit load 1.15 times.

    Rows that both classes push, that one pushes and the other relieves, and that both relieve must all be there.
    """
    level = Level("lower", 1.25, 1.8, relieving=0.9, by_class={"settlement": (1.5, 0.0)}, by_kind={"permit": 1.15})
    truss = brook().truss
    propped = Truss(truss.joints, truss.members, [*truss.supports, Support("L2", 0, settlement=0.002)])
    solved = solve(brook(truss=propped), FactorSet("by class", (level,), "One level.", "invented"))
    ratings = judge(solved, [Loading.of(CART, "permit"), Loading.of(CART, "farm")])
    assert_allclose(ratings.factor[:, 0] * 1.15, ratings.factor[:, 1] * 1.8, rtol=HAND)
    met = set()
    for rating in ratings.rows(0):
        sign = 1 if rating.sense == "tension" else -1
        components, settlement = sign * solved.permanent[[0, -1], rating.row]
        pushed = components * (1.25 if components > 0 else 0.9) + settlement * (1.5 if settlement > 0 else 0.0)
        # where the two cancel, round-off is that of the larger: 1e5 N or so
        assert_allclose(rating.pushed, pushed, rtol=HAND, atol=1e-7)
        assert (rating.permanent, rating.live_factor) == (solved.permanent[:, rating.row].sum(), 1.15)
        if rating.live and rating.strength > pushed:
            assert_allclose(rating.factor, (rating.strength - pushed) / (1.15 * abs(rating.live)), rtol=HAND)
        if components and settlement:
            met |= {(components > 0, settlement > 0)}
    assert len(met) == 4


def test_one_level_below_one_is_enough_to_fail() -> None:
    method = FactorSet("two", (Level("upper", 1.0, 1.0), Level("lower", 1.0, 1.5)), "Two levels.", "invented")
    solved = one_bar(strength=(50e3, 0.0))
    ratings = judge(replace(solved, method=method, strength=np.repeat(solved.strength, 2, axis=0)), [AXLE])
    assert [ratings.governing(0, level=level).factor for level in (0, 1)] == [1.25, 50 / 60]
    assert ratings.rows(0, level=1)[0].level == "lower"
    assert not ratings.passes


LEVELS = ("first", "second", "third")


@pytest.mark.parametrize("margins", [(1.0, 1.6, 1.2), (1.6, 1.0, 1.2), (1.2, 1.0, 1.6)])
def test_the_worst_of_all_levels_governs_wherever_it_stands(margins: tuple[float, ...]) -> None:
    """60 kN and 100 kN of strength, 40 kN of live load: the greatest margin's level is the worst of every row."""
    method = FactorSet(
        "three", tuple(Level(*both) for both in zip(LEVELS, (1.0,) * 3, margins, strict=True)), "Three.", "invented"
    )
    solved = bars([1.0, 1.0], permanent=[0.0, 0.0], strength=[(100e3, 1e9), (60e3, 1e9)])
    ratings = judge(replace(solved, method=method, strength=np.repeat(solved.strength, 3, axis=0)), [AXLE, AXLE])
    felt = [(one.effect.name, one.level, one.factor) for one in ratings.rows(1) if one.live]
    expected = sorted(
        ((name, level, strength / (margin * 40)) for name, strength in (("B0", 100), ("B1", 60))
         for level, margin in zip(LEVELS, margins, strict=True)),
        key=lambda row: row[2],
    )  # fmt: skip
    assert [row[:2] for row in felt] == [row[:2] for row in expected]
    assert_allclose([row[2] for row in felt], [row[2] for row in expected], rtol=1e-14)
    assert len(ratings.rows(1)) == 3 * len(ratings.rows(1, level=0)) == 12
    worst = LEVELS[margins.index(1.6)]
    for one in (ratings.governing(0), ratings.governing(1), ratings.worst, ratings.rows(0)[0]):
        assert (one.effect.name, one.level, one.live_factor) == ("B1", worst, 1.6)
        assert one.factor == np.nanmin(ratings.factor)
    assert ratings.governing(0, level=margins.index(1.2)).live_factor == 1.2
    assert not ratings.passes


def test_of_levels_alike_the_first_governs() -> None:
    method = FactorSet("two", (Level("upper"), Level("lower")), "Two levels.", "invented")
    solved = one_bar(permanent=10e3)
    ratings = judge(replace(solved, method=method, strength=np.repeat(solved.strength, 2, axis=0)), [AXLE])
    assert (ratings.worst.level, ratings.governing(0).level) == ("upper", "upper")


def test_a_level_without_any_strength_is_only_missing_when_asked_for() -> None:
    method = FactorSet("two", (Level("upper"), Level("lower")), "Two levels.", "invented")
    solved = one_bar(permanent=10e3)
    strength = np.concatenate((np.full_like(solved.strength, NAN), solved.strength))
    ratings = judge(replace(solved, method=method, strength=strength), [AXLE])
    assert ratings.worst.level == "lower"
    with pytest.raises(MissingDataError, match="no row has a strength"):
        ratings.governing(0, level=0)
    assert not ratings.passes
