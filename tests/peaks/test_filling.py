"""Loads that fill: uniform, knife edge, patches, a crowd that thins out, and load outside a vehicle, all exact."""

from __future__ import annotations

import itertools
from typing import TYPE_CHECKING

import numpy as np
import pytest
from hypothesis import assume, given, settings
from hypothesis import strategies as st
from numpy.testing import assert_allclose, assert_array_equal

from movload import InfluenceLines, Vehicle
from movload.errors import InputError
from movload.peaks.crowd import (
    EN_CROWD,
    Density,
    crowd_full_length,
    crowd_in_one_stretch,
    crowd_scattered,
    crowd_where_adverse,
)
from movload.peaks.extremes import static_extremes
from movload.peaks.filling import (
    knife_edge,
    outside_vehicle,
    patch_anywhere,
    patch_at,
    stretches_outside,
    uniform_where_adverse,
)
from movload.peaks.patches import spread
from movload.peaks.placement import panel_loads
from movload.statics.adverse import areas, refined, stretches
from movload.statics.part import Effect
from movload.traffic.crossing import even_train
from movload.traffic.vehicle import Strip

if TYPE_CHECKING:
    from collections.abc import Callable, Sequence

    from numpy.typing import NDArray

    from movload.traffic.crossing import Train

    Floats = NDArray[np.float64]

SIGNS = (1.0, -1.0)


def made(stations: Sequence[float], *rows: Sequence[float]) -> InfluenceLines:
    """Return lines typed row by row."""
    effects = tuple(Effect("truss", f"row {number}", "axial", "N") for number in range(len(rows)))
    return InfluenceLines(effects, np.array(stations), np.array(rows))


@st.composite
def drawn_lines(draw: st.DrawFn, longest: float = 7.3) -> InfluenceLines:
    """Draw two to four rows over two to seven panels, flat here and there, with jumps at either end."""
    lengths = draw(st.lists(st.floats(1.7, longest), min_size=2, max_size=7))
    ordinate = st.floats(-1.0, 1.0).filter(lambda y: y == 0.0 or abs(y) > 1e-3) | st.sampled_from([0.0, 0.5, -0.5])
    row = st.lists(ordinate, min_size=len(lengths) + 1, max_size=len(lengths) + 1)
    rows = draw(st.lists(row.filter(any), min_size=2, max_size=4))
    return made([0.0, *np.cumsum(lengths)], *rows)


def largest(lines: InfluenceLines) -> Floats:
    """Return what 1 N/m gives each row at most (R,), all of it counted as adverse: what round-off is measured by."""
    return np.asarray(areas(lines) @ np.array(SIGNS))


def under(lines: InfluenceLines, row: int, stretches: Sequence[tuple[float, float]]) -> float:
    """Return the effect of 1 N/m on stretches, brought to the panel points as a simple beam's reactions."""
    if not stretches:
        return 0.0
    start, end = (np.array(one)[None, :] for one in zip(*stretches, strict=True))
    loads = spread(lines.stations, start, end, np.ones(start.size))
    return float(lines.under(loads.T)[row, 0])


def integral(lines: InfluenceLines, row: int, x: Floats) -> Floats:
    """Return the integral of a row from the first station to each x, off the bridge nothing is added."""
    stations, y = lines.stations, lines.ordinates[row]
    at = np.clip(x, stations[0], stations[-1])
    panel = np.clip(np.searchsorted(stations, at, side="right") - 1, 0, stations.size - 2)
    before = np.concatenate(([0.0], np.cumsum(0.5 * np.diff(stations) * (y[1:] + y[:-1]))))
    return np.asarray(before[panel] + 0.5 * (at - stations[panel]) * (y[panel] + np.interp(at, stations, y)))


TENT = made([0.0, 4.0, 10.0], [0.0, 2.0, 0.0], [0.0, -1.0, 0.0])
DIAGONAL = made([0.0, 5.0, 10.0, 15.0], [0.0, -1.0, 3.0, 0.0], [0.0, 1.0, 1.0, 0.0])


# uniform and knife edge


def test_uniform_load_goes_wherever_it_is_adverse() -> None:
    """-1 to 3 over 5 m crosses after 1.25 m: -1 x 6.25 / 2 and 3 x 8.75 / 2, under 2 N/m."""
    assert_allclose(uniform_where_adverse(DIAGONAL, 2.0)[0], [26.25, -6.25], rtol=1e-14)
    by_row = uniform_where_adverse(DIAGONAL, np.array([2.0, 5.0]))
    assert_allclose(by_row, [[26.25, -6.25], [50.0, 0.0]], rtol=1e-14)


