"""A peak as a person pictures it: what every bar carries, where the vehicle stands, and the influence line under it."""

from __future__ import annotations

from dataclasses import dataclass
from typing import TYPE_CHECKING, Final

import numpy as np

from movload.errors import InputError
from movload.report.drawing.bearings import REACH, over
from movload.report.drawing.deck_line import DeckLine
from movload.report.drawing.dimensions import row_height
from movload.report.drawing.frame import HEADING, caption_height, draw_caption, draw_heading, fitted
from movload.report.drawing.influence_sheet import draw_stations
from movload.report.drawing.ink import ACCENT, BOLD, FINE, FIRM, GREY, HAIR, INK, MARGIN
from movload.report.drawing.labels import Lettering
from movload.report.drawing.left_out import ORDINATE, LeftOut
from movload.report.drawing.line_strip import Band, draw_line, name_line, write_kinks, write_ordinate, write_zeros
from movload.report.drawing.peak_subject import Subject
from movload.report.drawing.sheet import Sheet, Window
from movload.report.drawing.stressed import draw_key, draw_stressed
from movload.report.drawing.train import Train, TrainPlan
from movload.report.drawing.train_strip import draw_train

if TYPE_CHECKING:
    from matplotlib.figure import Figure

    from movload.arrays import Floats
    from movload.bridge.truss import Truss
    from movload.peaks.peaks import Peak
    from movload.report.drawing.sheet import Strip
    from movload.statics.influence import InfluenceLines
    from movload.units import UnitSystem

_TALLEST: Final = 85.0  # mm of paper for the truss's own height
_ABOVE: Final = 11.0  # mm over the truss for names
_BELOW: Final = REACH + 5.0  # mm under it for bearings and names
_LINE: Final = 52.0  # mm for the influence line
_ANSWER: Final = 10.0  # mm for the governing value under the heading
_ROAD: Final = 14.0  # mm, least length of the road drawn before and behind the bridge
_DOT: Final = 0.65  # mm, radius of the mark on an ordinate under an axle
_ANSWER_SIZE: Final = 13.0  # pt


def peak_figure(  # noqa: PLR0913 - the caller's own words and forces are keywords
    truss: Truss,
    lines: InfluenceLines,
    peak: Peak,
    key: str | tuple[str, str],
    units: UnitSystem,
    *,
    title: str,
    forces: Floats | None = None,
    caption: str = "",
) -> Figure:
    """Return the drawing of a peak: bars by what they carry, the vehicle to scale, the influence line beneath.

    Parameters
    ----------
    truss, lines
        The truss and its influence lines.
    peak
        What is shown: the vehicle as it stands when the row is worst; off the bridge, the truss is drawn without it.
    key
        The row, by its name or (part, name).
    units
        What lengths and forces are written in.
    title
        Written over the drawing.
    forces
        Member forces (M,) [N, + tension] in the truss's order; by default those of the peak's own placement.
    caption
        What the forces are, when they are not those of the vehicle alone.

    Raises
    ------
    InputError
        Forces that are not one finite number a member.
    UnknownNameError
        A key that is no row.
    """
    shown = _vehicle_forces(truss, lines, peak) if forces is None else np.asarray(forces, dtype=np.float64)
    if shown.shape != (len(truss.members),) or not np.isfinite(shown).all():
        raise InputError(
            f"one finite force a member is needed, {len(truss.members)} in all, got shape {shown.shape}",
            place="forces",
        )
    deck = DeckLine.under(truss, lines)
    subject = Subject(truss, deck, lines[key], peak, shown, units, title, caption)
    return fitted(lambda width, size, known: _drawn(subject, width, size, known))


def _vehicle_forces(truss: Truss, lines: InfluenceLines, peak: Peak) -> Floats:
    """Return every member's force (M,) [N] under the peak's own placement; nothing when the vehicle is off."""
    if not peak.placement.x.size:
        return np.zeros(len(truss.members))
    under = lines.under(peak.placement.panel_loads(lines.stations)[:, None])[:, 0]
    by_name = {e.name: float(value) for e, value in zip(lines.effects, under, strict=True) if e.kind == "axial"}
    return np.array([by_name[member.name] for member in truss.members])


@dataclass(frozen=True, slots=True, eq=False)
class Places:
    """Where the parts of a peak figure stand [mm]: caption's top, line's foot, deck, y = 0 of the truss, the top."""

    foot: float
    line: float
    deck: float
    zero: float
    top: float


