"""Influence lines under a small elevation, on one x scale."""

from __future__ import annotations

from dataclasses import dataclass
from typing import TYPE_CHECKING, Final

import numpy as np

from movload.errors import InputError
from movload.report.drawing.bearings import REACH, draw_bearings, name_beds, over
from movload.report.drawing.deck_line import DeckLine, draw_abutments
from movload.report.drawing.dimensions import row_height, row_of_words
from movload.report.drawing.elevation import (
    PLAIN_BAR,
    Look,
    bar_spots,
    draw_bars,
    draw_joints,
    mark_joint,
    name_joints,
)
from movload.report.drawing.frame import HEADING, caption_height, draw_caption, draw_heading, fitted
from movload.report.drawing.ink import ACCENT, BOLD, FAINT, FRAME, HAIR
from movload.report.drawing.left_out import (
    FRAMED_NAME,
    JOINT_NAME,
    STATION,
    STATION_NAME,
    LeftOut,
    told_left_out,
)
from movload.report.drawing.line_strip import Band, draw_line, name_line, write_kinks, write_zeros
from movload.report.drawing.sheet import Sheet, Window
from movload.report.drawing.words import lengths, origin

if TYPE_CHECKING:
    from collections.abc import Sequence

    from matplotlib.figure import Figure

    from movload.bridge.truss import Truss
    from movload.report.drawing.sheet import Strip
    from movload.statics.influence import InfluenceLine, InfluenceLines
    from movload.units import UnitSystem

_TALLEST: Final = 60.0  # mm of paper for the truss's own height
_ABOVE: Final = 10.0  # mm over the truss for names
_BELOW: Final = REACH + 5.0  # mm under it for bearings and names
_ACCENTED: Final = Look("plain", 2 * BOLD, ACCENT)
_MOST: Final = 6  # lines on one sheet
_HEIGHTS: Final = (50.0, 44.0, 38.0, 34.0, 32.0, 31.0)  # mm for each line when there are 1 ... 6


def influence_figure(
    truss: Truss, lines: InfluenceLines, keys: Sequence[str], units: UnitSystem, *, title: str
) -> Figure:
    """Return the influence lines of 1 to 6 rows under a small elevation, all on one x scale.

    Parameters
    ----------
    truss
        The truss the lines belong to.
    lines
        Its influence lines; x [m], ordinates per unit downward load, positive drawn upward.
    keys
        Rows by name; their bars, supports or panel points are marked in the elevation.
    units
        Lengths are written in its length unit, deflections in its section unit per force unit.
    title
        Written over the drawing.

    Raises
    ------
    InputError
        No key, or more than 6.
    UnknownNameError
        A key that is no row.
    """
    if not 1 <= len(keys) <= _MOST or isinstance(keys, str):
        raise InputError(f"a figure holds 1 to {_MOST} influence lines, got {len(keys)}", place="keys")
    asked = _Asked(truss, DeckLine.under(truss, lines), tuple(lines[key] for key in keys), units, title)
    return fitted(lambda width, size, known: _drawn(asked, width, size, known))


@dataclass(frozen=True, slots=True, eq=False)
class _Asked:
    """What one figure of influence lines shows."""

    truss: Truss
    deck: DeckLine
    lines: tuple[InfluenceLine, ...]
    units: UnitSystem
    title: str

    def told(self, left_out: LeftOut) -> str:
        """Return the caption, with what is not written."""
        return (
            "Each line is the row's value per unit load standing at x, to its own upright scale; "
            f"lengths in {self.units.length}. {origin(self.truss, self.units)}. "
            f"Ring on an axis: the line changes sign inside a panel. {told_left_out(left_out)}"
        )


