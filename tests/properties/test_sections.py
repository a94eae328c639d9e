"""Laws of sections: losing metal never adds area or stiffness, and no property depends on how a section is drawn."""

from __future__ import annotations

import math
from itertools import combinations, pairwise
from typing import TYPE_CHECKING

import numpy as np
import pytest
from hypothesis import assume, given, settings
from hypothesis import strategies as st
from numpy.testing import assert_allclose

from movload.bridge.loss import PLACES, AsFound, Loss, with_loss
from movload.bridge.section import Section
from movload.bridge.section_bars import Eyebar, Flat, RoundBar, SawnTimber, ThreadedRod
from movload.bridge.section_elements import Cut
from movload.bridge.section_holes import Hole, worst_chain
from movload.bridge.section_piece import Piece
from movload.bridge.shapes import Angle, Channel, ISection, Plate, RectangularTube, RoundTube

if TYPE_CHECKING:
    from movload.bridge.section_properties import Properties
    from movload.bridge.section_shape import Shape

EXACT = 1e-11  # a turn by a sine and a cosine, then a few dozen sums
MORE = 1.0 + 1e-12  # what round-off may add to what cannot grow
sizes = st.floats(0.05, 0.4)  # m
slim = st.floats(0.02, 0.45)  # thickness of the size it must stay below half of
turns = st.floats(-180.0, 180.0) | st.sampled_from([0.0, 90.0, 180.0, -90.0])
fractions = st.floats(0.01, 0.8)


@st.composite
def shapes(draw: st.DrawFn) -> Shape:
    """Draw a shape of any kind with any proportions it can have."""
    a, b, t, u = draw(sizes), draw(sizes), draw(slim), draw(slim)
    kinds: list[Shape] = [
        Angle(a, b, t * min(a, b)),
        Channel(a, b, u * b, t * a),
        ISection(a, b, u * b * 0.5, t * a, bottom_width=0.75 * b, bottom_flange=0.8 * t * a),
        RectangularTube(a, b, t * min(a, b)),
        RoundTube(a, t * a),
        Plate(a, t * a),
        Flat(a, t * a),
        Eyebar(a, t * a, head_width=2.1 * a, pin_hole=a * (0.5 + u)),
        RoundBar(t * a),
        ThreadedRod(t * a, (0.8 + u) * t * a),
        SawnTimber(a, b),
    ]
    return draw(st.sampled_from(kinds))


@st.composite
def sections(draw: st.DrawFn) -> Section:
    """Draw one to three pieces apart from each other, turned and mirrored anyhow."""
    drawn = draw(st.lists(st.tuples(shapes(), turns, st.booleans()), min_size=1, max_size=3))
    # No shape reaches farther than 0.6 m from its reference point (the diagonal of 0.4 by 0.4).
    pieces = [Piece(shape, 1.2 * i, turn=turn, mirror=mirror) for i, (shape, turn, mirror) in enumerate(drawn)]
    return Section("drawn", tuple(pieces))


@st.composite
def cuts(draw: st.DrawFn, section: Section) -> tuple[str, Cut]:
    """Draw a loss that leaves something of a part of a piece, or of everything."""
    piece = draw(st.sampled_from(section.pieces))
    part = draw(st.sampled_from(("", *piece.part_names)))
    if draw(st.booleans()):
        return piece.name, Cut(part, fraction=draw(fractions))
    least = min(element.thickness for element in (*piece.elements, *piece.neck))
    return piece.name, Cut(part, amount=draw(st.floats(0.01, 0.9)) * least)


def never_grows(ours: Properties) -> tuple[float, ...]:
    """Return what losing metal can only lessen: each is the least integral of something positive over the metal."""
    return ours.area, ours.i_x, ours.i_y, ours.i_min, ours.z_x, ours.z_y, ours.torsion


@given(st.data())
def test_losing_metal_adds_nothing(data: st.DataObject) -> None:
    section = data.draw(sections())
    piece, cut = data.draw(cuts(section))
    lost = section.with_cut(piece, cut)
    for before, after in zip(never_grows(section.properties), never_grows(lost.properties), strict=True):
        assert after <= before * MORE
    assert lost.gross_area <= section.gross_area * MORE
    assert lost.net_area <= section.net_area * MORE


