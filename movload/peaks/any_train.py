"""The extremes of any train, whatever it is made of: each kind by what finds it exactly.

What finds a kind is loaded only when such a train comes: most vehicles are axles at fixed distances.
"""

from __future__ import annotations

from typing import TYPE_CHECKING, Final

import numpy as np

from movload.errors import InputError
from movload.peaks.extremes import static_extremes

if TYPE_CHECKING:
    from collections.abc import Sequence

    from movload.arrays import Floats
    from movload.statics.part import AtStations
    from movload.traffic.crossing import Train

_PLAIN: Final = (False, 1.0)  # axles at fixed distances that count in full wherever they stand


def extremes_of(response: AtStations, trains: Sequence[Train]) -> tuple[Floats, Floats]:
    """Return the highest and lowest static value of each row under each train (V, R), both including 0.

    Spacings that may vary take the worst of their ranges, row by row (`movload.peaks.gaps`); loads that count less
    where they relieve do so row by row and sense by sense (`movload.statics.adverse`).

    Raises
    ------
    InputError
        Loads that count less where they relieve, with an axle whose share is negative: which way it relieves then
        differs from axle to axle.
    """
    kinds = [(train.vehicle.has_ranges, train.relieving) for train in trains]
    if all(kind == _PLAIN for kind in kinds):
        return static_extremes(response, trains)
    found = np.empty((2, len(trains), len(response.effects)))
    for kind in dict.fromkeys(kinds):
        some = [number for number, one in enumerate(kinds) if one == kind]
        found[:, some] = _of_kind(response, [trains[number] for number in some], kind)
    return found[0], found[1]


def _of_kind(response: AtStations, trains: Sequence[Train], kind: tuple[bool, float]) -> tuple[Floats, Floats]:
    """Return the extremes (V, R) of trains of one kind: whether spacings vary, and what counts where it relieves."""
    ranged, relieving = kind
    if relieving != 1.0 and any((train.shares < 0.0).any() for train in trains):
        raise InputError(
            "a load model that leaves out what relieves cannot stand with a wheel pair beyond a truss",
            place=trains[0].vehicle.title,
        )
    if ranged:
        from movload.peaks.gaps import gap_extremes

        return gap_extremes(response, trains)
    if relieving == 1.0:
        return static_extremes(response, trains)
    for_highest, for_lowest = lines_for(response, relieving)
    return static_extremes(for_highest, trains)[0], static_extremes(for_lowest, trains)[1]


def lines_for(response: AtStations, relieving: float) -> tuple[AtStations, AtStations]:
    """Return what a train is swept over for the highest and for the lowest values, by what counts where it relieves."""
    if relieving == 1.0:
        return response, response
    from movload.statics.adverse import biased

    return biased(response, relieving)
