"""Lines against two methods that share nothing with movload.statics, inclined beds included."""

from __future__ import annotations

import numpy as np
from hypothesis import given, settings
from hypothesis import strategies as st
from numpy.testing import assert_allclose
from oracles import lagrange
from oracles.symbolic import rows_under
from oracles.trusses import STEEL, truss_of, warren
from strategies import Laid, joint_loads, laid

from movload import Support, Truss, influence_lines, state_under

# The dense oracle solves with a condition number up to about 1e7 on these trusses, so 1e-16 x 1e7 at worst; the
# greatest difference met over 1,500 random trusses was 5e-13 of the largest ordinate.
AGREED = 1e-10
SOFTEST = 1.7 / (2e-2 * STEEL)  # m/N: the stiffest bar drawn, a floor for deflections that bearings hold at 0


@given(laid())
def test_lines_agree_with_bearings_held_by_multipliers(bridge: Laid) -> None:
    lines = influence_lines(bridge.truss, bridge.panel_points)
    expected = lagrange.line_ordinates(bridge.truss, bridge.panel_points)
    down = np.array([effect.kind == "down" for effect in lines.effects])
    size = float(np.abs(expected[~down]).max())
    assert_allclose(lines.ordinates[~down], expected[~down], rtol=0.0, atol=AGREED * max(size, 1.0))
    size = float(np.abs(expected[down]).max(initial=0.0))
    assert_allclose(lines.ordinates[down], expected[down], rtol=0.0, atol=AGREED * max(size, SOFTEST))


@st.composite
def moved(draw: st.DrawFn, truss: Truss) -> Truss:
    """Draw settlements, movements along the bed and springs for every bearing of a truss."""
    movement, stiffness = st.none() | st.floats(-0.04, 0.04), st.none() | st.floats(1e6, 1e10)
    supports = [
        Support(
            support.joint,
            support.slides,
            settlement=draw(st.floats(-0.04, 0.04)),
            movement=draw(movement),
            normal_stiffness=draw(stiffness),
            slide_stiffness=draw(stiffness),
        )
        for support in truss.supports
    ]
    return Truss(truss.joints, truss.members, supports)


@given(laid(plain_deck=True), st.data(), st.booleans())
def test_states_with_settlements_movements_and_springs_agree(bridge: Laid, data: st.DataObject, settled: bool) -> None:
    truss = data.draw(moved(bridge.truss))
    on_joints = data.draw(joint_loads(truss))
    loads = np.array([on_joints.get(joint, (0.0, 0.0)) for joint in truss.joints])[:, :, None]
    state, expected = state_under(truss, on_joints, settled=settled), lagrange.solved(truss, loads, settled=settled)
    forces = np.concatenate((expected.forces, expected.reactions))[:, 0]
    size = max(float(np.abs(forces).max()), float(np.abs(loads).max()))
    ours = [*state.forces.values(), *state.reactions.values()]
    # springs of 1e6 N/m beside bars of 1e9 cost the dense oracle three more digits (2e-10 met in 700)
    assert_allclose(ours, forces, rtol=0.0, atol=1e-8 * size)
    shifts = expected.displacements[:, :, 0]
    size = max(float(np.abs(shifts).max()), SOFTEST * float(np.abs(loads).max()))
    assert_allclose(list(state.displacements.values()), shifts, rtol=0.0, atol=1e-8 * size)


def check_symbolically(bridge: Laid) -> None:
    """Compare every member and reaction row at every panel point with SymPy's joint equations."""
    lines = influence_lines(bridge.truss, bridge.panel_points)
    for column, point in enumerate(bridge.panel_points):
        if isinstance(point, str):
            for name, force in rows_under(bridge.truss, {point: (0.0, -1.0)}).items():
                # SymPy inverts a matrix of 15-digit numbers without pivoting for size: about 1e-12 is met
                assert_allclose(lines[name].ordinates[column], force, rtol=0.0, atol=1e-9, err_msg=name)


@settings(max_examples=4)
@given(laid(kinds=("pin and bed",), crossed=False).filter(lambda bridge: len(bridge.truss.joints) <= 6))
def test_lines_agree_with_joint_equations(bridge: Laid) -> None:
    check_symbolically(bridge)


def test_lines_on_an_inclined_bed_agree_with_the_whole_truss_turned() -> None:
    supports = [Support("L0", 33.3), Support("L3")]
    truss = truss_of(warren([3.17, 4.41, 2.93], [2.6, 3.4, 2.2]), supports)
    check_symbolically(Laid(truss, ("L0", "L1", "L2", "L3")))
