"""Vehicles, cases and loadings as values: what follows from axles and spacings, and every input that is refused."""

from __future__ import annotations

import math
import pickle
import re
from typing import Any

import numpy as np
import pytest
from numpy.testing import assert_allclose

from movload import Case, Crossing, Loading, Vehicle
from movload.errors import InputError, UnknownNameError
from movload.traffic.crossing import whole_trains
from movload.traffic.loading import KINDS, Fill

CART = Vehicle("grain cart, invented", [28e3, 62e3, 85e3], [2.8, 4.1], gauges=(1.9, 2.0, 2.1))
TELESCOPE = Vehicle("telescope, invented", [70e3, 80e3, 80e3], [3.0, (1.3, 4.6)])


def test_gross_and_distances_follow() -> None:
    assert CART.gross == 175e3
    assert_allclose(CART.distances, [0.0, 2.8, 6.9], rtol=1e-15)
    assert not CART.has_ranges
    assert Vehicle("one axle", [5e3], []).distances.tolist() == [0.0]
    assert CART.headings == (1, -1)


def test_numbers_of_every_kind_are_taken() -> None:
    whole = Vehicle("whole numbers", np.array([1, 2, 3]), np.array([2, 3]))
    assert whole.loads.dtype == np.float64
    assert whole.spacings == (2.0, 3.0)
    assert Vehicle("lists", [1, 2], [[1.0, 2.0]]).spacings == ((1.0, 2.0),)
    assert Vehicle("coinciding", [1, 2], [0]).distances.tolist() == [0.0, 0.0]
    assert Vehicle("unladen axle", [1, 0], [3]).gross == 1.0


def test_a_range_has_no_one_distance() -> None:
    assert TELESCOPE.has_ranges
    assert TELESCOPE.spacings == (3.0, (1.3, 4.6))
    with pytest.raises(InputError, match=r"^telescope, invented: spacings\[1\]: a spacing between 1.3 and 4.6 m is"):
        _ = TELESCOPE.distances


def test_a_range_of_one_length_is_a_number() -> None:
    assert Vehicle("shut", [1.0, 2.0], [(1.5, 1.5)]).spacings == (1.5,)


def test_what_was_given_may_change_afterwards() -> None:
    loads, spacings = np.array([1e3, 2e3]), [3.0]
    vehicle = Vehicle("copied", loads, spacings)
    loads[:] = 9e9
    spacings.clear()
    assert (vehicle.gross, vehicle.spacings) == (3e3, (3.0,))
    for array in (vehicle.loads, vehicle.distances):
        with pytest.raises(ValueError, match="read-only"):
            array[0] = 1.0


REFUSED: list[tuple[dict[str, Any], str]] = [
    ({"loads": [], "spacings": []}, "axles: a vehicle needs at least one axle, got none"),
    ({"loads": [0.0, 0.0]}, "axles: all axle loads are 0 N; at least one must be above 0"),
    ({"loads": [1e3, -2e3]}, "axles[1].load: a load must be a finite number, 0 or more, got -2000 N"),
    ({"loads": [math.nan, 2e3]}, "axles[0].load: a load must be a finite number, 0 or more, got nan N"),
    ({"loads": [1e3, math.inf]}, "axles[1].load: a load must be a finite number, 0 or more, got inf N"),
    ({"spacings": []}, "spacings: 2 axles need 1 spacings, got 0"),
    ({"spacings": [3.0, 4.0]}, "spacings: 2 axles need 1 spacings, got 2"),
    ({"spacings": [-0.1]}, "spacings[0]: a spacing must be a finite number, 0 or more, got -0.1 m"),
    ({"spacings": [math.nan]}, "spacings[0]: a spacing must be a finite number, 0 or more, got nan m"),
    ({"spacings": [math.inf]}, "spacings[0]: a spacing must be a finite number, 0 or more, got inf m"),
    ({"spacings": [(3.0, math.inf)]}, "spacings[0]: a spacing must be a finite number, 0 or more, got (3.0, inf) m"),
    ({"spacings": [(-1.0, 3.0)]}, "spacings[0]: a spacing must be a finite number, 0 or more, got (-1.0, 3.0) m"),
    ({"spacings": [(4.0, 3.0)]}, "spacings[0]: a range runs from least to greatest, got (4.0, 3.0) m"),
    ({"spacings": [(1.0, 2.0, 3.0)]}, "spacings: a spacing is one number or a (least, greatest) pair, got (1.0, 2.0"),
    ({"headings": ()}, "headings: headings are +1, -1 or both, got ()"),
    ({"headings": (1, 0)}, "headings: headings are +1, -1 or both, got (1, 0)"),
    ({"gauges": (1.9,)}, "gauges: one for each of 2 axles, got 1"),
    ({"gauges": (1.9, 0.0)}, "gauges[1]: a gauge must be above 0, got 0.0 m"),
    ({"gauges": (math.nan, 1.9)}, "gauges[0]: a gauge must be above 0, got nan m"),
    ({"left_shares": (0.5, 0.5, 0.5)}, "left_shares: one for each of 2 axles, got 3"),
    ({"left_shares": (0.5, 1.01)}, "left_shares[1]: a left share is 0 to 1, got 1.01"),
    ({"left_shares": (-0.01, 0.5)}, "left_shares[0]: a left share is 0 to 1, got -0.01"),
    ({"left_shares": (math.nan, 0.5)}, "left_shares[0]: a left share is 0 to 1, got nan"),
]  # fmt: skip


