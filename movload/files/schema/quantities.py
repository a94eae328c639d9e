"""Quantities as files hold them, and the base of every table.

A bare number is in the file's own units, which travel in the validation context; a string carries its own.
"""

from __future__ import annotations

import math
import unicodedata
from collections.abc import Callable, Mapping, Sequence
from typing import Annotated, Any, Final

from pydantic import (
    BaseModel,
    ConfigDict,
    Field,
    GetCoreSchemaHandler,
    GetJsonSchemaHandler,
    ValidationInfo,
    model_validator,
)
from pydantic_core import CoreSchema, core_schema

from movload.errors import InputError, UnknownNameError, nearest_name
from movload.files.toml import PLACEHOLDER, short
from movload.units import SI_UNITS, Quantity, UnitSystem, to_si

LARGEST: Final = 1e18  # SI; beyond anything that stands, and a product of a few is still a number
STILL_HELD: Final = 'still holds "?" and is needed here'
_UNSEEN: Final = {"Cc", "Cs", "Zl", "Zp"}  # control characters, half characters, separators of lines and paragraphs


class Read:
    """In an annotation: a reader that gives the value, and its JSON Schema.

    Written out for pydantic, because it would inspect each reader's signature at every start-up: a tenth of all of it.
    """

    def __init__(self, reader: Callable[[Any, ValidationInfo], object], schema: Mapping[str, Any]) -> None:
        self._reader, self._schema = reader, dict(schema)

    def __get_pydantic_core_schema__(self, source: object, handler: GetCoreSchemaHandler) -> CoreSchema:
        """Return the reader as pydantic's core takes it; whatever stands before it in the annotation is left out."""
        del source, handler
        return core_schema.with_info_plain_validator_function(self._reader)

    def __get_pydantic_json_schema__(self, schema: CoreSchema, handler: GetJsonSchemaHandler) -> dict[str, Any]:
        """Return the JSON Schema."""
        del schema, handler
        return dict(self._schema)


class Checked:
    """In an annotation: a check of a value that has been read, which gives it back."""

    def __init__(self, check: Callable[[Any], object]) -> None:
        self._check = check

    def __get_pydantic_core_schema__(self, source: object, handler: GetCoreSchemaHandler) -> CoreSchema:
        """Return the check after what the annotation has before it."""
        return core_schema.no_info_after_validator_function(self._check, handler(source))


def units_in(info: ValidationInfo) -> UnitSystem:
    """Return the file's units that travel with a validation."""
    units: UnitSystem = (info.context or {}).get("units", SI_UNITS)
    return units


def number(value: object, quantity: Quantity, units: UnitSystem) -> float:
    """Return a typed value in SI.

    Raises
    ------
    InputError
        No number, nan, or beyond LARGEST.
    """
    if isinstance(value, str):
        said, si = f'"{short(value)}"', _with_unit(value, quantity)
    elif isinstance(value, bool) or not isinstance(value, (int, float)):
        raise InputError(f"a number or a string with a unit is asked for, got {shown(value)}")
    else:
        said, si = f"{short(value)} {units.symbol(quantity)}".rstrip(), _as_float(value) * units.factor(quantity)
    if math.isnan(si) or abs(si) > LARGEST:
        raise InputError(f"a finite number within {LARGEST:g} in SI is asked for, got {said}")
    return si


def _with_unit(text: str, quantity: Quantity) -> float:
    """Return a quantity written with its unit in SI; infinite for a fraction of digits without end."""
    try:
        return to_si(text, quantity)
    except InputError:
        raise
    except (OverflowError, ValueError):
        return math.inf


def _as_float(value: float) -> float:
    """Return a number as a float; infinite for a whole number that no float can hold."""
    try:
        return float(value)
    except OverflowError:
        return math.inf


def shown(value: object) -> str:
    """Return a value for an error as TOML would write its kind: text in quotes, true, a list in brackets."""
    if isinstance(value, str):
        return f'"{short(value)}"'
    if isinstance(value, bool):
        return str(value).lower()
    return short(value) if isinstance(value, (int, float, list)) else f"the {_kind(value)} {short(value)}"


def _kind(value: object) -> str:
    """Return what TOML calls a value that is neither text nor number nor list."""
    return "table" if isinstance(value, dict) else type(value).__name__


