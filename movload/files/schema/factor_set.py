"""What a factor set's file may hold, key by key."""

from __future__ import annotations

import math
import re
from typing import Annotated, Any, Final

from pydantic import AfterValidator, BeforeValidator, Field, WithJsonSchema

from movload.errors import InputError
from movload.files.schema.quantities import Table, Text, shown
from movload.units import Quantity, to_si

_GREATEST: Final = 10.0  # beyond any factor; 55 typed for 55 % is caught
_NUMBER: Final = r"\d+(?:\.\d+)?"
_QUOTIENT: Final = re.compile(rf"({_NUMBER})\s*/\s*({_NUMBER})")


def _factor(value: object) -> float:
    """Return a factor: a number, or a quotient as a source prints it, "1/2.12"."""
    quotient = _QUOTIENT.fullmatch(value.strip()) if isinstance(value, str) else None
    if quotient is not None:
        above, below = float(quotient[1]), float(quotient[2])
        factor = above / below if below else math.inf
    elif isinstance(value, bool) or not isinstance(value, (int, float)):
        raise InputError(f'a number or a quotient like "1/2.12" is asked for, got {shown(value)}')
    else:
        factor = value
    if not 0.0 <= factor <= _GREATEST:
        raise InputError(f"a factor is 0 to {_GREATEST:g}, got {shown(value)}")
    return float(factor)


def _above(value: float) -> float:
    """Refuse 0 where it would make a rating infinite or nothing."""
    if not value:
        raise InputError("must be above 0, got 0")
    return value


def _abreast(value: list[float]) -> list[float]:
    """Refuse a list that says nothing."""
    if not value:
        raise InputError("the factor of one abreast, of two ... is asked for, got []")
    return value


def _trucks(value: object) -> float:
    """Return trucks a day."""
    if isinstance(value, bool) or not isinstance(value, (int, float)) or not 0 <= value < math.inf:
        raise InputError(f"trucks a day, 0 or more, are asked for, got {shown(value)}")
    return float(value)


def _with_unit(quantity: Quantity, words: str) -> Any:  # the arguments of Annotated
    """Return the annotation's parts for a quantity that must say its unit: such a file has no units of its own."""

    def read(value: object) -> float:
        if not isinstance(value, str):
            raise InputError(f"{words} is asked for, got {shown(value)}")
        si = to_si(value, quantity)
        if si <= 0:
            raise InputError(f"must be above 0, got {shown(value)}")
        return si

    return BeforeValidator(read), WithJsonSchema({"type": "string", "description": words})


def _said(value: str) -> str:
    """Refuse a source that does not say how the value came here."""
    if not re.search(r"\b(read|from memory|own choice)\b", value):
        raise InputError(f'must say "read", "from memory" or "own choice", got {shown(value)}')
    return value


Factor = Annotated[float, BeforeValidator(_factor), WithJsonSchema({"type": ["number", "string"]})]
Positive = Annotated[Factor, AfterValidator(_above)]
Trucks = Annotated[float, BeforeValidator(_trucks), WithJsonSchema({"type": "number", "minimum": 0})]
Speed = Annotated[float, *_with_unit("speed", 'a speed with its unit, e.g. "10 mph",')]
Weight = Annotated[float, *_with_unit("force", 'a weight with its unit, e.g. "3 short ton",')]
Source = Annotated[Text, AfterValidator(_said)]
Flag = Annotated[bool, Field(strict=True)]
Abreast = Annotated[list[Positive], AfterValidator(_abreast)]


class LevelTable(Table):
    """One level."""

    title: Text
    kinds: list[Text] = Field(default=[], description="kinds of loading it rates; all when left out")
    live: Positive | None = None
    live_by_kind: dict[Text, Positive] = Field(default={}, description="instead of live, or of live_by_traffic")
    live_by_traffic: list[tuple[Trucks, Positive]] = Field(default=[], description="[trucks a day one way, factor]")
    permanent: dict[Text, tuple[Factor, Factor]] = Field(description="by class: [pushing, relieving]")
    resistance: dict[Text, Positive] = Field(
        default={}, description='phi on a nominal strength, by sense; "fracture" of a net section for the rules'
    )
    timber: dict[Text, Positive] = Field(default={}, description="factor on timber's strengths by the rules, by sense")
    condition_factors: Flag = Field(default=False, description="whether phi_c and phi_s apply")
    posting: Text = Field(default="weight x RF", description="weight x RF, legal curve or none")


class FactorSetFile(Table):
    """A factor set."""

    title: Text
    edition: Text
    statement: Text = Field(description="what every answer says about it")
    sources: dict[Text, Source] = Field(description='where each value comes from: "..., read", "..., from memory"')
    rules: Text | None = Field(None, description="standard that gives strengths from sections and materials")
    multiple_presence: Abreast = Field(default=[1.0], description="by number abreast; the last repeats")
    presence_by_kind: dict[Text, Abreast] = Field(default={})
    condition: dict[Text, Positive] = Field(default={}, description="phi_c by condition")
    measured_gain: Factor = Field(default=0.0, description="what phi_c rises by where the loss was measured")
    system: dict[Text, Positive] = Field(default={}, description="phi_s by kind of system")
    impact: Text | None = Field(None, description="rule where the bridge file names none")
    impact_values: dict[Text, Factor] = Field(default={}, description="by kind of loading and by riding surface")
    crawl_speed: Speed | None = Field(None, description="impact is dropped up to it")
    crawl_kinds: list[Text] = Field(default=[], description="kinds of loading for which it is")
    closure: Weight | None = Field(None, description="weight below which a road closes to vehicles")
    levels: list[LevelTable]
