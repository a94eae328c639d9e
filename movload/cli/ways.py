"""How a vehicle is to cross, as options say it: where across, how fast, how many abreast."""

from __future__ import annotations

from contextlib import contextmanager
from typing import TYPE_CHECKING, Final

from movload.cli.options import read_loadings

if TYPE_CHECKING:
    from collections.abc import Iterator

    from movload.bridge.roadway import Roadway
    from movload.traffic.crossing import Crossing

_FASTEST: Final = 100.0  # m/s; nothing that is rated crosses faster


def crossings_asked(  # one parameter for each option
    vehicles: list[str],
    places: list[str] | None,
    speeds: list[str] | None,
    *,
    abreast: int,
    wander: str | None,
    beside: str | None,
    roadway: Roadway | None,
) -> list[tuple[str, Crossing]]:
    """Return every vehicle in every place at every speed, with the name it was asked for by."""
    from movload.errors import InputError
    from movload.traffic.crossing import MOST_ABREAST, Crossing

    where = [_place(one) for one in places or ["anywhere"]]
    if len(set(where)) < len(where):
        raise InputError("the same place is asked for twice", place="--at")
    if not 0 <= abreast <= MOST_ABREAST:
        raise InputError(f"0 to {MOST_ABREAST} may go abreast, got {abreast}", place="--abreast")
    traffic = None if beside is None else read_loadings([beside])[0]
    if traffic is not None and abreast > 1:
        raise InputError("with other traffic beside it one vehicle crosses; leave --abreast out", place="--beside")
    stray = _stray(wander, places or [], roadway)
    rates = [_speed(one) for one in speeds or []]
    return [
        (name, Crossing(loading, place, z, lanes=abreast, speed=rate, wander=stray, beside=traffic))
        for name, loading in zip(vehicles, read_loadings(vehicles), strict=True)
        for place, z in where
        for rate in rates or [None]
    ]


def _stray(wander: str | None, places: list[str], roadway: Roadway | None) -> float:
    """Return how far a vehicle strays from the centre line [m]."""
    from movload.errors import InputError
    from movload.traffic.crossing import WANDER

    if wander is None:
        return WANDER
    stray = quantity_option(wander, "length", "--wander")
    if "centre line" not in places:
        raise InputError('only counts with --at "centre line"', place="--wander")
    if stray < 0.0 or (roadway is not None and stray > 0.5 * (roadway.left - roadway.right)):
        raise InputError(f'a stray is 0 to half the width between the kerbs, got "{wander}"', place="--wander")
    return stray


def _speed(said: str) -> float | None:
    """Return a speed [m/s]."""
    from movload.errors import InputError

    speed = quantity_option(said, "speed", "--speed")
    if not 0.0 < speed <= _FASTEST:
        raise InputError(
            f'a speed must be above 0 and at most {3.6 * _FASTEST:.0f} km/h, got "{said}"', place="--speed"
        )
    return speed


def _place(said: str) -> tuple[str, float]:
    """Return a place by its name, or an offset [m]."""
    from movload.bridge.roadway import PLACES
    from movload.errors import InputError, UnknownNameError, nearest_name

    if said in PLACES and said != "offset":
        return said, 0.0
    if any(sign.isdigit() for sign in said):
        return "offset", quantity_option(said, "length", "--at")
    named = [place for place in PLACES if place != "offset"]
    if said == "offset":
        raise InputError('say how far: --at "0.4 m"', place="--at")
    raise UnknownNameError(
        f'"{said}" is none of {", ".join(named)} and no offset', place="--at", nearest=nearest_name(said, named)
    )


def quantity_option(text: str, quantity: str, option: str) -> float:
    """Return a typed option in SI; errors name the option."""
    from movload.units import to_si

    with naming_option(option):
        return to_si(text, quantity)  # type: ignore[arg-type]  # one of the quantities


@contextmanager
def naming_option(option: str) -> Iterator[None]:
    """Say which option is wrong, whatever the domain calls its place."""
    from movload.errors import InputError

    try:
        yield
    except InputError as error:
        raise type(error)(error.rule, place=option, nearest=error.nearest) from None
