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

if TYPE_CHECKING:
    from movload.arrays import Floats
    from movload.traffic.loading import Loading
    from movload.traffic.vehicle import Vehicle

FOLDER = Path(__file__).resolve().parents[1] / "vehicles"
TABLE = Path(__file__).with_name("data") / "vehicles.csv"
FILES = sorted(FOLDER.glob("*.toml"))
INVENTED = {"tractor_slurry_tanker", "grain_cart", "combine", "log_truck", "snow_groomer", "fire_engine"}
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
    assert loading.gross > 0


def test_the_library_holds_these_vehicles_and_no_others() -> None:
    expected = INVENTED | {row["file"] for row in ROWS} | {"en_footbridge_service_vehicle"}
    assert set(vehicle_names()) == expected == {path.stem for path in FILES}


@pytest.mark.parametrize("row", ROWS, ids=lambda row: row["file"])
def test_axles_are_those_of_the_table(row: dict[str, str]) -> None:
    """Loads, spacings and gross weight; the tolerance is round-off."""
    loading = movload.read_vehicle(row["file"])
    vehicle = only_vehicle(loading)
    assert_allclose(vehicle.loads / KIP, numbers(row["axle_loads_kip"]), rtol=1e-12)
    assert_allclose(np.diff(vehicle.distances) / FOOT, numbers(row["spacings_ft"]), rtol=1e-12)
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
        vehicle = only_vehicle(movload.read_vehicle(name))
        assert len(vehicle.gauges) == vehicle.loads.size
        assert 1.5 < min(vehicle.gauges) <= max(vehicle.gauges) < 3.5


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


@pytest.mark.parametrize(("span", "moment"), [(30.0, 246.61), (40.0, 345.96), (50.0, 445.57)])
def test_h20_moments_are_the_published_ones(span: float, moment: float) -> None:
    """Khan, Table 6.7 (read): the spans at which the truck governs and the table is right; half of the last digit."""
    found = moment_and_shear(only_vehicle(movload.read_vehicle("h20")), span)
    assert_allclose(found[0], moment, rtol=0, atol=0.00505)
