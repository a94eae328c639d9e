"""Lines cut where they change sign: areas, stretches, and what is left when relief is dropped."""

from __future__ import annotations

import itertools
from dataclasses import dataclass
from typing import TYPE_CHECKING

import numpy as np
import pytest
import sympy
from hypothesis import given, settings
from hypothesis import strategies as st
from numpy.testing import assert_allclose, assert_array_equal
from oracles.stepping import scales
from strategies import laid, vehicles

from movload import InfluenceLines, influence_lines
from movload.errors import InputError
from movload.peaks.extremes import static_extremes
from movload.statics.adverse import OFF, above_level, areas, biased, extremes_of_line, refined, stretches
from movload.statics.part import Effect
from movload.traffic.crossing import whole_trains

if TYPE_CHECKING:
    from numpy.typing import NDArray
    from strategies import Laid

    from movload.statics.condensed import Condensed
    from movload.traffic.vehicle import Vehicle


def made(stations: list[float], *rows: list[float]) -> InfluenceLines:
    """Return lines typed row by row."""
    effects = tuple(Effect("truss", f"row {number}", "axial", "N") for number in range(len(rows)))
    return InfluenceLines(effects, np.array(stations), np.array(rows))


@st.composite
def drawn_lines(draw: st.DrawFn) -> InfluenceLines:
    """Draw two to four rows over two to seven panels, flat here and there, with jumps at either end."""
    lengths = draw(st.lists(st.floats(1.7, 7.3), min_size=2, max_size=7))
    ordinate = st.floats(-1.0, 1.0).filter(lambda y: y == 0.0 or abs(y) > 1e-3) | st.sampled_from([0.0, 0.5, -0.5])
    row = st.lists(ordinate, min_size=len(lengths) + 1, max_size=len(lengths) + 1)
    rows = draw(st.lists(row.filter(any), min_size=2, max_size=4))
    return made([0.0, *np.cumsum(lengths)], *rows)


@dataclass(frozen=True, eq=False)
class Answering:
    """A response that multiplies but shows no ordinates."""

    lines: InfluenceLines
    noise: float = 0.0

    @property
    def effects(self) -> tuple[Effect, ...]:
        return self.lines.effects

    @property
    def stations(self) -> NDArray[np.float64]:
        return self.lines.stations

    @property
    def alike(self) -> object:
        return id(self)

    @property
    def per_metre(self) -> NDArray[np.float64]:
        return self.lines.per_metre

    @property
    def condensed(self) -> Condensed:
        return self.lines.condensed

    def under(self, loads: NDArray[np.float64]) -> NDArray[np.float64]:
        return (self.lines.ordinates + self.noise) @ loads


PLAIN = made([0.0, 3.0, 7.0, 12.0], [0.0, -1.0, 3.0, 0.0], [2.0, -1.0, 0.0, 1.0])


def test_every_zero_crossing_becomes_a_station() -> None:
    """-1 to 3 over 4 m crosses after 1 m, 2 to -1 over 3 m after 2 m: by similar triangles."""
    cut = refined(PLAIN)
    assert_allclose(cut.stations, [0.0, 2.0, 3.0, 4.0, 7.0, 12.0], rtol=1e-15)
    assert_allclose(cut.ordinates[0], [0.0, -2 / 3, -1.0, 0.0, 3.0, 0.0], atol=1e-15)
    assert_allclose(cut.ordinates[1], [2.0, 0.0, -1.0, -0.75, 0.0, 1.0], atol=1e-15)
    assert cut.ordinates[0, 3] == 0.0
    assert cut.ordinates[1, 1] == 0.0
    assert cut.effects is PLAIN.effects


def test_lines_of_one_sign_are_left_as_they_are() -> None:
    lines = made([0.0, 5.0, 9.0], [0.0, 1.0, 0.0], [-1.0, -0.5, 0.0])
    assert refined(lines) is lines


def test_near_crossings_are_one_station() -> None:
    """Two rows that cross within 1e-12 of the span share a station, on which both are exactly 0."""
    near = 1.0 + 1e-13
    cut = refined(made([0.0, 4.0, 8.0], [1.0, -1.0, 0.0], [1.0, -near, 0.0], [1.0, -1.001, 0.0]))
    assert cut.stations.size == 5
    assert (cut.ordinates[:2, 2] == 0.0).all()
    assert cut.ordinates[2, 2] < 0.0


def test_a_shared_crossing_is_zero_for_all_that_share_it() -> None:
    """On a steep short panel of a long bridge one crossing stands for another 1e-10 m away: exactly 0 for both."""
    stations, other = [0.0, 499.5, 500.5, 1000.0], -1.0 - 4e-10
    cut = refined(made(stations, [1.0, 1.0, -1.0, -1.0], [1.0, 1.0, other, -1.0]))
    assert cut.stations.size == 5
    assert_array_equal(cut.ordinates[:, 2], [0.0, 0.0])


