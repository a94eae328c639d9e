"""Values of the wrong kind, unit or size, in every place that holds one; "?" in every place; TOML that is none."""

from __future__ import annotations

from typing import TYPE_CHECKING

import pytest
from cli_run import BY_JOINTS, CART, assert_refused, changed, movload, names_in, written

if TYPE_CHECKING:
    from pathlib import Path

CHORD = 'members."top chord"'
HUGE = "1" + "0" * 400

# Where a quantity stands: its place, and the text around its value.
QUANTITIES = {
    "joints.U1[0]": "U1 = [{}, 2.2]",
    "joints.U1[1]": "U1 = [3.1, {}]",
    f"{CHORD}.area": "area = {}\nmodulus = 200\ndensity = 7850\npermits = {{ tension = 200",
    f"{CHORD}.modulus": "modulus = {}\ndensity = 7850\npermits = {{ tension = 200",
    f"{CHORD}.density": "density = {}\npermits = {{ tension = 200",
    f"{CHORD}.permits.tension": "tension = {}, compression = 150",
    f"{CHORD}.permits.compression": 'compression = {} }}\n\n[members."bottom chord"]',
    "deck.truss_share": "truss_share = {}\n\n[permanent]",
    "deck.left_abutment": "left_abutment = {}\n\n[permanent]",
    "permanent.deck": "deck = {}\ntruss_share = 0.5",
    "permanent.truss_share": "truss_share = {}\n\n[rating]",
    "rating.impact": "impact = {}",
    "supports.L3.settlement": "slides = 0, settlement = {} }}",
    "supports.L3.movement": "slides = 0, movement = {} }}",
    "supports.L3.normal_stiffness": "slides = 0, normal_stiffness = {} }}",
    "supports.L3.slide_stiffness": "slides = 0, slide_stiffness = {} }}",
}
GIVEN = {
    "joints.U1[0]": "3.1", "joints.U1[1]": "2.2", f"{CHORD}.area": "2000", f"{CHORD}.modulus": "200",
    f"{CHORD}.density": "7850", f"{CHORD}.permits.tension": "200", f"{CHORD}.permits.compression": "150",
    "deck.truss_share": "0.6", "permanent.deck": "4.0", "permanent.truss_share": "0.5", "rating.impact": "0.3",
}  # fmt: skip
WRONG = {
    "true": "got true",
    "1979-05-27": "got the date 1979-05-27",
    "07:32:00": "got the time 07:32:00",
    "1979-05-27T07:32:00Z": "got the datetime 1979-05-27",
    "[1]": "got [1]",
    "{ a = 1 }": "got the table",
    '""': '"" is not a number with a unit',
    '"many"': '"many" is not a number with a unit',
    '"5"': "5",  # no unit, or for a fraction too much
    '"5 s"': '"5 s"',
    '"5 ton"': '"5 ton": "ton" can mean three weights; write t (tonne), short ton or long ton',
    '"1/0 in"': '"1/0 in"',
    "nan": "a finite number within 1e+18 in SI is asked for, got nan",
    "inf": "a finite number within 1e+18 in SI is asked for, got inf",
    "-inf": "a finite number within 1e+18 in SI is asked for, got -inf",
    "1e308": "a finite number within 1e+18 in SI is asked for, got 1e+308",
    HUGE: "a finite number within 1e+18 in SI is asked for, got 1000",
    "1e400": "a finite number within 1e+18 in SI is asked for, got inf",
    f'"{HUGE}/3 in"': "",
}
NO_RULE = "is no fraction and none of by riding surface, by loaded length, railway"  # an impact may be a rule's name
MAY_WAIT = {
    f"{CHORD}.density", f"{CHORD}.permits.tension", f"{CHORD}.permits.compression", "deck.truss_share",
    "permanent.deck", "permanent.truss_share", "rating.impact",
}  # fmt: skip


def put(place: str, value: str) -> str:
    """Return the bridge with another value at a place."""
    around = QUANTITIES[place]
    if place in GIVEN:
        return changed(BY_JOINTS, (around.format(GIVEN[place]), around.format(value)))
    if place.startswith("supports"):
        return changed(BY_JOINTS, ("slides = 0 }", around.format(value)))
    return changed(BY_JOINTS, ("\n[permanent]", around.format(value)))


@pytest.mark.parametrize("place", QUANTITIES)
def test_a_quantity_is_taken_where_it_stands(tmp_path: Path, place: str) -> None:
    """Each place with a value as it should be, or the refusals below would prove nothing."""
    good = GIVEN.get(place, {"deck.left_abutment": "-0.4"}.get(place, "0.001"))
    assert movload("draw", written(tmp_path, put(place, good))).code == 0


@pytest.mark.parametrize("place", QUANTITIES)
def test_no_quantity_of_the_wrong_kind(tmp_path: Path, place: str) -> None:
    for value, message in WRONG.items():
        no_rule = place == "rating.impact" and value in {'""', '"many"'}
        path = written(tmp_path, put(place, value))
        assert_refused(movload("draw", path), f"{place}: ", f"{value} {NO_RULE}" if no_rule else message, place=path)


