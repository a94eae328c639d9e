"""A bridge as one value: truss, deck and floor, what it carries for good, what its parts may carry, and who says so."""

from __future__ import annotations

from dataclasses import dataclass, field, fields
from types import MappingProxyType
from typing import TYPE_CHECKING, Final

from movload.bridge.deck import Deck, stations_of
from movload.bridge.floor import Floor
from movload.errors import InputError, MissingDataError
from movload.units import UnitSystem

if TYPE_CHECKING:
    from collections.abc import Mapping

    from movload.bridge.made import Made
    from movload.bridge.permanent import PermanentItems
    from movload.bridge.strengths import TypedStrength
    from movload.bridge.truss import Truss


_HAIR: Final = 1e-9  # m: round-off of typed places
_MOST_IMPACT: Final = 2.0  # no rule asks for as much; 30 for 30 % is caught


@dataclass(frozen=True, eq=False)
class Bridge:
    """Everything that was measured or typed about one bridge, checked.

    Parameters
    ----------
    title, truss, deck
        Its name, its plane truss (both trusses alike), and where the deck stands on it.
    permanent
        None when nobody has typed it; rating then asks for it.
    strengths
        Typed strengths by member name; they come before what sections and materials give.
    made
        What members are made of, by name: in the left truss and in the right one. A member with neither entry is not
        rated.
    floor
        Stringers, floorbeams and planks.
    impact
        Dynamic allowance added to the static live effect [-], 0 to 2; None when nobody has typed it.
    impact_rule
        Name of the rule that gives it instead; "" when nobody has said, and a method's own rule then counts.
    surface
        Riding surface, for rules that ask: "smooth", "minor", "severe".
    traffic
        Trucks a day one way, for factors that depend on it; infinite when it was said to be unknown, None when nobody
        has said.
    deflection_limit
        n in "live deflection at most span / n"; None when none is asked.
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
    permanent: PermanentItems | None = field(default=None, kw_only=True)
    strengths: Mapping[str, TypedStrength] = field(default_factory=dict, kw_only=True)
    made: Mapping[str, tuple[Made, Made]] = field(default_factory=dict, kw_only=True)
    floor: Floor = field(default_factory=Floor, kw_only=True)
    impact: float | None = field(default=None, kw_only=True)
    impact_rule: str = field(default="", kw_only=True)
    surface: str = field(default="", kw_only=True)
    traffic: float | None = field(default=None, kw_only=True)
    deflection_limit: float | None = field(default=None, kw_only=True)
    units: UnitSystem = field(default_factory=UnitSystem, kw_only=True)
    missing: tuple[str, ...] = field(default=(), kw_only=True)
    sources: tuple[str, ...] = field(default=(), kw_only=True)

    def __post_init__(self) -> None:
        """Check that the parts belong together."""
        object.__setattr__(self, "strengths", MappingProxyType(dict(self.strengths)))
        object.__setattr__(self, "made", MappingProxyType(dict(self.made)))
        stations_of(self.truss, self.deck.panel_points)
        for name in (*self.strengths, *self.made):
            self.truss.member(name)
        if self.impact is not None and not 0 <= self.impact <= _MOST_IMPACT:
            raise InputError(
                f"impact must be 0 to {_MOST_IMPACT:g} (30 % is 0.3), got {self.impact}", place="rating.impact"
            )
        for word, value in (("traffic", self.traffic), ("deflection_limit", self.deflection_limit)):
            if value is not None and not value >= 0:
                raise InputError(f"must be 0 or more, got {value}", place=f"rating.{word}")
        self._check_across()

    def _check_across(self) -> None:
        """Refuse a floor without the trusses' spacing, and kerbs beyond trusses that reach above the deck."""
        deck, floor = self.deck, self.floor
        if deck.truss_spacing is None:
            if floor.stringers is not None and "deck.truss_spacing" not in self.missing:
                raise MissingDataError("a floor is rated across the trusses: type it", place="deck.truss_spacing")
            return
        half = 0.5 * deck.truss_spacing
        brackets = floor.floorbeams.brackets if floor.floorbeams else (0.0, 0.0)
        if floor.stringers is not None and floor.floorbeams is not None:
            for name, z in zip(floor.stringers.names, floor.stringers.z, strict=True):
                if not -half - brackets[0] - _HAIR <= z <= half + brackets[1] + _HAIR:
                    raise InputError(
                        f"stringer {name} at {z:g} m stands beyond the trusses at {-half:g} and {half:g} m and what "
                        f"brackets reach, {brackets[0]:g} and {brackets[1]:g} m",
                        place="floor.floorbeams.brackets",
                    )
        if deck.roadway is None:
            return
        outside = deck.roadway.right < -half or deck.roadway.left > half
        if outside and deck.kind != "deck" and not any(brackets):
            said = f"a {deck.kind} truss" if deck.kind else "a truss whose deck.kind is not said"
            raise InputError(
                f"kerbs at {deck.roadway.right:g} and {deck.roadway.left:g} m stand outside the trusses at "
                f"{-half:g} and {half:g} m; {said} has no deck there unless floor.floorbeams.brackets carry it",
                place="deck.kerbs",
            )

    @property
    def edges(self) -> tuple[float, float]:
        """Right and left edge of what carries load across [m]: kerbs, trusses with brackets, outer stringers."""
        half = 0.5 * (self.deck.truss_spacing or 0.0)
        right, left = self.floor.floorbeams.brackets if self.floor.floorbeams else (0.0, 0.0)
        reach = [-half - right, half + left]
        if self.deck.roadway is not None:
            reach += [self.deck.roadway.right, self.deck.roadway.left]
        if self.floor.stringers is not None:
            reach += self.floor.stringers.z
        return min(reach), max(reach)

    def __reduce__(self) -> tuple[object, ...]:
        """Pickle by parts (a read-only mapping cannot be pickled)."""
        rest = {one.name: getattr(self, one.name) for one in fields(self) if one.kw_only}
        return (
            _rebuilt,
            (self.title, self.truss, self.deck, {**rest, "strengths": dict(self.strengths), "made": dict(self.made)}),
        )


def _rebuilt(title: str, truss: Truss, deck: Deck, rest: dict[str, object]) -> Bridge:
    """Make a bridge again from its pickled parts."""
    return Bridge(title, truss, deck, **rest)  # type: ignore[arg-type]  # rest holds what __reduce__ put there
