"""Where across vehicles are worst for one part: a few places, found exactly.

For fixed places along the bridge an effect is straight in each vehicle's z but where one of its wheels is on a bend of
the part's line across. Its worst over the places along, the greatest of such effects, is therefore convex between
those z, and so is the sum over vehicles abreast. A convex function on the z that vehicles may have is greatest in a
corner of them: one vehicle on such a z or at an end; of several that keep apart, somebody of each row of touching ones.

What a row of a part feels of a vehicle with shares s is h(s), of which only this is used: it is convex, 0 for s = 0
and never below, and twice as much for twice the shares. So nothing here depends on loads, spacings or lines.
"""

from __future__ import annotations

from functools import lru_cache
from itertools import combinations, pairwise
from typing import TYPE_CHECKING, Final, TypeAlias

import numpy as np

from movload.errors import InputError

if TYPE_CHECKING:
    from movload.arrays import Bools, Floats
    from movload.bridge.across import Across

    _Whole: TypeAlias = np.ndarray[tuple[int, ...], np.dtype[np.int64]]
    _Sums: TypeAlias = list[
        tuple[int, int, tuple[int, ...]]
    ]  # both sums, turned negative so that less is more, and places
    _Point: TypeAlias = tuple[int, int]

_HAIR: Final = 1e-9  # m: vehicles that near to their distance keep it, wheels that near to the deck's edge are on it
_ALIKE: Final = 1e-12  # of the largest: places that are one, shares in one ratio, but for round-off
_STRAIGHT: Final = 1e-14  # of the largest: how far round-off takes a point off a straight line
_TOO_NEAR: Final = 1e-6  # m: nearer to its neighbour than this a bend is hard to tell from round-off, and counts as one
_GRAINS: Final = 2.0**44  # in the largest share: shares are compared in whole grains, so that sums and ties are exact


def shares_at(across: Across, z: Floats, gauges: Floats, left_shares: Floats, heading: int) -> Floats:
    """Return the share of each whole axle (K, A) with a vehicle's middle at each z (K,) [m].

    w y(z + g/2) + (1 - w) y(z - g/2), y the line across, g the gauge, w what the left wheels carry looking toward +x.

    Parameters
    ----------
    gauges, left_shares
        (A,) [m] and [-]; the latter of the vehicle's own left.
    heading
        In heading -1 the vehicle's left is on the bridge's right.

    Raises
    ------
    InputError
        A wheel stands beyond the line's ends, by more than round-off.
    """
    half, own = 0.5 * np.asarray(gauges), np.asarray(left_shares)
    left = own if heading == 1 else 1.0 - own
    middles = np.asarray(z)[:, None]
    wheels = np.array((middles + half, middles - half))
    if across.z.size > 1:
        _settle(wheels, float(across.z[0]), float(across.z[-1]))
    on_left, on_right = across.at(wheels)
    shares: Floats = left * on_left + (1.0 - left) * on_right
    return shares


def _settle(wheels: Floats, right: float, left: float) -> None:
    """Put wheels that round-off took beyond the line's ends back onto them; refuse those that stand beyond."""
    least, most = float(wheels.min()), float(wheels.max())
    if least < right - _HAIR or most > left + _HAIR:
        beyond = least if least < right - _HAIR else most
        raise InputError(
            f"a wheel at z = {beyond:g} m stands beyond the deck, which is known from {right:g} to {left:g} m",
            place="across",
        )
    if least < right or most > left:
        np.clip(wheels, right, left, out=wheels)


