"""Strips and unending tails that move with a vehicle: never beaten by sampling, closed forms, limits, Cooper's trains.

Published, kip and foot as in the sources, per rail:

- J. F. Unsworth, *Design of Modern Steel Railway Bridges*, CRC 2010, Ex. 5.9: E80 on 60 ft. READ.
- AREMA, *Manual for Railway Engineering*, ch. 15, Table 15-1-15: E80. FROM MEMORY.
- C. A. Ellis, *Essentials in the Theory of Framed Structures*, McGraw-Hill 1922, pp. 165-166: hanger rule. READ.
- Pratt trusses under E80: DERIVED by the main builder; chords and hangers follow from the table's moments and piers.

Of the train the 8 k/ft per track and the sums that fix the spacings are READ, the rest FROM MEMORY.
"""

from __future__ import annotations

from dataclasses import dataclass, replace
from typing import TYPE_CHECKING

import numpy as np
import pytest
from hypothesis import given
from hypothesis import strategies as st
from numpy.testing import assert_allclose, assert_array_equal
from oracles.trusses import bottom, pratt, simple_span, truss_of
from strategies import gaps, laid, vehicles

from movload.errors import InputError
from movload.peaks import moving, moving_batch
from movload.peaks.extremes import static_extremes
from movload.peaks.moving import moving_extremes, moving_stand
from movload.peaks.placement import on_the_ends, panel_loads
from movload.statics.influence import InfluenceLines, influence_lines
from movload.statics.part import Effect
from movload.traffic.crossing import Train, even_train
from movload.traffic.vehicle import Strip, Tail, Vehicle

if TYPE_CHECKING:
    from strategies import Laid

    from movload.arrays import Floats

ENDLESS = 1e6  # m: longer than any deck, short enough to subtract
ROUND_OFF = 1e-12  # of the most a row could feel: some hundred additions
loads = st.floats(0.1, 30e3) | st.just(0.0)  # N/m
shares = st.floats(0.01, 1.3) | st.floats(-0.4, -0.01) | st.just(0.0)


def line(stations: list[float], *ordinates: list[float]) -> InfluenceLines:
    """Return rows typed by hand."""
    effects = tuple(Effect("beam", f"row {number}", "reaction", "N") for number in range(len(ordinates)))
    return InfluenceLines(effects, np.array(stations), np.array(ordinates))


def train_of(vehicle: Vehicle, axles: float = 1.0, uniform: float = 1.0) -> Train:
    """Return a train whose axles have one share and whose uniform loads another."""
    return Train(
        "case", vehicle, np.full(vehicle.loads.size, axles), headings=vehicle.headings,
        strip_shares=np.full(len(vehicle.strips), uniform), tail_share=uniform if vehicle.tail else 0.0,
    )  # fmt: skip


def uniform_only(*strips: Strip, tail: Tail | None = None, headings: tuple[int, ...] = (1, -1)) -> Train:
    """Return a train whose one axle is not felt."""
    return train_of(Vehicle("uniform", [1.0], [], strips=strips, tail=tail, headings=headings), axles=0.0)


