"""Ratings as arrays and as rows: which row governs, in which order they are told, what they cover, what passes."""

from __future__ import annotations

import math
import random
from dataclasses import replace
from typing import TYPE_CHECKING

import numpy as np
import pytest
from hypothesis import given
from hypothesis import strategies as st
from numpy.testing import assert_allclose
from rating.bridges import CART, bars, brook, brook_truss, one_bar, part_of, solved_by_hand

from movload import Case, Loading, Truss, Vehicle, judge, rate
from movload.bridge.across import Across
from movload.errors import MissingDataError
from movload.rating.factor_sets import FactorSet, Level
from movload.report.phrases import factor_text

if TYPE_CHECKING:
    from movload import Rating, Ratings

AXLE = Vehicle("axle", [40e3], [])
NAN = math.nan


def order(ratings: Ratings) -> list[tuple[str, str]]:
    """Return the rows' names and senses as they are told."""
    return [(one.effect.name, one.sense) for one in ratings.rows(0)]


def told(one: Rating) -> tuple[str, str, float]:
    """Return what a rating is known by."""
    return (one.effect.name, one.sense, one.factor)


def test_the_worst_comes_first_and_governs() -> None:
    solved = bars([1.0, -1.0, 2.0], permanent=[10e3] * 3, strength=[(90e3, 1e9), (1e9, 50e3), (70e3, 1e9)])
    ratings = judge(solved, [AXLE])
    assert order(ratings)[:3] == [("B2", "tension"), ("B1", "compression"), ("B0", "tension")]
    assert [one.factor for one in ratings.rows(0)[:3]] == [0.75, 1.5, 2.0]
    assert {one.factor for one in ratings.rows(0)[3:]} == {math.inf}
    assert told(ratings.governing(0)) == ("B2", "tension", 0.75)


def test_what_permanent_load_alone_uses_comes_first_the_most_overused_before_the_rest() -> None:
    """104 %, 100 % without any live effect, 130 % of a level's worth, and a bar with no strength at all."""
    solved = bars(
        [1.0, 0.0, 1.0, 0.0, 1.0, 0.0],
        permanent=[104e3, 100e3, 1e3, -1e3, 130e3, 99e3],
        strength=[(100e3, 1e9), (100e3, 1e9), (21e3, 1e9), (1e9, 0.0), (100e3, 1e9), (100e3, 1e9)],
    )
    ratings = judge(solved, [AXLE])
    first = ratings.rows(0)[:5]
    assert [one.effect.name for one in first] == ["B3", "B4", "B0", "B1", "B2"]
    assert [one.factor for one in first] == [0.0, 0.0, 0.0, 0.0, 0.5]
    assert [one.permanent_use for one in first[:4]] == [math.inf, 1.3, 1.04, 1.0]
    assert told(ratings.governing(0)) == ("B3", "compression", 0.0)
    assert first[0].live == 0.0
    assert not ratings.passes


def test_rows_alike_keep_their_order_tension_before_compression() -> None:
    solved = bars([1.0, -1.0, 1.0], permanent=[0.0] * 3, strength=[(80e3, 80e3)] * 3)
    ratings = judge(solved, [AXLE])
    expected = [("B0", "tension"), ("B1", "compression"), ("B2", "tension")]
    assert order(ratings)[:3] == expected
    assert order(ratings)[3:] == [("B0", "compression"), ("B1", "tension"), ("B2", "compression")]
    assert (ratings.governing(0).effect.name, ratings.governing(0).sense) == expected[0]


@pytest.mark.parametrize("hair", [1e-15, 1e-14, 1e-12])
def test_round_off_does_not_choose_between_mirrored_bars(hair: float) -> None:
    """Whichever of two like bars comes out a hair lower, the first row is told first."""
    for first, second in ((1.0, 1.0 + hair), (1.0 + hair, 1.0)):
        solved = bars([first, second], permanent=[10e3] * 2, strength=[(97e3, 97e3)] * 2)
        ratings = judge(solved, [AXLE])
        assert [name for name, _ in order(ratings)[:2]] == ["B0", "B1"]
        assert ratings.governing(0).effect.name == "B0"


def test_a_hair_below_one_governs_over_one() -> None:
    """Round-off may decide nothing but this: what does not pass is never hidden behind what does."""
    solved = bars([1.0, 1.0 + 1e-14], permanent=[0.0] * 2, strength=[(40e3, 40e3)] * 2)
    ratings = judge(solved, [AXLE])
    assert ratings.governing(0).factor < 1.0
    assert not ratings.passes


