"""The axle train at its place on the deck, to scale: wheels, loads, spacings, heading, name and weight."""

from __future__ import annotations

from typing import TYPE_CHECKING, Final

import numpy as np
from matplotlib.patches import Circle

from movload.report.drawing.dimensions import dimension_string
from movload.report.drawing.ink import BOLD, EDGE, FIRM, GREY, HAIR, INK, PAPER, PASSIVE, POINT, THIN
from movload.report.drawing.labels import Spot, squeezed
from movload.report.drawing.left_out import AXLE_LOAD, AXLE_SPACING, AXLES_BEYOND, LeftOut
from movload.report.drawing.train import ARROW
from movload.report.drawing.words import lengths
from movload.report.phrases import ARROWS

if TYPE_CHECKING:
    from movload.report.drawing.sheet import Place, Strip
    from movload.report.drawing.train import TrainPlan
    from movload.units import UnitSystem

_HEAD: Final = 1.7  # mm, length of an arrow head
_NOSE: Final = 8.0  # mm, length of the arrow that shows the heading


def draw_train(strip: Strip, plan: TrainPlan, units: UnitSystem) -> LeftOut:
    """Draw a train on its deck; return which of its figures found no room."""
    left_out = LeftOut()
    left_out[AXLE_LOAD] = sum(not _draw_axle(strip, plan, int(number)) for number in np.flatnonzero(plan.train.shown))
    left_out[AXLES_BEYOND] = _draw_frame(strip, plan)
    left_out[AXLE_SPACING] = _draw_spacings(strip, plan, units)
    _name_train(strip, plan, units)
    return +left_out


def _draw_axle(strip: Strip, plan: TrainPlan, number: int) -> bool:
    """Draw a wheel and the arrow of its load, grey when off the bridge; say whether the load could be written."""
    train, radius, sheet = plan.train, plan.radius, strip.sheet
    x, on = float(train.x[number]), bool(train.on[number])
    face, edge_colour, ink = (INK, INK, INK) if on else (PAPER, PASSIVE, GREY)
    wheel = Circle((x, radius / strip.scale), radius / strip.scale, facecolor=face, edgecolor=edge_colour)
    wheel.set(linewidth=FIRM / POINT, label=f"wheel {number}", clip_on=False, zorder=3)
    strip.axes.add_patch(wheel)
    place, deck = strip.mm(x, 0.0)
    foot = deck + 2 * radius + BOLD
    if plan.levels[number] < 0:
        sheet.stroke([(place, foot + _HEAD), (place, foot + ARROW)], THIN, edge_colour)
    else:
        level = deck + plan.level(number)
        lettering = sheet.lettering(plan.texts[number])
        sheet.stroke([(place, foot + _HEAD), (place, level - lettering.ink_height / 2 - 0.5)], THIN, edge_colour)
        sheet.write_at(lettering, Spot(place, level), ink)
    head = [(place, foot), (place - 0.6, foot + _HEAD), (place + 0.6, foot + _HEAD)]
    sheet.shape(head, edge_colour, edge_colour, linewidth=HAIR / POINT)
    return plan.levels[number] >= 0


def _draw_frame(strip: Strip, plan: TrainPlan) -> int:
    """Draw the frame that joins the wheels and the arrow that shows the heading; axles not drawn leave it cut.

    Return how many counts of such axles found no room.
    """
    train, sheet, window = plan.train, strip.sheet, strip.window
    level = strip.zero + 2 * plan.radius + BOLD / 2
    drawn = train.x[train.shown]
    left = window.left if train.is_cut(-1) else window.mm(float(drawn.min())) - plan.radius
    right = window.right if train.is_cut(1) else window.mm(float(drawn.max())) + plan.radius
    sheet.stroke([(left, level), (right, level)], BOLD, label="frame")
    front = right if train.heading > 0 else left
    ends = ((-1, left), (1, right))
    left_out = sum(not _draw_cut(strip, plan, (end, level), side) for side, end in ends if train.is_cut(side))
    if not train.is_cut(train.heading):
        tip, back = front + train.heading * _NOSE, front + train.heading * (_NOSE - 2.6)
        sheet.stroke([(front, level), (back, level)], FIRM, label="heading")
        sheet.shape([(tip, level), (back, level + 1.1), (back, level - 1.1)], INK, label="heading arrow")
    return left_out


def _draw_cut(strip: Strip, plan: TrainPlan, end: Place, side: int) -> bool:
    """Show that a train goes on beyond what is drawn, and how many axles stand there; say whether there was room."""
    sheet, ahead = strip.sheet, side == plan.train.heading
    for shift in (0.4, 1.3):
        x = end[0] + side * shift
        sheet.stroke([(x - 0.6, end[1] - 1.3), (x + 0.6, end[1] + 1.3)], THIN)
    words = [f"{plan.train.beyond(side)} more", ARROWS[side] if ahead else ""]
    lettering = sheet.lettering(" ".join(words[::side]).strip())
    middle = end[0] + side * (2.8 + lettering.width / 2)
    return sheet.write(lettering, [Spot(middle, end[1] + rise) for rise in (0.0, 4.0, 8.0)], GREY)


def _draw_spacings(strip: Strip, plan: TrainPlan, units: UnitSystem) -> int:
    """Draw the spacing string under the deck; return how many spacings found no room."""
    drawn = np.unique(plan.train.x[plan.train.shown])
    if drawn.size < 2:
        return 0
    places = [strip.window.mm(float(x)) for x in drawn]
    level = strip.zero - plan.row - 2.2
    return dimension_string(strip.sheet, level, places, lengths(np.diff(drawn), units))


def _name_train(strip: Strip, plan: TrainPlan, units: UnitSystem) -> None:
    """Write what crosses and its whole weight over the train."""
    train, sheet = plan.train, strip.sheet
    room = sheet.width - 2 * EDGE
    lettering = squeezed(f"{train.title}, {train.gross(units)}", sheet.size, room, bold=True)
    drawn = train.x[train.shown]
    middle = strip.window.mm(float(drawn.min() + drawn.max()) / 2)
    half = lettering.width / 2 + EDGE
    middle = min(max(middle, half), sheet.width - half)
    sheet.write_at(lettering, Spot(middle, strip.zero + plan.above - plan.row * 0.6), INK)
