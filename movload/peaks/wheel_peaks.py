"""Peaks of a plank: the heaviest single wheel of what crosses, anywhere on the deck."""

from __future__ import annotations

from dataclasses import dataclass
from typing import TYPE_CHECKING

import numpy as np

from movload.arrays import Floats, held
from movload.peaks.peaks import NO_PEAK, WORST, Peak
from movload.peaks.placement import Placement

if TYPE_CHECKING:
    from collections.abc import Sequence

    from movload.statics.part import Effect
    from movload.statics.spans import PlankSpan
    from movload.traffic.crossing import Train
    from movload.traffic.formations import Formation
    from movload.traffic.vehicle import Vehicle


@dataclass(frozen=True, slots=True, eq=False)
class WheelPeaks:
    """The peaks of a plank under one crossing; rows moment and shear.

    Attributes
    ----------
    response
        The plank.
    heaviest
        The train and the axle of its heaviest wheel.
    highest, lowest
        (2,) with impact; the lowest is 0.
    impact
        (2, 2) dynamic allowance.
    """

    response: PlankSpan
    heaviest: tuple[Train, int]
    highest: Floats
    lowest: Floats
    impact: Floats

    @property
    def effects(self) -> tuple[Effect, ...]:
        """The rows (2)."""
        return self.response.effects

    @property
    def split(self) -> None:
        """Nothing is held fixed: a plank bears one wheel, that of the vehicle that is asked about."""
        return None

    def vehicle(self, row: int, side: int, number: int = WORST) -> Vehicle:  # noqa: ARG002  # one wheel gives every row
        """Return the vehicle whose wheel it is."""
        return self.heaviest[0].vehicle

    def peak(self, row: int, side: int, number: int = WORST) -> Peak:  # noqa: ARG002  # one wheel gives every row
        """Return the peak with that wheel alone, standing at the first panel point."""
        value = float((self.highest, self.lowest)[side][row])
        if value == 0.0:
            return NO_PEAK
        train, axle = self.heaviest
        one, x = np.ones(1), self.response.stations[:1]
        placement = Placement(
            x, train.vehicle.loads[axle] * one, train.shares[axle] * wheel_part(train.vehicle)[axle] * one,
            (self.impact[row, side] if train.dynamic else 0.0) * one, train.factor * one, np.nan * one,
            np.zeros(1, dtype=np.intp), np.zeros(1, dtype=np.bool_),
        )  # fmt: skip
        distances = np.cumsum([0.0, *(gap[0] if isinstance(gap, tuple) else gap for gap in train.vehicle.spacings)])
        heading = train.headings[0]
        front = float(x[0] + heading * distances[axle])
        return Peak(value, front, heading, tuple(map(float, np.diff(distances))), axle, 0, train.case, placement)

    def ordinates(self, row: int, side: int, stands: Placement, number: int = WORST) -> Floats:  # noqa: ARG002  # as above
        """Return the row's effect per unit load at each axle (A,)."""
        return np.full(stands.x.shape, self.response.per_wheel[row])


def wheel_part(vehicle: Vehicle) -> Floats:
    """Return the part of each axle (A,) [-] that its heavier wheels carry."""
    lefts = np.array(vehicle.left_shares or (0.5,) * vehicle.loads.size)
    part: Floats = np.maximum(lefts, 1.0 - lefts)
    return part


def wheels_peaks(
    responses: Sequence[PlankSpan], crossings: Sequence[tuple[Formation, ...]], impact: Floats
) -> list[WheelPeaks]:
    """Return the peaks of planks that answer alike, each under one crossing's formations (see `swept_parts`)."""
    peaks = []
    for response, formations, allowance in zip(responses, crossings, impact, strict=True):
        trains = [train for formation in formations for train in formation]
        wheels = [train.felt * wheel_part(train.vehicle) for train in trains]
        worst = int(np.argmax([one.max() for one in wheels]))
        train, axle = trains[worst], int(wheels[worst].argmax())
        dynamic = 1.0 + allowance[:, 0] if train.dynamic else 1.0
        highest = held(wheels[worst][axle] * response.per_wheel * dynamic)
        peaks.append(WheelPeaks(response, (train, axle), highest, held(np.zeros(2)), allowance))
    return peaks
