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
)
from movload.cli.ways import crossings_asked, naming_option, quantity_option

if TYPE_CHECKING:
    from collections.abc import Callable
    from pathlib import Path

    from movload.bridge.bridge import Bridge
    from movload.rating.factor_sets import FactorSet
    from movload.rating.rating import Rating
    from movload.rating.ratings import Ratings
    from movload.rating.solved import SolvedBridge
    from movload.traffic.crossing import Crossing

Method = Annotated[
    str,
    typer.Option("--method", metavar="SET", help="Factor set: permitted, lrfr, load_factor, allowable_stress, en, or a "
                 "file of your own."),
]  # fmt: skip
Places = Annotated[
    list[str] | None,
    typer.Option("--at", metavar="PLACE", help='Where across (may be repeated): anywhere, "left kerb", "right kerb", '
                 '"own lane", "centre line", or an offset such as "0.4 m" from the centre line, + left.'),
]  # fmt: skip
Speeds = Annotated[
    list[str] | None, typer.Option("--speed", metavar="SPEED", help='"8 km/h" or "5 mph" (may be repeated).')
]
Abreast = Annotated[
    int, typer.Option("--abreast", metavar="N", help="Vehicles side by side; as many as fit if left out.")
]
Wander = Annotated[
    str | None, typer.Option("--wander", metavar="LENGTH", help='Stray to either side of the centre line: "0.3 m".')
]
Beside = Annotated[
    str | None,
    typer.Option("--beside", metavar="VEHICLE", help="Ordinary traffic that may stand beside it, held fixed in the "
                 "rating."),
]  # fmt: skip
Impact = Annotated[
    str | None,
    typer.Option("--impact", metavar="RULE", help='Dynamic allowance instead of the file\'s: 0.3, "30 %", or a rule: '
                 '"by loaded length", "by riding surface", "railway".'),
]  # fmt: skip
Explain = Annotated[
    list[str] | None,
    typer.Option("--explain", metavar="ROW", help='Take a row apart: U1-L2, "floorbeam L2 moment at S3".'),
]
All = Annotated[bool, typer.Option("--all", help="Every rated row of every crossing.")]
Gate = Annotated[
    bool, typer.Option("--gate", help="Exit with 3: a rating below 1, a part unrated or a bearing lifted.")
]


def rate(
    bridge: BridgePath,
    vehicle: VehicleNames,
    *,
    method: Method = "permitted",
    at: Places = None,
    speed: Speeds = None,
    abreast: Abreast = 0,
    wander: Wander = None,
    beside: Beside = None,
    impact: Impact = None,
    explain: Explain = None,
    every: All = False,
    gate: Gate = False,
    json: Json = False,
    csv: CsvFile = None,
    plot: PlotFile = None,
    force: Force = False,
) -> None:
    """Rate a bridge for vehicles: rating factor, what governs, safe weight, and where the vehicle stands then."""
    check_outputs(csv, plot, force=force, inputs=[bridge, *vehicle, *([beside] if beside else [])])
    from movload.files.read import read_bridge
    from movload.rating.solved import solve
    from movload.report.rating_text import rating_text
    from movload.report.ratings_report import ratings_csv, ratings_json
    from movload.review.hand import explained

    stands = read_bridge(bridge)
    if impact is not None:
        stands = _with_impact(stands, impact)
    factors = _factors(method)
    with naming(bridge):
        solved = solve(stands, factors)
    crossings = crossings_asked(
        vehicle, at, speed, abreast=abreast, wander=wander, beside=beside, roadway=stands.deck.roadway
    )
    ratings = _judged(solved, crossings, bridge)
    with naming(bridge):
        wanted = [explained(ratings, _asked(ratings, row)) for row in explain or []]

    def rows() -> list[Rating]:
        return [row for number in range(len(ratings.crossings)) for row in ratings.rows(number)]

    deliver(
        text=lambda: rating_text(ratings, _station_names(stands), every=every, explain=wanted),
        json=(lambda: ratings_json(ratings, rows(), wanted)) if json else None,
        files={
            csv: lambda: ratings_csv(rows(), stands.units).encode(),
            plot: _drawing(stands, ratings, plot.suffix.lower() if plot else ""),
        },
        force=force,
    )
    if gate and not ratings.passes:
        raise typer.Exit(3)


