"""Strengths that were typed in the bridge file as permitted forces, with the margin already taken off."""

from __future__ import annotations

import math
from typing import TYPE_CHECKING, Final

import numpy as np

from movload.arrays import Floats, held
from movload.strength.strength import Step, Strength

if TYPE_CHECKING:
    from collections.abc import Mapping, Sequence

    from movload.bridge.bridge import Permitted
    from movload.statics.part import Effect

SENSES: Final = ("tension", "compression")


def permitted_strengths(effects: Sequence[Effect], permits: Mapping[str, Permitted]) -> Floats:
    """Return permitted forces (R, 2) [N], tension then compression; nan where nothing is typed."""
    values = np.full((len(effects), 2), math.nan)
    for row, effect in enumerate(effects):
        permitted = permits.get(effect.name) if effect.kind == "axial" else None
        if permitted is None:
            continue
        for side, force in enumerate((permitted.tension, permitted.compression)):
            values[row, side] = math.nan if force is None else force
    return held(values)


def permitted_strength(name: str, permitted: Permitted, sense: str) -> Strength:
    """Return one typed strength with its single step."""
    value = getattr(permitted, sense)
    force = math.nan if value is None else float(value)
    return Strength(force, (Step("P", f"permitted {sense} of {name}, as typed", force, "N", "bridge file"),))
