"""Where a vehicle crosses and what a part feels of it; what cannot be rated yet is refused by name, never left out."""

from __future__ import annotations

import math
import re
from dataclasses import replace

import numpy as np
import pytest
from numpy.testing import assert_allclose, assert_array_equal

from movload import Case, Crossing, Loading, Vehicle
from movload.bridge.across import Across
from movload.bridge.roadway import Roadway
from movload.errors import InputError, MissingDataError
from movload.traffic.crossing import TYPED_SHARE, whole_trains
from movload.traffic.formations import formations_on
from movload.traffic.loading import Fill
from movload.traffic.vehicle import Strip, Tail

CART = Vehicle("hay cart, invented", [20e3, 45e3], [2.7])
CROWD = Fill(4e3, "uniform", "adverse")
TYPED = Across.typed(0.6)
KERBS = Roadway(-1.9, 1.9, clearance=0.0)
BETWEEN = Across(np.array([-2.0, 2.0]), np.array([0.0, 1.0]))  # two trusses 4 m apart, this one on the left


@pytest.mark.parametrize("z", [math.nan, math.inf, -math.inf])
def test_a_place_across_is_a_number(z: float) -> None:
    """A nan would pass every comparison with the deck's edges."""
    with pytest.raises(InputError, match=rf"^hay cart, invented: the offset across must be a finite .* got {z} m$"):
        Crossing(Loading.of(CART), "beside", z)


def test_a_typed_share_holds_for_no_place_of_its_own() -> None:
    ((train,),) = formations_on(TYPED, Crossing(Loading.of(CART)))
    assert_array_equal(train.shares, [0.6, 0.6])
    refused = [
        (Crossing(Loading.of(CART), "left kerb", 1.1), '"left kerb" at 1.1 m'),
        (Crossing(Loading.of(CART), TYPED_SHARE, -0.2), '"typed share" at -0.2 m'),
        (Crossing(Loading.of(CART), "centre line"), '"centre line" at 0 m'),
        (Crossing(Loading.of(CART), lanes=2), "2 abreast"),
    ]
    for crossing, said in refused:
        rule = (
            f"^hay cart, invented: {said} cannot be rated from one typed share; type deck.truss_spacing and deck.kerbs"
        )
        with pytest.raises(MissingDataError, match=rule):
            formations_on(TYPED, crossing)


def test_between_two_trusses_the_place_decides_the_share() -> None:
    wide = replace(CART, gauges=(1.6, 1.8))
    for z, share in ((-1.0, 0.25), (0.0, 0.5), (1.0, 0.75)):
        ((train,),) = formations_on(BETWEEN, Crossing(Loading.of(wide), "offset", z), KERBS)
        assert_allclose(train.shares, [share, share], rtol=1e-15)
        assert_allclose(train.z, z, atol=1e-12)  # a place is told apart to a nanometre


def test_a_place_across_needs_the_gauge() -> None:
    with pytest.raises(MissingDataError, match=r"^hay cart, invented: axles\[0\]\.gauge: is needed to place it across"):
        formations_on(BETWEEN, Crossing(Loading.of(CART)), KERBS)


def test_a_case_counts_on_top_of_the_share() -> None:
    loading = Loading("both", "farm", (Case("laden", CART), Case("empty", CART, factor=0.5)))
    (laden,), (empty,) = formations_on(TYPED, Crossing(loading))
    assert_array_equal(laden.felt, 0.6 * CART.loads)
    assert_array_equal(empty.felt, 0.3 * CART.loads)


@pytest.mark.parametrize(
    ("asked", "said"),
    [
        ({"lanes": -1}, "0 to 6 may go abreast, got -1"),
        ({"lanes": 7}, "0 to 6 may go abreast, got 7"),
        ({"speed": 0.0}, "a speed must be above 0, got 0.0 m/s"),
        ({"speed": math.nan}, "a speed must be above 0, got nan m/s"),
        ({"wander": -0.1}, "the wander must be 0 or more, got -0.1 m"),
    ],
)
def test_a_way_of_crossing_that_cannot_be_is_refused(asked: dict[str, float], said: str) -> None:
    with pytest.raises(InputError, match=f"^hay cart, invented: {said}$"):
        Crossing(Loading.of(CART), **asked)


STRIPPED = replace(CART, strips=(Strip(0.0, 3.0, 8e3),))
TAILED = replace(CART, tail=Tail(6.0, 8e3))
REFUSED = [
    (Case("crowd", None, (CROWD,)), "case crowd: loads that fill the bridge cannot be swept yet"),
    (Case("cart in a crowd", CART, (CROWD,)), "case cart in a crowd: loads that fill the bridge cannot be swept yet"),
    (Case("crawler", STRIPPED), "hay cart, invented: uniform loads that move with a vehicle cannot be swept yet"),
    (Case("train", TAILED), "hay cart, invented: uniform loads that move with a vehicle cannot be swept yet"),
]


@pytest.mark.parametrize(("case", "said"), REFUSED, ids=[case.title for case, _ in REFUSED])
def test_what_is_not_axles_is_refused(case: Case, said: str) -> None:
    """Also where it is the second case, behind one that could be swept."""
    loading = Loading("mixed", "farm", (Case("plain", CART), case))
    for trains in (lambda: formations_on(TYPED, Crossing(loading)), lambda: whole_trains(loading)):
        with pytest.raises(InputError, match=f"^{re.escape(said)}$"):
            trains()


@pytest.mark.parametrize("vehicle", [STRIPPED, TAILED], ids=["strip", "tail"])
def test_a_bare_vehicle_with_a_uniform_load_is_refused(vehicle: Vehicle) -> None:
    with pytest.raises(InputError, match="uniform loads that move with a vehicle cannot be swept yet"):
        whole_trains(vehicle)
