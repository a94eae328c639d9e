"""A peak as a person pictures it: what every bar carries, where the vehicle stands, and the influence line under it."""

from __future__ import annotations

from dataclasses import dataclass
from typing import TYPE_CHECKING, Final

import numpy as np

from movload.errors import InputError
from movload.report.bearings import REACH, draw_bearings, name_beds, over
from movload.report.deck_line import DeckLine, draw_abutments
from movload.report.dimensions import row_height
from movload.report.elevation import (
    DOTS, PLAIN_BAR, Look, accent_joint, bar_spots, draw_bars, draw_joints, heaviest_bar, looks, name_joints, name_spots,
)  # fmt: skip
from movload.report.frame import HEADING, caption_height, draw_caption, draw_heading, fitted
from movload.report.influence_sheet import draw_stations
from movload.report.ink import ACCENT, BOLD, FINE, FIRM, GREY, HAIR, INK, MARGIN, PAPER, THIN
from movload.report.labels import Lettering
from movload.report.line_strip import Band, draw_line, name_line, write_kinks, write_ordinate, write_zeros
from movload.report.sheet import Sheet, Window
from movload.report.train import Train, TrainPlan, draw_train
from movload.report.words import bar_force, effect_value, figures, lengths, origin

if TYPE_CHECKING:
    from matplotlib.figure import Figure

    from movload.arrays import Floats
    from movload.bridge.truss import Truss
    from movload.peaks.peaks import Peak
    from movload.report.sheet import Strip
    from movload.statics.influence import InfluenceLine, InfluenceLines
    from movload.units import UnitSystem

_TALLEST: Final = 85.0  # mm of paper for the truss's own height
_ABOVE: Final = 11.0  # mm over the truss for names
_BELOW: Final = REACH + 5.0  # mm under it for bearings and names
_LINE: Final = 52.0  # mm for the influence line
_ANSWER: Final = 10.0  # mm for the governing value under the heading
_DOT: Final = 0.65  # mm, radius of the mark on an ordinate under an axle
_ANSWER_SIZE: Final = 13.0  # pt
_KEY: Final = (
    ("open", "T tension"), ("solid", "C compression"), ("dotted", "under 0.5 % of the largest"),
)  # fmt: skip


@dataclass(frozen=True, slots=True, eq=False)
class Subject:
    """What one peak figure shows."""

    truss: Truss
    deck: DeckLine
    line: InfluenceLine
    peak: Peak
    forces: Floats
    units: UnitSystem
    title: str
    caption: str
    alone: bool

    @property
    def is_off(self) -> bool:
        """Whether no position of the vehicle gives any."""
        return self.peak.heading == 0

    @property
    def governing(self) -> int:
        """Row of the governing bar; -1 when the row is no bar's."""
        names = [member.name for member in self.truss.members]
        return names.index(self.line.effect.name) if self.line.effect.kind == "axial" else -1

    @property
    def joint(self) -> str:
        """The support or panel point whose row is shown; "" when it is a bar's."""
        return "" if self.line.effect.kind == "axial" else self.line.effect.name.rpartition(" ")[0]

    def answer(self) -> str:
        """Return the row and its peak."""
        name = self.line.effect.name
        return name if self.is_off else f"{name}   {effect_value(self.line.effect, self.peak.value, self.units)}"

    def placed(self) -> str:
        """Say where the vehicle stands."""
        if self.is_off:
            return "no position of this vehicle gives any"
        front = lengths([self.peak.position], self.units, rounded=True)[0]
        toward = "heading right →" if self.peak.heading > 0 else "heading left ←"
        station = self.deck.names[self.peak.station] or "the abutment"
        return f"front axle at x = {front} {self.units.length}, {toward}, axle {self.peak.axle + 1} on {station}"

    def told(self) -> str:
        """Return the caption: what the forces are, then the caller's own words, then x."""
        unit = self.units.force
        alone = " from the vehicle alone, standing as drawn" if self.alone else ""
        bars = "" if not self.forces.any() else f"Bars: force in {unit}{alone}{self._taken()}. "
        words = f"{self.caption.rstrip('.')}. " if self.caption else ""
        line = f"Influence line: {self.line.effect.name} per unit load standing at x"
        under = "" if self.is_off else ", with its ordinates under the axles"
        return f"{bars}{words}{line}{under}. Lengths in {self.units.length}; {origin(self.truss, self.units)}."

    def _taken(self) -> str:
        """Say what of the axle loads the forces hold, when it is not the whole."""
        placement = self.peak.placement
        parts = []
        for word, values in (("share", placement.share), ("impact", placement.impact)):
            if values.size and np.ptp(values) < 1e-12 and values[0] != (word == "share"):
                parts.append(f"{word} {values[0]:.3g}")
        return f"; of each axle {' and '.join(parts)}" if parts else ""


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
    deck = DeckLine.under(truss, lines.stations)
    subject = Subject(truss, deck, lines[key], peak, shown, units, title, caption, forces is None)
    return fitted(lambda width, size: _drawn(subject, width, size))


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


