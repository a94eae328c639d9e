"""Shapes of thin parts as measured: angle, channel, I, rectangular and round tube, plate.

================  ======================================  ===================================================
shape             as drawn (x to the right, y up)         reference point: parts that can be lost or holed
================  ======================================  ===================================================
Angle             first leg along +x, second along +y     heel (outer corner): first leg, second leg
Channel           web upright, flanges towards +x         middle of its back: web, top flange, bottom flange
ISection          web upright                             web, half its depth: web, top flange, bottom flange
RectangularTube   width along x, depth along y            centre: left wall, right wall, top wall, bottom wall
RoundTube                                                 centre: wall
Plate             lies: width along x, thickness along y  centre: thickness, width
================  ======================================  ===================================================

The last word alone means all of its kind: "flange" both flanges, "wall" all four walls. Legs, flanges and walls lose
metal at their outer face, the web of a channel at its back, which leaves the least moment of inertia; the web of an I
and a plate lose it at both faces alike. Bars, eyebars and timber are in `movload.bridge.section_bars`.
"""

from __future__ import annotations

from dataclasses import dataclass, field
from typing import TYPE_CHECKING, ClassVar, Literal

from movload.bridge.section_elements import Rect, Round
from movload.bridge.section_shape import Edges, Form, Shape, require_at_most, require_below, require_sizes

if TYPE_CHECKING:
    from collections.abc import Mapping


@dataclass(frozen=True, slots=True)
class Angle(Shape):
    """Two legs of one thickness: first leg along +x, second along +y, each measured from the heel [m]."""

    first_leg: float
    second_leg: float
    thickness: float
    kind: ClassVar[str] = "angle"
    form: ClassVar[Form] = "angle"

    def __post_init__(self) -> None:
        """Refuse what no angle can be."""
        require_sizes(self.kind, first_leg=self.first_leg, second_leg=self.second_leg, thickness=self.thickness)
        shorter = min(self.first_leg, self.second_leg)
        require_below(self.kind, "thickness", self.thickness, (shorter / 2, "half the shorter leg"))

    def elements(self) -> tuple[Rect, ...]:
        """Return both legs; the corner belongs to the first."""
        t = self.thickness
        return (
            Rect("first leg", 0.0, self.first_leg, 0.0, t, thin="y", face=-1),
            Rect("second leg", 0.0, t, t, self.second_leg, thin="x", face=-1),
        )

    def plate_widths(self) -> Mapping[str, tuple[float, Edges]]:
        """Return each leg in full."""
        return {"first leg": (self.first_leg, 1), "second leg": (self.second_leg, 1)}


@dataclass(frozen=True, slots=True)
class Channel(Shape):
    """A web with a flange at each end, both towards +x [m]: depth and width over all, thickness of web and flanges."""

    depth: float
    width: float
    web: float
    flange: float
    kind: ClassVar[str] = "channel"
    form: ClassVar[Form] = "flanged"

    def __post_init__(self) -> None:
        """Refuse what no channel can be."""
        require_sizes(self.kind, depth=self.depth, width=self.width, web=self.web, flange=self.flange)
        _require_flanged(self.kind, self.depth, self.web, {"flange": (self.flange, self.width)})

    def elements(self) -> tuple[Rect, ...]:
        """Return web and flanges; the corners belong to the flanges."""
        half, t = self.depth / 2, self.flange
        return (
            Rect("web", 0.0, self.web, t - half, half - t, thin="x", face=-1),
            Rect("top flange", 0.0, self.width, half - t, half, thin="y", face=1),
            Rect("bottom flange", 0.0, self.width, -half, t - half, thin="y", face=-1),
        )

    def plate_widths(self) -> Mapping[str, tuple[float, Edges]]:
        """Return the web clear of the flanges, and each flange in full."""
        return {
            "web": (self.depth - 2 * self.flange, 2),
            "top flange": (self.width, 1),
            "bottom flange": (self.width, 1),
        }


@dataclass(frozen=True, slots=True)
class ISection(Shape):
    """An upright web with a flange across each end [m].

    Parameters
    ----------
    depth, width, web, flange
        Over all, width and thickness of the top flange, thickness of the web.
    bottom_width, bottom_flange
        Width and thickness of the bottom flange; None takes the top one's.
    """

    depth: float
    width: float
    web: float
    flange: float
    bottom_width: float | None = field(default=None, kw_only=True)
    bottom_flange: float | None = field(default=None, kw_only=True)
    kind: ClassVar[str] = "I"
    form: ClassVar[Form] = "flanged"

    def __post_init__(self) -> None:
        """Refuse what no I can be."""
        require_sizes(self.kind, depth=self.depth, width=self.width, web=self.web, flange=self.flange)
        width, flange = self.bottom
        require_sizes(self.kind, bottom_width=width, bottom_flange=flange)
        flanges = {"flange": (self.flange, self.width), "bottom_flange": (flange, width)}
        _require_flanged(self.kind, self.depth, self.web, flanges)

    @property
    def bottom(self) -> tuple[float, float]:
        """Width and thickness of the bottom flange [m]."""
        return (
            self.width if self.bottom_width is None else self.bottom_width,
            self.flange if self.bottom_flange is None else self.bottom_flange,
        )

    def elements(self) -> tuple[Rect, ...]:
        """Return web and flanges; the corners belong to the flanges."""
        half, above, (bottom, below) = self.depth / 2, self.flange, self.bottom
        return (
            Rect("web", -self.web / 2, self.web / 2, below - half, half - above, thin="x"),
            Rect("top flange", -self.width / 2, self.width / 2, half - above, half, thin="y", face=1),
            Rect("bottom flange", -bottom / 2, bottom / 2, -half, below - half, thin="y", face=-1),
        )

    def plate_widths(self) -> Mapping[str, tuple[float, Edges]]:
        """Return the web clear of the flanges, and half of each flange."""
        return {
            "web": (self.depth - self.flange - self.bottom[1], 2),
            "top flange": (self.width / 2, 1),
            "bottom flange": (self.bottom[0] / 2, 1),
        }


