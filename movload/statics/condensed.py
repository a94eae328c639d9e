"""The fewest rows that must be swept: rows equal up to scale and sign are one, and a mirrored bridge answers for both.

In most trusses many bars share a line: chords with the same moment centre, an end post and its chord, a post and its
diagonal between level chords. And where a bridge is symmetric, a vehicle heading one way does to a row what the same
vehicle heading the other way does to the row's mirror image.
"""

from __future__ import annotations

from dataclasses import dataclass
from typing import TYPE_CHECKING, Final

import numpy as np

if TYPE_CHECKING:
    from movload.arrays import Floats, Ints
    from movload.statics.part import AtStations

_EQUAL: Final = 1e-13  # of a row's largest ordinate: rows that differ by no more are one
_PIVOT: Final = (
    0.999  # the first ordinate this near the largest fixes a row's scale, so that equal peaks do not confuse
)


@dataclass(frozen=True, slots=True, eq=False)
class Condensed:
    """A response with fewer rows, and how all rows follow from them.

    Attributes
    ----------
    response
        Answers for C distinct rows.
    row, scale
        (R,): row r of the whole response is ``scale[r]`` times distinct row ``row[r]``.
    mirror, mirror_scale
        (C,): distinct row c seen from the other end is ``mirror_scale[c]`` times distinct row ``mirror[c]``; both
        empty when the bridge is not symmetric.
    jumps
        Whether some row both changes sign and is not 0 at an end station (an inclined bearing, an overhang).
    """

    response: AtStations
    row: Ints
    scale: Floats
    mirror: Ints
    mirror_scale: Floats
    jumps: bool

    @property
    def symmetric(self) -> bool:
        """Whether one heading is enough."""
        return bool(self.mirror.size)


def distinct_rows(stations: Floats, ordinates: Floats) -> tuple[Ints, Floats, Ints, Floats, Ints, Floats]:
    """Return the rows that differ by more than scale and sign, and each one's mirror image among them.

    Returns
    -------
    chosen, distinct
        (C,) one row of each kind, and (C, B) its ordinates scaled to a first large one of 1.
    row, scale
        (R,) so that ordinates[r] = scale[r] * distinct[row[r]].
    mirror, mirror_scale
        As in `Condensed`; empty unless stations and rows are their own mirror image.
    """
    rows = len(ordinates)
    mirror, mirror_scale = np.zeros(0, dtype=np.intp), np.zeros(0)
    if _is_symmetric(stations):
        both = np.concatenate((ordinates, ordinates[:, ::-1]))
        unit, scale, kind = _kinds(both)
        chosen = _first_of_each(kind[:rows], int(kind.max()) + 1)
        if (chosen >= 0).all():  # no mirrored row is of a kind of its own
            mirror = kind[rows + chosen]
            mirror_scale = scale[rows + chosen] / np.where(scale[chosen] == 0.0, 1.0, scale[chosen])
            return chosen, unit[chosen], kind[:rows], scale[:rows], mirror, mirror_scale
    unit, scale, kind = _kinds(ordinates)
    chosen = _first_of_each(kind, int(kind.max()) + 1)
    return chosen, unit[chosen], kind, scale, mirror, mirror_scale


def _kinds(ordinates: Floats) -> tuple[Floats, Floats, Ints]:
    """Return unit rows, their scales and the number of each row's kind: the same for rows that differ by scale only."""
    unit, scale = _unit_rows(ordinates)
    order = np.argsort(unit @ _weights(unit.shape[1]), kind="stable")
    in_order = unit[order]
    differs = np.zeros(order.size, dtype=np.intp)
    differs[1:] = np.abs(in_order[1:] - in_order[:-1]).max(axis=1, initial=0.0) > _EQUAL
    kind = np.empty_like(order)
    kind[order] = np.cumsum(differs)
    return unit, scale, kind


def _first_of_each(kind: Ints, kinds: int) -> Ints:
    """Return the first row of each kind, -1 where no row is of it."""
    first = np.full(kinds, -1, dtype=np.intp)
    first[kind[::-1]] = np.arange(kind.size)[::-1]
    return first


def _is_symmetric(stations: Floats) -> bool:
    """Return whether the stations are their own mirror image."""
    from_right = (stations[0] + stations[-1]) - stations[::-1]
    return bool(np.abs(from_right - stations).max() <= _EQUAL * np.abs(stations).max())


def any_jumps(ordinates: Floats) -> bool:
    """Return whether some row both changes sign and is not 0 at an end station."""
    jumping = ordinates[(ordinates[:, 0] != 0.0) | (ordinates[:, -1] != 0.0)]
    return bool(((jumping.max(axis=1, initial=0.0) > 0.0) & (jumping.min(axis=1, initial=0.0) < 0.0)).any())


def _unit_rows(ordinates: Floats) -> tuple[Floats, Floats]:
    """Return rows scaled so that their first large ordinate is 1, and that ordinate (R,); idle rows stay 0."""
    size = np.abs(ordinates)
    place = np.argmax(size >= _PIVOT * size.max(axis=1, keepdims=True), axis=1)
    pivot = ordinates[np.arange(len(ordinates)), place]
    return ordinates / np.where(pivot == 0.0, 1.0, pivot)[:, None], pivot


def _weights(columns: int) -> Floats:
    """Return irregular weights, so that rows that differ have different sums."""
    return np.asarray(np.cos(1.0 + 2.39996 * np.arange(columns)))


def spread(highest: Floats, lowest: Floats, row: Ints, scale: Floats) -> tuple[Floats, Floats]:
    """Return the extremes (V, R) of rows that are ``scale`` (R,) times distinct ones with extremes (V, C)."""
    top, bottom = scale * highest[:, row], scale * lowest[:, row]
    return np.maximum(top, bottom), np.minimum(top, bottom)
