"""A bridge file becomes a bridge: units, groups, layouts with overrides, bearings, and where an error says it is."""

from __future__ import annotations

import math
import pickle
import re
from typing import TYPE_CHECKING

import numpy as np
import pytest
from cli_run import BY_JOINTS, BY_LAYOUT, CART, EXAMPLES, changed, without, written
from numpy.testing import assert_allclose

import movload
from movload.errors import InputError, MissingDataError, UnknownNameError, UnstableError
from movload.files.read import bridge_from, read_bridge, vehicle_from

if TYPE_CHECKING:
    from pathlib import Path

FOOT, INCH, POUND = 0.3048, 0.0254, 4.4482216152605  # m, m, N (NIST SP 811, B.8, from memory)


def test_a_bridge_joint_by_joint() -> None:
    bridge = bridge_from(BY_JOINTS, "bridge.toml")
    assert bridge.title == "Alder footpath"
    assert bridge.truss.joints["U2"] == (6.4, 2.3)
    chord = bridge.truss.member("U2-U1")
    assert (chord.name, chord.role, chord.density) == ("U1-U2", "top chord", 7850)
    assert_allclose([chord.area, chord.modulus], [2e-3, 2e11], rtol=1e-15)
    assert bridge.truss.supports[0].slides is None
    assert bridge.truss.supports[1].slides == 0.0
    assert bridge.deck.panel_points == ("L0", "L1", "L2", "L3")
    assert bridge.permanent is not None
    assert (bridge.deck.truss_share, bridge.permanent.items[0].share, bridge.impact) == (0.6, 0.5, 0.3)
    assert_allclose(bridge.permanent.items[0].line, 4e3, rtol=1e-15)
    permitted = bridge.strengths["U1-U2"].permits
    assert_allclose([permitted["tension"], permitted["compression"]], [200e3, 150e3], rtol=1e-15)
    assert bridge.missing == ()
    assert bridge.sources == ("bridge.toml",)


def test_joints_and_layout_give_the_same_truss() -> None:
    """The layout's joints and bars, typed one by one in the layout's order."""
    laid = bridge_from(BY_LAYOUT, "a")
    joints = "\n".join(f"{name} = [{x!r}, {y!r}]" for name, (x, y) in laid.truss.joints.items())
    text = changed(without(BY_LAYOUT, "layout"), ("[supports]", f"[joints]\n{joints}\n\n[supports]"))
    for role in dict.fromkeys(member.role for member in laid.truss.members):
        bars = [member.name for member in laid.truss.members if member.role == role]
        head = f'[members."{role}"]' if " " in role else f"[members.{role}]"
        text = changed(text, (head, f"{head}\nbars = {bars}"))
    text = changed(
        text,
        (
            "truss_share = 0.6",
            f'truss_share = 0.6\nkind = "{laid.deck.kind}"\npanel_points = {list(laid.deck.panel_points)}',
        ),
    )
    typed = bridge_from(text, "b")
    assert typed.truss.joints == laid.truss.joints
    assert typed.truss.members == laid.truss.members
    assert typed.truss.supports == laid.truss.supports
    assert typed.deck == laid.deck
    assert typed.strengths == laid.strengths
    lines = [movload.influence_lines(one.truss, one.deck.panel_points) for one in (laid, typed)]
    assert np.array_equal(lines[0].ordinates, lines[1].ordinates)


def test_every_quantity_in_its_own_units_is_the_same_bridge() -> None:
    """The same bridge, each value a string with a unit of another system."""
    text = changed(
        BY_JOINTS,
        ("U1 = [3.1, 2.2]", f'U1 = ["{3.1 / FOOT!r} ft", "{2.2 / INCH!r} in"]'),
        ("area = 2000", f'area = "{2000e-6 / INCH**2!r} in2"'),
        ("modulus = 200", f'modulus = "{200e9 * INCH**2 / (1e3 * POUND)!r} ksi"'),
        ("density = 7850", f'density = "{7850 / 0.45359237 * FOOT**3!r} pcf"'),
        ("tension = 200", f'tension = "{200 / POUND!r} kip"'),
        ("deck = 4.0", f'deck = "{4.0 / POUND * FOOT!r} klf"'),
        ("truss_share = 0.6", 'truss_share = "60 %"'),
        ("impact = 0.3", 'impact = "30 %"'),
    )
    same, plain = bridge_from(text, "a"), bridge_from(BY_JOINTS, "b")
    # rtol: each value passes one multiplication and one division by its unit
    assert_allclose(same.truss.coordinates, plain.truss.coordinates, rtol=1e-15)
    a, b = same.truss.members[0], plain.truss.members[0]
    assert_allclose([a.area, a.modulus, a.density or 0], [b.area, b.modulus, b.density or 0], rtol=1e-15)
    assert same.permanent is not None
    assert_allclose([same.permanent.items[0].line, same.impact or 0], [4e3, 0.3], rtol=1e-15)
    assert_allclose(same.strengths["U1-U2"].permits["tension"], 200e3, rtol=1e-15)


def test_bare_numbers_are_in_the_files_units() -> None:
    text = changed(BY_JOINTS, ('"m"', '"ft"'), ('"kN"', '"kip"'), ('section = "mm"\n', ""))
    bridge = bridge_from(text, "bridge.toml")
    chord = bridge.truss.members[0]
    assert bridge.units.section == "in"
    assert_allclose(bridge.truss.joints["U1"], (3.1 * FOOT, 2.2 * FOOT), rtol=1e-15)
    assert_allclose(chord.area, 2000 * INCH**2, rtol=1e-15)
    assert_allclose(chord.modulus, 200 * 1e3 * POUND / INCH**2, rtol=1e-15)
    assert_allclose(chord.density or 0, 7850 * 0.45359237 / FOOT**3, rtol=1e-15)
    assert bridge.permanent is not None
    assert_allclose(bridge.permanent.items[0].line, 4e3 * POUND / FOOT, rtol=1e-15)


