"""What a person reads of a rating across the deck: the line a crossing, its rows, deflections, who stands abreast.

The bridge is the invented one of tests/rating/floors.py; its trusses stand 4.6 m apart, the cart's wheels 1.7 m.
"""

from __future__ import annotations

import json
import re
from dataclasses import replace
from typing import TYPE_CHECKING, Any, Final

import numpy as np
import pytest
from numpy.testing import assert_allclose
from oracles.trusses import bottom
from rating.bridges import brook, one_bar
from rating.floors import CART, fitted

from movload import Crossing, Deck, Loading, Vehicle, judge, rate
from movload.bridge.roadway import Roadway
from movload.files.schema.published import RatingsDocument
from movload.rating.factor_sets import FactorSet, Level
from movload.report.phrases import factor_text
from movload.report.rating_text import closing, rating_text
from movload.report.ratings_report import ratings_json, summary
from movload.report.table import rendered
from movload.units import UnitSystem

if TYPE_CHECKING:
    from movload import Ratings
    from movload.rating.solved import SolvedBridge

POINTS: Final = ("L0", "L1", "L2", "L3", "L4")
FARM: Final = Loading.of(CART, "farm", source="weighed")
US: Final = UnitSystem("ft", "kip", "in")
AXLE: Final = Vehicle("axle", [40e3], [])
SHORT_TONS: Final = 3 * 2000 * 4.4482216152605  # N in 3 of them
STAR: Final = "* needs control on site (place or speed): no sign weight."


def lines_of(ratings: Ratings, **how: Any) -> list[str]:
    """Return what is read, on a terminal of 200 columns."""
    return rendered(rating_text(ratings, POINTS, **how), width=200, colour=False).splitlines()


def table(lines: list[str], head: str) -> list[list[str]]:
    """Return the cells of the table whose head begins with a word, its head first."""
    first = next(number for number, line in enumerate(lines) if line.startswith(head))
    rows = [line for line in lines[first : lines.index("", first)] if not line.startswith("──")]
    if not rows[1:]:  # a rule and the rows stand below an empty line
        raise AssertionError(lines[first:])
    return [re.split(r"\s{2,}", line.strip()) for line in rows]


def answers(ratings: Ratings) -> list[dict[str, str]]:
    """Return the lines of the summary by their heads."""
    parts = rendered([summary(ratings, range(len(ratings.levels)))], width=240, colour=False).splitlines()
    head, *rows = [re.split(r"\s{2,}", line.strip()) for line in parts if not line.startswith("──")]
    return [dict(zip(head, row, strict=True)) for row in rows]


def document(ratings: Ratings) -> dict[str, Any]:
    """Return the JSON document of every row, found valid."""
    rows = [one for number in range(len(ratings.crossings)) for one in ratings.rows(number)]
    read: dict[str, Any] = json.loads(ratings_json(ratings, rows))
    RatingsDocument.model_validate(read)
    return read


def two_lanes(**changes: object) -> Any:
    """Return the bridge with room for two carts: kerbs 6 m apart, trusses 6.4 m."""
    deck = Deck(tuple(bottom(4)), truss_spacing=6.4, roadway=Roadway(-3.0, 3.0, clearance=0.4), kind="pony")
    return fitted(deck=deck, **changes)


PLACES = {
    "anywhere": (Crossing(FARM), "anywhere"),
    "kerb": (Crossing(FARM, "left kerb"), "left kerb"),
    "lane": (Crossing(FARM, "own lane", speed=2.5), "own lane, 9 km/h"),
    "centre": (Crossing(FARM, "centre line"), "centre line ± 0.30 m"),
    "stray": (Crossing(FARM, "centre line", wander=0.15), "centre line ± 0.15 m"),
    "offset": (Crossing(FARM, "offset", 0.4), "z = +0.40 m"),
    "other side": (Crossing(FARM, "offset", -0.4, speed=1.0), "z = -0.40 m, 4 km/h"),
    "speed": (Crossing(FARM, speed=2.0), "anywhere, 7 km/h"),
}


def test_where_across_and_how_fast_stands_in_each_line() -> None:
    ratings = rate(two_lanes(), [crossing for crossing, _ in PLACES.values()])
    assert [line["keeps"] for line in answers(ratings)] == [said for _, said in PLACES.values()]
    assert [line["abreast"] for line in answers(ratings)] == ["2", *"111111", "2"]
    starred = [line["safe weight"].endswith(" *") for line in answers(ratings)]
    assert starred == [False, True, True, True, True, True, True, True]  # a place or a speed is kept by control only
    read = document(ratings)["crossings"]
    assert [one["place"] for one in read] == [crossing.place for crossing, _ in PLACES.values()]
    assert [one["z"] for one in read] == [None, None, None, None, None, 0.4, -0.4, None]
    assert [one["speed"] for one in read] == [None, None, 2.5, None, None, None, 1.0, 2.0]
    assert [one["most_abreast"] for one in read] == [2, 1, 1, 1, 1, 1, 1, 2]
    lines = lines_of(ratings)
    assert STAR in lines
    assert "Up to 1 or 2 vehicle(s) side by side, one behind the other never; both trusses are shown." in lines


