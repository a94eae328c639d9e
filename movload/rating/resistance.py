"""From a typed strength to what a level of a method lets a part carry, step by step."""

from __future__ import annotations

import math
from typing import TYPE_CHECKING, Final

from movload.errors import MissingDataError, UnknownNameError, nearest_name
from movload.rating.factor_sets import capacity_factor, condition_factor
from movload.strength.strength import Step, Strength

if TYPE_CHECKING:
    from movload.bridge.strengths import TypedStrength
    from movload.rating.factor_sets import FactorSet, Level

SENSES: Final = {
    "axial": ("tension", "compression"),
    "moment": ("moment", "hogging"),
    "shear": ("shear", "shear"),
}
"""The sense of a row's positive and of its negative side, by the row's kind; other kinds have no strength."""
UNRATED: Final = Strength(math.nan, ())
_UNITS: Final = {"tension": "N", "compression": "N", "shear": "N", "moment": "N m", "hogging": "N m"}


def resistance(typed: TypedStrength, sense: str, method: FactorSet, level: Level, *, subject: str) -> Strength:
    """Return what a part may carry in one sense at one level; nan where nothing was typed that the method can use.

    C = max(phi_c phi_s, 0.85) phi Rn for a nominal strength at a strength limit state, with phi_s = 1 in shear;
    C = phi Rn at other levels; a reduced strength holds phi already and a permitted one its whole margin.

    Parameters
    ----------
    subject
        What errors call the part.

    Raises
    ------
    MissingDataError, UnknownNameError
        The level asks for a condition or a system that nobody has typed, or that the method does not know.
    """
    unit = _UNITS[sense]
    for footing in method.strengths:
        value = typed.on("permits" if footing == "permitted" else footing).get(sense)
        if value is None:
            continue
        if footing == "permitted":
            return Strength(value, (Step("R", f"permitted {sense}, as typed", value, unit, "bridge file"),))
        if footing == "reduced":
            return Strength(value, (Step("C", f"phi Rn in {sense}, reduced as typed", value, unit, "bridge file"),))
        return _from_nominal(typed, sense, method, level, subject)
    return UNRATED


def _from_nominal(typed: TypedStrength, sense: str, method: FactorSet, level: Level, subject: str) -> Strength:
    """Return a nominal strength with the level's factors on it."""
    nominal, unit = typed.nominal[sense], _UNITS[sense]
    phi = level.resistance.get(sense, 1.0)
    both, said = reduction(typed, sense, method, level, subject)
    value = both * phi * nominal
    steps = (
        Step("Rn", f"nominal {sense}, as typed", nominal, unit, "bridge file"),
        Step("phi", f"resistance factor, {sense}", phi, "-", method.title),
        *said,
        Step("C", "k phi Rn" if said else "phi Rn", value, unit, method.title),
    )
    return Strength(value, steps)


def reduction(
    typed: TypedStrength, sense: str, method: FactorSet, level: Level, subject: str
) -> tuple[float, tuple[Step, ...]]:
    """Return k = max(phi_c phi_s, 0.85), phi_s = 1 in shear, and its steps; 1 and none where the level has no such.

    Raises
    ------
    MissingDataError, UnknownNameError
        The level asks for a condition or a system that nobody has typed, or that the method does not know.
    """
    if not level.condition_factors:
        return 1.0, ()
    of_condition = _of_condition(typed, method, subject)
    of_system = 1.0 if sense == "shear" else _of_system(typed, method, subject)
    both = capacity_factor(of_condition, of_system)
    measured = ", loss measured" if typed.measured else ""
    system = "1 in shear" if sense == "shear" else f'system "{typed.system}"'
    return both, (
        Step("phi_c", f'condition "{typed.condition}"{measured}', of_condition, "-", method.title),
        Step("phi_s", system, of_system, "-", method.title),
        Step("k", "max(phi_c phi_s, 0.85)", both, "-", method.title),
    )


def _of_condition(typed: TypedStrength, method: FactorSet, subject: str) -> float:
    """Return phi_c of a part."""
    if not typed.condition:
        raise MissingDataError(
            f'the condition of {subject} is needed ({", ".join(method.condition)}) by "{method.title}"',
            place=_place(typed, "condition"),
        )
    try:
        return condition_factor(method, typed.condition, measured=typed.measured)
    except UnknownNameError as error:
        place = _place(typed, "condition")
        raise UnknownNameError(error.rule, place=place, nearest=error.nearest) from None


def _place(typed: TypedStrength, word: str) -> str:
    """Return where in the file a word about a part stands."""
    return f"{typed.place}.{word}" if typed.place else word


def _of_system(typed: TypedStrength, method: FactorSet, subject: str) -> float:
    """Return phi_s of a part."""
    known = ", ".join(f'"{name}"' for name in method.system)
    if not typed.system:
        raise MissingDataError(
            f'the kind of system of {subject} is needed ({known}) by "{method.title}"',
            place=_place(typed, "system"),
        )
    if typed.system not in method.system:
        near = nearest_name(typed.system, method.system)
        raise UnknownNameError(
            f'"{typed.system}" of {subject} is not one of {known}', place=_place(typed, "system"), nearest=near
        )
    return method.system[typed.system]