@dataclass(frozen=True, slots=True)
class RectangularTube(Shape):
    """Four walls of one thickness [m]: width along x and depth along y, over all."""

    width: float
    depth: float
    wall: float
    kind: ClassVar[str] = "rectangular tube"
    form: ClassVar[Form] = "tube"

    def __post_init__(self) -> None:
        """Refuse what no tube can be."""
        require_sizes(self.kind, width=self.width, depth=self.depth, wall=self.wall)
        require_below(self.kind, "wall", self.wall, (min(self.width, self.depth) / 2, "half the smaller side"))

    def elements(self) -> tuple[Rect, ...]:
        """Return the four walls; the corners belong to top and bottom."""
        x, y, t = self.width / 2, self.depth / 2, self.wall
        return (
            Rect("left wall", -x, t - x, t - y, y - t, thin="x", face=-1),
            Rect("right wall", x - t, x, t - y, y - t, thin="x", face=1),
            Rect("top wall", -x, x, y - t, y, thin="y", face=1),
            Rect("bottom wall", -x, x, -y, t - y, thin="y", face=-1),
        )

    def plate_widths(self) -> Mapping[str, tuple[float, Edges]]:
        """Return each wall clear of its neighbours."""
        across, upright = self.width - 2 * self.wall, self.depth - 2 * self.wall
        return {
            "left wall": (upright, 2),
            "right wall": (upright, 2),
            "top wall": (across, 2),
            "bottom wall": (across, 2),
        }


@dataclass(frozen=True, slots=True)
class RoundTube(Shape):
    """A round tube: outside diameter and wall [m]."""

    diameter: float
    wall: float
    kind: ClassVar[str] = "round tube"
    form: ClassVar[Form] = "round"

    def __post_init__(self) -> None:
        """Refuse what no tube can be."""
        require_sizes(self.kind, diameter=self.diameter, wall=self.wall)
        require_below(self.kind, "wall", self.wall, (self.diameter / 2, "half the diameter"))

    def elements(self) -> tuple[Round, ...]:
        """Return its wall."""
        return (Round("wall", self.diameter / 2, self.diameter / 2 - self.wall),)

    def plate_widths(self) -> Mapping[str, tuple[float, Edges]]:
        """Return its diameter: a round wall is judged by D/t."""
        return {"wall": (self.diameter, 0)}


@dataclass(frozen=True, slots=True)
class Plate(Shape):
    """A plate of a built-up section, lying: width along x, thickness along y [m].

    Parameters
    ----------
    width, thickness
        As measured.
    edges
        2 where both long edges are held (a cover plate between its lines of rivets), 1 where one stands free.
    clear
        Width between the lines of fasteners, or from the line to the free edge [m]; None takes the whole.
    """

    width: float
    thickness: float
    edges: Literal[1, 2] = field(default=2, kw_only=True)
    clear: float | None = field(default=None, kw_only=True)
    kind: ClassVar[str] = "plate"
    form: ClassVar[Form] = "bar"

    def __post_init__(self) -> None:
        """Refuse what no plate can be."""
        require_sizes(self.kind, width=self.width, thickness=self.thickness)
        require_sizes(self.kind, clear=self.width if self.clear is None else self.clear)
        require_at_most(self.kind, "thickness", self.thickness, (self.width, "its width"))
        require_at_most(self.kind, "clear", self.clear or self.width, (self.width, "its width"))

    def elements(self) -> tuple[Rect, ...]:
        """Return the plate."""
        x, y = self.width / 2, self.thickness / 2
        return (Rect("thickness", -x, x, -y, y, thin="y", across="width"),)

    def plate_widths(self) -> Mapping[str, tuple[float, Edges]]:
        """Return the width that may buckle."""
        return {"thickness": (self.clear or self.width, self.edges)}


def _require_flanged(kind: str, depth: float, web: float, flanges: Mapping[str, tuple[float, float]]) -> None:
    """Refuse a flange over half the depth or a web over half the flange's width."""
    for name, (thickness, width) in flanges.items():
        require_below(kind, name, thickness, (depth / 2, "half the depth"))
        require_below(kind, "web", web, (width / 2, "half the flange's width"))
