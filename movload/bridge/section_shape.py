"""What every measured shape tells, and the checks on its sizes.

A shape is drawn in its own axes about its *reference point*, as its class says; a piece of a section then puts that
point somewhere, turned and perhaps mirrored. Fillets, roundings and tapers are left out: type a tapering flange's mean
thickness.
"""

from __future__ import annotations

import math
from abc import ABC, abstractmethod
from types import MappingProxyType
from typing import TYPE_CHECKING, ClassVar, Final, Literal

from movload.errors import InputError

if TYPE_CHECKING:
    from collections.abc import Mapping

    from movload.bridge.section_elements import Element

Form = Literal["angle", "flanged", "tube", "bar", "round"]
Edges = Literal[0, 1, 2]
"""How many long edges of a plate are supported; 0 stands for a round wall, whose width is its outside diameter."""

_NO_PLATES: Final[Mapping[str, tuple[float, Edges]]] = MappingProxyType({})


class Shape(ABC):
    """A cross-section of one piece of metal or timber, as measured [m].

    Attributes
    ----------
    kind
        What the trade calls it.
    form
        Which closed formulas for twisting it follows.
    neck_yields
        Whether the metal at its neck counts as gross section too (the root of a thread does, an eyebar's head not).
    """

    __slots__ = ()
    kind: ClassVar[str]
    form: ClassVar[Form]
    neck_yields: ClassVar[bool] = False

    @abstractmethod
    def elements(self) -> tuple[Element, ...]:
        """Return what it is made of, in its own axes."""

    def neck(self) -> tuple[Element, ...]:
        """Return the metal at its connection where that is made unlike the rest; empty where it is not."""
        return ()

    def needs_for_net(self) -> str:
        """Return what nobody has typed and its net section needs; "" when nothing is missing."""
        return ""

    def plate_widths(self) -> Mapping[str, tuple[float, Edges]]:
        """Return width [m] and supported edges of each part that may buckle as a plate."""
        return _NO_PLATES


def require_sizes(kind: str, **sizes: float) -> None:
    """Refuse a size that is not a finite number above 0 [m]."""
    for name, size in sizes.items():
        if not (math.isfinite(size) and size > 0):
            raise InputError(f"must be above 0, got {size:g} m", place=f"{kind}.{name}")


def require_at_most(kind: str, name: str, size: float, limit: tuple[float, str]) -> None:
    """Refuse a size over what fits: the limit [m] and what it is."""
    most, said = limit
    if size > most:
        raise InputError(f"must be at most {said}, {most:g} m, got {size:g} m", place=f"{kind}.{name}")


def require_below(kind: str, name: str, size: float, limit: tuple[float, str]) -> None:
    """Refuse a size that reaches what it must stay below: the limit [m] and what it is."""
    most, said = limit
    if size >= most:
        raise InputError(f"must be below {said}, {most:g} m, got {size:g} m", place=f"{kind}.{name}")


def require_factors(sharing: float, shear_lag: float) -> None:
    """Refuse a sharing below 1 and a shear lag outside 0 to 1."""
    if not (math.isfinite(sharing) and sharing >= 1):
        raise InputError(f"worst bar over mean is at least 1, got {sharing:g}", place="sharing")
    if not 0 < shear_lag <= 1:
        raise InputError(f"U is above 0 and at most 1, got {shear_lag:g}", place="shear_lag")
