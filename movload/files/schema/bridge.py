"""What a bridge file may hold, key by key."""

from __future__ import annotations

import math
from typing import Annotated, Final, Literal

from pydantic import Field, ValidationInfo, model_validator

from movload.errors import InputError, MissingDataError, nearest_name
from movload.files.schema.makes import MaterialTable, MemberMake, PartMake
from movload.files.schema.quantities import (
    STILL_HELD,
    Area,
    Checked,
    Density,
    Force,
    Fraction,
    Length,
    LineLoad,
    Moment,
    Pressure,
    Section,
    Stiffness,
    Stress,
    Table,
    Text,
    Units,
    known_name,
    number,
    read_by,
    shown,
    units_in,
)
from movload.files.schema.sections import SectionTable
from movload.files.toml import PLACEHOLDER, written_key
from movload.rating.impact import RULES, SURFACES


def _place_across(value: object, info: ValidationInfo) -> str | tuple[float, float]:
    """Return a name, or the two z between which something lies [m]; one z is a line."""
    if isinstance(value, str) and value in _NAMED:
        return value
    units = units_in(info)
    both = value if isinstance(value, list) else [value, value]
    if len(both) != 2:
        raise InputError(f"a place across is one z or two, got {shown(value)}")
    try:
        right, left = (number(one, "length", units) for one in both)
    except InputError as error:
        near = nearest_name(value, _NAMED) if isinstance(value, str) else ""
        raise InputError(f"{error.rule}; or one of {', '.join(_NAMED)}", nearest=near) from None
    return right, left


def _impact(value: object, info: ValidationInfo) -> float | str:
    """Return a fraction, or the name of a rule."""
    if isinstance(value, str) and not any(sign.isdigit() for sign in value):
        return known_name(value, RULES[1:], "no fraction and none")
    return number(value, "fraction", units_in(info))


def _surface(value: str) -> str:
    """Return the name of a riding surface."""
    return known_name(value, SURFACES, "not one")


def _traffic(value: object, info: ValidationInfo) -> float:
    """Return trucks a day, infinite for unknown."""
    if isinstance(value, str) and value != "unknown":
        said = STILL_HELD if value == PLACEHOLDER else f'trucks a day or "unknown" is asked for, got {shown(value)}'
        raise InputError(said)
    return math.inf if value == "unknown" else number(value, "fraction", units_in(info))


def _count(value: object, info: ValidationInfo) -> float:
    """Return n of a limit span / n."""
    if isinstance(value, bool) or not isinstance(value, (int, float)) or value <= 0:
        said = (
            STILL_HELD if value == PLACEHOLDER else f"n of a limit span / n is asked for, above 0, got {shown(value)}"
        )
        raise InputError(said)
    return number(value, "fraction", units_in(info))


_NAMED: Final = ("full width", "left", "right")
Across = Annotated[str | tuple[float, float], *read_by(_place_across, ["string", "number", "array"])]
Impact = Annotated[float | str, *read_by(_impact, ["number", "string"])]
Traffic = Annotated[float, *read_by(_traffic, ["number", "string"])]
Count = Annotated[float, *read_by(_count, ["number"])]
Surface = Annotated[Text, Checked(_surface)]


class LayoutTable(Table):
    """A truss by form, panel lengths and depths."""

    form: Text
    deck: Text = Field(description="through, pony or deck: which chord carries the deck")
    panels: list[Length]
    depths: list[Length]
    middle: Text | None = None
    omit: list[Text] = Field(default=[], description='bars that the form has and the bridge has not, e.g. ["U3-L3"]')


class SupportTable(Table):
    """A bearing: pinned, or sliding along a bed at an angle."""

    pinned: Annotated[bool, Field(strict=True)] = False
    slides: Annotated[float, Field(strict=True)] | None = Field(None, description="bed's angle from +x [degrees]")
    settlement: Length = 0.0
    movement: Length | None = None
    normal_stiffness: Stiffness | None = None
    slide_stiffness: Stiffness | None = None

    @model_validator(mode="after")
    def _one_kind(self) -> SupportTable:
        if self.pinned == (self.slides is not None):
            raise InputError("a support is either pinned = true or slides = (degrees), and one of them must be said")
        return self


class AxialTable(Table):
    """Axial strengths of a bar, as magnitudes."""

    tension: Force | None = None
    compression: Force | None = None


class BendingTable(Table):
    """Strengths of a beam of the floor, as magnitudes."""

    moment: Moment | None = Field(None, description="sagging")
    hogging: Moment | None = Field(None, description="over a truss that carries a bracket")
    shear: Force | None = None


class StrengthKeys(Table):
    """What a factor set asks about a part beside its strength."""

    condition: Text | None = Field(None, description="good, fair or poor")
    measured: Annotated[bool, Field(strict=True)] = Field(False, description="whether the loss of metal was measured")
    system: Text | None = Field(None, description='kind of system, e.g. "riveted members"')
    timber: Annotated[bool, Field(strict=True)] = Field(False, description="timber takes no impact")


class MemberGroup(StrengthKeys, MemberMake):
    """Bars that share one section and material."""

    area: Area | None = None
    modulus: Stress | None = None
    density: Density | None = None
    bars: list[Text] | None = None
    permits: AxialTable | None = Field(None, description="margin included")
    nominal: AxialTable | None = Field(None, description="every factor of the method applies")
    reduced: AxialTable | None = Field(None, description="phi is in it already")

    @model_validator(mode="after")
    def _one_way(self) -> MemberGroup:
        typed = [key for key in ("area", "modulus", "density") if getattr(self, key) is not None]
        if self.section is None and self.material is None:
            for key in ("area", "modulus"):
                if key not in typed:
                    raise MissingDataError("is missing: type area and modulus, or section and material", place=key)
            return self
        for key, other in (("section", "material"), ("material", "section")):
            if getattr(self, key) is None:
                raise MissingDataError(f"is needed beside {other}", place=key)
        if typed:
            raise InputError("is given twice: typed, and by section and material", place=typed[0])
        return self