@dataclass(frozen=True)
class ByHand:
    """Every row's effects by ``np.interp`` and trapezia, and the most that they could be."""

    lines: InfluenceLines
    train: Train

    def uniform(self) -> list[tuple[float, float, float]]:
        """Return begin and end behind the front, and felt load, of strips and tail."""
        vehicle, train = self.train.vehicle, self.train
        found = [
            (strip.start, strip.start + strip.length, strip.load * share * train.factor)
            for strip, share in zip(vehicle.strips, train.strip_shares, strict=True)
        ]
        tail = vehicle.tail
        return found if tail is None else [*found, (tail.start, ENDLESS, tail.load * train.tail_share * train.factor)]

    def up_to(self, x: Floats, row: Floats) -> Floats:
        """Return the area under a row from the first station up to each x."""
        at = self.lines.stations
        x = np.clip(x, at[0], at[-1])
        whole = np.concatenate(([0.0], np.cumsum(np.diff(at) * (row[1:] + row[:-1]) / 2)))
        before = np.clip(np.searchsorted(at, x, side="right") - 1, 0, at.size - 1)
        return np.asarray(whole[before] + (x - at[before]) * (row[before] + np.interp(x, at, row)) / 2)

    def effects(self, front: Floats, heading: int) -> Floats:
        """Return every row's effect (R, P) with the front at each place (P,)."""
        x = front[:, None] - heading * self.train.vehicle.distances
        found = []
        for row in self.lines.ordinates:
            total = np.interp(x, self.lines.stations, row, left=0.0, right=0.0) @ self.train.felt
            for begin, end, load in self.uniform():
                area = self.up_to(front - heading * begin, row) - self.up_to(front - heading * end, row)
                total = total + heading * load * area
            found.append(total)
        return np.array(found)

    def sizes(self) -> Floats:
        """Return (R,) what rounding is measured by: everything on each row's largest ordinate."""
        length = float(np.ptp(self.lines.stations))
        most = np.abs(self.train.felt).sum() + length * sum(abs(load) for *_, load in self.uniform())
        return np.asarray(most * np.abs(self.lines.ordinates).max(axis=1))

    def fronts(self, heading: int, count: int) -> Floats:
        """Return places from before the train enters until all of it has left or its tail covers the deck, and more."""
        known = [*self.train.vehicle.distances, *(place for load in self.uniform() for place in load[:2])]
        near = [place for place in known if place < ENDLESS]
        low, high = self.lines.stations[[0, -1]]
        along = np.linspace(low + min(near) - 0.3, high + max(near) + 0.3, count)
        return along if heading > 0 else low + high - along


@st.composite
def trains(draw: st.DrawFn) -> Train:
    """Draw a vehicle with 0-3 strips and perhaps a tail, every load with a share of its own or all with one."""
    vehicle = draw(vehicles())
    strips = draw(st.lists(st.builds(Strip, st.floats(-5.0, 25.0), st.floats(0.2, 40.0), loads), max_size=3))
    tail = draw(st.none() | st.builds(Tail, st.floats(-3.0, 60.0), loads))
    if draw(st.booleans()):
        strips = [replace(one, start=float(draw(st.sampled_from(list(vehicle.distances))))) for one in strips]
    vehicle = replace(vehicle, strips=tuple(strips), tail=tail)
    count = vehicle.loads.size + len(strips) + 1
    every = np.array(draw(st.lists(shares, min_size=count, max_size=count)))
    if draw(st.booleans()):
        every[:] = every[0]
    return Train(
        "case", vehicle, every[: vehicle.loads.size], headings=vehicle.headings, factor=draw(st.floats(0.5, 2.0)),
        strip_shares=every[vehicle.loads.size : -1], tail_share=float(every[-1]),
    )  # fmt: skip


def stood(lines: InfluenceLines, train: Train, row: int, side: int) -> float:
    """Return the row's value under the loads as the stand places them."""
    stand, patches = moving_stand(lines, train, row, side)
    if stand.heading == 0:
        assert stand.value == 0.0
        assert patches.start.size == 0
        return 0.0
    x = on_the_ends(lines.stations, stand.front - stand.heading * stand.distances)
    panels = panel_loads(lines.stations, x[None, :], train.felt)[0] + patches.panel_loads(lines.stations)
    value = float(lines.under(panels[:, None])[row, 0])
    assert stand.value == value
    if stand.axle >= 0 and not stand.lost:
        assert_allclose(x[stand.axle], lines.stations[stand.station], rtol=0.0, atol=1e-9)
    return value


@given(laid(), trains(), st.integers(0, 10**6))
def test_never_beaten_and_reproduced(bridge: Laid, train: Train, pick: int) -> None:
    """No sampled place beats the extremes, in any heading; the stand gives each of a row's two."""
    lines = influence_lines(bridge.truss, bridge.panel_points)
    highest, lowest = (one[0] for one in moving_extremes(lines, [train]))
    by_hand = ByHand(lines, train)
    allowed = ROUND_OFF * by_hand.sizes()
    for heading in train.headings:
        seen = by_hand.effects(by_hand.fronts(heading, 701), heading)
        assert (seen.max(axis=1) <= highest + allowed).all()
        assert (seen.min(axis=1) >= lowest - allowed).all()
    row = pick % len(lines.effects)
    for side, extreme in enumerate((highest, lowest)):
        assert_allclose(stood(lines, train, row, side), extreme[row], rtol=1e-12, atol=allowed[row])


