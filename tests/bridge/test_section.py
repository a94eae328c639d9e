"""Sections: hand values, built-up ones, what they refuse by name, holes in line and in zigzag, typed area and radii."""

from __future__ import annotations

import math
import pickle

import pytest
from numpy.testing import assert_allclose

from movload.bridge.section import Section
from movload.bridge.section_bars import Eyebar, Flat, RoundBar, SawnTimber, ThreadedRod
from movload.bridge.section_elements import Cut
from movload.bridge.section_holes import Hole, worst_chain
from movload.bridge.section_piece import Piece
from movload.bridge.section_typed import AreaAndRadii
from movload.bridge.shapes import Angle, Channel, ISection, Plate, RectangularTube, RoundTube
from movload.errors import InputError, MissingDataError, UnknownNameError

EXACT = 1e-12  # a dozen roundings
CHANNEL = Channel(0.250, 0.080, 0.009, 0.012)
ANGLE = Angle(0.090, 0.060, 0.008)
LACED = Section("laced", (Piece(CHANNEL, 0.1), Piece(CHANNEL, -0.1, mirror=True)))
PLATE = Piece(Plate(0.300, 0.010))
COVER = Piece(Plate(0.400, 0.010), 0.0, 0.130)


# ------------------------------------------------------------------ properties by hand


def test_a_rectangle() -> None:
    """B = 140, h = 190 mm: b h^3/12, b h^2/6, b h^2/4."""
    ours = Section("post", (Piece(SawnTimber(0.140, 0.190)),)).properties
    assert_allclose(ours.i_x, 0.140 * 0.190**3 / 12, rtol=EXACT)
    assert_allclose([ours.s_x_top, ours.s_x_bottom, ours.s_x], 0.140 * 0.190**2 / 6, rtol=EXACT)
    assert_allclose([ours.s_y_left, ours.s_y_right, ours.s_y], 0.190 * 0.140**2 / 6, rtol=EXACT)
    assert_allclose([ours.z_x, ours.z_y], [0.140 * 0.190**2 / 4, 0.190 * 0.140**2 / 4], rtol=EXACT)
    assert_allclose([ours.r_x, ours.r_y, ours.r_min], [0.190 / 12**0.5, *[0.140 / 12**0.5] * 2], rtol=EXACT)


def test_rounds() -> None:
    """Closed formulas: pi d^4/64, pi d^4/32, d^3/6; a tube's Z = (D^3 - d^3)/6."""
    bar = Section("rod", (Piece(RoundBar(0.030)),)).properties
    assert_allclose([bar.i_x, bar.torsion], [math.pi * 0.03**4 / 64, math.pi * 0.03**4 / 32], rtol=EXACT)
    # The axis is found to 1e-13 of the area, and the modulus is stationary there.
    assert_allclose([bar.z_x, bar.z_y], 0.03**3 / 6, rtol=EXACT)
    tube = Section("pipe", (Piece(RoundTube(0.140, 0.005), 0.3, -0.2),)).properties
    assert_allclose([tube.x, tube.y], [0.3, -0.2], rtol=EXACT)
    assert_allclose([tube.z_x, tube.z_y], (0.140**3 - 0.130**3) / 6, rtol=EXACT)
    assert_allclose(tube.torsion, math.pi * (0.140**4 - 0.130**4) / 32, rtol=EXACT)


def test_a_doubly_symmetric_i() -> None:
    """Cw = I_y h^2 / 4 of the flanges, J = sum b t^3 / 3, Z by its two halves."""
    ours = Section("beam", (Piece(ISection(0.300, 0.150, 0.008, 0.012)),)).properties
    assert_allclose(ours.warping, 2 * 0.012 * 0.150**3 / 12 * 0.288**2 / 4, rtol=EXACT)
    assert_allclose(ours.torsion, (2 * 0.150 * 0.012**3 + 0.276 * 0.008**3) / 3, rtol=EXACT)
    assert_allclose(ours.z_x, 0.150 * 0.012 * 0.288 + 0.008 * 0.138**2, rtol=EXACT)
    assert_allclose(ours.shear_offset, (0.0, 0.0), atol=EXACT)


