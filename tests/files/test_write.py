"""Writing: checked first, all files or none, nothing left behind, and existing files kept."""

from __future__ import annotations

import errno
import os
import re
from pathlib import Path
from unittest import mock

import pytest

from movload.errors import OutputError
from movload.files.write import check_writable, write_files


def names_in(folder: Path) -> set[str]:
    """Return the names of all that stands in a folder, hidden files too."""
    return {path.name for path in folder.iterdir()}


def test_files_are_written_as_given(tmp_path: Path) -> None:
    contents = {tmp_path / "a.csv": b"one\n", tmp_path / "b.png": bytes(range(256)), tmp_path / "empty": b""}
    write_files(contents, force=False)
    assert {path: path.read_bytes() for path in contents} == contents
    assert names_in(tmp_path) == {"a.csv", "b.png", "empty"}


def test_a_second_time_needs_force(tmp_path: Path) -> None:
    path = tmp_path / "a.csv"
    write_files({path: b"one"}, force=False)
    with pytest.raises(OutputError, match=re.escape(f"{path}: exists and is kept; add --force to write over it")):
        write_files({path: b"two"}, force=False)
    assert path.read_bytes() == b"one"
    write_files({path: b"two"}, force=True)
    assert path.read_bytes() == b"two"


def test_one_that_may_not_be_written_keeps_back_all(tmp_path: Path) -> None:
    (tmp_path / "b.csv").write_bytes(b"mine")
    with pytest.raises(OutputError, match=r"b\.csv: exists and is kept"):
        write_files({tmp_path / "a.csv": b"one", tmp_path / "b.csv": b"two"}, force=False)
    assert names_in(tmp_path) == {"b.csv"}


@pytest.mark.parametrize("fails", ["write_bytes", "replace", "chmod"])
def test_a_disk_that_refuses_leaves_nothing_behind(tmp_path: Path, fails: str) -> None:
    (tmp_path / "b.csv").write_bytes(b"mine")
    full = OSError(errno.ENOSPC, os.strerror(errno.ENOSPC))
    with (
        mock.patch.object(Path, fails, side_effect=full),
        pytest.raises(OutputError, match=r"a\.csv: cannot be written: No space left on device"),
    ):
        write_files({tmp_path / "a.csv": b"one", tmp_path / "b.csv": b"two"}, force=True)
    assert names_in(tmp_path) == {"b.csv"}
    assert (tmp_path / "b.csv").read_bytes() == b"mine"


def test_an_interrupt_leaves_nothing_behind(tmp_path: Path) -> None:
    with mock.patch.object(Path, "replace", side_effect=KeyboardInterrupt), pytest.raises(KeyboardInterrupt):
        write_files({tmp_path / "a.csv": b"one"}, force=False)
    assert names_in(tmp_path) == set()


def test_the_second_file_that_fails_takes_the_first_along(tmp_path: Path) -> None:
    write, count = Path.write_bytes, []

    def second_fails(path: Path, content: bytes) -> int:
        count.append(path)
        if len(count) == 2:
            raise OSError(errno.EIO, os.strerror(errno.EIO))
        return write(path, content)

    with (
        mock.patch.object(Path, "write_bytes", second_fails),
        pytest.raises(OutputError, match=r"b\.csv: cannot be written: Input/output error"),
    ):
        write_files({tmp_path / "a.csv": b"one", tmp_path / "b.csv": b"two"}, force=False)
    assert names_in(tmp_path) == set()


def test_places_are_refused_before_anything_is_computed(tmp_path: Path) -> None:
    file = tmp_path / "a.csv"
    file.touch()
    refused = {
        tmp_path: "is a folder; a file is asked for",
        tmp_path / "no" / "a.csv": 'folder ".*no" does not exist',
        file / "b.csv": r'folder ".*a\.csv" does not exist',
        tmp_path / ("x" * 300): "cannot be written: File name too long",
        Path("/dev/null"): "is a device or a pipe; an ordinary file is asked for",
    }
    for place, message in refused.items():
        with pytest.raises(OutputError, match=message):
            check_writable([place], force=True)


def test_one_file_twice_and_an_input(tmp_path: Path) -> None:
    path = tmp_path / "a.csv"
    with pytest.raises(OutputError, match=r"a\.csv: is asked for twice"):
        check_writable([path, tmp_path / "." / "a.csv"], force=False)
    with pytest.raises(OutputError, match=r"a\.csv: is read here and is not written over"):
        check_writable([path], force=True, inputs=["h5", tmp_path / "." / "a.csv"])
    check_writable([path], force=True, inputs=["h5", "nul\0", "x" * 5000, tmp_path / "b.csv"])


def test_a_name_at_its_longest_is_written(tmp_path: Path) -> None:
    path = tmp_path / ("x" * 251 + ".csv")
    write_files({path: b"one"}, force=False)
    assert path.read_bytes() == b"one"
