"""Sections and materials of a bridge file become the domain's, every key by value; what may wait."""

from __future__ import annotations

import math
from dataclasses import fields
from typing import TYPE_CHECKING, get_args

import pint
import pytest
from cli_run import BY_JOINTS, changed, movload
from files.made import MADE
from numpy.testing import assert_allclose

from movload.bridge.material import STRESSES, Material
from movload.bridge.section import Section
from movload.bridge.section_bars import Eyebar, Flat, RoundBar, SawnTimber, ThreadedRod
from movload.bridge.section_holes import Hole
from movload.bridge.section_piece import Piece
from movload.bridge.section_typed import AreaAndRadii
from movload.bridge.shapes import Angle, Channel, ISection, Plate, RectangularTube, RoundTube
from movload.errors import MovloadError
from movload.files.metals import read_metal
from movload.files.read import bridge_from
from movload.files.schema.bridge import BridgeFile
from movload.files.schema.checked import checked
from movload.files.schema.makes import FactorsTable, StressesTable
from movload.files.schema.sections import SHAPES, SectionTable, Sizes, sizes_of
from movload.files.sections import Catalogue, catalogue_of
from movload.files.toml import parsed, without_placeholders
from movload.units import Quantity, UnitSystem, to_si

if TYPE_CHECKING:
    from movload.bridge.loss import CrossSection
    from movload.bridge.section_shape import Shape

ROUND_OFF = 1e-14  # relative: a number times a unit, its powers by repeated multiplication


def catalogue(text: str) -> Catalogue:
    """Return the sections and materials of a file's text."""
    data, missing = without_placeholders(parsed(text))
    return catalogue_of(checked(BridgeFile, data)[0], missing)


def rod(table: str) -> CrossSection:
    """Return the section that a table says in place of the rod's."""
    old = 'shape = "threaded rod"\ndiameter = 32\nroot = 27\n'
    text = changed(MADE, (old, f"{table}\n"))
    return catalogue(text).sections["rod"]


SIZED: dict[str, Shape] = {
    "first_leg = 80, second_leg = 60, thickness = 8": Angle(0.08, 0.06, 0.008),
    "depth = 180, width = 70, web = 8, flange = 11": Channel(0.18, 0.07, 0.008, 0.011),
    "depth = 240, width = 110, web = 8, flange = 11, bottom_width = 90, bottom_flange = 9": ISection(
        0.24, 0.11, 0.008, 0.011, bottom_width=0.09, bottom_flange=0.009
    ),
    "width = 80, depth = 120, wall = 5": RectangularTube(0.08, 0.12, 0.005),
    "diameter = 90, wall = 5": RoundTube(0.09, 0.005),
    "width = 100, thickness = 10": Flat(0.1, 0.01),
    "width = 100, thickness = 20, head_width = 230, pin_hole = 80, head_thickness = 25": Eyebar(
        0.1, 0.02, head_width=0.23, pin_hole=0.08, head_thickness=0.025
    ),
    "diameter = 30": RoundBar(0.03),
    "diameter = 32, root = 36": ThreadedRod(0.032, 0.036),
    "width = 200, thickness = 10, edges = 1, clear = 150": Plate(0.2, 0.01, edges=1, clear=0.15),
    "width = 200, depth = 300": SawnTimber(0.2, 0.3),
}


@pytest.mark.parametrize("sizes", SIZED)
def test_each_shape_by_its_own_sizes(sizes: str) -> None:
    """Alone, as a list of one, and each size as a string in inches."""
    shape = SIZED[sizes]
    alone = rod(f'shape = "{shape.kind}"\n' + sizes.replace(", ", "\n"))
    listed = rod(f'pieces = [{{ shape = "{shape.kind}", {sizes} }}]')
    assert isinstance(alone, Section)
    assert alone == listed
    (piece,) = alone.pieces
    assert type(piece.shape) is type(shape)
    for name in sizes_of(shape.kind):
        typed, meant = getattr(piece.shape, name), getattr(shape, name)
        assert typed == meant if name == "edges" or meant is None else math.isclose(typed, meant, rel_tol=ROUND_OFF)


