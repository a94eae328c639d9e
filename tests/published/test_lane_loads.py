"""Loads that fill a bridge, against printed values.

- T. G. Hicks (ed.), *Handbook of Civil Engineering Calculations*, 2nd ed., McGraw-Hill 2007, p. 1.70. READ.
- M. A. Khan, *Bridge and Highway Structure Rehabilitation and Repair*, McGraw-Hill 2010, p. 167 and p. 251, Table 6.7.
  READ. The lane load of H20 and HS20: 0.64 kip/ft with 18 kip for moments, READ through its numbers, and 26 kip for
  shears, which its shear column gives too (p. 251, the end shear is that of the lane load alone).
- AASHTO, *Standard Specifications for Highway Bridges*, 17th ed., Appendix A. FROM MEMORY; recomputed.
- EN 1991-2, 5.3.2.1. FROM MEMORY.

A kip is used as the unit of force and a foot as that of length: determinate forces do not know the units. A beam's
moment is the force of the chord opposite a panel point times the depth, and an end shear is the end reaction.
"""

from __future__ import annotations

import csv
import math
from pathlib import Path

import numpy as np
import pytest
from numpy.testing import assert_allclose
from oracles.trusses import bottom, pratt, simple_span, truss_of

from movload import InfluenceLines, Vehicle, influence_lines, sweep
from movload.peaks.crowd import EN_CROWD
from movload.peaks.filling import knife_edge, uniform_where_adverse
from movload.statics.part import row_of

LANE, CHORDS, WEBS = 0.64, 18.0, 26.0  # kip/ft; kip for moments and chords; kip for shears, webs and reactions
DEPTH = 7.0  # ft; drops out
HS20 = Vehicle("HS20-44, axles from memory", np.array([8.0, 32.0, 32.0]), [14.0, 14.0])


def spanning(span: float, off: float = 0.0) -> InfluenceLines:
    """Return a Pratt of four panels with its middle panel point ``off`` [ft] left of midspan."""
    panels = [span / 4, span / 4 - off, span / 4 + off, span / 4]
    return influence_lines(truss_of(pratt(panels, [DEPTH] * 3), simple_span(4)), bottom(4))


def lane_on(lines: InfluenceLines) -> np.ndarray:
    """Return the highest and lowest of each row (R, 2) under the lane load, its knife edge by kind of effect.

    In a Pratt with level chords a member is a chord when both its joints are on one chord.
    """
    chord = np.array([one.kind == "axial" and one.name[0] == one.name[3] for one in lines.effects])
    edge = knife_edge(lines, np.where(chord, CHORDS, WEBS))
    return np.asarray(uniform_where_adverse(lines, LANE) + edge.values)


def lane_moment(span: float, off: float = 0.0) -> float:
    """Return the moment at the middle panel point under the lane load."""
    lines = spanning(span, off)
    return -float(lane_on(lines)[row_of(lines.effects, "U1-U2"), 1]) * DEPTH


def lane_shear(span: float) -> float:
    """Return the end reaction under the lane load."""
    lines = spanning(span)
    return float(lane_on(lines)[row_of(lines.effects, "L0 y"), 0])


def truck(span: float) -> tuple[float, float]:
    """Return the absolute maximum moment of HS20, 7/3 ft off midspan under its middle axle, and its end shear."""
    moment = -sweep(spanning(span, 7 / 3), HS20)["U1-U2"].lowest.value * DEPTH
    return moment, sweep(spanning(span), HS20)["L0 y"].highest.value


def test_uniform_load_on_either_side_of_a_crossing() -> None:
    """Hicks p. 1.70: 2.3 kip/ft over each sign of U2-L3, 6 x 20 ft, 25 ft deep: +53.0 and -23.6 kip. READ.

    0.2 %: the book rounds csc to two decimals and V to three figures.
    """
    lines = influence_lines(truss_of(pratt([20.0] * 6, [25.0] * 5), simple_span(6)), bottom(6))
    values = uniform_where_adverse(lines, 2.3)[row_of(lines.effects, "U2-L3")]
    assert_allclose(values, [53.0, -23.6], rtol=2e-3)
    # in closed form: V peaks at 1/2 over 72 ft and at -1/3 over 48 ft
    csc = math.hypot(20.0, 25.0) / 25.0
    assert_allclose(values, [2.3 * csc * 0.5 * 72.0 / 2.0, -2.3 * csc / 3.0 * 48.0 / 2.0], rtol=1e-12)


def test_lane_load_on_a_truss_chord() -> None:
    """Khan Table 6.7: 1250 kip ft on 100 ft, READ; so U1-U2 of a Pratt 4 x 25 ft, 25 ft deep, has -50.0 kip. Exact."""
    lines = influence_lines(truss_of(pratt([25.0] * 4, [25.0] * 3), simple_span(4)), bottom(4))
    assert_allclose(lane_on(lines)[row_of(lines.effects, "U1-U2")], [0.0, -50.0], rtol=1e-12, atol=1e-12)


