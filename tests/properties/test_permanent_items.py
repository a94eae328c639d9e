"""Laws of permanent items: what one part does not get another does, strips add up, and nothing is lost on the way."""

from __future__ import annotations

from fractions import Fraction
from typing import TYPE_CHECKING

import numpy as np
from hypothesis import given
from hypothesis import strategies as st
from numpy.testing import assert_allclose
from oracles.lagrange import holds_of
from strategies import Laid, determinate, laid

from movload import influence_lines
from movload.bridge.across import Across
from movload.bridge.deck import stations_of
from movload.bridge.permanent import CLASSES, Item
from movload.statics.floor import truss_lines
from movload.statics.part import Part
from movload.statics.spread import item_effects, share_across

if TYPE_CHECKING:
    from collections.abc import Sequence

    from numpy.typing import NDArray

    Floats = NDArray[np.float64]

EXACT = 1e-13  # of the line's largest ordinate: a dozen roundings
BALANCED = (
    1e-11  # as in test_equilibrium: forces are found to 1e-14 of the largest, which beds make some ten times more
)
REACH = 6.0  # m
spacings = st.floats(2.3, 9.1)
places = st.floats(-REACH, REACH)
spans = st.tuples(places, places).map(lambda pair: (min(pair), max(pair))) | places.map(lambda z: (z, z))
weights = st.floats(0.0, 20e3, allow_subnormal=False)


@st.composite
def lines_across(draw: st.DrawFn) -> Across:
    """Draw a line across of 2-7 points that reaches over all places drawn here."""
    steps = draw(st.lists(st.floats(0.05, 4.0), min_size=1, max_size=6))
    z = np.concatenate(([0.0], np.cumsum(steps)))
    ordinates = draw(st.lists(st.floats(-2.0, 2.0), min_size=z.size, max_size=z.size))
    return Across(-REACH + z * (2.0 * REACH / z[-1]) * (1.0 + 1e-12), np.array(ordinates))


@st.composite
def items(draw: st.DrawFn, points: Sequence[str]) -> Item:
    """Draw an item of any class, its weight along the bridge and at panel points."""
    low, high = draw(spans)
    at = draw(st.lists(st.tuples(st.sampled_from(points), weights), max_size=3))
    return Item("thing", draw(st.sampled_from(CLASSES)), line=draw(weights), points=tuple(at), low=low, high=high)


def exact_mean(across: Across, low: float, high: float) -> float:
    """Return the mean of a line between two places in rational numbers: trapezium by trapezium, point by point."""
    z, a = [Fraction(v) for v in across.z.tolist()], [Fraction(v) for v in across.ordinate.tolist()]
    begin, end = Fraction(low), Fraction(high)
    area = Fraction(0)
    for z0, z1, a0, a1 in zip(z[:-1], z[1:], a[:-1], a[1:], strict=True):
        first, last = max(begin, z0), min(end, z1)
        if first < last:
            at_middle = a0 + (a1 - a0) * ((first + last) / 2 - z0) / (z1 - z0)
            area += (last - first) * at_middle
    return float(area / (end - begin))


def joint_loads(bridge: Laid, item: Item) -> Floats:
    """Return what an item brings to each panel point [N], panel by panel."""
    x = stations_of(bridge.truss, bridge.panel_points)
    loads = np.zeros(x.size)
    for panel in range(x.size - 1):
        loads[panel : panel + 2] += item.line * float(x[panel + 1] - x[panel]) / 2
    for name, weight in item.points:
        loads[bridge.panel_points.index(name)] += weight
    return loads


def part_of(bridge: Laid, across: Across) -> tuple[Part, list[str]]:
    """Return a truss as a part, and the names of its stations."""
    response = influence_lines(bridge.truss, bridge.panel_points)
    return Part("truss", response, across), [str(point) for point in bridge.panel_points]


@given(spacings, spans)
def test_two_trusses_share_the_whole(spacing: float, place: tuple[float, float]) -> None:
    left, right = truss_lines(spacing, (-REACH, REACH))
    shares = share_across(left, *place), share_across(right, *place)
    assert_allclose(sum(shares), 1.0, rtol=0.0, atol=EXACT * REACH / spacing)
    middle = 0.5 * (place[0] + place[1])  # the lever rule of the resultant
    assert_allclose(shares, (0.5 + middle / spacing, 0.5 - middle / spacing), rtol=0.0, atol=EXACT * REACH / spacing)


