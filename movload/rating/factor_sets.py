"""Factor sets: which margins a method puts on permanent load, live load and strength. Data, never code."""

from __future__ import annotations

from dataclasses import dataclass
from typing import Final


@dataclass(frozen=True, slots=True)
class Level:
    """One level of a method: ``permanent`` multiplies D, ``live`` multiplies L (1 + I)."""

    title: str
    permanent: float = 1.0
    live: float = 1.0


@dataclass(frozen=True, slots=True)
class FactorSet:
    """A method of rating.

    Attributes
    ----------
    title
        What it is called.
    levels
        At least one.
    statement
        What an answer must say about it.
    source
        Edition and whether its values were read or come from memory.
    """

    title: str
    levels: tuple[Level, ...]
    statement: str
    source: str


PERMITTED: Final = FactorSet(
    "permitted forces",
    (Level("permitted"),),
    "Strengths are the permitted forces typed in the bridge file, margin included; no load factors applied.",
    "typed",
)
