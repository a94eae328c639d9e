"""Loaded lengths and dynamic allowances: small lines by hand, a slow walk along drawn ones, and what is refused."""

from __future__ import annotations

import math
from typing import TYPE_CHECKING

import numpy as np
import pytest
from hypothesis import given
from hypothesis import strategies as st
from numpy.testing import assert_allclose, assert_array_equal
from oracles.trusses import bottom, pratt, simple_span, truss_of
from strategies import panel_lengths

from movload.errors import InputError, MissingDataError
from movload.rating.impact import (
    by_loaded_length,
    is_short_loaded,
    loaded_lengths,
    longest_adjacent_panel,
    railway,
    railway_lengths,
)
from movload.statics.influence import influence_lines

if TYPE_CHECKING:
    from movload.arrays import Floats

NAN = math.nan
FOOT = 0.3048  # m
ROUNDED = 1e-12  # relative: a dozen operations on numbers of one size
PANELS = np.array([0.0, 4.0, 8.0, 12.0, 16.0])  # m


def lengths_of(*ordinates: float, stations: Floats = PANELS) -> tuple[float, float]:
    """Return the positive and the negative loaded length of one row [m]."""
    positive, negative = loaded_lengths(stations, np.array([ordinates]))[0]
    return float(positive), float(negative)


def walked(stations: Floats, ordinates: Floats) -> float:
    """Return the positive loaded length of one row, walking station by station from each largest ordinate."""
    if ordinates.max() <= 0.0:
        return NAN
    found = []
    for peak in np.flatnonzero(ordinates == ordinates.max()):
        reach = 0.0
        for step in (-1, 1):
            here = int(peak)
            while 0 <= here + step < stations.size:
                y, beyond = float(ordinates[here]), float(ordinates[here + step])
                panel = abs(float(stations[here + step] - stations[here]))
                if beyond <= 0.0:
                    reach += panel * y / (y - beyond)
                    break
                reach, here = reach + panel, here + step
        found.append(reach)
    return min(found)


@st.composite
def lines(draw: st.DrawFn) -> tuple[Floats, Floats]:
    """Draw stations and three rows; whole ordinates, so that zeros and equal peaks are common and exact."""
    panels = draw(st.lists(panel_lengths, min_size=1, max_size=9))
    row = st.lists(st.integers(-4, 4), min_size=len(panels) + 1, max_size=len(panels) + 1)
    rows = draw(st.lists(row, min_size=3, max_size=3))
    return np.concatenate(([0.0], np.cumsum(panels))), np.array(rows, dtype=np.float64)


# ---------------------------------------------------------------------------------------------- loaded lengths


def test_a_hanger_is_loaded_over_its_two_panels() -> None:
    assert_array_equal(lengths_of(0.0, 1.0, 0.0, 0.0, 0.0), (8.0, NAN))
    assert_array_equal(lengths_of(0.0, 0.0, -0.5, 0.0, 0.0), (NAN, 8.0))


def test_a_chord_is_loaded_over_the_whole_span() -> None:
    assert_array_equal(lengths_of(0.0, -0.5, -1.0, -0.5, 0.0), (NAN, 16.0))


def test_a_diagonal_changes_sense_inside_a_panel() -> None:
    """From -0.3 at 4 m to 0.5 at 8 m: zero at 4 + 4 x 0.3 / 0.8 = 5.5 m."""
    assert_allclose(lengths_of(0.0, -0.3, 0.5, 0.25, 0.0), (10.5, 5.5), rtol=ROUNDED)


def test_an_ordinate_at_the_end_of_the_deck_ends_the_stretch_there() -> None:
    """A reaction: 1 at its own end. An end post on an overhang: ordinates at both ends."""
    assert_array_equal(lengths_of(1.0, 0.75, 0.5, 0.25, 0.0), (16.0, NAN))
    assert_allclose(lengths_of(-1.0, 1.0, 1.0, 1.0, -3.0), (11.0, 3.0), rtol=ROUNDED)  # zeros at 2 and 13 m


