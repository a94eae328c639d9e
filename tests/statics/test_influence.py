"""Influence lines as values: rows and their names, ordinates between stations, exact zeros, and what is refused."""

from __future__ import annotations

import pickle
import re

import numpy as np
import pytest
from numpy.testing import assert_allclose
from oracles.trusses import bottom, pratt, simple_span, truss_of

from movload import InfluenceLines, Member, Support, Truss, influence_lines
from movload.errors import InputError, UnknownNameError
from movload.statics.influence import lines_of
from movload.statics.stiffness import factored

PANELS = [3.1, 2.9, 3.3, 3.0]


@pytest.fixture(scope="module")
def truss() -> Truss:
    """Four invented panels, on a bed that inclines at the right."""
    return truss_of(pratt(PANELS, [2.9, 3.4, 3.1]), [Support("L0"), Support("L4", 12.0)])


@pytest.fixture(scope="module")
def lines(truss: Truss) -> InfluenceLines:
    """Its lines."""
    return influence_lines(truss, bottom(4))


def test_rows_are_members_then_reactions_then_deflections(truss: Truss, lines: InfluenceLines) -> None:
    names = [member.name for member in truss.members]
    names += ["L0 x", "L0 y", "L4 normal", "L0 down", "L1 down", "L2 down", "L3 down", "L4 down"]
    assert [effect.name for effect in lines.effects] == names
    kinds = ["axial"] * len(truss.members) + ["reaction"] * 3 + ["down"] * 5
    assert [effect.kind for effect in lines.effects] == kinds
    assert {(effect.kind, effect.unit) for effect in lines.effects} == {
        ("axial", "N"),
        ("reaction", "N"),
        ("down", "m"),
    }
    assert lines.ordinates.shape == (len(names), 5)
    assert_allclose(lines.stations, np.concatenate(([0.0], np.cumsum(PANELS))), rtol=1e-15)


def test_a_row_is_found_by_its_name_from_either_end_and_by_its_part(truss: Truss) -> None:
    lines = influence_lines(truss, bottom(4), part="left truss")
    row = lines["U1-L2"]
    assert row.effect.key == ("left truss", "U1-L2")
    for key in ("L2-U1", ("left truss", "U1-L2"), ("left truss", "L2-U1")):
        assert (lines[key].ordinates == row.ordinates).all()
    with pytest.raises(UnknownNameError, match=r'^row "L3 dwn" is not known \(nearest: "L3 down"\)$'):
        lines["L3 dwn"]
    with pytest.raises(UnknownNameError, match='row "U1-L2" is not known'):
        lines["right truss", "U1-L2"]


def test_a_named_member_is_found_by_its_joints_too() -> None:
    members = [Member("A", "B", 1e-3, 2e11, name="tie"), Member("B", "C", 1e-3, 2e11), Member("A", "C", 1e-3, 2e11)]
    truss = Truss({"A": (0.0, 0.0), "B": (4.0, 0.0), "C": (2.0, 1.0)}, members, [Support("A"), Support("B", 0)])
    assert influence_lines(truss, ["A", "B"])["B-A"].effect.name == truss.member("B-A").name


def test_ordinates_between_stations_are_straight_and_beyond_them_zero(lines: InfluenceLines) -> None:
    row = lines["L0 y"]
    first, second = row.ordinates[:2]
    x = np.array([[-1e-9, 0.0, 0.25 * PANELS[0]], [PANELS[0], sum(PANELS), sum(PANELS) + 1e-9]])
    expected = [[0.0, first, first + 0.25 * (second - first)], [second, row.ordinates[-1], 0.0]]
    assert_allclose(row.at(x), expected, rtol=1e-14, atol=1e-15)  # one interpolation in another order
    assert row.at(0.0).shape == ()


def test_loads_are_ordinates_times_loads(lines: InfluenceLines) -> None:
    loads = np.arange(15.0).reshape(5, 3) ** 2
    # the same 5 products in another order, of the row's largest
    size = np.abs(lines.ordinates).max(axis=1, keepdims=True) * loads.sum(axis=0)
    assert (np.abs(lines.under(loads) - lines.ordinates @ loads) <= 1e-14 * size).all()


