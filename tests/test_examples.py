"""The example bridges: each is read, solved and crossed, and one number of each is found again by hand.

All bridges here are invented. The hand sums use statics alone (a section cut and a moment centre, a joint or a simple
beam; for the one redundant truss virtual work), carry five or six digits, and take nothing from movload.
"""

from __future__ import annotations

import re
from pathlib import Path
from typing import TYPE_CHECKING, NamedTuple

import pytest
from numpy.testing import assert_allclose

import movload
from movload.files.factor_sets import read_factor_set
from movload.statics.part import row_of
from movload.statics.permanent import PERMANENT_CLASSES
from movload.traffic.crossing import Crossing

if TYPE_CHECKING:
    from movload.peaks.peaks import Peak
    from movload.rating.rating import Rating
    from movload.rating.ratings import Ratings

FOLDER = Path(__file__).resolve().parents[1] / "examples"
KILONEWTON = 1e3
KIP = 4448.2216152605  # N, exact (NIST SP 811, B.8, from memory)
INCH = 0.0254  # m, exact
FOOT = 0.3048  # m, exact
HAND = 2e-5  # relative: what five or six digits carried through a sum of a few terms leave


class Said(NamedTuple):
    """What a file's opening comment says: who crosses how, what decides it, and whether it is enough."""

    name: str
    vehicle: str
    part: str
    row: str
    sense: str
    enough: bool
    method: str = "permitted"
    place: str = "anywhere"


SAID = [
    Said("kettle_ford", "tractor_slurry_tanker", "either truss", "L3-L4", "tension", False),
    Said("kettle_ford", "tractor_slurry_tanker", "either truss", "L3-U4", "compression", False, method="lrfr"),
    Said("kettle_ford", "combine", "stringer S1", "L1-L2 moment", "moment", True),
    Said("fern_gully", "snow_groomer", "either truss", "L3-L4", "tension", True),
    Said("fern_gully", "en_footbridge_service_vehicle", "either truss", "L3-L4", "tension", False),
    Said("hollis_mill", "type_3", "right truss", "U3-L4", "compression", False),
    Said("hollis_mill", "type_3", "right truss", "U3-L4", "compression", False, place="centre line"),
    Said("stag_ledge", "log_truck", "either truss", "L2-L3", "tension", False),
    Said("stag_ledge", "log_truck", "either truss", "L2-L3", "tension", True, place="centre line"),
    Said("tanner_gorge", "fire_engine", "either truss", "M5-L5", "tension", True),
    Said("tanner_gorge", "ev3", "either truss", "M5-L5", "tension", False),
    Said("tanner_gorge", "ev3", "left truss", "M5-L5", "tension", False, method="lrfr"),
    Said("withy_island", "h5", "stringer S1", "L2-L3 moment", "moment", True),
    Said("withy_island", "en_footbridge_service_vehicle", "stringer S1", "L2-L3 moment", "moment", False),
]
NOT_COVERED = {
    ("kettle_ford", "en"): "laced and battened bars", ("hollis_mill", "en"): "laced and battened bars",
    ("tanner_gorge", "en"): "laced and battened bars", ("withy_island", "lrfr"): "timber by AASHTO LRFD",
    ("withy_island", "load_factor"): "timber by MBE 6B, load factor", ("withy_island", "en"): "timber by EN 1993-1-1",
}  # fmt: skip
"""What the rules of a factor set refuse of an example, by the words of their note."""
NAMES = sorted({said.name for said in SAID})
COMMAND = re.compile(r'movload rate examples/(\w+)\.toml (\w+)(?: --method (\w+))?(?: --at "([^"]+)")?')


def path_of(name: str) -> Path:
    """Return an example's file."""
    return FOLDER / f"{name}.toml"


def rated(name: str, vehicle: str, method: str = "permitted", place: str = "anywhere") -> Ratings:
    """Return an example's ratings."""
    crossing = Crossing(movload.read_vehicle(vehicle), place)
    return movload.rate(movload.read_bridge(path_of(name)), [crossing], read_factor_set(method))


