"""``movload rate``: answers, exit codes, the ratings document, CSV, what the answer covers and its cautions."""

from __future__ import annotations

import csv
import math
from typing import TYPE_CHECKING, Any

import pytest
from cli_run import BY_JOINTS, CART, KETTLE_FORD, assert_refused, changed, movload, numbers_in, without, written
from numpy.testing import assert_allclose

from movload.files.schema.published import RatingsDocument

if TYPE_CHECKING:
    from pathlib import Path

FIELDS = [
    "format", "title", "method", "statement", "units", "crossings", "coverage", "notes", "deflections", "uplifts",
    "cautions", "sources", "rows", "explanations",
]  # fmt: skip
CROSSING = ["title", "kind", "weight", "place", "source", "z", "speed", "most_abreast", "beside"]
DEFLECTION = ["part", "point", "crossing", "crossing_number", "down", "ratio", "limit"]
COVERAGE = ["full", "partly", "none", "not_rated"]
NOTE = ["code", "subject", "text", "source"]
ROW = [
    "crossing", "level", "part", "row", "sense", "factor", "strength", "permanent", "live", "impact", "safe_weight",
    "position", "heading", "axle", "station", "kind", "crossing_number", "abreast", "place", "speed",
    "as_new", "held", "permanent_use", "permanent_used",
    "live_factor", "held_factor", "stands_for", "placement",
]  # fmt: skip
HEADS = [
    "crossing", "level", "part", "row", "sense", "factor", "strength", "permanent", "live", "impact",
    "safe_weight [kN]", "position [m]", "heading", "axle", "station", "kind", "crossing_number", "abreast", "place",
    "speed [km/h]", "as_new", "held", "unit",
]  # fmt: skip
IN_UNIT = ("strength", "permanent", "live", "held")  # forces and moments share these columns; the last says which
GRAVITY = 9.80665  # m/s2, standard (NIST SP 811, B.8, from memory)


@pytest.fixture
def asked(tmp_path: Path) -> list[Any]:
    """Return the command's words."""
    return ["rate", written(tmp_path, BY_JOINTS), written(tmp_path, CART, "cart.toml")]


def test_the_document_has_these_fields(asked: list[Any]) -> None:
    rated = movload(*asked, "h5", "--json").json()
    assert list(rated) == FIELDS
    assert rated["format"] == "movload.ratings/1"
    assert rated["units"] == {"force": "N", "length": "m", "moment": "N m", "speed": "m/s"}
    assert all(list(one) == CROSSING for one in rated["crossings"])
    assert list(rated["coverage"]) == COVERAGE
    assert all(list(note) == NOTE for note in rated["notes"])
    assert all(list(one) == DEFLECTION for one in rated["deflections"])
    assert all(list(row) == ROW for row in rated["rows"])
    assert rated["sources"] == [str(asked[1])]
    assert (rated["uplifts"], rated["explanations"]) == ({}, [])
    assert RatingsDocument.model_validate(rated).model_dump() == rated


def test_the_document_of_every_kind_of_answer_is_valid(asked: list[Any], tmp_path: Path) -> None:
    overused = written(tmp_path, changed(BY_JOINTS, ("compression = 140", "compression = 0")), "overused.toml")
    gaps = written(
        tmp_path, changed(BY_JOINTS, ("{ tension = 90, compression = 60 }", "{ tension = 90 }")), "gaps.toml"
    )
    for bridge in (overused, gaps, KETTLE_FORD):
        RatingsDocument.model_validate(movload("rate", bridge, *asked[2:], "h5", "--json").json())


