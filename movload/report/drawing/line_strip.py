"""One influence line over the bridge: positive upward on grey, negative hatched, its kinks written on it."""

from __future__ import annotations

from dataclasses import dataclass
from typing import TYPE_CHECKING, Final

import numpy as np
from matplotlib.collections import LineCollection
from matplotlib.patches import Polygon

from movload.report.drawing.dimensions import row_height
from movload.report.drawing.ink import FINE, FIRM, GREY, HAIR, PALE, PAPER, POINT
from movload.report.drawing.labels import Lettering, Spot, squeezed
from movload.report.drawing.left_out import ORDINATE, ZERO, LeftOut
from movload.report.drawing.words import lengths, ordinate_decimals, ordinate_factor, ordinate_unit, sides, signed

if TYPE_CHECKING:
    from movload.arrays import Floats, Ints
    from movload.bridge.truss import Truss
    from movload.report.drawing.sheet import Place, Sheet, Strip, Window
    from movload.statics.influence import InfluenceLine
    from movload.units import UnitSystem

_PITCH: Final = 1.5  # mm between hatching strokes
_KINK: Final = 1e-6  # of the largest ordinate: a smaller change of direction is round-off
_RING: Final = 0.75  # mm, radius of the mark on a zero inside a panel
_AWAY: Final = (0.9, 1.8, 3.2, 5.0, 7.0, 9.5)  # mm between a point and the ink that speaks of it
_NEAR: Final = 2.0  # mm; a label further away gets a leader


@dataclass(frozen=True, slots=True)
class Band:
    """The part of the sheet one line is drawn in: ``bottom`` and ``height`` [mm]."""

    bottom: float
    height: float

    def strip(self, sheet: Sheet, window: Window, line: InfluenceLine) -> Strip:
        """Return axes in which the line fills the band, with room for a row of figures above and below."""
        high = max(float(line.ordinates.max()), 0.0)
        low = min(float(line.ordinates.min()), 0.0)
        room = row_height(sheet.size) + 1.0
        scale = (self.height - 2 * room) / ((high - low) or 1.0)
        return sheet.strip(window, self.bottom + room - low * scale, scale)


def draw_line(strip: Strip, line: InfluenceLine) -> None:
    """Draw axis, areas, the line itself and the marks on its zeros inside panels."""
    sheet, name = strip.sheet, line.effect.name
    x, y = with_zeros(line.stations, line.ordinates)
    _draw_areas(strip, x, y, name)
    ends = (strip.window.mm(float(line.stations[0])), strip.window.mm(float(line.stations[-1])))
    axis = [(ends[0] - 3.0, strip.zero), (ends[1] + 3.0, strip.zero)]
    sheet.stroke(axis, FINE, zorder=1.5, label=f"axis of {name}")
    strip.plot(line.stations, line.ordinates, FIRM, label=f"influence line of {name}")
    points = [strip.mm(*point) for point in zip(line.stations, line.ordinates, strict=True)]
    for end in (0, -1):
        foot = (points[end][0], strip.zero)
        sheet.stroke([foot, points[end]], FIRM)
        sheet.board.keep_clear([foot, points[end]], FIRM / 2)
    sheet.board.keep_clear(points, FIRM / 2)
    sheet.board.keep_clear(axis)


def _draw_areas(strip: Strip, x: Floats, y: Floats, name: str) -> None:
    """Fill the positive area and hatch the negative one."""
    for sign, word in ((1, "positive"), (-1, "negative")):
        part = sign * np.maximum(sign * y, 0.0)
        corners = np.column_stack((np.concatenate((x, x[::-1])), np.concatenate((part, np.zeros_like(part)))))
        face = PALE if sign > 0 else "none"
        area = Polygon(corners, facecolor=face, edgecolor="none", label=f"{word} area of {name}", zorder=0.5)
        strip.axes.add_patch(area)
        if sign < 0 and part.any():
            _hatch(strip, area, corners, name)


def _hatch(strip: Strip, area: Polygon, corners: Floats, name: str) -> None:
    """Draw strokes at 45 degrees on paper, cut to an area."""
    left, right = strip.window.mm(float(corners[:, 0].min())), strip.window.mm(float(corners[:, 0].max()))
    low, high = (strip.zero + float(y) * strip.scale for y in (corners[:, 1].min(), corners[:, 1].max()))
    starts = np.arange(left - (high - low), right, _PITCH * np.sqrt(2.0))
    strokes = [[(start, low), (start + high - low, high)] for start in starts]
    hatching = LineCollection(
        [[_data(strip, point) for point in stroke] for stroke in strokes],
        colors=GREY,
        linewidths=HAIR / POINT,
        label=f"hatching of {name}",
        zorder=0.6,
    )
    strip.axes.add_collection(hatching, autolim=False)
    hatching.set_clip_path(area)


