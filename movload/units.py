r"""Quantities as people write them, to SI and back: ``"12'-6 1/2\""``, ``"18 kip"``, ``"0.64 klf"``, ``"9.5 t"``.

Inside movload everything is SI: m, N, N/m, Pa, m2, kg/m3. A weight typed as a mass (kg, t, short ton) becomes a force
with standard gravity. ``ton`` alone is refused, because three different weights carry that name.

References
----------
NIST Special Publication 811 (2008), Appendix B.8: exact values of the foot, pound and standard gravity (from memory).
"""

from __future__ import annotations

import math
import re
from dataclasses import dataclass
from types import MappingProxyType
from typing import TYPE_CHECKING, Final, Literal

from movload.errors import InputError, UnknownNameError, nearest_name

if TYPE_CHECKING:
    from collections.abc import Mapping

Quantity = Literal[
    "length", "section", "force", "line load", "pressure", "moment", "area", "stress", "density", "stiffness", "speed",
    "fraction", "section modulus", "torsion", "warping",
]  # fmt: skip

GRAVITY: Final = 9.80665  # m/s2, standard
_POUND: Final = 0.45359237  # kg
_POUND_FORCE: Final = _POUND * GRAVITY  # N
_FOOT: Final = 0.3048  # m
_INCH: Final = 0.0254  # m

_LENGTH: Final = {
    "m": 1.0, "cm": 0.01, "mm": 0.001, "km": 1000.0, "ft": _FOOT, "'": _FOOT, "in": _INCH, '"': _INCH,
}  # fmt: skip
_FORCE: Final = {
    "N": 1.0, "kN": 1e3, "MN": 1e6, "lb": _POUND_FORCE, "lbf": _POUND_FORCE, "kip": 1e3 * _POUND_FORCE,
    "kg": GRAVITY, "t": 1e3 * GRAVITY, "tonne": 1e3 * GRAVITY,
    "short ton": 2e3 * _POUND_FORCE, "long ton": 2240 * _POUND_FORCE,
}  # fmt: skip
_PER_LENGTH: Final = {
    f"{force}/{length}": newton / metre
    for force, newton in _FORCE.items()
    for length, metre in _LENGTH.items()
    if length in {"m", "cm", "mm", "ft", "in"}
}
_AREA: Final = {
    f"{length}{square}": metre**2
    for length, metre in _LENGTH.items()
    if length in {"m", "cm", "mm", "ft", "in"}
    for square in ("2", "²")
}
_POWERS: Final = {
    power: {
        f"{length}{sign}": metre**power
        for length, metre in _LENGTH.items()
        if length in {"m", "cm", "mm", "ft", "in"}
        for sign in (str(power), raised)
    }
    for power, raised in ((3, "³"), (4, "⁴"), (6, "⁶"))
}
_PER_AREA: Final = {f"{force}/{area}": newton / m2 for force, newton in _FORCE.items() for area, m2 in _AREA.items()}
_MOMENT: Final = {
    f"{force}{between}{length}": newton * metre
    for force, newton in _FORCE.items()
    for length, metre in _LENGTH.items()
    if length in {"m", "cm", "mm", "ft", "in"}
    for between in (" ", "-", "*", "")
}
_SPEED: Final = {"m/s": 1.0, "km/h": 1 / 3.6, "mph": 1609.344 / 3600}
_STRESS: Final = _PER_AREA | {
    "Pa": 1.0, "kPa": 1e3, "MPa": 1e6, "GPa": 1e9,
    "psi": _POUND_FORCE / _INCH**2, "ksi": 1e3 * _POUND_FORCE / _INCH**2, "psf": _POUND_FORCE / _FOOT**2,
}  # fmt: skip
_DENSITY: Final = {
    "kg/m3": 1.0, "kg/m³": 1.0, "t/m3": 1e3, "lb/ft3": _POUND / _FOOT**3, "pcf": _POUND / _FOOT**3,
    "kN/m3": 1e3 / GRAVITY, "kN/m³": 1e3 / GRAVITY,
}  # fmt: skip
_TABLES: Final[Mapping[Quantity, Mapping[str, float]]] = MappingProxyType(
    {
        "length": _LENGTH,
        "section": _LENGTH,
        "force": _FORCE,
        "line load": _PER_LENGTH | {"klf": 1e3 * _POUND_FORCE / _FOOT, "plf": _POUND_FORCE / _FOOT},
        "pressure": _PER_AREA | {"kPa": 1e3, "Pa": 1.0, "psf": _POUND_FORCE / _FOOT**2},
        "moment": _MOMENT,
        "speed": _SPEED,
        "area": _AREA,
        "stress": _STRESS,
        "density": _DENSITY,
        "stiffness": _PER_LENGTH,
        "fraction": {"%": 0.01, "": 1.0},
        "section modulus": _POWERS[3],
        "torsion": _POWERS[4],
        "warping": _POWERS[6],
    }
)
_AS_WORDS: Final[Mapping[Quantity, str]] = MappingProxyType(
    {
        "section": "a length",
        "area": "an area",
        "line load": "a load per length",
        "stiffness": "a force per length",
        "pressure": "a load per area",
        "torsion": "a torsion constant",
        "warping": "a warping constant",
    }
)

