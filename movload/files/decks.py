"""Deck, floor and permanent loads of a bridge file: where things lie across, and what they weigh."""

from __future__ import annotations

from typing import TYPE_CHECKING

from movload.bridge.deck import KINDS, Deck
from movload.bridge.floor import Floor, Floorbeams, Planks, Stringers
from movload.bridge.permanent import Item, PermanentItems
from movload.bridge.roadway import BETWEEN, Roadway
from movload.errors import InputError, MissingDataError, MovloadError, UnknownNameError, nearest_name
from movload.files.bars import strength_of
from movload.files.makes import made_of_part
from movload.files.toml import written_key

if TYPE_CHECKING:
    from movload.bridge.deck import PanelPoint
    from movload.files.schema.bridge import (
        BridgeFile,
        DeckTable,
        FloorbeamsTable,
        FloorTable,
        ItemTable,
        PermanentTable,
        PlanksTable,
        StringersTable,
    )
    from movload.files.sections import Catalogue

_WAITING = {"deck.truss_spacing", "deck.kerbs", "deck.clearance"}
_WEIGHTS = ("line", "per_area", "thickness", "points")


def deck_of(table: BridgeFile, panel_points: tuple[PanelPoint, ...], missing: tuple[str, ...]) -> Deck:
    """Return the deck with its kerbs; without them while any of what places them still holds "?"."""
    deck = table.deck
    by_layout = table.layout.deck if table.layout else ""
    if deck.kind in KINDS and by_layout and deck.kind != by_layout:
        raise InputError(f'"{deck.kind}" contradicts layout.deck = "{by_layout}"', place="deck.kind")
    return Deck(
        panel_points,
        truss_share=deck.truss_share,
        truss_spacing=deck.truss_spacing,
        roadway=None if _WAITING & set(missing) else _roadway(deck),
        kind=deck.kind or by_layout,
        bears_on=deck.bears_on or "floorbeams",
        chord_bending=deck.chord_bending or "",
    )


def _roadway(deck: DeckTable) -> Roadway | None:
    """Return the kerbs, with all that must be said beside them."""
    if deck.kerbs is None:
        for word in ("clearance", "between", "keeps"):
            if getattr(deck, word) is not None:
                raise MissingDataError(f"is needed beside deck.{word}", place="deck.kerbs")
        return None
    if deck.clearance is None:
        raise MissingDataError(
            "is needed beside deck.kerbs: the least distance from a kerb to the outermost wheel's centre",
            place="deck.clearance",
        )
    right, left = deck.kerbs
    between = BETWEEN if deck.between is None else deck.between
    return Roadway(right, left, clearance=deck.clearance, between=between, keeps=deck.keeps or "right")


def floor_of(table: FloorTable, catalogue: Catalogue) -> Floor:
    """Return stringers, floorbeams and planks, as far as they were typed."""
    return Floor(
        None if table.stringers is None else _stringers(table.stringers, "floor.stringers", catalogue),
        None if table.floorbeams is None else _floorbeams(table.floorbeams, "floor.floorbeams", catalogue),
        None if table.planks is None else _planks(table.planks, "floor.planks", catalogue),
    )


def _stringers(table: StringersTable, place: str, catalogue: Catalogue) -> Stringers:
    """Return the stringers; those without a weight weigh what their section does."""
    return Stringers(
        tuple(table.z),
        fraction=table.fraction,
        weight=catalogue.weight(table) if table.weight is None else table.weight,
        strength=strength_of(table, place, catalogue),
        made=made_of_part(table, place, catalogue),
    )


def _floorbeams(table: FloorbeamsTable, place: str, catalogue: Catalogue) -> Floorbeams:
    """Return the floorbeams; those without a weight weigh what their section does."""
    return Floorbeams(
        table.brackets or (0.0, 0.0),
        weight=catalogue.weight(table) if table.weight is None else table.weight,
        strength=strength_of(table, place, catalogue),
        made=made_of_part(table, place, catalogue),
    )


def _planks(table: PlanksTable, place: str, catalogue: Catalogue) -> Planks:
    """Return the planks."""
    return Planks(
        table.contact,
        table.sharing,
        strength=strength_of(table, place, catalogue),
        made=made_of_part(table, place, catalogue),
    )


