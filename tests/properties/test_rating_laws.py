"""Laws that every rating keeps, whatever the bridge: trusses, stringers, floorbeams and planks in one. All invented."""

from __future__ import annotations

from dataclasses import dataclass, replace
from typing import TYPE_CHECKING, Final

import numpy as np
from hypothesis import assume, given, settings
from hypothesis import strategies as st
from numpy.testing import assert_allclose
from oracles.trusses import bottom, pratt, scaled, simple_span
from strategies import directions, heights, panel_lengths

from movload import Bridge, Crossing, Deck, Loading, Member, Truss, Vehicle, rate
from movload.bridge.floor import Floor, Floorbeams, Planks, Stringers
from movload.bridge.permanent import CLASSES, REMOVABLE, Item, PermanentItems
from movload.bridge.roadway import Roadway
from movload.bridge.strengths import SENSES, TypedStrength
from movload.files.factor_sets import read_factor_set

if TYPE_CHECKING:
    from movload import Ratings
    from movload.arrays import Floats
    from movload.rating.factor_sets import FactorSet

CLOSE: Final = 1e-9  # relative to the most used part: statics keep about 1e-12 of the largest ordinate
METHODS: Final = tuple(read_factor_set(name) for name in ("permitted", "lrfr", "load factor", "en"))
LENGTHS: Final = ("truss_spacing", "right", "left", "clearance", "between", "z", "brackets", "contact", "low", "high",
                  "spacings", "gauges")  # fmt: skip
PER_LENGTH: Final = ("line", "weight", "density")  # the density's areas stay
pairs = st.tuples(st.floats(0.0, 1.0), st.floats(0.0, 1.0))
some = settings(max_examples=15)  # a bridge and two ratings each


@dataclass(frozen=True)
class Case:
    """A bridge, a vehicle and a method."""

    bridge: Bridge
    vehicle: Vehicle
    method: FactorSet

    def rated(self, place: str = "anywhere", z: float = 0.0, *, lanes: int = 0, wander: float = 0.3) -> Ratings:
        """Return the ratings of the vehicle in a place."""
        crossing = Crossing(Loading.of(self.vehicle, "legal"), place, z, lanes=lanes, wander=wander)
        return rate(self.bridge, [crossing], self.method)


def use(ratings: Ratings) -> Floats:
    """Return 1 / RF (S, R, 2): 0 where nothing is felt, infinite where permanent load uses all, nan if unknown."""
    with np.errstate(divide="ignore"):
        return 1.0 / ratings.factor[:, 0]


def assert_no_better(worse: Ratings, better: Ratings) -> None:
    """Check that no row of the first rates higher than in the second, round-off aside."""
    most, least = use(worse), use(better)
    noise = CLOSE * least[np.isfinite(least)].max(initial=0.0)
    assert ((most >= least - noise) | (np.isnan(most) & np.isnan(least))).all()


def assert_alike(found: Floats, expected: Floats) -> None:
    """Check that the same is used of every strength."""
    assert_allclose(found, expected, rtol=CLOSE, atol=CLOSE * expected[np.isfinite(expected)].max(initial=0.0))


@st.composite
def strengths(draw: st.DrawFn) -> TypedStrength:
    """Draw the strengths of one part in every sense, on two footings [N, N m]."""
    values = {sense: draw(st.floats(150e3, 900e3)) for sense in SENSES}
    condition = draw(st.sampled_from(["good", "fair", "poor"]))
    return TypedStrength(values, values, condition=condition, measured=draw(st.booleans()), system="other")


@st.composite
def items(draw: st.DrawFn, half: float) -> Item:
    """Draw what lies somewhere between the trusses."""
    low, high = sorted(half * (1.0 - 2.0 * part) for part in draw(pairs))
    return Item("drawn", draw(st.sampled_from(CLASSES)), line=draw(st.floats(0.2e3, 6e3)), low=low, high=high)


@st.composite
def floors(draw: st.DrawFn, half: float, brackets: tuple[float, float]) -> Floor:
    """Draw a floor: 2 to 5 stringers between the trusses, the outer ones within a quarter of them."""
    bays = np.cumsum([0.0, *draw(st.lists(st.floats(0.4, 1.0), min_size=1, max_size=4))])
    first, last = (half * (0.75 + 0.25 * part) for part in draw(pairs))
    z = tuple(-first + (first + last) * bays / bays[-1])
    beams = Floorbeams(brackets, weight=draw(st.floats(0.0, 1e3)), strength=draw(strengths()))
    stringers = Stringers(z, weight=draw(st.floats(0.0, 0.5e3)), strength=draw(strengths()))
    return Floor(stringers, beams, Planks(0.2, 0.7, strength=draw(strengths())))


