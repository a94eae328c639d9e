"""How numbers and results are said in tables: letters beside signs, ratings and weights rounded down, cautions."""

from __future__ import annotations

import math
from typing import TYPE_CHECKING, Final

from movload.units import unit_factor

if TYPE_CHECKING:
    from collections.abc import Mapping

    from movload.peaks.peaks import Peak
    from movload.rating.rating import Coverage, Rating
    from movload.statics.part import Effect
    from movload.traffic.crossing import Crossing
    from movload.units import Quantity, UnitSystem

ARROWS: Final = {1: "→", -1: "←", 0: ""}
_NEVER_ABOVE: Final = 100.0  # ratings beyond this say no more than that the row does not matter
_DECIMALS: Final[dict[Quantity, tuple[int, float]]] = {
    "force": (1, 1e4), "section": (2, 0.0254), "length": (2, 1.0), "moment": (1, 1e4), "speed": (0, 1.0),
}  # fmt: skip
"""Decimals that say enough in units up to this many N or m; coarser units (MN, m for sections) get more."""
_HAIR: Final = 1e-9  # of the value: what round-off put just below a digit still counts as reaching it

CAUTIONS: Final = (
    "An analysis aid until a qualified engineer adopts it; local codes and licensed practice decide.",
    (
        "Not checked: connections, pins, bearings, foundations, fatigue, hidden section loss, bending of "
        "members, sideways buckling of a pony truss's top chord, 3-D action."
    ),
    "Bars are taken to pull and to push: rods that only pull (counters) are not modelled.",
    (
        "Holds for the geometry, condition and axle weights in the files only; axle weights must be weighed, not read "
        "from a brochure. Stop using the bridge at any sign of distress."
    ),
)


def quantity_of(effect: Effect) -> Quantity:
    """Return the quantity an effect is shown as: a force, a moment, or a deflection in section units."""
    shown: dict[str, Quantity] = {"down": "section", "moment": "moment"}
    return shown.get(effect.kind, "force")


def effect_text(effect: Effect, value: float, units: UnitSystem) -> str:
    """Return an effect as text, a member force with its letter: ``212.4 T``, ``-88.1 C``."""
    text = number_text(value, quantity_of(effect), units)
    if float(text) == 0:
        return "0"
    if effect.kind == "moment":
        return f"{text} {units.symbol('moment')}"
    if effect.kind != "axial":
        return text
    return f"{text} {'T' if value > 0 else 'C'}"


def number_text(value: float, quantity: Quantity, units: UnitSystem, *, more: int = 0, sign: str = "-") -> str:
    """Return an SI value as a number in the file's units, ``more`` decimals than usual; zero never has a sign.

    ``sign`` is Python's: "+" writes it for positive numbers too.
    """
    decimals, finest = _DECIMALS[quantity]
    decimals += more + max(0, math.floor(math.log10(units.factor(quantity) / finest)))
    return unsigned_zero(f"{units.shown(value, quantity):{sign}.{decimals}f}")


def unsigned_zero(text: str) -> str:
    """Return a number's text without its sign where every digit shown is 0."""
    return text if float(text) else text.lstrip("+-")


def rounded_down(value: float, decimals: int) -> float:
    """Return a value cut to decimals, never up: 0.996 gives 0.99."""
    scale: float = 10.0**decimals
    return math.floor(value * scale * (1.0 + _HAIR)) / scale


def factor_text(factor: float) -> str:
    """Return a rating factor to two decimals, rounded down; below 1 it never reads 1.00."""
    if math.isnan(factor):
        return "not rated"
    if math.isinf(factor):
        return "no live effect"
    if factor >= _NEVER_ABOVE:
        return f"over {_NEVER_ABOVE:.0f}"
    down = rounded_down(factor, 2)
    return f"{min(down, 0.99) if factor < 1 else down:.2f}"


def weight_text(weight: float, units: UnitSystem) -> str:
    """Return a weight [N] in tonnes and short tons, each rounded down from the unrounded value.

    The system of the file comes first.
    """
    if not math.isfinite(weight):
        return "-"
    order = ("short ton", "t") if units.is_us else ("t", "short ton")
    first, second = (
        f"{rounded_down(weight / unit_factor(unit, 'force'), 1):.1f} {'short tons' if unit == 'short ton' else unit}"
        for unit in order
    )
    return f"{first} ({second})"


