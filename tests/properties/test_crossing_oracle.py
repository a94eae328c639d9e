"""movload's answer against a crossing followed wheel by wheel (``oracles.crossing_by_hand``) on invented bridges.

The bridges are any determinate trusses twice, with stringers anywhere, decks that overhang, brackets, kerbs outside the
trusses; the vehicles have unequal wheels and gauges. Two things are asked of every row: that the placement movload names
may be taken and gives the value it names, and that no position tried gives more.
"""

from __future__ import annotations

from dataclasses import dataclass, replace
from typing import TYPE_CHECKING, Final

import numpy as np
from hypothesis import assume, given, settings
from hypothesis import strategies as st
from numpy.testing import assert_allclose
from oracles.crossing_by_hand import Wheel, axles_at, fitting_beside, how_many, room_of, standing, wheels_of
from oracles.lagrange import line_ordinates
from strategies import determinate, vehicles

from movload import Bridge, Case, Crossing, Deck, Loading, Truss, Vehicle, rate
from movload.bridge.floor import Floor, Floorbeams, Stringers
from movload.bridge.permanent import Item, PermanentItems
from movload.bridge.roadway import PLACES, Roadway
from movload.bridge.strengths import TypedStrength, permitted
from movload.rating.factor_sets import PERMITTED

if TYPE_CHECKING:
    from numpy.typing import NDArray
    from oracles.crossing_by_hand import Standing

    from movload import Ratings
    from movload.statics.part import Part

    Floats = NDArray[np.float64]

AGREED: Final = 1e-9  # of the most a row could feel: the dense oracle's forces are good to 1e-10 (test_oracles)
METRES: Final = 1e-8  # m: sums of kerbs, clearances and gauges
PRESENCE: Final = (1.2, 1.0, 0.85)
METHOD: Final = replace(PERMITTED, multiple_presence=PRESENCE)
ANY: Final = TypedStrength({"moment": 100e3, "shear": 100e3, "hogging": 100e3})
SAMPLES: Final = 400  # positions tried for each number abreast


def bridge_of(truss: Truss, deck: Deck, floor: Floor, *items: Item, impact: float = 0.0) -> Bridge:
    """Return a bridge whose members weigh nothing."""
    members = [replace(member, density=0.0) for member in truss.members]
    some = {members[0].name: permitted(1e5, 1e5)}
    truss = Truss(truss.joints, members, truss.supports)
    return Bridge("invented", truss, deck, permanent=PermanentItems(items), strengths=some, floor=floor, impact=impact)


@st.composite
def bridges(draw: st.DrawFn, roadway: Roadway, impact: float = 0.0) -> Bridge:
    """Draw a bridge under a roadway: stringers under 0.5 to 1.2 of it, trusses 0.4 to 1.4 of it apart, off the middle."""
    laid = draw(determinate())
    steps = np.array(draw(st.lists(st.floats(0.3, 1.0), min_size=1, max_size=5)))
    reach = roadway.width * draw(st.floats(0.5, 1.2))
    z = roadway.middle + draw(st.floats(-0.4, 0.4)) + reach * (np.cumsum([0.0, *steps]) / steps.sum() - 0.5)
    spacing = roadway.width * draw(st.floats(0.4, 1.4))
    more = draw(st.sampled_from([0.0, 0.3]))
    brackets = tuple(max(0.0, out - 0.5 * spacing) and out - 0.5 * spacing + more for out in (-z[0], z[-1]))
    floor = Floor(Stringers(tuple(z.tolist()), strength=ANY), Floorbeams(brackets, strength=ANY))
    deck = Deck(laid.panel_points, truss_spacing=spacing, roadway=roadway, kind="deck")
    return bridge_of(laid.truss, deck, floor, impact=impact)


@dataclass(frozen=True, eq=False, repr=False)
class Drawn:
    """A vehicle, its bridge, its place, and what movload says."""

    vehicle: Vehicle
    bridge: Bridge
    crossing: Crossing
    ratings: Ratings

    def __repr__(self) -> str:
        """What hypothesis shows of it."""
        return f"{self.vehicle}, {self.bridge.floor}, {self.bridge.deck}, {self.crossing.place} x {self.crossing.lanes}"

    @property
    def width(self) -> float:
        return max(self.vehicle.gauges)

    @property
    def roadway(self) -> Roadway:
        roadway = self.bridge.deck.roadway
        assert roadway is not None
        return roadway

    @property
    def apart(self) -> float:
        return self.width + self.roadway.between

    @property
    def counts(self) -> list[int]:
        """How many may stand abreast."""
        most = how_many(self.roadway, self.width) if self.crossing.place == "anywhere" else 1
        return [self.crossing.lanes] if self.crossing.lanes else list(range(1, most + 1))

    def room(self, heading: int) -> tuple[float, float]:
        return room_of(self.roadway, self.crossing.place, self.width, heading, self.crossing.z)

    def times(self, count: int) -> float:
        """What everything beside the loads multiplies them by when so many stand abreast."""
        presence = PRESENCE[min(count, len(PRESENCE)) - 1]
        return presence * self.crossing.loading.cases[0].factor * (1.0 + (self.bridge.impact or 0.0))


