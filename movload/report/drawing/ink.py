"""Ink, paper, line weights and letter sizes of every figure: black on white, greys, and one accent.

Lengths on paper are millimetres, letter sizes points. Everything must survive a photocopier, so that the accent never
speaks alone: what it marks is also boxed or drawn heavier.
"""

from __future__ import annotations

from types import MappingProxyType
from typing import TYPE_CHECKING, Any, Final

if TYPE_CHECKING:
    from collections.abc import Mapping

INK: Final = "#111111"
GREY: Final = "#555555"  # words of second rank; still black enough for a copy
PASSIVE: Final = "#8a8a8a"  # wheels off the bridge
FAINT: Final = "#a8a8a8"  # projection lines
PALE: Final = "#dddddd"  # the fill of a positive area
PAPER: Final = "#ffffff"
ACCENT: Final = "#b8340c"

POINT: Final = 25.4 / 72  # mm in a point
DPI: Final = 200  # measured and printed at the same resolution, so that a measured letter is the printed one

HAIR: Final = 0.13
FINE: Final = 0.18
THIN: Final = 0.28
FIRM: Final = 0.5
BOLD: Final = 0.8

FRAME: Final = 0.7  # mm between a word and the frame around it

FONT: Final = "DejaVu Sans"  # comes with matplotlib, so a figure is the same everywhere

LEFT: Final = 33.0  # margins beside the truss: row names and signs stand in the left one
RIGHT: Final = 24.0
EDGE: Final = 6.0  # nothing is drawn nearer to the sheet's edge
MARGIN: Final = 8.0  # where words start

# Rules when labels crowd, in this order: widen the sheet to its limit, then smaller letters down to the least size that
# a copy keeps readable, then leave out the least important labels. Width [mm] and letter size [pt] of each attempt.
ATTEMPTS: Final = ((300.0, 9.5), (360.0, 9.5), (420.0, 9.5), (420.0, 8.5), (420.0, 7.5), (420.0, 6.5))
LEAST_SIZE: Final = 6.5

STYLE: Final[Mapping[Any, Any]] = MappingProxyType(
    {
        "font.family": FONT,
        "text.usetex": False,
        "path.simplify": False,
        "svg.fonttype": "path",
        "svg.hashsalt": "movload",
        "pdf.fonttype": 3,
    }
)
"""What matplotlib is told while a figure is made or turned into bytes; its global settings stay as they are."""
