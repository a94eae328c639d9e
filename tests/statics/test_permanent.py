"""What stands on a bridge for good: nothing is lost, nothing counted twice, and settlements are told apart."""

from __future__ import annotations

import math
from dataclasses import replace
from typing import TYPE_CHECKING

import numpy as np
import pytest
from hypothesis import given
from hypothesis import strategies as st
from numpy.testing import assert_allclose, assert_array_equal
from oracles.lagrange import holds_of, solved
from rating.bridges import AREA, DENSITY, DEPTH, PANELS, brook_truss, deck_weight
from strategies import Laid, laid

from movload import Member, Support, Truss, influence_lines
from movload.bridge.across import Across
from movload.bridge.bridge import Bridge
from movload.bridge.deck import Deck, deck_lengths, stations_of
from movload.errors import MissingDataError
from movload.statics.influence import lines_of
from movload.statics.part import Part
from movload.statics.permanent import PERMANENT_CLASSES, member_weights, permanent_effects
from movload.statics.stiffness import factored

if TYPE_CHECKING:
    from collections.abc import Sequence

    from numpy.typing import NDArray

    from movload.bridge.permanent import PermanentItems

    Floats = NDArray[np.float64]

GRAVITY = 9.80665  # m/s2, standard
COMPONENTS, SETTLEMENT = (PERMANENT_CLASSES.index(name) for name in ("components", "settlement"))
# The oracle solves a dense matrix whose condition is that of the stiffness, some 1e5 here: 1e-16 x 1e5 of the largest.
SOLVED = 1e-10
densities = st.floats(0.0, 8000.0)
decks = st.floats(0.0, 20e3)


def heavy(truss: Truss, density: float) -> Truss:
    """Return the truss with bars of a density [kg/m3]."""
    return Truss(truss.joints, [replace(member, density=density) for member in truss.members], truss.supports)


def effects(truss: Truss, points: Sequence[str | float], loads: PermanentItems) -> Floats:
    """Return every row's permanent effect by class."""
    bridge, solver = Bridge("it", truss, Deck(tuple(points)), permanent=loads), factored(truss)
    part = Part("truss", lines_of(solver, points), Across.typed(0.5))
    return np.asarray(permanent_effects(bridge, solver, [part], loads))


def joint_weights(truss: Truss, points: Sequence[str | float], loads: PermanentItems) -> dict[str, float]:
    """Return what stands on each joint [N], bar by bar and panel by panel."""
    down = dict.fromkeys(truss.joints, 0.0)
    for member in truss.members:
        length = math.dist(truss.joints[member.start], truss.joints[member.end])
        assert member.density is not None
        for joint in (member.start, member.end):
            down[joint] += member.area * member.density * length * GRAVITY / 2
    x = [truss.joints[point][0] if isinstance(point, str) else point for point in points]
    for panel in range(len(points) - 1):
        for point in points[panel : panel + 2]:
            if isinstance(point, str):
                down[point] += loads.items[0].line * (loads.items[0].share or 0.0) * (x[panel + 1] - x[panel]) / 2
    return down


@given(laid(), densities, decks, st.floats(0.0, 1.0))
def test_permanent_effects_are_those_of_an_independent_solution(
    bridge: Laid, density: float, deck: float, share: float
) -> None:
    truss, loads = heavy(bridge.truss, density), deck_weight(deck, share)
    down = joint_weights(truss, bridge.panel_points, loads)
    answer = solved(truss, np.array([[[0.0], [-weight]] for weight in down.values()]))
    found = effects(truss, bridge.panel_points, loads)[COMPONENTS]
    forces = np.concatenate((answer.forces, answer.reactions))[:, 0]
    assert_allclose(found[: forces.size], forces, rtol=0.0, atol=SOLVED * np.abs(forces).max(initial=0.0))
    number = {joint: place for place, joint in enumerate(truss.joints)}
    sinks = [-answer.displacements[number[p], 1, 0] for p in bridge.panel_points if isinstance(p, str)]
    size = np.abs(answer.displacements).max()
    assert_allclose(found[forces.size :], sinks, rtol=0.0, atol=SOLVED * size)