@pytest.mark.parametrize(("changed", "message"), REFUSED, ids=[message for _, message in REFUSED])
def test_a_vehicle_refuses(changed: dict[str, Any], message: str) -> None:
    given: dict[str, Any] = {"loads": [1e3, 2e3], "spacings": [3.0]} | changed
    with pytest.raises(InputError, match=re.escape(message)):
        Vehicle("refused", given.pop("loads"), given.pop("spacings"), **given)


def test_an_axle_may_stand_on_its_left_or_right_wheels_alone() -> None:
    assert Vehicle("tilted", [1e3, 2e3], [3.0], left_shares=(0.0, 1.0)).left_shares == (0.0, 1.0)


def same(one: Vehicle, other: Vehicle) -> bool:
    """Say whether two vehicles are alike, field by field."""
    words = ("title", "spacings", "gauges", "left_shares", "strips", "tail", "headings")
    return (one.loads == other.loads).all() and all(getattr(one, word) == getattr(other, word) for word in words)


@pytest.mark.parametrize("vehicle", [CART, TELESCOPE], ids=lambda vehicle: vehicle.title)
def test_vehicles_come_back_from_pickle(vehicle: Vehicle) -> None:
    again = pickle.loads(pickle.dumps(vehicle))  # noqa: S301 - our own bytes
    assert same(again, vehicle)
    if not vehicle.has_ranges:
        assert again.distances.tolist() == vehicle.distances.tolist()


def test_loadings_and_crossings_come_back_from_pickle() -> None:
    loading = Loading("both", "farm", (Case("laden", CART), Case("empty", CART, factor=0.4)), source="invented")
    again = pickle.loads(pickle.dumps(Crossing(loading, "centre line", 0.2, lanes=1, speed=5.0)))  # noqa: S301 - ours
    assert (again.title, again.place, again.z, again.lanes, again.speed) == ("both", "centre line", 0.2, 1, 5.0)
    assert [(case.title, case.factor) for case in again.loading.cases] == [("laden", 1.0), ("empty", 0.4)]
    assert all(same(case.moving, CART) for case in again.loading.cases)


def test_a_loading_of_one_vehicle() -> None:
    loading = Loading.of(CART, "farm", source="invented", notes=("its drawbar is fixed",))
    assert loading.notes == ("its drawbar is fixed",)
    assert Loading.of(CART).notes == ()
    assert (loading.title, loading.kind, loading.gross, loading.source) == (CART.title, "farm", 175e3, "invented")
    (case,) = loading.cases
    assert (case.title, case.factor) == (CART.title, 1.0)
    assert case.moving is CART


def test_the_gross_of_a_loading_is_its_heaviest_vehicle_without_factors() -> None:
    lane = Fill(9.3e3, "uniform", "adverse")
    cases = (Case("empty", CART, factor=0.4), Case("overloaded", CART, factor=1.2), Case("lane only", None, (lane,)))
    assert Loading("three", "farm", cases).gross == 175e3
    assert Loading("lane", "design", cases[2:]).gross == 0.0


def test_trains_carry_whole_axles_times_the_cases_factor() -> None:
    both = Loading("both", "farm", (Case("laden", CART), Case("empty", CART, factor=0.4)))
    laden, empty = whole_trains(both)
    assert (laden.case, empty.case) == ("laden", "empty")
    assert_allclose(laden.shares, [1.0, 1.0, 1.0], rtol=0.0)
    assert_allclose(empty.felt, 0.4 * CART.loads, rtol=1e-15)
    one_way = Vehicle("one way", [1e3], [], headings=(-1,))
    assert whole_trains(one_way)[0].headings == (-1,)


@pytest.mark.parametrize("factor", [0.0, -1.0, math.nan, math.inf])
def test_a_case_factor_is_above_zero(factor: float) -> None:
    with pytest.raises(InputError, match=rf"^case laden: a factor must be above 0, got {factor}$"):
        Case("laden", CART, factor=factor)


def test_a_case_loads_something() -> None:
    with pytest.raises(InputError, match=r"^case nothing: a case needs a vehicle or a load that fills$"):
        Case("nothing", None)


def test_a_loading_has_cases_and_a_known_kind() -> None:
    with pytest.raises(InputError, match=r"^empty: a loading needs at least one case$"):
        Loading("empty", "farm", ())
    with pytest.raises(UnknownNameError, match=r'^kind: kind "farmer" is not one of .*farm.* \(nearest: "farm"\)$'):
        Loading.of(CART, "farmer")
    for kind in KINDS:
        assert Loading.of(CART, kind).kind == kind
