"""An axle train as it will be drawn: which axles are near enough, how large its wheels, how high its loads stand."""

from __future__ import annotations

from dataclasses import dataclass
from typing import TYPE_CHECKING, Final

import numpy as np

from movload.peaks.placement import edge
from movload.report.drawing.dimensions import row_height
from movload.report.drawing.ink import BOLD
from movload.report.drawing.labels import Lettering
from movload.report.drawing.words import figures, plain

if TYPE_CHECKING:
    from collections.abc import Sequence

    from numpy.typing import NDArray

    from movload.arrays import Floats
    from movload.peaks.peaks import Peak
    from movload.report.drawing.sheet import Window
    from movload.units import UnitSystem

_ROOM: Final = 0.25  # of the bridge's length: how far beyond its ends wheels are drawn
ARROW: Final = 4.5  # mm, least length of a load arrow
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
    abreast
        How many of it stand side by side.
    beside
        Whether other traffic stands beside it, which is not drawn.
    """

    x: Floats
    loads: Floats
    on: NDArray[np.bool_]
    shown: NDArray[np.bool_]
    heading: int
    title: str
    room: float
    abreast: int
    beside: bool = False

    @classmethod
    def of(cls, peak: Peak, stations: Floats) -> Train:
        """Return the train of a peak's placement; of vehicles that stand side by side at the same x one is drawn."""
        stands, margin = peak.placement, edge(stations)
        own = ~stands.fixed
        abreast = np.unique(stands.vehicle[own]).size
        first = own & (stands.vehicle == stands.vehicle[own].min(initial=0))
        alike = first.sum() * abreast == own.sum() and bool((stands.x[own] == np.tile(stands.x[first], abreast)).all())
        drawn = first if alike else own
        x, loads = stands.x[drawn], stands.load[drawn]
        on = (x >= stations[0] - margin) & (x <= stations[-1] + margin)
        room = _ROOM * (stations[-1] - stations[0])
        shown = (x >= stations[0] - room) & (x <= stations[-1] + room)
        return cls(x, loads, on, shown, peak.heading, peak.case, float(room), abreast if alike else 1,
                   bool(stands.fixed.any()))  # fmt: skip

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
        each = f" each, {self.abreast} side by side" if self.abreast > 1 else ""
        each += "; other traffic beside it is not drawn" if self.beside else ""
        return f"{plain(weight, min(figures(weight, 4), 1)).removesuffix('.0')} {units.force}{each}"


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
        return 2 * self.radius + ARROW + BOLD + (self.levels[number] + 0.5) * self.row * 0.8

    @property
    def above(self) -> float:
        """Room over the deck [mm]."""
        return 2 * self.radius + ARROW + BOLD + (max(self.levels, default=0) + 1) * self.row * 0.8 + 1.3 * self.row

    @property
    def below(self) -> float:
        """Room under the deck, for the spacing string [mm]."""
        return 2 * self.row + 5.0
