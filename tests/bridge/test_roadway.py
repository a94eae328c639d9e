"""Kerbs and places across by hand; what does not fit is refused with the width that is left."""

from __future__ import annotations

import math

import pytest
from numpy.testing import assert_allclose

from movload.bridge.roadway import PLACES, Roadway, span_of_place
from movload.errors import InputError, UnknownNameError

ROUND_OFF = 1e-15  # m: a few sums of numbers of some metres

NARROW = Roadway(-2.1, 2.1, clearance=0.3)
ASIDE = Roadway(-1.9, 3.3, clearance=0.3)  # its middle 0.7 m left of the bridge's


def test_a_vehicle_has_what_kerbs_and_clearances_leave() -> None:
    """4.2 - 2 x 0.3 - 1.8 = 1.8 m, half of it to either side of the middle; 0.7 m to the left where the deck is."""
    assert_allclose(NARROW.room(1.8), (-0.9, 0.9), atol=ROUND_OFF)
    assert_allclose(ASIDE.room(1.8), (0.7 - 1.4, 0.7 + 1.4), atol=ROUND_OFF)
    assert (ASIDE.middle, ASIDE.width) == pytest.approx((0.7, 5.2), abs=ROUND_OFF)


@pytest.mark.parametrize(("width", "count"), [(2.4, 1), (5.39, 1), (5.4, 2), (8.39, 2), (8.4, 3), (11.4, 4)])
def test_as_many_abreast_as_fit(width: float, count: int) -> None:
    """0.3 m, then 1.8 m a vehicle and 1.2 m between two, then 0.3 m: 2.4, 5.4, 8.4 ... m."""
    assert Roadway(-0.5 * width, 0.5 * width, clearance=0.3).abreast(1.8) == count
    assert Roadway(0.0, width, clearance=0.3).abreast(1.8) == count


def test_one_vehicle_is_always_asked_about() -> None:
    """A vehicle too wide is refused by its room, not by a count of 0."""
    assert NARROW.abreast(7.0) == 1


def test_more_room_between_means_fewer() -> None:
    wide = Roadway(-4.2, 4.2, clearance=0.3)
    assert wide.abreast(1.8) == 3
    assert Roadway(-4.2, 4.2, clearance=0.3, between=1.3).abreast(1.8) == 2


@pytest.mark.parametrize(
    ("place", "low", "high"),
    [
        ("anywhere", -0.7, 2.1), ("left kerb", 2.1, 2.1), ("right kerb", -0.7, -0.7), ("centre line", 0.4, 1.0),
        ("offset", 0.2, 0.2), ("own lane", -0.7, 0.7 - 0.5 * (1.8 + 0.4)),
    ],
)  # fmt: skip
def test_places_by_name(place: str, low: float, high: float) -> None:
    """Kerbs at -1.9 and 3.3 m, wheels 1.8 m apart: its middle keeps within -0.7 ... 2.1 m; own lane up to -0.4 m."""
    roadway = Roadway(-1.9, 3.3, clearance=0.3, between=0.4)
    span = span_of_place(roadway, place, gauge=1.8, heading=1, z=0.2)
    assert_allclose(span, (low, high), atol=ROUND_OFF)
    assert place in PLACES


def test_the_centre_line_ends_where_the_wheels_would_touch_the_kerb() -> None:
    assert span_of_place(NARROW, "centre line", gauge=1.8, heading=1, wander=2.0) == NARROW.room(1.8)
    assert span_of_place(NARROW, "centre line", gauge=1.8, heading=1, wander=0.0) == (0.0, 0.0)


@pytest.mark.parametrize("right", [-1.2, -2.3, 5.7, -1.5, -4.0])
def test_a_vehicle_that_fits_exactly_has_one_place(right: float) -> None:
    """1.8 + 2 x 0.3 m in 2.4 m: by round-off the greatest z comes out below the least, or the middle beside both."""
    roadway = Roadway(right, round(right + 2.4, 1), clearance=0.3)
    for place in PLACES:
        if place != "own lane":
            low, high = span_of_place(roadway, place, gauge=1.8, heading=1, z=right + 1.2, wander=0.0)
            assert low <= high
            assert_allclose((low, high), right + 1.2, atol=1e-14)  # sums of numbers near 10 m