def rating_of(ratings: Ratings, part: str, row: str) -> Rating:
    """Return a row's worse rating, both senses considered."""
    found = ratings.of_row(0, row_of(ratings.solved.effects, (part, row)))
    return min(found, key=lambda one: one.factor)


def live(name: str, vehicle: str, row: str, side: str) -> Peak:
    """Return a row's peak under whole axles on one truss, without impact."""
    bridge = movload.read_bridge(path_of(name))
    lines = movload.influence_lines(bridge.truss, bridge.deck.panel_points)
    peaks = movload.sweep(lines, movload.read_vehicle(vehicle))[row]
    return {"highest": peaks.highest, "lowest": peaks.lowest}[side]


def test_every_example_is_checked_here() -> None:
    assert {path.stem for path in FOLDER.glob("*.toml")} == set(NAMES)


@pytest.mark.parametrize("name", NAMES)
def test_an_example_opens_by_saying_that_it_is_invented(name: str) -> None:
    text = path_of(name).read_text(encoding="utf-8")
    opening = text.partition("title =")[0]
    assert all(line.startswith("#") for line in opening.splitlines())
    words = " ".join(opening.replace("#", " ").split())
    assert "the Alder valley are invented" in words
    commands = [(*found[:2], found[2] or "permitted", found[3] or "anywhere") for found in COMMAND.findall(words)]
    assert commands == [(said.name, said.vehicle, said.method, said.place) for said in SAID if said.name == name]


@pytest.mark.parametrize("said", SAID, ids=lambda said: "-".join(said[:2]))
def test_an_example_rates_as_its_opening_says(said: Said) -> None:
    governing = rated(said.name, said.vehicle, said.method, said.place).governing(0)
    assert (governing.part, governing.effect.name, governing.sense) == (said.part, said.row, said.sense)
    assert (governing.factor >= 1) == said.enough


@pytest.mark.parametrize("method", ["permitted", "lrfr", "load_factor", "allowable_stress", "en"])
@pytest.mark.parametrize("name", NAMES)
def test_every_part_of_an_example_is_rated_by_every_factor_set(name: str, method: str) -> None:
    vehicle = next(said.vehicle for said in SAID if said.name == name)
    ratings = rated(name, vehicle, method)
    refused = [note.text for note in ratings.notes if note.code == "not-covered"]
    if (name, method) in NOT_COVERED:
        assert any(NOT_COVERED[name, method] in text for text in refused)
        assert not ratings.coverage.complete
        return
    assert refused == []
    assert ratings.coverage.complete
    levels = [number for number in range(len(ratings.levels)) if ratings.rates(0, number)]
    assert levels
    for level in levels:
        of_floor = [
            row for row in ratings.rows(0, level=level) if row.effect.part.startswith(("stringer", "floorbeam"))
        ]
        assert {row.effect.part.split()[0] for row in of_floor if 0 < row.factor < 100} == {"stringer", "floorbeam"}


@pytest.mark.parametrize("method", ["permitted", "lrfr", "load_factor", "allowable_stress", "en"])
def test_the_floor_of_withy_island_governs_by_every_factor_set(method: str) -> None:
    """By the older check the trusses carry a third more and its stringers govern; by the rules its floorbeams do."""
    ratings = rated("withy_island", "en_footbridge_service_vehicle", method)
    floor = {"permitted": "stringer S1"}.get(method, "floorbeam L3")
    assert ratings.governing(0).effect.part == floor
    trusses = [row.factor for row in ratings.rows(0, level=0) if row.effect.kind == "axial"]
    assert min(trusses) > 1.25 * ratings.governing(0, level=0).factor


@pytest.mark.parametrize("method", ["lrfr", "load_factor", "allowable_stress"])
def test_a_loss_on_one_truss_only_governs_tanner_gorge(method: str) -> None:
    """64 % of both angles of the left truss's hanger M5-L5 is gone at one end; the right truss's carries its whole."""
    ratings = rated("tanner_gorge", "ev3", method)
    worst = ratings.governing(0)
    assert (worst.part, worst.effect.name) == ("left truss", "M5-L5")
    sound = rating_of(ratings, "right truss", "M5-L5")
    assert_allclose(worst.strength / worst.as_new, 0.36, rtol=HAND)
    assert_allclose(sound.strength, worst.as_new, rtol=1e-12)
    assert sound.factor > 2.5 * worst.factor


