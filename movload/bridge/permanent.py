"""What stands on the bridge for good, item by item: what it weighs, and where across it lies."""

from __future__ import annotations

import math
from dataclasses import dataclass, field
from typing import Final

from movload.bridge.deck import MOST_SHARE
from movload.errors import InputError, MissingDataError, UnknownNameError, nearest_name
from movload.units import GRAVITY

REMOVABLE: Final = "removable surfacing"
CLASSES: Final = ("components", "surfacing", REMOVABLE, "other")
"""Classes whose margins a method sets apart: what is part of the bridge, what lies on it, and the rest."""


@dataclass(frozen=True, slots=True)
class Item:
    """One thing that stands on the bridge for good.

    Parameters
    ----------
    title
        What it is.
    kind
        One of CLASSES.
    line
        Weight of all of it per metre along the bridge [N/m], 0 or more.
    points
        Weights (panel point, N) at panel points.
    low, high
        z between which it is spread evenly across [m]; equal for a line.
    share
        Share of it that reaches the rated truss [-], as typed, 0 to 2, instead of a place across.

    Raises
    ------
    MissingDataError
        Neither a place across nor a share.
    UnknownNameError
        A class that is not known.
    InputError
        No title, a weight below 0 or not finite, a place and a share, or a place from left to right.
    """

    title: str
    kind: str
    line: float = field(default=0.0, kw_only=True)
    points: tuple[tuple[str, float], ...] = field(default=(), kw_only=True)
    low: float = field(default=math.nan, kw_only=True)
    high: float = field(default=math.nan, kw_only=True)
    share: float | None = field(default=None, kw_only=True)
    on_floorbeams: bool = field(default=False, kw_only=True)

    def __post_init__(self) -> None:
        """Check title, class, weights and place."""
        if not self.title.strip():
            raise InputError("an item says what it is, got an empty text", place="title")
        if self.kind not in CLASSES:
            raise UnknownNameError(
                f'"{self.kind}" is not one of {", ".join(CLASSES)}',
                place="kind",
                nearest=nearest_name(self.kind, CLASSES),
            )
        _require_weight(self.line, "N/m", "line")
        for name, force in self.points:
            _require_weight(force, "N", f"points.{name}")
        self._check_place()

    def _check_place(self) -> None:
        """Refuse a place that is none, two of them, or none at all."""
        nowhere = math.isnan(self.low) and math.isnan(self.high)
        if self.share is None:
            if nowhere:
                raise MissingDataError("is needed: where across it lies", place="across")
            if not (math.isfinite(self.low) and math.isfinite(self.high) and self.low <= self.high):
                raise InputError(f"lies from right to left, got {self.low:g} to {self.high:g} m", place="across")
            return
        if not nowhere:
            raise InputError("the share is given twice: typed, and by where across it lies", place="truss_share")
        if not 0 <= self.share <= MOST_SHARE:
            raise InputError(f"must be 0 to {MOST_SHARE:g} (one half is 0.5), got {self.share}", place="truss_share")

    @classmethod
    def layer(cls, title: str, kind: str, *, thickness: float, density: float, across: tuple[float, float]) -> Item:
        """Return a layer between two z: line [N/m] = thickness [m] x density [kg/m3] x g x (high - low)."""
        _require_weight(thickness, "m", "thickness")
        _require_weight(density, "kg/m3", "density")
        return cls.per_area(title, kind, thickness * density * GRAVITY, across)

    @classmethod
    def per_area(cls, title: str, kind: str, weight: float, across: tuple[float, float]) -> Item:
        """Return what weighs the same everywhere between two z [N/m2]: line [N/m] = weight x (high - low)."""
        low, high = across
        _require_weight(weight, "N/m2", "per_area")
        if not (math.isfinite(low) and math.isfinite(high) and high > low):
            raise InputError(f"a weight per area needs a width, got {low:g} to {high:g} m", place="across")
        return cls(title, kind, line=weight * (high - low), low=low, high=high)


@dataclass(frozen=True, slots=True)
class PermanentItems:
    """All that stands on the bridge for good, beside the members themselves.

    Parameters
    ----------
    items
        Item by item.
    detail_allowance
        Part of the members' own weight added for lacing, rivets, pins and gussets [-], 0 to 1.
    """

    items: tuple[Item, ...]
    detail_allowance: float = 0.0

    def __post_init__(self) -> None:
        """Check the allowance."""
        if not 0 <= self.detail_allowance <= 1:
            raise InputError(f"must be 0 to 1 (15 % is 0.15), got {self.detail_allowance}", place="detail_allowance")


def _require_weight(value: float, unit: str, place: str) -> None:
    """Refuse a weight, or what makes one, that is below 0 or not finite."""
    if not math.isfinite(value):
        raise InputError(f"must be a finite number, got {value} {unit}", place=place)
    if value < 0:
        raise InputError(f"must be 0 or more, got {value} {unit}", place=place)