def test_knife_edge_differs_by_row() -> None:
    """18 on the first row and 26 on the second, on the greatest ordinate each way; the first of equal ones."""
    found = knife_edge(DIAGONAL, np.array([18.0, 26.0]))
    assert_allclose(found.values, [[54.0, -18.0], [26.0, 0.0]], rtol=1e-15)
    assert_array_equal(found.start, [[10.0, 5.0], [5.0, np.nan]])
    assert_array_equal(found.end, found.start)


@given(drawn_lines(), st.floats(0.0, 1.0))
def test_no_place_of_a_knife_edge_is_worse(lines: InfluenceLines, part: float) -> None:
    found = knife_edge(lines, 3.0)
    x = part * lines.stations[-1]
    for row, effect in enumerate(lines.effects):
        value = 3.0 * float(lines[effect.key].at(x))
        assert found.values[row, 1] - 1e-14 <= value <= found.values[row, 0] + 1e-14
        for side in (0, 1):
            if found.values[row, side]:
                stands = 3.0 * lines[effect.key].at(found.start[row, side])
                assert_allclose(stands, found.values[row, side], rtol=1e-14)


@pytest.mark.parametrize(
    ("load", "message"),
    [
        (-1.0, r"load: must be finite and 0 or more, got -1"),
        (np.nan, r"load: must be finite and 0 or more, got nan"),
        (np.ones(3), r"load: one number, or one for each of 2 rows, got shape \(3,\)"),
    ],
)
def test_loads_that_are_none(load: float | Floats, message: str) -> None:
    with pytest.raises(InputError, match=message):
        uniform_where_adverse(TENT, load)


# patches


def test_patch_at_its_place() -> None:
    """2 N/m over 2 to 4 m of a line that rises from 1 to 2: 2 x 3; what lies off the bridge does nothing."""
    assert_allclose(patch_at(TENT, 2.0, 2.0, 4.0).values, [[6.0, 0.0], [0.0, -3.0]], rtol=1e-15)
    assert_array_equal(patch_at(TENT, 2.0, 2.0, 4.0).start, [[2.0, np.nan], [np.nan, 2.0]])
    over = patch_at(TENT, 1.0, -7.0, 4.0)
    assert_allclose(over.values[0], [4.0, 0.0], rtol=1e-15)
    assert over.start[0, 0] == 0.0
    assert not patch_at(TENT, 1.0, 11.0, 40.0).values.any()


def test_patch_anywhere_on_a_tent() -> None:
    """Both ends at one height: 5 m of a tent 10 m long and 2 high stand at half its height, 2 to 7 m: area 7.5."""
    found = patch_anywhere(TENT, 2.0, 5.0)
    assert_allclose(found.values, [[15.0, 0.0], [0.0, -7.5]], rtol=1e-14)
    assert_allclose([found.start[0, 0], found.end[0, 0]], [2.0, 7.0], rtol=1e-13)
    assert np.isnan(found.start[0, 1])


def test_patch_of_no_length_and_of_all() -> None:
    """Nothing; and as long as the bridge it is all of it, or what is left at one end where that is worse."""
    assert not patch_anywhere(DIAGONAL, 7.0, 0.0).values.any()
    for length in (15.0, 400.0, np.inf):
        found = patch_anywhere(DIAGONAL, 1.0, length)
        assert_allclose(found.values, [[13.125, -3.125], [10.0, 0.0]], rtol=1e-14)
    assert_allclose(patch_anywhere(TENT, 1.0, 10.0).values, areas(TENT), rtol=1e-15)


@pytest.mark.parametrize("length", [-1.0, np.nan])
def test_length_that_is_none(length: float) -> None:
    with pytest.raises(InputError, match=r"patch: a length must be 0 or more, got (-1|nan) m"):
        patch_anywhere(TENT, 1.0, length)


def test_patch_that_ends_before_it_starts() -> None:
    with pytest.raises(InputError, match=r"patch: a patch runs from its start to its end, got 4 to 3 m"):
        patch_at(TENT, 1.0, 4.0, 3.0)


