"""The absolute maximum moment and end shear of simple spans under trains of point axles, exactly, in closed form.

Take some neighbouring axles of a train alone, a *group* of weight W, and the moment under one of its axles, a, that
stands at s on a span of length L; r is how far the group's resultant stands behind a, d each axle's distance behind
the front one. With the train moving toward +x,

    M(s) = W s (L - s + r) / L - (sum of P (d - d_a) over the axles behind a)

is greatest at s = (L + r)/2, where axle and resultant stand equally far from midspan. Its value there is

    M = W (L + r^2 / L) / 4 - (sum of P |d - d_a|) / 2

The greatest of all groups and axles, with s on the span (|r| <= L), is the absolute maximum moment:

- No M is more than is true. Loads are 0 or more, so what the group leaves out only adds to a simple span's moment; and
  where an axle of the group is off the span, M(s) runs on in a straight line and counts it as less than nothing.
- The true maximum is among them. Between axles the moment is straight, so it is greatest under one; the axles then on
  the span are a group; and where that group's own M(s) is greatest, it is no less.

So nothing need be known beforehand about which axles are on the span. An end's shear only grows as axles come nearer
to that end, so it is greatest with an axle a just inside it. Of a group in from there, V = W - (sum of P |d - d_a|)/L,
and the greatest of all groups is the greatest end shear for the same two reasons.

Turning a train round gives the mirror image about midspan: the same moments at mirrored sections, the same shears at
the other end. So neither maximum depends on the heading; where it stands does.
"""

from __future__ import annotations

from dataclasses import dataclass
from typing import TYPE_CHECKING, Final, NamedTuple, TypeAlias

import numpy as np

from movload.arrays import held
from movload.errors import InputError

if TYPE_CHECKING:
    from collections.abc import Iterator

    from numpy.typing import NDArray

    from movload.arrays import Floats, Ints

    Bools: TypeAlias = NDArray[np.bool_]
    _Reached: TypeAlias = tuple[Ints, Ints, Floats]  # span, axle, twice how far beyond midspan the axle stands

_IN_CACHE: Final = 250_000  # doubles worked on at a time
_TIE: Final = 1e-12  # of the maximum: stands whose effects differ by less are equally bad
_SAME_PLACE: Final = 9  # decimals of a metre to which front positions count as equal when ties are broken


@dataclass(frozen=True, slots=True, eq=False)
class Stands:
    """Where a train stands at the maxima of L spans; nan, 0, -1 and nan where no axle weighs anything.

    Axle j is then at section + heading (d_axle - d_j), which puts ``axle`` on the section without round-off.

    Attributes
    ----------
    position
        (L,) x of the front axle from the span's left end [m].
    heading
        (L,) +1 (axle j is at position - d_j) or -1 (at position + d_j).
    axle
        (L,) the axle (0 = front) under which the moment is, or that stands just inside the end.
    section
        (L,) x of the section from the left end [m]; of a shear 0 or the span's length.
    """

    position: Floats
    heading: Ints
    axle: Ints
    section: Floats


@dataclass(frozen=True, slots=True, eq=False)
class SpanMaxima:
    """The absolute maxima of L simple spans under one train, and where it stands for them.

    Attributes
    ----------
    moment
        (L,) sagging [N m], 0 or more.
    shear
        (L,) the larger of both ends' [N], 0 or more.
    moment_stands, shear_stands
        Where.
    """

    moment: Floats
    shear: Floats
    moment_stands: Stands
    shear_stands: Stands


