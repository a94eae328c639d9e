"""Results to disk: checked before anything is computed, written whole or not at all."""

from __future__ import annotations

import contextlib
import os
import tempfile
from pathlib import Path
from typing import TYPE_CHECKING

from movload.errors import OutputError

if TYPE_CHECKING:
    from collections.abc import Iterable, Mapping


def check_writable(paths: Iterable[Path], *, force: bool) -> None:
    """Refuse outputs that cannot or may not be written, before any work is done.

    Raises
    ------
    OutputError
        A file exists and ``force`` is off, two outputs are one file, a folder is missing or may not be written to.
    """
    seen: set[Path] = set()
    for path in paths:
        place, folder = str(path), path.parent
        if path.is_dir():
            raise OutputError("is a folder; a file is asked for", place=place)
        if path.exists() and not force:
            raise OutputError("exists and is kept; add --force to write over it", place=place)
        if not folder.is_dir():
            raise OutputError(f'folder "{folder}" does not exist', place=place)
        if not os.access(folder, os.W_OK | os.X_OK):
            raise OutputError(f'folder "{folder}" may not be written to', place=place)
        if path.resolve() in seen:
            raise OutputError("is asked for twice", place=place)
        seen.add(path.resolve())


def write_files(contents: Mapping[Path, bytes], *, force: bool) -> None:
    """Write every file atomically: beside its place first, then renamed.

    Raises
    ------
    OutputError
        As `check_writable`, or the disk refuses.
    """
    check_writable(contents, force=force)
    for path, content in contents.items():
        try:
            _write_one(path, content)
        except OSError as error:
            raise OutputError(f"cannot be written: {error.strerror or error}", place=str(path)) from None


def _write_one(path: Path, content: bytes) -> None:
    """Write one file beside its place and rename it into place."""
    handle, name = tempfile.mkstemp(dir=path.parent, prefix=f".{path.name[:40]}.")
    try:
        with os.fdopen(handle, "wb") as file:
            file.write(content)
        Path(name).chmod(0o666 & ~_umask())
        Path(name).replace(path)
    except BaseException:
        with contextlib.suppress(OSError):
            Path(name).unlink()
        raise


def _umask() -> int:
    """Return the process's file mask (it can only be read by setting it)."""
    mask = os.umask(0)
    os.umask(mask)
    return mask
