"""Influence lines: a unit load on each panel point in turn, all from one factored stiffness.

Every line is straight between panel points, because the deck brings its load to them through simple stringers.
"""

from __future__ import annotations

from dataclasses import dataclass
from functools import cached_property
from itertools import repeat
from typing import TYPE_CHECKING, Final

import numpy as np

from movload.arrays import Floats, Ints, frozen_floats, held, keep_memory_warm
from movload.bridge.deck import deck_lengths, stations_of
from movload.errors import InputError
from movload.statics.condensed import Condensed, any_jumps, distinct_rows
from movload.statics.part import Effect, row_of
from movload.statics.stiffness import FactoredTruss, factored

if TYPE_CHECKING:
    from collections.abc import Sequence

    from movload.bridge.deck import PanelPoint
    from movload.bridge.truss import Truss

_COLUMNS: Final = 32  # unit loads solved at a time: keeps the working memory well below the answer's
_NOISE: Final = 2e-13  # of the row's largest: round-off, written as zero so that no peak is made of it
_MOST_CONDENSED: Final = 1 << 21  # ordinates: comparing rows holds a few copies of them
_IDLE: Final = 1e-11  # of the largest of its kind: a row that carries nothing (a zero-force bar)


@dataclass(frozen=True, slots=True, eq=False)
class InfluenceLine:
    """One row: ordinates (B,) per unit downward load over stations (B,) [m]."""

    effect: Effect
    stations: Floats
    ordinates: Floats

    def at(self, x: Floats | float) -> Floats:
        """Return the ordinate at x [m], shape of x: straight between stations, 0 off the bridge."""
        return np.asarray(np.interp(x, self.stations, self.ordinates, left=0.0, right=0.0))


@dataclass(frozen=True, eq=False)
class InfluenceLines:
    """How every effect of a part answers a unit load on each station; a linear ``Response``.

    Attributes
    ----------
    effects
        The rows (R): member forces (N per N, tension positive), reactions in their bed's axes, then each panel
        point's downward deflection (m per N).
    stations
        (B,) [m], the panel points' own x.
    ordinates
        (R, B) per unit downward load.
    """

    effects: tuple[Effect, ...]
    stations: Floats
    ordinates: Floats

    def __post_init__(self) -> None:
        """Check that rows and stations fit the ordinates; copy what somebody could still write into."""
        for name in ("stations", "ordinates"):
            array = getattr(self, name)
            if array.flags.writeable:
                object.__setattr__(self, name, frozen_floats(array))
        if self.ordinates.shape != (len(self.effects), self.stations.size):
            raise InputError(
                f"{len(self.effects)} effects and {self.stations.size} stations do not fit ordinates of shape "
                f"{self.ordinates.shape}",
                place="influence lines",
            )

    def __reduce__(self) -> tuple[object, ...]:
        """Pickle by parts, so that arrays come back read-only."""
        return (InfluenceLines, (self.effects, self.stations, self.ordinates))

    def __getitem__(self, key: str | tuple[str, str]) -> InfluenceLine:
        """Return one row by its name (a member's joints in either order) or by (part, name)."""
        row = row_of(self.effects, key)
        return InfluenceLine(self.effects[row], self.stations, self.ordinates[row])

    @cached_property
    def condensed(self) -> Condensed:
        """The distinct rows, and whether one heading answers for both; a very long bridge is left as it is."""
        if self.ordinates.size > _MOST_CONDENSED:
            rows, nothing = np.arange(len(self.effects)), np.zeros(0)
            jumps = any_jumps(self.ordinates)
            return Condensed(self, rows, np.ones(rows.size), nothing.astype(np.intp), nothing, jumps)
        chosen, distinct, row, scale, mirror, mirror_scale = distinct_rows(self.stations, self.ordinates)
        response = InfluenceLines(tuple(self.effects[one] for one in chosen), self.stations, held(distinct))
        return Condensed(response, row, scale, mirror, mirror_scale, any_jumps(distinct))

    @property
    def alike(self) -> object:
        """The same for lines that answer alike, whatever their rows are called."""
        return id(self.ordinates)

    @property
    def per_metre(self) -> Floats:
        """Effect of 1 N/m on the whole deck (R,)."""
        effects: Floats = self.ordinates @ deck_lengths(self.stations)
        return effects

    def named_for(self, part: str) -> InfluenceLines:
        """Return the same lines as those of another part."""
        return InfluenceLines(tuple(one._replace(part=part) for one in self.effects), self.stations, self.ordinates)

    def under(self, loads: Floats) -> Floats:
        """Return effects (R, K) under downward loads (B, K) [N] on the stations."""
        by_position: Floats = loads.T @ self.ordinates.T  # positions first in memory: extremes over them are then fast
        return by_position.T