@st.composite
def crossings(draw: st.DrawFn) -> Drawn:
    """Draw a vehicle on a roadway where one to three fit, and rate it."""
    vehicle = draw(vehicles())
    axles, lopsided = vehicle.loads.size, draw(st.booleans())
    one_gauge = draw(st.floats(0.7, 2.2))
    gauges = draw(st.just([one_gauge] * axles) | st.lists(st.floats(0.7, 2.2), min_size=axles, max_size=axles))
    lefts = draw(st.lists(st.floats(0.0, 1.0), min_size=axles, max_size=axles)) if lopsided else ()
    # a vehicle without length does not show its heading
    assume(not lopsided or float(np.sum(np.asarray(vehicle.spacings))) > 0.1)
    vehicle = replace(vehicle, gauges=tuple(gauges), left_shares=tuple(lefts))
    clearance, right = draw(st.floats(0.0, 0.6)), draw(st.floats(-5.0, 0.5))
    left = right + 2.0 * clearance + max(gauges) + draw(st.floats(0.01, 5.0))
    keeps, between = draw(st.sampled_from(["right", "left"])), draw(st.floats(0.6, 1.5))
    roadway = Roadway(right, left, clearance=clearance, between=between, keeps=keeps)
    place = draw(st.sampled_from(["anywhere", "anywhere", *PLACES]))
    low, high = room_of(roadway, "anywhere", max(gauges), 1)
    z = low + draw(st.floats(0.0, 1.0)) * (high - low) if place == "offset" else 0.0
    lanes = draw(st.integers(0, how_many(roadway, max(gauges)))) if place == "anywhere" else 0
    rooms = [room_of(roadway, place, max(gauges), heading, z) for heading in vehicle.headings]
    assume(all(low <= high for low, high in rooms))
    loading = Loading("drawn", "routine", (Case("laden", vehicle, factor=draw(st.sampled_from([1.0, 1.3]))),))
    bridge = draw(bridges(roadway, impact=draw(st.sampled_from([0.0, 0.3]))))
    crossing = Crossing(loading, place, z, lanes=lanes)
    return Drawn(vehicle, bridge, crossing, rate(bridge, [crossing], METHOD))


def rows_of(part: Part, stands: Standing) -> Floats:
    """Return a part's rows (R, K) by hand."""
    if part.title in {"left truss", "right truss"}:
        return stands.trusses[part.title]
    if part.title.startswith("stringer S"):
        return stands.stringer(int(part.title.removeprefix("stringer S")) - 1)
    return stands.beam(part.title.removeprefix("floorbeams, "))


def by_hand(drawn: Drawn, wheels: list[Wheel]) -> list[Floats]:
    """Return every part's rows (R, K) by hand."""
    stands = standing(drawn.bridge, wheels)
    return [rows_of(part, stands) for part in drawn.ratings.solved.parts]


def sizes_of(drawn: Drawn) -> Floats:
    """Return the most that each row (R,) could feel: every axle where it counts most, several times over."""
    solved, rows = drawn.ratings.solved, []
    ordinates = line_ordinates(drawn.bridge.truss, drawn.bridge.deck.panel_points)
    for part in solved.parts:
        down = np.array([effect.kind == "down" for effect in part.response.effects])
        line = np.abs(ordinates).max(axis=1) if "truss" in part.title[-5:] and down.size == len(ordinates) else None
        of_kind = np.ones(down.size) if line is None else np.where(down, line[down].max(), line[~down].max())
        rows.append(of_kind * max(1.0, float(np.abs(part.across.ordinate).max())))
    spans = float(np.diff(solved.parts[0].response.stations).max())
    return np.concatenate(rows) * drawn.vehicle.gross * max(drawn.counts) * drawn.times(1) * max(1.0, spans)


