"""The factored stiffness: mechanisms found and named, springs between soft and stiff, accuracy on long trusses."""

from __future__ import annotations

import math
import re

import numpy as np
import pytest
from hypothesis import assume, given
from hypothesis import strategies as st
from numpy.testing import assert_allclose
from oracles.lagrange import constraints, equilibrium
from oracles.trusses import bottom, pratt, simple_span, truss_of
from strategies import Laid, laid

from movload import InfluenceLines, Member, Support, Truss, influence_lines, state_under
from movload.errors import InputError, UnstableError
from movload.statics.stiffness import factored

SIX = pratt([3.1, 2.9, 3.3, 3.0, 2.8, 3.2], [2.9, 3.4, 3.6, 3.3, 3.0])


def without(truss: Truss, *names: str) -> Truss:
    """Return a truss with some members taken out."""
    return Truss(truss.joints, [m for m in truss.members if m.name not in names], truss.supports)


def test_a_missing_diagonal_is_found_and_a_joint_that_moves_is_named() -> None:
    broken = without(truss_of(SIX, simple_span(6)), "U2-L3")
    assert broken.redundancy == -1
    with pytest.raises(
        UnstableError, match=r'^truss: is a mechanism: joint "[LU]\d" can move .* without stretching any'
    ):
        factored(broken)


def test_a_mechanism_that_counting_does_not_reveal() -> None:
    """One panel without a diagonal, its neighbour with two: enough bars, in the wrong place."""
    crossed = truss_of(pratt([3.1] * 6, [3.0] * 5, crossed=[1]), simple_span(6))
    broken = without(crossed, "U2-L3")
    assert broken.redundancy == 0
    with pytest.raises(UnstableError, match=r'joint "[LU]\d" can move (up and down \(y\)|at \d+ degrees from \+x)'):
        factored(broken)


def test_a_joint_between_two_bars_in_line_moves_across_them() -> None:
    joints = {"A": (0.0, 0.0), "B": (2.0, 1.0), "C": (4.0, 2.0), "D": (4.0, 0.0)}
    bars = [("A", "B"), ("B", "C"), ("C", "D"), ("A", "D")]
    truss = truss_of((joints, bars), [Support("A"), Support("D"), Support("C", 90)])
    with pytest.raises(UnstableError, match=r'joint "B" can move at 117 degrees from \+x .* \(no other joint moves\)'):
        factored(truss)


def test_bearings_that_all_push_through_one_point() -> None:
    """A pin and a bed whose normal passes through it: three holds, and still the truss turns about the pin."""
    truss = truss_of(SIX, [Support("L0"), Support("L6", 90)])
    assert truss.redundancy == 0
    with pytest.raises(UnstableError, match=r'joint "L6" can move up and down \(y\)|at 90 degrees'):
        factored(truss)


def test_three_parallel_bearings() -> None:
    truss = truss_of(SIX, [Support("L0", 0), Support("L3", 0), Support("L6", 0)])
    with pytest.raises(UnstableError, match=r"can move along the bridge \(x\) .* \(11 other joint\(s\) move with it\)"):
        factored(truss)


def test_a_joint_without_its_hanger_moves_up_and_down() -> None:
    """L1 between two level bars, its hanger left out; two bars in line: nothing resists, a pivot is exactly 0."""
    broken = without(truss_of(SIX, simple_span(6)), "U1-L1")
    for loose, joint in ((broken, "L1"), (arch(0.0), "C")):
        with pytest.raises(
            UnstableError, match=rf'joint "{joint}" can move up and down \(y\) .* \(no other joint moves'
        ):
            factored(loose)


def direction(words: str) -> float:
    """Return the angle [degrees] that an error message states."""
    found = re.search(r"at (\d+) degrees", words)
    return float(found[1]) if found else {"x": 0.0, "y": 90.0}[words[-2]]


@given(laid(plain_deck=True), st.data())
def test_taking_out_a_bar_is_noticed_whenever_rank_is_lost(bridge: Laid, data: st.DataObject) -> None:
    gone = data.draw(st.sampled_from([member.name for member in bridge.truss.members]))
    try:
        left = without(bridge.truss, gone)
    except InputError:
        assume(False)  # a joint that no member reaches is refused before
    holds, _, _ = constraints(left)
    size, movements = np.linalg.svd(np.concatenate((equilibrium(left), holds)))[1:]
    size = np.pad(size, (0, len(movements) - size.size))
    loose = movements[size < 1e-9]
    assume(len(loose) <= 1)
    if not len(loose):
        factored(left)
        return
    moves = loose[0].reshape(-1, 2)
    lone = np.count_nonzero(np.hypot(*moves.T) > 1e-9) == 1
    assume(not lone)  # see test_a_joint_without_its_hanger_moves_up_and_down
    with pytest.raises(UnstableError, match="is a mechanism") as caught:
        factored(left)
    named = re.search(r'joint "(\w+)" can move (.+?) without', str(caught.value))
    assert named is not None
    x, y = moves[list(left.joints).index(named[1])]
    assert math.hypot(x, y) > 0.99 * np.hypot(*moves.T).max()  # the joint named is one that moves most
    off = (math.degrees(math.atan2(y, x)) - direction(named[2]) + 90.0) % 180.0 - 90.0
    assert abs(off) <= 0.51  # whole degrees are stated


