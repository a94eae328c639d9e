"""Who crosses, where across the deck, how many and how fast; and the trains that one part then feels."""

from __future__ import annotations

import math
from dataclasses import dataclass, field
from functools import lru_cache
from typing import TYPE_CHECKING, Final, TypeAlias

import numpy as np

from movload.arrays import Floats, held
from movload.bridge.roadway import span_of_place
from movload.errors import InputError, MissingDataError
from movload.traffic.abreast import candidate_places, shares_at, worst_groups
from movload.traffic.vehicle import Vehicle

if TYPE_CHECKING:
    from movload.bridge.across import Across
    from movload.bridge.roadway import Roadway
    from movload.traffic.loading import Case, Fill, Loading


TYPED_SHARE: Final = "typed share"
ANYWHERE: Final = "anywhere"
WANDER: Final = 0.3  # m to either side of the centre line; common practice, no source
_MOST_ABREAST: Final = 6


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
    """

    loading: Loading
    place: str = ANYWHERE
    z: float = 0.0
    lanes: int = field(default=0, kw_only=True)
    speed: float | None = field(default=None, kw_only=True)
    wander: float = field(default=WANDER, kw_only=True)

    def __post_init__(self) -> None:
        """Refuse places, speeds and counts that are no numbers."""
        if not math.isfinite(self.z):
            raise InputError(f"the offset across must be a finite number, got {self.z} m", place=self.title)
        if not (math.isfinite(self.wander) and self.wander >= 0):
            raise InputError(f"the wander must be 0 or more, got {self.wander} m", place=self.title)
        if self.speed is not None and not (math.isfinite(self.speed) and self.speed > 0):
            raise InputError(f"a speed must be above 0, got {self.speed} m/s", place=self.title)
        if not 0 <= self.lanes <= _MOST_ABREAST:
            raise InputError(f"0 to {_MOST_ABREAST} may go abreast, got {self.lanes}", place=self.title)

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
    """

    case: str
    vehicle: Vehicle
    shares: Floats
    fills: tuple[Fill, ...] = ()
    headings: tuple[int, ...] = (1, -1)
    dynamic: bool = field(default=True, kw_only=True)
    z: float = field(default=math.nan, kw_only=True)
    factor: float = field(default=1.0, kw_only=True)

    @property
    def felt(self) -> Floats:
        """Each axle as the part feels it (A,) [N], impact left out."""
        loads: Floats = self.vehicle.loads * self.shares * self.factor
        return loads


Formation: TypeAlias = "tuple[Train, ...]"
"""Vehicles abreast, each where it is worst along the bridge: their effects add."""


def formations_on(
    across: Across, crossing: Crossing, roadway: Roadway | None = None, presence: tuple[float, ...] = (1.0,)
) -> tuple[Formation, ...]:
    """Return the formations of a crossing that may be the worst for a part, all cases of its loading.

    Parameters
    ----------
    across
        The part's share of a wheel by its place across.
    roadway
        The kerbs; None where a share is typed.
    presence
        Multiple presence [-] by number abreast: one, two ...; the last repeats.

    Raises
    ------
    InputError
        The vehicle does not fit the place, or what it is made of cannot be swept yet.
    MissingDataError
        An axle's gauge is not known.
    """
    if roadway is None:
        return _by_typed_share(across, crossing)
    found: list[Formation] = []
    for case in crossing.loading.cases:
        found += _abreast(across, crossing, case, roadway, presence)
    return tuple(found)


def fitting(crossing: Crossing, roadway: Roadway | None) -> int:
    """Return how many vehicles stand abreast at most in a crossing."""
    if roadway is None:
        return 1
    widths = [max(_gauges(case.moving)) for case in crossing.loading.cases if case.moving is not None]
    return max((_most(crossing, roadway, width) for width in widths), default=1)


def whole_trains(subject: Vehicle | Loading) -> tuple[Train, ...]:
    """Return the trains of whole axles on one line: no share, only the case's own factor."""
    if isinstance(subject, Vehicle):
        return (_whole(subject),)
    return tuple(_of_whole_case(case, dynamic=subject.dynamic) for case in subject.cases)


@lru_cache(maxsize=256)  # one vehicle meets many bridges and parts: the same train, so that its runs are made once
def _whole(vehicle: Vehicle) -> Train:
    """Return the train of a vehicle's whole axles."""
    return _train(vehicle.title, vehicle, 1.0)


@lru_cache(maxsize=256)
def _of_whole_case(case: Case, *, dynamic: bool) -> Train:
    """Return the train of a case's whole axles."""
    vehicle = _axles_only(case)
    return _train(case.title, vehicle, 1.0, factor=case.factor, dynamic=dynamic)


