"""``--plot``: a picture of the right kind is written, the same bytes each time, and never over another file."""

from __future__ import annotations

from typing import TYPE_CHECKING

import pytest
from cli_run import BY_JOINTS, CART, EXAMPLES, assert_refused, changed, movload, names_in, written

if TYPE_CHECKING:
    from pathlib import Path

FIRST_BYTES = {".png": b"\x89PNG\r\n\x1a\n", ".svg": b"<?xml", ".pdf": b"%PDF-"}
COMMANDS = {
    "draw": ["draw", "BRIDGE"],
    "influence": ["influence", "BRIDGE", "U1-L2", "L3 normal", "L1 down"],
    "sweep": ["sweep", "BRIDGE", "CART", "--row", "U1-U2"],
    "sweep, a reaction": ["sweep", "BRIDGE", "CART", "--row", "L0 y"],
    "rate": ["rate", "BRIDGE", "CART", "h5"],
}


@pytest.fixture
def files(tmp_path: Path) -> dict[str, Path]:
    """Return the bridge and the cart."""
    return {"BRIDGE": written(tmp_path, BY_JOINTS), "CART": written(tmp_path, CART, "cart.toml")}


def words_of(command: str, files: dict[str, Path]) -> list[object]:
    """Return a command's words with its files."""
    return [files.get(word, word) for word in COMMANDS[command]]


@pytest.mark.parametrize(
    ("command", "suffix"),
    [(command, ".png") for command in COMMANDS] + [("influence", ".svg"), ("rate", ".svg"), ("draw", ".pdf")],
)
def test_a_picture_of_the_right_kind(files: dict[str, Path], tmp_path: Path, command: str, suffix: str) -> None:
    words, out = words_of(command, files), tmp_path / f"out{suffix}"
    done = movload(*words, "--plot", out)
    assert (done.code, done.err) == (0, f"wrote {out}\n")
    assert out.read_bytes().startswith(FIRST_BYTES[suffix])
    assert out.stat().st_size > 2000
    assert done.out == movload(*words).out


def test_the_same_picture_has_the_same_bytes(files: dict[str, Path], tmp_path: Path) -> None:
    words = words_of("rate", files)
    for name in ("a.svg", "b.svg"):
        assert movload(*words, "--plot", tmp_path / name).code == 0
    assert (tmp_path / "a.svg").read_bytes() == (tmp_path / "b.svg").read_bytes()


def test_a_suffix_in_capitals(files: dict[str, Path], tmp_path: Path) -> None:
    out = tmp_path / "out.PDF"
    assert movload(*words_of("draw", files), "--plot", out, "--json").code == 0
    assert out.read_bytes().startswith(FIRST_BYTES[".pdf"])


def test_a_picture_that_exists_is_kept_unless_forced(files: dict[str, Path], tmp_path: Path) -> None:
    out = written(tmp_path, "mine", "out.svg")
    for command in COMMANDS:
        assert_refused(movload(*words_of(command, files), "--plot", out), "exists and is kept", place=out)
    assert out.read_text() == "mine"
    assert movload("draw", files["BRIDGE"], "--plot", out, "--force").code == 0
    assert out.read_bytes().startswith(FIRST_BYTES[".svg"])


def test_both_files_or_none(files: dict[str, Path], tmp_path: Path) -> None:
    before = names_in(tmp_path)
    words = (*words_of("rate", files), "--csv", tmp_path / "new.csv")
    assert_refused(movload(*words, "--plot", tmp_path / "no" / "x.png"), "does not exist")
    assert names_in(tmp_path) == before
    done = movload(*words, "--plot", tmp_path / "new.svg", "--json")
    assert done.err == f"wrote {tmp_path}/new.csv\nwrote {tmp_path}/new.svg\n"
    assert done.json()["format"] == "movload.ratings/1"
    assert names_in(tmp_path) == before | {"new.csv", "new.svg"}


TITLES = {
    "signs": "Älder <&> ²",
    "dollars": "5 $ a_b^c $ toll",
    "backslash": "\\\\frac{1}{2}",
    "braces": "{}{{}} %s %(x)s",
    "long": "Alder " * 60,
}


@pytest.mark.parametrize("title", TITLES.values(), ids=TITLES)
def test_any_title_can_be_drawn(tmp_path: Path, title: str) -> None:
    path = written(tmp_path, changed(BY_JOINTS, ("Alder footpath", title)))
    done = movload("draw", path, "--plot", tmp_path / "out.svg")
    assert (done.code, done.err) == (0, f"wrote {tmp_path}/out.svg\n")


def test_a_row_without_any_effect_can_be_drawn(files: dict[str, Path], tmp_path: Path) -> None:
    """L0 x feels nothing: the vehicle is off the bridge, and the picture says so instead of failing."""
    done = movload("sweep", files["BRIDGE"], files["CART"], "--row", "L0 x", "--plot", tmp_path / "out.svg")
    assert (done.code, done.err) == (0, f"wrote {tmp_path}/out.svg\n")


def test_a_bridge_that_permanent_load_alone_uses_up_can_be_drawn(files: dict[str, Path], tmp_path: Path) -> None:
    heavy = written(tmp_path, changed(BY_JOINTS, ("deck = 4.0", "deck = 400")), "heavy.toml")
    assert movload("rate", heavy, files["CART"], "--plot", tmp_path / "out.svg").code == 0


def test_an_example_with_abutments_and_a_bed_is_drawn_with_its_worst_row(tmp_path: Path) -> None:
    assert movload("rate", EXAMPLES / "stag_ledge.toml", "h5", "--plot", tmp_path / "out.svg").code == 0


def test_a_title_that_the_font_cannot_show(tmp_path: Path) -> None:
    path = written(tmp_path, changed(BY_JOINTS, ("Alder footpath", "Alder 橋")))
    assert movload("draw", path, "--plot", tmp_path / "out.png").code == 0
