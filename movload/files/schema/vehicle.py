"""What a vehicle file may hold, key by key."""

from __future__ import annotations

from typing import Annotated, Final, Literal

from pydantic import Field, ValidationInfo

from movload.errors import InputError
from movload.files.schema.quantities import (
    Checked,
    Force,
    Fraction,
    Length,
    LineLoad,
    Read,
    Table,
    Text,
    Units,
    known_name,
    number,
    shown,
    units_in,
)
from movload.traffic.fill import ACROSS, DENSITIES, PLACES_ALONG, SHAPES

_MOST_TOLERANCE: Final = 0.5


def _pair(value: object, info: ValidationInfo, what: str) -> float | tuple[float, float]:
    """Return a length, or the two of a list [m]."""
    units = units_in(info)
    if not isinstance(value, list):
        return number(value, "length", units)
    if len(value) != 2:
        raise InputError(f"{what}, got {shown(value)}")
    return number(value[0], "length", units), number(value[1], "length", units)


def _gap(value: object, info: ValidationInfo) -> float | tuple[float, float]:
    """Return a distance, or the two of a range [m]."""
    return _pair(value, info, "a distance is one length or a list of the least and the greatest")


def _clear(value: object, info: ValidationInfo) -> tuple[float, float]:
    """Return how far a load keeps away before and behind [m]."""
    read = _pair(value, info, "a clear distance is one length or a list of those before and behind")
    return read if isinstance(read, tuple) else (read, read)


def _stretch(value: object, info: ValidationInfo) -> tuple[float, float]:
    """Return from where to where a load lies [m]; of one x both are the same."""
    read = _pair(value, info, "a place is one x or a list of two")
    return read if isinstance(read, tuple) else (read, read)


def _fill_load(value: object, info: ValidationInfo) -> float:
    """Return a load by what was said of it before: a force, a load per length, or per area."""
    if info.data.get("shape") == "knife edge":
        return number(value, "force", units_in(info))
    return number(value, "pressure" if info.data.get("per_area") else "line load", units_in(info))


def _yes_or_no(value: object, info: ValidationInfo) -> bool:
    """Return true or false, and nothing that merely counts as one."""
    del info
    if not isinstance(value, bool):
        raise InputError(f"true or false is asked for, got {shown(value)}")
    return value


def _count(value: object, info: ValidationInfo) -> int:
    """Return a whole number of 1 or more."""
    del info
    if isinstance(value, bool) or not isinstance(value, int):
        raise InputError(f"a whole number is asked for, got {shown(value)}")
    if value < 1:
        raise InputError(f"a convoy is of 1 or more, got at most {shown(value)}")
    return value


def _above_zero(value: float) -> float:
    """Refuse a factor that is none."""
    if not value > 0:
        raise InputError(f"a factor must be above 0, got {value:g}")
    return value


def _part(value: float) -> float:
    """Refuse what is no part of a load."""
    if not 0.0 <= value <= 1.0:
        raise InputError(f"what counts where it relieves is 0 to 1, got {value:g}")
    return value


def _tolerance(value: float) -> float:
    """Refuse a tolerance below 0, or beyond what can be called one."""
    if not 0.0 <= value <= _MOST_TOLERANCE:
        raise InputError(f"a tolerance is 0 to 50 %, got {100 * value:g} %")
    return value


def _zero_or_more(value: float) -> float:
    """Refuse a length below 0."""
    if value < 0:
        raise InputError(f"a length is 0 or more, got {value:g} m")
    return value


_OR_TWO: Final = {"type": ["number", "string", "array"]}
Gap = Annotated[float | tuple[float, float], Read(_gap, {**_OR_TWO, "description": "a length, or [least, greatest]"})]
Clear = Annotated[tuple[float, float], Read(_clear, {**_OR_TWO, "description": "a length, or [before, behind]"})]
Stretch = Annotated[tuple[float, float], Read(_stretch, {**_OR_TWO, "description": "an x, or [from, to]"})]
FillLoad = Annotated[float, Read(_fill_load, {"type": ["number", "string"]})]
Switch = Annotated[bool, Read(_yes_or_no, {"type": "boolean"})]
Count = Annotated[int, Read(_count, {"type": "integer", "minimum": 1})]
Factor = Annotated[Fraction, Checked(_above_zero)]
Part = Annotated[Fraction, Checked(_part)]
Tolerance = Annotated[Fraction, Checked(_tolerance)]
Above = Annotated[Length, Checked(_zero_or_more)]
Shape = Annotated[Text, Checked(lambda word: known_name(word, SHAPES))]
Across = Annotated[Text, Checked(lambda word: known_name(word, ACROSS))]
Where = Annotated[Text, Checked(lambda word: known_name(word, PLACES_ALONG[:2]))]
Density = Annotated[Text, Checked(lambda word: known_name(word, DENSITIES))]