def test_an_unequal_i_as_its_closed_formulas_say() -> None:
    """With I_t, I_b of the flanges: e from the bottom = h I_t / (I_t + I_b), Cw = h^2 I_t I_b / (I_t + I_b).

    Common practice (from memory). The web's own I_y is not in them: they hold to its share, 1e-4.
    """
    beam = ISection(0.300, 0.150, 0.008, 0.012, bottom_width=0.180, bottom_flange=0.015)
    ours = Section("beam", (Piece(beam),)).properties
    top, bottom, h = 0.012 * 0.150**3 / 12, 0.015 * 0.180**3 / 12, 0.300 - 0.006 - 0.0075
    assert_allclose(ours.shear_centre[1], -0.150 + 0.0075 + h * top / (top + bottom), rtol=1e-9)
    assert_allclose(ours.warping, h**2 * top * bottom / (top + bottom), rtol=1e-9)


def test_a_channel_as_its_closed_formulas_say() -> None:
    """With e = 3 b^2 t_f / (6 b t_f + h t_w) behind the web's middle, Cw = h^2 b^3 t_f (3 b t_f + 2 h t_w) / (12 (..)).

    Seaburg and Carter, AISC Design Guide 9, from memory; b and h between middle lines.
    """
    ours = Section("channel", (Piece(CHANNEL),)).properties
    b, h, f, w = 0.080 - 0.0045, 0.238, 0.012, 0.009
    below = 6 * b * f + h * w
    assert_allclose(ours.shear_centre[0], 0.0045 - 3 * b**2 * f / below, rtol=EXACT)
    assert_allclose(ours.shear_centre[1], 0.0, atol=EXACT)
    assert_allclose(ours.warping, h**2 * b**3 * f * (3 * b * f + 2 * h * w) / (12 * below), rtol=EXACT)


def test_a_rectangular_tube_by_bredt() -> None:
    ours = Section("tube", (Piece(RectangularTube(0.120, 0.180, 0.006)),)).properties
    b, h, t = 0.114, 0.174, 0.006
    assert_allclose(ours.torsion, 4 * (b * h) ** 2 * t / (2 * (b + h)), rtol=EXACT)
    assert ours.warping == 0.0


def test_a_tube_without_a_wall_is_open() -> None:
    tube = Section("tube", (Piece(RectangularTube(0.120, 0.180, 0.006)),)).with_cut("", Cut("top wall", fraction=1.0))
    assert_allclose(tube.properties.torsion, (2 * 0.168 + 0.120) * 0.006**3 / 3, rtol=EXACT)
    with pytest.raises(MissingDataError, match="nothing is left of the top wall"):
        _ = tube.properties.warping


def test_an_angles_least_radius() -> None:
    """Equal legs: the least axis is the diagonal's, I_min = I_x - |I_xy|."""
    ours = Section("angle", (Piece(Angle(0.1, 0.1, 0.01)),)).properties
    assert ours.i_xy < 0
    assert_allclose(ours.i_min, ours.i_x + ours.i_xy, rtol=EXACT)
    assert_allclose(ours.i_max, ours.i_x - ours.i_xy, rtol=EXACT)
    assert_allclose(ours.r_min, math.sqrt(ours.i_min / ours.area), rtol=EXACT)
    assert_allclose(ours.principal_turn, 45.0, rtol=EXACT)


def test_laced_channels_by_steiner() -> None:
    """A channel's own I_y and its centroid 100 mm further out; J twice one's."""
    one, both = Section("one", (Piece(CHANNEL),)).properties, LACED.properties
    assert_allclose(both.i_x, 2 * one.i_x, rtol=EXACT)
    assert_allclose(both.i_y, 2 * (one.i_y + one.area * (0.1 + one.x) ** 2), rtol=EXACT)
    assert_allclose([both.torsion, both.z_x], [2 * one.torsion, 2 * one.z_x], rtol=EXACT)
    assert_allclose(both.shear_offset, (0.0, 0.0), atol=EXACT)


# ------------------------------------------------------------------ what cannot be given, and what then helps


