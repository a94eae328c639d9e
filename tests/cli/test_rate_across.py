"""``movload rate`` across the deck: places, speeds, how many abreast, what the file leaves out, CSV and deflections.

A load at z from the middle of trusses 6.4 m apart reaches them with 1/2 +- z/6.4, which with the hand-worked pull on
hanger U1-L1 (tests/cli/across.py) gives every number here. The tables themselves are checked in tests/report.
"""

from __future__ import annotations

import csv
import re
from typing import TYPE_CHECKING, Any

import pytest
from cli.across import ACROSS, BACK, FORTH, HAND, ROOM, hangers, row_in, share
from cli_run import CART, changed, movload, numbers_in, written
from numpy.testing import assert_allclose

from movload.files.schema.published import RatingsDocument

if TYPE_CHECKING:
    from pathlib import Path


@pytest.fixture
def asked(tmp_path: Path) -> list[Any]:
    """Return the command's words."""
    return ["rate", written(tmp_path, ACROSS), written(tmp_path, CART, "cart.toml")]


PLACES = {
    "left kerb": (FORTH * share(ROOM), FORTH * share(-ROOM)),
    "right kerb": (FORTH * share(-ROOM), FORTH * share(ROOM)),
    "centre line": (FORTH * share(0.3), FORTH * share(0.3)),
    "own lane": (BACK * share(ROOM), FORTH * share(ROOM)),  # keeping right: on the left of the bridge toward -x
    "anywhere": (FORTH * (share(ROOM) + share(ROOM - 3.1)),) * 2,  # a second cart 1.9 + 1.2 m beside the first
    "0.4 m": (FORTH * share(0.4), FORTH * share(-0.4)),
    "-16 in": (FORTH * share(-0.4064), FORTH * share(0.4064)),
    "1'-6\"": (FORTH * share(0.4572), FORTH * share(-0.4572)),
    "0 m": (FORTH / 2, FORTH / 2),
}


@pytest.mark.parametrize("place", PLACES)
def test_each_place(asked: list[Any], place: str) -> None:
    read = movload(*asked, f"--at={place}", "--json").json()
    assert_allclose(hangers(read), PLACES[place], rtol=HAND)
    (crossing,) = read["crossings"]
    by_name = place in {"left kerb", "right kerb", "centre line", "own lane", "anywhere"}
    assert crossing["place"] == (place if by_name else "offset")
    assert (crossing["z"] is None) == by_name
    assert crossing["most_abreast"] == (2 if place == "anywhere" else 1)
    sides = {row["stands_for"] for row in read["rows"] if row["part"].endswith("truss")}
    alike = place in {"anywhere", "centre line", "0 m"}
    assert sides == ({"either truss"} if alike else {"left truss", "right truss"})


def test_anywhere_is_the_place_when_nothing_is_said(asked: list[Any]) -> None:
    plain = movload(*asked, "--json")
    assert plain.out == movload(*asked, "--at", "anywhere", "--json").out
    placed = row_in(plain.json(), "left truss", "U1-L1", "tension")["placement"]
    assert placed["vehicle"] == [1, 1, 1, 2, 2, 2]
    assert_allclose(placed["z"], [ROOM - 3.1] * 3 + [ROOM] * 3, rtol=HAND)
    assert_allclose(placed["share"], [share(ROOM - 3.1)] * 3 + [share(ROOM)] * 3, rtol=HAND)
    assert placed["factor"] == [1.0] * 6
    assert row_in(plain.json(), "left truss", "U1-L1", "tension")["abreast"] == 2


def test_traffic_that_keeps_left_has_its_lane_on_the_other_side(asked: list[Any], tmp_path: Path) -> None:
    left = written(tmp_path, changed(ACROSS, ("clearance = 0.4", 'clearance = 0.4\nkeeps = "left"')), "left.toml")
    read = movload("rate", left, asked[2], "--at", "own lane", "--json").json()
    assert_allclose(hangers(read), (FORTH * share(ROOM), BACK * share(ROOM)), rtol=HAND)


