"""Metals of unknown grade by the year built, from the shipped file."""

from __future__ import annotations

import datetime as dt
import math
from functools import cache
from itertools import pairwise
from pathlib import Path
from typing import TYPE_CHECKING, Final

from movload.bridge.material import Period, material_by_year
from movload.errors import InputError, MovloadError
from movload.files.schema.checked import checked
from movload.files.schema.metals import MetalsFile, MetalTable
from movload.files.toml import parsed, read_text

if TYPE_CHECKING:
    from movload.bridge.material import Material

_FILE: Final = Path(__file__).resolve().parent.parent / "data" / "metals.toml"


def read_metal(kind: str, year: int) -> Material:
    """Return what a metal of unknown grade is taken to be, by the year the bridge was built.

    Parameters
    ----------
    kind
        "steel" or "wrought iron"; the strength of cast iron or timber is never taken from a year.
    year
        Year built, from the metal's first use to today.

    Raises
    ------
    UnknownNameError
        No such kind of material; the nearest one is named.
    InputError
        A kind without a default, a year before the metal was built with, or one that has not come yet.

    References
    ----------
    AASHTO, Manual for Bridge Evaluation, tables of unknown steel by date built and of wrought iron (from memory).
    """
    if isinstance(year, bool) or not isinstance(year, int):
        raise InputError(f"a whole year is asked for, got {year}", place="year")
    return material_by_year(_shipped(), kind, year, today=dt.datetime.now(dt.UTC).year)


@cache
def _shipped() -> tuple[Period, ...]:
    """Return the shipped periods."""
    return metals_from(read_text(_FILE), _FILE.name)


def metals_from(text: str, place: str) -> tuple[Period, ...]:
    """Return the periods in a file's text; ``place`` is what errors call the file.

    Raises
    ------
    InputError
        Something in it is wrong: file, place, rule and value are given.
    """
    try:
        table, _ = checked(MetalsFile, parsed(text), own_units=False)
        periods = tuple(_period(metal) for metal in table.metals)
        _check(periods)
    except MovloadError as error:
        raise error.at(place) from None
    return periods


def _period(table: MetalTable) -> Period:
    """Return the period that a checked table describes."""
    return Period(
        table.kind,
        table.first,
        math.inf if table.last is None else table.last,
        table.fy,
        fu=table.fu,
        modulus=table.modulus,
        density=table.density,
        source=f"{table.source}; {table.others}",
    )


def _check(periods: tuple[Period, ...]) -> None:
    """Refuse years that two periods of one metal share, or that none of them holds, before anybody asks for one."""
    if not periods:
        raise InputError("at least one metal is asked for", place="metals")
    for kind in dict.fromkeys(period.kind for period in periods):
        for earlier, later in pairwise(period for period in periods if period.kind == kind):
            if later.first != earlier.last + 1:
                raise InputError(
                    f"{kind}: a period begins the year after the one before it ends, {earlier.last:g}, "
                    f"got {later.first}",
                    place="metals",
                )
    for period in periods:
        material_by_year((period,), period.kind, period.first, today=period.first)
