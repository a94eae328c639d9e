"""What parts are made of and how they are held, spoiled one by one: each is refused at its place, in one line."""

from __future__ import annotations

import re

import pytest
from cli_run import changed
from files.made import MADE

from movload.errors import InputError, MissingDataError, UnknownNameError
from movload.files.read import bridge_from

LOSS = '{ where = "middle", fraction = 0.2, truss = "left", bar = "L2-L1" }'
FREE = 'unbraced_x = "joint to joint"\nunbraced_y = "4.2 m"'
LACED = "spacing = 300, apart = 220, lacing_area = 400, planes = 2"

PARTS = {
    "no section": (
        'section = "rod"', 'section = "rood"',
        '"bottom chord".section: "rood" is not in [sections] (nearest',
    ),
    "no material": ('material = "oak"', 'material = "oack"', '"oack" is not in [materials] (nearest: "oak")'),
    "section alone": (
        'section = "rod"\nmaterial = "iron"', 'section = "rod"',
        '"bottom chord".material: is needed besid',
    ),
    "material alone": (
        'section = "rod"\nmaterial = "iron"', 'material = "iron"',
        '"bottom chord".section: is needed b',
    ),
    "area twice": (
        'section = "rod"', 'section = "rod"\narea = 800',
        '"bottom chord".area: is given twice: typed, and by',
    ),
    "density twice": ('section = "rod"', 'section = "rod"\ndensity = 7850', '"bottom chord".density: is given twice'),
    "neither": (
        'section = "rod"\nmaterial = "iron"\nlosses', "losses",
        'bottom chord".area: is missing: type area and',
    ),
    "held, no section": (
        'section = "rod"\nmaterial = "iron"\nlosses', "area = 800\nmodulus = 200\nlosses",
        'members."bottom chord".section: is needed beside losses',
    ),
    "beam, no section": (
        'section = "plank"\nmaterial = "oak"\n', "",
        "floor.planks.section: is needed beside unbraced",
    ),
    "no K": ("k_x = 1.0\n", "", 'members."top chord".k_x: is needed beside unbraced_x'),
    "only K of twist": (f'{FREE}\nk_x = 1.0\nk_y = "90 %"', "k_z = 1", '"top chord".unbraced_x: is needed beside k_z'),
    "K": ("k_x = 1.0", "k_x = 0", 'members."top chord".k_x: must be above 0 and at most 10, got 0'),
    "negative K": ("k_x = 1.0", "k_x = -1", 'members."top chord".k_x: must be above 0 and at most 10, got -1'),
    "length": ('"4.2 m"', "0", 'members."top chord".unbraced_y: must be above 0 and at most 200 m, got 0 m'),
    "long": ('"4.2 m"', "4200", 'members."top chord".unbraced_y: must be above 0 and at most 200 m, got 4200 m'),
    "joint to joint": (FREE, FREE.replace("to joint", "to jiont"), '; or "joint to joint" (nearest: "joint to joint")'),
    "curve": ('curves = ["c", "c"]', 'curves = ["c", "e"]', '"top chord".curves[1]: "e" is not one of a0, a, b, c, d'),
    "one curve": ('curves = ["c", "c"]', 'curves = ["c"]', '"top chord".curves: one buckling curve about x and one ab'),
    "joined about z": ('axis = "y", spacing = 300', 'axis = "z", spacing = 300', 'joined.axis: "z" is neither x nor y'),
    "half laced": (LACED, LACED.replace(", planes = 2", ""), '"top chord".joined: lacing says lacing_area and planes'),
    "laced and stitched": (
        LACED, f"{LACED}, radius = 20",
        '"top chord".joined.lacing_area: is of lacing, and radius of',
    ),
    "no radius": ("radius = 11", "radius = -11", "members.web.joined.radius: must be above 0, got -0.011"),
    "spacing": (
        LACED, LACED.replace("300", "0.3"),
        "joined.spacing: a distance along or across a bar of 0.01 to 200 m",
    ),
    "bent by nothing": (
        '{ axis = "y", bow = 5, evenness = 0.85 }', '{ axis = "y" }',
        "bent[1]: nothing bends it: type mo",
    ),
    "bent twice": (
        '{ axis = "y", bow = 5', '{ axis = "x", bow = 5',
        '"top chord".bent: what bends it about one axis is',
    ),
    "moment": ("moment = 12", 'moment = "12 kN"', 'bent[0].moment: "12 kN" is a force; a moment is asked for'),
    "middle truss": (
        LOSS, LOSS.replace("left", "middle"),
        'losses[0].truss: "left" or "right" is asked for, got "middle"',
    ),
    "other bar": (
        LOSS, LOSS.replace("L2-L1", "U1-U2"),
        'losses[0].bar: "U1-U2" is no bar of this group: L0-L1, L1-L2,',
    ),
    "no bar": (LOSS, LOSS.replace("L2-L1", "L2"), "losses[0].bar: a bar is written as its two joints"),
    "where": (LOSS, LOSS.replace("middle", "midle"), 'losses[0].where: "midle" is no place along a member'),
    "nothing lost": (LOSS, LOSS.replace("0.2", "0"), "losses[0]: type either an amount or a fraction above 0, got 0 m"),
    "lost twice": (
        LOSS, LOSS.replace("0.2", "0.2, amount = 2"),
        "losses[0]: type either an amount or a fraction above",
    ),
    "all and more": (LOSS, LOSS.replace("0.2", "1.2"), "losses[0].fraction: at most all of it can be lost, 1, got 1.2"),
    "beyond the metal": (
        'part = "web", amount = 3', 'part = "web", amount = 9',
        '"top chord".losses[0]: start end: top chord: left channel: web: losses of 0.009 m together are more than the',
    ),
    "no such piece": ('piece = "left channel", part', 'piece = "left chanel", part', '(nearest: "left channel")'),
    "no such part": (
        'part = "flange" },\n]\n', 'part = "flnage" },\n]\n',
        '"top chord".losses[1]: all along: top chord',
    ),
    "inside nothing": (
        LOSS, LOSS.replace('"left"', '"left", inside_connection = true'),
        "losses[0].inside_connection: only",
    ),
    "truss of a floor": (
        "amount = 1 }", 'amount = 1, truss = "left" }',
        'floor.stringers.losses[0]: key "truss" is not',
    ),
    "beam, no length": ("unbraced = 1.2\n", "", 'floor.stringers.unbraced: is needed beside c_b: a length, or "held"'),
    "beam": ("unbraced = 1.2", "unbraced = 0", "floor.stringers.unbraced: must be above 0 and at most 200 m, got 0 m"),
    "held": (
        "unbraced = 1.2", 'unbraced = "hold"',
        'floor.stringers.unbraced: "hold" is not a number with a unit; a len',
    ),
    "shape of moment": ("c_b = 1.0", "c_b = 3", "floor.stringers.c_b: Cb is 1 to 2.3, got 3"),
    "lever": ("lever = 120", "lever = -120", "floor.stringers.lever: must be 0 or more, got -0.12 m"),
}  # fmt: skip


@pytest.mark.parametrize("what", PARTS)
def test_what_cannot_be_is_refused_at_its_place(what: str) -> None:
    old, new, said = PARTS[what]
    with pytest.raises(InputError, match=re.escape(said)) as caught:
        bridge_from(changed(MADE, (old, new)), "b.toml")
    assert str(caught.value).startswith("b.toml: ")


KINDS: dict[str, type[InputError]] = {
    "no section": UnknownNameError, "other bar": UnknownNameError, "no K": MissingDataError,
    "section alone": MissingDataError, "neither": MissingDataError, "area twice": InputError,
}  # fmt: skip


@pytest.mark.parametrize("what", KINDS)
def test_each_refusal_is_of_its_kind(what: str) -> None:
    old, new, said = PARTS[what]
    with pytest.raises(KINDS[what], match=re.escape(said)) as caught:
        bridge_from(changed(MADE, (old, new)), "b.toml")
    assert type(caught.value) is KINDS[what]