def test_tanner_gorge_rusted_hanger_by_equations() -> None:
    """LRFR (6.8.2) FROM MEMORY: two angles 5 x 3 1/2 x 7/16 in, (5 + 3.5 - 0.4375) x 0.4375 = 3.52734 in2 each.

    Gross 7.05469, 36 % left: 2.53969 in2. Net as found: less one hole of 1 in in each thinned short leg, 2.53969 -
    2 x 0.36 x 0.4375 = 2.22469 in2. Steel of 1911: 30 and 60 ksi. Poor 0.85 + 0.05 measured = 0.90, riveted 0.90: 0.81,
    at least 0.85 (KHAN p. 187, READ).
    Yield 0.85 x 0.95 x 30 x 2.53969 = 61.5239 kip; fracture 0.85 x 0.80 x 60 x 2.22469 x 0.90 punched x 0.80 = 65.352.
    """
    hanger = rated("tanner_gorge", "ev3", "lrfr").governing(0)
    assert_allclose(hanger.strength / KIP, 61.5239, rtol=HAND)


@pytest.mark.parametrize("method", ["lrfr", "load_factor", "allowable_stress"])
def test_a_reversal_governs_at_kettle_ford_by_every_factor_set(method: str) -> None:
    diagonal = rated("kettle_ford", "tractor_slurry_tanker", method).governing(0)
    assert (diagonal.effect.name, diagonal.sense) == ("L3-U4", "compression")
    assert diagonal.permanent > 0 > diagonal.live


def test_two_trucks_may_meet_on_hollis_mill_and_one_alone_asks_little_more_than_half_as_much() -> None:
    both, alone = rated("hollis_mill", "type_3"), rated("hollis_mill", "type_3", place="centre line")
    hangers = [rating_of(ratings, "left truss", "U1-L1") for ratings in (both, alone)]
    assert [hanger.abreast for hanger in hangers] == [2, 1]
    assert_allclose(hangers[1].live / hangers[0].live, 0.5 + 0.3 / (20 * FOOT), rtol=1e-12)  # 0.3 m off the centre line
    assert hangers[0].factor < 0.6
    assert hangers[1].factor > 0.95


def test_kettle_ford_bottom_chord_by_a_section_cut() -> None:
    """Bar L3-L4 under the slurry tanker, panel 4 cut, moments about U4 (17.14, 2.55).

    Span 25.69, left of U4 17.14, right 8.55 m. Moment line there: 17.14 x 8.55 / 25.69 = 5.70444 m at U4, falling by
    8.55/25.69 = 0.332814 a metre to the left and by 17.14/25.69 = 0.667186 to the right. The tanker heads left with its
    first 85 kN axle on U4: the other 85 kN at 18.94, 62 kN at 12.94, 28 kN at 10.14.
    M = 85 x 5.70444 + 85 x 0.667186 x 6.75 + 62 x 0.332814 x 12.94 + 28 x 0.332814 x 10.14 = 1229.18 kNm
    (the second 85 kN axle on U4: 1226.4; the first one, heading right: 1127.7).
    Arm of the sagging bar: 2.55 x 4.31 / sqrt(4.31^2 + 0.025^2) = 2.549957 m. Force 1229.18 / 2.549957 = 482.04 kN.
    """
    peak = live("kettle_ford", "tractor_slurry_tanker", "L3-L4", "highest")
    assert_allclose(peak.value / KILONEWTON, 482.04, rtol=HAND)
    assert_allclose(peak.position, 10.14, rtol=1e-12)
    assert peak.heading == -1


