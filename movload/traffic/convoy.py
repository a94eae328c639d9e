"""Vehicles one behind the other in one lane: any of them may be absent, none comes nearer than its headway."""

from __future__ import annotations

import math
from dataclasses import dataclass
from typing import TYPE_CHECKING

from movload.errors import InputError

if TYPE_CHECKING:
    from movload.traffic.vehicle import Vehicle


@dataclass(frozen=True, slots=True, eq=False)
class Convoy:
    """Who may follow whom in one lane, all heading one way.

    Parameters
    ----------
    vehicles
        Who may come, each at most once: one that may come twice is listed twice.
    most
        How many of them at most, 1 or more.
    headway
        Least distance from the last axle of one to the first axle of the next [m], 0 or more; it has no upper end.
        Infinite: one vehicle alone.
    ordered
        Whether they come in the order listed, the first in front; any order otherwise.

    Raises
    ------
    InputError
        No vehicle, fewer than one, a negative headway.
    """

    vehicles: tuple[Vehicle, ...]
    most: int
    headway: float
    ordered: bool = False

    def __post_init__(self) -> None:
        """Copy and check."""
        object.__setattr__(self, "vehicles", tuple(self.vehicles))
        if not self.vehicles:
            raise InputError("a convoy needs at least one vehicle, got none", place="convoy.vehicles")
        if self.most < 1:
            raise InputError(f"a convoy is of 1 or more, got at most {self.most}", place="convoy.most")
        if math.isnan(self.headway) or self.headway < 0:
            raise InputError(f"a headway must be 0 or more, got {self.headway:g} m", place="convoy.headway")