@st.composite
def cases(draw: st.DrawFn) -> Case:
    """Draw a bridge of 3 or 4 panels with a floor, kerbs off the middle, and a lopsided vehicle that fits."""
    panels = draw(st.lists(panel_lengths, min_size=3, max_size=4))
    joints, ends = pratt(panels, draw(st.lists(heights, min_size=len(panels) - 1, max_size=len(panels) - 1)))
    half = draw(st.floats(2.2, 3.6))
    brackets = draw(st.sampled_from([(0.0, 0.0), (0.0, 0.0), (0.7, 0.4)]))
    right, left = (half - 0.4 * part for part in draw(pairs))
    clearance, keeps = draw(st.floats(0.0, 0.3)), draw(st.sampled_from(["right", "left"]))
    roadway = Roadway(-right - brackets[0], left + brackets[1], clearance=clearance, keeps=keeps)
    typed = draw(st.lists(strengths(), min_size=3, max_size=3))
    bridge = Bridge(
        "drawn",
        Truss(joints, [Member(*bar, 5e-3, 200e9, density=7850.0) for bar in ends], simple_span(len(panels))),
        Deck(tuple(bottom(len(panels))), truss_spacing=2.0 * half, roadway=roadway),
        permanent=PermanentItems(tuple(draw(st.lists(items(half), max_size=3)))),
        strengths={"-".join(bar): typed[number % 3] for number, bar in enumerate(ends)},
        floor=draw(floors(half, brackets)),
        impact=draw(st.sampled_from([0.0, 0.25])),
        traffic=draw(st.sampled_from([np.inf, 2500.0])),
    )
    return Case(bridge, draw(machines()), draw(st.sampled_from(METHODS)))


@st.composite
def machines(draw: st.DrawFn) -> Vehicle:
    """Draw a vehicle of 1 to 3 axles, each with its gauge and its left wheels' part."""
    left = draw(st.sampled_from([st.just(0.5), st.floats(0.35, 0.65)]))
    axle = st.tuples(st.floats(10e3, 160e3), st.floats(0.8, 6.0), st.floats(0.7, 1.9), left)
    loads, gaps, gauges, lefts = zip(*draw(st.lists(axle, min_size=1, max_size=3)), strict=True)
    return Vehicle("drawn", loads, gaps[1:], gauges=gauges, left_shares=lefts, headings=draw(directions))


@some
@given(cases())
def test_a_vehicle_times_its_rating_rates_one(case: Case) -> None:
    """Every row's rating is divided by the same, so what governs now has 1."""
    before = case.rated()
    factor = before.governing(0).factor
    assume(0.0 < factor < np.inf)
    after = replace(case, vehicle=replace(case.vehicle, loads=factor * case.vehicle.loads)).rated()
    assert_alike(use(after), factor * use(before))
    assert_allclose(after.governing(0).factor, 1.0, rtol=CLOSE)


@some
@given(cases(), st.data())
def test_weight_that_pushes_lowers_ratings_and_weight_that_relieves_raises(case: Case, data: st.DataObject) -> None:
    """Surfacing that may be removed relieves nothing; whatever does not reach a row does not change it."""
    more = data.draw(items(0.5 * case.bridge.deck.truss_spacing))
    heavier = PermanentItems((*case.bridge.permanent.items, more))
    before, after = case.rated(), replace(case, bridge=replace(case.bridge, permanent=heavier)).rated()
    added = (after.solved.permanent - before.solved.permanent).sum(axis=0)
    noise = CLOSE * max(np.abs(one.solved.permanent).max() for one in (before, after))
    for side, pushed in ((0, added), (1, -added)):
        used, now = use(before)[:, :, side], use(after)[:, :, side]
        felt = np.isfinite(used) & (used > CLOSE)  # 0: no live load there, so no weight matters unless it uses all
        pushes, relieves = felt & (pushed > noise), felt & (pushed < -noise)
        assert (now[pushes] > used[pushes]).all()
        assert ((now[relieves] < used[relieves]) | ((more.kind == REMOVABLE) & (now[relieves] == used[relieves]))).all()
        rest = felt & ~pushes & ~relieves
        assert_allclose(now[rest], used[rest], rtol=1e-6)


def mirrored_bridge(bridge: Bridge) -> Bridge:
    """Return the bridge with its left and its right swapped."""
    deck, floor, way = bridge.deck, bridge.floor, bridge.deck.roadway
    keeps = {"right": "left", "left": "right"}[way.keeps]
    stringers = replace(floor.stringers, z=tuple(-z for z in reversed(floor.stringers.z)))
    beams = replace(floor.floorbeams, brackets=floor.floorbeams.brackets[::-1])
    return replace(
        bridge,
        deck=replace(deck, roadway=replace(way, right=-way.left, left=-way.right, keeps=keeps)),
        permanent=PermanentItems(tuple(replace(one, low=-one.high, high=-one.low) for one in bridge.permanent.items)),
        floor=replace(floor, stringers=stringers, floorbeams=beams),
    )