def _drawn(subject: Subject, width: float, size: float) -> tuple[Sheet, int]:
    """Draw one attempt; return the sheet and how many labels found no room on it."""
    truss, deck, row = subject.truss, subject.deck, row_height(size)
    first, last, low, high = deck.extent(truss)
    train = Train.of(subject.peak, deck.stations)
    first, last = train.extent(first, last)
    window = Window.fitting(first, last, width, steepest=_TALLEST / (high - low))
    plan = TrainPlan.of(train, window, subject.units, size)
    foot = caption_height(subject.told(), width, size)
    line = foot + (3 if subject.forces.any() else 2) * row + 3.0
    level = line + _LINE + plan.below
    zero = level + (0.0 if subject.is_off else plan.above) + _BELOW - low * window.scale
    places = Places(foot, line, level, zero, zero + high * window.scale + _ABOVE + over(truss))
    sheet = Sheet(width, places.top + _ANSWER + HEADING, size)
    draw_heading(sheet, subject.title, "")
    draw_caption(sheet, subject.told())
    _write_answer(sheet, subject)
    left_out = _draw_strips(sheet, window, subject, plan=plan, places=places)
    return sheet, left_out


def _write_answer(sheet: Sheet, subject: Subject) -> None:
    """Write the row, its peak and where the vehicle stands under the heading."""
    level = sheet.height - HEADING - 6.0
    end = sheet.write_from(Lettering(subject.answer(), _ANSWER_SIZE, bold=True), MARGIN, level, ACCENT)
    sheet.write_from(sheet.lettering(subject.placed()), end + 6.0, level)


def _draw_strips(sheet: Sheet, window: Window, subject: Subject, *, plan: TrainPlan, places: Places) -> int:
    """Draw truss, train and influence line, then write on them; return how many labels found no room."""
    line, units = subject.line, subject.units
    elevation = sheet.strip(window, places.zero, window.scale)
    band = Band(places.line, _LINE).strip(sheet, window, line)
    draw_line(band, line)
    name_line(band, line, units, subject.truss)
    left_out = 0
    if not subject.is_off:
        deck = sheet.strip(window, places.deck, window.scale)
        _draw_deck(deck, subject)
        left_out += draw_train(deck, plan, units)
        left_out += _draw_stems(band, deck, subject, plan.train)
    on = plan.train.x[plan.train.on]
    left_out += write_kinks(band, line, units, taken=on) + write_zeros(band, line, units)
    left_out += draw_stations(sheet, window, subject.deck, units, (places.line, places.zero))
    unnamed, unwritten = _draw_truss(elevation, subject)
    _draw_key(sheet, subject, places.foot, unwritten)
    return left_out + unnamed + len(unwritten)


def _draw_deck(strip: Strip, subject: Subject) -> None:
    """Draw the deck from end to end, and the roads that lead to it."""
    first, last = (strip.mm(float(subject.deck.stations[end]), 0.0) for end in (0, -1))
    strip.sheet.stroke([first, last], BOLD, label="deck")
    for end, side in ((first, -1), (last, 1)):
        reach = min(end[0] - 14.0, strip.window.left - 4.0) if side < 0 else max(end[0] + 14.0, strip.window.right + 4.0)
        strip.sheet.stroke([end, (reach, end[1])], HAIR, GREY, label="road")
        strip.sheet.stroke([(end[0], end[1] - 2.0), end], BOLD)
    strip.sheet.board.keep_clear([first, last], BOLD / 2)