@pytest.mark.parametrize(("span", "moment", "shear"), [(160.0, 2768.0, 77.2), (200.0, 4100.0, 90.0)])
def test_where_the_lane_governs(span: float, moment: float, shear: float) -> None:
    """AASHTO Appendix A, HS20-44, the rows marked as lane loading. FROM MEMORY. Half of the last digit."""
    assert_allclose(lane_moment(span), moment, rtol=0.0, atol=0.05)
    assert_allclose(lane_shear(span), shear, rtol=0.0, atol=0.05)
    by_truck = truck(span)
    assert lane_moment(span) > by_truck[0]
    assert lane_shear(span) > by_truck[1]


def test_where_the_lane_begins_to_govern() -> None:
    """AASHTO Appendix A: moment from about 145 ft, shear from about 127 ft. FROM MEMORY.

    Closed forms, truck against lane: 18 L - 280 + 392 / L = 0.08 L^2 + 4.5 L at 144.8 ft; 72 - 672 / L = 0.32 L + 26
    at 127.2 ft. One foot to either side.
    """
    assert lane_moment(144.0) < truck(144.0)[0]
    assert lane_moment(146.0) > truck(146.0)[0]
    assert lane_shear(126.0) < truck(126.0)[1]
    assert lane_shear(128.0) > truck(128.0)[1]


def khan() -> list[tuple[float, float, float]]:
    """Return span, moment and end shear of each row of Table 6.7."""
    path = Path(__file__).with_name("khan_table_6_7.csv")
    rows = csv.DictReader(line for line in path.read_text(encoding="utf-8").splitlines() if not line.startswith("#"))
    return [(float(row["span_ft"]), float(row["moment_kip_ft"]), float(row["end_shear_kip"])) for row in rows]


def test_lane_load_of_table_6_7() -> None:
    """Khan Table 6.7: moments from 60 ft up and all end shears are those of the lane load. READ. Half of 0.01.

    Up to 55 ft the truck H20 governs the moment, so the lane's is below the printed one; the shears of the lane are
    printed even below about 34 ft, where the truck governs (a fault of the table).
    """
    assert len(khan()) > 20
    for span, moment, shear in khan():
        assert_allclose(lane_shear(span), shear, rtol=0.0, atol=0.005 + 1e-9)
        if span >= 60.0:
            assert_allclose(lane_moment(span), moment, rtol=0.0, atol=0.005 + 1e-9)
        elif span >= 28.0:  # the shorter rows are too low in print
            assert lane_moment(span) < moment


@pytest.mark.parametrize(("span", "shear"), [(70.0, 84.8), (100.0, 97.28), (120.0, 104.8), (150.0, 115.52)])
def test_truck_and_lane_together(span: float, shear: float) -> None:
    """Khan p. 167, HL-93: total shear of truck and 0.64 kip/ft, and the lane's moment 0.08 L^2. READ.

    0.02 %: the last printed digit.
    """
    lines = spanning(span)
    uniform = uniform_where_adverse(lines, LANE)
    end, chord = row_of(lines.effects, "L0 y"), row_of(lines.effects, "U1-U2")
    assert_allclose(uniform[end, 0] + truck(span)[1], shear, rtol=2e-4)
    assert_allclose(-uniform[chord, 1] * DEPTH, 0.08 * span**2, rtol=1e-12)


def test_truck_and_lane_at_one_section() -> None:
    """The exact combined maximum on 70 ft is 1376.3 kip ft (Khan's 1215.26 adds the tandem where the truck governs).

    DERIVED: both on the panel point under the middle axle, off midspan by e with (72 / L) (14 / 3 - 2 e) = 0.64 e; a
    regression value, to its last digit.
    """
    off = (72.0 / 70.0) * (14.0 / 3.0) / (0.64 + 144.0 / 70.0)
    lines = spanning(70.0, off)
    row = row_of(lines.effects, "U1-U2")
    both = uniform_where_adverse(lines, LANE)[row, 1] + sweep(lines, HS20)["U1-U2"].lowest.value
    assert_allclose(-both * DEPTH, 1376.3, rtol=0.0, atol=0.05)


@pytest.mark.parametrize(
    ("length", "density"),
    [(10.0, 5.00), (20.0, 4.40), (25.0, 4.18), (30.0, 4.00), (50.0, 3.50), (100.0, 2.92), (150.0, 2.67), (210.0, 2.50),
     (400.0, 2.50)],
)  # fmt: skip
def test_crowd_density(length: float, density: float) -> None:
    """EN 1991-2, 5.3.2.1: kN/m2 by loaded length [m]. FROM MEMORY. Half of the last digit."""
    assert_allclose(EN_CROWD.at(np.array([length]))[0] / 1e3, density, rtol=0.0, atol=0.005)