@given(laid(), trains(), st.integers(0, 10**6))
def test_the_stand_by_other_means(bridge: Laid, train: Train, pick: int) -> None:
    """What the stand says is what np.interp and trapezia say of its front and heading (a jump apart: rows without)."""
    lines = influence_lines(bridge.truss, bridge.panel_points)
    row = pick % len(lines.effects)
    stand, _ = moving_stand(lines, train, row, pick % 2)
    if stand.heading == 0 or lines.ordinates[row, [0, -1]].any():
        return
    by_hand = ByHand(lines, train)
    value = by_hand.effects(np.array([stand.front]), stand.heading)[row, 0]
    assert_allclose(stand.value, value, rtol=0.0, atol=ROUND_OFF * by_hand.sizes()[row])


@given(laid(), vehicles(), gaps)
def test_without_uniform_loads_it_is_the_axle_sweep(bridge: Laid, vehicle: Vehicle, gap: float) -> None:
    """The same extremes as `static_extremes`, found by another method; a strip of no load changes nothing."""
    lines = influence_lines(bridge.truss, bridge.panel_points)
    idle = Vehicle("drawn", vehicle.loads, vehicle.spacings, strips=(Strip(gap, 3.0, 0.0),), headings=vehicle.headings)
    expected = static_extremes(lines, [even_train("case", vehicle, 1.0)])
    found = moving_extremes(lines, [train_of(vehicle), train_of(idle)])
    size = vehicle.gross * np.abs(lines.ordinates).max(axis=1)
    for one, other in zip(found, expected, strict=True):
        assert (np.abs(one - other) <= ROUND_OFF * size).all()


@given(laid(), vehicles(), st.floats(0.3, 9.7), st.floats(1e3, 150e3))
def test_a_strip_that_shrinks_becomes_an_axle(bridge: Laid, vehicle: Vehicle, gap: float, weight: float) -> None:
    """On a length l: moving all by l makes it an axle, so effects differ by at most gross x steepest slope x l."""
    lines, length = influence_lines(bridge.truss, bridge.panel_points), 1e-5
    rear = vehicle.distances[-1] + gap
    longer = Vehicle("a", [*vehicle.loads, weight], [*vehicle.spacings, gap], headings=vehicle.headings)
    strip = Strip(float(rear), length, weight / length)
    tracked = Vehicle("b", vehicle.loads, vehicle.spacings, strips=(strip,), headings=vehicle.headings)
    by_axle = static_extremes(lines, [even_train("case", longer, 1.0)])
    by_strip = moving_extremes(lines, [train_of(tracked)])
    size = longer.gross * np.abs(lines.ordinates).max(axis=1)
    steepest = np.abs(np.diff(lines.ordinates) / np.diff(lines.stations)).max(axis=1)
    for one, other in zip(by_axle, by_strip, strict=True):
        assert (np.abs(one - other) <= longer.gross * steepest * length + ROUND_OFF * size).all()


@given(laid(), st.floats(1.0, 30e3))
def test_a_long_strip_and_a_tail_become_full_load(bridge: Laid, load: float) -> None:
    """A row of one sign feels the whole deck loaded, `per_metre`; strip and tail are alike for every row."""
    lines = influence_lines(bridge.truss, bridge.panel_points)
    rows = lines.ordinates
    size = load * np.ptp(lines.stations) * np.abs(rows).max(axis=1)
    by_strip = moving_extremes(lines, [uniform_only(Strip(2.0, 500.0, load))])
    by_tail = moving_extremes(lines, [uniform_only(tail=Tail(7.0, load))])
    for one, other in zip(by_strip, by_tail, strict=True):
        assert (np.abs(one - other)[0] <= ROUND_OFF * size).all()
    full = load * lines.per_metre
    up, down = (rows >= 0.0).all(axis=1), (rows <= 0.0).all(axis=1)
    assert_allclose(by_tail[0][0, up], full[up], rtol=1e-11)
    assert_allclose(by_tail[1][0, down], full[down], rtol=1e-11)
    assert (by_tail[0][0] >= full - ROUND_OFF * size).all()
    assert (by_tail[1][0] <= full + ROUND_OFF * size).all()


