"""movload's answer against a crossing followed wheel by wheel (``oracles.crossing_by_hand``) on invented bridges.

Any determinate truss twice, stringers anywhere, overhanging decks, brackets, kerbs outside the trusses, unequal wheels
and gauges. The placement movload names must be allowed and give the value it names; no position tried may give more.
"""

from __future__ import annotations

from dataclasses import dataclass, replace
from typing import TYPE_CHECKING, Final

import numpy as np
from hypothesis import assume, given, settings
from hypothesis import strategies as st
from numpy.testing import assert_allclose
from oracles import crossing_by_hand as hand
from oracles.trusses import pratt, simple_span, truss_of
from strategies import determinate, vehicles

from movload import Bridge, Case, Crossing, Deck, Loading, Truss, Vehicle, rate, solve
from movload.bridge.floor import Floor, Floorbeams, Stringers
from movload.bridge.permanent import CLASSES, Item, PermanentItems
from movload.bridge.roadway import PLACES, Roadway
from movload.bridge.strengths import permitted
from movload.rating.factor_sets import PERMITTED
from movload.review.hand import terms
from movload.statics.part import row_of

if TYPE_CHECKING:
    from numpy.typing import NDArray

    from movload import Ratings
    from movload.rating.solved import SolvedBridge

    Floats = NDArray[np.float64]

AGREED: Final = 1e-9  # of the most a row could feel: the dense oracle's forces are good to 1e-10 (test_oracles)
METRES: Final = 1e-8  # m: sums of kerbs, clearances and gauges
PRESENCE: Final = (1.2, 1.0, 0.85)
METHOD: Final = replace(PERMITTED, multiple_presence=PRESENCE)
TRIED: Final = 300  # positions for each number abreast
PLACED: Final = st.just("anywhere") | st.sampled_from(PLACES)


def bridge_of(truss: Truss, deck: Deck, floor: Floor, *items: Item, impact: float = 0.0) -> Bridge:
    """Return a bridge whose members weigh nothing."""
    members = [replace(member, density=0.0) for member in truss.members]
    some, truss = {members[0].name: permitted(1e5, 1e5)}, Truss(truss.joints, members, truss.supports)
    return Bridge("invented", truss, deck, permanent=PermanentItems(items), strengths=some, floor=floor, impact=impact)


@st.composite
def roadways(draw: st.DrawFn, width: float = 1.5) -> Roadway:
    """Draw a roadway on which one to three vehicles fit."""
    clearance, right, between = draw(st.floats(0.0, 0.6)), draw(st.floats(-5.0, 0.5)), draw(st.floats(0.6, 1.5))
    left = right + 2.0 * clearance + width + draw(st.floats(0.01, 5.0))
    return Roadway(right, left, clearance=clearance, between=between, keeps=draw(st.sampled_from(["right", "left"])))


@st.composite
def bridges(draw: st.DrawFn, roadway: Roadway) -> Bridge:
    """Draw a bridge: stringers under 0.5 to 1.2 of a roadway, trusses 0.4 to 1.4 of it apart, all off the middle."""
    laid, steps = draw(determinate()), np.array(draw(st.lists(st.floats(0.3, 1.0), min_size=1, max_size=5)))
    reach, spacing = (roadway.width * draw(st.floats(*some)) for some in ((0.5, 1.2), (0.4, 1.4)))
    z = roadway.middle + draw(st.floats(-0.4, 0.4)) + reach * (np.cumsum([0.0, *steps]) / steps.sum() - 0.5)
    more, out = draw(st.sampled_from([1e-9, 0.3])), (float(-z[0] - spacing / 2), float(z[-1] - spacing / 2))
    beams = Floorbeams((max(0.0, out[0]) and out[0] + more, max(0.0, out[1]) and out[1] + more))
    assume(np.abs(np.abs(z) - spacing / 2).min() > 1e-6)  # m: a shear steps over 1e-9 m at a truss
    stringers = Stringers(tuple(z.tolist()), weight=draw(st.sampled_from([0.0, 900.0])))
    deck = Deck(laid.panel_points, truss_spacing=spacing, roadway=roadway, kind="deck")
    return bridge_of(laid.truss, deck, Floor(stringers, beams), impact=draw(st.sampled_from([0.0, 0.3])))


