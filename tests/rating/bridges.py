"""Bridges for tests of rating and report: a four-panel Pratt over an invented brook, and parts written by hand.

Nothing here exists; every number is invented.
"""

from __future__ import annotations

from dataclasses import replace
from typing import TYPE_CHECKING, Final

import numpy as np
from oracles.trusses import bottom, pratt, simple_span

from movload.bridge.across import Across
from movload.bridge.bridge import Bridge
from movload.bridge.deck import Deck
from movload.bridge.permanent import Item, PermanentItems
from movload.bridge.roadway import Roadway
from movload.bridge.strengths import permitted
from movload.bridge.truss import Member, Truss
from movload.rating.factor_sets import PERMITTED
from movload.rating.impact_table import ImpactTable
from movload.rating.solved import SolvedBridge
from movload.statics.influence import InfluenceLines
from movload.statics.part import Effect, Part, row_of
from movload.traffic.vehicle import Vehicle
from movload.units import UnitSystem

if TYPE_CHECKING:
    from collections.abc import Mapping, Sequence

    from movload import Rating, Ratings

PANELS: Final = (4.1, 3.7, 4.3, 3.9)  # m
DEPTH: Final = 3.2  # m, level chords
AREA: Final = 5e-3  # m2
DENSITY: Final = 7850.0  # kg/m3
SHARE: Final = 0.6  # of an axle
IMPACT: Final = 0.3
CART: Final = Vehicle("cart", np.array([30e3, 50e3]), [2.1], gauges=(0.5, 0.5))
TWO_TRUSSES: Final = Roadway(-2.0, 2.0, clearance=0.0)  # kerbs over the trusses of the parts made by hand


def brook_truss(density: float | None = DENSITY) -> Truss:
    """Return the truss, on a pin and a level roller."""
    joints, ends = pratt(PANELS, [DEPTH] * 3)
    return Truss(joints, [Member(start, end, AREA, 200e9, density=density) for start, end in ends], simple_span(4))


def deck_weight(line: float, share: float) -> PermanentItems:
    """Return a deck's weight per metre [N/m] of which a typed share reaches the truss."""
    return PermanentItems((Item("deck", "components", line=line, share=share),))


def brook(**changes: object) -> Bridge:
    """Return the bridge, every bar permitted 400 kN in tension and 300 kN in compression; fields may be changed."""
    truss = changes.pop("truss", None) or brook_truss()
    assert isinstance(truss, Truss)
    whole = Bridge(
        "Brook bridge",
        truss,
        Deck(tuple(bottom(4)), truss_share=SHARE),
        permanent=deck_weight(9e3, 0.5),
        strengths={member.name: permitted(400e3, 300e3) for member in truss.members},
        impact=IMPACT,
        sources=("brook.toml",),
    )
    return replace(whole, **changes)  # type: ignore[arg-type]  # fields by name


def weightless(**changes: object) -> Bridge:
    """Return the bridge without any permanent load."""
    return brook(**{"truss": brook_truss(0.0), "permanent": deck_weight(0.0, 0.5)} | changes)


def part_of(title: str, rows: Mapping[str, Sequence[float]], stations: Sequence[float], across: Across) -> Part:
    """Return a part whose lines are written out: ordinates by row name."""
    effects = tuple(Effect(title, name, "axial", "N") for name in rows)
    lines = InfluenceLines(effects, np.array(stations), np.array(list(rows.values()), dtype=np.float64))
    return Part(title, lines, across)


def solved_by_hand(
    parts: Sequence[Part],
    *,
    permanent: Sequence[float] | None = None,
    strength: Sequence[tuple[float, float]] | None = None,
    impact: Sequence[tuple[float, float]] | None = None,
    units: UnitSystem | None = None,
    roadway: Roadway | None = None,
) -> SolvedBridge:
    """Return a solved bridge of parts.

    Permanent effects (R,) are 0, strengths (R, 2) 100 kN and impact (R, 2) 0 where left out.
    """
    count = sum(len(part.response.effects) for part in parts)
    return SolvedBridge(
        "Hand bridge",
        tuple(parts),
        np.array([permanent or [0.0] * count]),
        np.array([strength or [(100e3, 100e3)] * count]),
        classes=("components",),
        method=PERMITTED,
        impact=ImpactTable("typed", np.array(impact or [(0.0, 0.0)] * count, dtype=np.float64)),
        roadway=roadway,
        units=units or UnitSystem(),
    )


def bars(
    lines: Sequence[float], *, permanent: Sequence[float], strength: Sequence[tuple[float, float]]
) -> SolvedBridge:
    """Return a bridge of bars "B0", "B1" ... that feel ``lines`` N per N at midspan."""
    rows = {f"B{number}": [0.0, ordinate, 0.0] for number, ordinate in enumerate(lines)}
    part = part_of("truss", rows, [0.0, 4.0, 8.0], Across.typed(1.0))
    return solved_by_hand([part], permanent=permanent, strength=strength)


def one_bar(
    *, permanent: float = 0.0, strength: tuple[float, float] = (100e3, 100e3), units: UnitSystem | None = None
) -> SolvedBridge:
    """Return a bridge of one bar, pulled by 1 N per N at midspan of 8 m and pushed by nothing."""
    part = part_of("truss", {"L0-L1": [0.0, 1.0, 0.0]}, [0.0, 4.0, 8.0], Across.typed(1.0))
    return solved_by_hand([part], permanent=[permanent], strength=[strength], units=units)


def rated(ratings: Ratings, name: str, sense: str, *, crossing: int = 0, level: int = 0) -> Rating:
    """Return one row's rating by name."""
    return ratings.rating(
        crossing, row_of(ratings.solved.effects, name), ("tension", "compression").index(sense), level=level
    )
