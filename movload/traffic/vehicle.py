"""What moves as one: axles front to back, the gaps between them, and the load that travels with them."""

from __future__ import annotations

import math
from dataclasses import dataclass, field
from typing import TYPE_CHECKING, Final, TypeAlias

import numpy as np

from movload.arrays import Floats, frozen_floats, held
from movload.errors import InputError

if TYPE_CHECKING:
    from collections.abc import Sequence

Spacing: TypeAlias = "float | tuple[float, float]"

MOST_AXLES: Final = 200
MOST_RANGES: Final = 12
"""Gaps of one vehicle that may vary: the places to look at grow with every one."""


@dataclass(frozen=True, slots=True)
class Strip:
    """A uniform load of finite length that moves with the vehicle (a crawler track, a car of a train).

    Parameters
    ----------
    start
        Distance of its front end behind the front axle [m]; negative where it reaches before it.
    length
        [m], above 0.
    load
        Of both sides together [N/m], 0 or more.
    gauge
        Between the middles of its two sides [m]; nan when not stated.

    Raises
    ------
    InputError
        No length, or a load that is none.
    """

    start: float
    length: float
    load: float
    gauge: float = field(default=math.nan, kw_only=True)

    def __post_init__(self) -> None:
        """Refuse a strip without length, and a load that lifts."""
        _require_uniform("strips", self.start, self.load, self.gauge)
        if not (math.isfinite(self.length) and self.length > 0):
            raise InputError(f"a uniform load needs a length above 0, got {self.length:g} m", place="strips.length")


@dataclass(frozen=True, slots=True)
class Tail:
    """A uniform load that follows the vehicle and never ends: ``start`` behind the front axle [m], ``load`` [N/m].

    ``gauge`` is that of its wheels [m]; nan when not stated.
    """

    start: float
    load: float
    gauge: float = field(default=math.nan, kw_only=True)

    def __post_init__(self) -> None:
        """Refuse a load that lifts."""
        _require_uniform("tail", self.start, self.load, self.gauge)


@dataclass(frozen=True, slots=True, eq=False)
class Vehicle:
    """One vehicle.

    Parameters
    ----------
    title
        What it is called.
    loads
        Whole-axle loads (A,) [N], front to back, 0 or more; at most 200. None where strips alone carry it (tracks).
    spacings
        Distances between axles (A - 1) [m], 0 or more, each a number or a (least, greatest) pair; at most 12 pairs.
    gauges
        Wheel gauge of each axle (A,) [m]; empty when not stated.
    left_shares
        Part of each axle that its left wheels carry (A,) [-]; empty for halves.
    strips, tail
        Uniform loads that move with it: at most 200 strips. Not all that it carries may be 0.
    headings
        Directions in which it may cross: +1 toward +x, -1 the other way.

    Raises
    ------
    InputError
        Nothing that carries, loads or distances that are none, or more axles or ranges than are looked at.
    """

    title: str
    loads: Floats
    spacings: Sequence[Spacing]
    gauges: tuple[float, ...] = field(default=(), kw_only=True)
    left_shares: tuple[float, ...] = field(default=(), kw_only=True)
    strips: tuple[Strip, ...] = field(default=(), kw_only=True)
    tail: Tail | None = field(default=None, kw_only=True)
    headings: tuple[int, ...] = field(default=(1, -1), kw_only=True)
    _distances: Floats = field(init=False, repr=False)

    def __post_init__(self) -> None:
        """Copy and check axle by axle."""
        object.__setattr__(self, "loads", frozen_floats(np.atleast_1d(np.asarray(self.loads, dtype=np.float64))))
        object.__setattr__(self, "spacings", tuple(_spacing(gap) for gap in self.spacings))
        object.__setattr__(self, "headings", tuple(self.headings))
        object.__setattr__(self, "strips", tuple(self.strips))
        _check_loads(self.loads, self.strips)
        _check_spacings(self.spacings, self.loads.size)
        fixed = [] if self.has_ranges else self.spacings
        object.__setattr__(self, "_distances", held(np.cumsum([0.0, *fixed][: self.loads.size])))
        if sorted(self.headings) not in ([-1], [1], [-1, 1]):
            raise InputError(f"headings are +1, -1 or both, got {self.headings}", place="headings")
        for number, share in enumerate(self.left_shares):
            if not 0.0 <= share <= 1.0:
                raise InputError(f"a left share is 0 to 1, got {share}", place=f"left_shares[{number}]")
        for word, values in (("gauges", self.gauges), ("left_shares", self.left_shares)):
            if values and len(values) != self.loads.size:
                raise InputError(f"one for each of {self.loads.size} axles, got {len(values)}", place=word)
        for number, gauge in enumerate(self.gauges):
            if not (math.isfinite(gauge) and gauge > 0):
                raise InputError(f"a gauge must be above 0, got {gauge} m", place=f"gauges[{number}]")

    @property
    def gross(self) -> float:
        """Axle loads and strips together [N]; a tail, which never ends, is left out."""
        return float(self.loads.sum()) + sum(strip.load * strip.length for strip in self.strips)

    @property
    def has_ranges(self) -> bool:
        """Whether any spacing may vary."""
        return any(isinstance(gap, tuple) for gap in self.spacings)

    @property
    def distances(self) -> Floats:
        """Distance of each axle behind the front (A,) [m]: the first axle, or 0 of the strips where there is none.

        Raises
        ------
        InputError
            A spacing is a range, so there is no one distance.
        """
        for number, gap in enumerate(self.spacings):
            if isinstance(gap, tuple):
                raise InputError(
                    f"a spacing between {gap[0]:g} and {gap[1]:g} m is a range; one distance is needed here",
                    place=f"{self.title}: spacings[{number}]",
                )
        return self._distances