def test_fern_gully_top_chord_by_a_section_cut() -> None:
    """Bar U3-U4 under the groomer, panel 4 cut, moments about L3 (7.83, 0).

    Span 18.27, left 7.83, right 10.44 m: 7.83 x 10.44 / 18.27 = 4.47429 m at L3, falling by 10.44/18.27 = 4/7 a metre
    to the left and 3/7 to the right. The groomer heads right with its 26 kN axle on L3: 28 kN 1.2 m to the left, 22 kN
    1.2 m and 18 kN 2.4 m to the right.
    M = 94 x 4.47429 - 28 x 1.2 x 4/7 - (22 x 1.2 + 18 x 2.4) x 3/7 = 420.583 - 19.200 - 29.829 = 371.554 kNm
    (heading left: 366.4). U3 (6.525, 1.35), U4 (9.165, 1.36): the bar passes 1.35 + 0.01 x 1.305 / 2.64 = 1.354943 m
    over L3, x 2.64 / sqrt(2.64^2 + 0.01^2) = 1.354933 m of arm. Force -371.554 / 1.354933 = -274.223 kN.
    """
    peak = live("fern_gully", "snow_groomer", "U3-U4", "lowest")
    assert_allclose(peak.value / KILONEWTON, -274.223, rtol=HAND)
    assert_allclose(peak.position, 7.83 + 2.4, rtol=1e-12)
    assert peak.heading == 1


def test_hollis_mill_middle_eyebar_is_pushed() -> None:
    """Bar U3-L4 under a Type 3 on the left half: panel 4 cut, the right part held in balance. Inches.

    L3 at 575.75, L4 at 768.75, L8 at 1535.25; U3 264.5, U4 264.25 high. The chord U3-U4 falls 0.25 in 193 and meets the
    bottom chord at O, x = 575.75 + 264.5 x 193 / 0.25 = 204769.75. The bar's arm about O is
    (204769.75 - 768.75) x 264.5 / sqrt(193^2 + 264.5^2) = 164794.2; R8's is 204769.75 - 1535.25 = 203234.5.
    The truck heads left, its last axle on L3: 17 kip at 575.75, 17 at 527.75, 16 at 347.75:
    R8 = (9787.75 + 8971.75 + 5564.00) / 1535.25 = 24323.5 / 1535.25 = 15.84335 kip (heading right: 14.23)
    Force = -15.84335 x 203234.5 / 164794.2 = -19.5390 kip, compression.
    """
    peak = live("hollis_mill", "type_3", "U3-L4", "lowest")
    assert_allclose(peak.value / KIP, -19.5390, rtol=HAND)
    assert_allclose(peak.position, 347.75 * INCH, rtol=1e-12)
    assert peak.heading == -1


def test_stag_ledge_reaction_leans_with_its_bed() -> None:
    """Reaction at L6 (30.16, 0.34), bed 12 degrees, under the log truck: moments of the whole truss about L0 (0, 0).

    The reaction acts along (-sin 12, cos 12): its arm is 30.16 x 0.978148 + 0.34 x 0.207912 = 29.5716 m. A load on the
    deck at x gives x / 29.5716, up to U5 at 25.18; beyond, the end stringer takes it to the abutment. The truck heads
    left with its last axle on U5: 8.3 t at 25.18, 8.3 at 23.88, 8.7 at 15.98, 8.7 at 14.61, 5.5 at 9.96:
    208.994 + 198.204 + 139.026 + 127.107 + 54.780 = 728.111 t m, / 29.5716 = 24.6220 t, x 9.80665 = 241.459 kN
    (last axle but one on U5: 24.28 t; heading right: 23.6 t at most). Along x it pushes the truss to the left with
    241.459 x 0.207912 = 50.2022 kN, which the pinned bearing L0 must return.
    """
    peak = live("stag_ledge", "log_truck", "L6 normal", "highest")
    assert_allclose(peak.value / KILONEWTON, 241.459, rtol=HAND)
    assert_allclose(peak.position, 9.96, rtol=1e-12)
    assert peak.heading == -1
    assert_allclose(live("stag_ledge", "log_truck", "L0 x", "highest").value / KILONEWTON, 50.2022, rtol=HAND)


