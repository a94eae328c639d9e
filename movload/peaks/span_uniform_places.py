"""Every place of a moving load at which a simple span's moment or end shear may be greatest (see `span_uniform`).

Along the load u counts behind the front, F(u) is the load before u, and the span reaches from u = a to a + L. Between
neighbouring borders, the *cells*, the density of load at both ends of the span, alpha and beta, does not change, so
that about a cell's middle, x = a - middle,

    m(a)  = (mean of F from a to a + L) = m + m1 x + m2 x^2,   m1 = (load on the span)/L,  m2 = (beta - alpha)/(2L)
    c(a)  = c + k m1 x + k m2 x^2      where F reaches m(a); k = 1/(density there), 0 under an axle
    V(a)  = m(a) - F(a)            the shear just inside the end at a; V'(a) = m1 - alpha + 2 m2 x
    M'(a) = m'(a) (c(a) - a) - V(a)
"""

from __future__ import annotations

from dataclasses import dataclass
from typing import TYPE_CHECKING, Final, NamedTuple

import numpy as np

if TYPE_CHECKING:
    from movload.arrays import Bools, Floats, Ints
    from movload.peaks.span_uniform_loads import SpanLoads

_SLIGHT: Final = 1e-16  # of the most that one piece puts on the span: less is lost in the round-off of a moment
_HALVINGS: Final = 54  # of a bracket of length 2 or less: its ends are then neighbours among floating-point numbers


class Places(NamedTuple):
    """Where the span's near end is along the load, a (K,) [m], and where the section is, c (K,) [m]."""

    end: Floats
    section: Floats


def moment_places(loads: SpanLoads, length: float) -> Places:
    """Return the places of section and load among which the absolute maximum moment of a span is."""
    cells = _cells(_events(loads, length), loads, length)
    pieces = _pieces(loads, length)
    levels = np.maximum.accumulate(loads.mean(length, cells.borders))  # it never falls; round-off might
    cells = _cells(np.concatenate((cells.borders, _crossings(cells, levels, pieces))), loads, length)
    level = loads.mean(length, cells.middle)
    which = np.clip(np.searchsorted(pieces.level, level, side="right") - 1, 0, pieces.level.size - 1)
    reach, shear = pieces.at(which, level) - cells.middle, loads.shears(length, cells.middle)
    cell, scaled = _stationary(_slopes(cells, pieces.run[which], reach, shear))
    end = cells.middle[cell] + cells.half[cell] * scaled
    section = pieces.at(which[cell], loads.mean(length, end))
    return Places(end, np.clip(section, end, end + length))


def shear_places(loads: SpanLoads, length: float) -> Floats:
    """Return the places (K,) [m] of the end at a among which the greatest shear just inside that end is."""
    cells = _cells(_events(loads, length), loads, length)
    slope, bend = cells.slope - cells.near, 2.0 * cells.half_bend
    turns = (bend < 0.0) & (np.abs(slope) < -bend * cells.half)
    return np.concatenate((cells.borders, cells.middle[turns] - slope[turns] / bend[turns]))


def _events(loads: SpanLoads, length: float) -> Floats:
    """Return every a [m] at which an axle, or an end of a uniform load, is on either end of the span."""
    breaks = loads.breaks()
    return np.concatenate((breaks, breaks - length))


@dataclass(frozen=True, slots=True, eq=False)
class _Cells:
    """Stretches of a within which nothing comes or goes, the mean and what makes it about the middle of each.

    Attributes
    ----------
    borders
        (C + 1,) a [m] between the cells and at both ends.
    middle, half
        (C,) a in the middle of each cell, and half its length [m].
    slope, half_bend
        (C,) m1 [N/m] and m2 [N/m2].
    near
        (C,) alpha [N/m].
    """

    borders: Floats
    middle: Floats
    half: Floats
    slope: Floats
    half_bend: Floats
    near: Floats


def _cells(places: Floats, loads: SpanLoads, length: float) -> _Cells:
    """Return the cells between places, what is on the span judged at each one's middle, where no round-off matters."""
    borders = np.unique(places)
    middle, half = 0.5 * (borders[1:] + borders[:-1]), 0.5 * np.diff(borders)
    near, far = loads.density(middle), loads.density(middle + length)
    slope = loads.between(middle, middle + length) / length
    return _Cells(borders, middle, half, slope, (far - near) / (2.0 * length), near)


@dataclass(frozen=True, slots=True, eq=False)
class _Pieces:
    """F from the front on, as pieces that rise (N,): from ``level`` [N] at ``start`` [m] on by one in ``run`` [m/N].

    An axle rises at once, with a run of 0; stretches without load, or with next to none, are no pieces.
    """

    level: Floats
    start: Floats
    run: Floats

    def at(self, which: Ints, level: Floats) -> Floats:
        """Return where pieces reach levels [m]; an axle exactly where it is."""
        places: Floats = self.start[which] + self.run[which] * (level - self.level[which])
        return places


