"""Permanent loads taken to any part by the same line across as live load.

Along the bridge an item's weight per metre reaches the panel points by simple beams between them, as the live load's
does; across it the part's line, averaged over the width on which the item lies, says how much of it the part gets.
"""

from __future__ import annotations

from typing import TYPE_CHECKING, Final

import numpy as np

from movload.bridge.permanent import CLASSES
from movload.errors import InputError, UnknownNameError, nearest_name

if TYPE_CHECKING:
    from collections.abc import Sequence

    from movload.arrays import Floats
    from movload.bridge.across import Across
    from movload.bridge.permanent import Item
    from movload.statics.part import Part

_HAIR: Final = 1e-9  # m: round-off of typed places


def share_across(across: Across, low: float, high: float) -> float:
    """Return the share [-] of a load spread evenly from z = low to z = high [m]: the mean of the line across.

    Exact, since the line is straight between its points: with z_i the ends and the line's points between them,
    share = sum of (z_i+1 - z_i)/(high - low) x (a_i + a_i+1)/2. Equal ends are a line at that z; a share that was
    typed is the same for every place.

    Raises
    ------
    InputError
        Part of it lies beyond the line's ends.
    """
    if across.z.size == 1:
        return float(across.ordinate[0])
    right, left = across.z[0], across.z[-1]
    if low < right - _HAIR or high > left + _HAIR:
        beyond = low if low < right - _HAIR else high
        raise InputError(
            f"a load at z = {beyond:g} m lies beyond the deck, which reaches from {right:g} to {left:g} m",
            place="across",
        )
    low, high = np.clip((low, high), right, left)
    if low == high:
        return float(across.at(low))
    z = np.concatenate(([low], across.z[(across.z > low) & (across.z < high)], [high]))
    ordinate = across.at(z)
    return float(np.diff(z) / (high - low) @ (0.5 * (ordinate[:-1] + ordinate[1:])))


def item_effects(part: Part, items: Sequence[Item], points: Sequence[str]) -> Floats:
    """Return the effect of permanent items on every row of a part, class by class (CLASSES, R) [N, N m, m].

    Signs are those of the part's rows; the items act down. The part's own members are not in it.

    Parameters
    ----------
    points
        Names of the part's stations (B,).

    Raises
    ------
    UnknownNameError
        A weight at a panel point that is not there.
    InputError
        An item that lies beyond the deck.
    """
    response = part.response
    line, loads = np.zeros(len(CLASSES)), np.zeros((len(points), len(CLASSES)))
    for item in items:
        share, kind = _share(part, item), CLASSES.index(item.kind)
        line[kind] += share * item.line
        loads[:, kind] += share * _at_points(item, points)
    effects: Floats = line[:, None] * response.per_metre
    return effects + response.under(loads).T if loads.any() else effects


def _share(part: Part, item: Item) -> float:
    """Return the share of an item that reaches a part."""
    if item.share is not None:
        return item.share
    try:
        return share_across(_line(part, item), item.low, item.high)
    except InputError as error:
        raise InputError(error.rule, place=f"permanent, {item.title}: across") from None


def _line(part: Part, item: Item) -> Across:
    """Return the line across that an item reaches a part by: what lies on the floorbeams goes by no stringer."""
    if item.on_floorbeams and part.beam is not None:
        return part.beam
    return part.bears or part.across


def _at_points(item: Item, points: Sequence[str]) -> Floats:
    """Return an item's weights on the stations (B,) [N]."""
    loads = np.zeros(len(points))
    for name, weight in item.points:
        if name not in points:
            raise UnknownNameError(
                f'panel point "{name}" is not there',
                place=f"permanent, {item.title}: points",
                nearest=nearest_name(name, points),
            )
        loads[list(points).index(name)] += weight
    return loads
