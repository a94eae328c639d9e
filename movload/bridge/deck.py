"""The loaded chord: panel points in order along the bridge, and what of the deck reaches the trusses."""

from __future__ import annotations

import math
from dataclasses import dataclass, field
from typing import TYPE_CHECKING, Final, TypeAlias

import numpy as np

from movload.arrays import Floats, held
from movload.errors import InputError

if TYPE_CHECKING:
    from collections.abc import Sequence

    from movload.bridge.truss import Truss

MOST_SHARE: Final = 2.0  # a load half a truss spacing outside reaches the nearer truss 1.5 times; 56 for 56 % is caught
PanelPoint: TypeAlias = "str | float"  # a joint's name, or the x [m] of an abutment that carries an end stringer


@dataclass(frozen=True, slots=True)
class Deck:
    """Where the deck stands on the truss and what share of a load reaches one truss.

    Parameters
    ----------
    panel_points
        Joints of the loaded chord in order along +x; the first or the last may be an abutment's x [m].
    truss_share
        Share [-], above 0 and at most 2, of a whole axle that reaches the rated truss; None when nobody has typed it.
    """

    panel_points: tuple[PanelPoint, ...]
    truss_share: float | None = field(default=None, kw_only=True)

    def __post_init__(self) -> None:
        """Refuse a share that no truss can get."""
        share = self.truss_share
        if share is not None and not 0 < share <= MOST_SHARE:
            raise InputError(
                f"must be above 0 and at most {MOST_SHARE:g} (0.5 is an axle on the centre line), got {share}",
                place="deck.truss_share",
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
    return held(np.array(stations))


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
