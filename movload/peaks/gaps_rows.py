"""Rows as a vehicle meets them, and its rigid groups: what the sweeps of variable gaps and convoys are made from."""

from __future__ import annotations

import math
from dataclasses import dataclass
from typing import TYPE_CHECKING, Final

import numpy as np

from movload.errors import InputError
from movload.peaks.gaps_bent import JUMP, Bent, bent
from movload.peaks.placement import edge, panels_at
from movload.statics.condensed import spread

if TYPE_CHECKING:
    from collections.abc import Callable, Iterable

    from movload.arrays import Floats
    from movload.statics.condensed import Condensed
    from movload.statics.part import AtStations
    from movload.traffic.crossing import Train

_NOISE: Final = 1e-12  # of the row's largest value under the same train: round-off, no peak
_NODES: Final = 60_000  # of functions carried at a time, about: their arrays stay in cache


@dataclass(frozen=True, slots=True, eq=False)
class Rows:
    """Rows seen by a vehicle that moves one way, each with the sign that makes what is sought its highest.

    Attributes
    ----------
    stations
        (B,) along the direction of travel [m], increasing: x, or -x for heading -1.
    ordinates
        (N, B) effect per unit load.
    heading
        +1 or -1.
    """

    stations: Floats
    ordinates: Floats
    heading: int

    @classmethod
    def seen(cls, stations: Floats, ordinates: Floats, heading: int) -> Rows:
        """Return rows as heading +1 or -1 meets them."""
        if heading == 1:
            return cls(stations, ordinates, 1)
        return cls(-stations[::-1], ordinates[:, ::-1], -1)

    @property
    def edge(self) -> float:
        """How far outside an end station an axle still stands on it [m]."""
        return edge(self.stations)

    def at(self, u: Floats) -> Floats:
        """Return every row's ordinate (N, K) at u (N or 1, K), 0 off the bridge."""
        panel = panels_at(self.stations, u)
        part = np.clip((u - self.stations[panel]) / np.diff(self.stations)[panel], 0.0, 1.0)
        if len(u) == 1:
            left, right = self.ordinates[:, panel[0]], self.ordinates[:, panel[0] + 1]
        else:
            left, right = (np.take_along_axis(self.ordinates, panel + one, axis=1) for one in (0, 1))
        on = (u >= self.stations[0] - self.edge) & (u <= self.stations[-1] + self.edge)
        ordinates: Floats = on * ((1.0 - part) * left + part * right)
        return ordinates


@dataclass(frozen=True, slots=True, eq=False)
class Group:
    """Axles that stand at fixed distances.

    Attributes
    ----------
    felt
        (A,) each axle as the part feels it [N].
    behind
        (A,) its distance behind the group's first [m].
    gap
        (least, greatest) distance of the next group's first axle behind this one's last [m]; nan for the last group.
    """

    felt: Floats
    behind: Floats
    gap: tuple[float, float]

    @property
    def length(self) -> float:
        """From the first axle to the last [m]."""
        return float(self.behind[-1])

    @property
    def window(self) -> tuple[float, float]:
        """(least, greatest) distance of the next group's first axle behind this one's first [m]."""
        return self.length + self.gap[0], self.length + self.gap[1]

    def lines(self, rows: Rows, relieving: float) -> Bent:
        """Return its effect on every row by its place."""
        u = self._nodes(rows, crossings=relieving < 1.0)
        values = np.zeros((len(rows.ordinates), u.shape[1]))
        for load, behind in zip(self.felt.tolist(), self.behind.tolist(), strict=True):
            values += relieved(load * rows.at(u - behind), relieving)
        owner = np.repeat(np.arange(len(values)), u.shape[1])
        return bent(owner, np.broadcast_to(u, values.shape).reshape(-1), values.reshape(-1), rows.edge)

    def _nodes(self, rows: Rows, *, crossings: bool) -> Floats:
        """Return the places (N or 1, K) where some axle is on a station, just outside an end, or on a zero crossing."""
        first, last = rows.stations[[0, -1]]
        outside = [first - JUMP * rows.edge, last + JUMP * rows.edge]
        at = np.concatenate((rows.stations, outside))[None, :]
        if crossings:
            zeros = _zero_crossings(rows)
            at = np.concatenate((np.broadcast_to(at, (len(zeros), at.shape[1])), zeros), axis=1)
        nodes: Floats = (at[:, :, None] + self.behind).reshape(len(at), -1)
        return nodes


