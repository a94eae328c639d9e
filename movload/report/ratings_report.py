"""Ratings as tables, CSV and JSON: a line a crossing, then row by row, then the sum that anyone can add again."""

from __future__ import annotations

from typing import TYPE_CHECKING, Final

import numpy as np

from movload.report.columns import Column, csv_text, json_rows, json_text
from movload.report.phrases import (
    CAUTIONS,
    coverage_text,
    effect_text,
    factor_text,
    number_text,
    place_text,
    standing_text,
    unsigned_zero,
    uplift_texts,
    use_text,
    verdict_text,
    weight_text,
)
from movload.report.sweep_report import placement_json
from movload.report.table import grid, table_of

if TYPE_CHECKING:
    from collections.abc import Sequence

    from rich.console import RenderableType

    from movload.rating.ratings import Rating, Ratings
    from movload.review.hand import Term
    from movload.units import UnitSystem

FORMAT: Final = "movload.ratings/1"
FORCE_NOTE: Final = "permanent and live + tension; live includes share and impact"

COLUMNS: Final[list[Column[Rating]]] = [
    Column("crossing", "crossing", lambda row: row.crossing),
    Column("level", "level", lambda row: row.level),
    Column("part", "part", lambda row: row.effect.part),
    Column("row", "row", lambda row: row.effect.name),
    Column("sense", "sense", lambda row: row.sense),
    Column("factor", "RF", lambda row: row.factor, right=True, text=lambda row, _: factor_text(row.factor)),
    Column(
        "strength", "strength", lambda row: row.strength, "force", right=True,
        text=lambda row, units: f"{number_text(row.strength, 'force', units)} {row.sense[0].upper()}",
    ),
    Column(
        "permanent", "permanent", lambda row: row.permanent, "force", right=True,
        text=lambda row, units: effect_text(row.effect, row.permanent, units),
    ),
    Column(
        "live", "live", lambda row: row.live, "force", right=True,
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
    Column("station", "", lambda row: row.peak.station if row.peak.heading else None),
]  # fmt: skip
_IN_TABLE: Final = {"row", "sense", "factor", "strength", "permanent", "live", "position"}
_JSON_ONLY: Final[list[Column[Rating]]] = [
    Column("permanent_use", "", lambda row: row.permanent_use),
    Column("placement", "", lambda row: placement_json(row.peak.placement)),
]


def summary(ratings: Ratings) -> RenderableType:
    """Return one line a crossing: weight, RF, verdict, what governs, safe weight, where it is worst."""
    units, lines = ratings.solved.units, []
    for number, crossing in enumerate(ratings.crossings):
        worst = ratings.governing(number)
        lines.append(
            [
                crossing.title,
                f"{number_text(crossing.loading.gross, 'force', units)} {units.symbol('force')}",
                factor_text(worst.factor),
                verdict_text(worst.factor, ratings.coverage, ratings.uplifts),
                f"{worst.effect.name} {worst.sense}",
                weight_text(worst.safe_weight, units),
                use_text(worst) or place_text(worst.peak, units),
            ]
        )
    heads = ["crossing", "weighs", "RF", "answer", "governed by", "safe weight", "worst with"]
    return grid(heads, lines, right=[False, True, True, False, False, False, False])


def detail(rows: Sequence[Rating], units: UnitSystem) -> RenderableType:
    """Return rated rows, the worst first."""
    return table_of([column for column in COLUMNS if column.name in _IN_TABLE], rows, units)


def sum_table(
    rating: Rating, terms: Sequence[Term], stations: tuple[str, ...], units: UnitSystem
) -> list[RenderableType | str]:
    """Return a governing figure as its sum and its rating, to be added again with a pocket calculator."""
    force, length = units.symbol("force"), units.symbol("length")
    lines = [
        [
            str(term.axle),
            number_text(term.x, "length", units, more=1), number_text(term.load, "force", units, more=1),
            f"{term.share:.4f}", f"{1 + term.impact:.3f}", unsigned_zero(f"{term.ordinate:+.5f}"),
            number_text(term.effect, "force", units, more=1, sign="+"),
        ]
        for term in terms
    ]  # fmt: skip
    lines.append(["", "", "", "", "", "sum", number_text(rating.live, "force", units, more=1, sign="+")])
    heads = ["axle", f"x [{length}]", f"load [{force}]", "x share", "x (1 + I)", "x ordinate", f"= [{force}]"]
    peak = rating.peak
    where = ", ".join(filter(None, (standing_text(peak, stations), place_text(peak, units))))
    title = f"{rating.effect.name} {rating.sense} under {rating.crossing}: {where}"
    return [title, "", grid(heads, lines, right=[True] * 7), "", _equation(rating, units)]


def _equation(rating: Rating, units: UnitSystem) -> str:
    """Return RF = (R - a D) / (b L) with its numbers, what permanent load uses with its margins."""
    strength, live = (number_text(value, "force", units, more=1) for value in (rating.strength, abs(rating.live)))
    sign = "-" if rating.side == 0 else "+"
    pushed = rating.permanent if rating.side == 0 else -rating.permanent
    factored = "" if np.isclose(rating.pushed, pushed, rtol=1e-12) else "factored "
    used = rating.pushed if rating.side == 0 else -rating.pushed
    permanent = number_text(used, "force", units, more=1, sign="+")
    on_live = "" if rating.live_factor == 1 else f"{rating.live_factor:g} x "
    why = use_text(rating)
    return (
        f"RF = (strength {strength} {sign} {factored}permanent ({permanent})) / {on_live}live {live} "
        f"{units.symbol('force')} = {factor_text(rating.factor)}{f': {why}' if why else ''}"
    )


def closing(ratings: Ratings) -> list[str]:
    """Return what the answer covers, its notes and its cautions."""
    notes = [
        f"Note: {note.text}" if note.subject == "truss" else f"Note, {note.subject}: {note.text}"
        for note in ratings.notes
    ]
    return [
        ratings.solved.method.statement,
        "Covers: " + coverage_text(ratings.coverage),
        *uplift_texts(ratings.uplifts, ratings.solved.units),
        *_relief_texts(ratings),
        *notes,
        *(f"Caution: {caution}" for caution in CAUTIONS),
    ]


def _relief_texts(ratings: Ratings) -> list[str]:
    """Return a line for each governing row that permanent load relieves: less of it would lower the rating."""
    units, lines = ratings.solved.units, []
    for number in range(len(ratings.crossings)):
        worst = ratings.governing(number)
        if worst.pushed < 0:
            relief = number_text(-worst.pushed, "force", units)
            lines.append(
                f"Note: permanent load relieves {worst.effect.name} {worst.sense} by {relief} {units.symbol('force')}; "
                "less of it than typed (a lighter deck, surfacing removed) lowers that rating."
            )
    return list(dict.fromkeys(lines))


def ratings_csv(rows: Sequence[Rating], units: UnitSystem) -> str:
    """Return rated rows as CSV in the file's units."""
    return csv_text(COLUMNS, rows, units)


def ratings_json(ratings: Ratings, rows: Sequence[Rating]) -> str:
    """Return the document movload.ratings/1."""
    coverage = ratings.coverage
    return json_text(
        {
            "format": FORMAT,
            "title": ratings.solved.title,
            "method": ratings.solved.method.title,
            "statement": ratings.solved.method.statement,
            "units": {"force": "N", "length": "m"},
            "crossings": [
                {
                    "title": crossing.title, "kind": crossing.loading.kind, "weight": crossing.loading.gross,
                    "place": crossing.place, "source": crossing.loading.source,
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
            "uplifts": ratings.uplifts,
            "cautions": CAUTIONS,
            "sources": ratings.solved.sources,
            "rows": json_rows([*COLUMNS, *_JSON_ONLY], rows),
        }
    )  # fmt: skip
