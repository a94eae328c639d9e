"""Loads that fill, convoys and what may be in a case, as values: what follows, and every input that is refused.

References
----------
EN 1991-2, 5.3.2.1: density of a dense crowd by its length; from memory.
"""

from __future__ import annotations

import math
import pickle
import re
from typing import Any

import pytest
from numpy.testing import assert_allclose

from movload.errors import InputError, UnknownNameError
from movload.traffic.fill import crowd_density
from movload.traffic.loading import Case, Fill, Following, Loading
from movload.traffic.vehicle import MOST_AXLES, MOST_RANGES, Strip, Tail, Vehicle

CART = Vehicle("cart, invented", [28e3, 62e3], [2.8])  # type: ignore[arg-type]  # lists become arrays
STRIPS = (Strip(0.0, 3.0, 20e3, gauge=2.0), Strip(3.0, 1.0, 30e3, gauge=2.0))
TRACKS = Vehicle("tracks, invented", [], [], strips=STRIPS)  # type: ignore[arg-type]
LANE = Fill(9e3)


@pytest.mark.parametrize(
    ("length", "density"),
    [
        (0, 5.0),
        (10, 5.0),
        (20, 4.40),
        (25, 4.18),
        (30, 4.00),
        (50, 3.50),
        (100, 2.92),
        (150, 2.67),
        (210, 2.50),
        (900, 2.5),
    ],
)
def test_en_crowd_density(length: float, density: float) -> None:
    """The formula q = 2.0 + 120/(L + 30), 2.5 to 5 kN/m2 (from memory); to half of the last printed digit."""
    assert_allclose(crowd_density(length) / 1e3, density, rtol=0, atol=0.00501)
    assert Fill(density="en crowd", across="full width").load_over(length) == crowd_density(length)


def test_a_density_may_be_capped_and_a_plain_load_has_one() -> None:
    assert Fill(3e3, density="en crowd", across="full width").load_over(10.0) == 3e3
    assert Fill(3e3, density="en crowd", across="full width").load_over(900.0) == 2.5e3
    assert LANE.load_over(10.0) == LANE.load_over(900.0) == 9e3


REFUSED: list[tuple[dict[str, Any], str]] = [
    ({"load": math.nan}, "load: a load that fills must be a finite number, 0 or more, got nan"),
    ({"load": -1.0}, "load: a load that fills must be a finite number, 0 or more, got -1"),
    ({"web_load": 26e3}, "web_load: only a knife edge has one, got 26000 on a uniform load"),
    ({"shape": "knife edge", "web_load": math.inf}, "web_load: what a knife edge is for webs must be a finite number"),
    ({"shape": "knife edge", "per_area": True, "across": "full width"}, "per_area: a knife edge is one load"),
    ({"per_area": True}, "across: a load per area needs to know how wide it lies"),
    ({"density": "en crowd"}, "across: a load per area needs to know how wide it lies"),
    ({"gauge": 0.0}, "gauge: a gauge must be above 0, got 0 m"),
    ({"gauge": -2.0}, "gauge: a gauge must be a finite number, 0 or more, got -2"),
    ({"gauge": 2.0, "across": "left half"}, 'gauge: "left half" leaves it no gauge, got 2 m'),
    ({"clear": (1.0, 0.0)}, 'clear: a clear distance goes with where = "outside"'),
    ({"where": "outside", "clear": (1.0, math.nan)}, "clear: a clear distance must be a finite number"),
    ({"where": "at"}, 'where: a place x goes with where = "at", and that with a place'),
    ({"x": (1.0, 2.0)}, 'where: a place x goes with where = "at", and that with a place'),
    ({"where": "at", "x": (2.0, 1.0)}, "at: a stretch runs from the least x to the greatest, got 2 to 1 m"),
    ({"where": "at", "x": (0.0, math.inf)}, "at: a place is finite, got 0 to inf m"),
    ({"where": "at", "x": (1.0, 2.0), "shape": "knife edge"}, "at: a knife edge stands at one x, got 1 to 2 m"),
    ({"where": "outside", "shape": "knife edge"}, "where: a knife edge stands wherever it is adverse"),
]  # fmt: skip


@pytest.mark.parametrize(("changed", "message"), REFUSED, ids=[message for _, message in REFUSED])
def test_a_fill_refuses(changed: dict[str, Any], message: str) -> None:
    with pytest.raises(InputError, match=f"^{re.escape(message)}"):
        Fill(**({"load": 9e3} | changed))


