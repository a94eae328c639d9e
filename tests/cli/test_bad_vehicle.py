"""A spoiled vehicle file, or a vehicle that is not there: one line says which axle and what is wrong with it."""

from __future__ import annotations

from typing import TYPE_CHECKING

import pytest
from cli_run import BY_JOINTS, CART, ROOT, assert_refused, changed, movload, names_in, written

if TYPE_CHECKING:
    from pathlib import Path

AXLES = CART[CART.index("axles = [") :]
FRONT, REAR = "{ load = 20, gauge = 1.8 }", "after = 4.1"
STRIP = "strips = [ { load = 8, start = 0, length = 3, gauge = 2 } ]\naxles ="
CONVOY = "convoy = { most = 2, headway = 9 }\naxles ="
FURTHER = "after = 1, gauge = 2 }, "
FILL = 'fills = [ { shape = "uniform", load = 4, per_area = true, across = "full width" } ]\naxles ='
TAIL = "tail = { load = 8, after = 5, gauge = 2 }\naxles ="
CASE = '[[cases]]\ntitle = "up"\n'
FIXED = "{ load = 1, gauge = 2, after = 1 }, "
RANGED = "{ load = 1, gauge = 2, after = [1, 2] }, "

SPOILED = {
    "load below 0": ("load = 20", "load = -20", "axles[0].load: a load must be a finite number, 0 or more", "-20000 N"),
    "load nan": ("load = 45", "load = nan", "axles[1].load: a finite number", "got nan kN"),
    "load inf": ("load = 45", "load = inf", "axles[1].load: a finite number", "got inf kN"),
    "load huge": ("load = 45", "load = 1e308", "axles[1].load: a finite number within 1e+18 in SI", "1e+308 kN"),
    "load endless": ("load = 45", f"load = 1{'0' * 400}", "axles[1].load: a finite number", "kN"),
    "load in m": ("load = 45", 'load = "45 m"', 'axles[1].load: "45 m" is a length; a force is asked for'),
    "load in ton": ("load = 45", 'load = "4.5 ton"', '"4.5 ton": "ton" can mean three weights', "short ton or long"),
    "load in tons": ("load = 45", 'load = "4.5 tons"', 'axles[1].load: "4.5 tons": "tons" can mean three weights'),
    "load in T": ("load = 45", 'load = "4.5 T"', 'axles[1].load: "4.5 T": "T" can mean three weights'),
    "load, no unit": ("load = 45", 'load = "45"', 'axles[1].load: "45" has no unit; a force is asked for'),
    "load open": ("load = 45", 'load = "?"', 'axles[1].load: still holds "?" and is needed here'),
    "load true": ("load = 45", "load = true", "axles[1].load: a number or a string with a unit is asked for, got true"),
    "load missing": (FRONT, "{ gauge = 1.8 }", "axles[0].load: is missing"),
    "all loads 0": (AXLES, "axles = [{ load = 0 }, { load = 0, after = 1 }]", "axles: all axle loads are 0 N"),
    "gap below 0": (REAR, "after = -4.1", "axles[2].after: a spacing must be a finite number, 0 or more, got -4.1 m"),
    "gap nan": (REAR, "after = nan", "axles[2].after: a finite number", "got nan m"),
    "gap in kN": (REAR, 'after = "4 kN"', 'axles[2].after: "4 kN" is a force; a length is asked for'),
    "gap missing": (f"{REAR}, ", "", "axles[2].after: the distance behind the axle before is missing"),
    "gap before the first": (FRONT, "{ load = 20, after = 1 }", "axles[0].after: the first axle has no axle before it"),
    "gap reversed": (REAR, "after = [5, 4]", "axles[2].after: a range runs from least to greatest, got (5.0, 4.0) m"),
    "gap of one": (REAR, "after = [4]", "axles[2].after: a distance is one length or a list of the least", "got [4]"),
    "gap of three": (REAR, "after = [4, 5, 6]", "axles[2].after: a distance is one length", "got [4, 5, 6]"),
    "gap in kN, of two": (REAR, 'after = ["4 m", "5 kN"]', 'axles[2].after: "5 kN" is a force'),
    "gap, a table": (REAR, "after = { a = 1 }", "axles[2].after: a number or a string", "got the table"),
    "gauge of 0": ("gauge = 1.8", "gauge = 0", "axles[0].gauge: a gauge must be above 0, got 0.0 m"),
    "gauge below 0": ("gauge = 1.8", "gauge = -1.8", "axles[0].gauge: a gauge must be above 0, got -1.8 m"),
    "gauge missing": (", gauge = 1.8", "", "axles[0].gauge: some axles have a gauge and this one has none"),
    "kind": ('"farm"', '"frm"', 'kind: kind "frm" is not one of routine, legal,', '(nearest: "farm")'),
    "kind missing": ('kind = "farm"\n', "", "kind: is missing"),
    "kind, a number": ('"farm"', "1", "kind: text in quotes is asked for, got 1"),
    "key": ("gauge = 1.8", "guage = 1.8", 'axles[0]: key "guage" is not known (nearest: "gauge")'),
    "no axles": (AXLES, "axles = []", "axles: a vehicle needs at least one axle, got none"),
    "axles missing": (AXLES, "", "axles: is missing"),
    "axles, text": (AXLES, 'axles = "two"', 'axles: a list is asked for, got "two"'),
    "axles, a table": (AXLES, "[axles]\nload = 1", "axles: a list is asked for, got the table"),
    "axles, numbers": (AXLES, "axles = [20, 45]", "axles[0]: a table of keys is asked for, got 20"),
    "heading": ("kind =", 'headings = ["left"]\nkind =', 'headings[0]: "+x" or "-x" is asked for, got "left"'),
    "heading twice": ("kind =", 'headings = ["+x", "+x"]\nkind =', "headings: headings are +1, -1 or both, got (1, 1)"),
    "no heading": ("kind =", "headings = []\nkind =", 'headings: "+x", "-x" or both are asked for, got []'),
    "headings, text": ("kind =", 'headings = "+x"\nkind =', 'headings: a list is asked for, got "+x"'),
    "unit": ('force = "kN"', 'force = "kNn"', 'units.force: "kNn": unit "kNn" is not known', '(nearest: "kN")'),
    "units missing": ('units = { length = "m", force = "kN" }', "", "units: the units are not said"),
    "strip of no length": ("axles =", STRIP.replace("length = 3", "length = 0"), "strips[0].length: a uniform load"),
    "strip, key": ("axles =", STRIP.replace("start", "stort"), 'strips[0]: key "stort" is not known', '"start"'),
    "tail lifts": ("axles =", TAIL.replace("8", "-8"), "tail.load: a uniform load must be 0 or more"),
    "headway below 0": ("axles =", CONVOY.replace("9", "-3"), "convoy.headway: a headway must be 0 or more, got -3 m"),
    "tolerance": ("axles =", 'tolerance = "60 %"\naxles =', "tolerance: a tolerance is 0 to 50 %, got 60 %"),
    "across": ("axles =", FILL.replace("full", "ful"), 'fills[0].across: "ful width" is not one of', '"full width"'),
    "area without across": ("axles =", FILL.replace(', across = "full width"', ""), "across: a load per area"),
    "cases, no axle": (AXLES, '[[cases]]\ntitle = "up"\naxles = []\n', "cases[0].axles: a vehicle needs"),
    "cases, twice": (AXLES, f"{AXLES}{CASE}{CASE}", 'cases[1].title: "up" is the title of an earlier case'),
    "201 axles": (REAR, f"{FURTHER}{FIXED * 198}{{ load = 1, after = 1", "axles: a vehicle has at most 200 axles"),
    "13 ranges": (REAR, f"{FURTHER}{RANGED * 13}{{ load = 1, after = 1", "axles: at most 12 spacings may be"),
    "source, two lines": ('"invented"', '"a\\nb"', "source: must be one line without control characters"),
}  # fmt: skip


