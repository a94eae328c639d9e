"""A spoiled [layout]: counts, depths, overrides, omitted bars and groups that do not fit it."""

from __future__ import annotations

from typing import TYPE_CHECKING

import pytest
from cli_run import BY_LAYOUT, assert_refused, changed, movload, without, written

if TYPE_CHECKING:
    from pathlib import Path

PANELS, DEPTHS = "panels = [3.1, 3.3, 3.2, 3.15]", "depths = [0, 2.1, 2.3, 2.2, 0]"

SPOILED = {
    "form": ('"pratt"', '"prat"', 'layout.form: "prat" is not known; choose one of "pratt"', 'nearest: "pratt"'),
    "deck": ('"pony"', '"ponny"', 'layout.deck: "ponny" is not known', '(nearest: "pony")'),
    "deck missing": ('deck = "pony"\n', "", "layout.deck: is missing"),
    "middle, none there": ('"pony"', '"pony"\nmiddle = "falling"', "layout.middle: only a", "with 4 panels"),
    "no panels": (PANELS, "panels = []", 'layout.panels: form "pratt" needs at least 2 panels, got 0'),
    "a panel fewer": ("[3.1, 3.3,", "[3.3,", 'layout.depths: form "pratt" needs one depth', "4 for 3 panels, got 5"),
    "a depth fewer": ("2.3, 2.2, 0]", "2.2, 0]", "layout.depths: ", "5 for 4 panels, got 4"),
    "a depth more": ("2.3, 2.2, 0]", "2.3, 2.2, 0, 0]", "layout.depths: ", "5 for 4 panels, got 6"),
    "panel of 0": ("[3.1,", "[0,", "layout.panels[0]: panel L0-L1 must be longer than 0 and finite, got 0 m"),
    "panel below 0": ("[3.1,", "[-3.1,", "layout.panels[0]: panel L0-L1 must be longer than 0", "got -3.1 m"),
    "panel nan": ("[3.1,", "[nan,", "layout.panels[0]: a finite number", "got nan m"),
    "panel in kN": ("[3.1,", '["3.1 kN",', 'layout.panels[0]: "3.1 kN" is a force; a length is asked for'),
    "panel open": ("[3.1,", '["?",', 'layout.panels[0]: still holds "?" and is needed here'),
    "panels open": (PANELS, 'panels = "?"', 'layout.panels: still holds "?" and is needed here'),
    "panels, a number": (PANELS, "panels = 4", "layout.panels: a list is asked for, got 4"),
    "panels, text": (PANELS, 'panels = "4x3.1"', 'layout.panels: a list is asked for, got "4x3.1"'),
    "panels, nested": (PANELS, "panels = [[3.1, 3.3, 3.2, 3.15]]", "layout.panels[0]: a number or a string"),
    "panel, a hair": ("[3.1,", "[1e-12,", "member L0-L1: has no length", "1e-12 m in a truss of 9.65 m"),
    "panel, a continent": ("[3.1,", "[1e17,", "has no length"),
    "panel, a universe": ("[3.1,", "[1e30,", "layout.panels[0]: a finite number within 1e+18 in SI", "got 1e+30 m"),
    "depth below 0": ("[0, 2.1", "[-1, 2.1", "layout.depths[0]: the depth at panel point L0", "got -1 m"),
    "inner depth of 0": ("0, 2.1,", "0, 0,", "layout.depths[1]: ", "since only an end may taper to a point; got 0 m"),
    "depth, a hair": ("0, 2.1,", "0, 1e-12,", "has no length"),
    "key": ('form = "pratt"', 'forme = "pratt"', 'layout: key "forme" is not known (nearest: "form")'),
    "override of nothing": ("[supports]", "[joints]\nL9 = [3, 0]\n[supports]", "joint L9: no member reaches it (near"),
    "override onto another": ("[supports]", "[joints]\nL1 = [0, 0]\n[supports]", "member L0-L1: has no length"),
    "override far off": ("[supports]", "[joints]\nL1 = [50, 0]\n[supports]", "deck.panel_points[2]: ", "at x = 50 m"),
    "omit a stranger": ('"pony"', '"pony"\nomit = ["U1-L9"]', 'layout.omit[0]: "U1-L9" is not a bar', "nearest: "),
    "omit twice": ('"pony"', '"pony"\nomit = ["U1-L1", "L1-U1"]', 'layout.omit[1]: "L1-U1" is not a bar', "twice"),
    "omit text": ('"pony"', '"pony"\nomit = "U1-L1"', "layout.omit: a list is asked for"),
    "omit a diagonal": ('"pony"', '"pony"\nomit = ["L2-U1"]', "truss: is a mechanism: joint ", " can move "),
    "role": ("[members.verticals]", "[members.vertical]", "members.vertical: a group without bars", "verticals"),
    "no role left": ('"pony"', '"pony"\nomit = ["U1-L2", "L2-U3"]', "members.diagonals: a group without bars carries"),
    "bar of no joint": ("[deck]", '[members.x]\nbars = ["U1-L9"]\narea = 1\nmodulus = 1\n[deck]', 'joint "L9" is not'),
    "group for nothing": (
        "[deck]",
        '[members.x]\nbars = ["U1-L2", "U3-L2"]\narea = 900\nmodulus = 200\n[deck]',
        "members.diagonals: takes no bar: other groups name all of its role's",
    ),
    "panel point": ("[deck]", '[deck]\npanel_points = ["L0", "L5"]', 'deck.panel_points[1]: joint "L5" is not defined'),
}  # fmt: skip


