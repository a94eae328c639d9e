"""What was typed about the strength of a part, and on what footing: permitted, nominal, or already reduced."""

from __future__ import annotations

import math
from dataclasses import dataclass, field
from types import MappingProxyType
from typing import TYPE_CHECKING, Final

from movload.errors import InputError, UnknownNameError, nearest_name

if TYPE_CHECKING:
    from collections.abc import Mapping

SENSES: Final = ("tension", "compression", "moment", "hogging", "shear")
BENDING: Final = ("moment", "hogging")
FOOTINGS: Final = ("permits", "nominal", "reduced")
"""permits: margin included, nothing is put on it; nominal: every factor applies; reduced: phi is in it already."""


@dataclass(frozen=True, slots=True)
class TypedStrength:
    """One part's strengths as typed.

    Parameters
    ----------
    permits, nominal, reduced
        Magnitudes [N, N m] by sense (SENSES), on each footing; a sense that nobody has typed is left out.
    condition
        "good", "fair", "poor" or what else a factor set knows; "" when nobody has said.
    measured
        Whether the loss of metal was measured (a condition factor may then rise).
    system
        The kind of system a factor set knows the part by ("riveted members"); "" when nobody has said.
    timber
        Whether it is timber, which takes no impact.
    place
        Where in a file it was typed; "" when it was not.
    """

    permits: Mapping[str, float] = field(default_factory=dict)
    nominal: Mapping[str, float] = field(default_factory=dict)
    reduced: Mapping[str, float] = field(default_factory=dict)
    condition: str = field(default="", kw_only=True)
    measured: bool = field(default=False, kw_only=True)
    system: str = field(default="", kw_only=True)
    timber: bool = field(default=False, kw_only=True)
    place: str = field(default="", kw_only=True)

    def __post_init__(self) -> None:
        """Refuse unknown senses and strengths that are not finite numbers, 0 or more."""
        for footing in FOOTINGS:
            typed = dict(getattr(self, footing))
            object.__setattr__(self, footing, MappingProxyType(typed))
            for sense, value in typed.items():
                place = f"{footing}.{sense}"
                if sense not in SENSES:
                    raise UnknownNameError("not a sense", place=place, nearest=nearest_name(sense, SENSES))
                if not (math.isfinite(value) and value >= 0):
                    raise InputError(
                        f"a strength must be 0 or more, got {value:g} {'N m' if sense in BENDING else 'N'}", place=place
                    )
        twice = set(self.nominal) & set(self.reduced)
        if twice:
            sense = min(twice)
            raise InputError(
                f"the {sense} strength is given twice, nominal and reduced; keep one", place=f"reduced.{sense}"
            )

    def __reduce__(self) -> tuple[object, ...]:
        """Pickle by parts (a read-only mapping cannot be pickled)."""
        return (_rebuilt, (dict(self.permits), dict(self.nominal), dict(self.reduced), {
            "condition": self.condition, "measured": self.measured, "system": self.system, "timber": self.timber,
            "place": self.place,
        }))  # fmt: skip

    @property
    def typed(self) -> bool:
        """Whether anything but blanks was typed: a strength, or what a rule asks about the part."""
        return bool(self.permits or self.nominal or self.reduced or self.condition or self.system or self.timber)

    def on(self, footing: str) -> Mapping[str, float]:
        """Return the strengths on one footing."""
        typed: Mapping[str, float] = getattr(self, footing)
        return typed


def _rebuilt(permits: dict[str, float], nominal: dict[str, float], reduced: dict[str, float], rest: dict[str, object]
) -> TypedStrength:  # fmt: skip
    """Make it again from its pickled parts."""
    return TypedStrength(permits, nominal, reduced, **rest)  # type: ignore[arg-type]  # what __reduce__ put there


def permitted(tension: float | None = None, compression: float | None = None) -> TypedStrength:
    """Return the permitted axial forces of a bar [N], margin already taken off; None where nobody has typed one."""
    both = {"tension": tension, "compression": compression}
    return TypedStrength({sense: force for sense, force in both.items() if force is not None})
