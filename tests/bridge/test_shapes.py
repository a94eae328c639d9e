"""Shapes as measured: hand areas, names of parts, plates, metal taken off, and what no shape can be."""

from __future__ import annotations

import dataclasses
import math
import pickle
from typing import TYPE_CHECKING

import pytest
from numpy.testing import assert_allclose

from movload.bridge.section_bars import Eyebar, Flat, RoundBar, SawnTimber, ThreadedRod
from movload.bridge.section_elements import Cut, Rect
from movload.bridge.section_piece import Piece
from movload.bridge.shapes import Angle, Channel, ISection, Plate, RectangularTube, RoundTube
from movload.errors import InputError, UnknownNameError

if TYPE_CHECKING:
    from movload.bridge.section_shape import Shape

EXACT = 1e-12  # a dozen roundings
ANGLE = Angle(0.100, 0.075, 0.008)
CHANNEL = Channel(0.250, 0.080, 0.009, 0.012)
BEAM = ISection(0.300, 0.150, 0.008, 0.012, bottom_width=0.180, bottom_flange=0.015)
TUBE = RectangularTube(0.120, 0.180, 0.006)
PIPE = RoundTube(0.140, 0.005)
EYEBAR = Eyebar(0.100, 0.020, head_width=0.230, pin_hole=0.090)
ROD = ThreadedRod(0.032, 0.027)
TIMBER = SawnTimber(0.140, 0.190)

# Areas in mm2, part by part, added by hand.
AREAS = [
    (ANGLE, 100 * 8 + 67 * 8),
    (CHANNEL, 226 * 9 + 2 * 80 * 12),
    (BEAM, 150 * 12 + 180 * 15 + 273 * 8),
    (ISection(0.300, 0.150, 0.008, 0.012), 2 * 150 * 12 + 276 * 8),
    (TUBE, 120 * 180 - 108 * 168),
    (PIPE, math.pi * (70**2 - 65**2)),
    (Plate(0.300, 0.010), 3000),
    (Flat(0.080, 0.025), 2000),
    (EYEBAR, 2000),
    (RoundBar(0.030), math.pi * 225),
    (ROD, math.pi * 256),
    (TIMBER, 140 * 190),
]
SHAPES = [shape for shape, _ in AREAS]


def left(shape: Shape, *cuts: Cut) -> float:
    """Return the area left after cuts [mm2]."""
    return 1e6 * Piece(shape, cuts=cuts).area


@pytest.mark.parametrize(("shape", "area"), AREAS, ids=lambda value: getattr(value, "kind", ""))
def test_area_is_the_sum_of_its_parts(shape: Shape, area: float) -> None:
    assert_allclose(1e6 * Piece(shape).area, area, rtol=EXACT)


@pytest.mark.parametrize("shape", SHAPES, ids=lambda shape: shape.kind)
def test_shapes_are_values(shape: Shape) -> None:
    again = pickle.loads(pickle.dumps(shape))  # noqa: S301  # pickled here
    assert again == shape
    assert hash(again) == hash(shape)
    name = dataclasses.fields(shape)[0].name  # type: ignore[arg-type]  # every shape is a dataclass
    with pytest.raises(dataclasses.FrozenInstanceError):
        setattr(shape, name, 1.0)


def test_names_of_parts() -> None:
    names = {shape.kind: Piece(shape).part_names for shape in SHAPES}
    assert names == {
        "angle": ("first leg", "second leg"),
        "channel": ("web", "top flange", "bottom flange"),
        "I": ("web", "top flange", "bottom flange"),
        "rectangular tube": ("left wall", "right wall", "top wall", "bottom wall"),
        "round tube": ("wall",),
        "plate": ("thickness", "width"),
        "flat": ("thickness", "width"),
        "eyebar": ("shank", "shank width", "head"),
        "round bar": ("diameter",),
        "threaded rod": ("diameter", "thread"),
        "timber": ("width", "depth"),
    }


# ------------------------------------------------------------------ metal taken off


