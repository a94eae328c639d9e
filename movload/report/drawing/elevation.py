"""The truss to scale: bars by what they carry, joints with their names."""

from __future__ import annotations

import math
from dataclasses import dataclass
from typing import TYPE_CHECKING, Final

import numpy as np

from movload.report.drawing.ink import ACCENT, FIRM, FRAME, INK, PAPER, POINT, THIN
from movload.report.drawing.labels import Lettering, Spot

if TYPE_CHECKING:
    from collections.abc import Sequence

    from movload.arrays import Floats
    from movload.bridge.truss import Truss
    from movload.report.drawing.sheet import Place, Strip

PIN: Final = 0.9  # mm, radius of a joint
_TRIM: Final = 1.15  # mm, how far a bar stops short of its joint
_IDLE: Final = 0.005  # of the largest force: a bar that carries less is drawn dotted
DOTS: Final = (0, (1.0, 2.2))  # strokes and gaps of a dotted bar, in its weight
ACCENT_STROKE: Final = 0.45  # mm, each of the two strokes of a governing bar in tension: heavier than any other's
_LEAST_OPEN: Final = 0.95  # mm, a double line must stay open on a copy
_LEAST_SOLID: Final = 0.4  # mm
_ALONG: Final = (0.5, 0.42, 0.58, 0.35, 0.65, 0.28, 0.72, 0.22, 0.78)
_AROUND: Final = (0.9, 1.7, 2.6, 3.6, 5.0, 6.4)  # mm between a joint and its name
_FLAT: Final = 0.35  # radians; a flatter bar is a chord's, whose label stands outside the truss first
_ASIDE: Final = 0.7  # mm between a bar and the ink beside it


@dataclass(frozen=True, slots=True)
class Look:
    """How a bar is drawn: ``style`` plain, open (tension), solid (compression) or dotted; ``weight`` [mm] overall."""

    style: str
    weight: float
    colour: str = INK


PLAIN_BAR: Final = Look("plain", FIRM)


def looks(forces: Floats, heaviest: float, accented: int = -1) -> list[Look]:
    """Return how each bar is drawn when it carries ``forces`` (M,) [N, + tension].

    Parameters
    ----------
    heaviest
        Weight of the bar with the largest force [mm].
    accented
        Row of the governing bar; -1 when no bar governs.
    """
    largest = float(np.abs(forces).max(initial=0.0))
    return [
        _look(float(force) / largest if largest else 0.0, heaviest, ACCENT if row == accented else INK)
        for row, force in enumerate(forces)
    ]


def _look(portion: float, heaviest: float, colour: str) -> Look:
    """Return how a bar is drawn that carries ``portion`` (-1 ... 1) of the largest force."""
    if abs(portion) < _IDLE:
        return Look("dotted", THIN, colour)
    style, least = ("open", _LEAST_OPEN) if portion > 0 else ("solid", _LEAST_SOLID)
    least *= 1.0 if colour == INK else 1.5
    return Look(style, least + (heaviest - least) * abs(portion), colour)


def heaviest_bar(depth: float) -> float:
    """Return the weight of the most loaded bar [mm] on a truss drawn ``depth`` [mm] deep."""
    return min(max(0.06 * depth, 1.3), 2.6)


def draw_bars(strip: Strip, truss: Truss, bars: Sequence[Look]) -> None:
    """Draw every bar, short of its joints, the heaviest first so that a light one is never hidden."""
    for row in sorted(range(len(bars)), key=lambda row: -bars[row].weight):
        start, end = (strip.mm(*truss.coordinates[joint]) for joint in truss.ends[row])
        share = min(_TRIM / math.dist(start, end), 0.4)
        line = truss.coordinates[truss.ends[row]]
        x, y = (line[0] + np.array([[share], [1 - share]]) * (line[1] - line[0])).T
        _draw_bar(strip, (x, y), bars[row], truss.members[row].name)
        strip.sheet.board.keep_clear([start, end], bars[row].weight / 2)


def _draw_bar(strip: Strip, line: tuple[Floats, Floats], look: Look, name: str) -> None:
    """Draw one bar; tension is a heavy stroke with a bare one in it."""
    dots = {"linestyle": DOTS, "dash_capstyle": "butt"} if look.style == "dotted" else {}
    strip.plot(*line, look.weight, look.colour, label=f"bar {name}", **dots)
    if look.style == "open":
        stroke = THIN if look.colour == INK else ACCENT_STROKE
        strip.plot(*line, look.weight - 2 * stroke, PAPER, label=f"bar {name} open")


