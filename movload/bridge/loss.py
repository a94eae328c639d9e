"""Metal gone from a member, as measured: how much, off which part, and where along it.

Each limit looks where it happens. Yield and squash take the least gross section anywhere along the member; buckling the
section at mid length; fracture the net section at the connections with the loss there. Losses at one place add up,
losses at different places do not. Only a loss that lies inside the bolted or riveted length may be left out of yield,
and the answer names it.
"""

from __future__ import annotations

import math
from dataclasses import dataclass, field
from typing import TYPE_CHECKING, Final, Literal, TypeAlias

from movload.bridge.section import Section
from movload.bridge.section_elements import Cut
from movload.bridge.section_typed import AreaAndRadii
from movload.errors import InputError, Note, UnknownNameError, nearest_name

if TYPE_CHECKING:
    from collections.abc import Sequence

CrossSection: TypeAlias = Section | AreaAndRadii
Place = Literal["start end", "middle", "end end"]

PLACES: Final[tuple[Place, ...]] = ("start end", "middle", "end end")
ENDS: Final[tuple[Place, ...]] = ("start end", "end end")
ALL_ALONG: Final = "all along"


def place_text(place: str) -> str:
    """Return a place along a bar in words; "" is the same everywhere."""
    words = {"start end": "at the end by its first joint", "end end": "at the end by its last joint",
             "middle": "at mid length"}  # fmt: skip
    return words.get(place, "the same all along")


@dataclass(frozen=True, slots=True)
class Loss:
    """Metal gone.

    Parameters
    ----------
    where
        "all along", "start end" (at the member's start joint), "end end" or "middle".
    piece, part
        Off what; "" means every piece, every part. The last word of a part means all of its kind ("flange").
    amount
        Off the part's thickness or size, both faces together [m].
    fraction
        Of the part's area as new [-]; of amount and fraction exactly one is typed.
    inside_connection
        Whether all of it lies within the bolted or riveted length of an end: it then counts in the net section and may
        be left out of yield.

    Raises
    ------
    UnknownNameError
        A place that is none.
    InputError
        No size, two sizes, one out of its range, or a loss inside a connection that is at no end.
    """

    where: str = ALL_ALONG
    piece: str = field(default="", kw_only=True)
    part: str = field(default="", kw_only=True)
    amount: float = field(default=0.0, kw_only=True)
    fraction: float = field(default=0.0, kw_only=True)
    inside_connection: bool = field(default=False, kw_only=True)

    def __post_init__(self) -> None:
        """Check place and size."""
        known = (ALL_ALONG, *PLACES)
        if self.where not in known:
            said = ", ".join(f'"{place}"' for place in known)
            raise UnknownNameError(
                f'"{self.where}" is no place along a member: {said}',
                place="loss.where",
                nearest=nearest_name(self.where, known),
            )
        for name, value, unit in (("amount", self.amount, " m"), ("fraction", self.fraction, "")):
            if not (math.isfinite(value) and value >= 0):
                raise InputError(f"must be above 0, got {value:g}{unit}", place=f"loss.{name}")
        if self.fraction > 1:
            raise InputError(f"at most all of it can be lost, 1, got {self.fraction:g}", place="loss.fraction")
        if (self.amount > 0) == (self.fraction > 0):
            said = f"type either an amount or a fraction above 0, got {self.amount:g} m and {self.fraction:g}"
            raise InputError(said, place="loss")
        if self.inside_connection and self.where not in ENDS:
            said = f'only a loss at "start end" or "end end" lies inside a connection, got "{self.where}"'
            raise InputError(said, place="loss.inside_connection")

    @property
    def subject(self) -> str:
        """What it is off, in words."""
        return ", ".join(word for word in (self.piece, self.part) if word) or "the whole section"

    @property
    def text(self) -> str:
        """How much of it is gone, in words [mm, %]."""
        size = f"{1e3 * self.amount:.4g} mm" if self.amount else f"{100 * self.fraction:.4g} %"
        return f"{size} off {self.subject}, {self.where}"


@dataclass(frozen=True, slots=True)
class LeastArea:
    """The least area along a member [m2] and where it is; as new beside it.

    ``place`` is "" where it is the same everywhere; ``left_out`` are the losses inside a connection that do not count.
    """

    area: float
    place: str
    as_new: float
    left_out: tuple[Loss, ...] = ()


@dataclass(frozen=True, slots=True)
class AsFound:
    """A section as new and, beside it, as found.

    Parameters
    ----------
    section
        As new.
    losses
        All that was measured.

    Raises
    ------
    InputError
        A loss of what is not there, or of more than is there, at any place.
    """

    section: CrossSection
    losses: tuple[Loss, ...] = ()

    def __post_init__(self) -> None:
        """Check the losses at every place along."""
        object.__setattr__(self, "losses", tuple(self.losses))
        for place in PLACES:
            with_loss(self.section, self.losses, place)

    @property
    def gross(self) -> LeastArea:
        """Least gross area anywhere: yield and squash."""
        return least_gross(self.section, self.losses)

    @property
    def middle(self) -> CrossSection:
        """Section at mid length: buckling."""
        return at_middle(self.section, self.losses)

    @property
    def net(self) -> LeastArea:
        """Least net area at the ends: fracture."""
        return net_at_ends(self.section, self.losses)

    @property
    def notes(self) -> tuple[Note, ...]:
        """What a reader must know: of the section, and which losses are left out of yield."""
        left_out = [
            Note(
                "loss-left-out-of-yield",
                self.section.title,
                f"{loss.text}: said to lie inside the connection; it counts in the net section and not in the gross.",
            )
            for loss in self.gross.left_out
        ]
        return (*self.section.notes, *left_out)


def with_loss(section: CrossSection, losses: Sequence[Loss], where: Place) -> CrossSection:
    """Return the section at one place along, with the losses there and those all along.

    Raises
    ------
    InputError
        More is lost there than there was, or the holes take out all that is left.
    UnknownNameError
        No such piece or part.
    """
    reduced = section
    for loss in losses:
        if loss.where in {where, ALL_ALONG}:
            cut = Cut(loss.part, amount=loss.amount, fraction=loss.fraction)
            try:
                reduced = reduced.with_cut(loss.piece, cut)
            except InputError as error:
                raise error.at(where if loss.where == where else ALL_ALONG) from None
    return reduced


def least_gross(section: CrossSection, losses: Sequence[Loss]) -> LeastArea:
    """Return the least gross area anywhere along; losses inside a connection are left out, and named."""
    counted = [loss for loss in losses if not loss.inside_connection]
    areas = {place: with_loss(section, counted, place).gross_area for place in PLACES}
    left_out = tuple(loss for loss in losses if loss.inside_connection)
    return LeastArea(*_least(areas), section.gross_area, left_out)


def at_middle(section: CrossSection, losses: Sequence[Loss]) -> CrossSection:
    """Return the section at mid length, which settles buckling."""
    return with_loss(section, losses, "middle")


def net_at_ends(section: CrossSection, losses: Sequence[Loss]) -> LeastArea:
    """Return the least net area at the two ends, with every loss there.

    Raises
    ------
    MissingDataError
        What the net section needs was not typed.
    """
    areas = {place: with_loss(section, losses, place).net_area for place in ENDS}
    return LeastArea(*_least(areas), section.net_area)


def _least(areas: dict[Place, float]) -> tuple[float, str]:
    """Return the least area and its place, "" where all are alike."""
    place = min(areas, key=lambda each: areas[each])
    alike = len(set(areas.values())) == 1
    return areas[place], "" if alike else place