@given(drawn_lines(), st.floats(0.01, 60.0))
def test_no_sampled_place_of_a_patch_is_worse(lines: InfluenceLines, length: float) -> None:
    """A grid over all places never beats it, and its own place gives it again."""
    found = patch_anywhere(lines, 1.0, length)
    starts = np.linspace(-length, lines.stations[-1], 997)
    for row, most in enumerate(largest(lines)):
        values = integral(lines, row, starts + length) - integral(lines, row, starts)
        assert values.max() <= found.values[row, 0] + 1e-13 * most
        assert values.min() >= found.values[row, 1] - 1e-13 * most
        for side in (0, 1):
            if found.values[row, side]:
                stands = [(float(found.start[row, side]), float(found.end[row, side]))]
                assert stands[0][1] - stands[0][0] <= length + 4e-15 * float(lines.stations[-1])
                assert_allclose(under(lines, row, stands), found.values[row, side], rtol=1e-12, atol=1e-14 * most)


@given(drawn_lines())
def test_a_short_patch_is_a_knife_edge(lines: InfluenceLines) -> None:
    """1 mm with 1 N on it: within the slope times half of its length."""
    steepest = np.abs(np.diff(lines.ordinates, axis=1) / np.diff(lines.stations)).max()
    found, edge = patch_anywhere(lines, 1000.0, 1e-3), knife_edge(lines, 1.0)
    assert (np.abs(found.values - edge.values) <= 1e-3 * steepest + 1e-12).all()


# a crowd that thins out


def test_en_density_from_its_kinks() -> None:
    """EN 1991-2, 5.3.2.1, from memory: 5 up to 10 m, 2.5 from 210 m."""
    assert_allclose(EN_CROWD.at(np.array([0.0, 10.0, 210.0, 900.0])), [5e3, 5e3, 2.5e3, 2.5e3], rtol=1e-15)


def test_crowd_on_a_tent_in_closed_form() -> None:
    """A tent of span S and height 1: L of it hold L (1 - L / 2S), times q = 2 + 120 / (L + 30), for 10 <= L <= S.

    With S = 60 the derivative's numerator is a cubic; numpy's roots of it are the answer, longer than 10 m, not all.
    """
    span = 60.0
    lines = made([0.0, 25.0, span], [0.0, 1.0, 0.0])
    held = np.poly1d([-1 / (2 * span), 1.0, 0.0])
    above, below = np.poly1d([2.0, 180.0]), np.poly1d([1.0, 30.0])
    roots = ((above * held).deriv() * below - above * held).roots
    (length,) = [float(one.real) for one in roots if abs(one.imag) < 1e-9 and 10.0 < one.real < span]
    value = 1e3 * 3.0 * float(above(length) / below(length) * held(length))
    found = crowd_in_one_stretch(lines, EN_CROWD, 3.0)
    assert_allclose(found.values[0], [value, 0.0], rtol=1e-13)
    assert_allclose(found.end[0, 0] - found.start[0, 0], length, rtol=1e-6)  # flat at its top: the root of 1e-12
    assert_allclose(found.start[0, 0], 25.0 * (1.0 - length / span), rtol=1e-5)
    assert_allclose(found.load[0, 0], 3.0 * EN_CROWD.at(np.array([length]))[0], rtol=1e-6)
    full = crowd_full_length(lines, EN_CROWD, 3.0)
    assert_allclose(full[0], [3.0 * 30.0 * 1e3 * (2.0 + 120.0 / 90.0), 0.0], rtol=1e-15)
    assert value > 1.01 * full[0, 0]
    assert_allclose(crowd_scattered(lines, EN_CROWD, 3.0).values, found.values, rtol=1e-12)


def test_crowd_on_a_short_bridge_fills_it() -> None:
    """Up to 10 m the density is constant, so all that is adverse is loaded: 5 kN/m2 x 2 m x area."""
    lines = made([0.0, 3.0, 9.0], [0.0, 1.0, 0.0], [1.0, -1.0, 0.0])
    expected = 1e4 * areas(lines)
    assert_allclose(crowd_in_one_stretch(lines, EN_CROWD, 2.0).values, expected, rtol=1e-13)
    assert_allclose(crowd_scattered(lines, EN_CROWD, 2.0).values, expected, rtol=1e-13)
    assert_allclose(crowd_where_adverse(lines, EN_CROWD, 2.0), expected, rtol=1e-13)