def draw_joints(strip: Strip, truss: Truss, solid: frozenset[str] = frozenset()) -> None:
    """Draw every joint as a pin; those in ``solid`` filled."""
    for name, (x, y) in truss.joints.items():
        middle = strip.mm(x, y)
        strip.sheet.disc(middle, PIN, INK if name in solid else PAPER, label=f"joint {name}", linewidth=THIN / POINT)
        strip.sheet.board.keep_clear([middle], PIN)


def name_joints(strip: Strip, truss: Truss, *, besides: frozenset[str] = frozenset()) -> int:
    """Write the joints' names, but for those that stand already; return how many found no room."""
    left_out = 0
    for name in truss.joints:
        if name not in besides:
            lettering = strip.sheet.lettering(name)
            left_out += not strip.sheet.write(lettering, name_spots(strip, truss, name, lettering))
    return left_out


def name_spots(strip: Strip, truss: Truss, name: str, lettering: Lettering) -> list[Spot]:
    """Return where a joint's name may stand: around it, the widest gap between its bars first."""
    x, y = strip.mm(*truss.joints[name])
    bars = bar_directions(truss, name)
    turns = [math.radians(15 * step) for step in range(24)]

    def crowding(turn: float) -> float:
        gap = min((abs(math.remainder(turn - bar, math.tau)) for bar in bars), default=math.pi)
        upright = abs(math.remainder(2 * turn - math.pi, math.tau)) / 12  # straight above or below reads best
        return -min(gap, math.radians(80)) + upright

    best = sorted(turns, key=crowding)
    return [_beside((x, y), turn, PIN + away, lettering) for away in _AROUND for turn in best]


def _beside(point: Place, turn: float, away: float, lettering: Lettering) -> Spot:
    """Return the spot of a level text whose ink is ``away`` [mm] from a point in direction ``turn``."""
    cosine, sine = math.cos(turn), math.sin(turn)
    return Spot(point[0] + cosine * (away + lettering.width / 2), point[1] + sine * (away + lettering.ink_height / 2))


def bar_directions(truss: Truss, name: str) -> list[float]:
    """Return the direction [radians] of each bar that leaves a joint."""
    joint = truss.joint_index[name]
    directions = []
    for (start, end), (along, up) in zip(truss.ends, truss.spans, strict=True):
        if joint in {start, end}:
            sign = 1 if joint == start else -1
            directions.append(math.atan2(sign * up, sign * along))
    return directions


def bar_spots(strip: Strip, truss: Truss, row: int, lettering: Lettering, *, weight: float) -> list[Spot]:
    """Return where a bar's label may stand: along it on either side, outside the truss first, from its middle on."""
    start, end = (strip.mm(*truss.coordinates[joint]) for joint in truss.ends[row])
    if (round(end[0], 6), end[1]) < (round(start[0], 6), start[1]):  # read from the left, an upright one from below
        start, end = end, start
    turn = math.atan2(end[1] - start[1], end[0] - start[0])
    away = weight / 2 + _ASIDE + lettering.pad / 2 + lettering.ink_height / 2
    low, high = truss.coordinates[:, 1].min(), truss.coordinates[:, 1].max()
    is_low = (start[1] + end[1]) / 2 < strip.mm(0.0, float(low + high) / 2)[1]
    outside = -1 if is_low and abs(turn) < _FLAT else 1
    return [
        Spot(
            start[0] + share * (end[0] - start[0]) - side * away * math.sin(turn),
            start[1] + share * (end[1] - start[1]) + side * away * math.cos(turn),
            math.degrees(turn),
        )
        for share in _ALONG
        for side in (outside, -outside)
    ]


def mark_joint(strip: Strip, truss: Truss, name: str) -> bool:
    """Ring a joint in the accent and frame its name: the support or panel point whose row is shown."""
    middle = strip.mm(*truss.joints[name])
    strip.sheet.disc(middle, 2 * PIN, "none", ACCENT, linewidth=FIRM / POINT, label=f"mark {name}")
    strip.sheet.board.keep_clear([middle], 2 * PIN)
    lettering = strip.sheet.lettering(name, bold=True, pad=FRAME)
    return strip.sheet.write(lettering, name_spots(strip, truss, name, lettering), ACCENT)