@pytest.mark.parametrize("place", QUANTITIES)
def test_an_open_question_is_said_at_once_or_asked_for_by_the_rating(tmp_path: Path, place: str) -> None:
    path = written(tmp_path, put(place, '"?"'))
    if place in MAY_WAIT:
        drawn = movload("draw", path)
        assert drawn.code == 0
        assert f'Still to be filled ("?"): {place}' in drawn.out
        assert movload("draw", path, "--json").json()["missing"] == [place]
        assert_refused(movload("rate", path, "h5"), f'{place} (still holds "?")', place=path)
    else:
        for words in (["draw", path], ["rate", path, "h5"], ["sweep", path, "h5"]):
            assert_refused(movload(*words), f'{place}: still holds "?" and is needed here', place=path)


OPEN = {
    "title": ('title = "Alder footpath"', 'title = "?"'),
    "units": ('[units]\nlength = "m"\nforce = "kN"\nsection = "mm"', 'units = "?"'),
    "units.length": ('length = "m"', 'length = "?"'),
    "joints.U1": ("U1 = [3.1, 2.2]", 'U1 = "?"'),
    "supports.L3": ("L3 = { slides = 0 }", 'L3 = "?"'),
    "supports.L3.slides": ("{ slides = 0 }", '{ slides = "?" }'),
    f"{CHORD}.bars": ('bars = ["U1-U2"]', 'bars = "?"'),
    f"{CHORD}.bars[0]": ('["U1-U2"]', '["?"]'),
    "deck.panel_points": ('panel_points = ["L0", "L1", "L2", "L3"]', 'panel_points = "?"'),
}


@pytest.mark.parametrize("place", OPEN)
def test_an_open_question_where_every_answer_needs_one(tmp_path: Path, place: str) -> None:
    path = written(tmp_path, changed(BY_JOINTS, OPEN[place]))
    assert_refused(movload("draw", path), f'{place}: still holds "?" and is needed here', place=path)


UNITS = {
    "a length in kN": ("[3.1, 2.2]", '["3.1 kN", 2.2]', 'joints.U1[0]: "3.1 kN" is a force; a length is asked for'),
    "a force in m": ("tension = 200", 'tension = "200 m"', 'tension: "200 m" is a length; a force is asked for'),
    "an area in mm": ("area = 2000", 'area = "2000 mm"', 'area: "2000 mm" is a length; an area is asked for, e.g. "'),
    "a deck in kN": ("deck = 4.0", 'deck = "4 kN"', 'permanent.deck: "4 kN" is a force; a load per length is asked'),
    "a share in kN": ("truss_share = 0.6", 'truss_share = "6 kN"', '"6 kN" is a force; a fraction is asked for'),
    "no unit": (
        "tension = 200",
        'tension = "200"',
        '"200" has no unit; a force is asked for, e.g. "62 kN" or "18 kip"',
    ),
    "the file's in kN": ('length = "m"', 'length = "kN"', 'units.length: "kN" is a force; a length is asked for'),
    "the file's in ton": ('force = "kN"', 'force = "ton"', 'units.force: "ton": "ton" can mean three weights'),
    "the file's, none": (
        'section = "mm"',
        'section = ""',
        'units.section: text that is not empty is asked for, got ""',
    ),
    "case": ("tension = 200", 'tension = "200 kn"', 'unit "kn" is not known for a force (nearest: "kN")'),
}


@pytest.mark.parametrize(("old", "new", "message"), UNITS.values(), ids=UNITS)
def test_a_unit_of_another_kind(tmp_path: Path, old: str, new: str, message: str) -> None:
    path = written(tmp_path, changed(BY_JOINTS, (old, new)))
    assert_refused(movload("draw", path), message, place=path)


