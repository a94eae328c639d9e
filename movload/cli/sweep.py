"""``movload sweep``: the exact highest and lowest effect of vehicles on one truss."""

from __future__ import annotations

from typing import TYPE_CHECKING, Annotated

import typer

from movload.cli.options import (
    BridgePath,
    CsvFile,
    Force,
    Json,
    PlotFile,
    VehicleNames,
    check_outputs,
    deliver,
    naming,
    read_loadings,
)
from movload.errors import InputError

if TYPE_CHECKING:
    from collections.abc import Callable

    from movload.bridge.bridge import Bridge
    from movload.peaks.peaks import Peaks
    from movload.statics.influence import InfluenceLines

RowOption = Annotated[
    list[str] | None,
    typer.Option("--row", metavar="ROW", help="Only this row (may be repeated); the first is the one drawn."),
]


def sweep(
    bridge: BridgePath,
    vehicle: VehicleNames,
    *,
    row: RowOption = None,
    json: Json = False,
    csv: CsvFile = None,
    plot: PlotFile = None,
    force: Force = False,
) -> None:
    """Find the worst positions: whole axles on one truss, both headings, no share and no impact."""
    check_outputs(csv, plot, force=force, inputs=[bridge, *vehicle])
    if plot is not None and not row:
        raise InputError("say which row to draw: --row U1-L2", place="--plot")
    from movload.files.read import read_bridge
    from movload.report.lines_report import station_names
    from movload.report.sweep_report import sweep_csv, sweep_json, sweep_tables, swept_rows
    from movload.statics.influence import influence_lines
    from movload.statics.part import row_of

    stands = read_bridge(bridge)
    with naming(bridge):
        lines = influence_lines(stands.truss, stands.deck.panel_points)
        wanted = [row_of(lines.effects, name) for name in row] if row else list(range(len(lines.effects)))
    peaks = _swept(lines, vehicle)
    rows = swept_rows(peaks, station_names(stands.deck.panel_points), wanted)
    deliver(
        text=lambda: [stands.title, "", *sweep_tables(peaks, rows, stands.units)],
        json=(lambda: sweep_json(stands.title, rows)) if json else None,
        files={
            csv: lambda: sweep_csv(rows, stands.units).encode(),
            plot: _drawing(stands, lines, peaks[0], wanted[0], plot.suffix.lower() if plot else ""),
        },
        force=force,
    )


def _swept(lines: InfluenceLines, vehicles: list[str]) -> list[Peaks]:
    """Return the peaks under every vehicle; where one cannot be swept, the error says which."""
    from movload.errors import MovloadError
    from movload.peaks.sweep import sweep as swept

    loadings = read_loadings(vehicles)
    try:
        return swept(lines, loadings)
    except MovloadError:
        for name, loading in zip(vehicles, loadings, strict=True):
            with naming(name):
                swept(lines, [loading])
        raise


def _drawing(stands: Bridge, lines: InfluenceLines, peaks: Peaks, row: int, suffix: str) -> Callable[[], bytes]:
    """Return what makes the drawing: the first vehicle where the row's larger extreme stands."""

    def make() -> bytes:
        from movload.report.figures import figure_bytes, peak_figure

        both = peaks.row(row)
        peak = max((both.highest, both.lowest), key=lambda one: abs(one.value))
        title = f"{stands.title}: {peaks.title}"
        caption = "Member forces: whole axles as they stand on one truss, no share, no impact, no permanent load."
        figure = peak_figure(stands.truss, lines, peak, both.effect.name, stands.units, title=title, caption=caption)
        return figure_bytes(figure, suffix)

    return make
