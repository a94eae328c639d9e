"""A parallel-chord Pratt truss by statics alone: chords by moments, webs by shear, reactions by the lever.

With a unit load at x_j on a simple span S, M_k the moment and V_i the shear of the simple beam at panel point k and in
panel i (from L_i to L_i+1), h the depth and l a diagonal's length:

    left reaction           1 - x_j / S
    M_k                     min(x_k, x_j) (S - max(x_k, x_j)) / S
    V_i                     1 - x_j / S - (1 if x_j <= x_i)
    bottom chord            M / h at the panel point over which the panel's diagonal meets the top chord
    top chord              -M / h at the panel point at which it meets the bottom chord
    diagonal falling to +x  V_i l / h;  rising: -V_i l / h  (end posts are such diagonals)
    post U_i-L_i           -V_i if the diagonal that falls in panel i hangs on U_i, + V_i-1 if the one that rises in
                            panel i - 1 ends at it: the post balances them at U_i

This is the method of sections of any text on statics; no source is needed.
"""

from __future__ import annotations

from typing import TYPE_CHECKING

import numpy as np

if TYPE_CHECKING:
    from collections.abc import Sequence

    from numpy.typing import NDArray

    from movload.bridge.truss import Member, Truss

    Floats = NDArray[np.float64]


def member_and_reaction_lines(truss: Truss, depth: float, panel_points: Sequence[str]) -> Floats:
    """Return the rows (R, B) of members, then L0 x, L0 y and the roller's, of ``oracles.trusses.pratt``."""
    x = np.array([truss.joints[point][0] for point in panel_points])
    x = x - x[0]
    span, panels = x[-1], np.diff(x)
    left = 1.0 - x / span
    moments = np.minimum.outer(x, x) * (span - np.maximum.outer(x, x)) / span
    shears = left - (x[None, :] <= x[:-1, None])
    falls = _falls(truss, panels.size)
    hung, ended = np.where(falls, 1.0, 0.0)[:, None], np.where(falls, 0.0, 1.0)[:, None]
    posts = np.append([0 * x], ended * shears, axis=0) - np.append(
        hung * shears, [0 * x], axis=0
    )  # panel before, after
    panel = np.arange(panels.size)
    by_bar = {
        "LL": moments[panel + ~falls] / depth,
        "UU": -moments[panel + falls] / depth,
        "LU": np.where(falls, 1.0, -1.0)[:, None] * shears * (np.hypot(panels, depth) / depth)[:, None],
        "post": posts,
    }
    forces = [by_bar[kind][number] for kind, number in map(_what, truss.members)]
    return np.array([*forces, 0 * x, left, x / span])


def _what(member: Member) -> tuple[str, int]:
    """Return what a bar is, and the number of its panel (or panel point, for a post)."""
    first, second = int(member.start[1:]), int(member.end[1:])
    if first == second:
        return "post", first
    return "".join(sorted(member.start[0] + member.end[0])), min(first, second)


def _falls(truss: Truss, count: int) -> NDArray[np.bool_]:
    """Return which panels' diagonals fall toward +x (n,)."""
    falls = np.zeros(count, dtype=bool)
    for member in truss.members:
        kind, panel = _what(member)
        if kind == "LU":
            upper = member.start if member.start[0] == "U" else member.end
            falls[panel] = int(upper[1:]) == panel
    return falls
