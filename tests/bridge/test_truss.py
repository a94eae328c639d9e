"""Joints, members, supports, panel points and decks: names, looks-ups, pickling, and every input that is refused."""

from __future__ import annotations

import math
import pickle
import re
from typing import Any

import numpy as np
import pytest
from numpy.testing import assert_allclose
from oracles.trusses import bottom, pratt, simple_span, truss_of

from movload import Deck, Member, Support, Truss
from movload.bridge.deck import stations_of
from movload.errors import InputError, UnknownNameError

JOINTS = {"L0": (0.0, 0.0), "L1": (3.0, 0.0), "L2": (7.1, 0.0), "U1": (3.0, 2.4)}
BARS = [("L0", "L1"), ("L1", "L2"), ("L0", "U1"), ("U1", "L2"), ("U1", "L1")]


def bar(start: str, end: str, **words: Any) -> Member:
    """Return a member of invented steel."""
    return Member(start, end, 2e-3, 2e11, **words)


def truss(
    joints: dict[str, tuple[float, float]] | None = None,
    members: list[Member] | None = None,
    supports: list[Support] | None = None,
) -> Truss:
    """Return a truss of two panels with one part of it replaced."""
    return Truss(
        JOINTS if joints is None else joints,
        [bar(*ends) for ends in BARS] if members is None else members,
        simple_span(2) if supports is None else supports,
    )


def test_a_member_is_named_by_its_joints_and_found_from_either_end() -> None:
    named = [*(bar(*ends) for ends in BARS[:-1]), bar("U1", "L1", name="hanger", role="posts", density=7850.0)]
    made = truss(members=named)
    assert made.member("U1-L2") is made.member("L2-U1")
    assert made.member("U1-L2").name == "U1-L2"
    assert made.member("hanger") is made.member("U1-L1") is made.member("L1-U1")
    assert made.member("hanger").role == "posts"


def test_an_unknown_member_names_the_nearest() -> None:
    with pytest.raises(UnknownNameError, match=r'^member "U1-L3" is not in the truss \(nearest: "U1-L[12]"\)$'):
        truss().member("U1-L3")


def test_geometry_follows_from_joints() -> None:
    made = truss()
    assert_allclose(made.lengths, [3.0, 4.1, math.hypot(3.0, 2.4), math.hypot(4.1, 2.4), 2.4], rtol=1e-15)
    assert_allclose(made.axial_stiffness, 4e8 / made.lengths, rtol=1e-15)
    assert made.redundancy == 0
    assert truss(supports=[Support("L0"), Support("L2")]).redundancy == 1
    assert truss_of(pratt([3.0] * 4, [2.0] * 3, crossed=[1, 2]), simple_span(4)).redundancy == 2


def test_what_was_given_may_change_afterwards() -> None:
    joints, members, supports = dict(JOINTS), [bar(*ends) for ends in BARS], simple_span(2)
    made = Truss(joints, members, supports)
    joints.clear()
    members.clear()
    supports.clear()
    assert (len(made.joints), len(made.members), len(made.supports)) == (4, 5, 2)
    with pytest.raises(TypeError, match="does not support item assignment"):
        made.joints["L0"] = (1.0, 1.0)  # type: ignore[index]  # a mapping is not to be written: that is what is tested
    with pytest.raises(ValueError, match="read-only"):
        made.coordinates[0] = 1.0


def test_pickled_values_come_back_whole() -> None:
    made = truss(supports=[Support("L0", settlement=0.01), Support("L2", 30, slide_stiffness=1e6)])
    again = pickle.loads(pickle.dumps(made))  # noqa: S301 - our own bytes
    assert (dict(again.joints), again.members, again.supports) == (dict(made.joints), made.members, made.supports)
    deck = Deck(("L0", "L1", 8.2), truss_share=0.6)
    assert pickle.loads(pickle.dumps(deck)) == deck  # noqa: S301 - our own bytes