def _require_uniform(place: str, start: float, load: float, gauge: float) -> None:
    """Refuse a uniform load that starts nowhere, lifts, or has no gauge where one is stated."""
    if not math.isfinite(start):
        raise InputError(f"a start is a finite distance, got {start:g} m", place=f"{place}.start")
    if not (math.isfinite(load) and load >= 0):
        raise InputError(f"a uniform load must be 0 or more, got {load:g} N/m", place=f"{place}.load")
    if not (math.isnan(gauge) or (math.isfinite(gauge) and gauge > 0)):
        raise InputError(f"a gauge must be above 0, got {gauge:g} m", place=f"{place}.gauge")


def _spacing(gap: Spacing | Sequence[float]) -> Spacing:
    """Return a spacing as a float, or a pair as a tuple; a pair of equals is one number."""
    if isinstance(gap, (int, float, np.number)):
        return float(gap)
    if len(gap) != 2:
        raise InputError(f"a spacing is one number or a (least, greatest) pair, got {gap!r}", place="spacings")
    least, greatest = float(gap[0]), float(gap[1])
    return least if least == greatest else (least, greatest)


def _check_loads(loads: Floats, strips: Sequence[Strip]) -> None:
    """Refuse axle loads that are no weights, and a vehicle that weighs nothing."""
    if loads.ndim != 1 or not (loads.size or strips):
        raise InputError("a vehicle needs at least one axle, got none", place="axles")
    for word, count in (("axles", loads.size), ("strips", len(strips))):
        if count > MOST_AXLES:
            raise InputError(f"a vehicle has at most {MOST_AXLES} {word}, got {count}", place=word)
    for number, load in enumerate(loads):
        if not (math.isfinite(load) and load >= 0):
            raise InputError(
                f"a load must be a finite number, 0 or more, got {load:g} N", place=f"axles[{number}].load"
            )
    if not loads.any() and not strips:
        raise InputError("all axle loads are 0 N; at least one must be above 0", place="axles")
    if not loads.any() and not any(strip.load for strip in strips):
        raise InputError("all of its loads are 0; at least one must be above 0", place="strips")


def _check_spacings(spacings: Sequence[Spacing], axles: int) -> None:
    """Refuse gaps that are negative, reversed, or too few or many."""
    gaps = max(axles - 1, 0)
    if len(spacings) != gaps:
        raise InputError(f"{axles} axles need {gaps} spacings, got {len(spacings)}", place="spacings")
    ranges = sum(isinstance(gap, tuple) for gap in spacings)
    if ranges > MOST_RANGES:
        raise InputError(f"at most {MOST_RANGES} spacings may be ranges, got {ranges}", place="spacings")
    for number, gap in enumerate(spacings):
        least, greatest = gap if isinstance(gap, tuple) else (gap, gap)
        if not (math.isfinite(least) and math.isfinite(greatest) and least >= 0):
            raise InputError(f"a spacing must be a finite number, 0 or more, got {gap} m", place=f"spacings[{number}]")
        if least > greatest:
            raise InputError(f"a range runs from least to greatest, got {gap} m", place=f"spacings[{number}]")
