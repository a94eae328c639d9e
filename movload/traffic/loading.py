"""What a vehicle file means: a loading is the envelope over its cases (laden or empty, truck or tandem with lane)."""

from __future__ import annotations

import math
from dataclasses import dataclass, field
from typing import TYPE_CHECKING, Final, Literal

from movload.errors import InputError, UnknownNameError, nearest_name

if TYPE_CHECKING:
    from movload.traffic.vehicle import Vehicle

KINDS: Final = ("routine", "legal", "design", "emergency", "permit", "farm", "forest", "trail", "crowd", "rail")
"""What a loading is in the eyes of a rule: load factors depend on it."""


@dataclass(frozen=True, slots=True)
class Fill:
    """Load that fills the bridge rather than moves: uniform [N/m] or a knife edge [N].

    ``where`` says how it is put: wherever it is adverse, outside the vehicle only, or at the stated ``x`` [m].
    """

    load: float
    shape: Literal["uniform", "knife edge"]
    where: Literal["adverse", "outside", "at"]
    x: tuple[float, float] | None = None


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
        Loads that fill the bridge.
    factor
        Multiplier on the whole case [-], above 0.
    lanes
        How many stand abreast; 0 leaves it to the crossing.
    relieving
        Part of each load that counts where it relieves the effect [-], 0 to 1: 1 for a real vehicle, 0 for a load model
        that leaves out what relieves, between them for axle weights known within a tolerance.
    """

    title: str
    moving: Vehicle | None
    fills: tuple[Fill, ...] = ()
    factor: float = 1.0
    lanes: int = field(default=0, kw_only=True)
    relieving: float = field(default=1.0, kw_only=True)

    def __post_init__(self) -> None:
        """Refuse a case that loads nothing."""
        if not 0.0 <= self.relieving <= 1.0:
            raise InputError(
                f"what counts where it relieves is 0 to 1, got {self.relieving}", place=f"case {self.title}"
            )
        if not (math.isfinite(self.factor) and self.factor > 0):
            raise InputError(f"a factor must be above 0, got {self.factor}", place=f"case {self.title}")
        if self.moving is None and not self.fills:
            raise InputError("a case needs a vehicle or a load that fills", place=f"case {self.title}")


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
        At least one.
    source
        Where its numbers come from, e.g. "AASHTO ..., from memory", or "invented"; "" when its file does not say.
    notes
        What every rating of it must say (a fixed spacing).
    dynamic
        Whether impact is put on it; not where the load model holds it already, or takes none.
    """

    title: str
    kind: str
    cases: tuple[Case, ...]
    source: str = field(default="", kw_only=True)
    notes: tuple[str, ...] = field(default=(), kw_only=True)
    dynamic: bool = field(default=True, kw_only=True)

    def __post_init__(self) -> None:
        """Check kind and cases."""
        if self.kind not in KINDS:
            raise UnknownNameError(
                f'kind "{self.kind}" is not one of {", ".join(KINDS)}',
                place="kind",
                nearest=nearest_name(self.kind, KINDS),
            )
        if not self.cases:
            raise InputError("a loading needs at least one case", place=self.title)

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
        """Weight of the heaviest vehicle over the cases [N], their factors left out: what a weighbridge would say."""
        return max((case.moving.gross for case in self.cases if case.moving), default=0.0)