class AxleTable(Table):
    """One axle, front to back."""

    load: Force
    after: Gap | None = Field(None, description="distance behind the axle before")
    gauge: Length | None = Field(None, description="distance between its outermost wheels' centres")
    left: Fraction | None = Field(None, description="part of the load that its left wheels carry; half when left out")


class StripTable(Table):
    """A uniform load of finite length that moves with the vehicle: a track, a car of a train."""

    load: LineLoad = Field(description="of both sides together")
    start: Length | None = Field(None, description="its front end behind the front axle; negative before it")
    after: Length | None = Field(None, description="or its front end behind the last axle")
    length: Length
    gauge: Length | None = Field(None, description="distance between the middles of its two sides")


class TailTable(Table):
    """A uniform load behind the vehicle that never ends."""

    load: LineLoad = Field(description="of both sides together")
    after: Length = Field(description="where it begins behind the last axle")
    gauge: Length | None = Field(None, description="distance between the middles of its two sides")


class FillTable(Table):
    """A load that fills the bridge. What its load is asked for in follows from its shape and from per_area."""

    shape: Shape = Field(description=", ".join(SHAPES), json_schema_extra={"enum": list(SHAPES)})
    per_area: Switch = Field(default=False, description="a load per area; say across then")
    load: FillLoad | None = Field(
        None, description="per length, per area with per_area, a force for a knife edge; none with a density"
    )
    web_load: Force | None = Field(None, description="of a knife edge, for webs, shears and reactions")
    density: Density | None = Field(
        None, description="a load per area by the length it covers", json_schema_extra={"enum": list(DENSITIES)}
    )
    across: Across = Field("lane", description="where across it lies", json_schema_extra={"enum": list(ACROSS)})
    gauge: Length | None = Field(None, description="between the middles of its two sides, where it lies in a lane")
    where: Where | None = Field(
        None,
        description="adverse when left out, or outside the vehicle",
        json_schema_extra={"enum": ["adverse", "outside"]},
    )
    clear: Clear | None = Field(None, description="how far it keeps away from the vehicle's ends, where outside")
    at: Stretch | None = Field(None, description="or where it stands: the bridge's x, from and to")
    impact: Literal["added", "none"] = Field("added", description="none: no impact on it, whatever its vehicle has")


class ConvoyTable(Table):
    """How many of the vehicle may follow each other in a lane."""

    most: Count
    headway: Length = Field(description="least distance from the last axle of one to the first of the next")
    ordered: Switch = Field(default=False, description="whether the order of different vehicles is kept")


class StateTable(Table):
    """What one state of a loading holds; a case takes what it leaves out from the file."""

    axles: list[AxleTable] = Field(default_factory=list)
    strips: list[StripTable] = Field(default_factory=list)
    tail: TailTable | None = None
    fills: list[FillTable] = Field(default_factory=list)
    factor: Factor = Field(1.0, description="multiplies all of it")
    relieving: Part = Field(1.0, description="part of a load that counts where it relieves; 0 for a model without it")
    tolerance: Tolerance = Field(
        0.0, description="of axle weights: x (1 + t) where adverse and x (1 - t) where relieving; instead of relieving"
    )
    convoy: ConvoyTable | None = None
    above: Above = Field(0.0, description="only for loaded lengths or spans above this")
    continuous: Switch = Field(default=False, description="only for trusses over more than two bearings")


class CaseTitle(Table):
    """What a case is called."""

    title: Text


class CaseTable(StateTable, CaseTitle):
    """One of several states: laden or empty, lift axle up or down, truck or tandem."""


class Head(Table):
    """What a vehicle file says first."""

    title: Text
    kind: Text
    source: Text | None = Field(None, description='where its numbers come from, or "invented"')
    notes: tuple[Text, ...] = Field(default=(), description="what every rating of it must say")
    units: Units


class VehicleFile(StateTable, Head):
    """A vehicle file: one state, or the cases of which the worst counts."""

    impact: Literal["added", "included", "none"] = Field(
        "added", description="included: the load model holds it already; none: its rule asks for none"
    )
    headings: tuple[Literal["+x", "-x"], ...] = ("+x", "-x")
    weight: Force | None = Field(None, description="what its rule says it weighs; its heaviest state when left out")
    cases: list[CaseTable] = Field(default_factory=list)
