"""Tables of sections and materials to cross-sections and materials, by the names that parts call them."""

from __future__ import annotations

from dataclasses import dataclass
from typing import TYPE_CHECKING, Final

from movload.bridge.material import Material, Timber
from movload.bridge.section import Section
from movload.bridge.section_holes import Hole, taken_out
from movload.bridge.section_piece import Piece
from movload.bridge.section_typed import AreaAndRadii
from movload.errors import InputError, MissingDataError, UnknownNameError, nearest_name
from movload.files.metals import read_metal
from movload.files.places import in_file, require_one_of, waits
from movload.files.schema.sections import PLACED, SHAPES, WAYS, sizes_of
from movload.files.toml import short, written_key
from movload.units import GRAVITY

if TYPE_CHECKING:
    from collections.abc import Iterable, Iterator, Mapping

    from movload.bridge.loss import CrossSection
    from movload.files.schema.bridge import BridgeFile
    from movload.files.schema.makes import MakeKeys, MaterialTable
    from movload.files.schema.sections import HoleTable, SectionTable, Sizes

_METAL: Final = ("fy", "fu", "modulus", "density", "source")
_TIMBER: Final = ("product", "stresses", "modulus", "density", "source")
_OF_TIMBER: Final = ("product", "stresses", "factors", "durations", "treated")
_MODULI: Final = {"metal": (5e10, 2.5e11), "timber": (1e9, 3e10)}  # Pa; no metal or timber of a bridge is beyond


@dataclass(frozen=True, slots=True)
class Catalogue:
    """What a file knows of sections and materials.

    Attributes
    ----------
    sections, materials
        By name; what still waits for a "?" is in neither.
    areas
        Gross area as new of every section [m2].
    tables
        Every material as typed.
    missing
        Places of the file that still hold a "?".
    """

    sections: Mapping[str, CrossSection]
    materials: Mapping[str, Material]
    areas: Mapping[str, float]
    tables: Mapping[str, MaterialTable]
    missing: tuple[str, ...] = ()

    def waits(self, place: str) -> bool:
        """Whether anything at a place, or within it, still holds a "?"."""
        return waits(self.missing, place)

    def elastic(self, material: str) -> tuple[float, float | None]:
        """Return a material's modulus [Pa] and density [kg/m3]; None for a density that waits."""
        known = self.materials.get(material)
        if known is not None:
            return known.modulus, known.density
        table = self.tables[material]
        return table.modulus or 0.0, table.density  # _material() has refused a table without a modulus

    def weight(self, table: MakeKeys) -> float:
        """Return what a part weighs per metre by its section as new [N/m]; 0 while either is not said."""
        if table.section is None or table.material is None:
            return 0.0
        return self.areas[table.section] * (self.elastic(table.material)[1] or 0.0) * GRAVITY

    def is_timber(self, table: MakeKeys) -> bool:
        """Whether a part is of timber by its material."""
        return table.material is not None and self.tables[table.material].kind == "timber"


def catalogue_of(table: BridgeFile, missing: tuple[str, ...]) -> Catalogue:
    """Return a file's sections and materials.

    Raises
    ------
    InputError
        A section or a material that cannot be.
    UnknownNameError
        A part calls one that is not there.
    MissingDataError
        What a section or a material cannot do without.
    """
    _require_known(table)
    sections: dict[str, CrossSection] = {}
    areas: dict[str, float] = {}
    for name, one in table.sections.items():
        place = f"sections.{written_key(name)}"
        if one.area is not None and waits(missing, place):
            areas[name] = one.area
            continue
        section = _section(name, one, place)
        areas[name] = section.properties.area
        if not waits(missing, place):
            sections[name] = section
    return Catalogue(sections, _materials(table, missing), areas, table.materials, missing)


def require_used(table: BridgeFile, missing: tuple[str, ...]) -> None:
    """Refuse a section or a material that no part uses: what was measured for a part is not to be forgotten.

    Raises
    ------
    InputError
        One of them; while the name that a part calls still holds a "?", any of them may be meant.
    """
    for word, named in (("section", table.sections), ("material", table.materials)):
        called = {getattr(part, word) for _, part in _parts(table)}
        waits = any(place.endswith(f".{word}") for place in missing)
        for name in () if waits else named:
            if name not in called:
                raise InputError("is used by no part", place=f"{word}s.{written_key(name)}")


def _require_known(table: BridgeFile) -> None:
    """Refuse a name of a section or a material that is not there."""
    known: tuple[tuple[str, Mapping[str, object]], ...] = (("section", table.sections), ("material", table.materials))
    for word, named in known:
        for place, part in _parts(table):
            name = getattr(part, word)
            if name is not None and name not in named:
                said = f'"{short(name)}" is not in [{word}s]' + ("" if named else ", which is not there")
                raise UnknownNameError(said, place=f"{place}.{word}", nearest=nearest_name(name, named))


def _parts(table: BridgeFile) -> Iterator[tuple[str, MakeKeys]]:
    """Return every part that may call a section and a material, with its place."""
    for title, group in table.members.items():
        yield f"members.{written_key(title)}", group
    for word in ("stringers", "floorbeams", "planks"):
        part = getattr(table.floor, word)
        if part is not None:
            yield f"floor.{word}", part