@pytest.mark.parametrize("section", [0.25, 0.4, 0.5])
@pytest.mark.parametrize("length", [0.7, 4.1, 9.9])
def test_a_short_strip_over_a_section(section: float, length: float) -> None:
    """M = q a (2L - a) c (L - c) / (2 L^2): the section divides strip and span alike. No axle on a station."""
    span, load = 10.0, 24e3
    c = section * span
    lines, train = line([0.0, c, span], [0.0, c * (span - c) / span, 0.0]), uniform_only(Strip(0.0, length, load))
    expected = load * length * (2 * span - length) * c * (span - c) / (2 * span**2)
    assert_allclose(moving_extremes(lines, [train])[0], [[expected]], rtol=1e-14)
    stand, patches = moving_stand(lines, train, 0, 0)
    assert_allclose(stand.value, expected, rtol=1e-14)
    assert (stand.heading, stand.axle, stand.station, stand.lost) == (
        -1,
        -1,
        -1,
        False,
    )  # its front is at the smaller x
    assert_allclose([patches.start[0], patches.end[0]], [c - section * length, c + (1 - section) * length], rtol=1e-12)
    assert patches.start[0] == stand.front


@pytest.mark.parametrize(("axle", "lost"), [(40e3, False), (4e3, True)])
def test_an_end_that_jumps(axle: float, lost: bool) -> None:
    """At x = 0, axle 2 m before a tail: P + q (L - s)^2 / (2 L) with it on the end, q L / 2 once it has left."""
    span, start, load = 12.0, 2.0, 6e3
    lines = line([0.0, span], [1.0, 0.0])
    train = train_of(Vehicle("engine", [axle], [], tail=Tail(start, load)))
    on, left = axle + load * (span - start) ** 2 / (2 * span), load * span / 2
    assert lost is (left > on)
    assert_allclose(moving_extremes(lines, [train])[0], [[max(on, left)]], rtol=1e-14)
    stand, patches = moving_stand(lines, train, 0, 0)
    assert_allclose(stand.value, max(on, left), rtol=1e-12)
    assert (stand.front, stand.heading, stand.axle) == ((-start, -1, -1) if lost else (0.0, -1, 0))
    assert_allclose([patches.start[0], patches.end[0]], [0.0 if lost else start, span])


def test_an_axle_just_lost_is_the_worst() -> None:
    """An end ordinate of -0.6 relieves: highest with the front axle just off the far end and its strip still on."""
    lines = line([0.0, 5.0, 10.0], [0.0, 1.0, -0.6])
    train = train_of(Vehicle("tracked", [2e3], [], strips=(Strip(4.0, 2.0, 10e3),), headings=(1,)))
    stand, patches = moving_stand(lines, train, 0, 0)
    assert (stand.axle, stand.station, stand.lost, stand.heading) == (0, 2, True, 1)
    assert stand.front > 10.0
    assert_allclose(stand.value, 2.0 * 10e3 * (1.0 + 0.8 + (1.0 + 0.68)) / 4, rtol=1e-9)
    assert_allclose([patches.start[0], patches.end[0]], [4.0, 6.0])


def test_ties_go_to_the_smallest_place_then_heading_then_axle() -> None:
    """A constant row under a tail that covers it; a symmetric one; two axles at one place."""
    flat = line([0.0, 4.0, 10.0], [1.0, 1.0, 1.0])
    stand, _ = moving_stand(flat, uniform_only(Strip(0.0, 3.0, 1e3)), 0, 0)
    assert (stand.front, stand.heading) == (0.0, -1)  # it ends at 3: nothing smaller holds it whole
    stand, _ = moving_stand(flat, uniform_only(Strip(0.0, 3.0, 1e3), headings=(1,)), 0, 0)
    assert (stand.front, stand.heading) == (3.0, 1)
    peaked = line([0.0, 5.0, 10.0], [0.0, 1.0, 0.0])
    axles = train_of(Vehicle("pair", [1e3, 1e3, 1e3], [0.0, 4.0], strips=(Strip(-2.0, 8.0, 0.0),)))
    stand, _ = moving_stand(peaked, axles, 0, 0)
    assert (stand.front, stand.heading, stand.axle, stand.station) == (5.0, 1, 0, 1)