def test_tanner_gorge_rusted_hanger_from_load_to_rating() -> None:
    """Hanger M5-L5 under the EV3: joint L5 of a level chord. Panels beside it 13.00 and 13.04 ft.

    Live: one 31 kip axle on L5, the other 4 ft off on the longer side, the steering axle beyond the next floorbeam:
    31 x (1 + 1 - 4 / 13.04) = 52.4908 kip. The truck's middle 1 ft off the centre line: 5 ft to the kerb less 1 ft less
    half of 6 ft. Share 0.5 + 1 / 17 = 0.558824, with impact: x 0.558824 x 1.20 = 35.1997 kip.
    Permanent: concrete 12 x 0.5 x 150 lb = 0.90, two stringers 0.20, laterals 0.25, railings 0.25: 1.60 klf x 0.5 x
    13.02 ft = 10.4160; half a floorbeam 0.125 x 17 / 2 = 1.0625; bottom chord 23.40/144 ft2 x 490 lb/ft3 x 13.02 ft
    = 1.0367 and half the hanger 7.0547/144 x 490 x 14.0215/2 = 0.1683 (M5 on the diagonal from 28.00 ft: 28 x 13.04 /
    26.04), x 1.15 = 1.3858; sum 12.8643 kip.
    RF = (45 - 12.8643) / 35.1997 = 0.91295.
    """
    assert_allclose(live("tanner_gorge", "ev3", "M5-L5", "highest").value / KIP, 52.4908, rtol=HAND)
    hanger = rated("tanner_gorge", "ev3").governing(0)
    assert_allclose(hanger.permanent / KIP, 12.8643, rtol=HAND)
    assert_allclose(hanger.live / KIP, 35.1997, rtol=HAND)
    assert_allclose(hanger.factor, 0.91295, rtol=HAND)


def test_hollis_mill_floorbeam_between_two_trucks() -> None:
    """Floorbeam L3 at stringer S4 (z = 1.625 ft) under two Type 3 abreast, trusses 20 ft apart. Feet and kip.

    Along: panels beside L3 191.5 and 193 in. One axle of the tandem on L3, the other 48 in off on the shorter panel,
    the steering axle 180 in off on the longer: 17 x (2 - 48 / 191.5) + 16 x (1 - 180 / 193) = 29.73890 + 1.07772 =
    30.8166 kip (the tandem on the longer panel: 30.7328).
    Across: 18 ft between the kerbs hold 1 + 6 + 4 + 6 + 1 exactly: wheels at -8, -2, 2 and 8. Loads right of z = 1.625
    count (10 + z) x 8.375 / 20, left of it (10 - z) x 11.625 / 20, stringers between make no difference, as both are
    straight: 0.8375 + 3.3500 + 4.6500 + 1.1625 = 10.0000 ft per wheel line of 15.4083 kip: 154.083 kip ft.
    Impact 50 / (20 + 125) > 0.30: x 1.30 = 200.308 kip ft.
    """
    beam = rating_of(rated("hollis_mill", "type_3"), "floorbeam L3", "moment at S4")
    assert beam.abreast == 2
    assert_allclose(beam.live / (KIP * FOOT), 200.308, rtol=HAND)


def test_withy_island_stringer_from_load_to_rating() -> None:
    """Stringer S4 (z = 0.90 m) in panel L2-L3, 6.11 m, under the EN service vehicle: no impact on timber.

    Along: 80 and 40 kN, 3.00 m apart: 120 kN act 1.00 m from the 80. Greatest under the 80 when it and they stand
    either side of midspan: 120 x (6.11 / 2 - 1.00 / 2)^2 / 6.11 = 128.2118 kN m for whole axles.
    Across: against the left kerb the middle is at 1.10 - 0.15 - 1.30 / 2 = 0.30, wheels at 0.95 and -0.35. The deck
    overhangs S4: 1 + 0.05 / 0.60 = 1.083333 of one wheel and none of the other, half of that of an axle: x 0.541667 =
    69.4481 kN m.
    Permanent: planks 0.07 x 600 x 9.80665 = 411.879 N/m2 on 0.30 m + 0.25 x (1 + 0.125 / 0.60) m = 0.602083 m: 247.986;
    railing at 1.10, 250 x (1 + 0.20 / 0.60) = 333.333; itself 310: 891.319 N/m x 6.11^2 / 8 = 4.15935 kN m.
    RF = (38 - 4.15935) / 69.4481 = 0.48728.
    """
    stringer = rating_of(rated("withy_island", "en_footbridge_service_vehicle"), "stringer S4", "L2-L3 moment")
    assert_allclose(stringer.live / KILONEWTON, 69.4481, rtol=HAND)
    assert_allclose(stringer.permanent / KILONEWTON, 4.15935, rtol=HAND)
    assert_allclose(stringer.factor, 0.48728, rtol=HAND)


