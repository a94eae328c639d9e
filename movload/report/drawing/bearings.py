"""Bearings by their kind: a pinned one is a triangle, a sliding one a roller on its bed, turned to the bed's angle."""

from __future__ import annotations

import math
from dataclasses import dataclass
from typing import TYPE_CHECKING, Any, Final

from movload.report.drawing.elevation import PIN, bar_directions
from movload.report.drawing.ink import HAIR, PAPER, POINT, THIN
from movload.report.drawing.labels import Spot
from movload.report.drawing.left_out import ANGLE, LeftOut
from movload.report.drawing.words import plain

if TYPE_CHECKING:
    from movload.bridge.truss import Support, Truss
    from movload.report.drawing.sheet import Place, Sheet, Strip

_TALL: Final = 4.2  # mm from the pin's middle to the bed
_HALF: Final = 2.5  # mm, half the foot of a triangle
_BED: Final = 4.2  # mm, half the length of a bed
_HATCH: Final = 1.4  # mm, depth of the ground's hatching
_STROKES: Final = 7  # of that hatching
_STEEP: Final = 0.8  # sine of a bed's angle from which the side it is drawn on may be chosen

REACH: Final = _TALL + _HATCH + 0.6  # mm a bearing takes below its joint


def over(truss: Truss) -> float:
    """Return the room [mm] that bearings standing over their joints take above the truss."""
    return 1.6 * REACH if any(math.cos(_turn(truss, support)) < -0.1 for support in truss.supports) else 0.0


def draw_bearings(strip: Strip, truss: Truss) -> None:
    """Draw the bearing of each supported joint."""
    for support in truss.supports:
        joint = strip.mm(*truss.joints[support.joint])
        _draw_bearing(strip.sheet, support, _Stand(joint, _turn(truss, support)))


def name_beds(strip: Strip, truss: Truss) -> LeftOut:
    """Write the angle of each bed that is not level beside it, when all that it must avoid is drawn; count left out."""
    left_out = LeftOut()
    for support in truss.supports:
        if support.slides is None or support.slides % 360 == 0:
            continue
        stand = _Stand(strip.mm(*truss.joints[support.joint]), _turn(truss, support))
        lettering = strip.sheet.lettering(f"{plain(support.slides, 0 if support.slides % 1 == 0 else 1)}°")
        half = lettering.width / 2
        places = ((0, -1), (0.7, -1), (-0.7, -1), (1, -0.3), (-1, -0.3), (1, 0.5), (-1, 0.5), (0, -2))
        spots = [
            Spot(*stand.off(along * (_BED + 1 + half), -_TALL + up * (_HATCH + 1.2 + half))) for along, up in places
        ]
        left_out[ANGLE] += not strip.sheet.write(lettering, spots)
    return +left_out


@dataclass(frozen=True, slots=True)
class _Stand:
    """A bearing's joint [mm] and the turn of its symbol [radians]."""

    joint: Place
    turn: float

    def off(self, along: float, up: float) -> Place:
        """Return the point that lies ``along`` the bed and ``up`` its normal from the joint [mm]."""
        cosine, sine = math.cos(self.turn), math.sin(self.turn)
        return self.joint[0] + along * cosine - up * sine, self.joint[1] + along * sine + up * cosine


def _turn(truss: Truss, support: Support) -> float:
    """Return the symbol's turn [radians]: the bed's angle, or its back where a steep bed would stand in the truss."""
    angle = support.bed_angle
    if abs(math.sin(angle)) < _STEEP:
        return angle
    bars = bar_directions(truss, support.joint)
    front, back = (
        min(abs(math.remainder(angle + side - bar, math.tau)) for bar in bars) for side in (-math.pi / 2, math.pi / 2)
    )
    return angle + math.pi if back > front else angle


def _draw_bearing(sheet: Sheet, support: Support, stand: _Stand) -> None:
    """Draw a triangle or a roller, and the bed under it."""
    style: dict[str, Any] = {"linewidth": THIN / POINT, "zorder": 1.5}
    if support.slides is None:
        corners = [stand.off(*at) for at in ((0, -PIN * 0.6), (-_HALF, -_TALL), (_HALF, -_TALL))]
        sheet.shape(corners, PAPER, label=f"pinned {support.joint}", **style)
    else:
        radius = (_TALL - PIN) / 2
        sheet.disc(stand.off(0, -PIN - radius), radius, PAPER, label=f"roller {support.joint}", **style)
    left, right = stand.off(-_BED, -_TALL), stand.off(_BED, -_TALL)
    sheet.stroke([left, right], THIN, label=f"bed {support.joint}")
    for number in range(_STROKES):
        start = -_BED + (number + 0.6) * 2 * _BED / _STROKES
        sheet.stroke([stand.off(start, -_TALL), stand.off(start - _HATCH * 0.8, -_TALL - _HATCH)], HAIR)
    sheet.board.keep_clear([stand.joint, stand.off(0, -_TALL)], _HALF)
    ground = [stand.off(side * (_BED + 0.6), -_TALL - _HATCH / 2) for side in (-1, 1)]
    sheet.board.keep_clear(ground, _HATCH / 2)
