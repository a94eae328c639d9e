"""A bridge solved once for a method: parts with their lines, permanent effects and strengths. No vehicle in it."""

from __future__ import annotations

import itertools
from dataclasses import dataclass, field
from typing import TYPE_CHECKING

import numpy as np

from movload.arrays import Floats, held
from movload.bridge.across import Across
from movload.errors import MissingDataError, Note
from movload.rating.factor_sets import PERMITTED, FactorSet
from movload.statics.influence import lines_of
from movload.statics.part import Effect, Part
from movload.statics.permanent import PERMANENT_CLASSES, permanent_effects
from movload.statics.stiffness import factored
from movload.strength.typed import permitted_strengths

if TYPE_CHECKING:
    from movload.bridge.bridge import Bridge, PermanentLoads
    from movload.units import UnitSystem


@dataclass(frozen=True, slots=True, eq=False)
class SolvedBridge:
    """Everything about a bridge that no vehicle changes.

    Attributes
    ----------
    title
        The bridge's own.
    parts
        What is rated, each with its response and its across line; rows are counted part after part.
    permanent
        Permanent effects (classes, R) [N, m], tension positive.
    strength
        Strengths (levels, R, 2), tension then compression; nan where none is known.
    notes
        What a reader must know.
    sources
        Where the data came from.
    classes
        Names of the permanent classes.
    method
        The factor set.
    impact
        (R, 2) dynamic allowance [-].
    units
        Units to show results in.
    """

    title: str
    parts: tuple[Part, ...]
    permanent: Floats
    strength: Floats
    notes: tuple[Note, ...] = ()
    sources: tuple[str, ...] = ()
    classes: tuple[str, ...] = field(kw_only=True)
    method: FactorSet = field(kw_only=True)
    impact: Floats = field(kw_only=True)
    units: UnitSystem = field(kw_only=True)

    @property
    def effects(self) -> tuple[Effect, ...]:
        """All rows, part after part."""
        return tuple(itertools.chain.from_iterable(part.response.effects for part in self.parts))


def solve(bridge: Bridge, method: FactorSet = PERMITTED) -> SolvedBridge:
    """Return a bridge solved for a method.

    Raises
    ------
    MissingDataError
        Something that a rating needs has not been typed; every place is named.
    UnstableError
        The truss is a mechanism.
    """
    permanent_loads, share, impact = _required(bridge)
    solver = factored(bridge.truss)
    lines = lines_of(solver, bridge.deck.panel_points)
    permits = {bridge.truss.member(name).name: typed for name, typed in bridge.permits.items()}  # a bar's own name
    strength = permitted_strengths(lines.effects, permits)
    return SolvedBridge(
        bridge.title,
        (Part("truss", lines, Across.typed(share)),),
        permanent_effects(solver, bridge.deck.panel_points, permanent_loads),
        held(np.repeat(strength[None], len(method.levels), axis=0)),
        _notes(bridge),
        bridge.sources,
        classes=PERMANENT_CLASSES,
        method=method,
        impact=held(np.full(strength.shape, impact)),
        units=bridge.units,
    )


def _required(bridge: Bridge) -> tuple[PermanentLoads, float, float]:
    """Return permanent loads, axle share and impact, or raise with everything that is still to be typed."""
    needed = [f'{place} (still holds "?")' for place in bridge.missing]
    asked = {
        "deck.truss_share (share of a whole axle that reaches one truss)": bridge.deck.truss_share,
        "permanent.deck and permanent.truss_share (weight per length of the whole deck, 0 if none)":
            bridge.permanent,
        "rating.impact (dynamic allowance, e.g. 0.30, and 0 only if a rule allows it)": bridge.impact,
    }  # fmt: skip
    needed += [
        words for words, value in asked.items()
        if value is None and not any(place in words.split() for place in bridge.missing)
    ]  # fmt: skip
    needed += _members_needed(bridge)
    permanent, share, impact = bridge.permanent, bridge.deck.truss_share, bridge.impact
    if needed or permanent is None or share is None or impact is None:
        raise MissingDataError("a rating needs data that is not there yet: " + "; ".join(needed), place=bridge.title)
    return permanent, share, impact


def _members_needed(bridge: Bridge) -> list[str]:
    """Return what no member group says and no "?" already asks for: densities, and any permitted force at all."""
    asked = [place.replace('"', "") for place in bridge.missing if place.startswith("members.")]
    needed = []
    weightless = [
        member.name for member in bridge.truss.members
        if member.density is None and f"members.{member.role}.density" not in asked
    ]  # fmt: skip
    if weightless:
        some = ", ".join(weightless[:3]) + (" ..." if len(weightless) > 3 else "")
        needed.append(f"density of {some} (0 if in deck weight)")
    typed = any(force is not None for one in bridge.permits.values() for force in (one.tension, one.compression))
    if not typed and not any(".permits" in place for place in asked):
        needed.append("permits of at least one member group: { tension = ..., compression = ... }")
    return needed


def _notes(bridge: Bridge) -> tuple[Note, ...]:
    """Return what a reader of any rating of this bridge must know."""
    truss, supports = bridge.truss, bridge.truss.supports
    texts = {"shares-typed": _SHARES.format(deck=bridge.deck, permanent=bridge.permanent, impact=bridge.impact)}
    if truss.redundancy > 0:
        texts["redundant"] = _REDUNDANT.format(count=truss.redundancy)
    if any(support.settlement or support.movement for support in supports):
        texts["settlement"] = "Settlements and imposed movements of bearings are in the permanent effects."
    if any(permitted.compression == 0 for permitted in bridge.permits.values()):
        texts["no-compression"] = (
            "Some bars permit no compression: where live load pushes one a counter must act, and none is modelled."
        )
    return tuple(Note(code, "truss", text) for code, text in texts.items())


_SHARES = (
    "One truss is rated with typed shares: {deck.truss_share:g} of a whole axle and {permanent.truss_share:g} of the "
    "deck's weight reach it, wherever the vehicle keeps across the deck. Impact {impact:g} is on every live effect."
)
_REDUNDANT = (
    "{count} member(s) or reaction(s) beyond what equilibrium can find: forces depend on the areas and on a fit "
    "without initial stress."
)
