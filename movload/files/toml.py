"""A TOML file as plain data, and every way in which a file can fail to be one, in words."""

from __future__ import annotations

import re
import tomllib
from typing import TYPE_CHECKING, Final

from movload.errors import InputError, UnknownNameError, nearest_name

if TYPE_CHECKING:
    from collections.abc import Mapping
    from pathlib import Path

Data = dict[str, object]
PLACEHOLDER: Final = "?"
# What only a rating needs may wait for its value. A "?" elsewhere would change a truss or a line without a word.
_MAY_WAIT: Final = re.compile(
    r"(members\..+|floor\.\w+)\.(condition|system|(permits|nominal|reduced)(\.\w+)?)|members\..+\.density"
    r"|deck\.(truss_share|truss_spacing|kerbs|clearance|chord_bending)"
    r"|permanent|permanent\.(deck|truss_share|detail_allowance)|rating|rating\.(impact|surface|traffic)"
    r"|members\..+\.(unbraced_[xyz]|k_[xyz]|curves|joined|bent|losses)"
    r"|floor\.\w+\.(section|material|unbraced|c_b|stiffeners|lever|curves|losses)"
    r"|materials\..+\.(fy|fu|density|source|product|durations|treated|(stresses|factors)(\.\w+){0,2})"
    r"|sections\..+\.(r_(x|y|min)|net|[sz]_[xy]|shear_(lag|centre|offset)|sharing|torsion|warping|holes|punched)"
)
_DEEPEST: Final = 20  # tables within tables; a bridge file has four
_LONGEST: Final = 60  # signs of a line or a value that an error shows


def read_text(path: Path) -> str:
    """Return a file's text.

    Raises
    ------
    InputError
        Missing, a folder, a device or a pipe, unreadable, binary or empty.
    """
    try:
        _require_ordinary(path)
        text = path.read_bytes().decode("utf-8-sig")
    except InputError:
        raise
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


def _require_ordinary(path: Path) -> None:
    """Refuse what could keep a reader waiting for ever."""
    if path.exists() and not (path.is_file() or path.is_dir()):
        raise InputError("is a device or a pipe; an ordinary file is asked for", place=str(path))


def parsed(text: str) -> Data:
    """Return TOML text as plain data.

    Raises
    ------
    InputError
        Not TOML; the line is named and shown.
    """
    try:
        return tomllib.loads(text)
    except tomllib.TOMLDecodeError as error:
        raise InputError(f"is not TOML: {_with_line(str(error), text)}") from None
    except RecursionError:
        raise InputError("is not TOML that can be read: tables or lists are nested too deeply") from None
    except ValueError as error:
        raise InputError(f"holds a value that cannot be read: {error}") from None


def _with_line(complaint: str, text: str) -> str:
    """Return the parser's complaint with the line that it names, cut when long."""
    lines = text.rstrip().split("\n")
    complaint = complaint.replace("at end of document", f"at line {len(lines)}, the end of the file")
    named = re.search(r"at line (\d+)", complaint)
    number = int(named[1]) if named else 0
    return f"{complaint}: {short(lines[number - 1].strip())}" if 1 <= number <= len(lines) else complaint


def without_placeholders(
    data: Mapping[str, object], place: str = "", *, depth: int = 0
) -> tuple[Data, tuple[str, ...]]:
    """Return the data without keys that may wait and still hold "?", and the places of those keys.

    Raises
    ------
    InputError
        Tables within tables without end.
    """
    if depth > _DEEPEST:
        raise InputError("tables are nested too deeply", place=short(place))
    kept: Data = {}
    missing: list[str] = []
    for key, value in data.items():
        here = f"{place}.{written_key(key)}" if place else written_key(key)
        if value == PLACEHOLDER and _MAY_WAIT.fullmatch(here):
            missing.append(here)
        elif isinstance(value, dict):
            kept[key], deeper = without_placeholders(value, here, depth=depth + 1)
            missing += deeper
        else:
            kept[key] = value
    return kept, tuple(missing)


def short(value: object) -> str:
    """Return a value as text, cut when long."""
    text = str(value)
    return text if len(text) <= _LONGEST else text[: _LONGEST - 3] + "..."


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