def _factors(method: str) -> FactorSet:
    """Return a factor set; what reads their files is loaded only when one is asked for."""
    from movload.rating.factor_sets import PERMITTED

    if method == "permitted":
        return PERMITTED
    from movload.files.factor_sets import read_factor_set

    return read_factor_set(method)


def _judged(solved: SolvedBridge, crossings: list[tuple[str, Crossing]], bridge: Path) -> Ratings:
    """Return the ratings; where one cannot cross, the error says who and where."""
    from movload.errors import MovloadError
    from movload.rating.judge import judge

    try:
        return judge(solved, [one for _, one in crossings])
    except MovloadError:
        for name, one in crossings:
            with naming(f"{name} on {bridge}"):
                judge(solved, [one])
        raise


def _asked(ratings: Ratings, row: str) -> Rating:
    """Return the worst rating of a row that was asked about, over crossings, levels, senses and parts that share it."""
    from movload.errors import MissingDataError
    from movload.rating.ratings import EITHER
    from movload.statics.part import row_of

    said = row.replace(", ", " ").removeprefix(f"{EITHER} ")  # as the answer writes it
    said = said.removesuffix(" tension").removesuffix(" compression")
    effects = ratings.solved.effects
    first = effects[row_of(effects, said)]
    parts = {first.part} if said.startswith(f"{first.part} ") else {effect.part for effect in effects}
    found = [
        one
        for number, effect in enumerate(effects)
        if effect.name == first.name and effect.part in parts
        for crossing in range(len(ratings.crossings))
        for one in ratings.of_row(crossing, number)
    ]
    if not found:
        named = {first.name if first.kind == "axial" else first.part}
        why = [one.text for one in ratings.notes if one.code == "not-covered" and named & set(one.subject.split(", "))]
        said = "; ".join(["has no strength, so it is not rated", *why])
        raise MissingDataError(said, place=f"--explain {row}")
    return min(found, key=lambda one: one.factor)


def _station_names(stands: Bridge) -> tuple[str, ...]:
    """Return what a person calls the panel points."""
    from movload.report.lines_report import station_names

    return station_names(stands.deck.panel_points)


def _with_impact(stands: Bridge, impact: str) -> Bridge:
    """Return the bridge with a typed dynamic allowance or another rule."""
    from movload.errors import UnknownNameError, nearest_name
    from movload.rating.impact import RULES

    missing = tuple(place for place in stands.missing if place != "rating.impact")
    if any(sign.isdigit() for sign in impact):
        typed = quantity_option(impact, "fraction", "--impact")
        with naming_option("--impact"):
            return replace(stands, impact=typed, impact_rule="", missing=missing)
    if impact not in RULES[1:]:
        raise UnknownNameError(
            f'"{impact}" is no fraction and none of {", ".join(RULES[1:])}',
            place="--impact", nearest=nearest_name(impact, RULES[1:]),
        )  # fmt: skip
    return replace(stands, impact=None, impact_rule=impact, missing=missing)


def _drawing(stands: Bridge, ratings: Ratings, suffix: str) -> Callable[[], bytes]:
    """Return what makes the drawing: the worst member of the worst crossing."""

    def make() -> bytes:
        from movload.report.figures import figure_bytes, peak_figure
        from movload.report.phrases import factor_text, way_text
        from movload.report.ratings_report import governed_text
        from movload.statics.influence import influence_lines

        worst, over_all = ratings.worst_member, ratings.worst
        lines = influence_lines(stands.truss, stands.deck.panel_points)
        place = "" if ratings.solved.roadway is None else f", {way_text(ratings.crossings[worst.number], stands.units)}"
        floor = (
            f" The worst member; {governed_text(over_all)} governs with RF {factor_text(over_all.factor)}."
            if over_all.effect.kind != "axial"
            else ""
        )
        figure = peak_figure(
            stands.truss, lines, worst.peak, worst.effect.name, stands.units,
            title=f"{stands.title}: {worst.crossing}{place}, RF {factor_text(worst.factor)} ({worst.sense})",
            caption=f"{worst.part[:1].upper()}{worst.part[1:]}, level {worst.level}.{floor} Member forces: live load "
            f"as it stands,{' traffic beside it,' if worst.held else ''} the truss's share and impact included, no "
            "permanent load.",
        )  # fmt: skip
        return figure_bytes(figure, suffix)

    return make
