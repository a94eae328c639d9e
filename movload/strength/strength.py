"""A strength and the steps that lead to it, so that a reviewer can follow each number to its source."""

from __future__ import annotations

from dataclasses import dataclass


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
    """What a part may carry in one sense: a magnitude [N, N m] and its steps."""

    value: float
    steps: tuple[Step, ...]
