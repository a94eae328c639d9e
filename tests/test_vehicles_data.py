"""The shipped vehicles: every file reads, says what it is and where its numbers come from, and weighs what it should.

References
----------
Axle loads and spacings: ``tests/data/vehicles.csv``, which names its sources and says what is from memory.
H20 moments: M. A. Khan, *Bridge and Highway Structure Rehabilitation and Repair*, McGraw-Hill 2010, Table 6.7, p. 251
(read).
Moments and end shears of the legal loads, emergency vehicles and H10 on simple spans: not published; derived once from
the same axle loads by a separate script. They guard against change, and prove nothing about the axle loads.
"""

from __future__ import annotations

import csv
import re
from pathlib import Path
from typing import TYPE_CHECKING

import numpy as np
import pytest
from numpy.testing import assert_allclose

import movload
from movload.bridge.truss import Member, Support, Truss
from movload.files.library import vehicle_names
from movload.traffic.vehicle import Vehicle

if TYPE_CHECKING:
    from movload.arrays import Floats
    from movload.traffic.loading import Case, Loading

FOLDER = Path(__file__).resolve().parents[1] / "vehicles"
TABLE = Path(__file__).with_name("data") / "vehicles.csv"
FILES = sorted(FOLDER.glob("*.toml"))
INVENTED = {
    "tractor_slurry_tanker", "grain_cart", "combine", "log_truck", "snow_groomer", "fire_engine", "snow_groomer_tracks",
    "tracked_excavator",
}  # fmt: skip
CROWDS = {"crowd_90_psf", "en_crowd"}
LANES = {"h20_lane", "hs20_lane"}
EN = {"en_footbridge_service_vehicle", "lm71", "sw0", "sw2", "en_lm1_lane_1", "en_lm1_lane_2", "en_lm1_lane_3"}
OF_CASES = {"hl93", "lane_type_legal"}
FOOT = 0.3048  # m, exact (NIST SP 811, B.8, from memory)
KIP = 4448.2216152605  # N, exact (NIST SP 811, B.8, from memory)

# Greatest moment anywhere [kip ft] and end shear [kip] on simple spans of 40, 60 and 100 ft, without impact.
DERIVED = {
    "type_3": ((349.7, 40.70), (598.5, 43.80), (1097.5, 46.28)),
    "type_3s2": ((324.4, 38.75), (618.4, 49.67), (1331.8, 58.60)),
    "type_3_3": ((289.7, 36.40), (564.6, 48.13), (1343.0, 60.88)),
    "su4": ((408.0, 45.30), (677.3, 48.20), (1216.8, 50.52)),
    "su5": ((436.0, 49.70), (744.0, 53.80), (1362.4, 57.08)),
    "su6": ((480.1, 51.32), (826.8, 57.38), (1521.1, 62.23)),
    "su7": ((510.0, 52.37), (897.3, 60.75), (1672.2, 67.45)),
    "ev2": ((409.1, 48.50), (691.9, 51.50), (1263.1, 53.90)),
    "ev3": ((622.0, 71.50), (1050.7, 76.33), (1909.6, 80.20)),
    "h10": ((173.0, 18.60), (272.7, 19.07), (472.4, 19.44)),
}


def recalled() -> list[dict[str, str]]:
    """Return the rows of the table."""
    lines = TABLE.read_text(encoding="utf-8").splitlines()
    return list(csv.DictReader(line for line in lines if not line.startswith("#")))


ROWS = recalled()


def only_case(name: str) -> Case:
    """Return the one case of a shipped loading."""
    (case,) = movload.read_vehicle(name).cases
    return case


def only_vehicle(loading: Loading) -> Vehicle:
    """Return the one vehicle of a loading with one case."""
    (case,) = loading.cases
    assert case.moving is not None
    return case.moving


def numbers(text: str) -> list[float]:
    """Return numbers written with spaces between them."""
    return [float(word) for word in text.split()]


