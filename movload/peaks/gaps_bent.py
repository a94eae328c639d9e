"""Many piecewise linear functions of one place at once: their sums, envelopes, and greatest values within a window.

All of them stand in three flat arrays, one function after the other, so that a step over a hundred rows of a bridge is
a few array operations. Nothing here is sampled: where the greater of two straight pieces changes, the crossing point
becomes a node. A jump is a steep piece of `JUMP` edges; nodes within a quarter of an edge are one, so that the
round-off of summed spacings (a hundredth of that) never leaves a node half-way down a jump.
"""

from __future__ import annotations

from dataclasses import dataclass
from itertools import combinations
from typing import TYPE_CHECKING, Final

import numpy as np

if TYPE_CHECKING:
    from numpy.typing import NDArray

    from movload.arrays import Bools, Floats, Ints

JUMP: Final = 1.5  # edges over which a jump is spread: there an axle that has just left is surely off
NEAR: Final = 0.25  # edges: nodes no further apart are one
_STRAIGHT: Final = 4e-15  # of a function's largest: how far round-off takes a node off a straight line
_KINKS_ALIKE: Final = 4.0  # times that: how far a node that was left out may be off at most


@dataclass(frozen=True, slots=True, eq=False)
class Bent:
    """N functions, straight between their nodes and level beyond the outermost.

    Attributes
    ----------
    owner
        (M,) whose node it is, increasing; every function has one at least.
    u
        (M,) where it stands [m], increasing within a function.
    value
        (M,) there.
    edge
        How far outside an end station an axle still stands on it [m].
    """

    owner: Ints
    u: Floats
    value: Floats
    edge: float

    @property
    def count(self) -> int:
        """How many functions there are."""
        return int(self.owner[-1]) + 1

    @property
    def starts(self) -> Ints:
        """Where each function's nodes begin and the last one's end (N + 1,)."""
        return np.searchsorted(self.owner, np.arange(self.count + 1))

    @property
    def highest(self) -> Floats:
        """Greatest value of each function (N,)."""
        top: Floats = np.maximum.reduceat(self.value, self.starts[:-1])
        return top

    def at(self, owner: Ints, u: Floats) -> Floats:
        """Return the values (Q,) at places u (Q,) of the functions named."""
        starts = self.starts
        after = np.searchsorted(sort_keys(self.owner, self.u), sort_keys(owner, u))
        right = np.minimum(after, starts[owner + 1] - 1)
        left = np.maximum(after - 1, starts[owner])
        return _straight(self, left, right, u)

    def shifted(self, by: float) -> Bent:
        """Return the functions moved toward greater u."""
        return Bent(self.owner, self.u + by, self.value, self.edge)

    def plus(self, other: Bent) -> Bent:
        """Return the sums, function by function."""
        owner, u = _merged(self, other)
        return bent(owner, u, self.at(owner, u) + other.at(owner, u), self.edge)

    def or_more(self, other: Bent) -> Bent:
        """Return the greater of two, function by function."""
        owner, u = _one_each(*_merged(self, other), 0.0)
        both = [self.at(owner, u), other.at(owner, u)]
        starts = np.flatnonzero(owner[1:] == owner[:-1])
        pieces = [(one[starts], one[starts + 1]) for one in both]
        return _envelope((owner, u), np.maximum(*both), starts, pieces, self.edge)

    def within(self, least: float, greatest: float) -> Bent:
        """Return W(u), the greatest value between u - ``greatest`` and u - ``least``; ``greatest`` may be infinite.

        Between two places where a node enters or leaves the window, W is the greatest of three straight lines: the
        value that enters, the value that leaves, and the greatest node inside. Where they cross W has a node.
        """
        bounded = np.isfinite(greatest)
        events = [self.u + least, self.u + greatest] if bounded else [self.u + least]
        owner, u = _one_each(np.tile(self.owner, len(events)), np.concatenate(events), NEAR * self.edge)
        begins = self.value[self.starts[:-1]][owner]
        entering = self.at(owner, u - least)
        leaving = self.at(owner, u - greatest) if bounded else begins
        starts = np.flatnonzero(owner[1:] == owner[:-1])
        top = self._greatest_inside(owner[starts], u[starts + 1] - greatest, u[starts] - least)
        values = np.maximum(entering, leaving)
        np.maximum.at(values, starts, top)
        np.maximum.at(values, starts + 1, top)
        lower = np.minimum(entering, leaving)
        top = np.where(np.isfinite(top), top, np.minimum(lower[starts], lower[starts + 1]))
        pieces = [(entering[starts], entering[starts + 1]), (leaving[starts], leaving[starts + 1]), (top, top)]
        return _envelope((owner, u), values, starts, pieces, self.edge)

    def _greatest_inside(self, owner: Ints, first: Floats, last: Floats) -> Floats:
        """Return the greatest node (Q,) of each named function from u = ``first`` to ``last``; -inf without any."""
        near, keys, starts = NEAR * self.edge, sort_keys(self.owner, self.u), self.starts
        low = starts[owner]
        if np.isfinite(first).all():
            low = np.searchsorted(keys, sort_keys(owner, first - near))
        high = np.searchsorted(keys, sort_keys(owner, last + near), side="right")
        some = np.flatnonzero(high > low)
        greatest = np.full(owner.size, -np.inf)
        greatest[some] = Ranges(low[some], high[some]).best(self.value)
        return greatest


