"""A factored matrix on either side of the size from which it is banded: both solve, both refuse the indefinite."""

from __future__ import annotations

from typing import TYPE_CHECKING

import numpy as np
import pytest
from hypothesis import given
from hypothesis import strategies as st
from numpy.testing import assert_allclose

from movload.statics.cholesky import SMALL, Banded, Dense, cholesky

if TYPE_CHECKING:
    from numpy.typing import NDArray

ROUND_OFF = 1e-9  # relative: condition numbers stay below 1e5 here


def matrix(size: int, width: int, seed: int) -> tuple[NDArray[np.float64], NDArray[np.float64]]:
    """Return a symmetric matrix whose diagonal outweighs each row, and its lower band."""
    draw = np.random.default_rng(seed)
    whole = np.zeros((size, size))
    for below in range(1, min(width, size)):
        whole += np.diag(draw.uniform(-1.0, 1.0, size - below), -below)
    whole += whole.T
    whole += np.diag(np.abs(whole).sum(axis=1) + draw.uniform(0.1, 10.0, size))
    band = np.zeros((width, size), order="F")
    for below in range(min(width, size)):
        band[below, : size - below] = np.diagonal(whole, -below)
    return whole, band


@given(st.integers(1, 2 * SMALL), st.integers(1, 7), st.integers(0, 10**6))
def test_it_solves(size: int, width: int, seed: int) -> None:
    """K x = b gives b back, one column or several."""
    whole, band = matrix(size, width, seed)
    factor, definite = cholesky(band)
    assert definite
    assert isinstance(factor, Dense if size <= SMALL else Banded)
    columns = np.random.default_rng(seed + 1).normal(size=(size, 3))
    assert_allclose(whole @ factor.solved(columns), columns, rtol=ROUND_OFF, atol=ROUND_OFF)
    assert_allclose(factor.solved(columns[:, 0]), factor.solved(columns)[:, 0], rtol=ROUND_OFF, atol=ROUND_OFF)


@pytest.mark.parametrize("size", [2, SMALL, SMALL + 1, 3 * SMALL])
def test_what_is_not_definite_is_said(size: int) -> None:
    _, band = matrix(size, 3, 1)
    band[0, size // 2] = -1.0
    assert not cholesky(band)[1]


def test_nothing_to_factor() -> None:
    factor, definite = cholesky(np.zeros((1, 0)))
    assert definite
    assert factor.solved(np.zeros((0, 2))).shape == (0, 2)