@given(laid(), densities, decks, st.floats(0.0, 1.0))
def test_bearings_push_back_the_whole_permanent_load(bridge: Laid, density: float, deck: float, share: float) -> None:
    """Area x density x length x g of every bar, and all of the deck but half an end panel that bears on an abutment."""
    truss, loads = heavy(bridge.truss, density), deck_weight(deck, share)
    x = stations_of(truss, bridge.panel_points)
    on_truss = float(x[-1] - x[0])
    if not isinstance(bridge.panel_points[0], str):
        on_truss -= float(x[1] - x[0]) / 2
    if not isinstance(bridge.panel_points[-1], str):
        on_truss -= float(x[-1] - x[-2]) / 2
    bars = sum(
        member.area * density * GRAVITY * math.dist(truss.joints[member.start], truss.joints[member.end])
        for member in truss.members
    )
    total = bars + deck * share * on_truss
    rows = influence_lines(truss, bridge.panel_points).effects
    reactions = effects(truss, bridge.panel_points, loads)[COMPONENTS, [row.kind == "reaction" for row in rows]]
    directions = np.array([hold.direction for support in truss.supports for hold in holds_of(support)])
    pushed = directions.T @ reactions
    size = np.abs(reactions).max(initial=0.0)  # inclined beds push against each other, some ten times what stands there
    assert_allclose(pushed, [0.0, total], rtol=0.0, atol=1e-11 * max(size, total))


def test_a_weight_on_a_bearing_reaches_it_and_strains_no_bar() -> None:
    """Joint L0's own share: half the first panel's deck, half of each of its two bars."""
    truss, points = brook_truss(), ["L0", "L1", "L2", "L3", "L4"]
    on_bearing = 4.5e3 * PANELS[0] / 2 + AREA * DENSITY * GRAVITY * (PANELS[0] + math.hypot(PANELS[0], DEPTH)) / 2
    rows = {effect.name: row for row, effect in enumerate(influence_lines(truss, points).effects)}
    found = effects(truss, points, deck_weight(9e3, 0.5))[COMPONENTS]
    end_post = -found[rows["L0-U1"]] * DEPTH / math.hypot(PANELS[0], DEPTH)
    assert_allclose(found[rows["L0 y"]] - end_post, on_bearing, rtol=1e-11)


def test_upper_joints_carry_their_bars() -> None:
    """U2 of a level chord: half of two chord bars and of the post, which its post takes down as compression."""
    truss = brook_truss()
    on_top = AREA * DENSITY * GRAVITY * (PANELS[1] + PANELS[2] + DEPTH) / 2
    assert_allclose(member_weights(truss)[truss.joint_index["U2"]], on_top, rtol=1e-14)
    found = effects(truss, ["L0", "L1", "L2", "L3", "L4"], deck_weight(0.0, 0.5))[COMPONENTS]
    post = [member.name for member in truss.members].index("U2-L2")
    assert_allclose(found[post], -on_top, rtol=1e-12)


def test_weight_is_area_times_density_times_length_times_gravity() -> None:
    """2400 mm2 of steel at 7850 kg/m3, 5 m long: 94.2 kg, 923.786 N, half to each end."""
    joints = {"A": (0.0, 0.0), "B": (3.0, 4.0), "C": (6.0, 0.0)}
    bars = [
        Member("A", "B", 2400e-6, 2e11, density=7850.0), Member("B", "C", 1e-3, 2e11, density=0.0),
        Member("A", "C", 1e-3, 2e11, density=0.0),
    ]  # fmt: skip
    truss = Truss(joints, bars, [Support("A"), Support("C", 0)])
    assert_allclose(member_weights(truss), [461.893215, 461.893215, 0.0], rtol=1e-12)


@pytest.mark.parametrize(
    ("stations", "lengths"),
    [([0.0, 4.1, 7.8, 12.1, 16.0], [2.05, 3.9, 4.0, 4.1, 1.95]), ([-1.0, 2.0], [1.5, 1.5])],
)
def test_each_panel_point_carries_half_the_panels_beside_it(stations: list[float], lengths: list[float]) -> None:
    assert_allclose(deck_lengths(np.array(stations)), lengths, rtol=1e-14)


def test_a_density_that_nobody_typed_is_asked_for() -> None:
    truss = brook_truss()
    members = [replace(m, density=None) if m.name == "U1-L2" else m for m in truss.members]
    bare = Truss(truss.joints, members, truss.supports)
    with pytest.raises(MissingDataError, match=r"member U1-L2: its own weight is needed: type its density \(0 if"):
        member_weights(bare)


