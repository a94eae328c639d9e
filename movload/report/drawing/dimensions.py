"""Dimension strings: a thin line with an oblique tick at each point and the length of each piece on it."""

from __future__ import annotations

from itertools import pairwise
from typing import TYPE_CHECKING, Final

from movload.report.drawing.ink import FAINT, FINE, HAIR, INK, THIN
from movload.report.drawing.labels import Spot

if TYPE_CHECKING:
    from collections.abc import Sequence

    from movload.report.drawing.sheet import Place, Sheet

_TICK: Final = 1.0  # mm, half the width of a tick
_ABOVE: Final = 0.75  # mm between a dimension line and the figures on it


def row_height(size: float) -> float:
    """Return the height of a row of words of ``size`` [pt], air included [mm]."""
    return 0.62 * size


def dimension_string(
    sheet: Sheet, level: float, places: Sequence[float], texts: Sequence[str], *, colour: str = INK
) -> int:
    """Draw a dimension string at height ``level`` through ``places`` [mm]; return how many pieces found no room."""
    sheet.stroke([(places[0] - _TICK, level), (places[-1] + _TICK, level)], FINE, colour, label="dimension string")
    for place in places:
        sheet.stroke([(place - _TICK, level - _TICK), (place + _TICK, level + _TICK)], THIN, colour)
        sheet.board.keep_clear([(place, level - _TICK), (place, level + _TICK)], _TICK / 2)
    sheet.board.keep_clear([(places[0], level), (places[-1], level)])
    return sum(
        not _write_piece(sheet, level, middle=(left + right) / 2, text=text, colour=colour)
        for (left, right), text in zip(pairwise(places), texts, strict=True)
    )


def _write_piece(sheet: Sheet, level: float, *, middle: float, text: str, colour: str) -> bool:
    """Write one length: on the line, or under it where its neighbours leave no room."""
    lettering = sheet.lettering(text)
    away = _ABOVE + lettering.ink_height / 2
    lower = level - away - row_height(sheet.size)
    spots = [Spot(middle, level + away), Spot(middle, level - away), Spot(middle, lower, leader=(middle, level))]
    return sheet.write(lettering, spots, colour)


def upright_dimension(sheet: Sheet, x: float, measured: Sequence[Place], text: str) -> bool:
    """Draw an upright dimension at ``x`` [mm] between two points measured; say whether its length found room."""
    ends = sorted(y for _, y in measured)
    for start, end in measured:
        sheet.stroke([(start, end), (x + 1.5, end)], HAIR, FAINT, zorder=-5)
        sheet.stroke([(x - _TICK, end - _TICK), (x + _TICK, end + _TICK)], THIN)
    sheet.stroke([(x, ends[0] - _TICK), (x, ends[1] + _TICK)], FINE)
    sheet.board.keep_clear([(x, ends[0]), (x, ends[1])])
    lettering = sheet.lettering(text)
    away = _ABOVE + lettering.ink_height / 2
    middle = (ends[0] + ends[1]) / 2
    return sheet.write(lettering, [Spot(x + side * away, middle, 90.0) for side in (-1, 1)])


def row_of_words(sheet: Sheet, level: float, places: Sequence[float], texts: Sequence[str]) -> int:
    """Write a text at each place [mm] around height ``level``, ends first; return how many found no room."""
    order = sorted(range(len(places)), key=lambda number: (number not in {0, len(places) - 1}, number))
    return sum(not sheet.write(sheet.lettering(texts[number]), [Spot(places[number], level)]) for number in order)
