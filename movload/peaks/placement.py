"""The loads as they stand: axle by axle, so that anyone can add the effect up again."""

from __future__ import annotations

from dataclasses import dataclass
from typing import TYPE_CHECKING, Final

import numpy as np

from movload.arrays import Bools, Floats, Ints, frozen_floats

if TYPE_CHECKING:
    from collections.abc import Sequence

SNAP: Final = 1e-13  # of the largest station: an axle no further outside an end station stands on it


@dataclass(frozen=True, slots=True, eq=False)
class Placement:
    """One vehicle, or several abreast, standing still on the bridge, as one part feels it.

    Attributes
    ----------
    x
        Where each axle stands (A,) [m], vehicle by vehicle, front axle first; one outside the stations is off.
    load
        Whole-axle loads (A,) [N].
    share
        Share of each axle that reaches the part (A,) [-].
    impact
        Dynamic allowance of each axle (A,) [-]: its effect counts 1 + impact times.
    factor
        What the case and multiple presence multiply each axle by (A,) [-].
    z
        Where the middle of each axle's vehicle keeps across (A,) [m]; nan where a share was typed.
    vehicle
        (A,) number of the vehicle that each axle belongs to, counted from 0.
    fixed
        (A,) whether a rating holds the axle fixed: traffic beside the vehicle that is asked about.
    """

    x: Floats
    load: Floats
    share: Floats
    impact: Floats
    factor: Floats
    z: Floats
    vehicle: Ints
    fixed: Bools

    def __post_init__(self) -> None:
        """Copy read-only."""
        for name in ("x", "load", "share", "impact", "factor", "z"):
            object.__setattr__(self, name, frozen_floats(getattr(self, name)))

    @classmethod
    def off(cls) -> Placement:
        """Return the empty placement: the vehicle is off the bridge."""
        nothing = np.zeros(0)
        return cls(nothing, nothing, nothing, nothing, nothing, nothing, np.zeros(0, dtype=np.intp),
                   np.zeros(0, dtype=np.bool_))  # fmt: skip

    @property
    def felt(self) -> Floats:
        """Each axle as the part feels it (A,) [N], impact included."""
        loads: Floats = self.load * self.share * self.factor * (1.0 + self.impact)
        return loads

    def panel_loads(self, stations: Floats) -> Floats:
        """Return the downward loads (B,) [N] that reach the stations, impact included."""
        if not self.x.size:
            return np.zeros(stations.size)
        loads: Floats = panel_loads(stations, self.x[None, :], self.felt)[0]
        return loads


def joined(placements: Sequence[Placement]) -> Placement:
    """Return vehicles abreast as one placement, counted in their order."""
    if len(placements) == 1:
        return placements[0]
    columns = [
        np.concatenate([getattr(one, name) for one in placements])
        for name in ("x", "load", "share", "impact", "factor", "z")
    ]
    vehicle = np.repeat(np.arange(len(placements)), [one.x.size for one in placements])
    x, load, share, impact, factor, z = columns
    fixed = np.concatenate([one.fixed for one in placements])
    return Placement(x, load, share, impact, factor, z, vehicle, fixed)


def edge(stations: Floats) -> float:
    """Return how far outside an end station an axle still stands on it [m]: the round-off of summed spacings."""
    return SNAP * float(np.abs(stations).max())


def on_the_ends(stations: Floats, x: Floats) -> Floats:
    """Return the places x with those that stand on an end station but for round-off put exactly there."""
    margin = edge(stations)
    placed = np.where(np.abs(x - stations[0]) <= margin, stations[0], x)
    return np.where(np.abs(x - stations[-1]) <= margin, stations[-1], placed)


def panel_loads(stations: Floats, x: Floats, felt: Floats) -> Floats:
    """Return panel-point loads (K, B) [N] of axles standing at x (K, A) [m].

    Parameters
    ----------
    felt
        Load [N] of each axle; its shape spreads over that of x.
    """
    return scattered(stations, x, felt, np.arange(len(x))[:, None])


def scattered(stations: Floats, x: Floats, felt: Floats, position: Ints) -> Floats:
    """Return panel-point loads (K, B) [N] of axles at x [m], each belonging to one of K positions, all of them met.

    A load between two stations reaches both as a simple beam's reactions; one outside the stations reaches none.

    Parameters
    ----------
    felt, position
        Load [N] and position of each axle; their shapes spread over that of x, positions count up to the last.
    """
    panel = panels_at(stations, x)
    margin = edge(stations)
    felt = felt * ((x >= stations[0] - margin) & (x <= stations[-1] + margin))
    onward = (x - stations[panel]) * (1.0 / np.diff(stations))[panel]
    onward *= felt
    felt -= onward
    panel += stations.size * position
    panel = panel.reshape(-1)
    positions = int(position.reshape(-1)[-1]) + 1
    size = positions * stations.size
    loads: Floats = np.bincount(panel, felt.reshape(-1), size).astype(np.float64, copy=False)
    loads[1:] += np.bincount(panel, onward.reshape(-1), size)[:-1]
    return loads.reshape(positions, stations.size)


def panels_at(stations: Floats, x: Floats) -> Ints:
    """Return the panel that holds each x, the outermost for an x outside: the number of its left station.

    An x within a last place of a station may be given to the panel on its other side, where its load is the same.
    """
    among = np.interp(x, stations, np.arange(stations.size, dtype=np.float64))
    panel: Ints = among.astype(np.intp)
    return np.minimum(panel, stations.size - 2, out=panel)