@pytest.mark.parametrize(
    ("shape", "cut", "area"),
    [
        (ANGLE, Cut("first leg", amount=0.002), 100 * 6 + 67 * 8),
        (ANGLE, Cut("leg", amount=0.002), 100 * 6 + 67 * 6),
        (ANGLE, Cut(fraction=0.25), 0.75 * (800 + 536)),
        (CHANNEL, Cut("web", fraction=1 / 3), 226 * 6 + 2 * 960),
        (CHANNEL, Cut("flange", amount=0.003), 226 * 9 + 2 * 80 * 9),
        (TUBE, Cut("wall", amount=0.001), 2 * 120 * 5 + 2 * 168 * 5),
        (PIPE, Cut("wall", amount=0.002), math.pi * (68**2 - 65**2)),
        (PIPE, Cut(fraction=0.4), 0.6 * math.pi * (70**2 - 65**2)),
        (Flat(0.08, 0.025), Cut("width", amount=0.010), 70 * 25),
        (Flat(0.08, 0.025), Cut(amount=0.005), 80 * 20),
        (Flat(0.08, 0.025), Cut("width", fraction=0.1), 72 * 25),
        (RoundBar(0.030), Cut(amount=0.004), math.pi * 13**2),
        (RoundBar(0.030), Cut("diameter", fraction=0.3), 0.7 * math.pi * 225),
        (TIMBER, Cut(amount=0.020), 120 * 170),
        (TIMBER, Cut(fraction=0.19), 0.81 * 140 * 190),
        (TIMBER, Cut("depth", amount=0.040), 140 * 150),
    ],
    ids=lambda value: value.kind if hasattr(value, "kind") else "",
)
def test_what_a_loss_leaves(shape: Shape, cut: Cut, area: float) -> None:
    assert_allclose(left(shape, cut), area, rtol=EXACT)


def test_losses_of_one_part_add_up() -> None:
    cuts = Cut("web", amount=0.001), Cut("web", fraction=0.1), Cut(amount=0.002), Cut(fraction=0.2)
    web = (1 - 0.1 - 0.2) * 9 - 1 - 2
    flange = (1 - 0.2) * 12 - 2
    assert_allclose(left(CHANNEL, *cuts), 226 * web + 2 * 80 * flange, rtol=EXACT)


def test_a_leg_loses_its_back_and_the_web_of_an_i_both_faces() -> None:
    first, second = Piece(ANGLE, cuts=(Cut("leg", amount=0.002),)).elements
    assert isinstance(first, Rect)
    assert isinstance(second, Rect)
    assert_allclose([first.bottom, first.top, second.left, second.right], [0.002, 0.008, 0.002, 0.008], rtol=EXACT)
    web = Piece(BEAM, cuts=(Cut("web", amount=0.002),)).elements[0]
    assert isinstance(web, Rect)
    assert_allclose([web.left, web.right], [-0.003, 0.003], rtol=EXACT)


def test_a_part_may_be_wholly_gone() -> None:
    assert_allclose(left(ANGLE, Cut("second leg", fraction=1.0)), 800, rtol=EXACT)
    assert_allclose(left(ANGLE, Cut("second leg", amount=0.008)), 800, rtol=EXACT)
    assert left(PIPE, Cut("wall", fraction=0.6), Cut("wall", fraction=0.4)) == 0.0


def test_thread_and_head_are_lost_with_the_whole() -> None:
    assert_allclose(Piece(ROD, cuts=(Cut(amount=0.003),)).gross_area, math.pi * 0.012**2, rtol=EXACT)
    assert_allclose(Piece(ROD, cuts=(Cut("diameter", amount=0.003),)).gross_area, math.pi * 0.0135**2, rtol=EXACT)
    assert_allclose(Piece(EYEBAR, cuts=(Cut("head", amount=0.010),)).net_area, 0.140 * 0.010, rtol=EXACT)
    assert_allclose(Piece(EYEBAR, cuts=(Cut("shank", amount=0.005),)).net_area, 0.100 * 0.015, rtol=EXACT)


