"""The truss as rows: each bar or spring is one row of A with a diagonal stiffness k, so that K = Aᵀ k A.

A row holds how its element's stretch answers the joint displacements, so a force is s = k (A u + e0) and the joints
are in balance when Aᵀ s = F. Displacements and loads are kept in each joint's own axes: x and y, but at a bearing
*along* its bed and *normal* to it, so that what a bearing holds is simply a row left out and nothing is penalised.
"""

from __future__ import annotations

import math
from dataclasses import dataclass
from typing import TYPE_CHECKING

import numpy as np

if TYPE_CHECKING:
    from movload.arrays import Floats, Ints
    from movload.bridge.truss import Support, Truss


@dataclass(frozen=True, slots=True, eq=False)
class ElementRows:
    """Members first, then bearing springs.

    Attributes
    ----------
    dofs, coefficients
        (E, 4): the displacements an element's stretch depends on (start along/x, start normal/y, end ...) and by how
        much; a spring uses the first only.
    stiffness
        k (E,) [N/m].
    joint_dofs
        (J, 2): number of each joint's two displacements. Those that can move come first, ordered along the bridge so
        that the band of K is narrow; those a bearing holds follow from ``free`` on.
    axes
        (J, 2): cosine and sine of each joint's own axes from x, y; (1, 0) away from bearings.
    free
        How many displacements can move.
    reaction_dofs, reaction_springs
        (Q,): for each reaction its displacement, and the spring's row (-1 when rigid).
    imposed
        (2J,) displacements that bearings impose on what they hold rigidly [m].
    misfit
        e0 (E,) stretch that imposed movements and settlements alone would ask of each element [m].
    touching, touching_coefficients
        (2J, D): the elements that each displacement stretches and by how much; padded with coefficient 0.
    """

    dofs: Ints
    coefficients: Floats
    stiffness: Floats
    joint_dofs: Ints
    axes: Floats
    free: int
    reaction_dofs: Ints
    reaction_springs: Ints
    imposed: Floats
    misfit: Floats
    touching: Ints
    touching_coefficients: Floats

    def stretch(self, displacements: Floats) -> Floats:
        """Return A u (E, K) [m] for displacements (2J, K)."""
        total: Floats = np.einsum("ed,edk->ek", self.coefficients, displacements[self.dofs])
        return total

    def joint_forces(self, forces: Floats) -> Floats:
        """Return Aᵀ s (2J, K) [N] for element forces (E, K)."""
        total: Floats = np.einsum("jd,jdk->jk", self.touching_coefficients, forces[self.touching])
        return total

    def reactions(self, loads: Floats, forces: Floats) -> Floats:
        """Return reactions (Q, K) [N] in the beds' axes, positive when they push the joint along +axis.

        A rigid bearing gives what the joint's balance asks for, Aᵀ s - F; a spring gives minus its own force. A load
        that stands on a bearing reaches its reaction.
        """
        held = self.reaction_dofs
        rigid: Floats = np.einsum("jd,jdk->jk", self.touching_coefficients[held], forces[self.touching[held]])
        rigid -= loads[held]
        sprung = self.reaction_springs >= 0
        if sprung.any():
            rigid[sprung] = -forces[self.reaction_springs[sprung]]
        return rigid


def element_rows(truss: Truss) -> ElementRows:
    """Return the rows of a truss."""
    axes = _joint_axes(truss)
    rigid, springs = _holds(truss)
    joint_dofs, free = _numbered(truss, rigid)
    dofs = joint_dofs[truss.ends].reshape(-1, 4)
    coefficients, stiffness = _member_coefficients(truss, axes), truss.axial_stiffness
    imposed = np.zeros(joint_dofs.size)
    for joint, axis, moved in rigid:
        imposed[joint_dofs[joint, axis]] = moved
    misfit = (coefficients * imposed[dofs]).sum(axis=1) if imposed.any() else np.zeros(len(dofs))
    if springs:
        spring_rows = [[joint_dofs[joint, axis]] * 4 for joint, axis, _, _ in springs]
        dofs = np.concatenate((dofs, np.array(spring_rows, dtype=np.intp)))
        coefficients = np.concatenate((coefficients, [[1.0, 0.0, 0.0, 0.0]] * len(springs)))
        stiffness = np.concatenate((stiffness, [spring[3] for spring in springs]))
        misfit = np.concatenate((misfit, [-spring[2] for spring in springs]))
    touching, touching_coefficients = _touching(dofs, coefficients)
    reaction_dofs, reaction_springs = _reactions(truss, joint_dofs)
    return ElementRows(
        dofs=dofs,
        coefficients=coefficients,
        stiffness=stiffness,
        joint_dofs=joint_dofs,
        axes=axes,
        free=free,
        reaction_dofs=reaction_dofs,
        reaction_springs=reaction_springs,
        imposed=imposed,
        misfit=misfit,
        touching=touching,
        touching_coefficients=touching_coefficients,
    )


