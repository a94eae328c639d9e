"""``movload rate`` by each factor set and rule of impact, and rows taken apart. Numbers by hand, as in across.py."""

from __future__ import annotations

import math
import re
from typing import TYPE_CHECKING, Any, Final

import pytest
from cli.across import ACROSS, FORTH, HAND, ROOM, SPACING, row_in, share
from cli_run import CART, EXAMPLES, KETTLE_FORD, Done, movload, written
from numpy.testing import assert_allclose

from movload.files.schema.published import RatingsDocument

if TYPE_CHECKING:
    from pathlib import Path

METHODS: Final = ("permitted", "lrfr", "load_factor", "allowable_stress", "en")


@pytest.fixture
def asked(tmp_path: Path) -> list[Any]:
    """Return the command's words."""
    return ["rate", written(tmp_path, ACROSS), written(tmp_path, CART, "cart.toml")]


LEVELS = {
    "permitted": {"permitted"}, "lrfr": {"legal"}, "load_factor": {"inventory", "operating"},
    "allowable_stress": {"inventory", "operating"},
}  # fmt: skip


def test_what_no_rule_covers_says_why_when_it_is_asked_about() -> None:
    """Planks of timber by LRFR: the row is refused with the words of its note."""
    done = movload("rate", EXAMPLES / "withy_island.toml", "h5", "--method", "lrfr", "--explain", "planks moment")
    assert done.code == 1
    assert "has no strength, so it is not rated; not rated in moment" in done.err
    assert "timber by AASHTO LRFD is not covered" in done.err


@pytest.mark.parametrize("bridge", ["across", "kettle ford"])
@pytest.mark.parametrize("method", METHODS)
def test_every_shipped_method(asked: list[Any], bridge: str, method: str) -> None:
    """Each row's RF follows from its own numbers, whatever the margins; the floor is rated with the trusses."""
    words = asked if bridge == "across" else ["rate", KETTLE_FORD, "combine"]
    done = movload(*words, "--method", method, "--json", "--explain", "U1-L1")
    read = done.json()
    RatingsDocument.model_validate(read)
    levels = {row["level"] for row in read["rows"]}
    assert levels == LEVELS.get(method, levels)
    assert len(levels) in {1, 2}
    assert {row["part"].split()[0] for row in read["rows"]} >= {"left", "stringer", "floorbeam"}
    laced = (bridge, method) == ("kettle ford", "en")  # EN 1993-1-1 6.4 is not covered, and said so
    assert bool(read["coverage"]["none"]) == laced
    assert any(note["code"] == "not-covered" for note in read["notes"]) == laced
    for row in read["rows"]:
        if row["live"]:
            factor = max(row["strength"] - row["permanent_used"], 0.0) / (row["live_factor"] * abs(row["live"]))
            assert_allclose(row["factor"], factor, rtol=HAND)
        else:
            assert row["factor"] is None
    from_memory = [note for note in read["notes"] if note["code"] == "factors-from-memory"]
    assert len(from_memory) == (method != "permitted")
    (taken_apart,) = read["explanations"]
    assert taken_apart["factor"] == min(row["factor"] for row in read["rows"] if row["row"] == "U1-L1" and row["live"])
    text = movload(*words, "--method", method)
    assert text.code == 0
    assert read["statement"] in " ".join(text.out.split())
    assert all("from memory" in " ".join(text.out.split()) for _ in from_memory)


