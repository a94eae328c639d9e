"""The loaded chord: panel points in order along the bridge, and what of the deck reaches the trusses."""

from __future__ import annotations

import math
from dataclasses import dataclass, field
from itertools import pairwise
from typing import TYPE_CHECKING, Final, TypeAlias

import numpy as np

from movload.arrays import Floats, held
from movload.errors import InputError, MissingDataError, UnknownNameError, nearest_name

if TYPE_CHECKING:
    from collections.abc import Sequence

    from movload.bridge.roadway import Roadway
    from movload.bridge.truss import Truss

KINDS: Final = ("through", "pony", "deck")
BEARS_ON: Final = ("floorbeams", "chord")
_FARTHEST: Final = 1e9  # panels from x = 0: a nanometre of one is still told apart
MOST_SHARE: Final = 2.0  # a load half a truss spacing outside reaches the nearer truss 1.5 times; 56 for 56 % is caught
PanelPoint: TypeAlias = "str | float"  # a joint's name, or the x [m] of an abutment that carries an end stringer


@dataclass(frozen=True, slots=True)
class Deck:
    """Where the deck stands on the truss, and what of the vehicles and the weight on it reaches one truss.

    Parameters
    ----------
    panel_points
        Joints of the loaded chord in order along +x; the first or the last may be an abutment's x [m].
    truss_share
        Share [-], above 0 and at most 2, of a whole axle that reaches the rated truss, as typed; None where the
        trusses' spacing says it, or nobody has typed it.
    truss_spacing
        Distance between the trusses' middle planes [m]; they stand at z = +spacing/2 (left) and -spacing/2 (right).
    roadway
        The kerbs; None where only a share is typed.
    kind
        One of KINDS; "" when nobody has said.
    bears_on
        "floorbeams", or "chord" for a deck laid on the chord between its joints, which then bends.
    chord_bending
        Who checked that bending, where, and with what result; "" when nobody has.
    """

    panel_points: tuple[PanelPoint, ...]
    truss_share: float | None = field(default=None, kw_only=True)
    truss_spacing: float | None = field(default=None, kw_only=True)
    roadway: Roadway | None = field(default=None, kw_only=True)
    kind: str = field(default="", kw_only=True)
    bears_on: str = field(default="floorbeams", kw_only=True)
    chord_bending: str = field(default="", kw_only=True)

    def __post_init__(self) -> None:
        """Refuse a share that no truss can get, trusses in one plane, words not known, and a share said twice."""
        share, spacing = self.truss_share, self.truss_spacing
        if share is not None and not 0 < share <= MOST_SHARE:
            raise InputError(
                f"must be above 0 and at most {MOST_SHARE:g} (0.5 is an axle on the centre line), got {share}",
                place="deck.truss_share",
            )
        if spacing is not None and not (math.isfinite(spacing) and spacing > 0):
            raise InputError(f"the trusses stand more than 0 m apart, got {spacing} m", place="deck.truss_spacing")
        if share is not None and spacing is not None:
            raise InputError("the share is given twice: typed, and by deck.truss_spacing", place="deck.truss_share")
        if spacing is None and self.roadway is not None:
            raise MissingDataError("is needed beside deck.kerbs", place="deck.truss_spacing")
        for word, said, known in (("kind", self.kind, ("", *KINDS)), ("bears_on", self.bears_on, BEARS_ON)):
            if said not in known:
                raise UnknownNameError(
                    f'"{said}" is not one of {", ".join(filter(None, known))}',
                    place=f"deck.{word}",
                    nearest=nearest_name(said, known),
                )


def stations_of(truss: Truss, panel_points: Sequence[PanelPoint]) -> Floats:
    """Return the x of each panel point (B,) [m].

    Raises
    ------
    InputError
        Fewer than two panel points, x not increasing, or an abutment between joints.
    UnknownNameError
        A panel point that is not a joint.
    """
    if isinstance(panel_points, str) or len(panel_points) < 2:
        raise InputError(f"a deck needs at least 2 panel points, got {len(panel_points)}", place="deck.panel_points")
    stations = [_station(truss, point, number) for number, point in enumerate(panel_points)]
    last = len(panel_points) - 1
    for number, point in enumerate(panel_points):
        if not isinstance(point, str) and 0 < number < last:
            raise InputError(
                f"an abutment may only stand first or last, got x = {point:g} m", place=f"deck.panel_points[{number}]"
            )
        if number and stations[number] <= stations[number - 1]:
            raise InputError(
                f"panel points must follow each other along +x, got {_shown(point)} at x = {stations[number]:g} m "
                f"after {_shown(panel_points[number - 1])} at x = {stations[number - 1]:g} m",
                place=f"deck.panel_points[{number}]",
            )
    _require_near(stations)
    return held(np.array(stations))


def _require_near(stations: list[float]) -> None:
    """Refuse places so far out that a position on the shortest panel is lost in round-off."""
    farthest = max(range(len(stations)), key=lambda number: abs(stations[number]))
    shortest = min(b - a for a, b in pairwise(stations))
    if abs(stations[farthest]) > _FARTHEST * shortest:
        raise InputError(
            f"x = {stations[farthest]:g} m is too far out beside a panel of {shortest:g} m: positions are lost in "
            "round-off",
            place=f"deck.panel_points[{farthest}]",
        )


def deck_lengths(stations: Floats) -> Floats:
    """Return the length of deck (B,) [m] that simple stringers bring to each panel point."""
    panels = np.diff(stations)
    reach: Floats = 0.5 * (np.append(panels, 0.0) + np.append(0.0, panels))
    return reach


def _station(truss: Truss, point: PanelPoint, number: int) -> float:
    """Return one panel point's x [m]."""
    place = f"deck.panel_points[{number}]"
    if isinstance(point, str):
        truss.require_joint(point, place)
        return truss.joints[point][0]
    if not math.isfinite(point):
        raise InputError(f"an abutment's x must be finite, got {point} m", place=place)
    return float(point)


def _shown(point: PanelPoint) -> str:
    """Return a panel point as a person would call it."""
    return f'"{point}"' if isinstance(point, str) else "the abutment"
