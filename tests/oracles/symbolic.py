"""Determinate trusses by SymPy's own truss module: the joint equations written out and inverted, no stiffness at all.

SymPy knows a pin and a roller that rolls along x. A truss on an inclined bed is therefore turned as a whole, loads
and all, until its bed is level; the pin's reaction is turned back afterwards. A member force and a roller's push need
no turning. That is a second independence: movload turns the bearing, this turns the bridge.

References
----------
SymPy 1.14, ``sympy.physics.continuum_mechanics.truss.Truss``.
"""

from __future__ import annotations

import math
from typing import TYPE_CHECKING

from sympy.physics.continuum_mechanics.truss import Truss as SympyTruss  # type: ignore[import-untyped]  # no types

if TYPE_CHECKING:
    from collections.abc import Mapping

    from movload.bridge.truss import Truss

Vector = tuple[float, float]


def rows_under(truss: Truss, loads: Mapping[str, Vector]) -> dict[str, float]:
    """Return member forces (tension positive) and reactions in the beds' axes, by movload's row names [N].

    Parameters
    ----------
    truss
        Determinate, on one pinned and one sliding bearing, rigid both.
    loads
        ``{"L2": (x, y)}`` [N].
    """
    pinned = next(support for support in truss.supports if support.slides is None)
    sliding = next(support for support in truss.supports if support.slides is not None)
    back = math.radians(sliding.slides or 0.0)
    model = SympyTruss()
    model.add_node(*((name, *turned(point, -back)) for name, point in truss.joints.items()))
    model.add_member(*((f"bar{row}", member.start, member.end) for row, member in enumerate(truss.members)))
    model.apply_support((pinned.joint, "pinned"), (sliding.joint, "roller"))
    for joint, force in loads.items():
        x, y = turned(force, -back)
        model.apply_load((joint, math.hypot(x, y), math.degrees(math.atan2(y, x))))
    model.solve()
    rows = {member.name: float(model.internal_forces[f"bar{row}"]) for row, member in enumerate(truss.members)}
    pushed = {key: float(force) for key, force in model.reaction_loads.items()}
    rows[f"{pinned.joint} x"], rows[f"{pinned.joint} y"] = turned(
        (pushed[f"R_{pinned.joint}_x"], pushed[f"R_{pinned.joint}_y"]), back
    )
    rows[f"{sliding.joint} normal"] = pushed[f"R_{sliding.joint}_y"]
    return rows


def turned(vector: Vector, angle: float) -> Vector:
    """Return a vector turned anticlockwise by an angle [radians]."""
    cosine, sine = math.cos(angle), math.sin(angle)
    return vector[0] * cosine - vector[1] * sine, vector[0] * sine + vector[1] * cosine
