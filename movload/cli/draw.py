"""``movload draw``: the truss as it stands, with its names, its bearings and its dimensions."""

from __future__ import annotations

from typing import TYPE_CHECKING

from movload.cli.options import BridgePath, CsvFile, Force, Json, PlotFile, check_outputs, deliver, naming

if TYPE_CHECKING:
    from collections.abc import Callable

    from movload.bridge.bridge import Bridge


def draw(
    bridge: BridgePath, *, json: Json = False, csv: CsvFile = None, plot: PlotFile = None, force: Force = False
) -> None:
    """Show a bridge's truss: joints, members, bearings and panel points; with --plot its drawing."""
    check_outputs(csv, plot, force=force, inputs=[bridge])
    from movload.files.read import read_bridge
    from movload.report.truss_report import truss_csv, truss_json, truss_tables
    from movload.statics.stiffness import factored

    stands = read_bridge(bridge)
    with naming(bridge):
        factored(stands.truss)  # a mechanism is said here, before anyone trusts its drawing
    deliver(
        text=lambda: truss_tables(stands),
        json=(lambda: truss_json(stands)) if json else None,
        files={csv: lambda: truss_csv(stands).encode(), plot: _drawing(stands, plot.suffix.lower() if plot else "")},
        force=force,
    )


def _drawing(stands: Bridge, suffix: str) -> Callable[[], bytes]:
    """Return what makes the drawing."""

    def make() -> bytes:
        from movload.report.figures import elevation_figure, figure_bytes

        figure = elevation_figure(stands.truss, stands.deck.panel_points, stands.units, title=stands.title)
        return figure_bytes(figure, suffix)

    return make
