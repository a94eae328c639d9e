"""Ratings as tables, CSV and JSON: a line a crossing, then row by row."""

from __future__ import annotations

import math
from dataclasses import asdict
from typing import TYPE_CHECKING, Final

from movload.rating.serviceability import deflections
from movload.report.columns import Column, csv_text, json_rows, json_text
from movload.report.phrases import (
    CAUTIONS,
    effect_text,
    factor_text,
    number_text,
    place_text,
    quantity_of,
    use_text,
    verdict_text,
    way_text,
    weight_text,
)
from movload.report.sweep_report import placement_json
from movload.report.table import grid, table_of
from movload.traffic.crossing import ANYWHERE
from movload.traffic.formations import fitting

if TYPE_CHECKING:
    from collections.abc import Sequence

    from rich.console import RenderableType

    from movload.rating.rating import Rating
    from movload.rating.ratings import Ratings
    from movload.review.hand import Explanation
    from movload.units import UnitSystem

FORMAT: Final = "movload.ratings/1"
_SAME: Final = 1e-9  # relative: a strength as new that differs by round-off only is not shown apart


def _strength_text(row: Rating, units: UnitSystem) -> str:
    """Return a strength as found with its letter, or its unit where it is a moment."""
    return _carried_text(row, row.strength, units)


def _as_new_text(row: Rating, units: UnitSystem) -> str:
    """Return a strength with no metal gone; "as typed" where it was typed."""
    return "as typed" if math.isnan(row.as_new) else _carried_text(row, row.as_new, units)


def _carried_text(row: Rating, value: float, units: UnitSystem) -> str:
    """Return what a row carries with its letter, or its unit where it is a moment."""
    number = number_text(value, quantity_of(row.effect), units)
    if row.effect.kind == "moment":
        return f"{number} {units.symbol('moment')}"
    return f"{number} {row.sense[0].upper()}" if row.effect.kind == "axial" else number


COLUMNS: Final[list[Column[Rating]]] = [
    Column("crossing", "crossing", lambda row: row.crossing),
    Column("level", "level", lambda row: row.level),
    Column("part", "part", lambda row: row.effect.part, text=lambda row, _: row.part),
    Column("row", "row", lambda row: row.effect.name),
    Column("sense", "sense", lambda row: row.sense),
    Column("factor", "RF", lambda row: row.factor, right=True, text=lambda row, _: factor_text(row.factor)),
    Column(
        "strength", "strength", lambda row: row.strength, lambda row: quantity_of(row.effect), right=True,
        text=_strength_text,
    ),
    Column(
        "permanent", "permanent", lambda row: row.permanent, lambda row: quantity_of(row.effect), right=True,
        text=lambda row, units: effect_text(row.effect, row.permanent, units),
    ),
    Column(
        "live", "live", lambda row: row.live, lambda row: quantity_of(row.effect), right=True,
        text=lambda row, units: effect_text(row.effect, row.live, units),
    ),
    Column("impact", "impact", lambda row: row.impact, right=True, text=lambda row, _: f"{row.impact:.2f}"),
    Column(
        "safe_weight", "safe weight", lambda row: row.safe_weight, "force",
        text=lambda row, units: weight_text(row.safe_weight, units),
    ),
    Column(
        "position", "worst with", lambda row: row.peak.position, "length",
        text=lambda row, units: use_text(row) or place_text(row.peak, units),
    ),
    Column("heading", "", lambda row: row.peak.heading),
    Column("axle", "", lambda row: row.peak.axle + 1 if row.peak.heading else None),
    Column("station", "", lambda row: row.peak.station if row.peak.station >= 0 else None),
    Column("kind", "", lambda row: row.effect.kind),
    Column("crossing_number", "", lambda row: row.number),
    Column("abreast", "", lambda row: row.abreast),
    Column("place", "", lambda row: row.place),
    Column("speed", "", lambda row: row.speed, "speed"),
    Column(
        "as_new", "as new", lambda row: None if math.isnan(row.as_new) else row.as_new,
        lambda row: quantity_of(row.effect), right=True, text=_as_new_text,
    ),
    Column(
        "held", "held", lambda row: row.held, lambda row: quantity_of(row.effect), right=True,
        text=lambda row, units: effect_text(row.effect, row.held, units),
    ),
]  # fmt: skip
_IN_TABLE: Final = (
    "part",
    "row",
    "sense",
    "factor",
    "strength",
    "as_new",
    "permanent",
    "live",
    "held",
    "impact",
    "position",
)
_JSON_ONLY: Final[list[Column[Rating]]] = [
    Column("permanent_use", "", lambda row: row.permanent_use),
    Column("permanent_used", "", lambda row: row.pushed),
    Column("live_factor", "", lambda row: row.live_factor),
    Column("held_factor", "", lambda row: row.held_factor),
    Column("stands_for", "", lambda row: row.part),
    Column("placement", "", lambda row: placement_json(row.peak.placement)),
]