def test_a_constant_density_is_a_uniform_load() -> None:
    even = Density(lambda length: np.full(length.shape, 4.0))
    found = crowd_scattered(DIAGONAL, even, 0.5)
    assert_allclose(found.values, uniform_where_adverse(DIAGONAL, 2.0), rtol=1e-14)
    assert found.stretches(DIAGONAL, 0, 1) == stretches(DIAGONAL, 0, 1)


def test_crowd_on_a_level_line() -> None:
    """Of a line that is 1 throughout, L holds L; q = 1 / (L + 1) + 1 / (L + 1)^2 makes all of it worst, not one end.

    And q = max(1 - L / 8, 0.1) is worst at L = 4, where q L = 2, though nothing about the line says so.
    """
    lines = made([0.0, 5.0, 7.5], [1.0, 1.0, 1.0])
    all_of_it = crowd_in_one_stretch(lines, Density(lambda x: 1.0 / (x + 1.0) + 1.0 / (x + 1.0) ** 2), 1.0)
    assert_allclose(all_of_it.values[0], [7.5 / 8.5 + 7.5 / 8.5**2, 0.0], rtol=1e-13)
    falling = Density(lambda x: np.maximum(1.0 - x / 8.0, 0.1), kinks=(7.2,))
    part = crowd_in_one_stretch(lines, falling, 1.0)
    assert_allclose(part.values[0, 0], 2.0, rtol=1e-13)
    assert_allclose(part.end[0, 0] - part.start[0, 0], 4.0, rtol=1e-6)
    anyhow = crowd_scattered(lines, falling, 1.0)
    assert_allclose(anyhow.values[0, 0], 2.0, rtol=1e-13)
    assert_allclose(anyhow.stretches(lines, 0, 0), [(0.0, 4.0)], rtol=1e-6)


def test_crowd_that_ends_on_a_level_stretch() -> None:
    """0, 1/2, 1/2, 1, 0 at 0, 2, 6, 8, 10 m: from a on the level part to 9 m, L holds L / 2 + 3 / 4.

    q = 1 - 2 L / 23 times that is greatest at L = 5, from 4 m: 13 / 23 x 13 / 4.
    """
    lines = made([0.0, 2.0, 6.0, 8.0, 10.0], [0.0, 0.5, 0.5, 1.0, 0.0])
    found = crowd_in_one_stretch(lines, Density(lambda x: 1.0 - x / 11.5), 1.0)
    assert_allclose(found.values[0, 0], 13.0 / 23.0 * 13.0 / 4.0, rtol=1e-13)
    assert_allclose([found.start[0, 0], found.end[0, 0]], [4.0, 9.0], rtol=1e-6)
    turned = made([0.0, 2.0, 4.0, 8.0, 10.0], [0.0, 1.0, 0.5, 0.5, 0.0])
    other = crowd_in_one_stretch(turned, Density(lambda x: 1.0 - x / 11.5), 1.0)
    assert_allclose(other.values[0], found.values[0], rtol=1e-13)
    assert_allclose([other.start[0, 0], other.end[0, 0]], [1.0, 6.0], rtol=1e-6)


LAWS = (
    EN_CROWD,
    Density(lambda x: 1.0 / (1.0 + 0.5 * x)),  # falls so fast that little of a bridge is best loaded
    Density(lambda x: np.clip(0.25 + 1.2 / np.sqrt(np.maximum(x, 1e-9)), 0.4, 0.9), kinks=((1.2 / 0.65) ** 2, 64.0)),
    Density(lambda x: np.maximum(1.0 - 0.03 * x, 0.3), kinks=(0.7 / 0.03,)),
    Density(lambda x: np.exp(-0.07 * x)),
)


@settings(deadline=None)
@given(drawn_lines(longest=19.0), st.sampled_from(LAWS))
def test_no_sampled_stretch_of_crowd_is_worse(lines: InfluenceLines, density: Density) -> None:
    """Every start and every end on a grid with all stations; round-off of sums over the bridge."""
    found = crowd_in_one_stretch(lines, density, 1.0)
    x = np.unique(np.concatenate((lines.stations, np.linspace(0.0, lines.stations[-1], 131))))
    start, end = (one[np.triu_indices(x.size, 1)] for one in np.meshgrid(x, x, indexing="ij"))
    dense = density.at(end - start)
    for row, most in enumerate(largest(lines)):
        values = dense * (integral(lines, row, end) - integral(lines, row, start))
        margin = 1e-12 * most * float(dense.max())
        assert values.max() <= found.values[row, 0] + margin
        assert values.min() >= found.values[row, 1] - margin