def relieved(effects: Floats, relieving: float) -> Floats:
    """Return effects with those that relieve, below 0, multiplied."""
    return effects if relieving == 1.0 else np.where(effects < 0.0, relieving * effects, effects)


def _zero_crossings(rows: Rows) -> Floats:
    """Return where each row crosses 0 within each panel (N, B - 1); the panel's left station where it does not."""
    left, right = rows.ordinates[:, :-1], rows.ordinates[:, 1:]
    crosses = left * right < 0.0
    part = np.where(crosses, left, 0.0) / np.where(crosses, left - right, 1.0)
    zeros: Floats = rows.stations[:-1] + part * np.diff(rows.stations)
    return zeros


def groups_of(train: Train) -> tuple[Group, ...]:
    """Return a train's rigid groups, front to back."""
    groups, first, behind = [], 0, [0.0]
    for number, gap in enumerate([*train.vehicle.spacings, (math.nan, math.nan)]):
        if isinstance(gap, tuple):
            groups.append(Group(train.felt[first : number + 1], np.array(behind), gap))
            first, behind = number + 1, [0.0]
        else:
            behind.append(behind[-1] + gap)
    return tuple(groups)


def require_chained(trains: Iterable[Train]) -> None:
    """Refuse uniform loads that move; axles and variable spacings are counted by `Vehicle`."""
    for train in trains:
        if train.vehicle.strips or train.vehicle.tail is not None:
            raise InputError(
                "uniform loads cannot move with a vehicle whose spacings vary or that goes in a convoy",
                place=train.vehicle.title,
            )


def over_headings(
    condensed: Condensed, headings: tuple[int, ...], found: Callable[[tuple[int, ...]], tuple[Floats, Floats]]
) -> tuple[Floats, Floats]:
    """Return every row's extremes (..., R) from what ``found`` gives for distinct rows (..., C) in some headings.

    In one heading only, where a symmetric bridge answers for the other.
    """
    mirrored = len(headings) == 2 and condensed.symmetric
    highest, lowest = found((1,) if mirrored else headings)
    if mirrored:
        other = spread(highest, lowest, condensed.mirror, condensed.mirror_scale)
        highest, lowest = np.maximum(highest, other[0]), np.minimum(lowest, other[1])
    highest, lowest = np.maximum(highest, 0.0), np.minimum(lowest, 0.0)
    return spread(highest, lowest, condensed.row, condensed.scale)


def lines_of(response: AtStations) -> Floats:
    """Return every row's ordinates (R, B) of a linear response."""
    return response.under(np.eye(response.stations.size))


def of_rows(
    condensed: Condensed, headings: tuple[int, ...], best: Callable[[Rows], Floats], axles: int
) -> tuple[Floats, Floats]:
    """Return distinct rows' extremes (1, C) in some headings; ``best`` gives the highest of some rows (N,)."""
    stations, lines = condensed.response.stations, lines_of(condensed.response)
    step = max(1, _NODES // (2 * axles * stations.size))
    extremes = np.empty((2, 1, len(lines)))
    for first in range(0, len(lines), step):
        some = lines[first : first + step]
        signed = np.concatenate((some, -some))
        both = np.maximum.reduce([best(Rows.seen(stations, signed, heading)) for heading in headings])
        extremes[:, 0, first : first + step] = both[: len(some)], -both[len(some) :]
    return extremes[0], extremes[1]


def without_noise(highest: Floats, lowest: Floats) -> tuple[Floats, Floats]:
    """Return extremes with round-off written as 0."""
    noise = _NOISE * np.maximum(highest, -lowest)
    return np.where(highest <= noise, 0.0, highest), np.where(lowest >= -noise, 0.0, lowest)


def row_seen(response: AtStations, row: int, side: int, heading: int) -> Rows:
    """Return one row so that its highest (side 0) or lowest (side 1) is sought, as a heading meets it."""
    ordinates = (1.0, -1.0)[side] * lines_of(response)[row : row + 1]
    return Rows.seen(response.stations, ordinates, heading)
