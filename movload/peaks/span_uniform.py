"""The absolute maximum moment and end shear of a simple span under a train with uniform loads, exactly.

Let u count along the train behind its front, F(u) be the load before u and K its integral from before the front on.
K'' is the load, so K is convex: it bends at axles and curves under uniform loads. A span that reaches from u = a to
a + L has, at the section u = c, the moment of a beam on two supports: the chord of K over the span less K itself,

    M(a, c) = ((a + L - c) K(a) + (c - a) K(a + L)) / L - K(c)

1. *The section for a fixed train.* dM/dc = m(a) - F(c), with m(a) = (K(a + L) - K(a)) / L, the mean of F on the span:
   that is the shear, which falls from one end to the other. So M is greatest where the shear changes sign: under an
   axle, where F jumps over m(a), or inside a uniform load, where F equals it. Where F equals it over a stretch without
   load M is the same all along, up to the load at either side.
2. *The train.* As a grows so does m(a), and with it c(a): every axle and every stretch of uniform load has its turn
   once, and m(a) reaches the level at which one follows another at one a, the root of a quadratic. Cut the line of a
   there, and wherever an axle or the end of a uniform load is on an end of the span. On each cell between, m(a) is a
   quadratic, c(a) fixed or a quadratic, and so M(a, c(a)) a polynomial of degree 4 at most. Its slope is a cubic,

       dM/da = F(a) - m(a) + m'(a) (c(a) - a)

   whose turns are roots of a quadratic; between them it only rises or only falls, so each of its roots has a bracket
   that is proven, and halving finds it to the last digit. The greatest of all roots and borders is the absolute
   maximum. Nothing is ever sampled.
3. *The end shear.* Just inside the end at a it is V(a) = m(a) - F(a), an axle on the end counted. V falls only by what
   leaves there, so it is greatest where a load is about to leave, or where uniform loads do: on each cell it is a
   quadratic, greatest at a border or where its slope, (load on the span)/L - (uniform load at a), is 0. The other end
   is the first one's mirror image.

Before the first cell nothing is on the span. Behind the last nothing is, or an unending tail covers the whole of it
for good: the position where it first does stands for all those. Every value is added up load by load at its place,
M = sum P y + sum q (integral of y), so that it is never more than what statics give there.

No load relieves: the moment line and the line of an end's shear are nowhere below 0. What a case leaves out where it
relieves (`Train.relieving`) therefore does not matter here. Turning a train round gives the mirror image: neither
maximum depends on the heading; where it stands does.
"""

from __future__ import annotations

import math
from dataclasses import dataclass, replace
from typing import TYPE_CHECKING, Final

import numpy as np

from movload.errors import InputError
from movload.peaks.span_uniform_loads import SpanLoads
from movload.peaks.span_uniform_places import moment_places, shear_places

if TYPE_CHECKING:
    from movload.arrays import Floats
    from movload.traffic.crossing import Train
    from movload.traffic.vehicle import Vehicle

_TIE: Final = 1e-12  # of the maximum: stands whose effects differ by less are equally bad
_SAME_PLACE: Final = 9  # decimals of a metre to which front positions count as equal when ties are broken


@dataclass(frozen=True, slots=True)
class SpanStand:
    """Where a train stands at a maximum of one span; nan, 0, -1 and nan where nothing weighs anything.

    What is at d behind the front is at position - heading d. With an axle on the section, axle j is at section +
    heading (d_axle - d_j), which puts that axle there without round-off: an axle a hair outside an end would be lost.

    Attributes
    ----------
    position
        x of the front from the span's left end [m].
    heading
        +1 (what is at d behind the front is at position - d) or -1 (at position + d).
    axle
        The axle (0 = front) on the section, just inside the end for a shear; -1 where there is none.
    section
        x of the section from the left end [m]; of a shear 0 or the span's length.
    """

    position: float
    heading: int
    axle: int
    section: float


@dataclass(frozen=True, slots=True, eq=False)
class _Found:
    """Places in a train that may be worst (K,): the effect, u of the section, and x of the section if heading -1."""

    value: Floats
    along: Floats
    section: Floats


def uniform_values(length: float, train: Train) -> tuple[float, float]:
    """Return the absolute maximum moment [N m] and end shear [N] of a span under a train, static, for either heading.

    Parameters
    ----------
    length
        Of the simple span [m], above 0.
    train
        Axles, strips and tail as the span feels them, each 0 or more; also none.

    Raises
    ------
    InputError
        A length or a load outside its range, a spacing that is a range, or not one share for each strip.
    """
    loads = _loads_of(length, train)
    if loads.empty:
        return 0.0, 0.0
    return float(_bent(loads, length).value.max()), float(_sheared(loads, length).value.max())


