"""Dynamic allowance (impact) of rows from their lines: pure functions of arrays, no bridge and no vehicle in them.

References
----------
AASHTO, Standard Specifications for Highway Bridges, 17th ed., art. 3.8.2 (from memory): 50 / (L + 125), at most 0.30.
AREMA, Manual for Railway Engineering, ch. 15, design, impact load of rolling equipment without hammer blow (from
memory): percentages by length, plus the rocking effect.
"""

from __future__ import annotations

from typing import TYPE_CHECKING, Final

import numpy as np

from movload.errors import InputError, MissingDataError
from movload.units import unit_factor

if TYPE_CHECKING:
    from movload.arrays import Bools, Floats

RULES: Final = ("typed", "by riding surface", "by loaded length", "railway")
SURFACES: Final = ("smooth", "minor", "severe")

_FOOT: Final = unit_factor("ft", "length")  # m
_NOISE: Final = 1e-9  # of a row's largest ordinate: round-off would else stretch or break a line, and is no rival peak
_TINY: Final = np.finfo(np.float64).tiny  # two zeros side by side: no change of sign there, and no 0 / 0


def loaded_lengths(stations: Floats, ordinates: Floats) -> Floats:
    """Return the length (R, 2) [m] of line that holds the largest positive and the largest negative ordinate.

    Each is the unbroken stretch from zero to zero of a line that is straight between stations, so that it may cross
    zero inside a panel. Where the first or last station has an ordinate the line drops to 0, and the stretch ends. Of
    stretches with equal largest ordinates the shorter counts: either may hold the peak, and it has the greater impact.

    Parameters
    ----------
    stations
        (B,) [m], increasing, at least 2.
    ordinates
        (R, B); below 1e-9 of the row's largest they count as 0.

    Returns
    -------
    Floats
        (R, 2) [m], positive then negative; nan where a row has no ordinate of that sense.
    """
    line = _without_noise(stations, ordinates)
    sign, size = np.sign(line), np.abs(line)
    changes = sign[:, 1:] != sign[:, :-1]
    before, after = size[:, :-1], size[:, 1:]
    zero = stations[:-1] + before / np.maximum(before + after, _TINY) * np.diff(stations)
    begin, end = np.full_like(line, stations[0]), np.full_like(line, stations[-1])
    np.copyto(begin[:, 1:], zero, where=changes)
    np.copyto(end[:, :-1], zero, where=changes)
    begin = np.maximum.accumulate(begin, axis=1)  # the last change up to each station
    end = np.minimum.accumulate(end[:, ::-1], axis=1)[:, ::-1]  # the next change from it
    lengths = end - begin
    return np.stack((_at_largest(line, lengths), _at_largest(-line, lengths)), axis=1)


def by_loaded_length(lengths: Floats | float) -> Floats:
    """Return the allowance I = 50 / (L + 125), at most 0.30, with L in feet.

    Parameters
    ----------
    lengths
        Loaded lengths, any shape [m]. nan (a row without ordinates of that sense) gives 0.30: such a side feels
        something only where a share across is negative, as when a wheel beyond one truss lifts the other, and must not
        lose its impact then. Everywhere else it multiplies nothing.

    Returns
    -------
    Floats
        Shape of ``lengths`` [-].

    References
    ----------
    AASHTO Standard Specifications, 17th ed., art. 3.8.2 (from memory).
    """
    return np.minimum(0.30, 50.0 / (_in_feet(lengths) + 125.0))


