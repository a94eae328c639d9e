"""Influence lines under a small elevation, on one x scale."""

from __future__ import annotations

from typing import TYPE_CHECKING, Final

import numpy as np

from movload.errors import InputError
from movload.report.bearings import REACH, draw_bearings, name_beds, over
from movload.report.deck_line import DeckLine, draw_abutments
from movload.report.dimensions import row_height, row_of_words
from movload.report.elevation import (
    PLAIN_BAR,
    Look,
    accent_joint,
    bar_spots,
    draw_bars,
    draw_joints,
    name_joints,
    name_spots,
)
from movload.report.frame import HEADING, caption_height, draw_caption, draw_heading, fitted
from movload.report.ink import ACCENT, BOLD, FAINT, HAIR
from movload.report.line_strip import Band, draw_line, name_line, write_kinks, write_zeros
from movload.report.sheet import Sheet, Window
from movload.report.words import lengths, origin

if TYPE_CHECKING:
    from collections.abc import Sequence

    from matplotlib.figure import Figure

    from movload.bridge.truss import Truss
    from movload.report.sheet import Strip
    from movload.statics.influence import InfluenceLine, InfluenceLines
    from movload.statics.part import Effect
    from movload.units import UnitSystem

_TALLEST: Final = 60.0  # mm of paper for the truss's own height
_ABOVE: Final = 10.0  # mm over the truss for names
_BELOW: Final = REACH + 5.0  # mm under it for bearings and names
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
    rows = [lines[key] for key in keys]
    return fitted(lambda width, size: _drawn(truss, rows, units, title=title, paper=(width, size)))


def _drawn(
    truss: Truss, lines: Sequence[InfluenceLine], units: UnitSystem, *, title: str, paper: tuple[float, float]
) -> tuple[Sheet, int]:
    """Draw one attempt; return the sheet and how many labels found no room on it."""
    width, size = paper
    row, deck = row_height(size), DeckLine.under(truss, lines[0].stations)
    first, last, low, high = deck.extent(truss)
    window = Window.fitting(first, last, width, steepest=_TALLEST / (high - low))
    caption = (
        f"Each line is the row's value per unit load standing at x, to its own upright scale; lengths in {units.length}. "
        f"{origin(truss, units)}. Ring on an axis: the line changes sign inside a panel."
    )
    foot = caption_height(caption, width, size) + 2 * row + 2.0
    height = _HEIGHTS[len(lines) - 1]
    zero = foot + len(lines) * height + _BELOW - low * window.scale
    sheet = Sheet(width, zero + high * window.scale + _ABOVE + over(truss) + HEADING, size)
    draw_heading(sheet, title, "influence lines")
    draw_caption(sheet, caption)
    left_out = _draw_truss(sheet.strip(window, zero, window.scale), truss, deck, [line.effect for line in lines])
    bottoms = [foot + (len(lines) - 1 - number) * height for number in range(len(lines))]
    strips = [Band(bottom, height).strip(sheet, window, line) for bottom, line in zip(bottoms, lines, strict=True)]
    for strip, line in zip(strips, lines, strict=True):  # all lines first: no figure may stand on another row's line
        draw_line(strip, line)
        name_line(strip, line, units, truss)
    for strip, line in zip(strips, lines, strict=True):
        left_out += write_kinks(strip, line, units, taken=np.zeros(0)) + write_zeros(strip, line, units)
    left_out += draw_stations(sheet, window, deck, units, (foot, zero))
    return sheet, left_out


def draw_stations(sheet: Sheet, window: Window, deck: DeckLine, units: UnitSystem, reach: tuple[float, float]) -> int:
    """Write names and x of the panel points under everything, and project them down; count what found no room."""
    foot, zero = reach
    row = row_height(sheet.size)
    places = [window.mm(x) for x in deck.stations]
    for place, height in zip(places, deck.heights, strict=True):
        sheet.stroke([(place, foot - 0.5), (place, zero + height * window.scale)], HAIR, FAINT, zorder=-5)
    sheet.write_from(sheet.lettering(f"x, {units.length}"), window.side, foot - 1.5 * row - 0.5)
    left_out = row_of_words(sheet, foot - 0.5 * row - 0.5, places, [name or "abut." for name in deck.names])
    return left_out + row_of_words(sheet, foot - 1.5 * row - 0.5, places, lengths(deck.stations, units))


def _draw_truss(strip: Strip, truss: Truss, deck: DeckLine, effects: Sequence[Effect]) -> int:
    """Draw the truss with the bars and joints asked about marked and named; return how many names found no room."""
    asked = {effect.name for effect in effects if effect.kind == "axial"}
    accented = Look("plain", 2 * BOLD, ACCENT)
    draw_bearings(strip, truss)
    draw_bars(strip, truss, [accented if member.name in asked else PLAIN_BAR for member in truss.members])
    draw_joints(strip, truss, deck.joints)
    draw_abutments(strip, deck)
    name_beds(strip, truss)
    left_out = 0
    for row, member in enumerate(truss.members):
        if member.name in asked:
            lettering = strip.sheet.lettering(member.name, bold=True, pad=0.7)
            spots = bar_spots(strip, truss, row, lettering, accented.weight)
            left_out += not strip.sheet.write(lettering, spots, ACCENT)
    joints = [effect.name.rpartition(" ")[0] for effect in effects if effect.kind != "axial"]
    for joint in dict.fromkeys(joints):
        accent_joint(strip, truss, joint)
        lettering = strip.sheet.lettering(joint, bold=True, pad=0.7)
        left_out += not strip.sheet.write(lettering, name_spots(strip, truss, joint, lettering), ACCENT)
    return left_out + name_joints(strip, truss, besides=frozenset(joints))
