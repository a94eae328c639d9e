"""A rating taken apart in print: every printed line is re-added here from its own printed digits.

The bridge is the invented one of tests/rating/floors.py with two lanes, trusses 6.4 m apart; its strengths are nominal.
"""

from __future__ import annotations

import json
import math
import re
from dataclasses import replace
from typing import TYPE_CHECKING, Final

import pytest
from numpy.testing import assert_allclose
from oracles.trusses import bottom
from rating.bridges import CART as ROAD_CART
from rating.bridges import brook
from rating.floors import CART, fitted

from movload import Crossing, Deck, Loading, rate
from movload.bridge.floor import Floor, Floorbeams, Stringers
from movload.bridge.permanent import Item, PermanentItems
from movload.bridge.roadway import Roadway
from movload.bridge.strengths import TypedStrength
from movload.files.schema.published import RatingsDocument
from movload.rating.factor_sets import FactorSet, Level
from movload.report.explain_report import explanation_parts
from movload.report.ratings_report import ratings_json
from movload.report.table import rendered
from movload.review.hand import explained
from movload.statics.part import row_of
from movload.units import UnitSystem

if TYPE_CHECKING:
    from movload import Ratings
    from movload.rating.rating import Rating

ROUND_OFF: Final = 1e-12  # relative, of a few sums and products
POINTS: Final = ("L0", "L1", "L2", "L3", "L4")
SI: Final = UnitSystem()
US: Final = UnitSystem("ft", "kip", "in")
BAR: Final = TypedStrength({}, {"tension": 500e3, "compression": 400e3}, condition="fair", system="riveted")
BEAM: Final = TypedStrength({}, {"moment": 300e3, "shear": 300e3}, condition="fair", system="riveted")
LEVEL: Final = Level(
    "legal", live=1.45, by_class={"components": (1.25, 0.9), "surfacing": (1.5, 0.65), "settlement": (1.0, 1.0)},
    resistance={"tension": 0.95, "compression": 0.95, "moment": 0.9, "shear": 0.8}, condition_factors=True,
)  # fmt: skip
METHOD: Final = FactorSet(
    "alder rules", (LEVEL,), "One level.", "invented", strengths=("nominal",), multiple_presence=(1.2, 1.0),
    condition={"fair": 0.95}, system={"riveted": 0.95},
)  # fmt: skip


def rated(*crossings: Crossing | Loading, units: UnitSystem = SI) -> Ratings:
    """Return the ratings of the bridge with two lanes by the rules above."""
    bridge = fitted(
        deck=Deck(tuple(bottom(4)), truss_spacing=6.4, roadway=Roadway(-3.0, 3.0, clearance=0.4), kind="pony"),
        floor=Floor(Stringers((-2.4, -0.8, 0.8, 2.4), strength=BEAM), Floorbeams(weight=900.0, strength=BEAM)),
        permanent=PermanentItems(
            (
                Item("planks", "components", line=4e3, low=-3.0, high=3.0),
                Item("gravel", "surfacing", line=6e3, low=-3.0, high=3.0),
            ),
            0.1,
        ),
        units=units,
    )
    return rate(replace(bridge, strengths=dict.fromkeys(bridge.strengths, BAR)), crossings, METHOD)


def found(ratings: Ratings, key: str, side: int) -> Rating:
    """Return one row's rating by name."""
    return ratings.rating(0, row_of(ratings.solved.effects, key), side)


def printed(ratings: Ratings, rating: Rating) -> list[str]:
    """Return the lines of an explanation without the empty ones and the rules."""
    parts = explanation_parts(explained(ratings, rating), POINTS, ratings.solved.units)
    lines = rendered(parts, width=200, colour=False).splitlines()
    return [line for line in lines if line and not line.startswith("──")]


def cells(line: str) -> list[str]:
    """Return the cells of a line."""
    return re.split(r"\s{2,}", line.strip())


def number(text: str) -> float:
    """Return the number a cell begins with."""
    return float(text.split(maxsplit=1)[0])


def half(text: str) -> float:
    """Return half of the last digit that a cell shows: how far what it rounds may be off."""
    return 0.5 * 10.0 ** -len(text.split(maxsplit=1)[0].partition(".")[2])


def assert_product(factors: list[str], product: str) -> None:
    """Check that printed factors multiply to a printed product, to the digits printed."""
    values = [number(factor) for factor in factors]
    whole = math.prod(values)
    off = sum(half(text) / abs(value) for text, value in zip(factors, values, strict=True) if value)
    assert_allclose(whole, number(product), rtol=0, atol=1.01 * (abs(whole) * off + half(product)))


def assert_sum(parts: list[str], total: str) -> None:
    """Check that printed parts add up to a printed sum, to the digits printed."""
    off = sum(half(part) for part in parts) + half(total)
    assert_allclose(sum(number(part) for part in parts), number(total), rtol=0, atol=1.01 * off)


