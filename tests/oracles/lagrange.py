"""A plane truss solved densely in global x and y, its bearings held by Lagrange multipliers.

It shares no arithmetic with ``movload.statics``: nothing is rotated into a bed, nothing is banded, nothing is left
out. Each thing a bearing holds is one more equation beside the joints' balance,

    K u + C' m = F,        C u - m / k = g,

with a row of C the held direction, g the movement imposed along it, k the bearing's spring (1/k = 0 when rigid) and
-m the force with which the bearing pushes the joint along that direction.
"""

from __future__ import annotations

import math
from dataclasses import dataclass
from typing import TYPE_CHECKING

import numpy as np

if TYPE_CHECKING:
    from collections.abc import Sequence

    from numpy.typing import NDArray

    from movload.bridge.truss import Support, Truss

    Floats = NDArray[np.float64]


@dataclass(frozen=True, slots=True)
class Answer:
    """Member forces (M, K), reactions in the beds' axes (Q, K), joint displacements in x, y (J, 2, K)."""

    forces: Floats
    reactions: Floats
    displacements: Floats


@dataclass(frozen=True, slots=True)
class Hold:
    """One direction that a bearing holds: joint, unit vector, imposed movement [m], compliance [m/N]."""

    joint: str
    direction: tuple[float, float]
    movement: float
    compliance: float


def holds_of(support: Support) -> list[Hold]:
    """Return what a bearing holds: along its bed first (when anything acts there), then normal to it."""
    angle = math.radians(support.slides or 0.0)
    along, normal = (math.cos(angle), math.sin(angle)), (-math.sin(angle), math.cos(angle))
    held = []
    pinned, moved, sprung = support.slides is None, support.movement, support.slide_stiffness
    if pinned or moved is not None or sprung is not None:
        held.append(Hold(support.joint, along, moved or 0.0, 1.0 / sprung if sprung else 0.0))
    stiffness = support.normal_stiffness
    held.append(Hold(support.joint, normal, -support.settlement, 1.0 / stiffness if stiffness else 0.0))
    return held


def equilibrium(truss: Truss) -> Floats:
    """Return (M, 2J): how each member's stretch follows from the joints' x, y displacements."""
    number = {joint: place for place, joint in enumerate(truss.joints)}
    rows = np.zeros((len(truss.members), 2 * len(truss.joints)))
    for row, member in zip(rows, truss.members, strict=True):
        (x1, y1), (x2, y2) = truss.joints[member.start], truss.joints[member.end]
        length = math.hypot(x2 - x1, y2 - y1)
        cosine, sine = (x2 - x1) / length, (y2 - y1) / length
        row[2 * number[member.start] : 2 * number[member.start] + 2] = -cosine, -sine
        row[2 * number[member.end] : 2 * number[member.end] + 2] = cosine, sine
    return rows


def constraints(truss: Truss) -> tuple[Floats, Floats, Floats]:
    """Return C (Q, 2J), g (Q,) and the compliances (Q,) of all bearings."""
    number = {joint: place for place, joint in enumerate(truss.joints)}
    held = [hold for support in truss.supports for hold in holds_of(support)]
    rows = np.zeros((len(held), 2 * len(truss.joints)))
    for row, hold in zip(rows, held, strict=True):
        row[2 * number[hold.joint] : 2 * number[hold.joint] + 2] = hold.direction
    return rows, np.array([hold.movement for hold in held]), np.array([hold.compliance for hold in held])


def solved(truss: Truss, loads: Floats, *, settled: bool = False) -> Answer:
    """Return the state under joint loads (J, 2, K) [N] in x, y; with the bearings' imposed movements if ``settled``."""
    stretch = equilibrium(truss)
    stiffness = np.array(
        [m.area * m.modulus / math.dist(truss.joints[m.start], truss.joints[m.end]) for m in truss.members]
    )
    unit = float(stiffness.mean())  # unknowns of one size: u in m, multipliers in units of this stiffness
    held, imposed, compliance = constraints(truss)
    free, count = stretch.shape[1], loads.shape[2]
    matrix = np.zeros((free + len(held), free + len(held)))
    matrix[:free, :free] = stretch.T @ ((stiffness / unit)[:, None] * stretch)
    matrix[:free, free:], matrix[free:, :free] = held.T, held
    matrix[free:, free:] = -np.diag(compliance * unit)
    right = np.zeros((free + len(held), count))
    right[:free] = loads.reshape(free, count) / unit
    right[free:] = imposed[:, None] if settled else 0.0
    unknown = np.linalg.solve(matrix, right)
    moved = unknown[:free]
    return Answer(stiffness[:, None] * (stretch @ moved), -unit * unknown[free:], moved.reshape(-1, 2, count))


def line_ordinates(truss: Truss, panel_points: Sequence[str | float]) -> Floats:
    """Return every row's ordinates (R, B): members, reactions, panel points downward; a number is an abutment."""
    number = {joint: place for place, joint in enumerate(truss.joints)}
    loads = np.zeros((len(truss.joints), 2, len(panel_points)))
    for column, point in enumerate(panel_points):
        if isinstance(point, str):
            loads[number[point], 1, column] = -1.0
    answer = solved(truss, loads)
    down = [-answer.displacements[number[point], 1] for point in panel_points if isinstance(point, str)]
    return np.concatenate((answer.forces, answer.reactions, np.reshape(down, (-1, len(panel_points)))))
