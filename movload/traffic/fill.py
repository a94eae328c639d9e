"""Load that fills a bridge rather than moves: a lane load, a knife edge, a crowd, stored material."""

from __future__ import annotations

import math
from dataclasses import dataclass, field
from typing import TYPE_CHECKING, Final

import numpy as np

from movload.errors import InputError, UnknownNameError, nearest_name

if TYPE_CHECKING:
    from collections.abc import Sequence

    from movload.arrays import Floats

SHAPES: Final = ("uniform", "knife edge")
ACROSS: Final = ("lane", "full width", "left half", "right half")
"""Where across a fill lies: with the vehicle, or on the roadway or its half, left looking toward +x."""
PLACES_ALONG: Final = ("adverse", "outside", "at")
DENSITIES: Final = ("en crowd",)
"""Loads per area that depend on the length they cover (see `crowd_density`)."""


def crowd_density(length: Floats | float) -> Floats:
    """Return a dense crowd's load [N/m2] by the length it covers [m]: q = 2.0 + 120 / (L + 30) kN/m2, 2.5 to 5.

    References
    ----------
    EN 1991-2, 5.3.2.1; from memory.

    Examples
    --------
    >>> [float(crowd_density(length)) for length in (0.0, 30.0, 400.0)]
    [5000.0, 4000.0, 2500.0]
    """
    return np.clip(2000.0 + 120e3 / (np.asarray(length, dtype=np.float64) + 30.0), 2500.0, 5000.0)


@dataclass(frozen=True, slots=True)
class Fill:
    """Load that fills the bridge rather than moves. Loads act down and are 0 or more.

    Parameters
    ----------
    load
        Of both sides of a lane, or of all the width, together [N/m]; per area [N/m2] where ``per_area``; of a knife
        edge [N]. Where a ``density`` is named, the greatest that it gives; left out, that is taken.
    shape
        One of SHAPES: a uniform load, or a knife edge, one load across the bridge wherever it is worst.
    where
        One of PLACES_ALONG: wherever it is adverse; outside the vehicle only, adverse there; or at ``x``.
    x
        From where to where it lies where it is "at" a place [m]: two x of the bridge, increasing; of a knife edge both
        the same.
    web_load
        What a knife edge is for webs, shears and reactions [N]; nan where it is ``load`` for every row.
    impact
        Whether the impact of its loading is put on it too.
    gauge
        Between the middles of its two sides where it lies in a lane [m]; nan where it acts along its middle.
    per_area
        Whether the load is one per area, so that its width counts: on the roadway or one half of it.
    across
        One of ACROSS.
    clear
        How far it keeps away before and behind the vehicle [m], 0 or more, where it lies "outside".
    density
        One of DENSITIES, where the load per area falls with the length it covers; "" elsewhere.

    Raises
    ------
    InputError
        A load, a length or a place that is none, or words that do not go together.
    UnknownNameError
        A word that is not known; the nearest is named.
    """

    load: float = math.nan
    shape: str = "uniform"
    where: str = "adverse"
    x: tuple[float, float] | None = None
    web_load: float = field(default=math.nan, kw_only=True)
    impact: bool = field(default=True, kw_only=True)
    gauge: float = field(default=math.nan, kw_only=True)
    per_area: bool = field(default=False, kw_only=True)
    across: str = field(default="lane", kw_only=True)
    clear: tuple[float, float] = field(default=(0.0, 0.0), kw_only=True)
    density: str = field(default="", kw_only=True)

    def __post_init__(self) -> None:
        """Check word by word, then what goes together."""
        require_known("shape", self.shape, SHAPES)
        require_known("across", self.across, ACROSS)
        require_known("where", self.where, PLACES_ALONG)
        if self.density:
            require_known("density", self.density, DENSITIES)
            object.__setattr__(self, "per_area", True)
            if math.isnan(self.load):
                object.__setattr__(self, "load", float(crowd_density(0.0)))
        _require_number("load", self.load, "a load that fills")
        self._check_knife_edge()
        self._check_width()
        self._check_place()

    def load_over(self, length: float) -> float:
        """Return the load (as ``load``) where it covers a length [m]: less on a longer one if its density falls."""
        return min(self.load, float(crowd_density(length))) if self.density else self.load

    def _check_knife_edge(self) -> None:
        """Refuse a knife edge per area, and a second load of what is no knife edge."""
        if self.shape == "knife edge":
            if self.per_area:
                raise InputError("a knife edge is one load and has none per area", place="per_area")
            if not math.isnan(self.web_load):
                _require_number("web_load", self.web_load, "what a knife edge is for webs")
        elif not math.isnan(self.web_load):
            raise InputError(f"only a knife edge has one, got {self.web_load:g} on a uniform load", place="web_load")

    def _check_width(self) -> None:
        """Refuse an area without a width, and a gauge where the load is spread over all of one."""
        if self.per_area and self.across == "lane":
            widths = ", ".join(f'"{word}"' for word in ACROSS[1:])
            raise InputError(f"a load per area needs to know how wide it lies: {widths}", place="across")
        if not math.isnan(self.gauge):
            _require_number("gauge", self.gauge, "a gauge")
            if self.gauge == 0:
                raise InputError("a gauge must be above 0, got 0 m", place="gauge")
            if self.across != "lane":
                raise InputError(f'"{self.across}" leaves it no gauge, got {self.gauge:g} m', place="gauge")

    def _check_place(self) -> None:
        """Refuse a place along the bridge that is none, or that nothing asks for."""
        for clear in self.clear:
            _require_number("clear", clear, "a clear distance")
        if any(self.clear) and self.where != "outside":
            raise InputError('a clear distance goes with where = "outside"', place="clear")
        if (self.x is None) != (self.where != "at"):
            raise InputError('a place x goes with where = "at", and that with a place', place="where")
        if self.shape == "knife edge" and self.where == "outside":
            raise InputError('a knife edge stands wherever it is adverse, or at a place, got "outside"', place="where")
        if self.x is not None:
            _check_stretch(self.x, self.shape)


def require_known(place: str, word: str, known: Sequence[str], lead: str = "") -> None:
    """Refuse a word that is none of those known."""
    if word not in known:
        said = f'{lead}"{word}" is not one of {", ".join(known)}'
        raise UnknownNameError(said, place=place, nearest=nearest_name(word, known))


def _require_number(place: str, value: float, what: str) -> None:
    """Refuse what is no finite number of 0 or more."""
    if not (math.isfinite(value) and value >= 0):
        raise InputError(f"{what} must be a finite number, 0 or more, got {value:g}", place=place)


def _check_stretch(x: tuple[float, float], shape: str) -> None:
    """Refuse a stretch that is reversed or without length, and a knife edge that has a length."""
    first, last = x
    if not (math.isfinite(first) and math.isfinite(last)):
        raise InputError(f"a place is finite, got {first:g} to {last:g} m", place="at")
    if shape == "knife edge":
        if first != last:
            raise InputError(f"a knife edge stands at one x, got {first:g} to {last:g} m", place="at")
    elif first >= last:
        raise InputError(f"a stretch runs from the least x to the greatest, got {first:g} to {last:g} m", place="at")