def test_a_layout_with_overrides_omissions_and_extra_bars() -> None:
    text = changed(
        BY_LAYOUT,
        ('deck = "pony"', 'deck = "pony"\nomit = ["L2-U1"]'),
        ("[supports]", '[joints]\nL2 = [6.41, -0.03]\nU9 = ["7 m", 3]\n\n[supports]'),
        (
            "[deck]",
            '[members."by name"]\nbars = [" L1 - U2", "L4-L3", "U2-U9", "U9-U3"]\narea = 900\nmodulus = 200\n[deck]',
        ),
    )
    bridge = bridge_from(text, "bridge.toml")
    names = [member.name for member in bridge.truss.members]
    assert bridge.truss.joints["L2"] == (6.41, -0.03)
    assert "U1-L2" not in names
    assert names[-3:] == ["L1-U2", "U2-U9", "U9-U3"]
    assert bridge.truss.member("L3-L4").area == bridge.truss.member("L1-U2").area
    assert bridge.truss.member("L3-L4").role == "bottom chord"
    assert "L3-L4" not in bridge.strengths
    assert bridge.strengths["L2-L3"].permits["tension"] == 260e3


def test_bearings_of_every_kind() -> None:
    text = changed(
        BY_JOINTS,
        ('L0 = "pinned"', "L0 = { pinned = true, settlement = 4, slide_stiffness = 5 }"),
        ("{ slides = 0 }", '{ slides = -30, settlement = "12 mm", movement = 0.003, normal_stiffness = "50 kN/mm" }'),
    )
    pinned, sliding = bridge_from(text, "bridge.toml").truss.supports
    assert (pinned.slides, pinned.settlement, pinned.slide_stiffness) == (None, 4.0, 5e6)
    assert (sliding.slides, sliding.settlement, sliding.movement, sliding.normal_stiffness) == (-30, 0.012, 0.003, 5e7)


def test_abutments_stand_first_and_last() -> None:
    text = changed(BY_JOINTS, ("truss_share = 0.6", 'left_abutment = "-40 cm"\nright_abutment = 10'))
    assert bridge_from(text, "bridge.toml").deck.panel_points == (-0.4, "L0", "L1", "L2", "L3", 10.0)


@pytest.mark.parametrize("path", sorted(EXAMPLES.glob("*.toml")), ids=lambda path: path.stem)
def test_every_example_survives_pickling(path: Path) -> None:
    bridge = pickle.loads(pickle.dumps(read_bridge(path)))  # noqa: S301  # its own bytes
    assert bridge.truss.joints == read_bridge(str(path)).truss.joints
    assert bridge.sources == (str(path),)


ERRORS = {
    UnknownNameError: ('"U1-U2"]', '"U1-U9"]', r'^b\.toml: members\."top chord"\.bars\[0\]: joint "U9" is not defined'),
    MissingDataError: (
        "impact = 0.3",
        "",
        r"^Alder footpath: a rating needs data that is not there yet: rating\.impact",
    ),
    UnstableError: (', "U1-L2"]', "]", r"^truss: is a mechanism: joint "),
    InputError: ("area = 2000", "area = -1", r'^b\.toml: members\."top chord"\.bars\[0\]: member U1-U2: area must be'),
}


@pytest.mark.parametrize("kind", ERRORS)
def test_an_error_is_of_its_kind_and_keeps_its_parts(kind: type[InputError]) -> None:
    old, new, message = ERRORS[kind]
    with pytest.raises(kind, match=message) as caught:
        movload.solve(bridge_from(changed(BY_JOINTS, (old, new)), "b.toml"))
    assert isinstance(caught.value, ValueError)
    assert type(caught.value) is kind
    again = pickle.loads(pickle.dumps(caught.value))  # noqa: S301  # its own bytes
    assert str(again) == str(caught.value)


def test_a_vehicle() -> None:
    cart = vehicle_from(CART, "cart.toml")
    (case,) = cart.cases
    assert case.moving is not None
    assert (cart.title, cart.kind, cart.source) == ("Alder hay cart", "farm", "invented")
    assert_allclose(case.moving.loads, [20e3, 45e3, 30e3], rtol=1e-15)
    assert case.moving.spacings == (2.7, 4.1)
    assert case.moving.gauges == (1.8, 1.9, 1.9)
    assert case.moving.headings == (1, -1)


def test_a_vehicle_with_a_range_and_one_heading() -> None:
    text = changed(CART, ("after = 4.1", 'after = ["4 m", 5]'), ("kind =", 'headings = ["-x"]\nkind ='))
    (case,) = vehicle_from(text, "cart.toml").cases
    assert case.moving is not None
    assert case.moving.spacings == (2.7, (4.0, 5.0))
    assert case.moving.headings == (-1,)


@pytest.mark.parametrize("share", [0.0, -0.1, 2.1, math.nan, math.inf])
def test_shares_and_allowances_out_of_bounds(share: float, tmp_path: Path) -> None:
    for old, place in (("truss_share = 0.6", "deck.truss_share"), ("impact = 0.3", "rating.impact")):
        if share == 0 and place == "rating.impact":
            continue
        path = written(tmp_path, changed(BY_JOINTS, (old, f"{old.split()[0]} = {share}")))
        with pytest.raises(InputError, match=re.escape(f"{path}: {place}: ")):
            read_bridge(path)