def assert_adds_up(lines: list[str]) -> float:
    """Check strength, permanent load and live load against their own printed digits; return RF as printed."""
    steps_at, permanent_at = (lines.index(head) for head in HEADS)
    live_at = next(at for at, line in enumerate(lines) if line.startswith(("vehicle ", "axle ")))
    capacity = assert_strength([cells(line) for line in lines[steps_at + 2 : permanent_at]])
    used = assert_permanent([cells(line) for line in lines[permanent_at + 2 : live_at - 1]])
    head, *axles, total, (equation,) = (cells(line) for line in lines[live_at:])
    first = next(at for at, word in enumerate(head) if word.startswith("load"))
    for axle in axles:
        assert_product(axle[first:-1], axle[-1])
    assert_sum([axle[-1] for axle in axles], total[1])
    matched = re.fullmatch(
        r"RF = \(strength ([\d.]+) ([-+]) factored permanent \(([-+][\d.]+)\)\) / \(([\d.]+) x live ([\d.]+)\) "
        r"(?:kN|kip)(?: m| ft)? = ([\d.]+)", equation
    )  # fmt: skip
    assert matched, equation
    strength, sign, permanent, margin, live, said = matched.groups()
    assert (strength, live) == (capacity, total[1].lstrip("+-"))
    spare = float(strength) - float(permanent) if sign == "-" else float(strength) + float(permanent)
    assert_allclose(float(strength) - used, spare, rtol=0, atol=1e-9)
    factor = spare / (float(margin) * float(live))
    off = 1.01 * factor * (half(live) / float(live) + half(strength) / spare)
    assert float(said) - off <= factor < float(said) + 0.01 + off  # RF is rounded down
    return float(said)


def assert_strength(steps: list[list[str]]) -> str:
    """Check a nominal strength's equations; return C as printed."""
    by_symbol = {step[0]: step[2] for step in steps}
    assert list(by_symbol) == ["Rn", "phi", "phi_c", "phi_s", "k", "C"]
    of_both = number(by_symbol["phi_c"]) * number(by_symbol["phi_s"])
    assert_allclose(number(by_symbol["k"]), max(of_both, 0.85), rtol=0.5e-3)  # printed to 4 digits
    assert_allclose(
        number(by_symbol["C"]), number(by_symbol["k"]) * number(by_symbol["phi"]) * number(by_symbol["Rn"]), rtol=0.5e-3
    )
    return by_symbol["C"].split()[0]


def assert_permanent(lines: list[list[str]]) -> float:
    """Check the classes of permanent load: what pushes uses strength and what relieves gives it; return the sum."""
    *classes, (said, total) = lines
    assert said == "sum"
    for _, effect, word, margin, used in classes:
        assert_product([effect.lstrip("+-"), margin], used.lstrip("+-"))
        assert used.startswith("+" if word == "pushes" else "-")
    assert_sum([used for *_, used in classes], total)
    return number(total)


HEADS = ("Strength", "Permanent load, what it uses of the strength")


@pytest.mark.parametrize("units", [SI, US], ids=["SI", "US"])
@pytest.mark.parametrize(
    ("key", "side"), [("L1-L2", 0), ("U1-L2", 1), ("U1-U2", 1), ("floorbeam L2 moment at S2", 0), ("shear", 0)]
)
def test_all_that_is_printed_can_be_added_again(key: str, side: int, units: UnitSystem) -> None:
    """Two carts abreast govern most of these; moments stand in kN m or kip ft beside ordinates in m or ft."""
    ratings = rated(Loading.of(CART, "farm"), units=units)
    rating = found(ratings, "L1-L2 shear" if key == "shear" else key, side)
    lines = printed(ratings, rating)
    assert lines[0].endswith(" under cart, level legal")
    said = assert_adds_up(lines)
    assert said <= rating.factor < said + 0.01
    moment = "moment" in key
    symbol = ("kip ft" if moment else "kip") if units is US else ("kN m" if moment else "kN")
    assert cells(lines[lines.index(HEADS[1]) + 1])[-1] == f"= uses [{symbol}]"


def test_vehicles_abreast_have_columns_of_their_own() -> None:
    ratings = rated(Loading.of(CART, "farm"))
    lines = printed(ratings, found(ratings, "floorbeam L2 moment at S2", 0))
    head = next(line for line in lines if line.startswith("vehicle"))
    assert cells(head) == [
        "vehicle", "axle", "x [m]", "z [m]", "load [kN]", "x share [m]", "x (1 + I)", "x ordinate", "= [kN m]",
    ]  # fmt: skip
    axles = [cells(line)[:2] for line in lines[lines.index(head) + 1 : -2]]
    assert axles == [["1", "1"], ["1", "2"], ["2", "1"], ["2", "2"]]
    z = [number(cells(line)[3]) for line in lines[lines.index(head) + 1 : -2]]
    assert z[0] == z[1] != z[2] == z[3]
    assert abs(z[0] - z[2]) >= 1.7 + 1.2  # a gauge and the distance neighbours keep


