"""How much of a wheel at z across the deck reaches a part: a straight-line influence line across the bridge.

z is measured from the bridge's centre line, positive to the left looking toward +x.
"""

from __future__ import annotations

from dataclasses import dataclass

import numpy as np

from movload.arrays import Floats, frozen_floats
from movload.errors import InputError


@dataclass(frozen=True, slots=True, eq=False)
class Across:
    """Share of a wheel against its place across: straight between points.

    Parameters
    ----------
    z
        Places (P,) [m], increasing; one place only means "the same wherever the wheel stands" (a typed share).
    ordinate
        Share [-] of a wheel at each place.
    """

    z: Floats
    ordinate: Floats

    def __post_init__(self) -> None:
        """Copy, and check shapes and order."""
        object.__setattr__(self, "z", frozen_floats(np.atleast_1d(self.z)))
        object.__setattr__(self, "ordinate", frozen_floats(np.atleast_1d(self.ordinate)))
        if self.z.ndim != 1 or self.z.size == 0 or self.z.shape != self.ordinate.shape:
            raise InputError(
                f"needs as many places as shares, got {self.z.size} and {self.ordinate.size}", place="across"
            )
        if not (np.isfinite(self.z).all() and np.isfinite(self.ordinate).all()):
            raise InputError("places and shares must be finite", place="across")
        if (np.diff(self.z) <= 0).any():
            raise InputError("places must increase from right to left", place="across")

    def __eq__(self, other: object) -> bool:
        """Return whether another line is the same: what was found for one is then true of the other."""
        if not isinstance(other, Across):
            return NotImplemented
        return self._bytes == other._bytes

    def __hash__(self) -> int:
        """By value."""
        return hash(self._bytes)

    @property
    def _bytes(self) -> tuple[bytes, bytes]:
        """The line as bytes."""
        return self.z.tobytes(), self.ordinate.tobytes()

    @classmethod
    def typed(cls, share: float) -> Across:
        """Return the across line of a share that was typed, the same wherever the wheel stands."""
        return cls(np.zeros(1), np.array([share]))

    def at(self, z: Floats | float) -> Floats:
        """Return the share of wheels at z [m], shape of z.

        Raises
        ------
        InputError
            A wheel stands beyond the line's ends, where nothing is known.
        """
        place = np.asarray(z, dtype=np.float64)
        if self.z.size == 1:
            return np.full(place.shape, self.ordinate[0])
        outside = (place < self.z[0]) | (place > self.z[-1])
        if outside.any():
            raise InputError(
                f"a wheel at z = {place[outside].flat[0]:g} m stands outside {self.z[0]:g} to {self.z[-1]:g} m",
                place="across",
            )
        return np.interp(place, self.z, self.ordinate)
