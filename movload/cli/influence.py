"""``movload influence``: influence lines of a bridge's members, reactions and panel points."""

from __future__ import annotations

from typing import TYPE_CHECKING, Annotated

import typer

from movload.cli.options import BridgePath, CsvFile, Force, Json, PlotFile, check_outputs, deliver, naming
from movload.errors import InputError

if TYPE_CHECKING:
    from collections.abc import Callable

    from movload.bridge.bridge import Bridge
    from movload.statics.influence import InfluenceLines

_MOST_DRAWN = 6

RowNames = Annotated[
    list[str] | None,
    typer.Argument(metavar="ROW", help='Rows, e.g. U1-L2 "L0 y" "L3 down"; all when none is named.'),
]


def influence(
    bridge: BridgePath,
    rows: RowNames = None,
    *,
    json: Json = False,
    csv: CsvFile = None,
    plot: PlotFile = None,
    force: Force = False,
) -> None:
    """Show influence lines: the effect of a unit load on each panel point."""
    check_outputs(csv, plot, force=force, inputs=[bridge])
    if plot is not None and not 1 <= len(rows or ()) <= _MOST_DRAWN:
        raise InputError(f"name 1 to {_MOST_DRAWN} rows to draw, got {len(rows or ())}", place="--plot")
    from movload.files.read import read_bridge
    from movload.report.lines_report import lines_csv, lines_json, lines_tables, station_names
    from movload.statics.floor import with_floorbeams
    from movload.statics.influence import influence_lines

    stands = read_bridge(bridge)
    with naming(bridge):
        lines = with_floorbeams(stands, influence_lines(stands.truss, stands.deck.panel_points))
        asked = [lines[name] for name in rows or [effect.name for effect in lines.effects]]
    names = station_names(stands.deck.panel_points)
    deliver(
        text=lambda: lines_tables(stands.title, asked, names, stands.units),
        json=(lambda: lines_json(stands.title, asked, names)) if json else None,
        files={
            csv: lambda: lines_csv(asked, stands.units).encode(),
            plot: _drawing(stands, lines, rows or [], plot.suffix.lower() if plot else ""),
        },
        force=force,
    )


def _drawing(stands: Bridge, lines: InfluenceLines, rows: list[str], suffix: str) -> Callable[[], bytes]:
    """Return what makes the drawing."""

    def make() -> bytes:
        from movload.report.figures import figure_bytes, influence_figure

        return figure_bytes(influence_figure(stands.truss, lines, rows, stands.units, title=stands.title), suffix)

    return make