def test_warping_of_a_built_up_section_is_refused_by_name() -> None:
    with pytest.raises(MissingDataError, match="laced: warping has no closed formula for a built-up section: type war"):
        _ = LACED.properties.warping
    chord = Section("top chord", (*LACED.pieces, COVER))
    with pytest.raises(MissingDataError, match=r"top chord: shear centre has no closed formula .* type shear_ce"):
        _ = chord.properties.shear_offset
    assert chord.properties.has("z_x")
    assert not chord.properties.has("warping")


def test_what_is_typed_is_taken() -> None:
    pieces = (*LACED.pieces, COVER)
    chord = Section("top chord", pieces, torsion=2e-6, warping=3e-8, shear_centre=(0.0, 0.2))
    ours = chord.properties
    assert (ours.torsion, ours.warping) == (2e-6, 3e-8)
    assert_allclose(ours.shear_centre, (0.0, 0.2), rtol=EXACT, atol=EXACT)
    lost = chord.with_cut("plate", Cut(amount=0.002)).properties  # 0.8 of a plate is the least part left
    assert_allclose([lost.torsion, lost.warping], [2e-6 * 0.8**3, 3e-8 * 0.8**3], rtol=EXACT)


@pytest.mark.parametrize(
    ("typed", "said"),
    [
        ({"torsion": -1e-6}, r"laced: torsion: must be 0 or more, got -1e-06 m4"),
        ({"warping": math.nan}, r"laced: warping: must be 0 or more, got nan m6"),
        ({"shear_centre": (0.0, math.inf)}, r"laced: shear_centre: must be finite, got \(0\.0, inf\) m"),
        ({"sharing": 0.9}, r"laced: sharing: worst bar over mean is at least 1, got 0\.9"),
        ({"shear_lag": 0.0}, r"laced: shear_lag: U is above 0 and at most 1, got 0"),
        ({"shear_lag": 1.1}, r"laced: shear_lag: U is above 0 and at most 1, got 1\.1"),
    ],
)
def test_factors_and_typed_values_have_their_range(typed: dict[str, float], said: str) -> None:
    with pytest.raises(InputError, match=said):
        Section("laced", LACED.pieces, **typed)  # type: ignore[arg-type]  # wrong values are the check


def test_two_angles_back_to_back_twist_between_their_legs() -> None:
    """10 mm apart: on the axis, at the middle of the outstanding legs. Common practice, from memory."""
    angles = Section("strut", (Piece(ANGLE, 0.005), Piece(ANGLE, -0.005, mirror=True)))
    assert_allclose(angles.properties.shear_centre, (0.0, 0.004), atol=EXACT)
    lying = Section("strut", (Piece(ANGLE, 0.0, 0.005), Piece(ANGLE, 0.0, -0.005, turn=180.0, mirror=True)))
    assert_allclose(lying.properties.shear_centre, (0.004, 0.0), atol=EXACT)
    one = Section("one", (Piece(ANGLE),)).properties
    assert_allclose(angles.properties.warping, 2 * one.warping, rtol=EXACT)


def test_angles_far_apart_or_lost_on_one_side_are_not_back_to_back() -> None:
    far = Section("far", (Piece(ANGLE, 0.1), Piece(ANGLE, -0.1, mirror=True)))
    lost = Section("lost", (Piece(ANGLE, 0.005), Piece(ANGLE, -0.005, mirror=True))).with_cut(
        "angle 2", Cut("first leg", amount=0.002)
    )
    for section in (far, lost):
        with pytest.raises(MissingDataError, match="shear centre has no closed formula"):
            _ = section.properties.shear_offset


def test_an_angle_without_a_leg_has_no_shear_centre() -> None:
    angle = Section("stub", (Piece(ANGLE),)).with_cut("", Cut("second leg", fraction=1.0))
    with pytest.raises(MissingDataError, match="stub: nothing is left of the second leg: no closed formula"):
        _ = angle.properties.shear_offset
    assert_allclose(angle.properties.area, 0.09 * 0.008, rtol=EXACT)


# ------------------------------------------------------------------ pieces


