"""A section of which area and radii are known, from a drawing or a table, and not its shape."""

from __future__ import annotations

import math
from dataclasses import dataclass, field, replace
from typing import TYPE_CHECKING, Final

from movload.bridge.section_properties import Properties
from movload.bridge.section_shape import require_factors
from movload.errors import InputError, MissingDataError, Note

if TYPE_CHECKING:
    from movload.bridge.section_elements import Cut
    from movload.bridge.section_piece import PlateElement

_UNITS: Final = {
    "area": "m2", "net": "m2", "r_x": "m", "r_y": "m", "r_min": "m", "s_x": "m3", "s_y": "m3", "z_x": "m3",
    "z_y": "m3", "torsion": "m4", "warping": "m6",
}  # fmt: skip


@dataclass(frozen=True, slots=True)
class AreaAndRadii:
    """Area and radii as typed; what else is typed is known too, the rest is refused where a rule asks for it.

    Parameters
    ----------
    title
        What the section is called.
    area
        Gross area [m2].
    r_x, r_y
        Radii of gyration [m]: about x (bending in the truss's plane) and about y.
    r_min
        Least radius [m]; None takes the lesser of both.
    net
        Net area at the connection [m2].
    s_x, s_y, z_x, z_y
        Elastic and plastic moduli [m3].
    torsion, warping
        J [m4], Cw [m6].
    shear_offset
        Shear centre from the centroid, x0 and y0 [m].
    sharing, shear_lag, punched
        As in a section of pieces; whether the holes are punched full size.
    left
        Part of the metal that is left [-]: the loss is taken as even, so radii stay and all else shrinks with it
        (J and Cw with its cube, a lower bound).
    """

    title: str
    area: float
    r_x: float
    r_y: float
    r_min: float | None = field(default=None, kw_only=True)
    net: float | None = field(default=None, kw_only=True)
    s_x: float | None = field(default=None, kw_only=True)
    s_y: float | None = field(default=None, kw_only=True)
    z_x: float | None = field(default=None, kw_only=True)
    z_y: float | None = field(default=None, kw_only=True)
    torsion: float | None = field(default=None, kw_only=True)
    warping: float | None = field(default=None, kw_only=True)
    shear_offset: tuple[float, float] | None = field(default=None, kw_only=True)
    sharing: float = field(default=1.0, kw_only=True)
    shear_lag: float = field(default=1.0, kw_only=True)
    punched: bool = field(default=False, kw_only=True)
    left: float = field(default=1.0, kw_only=True)

    def __post_init__(self) -> None:
        """Refuse what no section has."""
        try:
            self._check()
        except InputError as error:
            raise error.at(self.title) from None

    @property
    def properties(self) -> Properties:
        """Properties of what is left, as far as they were typed; the centroid stands at 0, 0."""
        area, i_x, i_y = self.gross_area, self.gross_area * self.r_x**2, self.gross_area * self.r_y**2
        i_min = area * self.r_min**2 if self.r_min is not None else min(i_x, i_y)
        # (I_x - I_min)(I_y - I_min) = I_xy^2; its sign is not known.
        i_xy = math.sqrt((i_x - i_min) * (i_y - i_min))
        return Properties(self.title, area, 0.0, 0.0, i_x, i_y, i_xy, self._extra())

    @property
    def gross_area(self) -> float:
        """Area that is left [m2]."""
        return self.area * self.left

    @property
    def net_area(self) -> float:
        """Net area that is left [m2]; refused where none was typed."""
        if self.net is None:
            raise MissingDataError("its net area was not typed: type net", place=self.title)
        return self.net * self.left

    @property
    def plates(self) -> tuple[PlateElement, ...]:
        """No plates are known; the notes say so."""
        return ()

    @property
    def notes(self) -> tuple[Note, ...]:
        """What a reader of its properties must know."""
        text = "Area and radii as typed: whether its plates are slender is not known and not checked."
        notes = [Note("plates-not-known", self.title, text)]
        if self.left < 1:
            text = "Its loss is taken as even over the section: radii as typed, all else in proportion."
            notes.append(Note("loss-taken-evenly", self.title, text))
        return tuple(notes)

    def with_cut(self, piece: str, cut: Cut) -> AreaAndRadii:
        """Return it with a fraction of its area gone; a part or a thickness cannot be taken from what has no shape.

        Raises
        ------
        InputError
            A piece, a part or an amount in metres was named, or more is gone than was there.
        """
        if piece or cut.part or cut.amount:
            named = piece or cut.part or f"{cut.amount:g} m"
            said = f'only a fraction of the area can be lost of typed area and radii, got "{named}"'
            raise InputError(f"{said}; type its shapes", place=self.title)
        left = self.left - cut.fraction
        if left <= 0:
            raise InputError(f"{1 - left:g} of its area is lost: nothing is left", place=self.title)
        return replace(self, left=left)

    def _extra(self) -> tuple[tuple[str, float | str], ...]:
        """Return what was typed beyond area and radii."""
        left = self.left
        typed = {
            "s_x_top": (self.s_x, left), "s_x_bottom": (self.s_x, left),
            "s_y_left": (self.s_y, left), "s_y_right": (self.s_y, left),
            "z_x": (self.z_x, left), "z_y": (self.z_y, left),
            "torsion": (self.torsion, left**3), "warping": (self.warping, left**3),
            "x_0": (self.shear_offset[0] if self.shear_offset else None, 1.0),
            "y_0": (self.shear_offset[1] if self.shear_offset else None, 1.0),
        }  # fmt: skip
        return tuple((name, value * factor) for name, (value, factor) in typed.items() if value is not None)

    def _check(self) -> None:
        """Check every size."""
        for name, unit in _UNITS.items():
            value = getattr(self, name)
            if value is not None and not (math.isfinite(value) and value > 0):
                raise InputError(f"must be above 0, got {value:g} {unit}", place=name)
        if self.net is not None and self.net > self.area:
            raise InputError(f"the net area is at most the gross, {self.area:g} m2, got {self.net:g} m2", place="net")
        if self.r_min is not None and self.r_min > min(self.r_x, self.r_y):
            least = min(self.r_x, self.r_y)
            raise InputError(f"is at most r_x and r_y, {least:g} m, got {self.r_min:g} m", place="r_min")
        for axis in ("x", "y"):
            elastic, plastic = getattr(self, f"s_{axis}"), getattr(self, f"z_{axis}")
            if elastic is not None and plastic is not None and plastic < elastic:
                said = f"a plastic modulus is at least the elastic one, {elastic:g} m3, got {plastic:g} m3"
                raise InputError(said, place=f"z_{axis}")
        if self.shear_offset is not None and not all(map(math.isfinite, self.shear_offset)):
            raise InputError(f"must be finite, got {self.shear_offset} m", place="shear_offset")
        if not 0 < self.left <= 1:
            raise InputError(f"the part left is above 0 and at most 1, got {self.left:g}", place="left")
        require_factors(self.sharing, self.shear_lag)