def test_lrfr_by_hand(asked: list[Any]) -> None:
    """U1-L1 in tension at the legal level, by the set's own factors (from memory): 100 trucks a day give 1.30.

    phi 0.95; phi_c 0.95 (fair) x phi_s 0.90 (riveted) = 0.855, above 0.85. Permanent 1.25 components and 1.50 others.
    """
    read = movload(*asked, "--method", "lrfr", "--json", "--explain", "U1-L1").json()
    row = row_in(read, "left truss", "U1-L1", "tension")
    assert_allclose(row["strength"], 0.855 * 0.95 * 165e3, rtol=HAND)
    (one,) = read["explanations"]
    by_class = {term["title"]: term for term in one["permanent"]}
    assert {title: term["margin"] for title, term in by_class.items()} == {
        "components": 1.25, "surfacing": 1.5, "other": 1.5,
    }  # fmt: skip
    # L1 brings half of two panels, 3.2 m: of 5 m of gravel at 0.4 kN/m2 half reaches either truss, of the post too
    assert_allclose(by_class["surfacing"]["effect"], 0.4e3 * 5.0 * 3.2 / 2, rtol=HAND)
    assert_allclose(by_class["other"]["effect"], 0.8e3 / 2, rtol=HAND)
    assert row["live_factor"] == 1.3
    live = FORTH * (share(ROOM) + share(ROOM - 3.1)) * 1.3
    used = sum(term["effect"] * term["margin"] for term in by_class.values())
    assert_allclose(row["factor"], (row["strength"] - used) / (1.3 * live), rtol=HAND)


@pytest.mark.parametrize("word", ["LRFR", "Load Factor", "allowable-stress", " en "])
def test_a_method_in_another_spelling(asked: list[Any], word: str) -> None:
    name = word.strip().casefold().replace(" ", "_").replace("-", "_")
    assert movload(*asked, "--method", word, "--json").out == movload(*asked, "--method", name, "--json").out


OWN_SET = """\
title = "Alder rules"
edition = "first, invented"
statement = "Our own."
[sources]
"all" = "own choice, invented"
[[levels]]
title = "plain"
live = 2.0
[levels.permanent]
components = [1.0, 1.0]
surfacing = [1.0, 1.0]
"removable surfacing" = [1.0, 0.0]
other = [1.0, 1.0]
settlement = [1.0, 1.0]
[levels.resistance]
tension = 1.0
compression = 1.0
moment = 1.0
hogging = 1.0
shear = 1.0
"""


def test_a_method_of_ones_own(asked: list[Any], tmp_path: Path) -> None:
    own = written(tmp_path, OWN_SET, "own.toml")
    read = movload(*asked, "--method", own, "--at", "left kerb", "--json").json()
    assert (read["method"], {row["level"] for row in read["rows"]}) == ("Alder rules", {"plain"})
    row = row_in(read, "left truss", "U1-L1", "tension")
    assert (row["strength"], row["live_factor"]) == (165e3, 2.0)


def feet(metres: float) -> float:
    """Return metres in feet."""
    return metres / 0.3048


RULES = {
    "by loaded length": 0.3,  # 50/(31.5 + 125) would be more
    "railway": 0.01 * (40 - 3 * feet(9.6) ** 2 / 1600 + 100 / feet(SPACING)),
    "by riding surface": 0.2,  # minor, on others than design loads
    "0.45": 0.45,
    "45 %": 0.45,
}


@pytest.mark.parametrize("rule", RULES)
def test_another_impact_than_the_files(asked: list[Any], rule: str) -> None:
    """A chord feels loads on the whole span of 9.6 m; timber feels no impact by any rule."""
    read = movload(*asked, "--method", "lrfr", f"--impact={rule}", "--json").json()
    row = row_in(read, "left truss", "L1-L2", "tension")
    assert_allclose(row["impact"], RULES[rule], rtol=1e-14)
    assert_allclose(row["placement"]["impact"], [RULES[rule]] * 6, rtol=1e-14)
    assert {row["impact"] for row in read["rows"] if row["part"] == "planks"} == {0.0}


def test_impact_by_loaded_length_of_a_long_line(asked: list[Any]) -> None:
    """The middle bottom chord of Kettle Ford feels loads on all 25.69 m, 84.3 ft: 50/(84.3 + 125), not 0.30."""
    read = movload("rate", KETTLE_FORD, asked[2], "--impact", "by loaded length", "--json").json()
    assert_allclose(row_in(read, "left truss", "L2-L3", "tension")["impact"], 50 / (feet(25.69) + 125), rtol=1e-13)
    out = movload("rate", KETTLE_FORD, asked[2], "--impact", "by loaded length").out
    assert "Impact by loaded length; none on timber." in out