def _drawn(asked: _Asked, width: float, size: float, known: LeftOut) -> tuple[Sheet, LeftOut]:
    """Draw one attempt whose caption tells the ``known`` to be left out; return the sheet and what found no room."""
    row, count = row_height(size), len(asked.lines)
    first, last, low, high = asked.deck.extent(asked.truss)
    window = Window.fitting(first, last, width, steepest=_TALLEST / (high - low))
    caption = asked.told(known)
    foot = caption_height(caption, width, size) + 2 * row + 2.0
    height = _HEIGHTS[count - 1]
    zero = foot + count * height + _BELOW - low * window.scale
    sheet = Sheet(width, zero + high * window.scale + _ABOVE + over(asked.truss) + HEADING, size)
    draw_heading(sheet, asked.title, "influence lines")
    draw_caption(sheet, caption)
    left_out = _draw_truss(sheet.strip(window, zero, window.scale), asked)
    bands = [Band(foot + (count - 1 - number) * height, height) for number in range(count)]
    left_out += _draw_lines(sheet, window, asked, bands)
    return sheet, left_out + draw_stations(sheet, window, asked.deck, asked.units, reach=(foot, zero))


def _draw_lines(sheet: Sheet, window: Window, asked: _Asked, bands: Sequence[Band]) -> LeftOut:
    """Draw the lines, all of them before any figure, so that none stands on another row's line; count left out."""
    strips = [band.strip(sheet, window, line) for band, line in zip(bands, asked.lines, strict=True)]
    for strip, line in zip(strips, asked.lines, strict=True):
        draw_line(strip, line)
        name_line(strip, line, asked.units, asked.truss)
    left_out = LeftOut()
    for strip, line in zip(strips, asked.lines, strict=True):
        left_out += write_kinks(strip, line, asked.units, taken=np.zeros(0)) + write_zeros(strip, line, asked.units)
    return left_out


def draw_stations(
    sheet: Sheet, window: Window, deck: DeckLine, units: UnitSystem, *, reach: tuple[float, float]
) -> LeftOut:
    """Write names and x of the panel points under everything, and project them down; count what found no room."""
    foot, zero = reach
    row = row_height(sheet.size)
    places = [window.mm(x) for x in deck.stations]
    for place, height in zip(places, deck.heights, strict=True):
        sheet.stroke([(place, foot - 0.5), (place, zero + height * window.scale)], HAIR, FAINT, zorder=-5)
    sheet.write_from(sheet.lettering(f"x, {units.length}"), window.side, foot - 1.5 * row - 0.5)
    names = [name or "abut." for name in deck.names]
    left_out = LeftOut()
    left_out[STATION_NAME] = row_of_words(sheet, foot - 0.5 * row - 0.5, places, names)
    left_out[STATION] = row_of_words(sheet, foot - 1.5 * row - 0.5, places, lengths(deck.stations, units))
    return +left_out


def _draw_truss(strip: Strip, asked: _Asked) -> LeftOut:
    """Draw the truss with the bars and joints asked about marked; return which names found no room."""
    truss = asked.truss
    bars = {line.effect.name for line in asked.lines if line.effect.kind == "axial"}
    draw_bearings(strip, truss)
    draw_bars(strip, truss, [_ACCENTED if member.name in bars else PLAIN_BAR for member in truss.members])
    draw_joints(strip, truss, asked.deck.joints)
    draw_abutments(strip, asked.deck)
    left_out = name_beds(strip, truss)
    rows = [row for row, member in enumerate(truss.members) if member.name in bars]
    left_out[FRAMED_NAME] = sum(not _mark_bar(strip, truss, row) for row in rows)
    others = (line.effect.name for line in asked.lines if line.effect.kind != "axial")
    joints = dict.fromkeys(name.rpartition(" ")[0] for name in others)
    left_out[FRAMED_NAME] += sum(not mark_joint(strip, truss, joint) for joint in joints)
    left_out[JOINT_NAME] = name_joints(strip, truss, besides=frozenset(joints))
    return +left_out


def _mark_bar(strip: Strip, truss: Truss, row: int) -> bool:
    """Write a bar's name along it in a frame; say whether there was room."""
    lettering = strip.sheet.lettering(truss.members[row].name, bold=True, pad=FRAME)
    return strip.sheet.write(lettering, bar_spots(strip, truss, row, lettering, weight=_ACCENTED.weight), ACCENT)
