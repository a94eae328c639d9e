"""What a vehicle file may hold, key by key."""

from __future__ import annotations

from typing import Literal

from pydantic import Field

from movload.files.schema.quantities import Force, Length, Table, Text, Units


class AxleTable(Table):
    """One axle, front to back."""

    load: Force
    after: Length | tuple[Length, Length] | None = Field(None, description="distance behind the axle before")
    gauge: Length | None = Field(None, description="distance between its wheels' centres")


class VehicleFile(Table):
    """A vehicle file."""

    title: Text
    kind: Text
    source: Text | None = Field(None, description='where its numbers come from, or "invented"')
    units: Units
    axles: list[AxleTable]
    headings: tuple[Literal["+x", "-x"], ...] = ("+x", "-x")
