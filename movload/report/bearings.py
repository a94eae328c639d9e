"""Bearings by their kind: a pinned one is a triangle, a sliding one a roller on its bed, turned to the bed's angle."""

from __future__ import annotations

import math
from typing import TYPE_CHECKING, Final

from movload.report.elevation import PIN
from movload.report.ink import HAIR, INK, PAPER, POINT, THIN
from movload.report.labels import Lettering, Spot

if TYPE_CHECKING:
    from movload.bridge.truss import Support, Truss
    from movload.report.sheet import Place, Sheet, Strip

_TALL: Final = 4.2  # mm from the pin's middle to the bed
_HALF: Final = 2.5  # mm, half the foot of a triangle
_BED: Final = 4.2  # mm, half the length of a bed
_HATCH: Final = 1.4  # mm, depth of the ground's hatching

REACH: Final = _TALL + _HATCH + 0.6  # mm a bearing takes below its joint


def draw_bearings(strip: Strip, truss: Truss) -> None:
    """Draw the bearing under each supported joint; an inclined bed has its angle written beside it."""
    for support in truss.supports:
        draw_bearing(strip, truss, support)


def draw_bearing(strip: Strip, truss: Truss, support: Support, colour: str = INK) -> None:
    """Draw one bearing."""
    sheet, joint = strip.sheet, strip.mm(*truss.joints[support.joint])
    if support.slides is None:
        corners = [_off(support, joint, *at) for at in ((0, -PIN * 0.6), (-_HALF, -_TALL), (_HALF, -_TALL))]
        sheet.shape(corners, PAPER, colour, linewidth=THIN / POINT, zorder=1.5, label=f"pinned {support.joint}")
    else:
        radius = (_TALL - PIN) / 2
        middle = _off(support, joint, 0, -PIN - radius)
        sheet.disc(middle, radius, PAPER, colour, linewidth=THIN / POINT, zorder=1.5, label=f"roller {support.joint}")
    _draw_bed(sheet, support, joint, colour)
    _name_angle(sheet, support, joint)


def _off(support: Support, joint: Place, along: float, up: float) -> Place:
    """Return the point that lies ``along`` the bed and ``up`` its normal from a joint [mm]."""
    cosine, sine = math.cos(support.bed_angle), math.sin(support.bed_angle)
    return joint[0] + along * cosine - up * sine, joint[1] + along * sine + up * cosine


def _draw_bed(sheet: Sheet, support: Support, joint: Place, colour: str) -> None:
    """Draw the bed's line with short strokes of ground beneath it."""
    left, right = (_off(support, joint, side * _BED, -_TALL) for side in (-1, 1))
    sheet.stroke([left, right], THIN, colour, label=f"bed {support.joint}")
    strokes = 7
    for number in range(strokes):
        start = -_BED + (number + 0.6) * 2 * _BED / strokes
        ends = [
            _off(support, joint, start, -_TALL),
            _off(support, joint, start - _HATCH * 0.8, -_TALL - _HATCH),
        ]
        sheet.stroke(ends, HAIR, colour)
    sheet.board.keep_clear([joint, _off(support, joint, 0, -_TALL)], _HALF)
    sheet.board.keep_clear([left, right], _HATCH)


def _name_angle(sheet: Sheet, support: Support, joint: Place) -> None:
    """Write the angle of a bed that is not level, beside the bed."""
    if support.slides is None or support.slides % 360 == 0:
        return
    lettering = Lettering(f"{support.slides:g}°", sheet.size)
    spots = []
    for along, up in ((0, -1.0), (1, -0.4), (-1, -0.4), (1, 0.2), (-1, 0.2)):
        reach = (along * (_BED + 1 + lettering.width / 2), -_TALL + up * (_HATCH + 2 + lettering.width / 2))
        spots.append(Spot(*_off(support, joint, *reach)))
    sheet.write(lettering, spots)

