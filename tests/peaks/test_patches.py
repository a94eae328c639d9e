"""Uniform loads standing still: what reaches the panel points, felt loads, several vehicles, and what is refused."""

from __future__ import annotations

from typing import TYPE_CHECKING

import numpy as np
import pytest
from hypothesis import given
from hypothesis import strategies as st
from numpy.testing import assert_allclose, assert_array_equal

from movload.errors import InputError
from movload.peaks.patches import Patches, joined, spread

if TYPE_CHECKING:
    from movload.arrays import Floats

panels = st.lists(st.floats(1.7, 7.3), min_size=1, max_size=6)  # m
ends = st.floats(-20.0, 60.0)  # m
ROUND_OFF = 1e-13  # of the heaviest load on the longest deck drawn: a few dozen additions


def patches(start: list[float], end: list[float], load: list[float], **other: list[float]) -> Patches:
    """Return whole loads of one vehicle with no impact, unless said otherwise."""
    count = len(start)
    given_columns = {"share": [1.0] * count, "impact": [0.0] * count, "factor": [1.0] * count} | other
    columns = (np.array(one, dtype=np.float64) for one in (start, end, load, *given_columns.values()))
    return Patches(*columns, np.full(count, np.nan), np.zeros(count, dtype=np.intp), np.zeros(count, dtype=np.bool_))


def by_many_axles(stations: Floats, begin: float, end: float, pieces: int = 4000) -> Floats:
    """Return panel loads of 1 N/m as so many equal point loads, each at the middle of its piece (midpoint rule)."""
    low, high = max(begin, stations[0]), min(end, stations[-1])
    if low >= high:
        return np.zeros(stations.size)
    x = low + (high - low) * (np.arange(pieces) + 0.5) / pieces
    hats = np.array([np.interp(x, stations, hat) for hat in np.eye(stations.size)])
    return np.asarray(hats.sum(axis=1) * (high - low) / pieces)


@given(panels, ends, ends)
def test_spread_is_what_many_axles_come_to(lengths: list[float], one: float, other: float) -> None:
    """The midpoint rule is exact where a hat is straight; in the piece that holds its kink it is off by (h/2)^2 k/2."""
    stations = np.concatenate(([0.0], np.cumsum(lengths)))
    begin, end = sorted((one, other))
    loads = spread(stations, np.array([[begin]]), np.array([[end]]), np.ones(1))[0]
    piece = stations[-1] / 4000
    assert_allclose(loads, by_many_axles(stations, begin, end), rtol=0.0, atol=3 * piece**2 / min(lengths) + 1e-12)


@given(panels, st.lists(st.tuples(ends, ends, st.floats(-9.0, 90.0)), min_size=1, max_size=4))
def test_spread_keeps_load_and_moment(lengths: list[float], drawn: list[tuple[float, float, float]]) -> None:
    """Panel loads have the sum and the moment about x = 0 of what stands between the end stations."""
    stations = np.concatenate(([0.0], np.cumsum(lengths)))
    begins, stops, felt = np.array(drawn).T
    loads = spread(stations, begins[None], stops[None], felt)[0]
    low, high = np.clip(np.minimum(begins, stops), 0.0, stations[-1]), np.clip(stops, 0.0, stations[-1])
    on = np.where(begins < stops, high - low, 0.0)
    size = np.abs(felt).sum() * stations[-1]
    assert_allclose(loads.sum(), felt @ on, rtol=0.0, atol=ROUND_OFF * size)
    assert_allclose(loads @ stations, felt @ (on * (low + high) / 2), rtol=0.0, atol=ROUND_OFF * size * stations[-1])


def test_spread_by_hand() -> None:
    """10 N/m from 1 to 5 m on panels of 4 and 2 m: 30 N at 2.5 m, and 10 N at 4.5 m; a position of its own each."""
    stations = np.array([0.0, 4.0, 6.0])
    start, end = np.array([[1.0], [-9.0], [6.0], [-np.inf], [3.0]]), np.array([[5.0], [0.0], [9.0], [np.inf], [2.0]])
    loads = spread(stations, start, end, np.array([10.0]))
    assert_allclose(loads[0], [30 * 1.5 / 4, 30 * 2.5 / 4 + 10 * 1.5 / 2, 10 * 0.5 / 2], rtol=1e-15)
    assert_array_equal(loads[[1, 2, 4]], np.zeros((3, 3)))
    assert_allclose(loads[3], [20.0, 30.0, 10.0], rtol=1e-15)


def test_felt_and_panel_loads() -> None:
    """Load x share x factor x (1 + impact), each patch with its own."""
    both = patches([0.0, 2.0], [2.0, 4.0], [8.0, 6.0], share=[0.5, 0.25], impact=[0.3, 0.0], factor=[1.0, 1.2])
    assert_allclose(both.felt, [8.0 * 0.5 * 1.3, 6.0 * 0.25 * 1.2], rtol=1e-15)
    assert_allclose(both.panel_loads(np.array([0.0, 2.0, 4.0])), [5.2, 5.2 + 1.8, 1.8], rtol=1e-15)
    assert not both.start.flags.writeable


def test_none_loads_nothing() -> None:
    nothing = Patches.none()
    assert nothing.felt.shape == (0,)
    assert_array_equal(nothing.panel_loads(np.array([0.0, 3.0, 5.0])), np.zeros(3))


def test_joined_counts_the_vehicles() -> None:
    """A vehicle without uniform loads keeps its number."""
    first, third = patches([0.0], [1.0], [5.0]), patches([2.0, 3.0], [2.5, 4.0], [6.0, 7.0])
    whole = joined([first, Patches.none(), third])
    assert_array_equal(whole.vehicle, [0, 2, 2])
    assert_array_equal(whole.load, [5.0, 6.0, 7.0])
    assert_array_equal(whole.start, [0.0, 2.0, 3.0])
    assert joined([first]) is first
    assert joined([]).start.size == 0


@pytest.mark.parametrize("end", [1.0, 0.5, float("nan")])
def test_a_patch_needs_a_length(end: float) -> None:
    with pytest.raises(InputError, match=r"patches\[1\]: .* greater end, got 1 to"):
        patches([0.0, 1.0], [2.0, end], [5.0, 5.0])
