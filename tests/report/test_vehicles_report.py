"""Vehicles in words: ranges of spacings in both units, and how far a source may be trusted."""

from __future__ import annotations

import csv
import io
import json

import pytest

from movload.report.table import rendered
from movload.report.vehicles_report import list_json, list_tables, one_csv, one_tables
from movload.traffic.loading import Case, Fill, Following, Loading
from movload.traffic.vehicle import Strip, Tail, Vehicle

FOOT = 0.3048  # m, exact (NIST SP 811, B.8, from memory)
TRAILER = Vehicle("trailer", [30e3, 80e3, 80e3], [4.5, (14 * FOOT, 30 * FOOT)], gauges=(1.8, 1.9, 1.9))  # type: ignore[arg-type]  # lists become arrays

SOURCES = {
    "invented": "invented",
    "Invented, but like one that was read": "invented",
    "a manual, 3rd ed.; from memory": "from memory",
    "From memory": "from memory",
    "weights read (an act of 1987); spacings from memory": "partly from memory",
    "axle loads from memory, gauges read": "partly from memory",
    "read at the weighbridge": "read",
    "a table, read": "read",
    "load spread over two tracks": "not said",
    "already weighed": "not said",
    "reads well": "not said",
    "from memoryless sources": "not said",
    "reinvented": "not said",
    "": "not said",
}


def trust(source: str) -> str:
    """Return the last cell of the list's only row."""
    loading = Loading.of(TRAILER, "farm", source=source)
    text = rendered(list_tables({"trailer": loading}), width=200, colour=False)
    row = next(line for line in text.splitlines() if line.startswith("trailer "))
    return row[row.index("190.0") + len("190.0") :].strip()


@pytest.mark.parametrize("source", SOURCES)
def test_how_far_a_source_may_be_trusted_goes_by_whole_words(source: str) -> None:
    assert trust(source) == SOURCES[source]


def test_a_range_is_told_from_least_to_greatest_in_both_units() -> None:
    shown = rendered(one_tables(Loading.of(TRAILER, "farm")), width=200, colour=False).splitlines()
    front, middle, last = shown[-3:]
    assert front.split()[-5:] == ["-", "1.80", "m", "(5.91", "ft)"]
    assert "4.50 m (14.76 ft)" in middle
    assert "4.27 to 9.14 m (14.00 to 30.00 ft)" in last


def test_csv_has_the_two_ends_of_every_spacing() -> None:
    heads, *rows = csv.reader(io.StringIO(one_csv(Loading.of(TRAILER, "farm"))))
    assert heads == ["axle", "load [kN]", "after [m]", "gauge [m]", "after_least [m]", "after_greatest [m]"]
    assert [row[2] for row in rows] == ["", "4.5", ""]
    assert [row[4:] for row in rows] == [["", ""], ["4.5", "4.5"], [str(14 * FOOT), str(30 * FOOT)]]


def test_json_keeps_the_pair() -> None:
    (row,) = json.loads(list_json({"trailer": Loading.of(TRAILER, "farm")}))["rows"]
    assert row["cases"][0]["spacings"] == [4.5, [14 * FOOT, 30 * FOOT]]


