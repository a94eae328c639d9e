"""What ``test_parts`` leaves: joined bars by EN, axes that are not the section's own, who is warned, the rest refused.

Limits of slenderness: AASHTO LRFD 6.9.3 (120) and 6.8.4 (200, 140 where the force reverses); EN 1993-1-1 Table 6.9 (15
i_min). FROM MEMORY. Parts are invented.
"""

from __future__ import annotations

import math
from dataclasses import replace
from typing import TYPE_CHECKING, Any, Final

import numpy as np
import pytest
from numpy.testing import assert_allclose
from sectionproperties.analysis.section import Section as Meshed
from sectionproperties.pre.library.steel_sections import angle_section

from movload.bridge.loss import AsFound, Loss
from movload.bridge.made import Bent, Held, Joined, Made, Sideways
from movload.bridge.material import Material, Timber
from movload.bridge.section import Section
from movload.bridge.section_bars import Eyebar, Flat, RoundBar, SawnTimber, ThreadedRod
from movload.bridge.section_holes import Hole
from movload.bridge.section_piece import Piece
from movload.bridge.shapes import Angle, Channel, ISection, Plate, RectangularTube
from movload.errors import InputError, MissingDataError
from movload.strength.of_section import edge_moduli
from movload.strength.parts import part_notes, part_strength
from movload.strength.standards import STANDARDS

if TYPE_CHECKING:
    from movload.bridge.section_shape import Shape
    from movload.bridge.section_typed import AreaAndRadii
    from movload.strength.strength import Strength

PHI: Final = {
    "tension": 0.95, "fracture": 0.80, "compression": 0.90, "moment": 0.97, "hogging": 0.93, "shear": 0.91,
}  # fmt: skip
STEEL: Final = Material("A7", "steel", modulus=200e9, density=7850, source="invented", fy=230e6, fu=410e6)
HELD: Final = Held(unbraced_x=3.0, unbraced_y=3.0, k_x=1.0, k_y=1.0)
LEG: Final = Angle(0.100, 0.080, 0.012)
PAIR: Final = Section("pair", (Piece(LEG, 0.005), Piece(LEG, -0.005, mirror=True)))
I_MIN: Final = Section("leg", (Piece(LEG),)).properties.r_min


def made(section: Section | AreaAndRadii, *losses: Loss, **told: Any) -> Made:
    """Return a part of steel."""
    return Made(section=AsFound(section, losses), material=told.pop("material", STEEL), **told)


def strength(part: Made, sense: str = "compression", standard: str = "aashto_lrfd") -> Strength:
    """Return its strength at PHI."""
    return part_strength(part, sense, standard, PHI, subject="part")


def step(found: Strength, symbol: str) -> float:
    """Return the value of the one step of a symbol."""
    (value,) = [each.value for each in found.steps if each.symbol == symbol]
    return value


# ------------------------------------------------------------------ joined by EN 1993-1-1


def test_packed_angles_are_one_bar_by_partial_factors() -> None:
    """Packing plates at most 15 i_min apart; beyond, battened bars are not covered."""
    near = Joined(axis="y", spacing=14.99 * I_MIN, apart=0.06, radius=I_MIN)
    found = strength(made(PAIR, held=HELD, joined=near), standard="en_1993")
    assert_allclose(step(found, "a / imin"), 14.99, rtol=1e-12)
    base = math.pi * math.sqrt(200e9 / 230e6)
    assert_allclose(step(found, "lambda_y"), 3.0 / PAIR.properties.r_y / base, rtol=1e-9)
    far = replace(near, spacing=15.01 * I_MIN)
    with pytest.raises(InputError, match=r"laced and battened bars .* are not covered"):
        strength(made(PAIR, held=HELD, joined=far), standard="en_1993")


