"""The truss as it stands: joints, bars, bearings, panel points and every length."""

from __future__ import annotations

from dataclasses import dataclass
from typing import TYPE_CHECKING, Final

import numpy as np

from movload.report.drawing.bearings import REACH, draw_bearings, name_beds, over
from movload.report.drawing.deck_line import DeckLine, draw_abutments
from movload.report.drawing.dimensions import dimension_string, row_height, row_of_words, upright_dimension
from movload.report.drawing.elevation import PLAIN_BAR, bar_spots, draw_bars, draw_joints, name_joints
from movload.report.drawing.frame import HEADING, caption_height, draw_caption, draw_heading, fitted
from movload.report.drawing.ink import FAINT, FIRM, HAIR
from movload.report.drawing.left_out import BAR_NAME, DEPTH, JOINT_NAME, LENGTH, STATION, LeftOut, told_left_out
from movload.report.drawing.sheet import Sheet, Window
from movload.report.drawing.words import lengths, origin

if TYPE_CHECKING:
    from collections.abc import Sequence

    from matplotlib.figure import Figure

    from movload.bridge.deck import PanelPoint
    from movload.bridge.truss import Truss
    from movload.report.drawing.sheet import Strip
    from movload.units import UnitSystem

_TALLEST: Final = 130.0  # mm of paper for the truss's own height
_ABOVE: Final = 9.0  # mm over the truss for names
_BELOW: Final = REACH + 5.0  # mm under it for bearings and names
_SAME_X: Final = 1e-6  # m; joints closer in x stand over one another


def elevation_figure(truss: Truss, panel_points: Sequence[PanelPoint], units: UnitSystem, *, title: str) -> Figure:
    """Return the drawing of a truss as it stands.

    Parameters
    ----------
    truss
        Drawn to scale, +x to the right.
    panel_points
        Joints of the loaded chord in order; the first or last may be an abutment's x [m].
    units
        Lengths are written in its length unit.
    title
        Written over the drawing.

    Returns
    -------
    Figure
        As wide as its labels need, 300 to 420 mm.

    Raises
    ------
    InputError, UnknownNameError
        Panel points that are not joints, or not in order.
    """
    deck = DeckLine.of(truss, panel_points)
    asked = _Asked(truss, deck, units, title)
    return fitted(lambda width, size, known: _drawn(asked, width, size, known))


@dataclass(frozen=True, slots=True, eq=False)
class _Asked:
    """What one elevation shows."""

    truss: Truss
    deck: DeckLine
    units: UnitSystem
    title: str


def _drawn(asked: _Asked, width: float, size: float, known: LeftOut) -> tuple[Sheet, LeftOut]:
    """Draw one attempt whose caption tells the ``known`` to be left out; return the sheet and what found no room."""
    truss, deck, units = asked.truss, asked.deck, asked.units
    row = row_height(size)
    first, last, low, high = deck.extent(truss)
    window = Window.fitting(first, last, width, steepest=_TALLEST / (high - low))
    caption = (
        f"To scale; lengths in {units.length}. {origin(truss, units)}. "
        f"Filled joint: panel point, where the deck loads the truss. {told_left_out(known)}"
    )
    foot = caption_height(caption, width, size)
    strings = 2 * (row + 3.0) + 2 * row
    zero = foot + strings + _BELOW - low * window.scale
    sheet = Sheet(width, zero + high * window.scale + _ABOVE + over(truss) + HEADING, size)
    draw_heading(sheet, asked.title, "elevation")
    draw_caption(sheet, caption)
    strip = sheet.strip(window, zero, window.scale)
    left_out = _draw_truss(strip, truss, deck)
    left_out += _draw_strings(strip, truss, deck, units, foot=foot)
    return sheet, left_out


def _draw_truss(strip: Strip, truss: Truss, deck: DeckLine) -> LeftOut:
    """Draw bars, bearings, joints and abutments; return which names found no room."""
    draw_bearings(strip, truss)
    draw_bars(strip, truss, [PLAIN_BAR] * len(truss.members))
    draw_joints(strip, truss, deck.joints)
    draw_abutments(strip, deck)
    left_out = name_beds(strip, truss)
    left_out[JOINT_NAME] = name_joints(strip, truss)
    left_out[BAR_NAME] = _name_bars(strip, truss)
    return +left_out


def _name_bars(strip: Strip, truss: Truss) -> int:
    """Write the names of bars that are not simply called by their joints; return how many found no room."""
    left_out = 0
    for row, member in enumerate(truss.members):
        if member.name not in {f"{member.start}-{member.end}", f"{member.end}-{member.start}"}:
            lettering = strip.sheet.lettering(member.name)
            left_out += not strip.sheet.write(lettering, bar_spots(strip, truss, row, lettering, weight=FIRM))
    return left_out


def _draw_strings(strip: Strip, truss: Truss, deck: DeckLine, units: UnitSystem, *, foot: float) -> LeftOut:
    """Draw panel lengths, the overall length, the rows of x and depth and the greatest depth; count left out."""
    sheet, window, row = strip.sheet, strip.window, row_height(strip.sheet.size)
    upper = foot + 2 * row + 2.0 + row + 3.0
    places = [window.mm(x) for x in deck.stations]
    left_out = LeftOut()
    left_out[LENGTH] = dimension_string(sheet, upper, places, lengths(np.diff(deck.stations), units))
    ends = (float(truss.coordinates[:, 0].min()), float(truss.coordinates[:, 0].max()))
    overall = lengths([ends[1] - ends[0]], units)
    left_out[LENGTH] += dimension_string(sheet, upper - row - 3.0, [window.mm(x) for x in ends], overall)
    for place, height in zip(places, deck.heights, strict=True):
        sheet.stroke([(place, strip.mm(0, height)[1]), (place, foot + 2 * row + 1)], HAIR, FAINT, zorder=-5)
    sheet.write_from(sheet.lettering(f"x, {units.length}"), window.side, foot + 1.5 * row + 1)
    left_out[STATION] = row_of_words(sheet, foot + 1.5 * row + 1, places, lengths(deck.stations, units))
    left_out[DEPTH] = _draw_depths(strip, truss, deck, units, level=foot + 0.5 * row + 1)
    return +left_out


def _draw_depths(strip: Strip, truss: Truss, deck: DeckLine, units: UnitSystem, *, level: float) -> int:
    """Draw the greatest depth as an upright dimension and every depth in a row; return how many found no room."""
    sheet, window, columns = strip.sheet, strip.window, deck.depths(truss)
    if not columns:
        return 0
    texts = lengths([depth for _, depth, _ in columns], units)
    deepest = max(range(len(columns)), key=lambda number: columns[number][1])
    x, _, top = columns[deepest]
    chord = strip.mm(deck.stations[-1], deck.heights[-1])
    left_out = int(not upright_dimension(sheet, window.right + 14.0, [strip.mm(x, top), chord], texts[deepest]))
    sheet.write_from(sheet.lettering(f"depth, {units.length}"), window.side, level)
    return left_out + row_of_words(sheet, level, [window.mm(x) for x, _, _ in columns], texts)