@pytest.mark.parametrize("path", FILES, ids=lambda path: path.stem)
def test_every_vehicle_reads_and_says_what_it_is(path: Path) -> None:
    loading = movload.read_vehicle(path)
    text = path.read_text(encoding="utf-8")
    assert text.startswith("# ")
    assert re.search(r'^kind = "\w+"$', text, re.MULTILINE), "a kind is typed, not left to a default"
    assert loading.source
    assert re.fullmatch(r"[a-z0-9]+(_[a-z0-9]+)*", path.stem)
    assert (loading.gross == 0) == (path.stem in CROWDS)


def test_the_library_holds_these_vehicles_and_no_others() -> None:
    expected = INVENTED | {row["file"] for row in ROWS} | CROWDS | LANES | EN | OF_CASES
    assert set(vehicle_names()) == expected == {path.stem for path in FILES}


@pytest.mark.parametrize("row", ROWS, ids=lambda row: row["file"])
def test_axles_are_those_of_the_table(row: dict[str, str]) -> None:
    """Loads, spacings and gross weight; the tolerance is round-off."""
    loading = movload.read_vehicle(row["file"])
    vehicle = only_vehicle(loading)
    assert_allclose(vehicle.loads / KIP, numbers(row["axle_loads_kip"]), rtol=1e-12)
    for gap, typed in zip(vehicle.spacings, row["spacings_ft"].split(), strict=True):
        assert_allclose(
            np.array(gap) / FOOT, numbers(typed.replace("-", " ")) if "-" in typed else float(typed), rtol=1e-12
        )
    assert_allclose(loading.gross / KIP, float(row["gross_kip"]), rtol=1e-12)


@pytest.mark.parametrize("row", ROWS, ids=lambda row: row["file"])
def test_what_is_from_memory_says_so(row: dict[str, str]) -> None:
    source = movload.read_vehicle(row["file"]).source
    assert "from memory" in source
    assert ("axle limits read" in source) == ("axle limits read" in row["tag"])


def test_hs20_says_which_of_its_rear_spacings_it_has() -> None:
    """The truck's rear spacing may be 14 to 30 ft; a rating shows the title, so the title says which it is."""
    loading = movload.read_vehicle("hs20")
    assert loading.title == f"HS20 truck, rear spacing {np.diff(only_vehicle(loading).distances)[-1] / FOOT:g} ft"


def test_emergency_vehicles_stand_at_the_axle_limits() -> None:
    """Axle limits of the FAST Act 2015 (read): steering axle 24, driven axle 33.5, tandem 62, gross 86 kip."""
    ev2, ev3 = (only_vehicle(movload.read_vehicle(name)) for name in ("ev2", "ev3"))
    assert_allclose(ev2.loads / KIP, [24, 33.5], rtol=1e-12)
    assert_allclose([ev3.loads[0] / KIP, ev3.loads[1:].sum() / KIP, ev3.gross / KIP], [24, 62, 86], rtol=1e-12)


def test_en_footbridge_service_vehicle() -> None:
    """EN 1991-2: axles of 80 and 40 kN, wheelbase 3.0 m, track 1.3 m (from memory)."""
    loading = movload.read_vehicle("en_footbridge_service_vehicle")
    vehicle = only_vehicle(loading)
    assert "from memory" in loading.source
    assert vehicle.loads.tolist() == [80_000, 40_000]
    assert vehicle.spacings == (3.0,)
    assert vehicle.gauges == (1.3, 1.3)


def test_exactly_the_invented_say_so_and_give_gauges() -> None:
    said = {path.stem for path in FILES if movload.read_vehicle(path).source == "invented"}
    assert said == INVENTED
    for name in INVENTED:
        for case in movload.read_vehicle(name).cases:
            assert case.moving is not None
            gauges = [*case.moving.gauges, *(strip.gauge for strip in case.moving.strips)]
            assert len(gauges) == case.moving.loads.size + len(case.moving.strips)
            assert 1.5 < min(gauges) <= max(gauges) < 3.5


