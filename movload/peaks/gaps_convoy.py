"""Convoys: vehicles one behind the other in one lane, any of them absent, each headway its least or more.

With R(u) what may still follow is worth at most when it must stay behind u, a vehicle followed by others is worth
V(u), its groups' chain with R added at its last axle less the headway (see `movload.peaks.gaps_chain`). Then R(u) is
the greatest over who comes next, from -infinity to u, of his V, and 0 when nobody does. Who is left, and how many may
still come, are what R depends on: every such remainder is met once, whatever the order in front. A function that never
falls has few nodes, and where the greatest changes from one vehicle to another it has one, so this is exact.

A headway beyond the length of the deck leaves one vehicle on it at a time.
"""

from __future__ import annotations

import math
from dataclasses import dataclass, field
from typing import TYPE_CHECKING, Final

import numpy as np

from movload.errors import InputError
from movload.peaks.gaps_bent import JUMP
from movload.peaks.gaps_chain import TIE, best_place, chain, front_places, places, settled
from movload.peaks.gaps_rows import (
    groups_of,
    of_rows,
    over_headings,
    require_chained,
    row_seen,
    without_noise,
)
from movload.peaks.stand import Stand
from movload.traffic.vehicle import MOST_AXLES, MOST_RANGES

if TYPE_CHECKING:
    from collections.abc import Iterator, Sequence

    from movload.arrays import Floats
    from movload.peaks.gaps_bent import Bent
    from movload.peaks.gaps_rows import Group, Rows
    from movload.statics.part import AtStations
    from movload.traffic.convoy import Convoy
    from movload.traffic.crossing import Train

MOST_REMAINDERS: Final = 64  # of a convoy: six vehicles that all differ, in any order
_SAME_PLACE: Final = 9  # decimals of a metre to which positions count as equal when ties are broken


@dataclass(frozen=True, slots=True, eq=False)
class ConvoyStand(Stand):
    """One vehicle of a convoy where all of them together are worst; ``vehicle`` is its number in the convoy."""

    vehicle: int = 0


def convoy_extremes(response: AtStations, convoy: Convoy, trains: Sequence[Train]) -> tuple[Floats, Floats]:
    """Return every row's highest and lowest static value (R,), both including 0.

    Parameters
    ----------
    response
        How R rows answer loads on B stations; it must be linear.
    trains
        What the part feels of each of the convoy's vehicles, in the same order. A heading is tried with those that may
        take it.

    Raises
    ------
    InputError
        More than 200 axles or 12 variable gaps in all; more than 64 sets of vehicles that may be left in a convoy of
        any order; uniform loads that move; trains that are not the convoy's.
    """
    _require_swept(convoy, trains)
    condensed = response.condensed
    axles = sum(train.vehicle.loads.size for train in trains)

    def of_headings(headings: tuple[int, ...]) -> tuple[Floats, Floats]:
        return of_rows(condensed, headings, lambda rows: _Lane(convoy, trains, rows).whole.highest, axles)

    headings = _headings(trains)
    both_ways = all(len(train.headings) == 2 for train in trains)
    parts = [headings] if both_ways else [(heading,) for heading in headings]
    found = [over_headings(condensed, some, of_headings) for some in parts]
    highest, lowest = np.maximum.reduce([one[0] for one in found]), np.minimum.reduce([one[1] for one in found])
    top, bottom = without_noise(highest, lowest)
    return top[0], bottom[0]


def convoy_stand(
    response: AtStations, convoy: Convoy, trains: Sequence[Train], which: tuple[int, int]
) -> tuple[ConvoyStand, ...]:
    """Return every vehicle that is felt, the one in front first, where the convoy is worst for one row.

    One that adds nothing is left out: it may as well be absent.
    Of equally bad ones: the smallest position of the one in front, heading +1, and the smallest gaps behind it.

    Parameters
    ----------
    which
        The row, and 0 for its highest, 1 for its lowest.
    """
    _require_swept(convoy, trains)
    lanes = [_Lane(convoy, trains, row_seen(response, *which, heading)) for heading in _headings(trains)]
    tops = [float(lane.whole.highest[0]) for lane in lanes]
    if max(tops) <= 0.0:
        return ()
    walks = [lane.walk() for lane, top in zip(lanes, tops, strict=True) if top >= max(tops) * (1.0 - TIE)]
    heading, walk = min(walks, key=lambda one: (round(one[0] * one[1][0][1][0], _SAME_PLACE), -one[0]))
    stands = [(number, settled(response, trains[number], (*which, heading), at)) for number, at in walk]
    felt = [
        ConvoyStand(one.value, one.front, one.heading, one.distances, one.axle, one.station, one.lost, number)
        for number, one in stands
        if abs(one.value) > TIE * max(tops)
    ]
    return tuple(felt)


def _headings(trains: Sequence[Train]) -> tuple[int, ...]:
    """Return the headings that some train may take, +1 first."""
    return tuple(heading for heading in (1, -1) if any(heading in train.headings for train in trains))


