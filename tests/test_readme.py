"""README says what the program does: its worked rating, picture, tables of commands and vehicles, and Python."""

from __future__ import annotations

import re
from pathlib import Path
from typing import TYPE_CHECKING

from typer.testing import CliRunner

from movload.cli.main import app
from movload.files.library import vehicle_names

if TYPE_CHECKING:
    import pytest

ROOT = Path(__file__).resolve().parent.parent
README = (ROOT / "README.md").read_text(encoding="utf-8")
SH_BLOCKS = re.findall(r"^```sh\n(.*?)^```$", README, re.MULTILINE | re.DOTALL)


def indented_after(command: str) -> str:
    """Return the indented lines that follow ``$ command`` in the README."""
    _, _, rest = README.partition(f"    $ {command}\n")
    lines = []
    for line in rest.split("\n"):
        if line and not line.startswith("    "):
            break
        lines.append(line[4:])
    return "\n".join(lines).strip()


def test_the_worked_rating_is_what_the_program_prints(monkeypatch: pytest.MonkeyPatch) -> None:
    monkeypatch.chdir(ROOT)
    monkeypatch.setenv("COLUMNS", "120")
    command = "movload rate examples/kettle_ford.toml tractor_slurry_tanker"
    printed = CliRunner().invoke(app, command.split()[1:])
    assert printed.exit_code == 0
    assert indented_after(command) == printed.stdout.strip()


def test_the_two_commands_name_files_that_exist() -> None:
    assert len(SH_BLOCKS) == 2
    assert "movload rate examples/kettle_ford.toml" in SH_BLOCKS[0]
    assert "--plot rating.png" in SH_BLOCKS[0]
    assert "-m pytest" in SH_BLOCKS[1]


def test_every_picture_and_file_it_names_is_there() -> None:
    for name in re.findall(r"!\[[^]]*\]\(([^)]+)\)", README) + re.findall(r"examples/[a-z_]+\.toml", README):
        assert (ROOT / name).is_file(), name


def test_every_vehicle_is_listed() -> None:
    listed = set(re.findall(r"`([a-z0-9_]+)`", README))
    assert set(vehicle_names()) <= listed


def test_every_command_is_listed() -> None:
    for command in app.registered_commands:
        assert f"`movload {command.callback.__name__}" in README  # type: ignore[union-attr]  # commands are functions


def test_the_python_lines_run(capsys: pytest.CaptureFixture[str], monkeypatch: pytest.MonkeyPatch) -> None:
    monkeypatch.chdir(ROOT)
    (lines,) = re.findall(r"^```python\n(.*?)^```$", README, re.MULTILINE | re.DOTALL)
    exec(compile(lines, "README.md", "exec"), {})  # noqa: S102  # our own README
    assert capsys.readouterr().out.split()[0].startswith("2.237")
