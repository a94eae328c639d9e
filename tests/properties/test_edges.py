"""Peaks at the edges of the rule: overhangs, abutments, long trains, axles that coincide, one heading only."""

from __future__ import annotations

import numpy as np
import pytest
from hypothesis import given
from hypothesis import strategies as st
from numpy.testing import assert_allclose
from oracles.stepping import extremes, scales
from oracles.trusses import bottom, mirrored, pratt, simple_span, truss_of
from strategies import Laid, laid, vehicles

from movload import InfluenceLines, Support, Vehicle, effects_with_front_at, influence_lines, sweep

PANELS = [3.3, 2.7, 4.1, 3.6]
SPAN = sum(PANELS)


def span(supports: list[Support] | None = None, deck: list[str | float] | None = None) -> InfluenceLines:
    """Return the lines of one invented truss of four panels."""
    truss = truss_of(pratt(PANELS, [3.1, 3.5, 2.9]), supports or simple_span(4))
    return influence_lines(truss, deck or bottom(4))


def test_a_reaction_is_worst_with_an_axle_just_inside() -> None:
    peak = sweep(span(), Vehicle("one", [80e3], []))["L0 y"].highest
    assert (peak.value, peak.position, peak.heading, peak.station) == (pytest.approx(80e3, rel=1e-12), 0.0, 1, 0)


def test_an_overhang_lifts_the_far_bearing_by_its_end_ordinate() -> None:
    lines = span([Support("L1"), Support("L4", 0)])
    between = SPAN - PANELS[0]
    assert lines["L4 normal"].ordinates[0] == pytest.approx(-PANELS[0] / between, rel=1e-12)
    peaks = sweep(lines, Vehicle("one", [80e3], []))
    assert peaks["L4 normal"].lowest.value == pytest.approx(-80e3 * PANELS[0] / between, rel=1e-12)
    assert peaks["L4 normal"].lowest.station == 0
    assert peaks["L1 y"].highest.value == pytest.approx(80e3 * SPAN / between, rel=1e-12)


def test_losing_an_axle_beyond_an_overhang_can_be_the_worst() -> None:
    """Two axles, the second barely off the overhang that lifts the far bearing while the first presses on it."""
    lines = span([Support("L1"), Support("L4", 0)])
    pair = Vehicle("as long as the deck", [50e3, 50e3], [SPAN], headings=(1,))
    peak = sweep(lines, pair)["L4 normal"].highest
    assert peak.value == pytest.approx(50e3, rel=1e-12)  # the rear axle has not come on; with it the row is less
    assert peak.position <= SPAN
    by_hand = effects_with_front_at(lines, pair, peak.position, peak.heading)
    row = [effect.name for effect in lines.effects].index("L4 normal")
    assert by_hand[row] == pytest.approx(peak.value, rel=1e-9)  # the front stands 1e-12 of the span before its end


def test_an_abutment_is_a_station_that_loads_nothing() -> None:
    lines = span(deck=[-1.9, "L1", "L2", "L3", SPAN + 0.7])
    assert (lines.ordinates[:, [0, -1]] == 0.0).all()
    assert [effect.name for effect in lines.effects if effect.kind == "down"] == ["L1 down", "L2 down", "L3 down"]
    # half way along the end stringer half the axle reaches L1
    middle = 0.5 * (PANELS[0] - 1.9)
    assert lines["L0 y"].at(middle) == pytest.approx(0.5 * (1.0 - PANELS[0] / SPAN), rel=1e-12)
    peak = sweep(lines, Vehicle("one", [80e3], []))["L0 y"].highest
    assert (peak.position, peak.station) == (PANELS[0], 1)


