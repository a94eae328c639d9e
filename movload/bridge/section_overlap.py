"""Whether two pieces stand in the same place: metal counted twice would be strength that is not there."""

from __future__ import annotations

import math
from itertools import combinations
from typing import TYPE_CHECKING, Final, TypeAlias

from movload.bridge.section_regions import Polygon, Ring
from movload.errors import InputError

if TYPE_CHECKING:
    from collections.abc import Sequence

    from movload.bridge.section_piece import Piece
    from movload.bridge.section_regions import Point

Extent: TypeAlias = "tuple[float, float, float, float]"

ROUNDED: Final = 0.5e-3
"""Pieces may lie this deep in each other [m]: what places rounded to half a millimetre leave (own choice)."""


def refuse_overlaps(pieces: Sequence[Piece]) -> None:
    """Refuse pieces that lie in each other deeper than rounded places explain."""
    placed = [(piece.name, [(region, region.extent) for region in piece.regions]) for piece in pieces]
    for (one, regions), (other, others) in combinations(placed, 2):
        close = [(a, b) for a, reach_a in regions for b, reach_b in others if not _apart(reach_a, reach_b)]
        depth = max((depth_of_overlap(*pair) for pair in close), default=0.0)
        if depth > ROUNDED:
            raise InputError(
                f'"{one}" and "{other}" lie {depth:g} m deep in each other: their metal would count twice', place=other
            )


def depth_of_overlap(one: Polygon | Ring, other: Polygon | Ring) -> float:
    """Return how far one region must be moved to leave the other [m], 0 or less when they do not overlap.

    Convex polygons are parted by one of their sides' directions (separating axes). A ring's hole may hold a region.
    """
    if isinstance(one, Polygon) and isinstance(other, Polygon):
        return _of_polygons(one, other)
    if isinstance(one, Ring):
        return _of_ring(one, other)
    return _of_ring(other, one) if isinstance(other, Ring) else 0.0


def _apart(one: Extent, other: Extent) -> bool:
    """Whether two regions are parted by an upright or a level line, which most are."""
    return max(one[0], other[0]) >= min(one[1], other[1]) or max(one[2], other[2]) >= min(one[3], other[3])


def _of_polygons(one: Polygon, other: Polygon) -> float:
    """Return the least overlap of their shadows across any side."""
    return min(
        min(high_a, high_b) - max(low_a, low_b)
        for sides in (one.sides, other.sides)
        for normal in map(_normal, sides)
        for (low_a, high_a), (low_b, high_b) in ((_shadow(one, normal), _shadow(other, normal)),)
    )


def _of_ring(ring: Ring, other: Polygon | Ring) -> float:
    """Return how deep a region lies in a ring: from outside, or from within its hole."""
    if isinstance(other, Ring):
        apart = math.hypot(other.x - ring.x, other.y - ring.y)
        outside = ring.outer + other.outer - apart
        return min(outside, apart + other.outer - ring.inner, apart + ring.outer - other.inner)
    centre = (ring.x, ring.y)
    nearest = _distance(centre, other)
    farthest = max(math.dist(centre, corner) for corner in other.corners)
    return min(ring.outer - nearest, farthest - ring.inner)


def _normal(side: tuple[Point, Point]) -> Point:
    """Return a side's unit normal."""
    (xa, ya), (xb, yb) = side
    length = math.hypot(xb - xa, yb - ya)
    return (yb - ya) / length, (xa - xb) / length


def _shadow(polygon: Polygon, normal: Point) -> tuple[float, float]:
    """Return the least and the greatest reach of a polygon along a direction."""
    reaches = [x * normal[0] + y * normal[1] for x, y in polygon.corners]
    return min(reaches), max(reaches)


def _distance(point: Point, polygon: Polygon) -> float:
    """Return the distance of a point from a polygon, 0 or less inside it."""
    beyond = [
        (point[0] - side[0][0]) * normal[0] + (point[1] - side[0][1]) * normal[1]
        for side, normal in ((side, _normal(side)) for side in polygon.sides)
    ]
    return max(beyond) if max(beyond) <= 0 else min(_from_side(point, side) for side in polygon.sides)


def _from_side(point: Point, side: tuple[Point, Point]) -> float:
    """Return the distance of a point from a side."""
    (xa, ya), (xb, yb) = side
    dx, dy = xb - xa, yb - ya
    along = ((point[0] - xa) * dx + (point[1] - ya) * dy) / (dx * dx + dy * dy)
    along = min(max(along, 0.0), 1.0)
    return math.dist(point, (xa + along * dx, ya + along * dy))
