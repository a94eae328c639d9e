"""Every row's strength at every level: as typed where it was typed, else by the rules from section and material.

The rules are loaded only for a bridge whose parts are made of sections: they are a third of what start-up reads.
"""

from __future__ import annotations

from dataclasses import dataclass, field
from typing import TYPE_CHECKING, TypeAlias

import numpy as np

from movload.bridge.strengths import TypedStrength
from movload.errors import InputError, MissingDataError, Note, UnknownNameError
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
    asked
        Row, side and what the rules still ask about it: raised when a crossing makes the row feel that sense.
    """

    which: Numbers
    distinct: tuple[Strength, ...]
    notes: tuple[Note, ...]
    asked: tuple[tuple[int, int, MissingDataError], ...] = ()

    def values(self, name: str = "value") -> Floats:
        """Return a value of every row's strength (levels, R, 2)."""
        return np.array([getattr(one, name) for one in self.distinct])[self.which]


def strengths_of(bridge: Bridge, parts: Sequence[Part], method: FactorSet, felt: Bools) -> Strengths:
    """Return every row's strength.

    Parameters
    ----------
    felt
        (R, 2) whether a row may feel a sense at all: where it cannot, nothing is asked of section or material.

    Raises
    ------
    MissingDataError, UnknownNameError
        Something that a level asks beside a typed strength is not there.
    """
    found = _Found(method)
    asked: dict[tuple[int, int], MissingDataError] = {}
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
                if (error := found.missing.get(found.key(known, sense, level))) is not None:
                    asked.setdefault((row, side), error)
    which.flags.writeable = False
    still = tuple((row, side, error) for (row, side), error in asked.items())
    return Strengths(which, tuple(found.distinct), found.notes, still)


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
    refused: dict[tuple[object, ...], tuple[str, list[str]]] = field(default_factory=dict)
    made: dict[int, tuple[Made, list[str], set[str]]] = field(default_factory=dict)
    missing: dict[tuple[object, ...], MissingDataError] = field(default_factory=dict)

    @staticmethod
    def key(known: _Known, sense: str, level: Level) -> tuple[object, ...]:
        """Return what makes two strengths one: a level tells only by its factors on strength."""
        factors = (tuple(level.resistance.items()), tuple(level.timber.items()), level.condition_factors)
        return (id(known.typed), id(known.made), sense, factors)

    def number(self, known: _Known, sense: str, level: Level, effect: Effect) -> int:
        """Return the number of a strength, found once for all rows of one make and words; 0 for none."""
        key = self.key(known, sense, level)
        if key not in self.numbers:
            strength = self._strength(known, sense, level, effect)
            self.numbers[key] = len(self.distinct) if strength is not UNRATED else 0
            if strength is not UNRATED:
                self.distinct.append(strength)
        self._told(key, known, sense, _subject(effect))
        return self.numbers[key]

    def _told(self, key: tuple[object, ...], known: _Known, sense: str, subject: str) -> None:
        """Keep whom a refusal, or a strength by the rules, is about."""
        if key in self.refused:
            self.refused[key][1].append(subject)
        elif known.made is not None and self.numbers[key]:
            _, subjects, senses = self.made.setdefault(id(known.made), (known.made, [], set()))
            subjects.append(subject)
            senses.add(sense)

    def _strength(self, known: _Known, sense: str, level: Level, effect: Effect) -> Strength:
        """Return a strength as typed, else by the rules; none where nobody has typed it or no rule covers it."""
        subject, typed, made = _subject(effect), known.typed, known.made
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
        except MissingDataError as error:
            self.missing[self.key(known, sense, level)] = error
            return UNRATED
        except UnknownNameError:
            raise  # a word misspelled is no case that a rule leaves out
        except InputError as error:
            self.refused[self.key(known, sense, level)] = f"{sense}: {error}", []
            return UNRATED
        return strength

    @property
    def notes(self) -> tuple[Note, ...]:
        """What rules do not cover, and what a reader must know of parts as made, once for all that share a make."""
        notes: dict[tuple[str, str, str], list[str]] = {}
        if self.made:
            from movload.strength.parts import part_notes
        for made, subjects, senses in self.made.values():
            for note in part_notes(made, subjects[0], senses):
                whom = subjects if note.subject == subjects[0] else [note.subject]
                notes.setdefault((note.code, note.text, note.source), []).extend(whom)
        for said, subjects in self.refused.values():
            notes.setdefault(("not-covered", f"not rated in {said}", self.method.title), []).extend(subjects)
        told = [Note(code, _some(subjects), text, source) for (code, text, source), subjects in notes.items()]
        return tuple(sorted(told, key=lambda note: note.code != "not-covered"))


def _subject(effect: Effect) -> str:
    """Return what errors and notes call a row's part."""
    return effect.name if effect.kind == "axial" else effect.part


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
