"""One list of columns per result: it feeds the table, the CSV and the JSON alike."""

from __future__ import annotations

import csv
import io
import json
import math
from dataclasses import dataclass, field
from typing import TYPE_CHECKING, Any, Generic, TypeVar

if TYPE_CHECKING:
    from collections.abc import Callable, Sequence

    from movload.units import Quantity, UnitSystem

Row = TypeVar("Row")


@dataclass(frozen=True, slots=True)
class Column(Generic[Row]):
    """One column.

    Attributes
    ----------
    name
        Its field in JSON and CSV; never changed once published.
    title
        Its head in a table.
    get
        SI value of a row, or text, or None.
    quantity
        What it measures, or how to tell from the row; None for text and bare numbers.
    text
        How a table says it, given the row and the units; the plain value when left out.
    """

    name: str
    title: str
    get: Callable[[Row], Any]
    quantity: Quantity | Callable[[Row], Quantity | None] | None = None
    text: Callable[[Row, UnitSystem], str] | None = field(default=None, kw_only=True)
    right: bool = field(default=False, kw_only=True)

    def quantity_in(self, row: Row) -> Quantity | None:
        """Return what this row's value measures."""
        return self.quantity(row) if callable(self.quantity) else self.quantity

    def shown(self, row: Row, units: UnitSystem) -> str:
        """Return a row's value as a table says it; "" for nothing."""
        if self.text:
            return self.text(row, units)
        value = self.get(row)
        return "" if value is None else str(value)

    def number(self, row: Row, units: UnitSystem) -> object:
        """Return a row's value in the file's units, unrounded; "" for nothing."""
        value, quantity = self.get(row), self.quantity_in(row)
        if value is None or (isinstance(value, float) and math.isnan(value)):
            return ""
        return units.shown(value, quantity) if quantity else value


def csv_text(columns: Sequence[Column[Row]], rows: Sequence[Row], units: UnitSystem) -> str:
    """Return rows as CSV in the file's units; a head names the unit where the whole column has one."""
    sheet = io.StringIO()
    writer = csv.writer(sheet, lineterminator="\n")
    writer.writerow([_head(column, units) for column in columns])
    writer.writerows([column.number(row, units) for column in columns] for row in rows)
    return sheet.getvalue()


def _head(column: Column[Row], units: UnitSystem) -> str:
    """Return a column's head with its unit."""
    if column.quantity is None or callable(column.quantity) or not units.symbol(column.quantity):
        return column.name
    return f"{column.name} [{units.symbol(column.quantity)}]"


def json_rows(columns: Sequence[Column[Row]], rows: Sequence[Row]) -> list[dict[str, object]]:
    """Return rows as JSON objects: SI, unrounded, null for what is not there or not finite."""
    return [{column.name: jsonable(column.get(row)) for column in columns} for row in rows]


def jsonable(value: object) -> object:
    """Return a value as JSON can hold it."""
    if isinstance(value, float):
        return value if math.isfinite(value) else None
    if isinstance(value, (list, tuple)):
        return [jsonable(item) for item in value]
    if isinstance(value, dict):
        return {key: jsonable(item) for key, item in value.items()}
    if hasattr(value, "tolist"):
        return jsonable(value.tolist())
    return value


def json_text(document: dict[str, object]) -> str:
    """Return a document as JSON text; keys keep their order, so the same result gives the same bytes."""
    return json.dumps(jsonable(document), ensure_ascii=False, indent=1, allow_nan=False) + "\n"
