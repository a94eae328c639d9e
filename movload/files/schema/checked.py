"""Data checked against a model; what pydantic complains of is said in movload's words, with its place."""

from __future__ import annotations

from typing import TYPE_CHECKING, TypeVar

from pydantic import ValidationError

from movload.errors import InputError, MovloadError
from movload.files.schema.quantities import Table, Units
from movload.files.toml import Data, written_key

if TYPE_CHECKING:
    from movload.units import UnitSystem

Model = TypeVar("Model", bound=Table)


def units_of(data: Data) -> UnitSystem:
    """Return a file's own units, which must be known before any other value is read.

    Raises
    ------
    InputError
        They are missing or not known.
    """
    if "units" not in data:
        raise InputError('the units are not said; write units = { length = "m", force = "kN" }', place="units")
    return _validated(Units, data["units"], "units").system()


def checked(model: type[Model], data: Data, *, missing: tuple[str, ...] = ()) -> tuple[Model, UnitSystem]:
    """Return data checked against a file's model, and the file's units.

    Parameters
    ----------
    missing
        Places that still hold "?", already taken out of the data.

    Raises
    ------
    InputError
        A key or value is wrong; its place is named.
    """
    units = units_of(data)
    return _validated(model, data, "", units=units, missing=missing), units


def _validated(
    model: type[Model], data: object, place: str, *, units: UnitSystem | None = None, missing: tuple[str, ...] = ()
) -> Model:
    """Return a model, or raise the first thing that is wrong as an error of ours."""
    try:
        return model.model_validate(data, context={"units": units} if units else None)
    except ValidationError as error:
        raise _our_error(error, place, missing) from None


def _our_error(error: ValidationError, outer: str, missing: tuple[str, ...]) -> MovloadError:
    """Return the first of pydantic's complaints in our words, with its place."""
    first = error.errors(include_url=False)[0]
    where = ".".join(filter(None, (outer, _place(first["loc"]))))
    cause = first.get("ctx", {}).get("error")
    if isinstance(cause, MovloadError):
        return cause.at(where) if where else cause
    if first["type"] == "missing":
        return InputError('still holds "?" and is needed here' if where in missing else "is missing", place=where)
    return InputError(f"{first['msg'][0].lower()}{first['msg'][1:]}, got {_shown(first['input'])}", place=where)


def _place(location: tuple[int | str, ...]) -> str:
    """Return a place as one writes it: members."top chord".bars[2]."""
    text = ""
    for step in location:
        if isinstance(step, int):
            text += f"[{step}]"
        elif step not in {"SupportTable", "literal['pinned']", "tuple[float, float]", "float"} and "[" not in step:
            text += f".{written_key(step)}" if text else written_key(step)
    return text


def _shown(value: object) -> str:
    """Return a value as text, cut when long."""
    text = f'"{value}"' if isinstance(value, str) else str(value)
    return text if len(text) <= 60 else text[:57] + "..."