@given(laid(), vehicles(headings=(1,)))
def test_one_heading_never_gives_more_than_both(bridge: Laid, vehicle: Vehicle) -> None:
    lines = influence_lines(bridge.truss, bridge.panel_points)
    back = Vehicle("back", vehicle.loads, vehicle.spacings, headings=(-1,))
    both = Vehicle("both", vehicle.loads, vehicle.spacings)
    one, other, either = sweep(lines, [vehicle, back, both])
    # not bit for bit: another number of positions may let the matrix product add up in another order
    size = scales(lines, [vehicle])[0]
    assert (np.abs(either.highest - np.maximum(one.highest, other.highest)) <= 1e-12 * size).all()
    assert (np.abs(either.lowest - np.minimum(one.lowest, other.lowest)) <= 1e-12 * size).all()


@pytest.mark.parametrize("headings", [(1, -1), (1,), (-1,)])
@pytest.mark.parametrize("longer", [0.0, 1e-12, 1e-9, 1e-3])
def test_a_bridge_alike_from_both_ends_keeps_headings_apart(headings: tuple[int, ...], longer: float) -> None:
    """A symmetrical bridge invites a short cut over the headings, a nearly symmetrical one invites a wrong one."""
    panels = [3.3, 2.7, 4.1, 4.1, 2.7, 3.3 + longer]
    lines = influence_lines(truss_of(pratt(panels, [2.9, 3.4, 3.8, 3.4, 2.9]), simple_span(6)), bottom(6))
    vehicle = Vehicle("heavy behind", [20e3, 35e3, 90e3], [3.1, 1.3], headings=headings)
    peaks, (highest, lowest) = sweep(lines, vehicle), extremes(lines, vehicle)
    size = scales(lines, [vehicle])[0]
    assert (np.abs(peaks.highest - highest) <= 1e-12 * size).all()
    assert (np.abs(peaks.lowest - lowest) <= 1e-12 * size).all()
    mirror_images = peaks["U1-L2"].highest.value, peaks["L4-U5"].highest.value
    assert (mirror_images[0] == pytest.approx(mirror_images[1], rel=1e-3)) == (len(headings) == 2)


def test_one_heading_matters() -> None:
    vehicle = Vehicle("heavy behind", [20e3, 90e3], [3.0], headings=(1,))
    name = "U1-L2"
    there, back = (sweep(span(), v)[name].highest.value for v in (vehicle, Vehicle("b", *_of(vehicle), headings=(-1,))))
    assert there != pytest.approx(back, rel=0.01)
    turned = influence_lines(mirrored(truss_of(pratt(PANELS, [3.1, 3.5, 2.9]), simple_span(4))), bottom(4)[::-1])
    assert sweep(turned, vehicle)[name].highest.value == pytest.approx(back, rel=1e-12)


def _of(vehicle: Vehicle) -> tuple[list[float], list[float]]:
    return vehicle.loads.tolist(), [float(np.sum(gap)) for gap in vehicle.spacings]


@given(laid(), vehicles(), st.data())
def test_coinciding_axles_are_one_axle(bridge: Laid, vehicle: Vehicle, data: st.DataObject) -> None:
    lines = influence_lines(bridge.truss, bridge.panel_points)
    split = data.draw(st.integers(0, vehicle.loads.size - 1))
    part = data.draw(st.floats(0.0, 1.0))
    loads, gaps = _of(vehicle)
    loads[split : split + 1] = [part * loads[split], (1.0 - part) * loads[split]]
    gaps.insert(split, 0.0)
    doubled = Vehicle("split", loads, gaps, headings=vehicle.headings)
    one, two = sweep(lines, [vehicle, doubled])
    size = scales(lines, [vehicle])[0]
    assert (np.abs(one.highest - two.highest) <= 1e-12 * size).all()  # one product more in each sum
    assert (np.abs(one.lowest - two.lowest) <= 1e-12 * size).all()