@pytest.mark.parametrize(("name", "weight", "truck"), [("h20_lane", 40, "h20"), ("hs20_lane", 72, "hs20")])
def test_lane_loads(name: str, weight: float, truck: str) -> None:
    """0.64 kip/ft with 18 kip (Khan, Table 6.7, read) or 26 kip (from memory); it stands for its truck's weight."""
    case = only_case(name)
    assert case.moving is None
    lane, edge = case.fills
    assert (lane.shape, edge.shape, lane.where, edge.where) == ("uniform", "knife edge", "adverse", "adverse")
    assert_allclose([lane.load * FOOT / KIP, edge.load / KIP, edge.web_load / KIP], [0.64, 18, 26], rtol=1e-12)
    assert_allclose(movload.read_vehicle(name).gross / KIP, weight, rtol=1e-12)
    assert_allclose(movload.read_vehicle(name).gross, movload.read_vehicle(truck).gross, rtol=1e-12)


def test_hl93_is_truck_or_tandem_with_the_lane() -> None:
    """Lane 0.64 kip/ft without impact (Khan, p. 167, read); truck, tandem of 25 kip at 4 ft, two trucks from memory."""
    loading = movload.read_vehicle("hl93")
    truck, tandem, two = loading.cases
    assert loading.dynamic
    for case in loading.cases:
        assert_allclose(case.fills[0].load * FOOT / KIP, 0.64, rtol=1e-12)
        assert (case.fills[0].impact, case.relieving) == (False, 0.0)
        assert case.moving is not None
    assert truck.moving is not None
    assert tandem.moving is not None
    assert_allclose(tandem.moving.loads / KIP, [25, 25], rtol=1e-12)
    assert_allclose(tandem.moving.distances / FOOT, [0, 4], rtol=1e-12)
    for case, ranged in ((truck, True), (two, False)):
        assert case.moving is not None
        assert_allclose(case.moving.loads / KIP, [8, 32, 32], rtol=1e-12)
        assert case.moving.has_ranges == ranged
    assert_allclose(np.array(truck.moving.spacings[1]) / FOOT, [14, 30], rtol=1e-12)
    assert (two.factor, two.continuous, truck.continuous, tandem.convoy) == (0.9, True, False, None)
    assert two.convoy is not None
    assert two.convoy.most == 2
    assert_allclose(two.convoy.headway / FOOT, 50, rtol=1e-12)


def test_the_lane_type_legal_load_is_three_quarters_of_a_type_3_3() -> None:
    """0.75 x Type 3-3 with 0.2 kip/ft above 200 ft; two of them 30 ft apart where continuous (from memory)."""
    long, two = movload.read_vehicle("lane_type_legal").cases
    whole = only_vehicle(movload.read_vehicle("type_3_3"))
    for case in (long, two):
        assert case.moving is not None
        assert_allclose(case.moving.loads, 0.75 * whole.loads, rtol=1e-12)
        assert case.moving.spacings == whole.spacings
        assert_allclose(case.fills[0].load * FOOT / KIP, 0.2, rtol=1e-12)
        assert not case.fills[0].impact
    assert_allclose([long.above / FOOT, two.above], [200, 0], rtol=1e-12)
    assert (long.continuous, long.convoy, two.continuous) == (False, None, True)
    assert two.convoy is not None
    assert_allclose(two.convoy.headway / FOOT, 30, rtol=1e-12)
    assert_allclose(movload.read_vehicle("lane_type_legal").gross, whole.gross, rtol=1e-12)


def test_cooper_e80_has_the_published_moment_sums() -> None:
    """Moments of one rail's wheels 1 to 8 of an E40 about wheel 8, and 1 to 4 about wheel 4: 2851 and 480 kip ft.

    C. A. Ellis, *Essentials in the Theory of Framed Structures*, McGraw-Hill 1922, pp. 165-166 (read). An E40's rail
    carries a quarter of an E80's track. The tail of 8 kip/ft (read) begins 5 ft behind the last axle (from memory).
    """
    vehicle = only_vehicle(movload.read_vehicle("cooper_e80"))
    loads, at = vehicle.loads / KIP / 4, vehicle.distances / FOOT
    for last, total in ((8, 2851.0), (4, 480.0)):
        assert_allclose(loads[:last] @ (at[last - 1] - at[:last]), total, rtol=1e-12)
    assert vehicle.tail is not None
    assert_allclose(vehicle.tail.load * FOOT / KIP, 8.0, rtol=1e-12)
    assert_allclose(vehicle.tail.start / FOOT, at[-1] + 5.0, rtol=1e-12)


