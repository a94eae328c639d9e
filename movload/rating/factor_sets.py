"""Factor sets: which margins a method puts on permanent load, live load and strength. Data, never code."""

from __future__ import annotations

import math
from dataclasses import dataclass, field
from itertools import pairwise
from typing import TYPE_CHECKING, Final

import numpy as np

from movload.bridge.permanent import REMOVABLE
from movload.errors import InputError, UnknownNameError, nearest_name

if TYPE_CHECKING:
    from collections.abc import Iterable, Mapping, Sequence

    from movload.arrays import Floats

FLOOR: Final = 0.85  # of phi_c phi_s; Khan 2010 p. 187, read


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
    kinds
        Kinds of loading it rates; all when empty.
    by_traffic
        (trucks a day one way, live margin), increasing; straight between, level outside; it replaces ``live``.
    resistance
        Factor phi on a nominal strength by sense [-], 1 where not named; "fracture" of a net section is for rules only.
    timber
        Factor on a timber's strength by the rules, by sense [-].
    condition_factors
        Whether condition and system factors apply: a strength limit state.
    posting
        "weight x RF", or "legal curve" where a sign follows W (RF - 0.3)/0.7; "" where no sign follows from it.

    Raises
    ------
    InputError
        A margin that is no finite number, below 0, or 0 on live load or strength: the rating would then say nothing.
    """

    title: str
    permanent: float = 1.0
    live: float = 1.0
    relieving: float = field(default=1.0, kw_only=True)
    by_class: Mapping[str, tuple[float, float]] = field(default_factory=dict, kw_only=True)
    by_kind: Mapping[str, float] = field(default_factory=dict, kw_only=True)
    kinds: tuple[str, ...] = field(default=(), kw_only=True)
    by_traffic: tuple[tuple[float, float], ...] = field(default=(), kw_only=True)
    resistance: Mapping[str, float] = field(default_factory=dict, kw_only=True)
    timber: Mapping[str, float] = field(default_factory=dict, kw_only=True)
    condition_factors: bool = field(default=False, kw_only=True)
    posting: str = field(default="weight x RF", kw_only=True)

    def __post_init__(self) -> None:
        """Check every margin."""
        place = f'level "{self.title}"'
        both = [margin for pair in self.by_class.values() for margin in pair]
        _require_factors("permanent", (self.permanent, self.relieving, *both), place)
        live = (self.live, *self.by_kind.values(), *(margin for _, margin in self.by_traffic))
        _require_factors("live", live, place, above=True)
        _require_factors("resistance", (*self.resistance.values(), *self.timber.values()), place, above=True)
        trucks = [number for number, _ in self.by_traffic]
        if min(trucks, default=0.0) < 0 or not all(one < other for one, other in pairwise([*trucks, math.inf])):
            raise InputError(f"trucks a day must be 0 or more and increase, got {trucks}", place=place)

    @property
    def needs_traffic(self) -> bool:
        """Whether its live margin depends on traffic."""
        return bool(self.by_traffic)

    def rates(self, kind: str) -> bool:
        """Return whether it rates loadings of a kind."""
        return not self.kinds or kind in self.kinds

    def permanent_margins(self, classes: Sequence[str]) -> Floats:
        """Return the margins (K, 2), pushing and relieving, of permanent classes.

        Surfacing that may be removed pushes as other surfacing does and relieves nothing.
        """
        both = [self._margins(name) for name in classes]
        return np.array(both, dtype=np.float64).reshape(-1, 2)

    def _margins(self, name: str) -> tuple[float, float]:
        """Return the margins of one class."""
        if name == REMOVABLE and name not in self.by_class:
            return self._margins("surfacing")[0], 0.0
        return self.by_class.get(name, (self.permanent, self.relieving))

    def live_margin(self, kind: str, traffic: float | None = None) -> float:
        """Return the margin on a loading of a kind; unknown traffic (None) takes the greatest."""
        if kind in self.by_kind:
            return self.by_kind[kind]
        if not self.by_traffic:
            return self.live
        trucks, margins = zip(*self.by_traffic, strict=True)
        return max(margins) if traffic is None else float(np.interp(traffic, trucks, margins))


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
    name
        What it is asked for by: a shipped name, or the file it is in.
    strengths
        Footings of typed strengths it can use, the first found counts: "permitted", "reduced", "nominal".
    rules
        Name of the standard whose rules give strengths from sections and materials; "" where only typed ones count.
    multiple_presence, presence_by_kind
        By number abreast (one, two ..., the last repeats) [-], and where a kind of loading differs.
    condition, system
        phi_c by condition and phi_s by kind of system [-].
    measured_gain
        What phi_c rises by, to 1 at most, where the loss was measured [-].
    impact
        The rule that gives impact where nobody types another; "" asks for one.
    impact_values
        Allowance by kind of loading and by riding surface [-], for a rule by riding surface.
    crawl_speed, crawl_kinds
        Speed [m/s] up to which impact is dropped, and for which kinds.
    closure
        Weight [N] below which a road closes to vehicles; 0 where the set has no such rule.
    sources
        Where each value comes from, by the value's name: "..., read", "..., from memory" or "own choice, ...".

    Raises
    ------
    InputError
        No level, or a factor that can be none.
    """

    title: str
    levels: tuple[Level, ...]
    statement: str
    source: str
    name: str = field(default="", kw_only=True)
    strengths: tuple[str, ...] = field(default=("permitted",), kw_only=True)
    rules: str = field(default="", kw_only=True)
    multiple_presence: tuple[float, ...] = field(default=(1.0,), kw_only=True)
    presence_by_kind: Mapping[str, tuple[float, ...]] = field(default_factory=dict, kw_only=True)
    condition: Mapping[str, float] = field(default_factory=dict, kw_only=True)
    system: Mapping[str, float] = field(default_factory=dict, kw_only=True)
    measured_gain: float = field(default=0.0, kw_only=True)
    impact: str = field(default="", kw_only=True)
    impact_values: Mapping[str, float] = field(default_factory=dict, kw_only=True)
    crawl_speed: float = field(default=0.0, kw_only=True)
    crawl_kinds: tuple[str, ...] = field(default=(), kw_only=True)
    closure: float = field(default=0.0, kw_only=True)
    sources: Mapping[str, str] = field(default_factory=dict, kw_only=True)

    def __post_init__(self) -> None:
        """Check that it has levels, and every factor beside theirs."""
        place = f'factor set "{self.title}"'
        if not self.levels:
            raise InputError("needs at least one level", place=place)
        for presence in (self.multiple_presence, *self.presence_by_kind.values()):
            if not presence:
                raise InputError("multiple presence needs the factor of at least one abreast", place=place)
            _require_factors("multiple presence", presence, place, above=True)
        _require_factors("condition and system", (*self.condition.values(), *self.system.values()), place, above=True)
        others = (self.measured_gain, *self.impact_values.values(), self.crawl_speed, self.closure)
        _require_factors("measured gain, impact, crawl speed and closure", others, place)

    @property
    def from_memory(self) -> tuple[str, ...]:
        """Names of the values that were recalled, not read."""
        return tuple(value for value, said in self.sources.items() if "from memory" in said)

    def presence(self, kind: str, count: int) -> float:
        """Return multiple presence [-] for ``count`` loadings of a kind abreast, 1 or more."""
        if count < 1:
            raise InputError(f"at least one is abreast, got {count}", place=f'factor set "{self.title}"')
        factors = self.presence_by_kind.get(kind, self.multiple_presence)
        return factors[min(count, len(factors)) - 1]

    def beside_margin(self, level: Level, kind: str, traffic: float | None = None) -> float:
        """Return the margin on ordinary traffic of a kind beside what a level rates.

        The level's own where it rates that kind, else the greatest of the levels that do.

        Raises
        ------
        InputError
            No level rates that kind.
        """
        levels = [level] if level.rates(kind) else [one for one in self.levels if one.rates(kind)]
        if not levels:
            raise InputError(f'no level rates a loading of kind "{kind}"', place=f'factor set "{self.title}"')
        return max(one.live_margin(kind, traffic) for one in levels)

    def levels_for(self, kind: str) -> tuple[int, ...]:
        """Return the numbers of the levels that rate a kind of loading."""
        return tuple(number for number, level in enumerate(self.levels) if level.rates(kind))