def test_offsets_and_speeds_in_us_units() -> None:
    crossing = Crossing(FARM, "offset", 0.3048, speed=4.4704)
    assert answers(rate(two_lanes(units=US), [crossing]))[0]["keeps"] == "z = +1.00 ft, 10 mph"


def test_nothing_asks_for_control_where_the_vehicle_may_go_anywhere() -> None:
    ratings = rate(two_lanes(), [FARM])
    assert STAR not in lines_of(ratings)
    assert list(answers(ratings)[0])[:4] == ["crossing", "weighs", "abreast", "RF"]  # "anywhere" goes without saying
    assert list(answers(rate(fitted(), [FARM]))[0])[:3] == ["crossing", "weighs", "RF"]  # nor is there room for two
    alike = "Up to 2 vehicle(s) side by side, one behind the other never; both trusses carry the same and are shown as"
    assert f"{alike} one." in lines_of(ratings)
    assert answers(ratings)[0]["safe weight"] == answers(rate(two_lanes(), [Crossing(FARM)]))[0]["safe weight"]
    assert "One vehicle on the bridge at a time." in lines_of(rate(brook(), [AXLE]))


def test_a_single_crossing_shows_its_worst_rows_and_its_sum() -> None:
    ratings = rate(fitted(), [FARM])
    lines, count = lines_of(ratings), len(ratings.rows(0))
    distinct = len({(one.part, one.effect.name) for one in ratings.rows(0)})
    assert distinct < count
    title = f"cart (anywhere): forces in kN, the worst 8 of {distinct} rows (--all for every rating)"
    assert title in lines
    rows = table(lines[lines.index(title) :], "part")
    assert rows[0] == ["part", "row", "sense", "RF", "strength", "permanent", "live", "impact", "worst with"]
    first: dict[tuple[str, str], int] = {}
    for number, one in enumerate(ratings.rows(0)):
        first.setdefault((one.part, one.effect.name), number)
    worst = [ratings.rows(0)[number] for number in list(first.values())[:8]]
    assert [row[:4] for row in rows[1:]] == [
        [one.part, one.effect.name, one.sense, factor_text(one.factor)] for one in worst
    ]
    assert {"planks", "stringer S1"} <= {row[0] for row in rows}
    assert sum(line.startswith("RF = (") for line in lines) == 1
    every = lines_of(ratings, every=True)
    assert len(table(every[every.index("cart (anywhere): forces in kN") :], "part")) == 1 + count
    both = lines_of(rate(fitted(), [FARM, AXLE_2]))
    assert not [line for line in both if line.startswith(("cart (", "RF = ("))]


AXLE_2 = Vehicle("axle", [40e3], [], gauges=(1.7,))


def test_timber_and_steel_are_shown_with_their_own_impact() -> None:
    rows = table(lines_of(rate(fitted(), [FARM]), every=True), "part")
    at = rows[0].index("impact")
    assert {row[at] for row in rows[1:] if row[0] == "planks"} == {"0.00"}
    assert {row[at] for row in rows[1:] if row[0] != "planks"} == {"0.30"}
    assert "Impact 0.3 as typed; none on timber." in closing(rate(fitted(), [FARM]))
    steel = lines_of(rate(replace(fitted(), floor=replace(fitted().floor, planks=None)), [FARM]))
    assert "impact" not in table(steel, "part")[0]  # one for all: it is said below the table
    assert "Impact 0.3 as typed." in steel


