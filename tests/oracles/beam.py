"""A beam on two supports under axles and uniform loads by plain statics, and the worst places on a fine grid.

No influence line: reactions by moments about the other end, sections by what stands before them.
"""

from __future__ import annotations

from dataclasses import dataclass
from typing import TYPE_CHECKING, Final

import numpy as np

if TYPE_CHECKING:
    from movload.arrays import Floats
    from movload.traffic.crossing import Train

ENDLESS: Final = 1e4  # m: where a tail is cut, beyond every span here


@dataclass(frozen=True)
class Beam:
    """A beam on two supports, 0 to ``length``, under a train: reactions by moments, sections by what stands before."""

    length: float
    train: Train

    @property
    def uniform(self) -> list[tuple[float, float, float]]:
        """Begin, end and load of each uniform load behind the front; a tail is cut where nobody looks."""
        vehicle, factor = self.train.vehicle, self.train.factor
        strips = zip(vehicle.strips, self.train.strip_shares, strict=True)
        cut = [(strip.start, strip.start + strip.length, strip.load * share * factor) for strip, share in strips]
        if vehicle.tail is not None:
            cut.append(
                (vehicle.tail.start, vehicle.tail.start + ENDLESS, vehicle.tail.load * self.train.tail_share * factor)
            )
        return cut

    @property
    def heaviest(self) -> float:
        """No more than this is ever on the beam [N]."""
        return float(self.train.felt.sum() + sum(min(end - begin, self.length) * q for begin, end, q in self.uniform))

    def axles(self, front: Floats, heading: int) -> list[tuple[Floats, Floats]]:
        """Return what each axle weighs on the beam, and its x."""
        axles = []
        for load, d in zip(self.train.felt, self.train.vehicle.distances, strict=True):
            x = front - heading * d
            axles.append((np.where((x >= 0.0) & (x <= self.length), load, 0.0), x))
        return axles

    def stretches(self, front: Floats, heading: int) -> list[tuple[float, Floats, Floats]]:
        """Return load, start and end of every uniform load, as far as it is on the beam."""
        found = []
        for begin, end, load in self.uniform:
            low, high = sorted((-heading * begin, -heading * end))
            found.append((load, *(np.clip(front + edge, 0.0, self.length) for edge in (low, high))))
        return found

    def reaction(self, front: Floats, heading: int, end: float) -> Floats:
        """Return the reaction of one end (x = 0 or the length) by moments about the other."""
        turning = sum(weight * abs(x - self.length + end) for weight, x in self.axles(front, heading))
        for load, start, stop in self.stretches(front, heading):
            turning = turning + load * (stop - start) * abs(0.5 * (start + stop) - self.length + end)
        return np.asarray(turning / self.length)

    def moment(self, front: Floats, heading: int, section: Floats) -> Floats:
        """Return the moment at sections: the left reaction times its arm, less what stands before the section."""
        before = sum(w * np.maximum(section - x, 0.0) for w, x in self.axles(front, heading))
        for load, start, stop in self.stretches(front, heading):
            cut = np.minimum(stop, section)
            before = before + load * np.maximum(cut - start, 0.0) * (section - 0.5 * (start + cut))
        return np.asarray(self.reaction(front, heading, 0.0) * section - before)

    def fronts(self, heading: int, count: int) -> tuple[Floats, float]:
        """Return fronts [m] from before anything is on the beam until all is off, or a tail covers it; and the step."""
        ends = [
            edge for begin, end, _ in self.uniform for edge in (begin, end) if end - begin < ENDLESS or edge == begin
        ]
        places = np.array([*self.train.vehicle.distances, *ends])
        first, last = sorted((heading * places.min(), heading * places.max()))
        front, step = np.linspace(first - self.length, last + self.length, count, retstep=True)
        return front, float(step)

    def sampled(self, heading: int) -> tuple[float, float, float, float]:
        """Return the largest moment and end shear of a fine grid, and its steps of front and section [m].

        The best moment is then sampled again around its place, ten times finer each time.
        """
        front, step = self.fronts(heading, 301)
        section, apart = np.linspace(0.0, self.length, 31, retstep=True)
        shears = [self.reaction(front, heading, end).max() for end in (0.0, self.length)]
        moments = self.moment(front[:, None], heading, section)
        best, near = moments.max(), np.unravel_index(moments.argmax(), moments.shape)
        at, s, width, depth = front[near[0]], section[near[1]], step, float(apart)
        for _ in range(7):
            front, section = at + width * np.linspace(-1.0, 1.0, 21), s + depth * np.linspace(-1.0, 1.0, 21)
            moments = self.moment(front[:, None], heading, np.clip(section, 0.0, self.length))
            near = np.unravel_index(moments.argmax(), moments.shape)
            at, s, width, depth = front[near[0]], section[near[1]], 0.1 * width, 0.1 * depth
            best = max(best, moments.max())
        return float(best), float(max(shears)), step, float(apart)