def test_a_train_far_longer_than_the_bridge_is_its_worst_part() -> None:
    """Two bogies a kilometre apart never meet on the bridge: the train is as bad as its worse bogie."""
    lines = span()
    bogie, other = Vehicle("bogie", [90e3, 110e3], [1.8]), Vehicle("other", [70e3, 60e3, 80e3], [1.3, 1.7])
    train = Vehicle("train", [90e3, 110e3, 70e3, 60e3, 80e3], [1.8, 1000.0, 1.3, 1.7])
    first, second, whole = sweep(lines, [bogie, other, train])
    # distances of 1 km round to 1e-13 m
    assert_allclose(whole.highest, np.maximum(first.highest, second.highest), rtol=1e-12)
    assert_allclose(whole.lowest, np.minimum(first.lowest, second.lowest), rtol=1e-12)


@pytest.mark.parametrize(("small", "peak"), [(1e-4, -1e-4), (1e-9, -1e-9), (1e-14, 0.0)])
def test_a_small_reversal_is_a_peak_and_round_off_is_none(small: float, peak: float) -> None:
    """Below 1e-12 of the row's largest value a reversal is round-off: the vehicle is better off the bridge."""
    lines = InfluenceLines(span().effects[:1], np.array([0.0, 4.1, 9.3]), np.array([[1.0, 0.4, -small]]))
    lowest = sweep(lines, Vehicle("one", [1.0], []))[lines.effects[0].key].lowest
    assert lowest.value == pytest.approx(peak, rel=1e-12, abs=0.0)
    assert lowest.heading == (1 if peak else 0)


def test_a_panel_ten_thousand_times_shorter_than_its_neighbours() -> None:
    """An abutment 1.7 mm before L0: a table of panels by place would be too long, they are looked up another way."""
    lines = span(deck=[-0.0017, "L0", "L1", "L3", "L4"])
    vehicle = Vehicle("three", [40e3, 60e3, 50e3], [2.3, 1.4])
    peaks, (highest, lowest) = sweep(lines, vehicle), extremes(lines, vehicle)
    # 1e-12 m of rounding in a place is 1e-9 of so short a panel
    assert_allclose(peaks.highest, highest, rtol=0.0, atol=1e-9 * vehicle.gross)
    assert_allclose(peaks.lowest, lowest, rtol=0.0, atol=1e-9 * vehicle.gross)


@given(
    st.lists(st.integers(1, 9), min_size=1, max_size=5),
    st.lists(st.integers(0, 12), min_size=0, max_size=4),
    st.sampled_from([0.1, 0.3048, 0.7, 1.0 / 3.0]),
    st.data(),
)
def test_axles_that_meet_several_stations_at_once(
    panels: list[int], gaps: list[int], module: float, data: st.DataObject
) -> None:
    """Panels and spacings on one module: many axles meet stations at once, some trains are as long as the bridge."""
    stations = np.concatenate(([0.0], np.cumsum(panels))) * module
    values = st.integers(-3, 3).map(float)
    ordinates = data.draw(st.lists(values, min_size=stations.size, max_size=stations.size))
    loads = data.draw(st.lists(st.integers(1, 9).map(float), min_size=len(gaps) + 1, max_size=len(gaps) + 1))
    row = influence_lines(truss_of(pratt([2.0, 2.0], [2.0]), simple_span(2)), ["L0", "L2"]).effects[:1]
    lines = InfluenceLines(row, stations, np.array([ordinates]))
    vehicle = Vehicle("on the module", loads, [gap * module for gap in gaps])
    peaks = sweep(lines, vehicle)
    highest, lowest = extremes(lines, vehicle)
    size = scales(lines, [vehicle])[0]
    assert (np.abs(peaks.highest - highest) <= 1e-12 * size).all()
    assert (np.abs(peaks.lowest - lowest) <= 1e-12 * size).all()
    for side in (0, 1):
        peak = peaks.peak(0, side)
        if peak.heading == 0:
            continue
        again = lines.ordinates[0] @ peak.placement.panel_loads(stations)
        assert_allclose(again, peak.value, rtol=0.0, atol=1e-12 * size[0])
