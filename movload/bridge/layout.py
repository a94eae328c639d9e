"""A plane truss said in the trade's words - form, panel lengths, depths - and written out as joints and bars.

The loaded chord is level at y = 0, x from 0; the other chord stands above it (through, pony) or below it (deck).
"""

from __future__ import annotations

import math
from dataclasses import dataclass, field
from typing import TYPE_CHECKING, Final

import numpy as np

from movload.arrays import Floats, frozen_floats
from movload.bridge.webs import ROLES, WEBS, Bar, Chords, Point
from movload.errors import InputError, MissingDataError, UnknownNameError, nearest_name

if TYPE_CHECKING:
    from collections.abc import Sequence

    from numpy.typing import ArrayLike

__all__ = ["DECKS", "FORMS", "MIDDLES", "ROLES", "Bar", "LaidOut", "Layout", "lay_out"]

FORMS: Final = ("pratt", "howe", "warren", "warren with verticals", "k", "baltimore")
DECKS: Final = ("through", "pony", "deck")
MIDDLES: Final = ("falling", "rising", "crossed")

# Fewest panels of a form, and the number its panels must be a multiple of (its halves must be alike).
_PANELS: Final = {
    "pratt": (2, 1),
    "howe": (2, 1),
    "warren": (2, 1),
    "warren with verticals": (2, 1),
    "k": (4, 2),
    "baltimore": (8, 4),
}


@dataclass(frozen=True, slots=True, eq=False)
class Layout:
    """A plane truss by its form, panel lengths and depths.

    Parameters
    ----------
    form
        One of FORMS. Each web is described at its function in ``movload.bridge.webs``.
    panels
        Panel lengths (n,) [m] from left to right, > 0, equal or not. n is at least 2; "k" needs an even n of at least
        4, "baltimore" a multiple of 4 of at least 8. "warren with verticals" needs an even n, because each end starts
        at the loaded chord's joint; an odd n is taken only when exactly one end tapers (the other, vertical end then
        starts at the other chord).
    depths
        Vertical distance between the chords [m]: one at each panel point (n + 1,), > 0 except at the two ends, where 0
        is an end that tapers to a point (an inclined end post) and more is a vertical end post. Two forms differ:
        "warren" takes one over (or under) the middle of each panel (n,), all > 0; "baltimore" one at each main panel
        point, that is every second one (n/2 + 1,).
    deck
        One of DECKS: "through" and "pony" are loaded on the bottom chord, "deck" on the top chord.
    middle
        One of MIDDLES, toward +x: the diagonal of the middle panel, which a "pratt" or "howe" with an odd number of
        panels has and no other truss. "falling" and "rising" are no mirror images of themselves; "crossed" is, and
        makes the truss once redundant. Nothing is assumed.

    Raises
    ------
    InputError
        A panel, depth or count of them that the form cannot have; a middle where there is none.
    UnknownNameError
        An unknown form, deck or middle.
    MissingDataError
        The middle panel's diagonal is not stated.
    """

    form: str
    panels: Floats
    depths: Floats
    deck: str = field(kw_only=True)
    middle: str | None = field(default=None, kw_only=True)

    def __post_init__(self) -> None:
        """Copy the arrays and check word by word, panel by panel, depth by depth."""
        object.__setattr__(self, "panels", _row("panels", self.panels))
        object.__setattr__(self, "depths", _row("depths", self.depths))
        _require_known("form", self.form, FORMS)
        _require_known("deck", self.deck, DECKS)
        self._check_panels()
        self._check_depths()
        self._check_turns()
        self._check_middle()

    @property
    def loaded(self) -> str:
        """Letter of the loaded chord's joints: "L", or "U" in a deck truss."""
        return "U" if self.deck == "deck" else "L"

    @property
    def _count(self) -> int:
        """Number of panels."""
        return self.panels.size

    @property
    def _depth_places(self) -> list[str]:
        """Where each depth is measured, in words."""
        if self.form == "warren":
            return [f"at the middle of panel {self._panel_name(i)}" for i in range(self._count)]
        return [f"at panel point {self.loaded}{i}" for i in range(0, self._count + 1, _main_step(self.form))]

    def _panel_name(self, panel: int) -> str:
        """Name a panel by its two panel points."""
        return f"{self.loaded}{panel}-{self.loaded}{panel + 1}"

    def _check_panels(self) -> None:
        """Refuse a panel without length and a number of panels that the form does not have."""
        for panel, length in enumerate(self.panels):
            if not (math.isfinite(length) and length > 0):
                rule = f"panel {self._panel_name(panel)} must be longer than 0 and finite, got {length:g} m"
                raise InputError(rule, place=f"layout.panels[{panel}]")
        least, multiple = _PANELS[self.form]
        if self._count < least or self._count % multiple:
            kind = {1: "", 2: "an even number, ", 4: "a multiple of 4, "}[multiple]
            rule = f'form "{self.form}" needs {kind}at least {least} panels, got {self._count}'
            raise InputError(rule, place="layout.panels")

    def _check_depths(self) -> None:
        """Refuse a wrong number of depths, and depths that are negative or close the truss where it may not close."""
        places = self._depth_places
        if self.depths.size != len(places):
            raise InputError(f"{self._depth_rule()}, got {self.depths.size}", place="layout.depths")
        for number, (where, depth) in enumerate(zip(places, self.depths, strict=True)):
            may_taper = self.form != "warren" and number in {0, len(places) - 1}
            if not (math.isfinite(depth) and (depth > 0 or (may_taper and depth == 0))):
                rule = "0 or more" if may_taper else "above 0"
                rule += "" if may_taper or self.form == "warren" else ", since only an end may taper to a point"
                raise InputError(
                    f"the depth {where} must be finite and {rule}; got {depth:g} m", place=f"layout.depths[{number}]"
                )

    def _depth_rule(self) -> str:
        """Say how many depths the form needs, and where."""
        each = {"warren": "at the middle of each panel", "baltimore": "at each main (every second) panel point"}
        where = each.get(self.form, "at each panel point")
        return f'form "{self.form}" needs one depth {where}: {len(self._depth_places)} for {self._count} panels'

    def _check_turns(self) -> None:
        """Refuse a Warren with verticals that cannot start at the loaded chord at both ends."""
        if self.form != "warren with verticals" or self._count % 2 == 0:
            return
        if np.count_nonzero(self.depths[[0, -1]]) != 1:
            raise InputError(
                f'form "{self.form}" needs an even number of panels (both ends start at the loaded chord; '
                f"an odd one only when exactly one end tapers), got {self._count}",
                place="layout.panels",
            )

    def _check_middle(self) -> None:
        """Ask for the middle panel's diagonal where there is one, and refuse it elsewhere."""
        exists = self.form in {"pratt", "howe"} and self._count % 2 == 1
        if exists and self.middle is None:
            raise MissingDataError(
                f'form "{self.form}" with {self._count} panels has a middle panel, '
                f"{self._panel_name(self._count // 2)}, whose diagonal must be stated: "
                '"falling" (toward +x), "rising" or "crossed"',
                place="layout.middle",
            )
        if not exists and self.middle is not None:
            raise InputError(
                f'only a "pratt" or "howe" with an odd number of panels has a middle diagonal, '
                f'got "{self.middle}" for form "{self.form}" with {self._count} panels',
                place="layout.middle",
            )
        if self.middle is not None:
            _require_known("middle", self.middle, MIDDLES)


