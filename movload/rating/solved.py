"""A bridge solved once for a method: parts with their lines, permanent effects and strengths. No vehicle in it."""

from __future__ import annotations

import itertools
from dataclasses import dataclass, field
from typing import TYPE_CHECKING

import numpy as np

from movload.arrays import Floats, held
from movload.bridge.across import Across
from movload.rating.factor_sets import PERMITTED, FactorSet
from movload.rating.impact_table import ImpactTable, impact_table
from movload.rating.notes import bridge_notes
from movload.rating.required import require_data
from movload.rating.resistance import UNRATED
from movload.rating.strengths import may_feel, strengths_of
from movload.statics.floor import floor_parts, truss_lines
from movload.statics.influence import lines_of
from movload.statics.part import Effect, Part
from movload.statics.permanent import PERMANENT_CLASSES, permanent_effects
from movload.statics.stiffness import factored

if TYPE_CHECKING:
    from collections.abc import Mapping

    from movload.bridge.bridge import Bridge
    from movload.bridge.roadway import Roadway
    from movload.errors import MissingDataError, Note
    from movload.strength.strength import Strength
    from movload.units import UnitSystem


@dataclass(frozen=True, slots=True, eq=False)
class SolvedBridge:
    """Everything about a bridge that no vehicle changes.

    Attributes
    ----------
    title
        The bridge's own.
    parts
        What is rated, each with its response and its across line; rows are counted part after part.
    permanent
        Permanent effects (classes, R) [N, N m], tension and sagging positive.
    strength
        Strengths (levels, R, 2), of the positive side then of the negative; nan where none is known.
    notes
        What a reader must know.
    sources
        Where the data came from.
    classes
        Names of the permanent classes.
    method
        The factor set.
    impact
        What gives the dynamic allowance of every row for a kind of loading and a speed.
    units
        Units to show results in.
    roadway
        The kerbs; None where a share was typed.
    alone
        What permanent load alone may use of each strength (levels, R, 2), infinite but for timber; None as if so.
    asked
        Row, side and what a rule still asks about it, for when a crossing makes the row feel that sense.
    strengths
        The distinct strengths with their steps.
    which
        (levels, R, 2) number of each row's strength among those.
    traffic
        Trucks a day one way; None when nobody has said, infinite when unknown.
    spans
        Length of the span that each panel point stands in [m], by its name.
    deflection_limit
        n of a limit span / n on the live deflection; None when none is asked.
    not_rated
        What of the bridge no row stands for.
    """

    title: str
    parts: tuple[Part, ...]
    permanent: Floats
    strength: Floats
    notes: tuple[Note, ...] = ()
    sources: tuple[str, ...] = ()
    classes: tuple[str, ...] = field(kw_only=True)
    method: FactorSet = field(kw_only=True)
    impact: ImpactTable = field(kw_only=True)
    units: UnitSystem = field(kw_only=True)
    roadway: Roadway | None = field(default=None, kw_only=True)
    alone: Floats | None = field(default=None, kw_only=True)
    asked: tuple[tuple[int, int, MissingDataError], ...] = field(default=(), kw_only=True)
    strengths: tuple[Strength, ...] = field(default=(), kw_only=True)
    which: np.ndarray[tuple[int, ...], np.dtype[np.intp]] | None = field(default=None, kw_only=True)
    traffic: float | None = field(default=None, kw_only=True)
    spans: Mapping[str, float] = field(default_factory=dict, kw_only=True)
    deflection_limit: float | None = field(default=None, kw_only=True)
    not_rated: tuple[str, ...] = field(default=("floor", "deck"), kw_only=True)

    @property
    def effects(self) -> tuple[Effect, ...]:
        """All rows, part after part."""
        return tuple(itertools.chain.from_iterable(part.response.effects for part in self.parts))

    def derived(self, level: int, row: int, side: int) -> Strength:
        """Return a row's strength with its steps."""
        return UNRATED if self.which is None else self.strengths[int(self.which[level, row, side])]


def solve(bridge: Bridge, method: FactorSet = PERMITTED) -> SolvedBridge:
    """Return a bridge solved for a method.

    Raises
    ------
    MissingDataError
        Something that a rating needs has not been typed; every place is named.
    UnstableError
        The truss is a mechanism.
    """
    permanent = require_data(bridge, method)
    solver = factored(bridge.truss)
    lines = lines_of(solver, bridge.deck.panel_points)
    spacing, share = bridge.deck.truss_spacing, bridge.deck.truss_share
    if spacing is not None:
        left, right = truss_lines(spacing, bridge.edges)
        trusses = tuple(
            Part(title, lines.named_for(title), across)
            for title, across in (("left truss", left), ("right truss", right))
        )
    else:
        trusses = (Part("truss", lines, Across.typed(share or 0.0)),)
    parts = (*trusses, *floor_parts(bridge))
    stands = permanent_effects(bridge, solver, parts, permanent)
    strengths = strengths_of(bridge, parts, method, may_feel(parts, stands))
    return SolvedBridge(
        bridge.title,
        parts,
        stands,
        held(strengths.values()),
        (*bridge_notes(bridge, method), *strengths.notes),
        bridge.sources,
        classes=PERMANENT_CLASSES,
        method=method,
        impact=impact_table(bridge, parts, method),
        units=bridge.units,
        roadway=bridge.deck.roadway,
        asked=strengths.asked,
        alone=held(strengths.values("permanent")),
        strengths=strengths.distinct,
        which=strengths.which,
        traffic=bridge.traffic,
        spans=_spans(bridge),
        deflection_limit=bridge.deflection_limit,
        not_rated=_not_rated(bridge),
    )


def _spans(bridge: Bridge) -> dict[str, float]:
    """Return the length [m] between the bearings beside each panel point, or from the last to an overhanging end."""
    x = {point: bridge.truss.joints[point][0] for point in bridge.deck.panel_points if isinstance(point, str)}
    bearings = np.unique([bridge.truss.joints[support.joint][0] for support in bridge.truss.supports])
    ends = np.unique([*bearings, *(place for place, _ in bridge.truss.joints.values())])[[0, -1]]
    walls = np.unique([*bearings, *ends])
    last = np.clip(np.searchsorted(walls, list(x.values()), side="right"), 1, walls.size - 1)
    beside = np.clip(np.searchsorted(walls, list(x.values()), side="left"), 1, walls.size - 1)
    longer = np.maximum(walls[last] - walls[last - 1], walls[beside] - walls[beside - 1])
    return dict(zip(x, map(float, longer), strict=True))


def _not_rated(bridge: Bridge) -> tuple[str, ...]:
    """Return what no row stands for."""
    floor = bridge.floor
    named = {
        "stringers": floor.stringers,
        "floorbeams": floor.floorbeams,
        "deck planks": floor.planks,
    }
    absent = tuple(name for name, part in named.items() if part is None)
    return ("floor", "deck") if len(absent) == len(named) else (*absent, "deck") if floor.planks is None else absent