CREEPER = Vehicle("creeper", [], [], strips=(Strip(0.0, 3.0, 20e3, gauge=2.0), Strip(-1.5, 1.0, 4e3)))  # type: ignore[arg-type]
TRAIN = Vehicle("train", [200e3], [], tail=Tail(1.5, 80e3))  # type: ignore[arg-type]  # lists become arrays
WORDS = {
    "factor": (Case("a", TRAILER, factor=0.9), "All of it x 0.9."),
    "above": (Case("a", TRAILER, above=60.96), "Only for lengths above 60.96 m (200.00 ft)."),
    "continuous": (Case("a", TRAILER, continuous=True), "Only for trusses over more than two bearings."),
    "convoy": (
        Case("a", TRAILER, convoy=Following(3, 15.0)),
        "Up to 3 of it in a lane, 15.00 m (49.21 ft) or more from last axle to first.",
    ),
    "never more than one": (Case("a", TRAILER, convoy=Following(3, float("inf"))), "without end from last axle"),
    "relieving": (Case("a", TRAILER, relieving=0.0), "What relieves is left out."),
    "tolerance": (Case("a", TRAILER, relieving=0.95 / 1.05), "What relieves counts 90.48 %."),
    "strip": (
        Case("a", CREEPER),
        "Moving: 20.00 kN/m (1.37 kip/ft) over 3.00 m (9.84 ft), its front end at the front, gauge 2.00 m (6.56 ft)",
    ),
    "strip before": (Case("a", CREEPER), "over 1.00 m (3.28 ft), its front end 1.50 m (4.92 ft) before the front"),
    "tail": (
        Case("a", TRAIN),
        "Following without end: 80.00 kN/m (5.48 kip/ft), from 1.50 m (4.92 ft) behind the front axle on",
    ),
    "knife edge": (
        Case("a", None, (Fill(80e3, "knife edge", web_load=115e3),)),
        "Knife edge: 80.00 kN (17.98 kip), 115.00 kN (25.85 kip) for webs, shears and reactions, wherever adverse,",
    ),
    "area": (
        Case("a", None, (Fill(4e3, per_area=True, across="left half", impact=False),)),
        "Filling: 4.00 kN/m2 (0.08 kip/ft2), wherever adverse, on the left half, no impact on it",
    ),
    "density": (
        Case("a", None, (Fill(density="en crowd", across="full width"),)),
        "Filling: 5.00 kN/m2 (0.10 kip/ft2), less the longer it is (en crowd), wherever adverse, on the full width",
    ),
    "outside": (
        Case("a", TRAILER, (Fill(4e3, where="outside", clear=(1.0, 1.0)),)),
        "outside the vehicle wherever adverse, 1.00 m (3.28 ft) clear of it, in its lane",
    ),
    "unlike gaps": (
        Case("a", TRAILER, (Fill(4e3, where="outside", clear=(1.0, 2.0)),)),
        "1.00 m (3.28 ft) clear before and 2.00 m (6.56 ft) behind it",
    ),
    "at a stretch": (Case("a", None, (Fill(4e3, where="at", x=(1.0, 2.0)),)), "at x = 1.00 to 2.00 m (3.28 to 6.56"),
    "at a place": (Case("a", None, (Fill(4e3, "knife edge", "at", (2.0, 2.0)),)), "at x = 2.00 m (6.56 ft), in its"),
}  # fmt: skip


@pytest.mark.parametrize("name", WORDS)
def test_every_piece_is_said_in_words(name: str) -> None:
    case, words = WORDS[name]
    assert words in rendered(one_tables(Loading("a", "farm", (case,))), width=200, colour=False)


def test_cases_are_told_apart_and_notes_are_told() -> None:
    loading = Loading("two", "farm", (Case("full", TRAILER), Case("light", TRAILER, factor=0.4)), notes=("as weighed",))
    shown = rendered(one_tables(loading), width=200, colour=False)
    assert "Note: as weighed\n\nThe worst of 2 cases counts.\n\nCase full\n" in shown
    assert "Case light: all of it x 0.4\n" in shown


BY_RULE = {"bare": float("nan"), "said": 320e3}


def test_what_only_fills_weighs_nothing_unless_its_rule_says_so() -> None:
    lane = (Case("lane", None, (Fill(9e3),)),)
    bare, said = (Loading(name, "design", lane, source="read", weight=by_rule) for name, by_rule in BY_RULE.items())
    assert rendered(one_tables(bare), width=200, colour=False).startswith("bare (design)\n")
    assert rendered(one_tables(said), width=200, colour=False).startswith("said (design), 320.0 kN, ")
    listed = rendered(list_tables({"bare": bare, "said": said}), width=200, colour=False)
    assert [line.split()[-3:] for line in listed.splitlines() if "design" in line] == [
        ["0", "-", "read"],
        ["0", "320.0", "read"],
    ]


def test_json_keeps_what_fills_and_csv_has_axles_only() -> None:
    loading = Loading("all", "rail", (Case("train", TRAIN, (Fill(4e3),)), Case("crowd", None, (Fill(5e3),))))
    train, crowd = json.loads(list_json({"all": loading}))["rows"][0]["cases"]
    assert (train["tail"], train["fills"][0]["load"]) == ({"start": 1.5, "load": 80e3, "gauge": None}, 4e3)
    assert (crowd["loads"], crowd["tail"], crowd["fills"][0]["load"]) == ([], None, 5e3)
    assert len(one_csv(loading).splitlines()) == 2
