"""Ratings as a person reads them and as a program does: one list of columns, SI in JSON, else the file's units."""

from __future__ import annotations

import csv
import io
import json
import math
import re
from dataclasses import replace
from typing import TYPE_CHECKING, Any

import pytest
from numpy.testing import assert_allclose
from rating.bridges import CART, bars, brook, brook_truss, deck_weight, one_bar, part_of, solved_by_hand
from rating.floors import CART as FITTED
from rating.floors import fitted

from movload import Crossing, Loading, Support, Truss, Vehicle, judge, rate, solve
from movload.bridge.across import Across
from movload.bridge.strengths import permitted
from movload.files.read import bridge_from
from movload.files.schema.published import RatingsDocument
from movload.rating.factor_sets import FactorSet, Level
from movload.report.explain_report import sum_table
from movload.report.phrases import CAUTIONS
from movload.report.rating_text import closing
from movload.report.ratings_report import COLUMNS, detail, ratings_csv, ratings_json, summary
from movload.report.table import rendered
from movload.review.hand import terms
from movload.statics.part import row_of
from movload.units import UnitSystem

if TYPE_CHECKING:
    from movload import Rating, Ratings

AXLE = Vehicle("axle", [40e3], [])
POINTS = ("L0", "L1", "L2", "L3", "L4")
US = UnitSystem("ft", "kip", "in")
KIP = 4448.2216152605  # N, exact (NIST SP 811, B.8, from memory)
FOOT = 0.3048  # m, exact


def document(ratings: Ratings) -> dict[str, Any]:
    """Return the JSON document of every row of the first crossing."""
    read: dict[str, Any] = json.loads(ratings_json(ratings, ratings.rows(0)))
    return read


def sheet(text: str) -> list[dict[str, str]]:
    """Return a CSV's lines by their heads."""
    return list(csv.DictReader(io.StringIO(text)))


def lines_of(*parts: Any) -> list[str]:
    """Return parts as a terminal of 200 columns shows them."""
    return rendered(list(parts), width=200, colour=False).splitlines()


def sum_lines(rating: Rating, units: UnitSystem | None = None) -> list[str]:
    """Return the sum that anyone can add again, line by line."""
    shown = units or UnitSystem()
    found = terms(rating.peaks, rating.row, rating.side)
    return lines_of(*sum_table(rating, found, POINTS, shown, margin=rating.live_factor))


def cells_of(line: str) -> list[str]:
    """Return the cells of a printed line."""
    return re.split(r"\s{2,}", line.strip())


def verdict_in(ratings: Ratings) -> str:
    """Return the answer of the first line of a summary."""
    head, _, line, *_ = lines_of(summary(ratings, range(len(ratings.levels))))
    return cells_of(line)[cells_of(head).index("answer")]


def row(ratings: Ratings, name: str, side: int) -> Rating:
    """Return one row's rating by name."""
    return ratings.rating(0, row_of(ratings.solved.effects, name), side)


def test_json_is_the_published_document() -> None:
    """Golden list of fields: within a format number they are only ever added."""
    read = document(rate(brook(), [CART]))
    RatingsDocument.model_validate(read)
    assert (read["format"], read["title"]) == ("movload.ratings/1", "Brook bridge")
    assert list(read) == [
        "format", "title", "method", "statement", "units", "crossings", "coverage", "notes", "deflections", "uplifts",
        "cautions", "sources", "rows", "explanations",
    ]  # fmt: skip
    assert list(read["rows"][0]) == [
        "crossing", "level", "part", "row", "sense", "factor", "strength", "permanent", "live", "impact", "safe_weight",
        "position", "heading", "axle", "station", "kind", "crossing_number", "abreast", "place", "speed",
        "as_new", "held", "permanent_use", "permanent_used", "live_factor", "held_factor", "stands_for", "placement",
    ]  # fmt: skip
    assert list(read["rows"][0]["placement"]) == ["x", "load", "share", "impact", "factor", "z", "vehicle", "held"]
    assert list(read["crossings"][0]) == [
        "title", "kind", "weight", "place", "source", "z", "speed", "most_abreast", "beside",
    ]  # fmt: skip
    assert list(read["deflections"][0]) == ["part", "point", "crossing", "crossing_number", "down", "ratio", "limit"]
    assert read["units"] == {"force": "N", "length": "m", "moment": "N m", "speed": "m/s"}
    assert read["sources"] == ["brook.toml"]
    assert (read["uplifts"], read["explanations"]) == ({}, [])
    assert read["cautions"] == list(CAUTIONS)


