"""What a reader of any rating of a bridge must know, whatever crosses it."""

from __future__ import annotations

from typing import TYPE_CHECKING, Final

from movload.bridge.strengths import FOOTINGS
from movload.errors import Note

if TYPE_CHECKING:
    from movload.bridge.bridge import Bridge
    from movload.rating.factor_sets import FactorSet

_TOLD: Final = 4  # recalled values that a note names; the set's file names all


def bridge_notes(bridge: Bridge, method: FactorSet) -> tuple[Note, ...]:
    """Return the notes on a bridge rated by a method, the most telling first."""
    texts = _of_shares(bridge) | _of_truss(bridge) | _of_floor(bridge)
    notes = [Note(code, "truss", text) for code, text in texts.items()]
    if method.from_memory:
        some = ", ".join(method.from_memory[:_TOLD]) + (" ..." if len(method.from_memory) > _TOLD else "")
        text = f"factors from memory, to be checked against the edition in force: {some}"
        notes.append(Note("factors-from-memory", method.title, text, method.source))
    return tuple(notes)


def _of_shares(bridge: Bridge) -> dict[str, str]:
    """Return what typed shares and weights leave out."""
    permanent, texts = bridge.permanent, {}
    items = permanent.items if permanent is not None else ()
    if bridge.deck.truss_spacing is None:
        shares = sorted({item.share for item in items if item.share is not None})
        texts["shares-typed"] = _SHARES.format(
            share=bridge.deck.truss_share or 0.0, permanent=" and ".join(f"{share:g}" for share in shares) or "0"
        )
    if permanent is not None and permanent.detail_allowance == 0.0:
        texts["detail-allowance"] = (
            "Members weigh area x density x length: nothing is added for lacing, rivets or plates."
        )
    return texts


def _of_truss(bridge: Bridge) -> dict[str, str]:
    """Return what the truss's own answer depends on."""
    truss, texts = bridge.truss, {}
    if truss.redundancy > 0:
        texts["redundant"] = _REDUNDANT.format(count=truss.redundancy)
    if any(support.settlement or support.movement for support in truss.supports):
        texts["settlement"] = "Settlements and imposed movements of bearings are in the permanent effects."
    typed = [one.on(footing).get("compression", 1.0) for one in bridge.strengths.values() for footing in FOOTINGS]
    if 0.0 in typed:
        texts["no-compression"] = (
            "Some bars carry no compression, as typed: where live load pushes one a counter must act, and none is "
            "modelled; its row says only that."
        )
    if bridge.deck.bears_on == "chord":
        texts["chord-bending"] = f"The deck bears on the chord between joints; its bending: {bridge.deck.chord_bending}"
    return texts


def _of_floor(bridge: Bridge) -> dict[str, str]:
    """Return what the floor's answer leaves out."""
    floor, texts = bridge.floor, {}
    if floor.stringers is not None:
        texts["stringer-permanent"] = (
            "A stringer's permanent moment is that at midspan, added to the live one wherever that is greatest."
        )
        if floor.stringers.fraction is not None:
            texts["stringer-fraction"] = (
                f"A stringer takes {floor.stringers.fraction:g} of a whole axle, as typed, however many stand abreast."
            )
    if floor.planks is not None:
        texts["planks"] = (
            "A plank is rated for the heaviest single wheel alone: no multiple presence, its own weight left out."
        )
    return texts


_SHARES: Final = (
    "One truss is rated with typed shares: {share:g} of a whole axle and {permanent} of the deck's weight reach it, "
    "wherever the vehicle keeps across the deck."
)
_REDUNDANT: Final = (
    "{count} member(s) or reaction(s) beyond what equilibrium can find: forces depend on the areas and on a fit "
    "without initial stress."
)
