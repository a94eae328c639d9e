"""Timber bars and beams by reference stresses and factors as typed: National Design Specification for Wood, 2018.

Rectangular sections of sawn (Table 4.3.1) and glued laminated timber (5.3.1), allowable stress design; phi is the
level's margin by sense, 1 at the standard's own level. Every adjustment factor is typed, none counts as 1 unsaid.
C_D is that of the shortest load in a combination (2.3.2), and permanent load alone must pass at 0.9.

Not covered: round, tapered, spaced and built-up columns, notches, bearing across the grain, forces that act together,
connections, load and resistance factor design.

References
----------
American Wood Council, NDS for Wood Construction, 2018: C_P of 3.7.1 read; every other equation, table and limit from
memory.
"""

from __future__ import annotations

import math
from dataclasses import dataclass
from functools import partial
from typing import TYPE_CHECKING, Final

from movload.errors import InputError, MissingDataError, UnknownNameError, nearest_name
from movload.strength.aashto_lrfd import least
from movload.strength.strength import Step
from movload.strength.warnings import factor_of, require_positive

if TYPE_CHECKING:
    from collections.abc import Callable, Iterable, Mapping

    from movload.bridge.material import Timber
    from movload.strength.aashto_floor import Sense
    from movload.strength.strength import Strength

TITLE: Final = "NDS 2018"
DURATIONS: Final = {
    "permanent": 0.9, "ten years": 1.0, "two months": 1.15, "seven days": 1.25, "ten minutes": 1.6, "impact": 2.0,
}  # fmt: skip
"""C_D of Table 2.3.2 by how long the full load stands in all."""
_TREATED: Final = 1.6  # greatest C_D of timber treated under pressure, Table 2.3.2
GREATEST: Final = 2.0  # no factor of the standard is greater: 85 typed for 85 % is caught
_TABLES: Final = {"sawn": "Table 4.3.1", "glued laminated": "Table 5.3.1"}
FACTORS: Final[Mapping[str, Mapping[str, tuple[str, ...]]]] = {
    "sawn": {
        "tension": ("CM", "Ct", "CF", "Ci"), "compression": ("CM", "Ct", "CF", "Ci"), "shear": ("CM", "Ct", "Ci"),
        "bending": ("CM", "Ct", "CF", "Cfu", "Ci", "Cr"), "stability": ("CM", "Ct", "Ci", "CT"),
    },
    "glued laminated": {
        "tension": ("CM", "Ct"), "compression": ("CM", "Ct"), "shear": ("CM", "Ct", "Cvr"),
        "bending": ("CM", "Ct", "CV", "Cfu", "Cc", "CI"), "stability": ("CM", "Ct"),
    },
}  # fmt: skip
"""The factors that must be typed, by product and by what they adjust; C_D, C_P and C_L are found here."""
_step: Final = partial(Step, source=TITLE)
_NOT_IN_FB_STAR: Final = ("Cfu", "CV")  # 3.3.3.8
_EVENNESS: Final = {"sawn": 0.8, "glued laminated": 0.9}  # c of 3.7.1.5
_EVENNESS_OF_BEAMS: Final = 0.95  # 3.3-6 is 3.7-1 with it
_SLENDEREST: Final = 50.0  # le/d of a column, 3.7.1.4, and R_B of a beam, 3.3.3.7


@dataclass(frozen=True, slots=True, kw_only=True)
class Post:
    """A column: mid-length ``area``, least ``net`` area [m2]; ``depth`` (up), ``breadth``, K L about x and y [m]."""

    area: float
    net: float
    depth: float
    breadth: float
    kl_x: float
    kl_y: float

    def __post_init__(self) -> None:
        """Refuse what no column can be."""
        require_positive(**{name: getattr(self, name) for name in self.__slots__})


@dataclass(frozen=True, slots=True, kw_only=True)
class Joist:
    """A beam [m]; ``unbraced`` length of its edge in compression, None where held all along, ends too (3.3.3.3)."""

    depth: float
    breadth: float
    unbraced: float | None

    def __post_init__(self) -> None:
        """Refuse what no beam can be."""
        require_positive(depth=self.depth, breadth=self.breadth, unbraced=self.unbraced)


def duration_factor(durations: Iterable[str], *, treated: bool) -> float:
    """Return C_D of the shortest load in a combination (2.3.2); ``treated`` under pressure takes 1.6 at most.

    Raises MissingDataError for no load at all and UnknownNameError for a duration that Table 2.3.2 does not have.
    """
    named = list(durations)
    if not named:
        raise MissingDataError(f"{TITLE} 2.3.2 needs the duration of every load", place="durations")
    for name in named:
        if name not in DURATIONS:
            rule = f'"{name}" is not one of {", ".join(DURATIONS)}'
            raise UnknownNameError(rule, place="durations", nearest=nearest_name(name, DURATIONS))
    return min(max(DURATIONS[name] for name in named), _TREATED if treated else math.inf)