def test_json_rows_are_the_ratings_to_the_last_bit() -> None:
    ratings = rate(brook(units=US), [CART])
    for said, rating in zip(document(ratings)["rows"], ratings.rows(0), strict=True):
        assert (said["row"], said["sense"], said["level"]) == (rating.effect.name, rating.sense, "permitted")
        assert (said["kind"], said["stands_for"], said["crossing_number"]) == ("axial", "truss", 0)
        assert (said["permanent_used"], said["live_factor"]) == (rating.pushed, 1.0)
        assert said["abreast"] == (1 if rating.peak.heading else 0)
        assert (said["strength"], said["permanent"], said["live"]) == (rating.strength, rating.permanent, rating.live)
        assert said["factor"] == (rating.factor if math.isfinite(rating.factor) else None)
        if said["placement"] is not None:
            placed = said["placement"]
            assert placed["x"] == rating.peak.placement.x.tolist()
            assert (placed["load"], placed["share"], placed["impact"]) == ([30e3, 50e3], [0.6, 0.6], [0.3, 0.3])
            assert (placed["factor"], placed["z"], placed["vehicle"]) == ([1.0, 1.0], [None, None], [1, 1])
            assert (said["axle"], said["station"]) == (rating.peak.axle + 1, rating.peak.station)


def test_json_says_null_for_what_is_not_there() -> None:
    """No live effect: no rating, no safe weight, no place. No strength and permanent load: no share of it used."""
    by_row = {(one["row"], one["sense"]): one for one in document(rate(brook(), [CART]))["rows"]}
    idle = by_row[("L0-L1", "compression")]
    assert [idle[key] for key in ("factor", "safe_weight", "position", "axle", "station", "placement")] == [None] * 6
    assert (idle["live"], idle["heading"], idle["permanent_use"]) == (0.0, 0, 0.0)
    used = document(judge(one_bar(permanent=5e3, strength=(0.0, 1e3)), [AXLE]))["rows"][0]
    assert (used["factor"], used["permanent_use"], used["safe_weight"]) == (0.0, None, 0.0)


def test_the_same_answer_is_the_same_bytes() -> None:
    first, second = (rate(brook(), [CART]) for _ in range(2))
    assert ratings_json(first, first.rows(0)) == ratings_json(second, second.rows(0))
    assert ratings_csv(first.rows(0), US) == ratings_csv(second.rows(0), US)


def test_csv_has_the_columns_of_the_list_with_the_files_units() -> None:
    ratings = rate(brook(units=US), [CART])
    lines = sheet(ratings_csv(ratings.rows(0), US))
    assert [re.sub(r" \[.*", "", head) for head in lines[0]] == [*(column.name for column in COLUMNS), "unit"]
    assert [head for head in lines[0] if "[" in head] == ["safe_weight [kip]", "position [ft]", "speed [mph]"]
    for line, rating in zip(lines, ratings.rows(0), strict=True):
        assert float(line["factor"]) == rating.factor
        assert line["unit"] == "kip"
        for name in ("strength", "permanent", "live"):
            assert_allclose(float(line[name]) * KIP, getattr(rating, name), rtol=1e-15)
        if rating.peak.heading:
            assert_allclose(float(line["position [ft]"]) * FOOT, rating.peak.position, rtol=1e-15)
        else:
            assert (line["position [ft]"], line["axle"], line["station"]) == ("", "", "")


