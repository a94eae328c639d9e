"""What one peak figure shows, and the words that say it."""

from __future__ import annotations

from dataclasses import dataclass
from typing import TYPE_CHECKING

import numpy as np

from movload.report.drawing.left_out import told_left_out
from movload.report.drawing.words import effect_value, figures, lengths, origin
from movload.report.phrases import ARROWS, standing_text

if TYPE_CHECKING:
    from movload.arrays import Floats
    from movload.bridge.truss import Truss
    from movload.peaks.peaks import Peak
    from movload.report.drawing.deck_line import DeckLine
    from movload.report.drawing.left_out import LeftOut
    from movload.statics.influence import InfluenceLine
    from movload.units import UnitSystem

_SAME = 1e-12  # shares that differ less are one number


@dataclass(frozen=True, slots=True, eq=False)
class Subject:
    """What one peak figure shows.

    Attributes
    ----------
    truss, deck, line, peak
        The truss, its loaded chord, the row's influence line and its peak.
    forces
        Force of each member (M,) [N, + tension].
    units, title, caption
        As given by the caller.
    """

    truss: Truss
    deck: DeckLine
    line: InfluenceLine
    peak: Peak
    forces: Floats
    units: UnitSystem
    title: str
    caption: str

    @property
    def is_off(self) -> bool:
        """Whether no position of the vehicle gives any."""
        return self.peak.heading == 0

    @property
    def governing(self) -> int:
        """Row of the governing bar; -1 when the row is no bar's."""
        names = [member.name for member in self.truss.members]
        return names.index(self.line.effect.name) if self.line.effect.kind == "axial" else -1

    @property
    def joint(self) -> str:
        """The support or panel point whose row is shown; "" when it is a bar's."""
        return "" if self.line.effect.kind == "axial" else self.line.effect.name.rpartition(" ")[0]

    def answer(self) -> str:
        """Return the row and its peak."""
        name = self.line.effect.name
        return name if self.is_off else f"{name}   {effect_value(self.line.effect, self.peak.value, self.units)}"

    def placed(self) -> str:
        """Say where the vehicle stands."""
        if self.is_off:
            return "no position of this vehicle gives any"
        front = lengths([self.peak.position], self.units, rounded=True)[0]
        toward = f"heading {'right' if self.peak.heading > 0 else 'left'} {ARROWS[self.peak.heading]}"
        standing = standing_text(self.peak, tuple(name or "the abutment" for name in self.deck.names))
        return f"front axle at x = {front} {self.units.length}, {toward}, {standing}"

    def told(self, left_out: LeftOut) -> str:
        """Return the caption: what the forces are, the units, what the line is, where x starts, what is not written."""
        forces = f"{(self.caption or self._vehicle_alone()).rstrip('.')}. " if self.caption or self.is_stressed else ""
        units = f"Forces in {self.units.force}, lengths in" if self.is_stressed else "Lengths in"
        under = "" if self.is_off else ", with its ordinates under the axles"
        return (
            f"{forces}Influence line: {self.line.effect.name} per unit load standing at x{under}. "
            f"{units} {self.units.length}; {origin(self.truss, self.units)}. {told_left_out(left_out)}"
        )

    @property
    def is_stressed(self) -> bool:
        """Whether any bar carries a force."""
        return bool(self.forces.any())

    @property
    def decimals(self) -> int:
        """How many decimals bar forces are written with: three figures for the largest."""
        return figures(self.units.shown(float(np.abs(self.forces).max(initial=0.0)), "force"))

    def _vehicle_alone(self) -> str:
        """Say what the default forces are, and what of the axle loads they hold when it is not the whole."""
        placement = self.peak.placement
        parts = []
        for word, values in (("share", placement.share), ("impact", placement.impact)):
            if values.size and np.ptp(values) < _SAME and values[0] != (word == "share"):
                parts.append(f"{word} {values[0]:.3g}")
        taken = f", {' and '.join(parts)} included" if parts else ""
        return f"Bar forces: from the vehicle alone, standing as drawn{taken}"
