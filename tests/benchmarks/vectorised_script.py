"""Influence lines as a good numpy script finds them: assembled without a loop, spsolve once per load position."""

from __future__ import annotations

from typing import TYPE_CHECKING

import numpy as np
from benchmarks.plain_scripts import free_displacements
from scipy.sparse import coo_matrix
from scipy.sparse.linalg import spsolve

if TYPE_CHECKING:
    from collections.abc import Sequence

    from numpy.typing import NDArray

    from movload.bridge.truss import Truss

    Floats = NDArray[np.float64]


def all_lines(truss: Truss, panel_points: Sequence[str]) -> Floats:
    """Return every row (R, B) of ``influence_lines``: member forces, reactions, panel points downward.

    What is the same for all positions and costs a loop (names to numbers) is done once; the stiffness is assembled
    for each position, only its free part, straight to compressed columns.
    """
    index = {joint: number for number, joint in enumerate(truss.joints)}
    points = np.array(list(truss.joints.values()))
    ends = np.array([(index[member.start], index[member.end]) for member in truss.members])
    stretched = np.array([member.area * member.modulus for member in truss.members])
    free = np.array(free_displacements(truss, index))
    held = np.setdiff1d(np.arange(points.size), free)
    down = 2 * np.array([index[point] for point in panel_points]) + 1
    answers = []
    for loaded in down:
        displacement, forces, held_back = _solved(points, ends, stretched, (free, held, int(loaded)))
        answers.append(np.concatenate((forces, held_back, -displacement[down])))
    return np.array(answers).T


def _solved(
    points: Floats, ends: NDArray[np.intp], stretched: Floats, places: tuple[NDArray[np.intp], NDArray[np.intp], int]
) -> tuple[Floats, Floats, Floats]:
    """Return displacements, member forces and reactions under one unit load, from coordinates onward."""
    free, held, loaded = places
    span = points[ends[:, 1]] - points[ends[:, 0]]
    length = np.hypot(span[:, 0], span[:, 1])
    stiffness = stretched / length
    stretch = np.concatenate((-span, span), axis=1) / length[:, None]
    at = np.stack((2 * ends[:, 0], 2 * ends[:, 0] + 1, 2 * ends[:, 1], 2 * ends[:, 1] + 1), axis=1)
    number = np.full(points.size, -1)
    number[free] = np.arange(free.size)
    values = stiffness[:, None, None] * stretch[:, :, None] * stretch[:, None, :]
    rows, columns = np.broadcast_arrays(number[at][:, :, None], number[at][:, None, :])
    kept = (rows >= 0) & (columns >= 0)
    matrix = coo_matrix((values[kept], (rows[kept], columns[kept])), shape=(free.size, free.size)).tocsc()
    load = np.zeros(points.size)
    load[loaded] = -1.0
    displacement = np.zeros(points.size)
    displacement[free] = spsolve(matrix, load[free])
    forces = stiffness * (stretch * displacement[at]).sum(axis=1)
    pulled = np.bincount(at.ravel(), (stretch * forces[:, None]).ravel(), points.size)
    return displacement, forces, pulled[held] - load[held]