def in_combination(rule: Callable[[float], Strength], duration: float) -> tuple[Strength, Strength]:
    """Return a strength under all loads, at C_D of the shortest, and under permanent load alone, at 0.9.

    ``rule`` gives the strength for a C_D. A rating stands only where the permanent effect alone is within the second.
    """
    return rule(duration), rule(DURATIONS["permanent"])


def tension(timber: Timber, net: float, duration: float, phi: Mapping[str, float]) -> Strength:
    """Return phi Ft' A_net [N] in tension along the grain (3.8.1); ``net`` area [m2], ``duration`` C_D.

    Raises MissingDataError for a reference value, an adjustment factor or a phi that nobody has typed, UnknownNameError
    for a factor that the standard does not put there, InputError for one above 2 or a C_D outside 0.9 to 2.
    """
    require_positive(net=net)
    steps, factor = _adjusted(timber, "tension", duration), factor_of(phi, "tension")
    value = factor * steps[-1].value * net
    return least({"tension along the grain": value}, "T", [*steps, _step("T", "phi Ft' A_net (3.8.1)", value, "N")])


def compression(timber: Timber, post: Post, duration: float, phi: Mapping[str, float]) -> Strength:
    """Return [N] the lesser of phi C_P Fc* A of the column (3.7.1) and phi Fc* A_net (3.6.3), along the grain.

    Raises InputError for le/d above 50, and what ``tension`` raises.
    """
    steps, factor = _adjusted(timber, "compression", duration), factor_of(phi, "compression")
    stress, modulus = steps[-1].value, _modulus(timber, steps)
    slenderness = max(post.kl_x / post.depth, post.kl_y / post.breadth)
    _require_stocky(slenderness, "le/d", "3.7.1.4")
    evenness, euler = _EVENNESS[timber.product], 0.822 * modulus / slenderness**2
    reduction = column_factor(euler / stress, evenness)
    buckled, crushed = factor * reduction * stress * post.area, factor * stress * post.net
    steps += [
        _step("le/d", "greater of Kl_x/depth and Kl_y/breadth (3.7.1.3)", slenderness, "-"),
        _step("FcE", "0.822 Emin' / (le/d)^2 (3.7.1.5)", euler, "Pa"),
        _step("CP", f"(3.7-1), c = {evenness:g}", reduction, "-"),
        _step("P column", "phi Fc* CP A (3.7.1)", buckled, "N"),
        _step("P net", "phi Fc* A_net (3.6.3)", crushed, "N"),
    ]
    return least({"buckling": buckled, "crushing of the net section": crushed}, "P", steps)


def column_factor(ratio: float, evenness: float) -> float:
    """Return C_P (3.7-1) = b - sqrt(b^2 - a/c), b = (1 + a)/(2c); ``ratio`` a = FcE/Fc*, ``evenness`` c."""
    half = (1.0 + ratio) / (2.0 * evenness)
    return (ratio / evenness) / (half + math.sqrt(half**2 - ratio / evenness))  # the same without cancellation


def bending(
    timber: Timber, joist: Joist, duration: float, phi: Mapping[str, float], sense: Sense = "moment"
) -> Strength:
    """Return phi Fb' S [N m] in bending about x (3.3.1), phi by ``sense``; glued timber by min(C_L, C_V) (5.3.6).

    Raises InputError for R_B above 50, and what ``tension`` raises.
    """
    steps, factor = _adjusted(timber, "bending", duration), factor_of(phi, sense)
    flat, volume = timber.factors["bending"]["Cfu"], timber.factors["bending"].get("CV", 1.0)  # sawn: size by CF
    modulus = joist.breadth * joist.depth**2 / 6.0
    full = factor * steps[-1].value * flat * modulus
    stability = _beam_factor(timber, joist, steps)
    steps += [
        _step("CL", "lateral stability (3.3-6)", stability, "-"),
        _step("CV", "volume, 1 for sawn timber (5.3.6)", volume, "-"),
        _step("S", "b d^2 / 6 (3.3-4)", modulus, "m3"),
        _step("M full", f"phi Fb* Cfu S (3.3.1), Cfu {flat:g}", full, "N m"),
    ]
    states = {"bending stress": full, "lateral stability": stability * full, "volume": volume * full}
    return least(states, "M", steps)


