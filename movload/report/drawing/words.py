"""Numbers and names as they are written in figures: a few digits, the letter T or C, a proper minus.

Everything comes in SI and leaves in the units of a `UnitSystem`.
"""

from __future__ import annotations

import math
from typing import TYPE_CHECKING, Final

from movload.report.phrases import quantity_of

if TYPE_CHECKING:
    from collections.abc import Iterable

    from movload.bridge.truss import Truss
    from movload.statics.influence import InfluenceLine
    from movload.statics.part import Effect
    from movload.units import UnitSystem

_LEAST_DECIMALS: Final = {"mm": 0, "cm": 1, "in": 1, "km": 5}
_TYPED: Final = 1e-6  # of the unit shown: a length differs from its rounded self by no more than summing adds
_AS_ONE: Final = 1e-9  # m; x closer than this to a joint's is the joint's


def signed(number: float, decimals: int) -> str:
    """Return a number with its sign written out: +0.585, −0.601."""
    text = f"{abs(number):.{decimals}f}"
    return text if not float(text) else ("−" if number < 0 else "+") + text


def plain(number: float, decimals: int) -> str:
    """Return a number with a minus only when it needs one."""
    return signed(number, decimals).removeprefix("+")


def figures(largest: float, wanted: int = 3) -> int:
    """Return how many decimals give the largest number of a kind ``wanted`` figures, 0 ... 6."""
    if not (math.isfinite(largest) and largest > 0):
        return 0
    return min(max(wanted - 1 - math.floor(math.log10(largest)), 0), 6)


def lengths(metres: Iterable[float], units: UnitSystem, *, rounded: bool = False) -> list[str]:
    """Return lengths in one number of decimals: 2 (0 for mm, 1 for cm and in), one more when a typed digit needs it.

    ``rounded`` keeps the least number of decimals, for a length that was computed.
    """
    shown = [units.shown(length, "length") for length in metres]
    least = _LEAST_DECIMALS.get(units.length, 2)
    exact = rounded or all(abs(round(x, least) - x) < _TYPED for x in shown)
    return [plain(x, least if exact else least + 1) for x in shown]


def letter(force: float) -> str:
    """Return T for tension, C for compression, nothing for no force."""
    return "T" if force > 0 else "C" if force < 0 else ""


def bar_force(force: float, units: UnitSystem, decimals: int) -> str:
    """Return a bar's force as it is written along it: 212 T, 88 C, 0."""
    text = f"{abs(units.shown(force, 'force')):.{decimals}f}"
    return f"{text} {letter(force)}" if float(text) else "0"


def effect_value(effect: Effect, value: float, units: UnitSystem) -> str:
    """Return an effect's value with sign, unit and letter: −88.0 kN C, 12.4 mm."""
    quantity = quantity_of(effect)
    shown, unit = units.shown(value, quantity), units.symbol(quantity)
    text = plain(shown, min(figures(abs(shown), 4), 3))
    return f"{text} {unit} {letter(value) if effect.kind == 'axial' else ''}".rstrip()


def ordinate_factor(effect: Effect, units: UnitSystem) -> float:
    """Return by what an ordinate per newton is multiplied to be shown: force per force, or e.g. mm per kN."""
    return units.factor("force") / units.factor("section") if effect.unit == "m" else 1.0


def ordinate_decimals(line: InfluenceLine, units: UnitSystem) -> int:
    """Return how many decimals a line's ordinates are written with."""
    largest = float(abs(line.ordinates).max(initial=0.0)) * ordinate_factor(line.effect, units)
    return max(3, figures(largest)) if line.effect.unit != "m" else figures(largest)


def ordinate_unit(effect: Effect, units: UnitSystem) -> str:
    """Return the unit of an ordinate: kN/kN, or mm/kN for a deflection."""
    return f"{units.section if effect.unit == 'm' else units.force}/{units.force}"


def sides(effect: Effect, truss: Truss) -> tuple[str, str]:
    """Return what stands above and below an influence line's axis.

    A bearing pushes its joint along its bed's normal; on a level bed that is up.
    """
    if effect.kind == "axial":
        return "+T", "C"
    if effect.kind == "down":
        return "+down", "up"
    joint, _, axis = effect.name.rpartition(" ")
    if axis == "normal" and any(s.joint == joint and s.bed_angle == 0 for s in truss.supports):
        axis = "y"
    words = {"x": ("+right", "left"), "y": ("+up", "down"), "along": ("+along", "back")}
    return words.get(axis, ("+push", "pull"))


def origin(truss: Truss, units: UnitSystem) -> str:
    """Say where x = 0 is, and that left is the start of x."""
    at_zero = [name for name, (x, _) in truss.joints.items() if abs(x) < _AS_ONE]
    if at_zero:
        where = f"x = 0 at {' and '.join(at_zero)}"
    else:
        name, (x, _) = min(truss.joints.items(), key=lambda item: item[1][0])
        where = f"{name} stands at x = {lengths([x], units)[0]} {units.length}"
    return f"{where}; left = start of x"