@pytest.mark.parametrize(("old", "new", "parts"), [(a, b, c) for a, b, *c in SPOILED.values()], ids=SPOILED)
def test_a_spoiled_vehicle_is_refused(tmp_path: Path, old: str, new: str, parts: list[str]) -> None:
    bridge, path = written(tmp_path, BY_JOINTS), written(tmp_path, changed(CART, (old, new)), "cart.toml")
    for words in (["vehicles", path], ["rate", bridge, path, "--json"], ["sweep", bridge, "h5", path]):
        assert_refused(movload(*words, "--csv", tmp_path / "new.csv"), *parts, place=path)
    assert names_in(tmp_path) == {"bridge.toml", "cart.toml"}


def test_the_unspoiled_cart_is_taken(tmp_path: Path) -> None:
    bridge, path = written(tmp_path, BY_JOINTS), written(tmp_path, CART, "cart.toml")
    assert movload("vehicles", path).code == 0
    assert movload("rate", bridge, path, "h5").code == 0


UNKNOWN = {
    "h55": ('vehicle "h55" is not in the library and is no .toml file; "movload vehicles" lists', '(nearest: "h5")'),
    "slurry tanker": ('vehicle "slurry tanker" is not in the library', '(nearest: "tractor_slurry_tanker")'),
    "": ('vehicle "" is not in the library',),
    "?": ('vehicle "?" is not in the library',),
    "two\nlines": ('vehicle "two\\nlines" is not in the library',),
    "h5.toml": ('h5.toml: no such file (nearest: "h5")',),
    "no/h5": ('no/h5: no such file (nearest: "h5")',),
    "nul\0": ("nul\\x00: cannot be read: ",),
}


