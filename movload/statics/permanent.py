"""The permanent load's effect on a truss, class by class, from the same factor that gave the influence lines.

The deck's weight per metre goes to the panel points by simple beams between them, and to one truss by the stated
share; a member's own weight goes to its two joints in halves. Settlements of supports are a class of their own.
"""

from __future__ import annotations

from typing import TYPE_CHECKING, Final

import numpy as np

from movload.arrays import Floats, held
from movload.bridge.deck import stations_of
from movload.errors import MissingDataError
from movload.statics.influence import effects_under
from movload.units import GRAVITY

if TYPE_CHECKING:
    from collections.abc import Sequence

    from movload.bridge.bridge import PermanentLoads
    from movload.bridge.deck import PanelPoint
    from movload.bridge.truss import Truss
    from movload.statics.stiffness import FactoredTruss

PERMANENT_CLASSES: Final = ("components", "settlement")
_NOISE: Final = 1e-12  # of the largest of its kind


def permanent_effects(solver: FactoredTruss, panel_points: Sequence[PanelPoint], loads: PermanentLoads) -> Floats:
    """Return every row's permanent effect by class (classes, R) [N, m], classes as PERMANENT_CLASSES.

    Raises
    ------
    MissingDataError
        A member without a density.
    """
    truss, rows = solver.truss, solver.rows
    joints = np.array([-1 if not isinstance(p, str) else truss.joint_index[p] for p in panel_points])
    down = member_weights(truss)
    on_joint = joints >= 0
    reach = deck_lengths(stations_of(truss, panel_points))
    down[joints[on_joint]] += loads.truss_share * loads.deck * reach[on_joint]
    columns = np.zeros((rows.imposed.size, 1))
    columns[rows.joint_dofs[:, 0], 0] = -down * rows.axes[:, 1]
    columns[rows.joint_dofs[:, 1], 0] = -down * rows.axes[:, 0]
    components = effects_under(solver, joints, columns)
    settled = effects_under(solver, joints, np.zeros_like(columns), rows.misfit)
    classes = np.concatenate((components, settled), axis=1)
    _write_noise_as_zero(classes, int(on_joint.sum()))
    return held(classes.T.copy())


def _write_noise_as_zero(classes: Floats, downs: int) -> None:
    """Set round-off to exactly zero, in place: a bar that permanent load does not reach must not seem to feel it.

    Forces are compared with the largest force of any class and the deflections, which come last, with the largest
    deflection: a settlement that strains nothing leaves only round-off in its own column.
    """
    forces, deflections = classes[: len(classes) - downs], classes[len(classes) - downs :]
    for of_kind in (forces, deflections):
        size = np.abs(of_kind)
        of_kind[size <= _NOISE * size.max(initial=0.0)] = 0.0


def deck_lengths(stations: Floats) -> Floats:
    """Return the length of deck (B,) [m] that simple stringers bring to each panel point."""
    panels = np.diff(stations)
    reach: Floats = 0.5 * (np.append(panels, 0.0) + np.append(0.0, panels))
    return reach


def member_weights(truss: Truss) -> Floats:
    """Return the members' own weight on each joint (J,) [N]: area x density x length x g, half to each end."""
    weights = np.zeros(len(truss.joints))
    for member, length, (start, end) in zip(truss.members, truss.lengths, truss.ends, strict=True):
        if member.density is None:
            raise MissingDataError(
                "its own weight is needed: type its density (0 if the weight is in the deck's)",
                place=f"member {member.name}",
            )
        half = 0.5 * member.area * member.density * length * GRAVITY
        weights[start] += half
        weights[end] += half
    return weights