def arch(rise: float) -> Truss:
    """Return two bars between two pins, the joint between them ``rise`` [m] above their line."""
    members = [Member("A", "C", 1e-3, 2e11), Member("C", "B", 2.3e-3, 2e11)]
    return Truss({"A": (0.0, 0.0), "C": (1.7, rise), "B": (4.0, 0.0)}, members, [Support("A"), Support("B")])


@pytest.mark.parametrize("rise", [1e-2, 1e-4, 1e-6])
def test_a_very_flat_arch_is_soft_but_stands(rise: float) -> None:
    state = state_under(arch(rise), {"C": (0.0, -1.0)})
    thrust = 1.7 * 2.3 / 4.0 / rise
    # the force follows from the joint's position, in which one unit in the last place is 1e-16/rise at worst
    assert_allclose(state.forces["A-C"], -thrust * math.hypot(1.7, rise) / 1.7, rtol=1e-12 + 4e-16 / rise)


@pytest.mark.parametrize("rise", [1e-10, 1e-13])
def test_an_arch_that_is_flat_but_for_round_off_is_a_mechanism(rise: float) -> None:
    with pytest.raises(UnstableError, match=r'joint "C" can move up and down \(y\) .* \(no other joint moves\)'):
        factored(arch(rise))


def test_a_bed_a_hair_from_a_mechanism_is_solved_or_refused() -> None:
    """Moments about the pin: R x 4 x cos(bed) = 2. Either the answer balances to a millionth or it is refused."""
    joints = {"A": (0.0, 0.0), "B": (4.0, 0.0), "C": (2.0, 1.0)}
    for off in np.geomspace(1e-9, 1e-2, 50):
        bearings = [Support("A"), Support("B", 90.0 - off)]
        truss = truss_of((joints, [("A", "B"), ("B", "C"), ("A", "C")]), bearings)
        try:
            state = state_under(truss, {"C": (0.0, -1.0)})
        except UnstableError:
            continue
        arm = 4.0 * math.cos(math.radians(90.0 - off))
        assert_allclose(state.reactions["B normal"] * arm, 2.0, rtol=1e-6, err_msg=f"{off} degrees off")


def lines_on(*supports: Support) -> InfluenceLines:
    """Return the lines of the six-panel truss on given bearings."""
    return influence_lines(truss_of(SIX, supports), bottom(6))


@pytest.mark.parametrize("stiffness", [1e12, 1e16, 1e20])
def test_stiff_springs_are_bearings(stiffness: float) -> None:
    rigid = lines_on(Support("L0"), Support("L6", 25.0), Support("L3", 0.0))
    sprung = lines_on(
        Support("L0", normal_stiffness=stiffness, slide_stiffness=stiffness),
        Support("L6", 25.0, normal_stiffness=stiffness),
        Support("L3", 0.0, normal_stiffness=stiffness),
    )
    # bars have 3e8 N/m, so a spring gives by 3e8/stiffness of what they do, some ten times that in a whole truss
    allowed = 1e10 / stiffness + 1e-12
    forces = [effect.kind != "down" for effect in rigid.effects]
    assert_allclose(sprung.ordinates[forces], rigid.ordinates[forces], rtol=0.0, atol=allowed)


@pytest.mark.parametrize("stiffness", [1e0, 1e1, 1e3])
def test_soft_springs_are_nothing(stiffness: float) -> None:
    free = lines_on(Support("L0"), Support("L6", 0.0))
    sprung = lines_on(
        Support("L0"), Support("L6", 0.0, slide_stiffness=stiffness), Support("L3", 0.0, normal_stiffness=stiffness)
    )
    for bar in truss_of(SIX, simple_span(6)).members:
        # the middle bearing takes stiffness x deflection (1e-8 m/N) of the load
        assert_allclose(sprung[bar.name].ordinates, free[bar.name].ordinates, rtol=0.0, atol=1e-7 * stiffness + 1e-12)


@pytest.mark.parametrize("panels", [60, 600])
def test_long_trusses_keep_their_digits(panels: int) -> None:
    """Level chords, unequal panels: chords M/h, diagonals the panel's shear, in closed form.

    1e-12 of the row's largest: the solve loses eight digits at 600 panels, refinement gives them back.
    """
    lengths, depth = 3.0 + np.sin(1.7 * np.arange(panels)), 6.3
    truss = truss_of(pratt(lengths.tolist(), [depth] * (panels - 1)), simple_span(panels))
    lines = influence_lines(truss, bottom(panels))
    load = lines.stations
    from_left = load / load[-1]
    assert_allclose(lines["L0 y"].ordinates, 1.0 - from_left, rtol=0.0, atol=1e-12)
    for k in (1, 2, panels // 4, panels // 2 - 1, panels // 2, panels - 2):
        x = load[k]
        moment = np.where(load < x, load * (1.0 - x / load[-1]), x * (1.0 - from_left))
        shear = np.where(load <= x, -from_left, 1.0 - from_left)
        slope = math.hypot(lengths[k], depth) / depth
        falling = k < (panels - 1) / 2  # the chord that a falling diagonal leaves to the post at k is the lower one
        chord, diagonal = (f"L{k}-L{k + 1}", f"U{k}-L{k + 1}") if falling else (f"U{k}-U{k + 1}", f"L{k}-U{k + 1}")
        sign = 1.0 if falling else -1.0
        for bar, expected in ((chord, sign * moment / depth), (diagonal, sign * slope * shear)):
            allowed = 1e-12 * np.abs(expected).max()
            assert_allclose(lines[bar].ordinates, expected, rtol=0.0, atol=allowed, err_msg=bar)
