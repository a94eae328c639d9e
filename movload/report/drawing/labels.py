"""Where a word may stand: measured letters, things they must stay clear of, and the first free spot.

A text has two outlines. Its *box* is what matplotlib reports, room for every ascender and descender included: no two
boxes may overlap. Its *ink* is the height of a capital or a figure: ink must stay clear of drawn lines.
"""

from __future__ import annotations

import itertools
import math
from bisect import bisect_right
from dataclasses import dataclass, field
from functools import lru_cache
from typing import TYPE_CHECKING, Final

import numpy as np
from matplotlib.backends.backend_agg import FigureCanvasAgg
from matplotlib.figure import Figure
from matplotlib.font_manager import FontProperties
from matplotlib.text import Text

from movload.report.drawing.ink import DPI, EDGE, FONT, LEAST_SIZE, POINT

if TYPE_CHECKING:
    from collections.abc import Sequence

    from numpy.typing import NDArray

    from movload.arrays import Floats

    Truths = NDArray[np.bool_]

_CAPITAL: Final = 0.73  # of the letter size: height of a capital of this font
_DESCENT: Final = 0.236  # of the letter size: depth of a "p"
_BETWEEN: Final = 0.5  # mm kept free between two boxes
_BESIDE: Final = 0.45  # mm kept free between ink and a line


@dataclass(frozen=True, slots=True)
class Spot:
    """A place for a text: the middle of its ink [mm] and its turn [degrees, anticlockwise].

    ``leader`` is the point [mm] it speaks of when it stands too far away to be understood without a line to it.
    """

    x: float
    y: float
    turn: float = 0.0
    leader: tuple[float, float] | None = None


@dataclass(frozen=True, slots=True)
class Lettering:
    """A text as it will be printed, level, and how large that is.

    Attributes
    ----------
    width, height
        Of the box [mm].
    size
        Letter size [pt].
    pad
        Room [mm] added around box and ink, for a frame.
    """

    text: str
    size: float
    bold: bool = False
    pad: float = field(default=0.0, kw_only=True)

    @property
    def width(self) -> float:
        """Width of the box [mm], level."""
        return measured(self.text, self.size, self.bold)[0] + 2 * self.pad

    @property
    def height(self) -> float:
        """Height of the box [mm], level."""
        return measured(self.text, self.size, self.bold)[1] + 2 * self.pad

    @property
    def ink_height(self) -> float:
        """Height of capitals and figures [mm], a frame's room included."""
        return _CAPITAL * self.size * POINT + 2 * self.pad

    @property
    def ink_rise(self) -> float:
        """How far the middle of the ink stands above the middle of the box [mm]."""
        em = self.size * POINT
        return (_CAPITAL / 2 + _DESCENT) * em - measured(self.text, self.size, self.bold)[1] / 2

    def box_middle(self, spot: Spot) -> tuple[float, float]:
        """Return the middle of the box [mm] when the ink stands at ``spot``."""
        turn = math.radians(spot.turn)
        return spot.x + self.ink_rise * math.sin(turn), spot.y - self.ink_rise * math.cos(turn)


def font(size: float, *, bold: bool = False) -> FontProperties:
    """Return the one font of all figures."""
    return FontProperties(family=FONT, size=size, weight="bold" if bold else "normal")


@lru_cache(maxsize=1)
def _scratch() -> Figure:
    """Return a figure that is never shown: texts are measured on it."""
    figure = Figure(dpi=DPI)
    FigureCanvasAgg(figure)
    return figure


@lru_cache(maxsize=4096)
def measured(text: str, size: float, bold: bool = False) -> tuple[float, float]:
    """Return the width and height [mm] of a text's box, level, as the renderer reports them."""
    drawn = Text(0, 0, text, fontproperties=font(size, bold=bold), usetex=False, parse_math=False)
    drawn.set_figure(_scratch())
    extent = drawn.get_window_extent()
    return extent.width / DPI * 25.4, extent.height / DPI * 25.4


def squeezed(text: str, size: float, width: float, *, bold: bool = False) -> Lettering:
    """Return a text no wider than ``width`` [mm]: smaller letters first, down to the least size, then cut short."""
    while size > LEAST_SIZE and measured(text, size, bold)[0] > width:
        size = max(size - 0.5, LEAST_SIZE)
    if measured(text, size, bold)[0] <= width:
        return Lettering(text, size, bold)
    shortened = [f"{text[:end].rstrip()} …" for end in range(len(text))]
    end = bisect_right(shortened, width, key=lambda cut: measured(cut, size, bold)[0])
    return Lettering(shortened[max(end - 1, 0)], size, bold)


