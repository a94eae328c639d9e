"""One helper for every frozen value that holds an array: copied, made read-only, of one type."""

from __future__ import annotations

from typing import TYPE_CHECKING, TypeAlias

import numpy as np

if TYPE_CHECKING:
    from numpy.typing import ArrayLike, NDArray

Floats: TypeAlias = "NDArray[np.float64]"
Ints: TypeAlias = "NDArray[np.intp]"


def frozen_floats(values: ArrayLike) -> Floats:
    """Return a read-only copy as float64."""
    array = np.array(values, dtype=np.float64)
    array.flags.writeable = False
    return array


def held(array: Floats) -> Floats:
    """Make an array that was computed here read-only, without a copy, and return it."""
    array.flags.writeable = False
    return array