def test_each_crossings_greatest_deflection_against_the_limit() -> None:
    """Or every panel point's with ``every``; ratios are rounded down, so that none reads better than it is."""
    ratings = rate(fitted(deflection_limit=8500.0), [FARM, Crossing(FARM, "centre line")])
    found = document(ratings)["deflections"]
    worst = [max((one for one in found if one["crossing_number"] == number), key=lambda one: one["down"])
             for number in (0, 1)]  # fmt: skip
    head, *rows = table(lines_of(ratings), "live deflection")
    assert head == ["live deflection", "part", "at", "down", "of span", "limit"]
    ways = ["cart, anywhere", "cart, centre line ± 0.30 m"]
    assert [row[:3] for row in rows] == [[way, one["part"], one["point"]] for way, one in zip(ways, worst, strict=True)]
    for row, one in zip(rows, worst, strict=True):
        assert_allclose(one["ratio"] * one["down"], 16.0, rtol=1e-12)  # the span
        assert row[3:] == [f"{one['down'] * 1e3:.2f} mm", f"1/{int(one['ratio'])}", "1/8500"] + (
            ["exceeded"] if one["ratio"] < 8500 else []
        )
    assert ["exceeded" in row for row in rows] == [True, False]
    assert {one["limit"] for one in found} == {8500.0}
    assert found == sorted(found, key=lambda one: -one["down"])
    every = table(lines_of(ratings, every=True), "live deflection")
    assert len(every) == 1 + len(found)
    assert len([one for one in found if one["down"] > 0]) == 6  # 3 points between the bearings, twice
    assert {one["ratio"] for one in found if one["down"] == 0} == {None}


def test_no_limit_is_a_dash() -> None:
    ratings = rate(fitted(), [FARM])
    assert table(lines_of(ratings), "live deflection")[1][-1] == "-"
    assert {one["limit"] for one in document(ratings)["deflections"]} == {None}


TWO_LEVELS = (
    Level("summer", 1.0, 1.0, kinds=("farm",), posting="legal curve"),
    Level("winter", 1.0, 1.25, posting="weight x RF"),
)
METHOD = FactorSet("alder", TWO_LEVELS, "Two levels.", "invented", closure=SHORT_TONS)


def judged(strength: float, *crossings: Crossing | Loading, closure: float = SHORT_TONS) -> Ratings:
    """Return one bar of a strength [N] under crossings, at two levels."""
    return judge(at_levels(strength, replace(METHOD, closure=closure)), crossings)


def at_levels(strength: float, method: FactorSet) -> SolvedBridge:
    """Return one bar of a strength [N] at every level of a method."""
    bar = one_bar(strength=(strength, 1e9))
    return replace(bar, method=method, strength=np.repeat(bar.strength, len(method.levels), axis=0))


def test_a_line_a_level_that_rates_the_kind() -> None:
    """One axle of 40 kN on a bar of 32 kN: RF 0.8, and 0.64 with 1.25; W RF = 2.6 t, and W (RF - 0.3)/0.7 = 2.9 t."""
    lines = answers(judged(32e3, Loading.of(AXLE, "farm"), Loading.of(replace(AXLE, title="sledge"), "forest")))
    assert [(line["crossing"], line["level"], line["RF"]) for line in lines] == [
        ("axle", "summer", "0.80"), ("axle", "winter", "0.64"), ("sledge", "winter", "0.64"),
    ]  # fmt: skip
    assert [line["safe weight"] for line in lines] == [
        "2.9 t (3.2 short tons)", "2.6 t (2.8 short tons)", "2.6 t (2.8 short tons)",
    ]  # fmt: skip


CLOSED = "Below 2.7 t (3.0 short tons) a US road bridge is closed to vehicles (not to walkers); from memory."


def test_a_road_is_closed_below_the_sets_least_weight() -> None:
    """A sign would carry 2.6 t, below 3 short tons; not where control, walkers or no such rule stand behind it."""
    farm = Loading.of(AXLE, "farm")
    assert CLOSED in closing(judged(32e3, farm))
    assert CLOSED not in closing(judged(35e3, farm))  # 0.70 x 40 kN = 2.85 t
    assert CLOSED not in closing(judged(32e3, Loading.of(AXLE, "crowd")))
    assert CLOSED not in closing(judged(32e3, Crossing(farm, speed=1.0)))
    assert CLOSED not in closing(judged(32e3, farm, closure=0.0))
    silent = tuple(replace(level, posting="") for level in TWO_LEVELS)
    assert CLOSED not in closing(judge(at_levels(32e3, replace(METHOD, levels=silent)), [farm]))


@pytest.mark.parametrize("strength", [32e3, 80e3])
def test_no_sign_weight_from_one_vehicle(strength: float) -> None:
    said = "A safe weight holds for that vehicle's own axles in proportion: no sign weight follows from one vehicle."
    assert closing(judged(strength, Loading.of(AXLE, "farm"))).count(said) == 1


def test_levels_stand_in_the_rows_too_where_there_are_several() -> None:
    rows = table(lines_of(judged(32e3, Loading.of(AXLE, "farm")), every=True), "level")
    assert rows[0][:3] == ["level", "row", "sense"]
    assert [row[0] for row in rows[1:]] == ["winter", "summer", "summer", "winter"]
    once = table(lines_of(judged(32e3, Loading.of(AXLE, "farm"))), "row")
    assert len(once) < len(rows)
    assert len({row[0] for row in once}) == len(once)