@dataclass(frozen=True, eq=False)
class Drawn:
    """A vehicle, its bridge, its place, and what movload says."""

    vehicle: Vehicle
    width: float
    roadway: Roadway
    bridge: Bridge
    crossing: Crossing
    ratings: Ratings

    def __repr__(self) -> str:
        return f"{self.vehicle}, {self.bridge.floor}, {self.bridge.deck}, {self.crossing.place} x {self.crossing.lanes}"

    @property
    def apart(self) -> float:
        return self.width + self.roadway.between

    @property
    def counts(self) -> list[int]:
        """How many may stand abreast."""
        most = hand.how_many(self.roadway, self.width) if self.crossing.place == "anywhere" else 1
        return [self.crossing.lanes] if self.crossing.lanes else list(range(1, most + 1))

    def room(self, heading: float) -> tuple[float, float]:
        return hand.room_of(self.roadway, self.crossing.place, self.width, int(heading), self.crossing.z)

    def times(self, count: int) -> float:
        """Return what multiplies the loads when so many stand abreast."""
        presence = PRESENCE[min(count, len(PRESENCE)) - 1]
        return presence * self.crossing.loading.cases[0].factor * (1.0 + (self.bridge.impact or 0.0))

    def by_hand(self, wheels: list[hand.Wheel]) -> Floats:
        """Return every row (R, K), part after part."""
        stands = hand.standing(self.bridge, wheels)
        return np.concatenate([stands.rows(part.title) for part in self.ratings.solved.parts])

    @property
    def margin(self) -> Floats:
        """What the two may differ by (R,): of all axles where they count most; anything in a deflection."""
        return AGREED * self.vehicle.gross * max(self.counts) * self.times(1) * most_felt(self.ratings.solved)


def most_felt(solved: SolvedBridge) -> Floats:
    """Return the most that 1 N makes any force or moment (R,) [-, m]; infinite for deflections."""
    lines, down = solved.parts[0].response, np.array([effect.kind == "down" for effect in solved.effects])
    forces = np.abs(lines.under(np.eye(lines.stations.size)))[~down[: len(lines.effects)]].max()
    shares = max(np.abs(part.across.ordinate).max() for part in solved.parts)
    return np.where(down, np.inf, max(1.0, shares) * max(1.0, forces, np.diff(lines.stations).max()))


@st.composite
def crossings(draw: st.DrawFn) -> Drawn:
    """Draw a crossing and rate it."""
    vehicle, lopsided, place = draw(vehicles()), draw(st.booleans()), draw(PLACED)
    some = [draw(st.lists(st.floats(*ends), min_size=1, max_size=3)) for ends in ((0.7, 2.2), (0.0, 1.0))]
    gauges, lefts = np.array([np.resize(one, vehicle.loads.size) for one in some]).tolist()
    assume(not lopsided or np.sum(vehicle.spacings) > 0.1)  # m; else where its axles stand does not show its heading
    vehicle = replace(vehicle, gauges=tuple(gauges), left_shares=tuple(lefts) if lopsided else ())
    roadway, width = draw(roadways(max(gauges))), max(gauges)
    low, high = hand.room_of(roadway, "anywhere", width, 1)
    z = low + draw(st.floats(0.0, 1.0)) * (high - low) if place == "offset" else 0.0
    assume(all(np.diff(hand.room_of(roadway, place, width, heading, z))[0] >= 0.0 for heading in vehicle.headings))
    loading = Loading("drawn", "routine", (Case("laden", vehicle, factor=draw(st.sampled_from([1.0, 1.3]))),))
    lanes = draw(st.integers(0, hand.how_many(roadway, width))) if place == "anywhere" else 0
    crossing, bridge = Crossing(loading, place, z, lanes=lanes), draw(bridges(roadway))
    return Drawn(vehicle, width, roadway, bridge, crossing, rate(bridge, [crossing], METHOD))


