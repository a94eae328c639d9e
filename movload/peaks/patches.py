"""Uniform loads as they stand: strip by strip, so that anyone can add the effect up again."""

from __future__ import annotations

from dataclasses import dataclass
from typing import TYPE_CHECKING, Final

import numpy as np

from movload.arrays import Bools, Floats, Ints, frozen_floats
from movload.errors import InputError

if TYPE_CHECKING:
    from collections.abc import Sequence

_NUMBERS: Final = ("start", "end", "load", "share", "impact", "factor", "z")


@dataclass(frozen=True, slots=True, eq=False)
class Patches:
    """Uniform loads standing still on the bridge, as one part feels them: strips of vehicles, and what follows them.

    Attributes
    ----------
    start, end
        Where each begins and ends along the bridge (S,) [m], start < end; what lies outside the stations is off.
    load
        Whole loads (S,) [N/m].
    share
        Share of each that reaches the part (S,) [-].
    impact
        Dynamic allowance of each (S,) [-]: its effect counts 1 + impact times.
    factor
        What the case and multiple presence multiply each by (S,) [-].
    z
        Where the middle of each one's vehicle keeps across (S,) [m]; nan where a share was typed.
    vehicle
        (S,) number of the vehicle that each belongs to, counted from 0.
    fixed
        (S,) whether a rating holds it fixed: traffic beside the vehicle that is asked about.

    Raises
    ------
    InputError
        One that ends where it starts, or before.
    """

    start: Floats
    end: Floats
    load: Floats
    share: Floats
    impact: Floats
    factor: Floats
    z: Floats
    vehicle: Ints
    fixed: Bools

    def __post_init__(self) -> None:
        """Copy read-only, and refuse what has no length."""
        for name in _NUMBERS:
            object.__setattr__(self, name, frozen_floats(getattr(self, name)))
        for number in np.flatnonzero(~(self.start < self.end)):
            raise InputError(
                f"a uniform load runs from its start to a greater end, got {self.start[number]:g} to "
                f"{self.end[number]:g} m",
                place=f"patches[{number}]",
            )

    @classmethod
    def none(cls) -> Patches:
        """Return no uniform loads."""
        nothing = np.zeros(0)
        return cls(nothing, nothing, nothing, nothing, nothing, nothing, nothing,
                   np.zeros(0, dtype=np.intp), np.zeros(0, dtype=np.bool_))  # fmt: skip

    @property
    def felt(self) -> Floats:
        """Each load as the part feels it (S,) [N/m], impact included."""
        loads: Floats = self.load * self.share * self.factor * (1.0 + self.impact)
        return loads

    def panel_loads(self, stations: Floats) -> Floats:
        """Return the downward loads (B,) [N] that reach the stations, impact included."""
        loads: Floats = spread(stations, self.start[None, :], self.end[None, :], self.felt)[0]
        return loads


def joined(patches: Sequence[Patches]) -> Patches:
    """Return the uniform loads of vehicles abreast as one, the vehicles counted in their order."""
    if len(patches) == 1:
        return patches[0]
    if not patches:
        return Patches.none()
    columns = [np.concatenate([getattr(one, name) for one in patches]) for name in _NUMBERS]
    start, end, load, share, impact, factor, z = columns
    vehicle = np.repeat(np.arange(len(patches)), [one.start.size for one in patches])
    fixed = np.concatenate([one.fixed for one in patches])
    return Patches(start, end, load, share, impact, factor, z, vehicle, fixed)


def spread(stations: Floats, start: Floats, end: Floats, felt: Floats) -> Floats:
    """Return panel-point loads (K, B) [N] of uniform loads, added up over the S of each of K positions.

    What stands in a panel reaches both its stations as a simple beam's reactions: the whole of it at its middle. What
    stands beyond the end stations reaches none.

    Parameters
    ----------
    stations
        (B,) [m].
    start, end
        Where the loads begin and end (K, S) [m]; infinite ends are allowed, an end before its start is no load.
    felt
        (S,) [N/m].
    """
    left, right = stations[:-1], stations[1:]
    begins = np.maximum(start[:, :, None], left)
    length = np.minimum(end[:, :, None], right)
    length -= begins
    np.maximum(length, 0.0, out=length)
    onward = np.where(length > 0.0, (begins - left) + 0.5 * length, 0.0) / (right - left)  # of it, to the right station
    onward *= length
    length -= onward
    loads = np.zeros((len(start), stations.size))
    loads[:, :-1] += np.einsum("ksb,s->kb", length, felt)
    loads[:, 1:] += np.einsum("ksb,s->kb", onward, felt)
    return loads
