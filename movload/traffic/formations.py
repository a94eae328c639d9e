"""The formations of a crossing on one part: vehicles abreast, in the few places across that may be worst for it.

Traffic beside the vehicle that is asked about is in `movload.traffic.beside`.
"""

from __future__ import annotations

from dataclasses import dataclass, replace
from functools import lru_cache
from typing import TYPE_CHECKING, TypeAlias

import numpy as np

from movload.arrays import Floats, Ints, held
from movload.errors import InputError, MissingDataError
from movload.traffic.abreast import candidate_places, shares_at, worst_groups
from movload.traffic.beside import formations_beside, most_beside
from movload.traffic.crossing import ANYWHERE, MOST_ABREAST, TYPED_SHARE, Train, axles_only, even_train
from movload.traffic.rooms import gauges_of, headings_of, room_of

if TYPE_CHECKING:
    from movload.bridge.across import Across
    from movload.bridge.roadway import Roadway
    from movload.traffic.crossing import Crossing
    from movload.traffic.loading import Case
    from movload.traffic.vehicle import Vehicle

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
        _require_no_place(crossing)
    if roadway is None or across.z.size == 1:
        return _by_typed_share(across, crossing)
    dynamic = crossing.loading.dynamic
    alone = tuple(
        formation for way in _ways(crossing, roadway, presence) for formation in _abreast(across, way, dynamic=dynamic)
    )
    return alone if crossing.beside is None else (*alone, *formations_beside(across, crossing, roadway, presence))


def fitting(crossing: Crossing, roadway: Roadway | None) -> int:
    """Return how many vehicles stand abreast at most in a crossing."""
    if roadway is None:
        return 1
    counts = [
        _counts(crossing, case, roadway, max(gauges_of(case.moving)))
        for case in crossing.loading.cases
        if case.moving is not None
    ]
    return max((count.stop - 1 for count in counts), default=1) + most_beside(crossing, roadway)


def _require_no_place(crossing: Crossing) -> None:
    """Refuse a place or a number abreast where only one share is known."""
    asked = "" if crossing.lanes <= 1 else f"{crossing.lanes} abreast"
    if crossing.place not in {ANYWHERE, TYPED_SHARE} or crossing.z != 0.0:
        asked = f'"{crossing.place}" at {crossing.z:g} m'
    if crossing.beside is not None:
        asked = f"{crossing.beside.title} beside it"
    if asked:
        raise MissingDataError(
            f"{asked} cannot be rated from one typed share; type deck.truss_spacing and deck.kerbs instead",
            place=crossing.title,
        )


def _by_typed_share(across: Across, crossing: Crossing) -> tuple[Formation, ...]:
    """Return one train a case, with the share that is typed wherever it keeps and however many stand abreast."""
    share, loading = float(across.at(0.0)), crossing.loading
    return tuple(
        (
            replace(
                even_train(case.title, vehicle, share, factor=case.factor, dynamic=loading.dynamic),
                relieving=case.relieving,
            ),
        )
        for case in loading.cases
        for vehicle in (axles_only(case),)
    )


@dataclass(frozen=True, slots=True, eq=False)
class _Way:
    """One way a case may cross, whatever part feels it: one or both headings, so many abreast, in one range of z.

    ``kinds`` are the axles' (gauge, left share), ``of_kind`` says which each is, ``apart`` is what neighbours keep.
    """

    case: str
    vehicle: Vehicle
    headings: tuple[int, ...]
    kinds: tuple[tuple[float, float], ...]
    of_kind: Ints
    room: tuple[float, float]
    apart: float
    count: int
    factor: float
    relieving: float


@lru_cache(maxsize=256)  # every part of the bridge asks
def _ways(crossing: Crossing, roadway: Roadway, presence: tuple[float, ...]) -> tuple[_Way, ...]:
    """Return the ways of a crossing: by case, by heading where the room depends on it, by number abreast."""
    found: list[_Way] = []
    for case in crossing.loading.cases:
        vehicle = axles_only(case)
        gauges = gauges_of(vehicle)
        axles = tuple(zip(gauges, vehicle.left_shares or (0.5,) * len(gauges), strict=True))
        kinds = tuple(dict.fromkeys(axles))
        of_kind = np.array([kinds.index(axle) for axle in axles], dtype=np.intp)
        for headings in headings_of(vehicle, crossing):
            room = room_of(crossing, roadway, max(gauges), headings[0])
            found += [
                _Way(
                    case.title, vehicle, headings, kinds, of_kind, room, max(gauges) + roadway.between, count,
                    case.factor * presence[min(count, len(presence)) - 1], case.relieving,
                )
                for count in _counts(crossing, case, roadway, max(gauges))
            ]  # fmt: skip
    return tuple(found)


def _counts(crossing: Crossing, case: Case, roadway: Roadway, width: float) -> range:
    """Return how many of a case's vehicle may stand abreast."""
    most = _most(crossing, roadway, width)
    least = crossing.lanes or case.lanes or 1
    if least > most:
        raise InputError(f"{least} abreast do not fit there; {most} may stand abreast", place=crossing.title)
    return range(least, (crossing.lanes or case.lanes or most) + 1)


def _abreast(across: Across, way: _Way, *, dynamic: bool) -> list[Formation]:
    """Return a way's formations on one part: each worst set of places."""
    lopsided = any(left != 0.5 for _, left in way.kinds)
    where = _Where(across, way.kinds, way.room, way.headings if lopsided else way.headings[:1], way.apart)
    return [
        tuple(
            Train(
                way.case, way.vehicle, held(shares[way.of_kind]), headings=(heading,) if lopsided else way.headings,
                z=z, factor=way.factor, dynamic=dynamic, even=len(way.kinds) == 1, relieving=way.relieving,
            )
            for z, heading, shares in group
        )
        for group in _groups(where, way.count)
    ]  # fmt: skip


@dataclass(frozen=True, slots=True)
class _Where:
    """All that the worst places across depend on: kinds of axles by (gauge, left share), not their loads."""

    across: Across
    kinds: tuple[tuple[float, float], ...]
    room: tuple[float, float]
    headings: tuple[int, ...]
    apart: float


@lru_cache(maxsize=4096)  # vehicles with the same gauges meet the same places
def _groups(where: _Where, count: int) -> tuple[tuple[tuple[float, int, Floats], ...], ...]:
    """Return the sets of places that may be worst: of each its z [m], heading, and the share of each kind of axle.

    Of vehicles abreast each may head its own way, which matters where left and right wheels differ.
    """
    gauges, lefts = (np.array(one) for one in zip(*where.kinds, strict=True))
    z = candidate_places(where.across, where.room, gauges, apart=where.apart, most=count)
    each = [shares_at(where.across, z, gauges, lefts, heading) for heading in where.headings]
    place = np.repeat(np.arange(z.size), len(each))
    heading = np.tile(where.headings, z.size)
    shares = np.stack(each, axis=1).reshape(place.size, -1)
    # what a heading does along the bridge is its own: one heading's shares say nothing of the other's
    apart = np.zeros((place.size, len(each), shares.shape[1]))
    apart[np.arange(place.size), np.tile(np.arange(len(each)), z.size)] = shares
    groups = worst_groups(apart.reshape(place.size, -1), z[place], where.apart, count)
    return tuple(tuple((float(z[place[one]]), int(heading[one]), shares[one]) for one in group) for group in groups)


def _most(crossing: Crossing, roadway: Roadway, width: float) -> int:
    """Return how many of a vehicle stand abreast at most."""
    if crossing.place != ANYWHERE or crossing.beside is not None:
        return 1
    return min(roadway.abreast(width), MOST_ABREAST)
