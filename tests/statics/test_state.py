"""States by hand: reactions in a bed's own axes, settlements, movements along a bed, springs."""

from __future__ import annotations

import math
import pickle

import numpy as np
import pytest
from numpy.testing import assert_allclose
from oracles.trusses import AREA, STEEL, truss_of

from movload import Support, Truss, TrussState, state_under
from movload.errors import InputError, UnknownNameError

ROOF = {"A": (0.0, 0.0), "B": (8.0, 0.0), "C": (4.0, 3.0)}
RAFTERS = [("A", "B"), ("A", "C"), ("B", "C")]
EXACT = 1e-12  # closed forms against a solve of at most six equations


def roof(*supports: Support) -> Truss:
    """Return a triangle 8 m wide and 3 m high."""
    return truss_of((ROOF, RAFTERS), supports)


def under(*supports: Support, load: tuple[float, float] = (0.0, -60e3)) -> TrussState:
    """Return the triangle's state under a force at its top."""
    return state_under(roof(*supports), {"C": load})


def test_a_triangle_by_hand() -> None:
    state = under(Support("A"), Support("B", 0))
    assert_allclose([state.forces[bar] for bar in ("A-C", "B-C", "A-B")], [-50e3, -50e3, 40e3], rtol=EXACT)
    assert_allclose([state.reactions["A y"], state.reactions["B normal"]], [30e3, 30e3], rtol=EXACT)
    assert_allclose(state.reactions["A x"], 0.0, rtol=0.0, atol=EXACT * 60e3)
    assert_allclose(state.displacements["B"], [40e3 * 8.0 / (STEEL * AREA), 0.0], rtol=EXACT)


@pytest.mark.parametrize("bed", [30.0, -30.0, 150.0, 210.0, 0.0, 180.0])
def test_a_reaction_pushes_along_its_beds_normal(bed: float) -> None:
    """N = (-sin a, cos a): R cos a = 30 kN whichever way the bed is written, and the pin takes R sin a along x."""
    state = under(Support("A"), Support("B", bed))
    push = 30e3 / math.cos(math.radians(bed))
    assert_allclose(state.reactions["B normal"], push, rtol=EXACT)
    assert_allclose(state.reactions["A x"], push * math.sin(math.radians(bed)), rtol=EXACT, atol=EXACT * 60e3)
    x, y = state.displacements["B"]
    off_bed = y * math.cos(math.radians(bed)) - x * math.sin(math.radians(bed))
    assert_allclose(off_bed, 0.0, rtol=0.0, atol=1e-15)


def test_an_upright_bed_holds_sideways() -> None:
    state = under(Support("A"), Support("B", 0), Support("C", 90), load=(12e3, 0.0))
    assert set(state.reactions) == {"A x", "A y", "B normal", "C normal"}
    # n = (-1, 0): a force toward +x is pushed back with a positive reaction
    assert state.reactions["C normal"] > 0.0
    assert_allclose(state.displacements["C"][0], 0.0, rtol=0.0, atol=1e-18)


def test_a_spring_gives_by_its_force() -> None:
    state = under(Support("A"), Support("B", 0, normal_stiffness=2e6))
    assert_allclose(state.reactions["B normal"], 30e3, rtol=EXACT)
    assert_allclose(state.displacements["B"][1], -30e3 / 2e6, rtol=EXACT)


def test_a_spring_along_the_bed_pulls_back() -> None:
    """Tie and spring share the thrust of 40 kN: the spring's part is k/(k + EA/8) of it."""
    stiffness = 3e7
    state = under(Support("A"), Support("B", 0, slide_stiffness=stiffness))
    shared = 40e3 * stiffness / (stiffness + STEEL * AREA / 8.0)
    assert_allclose(state.reactions["B along"], -shared, rtol=EXACT)
    assert_allclose(state.forces["A-B"], 40e3 - shared, rtol=EXACT)
    assert_allclose(state.displacements["B"][0], shared / stiffness, rtol=EXACT)


def test_a_settlement_of_a_determinate_truss_causes_no_force() -> None:
    state = state_under(roof(Support("A", settlement=0.02), Support("B", 20.0, settlement=0.05)), {})
    # forces are differences of stiffness x 5 cm, i.e. of some 1e7 N: 1e-13 of that
    assert_allclose([*state.forces.values(), *state.reactions.values()], 0.0, rtol=0.0, atol=1e-5)
    assert_allclose(state.displacements["A"], [0.0, -0.02], rtol=0.0, atol=1e-16)
    normal = np.array([-math.sin(math.radians(20.0)), math.cos(math.radians(20.0))])
    assert_allclose(normal @ state.displacements["B"], -0.05, rtol=EXACT)


def test_an_imposed_movement_of_a_redundant_triangle() -> None:
    """Both feet pinned, B moved 3 mm outward: the tie alone takes E A 0.003 / 8, the rafters only follow."""
    state = state_under(roof(Support("A"), Support("B", movement=3e-3)), {})
    pull = STEEL * AREA * 3e-3 / 8.0
    assert_allclose(state.forces["A-B"], pull, rtol=EXACT)
    assert_allclose([state.reactions["A x"], state.reactions["B x"]], [-pull, pull], rtol=EXACT)
    assert_allclose([state.forces["A-C"], state.forces["B-C"]], 0.0, rtol=0.0, atol=EXACT * pull)


def test_loads_alone_leave_settlements_out() -> None:
    truss = roof(Support("A"), Support("B", movement=3e-3, settlement=0.01))
    alone = state_under(truss, {"C": (0.0, -60e3)}, settled=False)
    plain = under(Support("A"), Support("B"))
    assert_allclose([*alone.forces.values()], [*plain.forces.values()], rtol=EXACT, atol=EXACT * 60e3)


def test_what_state_under_refuses() -> None:
    truss = roof(Support("A"), Support("B", 0))
    with pytest.raises(UnknownNameError, match=r'^joint loads: joint "c" is not defined \(nearest: "C"\)$'):
        state_under(truss, {"c": (0.0, 1.0)})
    with pytest.raises(InputError, match=r"^joint loads: C: a load must be finite, got \(nan, 1.0\) N$"):
        state_under(truss, {"C": (math.nan, 1.0)})


def test_states_come_back_from_pickle() -> None:
    state = under(Support("A"), Support("B", 0))
    assert pickle.loads(pickle.dumps(state)).forces == state.forces  # noqa: S301 - our own bytes
