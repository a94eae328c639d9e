"""Several cases in one loading, several parts in one bridge: each row has its own case, share, impact and placement."""

from __future__ import annotations

import numpy as np
import pytest
from numpy.testing import assert_allclose
from rating.bridges import CART, TWO_TRUSSES, brook, one_bar, part_of, rated, solved_by_hand

from movload import Case, Crossing, Loading, Vehicle, judge, rate
from movload.bridge.across import Across
from movload.errors import InputError

HAND = 1e-12  # relative: the hand figures carry all digits


def test_the_envelope_of_two_cases_names_the_case() -> None:
    """Empty, 30 kN counted twice are 60 kN: more than 40 kN laden, less than 64 kN laden."""
    empty = Case("empty", Vehicle("empty", [30e3], []), factor=2.0)
    for laden_load, case, load in ((40e3, "empty", 60e3), (64e3, "laden", 64e3)):
        laden = Case("laden", Vehicle("laden", [laden_load], []))
        rating = judge(one_bar(permanent=20e3), [Loading("wagon", "farm", (laden, empty))]).governing(0)
        assert_allclose(rating.live, load, rtol=HAND)
        assert_allclose(rating.factor, 80e3 / load, rtol=HAND)
        assert rating.peak.case == case
        assert_allclose(rating.peak.placement.factor, 2.0 if case == "empty" else 1.0)


@pytest.mark.parametrize("first", ["laden", "empty"])
def test_each_row_is_governed_by_its_own_case(first: str) -> None:
    """A long laden lorry pulls the chord most, a short heavy empty one the hanger, in whichever order they come."""
    cases = {
        "laden": Case("laden", Vehicle("laden", [40e3, 60e3, 60e3], [3.9, 3.9])),
        "empty": Case("empty", Vehicle("empty", [40e3], []), factor=2.0),
    }
    order = (first, *(name for name in cases if name != first))
    ratings = rate(brook(), [Loading("lorry", "farm", tuple(cases[name] for name in order))])
    alone = {name: rate(brook(), [Loading(name, "farm", (case,))]) for name, case in cases.items()}
    for name, case in (("L0-L1", "laden"), ("U1-L1", "empty")):
        rating = rated(ratings, name, "tension")
        assert rating.peak.case == case
        assert_allclose(rating.factor, rated(alone[case], name, "tension").factor, rtol=HAND)
        assert rating.factor < min(rated(alone[other], name, "tension").factor for other in cases if other != case)


def test_two_parts_are_stacked_row_by_row() -> None:
    """Two trusses with stations of their own and a third row; a wheel at z = 1 m reaches them with 0.75 and 0.25.

    Left, 0.75 x 40 kN = 30 kN: "tie" 1.5 at x = 4, "strut" -0.5 at x = 4. Right, 0.25 x 40 kN = 10 kN: "tie" 2 at 7.
    With impact 0.1 on left ties, 0.2 on left struts, 0.3 on the right: 49.5, 18 and 26 kN.
    """
    left = Across(np.array([-2.0, 2.0]), np.array([0.0, 1.0]))
    right = Across(np.array([-2.0, 2.0]), np.array([1.0, 0.0]))
    parts = [
        part_of("left", {"tie": [0.0, 1.5, 0.0], "strut": [0.0, -0.5, 0.0]}, [0.0, 4.0, 8.0], left),
        part_of("right", {"tie": [0.0, 0.5, 2.0, 0.0]}, [-1.0, 3.0, 7.0, 12.0], right),
    ]
    solved = solved_by_hand(
        parts, permanent=[10e3, -20e3, 5e3], strength=[(100e3, 1e3), (1e3, 80e3), (60e3, 1e3)],
        impact=[(0.1, 0.9), (0.9, 0.2), (0.3, 0.9)], roadway=TWO_TRUSSES,
    )  # fmt: skip
    axle = Loading.of(Vehicle("axle", [40e3], [], gauges=(0.6,)))
    ratings = judge(solved, [Crossing(axle, "offset", 1.0), Crossing(axle, "offset", 0.0)])
    peaks = ratings.peaks[0]
    assert [effect.key for effect in solved.effects] == [("left", "tie"), ("left", "strut"), ("right", "tie")]
    assert_allclose(peaks.highest, [49.5e3, 0.0, 26e3], rtol=HAND)
    assert_allclose(peaks.lowest, [0.0, -18e3, 0.0], rtol=HAND)
    assert_allclose(ratings.peaks[1].highest, [33e3, 0.0, 52e3], rtol=HAND)
    assert_allclose(ratings.factor[0, 0, :, 0][[0, 2]], [90 / 49.5, 55 / 26], rtol=HAND)
    assert_allclose(ratings.factor[0, 0, 1, 1], 60 / 18, rtol=HAND)
    assert [(peaks.part_of(row)[0].response is part.response, peaks.part_of(row)[1]) for row, part in
            ((0, parts[0]), (1, parts[0]), (2, parts[1]))] == [(True, 0), (True, 1), (True, 0)]  # fmt: skip
    assert peaks[("right", "tie")].highest.position == 7.0
    assert peaks[("left", "tie")].highest.position == peaks["tie"].highest.position == 4.0
    third = ratings.rating(0, 2, 0)
    assert (third.effect.part, third.impact, third.strength) == ("right", 0.3, 60e3)
    assert_allclose(third.peak.placement.share, 0.25, rtol=HAND)
    with pytest.raises(InputError, match="row 3 is beyond the 3 there are"):
        peaks.part_of(3)


def test_of_several_parts_coverage_names_each_rows_own() -> None:
    """Two trusses have a "tie" each; only the left one's strength is known."""
    across = Across(np.array([-2.0, 2.0]), np.array([0.0, 1.0]))
    parts = [part_of(title, {"tie": [0.0, 1.0, 0.0]}, [0.0, 4.0, 8.0], across) for title in ("left", "right")]
    solved = solved_by_hand(parts, strength=[(100e3, 1e3), (float("nan"), 1e3)], roadway=TWO_TRUSSES)
    coverage = judge(solved, [Crossing(Loading.of(CART), "offset")]).coverage
    assert (coverage.full, coverage.partly, coverage.none) == (("left tie",), (), ("right tie",))
    assert judge(
        solved_by_hand(parts[:1], roadway=TWO_TRUSSES), [Crossing(Loading.of(CART), "offset")]
    ).coverage.full == ("tie",)


def test_a_wheel_beside_the_kerb_is_refused() -> None:
    part = part_of(
        "left", {"tie": [0.0, 1.0, 0.0]}, [0.0, 4.0, 8.0], Across(np.array([-2.0, 2.0]), np.array([0.0, 1.0]))
    )
    with pytest.raises(InputError, match=r"offset: its middle keeps between -1\.75 and 1\.75 m here, got 2\.5 m"):
        judge(solved_by_hand([part], roadway=TWO_TRUSSES), [Crossing(Loading.of(CART), "offset", 2.5)])
