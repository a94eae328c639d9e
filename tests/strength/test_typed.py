"""Permitted forces as typed: which row and which sense they are for, and what is not known."""

from __future__ import annotations

import math

import numpy as np
import pytest
from numpy.testing import assert_array_equal

from movload.bridge.bridge import Permitted
from movload.errors import InputError
from movload.statics.part import Effect
from movload.strength.typed import SENSES, permitted_strength, permitted_strengths

ROWS = (
    Effect("truss", "U1-L2", "axial", "N"),
    Effect("truss", "L0-U1", "axial", "N"),
    Effect("truss", "L0-L1", "axial", "N"),
    Effect("truss", "hanger", "axial", "N"),
    Effect("truss", "L0 y", "reaction", "N"),
    Effect("truss", "L1 down", "down", "m"),
)


def test_each_force_stands_in_its_row_tension_first() -> None:
    permits = {"L0-U1": Permitted(compression=250e3), "U1-L2": Permitted(254e3, 97e3), "hanger": Permitted(tension=0.0)}
    unknown = math.nan
    expected = [[254e3, 97e3], [unknown, 250e3], [unknown, unknown], [0.0, unknown], *[[unknown, unknown]] * 2]
    strengths = permitted_strengths(ROWS, permits)
    assert_array_equal(strengths, expected)
    assert SENSES == ("tension", "compression")
    assert not strengths.flags.writeable


def test_a_row_that_is_no_bar_is_never_given_a_bars_strength() -> None:
    assert np.isnan(permitted_strengths(ROWS, {"L0 y": Permitted(1.0, 1.0), "L1 down": Permitted(1.0, 1.0)})).all()


def test_no_rows_and_no_permits() -> None:
    assert permitted_strengths((), {"U1-L2": Permitted(1.0)}).shape == (0, 2)
    assert np.isnan(permitted_strengths(ROWS, {})).all()


@pytest.mark.parametrize("sense", SENSES)
def test_a_typed_strength_shows_where_it_comes_from(sense: str) -> None:
    strength = permitted_strength("U1-L2", Permitted(254e3, 97e3), sense)
    (step,) = strength.steps
    assert strength.value == step.value == {"tension": 254e3, "compression": 97e3}[sense]
    assert step.equation == f"permitted {sense} of U1-L2, as typed"
    assert (step.unit, step.source) == ("N", "bridge file")


def test_a_strength_that_nobody_typed_is_not_zero() -> None:
    assert math.isnan(permitted_strength("U1-L2", Permitted(tension=254e3), "compression").value)


@pytest.mark.parametrize("force", [-1.0, math.inf, math.nan])
@pytest.mark.parametrize("sense", SENSES)
def test_a_permitted_force_is_a_finite_magnitude(sense: str, force: float) -> None:
    with pytest.raises(InputError, match=rf"permits\.{sense}: a permitted force must be 0 or more, got {force} N"):
        Permitted(**{sense: force})
