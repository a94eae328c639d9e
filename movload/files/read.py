"""A bridge file becomes a bridge: names only, every number is SI already. `vehicle_from` is in ``files/vehicles``."""

from __future__ import annotations

import re
from contextlib import contextmanager
from pathlib import Path
from typing import TYPE_CHECKING

import numpy as np

from movload.bridge.bridge import Bridge
from movload.bridge.layout import LaidOut, Layout, lay_out
from movload.bridge.truss import Support, Truss
from movload.errors import InputError, MovloadError, UnknownNameError, nearest_name
from movload.files.bars import members_of, strengths_of
from movload.files.decks import deck_of, floor_of, permanent_of
from movload.files.makes import made_of
from movload.files.schema.bridge import BridgeFile, DeckTable, LayoutTable, SupportTable
from movload.files.schema.checked import checked
from movload.files.sections import catalogue_of, require_used
from movload.files.toml import parsed, read_text, without_placeholders
from movload.files.vehicles import vehicle_from

if TYPE_CHECKING:
    from collections.abc import Callable, Iterator

    from movload.bridge.deck import Deck, PanelPoint
    from movload.units import UnitSystem

__all__ = ["bridge_from", "read_bridge", "vehicle_from"]


def read_bridge(path: str | Path) -> Bridge:
    """Return the bridge in a file.

    Raises
    ------
    InputError
        The file cannot be read, or something in it is wrong: file, place, rule, value and nearest name are given.
    """
    path = Path(path)
    return bridge_from(read_text(path), str(path))


def bridge_from(text: str, place: str) -> Bridge:
    """Return the bridge in a file's text; ``place`` is what errors call the file."""
    try:
        data, missing = without_placeholders(parsed(text))
        table, units = checked(BridgeFile, data)
        return _bridge(table, units, missing, place)
    except MovloadError as error:
        raise error.at(place) from None


def _bridge(table: BridgeFile, units: UnitSystem, missing: tuple[str, ...], source: str) -> Bridge:
    """Return the bridge that a checked table describes."""
    laid_out = _laid_out(table.layout)
    joints = {**laid_out.joints, **table.joints}
    supports = [_support(joint, support) for joint, support in table.supports.items()]
    catalogue = catalogue_of(table, missing)
    members = members_of(table, laid_out, joints, catalogue)
    truss = Truss(joints, list(members.values()), supports)
    deck = deck_of(table, _panel_points(table.deck, laid_out), missing)
    rating = table.rating
    with _placed(lambda place: _deck_place(place, deck, table.deck)):
        bridge = Bridge(
            table.title,
            truss,
            deck,
            permanent=permanent_of(table, deck, missing),
            strengths=strengths_of(table, laid_out, catalogue),
            made=made_of(table, laid_out, truss, catalogue),
            floor=floor_of(table.floor, catalogue),
            impact=None if isinstance(rating.impact, str) else rating.impact,
            impact_rule=rating.impact if isinstance(rating.impact, str) else "",
            surface=rating.surface or "",
            traffic=rating.traffic,
            deflection_limit=rating.deflection,
            units=units,
            missing=missing,
            sources=(source,),
        )
    require_used(table, missing)
    return bridge


@contextmanager
def _placed(written: Callable[[str], str]) -> Iterator[None]:
    """Say where in the file it is wrong, when the domain counts otherwise than the file does."""
    try:
        yield
    except MovloadError as error:
        raise type(error)(error.rule, place=written(error.place), nearest=error.nearest) from None


def _deck_place(place: str, deck: Deck, table: DeckTable) -> str:
    """Return where the file has a panel point: abutments are keys of their own there."""
    counted = re.fullmatch(r"deck\.panel_points\[(\d+)\]", place)
    if not counted:
        return place
    number = int(counted[1])
    if not isinstance(deck.panel_points[number], str):
        return "deck.left_abutment" if number == 0 else "deck.right_abutment"
    return f"deck.panel_points[{number - (table.left_abutment is not None)}]"


def _laid_out(layout: LayoutTable | None) -> LaidOut:
    """Return the layout written out; nothing when the file gives joints and bars."""
    if layout is None:
        return LaidOut({}, (), ())
    written = lay_out(
        Layout(layout.form, np.array(layout.panels), np.array(layout.depths), deck=layout.deck, middle=layout.middle)
    )
    by_joints = {frozenset((bar.start, bar.end)): bar for bar in written.bars}
    for number, name in enumerate(layout.omit):
        if by_joints.pop(frozenset(name.split("-")), None) is None:
            bars = [f"{bar.start}-{bar.end}" for bar in by_joints.values()]
            raise UnknownNameError(
                f'"{name}" is not a bar of this layout, or omitted twice',
                place=f"layout.omit[{number}]",
                nearest=nearest_name(name, bars),
            )
    return LaidOut(written.joints, tuple(by_joints.values()), written.panel_points)


def _support(joint: str, table: SupportTable | str) -> Support:
    """Return one bearing."""
    if isinstance(table, str):
        return Support(joint)
    return Support(
        joint,
        table.slides,
        settlement=table.settlement,
        movement=table.movement,
        normal_stiffness=table.normal_stiffness,
        slide_stiffness=table.slide_stiffness,
    )


def _panel_points(deck: DeckTable, laid_out: LaidOut) -> tuple[PanelPoint, ...]:
    """Return the panel points, abutments first and last where the file has them."""
    joints = deck.panel_points if deck.panel_points is not None else list(laid_out.panel_points)
    if not joints:
        raise InputError("the joints of the loaded chord are not said", place="deck.panel_points")
    left = [] if deck.left_abutment is None else [deck.left_abutment]
    right = [] if deck.right_abutment is None else [deck.right_abutment]
    return (*left, *joints, *right)
