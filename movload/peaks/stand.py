"""Where a train stands when it is worst for a row: what every way of finding a peak gives."""

from __future__ import annotations

from dataclasses import dataclass
from typing import TYPE_CHECKING

if TYPE_CHECKING:
    from movload.arrays import Floats


@dataclass(frozen=True, slots=True, eq=False)
class Stand:
    """One train where it is worst.

    Attributes
    ----------
    value
        The static effect [N, N m, m], of the row's own sign.
    front
        x of the vehicle's front [m], where distances count from.
    heading
        +1 moving toward +x, -1 the other way.
    distances
        Distance of each axle behind the front (A,) [m], ranges settled.
    axle, station
        The axle (0 = front) that stands on a station, and that station's number; -1 where the end of a strip does, or
        nothing does: an effect of uniform loads may be greatest in between.
    lost
        Whether that axle stands just outside the station.
    """

    value: float
    front: float
    heading: int
    distances: Floats
    axle: int = -1
    station: int = -1
    lost: bool = False
