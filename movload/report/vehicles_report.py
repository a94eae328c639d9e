"""Vehicles as tables, CSV and JSON."""

from __future__ import annotations

import re
from dataclasses import asdict, dataclass
from typing import TYPE_CHECKING, Final

from movload.report.columns import Column, csv_text, json_text
from movload.report.phrases import weight_text
from movload.report.table import table_of
from movload.report.vehicle_words import METRIC, both, case_words, piece_words

if TYPE_CHECKING:
    from collections.abc import Mapping

    from rich.console import RenderableType

    from movload.traffic.loading import Case, Loading
    from movload.traffic.vehicle import Spacing, Vehicle

FORMAT: Final = "movload.vehicles/1"
_SOURCES: Final = ("invented", "from memory", "read")  # what a source says of its numbers


@dataclass(frozen=True, slots=True)
class Listed:
    """One vehicle under its name."""

    name: str
    loading: Loading


@dataclass(frozen=True, slots=True)
class Axle:
    """One axle: its number from the front, load [N], distance behind the one before (or its range) and gauge [m]."""

    number: int
    load: float
    after: Spacing | None
    gauge: float | None

    def gap(self, end: int) -> float | None:
        """Return the least (0) or the greatest (-1) distance behind the axle before [m]."""
        return self.after[end] if isinstance(self.after, tuple) else self.after


LIST_COLUMNS: Final[list[Column[Listed]]] = [
    Column("name", "name", lambda row: row.name),
    Column("title", "title", lambda row: row.loading.title),
    Column("kind", "kind", lambda row: row.loading.kind),
    Column("axles", "axles", lambda row: axle_count(row.loading), right=True),
    Column("weight", "kN", lambda row: row.loading.gross, "force", right=True,
           text=lambda row, _: f"{METRIC.shown(row.loading.gross, 'force'):.1f}" if row.loading.gross else "-"),
    Column("source", "source", lambda row: row.loading.source, text=lambda row, _: _kind_of_source(row.loading.source)),
]  # fmt: skip


def _kind_of_source(source: str) -> str:
    """Return how far a vehicle's numbers can be trusted, in a few words; "spread over" is no word "read"."""
    invented, recalled, read = (re.search(rf"\b{words}\b", source, re.IGNORECASE) for words in _SOURCES)
    if invented:
        return "invented"
    if recalled:
        return "partly from memory" if read else "from memory"
    return "read" if read else "not said"


AXLE_COLUMNS: Final[list[Column[Axle]]] = [
    Column("axle", "axle", lambda axle: axle.number, right=True),
    Column("load", "load", lambda axle: axle.load, "force", text=lambda axle, _: both(axle.load, "force"), right=True),
    Column("after", "behind the axle before", lambda axle: None if isinstance(axle.after, tuple) else axle.after,
           "length", right=True, text=lambda axle, _: both(axle.after, "length")),
    Column("gauge", "gauge", lambda axle: axle.gauge, "length", right=True,
           text=lambda axle, _: both(axle.gauge, "length")),
]  # fmt: skip
_RANGE: Final[list[Column[Axle]]] = [
    Column("after_least", "", lambda axle: axle.gap(0), "length"),
    Column("after_greatest", "", lambda axle: axle.gap(-1), "length"),
]


def axle_count(loading: Loading) -> int:
    """Return the axles of a loading's longest case."""
    return max((int(case.moving.loads.size) for case in loading.cases if case.moving), default=0)


def axles_of(vehicle: Vehicle) -> list[Axle]:
    """Return a vehicle axle by axle."""
    gauges = vehicle.gauges or (None,) * vehicle.loads.size
    axles = zip(vehicle.loads, [None, *vehicle.spacings][: vehicle.loads.size], gauges, strict=True)
    return [Axle(number, float(load), gap, gauge) for number, (load, gap, gauge) in enumerate(axles, start=1)]


def list_tables(loadings: Mapping[str, Loading]) -> list[RenderableType | str]:
    """Return the library as a table."""
    rows = [Listed(name, loading) for name, loading in loadings.items()]
    return [
        table_of(LIST_COLUMNS, rows, METRIC),
        "",
        "movload vehicles NAME shows one axle by axle, with its source. Weigh a vehicle before a rating rests on it.",
    ]


def one_tables(loading: Loading) -> list[RenderableType | str]:
    """Return one loading, case by case and axle by axle, and how its pieces go together."""
    weight = f", {loading.gross / 1e3:.1f} kN, {weight_text(loading.gross, METRIC)}" if loading.gross else ""
    parts: list[RenderableType | str] = [
        f"{loading.title} ({loading.kind}){weight}",
        f"Source: {loading.source or 'not said'}",
        *(f"Note: {note}" for note in loading.notes),
    ]
    if len(loading.cases) > 1:
        parts += ["", f"The worst of {len(loading.cases)} cases counts."]
    for case in loading.cases:
        parts += _case_parts(case, titled=len(loading.cases) > 1)
    return parts


def _case_parts(case: Case, *, titled: bool) -> list[RenderableType | str]:
    """Return one case: what is said of all of it, its axles, and the loads that move with it or fill."""
    said = case_words(case)
    parts: list[RenderableType | str] = []
    if titled:
        parts += ["", f"Case {case.title}: {said}" if said else f"Case {case.title}"]
    elif said:
        parts += ["", f"{said[0].upper()}{said[1:]}."]
    if case.moving is not None and case.moving.loads.size:
        parts += ["", table_of(AXLE_COLUMNS, axles_of(case.moving), METRIC)]
        if case.moving.left_shares:
            each = ", ".join(f"{100 * share:g} %" for share in case.moving.left_shares)
            parts += ["", f"Left wheels carry, axle by axle: {each}"]
    pieces = list(piece_words(case))
    return [*parts, "", *pieces] if pieces else parts


def list_csv(loadings: Mapping[str, Loading]) -> str:
    """Return the library as CSV."""
    return csv_text(LIST_COLUMNS, [Listed(name, loading) for name, loading in loadings.items()], METRIC)


def one_csv(loading: Loading) -> str:
    """Return one loading's axles as CSV, all cases after each other; ``after`` is empty where it is a range.

    Loads that are no axles are in the text and the JSON.
    """
    axles = [axle for case in loading.cases if case.moving for axle in axles_of(case.moving)]
    return csv_text([*AXLE_COLUMNS, *_RANGE], axles, METRIC)


def list_json(loadings: Mapping[str, Loading]) -> str:
    """Return the document movload.vehicles/1."""
    return json_text(
        {
            "format": FORMAT,
            "units": {"force": "N", "length": "m"},
            "rows": [
                {
                    "name": name, "title": loading.title, "kind": loading.kind, "source": loading.source,
                    "weight": loading.gross, "cases": [_case_json(case) for case in loading.cases],
                }
                for name, loading in loadings.items()
            ],
        }
    )  # fmt: skip


def _case_json(case: Case) -> dict[str, object]:
    """Return one case; a piece that it has not is null or an empty list."""
    moving, convoy = case.moving, case.convoy
    return {
        "title": case.title,
        "loads": moving.loads if moving else [],
        "spacings": moving.spacings if moving else [],
        "gauges": moving.gauges if moving else [],
        "headings": moving.headings if moving else [],
        "strips": [asdict(strip) for strip in moving.strips] if moving else [],
        "tail": asdict(moving.tail) if moving and moving.tail else None,
        "fills": [asdict(fill) for fill in case.fills],
        "factor": case.factor,
        "relieving": case.relieving,
        "convoy": asdict(convoy) if convoy else None,
        "above": case.above,
        "continuous": case.continuous,
    }
