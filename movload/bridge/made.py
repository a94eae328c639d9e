"""What a part is made of and how it is held: all that a strength rule asks of it beside its section and material."""

from __future__ import annotations

import math
from dataclasses import dataclass, field
from typing import TYPE_CHECKING, Final, Literal

from movload.errors import InputError, UnknownNameError, nearest_name

if TYPE_CHECKING:
    from movload.bridge.loss import AsFound
    from movload.bridge.material import Material

AXES: Final = ("x", "y")
_LONGEST: Final = 200.0  # m; no bar is free over more: a length typed in another unit is caught
_GREATEST_K: Final = 10.0  # a bar that leans on its neighbours; 85 typed for 0.85 is caught


@dataclass(frozen=True, slots=True, kw_only=True)
class Held:
    """How a compressed bar is held against buckling.

    Parameters
    ----------
    unbraced_x, unbraced_y
        Free length [m] for bending about x (in the truss's plane) and about y (out of it).
    k_x, k_y
        Effective length factors K [-].
    unbraced_z, k_z
        Free length and K of twist; None takes the longer of both free lengths, with K = 1.

    Raises
    ------
    InputError
        A length or a factor that is not above 0, or beyond what there is.
    """

    unbraced_x: float
    unbraced_y: float
    k_x: float
    k_y: float
    unbraced_z: float | None = None
    k_z: float = 1.0

    def __post_init__(self) -> None:
        """Check lengths and factors."""
        for axis, length in (("x", self.unbraced_x), ("y", self.unbraced_y), ("z", self.unbraced_z)):
            if length is not None:
                _require_within(f"unbraced_{axis}", length, _LONGEST, " m")
        for axis, factor in (("x", self.k_x), ("y", self.k_y), ("z", self.k_z)):
            _require_within(f"k_{axis}", factor, _GREATEST_K)

    @property
    def kl_x(self) -> float:
        """K L about x [m]."""
        return self.k_x * self.unbraced_x

    @property
    def kl_y(self) -> float:
        """K L about y [m]."""
        return self.k_y * self.unbraced_y

    @property
    def kl_z(self) -> float:
        """K L of twist [m]."""
        free = max(self.unbraced_x, self.unbraced_y) if self.unbraced_z is None else self.unbraced_z
        return self.k_z * free


@dataclass(frozen=True, slots=True, kw_only=True)
class Joined:
    """How the parts of a bar that is not solid are held together: by battens or stitches, or by lacing.

    Parameters
    ----------
    axis
        About which buckling is weakened: the one across which the parts stand.
    spacing
        Between battens or stitches, or the pitch of one lacing bar, along the bar [m].
    apart
        Between the parts' centroids; of lacing, between its lines of fasteners [m].
    lacing_area
        Of one lacing bar [m2]; 0 where battens or stitches hold the parts.
    planes
        Lacing bars in one cross-section: 2 where both faces are laced singly, 4 doubly.
    radius
        Least radius of gyration of one part [m]; battens and stitches need it.
    """

    axis: Literal["x", "y"]
    spacing: float
    apart: float
    lacing_area: float = 0.0
    planes: int = 0
    radius: float = 0.0

    def __post_init__(self) -> None:
        """Refuse an axis that is none, and half of one thing and half of the other."""
        if self.axis not in AXES:
            near = nearest_name(self.axis, AXES)
            raise UnknownNameError(f'"{self.axis}" is neither x nor y', place="joined.axis", nearest=near)
        _require_within("joined.spacing", self.spacing, _LONGEST, " m")
        _require_within("joined.apart", self.apart, _LONGEST, " m")
        halves = self.lacing_area > 0, self.planes > 0
        if halves[0] != halves[1] or halves[0] == (self.radius > 0):
            raise InputError(
                "lacing says lacing_area and planes, battens and stitches say the radius of one part, got "
                f"{self.lacing_area:g} m2, {self.planes} and {self.radius:g} m", place="joined",
            )  # fmt: skip

    @property
    def laced(self) -> bool:
        """Whether lacing bars hold it together."""
        return self.lacing_area > 0


