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
    from movload.statics.part import Response

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

    response: Response
    row: Ints
    scale: Floats
    mirror: Ints
    mirror_scale: Floats
    jumps: bool

    @property
    def symmetric(self) -> bool:
        """Whether one heading is enough."""
        return bool(self.mirror.size)


def distinct_rows(ordinates: Floats) -> tuple[Ints, Floats, Ints, Floats]:
    """Return the rows that differ by more than scale and sign.

    Returns
    -------
    chosen, distinct
        (C,) one row of each kind, and (C, B) its ordinates scaled to a first large one of 1.
    row, scale
        (R,) so that ordinates[r] = scale[r] * distinct[row[r]].
    """
    unit, scale = _unit_rows(ordinates)
    order = np.argsort(unit @ _weights(ordinates.shape[1]), kind="stable")
    in_order = unit[order]
    differs = np.ones(order.size, dtype=bool)
    differs[1:] = np.abs(in_order[1:] - in_order[:-1]).max(axis=1, initial=0.0) > _EQUAL
    row = np.empty_like(order)
    row[order] = np.cumsum(differs) - 1
    return order[differs], in_order[differs], row, scale


def mirrored_rows(stations: Floats, distinct: Floats) -> tuple[Ints, Floats]:
    """Return for each of C distinct rows its mirror image among them and the scale; both empty without symmetry."""
    nothing = np.zeros(0, dtype=np.intp), np.zeros(0)
    from_right = (stations[0] + stations[-1]) - stations[::-1]
    if np.abs(from_right - stations).max() > _EQUAL * np.abs(stations).max():
        return nothing
    weights = _weights(distinct.shape[1])
    reversed_unit, scale = _unit_rows(distinct[:, ::-1])
    key, reversed_key = distinct @ weights, reversed_unit @ weights
    mirror = np.empty(key.size, dtype=np.intp)
    mirror[np.argsort(reversed_key, kind="stable")] = np.argsort(key, kind="stable")  # a symmetric set sorts alike
    if np.abs(reversed_unit - distinct[mirror]).max() > _EQUAL:
        return nothing
    return mirror, scale


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