def test_a_crossing_beside_a_station_is_that_station() -> None:
    cut = refined(made([0.0, 4.0, 8.0], [1.0, -3e-13, -1.0], [0.0, 1.0, 0.0]))
    assert_array_equal(cut.stations, [0.0, 4.0, 8.0])


def test_any_response_that_multiplies_is_refined() -> None:
    """Asked by unit loads; round-off of 1e-14 of a row's largest is no crossing."""
    lines = made([0.0, 3.0, 7.0, 12.0], [0.0, 1.0, 0.5, 0.0], [2.0, -1.0, 0.0, 1.0])
    cut = refined(Answering(lines, noise=-1e-14))
    assert_allclose(cut.stations, refined(lines).stations, rtol=1e-12)
    assert_allclose(cut.ordinates, refined(lines).ordinates, atol=1e-13)
    assert_allclose(areas(Answering(PLAIN)), areas(PLAIN), rtol=1e-15)


@given(drawn_lines(), st.lists(st.floats(-0.1, 1.1), min_size=3, max_size=20))
def test_refined_lines_are_the_same_lines(lines: InfluenceLines, parts: list[float]) -> None:
    """Anywhere, off the bridge too, and each row is of one sign in each of the new panels. 1e-12: merged crossings."""
    cut = refined(lines)
    x = np.array(parts) * lines.stations[-1]
    for effect in lines.effects:
        assert_allclose(cut[effect.key].at(x), lines[effect.key].at(x), rtol=0.0, atol=2e-11)
    assert set(lines.stations) <= set(cut.stations)
    assert (cut.ordinates[:, :-1] * cut.ordinates[:, 1:] >= -1e-11).all()


def by_symbols(lines: InfluenceLines, row: int) -> tuple[float, float]:
    """Return the areas above and below zero, integrated by SymPy over exact rationals."""
    x = sympy.Symbol("x")
    stations, y = ([sympy.Rational(float(v)) for v in one] for one in (lines.stations, lines.ordinates[row]))
    above = below = sympy.Integer(0)
    for a, b, left, right in zip(stations, stations[1:], y, y[1:], strict=False):
        line = left + (right - left) * (x - a) / (b - a)
        cuts = [a, *([a + (b - a) * left / (left - right)] if left * right < 0 else []), b]
        for start, end in itertools.pairwise(cuts):
            area = sympy.integrate(line, (x, start, end))
            above, below = above + max(area, 0), below + min(area, 0)
    return float(above), float(below)


def test_areas_by_hand() -> None:
    """Triangles: -1 x 4 / 2 below, 3 x 8 / 2 above; 2 x 2 / 2 + 1 x 5 / 2 above, -1 x (1 + 4) / 2 below."""
    assert_allclose(areas(PLAIN), [[12.0, -2.0], [4.5, -2.5]], rtol=1e-15)


@settings(max_examples=5, deadline=None)  # symbols are slow
@given(drawn_lines())
def test_areas_against_sympy(lines: InfluenceLines) -> None:
    """Sums of a few positive terms: 1e-13 of the whole area is a few roundings."""
    whole = float(np.abs(areas(lines)).sum(axis=1).max())
    for row in range(len(lines.effects)):
        assert_allclose(areas(lines)[row], by_symbols(lines, row), rtol=1e-13, atol=1e-15 * whole)


@given(drawn_lines())
def test_areas_are_those_of_the_stretches(lines: InfluenceLines) -> None:
    """Each stretch integrated by trapezia over the stations inside it; none touches the next."""
    for row, effect in enumerate(lines.effects):
        for side in (0, 1):
            found = stretches(lines, row, side)
            total = 0.0
            for start, end in found:
                inside = lines.stations[(lines.stations > start) & (lines.stations < end)]
                x = np.array([start, *inside, end])
                total += float(np.trapezoid(lines[effect.key].at(x), x))
            assert_allclose(total, areas(lines)[row, side], rtol=1e-12, atol=1e-13)
            assert all(a[1] < b[0] for a, b in itertools.pairwise(found))


def test_stretches_end_inside_panels() -> None:
    assert stretches(PLAIN, 0, 0) == ((4.0, 12.0),)
    assert stretches(PLAIN, 0, 1) == ((0.0, 4.0),)
    assert stretches(PLAIN, 1, 0) == ((0.0, 2.0), (7.0, 12.0))
    assert stretches(PLAIN, 1, 1) == ((2.0, 7.0),)
    assert stretches(made([0.0, 1.0, 2.0], [0.0, 1.0, 0.0]), 0, 1) == ()


def test_stretches_above_a_level() -> None:
    line = np.array([0.0, 1.0, 0.0, 2.0])
    assert above_level(np.array([0.0, 1.0, 2.0, 4.0]), line, 0.5) == ((0.5, 1.5), (2.5, 4.0))


