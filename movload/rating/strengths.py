"""Every row's strength at every level: as typed where it was typed, else by the rules from section and material.

The rules are loaded only for a bridge whose parts are made of sections: they are a third of what start-up reads.
"""

from __future__ import annotations

from dataclasses import dataclass, field
from typing import TYPE_CHECKING, TypeAlias

import numpy as np

from movload.bridge.strengths import TypedStrength
from movload.errors import InputError, MissingDataError, Note
from movload.rating.resistance import SENSES, UNRATED, resistance

if TYPE_CHECKING:
    from collections.abc import Sequence

    from movload.arrays import Bools, Floats
    from movload.bridge.bridge import Bridge
    from movload.bridge.made import Made
    from movload.rating.factor_sets import FactorSet, Level
    from movload.statics.part import Effect, Part
    from movload.strength.strength import Strength

Numbers: TypeAlias = "np.ndarray[tuple[int, ...], np.dtype[np.intp]]"
_RIGHT = "right truss"


@dataclass(frozen=True, slots=True)
class Strengths:
    """The strengths of all rows.

    Attributes
    ----------
    which
        (levels, R, 2) number of each row's strength among the distinct ones; number 0 is none.
    distinct
        Those, with their steps.
    notes
        What a reader must know of them; rows that a rule does not cover are named here.
    """

    which: Numbers
    distinct: tuple[Strength, ...]
    notes: tuple[Note, ...]

    def values(self, name: str = "value") -> Floats:
        """Return a value of every row's strength (levels, R, 2)."""
        return np.array([getattr(one, name) for one in self.distinct])[self.which]


def strengths_of(bridge: Bridge, parts: Sequence[Part], method: FactorSet, felt: Bools) -> Strengths:
    """Return every row's strength.

    Parameters
    ----------
    felt
        (R, 2) whether a row may feel a sense: where it cannot, nothing is asked of section or material.

    Raises
    ------
    MissingDataError, UnknownNameError
        Something that a rule or a level asks for is not there.
    """
    found = _Found(method)
    effects = [effect for part in parts for effect in part.response.effects]
    which = np.zeros((len(method.levels), len(effects), 2), dtype=np.intp)
    own = {bridge.truss.member(name).name: typed for name, typed in bridge.strengths.items()}
    made = {bridge.truss.member(name).name: both for name, both in bridge.made.items()}
    for row, effect in enumerate(effects):
        typed, of = _of_row(bridge, own, made, effect)
        for side, sense in enumerate(SENSES.get(effect.kind, ())):
            known = _Known(typed, of if felt[row, side] and method.rules else None)
            for number, level in enumerate(method.levels):
                which[number, row, side] = found.number(known, sense, level, effect)
    which.flags.writeable = False
    return Strengths(which, tuple(found.distinct), found.notes)


@dataclass(frozen=True, slots=True)
class _Known:
    """What is known of a row in one sense: typed strengths and words, and what it is made of where rules may ask."""

    typed: TypedStrength | None
    made: Made | None


@dataclass(slots=True)
class _Found:
    """The distinct strengths found so far."""

    method: FactorSet
    distinct: list[Strength] = field(default_factory=lambda: [UNRATED])
    numbers: dict[tuple[object, ...], int] = field(default_factory=dict)
    refused: dict[tuple[str, str], list[str]] = field(default_factory=dict)
    made: dict[int, tuple[Made, str, set[str]]] = field(default_factory=dict)

    def number(self, known: _Known, sense: str, level: Level, effect: Effect) -> int:
        """Return the number of a strength, found once for all rows of one make and words; 0 for none."""
        key = (id(known.typed), id(known.made), sense, level.title)
        if key not in self.numbers:
            strength = self._strength(known, sense, level, effect)
            self.numbers[key] = len(self.distinct) if strength is not UNRATED else 0
            if strength is not UNRATED:
                self.distinct.append(strength)
        return self.numbers[key]

    def _strength(self, known: _Known, sense: str, level: Level, effect: Effect) -> Strength:
        """Return a strength as typed, else by the rules; none where nobody has typed it or no rule covers it."""
        subject = effect.name if effect.kind == "axial" else effect.part
        typed, made = known.typed, known.made
        if typed is not None:
            strength = resistance(typed, sense, self.method, level, subject=subject)
            if strength is not UNRATED:
                return strength
        if made is None:
            return UNRATED
        from movload.rating.ruled import ruled

        words = typed or TypedStrength(place=made.place)
        try:
            strength = ruled(made, words, sense, (self.method, level), subject=subject)
        except MissingDataError:
            raise
        except InputError as error:
            self.refused.setdefault((f"{sense}: {error}", self.method.title), []).append(subject)
            return UNRATED
        self.made.setdefault(id(made), (made, subject, set()))[2].add(sense)
        return strength

    @property
    def notes(self) -> tuple[Note, ...]:
        """What rules do not cover, and what a reader must know of parts as made, once for all that share a make."""
        notes: dict[tuple[str, str, str], list[str]] = {}
        if self.made:
            from movload.strength.parts import part_notes
        for made, subject, senses in self.made.values():
            for note in part_notes(made, subject, senses):
                notes.setdefault((note.code, note.text, note.source), []).append(note.subject)
        told = [Note(code, _some(subjects), text, source) for (code, text, source), subjects in notes.items()]
        refused = [
            Note("not-covered", _some(subjects), f"not rated in {said}", title)
            for (said, title), subjects in self.refused.items()
        ]
        return (*refused, *told)


def _some(subjects: Sequence[str]) -> str:
    """Return whom a note is about: the first, and that there are more."""
    named = list(dict.fromkeys(subjects))
    return ", ".join(named[:3]) + (" ..." if len(named) > 3 else "")


def _of_row(
    bridge: Bridge, own: dict[str, TypedStrength], made: dict[str, tuple[Made, Made]], effect: Effect
) -> tuple[TypedStrength | None, Made | None]:  # fmt: skip
    """Return what was typed about a row's part and what the part is made of; None where nothing was."""
    if effect.kind == "axial":
        both = made.get(effect.name)
        return own.get(effect.name), None if both is None else both[effect.part == _RIGHT]
    floor = bridge.floor
    beams = {"stringer": floor.stringers, "floorbeam": floor.floorbeams, "planks": floor.planks}
    part = beams.get(effect.part.partition(" ")[0])
    return (part.strength, part.made) if part is not None and effect.kind in SENSES else (None, None)


def may_feel(parts: Sequence[Part], permanent: Floats) -> Bools:
    """Return whether each row may feel its positive and its negative sense (R, 2), under any vehicle or for good.

    Parameters
    ----------
    permanent
        Permanent effects (classes, R).
    """
    signs = []
    for part in parts:
        ordinates = _ordinates(part)
        up, down = (ordinates > 0).any(axis=1), (ordinates < 0).any(axis=1)
        lifted, pressed = bool((part.across.ordinate < 0).any()), bool((part.across.ordinate > 0).any())
        signs.append(np.stack(((up & pressed) | (down & lifted), (down & pressed) | (up & lifted)), axis=1))
    felt: Bools = np.concatenate(signs)
    felt |= np.stack(((permanent > 0).any(axis=0), (permanent < 0).any(axis=0)), axis=1)
    return felt


def _ordinates(part: Part) -> Floats:
    """Return a part's effects under a unit load on each station (R, B); of simple spans and planks 1: they only sag."""
    response = part.response
    if not hasattr(response, "condensed"):
        return np.ones((len(response.effects), 1))
    return response.under(np.eye(response.stations.size))