@dataclass(frozen=True, slots=True, eq=False)
class _Groups:
    """Groups with one of their axles, a, train by train (G,): its number, W [N], r [m], the sum of P |d - d_a| [N m].

    ``leads`` and ``trails`` say whether none of the group's axles stands ahead of a, and whether none stands behind it.
    """

    train: Ints
    axle: Ints
    weight: Floats
    resultant: Floats
    spread: Floats
    leads: Bools
    trails: Bools

    def moments(self, lengths: Floats) -> Floats:
        """Return each group's M (L, G) [N m]; 0 or less with s off the span, as the spread is never below W |r|."""
        length = lengths[:, None]
        apart = np.minimum(np.abs(self.resultant), length)
        values: Floats = 0.25 * self.weight * (length + apart * apart / length) - 0.5 * self.spread
        return values

    def shears(self, lengths: Floats) -> Floats:
        """Return each group's V (L, G) [N]; 0 or less where a is inside its group and so at no end."""
        values: Floats = self.weight * (self.leads | self.trails) - self.spread / lengths[:, None]
        return values


def span_values(lengths: Floats, distances: Floats, felt: Floats) -> tuple[Floats, Floats]:
    """Return the absolute maximum moments (V, L) [N m] and end shears (V, L) [N] of V trains, for either heading.

    Parameters
    ----------
    lengths
        (L,) of the simple spans [m], above 0.
    distances
        (V, A) of the axles behind the front one [m], not falling from one axle that weighs something to the next.
    felt
        (V, A) axle loads as the span feels them [N], 0 or more. Axles of 0 N, at whatever distance, count for nothing:
        they fill up the shorter trains.

    Raises
    ------
    InputError
        A length, a distance or a load outside its range, or shapes that do not match.
    """
    axles = _axles_of(lengths, distances, felt)
    most = np.zeros((2, lengths.size, len(felt)))
    for groups in _groups(axles, lengths):
        starts = np.flatnonzero(np.diff(groups.train, prepend=-1))
        trains = groups.train[starts]
        for best, values in zip(most, (groups.moments(lengths), groups.shears(lengths)), strict=True):
            best[:, trains] = np.maximum(best[:, trains], np.maximum.reduceat(values, starts, axis=1))
    return held(np.ascontiguousarray(most[0].T)), held(np.ascontiguousarray(most[1].T))


def span_maxima(lengths: Floats, distances: Floats, felt: Floats, headings: tuple[int, ...]) -> SpanMaxima:
    """Return the absolute maxima of L simple spans under one train, and where it stands for them.

    Of equally bad stands the one with the smallest position counts, then heading +1, then the axle nearest the front.

    Parameters
    ----------
    lengths, distances, felt
        As for `span_values`, of one train: (L,), (A,) and (A,).
    headings
        The directions in which it may cross.

    Raises
    ------
    InputError
        As for `span_values`, or headings other than +1, -1 or both.
    """
    if sorted(headings) not in ([-1], [1], [-1, 1]):
        raise InputError(f"headings are +1, -1 or both, got {headings}", place="headings")
    moment, shear = (held(values[0]) for values in span_values(lengths, distances[None], felt[None]))
    bent: list[_Reached] = []
    sheared: list[_Reached] = []
    for groups in _groups(_axles_of(lengths, distances[None], felt[None]), lengths):
        span, one = np.nonzero(groups.moments(lengths) >= (1.0 - _TIE) * moment[:, None])
        bent.append((span, groups.axle[one], groups.resultant[one]))
        reaching = groups.shears(lengths) >= (1.0 - _TIE) * shear[:, None]
        for end, standing in ((1.0, groups.leads), (-1.0, groups.trails)):  # the end ahead of the train, or behind it
            span, one = np.nonzero(reaching & standing)
            sheared.append((span, groups.axle[one], end * lengths[span]))
    places = [_first_stands(lengths, distances, headings, reached) for reached in (bent, sheared)]
    return SpanMaxima(moment, shear, *places)


