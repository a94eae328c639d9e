"""What a steel rule refuses, what it asks for, and of which slenderness it only warns."""

from __future__ import annotations

import math
from typing import TYPE_CHECKING, Final, Literal

from movload.errors import InputError, MissingDataError, Note

if TYPE_CHECKING:
    from collections.abc import Mapping

_SOURCE: Final = "AASHTO LRFD 6.8.4 and 6.9.3, from memory"
_COMPRESSION, _COMPRESSION_BRACING = 120.0, 140.0
_TENSION, _TENSION_REVERSING, _TENSION_BRACING = 200.0, 140.0, 240.0


def require_positive(**values: float | None) -> None:
    """Refuse a value [SI] that is not finite and above 0; None is for the rule that needs it to refuse."""
    for name, value in values.items():
        if value is not None and not (math.isfinite(value) and value > 0):
            raise InputError(f"must be finite and above 0, got {value:g}", place=name)


def require_not_negative(**values: float) -> None:
    """Refuse a value [SI] that is not finite, or below 0."""
    for name, value in values.items():
        if not (math.isfinite(value) and value >= 0):
            raise InputError(f"must be finite and 0 or more, got {value:g}", place=name)


def require_fraction(name: str, value: float) -> None:
    """Refuse a factor that is not above 0 and at most 1."""
    if not 0 < value <= 1:
        raise InputError(f"must be above 0 and at most 1, got {value:g}", place=name)


def factor_of(phi: Mapping[str, float], name: str) -> float:
    """Return a level's resistance factor; none is ever taken as 1 in silence.

    Raises
    ------
    MissingDataError
        The level does not give it.
    """
    if name not in phi:
        raise MissingDataError(f'the level gives no resistance factor for "{name}"', place=f"resistance.{name}")
    require_positive(**{f"resistance.{name}": phi[name]})
    return phi[name]


def slenderness_notes(
    subject: str,
    slenderness: float,
    sense: Literal["tension", "compression"],
    *,
    bracing: bool = False,
    reverses: bool = False,
) -> tuple[Note, ...]:
    """Return a note where a bar is slenderer than a new one may be; its strength stands all the same.

    Compression: K l / r at most 120 (bracing 140). Tension: l / r at most 200, 140 where the force reverses, 240 in
    bracing; eyebars, rods, cables and plates are exempt, so do not ask about them.

    Parameters
    ----------
    subject
        What the note calls the bar.
    slenderness
        The greatest of both planes [-].
    sense, bracing, reverses
        What the bar does: main member unless ``bracing``; ``reverses`` where it is pushed as well as pulled.
    """
    require_positive(slenderness=slenderness)
    if sense == "compression":
        limit, said = (_COMPRESSION_BRACING if bracing else _COMPRESSION), "K l / r"
    elif bracing:
        limit, said = _TENSION_BRACING, "l / r"
    else:
        limit, said = (_TENSION_REVERSING if reverses else _TENSION), "l / r"
    if slenderness <= limit:
        return ()
    text = f"{said} = {slenderness:.0f} in {sense} is above {limit:.0f}, the limit for new work."
    return (Note(f"slender-{sense}", subject, text, _SOURCE),)