_NUMBER: Final = r"[-+]?(?:\d+(?:\.\d*)?|\.\d+)(?:[eE][-+]?\d+)?"
_FRACTION: Final = r"(?:\d+[ -])?\d+/\d+"
_PLAIN: Final = re.compile(rf"\s*(?P<value>{_NUMBER})\s*(?P<unit>.*?)\s*")
_FEET_INCHES: Final = re.compile(
    rf"\s*(?P<sign>-?)(?P<feet>\d+(?:\.\d*)?)\s*(?:'|ft)\s*-?\s*"
    rf"(?P<inches>{_FRACTION}|\d+(?:\.\d*)?)\s*(?:\"|in)\s*"
)
_INCHES: Final = re.compile(rf"\s*(?P<sign>-?)(?P<inches>{_FRACTION})\s*(?:\"|in)\s*")


def to_si(text: str, quantity: Quantity) -> float:
    r"""Return a quantity written with its unit as an SI number.

    Parameters
    ----------
    text
        A number and a unit, or feet and inches.
    quantity
        What is asked for; a unit of another kind is refused.

    Raises
    ------
    InputError
        No number, no unit, a bare ``ton``, or a unit of another kind.
    UnknownNameError
        A unit that is not known; the nearest one is named.

    Examples
    --------
    >>> round(to_si("12'-6 1/2\"", "length"), 6)
    3.8227
    >>> to_si("62 kN", "force")
    62000.0
    """
    if quantity in {"length", "section"}:
        metres = _feet_and_inches(text)
        if metres is not None:
            return metres
    match = _PLAIN.fullmatch(text)
    if match is None:
        raise InputError(f'"{text}" is not a number with a unit; {_article(quantity)} is asked for')
    number = float(match["value"])
    if not math.isfinite(number):
        raise InputError(f'"{text}" is too large a number')
    return number * unit_factor(match["unit"], quantity, text)


def unit_factor(unit: str, quantity: Quantity, text: str = "") -> float:
    """Return how many SI units one ``unit`` is; ``text`` is quoted in errors."""
    table = _TABLES[quantity]
    spelled = _spelled(unit)
    if spelled in table:
        return table[spelled]
    quoted = f'"{text or unit}"'
    if spelled.rsplit("/", 1)[0] in {"ton", "T"}:
        raise InputError(f'{quoted}: "{unit}" can mean three weights; write t (tonne), short ton or long ton')
    if not unit:
        raise InputError(f"{quoted} has no unit; {_article(quantity)} is asked for, e.g. {_example(quantity)}")
    other = next((kind for kind, known in _TABLES.items() if spelled in known), None)
    if other is not None:
        raise InputError(f"{quoted} is {_article(other)}; {_article(quantity)} is asked for, e.g. {_example(quantity)}")
    raise UnknownNameError(
        f'{quoted}: unit "{unit}" is not known for {_article(quantity)}', nearest=nearest_name(unit, table)
    )


def _spelled(unit: str) -> str:
    """Return the unit in the spelling of the tables: one space, no plural, no dots."""
    spelled = re.sub(r"\s*/\s*", "/", re.sub(r"\s+", " ", unit.strip().rstrip(".")))
    plural = {"kips": "kip", "tons": "ton", "tonnes": "tonne", "lbs": "lb", "feet": "ft", "foot": "ft", "inch": "in"}
    plural |= {"inches": "in", "short tons": "short ton", "long tons": "long ton", "metres": "m", "metre": "m"}
    head, slash, tail = spelled.partition("/")
    return plural.get(head, head) + slash + tail


def _feet_and_inches(text: str) -> float | None:
    """Return metres for 12'-6 1/2", 12 ft 6 in or 6 1/2"; None for any other text."""
    match = _FEET_INCHES.fullmatch(text)
    feet = float(match["feet"]) if match else 0.0
    match = match or _INCHES.fullmatch(text)
    if match is None:
        return None
    metres = feet * _FOOT + _mixed_number(match["inches"], text) * _INCH
    return -metres if match["sign"] else metres


def _mixed_number(text: str, whole_text: str) -> float:
    """Return 6.5 for "6 1/2" and for "6.5"."""
    if "/" not in text:
        return float(text)
    *whole, fraction = re.split(r"[ -]", text)
    above, below = fraction.split("/")
    if int(below) == 0:
        raise InputError(f'"{whole_text}" divides by zero')
    return float(whole[0] if whole else 0) + int(above) / int(below)


