"""The peaks of one part whose worst positions stand with an axle on a station, and on request each one's placement."""

from __future__ import annotations

from dataclasses import dataclass, replace
from functools import cached_property
from typing import TYPE_CHECKING, Final

import numpy as np

from movload.peaks.any_train import lines_for
from movload.peaks.candidates import LOST
from movload.peaks.governing import governing_formation, split_extremes, worst_candidates
from movload.peaks.peaks import NO_PEAK, WORST, Peak
from movload.peaks.placement import Placement, edge, joined, on_the_ends, panel_loads

if TYPE_CHECKING:
    from movload.arrays import Floats, Ints
    from movload.statics.part import AtStations, Effect
    from movload.traffic.crossing import Train
    from movload.traffic.formations import Formation
    from movload.traffic.vehicle import Vehicle

_ROUNDINGS: Final = 16  # last places by which summed spacings may be off


@dataclass(frozen=True, eq=False)
class PartPeaks:
    """The peaks of one part on straight lines, under the formations of one crossing.

    Attributes
    ----------
    response
        How the part answers.
    formations
        The formations swept; their envelope gives the peaks.
    highest, lowest
        (R,) with impact, both including 0.
    impact
        (R, 2) dynamic allowance on the highest and the lowest.
    held_impact
        The same for traffic that is held fixed; None where there is none.
    """

    response: AtStations
    formations: tuple[Formation, ...]
    highest: Floats
    lowest: Floats
    impact: Floats
    held_impact: Floats | None = None

    @property
    def effects(self) -> tuple[Effect, ...]:
        """The rows (R)."""
        return self.response.effects

    @cached_property
    def _governing(self) -> Ints:
        """Formation of every row's highest and lowest (2, R)."""
        return governing_formation(self.response, self.formations, self.impact, self.held_impact)

    @cached_property
    def split(self) -> tuple[Floats, Floats] | None:
        """What grows with a rating and what is held fixed (F, R, 2), magnitudes; None where nothing is."""
        if self.held_impact is None:
            return None
        return split_extremes(self.response, self.formations, self.impact, self.held_impact)

    def formation(self, row: int, side: int, number: int = WORST) -> Formation:
        """Return a formation by its number, or that of one row's highest (side 0) or lowest (side 1) peak."""
        if number != WORST:
            return self.formations[number]
        return self.formations[int(self._governing[side, row]) if len(self.formations) > 1 else 0]

    def vehicle(self, row: int, side: int, number: int = WORST) -> Vehicle:
        """Return the vehicle that is asked about there (abreast they are all alike)."""
        return self.formation(row, side, number)[0].vehicle

    def ordinates(self, row: int, side: int, stands: Placement, number: int = WORST) -> Floats:  # noqa: ARG002
        """Return the row's effect per unit load at each axle (A,): the line serves both sides and all formations."""
        return self._line(row, stands.x)

    def _line(self, row: int, x: Floats) -> Floats:
        """Return the row's effect per unit load at each x (A,)."""
        unit = panel_loads(self.response.stations, x[:, None], np.ones(1))
        ordinates: Floats = self.response.under(unit.T)[row]
        return ordinates

    def peak(self, row: int, side: int, number: int = WORST) -> Peak:
        """Return one row's highest (side 0) or lowest (side 1) peak, or the one under a formation by its number."""
        value = float((self.highest, self.lowest)[side][row])
        if number != WORST and self.split is not None:
            value = (1, -1)[side] * float(sum(one[number, row, side] for one in self.split))
        if value == 0.0:
            return NO_PEAK
        abreast = [self._standing(train, row, side) for train in self.formation(row, side, number)]
        felt = [one for one in abreast if one.value != 0.0] or abreast[:1]
        return replace(felt[0], value=value, placement=joined([one.placement for one in felt]))

    def _standing(self, train: Train, row: int, side: int) -> Peak:
        """Return one train where it is worst for a row, impact left out of the value; nothing where it is not felt."""
        if train.vehicle.has_ranges:
            return self._spaced(train, row, side)
        response = lines_for(self.response, train.relieving)[side]
        candidates, worst = worst_candidates(response, train)
        stop, run = divmod(int(worst[side, row]), candidates.runs.train.size)
        stations, count = response.stations, response.stations.size
        x = on_the_ends(stations, candidates.standing(run, run + 1)[stop])
        heading = int(candidates.runs.heading[run])
        placement, static = self._stood(train, x, row, side)
        if static * (1, -1)[side] <= 0.0:
            return NO_PEAK
        met = float(stations[stop if stop < count else (0, count - 1)[stop - count]])
        return Peak(
            static,
            _front(stations, x, heading * train.vehicle.distances, lost=stop - count),
            heading,
            tuple(map(float, np.diff(train.vehicle.distances))),
            int(candidates.runs.axle[run]),
            _number_of(self.response.stations, met),
            train.case,
            placement,
            lost=stop >= count,
        )

    def _stood(self, train: Train, x: Floats, row: int, side: int) -> tuple[Placement, float]:
        """Return a train's axles as they count at x (A,) [m] for a row's peak, and the row's static value."""
        line = self._line(row, x)
        counts = np.where(line * (1, -1)[side] < 0.0, train.relieving, 1.0)
        impact = self.held_impact if train.fixed and self.held_impact is not None else self.impact
        return standing_train(train, x, impact[row, side], counts), float(line @ (train.felt * counts))

    def _spaced(self, train: Train, row: int, side: int) -> Peak:
        """Return a train whose spacings may vary where it is worst for a row, with the spacings that make it so."""
        from movload.peaks.gaps import gap_stand  # with what it needs as long to load as a command's own modules

        stand = gap_stand(self.response, train, row, side)
        if stand.value == 0.0:
            return NO_PEAK
        x = on_the_ends(self.response.stations, stand.front - stand.heading * stand.distances)
        placement, _ = self._stood(train, x, row, side)
        return Peak(
            stand.value, stand.front, stand.heading, tuple(map(float, np.diff(stand.distances))), stand.axle,
            stand.station, train.case, placement, lost=stand.lost,
        )  # fmt: skip


