"""Plane trusses written out bar by bar, as a person would on paper: nothing here uses ``movload.bridge.layout``.

Joints L0 ... Ln along the bottom, U1 ... on top; what a joint is called says where it stands. All of them are
invented unless the test that builds one cites its source.
"""

from __future__ import annotations

from typing import TYPE_CHECKING

import numpy as np

from movload.bridge.truss import Member, Support, Truss

if TYPE_CHECKING:
    from collections.abc import Callable, Sequence

    Joints = dict[str, tuple[float, float]]
    Bars = list[tuple[str, str]]

STEEL = 200e9  # Pa
AREA = 5e-3  # m2


def pratt(panels: Sequence[float], depths: Sequence[float], *, crossed: Sequence[int] = ()) -> tuple[Joints, Bars]:
    """Return a Pratt (level chords) or Parker (others) truss, its diagonals falling toward midspan.

    Parameters
    ----------
    panels
        Panel lengths (n,) [m], n >= 2.
    depths
        Heights of U1 ... U(n-1) (n - 1,) [m].
    crossed
        Numbers of inner panels (1 ... n - 2) that get the other diagonal as well.
    """
    count, x = len(panels), np.concatenate(([0.0], np.cumsum(panels)))
    joints: Joints = {f"L{i}": (float(x[i]), 0.0) for i in range(count + 1)}
    joints |= {f"U{i}": (float(x[i]), float(depths[i - 1])) for i in range(1, count)}
    bars: Bars = [(f"L{i}", f"L{i + 1}") for i in range(count)]
    bars += [(f"U{i}", f"U{i + 1}") for i in range(1, count - 1)]
    bars += [("L0", "U1"), (f"U{count - 1}", f"L{count}")]
    bars += [(f"U{i}", f"L{i}") for i in range(1, count)]
    for i in range(1, count - 1):
        falling, rising = (f"U{i}", f"L{i + 1}"), (f"L{i}", f"U{i + 1}")
        bars.append(falling if i < (count - 1) / 2 else rising)
        if i in crossed:
            bars.append(rising if i < (count - 1) / 2 else falling)
    return joints, bars


def warren(panels: Sequence[float], depths: Sequence[float]) -> tuple[Joints, Bars]:
    """Return a Warren truss without posts: one top joint over the middle of each panel, at heights (n,) [m]."""
    count, x = len(panels), np.concatenate(([0.0], np.cumsum(panels)))
    joints: Joints = {f"L{i}": (float(x[i]), 0.0) for i in range(count + 1)}
    joints |= {f"U{i}": (float(x[i] + 0.5 * panels[i]), float(depths[i])) for i in range(count)}
    bars: Bars = [(f"L{i}", f"L{i + 1}") for i in range(count)]
    bars += [(f"U{i}", f"U{i + 1}") for i in range(count - 1)]
    for i in range(count):
        bars += [(f"L{i}", f"U{i}"), (f"U{i}", f"L{i + 1}")]
    return joints, bars


def truss_of(
    drawn: tuple[Joints, Bars], supports: Sequence[Support], area: Callable[[int], float] = lambda _: AREA
) -> Truss:
    """Return the truss of joints and bars on its bearings; ``area`` gives each bar's by its number [m2]."""
    joints, bars = drawn
    members = [Member(start, end, area(number), STEEL) for number, (start, end) in enumerate(bars)]
    return Truss(joints, members, supports)


def simple_span(count: int) -> list[Support]:
    """Return a pin under L0 and a level roller under the last panel point."""
    return [Support("L0"), Support(f"L{count}", 0)]


def bottom(count: int) -> list[str]:
    """Return the bottom chord's panel points."""
    return [f"L{i}" for i in range(count + 1)]


def mirrored(truss: Truss) -> Truss:
    """Return the truss seen from the other side: x becomes -x, a bed that rises now falls; names stay."""
    joints = {name: (-x, y) for name, (x, y) in truss.joints.items()}
    supports = [
        Support(
            s.joint,
            None if s.slides is None else -s.slides,
            settlement=s.settlement,
            movement=None if s.movement is None else -s.movement,
            normal_stiffness=s.normal_stiffness,
            slide_stiffness=s.slide_stiffness,
        )
        for s in truss.supports
    ]
    return Truss(joints, truss.members, supports)


def scaled(truss: Truss, factor: float) -> Truss:
    """Return the truss with every coordinate times ``factor``; areas and moduli stay."""
    return Truss({n: (x * factor, y * factor) for n, (x, y) in truss.joints.items()}, truss.members, truss.supports)


def with_areas(truss: Truss, areas: Sequence[float]) -> Truss:
    """Return the truss with the given areas, repeated as often as there are members [m2]."""
    members = [Member(m.start, m.end, areas[i % len(areas)], m.modulus) for i, m in enumerate(truss.members)]
    return Truss(truss.joints, members, truss.supports)
