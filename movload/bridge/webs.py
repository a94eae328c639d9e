"""Which bars stand between the chords of each form of truss, named as the trade names them.

Every truss is seen with +x to the right. A bar is written from left to right, an upright one from the top down. What a
form means is said at its function; the places of the joints come from the chords.
"""

from __future__ import annotations

from dataclasses import dataclass, field
from itertools import pairwise
from typing import TYPE_CHECKING, Final, TypeAlias

if TYPE_CHECKING:
    from collections.abc import Callable, Mapping

Point: TypeAlias = "tuple[float, float]"

ROLES: Final = (
    "top chord",
    "bottom chord",
    "end posts",
    "verticals",
    "diagonals",
    "sub-verticals",
    "sub-diagonals",
)


@dataclass(frozen=True, slots=True)
class Bar:
    """A bar between two joints, by what the trade calls it; its section is not known yet.

    Parameters
    ----------
    start, end
        Names of its joints.
    role
        One of ROLES:

        - "top chord", "bottom chord": the bars along the upper and the lower edge.
        - "end posts": whatever closes the truss at an end: the inclined bar where the end tapers to a point (both
          halves of it in a "baltimore"), the upright one where it does not.
        - "verticals": every other bar upright at a panel point, hanger or post, also the hanger nearest an end; both
          halves where a K meets it.
        - "diagonals": the inclined bars between the chords; both halves where a "baltimore" divides them.
        - "sub-verticals", "sub-diagonals": the short bars that carry the panel points a "baltimore" adds.
    """

    start: str
    end: str
    role: str


@dataclass(frozen=True, slots=True)
class Chords:
    """The two chords before a web is put between them.

    Parameters
    ----------
    loaded
        Letter of the loaded chord: "L" or "U".
    places
        x [m] of each panel point, from 0; the loaded chord has a joint at each, at y = 0.
    depths
        ``{number: (x, depth)}`` [m] of the other chord's joints from left to right; a depth of 0 is an end that tapers
        to a point, where the other chord has no joint.
    """

    loaded: str
    places: tuple[float, ...]
    depths: Mapping[int, Point]

    @property
    def panels(self) -> int:
        """Number of panels."""
        return len(self.places) - 1

    @property
    def other(self) -> str:
        """Letter of the other chord."""
        return "U" if self.loaded == "L" else "L"

    @property
    def joints(self) -> dict[str, Point]:
        """Place of each joint of both chords [m]: the loaded chord's first, each from left to right."""
        side = 1.0 if self.loaded == "L" else -1.0
        near = {f"{self.loaded}{i}": (x, 0.0) for i, x in enumerate(self.places)}
        return near | {f"{self.other}{i}": (x, side * depth) for i, (x, depth) in self.depths.items() if depth > 0}

    def tapers(self, point: int) -> bool:
        """Whether the two chords meet at this panel point."""
        return not self.depths[point][1]

    def bars(self) -> list[Bar]:
        """Return the bars of both chords."""
        roles = {"U": "top chord", "L": "bottom chord"}
        far = [i for i, (_, depth) in self.depths.items() if depth > 0]
        rows = ((self.loaded, list(range(self.panels + 1))), (self.other, far))
        return [
            Bar(f"{letter}{i}", f"{letter}{j}", roles[letter]) for letter, points in rows for i, j in pairwise(points)
        ]

    def upright(self, point: int) -> list[Bar]:
        """Return the bar between the chords at a panel point; none where they meet."""
        if self.tapers(point):
            return []
        role = "end posts" if point in {0, self.panels} else "verticals"
        return [Bar(f"U{point}", f"L{point}", role)]

    def uprights(self) -> list[Bar]:
        """Return the uprights at all panel points where the other chord has a joint."""
        return [bar for point in self.depths for bar in self.upright(point)]

    def brace(self, left: int, right: int, direction: str) -> list[Bar]:
        """Return the diagonal between two panel points; where the chords meet at one of them it is the end post."""
        if self.tapers(left):
            return [Bar(f"{self.loaded}{left}", f"{self.other}{right}", "end posts")]
        if self.tapers(right):
            return [Bar(f"{self.other}{left}", f"{self.loaded}{right}", "end posts")]
        falling = Bar(f"U{left}", f"L{right}", "diagonals")
        rising = Bar(f"L{left}", f"U{right}", "diagonals")
        return {"falling": [falling], "rising": [rising], "crossed": [falling, rising]}[direction]


@dataclass(frozen=True, slots=True)
class Web:
    """The bars between the chords, and the joints [m] that belong to neither chord."""

    bars: list[Bar]
    joints: dict[str, Point] = field(default_factory=dict)


def pratt(chords: Chords, middle: str) -> Web:
    """Return uprights, and diagonals that fall towards midspan: in tension under a load on the whole span."""
    return _braced(chords, _halves(chords.panels, "falling", middle))


def howe(chords: Chords, middle: str) -> Web:
    """Return uprights, and diagonals that rise towards midspan: compressed under a load on the whole span."""
    return _braced(chords, _halves(chords.panels, "rising", middle))


