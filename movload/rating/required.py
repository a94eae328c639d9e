"""What a rating needs and nobody has typed, all of it in one message that says where to put it."""

from __future__ import annotations

from typing import TYPE_CHECKING

from movload.errors import MissingDataError

if TYPE_CHECKING:
    from movload.bridge.bridge import Bridge
    from movload.bridge.permanent import PermanentItems
    from movload.rating.factor_sets import FactorSet


def require_data(bridge: Bridge, method: FactorSet) -> PermanentItems:
    """Return the permanent loads, or raise with everything that is still to be typed.

    Raises
    ------
    MissingDataError
        Every place that a rating by this method needs and that is empty.
    """
    needed = [f'{place} (still holds "?")' for place in bridge.missing]
    needed += [words for words, there in _asked(bridge, method).items() if not there and not _said(bridge, words)]
    needed += _of_members(bridge, method)
    if needed or bridge.permanent is None:
        raise MissingDataError("a rating needs data that is not there yet: " + "; ".join(needed), place=bridge.title)
    return bridge.permanent


def _said(bridge: Bridge, words: str) -> bool:
    """Return whether a place is asked for already because the file holds a "?" there."""
    return any(place in words.split() for place in bridge.missing)


def _asked(bridge: Bridge, method: FactorSet) -> dict[str, bool]:
    """Return what a rating asks of the bridge as a whole, and whether it is there."""
    deck = bridge.deck
    across = deck.truss_spacing is not None
    asked: dict[str, bool] = {}
    if not across:
        asked[
            "deck.truss_share (share of a whole axle that reaches one truss), or deck.truss_spacing and deck.kerbs"
        ] = deck.truss_share is not None
        asked["permanent.deck and permanent.truss_share (weight per length of the whole deck, 0 if none)"] = (
            bridge.permanent is not None
        )
    else:
        asked["deck.kerbs (z of the right and the left kerb)"] = deck.roadway is not None
        asked["permanent.items (what lies on the bridge, where across), or permanent.deck"] = (
            bridge.permanent is not None
        )
    asked["rating.impact (dynamic allowance, e.g. 0.30, and 0 only if a rule allows it)"] = (
        bridge.impact is not None or bool(bridge.impact_rule) or bool(method.impact)
    )
    if any(level.needs_traffic for level in method.levels):
        asked['rating.traffic (trucks a day one way, or "unknown")'] = bridge.traffic is not None
    if deck.bears_on == "chord":
        asked["deck.chord_bending (who checked the chord's bending between joints, and the result)"] = bool(
            deck.chord_bending
        )
    return asked


def _of_members(bridge: Bridge, method: FactorSet) -> list[str]:
    """Return what no member group says and no "?" already asks for: densities, and any strength at all."""
    asked = [place.replace('"', "") for place in bridge.missing if place.startswith("members.")]
    needed = []
    weightless = [
        member.name for member in bridge.truss.members
        if member.density is None and f"members.{member.role}.density" not in asked
    ]  # fmt: skip
    if weightless:
        some = ", ".join(weightless[:3]) + (" ..." if len(weightless) > 3 else "")
        needed.append(f"density of {some} (0 if in deck weight)")
    footings = [("permits" if footing == "permitted" else footing) for footing in method.strengths]
    floor = (bridge.floor.stringers, bridge.floor.floorbeams, bridge.floor.planks)
    strengths = [*bridge.strengths.values(), *(part.strength for part in floor if part is not None)]
    typed = any(one.on(footing) for one in strengths for footing in footings)
    if method.rules and (bridge.made or any(part is not None and part.made is not None for part in floor)):
        return needed
    if not typed and not any(f".{footing}" in place for place in asked for footing in footings):
        words = " or ".join(footings)
        needed.append(
            f'{words} of at least one member group for method "{method.title}": {{ tension = ..., compression = ... }}'
            + (", or section and material" if method.rules else "")
        )
    return needed
