"""Shares and the worst places across, by hand."""

from __future__ import annotations

import numpy as np
import pytest
from numpy.testing import assert_allclose, assert_array_equal

from movload.bridge.across import Across
from movload.bridge.roadway import Roadway
from movload.errors import InputError
from movload.traffic.abreast import candidate_places, shares_at, worst_groups

ROUND_OFF = 1e-15  # of shares and metres near 1: a few sums

HALVES = np.array([0.5])
GAUGE = np.array([1.8])
SPACING = 5.2  # m between trusses
LEFT, RIGHT = (Across(np.array([-2.6, 2.6]), np.array(ends)) for ends in ((0.0, 1.0), (1.0, 0.0)))
STRINGER = Across(np.array([-2.7, -0.9, 0.0, 0.9, 2.7]), np.array([0.0, 0.0, 1.0, 0.0, 0.0]))
OVERHANG = Across(np.array([-3.5, 3.5]), np.array([-0.25, 1.25]))  # a truss 2.33 m from the middle, deck beyond both


def worst(
    across: Across, room: tuple[float, float], gauges: list[float], *, apart: float = 0.0, count: int = 1
) -> list:
    """Return the worst sets of places [m] with halves of each axle on its wheels."""
    z = candidate_places(across, room, np.array(gauges), apart=apart, most=count)
    shares = shares_at(across, z, np.array(gauges), np.full(len(gauges), 0.5), 1)
    return [tuple(z[list(group)].tolist()) for group in worst_groups(shares, z, apart, count)]


def test_two_trusses_share_a_vehicle() -> None:
    """1/2 + z/S and 1/2 - z/S with equal wheels, whatever the gauge; together 1 whatever the wheels."""
    z, gauges = np.array([-0.9, 0.0, 0.3]), np.array([1.8, 2.2])
    equal = np.array([0.5, 0.5])
    assert_allclose(shares_at(LEFT, z, gauges, equal, 1), 0.5 + np.stack((z, z), axis=1) / SPACING, atol=ROUND_OFF)
    lopsided = np.array([0.6, 0.47])
    for heading in (1, -1):
        both = shares_at(LEFT, z, gauges, lopsided, heading) + shares_at(RIGHT, z, gauges, lopsided, heading)
        assert_allclose(both, 1.0, atol=ROUND_OFF)


def test_a_heavy_left_side_is_on_the_bridges_right_the_other_way() -> None:
    """60 % on wheels 0.9 m to one side: 0.6 x 0.9 - 0.4 x 0.9 = 0.18 m nearer to that side's truss."""
    z, heavy = np.array([0.4]), np.array([0.6])
    assert_allclose(shares_at(LEFT, z, GAUGE, heavy, 1), [[0.5 + 0.58 / SPACING]], atol=ROUND_OFF)
    assert_allclose(shares_at(LEFT, z, GAUGE, heavy, -1), [[0.5 + 0.22 / SPACING]], atol=ROUND_OFF)


def test_wheels_beside_a_stringer_load_it_by_the_lever() -> None:
    """Stringers 0.9 m apart: wheels 1.8 m apart straddle it without a trace, 0.6 m apart load it with 2/3 each."""
    z = np.array([0.0, 0.9, 0.45])
    assert_allclose(shares_at(STRINGER, z, GAUGE, HALVES, 1), [[0.0], [0.5], [0.25]], atol=ROUND_OFF)
    assert_allclose(shares_at(STRINGER, z, np.array([0.6]), HALVES, 1)[0], [2 / 3], atol=ROUND_OFF)


def test_a_typed_share_holds_everywhere() -> None:
    typed = Across.typed(0.7)
    assert_allclose(shares_at(typed, np.array([-50.0, 3.0]), GAUGE, np.array([0.9]), 1), 0.7, atol=ROUND_OFF)
    assert_array_equal(candidate_places(typed, (-1.0, 1.0), GAUGE), [-1.0, 1.0])
    assert worst(typed, (-1.0, 1.0), [1.8]) == [(-1.0,)]


def test_a_wheel_beyond_the_deck_is_refused_and_round_off_is_not() -> None:
    assert_allclose(shares_at(LEFT, np.array([1.7 + 1e-12]), GAUGE, HALVES, 1), [[0.5 + 1.7 / SPACING]], atol=1e-12)
    rule = r"^across: a wheel at z = {} m stands beyond the deck, which is known from -2\.6 to 2\.6 m$"
    for z, wheel in ((1.8, r"2\.7"), (-1.8, r"-2\.7")):
        with pytest.raises(InputError, match=rule.format(wheel)):
            shares_at(LEFT, np.array([0.0, z]), GAUGE, HALVES, 1)


def test_candidates_stand_with_a_wheel_on_a_bend_or_at_an_end() -> None:
    """Bends at -0.9, 0 and 0.9 m, wheels 0.3 m to either side."""
    found = candidate_places(STRINGER, (-1.3, 1.05), np.array([0.6]))
    assert_allclose(found, [-1.3, -1.2, -0.6, -0.3, 0.3, 0.6, 1.05], atol=ROUND_OFF)


