"""Where in a file an error is, and names that are none of those known."""

from __future__ import annotations

from contextlib import contextmanager
from typing import TYPE_CHECKING

from movload.errors import MovloadError, UnknownNameError, nearest_name
from movload.files.toml import short

if TYPE_CHECKING:
    from collections.abc import Collection, Iterator

    from movload.files.schema.quantities import Table


def waits(missing: tuple[str, ...], place: str) -> bool:
    """Whether anything at a place, or within it, is among those that still hold a "?"."""
    return any(one == place or one.startswith(f"{place}.") for one in missing)


@contextmanager
def in_file(place: str, table: Table, *leads: str) -> Iterator[None]:
    """Say where in the file an error is; ``leads`` are what the domain calls the thing that stands there."""
    try:
        yield
    except MovloadError as error:
        inner = error.place
        for lead in leads:
            if inner == lead or inner.startswith((f"{lead}.", f"{lead}:")):
                inner = inner.removeprefix(lead).lstrip(".: ")
        own = inner.partition(".")[0].partition("[")[0] in type(table).model_fields
        here = f"{place}{'.' if own else ': '}{inner}" if inner else place
        raise type(error)(error.rule, place=here, nearest=error.nearest) from None


def require_one_of(name: str, known: Collection[str], place: str) -> None:
    """Refuse a name that is none of those known."""
    if name not in known:
        said = f'"{short(name)}" is not one of {", ".join(known)}'
        raise UnknownNameError(said, place=place, nearest=nearest_name(name, known))
