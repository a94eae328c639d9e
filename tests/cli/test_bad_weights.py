"""Spoiled weights and rating keys of a bridge file; values of the wrong kind wherever its width needs a quantity."""

from __future__ import annotations

from typing import TYPE_CHECKING

import pytest
from cli.across import ACROSS, assert_spoiled
from cli_run import assert_refused, changed, movload, written

if TYPE_CHECKING:
    from pathlib import Path

WEIGHTS = {
    "none": (
        "thickness = 60\ndensity = 800\n", "",
        "permanent.items[0]: its weight is one of line, per_area, thickness, points; got none",
    ),
    "two": (
        "thickness = 60", "thickness = 60\nline = 1",
        "permanent.items[0]: its weight is one of", "; got line and thickness",
    ),
    "three": (
        "per_area = 0.4", "per_area = 0.4\nline = 1\npoints = { L1 = 1 }",
        "permanent.items[1]: its weight is one of", "; got line and per_area and points",
    ),
    "no density": ("density = 800\nacross", "across", "permanent.items[0].density: is needed beside thickness"),
    "no thickness": ("thickness = 60\n", "", "permanent.items[0]: its weight is one of line", "got none"),
    "density of a line": (
        "line = 0.3", "line = 0.3\ndensity = 800",
        "permanent.items[2].density: goes with thickness; the weight is said by line",
    ),
    "thickness below 0": (
        "thickness = 60", "thickness = -60",
        "permanent.items[0].thickness: must be 0 or more, got -0.06 m",
    ),
    "density below 0": (
        "thickness = 60\ndensity = 800", "thickness = 60\ndensity = -800",
        "permanent.items[0].density: must be 0 or more, got -800.0 kg/m3",
    ),
    "area below 0": (
        "per_area = 0.4", "per_area = -0.4",
        "permanent.items[1].per_area: must be 0 or more, got -400.0 N/m2",
    ),
    "line below 0": ("line = 0.3", "line = -0.3", "permanent.items[2].line: must be 0 or more, got -300.0 N/m"),
    "point below 0": (
        "{ L1 = 0.8 }", "{ L1 = -0.8 }",
        "permanent.items[4].points.L1: must be 0 or more, got -800.0 N",
    ),
    "point": ("{ L1 = 0.8 }", "{ L9 = 0.8 }", 'permanent.items[4].points.L9: "L9" is no panel point (nearest: "L'),
    "upper point": (
        "{ L1 = 0.8 }", "{ U1 = 0.8 }",
        'permanent.items[4].points.U1: "U1" is no panel point (nearest: "L1")',
    ),
    "no point": ("{ L1 = 0.8 }", "{}", "permanent.items[4].points: no panel point is named"),
    "point in m": (
        "{ L1 = 0.8 }", '{ L1 = "8 m" }',
        'permanent.items[4].points.L1: "8 m" is a length; a force is asked',
    ),
    "deck below 0": ("[permanent]", "[permanent]\ndeck = -3", "permanent.deck: must be 0 or more, got -3000.0 N/m"),
    "detail of 10": ('"10 %"', "10", "permanent.detail_allowance: must be 0 to 1 (15 % is 0.15), got 10.0"),
    "detail below 0": ('"10 %"', "-0.1", "permanent.detail_allowance: must be 0 to 1", "got -0.1"),
    "kind": (
        '"components"', '"component"',
        'permanent.items[0].kind: "component" is not one of components, surfacing, removable surfacing, other ',
        '(nearest: "components")',
    ),
    "kind of no item": ('"components"', '"settlement"', 'permanent.items[0].kind: "settlement" is not one of'),
    "no title": ('title = "planks"\n', "", "permanent.items[0].title: is missing"),
    "nowhere": ("across = 0\n", "", "permanent.items[4].across: is missing"),
    "from the left": (
        "[-2.5, 2.5]", "[2.5, -2.5]",
        "permanent.items[1].across: a weight per area needs a width, got 2.5 to -2.5 m",
    ),
    "no width": (
        "[-2.5, 2.5]", "0.5",
        "permanent.items[1].across: a weight per area needs a width, got 0.5 to 0.5 m",
    ),
    "no width, kerb": (
        "[-2.5, 2.5]", '"left"',
        "permanent.items[1].across: a weight per area needs a width, got 3 to 3 m",
    ),
    "line from the left": (
        'across = "left"', "across = [1, -1]",
        "permanent.items[2].across: lies from right to left, got 1",
    ),
    "somewhere": (
        "[-2.5, 2.5]", '"ful width"',
        'permanent.items[1].across: "ful width" is not a number with a unit',
        'or one of full width, left, right (nearest: "full width")',
    ),
    "three places": (
        "[-2.5, 2.5]", "[1, 2, 3]",
        "permanent.items[1].across: a place across is one z or two, got [1, 2, 3]",
    ),
    "far out": (
        "[-2.5, 2.5]", "[-20, 2.5]",
        "gravel", "a load at z = -20 m lies beyond the deck, which reaches from -3.2 to 3.2 m",
    ),
    "items, a table": ('[[permanent.items]]\ntitle = "planks"', '[permanent.items]\ntitle = "planks"', "is not TOML"),
}  # fmt: skip