def test_lm71() -> None:
    """Four axles of 250 kN at 1.6 m, 80 kN/m outside (an article on UIC 702, read), from 0.8 m on (from memory)."""
    case = only_case("lm71")
    assert case.moving is not None
    assert case.moving.loads.tolist() == [250e3] * 4
    assert_allclose(case.moving.distances, [0, 1.6, 3.2, 4.8], rtol=1e-15)
    (fill,) = case.fills
    assert (fill.load, fill.where, fill.clear, case.relieving) == (80e3, "outside", (0.8, 0.8), 0.0)


@pytest.mark.parametrize(("name", "load", "length", "gap"), [("sw0", 133, 15, 5.3), ("sw2", 150, 25, 7)])
def test_sw(name: str, load: float, length: float, gap: float) -> None:
    """133 kN/m on twice 15 m, 5.3 m apart; 150 kN/m on twice 25 m, 7 m apart (from memory); whole and once."""
    case = only_case(name)
    assert case.moving is not None
    assert case.moving.loads.size == 0
    assert [(one.load, one.start, one.length) for one in case.moving.strips] == [
        (load * 1e3, 0.0, length), (load * 1e3, pytest.approx(length + gap, rel=1e-15), length),
    ]  # fmt: skip
    assert (case.relieving, case.convoy, case.fills) == (1.0, None, ())
    assert_allclose(movload.read_vehicle(name).gross, 2e3 * load * length, rtol=1e-15)


@pytest.mark.parametrize(("lane", "axle", "area"), [(1, 300, 9.0), (2, 200, 2.5), (3, 100, 2.5)])
def test_en_lm1(lane: int, axle: float, area: float) -> None:
    """Tandems of two axles of 300, 200 and 100 kN, 9 and 2.5 kN/m2 (read), 1.2 m and lanes of 3 m (from memory)."""
    loading, case = movload.read_vehicle(f"en_lm1_lane_{lane}"), only_case(f"en_lm1_lane_{lane}")
    assert case.moving is not None
    assert case.moving.loads.tolist() == [axle * 1e3] * 2
    assert case.moving.spacings == (1.2,)
    assert_allclose(case.fills[0].load, area * 1e3 * 3.0, rtol=1e-15)
    assert not loading.dynamic  # impact is in the model
    assert "one lane alone" in loading.notes[0]


def test_crowds() -> None:
    """90 psf is 4309 N/m2 (from memory; the conversion exact); EN's dense crowd begins at 5 kN/m2 (from memory)."""
    for name, load, density in (("crowd_90_psf", 90 * KIP / 1e3 / FOOT**2, ""), ("en_crowd", 5e3, "en crowd")):
        loading = movload.read_vehicle(name)
        fills = [case.fills for case in loading.cases]
        assert [one.across for (one,) in fills] == ["full width", "left half", "right half"]
        assert_allclose([one.load for (one,) in fills], load, rtol=1e-12)
        assert all(one.per_area and one.density == density for (one,) in fills)
        assert (loading.kind, loading.dynamic) == ("crowd", False)


def test_the_groomer_weighs_the_same_on_its_tracks() -> None:
    """Both invented; to the third digit, as their loads are written."""
    axles, tracks = (movload.read_vehicle(name).gross for name in ("snow_groomer", "snow_groomer_tracks"))
    assert_allclose(tracks, axles, rtol=5e-3)


def test_a_weighbridge_in_tonnes_becomes_newtons() -> None:
    """The log truck: 5.5 + 2 x 8.7 + 2 x 8.3 = 39.5 t, x 9806.65 N/t (standard gravity) = 387 362.7 N."""
    assert_allclose(movload.read_vehicle("log_truck").gross, 387_362.7, rtol=2e-7)  # the hand sum's last digit