def test_csv_says_row_by_row_what_forces_and_moments_are_in() -> None:
    """Floor and trusses share the columns of strength, permanent and live, so a unit stands in each line."""
    ratings = rate(fitted(units=US), [FITTED])
    lines = sheet(ratings_csv(ratings.rows(0), US))
    assert {(line["kind"], line["unit"]) for line in lines} == {
        ("axial", "kip"), ("shear", "kip"), ("moment", "kip ft"),
    }  # fmt: skip
    for line, rating in zip(lines, ratings.rows(0), strict=True):
        newtons = KIP * FOOT if line["kind"] == "moment" else KIP
        for name in ("strength", "permanent", "live"):
            assert_allclose(float(line[name]) * newtons, getattr(rating, name), rtol=1e-14)


def test_the_summary_has_one_line_a_crossing_with_its_answer() -> None:
    ratings = judge(one_bar(permanent=20e3), [AXLE, Vehicle("lorry", [90e3, 10e3], [9.0])])
    head, _, axle, lorry = lines_of(summary(ratings, range(len(ratings.levels))))
    assert cells_of(head) == [
        "crossing", "weighs", "RF", "answer", "governed by", "safe weight", "worst with",
    ]  # fmt: skip
    assert cells_of(axle) == [
        "axle", "40.0 kN", "2.00", "adequate, for the parts rated", "L0-L1 tension", "8.1 t (8.9 short tons)",
        "4.00 m →",
    ]  # fmt: skip
    assert cells_of(lorry)[2:4] == ["0.88", "not adequate"]


def test_the_summary_in_us_units() -> None:
    line = lines_of(summary(judge(one_bar(permanent=20e3, units=US), [AXLE]), [0]))[2]
    cells = cells_of(line)
    assert cells[1] == "9.0 kip"
    assert cells[5:] == ["8.9 short tons (8.1 t)", "13.12 ft →"]


@pytest.mark.parametrize(
    ("permanent", "strength", "said"),
    [
        (104e3, 100e3, "permanent load alone uses 104 %"),
        (100e3, 100e3, "permanent load alone uses 100 %"),
        (1e3, 0.0, "permanent load alone; no strength"),
    ],
)
def test_permanent_load_that_uses_all_is_said_in_place_of_a_position(
    permanent: float, strength: float, said: str
) -> None:
    ratings = judge(one_bar(permanent=permanent, strength=(strength, 1e9)), [AXLE])
    cells = cells_of(lines_of(summary(ratings, range(len(ratings.levels))))[2])
    assert cells[2:4] == ["0.00", "not adequate"]
    assert cells[5:] == ["0.0 t (0.0 short tons)", said]
    assert lines_of(detail(ratings.rows(0), UnitSystem()))[2].endswith(said)


def test_the_detail_puts_letters_beside_signs_and_the_worst_first() -> None:
    ratings = rate(brook(permanent=deck_weight(0.0, 0.5), strengths={"U1-L2": permitted(60e3, 15e3)}), [CART])
    _, _, worst, other = lines_of(detail(ratings.rows(0), UnitSystem()))
    compression, tension = row(ratings, "U1-L2", 1), row(ratings, "U1-L2", 0)
    assert compression.factor < tension.factor
    assert cells_of(worst) == [
        "U1-L2", "compression", f"{math.floor(compression.factor * 100) / 100:.2f}", "15.0 C",
        f"{compression.permanent / 1e3:.1f} T", f"{compression.live / 1e3:.1f} C", "2.00 m ←",
    ]  # fmt: skip
    assert cells_of(other)[3:6] == [
        "60.0 T", f"{compression.permanent / 1e3:.1f} T", f"{tension.live / 1e3:.1f} T"
    ]  # fmt: skip


