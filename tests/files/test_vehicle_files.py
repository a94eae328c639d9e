"""A vehicle file's strips, tail, fills, cases and convoys become the domain's, and what does not fit is refused."""

from __future__ import annotations

import math
from typing import TYPE_CHECKING

import numpy as np
import pytest
from numpy.testing import assert_allclose

from movload.errors import UnknownNameError
from movload.files.read import vehicle_from
from movload.files.vehicles import vehicle_from as vehicle_from_its_own_module

if TYPE_CHECKING:
    from movload.traffic.loading import Case, Loading
    from movload.traffic.vehicle import Vehicle

FOOT = 0.3048  # m, exact (NIST SP 811, B.8, from memory)
KIP = 4448.2216152605  # N, exact (NIST SP 811, B.8, from memory)
HEAD = 'title = "Alder works train"\nkind = "permit"\nsource = "invented"\n'
METRIC = HEAD + 'units = { length = "m", force = "kN" }\n'
US = HEAD + 'units = { length = "ft", force = "kip" }\n'
AXLES = "axles = [ { load = 40 }, { load = 80, after = 2 } ]\n"
LANE = '{ shape = "uniform", load = 9 }'


def read(text: str, head: str = METRIC) -> Loading:
    """Return the loading of a file's text after a head."""
    return vehicle_from(head + text, "works.toml")


def only(text: str, head: str = METRIC) -> Case:
    """Return its only case."""
    (case,) = read(text, head).cases
    return case


def moving(case: Case) -> Vehicle:
    """Return a case's vehicle."""
    assert case.moving is not None
    return case.moving


def test_both_modules_give_the_same_reader() -> None:
    assert vehicle_from is vehicle_from_its_own_module


def test_tracks_alone_carry_a_vehicle() -> None:
    """2 x 3 m x 30 kN/m weigh 180 kN; there is no axle, so no distance, and the front is where strips begin."""
    vehicle = moving(
        only(
            "strips = [\n  { load = 30, start = 0, length = 3, gauge = 2 },\n"
            "  { load = 30, start = 4, length = 3, gauge = 2 },\n]"
        )
    )
    assert (vehicle.loads.size, vehicle.distances.size, vehicle.spacings, vehicle.gauges) == (0, 0, (), ())
    assert vehicle.gross == 180e3
    assert [(one.start, one.length, one.load, one.gauge) for one in vehicle.strips] == [
        (0, 3, 30e3, 2),
        (4, 3, 30e3, 2),
    ]
    assert not vehicle.has_ranges


def test_strips_and_tail_are_measured_from_either_end() -> None:
    vehicle = moving(
        only(
            AXLES + "strips = [ { load = 8, start = -3, length = 1 }, { load = 8, after = 1.5, length = 1 } ]\n"
            "tail = { load = 8, after = 5 }\n"
        )
    )
    assert [one.start for one in vehicle.strips] == [-3.0, 3.5]
    assert vehicle.tail is not None
    assert (vehicle.tail.start, vehicle.tail.load) == (7.0, 8e3)
    assert math.isnan(vehicle.tail.gauge)
    assert vehicle.gross == 136e3  # a tail has no weight: it never ends


def test_loads_of_every_kind_in_the_files_units() -> None:
    """A bare number is kip, kip/ft or kip/ft2 by what the load is."""
    fills = only(
        """fills = [
  { shape = "uniform", load = 0.64, impact = "none", gauge = 6 },
  { shape = "knife edge", load = 18, web_load = 26 },
  { shape = "uniform", load = 0.09, per_area = true, across = "full width" },
  { load = "90 psf", across = "left half", per_area = true, shape = "uniform" },
]""",
        US,
    ).fills
    lane, edge, area, psf = fills
    assert_allclose([lane.load, lane.gauge], [0.64 * KIP / FOOT, 6 * FOOT], rtol=1e-14)
    assert (lane.impact, lane.across, lane.where, edge.impact) == (False, "lane", "adverse", True)
    assert_allclose([edge.load, edge.web_load], [18 * KIP, 26 * KIP], rtol=1e-14)
    assert math.isnan(lane.web_load)
    assert_allclose([area.load, psf.load], 0.09 * KIP / FOOT**2, rtol=1e-14)
    assert (area.across, psf.across) == ("full width", "left half")


