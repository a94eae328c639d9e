"""The axle train at its place on the deck, to scale: wheels, loads, spacings, heading, name and weight."""

from __future__ import annotations

from dataclasses import dataclass
from typing import TYPE_CHECKING, Final

import numpy as np
from matplotlib.patches import Circle

from movload.peaks.placement import edge
from movload.report.dimensions import dimension_string, row_height
from movload.report.ink import BOLD, EDGE, FIRM, GREY, HAIR, INK, PAPER, PASSIVE, POINT, THIN
from movload.report.labels import Lettering, Spot
from movload.report.words import figures, lengths, plain

if TYPE_CHECKING:
    from collections.abc import Sequence

    from movload.arrays import Floats
    from movload.peaks.peaks import Peak
    from movload.report.sheet import Place, Strip, Window
    from movload.units import UnitSystem

_ROOM: Final = 0.25  # of the bridge's length: how far beyond its ends wheels are drawn
_ARROW: Final = 4.5  # mm, least length of a load arrow
_HEAD: Final = 1.7  # mm, length of an arrow head
_NOSE: Final = 8.0  # mm, length of the arrow that shows the heading
_MOST_LEVELS: Final = 4  # rows in which axle loads may stand over one another
_BETWEEN: Final = 0.8  # mm between axle loads


@dataclass(frozen=True, slots=True, eq=False)
class Train:
    """Axles as they stand, what of them is drawn, and how high their loads are written.

    Attributes
    ----------
    x, loads
        Of each axle, front first (A,) [m], [N].
    on, shown
        Whether it stands on the bridge, and whether it is near enough to be drawn (A,).
    heading
        +1 or -1.
    title
        What crosses.
    room
        How far beyond the bridge's ends anything is drawn [m].
    """

    x: Floats
    loads: Floats
    on: Floats
    shown: Floats
    heading: int
    title: str
    room: float

    @classmethod
    def of(cls, peak: Peak, stations: Floats) -> Train:
        """Return the train of a peak's placement."""
        x, margin = peak.placement.x, edge(stations)
        on = (x >= stations[0] - margin) & (x <= stations[-1] + margin)
        room = _ROOM * (stations[-1] - stations[0])
        shown = (x >= stations[0] - room) & (x <= stations[-1] + room)
        return cls(x, peak.placement.load, on, shown, peak.heading, peak.case, float(room))

    def extent(self, first: float, last: float) -> tuple[float, float]:
        """Return the x of the bridge's ends, widened so that the drawn axles fit [m]."""
        drawn = self.x[self.shown]
        reach = self.room if self.is_cut(-1) else 0.0, self.room if self.is_cut(1) else 0.0
        return (
            float(min(first - reach[0], drawn.min(initial=first))),
            float(max(last + reach[1], drawn.max(initial=last))),
        )

    def is_cut(self, side: int) -> bool:
        """Say whether axles stand too far out on the left (-1) or the right (1) to be drawn."""
        return self.beyond(side) > 0

    def beyond(self, side: int) -> int:
        """Return how many axles on the left (-1) or the right (1) are not drawn."""
        drawn = self.x[self.shown]
        return int((~self.shown & (side * self.x > side * drawn.mean())).sum()) if drawn.size else 0

    def load_texts(self, units: UnitSystem) -> list[str]:
        """Return the axle loads in the units shown, all with as many decimals as the finest needs, at most 2."""
        shown = [units.shown(float(load), "force") for load in self.loads]
        decimals = next((d for d in (0, 1) if all(abs(round(load, d) - load) < 1e-3 * load for load in shown)), 2)
        return [plain(load, decimals) for load in shown]

    def gross(self, units: UnitSystem) -> str:
        """Return the weight of the whole vehicle with its unit."""
        weight = units.shown(float(self.loads.sum()), "force")
        return f"{plain(weight, min(figures(weight, 4), 1)).removesuffix('.0')} {units.force}"


def load_levels(places: Sequence[float], widths: Sequence[float]) -> list[int]:
    """Return the row each axle load is written in, 0 lowest, so that neither figures nor arrows touch; -1: no room.

    Parameters
    ----------
    places, widths
        Middle and width of each text [mm].
    """
    levels: list[int] = []
    for number, (place, width) in enumerate(zip(places, widths, strict=True)):
        free = [
            level
            for level in range(_MOST_LEVELS)
            if all(
                _apart(abs(place - places[other]), (width, widths[other]), (level, levels[other]))
                for other in range(number)
                if levels[other] >= 0
            )
        ]
        levels.append(free[0] if free else -1)
    return levels


def _apart(distance: float, widths: tuple[float, float], levels: tuple[int, int]) -> bool:
    """Say whether two texts, and the arrow that comes down from the higher one past the lower, keep apart."""
    if levels[0] == levels[1]:
        return distance > sum(widths) / 2 + _BETWEEN
    lower = widths[0] if levels[0] < levels[1] else widths[1]
    return distance > lower / 2 + _BETWEEN / 2


def wheel_radius(train: Train, scale: float) -> float:
    """Return the radius wheels are drawn with [mm]: about 0.45 m, but to be seen, and apart from each other."""
    places = np.sort(train.x[train.shown])
    gaps = np.diff(places)
    closest = float(gaps[gaps > 1e-6].min(initial=np.inf)) * scale
    return float(min(np.clip(0.45 * scale, 1.2, 2.3), 0.46 * closest))