def test_a_hanger_by_hand(asked: list[Any]) -> None:
    """U1-L1 in tension: half the deck over 3.2 m, its share of chord and itself; the cart as in test_sweep.

    Permanent 4.0 x 0.5 x 3.2 + (1500 x 3.2 + 900 x 2.2 / 2) mm2 m x 7850 kg/m3 x g; live (45 + 20 x 0.6 / 3.3) x 0.6
    x 1.3; RF = (90 - permanent) / live; all in kN.
    """
    row = next(
        row for row in movload(*asked, "--json").json()["rows"] if (row["row"], row["sense"]) == ("U1-L1", "tension")
    )
    permanent = 4e3 * 0.5 * 3.2 + (1500e-6 * 3.2 + 900e-6 * 2.2 / 2) * 7850 * GRAVITY
    live = (45e3 + 20e3 * 0.6 / 3.3) * 0.6 * 1.3
    factor = (90e3 - permanent) / live
    expected = [factor, 90e3, permanent, live, 0.3, factor * 95e3]
    # rtol: round-off of a solve with a handful of unknowns
    assert_allclose([row[name] for name in ROW[5:11]], expected, rtol=1e-12)
    assert (row["heading"], row["axle"], row["station"]) == (1, 2, 1)
    assert row["placement"]["share"] == [0.6] * 3
    assert row["placement"]["impact"] == [0.3] * 3
    assert (row["placement"]["factor"], row["placement"]["z"]) == ([1.0] * 3, [None] * 3)
    assert row["placement"]["vehicle"] == [1] * 3
    assert_allclose(row["permanent_use"], permanent / 90e3, rtol=1e-12)
    assert_allclose(row["permanent_used"], permanent, rtol=1e-12)
    assert (row["kind"], row["crossing_number"], row["abreast"], row["live_factor"]) == ("axial", 0, 1, 1.0)
    assert (row["part"], row["stands_for"]) == ("truss", "truss")


def test_rows_are_the_worst_first_by_crossing(asked: list[Any]) -> None:
    rows = movload(*asked, "h5", "--json").json()["rows"]
    for title in ("Alder hay cart", "H5 maintenance vehicle"):
        factors = [math.inf if row["factor"] is None else row["factor"] for row in rows if row["crossing"] == title]
        assert len(factors) == 18
        assert factors == sorted(factors)


def test_csv_carries_units_and_the_numbers_of_the_json(asked: list[Any], tmp_path: Path) -> None:
    out = tmp_path / "out.csv"
    said = movload(*asked, "h5", "--json", "--csv", out).json()["rows"]
    with out.open(encoding="utf-8", newline="") as file:
        heads, *rows = csv.reader(file)
    assert heads == HEADS
    for texts, row in zip(rows, said, strict=True):
        for head, text in zip(heads, texts, strict=True):
            name, _, unit = head.partition(" ")
            value = "kN" if name == "unit" else row[name]
            if isinstance(value, float):
                # rtol: one division and one multiplication by the unit
                assert_allclose(float(text) * (1e3 if unit == "[kN]" or name in IN_UNIT else 1.0), value, rtol=1e-15)
            elif value is None:
                assert text in {"", "inf"}
            else:
                assert text == str(value)


def test_text_answers_sums_covers_and_warns(asked: list[Any]) -> None:
    out = " ".join(movload(*asked).out.split())
    for part in (
        "95.0 kN 2.19 adequate, for the parts rated U1-L1 tension",
        "the worst 8 of 9 rows (--all for every rating)",
        "U1-L1 tension under Alder hay cart: axle 2 on L1, 5.80 m →",
        "RF = (strength 90.00 - permanent (+6.85)) / live 37.94 kN = 2.19",
        "Covers: 9 of 9 members and beams rated in every sense they feel; floor, deck not rated.",
        "Note: One truss is rated with typed shares: 0.6 of a whole axle and 0.5 of the deck's weight reach it",
        "Note, Alder hay cart: axles and spacings: invented",
        "Impact 0.3 as typed.",
        "One vehicle on the bridge at a time.",
        "Caution: Bars are taken to pull and to push: rods that only pull (counters) are not modelled.",
        "Caution: An analysis aid until a qualified engineer adopts it; local codes and licensed practice decide.",
        "Caution: Not checked: connections, pins, bearings, foundations, fatigue, hidden section loss",
        "A safe weight holds for that vehicle's own axles in proportion: no sign weight follows from one vehicle.",
        "live deflection part at down of span limit",
        "Alder hay cart truss L",
        "Stop using the bridge at any sign of distress.",
    ):
        assert part in out
    every = movload(*asked, "--all").out
    assert "--all for every rating" not in every
    assert every.count("tension") + every.count("compression") > 18


def test_several_vehicles_get_one_line_each(asked: list[Any]) -> None:
    out = movload(*asked, "h5", "grain cart").out
    answers, deflected = out.split("live deflection")
    for title in ("Alder hay cart  ", "H5 maintenance vehicle  ", "Tractor and grain cart  "):
        assert (answers.count(title), deflected.count(title)) == (1, 1)
    assert "RF = (" not in out
    assert "not adequate" in out
    assert "Covers: 9 of 9" in out


