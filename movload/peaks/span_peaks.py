"""Peaks of simple spans: the second producer, for sections that move with the load."""

from __future__ import annotations

from dataclasses import dataclass, replace
from functools import lru_cache
from typing import TYPE_CHECKING, NamedTuple

import numpy as np

from movload.arrays import Floats, held
from movload.peaks.extremes import unit_of
from movload.peaks.governing import split_up
from movload.peaks.part_peaks import standing_train
from movload.peaks.peaks import NO_PEAK, WORST, Peak
from movload.peaks.placement import Placement, joined
from movload.peaks.span_maxima import span_maxima, span_values

if TYPE_CHECKING:
    from collections.abc import Sequence

    from movload.arrays import Ints
    from movload.statics.part import Effect
    from movload.statics.spans import SimpleSpans
    from movload.traffic.crossing import Train
    from movload.traffic.formations import Formation
    from movload.traffic.vehicle import Vehicle


class _Stand(NamedTuple):
    """Where a train stands in one span: front axle and section from its left end [m], heading, governing axle."""

    position: float
    heading: int
    axle: int
    section: float


@dataclass(frozen=True, slots=True, eq=False)
class SpanPeaks:
    """The peaks of one stringer's spans under the formations of one crossing; rows moment and shear, span by span.

    Attributes
    ----------
    response
        The spans.
    formations
        Those that the stringer feels.
    highest, lowest
        (R,) with impact; the lowest is 0, a simple span is never bent the other way.
    impact
        (R, 2) dynamic allowance.
    by_formation
        (F, R) what each formation gives at most.
    held_impact
        Dynamic allowance of traffic that is held fixed; None where there is none.
    """

    response: SimpleSpans
    formations: tuple[Formation, ...]
    highest: Floats
    lowest: Floats
    impact: Floats
    by_formation: Floats
    held_impact: Floats | None = None

    @property
    def effects(self) -> tuple[Effect, ...]:
        """The rows (R)."""
        return self.response.effects

    @property
    def split(self) -> tuple[Floats, Floats] | None:
        """What grows with a rating and what is held fixed (F, R, 2); None where nothing is."""
        if self.held_impact is None:
            return None
        lengths, of_span = np.unique(self.response.lengths, return_inverse=True)
        felt = _felt(lengths, of_span, [train for formation in self.formations for train in formation])
        felt *= 1.0 + _impact_of(self.formations, self.impact, self.held_impact)
        return split_up(self.formations, np.stack((felt, np.zeros_like(felt)), axis=2))

    def vehicle(self, row: int, side: int, number: int = WORST) -> Vehicle:
        """Return the vehicle that is asked about there (abreast they are all alike)."""
        return self._formation(row, side, number)[0].vehicle

    def _formation(self, row: int, side: int, number: int = WORST) -> Formation:
        """Return a formation by its number, or that of a row's highest; nothing is felt on the other side."""
        if number != WORST:
            return self.formations[number]
        return self.formations[int(self.by_formation[:, row].argmax()) if side == 0 else 0]

    def _felt_of(self, row: int, side: int, number: int) -> list[Train]:
        """Return the trains of a formation that the stringer feels, spacings that may vary at their least."""
        return [_least(train) for train in self._formation(row, side, number) if train.felt.any()]

    def peak(self, row: int, side: int, number: int = WORST) -> Peak:
        """Return one row's highest (side 0) peak, of all formations or of one; the lowest is always 0."""
        value = float((self.highest, self.lowest)[side][row])
        if number != WORST and side == 0:
            value = float(self.by_formation[number, row])
        if value == 0.0:
            return NO_PEAK
        felt = self._felt_of(row, side, number)
        stands = [self._stands(train, row) for train in felt]
        first, span, where = felt[0], row // 2, stands[0]
        return Peak(
            value,
            float(self.response.stations[span]) + where.position,
            where.heading,
            tuple(map(float, np.diff(first.vehicle.distances))),
            where.axle,
            span + int(where.section > 0.0) if row % 2 else -1,
            first.case,
            joined([self._placed(train, one, row) for train, one in zip(felt, stands, strict=True)]),
        )

    def _stands(self, train: Train, row: int) -> _Stand:
        """Return where a train is worst for a row, from its span's left end."""
        length = self.response.lengths[row // 2 : row // 2 + 1]
        maxima = span_maxima(length, train.vehicle.distances, train.felt, train.headings)
        found = maxima.shear_stands if row % 2 else maxima.moment_stands
        return _Stand(float(found.position[0]), int(found.heading[0]), int(found.axle[0]), float(found.section[0]))

    def _placed(self, train: Train, one: _Stand, row: int) -> Placement:
        """Return a train as it stands, the axle that governs exactly on its section."""
        distances = train.vehicle.distances
        along = one.section + one.heading * (distances[one.axle] - distances)
        impact = self.held_impact if train.fixed and self.held_impact is not None else self.impact
        return standing_train(train, self.response.stations[row // 2] + along, impact[row, 0])

    def ordinates(self, row: int, side: int, stands: Placement, number: int = WORST) -> Floats:
        """Return the row's effect per unit load at each axle (A,), at the section where its own vehicle is worst.

        Vehicles abreast whose axles share unlike may be worst at different sections; their effects are added all the
        same, which is safe. Moment at s: x (L - s)/L left of it, s (L - x)/L right of it. Shear inside the left end:
        1 - x/L.
        """
        felt = self._felt_of(row, side, number)
        sections = np.array([self._stands(train, row).section for train in felt])[stands.vehicle]
        span = row // 2
        length = float(self.response.lengths[span])
        along = stands.x - self.response.stations[span]
        along = np.where(np.abs(along) <= _EDGE * length, 0.0, along)
        along = np.where(np.abs(along - length) <= _EDGE * length, length, along)
        if row % 2:
            line = np.where(sections == 0.0, 1.0 - along / length, along / length)
        else:
            line = np.minimum(along * (length - sections), sections * (length - along)) / length
        ordinates: Floats = np.where((along >= 0.0) & (along <= length), line, 0.0)
        return ordinates


_EDGE = 1e-12  # of the span: an axle no further outside an end stands on it


def spans_peaks(
    responses: Sequence[SimpleSpans],
    crossings: Sequence[tuple[Formation, ...]],
    impact: Floats,
    held_impact: Sequence[Floats | None],
) -> list[SpanPeaks]:
    """Return the peaks of stringers that answer alike, each under one crossing's formations (see `swept_parts`)."""
    lengths, of_span = np.unique(responses[0].lengths, return_inverse=True)
    felt = _felt(lengths, of_span, [one for formations in crossings for formation in formations for one in formation])
    sizes = [len(formation) for formations in crossings for formation in formations]
    felt *= 1.0 + _impact_of_all(crossings, impact, held_impact)
    by_formation = np.add.reduceat(felt, np.cumsum([0, *sizes[:-1]]), axis=0)
    first = np.cumsum([0, *(len(formations) for formations in crossings)])
    highest = held(np.maximum.reduceat(by_formation, first[:-1], axis=0))
    lowest = held(np.zeros(highest.shape[1]))
    return [
        SpanPeaks(
            response, formations, highest[number], lowest, impact[number], by_formation[start:end], held_impact[number]
        )
        for number, (response, formations, start, end) in enumerate(
            zip(responses, crossings, first[:-1], first[1:], strict=True)
        )
    ]


def _impact_of_all(
    crossings: Sequence[tuple[Formation, ...]], impact: Floats, held_impact: Sequence[Floats | None]
) -> Floats:
    """Return every train's dynamic allowance on each row (T, R), crossing after crossing."""
    if any(one is not None for one in held_impact):
        return np.concatenate([_impact_of(*one) for one in zip(crossings, impact, held_impact, strict=True)])
    counts = [sum(map(len, formations)) for formations in crossings]
    trains = [train for formations in crossings for formation in formations for train in formation]
    of_train: Floats = np.repeat(impact[:, :, 0], counts, axis=0)
    return of_train if all(train.dynamic for train in trains) else _dynamic(trains) * of_train


def _dynamic(trains: Sequence[Train]) -> Floats:
    """Return 1 for each train that takes impact and 0 for each that does not (T, 1)."""
    return np.array([train.dynamic for train in trains], dtype=np.float64)[:, None]


def _impact_of(formations: tuple[Formation, ...], impact: Floats, held_impact: Floats | None) -> Floats:
    """Return every train's dynamic allowance on each row (T, R)."""
    trains = [train for formation in formations for train in formation]
    dynamic = _dynamic(trains)
    if held_impact is None:
        return dynamic * impact[:, 0]
    fixed = np.array([train.fixed for train in trains])[:, None]
    of_train: Floats = dynamic * np.where(fixed, held_impact[:, 0], impact[:, 0])
    return of_train


def _felt(lengths: Floats, of_span: Ints, trains: list[Train]) -> Floats:
    """Return every train's static moment and shear in every span (T, R), each distinct train worked out once."""
    units: dict[Train, int] = {}
    unit, times = np.empty(len(trains), dtype=np.intp), np.empty(len(trains))
    for number, train in enumerate(trains):
        whole, share = unit_of(_least(train))
        unit[number], times[number] = units.setdefault(whole, len(units)), share
    rows: Floats = _values(lengths, list(units))[:, of_span].reshape(len(units), -1)
    return rows[unit] * times[:, None]


def _least(train: Train) -> Train:
    """Return a train with every spacing that may vary at its least: on a simple span no other is worse."""
    if not train.vehicle.has_ranges:
        return train
    return replace(train, vehicle=_least_vehicle(train.vehicle))


@lru_cache(maxsize=256)
def _least_vehicle(vehicle: Vehicle) -> Vehicle:
    """Return one vehicle for one with ranges, so that it is worked out once."""
    from movload.peaks.span_uniform import least_spacings

    return least_spacings(vehicle)


def _values(lengths: Floats, units: list[Train]) -> Floats:
    """Return moment and shear (U, L, 2) of every train, worked out in one batch."""
    widest = max(train.felt.size for train in units)
    distances, felt = np.zeros((2, len(units), widest))
    for number, train in enumerate(units):
        distances[number, : train.felt.size] = train.vehicle.distances
        felt[number, : train.felt.size] = train.felt
    return np.stack(span_values(lengths, distances, felt), axis=2)
