"""A sheet of paper measured in millimetres from its lower left corner, and the strips of bridge drawn on it.

What carries data (bars, lines, wheels) is drawn in axes whose x is the bridge's own x [m], one scale for the whole
sheet; marks of paper size (pins, arrows, letters) are drawn in millimetres over them.
"""

from __future__ import annotations

import math
from dataclasses import dataclass
from typing import TYPE_CHECKING, Any

from matplotlib.backends.backend_agg import FigureCanvasAgg
from matplotlib.figure import Figure
from matplotlib.lines import Line2D
from matplotlib.patches import Circle, Polygon
from matplotlib.transforms import Affine2D

from movload.report.drawing.ink import DPI, FINE, HAIR, INK, LEFT, MARGIN, PAPER, POINT, RIGHT, THIN
from movload.report.drawing.labels import Board, Lettering, Spot, font

if TYPE_CHECKING:
    from collections.abc import Sequence

    from matplotlib.axes import Axes
    from numpy.typing import ArrayLike

    Place = tuple[float, float]

_AT_A_TIME = 8  # spots tried together: most texts find room at one of their first
_HALO = 0.3  # mm of bare paper around ink, so that a projection line never runs into a figure


@dataclass(frozen=True, slots=True)
class Window:
    """How the bridge's x is laid on the sheet, the same for every strip.

    ``first`` and ``last`` bound what is drawn [m]; ``first`` stands at ``left`` [mm]; ``scale`` is in mm per m.
    """

    first: float
    last: float
    left: float
    scale: float

    @classmethod
    def fitting(cls, first: float, last: float, width: float, *, steepest: float) -> Window:
        """Return the window that fills a sheet of ``width`` [mm] between its margins, at most ``steepest`` mm per m."""
        room = width - LEFT - RIGHT
        scale = min(room / (last - first), steepest)
        return cls(first, last, LEFT + (room - scale * (last - first)) / 2, scale)

    @property
    def side(self) -> float:
        """Where the names of rows start [mm]."""
        return self.left - LEFT + MARGIN

    @property
    def right(self) -> float:
        """Where ``last`` stands on the sheet [mm]."""
        return self.mm(self.last)

    def mm(self, x: float) -> float:
        """Return where x [m] stands on the sheet [mm]."""
        return self.left + (x - self.first) * self.scale


