"""Influence lines and moving loads on truss bridges, to say whether this vehicle may cross that bridge.

A bridge file becomes a truss, the truss is factored once, a unit load walks its loaded chord, the axle train is swept
over the lines, and the exact worst positions meet strengths and become ratings. The names below load what they need
when they are first used: ``import movload`` alone loads neither numpy, scipy nor matplotlib.
"""

from __future__ import annotations

from typing import TYPE_CHECKING

__version__ = "0.3.0"

if TYPE_CHECKING:
    from movload.bridge.bridge import Bridge
    from movload.bridge.deck import Deck
    from movload.bridge.layout import Layout, lay_out
    from movload.bridge.truss import Member, Support, Truss
    from movload.files.library import read_vehicle
    from movload.files.read import read_bridge
    from movload.peaks.peaks import Peak, Peaks
    from movload.peaks.sweep import effects_with_front_at, sweep
    from movload.rating.judge import judge, rate
    from movload.rating.rating import Rating
    from movload.rating.ratings import Ratings
    from movload.rating.solved import SolvedBridge, solve
    from movload.statics.influence import InfluenceLines, influence_lines
    from movload.statics.state import TrussState, state_under
    from movload.traffic.crossing import Crossing
    from movload.traffic.loading import Case, Loading
    from movload.traffic.vehicle import Vehicle

_HOMES = {
    "Bridge": "movload.bridge.bridge",
    "Case": "movload.traffic.loading",
    "Crossing": "movload.traffic.crossing",
    "Deck": "movload.bridge.deck",
    "InfluenceLines": "movload.statics.influence",
    "Layout": "movload.bridge.layout",
    "Loading": "movload.traffic.loading",
    "Member": "movload.bridge.truss",
    "Peak": "movload.peaks.peaks",
    "Peaks": "movload.peaks.peaks",
    "Rating": "movload.rating.rating",
    "Ratings": "movload.rating.ratings",
    "SolvedBridge": "movload.rating.solved",
    "Support": "movload.bridge.truss",
    "Truss": "movload.bridge.truss",
    "TrussState": "movload.statics.state",
    "Vehicle": "movload.traffic.vehicle",
    "effects_with_front_at": "movload.peaks.sweep",
    "influence_lines": "movload.statics.influence",
    "judge": "movload.rating.judge",
    "lay_out": "movload.bridge.layout",
    "rate": "movload.rating.judge",
    "read_bridge": "movload.files.read",
    "read_vehicle": "movload.files.library",
    "solve": "movload.rating.solved",
    "state_under": "movload.statics.state",
    "sweep": "movload.peaks.sweep",
}

__all__ = [
    "Bridge",
    "Case",
    "Crossing",
    "Deck",
    "InfluenceLines",
    "Layout",
    "Loading",
    "Member",
    "Peak",
    "Peaks",
    "Rating",
    "Ratings",
    "SolvedBridge",
    "Support",
    "Truss",
    "TrussState",
    "Vehicle",
    "__version__",
    "effects_with_front_at",
    "influence_lines",
    "judge",
    "lay_out",
    "rate",
    "read_bridge",
    "read_vehicle",
    "solve",
    "state_under",
    "sweep",
]


def __getattr__(name: str) -> object:
    """Load a public name from its home on first use."""
    if name not in _HOMES:
        raise AttributeError(f"module 'movload' has no attribute {name!r}")
    import importlib

    value = getattr(importlib.import_module(_HOMES[name]), name)
    globals()[name] = value
    return value


def __dir__() -> list[str]:
    """List the public names."""
    return sorted(__all__)
