"""Member forces as plain matrix-method scripts find them: for each load position assemble bar by bar, then spsolve.

Three ways to assemble, from the one a text shows to the leanest that is still a loop over bars:

``lil``
    Each 4x4 stiffness by transformation, T' k T, added number by number into a ``scipy.sparse.lil_matrix``. (Adding it
    there with ``np.ix_`` looks better and took eight times as long, so that is not what is compared.)
``dense``
    The same added into a square array with ``np.ix_``.
``lists``
    The sixteen products in Python's own numbers, appended to lists that become a ``coo_matrix``.

All give member forces only (M, B): less than ``influence_lines``, which gives reactions and deflections as well.
"""

from __future__ import annotations

import math
from typing import TYPE_CHECKING

import numpy as np
from scipy.sparse import coo_matrix, csc_matrix, lil_matrix
from scipy.sparse.linalg import spsolve

if TYPE_CHECKING:
    from collections.abc import Callable, Sequence

    from numpy.typing import NDArray

    from movload.bridge.truss import Member, Truss

    Floats = NDArray[np.float64]
    Assemble = Callable[[Truss, dict[str, int], list[int]], csc_matrix]


def member_lines(truss: Truss, panel_points: Sequence[str], assembled: Assemble) -> Floats:
    """Return member forces (M, B) under a unit downward load on each panel point, each solved from scratch."""
    index = {joint: number for number, joint in enumerate(truss.joints)}
    free = free_displacements(truss, index)
    forces = np.zeros((len(truss.members), len(panel_points)))
    for column, point in enumerate(panel_points):
        stiffness = assembled(truss, index, free)
        load = np.zeros(2 * len(index))
        load[2 * index[point] + 1] = -1.0
        displacement = np.zeros(load.size)
        displacement[free] = spsolve(stiffness, load[free])
        for row, member in enumerate(truss.members):
            forces[row, column] = _force(truss, member, index, displacement)
    return forces


def lil(truss: Truss, index: dict[str, int], free: list[int]) -> csc_matrix:
    """Return the free part of K, added up in a list-of-lists matrix."""
    total = lil_matrix((2 * len(index), 2 * len(index)))
    for member in truss.members:
        places, stiffness = _places(member, index), _transformed(truss, member)
        for i, row in enumerate(places):
            for j, column in enumerate(places):
                total[row, column] += stiffness[i, j]
    return total.tocsc()[free][:, free]


def dense(truss: Truss, index: dict[str, int], free: list[int]) -> csc_matrix:
    """Return the free part of K, added up in a square array."""
    total = np.zeros((2 * len(index), 2 * len(index)))
    for member in truss.members:
        places = _places(member, index)
        total[np.ix_(places, places)] += _transformed(truss, member)
    return csc_matrix(total[np.ix_(free, free)])


def lists(truss: Truss, index: dict[str, int], free: list[int]) -> csc_matrix:
    """Return the free part of K from lists of rows, columns and values."""
    number = {place: row for row, place in enumerate(free)}
    rows, columns, values = [], [], []
    for member in truss.members:
        cosine, sine, stiffness = _direction(truss, member)
        stretch = (-cosine, -sine, cosine, sine)
        places = [number.get(place) for place in _places(member, index)]
        for row, first in zip(places, stretch, strict=True):
            for column, second in zip(places, stretch, strict=True):
                if row is not None and column is not None:
                    rows.append(row)
                    columns.append(column)
                    values.append(stiffness * first * second)
    return coo_matrix((np.array(values), (np.array(rows), np.array(columns))), shape=(len(free), len(free))).tocsc()


def free_displacements(truss: Truss, index: dict[str, int]) -> list[int]:
    """Return the displacements that can move: a pin holds x and y, a level roller y."""
    held = {2 * index[support.joint] + 1 for support in truss.supports}
    held |= {2 * index[support.joint] for support in truss.supports if support.slides is None}
    return [place for place in range(2 * len(index)) if place not in held]


def _direction(truss: Truss, member: Member) -> tuple[float, float, float]:
    """Return cosine, sine and E A / length."""
    (x1, y1), (x2, y2) = truss.joints[member.start], truss.joints[member.end]
    length = math.hypot(x2 - x1, y2 - y1)
    return (x2 - x1) / length, (y2 - y1) / length, member.area * member.modulus / length


def _places(member: Member, index: dict[str, int]) -> list[int]:
    start, end = 2 * index[member.start], 2 * index[member.end]
    return [start, start + 1, end, end + 1]


def _transformed(truss: Truss, member: Member) -> Floats:
    """Return a bar's stiffness (4, 4) in x and y: T' k T."""
    cosine, sine, stiffness = _direction(truss, member)
    turn = np.array([[cosine, sine, 0, 0], [-sine, cosine, 0, 0], [0, 0, cosine, sine], [0, 0, -sine, cosine]])
    own = stiffness * np.array([[1, 0, -1, 0], [0, 0, 0, 0], [-1, 0, 1, 0], [0, 0, 0, 0]])
    product: Floats = turn.T @ own @ turn
    return product


def _force(truss: Truss, member: Member, index: dict[str, int], displacement: Floats) -> float:
    """Return a bar's force, + in tension."""
    cosine, sine, stiffness = _direction(truss, member)
    start_x, start_y, end_x, end_y = displacement[_places(member, index)]
    return float(stiffness * (cosine * (end_x - start_x) + sine * (end_y - start_y)))
