"""Random trusses, bearings, decks and vehicles for hypothesis: ugly lengths, unequal areas, beds that incline.

Panel lengths are any floating-point numbers in a range: whole ones would let a stepping method land on every kink.
Lengths that happen to be alike, and round ones, are drawn often enough by hypothesis itself.

A set of bearings that is nearly a mechanism answers with numbers as large as one likes, and no method then agrees
with another to a fixed number of digits. Such beds are avoided by measuring them: with each held direction as a row
(nx, ny, moment about the bearings' middle / span), the least singular value must be at least ``FIRM``. It is 0 for a
mechanism, about 0.7 for a pin and a level roller, and falls as a roller's normal comes to pass through the pin.
"""

from __future__ import annotations

from dataclasses import dataclass
from typing import TYPE_CHECKING, Final

import numpy as np
from hypothesis import assume
from hypothesis import strategies as st
from oracles.lagrange import holds_of
from oracles.trusses import pratt, truss_of, warren

from movload.bridge.truss import Support, Truss
from movload.traffic.vehicle import Vehicle

if TYPE_CHECKING:
    from collections.abc import Sequence

    from oracles.trusses import Bars, Joints

FIRM: Final = 0.15
DETERMINATE: Final = ("pin and bed", "three beds")
EVERY: Final = (*DETERMINATE, "two pins", "third bearing", "springs")

panel_lengths = st.floats(1.7, 7.3)  # m
heights = st.floats(1.9, 6.1)  # m
areas = st.lists(st.floats(1e-3, 2e-2), min_size=1, max_size=4)  # m2, bar after bar, repeated
bed_angles = st.floats(-65.0, 65.0) | st.sampled_from([180.0, -180.0, 205.0, 360.0])  # degrees; half turns are beds too
axle_loads = st.floats(0.0, 160e3)  # N
gaps = st.floats(0.3, 9.7) | st.just(0.0)  # m; 0: axles that coincide
directions = st.sampled_from([(1, -1), (1, -1), (1,), (-1,)])


@dataclass(frozen=True, slots=True)
class Laid:
    """A truss and the panel points of its loaded chord."""

    truss: Truss
    panel_points: tuple[str | float, ...]


def alike_from_both_ends(values: list[float]) -> list[float]:
    """Return values whose second half mirrors the first."""
    return [min(pair) for pair in zip(values, values[::-1], strict=True)]


@st.composite
def skeletons(draw: st.DrawFn, *, crossed: bool) -> tuple[Joints, Bars]:
    """Draw joints and bars: Pratt or Parker of 2-7 panels or Warren of 1-6; perhaps second diagonals if ``crossed``.

    Half of them are symmetrical: a method may take a short cut there.
    """
    lengths = draw(st.lists(panel_lengths, min_size=2, max_size=7))
    depths = draw(st.lists(heights, min_size=len(lengths) - 1, max_size=len(lengths) - 1))
    form, symmetrical = draw(st.sampled_from([pratt, warren])), draw(st.booleans())
    lengths = lengths[1:] if form is warren else lengths
    if symmetrical:
        lengths, depths = alike_from_both_ends(lengths), alike_from_both_ends(depths)
    if form is warren:
        return warren(lengths, depths)
    inner = range(1, len(lengths) - 1)
    if symmetrical and crossed:
        return pratt(lengths, depths, crossed=inner if draw(st.booleans()) else ())
    return pratt(lengths, depths, crossed=sorted(draw(st.sets(st.sampled_from(inner)))) if crossed and inner else ())


def firmness(supports: Sequence[Support], joints: Joints) -> float:
    """Return how firmly bearings hold a rigid truss: 0 for a mechanism (see the module's text)."""
    at = np.array([joints[support.joint] for support in supports])
    span = float(np.ptp(at[:, 0]))
    rows = []
    for support, (x, y) in zip(supports, at - at.mean(axis=0), strict=True):
        for hold in holds_of(support):
            nx, ny = hold.direction
            rows.append((nx, ny, (x * ny - y * nx) / span))
    return float(np.linalg.svd(np.array(rows), compute_uv=False)[-1])