def test_greatest_and_least_ordinates() -> None:
    """Both include 0, with the load off the bridge; of equal ones the first station counts."""
    lines = made([0.0, 1.0, 2.0, 3.0], [0.0, 2.0, 2.0, 1.0], [-1.0, 0.0, 0.5, -3.0], [0.0, 0.0, 0.0, 0.0])
    ordinates, station = extremes_of_line(lines)
    assert_array_equal(ordinates, [[2.0, 0.0], [0.5, -3.0], [0.0, 0.0]])
    assert_array_equal(station, [[1, OFF], [2, 3], [OFF, OFF]])


def test_relief_is_multiplied() -> None:
    highest, lowest = biased(PLAIN, 0.25)
    assert_allclose(highest.ordinates[1], [2.0, 0.0, -0.25, -0.1875, 0.0, 1.0], atol=1e-15)
    assert_allclose(lowest.ordinates[1], [0.5, 0.0, -1.0, -0.75, 0.0, 0.25], atol=1e-15)


def test_what_relieves_may_be_dropped_and_jumps_stay() -> None:
    highest, lowest = biased(PLAIN, 0.0)
    assert_array_equal(highest.ordinates[1], [2.0, 0.0, 0.0, 0.0, 0.0, 1.0])
    assert_allclose(lowest.ordinates[1], [0.0, 0.0, -1.0, -0.75, 0.0, 0.0], atol=1e-15)
    assert not np.signbit(highest.ordinates).any()
    assert not highest.condensed.jumps  # nothing changes sign any more: no axle need be lost


@pytest.mark.parametrize("part", [-0.1, 1.5, float("nan")])
def test_what_counts_is_a_part(part: float) -> None:
    with pytest.raises(InputError, match=r"relieving: what counts where it relieves is 0 to 1, got"):
        biased(PLAIN, part)


def peaks(lines: InfluenceLines, vehicle: Vehicle, relieving: float) -> NDArray[np.float64]:
    """Return highest and lowest (2, R) swept over biased lines by what sweeps any lines."""
    highest, lowest = biased(lines, relieving)
    trains = whole_trains(vehicle)
    return np.stack((static_extremes(highest, trains)[0][0], static_extremes(lowest, trains)[1][0]))


@given(laid(), vehicles())
def test_in_full_nothing_changes(drawn: Laid, vehicle: Vehicle) -> None:
    """Sweeping lines biased by 1 is sweeping the lines: 1e-12 of what all axles on the largest ordinate would give."""
    lines = influence_lines(drawn.truss, drawn.panel_points)
    plain = np.stack([one[0] for one in static_extremes(lines, whole_trains(vehicle))])
    most = scales(lines, [vehicle])[0]
    assert (np.abs(peaks(lines, vehicle, 1.0) - plain) <= 1e-12 * most).all()


@given(laid(), vehicles(), st.floats(0.0, 1.0), st.floats(0.0, 1.0))
def test_less_relief_never_lowers_a_peak(drawn: Laid, vehicle: Vehicle, one: float, other: float) -> None:
    """Monotone between dropping all relief and counting it in full; round-off as above."""
    lines = influence_lines(drawn.truss, drawn.panel_points)
    least, most = sorted((one, other))
    sizes = [np.abs(peaks(lines, vehicle, part)) for part in (1.0, most, least, 0.0)]
    margin = 1e-12 * scales(lines, [vehicle])[0]
    for full, less in itertools.pairwise(sizes):
        assert (less >= full - margin).all()


@given(laid(), vehicles(), st.floats(0.0, 1.0))
def test_no_sampled_place_beats_a_peak_with_less_relief(drawn: Laid, vehicle: Vehicle, part: float) -> None:
    """Axle by axle from the lines as they are: in full where it is adverse, ``part`` of it where it relieves."""
    lines = influence_lines(drawn.truss, drawn.panel_points)
    highest, lowest = peaks(lines, vehicle, part)
    fronts = np.linspace(lines.stations[0] - 1.0, lines.stations[-1] + float(vehicle.distances[-1]) + 1.0, 301)
    margin = 1e-12 * scales(lines, [vehicle])[0]
    for heading in vehicle.headings:
        start = fronts if heading > 0 else fronts - float(vehicle.distances[-1])
        x = start[:, None] - heading * vehicle.distances
        y = np.stack([np.interp(x, lines.stations, row, left=0.0, right=0.0) for row in lines.ordinates])
        most = (np.where(y < 0.0, part * y, y) @ vehicle.loads).max(axis=1)
        least = (np.where(y > 0.0, part * y, y) @ vehicle.loads).min(axis=1)
        assert (most <= highest + margin).all()
        assert (least >= lowest - margin).all()
