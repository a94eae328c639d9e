"""Timber bars and beams by reference stresses and factors as typed: National Design Specification for Wood, 2018.

Sawn timber (Table 4.3.1) and glued laminated timber (5.3.1) of rectangular section, allowable stress design. phi is the
level's margin by sense (1 at the standard's own level). Every adjustment factor is typed; none counts as 1 unsaid. The
load duration factor is that of the shortest load in the combination (2.3.2), and permanent load alone must pass at 0.9:
``in_combination`` gives both. Not covered: round, tapered, spaced and built-up columns, notches, load and resistance
factor design, forces that act together, bearing across the grain.

References
----------
American Wood Council, NDS for Wood Construction, 2018: C_P of 3.7.1 read; every other equation, table and limit from
memory.
"""

from __future__ import annotations

import math
from dataclasses import dataclass
from typing import TYPE_CHECKING, Final

from movload.errors import InputError, MissingDataError, UnknownNameError, nearest_name
from movload.strength.strength import Step, Strength

if TYPE_CHECKING:
    from collections.abc import Callable, Iterable, Mapping

    from movload.bridge.material import Timber

SOURCE: Final = "NDS 2018"
DURATIONS: Final = {
    "permanent": 0.9, "ten years": 1.0, "two months": 1.15, "seven days": 1.25, "ten minutes": 1.6, "impact": 2.0,
}  # fmt: skip
"""C_D of Table 2.3.2 by the whole time at full load."""
_TREATED: Final = 1.6  # greatest C_D of timber treated under pressure, Table 2.3.2
_GREATEST: Final = 2.0  # no factor of the standard is greater: 85 typed for 85 % is caught
_TABLES: Final = {"sawn": "Table 4.3.1", "glued laminated": "Table 5.3.1"}
_FACTORS: Final = {
    "sawn": {
        "tension": ("CM", "Ct", "CF", "Ci"),
        "compression": ("CM", "Ct", "CF", "Ci"),
        "bending": ("CM", "Ct", "CF", "Cfu", "Ci", "Cr"),
        "shear": ("CM", "Ct", "Ci"),
        "stability": ("CM", "Ct", "Ci", "CT"),
    },
    "glued laminated": {
        "tension": ("CM", "Ct"),
        "compression": ("CM", "Ct"),
        "bending": ("CM", "Ct", "CV", "Cfu", "Cc", "CI"),
        "shear": ("CM", "Ct", "Cvr"),
        "stability": ("CM", "Ct"),
    },
}
_NOT_IN_FB_STAR: Final = ("Cfu", "CV")  # 3.3.3.8
_EVENNESS: Final = {"sawn": 0.8, "glued laminated": 0.9}  # c of 3.7.1.5
_SLENDEREST: Final = 50.0  # le/d of a column, 3.7.1.4, and R_B of a beam, 3.3.3.7


@dataclass(frozen=True, slots=True, kw_only=True)
class Post:
    """A column: ``net`` and mid-length ``area`` [m2], ``depth`` (up) and ``breadth`` (across) [m], K L about x and y [m].

    Bending about x is resisted by the depth.
    """

    area: float
    net: float
    depth: float
    breadth: float
    kl_x: float
    kl_y: float

    def __post_init__(self) -> None:
        """Refuse what no column can be."""
        _require_positive(**{name: getattr(self, name) for name in self.__slots__})


@dataclass(frozen=True, slots=True, kw_only=True)
class Joist:
    """A beam: ``depth`` and ``breadth`` [m]; length ``unbraced`` of its edge in compression [m].

    ``unbraced`` is None only where that edge is held all along and the ends cannot turn over (3.3.3.3).
    """

    depth: float
    breadth: float
    unbraced: float | None

    def __post_init__(self) -> None:
        """Refuse what no beam can be."""
        _require_positive(depth=self.depth, breadth=self.breadth)
        if self.unbraced is not None:
            _require_positive(unbraced=self.unbraced)


def duration_factor(durations: Iterable[str], *, treated: bool) -> float:
    """Return C_D of the shortest load in a combination (2.3.2); ``treated``: under pressure, with preservative or salts.

    Raises
    ------
    UnknownNameError
        A duration that Table 2.3.2 does not have.
    MissingDataError
        No load at all.
    """
    named = list(durations)
    for name in named:
        if name not in DURATIONS:
            known = ", ".join(DURATIONS)
            raise UnknownNameError(f'"{name}" is not one of {known}', nearest=nearest_name(name, DURATIONS))
    if not named:
        raise MissingDataError(f"{SOURCE} 2.3.2 needs the durations of the loads", place="durations")
    greatest = max(DURATIONS[name] for name in named)
    return min(greatest, _TREATED) if treated else greatest


def in_combination(rule: Callable[[float], Strength], duration: float) -> tuple[Strength, Strength]:
    """Return a strength under all loads, at C_D of the shortest, and under permanent load alone, at 0.9.

    ``rule`` gives the strength for a C_D. A rating is right only if the permanent effect alone is within the second.
    """
    return rule(duration), rule(DURATIONS["permanent"])


