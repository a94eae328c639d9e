"""Examples spoiled at random, always the same ones: only answers and one-line refusals ever come out, never a warning.

Each trial changes one or two things in an example's tables or its text and runs one command on it in this process,
where pytest turns every warning into an error. What an answer says is not checked here, only that it is one.
"""

from __future__ import annotations

import copy
import random
import re
import tomllib
from typing import TYPE_CHECKING, Any

import pytest
from cli_run import EXAMPLES, ROOT, Done, movload, numbers_in, written

if TYPE_CHECKING:
    from pathlib import Path

TRIALS = 12  # of each file and way; 700 of each were run when this was written
BRIDGES = sorted(EXAMPLES.glob("*.toml"))
VEHICLES = [ROOT / "vehicles" / f"{name}.toml" for name in ("grain_cart", "hs20", "type_3_3")]
VALUES: list[object] = [
    0, 1, -1, 3, 0.5, -2.5, 1e-12, 1e-300, 5e-324, 1e6, 1e17, 1e19, 1e308, 10**400, -(10**30), float("nan"),
    float("inf"), True, False, "", " ", "?", "pinned", "L0", "U1", "L0-U1", "U1-L1", "12'-6 1/2\"", "3 m", "5 kN",
    "1e300 kip", "2 ton", "9.5 t", "30 %", "1/0 in", "ünï", "a\nb", "\x1b[2J", "x" * 5000, [], [0], [1, 2],
    ["L0", "L1"], [[1, 2]], {}, {"a": 1}, {"slides": 0}, {"slides": 90.0}, {"load": 5, "after": 2},
    {"pinned": True, "slide_stiffness": 1e-9}, "full width", "left", "chord", "deck", "poor", "severe", "surfacing",
    "riveted members", "by riding surface", "by loaded length", "railway", "unknown", [-1.5, 1.5], [2, -2], ["-1 m", 1],
    {"moment": 1}, {"L1": 3}, {"L1": -3}, "2 kN/m", "3 kPa", "1 kN m", 80,
]  # fmt: skip
OPTIONS = (
    [], ["--method", "lrfr"], ["--method", "load_factor", "--at", "centre line"], ["--method", "allowable_stress"],
    ["--method", "en", "--at", "left kerb"], ["--at", "own lane"], ["--at", "0.1 m", "--speed", "5 mph"],
    ["--abreast", "1"], ["--impact", "railway"], ["--impact", "by loaded length"],
)  # fmt: skip
SIGNS = "[]{}=\"'#,.-0eE\n\t\\x\x00\x7fé"


def dice_of(*seed: object) -> random.Random:
    """Return dice that always fall the same way."""
    return random.Random(" ".join(map(str, seed)))  # noqa: S311  # nothing here is a secret


def as_toml(value: object) -> str:
    """Return plain data as an inline TOML value."""
    if isinstance(value, bool):
        return str(value).lower()
    if isinstance(value, str):
        unicode = {code: f"\\u{code:04x}" for code in (*range(32), 127)}
        return '"' + value.replace("\\", "\\\\").replace('"', '\\"').translate(unicode) + '"'
    if isinstance(value, list):
        return f"[{', '.join(map(as_toml, value))}]"
    if isinstance(value, dict):
        return f"{{ {', '.join(f'{as_toml(key)} = {as_toml(item)}' for key, item in value.items())} }}"
    return str(value)


def places(data: Any) -> list[tuple[Any, Any]]:
    """Return every (container, key) below some data."""
    items = data.items() if isinstance(data, dict) else enumerate(data) if isinstance(data, list) else ()
    found = [(data, key) for key, _ in items]
    return found + [place for container, key in found for place in places(container[key])]


def spoiled_tables(data: dict[str, Any], dice: random.Random) -> str:
    """Return the tables with one or two things dropped, replaced, scaled, renamed, doubled or exchanged."""
    data = copy.deepcopy(data)
    for _ in range(dice.choice((1, 1, 2))):
        found = places(data)
        if not found:
            break
        container, key = dice.choice(found)
        value, way = container[key], dice.choice(("drop", "put", "put", "scale", "rename", "double", "exchange"))
        if way == "drop":
            del container[key]
        elif way == "scale" and type(value) in {int, float}:
            container[key] = value * dice.choice((-1, 0, 1e-15, 1e-6, 1e-3, 1e3, 1e6, 1e15, 1e300))
        elif way == "rename" and isinstance(key, str):
            container[key[:-1] + dice.choice("xyz ")] = container.pop(key)
        elif way == "double" and isinstance(container, list):
            container.insert(dice.randrange(len(container) + 1), copy.deepcopy(value))
        elif way == "exchange":
            other, its_key = dice.choice(found)
            container[key] = copy.deepcopy(other.get(its_key) if isinstance(other, dict) else other[its_key])
        else:
            container[key] = dice.choice(VALUES)
    return "\n".join(f"{as_toml(key)} = {as_toml(value)}" for key, value in data.items())