@settings(max_examples=40)
@given(crossings())
def test_the_placement_named_may_be_taken_and_gives_the_value_named(drawn: Drawn) -> None:
    """All peaks at once, one a position; a stringer is asked about vehicle by vehicle (see the last tests)."""
    peaks, axles = drawn.ratings.peaks[0], drawn.vehicle.loads.size
    keys = [(row, side) for row in range(len(peaks.effects)) for side in (0, 1)]
    found = [peaks.peak(row, side) for row, side in keys]
    shape = (max(drawn.counts), len(keys))
    x, z, heading, times = np.full((axles, *shape), np.nan), np.zeros(shape), np.ones(shape), np.zeros(shape)
    for position, peak in enumerate(found):
        stands = peak.placement
        for number in range(stands.x.size // axles):
            own = stands.vehicle == number
            x[:, number, position], z[number, position] = stands.x[own], stands.z[own][0]
            heading[number, position] = -np.sign(stands.x[own][-1] - stands.x[own][0]) or peak.heading
            times[number, position] = (stands.factor * (1.0 + stands.impact))[own][0]
        if stands.x.size:
            check_placement(drawn, z[: number + 1, position], heading[: number + 1, position], times[0, position])
    straight = axles_at(drawn.vehicle, x[0].reshape(-1), heading.reshape(-1)).reshape(x.shape)
    assert_allclose(x, straight, rtol=0.0, atol=METRES)
    each = [
        by_hand(drawn, list(wheels_of(drawn.vehicle, x[:, one], z[one], heading[one], times[one])))
        for one in range(shape[0])
    ]
    total = np.concatenate([np.sum(of_part, axis=0) for of_part in zip(*each, strict=True)])
    values = np.array([total[row, position] for position, (row, _) in enumerate(keys)])
    named = np.array([(peaks.highest, peaks.lowest)[side][row] for row, side in keys])
    assert (np.abs(values - named) <= AGREED * np.repeat(sizes_of(drawn), 2)).all()


def check_placement(drawn: Drawn, z: Floats, heading: Floats, times: float) -> None:
    """Refuse vehicles that do not keep to their place, too near each other, or counted as none of those there may be."""
    allowed = [count for count in drawn.counts if np.isclose(drawn.times(count), times, rtol=1e-12)]
    assert allowed
    for middle, way in zip(z, heading, strict=True):
        assert way in drawn.vehicle.headings
        low, high = drawn.room(int(way))
        assert low - METRES <= middle <= high + METRES
    assert (np.diff(np.sort(z)) >= drawn.apart - METRES).all()
    assert len(z) <= max(allowed)
    assert fitting_beside(drawn.room(int(heading[0])), z.tolist(), drawn.apart) >= min(allowed)


@settings(max_examples=40)
@given(crossings(), st.integers(0, 2**32 - 1))
def test_no_position_tried_beats_the_value_named(drawn: Drawn, seed: int) -> None:
    """Half of the positions at random; half with an axle at a floorbeam and a wheel on a stringer, truss or kerb."""
    random, peaks, atol = np.random.default_rng(seed), drawn.ratings.peaks[0], AGREED * sizes_of(drawn)[:, None]
    for count in drawn.counts:
        wheels: list[Wheel] = []
        for z, heading in tried_across(drawn, count, random):
            front = tried_along(drawn, heading, random)
            x = axles_at(drawn.vehicle, front, heading)
            wheels += wheels_of(drawn.vehicle, x, z, heading, np.full(SAMPLES, drawn.times(count)))
        values = np.concatenate(by_hand(drawn, wheels))
        assert (values <= peaks.highest[:, None] + atol).all()
        assert (values >= peaks.lowest[:, None] - atol).all()


def tried_across(drawn: Drawn, count: int, random: np.random.Generator) -> list[tuple[Floats, Floats]]:
    """Return z and heading (K,) of each of ``count`` vehicles that keep apart."""
    heading = random.choice(np.array(drawn.vehicle.headings, dtype=np.float64), (count, SAMPLES))
    rooms = np.array([drawn.room(int(way)) for way in heading[0]]).T
    free = np.maximum(rooms[1] - rooms[0] - (count - 1) * drawn.apart, 0.0)
    shifts = np.sort(random.choice([0.0, 1.0, np.nan, np.nan], (count, SAMPLES)), axis=0)
    shifts = np.sort(np.where(np.isnan(shifts), random.random(shifts.shape), shifts), axis=0)
    z = rooms[0] + free * shifts + drawn.apart * np.arange(count)[:, None]
    if count == 1:  # a wheel on a stringer or a truss
        half = 0.5 * (drawn.bridge.deck.truss_spacing or 0.0)
        stringers = drawn.bridge.floor.stringers
        on = random.choice([half, -half, *(stringers.z if stringers else ())], SAMPLES)
        on += 0.5 * random.choice(drawn.vehicle.gauges, SAMPLES) * random.choice([1.0, -1.0], SAMPLES)
        z = np.where((on >= rooms[0]) & (on <= rooms[1]) & (random.random(SAMPLES) < 0.5), on, z)
    return list(zip(z, heading, strict=True))


def tried_along(drawn: Drawn, heading: Floats, random: np.random.Generator) -> Floats:
    """Return the front axle's x (K,)."""
    stations = drawn.ratings.solved.parts[0].response.stations
    behind = -axles_at(drawn.vehicle, np.zeros(1), np.ones(1))[:, 0]
    on = random.choice(stations, SAMPLES) + heading * random.choice(behind, SAMPLES)
    anywhere = random.uniform(stations[0] - behind[-1], stations[-1] + behind[-1], SAMPLES)
    return np.where(random.random(SAMPLES) < 0.8, on, anywhere)