def test_the_sum_can_be_added_again() -> None:
    """Every printed product is its printed factors' to the digits printed, and they add up to the printed sum."""
    rating = row(rate(brook(), [CART]), "U1-L1", 0)
    title, _, head, _, *axles, total, _, equation = sum_lines(rating)
    assert title == "U1-L1 tension under cart: axle 2 on L1, 2.00 m ←"
    assert " ".join(head.split()) == "axle x [m] load [kN] x share x (1 + I) x ordinate = [kN]"
    numbers = [[float(word) for word in line.split()] for line in axles]
    assert [number[0] for number in numbers] == [1, 2]
    for _, _, load, share, allowance, ordinate, product in numbers:
        assert_allclose(load * share * allowance * ordinate, product, atol=0.006)  # printed to 0.01
    assert total.split()[0] == "sum"
    assert_allclose(sum(number[-1] for number in numbers), float(total.split()[1]), atol=0.0101)
    strength, permanent, live, said = (
        float(word) for word in re.fullmatch(
            r"RF = \(strength ([\d.]+) - permanent \((.+)\)\) / live ([\d.]+) kN = ([\d.]+)", equation
        ).groups()  # type: ignore[union-attr]  # no match fails the test
    )  # fmt: skip
    assert said <= (strength - permanent) / live < said + 0.01


def test_the_equation_adds_what_relieves_and_takes_off_what_pushes() -> None:
    ratings = rate(brook(), [CART])
    assert "(strength 300.00 - permanent (-" in sum_lines(row(ratings, "U1-L2", 1))[-1]
    assert "(strength 400.00 - permanent (+" in sum_lines(row(ratings, "U1-L2", 0))[-1]
    assert "(strength 300.00 - permanent (+" in sum_lines(row(ratings, "L0-U1", 1))[-1]


def test_the_equation_shows_the_levels_margins() -> None:
    method = FactorSet("lf", (Level("inventory", 1.3, 2.17),), "One level.", "from memory")
    solved = replace(one_bar(permanent=20e3, strength=(100e3, 1.0)), method=method)
    equation = sum_lines(judge(solved, [AXLE]).governing(0))[-1]
    assert (
        equation == "RF = (strength 100.00 - factored permanent (+26.00)) / (2.17 x live 40.00) kN = 0.85"
    )  # 74 / 86.8


def test_the_equation_shows_relief_as_it_counts() -> None:
    """20 kN of relief counts whole without a word, and 18 kN as factored where the level cuts it to 0.9."""
    for relieving, said in ((1.0, "permanent (-20.00)"), (0.9, "factored permanent (-18.00)")):
        method = FactorSet("lf", (Level("lower", 1.3, relieving=relieving),), "One level.", "invented")
        ratings = judge(replace(one_bar(permanent=-20e3, strength=(100e3, 1e9)), method=method), [AXLE])
        assert f"RF = (strength 100.00 - {said}) / live 40.00 kN = " in sum_lines(ratings.rating(0, 0, 0))[-1]
    pushed = judge(
        replace(bars([-1.0], permanent=[-20e3], strength=[(1e9, 100e3)]), method=method), [AXLE]
    ).governing(0)  # fmt: skip
    assert sum_lines(pushed)[-1].startswith("RF = (strength 100.00 - factored permanent (+26.00)) / live 40.00 kN")


def test_the_equation_of_a_bar_that_permanent_load_fills_says_why_it_is_zero() -> None:
    equation = sum_lines(judge(one_bar(permanent=150e3), [AXLE]).governing(0))[-1]
    assert equation == (
        "RF = (strength 100.00 - permanent (+150.00)) / live 40.00 kN = 0.00: permanent load alone uses 150 %"
    )


def test_the_sum_of_nothing() -> None:
    """A row that governs without any live effect: no axle to place, none to add."""
    part = part_of("truss", {"tie": [0.0, 0.0, 0.0]}, [0.0, 4.0, 8.0], Across.typed(1.0))
    ratings = judge(solved_by_hand([part], permanent=[120e3]), [AXLE])
    title, *_, total, _, equation = sum_lines(ratings.governing(0))
    assert title == "tie tension under axle: off the bridge"
    assert total.split() == ["sum", "0.00"]
    assert equation.endswith("live 0.00 kN = 0.00: permanent load alone uses 120 %")


