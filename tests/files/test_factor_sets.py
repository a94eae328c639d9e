"""Factor sets by name, in any spelling, and from a file of one's own, with every way in which one can be wrong."""

from __future__ import annotations

import math
import re
from typing import TYPE_CHECKING

import pytest
from cli_run import ROOT, written

from movload.errors import InputError, UnknownNameError
from movload.files.factor_sets import factor_set_from, factor_set_names, read_factor_set
from movload.rating.factor_sets import PERMITTED, FactorSet
from movload.statics.permanent import PERMANENT_CLASSES

if TYPE_CHECKING:
    from pathlib import Path

FOLDER = ROOT / "movload" / "data" / "factor_sets"
SHIPPED = [name for name in factor_set_names() if name != "permitted"]

OWN = """\
title = "Alder valley rules"
edition = "invented"
statement = "Rules of the Alder valley, invented."
multiple_presence = [1.1, 0.9]
presence_by_kind = { farm = [1.0] }
condition = { sound = 1.0, worn = "9/10" }
measured_gain = 0.03
system = { "twin truss" = 0.95 }
impact = "by riding surface"
impact_values = { design = 0.33, smooth = 0.1, minor = 0.2, severe = 0.3 }
crawl_speed = "10 km/h"
crawl_kinds = ["farm"]
closure = "3 t"

[sources]
"live factors" = "Alder valley sheet 4, read"
"multiple presence" = "a letter, from memory"
"relief" = "own choice, no source"

[[levels]]
title = "hay time"
kinds = ["farm", "routine", "crowd"]
live_by_traffic = [[0, 1.2], [100, 1.6]]
live_by_kind = { farm = 1.1 }
permanent = { components = [1.2, 0.9], surfacing = [1.4, 0.0], other = [1.2, 1.0], settlement = [1.0, 1.0] }
resistance = { tension = 0.9, compression = "1/1.25", moment = 1.0, hogging = 1.0, shear = 1.0 }
condition_factors = true
posting = "none"

[[levels]]
title = "all year"
live = 2
permanent = { components = [1.2, 0.9], surfacing = [1.4, 0.0], other = [1.2, 1.0], settlement = [1.0, 1.0] }
resistance = { tension = 1.0, compression = 1.0, moment = 1.0, hogging = 1.0, shear = 1.0 }
"""


ONES = dict.fromkeys(("tension", "compression", "moment", "hogging", "shear"), 1.0)


def own(old: str = "", new: str = "") -> FactorSet:
    """Return the set in OWN, one piece of it replaced."""
    assert old in OWN
    return factor_set_from(OWN.replace(old, new, 1) if old else OWN, "own.toml")


def test_the_shipped_sets_are_the_folder_and_the_permitted_forces() -> None:
    assert factor_set_names() == ["permitted", "allowable_stress", "en", "load_factor", "lrfr"]
    assert sorted(path.stem for path in FOLDER.glob("*.toml")) == SHIPPED


@pytest.mark.parametrize("name", factor_set_names())
def test_every_set_is_found_by_its_name_in_any_spelling(name: str) -> None:
    title = read_factor_set(name).title
    assert read_factor_set(name).name == name
    for spelled in (name.upper(), name.replace("_", " "), name.replace("_", "-"), f" {name} ", name.replace("_", "")):
        assert read_factor_set(spelled).title == title


@pytest.mark.parametrize("spelled", ["permitted", "Permitted", " PERMITTED "])
def test_permitted_forces_are_no_file(spelled: str) -> None:
    assert read_factor_set(spelled) is PERMITTED


@pytest.mark.parametrize("name", SHIPPED)
def test_a_shipped_file_read_by_its_path_is_the_same_set(name: str) -> None:
    by_path = read_factor_set(FOLDER / f"{name}.toml")
    assert by_path.name == str(FOLDER / f"{name}.toml")
    assert by_path.levels == read_factor_set(name).levels


@pytest.mark.parametrize(
    ("name", "message"),
    [
        ("lrfd", r'^factor set "lrfd" is not known and is no \.toml file; known: permitted, .*\(nearest: "lrfr"\)$'),
        ("permited", r'\(nearest: "permitted"\)$'),
        ("", r'^factor set "" is not known'),
        ("lrfr.toml", r'^lrfr\.toml: no such file \(nearest: "lrfr"\)$'),
        ("no/lrfr", r'^no/lrfr: no such file \(nearest: "lrfr"\)$'),
    ],
)
def test_an_unknown_set_and_the_nearest(name: str, message: str) -> None:
    with pytest.raises(UnknownNameError, match=message):
        read_factor_set(name)


