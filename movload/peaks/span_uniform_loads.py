"""What moves over a simple span, as sums over axles and uniform loads at distances behind the front."""

from __future__ import annotations

from dataclasses import dataclass
from typing import TYPE_CHECKING, Final

import numpy as np

from movload.errors import InputError
from movload.peaks.moving_batch import uniform_loads, whole_loads

if TYPE_CHECKING:
    from movload.arrays import Floats, Ints
    from movload.traffic.crossing import Train


_NOTHING: Final = 1e-200  # N, N/m: products of what is less would leave the range of floating-point numbers


@dataclass(frozen=True, slots=True, eq=False)
class SpanLoads:
    """Axles and uniform loads that weigh something, u counted behind the front [m].

    Attributes
    ----------
    at, weight
        (A,) each axle's u [m], and what the span feels of it [N].
    begin, end
        (S,) u of both ends of each uniform load [m], begin < end; a tail ends at inf.
    load
        (S,) what the span feels of each [N/m].
    axle
        (A,) the axles' numbers in their vehicle.
    """

    at: Floats
    weight: Floats
    begin: Floats
    end: Floats
    load: Floats
    axle: Ints

    @classmethod
    def of(cls, train: Train) -> SpanLoads:
        """Return a train as a span feels it.

        Raises
        ------
        InputError
            A spacing that is a range, a load below 0, or not one share for each strip.
        """
        begin, end, share = uniform_loads(train)
        load = whole_loads(train) * share * train.factor
        for name, loads, unit in (("axles", train.felt, "N"), ("uniform loads", load, "N/m")):
            for number in np.flatnonzero(~(np.isfinite(loads) & (loads >= 0.0))):
                raise InputError(
                    f"a load on a simple span must be 0 or more and finite, got {loads[number]:g} {unit}",
                    place=f"{train.vehicle.title}: {name}[{number}]",
                )
        axle, some = np.flatnonzero(train.felt > _NOTHING), load > _NOTHING
        return cls(train.vehicle.distances[axle], train.felt[axle], begin[some], end[some], load[some], axle)

    @property
    def empty(self) -> bool:
        """Whether nothing weighs anything."""
        return not self.at.size and not self.load.size

    def turned(self) -> SpanLoads:
        """Return the mirror image: u becomes -u, so that what a span's one end felt its other end feels."""
        return SpanLoads(-self.at, self.weight, -self.end, -self.begin, self.load, self.axle)

    def breaks(self) -> Floats:
        """Return every u at which there is an axle or an end of a uniform load, increasing (B,) [m]."""
        every = np.concatenate((self.at, self.begin, self.end))
        return np.unique(every[np.isfinite(every)])

    def axle_at(self, u: Floats) -> Ints:
        """Return the foremost axle that is exactly at each place (K,); -1 where none is."""
        on = u[:, None] == np.append(self.at, np.nan)
        return np.append(self.axle, -1)[np.where(on.any(axis=1), on.argmax(axis=1), self.at.size)]

    def endless(self) -> float:
        """Return the density behind the last break [N/m]."""
        return float(self.load[np.isinf(self.end)].sum())

    def density(self, u: Floats) -> Floats:
        """Return the uniform load at places (K,) [N/m]."""
        density: Floats = ((self.begin < u[:, None]) & (u[:, None] < self.end)) @ self.load
        return density

    def between(self, start: Floats, end: Floats) -> Floats:
        """Return the load between places (K,) [N]."""
        first, last = start[:, None], end[:, None]
        uniform = np.maximum(np.minimum(last, self.end) - np.maximum(first, self.begin), 0.0) @ self.load
        between: Floats = ((first < self.at) & (self.at < last)) @ self.weight + uniform
        return between

    def mean(self, length: float, start: Floats) -> Floats:
        """Return the mean of F, the load before a place, over a length from places (K,) on [N].

        Not of what is turned: with an unending load in front there is no end to F.
        """
        first, last = start[:, None], start[:, None] + length
        of_axles = np.clip((last - self.at) / length, 0.0, 1.0) @ self.weight
        begin, end = np.clip(self.begin, first, last), np.clip(self.end, first, last)
        grows = (end - begin) * (0.5 * (begin + end) - self.begin)  # F over what is on the length, then beyond it
        grown = (last - end) * (np.minimum(self.end, last) - self.begin)
        mean: Floats = of_axles + (grows + grown) @ self.load / length
        return mean

    def moments(self, length: float, start: Floats, section: Floats) -> Floats:
        """Return the moments (K,) [N m] at sections u = c of spans from u = a on, load by load with its ordinate.

        Moment line, x = u - a and s = c - a: x (L - s)/L before the section, s (L - x)/L behind it. A uniform load
        on a straight stretch counts with the ordinate at its middle.
        """
        s, first = (section - start)[:, None], start[:, None]
        x = np.clip(self.at - first, 0.0, length)
        of_axles = (np.minimum(x * (length - s), s * (length - x)) / length) @ self.weight
        begin, end = np.clip(self.begin - first, 0.0, length), np.clip(self.end - first, 0.0, length)
        near, far = np.minimum(end, s), np.maximum(begin, s)
        before = np.maximum(near - begin, 0.0) * (near + begin) * (length - s)
        behind = np.maximum(end - far, 0.0) * (2.0 * length - end - far) * s
        moments: Floats = of_axles + (before + behind) @ self.load / (2.0 * length)
        return moments

    def shears(self, length: float, start: Floats) -> Floats:
        """Return the shears (K,) [N] just inside the end u = a of spans from there on, an axle on that end included.

        Shear line: 1 - x/L.
        """
        first = start[:, None]
        x = self.at - first
        of_axles = np.where((x >= 0.0) & (x <= length), 1.0 - x / length, 0.0) @ self.weight
        begin, end = np.clip(self.begin - first, 0.0, length), np.clip(self.end - first, 0.0, length)
        uniform = ((end - begin) * (1.0 - 0.5 * (begin + end) / length)) @ self.load
        shears: Floats = of_axles + uniform
        return shears
