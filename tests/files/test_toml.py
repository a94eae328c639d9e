"""TOML as plain data: placeholders that may wait, keys as they are written, and lines shown where it is no TOML."""

from __future__ import annotations

import re

import pytest

from movload.errors import InputError
from movload.files.toml import parsed, short, without_placeholders, written_key


def test_only_what_a_rating_needs_may_wait() -> None:
    text = """
    title = "?"
    [joints]
    L0 = "?"
    [members."top chord"]
    area = "?"
    density = "?"
    bars = "?"
    permits = { tension = "?", compression = 3 }
    [members.x]
    permits = "?"
    [members.density]
    area = 3
    [deck]
    truss_share = "?"
    left_abutment = "?"
    [permanent]
    deck = "?"
    [rating]
    impact = "?"
    """
    kept, missing = without_placeholders(parsed(text))
    assert missing == (
        'members."top chord".density',
        'members."top chord".permits.tension',
        "members.x.permits",
        "deck.truss_share",
        "permanent.deck",
        "rating.impact",
    )
    assert kept == {
        "title": "?",
        "joints": {"L0": "?"},
        "members": {
            "top chord": {"area": "?", "bars": "?", "permits": {"compression": 3}}, "x": {}, "density": {"area": 3},
        },
        "deck": {"left_abutment": "?"},
        "permanent": {},
        "rating": {},
    }  # fmt: skip


@pytest.mark.parametrize("table", ["permanent", "rating"])
def test_a_whole_table_may_wait(table: str) -> None:
    assert without_placeholders({table: "?"}) == ({}, (table,))


def test_a_misspelled_key_does_not_vanish_because_it_waits() -> None:
    assert without_placeholders({"deck": {"trus_share": "?"}}) == ({"deck": {"trus_share": "?"}}, ())


@pytest.mark.parametrize(
    ("text", "message"),
    [
        ("a = 1\nb = = 2\n", "is not TOML: Invalid value (at line 2, column 5): b = = 2"),
        ("a = [1,\n2,\n", "at line 2, the end of the file): 2,"),
        ("a = 1\na = 2", "Cannot overwrite a value (at line 2, the end of the file): a = 2"),
        ("a = {b = 1, b = 2}", "(at line 1, column 18): a = {b = 1, b = 2}"),
        (f"x = '{'y' * 90}\n", f": x = '{'y' * 52}..."),
        (f"a = 1{'0' * 5000}", "holds a value that cannot be read: "),
        (f"a = {'[' * 9000}", "nested too deeply"),
        ("a = 2001-13-41", "line 1"),
    ],
    ids=["value", "end", "twice", "inline", "long", "digits", "deep", "date"],
)
def test_the_line_is_named_and_shown(text: str, message: str) -> None:
    with pytest.raises(InputError, match=re.escape(message)):
        parsed(text)


def test_tables_in_tables_without_end() -> None:
    with pytest.raises(InputError, match=r"^a\.a\.a.*: tables are nested too deeply$"):
        without_placeholders(parsed("[" + "a." * 3000 + "a]"))


@pytest.mark.parametrize(
    ("key", "said"),
    [("L0", "L0"), ("sub-verticals", "sub-verticals"), ("top chord", '"top chord"'), ("Ü", '"Ü"'), ("", '""')],
)
def test_keys_are_said_as_they_are_written(key: str, said: str) -> None:
    assert written_key(key) == said


def test_long_values_are_cut() -> None:
    assert short("x" * 60) == "x" * 60
    assert short("x" * 61) == "x" * 57 + "..."
