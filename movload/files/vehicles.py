"""A vehicle file becomes a loading: what a case leaves out it takes from the file, and every number is SI already."""

from __future__ import annotations

import math
import re
from contextlib import contextmanager
from dataclasses import dataclass
from typing import TYPE_CHECKING, Final

import numpy as np

from movload.errors import InputError, MovloadError
from movload.files.places import in_file
from movload.files.schema.checked import checked
from movload.files.schema.vehicle import StateTable, VehicleFile
from movload.files.toml import parsed
from movload.files.uniform import Behind, fill_of, strip_of, tail_of
from movload.traffic.loading import Case, Following, Loading
from movload.traffic.vehicle import Vehicle

if TYPE_CHECKING:
    from collections.abc import Iterator, Sequence

    from movload.files.schema.vehicle import (
        AxleTable,
        CaseTable,
        ConvoyTable,
    )

_EITHER: Final = ("relieving", "tolerance")  # two ways to say one thing: a case that says one leaves both of the file's
_OF_IMPACT: Final = {
    "included": ("its loads hold impact already: none is added",),
    "none": ("its rule asks for no impact",),
}


def vehicle_from(text: str, place: str) -> Loading:
    """Return the loading in a vehicle file's text; ``place`` is what errors call the file.

    Raises
    ------
    InputError
        Something in it is wrong: file, place, rule, value and nearest name are given.
    """
    try:
        return _loading(checked(VehicleFile, parsed(text))[0])
    except MovloadError as error:
        raise error.at(place) from None


@dataclass(frozen=True, slots=True)
class _State:
    """One state of a file: what it says, the case's own words before the file's, and where each is written."""

    file: VehicleFile
    case: CaseTable | None = None
    number: int = 0

    @property
    def title(self) -> str:
        """What the case is called: as the file, where it has no cases."""
        return self.file.title if self.case is None else self.case.title

    def where(self, key: str) -> StateTable:
        """Return the table whose value of a key counts."""
        keys = set(_EITHER) if key in _EITHER else {key}
        return self.case if self.case is not None and keys & self.case.model_fields_set else self.file

    def says(self, key: str) -> bool:
        """Whether a key is written, with whatever value."""
        return key in self.where(key).model_fields_set

    def place(self, key: str) -> str:
        """Return where in the file a key is, or would be, written."""
        own = self.case is not None and (self.where(key) is self.case or not self.says(key))
        return f"cases[{self.number}].{key}" if own else key


def _loading(table: VehicleFile) -> Loading:
    """Return the loading that a checked table describes."""
    if not table.headings:
        raise InputError('"+x", "-x" or both are asked for, got []', place="headings")
    states = [_State(table, case, number) for number, case in enumerate(table.cases)] or [_State(table)]
    for key in StateTable.model_fields:
        _require_taken(table, states, key)
    return Loading(
        table.title,
        table.kind,
        tuple(_case(state) for state in states),
        source=table.source or "",
        notes=(*table.notes, *_OF_IMPACT.get(table.impact, ())),
        dynamic=table.impact == "added",
        weight=math.nan if table.weight is None else table.weight,
    )


def _require_taken(table: VehicleFile, states: Sequence[_State], key: str) -> None:
    """Refuse what the file says for all cases and every case says itself."""
    if key in table.model_fields_set and all(state.where(key) is not table for state in states):
        raise InputError("no case takes it: each says it itself", place=key)


def _case(state: _State) -> Case:
    """Return one case."""
    vehicle = _vehicle(state)
    fills = tuple(fill_of(fill, f"{state.place('fills')}[{n}]") for n, fill in enumerate(state.where("fills").fills))
    if vehicle is None and not fills:
        raise InputError("is missing", place=state.place("axles"))
    where = state.where("tolerance")
    if where.tolerance and "relieving" in where.model_fields_set:
        raise InputError("either relieving or a tolerance is asked for, got both", place=state.place("tolerance"))
    if where.tolerance and fills:
        raise InputError("it is one of axle weights, and loads that fill have none", place=state.place("tolerance"))
    more, less = 1.0 + where.tolerance, 1.0 - where.tolerance
    with _placed(state):
        return Case(
            state.title,
            vehicle,
            fills,
            state.where("factor").factor * more,
            relieving=less / more if where.tolerance else where.relieving,
            convoy=_following(state.where("convoy").convoy, state),
            above=state.where("above").above,
            continuous=state.where("continuous").continuous,
        )