def test_a_row_that_feels_nothing() -> None:
    lines, train = line([0.0, 5.0, 10.0], [0.0, 1.0, 0.0], [0.0, 0.0, 0.0]), uniform_only(Strip(0.0, 3.0, 1e3))
    assert_array_equal(moving_extremes(lines, [train])[1], [[0.0, 0.0]])
    for row, side in ((0, 1), (1, 0), (1, 1)):
        stand, patches = moving_stand(lines, train, row, side)
        assert (stand.value, stand.heading, stand.axle, patches.start.size) == (0.0, 0, -1, 0)


def test_patches_say_whose_they_are() -> None:
    vehicle = Vehicle("a", [9e3], [], strips=(Strip(1.0, 2.0, 3e3), Strip(40.0, 2.0, 1e3)), tail=Tail(6.0, 1e3))
    train = Train(
        "case", vehicle, np.array([0.5]), headings=(1,), z=0.7, factor=1.2, fixed=True, dynamic=True,
        strip_shares=np.array([0.4, 0.3]), tail_share=0.2,
    )  # fmt: skip
    stand, patches = moving_stand(line([0.0, 8.0, 10.0], [0.0, 1.0, 0.0]), train, 0, 0)
    assert (stand.front, stand.axle) == (8.0, 0)
    assert_allclose(patches.start, [stand.front - 3.0, 0.0], rtol=1e-12)
    assert_allclose(patches.end, [stand.front - 1.0, stand.front - 6.0], rtol=1e-12)
    assert_array_equal(patches.load, [3e3, 1e3])
    assert_array_equal(patches.share, [0.4, 0.2])
    for name, value in {"impact": 0.0, "factor": 1.2, "z": 0.7, "vehicle": 0, "fixed": True}.items():
        assert_array_equal(getattr(patches, name), [value, value])


def bridge_of(panels: int) -> InfluenceLines:
    """Return an invented level Pratt without symmetry."""
    lengths = 4.5 + 0.6 * np.sin(1.0 + 2.39996 * np.arange(panels))
    drawn = pratt(lengths, [6.4] * (panels - 1))
    return influence_lines(truss_of(drawn, simple_span(panels)), bottom(panels))


def long_train(axles: int) -> Train:
    """Return an invented train of many unequal axles, a strip and a tail."""
    numbers = np.arange(axles)
    spacings = 1.9 + 0.7 * np.sin(2.39996 * numbers[:-1])
    strip, tail = Strip(3.3, 17.0, 6e3), Tail(float(spacings.sum()) + 1.5, 40e3)
    return train_of(Vehicle("train", 90e3 + 40e3 * np.cos(numbers), list(spacings), strips=(strip,), tail=tail))


def test_one_share_is_swept_once(monkeypatch: pytest.MonkeyPatch) -> None:
    """Trains of one vehicle that differ by one share, of either sign, scale what is swept once; others are swept."""
    swept = []

    def counted(*given: object) -> object:
        swept.append(given)
        return moving_batch.walk(*given)  # type: ignore[arg-type]  # passed on as they come

    monkeypatch.setattr(moving, "walk", counted)
    lines, whole = bridge_of(6), train_of(long_train(4).vehicle)
    parts = [whole, train_of(whole.vehicle, 0.5, 0.5), replace(train_of(whole.vehicle, -0.2, -0.2), factor=2.0)]
    (highest, lowest), uneven = moving_extremes(lines, parts), train_of(whole.vehicle, 0.5, 0.4)
    assert len(swept) == 2  # headings
    assert_allclose([highest[1], lowest[1]], [0.5 * highest[0], 0.5 * lowest[0]], rtol=1e-15)
    assert_allclose([highest[2], lowest[2]], [-0.4 * lowest[0], -0.4 * highest[0]], rtol=1e-15)
    assert (moving_extremes(lines, [whole, uneven])[0][1] <= highest[1] + 1e-6).all()
    assert len(swept) == 6