def _by_typed_share(across: Across, crossing: Crossing) -> tuple[Formation, ...]:
    """Return one train a case, with the share that is typed wherever it keeps."""
    asked = "" if crossing.lanes <= 1 else f"{crossing.lanes} abreast"
    if crossing.place not in {ANYWHERE, TYPED_SHARE} or crossing.z != 0.0:
        asked = f'"{crossing.place}" at {crossing.z:g} m'
    if asked:
        raise MissingDataError(
            f"{asked} cannot be rated from one typed share; type deck.truss_spacing and deck.kerbs instead",
            place=crossing.title,
        )
    share, loading = float(across.at(0.0)), crossing.loading
    return tuple(
        (_train(case.title, vehicle, share, factor=case.factor, dynamic=loading.dynamic),)
        for case in loading.cases
        for vehicle in (_axles_only(case),)
    )


def _abreast(
    across: Across, crossing: Crossing, case: Case, roadway: Roadway, presence: tuple[float, ...]
) -> list[Formation]:
    """Return one case's formations: for each way it may head, each number abreast and each worst set of places."""
    vehicle = _axles_only(case)
    gauges, lefts = _gauges(vehicle), vehicle.left_shares or (0.5,) * vehicle.loads.size
    width = max(gauges)
    most = min(case.lanes, _most(crossing, roadway, width)) if case.lanes else _most(crossing, roadway, width)
    least = crossing.lanes or case.lanes or 1
    if least > most:
        raise InputError(f"{least} abreast do not fit between the kerbs; {most} do", place=crossing.title)
    formations: list[Formation] = []
    for headings in _ways(vehicle, crossing):
        room = span_of_place(
            roadway, crossing.place, gauge=width, heading=headings[0], z=crossing.z, wander=crossing.wander
        )
        axles = tuple(zip(gauges, lefts, strict=True))
        kinds = tuple(dict.fromkeys(axles))
        of_kind = [kinds.index(axle) for axle in axles]
        where = _Where(across, kinds, room, headings[0], width + roadway.between)
        for count in range(least, most + 1):
            factor = case.factor * presence[min(count, len(presence)) - 1]
            formations += [
                tuple(
                    Train(
                        case.title, vehicle, held(shares[of_kind]), headings=headings, z=z, factor=factor,
                        dynamic=crossing.loading.dynamic,
                    )
                    for z, shares in group
                )
                for group in _groups(where, count)
            ]  # fmt: skip
    return formations


@dataclass(frozen=True, slots=True)
class _Where:
    """All that the worst places across depend on: kinds of axles by (gauge, left share), not their loads."""

    across: Across
    kinds: tuple[tuple[float, float], ...]
    room: tuple[float, float]
    heading: int
    apart: float


@lru_cache(maxsize=4096)  # vehicles with the same gauges meet the same places
def _groups(where: _Where, count: int) -> tuple[tuple[tuple[float, Floats], ...], ...]:
    """Return the sets of places that may be worst, each place with its z [m] and the share of each kind of axle."""
    gauges, lefts = (np.array(one) for one in zip(*where.kinds, strict=True))
    z = candidate_places(where.across, where.room, gauges, apart=where.apart, most=count)
    shares = shares_at(where.across, z, gauges, lefts, where.heading)
    groups = worst_groups(shares, z, where.apart, count)
    return tuple(tuple((float(z[one]), shares[one]) for one in group) for group in groups)


def _ways(vehicle: Vehicle, crossing: Crossing) -> tuple[tuple[int, ...], ...]:
    """Return the vehicle's headings, apart where shares depend on them."""
    lopsided = any(share != 0.5 for share in vehicle.left_shares)
    if lopsided or crossing.place == "own lane":
        return tuple((heading,) for heading in vehicle.headings)
    return (vehicle.headings,)


def _most(crossing: Crossing, roadway: Roadway, width: float) -> int:
    """Return how many of a vehicle stand abreast at most."""
    if crossing.place != ANYWHERE:
        return 1
    return min(roadway.abreast(width), _MOST_ABREAST)


def _gauges(vehicle: Vehicle) -> tuple[float, ...]:
    """Return every axle's gauge [m], which a place across needs."""
    if not vehicle.gauges:
        raise MissingDataError(
            "is needed to place it across the deck: type gauge (between wheel centres) on every axle of its file",
            place=f"{vehicle.title}: axles[0].gauge",
        )
    return vehicle.gauges


def _axles_only(case: Case) -> Vehicle:
    """Return a case's vehicle, or refuse what would otherwise be left out in silence."""
    if case.moving is None or case.fills:
        raise InputError("loads that fill the bridge cannot be swept yet", place=f"case {case.title}")
    if case.moving.strips or case.moving.tail is not None:
        raise InputError("uniform loads that move with a vehicle cannot be swept yet", place=case.moving.title)
    return case.moving


def _train(case: str, vehicle: Vehicle, share: float, *, factor: float = 1.0, dynamic: bool = True) -> Train:
    """Return a train whose axles all have one share."""
    if vehicle.strips or vehicle.tail is not None:
        raise InputError("uniform loads that move with a vehicle cannot be swept yet", place=vehicle.title)
    shares = held(np.full(vehicle.loads.size, share))
    return Train(case, vehicle, shares, headings=vehicle.headings, factor=factor, dynamic=dynamic)