def _following(convoy: ConvoyTable | None, state: _State) -> Following | None:
    """Return how many may follow each other; None for one alone."""
    if convoy is None:
        return None
    with in_file(state.place("convoy"), convoy):
        return Following(convoy.most, convoy.headway, convoy.ordered)


def _vehicle(state: _State) -> Vehicle | None:
    """Return what moves; None where loads only fill."""
    axles, strips, tail = state.where("axles").axles, state.where("strips").strips, state.where("tail").tail
    if tail is not None and not axles:
        raise InputError("it follows the last axle, and there is none", place=state.place("tail"))
    if not axles and not strips and not state.says("axles"):
        return None
    _require_gaps(axles, state.place("axles"))
    _require_gauges(state)
    gaps = [axle.after for axle in axles if axle.after is not None]
    lefts = tuple(0.5 if axle.left is None else axle.left for axle in axles)
    behind = Behind(bool(axles), gaps)
    moving = tuple(strip_of(strip, behind, f"{state.place('strips')}[{n}]") for n, strip in enumerate(strips))
    following = None if tail is None else tail_of(tail, behind, state.place("tail"))
    with _placed(state):
        return Vehicle(
            state.title if state.case is None else f"{state.file.title}, {state.title}",
            np.array([axle.load for axle in axles]),
            gaps,
            gauges=tuple(axle.gauge for axle in axles if axle.gauge is not None),
            left_shares=lefts if any(axle.left is not None for axle in axles) else (),
            strips=moving,
            tail=following,
            headings=tuple({"+x": 1, "-x": -1}[heading] for heading in state.file.headings),
        )


def _require_gaps(axles: Sequence[AxleTable], place: str) -> None:
    """Refuse a distance before the first axle, and axles without one behind it."""
    for number, axle in enumerate(axles):
        if (number == 0) != (axle.after is None):
            said = (
                "the first axle has no axle before it"
                if number == 0
                else "the distance behind the axle before is missing"
            )
            raise InputError(said, place=f"{place}[{number}].after")


def _require_gauges(state: _State) -> None:
    """Refuse a vehicle of which some loads have a gauge and some have none."""
    tail = state.where("tail").tail
    pieces = {
        "axles": [axle.gauge for axle in state.where("axles").axles],
        "strips": [strip.gauge for strip in state.where("strips").strips],
        "tail": [] if tail is None else [tail.gauge],
    }
    if all(gauge is None for gauges in pieces.values() for gauge in gauges):
        return
    for key, gauges in pieces.items():
        if None in gauges:
            number = "" if key == "tail" else f"[{gauges.index(None)}]"
            others = "axles" if any(pieces["axles"]) else "loads"
            raise InputError(
                f"some {others} have a gauge and this one has none", place=f"{state.place(key)}{number}.gauge"
            )


@contextmanager
def _placed(state: _State) -> Iterator[None]:
    """Say where in the file it is wrong: a gap with the axle behind it, and all with the case that writes it."""
    try:
        yield
    except MovloadError as error:
        inner = error.place.removeprefix(f"case {state.title}").lstrip(": ")
        counted = re.fullmatch(r"(spacings|gauges|left_shares)\[(\d+)\]", inner)
        if counted:
            number = int(counted[2])
            words = {"spacings": f"axles[{number + 1}].after", "gauges": f"axles[{number}].gauge"}
            inner = words.get(counted[1], f"axles[{number}].left")
        elif inner == "spacings":
            inner = "axles"
        key = re.match(r"\w*", inner)
        root = key[0] if key else ""
        place = state.place(root) + inner[len(root) :] if root in StateTable.model_fields else inner
        raise type(error)(error.rule, place=place, nearest=error.nearest) from None