def test_a_load_on_a_bearing_goes_straight_down() -> None:
    lines = influence_lines(truss_of(pratt(PANELS, [2.9, 3.4, 3.1]), simple_span(4)), bottom(4))
    assert (lines["L0 y"].ordinates[0], lines["L4 normal"].ordinates[-1]) == (1.0, 1.0)
    ends = lines.ordinates[:, [0, -1]]
    others = [effect.name not in {"L0 y", "L4 normal"} for effect in lines.effects]
    assert (ends[others] == 0.0).all()  # no bar feels it and nothing moves: exactly zero, not round-off


def test_zero_force_members_are_exactly_zero() -> None:
    """Bottom loaded, level chords: the middle post U2-L2 joins a chord in line; L0 x feels no vertical load."""
    for panels in (4, 40):
        span = truss_of(pratt([2.7 + 0.1 * (i % 3) for i in range(panels)], [3.3] * (panels - 1)), simple_span(panels))
        lines = influence_lines(span, bottom(panels))
        middle = panels // 2
        assert (lines[f"U{middle}-L{middle}"].ordinates == 0.0).all()
        assert (lines["L0 x"].ordinates == 0.0).all()
        assert (lines["L1-U1"].ordinates != 0.0).sum() == 1  # a hanger: only its own panel point


def test_no_ordinate_is_round_off(lines: InfluenceLines) -> None:
    size = np.abs(lines.ordinates) / np.abs(lines.ordinates).max(axis=1, initial=1e-30, keepdims=True)
    assert size[size > 0.0].min() > 1e-6


def test_lines_are_read_only(lines: InfluenceLines) -> None:
    for array in (lines.stations, lines.ordinates):
        with pytest.raises(ValueError, match="read-only"):
            array[0] = 1.0


def test_lines_come_back_from_pickle(lines: InfluenceLines) -> None:
    again = pickle.loads(pickle.dumps(lines))  # noqa: S301 - our own bytes
    assert again.effects == lines.effects
    assert (again.ordinates == lines.ordinates).all()
    assert (again.stations == lines.stations).all()
    row = pickle.loads(pickle.dumps(lines["U1-L2"]))  # noqa: S301 - our own bytes
    assert (row.ordinates == lines["U1-L2"].ordinates).all()


def test_lines_stay_read_only_through_pickle(lines: InfluenceLines) -> None:
    again = pickle.loads(pickle.dumps(lines))  # noqa: S301 - our own bytes
    assert not again.ordinates.flags.writeable


def test_a_truss_already_factored_gives_the_same_lines(truss: Truss, lines: InfluenceLines) -> None:
    assert (lines_of(factored(truss), bottom(4)).ordinates == lines.ordinates).all()


def test_more_panel_points_than_are_solved_at_once() -> None:
    """70 panels take three pieces of unit loads; each must land in its own columns."""
    span = truss_of(pratt([3.0] * 70, [4.0] * 69), simple_span(70))
    lines = influence_lines(span, bottom(70))
    assert_allclose(lines["L70 normal"].ordinates, np.arange(71) / 70, rtol=0.0, atol=1e-13)
    some = influence_lines(span, [f"L{i}" for i in range(0, 71, 2)])
    assert_allclose(some["U3-L4"].ordinates, lines["U3-L4"].ordinates[::2], rtol=0.0, atol=1e-13)


@pytest.mark.parametrize(
    ("panel_points", "message"),
    [
        (["L0"], "deck.panel_points: a deck needs at least 2 panel points, got 1"),
        (["L0", "L5"], 'deck.panel_points[1]: joint "L5" is not defined (nearest: "L'),
        (["L2", "L1"], "panel points must follow each other along +x"),
        (["L0", 1.0, "L2"], "an abutment may only stand first or last"),
        (["L0", float("nan")], "an abutment's x must be finite, got nan m"),
    ],
)
def test_panel_points_refused(truss: Truss, panel_points: list[str | float], message: str) -> None:
    with pytest.raises(InputError, match=re.escape(message)):
        influence_lines(truss, panel_points)


def test_rows_and_stations_must_fit(lines: InfluenceLines) -> None:
    with pytest.raises(
        InputError, match=r"^influence lines: 2 effects and 5 stations do not fit ordinates of shape \("
    ):
        InfluenceLines(lines.effects[:2], lines.stations, lines.ordinates)