@pytest.mark.parametrize(("old", "new", "parts"), [(a, b, c) for a, b, *c in SPOILED.values()], ids=SPOILED)
def test_a_spoiled_layout_is_refused(tmp_path: Path, old: str, new: str, parts: list[str]) -> None:
    path = written(tmp_path, changed(BY_LAYOUT, (old, new)))
    for words in (["draw", path], ["rate", path, "h5", "--json"]):
        assert_refused(movload(*words), *parts, place=path)


def test_groups_without_bars_need_a_layout(tmp_path: Path) -> None:
    path = written(tmp_path, without(BY_LAYOUT, "layout"))
    assert_refused(movload("draw", path), 'members."top chord": without a [layout] a group needs its bars', place=path)


@pytest.mark.parametrize("role", ['"top chord"', '"bottom chord"', '"end posts"', "verticals", "diagonals"])
def test_a_bar_that_no_group_takes(tmp_path: Path, role: str) -> None:
    path = written(tmp_path, without(BY_LAYOUT, f"members.{role}"))
    assert_refused(movload("draw", path), "members: no group takes bar", f"add [members.{role}] or bars", place=path)


def test_a_middle_panel_asks_for_its_diagonal(tmp_path: Path) -> None:
    three = changed(
        BY_LAYOUT, (PANELS, "panels = [3.1, 3.3, 3.2]"), (DEPTHS, "depths = [0, 2.1, 2.3, 0]"), ("L4", "L3")
    )
    path = written(tmp_path, three)
    assert_refused(movload("draw", path), "layout.middle: ", 'must be stated: "falling"', place=path)
    path = written(tmp_path, changed(three, ('"pony"', '"pony"\nmiddle = "falls"')))
    assert_refused(movload("draw", path), 'layout.middle: "falls" is not known', 'nearest: "falling"', place=path)
    path = written(tmp_path, changed(three, ('"pony"', '"pony"\nmiddle = "?"')))
    assert_refused(movload("draw", path), 'layout.middle: still holds "?"', place=path)


FORMS = {
    "k": ("needs an even number, at least 4 panels, got 5", "panels = [3, 3, 3, 3, 3]"),
    "baltimore": ("needs a multiple of 4, at least 8 panels, got 4", PANELS),
    "warren with verticals": ("needs an even number of panels", "panels = [3, 3, 3]"),
    "warren": ("one depth at the middle of each panel: 4 for 4 panels, got 5", PANELS),
}


@pytest.mark.parametrize("form", FORMS)
def test_a_form_says_what_it_needs(tmp_path: Path, form: str) -> None:
    rule, panels = FORMS[form]
    depths = (
        DEPTHS if panels == PANELS else "depths = [0, 2, 2, 0]" if "with" in form else "depths = [0, 2, 2, 2, 2, 0]"
    )
    path = written(tmp_path, changed(BY_LAYOUT, ('"pratt"', f'"{form}"'), (PANELS, panels), (DEPTHS, depths)))
    assert_refused(movload("draw", path), "layout.", rule, place=path)


def test_the_unspoiled_layout_and_its_omissions_are_taken(tmp_path: Path) -> None:
    assert movload("rate", written(tmp_path, BY_LAYOUT), "h5").code == 0
    crossed = changed(
        BY_LAYOUT,
        ('"pony"', '"pony"\nomit = ["L2-U1"]'),
        ("[deck]", '[members.other]\nbars = [" L1 - U2 "]\narea = 900\nmodulus = 200\n[deck]'),
    )
    drawn = movload("draw", written(tmp_path, crossed), "--json").json()
    names = [row["row"] for row in drawn["rows"]]
    assert "U1-L2" not in names
    assert "L1-U2" in names
    assert drawn["redundancy"] == 0
