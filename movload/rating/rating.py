"""One rating, and what an answer covers."""

from __future__ import annotations

from dataclasses import dataclass
from functools import cached_property
from typing import TYPE_CHECKING, Final

from movload.rating.factor_sets import sign_weight
from movload.rating.resistance import SENSES

if TYPE_CHECKING:
    from movload.peaks.peaks import Peak, Peaks
    from movload.rating.factor_sets import Level
    from movload.statics.part import Effect

DIGITS: Final = 10  # to which ratings are compared: bars alike but for round-off keep the order of their rows


@dataclass(frozen=True, eq=False)
class Rating:
    """One row under one crossing at one level.

    Attributes
    ----------
    effect, part, sense
        What, of which part as a person says it ("either truss" where both are alike), and in which sense.
    crossing, number, level
        The crossing's title and number, and the level's title.
    place, speed
        Where across it keeps, by name, and how fast [m/s].
    factor
        RF [-]; 0 when permanent load alone uses the strength, infinite when there is no live effect.
    strength, as_new
        R, magnitude [N], and the same with no metal gone; nan where it was typed.
    alone
        The most of R that permanent load alone may use [N]; infinite but for timber.
    permanent
        D summed over classes [N], tension positive.
    live
        L with impact [N], tension positive.
    held
        Live effect of traffic beside it that is held fixed, with impact [N], tension positive.
    impact
        I [-].
    pushed
        What permanent load uses of R [N], the level's margins included; negative relieves.
    live_factor, held_factor
        The level's margins on L and on what is held fixed [-].
    margins
        The level itself.
    peaks, row, side, formation
        Where the placement is found.
    """

    effect: Effect
    part: str
    sense: str
    crossing: str
    number: int
    place: str
    speed: float | None
    level: str
    factor: float
    strength: float
    as_new: float
    alone: float
    permanent: float
    live: float
    held: float
    impact: float
    pushed: float
    live_factor: float
    held_factor: float
    margins: Level
    peaks: Peaks
    row: int
    side: int
    formation: int

    @cached_property
    def peak(self) -> Peak:
        """The live peak with its placement, traffic beside it included."""
        return self.peaks.peak(self.row, self.side, self.formation)

    @cached_property
    def safe_weight(self) -> float:
        """What the vehicle that governs could weigh by the level's rule [N], its axles in the same proportions."""
        return sign_weight(self.margins, self.factor, self.gross)

    @property
    def gross(self) -> float:
        """Weight of the vehicle that governs [N]."""
        return self.peaks.vehicle(self.row, self.side, self.formation).gross

    @property
    def ranged(self) -> bool:
        """Whether that vehicle's axles stand at distances that may vary: the worst were found."""
        return self.peaks.vehicle(self.row, self.side, self.formation).has_ranges

    @property
    def abreast(self) -> int:
        """How many vehicles stand side by side then; 0 when off the bridge."""
        vehicle = self.peak.placement.vehicle
        return int(vehicle.max(initial=-1)) + 1

    @property
    def permanent_use(self) -> float:
        """Part of the strength that permanent load alone uses, the level's margin on it included [-].

        0 when permanent load relieves; infinite when it acts and there is no strength at all.
        """
        if self.pushed <= 0:
            return 0.0
        return self.pushed / self.strength if self.strength > 0 else float("inf")


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


def sense_of(effect: Effect, side: int) -> str:
    """Return what a row's positive (0) or negative (1) side is called."""
    return SENSES.get(effect.kind, ("positive", "negative"))[side]


def worst_first(rating: Rating) -> tuple[bool, float, float]:
    """Return what ratings are sorted by: those below 1 first, then the worst, then the most used by permanent load."""
    factor, use = (float(f"{value:.{DIGITS}g}") for value in (rating.factor, rating.permanent_use))
    return (rating.factor >= 1.0, factor, -use)
