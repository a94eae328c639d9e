"""An upright web with flanges, as the beam rules want it: which part is which, in any section of pieces.

Covered: an I, a channel, an I with cover plates, and a built-up I of one upright plate, angles and cover plates.
"""

from __future__ import annotations

from dataclasses import dataclass
from typing import TYPE_CHECKING

from movload.bridge.section import Section
from movload.bridge.section_elements import Rect
from movload.bridge.section_open import groups
from movload.errors import InputError

if TYPE_CHECKING:
    from collections.abc import Sequence

    from movload.bridge.loss import CrossSection
    from movload.bridge.section_piece import Piece


@dataclass(frozen=True, slots=True)
class Box:
    """A rectangle as found, upright or level: its edges [m], and width over thickness where it may buckle, else 0."""

    left: float
    right: float
    bottom: float
    top: float
    ratio: float

    @property
    def area(self) -> float:
        """Area [m2]."""
        return (self.right - self.left) * (self.top - self.bottom)

    @property
    def y(self) -> float:
        """Level of its middle [m]."""
        return (self.bottom + self.top) / 2

    def i_about(self, x: float) -> float:
        """Return its second moment about an upright axis at ``x`` [m4]."""
        width, off = self.right - self.left, (self.left + self.right) / 2 - x
        return self.area * (width**2 / 12 + off**2)


@dataclass(frozen=True, slots=True)
class Webbed:
    """A web and the flanges above and below it, as found."""

    web: Box
    top: tuple[Box, ...]
    bottom: tuple[Box, ...]

    @property
    def thickness(self) -> float:
        """Of the web [m]."""
        return self.web.right - self.web.left

    @property
    def depth(self) -> float:
        """Of the web: clear of an I's or a channel's flanges, of the plate in a built-up one [m]."""
        return self.web.top - self.web.bottom

    def compressed(self, sense: str) -> tuple[Box, ...]:
        """Return the flange in compression: the top one under a moment, the bottom one where it hogs."""
        return self.top if sense == "moment" else self.bottom

    def flange_ratio(self, sense: str) -> float:
        """Return half width over thickness of the worst part of the flange in compression [-]."""
        return max(part.ratio for part in self.compressed(sense))

    def flange_inertia(self, sense: str) -> float:
        """Return the second moment of the flange in compression about the web's middle [m4]."""
        middle = (self.web.left + self.web.right) / 2
        return sum(part.i_about(middle) for part in self.compressed(sense))

    @property
    def between(self) -> float:
        """Distance between the flanges' centroids [m]."""
        return _level(self.top) - _level(self.bottom)


def webbed(section: CrossSection) -> Webbed:
    """Return which part of a section is web and which are flanges.

    Raises
    ------
    InputError
        A section that is no upright I, channel or built-up I, or one of whose flanges nothing is left.
    """
    if not isinstance(section, Section):
        raise InputError("its web and flanges are not known: type its shapes, or its strength", place=section.title)
    kinds = [piece.shape.kind for piece in section.pieces]
    covered = kinds == ["channel"] or (set(kinds) <= {"I", "plate", "angle"} and len(groups(section.pieces)) == 1)
    if not covered or any(piece.turn % 90 for piece in section.pieces):
        raise _refused(section)
    boxes = [(box, is_web) for piece in section.pieces for box, is_web in _boxes(piece)]
    webs = [box for box, is_web in boxes if is_web]
    if len(webs) != 1 or webs[0].top - webs[0].bottom < webs[0].right - webs[0].left:
        raise _refused(section)
    if not webs[0].area > 0:
        raise InputError("nothing is left of its web: not covered", place=section.title)
    flanges = [box for box, is_web in boxes if not is_web and box.area > 0]
    top = tuple(box for box in flanges if box.y > webs[0].y)
    bottom = tuple(box for box in flanges if box.y <= webs[0].y)
    for name, flange in (("top", top), ("bottom", bottom)):
        if not any(box.ratio for box in flange):
            raise InputError(f"it has no {name} flange, or nothing is left of it: not covered", place=section.title)
    return Webbed(webs[0], top, bottom)


def _refused(section: Section) -> InputError:
    """Return the refusal of a section that has no single upright web."""
    named = ", ".join(f"{piece.shape.kind} turned {piece.turn:g}" for piece in section.pieces)
    rule = "beams are covered of one upright I or channel, or of an upright plate with angles or cover plates"
    return InputError(f"{rule}, got {named}: type its strength", place=section.title)


def _boxes(piece: Piece) -> list[tuple[Box, bool]]:
    """Return the parts of a piece in the section's axes, and whether each is a web."""
    widths, found = piece.shape.plate_widths(), []
    for part, _ in piece.parts_and_new:
        if not isinstance(part, Rect):
            continue
        (xa, ya), (xb, yb) = (piece.placed(corner) for corner in ((part.left, part.bottom), (part.right, part.top)))
        sides = min(xa, xb), max(xa, xb), min(ya, yb), max(ya, yb)
        level = sides[1] - sides[0] > sides[3] - sides[2]
        is_web = part.part == "web" or (piece.shape.kind == "plate" and not level)
        width, edges = widths[part.part]
        # A cover between two lines of rivets counts by half its width, as if it stood free from the middle (safe).
        half = width / 2 if piece.shape.kind == "plate" and edges == 2 else width
        free = part.area > 0 and (level or piece.shape.kind != "angle")
        found.append((Box(*sides, half / part.thickness if free else 0.0), is_web))
    return found


def _level(flange: Sequence[Box]) -> float:
    """Return the level of a flange's centroid [m]."""
    return sum(part.area * part.y for part in flange) / sum(part.area for part in flange)