def tension(timber: Timber, net: float, duration: float, phi: Mapping[str, float]) -> Strength:
    """Return the strength Ft' A_net [N] in tension along the grain (3.8.1); ``net`` area [m2].

    Raises
    ------
    MissingDataError
        A reference stress, an adjustment factor or a phi that nobody has typed.
    UnknownNameError
        A factor that the standard does not put on that stress.
    InputError
        A factor above 2, C_D outside 0.9 to 2, a number that is not above 0.
    """
    _require_positive(net=net)
    steps = _adjusted(timber, "tension", duration)
    return _finished("T", "phi Ft' A_net (3.8.1)", _phi(phi, "tension") * steps[-1].value * net, steps)


def compression(timber: Timber, post: Post, duration: float, phi: Mapping[str, float]) -> Strength:
    """Return the strength [N] in compression along the grain: C_P Fc* A of the column (3.7.1), Fc* A_net (3.6.3).

    Raises
    ------
    InputError
        A column slenderer than le/d = 50; and as ``tension``.
    """
    steps = _adjusted(timber, "compression", duration)
    stress, modulus = steps[-1].value, _modulus(timber, steps)
    slenderness = max(post.kl_x / post.depth, post.kl_y / post.breadth)
    _require_stocky(slenderness, "le/d", "3.7.1.4")
    evenness = _EVENNESS[timber.product]
    euler = 0.822 * modulus / slenderness**2
    reduction = column_factor(euler / stress, evenness)
    factor = _phi(phi, "compression")
    buckling, crushing = factor * reduction * stress * post.area, factor * stress * post.net
    steps += [
        _step("le/d", "the greater of Kl_x/depth and Kl_y/breadth (3.7.1.3)", slenderness, "-"),
        _step("FcE", "0.822 Emin' / (le/d)^2 (3.7.1.5)", euler, "Pa"),
        _step("CP", f"(3.7-1), c = {evenness:g}", reduction, "-"),
        _step("Pn", "phi Fc* A_net (3.6.3)", crushing, "N"),
    ]
    said = "crushing of the net section, phi Fc* A_net (3.6.3)" if crushing < buckling else "phi Fc* CP A (3.7.1)"
    return _finished("P", f"{said} governs", min(buckling, crushing), steps)


def column_factor(ratio: float, evenness: float) -> float:
    """Return C_P (3.7-1) = b - sqrt(b^2 - a/c), b = (1 + a)/(2c); ``ratio`` a = FcE/Fc*, ``evenness`` c."""
    half = (1.0 + ratio) / (2.0 * evenness)
    return (ratio / evenness) / (half + math.sqrt(half**2 - ratio / evenness))  # without cancellation


def bending(timber: Timber, joist: Joist, duration: float, phi: Mapping[str, float], sense: str = "moment") -> Strength:
    """Return the strength Fb' S [N m] in bending about x (3.3.1); glued timber takes the lesser of C_L and C_V (5.3.6).

    ``sense`` is the phi asked for, "moment" or "hogging".

    Raises
    ------
    InputError
        A beam slenderer than R_B = 50; and as ``tension``.
    """
    steps = _adjusted(timber, "bending", duration)
    factors = timber.factors["bending"]
    flat, volume = factors["Cfu"], factors.get("CV", 1.0)
    if volume > 1.0:
        raise InputError(f"is 1 at most ({SOURCE} 5.3.6), got {volume:g}", place="factors.bending.CV")
    star = steps[-1].value
    of_buckling = _beam_factor(timber, joist, star, steps)
    stress = star * flat * min(of_buckling, volume)
    modulus = joist.breadth * joist.depth**2 / 6.0
    steps += [
        _step("CL", "lateral stability (3.3-6)", of_buckling, "-"),
        _step("Fb'", f"Fb* Cfu min(CL, CV), Cfu {flat:g}, CV {volume:g}", stress, "Pa"),
        _step("S", "b d^2 / 6 (3.3-4)", modulus, "m3"),
    ]
    said = (
        "volume (CV)" if volume < of_buckling else "lateral stability (CL)" if of_buckling < 1.0 else "bending stress"
    )
    return _finished("M", f"phi Fb' S (3.3.1), {said} governs", _phi(phi, sense) * stress * modulus, steps, unit="N m")


def _beam_factor(timber: Timber, joist: Joist, star: float, steps: list[Step]) -> float:
    """Return C_L (3.3-6) and write its steps; 1 for a beam no deeper than broad or held all along."""
    if joist.unbraced is None or joist.depth <= joist.breadth:
        return 1.0
    length = effective_length(joist.unbraced, joist.depth)
    slenderness = math.sqrt(length * joist.depth / joist.breadth**2)
    _require_stocky(slenderness, "R_B", "3.3.3.7")
    ratio = 1.20 * _modulus(timber, steps) / slenderness**2 / star
    steps += [
        _step("le", "any loading, Table 3.3.3 footnote 1", length, "m"),
        _step("RB", "sqrt(le d / b^2) (3.3-5)", slenderness, "-"),
        _step("FbE/Fb*", "1.20 Emin' / RB^2 / Fb* (3.3.3.8)", ratio, "-"),
    ]
    return column_factor(ratio, 0.95)  # (3.3-6) is (3.7-1) with c = 0.95