@pytest.mark.parametrize(("wander", "z"), [("0.1 m", 0.1), ("0 m", 0.0), ("6 in", 0.1524), ("2.2 m", ROOM)])
def test_the_stray_about_the_centre_line(asked: list[Any], wander: str, z: float) -> None:
    """However far it strays, the kerbs hold it."""
    read = movload(*asked, "--at", "centre line", "--wander", wander, "--json").json()
    assert_allclose(hangers(read), [FORTH * share(z)] * 2, rtol=HAND)


def test_places_and_speeds_are_compared_line_by_line(asked: list[Any]) -> None:
    words = (*asked, "h5", "--at", "left kerb", "--at", "0.4 m", "--speed", "8 km/h", "--speed", "5 mph")
    read = movload(*words, "--json").json()
    RatingsDocument.model_validate(read)
    assert [(one["title"], one["place"], one["z"]) for one in read["crossings"]] == [
        (title, place, z)
        for title in ("Alder hay cart", "H5 maintenance vehicle")
        for place, z in (("left kerb", None), ("left kerb", None), ("offset", 0.4), ("offset", 0.4))
    ]
    # km/h and mph in m/s, exact
    assert_allclose([one["speed"] for one in read["crossings"]], [8 / 3.6, 5 * 0.44704] * 4, rtol=1e-15)
    for number, place in ((0, "left kerb"), (1, "left kerb"), (2, "0.4 m"), (3, "0.4 m")):
        assert_allclose(hangers(read, crossing=number), PLACES[place], rtol=HAND)
    out = movload(*words).out
    assert out.count(" *") == len(read["crossings"])  # beside each safe weight
    assert "* needs control on site (place or speed): no sign weight." in out
    assert " ".join(out.split()).count("left kerb, 8 km/h") >= 2
    assert "No rule of this method drops impact at the speed asked for Alder hay cart, H5 maintenance vehicle" in out


def test_how_many_abreast(asked: list[Any]) -> None:
    for words, expected in (
        (("--abreast", "1"), FORTH * share(ROOM)),
        (("--abreast", "2"), FORTH * (share(ROOM) + share(ROOM - 3.1))),
        (("--abreast", "0"), FORTH * (share(ROOM) + share(ROOM - 3.1))),  # as many as fit
    ):
        read = movload(*asked, *words, "--json").json()
        assert_allclose(hangers(read), [expected] * 2, rtol=HAND)
    lone = movload(*asked, "--abreast", "1", "--json").json()["rows"]
    assert {row["abreast"] for row in lone} == {0, 1}


def test_traffic_beside_it_is_held_fixed(asked: list[Any]) -> None:
    """Cart at the left kerb, its like 3.1 m beside it: the hanger's RF is (R - D - held)/live, each by its own share.

    Impact 0.3 on both.
    """
    alone, both = (
        movload(*asked, "--at", "left kerb", *more, "--json").json() for more in ([], ["--beside", asked[2]])
    )
    (crossing,) = both["crossings"]
    assert (crossing["beside"], crossing["most_abreast"]) == ("Alder hay cart", 2)
    one, row = (row_in(read, "left truss", "U1-L1", "tension") for read in (alone, both))
    assert_allclose((row["live"], row["held"]), (1.3 * FORTH * share(ROOM), 1.3 * FORTH * share(ROOM - 3.1)), rtol=HAND)
    assert (one["held"], one["held_factor"], one["live"]) == (0.0, 1.0, row["live"])
    assert_allclose(row["factor"], (row["strength"] - row["permanent"] - row["held"]) / row["live"], rtol=HAND)
    axles = len(one["placement"]["x"])
    assert row["placement"]["held"] == [False] * axles + [True] * axles
    RatingsDocument.model_validate(both)
    told = movload(*asked, "--at", "left kerb", "--beside", asked[2], "--explain", "left truss U1-L1").out
    assert "2, held" in told
    assert re.search(r"RF = \(strength [\d.]+ - permanent \(\+[\d.]+\) - 1 x held [\d.]+\) / live", told)
    assert "Beside it may stand Alder hay cart" in told