def test_pieces_are_named_and_numbered() -> None:
    assert [piece.name for piece in LACED.pieces] == ["channel 1", "channel 2"]
    mixed = Section("mixed", (Piece(CHANNEL, 0.1, name="right"), Piece(CHANNEL, -0.1, mirror=True), COVER))
    assert [piece.name for piece in mixed.pieces] == ["right", "channel 2", "plate"]


def test_two_of_one_name_and_none_at_all_are_refused() -> None:
    with pytest.raises(InputError, match='twins: pieces: two pieces are named "left"'):
        Section("twins", (Piece(CHANNEL, 0.1, name="left"), Piece(CHANNEL, -0.1, mirror=True, name="left")))
    with pytest.raises(InputError, match="empty: pieces: a section has at least 1 piece, got 0"):
        Section("empty", ())


@pytest.mark.parametrize(
    "pieces",
    [
        (Piece(CHANNEL), Piece(CHANNEL, 0.005)),
        (Piece(CHANNEL), Piece(Flat(0.05, 0.02), 0.005)),
        (Piece(RoundTube(0.1, 0.005)), Piece(RoundBar(0.02), 0.045)),
        (Piece(RoundTube(0.1, 0.005)), Piece(RoundTube(0.08, 0.005), 0.015)),
        (Piece(RoundBar(0.03)), Piece(Flat(0.1, 0.02), 0.024)),
        (Piece(RoundBar(0.03)), Piece(Plate(0.02, 0.02), 0.016, 0.016)),  # a corner of it only
        (Piece(Plate(0.1, 0.01)), Piece(Plate(0.1, 0.01), 0.04, 0.04, turn=45.0)),
    ],
    ids=["channels", "in a flange", "in a wall", "tubes", "over a bar", "corner", "turned"],
)
def test_metal_is_not_counted_twice(pieces: tuple[Piece, ...]) -> None:
    with pytest.raises(InputError, match=r"twice: .*: .* lie 0\.0\d+ m deep in each other"):
        Section("twice", pieces)


@pytest.mark.parametrize(
    "pieces",
    [
        (Piece(RoundTube(0.1, 0.005)), Piece(RoundBar(0.088))),
        (Piece(RoundTube(0.1, 0.005)), Piece(RoundTube(0.08, 0.005))),
        (Piece(RoundTube(0.1, 0.005)), Piece(Plate(0.06, 0.06))),
        (Piece(RoundBar(0.03)), Piece(Plate(0.02, 0.02), 0.021, 0.021)),
        (Piece(Flat(0.1, 0.02)), Piece(Flat(0.1, 0.02), 0.0196)),  # rounded to half a millimetre
        (Piece(Plate(0.1, 0.01)), Piece(Plate(0.1, 0.01), 0.045, 0.045, turn=45.0)),
    ],
    ids=["bar in tube", "tube in tube", "square in tube", "beside a round", "rounded", "turned"],
)
def test_pieces_may_touch_and_lie_in_a_tube(pieces: tuple[Piece, ...]) -> None:
    section = Section("close", pieces)
    assert_allclose(section.properties.area, sum(piece.area for piece in pieces), rtol=EXACT)


def test_sections_are_values() -> None:
    again = pickle.loads(pickle.dumps(LACED))  # noqa: S301  # its own bytes
    assert again == LACED
    assert again.properties == LACED.properties
    assert pickle.loads(pickle.dumps(LACED.properties)) == LACED.properties  # noqa: S301  # its own bytes


def test_notes_say_what_is_left_out() -> None:
    assert [note.code for note in LACED.notes] == ["fillets-left-out"]
    assert Section("bar", (Piece(Flat(0.1, 0.02)),)).notes == ()


# ------------------------------------------------------------------ holes


def net(*holes: Hole, pieces: tuple[Piece, ...] = (PLATE,)) -> float:
    """Return the net area [mm2]."""
    return 1e6 * Section("net", pieces, holes=holes).net_area


def test_holes_in_line() -> None:
    assert_allclose(net(Hole(0.022, number=2)), (300 - 44) * 10, rtol=EXACT)
    assert_allclose(net(Hole(0.022, number=2, gauge=0.08)), (300 - 44) * 10, rtol=EXACT)
    assert_allclose(net(Hole(0.022, thickness=0.006)), 3000 - 22 * 6, rtol=EXACT)