def railway(lengths: Floats | float, *, spacing: float | None) -> Floats:
    """Return the allowance of rolling equipment without hammer blow: vertical effect and rocking, in per cent.

    Vertical: 40 - 3 L^2 / 1600 for L < 80 ft, 16 + 600 / (L - 30) from there on, L in feet. Both give 28 % at 80 ft:
    the rule is continuous there, only its slope changes (-0.30 to -0.24 % a foot).

    Rocking: 100 / S, S in feet. A car that rocks presses one rail with 20 % of the wheel load W, without impact, and
    lifts the other by as much; rails stand 5 ft apart, so the couple is 0.20 W x 5 ft = W x 1 ft. Beams S apart resist
    it with W / S each, which is 100 / S % of the W that each carries of the axle.

    Parameters
    ----------
    lengths
        L [m], any shape (see `railway_lengths`); nan is taken as 0, the greatest impact.
    spacing
        Distance between the trusses, or between the stringers of a stringer [m].

    Returns
    -------
    Floats
        Shape of ``lengths`` [-].

    Raises
    ------
    MissingDataError
        No spacing: leaving the rocking effect out would pass for an answer.

    References
    ----------
    AREMA Manual for Railway Engineering, ch. 15 (from memory).
    """
    if spacing is None:
        raise MissingDataError(
            "the rocking effect needs the distance between the trusses; type it, or a fraction at rating.impact",
            place="deck.truss_spacing",
        )
    if not spacing > 0:
        raise InputError(f"the trusses stand more than 0 m apart, got {spacing} m", place="deck.truss_spacing")
    feet = _in_feet(lengths)
    short, long = 40.0 - 3.0 * feet**2 / 1600.0, 16.0 + 600.0 / (np.maximum(feet, 80.0) - 30.0)
    return 0.01 * (np.where(feet < 80.0, short, long) + 100.0 / (spacing / _FOOT))


def railway_lengths(stations: Floats, ordinates: Floats, *, span: float) -> Floats:
    """Return L (R,) [m] of the railway rule: the span, or for short-loaded rows the longer stringer beside them."""
    short = is_short_loaded(stations, ordinates)
    return np.where(short, longest_adjacent_panel(stations, ordinates), span)


def is_short_loaded(stations: Floats, ordinates: Floats) -> Bools:
    """Return whether each row (R,) feels loads on at most two panels side by side, and feels any.

    Hangers, hip verticals, floorbeams' reactions, sub-verticals and sub-diagonals of subdivided panels. A hanger that
    also takes sub-diagonals feels four panels and is none. Every row of a bridge of two panels is one, its chords too:
    they then take a panel for the span, which is on the safe side.
    """
    touched = _touched(stations, ordinates)
    first, last = touched.argmax(axis=1), touched.shape[1] - 1 - touched[:, ::-1].argmax(axis=1)
    short: Bools = touched.any(axis=1) & (last - first <= 1)
    return short


def longest_adjacent_panel(stations: Floats, ordinates: Floats) -> Floats:
    """Return the longest panel (R,) [m] on which each row feels a load; nan for a row that feels none."""
    touched = _touched(stations, ordinates)
    longest = np.where(touched, np.diff(stations), 0.0).max(axis=1)
    return np.where(longest > 0.0, longest, np.nan)


def _at_largest(line: Floats, lengths: Floats) -> Floats:
    """Return the least length (R,) where a line is largest, round-off aside; nan where it is nowhere positive."""
    largest = line.max(axis=1, keepdims=True)
    shortest = np.where(line >= (1.0 - _NOISE) * largest, lengths, np.inf).min(axis=1)
    return np.where(largest[:, 0] > 0.0, shortest, np.nan)


def _touched(stations: Floats, ordinates: Floats) -> Bools:
    """Return the panels (R, B - 1) on which each row feels a load."""
    felt: Bools = _without_noise(stations, ordinates) != 0.0
    return felt[:, 1:] | felt[:, :-1]


def _without_noise(stations: Floats, ordinates: Floats) -> Floats:
    """Return the ordinates with round-off set to 0; refuse such as do not fit the stations."""
    if ordinates.ndim != 2 or stations.shape != ordinates.shape[1:] or stations.size < 2:
        raise InputError(f"ordinates {ordinates.shape} do not fit stations {stations.shape}", place="impact")
    size = np.abs(ordinates)
    return np.where(size > _NOISE * size.max(axis=1, keepdims=True), ordinates, 0.0)


def _in_feet(lengths: Floats | float) -> Floats:
    """Return lengths [m] in feet, 0 where they are nan."""
    metres: Floats = np.asarray(lengths, dtype=np.float64)
    if (metres < 0.0).any():
        raise InputError(f"a loaded length is 0 or more, got {np.nanmin(metres):g} m", place="impact")
    return np.where(np.isnan(metres), 0.0, metres) / _FOOT