@dataclass(frozen=True, slots=True, eq=False)
class _Lane:
    """One heading of a convoy over some rows; every remainder is met once."""

    convoy: Convoy
    trains: Sequence[Train]
    rows: Rows
    rests: dict[tuple[tuple[int, ...], int], Bent] = field(default_factory=dict)
    groups: dict[int, tuple[Group, ...]] = field(default_factory=dict)

    @property
    def _all(self) -> tuple[tuple[int, ...], int]:
        """Who may come in this heading, and how many."""
        able = tuple(number for number, train in enumerate(self.trains) if self.rows.heading in train.headings)
        deck = float(self.rows.stations[-1] - self.rows.stations[0]) + 3.0 * JUMP * self.rows.edge
        return able, 1 if self.convoy.headway > deck else min(self.convoy.most, len(able))

    @property
    def whole(self) -> Bent:
        """What all of them are worth at most."""
        return self._rest(*self._all)

    def _rest(self, who: tuple[int, ...], most: int) -> Bent:
        """Return R(u) of those still to come, ``most`` of them at most."""
        if (who, most) not in self.rests:
            lines = [self._vehicle(number, left, most)[0].within(0.0, math.inf) for number, left in self._next(who)]
            best = lines[0]
            for line in lines[1:]:
                best = best.or_more(line)
            self.rests[who, most] = best
        return self.rests[who, most]

    def _vehicle(self, number: int, left: tuple[int, ...], most: int) -> tuple[Bent, ...]:
        """Return the chain of one vehicle followed by some of those left, ``most`` with itself."""
        train = self.trains[number]
        after = self._rest(left, most - 1).shifted(self.convoy.headway) if left and most > 1 else None
        return chain(self._groups(number), self.rows, train.relieving, after)

    def _groups(self, number: int) -> tuple[Group, ...]:
        """Return a vehicle's rigid groups."""
        if number not in self.groups:
            self.groups[number] = groups_of(self.trains[number])
        return self.groups[number]

    def _next(self, who: tuple[int, ...]) -> Iterator[tuple[int, tuple[int, ...]]]:
        """Yield who may come next, the first of those that are alike, and who is then left."""
        met = set[object]()
        for place, number in enumerate(who):
            kind = self.trains[number]
            if self.convoy.ordered:
                yield number, who[place + 1 :]
            elif kind not in met:
                met.add(kind)
                yield number, (*who[:place], *who[place + 1 :])

    def walk(self) -> tuple[int, list[tuple[int, list[float]]]]:
        """Return the heading, and the number and the groups' places of each vehicle that makes up the greatest value.

        For one row only.
        """
        (who, most), limit, found = self._all, math.inf, list[tuple[int, list[float]]]()
        while who and most:
            best = self._who_is_next(who, most, limit)
            if best is None:
                break
            number, left, u, values = best
            groups = self._groups(number)
            at = places(groups, values, u)
            found.append((number, at))
            limit = at[-1] - groups[-1].length - self.convoy.headway
            who, most = left, most - 1
        return self.rows.heading, found

    def _who_is_next(
        self, who: tuple[int, ...], most: int, limit: float
    ) -> tuple[int, tuple[int, ...], float, tuple[Bent, ...]] | None:
        """Return the next vehicle, who is left, its place u and its chain; None when the best is that nobody comes."""
        found = []
        for number, left in self._next(who):
            values = self._vehicle(number, left, most)
            if math.isinf(limit):
                top = float(values[0].highest[0])
                u = front_places(values[0])[0 if self.rows.heading == 1 else -1]
            else:
                u = best_place(values[0], -math.inf, limit)
                top = float(values[0].at(np.zeros(1, dtype=np.intp), np.array([u]))[0])
            found.append((top, number, left, u, values))
        most_found = max(one[0] for one in found)
        if most_found <= TIE * np.abs(self.whole.value).max():
            return None
        _, number, left, u, values = next(one for one in found if one[0] >= most_found * (1.0 - TIE))
        return number, left, u, values


def _require_swept(convoy: Convoy, trains: Sequence[Train]) -> None:
    """Refuse trains that are not the convoy's, and what would take too long."""
    if [train.vehicle for train in trains] != list(convoy.vehicles):
        raise InputError(
            f"a convoy of {len(convoy.vehicles)} needs the train of each of its vehicles in their order, got "
            f"{len(trains)} trains",
            place="convoy",
        )
    require_chained(trains)
    axles = sum(train.vehicle.loads.size for train in trains)
    gaps = sum(isinstance(gap, tuple) for train in trains for gap in train.vehicle.spacings)
    for count, most, what in ((axles, MOST_AXLES, "axles"), (gaps, MOST_RANGES, "variable spacings")):
        if count > most:
            raise InputError(f"at most {most} {what} together can be swept, got {count}", place="convoy")
    remainders = 1 if convoy.ordered else math.prod(trains.count(train) + 1 for train in dict.fromkeys(trains))
    if remainders > MOST_REMAINDERS:
        raise InputError(
            f"in any order at most {MOST_REMAINDERS} sets of vehicles can be followed (six that all differ), got "
            f"{remainders}; state their order",
            place="convoy.vehicles",
        )
