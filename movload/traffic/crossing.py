"""Who crosses, where across the deck, how many and how fast; and the train that one part then feels."""

from __future__ import annotations

import math
from dataclasses import dataclass, field
from functools import lru_cache
from typing import TYPE_CHECKING, Final

import numpy as np

from movload.arrays import Floats, held
from movload.errors import InputError
from movload.traffic.vehicle import Vehicle

if TYPE_CHECKING:
    from movload.bridge.across import Across
    from movload.traffic.loading import Case, Fill, Loading


TYPED_SHARE: Final = "typed share"


@dataclass(frozen=True, slots=True, eq=False)
class Crossing:
    """One way of crossing.

    Parameters
    ----------
    loading
        Who.
    place
        Where across, by name; "typed share" takes the share the bridge file states, wherever the vehicle keeps.
    z
        Offset of the vehicle's middle from the bridge's centre line [m], + to the left looking toward +x.
    lanes
        How many abreast.
    speed
        [m/s]; None when no limit is meant.
    """

    loading: Loading
    place: str = TYPED_SHARE
    z: float = 0.0
    lanes: int = field(default=1, kw_only=True)
    speed: float | None = field(default=None, kw_only=True)

    def __post_init__(self) -> None:
        """Refuse a place that is no number."""
        if not math.isfinite(self.z):
            raise InputError(f"the offset across must be a finite number, got {self.z} m", place=self.title)

    @property
    def title(self) -> str:
        """What a table calls it."""
        return self.loading.title


@dataclass(frozen=True, slots=True, eq=False)
class Train:
    """What one part feels of one case: axles with their shares.

    Attributes
    ----------
    case
        Title of the case it comes from.
    vehicle
        The vehicle as it stands in the file.
    shares
        Share of each whole axle that reaches the part, the case's factor included (A,) [-].
    fills
        Loads that fill, already shared.
    headings
        The directions these shares hold for.
    dynamic
        Whether impact applies.
    """

    case: str
    vehicle: Vehicle
    shares: Floats
    fills: tuple[Fill, ...] = ()
    headings: tuple[int, ...] = (1, -1)
    dynamic: bool = field(default=True, kw_only=True)


def trains_on(across: Across, crossing: Crossing) -> tuple[Train, ...]:
    """Return the trains a part feels, one for each case of the crossing's loading.

    Parameters
    ----------
    across
        The part's share of a wheel by its place across.
    """
    if crossing.lanes != 1 or crossing.speed is not None:
        asked = f"{crossing.lanes} lanes" if crossing.lanes != 1 else f"a speed of {crossing.speed:g} m/s"
        raise InputError(f"{asked} cannot be rated yet: one vehicle at a time, no speed", place=crossing.title)
    if across.z.size == 1 and (crossing.z != 0.0 or crossing.place != TYPED_SHARE):
        raise InputError(
            f'one share is typed wherever the vehicle keeps; "{crossing.place}" at {crossing.z:g} m cannot be rated',
            place=crossing.title,
        )
    return _trains(crossing.loading, float(across.at(crossing.z)))


@lru_cache(maxsize=256)  # one vehicle meets many bridges and parts: the same trains, so that their runs are made once
def whole_trains(subject: Vehicle | Loading) -> tuple[Train, ...]:
    """Return the trains of whole axles on one line: no share but the case's own factor."""
    if isinstance(subject, Vehicle):
        return (_train(subject.title, subject, 1.0),)
    return _trains(subject, 1.0)


def _trains(loading: Loading, share: float) -> tuple[Train, ...]:
    """Return one train for each case."""
    return tuple(_train(case.title, _axles_only(case), share * case.factor) for case in loading.cases)


def _axles_only(case: Case) -> Vehicle:
    """Return a case's vehicle, or refuse what would otherwise be left out in silence."""
    if case.moving is None or case.fills:
        raise InputError("loads that fill the bridge cannot be swept yet", place=f"case {case.title}")
    if case.lanes > 1:
        raise InputError(f"{case.lanes} lanes cannot be swept yet", place=f"case {case.title}")
    return case.moving


def _train(case: str, vehicle: Vehicle, share: float) -> Train:
    """Return a train whose axles all have one share."""
    if vehicle.strips or vehicle.tail is not None:
        raise InputError("uniform loads that move with a vehicle cannot be swept yet", place=vehicle.title)
    return Train(case, vehicle, held(np.full(vehicle.loads.size, share)), headings=vehicle.headings)