def test_one_vehicle_shows_its_presence_and_no_number() -> None:
    ratings = rated(Crossing(Loading.of(CART, "farm"), "left kerb"))
    lines = printed(ratings, found(ratings, "left truss L1-L2", 0))
    head = next(line for line in lines if line.startswith("axle"))
    assert cells(head) == [
        "axle", "x [m]", "z [m]", "load [kN]", "x presence", "x share", "x (1 + I)", "x ordinate", "= [kN]",
    ]  # fmt: skip
    at = lines.index(head) + 1
    assert [cells(line)[2:3] + cells(line)[4:7] for line in lines[at : at + 2]] == [
        ["+1.750", "1.200", "0.7734", "1.300"]  # 3.0 - 0.4 - 0.85; 1/2 + 1.75/6.4
    ] * 2
    assert lines[0] == "left truss, L1-L2 tension under cart, level legal"


def test_classes_push_or_relieve_with_margins_of_their_own() -> None:
    ratings = rated(Loading.of(CART, "farm"))
    for key, side, word, margins in (
        ("L1-L2", 0, "pushes", ["1.25", "1.5"]), ("U1-L2", 1, "relieves", ["0.9", "0.65"]),
    ):  # fmt: skip
        lines = printed(ratings, found(ratings, key, side))
        at = lines.index(HEADS[1]) + 2
        assert [cells(line)[0] for line in lines[at : at + 2]] == ["components", "surfacing"]
        assert [cells(line)[2:4] for line in lines[at : at + 2]] == [[word, margin] for margin in margins]


def test_shear_says_that_no_system_factor_stands_on_it() -> None:
    ratings = rated(Loading.of(CART, "farm"))
    lines = printed(ratings, found(ratings, "L1-L2 shear", 0))
    (line,) = (line for line in lines if line.startswith("phi_s"))
    assert cells(line) == ["phi_s", "1 in shear", "1", "alder rules"]


def test_a_permitted_strength_is_one_line() -> None:
    ratings = rate(fitted(), [Loading.of(CART, "farm")])
    lines = printed(ratings, found(ratings, "L1-L2", 0))
    assert lines[1] == "Strength"
    assert cells(lines[3]) == ["R", "permitted tension, as typed", "400.00 kN", "bridge file"]
    assert lines[4] == HEADS[1]
    assert "margin" in lines[5]


def test_the_document_holds_every_line_of_it() -> None:
    """SI, unrounded: C = k phi Rn, and each axle's product, to round-off; sums and RF follow."""
    ratings = rated(Loading.of(CART, "farm"))
    asked = [explained(ratings, found(ratings, key, 0)) for key in ("L1-L2", "floorbeam L2 moment at S2")]
    read = json.loads(ratings_json(ratings, [], asked))
    RatingsDocument.model_validate(read)
    one, other = read["explanations"]
    assert list(one) == [
        "crossing_number", "level", "part", "row", "sense", "strength", "permanent", "terms", "spare", "live",
        "live_factor", "held", "held_factor", "factor",
    ]  # fmt: skip
    assert [one[key] for key in ("crossing_number", "level", "part", "row", "sense")] == [
        0, "legal", "left truss", "L1-L2", "tension",
    ]  # fmt: skip
    assert [list(step) for step in one["strength"]] == [["symbol", "equation", "value", "unit", "source"]] * 6
    assert list(one["permanent"][0]) == ["title", "effect", "margin", "used"]
    assert list(one["terms"][0]) == [
        "vehicle", "axle", "x", "z", "load", "factor", "share", "impact", "ordinate", "effect", "held",
    ]  # fmt: skip
    assert (other["part"], other["row"], other["sense"]) == ("floorbeam L2", "moment at S2", "moment")
    for said, nominal in ((one, 500e3 * 0.95), (other, 300e3 * 0.9)):
        capacity = said["strength"][-1]["value"]
        assert_allclose(capacity, 0.95 * 0.95 * nominal, rtol=ROUND_OFF)
        for term in said["terms"]:
            shared = term["load"] * term["factor"] * term["share"]
            assert_allclose(shared * (1 + term["impact"]) * term["ordinate"], term["effect"], rtol=ROUND_OFF)
        used = [term["effect"] * term["margin"] for term in said["permanent"]]
        assert_allclose([term["used"] for term in said["permanent"]], used, rtol=ROUND_OFF)
        assert_allclose(said["spare"], capacity - sum(used), rtol=ROUND_OFF)
        assert_allclose(said["live"], sum(term["effect"] for term in said["terms"]), rtol=ROUND_OFF)
        assert_allclose(said["factor"], said["spare"] / (1.45 * said["live"]), rtol=ROUND_OFF)


def test_a_typed_share_has_no_place_across_in_the_document() -> None:
    ratings = rate(brook(), [ROAD_CART])
    (one,) = json.loads(ratings_json(ratings, [], [explained(ratings, found(ratings, "L1-L2", 0))]))["explanations"]
    assert [term["z"] for term in one["terms"]] == [None, None]
    assert [term["share"] for term in one["terms"]] == [0.6, 0.6]
