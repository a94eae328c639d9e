"""Plastic moduli: exact for any regions, because what lies below a level is known exactly."""

from __future__ import annotations

from bisect import bisect_left
from typing import TYPE_CHECKING, Final

if TYPE_CHECKING:
    from collections.abc import Sequence

    from movload.bridge.section_regions import Region

_CLOSE: Final = 1e-13  # of the whole area: the modulus is stationary at the axis, so its own error is the square
_TURNS: Final = 200


def plastic_modulus(regions: Sequence[Region]) -> float:
    """Return the plastic modulus about the horizontal axis that halves the area, Z = the integral of |y - c| [m3].

    With A and S the whole area and its moment, a and s those below c: Z = (S - 2 s) - c (A - 2 a).
    """
    moments = [region.moments() for region in regions]
    area = sum(one.area for one in moments)
    moment = sum(one.area * one.y for one in moments)
    level = halving_level(regions, area)
    below, of_below = _below(regions, level)
    return (moment - 2 * of_below) - level * (area - 2 * below)


def halving_level(regions: Sequence[Region], area: float) -> float:
    """Return a level below which half of the area lies [m].

    It is bracketed between two neighbouring corners, where the area below is smooth (linear for rectangles parallel to
    the axes), then found by false position, halving the weight of an end that stays twice (the Illinois rule).
    """
    levels = sorted({level for region in regions for level in region.levels})
    above = bisect_left(levels, area / 2, lo=1, hi=len(levels) - 1, key=lambda level: _below(regions, level)[0])
    low, high = levels[above - 1], levels[above]
    at_low, at_high = (_below(regions, level)[0] - area / 2 for level in (low, high))
    level, stale = high, 0
    for _ in range(_TURNS):
        level = high - at_high * (high - low) / (at_high - at_low)
        value = _below(regions, level)[0] - area / 2
        if abs(value) <= _CLOSE * area:
            break
        if value > 0:
            high, at_high, at_low, stale = level, value, at_low / (2 if stale > 0 else 1), 1
        else:
            low, at_low, at_high, stale = level, value, at_high / (2 if stale < 0 else 1), -1
    return level


def _below(regions: Sequence[Region], level: float) -> tuple[float, float]:
    """Return area and moment of all regions below a level."""
    parts = [region.below(level) for region in regions]
    return sum(part.area for part in parts), sum(part.moment for part in parts)
