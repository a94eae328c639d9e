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
    """

    response: Response
    row: Ints
    scale: Floats
    mirror: Ints
    mirror_scale: Floats

    @property
    def symmetric(self) -> bool:
        """Whether one heading is enough."""
        return bool(self.mirror.size)


def distinct_rows(ordinates: Floats) -> tuple[Ints, Ints, Floats]:
    """Return the rows that differ by more than scale and sign.

    Returns
    -------
    chosen
        (C,) one row of each kind.
    row, scale
        (R,) so that ordinates[r] = scale[r] * ordinates[chosen[row[r]]].
    """
    unit, size = _unit_rows(ordinates)
    order = np.argsort(unit @ _weights(ordinates.shape[1]), kind="stable")
    differs = np.abs(np.diff(unit[order], axis=0)).max(axis=1, initial=0.0) > _EQUAL
    kind = np.concatenate(([0], np.cumsum(differs)))
    row = np.empty_like(order)
    row[order] = kind
    chosen = order[np.concatenate(([True], differs))]
    divisor = np.where(size[chosen] == 0.0, 1.0, size[chosen])
    return chosen, row, size / divisor[row]


def mirrored_rows(stations: Floats, ordinates: Floats) -> tuple[Ints, Floats]:
    """Return for each of C distinct rows its mirror image among them and the scale; both empty without symmetry."""
    nothing = np.zeros(0, dtype=np.intp), np.zeros(0)
    from_right = (stations[0] + stations[-1]) - stations[::-1]
    if np.abs(from_right - stations).max() > _EQUAL * np.abs(stations).max():
        return nothing
    unit, size = _unit_rows(ordinates)
    reversed_unit, reversed_size = _unit_rows(ordinates[:, ::-1])
    weights = _weights(ordinates.shape[1])
    key, reversed_key = unit @ weights, reversed_unit @ weights
    order = np.argsort(key, kind="stable")
    after = np.clip(np.searchsorted(key[order], reversed_key), 1, max(1, key.size - 1))
    if key.size == 1:
        after = np.zeros(1, dtype=np.intp)
    either = np.stack((order[after - 1], order[after]))
    nearer = np.abs(key[either[0]] - reversed_key) <= np.abs(key[either[1]] - reversed_key)
    mirror: Ints = np.where(nearer, either[0], either[1])
    if np.abs(reversed_unit - unit[mirror]).max() > _EQUAL:
        return nothing
    return mirror, reversed_size / np.where(size[mirror] == 0.0, 1.0, size[mirror])


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
