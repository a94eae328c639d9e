"""Uniform loads of a vehicle file: strips and a tail that move with it, and loads that fill the bridge."""

from __future__ import annotations

import math
from dataclasses import dataclass
from typing import TYPE_CHECKING

from movload.errors import InputError
from movload.files.places import in_file
from movload.traffic.fill import Fill
from movload.traffic.vehicle import Strip, Tail

if TYPE_CHECKING:
    from collections.abc import Sequence

    from movload.files.schema.vehicle import FillTable, StripTable, TailTable


@dataclass(frozen=True, slots=True)
class Behind:
    """Where the last axle is, which a load may be measured from: whether there is one, and the gaps before it."""

    axles: bool
    gaps: Sequence[float | tuple[float, float]]

    def at(self, after: float, place: str) -> float:
        """Return the distance behind the front axle [m] of what is ``after`` behind the last."""
        if not self.axles:
            raise InputError("there is no axle for it to be behind: say start", place=place)
        total = after
        for gap in self.gaps:
            if isinstance(gap, tuple):
                raise InputError("a spacing is a range, so the last axle has no one place", place=place)
            total += gap
        return total


def strip_of(table: StripTable, behind: Behind, place: str) -> Strip:
    """Return one uniform load of finite length."""
    if table.start is not None and table.after is not None:
        raise InputError("either start or after is asked for, got both", place=f"{place}.after")
    if table.after is not None:
        start = behind.at(table.after, f"{place}.after")
    elif table.start is not None:
        start = table.start
    else:
        raise InputError("is missing; say start, or after (behind the last axle)", place=f"{place}.start")
    with in_file(place, table, "strips"):
        return Strip(start, table.length, table.load, gauge=math.nan if table.gauge is None else table.gauge)


def tail_of(table: TailTable, behind: Behind, place: str) -> Tail:
    """Return the load that follows the last axle."""
    with in_file(place, table, "tail"):
        start = behind.at(table.after, f"{place}.after")
        return Tail(start, table.load, gauge=math.nan if table.gauge is None else table.gauge)


def fill_of(table: FillTable, place: str) -> Fill:
    """Return one load that fills."""
    if table.load is None and table.density is None:
        raise InputError("is missing", place=f"{place}.load")
    if table.load is not None and table.density is not None:
        raise InputError(f'"{table.density}" says it already: leave it out', place=f"{place}.load")
    if table.at is not None and table.where is not None:
        raise InputError("either where or at is asked for, got both", place=f"{place}.at")
    with in_file(place, table):
        return Fill(
            math.nan if table.load is None else table.load,
            table.shape,
            "at" if table.at is not None else table.where or "adverse",
            table.at,
            web_load=math.nan if table.web_load is None else table.web_load,
            impact=table.impact == "added",
            gauge=math.nan if table.gauge is None else table.gauge,
            per_area=table.per_area,
            across=table.across,
            clear=table.clear or (0.0, 0.0),
            density=table.density or "",
        )
