"""The program run inside this process, and two small invented bridges of the Alder valley to spoil."""

from __future__ import annotations

import contextlib
import io
import json
import os
import re
import sys
from dataclasses import dataclass
from pathlib import Path
from typing import TYPE_CHECKING, Any
from unittest import mock

import typer.main

from movload.cli import main

if TYPE_CHECKING:
    from collections.abc import Iterable

_APP, _BUILT = main.app, typer.main.get_command(main.app)  # building it takes longer than most commands

ROOT = Path(__file__).resolve().parents[1]
EXAMPLES = ROOT / "examples"
KETTLE_FORD = EXAMPLES / "kettle_ford.toml"

BY_JOINTS = """\
title = "Alder footpath"

[units]
length = "m"
force = "kN"
section = "mm"

[joints]
L0 = [0.0, 0.0]
L1 = [3.1, 0.0]
L2 = [6.4, 0.0]
L3 = [9.6, 0.0]
U1 = [3.1, 2.2]
U2 = [6.4, 2.3]

[supports]
L0 = "pinned"
L3 = { slides = 0 }

[members."top chord"]
bars = ["U1-U2"]
area = 2000
modulus = 200
density = 7850
permits = { tension = 200, compression = 150 }

[members."bottom chord"]
bars = ["L0-L1", "L1-L2", "L2-L3"]
area = 1500
modulus = 200
density = 7850
permits = { tension = 180, compression = 40 }

[members."end posts"]
bars = ["L0-U1", "U2-L3"]
area = 1800
modulus = 200
density = 7850
permits = { tension = 180, compression = 140 }

[members.web]
bars = ["U1-L1", "U2-L2", "U1-L2"]
area = 900
modulus = 200
density = 7850
permits = { tension = 90, compression = 60 }

[deck]
panel_points = ["L0", "L1", "L2", "L3"]
truss_share = 0.6

[permanent]
deck = 4.0
truss_share = 0.5

[rating]
impact = 0.3
"""

BY_LAYOUT = """\
title = "Alder mill road"

[units]
length = "m"
force = "kN"
section = "mm"

[layout]
form = "pratt"
deck = "pony"
panels = [3.1, 3.3, 3.2, 3.15]
depths = [0, 2.1, 2.3, 2.2, 0]

[supports]
L0 = "pinned"
L4 = { slides = 0 }

[members."top chord"]
area = 2000
modulus = 200
density = 7850
permits = { compression = 250 }

[members."bottom chord"]
area = 1500
modulus = 200
density = 7850
permits = { tension = 260 }

[members."end posts"]
area = 2000
modulus = 200
density = 7850
permits = { compression = 250 }

[members.verticals]
area = 900
modulus = 200
density = 7850
permits = { tension = 140, compression = 60 }

[members.diagonals]
area = 900
modulus = 200
density = 7850
permits = { tension = 140, compression = 60 }

[deck]
truss_share = 0.6

[permanent]
deck = 4.0
truss_share = 0.5

[rating]
impact = 0.3
"""

CART = """\
title = "Alder hay cart"
kind = "farm"
source = "invented"
units = { length = "m", force = "kN" }
axles = [
  { load = 20, gauge = 1.8 },
  { load = 45, after = 2.7, gauge = 1.9 },
  { load = 30, after = 4.1, gauge = 1.9 },
]
"""


@dataclass(frozen=True)
class Done:
    """What a command left: its exit code and what it said."""

    code: int
    out: str
    err: str

    def json(self) -> Any:
        """Return stdout, all of it, as one JSON document without nan or infinity."""
        return json.loads(self.out, parse_constant=lambda sign: (_ for _ in ()).throw(AssertionError(sign)))


def movload(*words: object, stdin: str = "") -> Done:
    """Run ``movload WORDS`` here, as wide as a pipe; whatever it raises but an exit is raised."""
    out, err = (io.TextIOWrapper(io.BytesIO(), "utf-8") for _ in range(2))
    code: object = 0
    with (
        mock.patch.dict(os.environ),
        mock.patch.object(sys, "argv", ["movload", *map(str, words)]),
        mock.patch.object(sys, "stdin", io.StringIO(stdin)),
        mock.patch.object(main, "app", _BUILT if main.app is _APP else main.app),
        contextlib.redirect_stdout(out),
        contextlib.redirect_stderr(err),
    ):
        os.environ.pop("COLUMNS", None)
        try:
            main.run()
        except SystemExit as end:
            code = end.code or 0
    said = []
    for stream in (out, err):
        stream.flush()
        said.append(stream.buffer.getvalue().decode("utf-8"))
    assert isinstance(code, int)
    return Done(code, *said)


def changed(text: str, *pairs: tuple[str, str]) -> str:
    """Return a text with each old part, which must be there, replaced once by its new one."""
    for old, new in pairs:
        assert old in text, old
        text = text.replace(old, new, 1)
    return text


def without(text: str, table: str) -> str:
    """Return a TOML text without one table."""
    return re.sub(rf"(?ms)^\[{re.escape(table)}\]$.*?(?=^\[|\Z)", "", text, count=1)


def written(folder: Path, text: str, name: str = "bridge.toml") -> Path:
    """Write a text to a file of a folder and return its path."""
    path = folder / name
    path.write_text(text, encoding="utf-8")
    return path


def assert_refused(done: Done, *parts: str, place: object = "") -> None:
    """Check that a command failed as promised: exit 1, one line ``movload: place: ...`` with every part, no more."""
    assert (done.code, done.out[:200]) == (1, ""), done.err
    assert done.err.count("\n") == 1, done.err
    assert done.err.endswith("\n")
    assert done.err.startswith(f"movload: {place}: " if place else "movload: "), done.err
    assert "Traceback" not in done.err
    for part in parts:
        assert part in done.err, (part, done.err)


def names_in(folder: Path) -> set[str]:
    """Return the names of all that stands in a folder, hidden files too."""
    return {path.name for path in folder.iterdir()}


def numbers_in(document: object) -> Iterable[float]:
    """Yield every number of a JSON document."""
    if isinstance(document, (int, float)) and not isinstance(document, bool):
        yield document
    elif isinstance(document, (list, dict)):
        for item in document.values() if isinstance(document, dict) else document:
            yield from numbers_in(item)