def test_axles_off_the_bridge_are_written_with_plain_zeros() -> None:
    rating = row(rate(brook(), [Vehicle("convoy", [30e3, 50e3], [40.0])]), "U1-L2", 1)
    lines = [line.split() for line in sum_lines(rating)[4:6]]
    assert {tuple(line[-2:]) for line in lines} >= {("0.00000", "0.00")}
    assert not re.search(r"-0\.0+\b", "\n".join(sum_lines(rating)))


def test_the_sum_in_us_units() -> None:
    lines = sum_lines(row(rate(brook(), [CART]), "U1-L1", 0), US)
    assert lines[0].endswith("axle 2 on L1, 6.56 ft ←")
    assert "load [kip]" in lines[2]
    assert lines[5].split()[1:3] == ["13.451", f"{50e3 / KIP:.2f}"]  # 4.1 m


def test_what_closes_every_answer() -> None:
    notes = rate(brook(), [Loading.of(CART, source="invented")])
    said = closing(notes)
    assert said[:5] == [
        notes.solved.method.statement,
        "Impact 0.3 as typed.",
        "One vehicle on the bridge at a time.",
        "Covers: 13 of 13 members and beams rated in every sense they feel; floor, deck not rated.",
        "A safe weight holds for that vehicle's own axles in proportion: no sign weight follows from one vehicle.",
    ]
    assert said[5].startswith("Note: One truss is rated with typed shares")
    assert said[6].startswith("Note: Members weigh area x density x length: nothing is added for lacing")
    assert said[7] == "Note, cart: axles and spacings: invented"
    assert said[8:] == [f"Caution: {caution}" for caution in CAUTIONS]


def test_relief_that_a_rating_leans_on_is_said_once() -> None:
    """B0 in tension leans on 20 kN of permanent compression, whichever crossing; the level counts 0.9 of it."""
    method = FactorSet("lf", (Level("lower", 1.3, relieving=0.9),), "One level.", "invented")
    solved = replace(bars([1.0], permanent=[-20e3], strength=[(60e3, 1e9)]), method=method)
    said = [line for line in closing(judge(solved, [AXLE, CART])) if "relieves" in line]
    (line,) = said
    assert line == (
        "Note: permanent load relieves B0 tension by 18.0 kN; less of it than typed (a lighter deck, surfacing "
        "removed) lowers that rating."
    )
    pushing = bars([1.0], permanent=[20e3], strength=[(60e3, 1e9)])
    assert not [line for line in closing(judge(pushing, [AXLE])) if "relieves" in line]


def test_uplift_is_said_and_is_in_the_document() -> None:
    """L0 lifts when 120 kN stand on the overhang beyond L3: 5.77 kN by moments (tests/rating/test_uplift.py)."""
    bare = brook_truss(0.0)
    truss = Truss(bare.joints, bare.members, [Support("L0"), Support("L3", 0)])
    ratings = rate(brook(truss=truss), [Vehicle("axle", [120e3], [])])
    read = document(ratings)
    RatingsDocument.model_validate(read)
    assert read["uplifts"] == ratings.uplifts
    assert list(read["uplifts"]) == ["L0 y"]
    line = "Uplift: L0 y is pulled up with 5.8 kN (permanent and live); whether anything holds it down is not checked."
    said = closing(ratings)
    assert [one for one in said if one.startswith("Uplift")] == [line]
    assert said[said.index(line) - 1].startswith("Covers: ")
    assert verdict_in(ratings) == "adequate only if L0 is held down"


def test_what_is_not_rated_is_said() -> None:
    ratings = rate(brook(strengths={"U1-L2": permitted(400e3), "L0-L1": permitted(400e3)}), [CART])
    (line,) = (one for one in closing(ratings) if one.startswith("Covers"))
    assert line == (
        "Covers: 1 of 13 members and beams rated in every sense they feel; 1 in one sense only (U1-L2); "
        "11 not rated (L1-L2, L2-L3, L3-L4, U1-U2, U2-U3, L0-U1 ...); floor, deck not rated."
    )
    assert verdict_in(ratings) == "adequate only if the 12 parts not fully rated are"
    coverage = document(ratings)["coverage"]
    assert (coverage["full"], coverage["partly"]) == (["L0-L1"], ["U1-L2"])
    assert coverage["not_rated"] == ["floor", "deck"]