@dataclass(frozen=True, slots=True, eq=False)
class TrainPlan:
    """How a train is laid out on the sheet, known before the sheet is: rows of loads and heights."""

    train: Train
    radius: float
    levels: tuple[int, ...]
    texts: tuple[str, ...]
    row: float

    @classmethod
    def of(cls, train: Train, window: Window, units: UnitSystem, size: float) -> TrainPlan:
        """Lay the axle loads out in rows."""
        texts = train.load_texts(units)
        drawn = [number for number in np.argsort(train.x, kind="stable") if train.shown[number]]
        places = [window.mm(float(train.x[number])) for number in drawn]
        found = load_levels(places, [Lettering(texts[number], size).width for number in drawn])
        levels = dict(zip(drawn, found, strict=True))
        in_order = tuple(levels.get(number, -1) for number in range(train.x.size))
        return cls(train, wheel_radius(train, window.scale), in_order, tuple(texts), row_height(size))

    def level(self, number: int) -> float:
        """Return how far above the deck an axle's load is written [mm]."""
        return 2 * self.radius + _ARROW + BOLD + (self.levels[number] + 0.5) * self.row * 0.8

    @property
    def above(self) -> float:
        """Room over the deck [mm]."""
        return 2 * self.radius + _ARROW + BOLD + (max(self.levels, default=0) + 1) * self.row * 0.8 + 1.3 * self.row

    @property
    def below(self) -> float:
        """Room under the deck, for the spacing string [mm]."""
        return 2 * self.row + 5.0


def draw_train(strip: Strip, plan: TrainPlan, units: UnitSystem) -> int:
    """Draw a train on its deck; return how many of its figures found no room."""
    train, sheet = plan.train, strip.sheet
    left_out = 0
    for number in range(train.x.size):
        if train.shown[number]:
            left_out += not _draw_axle(strip, plan, number)
    _draw_frame(strip, plan)
    left_out += _draw_spacings(strip, plan, units)
    _name_train(strip, plan, units)
    sheet.board.keep_clear([strip.mm(train.x.min(), 0), strip.mm(train.x.max(), 0)], 0.0)
    return left_out


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
        sheet.stroke([(place, foot + _HEAD), (place, foot + _ARROW)], THIN, edge_colour)
    else:
        level = deck + plan.level(number)
        lettering = sheet.lettering(plan.texts[number])
        sheet.stroke([(place, foot + _HEAD), (place, level - lettering.ink_height / 2 - 0.5)], THIN, edge_colour)
        sheet.write_at(lettering, Spot(place, level), ink)
    head = [(place, foot), (place - 0.6, foot + _HEAD), (place + 0.6, foot + _HEAD)]
    sheet.shape(head, edge_colour, edge_colour, linewidth=HAIR / POINT)
    return plan.levels[number] >= 0


def _draw_frame(strip: Strip, plan: TrainPlan) -> None:
    """Draw the frame that joins the wheels and the arrow that shows the heading; axles not drawn leave it cut."""
    train, sheet, window = plan.train, strip.sheet, strip.window
    level = strip.zero + 2 * plan.radius + BOLD / 2
    drawn = train.x[train.shown]
    left = window.left if train.is_cut(-1) else window.mm(float(drawn.min())) - plan.radius
    right = window.right if train.is_cut(1) else window.mm(float(drawn.max())) + plan.radius
    sheet.stroke([(left, level), (right, level)], BOLD, label="frame")
    front = right if train.heading > 0 else left
    for side, end in ((-1, left), (1, right)):
        if train.is_cut(side):
            _draw_cut(strip, plan, (end, level), side)
    if not train.is_cut(train.heading):
        tip, back = front + train.heading * _NOSE, front + train.heading * (_NOSE - 2.6)
        sheet.stroke([(front, level), (back, level)], FIRM, label="heading")
        sheet.shape([(tip, level), (back, level + 1.1), (back, level - 1.1)], INK, label="heading arrow")


def _draw_cut(strip: Strip, plan: TrainPlan, end: Place, side: int) -> None:
    """Show that a train goes on beyond what is drawn, and how many axles stand there."""
    sheet, ahead = strip.sheet, side == plan.train.heading
    for shift in (0.4, 1.3):
        x = end[0] + side * shift
        sheet.stroke([(x - 0.6, end[1] - 1.3), (x + 0.6, end[1] + 1.3)], THIN)
    words = f"{plan.train.beyond(side)} more"
    arrow = {1: f"{words} →", -1: f"← {words}"}[side] if ahead else words
    lettering = sheet.lettering(arrow)
    middle = end[0] + side * (2.8 + lettering.width / 2)
    sheet.write(lettering, [Spot(middle, end[1]), Spot(middle, end[1] + 4.0), Spot(middle, end[1] + 8.0)], GREY)


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
    lettering = sheet.lettering(f"{train.title}, {train.gross(units)}", bold=True)
    drawn = train.x[train.shown]
    middle = strip.window.mm(float(drawn.min() + drawn.max()) / 2)
    half = lettering.width / 2 + EDGE
    middle = min(max(middle, half), sheet.width - half)
    sheet.write_at(lettering, Spot(middle, strip.zero + plan.above - plan.row * 0.6), INK)

