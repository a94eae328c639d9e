"""What the file of metals by year built may hold, key by key."""

from __future__ import annotations

from typing import Annotated, Literal

from pydantic import BeforeValidator, Field

from movload.errors import InputError
from movload.files.schema.factor_set import Source
from movload.files.schema.quantities import Density, Stress, Table, shown


def _with_unit(value: object) -> str:
    """Refuse a bare number: the file has no units of its own."""
    if not isinstance(value, str):
        raise InputError(f'a quantity with its unit is asked for, e.g. "26 ksi", got {shown(value)}')
    return value


def _year(value: object) -> int:
    """Return a year."""
    if isinstance(value, bool) or not isinstance(value, int) or not 1000 <= value <= 9999:
        raise InputError(f"a year of four digits is asked for, got {shown(value)}")
    return value


SaidStress = Annotated[Stress, BeforeValidator(_with_unit)]
SaidDensity = Annotated[Density, BeforeValidator(_with_unit)]
Year = Annotated[int, BeforeValidator(_year)]


class MetalTable(Table):
    """A metal of unknown grade, built in from one year to another."""

    kind: Literal["steel", "wrought iron"]
    first: Year = Field(description="first year")
    last: Year | None = Field(None, description="last year; still holds when left out")
    fy: SaidStress = Field(description="yield stress")
    fu: SaidStress = Field(description="ultimate stress")
    modulus: SaidStress
    density: SaidDensity
    source: Source = Field(description="where yield and ultimate stress come from")
    others: Source = Field(description="where the other values come from")


class MetalsFile(Table):
    """Metals by year built."""

    metals: list[MetalTable]