def _article(quantity: Quantity) -> str:
    """Return the quantity in words with its article."""
    return _AS_WORDS.get(quantity, f"a {quantity}")


def _example(quantity: Quantity) -> str:
    """Return one way of writing the quantity."""
    examples: dict[Quantity, str] = {
        "length": '"4.2 m" or "12\'-6 1/2\\""', "section": '"300 mm" or "12 in"', "force": '"62 kN" or "18 kip"',
        "line load": '"9 kN/m" or "0.64 klf"', "area": '"2400 mm2" or "3.75 in2"', "stress": '"200 GPa" or "29000 ksi"',
        "density": '"7850 kg/m3" or "490 pcf"', "stiffness": '"50 kN/mm" or "280 kip/in"', "fraction": '"30 %"',
        "pressure": '"1.2 kN/m2" or "25 psf"', "moment": '"85 kN m" or "62 kip ft"', "speed": '"8 km/h" or "5 mph"',
        "section modulus": '"154000 mm3" or "9.4 in3"', "torsion": '"42000 mm4" or "0.1 in4"',
        "warping": '"3.1e9 mm6" or "11.5 in6"',
    }  # fmt: skip
    return examples[quantity]


_METRIC: Final = frozenset({"m", "cm", "mm", "km"})


@dataclass(frozen=True, slots=True)
class UnitSystem:
    """The units a file is written in; its results are shown in the same.

    ``length`` is for geometry, ``force`` for loads, ``section`` for the small lengths of cross-sections. Other units
    follow: line load = force/length, area = section squared, stress = force/area, stiffness = force/section. A density
    is kg/m3 beside metric lengths and lb/ft3 beside feet and inches.
    """

    length: str = "m"
    force: str = "kN"
    section: str = "mm"

    def __post_init__(self) -> None:
        """Refuse a unit of the wrong kind before anything is read with it."""
        for name, quantity in (("length", "length"), ("force", "force"), ("section", "section")):
            try:
                unit_factor(getattr(self, name), quantity)  # type: ignore[arg-type]  # the three are quantities
            except InputError as error:
                raise error.at(f"units.{name}") from None
            object.__setattr__(self, name, _spelled(getattr(self, name)))

    @classmethod
    def beside(cls, length: str, *, force: str = "", section: str = "") -> UnitSystem:
        """Return the units that go with a length: kN and mm beside metres, kip and in beside feet, where not given.

        Raises
        ------
        InputError
            A unit of another kind, or none that is known.

        Examples
        --------
        >>> UnitSystem.beside("ft", force="kN")
        UnitSystem(length='ft', force='kN', section='in')
        """
        common_force, common_section = ("kN", "mm") if _spelled(length) in _METRIC else ("kip", "in")
        return cls(length, force or common_force, section or common_section)

    @property
    def is_us(self) -> bool:
        """Whether lengths are feet or inches: what has no unit of its own in the file then follows US custom."""
        return self.length not in _METRIC

    def symbol(self, quantity: Quantity) -> str:
        """Return the unit's symbol for a quantity, e.g. ``"kN/m"``."""
        symbols: dict[Quantity, str] = {
            "length": self.length, "section": self.section, "force": self.force,
            "line load": f"{self.force}/{self.length}", "area": f"{self.section}2",
            "stress": f"{self.force}/{self.section}2", "stiffness": f"{self.force}/{self.section}",
            "density": "lb/ft3" if self.is_us else "kg/m3", "fraction": "",
            "pressure": f"{self.force}/{self.length}2", "moment": f"{self.force} {self.length}",
            "speed": "mph" if self.is_us else "km/h", "section modulus": f"{self.section}3",
            "torsion": f"{self.section}4", "warping": f"{self.section}6",
        }  # fmt: skip
        return symbols[quantity]

    def factor(self, quantity: Quantity) -> float:
        """Return how many SI units one of this system's units is."""
        force, length, section = (
            _FORCE[_spelled(self.force)],
            _LENGTH[_spelled(self.length)],
            _LENGTH[_spelled(self.section)],
        )
        factors: dict[Quantity, float] = {
            "length": length, "section": section, "force": force, "line load": force / length,
            "area": section**2, "stress": force / section**2, "stiffness": force / section,
            "density": _DENSITY[self.symbol("density")], "fraction": 1.0,
            "pressure": force / length**2, "moment": force * length, "speed": _SPEED[self.symbol("speed")],
            "section modulus": section**3, "torsion": section**4, "warping": section**6,
        }  # fmt: skip
        return factors[quantity]

    def shown(self, value: float, quantity: Quantity) -> float:
        """Return an SI value as a number in this system."""
        return value / self.factor(quantity)


SI_UNITS: Final = UnitSystem("m", "N", "m")