def _typed(quantity: Quantity, words: str) -> tuple[Read]:
    """Return the annotation's part for a quantity: its reader and its JSON Schema."""

    def read(value: object, info: ValidationInfo) -> float:
        return number(value, quantity, units_in(info))

    return (Read(read, {"type": ["number", "string"], "description": words}),)


Length = Annotated[float, *_typed("length", "a length; bare numbers in units.length")]
Force = Annotated[float, *_typed("force", "a force or weight; bare numbers in units.force")]
LineLoad = Annotated[float, *_typed("line load", "a weight per length; bare numbers in units.force per units.length")]
Area = Annotated[float, *_typed("area", "an area; bare numbers in units.section squared")]
Stress = Annotated[float, *_typed("stress", "a stress; bare numbers in units.force per units.section squared")]
Density = Annotated[
    float, *_typed("density", "mass per volume; bare numbers in kg/m3 beside metres, lb/ft3 beside feet")
]
Stiffness = Annotated[float, *_typed("stiffness", "a force per length; bare numbers in units.force per units.section")]
Pressure = Annotated[
    float, *_typed("pressure", "a weight per area; bare numbers in units.force per units.length squared")
]
Moment = Annotated[float, *_typed("moment", "a moment; bare numbers in units.force times units.length")]
Section = Annotated[float, *_typed("section", "a small length; bare numbers in units.section")]
Fraction = Annotated[float, *_typed("fraction", 'a fraction, 0.3 or "30 %"')]
SectionModulus = Annotated[float, *_typed("section modulus", "bare numbers in units.section to the power of 3")]
TorsionConstant = Annotated[float, *_typed("torsion", "bare numbers in units.section to the power of 4")]
WarpingConstant = Annotated[float, *_typed("warping", "bare numbers in units.section to the power of 6")]


def read_by(reader: Callable[[object, ValidationInfo], object], kinds: list[str]) -> tuple[Read]:
    """Return the annotation's part for a value that may be a name or a quantity."""
    return (Read(reader, {"type": kinds}),)


def known_name(value: str, known: Sequence[str], what: str = "not one") -> str:
    """Return a name that is one of those known.

    Raises
    ------
    UnknownNameError
        It is none of them; the nearest is named.
    """
    if value not in known:
        said = STILL_HELD if value == PLACEHOLDER else f'"{short(value)}" is {what} of {", ".join(known)}'
        raise UnknownNameError(said, nearest=nearest_name(value, known))
    return value


def _one_line(text: str) -> str:
    """Refuse text that still is to be filled in, shows nothing, or would break a line or a terminal."""
    if text == PLACEHOLDER:
        raise InputError(STILL_HELD)
    if not text.strip():
        raise InputError(f'may not be empty, got "{text}"')
    if any(unicodedata.category(sign) in _UNSEEN for sign in text):
        raise InputError(f'must be one line without control characters, got "{short(text)}"')
    return text


class _OneLine:
    """In an annotation: text of one line."""

    def __get_pydantic_core_schema__(self, source: object, handler: GetCoreSchemaHandler) -> CoreSchema:
        """Return the check after that of a string."""
        del source, handler
        return core_schema.no_info_after_validator_function(
            _one_line, core_schema.str_schema(strict=True, min_length=1)
        )


Text = Annotated[str, _OneLine()]


class Table(BaseModel):
    """A table of a file: unknown keys are errors that name the nearest known one."""

    model_config = ConfigDict(extra="ignore", frozen=True, defer_build=True)  # built once, within the whole file's

    @model_validator(mode="before")
    @classmethod
    def _only_known_keys(cls, data: object) -> object:
        if not isinstance(data, dict):
            raise InputError(f"a table of keys is asked for, got {shown(data)}")
        for key in data:
            if key not in cls.model_fields:
                near = nearest_name(str(key), cls.model_fields)
                raise UnknownNameError(f'key "{short(key)}" is not known', nearest=near)
        return data


class Units(Table):
    """The units that bare numbers are written in and that results are shown in."""

    length: Text = Field(description="for geometry: m, mm, ft, in")
    force: Text = Field(description="for loads: kN, N, kip, lb, t, kg, short ton, long ton")
    section: Text | None = Field(
        None, description="for cross-sections; mm beside metres and in beside feet when left out"
    )

    def system(self) -> UnitSystem:
        """Return them as a unit system."""
        return UnitSystem.beside(self.length, force=self.force, section=self.section or "")
