"""The truss under any joint loads, settlements included: every displacement, force and reaction by name."""

from __future__ import annotations

import math
from dataclasses import dataclass
from types import MappingProxyType
from typing import TYPE_CHECKING

import numpy as np

from movload.errors import InputError
from movload.statics.stiffness import FactoredTruss, factored

if TYPE_CHECKING:
    from collections.abc import Mapping

    from movload.arrays import Floats
    from movload.bridge.truss import Truss


@dataclass(frozen=True, slots=True, eq=False)
class TrussState:
    """One state of a truss, by name.

    Attributes
    ----------
    forces
        Member forces [N], tension positive.
    reactions
        Reaction components in the beds' axes [N], positive when they push the joint along +axis.
    displacements
        ``{"L3": (x, y)}`` joint displacements [m].
    """

    forces: Mapping[str, float]
    reactions: Mapping[str, float]
    displacements: Mapping[str, tuple[float, float]]

    def __reduce__(self) -> tuple[object, ...]:
        """Pickle by parts (a read-only mapping cannot be pickled)."""
        return (_frozen_state, (dict(self.forces), dict(self.reactions), dict(self.displacements)))


def state_under(truss: Truss, joint_loads: Mapping[str, tuple[float, float]], *, settled: bool = True) -> TrussState:
    """Return the state of a truss under forces on its joints.

    Parameters
    ----------
    joint_loads
        ``{"U2": (x, y)}`` [N], y upward: a weight is negative.
    settled
        Whether the supports' settlements and imposed movements are included.

    Raises
    ------
    UnknownNameError
        A load stands on a joint that is not there.
    UnstableError
        The truss is a mechanism.
    """
    solver = factored(truss)
    loads = loads_in_joint_axes(solver, joint_loads)
    displacements, forces = solver.solve(loads, solver.rows.misfit if settled else None)
    reactions = solver.rows.reactions(loads, forces)[:, 0]
    names = [name for support in truss.supports for name in support.reaction_names]
    moved = _in_bridge_axes(solver, displacements)
    return _frozen_state(
        {member.name: float(force) for member, force in zip(truss.members, forces[:, 0], strict=False)},
        dict(zip(names, map(float, reactions), strict=True)),
        {joint: (float(x), float(y)) for joint, (x, y) in zip(truss.joints, moved, strict=True)},
    )


def _frozen_state(
    forces: dict[str, float], reactions: dict[str, float], displacements: dict[str, tuple[float, float]]
) -> TrussState:
    """Return a state whose mappings cannot be changed."""
    return TrussState(MappingProxyType(forces), MappingProxyType(reactions), MappingProxyType(displacements))


def loads_in_joint_axes(solver: FactoredTruss, joint_loads: Mapping[str, tuple[float, float]]) -> Floats:
    """Return forces by joint as one load column (2J, 1) [N] in the joints' own axes."""
    rows = solver.rows
    column = np.zeros((rows.imposed.size, 1))
    for joint, (x, y) in joint_loads.items():
        solver.truss.require_joint(joint, "joint loads")
        if not (math.isfinite(x) and math.isfinite(y)):
            raise InputError(f"a load must be finite, got ({x}, {y}) N", place=f"joint loads: {joint}")
        number = solver.truss.joint_index[joint]
        cosine, sine = rows.axes[number]
        column[rows.joint_dofs[number], 0] = (x * cosine + y * sine, y * cosine - x * sine)
    return column


def _in_bridge_axes(solver: FactoredTruss, displacements: Floats) -> Floats:
    """Return one column of displacements as x, y of each joint (J, 2) [m]."""
    along, normal = displacements[solver.rows.joint_dofs, 0].T
    cosine, sine = solver.rows.axes.T
    return np.stack((along * cosine - normal * sine, along * sine + normal * cosine), axis=1)
