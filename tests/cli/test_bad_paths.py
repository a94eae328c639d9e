"""Paths that lead to no readable file: missing, folders, pipes, links to nowhere, binary, empty, oddly named."""

from __future__ import annotations

import errno
import os
from pathlib import Path
from typing import TYPE_CHECKING

import pytest
from cli_run import BY_JOINTS, CART, KETTLE_FORD, assert_refused, movload, names_in, written

if TYPE_CHECKING:
    from collections.abc import Callable

ODD: dict[str, tuple[Callable[[Path], object], str]] = {
    "missing": (Path.exists, "no such file"),
    "folder": (lambda path: path.mkdir(), "is a folder; a file is asked for"),
    "pipe": (os.mkfifo, "is a device or a pipe; an ordinary file is asked for"),
    "link to nowhere": (lambda path: path.symlink_to("nowhere"), "no such file"),
    "link to itself": (lambda path: path.symlink_to(path), "cannot be read: Too many levels of symbolic links"),
    "link to a device": (lambda path: path.symlink_to("/dev/null"), "is a device or a pipe"),
    "empty": (lambda path: path.touch(), "is empty"),
    "blank": (lambda path: path.write_text(" \n\t\n"), "is empty"),
    "a comment": (lambda path: path.write_text("# to do\n"), "units: the units are not said"),
    "binary": (lambda path: path.write_bytes(bytes(range(256))), "is not text (byte 128 is not UTF-8)"),
    "picture": (lambda path: path.write_bytes(b"\x89PNG\r\n\x1a\n"), "is not text (byte 0 is not UTF-8)"),
    "UTF-16": (lambda path: path.write_text(BY_JOINTS, encoding="utf-16"), "is not text (byte 0 is not UTF-8)"),
    "nul": (lambda path: path.write_bytes(b"title = 'a\0b'\n"), "is not TOML"),
    "old Mac": (lambda path: path.write_bytes(BY_JOINTS.replace("\n", "\r").encode()), "is not TOML"),
    "JSON": (lambda path: path.write_text('{"title": "x"}'), "is not TOML"),
}


@pytest.mark.parametrize("kind", ODD)
def test_an_odd_file_is_named_and_nothing_is_written(tmp_path: Path, kind: str) -> None:
    make, message = ODD[kind]
    path = tmp_path / "odd.toml"
    make(path)
    before = names_in(tmp_path)
    for words in (["draw", path], ["influence", path], ["sweep", path, "h5"], ["rate", path, "h5"], ["vehicles", path]):
        assert_refused(movload(*words, "--json", "--csv", tmp_path / "new.csv"), message, place=path)
    assert_refused(movload("rate", KETTLE_FORD, path), message, place=path)
    assert names_in(tmp_path) == before


@pytest.mark.parametrize("name", ["/dev/null", "/dev/zero", "/dev/stdin"])
def test_a_device_is_not_waited_for(name: str) -> None:
    if name == "/dev/stdin":
        assert movload("draw", name).code == 1
    else:
        assert_refused(movload("draw", name), "is a device or a pipe", place=name)


def test_a_missing_file_and_the_nearest(tmp_path: Path) -> None:
    path = written(tmp_path, BY_JOINTS, "kettle_ford.toml")
    asked = tmp_path / "kettle_frod.toml"
    assert_refused(movload("draw", asked), f'no such file (nearest: "{path}")', place=asked)
    asked = tmp_path / "no" / "kettle_ford.toml"
    assert_refused(movload("draw", asked), "no such file", place=asked)
    asked = path / "inside.toml"
    assert_refused(movload("draw", asked), "cannot be read: Not a directory", place=asked)


@pytest.mark.parametrize("name", ["x" * 300, "x/" * 3000])
def test_a_name_longer_than_a_disk_takes(tmp_path: Path, name: str) -> None:
    assert_refused(movload("draw", tmp_path / name), "cannot be read: File name too long")
    assert_refused(movload("vehicles", tmp_path / name), "cannot be read: File name too long")


def test_no_name_at_all() -> None:
    assert_refused(movload("draw", ""), "is a folder; a file is asked for")


@pytest.mark.parametrize(
    ("name", "said"),
    [("two\nlines.toml", "two\\nlines.toml"), ("\x1b[31mred.toml", "\\x1b[31mred.toml"), ("tab\t.toml", "tab\\t.toml")],
    ids=["line", "escape", "tab"],
)
def test_a_name_that_would_break_the_line(tmp_path: Path, name: str, said: str) -> None:
    assert_refused(movload("draw", tmp_path / name), f"{said}: no such file")
    path = written(tmp_path, BY_JOINTS, name)
    assert movload("draw", path).code == 0
    done = movload("draw", path, "--csv", tmp_path / f"{name}.csv")
    assert done.err == f"wrote {tmp_path}/{said}.csv\n"


def test_undecodable_names(tmp_path: Path) -> None:
    """As Linux hands over a name that is not UTF-8."""
    path = tmp_path / "caf\udce9.toml"
    assert_refused(movload("draw", path), "caf\\udce9.toml: no such file")
    path.write_text(BY_JOINTS, encoding="utf-8")
    done = movload("rate", path, "h5", "--json")
    assert done.code == 0
    assert done.json()["title"] == "Alder footpath"


@pytest.mark.parametrize("name", ["brücke.toml", "橋.toml", "a b.toml", "-x.toml", "no suffix", "wagon.TOML"])
def test_unusual_names_are_taken(tmp_path: Path, name: str) -> None:
    path = written(tmp_path, BY_JOINTS, name)
    assert movload("rate", path, written(tmp_path, CART, f"cart {name}.toml")).code == 0


def test_line_ends_and_a_byte_order_mark_are_taken(tmp_path: Path) -> None:
    path = tmp_path / "bridge.toml"
    path.write_bytes(b"\xef\xbb\xbf" + BY_JOINTS.replace("\n", "\r\n").encode())
    assert movload("draw", path).out == movload("draw", written(tmp_path, BY_JOINTS, "plain.toml")).out


def test_a_file_that_may_not_be_read(tmp_path: Path, monkeypatch: pytest.MonkeyPatch) -> None:
    """The system's answer is stood in for: root, as which this may run, may read everything."""
    path = written(tmp_path, BY_JOINTS)

    def refused(*_: object, **__: object) -> bytes:
        raise PermissionError(errno.EACCES, os.strerror(errno.EACCES))

    monkeypatch.setattr(Path, "read_bytes", refused)
    assert_refused(movload("draw", path), "cannot be read: Permission denied", place=path)
