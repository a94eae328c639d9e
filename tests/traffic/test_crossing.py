"""Where a vehicle crosses and what a part feels of it; what cannot be rated yet is refused by name, never left out."""

from __future__ import annotations

import math
import re
from dataclasses import replace

import numpy as np
import pytest
from numpy.testing import assert_array_equal

from movload import Case, Crossing, Loading, Vehicle
from movload.bridge.across import Across
from movload.errors import InputError
from movload.traffic.crossing import TYPED_SHARE, trains_on, whole_trains
from movload.traffic.loading import Fill
from movload.traffic.vehicle import Strip, Tail

CART = Vehicle("hay cart, invented", [20e3, 45e3], [2.7])
CROWD = Fill(4e3, "uniform", "adverse")
TYPED = Across.typed(0.6)
BETWEEN = Across(np.array([-2.0, 2.0]), np.array([0.0, 1.0]))  # two trusses 4 m apart, this one on the left


@pytest.mark.parametrize("z", [math.nan, math.inf, -math.inf])
def test_a_place_across_is_a_number(z: float) -> None:
    """A nan would pass every comparison with the deck's edges."""
    with pytest.raises(InputError, match=rf"^hay cart, invented: the offset across must be a finite .* got {z} m$"):
        Crossing(Loading.of(CART), "beside", z)


def test_a_typed_share_holds_for_no_place_of_its_own() -> None:
    (train,) = trains_on(TYPED, Crossing(Loading.of(CART)))
    assert_array_equal(train.shares, [0.6, 0.6])
    refused = [
        (Crossing(Loading.of(CART), "left kerb", 1.1), '"left kerb" at 1.1 m'),
        (Crossing(Loading.of(CART), TYPED_SHARE, -0.2), '"typed share" at -0.2 m'),
        (Crossing(Loading.of(CART), "centre line"), '"centre line" at 0 m'),
    ]
    for crossing, said in refused:
        rule = f"^hay cart, invented: one share is typed wherever the vehicle keeps; {said} cannot be rated$"
        with pytest.raises(InputError, match=rule):
            trains_on(TYPED, crossing)


def test_between_two_trusses_the_place_decides_the_share() -> None:
    for z, share in ((-2.0, 0.0), (0.0, 0.5), (1.0, 0.75)):
        (train,) = trains_on(BETWEEN, Crossing(Loading.of(CART), f"z = {z:g} m", z))
        assert_array_equal(train.shares, [share, share])


def test_a_case_counts_on_top_of_the_share() -> None:
    loading = Loading("both", "farm", (Case("laden", CART), Case("empty", CART, factor=0.5)))
    laden, empty = trains_on(TYPED, Crossing(loading))
    assert_array_equal(laden.shares, [0.6, 0.6])
    assert_array_equal(empty.shares, [0.3, 0.3])


@pytest.mark.parametrize(
    ("crossing", "said"),
    [
        (Crossing(Loading.of(CART), lanes=2), "hay cart, invented: 2 lanes cannot be rated yet"),
        (Crossing(Loading.of(CART), lanes=0), "hay cart, invented: 0 lanes cannot be rated yet"),
        (Crossing(Loading.of(CART), speed=5.0), "hay cart, invented: a speed of 5 m/s cannot be rated yet"),
        (Crossing(Loading.of(CART), speed=0.0), "hay cart, invented: a speed of 0 m/s cannot be rated yet"),
    ],
)
def test_lanes_and_speed_are_refused(crossing: Crossing, said: str) -> None:
    for across in (TYPED, BETWEEN):
        with pytest.raises(InputError, match=f"^{said}: one vehicle at a time, no speed$"):
            trains_on(across, crossing)


STRIPPED = replace(CART, strips=(Strip(0.0, 3.0, 8e3),))
TAILED = replace(CART, tail=Tail(6.0, 8e3))
REFUSED = [
    (Case("crowd", None, (CROWD,)), "case crowd: loads that fill the bridge cannot be swept yet"),
    (Case("cart in a crowd", CART, (CROWD,)), "case cart in a crowd: loads that fill the bridge cannot be swept yet"),
    (Case("abreast", CART, lanes=2), "case abreast: 2 lanes cannot be swept yet"),
    (Case("crawler", STRIPPED), "hay cart, invented: uniform loads that move with a vehicle cannot be swept yet"),
    (Case("train", TAILED), "hay cart, invented: uniform loads that move with a vehicle cannot be swept yet"),
]


@pytest.mark.parametrize(("case", "said"), REFUSED, ids=[case.title for case, _ in REFUSED])
def test_what_is_not_axles_is_refused(case: Case, said: str) -> None:
    """Also where it is the second case, behind one that could be swept."""
    loading = Loading("mixed", "farm", (Case("plain", CART), case))
    for trains in (lambda: trains_on(TYPED, Crossing(loading)), lambda: whole_trains(loading)):
        with pytest.raises(InputError, match=f"^{re.escape(said)}$"):
            trains()


@pytest.mark.parametrize("vehicle", [STRIPPED, TAILED], ids=["strip", "tail"])
def test_a_bare_vehicle_with_a_uniform_load_is_refused(vehicle: Vehicle) -> None:
    with pytest.raises(InputError, match="uniform loads that move with a vehicle cannot be swept yet"):
        whole_trains(vehicle)
