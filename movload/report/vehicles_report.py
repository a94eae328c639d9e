"""Vehicles as tables, CSV and JSON."""

from __future__ import annotations

import re
from dataclasses import dataclass
from typing import TYPE_CHECKING, Final, Literal

from movload.report.columns import Column, csv_text, json_text
from movload.report.phrases import weight_text
from movload.report.table import table_of
from movload.units import UnitSystem

if TYPE_CHECKING:
    from collections.abc import Mapping

    from rich.console import RenderableType

    from movload.traffic.loading import Loading
    from movload.traffic.vehicle import Spacing, Vehicle

FORMAT: Final = "movload.vehicles/1"
_METRIC: Final = UnitSystem("m", "kN", "mm")
_US: Final = UnitSystem("ft", "kip", "in")
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
           text=lambda row, _: f"{_METRIC.shown(row.loading.gross, 'force'):.1f}"),
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


def _both(value: float | tuple[float, float] | None, quantity: Literal["length", "force"]) -> str:
    """Return a length or force, or a range of them, in SI and US units."""
    if value is None:
        return "-"
    ends = value if isinstance(value, tuple) else (value,)
    metric, us = (
        f"{' to '.join(f'{units.shown(end, quantity):.2f}' for end in ends)} {units.symbol(quantity)}"
        for units in (_METRIC, _US)
    )
    return f"{metric} ({us})"


AXLE_COLUMNS: Final[list[Column[Axle]]] = [
    Column("axle", "axle", lambda axle: axle.number, right=True),
    Column("load", "load", lambda axle: axle.load, "force", text=lambda axle, _: _both(axle.load, "force"), right=True),
    Column("after", "behind the axle before", lambda axle: None if isinstance(axle.after, tuple) else axle.after,
           "length", right=True, text=lambda axle, _: _both(axle.after, "length")),
    Column("gauge", "gauge", lambda axle: axle.gauge, "length", right=True,
           text=lambda axle, _: _both(axle.gauge, "length")),
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
    axles = zip(vehicle.loads, [None, *vehicle.spacings], gauges, strict=True)
    return [Axle(number, float(load), gap, gauge) for number, (load, gap, gauge) in enumerate(axles, start=1)]


def list_tables(loadings: Mapping[str, Loading]) -> list[RenderableType | str]:
    """Return the library as a table."""
    rows = [Listed(name, loading) for name, loading in loadings.items()]
    return [
        table_of(LIST_COLUMNS, rows, _METRIC),
        "",
        "movload vehicles NAME shows one axle by axle, with its source. Weigh a vehicle before a rating rests on it.",
    ]


def one_tables(loading: Loading) -> list[RenderableType | str]:
    """Return one loading, case by case and axle by axle."""
    parts: list[RenderableType | str] = [
        f"{loading.title} ({loading.kind}), {loading.gross / 1e3:.1f} kN, {weight_text(loading.gross, _METRIC)}",
        f"Source: {loading.source or 'not said'}",
    ]
    for case in loading.cases:
        if case.moving is not None:
            parts += ["", table_of(AXLE_COLUMNS, axles_of(case.moving), _METRIC)]
            if case.moving.left_shares:
                each = ", ".join(f"{100 * share:g} %" for share in case.moving.left_shares)
                parts += ["", f"Left wheels carry, axle by axle: {each}"]
    return parts


def list_csv(loadings: Mapping[str, Loading]) -> str:
    """Return the library as CSV."""
    return csv_text(LIST_COLUMNS, [Listed(name, loading) for name, loading in loadings.items()], _METRIC)


def one_csv(loading: Loading) -> str:
    """Return one loading's axles as CSV, all cases after each other; ``after`` is empty where it is a range."""
    axles = [axle for case in loading.cases if case.moving for axle in axles_of(case.moving)]
    return csv_text([*AXLE_COLUMNS, *_RANGE], axles, _METRIC)


def list_json(loadings: Mapping[str, Loading]) -> str:
    """Return the document movload.vehicles/1."""
    return json_text(
        {
            "format": FORMAT,
            "units": {"force": "N", "length": "m"},
            "rows": [
                {
                    "name": name, "title": loading.title, "kind": loading.kind, "source": loading.source,
                    "weight": loading.gross,
                    "cases": [
                        {
                            "title": case.title, "loads": case.moving.loads, "spacings": case.moving.spacings,
                            "gauges": case.moving.gauges, "headings": case.moving.headings,
                        }
                        for case in loading.cases if case.moving
                    ],
                }
                for name, loading in loadings.items()
            ],
        }
    )  # fmt: skip
