"""Options that several commands share, and how a result is delivered."""

from __future__ import annotations

import os
import shutil
import sys
from contextlib import contextmanager
from json import dumps
from pathlib import Path
from typing import TYPE_CHECKING, Annotated

import typer

from movload.errors import InputError, MovloadError, nearest_name

if TYPE_CHECKING:
    from collections.abc import Callable, Iterator, Sequence

    from rich.console import RenderableType

    from movload.traffic.loading import Loading

SUFFIXES = (".png", ".svg", ".pdf")
_PIPED_WIDTH = 132  # columns when the output is no terminal

BridgePath = Annotated[Path, typer.Argument(metavar="BRIDGE", help="A bridge file (.toml).", show_default=False)]
VehicleNames = Annotated[
    list[str],
    typer.Argument(metavar="VEHICLE", help="Library names or vehicle files (.toml).", show_default=False),
]
Json = Annotated[bool, typer.Option("--json", help="Print the result as JSON (SI, unrounded) and nothing else.")]
CsvFile = Annotated[Path | None, typer.Option("--csv", metavar="FILE", help="Write the table as CSV.")]
PlotFile = Annotated[Path | None, typer.Option("--plot", metavar="FILE", help="Draw it: .png, .svg or .pdf.")]
Force = Annotated[bool, typer.Option("--force", help="Write over files that exist.")]


def read_loadings(names: Sequence[str]) -> list[Loading]:
    """Return the vehicles that were named, each once.

    Raises
    ------
    InputError
        A vehicle is named twice.
    """
    from movload.files.library import read_vehicle

    loadings = [read_vehicle(name) for name in names]
    titles = [loading.title for loading in loadings]
    for number, title in enumerate(titles):
        if title in titles[:number]:
            raise InputError(f'"{title}" is asked for twice', place=names[number])
    return loadings


def one_line(text: str) -> str:
    """Return text on one line: what would break a line, or a terminal, as its escape."""
    return "".join(sign if sign.isprintable() else sign.encode("unicode_escape").decode() for sign in text)


@contextmanager
def naming(file: Path | str) -> Iterator[None]:
    """Put a file's name before what is wrong with the bridge or the vehicle in it."""
    try:
        yield
    except MovloadError as error:
        raise error.at(str(file)) from None


def check_outputs(csv: Path | None, plot: Path | None, *, force: bool, inputs: Sequence[Path | str] = ()) -> None:
    """Refuse outputs that cannot be written, or that would write over an input, before anything is computed."""
    from movload.files.write import check_writable

    if plot is not None and plot.suffix.lower() not in SUFFIXES:
        near = nearest_name(plot.suffix.lower(), SUFFIXES)
        raise InputError(
            f'a picture ends in {", ".join(SUFFIXES)}, got "{plot.suffix}"', place=f"--plot {plot}", nearest=near
        )
    check_writable([path for path in (csv, plot) if path is not None], force=force, inputs=inputs)


def deliver(
    *,
    text: Callable[[], Sequence[RenderableType | str]],
    json: Callable[[], str] | None,
    files: dict[Path | None, Callable[[], bytes]],
    force: bool,
) -> None:
    """Write the files that were asked for, then print the result as JSON or as text.

    Parameters
    ----------
    text
        Makes the tables and lines for a person.
    json
        Makes the document; None when text was asked for.
    files
        Makes each file's content; a None path was not asked for.
    """
    from movload.files.write import write_files

    answer = _in_ascii(json()) if json is not None else _rendered(text())
    contents = {path: make() for path, make in files.items() if path is not None}
    write_files(contents, force=force)
    sys.stdout.write(answer)
    for path in contents:
        typer.echo(f"wrote {one_line(str(path))}", err=True)


def _in_ascii(document: str) -> str:
    """Return JSON text; where the output cannot show one of its signs, those beyond ASCII as JSON escapes them."""
    try:
        document.encode(getattr(sys.stdout, "encoding", None) or "utf-8")
    except UnicodeEncodeError:
        return "".join(sign if sign.isascii() else dumps(sign)[1:-1] for sign in document)
    return document


def _rendered(parts: Sequence[RenderableType | str]) -> str:
    """Return a person's text, as wide as the terminal and in colour only where there is one.

    NO_COLOR asks for none when it holds anything; empty, it is as good as not set (no-color.org, from memory).
    """
    from movload.report.table import rendered

    terminal = sys.stdout.isatty()
    wide = "COLUMNS" in os.environ or terminal
    width = shutil.get_terminal_size().columns if wide else _PIPED_WIDTH
    return rendered(parts, width=max(width, 40), colour=terminal and not os.environ.get("NO_COLOR"))
