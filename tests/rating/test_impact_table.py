"""Which allowance each row of a whole bridge gets, by rule, kind of loading, speed and material."""

from __future__ import annotations

from dataclasses import replace
from typing import TYPE_CHECKING

import numpy as np
import pytest
from numpy.testing import assert_allclose, assert_array_equal
from rating.bridges import PANELS, brook
from rating.floors import SPACING, Z, fitted

from movload import Crossing, Loading, judge, solve
from movload.bridge.strengths import permitted
from movload.errors import MissingDataError, UnknownNameError
from movload.files.factor_sets import read_factor_set
from movload.rating.factor_sets import PERMITTED
from movload.statics.part import row_of

if TYPE_CHECKING:
    from movload.rating.solved import SolvedBridge

FOOT = 0.3048  # m, exact
SETS = replace(PERMITTED, impact_values={"design": 0.33, "smooth": 0.1, "minor": 0.2, "severe": 0.33})


def row(solved: SolvedBridge, name: str, kind: str = "farm", speed: float | None = None) -> list[float]:
    """Return a row's allowance on both sides."""
    both: list[float] = solved.impact.of(kind, speed)[row_of(solved.effects, name)].tolist()
    return both


def test_a_typed_fraction_is_on_every_row_but_timber() -> None:
    solved = solve(fitted(impact=0.25))
    assert row(solved, "U1-L2") == row(solved, "floorbeam L2 moment at S3") == [0.25, 0.25]
    assert row(solved, "planks moment") == [0.0, 0.0]
    assert solved.impact.statement == "Impact 0.25 as typed; none on timber."


def test_a_timber_trusss_steel_rods_keep_theirs() -> None:
    """Chords and diagonals of timber take none; the hangers are steel rods and keep it."""
    timber = {
        member.name: replace(permitted(400e3, 300e3), timber=member.name != "U1-L1") for member in brook().truss.members
    }
    solved = solve(brook(strengths=timber))
    assert row(solved, "U1-L2") == row(solved, "L0-L1") == [0.0, 0.0]
    assert row(solved, "U1-L1") == [0.3, 0.3]


def test_by_loaded_length_each_row_and_sense_has_its_own() -> None:
    """Hanger U1-L1: two panels, 7.8 m = 25.6 ft, 50/150.6 -> 0.30. Chord L0-L1: the span, 16 m = 52.5 ft, 50/177.5.

    Diagonal U1-L2: its line turns in panel 2 at 4.1 x 12.3 / 11.9 m: (x - 4.1)/3.7 = 4.1/(4.1 + 8.2) of the panel. A
    floorbeam: its span across, 4.6 m. A stringer: its panel.
    """
    solved = solve(fitted(impact=None, impact_rule="by loaded length"))
    a, b, c, d = PANELS
    span = a + b + c + d
    turn = a + b * a / (a + (c + d))
    lengths = {
        "U1-L1": (a + b, None), "L0-L1": (span, None), "U1-L2": (span - turn, turn),
        "floorbeam L2 moment at S3": (SPACING, None), "stringer S2 L1-L2 moment": (b, None),
    }  # fmt: skip
    for name, both in lengths.items():
        for found, length in zip(row(solved, name), both, strict=True):
            if length is not None:
                assert_allclose(found, min(50 / (length / FOOT + 125), 0.3), rtol=1e-12)


def test_railway_takes_the_span_or_the_longer_stringer_and_rocks() -> None:
    """40 - 3 L^2/1600 per cent, L in feet, and 100/S; stringers rock by their own spacing."""
    solved = solve(fitted(impact=None, impact_rule="railway"))
    for name, length, spacing in (
        ("L0-L1", sum(PANELS), SPACING), ("U1-L1", PANELS[0], SPACING), ("stringer S1 L1-L2 moment", PANELS[1], 0.8)
    ):  # fmt: skip
        feet = length / FOOT
        expected = (40 - 3 * feet**2 / 1600 + 100 / (spacing / FOOT)) / 100
        assert_allclose(row(solved, name)[0], expected, rtol=1e-12)
    assert min(np.diff(Z)) == pytest.approx(0.8)


def test_by_riding_surface_kind_and_surface_decide() -> None:
    solved = solve(fitted(impact=None, impact_rule="by riding surface", surface="minor"), SETS)
    assert row(solved, "U1-L2", "design") == [0.33, 0.33]
    assert row(solved, "U1-L2", "farm") == [0.2, 0.2]
    assert "0.33 on design loads, 0.2 on others" in solved.impact.statement


def test_crawling_drops_it_only_for_the_kinds_a_set_names() -> None:
    lrfr = read_factor_set("lrfr")
    solved = replace(
        solve(fitted()), impact=replace(solve(fitted()).impact, crawl=(lrfr.crawl_speed, lrfr.crawl_kinds))
    )
    assert row(solved, "U1-L2", "permit", lrfr.crawl_speed) == [0.0, 0.0]
    assert row(solved, "U1-L2", "permit", lrfr.crawl_speed * 1.01) == [0.3, 0.3]
    assert row(solved, "U1-L2", "permit") == row(solved, "U1-L2", "legal", 1.0) == [0.3, 0.3]


def test_a_load_model_that_holds_impact_takes_none() -> None:
    from rating.floors import CART

    solved = solve(fitted())
    dynamic, still = (Loading.of(CART, "farm", dynamic=flag) for flag in (True, False))
    one, other = judge(solved, [Crossing(dynamic), Crossing(still)]).peaks
    stiff = row_of(solved.effects, "planks moment")
    assert_allclose(np.delete(one.highest, [stiff, stiff + 1]), 1.3 * np.delete(other.highest, [stiff, stiff + 1]))
    assert_array_equal(one.highest[stiff], other.highest[stiff])


def test_what_a_rule_needs_is_asked_for_and_what_is_not_known_is_named() -> None:
    with pytest.raises(MissingDataError, match=r"^rating\.surface: is needed .* smooth, minor, severe$"):
        solve(fitted(impact=None, impact_rule="by riding surface"), SETS)
    with pytest.raises(UnknownNameError, match=r'^rating\.surface: "minr" .*\(nearest: "minor"\)$'):
        solve(fitted(impact=None, impact_rule="by riding surface", surface="minr"), SETS)
    with pytest.raises(
        UnknownNameError, match=r'^rating\.impact: "by loaded lenght" .*\(nearest: "by loaded length"\)$'
    ):
        solve(fitted(impact=None, impact_rule="by loaded lenght"))
