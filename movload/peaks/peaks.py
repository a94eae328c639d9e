"""The peaks of every row, and on request the placement that gives each.

Values come from the batch; which position gave a value is found again only for the part that is asked about, so that
screening many vehicles never pays for placements nobody reads.
"""

from __future__ import annotations

from dataclasses import dataclass
from functools import cached_property
from typing import TYPE_CHECKING, Final

import numpy as np

from movload.arrays import held
from movload.errors import InputError, UnknownNameError
from movload.peaks.candidates import LOST, candidates_of
from movload.peaks.governing import governing_candidates
from movload.peaks.placement import Placement, edge, on_the_ends, panel_loads
from movload.statics.part import Effect, Response, row_of

if TYPE_CHECKING:
    from collections.abc import Sequence

    from movload.arrays import Floats, Ints
    from movload.traffic.crossing import Train


_ROUNDINGS: Final = 16  # last places by which summed spacings may be off


@dataclass(frozen=True, slots=True)
class Peak:
    """An extreme of one effect over all positions.

    Attributes
    ----------
    value
        The effect [N, m], share and impact included; 0 with the vehicle off the bridge.
    position
        x of the front axle [m]; nan when the vehicle is off.
    heading
        +1 moving toward +x (the other axles stand at x - distance), -1 the other way; 0 when off.
    spacings
        The axle distances it was found with (A - 1) [m].
    axle, station
        The axle (0 = front) that stands on a station, and that station's number; -1 when off.
    case
        Title of the case that governs.
    lost
        Whether that axle stands just outside the station: it has just left, or not yet entered.
    placement
        The loads as they stand.
    """

    value: float
    position: float
    heading: int
    spacings: tuple[float, ...]
    axle: int
    station: int
    case: str
    placement: Placement
    lost: bool = False


@dataclass(frozen=True, slots=True)
class RowPeaks:
    """Highest and lowest peak of one row."""

    effect: Effect
    highest: Peak
    lowest: Peak


@dataclass(frozen=True, eq=False)
class PartPeaks:
    """The peaks of one part under the trains of one crossing.

    Attributes
    ----------
    response
        How the part answers.
    trains
        The trains swept; their envelope gives the peaks.
    highest, lowest
        (R,) with impact, both including 0.
    impact
        (R, 2) dynamic allowance on the highest and the lowest.
    """

    response: Response
    trains: tuple[Train, ...]
    highest: Floats
    lowest: Floats
    impact: Floats

    @cached_property
    def _governing(self) -> tuple[Ints, Ints]:
        """Train and candidate of every row's highest and lowest (2, R) each."""
        return governing_candidates(self.response, self.trains, self.impact)

    def train(self, row: int, side: int) -> Train:
        """Return the train that gives one row's highest (side 0) or lowest (side 1) peak."""
        return self.trains[int(self._governing[0][side, row]) if len(self.trains) > 1 else 0]

    def peak(self, row: int, side: int) -> Peak:
        """Return one row's highest (side 0) or lowest (side 1) peak."""
        value = float((self.highest, self.lowest)[side][row])
        if value == 0.0:
            return Peak(0.0, float("nan"), 0, (), -1, -1, "", Placement.off())
        train_number, candidate = (int(found[side, row]) for found in self._governing)
        train = self.trains[train_number]
        candidates = candidates_of(self.response.stations, [train], may_lose=self.response.condensed.jumps)
        stop, run = divmod(candidate, candidates.runs.train.size)
        x = candidates.standing(run, run + 1)[stop]
        heading, axle = int(candidates.runs.heading[run]), int(candidates.runs.axle[run])
        impact = np.full(train.shares.shape, self.impact[row, side] if train.dynamic else 0.0)
        stations = self.response.stations
        placement = Placement(on_the_ends(stations, x), train.vehicle.loads, train.shares, impact)
        count = stations.size
        return Peak(
            value,
            _front(stations, placement.x, heading * train.vehicle.distances, lost=stop - stations.size),
            heading,
            tuple(map(float, np.diff(train.vehicle.distances))),
            axle,
            stop if stop < count else (0, count - 1)[stop - count],
            train.case,
            placement,
            lost=stop >= count,
        )