def test_a_zigzag() -> None:
    """D = 22, s = 40, g = 60 mm: each step gives back 40^2 / 240 = 6.667 mm; all three holes are worst."""
    assert_allclose(worst_chain(3, 22.0, 40.0, 60.0), 66 - 2 * 40**2 / 240, rtol=EXACT)
    assert_allclose(net(Hole(0.022, number=3, stagger=0.04, gauge=0.06)), (300 - 66 + 2 * 1600 / 240) * 10, rtol=EXACT)


def test_a_long_stagger_leaves_the_straight_line_worst() -> None:
    """S = 100, g = 60: a step gives back 41.7 mm, more than a hole; the two holes in one line are worst."""
    assert worst_chain(3, 22.0, 100.0, 60.0) == 44.0
    assert worst_chain(4, 22.0, 100.0, 60.0) == 44.0
    assert worst_chain(2, 22.0, 100.0, 60.0) == 22.0


def test_a_middling_stagger_takes_a_mixed_chain() -> None:
    """D = 22, s^2/4g = 15: straight 44, all four 88 - 45 = 43, two in line and a step to the fourth 66 - 15 = 51."""
    stagger = math.sqrt(15.0 * 4.0 * 60.0)
    assert_allclose(worst_chain(4, 22.0, stagger, 60.0), 51.0, rtol=EXACT)


def test_holes_in_named_parts() -> None:
    """Web holes in both channels, flange holes in all four flanges, or in one piece only."""
    gross = 2 * (226 * 9 + 2 * 80 * 12)
    assert_allclose(net(Hole(0.022, "web", number=2), pieces=LACED.pieces), gross - 2 * 2 * 22 * 9, rtol=EXACT)
    assert_allclose(net(Hole(0.022, "flange"), pieces=LACED.pieces), gross - 4 * 22 * 12, rtol=EXACT)
    one = Hole(0.022, "top flange", piece="channel 2")
    assert_allclose(net(one, pieces=LACED.pieces), gross - 22 * 12, rtol=EXACT)
    typed = Hole(0.022, thickness=0.02, number=2)
    assert_allclose(net(typed, pieces=LACED.pieces), gross - 2 * 22 * 20, rtol=EXACT)


def test_a_timber_is_bored_through_its_width_or_its_depth() -> None:
    timber = (Piece(SawnTimber(0.140, 0.190)),)
    assert_allclose(net(Hole(0.020), pieces=timber), 140 * 190 - 20 * 140, rtol=EXACT)
    assert_allclose(net(Hole(0.020, "depth"), pieces=timber), 140 * 190 - 20 * 190, rtol=EXACT)


def test_holes_follow_the_loss_of_their_part() -> None:
    section = Section("hanger", (PLATE,), holes=(Hole(0.022, number=2),)).with_cut("", Cut(amount=0.003))
    assert_allclose(1e6 * section.net_area, (300 - 44) * 7, rtol=EXACT)
    typed = Section("hanger", (PLATE,), holes=(Hole(0.022, thickness=0.008),)).with_cut("", Cut(amount=0.003))
    assert_allclose(1e6 * typed.net_area, 300 * 7 - 22 * 7, rtol=EXACT)
    gone = Section("angle", (Piece(ANGLE),), holes=(Hole(0.02, "second leg"),)).with_cut(
        "", Cut("second leg", fraction=1)
    )
    assert_allclose(1e6 * gone.net_area, 90 * 8, rtol=EXACT)


def test_punched_if_any_is() -> None:
    holes = Hole(0.022, "web"), Hole(0.022, "flange", punched=True)
    assert Section("laced", LACED.pieces, holes=holes).punched
    assert not Section("laced", LACED.pieces, holes=holes[:1]).punched


