"""What parts of a bridge file are made of: lengths, losses bar by bar and truss by truss, one Made for all alike."""

from __future__ import annotations

import math
import pickle

import pytest
from cli.across import ACROSS
from cli_run import BY_JOINTS, BY_LAYOUT, changed
from files.made import MADE
from numpy.testing import assert_allclose

from movload.bridge.loss import Loss
from movload.bridge.made import Bent, Held, Joined, Made, Sideways
from movload.files.read import bridge_from
from movload.units import GRAVITY

LOSS = '{ where = "middle", fraction = 0.2, truss = "left", bar = "L2-L1" }'
ROUND_OFF = 1e-14  # relative: a number times a unit


def test_a_member_takes_area_modulus_and_density() -> None:
    bridge = bridge_from(MADE, "b")
    for name, (left, _) in bridge.made.items():
        member = bridge.truss.member(name)
        assert member.area == left.section.section.properties.area
        assert (member.modulus, member.density) == (left.material.modulus, left.material.density)
    rod, angles = bridge.truss.member("L0-L1"), bridge.truss.member("U1-L1")
    assert_allclose([rod.area, angles.area], [math.pi * 0.016**2, 2 * (60 + 44) * 6e-6], rtol=1e-13)  # sums of parts


def test_old_keys_work_as_before() -> None:
    old = bridge_from(ACROSS, "b")
    assert old.made == {}
    assert [part.made for part in (old.floor.stringers, old.floor.floorbeams, old.floor.planks) if part] == [None] * 3
    some = changed(BY_JOINTS, ("[supports]", '[sections.rod]\nshape = "round bar"\ndiameter = 40\n[supports]'),
                   ("area = 900\nmodulus = 200\ndensity = 7850", 'section = "rod"\nmaterial = "iron"'),
                   ("[supports]", '[materials.iron]\nkind = "wrought iron"\nbuilt = 1890\n[supports]'))  # fmt: skip
    bridge = bridge_from(some, "b")
    assert set(bridge.made) == {"U1-L1", "U2-L2", "U1-L2"}
    assert bridge.strengths["U1-L1"].permits["tension"] == 90e3
    assert bridge.truss.member("U1-U2").area == bridge_from(BY_JOINTS, "b").truss.member("U1-U2").area


def test_a_member_with_all_that_may_be_said() -> None:
    left, right = bridge_from(MADE, "b").made["U1-U2"]
    assert left is right
    assert left.place == 'members."top chord"'
    assert left.held is not None
    assert_allclose(left.held.unbraced_x, math.hypot(3.3, 0.1), rtol=1e-9)  # a nanometre counts as round-off
    assert left.held == Held(unbraced_x=left.held.unbraced_x, unbraced_y=4.2, k_x=1.0, k_y=0.9)
    joined = left.joined
    assert joined is not None
    assert joined == Joined(axis="y", spacing=0.3, apart=0.22, lacing_area=joined.lacing_area, planes=2)
    assert_allclose(joined.lacing_area, 4e-4, rtol=ROUND_OFF)
    assert left.bent == (
        Bent(axis="x", moment=12e3, eccentricity=0.02, bow=0.01),
        Bent(axis="y", bow=0.005, evenness=0.85),
    )
    assert left.curves == ("c", "c")
    assert left.section.losses == (
        Loss("start end", piece="left channel", part="web", amount=0.003, inside_connection=True),
        Loss("all along", part="flange", fraction=0.1),
    )
    assert (left.sideways, left.durations, left.treated) == (None, (), None)


def test_twist_and_stitches() -> None:
    made = bridge_from(MADE, "b").made
    post, web = made["L0-U1"][0], made["U1-L1"][0]
    assert post.held is not None
    assert (post.held.unbraced_z, post.held.k_z) == (2.0, 1.0)
    assert_allclose([post.held.unbraced_x, post.held.unbraced_y], math.hypot(3.1, 2.2), rtol=1e-9)  # as above
    assert web.joined == Joined(axis="y", spacing=0.5, apart=0.03, radius=0.011)
    assert made["L0-L1"][0].held is None


def test_a_loss_on_one_bar_of_one_truss() -> None:
    made = bridge_from(MADE, "b").made
    left, right = made["L1-L2"]
    assert left is not right
    assert left.section.losses == (Loss("middle", fraction=0.2),)
    assert right.section.losses == ()
    assert all(one is right for name in ("L0-L1", "L2-L3") for one in made[name])
    assert left.section.gross.area < right.section.gross.area == left.section.gross.as_new


