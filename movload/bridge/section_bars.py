"""Bars and timber as measured: flat, eyebar, round bar, threaded rod, sawn timber.

===========  ==========================================  =======================================================
shape        as drawn (x to the right, y up)             reference point, parts that can be lost or holed
===========  ==========================================  =======================================================
Flat         stands: width along y, thickness along x    centre: thickness, width
Eyebar       stands: width along y, thickness along x    centre of the shank: shank, shank width, head
RoundBar                                                 centre: diameter
ThreadedRod                                              centre: diameter, thread
SawnTimber   width along x, depth along y                centre: width, depth
===========  ==========================================  =======================================================

A loss of no named part takes a flat's or an eyebar's thickness (head and shank), the diameter of a rod (body and
thread), and both sizes of a timber.
"""

from __future__ import annotations

from dataclasses import dataclass, field
from typing import ClassVar

from movload.bridge.section_elements import Rect, Round
from movload.bridge.section_shape import Form, Shape, require_at_most, require_below, require_sizes
from movload.errors import InputError


@dataclass(frozen=True, slots=True)
class Flat(Shape):
    """A flat or square bar, standing: width along y, thickness along x [m]."""

    width: float
    thickness: float
    kind: ClassVar[str] = "flat"
    form: ClassVar[Form] = "bar"

    def __post_init__(self) -> None:
        """Refuse what no flat can be."""
        require_sizes(self.kind, width=self.width, thickness=self.thickness)
        require_at_most(self.kind, "thickness", self.thickness, (self.width, "its width"))

    def elements(self) -> tuple[Rect, ...]:
        """Return the bar."""
        x, y = self.thickness / 2, self.width / 2
        return (Rect("thickness", -x, x, -y, y, thin="x", across="width"),)


@dataclass(frozen=True, slots=True)
class Eyebar(Shape):
    """A flat bar with a head at each end that a pin goes through [m].

    Its section is the shank; its net section is the least of the shank and of the head beside the pin,
    (head width - pin hole) x head thickness.

    Parameters
    ----------
    width, thickness
        Of the shank.
    head_width
        Across the head at the pin, square to the bar; None when nobody has measured it (the net section is then
        refused).
    pin_hole
        Diameter of the hole, as worn; None as above.
    head_thickness
        None takes the shank's.
    """

    width: float
    thickness: float
    head_width: float | None = field(default=None, kw_only=True)
    pin_hole: float | None = field(default=None, kw_only=True)
    head_thickness: float | None = field(default=None, kw_only=True)
    kind: ClassVar[str] = "eyebar"
    form: ClassVar[Form] = "bar"

    def __post_init__(self) -> None:
        """Refuse what no eyebar can be."""
        require_sizes(self.kind, width=self.width, thickness=self.thickness)
        require_at_most(self.kind, "thickness", self.thickness, (self.width, "its width"))
        for name in ("head_width", "pin_hole", "head_thickness"):
            if getattr(self, name) is not None:
                require_sizes(self.kind, **{name: getattr(self, name)})
        if self.head_width is None:
            return
        if self.head_width < self.width:
            said = f"a head is at least as wide as its shank, {self.width:g} m, got {self.head_width:g} m"
            raise InputError(said, place="eyebar.head_width")
        if self.pin_hole is not None:
            require_below(self.kind, "pin_hole", self.pin_hole, (self.head_width, "the head's width"))

    def elements(self) -> tuple[Rect, ...]:
        """Return the shank."""
        x, y = self.thickness / 2, self.width / 2
        return (Rect("shank", -x, x, -y, y, thin="x", across="shank width"),)

    def neck(self) -> tuple[Rect, ...]:
        """Return the head beside the pin, the hole taken out; empty where head or hole were not typed."""
        if self.head_width is None or self.pin_hole is None:
            return ()
        x, y = (self.head_thickness or self.thickness) / 2, (self.head_width - self.pin_hole) / 2
        return (Rect("head", -x, x, -y, y, thin="x"),)

    def needs_for_net(self) -> str:
        """Return what of the head was not typed."""
        typed = {"head_width": self.head_width, "pin_hole": self.pin_hole}
        return " and ".join(name for name, size in typed.items() if size is None)


@dataclass(frozen=True, slots=True)
class RoundBar(Shape):
    """A round bar [m]."""

    diameter: float
    kind: ClassVar[str] = "round bar"
    form: ClassVar[Form] = "round"

    def __post_init__(self) -> None:
        """Refuse what no bar can be."""
        require_sizes(self.kind, diameter=self.diameter)

    def elements(self) -> tuple[Round, ...]:
        """Return the bar."""
        return (Round("diameter", self.diameter / 2),)


@dataclass(frozen=True, slots=True)
class ThreadedRod(Shape):
    """A round rod with threaded ends [m]: diameter of its body, and at the root of its thread.

    A root above the body is an upset end. Where the root is the smaller, it is both the net and the least gross
    section: the rod is taken to yield there.
    """

    diameter: float
    root: float
    kind: ClassVar[str] = "threaded rod"
    form: ClassVar[Form] = "round"
    neck_yields: ClassVar[bool] = True

    def __post_init__(self) -> None:
        """Refuse what no rod can be."""
        require_sizes(self.kind, diameter=self.diameter, root=self.root)

    def elements(self) -> tuple[Round, ...]:
        """Return the body."""
        return (Round("diameter", self.diameter / 2),)

    def neck(self) -> tuple[Round, ...]:
        """Return the root of the thread."""
        return (Round("thread", self.root / 2),)


@dataclass(frozen=True, slots=True)
class SawnTimber(Shape):
    """A sawn timber, as it measures (not its nominal size) [m]: width along x, depth along y."""

    width: float
    depth: float
    kind: ClassVar[str] = "timber"
    form: ClassVar[Form] = "bar"

    def __post_init__(self) -> None:
        """Refuse what no timber can be."""
        require_sizes(self.kind, width=self.width, depth=self.depth)

    def elements(self) -> tuple[Rect, ...]:
        """Return the timber."""
        x, y = self.width / 2, self.depth / 2
        return (Rect("width", -x, x, -y, y, thin="x", across="depth", all_round=True),)