def _section(name: str, table: SectionTable, place: str) -> CrossSection:
    """Return one section."""
    if table.area is not None:
        typed = _said(table, WAYS["area"])
        for key in ("r_x", "r_y"):
            if key not in typed:
                raise MissingDataError("is missing: area, r_x and r_y go together", place=f"{place}.{key}")
        with in_file(place, table, name):
            return AreaAndRadii(name, table.area, **typed)  # type: ignore[arg-type]  # each key is one of its own
    if table.pieces is None:
        pieces = [_piece(table.shape or "", table, place)]
    else:
        pieces = [_piece(one.shape, one, f"{place}.pieces[{number}]") for number, one in enumerate(table.pieces)]
    typed = _said(table, [key for key in WAYS["pieces"] if key != "holes"])
    with in_file(place, table, name):
        bare = Section(name, tuple(pieces), **typed)  # type: ignore[arg-type]  # each key is one of its own
    holes = [_hole(hole, bare, f"{place}.holes[{number}]") for number, hole in enumerate(table.holes or ())]
    with in_file(place, table, name):
        return Section(name, bare.pieces, holes=tuple(holes), **typed)  # type: ignore[arg-type]  # as above


def _piece(kind: str, table: Sizes, place: str) -> Piece:
    """Return a shape in its place."""
    with in_file(place, table, kind, table.name or kind):
        shape = SHAPES[kind](**_said(table, sizes_of(kind)))
        return Piece(shape, **_said(table, PLACED))  # type: ignore[arg-type]  # each key is one of its own


def _hole(table: HoleTable, section: Section, place: str) -> Hole:
    """Return holes that fit their part."""
    with in_file(place, table, "hole"):
        hole = Hole(**_said(table, type(table).model_fields))  # type: ignore[arg-type]  # each key is one of its own
        taken_out(hole, section.pieces)
    return hole


def _materials(table: BridgeFile, missing: tuple[str, ...]) -> dict[str, Material]:
    """Return the materials that do not wait for a "?"."""
    found: dict[str, Material] = {}
    for name, one in table.materials.items():
        place = f"materials.{written_key(name)}"
        with in_file(place, one, f'material "{name}"'):
            material = _material(name, one, waiting=waits(missing, place))
        if material is not None:
            found[name] = material
    return found


def _material(name: str, table: MaterialTable, *, waiting: bool) -> Material | None:
    """Return one material; None while it waits."""
    timber = table.kind == "timber"
    if not timber:
        for key in _OF_TIMBER:
            if getattr(table, key) is not None:
                raise InputError(f"is a timber's, and {table.kind} is none", place=key)
    if table.built is not None:
        for key in (*_METAL, *_OF_TIMBER):
            if getattr(table, key) is not None:
                raise InputError("is given twice: typed, and by the year built", place=key)
        with in_file("built", table, "year", table.kind):
            return read_metal(table.kind, table.built)
    needed = [key for key in (_TIMBER if timber else _METAL) if getattr(table, key) is None]
    if table.kind == "cast iron" and "fu" in needed:
        needed.remove("fu")
    if needed and ("modulus" in needed or not waiting):
        key = "modulus" if waiting else needed[0]
        one_way = "product, stresses, modulus, density and source" if timber else ", ".join(_METAL)
        other = "" if timber or table.kind == "cast iron" else ", or the year built alone"
        raise MissingDataError(f"is missing: {table.kind} needs {one_way}{other}", place=key)
    return None if waiting else _typed(name, table)


def _typed(name: str, table: MaterialTable) -> Material:
    """Return a material by its typed values."""
    timber = None
    if table.durations:
        from movload.strength.nds import DURATIONS

        for number, duration in enumerate(table.durations):
            require_one_of(duration, DURATIONS, f"durations[{number}]")
    typed = _said(table, ("modulus", "density", "source", "fy", "fu"))
    _require_modulus(table)
    if table.stresses is not None:
        factors = table.factors.model_dump(exclude_none=True) if table.factors is not None else {}
        timber = Timber(table.product or "", table.stresses.model_dump(exclude_none=True), factors)
        _require_factors(timber)
    return Material(name, table.kind, timber=timber, **typed)  # type: ignore[arg-type]  # each key is one of its own


def _require_modulus(table: MaterialTable) -> None:
    """Refuse a modulus that no such material has: a wrong unit was meant."""
    (low, high), modulus = _MODULI["timber" if table.kind == "timber" else "metal"], table.modulus or 0.0
    if not low <= modulus <= high:
        said = f'of {table.kind} a modulus (say its unit: "200 GPa") of {low:g} to {high:g} Pa is asked for'
        raise InputError(f"{said}, got {modulus:g} Pa", place="modulus")


def _require_factors(timber: Timber) -> None:
    """Refuse a factor that the standard does not put there, or that none of its own is as great as."""
    from movload.strength.nds import FACTORS, GREATEST

    for use, factors in timber.factors.items():
        for symbol, factor in factors.items():
            place = f"factors.{use}.{symbol}"
            require_one_of(symbol, FACTORS[timber.product][use], place)
            if factor > GREATEST:
                raise InputError(f"no factor is above {GREATEST:g}, got {factor:g}", place=place)


def _said(table: object, keys: Iterable[str]) -> dict[str, object]:
    """Return the keys of a table that were typed."""
    both = {key: getattr(table, key) for key in keys}
    return {key: value for key, value in both.items() if value is not None}