@pytest.mark.parametrize("name", UNKNOWN, ids=repr)
def test_a_vehicle_that_is_not_there(tmp_path: Path, name: str) -> None:
    bridge = written(tmp_path, BY_JOINTS)
    assert_refused(movload("rate", bridge, name), *UNKNOWN[name])
    assert_refused(movload("sweep", bridge, "h5", name), *UNKNOWN[name])
    assert_refused(movload("vehicles", name), *UNKNOWN[name])


@pytest.mark.parametrize("second", ["h5", "H5", "H 5", ROOT / "vehicles" / "h5.toml"])
def test_a_vehicle_named_twice(tmp_path: Path, second: object) -> None:
    bridge = written(tmp_path, BY_JOINTS)
    assert_refused(movload("rate", bridge, "h5", second), '"H5 maintenance vehicle" is asked for twice', place=second)


NOT_YET = {
    "strip": (STRIP, "Alder hay cart: uniform loads that move with a vehicle cannot be swept yet"),
    "tail": (TAIL, "Alder hay cart: uniform loads that move with"),
    "fill": (FILL, "case Alder hay cart: loads that fill the bridge cannot be swept yet"),
    "convoy": (CONVOY, "case Alder hay cart: vehicles that follow each other"),
    "above": (
        "above = 60\naxles =",
        "case Alder hay cart: a case for some trusses or lengths only cannot be swept yet",
    ),
    "continuous": ("continuous = true\naxles =", "case Alder hay cart: a case for some trusses or lengths only cannot"),
}


@pytest.mark.parametrize("name", NOT_YET)
def test_what_is_read_but_not_swept_yet_is_never_left_out_in_silence(tmp_path: Path, name: str) -> None:
    new, message = NOT_YET[name]
    bridge, path = written(tmp_path, BY_JOINTS), written(tmp_path, changed(CART, ("axles =", new)), "cart.toml")
    assert movload("vehicles", path).code == 0
    for words in (["rate", bridge, path], ["sweep", bridge, "h5", path]):
        assert_refused(movload(*words), message)


def test_a_range_of_spacings_is_kept(tmp_path: Path) -> None:
    path = written(tmp_path, changed(CART, (REAR, "after = [3, 5]")), "cart.toml")
    assert movload("vehicles", path, "--json").json()["rows"][0]["cases"][0]["spacings"] == [2.7, [3.0, 5.0]]
