"""Laws that need no second method: reciprocity, mirrors, units, and lines that do not know settlements."""

from __future__ import annotations

from random import Random  # noqa: TC003 - hypothesis reads the annotation when the test runs

import numpy as np
from hypothesis import given
from hypothesis import strategies as st
from numpy.testing import assert_allclose
from oracles.stepping import scales, sizes
from oracles.trusses import mirrored, scaled
from strategies import Laid, laid, vehicles

from movload import Member, Support, Truss, Vehicle, influence_lines, state_under, sweep

ROUND_OFF = 1e-11  # of the row's largest: two solves of differently rounded numbers, 1e-14 to 1e-13 each


@given(laid(plain_deck=True))
def test_maxwell_a_deflects_under_b_as_b_under_a(bridge: Laid) -> None:
    lines = influence_lines(bridge.truss, bridge.panel_points)
    down = lines.ordinates[[effect.kind == "down" for effect in lines.effects]]
    assert_allclose(down, down.T, rtol=0.0, atol=ROUND_OFF * float(np.abs(down).max()))


@given(laid(), st.data())
def test_betti_any_two_load_directions_trade_places(bridge: Laid, data: st.DataObject) -> None:
    names = st.sampled_from(list(bridge.truss.joints))
    here, there = data.draw(names), data.draw(names)
    first, second = data.draw(st.tuples(*2 * [st.floats(-1.0, 1.0)])), data.draw(st.tuples(*2 * [st.floats(-1.0, 1.0)]))
    under_first = state_under(bridge.truss, {here: first}).displacements
    under_second = state_under(bridge.truss, {there: second}).displacements
    size = max(np.abs([*under_first.values()]).max(), np.abs([*under_second.values()]).max())
    assert_allclose(
        np.dot(second, under_first[there]), np.dot(first, under_second[here]), rtol=0.0, atol=ROUND_OFF * size
    )


def turned_sign(name: str) -> float:
    """Return -1 for a reaction along x or along a bed, which points the other way in a mirror."""
    return -1.0 if name.endswith((" x", " along")) else 1.0


def mirrored_deck(bridge: Laid) -> tuple[str | float, ...]:
    """Return the panel points from the other side."""
    return tuple(point if isinstance(point, str) else -point for point in reversed(bridge.panel_points))


@given(laid())
def test_mirrored_trusses_have_mirrored_lines(bridge: Laid) -> None:
    lines = influence_lines(bridge.truss, bridge.panel_points)
    other = influence_lines(mirrored(bridge.truss), mirrored_deck(bridge))
    assert_allclose(other.stations, -lines.stations[::-1], rtol=0.0, atol=0.0)
    for effect, row, size in zip(lines.effects, lines.ordinates, sizes(lines), strict=True):
        expected = turned_sign(effect.name) * row[::-1]
        assert_allclose(other[effect.name].ordinates, expected, rtol=0.0, atol=ROUND_OFF * size)


@given(laid(), vehicles())
def test_a_vehicle_going_back_over_the_mirrored_bridge_finds_the_same_peaks(bridge: Laid, vehicle: Vehicle) -> None:
    back = Vehicle("back", vehicle.loads, vehicle.spacings, headings=tuple(-heading for heading in vehicle.headings))
    lines = influence_lines(bridge.truss, bridge.panel_points)
    there = sweep(lines, vehicle)
    here = sweep(influence_lines(mirrored(bridge.truss), mirrored_deck(bridge)), back)
    size = float(scales(lines, [vehicle]).max())
    for effect in there.effects:
        high, low = there[effect.name].highest.value, there[effect.name].lowest.value
        if turned_sign(effect.name) < 0:
            high, low = -low, -high
        assert_allclose(here[effect.name].highest.value, high, rtol=0.0, atol=ROUND_OFF * size, err_msg=effect.name)
        assert_allclose(here[effect.name].lowest.value, low, rtol=0.0, atol=ROUND_OFF * size, err_msg=effect.name)


@given(
    laid(kinds=("pin and bed", "three beds", "third bearing")), vehicles(), st.floats(0.05, 40.0), st.floats(1e-3, 1e3)
)
def test_lengths_and_loads_scale(bridge: Laid, vehicle: Vehicle, length: float, load: float) -> None:
    deck = [point if isinstance(point, str) else length * point for point in bridge.panel_points]
    gaps = length * np.array(vehicle.spacings)
    larger = Vehicle("larger", load * vehicle.loads, gaps, headings=vehicle.headings)
    lines = influence_lines(bridge.truss, bridge.panel_points)
    before = sweep(lines, vehicle)
    after = sweep(influence_lines(scaled(bridge.truss, length), deck), larger)
    # forces grow with the loads; a deflection of rigidly borne bars also with the lengths (F l / E A)
    grown = np.array([load * (length if effect.kind == "down" else 1.0) for effect in before.effects])
    allowed = ROUND_OFF * sizes(lines) * vehicle.gross * grown
    assert (np.abs(after.highest - grown * before.highest) <= allowed).all()
    assert (np.abs(after.lowest - grown * before.lowest) <= allowed).all()


@given(laid(plain_deck=True), st.floats(-0.1, 0.1))
def test_lines_do_not_know_settlements(bridge: Laid, sink: float) -> None:
    supports = [
        Support(
            s.joint, s.slides, settlement=sink, normal_stiffness=s.normal_stiffness, slide_stiffness=s.slide_stiffness
        )
        for s in bridge.truss.supports
    ]
    settled = Truss(bridge.truss.joints, bridge.truss.members, supports)
    before = influence_lines(bridge.truss, bridge.panel_points)
    after = influence_lines(settled, bridge.panel_points)
    assert (after.ordinates == before.ordinates).all()


@given(laid(), st.randoms(use_true_random=False))
def test_the_order_of_members_and_joints_changes_nothing(bridge: Laid, random: Random) -> None:
    members = [
        Member(*ends, m.area, m.modulus)
        for m in bridge.truss.members
        for ends in [random.choice([(m.start, m.end), (m.end, m.start)])]
    ]
    joints = list(bridge.truss.joints.items())
    random.shuffle(members)
    random.shuffle(joints)
    before = influence_lines(bridge.truss, bridge.panel_points)
    after = influence_lines(Truss(dict(joints), members, bridge.truss.supports), bridge.panel_points)
    for effect, row, size in zip(before.effects, before.ordinates, sizes(before), strict=True):
        assert_allclose(after[effect.name].ordinates, row, rtol=0.0, atol=ROUND_OFF * size, err_msg=effect.name)