FILE = """
title = "Rill bridge"
[units]
length = "{length}"
force = "{force}"
section = "{section}"
[joints]
L0 = [0, 0]
U1 = ["3.1 m", "2.3 m"]
L1 = ["3.1 m", 0]
L2 = ["7 m", 0]
[supports]
L0 = "pinned"
L2 = {{ slides = 0 }}
[members.all]
bars = ["L0-U1", "U1-L2", "L0-L1", "L1-L2", "U1-L1"]
area = "2400 mm2"
modulus = "200 GPa"
density = "7850 kg/m3"
permits = {{ tension = "150 kN", compression = "90 kN" }}
[deck]
panel_points = ["L0", "L1", "L2"]
truss_share = 0.5
[permanent]
deck = "6 kN/m"
truss_share = 0.5
[rating]
impact = 0.2
"""


def test_the_same_bridge_written_in_si_and_in_us_units() -> None:
    """JSON is alike but for round-off; text and CSV speak each file's units."""
    metric, us = (
        rate(bridge_from(FILE.format(length=length, force=force, section=section), "rill.toml"), [CART])
        for length, force, section in (("m", "kN", "mm"), ("ft", "kip", "in"))
    )
    for one, other in zip(document(metric)["rows"], document(us)["rows"], strict=True):
        for key in ("factor", "strength", "permanent", "live", "safe_weight", "position"):
            assert (one[key] is None) == (other[key] is None)
            assert_allclose(one[key] or 0.0, other[key] or 0.0, rtol=1e-12)
    assert lines_of(summary(metric, [0]))[2].split()[1:3] == ["80.0", "kN"]
    assert lines_of(summary(us, [0]))[2].split()[1:3] == ["18.0", "kip"]
    weights = [re.search(r"([\d.]+) t \(([\d.]+) short tons\)", lines_of(summary(metric, [0]))[2]),
               re.search(r"([\d.]+) short tons \(([\d.]+) t\)", lines_of(summary(us, [0]))[2])]  # fmt: skip
    assert weights[0] is not None
    assert weights[1] is not None
    assert weights[0].groups() == weights[1].groups()[::-1]
    one, other = (sheet(ratings_csv(ratings.rows(0), ratings.solved.units))[0] for ratings in (metric, us))
    assert (one["unit"], other["unit"]) == ("kN", "kip")
    assert_allclose(float(one["permanent"]) * 1e3, float(other["permanent"]) * KIP, rtol=1e-12)


def test_every_crossing_is_in_the_document() -> None:
    heavy = Crossing(Loading.of(Vehicle("lorry", [90e3], []), "farm", source="invented", notes=("One axle.",)))
    ratings = judge(solve(brook()), [CART, heavy])
    read = json.loads(ratings_json(ratings, [one for number in range(2) for one in ratings.rows(number)]))
    assert [one["title"] for one in read["crossings"]] == ["cart", "lorry"]
    assert read["crossings"][1] == {
        "title": "lorry", "kind": "farm", "weight": 90e3, "place": "typed share", "source": "invented",
        "z": None, "speed": None, "most_abreast": 1, "beside": None,
    }  # fmt: skip
    assert {(one["crossing"], one["crossing_number"]) for one in read["rows"]} == {("cart", 0), ("lorry", 1)}
    assert [note["code"] for note in read["notes"]] == [
        "shares-typed", "detail-allowance", "vehicle-source", "vehicle-source", "vehicle",
    ]  # fmt: skip
    assert read["notes"][-1] == {"code": "vehicle", "subject": "lorry", "text": "One axle.", "source": ""}
    assert "Note, lorry: One axle." in closing(ratings)