def test_every_shape_and_each_of_its_sizes_has_a_key() -> None:
    assert {shape.kind for shape in SIZED.values()} == set(SHAPES)
    for kind, shape in SHAPES.items():
        assert set(sizes_of(kind)) == {one.name for one in fields(shape)} <= set(Sizes.model_fields)  # type: ignore[arg-type]  # each shape is a dataclass
    typed = {one.name for one in fields(AreaAndRadii)} - {"title", "left"}
    assert typed <= set(SectionTable.model_fields)
    assert set(StressesTable.model_fields) == set(FactorsTable.model_fields) == set(STRESSES)


def test_a_section_of_pieces_with_holes() -> None:
    channel = Channel(0.18, 0.07, 0.008, 0.011)
    cover = Piece(Plate(0.28, 0.008, clear=0.24), 0.0, 0.094)
    meant = Section(
        "top chord",
        (Piece(channel, -0.14, name="left channel"), Piece(channel, 0.14, mirror=True), cover),
        holes=(
            Hole(0.021, "web", number=2, punched=True, gauge=0.06),
            Hole(0.021, "thickness", piece="plate", thickness=0.008),
        ),
        sharing=1.15,
        shear_lag=0.85,
        torsion=2.5e-7,
        warping=2e-8,
        shear_centre=(0.0, 0.02),
    )
    section = catalogue(MADE).sections["top chord"]
    assert isinstance(section, Section)
    assert [(piece.name, piece.mirror) for piece in section.pieces] == [
        ("left channel", False), ("channel 2", True), ("plate", False),
    ]  # fmt: skip
    assert section.punched
    assert (section.sharing, section.shear_lag, section.shear_centre) == (1.15, 0.85, (0.0, 0.02))
    for name in ("net_area", "gross_area"):
        assert_allclose(getattr(section, name), getattr(meant, name), rtol=ROUND_OFF)
    for name in ("area", "i_x", "i_y", "torsion", "warping", "s_x_top"):
        # rtol: sums of a dozen rectangles about a centroid
        assert_allclose(getattr(section.properties, name), getattr(meant.properties, name), rtol=1e-12)


def test_turned_and_staggered() -> None:
    section = rod(
        'pieces = [{ shape = "flat", width = 120, thickness = 12, turn = 30, x = 5, y = "1 in", name = "tie" }]\n'
        "holes = [{ diameter = 20, number = 3, stagger = 40, gauge = 30 }]"
    )
    assert isinstance(section, Section)
    (piece,), (hole,) = section.pieces, section.holes
    assert (piece.turn, piece.name, hole.number, hole.punched) == (30.0, "tie", 3, False)
    assert_allclose([piece.x, piece.y, hole.stagger, hole.gauge], [0.005, 0.0254, 0.04, 0.03], rtol=ROUND_OFF)


def test_area_and_radii_with_all_that_may_be_known() -> None:
    post = catalogue(MADE).sections["post"]
    assert isinstance(post, AreaAndRadii)
    sizes = {
        "area": 1.8e-3, "r_x": 0.04, "r_y": 0.03, "r_min": 0.028, "net": 1.5e-3, "s_x": 4e-5, "s_y": 3e-5,
        "z_x": 4.6e-5, "z_y": 3.5e-5, "torsion": 4e-8, "warping": 1e-9, "shear_lag": 0.9, "sharing": 1.0,
    }  # fmt: skip
    for name, meant in sizes.items():
        assert_allclose(getattr(post, name), meant, rtol=ROUND_OFF)
    assert (post.shear_offset, post.punched) == ((0.0, 0.004), True)


def test_materials() -> None:
    materials = catalogue(MADE).materials
    assert materials["iron"] == read_metal("wrought iron", 1887)
    assert materials["iron"].assumed
    steel = materials["steel"]
    assert (steel.title, steel.kind, steel.source, steel.assumed) == (
        "steel", "steel", "two coupons of 1998, invented", False,
    )  # fmt: skip
    assert_allclose([steel.fy, steel.fu, steel.modulus, steel.density], [230e6, 380e6, 200e9, 7850], rtol=ROUND_OFF)
    oak = materials["oak"]
    assert oak.timber is not None
    assert (oak.kind, oak.modulus, oak.timber.product) == ("timber", 9e9, "sawn")
    assert dict(oak.timber.stresses) == {"bending": 8.5e6, "shear": 1.1e6, "stability": 3.4e9}
    assert {use: dict(own) for use, own in oak.timber.factors.items()} == {
        "bending": {"CM": 0.85, "Ct": 1.0, "CF": 1.0, "Cfu": 1.0, "Ci": 1.0, "Cr": 1.0},
        "shear": {"CM": 0.97},
    }