def effective_length(unbraced: float, depth: float) -> float:
    """Return le of a beam under any loading, Table 3.3.3 footnote 1: 2.06, 1.63 + 3d or 1.84 times the unbraced length."""
    ratio = unbraced / depth
    if ratio < 7.0:
        return 2.06 * unbraced
    return 1.63 * unbraced + 3.0 * depth if ratio <= 14.3 else 1.84 * unbraced


def shear(timber: Timber, joist: Joist, duration: float, phi: Mapping[str, float]) -> Strength:
    """Return the strength 2/3 Fv' b d [N] of a beam without notches (3.4-2); loads near a bearing count in full.

    Raises
    ------
    MovloadError
        As ``tension``.
    """
    steps = _adjusted(timber, "shear", duration)
    value = _phi(phi, "shear") * 2.0 / 3.0 * steps[-1].value * joist.breadth * joist.depth
    return _finished("V", "phi 2/3 Fv' b d (3.4-2)", value, steps)


def _adjusted(timber: Timber, use: str, duration: float) -> list[Step]:
    """Return the steps to a stress with every factor but those of stability, shape and volume on it."""
    if not DURATIONS["permanent"] <= duration <= DURATIONS["impact"]:
        raise InputError(f"C_D is 0.9 to 2 ({SOURCE} Table 2.3.2), got {duration:g}", place="duration")
    value, steps = _reference(timber, use), []
    steps.append(_step(f"F {use}", "reference stress, as typed", value, "Pa"))
    steps.append(_step("CD", "of the shortest load (2.3.2)", duration, "-"))
    kept = {symbol: factor for symbol, factor in _factors(timber, use).items() if symbol not in _NOT_IN_FB_STAR}
    steps += [_step(symbol, f"{_TABLES[timber.product]}, as typed", factor, "-") for symbol, factor in kept.items()]
    star = value * duration * math.prod(kept.values())
    return [*steps, _step(f"F {use} *", f"F CD {' '.join(kept)}", star, "Pa")]


def _modulus(timber: Timber, steps: list[Step]) -> float:
    """Return E_min' [Pa] and write its step; load duration does not touch it."""
    factors = _factors(timber, "stability")
    value = _reference(timber, "stability") * math.prod(factors.values())
    steps.append(
        _step("Emin'", "Emin " + " ".join(f"{name} {factor:g}" for name, factor in factors.items()), value, "Pa")
    )
    return value


def _reference(timber: Timber, use: str) -> float:
    """Return a reference stress."""
    if use not in timber.stresses:
        raise MissingDataError(f"{SOURCE} needs the reference value for {use}", place=f"stresses.{use}")
    return timber.stresses[use]


def _factors(timber: Timber, use: str) -> Mapping[str, float]:
    """Return the factors typed for a stress, once they are all that the standard asks for and no others."""
    needed, typed = _FACTORS[timber.product][use], timber.factors.get(use, {})
    table = f"{SOURCE} {_TABLES[timber.product]}"
    for symbol, factor in typed.items():
        place = f"factors.{use}.{symbol}"
        if symbol not in needed:
            known = ", ".join(needed)
            raise UnknownNameError(f"{table} has {known} here", place=place, nearest=nearest_name(symbol, needed))
        if factor > _GREATEST:
            raise InputError(f"no factor of {table} is above {_GREATEST:g}, got {factor:g}", place=place)
    for symbol in needed:
        if symbol not in typed:
            rule = f"{table} asks for it; type 1 only where it is 1"
            raise MissingDataError(rule, place=f"factors.{use}.{symbol}")
    return typed


def _require_positive(**values: float) -> None:
    """Refuse what is not a finite number above 0."""
    for name, value in values.items():
        if not (math.isfinite(value) and value > 0.0):
            raise InputError(f"must be a finite number above 0, got {value:g}", place=name)


def _require_stocky(slenderness: float, symbol: str, article: str) -> None:
    """Refuse what is slenderer than the standard allows."""
    if slenderness > _SLENDEREST:
        raise InputError(f"{SOURCE} {article}: {symbol} up to {_SLENDEREST:g} is covered, got {slenderness:.3g}")


def _phi(phi: Mapping[str, float], name: str) -> float:
    """Return the level's margin by sense; one that nobody gave is not 1."""
    if name not in phi:
        raise MissingDataError(f"{SOURCE} needs the level's margin by this name", place=f"resistance.{name}")
    return phi[name]


def _step(symbol: str, equation: str, value: float, unit: str) -> Step:
    """Return a step of this standard."""
    return Step(symbol, equation, value, unit, SOURCE)


def _finished(symbol: str, equation: str, value: float, steps: list[Step], *, unit: str = "N") -> Strength:
    """Return a strength with its last step."""
    return Strength(value, (*steps, _step(symbol, equation, value, unit)))