def test_lacing_of_a_bar_askew_weakens_its_weaker_axis() -> None:
    """Two angles laced corner to corner, not mirrored: the typed axis is no principal one, the weaker is weakened."""
    legs = (Piece(LEG, 0.060, 0.060, turn=180, name="one"), Piece(LEG, -0.060, -0.060, name="other"))
    torsion = {"torsion": 1e-5, "warping": 0.0, "shear_centre": (0.0, 0.0)}
    askew = Section("askew", legs, **torsion)  # type: ignore[arg-type]  # by name
    soft, stiff = (
        Joined(axis="x", spacing=0.2, apart=0.12, lacing_area=area, planes=2) for area in (1e-5, 1.0)
    )  # fmt: skip
    weak, strong = (strength(made(askew, held=HELD, joined=each)) for each in (soft, stiff))
    assert weak.value < 0.95 * strong.value
    ratios = {axis: step(strong, f"Pe{axis}") / step(weak, f"Pe{axis}") for axis in "xy"}
    weaker = min("xy", key=lambda axis: step(strong, f"Pe{axis}"))
    assert ratios[weaker] > 1.05
    assert_allclose(ratios["xy".replace(weaker, "")], 1.0, rtol=1e-12)


# ------------------------------------------------------------------ axes


def test_radii_of_turned_axes_give_the_eigenvalues() -> None:
    """An I turned by 80 degrees held far closer about y: its loads are those of pi^2 E [[a, -c], [-c, b]].

    Its strong axis lies near y, less than 15 degrees off: axes keep their names.
    """
    turned = Section("turned", (Piece(ISection(0.300, 0.150, 0.010, 0.014), turn=80.0),))
    held = Held(unbraced_x=3.0, unbraced_y=3.5, k_x=1.0, k_y=1.0)
    found, ours = strength(made(turned, held=held)), turned.properties
    a, b, c = ours.i_x / 9.0, ours.i_y / 3.5**2, ours.i_xy / (3.0 * 3.5)
    expected = math.pi**2 * 200e9 * np.linalg.eigvalsh([[a, -c], [-c, b]])
    assert_allclose([step(found, "Pex"), step(found, "Pey")], expected, rtol=1e-9)
    assert abs(step(found, "turn")) < 15.0


@pytest.mark.parametrize("turn", [12.0, 33.0, 80.0])
def test_an_edge_of_an_unsymmetric_section_is_never_stronger_than_its_stress(turn: float) -> None:
    """M about x alone against sectionproperties' stresses (J. Open Source Softw. 8 (90), 6105): a bound, and near.

    R. van Leeuwen and C. Ferster, title from memory. M/S is at least the greatest stress anywhere, and at most 2.2
    times (2.11 at 80 degrees): the edge's farthest corner is not as far across as taken.
    """
    section = Section("angle", (Piece(Angle(0.100, 0.080, 0.012), turn=turn),))
    legs = angle_section(d=80, b=100, t=12, r_r=0, r_t=0, n_r=1)
    theirs = Meshed(legs.rotate_section(turn, (0, 0)).create_mesh([20]))
    theirs.calculate_geometric_properties()
    theirs.calculate_warping_properties()
    stresses = [np.abs(each["sig_zz"]).max() for each in theirs.calculate_stress(mxx=1e6).get_stress()]  # N mm, MPa
    ours = 1e3 / min(edge_moduli(section.properties, "x")) / 1e6
    assert max(stresses) * (1 - 1e-6) <= ours <= 2.2 * max(stresses)


def test_upright_sections_have_their_own_moduli() -> None:
    upright = Section("channel", (Piece(Channel(0.300, 0.090, 0.009, 0.0135)),)).properties
    assert edge_moduli(upright, "x") == (upright.s_x_top, upright.s_x_bottom)
    assert edge_moduli(upright, "y") == (upright.s_y_left, upright.s_y_right)


# ------------------------------------------------------------------ who is warned

TUBE: Final = Section("tube", (Piece(RectangularTube(0.100, 0.100, 0.008)),))
RADIUS: Final = TUBE.properties.r_x
BOTH: Final = {"tension", "compression"}


@pytest.mark.parametrize(
    ("slenderness", "senses", "codes"),
    [
        (119.9, {"compression"}, []),
        (120.1, {"compression"}, ["slender-compression"]),
        (199.9, {"tension"}, []),
        (200.1, {"tension"}, ["slender-tension"]),
        (139.9, BOTH, ["slender-compression"]),
        (140.1, BOTH, ["slender-compression", "slender-tension"]),
        (300.0, {"moment"}, []),
    ],
)
def test_who_is_warned_of_slenderness(slenderness: float, senses: set[str], codes: list[str]) -> None:
    """l/r about either axis, the worse one."""
    for lengths in ((slenderness, 50.0), (50.0, slenderness)):
        x, y = (each * RADIUS for each in lengths)
        part = made(TUBE, held=Held(unbraced_x=x, unbraced_y=y, k_x=1.0, k_y=1.0))
        notes = [note for note in part_notes(part, "U1-U2", senses) if note.code.startswith("slender")]
        assert [note.code for note in notes] == codes
        assert {note.subject for note in notes} <= {"U1-U2"}


