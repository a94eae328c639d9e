"""The roadway: kerbs, how near a wheel comes to them, and where across a vehicle keeps by the name of its place.

z is measured from the bridge's centre line, positive to the left looking toward +x.
"""

from __future__ import annotations

import math
from dataclasses import dataclass, field
from typing import Final

from movload.errors import InputError, UnknownNameError, nearest_name

PLACES: Final = ("anywhere", "left kerb", "right kerb", "own lane", "centre line", "offset")
BETWEEN: Final = 1.2  # m between neighbours' wheels (4 ft); common practice, no source
_HAIR: Final = 1e-9  # m: round-off of typed widths


@dataclass(frozen=True, slots=True)
class Roadway:
    """Where wheels may stand across the deck.

    Parameters
    ----------
    right, left
        z of the kerbs' faces [m], the left one greater.
    clearance
        Least distance from a kerb to the outermost wheel's centre [m], 0 or more.
    between
        Least distance between the nearest wheels of vehicles side by side [m], above 0.
    keeps
        "right" or "left": the side on which traffic keeps, looking its own way.
    """

    right: float
    left: float
    clearance: float = field(kw_only=True)
    between: float = field(default=BETWEEN, kw_only=True)
    keeps: str = field(default="right", kw_only=True)

    def __post_init__(self) -> None:
        """Refuse kerbs that cross and distances that are none."""
        if not (math.isfinite(self.right) and math.isfinite(self.left) and self.left > self.right):
            raise InputError(
                f"the kerbs cross: the right one stands at {self.right:g} m, the left one at {self.left:g} m",
                place="deck.kerbs",
            )
        if not (math.isfinite(self.clearance) and self.clearance >= 0):
            raise InputError(f"must be 0 or more, got {self.clearance} m", place="deck.clearance")
        if not (math.isfinite(self.between) and self.between > 0):
            raise InputError(f"must be above 0, got {self.between} m", place="deck.between")
        if self.keeps not in {"right", "left"}:
            near = nearest_name(self.keeps, ("right", "left"))
            raise UnknownNameError(f'"{self.keeps}" is neither right nor left', place="deck.keeps", nearest=near)

    @property
    def middle(self) -> float:
        """Half way between the kerbs [m]."""
        return 0.5 * (self.right + self.left)

    @property
    def width(self) -> float:
        """From kerb to kerb [m]."""
        return self.left - self.right

    def room(self, gauge: float) -> tuple[float, float]:
        """Return the range of a vehicle's middle [m], its outermost wheels' centres ``gauge`` apart [m].

        Raises
        ------
        InputError
            It is wider than the kerbs leave.
        """
        low, high = self.right + self.clearance + 0.5 * gauge, self.left - self.clearance - 0.5 * gauge
        if high < low - _HAIR:
            raise InputError(
                f"wheels {gauge:g} m apart do not fit: {self.width:g} m between the kerbs less {self.clearance:g} m on "
                f"either side leave {self.width - 2.0 * self.clearance:g} m",
                place="deck.kerbs",
            )
        return min(low, high), max(low, high)

    def abreast(self, gauge: float) -> int:
        """Return how many vehicles of a gauge fit side by side, at least 1.

        The most n for which n gauges and n - 1 gaps ``between`` are no wider than the kerbs less both clearances.
        """
        free = self.width - 2.0 * self.clearance + self.between
        return max(1, int((free + _HAIR) // (gauge + self.between)))


def span_of_place(  # noqa: PLR0913  # place, offset and wander are one thing said three ways
    roadway: Roadway, place: str, *, gauge: float, heading: int, z: float = 0.0, wander: float = 0.3
) -> tuple[float, float]:
    """Return the range of a vehicle's middle across [m] that a named place leaves it.

    Parameters
    ----------
    place
        One of PLACES. "own lane" is the half of the roadway on the side where traffic keeps, seen in its own heading,
        the inner wheel half of ``between`` off the middle.
    gauge
        Distance between its outermost wheels' centres [m].
    z, wander
        The offset of "offset" and the stray to either side of "centre line" [m].

    Raises
    ------
    InputError
        It does not fit there.
    UnknownNameError
        No such place.
    """
    low, high = roadway.room(gauge)
    if place == "anywhere":
        return low, high
    if place in {"left kerb", "right kerb"}:
        return (high, high) if place == "left kerb" else (low, low)
    if place == "centre line":  # the middle of what is left: where a vehicle fits exactly, round-off cannot cross them
        middle = 0.5 * (low + high)
        return max(low, middle - wander), min(high, middle + wander)
    if place == "own lane":
        return _own_lane(roadway, gauge, heading, (low, high))
    if place == "offset":
        if not low - _HAIR <= z <= high + _HAIR:
            raise InputError(f"its middle keeps between {low:g} and {high:g} m here, got {z:g} m", place="offset")
        z = min(max(z, low), high)
        return z, z
    raise UnknownNameError(f'place "{place}" is not known', nearest=nearest_name(place, PLACES))


def _own_lane(roadway: Roadway, gauge: float, heading: int, room: tuple[float, float]) -> tuple[float, float]:
    """Return the range of a vehicle that keeps to its own half of the roadway."""
    inner = 0.5 * (gauge + roadway.between)
    on_right = (roadway.keeps == "right") == (heading == 1)
    low, high = (room[0], roadway.middle - inner) if on_right else (roadway.middle + inner, room[1])
    if high < low - _HAIR:
        half, inside = 0.5 * roadway.width, 0.5 * roadway.between
        raise InputError(
            f"wheels {gauge:g} m apart do not fit half of the roadway: {half:g} m less {roadway.clearance:g} m at the "
            f"kerb and {inside:g} m at the middle leave {half - roadway.clearance - inside:g} m",
            place="own lane",
        )
    return min(low, high), max(low, high)
