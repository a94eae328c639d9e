"""What a reader of a rating must know: of the bridge's data, and of each vehicle's."""

from __future__ import annotations

from dataclasses import replace

import pytest
from rating.bridges import CART, brook, brook_truss, deck_weight

from movload import Case, Crossing, Loading, Support, Truss, Vehicle, judge, rate, solve
from movload.bridge.permanent import PermanentItems
from movload.bridge.strengths import permitted


def of_vehicles(*asked: Loading | Vehicle) -> list[tuple[str, str, str]]:
    """Return the code, subject and text of the notes that crossings add to the bridge's own."""
    solved = solve(brook())
    notes = judge(solved, asked).notes
    assert notes[: len(solved.notes)] == solved.notes
    return [(note.code, note.subject, note.text) for note in notes[len(solved.notes) :]]


def test_each_vehicles_source_is_noted_once_after_the_bridges_own_notes() -> None:
    solved = solve(brook())
    recalled = Loading.of(CART, source="a handbook, from memory")
    read = Loading.of(Vehicle("lorry", [60e3], []), source="read in its log book")
    notes = judge(solved, [Crossing(recalled), read, Crossing(recalled)]).notes
    assert notes[: len(solved.notes)] == solved.notes
    assert [(note.code, note.subject) for note in notes[len(solved.notes) :]] == [("vehicle-source", "cart")]
    assert notes[-1].text == "axles and spacings: a handbook, from memory"


def test_what_a_vehicles_file_says_is_said_once() -> None:
    loading = Loading.of(CART, source="read in its log book", notes=("no impact is asked for.", "drawbar is fixed."))
    assert of_vehicles(loading, loading) == [
        ("vehicle", "cart", "no impact is asked for."),
        ("vehicle", "cart", "drawbar is fixed."),
    ]


@pytest.mark.parametrize(("heading", "way"), [(1, "+x"), (-1, "-x")])
def test_a_vehicle_that_crosses_one_way_only_says_so(heading: int, way: str) -> None:
    one_way = Loading.of(replace(CART, headings=(heading,)), source="read in its log book")
    said = ("one-way", "cart", f"crosses toward {way} only; not rated the other way.")
    assert of_vehicles(one_way, one_way) == [said]
    both_ways = Loading.of(replace(CART, headings=(-1, 1)), source="read in its log book")
    assert of_vehicles(both_ways) == []


def test_cases_that_go_either_way_between_them_are_not_one_way() -> None:
    out, back = (Case(f"{heading:+d}", replace(CART, headings=(heading,))) for heading in (1, -1))
    read = "read in its log book"
    assert of_vehicles(Loading("shuttle", "farm", (out, back), source=read)) == []
    assert [code for code, *_ in of_vehicles(Loading("shuttle", "farm", (out,), source=read))] == ["one-way"]


def test_one_way_is_rated_that_way_only() -> None:
    """Hanger U1-L1 with 50 kN on L1: toward -x 30 kN stands 2.1 m off in the 4.1 m panel, toward +x in the 3.7 m one.

    The lighter axle off the longer panel's side weighs more: 1 - 2.1 / 4.1 against 1 - 2.1 / 3.7 of it.
    """
    for heading, panel in ((-1, 4.1), (1, 3.7)):
        ratings = rate(brook(), [replace(CART, headings=(heading,))])
        live = ratings.peaks[0]["U1-L1"].highest.value
        assert live == pytest.approx((50e3 + 30e3 * (1 - 2.1 / panel)) * 0.6 * 1.3, rel=1e-12)  # all digits by hand


def test_the_impact_is_said() -> None:
    assert solve(brook(impact=0.25)).impact.statement == "Impact 0.25 as typed."


def test_an_allowance_for_details_silences_its_note() -> None:
    weight = deck_weight(9e3, 0.5)
    codes = [[note.code for note in solve(brook(permanent=one)).notes] for one in
             (weight, PermanentItems(weight.items, 0.15))]  # fmt: skip
    assert codes == [["shares-typed", "detail-allowance"], ["shares-typed"]]


@pytest.mark.parametrize(
    ("bearing", "others"),
    [
        (Support("L4", 0, settlement=0.02), []),
        (Support("L4", 0, settlement=-0.02), []),
        (Support("L4", 0, movement=0.01), ["redundant"]),
    ],
    ids=["sunk", "raised", "pushed"],
)
def test_a_bearing_that_moved_is_noted(bearing: Support, others: list[str]) -> None:
    truss = brook_truss()
    notes = solve(brook(truss=Truss(truss.joints, truss.members, [Support("L0"), bearing]))).notes
    assert [note.code for note in notes] == ["shares-typed", "detail-allowance", *others, "settlement"]
    assert notes[-1].text == "Settlements and imposed movements of bearings are in the permanent effects."


def test_bars_that_permit_no_compression_are_noted() -> None:
    permits = {member.name: permitted(400e3, 300e3) for member in brook_truss().members}
    eyebar = solve(brook(strengths=permits | {"U1-L2": permitted(400e3, 0.0)})).notes
    assert [note.code for note in eyebar] == ["shares-typed", "detail-allowance", "no-compression"]
    assert "a counter must act, and none is modelled" in eyebar[2].text
    unknown = solve(brook(strengths=permits | {"U1-L2": permitted(400e3)})).notes
    assert [note.code for note in unknown] == ["shares-typed", "detail-allowance"]
