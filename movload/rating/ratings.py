"""Ratings as arrays over levels, crossings, rows and senses; one row as an object on request."""

from __future__ import annotations

import math
from dataclasses import dataclass, field
from functools import cached_property
from typing import TYPE_CHECKING, Final

import numpy as np

from movload.errors import MissingDataError
from movload.peaks.peaks import WORST
from movload.rating.kernel import SIGNS, pushed_by_permanent
from movload.rating.rating import DIGITS, Coverage, Rating, sense_of, worst_first
from movload.rating.resistance import SENSES
from movload.traffic.crossing import TYPED_SHARE

if TYPE_CHECKING:
    from movload.arrays import Bools, Floats, Ints
    from movload.errors import Note
    from movload.peaks.peaks import Peaks
    from movload.rating.solved import SolvedBridge
    from movload.statics.part import Effect
    from movload.traffic.crossing import Crossing

EITHER: Final = "either truss"
_TRUSSES: Final = ("left truss", "right truss")
_SAME: Final = 1e-9  # relative: two trusses alike but for round-off
_NO_PULL: Final = 1e-9  # of the largest permanent effect: an upward pull below it is round-off


@dataclass(frozen=True, eq=False)
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
    formation
        (S, C, R, 2) which formation gives each rating where other traffic stands beside, else WORST; None where none
        does anywhere.
    """

    solved: SolvedBridge
    crossings: tuple[Crossing, ...]
    levels: tuple[str, ...]
    peaks: tuple[Peaks, ...]
    impact: Floats
    factor: Floats
    notes: tuple[Note, ...] = ()
    formation: Ints | None = field(default=None, kw_only=True)

    def rating(self, crossing: int, row: int, side: int, *, level: int = 0) -> Rating:
        """Return one rating."""
        peaks, solved, loading = self.peaks[crossing], self.solved, self.crossings[crossing].loading
        margins = solved.method.levels[level]
        beside = self.crossings[crossing].beside
        formation = WORST if self.formation is None else int(self.formation[level, crossing, row, side])
        live, stays = self._live(crossing, row, side, formation)
        return Rating(
            effect=peaks.effects[row],
            part=self.said(peaks.effects[row]),
            sense=sense_of(peaks.effects[row], side),
            crossing=loading.title,
            number=crossing,
            place=self.crossings[crossing].place if solved.roadway else TYPED_SHARE,
            speed=self.crossings[crossing].speed,
            level=self.levels[level],
            factor=float(self.factor[level, crossing, row, side]),
            strength=float(solved.strength[level, row, side]),
            as_new=solved.derived(level, row, side).as_new,
            alone=solved.derived(level, row, side).permanent,
            permanent=float(solved.permanent[:, row].sum()),
            live=live,
            held=stays,
            held_factor=solved.method.beside_margin(margins, beside.kind, self._traffic) if beside else 1.0,
            impact=float(self.impact[crossing, row, side]),
            pushed=float(self._pushed[level][row, side]),
            live_factor=margins.live_margin(loading.kind, self._traffic),
            margins=margins,
            peaks=peaks,
            row=row,
            side=side,
            formation=formation,
        )

    def _live(self, crossing: int, row: int, side: int, formation: int) -> tuple[float, float]:
        """Return the live effect that grows with a rating and the one that is held fixed, tension positive [N]."""
        peaks = self.peaks[crossing]
        if formation == WORST:
            return float((peaks.highest, peaks.lowest)[side][row]), 0.0
        part, inside = peaks.part_of(row)
        grows, stays = (float(SIGNS[side] * one[formation, inside, side]) for one in part.split or ())
        return grows, stays

    @cached_property
    def _pushed(self) -> tuple[Floats, ...]:
        """What permanent load uses of every strength (R, 2) [N], level by level."""
        solved = self.solved
        return tuple(
            pushed_by_permanent(solved.permanent, level.permanent_margins(solved.classes))
            for level in solved.method.levels
        )

    @property
    def _traffic(self) -> float | None:
        """Trucks a day, None where unknown."""
        return known_traffic(self.solved.traffic)

    def said(self, effect: Effect) -> str:
        """Return a row's part as a person says it."""
        return EITHER if self.alike and effect.part in _TRUSSES else effect.part

    @cached_property
    def alike(self) -> bool:
        """Whether both trusses carry the same in every crossing and may carry the same: one then stands for both."""
        sides = [[row for row, effect in enumerate(self.solved.effects) if effect.part == part] for part in _TRUSSES]
        left, right = (np.array(rows, dtype=np.intp) for rows in sides)
        if not left.size:
            return False
        values = [self.solved.permanent, np.array([(one.highest, one.lowest) for one in self.peaks])]
        if not all(
            np.allclose(one[..., left, :], one[..., right, :], rtol=_SAME, equal_nan=True)
            for one in (self.solved.strength, self.factor)
        ):
            return False
        return all(
            np.allclose(one[..., left], one[..., right], rtol=_SAME, atol=_SAME * np.abs(one).max(initial=0.0))
            for one in values
        )

    @cached_property
    def _counted(self) -> Bools:
        """Which rows stand for themselves (R,): not those of a right truss that is like the left one."""
        return np.array([not (self.alike and effect.part == _TRUSSES[1]) for effect in self.solved.effects])

    def counted(self, row: int) -> bool:
        """Return whether a row stands for itself: not one of a right truss that is like the left one."""
        return bool(self._counted[row])

    def rates(self, crossing: int, level: int) -> bool:
        """Return whether a level rates a crossing's kind of loading."""
        return self.solved.method.levels[level].rates(self.crossings[crossing].loading.kind)

    def rows(self, crossing: int, *, level: int | None = None) -> list[Rating]:
        """Return every rated row of a crossing at one level or at all, the worst first.

        A row whose strength permanent load alone uses comes before all others, the most overused first.
        """
        return sorted(self._among(crossing, np.inf, level), key=worst_first)

    def of_row(self, crossing: int, row: int) -> list[Rating]:
        """Return a row's ratings under a crossing, at every level and in every sense that has a strength."""
        rated = self.factor[:, crossing, row]
        return [self.rating(crossing, row, int(side), level=int(level)) for level, side in np.argwhere(rated >= 0.0)]

    def governing(self, crossing: int, *, level: int | None = None) -> Rating:
        """Return the worst row of a crossing at one level or of all, the first of `rows`.

        Raises
        ------
        MissingDataError
            No row has a strength.
        """
        factors = self.factor[self._asked(level), crossing]
        if np.isnan(factors).all():
            raise MissingDataError("no row has a strength, so nothing can be rated", place=self.solved.title)
        as_bad = np.nanmin(factors) * (1.0 + 10.0 ** (1 - DIGITS))
        return min(self._among(crossing, as_bad, level), key=worst_first)

    def _asked(self, level: int | None) -> list[int]:
        """Return the numbers of the levels that are asked for."""
        return list(range(len(self.levels))) if level is None else [level]

    def _among(self, crossing: int, greatest: float, level: int | None) -> list[Rating]:
        """Return the rated rows of a crossing with factors up to ``greatest``, tension before compression."""
        return [
            self.rating(crossing, int(row), int(side), level=one)
            for one in self._asked(level)
            for row, side in np.argwhere((self.factor[one, crossing] <= greatest) & self._counted[:, None])
        ]

    @property
    def uplifts(self) -> dict[str, float]:
        """Bearings that a crossing pulls up: row name and the greatest pull [N], permanent and live with impact."""
        permanent = self.solved.permanent.sum(axis=0)
        least = permanent + np.min([peaks.lowest for peaks in self.peaks], axis=0)
        noise = _NO_PULL * np.abs(permanent).max(initial=0.0)
        return {
            self._named(effect): float(-pull)
            for effect, pull, counted in zip(self.solved.effects, least, self._counted, strict=True)
            if effect.presses and counted and pull < -noise
        }

    def _named(self, effect: Effect) -> str:
        """Return a row's name, with its truss where the two differ."""
        return f"{effect.part} {effect.name}" if self._several and not self.alike else effect.name

    @cached_property
    def _several(self) -> bool:
        """Whether more than one part has members."""
        return len({effect.part for effect in self.solved.effects if effect.kind == "axial"}) > 1

    @cached_property
    def coverage(self) -> Coverage:
        """What these ratings cover: members one by one, the floor beam by beam."""
        felt = SIGNS * self.solved.permanent.sum(axis=0)[:, None] > 0
        for peaks in self.peaks:
            felt |= np.stack((peaks.highest > 0, peaks.lowest < 0), axis=1)
        open_senses = felt & np.isnan(self.solved.strength).any(axis=0)
        asked: dict[str, list[int]] = {}
        for row, effect in enumerate(self.solved.effects):
            if effect.kind in SENSES and self._counted[row]:
                name = self._named(effect) if effect.kind == "axial" else effect.part
                known = asked.setdefault(name, [0, 0])
                known[0] += int(open_senses[row].sum())
                known[1] += int(felt[row].sum())
        by_gap: dict[str, list[str]] = {"full": [], "partly": [], "none": []}
        for name, (gaps, senses) in asked.items():
            by_gap["full" if not gaps else "partly" if gaps < senses else "none"].append(name)
        return Coverage(**{kind: tuple(names) for kind, names in by_gap.items()}, not_rated=self.solved.not_rated)

    @property
    def worst(self) -> Rating:
        """Return the worst row of the worst crossing; of equally bad crossings the first."""
        return min((self.governing(number) for number in range(len(self.crossings))), key=worst_first)

    @property
    def worst_member(self) -> Rating:
        """Return the worst member of all crossings, the floor left out: what an elevation can show."""
        members = [
            one for number in range(len(self.crossings)) for one in self.rows(number) if one.effect.kind == "axial"
        ]
        return min(members, key=worst_first) if members else self.worst

    @property
    def passes(self) -> bool:
        """Whether every unrounded rating is 1 or more, every member rated in what it feels, and no bearing lifted."""
        rated = self.factor[~np.isnan(self.factor)]
        return bool((rated >= 1.0).all()) and self.coverage.complete and not self.uplifts


def known_traffic(traffic: float | None) -> float | None:
    """Return trucks a day, None where they are unknown."""
    return None if traffic is None or math.isinf(traffic) else traffic
