"""Simple spans one after another along the bridge: stringers from floorbeam to floorbeam.

Each has two rows: the moment wherever along it that is greatest, and the shear at either end. No influence line can
give them, because the section moves with the load; `peaks` finds both in closed form.
"""

from __future__ import annotations

from dataclasses import dataclass
from typing import TYPE_CHECKING

import numpy as np

from movload.arrays import Floats, frozen_floats

if TYPE_CHECKING:
    from movload.statics.part import Effect


@dataclass(frozen=True, slots=True, eq=False)
class SimpleSpans:
    """How a line of simple spans answers.

    Attributes
    ----------
    effects
        The rows (2 P): moment and shear of each span, span by span.
    stations
        (P + 1,) the ends of the spans [m], increasing.
    """

    effects: tuple[Effect, ...]
    stations: Floats

    def __post_init__(self) -> None:
        """Copy read-only."""
        object.__setattr__(self, "stations", frozen_floats(self.stations))

    def __reduce__(self) -> tuple[object, ...]:
        """Pickle by parts, so that arrays come back read-only."""
        return (SimpleSpans, (self.effects, self.stations))

    @property
    def lengths(self) -> Floats:
        """Lengths of the spans (P,) [m]."""
        lengths: Floats = np.diff(self.stations)
        return lengths

    @property
    def alike(self) -> object:
        """The same for spans that answer alike, whatever they are called."""
        return self.stations.tobytes()

    @property
    def per_metre(self) -> Floats:
        """Effect of 1 N/m on the whole deck (R,): L^2/8 at midspan, L/2 at the ends."""
        both: Floats = np.stack((self.lengths**2 / 8.0, self.lengths / 2.0), axis=1).reshape(-1)
        return both

    def under(self, loads: Floats) -> Floats:
        """Return effects (R, K) under loads (B, K) on the stations: none, they stand on the floorbeams."""
        return np.zeros((len(self.effects), loads.shape[1]))


@dataclass(frozen=True, slots=True, eq=False)
class PlankSpan:
    """How one plank between two stringers answers one wheel, wherever along the bridge it stands.

    Attributes
    ----------
    effects
        The rows (2): moment and shear.
    stations
        (B,) the panel points [m]; a wheel may stand anywhere between the first and the last.
    span, contact
        Clear of continuity: the plank's simple span and the length of the wheel's contact along it [m].
    """

    effects: tuple[Effect, ...]
    stations: Floats
    span: float
    contact: float

    def __post_init__(self) -> None:
        """Copy read-only."""
        object.__setattr__(self, "stations", frozen_floats(self.stations))

    def __reduce__(self) -> tuple[object, ...]:
        """Pickle by parts, so that arrays come back read-only."""
        return (PlankSpan, (self.effects, self.stations, self.span, self.contact))

    @property
    def alike(self) -> object:
        """The same for planks that answer alike."""
        return (self.span, self.contact)

    @property
    def per_wheel(self) -> Floats:
        """Moment and shear (2,) of 1 N on a plank: the contact in the middle, s/4 - c/8; beside a support, 1 - c/2s.

        A contact longer than the span loads all of it: s^2/8c and s/2c.
        """
        s, c = self.span, self.contact
        if c >= s:
            return np.array([s * s / (8.0 * c), s / (2.0 * c)])
        return np.array([s / 4.0 - c / 8.0, 1.0 - c / (2.0 * s)])

    @property
    def per_metre(self) -> Floats:
        """Effect of 1 N/m on the whole deck (R,): none; a plank's own weight is small beside a wheel."""
        return np.zeros(len(self.effects))

    def under(self, loads: Floats) -> Floats:
        """Return effects (R, K) under loads (B, K) on the stations: none."""
        return np.zeros((len(self.effects), loads.shape[1]))