def _front(stations: Floats, x: Floats, behind: Floats, *, lost: int) -> float:
    """Return the front axle's x, so that every axle found from it again is on the same side of an end station.

    Subtracting a distance again may round an axle that stands on an end station to just outside it.

    Parameters
    ----------
    x, behind
        Where the axles stand and heading times their distances (A,) [m].
    lost
        0 when an axle is just outside the first station, 1 the last, negative when none is.
    """
    front = float(x[0])
    if lost >= 0:
        return front + (1.0 if lost else -1.0) * LOST * edge(stations)
    on_first, on_last = x == stations[0], x == stations[-1]
    for _ in range(_ROUNDINGS):
        again = front - behind
        short, beyond = (again[on_first] < stations[0]).any(), (again[on_last] > stations[-1]).any()
        if short == beyond:  # neither; or both, when a vehicle is exactly as long as the deck but for round-off
            break
        front = float(np.nextafter(front, np.inf if short else -np.inf))
    return front


@dataclass(frozen=True, eq=False)
class Peaks:
    """The peaks of every row under one vehicle or crossing.

    Attributes
    ----------
    title
        What crossed.
    effects
        The rows (R).
    highest, lowest
        (R,) [N, m], both including 0: the vehicle can be off the bridge.
    parts
        The same part by part, from which a row's placement is found.
    """

    title: str
    effects: tuple[Effect, ...]
    highest: Floats
    lowest: Floats
    parts: tuple[PartPeaks, ...]

    def __getitem__(self, key: str | tuple[str, str]) -> RowPeaks:
        """Return one row's peaks by its name (a member's joints in either order) or by (part, name)."""
        return self.row(row_of(self.effects, key))

    def row(self, number: int) -> RowPeaks:
        """Return the peaks of row ``number``."""
        return RowPeaks(self.effects[number], self.peak(number, 0), self.peak(number, 1))

    def peak(self, number: int, side: int) -> Peak:
        """Return the highest (side 0) or lowest (side 1) peak of row ``number``."""
        part, inside = self.part_of(number)
        return part.peak(inside, side)

    def train(self, number: int, side: int) -> Train:
        """Return the train that gives the highest (side 0) or lowest (side 1) of row ``number``."""
        part, inside = self.part_of(number)
        return part.train(inside, side)

    def part_of(self, number: int) -> tuple[PartPeaks, int]:
        """Return the part that row ``number`` belongs to, and its row there."""
        inside = number
        for part in self.parts:
            if inside < part.highest.size:
                return part, inside
            inside -= part.highest.size
        raise UnknownNameError(f"row {number} is beyond the {len(self.effects)} there are", place="peaks")


def effects_at(response: Response, train: Train, position: float, heading: int) -> Floats:
    """Return every row's static effect (R,) with the front axle of a train at ``position`` [m].

    Raises
    ------
    InputError
        The heading is neither +1 nor -1, or the position is not a finite number.
    """
    if heading not in {1, -1} or not np.isfinite(position):
        raise InputError(f"heading is +1 or -1 and a position finite, got {heading} and {position} m", place="position")
    x = position - heading * train.vehicle.distances
    loads = panel_loads(response.stations, x[None, :], train.vehicle.loads * train.shares)
    values: Floats = response.under(loads.T)[:, 0]
    return values


def stacked(title: str, parts: Sequence[PartPeaks]) -> Peaks:
    """Return the peaks of all parts as one, rows in the order of the parts."""
    if len(parts) == 1:
        (part,) = parts
        return Peaks(title, part.response.effects, part.highest, part.lowest, (part,))
    return Peaks(
        title,
        tuple(effect for part in parts for effect in part.response.effects),
        held(np.concatenate([part.highest for part in parts])),
        held(np.concatenate([part.lowest for part in parts])),
        tuple(parts),
    )
