"""How a built-up section twists whose pieces touch: middle lines joined where two parts lie against each other.

Vlasov's sectorial area is walked from part to part over links without metal. What only holds the section's open side
(lacing, battens) is left out, and so is a closed cell but for being recognised: both only stiffen, so the load at which
such a section buckles with twist is a lower bound.

References
----------
V. Z. Vlasov, *Thin-Walled Elastic Beams* (from memory); the lower bound is Rayleigh's: less stiffness under the same
axial stress.
"""

from __future__ import annotations

from dataclasses import dataclass, replace
from functools import lru_cache
from itertools import combinations
from typing import TYPE_CHECKING, Final

from movload.bridge.section_elements import Rect
from movload.bridge.section_overlap import ROUNDED, depth_of_overlap
from movload.bridge.section_sectorial import Line, sectorial
from movload.bridge.section_torsion import Twist
from movload.errors import InputError

if TYPE_CHECKING:
    from collections.abc import Sequence

    from movload.bridge.section_overlap import Extent
    from movload.bridge.section_piece import Piece
    from movload.bridge.section_regions import Point, Polygon, Ring

_TOUCHING: Final = 2 * ROUNDED  # m between two faces whose places are rounded (own choice)
_CELL: Final = 0.1  # of the outline's rectangle: what a loop of parts encloses to be a closed cell (own choice)


_kept: Final = lru_cache(maxsize=256)  # a section is asked many times: by bar, by sense, by level


@dataclass(frozen=True, slots=True)
class _Part:
    """A part: where it stands as new, and its middle line and thickness as found [m]."""

    extent: Extent
    start: Point
    end: Point
    thickness: float

    def nearest(self, point: Point) -> Point:
        """Return the point of its middle line nearest to another."""
        (xa, ya), (xb, yb) = self.start, self.end
        dx, dy = xb - xa, yb - ya
        along = ((point[0] - xa) * dx + (point[1] - ya) * dy) / (dx * dx + dy * dy)
        along = min(max(along, 0.0), 1.0)
        return xa + along * dx, ya + along * dy


@dataclass(frozen=True, slots=True)
class _Walk:
    """Lines from part to part, where each part was entered, and the sectorial area there [m2]."""

    lines: tuple[Line, ...]
    entry: dict[int, Point]
    swept: dict[int, float]


@_kept
def open_twist(pieces: tuple[Piece, ...]) -> Twist:
    """Return shear centre in the section's axes [m] and warping constant [m6] of pieces that touch.

    Raises
    ------
    InputError
        A round part, a piece turned askew, a part wholly gone, or pieces apart.
    """
    parts = _parts(pieces)
    walk = _walk(parts)
    if len(walk.entry) < len(parts):
        raise InputError("its pieces stand apart: no closed formula covers how they twist together")
    return Twist(*sectorial(walk.lines))


@_kept
def is_closed(pieces: tuple[Piece, ...]) -> bool:
    """Whether touching parts enclose a cell of at least a tenth of the section's outline; raises as ``open_twist``."""
    parts = _parts(pieces)
    walk = _walk(parts)
    lefts, rights, bottoms, tops = zip(*(part.extent for part in parts), strict=True)
    outline = (max(rights) - min(lefts)) * (max(tops) - min(bottoms))
    return bool(max(_loops(parts, walk), default=0.0) >= _CELL * outline)


@_kept
def groups(pieces: tuple[Piece, ...]) -> tuple[tuple[str, ...], ...]:
    """Return the names of pieces that touch as new, directly or through others, group by group."""
    regions = [replace(piece, cuts=()).regions for piece in pieces]
    left, found = list(range(len(pieces))), []
    while left:
        group = [left.pop(0)]
        for here in group:  # grows while it is walked
            near = [other for other in left if _touch(regions[here], regions[other])]
            group += near
            left = [other for other in left if other not in near]
        found.append(tuple(pieces[number].name for number in sorted(group)))
    return tuple(found)