@pytest.mark.parametrize(
    ("more", "said"),
    [
        (["--beside", "nobody"], '"nobody" is not in the library'),
        (["--beside", "h20", "--abreast", "2"], "--beside: with other traffic beside it one vehicle crosses"),
    ],
)
def test_what_may_not_be_asked_beside(asked: list[Any], more: list[str], said: str) -> None:
    ended = movload(*asked, *more)
    assert ended.code == 1
    assert said in ended.err


def test_multiple_presence_is_the_methods(asked: list[Any]) -> None:
    """LRFR: 1.20 on one and 1.00 on two (from memory); two with 1.03 of an axle beat 1.20 x 0.76 of one."""
    read = movload(*asked, "--method", "lrfr", "--abreast", "1", "--json").json()
    assert_allclose(hangers(read), [1.2 * FORTH * share(ROOM)] * 2, rtol=HAND)
    read = movload(*asked, "--method", "lrfr", "--json").json()
    assert_allclose(hangers(read), [FORTH * (share(ROOM) + share(ROOM - 3.1))] * 2, rtol=HAND)


KINDS = {"permit": True, "farm": False, "design": False}


@pytest.mark.parametrize("kind", KINDS)
@pytest.mark.parametrize(("speed", "slow"), [("10 mph", True), ("16 km/h", True), ("11 mph", False)])
def test_a_crawl_drops_impact_where_the_method_says_so(
    asked: list[Any], tmp_path: Path, kind: str, speed: str, *, slow: bool
) -> None:
    """LRFR up to 10 mph and for permit loads only (from memory)."""
    cart = written(tmp_path, changed(CART, ('kind = "farm"', f'kind = "{kind}"')), "kind.toml")
    read = movload("rate", asked[1], cart, "--method", "lrfr", "--speed", speed, "--at=0 m", "--json").json()
    dropped = slow and KINDS[kind]
    assert {row["impact"] for row in read["rows"]} == ({0.0} if dropped else {0.0, 0.3})  # planks are timber
    out = movload("rate", asked[1], cart, "--method", "lrfr", "--speed", speed).out
    assert ("No rule of this method drops impact" in out) is not dropped


def test_csv_has_forces_and_moments_with_their_units(asked: list[Any], tmp_path: Path) -> None:
    out = tmp_path / "out.csv"
    rows = movload(*asked, "--json", "--csv", out).json()["rows"]
    with out.open(encoding="utf-8", newline="") as file:
        lines = list(csv.DictReader(file))
    assert {line["kind"]: line["unit"] for line in lines} == {"axial": "kN", "shear": "kN", "moment": "kN m"}
    for line, row in zip(lines, rows, strict=True):
        assert (line["part"], line["row"], line["kind"]) == (row["part"], row["row"], row["kind"])
        assert (int(line["abreast"]), int(line["crossing_number"])) == (row["abreast"], row["crossing_number"])
        # rtol: one division by the unit
        assert_allclose([float(line[name]) * 1e3 for name in ("strength", "live")], [row["strength"], row["live"]],
                        rtol=1e-15)  # fmt: skip


def test_deflections_are_in_the_document(asked: list[Any]) -> None:
    """With the spans of the bearings and the file's limit; against a kerb the two trusses deflect in their shares."""
    found = movload(*asked, "--at", "left kerb", "--json").json()["deflections"]
    by_place = {(one["part"], one["point"]): one for one in found}
    left, right = (by_place[f"{side} truss", "L1"]["down"] for side in ("left", "right"))
    assert_allclose(left / right, share(ROOM) / share(-ROOM), rtol=HAND)
    assert {one["limit"] for one in found} == {400.0}
    assert_allclose(by_place["left truss", "L1"]["ratio"], 9.6 / left, rtol=HAND)


