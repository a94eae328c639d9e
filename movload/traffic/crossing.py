"""Who crosses, where across the deck, how many and how fast; and the train that one part feels of it."""

from __future__ import annotations

import math
from dataclasses import dataclass, field, replace
from functools import lru_cache
from typing import TYPE_CHECKING, Final

import numpy as np

from movload.arrays import Floats, held
from movload.errors import InputError
from movload.traffic.vehicle import Vehicle

if TYPE_CHECKING:
    from movload.traffic.loading import Case, Fill, Loading


TYPED_SHARE: Final = "typed share"
ANYWHERE: Final = "anywhere"
WANDER: Final = 0.3  # m to either side of the centre line; common practice, no source
MOST_ABREAST: Final = 6


@dataclass(frozen=True, slots=True, eq=False)
class Crossing:
    """One way of crossing.

    Parameters
    ----------
    loading
        Who.
    place
        Where across, by name (see `movload.bridge.roadway.PLACES`); a bridge whose file states a share instead of its
        kerbs knows only "anywhere", which then means that share.
    z
        Offset of the vehicle's middle from the bridge's centre line [m], + to the left looking toward +x, where the
        place is "offset".
    lanes
        How many abreast; 0 takes as many as fit where the place is "anywhere", and one elsewhere.
    speed
        [m/s]; None when no limit is meant.
    wander
        How far it strays to either side where the place is "centre line" [m].
    beside
        Ordinary traffic that may stand beside it: a rating holds it fixed while the vehicle that is asked about grows.
    """

    loading: Loading
    place: str = ANYWHERE
    z: float = 0.0
    lanes: int = field(default=0, kw_only=True)
    speed: float | None = field(default=None, kw_only=True)
    wander: float = field(default=WANDER, kw_only=True)
    beside: Loading | None = field(default=None, kw_only=True)

    def __post_init__(self) -> None:
        """Refuse places, speeds and counts that are no numbers."""
        if not math.isfinite(self.z):
            raise InputError(f"the offset across must be a finite number, got {self.z} m", place=self.title)
        if not (math.isfinite(self.wander) and self.wander >= 0):
            raise InputError(f"the wander must be 0 or more, got {self.wander} m", place=self.title)
        if self.speed is not None and not (math.isfinite(self.speed) and self.speed > 0):
            raise InputError(f"a speed must be above 0, got {self.speed} m/s", place=self.title)
        if not 0 <= self.lanes <= MOST_ABREAST:
            raise InputError(f"0 to {MOST_ABREAST} may go abreast, got {self.lanes}", place=self.title)
        if self.beside is not None and self.lanes > 1:
            raise InputError(
                f"with {self.beside.title} beside it one of it crosses, got {self.lanes} abreast", place=self.title
            )

    @property
    def title(self) -> str:
        """What a table calls it."""
        return self.loading.title

    @property
    def controlled(self) -> bool:
        """Whether it asks for something drivers must be held to on site: a place or a speed of its own."""
        return self.place not in {ANYWHERE, TYPED_SHARE} or self.speed is not None


@dataclass(frozen=True, slots=True, eq=False)
class Train:
    """What one part feels of one vehicle of one case: axles with their shares.

    Attributes
    ----------
    case
        Title of the case it comes from.
    vehicle
        The vehicle as it stands in the file.
    shares
        Share of each whole axle that reaches the part (A,) [-].
    fills
        Loads that fill, already shared.
    headings
        The directions these shares hold for.
    dynamic
        Whether impact applies.
    z
        Where its middle keeps across [m]; nan where a share was typed.
    factor
        What the case and the number abreast multiply it by [-].
    even
        Whether all shares are known to be one number.
    fixed
        Whether a rating holds it fixed: traffic beside the vehicle that is asked about.
    strip_shares, tail_share
        Share of each strip that reaches the part (S,) [-], and of the tail.
    relieving
        Part of each load that counts where it relieves [-] (see `Case`).
    """

    case: str
    vehicle: Vehicle
    shares: Floats
    fills: tuple[Fill, ...] = ()
    headings: tuple[int, ...] = (1, -1)
    dynamic: bool = field(default=True, kw_only=True)
    z: float = field(default=math.nan, kw_only=True)
    factor: float = field(default=1.0, kw_only=True)
    even: bool = field(default=False, kw_only=True)
    fixed: bool = field(default=False, kw_only=True)
    strip_shares: Floats = field(default_factory=lambda: held(np.zeros(0)), kw_only=True)
    tail_share: float = field(default=0.0, kw_only=True)
    relieving: float = field(default=1.0, kw_only=True)

    @property
    def felt(self) -> Floats:
        """Each axle as the part feels it (A,) [N], impact left out."""
        loads: Floats = self.vehicle.loads * self.shares * self.factor
        return loads


def whole_trains(subject: Vehicle | Loading) -> tuple[Train, ...]:
    """Return the trains of whole axles on one line: no share, only the case's own factor."""
    if isinstance(subject, Vehicle):
        return (_whole(subject),)
    return tuple(_of_whole_case(case, dynamic=subject.dynamic) for case in subject.cases)


@lru_cache(maxsize=256)  # one vehicle meets many bridges and parts: the same train, so that its runs are made once
def _whole(vehicle: Vehicle) -> Train:
    """Return the train of a vehicle's whole axles."""
    return even_train(vehicle.title, vehicle, 1.0)


@lru_cache(maxsize=256)
def _of_whole_case(case: Case, *, dynamic: bool) -> Train:
    """Return the train of a case's whole axles."""
    vehicle = axles_only(case)
    train = even_train(case.title, vehicle, 1.0, factor=case.factor, dynamic=dynamic)
    return train if case.relieving == 1.0 else replace(train, relieving=case.relieving)


def axles_only(case: Case) -> Vehicle:
    """Return a case's vehicle, or refuse what would otherwise be left out in silence."""
    if case.moving is None or case.fills:
        raise InputError("loads that fill the bridge cannot be swept yet", place=f"case {case.title}")
    if case.moving.strips or case.moving.tail is not None:
        raise InputError("uniform loads that move with a vehicle cannot be swept yet", place=case.moving.title)
    if case.convoy is not None:
        raise InputError("vehicles that follow each other cannot be swept yet", place=f"case {case.title}")
    if case.above or case.continuous:
        raise InputError("a case for some trusses or lengths only cannot be swept yet", place=f"case {case.title}")
    return case.moving


def even_train(case: str, vehicle: Vehicle, share: float, *, factor: float = 1.0, dynamic: bool = True) -> Train:
    """Return a train whose axles all have one share."""
    if vehicle.strips or vehicle.tail is not None:
        raise InputError("uniform loads that move with a vehicle cannot be swept yet", place=vehicle.title)
    shares = held(np.full(vehicle.loads.size, share))
    return Train(case, vehicle, shares, headings=vehicle.headings, factor=factor, dynamic=dynamic, even=True)