def test_k_counts_in_compression_and_not_in_tension() -> None:
    """l/r 180, K 0.6: K l/r 108 in compression, l/r 180 in tension where it reverses (140)."""
    length = 180.0 * RADIUS
    part = made(TUBE, held=Held(unbraced_x=length, unbraced_y=length, k_x=0.6, k_y=0.6))
    notes = [note for note in part_notes(part, "U1-U2", BOTH) if note.code.startswith("slender")]
    assert [note.code for note in notes] == ["slender-tension"]
    assert "l / r = 180 in tension is above 140" in notes[0].text


@pytest.mark.parametrize(
    "shape",
    [
        Eyebar(0.100, 0.020, head_width=0.240, pin_hole=0.090), RoundBar(0.030), ThreadedRod(0.030, 0.025),
        Flat(0.100, 0.020),
    ],
)  # fmt: skip
def test_eyebars_rods_and_flats_may_be_slender_in_tension(shape: Shape) -> None:
    part = made(Section("tie", (Piece(shape),)), held=replace(HELD, unbraced_x=9.0, unbraced_y=9.0))
    assert not [note for note in part_notes(part, "L0-L1", {"tension"}) if note.code.startswith("slender")]
    both = Section("mixed", (Piece(shape), Piece(TUBE.pieces[0].shape, 0.5)))
    mixed = made(both, held=replace(HELD, unbraced_x=90.0))
    assert [note.code for note in part_notes(mixed, "L0-L1", {"tension"}) if note.code.startswith("slender")]


def test_a_loss_at_the_middle_makes_a_bar_slenderer() -> None:
    part = made(TUBE, held=Held(unbraced_x=119.0 * RADIUS, unbraced_y=1.0, k_x=1.0, k_y=1.0))
    eaten = replace(part, section=AsFound(TUBE, (Loss("middle", part="top wall", fraction=0.6),)))
    codes = [[note.code for note in part_notes(each, "U1-U2", {"compression"})] for each in (part, eaten)]
    assert ["slender-compression" in each for each in codes] == [False, True]


# ------------------------------------------------------------------ punched, shear lag, stagger, by each standard


@pytest.mark.parametrize(
    ("standard", "of_fracture"),
    [("aashto_lrfd", 0.80 * 0.90), ("mbe_allowable_stress", 0.80), ("mbe_load_factor", 0.80), ("en_1993", 0.80 * 0.9)],
)
def test_net_section_by_each_standard(standard: str, of_fracture: float) -> None:
    """Plate 240 by 12, two rows of 24 mm punched holes, 75 mm apart, staggered by 40: U 0.85.

    An = (240 - 2 x 24 + 40^2/(4 x 75)) x 12 = 197.33 x 12 mm2. 0.90 for punched holes by LRFD only (6.8.2.1).
    """
    holes = (Hole(0.024, number=2, gauge=0.075, stagger=0.040, punched=True),)
    plate = Section("plate", (Piece(Plate(0.240, 0.012)),), holes=holes, shear_lag=0.85)
    net = (240 - 2 * 24 + 40**2 / (4 * 75)) * 12
    weak = replace(STEEL, fu=280e6)
    found = strength(made(plate, material=weak), "tension", standard)
    assert_allclose(found.value, of_fracture * 280 * net * 0.85, rtol=1e-12)
    assert "fracture of the net section" in found.steps[-1].equation


# ------------------------------------------------------------------ the rest is refused

ONE: Final = dict.fromkeys(("CM", "Ct", "CF", "Ci"), 1.0)
LARCH: Final = Material(
    "larch", "timber", modulus=11e9, density=600, source="invented",
    timber=Timber("sawn", {"tension": 5e6}, {"tension": ONE}),
)  # fmt: skip
POST: Final = Section("post", (Piece(SawnTimber(0.2, 0.25)),))