RATING = {
    "rule": (
        "impact = 0.3", 'impact = "by loaded lenght"',
        'rating.impact: "by loaded lenght" is no fraction and none of by riding surface, by loaded length, ',
        'railway (nearest: "by loaded length")',
    ),
    "no rule": (
        "impact = 0.3", 'impact = ""',
        'rating.impact: "" is no fraction and none of by riding surface, by loaded length, railway',
    ),
    "rule typed": ("impact = 0.3", 'impact = "typed"', 'rating.impact: "typed" is no fraction'),
    "impact of 30": ("impact = 0.3", "impact = 30", "rating.impact: impact must be 0 to 2 (30 % is 0.3), got 30.0"),
    "surface": ('"minor"', '"mnor"', 'rating.surface: "mnor" is not one of smooth, minor, severe (nearest: "minor")'),
    "no surface": ('"minor"', '""', "rating.surface: text that is not empty is asked for"),
    "traffic": (
        "traffic = 100", 'traffic = "unknwon"',
        'rating.traffic: trucks a day or "unknown" is asked for, got "unknwon"',
    ),
    "traffic of 50 %": (
        "traffic = 100", 'traffic = "50 %"',
        'rating.traffic: trucks a day or "unknown" is asked for, got "50 %"',
    ),
    "traffic below 0": ("traffic = 100", "traffic = -4", "rating.traffic: must be 0 or more, got -4.0"),
    "traffic, true": (
        "traffic = 100", "traffic = true",
        "rating.traffic: a number or a string with a unit is asked for, got true",
    ),
    "limit of 0": (
        "deflection = 400", "deflection = 0",
        "rating.deflection: n of a limit span / n is asked for, above 0, got 0",
    ),
    "limit below 0": (
        "deflection = 400", "deflection = -400",
        "rating.deflection: n of a limit span / n is asked for, above 0",
    ),
    "limit as a ratio": (
        "deflection = 400", 'deflection = "1/400"',
        "rating.deflection: n of a limit span / n is asked for, above 0, got",
    ),
    "limit, nan": ("deflection = 400", "deflection = nan", "rating.deflection: a finite number"),
    "measured": (
        'condition = "fair"', 'condition = "fair"\nmeasured = 1',
        'members."top chord".measured: true or false is',
    ),
}  # fmt: skip


@pytest.mark.parametrize("what", WEIGHTS)
def test_a_spoiled_weight(tmp_path: Path, what: str) -> None:
    old, new, *parts = WEIGHTS[what]
    assert_spoiled(tmp_path, changed(ACROSS, (old, new)), *parts)


@pytest.mark.parametrize("what", RATING)
def test_a_spoiled_key_of_the_rating(tmp_path: Path, what: str) -> None:
    old, new, *parts = RATING[what]
    assert_spoiled(tmp_path, changed(ACROSS, (old, new)), *parts)


QUANTITIES = {
    "deck.truss_spacing": "truss_spacing = {}\nkerbs", "deck.kerbs[0]": "kerbs = [{}, 3.0]",
    "deck.kerbs[1]": "kerbs = [-3.0, {}]", "deck.clearance": "clearance = {}\n\n[floor.stringers]",
    "floor.stringers.z[0]": "z = [{}, -0.8", "floor.stringers.weight": "weight = {}\npermits = {{ moment = 60",
    "floor.stringers.permits.moment": "permits = {{ moment = {}, shear = 90",
    "floor.stringers.nominal.shear": "moment = 100, shear = {} }}",
    "floor.floorbeams.weight": "weight = {}\npermits = {{ moment = 190",
    "floor.planks.contact": "contact = {}\nsharing", "floor.planks.sharing": "sharing = {}\npermits",
    "permanent.detail_allowance": "detail_allowance = {}\n\n[[perm",
    "permanent.items[0].thickness": "thickness = {}\ndensity", "permanent.items[0].density": "density = {}\nacross",
    "permanent.items[1].per_area": "per_area = {}\nacross", "permanent.items[2].line": 'line = {}\nacross = "left"',
    "permanent.items[4].points.L1": "L1 = {} }}\nacross = 0",
    'members."top chord".nominal.tension': "tension = {}, compression = 270",
}  # fmt: skip
GIVEN = {
    "deck.truss_spacing": "6.4", "deck.kerbs[0]": "-3.0", "deck.kerbs[1]": "3.0", "deck.clearance": "0.4",
    "floor.stringers.z[0]": "-2.4", "floor.stringers.weight": "0.5", "floor.stringers.permits.moment": "60",
    "floor.stringers.nominal.shear": "150", "floor.floorbeams.weight": "0.9", "floor.planks.contact": "0.2",
    "floor.planks.sharing": "0.7", "permanent.detail_allowance": '"10 %"', "permanent.items[0].thickness": "60",
    "permanent.items[0].density": "800", "permanent.items[1].per_area": "0.4", "permanent.items[2].line": "0.3",
    "permanent.items[4].points.L1": "0.8", 'members."top chord".nominal.tension': "360",
}  # fmt: skip
WRONG = {
    "true": "got true", "1979-05-27": "got the date 1979-05-27", "[[1]]": "got [[1]]", "{ a = 1 }": "got the table",
    '"many"': '"many" is not a number with a unit', '"5 s"': '"5 s"', '"5 ton"': '"ton" can mean three weights',
    "nan": "a finite number within 1e+18 in SI is asked for, got nan",
    "-inf": "a finite number within 1e+18 in SI is asked for, got -inf",
    "1e400": "a finite number within 1e+18 in SI is asked for, got inf",
}  # fmt: skip


@pytest.mark.parametrize("place", QUANTITIES)
def test_no_quantity_of_the_wrong_kind(tmp_path: Path, place: str) -> None:
    given = QUANTITIES[place].format(GIVEN[place])
    for value, message in WRONG.items():
        path = written(tmp_path, changed(ACROSS, (given, QUANTITIES[place].format(value))))
        assert_refused(movload("draw", path), f"{place}: ", message, place=path)
