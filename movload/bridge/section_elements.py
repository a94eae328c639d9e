"""The rectangles and rounds that a shape is made of, each with a name for what can be measured, and metal taken off.

Metal can only be taken off: what is left always lies within what was there. So area, moments of inertia and plastic
moduli never grow with a loss, whatever the shape.
"""

from __future__ import annotations

import math
from dataclasses import dataclass, field, replace
from typing import TYPE_CHECKING, Final, Literal, TypeAlias

from movload.errors import InputError

if TYPE_CHECKING:
    from collections.abc import Sequence

_ROUND_OFF: Final = 1e-9  # of a size: a typed loss of the whole thickness is no loss beyond it


@dataclass(frozen=True, slots=True)
class Cut:
    """Metal gone off one part of a piece.

    Parameters
    ----------
    part
        A part's name ("web"), the last word of several ("flange": both flanges), or "" for every part.
    amount
        Off the part's thickness or size [m], both faces together.
    fraction
        Of the part's area as new [-].
    """

    part: str = ""
    amount: float = field(default=0.0, kw_only=True)
    fraction: float = field(default=0.0, kw_only=True)


def answers_to(part: str, name: str) -> bool:
    """Whether a part is meant by a name: its own, or its last word ("flange" means both flanges)."""
    return part == name or part.endswith(f" {name}")


@dataclass(frozen=True, slots=True)
class Rect:
    """A rectangle in its shape's own axes [m].

    Parameters
    ----------
    part
        What its thickness is called.
    left, right, bottom, top
        Its edges.
    thin
        The direction of its thickness.
    face
        Which face loses metal: -1 the left or bottom one, 1 the right or top one, 0 both alike.
    across
        What its other size is called, where that can be lost ("" where not); it is lost at both edges alike.
    all_round
        Whether a loss of no named part takes off both sizes (timber) or the thickness alone.
    """

    part: str
    left: float
    right: float
    bottom: float
    top: float
    thin: Literal["x", "y"] = field(kw_only=True)
    face: int = field(default=0, kw_only=True)
    across: str = field(default="", kw_only=True)
    all_round: bool = field(default=False, kw_only=True)

    @property
    def names(self) -> tuple[str, ...]:
        """What of it can be lost or holed."""
        return (self.part, self.across) if self.across else (self.part,)

    @property
    def sizes(self) -> tuple[float, float]:
        """Thickness and the other size [m]."""
        width, height = self.right - self.left, self.top - self.bottom
        return (width, height) if self.thin == "x" else (height, width)

    @property
    def thickness(self) -> float:
        """Size in the thin direction [m]."""
        return self.sizes[0]

    @property
    def area(self) -> float:
        """Area [m2]."""
        return self.sizes[0] * self.sizes[1]

    @property
    def middle(self) -> tuple[float, float]:
        """Its centre [m]."""
        return (self.left + self.right) / 2, (self.bottom + self.top) / 2

    def through(self, name: str) -> tuple[float, float]:
        """Return what a hole through the named size goes through, and the width it is taken out of [m]."""
        thickness, other = self.sizes
        return (other, thickness) if name and name == self.across else (thickness, other)

    def lessened(self, cuts: Sequence[Cut]) -> Rect:
        """Return what is left.

        Raises
        ------
        InputError
            More is lost than was there.
        """
        thickness, other = self.sizes
        power = 0.5 if self.all_round else 1.0
        thin = _left(self.part, thickness, cuts, power=power)
        wide = _left(self.across, other, cuts, power=power, named_only=not self.all_round) if self.across else other
        if (thin, wide) == (thickness, other):
            return self
        along_x, along_y = (self.face, 0) if self.thin == "x" else (0, self.face)
        width, height = (thin, wide) if self.thin == "x" else (wide, thin)
        left, right = _edges(self.left, self.right, width, along_x)
        bottom, top = _edges(self.bottom, self.top, height, along_y)
        return replace(self, left=left, right=right, bottom=bottom, top=top)


@dataclass(frozen=True, slots=True)
class Round:
    """A solid or hollow round about its shape's own centre [m]; metal is lost at its outside."""

    part: str
    outer: float
    inner: float = 0.0

    @property
    def names(self) -> tuple[str, ...]:
        """What of it can be lost."""
        return (self.part,)

    @property
    def thickness(self) -> float:
        """Wall of a hollow one, diameter of a solid one [m]."""
        return self.outer - self.inner if self.inner else 2 * self.outer

    @property
    def area(self) -> float:
        """Area [m2]."""
        return math.pi * (self.outer**2 - self.inner**2)

    def through(self, _name: str) -> tuple[float, float]:
        """Return its thickness and the length round its middle [m]; a solid one has no width to drill."""
        return self.thickness, math.pi * (self.outer + self.inner) if self.inner else 0.0

    def lessened(self, cuts: Sequence[Cut]) -> Round:
        """Return what is left; an amount is off the wall of a hollow one, off the diameter of a solid one."""
        of_part, everywhere = _named(self.part, cuts), _everywhere(cuts)
        amount, fraction = of_part[0] + everywhere[0], of_part[1] + everywhere[1]
        if not (amount or fraction):
            return self
        radius = math.sqrt(self.inner**2 + max(0.0, 1.0 - fraction) * (self.outer**2 - self.inner**2))
        outer = radius - (amount if self.inner else amount / 2)
        if fraction > 1.0 + _ROUND_OFF or outer - self.inner < -_ROUND_OFF * self.outer:
            said = f"losses of {amount:g} m and {fraction:g} of the area together are more than the metal there"
            raise InputError(f"{said}, {self.thickness:g} m", place=self.part)
        return replace(self, outer=max(outer, self.inner))


Element: TypeAlias = Rect | Round


def _named(name: str, cuts: Sequence[Cut]) -> tuple[float, float]:
    """Return amount [m] and fraction [-] that the cuts of this name together take off one size."""
    mine = [cut for cut in cuts if cut.part and answers_to(name, cut.part)]
    return sum(cut.amount for cut in mine), sum(cut.fraction for cut in mine)


def _everywhere(cuts: Sequence[Cut]) -> tuple[float, float]:
    """Return amount [m] and fraction [-] that the cuts of no part together take off every part."""
    mine = [cut for cut in cuts if not cut.part]
    return sum(cut.amount for cut in mine), sum(cut.fraction for cut in mine)


def _left(name: str, size: float, cuts: Sequence[Cut], *, power: float = 1.0, named_only: bool = False) -> float:
    """Return what is left of one size: size ((1 - f_all)^power - f_named) - amounts; refuse less than nothing."""
    amount, fraction = _named(name, cuts)
    off_all, of_all = (0.0, 0.0) if named_only else _everywhere(cuts)
    left = size * (max(0.0, 1.0 - of_all) ** power - fraction) - amount - off_all
    if of_all > 1.0 + _ROUND_OFF or left < -_ROUND_OFF * size:
        lost = size * (of_all + fraction) + amount + off_all
        raise InputError(f"losses of {lost:g} m together are more than the {size:g} m of metal there", place=name)
    return left if left > _ROUND_OFF * size else 0.0


def _edges(low: float, high: float, size: float, face: int) -> tuple[float, float]:
    """Return the edges of what is left of a size, the loss taken at one face or at both alike."""
    lost = high - low - size
    if not lost:
        return low, high
    at_low = {-1: lost, 0: lost / 2, 1: 0.0}[face]
    return low + at_low, low + at_low + size