@pytest.mark.parametrize("panels", [5, 60])
def test_many_events_stay_exact(panels: int, monkeypatch: pytest.MonkeyPatch) -> None:
    """In any pieces, and after thousands of events, values are those of the stand itself; 1e-12 as everywhere."""
    lines, train = bridge_of(panels), long_train(40)
    highest, lowest = moving_extremes(lines, [train])
    monkeypatch.setattr(moving_batch, "_IN_CACHE", 7 * len(lines.effects))
    in_pieces = moving_extremes(lines, [train])
    size = ByHand(lines, train).sizes()
    for one, other in zip((highest, lowest), in_pieces, strict=True):
        assert (np.abs(one - other) <= ROUND_OFF * size).all()
    for row in range(0, len(lines.effects), 1 + panels // 3):
        for side, extreme in enumerate((highest, lowest)):
            assert_allclose(stood(lines, train, row, side), extreme[0, row], rtol=0.0, atol=ROUND_OFF * size[row])


def test_a_vehicle_without_axles() -> None:
    """Two strips alone, as some train models are: the same as with an axle that is not felt."""
    strips, lines = (Strip(0.0, 15.0, 133e3), Strip(20.3, 15.0, 133e3)), bridge_of(6)
    expected = moving_extremes(lines, [uniform_only(*strips)])
    vehicle = Vehicle("strips", [], [], strips=strips)
    train = train_of(vehicle)
    assert_array_equal(moving_extremes(lines, [train]), expected)
    assert_allclose(stood(lines, train, 0, 0), expected[0][0, 0], rtol=1e-12)


def test_no_trains_no_extremes() -> None:
    assert [one.shape for one in moving_extremes(bridge_of(3), [])] == [(0, len(bridge_of(3).effects))] * 2


def test_what_is_refused() -> None:
    lines, vehicle = bridge_of(3), Vehicle("tracked", [1e3, 1e3], [(2.0, 3.0)], strips=(Strip(0.0, 3.0, 1e3),))
    with pytest.raises(InputError, match=r"tracked: one share for each of 1 strips, got 0"):
        moving_extremes(lines, [Train("case", vehicle, np.ones(2))])
    with pytest.raises(InputError, match=r"tracked: spacings\[0\]: a spacing between 2 and 3 m is a range"):
        moving_extremes(lines, [train_of(vehicle)])


# -- published ------------------------------------------------------------------------------------------------------

E80 = train_of(
    Vehicle(
        "Cooper E80, one rail, kip and foot, partly from memory",
        np.array([40, 80, 80, 80, 80, 52, 52, 52, 52] * 2) / 2.0,
        [8, 5, 5, 5, 9, 5, 6, 5, 8, 8, 5, 5, 5, 9, 5, 6, 5],
        tail=Tail(109.0, 4.0),  # 8 k/ft a track, from 5 ft behind the last axle
    )
)


def e80_on(stations: list[float], *ordinates: list[float]) -> Floats:
    """Return the highest of rows typed by hand under E80 in both directions, each given again by its stand."""
    lines = line(stations, *ordinates)
    (highest,) = moving_extremes(lines, [E80])[0]
    assert_allclose([stood(lines, E80, row, 0) for row in range(highest.size)], highest, rtol=1e-12)
    return highest


def test_unsworth_end_shear_and_quarter_point() -> None:
    """Ex. 5.9, READ: 60 ft, end shear 196 and quarter-point moment 2010, recomputed 196.03 and 2010.5.

    Half of the last digit given. Either end: the train runs both ways.
    """
    found = e80_on([0.0, 15.0, 60.0], [1.0, 0.75, 0.0], [0.0, 0.25, 1.0], [0.0, 15.0 * 45.0 / 60.0, 0.0])
    assert_allclose(found, [196.03, 196.03, 2010.5], rtol=0.0, atol=0.05)
    assert_allclose(found[:2], 196.03, rtol=0.0, atol=0.005)


@pytest.mark.parametrize(
    ("span", "end_shear", "pier"),
    [(10.0, 60.0, 80.0), (40.0, 150.8, 215.9), (50.0, 174.4, 257.52), (60.0, 196.0, 306.42), (100.0, 300.0, 474.24)],
)
def test_arema_end_shears_and_piers(span: float, end_shear: float, pier: float) -> None:
    """Table 15-1-15, FROM MEMORY: end shear, and the reaction of a pier between two such spans. 0.03 % as recalled."""
    assert_allclose(e80_on([0.0, span], [1.0, 0.0], [0.0, 1.0]), end_shear, rtol=3e-4)
    assert_allclose(e80_on([0.0, span, 2 * span], [0.0, 1.0, 0.0]), pier, rtol=3e-4)


@pytest.mark.parametrize(
    ("span", "moment"), [(10.0, 100.0), (40.0, 1010.5), (50.0, 1473.0), (60.0, 2010.0), (100.0, 5060.5)]
)
def test_arema_quarter_point_moments(span: float, moment: float) -> None:
    """Table 15-1-15, FROM MEMORY: moment at a quarter of the span. 0.03 % as recalled."""
    assert_allclose(e80_on([0.0, span / 4, span], [0.0, span * 3 / 16, 0.0]), moment, rtol=3e-4)


def test_arema_reversed_train() -> None:
    """Table 15-1-15, FROM MEMORY: 24 ft, end shear 110.83 at the left end, reached in one direction only."""
    lines = line([0.0, 24.0], [1.0, 0.0])
    by_heading = [moving_extremes(lines, [replace(E80, headings=(one,))])[0][0, 0] for one in (1, -1)]
    assert_allclose(max(by_heading), 110.83, rtol=0.0, atol=0.005)
    assert min(by_heading) < 110.5
    assert moving_extremes(lines, [E80])[0][0, 0] == max(by_heading)


def pratt_under_e80(panel: float, depth: float) -> tuple[InfluenceLines, Floats]:
    """Return a 4-panel level Pratt's lines and its highest and lowest (2, R) under E80."""
    lines = influence_lines(truss_of(pratt([panel] * 4, [depth] * 3), simple_span(4)), bottom(4))
    highest, lowest = moving_extremes(lines, [E80])
    return lines, np.stack((highest[0], lowest[0]))


def test_pratt_under_e80() -> None:
    """4 x 25 ft, 25 ft deep, DERIVED except where anchored; half of the last digit, 0.1 % for the diagonal.

    L0L1 is the table's quarter-point moment of 100 ft / 25 (5060.5, FROM MEMORY), U1U2 its pier of 50 ft spans (257.52,
    FROM MEMORY), the hanger Ellis's rule (2 x 75.64, READ).
    """
    lines, extremes = pratt_under_e80(25.0, 25.0)
    forces = {effect.name: extremes[:, row] for row, effect in enumerate(lines.effects)}
    for name, side, expected in (
        ("L0-L1", 0, 202.42), ("L1-L2", 0, 202.42), ("L2-L3", 0, 202.42), ("U1-U2", 1, -257.52), ("L0-U1", 1, -286.27),
        ("U1-L1", 0, 151.28), ("U3-L3", 0, 151.28), ("U1-L2", 0, 135.09), ("U1-L2", 1, -40.25), ("L2-U3", 0, 135.09),
        ("L0 y", 0, 300.0), ("L4 normal", 0, 300.0),
    ):  # fmt: skip
        assert_allclose(forces[name][side], expected, rtol=1e-4, err_msg=name)


@pytest.mark.parametrize(("panel", "pull"), [(20.0, 131.10), (24.0, 147.92), (28.0, 164.57)])
def test_hangers_are_piers(panel: float, pull: float) -> None:
    """A hanger bears what a pier between two spans of its panels bears. AREMA's table, FROM MEMORY; half a digit."""
    lines, extremes = pratt_under_e80(panel, 25.0)
    row = [effect.name for effect in lines.effects].index("U1-L1")
    assert_allclose(extremes[0, row], pull, rtol=0.0, atol=0.01)