def candidate_places(
    across: Across, room: tuple[float, float], gauges: Floats, *, apart: float = 0.0, most: int = 1
) -> Floats:
    """Return the z (K,) [m] within ``room`` where a vehicle may be the worst, increasing.

    Those where some wheel is on a bend of the line across, the ends, and each of these shifted by up to ``most`` - 1
    times the distance ``apart`` that neighbours keep: where the others of a touching row then stand. No other place
    needs looking at. Let no vehicle of a row of touching ones be on a bend or at an end. Then the row can be moved a
    little to either side as one; the worst effect is convex in that movement, so it does not fall one of the two ways,
    and goes on not falling until somebody comes to a bend or an end, or the row meets the next one and joins it.

    Parameters
    ----------
    room
        Least and greatest z of the vehicle's middle [m].
    gauges
        (A,) of its axles [m].
    """
    low, high = room
    wheels = {side * 0.5 * gauge for gauge in np.asarray(gauges).tolist() for side in (1.0, -1.0)}
    own = {low, high, *(bend - wheel for bend in _bends_of(across) for wheel in wheels)}
    shifts = [apart * number for number in range(1 - most, most)]
    inside = sorted({z + shift for z in own for shift in shifts if low <= z + shift <= high} | {low, high})
    as_one = _ALIKE * max(1.0, abs(low), abs(high))
    return np.array([z for before, z in pairwise([-np.inf, *inside]) if z - before > as_one])


@lru_cache(maxsize=1024)  # every vehicle asks every part
def _bends_of(across: Across) -> tuple[float, ...]:
    """Return the z of a line's bends [m]; beyond its ends nothing is known and no wheel stands."""
    bends = _bends(across.z, across.ordinate[:, None])[1:-1]
    return tuple(across.z[1:-1][bends].tolist())


def worst_groups(shares: Floats, z: Floats, apart: float, count: int) -> list[tuple[int, ...]]:
    """Return the sets of ``count`` places, at least ``apart`` apart, of which one is the worst, whatever the row.

    Where all axles share alike (their shares stand in one ratio wherever the vehicle keeps) a place is one number g. A
    row feels g times its highest where g is positive, and -g times its lowest where g is negative; so only those sets
    count that no other beats both in the sum of what is positive and of what is negative.

    Elsewhere a single place counts unless its shares lie within the least convex figure that holds 0 and the others
    (two kinds of axles), and a set unless all its vehicles that load the part stand with the same shares in another.

    Parameters
    ----------
    shares
        (K, A) share of each axle at each place.
    z
        (K,) [m], increasing: all of `candidate_places`.

    Returns
    -------
    list
        Sets of places as numbers into ``z``, those nearest the right first, of equally bad ones only the first; none
        where ``count`` do not fit.
    """
    most = float(np.abs(shares).max())
    grains = np.rint(shares / (most or 1.0) * _GRAINS).astype(np.int64)
    worth = _worth(shares, grains)
    if worth is not None:
        return _single(worth) if count == 1 else _front(worth, z, apart, count)
    if count == 1 and shares.shape[1] == 2:
        return [(one,) for one in _outermost(grains)]
    return _unlike(grains, _corners(shares, z, apart, count))


def _worth(shares: Floats, grains: _Whole) -> _Whole | None:
    """Return g (K,) in grains of places whose axles' shares stand in one ratio everywhere; None if they do not."""
    place, axle = divmod(int(np.abs(grains).argmax()), shares.shape[1])
    most = shares[place, axle]
    if shares.shape[1] == 1 or most == 0.0:
        return grains[:, 0]
    off = np.abs(shares - shares[:, axle, None] * (shares[place] / most)).max()
    return grains[:, axle] if off <= _ALIKE * abs(most) else None


def _single(worth: _Whole) -> list[tuple[int, ...]]:
    """Return the place of the greatest g above 0 and of the least below; of equals the first; the first if none."""
    most, least = int(worth.argmax()), int(worth.argmin())
    wanted = [one for one, counts in ((most, worth[most] > 0), (least, worth[least] < 0)) if counts]
    return [(one,) for one in sorted(wanted or [0])]


def _front(worth: _Whole, z: Floats, apart: float, count: int) -> list[tuple[int, ...]]:
    """Return the sets that no other beats in the sum of what is positive and in that of what is negative.

    From right to left: best[i], the unbeaten sets of some number of the first i places, are those of the first i - 1
    and those that place i - 1 completes. A beaten set is never part of an unbeaten one: sums only add.
    """
    up, down = np.minimum(-worth, 0).tolist(), np.minimum(worth, 0).tolist()
    reach = np.minimum(np.searchsorted(z, z - apart + _HAIR, side="right"), np.arange(z.size)).tolist()
    best: list[_Sums] = [[(0, 0, ())]] * (z.size + 1)
    for _ in range(count):
        grown: list[_Sums] = [[]]
        for one, end in enumerate(reach):
            new = [(ups + up[one], downs + down[one], (*chosen, one)) for ups, downs, chosen in best[end]]
            grown.append(_unbeaten(grown[-1], new))
        best = grown
    return sorted(chosen for _, _, chosen in best[-1])