def test_stag_ledge_bracket_carries_the_kerb_side_wheel() -> None:
    """Floorbeam U3 over the left truss (z = 1.80 m), hogging, under the log truck against the left kerb.

    Its steering axle is the widest, 2.05 m: the middle is at 2.35 - 0.45 - 1.025 = 0.875, its outer wheel at 1.90 and
    those of the others, 1.85 m, at 1.80. Between stringers at 1.40 and 2.30 the outer one takes 0.5 / 0.9 and 0.4 / 0.9
    of them and stands 0.50 m beyond the truss: 0.277778 m and 0.222222 m, half of that for whole axles.
    Along: panels of 5.09 m (U2-U3) and 4.96 m (U3-U4). The drive axles, 8.7 t, on U3 and 1.37 m off on the shorter
    panel, the steering axle 4.65 m off on the longer:
    0.111111 x 8.7 x (2 - 1.37 / 4.96) + 0.138889 x 5.5 x (1 - 4.65 / 5.09) = 1.66633 + 0.06603 = 1.73236 t m
    x 9.80665 x 1.25 = 21.2358 kN m (turned round: 21.0954).
    """
    bracket = rating_of(rated("stag_ledge", "log_truck"), "floorbeam U3", "moment over left truss")
    assert bracket.sense == "hogging"
    assert_allclose(-bracket.live / KILONEWTON, 21.2358, rtol=HAND)


def test_withy_island_sunken_pier_by_virtual_work() -> None:
    """What the pier's 12 mm take from its reaction: without the pier, a unit load down at L2 gives each bar n.

    f = sum of n^2 l / (A E), the sinking of L2 a unit load, E = 21000 kN/cm2; L2 halves the span. With z = 1.55 m:
    bottom chord n = M / z under U1 to U4: 0.95806, 2.89032, 2.88065, 0.94516 on 5.93, 6.05, 6.11, 5.87 m:
    sum n^2 l = 111.930, / 18.6396 cm2 = 6.00496
    top chord n = -M / z over L1, L2, L3: 1.91290, 3.86452, 1.89355 on 5.99, 6.07, 6.00 m: 134.084, / 22.5596 = 5.94354
    diagonals n = 0.5 l / z, half panels 2.97, 2.96, 3.03, 3.02, 3.05, 3.06, 2.94, 2.93 m: 31.9437, / 10.3116 = 3.09784
    f = 15.04634 / 21000 = 7.16492e-4 m/kN. The reaction loses 0.012 / f = 16.7483 kN, and the bar U2-U3 over the pier
    gains -3.86452 x 16.7483 = -64.7240 kN. (Areas 4 t (b - t) of tubes 4.9 and 3.9 mm thick.)
    """
    solved = movload.solve(movload.read_bridge(path_of("withy_island")))
    sunk = solved.permanent[PERMANENT_CLASSES.index("settlement")] / KILONEWTON
    assert_allclose(sunk[row_of(solved.effects, "L2 normal")], -16.7483, rtol=HAND)
    assert_allclose(sunk[row_of(solved.effects, "U2-U3")], -64.7240, rtol=HAND)


def test_withy_island_top_chord_is_pushed_only_by_the_sunken_pier() -> None:
    """As its opening comment says: pulled but for the settlement, compressed with it, and no vehicle makes it worse."""
    solved = movload.solve(movload.read_bridge(path_of("withy_island")))
    *weights, settlement = solved.permanent[:, row_of(solved.effects, "U2-U3")]
    assert sum(weights) > 0 > sum(weights) + settlement
    assert live("withy_island", "h5", "U2-U3", "lowest").value == 0
