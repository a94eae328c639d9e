"""Who crosses, where across the deck, how many and how fast; and the train that one part then feels."""

from __future__ import annotations

from dataclasses import dataclass, field
from typing import TYPE_CHECKING

import numpy as np

from movload.arrays import Floats, held
from movload.traffic.vehicle import Vehicle

if TYPE_CHECKING:
    from movload.bridge.across import Across
    from movload.traffic.loading import Fill, Loading


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
    place: str = "typed share"
    z: float = 0.0
    lanes: int = field(default=1, kw_only=True)
    speed: float | None = field(default=None, kw_only=True)

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
    return _trains(crossing.loading, float(across.at(crossing.z)))


def whole_trains(subject: Vehicle | Loading) -> tuple[Train, ...]:
    """Return the trains of whole axles on one line: no share but the case's own factor."""
    if isinstance(subject, Vehicle):
        return (_train(subject.title, subject, 1.0),)
    return _trains(subject, 1.0)


def _trains(loading: Loading, share: float) -> tuple[Train, ...]:
    """Return one train for each case that moves."""
    return tuple(
        _train(case.title, case.moving, share * case.factor) for case in loading.cases if case.moving is not None
    )


def _train(case: str, vehicle: Vehicle, share: float) -> Train:
    """Return a train whose axles all have one share."""
    return Train(case, vehicle, held(np.full(vehicle.loads.size, share)), headings=vehicle.headings)