@st.composite
def bearings(draw: st.DrawFn, points: Sequence[str], kinds: Sequence[str]) -> list[Support]:
    """Draw bearings of one of ``kinds`` under two or three of the joints, either end pinned, ends overhanging."""
    last = len(points) - 1
    left = draw(st.integers(0, max(0, last // 2 - 1)))
    right = draw(st.just(last - left) | st.integers(min(left + 1 + last // 3, last), last))
    pinned, sliding = draw(st.permutations([points[left], points[right]]))
    bed = draw(st.just(0.0) | bed_angles)
    others = [point for point in points if point not in {pinned, sliding}]
    kind = draw(st.sampled_from(kinds))
    if kind == "three beds" and others:
        third = Support(draw(st.sampled_from(others)), draw(st.sampled_from([90.0, 55.0, -70.0])))
        return [Support(pinned, 0.0), Support(sliding, bed), third]
    if kind == "two pins":
        return [Support(pinned), Support(sliding)]
    if kind == "third bearing":
        return [Support(pinned), Support(sliding, bed), *(Support(point, 0.0) for point in others[:1])]
    if kind == "springs":
        stiffness = draw(st.floats(1e7, 1e9))  # N/m, about a member's own
        return [Support(pinned, normal_stiffness=stiffness), Support(sliding, bed, slide_stiffness=0.7 * stiffness)]
    return [Support(pinned), Support(sliding, bed)]


@st.composite
def laid(draw: st.DrawFn, *, kinds: Sequence[str] = EVERY, crossed: bool = True, plain_deck: bool = False) -> Laid:
    """Draw a truss and its loaded chord; ``plain_deck`` loads every bottom joint and no abutment."""
    joints, bars = draw(skeletons(crossed=crossed))
    bottom = tuple(name for name in joints if name.startswith("L"))
    supports = draw(bearings(bottom, kinds))
    assume(firmness(supports, joints) >= FIRM)
    sizes = draw(areas)
    truss = truss_of((joints, bars), supports, lambda number: sizes[number % len(sizes)])
    return Laid(truss, bottom if plain_deck else draw(decks(truss)))


def determinate(*, plain_deck: bool = False) -> st.SearchStrategy[Laid]:
    """Draw a determinate truss and its loaded chord."""
    return laid(kinds=DETERMINATE, crossed=False, plain_deck=plain_deck)


@st.composite
def decks(draw: st.DrawFn, truss: Truss) -> tuple[str | float, ...]:
    """Draw a loaded chord: bottom or top joints, perhaps one left out, each end perhaps an abutment's x [m]."""
    chord = draw(st.sampled_from("LLLU"))
    points = [name for name in truss.joints if name.startswith(chord)]
    if len(points) < 2:
        points = [name for name in truss.joints if name.startswith("L")]
    if len(points) > 3 and draw(st.booleans()):
        points.pop(draw(st.integers(1, len(points) - 2)))
    first, last = truss.joints[points[0]][0], truss.joints[points[-1]][0]
    before, after = draw(st.lists(st.floats(0.4, 5.0), min_size=2, max_size=2))
    deck: list[str | float] = list(points)
    if draw(st.booleans()):
        deck.insert(0, first - before)
    if draw(st.booleans()):
        deck.append(last + after)
    return tuple(deck)


@st.composite
def vehicles(draw: st.DrawFn, *, headings: tuple[int, ...] = ()) -> Vehicle:
    """Draw a vehicle of 1-8 unequal axles, some coinciding, one in four longer than any truss drawn here."""
    loads = draw(st.lists(axle_loads, min_size=1, max_size=8))
    assume(sum(loads) > 1.0)
    spacings = draw(st.lists(gaps, min_size=len(loads) - 1, max_size=len(loads) - 1))
    if spacings and draw(st.integers(0, 3)) == 0:
        spacings[draw(st.integers(0, len(spacings) - 1))] += 63.9
    return Vehicle("drawn", loads, spacings, headings=headings or draw(directions))


def joint_loads(truss: Truss) -> st.SearchStrategy[dict[str, tuple[float, float]]]:
    """Draw forces on one to five joints [N], some of at least 1 kN."""
    force = st.floats(-90e3, 90e3)
    drawn = st.dictionaries(st.sampled_from(list(truss.joints)), st.tuples(force, force), min_size=1, max_size=5)
    return drawn.filter(lambda loads: max(abs(part) for pair in loads.values() for part in pair) > 1e3)
