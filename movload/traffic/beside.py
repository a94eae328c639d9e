"""Ordinary traffic beside the vehicle that is asked about: where all of them stand across, for one part.

A rating factor r holds where r b L(z) + f F(z') is within what strength is left, L what the vehicle does at z, F what
the traffic does at z'. For any r above 0 that sum is convex between the z where a wheel is on a bend of the part's line
across (see `movload.traffic.abreast`), so it is greatest in a corner of the z they may have: somebody of every row of
touching vehicles is on such a z or at an end of its room. All of these are returned; the least r over them is exact.
"""

from __future__ import annotations

from dataclasses import dataclass
from functools import lru_cache
from itertools import accumulate, pairwise, product
from typing import TYPE_CHECKING, Final

import numpy as np

from movload.arrays import held
from movload.errors import InputError
from movload.traffic.abreast import candidate_places, shares_at
from movload.traffic.crossing import Train, axles_only
from movload.traffic.rooms import gauges_of, headings_of, room_of

if TYPE_CHECKING:
    from movload.bridge.across import Across
    from movload.bridge.roadway import Roadway
    from movload.traffic.crossing import Crossing
    from movload.traffic.loading import Case
    from movload.traffic.vehicle import Vehicle

_MOST: Final = 2  # vehicles of other traffic beside one: three lanes between two trusses are rare already
_HAIR: Final = 1e-9  # m: neighbours that near to their distance keep it


@dataclass(frozen=True, slots=True, eq=False)
class _Who:
    """One of those who stand side by side: a case's vehicle in some headings, and the room [m] its middle has."""

    case: Case
    vehicle: Vehicle
    headings: tuple[int, ...]
    room: tuple[float, float]
    dynamic: bool
    fixed: bool

    @property
    def width(self) -> float:
        """Between its outermost wheels' centres [m]."""
        return max(gauges_of(self.vehicle))


def formations_beside(
    across: Across, crossing: Crossing, roadway: Roadway, presence: tuple[float, ...]
) -> tuple[tuple[Train, ...], ...]:
    """Return the formations of a vehicle with other traffic beside it, the vehicle itself first.

    Parameters
    ----------
    presence
        Multiple presence [-] by the number of all who stand abreast; the last repeats.

    Raises
    ------
    InputError
        Nothing fits beside it, or more than is looked at.
    """
    found: dict[tuple[object, ...], tuple[Train, ...]] = {}
    for vehicle, others in _casts(crossing, roadway):
        factor = presence[min(len(others) + 1, len(presence)) - 1]
        for place in range(len(others) + 1):
            row = (*others[:place], vehicle, *others[place:])
            for chosen in _places(across, row, roadway.between):
                trains = [_train(across, one, z, factor) for one, z in zip(row, chosen, strict=True)]
                for headed in product(*trains):
                    own = (headed[place], *headed[:place], *headed[place + 1 :])
                    found.setdefault(_felt_by(own), own)
    return tuple(found.values())


def most_beside(crossing: Crossing, roadway: Roadway) -> int:
    """Return how many vehicles of other traffic stand beside a crossing's own at most."""
    return max((len(others) for _, others in _casts(crossing, roadway)), default=0)


