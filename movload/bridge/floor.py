"""The floor: stringers along the bridge, floorbeams across it, planks between the stringers."""

from __future__ import annotations

import math
from dataclasses import dataclass, field
from typing import TYPE_CHECKING, Final

import numpy as np

from movload.bridge.strengths import TypedStrength
from movload.errors import InputError

if TYPE_CHECKING:
    from movload.bridge.made import Made

_NOTHING: Final = TypedStrength()
_MOST_FRACTION: Final = 2.0  # of a whole axle on one stringer; 70 for 70 % is caught


@dataclass(frozen=True, slots=True)
class Stringers:
    """Beams along the bridge, simple spans from floorbeam to floorbeam, counted S1, S2 ... from the right.

    Parameters
    ----------
    z
        Their places across [m], increasing (from the right looking toward +x), at least 2.
    fraction
        Share [-] of a whole axle that reaches any stringer, as typed; None takes the lever rule between them.
    weight
        Each one's own weight [N/m].
    strength
        Of one stringer: moment, shear.
    made
        What each is made of; None while nobody has typed it.
    """

    z: tuple[float, ...]
    fraction: float | None = field(default=None, kw_only=True)
    weight: float = field(default=0.0, kw_only=True)
    strength: TypedStrength = field(default=_NOTHING, kw_only=True)
    made: Made | None = field(default=None, kw_only=True)

    def __post_init__(self) -> None:
        """Check order, fraction and weight."""
        place = "floor.stringers"
        if len(self.z) < 2:
            raise InputError(f"at least 2 stringers carry a floor, got {len(self.z)}", place=f"{place}.z")
        if not (np.isfinite(self.z).all() and (np.diff(self.z) > 0).all()):
            said = ", ".join(f"{z:g}" for z in self.z)
            raise InputError(f"stringers stand from right to left, z increasing, got {said} m", place=f"{place}.z")
        if self.fraction is not None and not 0 < self.fraction <= _MOST_FRACTION:
            raise InputError(
                f"must be above 0 and at most {_MOST_FRACTION:g} of a whole axle, got {self.fraction}",
                place=f"{place}.fraction",
            )
        _require_weight(self.weight, place)

    @property
    def names(self) -> tuple[str, ...]:
        """S1, S2 ... from the right looking toward +x."""
        return tuple(f"S{number}" for number in range(1, len(self.z) + 1))


@dataclass(frozen=True, slots=True)
class Floorbeams:
    """Beams across the bridge at every panel point, from truss to truss, that may reach beyond them on brackets.

    Parameters
    ----------
    brackets
        How far they reach beyond the right and the left truss [m], 0 or more.
    weight
        Their own weight per metre of beam [N/m].
    strength
        Of one floorbeam: moment (sagging), hogging (over the truss), shear.
    made
        What each is made of; None while nobody has typed it.
    """

    brackets: tuple[float, float] = (0.0, 0.0)
    weight: float = field(default=0.0, kw_only=True)
    strength: TypedStrength = field(default=_NOTHING, kw_only=True)
    made: Made | None = field(default=None, kw_only=True)

    def __post_init__(self) -> None:
        """Check brackets and weight."""
        for number, reach in enumerate(self.brackets):
            if not (math.isfinite(reach) and reach >= 0):
                raise InputError(
                    f"a bracket reaches 0 or more beyond its truss, got {reach} m",
                    place=f"floor.floorbeams.brackets[{number}]",
                )
        _require_weight(self.weight, "floor.floorbeams")


@dataclass(frozen=True, slots=True)
class Planks:
    """Planks across the stringers: simple spans from stringer to stringer under one wheel.

    Parameters
    ----------
    contact
        Length of a wheel's contact along the plank [m], 0 or more.
    sharing
        Part of a wheel that one plank takes [-], above 0 and at most 1.
    strength
        Of one plank: moment, shear.
    made
        What it is made of; None while nobody has typed it.
    """

    contact: float
    sharing: float
    strength: TypedStrength = field(default=_NOTHING, kw_only=True)
    made: Made | None = field(default=None, kw_only=True)

    def __post_init__(self) -> None:
        """Check contact and sharing."""
        if not (math.isfinite(self.contact) and self.contact >= 0):
            raise InputError(f"must be 0 or more, got {self.contact} m", place="floor.planks.contact")
        if not 0 < self.sharing <= 1:
            raise InputError(
                f"one plank takes above 0 and at most 1 of a wheel, got {self.sharing}", place="floor.planks.sharing"
            )


@dataclass(frozen=True, slots=True)
class Floor:
    """What of the floor was measured; None where it was not (the answer then says so)."""

    stringers: Stringers | None = None
    floorbeams: Floorbeams | None = None
    planks: Planks | None = None

    def __post_init__(self) -> None:
        """Refuse floorbeams and planks without the stringers that load and carry them."""
        for word, part in (("floorbeams", self.floorbeams), ("planks", self.planks)):
            if part is not None and self.stringers is None:
                raise InputError(
                    "needs the stringers' places: type floor.stringers.z (where the deck bears)", place=f"floor.{word}"
                )
        if self.planks is not None and self.stringers is not None:
            span = float(np.diff(self.stringers.z).max())
            if not self.planks.contact < span:
                raise InputError(
                    f"a wheel's contact is shorter than a plank's span of {span:g} m, got {self.planks.contact:g} m",
                    place="floor.planks.contact",
                )


def _require_weight(weight: float, place: str) -> None:
    """Refuse a weight that is no weight."""
    if not (math.isfinite(weight) and weight >= 0):
        raise InputError(f"a weight must be 0 or more, got {weight} N/m", place=f"{place}.weight")
