"""The properties of a section: what any rule may ask of it, and why some cannot be given."""

from __future__ import annotations

import math
from dataclasses import dataclass
from typing import TYPE_CHECKING, TypeAlias

from movload.bridge.section_plastic import plastic_modulus
from movload.bridge.section_regions import combined
from movload.errors import InputError, MissingDataError

if TYPE_CHECKING:
    from collections.abc import Mapping, Sequence

    from movload.bridge.section_regions import Moments, Region

Extra: TypeAlias = "Mapping[str, float | str]"
"""Properties that not every section has, by name: the value, or why it cannot be given."""


@dataclass(frozen=True, slots=True)
class Properties:
    """Properties about the axes through the centroid: x across the bridge, y up in the truss's plane.

    Attributes
    ----------
    title
        Of the section.
    area
        Gross [m2], without the thread's root.
    x, y
        Centroid in the section's axes [m].
    i_x, i_y, i_xy
        Moments of inertia [m4]: i_x is the integral of y^2 (bending in the truss's plane), i_xy that of x y.
    extra
        What only some sections have (see the properties below); each raises where it cannot be given.
    """

    title: str
    area: float
    x: float
    y: float
    i_x: float
    i_y: float
    i_xy: float
    extra: tuple[tuple[str, float | str], ...] = ()

    @property
    def r_x(self) -> float:
        """Radius of gyration about x, sqrt(I_x / A) [m]."""
        return math.sqrt(self.i_x / self.area)

    @property
    def r_y(self) -> float:
        """Radius of gyration about y [m]."""
        return math.sqrt(self.i_y / self.area)

    @property
    def i_max(self) -> float:
        """Greater principal moment of inertia [m4]."""
        return (self.i_x + self.i_y) / 2 + math.hypot((self.i_x - self.i_y) / 2, self.i_xy)

    @property
    def i_min(self) -> float:
        """Least principal moment of inertia [m4]."""
        return (self.i_x * self.i_y - self.i_xy**2) / self.i_max

    @property
    def r_min(self) -> float:
        """Least radius of gyration [m]."""
        return math.sqrt(self.i_min / self.area)

    @property
    def principal_turn(self) -> float:
        """Turn of the axis of i_max from x [degrees, anticlockwise], above -90 and at most 90."""
        return math.degrees(math.atan2(-2 * self.i_xy, self.i_x - self.i_y)) / 2

    @property
    def s_x_top(self) -> float:
        """Elastic modulus about x to the top, I_x / distance [m3]."""
        return self._asked("s_x_top")

    @property
    def s_x_bottom(self) -> float:
        """Elastic modulus about x to the bottom [m3]."""
        return self._asked("s_x_bottom")

    @property
    def s_y_left(self) -> float:
        """Elastic modulus about y to the left [m3]."""
        return self._asked("s_y_left")

    @property
    def s_y_right(self) -> float:
        """Elastic modulus about y to the right [m3]."""
        return self._asked("s_y_right")

    @property
    def s_x(self) -> float:
        """Lesser elastic modulus about x [m3]."""
        return min(self.s_x_top, self.s_x_bottom)

    @property
    def s_y(self) -> float:
        """Lesser elastic modulus about y [m3]."""
        return min(self.s_y_left, self.s_y_right)

    @property
    def z_x(self) -> float:
        """Plastic modulus about the axis parallel to x that halves the area [m3]."""
        return self._asked("z_x")

    @property
    def z_y(self) -> float:
        """Plastic modulus about the axis parallel to y that halves the area [m3]."""
        return self._asked("z_y")

    @property
    def torsion(self) -> float:
        """Torsion constant J [m4]; the sum over the pieces of a built-up section."""
        return self._asked("torsion")

    @property
    def warping(self) -> float:
        """Warping constant Cw [m6]; 0 for bars and tubes, where it is left out (safe)."""
        return self._asked("warping")

    @property
    def shear_offset(self) -> tuple[float, float]:
        """Shear centre from the centroid, x0 and y0 [m]."""
        return self._asked("x_0"), self._asked("y_0")

    @property
    def shear_centre(self) -> tuple[float, float]:
        """Shear centre in the section's axes [m]."""
        x, y = self.shear_offset
        return self.x + x, self.y + y

    def has(self, name: str) -> bool:
        """Whether a property can be given: "s_x_top", "z_x", "torsion", "warping", "x_0" ..."""
        return isinstance(dict(self.extra).get(name, ""), float)

    def _asked(self, name: str) -> float:
        """Return a property, or say why it cannot be given."""
        value = dict(self.extra).get(name, f"{name} was not typed")
        if isinstance(value, str):
            raise MissingDataError(value, place=self.title)
        return value


def properties_of(title: str, regions: Sequence[Region], extra: Extra) -> Properties:
    """Return the properties of regions together, with what ``extra`` adds to them."""
    if not regions:
        raise InputError("no metal is left of it, 0 m2", place=title)
    whole = combined(region.moments() for region in regions)
    known = {**_elastic(whole, regions), **_plastic(regions), **extra}
    return Properties(title, *whole, tuple(known.items()))


def _elastic(whole: Moments, regions: Sequence[Region]) -> dict[str, float]:
    """Return the elastic moduli."""
    lefts, rights, bottoms, tops = zip(*(region.extent for region in regions), strict=True)
    return {
        "s_x_top": whole.i_x / (max(tops) - whole.y),
        "s_x_bottom": whole.i_x / (whole.y - min(bottoms)),
        "s_y_left": whole.i_y / (whole.x - min(lefts)),
        "s_y_right": whole.i_y / (max(rights) - whole.x),
    }


def _plastic(regions: Sequence[Region]) -> dict[str, float]:
    """Return the plastic moduli."""
    return {"z_x": plastic_modulus(regions), "z_y": plastic_modulus([region.swapped() for region in regions])}