def test_a_set_of_ones_own_holds_what_its_file_says(tmp_path: Path) -> None:
    path = written(tmp_path, OWN, "own.toml")
    method = read_factor_set(str(path))
    assert (method.title, method.source, method.name) == ("Alder valley rules", "invented", str(path))
    assert method.statement == "Rules of the Alder valley, invented."
    assert method.multiple_presence == (1.1, 0.9)
    assert method.presence_by_kind == {"farm": (1.0,)}
    assert method.condition == {"sound": 1.0, "worn": 0.9}
    assert (method.measured_gain, method.system) == (0.03, {"twin truss": 0.95})
    assert (method.impact, method.impact_values["severe"]) == ("by riding surface", 0.3)
    assert method.crawl_speed == pytest.approx(10 / 3.6, rel=1e-15)  # one division
    assert method.crawl_kinds == ("farm",)
    assert method.closure == pytest.approx(3000 * 9.80665, rel=1e-15)  # one product
    assert method.from_memory == ("multiple presence",)


def test_levels_of_ones_own_hold_what_their_tables_say() -> None:
    hay, year = own().levels
    assert (hay.title, hay.kinds, hay.posting) == ("hay time", ("farm", "routine", "crowd"), "")
    assert (hay.by_traffic, hay.by_kind) == (((0.0, 1.2), (100.0, 1.6)), {"farm": 1.1})
    assert (hay.resistance, hay.condition_factors) == (ONES | {"tension": 0.9, "compression": 0.8}, True)
    assert hay.permanent_margins(PERMANENT_CLASSES).tolist() == [
        [1.2, 0.9],
        [1.4, 0.0],
        [1.4, 0.0],
        [1.2, 1.0],
        [1.0, 1.0],
    ]
    assert (year.live, year.kinds, year.posting, year.needs_traffic) == (2.0, (), "weight x RF", False)
    assert (year.resistance, year.condition_factors) == (ONES, False)


def test_keys_that_may_be_left_out_leave_nothing_behind() -> None:
    start = OWN.index('[[levels]]\ntitle = "all year"')
    head = 'title = "bare"\nedition = "invented"\nstatement = "Bare."\nsources = {}\n'
    bare = factor_set_from(head + OWN[start:], "bare.toml")
    assert (bare.multiple_presence, bare.presence_by_kind, bare.impact, bare.impact_values) == ((1.0,), {}, "", {})
    assert (bare.condition, bare.system, bare.measured_gain) == ({}, {}, 0.0)
    assert (bare.crawl_speed, bare.crawl_kinds, bare.closure, bare.from_memory) == (0.0, (), 0.0, ())


@pytest.mark.parametrize(
    ("old", "new", "message"),
    [
        ("measured_gain", "mesured_gain", 'key "mesured_gain" is not known (nearest: "measured_gain")'),
        ("posting =", "postng =", 'levels[0]: key "postng" is not known (nearest: "posting")'),
        ("surfacing =", "surfaceing =", ('levels[0].permanent: "surfaceing" is not one of components, surfacing, '
         'removable surfacing, other, settlement (nearest: "surfacing")')),
        ("{ tension", "{ tensile", ('levels[0].resistance: "tensile" is not one of tension, compression, moment, '
         'hogging, shear, fracture (nearest: "tension")')),
        ('"crowd"]', '"crowds"]', 'levels[0].kinds: "crowds" is not one of routine, '),
        ("{ farm = 1.1 }", "{ trail = 1.1 }", 'levels[0].live_by_kind: "trail" is not one of farm, routine, crowd'),
        ('= ["farm"]', '= ["frm"]', 'crawl_kinds: "frm" is not one of '),
        ("{ farm = [1.0] }", "{ frm = [1.0] }", 'presence_by_kind: "frm" is not one of '),
        ("minor =", "medium =", 'impact_values: "medium" is not one of '),
        ('"by riding surface"', '"by riding surfaces"', ('impact: "by riding surfaces" is not one of by riding '
         'surface, by loaded length, railway (nearest: "by riding surface")')),
        ('"none"', '"curve"', 'levels[0].posting: "curve" is not one of weight x RF, legal curve, none'),
    ],
)  # fmt: skip
def test_an_unknown_name_says_its_place_and_the_nearest(old: str, new: str, message: str) -> None:
    with pytest.raises(UnknownNameError, match="^own.toml: " + re.escape(message)):
        own(old, new)


