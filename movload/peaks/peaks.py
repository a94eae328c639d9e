"""The peaks of every row, and on request the placement that gives each.

Values come from the batch; which position gave a value is found again only for the part that is asked about, so that
screening many vehicles never pays for placements nobody reads.
"""

from __future__ import annotations

from dataclasses import dataclass
from typing import TYPE_CHECKING, Final, Protocol

import numpy as np

from movload.arrays import held
from movload.errors import InputError, UnknownNameError
from movload.peaks.placement import Placement, panel_loads
from movload.statics.part import Effect, Response, row_of

if TYPE_CHECKING:
    from collections.abc import Sequence

    from movload.arrays import Floats
    from movload.traffic.crossing import Train
    from movload.traffic.vehicle import Vehicle


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


NO_PEAK: Final = Peak(0.0, float("nan"), 0, (), -1, -1, "", Placement.off())


WORST: Final = -1
"""In place of a formation's number: the formation that gives the greatest effect."""


@dataclass(frozen=True, slots=True)
class RowPeaks:
    """Highest and lowest peak of one row."""

    effect: Effect
    highest: Peak
    lowest: Peak


class Swept(Protocol):
    """The peaks of one part under one crossing, whatever found them."""

    @property
    def effects(self) -> tuple[Effect, ...]:
        """The rows (R)."""
        ...

    @property
    def highest(self) -> Floats:
        """(R,) with impact, including 0."""
        ...

    @property
    def lowest(self) -> Floats:
        """(R,) with impact, including 0."""
        ...

    @property
    def split(self) -> tuple[Floats, Floats] | None:
        """What grows with a rating and what is held fixed by formation (F, R, 2); None where nothing is held fixed."""
        ...

    def peak(self, row: int, side: int, number: int = WORST) -> Peak:
        """Return one row's highest (side 0) or lowest (side 1) peak, of all formations or of one by its number."""
        ...

    def vehicle(self, row: int, side: int, number: int = WORST) -> Vehicle:
        """Return the vehicle that gives it; any of them where the row feels none."""
        ...

    def ordinates(self, row: int, side: int, stands: Placement, number: int = WORST) -> Floats:
        """Return a peak's effect per unit load at each axle (A,) of its placement: with the loads they add up to it."""
        ...


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
    parts: tuple[Swept, ...]

    def __getitem__(self, key: str | tuple[str, str]) -> RowPeaks:
        """Return one row's peaks by its name (a member's joints in either order) or by (part, name)."""
        return self.row(row_of(self.effects, key))

    def row(self, number: int) -> RowPeaks:
        """Return the peaks of row ``number``."""
        return RowPeaks(self.effects[number], self.peak(number, 0), self.peak(number, 1))

    def peak(self, number: int, side: int, formation: int = WORST) -> Peak:
        """Return the highest (side 0) or lowest (side 1) peak of row ``number``, or the one under a formation."""
        part, inside = self.part_of(number)
        return part.peak(inside, side, formation)

    def vehicle(self, number: int, side: int, formation: int = WORST) -> Vehicle:
        """Return the vehicle that gives the highest (side 0) or lowest (side 1) of row ``number``."""
        part, inside = self.part_of(number)
        return part.vehicle(inside, side, formation)

    def part_of(self, number: int) -> tuple[Swept, int]:
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
    loads = panel_loads(response.stations, x[None, :], train.felt)
    values: Floats = response.under(loads.T)[:, 0]
    return values


def stacked(title: str, parts: Sequence[Swept], effects: tuple[Effect, ...] = ()) -> Peaks:
    """Return the peaks of all parts as one, rows in the order of the parts (their effects, where known already)."""
    if len(parts) == 1:
        (part,) = parts
        return Peaks(title, part.effects, part.highest, part.lowest, (part,))
    return Peaks(
        title,
        effects or tuple(effect for part in parts for effect in part.effects),
        held(np.concatenate([part.highest for part in parts])),
        held(np.concatenate([part.lowest for part in parts])),
        tuple(parts),
    )