def standing_train(train: Train, x: Floats, impact: float, counts: Floats | float = 1.0) -> Placement:
    """Return a train's axles standing at x (A,) [m] with an impact that counts where the train is dynamic.

    ``counts`` is what counts of each axle there (A,) [-]: less than 1 where it relieves and its model says so.
    """
    axles = np.ones(x.size)
    return Placement(
        x, train.vehicle.loads, train.shares, (impact if train.dynamic else 0.0) * axles,
        train.factor * counts * axles, train.z * axles, np.zeros(x.size, dtype=np.intp), np.full(x.size, train.fixed),
    )  # fmt: skip


def _number_of(stations: Floats, x: float) -> int:
    """Return the number of the station at x [m]; -1 where x is none, as where a line crosses zero in a panel."""
    nearest = int(np.abs(stations - x).argmin())
    return nearest if abs(stations[nearest] - x) <= edge(stations) else -1


def _front(stations: Floats, x: Floats, behind: Floats, *, lost: int) -> float:
    """Return the front axle's x, so that every axle found from it again is on the same side of an end station.

    Subtracting a distance again may round an axle that stands on an end station to just outside it.

    Parameters
    ----------
    x, behind
        Where the axles stand and heading times their distances (A,) [m].
    lost
        0 when an axle is just outside the first station, 1 the last, negative when none is.
    """
    front = float(x[0])
    if lost >= 0:
        return front + (1.0 if lost else -1.0) * LOST * edge(stations)
    on_first, on_last = x == stations[0], x == stations[-1]
    for _ in range(_ROUNDINGS):
        again = front - behind
        short, beyond = (again[on_first] < stations[0]).any(), (again[on_last] > stations[-1]).any()
        if short == beyond:  # neither; or both, when a vehicle is exactly as long as the deck but for round-off
            break
        front = float(np.nextafter(front, np.inf if short else -np.inf))
    return front
