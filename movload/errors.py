"""What went wrong, in words a person can act on; and notes, which are warnings kept as data.

A message reads: *place: rule, value received, unit; nearest valid name*. Every error keeps its parts, so that a file
reader can add the file's name and the place in it without parsing text.
"""

from __future__ import annotations

from dataclasses import dataclass
from typing import TYPE_CHECKING

if TYPE_CHECKING:
    from collections.abc import Iterable


class MovloadError(Exception):
    """The parent of every error that movload raises on purpose.

    Parameters
    ----------
    rule
        What is wrong, with the value received and its unit.
    place
        Where: a file, a key in it, a joint. Empty when the caller knows it better.
    nearest
        The nearest valid name, when a name was not known.
    """

    def __init__(self, rule: str, *, place: str = "", nearest: str = "") -> None:
        super().__init__(rule)
        self.rule = rule
        self.place = place
        self.nearest = nearest

    def __str__(self) -> str:
        """Place, rule and nearest name as one sentence."""
        lead = f"{self.place}: " if self.place else ""
        tail = f' (nearest: "{self.nearest}")' if self.nearest else ""
        return f"{lead}{self.rule}{tail}"

    def __reduce__(self) -> tuple[object, ...]:
        """Keep the parts through pickling (work is spread over processes)."""
        return (_rebuilt, (type(self), self.rule, self.place, self.nearest))

    def at(self, place: str) -> MovloadError:
        """Return the same error with an outer place put before its own."""
        inner = self.place
        joined = f"{place}: {inner}" if inner else place
        return _rebuilt(type(self), self.rule, joined, self.nearest)


def _rebuilt(kind: type[MovloadError], rule: str, place: str, nearest: str) -> MovloadError:
    """Make an error again from its parts."""
    return kind(rule, place=place, nearest=nearest)


class InputError(MovloadError, ValueError):
    """A value, a name or a file that cannot be used as given."""


class UnknownNameError(InputError, LookupError):
    """A name that nothing here answers to: a joint, a row, a unit, a key."""


class UnknownVehicleError(UnknownNameError):
    """A vehicle that is neither in the library nor a file."""


class MissingDataError(InputError):
    """Data that the answer needs and nobody has typed; it names where to put it."""


class UnstableError(InputError):
    """The truss is a mechanism: the message names a joint and the direction in which it can move."""


class OutputError(MovloadError, OSError):
    """A result that cannot be written where it was asked for."""


@dataclass(frozen=True, slots=True)
class Note:
    """A warning as data: printed with the result, never raised.

    ``code`` is stable and may be tested for; ``subject`` is the part, bar or row concerned ("" for the whole);
    ``source`` is where the rule comes from ("" when it is movload's own).
    """

    code: str
    subject: str
    text: str
    source: str = ""


def nearest_name(name: str, known: Iterable[str]) -> str:
    """Return the known name most like ``name``, or "" when none is like it.

    >>> nearest_name("lenght", ["length", "force"])
    'length'
    """
    import difflib

    by_folded = {word.casefold(): word for word in known}
    found = difflib.get_close_matches(name.casefold(), by_folded, n=1, cutoff=0.5)
    return by_folded[found[0]] if found else ""