@pytest.mark.parametrize(
    ("typed", "message"),
    [
        ("-1.2", "a factor is 0 to 10, got -1.2"),
        ("nan", "a factor is 0 to 10, got nan"),
        ("inf", "a factor is 0 to 10, got inf"),
        ("120", "a factor is 0 to 10, got 120"),
        ('"1/0"', 'a factor is 0 to 10, got "1/0"'),
        ("0", "must be above 0, got 0"),
        ('"0/2"', "must be above 0, got 0"),
        ("true", 'a number or a quotient like "1/2.12" is asked for, got true'),
        ('"two"', 'a number or a quotient like "1/2.12" is asked for, got "two"'),
        ('"1/2/3"', 'a number or a quotient like "1/2.12" is asked for, got "1/2/3"'),
        ('"-1/2"', 'a number or a quotient like "1/2.12" is asked for, got "-1/2"'),
        ('"?"', 'still holds "?" and is needed here'),
    ],
)
@pytest.mark.parametrize(
    ("old", "key", "place"),
    [
        ("live = 2", "live = {}", "levels[1].live"),
        ("[1.1, 0.9]", "[1.1, {}]", "multiple_presence[1]"),
        ("{ farm = [1.0] }", "{{ farm = [{}] }}", "presence_by_kind.farm[0]"),
        ("{ farm = 1.1 }", "{{ farm = {} }}", "levels[0].live_by_kind.farm"),
        ("[100, 1.6]", "[100, {}]", "levels[0].live_by_traffic[1][1]"),
        ("{ tension = 0.9", "{{ tension = {}", "levels[0].resistance.tension"),
        ("sound = 1.0", "sound = {}", "condition.sound"),
        ('"twin truss" = 0.95', '"twin truss" = {}', 'system."twin truss"'),
    ],
)
def test_what_can_be_no_factor_is_refused_with_its_place(
    old: str, key: str, place: str, typed: str, message: str
) -> None:
    with pytest.raises(InputError, match=f"^{re.escape(f'own.toml: {place}: {message}')}$"):
        own(old, key.format(typed))


@pytest.mark.parametrize("typed", ["-0.1", "nan", "11"])
@pytest.mark.parametrize(
    ("old", "key", "place"),
    [
        ("components = [1.2, 0.9]", "components = [1.2, {}]", "levels[0].permanent.components[1]"),
        ("measured_gain = 0.03", "measured_gain = {}", "measured_gain"),
        ("smooth = 0.1", "smooth = {}", "impact_values.smooth"),
    ],
)
def test_what_may_be_zero_may_not_be_less(old: str, key: str, place: str, typed: str) -> None:
    with pytest.raises(InputError, match=f"^own.toml: {re.escape(place)}: a factor is 0 to 10, got {typed}$"):
        own(old, key.format(typed))
    own(old, key.format("0"))


PERMANENT = "{ components = [1.2, 0.9], surfacing = [1.4, 0.0], other = [1.2, 1.0], settlement = [1.0, 1.0] }"


