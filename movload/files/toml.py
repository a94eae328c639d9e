"""A TOML file as plain data, and every way in which a file can fail to be one, in words."""

from __future__ import annotations

import re
import tomllib
from typing import TYPE_CHECKING

from movload.errors import InputError, UnknownNameError, nearest_name

if TYPE_CHECKING:
    from collections.abc import Mapping
    from pathlib import Path

Data = dict[str, object]
_PLACEHOLDER = "?"


def read_text(path: Path) -> str:
    """Return a file's text.

    Raises
    ------
    InputError
        Missing, a folder, unreadable, binary or empty.
    """
    try:
        text = path.read_bytes().decode("utf-8-sig")
    except FileNotFoundError:
        raise UnknownNameError("no such file", place=str(path), nearest=_nearest_file(path)) from None
    except IsADirectoryError:
        raise InputError("is a folder; a file is asked for", place=str(path)) from None
    except UnicodeDecodeError as error:
        raise InputError(f"is not text (byte {error.start} is not UTF-8)", place=str(path)) from None
    except (OSError, ValueError) as error:
        reason = error.strerror if isinstance(error, OSError) and error.strerror else error
        raise InputError(f"cannot be read: {reason}", place=str(path)) from None
    if not text.strip():
        raise InputError("is empty", place=str(path))
    return text


def parsed(text: str, place: str) -> Data:
    """Return TOML text as plain data.

    Raises
    ------
    InputError
        Not TOML; the line is named.
    """
    try:
        return tomllib.loads(text)
    except tomllib.TOMLDecodeError as error:
        raise InputError(f"is not TOML: {error}", place=place) from None
    except RecursionError:
        raise InputError("is not TOML that can be read: tables or lists are nested too deeply", place=place) from None
    except ValueError as error:
        raise InputError(f"holds a value that cannot be read: {error}", place=place) from None


def without_placeholders(data: Mapping[str, object], place: str = "") -> tuple[Data, tuple[str, ...]]:
    """Return the data without keys that still hold "?", and the places of those keys."""
    kept: Data = {}
    missing: list[str] = []
    for key, value in data.items():
        here = f"{place}.{written_key(key)}" if place else written_key(key)
        if value == _PLACEHOLDER:
            missing.append(here)
        elif isinstance(value, dict):
            kept[key], deeper = without_placeholders(value, here)
            missing += deeper
        else:
            kept[key] = value
    return kept, tuple(missing)


def written_key(key: str) -> str:
    """Return a key as TOML would write it."""
    return key if re.fullmatch(r"[A-Za-z0-9_-]+", key) else f'"{key}"'


def _nearest_file(path: Path) -> str:
    """Return the name of the file most like a missing one, in its folder."""
    try:
        names = [entry.name for entry in path.parent.iterdir() if entry.is_file()]
    except OSError:
        return ""
    found = nearest_name(path.name, names)
    return str(path.with_name(found)) if found else ""