@given(st.data())
def test_losing_more_leaves_less(data: st.DataObject) -> None:
    section = data.draw(sections())
    piece, cut = data.draw(cuts(section))
    share = data.draw(st.floats(0.0, 1.0))
    part = Cut(cut.part, amount=share * cut.amount, fraction=share * cut.fraction)
    less, more = section.with_cut(piece, part), section.with_cut(piece, cut)
    for few, many in zip(never_grows(less.properties), never_grows(more.properties), strict=True):
        assert many <= few * MORE


@given(st.data())
def test_a_fraction_is_of_the_area(data: st.DataObject) -> None:
    section = data.draw(sections())
    piece = data.draw(st.sampled_from(section.pieces))
    fraction = data.draw(fractions)
    lost = section.with_cut(piece.name, Cut(fraction=fraction))
    assert_allclose(section.properties.area - lost.properties.area, fraction * piece.area, rtol=1e-9)


@given(st.data())
def test_the_order_of_losses_does_not_matter(data: st.DataObject) -> None:
    section = data.draw(sections())
    first, second = data.draw(cuts(section)), data.draw(cuts(section))
    halves = [
        (piece, Cut(cut.part, amount=cut.amount / 2, fraction=cut.fraction / 2)) for piece, cut in (first, second)
    ]
    one = section.with_cut(*halves[0]).with_cut(*halves[1])
    other = section.with_cut(*halves[1]).with_cut(*halves[0])
    assert_allclose(never_grows(one.properties), never_grows(other.properties), rtol=EXACT)


@given(st.data())
def test_the_least_gross_section_is_the_least_of_every_place(data: st.DataObject) -> None:
    """Losses at different places never add up; a loss said to lie inside a connection only counts in the net."""
    section = data.draw(sections())
    drawn = data.draw(st.lists(st.tuples(st.sampled_from(PLACES), st.floats(0.01, 0.3), st.booleans()), max_size=3))
    losses = [
        Loss(where, fraction=fraction, inside_connection=inside and where != "middle")
        for where, fraction, inside in drawn
    ]
    found = AsFound(section, tuple(losses))
    counted = [loss for loss in losses if not loss.inside_connection]
    assert found.gross.area == min(with_loss(section, counted, place).gross_area for place in PLACES)
    assert found.gross.area <= found.middle.gross_area
    assert found.gross.left_out == tuple(loss for loss in losses if loss.inside_connection)
    worst = max((sum(loss.fraction for loss in counted if loss.where == place) for place in PLACES), default=0.0)
    assert_allclose(found.gross.area, (1.0 - worst) * section.gross_area, rtol=1e-9)


# ------------------------------------------------------------------ how it is drawn does not matter


@given(shapes(), turns, st.booleans(), st.tuples(st.floats(-1.0, 1.0), st.floats(-1.0, 1.0)))
def test_turning_mirroring_and_moving_change_nothing_but_axes(
    shape: Shape,
    turn: float,
    mirror: bool,
    at: tuple[float, float],
) -> None:
    plain = Section("plain", (Piece(shape),)).properties
    moved = Section("moved", (Piece(shape, *at, turn=turn, mirror=mirror),)).properties
    for one, other in (
        (plain.area, moved.area),
        (plain.i_x + plain.i_y, moved.i_x + moved.i_y),
        (plain.i_max, moved.i_max),
        (plain.torsion, moved.torsion),
        (plain.warping, moved.warping),
    ):
        assert_allclose(other, one, rtol=1e-9)
    assert_allclose(moved.i_min, plain.i_min, rtol=1e-9, atol=1e-12 * plain.i_max)
    assert_allclose(math.hypot(*moved.shear_offset), math.hypot(*plain.shear_offset), rtol=1e-9, atol=EXACT)


@given(sections())
def test_a_quarter_turn_swaps_the_axes(section: Section) -> None:
    turned = Section(
        "turned",
        tuple(Piece(each.shape, -each.y, each.x, turn=each.turn + 90.0, mirror=each.mirror) for each in section.pieces),
    ).properties
    ours = section.properties
    assert_allclose(
        [turned.i_x, turned.i_y, turned.z_x, turned.z_y], [ours.i_y, ours.i_x, ours.z_y, ours.z_x], rtol=1e-9
    )
    assert_allclose([turned.s_x_top, turned.s_y_left], [ours.s_y_right, ours.s_x_top], rtol=1e-9)