def influence_lines(truss: Truss, panel_points: Sequence[PanelPoint], *, part: str = "truss") -> InfluenceLines:
    """Return the influence lines of every member force, reaction and panel-point deflection.

    Parameters
    ----------
    truss
        Determinate or not.
    panel_points
        Joints of the loaded chord in order along +x. The first or the last may be an abutment's x [m] that carries an
        end stringer; a load there does not reach the truss.
    part
        Name of the part these effects belong to.

    Returns
    -------
    InfluenceLines
        Rows ``"U1-L2"``; ``"L0 x"``, ``"L0 y"``, ``"L6 normal"``; ``"L3 down"``.

    Raises
    ------
    InputError, UnknownNameError
        Panel points that are not joints, or not in order.
    UnstableError
        The truss is a mechanism.
    """
    keep_memory_warm()
    return lines_of(factored(truss), panel_points, part=part)


def lines_of(solver: FactoredTruss, panel_points: Sequence[PanelPoint], *, part: str = "truss") -> InfluenceLines:
    """Return the influence lines of a truss already factored (see `influence_lines`)."""
    stations = stations_of(solver.truss, panel_points)
    joints = np.array([-1 if not isinstance(p, str) else solver.truss.joint_index[p] for p in panel_points])
    effects = effects_of(solver.truss, panel_points, part)
    ordinates = np.empty((len(effects), stations.size))
    for first in range(0, stations.size, _COLUMNS):
        columns = slice(first, first + _COLUMNS)
        ordinates[:, columns] = effects_under(solver, joints, _unit_loads(solver, joints[columns]))
    _write_noise_as_zero(ordinates, first_down=len(effects) - int((joints >= 0).sum()))
    return InfluenceLines(effects, stations, held(ordinates))


def effects_of(truss: Truss, panel_points: Sequence[PanelPoint], part: str) -> tuple[Effect, ...]:
    """Return the rows of a truss: members, reactions, panel points down."""
    members = [member.name for member in truss.members]
    reactions = [name for support in truss.supports for name in support.reaction_names]
    down = [f"{point} down" for point in panel_points if isinstance(point, str)]
    kinds = ["axial"] * len(members) + ["reaction"] * len(reactions) + ["down"] * len(down)
    units = ["N"] * (len(members) + len(reactions)) + ["m"] * len(down)
    joints = [*truss.named_by_hand, *([""] * (len(reactions) + len(down)))]
    rows = zip(repeat(part), members + reactions + down, kinds, units, joints, strict=False)
    return tuple(map(tuple.__new__, repeat(Effect), rows))


def effects_under(solver: FactoredTruss, joints: Ints, loads: Floats, misfit: Floats | None = None) -> Floats:
    """Return every row's value (R, K) under joint loads (2J, K) in the joints' own axes.

    ``joints`` (B,) are the numbers of the panel points' joints, -1 for an abutment.
    """
    displacements, forces = solver.solve(loads, misfit)
    rows = solver.rows
    along, normal = displacements[rows.joint_dofs[joints[joints >= 0]].T]
    sine, cosine = rows.axes[joints[joints >= 0], 1, None], rows.axes[joints[joints >= 0], 0, None]
    down = -(along * sine + normal * cosine)
    return np.concatenate((forces[: len(solver.truss.members)], rows.reactions(loads, forces), down))


def _unit_loads(solver: FactoredTruss, joints: Ints) -> Floats:
    """Return a unit downward load (2J, K) on each joint; nothing for an abutment (-1)."""
    rows = solver.rows
    loads = np.zeros((rows.imposed.size, joints.size))
    column = np.flatnonzero(joints >= 0)
    on = joints[column]
    loads[rows.joint_dofs[on, 0], column] = -rows.axes[on, 1]
    loads[rows.joint_dofs[on, 1], column] = -rows.axes[on, 0]
    return loads


def _write_noise_as_zero(ordinates: Floats, first_down: int) -> None:
    """Set round-off to exactly zero, in place: single ordinates by their row, idle rows by their kind."""
    size = np.abs(ordinates)
    largest = size.max(axis=1)
    for of_kind in (largest[:first_down], largest[first_down:]):
        of_kind[of_kind <= _IDLE * of_kind.max(initial=0.0)] = np.inf
    ordinates[size <= _NOISE * largest[:, None]] = 0.0