def _first_stands(lengths: Floats, distances: Floats, headings: tuple[int, ...], reached: list[_Reached]) -> Stands:
    """Return of all stands that reach each span's maximum the first in the order of ties."""
    if not reached:  # no axle weighs anything
        nowhere, off = held(np.full(lengths.size, np.nan)), np.zeros(lengths.size, dtype=np.intp)
        return Stands(nowhere, off, off - 1, nowhere)
    span, axle, beyond = (np.tile(np.concatenate(parts), len(headings)) for parts in zip(*reached, strict=True))
    heading = np.repeat(headings, span.size // len(headings))
    section = 0.5 * (lengths[span] + heading * beyond)
    position = section + heading * distances[axle]
    order = np.lexsort((axle, -heading, np.round(position, _SAME_PLACE), span))
    first = order[np.unique(span[order], return_index=True)[1]]
    return Stands(held(position[first]), heading[first], axle[first], held(section[first]))


class _Axles(NamedTuple):
    """All axles that weigh something, train by train, front to back (N,)."""

    train: Ints
    axle: Ints
    distance: Floats
    felt: Floats


def _axles_of(lengths: Floats, distances: Floats, felt: Floats) -> _Axles:
    """Return the axles that weigh something, all input checked."""
    if lengths.ndim != 1 or not lengths.size or felt.ndim != 2 or distances.shape != felt.shape:
        shapes = f"{lengths.shape}, {distances.shape} and {felt.shape}"
        raise InputError(f"(L,) spans and one distance for each axle load are needed, got {shapes}", place="spans")
    for number in np.flatnonzero(~(np.isfinite(lengths) & (lengths > 0.0))):
        raise InputError(f"a span must be above 0 and finite, got {lengths[number]:g} m", place=f"lengths[{number}]")
    for train, axle in np.argwhere(~(np.isfinite(felt) & (felt >= 0.0))):
        place = f"felt[{train}, {axle}]"
        raise InputError(
            f"a load on a simple span must be 0 or more and finite, got {felt[train, axle]:g} N", place=place
        )
    train, axle = np.nonzero(felt)
    axles = _Axles(train, axle, distances[train, axle], felt[train, axle])
    backward = ~np.isfinite(axles.distance)
    backward[1:] |= (train[1:] == train[:-1]) & (axles.distance[1:] < axles.distance[:-1])
    for number in np.flatnonzero(backward):
        place = f"distances[{train[number]}, {axle[number]}]"
        raise InputError(f"axles are counted front to back, got {axles.distance[number]:g} m", place=place)
    return axles


def _groups(axles: _Axles, lengths: Floats) -> Iterator[_Groups]:
    """Yield the groups of all trains that fit on the longest span, in pieces that stay in cache."""
    longest = float(lengths.max())
    most = 1  # axles that fit together
    train, distance = axles.train, axles.distance
    while ((train[most:] == train[:-most]) & (distance[most:] - distance[:-most] <= longest)).any():
        most += 1
    step = max(1, _IN_CACHE // (most * most * lengths.size))
    for first in range(0, train.size, step):
        yield _groups_from(axles, np.arange(first, min(first + step, train.size)), most, longest)


def _groups_from(axles: _Axles, first: Ints, most: int, longest: float) -> _Groups:
    """Return the groups that begin with the axles ``first`` (F,), of at most ``most`` axles within ``longest`` [m]."""
    number = first[:, None] + np.arange(most)
    inside = number < axles.train.size
    number[~inside] = axles.train.size - 1
    distance, train = axles.distance[number], axles.train[number]
    fits = inside & (train == train[:, :1]) & (distance - distance[:, :1] <= longest)
    felt = np.where(fits, axles.felt[number], 0.0)[:, None, :]
    behind = distance[:, None, :] - distance[:, :, None]  # (F, a, axle)
    # summed up from each group's own first axle: differences of one sum over the train would lose digits far back in it
    weight = np.cumsum(felt, axis=2)  # (F, 1, last axle)
    moment, spread = np.cumsum(felt * behind, axis=2), np.cumsum(felt * np.abs(behind), axis=2)  # (F, a, last axle)
    group, one, last = np.nonzero(fits[:, None, :] & np.triu(np.ones((most, most), dtype=np.bool_)))
    of_group = weight[group, 0, last]
    return _Groups(
        train[group, 0], axles.axle[number[group, one]], of_group, moment[group, one, last] / of_group,
        spread[group, one, last], behind[group, one, 0] == 0.0, behind[group, one, last] == 0.0,
    )  # fmt: skip