@given(laid(), st.lists(st.floats(-0.03, 0.03), min_size=6, max_size=6))
def test_settlements_are_those_of_an_independent_solution(bridge: Laid, movements: list[float]) -> None:
    """Each bearing sinks, and pinned ones are also moved along; nothing else acts."""
    supports = [
        replace(support, settlement=movements[2 * i], movement=movements[2 * i + 1] if support.holds_along else None)
        for i, support in enumerate(bridge.truss.supports)
    ]
    truss = heavy(Truss(bridge.truss.joints, bridge.truss.members, supports), 0.0)
    found = effects(truss, bridge.panel_points, deck_weight(0.0, 0.5))
    assert not found[COMPONENTS].any()
    answer = solved(truss, np.zeros((len(truss.joints), 2, 1)), settled=True)
    forces = np.concatenate((answer.forces, answer.reactions))[:, 0]
    # What a movement of the whole truss alone would give as force by round-off: stiffness x movement.
    stiffest = max(m.area * m.modulus / length for m, length in zip(truss.members, truss.lengths, strict=True))
    noise = 1e-12 * stiffest * max(map(abs, movements))
    size = np.abs(forces).max(initial=0.0)
    assert_allclose(found[SETTLEMENT, : forces.size], forces, rtol=0.0, atol=SOLVED * size + noise)
    number = {joint: place for place, joint in enumerate(truss.joints)}
    sinks = [-answer.displacements[number[p], 1, 0] for p in bridge.panel_points if isinstance(p, str)]
    assert_allclose(found[SETTLEMENT, forces.size :], sinks, rtol=0.0, atol=SOLVED * np.abs(answer.displacements).max())


def test_a_settlement_moves_a_determinate_truss_and_strains_nothing() -> None:
    """L4 sinks 20 mm: every panel point sinks in proportion to its distance from L0."""
    truss = brook_truss()
    sunk = Truss(truss.joints, truss.members, [Support("L0"), Support("L4", 0, settlement=0.02)])
    points = ["L0", "L1", "L2", "L3", "L4"]
    rows = influence_lines(sunk, points).effects
    found = effects(sunk, points, deck_weight(9e3, 0.5))[SETTLEMENT]
    assert_array_equal(found[[row.kind != "down" for row in rows]], 0.0)
    assert_allclose(found[[row.kind == "down" for row in rows]], 0.02 * np.array([0.0, 4.1, 7.8, 12.1, 16.0]) / 16,
                    rtol=1e-9, atol=1e-15)  # fmt: skip


def test_settlement_and_weight_do_not_touch_each_other() -> None:
    truss = brook_truss()
    points = ["L0", "L1", "L2", "L3", "L4"]
    propped, sunk = (
        Truss(truss.joints, truss.members, [*truss.supports, Support("L2", 0, settlement=by)]) for by in (0.0, 0.01)
    )
    loads = deck_weight(9e3, 0.5)
    assert_array_equal(effects(propped, points, loads)[COMPONENTS], effects(sunk, points, loads)[COMPONENTS])
    weightless = effects(heavy(sunk, 0.0), points, deck_weight(0.0, 0.5))
    assert_allclose(weightless[SETTLEMENT], effects(sunk, points, loads)[SETTLEMENT], rtol=1e-12)
    assert not effects(propped, points, loads)[SETTLEMENT].any()
    prop = [row.name for row in influence_lines(sunk, points).effects].index("L2 normal")
    assert weightless[SETTLEMENT, prop] < 0.0  # a bearing that sinks pulls, or pushes less


def test_a_bar_that_permanent_load_does_not_reach_feels_exactly_nothing() -> None:
    """A panel point halfway along a level chord, without a post: its bars are in line and nothing hangs there."""
    joints = {"L0": (0.0, 0.0), "L1": (3.1, 0.0), "L2": (7.0, 0.0), "U1": (3.1, 2.3)}
    bars = [("L0", "U1"), ("U1", "L2"), ("L0", "L1"), ("L1", "L2"), ("U1", "L1")]
    members = [Member(start, end, AREA, 2e11, density=0.0) for start, end in bars]
    truss = Truss(joints, members, [Support("L0"), Support("L2", 0)])
    found = effects(truss, ["L0", "L2"], deck_weight(9e3, 0.5))
    assert_array_equal(found[COMPONENTS, :5], 0.0)
    assert_allclose(found[COMPONENTS, 6:8], 9e3 * 0.5 * 7.0 / 2, rtol=1e-14)


def test_the_result_cannot_be_changed() -> None:
    truss, loads = brook_truss(), deck_weight(9e3, 0.5)
    bridge, solver = Bridge("it", truss, Deck(("L0", "L4")), permanent=loads), factored(truss)
    part = Part("truss", lines_of(solver, ("L0", "L4")), Across.typed(0.5))
    found = permanent_effects(bridge, solver, [part], loads)
    assert found.shape == (len(PERMANENT_CLASSES), 13 + 3 + 2)
    with pytest.raises(ValueError, match="read-only"):
        found[0] = 0.0
