"""Influence lines as a good numpy script finds them: assembled without a loop, spsolve once per load position.

Two ways to leave out what the bearings hold:

``whole_then_cut``
    All of K through ``coo_matrix`` to compressed columns, then the free rows and columns: what the plain scripts do.
``free_part``
    Only the entries between free displacements are handed to ``coo_matrix``: the leanest.
"""

from __future__ import annotations

from dataclasses import dataclass
from typing import TYPE_CHECKING

import numpy as np
from benchmarks.plain_scripts import free_displacements
from scipy.sparse import coo_matrix, csc_matrix
from scipy.sparse.linalg import spsolve

if TYPE_CHECKING:
    from collections.abc import Callable, Sequence

    from numpy.typing import NDArray

    from movload.bridge.truss import Truss

    Floats = NDArray[np.float64]
    Ints = NDArray[np.intp]
    Assemble = Callable[[Floats, Ints, Ints, Ints], csc_matrix]


@dataclass(frozen=True, slots=True)
class Drawn:
    """A truss as arrays: points (J, 2), ends (M, 2), E A (M,), free and held displacements."""

    points: Floats
    ends: Ints
    stretched: Floats
    free: Ints
    held: Ints


def all_lines(truss: Truss, panel_points: Sequence[str], assembled: Assemble) -> Floats:
    """Return every row (R, B) of ``influence_lines``: member forces, reactions, panel points downward.

    Names become numbers once, because that costs loops; everything from coordinates onward is done for each position.
    """
    index = {joint: number for number, joint in enumerate(truss.joints)}
    free = np.array(free_displacements(truss, index))
    drawn = Drawn(
        np.array(list(truss.joints.values())),
        np.array([(index[member.start], index[member.end]) for member in truss.members]),
        np.array([member.area * member.modulus for member in truss.members]),
        free,
        np.setdiff1d(np.arange(2 * len(index)), free),
    )
    down = 2 * np.array([index[point] for point in panel_points]) + 1
    answers = []
    for loaded in down:
        displacement, forces, reactions = _solved(drawn, int(loaded), assembled)
        answers.append(np.concatenate((forces, reactions, -displacement[down])))
    return np.array(answers).T


def whole_then_cut(values: Floats, rows: Ints, columns: Ints, free: Ints) -> csc_matrix:
    """Return the free part of K, cut out of all of it."""
    size = int(rows.max()) + 1
    whole = coo_matrix((values.ravel(), (rows.ravel(), columns.ravel())), shape=(size, size)).tocsc()
    return whole[free][:, free]


def free_part(values: Floats, rows: Ints, columns: Ints, free: Ints) -> csc_matrix:
    """Return the free part of K, nothing else ever assembled."""
    number = np.full(int(rows.max()) + 1, -1)
    number[free] = np.arange(free.size)
    row, column = number[rows], number[columns]
    kept = (row >= 0) & (column >= 0)
    return coo_matrix((values[kept], (row[kept], column[kept])), shape=(free.size, free.size)).tocsc()


def _solved(drawn: Drawn, loaded: int, assembled: Assemble) -> tuple[Floats, Floats, Floats]:
    """Return displacements, member forces and reactions under one unit load."""
    start, end = drawn.ends.T
    span = drawn.points[end] - drawn.points[start]
    length = np.hypot(span[:, 0], span[:, 1])
    stiffness = drawn.stretched / length
    stretch = np.concatenate((-span, span), axis=1) / length[:, None]
    at = np.stack((2 * start, 2 * start + 1, 2 * end, 2 * end + 1), axis=1)
    values = stiffness[:, None, None] * stretch[:, :, None] * stretch[:, None, :]
    rows, columns = np.broadcast_arrays(at[:, :, None], at[:, None, :])
    matrix = assembled(values, rows, columns, drawn.free)
    load = np.zeros(drawn.points.size)
    load[loaded] = -1.0
    displacement = np.zeros(drawn.points.size)
    displacement[drawn.free] = spsolve(matrix, load[drawn.free])
    forces = stiffness * (stretch * displacement[at]).sum(axis=1)
    pulled = np.bincount(at.ravel(), (stretch * forces[:, None]).ravel(), drawn.points.size)
    return displacement, forces, pulled[drawn.held] - load[drawn.held]
