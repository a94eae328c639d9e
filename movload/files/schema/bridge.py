"""What a bridge file may hold, key by key."""

from __future__ import annotations

from typing import Annotated, Literal

from pydantic import Field, model_validator

from movload.errors import InputError
from movload.files.schema.quantities import (
    STILL_HELD,
    Area,
    Density,
    Force,
    Fraction,
    Length,
    LineLoad,
    Stiffness,
    Stress,
    Table,
    Text,
    Units,
    shown,
)
from movload.files.toml import PLACEHOLDER, written_key


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


class PermitsTable(Table):
    """Permitted axial forces, margin included, both as magnitudes."""

    tension: Force | None = None
    compression: Force | None = None


class MemberGroup(Table):
    """Bars that share one section and material."""

    area: Area
    modulus: Stress
    density: Density | None = None
    bars: list[Text] | None = None
    permits: PermitsTable | None = None


class DeckTable(Table):
    """The loaded chord and how much of an axle reaches one truss."""

    panel_points: list[Text] | None = None
    left_abutment: Length | None = Field(None, description="x of an abutment that carries the first end stringer")
    right_abutment: Length | None = Field(None, description="x of an abutment that carries the last end stringer")
    truss_share: Fraction | None = None


class PermanentTable(Table):
    """What stands on the bridge for good."""

    deck: LineLoad | None = Field(None, description="whole bridge: deck, floor and surfacing per length along it")
    truss_share: Fraction | None = None


class RatingTable(Table):
    """What a rating takes as given."""

    impact: Fraction | None = None


class BridgeFile(Table):
    """A bridge file."""

    title: Text
    units: Units
    layout: LayoutTable | None = None
    joints: dict[Text, tuple[Length, Length]] = Field(default_factory=dict)
    supports: dict[Text, SupportTable | Literal["pinned"]]
    members: dict[Text, MemberGroup]
    deck: DeckTable = Field(default_factory=lambda: DeckTable.model_validate({}))
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