def use_text(rating: Rating) -> str:
    """Return what uses all of the strength before the vehicle comes, in words; "" where something is left."""
    if rating.factor > 0:
        return ""
    use = rating.permanent_use
    if rating.pushed > rating.alone:
        over = rounded_down(rating.pushed / rating.alone * 100, 0)
        return f"permanent load alone uses {over:.0f} % of what timber carries for good"
    if rating.held and use < 1:
        return "traffic beside it leaves no strength"
    if math.isinf(use):
        return "permanent load alone; no strength"
    return f"permanent load alone uses {rounded_down(use * 100, 0):.0f} %" if use > 0 else "no strength"


def place_text(peak: Peak, units: UnitSystem) -> str:
    """Return where a peak's vehicle stands: front axle's place and heading."""
    if peak.heading == 0:
        return "off the bridge"
    return f"{number_text(peak.position, 'length', units)} {units.symbol('length')} {ARROWS[peak.heading]}"


def spacings_text(peak: Peak, units: UnitSystem) -> str:
    """Return the distances between axles that were found the worst, front to back."""
    gaps = " ".join(number_text(gap, "length", units) for gap in peak.spacings)
    return f"axles {gaps} {units.symbol('length')} apart" if gaps else ""


def standing_text(peak: Peak, stations: tuple[str, ...]) -> str:
    """Return which axle stands on which panel point, or has just left it; "" when the vehicle is off."""
    if peak.heading and peak.station < 0:
        return f"moment under axle {peak.axle + 1}"
    where = "just off" if peak.lost else "on"
    return f"axle {peak.axle + 1} {where} {stations[peak.station]}" if peak.heading else ""


def coverage_text(coverage: Coverage) -> str:
    """Return what an answer covers, in one sentence."""
    total = len(coverage.full) + len(coverage.partly) + len(coverage.none)
    text = f"{len(coverage.full)} of {total} members and beams rated in every sense they feel"
    if coverage.partly:
        text += f"; {len(coverage.partly)} in one sense only ({_some(coverage.partly)})"
    if coverage.none:
        text += f"; {len(coverage.none)} not rated ({_some(coverage.none)})"
    return f"{text}; {', '.join(coverage.not_rated)} not rated." if coverage.not_rated else f"{text}."


def verdict_text(factor: float, coverage: Coverage, uplifts: Mapping[str, float]) -> str:
    """Return adequate, adequate only if, or not adequate, for the parts rated; the unrounded value decides."""
    if factor < 1.0:
        return "not adequate"
    conditions = []
    gaps = len(coverage.partly) + len(coverage.none)
    if gaps:
        conditions.append(f"the {gaps} parts not fully rated are" if gaps > 1 else "the part not fully rated is")
    if uplifts:
        bearings = ", ".join(name.rpartition(" ")[0] for name in uplifts)
        conditions.append(f"{bearings} {'are' if len(uplifts) > 1 else 'is'} held down")
    return f"adequate only if {' and '.join(conditions)}" if conditions else "adequate, for the parts rated"


def uplift_texts(uplifts: Mapping[str, float], units: UnitSystem) -> list[str]:
    """Return a line for each bearing that is pulled up."""
    symbol = units.symbol("force")
    return [
        f"Uplift: {name} is pulled up with {number_text(pull, 'force', units)} {symbol} (permanent and live); whether "
        "anything holds it down is not checked."
        for name, pull in uplifts.items()
    ]


def _some(names: tuple[str, ...]) -> str:
    """Return the first few names."""
    return ", ".join(names[:6]) + (" ..." if len(names) > 6 else "")


def way_text(crossing: Crossing, units: UnitSystem) -> str:
    """Return where across a crossing keeps, how fast, and beside whom, in words."""
    place = crossing.place
    if place == "offset":
        place = f"z = {number_text(crossing.z, 'length', units, sign='+')} {units.symbol('length')}"
    elif place == "centre line":
        place += f" \u00b1 {number_text(crossing.wander, 'length', units)} {units.symbol('length')}"
    if crossing.speed is not None:
        place += f", {number_text(crossing.speed, 'speed', units)} {units.symbol('speed')}"
    return place if crossing.beside is None else f"{place}, beside {crossing.beside.title}"


def span_ratio_text(ratio: float) -> str:
    """Return span over deflection, rounded down."""
    return "-" if math.isinf(ratio) else f"1/{math.floor(ratio * (1 + _HAIR))}"