def spoiled_text(text: str, dice: random.Random) -> str:
    """Return the text with signs put in or taken out, lines dropped or exchanged, or its end cut off."""
    lines = [line for line in text.splitlines() if line.strip() and not line.startswith("#")]
    at, way = dice.randrange(len(lines)), dice.choice(("put", "take", "drop", "exchange", "cut", "double"))
    line = lines[at]
    column = dice.randrange(len(line) + 1)
    if way == "put":
        lines[at] = line[:column] + dice.choice(SIGNS) + line[column:]
    elif way == "take":
        lines[at] = line[: max(column - 1, 0)] + line[column:]
    elif way == "exchange":
        other = dice.randrange(len(lines))
        lines[at], lines[other] = lines[other], lines[at]
    elif way == "cut":
        return "\n".join(lines)[: dice.randrange(len(text))]
    else:
        lines[at : at + 1] = [] if way == "drop" else [line, line]
    return "\n".join(lines)


def assert_decent(done: Done, path: Path, text: str) -> None:
    """Check that a command answered in JSON, or refused in one line that names the file."""
    if done.code == 0:
        assert done.err == ""
        assert all(abs(number) < 1e300 for number in numbers_in(done.json())), text
        return
    assert done.code == 1, text
    assert done.out == ""
    file = re.escape(str(path))
    named = rf"({file}|[^\n]+ on {file}|{file} on [^\n]+)"  # a vehicle that does not fit is named with the bridge
    assert re.fullmatch(rf"movload: {named}: [^\n]+\n", done.err), (done.err, text)
    assert "nan degrees" not in done.err, text


@pytest.mark.parametrize("way", [spoiled_tables, spoiled_text], ids=["tables", "text"])
@pytest.mark.parametrize("example", BRIDGES, ids=lambda path: path.stem)
def test_spoiled_bridges(tmp_path: Path, example: Path, way: Any) -> None:
    dice, text = dice_of(example.stem, way.__name__), example.read_text(encoding="utf-8")
    whole = text if way is spoiled_text else tomllib.loads(text)
    for _ in range(TRIALS):
        spoiled = way(whole, dice)
        path = written(tmp_path, spoiled)
        rate = ["rate", path, "ev3", "h5", *dice.choice(OPTIONS)]
        words = dice.choice((["draw", path], ["influence", path], ["sweep", path, "hs20"], rate, rate))
        assert_decent(movload(*words, "--json"), path, spoiled)
    assert {entry.name for entry in tmp_path.iterdir()} == {"bridge.toml"}


@pytest.mark.parametrize("way", [spoiled_tables, spoiled_text], ids=["tables", "text"])
@pytest.mark.parametrize("vehicle", VEHICLES, ids=lambda path: path.stem)
def test_spoiled_vehicles(tmp_path: Path, vehicle: Path, way: Any) -> None:
    dice, text = dice_of(vehicle.stem, way.__name__), vehicle.read_text(encoding="utf-8")
    whole = text if way is spoiled_text else tomllib.loads(text)
    for _ in range(TRIALS):
        spoiled = way(whole, dice)
        path = written(tmp_path, spoiled, "vehicle.toml")
        rate = ["rate", BRIDGES[0], path, *dice.choice(OPTIONS)]
        words = dice.choice((["vehicles", path], ["sweep", BRIDGES[0], path], rate, rate))
        assert_decent(movload(*words, "--json"), path, spoiled)


WORDS = [
    "", "?", "h5", "hs20", "U1-L2", "L3 down", "--json", "--all", "--gate", "--force", "--impact", "--row", "--csv",
    "--plot", "x.png", "x.csv", "/dev/null", "--", "-", "-x", "--no-such", "0.3", "30 %", "-1", "nan", "é", "a b",
    "--form", "pratt", "--at", "left kerb", "0.4 m", "--speed", "5 mph", "--method", "lrfr", "--explain", "--abreast",
    "--wander", "by loaded length",
]  # fmt: skip


def test_words_at_random(tmp_path: Path, monkeypatch: pytest.MonkeyPatch) -> None:
    """Commands with words in any order: exit 0, 1, 2 or 3, and a refusal is one line."""
    monkeypatch.chdir(tmp_path)
    dice, codes = dice_of("words"), []
    commands = ("start", "draw", "influence", "sweep", "rate", "vehicles", "schema")
    for _ in range(6 * TRIALS):
        words = [dice.choice(commands), *dice.choices([*WORDS, str(BRIDGES[0])], k=dice.randrange(6))]
        done = movload(*words)
        codes.append(done.code)
        assert done.code in {0, 1, 2, 3}, words
        assert "Traceback" not in done.err
        if done.code == 1 and done.err != "Aborted.\n":
            assert re.fullmatch(r"movload: [^\n]+\n", done.err), (words, done.err)
    assert {1, 2} <= set(codes)