@settings(deadline=None)
@given(drawn_lines(longest=19.0), st.sampled_from(LAWS), st.lists(st.floats(0.0, 1.0), min_size=4, max_size=4))
def test_no_other_crowd_is_worse(lines: InfluenceLines, density: Density, parts: list[float]) -> None:
    """Two stretches anywhere never beat as many as one likes; all that is adverse, or one stretch, never do either."""
    found = crowd_scattered(lines, density, 1.0)
    most = 1e-12 * largest(lines)[:, None] * float(density.at(np.zeros(1))[0])
    sizes = np.abs(found.values) + most
    assert (sizes >= np.abs(crowd_in_one_stretch(lines, density, 1.0).values)).all()
    assert (sizes >= np.abs(crowd_where_adverse(lines, density, 1.0))).all()
    adverse = np.abs(crowd_where_adverse(lines, density, 1.0)) + most
    assert (adverse >= np.abs(crowd_full_length(lines, density, 1.0))).all()
    cuts = np.sort(parts) * lines.stations[-1]
    two = [(float(cuts[0]), float(cuts[1])), (float(cuts[2]), float(cuts[3]))]
    load = float(density.at(np.array([sum(end - start for start, end in two)]))[0])
    for row in range(len(lines.effects)):
        value = load * under(lines, row, two)
        assert found.values[row, 1] - most[row, 0] <= value <= found.values[row, 0] + most[row, 0]


@settings(deadline=None)
@given(drawn_lines(longest=19.0), st.sampled_from(LAWS))
def test_a_crowd_where_it_stands_gives_its_value(lines: InfluenceLines, density: Density) -> None:
    """Density at the length that it stands on, times what 1 N/m there gives, twice as wide.

    Not on lines with a level stretch: `crowd_scattered` then gives the right value and a wrong place, as is known and
    written in DEVELOPERS.md, "Begun and not yet joined".
    """
    y = lines.ordinates
    assume(not ((np.diff(y, axis=1) == 0.0) & (y[:, 1:] != 0.0)).any())
    one, any_number = crowd_in_one_stretch(lines, density, 2.0), crowd_scattered(lines, density, 2.0)
    for row, most in enumerate(largest(lines)):
        for side in (0, 1):
            stands = [(float(one.start[row, side]), float(one.end[row, side]))] if one.values[row, side] else []
            for found, at in ((one, stands), (any_number, any_number.stretches(lines, row, side))):
                length = sum(end - start for start, end in at)
                load = 2.0 * float(density.at(np.array([length]))[0])
                assert_allclose(load * under(lines, row, at), found.values[row, side], rtol=1e-11, atol=1e-13 * most)
                assert_allclose(found.load[row, side], load if at else 0.0, rtol=1e-9)


@pytest.mark.parametrize(
    ("law", "message"),
    [
        (lambda x: 1.0 + x, r"crowd: a density must not rise with the loaded length, got a rise beyond 0 m"),
        (lambda x: 1.0 - x, r"crowd: a density must be above 0 at every length, got -"),
        (lambda x: 100.0 - x**2, r"crowd: a density must be convex between its kinks"),
    ],
)
def test_densities_that_are_none(law: Callable[[Floats], Floats], message: str) -> None:
    with pytest.raises(InputError, match=message):
        crowd_in_one_stretch(made([0.0, 2.0, 9.0], [0.0, 1.0, 0.0]), Density(law), 1.0)


@pytest.mark.parametrize("crowd", [crowd_in_one_stretch, crowd_scattered, crowd_where_adverse, crowd_full_length])
def test_a_crowd_has_a_width(crowd: Callable[..., object]) -> None:
    with pytest.raises(InputError, match=r"crowd: a width must be 0 or more, got -2 m"):
        crowd(TENT, EN_CROWD, -2.0)
    found = crowd(TENT, EN_CROWD, 0.0)
    assert not getattr(found, "values", found).any()


# uniform load outside a vehicle


