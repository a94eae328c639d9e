"""How a whole section twists: one piece by its own formulas, a built-up one where symmetry or two legs settle it.

J of a built-up section is the sum over its pieces: they act each on its own between lacing bars, and a box they may
form is not counted, which is on the safe side.
"""

from __future__ import annotations

import math
from itertools import chain
from typing import TYPE_CHECKING, Final

from movload.bridge.section_regions import Polygon, combined
from movload.bridge.section_torsion import Twist, torsion_constant, twist
from movload.errors import InputError

if TYPE_CHECKING:
    from collections.abc import Callable, Sequence

    from movload.bridge.section_piece import Piece
    from movload.bridge.section_regions import Point, Ring

_ALIKE: Final = 1e-6  # m: places typed to a micrometre
_CLOSE_BACKS: Final = 3.0  # thicknesses between the backs of two angles that act as one: a gusset's (own choice)
_BUILT_UP: Final = "has no closed formula for a built-up section: type {name} of the section where a rule asks for it"


def torsion_of(pieces: Sequence[Piece]) -> dict[str, float | str]:
    """Return torsion, warping, x_0 and y_0 (shear centre from the centroid) of a section, or why each is refused."""
    known: dict[str, float | str] = {
        "torsion": sum(torsion_constant(piece.shape.form, piece.elements) for piece in pieces)
    }
    try:
        x, y, warping = _twist(pieces)
    except InputError as error:
        reason = str(error)
        return known | {"warping": reason, "x_0": reason, "y_0": reason}
    whole = combined(region.moments() for piece in pieces for region in piece.regions)
    return known | {"x_0": x - whole.x, "y_0": y - whole.y, "warping": warping}


def is_mirrored(pieces: Sequence[Piece], axis: str) -> bool:
    """Whether a section mirrors itself in its axis "y" (left to right) or "x" (top to bottom) through the centroid."""
    whole = combined(region.moments() for piece in pieces for region in piece.regions)
    if axis == "y":
        return _same(pieces, lambda point: (2 * whole.x - point[0], point[1]))
    return _same(pieces, lambda point: (point[0], 2 * whole.y - point[1]))


def _twist(pieces: Sequence[Piece]) -> tuple[float, float, float | str]:
    """Return shear centre and warping constant; the latter may be the reason why there is none."""
    if len(pieces) == 1:
        return _of_one(pieces[0])
    whole = combined(region.moments() for piece in pieces for region in piece.regions)
    if _back_to_back(pieces):
        # Each angle twists about the meeting of its legs' middle lines; the two together about the point between.
        one, other = (_of_one(piece) for piece in pieces)
        return (one.x + other.x) / 2, (one.y + other.y) / 2, one.warping + other.warping
    if _same(pieces, lambda point: (2 * whole.x - point[0], 2 * whole.y - point[1])):
        return whole.x, whole.y, f"warping {_BUILT_UP.format(name='warping')}"
    raise InputError(f"shear centre {_BUILT_UP.format(name='shear_centre and warping')}")


def _of_one(piece: Piece) -> Twist:
    """Return how one piece twists, in the section's axes."""
    own = twist(piece.shape.form, piece.elements)
    return Twist(*piece.placed((own.x, own.y)), own.warping)


def _back_to_back(pieces: Sequence[Piece]) -> bool:
    """Whether two angles mirror each other, back to back across a gap that a gusset fills."""
    if len(pieces) != 2 or any(piece.shape.form != "angle" for piece in pieces):
        return False
    one, other = ((piece.x, piece.y) for piece in pieces)
    thickness = min(part.thickness for part in pieces[0].shape.elements())
    if math.dist(one, other) > _CLOSE_BACKS * thickness:
        return False
    x, y = (one[0] + other[0]) / 2, (one[1] + other[1]) / 2
    upright = abs(one[1] - other[1]) <= _ALIKE and _same(pieces, lambda point: (2 * x - point[0], point[1]))
    level = abs(one[0] - other[0]) <= _ALIKE and _same(pieces, lambda point: (point[0], 2 * y - point[1]))
    return upright or level


def _same(pieces: Sequence[Piece], moved: Callable[[Point], Point]) -> bool:
    """Whether a section comes to lie on itself when every point is moved."""
    regions = list(chain.from_iterable(piece.regions for piece in pieces))
    here = [_marks(region) for region in regions]
    there = [_marks(region, moved) for region in regions]
    return all(any(_alike(marks, other) for other in here) for marks in there)


def _marks(region: Polygon | Ring, moved: Callable[[Point], Point] | None = None) -> list[Point]:
    """Return the points that fix a region, moved: corners, or a ring's centre and radii."""
    points = list(region.corners) if isinstance(region, Polygon) else [(region.x, region.y)]
    places = [moved(point) if moved else point for point in points]
    return places if isinstance(region, Polygon) else [*places, (region.outer, region.inner)]


def _alike(marks: Sequence[Point], other: Sequence[Point]) -> bool:
    """Whether each point has one of the other region's close by."""
    if len(marks) != len(other):
        return False
    return all(any(math.dist(point, mate) <= _ALIKE for mate in other) for point in marks)