@pytest.mark.parametrize(
    ("loss", "has"),
    [
        ("{ fraction = 0.2 }", {"L0-L1 left", "L0-L1 right", "L1-L2 left", "L1-L2 right", "L2-L3 left", "L2-L3 right"}),
        ('{ fraction = 0.2, truss = "right" }', {"L0-L1 right", "L1-L2 right", "L2-L3 right"}),
        ('{ fraction = 0.2, bar = "L3-L2" }', {"L2-L3 left", "L2-L3 right"}),
        ('{ fraction = 0.2, bar = " L2 - L3 ", truss = "left" }', {"L2-L3 left"}),
    ],
)
def test_where_a_loss_is(loss: str, has: set[str]) -> None:
    made = bridge_from(changed(MADE, (LOSS, loss)), "b").made
    both = {f"{name} {truss}": one for name in ("L0-L1", "L1-L2", "L2-L3")
            for truss, one in zip(("left", "right"), made[name], strict=True)}  # fmt: skip
    assert {name for name, one in both.items() if one.section.losses} == has
    assert len({id(one) for one in both.values()}) == (1 if len(has) == 6 else 2)


def test_the_start_end_is_at_the_bars_first_joint_in_the_trusss_own_naming() -> None:
    text = changed(MADE, (LOSS, '{ where = "start end", fraction = 0.2, bar = "L2-L1" }'))
    assert bridge_from(text, "b").made["L1-L2"][0].section.gross.place == "start end"


def test_bars_alike_share_one_made_and_bars_of_other_lengths_do_not() -> None:
    made = bridge_from(MADE, "b").made
    assert len({id(one) for name in ("U1-L1", "U2-L2", "U1-L2") for one in made[name]}) == 1  # typed lengths
    assert made["L0-U1"][0] is not made["U2-L3"][0]  # joint to joint, of two lengths
    typed = changed(
        MADE, ('unbraced_x = "joint to joint"\nunbraced_y = "joint to joint"', "unbraced_x = 3\nunbraced_y = 3")
    )
    alike = bridge_from(typed, "b").made
    assert alike["L0-U1"][0] is alike["U2-L3"][0]


def test_roles_of_a_layout_take_sections_too() -> None:
    tables = '[sections.tie]\nshape = "flat"\nwidth = 90\nthickness = 10\n[materials.m]\nkind = "steel"\nbuilt = 1920\n'
    old = "[members.diagonals]\narea = 900\nmodulus = 200\ndensity = 7850\n"
    how = 'unbraced_x = "joint to joint"\nunbraced_y = 9\nk_x = 1\nk_y = 1\n'
    text = changed(BY_LAYOUT, (old, f'[members.diagonals]\nsection = "tie"\nmaterial = "m"\n{how}'),
                   ("[supports]", f"{tables}[supports]"))  # fmt: skip
    bridge = bridge_from(text, "b")
    assert set(bridge.made) == {member.name for member in bridge.truss.members if member.role == "diagonals"}
    for name, (left, _) in bridge.made.items():
        start, end = (bridge.truss.joints[joint] for joint in name.split("-"))
        assert left.held is not None
        assert_allclose(left.held.unbraced_x, math.dist(start, end), rtol=1e-9)  # a nanometre counts as round-off


def test_the_floor() -> None:
    floor = bridge_from(MADE, "b").floor
    assert floor.stringers is not None
    assert floor.floorbeams is not None
    assert floor.planks is not None
    joist, beam, plank = (part.made for part in (floor.stringers, floor.floorbeams, floor.planks))
    assert isinstance(joist, Made)
    assert isinstance(beam, Made)
    assert isinstance(plank, Made)
    assert joist.sideways == Sideways(unbraced=1.2, c_b=1.0, stiffeners=1.2, lever=0.12)
    assert (joist.curves, joist.held, joist.place) == (("b", "b"), None, "floor.stringers")
    assert joist.section.losses == (Loss("all along", part="web", amount=0.001),)
    assert beam.sideways == plank.sideways == Sideways(unbraced=None)
    assert beam.section.losses == ()
    assert (plank.durations, plank.treated, plank.place) == (("two months",), False, "floor.planks")
    area = 2 * 110 * 11 + 8 * (240 - 2 * 11)
    assert_allclose(floor.stringers.weight, area * 1e-6 * 7850 * GRAVITY, rtol=1e-13)  # as new; a sum of three parts
    assert floor.floorbeams.weight == 900.0  # as typed
    assert floor.stringers.strength.permits["moment"] == 60e3


def test_timber_is_timber_by_its_material() -> None:
    bridge = bridge_from(MADE, "b")
    assert bridge.floor.planks is not None
    assert bridge.floor.stringers is not None
    assert bridge.floor.planks.strength.timber
    assert not bridge.floor.stringers.strength.timber
    text = changed(MADE, ('section = "angles"\nmaterial = "iron"', 'section = "angles"\nmaterial = "oak"'))
    strengths = bridge_from(text, "b").strengths
    assert strengths["U1-L1"].timber
    assert not strengths["U1-U2"].timber


def test_it_survives_pickling_with_what_is_shared() -> None:
    bridge = bridge_from(MADE, "b")
    again = pickle.loads(pickle.dumps(bridge))  # noqa: S301  # its own bytes
    assert again.made == bridge.made
    assert again.made["U1-L1"][0] is again.made["U2-L2"][1]
    assert again.floor.stringers == bridge.floor.stringers
