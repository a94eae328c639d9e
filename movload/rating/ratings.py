"""Ratings as arrays over levels, crossings, rows and senses; one row as an object on request."""

from __future__ import annotations

from dataclasses import dataclass
from functools import cached_property
from typing import TYPE_CHECKING

import numpy as np

from movload.rating.kernel import SIGNS
from movload.strength.typed import SENSES

if TYPE_CHECKING:
    from movload.arrays import Floats
    from movload.errors import Note
    from movload.peaks.peaks import Peak, Peaks
    from movload.rating.solved import SolvedBridge
    from movload.statics.part import Effect
    from movload.traffic.crossing import Crossing


@dataclass(frozen=True, eq=False)
class Rating:
    """One row under one crossing at one level.

    Attributes
    ----------
    effect, sense
        What, and whether tension or compression is rated.
    crossing, level
        Titles.
    factor
        RF [-]; 0 when permanent load alone uses the strength, infinite when there is no live effect.
    strength
        R, magnitude [N].
    permanent
        D summed over classes [N], tension positive.
    live
        L with impact [N], tension positive.
    impact
        I [-].
    safe_weight
        RF x the vehicle's weight [N]: what this vehicle could weigh, its axles in the same proportions.
    peaks, row, side
        Where the placement is found.
    """

    effect: Effect
    sense: str
    crossing: str
    level: str
    factor: float
    strength: float
    permanent: float
    live: float
    impact: float
    safe_weight: float
    peaks: Peaks
    row: int
    side: int

    @cached_property
    def peak(self) -> Peak:
        """The live peak with its placement."""
        return self.peaks.peak(self.row, self.side)

    @property
    def permanent_use(self) -> float:
        """Part of the strength that permanent load alone uses [-]; 0 when it relieves."""
        pushed = self.permanent if self.side == 0 else -self.permanent
        if pushed <= 0:
            return 0.0
        return pushed / self.strength if self.strength > 0 else float("inf")


@dataclass(frozen=True, slots=True, eq=False)
class Coverage:
    """What an answer covers.

    A member feels a sense when a crossing's live effect or the permanent effect has it; only then is a strength needed.

    Attributes
    ----------
    full, partly, none
        Members rated in every sense they feel, in some of them, and in none.
    not_rated
        Parts of the bridge that no row stands for.
    """

    full: tuple[str, ...]
    partly: tuple[str, ...]
    none: tuple[str, ...]
    not_rated: tuple[str, ...]

    @property
    def complete(self) -> bool:
        """Whether every member is rated in every sense it feels (what no row stands for is said, not counted)."""
        return not (self.partly or self.none)


@dataclass(frozen=True, slots=True, eq=False)
class Ratings:
    """The ratings of a solved bridge under crossings.

    Attributes
    ----------
    solved, crossings, levels
        What was rated: S levels, C crossings, R rows.
    peaks
        Live peaks by crossing (C).
    impact
        (C, R, 2) dynamic allowance, tension then compression.
    factor
        RF (S, C, R, 2).
    notes
        What a reader must know, the solved bridge's own included.
    """

    solved: SolvedBridge
    crossings: tuple[Crossing, ...]
    levels: tuple[str, ...]
    peaks: tuple[Peaks, ...]
    impact: Floats
    factor: Floats
    notes: tuple[Note, ...] = ()

    def rating(self, crossing: int, row: int, side: int, *, level: int = 0) -> Rating:
        """Return one rating."""
        peaks, solved, loading = self.peaks[crossing], self.solved, self.crossings[crossing].loading
        factor = float(self.factor[level, crossing, row, side])
        return Rating(
            effect=peaks.effects[row],
            sense=SENSES[side],
            crossing=loading.title,
            level=self.levels[level],
            factor=factor,
            strength=float(solved.strength[level, row, side]),
            permanent=float(solved.permanent[:, row].sum()),
            live=float((peaks.highest, peaks.lowest)[side][row]),
            impact=float(self.impact[crossing, row, side]),
            safe_weight=factor * loading.gross,
            peaks=peaks,
            row=row,
            side=side,
        )

    def rows(self, crossing: int, *, level: int = 0) -> list[Rating]:
        """Return every rated row of a crossing, the worst first.

        A row whose strength permanent load alone uses comes before all others, the most overused first.
        """
        rated = np.argwhere(~np.isnan(self.factor[level, crossing]))
        ratings = [self.rating(crossing, int(row), int(side), level=level) for row, side in rated]
        return sorted(ratings, key=lambda one: (one.factor, -one.permanent_use))

    def governing(self, crossing: int, *, level: int = 0) -> Rating:
        """Return the worst row of a crossing."""
        factors = self.factor[level, crossing]
        least = np.nanmin(factors)
        among = np.argwhere(factors == least)
        ratings = [self.rating(crossing, int(row), int(side), level=level) for row, side in among]
        return max(ratings, key=lambda one: one.permanent_use) if least == 0 else ratings[0]

    @property
    def coverage(self) -> Coverage:
        """What these ratings cover."""
        felt = SIGNS * self.solved.permanent.sum(axis=0)[:, None] > 0
        for peaks in self.peaks:
            felt |= np.stack((peaks.highest > 0, peaks.lowest < 0), axis=1)
        gaps = (felt & np.isnan(self.solved.strength[0])).sum(axis=1)
        by_gap: dict[str, list[str]] = {"full": [], "partly": [], "none": []}
        for row, effect in enumerate(self.solved.effects):
            if effect.kind == "axial":
                kind = "full" if not gaps[row] else "partly" if gaps[row] < felt[row].sum() else "none"
                by_gap[kind].append(effect.name)
        return Coverage(**{kind: tuple(names) for kind, names in by_gap.items()}, not_rated=("floor", "deck"))

    @property
    def worst(self) -> Rating:
        """Return the worst row of the worst crossing."""
        governing = [self.governing(number) for number in range(len(self.crossings))]
        return min(governing, key=lambda one: (one.factor, -one.permanent_use))

    @property
    def passes(self) -> bool:
        """Whether every unrounded rating is 1 or more and every member rated in every sense it feels."""
        rated = self.factor[~np.isnan(self.factor)]
        return bool((rated >= 1.0).all()) and self.coverage.complete