def test_where_a_load_lies_along_the_bridge() -> None:
    outside, apart, stretch, place = only(
        AXLES
        + """fills = [
  { shape = "uniform", load = 80, where = "outside", clear = 0.8 },
  { shape = "uniform", load = 80, where = "outside", clear = ["1 ft", 2] },
  { shape = "uniform", load = 4, at = [2, 6.5] },
  { shape = "knife edge", load = 4, at = -3 },
]"""
    ).fills
    assert (outside.where, outside.clear, apart.clear) == ("outside", (0.8, 0.8), (FOOT, 2.0))
    assert (stretch.where, stretch.x, place.where, place.x) == ("at", (2.0, 6.5), "at", (-3.0, -3.0))


def test_the_en_crowd_has_its_greatest_density_until_a_length_is_known() -> None:
    (fill,) = only('fills = [ { shape = "uniform", density = "en crowd", across = "full width" } ]').fills
    assert (fill.load, fill.per_area, fill.density) == (5e3, True, "en crowd")
    assert fill.load_over(30.0) == 4e3


def test_a_case_takes_from_the_file_what_it_leaves_out() -> None:
    loading = read(
        AXLES
        + f"""relieving = 0
fills = [ {LANE} ]
above = "200 ft"
[[cases]]
title = "as the file"
[[cases]]
title = "its own"
relieving = 1
factor = 0.9
above = 0
fills = []
continuous = true
convoy = {{ most = 2, headway = 15, ordered = true }}
axles = [ {{ load = 10 }} ]
"""
    )
    whole, own = loading.cases
    assert [case.title for case in loading.cases] == ["as the file", "its own"]
    assert [moving(case).title for case in loading.cases] == [
        "Alder works train, as the file",
        "Alder works train, its own",
    ]
    assert (whole.relieving, whole.factor, len(whole.fills), whole.convoy, whole.continuous) == (
        0.0,
        1.0,
        1,
        None,
        False,
    )
    assert_allclose(whole.above, 60.96, rtol=1e-14)
    assert (own.relieving, own.factor, own.fills, own.above, own.continuous) == (1.0, 0.9, (), 0.0, True)
    assert moving(own).loads.tolist() == [10e3]
    assert own.convoy is not None
    assert (own.convoy.most, own.convoy.headway, own.convoy.ordered) == (2, 15.0, True)


def test_a_file_without_cases_is_one_case_of_its_name() -> None:
    case = only(AXLES + "factor = 1.5\n")
    assert (case.title, moving(case).title, case.factor) == ("Alder works train", "Alder works train", 1.5)


def test_a_tolerance_is_more_where_adverse_and_less_where_relieving() -> None:
    """With t = 5 % loads count 1.05 where adverse and 0.95 where relieving; the weight stays as weighed."""
    text = (
        AXLES
        + 'tolerance = "5 %"\nfactor = 2\n[[cases]]\ntitle = "weighed"\n[[cases]]\ntitle = "model"\nrelieving = 0\n'
    )
    weighed, model = read(text).cases
    assert_allclose([weighed.factor, weighed.factor * weighed.relieving], [2 * 1.05, 2 * 0.95], rtol=1e-15)
    assert (model.factor, model.relieving) == (2.0, 0.0)
    assert moving(weighed).gross == 120e3


def test_a_rule_may_say_what_it_weighs() -> None:
    assert read(f"weight = 320\nfills = [ {LANE} ]").gross == 320e3
    assert read(f"fills = [ {LANE} ]").gross == 0.0


MISSPELLED = {
    "shape": ('{ shape = "knife-edge", load = 9 }', "uniform, knife edge", "knife edge"),
    "across": ('{ shape = "uniform", load = 9, across = "left-half" }', "lane, full width, left half", "left half"),
    "where": ('{ shape = "uniform", load = 9, where = "outsid" }', "adverse, outside", "outside"),
    "density": ('{ shape = "uniform", density = "en crowds", across = "full width" }', "en crowd", "en crowd"),
}


@pytest.mark.parametrize("key", MISSPELLED)
def test_a_word_that_is_not_known_and_the_nearest(key: str) -> None:
    fill, known, nearest = MISSPELLED[key]
    message = rf'^works\.toml: fills\[0\]\.{key}: ".+" is not one of {known}.*\(nearest: "{nearest}"\)$'
    with pytest.raises(UnknownNameError, match=message):
        read(f"fills = [ {fill} ]")


def test_as_many_axles_and_ranges_as_are_allowed() -> None:
    vehicle = moving(
        only(f"axles = [ {{ load = 1 }}, {'{ load = 1, after = [1, 2] }, ' * 12}{'{ load = 1, after = 1 }, ' * 187} ]")
    )
    assert vehicle.loads.size == 200
    assert sum(isinstance(gap, tuple) for gap in vehicle.spacings) == 12
    assert np.all(vehicle.loads == 1e3)
