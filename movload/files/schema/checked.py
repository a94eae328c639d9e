"""Data checked against a model; what pydantic complains of is said in movload's words, with its place."""

from __future__ import annotations

from types import NoneType, UnionType
from typing import TYPE_CHECKING, Annotated, Final, TypeVar, Union, cast, get_args, get_origin

from pydantic import BaseModel, ValidationError

from movload.errors import InputError, MovloadError
from movload.files.schema.quantities import STILL_HELD, Table, Units, shown
from movload.files.toml import PLACEHOLDER, Data, written_key
from movload.units import SI_UNITS

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


def checked(model: type[Model], data: Data, *, own_units: bool = True) -> tuple[Model, UnitSystem]:
    """Return data checked against a file's model, and the file's units (SI for a file that has none of its own).

    Raises
    ------
    InputError
        A key or value is wrong; its place is named.
    """
    units = units_of(data) if own_units else SI_UNITS
    return _validated(model, data, "", units=units), units


def _validated(model: type[Model], data: object, place: str, *, units: UnitSystem | None = None) -> Model:
    """Return a model, or raise the first thing that is wrong as an error of ours."""
    try:
        return model.model_validate(data, context={"units": units} if units else None)
    except ValidationError as error:
        raise _our_error(error, model, place) from None


def _our_error(error: ValidationError, model: type[BaseModel], outer: str) -> MovloadError:
    """Return the first of pydantic's complaints in our words, with its place."""
    first = error.errors(include_url=False)[0]
    inner, kind = _place(first["loc"], model)
    where = ".".join(filter(None, (outer, inner)))
    context = first.get("ctx", {})
    cause = context.get("error")
    if first["input"] == PLACEHOLDER:
        return InputError(STILL_HELD, place=where)
    if isinstance(cause, MovloadError):
        return _put_at(cause, where, kind)
    if first["type"] == "missing":
        return InputError("is missing", place=where)
    rules = _WORDS | {
        "too_long": f"a list of {context.get('max_length')} is asked for",
        "literal_error": f"{context.get('expected')} is asked for".replace("'", '"'),
    }
    rule = rules.get(first["type"], f"{first['msg'][0].lower()}{first['msg'][1:]}")
    return InputError(f"{rule}, got {shown(first['input'])}", place=where)


def _put_at(cause: MovloadError, where: str, kind: object) -> MovloadError:
    """Return an error of ours at its place; what it names within a table of this kind may be one of its keys."""
    if where and isinstance(kind, type) and issubclass(kind, BaseModel) and cause.place in kind.model_fields:
        return type(cause)(cause.rule, place=f"{where}.{cause.place}", nearest=cause.nearest)
    return cause.at(where) if where else cause


def _place(location: tuple[int | str, ...], model: type[BaseModel]) -> tuple[str, object]:
    """Return a place as one writes it, members."top chord".bars[2], and the kind of value that stands there.

    Pydantic also puts words of its own in a location, and a joint may bear the same word: what a step is follows from
    where in the model it stands, never from how it reads.
    """
    text, kind = "", cast("object", model)
    for step in location:
        kind, is_in_file = _within(kind, step)
        if is_in_file and isinstance(step, int):
            text += f"[{step}]"
        elif is_in_file:
            text += f".{written_key(str(step))}" if text else written_key(str(step))
    alone = _alternatives(kind)
    return text, alone[0] if len(alone) == 1 else kind


def _within(kind: object, step: int | str) -> tuple[object, bool]:
    """Return what kind of value stands one step further in, and whether the file has that step."""
    kinds = _alternatives(kind)
    if len(kinds) > 1:  # the step says which of them was tried; at most one of ours has anything within it
        return next((one for one in kinds if _has_parts(one)), object), False
    (only,) = kinds
    if isinstance(only, type) and issubclass(only, BaseModel):
        field = only.model_fields.get(str(step))
        return (field.annotation, True) if field else (object, False)
    if get_origin(only) is dict:
        return get_args(only)[1], True
    return next(iter(get_args(only)), object), isinstance(step, int)


def _alternatives(kind: object) -> list[object]:
    """Return the kinds of value among which pydantic chooses; None, which no file can hold, is not one of them."""
    while get_origin(kind) is Annotated:
        kind = get_args(kind)[0]
    if get_origin(kind) not in {Union, UnionType}:
        return [kind]
    kinds = [one for one in get_args(kind) if one is not NoneType]
    return kinds if len(kinds) > 1 else _alternatives(kinds[0])


def _has_parts(kind: object) -> bool:
    """Say whether a value of this kind is a table or a list."""
    return get_origin(kind) in {dict, list, tuple} or (isinstance(kind, type) and issubclass(kind, BaseModel))