@settings(max_examples=30)
@given(crossings())
def test_the_placement_named_may_be_taken_and_gives_the_value_named(drawn: Drawn) -> None:
    """All peaks at once, one a position; every vehicle alone, as each is where it is worst on a stringer."""
    peaks, axles = drawn.ratings.peaks[0], drawn.vehicle.loads.size
    found = [peaks.peak(row, side) for row in range(len(peaks.effects)) for side in (0, 1)]
    shape = (max(drawn.counts), len(found))
    x, z, heading, times = np.full((axles, *shape), np.nan), np.zeros(shape), np.ones(shape), np.zeros(shape)
    for position, peak in enumerate(found):
        stands, count = peak.placement, peak.placement.x.size // axles
        part = (slice(count), position)
        x[:, *part], z[part] = stands.x.reshape(count, axles).T, stands.z[::axles]
        heading[part] = np.sign(x[0, *part] - x[-1, *part])
        heading[part] += (heading[part] == 0.0) * peak.heading
        times[part] = (stands.factor * (1.0 + stands.impact))[::axles]
        if count:
            check_places(drawn, z[part], heading[part], times[part])
    assert_allclose(x, hand.axles_at(drawn.vehicle, x[0], heading), rtol=0.0, atol=METRES)
    placed = [(x[:, one], z[one], heading[one], times[one]) for one in range(shape[0])]
    alone = [drawn.by_hand([*hand.wheels_of(drawn.vehicle, *one)]) for one in placed]
    values = np.sum(alone, axis=0)[np.arange(len(found)) // 2, np.arange(len(found))].reshape(-1, 2)
    assert (np.abs(values - np.stack((peaks.highest, peaks.lowest), axis=1)) <= drawn.margin[:, None]).all()


def check_places(drawn: Drawn, z: Floats, heading: Floats, times: Floats) -> None:
    """Refuse vehicles out of their place, too near each other, or counted as no number that may stand there."""
    allowed = [count for count in drawn.counts if np.allclose(drawn.times(count), times, rtol=1e-12, atol=0.0)]
    rooms = np.array([drawn.room(way) for way in heading])
    assert set(heading) <= set(drawn.vehicle.headings)
    assert ((rooms[:, 0] - METRES <= z) & (z <= rooms[:, 1] + METRES)).all()
    assert (np.diff(np.sort(z)) >= drawn.apart - METRES).all()
    assert any(len(z) <= count <= hand.fitting_beside(drawn.room(heading[0]), [*z], drawn.apart) for count in allowed)


@settings(max_examples=60)
@given(crossings(), st.integers(0, 2**32 - 1))
def test_no_position_tried_beats_the_value_named(drawn: Drawn, seed: int) -> None:
    """Vehicles abreast, each anywhere along the bridge and in either heading."""
    random, peaks, vehicle = np.random.default_rng(seed), drawn.ratings.peaks[0], drawn.vehicle
    for count in drawn.counts:
        headings = random.choice(np.array(vehicle.headings, dtype=np.float64), (count, TRIED))
        rooms = np.array([drawn.room(way) for way in headings[0]]).T
        beside = [drawn.apart * number for number in range(count)]
        middles = hand.tried_across(drawn.bridge, vehicle.gauges, rooms, beside, random)
        wheels: list[hand.Wheel] = []
        for z, heading in zip(middles, headings, strict=True):
            x = hand.axles_at(vehicle, hand.tried_along(drawn.bridge, vehicle, heading, random), heading)
            wheels += hand.wheels_of(vehicle, x, z, heading, drawn.times(count))
        values = drawn.by_hand(wheels)
        assert (values.max(axis=1) <= peaks.highest + drawn.margin).all()
        assert (values.min(axis=1) >= peaks.lowest - drawn.margin).all()


@given(roadways().flatmap(bridges), st.lists(st.floats(0.0, 1.0), min_size=3, max_size=3), st.sampled_from(CLASSES))
def test_an_item_is_as_many_small_loads(bridge: Bridge, places: list[float], kind: str) -> None:
    """A layer between two z, a line at one, and each stringer's own weight at its place."""
    right, left = bridge.edges
    low, high, line = (right + (left - right) * one for one in (*sorted(places[:2]), places[2]))
    spread, stringers = [(9e3, low, high), (700.0, line, line)], bridge.floor.stringers
    items = tuple(Item("thing", kind, line=weight, low=first, high=last) for weight, first, last in spread)
    solved = solve(replace(bridge, permanent=PermanentItems(items)))
    spread += [(stringers.weight, z, z) for z in stringers.z] if stringers else []
    loads = [point for one in spread for point in hand.points_of(bridge, *one)]
    stands = hand.standing(bridge, loads)
    values = np.concatenate([stands.rows(part.title, at_midspan=True)[:, 0] for part in solved.parts])
    margin = AGREED * sum(float(one.load[0]) for one in loads) * most_felt(solved)
    assert (np.abs(solved.permanent.sum(axis=0) - values) <= margin).all()


def two_panels(spacing: float, z: tuple[float, ...], beams: Floorbeams, kerb: float = 1.0) -> Bridge:
    """Return a deck bridge of two panels of 4 m, stringers at z, kerbs at +- ``kerb``."""
    roadway = Roadway(-kerb, kerb, clearance=0.2, between=0.6)
    deck = Deck(("L0", "L1", "L2"), truss_spacing=spacing, roadway=roadway, kind="deck")
    return bridge_of(truss_of(pratt([4.0, 4.0], [3.0]), simple_span(2)), deck, Floor(Stringers(z), beams))


def test_a_floorbeams_own_weight() -> None:
    """1 kN/m to the ends of its brackets; over S = 4.6 m (S^2/4 - z^2)/2 kN m at a stringer, S/2 kN beside a truss.

    With two brackets of 1.5 m and S = 3 m, 0.3 m inside a truss 3 x 0.3 - 1.8^2/2 = -0.72 kN m. With one the left truss
    carries 4.5 x 2.25/3 = 3.375 kN and the right one 1.125; 1.125 x 1.5 - 1.5^2/2 = 0.5625 kN m in the middle.
    """
    for spacing, brackets, z, rows in (
        (4.6, (0.0, 0.0), (-1.9, 1.9), {"moment at S1": 840.0, "shear at left truss": 2300.0}),
        (3.0, (1.5, 1.5), (-1.2, 1.2), {"moment at S1": -720.0, "moment over left truss": -1125.0}),
        (3.0, (0.0, 1.5), (0.0, 2.7), {"moment at S1": 562.5, "shear at left truss": 1875.0}),
    ):
        solved = solve(two_panels(spacing, z, Floorbeams(brackets, weight=1e3)))
        found = [solved.permanent[:, row_of(solved.effects, f"floorbeam L1 {row}")].sum() for row in rows]
        assert_allclose(found, [*rows.values()], rtol=1e-9)  # a shear steps within 1e-9 m


def test_a_stringer_at_the_end_of_its_bracket_is_on_it() -> None:
    two_panels(4.8, (-3.1, 0.0, 3.1), Floorbeams((0.7, 0.7)))


def test_terms_of_vehicles_abreast_on_a_stringer_add_up() -> None:
    """S4 feels 2/3 of one's front axle and 0.27083 of its rear one, and 0.020833 of the other's rear axle only.

    40 + 16.25/4 + 1.25 = 45.3125 kN at the right end; the other's 1.25 kN may as well be shown at the left one.
    """
    bridge = two_panels(7.0, (-2.4, -1.2, 0.0, 1.2, 2.4), Floorbeams(), kerb=3.0)
    peaks = rate(bridge, [Vehicle("cart", np.full(2, 60e3), [3.0], gauges=(0.8, 1.9), headings=(1,))]).peaks[0]
    row = row_of(peaks.effects, "stringer S4 L0-L1 shear")
    assert_allclose(sum(term.effect for term in terms(peaks, row, 0)), 45312.5, rtol=1e-12)