def _draw_stems(band: Strip, deck: Strip, subject: Subject, train: Train) -> int:
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
    left_out = 0
    for number in np.argsort(-np.abs(ordinates), kind="stable"):
        point = (float(on[number]), float(ordinates[number]))
        left_out += not write_ordinate(band, subject.line, point, subject.units, bold=True)
    return left_out


def _draw_truss(strip: Strip, subject: Subject) -> tuple[int, list[float]]:
    """Draw the truss by its forces with its labels; return how many names and which forces [N] found no room."""
    truss, row = subject.truss, subject.governing
    depth = float(np.ptp(truss.coordinates[:, 1])) * strip.scale
    bars = looks(subject.forces, heaviest_bar(depth), row)
    if not subject.forces.any():
        bars = [Look("plain", 2 * BOLD, ACCENT) if number == row else PLAIN_BAR for number in range(len(bars))]
    draw_bearings(strip, truss)
    draw_bars(strip, truss, bars)
    draw_joints(strip, truss, subject.deck.joints)
    draw_abutments(strip, subject.deck)
    name_beds(strip, truss)
    unmarked = 0 if _mark_subject(strip, subject, bars) else 1
    unnamed = name_joints(strip, truss, besides=frozenset([subject.joint]))
    return unmarked + unnamed, _write_forces(strip, subject, bars)


def _mark_subject(strip: Strip, subject: Subject, bars: list[Look]) -> bool:
    """Mark the governing bar, support or panel point with its name and value in a frame; say whether it had room."""
    truss, sheet, row = subject.truss, strip.sheet, subject.governing
    name = subject.joint or subject.line.effect.name
    if row < 0:
        accent_joint(strip, truss, name)
        lettering = sheet.lettering(name, bold=True, pad=0.7)
        return sheet.write(lettering, name_spots(strip, truss, name, lettering), ACCENT)
    force = bar_force(float(subject.forces[row]), subject.units, _decimals(subject))
    texts = [f"{name}  {force}", force, name] if subject.forces.any() else [name]
    length = float(truss.lengths[row]) * strip.scale
    for text in texts:
        lettering = sheet.lettering(text, bold=True, pad=0.7)
        fits = text != texts[0] or lettering.width < 0.9 * length  # a longer frame would name its neighbours too
        if fits and sheet.write(lettering, bar_spots(strip, truss, row, lettering, bars[row].weight), ACCENT):
            return True
    return False


def _decimals(subject: Subject) -> int:
    """Return how many decimals bar forces are written with: three figures for the largest."""
    return figures(subject.units.shown(float(np.abs(subject.forces).max(initial=0.0)), "force"))


def _write_forces(strip: Strip, subject: Subject, bars: list[Look]) -> list[float]:
    """Write each bar's force along it, the largest first; return those [N] that found no room."""
    unwritten = []
    decimals = _decimals(subject)
    for row in np.argsort(-np.abs(subject.forces), kind="stable"):
        force = float(subject.forces[row])
        if row == subject.governing or bars[row].style not in {"open", "solid"}:
            continue
        lettering = strip.sheet.lettering(bar_force(force, subject.units, decimals))
        if not strip.sheet.write(lettering, bar_spots(strip, subject.truss, row, lettering, bars[row].weight)):
            unwritten.append(force)
    return unwritten


def _draw_key(sheet: Sheet, subject: Subject, foot: float, unwritten: list[float]) -> None:
    """Draw what the bars' strokes mean over the caption, and say which forces are not written."""
    level, right = foot + 0.55 * row_height(sheet.size), MARGIN
    if subject.forces.any():
        for style, words in _KEY:
            ends = [(right, level), (right + 12.0, level)]
            weight = THIN if style == "dotted" else 1.6
            dots = {"linestyle": DOTS} if style == "dotted" else {}
            sheet.stroke(ends, weight, **dots)
            if style == "open":
                sheet.stroke(ends, weight - 2 * THIN, PAPER)
            right = sheet.write_from(sheet.lettering(words), right + 14.0, level) + 8.0
    if unwritten:
        largest = bar_force(max(unwritten, key=abs), subject.units, _decimals(subject))
        words = f"{len(unwritten)} forces, up to {largest}, not written for want of room"
        sheet.write_from(sheet.lettering(words), right, level, GREY)
