"""What frames every figure: its heading with a rule under it, its caption, and the figure turned into bytes."""

from __future__ import annotations

import io
import warnings
from contextlib import contextmanager
from typing import TYPE_CHECKING, Final

import matplotlib as mpl

from movload.errors import InputError
from movload.report.drawing.dimensions import row_height
from movload.report.drawing.ink import ATTEMPTS, BOLD, EDGE, FINE, GREY, INK, MARGIN, STYLE
from movload.report.drawing.labels import Lettering, Spot, squeezed, wrapped
from movload.report.drawing.left_out import LeftOut

if TYPE_CHECKING:
    from collections.abc import Callable, Iterator

    from matplotlib.figure import Figure

    from movload.report.drawing.sheet import Sheet

SUFFIXES: Final = (".png", ".svg", ".pdf")
TITLE: Final = 13.0  # pt
HEADING: Final = 11.0  # mm from the sheet's upper edge to the rule under its title

_NO_DATE: Final[dict[str, dict[str, None]]] = {
    ".png": {"Software": None},
    ".svg": {"Date": None, "Creator": None},
    ".pdf": {"CreationDate": None, "Creator": None, "Producer": None},
}


def figure_bytes(figure: Figure, suffix: str) -> bytes:
    """Return a figure as the content of a file; the same figure always gives the same bytes.

    Parameters
    ----------
    suffix
        One of SUFFIXES.

    Raises
    ------
    InputError
        Another suffix.
    """
    if suffix not in SUFFIXES:
        raise InputError(f'a figure is written as {", ".join(SUFFIXES)}, got "{suffix}"', place="figure")
    held = io.BytesIO()
    with inked():
        figure.savefig(held, format=suffix[1:], dpi=figure.dpi, metadata=_NO_DATE[suffix])
    return held.getvalue()


@contextmanager
def inked() -> Iterator[None]:
    """Draw in the house's style; a sign that the font lacks becomes its empty box without a word on stderr."""
    with mpl.rc_context(dict(STYLE)), warnings.catch_warnings():
        warnings.filterwarnings("ignore", message=r"Glyph \d+ .* missing from font")
        yield


def fitted(draw: Callable[[float, float, LeftOut], tuple[Sheet, LeftOut]]) -> Figure:
    """Return the first attempt that leaves no label out; else the one that leaves out the fewest, and says so.

    Each attempt has more room than the one before, so the first that fits is found by halving.

    Parameters
    ----------
    draw
        Makes the figure on a sheet of a width [mm] in a letter size [pt], its caption owning up to the labels that are
        known to be left out, and says which labels found no room.
    """
    nothing = LeftOut()
    with inked():
        first, left_out = draw(*ATTEMPTS[0], nothing)
        if not left_out.total():
            return first.figure
        best, fewest = draw(*ATTEMPTS[-1], nothing)
        if fewest.total():  # once more: a longer caption lifts all that stands over it, and changes nothing else
            is_last = fewest.total() < left_out.total()
            told, _ = draw(*ATTEMPTS[-1 if is_last else 0], fewest if is_last else left_out)
            return told.figure
        crowded, fits = 0, len(ATTEMPTS) - 1
        while fits - crowded > 1:
            middle = (crowded + fits) // 2
            sheet, left_out = draw(*ATTEMPTS[middle], nothing)
            crowded, fits, best = (middle, fits, best) if left_out.total() else (crowded, middle, sheet)
    return best.figure


def draw_heading(sheet: Sheet, title: str, remark: str) -> None:
    """Write the title, a remark at the right, and the rule under both."""
    level = sheet.height - HEADING + 4.0
    right = sheet.width - MARGIN
    words = Lettering(remark, sheet.size)
    if remark:
        sheet.write_at(words, Spot(right - words.width / 2, level), GREY)
    room = right - MARGIN - (words.width + 6.0 if remark else 0.0)
    sheet.write_from(squeezed(title, TITLE, room, bold=True), MARGIN, level)
    rule = sheet.height - HEADING
    sheet.stroke([(MARGIN, rule), (right, rule)], BOLD)
    sheet.board.keep_clear([(MARGIN, rule), (right, rule)], BOLD / 2)


def caption_height(caption: str, width: float, size: float) -> float:
    """Return the height a caption needs on a sheet of ``width`` [mm], its rule and the margin under it included."""
    return len(wrapped(caption, size, width - 2 * MARGIN)) * row_height(size) + EDGE + 3.0


def draw_caption(sheet: Sheet, caption: str) -> None:
    """Write the caption at the foot of the sheet under a thin rule."""
    lines = wrapped(caption, sheet.size, sheet.width - 2 * MARGIN)
    top = caption_height(caption, sheet.width, sheet.size)
    sheet.stroke([(MARGIN, top), (sheet.width - MARGIN, top)], FINE)
    sheet.board.keep_clear([(MARGIN, top), (sheet.width - MARGIN, top)])
    for number, line in enumerate(lines):
        level = top - 1.5 - (number + 0.5) * row_height(sheet.size)
        sheet.write_from(Lettering(line, sheet.size), MARGIN, level, INK)
