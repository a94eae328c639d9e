"""Results to disk: checked before anything is computed, all of them written whole or none at all."""

from __future__ import annotations

import contextlib
import os
import stat
import tempfile
from pathlib import Path
from typing import TYPE_CHECKING

from movload.errors import OutputError

if TYPE_CHECKING:
    from collections.abc import Iterable, Mapping


def check_writable(paths: Iterable[Path], *, force: bool, inputs: Iterable[Path | str] = ()) -> None:
    """Refuse outputs that cannot or may not be written, before any work is done.

    Parameters
    ----------
    inputs
        Files that the same command reads: they are kept, ``force`` or not.

    Raises
    ------
    OutputError
        A file exists and ``force`` is off; two outputs are one file; a folder is missing or may not be written to; a
        folder, a device or a pipe stands in the file's place.
    """
    seen: set[Path] = set()
    read = {_end_of(Path(name)) for name in inputs}
    for path in paths:
        _check_place(path, force=force)
        if path.resolve() in seen:
            raise OutputError("is asked for twice", place=str(path))
        if path.resolve() in read:
            raise OutputError("is read here and is not written over", place=str(path))
        seen.add(path.resolve())


def _end_of(path: Path) -> Path:
    """Return where a path leads; itself when it leads nowhere, of which its reader will complain."""
    try:
        return path.resolve()
    except (OSError, RuntimeError, ValueError):
        return path


def _check_place(path: Path, *, force: bool) -> None:
    """Refuse a place where no file can or may be written."""
    place, mode = str(path), _mode(path)
    if stat.S_ISDIR(mode):
        raise OutputError("is a folder; a file is asked for", place=place)
    if (mode or path.is_symlink()) and not force:
        raise OutputError("exists and is kept; add --force to write over it", place=place)
    if mode and not stat.S_ISREG(mode):
        raise OutputError("is a device or a pipe; an ordinary file is asked for", place=place)
    folder = path.resolve().parent
    if not folder.is_dir():
        raise OutputError(f'folder "{path.parent}" does not exist', place=place)
    if not os.access(folder, os.W_OK | os.X_OK):
        raise OutputError(f'folder "{path.parent}" may not be written to', place=place)


def _mode(path: Path) -> int:
    """Return the mode of what stands at a path or at the end of its links; 0 for nothing."""
    try:
        return path.stat().st_mode
    except (FileNotFoundError, NotADirectoryError):
        return 0
    except OSError as error:
        raise OutputError(f"cannot be written: {error.strerror or error}", place=str(path)) from None


def write_files(contents: Mapping[Path, bytes], *, force: bool) -> None:
    """Write every file beside its place first, then rename them all; a link stays, what it leads to is written.

    Raises
    ------
    OutputError
        As `check_writable`, or the disk refuses; then nothing is left behind.
    """
    check_writable(contents, force=force)
    staged: dict[Path, Path] = {}
    try:
        for path, content in contents.items():
            staged[path] = _beside(path.resolve())
            staged[path].write_bytes(content)
            staged[path].chmod(stat.S_IMODE(_mode(path)) or 0o666 & ~_umask())
        for path, written in staged.items():
            written.replace(path.resolve())
    except OSError as error:
        raise OutputError(f"cannot be written: {error.strerror or error}", place=str(path)) from None
    finally:
        for written in staged.values():
            with contextlib.suppress(OSError):
                written.unlink()


def _beside(path: Path) -> Path:
    """Return a new empty file in the same folder: a rename within a folder is all or nothing."""
    handle, name = tempfile.mkstemp(dir=path.parent, prefix=f".{path.name[:40]}.")
    os.close(handle)
    return Path(name)


def _umask() -> int:
    """Return the process's file mask (it can only be read by setting it)."""
    mask = os.umask(0)
    os.umask(mask)
    return mask