@given(lines_across(), spans)
def test_lines_that_add_up_to_one_share_the_whole(across: Across, place: tuple[float, float]) -> None:
    """One line at each of the points, 1 there and 0 at the others, as stringers share a deck."""
    shares = [share_across(Across(across.z, one), *place) for one in np.eye(across.z.size)]
    assert_allclose(sum(shares), 1.0, rtol=0.0, atol=EXACT)
    weighted = float(np.dot(shares, across.ordinate))
    assert_allclose(weighted, share_across(across, *place), rtol=0.0, atol=EXACT * np.abs(across.ordinate).max())


@given(lines_across(), spans.filter(lambda place: place[0] < place[1]))
def test_the_mean_is_that_in_rational_numbers(across: Across, place: tuple[float, float]) -> None:
    found = share_across(across, *place)
    assert_allclose(found, exact_mean(across, *place), rtol=0.0, atol=EXACT * np.abs(across.ordinate).max())


@given(lines_across(), st.tuples(places, places, places).map(sorted))
def test_a_strip_cut_in_two_weighs_the_same(across: Across, cuts: list[float]) -> None:
    low, cut, high = cuts
    apart = (cut - low) * share_across(across, low, cut) + (high - cut) * share_across(across, cut, high)
    whole = (high - low) * share_across(across, low, high)
    assert_allclose(apart, whole, rtol=0.0, atol=EXACT * 2.0 * REACH * np.abs(across.ordinate).max())


@given(laid(), lines_across(), st.data())
def test_items_are_loads_on_the_panel_points(bridge: Laid, across: Across, data: st.DataObject) -> None:
    """Panel by panel, weight by weight, share by share: the response to what a person would put on each point."""
    part, names = part_of(bridge, across)
    joints = [point for point in bridge.panel_points if isinstance(point, str)]
    drawn = data.draw(st.lists(items(joints), max_size=4))
    found = item_effects(part, drawn, names)
    assert found.shape == (len(CLASSES), len(part.response.effects))
    ordinates = influence_lines(bridge.truss, bridge.panel_points).ordinates
    expected, size = np.zeros(found.shape), np.zeros(found.shape)
    for item in drawn:
        loads = share_across(across, item.low, item.high) * joint_loads(bridge, item)
        expected[CLASSES.index(item.kind)] += ordinates @ loads
        size[CLASSES.index(item.kind)] += np.abs(ordinates) @ np.abs(loads)
    assert (np.abs(found - expected) <= EXACT * size).all()


@given(laid(), lines_across(), st.floats(0.0, 3.0), st.data())
def test_effects_add_and_grow_with_the_weight(bridge: Laid, across: Across, times: float, data: st.DataObject) -> None:
    part, names = part_of(bridge, across)
    joints = [point for point in bridge.panel_points if isinstance(point, str)]
    first, second = data.draw(items(joints)), data.draw(items(joints))
    more = Item("more", first.kind, line=times * first.line, points=tuple((n, times * w) for n, w in first.points),
                low=first.low, high=first.high)  # fmt: skip
    one, other, grown = (item_effects(part, [item], names) for item in (first, second, more))
    both, turned = item_effects(part, [first, second], names), item_effects(part, [second, more], names)
    size = (1.0 + times) * (np.abs(part.response.under(np.eye(len(names)))) @ (
        2.0 * (joint_loads(bridge, first) + joint_loads(bridge, second))))  # fmt: skip  # ordinates are up to 2
    assert (np.abs(both - one - other) <= EXACT * size).all()
    assert (np.abs(turned - other - times * one) <= EXACT * size).all()
    assert (np.abs(grown - times * one) <= EXACT * size).all()


@given(determinate(plain_deck=True), spacings, st.data())
def test_the_bearings_of_both_trusses_carry_every_item(bridge: Laid, spacing: float, data: st.DataObject) -> None:
    names = [str(point) for point in bridge.panel_points]
    drawn = data.draw(st.lists(items(names), min_size=1, max_size=4))
    directions = np.array([hold.direction for support in bridge.truss.supports for hold in holds_of(support)])
    pushed, largest = np.zeros((len(CLASSES), 2)), 0.0
    for across in truss_lines(spacing, (-REACH, REACH)):
        part, _ = part_of(bridge, across)
        reactions = item_effects(part, drawn, names)[:, [row.kind == "reaction" for row in part.response.effects]]
        pushed += reactions @ directions
        largest = max(largest, float(np.abs(reactions).max()))
    span = float(np.ptp(stations_of(bridge.truss, bridge.panel_points)))
    for kind, found in zip(CLASSES, pushed, strict=True):
        whole = sum(item.line * span + sum(w for _, w in item.points) for item in drawn if item.kind == kind)
        assert_allclose(found, [0.0, whole], rtol=0.0, atol=BALANCED * max(whole, largest))
