"""Any number of vehicles over one response in one batch."""

from __future__ import annotations

from dataclasses import replace
from typing import TYPE_CHECKING, cast, overload

import numpy as np

from movload.arrays import Floats, held
from movload.peaks.governing import formation_extremes
from movload.peaks.part_peaks import PartPeaks
from movload.peaks.peaks import Peaks, Swept, effects_at, stacked
from movload.peaks.span_peaks import spans_peaks
from movload.peaks.wheel_peaks import wheels_peaks
from movload.statics.spans import PlankSpan, SimpleSpans
from movload.traffic.crossing import whole_trains
from movload.traffic.loading import Loading
from movload.traffic.vehicle import Vehicle

if TYPE_CHECKING:
    from collections.abc import Sequence

    from movload.statics.part import AtStations, Response
    from movload.traffic.formations import Formation


@overload
def sweep(lines: AtStations, vehicle: Vehicle | Loading) -> Peaks: ...
@overload
def sweep(lines: AtStations, vehicle: Sequence[Vehicle | Loading]) -> list[Peaks]: ...
def sweep(lines: AtStations, vehicle: Vehicle | Loading | Sequence[Vehicle | Loading]) -> Peaks | list[Peaks]:
    """Return the exact peaks of every row: whole axles on one line, no share, no impact.

    Parameters
    ----------
    lines
        Influence lines, or any other response.
    vehicle
        One vehicle or loading, or several: the answer is then a list in the same order, found in one batch.

    Raises
    ------
    InputError
        A spacing is a range.
    """
    if isinstance(vehicle, (Vehicle, Loading)):
        return sweep(lines, [vehicle])[0]
    formations = [tuple((train,) for train in whole_trains(one)) for one in vehicle]
    no_impact = np.broadcast_to(0.0, (len(formations), len(lines.effects), 2))
    swept = part_peaks(lines, formations, no_impact)
    return [stacked(one.title, [peaks]) for one, peaks in zip(vehicle, swept, strict=True)]


def swept_parts(
    responses: Sequence[Response],
    crossings: Sequence[tuple[Formation, ...]],
    impact: Floats,
    held_impact: Sequence[Floats | None] | None = None,
) -> list[Swept]:
    """Return the peaks of parts that answer alike, each under one crossing's formations, impact included.

    Parameters
    ----------
    responses
        For each of P askings the part's own response; all are alike.
    crossings
        For each asking the formations that the part feels.
    impact
        (P, R, 2) dynamic allowance on highest and lowest of every row, for trains that are dynamic.
    held_impact
        The same (R, 2) for traffic that is held fixed; None for an asking without.
    """
    of_held = held_impact or [None] * len(responses)
    spans = [one for one in responses if isinstance(one, SimpleSpans)]
    if spans:
        return [*spans_peaks(spans, crossings, impact, of_held)]
    planks = [one for one in responses if isinstance(one, PlankSpan)]
    if planks:
        return [*wheels_peaks(planks, crossings, impact)]
    lines = [cast("AtStations", one) for one in responses]
    by_line = part_peaks(lines[0], crossings, impact, of_held)
    return [replace(peaks, response=response) for peaks, response in zip(by_line, lines, strict=True)]


def part_peaks(
    response: AtStations,
    crossings: Sequence[tuple[Formation, ...]],
    impact: Floats,
    held_impact: Sequence[Floats | None] = (),
) -> list[PartPeaks]:
    """Return the peaks of one part under each crossing's formations, impact included.

    Parameters
    ----------
    crossings
        For each of C crossings the formations that the part feels; parts that share a response may be asked together.
    impact
        (C, R, 2) dynamic allowance on highest and lowest of every row, for trains that are dynamic.
    held_impact
        The same (R, 2) for traffic that is held fixed; None for a crossing without.
    """
    counts = [len(formations) for formations in crossings]
    several = max(counts, default=0) > 1
    flat = [formation for formations in crossings for formation in formations]
    of_held = [*held_impact] or [None] * len(crossings)
    every = None
    if any(one is not None for one in of_held):
        both = [impact[row] if one is None else one for row, one in enumerate(of_held)]
        every = np.repeat(np.array(both), counts, axis=0)
    of_formation = np.repeat(impact, counts, axis=0) if several else impact
    highest, lowest = formation_extremes(response, flat, of_formation, every)
    if several:  # the envelope over each crossing's formations
        starts = np.cumsum([0, *counts[:-1]])
        highest = np.maximum.reduceat(highest, starts, axis=0)
        lowest = np.minimum.reduceat(lowest, starts, axis=0)
    highest, lowest = held(highest), held(lowest)
    return [
        PartPeaks(response, one, highest[row], lowest[row], impact[row], of_held[row])
        for row, one in enumerate(crossings)
    ]


def effects_with_front_at(lines: AtStations, vehicle: Vehicle, position: float, heading: int = 1) -> Floats:
    """Return every row's effect (R,) with a vehicle standing with its front axle at x = ``position`` [m]."""
    (train,) = whole_trains(vehicle)
    return effects_at(lines, train, position, heading)
