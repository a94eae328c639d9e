"""Factor sets: which margins a method puts on permanent load, live load and strength. Data, never code."""

from __future__ import annotations

from dataclasses import dataclass, field
from typing import TYPE_CHECKING, Final

import numpy as np

if TYPE_CHECKING:
    from collections.abc import Mapping, Sequence

    from movload.arrays import Floats


@dataclass(frozen=True, slots=True)
class Level:
    """One level of a method.

    Attributes
    ----------
    title
        What it is called.
    permanent, relieving
        Margin on a class's permanent effect that pushes in the rated sense, and on one that relieves it [-].
    live
        Margin on L (1 + I) [-].
    by_class
        (permanent, relieving) of single classes, where they differ.
    by_kind
        Live margin of single kinds of loading, where they differ.
    """

    title: str
    permanent: float = 1.0
    live: float = 1.0
    relieving: float = field(default=1.0, kw_only=True)
    by_class: Mapping[str, tuple[float, float]] = field(default_factory=dict, kw_only=True)
    by_kind: Mapping[str, float] = field(default_factory=dict, kw_only=True)

    def permanent_margins(self, classes: Sequence[str]) -> Floats:
        """Return the margins (K, 2), pushing and relieving, of permanent classes."""
        both = [self.by_class.get(name, (self.permanent, self.relieving)) for name in classes]
        return np.array(both, dtype=np.float64).reshape(-1, 2)

    def live_margin(self, kind: str) -> float:
        """Return the margin on a loading of a kind."""
        return self.by_kind.get(kind, self.live)


@dataclass(frozen=True, slots=True)
class FactorSet:
    """A method of rating.

    Attributes
    ----------
    title
        What it is called.
    levels
        At least one.
    statement
        What an answer must say about it.
    source
        Edition and whether its values were read or come from memory.
    """

    title: str
    levels: tuple[Level, ...]
    statement: str
    source: str


PERMITTED: Final = FactorSet(
    "permitted forces",
    (Level("permitted"),),
    "Strengths are the permitted forces typed in the bridge file, margin included; no load factors applied.",
    "typed",
)