@given(sections(), st.floats(0.0, 1.0))
def test_no_axis_gives_less_than_the_plastic_modulus(section: Section, share: float) -> None:
    """Z is the least of the integral of |y - c| over c; at any level it is (S - 2 s) - c (A - 2 a)."""
    regions = [region for piece in section.pieces for region in piece.regions]
    low, high = min(region.extent[2] for region in regions), max(region.extent[3] for region in regions)
    level, ours = low + share * (high - low), section.properties
    below = [region.below(level) for region in regions]
    area, moment = sum(each.area for each in below), sum(each.moment for each in below)
    assert ours.z_x <= ((ours.area * ours.y - 2 * moment) - level * (ours.area - 2 * area)) * (1 + 1e-9)
    assert ours.s_x <= ours.z_x * MORE


@settings(max_examples=15)  # a thousand strips each
@given(sections())
def test_strips_add_up_to_the_properties(section: Section) -> None:
    """Area, centroid and I_x from 1,000 strips cut at levels: the midpoint rule, good to a strip squared."""
    regions = [region for piece in section.pieces for region in piece.regions]
    lefts, rights, bottoms, tops = zip(*(region.extent for region in regions), strict=True)
    edges = np.linspace(min(bottoms), max(tops), 1001)
    below = np.array([sum(region.below(edge).area for region in regions) for edge in edges])
    areas, middles, ours = np.diff(below), (edges[1:] + edges[:-1]) / 2, section.properties
    strip = edges[1] - edges[0]
    of_strips = (max(rights) - min(lefts)) * (edges[-1] - edges[0]) * strip**2
    assert_allclose(areas.sum(), ours.area, rtol=EXACT)
    assert_allclose(middles @ areas / ours.area, ours.y, atol=strip)
    assert_allclose(((middles - ours.y) ** 2) @ areas, ours.i_x, rtol=1e-5, atol=of_strips)


# ------------------------------------------------------------------ holes


def every_chain(number: int, diameter: float, stagger: float, gauge: float) -> float:
    """Return the most any chain takes off, by trying every set of holes."""
    chains = [chosen for count in range(1, number + 1) for chosen in combinations(range(number), count)]
    return max(
        len(chosen) * diameter - sum(stagger**2 / (4 * gauge * (b - a)) for a, b in pairwise(chosen) if (b - a) % 2)
        for chosen in chains
    )


@given(st.integers(1, 7), st.floats(0.01, 0.03), st.floats(0.0, 0.2), st.floats(0.03, 0.1))
def test_the_worst_chain_is_the_worst_of_all(number: int, diameter: float, stagger: float, gauge: float) -> None:
    ours = worst_chain(number, diameter, stagger, gauge)
    assert_allclose(ours, every_chain(number, diameter, stagger, gauge), rtol=1e-12)
    assert (number + 1) // 2 * diameter * (1 - 1e-12) <= ours <= number * diameter * MORE


@given(st.floats(0.1, 0.4), slim, st.integers(1, 3), st.floats(0.01, 0.03), fractions)
def test_net_follows_gross(width: float, part: float, number: int, diameter: float, fraction: float) -> None:
    assume(number * diameter < 0.95 * width)
    section = Section("net", (Piece(Plate(width, part * width)),), holes=(Hole(diameter, number=number),))
    lost = section.with_cut("", Cut(fraction=fraction))
    assert_allclose(lost.net_area, (1 - fraction) * section.net_area, rtol=1e-9)


@pytest.mark.parametrize("bars", [1, 2, 4])
def test_bars_abreast_add_up(bars: int) -> None:
    one = Eyebar(0.1, 0.02, head_width=0.23, pin_hole=0.09)
    section = Section("chord", tuple(Piece(one, 0.05 * i) for i in range(bars)))
    alone = Section("one", (Piece(one),))
    assert_allclose(section.net_area, bars * alone.net_area, rtol=EXACT)
    assert_allclose(section.properties.i_x, bars * alone.properties.i_x, rtol=EXACT)
