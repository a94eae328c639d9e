"""K = L Lᵀ of a symmetric banded matrix, and K⁻¹ on columns.

Small matrices go through numpy, as K⁻¹ = L⁻ᵀ L⁻¹ multiplied out: scipy is a seventh of what starting a command takes,
and for the trusses of most bridges it would be loaded for two calls. Larger ones go through LAPACK's banded routines.
One step of refinement follows either (see `movload.statics.stiffness`), so both give the same digits.
"""

from __future__ import annotations

from dataclasses import dataclass
from typing import TYPE_CHECKING, Final, Protocol

import numpy as np

if TYPE_CHECKING:
    from movload.arrays import Floats

SMALL: Final = 64  # rows; a truss of 15 panels has about as many free movements


class Factor(Protocol):
    """A factored matrix."""

    def solved(self, columns: Floats) -> Floats:
        """Return K⁻¹ columns, (N,) or (N, K)."""
        ...


@dataclass(frozen=True, slots=True, eq=False)
class Dense:
    """A small matrix by its inverse (N, N)."""

    inverse: Floats

    def solved(self, columns: Floats) -> Floats:
        """Return K⁻¹ columns, (N,) or (N, K)."""
        answer: Floats = self.inverse @ columns
        return answer


@dataclass(frozen=True, slots=True, eq=False)
class Banded:
    """A matrix by the lower band of L: entry (i, j) stands at [i - j, j]."""

    band: Floats

    def solved(self, columns: Floats) -> Floats:
        """Return K⁻¹ columns, (N,) or (N, K)."""
        from scipy.linalg.lapack import dpbtrs

        answer, _ = dpbtrs(self.band, columns, lower=1)
        return np.asarray(answer)


def cholesky(band: Floats) -> tuple[Factor, bool]:
    """Return a matrix factored, and whether it was positive definite; the factor of one that was not is of no use.

    Parameters
    ----------
    band
        Its lower band (width, N): entry (i, j) stands at [i - j, j].
    """
    if band.shape[1] <= SMALL:
        return _dense(band)
    from scipy.linalg.lapack import dpbtrf

    factor, failed = dpbtrf(band, lower=1)
    return Banded(np.asarray(factor)), not failed


def _dense(band: Floats) -> tuple[Factor, bool]:
    """Return a small matrix by its inverse."""
    width, size = band.shape
    whole = np.zeros((size, size))
    for below in range(min(width, size)):
        diagonal = np.arange(size - below)
        whole[diagonal + below, diagonal] = band[below, : size - below]  # cholesky reads the lower half alone
    try:
        lower = np.linalg.inv(np.linalg.cholesky(whole))
    except np.linalg.LinAlgError:
        return Dense(np.zeros((size, size))), False
    return Dense(lower.T @ lower), True
