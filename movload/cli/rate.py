"""``movload rate``: may these vehicles cross, and what decides it."""

from __future__ import annotations

from dataclasses import replace
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

if TYPE_CHECKING:
    from collections.abc import Callable

    from rich.console import RenderableType

    from movload.bridge.bridge import Bridge
    from movload.rating.ratings import Rating, Ratings

_SHOWN = 8  # rows of a single crossing that are printed without --all

Impact = Annotated[
    str | None,
    typer.Option("--impact", metavar="FRACTION", help='Dynamic allowance instead of the file\'s: 0.3 or "30 %".'),
]
All = Annotated[bool, typer.Option("--all", help="Every rated row of every crossing.")]
Gate = Annotated[
    bool, typer.Option("--gate", help="Exit with 3: a rating below 1, a member unrated or a bearing lifted.")
]


def rate(
    bridge: BridgePath,
    vehicle: VehicleNames,
    *,
    impact: Impact = None,
    every: All = False,
    gate: Gate = False,
    json: Json = False,
    csv: CsvFile = None,
    plot: PlotFile = None,
    force: Force = False,
) -> None:
    """Rate a bridge for vehicles: rating factor, what governs, safe weight, and where the vehicle stands then."""
    check_outputs(csv, plot, force=force, inputs=[bridge, *vehicle])
    from movload.files.read import read_bridge
    from movload.rating.judge import judge
    from movload.rating.solved import solve
    from movload.report.ratings_report import ratings_csv, ratings_json

    stands = read_bridge(bridge)
    if impact is not None:
        stands = _with_impact(stands, impact)
    with naming(bridge):
        solved = solve(stands)
    ratings = judge(solved, read_loadings(vehicle))
    rows = [row for number in range(len(ratings.crossings)) for row in ratings.rows(number)]
    deliver(
        text=lambda: _text(stands, ratings, rows, every=every),
        json=(lambda: ratings_json(ratings, rows)) if json else None,
        files={
            csv: lambda: ratings_csv(rows, stands.units).encode(),
            plot: _drawing(stands, ratings, plot.suffix.lower() if plot else ""),
        },
        force=force,
    )
    if gate and not ratings.passes:
        raise typer.Exit(3)


def _with_impact(stands: Bridge, impact: str) -> Bridge:
    """Return the bridge with a typed dynamic allowance."""
    from movload.errors import InputError
    from movload.units import to_si

    try:
        missing = tuple(place for place in stands.missing if place != "rating.impact")
        return replace(stands, impact=to_si(impact, "fraction"), missing=missing)
    except InputError as error:
        raise InputError(error.rule, place="--impact", nearest=error.nearest) from None


def _text(stands: Bridge, ratings: Ratings, rows: list[Rating], *, every: bool) -> list[RenderableType | str]:
    """Return what a person reads: the answer, the rows that decide it, the sum, what it covers."""
    from movload.report.lines_report import station_names
    from movload.report.ratings_report import closing, detail, sum_table, summary
    from movload.review.hand import terms

    parts: list[RenderableType | str] = [stands.title, "", summary(ratings), ""]
    for number, crossing in enumerate(ratings.crossings):
        mine = [row for row in rows if row.crossing == crossing.title]
        if every or len(ratings.crossings) == 1:
            shown = mine if every else mine[:_SHOWN]
            rest = f", the worst {len(shown)} of {len(mine)} (--all for every row)" if len(shown) < len(mine) else ""
            parts += [
                f"{crossing.title}: forces in {stands.units.symbol('force')}{rest}",
                "",
                detail(shown, stands.units),
                "",
            ]
        if len(ratings.crossings) == 1:
            worst = ratings.governing(number)
            names = station_names(stands.deck.panel_points)
            parts += [*sum_table(worst, terms(worst.peaks, worst.row, worst.side), names, stands.units), ""]
    return [*parts, *closing(ratings)]


def _drawing(stands: Bridge, ratings: Ratings, suffix: str) -> Callable[[], bytes]:
    """Return what makes the drawing: the worst row of the worst crossing."""

    def make() -> bytes:
        from movload.report.figures import figure_bytes, peak_figure
        from movload.report.phrases import factor_text
        from movload.statics.influence import influence_lines

        worst = ratings.worst
        lines = influence_lines(stands.truss, stands.deck.panel_points)
        figure = peak_figure(
            stands.truss, lines, worst.peak, worst.effect.name, stands.units,
            title=f"{stands.title}: {worst.crossing}, RF {factor_text(worst.factor)} ({worst.sense})",
            caption="Member forces: live load as it stands, the truss's share and impact included, no permanent load.",
        )  # fmt: skip
        return figure_bytes(figure, suffix)

    return make