def explained(done: Done, subject: str) -> tuple[list[list[float]], str]:
    """Return the axle lines of a row taken apart, without their text, and its last line."""
    lines = done.out.splitlines()
    start = next(number for number, line in enumerate(lines) if line.startswith(f"{subject} under Alder hay cart: "))
    stop = next(number for number in range(start, len(lines)) if lines[number].startswith("RF = ("))
    table = [line.split() for line in lines[start + 4 : stop - 2]]
    return [[float(word) for word in line] for line in table], lines[stop]


PARTS = {
    # at z = 0 the wheels stand at +-0.95 and +-0.90: the stringers at +-0.8 and +-2.4 get 1.45/1.6 and 1.5/1.6 of each
    "U1-L1": ("U1-L1 tension", FORTH / 2),
    "L1-U1": ("U1-L1 tension", FORTH / 2),
    "left truss U1-L1": ("U1-L1 tension", FORTH / 2),
    "stringer S3 L1-L2 moment": ("stringer S3, L1-L2 moment", 45e3 * 0.5 * 1.45 / 1.6 * 3.3 / 4),
    "stringer S3, L1-L2 moment": ("stringer S3, L1-L2 moment", 45e3 * 0.5 * 1.45 / 1.6 * 3.3 / 4),
    # each truss carries half; of a wheel's 0.15/1.6 on S4, 1.6 m to the left of S3, that much less turns at S3
    "floorbeam L1 moment at S3": (
        "floorbeam L1, moment at S3",
        45e3 * (0.5 * 2.4 - 0.5 * 0.15) + 20e3 * 0.6 / 3.3 * (0.5 * 2.4 - 0.5 * 0.1),
    ),
    "floorbeam L1 shear at left truss": ("floorbeam L1, shear at left truss", FORTH / 2),
    "planks moment": ("planks, moment", 45e3 * 0.5 * 0.7 * (1.6 / 4 - 0.2 / 8) / 1.3),  # timber: no impact
}


@pytest.mark.parametrize("key", PARTS)
def test_a_row_taken_apart(asked: list[Any], key: str) -> None:
    """Its axles add up to the live effect worked by hand, in the text to the digits shown and in JSON to round-off."""
    subject, live = PARTS[key]
    words = (*asked, "--at", "0 m", "--explain", key)
    axles, equation = explained(movload(*words), subject)
    assert len(axles) >= 1
    assert_allclose(sum(axle[-1] for axle in axles), live * 1.3e-3, atol=0.0151)  # three terms, each to 0.01
    said = re.search(r"live ([\d.]+) kN", equation)
    assert said
    assert_allclose(float(said[1]), live * 1.3e-3, atol=0.0051)
    read = movload(*words, "--json").json()
    (one,) = read["explanations"]
    assert_allclose(one["live"], live * 1.3, rtol=HAND)
    assert one["factor"] == min(row["factor"] or math.inf for row in read["rows"] if _named(row) == _named(one))


def _named(one: dict[str, Any]) -> tuple[str, str]:
    """Return the name of a row."""
    return one["part"], one["row"]


def test_a_name_that_parts_share_means_the_worst_of_them(asked: list[Any]) -> None:
    """Against the right kerb the right truss is worse off, and the stringers on that side."""
    words = (*asked, "--at", "right kerb", "--json")
    asked_for = {"U1-L1": "right truss", "left truss U1-L1": "left truss", "L1-L2 moment": "stringer S1"}
    read = movload(*words, *(f"--explain={key}" for key in asked_for)).json()
    assert [one["part"] for one in read["explanations"]] == list(asked_for.values())
    for one in read["explanations"]:
        same = [row["factor"] or math.inf for row in read["rows"] if row["row"] == one["row"]]
        assert (one["factor"] == min(same)) is (one["part"] != "left truss")
    either = movload(*asked, "--explain", "either truss U1-L1").out
    assert either == movload(*asked, "--explain", "U1-L1").out


def test_several_rows_at_once_and_the_worst_crossing_of_each(asked: list[Any]) -> None:
    words = (*asked, "--at", "0 m", "--at", "left kerb", "--explain", "U1-L1", "--explain", "planks shear", "--json")
    first, second = movload(*words).json()["explanations"]
    assert (first["row"], first["crossing_number"], second["part"]) == ("U1-L1", 1, "planks")