def _data(strip: Strip, point: Place) -> Place:
    """Return a point [mm] in the strip's own axes."""
    window = strip.window
    return window.first + (point[0] - window.left) / window.scale, (point[1] - strip.zero) / strip.scale


def with_zeros(x: Floats, y: Floats) -> tuple[Floats, Floats]:
    """Return the line's points with those added at which it changes sign inside a panel."""
    crossed = np.flatnonzero(y[:-1] * y[1:] < 0)
    zeros = x[crossed] + (x[crossed + 1] - x[crossed]) * y[crossed] / (y[crossed] - y[crossed + 1])
    return np.insert(x, crossed + 1, zeros), np.insert(y, crossed + 1, 0.0)


def kinks(line: InfluenceLine) -> Ints:
    """Return the stations at which the line changes direction, and ends that are not zero, the largest first."""
    slopes = np.diff(line.ordinates) / np.diff(line.stations)
    largest = float(np.abs(line.ordinates).max())
    jump = np.abs(np.diff(slopes)) * np.diff(line.stations)[:-1] > _KINK * largest
    turning = np.concatenate(([True], jump, [True])) & (np.abs(line.ordinates) > _KINK * largest)
    found = np.flatnonzero(turning)
    return np.asarray(found[np.argsort(-np.abs(line.ordinates[found]), kind="stable")])


def write_kinks(strip: Strip, line: InfluenceLine, units: UnitSystem, *, taken: Floats) -> LeftOut:
    """Write the ordinate at each kink not already ``taken`` [m]; return how many found no room."""
    left_out = LeftOut()
    if not line.ordinates.any():
        lettering = strip.sheet.lettering("zero everywhere")
        middle = (strip.window.left + strip.window.right) / 2
        left_out[ORDINATE] += not strip.sheet.write(
            lettering, around((middle, strip.zero), lettering, upward=True), GREY
        )
    for station in kinks(line):
        x, y = float(line.stations[station]), float(line.ordinates[station])
        if not np.isclose(taken, x, rtol=0.0, atol=1e-6).any():
            left_out[ORDINATE] += not write_ordinate(strip, line, (x, y), units)
    return +left_out


def write_zeros(strip: Strip, line: InfluenceLine, units: UnitSystem) -> LeftOut:
    """Ring each zero inside a panel and write its x; return how many found no room."""
    x, _ = with_zeros(line.stations, line.ordinates)
    left_out = LeftOut()
    for zero in np.setdiff1d(x, line.stations):
        place = (strip.window.mm(float(zero)), strip.zero)
        strip.sheet.disc(place, _RING, PAPER, label=f"zero of {line.effect.name}")
        strip.sheet.board.keep_clear([place], _RING)
        lettering = strip.sheet.lettering(f"x = {lengths([float(zero)], units, rounded=True)[0]}")
        left_out[ZERO] += not strip.sheet.write(lettering, around(place, lettering, upward=False), GREY)
    return +left_out


def write_ordinate(
    strip: Strip, line: InfluenceLine, point: tuple[float, float], units: UnitSystem, *, bold: bool = False
) -> bool:
    """Write the ordinate at a point of the line, outside its area first; say whether there was room."""
    shown = point[1] * ordinate_factor(line.effect, units)
    lettering = strip.sheet.lettering(signed(shown, ordinate_decimals(line, units)), bold=bold)
    return strip.sheet.write(lettering, around(strip.mm(*point), lettering, upward=point[1] >= 0))


def around(point: Place, lettering: Lettering, *, upward: bool) -> list[Spot]:
    """Return where a level text may speak of a point: over it (or under it), then aside, then further with a leader."""
    up = 1 if upward else -1
    spots: list[Spot] = []
    for away in _AWAY:
        leader = point if away > _NEAR else None
        rise = up * (away + lettering.ink_height / 2)
        shifts = (aside * lettering.width for aside in (0.0, 0.35, -0.35, 0.55, -0.55))
        spots += [Spot(point[0] + shift, point[1] + rise, leader=leader) for shift in shifts]
        if leader is None:
            beside = lettering.width / 2 + away
            spots += [Spot(point[0] + side * beside, point[1] + lift) for lift in (0.0, rise / 2) for side in (1, -1)]
    return spots


def name_line(strip: Strip, line: InfluenceLine, units: UnitSystem, truss: Truss) -> None:
    """Write the row's name and unit at the left end of its axis, and which way it counts at the right end."""
    sheet, rise = strip.sheet, 0.55 * row_height(strip.sheet.size)
    name = squeezed(line.effect.name, sheet.size, strip.window.left - strip.window.side - 3.5, bold=True)
    sheet.write_from(name, strip.window.side, strip.zero + rise)
    sheet.write_from(sheet.lettering(ordinate_unit(line.effect, units)), strip.window.side, strip.zero - rise, GREY)
    right = strip.window.right + 3.5
    for side, word in zip((1, -1), sides(line.effect, truss), strict=True):
        sheet.write_from(sheet.lettering(word), right, strip.zero + side * rise)
