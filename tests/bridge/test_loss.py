"""Section loss: which limit looks where, what adds up, what may be left out and is told, and what is refused."""

from __future__ import annotations

import math
import pickle

import pytest
from numpy.testing import assert_allclose

from movload.bridge.loss import PLACES, AsFound, Loss, at_middle, least_gross, net_at_ends, with_loss
from movload.bridge.section import Section
from movload.bridge.section_bars import Eyebar, Flat, RoundBar
from movload.bridge.section_holes import Hole
from movload.bridge.section_piece import Piece
from movload.bridge.section_typed import AreaAndRadii
from movload.bridge.shapes import Channel, Plate
from movload.errors import InputError, MissingDataError, UnknownNameError
from movload.units import to_si

EXACT = 1e-12  # a dozen roundings
FLAT = Section("hanger", (Piece(Flat(0.100, 0.020)),), holes=(Hole(0.022, punched=True),))
CHANNEL = Channel(0.250, 0.080, 0.009, 0.012)
CHORD = Section(
    "top chord",
    (
        Piece(CHANNEL, 0.1, name="left"),
        Piece(CHANNEL, -0.1, mirror=True, name="right"),
        Piece(Plate(0.4, 0.01), 0, 0.13),
    ),
    holes=(Hole(0.022, "web", number=2),),
    sharing=1.1,
    shear_lag=0.9,
)


def areas(*losses: Loss) -> tuple[float, float, float]:
    """Return the flat's least gross, its area at mid length and its least net [mm2]."""
    gross, net = least_gross(FLAT, losses).area, net_at_ends(FLAT, losses).area
    return 1e6 * gross, 1e6 * at_middle(FLAT, losses).gross_area, 1e6 * net


# ------------------------------------------------------------------ where a loss counts


@pytest.mark.parametrize(
    ("loss", "expected"),
    [
        (Loss("all along", amount=0.002), (1800, 1800, 78 * 18)),
        (Loss("middle", amount=0.002), (1800, 1800, 78 * 20)),
        (Loss("start end", amount=0.002), (1800, 2000, 78 * 18)),
        (Loss("end end", amount=0.002), (1800, 2000, 78 * 18)),
        (Loss("end end", amount=0.002, inside_connection=True), (2000, 2000, 78 * 18)),
        (Loss("middle", part="width", amount=0.010), (1800, 1800, 78 * 20)),
        (Loss("middle", fraction=0.3), (1400, 1400, 78 * 20)),
    ],
)
def test_each_limit_looks_where_it_happens(loss: Loss, expected: tuple[float, float, float]) -> None:
    assert_allclose(areas(loss), expected, rtol=EXACT)


def test_losses_at_one_place_add_up() -> None:
    here = Loss("middle", amount=0.002), Loss("middle", amount=0.003), Loss("all along", amount=0.001)
    assert_allclose(areas(*here), (1400, 1400, 78 * 19), rtol=EXACT)


def test_losses_at_different_places_do_not() -> None:
    apart = Loss("start end", amount=0.004), Loss("middle", amount=0.003), Loss("end end", amount=0.002)
    assert_allclose(areas(*apart), (1600, 1700, 78 * 16), rtol=EXACT)


def test_the_place_is_told_and_as_new_stands_beside() -> None:
    losses = Loss("end end", amount=0.004), Loss("middle", amount=0.003)
    gross, net = least_gross(FLAT, losses), net_at_ends(FLAT, losses)
    assert (gross.place, net.place) == ("end end", "end end")
    assert_allclose([gross.as_new, net.as_new], [0.002, 78 * 20e-6], rtol=EXACT)
    assert least_gross(FLAT, ()).place == ""
    assert least_gross(FLAT, [Loss(amount=0.001)]).place == ""
    assert least_gross(FLAT, [Loss("middle", amount=0.001)]).place == "middle"


def test_what_is_left_out_of_yield_is_told() -> None:
    inside = Loss("start end", part="web", amount=0.003, inside_connection=True)
    found = AsFound(CHORD, (inside, Loss("middle", fraction=0.1)))
    assert found.gross.left_out == (inside,)
    assert found.gross.place == "middle"
    (note,) = (note for note in found.notes if note.code == "loss-left-out-of-yield")
    assert note.subject == "top chord"
    assert note.text.startswith("3 mm off web, start end: said to lie inside the connection")
    assert [note.code for note in AsFound(CHORD).notes] == ["fillets-left-out"]


def test_a_loss_of_one_piece() -> None:
    """Left web 9 to 6 mm along 226 mm; the plate keeps its 4000 mm2."""
    found = AsFound(CHORD, (Loss("start end", piece="left", part="web", amount=0.003),))
    one = 226 * 9 + 2 * 80 * 12
    assert_allclose(1e6 * found.gross.area, 2 * one + 4000 - 226 * 3, rtol=EXACT)
    assert_allclose(1e6 * found.gross.as_new, 2 * one + 4000, rtol=EXACT)
    assert_allclose(1e6 * found.net.area, 2 * one + 4000 - 226 * 3 - 44 * (9 + 6), rtol=EXACT)
    assert found.middle == CHORD


def test_factors_stay_with_a_section_that_lost_metal() -> None:
    reduced = with_loss(CHORD, [Loss(fraction=0.2)], "middle")
    assert (reduced.sharing, reduced.shear_lag, reduced.title) == (1.1, 0.9, "top chord")


def test_buckling_uses_the_loss_at_mid_length() -> None:
    lost_at_end = at_middle(CHORD, [Loss("end end", fraction=0.5)]).properties
    lost_at_middle = at_middle(CHORD, [Loss("middle", piece="plate", fraction=0.5)]).properties
    assert lost_at_end == CHORD.properties
    assert lost_at_middle.i_x < CHORD.properties.i_x


