"""Live deflection of each panel point against a limit of span / n."""

from __future__ import annotations

from dataclasses import dataclass
from typing import TYPE_CHECKING

if TYPE_CHECKING:
    from movload.rating.ratings import Ratings


@dataclass(frozen=True, slots=True)
class Deflection:
    """The greatest live deflection of one panel point under one crossing, impact included.

    ``part``, ``point`` and ``crossing`` by name; ``down`` [m]; ``span`` [m] between the bearings beside the point, or
    from the last bearing to the end where it overhangs; ``ratio`` = span / down; ``limit`` = n of a limit span / n,
    None when none is asked.
    """

    part: str
    point: str
    crossing: str
    number: int
    down: float
    span: float
    limit: float | None

    @property
    def ratio(self) -> float:
        """Span over deflection."""
        return self.span / self.down if self.down > 0 else float("inf")

    @property
    def passes(self) -> bool:
        """Whether the limit is kept, where there is one."""
        return self.limit is None or self.ratio >= self.limit


def deflections(ratings: Ratings) -> list[Deflection]:
    """Return every panel point's live deflection under every crossing, the greatest first."""
    solved, found = ratings.solved, []
    for number, crossing in enumerate(ratings.crossings):
        first = 0
        for part in solved.parts:
            for row, effect in enumerate(part.response.effects, start=first):
                if effect.kind == "down" and ratings.counted(row):
                    down = float(ratings.peaks[number].highest[row])
                    point = effect.name.removesuffix(" down")
                    span = solved.spans.get(point, 0.0)
                    said = ratings.said(effect)
                    limit = solved.deflection_limit
                    found.append(Deflection(said, point, crossing.title, number, down, span, limit))
            first += len(part.response.effects)
    return sorted(found, key=lambda one: -one.down)