def bent(owner: Ints, u: Floats, value: Floats, edge: float) -> Bent:
    """Return functions of nodes in any order: of those that are one the highest stays, and none on a straight line."""
    order = np.lexsort((u, owner))
    owner, u, value = owner[order], u[order], value[order]
    cluster = np.cumsum(np.concatenate(([True], _apart(owner, u, NEAR * edge)))) - 1
    best = np.lexsort((-value, cluster))
    kept = best[np.concatenate(([True], np.diff(cluster) > 0))]
    return _without_straight(Bent(owner[kept], u[kept], value[kept], edge))


class Ranges:
    """Q ranges of rows low ... high - 1, none of them empty, over which greatest and least are wanted.

    Any range is two ranges, overlapping, whose length is the greatest power of two within it.
    """

    __slots__ = ("_by_level", "_first")

    def __init__(self, low: Ints, high: Ints) -> None:
        power = np.frexp((high - low).astype(np.float64))[1] - 1
        second = high - (1 << power)
        here = [np.flatnonzero(power == level) for level in range(int(power.max(initial=0)) + 1)]
        self._first = low
        self._by_level = [(one, low[one], second[one]) for one in here]

    def best(self, values: Floats, greater: np.ufunc = np.maximum) -> Floats:
        """Return the greatest of ``values`` (K, ...) in each range (Q, ...); ``np.minimum`` gives the least."""
        found = values[self._first]
        table = values
        for level, (here, first, second) in enumerate(self._by_level):
            if level:
                half = 1 << (level - 1)
                table = greater(table[:-half], table[half:])
                found[here] = greater(table[first], table[second])
        return found


def _straight(lines: Bent, left: Ints, right: Ints, u: Floats) -> Floats:
    """Return the values (Q,) at u on the straight pieces from node ``left`` to node ``right``."""
    width, along, near = lines.u[right] - lines.u[left], u - lines.u[left], NEAR * lines.edge
    part = np.clip(along / np.where(width > 0.0, width, 1.0), 0.0, 1.0)
    part[along <= near] = 0.0
    part[width - along <= near] = 1.0
    values: Floats = (1.0 - part) * lines.value[left] + part * lines.value[right]
    return values


def sort_keys(owner: Ints, u: Floats) -> NDArray[np.complex128]:
    """Return numbers that sort by owner and then by u: numpy orders complex ones so."""
    keys = np.empty(u.shape, dtype=np.complex128)
    keys.real, keys.imag = owner, u
    return keys


def _merged(one: Bent, other: Bent) -> tuple[Ints, Floats]:
    """Return the nodes of both."""
    return np.concatenate((one.owner, other.owner)), np.concatenate((one.u, other.u))


def _apart(owner: Ints, u: Floats, near: float) -> Bools:
    """Return which of sorted nodes (M,) are not one with the node before (M - 1,)."""
    apart: Bools = (np.diff(owner) > 0) | (np.diff(u) > near)
    return apart


def _one_each(owner: Ints, u: Floats, near: float) -> tuple[Ints, Floats]:
    """Return nodes sorted, the first of those that are one."""
    order = np.lexsort((u, owner))
    owner, u = owner[order], u[order]
    kept = np.concatenate(([True], _apart(owner, u, near)))
    return owner[kept], u[kept]


def _envelope(
    at: tuple[Ints, Floats], values: Floats, starts: Ints, pieces: list[tuple[Floats, Floats]], edge: float
) -> Bent:
    """Return the greatest of straight pieces between neighbouring nodes, with a node wherever two of them cross.

    Parameters
    ----------
    at
        Owner and place of the nodes (M,), sorted.
    values
        (M,) there.
    starts
        (Q,) nodes at which a piece begins; it ends at the next one.
    pieces
        What each line is worth where the piece begins and where it ends (Q,) each.
    """
    owner, u = at
    width = u[starts + 1] - u[starts]
    wide = width > 3.0 * JUMP * edge  # within a jump nothing crosses that could be the greatest
    owners, places, found = [owner], [u], [values]
    for one, other in combinations(pieces, 2):
        before, after = one[0] - other[0], one[1] - other[1]
        here = np.flatnonzero(wide & (before * after < 0.0))
        part = before[here] / (before[here] - after[here])
        lines = [line[0][here] + part * (line[1][here] - line[0][here]) for line in pieces]
        owners.append(owner[starts[here]])
        places.append(u[starts[here]] + part * width[here])
        found.append(np.maximum.reduce(lines))
    return bent(np.concatenate(owners), np.concatenate(places), np.concatenate(found), edge)


def _without_straight(full: Bent) -> Bent:
    """Return the functions without the nodes that lie on the straight line between their neighbours."""
    if full.u.size < 3:
        return full
    size = np.abs(full.value)
    scale = _STRAIGHT * np.maximum.reduceat(size, full.starts[:-1])[full.owner]
    inner = np.flatnonzero(full.owner[2:] == full.owner[:-2]) + 1
    part = (full.u[inner] - full.u[inner - 1]) / (full.u[inner + 1] - full.u[inner - 1])
    chord = full.value[inner - 1] + part * (full.value[inner + 1] - full.value[inner - 1])
    kept = np.ones(full.u.size, dtype=np.bool_)
    kept[inner] = np.abs(full.value[inner] - chord) > scale[inner]
    while True:  # many slight bends in a row are one that counts
        nodes = np.flatnonzero(kept)
        left = np.cumsum(kept) - 1
        right = nodes[np.minimum(left + 1, nodes.size - 1)]
        right = np.where(kept, np.arange(kept.size), right)
        off = np.abs(_straight(full, nodes[left], right, full.u) - full.value) > _KINKS_ALIKE * scale
        if not off.any():
            return Bent(full.owner[kept], full.u[kept], full.value[kept], full.edge)
        kept |= off