@pytest.mark.parametrize(
    ("make", "said"),
    [
        (lambda: Hole(0.0), r"hole\.diameter: must be above 0, got 0 m"),
        (lambda: Hole(0.02, thickness=-0.01), r"hole\.thickness: must be above 0, got -0\.01 m"),
        (lambda: Hole(0.02, gauge=-0.01), r"hole\.gauge: must be 0 or more, got -0\.01 m"),
        (lambda: Hole(0.02, number=0), r"hole\.number: at least 1 hole is in a line, got 0"),
        (lambda: Hole(0.02, number=2, stagger=0.05), r"hole\.stagger: a stagger of 0\.05 m needs a gauge"),
        (lambda: Hole(0.02, gauge=0.05, stagger=0.05), r"hole\.stagger: .* at least 2 holes, got 0\.05 m and 1"),
        (lambda: net(Hole(0.31)), r"net: hole in plate: thickness: holes 0\.31 m wide over all do not fit .* 0\.3 m"),
        (lambda: net(Hole(0.022, number=4, gauge=0.1)), r"holes 0\.322 m wide over all do not fit its width, 0\.3 m"),
        (lambda: net(Hole(0.022, thickness=0.02)), r"holes through 0\.02 m are deeper than the part, 0\.01 m"),
        (lambda: net(Hole(0.01), pieces=(Piece(RoundBar(0.03)),)), r"hole in round bar: diameter: a round bar takes"),
        (lambda: net(Hole(0.1, number=9, thickness=0.01), pieces=LACED.pieces), r"net: holes: its holes take out 0\."),
    ],
)  # fmt: skip
def test_impossible_holes(make: object, said: str) -> None:
    assert callable(make)
    with pytest.raises(InputError, match=said):
        make()


def test_holes_of_nothing() -> None:
    with pytest.raises(UnknownNameError, match=r'hole\.part: "wbe" is no part that can be holed.*nearest: "web"'):
        net(Hole(0.02, "wbe"), pieces=LACED.pieces)
    with pytest.raises(UnknownNameError, match=r'hole\.piece: "channel 3" is no piece of the section'):
        net(Hole(0.02, "web", piece="channel 3"), pieces=LACED.pieces)
    with pytest.raises(MissingDataError, match=r"hole\.part: name the part that is holed, or type the thickness"):
        net(Hole(0.02), pieces=LACED.pieces)


def test_eyebars_and_rods_at_their_ends() -> None:
    bars = tuple(Piece(Eyebar(0.1, 0.02, head_width=0.18, pin_hole=0.09), x) for x in (-0.05, 0.05))
    section = Section("bottom chord", bars, sharing=1.15)
    assert_allclose([section.gross_area, section.net_area], [0.004, 2 * 0.09 * 0.02], rtol=EXACT)
    rod = Section("counter", (Piece(ThreadedRod(0.032, 0.027)),))
    assert_allclose([rod.gross_area, rod.net_area], math.pi * 0.0135**2, rtol=EXACT)
    assert_allclose(rod.properties.area, math.pi * 0.016**2, rtol=EXACT)


def test_an_eyebar_without_its_head_has_no_net_section() -> None:
    section = Section("bottom chord", (Piece(Eyebar(0.1, 0.02, head_width=0.2)),))
    assert_allclose(section.gross_area, 0.002, rtol=EXACT)
    with pytest.raises(MissingDataError, match="bottom chord: eyebar: its net section needs pin_hole of the eyebar"):
        _ = section.net_area


def test_nothing_left_is_no_section() -> None:
    with pytest.raises(InputError, match="bar: pieces: no metal is left, 0 m2"):
        Section("bar", (Piece(Flat(0.1, 0.02)),)).with_cut("", Cut(fraction=1.0))


def test_cuts_of_unknown_pieces_and_parts() -> None:
    with pytest.raises(
        UnknownNameError, match=r'laced: "chanel 1" is no piece of the section: "channel 1".*nearest: "ch'
    ):
        LACED.with_cut("chanel 1", Cut("web", amount=0.001))
    with pytest.raises(UnknownNameError, match=r'laced: channel 1: "leg" is no part of the channel'):
        LACED.with_cut("", Cut("leg", amount=0.001))
    mixed = Section("mixed", (*LACED.pieces, COVER)).with_cut("", Cut("web", amount=0.001))  # the plate has no web
    assert_allclose(1e6 * mixed.gross_area, 2 * (226 * 8 + 2 * 960) + 4000, rtol=EXACT)