@pytest.mark.parametrize(
    ("shape", "cuts", "said"),
    [
        (CHANNEL, (Cut("web", amount=0.010),), r"channel: web: losses of 0\.01 m together are more than the 0\.009 m"),
        (CHANNEL, (Cut("web", fraction=0.6), Cut(fraction=0.5)), "channel: web: losses of 0.0099 m together"),
        (TIMBER, (Cut(fraction=1.2),), r"timber: width: losses of 0\.168 m together are more than the 0\.14 m"),
        (PIPE, (Cut("wall", amount=0.006),), r"round tube: wall: losses of 0\.006 m and 0 of the area .* 0\.005 m"),
        (RoundBar(0.03), (Cut(fraction=1.1),), r"round bar: diameter: losses of 0 m and 1\.1 of the area"),
        (ROD, (Cut(amount=0.030),), r"threaded rod: thread: losses of 0\.03 m .* 0\.027 m"),
    ],
)
def test_no_more_is_lost_than_was_there(shape: Shape, cuts: tuple[Cut, ...], said: str) -> None:
    with pytest.raises(InputError, match=said):
        Piece(shape, cuts=cuts)


def test_a_part_that_is_not_there_is_not_lost() -> None:
    with pytest.raises(UnknownNameError, match=r'angle: "web" is no part of the angle: "first leg", "second leg"'):
        Piece(ANGLE, cuts=(Cut("web", amount=0.001),))
    with pytest.raises(UnknownNameError, match=r'nearest: "top flange"'):
        Piece(BEAM, cuts=(Cut("top flage", amount=0.001),))


# ------------------------------------------------------------------ plates and necks


def test_plates() -> None:
    """Leg and channel flange in full, half of an I's flange, webs and walls clear, D of a round wall."""
    widths = {
        shape.kind: [(plate.part, round(1e3 * plate.width, 6), plate.edges) for plate in Piece(shape).plates]
        for shape in (ANGLE, CHANNEL, BEAM, TUBE, PIPE, Plate(0.3, 0.01, edges=1, clear=0.25), EYEBAR, TIMBER, ROD)
    }
    assert widths == {
        "angle": [("first leg", 100, 1), ("second leg", 75, 1)],
        "channel": [("web", 226, 2), ("top flange", 80, 1), ("bottom flange", 80, 1)],
        "I": [("web", 273, 2), ("top flange", 75, 1), ("bottom flange", 90, 1)],
        "rectangular tube": [("left wall", 168, 2), ("right wall", 168, 2), ("top wall", 108, 2),
                             ("bottom wall", 108, 2)],
        "round tube": [("wall", 140, 0)],
        "plate": [("thickness", 250, 1)],
        "eyebar": [], "timber": [], "threaded rod": [],
    }  # fmt: skip


def test_plates_are_as_thick_as_found() -> None:
    plates = Piece(BEAM, cuts=(Cut("web", amount=0.003), Cut("bottom flange", fraction=1.0))).plates
    assert [plate.part for plate in plates] == ["web", "top flange"]
    assert_allclose([plate.thickness for plate in plates], [0.005, 0.012], rtol=EXACT)


def test_necks() -> None:
    """An eyebar's head beside the pin, a rod's thread: net; only the thread is gross too."""
    assert_allclose(Piece(Eyebar(0.1, 0.02, head_width=0.18, pin_hole=0.09)).net_area, 0.09 * 0.02, rtol=EXACT)
    thick = Eyebar(0.1, 0.02, head_width=0.18, pin_hole=0.09, head_thickness=0.03)
    assert_allclose(Piece(thick).net_area, 0.1 * 0.02, rtol=EXACT)
    assert_allclose(Piece(EYEBAR).gross_area, 0.1 * 0.02, rtol=EXACT)
    root, upset = math.pi * 0.0135**2, ThreadedRod(0.032, 0.036)
    assert_allclose([Piece(ROD).net_area, Piece(ROD).gross_area], root, rtol=EXACT)
    assert_allclose([Piece(upset).net_area, Piece(upset).gross_area], math.pi * 0.016**2, rtol=EXACT)


# ------------------------------------------------------------------ what no shape can be


