"""The truss by what its bars carry: weight by force, open for tension, solid for compression, forces written."""

from __future__ import annotations

from typing import TYPE_CHECKING, Any, Final

import numpy as np

from movload.report.drawing.bearings import draw_bearings, name_beds
from movload.report.drawing.deck_line import draw_abutments
from movload.report.drawing.dimensions import row_height
from movload.report.drawing.elevation import (
    DOTS,
    PLAIN_BAR,
    Look,
    bar_spots,
    draw_bars,
    draw_joints,
    heaviest_bar,
    looks,
    mark_joint,
    name_joints,
)
from movload.report.drawing.ink import ACCENT, BOLD, FRAME, MARGIN, PAPER, THIN
from movload.report.drawing.left_out import FRAMED_NAME, JOINT_NAME, LeftOut, forces_left_out
from movload.report.drawing.words import bar_force

if TYPE_CHECKING:
    from movload.report.drawing.peak_subject import Subject
    from movload.report.drawing.sheet import Sheet, Strip

_KEY: Final = (("open", "T tension"), ("solid", "C compression"), ("dotted", "under 0.5 % of the largest"))


def draw_stressed(strip: Strip, subject: Subject) -> LeftOut:
    """Draw the truss by its forces with its labels; return which of them found no room."""
    truss, row = subject.truss, subject.governing
    depth = float(np.ptp(truss.coordinates[:, 1])) * strip.scale
    bars = looks(subject.forces, heaviest_bar(depth), row)
    if not subject.is_stressed:
        bars = [Look("plain", 2 * BOLD, ACCENT) if number == row else PLAIN_BAR for number in range(len(bars))]
    draw_bearings(strip, truss)
    draw_bars(strip, truss, bars)
    draw_joints(strip, truss, subject.deck.joints)
    draw_abutments(strip, subject.deck)
    left_out = name_beds(strip, truss)
    left_out[FRAMED_NAME] = 0 if _mark_subject(strip, subject, bars) else 1
    left_out[JOINT_NAME] = name_joints(strip, truss, besides=frozenset([subject.joint]))
    return left_out + _write_forces(strip, subject, bars)


def _mark_subject(strip: Strip, subject: Subject, bars: list[Look]) -> bool:
    """Mark the governing bar, support or panel point with its name and value in a frame; say whether it had room."""
    truss, sheet, row = subject.truss, strip.sheet, subject.governing
    name = subject.joint or subject.line.effect.name
    if row < 0:
        return mark_joint(strip, truss, name)
    force = bar_force(float(subject.forces[row]), subject.units, subject.decimals)
    texts = [f"{name}  {force}", force, name] if subject.is_stressed else [name]
    length = float(truss.lengths[row]) * strip.scale
    for text in texts:
        lettering = sheet.lettering(text, bold=True, pad=FRAME)
        fits = text != texts[0] or lettering.width < 0.9 * length  # a longer frame would name its neighbours too
        if fits and sheet.write(lettering, bar_spots(strip, truss, row, lettering, weight=bars[row].weight), ACCENT):
            return True
    return False


def _write_forces(strip: Strip, subject: Subject, bars: list[Look]) -> LeftOut:
    """Write each bar's force along it, the largest first; return how many found no room."""
    unwritten = []
    for row in np.argsort(-np.abs(subject.forces), kind="stable"):
        force = float(subject.forces[row])
        if row == subject.governing or bars[row].style not in {"open", "solid"}:
            continue
        lettering = strip.sheet.lettering(bar_force(force, subject.units, subject.decimals))
        if not strip.sheet.write(lettering, bar_spots(strip, subject.truss, row, lettering, weight=bars[row].weight)):
            unwritten.append(lettering.text)
    return LeftOut({forces_left_out(unwritten[0]): len(unwritten)} if unwritten else {})


def draw_key(sheet: Sheet, foot: float) -> None:
    """Draw what the bars' strokes mean over the caption."""
    level, right = foot + 0.55 * row_height(sheet.size), MARGIN
    for style, words in _KEY:
        ends = [(right, level), (right + 12.0, level)]
        weight = THIN if style == "dotted" else 1.6
        dots: dict[str, Any] = {"linestyle": DOTS} if style == "dotted" else {}
        sheet.stroke(ends, weight, **dots)
        if style == "open":
            sheet.stroke(ends, weight - 2 * THIN, PAPER)
        right = sheet.write_from(sheet.lettering(words), right + 14.0, level) + 8.0
