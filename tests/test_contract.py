"""The names and signatures that checks outside this suite call, and what they must at least give back."""

from __future__ import annotations

import inspect
from pathlib import Path

import numpy as np
import pytest

import movload
from movload import (
    InfluenceLines,
    Loading,
    Member,
    Peak,
    Peaks,
    Ratings,
    SolvedBridge,
    Support,
    Truss,
    Vehicle,
    influence_lines,
    judge,
    rate,
    read_bridge,
    read_vehicle,
    solve,
    sweep,
)

EXAMPLE = Path(__file__).resolve().parent.parent / "examples" / "kettle_ford.toml"
STEEL = {"area": 1e-3, "modulus": 2e11}


@pytest.fixture
def truss() -> Truss:
    """Return a triangle on a span of 7 m whose right bearing slides on a bed at 30 degrees."""
    joints = {"L0": (0.0, 0.0), "U1": (3.1, 2.3), "L1": (3.1, 0.0), "L2": (7.0, 0.0)}
    names = [("L0", "U1"), ("U1", "L2"), ("L0", "L1"), ("L1", "L2"), ("U1", "L1")]
    members = [Member(start, end, **STEEL) for start, end in names]
    return Truss(joints, members, [Support("L0"), Support("L2", 30.0)])


def positional(function: object) -> list[str]:
    """Return the names that may be given by position."""
    kinds = (inspect.Parameter.POSITIONAL_ONLY, inspect.Parameter.POSITIONAL_OR_KEYWORD)
    return [p.name for p in inspect.signature(function).parameters.values() if p.kind in kinds]  # type: ignore[arg-type]


@pytest.mark.parametrize(
    ("function", "names"),
    [
        (Truss, ["joints", "members", "supports"]),
        (Member, ["start", "end", "area", "modulus"]),
        (Support, ["joint", "slides"]),
        (influence_lines, ["truss", "panel_points"]),
        (Vehicle, ["title", "loads", "spacings"]),
        (sweep, ["lines", "vehicle"]),
        (solve, ["bridge", "method"]),
        (judge, ["solved", "crossings"]),
        (rate, ["bridge", "crossings", "method"]),
        (Loading, ["title", "kind", "cases"]),
    ],
)
def test_leading_names_are_positional_and_the_rest_keywords(function: object, names: list[str]) -> None:
    assert positional(function) == names


def test_every_public_name_can_be_loaded() -> None:
    for name in movload.__all__:
        assert getattr(movload, name) is not None
    assert set(movload.__all__) <= set(dir(movload))
    with pytest.raises(AttributeError, match="nothing_like_it"):
        movload.nothing_like_it  # noqa: B018  # looking it up is the test


def test_lines_hold_effects_stations_and_ordinates(truss: Truss) -> None:
    lines = influence_lines(truss, ["L0", "L1", "L2"])
    assert isinstance(lines, InfluenceLines)
    names = [effect.name for effect in lines.effects]
    assert names[:5] == [member.name for member in truss.members]
    assert names[5:] == ["L0 x", "L0 y", "L2 normal", "L0 down", "L1 down", "L2 down"]
    np.testing.assert_array_equal(lines.stations, [0.0, 3.1, 7.0])
    assert lines.ordinates.shape == (11, 3)
    assert lines["L2-U1"].at(3.1) == lines["U1-L2"].at(3.1)


def test_a_load_on_a_support_reaches_the_reaction(truss: Truss) -> None:
    lines = influence_lines(truss, ["L0", "L1", "L2"])
    # at L2 the bed's normal is (-sin 30, cos 30); moments about L0 give normal = 1 / cos 30
    np.testing.assert_allclose(lines["L2 normal"].at(7.0), 1.0 / np.cos(np.pi / 6), rtol=1e-13)
    np.testing.assert_allclose(lines["L0 y"].at(0.0), 1.0, rtol=1e-13)


def test_a_member_may_have_a_name_of_its_own() -> None:
    assert Member("A", "B", 1e-3, 2e11).name == "A-B"
    assert Member("A", "B", 1e-3, 2e11, name="tie").name == "tie"


def test_peaks_have_values_positions_and_placements(truss: Truss) -> None:
    lines = influence_lines(truss, ["L0", "L1", "L2"])
    vehicle = Vehicle("cart", [30e3, 50e3], [2.1])
    peaks = sweep(lines, vehicle)
    assert isinstance(peaks, Peaks)
    assert peaks.highest.shape == peaks.lowest.shape == (11,)
    assert (peaks.highest >= 0).all()
    assert (peaks.lowest <= 0).all()
    peak = peaks["U1-L1"].highest
    assert isinstance(peak, Peak)
    assert (peak.value, peak.axle, peak.station) == (peaks.highest[4], 1, 1)
    assert peak.heading in {1, -1}
    assert peak.spacings == (2.1,)
    never = peaks["L0-U1"].highest
    assert (never.value, never.heading, never.placement.x.size) == (0.0, 0, 0)
    assert np.isnan(never.position)


def test_many_vehicles_are_one_batch_and_equal_single_sweeps(truss: Truss) -> None:
    lines = influence_lines(truss, ["L0", "L1", "L2"])
    vehicles = [Vehicle("one", [30e3], []), Vehicle("two", [30e3, 50e3], [2.1]), read_vehicle("hs20")]
    batch = sweep(lines, vehicles)
    assert isinstance(batch, list)
    for peaks, vehicle in zip(batch, vehicles, strict=True):
        alone = sweep(lines, vehicle)
        np.testing.assert_allclose(peaks.highest, alone.highest, rtol=1e-13)  # one ulp: the product's shape differs
        np.testing.assert_allclose(peaks.lowest, alone.lowest, rtol=1e-13)


def test_from_files_to_ratings() -> None:
    bridge, loading = read_bridge(EXAMPLE), read_vehicle("hs20")
    assert isinstance(loading, Loading)
    solved = solve(bridge)
    assert isinstance(solved, SolvedBridge)
    ratings = judge(solved, [loading])
    assert isinstance(ratings, Ratings)
    rows = len(solved.effects)
    assert ratings.factor.shape == (1, 1, rows, 2)
    assert ratings.impact.shape == (1, rows, 2)
    assert solved.permanent.shape == (len(solved.classes), rows)
    assert solved.strength.shape == (1, rows, 2)
    np.testing.assert_array_equal(rate(bridge, [loading]).factor, ratings.factor)