@pytest.mark.parametrize(
    ("changed", "nearest"),
    [
        ({"shape": "unifrm"}, "uniform"), ({"across": "ful width"}, "full width"), ({"where": "advers"}, "adverse"),
        ({"density": "crowd"}, "en crowd"),
    ],
)  # fmt: skip
def test_a_word_that_is_not_known(changed: dict[str, Any], nearest: str) -> None:
    with pytest.raises(UnknownNameError, match=rf'" is not one of .*\(nearest: "{nearest}"\)$'):
        Fill(9e3, **changed)


def test_tracks_weigh_what_their_strips_carry() -> None:
    assert (TRACKS.gross, TRACKS.loads.size, TRACKS.distances.size, TRACKS.has_ranges) == (90e3, 0, 0, False)
    assert Vehicle("both", [10e3], [], strips=TRACKS.strips).gross == 100e3  # type: ignore[arg-type]
    again = pickle.loads(pickle.dumps(TRACKS))  # noqa: S301 - our own bytes
    assert (again.strips, again.distances.size) == (TRACKS.strips, 0)


VEHICLES: list[tuple[dict[str, Any], str]] = [
    ({"tail": Tail(1.0, 5e3)}, "axles: a vehicle needs at least one axle, got none"),
    ({"strips": (Strip(0.0, 1.0, 0.0),)}, "strips: all of its loads are 0; at least one must be above 0"),
    ({"strips": TRACKS.strips, "spacings": [1.0]}, "spacings: 0 axles need 0 spacings, got 1"),
    ({"strips": TRACKS.strips, "gauges": (2.0,)}, "gauges: one for each of 0 axles, got 1"),
    ({"strips": (Strip(0.0, 1.0, 1e3),) * (MOST_AXLES + 1)}, "strips: a vehicle has at most 200 strips, got 201"),
    ({"loads": [1.0] * 201, "spacings": [1.0] * 200}, "axles: a vehicle has at most 200 axles, got 201"),
    (
        {"loads": [1.0] * 14, "spacings": [(1.0, 2.0)] * (MOST_RANGES + 1)},
        "spacings: at most 12 spacings may be ranges, got 13",
    ),
]  # fmt: skip


@pytest.mark.parametrize(("given", "message"), VEHICLES, ids=[message for _, message in VEHICLES])
def test_a_vehicle_with_uniform_loads_refuses(given: dict[str, Any], message: str) -> None:
    given = {"loads": [], "spacings": []} | given
    with pytest.raises(InputError, match=f"^{re.escape(message)}$"):
        Vehicle("refused", given.pop("loads"), given.pop("spacings"), **given)


CASES: list[tuple[dict[str, Any], str]] = [
    ({"moving": None, "fills": (Fill(9e3, where="outside"),)}, "case a: fills: a load outside the vehicle needs a"),
    ({"moving": None, "fills": (LANE,), "convoy": Following(2, 9.0)}, "case a: convoy: a convoy needs a vehicle"),
    (
        {"moving": Vehicle("train", [1e3], [], tail=Tail(1.0, 5e3)), "convoy": Following(2, 9.0)},  # type: ignore[arg-type]
        "case a: convoy: nothing can follow a load that never ends",
    ),
    ({"convoy": Following(101, 9.0)}, "case a: convoy: a convoy has at most 200 axles or strips in all, got 202"),
    ({"above": -1.0}, "case a: it counts for lengths above 0 m or more, got -1 m"),
    ({"above": math.inf}, "case a: it counts for lengths above 0 m or more, got inf m"),
    ({"relieving": 1.5}, "case a: what counts where it relieves is 0 to 1, got 1.5"),
]  # fmt: skip


@pytest.mark.parametrize(("changed", "message"), CASES, ids=[message for _, message in CASES])
def test_a_case_refuses(changed: dict[str, Any], message: str) -> None:
    with pytest.raises(InputError, match=f"^{re.escape(message)}"):
        Case("a", **({"moving": CART} | changed))


@pytest.mark.parametrize(("most", "headway"), [(0, 9.0), (2, -1.0), (2, math.nan)])
def test_a_convoy_refuses(most: int, headway: float) -> None:
    with pytest.raises(InputError, match=r"^most: a convoy is of 1 or more|^headway: a headway must be 0 or more"):
        Following(most, headway)


def test_a_loading_has_each_title_once_and_a_weight_above_zero() -> None:
    with pytest.raises(InputError, match=r'^cases\[2\]\.title: "up" is the title of an earlier case already$'):
        Loading("twice", "farm", (Case("up", CART), Case("down", CART), Case("up", TRACKS)))
    for weight in (0.0, -1.0, math.inf):
        with pytest.raises(InputError, match=rf"^weight: a weight must be above 0, got {weight:g} N$"):
            Loading("weightless", "farm", (Case("up", CART),), weight=weight)
    assert Loading("lane", "design", (Case("lane", None, (LANE,)),), weight=320e3).gross == 320e3
