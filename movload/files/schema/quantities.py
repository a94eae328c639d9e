"""Quantities as files hold them, and the base of every table.

A bare number is in the file's own units, which travel in the validation context; a string carries its own.
"""

from __future__ import annotations

import math
from typing import Annotated, Any

from pydantic import BaseModel, BeforeValidator, ConfigDict, Field, ValidationInfo, WithJsonSchema, model_validator

from movload.errors import InputError, UnknownNameError, nearest_name
from movload.units import SI_UNITS, Quantity, UnitSystem, to_si


def _reader(quantity: Quantity) -> BeforeValidator:
    """Return the validator that turns a number or a string into SI."""

    def read(value: object, info: ValidationInfo) -> float:
        units: UnitSystem = (info.context or {}).get("units", SI_UNITS)
        return _number(value, quantity, units)

    return BeforeValidator(read)


def _number(value: object, quantity: Quantity, units: UnitSystem) -> float:
    """Return a typed value in SI."""
    if isinstance(value, str):
        return to_si(value, quantity)
    if isinstance(value, bool) or not isinstance(value, (int, float)):
        kind = type(value).__name__
        raise InputError(f"a number or a string with a unit is asked for, got {kind} {short(value)}")
    try:
        number = float(value) * units.factor(quantity)
    except OverflowError:
        raise InputError("the number is too large") from None
    if not math.isfinite(number):
        raise InputError(f"a finite number is asked for, got {value} {units.symbol(quantity)}".rstrip())
    return number


def short(value: object) -> str:
    """Return a value as text, cut when long."""
    text = str(value)
    return text if len(text) <= 40 else text[:37] + "..."


def _typed(quantity: Quantity, words: str) -> Any:  # the second argument list of Annotated
    """Return the annotation's two parts for a quantity: its reader and its JSON Schema."""
    return _reader(quantity), WithJsonSchema({"type": ["number", "string"], "description": words})


Length = Annotated[float, *_typed("length", "a length; bare numbers in units.length")]
Force = Annotated[float, *_typed("force", "a force or weight; bare numbers in units.force")]
LineLoad = Annotated[float, *_typed("line load", "a weight per length; bare numbers in units.force per units.length")]
Area = Annotated[float, *_typed("area", "an area; bare numbers in units.section squared")]
Stress = Annotated[float, *_typed("stress", "a stress; bare numbers in units.force per units.section squared")]
Density = Annotated[
    float, *_typed("density", "mass per volume; bare numbers in kg/m3 beside metres, lb/ft3 beside feet")
]
Stiffness = Annotated[float, *_typed("stiffness", "a force per length; bare numbers in units.force per units.section")]
Fraction = Annotated[float, *_typed("fraction", 'a fraction, 0.3 or "30 %"')]
Text = Annotated[str, Field(strict=True, min_length=1)]


class Table(BaseModel):
    """A table of a file: unknown keys are errors that name the nearest known one."""

    model_config = ConfigDict(extra="ignore", frozen=True)

    @model_validator(mode="before")
    @classmethod
    def _only_known_keys(cls, data: object) -> object:
        if not isinstance(data, dict):
            raise InputError(f"a table of keys is asked for, got {type(data).__name__} {short(data)}")
        for key in data:
            if key not in cls.model_fields:
                raise UnknownNameError(f'key "{key}" is not known', nearest=nearest_name(str(key), cls.model_fields))
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
        feet = self.length in {"ft", "in", "feet", "inch", "inches"}
        return UnitSystem(self.length, self.force, self.section or ("in" if feet else "mm"))