def test_cast_iron_may_do_without_its_ultimate_stress() -> None:
    text = changed(MADE, ('kind = "steel"\n', 'kind = "cast iron"\n'), ('fu = "380 MPa"\n', ""))
    steel = catalogue(text).materials["steel"]
    assert isinstance(steel, Material)
    assert math.isnan(steel.fu)


REGISTRY = pint.UnitRegistry()


@pytest.mark.parametrize(("quantity", "power"), [("section modulus", 3), ("torsion", 4), ("warping", 6)])
@pytest.mark.parametrize("unit", ["mm", "cm", "m", "in", "ft"])
def test_powers_of_lengths_agree_with_pint(quantity: Quantity, power: int, unit: str) -> None:
    assert quantity in get_args(Quantity)
    meant = REGISTRY.Quantity(1.0, f"{unit}**{power}").to(f"m**{power}").magnitude
    raised = {3: "³", 4: "⁴", 6: "⁶"}[power]
    for text in (f"1 {unit}{power}", f"1{unit}{raised}"):
        assert_allclose(to_si(text, quantity), meant, rtol=ROUND_OFF)
    system = UnitSystem("m", "kN", unit)
    assert system.symbol(quantity) == f"{unit}{power}"
    assert_allclose(system.factor(quantity), meant, rtol=ROUND_OFF)


WAITS = {
    'material = "steel"\nunbraced_x = "joint to joint"': 'members."top chord".unbraced_x',
    "k_x = 1.0": 'members."top chord".k_x',
    'curves = ["c", "c"]': 'members."top chord".curves',
    'fy = "230 MPa"': "materials.steel.fy",
    "density = 7850\nsource": "materials.steel.density",
    'source = "two coupons of 1998, invented"': "materials.steel.source",
    "treated = false": "materials.oak.treated",
    "r_x = 40": "sections.post.r_x",
    "shear_lag = 0.85": 'sections."top chord".shear_lag',
    'unbraced = "held"': "floor.floorbeams.unbraced",
    "stiffeners = 1200": "floor.stringers.stiffeners",
    'section = "joist"\nmaterial = "steel"\nunbraced = 1.2': "floor.stringers.section",
}


@pytest.mark.parametrize("old", WAITS)
def test_what_only_a_rating_needs_may_wait(old: str) -> None:
    """The bridge is there with its areas, the place is named, and what waits is made of nothing yet."""
    place, key = WAITS[old], WAITS[old].rpartition(".")[2]
    lines = [f'{key} = "?"' if line.startswith(f"{key} = ") else line for line in old.split("\n")]
    if old.endswith("source"):
        lines = ['density = "?"', "source"]
    whole, bridge = bridge_from(MADE, "a"), bridge_from(changed(MADE, (old, "\n".join(lines))), "b")
    assert bridge.missing == (place,)
    assert [member.area for member in bridge.truss.members] == [member.area for member in whole.truss.members]
    floor = bridge.floor
    parts = (floor.stringers, floor.floorbeams, floor.planks)
    known = len(bridge.made) + sum(part is not None and part.made is not None for part in parts)
    assert known < len(whole.made) + 3


@pytest.mark.parametrize(
    ("old", "new", "place"),
    [
        ('section = "rod"', 'section = "?"', 'members."bottom chord".section'),
        ("root = 27", 'root = "?"', "sections.rod.root"),
        ("built = 1887", 'built = "?"', "materials.iron.built"),
        ("modulus = 200", 'modulus = "?"', "materials.steel.modulus"),
        ("thickness = 8, y", 'thickness = "?", y', r'sections."top chord".pieces[2].thickness'),
        ("area = 1800", 'area = "?"', "sections.post.area"),
    ],
)
def test_what_the_truss_needs_may_not(old: str, new: str, place: str) -> None:
    with pytest.raises(MovloadError, match=r'still holds "\?" and is needed here') as caught:
        bridge_from(changed(MADE, (old, new)), "b")
    assert caught.value.place == f"b: {place}"


def test_the_schema_has_every_table() -> None:
    parts = movload("schema", "bridge").json()["$defs"]
    assert parts["PieceTable"]["required"] == ["shape"]
    assert {"SectionTable", "MaterialTable", "HoleTable", "JoinedTable", "BentTable", "MemberLossTable"} <= set(parts)
    assert bridge_from(BY_JOINTS, "b").made == {}