@pytest.mark.parametrize(
    ("support", "names"),
    [
        (Support("L0"), ("L0 x", "L0 y")),
        (Support("L0", 0), ("L0 normal",)),
        (Support("L0", 30), ("L0 normal",)),
        (Support("L0", 30, movement=0.0), ("L0 along", "L0 normal")),
        (Support("L0", 30, slide_stiffness=1e6), ("L0 along", "L0 normal")),
        (Support("L0", 30, normal_stiffness=1e6), ("L0 normal",)),
    ],
)
def test_a_bearing_names_its_reactions(support: Support, names: tuple[str, ...]) -> None:
    assert support.reaction_names == names
    assert support.bed_angle == pytest.approx(math.radians(support.slides or 0.0), rel=1e-15)


def test_an_error_keeps_its_parts_through_pickle() -> None:
    """Work is spread over processes: an error comes back with its place, its rule and the nearest name."""
    with pytest.raises(UnknownNameError, match="M2") as caught:
        truss(supports=[Support("L0"), Support("M2", 0)])
    again = pickle.loads(pickle.dumps(caught.value))  # noqa: S301 - our own bytes
    assert type(again) is UnknownNameError
    assert (again.place, again.rule, again.nearest) == ("support M2", 'joint "M2" is not defined', "L2")
    assert str(again.at("pony.toml")) == 'pony.toml: support M2: joint "M2" is not defined (nearest: "L2")'


NOT_ABOVE_ZERO = [0.0, -1.0, math.nan, math.inf]


@pytest.mark.parametrize("value", NOT_ABOVE_ZERO)
def test_a_member_needs_area_and_modulus(value: float) -> None:
    with pytest.raises(InputError, match=rf"^member L0-L1: area must be above 0, got {value} m2$"):
        Member("L0", "L1", value, 2e11)
    with pytest.raises(InputError, match=rf"^member L0-L1: modulus must be above 0, got {value} Pa$"):
        Member("L0", "L1", 2e-3, value)


@pytest.mark.parametrize("value", [-1.0, math.nan, math.inf])
def test_a_density_is_zero_or_more(value: float) -> None:
    with pytest.raises(InputError, match=rf"^member tie: density must be 0 or more, got {value} kg/m3$"):
        bar("L0", "L1", name="tie", density=value)


def test_a_member_joins_two_joints() -> None:
    with pytest.raises(InputError, match=r'^member L1-L1: joins joint "L1" to itself$'):
        bar("L1", "L1")


@pytest.mark.parametrize("word", ["slides", "settlement", "movement"])
@pytest.mark.parametrize("value", [math.nan, -math.inf])
def test_a_bearing_moves_by_numbers(word: str, value: float) -> None:
    with pytest.raises(InputError, match=rf"^support L0: {word} must be a finite number, got {value}$"):
        Support("L0", **{word: value})


@pytest.mark.parametrize("word", ["normal_stiffness", "slide_stiffness"])
@pytest.mark.parametrize("value", NOT_ABOVE_ZERO)
def test_a_spring_pushes_back(word: str, value: float) -> None:
    with pytest.raises(InputError, match=rf"^support L0: {word} must be above 0, got {value} N/m$"):
        Support("L0", **{word: value})