def test_a_floor_that_is_too_weak_fails_the_gate(asked: list[Any], tmp_path: Path) -> None:
    assert movload(*asked, "--gate").code == 0
    weak = changed(ACROSS, ("moment = 60, shear = 90", "moment = 12, shear = 90"))
    done = movload("rate", written(tmp_path, weak, "weak.toml"), asked[2], "--gate")
    assert done.code == 3
    assert re.search(r"not adequate\s+stringer S\d, L\d-L\d moment", done.out)
    bare = changed(ACROSS, ("permits = { moment = 190, shear = 170 }", "permits = { moment = 190 }"))
    done = movload("rate", written(tmp_path, bare, "bare.toml"), asked[2], "--gate")
    assert done.code == 3  # adequate only if their shear is
    assert "in one sense only (floorbeam" in done.out


def test_without_its_floor_the_trusses_are_rated_and_the_rest_is_named(asked: list[Any], tmp_path: Path) -> None:
    text = re.sub(r"(?ms)^\[floor\..*?(?=^\[permanent\]$)", "", ACROSS)
    read = movload("rate", written(tmp_path, text, "bare.toml"), asked[2], "--json").json()
    assert read["coverage"]["not_rated"] == ["floor", "deck"]
    assert_allclose(hangers(read), PLACES["anywhere"], rtol=HAND)
    planks = re.sub(r"(?ms)^\[floor\.planks\].*?(?=^\[permanent\]$)", "", ACROSS)
    read = movload("rate", written(tmp_path, planks, "planks.toml"), asked[2], "--json").json()
    assert read["coverage"]["not_rated"] == ["deck planks", "deck"]


def test_a_typed_share_knows_no_place_across(asked: list[Any], tmp_path: Path) -> None:
    """The kerbs' rows and the share's rows agree where the place has that share."""
    text = re.sub(r"(?ms)^\[floor\..*?(?=^\[permanent\]$)", "", ACROSS)
    text = re.sub(r"(?ms)^\[\[permanent\.items\]\].*?(?=^\[rating\]$)", "", text)
    widths = "truss_spacing = 6.4\nkerbs = [-3.0, 3.0]\nclearance = 0.4\n"
    text = changed(text, (widths, "truss_share = 0.75\n"), ("[permanent]", "[permanent]\ndeck = 0\ntruss_share = 0.5"))
    read = movload("rate", written(tmp_path, text, "share.toml"), asked[2], "--json").json()
    (crossing,) = read["crossings"]
    assert (crossing["place"], crossing["most_abreast"]) == ("typed share", 1)
    assert_allclose(row_in(read, "truss", "U1-L1", "tension")["live"], FORTH * 0.75 * 1.3, rtol=HAND)


@pytest.mark.parametrize(
    "words", [["draw"], ["influence"], ["influence", "U1-L1"], ["sweep", "h5"], ["rate", "h5", "h20"]], ids=" ".join
)
def test_the_other_commands_read_it_too(tmp_path: Path, words: list[str]) -> None:
    path = written(tmp_path, ACROSS)
    for more in ([], ["--json"]):
        done = movload(words[0], path, *words[1:], *more)
        assert (done.code, done.err) == (0, "")
    assert all(abs(number) < 1e300 for number in numbers_in(done.json()))


def test_traffic_beside_is_said_in_the_drawing(asked: list[Any], tmp_path: Path) -> None:
    """Its own vehicle is drawn; the other's forces are in the bars, and both are said."""
    picture = tmp_path / "a.svg"
    movload(*asked, "--at", "left kerb", "--beside", asked[2], "--plot", picture)
    text = picture.read_text(encoding="utf-8")
    assert "other traffic beside it is not drawn" in text
    assert "side by side" not in text
    assert "traffic beside it, the truss" in " ".join(text.split())


def test_two_abreast_are_drawn(asked: list[Any], tmp_path: Path) -> None:
    picture = tmp_path / "new.svg"
    done = movload(*asked, "--plot", picture)
    assert (done.code, done.err) == (0, f"wrote {picture}\n")
    assert "Alder weir road" in picture.read_text(encoding="utf-8")