def test_gate(asked: list[Any], tmp_path: Path) -> None:
    """0 when all is rated and enough, 3 when a rating is below 1 or a felt sense is not rated; without it 0."""
    gap = written(tmp_path, changed(BY_JOINTS, ("tension = 200, compression = 150", "tension = 200")), "gap.toml")
    for words, passes in ((asked, True), ([*asked, "grain cart"], False), (["rate", gap, asked[2]], False)):
        plain, gated = movload(*words), movload(*words, "--gate")
        assert (plain.code, gated.code) == (0, 0 if passes else 3)
        assert gated.out == plain.out
        assert gated.err == ""
        assert movload(*words, "--gate", "--json").code == gated.code


def test_a_span_that_lifts_a_bearing(asked: list[Any], tmp_path: Path) -> None:
    """L2-L3 overhangs L2: 200 kN on L3 pull at L0 with 200 x 0.6 x 1.3 x 3.2 / 6.4 kN less what permanent load holds.

    Deck 2 kN/m over 9.6 m, its middle 4.8 m from L0; the bars' own weight adds a little, so the pull is a little less.
    """
    text = changed(BY_JOINTS, ("L3 = { slides = 0 }", "L2 = { slides = 0 }"))
    for force in ("200, compression = 150", "180, compression = 40", "180, compression = 140", "90, compression = 60"):
        text = changed(text, (force, "5000, compression = 5000"))
    light = changed(text, *(("density = 7850", "density = 0"),) * 4)
    bridge = written(tmp_path, light, "overhang.toml")
    axle = "axles = [ { load = 200 } ]"
    cart = written(tmp_path, CART[: CART.index("axles")] + axle + "\n", "axle.toml")
    done = movload("rate", bridge, cart, "--gate")
    out = " ".join(done.out.split())
    assert done.code == 3
    assert "adequate only if L0 is held down" in out
    pulled = 200e3 * 0.6 * 1.3 * 3.2 / 6.4 - 2e3 * 9.6 * (6.4 - 4.8) / 6.4
    assert f"Uplift: L0 y is pulled up with {pulled / 1e3:.1f} kN" in out
    # rtol: round-off of a solve with a handful of unknowns
    assert movload("rate", bridge, cart, "--json").json()["uplifts"] == {"L0 y": pytest.approx(pulled, rel=1e-12)}
    assert movload("rate", bridge, asked[2], "--json").json()["uplifts"].keys() == {"L0 y"}
    held = written(tmp_path, changed(light, ("deck = 4.0", "deck = 400")), "held.toml")
    assert movload("rate", held, cart, "--json").json()["uplifts"] == {}


def test_a_vehicle_files_notes_and_one_way(asked: list[Any], tmp_path: Path) -> None:
    """The cart is not alike front and back: toward +x 20 kN stand 2.7 m off in the 3.3 m panel, toward -x in 3.1 m.

    The third axle is off the hanger's line both ways: 6.8 - 2.7 = 4.1 m is longer than either panel.
    """
    for heading, panel in (("+x", 3.3), ("-x", 3.1)):
        text = changed(CART, ("axles =", f'headings = ["{heading}"]\nnotes = ["its drawbar is fixed"]\naxles ='))
        cart = written(tmp_path, text, "oneway.toml")
        read = movload("rate", asked[1], cart, "--json").json()
        row = next(row for row in read["rows"] if (row["row"], row["sense"]) == ("U1-L1", "tension"))
        # rtol: round-off of a solve with a handful of unknowns
        assert_allclose(row["live"], (45e3 + 20e3 * (1 - 2.7 / panel)) * 0.6 * 1.3, rtol=1e-12)
        assert {row["heading"] for row in read["rows"]} <= {0, 1 if heading == "+x" else -1}
        assert [note["code"] for note in read["notes"][:2]] == ["shares-typed", "detail-allowance"]
        assert [(note["code"], note["text"]) for note in read["notes"][2:]] == [
            ("vehicle-source", "axles and spacings: invented"),
            ("vehicle", "its drawbar is fixed"),
            ("one-way", f"crosses toward {heading} only; not rated the other way."),
        ]
        assert "Note, Alder hay cart: its drawbar is fixed" in movload("rate", asked[1], cart).out


