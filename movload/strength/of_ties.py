"""From a metal bar as made to what tension asks for: areas, each where its limit looks for it, and how bars share."""

from __future__ import annotations

from typing import TYPE_CHECKING, Final

from movload.bridge.loss import ENDS, PLACES, LeastArea, place_text, with_loss
from movload.bridge.section import Section
from movload.bridge.section_open import groups
from movload.strength.aashto_lrfd import Tie
from movload.strength.strength import Step

if TYPE_CHECKING:
    from collections.abc import Callable, Sequence

    from movload.bridge.loss import Loss
    from movload.bridge.made import Made
    from movload.bridge.section_piece import Piece

_BARS: Final = frozenset({"bar", "round"})
_OWN: Final = "movload"


def tie_of(made: Made) -> tuple[Tie, tuple[Step, ...]]:
    """Return what tension asks for, and the steps to it."""
    section, material, gross, net = made.section.section, made.material, made.section.gross, made.section.net
    apart, of_gross, of_net = _worst_bar(made)
    steps = [
        Step("Ag new", "gross area as new", gross.as_new, "m2", section.title),
        Step("Ag", f"least gross area as found, {where(gross)}", gross.area, "m2", section.title),
        Step("An new", "net area as new", net.as_new, "m2", section.title),
        Step("An", f"least net area of both ends as found, {where(net)}", net.area, "m2", section.title),
    ]
    area, net_area = gross.area, net.area
    if apart and min(of_gross, of_net) < 1.0:
        area, net_area = min(area, of_gross * gross.as_new), min(net_area, of_net * net.as_new)
        said = "bars apart pull by their areas as new: what is left of the worst one, times"
        steps += [
            Step("Ag bars", f"{said} Ag new", area, "m2", _OWN),
            Step("An bars", f"{said} An new", net_area, "m2", _OWN),
        ]
    steps += [
        Step("Fy", "yield stress", material.fy, "Pa", material.source),
        Step("Fu", "ultimate stress", material.fu, "Pa", material.source),
    ]
    tie = Tie(
        gross=area, net=net_area, fy=material.fy, fu=material.fu, shear_lag=section.shear_lag, punched=section.punched,
    )  # fmt: skip
    return tie, tuple(steps)


def _worst_bar(made: Made) -> tuple[bool, float, float]:
    """Return whether a tie is several bars apart, and what is left of the worst one's gross and net area [-].

    Bars between the same two pins stretch alike, so that each pulls by its area as new: a loss near one end hardly
    softens it, and it alone reaches its yield there. The others do not help it before it gives.
    """
    section = made.section.section
    if not isinstance(section, Section) or made.joined is not None or len(section.pieces) < 2:
        return False, 1.0, 1.0
    bars = all(piece.shape.form in _BARS for piece in section.pieces)
    if not bars or len(groups(section.pieces)) < len(section.pieces):
        return False, 1.0, 1.0
    yields = [loss for loss in made.section.losses if not loss.inside_connection]
    gross = _least_left(section, yields, PLACES, lambda piece: piece.gross_area)
    net = 1.0 if section.holes else _least_left(section, made.section.losses, ENDS, lambda piece: piece.net_area)
    return True, gross, net


def _least_left(
    section: Section, losses: Sequence[Loss], places: Sequence[str], area: Callable[[Piece], float]
) -> float:  # fmt: skip
    """Return the least part left of any piece's area at any of some places [-]."""
    new = [area(piece) for piece in section.pieces]
    least = 1.0
    for place in places:
        found = with_loss(section, losses, place)  # type: ignore[arg-type]  # one of the places
        if isinstance(found, Section):
            least = min(least, *(area(piece) / whole for piece, whole in zip(found.pieces, new, strict=True)))
    return least


def where(least: LeastArea) -> str:
    """Return where along the bar an area is least, in words."""
    return place_text(least.place)