@pytest.mark.parametrize(
    ("old", "new", "message"),
    [
        ('edition = "invented"\n', "", "edition: is missing"),
        ('statement = "Rules of the Alder valley, invented."\n', "", "statement: is missing"),
        (f"live = 2\npermanent = {PERMANENT}", "live = 2", "levels[1].permanent: is missing"),
        (", settlement = [1.0, 1.0]", "", "levels[0].permanent: says nothing of settlement"),
        ("[1.2, 0.9]", "[0.9, 1.2]", ("levels[0].permanent.components: [pushing, relieving]: relief may not count more "
         "than load, got [0.9, 1.2]")),
        ("[1.2, 0.9]", "[1.2]", "levels[0].permanent.components[1]: is missing"),
        ("[1.2, 0.9]", "1.2", "levels[0].permanent.components: a list is asked for, got 1.2"),
        ("live = 2\n", "", "levels[1].live: is missing; or live_by_traffic"),
        ("live = 2\n", "live = 2\nlive_by_traffic = [[1, 2]]\n", "levels[1].live: live_by_traffic says it already"),
        ("[100, 1.6]", "[0, 1.6]", "levels[0].live_by_traffic: trucks a day must increase, got 0, 0"),
        ("[0, 1.2]", "[200, 1.2]", "levels[0].live_by_traffic: trucks a day must increase, got 200, 100"),
        ("[0, 1.2]", "[-1, 1.2]", "levels[0].live_by_traffic[0][0]: trucks a day, 0 or more, are asked for, got -1"),
        ("[0, 1.2]", "[nan, 1.2]", "levels[0].live_by_traffic[0][0]: trucks a day, 0 or more, are asked for, got nan"),
        ("[0, 1.2]", '["0", 1.2]', 'levels[0].live_by_traffic[0][0]: trucks a day, 0 or more, are asked for, got "0"'),
        ('"all year"', '"hay time"', 'levels[1].title: two levels are called "hay time"'),
        ('{ sound = 1.0, worn = "9/10" }', "{}", "condition: is missing and needed by levels[0].condition_factors"),
        ('{ "twin truss" = 0.95 }', "{}", "system: is missing and needed by levels[0].condition_factors"),
        (", severe = 0.3", "", "impact_values: says nothing of severe"),
        ('crawl_speed = "10 km/h"\n', "", "crawl_speed: is missing; crawl_speed and crawl_kinds go together"),
        ('crawl_kinds = ["farm"]\n', "", "crawl_kinds: is missing; crawl_speed and crawl_kinds go together"),
        ('"10 km/h"', "10", 'crawl_speed: a speed with its unit, e.g. "10 mph", is asked for, got 10'),
        ('"10 km/h"', '"10"', 'crawl_speed: "10" has no unit; a speed is asked for'),
        ('"10 km/h"', '"-10 mph"', 'crawl_speed: must be above 0, got "-10 mph"'),
        ('"10 km/h"', '"10 kN"', 'crawl_speed: "10 kN" is a force; a speed is asked for'),
        ('"3 t"', '"3 ton"', 'closure: "3 ton": "ton" can mean three weights'),
        ('"3 t"', '"0 t"', 'closure: must be above 0, got "0 t"'),
        ("[1.1, 0.9]", "[]", "multiple_presence: the factor of one abreast, of two ... is asked for, got []"),
        ("{ farm = [1.0] }", "{ farm = [] }", "presence_by_kind.farm: the factor of one abreast, of two ... is asked"),
        ('"a letter, from memory"', '"a letter"', ('sources."multiple presence": must say "read", "from memory" or '
         '"own choice", got "a letter"')),
        ("condition_factors = true", 'condition_factors = "yes"', "levels[0].condition_factors: true or false is"),
    ],
)  # fmt: skip
def test_what_is_missing_or_contradicts_itself_is_refused(old: str, new: str, message: str) -> None:
    with pytest.raises(InputError, match="^own.toml: " + re.escape(message)):
        own(old, new)


def test_a_set_without_levels_is_none() -> None:
    head = OWN[: OWN.index("[[levels]]")].replace("[sources]", "levels = []\n[sources]")
    with pytest.raises(InputError, match=r"^own\.toml: levels: a set needs at least one level$"):
        factor_set_from(head, "own.toml")


@pytest.mark.parametrize("name", SHIPPED)
def test_every_shipped_file_opens_with_a_caution(name: str) -> None:
    opening = re.match(r"(?:#.*\n)+", (FOLDER / f"{name}.toml").read_text(encoding="utf-8"))
    assert opening is not None
    said = re.sub(r"\s*\n#\s*", " ", opening[0])
    assert re.search(r"Recalled values are marked; check them against the (edition|annex) in force", said)


@pytest.mark.parametrize("name", SHIPPED)
def test_every_shipped_set_is_a_whole_method(name: str) -> None:
    """Every level is finite and has both margins of every class, and every rule that asks for a value has it."""
    method = read_factor_set(name)
    assert method.strengths == ("reduced", "nominal")
    assert method.from_memory
    assert "from memory" in method.source
    for level in method.levels:
        assert set(level.by_class) == set(PERMANENT_CLASSES) - {"removable surfacing"}  # it follows surfacing
        assert set(level.resistance) == {"fracture", "tension", "compression", "moment", "hogging", "shear"}
        assert all(0 < phi <= 1 for phi in level.resistance.values())
        assert all(math.isfinite(level.live_margin(kind)) for kind in level.kinds)
        assert level.condition_factors == (name == "lrfr")