def test_only_the_stretch_with_the_largest_ordinate_counts() -> None:
    """Continuous over 8 m: two stretches of each sense; zero on a station ends one as well."""
    assert_allclose(lengths_of(0.0, 2.0, 0.0, 1.0, 0.0), (8.0, NAN), rtol=ROUNDED)
    assert_allclose(lengths_of(1.0, -1.0, 0.0, 2.0, 3.0), (8.0, 6.0), rtol=ROUNDED)


@pytest.mark.parametrize("nudge", [0.0, 1e-13, -1e-13])
def test_of_equal_peaks_the_shorter_stretch_counts_whatever_round_off_says(nudge: float) -> None:
    """Peaks of 1 at 4 m (0 to 8 m) and at 16 m (8 to 16 m, but cut to 4 m by the -1 at 12 m: from 14 m)."""
    assert_allclose(lengths_of(0.0, 1.0, 0.0, -1.0, 1.0 + nudge)[0], 2.0, rtol=ROUNDED)


def test_a_row_that_feels_nothing_has_no_length() -> None:
    assert_array_equal(lengths_of(0.0, 0.0, 0.0, 0.0, 0.0), (NAN, NAN))


def test_round_off_neither_lengthens_nor_breaks_a_stretch() -> None:
    assert_array_equal(lengths_of(0.0, 1.0, 1e-13, 1e-13, -1e-13), (8.0, NAN))


def test_every_row_of_a_bridge_by_its_own_line() -> None:
    """Invented Pratt of 6 x 4 m, 5 m deep; U2-L3's zero at 9.6 m: shear -1/3 at 8 m, 1/2 at 12 m."""
    found = influence_lines(truss_of(pratt([4.0] * 6, [5.0] * 5), simple_span(6)), bottom(6))
    lengths = loaded_lengths(found.stations, found.ordinates)
    named = {effect.name: tuple(row) for effect, row in zip(found.effects, lengths, strict=True)}
    assert_allclose(named["U2-L3"], (14.4, 9.6), rtol=ROUNDED)
    assert_allclose(named["U1-L1"], (8.0, NAN), rtol=ROUNDED)
    assert_allclose(named["L0-U1"], (NAN, 24.0), rtol=ROUNDED)
    assert_array_equal(named["U3-L3"], (NAN, NAN))


@given(lines())
def test_lengths_are_those_of_a_slow_walk(drawn: tuple[Floats, Floats]) -> None:
    """Row by row and sense by sense; absolute, as one method adds panels and the other subtracts stations."""
    stations, ordinates = drawn
    expected = [(walked(stations, row), walked(stations, -row)) for row in ordinates]
    assert_allclose(loaded_lengths(stations, ordinates), expected, rtol=0.0, atol=1e-12)


@given(lines())
def test_stretches_of_both_senses_fit_beside_each_other(drawn: tuple[Floats, Floats]) -> None:
    lengths = loaded_lengths(*drawn)
    span = drawn[0][-1]
    assert (lengths[~np.isnan(lengths)] > 0.0).all()
    assert (np.nansum(lengths, axis=1) <= span * (1 + ROUNDED)).all()
    assert_array_equal(np.isnan(lengths), np.stack((drawn[1].max(axis=1) <= 0, drawn[1].min(axis=1) >= 0), axis=1))


@given(lines(), st.floats(1e-6, 1e6))
def test_only_proportions_of_a_line_count(drawn: tuple[Floats, Floats], factor: float) -> None:
    stations, ordinates = drawn
    lengths = loaded_lengths(stations, ordinates)
    assert_allclose(loaded_lengths(stations, factor * ordinates), lengths, rtol=ROUNDED)
    assert_array_equal(loaded_lengths(stations, -ordinates), lengths[:, ::-1])
    assert_allclose(loaded_lengths(factor * stations, ordinates), factor * lengths, rtol=ROUNDED)