def capacity_factor(of_condition: float, of_system: float) -> float:
    """Return max(phi_c phi_s, 0.85), which a nominal strength is multiplied by at strength limit states.

    References
    ----------
    M. A. Khan, Bridge and Highway Structure Rehabilitation and Repair, McGraw-Hill 2010, p. 187: C = phi_c phi_s phi
    Rn with phi_c phi_s at least 0.85.
    """
    return max(of_condition * of_system, FLOOR)


def condition_factor(method: FactorSet, condition: str, *, measured: bool) -> float:
    """Return phi_c of a condition that the method knows, raised (to 1 at most) where the loss was measured.

    Raises
    ------
    UnknownNameError
        No such condition.
    """
    if condition not in method.condition:
        raise UnknownNameError(
            f'"{condition}" is not one of {", ".join(method.condition)}',
            place="condition",
            nearest=nearest_name(condition, method.condition),
        )
    raised = method.condition[condition] + (method.measured_gain if measured else 0.0)
    return min(round(raised, 12), max(1.0, method.condition[condition]))


def sign_weight(level: Level, factor: float, weight: float) -> float:
    """Return the safe weight [N] that a rating factor leaves a vehicle of a weight [N].

    W RF; or, on a legal level's curve, W (RF - 0.3) / 0.7 for 0.3 <= RF <= 1 and 0 below. nan where nothing is rated,
    infinite where RF is.

    References
    ----------
    Khan 2010, p. 187.
    """
    if level.posting == "legal curve" and factor < 1.0:
        return weight * max(factor - 0.3, 0.0) / 0.7
    return math.inf if math.isinf(factor) else weight * factor


def _require_factors(what: str, factors: Iterable[float], place: str, *, above: bool = False) -> None:
    """Refuse what no factor can be: not finite, below 0, or 0 itself where it must be above."""
    for factor in factors:
        if not (math.isfinite(factor) and (factor > 0 if above else factor >= 0)):
            raise InputError(f"{what}: must be finite and {'above 0' if above else '0 or more'}, got {factor}",
                             place=place)  # fmt: skip


PERMITTED: Final = FactorSet(
    "permitted forces",
    (Level("permitted"),),
    "Strengths are the permitted forces typed in the bridge file, margin included; no load factors applied.",
    "typed",
    name="permitted",
)
