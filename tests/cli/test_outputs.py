"""Files that commands write: nothing is overwritten without --force, all or none are written, links are followed."""

from __future__ import annotations

import os
from typing import TYPE_CHECKING

import pytest
from cli_run import BY_JOINTS, CART, assert_refused, movload, names_in, written

if TYPE_CHECKING:
    from pathlib import Path

COMMANDS = {
    "draw": ["draw", "BRIDGE"],
    "influence": ["influence", "BRIDGE", "U1-U2"],
    "sweep": ["sweep", "BRIDGE", "h5"],
    "rate": ["rate", "BRIDGE", "h5"],
    "vehicles": ["vehicles"],
    "vehicle": ["vehicles", "h5"],
}
START = ("--form", "pratt", "--panels", "4x3.2", "--depths", "0 2 2.2 2 0", "--deck", "pony")


def words_of(command: str, bridge: Path) -> list[object]:
    """Return a command's words with its bridge."""
    return [bridge if word == "BRIDGE" else word for word in COMMANDS[command]]


@pytest.mark.parametrize("command", COMMANDS)
def test_a_file_that_exists_is_kept_unless_forced(tmp_path: Path, command: str) -> None:
    words = words_of(command, written(tmp_path, BY_JOINTS))
    out = written(tmp_path, "mine", "out.csv")
    assert_refused(movload(*words, "--csv", out), "exists and is kept; add --force to write over it", place=out)
    assert out.read_text() == "mine"
    done = movload(*words, "--csv", out, "--force")
    assert (done.code, done.err) == (0, f"wrote {out}\n")
    forced = out.read_bytes()
    fresh = tmp_path / "fresh.csv"
    assert movload(*words, "--csv", fresh).code == 0
    assert fresh.read_bytes() == forced
    assert names_in(tmp_path) == {"bridge.toml", "out.csv", "fresh.csv"}


def test_start_keeps_a_bridge_file(tmp_path: Path) -> None:
    path = written(tmp_path, "mine")
    assert_refused(movload("start", path, *START), "exists and is kept", place=path)
    assert path.read_text() == "mine"
    assert movload("start", path, *START, "--force").code == 0
    assert path.read_text().startswith("# A bridge: begun")


@pytest.mark.parametrize("command", COMMANDS)
def test_a_place_where_no_file_can_stand(tmp_path: Path, command: str) -> None:
    bridge = written(tmp_path, BY_JOINTS)
    words = words_of(command, bridge)
    places = {
        tmp_path: "is a folder; a file is asked for",
        tmp_path / "no" / "out.csv": f'folder "{tmp_path / "no"}" does not exist',
        bridge / "out.csv": f'folder "{bridge}" does not exist',
        tmp_path / ("x" * 300): "cannot be written: File name too long",
    }
    for place, message in places.items():
        assert_refused(movload(*words, "--csv", place, "--force", "--json"), message, place=place)
    assert names_in(tmp_path) == {bridge.name}


@pytest.mark.parametrize("odd", ["pipe", "device", "loop"])
def test_no_device_or_pipe_is_replaced(tmp_path: Path, odd: str) -> None:
    bridge, out = written(tmp_path, BY_JOINTS), tmp_path / "out.csv"
    if odd == "pipe":
        os.mkfifo(out)
    else:
        out.symlink_to("/dev/null" if odd == "device" else out)
    rule = "Too many levels of symbolic links" if odd == "loop" else "is a device or a pipe"
    assert_refused(movload("draw", bridge, "--csv", out, "--force"), rule, place=out)
    assert names_in(tmp_path) == {"bridge.toml", "out.csv"}


def test_a_link_stays_and_what_it_leads_to_is_written(tmp_path: Path) -> None:
    bridge, out = written(tmp_path, BY_JOINTS), written(tmp_path, "mine", "out.csv")
    link, nowhere = tmp_path / "link.csv", tmp_path / "nowhere.csv"
    link.symlink_to(out)
    nowhere.symlink_to(tmp_path / "later.csv")
    for path in (link, nowhere):
        assert_refused(movload("draw", bridge, "--csv", path), "exists and is kept", place=path)
    assert movload("draw", bridge, "--csv", link, "--force").code == 0
    assert link.is_symlink()
    assert out.read_text().startswith("row,role,length [m]")
    assert movload("draw", bridge, "--csv", nowhere, "--force").code == 0
    assert (tmp_path / "later.csv").read_bytes() == out.read_bytes()


def test_an_input_is_not_written_over_even_if_forced(tmp_path: Path) -> None:
    bridge, cart = written(tmp_path, BY_JOINTS), written(tmp_path, CART, "cart.toml")
    link = tmp_path / "link.csv"
    link.symlink_to(bridge)
    for out in (bridge, link):
        for words in (["draw", bridge], ["influence", bridge], ["sweep", bridge, cart], ["rate", bridge, cart]):
            assert_refused(movload(*words, "--csv", out, "--force"), "is read here and is not written over", place=out)
    for words in (["sweep", bridge, cart], ["rate", bridge, cart], ["vehicles", cart]):
        assert_refused(movload(*words, "--csv", cart, "--force"), "is read here and is not written over", place=cart)
    assert bridge.read_text() == BY_JOINTS
    assert cart.read_text() == CART


def test_two_outputs_are_two_files(tmp_path: Path) -> None:
    bridge, out = written(tmp_path, BY_JOINTS), tmp_path / "out.png"
    words = ("draw", bridge, "--csv", out, "--plot")
    for second in (out, tmp_path / "." / "out.png", tmp_path / ".." / tmp_path.name / "out.png"):
        assert_refused(movload(*words, second), "is asked for twice", place=second)
    assert names_in(tmp_path) == {bridge.name}


def test_permissions_of_a_file_written_over_stay(tmp_path: Path) -> None:
    bridge, out = written(tmp_path, BY_JOINTS), written(tmp_path, "mine", "out.csv")
    out.chmod(0o600)
    assert movload("draw", bridge, "--csv", out, "--force").code == 0
    assert out.stat().st_mode & 0o777 == 0o600
    assert movload("draw", bridge, "--csv", tmp_path / "new.csv").code == 0
    mask = os.umask(0)
    os.umask(mask)
    assert (tmp_path / "new.csv").stat().st_mode & 0o777 == 0o666 & ~mask


def test_a_result_written_leaves_stdout_as_it_is(tmp_path: Path) -> None:
    bridge = written(tmp_path, BY_JOINTS)
    for words in (["rate", bridge, "h5"], ["rate", bridge, "h5", "--json"]):
        out = tmp_path / f"{len(words)}.csv"
        assert movload(*words, "--csv", out).out == movload(*words).out


def test_a_folder_that_may_not_be_written_to(tmp_path: Path, monkeypatch: pytest.MonkeyPatch) -> None:
    """The system's answer is stood in for: root, as which this may run, may write everywhere."""
    bridge, folder = written(tmp_path, BY_JOINTS), tmp_path / "closed"
    folder.mkdir()
    monkeypatch.setattr("movload.files.write.os.access", lambda path, _: path != folder)
    assert_refused(movload("draw", bridge, "--csv", folder / "out.csv"), "may not be written to")