@given(lines())
def test_a_mirrored_line_has_the_same_lengths(drawn: tuple[Floats, Floats]) -> None:
    stations, ordinates = drawn
    mirrored = loaded_lengths(-stations[::-1], ordinates[:, ::-1])
    assert_allclose(mirrored, loaded_lengths(stations, ordinates), rtol=0.0, atol=1e-12)


@pytest.mark.parametrize("function", [loaded_lengths, is_short_loaded, longest_adjacent_panel])
@pytest.mark.parametrize("shape", [(1, 4), (5,), (5, 1)])
def test_ordinates_that_do_not_fit_are_refused(function: object, shape: tuple[int, ...]) -> None:
    assert callable(function)
    with pytest.raises(InputError, match=r"impact: ordinates \(.*\) do not fit stations \(5,\)"):
        function(PANELS, np.zeros(shape))


def test_one_station_is_no_line() -> None:
    with pytest.raises(InputError, match=r"impact: ordinates \(1, 1\) do not fit stations \(1,\)"):
        loaded_lengths(np.zeros(1), np.ones((1, 1)))


# ------------------------------------------------------------------------------------------------- by length


def test_by_loaded_length() -> None:
    """100 ft: 50/225. 41.667 ft is where the cap of 0.30 begins: 50/0.30 - 125."""
    assert_allclose(by_loaded_length(100.0 * FOOT), 50.0 / 225.0, rtol=ROUNDED)
    assert_allclose(by_loaded_length(FOOT * np.array([41.6, 42.0])), [0.30, 50.0 / 167.0], rtol=ROUNDED)


def test_no_length_is_the_greatest_impact() -> None:
    """A side that only a negative share can load must not lose its impact: nan counts as 0 ft."""
    assert_allclose(by_loaded_length(np.array([NAN, 0.0])), 0.30, rtol=ROUNDED)
    assert_allclose(railway(np.array([NAN, 0.0]), spacing=10.0 * FOOT), 0.40 + 0.10, rtol=ROUNDED)


def test_a_length_below_nothing_is_refused() -> None:
    with pytest.raises(InputError, match="impact: a loaded length is 0 or more, got -2 m"):
        by_loaded_length(np.array([NAN, 3.0, -2.0]))


@given(st.floats(0.0, 900.0), st.floats(0.0, 900.0))
def test_the_shorter_length_never_has_the_smaller_impact(one: float, other: float) -> None:
    """What the choices of a shorter stretch and of a panel for the span rest on, in both rules."""
    lengths = np.sort([one, other])
    for impact in (by_loaded_length(lengths), railway(lengths, spacing=5.0)):
        assert impact[0] >= impact[1] * (1 - ROUNDED)


# --------------------------------------------------------------------------------------------------- railway


def test_rocking_is_a_couple_of_a_fifth_of_a_wheel_on_rails_5_ft_apart() -> None:
    """0.20 W x 5 ft / S beside the W each beam carries: beams under the rails (5 ft) take the whole 20 %."""
    vertical = 0.28  # at 80 ft
    for spacing in (5.0, 6.5, 16.0):
        assert_allclose(railway(80.0 * FOOT, spacing=spacing * FOOT) - vertical, 0.20 * 5.0 / spacing, rtol=1e-11)


def test_railway_without_a_spacing_says_what_is_missing() -> None:
    with pytest.raises(MissingDataError, match=r"^deck\.truss_spacing: .*rocking.*or a fraction at rating\.impact$"):
        railway(np.array([10.0]), spacing=None)


@pytest.mark.parametrize("spacing", [0.0, -4.0, NAN])
def test_trusses_in_one_plane_are_refused(spacing: float) -> None:
    with pytest.raises(InputError, match=rf"^deck\.truss_spacing: .*more than 0 m apart, got {spacing} m$"):
        railway(np.array([10.0]), spacing=spacing)


