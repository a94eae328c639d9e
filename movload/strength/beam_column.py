"""Bars that buckle, and bars that are bent as well: elastic loads, amplified moments, axial force with bending.

For end posts, chords loaded between joints and bars found bowed or pulled off their axis. Axes x (across the bridge)
and y (up) must be principal: an unsymmetrical angle goes by its own two. Not covered: moments of stiff joints unless
typed, twist of a bent bar, the lacing bars' own strength.

References
----------
AASHTO LRFD Bridge Design Specifications, 7th and 8th editions, 4.5.3.2.2b, 6.8.2.3, 6.9.2.2, 6.9.4.1, 6.9.4.3 (from
memory). AASHTO Standard Specifications, 17th edition, 10.36 and 10.54.2 (from memory).
S. P. Timoshenko, J. M. Gere, Theory of Elastic Stability, 2nd edition: bow and eccentricity 1.3, 1.11-1.12, laced
struts 2.18 (from memory).
"""

from __future__ import annotations

import math
from dataclasses import dataclass
from typing import TYPE_CHECKING, Final, Literal

from movload.errors import InputError, MissingDataError
from movload.strength.strength import Step, Strength
from movload.strength.warnings import require_fraction, require_not_negative, require_positive

if TYPE_CHECKING:
    from collections.abc import Callable, Sequence

TITLE: Final = "AASHTO LRFD"
STABILITY: Final = "Timoshenko and Gere"
_BILINEAR: Final = "P/(2 Pr) + sum M/Mr = 1, P/Pr of 0.2 or more: P/Pr + 8/9 sum M/Mr = 1 (6.9.2.2-1, -2)"
_PART: Final = 0.75  # greatest slenderness of one part over the whole bar's, AASHTO LRFD 6.9.4.3.1


@dataclass(frozen=True, slots=True, kw_only=True)
class Torsion:
    """What twist asks for: K L of twist [m], J [m4], Cw [m6], shear centre from the centroid x0, y0 [m].

    ``polar`` is r0^2 [m2] where the column's radii are stand-ins; None takes x0^2 + y0^2 + rx^2 + ry^2.
    """

    kl_z: float
    j: float
    c_w: float
    x0: float = 0.0
    y0: float = 0.0
    polar: float | None = None

    def __post_init__(self) -> None:
        """Refuse what no bar has; an angle or a tee does not warp."""
        require_positive(kl_z=self.kl_z, j=self.j, polar=self.polar)
        require_not_negative(c_w=self.c_w)


@dataclass(frozen=True, slots=True, kw_only=True)
class Connectors:
    """Battens or stitches every ``spacing`` between parts of least ``radius``, ``apart`` between centroids [m].

    They weaken buckling about ``axis``, across which the parts stand.
    """

    axis: Literal["x", "y"]
    spacing: float
    radius: float
    apart: float

    def __post_init__(self) -> None:
        """Refuse impossible dimensions."""
        require_positive(spacing=self.spacing, radius=self.radius, apart=self.apart)


@dataclass(frozen=True, slots=True, kw_only=True)
class Lacing:
    """Lacing of a shear ``stiffness`` [N] (force per radian of shear), which weakens buckling about ``axis``."""

    axis: Literal["x", "y"]
    stiffness: float

    def __post_init__(self) -> None:
        """Refuse what lacing cannot be."""
        require_positive(stiffness=self.stiffness)


@dataclass(frozen=True, slots=True, kw_only=True)
class Column:
    """A bar in compression.

    Attributes
    ----------
    area, gross
        Gross area at mid length, which buckles, and the least one anywhere, which squashes [m2].
    kl_x, kl_y, r_x, r_y
        Effective lengths K L and radii of gyration about x and y [m].
    fy, modulus
        [Pa].
    torsion
        None states that twist cannot govern: a closed bar, or a doubly symmetric I as free to bend as to twist.
    built_up
        How its parts are held together where that is not solid.
    slender
        Q, above 0, to 1 [-]; 1 for stocky plates, else ``slender_reduction`` of movload.strength.aashto_lrfd.
    """

    area: float
    gross: float
    kl_x: float
    kl_y: float
    r_x: float
    r_y: float
    fy: float
    modulus: float
    torsion: Torsion | None
    built_up: Connectors | Lacing | None = None
    slender: float = 1.0

    def __post_init__(self) -> None:
        """Refuse what no bar can be."""
        names = ("area", "gross", "kl_x", "kl_y", "r_x", "r_y", "fy", "modulus")
        require_positive(**{name: getattr(self, name) for name in names})
        require_fraction("slender", self.slender)


def flexural_loads(column: Column) -> tuple[float, float, tuple[Step, ...]]:
    """Return the elastic loads pi^2 E Ag / (K l / r)^2 [N] of buckling about x and about y, and their steps."""
    loads, steps = [], []
    for axis in ("x", "y"):
        slenderness, found = _slenderness(column, axis)
        loads.append(math.pi**2 * column.modulus * column.area / slenderness**2)
        steps += [*found, Step(f"Pe{axis}", "pi^2 E Ag / (K l / r)^2 (6.9.4.1.2-1)", loads[-1], "N", TITLE)]
    return loads[0], loads[1], tuple(steps)