def train_of(loads: Sequence[float], spacings: Sequence[float], headings: tuple[int, ...] = (1, -1)) -> Train:
    """Return the train of whole axles of a vehicle."""
    return even_train("drawn", Vehicle("drawn", np.array(loads), spacings, headings=headings), 1.0)


def hole_of(train: Train, front: float, heading: int, gaps: tuple[float, float]) -> tuple[float, float]:
    """Return where no uniform load may stand."""
    ends = front + heading * gaps[0], front - heading * (float(train.vehicle.distances[-1]) + gaps[1])
    return min(ends), max(ends)


def test_one_axle_and_load_beside_it() -> None:
    """10 N on the tent's top, 2 N/m elsewhere but for 1 m before and 2 m behind: 20 + 2 (10 - 3 x what is lost).

    On the tent 0 - 2 - 0 over 4 and 6 m with the axle at 4 m and heading -1 the gap is 3 to 6 m: it holds
    (1.5 + 2) / 2 + 2 (2 + 4 / 3) / 2 = 5.08333; heading +1, 2 to 5 m: 3 + (2 + 5 / 3) / 2 = 4.83333, which is less.
    """
    found = outside_vehicle(TENT, train_of([10.0], []), 2.0, gaps=(1.0, 2.0))
    assert_allclose(found.values[0, 0], 20.0 + 2.0 * (10.0 - 4.8333333333333333), rtol=1e-14)
    assert (found.front[0, 0], found.heading[0, 0]) == (4.0, 1)
    assert (found.values[0, 1], found.heading[0, 1]) == (0.0, 0)
    assert stretches_outside(TENT, 0, 0, (2.0, 5.0)) == ((0.0, 2.0), (5.0, 10.0))


def test_a_light_axle_stays_away_from_a_heavy_load() -> None:
    """0.1 N never pays for what its own length takes from 5 N/m over the tent: the uniform load alone is worse."""
    found = outside_vehicle(TENT, train_of([0.1], []), 5.0, gaps=(1.0, 1.0))
    assert_allclose(found.values[0], [50.0, 0.0], rtol=1e-15)
    assert np.isnan(found.front[0, 0])
    assert found.heading[0, 0] == 0


def test_an_axle_just_lost() -> None:
    """-3 at the first station, 2 in the middle, -1 at the last: two axles of 1 N, 5 m apart, the rear one just off.

    With it on they give -3 + 2, one panel further 2 - 1; and 1 / 2 N/m outside counts on 2 x 8.33333 / 2 but for 5 m
    from the first station, of which 3 m to 5 m are adverse: 2 x 2 / 2.
    """
    lines = made([0.0, 5.0, 10.0], [-3.0, 2.0, -1.0])
    found = outside_vehicle(lines, train_of([1.0, 1.0], [5.0], headings=(1,)), 0.5)
    assert_allclose(found.values[0, 0], 2.0 + 0.5 * (0.5 * 2.0 * (2.0 + 10.0 / 3.0) - 2.0), rtol=1e-13)
    assert found.lost[0, 0]
    assert 0.0 < 5.0 - found.front[0, 0] < 1e-10


def test_without_uniform_load_it_is_the_vehicle() -> None:
    train = train_of([3.0, 5.0, 2.0], [1.7, 2.9])
    highest, lowest = static_extremes(DIAGONAL, [train])
    found = outside_vehicle(DIAGONAL, train, 0.0, gaps=(1.0, 2.0))
    assert_allclose(found.values, np.stack((highest[0], lowest[0]), axis=1), rtol=1e-14)


@st.composite
def drawn_trains(draw: st.DrawFn) -> Train:
    """Draw one to five axles."""
    loads = draw(st.lists(st.floats(0.5, 30.0), min_size=1, max_size=5))
    spacings = draw(st.lists(st.floats(0.3, 9.7), min_size=len(loads) - 1, max_size=len(loads) - 1))
    return train_of(loads, spacings, headings=draw(st.sampled_from([(1, -1), (1,), (-1,)])))


gaps_drawn = st.tuples(st.floats(0.0, 6.0), st.floats(0.0, 6.0))


