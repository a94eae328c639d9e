"""Peaks of a sweep as table, CSV and JSON: highest and lowest of every row, and where the vehicle stands."""

from __future__ import annotations

from dataclasses import dataclass
from typing import TYPE_CHECKING, Final

from movload.report.columns import Column, csv_text, json_rows, json_text
from movload.report.phrases import effect_text, place_text, quantity_of, standing_text
from movload.report.table import table_of

if TYPE_CHECKING:
    from collections.abc import Sequence

    from rich.console import RenderableType

    from movload.peaks.peaks import Peak, Peaks, RowPeaks
    from movload.peaks.placement import Placement
    from movload.units import UnitSystem

FORMAT: Final = "movload.peaks/1"


@dataclass(frozen=True, slots=True)
class Swept:
    """One row of the report: whose peaks, and the names of the stations."""

    vehicle: str
    peaks: RowPeaks
    stations: tuple[str, ...]


def swept_rows(peaks: Sequence[Peaks], stations: tuple[str, ...], rows: Sequence[int]) -> list[Swept]:
    """Return the report's rows: every asked row of every vehicle."""
    return [Swept(one.title, one.row(row), stations) for one in peaks for row in rows]


def _extreme(name: str, title: str) -> list[Column[Swept]]:
    """Return the columns of one extreme."""

    def peak(row: Swept) -> Peak:
        found: Peak = getattr(row.peaks, name)
        return found

    return [
        Column(
            name, title, lambda row: peak(row).value, lambda row: quantity_of(row.peaks.effect), right=True,
            text=lambda row, units: effect_text(row.peaks.effect, peak(row).value, units),
        ),
        Column(
            f"{name}_position", "front axle", lambda row: peak(row).position, "length",
            text=lambda row, units: place_text(peak(row), units), right=True,
        ),
        Column(f"{name}_heading", "", lambda row: peak(row).heading),
        Column(
            f"{name}_axle", "with", lambda row: peak(row).axle + 1 if peak(row).heading else None,
            text=lambda row, _: standing_text(peak(row), row.stations),
        ),
        Column(
            f"{name}_station_name", "", lambda row: row.stations[peak(row).station] if peak(row).heading else None,
        ),
    ]  # fmt: skip


COLUMNS: Final[list[Column[Swept]]] = [
    Column("vehicle", "vehicle", lambda row: row.vehicle),
    Column("part", "part", lambda row: row.peaks.effect.part),
    Column("row", "row", lambda row: row.peaks.effect.name),
    Column("kind", "kind", lambda row: row.peaks.effect.kind),
    *_extreme("highest", "highest"),
    *_extreme("lowest", "lowest"),
]
_IN_TABLE: Final = {"row", "highest", "highest_position", "highest_axle", "lowest", "lowest_position", "lowest_axle"}


def sweep_tables(peaks: Sequence[Peaks], rows: Sequence[Swept], units: UnitSystem) -> list[RenderableType | str]:
    """Return one table a vehicle."""
    shown = [column for column in COLUMNS if column.name in _IN_TABLE]
    parts: list[RenderableType | str] = []
    for one in peaks:
        mine = [row for row in rows if row.vehicle == one.title]
        parts += [f"{one.title}: whole axles on one truss, no share, no impact", "", table_of(shown, mine, units), ""]
    force, deflection = units.symbol("force"), units.symbol("section")
    parts.append(f"Forces and reactions [{force}], T tension, C compression; deflections [{deflection}], + down.")
    return parts


def sweep_csv(rows: Sequence[Swept], units: UnitSystem) -> str:
    """Return the rows as CSV; a column ``unit`` says what highest and lowest are in."""
    unit: Column[Swept] = Column("unit", "unit", lambda row: units.symbol(quantity_of(row.peaks.effect)))
    return csv_text([*COLUMNS[:4], unit, *COLUMNS[4:]], rows, units)


def sweep_json(title: str, rows: Sequence[Swept]) -> str:
    """Return the document movload.peaks/1; a field ``unit`` says what highest and lowest are in."""
    unit: Column[Swept] = Column("unit", "", lambda row: row.peaks.effect.unit)
    placements: list[Column[Swept]] = [
        Column("highest_placement", "", lambda row: placement_json(row.peaks.highest.placement)),
        Column("lowest_placement", "", lambda row: placement_json(row.peaks.lowest.placement)),
    ]
    return json_text(
        {
            "format": FORMAT,
            "title": title,
            "units": {"force": "N", "length": "m", "deflection": "m"},
            "rows": json_rows([*COLUMNS[:4], unit, *COLUMNS[4:], *placements], rows),
        }
    )


def placement_json(placement: Placement) -> dict[str, object] | None:
    """Return a placement axle by axle; null when the vehicle is off the bridge."""
    if not placement.x.size:
        return None
    return {
        "x": placement.x, "load": placement.load, "share": placement.share, "impact": placement.impact,
        "factor": placement.factor, "z": placement.z, "vehicle": placement.vehicle + 1,
        "held": placement.fixed,
    }  # fmt: skip
