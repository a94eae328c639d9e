"""One rating from its inputs, line by line, to be added again with a pocket calculator."""

from __future__ import annotations

import math
from typing import TYPE_CHECKING, Final

from movload.report.phrases import (
    factor_text,
    number_text,
    place_text,
    quantity_of,
    spacings_text,
    standing_text,
    unsigned_zero,
    use_text,
)
from movload.report.ratings_report import governed_text
from movload.report.table import grid
from movload.units import unit_factor

if TYPE_CHECKING:
    from collections.abc import Sequence

    from rich.console import RenderableType

    from movload.rating.rating import Rating
    from movload.review.hand import Explanation, Term
    from movload.strength.strength import Step, Strength
    from movload.units import Quantity, UnitSystem

_QUANTITIES: Final[dict[str, Quantity]] = {
    "N": "force", "N m": "moment", "m": "section", "m2": "area", "m3": "section modulus", "m4": "torsion",
    "m6": "warping",
}  # fmt: skip
"""What a step's value is, by its unit."""
_NOTHING: Final = 1e-9  # in any unit of a file: round-off of a place on an axis of symmetry
_LONG: Final = 1e10  # as long a number as can be read without an exponent


def explanation_parts(
    explanation: Explanation, stations: tuple[str, ...], units: UnitSystem
) -> list[RenderableType | str]:
    """Return strength, permanent load, live load and RF of one rating, each as its own sum."""
    rating = explanation.rating
    return [
        f"{governed_text(rating)} under {rating.crossing}, level {rating.level}",
        "",
        "Strength",
        "",
        _steps_table(explanation.strength.steps, units),
        *_as_new_texts(explanation.strength, rating, units),
        "",
        "Permanent load, what it uses of the strength",
        "",
        _permanent_table(explanation, units),
        "",
        *sum_table(rating, explanation.terms, stations, units, margin=explanation.live_margin),
    ]


def _steps_table(steps: Sequence[Step], units: UnitSystem) -> RenderableType:
    """Return a strength equation by equation."""
    lines = [[step.symbol, step.equation, _step_text(step, units), step.source] for step in steps]
    return grid(["", "equation", "value", "source"], lines, right=[False, False, True, False])


def _step_text(step: Step, units: UnitSystem) -> str:
    """Return a step's value with its unit: forces and moments to one decimal more than in tables, the rest to five."""
    if step.unit == "Pa":
        symbol = "ksi" if units.is_us else "MPa"
        return f"{_plain(step.value / unit_factor(symbol, 'stress'))} {symbol}"
    quantity = _QUANTITIES.get(step.unit)
    if quantity is None:
        return f"{_plain(step.value)} {step.unit}".removesuffix(" -")
    if quantity in {"force", "moment"}:
        return f"{number_text(step.value, quantity, units, more=1)} {units.symbol(quantity)}"
    return f"{_plain(units.shown(step.value, quantity))} {units.symbol(quantity)}"


def _plain(value: float) -> str:
    """Return a number to five figures, without an exponent where that can be read."""
    if abs(value) < _NOTHING:
        return "0"
    short = f"{value:.5g}"
    return f"{float(short):,.0f}".replace(",", " ") if "e+" in short and abs(value) < _LONG else short


def _as_new_texts(strength: Strength, rating: Rating, units: UnitSystem) -> list[str]:
    """Return the strength as new beside that as found, and what permanent load alone may use where that is less."""
    quantity, lines = quantity_of(rating.effect), []
    symbol = units.symbol(quantity)
    if not math.isnan(strength.as_new):
        new, found = (number_text(value, quantity, units, more=1) for value in (strength.as_new, strength.value))
        part = 100.0 * strength.value / strength.as_new if strength.as_new > 0 else 0.0
        lost = f"As new {new} {symbol}, as found {found} {symbol}: {part:.0f} % is left."
        lines += ["", lost if strength.value < strength.as_new else f"As new the same, {new} {symbol}: none is gone."]
    if math.isfinite(strength.permanent):
        limit = number_text(strength.permanent, quantity, units, more=1)
        lines += ["", f"Permanent load alone may use {limit} {symbol} of it (timber under load for good)."]
    return lines


