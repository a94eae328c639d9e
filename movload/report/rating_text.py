"""What a person reads of a rating: the answer, the rows that decide it, the sum, what it covers, the cautions."""

from __future__ import annotations

from typing import TYPE_CHECKING, Final

from movload.rating.serviceability import deflections
from movload.report.explain_report import explanation_parts, sum_table
from movload.report.phrases import (
    CAUTIONS,
    coverage_text,
    number_text,
    quantity_of,
    span_ratio_text,
    uplift_texts,
    way_text,
    weight_text,
)
from movload.report.ratings_report import detail, governed_text, summary
from movload.report.table import grid
from movload.review.hand import terms
from movload.traffic.formations import fitting

if TYPE_CHECKING:
    from collections.abc import Sequence

    from rich.console import RenderableType

    from movload.rating.ratings import Ratings
    from movload.review.hand import Explanation

_SHOWN: Final = 8  # rows of a single crossing that are printed without --all


def rating_text(
    ratings: Ratings, stations: tuple[str, ...], *, every: bool = False, explain: Sequence[Explanation] = ()
) -> list[RenderableType | str]:
    """Return what a person reads.

    Parameters
    ----------
    stations
        Names of the panel points.
    every
        Print every rated row of every crossing.
    explain
        Ratings taken apart.
    """
    solved = ratings.solved
    levels = range(len(ratings.levels))
    parts: list[RenderableType | str] = [solved.title, "", summary(ratings, levels), "", *_controlled(ratings)]
    single = len(ratings.crossings) == 1
    for number, crossing in enumerate(ratings.crossings):
        if every or (single and not explain):
            parts += _rows(ratings, number, every=every)
        if single and not explain:
            worst = ratings.governing(number)
            found = terms(worst.peaks, worst.row, worst.side, worst.formation)
            parts += [*sum_table(worst, found, stations, solved.units, margin=worst.live_factor), ""]
        del crossing
    for one in explain:
        parts += [*explanation_parts(one, stations, solved.units), ""]
    return [*parts, *_deflected(ratings, every=every), *closing(ratings)]


def _rows(ratings: Ratings, number: int, *, every: bool) -> list[RenderableType | str]:
    """Return a crossing's rows, the worst or all."""
    units, crossing = ratings.solved.units, ratings.crossings[number]
    mine = ratings.rows(number)
    first = {(row.part, row.effect.name): row for row in reversed(mine)}  # each row once, where it is worst
    worst = [row for row in mine if first[row.part, row.effect.name] is row]
    shown = mine if every else worst[:_SHOWN]
    rest = f", the worst {len(shown)} of {len(worst)} rows (--all for every rating)" if len(shown) < len(mine) else ""
    way = f" ({way_text(crossing, units)})" if ratings.solved.roadway else ""
    return [f"{crossing.title}{way}: forces in {units.symbol('force')}{rest}", "", detail(shown, units), ""]


def _controlled(ratings: Ratings) -> list[str]:
    """Return what the star beside a safe weight means."""
    if not any(crossing.controlled for crossing in ratings.crossings):
        return []
    return ["* needs control on site (place or speed): no sign weight.", ""]


def _deflected(ratings: Ratings, *, every: bool) -> list[RenderableType | str]:
    """Return the greatest live deflection of each crossing, or every panel point's, against the limit."""
    found, units = deflections(ratings), ratings.solved.units
    if not found:
        return []
    if not every:
        first = {one.number: one for one in reversed(found)}
        found = [first[number] for number in sorted(first)]
    lines = [
        [
            _crossing_text(ratings, one.number), one.part, one.point,
            f"{number_text(one.down, 'section', units)} {units.symbol('section')}", span_ratio_text(one.ratio),
            "-" if one.limit is None else f"1/{one.limit:g}", "" if one.passes else "exceeded",
        ]
        for one in found
    ]  # fmt: skip
    heads = ["live deflection", "part", "at", "down", "of span", "limit", ""]
    return [grid(heads, lines, right=[False, False, False, True, True, True, False]), ""]


