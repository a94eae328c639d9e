"""What stands on a bridge for good: weights from layers and areas, and every item that is refused. Bridges invented."""

from __future__ import annotations

import math
import pickle
import re
from dataclasses import FrozenInstanceError
from typing import Any

import pytest

from movload.bridge.permanent import CLASSES, Item, PermanentItems
from movload.errors import InputError, MissingDataError, UnknownNameError
from movload.units import to_si

EXACT = 1e-14  # a handful of products


def test_the_classes_are_these_in_this_order() -> None:
    assert CLASSES == ("components", "surfacing", "removable surfacing", "other")


def test_a_layer_weighs_thickness_density_and_gravity_over_its_width() -> None:
    """75 mm of timber of 800 kg/m3 over 3.6 m: 0.075 x 800 = 60 kg/m2, x 9.80665 = 588.399 N/m2, x 3.6 = 2118.2364."""
    planks = Item.layer("planks", "components", thickness=0.075, density=800.0, across=(-1.7, 1.9))
    assert planks.line == pytest.approx(2118.2364, rel=EXACT)
    assert (planks.low, planks.high, planks.points, planks.share) == (-1.7, 1.9, (), None)


def test_a_layer_in_feet_and_pounds_by_hand() -> None:
    """3 in of 50 lb/ft3 are 12.5 lb/ft2; over 12 ft that is 150 lb/ft."""
    width = (-to_si("6 ft", "length"), to_si("6 ft", "length"))
    planks = Item.layer(
        "planks", "components", thickness=to_si("3 in", "length"), density=to_si("50 pcf", "density"), across=width
    )
    by_area = Item.per_area("planks", "components", to_si("12.5 psf", "pressure"), width)
    assert planks.line == pytest.approx(to_si("150 plf", "line load"), rel=EXACT)
    assert by_area.line == pytest.approx(to_si("150 plf", "line load"), rel=EXACT)


def test_a_weight_per_area_counts_the_width_wherever_it_lies() -> None:
    """1.2 kN/m2 on a footway from 2.0 to 3.5 m left of the centre line: 1.8 kN/m."""
    footway = Item.per_area("footway", "other", 1200.0, (2.0, 3.5))
    assert footway.line == pytest.approx(1800.0, rel=EXACT)
    assert (footway.low, footway.high) == (2.0, 3.5)


def test_a_line_needs_one_place_and_a_typed_share_none() -> None:
    assert Item("railing", "components", line=350.0, low=1.85, high=1.85).share is None
    assert Item("deck", "components", line=9e3, share=0.5).share == 0.5
    assert Item("gauge house", "other", points=(("L2", 12e3),), low=-2.0, high=-1.0).points == (("L2", 12e3),)


def test_the_limits_themselves_are_taken() -> None:
    assert Item("none yet", "surfacing", line=0.0, share=0.0).line == 0.0
    assert Item("outside", "other", line=1.0, share=2.0).share == 2.0
    assert [PermanentItems((), share).detail_allowance for share in (0.0, 1.0)] == [0.0, 1.0]


HERE: dict[str, Any] = {"low": -1.0, "high": 1.0}
REFUSED: dict[str, tuple[dict[str, Any], type[InputError], str]] = {
    "no title": ({"title": "  "}, InputError, "title: an item says what it is, got an empty text"),
    "class mistyped": (
        {"kind": "surfaceing"},
        UnknownNameError,
        'kind: "surfaceing" is not one of components, surfacing, removable surfacing, other (nearest: "surfacing")',
    ),
    "class of another world": (
        {"kind": "wind"}, UnknownNameError,
        'kind: "wind" is not one of components, surfacing, removable surfacing, other'
    ),
    "line below 0": ({"line": -1.5}, InputError, "line: must be 0 or more, got -1.5 N/m"),
    "line without end": ({"line": math.inf}, InputError, "line: must be a finite number, got inf N/m"),
    "line no number": ({"line": math.nan}, InputError, "line: must be a finite number, got nan N/m"),
    "point below 0": (
        {"points": (("L1", 5.0), ("L2", -3.0))}, InputError, "points.L2: must be 0 or more, got -3.0 N"
    ),
    "point no number": (
        {"points": (("L1", math.nan),)}, InputError, "points.L1: must be a finite number, got nan N"
    ),
    "left to right": (
        {"low": 1.0, "high": -1.0}, InputError, "across: lies from right to left, got 1 to -1 m"
    ),
    "without end": (
        {"low": -math.inf, "high": 1.0}, InputError, "across: lies from right to left, got -inf to 1 m"
    ),
    "one end only": (
        {"low": 0.5, "high": math.nan}, InputError, "across: lies from right to left, got 0.5 to nan m"
    ),
    "nowhere": (
        {"low": math.nan, "high": math.nan}, MissingDataError, "across: is needed: where across it lies"
    ),
    "share twice": (
        {"share": 0.5}, InputError, "truss_share: the share is given twice: typed, and by where across it lies"
    ),
    "share beside one end": (
        {"share": 0.5, "low": math.nan}, InputError, "truss_share: the share is given twice: typed, and by where"
    ),
    "share in per cent": (
        {"share": 56.0, "low": math.nan, "high": math.nan},
        InputError,
        "truss_share: must be 0 to 2 (one half is 0.5), got 56.0",
    ),
    "share below 0": (
        {"share": -0.1, "low": math.nan, "high": math.nan}, InputError, "truss_share: must be 0 to 2 (one half is"
    ),
    "share no number": (
        {"share": math.nan, "low": math.nan, "high": math.nan}, InputError, "truss_share: must be 0 to 2 (one half is"
    ),
}  # fmt: skip


