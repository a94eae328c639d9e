"""Holes across a part, and what they take from the net section, staggered lines too."""

from __future__ import annotations

import math
from dataclasses import dataclass, field
from typing import TYPE_CHECKING

from movload.bridge.section_elements import answers_to
from movload.errors import InputError, MissingDataError, UnknownNameError, nearest_name

if TYPE_CHECKING:
    from collections.abc import Sequence

    from movload.bridge.section_elements import Element
    from movload.bridge.section_piece import Piece


@dataclass(frozen=True, slots=True)
class Hole:
    """Holes in line across a part, all alike; those of several parts are taken in one cross-section.

    Parameters
    ----------
    diameter
        What is taken out [m]. Nothing is added for damage round a hole or for its play: add what the rules add.
    piece, part
        What is holed: "" means every piece that has the part, and the only part of a plate or a bar. The last word of
        a name means all of its kind ("flange").
    number
        Holes in the line, or in the zigzag when they are staggered.
    punched
        Whether they were punched full size (else drilled or reamed).
    stagger, gauge
        Pitch s along the member and gauge g across it between neighbours of a zigzag [m]; with a gauge alone, holes
        stand side by side.
    thickness
        What the holes go through [m]; None takes the part's own, as found.

    Raises
    ------
    InputError
        A size of 0 or less, a stagger without a gauge.
    """

    diameter: float
    part: str = ""
    piece: str = field(default="", kw_only=True)
    number: int = field(default=1, kw_only=True)
    punched: bool = field(default=False, kw_only=True)
    stagger: float = field(default=0.0, kw_only=True)
    gauge: float = field(default=0.0, kw_only=True)
    thickness: float | None = field(default=None, kw_only=True)

    def __post_init__(self) -> None:
        """Check sizes and the zigzag."""
        thickness = 1.0 if self.thickness is None else self.thickness
        for name, size in (("diameter", self.diameter), ("thickness", thickness)):
            if not (math.isfinite(size) and size > 0):
                raise InputError(f"must be above 0, got {size:g} m", place=f"hole.{name}")
        for name, size in (("stagger", self.stagger), ("gauge", self.gauge)):
            if not (math.isfinite(size) and size >= 0):
                raise InputError(f"must be 0 or more, got {size:g} m", place=f"hole.{name}")
        if self.number < 1:
            raise InputError(f"at least 1 hole is in a line, got {self.number}", place="hole.number")
        if self.stagger and not (self.gauge and self.number > 1):
            said = f"a stagger of {self.stagger:g} m needs a gauge and at least 2 holes, got {self.gauge:g} m and"
            raise InputError(f"{said} {self.number}", place="hole.stagger")

    @property
    def width(self) -> float:
        """What the worst chain takes off the width of the part [m]: sum of d less sum of s^2 / 4 g along it."""
        return worst_chain(self.number, self.diameter, self.stagger, self.gauge)


def worst_chain(number: int, diameter: float, stagger: float, gauge: float) -> float:
    """Return the most that any chain across a zigzag takes off [m]: n d - sum of s^2 / 4 g.

    A chain may pass any holes by; two of its neighbours that stand m gauge lines apart differ by s along the member
    when m is odd, and not at all when it is even.

    References
    ----------
    V. H. Cochrane's rule, 1922, as in AASHTO LRFD 6.8.3 (from memory).
    """
    taken: list[float] = []
    for line in range(number):
        before = [
            taken[other] - (stagger**2 / (4 * gauge * (line - other)) if (line - other) % 2 and stagger else 0.0)
            for other in range(line)
        ]
        taken.append(diameter + max(before, default=0.0))
    return max(taken)


def taken_out(hole: Hole, pieces: Sequence[Piece]) -> float:
    """Return the area that holes take out of a section [m2]; the thickness is that of the part as found.

    Raises
    ------
    InputError
        A part that nobody can drill, holes wider than the part or deeper than it is thick.
    MissingDataError, UnknownNameError
        Neither part nor thickness was typed; no such piece or part.
    """
    meant = [piece for piece in pieces if hole.piece in {"", piece.name}]
    if not meant:
        known = [piece.name for piece in pieces]
        raise UnknownNameError(
            f'"{hole.piece}" is no piece of the section', place="hole.piece", nearest=nearest_name(hole.piece, known)
        )
    if not hole.part and any(len(piece.elements) > 1 for piece in meant):
        if hole.thickness is None:
            raise MissingDataError("name the part that is holed, or type the thickness", place="hole.part")
        return hole.width * hole.thickness
    holed = [(piece, part, name) for piece in meant for part, name in _holed(hole, piece)]
    if not holed:
        known = sorted({name for piece in meant for part in piece.elements for name in part.names})
        raise UnknownNameError(
            f'"{hole.part}" is no part that can be holed: {", ".join(known)}',
            place="hole.part",
            nearest=nearest_name(hole.part, known),
        )
    return sum(_area(hole, *each) for each in holed)


def _holed(hole: Hole, piece: Piece) -> list[tuple[Element, str]]:
    """Return the parts of a piece that are holed, and the size each is holed through."""
    if not hole.part:
        return [(part, part.part) for part in piece.elements]
    return [(part, name) for part in piece.elements for name in part.names if answers_to(name, hole.part)]


def _area(hole: Hole, piece: Piece, part: Element, name: str) -> float:
    """Return what holes take out of one part; a part wholly gone has nothing to take."""
    if not part.area:
        return 0.0
    place = f"hole in {piece.name}: {name}"
    thickness, width = part.through(name)
    if not width:
        raise InputError("a round bar takes no holes; type the root of its thread", place=place)
    over_all = max(hole.width, hole.diameter + hole.gauge * (hole.number - 1))
    if over_all >= width:
        raise InputError(f"holes {over_all:g} m wide over all do not fit its width, {width:g} m", place=place)
    new = next(each.through(name)[0] for each in piece.shape.elements() if name in each.names)
    if hole.thickness is not None and hole.thickness > new * (1 + 1e-9):
        raise InputError(f"holes through {hole.thickness:g} m are deeper than the part, {new:g} m", place=place)
    return hole.width * (thickness if hole.thickness is None else min(thickness, hole.thickness))