@settings(deadline=None)
@given(drawn_lines(), drawn_trains(), gaps_drawn, st.floats(0.0, 6.0), st.sampled_from([1.0, 0.4, 0.0]))
def test_no_sampled_place_outside_is_worse(
    lines: InfluenceLines, train: Train, gaps: tuple[float, float], load: float, part: float
) -> None:
    """A grid of fronts with the uniform load put by hand never beats it; an impact of 0.3 is on the axles alone."""
    found = outside_vehicle(lines, train, load, gaps=gaps, impact=0.3, relieving=part)
    reach = float(train.vehicle.distances[-1]) + sum(gaps)
    fronts = np.linspace(-reach, lines.stations[-1] + reach, 1201)
    cut = refined(lines)
    for side, sign in enumerate(SIGNS):
        adverse = InfluenceLines(cut.effects, cut.stations, np.maximum(sign * cut.ordinates, 0.0))
        for heading in train.headings:
            x = fronts[:, None] - heading * train.vehicle.distances
            ends = np.sort(np.array([hole_of(train, front, heading, gaps) for front in fronts]), axis=1)
            for row, effect in enumerate(lines.effects):
                y = sign * lines[effect.key].at(x)
                axles = 1.3 * np.where(y < 0.0, part * y, y) @ train.felt
                gone = integral(adverse, row, ends[:, 1]) - integral(adverse, row, ends[:, 0])
                values = axles + load * (abs(areas(lines)[row, side]) - gone)
                margin = 1e-12 * (load * largest(lines)[row] + 1.3 * train.felt.sum())
                assert values.max() <= sign * found.values[row, side] + margin


@settings(deadline=None)
@given(drawn_lines(), drawn_trains(), gaps_drawn, st.floats(0.0, 6.0))
def test_where_it_stands_outside_gives_its_value(
    lines: InfluenceLines, train: Train, gaps: tuple[float, float], load: float
) -> None:
    """Axles at their places and 1 N/m on what is left, from panel loads.

    1e-12 of all that could be adverse; a lost axle's front is put 1e-12 of the bridge beyond, so ten times as much.
    """
    found = outside_vehicle(lines, train, load, gaps=gaps)
    for row, most in enumerate(largest(lines)):
        for side, sign in enumerate(SIGNS):
            front, heading = float(found.front[row, side]), int(found.heading[row, side])
            if heading == 0:
                assert_allclose(found.values[row, side], load * areas(lines)[row, side], rtol=1e-12, atol=1e-12)
                continue
            assert heading in train.headings
            assert sign * found.values[row, side] >= load * abs(areas(lines)[row, side]) * (1.0 - 1e-12)
            x = front - heading * train.vehicle.distances
            axles = lines.under(panel_loads(lines.stations, x[None, :], train.felt).T)[row, 0]
            left = stretches_outside(lines, row, side, hole_of(train, front, heading, gaps))
            scale = load * most + float(train.felt.sum())
            value = float(axles) + load * under(lines, row, left)
            assert_allclose(value, found.values[row, side], rtol=0.0, atol=1e-11 * scale)


@given(drawn_lines(), drawn_trains(), gaps_drawn, st.floats(0.0, 1.0), st.floats(0.0, 1.0))
def test_less_relief_never_lowers_it(
    lines: InfluenceLines, train: Train, gaps: tuple[float, float], one: float, other: float
) -> None:
    """Monotone in what counts where it relieves; round-off of all axles on an ordinate of 1."""
    parts = (1.0, max(one, other), min(one, other), 0.0)
    sizes = [np.abs(outside_vehicle(lines, train, 1.0, gaps=gaps, relieving=part).values) for part in parts]
    for full, less in itertools.pairwise(sizes):
        assert (less >= full - 1e-12 * (train.felt.sum() + largest(lines)[:, None])).all()


def test_what_cannot_stand_outside() -> None:
    train = train_of([10.0, 5.0], [2.0])
    with pytest.raises(InputError, match=r"drawn: gaps are 0 or more, got -1 and 0 m"):
        outside_vehicle(TENT, train, 1.0, gaps=(-1.0, 0.0))
    tracked = Vehicle("tracked", [10.0], [], strips=(Strip(0.0, 2.0, 5.0),))
    loaded = type(train)("tracked", tracked, np.ones(1))
    with pytest.raises(InputError, match=r"tracked: one uniform load counts here, got a vehicle with its own"):
        outside_vehicle(TENT, loaded, 1.0)
    lifting = type(train)("lifting", train.vehicle, np.array([1.0, -0.2]))
    with pytest.raises(InputError, match=r"lifting: an axle that lifts relieves where others load"):
        outside_vehicle(TENT, lifting, 1.0, relieving=0.5)