def wrapped(text: str, size: float, width: float) -> list[str]:
    """Return the text in as few lines as fit ``width`` [mm], broken between words, the last not left with a word."""
    lines = _filled(text, size, width)
    for part in range(49, 37, -1):
        tighter = _filled(text, size, width * part / 50)
        if len(tighter) > len(lines):
            break
        lines = tighter
    return lines


def _filled(text: str, size: float, width: float) -> list[str]:
    """Return the text in lines filled as far as they go."""
    lines: list[str] = []
    for word in text.split():
        longer = f"{lines[-1]} {word}" if lines else word
        if lines and measured(longer, size)[0] <= width:
            lines[-1] = longer
        else:
            lines.append(word)
    return lines


class Board:
    """What already stands on the sheet: boxes of texts and lines with their half-widths, all in mm."""

    def __init__(self, width: float, height: float) -> None:
        self._room = (EDGE, EDGE, width - EDGE, height - EDGE)
        self._boxes: list[tuple[float, float, float, float]] = []
        self._lines: list[tuple[float, float, float, float, float]] = []

    def keep_clear(self, points: Sequence[tuple[float, float]], half: float = 0.0) -> None:
        """Keep texts off a drawn line (or, of one point, a disc) of half-width ``half`` [mm]."""
        ends = list(points) if len(points) > 1 else [points[0], points[0]]
        self._lines += [(*start, *end, half) for start, end in itertools.pairwise(ends)]

    def claim(self, lettering: Lettering, spot: Spot) -> None:
        """Reserve the box of a text that stands where it must."""
        self._boxes.append(tuple(_boxes(lettering, [spot])[0].tolist()))

    def free(self, lettering: Lettering, spots: Sequence[Spot]) -> list[Spot]:
        """Return the spots at which the text touches nothing, in the order given."""
        free = self._free_of_boxes(lettering, spots) & self._free_of_lines(lettering, spots)
        return [spot for spot, is_free in zip(spots, free, strict=True) if is_free]

    def _free_of_boxes(self, lettering: Lettering, spots: Sequence[Spot]) -> Truths:
        """Say of each spot whether the box stays on the sheet and off all other boxes."""
        boxes = _boxes(lettering, spots)
        room = np.array(self._room)
        inside = (boxes[:, :2] >= room[:2]).all(axis=1) & (boxes[:, 2:] <= room[2:]).all(axis=1)
        if not self._boxes:
            return np.asarray(inside)
        others = np.array(self._boxes)
        apart = (boxes[:, None, :2] > others[None, :, 2:] + _BETWEEN) | (
            boxes[:, None, 2:] < others[None, :, :2] - _BETWEEN
        )
        return np.asarray(inside & np.all(np.any(apart, axis=2), axis=1))

    def _free_of_lines(self, lettering: Lettering, spots: Sequence[Spot]) -> Truths:
        """Say of each spot whether the ink stays clear of all lines: each line clipped by the widened ink."""
        if not self._lines:
            return np.ones(len(spots), dtype=bool)
        lines = np.array(self._lines)
        middle = np.array([(spot.x, spot.y) for spot in spots])
        turn = np.radians([spot.turn for spot in spots])[:, None]
        start = _turned(lines[None, :, 0:2] - middle[:, None], turn)
        reach = _turned(lines[None, :, 2:4] - middle[:, None], turn) - start
        half = np.array([lettering.width, lettering.ink_height]) / 2 + _BESIDE + lines[:, 4, None]
        reach[reach == 0.0] = 1e-12  # mm; a line along an axis never meets the sides parallel to it
        enter, leave = (-half - start) / reach, (half - start) / reach
        first = np.minimum(enter, leave).max(axis=2).clip(min=0.0)
        last = np.maximum(enter, leave).min(axis=2).clip(max=1.0)
        return np.asarray((first > last).all(axis=1))


def _turned(points: Floats, turn: Floats) -> Floats:
    """Return points seen from axes turned anticlockwise by ``turn`` [radians]."""
    cosine, sine = np.cos(turn), np.sin(turn)
    x, y = points[..., 0], points[..., 1]
    return np.stack((x * cosine + y * sine, y * cosine - x * sine), axis=-1)


def _boxes(lettering: Lettering, spots: Sequence[Spot]) -> Floats:
    """Return left, bottom, right, top (S, 4) [mm] of the upright boxes around the text at each spot."""
    middle = np.array([lettering.box_middle(spot) for spot in spots])
    turn = np.radians([spot.turn for spot in spots])
    width, height = lettering.width / 2, lettering.height / 2
    cosine, sine = np.abs(np.cos(turn)), np.abs(np.sin(turn))
    half = np.stack((width * cosine + height * sine, width * sine + height * cosine), axis=1)
    return np.concatenate((middle - half, middle + half), axis=1)