def test_typed_area_and_radii_lose_a_fraction() -> None:
    post = AreaAndRadii("post", 0.005, 0.08, 0.05, net=0.004)
    found = AsFound(post, (Loss("start end", fraction=0.3), Loss("middle", fraction=0.1)))
    assert_allclose([found.gross.area, found.middle.gross_area, found.net.area], [0.0035, 0.0045, 0.0028], rtol=EXACT)
    assert found.middle.properties.r_x == 0.08
    with pytest.raises(InputError, match=r'start end: post: only a fraction .* got "0\.002 m"; type its shapes'):
        AsFound(post, (Loss("start end", amount=0.002),))


def test_an_old_eyebar_is_governed_by_yield_on_its_lost_section() -> None:
    """Iron of 26/48 ksi, 4 x 3/4 in, 30 % gone beside the head; phi of yield 0.95 and of fracture 0.80.

    The phi are AASHTO LRFD 6.5.4.2's, from memory: 0.95 x 26 x 0.7 x 3 in2 = 51.9 kip against the least net section,
    which is the lost shank too, 0.80 x 48 x 0.7 x 3 = 80.6 kip. (The head beside the pin, 3.75 in2, is more.)
    """
    eyebar = Eyebar(*(to_si(text, "section") for text in ("4 in", "3/4 in")), head_width=0.2286, pin_hole=0.1016)
    found = AsFound(Section("bottom chord", (Piece(eyebar),)), (Loss("start end", part="shank", fraction=0.3),))
    in2, kip = 0.0254**2, to_si("1 kip", "force")
    fy, fu = 26.0 * kip / in2, 48.0 * kip / in2
    yielding, fracture = 0.95 * fy * found.gross.area, 0.80 * fu * found.net.area
    assert_allclose([yielding / kip, fracture / kip], [0.95 * 26 * 2.1, 0.80 * 48 * 2.1], rtol=EXACT)
    assert yielding < fracture
    assert_allclose(found.net.as_new, 3.0 * in2, rtol=EXACT)
    assert (found.gross.place, found.net.place) == ("start end", "start end")


def test_as_found_is_a_value() -> None:
    found = AsFound(CHORD, (Loss("start end", fraction=0.1),))
    assert pickle.loads(pickle.dumps(found)) == found  # noqa: S301  # its own bytes
    assert hash(found) == hash(AsFound(CHORD, (Loss("start end", fraction=0.1),)))


def test_losses_in_words() -> None:
    assert Loss("middle", piece="left", part="web", amount=0.0025).text == "2.5 mm off left, web, middle"
    assert Loss(fraction=0.125).text == "12.5 % off the whole section, all along"


# ------------------------------------------------------------------ what is refused


@pytest.mark.parametrize(
    ("make", "said"),
    [
        (lambda: Loss("middle"), r"loss: type either an amount or a fraction above 0, got 0 m and 0"),
        (lambda: Loss(amount=0.001, fraction=0.1), r"loss: type either .* got 0\.001 m and 0\.1"),
        (lambda: Loss(amount=-0.001), r"loss\.amount: must be above 0, got -0\.001 m"),
        (lambda: Loss(amount=math.inf), r"loss\.amount: must be above 0, got inf m"),
        (lambda: Loss(fraction=1.5), r"loss\.fraction: at most all of it can be lost, 1, got 1\.5"),
        (lambda: Loss(fraction=math.nan), r"loss\.fraction: must be above 0, got nan"),
        (lambda: Loss("middle", fraction=0.1, inside_connection=True), r'connection: only a loss .* got "middle"'),
        (lambda: Loss(fraction=0.1, inside_connection=True), r'lies inside a connection, got "all along"'),
    ],
)  # fmt: skip
def test_impossible_losses(make: object, said: str) -> None:
    assert callable(make)
    with pytest.raises(InputError, match=said):
        make()


def test_a_place_that_is_none() -> None:
    with pytest.raises(UnknownNameError, match=r'loss\.where: "end" is no place along .*nearest: "end end"'):
        Loss("end", amount=0.001)


def test_together_more_than_there_is() -> None:
    losses = (Loss("start end", amount=0.006), Loss(fraction=0.8))
    with pytest.raises(
        InputError,
        match=r"hanger: flat: thickness: losses of 0\.022 m together are more than the 0\.02 m of metal there",
    ):
        AsFound(FLAT, losses)
    assert_allclose(at_middle(FLAT, losses).gross_area, 0.0004, rtol=1e-9)


def test_the_place_of_a_loss_beyond_the_metal_is_named() -> None:
    with pytest.raises(InputError, match=r"end end: top chord: right: web: losses of 0\.01 m"):
        AsFound(CHORD, (Loss("end end", piece="right", part="web", amount=0.010),))
    with pytest.raises(UnknownNameError, match=r'all along: top chord: "middle" is no piece'):
        AsFound(CHORD, (Loss(piece="middle", amount=0.001),))


def test_missing_heads_are_asked_for_only_by_fracture() -> None:
    found = AsFound(Section("bottom chord", (Piece(Eyebar(0.1, 0.02)),)), (Loss("middle", fraction=0.1),))
    assert_allclose(found.gross.area, 0.0018, rtol=EXACT)
    with pytest.raises(MissingDataError, match="needs head_width and pin_hole of the eyebar"):
        _ = found.net


def test_places() -> None:
    assert PLACES == ("start end", "middle", "end end")
    rod = Section("rod", (Piece(RoundBar(0.03)),))
    lost = [with_loss(rod, [Loss(place, fraction=0.1)], place).gross_area for place in PLACES]
    assert_allclose(lost, 0.9 * rod.gross_area, rtol=EXACT)
