"""A member's cross-section as measured: pieces in their places, holes at its connection, how its bars share.

Axes: x to the right across the bridge, y up in the truss's plane. Fillets, roundings and tapers of rolled shapes are
left out. `movload.bridge.section_typed` holds a section of which only area and radii are known.
"""

from __future__ import annotations

import math
from dataclasses import dataclass, field, replace
from functools import lru_cache
from typing import TYPE_CHECKING

from movload.bridge.section_builtup import torsion_of
from movload.bridge.section_holes import taken_out
from movload.bridge.section_overlap import refuse_overlaps
from movload.bridge.section_properties import Properties, properties_of
from movload.bridge.section_shape import require_factors
from movload.errors import InputError, MissingDataError, Note, UnknownNameError, nearest_name

if TYPE_CHECKING:
    from movload.bridge.section_elements import Cut
    from movload.bridge.section_holes import Hole
    from movload.bridge.section_piece import Piece, PlateElement
    from movload.bridge.section_regions import Point


@dataclass(frozen=True, slots=True)
class Section:
    """A cross-section of pieces that act together.

    Parameters
    ----------
    title
        What the section is called.
    pieces
        At least one; those without a name are numbered ("channel 2").
    holes
        Of the cross-section through the connection.
    sharing
        Stress in the worst of several bars over their mean [-], 1 or more; it divides the strength.
    shear_lag
        U [-], above 0 and at most 1: the part of the net section that works at the connection.
    torsion, warping, shear_centre
        J [m4], Cw [m6] and the shear centre in the section's axes [m] as typed, where no closed formula covers them or
        a better value is known. With metal gone, J and Cw are taken times the cube of the least part left of any part's
        thickness, which is a lower bound.

    Raises
    ------
    InputError
        Pieces in one place, two of one name, holes wider than what they are in, a factor out of its range.
    """

    title: str
    pieces: tuple[Piece, ...]
    holes: tuple[Hole, ...] = field(default=(), kw_only=True)
    sharing: float = field(default=1.0, kw_only=True)
    shear_lag: float = field(default=1.0, kw_only=True)
    torsion: float | None = field(default=None, kw_only=True)
    warping: float | None = field(default=None, kw_only=True)
    shear_centre: Point | None = field(default=None, kw_only=True)

    def __post_init__(self) -> None:
        """Name the pieces and check the whole."""
        try:
            object.__setattr__(self, "pieces", _named(tuple(self.pieces)))
            require_factors(self.sharing, self.shear_lag)
            _require_typed(self)
            refuse_overlaps(self.pieces)
            self._net()
        except InputError as error:
            raise error.at(self.title) from None

    @property
    def properties(self) -> Properties:
        """Properties along its length, of what is left of it."""
        return _properties(self)

    @property
    def gross_area(self) -> float:
        """Least area that yields [m2]: whole pieces, the root of a thread where it is the smaller."""
        return sum(piece.gross_area for piece in self.pieces)

    @property
    def net_area(self) -> float:
        """Net area at its connection [m2]: heads beside their pins, roots of threads, holes taken out.

        Raises
        ------
        MissingDataError
            The head of an eyebar was not typed.
        """
        for piece in self.pieces:
            missing = piece.shape.needs_for_net()
            if missing:
                said = f"its net section needs {missing} of the {piece.shape.kind}"
                raise MissingDataError(said, place=f"{self.title}: {piece.name}")
        return self._net()

    @property
    def punched(self) -> bool:
        """Whether any hole was punched full size."""
        return any(hole.punched for hole in self.holes)

    @property
    def plates(self) -> tuple[PlateElement, ...]:
        """Parts that may buckle as plates, as thick as they are found."""
        return tuple(plate for piece in self.pieces for plate in piece.plates)

    @property
    def notes(self) -> tuple[Note, ...]:
        """What a reader of its properties must know."""
        rolled = [piece for piece in self.pieces if piece.shape.form in {"angle", "flanged", "tube"}]
        text = "Fillets, roundings and tapers of rolled shapes are left out of its properties."
        return (Note("fillets-left-out", self.title, text),) if rolled else ()

    def with_cut(self, piece: str, cut: Cut) -> Section:
        """Return it with metal gone from a piece; "" takes every piece that has the cut's part.

        Raises
        ------
        UnknownNameError
            No such piece or part.
        InputError
            More is gone than was there.
        """
        meant = [each for each in self.pieces if piece in {"", each.name}]
        if not meant:
            known = [each.name for each in self.pieces]
            said = f'"{piece}" is no piece of the section: ' + ", ".join(f'"{name}"' for name in known)
            raise UnknownNameError(said, place=self.title, nearest=nearest_name(piece, known))
        cut_off = [each.name for each in meant if each.has_part(cut.part)] or [meant[0].name]
        try:
            pieces = tuple(each.with_cut(cut) if each.name in cut_off else each for each in self.pieces)
        except InputError as error:
            raise error.at(self.title) from None
        return replace(self, pieces=pieces)

    def _net(self) -> float:
        """Return the net area of what was typed [m2]."""
        net = sum(piece.net_area for piece in self.pieces)
        if min(net, self.gross_area) <= 0:
            raise InputError("no metal is left, 0 m2", place="pieces")
        out = sum(taken_out(hole, self.pieces) for hole in self.holes)
        if out >= net:
            raise InputError(f"its holes take out {out:g} m2 and only {net:g} m2 are there", place="holes")
        return net - out


@lru_cache(maxsize=1024)  # a section is asked many times: by level, by part, by vehicle
def _properties(section: Section) -> Properties:
    """Return the properties of what is left of a section."""
    regions = [region for piece in section.pieces for region in piece.regions]
    whole = properties_of(section.title, regions, torsion_of(section.pieces))
    typed: dict[str, float | str] = {}
    left = min(part.area / new.area for piece in section.pieces for part, new in piece.parts_and_new) ** 3
    if section.torsion is not None:
        typed["torsion"] = section.torsion * left
    if section.warping is not None:
        typed["warping"] = section.warping * left
    if section.shear_centre is not None:
        typed["x_0"] = section.shear_centre[0] - whole.x
        typed["y_0"] = section.shear_centre[1] - whole.y
    return replace(whole, extra=tuple((dict(whole.extra) | typed).items()))


def _named(pieces: tuple[Piece, ...]) -> tuple[Piece, ...]:
    """Return pieces with a name each: kind and number where there are several, the kind alone for one."""
    if not pieces:
        raise InputError("a section has at least 1 piece, got 0", place="pieces")
    counts: dict[str, int] = {}
    named = []
    for piece in pieces:
        kind = piece.shape.kind
        counts[kind] = counts.get(kind, 0) + 1
        alone = sum(each.shape.kind == kind for each in pieces) == 1
        named.append(piece if piece.name else replace(piece, name=kind if alone else f"{kind} {counts[kind]}"))
    for name in (piece.name for piece in named):
        if sum(piece.name == name for piece in named) > 1:
            raise InputError(f'two pieces are named "{name}"', place="pieces")
    return tuple(named)


def _require_typed(section: Section) -> None:
    """Refuse twisting properties that no section has."""
    for name, value, unit in (("torsion", section.torsion, "m4"), ("warping", section.warping, "m6")):
        if value is not None and not (math.isfinite(value) and value >= 0):
            raise InputError(f"must be 0 or more, got {value:g} {unit}", place=name)
    if section.shear_centre is not None and not all(map(math.isfinite, section.shear_centre)):
        raise InputError(f"must be finite, got {section.shear_centre} m", place="shear_centre")
