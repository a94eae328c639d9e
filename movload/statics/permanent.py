"""The permanent load's effect on every part, class by class.

A member's own weight goes to its two joints in halves; everything else along the bridge by simple beams between the
panel points, and across it by the parts' own lines. Settlements of supports are a class of their own.
"""

from __future__ import annotations

from typing import TYPE_CHECKING, Final

import numpy as np

from movload.arrays import Floats, held
from movload.bridge.permanent import CLASSES, Item
from movload.errors import MissingDataError
from movload.statics.influence import effects_under
from movload.statics.spread import item_effects
from movload.units import GRAVITY

if TYPE_CHECKING:
    from collections.abc import Sequence

    from movload.bridge.bridge import Bridge
    from movload.bridge.deck import PanelPoint
    from movload.bridge.permanent import PermanentItems
    from movload.bridge.truss import Truss
    from movload.statics.part import Part
    from movload.statics.stiffness import FactoredTruss

PERMANENT_CLASSES: Final = (*CLASSES, "settlement")
_NOISE: Final = 1e-12  # of the largest of its kind


def permanent_effects(
    bridge: Bridge, solver: FactoredTruss, parts: Sequence[Part], permanent: PermanentItems
) -> Floats:
    """Return every row's permanent effect by class (classes, R) [N, N m, m], classes as PERMANENT_CLASSES.

    Parameters
    ----------
    parts
        The bridge's parts; those whose rows are the truss's own carry its weight and settlements too.

    Raises
    ------
    MissingDataError
        A member without a density.
    """
    own = truss_effects(solver, bridge.deck.panel_points, 1.0 + permanent.detail_allowance)
    items = (*permanent.items, *floor_weights(bridge))
    points = tuple(str(point) for point in bridge.deck.panel_points)
    columns = []
    for part in parts:
        effects = np.zeros((len(PERMANENT_CLASSES), len(part.response.effects)))
        effects[: len(CLASSES)] = item_effects(part, items, points)
        if any(effect.kind == "axial" for effect in part.response.effects):
            effects[[0, -1]] += own
        _write_noise_as_zero(effects.T, [effect.kind == "down" for effect in part.response.effects])
        columns.append(effects)
    return held(np.concatenate(columns, axis=1))


def truss_effects(solver: FactoredTruss, panel_points: Sequence[PanelPoint], detail: float) -> Floats:
    """Return the effects (2, R) of one truss's own weight, ``detail`` times its members', and of its settlements."""
    truss, rows = solver.truss, solver.rows
    joints = np.array([-1 if not isinstance(p, str) else truss.joint_index[p] for p in panel_points])
    down = detail * member_weights(truss)
    columns = np.zeros((rows.imposed.size, 1))
    columns[rows.joint_dofs[:, 0], 0] = -down * rows.axes[:, 1]
    columns[rows.joint_dofs[:, 1], 0] = -down * rows.axes[:, 0]
    weight = effects_under(solver, joints, columns)
    settled = effects_under(solver, joints, np.zeros_like(columns), rows.misfit)
    return np.concatenate((weight, settled), axis=1).T


def floor_weights(bridge: Bridge) -> tuple[Item, ...]:
    """Return the floor's own weight as items: each stringer along its line, each floorbeam at its panel point."""
    floor, spacing = bridge.floor, bridge.deck.truss_spacing
    items = []
    if floor.stringers is not None and floor.stringers.weight:
        items += [
            Item(f"stringer {name}", "components", line=floor.stringers.weight, low=z, high=z)
            for name, z in zip(floor.stringers.names, floor.stringers.z, strict=True)
        ]
    if floor.floorbeams is not None and floor.floorbeams.weight and spacing is not None:
        right, left = floor.floorbeams.brackets
        low, high = -0.5 * spacing - right, 0.5 * spacing + left
        weight = floor.floorbeams.weight * (high - low)
        points = tuple((point, weight) for point in bridge.deck.panel_points if isinstance(point, str))
        items.append(Item("floorbeams", "components", points=points, low=low, high=high, on_floorbeams=True))
    return tuple(items)


def _write_noise_as_zero(effects: Floats, down: Sequence[bool]) -> None:
    """Set round-off (R, K) to exactly zero, in place: what permanent load does not reach must not seem to feel it.

    Forces are compared with the largest force of any class and deflections with the largest deflection: a settlement
    that strains nothing leaves only round-off in its own column.
    """
    deflections = np.array(down)
    for of_kind in (~deflections, deflections):
        some = effects[of_kind]
        some[np.abs(some) <= _NOISE * np.abs(some).max(initial=0.0)] = 0.0
        effects[of_kind] = some


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