def test_of_equal_ratings_the_more_used_by_permanent_load_governs() -> None:
    solved = bars([1.0, 1.0], permanent=[10e3, 50e3], strength=[(70e3, 1e9), (110e3, 1e9)])
    ratings = judge(solved, [AXLE])
    assert order(ratings)[:2] == [("B1", "tension"), ("B0", "tension")]
    assert told(ratings.governing(0)) == ("B1", "tension", 1.5)


numbers = st.integers(-3, 3).map(float)


@given(st.lists(st.tuples(numbers, numbers, st.integers(0, 3), st.integers(0, 3)), min_size=1, max_size=6))
def test_the_governing_row_is_the_first_and_the_least(drawn: list[tuple[float, float, int, int]]) -> None:
    """Few values, so that ties, zeros and bars without strength are common."""
    solved = bars(
        [line for line, *_ in drawn],
        permanent=[1e4 * permanent for _, permanent, *_ in drawn],
        strength=[(1e4 * tension, 1e4 * compression) for *_, tension, compression in drawn],
    )
    ratings = judge(solved, [AXLE])
    rows = ratings.rows(0)
    assert told(rows[0]) == told(ratings.governing(0)) == told(ratings.worst)
    assert [one.factor for one in rows] == sorted(one.factor for one in rows)
    assert rows[0].factor == np.nanmin(ratings.factor)
    assert ratings.passes == (rows[0].factor >= 1)
    assert len(rows) == 2 * len(drawn)


@given(st.permutations(range(5)))
def test_the_order_of_crossings_changes_no_row(sequence: list[int]) -> None:
    vehicles = [Vehicle(f"v{number}", [20e3 + 7e3 * number, 30e3], [2.2 + number]) for number in range(5)]
    solved = bars([1.0, -0.7], permanent=[5e3, -3e3], strength=[(90e3, 60e3)] * 2)
    plain, shuffled = judge(solved, vehicles), judge(solved, [vehicles[number] for number in sequence])
    for place, number in enumerate(sequence):
        mine, theirs = ([(one.effect.name, one.sense) for one in one_of.rows(at)]
                        for one_of, at in ((plain, number), (shuffled, place)))  # fmt: skip
        assert mine == theirs
    assert shuffled.worst.crossing == plain.worst.crossing


def test_the_worst_crossing_is_the_one_with_the_least_rating() -> None:
    vehicles = [Vehicle(f"{load:g} kN", [load * 1e3], []) for load in (40, 90, 60)]
    ratings = judge(one_bar(permanent=10e3), vehicles)
    assert ratings.worst.crossing == "90 kN"
    assert ratings.worst.factor == 1.0
    assert ratings.passes


def test_of_crossings_equally_bad_the_first_is_the_worst() -> None:
    ratings = judge(one_bar(), [Vehicle(name, [40e3], []) for name in ("one", "two")])
    assert ratings.worst.crossing == "one"


@pytest.mark.parametrize(
    ("strength", "passes", "text"),
    [
        (40e3, True, "1.00"),
        (40e3 * 0.9999999, False, "0.99"),
        (math.nextafter(40e3, 0), False, "0.99"),
        (40e3 * 0.996, False, "0.99"),
        (40e3 * 1.0049, True, "1.00"),
    ],
)
def test_the_unrounded_rating_decides(strength: float, passes: bool, text: str) -> None:
    ratings = judge(one_bar(strength=(strength, 0.0)), [AXLE])
    assert ratings.passes is passes
    assert factor_text(ratings.worst.factor) == text


def test_permanent_use_counts_the_levels_margin() -> None:
    """80 kN of 100 kN with a margin of 1.3 is 104 %: RF 0, and the figure said is what makes it so."""
    method = FactorSet("margin", (Level("margin", 1.3, 1.7),), "Margin.", "invented")
    worst = judge(replace(one_bar(permanent=80e3), method=method), [AXLE]).worst
    assert (worst.sense, worst.factor) == ("tension", 0.0)
    assert_allclose(worst.permanent_use, 1.04, rtol=1e-15)
    assert_allclose(worst.pushed, 104e3, rtol=1e-15)
    assert worst.live_factor == 1.7


def test_permanent_load_that_relieves_uses_nothing() -> None:
    solved = bars([1.0], permanent=[-20e3], strength=[(60e3, 60e3)])
    tension, compression = (judge(solved, [AXLE]).rating(0, 0, side) for side in (0, 1))
    assert (tension.factor, tension.permanent_use) == (2.0, 0.0)
    assert_allclose(compression.permanent_use, 1 / 3, rtol=1e-15)


