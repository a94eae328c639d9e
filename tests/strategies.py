"""Random trusses, bearings, decks and vehicles for hypothesis: ugly lengths, unequal areas, beds that incline.

Panel lengths are any floating-point numbers in a range: whole ones would let a stepping method land on every kink,
and two lengths that happen to be alike are drawn often enough by hypothesis itself.

A set of bearings that nearly is a mechanism answers with numbers as large as one likes, and no method then agrees
with another to a fixed number of digits. Such beds are avoided by measuring them: with each held direction as a row
(nx, ny, moment about the middle / span), the least singular value must be at least ``FIRM``. It is 0 for a mechanism,
about 0.6 for a pin and a level roller, and falls as a roller's normal comes to pass through the pin.
"""

from __future__ import annotations

import math
from dataclasses import dataclass
from typing import TYPE_CHECKING, Any

import numpy as np
from hypothesis import assume
from hypothesis import strategies as st

from movload.bridge.truss import Support, Truss
from movload.traffic.vehicle import Vehicle
from oracles.lagrange import holds_of
from oracles.trusses import pratt, truss_of, warren

if TYPE_CHECKING:
    from collections.abc import Sequence

FIRM = 0.15

panel_lengths = st.floats(1.7, 7.3)
heights = st.floats(1.9, 6.1)
areas = st.floats(1e-3, 2e-2)
bed_angles = st.floats(-65.0, 65.0)
axle_loads = st.floats(0.0, 160e3)


@dataclass(frozen=True, slots=True)
class Laid:
    """A truss and the panel points of its loaded chord."""

    truss: Truss
    panel_points: tuple[str | float, ...]


@st.composite
def skeletons(draw: st.DrawFn, *, redundant: bool) -> tuple[dict[str, tuple[float, float]], list[tuple[str, str]]]:
    """Draw joints and bars: Pratt or Parker of 2-7 panels or Warren of 1-6, crossed diagonals when ``redundant``."""
    lengths = draw(st.lists(panel_lengths, min_size=2, max_size=7))
    if draw(st.booleans()):
        return warren(lengths[1:], draw(st.lists(heights, min_size=len(lengths) - 1, max_size=len(lengths) - 1)))
    depths = draw(st.lists(heights, min_size=len(lengths) - 1, max_size=len(lengths) - 1))
    inner = range(1, len(lengths) - 1)
    crossed = draw(st.sets(st.sampled_from(inner))) if redundant and inner else set()
    return pratt(lengths, depths, crossed=sorted(crossed))


def firmness(supports: Sequence[Support], joints: dict[str, tuple[float, float]]) -> float:
    """Return how firmly bearings hold a rigid truss: 0 a mechanism (see the module's text)."""
    at = np.array([joints[support.joint] for support in supports])
    span = float(np.ptp(at[:, 0])) or 1.0
    middle = at.mean(axis=0)
    rows = []
    for support, (x, y) in zip(supports, at - middle, strict=True):
        for hold in holds_of(support):
            nx, ny = hold.direction
            rows.append((nx, ny, (x * ny - y * nx) / span))
    return float(np.linalg.svd(np.array(rows), compute_uv=False)[-1]) if len(rows) >= 3 else 0.0


