"""The dynamic allowance of every row of a bridge: worked out once, then picked by kind of loading and speed."""

from __future__ import annotations

from dataclasses import dataclass, field
from types import MappingProxyType
from typing import TYPE_CHECKING, Final

import numpy as np

from movload.arrays import Floats, held
from movload.errors import MissingDataError, UnknownNameError, nearest_name
from movload.rating.impact import (
    RULES,
    SURFACES,
    by_loaded_length,
    loaded_lengths,
    railway,
    railway_lengths,
)
from movload.statics.influence import InfluenceLines
from movload.statics.spans import PlankSpan, SimpleSpans

if TYPE_CHECKING:
    from collections.abc import Mapping, Sequence

    from movload.bridge.bridge import Bridge
    from movload.rating.factor_sets import FactorSet
    from movload.statics.part import Effect, Part

_TYPED: Final = "typed"


@dataclass(frozen=True, slots=True, eq=False)
class ImpactTable:
    """What gives every row's dynamic allowance.

    Attributes
    ----------
    rule
        Its name, "typed" for a fraction that was typed.
    rows
        (R, 2) allowance on the positive and the negative side; 1 where it follows from kind and surface alone.
    by_kind
        What that 1 stands for, by kind of loading [-]; empty where ``rows`` say it all.
    otherwise
        The same for kinds that are not named.
    crawl
        Speed [m/s] up to which it is dropped, 0 where it never is, and the kinds it is dropped for.
    statement
        What an answer says about it.
    """

    rule: str
    rows: Floats
    by_kind: Mapping[str, float] = field(default_factory=lambda: MappingProxyType({}))
    otherwise: float = 1.0
    crawl: tuple[float, tuple[str, ...]] = (0.0, ())
    statement: str = ""

    def __reduce__(self) -> tuple[object, ...]:
        """Pickle by parts (a read-only mapping cannot be pickled)."""
        return (ImpactTable, (self.rule, self.rows, dict(self.by_kind), self.otherwise, self.crawl, self.statement))

    def of(self, kind: str, speed: float | None) -> Floats:
        """Return the allowance (R, 2) on a kind of loading that crosses at a speed [m/s], None for any."""
        limit, kinds = self.crawl
        if speed is not None and speed <= limit and kind in kinds:
            return np.zeros_like(self.rows)
        factor = self.by_kind.get(kind, self.otherwise)
        return self.rows if factor == 1.0 else factor * self.rows


def impact_table(bridge: Bridge, parts: Sequence[Part], method: FactorSet) -> ImpactTable:
    """Return the allowance that the bridge file types, or the rule it names, or else the method's own.

    Raises
    ------
    MissingDataError
        A rule by riding surface, and the surface is not said.
    UnknownNameError
        A rule or a surface that is not known.
    """
    dynamic = np.concatenate([_not_timber(bridge, part) for part in parts])[:, None] * np.ones(2)
    crawl = (method.crawl_speed, method.crawl_kinds)
    if bridge.impact is not None:
        said = f"Impact {bridge.impact:g} as typed"
        return ImpactTable(_TYPED, held(bridge.impact * dynamic), crawl=crawl, statement=_said(said, dynamic))
    rule = bridge.impact_rule or method.impact
    if rule not in RULES[1:]:
        raise UnknownNameError(
            f'"{rule}" is no rule; a fraction or one of {", ".join(RULES[1:])}',
            place="rating.impact", nearest=nearest_name(rule, RULES[1:]),
        )  # fmt: skip
    if rule == "by riding surface":
        return _by_surface(bridge, method, dynamic, crawl)
    allowance = np.concatenate([_by_length(bridge, part, rule) for part in parts])
    return ImpactTable(rule, held(allowance * dynamic), crawl=crawl, statement=_said(f"Impact {rule}", dynamic))


def _said(text: str, dynamic: Floats) -> str:
    """Return the statement, with timber where there is any."""
    return f"{text}; none on timber." if (dynamic == 0.0).any() else f"{text}."


def _by_surface(
    bridge: Bridge, method: FactorSet, dynamic: Floats, crawl: tuple[float, tuple[str, ...]]
) -> ImpactTable:
    """Return the allowance by kind of loading and riding surface."""
    values = method.impact_values
    if not bridge.surface:
        raise MissingDataError(f'is needed by the impact of "{method.title}": {", ".join(SURFACES)}',
                               place="rating.surface")  # fmt: skip
    if not any(surface in values for surface in SURFACES):
        raise MissingDataError(
            f'"{method.title}" has no values by riding surface; type a fraction or another rule', place="rating.impact"
        )
    if bridge.surface not in values:
        raise UnknownNameError(
            f'"{bridge.surface}" is not one of {", ".join(SURFACES)}',
            place="rating.surface", nearest=nearest_name(bridge.surface, SURFACES),
        )  # fmt: skip
    of_kinds = {kind: value for kind, value in values.items() if kind not in SURFACES}
    otherwise = values[bridge.surface]
    said = ", ".join([*(f"{value:g} on {kind} loads" for kind, value in of_kinds.items()), f"{otherwise:g} on others"])
    return ImpactTable(
        "by riding surface", held(dynamic), MappingProxyType(of_kinds), otherwise, crawl,
        _said(f'Impact by riding surface "{bridge.surface}": {said}', dynamic),
    )  # fmt: skip


def _not_timber(bridge: Bridge, part: Part) -> Floats:
    """Return 0 for rows of timber and 1 for all others (R,)."""
    own = {bridge.truss.member(name).name: typed.timber for name, typed in bridge.strengths.items()}
    floor = bridge.floor
    beams = {"stringer": floor.stringers, "floorbeam": floor.floorbeams, "planks": floor.planks}

    def timber(effect: Effect) -> bool:
        if effect.kind == "axial":
            return own.get(effect.name, False)
        beam = beams.get(effect.part.partition(" ")[0])
        return beam is not None and beam.strength.timber

    return np.array([0.0 if timber(effect) else 1.0 for effect in part.response.effects])


def _by_length(bridge: Bridge, part: Part, rule: str) -> Floats:
    """Return the allowance of a part's rows (R, 2) by a rule that asks for lengths."""
    response, spacing = part.response, bridge.deck.truss_spacing
    if isinstance(response, (SimpleSpans, PlankSpan)):
        own = [response.span] if isinstance(response, PlankSpan) else response.lengths
        lengths = np.repeat(own, 2)[:, None] * np.ones(2)
        z = bridge.floor.stringers.z if bridge.floor.stringers else ()
        between = float(np.diff(z).min()) if len(z) > 1 else None
        return by_loaded_length(lengths) if rule == "by loaded length" else railway(lengths, spacing=between)
    if not isinstance(response, InfluenceLines):
        raise MissingDataError(f'"{rule}" needs influence lines; type a fraction', place="rating.impact")
    across = any(effect.part.startswith("floorbeam ") for effect in response.effects)
    if rule == "by loaded length":
        lengths = loaded_lengths(response.stations, response.ordinates)
        own = np.full_like(lengths, spacing or 0.0)  # a floorbeam: its own span across
        return by_loaded_length(own if across else lengths)
    span = float(response.stations[-1] - response.stations[0])
    lengths = railway_lengths(response.stations, response.ordinates, span=span)
    return railway(lengths[:, None] * np.ones(2), spacing=spacing)