# ------------------------------------------------------------------ area and radii as typed

TYPED = AreaAndRadii("post", 0.005, 0.08, 0.05, r_min=0.04, net=0.004, s_x=3e-4, z_x=3.5e-4, torsion=2e-7)


def test_typed_properties() -> None:
    ours = TYPED.properties
    assert_allclose([ours.r_x, ours.r_y, ours.r_min, ours.area], [0.08, 0.05, 0.04, 0.005], rtol=EXACT)
    assert_allclose([ours.s_x, ours.s_x_top, ours.z_x, ours.torsion], [3e-4, 3e-4, 3.5e-4, 2e-7], rtol=EXACT)
    assert (TYPED.net_area, TYPED.gross_area, TYPED.plates, TYPED.punched) == (0.004, 0.005, (), False)
    assert [note.code for note in TYPED.notes] == ["plates-not-known"]
    assert_allclose(AreaAndRadii("post", 0.005, 0.08, 0.05).properties.r_min, 0.05, rtol=EXACT)


def test_what_was_not_typed_is_asked_for() -> None:
    with pytest.raises(MissingDataError, match="post: s_y_left was not typed"):
        _ = TYPED.properties.s_y
    with pytest.raises(MissingDataError, match="post: its net area was not typed: type net"):
        _ = AreaAndRadii("post", 0.005, 0.08, 0.05).net_area


def test_typed_values_shrink_evenly() -> None:
    lost = TYPED.with_cut("", Cut(fraction=0.2)).with_cut("", Cut(fraction=0.1))
    assert_allclose([lost.gross_area, lost.net_area], [0.0035, 0.0028], rtol=EXACT)
    ours = lost.properties
    assert_allclose([ours.r_x, ours.z_x, ours.torsion], [0.08, 0.7 * 3.5e-4, 0.7**3 * 2e-7], rtol=EXACT)
    assert [note.code for note in lost.notes] == ["plates-not-known", "loss-taken-evenly"]


@pytest.mark.parametrize(
    ("change", "said"),
    [
        ({"area": 0.0}, r"post: area: must be above 0, got 0 m2"),
        ({"r_x": -0.1}, r"post: r_x: must be above 0, got -0\.1 m"),
        ({"r_min": 0.06}, r"post: r_min: is at most r_x and r_y, 0\.05 m, got 0\.06 m"),
        ({"net": 0.006}, r"post: net: the net area is at most the gross, 0\.005 m2, got 0\.006 m2"),
        ({"z_x": 2e-4}, r"post: z_x: a plastic modulus is at least the elastic one, 0\.0003 m3, got 0\.0002 m3"),
        ({"shear_offset": (math.nan, 0.0)}, r"post: shear_offset: must be finite"),
        ({"left": 0.0}, r"post: left: the part left is above 0 and at most 1, got 0"),
        ({"sharing": 0.5}, r"post: sharing: worst bar over mean is at least 1, got 0\.5"),
    ],
)
def test_impossible_typed_values(change: dict[str, float], said: str) -> None:
    values = {"area": 0.005, "r_x": 0.08, "r_y": 0.05, "s_x": 3e-4} | change
    with pytest.raises(InputError, match=said):
        AreaAndRadii("post", **values)  # type: ignore[arg-type]  # wrong values are the check


@pytest.mark.parametrize(
    ("piece", "cut", "said"),
    [
        ("web", Cut(fraction=0.1), 'only a fraction of the area can be lost of typed area and radii, got "web"'),
        ("", Cut("leg", fraction=0.1), 'got "leg"; type its shapes'),
        ("", Cut(amount=0.002), r'got "0\.002 m"'),
        ("", Cut(fraction=1.0), "post: 1 of its area is lost: nothing is left"),
    ],
)
def test_what_has_no_shape_loses_no_thickness(piece: str, cut: Cut, said: str) -> None:
    with pytest.raises(InputError, match=said):
        TYPED.with_cut(piece, cut)
