"""Data checked against a model; what pydantic complains of is said in movload's words, with its place."""

from __future__ import annotations

from typing import TYPE_CHECKING, Final, TypeVar

from pydantic import ValidationError

from movload.errors import InputError, MovloadError
from movload.files.schema.quantities import STILL_HELD, Table, Units, shown
from movload.files.toml import PLACEHOLDER, Data, written_key

if TYPE_CHECKING:
    from movload.units import UnitSystem

Model = TypeVar("Model", bound=Table)

# What pydantic says of a wrong kind of value, in the words of a file.
_WORDS: Final = {
    "string_type": "text in quotes is asked for",
    "string_too_short": "text that is not empty is asked for",
    "string_unicode": "text that can be written is asked for",
    "float_type": "a number is asked for",
    "bool_type": "true or false is asked for",
    "list_type": "a list is asked for",
    "tuple_type": "a list is asked for",
    "dict_type": "a table of keys is asked for",
}


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


def checked(model: type[Model], data: Data) -> tuple[Model, UnitSystem]:
    """Return data checked against a file's model, and the file's units.

    Raises
    ------
    InputError
        A key or value is wrong; its place is named.
    """
    units = units_of(data)
    return _validated(model, data, "", units=units), units


def _validated(model: type[Model], data: object, place: str, *, units: UnitSystem | None = None) -> Model:
    """Return a model, or raise the first thing that is wrong as an error of ours."""
    try:
        return model.model_validate(data, context={"units": units} if units else None)
    except ValidationError as error:
        raise _our_error(error, place) from None


def _our_error(error: ValidationError, outer: str) -> MovloadError:
    """Return the first of pydantic's complaints in our words, with its place."""
    first = error.errors(include_url=False)[0]
    where = ".".join(filter(None, (outer, _place(first["loc"]))))
    context = first.get("ctx", {})
    cause = context.get("error")
    if first["input"] == PLACEHOLDER:
        return InputError(STILL_HELD, place=where)
    if isinstance(cause, MovloadError):
        return cause.at(where) if where else cause
    if first["type"] == "missing":
        return InputError("is missing", place=where)
    rules = _WORDS | {
        "too_long": f"a list of {context.get('max_length')} is asked for",
        "literal_error": f"{context.get('expected')} is asked for".replace("'", '"'),
    }
    rule = rules.get(first["type"], f"{first['msg'][0].lower()}{first['msg'][1:]}")
    return InputError(f"{rule}, got {shown(first['input'])}", place=where)


def _place(location: tuple[int | str, ...]) -> str:
    """Return a place as one writes it: members."top chord".bars[2]."""
    text = ""
    for step in location:
        if isinstance(step, int):
            text += f"[{step}]"
        elif step not in {"SupportTable", "literal['pinned']", "tuple[float, float]", "float"} and "[" not in step:
            text += f".{written_key(step)}" if text else written_key(step)
    return text
