"""Ratings as arrays over levels, crossings, rows and senses; one row as an object on request."""

from __future__ import annotations

from dataclasses import dataclass
from functools import cached_property
from typing import TYPE_CHECKING, Final

import numpy as np

from movload.errors import MissingDataError
from movload.rating.kernel import SIGNS
from movload.strength.typed import SENSES

if TYPE_CHECKING:
    from movload.arrays import Floats
    from movload.errors import Note
    from movload.peaks.peaks import Peak, Peaks
    from movload.rating.solved import SolvedBridge
    from movload.statics.part import Effect
    from movload.traffic.crossing import Crossing

_DIGITS: Final = 10  # to which ratings are compared: bars alike but for round-off keep the order of their rows


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
    permanent_factor, live_factor
        The level's margins on D and on L [-].
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
    permanent_factor: float
    live_factor: float
    peaks: Peaks
    row: int
    side: int

    @cached_property
    def peak(self) -> Peak:
        """The live peak with its placement."""
        return self.peaks.peak(self.row, self.side)

    @property
    def permanent_use(self) -> float:
        """Part of the strength that permanent load alone uses, the level's margin on it included [-].

        0 when permanent load relieves; infinite when it acts and there is no strength at all.
        """
        pushed = float(SIGNS[self.side]) * self.permanent_factor * self.permanent
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
        margins = solved.method.levels[level]
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
            permanent_factor=margins.permanent,
            live_factor=margins.live,
            peaks=peaks,
            row=row,
            side=side,
        )

    def rows(self, crossing: int, *, level: int = 0) -> list[Rating]:
        """Return every rated row of a crossing, the worst first.

        A row whose strength permanent load alone uses comes before all others, the most overused first.
        """
        return sorted(self._among(crossing, np.inf, level), key=_order)

    def governing(self, crossing: int, *, level: int = 0) -> Rating:
        """Return the worst row of a crossing, the first of `rows`.

        Raises
        ------
        MissingDataError
            No row has a strength.
        """
        factors = self.factor[level, crossing]
        if np.isnan(factors).all():
            raise MissingDataError("no row has a strength, so nothing can be rated", place=self.solved.title)
        as_bad = np.nanmin(factors) * (1.0 + 10.0 ** (1 - _DIGITS))
        return min(self._among(crossing, as_bad, level), key=_order)

    def _among(self, crossing: int, greatest: float, level: int) -> list[Rating]:
        """Return the rated rows of a crossing with factors up to ``greatest``, tension before compression."""
        found = np.argwhere(self.factor[level, crossing] <= greatest)
        return [self.rating(crossing, int(row), int(side), level=level) for row, side in found]

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
        """Return the worst row of the worst crossing; of equally bad crossings the first."""
        return min((self.governing(number) for number in range(len(self.crossings))), key=_order)

    @property
    def passes(self) -> bool:
        """Whether every unrounded rating is 1 or more and every member rated in every sense it feels."""
        rated = self.factor[~np.isnan(self.factor)]
        return bool((rated >= 1.0).all()) and self.coverage.complete


def _order(rating: Rating) -> tuple[bool, float, float]:
    """Return what ratings are sorted by: those below 1 first, then the worst, then the most used by permanent load."""
    factor, use = (float(f"{value:.{_DIGITS}g}") for value in (rating.factor, rating.permanent_use))
    return (rating.factor >= 1.0, factor, -use)