def test_safe_weight_is_the_rating_times_the_weight() -> None:
    """RT = W x RF (Khan, Bridge and Highway Structure Rehabilitation and Repair, McGraw-Hill 2010, p. 187)."""
    ratings = judge(one_bar(strength=(30e3, 0.0)), [AXLE])
    assert ratings.worst.safe_weight == 0.75 * 40e3
    assert judge(one_bar(permanent=100e3), [AXLE]).worst.safe_weight == 0.0


def test_nothing_felt_has_no_safe_weight() -> None:
    ratings = judge(one_bar(), [AXLE])
    compression = ratings.rating(0, 0, 1)
    assert (compression.factor, compression.safe_weight) == (math.inf, math.inf)
    assert (compression.peak.heading, compression.peak.placement.x.size) == (0, 0)


def test_the_weight_that_moves_is_the_heaviest_case() -> None:
    cases = tuple(Case(f"{load:g}", Vehicle(f"{load:g}", [load], [])) for load in (20e3, 50e3, 30e3))
    assert judge(one_bar(), [Loading("lorry", "farm", cases)]).worst.safe_weight == 2.0 * 50e3


@pytest.mark.parametrize("first", [0, 1])
def test_the_safe_weight_is_that_of_the_case_that_governs(first: int) -> None:
    """30 kN counted twice are 60 kN of effect, more than 40 kN counted once: 100 / 60 of the 30 kN that stand there."""
    cases = [
        Case("empty, hurried", Vehicle("light", [30e3], []), factor=2.0),
        Case("laden", Vehicle("heavy", [40e3], [])),
    ]
    ratings = judge(one_bar(), [Loading("lorry", "farm", (cases[first], cases[1 - first]))])
    assert ratings.worst.peak.case == "empty, hurried"
    assert_allclose(ratings.worst.safe_weight, 100 / 60 * 30e3, rtol=1e-14)
    assert ratings.crossings[0].loading.gross == 40e3


def test_each_row_has_the_safe_weight_of_its_own_case() -> None:
    """B0 is pulled most by the short vehicle's 50 kN, B1, whose line is level, by the long one's 3 x 30 kN."""
    part = part_of("truss", {"B0": [0.0, 1.0, 0.0], "B1": [1.0, 1.0, 1.0]}, [0.0, 4.0, 8.0], Across.typed(1.0))
    cases = (
        Case("long", Vehicle("long", [30e3, 30e3, 30e3], [4.0, 4.0])),
        Case("short", Vehicle("short", [50e3], [])),
    )
    ratings = judge(solved_by_hand([part]), [Loading("lorry", "farm", cases)])
    short, long = (ratings.rating(0, row, 0) for row in (0, 1))
    assert [short.peak.case, long.peak.case] == ["short", "long"]
    assert_allclose([short.factor, short.safe_weight], [100 / 50, 100e3], rtol=1e-14)
    assert_allclose([long.factor, long.safe_weight], [100 / 90, 100e3], rtol=1e-14)


def test_what_has_no_strength_is_never_a_row() -> None:
    solved = bars([1.0, 1.0], permanent=[0.0, 500e3], strength=[(80e3, NAN), (NAN, NAN)])
    ratings = judge(solved, [AXLE])
    assert order(ratings) == [("B0", "tension")]
    assert told(ratings.governing(0)) == ("B0", "tension", 2.0)


def test_no_strength_at_all_is_an_error_not_a_pass() -> None:
    ratings = judge(bars([1.0], permanent=[0.0], strength=[(NAN, NAN)]), [AXLE])
    assert ratings.rows(0) == []
    assert not ratings.passes
    with pytest.raises(MissingDataError, match="Hand bridge: no row has a strength, so nothing can be rated"):
        ratings.governing(0)


def test_a_bridge_rates_the_same_again_and_with_its_bars_in_any_order() -> None:
    truss = brook_truss()
    shuffled = list(truss.members)
    random.Random(7).shuffle(shuffled)  # noqa: S311  # any order will do, the same one in every run
    first, again, other = (
        rate(one, [CART]) for one in (brook(), brook(), brook(truss=Truss(truss.joints, shuffled, truss.supports)))
    )
    assert [told(one) for one in first.rows(0)] == [told(one) for one in again.rows(0)]
    by_name = {(one.effect.name, one.sense): one.factor for one in other.rows(0)}
    for one in first.rows(0):
        assert_allclose(by_name[(one.effect.name, one.sense)], one.factor, rtol=1e-12)