class DeckTable(Table):
    """The loaded chord, the trusses and the kerbs; or how much of an axle reaches one truss."""

    panel_points: list[Text] | None = None
    left_abutment: Length | None = Field(None, description="x of an abutment that carries the first end stringer")
    right_abutment: Length | None = Field(None, description="x of an abutment that carries the last end stringer")
    truss_share: Fraction | None = None
    truss_spacing: Length | None = Field(None, description="between the trusses' middle planes")
    kerbs: tuple[Length, Length] | None = Field(
        None, description="z of the right and the left kerb from the bridge's centre line, looking toward +x; + is left"
    )
    clearance: Length | None = Field(None, description="from a kerb to the outermost wheel's centre")
    between: Length | None = Field(None, description="between the nearest wheels of vehicles side by side")
    keeps: Text | None = Field(None, description="side on which traffic keeps: right or left")
    kind: Text | None = Field(None, description="through, pony or deck, where no layout says it")
    bears_on: Text | None = Field(None, description="floorbeams, or chord")
    chord_bending: Text | None = Field(None, description="who checked a deck that bears on the chord, and the result")


class PartTable(StrengthKeys, PartMake):
    """A part of the floor."""

    permits: BendingTable | None = None
    nominal: BendingTable | None = None
    reduced: BendingTable | None = None


class StringersTable(PartTable):
    """Stringers, simple spans between floorbeams."""

    z: list[Length] = Field(description="their places across, from the right looking toward +x")
    fraction: Fraction | None = Field(None, description="of a whole axle on one stringer; the lever rule when left out")
    weight: LineLoad | None = Field(None, description="of one stringer; by its section when left out")
    continuous: Annotated[bool, Field(strict=True)] = False

    @model_validator(mode="after")
    def _simple(self) -> StringersTable:
        if self.continuous:
            raise InputError("stringers that run on over floorbeams cannot be rated as simple spans, got true",
                             place="continuous")  # fmt: skip
        return self


class FloorbeamsTable(PartTable):
    """Floorbeams, one at each panel point."""

    brackets: tuple[Length, Length] | None = Field(None, description="reach beyond the right and the left truss")
    weight: LineLoad | None = Field(None, description="per length of beam; by its section when left out")


class PlanksTable(PartTable):
    """Planks from stringer to stringer."""

    contact: Length = Field(description="length of a wheel's contact along the plank")
    sharing: Fraction = Field(description="part of a wheel that one plank takes")


class FloorTable(Table):
    """The floor."""

    stringers: StringersTable | None = None
    floorbeams: FloorbeamsTable | None = None
    planks: PlanksTable | None = None


class ItemTable(Table):
    """One thing that stands on the bridge for good: its weight in one way, and where across it lies."""

    title: Text
    kind: Text = Field(description="components, surfacing or other")
    line: LineLoad | None = Field(None, description="per length along the bridge, all of it")
    per_area: Pressure | None = Field(None, description="per area of the width it covers")
    thickness: Section | None = Field(None, description="of a layer, with its density")
    density: Density | None = None
    points: dict[Text, Force] | None = Field(None, description="weights at panel points")
    across: Across = Field(description='"full width", "left", "right", one z, or [z, z] from the right')


class PermanentTable(Table):
    """What stands on the bridge for good."""

    deck: LineLoad | None = Field(
        None,
        description="whole bridge: deck and surfacing per length along it, and the floor where [floor] has no weight",
    )
    truss_share: Fraction | None = None
    detail_allowance: Fraction | None = Field(None, description="of the members' weight: lacing, rivets, pins, gussets")
    items: list[ItemTable] = Field(default=[])


class RatingTable(Table):
    """What a rating takes as given."""

    impact: Impact | None = Field(None, description='a fraction, or "by loaded length", "by riding surface", "railway"')
    surface: Surface | None = Field(None, description="smooth, minor or severe")
    traffic: Traffic | None = Field(None, description='trucks a day one way, or "unknown"')
    deflection: Count | None = Field(None, description="n: live deflection at most span / n")


class BridgeFile(Table):
    """A bridge file."""

    title: Text
    units: Units
    layout: LayoutTable | None = None
    joints: dict[Text, tuple[Length, Length]] = Field(default_factory=dict)
    supports: dict[Text, SupportTable | Literal["pinned"]]
    sections: dict[Text, SectionTable] = Field(default={}, description="cross-sections by name")
    materials: dict[Text, MaterialTable] = Field(default={}, description="materials by name")
    members: dict[Text, MemberGroup]
    deck: DeckTable = Field(default_factory=lambda: DeckTable.model_validate({}))
    floor: FloorTable = Field(default_factory=lambda: FloorTable.model_validate({}))
    permanent: PermanentTable | None = None
    rating: RatingTable = Field(default_factory=lambda: RatingTable.model_validate({}))

    @model_validator(mode="before")
    @classmethod
    def _supports_are_tables_or_pinned(cls, data: object) -> object:
        """Say what a support may be before a union of two kinds fails in two voices."""
        supports = data.get("supports") if isinstance(data, dict) else None
        for joint, support in supports.items() if isinstance(supports, dict) else ():
            if not isinstance(support, dict) and support != "pinned":
                rule = f'a support is "pinned" or {{ slides = degrees }}, got {shown(support)}'
                place = f"supports.{written_key(joint)}"
                raise InputError(STILL_HELD if support == PLACEHOLDER else rule, place=place)
        return data
