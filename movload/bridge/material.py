"""What a part is made of: a metal as typed or by the year built, or timber by its reference stresses."""

from __future__ import annotations

import math
from dataclasses import dataclass, field
from types import MappingProxyType
from typing import TYPE_CHECKING, Final

from movload.errors import InputError, MissingDataError, Note, UnknownNameError, nearest_name

if TYPE_CHECKING:
    from collections.abc import Mapping, Sequence

KINDS: Final = ("steel", "wrought iron", "cast iron", "timber")
PRODUCTS: Final = ("sawn", "glued laminated")
STRESSES: Final = ("tension", "compression", "bending", "shear", "stability")
"""What a timber's reference values are for; "stability" is the modulus of elasticity for stability, E_min."""
_PULLED: Final = frozenset({"tension", "moment", "hogging"})  # senses in which some fibre is in tension
_BRITTLE: Final = "cast iron breaks without warning and is not relied on in tension"
_NO_DEFAULT: Final = {
    "cast iron": f"no strength is taken from the year built: {_BRITTLE}; type what was measured",
    "timber": "no strength is taken from the year built: have the grade identified, type its reference stresses",
}


@dataclass(frozen=True, slots=True)
class Timber:
    """A timber's reference stresses and the factors that adjust them, all as typed.

    Parameters
    ----------
    product
        "sawn" or "glued laminated": which factors a standard asks for.
    stresses
        Reference values [Pa] by what they are for (STRESSES); one that nobody has typed is left out.
    factors
        Adjustment factors [-] by what they adjust and then by the standard's symbol ("CM", "Ct"); the load duration
        factor is not one of them, because it follows from the loads.

    Raises
    ------
    UnknownNameError
        A product or a stress that is none.
    InputError
        A stress or a factor that is not a finite number above 0.
    """

    product: str
    stresses: Mapping[str, float]
    factors: Mapping[str, Mapping[str, float]]

    def __post_init__(self) -> None:
        """Check every name and number, and keep read-only copies."""
        _require_known(self.product, PRODUCTS, "product")
        for use, stress in self.stresses.items():
            _require_known(use, STRESSES, f"stresses.{use}")
            _require_positive(stress, f"stresses.{use}", "Pa")
        for use, factors in self.factors.items():
            _require_known(use, STRESSES, f"factors.{use}")
            for symbol, factor in factors.items():
                _require_positive(factor, f"factors.{use}.{symbol}", "")
        frozen = {use: MappingProxyType(dict(factors)) for use, factors in self.factors.items()}
        object.__setattr__(self, "stresses", MappingProxyType(dict(self.stresses)))
        object.__setattr__(self, "factors", MappingProxyType(frozen))

    def __reduce__(self) -> tuple[object, ...]:
        """Pickle by parts (a read-only mapping cannot be pickled)."""
        return (Timber, (self.product, dict(self.stresses), {use: dict(own) for use, own in self.factors.items()}))