@dataclass(frozen=True, slots=True)
class LaidOut:
    """A layout written out.

    Parameters
    ----------
    joints
        ``{"L0": (x, y)}`` [m]: L0 ... Ln below, U0 ... Un above, M i between them at panel point i; the joints of the
        loaded chord first. A tapered end has the loaded chord's joint only.
    bars
        In the order of ROLES, each role from left to right.
    panel_points
        Joints of the loaded chord from left to right.
    """

    joints: dict[str, Point]
    bars: tuple[Bar, ...]
    panel_points: tuple[str, ...]


def lay_out(layout: Layout) -> LaidOut:
    """Return the joints and bars of a layout.

    Held by a pinned and a sliding support the truss is stable and statically determinate (bars + 3 = 2 joints), but for
    a "crossed" middle panel, which has one bar more.
    """
    chords = Chords(layout.loaded, _places(layout.panels), _depths(layout))
    web = WEBS[layout.form](chords, layout.middle or "")
    joints = chords.joints | web.joints

    def by_role_and_place(bar: Bar) -> tuple[int, float]:
        return ROLES.index(bar.role), joints[bar.start][0] + joints[bar.end][0]

    bars = sorted([*chords.bars(), *web.bars], key=by_role_and_place)
    panel_points = tuple(f"{chords.loaded}{i}" for i in range(chords.panels + 1))
    return LaidOut(joints, tuple(bars), panel_points)


def _main_step(form: str) -> int:
    """Panels from one upright to the next."""
    return 2 if form == "baltimore" else 1


def _places(panels: Floats) -> tuple[float, ...]:
    """Return the x of each panel point [m], from 0."""
    return (0.0, *np.cumsum(panels).tolist())


def _depths(layout: Layout) -> dict[int, Point]:
    """Return x and depth [m] of the other chord's joints by number."""
    x, depths = np.array(_places(layout.panels)), layout.depths.tolist()
    if layout.form == "warren":
        middles = (x[:-1] + x[1:]) / 2
        return dict(enumerate(zip(middles.tolist(), depths, strict=True), start=1))
    step = _main_step(layout.form)
    return {number * step: (float(x[number * step]), depth) for number, depth in enumerate(depths)}


def _row(word: str, values: ArrayLike) -> Floats:
    """Return a read-only copy of one row of numbers."""
    row = frozen_floats(values)
    if row.ndim != 1:
        raise InputError(f"must be one row of numbers [m], got an array of shape {row.shape}", place=f"layout.{word}")
    return row


def _require_known(word: str, given: str, known: Sequence[str]) -> None:
    """Raise UnknownNameError unless the word given is one of those known."""
    if given not in known:
        choices = ", ".join(f'"{name}"' for name in known)
        raise UnknownNameError(
            f'"{given}" is not known; choose one of {choices}',
            place=f"layout.{word}",
            nearest=nearest_name(given, known),
        )