def _pieces(loads: SpanLoads, length: float) -> _Pieces:
    """Return the pieces of F: at each break the axles there, then the uniform load up to the next."""
    breaks = loads.breaks()
    after = np.diff(breaks, append=np.inf)
    density = np.append(loads.density(0.5 * (breaks[1:] + breaks[:-1])), loads.endless())
    point = np.bincount(np.searchsorted(breaks, loads.at), weights=loads.weight, minlength=breaks.size)
    most = np.stack((point, density * np.minimum(after, length)), axis=1)  # of each on the span
    real = most > _SLIGHT * most.max()
    rises = np.stack((point[1:], density[:-1] * after[:-1]), axis=1)  # without the last, which may never end
    run = np.zeros_like(most)
    np.divide(1.0, density, out=run[:, 1], where=real[:, 1])
    level = np.cumsum([0.0, point[0], *rises[:, ::-1].ravel()]).reshape(-1, 2)
    return _Pieces(level[real], np.repeat(breaks, 2).reshape(-1, 2)[real], run[real])


def _crossings(cells: _Cells, levels: Floats, pieces: _Pieces) -> Floats:
    """Return every a [m] at which the section passes from one piece to the next: m(a) reaches the next one's level.

    ``levels`` are the means m (C + 1,) [N] at the cells' borders.
    """
    level = pieces.level[1:]
    cell = np.clip(np.searchsorted(levels, level, side="right") - 1, 0, cells.middle.size - 1)
    bend, whole = cells.half_bend[cell], 2.0 * cells.half[cell]
    slope = np.maximum(cells.slope[cell] - bend * whole, 0.0)  # at the cell's near border
    rise = np.maximum(level - levels[cell], 0.0)
    steep = slope + np.sqrt(np.maximum(slope * slope + 4.0 * bend * rise, 0.0))
    ahead = np.zeros_like(rise)
    np.divide(2.0 * rise, steep, out=ahead, where=2.0 * rise < steep * whole)
    places: Floats = cells.borders[cell] + ahead
    return places


def _slopes(cells: _Cells, run: Floats, reach: Floats, shear: Floats) -> Floats:
    """Return the coefficients of M' in each cell (C, 4), of powers of x / half: a cubic.

    ``run`` is k, ``reach`` c - a and ``shear`` V(a) at the middle (C,).
    """
    slope, half_bend = cells.slope, cells.half_bend
    s1, s2 = run * slope - 1.0, run * half_bend  # c - a = reach + s1 x + s2 x^2
    powers = (
        slope * reach - shear,
        cells.near - slope + slope * s1 + 2.0 * half_bend * reach,
        -half_bend + slope * s2 + 2.0 * half_bend * s1,
        2.0 * half_bend * s2,
    )
    return np.stack([power * cells.half**number for number, power in enumerate(powers)], axis=1)


def _stationary(cubics: Floats) -> tuple[Ints, Floats]:
    """Return where functions with slopes (C, 4) may be greatest on -1 to 1: number of the function, place.

    A cubic turns twice at most, so between -1, those turns and 1 it rises or falls only: where it goes from above 0 to
    below 0 a bracket holds one root, and halving it finds that to the last digit. The ends of the brackets count too:
    borders, and places where round-off hides a change of sign.
    """
    knots = np.sort(np.stack((np.full(len(cubics), -1.0), *_turns(cubics), np.ones(len(cubics))), axis=1), axis=1)
    values = _cubic(cubics[:, None], knots)
    bracket: Bools = (values[:, :-1] > 0.0) & (values[:, 1:] < 0.0)
    cell, number = np.nonzero(bracket)
    low, high = knots[cell, number], knots[cell, number + 1]
    inside = cubics[cell]
    for _ in range(_HALVINGS if cell.size else 0):
        middle = 0.5 * (low + high)
        rising = _cubic(inside, middle) > 0.0
        low, high = np.where(rising, middle, low), np.where(rising, high, middle)
    apart = np.diff(knots, axis=1, append=np.inf) > 0.0
    return np.concatenate((np.nonzero(apart)[0], cell)), np.concatenate((knots[apart], low))


def _turns(cubics: Floats) -> tuple[Floats, Floats]:
    """Return where cubics turn, clipped to -1 to 1; 1 where one does not."""
    _, first, second, third = cubics.T
    inner = second * second - 3.0 * third * first
    with np.errstate(divide="ignore", invalid="ignore", over="ignore"):  # straight ones and parabolas have fewer turns
        root = -(second + np.copysign(np.sqrt(np.maximum(inner, 0.0)), second))
        turns = root / (3.0 * third), first / root
    one, other = (np.where((inner < 0.0) | np.isnan(turn), 1.0, np.clip(turn, -1.0, 1.0)) for turn in turns)
    return one, other


def _cubic(cubics: Floats, x: Floats) -> Floats:
    """Return the values of cubics (..., 4) at x."""
    values: Floats = cubics[..., 0] + x * (cubics[..., 1] + x * (cubics[..., 2] + x * cubics[..., 3]))
    return values