@lru_cache(maxsize=256)  # every part of the bridge asks
def _casts(crossing: Crossing, roadway: Roadway) -> tuple[tuple[_Who, tuple[_Who, ...]], ...]:
    """Return who may stand side by side: the vehicle in each case and heading, with one other, with two ..."""
    casts: list[tuple[_Who, tuple[_Who, ...]]] = []
    traffic, most = crossing.beside, 0
    if traffic is None:
        return ()
    for case, other in product(crossing.loading.cases, traffic.cases):
        vehicle, beside = axles_only(case), axles_only(other)
        widths = max(gauges_of(vehicle)), max(gauges_of(beside))
        rest = _Who(other, beside, beside.headings, roadway.room(widths[1]), traffic.dynamic, fixed=True)
        for headings in headings_of(vehicle, crossing):
            room = room_of(crossing, roadway, widths[0], headings[0])
            own = _Who(case, vehicle, headings, room, crossing.loading.dynamic, fixed=False)
            fits = _fitting(own, rest, roadway.between)
            most = max(most, fits)
            casts += [(own, (rest,) * count) for count in range(1, fits + 1)]
    if most == 0:
        free = roadway.width - 2.0 * roadway.clearance
        needed = min(
            max(gauges_of(axles_only(one))) + roadway.between + max(gauges_of(axles_only(other)))
            for one, other in product(crossing.loading.cases, traffic.cases)
        )
        raise InputError(
            f"{traffic.title} does not fit beside it between the kerbs: {needed:.2f} m from outer wheel to outer wheel "
            f"are needed, {free:.2f} m are left between the clearances", place=crossing.title,
        )  # fmt: skip
    if most > _MOST:
        raise InputError(f"at most {_MOST} others are looked at beside it, {most} fit here", place=crossing.title)
    return tuple(casts)


def _fitting(own: _Who, rest: _Who, between: float) -> int:
    """Return how many of other traffic fit beside a vehicle: to its right and to its left, wherever it may keep."""
    gap, pitch = 0.5 * (own.width + rest.width) + between, rest.width + between
    low, high = rest.room

    def beside(z: float) -> int:
        right, left = z - gap - low, high - z - gap
        return sum(int((free + _HAIR) // pitch) + 1 for free in (right, left) if free >= -_HAIR)

    steps = [low + gap + pitch * number for number in range(_MOST + 2)]
    steps += [high - gap - pitch * number for number in range(_MOST + 2)]
    tried = [*own.room, *(z for z in steps if own.room[0] <= z <= own.room[1])]
    return max(beside(z) for z in tried)


def _places(across: Across, row: tuple[_Who, ...], between: float) -> list[tuple[float, ...]]:
    """Return the places [m] of those in a row from right to left, in which somebody of every touching row is pinned."""
    gaps = [0.5 * (one.width + other.width) + between for one, other in pairwise(row)]
    offsets = list(accumulate(gaps, initial=0.0))
    own = [candidate_places(across, one.room, np.array(gauges_of(one.vehicle))) for one in row]
    each = []
    for number, one in enumerate(row):
        shifted = [z + offsets[number] - offset for places, offset in zip(own, offsets, strict=True) for z in places]
        each.append(sorted({z for z in shifted if one.room[0] - _HAIR <= z <= one.room[1] + _HAIR}))
    kept: list[tuple[float, ...]] = [()]
    for number, places in enumerate(each):
        kept = [
            (*chosen, z) for chosen in kept for z in places if not number or z - chosen[-1] >= gaps[number - 1] - _HAIR
        ]
    return kept


def _train(across: Across, one: _Who, z: float, factor: float) -> list[Train]:
    """Return what a part feels of one vehicle at z: one train, or one a heading where left and right wheels differ."""
    gauges = np.array(gauges_of(one.vehicle))
    lefts = np.array(one.vehicle.left_shares or (0.5,) * gauges.size)
    lopsided = bool((lefts != 0.5).any())
    z = min(max(z, one.room[0]), one.room[1])
    return [
        Train(
            one.case.title, one.vehicle, held(shares_at(across, np.array([z]), gauges, lefts, headings[0])[0]),
            headings=headings, dynamic=one.dynamic, z=z, factor=one.case.factor * factor, fixed=one.fixed,
            relieving=one.case.relieving,
        )
        for headings in ([(heading,) for heading in one.headings] if lopsided else [one.headings])
    ]  # fmt: skip


def _felt_by(trains: tuple[Train, ...]) -> tuple[object, ...]:
    """Return what makes two formations one for a part: the own vehicle's shares, and those beside in any order."""
    felt = [(one.vehicle, one.factor, one.headings, tuple(np.round(one.shares, 12).tolist())) for one in trains]
    return (felt[0], *sorted(felt[1:], key=lambda other: (id(other[0]), other[2], other[3])))