@pytest.mark.parametrize(("words", "error", "message"), REFUSED.values(), ids=REFUSED)
def test_an_item_that_is_none_is_refused(words: dict[str, Any], error: type[InputError], message: str) -> None:
    said = {"title": "gravel", "kind": "surfacing", "line": 1e3, **HERE, **words}
    with pytest.raises(error, match=f"^{re.escape(message)}"):
        Item(said.pop("title"), said.pop("kind"), **said)


@pytest.mark.parametrize(
    ("thickness", "density", "low", "high", "message"),
    [
        (-0.1, 2000.0, -1.0, 1.0, "thickness: must be 0 or more, got -0.1 m"),
        (math.nan, 2000.0, -1.0, 1.0, "thickness: must be a finite number, got nan m"),
        (0.1, -2000.0, -1.0, 1.0, "density: must be 0 or more, got -2000.0 kg/m3"),
        (0.1, math.inf, -1.0, 1.0, "density: must be a finite number, got inf kg/m3"),
        (0.1, 2000.0, 1.0, 1.0, "across: a weight per area needs a width, got 1 to 1 m"),
        (0.1, 2000.0, 1.0, -1.0, "across: a weight per area needs a width, got 1 to -1 m"),
        (0.1, 2000.0, math.nan, 1.0, "across: a weight per area needs a width, got nan to 1 m"),
        (0.1, 2000.0, -1.0, math.inf, "across: a weight per area needs a width, got -1 to inf m"),
    ],
)
def test_a_layer_that_is_none_is_refused(
    thickness: float, density: float, low: float, high: float, message: str
) -> None:
    """Two signs that would cancel are still two mistakes, each named."""
    with pytest.raises(InputError, match=f"^{re.escape(message)}$"):
        Item.layer("gravel", "surfacing", thickness=thickness, density=density, across=(low, high))


@pytest.mark.parametrize(
    ("weight", "message"),
    [
        (-5.0, "per_area: must be 0 or more, got -5.0 N/m2"),
        (math.inf, "per_area: must be a finite number, got inf N/m2"),
    ],
)
def test_a_weight_per_area_that_is_none_is_refused(weight: float, message: str) -> None:
    with pytest.raises(InputError, match=f"^{re.escape(message)}$"):
        Item.per_area("gravel", "surfacing", weight, (-1.0, 1.0))


@pytest.mark.parametrize("allowance", [-0.01, 1.01, 15.0, math.nan])
def test_an_allowance_is_a_fraction(allowance: float) -> None:
    with pytest.raises(InputError, match=r"^detail_allowance: must be 0 to 1 \(15 % is 0.15\), got "):
        PermanentItems((), detail_allowance=allowance)


def test_items_travel_and_stay_as_they_are() -> None:
    items = PermanentItems((Item("gravel", "surfacing", line=1e3, **HERE), Item("deck", "components", share=0.5)), 0.15)
    again = pickle.loads(pickle.dumps(items))  # noqa: S301  # its own bytes
    assert again.items[0] == items.items[0]
    assert (again.items[1].title, again.items[1].share, again.detail_allowance) == ("deck", 0.5, 0.15)
    with pytest.raises(FrozenInstanceError):
        items.items[0].line = 0.0  # type: ignore[misc]  # that it cannot be is the test