def _crossing_text(ratings: Ratings, number: int) -> str:
    """Return a crossing's title, with its way where the same vehicle crosses in several."""
    crossing = ratings.crossings[number]
    again = sum(one.title == crossing.title for one in ratings.crossings) > 1
    return f"{crossing.title}, {way_text(crossing, ratings.solved.units)}" if again else crossing.title


def closing(ratings: Ratings) -> list[str]:
    """Return what the answer covers, its notes and its cautions."""
    notes = [
        f"Note: {note.text}" if note.subject == "truss" else f"Note, {note.subject}: {note.text}"
        for note in ratings.notes
    ]
    return [
        ratings.solved.method.statement,
        ratings.solved.impact.statement,
        *_speed_texts(ratings),
        *_abreast_texts(ratings),
        "Covers: " + coverage_text(ratings.coverage),
        *uplift_texts(ratings.uplifts, ratings.solved.units),
        *_relief_texts(ratings),
        *_sign_texts(ratings),
        *notes,
        *(f"Caution: {caution}" for caution in CAUTIONS),
    ]


def _speed_texts(ratings: Ratings) -> list[str]:
    """Return what a speed that was asked for does to impact."""
    limit, kinds = ratings.solved.impact.crawl
    slow = [one for one in ratings.crossings if one.speed is not None]
    kept = [one.title for one in slow if (one.speed or 0.0) > limit or one.loading.kind not in kinds]
    named = ", ".join(dict.fromkeys(kept))
    return [f"No rule of this method drops impact at the speed asked for {named}: it stays."] if kept else []


def _abreast_texts(ratings: Ratings) -> list[str]:
    """Return how many vehicles were taken to stand side by side."""
    solved = ratings.solved
    if solved.roadway is None:
        return ["One vehicle on the bridge at a time."]
    counts = sorted({fitting(crossing, solved.roadway) for crossing in ratings.crossings})
    most = " or ".join(str(count) for count in counts)
    alike = "both trusses carry the same and are shown as one" if ratings.alike else "both trusses are shown"
    beside = {crossing.beside.title for crossing in ratings.crossings if crossing.beside}
    texts = [f"Up to {most} vehicle(s) side by side, one behind the other never; {alike}."]
    if beside:
        texts.append(
            f"Beside it may stand {', '.join(sorted(beside))}, with its own impact and margin, held fixed: RF and "
            "safe weight are those of the vehicle asked about alone, with and without it."
        )
    return texts


def _sign_texts(ratings: Ratings) -> list[str]:
    """Return what may not be made of the safe weights, and the rule that closes a road."""
    method, units = ratings.solved.method, ratings.solved.units
    texts = ["A safe weight holds for that vehicle's own axles in proportion: no sign weight follows from one vehicle."]
    if method.closure:
        worst = min(
            (
                rating.safe_weight
                for number, crossing in enumerate(ratings.crossings)
                for level in range(len(ratings.levels))
                if ratings.rates(number, level) and method.levels[level].posting and not crossing.controlled
                and crossing.loading.kind != "crowd"
                for rating in (ratings.governing(number, level=level),)
            ),
            default=float("inf"),
        )  # fmt: skip
        if worst < method.closure:
            least = weight_text(method.closure, units)
            texts.append(f"Below {least} a US road bridge is closed to vehicles (not to walkers); from memory.")
    return texts


def _relief_texts(ratings: Ratings) -> list[str]:
    """Return a line for each governing row that permanent load relieves: less of it would lower the rating."""
    units, lines = ratings.solved.units, []
    for number in range(len(ratings.crossings)):
        worst = ratings.governing(number)
        if worst.pushed < 0:
            quantity = quantity_of(worst.effect)
            relief = number_text(-worst.pushed, quantity, units)
            lines.append(
                f"Note: permanent load relieves {governed_text(worst)} by {relief} {units.symbol(quantity)}; "
                "less of it than typed (a lighter deck, surfacing removed) lowers that rating."
            )
    return list(dict.fromkeys(lines))