@pytest.mark.parametrize(
    ("make", "said"),
    [
        (lambda: Angle(0.1, 0.075, 0.040), r"angle\.thickness: must be below half the shorter leg, 0\.0375 m"),
        (lambda: Angle(-0.1, 0.075, 0.008), r"angle\.first_leg: must be above 0, got -0\.1 m"),
        (lambda: Channel(0.25, 0.08, 0.009, 0.13), r"channel\.flange: must be below half the depth, 0\.125 m, got"),
        (lambda: Channel(0.25, 0.08, 0.05, 0.01), r"channel\.web: must be below half the flange's width, 0\.04 m"),
        (lambda: ISection(0.3, 0.15, 0.0, 0.01), r"I\.web: must be above 0, got 0 m"),
        (lambda: ISection(0.3, 0.15, 0.01, 0.01, bottom_flange=0.15), r"I\.bottom_flange: must be below half"),
        (lambda: ISection(0.3, 0.15, 0.01, 0.01, bottom_flange=0.0), r"I\.bottom_flange: must be above 0, got 0 m"),
        (lambda: ISection(0.3, 0.15, 0.01, 0.01, bottom_width=0.02), r"I\.web: must be below half the flange's width"),
        (lambda: RectangularTube(0.1, 0.2, 0.05), r"rectangular tube\.wall: must be below half the smaller side"),
        (lambda: RoundTube(0.1, 0.05), r"round tube\.wall: must be below half the diameter, 0\.05 m, got 0\.05 m"),
        (lambda: RoundTube(math.nan, 0.05), r"round tube\.diameter: must be above 0, got nan m"),
        (lambda: Plate(0.01, 0.3), r"plate\.thickness: must be at most its width, 0\.01 m, got 0\.3 m"),
        (lambda: Plate(0.3, 0.01, clear=0.4), r"plate\.clear: must be at most its width"),
        (lambda: Plate(0.3, 0.01, clear=0.0), r"plate\.clear: must be above 0, got 0 m"),
        (lambda: Flat(math.inf, 0.01), r"flat\.width: must be above 0, got inf m"),
        (lambda: Eyebar(0.1, 0.02, head_width=0.09), r"eyebar\.head_width: a head is at least as wide as its shank"),
        (lambda: Eyebar(0.1, 0.02, head_width=0.2, pin_hole=0.2), r"eyebar\.pin_hole: must be below the head's width"),
        (lambda: Eyebar(0.1, 0.02, head_thickness=-0.02), r"eyebar\.head_thickness: must be above 0, got -0\.02 m"),
        (lambda: RoundBar(-0.03), r"round bar\.diameter: must be above 0, got -0\.03 m"),
        (lambda: ThreadedRod(0.03, 0.0), r"threaded rod\.root: must be above 0, got 0 m"),
        (lambda: SawnTimber(0.14, -0.19), r"timber\.depth: must be above 0, got -0\.19 m"),
    ],
)  # fmt: skip
def test_impossible_sizes_are_refused(make: object, said: str) -> None:
    assert callable(make)
    with pytest.raises(InputError, match=said):
        make()


def test_square_bars_are_flats() -> None:
    assert_allclose(Piece(Flat(0.025, 0.025)).area, 625e-6, rtol=EXACT)


def test_places_are_numbers() -> None:
    with pytest.raises(InputError, match=r"angle\.turn: must be a finite number, got nan degrees"):
        Piece(ANGLE, turn=math.nan)
    with pytest.raises(InputError, match=r"left\.x: must be a finite number, got inf m"):
        Piece(ANGLE, math.inf, name="left")


def test_a_quarter_turn_keeps_rectangles_square() -> None:
    for turn in (90.0, 180.0, 270.0, -90.0, 450.0):
        for region in Piece(ANGLE, 0.1, -0.2, turn=turn).regions:
            xs, ys = zip(*region.corners, strict=True)  # type: ignore[union-attr]  # an angle has no rounds
            assert len(set(xs)) == len(set(ys)) == 2


def test_mirrored_then_turned() -> None:
    piece = Piece(ANGLE, 1.0, 2.0, turn=90.0, mirror=True)
    assert_allclose(piece.placed((0.1, 0.0)), (1.0, 1.9), rtol=EXACT)
    assert_allclose(piece.placed((0.0, 0.075)), (0.925, 2.0), rtol=EXACT)
