"""A bridge file becomes a bridge, a vehicle file a loading: names only, every number is SI already."""

from __future__ import annotations

from pathlib import Path
from typing import TYPE_CHECKING

import numpy as np

from movload.bridge.bridge import Bridge, PermanentLoads, Permitted
from movload.bridge.deck import Deck
from movload.bridge.layout import LaidOut, Layout, lay_out
from movload.bridge.truss import Support, Truss
from movload.errors import InputError, MovloadError
from movload.files.bars import members_of, permits_of
from movload.files.schema.bridge import BridgeFile, DeckTable, LayoutTable, SupportTable
from movload.files.schema.checked import checked
from movload.files.schema.vehicle import VehicleFile
from movload.files.toml import parsed, read_text, without_placeholders
from movload.traffic.loading import Loading
from movload.traffic.vehicle import Vehicle

if TYPE_CHECKING:
    from movload.bridge.deck import PanelPoint
    from movload.units import UnitSystem


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
    data, missing = without_placeholders(parsed(text, place))
    try:
        table, units = checked(BridgeFile, data, missing=missing)
        return _bridge(table, units, missing, place)
    except MovloadError as error:
        raise error.at(place) from None


def _bridge(table: BridgeFile, units: UnitSystem, missing: tuple[str, ...], source: str) -> Bridge:
    """Return the bridge that a checked table describes."""
    laid_out = _laid_out(table.layout)
    joints = {**laid_out.joints, **table.joints}
    supports = [_support(joint, support) for joint, support in table.supports.items()]
    members = members_of(table, laid_out, joints)
    truss = Truss(joints, list(members.values()), supports)
    permanent = table.permanent
    return Bridge(
        table.title,
        truss,
        Deck(_panel_points(table.deck, laid_out), truss_share=table.deck.truss_share),
        permanent=None
        if permanent is None or permanent.deck is None or permanent.truss_share is None
        else PermanentLoads(permanent.deck, permanent.truss_share),
        permits={name: Permitted(*forces) for name, forces in permits_of(table, laid_out).items()},
        impact=table.rating.impact,
        units=units,
        missing=missing,
        sources=(source,),
    )


def _laid_out(layout: LayoutTable | None) -> LaidOut:
    """Return the layout written out; nothing when the file gives joints and bars."""
    if layout is None:
        return LaidOut({}, (), ())
    written = lay_out(
        Layout(layout.form, np.array(layout.panels), np.array(layout.depths), deck=layout.deck, middle=layout.middle)
    )
    bars = {f"{bar.start}-{bar.end}" for bar in written.bars}
    for number, name in enumerate(layout.omit):
        if name not in bars:
            raise InputError(f'"{name}" is not a bar of this layout', place=f"layout.omit[{number}]")
    kept = tuple(bar for bar in written.bars if f"{bar.start}-{bar.end}" not in layout.omit)
    return LaidOut(written.joints, kept, written.panel_points)


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


def vehicle_from(text: str, place: str) -> Loading:
    """Return the loading in a vehicle file's text; ``place`` is what errors call the file."""
    data = parsed(text, place)
    try:
        return _loading(checked(VehicleFile, data)[0])
    except MovloadError as error:
        raise error.at(place) from None


def _loading(table: VehicleFile) -> Loading:
    """Return the loading that a checked table describes."""
    for number, axle in enumerate(table.axles):
        if (number == 0) != (axle.after is None):
            said = (
                "the first axle has no axle before it"
                if number == 0
                else "the distance behind the axle before is missing"
            )
            raise InputError(said, place=f"axles[{number}].after")
    gauges = tuple(axle.gauge for axle in table.axles if axle.gauge is not None)
    if gauges and len(gauges) != len(table.axles):
        bare = next(number for number, axle in enumerate(table.axles) if axle.gauge is None)
        raise InputError("some axles have a gauge and this one has none", place=f"axles[{bare}].gauge")
    vehicle = Vehicle(
        table.title,
        np.array([axle.load for axle in table.axles]),
        [axle.after for axle in table.axles if axle.after is not None],
        gauges=gauges,
        headings=tuple({"+x": 1, "-x": -1}[heading] for heading in table.headings),
    )
    return Loading.of(vehicle, table.kind, source=table.source or "")
