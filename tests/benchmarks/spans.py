"""The trusses that are measured: parallel-chord Pratts, no two neighbouring panels alike, pin and roller. Invented."""

from __future__ import annotations

from dataclasses import dataclass

import numpy as np
from oracles.trusses import bottom, pratt, simple_span, truss_of

from movload.bridge.truss import Truss

DEPTH = 6.4  # m


@dataclass(frozen=True, slots=True)
class Span:
    """A truss and the panel points of its loaded chord."""

    truss: Truss
    panel_points: list[str]

    def copies(self, count: int) -> list[Truss]:
        """Return the truss made anew ``count`` times: nothing that one solve leaves in it may help the next."""
        truss = self.truss
        return [Truss(dict(truss.joints), truss.members, truss.supports) for _ in range(count)]


def span_of(count: int) -> Span:
    """Return a span of ``count`` panels of 3.9 to 5.1 m, areas unequal."""
    panels = 4.5 + 0.6 * np.sin(1.0 + 2.39996 * np.arange(count))  # the golden angle: no pattern that repeats
    drawn = pratt(panels, [DEPTH] * (count - 1))
    return Span(truss_of(drawn, simple_span(count), lambda bar: 4e-3 + 1e-3 * (bar % 7)), bottom(count))
