"""Plane regions in a section's axes, and their exact moments: convex polygons and rings.

Every region tells its area, centroid and own moments of inertia, how far it reaches, and what of it lies below a level:
that is all a section's properties are made of.
"""

from __future__ import annotations

import math
from dataclasses import dataclass
from itertools import pairwise
from typing import TYPE_CHECKING, NamedTuple, Protocol, TypeAlias

if TYPE_CHECKING:
    from collections.abc import Iterable, Sequence

Point: TypeAlias = "tuple[float, float]"


class Moments(NamedTuple):
    """Area [m2], centroid [m] and moments of inertia about the own centroid [m4]."""

    area: float
    x: float
    y: float
    i_x: float
    i_y: float
    i_xy: float


class Below(NamedTuple):
    """Area below a level [m2] and its moment about the x axis, the integral of y [m3]."""

    area: float
    moment: float


class Region(Protocol):
    """Metal in the plane of the section."""

    @property
    def extent(self) -> tuple[float, float, float, float]:
        """Left, right, bottom, top [m]."""

    @property
    def levels(self) -> tuple[float, ...]:
        """Levels y [m] between which its area below is smooth."""

    def moments(self) -> Moments:
        """Return its moments."""

    def below(self, level: float) -> Below:
        """Return what of it lies below a level."""

    def swapped(self) -> Region:
        """Return it with x and y exchanged."""


@dataclass(frozen=True, slots=True)
class Polygon:
    """A convex polygon: its corners anticlockwise [m]."""

    corners: tuple[Point, ...]

    @classmethod
    def of(cls, corners: Sequence[Point]) -> Polygon:
        """Return it with its corners put anticlockwise."""
        return cls(tuple(corners) if _signed_area(corners) >= 0 else tuple(reversed(corners)))

    @property
    def sides(self) -> tuple[tuple[Point, Point], ...]:
        """Each side by its two corners."""
        return tuple(pairwise((*self.corners, self.corners[0])))

    @property
    def extent(self) -> tuple[float, float, float, float]:
        """Left, right, bottom, top [m]."""
        xs, ys = zip(*self.corners, strict=True)
        return min(xs), max(xs), min(ys), max(ys)

    @property
    def levels(self) -> tuple[float, ...]:
        """Levels of its corners [m]."""
        return tuple(y for _, y in self.corners)

    def moments(self) -> Moments:
        """Return its moments: Green's theorem side by side, from its first corner to keep the digits."""
        x0, y0 = self.corners[0]
        area = first_x = first_y = xx = yy = xy = 0.0
        for (xa, ya), (xb, yb) in self.sides:
            a, b, c, d = xa - x0, ya - y0, xb - x0, yb - y0
            cross = a * d - c * b
            area += cross / 2
            first_x += (a + c) * cross / 6
            first_y += (b + d) * cross / 6
            xx += (a * a + a * c + c * c) * cross / 12
            yy += (b * b + b * d + d * d) * cross / 12
            xy += (a * d + 2 * a * b + 2 * c * d + c * b) * cross / 24
        x, y = first_x / area, first_y / area
        return Moments(area, x0 + x, y0 + y, yy - area * y * y, xx - area * x * x, xy - area * x * y)

    def below(self, level: float) -> Below:
        """Return what of it lies below a level: the polygon clipped there."""
        kept: list[Point] = []
        for (xa, ya), (xb, yb) in self.sides:
            if ya <= level:
                kept.append((xa, ya))
            if (ya < level < yb) or (yb < level < ya):
                kept.append((xa + (xb - xa) * (level - ya) / (yb - ya), level))
        area = moment = 0.0
        for (xa, ya), (xb, yb) in pairwise((*kept, *kept[:1])):
            cross = (xa - kept[0][0]) * (yb - level) - (xb - kept[0][0]) * (ya - level)
            area += cross / 2
            moment += (ya + yb - 2 * level) * cross / 6
        return Below(area, moment + level * area)

    def swapped(self) -> Polygon:
        """Return it with x and y exchanged."""
        return Polygon.of([(y, x) for x, y in self.corners])


@dataclass(frozen=True, slots=True)
class Ring:
    """A ring, or a disc where its inner radius is 0 [m]."""

    x: float
    y: float
    outer: float
    inner: float = 0.0

    @property
    def extent(self) -> tuple[float, float, float, float]:
        """Left, right, bottom, top [m]."""
        return self.x - self.outer, self.x + self.outer, self.y - self.outer, self.y + self.outer

    @property
    def levels(self) -> tuple[float, ...]:
        """Levels of the tops and bottoms of both circles [m]."""
        return tuple(self.y + reach for reach in (-self.outer, -self.inner, self.inner, self.outer))

    def moments(self) -> Moments:
        """Return its moments: A = pi (R^2 - r^2), I = pi/4 (R^4 - r^4)."""
        area = math.pi * (self.outer**2 - self.inner**2)
        inertia = area * (self.outer**2 + self.inner**2) / 4
        return Moments(area, self.x, self.y, inertia, inertia, 0.0)

    def below(self, level: float) -> Below:
        """Return what of it lies below a level: a segment of the outer circle less one of the inner."""
        (area, moment), (hole, of_hole) = (_segment(radius, level - self.y) for radius in (self.outer, self.inner))
        return Below(area - hole, moment - of_hole + self.y * (area - hole))

    def swapped(self) -> Ring:
        """Return it with x and y exchanged."""
        return Ring(self.y, self.x, self.outer, self.inner)


def _signed_area(corners: Sequence[Point]) -> float:
    """Return the area inside the corners, positive when they run anticlockwise."""
    x0, y0 = corners[0]
    sides = pairwise((*corners, corners[0]))
    return sum((xa - x0) * (yb - y0) - (xb - x0) * (ya - y0) for (xa, ya), (xb, yb) in sides) / 2


def _segment(radius: float, height: float) -> tuple[float, float]:
    """Return area and moment about the centre of a circle's part below a height over its centre.

    A = R^2 (pi/2 + asin(h/R)) + h sqrt(R^2 - h^2), S = -2/3 (R^2 - h^2)^(3/2).
    """
    if radius == 0.0:
        return 0.0, 0.0
    height = min(max(height, -radius), radius)
    half_chord = math.sqrt(radius**2 - height**2)
    area = radius**2 * (math.pi / 2 + math.asin(height / radius)) + height * half_chord
    return area, -2 / 3 * half_chord**3


def combined(moments: Iterable[Moments]) -> Moments:
    """Return the moments of several regions together, about their common centroid (Steiner)."""
    each = tuple(moments)
    area = sum(one.area for one in each)
    x = sum(one.area * one.x for one in each) / area
    y = sum(one.area * one.y for one in each) / area
    return Moments(
        area,
        x,
        y,
        sum(one.i_x + one.area * (one.y - y) ** 2 for one in each),
        sum(one.i_y + one.area * (one.x - x) ** 2 for one in each),
        sum(one.i_xy + one.area * (one.x - x) * (one.y - y) for one in each),
    )