def test_what_is_not_rated_is_named(asked: list[Any], tmp_path: Path) -> None:
    gap = written(tmp_path, changed(BY_JOINTS, ("tension = 200, compression = 150", "tension = 200")), "gap.toml")
    out = " ".join(movload("rate", gap, asked[2]).out.split())
    assert "adequate only if" in out
    assert (
        "Covers: 8 of 9 members and beams rated in every sense they feel; 1 not rated (U1-U2); floor, deck not rated."
        in out
    )
    coverage = movload("rate", gap, asked[2], "--json").json()["coverage"]
    assert (len(coverage["full"]), coverage["none"], coverage["partly"]) == (8, ["U1-U2"], [])
    assert coverage["not_rated"] == ["floor", "deck"]


def test_an_allowance_instead_of_the_files(asked: list[Any]) -> None:
    plain = movload(*asked, "--impact", "0.5", "--json").json()["rows"]
    assert plain == movload(*asked, "--impact", "50 %", "--json").json()["rows"]
    assert {row["impact"] for row in plain} == {0.5}
    own = movload(*asked, "--json").json()["rows"]
    assert plain[0]["row"] == own[0]["row"]
    assert_allclose(plain[0]["factor"], own[0]["factor"] * 1.3 / 1.5, rtol=1e-14)
    assert "x (1 + I)" in movload(*asked, "--impact", "0").out


def test_an_allowance_answers_the_files_question_mark(asked: list[Any], tmp_path: Path) -> None:
    """But no other one."""
    open_file = changed(BY_JOINTS, ("impact = 0.3", 'impact = "?"'))
    path = written(tmp_path, open_file, "open.toml")
    assert_refused(movload("rate", path, asked[2]), 'rating.impact (still holds "?")', place=path)
    answered = movload("rate", path, asked[2], "--impact", "0.3", "--json").json()["rows"]
    assert answered == movload(*asked, "--json").json()["rows"]
    more = written(tmp_path, changed(open_file, ("deck = 4.0", 'deck = "?"')), "more.toml")
    refused = movload("rate", more, asked[2], "--impact", "0.3")
    assert_refused(refused, 'permanent.deck (still holds "?")', place=more)
    assert "rating.impact" not in refused.err


def test_permanent_load_alone_may_use_everything(asked: list[Any], tmp_path: Path) -> None:
    bridge = written(tmp_path, changed(BY_JOINTS, ("deck = 4.0", "deck = 400")), "heavy.toml")
    done = movload("rate", bridge, asked[2], "--gate")
    assert done.code == 3
    assert "permanent load alone uses" in " ".join(done.out.split())
    worst = movload("rate", bridge, asked[2], "--json").json()["rows"][0]
    assert worst["factor"] == 0
    assert worst["permanent_use"] > 1


MISSING = {
    "truss_share = 0.6\n": "deck.truss_share (share of a whole axle that reaches one truss)",
    "deck = 4.0\n": "permanent.deck and permanent.truss_share (weight per length of the whole deck, 0 if none)",
    "impact = 0.3\n": "rating.impact (dynamic allowance, e.g. 0.30",
    "density = 7850\n": "density of U1-U2",
}


@pytest.mark.parametrize("line", MISSING)
def test_what_nobody_typed_is_asked_for_by_name(asked: list[Any], tmp_path: Path, line: str) -> None:
    path = written(tmp_path, changed(BY_JOINTS, (line, "")), "less.toml")
    assert movload("sweep", path, asked[2]).code == 0
    assert_refused(
        movload("rate", path, asked[2]), "a rating needs data that is not there yet", MISSING[line], place=path
    )


def test_without_permits_nothing_is_rated(asked: list[Any], tmp_path: Path) -> None:
    bare = "\n".join(line for line in BY_JOINTS.splitlines() if not line.startswith("permits"))
    path = written(tmp_path, without(bare, "rating") + "[rating]\nimpact = 0.3\n", "bare.toml")
    assert_refused(movload("rate", path, asked[2]), "permits of at least one member group", place=path)


def test_the_same_question_has_the_same_bytes(asked: list[Any]) -> None:
    first = movload(*asked, "--json")
    assert movload(*asked, "--json").out == first.out
    assert all(math.isfinite(number) for number in numbers_in(first.json()))
