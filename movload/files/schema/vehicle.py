"""What a vehicle file may hold, key by key."""

from __future__ import annotations

from typing import Annotated, Literal

from pydantic import BeforeValidator, Field, ValidationInfo, WithJsonSchema

from movload.errors import InputError
from movload.files.schema.quantities import Force, Fraction, Length, Table, Text, Units, number, shown, units_in


def _gap(value: object, info: ValidationInfo) -> float | tuple[float, float]:
    """Return a distance, or the two of a range [m]."""
    units = units_in(info)
    if not isinstance(value, list):
        return number(value, "length", units)
    if len(value) != 2:
        raise InputError(f"a distance is one length or a list of the least and the greatest, got {shown(value)}")
    return number(value[0], "length", units), number(value[1], "length", units)


Gap = Annotated[
    float | tuple[float, float],
    BeforeValidator(_gap),
    WithJsonSchema({"type": ["number", "string", "array"], "description": "a length, or [least, greatest]"}),
]


class AxleTable(Table):
    """One axle, front to back."""

    load: Force
    after: Gap | None = Field(None, description="distance behind the axle before")
    gauge: Length | None = Field(None, description="distance between its outermost wheels' centres")
    left: Fraction | None = Field(None, description="part of the load that its left wheels carry; half when left out")


class VehicleFile(Table):
    """A vehicle file."""

    title: Text
    kind: Text
    source: Text | None = Field(None, description='where its numbers come from, or "invented"')
    notes: tuple[Text, ...] = Field(default=(), description="what every rating of it must say")
    units: Units
    axles: list[AxleTable]
    impact: Literal["added", "included", "none"] = Field(
        "added", description="included: the load model holds it already; none: its rule asks for none"
    )
    headings: tuple[Literal["+x", "-x"], ...] = ("+x", "-x")