@dataclass(frozen=True, slots=True, kw_only=True)
class Bent:
    """What bends a bar beside its axial force, about one axis.

    Parameters
    ----------
    axis
        "x" in the truss's plane, "y" out of it.
    moment
        As typed, with whatever margins it needs [N m]: nothing is put on it.
    eccentricity, bow
        Of the axial force off the axis, of the bar's middle off its line [m].
    evenness
        Cm [-]; 1 where a load stands between the joints.
    """

    axis: Literal["x", "y"]
    moment: float = 0.0
    eccentricity: float = 0.0
    bow: float = 0.0
    evenness: float = 1.0

    def __post_init__(self) -> None:
        """Refuse what bends nothing."""
        if self.axis not in AXES:
            near = nearest_name(self.axis, AXES)
            raise UnknownNameError(f'"{self.axis}" is neither x nor y', place="bent.axis", nearest=near)
        for name in ("moment", "eccentricity", "bow"):
            value = getattr(self, name)
            if not (math.isfinite(value) and value >= 0):
                unit = "N m" if name == "moment" else "m"
                raise InputError(f"must be 0 or more, got {value:g} {unit}", place=f"bent.{name}")
        if not (self.moment or self.eccentricity or self.bow):
            raise InputError("nothing bends it: type moment, eccentricity or bow", place="bent")
        _require_within("bent.evenness", self.evenness, 1.0)


@dataclass(frozen=True, slots=True, kw_only=True)
class Sideways:
    """How a beam of the floor is held against buckling sideways, and what else its rules ask.

    Parameters
    ----------
    unbraced
        Length between points where the edge in compression is held [m]; None states that it is held all along.
    c_b
        For the moment's shape, 1 (even) to 2.3 [-].
    stiffeners
        Distance of stiffeners along a web [m]; None where there are none.
    lever
        C2 zg of EN 1993-1-1 [m]: how far above the shear centre the load pushes; None where nobody has typed it.
    """

    unbraced: float | None
    c_b: float = 1.0
    stiffeners: float | None = None
    lever: float | None = None

    def __post_init__(self) -> None:
        """Check the lengths."""
        for name in ("unbraced", "stiffeners"):
            value = getattr(self, name)
            if value is not None:
                _require_within(name, value, _LONGEST, " m")
        if not 1.0 <= self.c_b <= 2.3:
            raise InputError(f"Cb is 1 to 2.3, got {self.c_b:g}", place="c_b")
        if self.lever is not None and not (math.isfinite(self.lever) and self.lever >= 0):
            raise InputError(f"must be 0 or more, got {self.lever:g} m", place="lever")


@dataclass(frozen=True, slots=True, kw_only=True)
class Made:
    """What a part is made of and how it is held.

    Parameters
    ----------
    section
        Its cross-section as new, with what is gone.
    material
        What it is of.
    held
        Against buckling as a bar; None while nobody has typed it.
    joined
        How the parts of a bar that is not solid are held together; None where it is solid.
    bent
        What bends it beside its axial force, at most once about each axis.
    sideways
        How a beam is held; None while nobody has typed it.
    curves
        Buckling curves of EN 1993-1-1 about x and y, as typed; () takes them from the shape.
    durations
        Of the loads on a timber ("two months"), the permanent one aside; () while nobody has typed them.
    treated
        Whether a timber is treated under pressure; None while nobody has said.
    place
        Where in a file it was typed; "" when it was not.
    """

    section: AsFound
    material: Material
    held: Held | None = None
    joined: Joined | None = None
    bent: tuple[Bent, ...] = ()
    sideways: Sideways | None = None
    curves: tuple[str, ...] = ()
    durations: tuple[str, ...] = ()
    treated: bool | None = None
    place: str = field(default="", kw_only=True)

    def __post_init__(self) -> None:
        """Refuse curves that are not one about each axis, and an axis bent twice."""
        if len(self.curves) not in {0, 2}:
            raise InputError(f"one buckling curve about x and one about y, got {len(self.curves)}", place="curves")
        axes = [one.axis for one in self.bent]
        if len(set(axes)) < len(axes):
            raise InputError("what bends it about one axis is given twice", place="bent")


def _require_within(place: str, value: float, most: float, unit: str = "") -> None:
    """Refuse a value that is not above 0 and at most ``most``."""
    if not (math.isfinite(value) and 0 < value <= most):
        raise InputError(f"must be above 0 and at most {most:g}{unit}, got {value:g}{unit}", place=place)