def king_post(left: float, span: float) -> Truss:
    """Return a truss with a post of 1 m at ``left`` [m]: its bottom chord carries the beam's moment there over 1 m."""
    bars = [("L0", "L1"), ("L1", "L2"), ("L0", "U1"), ("U1", "L2"), ("U1", "L1")]
    joints = {"L0": (0.0, 0.0), "L1": (left, 0.0), "L2": (span, 0.0), "U1": (left, 1.0)}
    return Truss(joints, [Member(*bar, 1e-2, 2e11) for bar in bars], [Support("L0"), Support("L2", 0)])


def worst_places(vehicle: Vehicle, span: float) -> list[float]:
    """Return the places of a beam, folded to its left half, where a greatest moment may stand.

    A moment under an axle is greatest where midspan halves the distance between that axle and the resultant of the
    axles on the span. Which axles those are is not known beforehand: every run of neighbours is tried.
    """
    at, loads = vehicle.distances, vehicle.loads
    places = {span / 2}
    for first in range(loads.size):
        for last in range(first, loads.size):
            run = slice(first, last + 1)
            resultant = float(np.average(at[run], weights=loads[run]))
            places |= {span / 2 - abs(float(axle) - resultant) / 2 for axle in at[run]}
    return sorted({round(place, 9) for place in places if 0 < place < span})


def moment_and_shear(vehicle: Vehicle, span: float) -> Floats:
    """Return the greatest moment [kip ft] and the greatest end shear [kip] on a span [ft], from king posts."""
    moments, shears = [], []
    for place in worst_places(vehicle, span * FOOT):
        peaks = movload.sweep(movload.influence_lines(king_post(place, span * FOOT), ["L0", "L1", "L2"]), vehicle)
        moments.append(peaks["L0-L1"].highest.value)
        shears.append(peaks["L0 y"].highest.value)
    return np.array([max(moments) / (KIP * FOOT), max(shears) / KIP])


@pytest.mark.parametrize(("name", "rows"), DERIVED.items(), ids=DERIVED)
def test_simple_span_moments_and_shears_do_not_change(name: str, rows: tuple[tuple[float, float], ...]) -> None:
    """Regression values (derived), to half of their last digit and a hundredth of it for a tie in rounding."""
    vehicle = only_vehicle(movload.read_vehicle(name))
    found = np.array([moment_and_shear(vehicle, span) for span in (40.0, 60.0, 100.0)])
    assert_allclose(found[:, 0], [moment for moment, _ in rows], rtol=0, atol=0.0505)
    assert_allclose(found[:, 1], [shear for _, shear in rows], rtol=0, atol=0.00505)


def test_nrl_at_its_least_spacing_does_not_change() -> None:
    """Regression values (derived) with the first spacing at 6 ft; to half of the last digit and a tie in rounding."""
    ranged = only_vehicle(movload.read_vehicle("nrl"))
    vehicle = Vehicle("NRL, 6 ft", ranged.loads, [6 * FOOT, *ranged.spacings[1:]])
    found = np.array([moment_and_shear(vehicle, span) for span in (40.0, 60.0, 100.0)])
    assert_allclose(found[:, 0], [537.6, 937.1, 1736.6], rtol=0, atol=0.0505)
    assert_allclose(found[:, 1], [52.70, 61.60, 68.96], rtol=0, atol=0.00505)


@pytest.mark.parametrize(("span", "moment"), [(30.0, 246.61), (40.0, 345.96), (50.0, 445.57)])
def test_h20_moments_are_the_published_ones(span: float, moment: float) -> None:
    """Khan, Table 6.7 (read): the spans at which the truck governs and the table is right; half of the last digit."""
    found = moment_and_shear(only_vehicle(movload.read_vehicle("h20")), span)
    assert_allclose(found[0], moment, rtol=0, atol=0.00505)
