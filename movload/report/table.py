"""Columns as a table for a terminal: plain rules, numbers on the right, nothing that needs colour to be read."""

from __future__ import annotations

import io
from typing import TYPE_CHECKING, TypeVar

if TYPE_CHECKING:
    from collections.abc import Sequence

    from rich.console import RenderableType

    from movload.report.columns import Column
    from movload.units import UnitSystem

Row = TypeVar("Row")


def table_of(columns: Sequence[Column[Row]], rows: Sequence[Row], units: UnitSystem) -> RenderableType:
    """Return rows as a table in the file's units."""
    return grid(
        [column.title for column in columns],
        [[column.shown(row, units) for column in columns] for row in rows],
        right=[column.right for column in columns],
    )


def grid(heads: Sequence[str], lines: Sequence[Sequence[str]], *, right: Sequence[bool]) -> RenderableType:
    """Return heads and lines of text as a table."""
    from rich import box
    from rich.table import Table
    from rich.text import Text

    table = Table(box=box.SIMPLE_HEAD, show_edge=False, pad_edge=False, header_style="bold")
    for head, to_right in zip(heads, right, strict=True):
        table.add_column(Text(head), justify="right" if to_right else "left", overflow="fold")
    for line in lines:
        table.add_row(*(Text(cell) for cell in line))
    return table


def rendered(parts: Sequence[RenderableType | str], *, width: int, colour: bool) -> str:
    """Return tables and lines of text as one text for a terminal of a given width."""
    from rich.console import Console
    from rich.text import Text

    sheet = io.StringIO()
    console = Console(
        file=sheet, width=width, force_terminal=colour, no_color=not colour,
        color_system="standard" if colour else None, highlight=False, legacy_windows=False,
    )  # fmt: skip
    for part in parts:
        console.print(Text(part) if isinstance(part, str) else part)
    return "\n".join(line.rstrip() for line in sheet.getvalue().split("\n"))
