"""The stiffness of a truss, factored once (see `movload.statics.cholesky`), then every load column solved with it.

One step of iterative refinement follows each solve, its residual formed element by element, r = F - Aᵀ s, never as
F - K u; and its correction is added to the forces, s + k A du, never to u before A is applied: the difference of two
large displacements has already lost what the correction restores. At 600 panels that takes a force's error from
about 1e-8 to about 1e-14 of its row's largest.
"""

from __future__ import annotations

import math
from dataclasses import dataclass
from typing import TYPE_CHECKING, Final

import numpy as np

from movload.errors import UnstableError
from movload.statics.cholesky import Factor, cholesky
from movload.statics.elements import ElementRows, element_rows

if TYPE_CHECKING:
    from movload.arrays import Floats
    from movload.bridge.truss import Truss

# Largest stretch of any element over the largest displacement, in the softest movement found. A mechanism's is
# round-off (1e-11 and less); the softest real truss, n panels long, has about 1/n2 (2e-7 at 2,000 panels).
_SURELY_STIFF: Final = 1e-6
_MECHANISM: Final = 1e-9
_FIRST, _SECOND = np.tril_indices(
    4
)  # the ten products of an element's four entries that stand on or below the diagonal
_TINY: Final = 1e-290  # N; a smaller load is none, its products underflow
_UNMENDABLE: Final = 1e-3  # of the loads, unbalanced after the first solve: one refinement squares it to 1e-6
_SHIFT: Final = 1e-11  # of the largest diagonal: lets a singular matrix be factored to find what moves


@dataclass(frozen=True, slots=True, eq=False)
class FactoredTruss:
    """A truss with its stiffness factored, ready for any number of load columns."""

    truss: Truss
    rows: ElementRows
    factor: Factor

    def solve(self, loads: Floats, misfit: Floats | None = None) -> tuple[Floats, Floats]:
        """Return displacements and element forces under joint loads.

        K u = F - Aᵀ k e0, s = k (A u + e0).

        Parameters
        ----------
        loads
            F (2J, K) [N] in the joints' own axes, numbered as ``rows.joint_dofs``.
        misfit
            e0 (E,) stretch imposed on each element [m]; None for loads alone (influence lines).

        Returns
        -------
        displacements, forces
            (2J, K) [m] and (E, K) [N], tension positive.
        """
        rows, free = self.rows, self.rows.free
        displacements = np.zeros(loads.shape)
        unbalanced = loads[:free]
        forces = np.zeros((rows.stiffness.size, 1))
        if misfit is not None:
            displacements[free:] = rows.imposed[free:, None]
            forces = (rows.stiffness * misfit)[:, None]
            unbalanced = unbalanced - rows.joint_forces(forces)[:free]
        correction = np.zeros(loads.shape)
        correction[:free] = self.back_substituted(unbalanced)
        displacements += correction
        forces = forces + rows.stiffness[:, None] * rows.stretch(correction)
        rest = loads[:free] - rows.joint_forces(forces)[:free]
        self._require_balance(rest, correction, max(np.abs(loads).max(), np.abs(unbalanced).max(initial=_TINY)))
        correction[:free] = self.back_substituted(rest)
        displacements += correction
        forces += rows.stiffness[:, None] * rows.stretch(correction)
        return displacements, forces

    def _require_balance(self, rest: Floats, displacements: Floats, loads: float) -> None:
        """Raise UnstableError when the first solve leaves more of the loads unbalanced than refinement can mend."""
        if np.abs(rest).max(initial=0.0) > _UNMENDABLE * loads:
            column = int(np.abs(displacements).max(axis=0).argmax())
            moves = _what_moves(self.truss, self.rows, displacements[:, column])
            raise UnstableError(f"is so nearly a mechanism that its forces would be wrong: {moves}", place="truss")

    def back_substituted(self, columns: Floats) -> Floats:
        """Return K⁻¹ columns."""
        if not columns.size:
            return columns
        return self.factor.solved(columns)


def factored(truss: Truss) -> FactoredTruss:
    """Assemble and factor a truss's stiffness.

    Raises
    ------
    UnstableError
        The truss is a mechanism; a joint and the direction in which it can move are named.
    """
    rows = element_rows(truss)
    band = _assembled(rows)
    factor, definite = cholesky(band)
    if not definite:
        shifted = band.copy(order="F")
        shifted[0] += _SHIFT * band[0].max()
        factor, _ = cholesky(shifted)
    answer = FactoredTruss(truss, rows, factor)
    if rows.free:
        _require_stable(answer, failed=not definite)
    return answer


def _assembled(rows: ElementRows) -> Floats:
    """Return the lower band of K = Aᵀ k A: entry (i, j) stands at [i - j, j]."""
    first, second = rows.dofs[:, _FIRST], rows.dofs[:, _SECOND]
    row, column = np.maximum(first, second), np.minimum(first, second)
    values = rows.stiffness[:, None] * rows.coefficients[:, _FIRST] * rows.coefficients[:, _SECOND]
    inside = row < rows.free
    row, column, values = row[inside], column[inside], values[inside]
    below = row - column
    width = int(below.max(initial=0)) + 1
    flat = np.bincount(column * width + below, weights=values, minlength=rows.free * width)
    return flat.astype(np.float64, copy=False).reshape(rows.free, width).T  # Fortran order, as LAPACK wants it


def _require_stable(candidate: FactoredTruss, *, failed: bool) -> None:
    """Raise UnstableError when a movement stretches no element.

    The softest movement is found by inverse iteration from an irregular start; small pivots alone do not tell a long,
    soft truss from a mechanism, the stretch of its elements does.
    """
    rows = candidate.rows
    movement = np.zeros(rows.imposed.size)
    movement[: rows.free] = np.cos(1.0 + 2.39996 * np.arange(rows.free))  # no pattern a truss could be blind to
    for _ in range(6):
        movement[: rows.free] = candidate.back_substituted(movement[: rows.free])
        movement /= np.abs(movement).max()
        softness = np.abs((rows.coefficients * movement[rows.dofs]).sum(axis=1)).max()
        if softness > _SURELY_STIFF and not failed:
            return
    if failed or softness < _MECHANISM:
        raise UnstableError(f"is a mechanism: {_what_moves(candidate.truss, rows, movement)}", place="truss")


def _what_moves(truss: Truss, rows: ElementRows, movement: Floats) -> str:
    """Say which joint can move, and which way."""
    along, normal = movement[rows.joint_dofs].T
    cosine, sine = rows.axes.T
    moves = np.stack((along * cosine - normal * sine, along * sine + normal * cosine), axis=1)
    size = np.hypot(moves[:, 0], moves[:, 1])
    joint = int(np.argmax(size > 0.999 * size.max()))
    count = int((size > 1e-6 * size.max()).sum())
    name = list(truss.joints)[joint]
    others = "no other joint moves" if count == 1 else f"{count - 1} other joint(s) move with it"
    return (
        f'joint "{name}" can move {_direction(*moves[joint])} without stretching any member ({others})'
        "; add a member or a support that resists it"
    )


def _direction(x: float, y: float) -> str:
    """Return a movement's direction in words."""
    degrees = math.degrees(math.atan2(y, x)) % 180.0
    if min(degrees, 180.0 - degrees) < 0.5:
        return "along the bridge (x)"
    if abs(degrees - 90.0) < 0.5:
        return "up and down (y)"
    return f"at {degrees:.0f} degrees from +x"