def _drawn(subject: Subject, width: float, size: float, known: LeftOut) -> tuple[Sheet, LeftOut]:
    """Draw one attempt whose caption tells the ``known`` to be left out; return the sheet and what found no room."""
    truss, deck, row = subject.truss, subject.deck, row_height(size)
    first, last, low, high = deck.extent(truss)
    train = Train.of(subject.peak, deck.stations)
    first, last = train.extent(first, last)
    window = Window.fitting(first, last, width, steepest=_TALLEST / (high - low))
    plan = TrainPlan.of(train, window, subject.units, size)
    caption = subject.told(known)
    foot = caption_height(caption, width, size)
    line = foot + (3 if subject.is_stressed else 2) * row + 3.0
    level = line + _LINE + plan.below
    zero = level + (0.0 if subject.is_off else plan.above) + _BELOW - low * window.scale
    places = Places(foot, line, level, zero, zero + high * window.scale + _ABOVE + over(truss))
    sheet = Sheet(width, places.top + _ANSWER + HEADING, size)
    draw_heading(sheet, subject.title, "")
    draw_caption(sheet, caption)
    _write_answer(sheet, subject)
    left_out = _draw_strips(sheet, window, subject, plan=plan, places=places)
    return sheet, left_out


def _write_answer(sheet: Sheet, subject: Subject) -> None:
    """Write the row, its peak and where the vehicle stands under the heading."""
    level = sheet.height - HEADING - 6.0
    end = sheet.write_from(Lettering(subject.answer(), _ANSWER_SIZE, bold=True), MARGIN, level, ACCENT)
    sheet.write_from(sheet.lettering(subject.placed()), end + 6.0, level)


def _draw_strips(sheet: Sheet, window: Window, subject: Subject, *, plan: TrainPlan, places: Places) -> LeftOut:
    """Draw truss, train and influence line, then write on them; return which labels found no room."""
    line, units = subject.line, subject.units
    elevation = sheet.strip(window, places.zero, window.scale)
    band = Band(places.line, _LINE).strip(sheet, window, line)
    draw_line(band, line)
    name_line(band, line, units, subject.truss)
    left_out = LeftOut()
    if not subject.is_off:
        deck = sheet.strip(window, places.deck, window.scale)
        _draw_deck(deck, subject)
        left_out += draw_train(deck, plan, units)
        left_out += _draw_stems(band, deck, subject, plan.train)
    on = plan.train.x[plan.train.on]
    left_out += write_kinks(band, line, units, taken=on) + write_zeros(band, line, units)
    left_out += draw_stations(sheet, window, subject.deck, units, reach=(places.line, places.zero))
    left_out += draw_stressed(elevation, subject)
    if subject.is_stressed:
        draw_key(sheet, places.foot)
    return left_out


def _draw_deck(strip: Strip, subject: Subject) -> None:
    """Draw the deck from end to end, and the roads that lead to it."""
    first, last = (strip.mm(float(subject.deck.stations[end]), 0.0) for end in (0, -1))
    strip.sheet.stroke([first, last], BOLD, label="deck")
    for end, edge, side in ((first, strip.window.left, -1), (last, strip.window.right, 1)):
        beyond = max(_ROAD, side * (edge - end[0]) + 4.0)
        strip.sheet.stroke([end, (end[0] + side * beyond, end[1])], HAIR, GREY, label="road")
        strip.sheet.stroke([(end[0], end[1] - 2.0), end], BOLD)
    strip.sheet.board.keep_clear([first, last], BOLD / 2)


def _draw_stems(band: Strip, deck: Strip, subject: Subject, train: Train) -> LeftOut:
    """Draw a stem under each axle on the bridge with its ordinate; return how many ordinates found no room."""
    sheet = band.sheet
    on = np.unique(train.x[train.on])
    ordinates = np.asarray(subject.line.at(np.clip(on, *subject.deck.stations[[0, -1]])))
    for x, ordinate in zip(on, ordinates, strict=True):
        band.plot([x, x], [0.0, ordinate], FIRM, label="stem", zorder=2.5)
        foot, tip = band.mm(float(x), 0.0), band.mm(float(x), float(ordinate))
        sheet.disc(tip, _DOT, INK)
        sheet.board.keep_clear([foot, tip], FIRM / 2)
        sheet.board.keep_clear([tip], _DOT)
        sheet.stroke([deck.mm(float(x), 0.0), max(foot, tip, key=lambda end: end[1])], FINE, GREY, zorder=-4,
                     linestyle=(0, (4, 2)))  # fmt: skip
    left_out = LeftOut()
    for number in np.argsort(-np.abs(ordinates), kind="stable"):
        point = (float(on[number]), float(ordinates[number]))
        left_out[ORDINATE] += not write_ordinate(band, subject.line, point, subject.units, bold=True)
    return +left_out