@st.composite
def bearings(draw: st.DrawFn, panel_points: Sequence[str], *, redundant: bool) -> list[Support]:
    """Draw bearings: pin and bed (either end, overhangs too), three sliding beds; more and sprung if ``redundant``."""
    last = len(panel_points) - 1
    left = draw(st.integers(0, max(0, last // 2 - 1)))
    right = draw(st.integers(min(left + 1 + last // 3, last), last))
    pinned, sliding = draw(st.permutations([panel_points[left], panel_points[right]]))
    bed = draw(st.one_of(st.just(0.0), bed_angles))
    kinds = ["pin and bed", "three beds"] + (["pins", "third bearing", "springs"] if redundant else [])
    kind = draw(st.sampled_from(kinds))
    others = [point for point in panel_points if point not in {pinned, sliding}]
    if kind == "three beds" and others:
        third = draw(st.sampled_from(others))
        return [Support(pinned, 0.0), Support(sliding, bed), Support(third, draw(st.sampled_from([90.0, 55.0, -70.0])))]
    if kind == "pins":
        return [Support(pinned), Support(sliding)]
    if kind == "third bearing":
        return [Support(pinned), Support(sliding, bed), *(Support(point, 0.0) for point in others[:1])]
    if kind == "springs":
        stiffness = draw(st.floats(1e7, 1e9))
        return [Support(pinned, normal_stiffness=stiffness), Support(sliding, bed, slide_stiffness=0.7 * stiffness)]
    return [Support(pinned), Support(sliding, bed)]


@st.composite
def laid(draw: st.DrawFn, *, redundant: bool = True, plain_deck: bool = False) -> Laid:
    """Draw a truss with its deck; determinate unless ``redundant``, on the bottom joints only if ``plain_deck``."""
    skeleton = draw(skeletons(redundant=redundant))
    joints, bars = skeleton
    bottom = [name for name in joints if name.startswith("L")]
    supports = draw(bearings(bottom, redundant=redundant))
    assume(firmness(supports, joints) >= FIRM)
    sizes = draw(st.lists(areas, min_size=1, max_size=4))
    truss = truss_of((joints, bars), supports, lambda number: sizes[number % len(sizes)])
    return Laid(truss, tuple(bottom) if plain_deck else draw(decks(truss)))


@st.composite
def decks(draw: st.DrawFn, truss: Truss) -> tuple[str | float, ...]:
    """Draw a loaded chord: bottom or top joints, some left out, each end perhaps an abutment's x [m]."""
    chord = draw(st.sampled_from("LLLU"))
    points = [name for name in truss.joints if name.startswith(chord)]
    if len(points) < 2:
        points = [name for name in truss.joints if name.startswith("L")]
    if len(points) > 3 and draw(st.booleans()):
        points.pop(draw(st.integers(1, len(points) - 2)))
    ends = [truss.joints[points[0]][0], truss.joints[points[-1]][0]]
    beyond = draw(st.lists(st.floats(0.4, 5.0), min_size=2, max_size=2))
    deck: list[str | float] = list(points)
    if draw(st.booleans()):
        deck.insert(0, ends[0] - beyond[0])
    if draw(st.booleans()):
        deck.append(ends[1] + beyond[1])
    return tuple(deck)


@st.composite
def vehicles(draw: st.DrawFn, **words: Any) -> Vehicle:
    """Draw a vehicle of 1-8 unequal axles, some coinciding, one in four longer than any truss drawn here."""
    loads = draw(st.lists(axle_loads, min_size=1, max_size=8))
    assume(sum(loads) > 1.0)
    gap = st.one_of(st.floats(0.3, 9.7), st.just(0.0))
    spacings = draw(st.lists(gap, min_size=len(loads) - 1, max_size=len(loads) - 1))
    if spacings and draw(st.integers(0, 3)) == 0:
        spacings[draw(st.integers(0, len(spacings) - 1))] += 53.9
    words.setdefault("headings", draw(st.sampled_from([(1, -1), (1, -1), (1,), (-1,)])))
    return Vehicle("drawn", loads, spacings, **words)


def row_scales(ordinates: np.ndarray[Any, np.dtype[np.float64]]) -> np.ndarray[Any, np.dtype[np.float64]]:
    """Return each row's largest ordinate (R,), for tolerances."""
    scale: np.ndarray[Any, np.dtype[np.float64]] = np.abs(ordinates).max(axis=1)
    return scale


def joint_loads(truss: Truss) -> st.SearchStrategy[dict[str, tuple[float, float]]]:
    """Draw forces on some joints [N]."""
    force = st.floats(-90e3, 90e3)
    names = st.sampled_from(list(truss.joints))
    return st.dictionaries(names, st.tuples(force, force), min_size=1, max_size=5).filter(
        lambda loads: math.hypot(*np.concatenate(list(loads.values()))) > 1.0
    )
