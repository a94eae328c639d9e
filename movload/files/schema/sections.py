"""What a bridge file may hold about cross-sections, materials, and how parts are made of them, key by key."""

from __future__ import annotations

from dataclasses import MISSING, fields
from typing import Annotated, Final, Literal

from pydantic import BeforeValidator, Field, ValidationInfo, model_validator

from movload.bridge.section_bars import Eyebar, Flat, RoundBar, SawnTimber, ThreadedRod
from movload.bridge.section_shape import Shape
from movload.bridge.shapes import Angle, Channel, ISection, Plate, RectangularTube, RoundTube
from movload.errors import InputError, MissingDataError, UnknownNameError, nearest_name
from movload.files.schema.quantities import (
    Area,
    Checked,
    Fraction,
    Read,
    Section,
    SectionModulus,
    Table,
    Text,
    TorsionConstant,
    WarpingConstant,
    shown,
)
from movload.files.toml import PLACEHOLDER, short

SHAPES: Final[dict[str, type[Shape]]] = {
    shape.kind: shape
    for shape in (
        Angle, Channel, ISection, RectangularTube, RoundTube, Plate, Flat, Eyebar, RoundBar, ThreadedRod, SawnTimber,
    )
}  # fmt: skip
_SMALLEST, _LARGEST = 1e-4, 20.0  # m; no part of a cross-section is smaller or larger: a wrong unit is caught
_MOST_HOLES: Final = 99


def between(low: float, high: float, unit: str, words: str) -> Checked:
    """Return the validator of a value that must lie within what there is; beyond it a wrong unit was meant."""

    def check(value: float) -> float:
        if not low <= value <= high:
            raise InputError(f"{words} of {low:g} to {high:g} {unit} is asked for, got {value:g} {unit}")
        return value

    return Checked(check)


def sized(power: int) -> Checked:
    """Return the validator of a size, or of a power of it: the domain refuses what is not above 0, this the absurd."""

    def check(value: float) -> float:
        if not _SMALLEST**power <= abs(value) <= _LARGEST**power and value:
            unit = f"m{power}" if power > 1 else "m"
            said = f"{_SMALLEST**power:g} to {_LARGEST**power:g} {unit} is asked for"
            raise InputError(f"beyond any cross-section's, {said}, got {value:g} {unit}")
        return value

    return Checked(check)


def _count(value: object, info: ValidationInfo) -> int:  # noqa: ARG001  # no unit is asked
    """Return a number of things."""
    if isinstance(value, bool) or not isinstance(value, int) or not 0 <= value <= _MOST_HOLES:
        raise InputError(f"a whole number up to {_MOST_HOLES} is asked for, got {shown(value)}")
    return value


Size = Annotated[Section, sized(1)]
Offset = Annotated[Section, between(-_LARGEST, _LARGEST, "m", "a place or a distance")]
Counted = Annotated[int, Read(_count, {"type": "integer", "minimum": 0})]
Modulus = Annotated[SectionModulus, sized(3)]
Torsion = Annotated[TorsionConstant, sized(4)]
Warping = Annotated[WarpingConstant, sized(6)]
Edges = Annotated[Literal[1, 2], BeforeValidator(_count)]  # a literal alone takes true for 1
Flag = Annotated[bool, Field(strict=True)]


class Sizes(Table):
    """The sizes of every shape, and where it stands; each shape has some of them."""

    depth: Size | None = None
    width: Size | None = None
    web: Size | None = Field(None, description="thickness")
    flange: Size | None = Field(None, description="thickness")
    bottom_width: Size | None = None
    bottom_flange: Size | None = Field(None, description="thickness")
    first_leg: Size | None = None
    second_leg: Size | None = None
    thickness: Size | None = None
    wall: Size | None = Field(None, description="thickness")
    diameter: Size | None = None
    root: Size | None = Field(None, description="diameter at the root of a thread")
    head_width: Size | None = None
    pin_hole: Size | None = None
    head_thickness: Size | None = None
    edges: Edges | None = Field(None, description="of a plate: how many of its long edges are held")
    clear: Size | None = Field(None, description="of a plate: width between lines of fasteners")
    x: Offset = Field(0.0, description="where its reference point stands, to the right")
    y: Offset = Field(0.0, description="where its reference point stands, upward")
    turn: Annotated[float, Field(strict=True)] = Field(0.0, description="degrees anticlockwise, after mirroring")
    mirror: Flag = Field(False, description="whether left and right are exchanged first")
    name: Text | None = None


class PieceTable(Sizes):
    """A shape in its place."""

    shape: Text = Field(description=", ".join(SHAPES))

    @model_validator(mode="before")
    @classmethod
    def _sizes_of_its_shape(cls, data: object) -> object:
        if isinstance(data, dict) and "shape" in data:
            _require_sizes(data, PLACED)
        return data