def summary(ratings: Ratings, levels: Sequence[int]) -> RenderableType:
    """Return one line a crossing and level: weight, place, RF, verdict, what governs, safe weight, worst position.

    Columns that would say the same in every line (anywhere, one vehicle, the only level) are left to the text below.
    """
    lines = [
        _summary_line(ratings, ratings.governing(number, level=level), level)
        for number in range(len(ratings.crossings))
        for level in levels
        if ratings.rates(number, level)
    ]
    heads = ["crossing", "weighs", "keeps", "abreast", "level", "RF", "answer", "governed by", "safe weight",
             "worst with"]  # fmt: skip
    right = {"weighs", "abreast", "RF"}
    placed = any(one.place != ANYWHERE or one.speed or one.beside for one in ratings.crossings)
    shown = {"keeps": placed, "abreast": any(line[3] != "1" for line in lines), "level": len(ratings.levels) > 1}
    kept = [number for number, head in enumerate(heads) if shown.get(head, True)]
    return grid(
        [heads[one] for one in kept],
        [[line[one] for one in kept] for line in lines],
        right=[heads[one] in right for one in kept],
    )


def _summary_line(ratings: Ratings, worst: Rating, level: int) -> list[str]:
    """Return one crossing at one level as a line."""
    units, crossing = ratings.solved.units, ratings.crossings[worst.number]
    return [
        crossing.title,
        f"{number_text(crossing.loading.gross, 'force', units)} {units.symbol('force')}",
        way_text(crossing, units),
        str(fitting(crossing, ratings.solved.roadway)),
        ratings.levels[level],
        factor_text(worst.factor),
        verdict_text(worst.factor, ratings.coverage, ratings.uplifts),
        governed_text(worst),
        weight_text(worst.safe_weight, units) + (" *" if crossing.controlled else ""),
        use_text(worst) or place_text(worst.peak, units),
    ]


def governed_text(rating: Rating) -> str:
    """Return a row in words: its truss only where the two differ or others are rated beside it."""
    sense = "" if rating.sense in rating.effect.name else f" {rating.sense}"
    part = "" if rating.part in {"truss", "either truss"} else f"{rating.part}, "
    return f"{part}{rating.effect.name}{sense}"


def detail(rows: Sequence[Rating], units: UnitSystem) -> RenderableType:
    """Return rated rows, the worst first."""
    several = len({row.part for row in rows}) > 1
    impacts = len({row.impact for row in rows}) > 1
    beside = any(row.held for row in rows)
    lost = any(row.as_new > row.strength * (1.0 + _SAME) for row in rows)
    shown = {"part": several, "impact": impacts, "held": beside, "as_new": lost}
    names = [name for name in _IN_TABLE if shown.get(name, True)]
    if len({row.level for row in rows}) > 1:
        names.insert(0, "level")
    by_name = {column.name: column for column in COLUMNS}
    return table_of([by_name[name] for name in names], rows, units)


def ratings_csv(rows: Sequence[Rating], units: UnitSystem) -> str:
    """Return rated rows as CSV in the file's units; a column ``unit`` says what strength and effects are in."""
    unit: Column[Rating] = Column("unit", "", lambda row: units.symbol(quantity_of(row.effect)))
    return csv_text([*COLUMNS, unit], rows, units)


def explanation_json(one: Explanation) -> dict[str, object]:
    """Return one rating taken apart."""
    rating = one.rating
    return {
        "crossing_number": rating.number, "level": rating.level, "part": rating.effect.part,
        "row": rating.effect.name, "sense": rating.sense,
        "strength": [asdict(step) for step in one.strength.steps],
        "permanent": [
            {"title": term.title, "effect": term.effect, "margin": term.margin, "used": term.used}
            for term in one.permanent
        ],
        "terms": [asdict(term) for term in one.terms],
        "spare": one.spare, "live": one.live, "live_factor": one.live_margin, "held": one.held,
        "held_factor": one.held_margin, "factor": rating.factor,
    }  # fmt: skip


def ratings_json(ratings: Ratings, rows: Sequence[Rating], explanations: Sequence[Explanation] = ()) -> str:
    """Return the document movload.ratings/1."""
    coverage = ratings.coverage
    return json_text(
        {
            "format": FORMAT,
            "title": ratings.solved.title,
            "method": ratings.solved.method.title,
            "statement": ratings.solved.method.statement,
            "units": {"force": "N", "length": "m", "moment": "N m", "speed": "m/s"},
            "crossings": [
                {
                    "title": crossing.title, "kind": crossing.loading.kind, "weight": crossing.loading.gross,
                    "place": crossing.place if ratings.solved.roadway else "typed share",
                    "source": crossing.loading.source,
                    "z": crossing.z if crossing.place == "offset" else None, "speed": crossing.speed,
                    "most_abreast": fitting(crossing, ratings.solved.roadway),
                    "beside": crossing.beside.title if crossing.beside else None,
                }
                for crossing in ratings.crossings
            ],
            "coverage": {
                "full": coverage.full, "partly": coverage.partly, "none": coverage.none,
                "not_rated": coverage.not_rated,
            },
            "notes": [
                {"code": note.code, "subject": note.subject, "text": note.text, "source": note.source}
                for note in ratings.notes
            ],
            "deflections": [
                {
                    "part": one.part, "point": one.point, "crossing": one.crossing, "crossing_number": one.number,
                    "down": one.down, "ratio": one.ratio, "limit": one.limit,
                }
                for one in deflections(ratings)
            ],
            "uplifts": ratings.uplifts,
            "cautions": CAUTIONS,
            "sources": ratings.solved.sources,
            "rows": json_rows([*COLUMNS, *_JSON_ONLY], rows),
            "explanations": [explanation_json(one) for one in explanations],
        }
    )  # fmt: skip
