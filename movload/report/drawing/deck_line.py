"""The loaded chord as it is drawn: where its panel points stand, the abutments at its ends, the depth over it."""

from __future__ import annotations

import math
from dataclasses import dataclass
from itertools import combinations
from typing import TYPE_CHECKING, Final

import numpy as np

from movload.arrays import held
from movload.bridge.deck import stations_of
from movload.report.drawing.ink import HAIR, INK, PAPER, POINT, THIN
from movload.report.drawing.labels import Spot

if TYPE_CHECKING:
    from collections.abc import Sequence

    from movload.arrays import Floats
    from movload.bridge.deck import PanelPoint
    from movload.bridge.truss import Truss
    from movload.report.drawing.sheet import Place, Strip
    from movload.statics.part import Response

_SAME_PLACE: Final = 1e-6  # m
_STRAIGHT: Final = 1e-6  # radians; bars that differ less are one line
_STEEP: Final = 0.5  # radians; a chord is flatter, an end post steeper


@dataclass(frozen=True, slots=True, eq=False)
class DeckLine:
    """Panel points as they stand.

    Attributes
    ----------
    names
        Joint of each panel point; "" for an abutment (B).
    stations, heights
        x and y of each (B,) [m]; an abutment stands as high as the joint beside it.
    """

    names: tuple[str, ...]
    stations: Floats
    heights: Floats

    @classmethod
    def of(cls, truss: Truss, panel_points: Sequence[PanelPoint]) -> DeckLine:
        """Return the deck line of a truss.

        Raises
        ------
        InputError, UnknownNameError
            Panel points that are not joints, or not in order.
        """
        stations = stations_of(truss, panel_points)
        names = tuple(point if isinstance(point, str) else "" for point in panel_points)
        known = [number for number, name in enumerate(names) if name]
        heights = np.interp(stations, stations[known], [truss.joints[names[number]][1] for number in known])
        return cls(names, stations, held(heights))

    @classmethod
    def under(cls, truss: Truss, lines: Response) -> DeckLine:
        """Return the deck line that influence lines were made for: its joints are those that have a row "down"."""
        loaded = [effect.name.removesuffix(" down") for effect in lines.effects if effect.kind == "down"]
        by_x = {truss.joints[name][0]: name for name in loaded}
        return cls.of(truss, [by_x.get(float(x), float(x)) for x in lines.stations])

    @property
    def joints(self) -> frozenset[str]:
        """Names of the joints the deck loads."""
        return frozenset(filter(None, self.names))

    def extent(self, truss: Truss) -> tuple[float, float, float, float]:
        """Return first and last x, least and greatest y of truss and deck [m]."""
        (first, low), (last, high) = truss.coordinates.min(axis=0), truss.coordinates.max(axis=0)
        first, last = min(first, self.stations[0]), max(last, self.stations[-1])
        return float(first), float(last), float(low), float(max(high, low + 1e-3 * (last - first)))

    def depths(self, truss: Truss) -> list[tuple[float, float, float]]:
        """Return x, depth and y [m] of each joint of the chord opposite the loaded one, from left to right."""
        columns: dict[float, tuple[float, float]] = {}
        for joint in np.argsort(truss.coordinates[:, 0], kind="stable"):
            x, y = map(float, truss.coordinates[joint])
            depth = y - float(np.interp(x, self.stations, self.heights))
            if abs(depth) > _SAME_PLACE and _is_outermost(truss, (x, y), depth) and not _in_a_post(truss, int(joint)):
                columns[round(x, 6)] = max((abs(depth), y), columns.get(round(x, 6), (0.0, 0.0)))
        return [(x, depth, y) for x, (depth, y) in columns.items()]


def _is_outermost(truss: Truss, point: Place, depth: float) -> bool:
    """Say whether no bar passes beyond a joint, seen from the loaded chord."""
    start, end = (truss.coordinates[joint] for joint in truss.ends.T)
    left, right = np.minimum(start[:, 0], end[:, 0]), np.maximum(start[:, 0], end[:, 0])
    over = (left < point[0] - _SAME_PLACE) & (right > point[0] + _SAME_PLACE)
    share = (point[0] - start[over, 0]) / (end[over, 0] - start[over, 0])
    crossing = start[over, 1] + share * (end[over, 1] - start[over, 1])
    return not ((crossing - point[1]) * np.sign(depth) > _SAME_PLACE).any()


def _in_a_post(truss: Truss, joint: int) -> bool:
    """Say whether a joint only divides a steep straight bar, such as a subdivided end post: that is no chord."""
    turns = [
        math.atan(up / along)
        for (start, end), (along, up) in zip(truss.ends, truss.spans, strict=True)
        if joint in {start, end} and abs(along) > _SAME_PLACE
    ]
    lines = [first for first, second in combinations(turns, 2) if abs(first - second) < _STRAIGHT]
    return any(abs(turn) > _STEEP for turn in lines)


def draw_abutments(strip: Strip, deck: DeckLine) -> None:
    """Draw the abutment under each end that is no joint, and the stringer that reaches it."""
    for end, inner, side in ((0, 1, -1), (-1, -2, 1)):
        if deck.names[end]:
            continue
        x, y = strip.mm(deck.stations[end], deck.heights[end])
        reach = strip.mm(deck.stations[inner], deck.heights[inner])
        strip.sheet.stroke([(x, y), reach], THIN, label="stringer")
        corners = [(x + side * 4.5, y - 0.4), (x - side * 0.6, y - 0.4), (x - side * 0.6, y - 2.0)]
        corners += [(x + side * 1.0, y - 2.0), (x + side * 1.0, y - 6.5), (x + side * 4.5, y - 6.5)]
        strip.sheet.shape(corners, PAPER, INK, linewidth=THIN / POINT, label="abutment")
        for step in range(5):
            low = y - 6.2 + step * 1.1
            strip.sheet.stroke([(x + side * 1.2, low), (x + side * 4.3, low + 1.4)], HAIR)
        strip.sheet.board.keep_clear([(x, y), reach])
        strip.sheet.board.keep_clear([(x + side * 2.5, y - 1), (x + side * 2.5, y - 6)], 2.2)
        lettering = strip.sheet.lettering("abutment")
        spots = [Spot(x + side * (lettering.width / 2 - 0.6), y + 1.0 + lettering.ink_height / 2)]
        strip.sheet.write(lettering, [*spots, Spot(x + side * 2, y + 3.5)])
