"""Strips, tails, fills, cases and convoys that do not fit: each is refused by its place in the vehicle file."""

from __future__ import annotations

import re

import pytest

from movload.errors import InputError
from movload.files.vehicles import vehicle_from

HEAD = """\
title = "Alder works train"
kind = "permit"
source = "invented"
units = { length = "m", force = "kN" }
"""
AXLES = "axles = [ { load = 40 }, { load = 80, after = 2 } ]\n"
RANGED = "axles = [ { load = 4 }, { load = 4, after = [1, 2] } ]\n"
TAIL = "tail = { load = 8, after = 1 }\n"
LANE = '{ shape = "uniform", load = 9 }'
TITLED = '[[cases]]\ntitle = "up"\n'


def strip(text: str) -> str:
    """Return a file's only strip."""
    return f"strips = [ {{ {text} }} ]\n"


def uniform(text: str) -> str:
    """Return a file's only load that fills, a uniform one."""
    return f'fills = [ {{ shape = "uniform", {text} }} ]\n'


def edge(text: str) -> str:
    """Return a file's only load that fills, a knife edge."""
    return f'fills = [ {{ shape = "knife edge", {text} }} ]\n'


REFUSED = {
    "a range reversed": (
        "axles = [ { load = 4 }, { load = 4, after = [3, 2] } ]",
        "axles[1].after: a range runs from least to greatest, got (3.0, 2.0) m",
    ),
    "a range below 0": (
        "axles = [ { load = 4 }, { load = 4, after = [-3, 2] } ]",
        "axles[1].after: a spacing must be a finite number, 0 or more, got (-3.0, 2.0) m",
    ),
    "a headway below 0": (
        AXLES + "convoy = { most = 2, headway = -1 }",
        "convoy.headway: a headway must be 0 or more, got -1 m",
    ),
    "a convoy of none": (
        AXLES + "convoy = { most = 0, headway = 1 }",
        "convoy.most: a convoy is of 1 or more, got at most 0",
    ),
    "a convoy of 1.5": (
        AXLES + "convoy = { most = 1.5, headway = 1 }",
        "convoy.most: a whole number is asked for, got 1.5",
    ),
    "a convoy of true": (
        AXLES + "convoy = { most = true, headway = 1 }",
        "convoy.most: a whole number is asked for, got true",
    ),
    "a convoy without headway": (AXLES + "convoy = { most = 2 }", "convoy.headway: is missing"),
    "a convoy, order in words": (
        AXLES + 'convoy = { most = 2, headway = 1, ordered = "yes" }',
        'convoy.ordered: true or false is asked for, got "yes"',
    ),
    "a convoy of lanes": (
        f"convoy = {{ most = 2, headway = 1 }}\nfills = [ {LANE} ]",
        "convoy: a convoy needs a vehicle",
    ),
    "a convoy with a tail": (
        AXLES + TAIL + "convoy = { most = 2, headway = 1 }",
        "convoy: nothing can follow a load that never ends: no convoy with a tail",
    ),
    "a convoy too long": (
        AXLES + "convoy = { most = 101, headway = 1 }",
        "convoy: a convoy has at most 200 axles or strips in all, got 202",
    ),
    "a strip of no length": (
        strip("load = 8, start = 0, length = 0"),
        "strips[0].length: a uniform load needs a length above 0, got 0 m",
    ),
    "a strip that lifts": (
        strip("load = -8, start = 0, length = 1"),
        "strips[0].load: a uniform load must be 0 or more, got -8000 N/m",
    ),
    "a strip from both ends": (
        AXLES + strip("load = 8, start = 0, after = 1, length = 1"),
        "strips[0].after: either start or after is asked for, got both",
    ),
    "a strip from neither end": (
        AXLES + strip("load = 8, length = 1"),
        "strips[0].start: is missing; say start, or after (behind the last axle)",
    ),
    "a strip behind no axle": (
        strip("load = 8, after = 1, length = 1"),
        "strips[0].after: there is no axle for it to be behind: say start",
    ),
    "a strip behind a range": (
        RANGED + strip("load = 8, after = 1, length = 1"),
        "strips[0].after: a spacing is a range, so the last axle has no one place",
    ),
    "a strip's gauge of 0": (
        strip("load = 8, start = 0, length = 1, gauge = 0"),
        "strips[0].gauge: a gauge must be above 0, got 0 m",
    ),
    "a strip in kN": (
        'strips = [ { load = "8 kN", start = 0, length = 1 } ]',
        'strips[0].load: "8 kN" is a force; a load per length',
    ),
    "strips of nothing": (
        strip("load = 0, start = 0, length = 1"),
        "strips: all of its loads are 0; at least one must be above 0",
    ),
    "too many strips": (
        f"strips = [ {'{ load = 1, start = 0, length = 1 }, ' * 201} ]",
        "strips: a vehicle has at most 200 strips, got 201",
    ),
    "a tail that lifts": (
        AXLES + "tail = { load = -8, after = 1 }",
        "tail.load: a uniform load must be 0 or more, got -8000 N/m",
    ),
    "a tail behind no axle": (
        strip("load = 8, start = 0, length = 1") + TAIL,
        "tail: it follows the last axle, and there is none",
    ),
    "a tail alone": (TAIL, "tail: it follows the last axle, and there is none"),
    "a tail behind a range": (RANGED + TAIL, "tail.after: a spacing is a range, so the last axle has no one place"),
    "too many axles": (
        f"axles = [ {{ load = 1 }}, {'{ load = 1, after = 1 }, ' * 200} ]",
        "axles: a vehicle has at most 200 axles, got 201",
    ),
    "too many ranges": (
        f"axles = [ {{ load = 1 }}, {'{ load = 1, after = [1, 2] }, ' * 13} ]",
        "axles: at most 12 spacings may be ranges, got 13",
    ),
    "nothing": ("", "axles: is missing"),
    "no axle": ("axles = []", "axles: a vehicle needs at least one axle, got none"),
    "gauges on some": (
        "axles = [ { load = 4, gauge = 2 } ]\ntail = { load = 8, after = 1 }",
        "tail.gauge: some axles have a gauge and this one has none",
    ),
    "gauges on strips": (
        AXLES + strip("load = 8, start = 0, length = 1, gauge = 2"),
        "axles[0].gauge: some loads have a gauge and this one has none",
    ),
    "a factor of 0": (AXLES + "factor = 0", "factor: a factor must be above 0, got 0"),
    "relieving above 1": (AXLES + "relieving = 1.1", "relieving: what counts where it relieves is 0 to 1, got 1.1"),
    "relieving below 0": (
        AXLES + 'relieving = "-10 %"',
        "relieving: what counts where it relieves is 0 to 1, got -0.1",
    ),
    "a tolerance of 51 %": (AXLES + 'tolerance = "51 %"', "tolerance: a tolerance is 0 to 50 %, got 51 %"),
    "a tolerance below 0": (AXLES + "tolerance = -0.01", "tolerance: a tolerance is 0 to 50 %, got -1 %"),
    "a tolerance and relieving": (
        AXLES + "tolerance = 0.1\nrelieving = 0.5",
        "tolerance: either relieving or a tolerance is asked for, got both",
    ),
    "a tolerance of a lane": (
        f"{AXLES}tolerance = 0.1\nfills = [ {LANE} ]",
        "tolerance: it is one of axle weights, and loads that fill have none",
    ),
    "above less than 0": (AXLES + "above = -1", "above: a length is 0 or more, got -1 m"),
    "a weight of 0": (AXLES + "weight = 0", "weight: a weight must be above 0, got 0 N"),
    "a fill without a load": ('fills = [ { shape = "uniform" } ]', "fills[0].load: is missing"),
    "a fill without a shape": ("fills = [ { load = 9 } ]", "fills[0].shape: is missing"),
    "a fill that lifts": (
        uniform("load = -9"),
        "fills[0].load: a load that fills must be a finite number, 0 or more, got -9000",
    ),
    "a web load that lifts": (
        edge("load = 9, web_load = -1"),
        "fills[0].web_load: what a knife edge is for webs must be a finite number, 0 or more, got -1000",
    ),
    "a web load of a uniform load": (
        uniform("load = 9, web_load = 26"),
        "fills[0].web_load: only a knife edge has one, got 26000 on a uniform load",
    ),
    "an area without across": (
        uniform("load = 9, per_area = true"),
        'fills[0].across: a load per area needs to know how wide it lies: "full width", "left half", "right half"',
    ),
    "a density without across": (
        uniform('density = "en crowd"'),
        "fills[0].across: a load per area needs to know how wide it lies",
    ),
    "a density with a load": (
        uniform('load = 5, density = "en crowd", across = "full width"'),
        'fills[0].load: "en crowd" says it already: leave it out',
    ),
    "an area of a knife edge": (
        edge('load = 5, per_area = true, across = "full width"'),
        "fills[0].per_area: a knife edge is one load and has none per area",
    ),
    "an area per length": (
        uniform('load = "5 kN/m", per_area = true, across = "full width"'),
        'fills[0].load: "5 kN/m" is a load per length; a load per area',
    ),
    "a length per area": (uniform('load = "90 psf"'), 'fills[0].load: "90 psf" is a load per area; a load per length'),
    "a gauge of all the width": (
        uniform('load = 9, across = "full width", gauge = 2'),
        'fills[0].gauge: "full width" leaves it no gauge, got 2 m',
    ),
    "a gauge of 0": (uniform("load = 9, gauge = 0"), "fills[0].gauge: a gauge must be above 0, got 0 m"),
    "outside nothing": (uniform('load = 9, where = "outside"'), "fills: a load outside the vehicle needs a vehicle"),
    "a knife edge outside": (
        AXLES + edge('load = 9, where = "outside"'),
        "fills[0].where: a knife edge stands wherever it is adverse, or at a place",
    ),
    "clear of nothing": (
        AXLES + uniform("load = 9, clear = 1"),
        'fills[0].clear: a clear distance goes with where = "outside"',
    ),
    "clear below 0": (
        AXLES + uniform('load = 9, where = "outside", clear = -1'),
        "fills[0].clear: a clear distance must be a finite number, 0 or more, got -1",
    ),
    "clear of three": (
        AXLES + uniform('load = 9, where = "outside", clear = [1, 2, 3]'),
        "fills[0].clear: a clear distance is one length or a list of those before and behind, got [1, 2, 3]",
    ),
    "at and where": (
        uniform('load = 9, where = "adverse", at = [1, 2]'),
        "fills[0].at: either where or at is asked for, got both",
    ),
    "at reversed": (
        uniform("load = 9, at = [2, 1]"),
        "fills[0].at: a stretch runs from the least x to the greatest, got 2 to 1 m",
    ),
    "uniform at one x": (
        uniform("load = 9, at = 2"),
        "fills[0].at: a stretch runs from the least x to the greatest, got 2 to 2 m",
    ),
    "a knife edge at two": (edge("load = 9, at = [1, 2]"), "fills[0].at: a knife edge stands at one x, got 1 to 2 m"),
    "impact included in a fill": (
        uniform('load = 9, impact = "included"'),
        'fills[0].impact: "added" or "none" is asked for, got "included"',
    ),
    "per area, a number": (uniform("load = 9, per_area = 1"), "fills[0].per_area: true or false is asked for, got 1"),
    "a case title twice": (
        AXLES + TITLED + '[[cases]]\ntitle = "up"',
        'cases[1].title: "up" is the title of an earlier case already',
    ),
    "a case without a title": (AXLES + "[[cases]]\nfactor = 2", "cases[0].title: is missing"),
    "a lift case without axle": (
        AXLES + TITLED + 'axles = []\n[[cases]]\ntitle = "down"',
        "cases[0].axles: a vehicle needs at least one axle, got none",
    ),
    "a case of nothing": ('[[cases]]\ntitle = "up"', "cases[0].axles: is missing"),
    "a case's gap": (
        TITLED
        + 'axles = [ { load = 4 } ]\n[[cases]]\ntitle = "b"\naxles = [ { load = 4 }, { load = 4, after = [3, 1] } ]',
        "cases[1].axles[1].after: a range runs from least to greatest",
    ),
    "a case's fill": (
        AXLES + TITLED + 'fills = [ { shape = "uniform", load = 9, web_load = 1 } ]',
        "cases[0].fills[0].web_load: only a knife edge has one",
    ),
    "a case's convoy": (
        AXLES + TITLED + "tail = { load = 1, after = 1 }\nconvoy = { most = 2, headway = 1 }",
        "cases[0].convoy: nothing can follow a load that never ends",
    ),
    "the file's axle in a case": (
        'axles = [ { load = -4 } ]\n[[cases]]\ntitle = "a"',
        "axles[0].load: a load must be a finite number, 0 or more, got -4000 N",
    ),
    "what no case takes": (AXLES + TITLED + "axles = [ { load = 4 } ]", "axles: no case takes it: each says it itself"),
    "a tolerance no case takes": (
        AXLES + 'tolerance = 0.1\n[[cases]]\ntitle = "a"\nrelieving = 0',
        "tolerance: no case takes it: each says it itself",
    ),
    "a case within a case": (AXLES + TITLED + '[[cases.cases]]\ntitle = "b"', 'cases[0]: key "cases" is not known'),
    "no heading": (AXLES + "headings = []", 'headings: "+x", "-x" or both are asked for, got []'),
}


@pytest.mark.parametrize("name", REFUSED)
def test_what_does_not_fit_is_refused_by_place(name: str) -> None:
    text, message = REFUSED[name]
    with pytest.raises(InputError, match=f"^{re.escape(f'works.toml: {message}')}"):
        vehicle_from(HEAD + text, "works.toml")
