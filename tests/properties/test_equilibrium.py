"""Laws of statics: what bearings push back is what was put on, about every axis and every point."""

from __future__ import annotations

from typing import TYPE_CHECKING

import numpy as np
from hypothesis import given
from hypothesis import strategies as st
from numpy.testing import assert_allclose
from oracles.lagrange import equilibrium, holds_of
from oracles.stepping import sizes
from oracles.trusses import with_areas
from strategies import Laid, determinate, joint_loads, laid

from movload import Support, Truss, TrussState, influence_lines, state_under

if TYPE_CHECKING:
    from numpy.typing import NDArray

# A residual of round-off only: forces are found to about 1e-14 of the largest, and at most some 20 of them are added;
# near-singular bearings (FIRM in strategies.py) make the largest up to ten times the load.
BALANCED = 1e-11


def pushes(truss: Truss) -> NDArray[np.float64]:
    """Return (Q, 3): what each reaction of 1 N adds in x, in y and in moment about the origin."""
    rows = []
    for support in truss.supports:
        x, y = truss.joints[support.joint]
        rows += [(nx, ny, x * ny - y * nx) for nx, ny in (hold.direction for hold in holds_of(support))]
    return np.array(rows)


@given(laid())
def test_reactions_balance_every_unit_load(bridge: Laid) -> None:
    lines = influence_lines(bridge.truss, bridge.panel_points)
    reactions = lines.ordinates[[effect.kind == "reaction" for effect in lines.effects]]
    on_truss = np.array([isinstance(point, str) for point in bridge.panel_points], dtype=float)
    pushed = pushes(bridge.truss).T @ reactions
    span = float(np.ptp([x for x, _ in bridge.truss.joints.values()]))
    assert_allclose(pushed[0], 0.0, rtol=0.0, atol=BALANCED)
    assert_allclose(pushed[1], on_truss, rtol=0.0, atol=BALANCED)
    assert_allclose(pushed[2], lines.stations * on_truss, rtol=0.0, atol=BALANCED * span)


@given(laid(), st.data())
def test_forces_balance_at_every_joint(bridge: Laid, data: st.DataObject) -> None:
    truss = bridge.truss
    loads = data.draw(joint_loads(truss))
    state = state_under(truss, loads)
    number = {joint: place for place, joint in enumerate(truss.joints)}
    left = np.array([loads.get(joint, (0.0, 0.0)) for joint in truss.joints]).reshape(-1)
    left -= equilibrium(truss).T @ np.array([*state.forces.values()])
    reaction = iter(state.reactions.values())
    for support in truss.supports:
        at = 2 * number[support.joint]
        for hold in holds_of(support):
            left[at : at + 2] += next(reaction) * np.array(hold.direction)
    size = max(abs(force) for force in (*state.forces.values(), *state.reactions.values()))
    assert_allclose(left, 0.0, rtol=0.0, atol=BALANCED * size)


def rows(state: TrussState) -> NDArray[np.float64]:
    """Return forces, reactions and displacements of a state as one column, forces in MN and displacements in m."""
    shifts = np.array([*state.displacements.values()]).reshape(-1)
    return np.concatenate(([*state.forces.values()], [*state.reactions.values()], 1e6 * shifts))


@given(laid(), st.data(), st.floats(-3.0, 3.0))
def test_states_add_up(bridge: Laid, data: st.DataObject, factor: float) -> None:
    first, second = data.draw(joint_loads(bridge.truss)), data.draw(joint_loads(bridge.truss))
    both = {
        joint: tuple(np.add(first.get(joint, (0.0, 0.0)), factor * np.array(second.get(joint, (0.0, 0.0)))).tolist())
        for joint in first | second
    }
    apart = rows(state_under(bridge.truss, first)) + factor * rows(state_under(bridge.truss, second))
    together = rows(state_under(bridge.truss, both))
    size = sum(float(np.abs(rows(state_under(bridge.truss, one))).max()) for one in (first, second))
    # two solves rounded on their own: 1e-14 each, of forces and of 1e6 x displacements, whichever is larger
    assert_allclose(together, apart, rtol=0.0, atol=1e-11 * size * (1.0 + abs(factor)))


@given(laid(), st.data())
def test_lines_are_what_states_say(bridge: Laid, data: st.DataObject) -> None:
    lines = influence_lines(bridge.truss, bridge.panel_points)
    joints = [point for point in bridge.panel_points if isinstance(point, str)]
    down = data.draw(st.lists(st.floats(1.0, 90e3), min_size=len(joints), max_size=len(joints)))
    state = state_under(bridge.truss, {joint: (0.0, -load) for joint, load in zip(joints, down, strict=True)})
    weights = iter(down)
    loads = np.array([next(weights) if isinstance(point, str) else 7e3 for point in bridge.panel_points])
    expected = [
        *state.forces.values(),
        *state.reactions.values(),
        *(-state.displacements[joint][1] for joint in joints),
    ]
    # one load column solved at once against ordinates added up: round-off of up to 9 terms of 1e-13 of the largest
    allowed = 1e-11 * sizes(lines) * sum(down)
    assert (np.abs(lines.under(loads[:, None])[:, 0] - expected) <= allowed).all()


@given(determinate(plain_deck=True), st.lists(st.floats(1e-4, 1e-1), min_size=2, max_size=5), st.data())
def test_forces_of_determinate_trusses_do_not_know_areas(bridge: Laid, areas: list[float], data: st.DataObject) -> None:
    loads = data.draw(joint_loads(bridge.truss))
    before = state_under(bridge.truss, loads)
    after = state_under(with_areas(bridge.truss, areas), loads)
    size = max(abs(force) for force in (*before.forces.values(), *before.reactions.values()))
    # areas a thousand times apart cost three digits of the solve, most of which the refinement gives back
    assert_allclose([*after.forces.values()], [*before.forces.values()], rtol=0.0, atol=1e-11 * size)
    assert_allclose([*after.reactions.values()], [*before.reactions.values()], rtol=0.0, atol=1e-11 * size)


@given(determinate(plain_deck=True), st.data())
def test_settlement_of_determinate_trusses_moves_them_and_nothing_else(bridge: Laid, data: st.DataObject) -> None:
    sinks = data.draw(st.lists(st.floats(1e-3, 0.1), min_size=3, max_size=3))
    supports = [
        Support(s.joint, s.slides, settlement=sink) for s, sink in zip(bridge.truss.supports, sinks, strict=False)
    ]
    truss = Truss(bridge.truss.joints, bridge.truss.members, supports)
    state = state_under(truss, {})
    stiffest = float(truss.axial_stiffness.max()) * max(sinks)  # N, were one bar alone to take the movement
    assert_allclose([*state.forces.values(), *state.reactions.values()], 0.0, rtol=0.0, atol=1e-12 * stiffest)
    for support in supports:
        moved = np.array(state.displacements[support.joint])
        normal = np.array(holds_of(support)[-1].direction)
        assert_allclose(moved @ normal, -support.settlement, rtol=1e-12)