REFUSED: list[tuple[dict[str, Any], str]] = [
    ({"joints": {}}, "joints: a truss needs joints, none given"),
    ({"members": []}, "members: a truss needs members, none given"),
    ({"joints": JOINTS | {"L2": (math.nan, 0.0)}}, "joint L2: coordinates must be finite, got (nan, 0.0) m"),
    ({"joints": JOINTS | {"L2": (7.1, math.inf)}}, "joint L2: coordinates must be finite, got (7.1, inf) m"),
    ({"joints": JOINTS | {"U-2": (9.0, 0.0)}}, 'may not be empty or hold a space or "-", got "U-2"'),
    ({"joints": JOINTS | {"U 2": (9.0, 0.0)}}, 'may not be empty or hold a space or "-", got "U 2"'),
    ({"joints": JOINTS | {"": (9.0, 0.0)}}, 'may not be empty or hold a space or "-", got ""'),
    ({"joints": JOINTS | {"L9": (9.0, 0.0)}}, "joint L9: no member reaches it"),
    ({"joints": JOINTS | {"L1": (0.0, 0.0)}}, 'L0-L1: has no length: joints "L0" and "L1" both stand at (0, 0) m'),
    ({"joints": JOINTS | {"L1": (1e-10, 0.0)}}, "member L0-L1: has no length"),
    ({"members": [*(bar(*ends) for ends in BARS[:4]), Member("U1", "L1", 2e-3, 2e-6)]}, "E A / length is 1.67e-09"),
    ({"supports": [*simple_span(2)[:1], Support("L2", 0, normal_stiffness=1e-9)]}, "stiffness is 1e-09 N/m"),
    ({"members": [bar(*ends) for ends in [*BARS, BARS[0]]]}, "member L0-L1: is given twice"),
    ({"members": [bar(*ends) for ends in [*BARS, BARS[0][::-1]]]}, 'L1-L0: is given twice (the other is "L0-L1")'),
    ({"members": [bar(*ends, name=f"{ends[0]}") for ends in BARS]}, 'member L0: is given twice (the other is "L0")'),
    ({"members": [bar(*ends) for ends in [*BARS, ("U1", "L11")]]}, 'joint "L11" is not defined (nearest: "L1")'),
    ({"supports": [Support("L0"), Support("M2", 0)]}, 'support M2: joint "M2" is not defined (nearest: "L2")'),
    ({"supports": [Support("L0"), Support("L0", 0)]}, "support L0: is given twice"),
    ({"supports": []}, "supports: 0 direction(s) held; a truss needs at least 3"),
    ({"supports": [Support("L0")]}, "supports: 2 direction(s) held; a truss needs at least 3"),
    ({"supports": [Support("L0", 0), Support("L2", 0)]}, "supports: 2 direction(s) held"),
]  # fmt: skip


@pytest.mark.parametrize(("changed", "message"), REFUSED, ids=[message for _, message in REFUSED])
def test_a_truss_refuses(changed: dict[str, Any], message: str) -> None:
    with pytest.raises(InputError, match=re.escape(message)) as caught:
        truss(**changed)
    assert isinstance(caught.value, UnknownNameError) == ("is not defined" in message)


def test_stations_are_the_panel_points_own_x() -> None:
    assert stations_of(truss(), ["L0", "L1", "L2"]).tolist() == [0.0, 3.0, 7.1]
    assert stations_of(truss(), [-1.5, "L1", 9]).tolist() == [-1.5, 3.0, 9.0]
    assert stations_of(truss(), ("L0", "U1", np.float64(8.0))).tolist() == [0.0, 3.0, 8.0]


@pytest.mark.parametrize(
    ("panel_points", "message"),
    [
        ([], "deck.panel_points: a deck needs at least 2 panel points, got 0"),
        (["L0"], "deck.panel_points: a deck needs at least 2 panel points, got 1"),
        ("L0", "deck.panel_points: a deck needs at least 2 panel points"),
        (["L0", "L7"], 'deck.panel_points[1]: joint "L7" is not defined (nearest: "L'),
        (["L0", "L2", "L1"], '[2]: panel points must follow each other along +x, got "L1" at x = 3 m after "L2" at'),
        (["L0", "L0"], 'got "L0" at x = 0 m after "L0" at x = 0 m'),
        (["L1", "U1"], 'got "U1" at x = 3 m after "L1" at x = 3 m'),
        (["L0", 3.5, "L2"], "deck.panel_points[1]: an abutment may only stand first or last, got x = 3.5 m"),
        ([0.0, "L0", "L2"], 'got "L0" at x = 0 m after the abutment at x = 0 m'),
        (["L0", "L2", 6.0], 'got the abutment at x = 6 m after "L2" at x = 7.1 m'),
        (["L0", "L2", math.nan], "deck.panel_points[2]: an abutment's x must be finite, got nan m"),
        ([-math.inf, "L0", "L2"], "deck.panel_points[0]: an abutment's x must be finite, got -inf m"),
    ],
)  # fmt: skip
def test_panel_points_refused(panel_points: list[str | float], message: str) -> None:
    with pytest.raises(InputError, match=re.escape(message)):
        stations_of(truss(), panel_points)


@pytest.mark.parametrize("share", NOT_ABOVE_ZERO)
def test_a_deck_share_is_above_zero(share: float) -> None:
    with pytest.raises(InputError, match=rf"^deck.truss_share: must be above 0 .*, got {share}$"):
        Deck(tuple(bottom(2)), truss_share=share)
