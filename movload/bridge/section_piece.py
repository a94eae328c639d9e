"""A piece of a section: a shape put in its place, with the metal that is gone from it."""

from __future__ import annotations

import math
from dataclasses import dataclass, field, replace
from typing import TYPE_CHECKING

from movload.bridge.section_elements import Round, answers_to
from movload.bridge.section_regions import Polygon, Ring
from movload.errors import InputError, UnknownNameError, nearest_name

if TYPE_CHECKING:
    from movload.bridge.section_elements import Cut, Element, Rect
    from movload.bridge.section_regions import Point
    from movload.bridge.section_shape import Edges, Shape


@dataclass(frozen=True, slots=True)
class PlateElement:
    """A part that may buckle as a plate.

    Attributes
    ----------
    piece, shape, part
        Name of the piece, kind of its shape, name of the part.
    width, thickness
        As new and as found [m]: a leg or a channel's flange in full, half of an I's flange, webs and walls clear; the
        outside diameter of a round wall.
    edges
        How many long edges are supported: 1, 2, or 0 for a round wall.
    """

    piece: str
    shape: str
    part: str
    width: float
    thickness: float
    edges: Edges


@dataclass(frozen=True, slots=True)
class Piece:
    """A shape in its place.

    Parameters
    ----------
    shape
        What it is.
    x, y
        Where the shape's reference point stands [m]: an angle's heel, the middle of a channel's back, else the centre
        (each shape's class says). x to the right across the bridge, y up in the truss's plane.
    turn
        Degrees anticlockwise about the reference point, after mirroring.
    mirror
        Whether left and right are exchanged first.
    name
        Its own; a section numbers those without ("channel 2").
    cuts
        Metal gone from it.

    Raises
    ------
    InputError
        A place that is no number, or more metal gone than there was.
    UnknownNameError
        Metal gone from a part it does not have.
    """

    shape: Shape
    x: float = 0.0
    y: float = 0.0
    turn: float = field(default=0.0, kw_only=True)
    mirror: bool = field(default=False, kw_only=True)
    name: str = field(default="", kw_only=True)
    cuts: tuple[Cut, ...] = field(default=(), kw_only=True)

    def __post_init__(self) -> None:
        """Check the place and every cut."""
        said = self.name or self.shape.kind
        for word, value, unit in (("x", self.x, "m"), ("y", self.y, "m"), ("turn", self.turn, "degrees")):
            if not math.isfinite(value):
                raise InputError(f"must be a finite number, got {value:g} {unit}", place=f"{said}.{word}")
        try:
            for cut in self.cuts:
                self._require_part(cut.part)
            _ = (self.elements, self.neck)
        except InputError as error:
            raise error.at(said) from None

    @property
    def elements(self) -> tuple[Element, ...]:
        """What is left of its parts, in the shape's own axes; a part wholly gone has no area."""
        return tuple(part.lessened(self.cuts) for part in self.shape.elements())

    @property
    def neck(self) -> tuple[Element, ...]:
        """What is left of the metal at its connection where that is made unlike the rest."""
        return tuple(part.lessened(self.cuts) for part in self.shape.neck())

    @property
    def regions(self) -> tuple[Polygon | Ring, ...]:
        """What is left of it, in the section's axes."""
        return tuple(self._placed(part) for part in self.elements if part.area > 0)

    @property
    def part_names(self) -> tuple[str, ...]:
        """Every part that can be lost or holed."""
        return tuple(name for part in (*self.shape.elements(), *self.shape.neck()) for name in part.names)

    @property
    def plates(self) -> tuple[PlateElement, ...]:
        """Its parts that may buckle as plates, as thick as they are found; those wholly gone left out."""
        widths = self.shape.plate_widths()
        return tuple(
            PlateElement(self.name, self.shape.kind, part.part, widths[part.part][0], part.thickness,
                         widths[part.part][1])
            for part in self.elements
            if part.part in widths and part.area > 0
        )  # fmt: skip

    @property
    def area(self) -> float:
        """What is left of it along its length [m2]."""
        return sum(part.area for part in self.elements)

    @property
    def gross_area(self) -> float:
        """Least area that yields [m2]: the root of a thread counts where it is the smaller."""
        neck = sum(part.area for part in self.neck)
        return min(self.area, neck) if self.neck and self.shape.neck_yields else self.area

    @property
    def net_area(self) -> float:
        """Least area before holes are taken out [m2]: of the shank and the head beside the pin."""
        neck = sum(part.area for part in self.neck)
        return min(self.area, neck) if self.neck else self.area

    @property
    def parts_and_new(self) -> tuple[tuple[Element, Element], ...]:
        """Each of its parts as found and as new."""
        return tuple(zip(self.elements, self.shape.elements(), strict=True))

    def has_part(self, name: str) -> bool:
        """Whether it has a part of this name; "" means every part."""
        return not name or any(answers_to(part, name) for part in self.part_names)

    def with_cut(self, cut: Cut) -> Piece:
        """Return it with more metal gone."""
        return replace(self, cuts=(*self.cuts, cut))

    def placed(self, point: Point) -> Point:
        """Return a point of the shape's own axes in the section's."""
        x, y = (-point[0], point[1]) if self.mirror else point
        cosine, sine = _cosine_and_sine(self.turn)
        return self.x + x * cosine - y * sine, self.y + x * sine + y * cosine

    def _require_part(self, name: str) -> None:
        """Refuse a part it does not have."""
        if not self.has_part(name):
            known = self.part_names
            said = ", ".join(f'"{part}"' for part in known)
            raise UnknownNameError(
                f'"{name}" is no part of the {self.shape.kind}: {said}', nearest=nearest_name(name, known)
            )

    def _placed(self, part: Element) -> Polygon | Ring:
        """Return a part in the section's axes."""
        if isinstance(part, Round):
            return Ring(*self.placed((0.0, 0.0)), part.outer, part.inner)
        return Polygon.of([self.placed(corner) for corner in _corners(part)])


def _corners(part: Rect) -> tuple[Point, ...]:
    """Return a rectangle's corners anticlockwise."""
    return (part.left, part.bottom), (part.right, part.bottom), (part.right, part.top), (part.left, part.top)


def _cosine_and_sine(turn: float) -> tuple[float, float]:
    """Return cosine and sine of an angle in degrees; quarter turns exactly, so that rectangles stay square."""
    quarters, rest = divmod(turn, 90.0)
    if rest == 0.0:
        return ((1.0, 0.0), (0.0, 1.0), (-1.0, 0.0), (0.0, -1.0))[int(quarters) % 4]
    return math.cos(math.radians(turn)), math.sin(math.radians(turn))