def test_own_lane_changes_sides_with_heading_and_custom() -> None:
    wide = {keeps: Roadway(-3.5, 3.5, clearance=0.4, between=1.0, keeps=keeps) for keeps in ("right", "left")}
    on_right, on_left = (-3.5 + 0.4 + 1.0, -0.5 - 1.0), (0.5 + 1.0, 3.5 - 0.4 - 1.0)
    for keeps, heading, span in (
        ("right", 1, on_right), ("right", -1, on_left), ("left", 1, on_left), ("left", -1, on_right)
    ):  # fmt: skip
        assert_allclose(span_of_place(wide[keeps], "own lane", gauge=2.0, heading=heading), span, atol=ROUND_OFF)


@pytest.mark.parametrize("right", [-5.6, -5.1, -3.1])
def test_a_lane_may_fit_exactly(right: float) -> None:
    """Half of 6.2 m less 0.3 and 0.6 m is 2.2 m: one place a side, whatever round-off makes of it."""
    roadway = Roadway(right, round(right + 6.2, 1), clearance=0.3)
    for heading in (1, -1):
        low, high = span_of_place(roadway, "own lane", gauge=2.2, heading=heading)
        assert low <= high
        assert_allclose((low, high), right + 3.1 - heading * 1.7, atol=1e-14)  # sums of numbers near 10 m


def test_half_a_roadway_too_narrow_is_refused_with_what_it_leaves() -> None:
    rule = (
        r"^own lane: wheels 1\.8 m apart do not fit half of the roadway: 2\.1 m less 0\.3 m at the kerb and 0\.6 m at "
        r"the middle leave 1\.2 m$"
    )
    for heading in (1, -1):
        with pytest.raises(InputError, match=rule):
            span_of_place(NARROW, "own lane", gauge=1.8, heading=heading)


@pytest.mark.parametrize("place", PLACES)
def test_a_vehicle_wider_than_the_kerbs_fits_nowhere(place: str) -> None:
    rule = (
        r"^deck\.kerbs: wheels 3\.7 m apart do not fit: 4\.2 m between the kerbs less 0\.3 m on either side leave "
        r"3\.6 m$"
    )
    with pytest.raises(InputError, match=rule):
        span_of_place(NARROW, place, gauge=3.7, heading=1)


@pytest.mark.parametrize("z", [-0.91, 0.91, 4.0, math.nan])
def test_an_offset_outside_is_refused_with_its_limits(z: float) -> None:
    with pytest.raises(InputError, match=rf"^offset: its middle keeps between -0\.9 and 0\.9 m here, got {z:g} m$"):
        span_of_place(NARROW, "offset", gauge=1.8, heading=1, z=z)


def test_an_offset_beyond_by_round_off_only_is_at_the_limit() -> None:
    low, high = NARROW.room(1.8)
    assert span_of_place(NARROW, "offset", gauge=1.8, heading=1, z=high + 1e-13) == (high, high)
    assert span_of_place(NARROW, "offset", gauge=1.8, heading=1, z=low - 1e-13) == (low, low)


def test_an_unknown_place_is_refused_with_the_nearest() -> None:
    with pytest.raises(UnknownNameError, match=r'^place "center line" is not known \(nearest: "centre line"\)$'):
        span_of_place(NARROW, "center line", gauge=1.8, heading=1)


@pytest.mark.parametrize(
    ("right", "left"), [(2.1, -2.1), (1.0, 1.0), (math.nan, 2.1), (-2.1, math.nan), (-math.inf, 2.1)]
)
def test_kerbs_that_cross_are_refused(right: float, left: float) -> None:
    rule = rf"^deck\.kerbs: the kerbs cross: the right one stands at {right:g} m, the left one at {left:g} m$"
    with pytest.raises(InputError, match=rule):
        Roadway(right, left, clearance=0.3)


@pytest.mark.parametrize("clearance", [-0.1, math.nan, math.inf])
def test_a_clearance_is_0_or_more(clearance: float) -> None:
    with pytest.raises(InputError, match=rf"^deck\.clearance: must be 0 or more, got {clearance} m$"):
        Roadway(-2.1, 2.1, clearance=clearance)


@pytest.mark.parametrize("between", [0.0, -1.2, math.nan, math.inf])
def test_vehicles_keep_apart(between: float) -> None:
    with pytest.raises(InputError, match=rf"^deck\.between: must be above 0, got {between} m$"):
        Roadway(-2.1, 2.1, clearance=0.3, between=between)


def test_traffic_keeps_right_or_left() -> None:
    with pytest.raises(UnknownNameError, match=r'^deck\.keeps: "Lefft" is neither right nor left \(nearest: "left"\)$'):
        Roadway(-2.1, 2.1, clearance=0.3, keeps="Lefft")
