"""A strength and the steps that lead to it, so that a reviewer can follow each number to its source."""

from __future__ import annotations

import math
from dataclasses import dataclass, field


@dataclass(frozen=True, slots=True)
class Step:
    """One line of a strength's derivation.

    Attributes
    ----------
    symbol, equation
        What is found and how, with its number in ``source``.
    value, unit
        SI.
    source
        Author, title, edition, equation; or where it was typed.
    """

    symbol: str
    equation: str
    value: float
    unit: str
    source: str


@dataclass(frozen=True, slots=True)
class Strength:
    """What a part may carry in one sense.

    Attributes
    ----------
    value
        A magnitude [N, N m].
    steps
        How it was found.
    as_new
        The same with no metal gone [N, N m]; nan where it was typed.
    permanent
        What permanent load alone may use of it [N, N m]; infinite but for timber, which carries less for a long time.
    """

    value: float
    steps: tuple[Step, ...]
    as_new: float = field(default=math.nan, kw_only=True)
    permanent: float = field(default=math.inf, kw_only=True)