def warren_with_verticals(chords: Chords, _middle: str) -> Web:
    """Return uprights, and diagonals that rise and fall in turn, starting at the loaded chord's end joint.

    A vertical end changes nothing in the web: it adds the end post and the last bar of the other chord. With an odd
    number of panels only one end can start at the loaded chord's joint: the tapered one, where no other is possible.
    """
    starts_at_loaded = chords.panels % 2 == 0 or chords.tapers(0)
    turn = ("rising", "falling") if starts_at_loaded == (chords.loaded == "L") else ("falling", "rising")
    return _braced(chords, [turn[panel % 2] for panel in range(chords.panels)])


def warren(chords: Chords, _middle: str) -> Web:
    """Return the zigzag alone: the other chord's joint i stands over (or under) the middle of the i-th panel."""
    near, far, last = chords.loaded, chords.other, chords.panels
    steps = [(f"{near}{i - 1}", f"{far}{i}", f"{near}{i}") for i in range(1, last + 1)]
    path = [pair for left, apex, right in steps for pair in ((left, apex), (apex, right))]
    ends = {path[0], path[-1]}
    return Web([Bar(*pair, "end posts" if pair in ends else "diagonals") for pair in path])


def k_web(chords: Chords, _middle: str) -> Web:
    """Return uprights halved by a joint M, from which two diagonals run to both chords nearer midspan.

    The end panels hold no K: their bar is the end post, or falls towards midspan from a vertical end. The upright at
    midspan is whole.
    """
    at, half, last = chords.joints, chords.panels // 2, chords.panels
    middles = {f"M{i}": (chords.places[i], (at[f"U{i}"][1] + at[f"L{i}"][1]) / 2) for i in range(1, last) if i != half}
    uprights = [piece for bar in chords.uprights() for piece in _halved(bar, middles)]
    left = [Bar(f"M{i}", f"{chord}{i + 1}", "diagonals") for i in range(1, half) for chord in "UL"]
    right = [Bar(f"{chord}{i - 1}", f"M{i}", "diagonals") for i in range(half + 1, last) for chord in "UL"]
    ends = chords.brace(0, 1, "falling"), chords.brace(last - 1, last, "rising")
    return Web([*uprights, *ends[0], *left, *right, *ends[1]], middles)


def baltimore(chords: Chords, _middle: str) -> Web:
    """Return a Pratt over the main (even) panel points, each main panel divided at its odd panel point i.

    The joint M i stands on the main diagonal (or end post). A sub-vertical joins it to the loaded chord's joint i, a
    sub-diagonal to the end of the loaded chord's main panel that the main diagonal does not reach. The sub-diagonal is
    a strut in a through or pony truss (the sub-vertical hangs the deck from M) and works as a tie in a deck truss.
    """
    directions = _halves(chords.panels // 2, "falling", "")
    web = Web(chords.uprights())
    for direction, left in zip(directions, range(0, chords.panels, 2), strict=True):
        (main,) = chords.brace(left, left + 2, direction)
        web.joints[f"M{left + 1}"] = _between(chords, main, left + 1)
        web.bars.extend(_divided(chords, main, left))
    return web


WEBS: Final[Mapping[str, Callable[[Chords, str], Web]]] = {
    "pratt": pratt,
    "howe": howe,
    "warren": warren,
    "warren with verticals": warren_with_verticals,
    "k": k_web,
    "baltimore": baltimore,
}


def _braced(chords: Chords, directions: list[str]) -> Web:
    """Uprights at the panel points and one diagonal a panel in the direction given for it."""
    braces = [bar for panel, direction in enumerate(directions) for bar in chords.brace(panel, panel + 1, direction)]
    return Web([*chords.uprights(), *braces])


def _halves(panels: int, left: str, middle: str) -> list[str]:
    """Direction of each panel's diagonal: the right half mirrors the left, an odd middle is as stated."""
    right = "rising" if left == "falling" else "falling"
    half = panels // 2
    return [left] * half + [middle] * (panels % 2) + [right] * half


def _halved(bar: Bar, middles: Mapping[str, Point]) -> list[Bar]:
    """Both halves of an upright that has a joint M, else the upright itself."""
    middle = f"M{bar.start[1:]}"
    if middle not in middles:
        return [bar]
    return [Bar(bar.start, middle, bar.role), Bar(middle, bar.end, bar.role)]


def _between(chords: Chords, bar: Bar, point: int) -> Point:
    """Place on a bar's line at a panel point's x."""
    (x0, y0), (x1, y1) = chords.joints[bar.start], chords.joints[bar.end]
    x = chords.places[point]
    return x, y0 + (y1 - y0) * (x - x0) / (x1 - x0)


def _divided(chords: Chords, main: Bar, left: int) -> list[Bar]:
    """Both halves of a main diagonal, the sub-vertical and the sub-diagonal of the main panel from ``left``."""
    middle, near = f"M{left + 1}", chords.loaded
    point = f"{near}{left + 1}"
    upper, lower = (point, middle) if near == "U" else (middle, point)
    # The main diagonal reaches the loaded chord at one end of the main panel; the sub-diagonal takes the other end.
    sub = (middle, f"{near}{left + 2}") if main.start == f"{near}{left}" else (f"{near}{left}", middle)
    return [
        Bar(main.start, middle, main.role),
        Bar(middle, main.end, main.role),
        Bar(upper, lower, "sub-verticals"),
        Bar(*sub, "sub-diagonals"),
    ]