def _unbeaten(old: _Sums, new: _Sums) -> _Sums:
    """Return of two lists of unbeaten sums those unbeaten in both; of equal ones the first set."""
    if not old or not new:
        return old or new
    kept: _Sums = []
    for one in sorted(old + new):
        if not kept or one[1] < kept[-1][1]:
            kept.append(one)
    return kept


def _outermost(grains: _Whole) -> list[int]:
    """Return the corners of the least convex figure that holds points (K, 2) and 0, as numbers, without 0.

    Any point within is a mean of corners, and h, being convex, is no greater there than at one of them.
    """
    numbers = {(0, 0): -1}
    for number, row in enumerate(grains.tolist()):
        numbers.setdefault((row[0], row[1]), number)
    points = sorted(numbers)
    corners: set[_Point] = set()
    for way in (points, points[::-1]):
        chain: list[_Point] = []
        for point in way:
            while len(chain) > 1 and not _turns_left(chain[-2], chain[-1], point):
                chain.pop()
            chain.append(point)
        corners.update(chain)
    return sorted(numbers[corner] for corner in corners if corner != (0, 0))


def _corners(shares: Floats, z: Floats, apart: float, count: int) -> list[tuple[int, ...]]:
    """Return the sets that keep apart and in which somebody of each row of touching vehicles is on a bend or an end."""
    bends = _bends(z, shares).tolist()
    first = np.maximum(np.searchsorted(z, z + apart - _HAIR), np.arange(1, z.size + 1)).tolist()
    free = np.searchsorted(z, z + apart + _HAIR, side="right").tolist()  # from here on they do not touch
    sets: list[tuple[tuple[int, ...], bool]] = [((one,), bends[one]) for one in range(z.size)]
    for left in reversed(range(count - 1)):  # how many are still to come
        end = int(np.searchsorted(z, z[-1] - left * apart + count * _HAIR, side="right"))
        sets = [
            ((*chosen, one), bends[one] or (held and one < free[chosen[-1]]))
            for chosen, held in sets
            for one in range(first[chosen[-1]], end if held else min(end, free[chosen[-1]]))
        ]
    return [chosen for chosen, held in sets if held]


def _unlike(grains: _Whole, sets: list[tuple[int, ...]]) -> list[tuple[int, ...]]:
    """Return the sets, without those whose every vehicle that loads the part has its like in another set."""
    names: dict[tuple[int, ...], int] = {(0,) * grains.shape[1]: 0}
    of_place = [names.setdefault(tuple(row), len(names)) for row in grains.tolist()]
    first: dict[tuple[int, ...], tuple[int, ...]] = {}
    for chosen in sets:
        first.setdefault(tuple(sorted(filter(None, (of_place[one] for one in chosen)))), chosen)
    beaten = {part for felt in first for size in range(len(felt)) for part in combinations(felt, size)}
    return [chosen for felt, chosen in first.items() if felt not in beaten]


def _bends(z: Floats, lines: Floats) -> Bools:
    """Return at which z (N,) any of lines (N, A) may change its slope; the first and the last count."""
    before, after = np.diff(z)[:-1, None], np.diff(z)[1:, None]
    straight = (after * lines[:-2] + before * lines[2:]) / (before + after)
    off = np.abs(lines[1:-1] - straight) > _STRAIGHT * np.abs(lines).max()
    bends = np.ones(z.size, dtype=np.bool_)
    bends[1:-1] = (off | (np.minimum(before, after) < _TOO_NEAR)).any(axis=1)
    return bends


def _turns_left(first: _Point, second: _Point, third: _Point) -> bool:
    """Return whether the way through three points turns left at the second."""
    (x0, y0), (x1, y1), (x2, y2) = first, second, third
    return (x1 - x0) * (y2 - y0) > (y1 - y0) * (x2 - x0)