@dataclass(frozen=True, slots=True)
class Material:
    """What a part is made of.

    Parameters
    ----------
    title
        What it is called.
    kind
        One of KINDS.
    modulus
        Modulus of elasticity [Pa].
    density
        [kg/m3].
    source
        Where its values come from: a test, a drawing, a table, "typed".
    fy, fu
        Yield and ultimate stress [Pa] of a metal; for cast iron fy is what it may reach in compression, and fu may
        stay out. A timber has neither (nan).
    assumed
        Whether it was taken from the year built and not from the part itself.
    timber
        A timber's reference stresses.

    Raises
    ------
    UnknownNameError
        No such kind.
    MissingDataError
        A metal without its yield or ultimate stress, a timber without its reference stresses.
    InputError
        A value that is not a finite number above 0, fu below fy, or values of another kind of material.
    """

    title: str
    kind: str
    modulus: float = field(kw_only=True)
    density: float = field(kw_only=True)
    source: str = field(kw_only=True)
    fy: float = field(default=math.nan, kw_only=True)
    fu: float = field(default=math.nan, kw_only=True)
    assumed: bool = field(default=False, kw_only=True)
    timber: Timber | None = field(default=None, kw_only=True)

    def __post_init__(self) -> None:
        """Check every value."""
        place = f'material "{self.title}"'
        try:
            _require_known(self.kind, KINDS, "kind")
            _require_positive(self.modulus, "modulus", "Pa")
            _require_positive(self.density, "density", "kg/m3")
            if not self.source.strip():
                raise MissingDataError("say where the values come from", place="source")
            if self.kind == "timber":
                self._check_timber()
            else:
                self._check_metal()
        except InputError as error:
            raise error.at(place) from None

    def _check_timber(self) -> None:
        """Refuse a timber without reference stresses, or with a metal's."""
        if self.timber is None:
            raise MissingDataError("a timber needs its reference stresses", place="timber")
        for name, value in (("fy", self.fy), ("fu", self.fu)):
            if not math.isnan(value):
                raise InputError(f"a timber has reference stresses instead, got {value:g} Pa", place=name)

    def _check_metal(self) -> None:
        """Refuse a metal without yield or ultimate stress, or with a timber's."""
        if self.timber is not None:
            raise InputError(f"{self.kind} has no timber's reference stresses", place="timber")
        for name, value in (("fy", self.fy), ("fu", self.fu)):
            if math.isnan(value):
                if name == "fu" and self.kind == "cast iron":
                    return
                raise MissingDataError(f"{self.kind} needs it", place=name)
            _require_positive(value, name, "Pa")
        if self.fu < self.fy:
            raise InputError(f"the ultimate stress is at least fy, {self.fy:g} Pa, got {self.fu:g} Pa", place="fu")

    def require_sense(self, sense: str, subject: str) -> None:
        """Refuse cast iron wherever a fibre of it would be in tension; ``subject`` is the part that asks.

        Raises
        ------
        InputError
            Cast iron asked for a strength in tension, or in bending.
        """
        if self.kind == "cast iron" and sense in _PULLED:
            raise InputError(f'{_BRITTLE}: no strength in {sense} is given for "{self.title}"', place=subject)

    def notes(self, subject: str) -> tuple[Note, ...]:
        """Return what a reader of any strength of this material must know."""
        notes = []
        if self.assumed:
            text = f"{self.title}: strength assumed from metal and year built, not measured"
            notes.append(Note("material-assumed", subject, text, self.source))
        if self.kind == "cast iron":
            notes.append(Note("cast-iron", subject, f"{self.title}: {_BRITTLE}; look for cracks and hollows"))
        return tuple(notes)


@dataclass(frozen=True, slots=True)
class Period:
    """What a metal of unknown grade is taken to be when it was built into a bridge from one year to another.

    ``first`` and ``last`` are years, both included; ``last`` is infinite for what still holds. Stresses [Pa], modulus
    [Pa], density [kg/m3].
    """

    kind: str
    first: int
    last: float
    fy: float
    fu: float = field(kw_only=True)
    modulus: float = field(kw_only=True)
    density: float = field(kw_only=True)
    source: str = field(kw_only=True)

    def __post_init__(self) -> None:
        """Refuse a period that holds no year."""
        if self.last < self.first:
            raise InputError(f"ends before it begins, {self.last:g}", place=f"{self.kind} from {self.first}")


def material_by_year(periods: Sequence[Period], kind: str, year: int, *, today: int) -> Material:
    """Return what a metal of unknown grade is taken to be, by the year the bridge was built.

    Parameters
    ----------
    periods
        From data, those of one kind in order of years.
    kind
        One of KINDS; the grade of cast iron or of timber is never taken from a year.
    year, today
        Year built, and the present one.

    Raises
    ------
    UnknownNameError
        No such kind.
    InputError
        A kind without a default, a year before that metal was built with, or one that has not come yet.
    """
    _require_known(kind, KINDS, "kind")
    of_kind = [period for period in periods if period.kind == kind]
    if not of_kind:
        raise InputError(_NO_DEFAULT.get(kind, "no strength is known by the year built"), place=kind)
    first = min(period.first for period in of_kind)
    if year < first:
        raise InputError(f"nothing was built of {kind} before {first}, got {year}", place="year")
    if year > today:
        raise InputError(f"nothing is built yet after {today}, got {year}", place="year")
    found = next((period for period in of_kind if period.first <= year <= period.last), None)
    if found is None:
        raise InputError(f"no strength of {kind} is known for that year, got {year}", place="year")
    return Material(
        f"{kind} of unknown grade, {year}", kind, modulus=found.modulus, density=found.density,
        source=found.source, fy=found.fy, fu=found.fu, assumed=True,
    )  # fmt: skip


def _require_known(name: str, known: Sequence[str], place: str) -> None:
    """Refuse a name that is not one of those known."""
    if name not in known:
        raise UnknownNameError(
            f'"{name}" is not one of {", ".join(known)}', place=place, nearest=nearest_name(name, known)
        )


def _require_positive(value: float, place: str, unit: str) -> None:
    """Refuse what is not a finite number above 0."""
    if not (math.isfinite(value) and value > 0.0):
        raise InputError(f"must be a finite number above 0, got {value:g} {unit}".rstrip(), place=place)