def permanent_of(table: BridgeFile, deck: Deck, missing: tuple[str, ...]) -> PermanentItems | None:
    """Return what stands on the bridge for good; None while nobody has typed it, or where across it lies."""
    permanent = table.permanent
    if permanent is None or _WAITING & set(missing):
        return None
    across = deck.truss_spacing is not None
    if across and permanent.truss_share is not None:
        raise InputError("the share is given twice: typed, and by deck.truss_spacing", place="permanent.truss_share")
    if permanent.items and not across:
        raise MissingDataError("is needed to take permanent.items to the trusses", place="deck.truss_spacing")
    if not permanent.items and (permanent.deck is None or not (across or permanent.truss_share is not None)):
        return None
    items = [_item(item, deck, f"permanent.items[{number}]") for number, item in enumerate(permanent.items)]
    if permanent.deck is not None:
        items.insert(0, _whole_deck(permanent, deck))
    try:
        return PermanentItems(tuple(items), detail_allowance=permanent.detail_allowance or 0.0)
    except MovloadError as error:
        raise _within("permanent", error) from None


def _whole_deck(permanent: PermanentTable, deck: Deck) -> Item:
    """Return the deck's weight per metre as one item."""
    weight = permanent.deck or 0.0
    try:
        if deck.truss_spacing is None:
            return Item("deck", "components", line=weight, share=permanent.truss_share)
        low, high = _full_width(deck, "permanent.deck")
        return Item("deck", "components", line=weight, low=low, high=high)
    except MovloadError as error:
        own = error.place if error.place in {"truss_share", "deck.kerbs"} else "deck"
        place = own if own == "deck.kerbs" else f"permanent.{own}"
        raise type(error)(error.rule, place=place, nearest=error.nearest) from None


def _item(table: ItemTable, deck: Deck, place: str) -> Item:
    """Return one item, its weight written in exactly one way."""
    said = [word for word in _WEIGHTS if getattr(table, word) is not None]
    if len(said) != 1:
        told = f"got {' and '.join(said)}" if said else "got none"
        raise InputError(f"its weight is one of {', '.join(_WEIGHTS)}; {told}", place=place)
    if table.density is not None and table.thickness is None:
        raise InputError(f"goes with thickness; the weight is said by {said[0]}", place=f"{place}.density")
    low, high = _lies(table, deck, place)
    try:
        if table.per_area is not None:
            return Item.per_area(table.title, table.kind, table.per_area, (low, high))
        if table.thickness is not None:
            if table.density is None:
                raise MissingDataError("is needed beside thickness", place="density")
            return Item.layer(
                table.title, table.kind, thickness=table.thickness, density=table.density, across=(low, high)
            )
        points = _points(table, deck)
        return Item(table.title, table.kind, line=table.line or 0.0, points=points, low=low, high=high)
    except MovloadError as error:
        raise _within(place, error) from None


def _points(table: ItemTable, deck: Deck) -> tuple[tuple[str, float], ...]:
    """Return an item's weights at panel points [N]."""
    if table.points is None:
        return ()
    if not table.points:
        raise InputError("no panel point is named", place="points")
    known = [point for point in deck.panel_points if isinstance(point, str)]
    for name in table.points:
        if name not in known:
            near = nearest_name(name, known)
            raise UnknownNameError(f'"{name}" is no panel point', place=f"points.{written_key(name)}", nearest=near)
    return tuple(table.points.items())


def _within(place: str, error: MovloadError) -> MovloadError:
    """Return an error with its key put within the table at a place of the file."""
    return type(error)(error.rule, place=f"{place}.{error.place}", nearest=error.nearest)


def _lies(table: ItemTable, deck: Deck, place: str) -> tuple[float, float]:
    """Return the z between which an item lies [m]."""
    if not isinstance(table.across, str):
        return table.across
    right, left = _full_width(deck, f"{place}.across")
    return {"full width": (right, left), "left": (left, left), "right": (right, right)}[table.across]


def _full_width(deck: Deck, place: str) -> tuple[float, float]:
    """Return the kerbs' z [m]."""
    if deck.roadway is None:
        raise MissingDataError(f"is needed to know how wide {place} lies", place="deck.kerbs")
    return deck.roadway.right, deck.roadway.left