def _slenderness(column: Column, axis: str) -> tuple[float, tuple[Step, ...]]:
    """Return K l / r about an axis, modified where lacing or connectors give way in shear, and its steps."""
    plain = column.kl_x / column.r_x if axis == "x" else column.kl_y / column.r_y
    first = Step(f"(Kl/r){axis}", "K l / r", plain, "-", TITLE)
    held = column.built_up
    if held is None or held.axis != axis:
        return plain, (first,)
    if isinstance(held, Lacing):
        solid = math.pi**2 * column.modulus * column.area / plain**2
        modified = plain * math.sqrt(1.0 + solid / held.stiffness)
        return modified, (first, Step(f"(Kl/r)m{axis}", "K l / r sqrt(1 + Pe / Sv)", modified, "-", STABILITY))
    own, whole = held.spacing / held.radius, max(column.kl_x / column.r_x, column.kl_y / column.r_y)
    if own > _PART * whole:
        raise InputError(
            f"a / ri of one part may be 3/4 of the bar's K l / r at most, {_PART * whole:.1f} ({TITLE} 6.9.4.3.1), "
            f"got {own:.1f}", place="spacing")  # fmt: skip
    apart = held.apart / (2.0 * held.radius)
    modified = math.sqrt(plain**2 + 0.82 * apart**2 / (1.0 + apart**2) * own**2)
    said = "sqrt((K l / r)^2 + 0.82 alpha^2 / (1 + alpha^2) (a / rib)^2) (6.9.4.3.1-1)"
    return modified, (first, Step(f"(Kl/r)m{axis}", said, modified, "-", TITLE))


@dataclass(frozen=True, slots=True, kw_only=True)
class Bending:
    """What bends an axially loaded bar in one plane, and what it carries of that.

    Attributes
    ----------
    strength
        In bending alone [N m], phi on it.
    moment
        As typed at the level's margins, beside the axial force and not growing with it [N m].
    eccentricity, bow
        Of the axial force off the axis, alike at both ends; of the bar at its middle [m]. Tension straightens a bow.
    elastic
        Load of buckling in this plane [N], with the standard's margin if it has one; infinite in tension.
    evenness
        Cm [-], 1 where a load stands between the joints.
    """

    strength: Strength
    moment: float = 0.0
    eccentricity: float = 0.0
    bow: float = 0.0
    elastic: float
    evenness: float = 1.0

    def __post_init__(self) -> None:
        """Refuse what bends no bar."""
        require_positive(strength=self.strength.value, evenness=self.evenness)
        require_not_negative(moment=self.moment, eccentricity=self.eccentricity, bow=self.bow)
        if not self.elastic > 0:
            raise InputError(f"must be above 0, got {self.elastic:g} N", place="elastic")

    def under(self, load: float) -> float:
        """Return the amplified moment [N m] beside an axial force, infinite from the elastic load on.

        M max(1, Cm / (1 - P/Pe)) + P bow / (1 - P/Pe) + P e sec(pi/2 sqrt(P/Pe)).
        """
        if not (self.moment or load * (self.eccentricity + self.bow)):
            return 0.0
        ratio = load / self.elastic
        if ratio >= 1.0:
            return math.inf
        typed = self.moment * max(1.0, self.evenness / (1.0 - ratio))
        bowed = load * self.bow / (1.0 - ratio)
        return typed + bowed + load * self.eccentricity / math.cos(0.5 * math.pi * math.sqrt(ratio))


def with_bending(axial: Strength, planes: Sequence[Bending], *, linear: bool = False) -> Strength:
    """Return the greatest axial force [N] that a bent bar carries, 0 where bending alone is too much.

    P/(2 Pr) + sum M/Mr = 1 below P/Pr = 0.2 and P/Pr + 8/9 sum M/Mr = 1 above, whichever is greater at any P; or, where
    ``linear``, P/Pr + sum M/Mr = 1. A moment typed at the level's margins makes it exact at RF = 1, and the verdict
    right; a rating above 1 takes that moment as not growing.
    """
    require_positive(axial=axial.value)
    if not planes:
        raise MissingDataError("what bends the bar is needed", place="planes")
    said, title = ("P/Pr + sum M/Mr = 1 (10.36, 10.54.2)", "MBE 6B") if linear else (_BILINEAR, TITLE)

    def used(load: float) -> float:
        bent, pressed = sum(plane.under(load) / plane.strength.value for plane in planes), load / axial.value
        return pressed + bent if linear else max(pressed / 2.0 + bent, pressed + 8.0 / 9.0 * bent)

    value = _root(used, axial.value)
    steps = [*axial.steps]
    for number, plane in enumerate(planes, 1):
        moment = plane.under(value)
        steps += [
            *plane.strength.steps,
            Step(f"M{number}", "M Cm/(1 - P/Pe) + P bow/(1 - P/Pe) + P e sec(pi/2 sqrt(P/Pe)) (4.5.3.2.2b)",
                 moment, "N m", STABILITY),
            Step(f"M{number}/Mr", "part used in bending", moment / plane.strength.value, "-", title),
        ]  # fmt: skip
    governs = "axial force with bending" if value > 0 else "bending alone is too much"
    return Strength(value, (*steps, Step("P bent", f"greatest P with {said}; {governs}", value, "N", title)))


def _root(used: Callable[[float], float], high: float) -> float:
    """Return the load up to ``high`` that uses up a strength, by halving; 0 where bending alone does."""
    low = 0.0
    if used(high) <= 1.0 or used(low) >= 1.0:
        return high if used(high) <= 1.0 else low
    while low < (middle := 0.5 * (low + high)) < high:
        low, high = (middle, high) if used(middle) <= 1.0 else (low, middle)
    return low
