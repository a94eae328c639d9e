"""What a vehicle file means: a loading is the envelope over its cases (laden or empty, truck or tandem with lane)."""

from __future__ import annotations

import math
from dataclasses import dataclass, field
from typing import TYPE_CHECKING, Final

from movload.errors import InputError
from movload.traffic.fill import Fill, require_known
from movload.traffic.vehicle import MOST_AXLES

if TYPE_CHECKING:
    from movload.traffic.vehicle import Vehicle

__all__ = ["KINDS", "Case", "Fill", "Following", "Loading"]

KINDS: Final = ("routine", "legal", "design", "emergency", "permit", "farm", "forest", "trail", "crowd", "rail")
"""What a loading is in the eyes of a rule: load factors depend on it."""


@dataclass(frozen=True, slots=True)
class Following:
    """How many of one vehicle may follow each other in a lane, all heading one way; any may be absent.

    Parameters
    ----------
    most
        At most so many, 1 or more.
    headway
        Least distance from the last axle of one to the first axle of the next [m], 0 or more; it has no upper end.
    ordered
        Whether they keep the order in which they are written, which matters only where they differ.

    Raises
    ------
    InputError
        Fewer than one, or a headway below 0.
    """

    most: int
    headway: float
    ordered: bool = False

    def __post_init__(self) -> None:
        """Check the count and the headway."""
        if self.most < 1:
            raise InputError(f"a convoy is of 1 or more, got at most {self.most}", place="most")
        if math.isnan(self.headway) or self.headway < 0:
            raise InputError(f"a headway must be 0 or more, got {self.headway:g} m", place="headway")


@dataclass(frozen=True, slots=True, eq=False)
class Case:
    """One state of a loading: what moves, what fills, and by how much both count.

    Parameters
    ----------
    title
        "laden", "tandem + lane"; the loading's own title when there is one case only.
    moving
        The vehicle; None when only fills act.
    fills
        Loads that fill the bridge, all of them at once.
    factor
        Multiplier on the whole case [-], above 0.
    lanes
        How many stand abreast; 0 leaves it to the crossing.
    relieving
        Part of each load of the vehicle that counts where it relieves the effect [-], 0 to 1: 1 for a real vehicle, 0
        for a load model that leaves out what relieves, between them for axle weights known within a tolerance t: then
        (1 - t) / (1 + t), with 1 + t in the factor. Fills count only where they are adverse anyway.
    convoy
        How many of the vehicle may follow each other; None for one alone.
    above
        The case counts only for loaded lengths or spans above this [m]; 0 for all.
    continuous
        Whether it counts only for trusses over more than two bearings.

    Raises
    ------
    InputError
        Nothing that loads, a number out of its range, or a fill or a convoy that has no vehicle to go with.
    """

    title: str
    moving: Vehicle | None
    fills: tuple[Fill, ...] = ()
    factor: float = 1.0
    lanes: int = field(default=0, kw_only=True)
    relieving: float = field(default=1.0, kw_only=True)
    convoy: Following | None = field(default=None, kw_only=True)
    above: float = field(default=0.0, kw_only=True)
    continuous: bool = field(default=False, kw_only=True)

    def __post_init__(self) -> None:
        """Refuse a case that loads nothing, and what does not go together."""
        place = f"case {self.title}"
        if not 0.0 <= self.relieving <= 1.0:
            raise InputError(f"what counts where it relieves is 0 to 1, got {self.relieving}", place=place)
        if not (math.isfinite(self.factor) and self.factor > 0):
            raise InputError(f"a factor must be above 0, got {self.factor}", place=place)
        if not (math.isfinite(self.above) and self.above >= 0):
            raise InputError(f"it counts for lengths above 0 m or more, got {self.above:g} m", place=place)
        if self.moving is None and not self.fills:
            raise InputError("a case needs a vehicle or a load that fills", place=place)
        if self.moving is None and any(fill.where == "outside" for fill in self.fills):
            raise InputError("a load outside the vehicle needs a vehicle", place=f"{place}: fills")
        if self.convoy is not None:
            _check_convoy(self.convoy, self.moving, f"{place}: convoy")


@dataclass(frozen=True, slots=True, eq=False)
class Loading:
    """What crosses: the peak is the envelope over its cases.

    Parameters
    ----------
    title
        What it is called.
    kind
        One of KINDS.
    cases
        At least one, each under a title of its own.
    source
        Where its numbers come from, e.g. "AASHTO ..., from memory", or "invented"; "" when its file does not say.
    notes
        What every rating of it must say (a fixed spacing).
    dynamic
        Whether impact is put on it; not where the load model holds it already, or takes none.
    weight
        The weight that a rule gives it [N], above 0: of a lane load the truck's it stands for; nan where it is that of
        its heaviest vehicle.
    """

    title: str
    kind: str
    cases: tuple[Case, ...]
    source: str = field(default="", kw_only=True)
    notes: tuple[str, ...] = field(default=(), kw_only=True)
    dynamic: bool = field(default=True, kw_only=True)
    weight: float = field(default=math.nan, kw_only=True)

    def __post_init__(self) -> None:
        """Check kind, cases and weight."""
        require_known("kind", self.kind, KINDS, "kind ")
        if not self.cases:
            raise InputError("a loading needs at least one case", place=self.title)
        titles = [case.title for case in self.cases]
        for number, title in enumerate(titles):
            if title in titles[:number]:
                raise InputError(f'"{title}" is the title of an earlier case already', place=f"cases[{number}].title")
        if not math.isnan(self.weight) and not (math.isfinite(self.weight) and self.weight > 0):
            raise InputError(f"a weight must be above 0, got {self.weight:g} N", place="weight")

    @classmethod
    def of(
        cls, vehicle: Vehicle, kind: str = "routine", *, source: str = "", notes: tuple[str, ...] = (),
        dynamic: bool = True,
    ) -> Loading:  # fmt: skip
        """Return the loading that is one vehicle in one state."""
        case = Case(vehicle.title, vehicle)
        return cls(vehicle.title, kind, (case,), source=source, notes=notes, dynamic=dynamic)

    @property
    def gross(self) -> float:
        """Weight of the heaviest vehicle over the cases [N], their factors left out: what a weighbridge would say.

        The weight that its rule gives it, where there is one; 0 for loads that only fill.
        """
        if not math.isnan(self.weight):
            return self.weight
        return max((case.moving.gross for case in self.cases if case.moving), default=0.0)


def _check_convoy(convoy: Following, moving: Vehicle | None, place: str) -> None:
    """Refuse a convoy of nothing, behind a load without end, or of more axles than are looked at."""
    if moving is None:
        raise InputError("a convoy needs a vehicle", place=place)
    if moving.tail is not None:
        raise InputError("nothing can follow a load that never ends: no convoy with a tail", place=place)
    axles = convoy.most * max(moving.loads.size, len(moving.strips))
    if axles > MOST_AXLES:
        raise InputError(f"a convoy has at most {MOST_AXLES} axles or strips in all, got {axles}", place=place)