class Sheet:
    """A figure under work: strokes, shapes and words in mm, and the board that keeps the words apart.

    Parameters
    ----------
    width, height
        [mm].
    size
        Letter size of everything but titles [pt].
    """

    def __init__(self, width: float, height: float, size: float) -> None:
        self.figure = Figure(figsize=(width / 25.4, height / 25.4), dpi=DPI, facecolor=PAPER)
        FigureCanvasAgg(self.figure)
        self.width, self.height, self.size = width, height, size
        self.board = Board(width, height)
        self._mm = Affine2D().scale(1 / 25.4) + self.figure.dpi_scale_trans

    def strip(self, window: Window, zero: float, scale: float) -> Strip:
        """Return axes over the whole sheet with y = 0 at ``zero`` [mm] and ``scale`` mm per unit of y."""
        axes = self.figure.add_axes((0.0, 0.0, 1.0, 1.0))
        axes.set_axis_off()
        start = window.first - window.left / window.scale
        axes.set_xlim(start, start + self.width / window.scale)
        axes.set_ylim(-zero / scale, (self.height - zero) / scale)
        axes.set_autoscale_on(False)
        return Strip(self, axes, window, zero, scale)

    def lettering(self, text: str, *, bold: bool = False, pad: float = 0.0) -> Lettering:
        """Return a text in the sheet's own letter size."""
        return Lettering(text, self.size, bold, pad=pad)

    def stroke(self, points: Sequence[Place], weight: float = FINE, colour: str = INK, **style: Any) -> None:
        """Draw a line through points [mm], ``weight`` [mm] thick."""
        x, y = zip(*points, strict=True)
        style = {"solid_capstyle": "butt", "zorder": 2, **style}
        self.figure.add_artist(Line2D(x, y, linewidth=weight / POINT, color=colour, transform=self._mm, **style))

    def shape(self, corners: Sequence[Place], face: str, edge: str = INK, **style: Any) -> None:
        """Draw a filled outline of corners [mm]."""
        style = {"linewidth": FINE / POINT, "joinstyle": "miter", "zorder": 2, **style}
        self.figure.add_artist(Polygon(corners, facecolor=face, edgecolor=edge, transform=self._mm, **style))

    def disc(self, middle: Place, radius: float, face: str, edge: str = INK, **style: Any) -> None:
        """Draw a filled circle [mm]."""
        style = {"linewidth": THIN / POINT, "zorder": 2.5, **style}
        self.figure.add_artist(Circle(middle, radius, facecolor=face, edgecolor=edge, transform=self._mm, **style))

    def write(self, lettering: Lettering, spots: Sequence[Spot], colour: str = INK) -> bool:
        """Write a text at the first of its spots that is free; say whether there was one."""
        for first in range(0, len(spots), _AT_A_TIME):
            free = self.board.free(lettering, spots[first : first + _AT_A_TIME])
            if free:
                self.write_at(lettering, free[0], colour)
                return True
        return False

    def write_at(self, lettering: Lettering, spot: Spot, colour: str = INK) -> None:
        """Write a text where it must stand; room around it (``pad``) gets a frame."""
        self.board.claim(lettering, spot)
        self._lead(lettering, spot)
        edge = colour if lettering.pad else "none"
        self.shape(_around(lettering, spot), PAPER, edge, linewidth=THIN / POINT, zorder=3)
        self.figure.text(
            *lettering.box_middle(spot),
            lettering.text,
            fontproperties=font(lettering.size, bold=lettering.bold),
            color=colour,
            rotation=spot.turn,
            transform=self._mm,
            ha="center",
            va="center",
            zorder=4,
            usetex=False,
            parse_math=False,
        )

    def write_from(self, lettering: Lettering, left: float, middle: float, colour: str = INK) -> float:
        """Write a text that starts at ``left``, its ink around ``middle`` [mm]; return where it ends [mm]."""
        self.write_at(lettering, Spot(left + lettering.width / 2, middle), colour)
        return left + lettering.width

    def _lead(self, lettering: Lettering, spot: Spot) -> None:
        """Draw the line from a text to the point it speaks of, when it stands away from it."""
        if spot.leader is None:
            return
        below = spot.leader[1] < spot.y
        start = (spot.x, spot.y - (1 if below else -1) * (lettering.ink_height / 2 + _HALO))
        self.stroke([start, spot.leader], HAIR)
        self.board.keep_clear([start, spot.leader])


def _around(lettering: Lettering, spot: Spot) -> list[Place]:
    """Return the corners [mm] of bare paper around a text's ink, or of its frame."""
    turn = math.radians(spot.turn)
    spare = 0.0 if lettering.pad else _HALO
    half = (lettering.width / 2 + spare, lettering.ink_height / 2 + spare)
    along, across = (math.cos(turn), math.sin(turn)), (-math.sin(turn), math.cos(turn))
    return [
        (
            spot.x + a * half[0] * along[0] + b * half[1] * across[0],
            spot.y + a * half[0] * along[1] + b * half[1] * across[1],
        )
        for a, b in ((-1, -1), (1, -1), (1, 1), (-1, 1))
    ]


@dataclass(frozen=True, slots=True, eq=False)
class Strip:
    """One drawing over the bridge's x: axes whose y = 0 stands at ``zero`` [mm], ``scale`` mm per unit of y."""

    sheet: Sheet
    axes: Axes
    window: Window
    zero: float
    scale: float

    def mm(self, x: float, y: float) -> Place:
        """Return where a point (x [m], y) stands on the sheet [mm]."""
        return self.window.mm(x), self.zero + y * self.scale

    def plot(self, x: ArrayLike, y: ArrayLike, weight: float, colour: str = INK, **style: Any) -> Line2D:
        """Draw a line over the bridge's own x [m], ``weight`` [mm] thick."""
        style = {"solid_capstyle": "butt", "solid_joinstyle": "miter", **style}
        line = Line2D(x, y, linewidth=weight / POINT, color=colour, clip_on=False, **style)
        self.axes.add_line(line)
        return line
