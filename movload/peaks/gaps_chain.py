"""Axles in rigid groups whose gaps may vary, one behind the other: the exact optimum over all gaps and positions.

Let u count along the direction of travel, u_i the first axle of group i (0 in front) and F_i(u_i) its effect. Sought
is the greatest of F_0(u_0) + ... + F_n(u_n) with u_i - u_i+1 within [A_i, B_i], the group's length and its gap. With

    V_n = F_n,    V_i(u) = F_i(u) + max over t from u - B_i to u - A_i of V_i+1(t)

it is the greatest value of V_0: for a fixed u_i the groups behind only meet the ones before through that window. Each
F_i is piecewise linear; a greatest value within a window of such a function is one too, and so is a sum. So every V_i
is carried in full, by its nodes (see `movload.peaks.gaps_bent`), and nothing is sampled. A window over a function makes
no more valleys than the function has, so nodes grow with the groups, not with two to the number of gaps.

A line may jump at an end station: an axle just outside stands `JUMP` edges out, and the jump is a steep piece between.
Windows are kept to a quarter of an edge, so an axle is not lost by stretching a gap beyond its greatest.

Where a load counts less when it relieves (``Train.relieving``), F_i is still piecewise linear: it bends in addition
where an axle stands on a true zero of the row's line.
"""

from __future__ import annotations

import math
from typing import TYPE_CHECKING, Final

import numpy as np

from movload.peaks.gaps_bent import JUMP, NEAR
from movload.peaks.gaps_rows import Group, relieved
from movload.peaks.placement import edge, panel_loads
from movload.peaks.stand import Stand

if TYPE_CHECKING:
    from collections.abc import Sequence

    from movload.arrays import Bools, Floats
    from movload.peaks.gaps_bent import Bent
    from movload.peaks.gaps_rows import Rows
    from movload.statics.part import AtStations
    from movload.traffic.crossing import Train

TIE: Final = 1e-13  # of the row's largest value: stands whose effects differ by less are equally bad


def chain(groups: Sequence[Group], rows: Rows, relieving: float, after: Bent | None = None) -> tuple[Bent, ...]:
    """Return V_i for each group, front to back (see the module's text).

    Parameters
    ----------
    after
        What follows the vehicle is worth at most, by the place of its last axle.
    """
    best = groups[-1].lines(rows, relieving)
    if after is not None:
        best = best.plus(after.shifted(groups[-1].length))
    found = [best]
    for group in groups[-2::-1]:
        best = group.lines(rows, relieving).plus(best.within(*group.window))
        found.append(best)
    return tuple(found[::-1])


def places(groups: Sequence[Group], values: Sequence[Bent], front: float) -> list[float]:
    """Return where every group's first axle stands for the best with the front one at u = ``front``.

    ``values`` are `chain`'s for one row. Of equally bad places behind, those with the smallest spacings.
    """
    found = [front]
    for group, behind in zip(groups[:-1], values[1:], strict=True):
        least, greatest = group.window
        found.append(best_place(behind, found[-1] - greatest, found[-1] - least))
    return found


def best_place(line: Bent, first: float, last: float) -> float:
    """Return the greatest u from ``first`` (may be -inf) to ``last`` at which one function is greatest."""
    near = NEAR * line.edge
    inside: Bools = (line.u >= first - near) & (line.u <= last + near)
    u = np.concatenate((line.u[inside], [last] if not math.isfinite(first) else [first, last]))
    values = line.at(np.zeros(u.size, dtype=np.intp), u)
    reached = values >= values.max() - TIE * np.abs(line.value).max()
    return float(u[reached].max())


def front_places(line: Bent) -> list[float]:
    """Return the nodes u, increasing, at which one function is greatest."""
    reached = line.value >= line.value.max() - TIE * np.abs(line.value).max()
    places: list[float] = line.u[reached].tolist()
    return places


def settled(response: AtStations, train: Train, which: tuple[int, int, int], at: Sequence[float]) -> Stand:
    """Return a train with every spacing settled, its groups' first axles standing at u = ``at``.

    Parameters
    ----------
    which
        Row, side and heading.
    """
    row, side, heading = which
    stations = response.stations
    distances = np.cumsum([0.0, *_spacings(train, at, edge(stations))])
    front = heading * at[0]
    x = front - heading * distances
    ordinates = response.under(panel_loads(stations, x[:, None], np.ones(1)).T)[row]
    sign = (1.0, -1.0)[side]
    value = sign * float(relieved(sign * train.felt * ordinates, train.relieving).sum())
    axle, station, lost = _on_station(stations, x)
    return Stand(value, front, heading, distances, axle, station, lost)


def _spacings(train: Train, at: Sequence[float], margin: float) -> list[float]:
    """Return the spacings [m] with which groups stand at u = ``at``; one at an end of its range is that end."""
    spacings, group, behind = [], 0, 0.0
    for gap in train.vehicle.spacings:
        if not isinstance(gap, tuple):
            spacings.append(gap)
            behind += gap
            continue
        found = at[group] - behind - at[group + 1]
        spacings.append(next((end for end in gap if abs(found - end) <= margin), found))
        group, behind = group + 1, 0.0
    return spacings


def _on_station(stations: Floats, x: Floats) -> tuple[int, int, bool]:
    """Return the axle nearest the front that stands on a station, or just outside an end, and the station."""
    margin = edge(stations)
    outside = (JUMP + 1.0) * margin
    off = np.abs(x[:, None] - stations)
    for within, lost in ((off <= margin, False), (off[:, [0, -1]] <= outside, True)):
        if within.any():
            axle, station = (int(one) for one in np.argwhere(within)[0])
            return axle, (0, stations.size - 1)[station] if lost else station, lost
    return -1, -1, False