def _permanent_table(explanation: Explanation, units: UnitSystem) -> RenderableType:
    """Return permanent load class by class with its margins, and the sum."""
    quantity = quantity_of(explanation.rating.effect)
    symbol = units.symbol(quantity)
    lines = [
        [
            term.title, number_text(term.effect, quantity, units, more=1, sign="+"),
            "pushes" if term.pushed > 0 else "relieves", f"{term.margin:.4g}",
            number_text(term.used, quantity, units, more=1, sign="+"),
        ]
        for term in explanation.permanent
    ]  # fmt: skip
    lines.append(["", "", "", "sum", number_text(explanation.used, quantity, units, more=1, sign="+")])
    heads = ["class", f"effect [{symbol}]", "", "x margin", f"= uses [{symbol}]"]
    return grid(heads, lines, right=[False, True, False, True, True])


def sum_table(
    rating: Rating, terms: Sequence[Term], stations: tuple[str, ...], units: UnitSystem, *, margin: float
) -> list[RenderableType | str]:
    """Return a live effect as its sum and its rating."""
    force, length, quantity = units.symbol("force"), units.symbol("length"), quantity_of(rating.effect)
    factored = any(term.factor != 1.0 for term in terms)
    placed = any(not math.isnan(term.z) for term in terms)
    abreast = any(term.vehicle > 1 for term in terms)
    beside = any(term.held for term in terms)
    arm = units.factor("length") if quantity == "moment" else 1.0
    across = rating.effect.part.startswith("floorbeam")  # a floorbeam's arm is across the bridge, in the share
    scale, share_scale = (1.0, arm) if across else (arm, 1.0)
    lines = []
    for term in terms:
        line = [
            str(rating.peak.axle + 1 if rating.effect.part == "planks" else term.axle),
            number_text(term.x, "length", units, more=1),
            number_text(term.load, "force", units, more=1), f"{term.share / share_scale:.4f}", f"{1 + term.impact:.3f}",
            unsigned_zero(f"{term.ordinate / scale:+.5f}"),
            number_text(term.effect, quantity, units, more=1, sign="+"),
        ]  # fmt: skip
        if factored:
            line.insert(3, f"{term.factor:.3f}")
        if placed:
            line.insert(2, number_text(term.z, "length", units, more=1, sign="+"))
        if abreast:
            line.insert(0, f"{term.vehicle}{', held' if term.held else ''}")
        lines.append(line)
    of_arm = f" [{length}]" if quantity == "moment" else ""
    heads = ["axle", f"x [{length}]", f"load [{force}]", f"x share{of_arm if across else ''}", "x (1 + I)"]
    heads += [f"x ordinate{'' if across else of_arm}", f"= [{units.symbol(quantity)}]"]
    if factored:
        heads.insert(3, "x presence")
    if placed:
        heads.insert(2, f"z [{length}]")
    if abreast:
        heads.insert(0, "vehicle")
    sums = [("sum", rating.live)] if not beside else [("sum", rating.live), ("sum held", rating.held)]
    for said, value in sums:
        lines.append([""] * (len(heads) - 2) + [said, number_text(value, quantity, units, more=1, sign="+")])
    peak = rating.peak
    spaced = spacings_text(peak, units) if rating.ranged else ""
    where = ", ".join(filter(None, (standing_text(peak, stations), place_text(peak, units), spaced)))
    title = f"{governed_text(rating)} under {rating.crossing}: {where}"
    return [title, "", grid(heads, lines, right=[True] * len(heads)), "", _equation(rating, units, margin=margin)]


def _equation(rating: Rating, units: UnitSystem, *, margin: float) -> str:
    """Return RF = (R - a D - f F) / (b L) with its numbers; what permanent load uses is negative where it relieves."""
    quantity = quantity_of(rating.effect)
    strength, live = (number_text(value, quantity, units, more=1) for value in (rating.strength, abs(rating.live)))
    pushed = rating.permanent if rating.side == 0 else -rating.permanent
    factored = "" if math.isclose(rating.pushed, pushed, rel_tol=1e-12) else "factored "
    permanent = number_text(rating.pushed, quantity, units, more=1, sign="+")
    below = f"live {live}" if margin == 1 else f"({margin:g} x live {live})"
    why = use_text(rating)
    stays = number_text(abs(rating.held), quantity, units, more=1)
    beside = f" - {rating.held_factor:g} x held {stays}" if rating.held else ""
    return (
        f"RF = (strength {strength} - {factored}permanent ({permanent}){beside}) / {below} "
        f"{units.symbol(quantity)} = {factor_text(rating.factor)}{f': {why}' if why else ''}"
    )