def _touch(one: Sequence[Polygon | Ring], other: Sequence[Polygon | Ring]) -> bool:
    """Whether a region of one piece lies against a region of another."""
    return any(depth_of_overlap(a, b) >= -_TOUCHING for a in one for b in other)


def _parts(pieces: Sequence[Piece]) -> list[_Part]:
    """Return the parts of upright and level pieces, refusing what has no middle line."""
    parts = []
    for piece in pieces:
        if piece.turn % 90:
            raise InputError(f"{piece.name} is turned by {piece.turn:g} degrees: only quarter turns are covered")
        for found, new in piece.parts_and_new:
            if not (isinstance(found, Rect) and isinstance(new, Rect)):
                raise InputError(f"{piece.name} is round: no closed formula covers it in a built-up section")
            if not found.area:
                raise InputError(f"nothing is left of the {found.part} of {piece.name}")
            parts.append(_part(piece, found, new))
    return parts


def _part(piece: Piece, found: Rect, new: Rect) -> _Part:
    """Return a part in the section's axes; of its two sizes as found the lesser is the thickness."""
    (xa, ya), (xb, yb) = (piece.placed(corner) for corner in ((new.left, new.bottom), (new.right, new.top)))
    extent = min(xa, xb), max(xa, xb), min(ya, yb), max(ya, yb)
    x, y = found.middle
    width, height = found.right - found.left, found.top - found.bottom
    ends = ((found.left, y), (found.right, y)) if width > height else ((x, found.bottom), (x, found.top))
    start, end = (piece.placed(point) for point in ends)
    return _Part(extent, start, end, min(width, height))


def _contact(one: Extent, other: Extent) -> Point | None:
    """Return the middle of where two parts lie against each other, None where they do not."""
    left, right = max(one[0], other[0]), min(one[1], other[1])
    bottom, top = max(one[2], other[2]), min(one[3], other[3])
    across, up = right - left, top - bottom
    # Two that meet at a corner alone are not joined.
    if min(across, up) < -_TOUCHING or max(across, up) <= _TOUCHING:
        return None
    return (left + right) / 2, (bottom + top) / 2


def _walk(parts: Sequence[_Part]) -> _Walk:
    """Return the lines from the first part to all that hang on it, each entered once."""
    lines: list[Line] = []
    entry, swept, waiting = {0: parts[0].start}, {0: 0.0}, [0]
    while waiting:
        here = waiting.pop(0)
        part, came = parts[here], entry[here]
        lines += [Line(came, tip, part.thickness) for tip in (part.start, part.end) if tip != came]
        for other, beside in enumerate(parts):
            contact = _contact(part.extent, beside.extent)
            if other in entry or contact is None:
                continue
            leave, enter = part.nearest(contact), beside.nearest(contact)
            lines += [Line(came, leave, 0.0), Line(leave, enter, 0.0)]
            entry[other] = enter
            waiting.append(other)
            swept[other] = swept[here] + _cross(came, leave) + _cross(leave, enter)
    return _Walk(tuple(lines), entry, swept)


def _loops(parts: Sequence[_Part], walk: _Walk) -> list[float]:
    """Return the area that each loop encloses [m2]: two ways to one place differ by twice of it."""
    found = []
    for (here, part), (other, beside) in combinations(enumerate(parts), 2):
        contact = _contact(part.extent, beside.extent)
        if contact is None or not {here, other} <= set(walk.entry):
            continue
        leave, enter = part.nearest(contact), beside.nearest(contact)
        one_way = walk.swept[here] + _cross(walk.entry[here], leave) + _cross(leave, enter)
        found.append(abs(one_way - walk.swept[other] - _cross(walk.entry[other], enter)) / 2)
    return found


def _cross(start: Point, end: Point) -> float:
    """Return twice the area between a step and the origin [m2]."""
    return start[0] * end[1] - end[0] * start[1]