UNEQUAL = np.array([0.0, 3.0, 8.0, 12.0, 18.0])  # m: panels of 3, 5, 4, 6
SHORT_OR_NOT = [
    ((0.0, 1.0, 0.0, 0.0, 0.0), True, 5.0),  # hip vertical, floorbeam
    ((0.0, 0.0, 0.0, -1.0, 0.0), True, 6.0),
    ((1.0, 0.0, 0.0, 0.0, 0.0), True, 3.0),  # end floorbeam
    ((0.0, 0.0, 0.0, 0.0, 1.0), True, 6.0),
    ((1.0, 1.0, 0.0, 0.0, 0.0), True, 5.0),
    ((0.0, 1.0, 1.0, 0.0, 0.0), False, 5.0),  # three panels
    ((1.0, 0.0, 0.0, 0.0, 1.0), False, 6.0),  # two panels, but not side by side
    ((0.0, 0.5, 1.0, 0.5, 0.0), False, 6.0),
    ((0.0, 1.0, 1e-13, 0.0, 1e-13), True, 5.0),  # round-off is no load
    ((0.0, 0.0, 0.0, 0.0, 0.0), False, NAN),
]


@pytest.mark.parametrize(("ordinates", "short", "longest"), SHORT_OR_NOT)
def test_short_loaded_rows_and_their_longer_panel(ordinates: tuple[float, ...], *, short: bool, longest: float) -> None:
    row = np.array([ordinates])
    assert_array_equal(is_short_loaded(UNEQUAL, row), [short])
    assert_array_equal(longest_adjacent_panel(UNEQUAL, row), [longest])
    assert_array_equal(railway_lengths(UNEQUAL, row, span=18.0), [longest if short else 18.0])


def test_on_two_panels_every_row_that_feels_something_is_short_loaded() -> None:
    found = is_short_loaded(UNEQUAL[:3], np.array([[0.0, 1.0, 0.0], [1.0, 0.4, 0.0], [0.0, 0.0, 0.0]]))
    assert_array_equal(found, [True, True, False])


def test_short_loaded_members_of_a_pratt_are_its_hip_verticals() -> None:
    found = influence_lines(truss_of(pratt([4.0] * 6, [5.0] * 5), simple_span(6)), bottom(6))
    short = is_short_loaded(found.stations, found.ordinates)
    assert {effect.name for effect, one in zip(found.effects, short, strict=True) if one} == {"U1-L1", "U5-L5"}


def test_short_loaded_members_of_subdivided_panels() -> None:
    """Invented, eight half panels of 3 m: sub-verticals and sub-diagonals. The hip hanger feels four half panels."""
    joints = {f"L{i}": (3.0 * i, 0.0) for i in range(9)} | {f"U{i}": (3.0 * i, 6.0) for i in (2, 4, 6)}
    joints |= {f"M{i}": (3.0 * i, 3.0) for i in (1, 3, 5, 7)}
    bars = [(f"L{i}", f"L{i + 1}") for i in range(8)] + [("U2", "U4"), ("U4", "U6")]
    bars += [("L0", "M1"), ("M1", "U2"), ("U2", "M3"), ("M3", "L4"), ("L4", "M5"), ("M5", "U6"), ("U6", "M7")]
    bars += [("M7", "L8"), ("U2", "L2"), ("U4", "L4"), ("U6", "L6")]
    subs = [(f"M{i}", f"L{i}") for i in (1, 3, 5, 7)] + [("M1", "L2"), ("M3", "L2"), ("M5", "L6"), ("M7", "L6")]
    found = influence_lines(truss_of((joints, bars + subs), simple_span(8)), bottom(8))
    short = is_short_loaded(found.stations, found.ordinates)
    assert {e.name for e, one in zip(found.effects, short, strict=True) if one} == {f"{a}-{b}" for a, b in subs}
    hanger = found["U2-L2"].ordinates
    assert_array_equal(np.flatnonzero(hanger), [1, 2, 3])


# ------------------------------------------------------------------------------------------------- the rules

VALUES = {"smooth": 0.12, "minor": 0.23, "severe": 0.34}  # invented: the values are data of a factor set