def test_points_on_a_straight_line_are_no_bends() -> None:
    straight = Across(np.array([-2.6, -0.7, 0.9, 2.6]), np.array([-2.6, -0.7, 0.9, 2.6]) / SPACING + 0.5)
    assert_array_equal(candidate_places(straight, (-0.8, 0.8), GAUGE), [-0.8, 0.8])


def test_places_that_coincide_are_one() -> None:
    """Wheels 1.8 m apart on bends 0.9 m apart: the left one on 0.9 m and the right one on -0.9 m at once."""
    found = candidate_places(STRINGER, (-0.9, 0.9), np.array([1.8, 1.8]))
    assert_allclose(found, [-0.9, 0.0, 0.9], atol=ROUND_OFF)
    assert_array_equal(candidate_places(STRINGER, (0.2, 0.2), GAUGE), [0.2])
    thirds = Across(np.array([-1.0, 0.1, 0.3, 1.0]), np.array([0.0, 1.0, 0.5, 0.0]))  # 0.1 + 0.1 and 0.3 - 0.1 differ
    assert_allclose(candidate_places(thirds, (-0.8, 0.8), np.array([0.2])), [-0.8, 0.0, 0.2, 0.4, 0.8], atol=ROUND_OFF)


def test_neighbours_stand_apart_from_bends_and_ends() -> None:
    found = candidate_places(LEFT, (-1.4, 1.6), np.array([1.0]), apart=2.2, most=2)
    assert_allclose(found, [-1.4, 1.6 - 2.2, -1.4 + 2.2, 1.6], atol=ROUND_OFF)


def test_a_truss_is_worst_loaded_from_the_near_kerb() -> None:
    assert worst(LEFT, (-0.9, 0.9), [1.8, 2.0]) == [(0.9,)]
    assert worst(RIGHT, (-0.9, 0.9), [1.8, 2.0]) == [(-0.9,)]


@pytest.mark.parametrize("count", [1, 2, 3])
def test_a_truss_needs_one_set_whatever_the_gauges(count: int) -> None:
    """1/2 + z/S whatever the gauge, but for round-off: the near kerb, and neighbours as near as they may come."""
    near = Across(np.array([-6.1, 6.1]), np.array([0.0, 1.0]))
    for room in ((-4.3, 4.7), (-4.1, 3.9)):
        (places,) = worst(near, room, [1.8, 2.1, 1.37], apart=3.3, count=count)
        assert_allclose(places, room[1] - 3.3 * np.arange(count)[::-1], atol=ROUND_OFF)


def test_the_slightly_worse_place_is_found() -> None:
    """A part in 10^12 is more than round-off."""
    slightly = np.array([[1.0], [1.0 + 1e-12], [1.0]])
    assert worst_groups(slightly, np.arange(3.0), 1.0, 1) == [(1,)]
    assert worst_groups(slightly, np.arange(3.0), 1.0, 2) == [(0, 1)]


@pytest.mark.parametrize("least", [5e-324, 1e-310, 1e-200])
def test_shares_next_to_nothing_divide_nothing_by_zero(least: float) -> None:
    for shares in (np.array([[0.0], [least]]), np.array([[0.0, least], [least, 0.0]])):
        assert worst_groups(shares, np.arange(2.0), 1.0, 1)[-1] == (1,)
        assert worst_groups(shares, np.arange(2.0), 1.0, 2) == [(0, 1)]


def test_a_bend_next_to_another_place_is_not_taken_for_round_off() -> None:
    """Two places 2e-12 m apart, between them a bend by 0.002/m: over that distance it is less than round-off."""
    z = np.array([0.0, 1.0, 1.0 + 2e-12, 2.0])
    shares = np.stack((0.001 * np.minimum(z, 2.0 - z), 0.5 * z, np.ones(4)), axis=1)
    groups = worst_groups(shares, z, 0.5, 1)
    assert (1,) in groups or (2,) in groups


def test_an_overhang_can_lift_the_far_truss() -> None:
    """Both ends count: the share is negative beyond the far truss, and some rows take that worse."""
    assert worst(OVERHANG, (-3.0, 3.0), [0.6]) == [(-3.0,), (3.0,)]


def test_of_equally_bad_places_the_first_counts() -> None:
    """Wheels 0.6 m apart: 2/3 from z = -0.3 to 0.3 m, which round-off alone tells apart."""
    ((place,),) = worst(STRINGER, (-1.2, 1.2), [0.6])
    assert place == pytest.approx(-0.3, abs=ROUND_OFF)


def test_a_part_out_of_reach_still_has_a_place() -> None:
    far = Across(np.array([-3.0, 2.0, 3.0]), np.array([0.0, 0.0, 1.0]))
    assert worst(far, (-1.0, 1.0), [1.8]) == [(-1.0,)]
    assert worst(far, (-1.0, 1.0), [1.8, 1.2]) == [(-1.0,)]