def uniform_stands(length: float, train: Train) -> tuple[SpanStand, SpanStand]:
    """Return where a train stands for a span's absolute maximum moment, and for its greatest end shear.

    Of equally bad stands the one with the smallest position counts, then heading +1, then the axle nearest the front,
    and an axle before none. Where the worst goes on for a stretch (a strip longer than the span) the stands at both
    ends of the stretch are those that count; behind the place where a tail first covers the span there are no more.

    Parameters
    ----------
    length, train
        As for `uniform_values`; the train's headings are those it may take.

    Raises
    ------
    InputError
        As for `uniform_values`.
    """
    loads = _loads_of(length, train)
    if loads.empty:
        return (SpanStand(math.nan, 0, -1, math.nan),) * 2
    places = _bent(loads, length), _sheared(loads, length)
    bent, sheared = (_first(found, loads, length, train.headings) for found in places)
    return bent, sheared


def least_spacings(vehicle: Vehicle) -> Vehicle:
    """Return a vehicle with every spacing that may vary at its least: on a simple span no other is worse.

    The moment line of a section falls to both sides of it, down to the ends and is 0 beyond. Take any stand with any
    spacings. The section is under an axle, in a gap, or outside the vehicle. Draw all axles together towards it, gap
    by gap, down to the least spacings: one on the section stays, those to either side of one in a gap share what the
    gap loses, and outside the vehicle the nearest stays. Each axle then is where it was or nearer to the section on
    its own side, so its ordinate is no less; loads are 0 or more, so the moment is no less. For an end's shear the
    line falls from just inside that end to the other. The axle on the span that is nearest to the end stays, and what
    follows it draws nearer; what is beyond the end counted for nothing and cannot count for less.

    Uniform loads keep their distance from the front axle whatever the spacings are. An axle that draws nearer to some
    of them parts from others, so that with them the argument fails, and a vehicle with both is refused.

    Raises
    ------
    InputError
        Spacings that may vary beside strips or a tail.
    """
    if not vehicle.has_ranges:
        return vehicle
    if vehicle.strips or vehicle.tail is not None:
        raise InputError(
            "a spacing that may vary beside uniform loads has no least that is surely the worst", place=vehicle.title
        )
    return replace(vehicle, spacings=[gap[0] if isinstance(gap, tuple) else gap for gap in vehicle.spacings])


def _loads_of(length: float, train: Train) -> SpanLoads:
    """Return a train as a span feels it, all input checked."""
    if not (math.isfinite(length) and length > 0.0):
        raise InputError(f"a span must be above 0 and finite, got {length:g} m", place="length")
    return SpanLoads.of(train)


def _bent(loads: SpanLoads, length: float) -> _Found:
    """Return the moments at all places that may be worst."""
    end, along = moment_places(loads, length)
    return _Found(loads.moments(length, end, along), along, along - end)


def _sheared(loads: SpanLoads, length: float) -> _Found:
    """Return the shears inside both ends at all places that may be worst."""
    turned = loads.turned()
    near, far = shear_places(loads, length), shear_places(turned, length)
    value = np.concatenate((loads.shears(length, near), turned.shears(length, far)))
    return _Found(value, np.concatenate((near, -far)), np.repeat([0.0, length], [near.size, far.size]))


def _first(found: _Found, loads: SpanLoads, length: float, headings: tuple[int, ...]) -> SpanStand:
    """Return of all places that reach the maximum, in all headings, the first in the order of ties."""
    reached = found.value >= (1.0 - _TIE) * found.value.max()
    along, axle = (np.tile(part, len(headings)) for part in (found.along[reached], loads.axle_at(found.along[reached])))
    heading = np.repeat(headings, axle.size // len(headings))
    near = np.tile(found.section[reached], len(headings))
    section = np.where(heading < 0, near, length - near)  # heading +1 the near end of the load is on the right
    position = section + heading * along
    late = np.where(axle < 0, np.iinfo(np.intp).max, axle)
    first = int(np.lexsort((late, -heading, np.round(position, _SAME_PLACE)))[0])
    return SpanStand(float(position[first]), int(heading[first]), int(axle[first]), float(section[first]))
