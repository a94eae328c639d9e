"""A bridge as one value: its truss, its deck, what it carries for good, what its bars may carry, and who says so."""

from __future__ import annotations

import math
from dataclasses import dataclass, field
from types import MappingProxyType
from typing import TYPE_CHECKING, Final

from movload.bridge.deck import MOST_SHARE, Deck, stations_of
from movload.errors import InputError
from movload.units import UnitSystem

if TYPE_CHECKING:
    from collections.abc import Mapping

    from movload.bridge.truss import Truss


_MOST_IMPACT: Final = 2.0  # no rule asks for as much; 30 for 30 % is caught


@dataclass(frozen=True, slots=True)
class Permitted:
    """The axial force a bar may carry, margin already taken off, as typed.

    ``tension`` and ``compression`` are magnitudes [N]; None where nobody has typed one (that sense is not rated).
    """

    tension: float | None = None
    compression: float | None = None

    def __post_init__(self) -> None:
        """Refuse a permitted force that is not a finite number, 0 or more."""
        for sense in ("tension", "compression"):
            force = getattr(self, sense)
            if force is not None and not (math.isfinite(force) and force >= 0):
                raise InputError(f"a permitted force must be 0 or more, got {force} N", place=f"permits.{sense}")


@dataclass(frozen=True, slots=True)
class PermanentLoads:
    """What stands on the bridge for good.

    Parameters
    ----------
    deck
        Weight of deck, floor and surfacing of the whole bridge per metre along it [N/m], 0 or more.
    truss_share
        Share [-], 0 to 2, of that weight that reaches the rated truss (0.5 when everything lies symmetrically).
    """

    deck: float
    truss_share: float

    def __post_init__(self) -> None:
        """Refuse weights that lift and shares that are no part of a whole."""
        if not (math.isfinite(self.deck) and self.deck >= 0):
            raise InputError(f"must be 0 or more, got {self.deck} N/m", place="permanent.deck")
        if not 0 <= self.truss_share <= MOST_SHARE:
            raise InputError(
                f"must be 0 to {MOST_SHARE:g} (one half is 0.5), got {self.truss_share}", place="permanent.truss_share"
            )


@dataclass(frozen=True, eq=False)
class Bridge:
    """Everything that was measured or typed about one bridge, checked.

    Parameters
    ----------
    title, truss, deck
        Its name, its plane truss (both trusses alike), and where the deck stands on it.
    permanent
        None when nobody has typed it; rating then asks for it.
    permits
        Permitted forces by member name; a member without an entry is not rated.
    impact
        Dynamic allowance added to the static live effect [-], 0 to 2; None when nobody has typed it.
    units
        The units its file is written in and its results are shown in.
    missing
        Places in the file that still hold a "?"; rating refuses until they are filled.
    sources
        Where the data came from (file names), for the record.
    """

    title: str
    truss: Truss
    deck: Deck
    permanent: PermanentLoads | None = field(default=None, kw_only=True)
    permits: Mapping[str, Permitted] = field(default_factory=dict, kw_only=True)
    impact: float | None = field(default=None, kw_only=True)
    units: UnitSystem = field(default_factory=UnitSystem, kw_only=True)
    missing: tuple[str, ...] = field(default=(), kw_only=True)
    sources: tuple[str, ...] = field(default=(), kw_only=True)

    def __post_init__(self) -> None:
        """Check that the parts belong together."""
        object.__setattr__(self, "permits", MappingProxyType(dict(self.permits)))
        stations_of(self.truss, self.deck.panel_points)
        for name in self.permits:
            self.truss.member(name)
        if self.impact is not None and not 0 <= self.impact <= _MOST_IMPACT:
            raise InputError(
                f"impact must be 0 to {_MOST_IMPACT:g} (30 % is 0.3), got {self.impact}", place="rating.impact"
            )

    def __reduce__(self) -> tuple[object, ...]:
        """Pickle by parts (a read-only mapping cannot be pickled)."""
        return (_rebuilt, (self.title, self.truss, self.deck, {
            "permanent": self.permanent, "permits": dict(self.permits), "impact": self.impact, "units": self.units,
            "missing": self.missing, "sources": self.sources,
        }))  # fmt: skip


def _rebuilt(title: str, truss: Truss, deck: Deck, rest: dict[str, object]) -> Bridge:
    """Make a bridge again from its pickled parts."""
    return Bridge(title, truss, deck, **rest)  # type: ignore[arg-type]  # rest holds what __reduce__ put there