def test_two_abreast_against_the_near_kerb() -> None:
    """6.2 m: one vehicle at 3.1 - 0.3 - 0.9 = 1.9 m, the next 1.8 + 1.2 m from it."""
    roadway = Roadway(-3.1, 3.1, clearance=0.3)
    near = Across(np.array([-3.5, 3.5]), np.array([0.0, 1.0]))
    (pair,) = worst(near, roadway.room(1.8), [1.8], apart=1.8 + roadway.between, count=2)
    assert_allclose(pair, [-1.1, 1.9], atol=ROUND_OFF)


def test_two_abreast_may_pull_both_ways() -> None:
    """3 m apart on OVERHANG, 1/2 + z/4.667: both near the left end, or one at each end; no others.

    (0.167, 3.167) m share 0.536 + 1.179 = 1.714. (-3.167, 3.167) m share 1.179, less, and -0.179, which lifts.
    (-3.167, -0.167) m share 0.464 and -0.179: no more of either.
    """
    pairs = worst(OVERHANG, (-3.167, 3.167), [0.6], apart=3.0, count=2)
    assert_allclose(pairs, [(-3.167, 3.167), (0.167, 3.167)], atol=ROUND_OFF)


def test_what_does_not_fit_has_no_places() -> None:
    assert worst(LEFT, (-1.0, 1.0), [1.2], apart=2.1, count=2) == []
    assert worst(STRINGER, (-1.0, 1.0), [1.2, 0.7], apart=2.1, count=2) == []


@pytest.mark.parametrize("gauges", [[1.8], [1.8, 1.3]])
def test_vehicles_that_fit_exactly_stand_in_one_way(gauges: list[float]) -> None:
    """0.3 + 1.8 + 1.2 + 1.8 + 1.2 + 1.8 + 0.3 = 8.4 m, which round-off may leave short."""
    roadway = Roadway(-4.1, 4.3, clearance=0.3)
    line = Across(np.array([-4.5, -0.2, 0.4, 4.5]), np.array([0.0, 0.3, 1.0, -0.2]))
    (three,) = worst(line, roadway.room(1.8), gauges, apart=3.0, count=roadway.abreast(1.8))
    assert_allclose(three, [-2.9, 0.1, 3.1], atol=1e-14)  # sums of numbers of some metres


def test_axles_of_two_gauges_are_worst_at_corners_of_what_they_share() -> None:
    """(1, 0), (0, 1) and (0.6, 0.6) may each be the worst; (0.4, 0.4) and (0.5, 0) lie between them and 0."""
    shares = np.array([[1.0, 0.0], [0.5, 0.0], [0.4, 0.4], [0.6, 0.6], [0.0, 1.0], [0.6, 0.6]])
    assert worst_groups(shares, np.arange(6.0), 1.0, 1) == [(0,), (3,), (4,)]


def test_a_smaller_share_of_an_axle_that_relieves_is_kept() -> None:
    """A row that axle 1 loads and axle 2 relieves takes (1, 0.2) worse than (1, 0.9): neither may be dropped."""
    shares = np.array([[1.0, 0.2], [1.0, 0.9], [0.2, 0.9]])
    assert (0,) in worst_groups(shares, np.arange(3.0), 1.0, 1)


def test_axles_of_three_gauges_are_worst_on_any_bend() -> None:
    """From (1, 0, 0) straight to (0, 1, 0), then to (0, 0, 1): only the way between is no bend."""
    shares = np.array([[1.0, 0.0, 0.0], [0.5, 0.5, 0.0], [0.0, 1.0, 0.0], [0.0, 0.0, 1.0], [0.0, 0.0, 0.0]])
    assert worst_groups(shares, np.arange(5.0), 1.0, 1) == [(0,), (2,), (3,)]


def test_a_vehicle_that_loads_nothing_may_stand_anywhere() -> None:
    """(0, 3), (0, 4) and (1, 3) all leave one vehicle's (0.5, 0.3) or (0.2, 0.4); the pair (0, 2) has both of them."""
    shares = np.array([[0.5, 0.3], [0.0, 0.0], [0.2, 0.4], [0.0, 0.0], [0.5, 0.3]])
    assert worst_groups(shares, np.arange(5.0), 2.0, 2) == [(0, 2), (0, 4)]


def test_many_abreast_on_a_wide_floor_stay_few_sets() -> None:
    """Sixteen stringers, axles of two gauges, four abreast: of the millions of sets that keep apart a handful.

    One vehicle or two reach the stringer, and where the others stand does not matter.
    """
    stringers = np.linspace(-7.1, 7.1, 16)
    line = Across(stringers, (np.arange(16) == 5).astype(np.float64))
    roadway = Roadway(-7.0, 7.0, clearance=0.3)
    sets = worst(line, roadway.room(2.1), [2.1, 1.86], apart=3.3, count=roadway.abreast(2.1))
    assert 4 <= len(sets) <= 10
    assert {len(group) for group in sets} == {4}