def _beam_factor(timber: Timber, joist: Joist, steps: list[Step]) -> float:
    """Return C_L (3.3-6) and write its steps, Fb* being the last; 1 where no deeper than broad, or held all along."""
    if joist.unbraced is None or joist.depth <= joist.breadth:
        return 1.0
    star, length = steps[-1].value, effective_length(joist.unbraced, joist.depth)
    slenderness = math.sqrt(length * joist.depth) / joist.breadth
    _require_stocky(slenderness, "R_B", "3.3.3.7")
    ratio = 1.20 * _modulus(timber, steps) / slenderness**2 / star
    steps += [
        _step("le", "any loading, footnote 1 of Table 3.3.3", length, "m"),
        _step("RB", "sqrt(le d / b^2) (3.3-5)", slenderness, "-"),
        _step("FbE/Fb*", "1.20 Emin' / RB^2 / Fb* (3.3.3.8)", ratio, "-"),
    ]
    return column_factor(ratio, _EVENNESS_OF_BEAMS)


def effective_length(unbraced: float, depth: float) -> float:
    """Return le [m] of a beam under any loading, footnote 1 of Table 3.3.3: 2.06 l, 1.63 l + 3 d or 1.84 l by l/d."""
    if unbraced < 7.0 * depth:
        return 2.06 * unbraced
    return 1.63 * unbraced + 3.0 * depth if unbraced <= 14.3 * depth else 1.84 * unbraced


def shear(timber: Timber, joist: Joist, duration: float, phi: Mapping[str, float]) -> Strength:
    """Return phi 2/3 Fv' b d [N] of a beam without notches (3.4-2), loads near a bearing in full; raises as others."""
    steps, factor = _adjusted(timber, "shear", duration), factor_of(phi, "shear")
    value = factor * 2.0 / 3.0 * steps[-1].value * joist.breadth * joist.depth
    return least({"shear along the grain": value}, "V", [*steps, _step("V", "phi 2/3 Fv' b d (3.4-2)", value, "N")])


def _adjusted(timber: Timber, use: str, duration: float) -> list[Step]:
    """Return the steps to a stress with every factor on it but those of stability, shape and volume."""
    if not DURATIONS["permanent"] <= duration <= DURATIONS["impact"]:
        raise InputError(f"C_D is 0.9 to 2 ({TITLE} Table 2.3.2), got {duration:g}", place="duration")
    value, factors = _typed(timber, use)
    kept = {symbol: factor for symbol, factor in factors.items() if symbol not in _NOT_IN_FB_STAR}
    return [
        _step(f"F {use}", "reference stress, as typed", value, "Pa"),
        _step("CD", "of the shortest load (2.3.2)", duration, "-"),
        *(_step(symbol, f"{_TABLES[timber.product]}, as typed", factor, "-") for symbol, factor in kept.items()),
        _step(f"F* {use}", f"F CD {' '.join(kept)}", value * duration * math.prod(kept.values()), "Pa"),
    ]


def _modulus(timber: Timber, steps: list[Step]) -> float:
    """Return E_min' [Pa] and write its steps; load duration does not touch it."""
    value, factors = _typed(timber, "stability")
    steps.append(_step("Emin", "reference modulus, as typed", value, "Pa"))
    steps += [_step(symbol, f"{_TABLES[timber.product]}, on Emin", factor, "-") for symbol, factor in factors.items()]
    steps.append(_step("Emin'", f"Emin {' '.join(factors)}", value * math.prod(factors.values()), "Pa"))
    return steps[-1].value


def _typed(timber: Timber, use: str) -> tuple[float, Mapping[str, float]]:
    """Return a reference value [Pa] and its factors, once they are all that the standard asks for and no others."""
    needed, typed = FACTORS[timber.product][use], timber.factors.get(use, {})
    table = f"{TITLE} {_TABLES[timber.product]}"
    if use not in timber.stresses:
        raise MissingDataError(f"{TITLE} needs this reference value", place=f"stresses.{use}")
    for symbol in dict.fromkeys((*typed, *needed)):
        place = f"factors.{use}.{symbol}"
        if symbol not in needed:
            rule = f"{table} has {', '.join(needed)} here"
            raise UnknownNameError(rule, place=place, nearest=nearest_name(symbol, needed))
        if symbol not in typed:
            raise MissingDataError(f"{table} asks for it; type 1 only where it is 1", place=place)
        if typed[symbol] > GREATEST:
            raise InputError(f"no factor of {table} is above {GREATEST:g}, got {typed[symbol]:g}", place=place)
    return timber.stresses[use], typed


def _require_stocky(slenderness: float, symbol: str, article: str) -> None:
    """Refuse what is slenderer than the standard allows."""
    if slenderness > _SLENDEREST:
        raise InputError(f"is {_SLENDEREST:g} at most ({TITLE} {article}), got {slenderness:.1f}", place=symbol)