class HoleTable(Table):
    """Holes in line across a part, all alike."""

    diameter: Size
    part: Text | None = None
    piece: Text | None = None
    number: Counted = 1
    punched: Flag = Field(False, description="punched full size; else drilled or reamed")
    stagger: Offset = Field(0.0, description="pitch along the member between neighbours of a zigzag")
    gauge: Offset = Field(0.0, description="across the member between neighbours")
    thickness: Size | None = Field(None, description="what they go through; the part's own when left out")


class SectionTable(Sizes):
    """A cross-section by its pieces, by one shape, or by area and radii."""

    shape: Text | None = Field(None, description="of the only piece: " + ", ".join(SHAPES))
    pieces: list[PieceTable] | None = None
    holes: list[HoleTable] | None = Field(None, description="of the cross-section through the connection")
    sharing: Fraction | None = Field(None, description="worst bar over mean, 1 or more; it divides the strength")
    shear_lag: Fraction | None = Field(None, description="U: the part of the net section that works")
    torsion: Torsion | None = Field(None, description="J")
    warping: Warping | None = Field(None, description="Cw")
    shear_centre: tuple[Offset, Offset] | None = Field(None, description="x and y in the section's axes")
    area: Annotated[Area, sized(2)] | None = Field(None, description="gross")
    r_x: Size | None = Field(None, description="radius of gyration about x, bending in the truss's plane")
    r_y: Size | None = Field(None, description="radius of gyration about y")
    r_min: Size | None = None
    net: Annotated[Area, sized(2)] | None = Field(None, description="net area at the connection")
    s_x: Modulus | None = Field(None, description="elastic modulus about x")
    s_y: Modulus | None = None
    z_x: Modulus | None = Field(None, description="plastic modulus about x")
    z_y: Modulus | None = None
    shear_offset: tuple[Offset, Offset] | None = Field(None, description="shear centre from the centroid")
    punched: Flag | None = Field(None, description="whether the holes are punched full size")

    @model_validator(mode="before")
    @classmethod
    def _said_in_one_way(cls, data: object) -> object:
        if not isinstance(data, dict):
            return data
        ways = [way for way in WAYS if way in data]
        if not ways:
            raise MissingDataError("is said by its pieces, by one shape, or by area, r_x and r_y; none is there")
        if len(ways) > 1:
            raise InputError(f"is said in one way: pieces, shape or area; got {' and '.join(ways)}")
        if ways == ["shape"]:
            _require_sizes(data, (*PLACED, *WAYS["shape"]))
            return data
        known = (*ways, *WAYS[ways[0]])
        for key in data:
            if key not in known:
                said = f"does not go with {ways[0]}" if key in cls.model_fields else "is not known"
                raise UnknownNameError(f'key "{short(key)}" {said}', nearest=nearest_name(key, known))
        return data


PLACED: Final = ("x", "y", "turn", "mirror", "name")
_BOTH: Final = ("sharing", "shear_lag", "torsion", "warping")
_OF_PIECES: Final = (*_BOTH, "holes", "shear_centre")
WAYS: Final[dict[str, tuple[str, ...]]] = {
    "pieces": _OF_PIECES,
    "shape": _OF_PIECES,
    "area": (*_BOTH, "r_x", "r_y", "r_min", "net", "s_x", "s_y", "z_x", "z_y", "shear_offset", "punched"),
}
"""The ways in which a section is said, each by the key that it cannot do without, with the keys that go with it."""


def sizes_of(kind: str) -> dict[str, bool]:
    """Return a shape's sizes by name, and whether it cannot do without them."""
    return {one.name: one.default is MISSING for one in fields(SHAPES[kind])}  # type: ignore[arg-type]  # dataclasses


def _require_sizes(data: dict[str, object], others: tuple[str, ...]) -> None:
    """Refuse a shape that is none, sizes that it does not have, and the lack of those that it must have."""
    kind = data["shape"]
    if not isinstance(kind, str) or kind == PLACEHOLDER:
        return
    if kind not in SHAPES:
        said = f'"{short(kind)}" is no shape: {", ".join(SHAPES)}'
        raise UnknownNameError(said, place="shape", nearest=nearest_name(kind, SHAPES))
    sizes, article = sizes_of(kind), "an" if kind[0] in "aeI" else "a"
    for key in data:
        if key not in {"shape", *sizes, *others}:
            said = f'"{short(key)}" is not a size of {article} {kind}, which has {", ".join(sizes)}'
            raise UnknownNameError(said, nearest=nearest_name(key, (*sizes, *others)))
    for key, needed in sizes.items():
        if needed and key not in data:
            said = ", ".join(name for name, must in sizes.items() if must)
            raise MissingDataError(f"is missing: {article} {kind} needs {said}", place=key)