def _touching(dofs: Ints, coefficients: Floats) -> tuple[Ints, Floats]:
    """Return A by columns: each displacement's elements and coefficients (2J, D), padded with coefficient 0."""
    flat = dofs.reshape(-1)
    order = np.argsort(flat, kind="stable")
    in_order = flat[order]
    counts = np.bincount(flat)
    place = np.arange(flat.size) - (np.cumsum(counts) - counts)[in_order]
    elements = np.zeros((counts.size, int(counts.max())), dtype=np.intp)
    weights = np.zeros(elements.shape)
    elements[in_order, place] = order // 4
    weights[in_order, place] = coefficients.reshape(-1)[order]
    return elements, weights


def _bed_axes(degrees: float) -> tuple[float, float]:
    """Return cosine and sine of a bed's angle, exact at the quarter turns."""
    quarter, rest = divmod(degrees, 90.0)
    if rest == 0.0:
        return ((1.0, 0.0), (0.0, 1.0), (-1.0, 0.0), (0.0, -1.0))[int(quarter) % 4]
    return math.cos(math.radians(degrees)), math.sin(math.radians(degrees))


def _joint_axes(truss: Truss) -> Floats:
    """Return cosine and sine of every joint's own axes (J, 2)."""
    axes = np.zeros((len(truss.joints), 2))
    axes[:, 0] = 1.0
    for support in truss.supports:
        axes[truss.joint_index[support.joint]] = _bed_axes(support.slides or 0.0)
    return axes


def _held_directions(support: Support) -> list[tuple[int, float, float | None]]:
    """Return (axis, imposed movement [m], spring stiffness [N/m] or None) of what one bearing holds."""
    across = (1, -support.settlement, support.normal_stiffness)
    if not support.holds_along:
        return [across]
    return [(0, support.movement or 0.0, support.slide_stiffness), across]


def _holds(truss: Truss) -> tuple[list[tuple[int, int, float]], list[tuple[int, int, float, float]]]:
    """Return rigid holds (joint, axis, movement) and springs (joint, axis, movement, stiffness)."""
    rigid, springs = [], []
    for support in truss.supports:
        joint = truss.joint_index[support.joint]
        for axis, moved, stiffness in _held_directions(support):
            if stiffness is None:
                rigid.append((joint, axis, moved))
            else:
                springs.append((joint, axis, moved, stiffness))
    return rigid, springs


def _numbered(truss: Truss, rigid: list[tuple[int, int, float]]) -> tuple[Ints, int]:
    """Return the joints' displacement numbers and how many can move: those first, by x then y, then what is held."""
    along = np.lexsort((truss.coordinates[:, 1], truss.coordinates[:, 0]))
    can_move = np.ones((along.size, 2), dtype=bool)
    for joint, axis, _ in rigid:
        can_move[joint, axis] = False
    in_order = can_move[along].reshape(-1)
    free = int(in_order.sum())
    numbers = np.empty(in_order.size, dtype=np.intp)
    numbers[in_order] = np.arange(free)
    numbers[~in_order] = np.arange(free, in_order.size)
    joint_dofs = np.empty((along.size, 2), dtype=np.intp)
    joint_dofs[along] = numbers.reshape(-1, 2)
    return joint_dofs, free


def _member_coefficients(truss: Truss, axes: Floats) -> Floats:
    """Return the members' rows of A (M, 4): each end has its own angle.

    With t the member's direction and a an end's bed angle: cos(t - a) along, sin(t - a) normal; minus at the start.
    """
    toward = truss.spans / truss.lengths[:, None]
    rows = np.concatenate((-toward, toward), axis=1)
    turned = axes[:, 0] != 1.0
    for end in (0, 2):
        at = np.flatnonzero(turned[truss.ends[:, end // 2]]) if turned.any() else ()
        for row in at:
            cos_a, sin_a = axes[truss.ends[row, end // 2]]
            cos_t, sin_t = rows[row, end : end + 2]
            rows[row, end : end + 2] = (cos_t * cos_a + sin_t * sin_a, sin_t * cos_a - cos_t * sin_a)
    return rows


def _reactions(truss: Truss, joint_dofs: Ints) -> tuple[Ints, Ints]:
    """Return for each reaction its displacement's number and its spring's row (-1 when rigid)."""
    dofs, rows = [], []
    spring = len(truss.members)
    for support in truss.supports:
        joint = truss.joint_index[support.joint]
        for axis, _, stiffness in _held_directions(support):
            dofs.append(joint_dofs[joint, axis])
            rows.append(-1 if stiffness is None else spring)
            spring += stiffness is not None
    return np.array(dofs, dtype=np.intp), np.array(rows, dtype=np.intp)