def test_joined_timbers_are_refused_where_it_was_typed() -> None:
    battens = Joined(axis="x", spacing=0.6, apart=0.24, radius=0.027)
    timber = made(POST, material=LARCH, joined=battens, durations=("two months",), treated=False, place="members.post")
    with pytest.raises(InputError, match=r"^members\.post\.joined: bent and built-up timbers are not covered by NDS"):
        strength(timber, "tension", "mbe_allowable_stress")


@pytest.mark.parametrize("standard", STANDARDS)
def test_every_standard_refuses_iron_that_is_cast(standard: str) -> None:
    cast = Material("grey", "cast iron", modulus=100e9, density=7200, source="invented", fy=100e6, fu=150e6)
    for sense in ("tension", "moment", "hogging"):
        with pytest.raises(InputError, match=rf"cast iron breaks without warning .* no strength in {sense}"):
            strength(made(TUBE, material=cast, sideways=Sideways(unbraced=None)), sense, standard)
    with pytest.raises(InputError, match=r"grey: no formula of .* is for cast iron: type nominal or reduced strengths"):
        strength(made(TUBE, material=cast, held=HELD), "compression", standard)


@pytest.mark.parametrize("standard", [each for each in STANDARDS if each != "mbe_allowable_stress"])
@pytest.mark.parametrize("sense", ["tension", "compression", "moment", "hogging", "shear"])
def test_timber_is_the_manuals_alone(standard: str, sense: str) -> None:
    with pytest.raises(InputError, match=r"larch: timber by .* is not covered: type its strength"):
        strength(made(POST, material=LARCH, held=HELD, sideways=Sideways(unbraced=None)), sense, standard)


@pytest.mark.parametrize("standard", STANDARDS)
def test_every_standard_asks_for_lengths(standard: str) -> None:
    with pytest.raises(MissingDataError, match=r"unbraced_x: compression needs the free lengths unbraced_x and unbr"):
        strength(made(TUBE), "compression", standard)
    beam = Section("beam", (Piece(ISection(0.3, 0.15, 0.01, 0.014)),))
    for sense in ("moment", "hogging"):
        with pytest.raises(MissingDataError, match=r"unbraced: bending needs the length between points"):
            strength(made(beam), sense, standard)


@pytest.mark.parametrize(
    ("sense", "missing"),
    [("tension", "fracture"), ("tension", "tension"), ("compression", "compression"), ("moment", "moment"),
     ("hogging", "hogging"), ("shear", "shear")],
)  # fmt: skip
@pytest.mark.parametrize("standard", STANDARDS)
def test_no_standard_takes_a_factor_as_one(standard: str, sense: str, missing: str) -> None:
    beam = Section("beam", (Piece(ISection(0.3, 0.15, 0.01, 0.014)),))
    part = made(beam, held=HELD, sideways=Sideways(unbraced=None))
    less = {name: factor for name, factor in PHI.items() if name != missing}
    with pytest.raises(MissingDataError, match=rf'the level gives no resistance factor for "{missing}"'):
        part_strength(part, sense, standard, less, subject="part")


@pytest.mark.parametrize("bad", [-0.01, math.nan, math.inf])
@pytest.mark.parametrize("name", ["moment", "eccentricity", "bow"])
def test_what_bends_no_bar(name: str, bad: float) -> None:
    with pytest.raises(InputError, match=rf"^bent\.{name}: must be 0 or more, got"):
        Bent(axis="x", **{name: bad})


def test_a_box_that_lost_a_whole_plate_is_open() -> None:
    """Two channels and two covers are closed and do not twist; once a cover is gone they may: numbers are asked for."""
    channel = Channel(0.300, 0.090, 0.009, 0.0135)
    box = Section("box", (
        Piece(channel, -0.120, name="left"), Piece(channel, 0.120, mirror=True, name="right"),
        Piece(Plate(0.300, 0.010), 0.0, 0.155, name="above"), Piece(Plate(0.300, 0.010), 0.0, -0.155, name="below"),
    ))  # fmt: skip
    whole = strength(made(box, held=HELD))
    assert not [each for each in whole.steps if each.symbol == "Pez"]
    thinned = strength(made(box, Loss("middle", piece="below", fraction=0.99), held=HELD))
    assert not [each for each in thinned.steps if each.symbol == "Pez"]
    with pytest.raises(MissingDataError, match=r"with twist: nothing is left of the thickness of below; type torsion"):
        strength(made(box, Loss("middle", piece="below", fraction=1.0), held=HELD))