def mirrored_key(key: tuple[str, str], stringers: int) -> tuple[str, str]:
    """Return what a row is called on the other side."""
    swap = {"left": "right", "right": "left"} | {f"S{n}": f"S{stringers + 1 - n}" for n in range(1, stringers + 1)}
    part, name = (" ".join(swap.get(word, word) for word in words.split(" ")) for words in key)
    return part, name


@some
@given(cases(), st.sampled_from([("anywhere", "anywhere"), ("left kerb", "right kerb"), ("own lane", "own lane")]))
def test_a_bridge_mirrored_across_swaps_left_and_right(case: Case, places: tuple[str, str]) -> None:
    """Own lane too, where traffic then keeps to the other side; a vehicle's heavy wheels change sides with it."""
    assume(places[0] != "own lane" or case.bridge.deck.roadway.abreast(max(case.vehicle.gauges)) > 1)
    vehicle = replace(case.vehicle, left_shares=tuple(1.0 - share for share in case.vehicle.left_shares))
    here = case.rated(places[0])
    there = replace(case, bridge=mirrored_bridge(case.bridge), vehicle=vehicle).rated(places[1])
    rows, stringers = [effect.key for effect in there.solved.effects], len(case.bridge.floor.stringers.z)
    swapped = [rows.index(mirrored_key(effect.key, stringers)) for effect in here.solved.effects]
    assert_alike(use(there)[:, swapped], use(here))


def resized(typed: TypedStrength, force: float, length: float) -> TypedStrength:
    """Return strengths with forces and lengths in other units."""
    times = {"moment": force * length, "hogging": force * length}
    values = {sense: value * times.get(sense, force) for sense, value in typed.permits.items()}
    return replace(typed, permits=values, nominal=values)


def in_other_units(thing: object, force: float, length: float) -> object:
    """Return a vehicle, or a part of a bridge, with every force and every length times a number; areas stay."""
    times = {"loads": force} | dict.fromkeys(LENGTHS, length) | dict.fromkeys(PER_LENGTH, force / length)
    there = {name: getattr(thing, name) for name in times if hasattr(thing, name)}
    changed = {name: times[name] * np.array(value) for name, value in there.items()}
    changed = {name: tuple(value) if isinstance(there[name], tuple) else value for name, value in changed.items()}
    strength = {"strength": resized(thing.strength, force, length)} if hasattr(thing, "strength") else {}
    return replace(thing, **changed, **strength)


@some
@given(cases(), st.floats(0.1, 10.0), st.floats(0.3, 3.3))
def test_units_do_not_matter(case: Case, force: float, length: float) -> None:
    bridge, floor, truss = case.bridge, case.bridge.floor, scaled(case.bridge.truss, length)
    vehicle, deck, roadway, *parts = (
        in_other_units(one, force, length)
        for one in (case.vehicle, bridge.deck, bridge.deck.roadway, floor.stringers, floor.floorbeams, floor.planks)
    )
    other = replace(
        bridge,
        truss=replace(truss, members=[in_other_units(one, force, length) for one in truss.members]),
        deck=replace(deck, roadway=roadway),
        permanent=PermanentItems(tuple(in_other_units(one, force, length) for one in bridge.permanent.items)),
        strengths={name: resized(typed, force, length) for name, typed in bridge.strengths.items()},
        floor=Floor(*parts),
    )
    assert_alike(use(replace(case, bridge=other, vehicle=vehicle).rated()), use(case.rated()))


@some
@given(cases(), st.floats(0.0, 1.0))
def test_anywhere_is_never_better_than_one_place(case: Case, part: float) -> None:
    low, high = case.bridge.deck.roadway.room(max(case.vehicle.gauges))
    anywhere, offset = case.rated(), case.rated("offset", low + part * (high - low))
    for one in (offset, *(case.rated(place) for place in ("left kerb", "right kerb", "centre line"))):
        assert_no_better(anywhere, one)


@some
@given(cases(), pairs)
def test_more_places_never_raise_a_rating(case: Case, wanders: tuple[float, float]) -> None:
    """More abreast, either heading instead of one, a wider stray from the centre line."""
    anywhere = case.rated()
    assert_no_better(anywhere, case.rated(lanes=1))
    for way in case.vehicle.headings:
        assert_no_better(anywhere, replace(case, vehicle=replace(case.vehicle, headings=(way,))).rated())
    assert_no_better(*(case.rated("centre line", wander=wander) for wander in sorted(wanders, reverse=True)))