KINDS = {
    "title, a number": ('title = "Alder footpath"', "title = 3", "title: text in quotes is asked for, got 3"),
    "title, empty": ('"Alder footpath"', '""', 'title: text that is not empty is asked for, got ""'),
    "title, blank": ('"Alder footpath"', '"  "', 'title: may not be empty, got "  "'),
    "title, two lines": ('"Alder footpath"', '"a\\nb"', 'must be one line without control characters, got "a\\nb"'),
    "title, an escape": ('"Alder footpath"', '"\\u001b[31m"', "must be one line without control characters"),
    "title, missing": ('title = "Alder footpath"', "", "title: is missing"),
    "joints, text": ("U1 = [3.1, 2.2]", 'U1 = "here"', 'joints.U1: a list is asked for, got "here"'),
    "joints, one": ("U1 = [3.1, 2.2]", "U1 = [3.1]", "joints.U1[1]: is missing"),
    "joints, three": ("U1 = [3.1, 2.2]", "U1 = [3.1, 2.2, 0]", "joints.U1: a list of 2 is asked for, got [3.1, 2"),
    "joints, dotted": ("U1 = [3.1, 2.2]", "U.1 = [3.1, 2.2]", "joints.U: a list is asked for, got the table"),
    "joints, two lines": ("U1 = [3.1", '"U\\n1" = [3.1', 'joints."U\\n1": must be one line without control characters'),
    "bars, text": ('["U1-U2"]', '"U1-U2"', f'{CHORD}.bars: a list is asked for, got "U1-U2"'),
    "bars, numbers": ('["U1-U2"]', "[1]", f"{CHORD}.bars[0]: text in quotes is asked for, got 1"),
    "bars, empty": ('["U1-U2"]', '[""]', f"{CHORD}.bars[0]: text that is not empty is asked for"),
    "group, a list": ('[members."top chord"]', '[[members."top chord"]]', f"{CHORD}: a table of keys is asked for"),
    "group, two lines": ('[members."top chord"]', '[members."a\\nb"]', 'members."a\\nb": must be one line'),
    "permits, a number": ("{ tension = 200, compression = 150 }", "200", f"{CHORD}.permits: a table of keys is asked"),
    "bearing, a list": ("{ slides = 0 }", "[0]", 'supports.L3: a support is "pinned" or { slides = degrees }, got [0]'),
    "bearing, a number": ("{ slides = 0 }", "0", 'supports.L3: a support is "pinned" or { slides = degrees }, got 0'),
    "bearing, both": ("slides = 0", "slides = 0, pinned = true", "a support is either pinned = true or slides"),
    "bearing, neither": ("slides = 0", "settlement = 0", "a support is either pinned = true or slides = (degrees)"),
    "bearing, yes": ("slides = 0", 'pinned = "yes"', 'supports.L3.pinned: true or false is asked for, got "yes"'),
    "slides, true": ("slides = 0", "slides = true", "supports.L3.slides: a number is asked for, got true"),
    "slides, text": ("slides = 0", 'slides = "0"', 'supports.L3.slides: a number is asked for, got "0"'),
    "slides, nan": ("slides = 0", "slides = nan", "support L3: slides must be a finite number, got nan"),
    "slides, huge": ("slides = 0", f"slides = {HUGE}", "supports.L3.slides: a number is asked for, got 1000"),
    "units, text": ('[units]\nlength = "m"\nforce = "kN"\nsection = "mm"', 'units = "SI"', "units: a table of keys"),
    "units, a number": ('length = "m"', "length = 1", "units.length: text in quotes is asked for, got 1"),
    "deck, text": ('"L1", "L2", "L3"]', '"L1", 2]', "deck.panel_points[2]: text in quotes is asked for, got 2"),
    "layout, a list": ("[joints]", "[[layout]]\n[joints]", "layout: a table of keys is asked for"),
    "key, long": ("[deck]", f"{'k' * 5000} = 1\n[deck]", f'key "{"k" * 57}..." is not known'),
    "key, two lines": ("[deck]", '"a\\nb" = 1\n[deck]', 'key "a\\nb" is not known'),
    "lists in lists": ("deck = 4.0", f"deck = {'[' * 150}{']' * 150}", "permanent.deck: a number or a string"),
}  # fmt: skip


@pytest.mark.parametrize(("old", "new", "message"), KINDS.values(), ids=KINDS)
def test_a_value_of_another_kind(tmp_path: Path, old: str, new: str, message: str) -> None:
    path = written(tmp_path, changed(BY_JOINTS, (old, new)))
    assert_refused(movload("rate", path, "h5", "--csv", tmp_path / "new.csv"), message, place=path)
    assert names_in(tmp_path) == {path.name}


SYNTAX = {
    "bracket": ("[deck]", "[deck", "at line 48, column 6): [deck"),
    "value": ("deck = 4.0", "deck =", "at line 53, column 7): deck ="),
    "quote": ('title = "Alder footpath"', 'title = "Alder footpath', 'at line 1, column 24): title = "Alder footpath'),
    "word": ("slides = 0", "slides = zero", "at line 18, column 17): L3 = { slides = zero }"),
    "list": ("impact = 0.3", "impact = [0.3", "the end of the file"),
    "digits": ("deck = 4.0", f"deck = 1{'0' * 5000}", "holds a value that cannot be read"),
    "deep lists": ("deck = 4.0", f"deck = {'[' * 5000}{']' * 5000}", "nested too deeply"),
    "deep tables": ("[deck]", f"[{'a.' * 3000}a]\n[deck]", "tables are nested too deeply"),
    "control": ("deck = 4.0", "deck = \x01", "at line 53"),
}


@pytest.mark.parametrize(("old", "new", "message"), SYNTAX.values(), ids=SYNTAX)
def test_what_is_not_toml_names_its_line(tmp_path: Path, old: str, new: str, message: str) -> None:
    path = written(tmp_path, changed(BY_JOINTS, (old, new)))
    assert_refused(movload("draw", path), message, place=path)
    path = written(tmp_path, changed(CART, ("axles = [", "axles = [[")), "cart.toml")
    assert_refused(movload("vehicles", path), "is not TOML", "at line", place=path)
