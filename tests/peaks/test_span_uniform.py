"""Simple spans under strips and tails: closed forms, limits, railway trains, ties, errors.

Published, in kip and foot as in the sources, per rail:

- J. F. Unsworth, *Design of Modern Steel Railway Bridges*, CRC 2010, Ex. 5.9: E80 on 60 ft. READ.
- AREMA, *Manual for Railway Engineering*, ch. 15, Table 15-1-15: E80. FROM MEMORY. Thought to be slips of recall, and
  not used: end shear and pier of 9 ft, centre shear of 45 ft, quarter-point shear and pier of 160 ft. The moments
  recalled for 200 to 400 ft are 0.05 to 0.25 % below the absolute maximum, and not used either.

Of the E80 train the 8 k/ft per track and the sums that fix the spacings are READ, the rest FROM MEMORY. Of LM71 the
axles and the 80 kN/m are READ (an article on UIC 702), the 0.8 m between axle and uniform load FROM MEMORY; its rows
are DERIVED, not published.
"""

from __future__ import annotations

import math
from dataclasses import replace

import numpy as np
import pytest
from numpy.testing import assert_allclose
from oracles.beam import Beam

from movload.errors import InputError
from movload.peaks.span_uniform import SpanStand, uniform_stands, uniform_values
from movload.traffic.crossing import Train
from movload.traffic.vehicle import Strip, Tail, Vehicle

ROUND_OFF = 1e-13  # relative: sums of some ten products


def train_of(vehicle: Vehicle, axles: float = 1.0, uniform: float = 1.0, factor: float = 1.0) -> Train:
    """Return a train whose axles have one share and whose uniform loads another."""
    return Train(
        "case", vehicle, np.full(vehicle.loads.size, axles), headings=vehicle.headings, factor=factor,
        strip_shares=np.full(len(vehicle.strips), uniform), tail_share=uniform if vehicle.tail else 0.0,
    )  # fmt: skip


def alone(*strips: Strip, tail: Tail | None = None, headings: tuple[int, ...] = (1, -1)) -> Train:
    """Return uniform loads of which alone anything is felt: the axle in front has a share of 0."""
    return train_of(Vehicle("uniform", np.ones(1), [], strips=strips, tail=tail, headings=headings), axles=0.0)


AXLES = [20.0, *[40.0] * 4, *[26.0] * 4]
GAPS = [8.0, 5.0, 5.0, 5.0, 9.0, 5.0, 6.0, 5.0]
E80 = Vehicle("E80, one rail", np.array(AXLES * 2), [*GAPS, 8.0, *GAPS], tail=Tail(2 * sum(GAPS) + 8.0 + 5.0, 4.0))
LM71 = Vehicle(
    "LM71", np.full(4, 250.0), [1.6] * 3, strips=(Strip(-500.8, 500.0, 80.0),), tail=Tail(4.8 + 0.8, 80.0)
)  # kN and m, the uniform load before it cut beyond every span here


def test_a_tail_alone() -> None:
    """It covers the whole span at last: q L^2/8 at midspan, q L/2 at an end, with no axle there."""
    train = alone(tail=Tail(2.5, 12e3), headings=(1,))
    assert_allclose(uniform_values(8.0, train), [12e3 * 8.0, 12e3 * 4.0], rtol=ROUND_OFF)
    assert uniform_stands(8.0, train) == (SpanStand(10.5, 1, -1, 4.0), SpanStand(10.5, 1, -1, 8.0))


@pytest.mark.parametrize("headings", [(1,), (-1,), (1, -1)])
def test_a_strip_longer_than_twice_the_span(headings: tuple[int, ...]) -> None:
    """It covers the span: q L^2/8 and q L/2, at the smallest position that gives them, 3 to 20 m behind the front.

    Heading +1: its front end on the right end, front at 6 + 3. Heading -1: its rear end there, front at 6 - 20.
    """
    train = alone(Strip(3.0, 17.0, 10e3), headings=headings)
    assert_allclose(uniform_values(6.0, train), [10e3 * 4.5, 10e3 * 3.0], rtol=ROUND_OFF)
    moment, shear = uniform_stands(6.0, train)
    for stand in (moment, shear):
        assert (stand.heading, stand.axle) == ((-1, -1) if -1 in headings else (1, -1))
        assert_allclose(stand.position, -14.0 if -1 in headings else 9.0, rtol=ROUND_OFF)
    assert_allclose(moment.section, 3.0, rtol=ROUND_OFF)


@pytest.mark.parametrize("part", [1e-6, 0.2, 0.9, 1.0])
def test_a_strip_on_part_of_the_span(part: float) -> None:
    """A strip of b <= L is worst in the middle, q b (2 L - b)/8, and with its end on an end, q b (1 - b/(2 L))."""
    length, load, span = part * 7.0, 20e3, 7.0
    expected = load * length * (2.0 * span - length) / 8.0, load * length * (1.0 - 0.5 * part)
    without_axles = train_of(Vehicle("track", np.zeros(0), [], strips=(Strip(1.3, length, load),)))
    values = uniform_values(span, without_axles)
    assert_allclose(values, expected, rtol=ROUND_OFF / part)  # a short strip's own ends are differences of places
    assert uniform_values(span, alone(Strip(1.3, length, load))) == values
    moment, _ = uniform_stands(span, alone(Strip(1.3, length, load), headings=(1,)))
    assert moment.axle == -1
    assert_allclose(moment.section, 3.5, rtol=0.0, atol=0.1 * part)  # under an end too, while the strip is short
    assert_allclose(moment.position - 1.3 - 0.5 * length, 3.5, rtol=1e-6)  # the effect is flat there


def test_two_strips_with_a_gap() -> None:
    """Two strips of 2 m, 2 m apart, all on 10 m, q = 20: section s and resultant stand alike from midspan.

    The first strip then begins at 10 - s - 3, and its shear 80 s/10 - 20 (2 s - 7) is 0 at s = 4.375 < its end, 4.625;
    M = 8 s^2 - 10 (2 s - 7)^2 = 122.5. At an end V = 80 x 0.7.
    """
    train = alone(Strip(0.0, 2.0, 20.0), Strip(4.0, 2.0, 20.0), headings=(-1,))
    assert_allclose(uniform_values(10.0, train), [122.5, 56.0], rtol=ROUND_OFF)
    stand, _ = uniform_stands(10.0, train)  # of the two mirror images that with the front further left
    assert_allclose([stand.position, stand.section], [4.375 - 3.0, 10.0 - 4.375], rtol=1e-12)


@pytest.mark.parametrize("length", [1.0, 1e-2, 1e-4, 1e-7])
def test_a_strip_that_shrinks_becomes_an_axle(length: float) -> None:
    """A weight W spread over b reaches b/2 to either side, which changes M by no more than W b/2.

    To have the strip on the span all loads may have to move by b/2: that part of L of each in V. 1e-8: the ends of the
    shortest strip, 1e-7 m apart, are known to 4e-16 m each.
    """
    weight, span = 90e3, 6.0
    pair = Vehicle("pair", np.array([70e3, weight]), [2.1])
    spread = Vehicle("spread", np.array([70e3]), [], strips=(Strip(2.1 - 0.5 * length, length, weight / length),))
    (bent, sheared), (moment, shear) = uniform_values(span, train_of(spread)), uniform_values(span, train_of(pair))
    assert_allclose(bent, moment, rtol=1e-8, atol=0.5 * weight * length)
    assert_allclose(sheared, shear, rtol=1e-8, atol=0.5 * (70e3 + weight) * length / span)


def test_the_section_inside_a_tail_behind_an_axle() -> None:
    """An axle P at e before a tail q that begins at x = t and goes on beyond the right end of L.

    The right reaction is R = (P (t - e) + q (L^2 - t^2)/2)/L, greatest at t = P/q; the shear is 0 at R/q from that end,
    where M = R^2/(2 q). For P = 40, e = 0.5, q = 20, L = 6: t = 2, R = 190/3, in the tail at 6 - 19/6.
    """
    vehicle = Vehicle("axle and tail", np.array([40.0]), [], tail=Tail(0.5, 20.0), headings=(-1,))
    bent, _ = uniform_values(6.0, train_of(vehicle))
    assert_allclose(bent, (190.0 / 3.0) ** 2 / 40.0, rtol=ROUND_OFF)
    moment, _ = uniform_stands(6.0, train_of(vehicle))
    assert (moment.heading, moment.axle) == (-1, -1)
    assert_allclose([moment.position, moment.section], [1.5, 6.0 - 19.0 / 6.0], rtol=1e-12)


def test_a_shear_may_be_greatest_while_a_strip_leaves() -> None:
    """A strip q of 4 m with an axle P at its middle, y of the half ahead still on: the rest leaves over the end.

    V = (q y (L - y/2) + P (L - y) + 2 q (L - y - 1))/L has the slope 0 at y = L - 2 - P/q. For q = 20, P = 60, L = 6:
    y = 1 and V = 95; with the axle on the end, or the whole strip on, 280/3.
    """
    train = train_of(Vehicle("middle", np.array([60.0]), [], strips=(Strip(-2.0, 4.0, 20.0),)))
    assert_allclose(uniform_values(6.0, train)[1], 95.0, rtol=ROUND_OFF)
    assert uniform_stands(6.0, train)[1] == SpanStand(1.0, 1, -1, 0.0)


def test_an_axle_on_the_end_is_named_and_stands_on_it() -> None:
    """An axle 0.1 before a strip: both of it on the span, the axle just inside the end; 1.3 - 0.1 is not exact."""
    train = train_of(Vehicle("pair", np.array([5.0, 90.0]), [1.3], strips=(Strip(1.4, 2.0, 20.0),), headings=(-1,)))
    _, shear = uniform_stands(3.7, train)
    assert (shear.axle, shear.section) == (1, 0.0)
    assert shear.position == shear.section + shear.heading * 1.3
    assert_allclose(uniform_values(3.7, train)[1], 90.0 + 40.0 * (1.0 - 1.1 / 3.7), rtol=ROUND_OFF)


def test_a_section_under_an_axle_is_named() -> None:
    """A heavy axle amid a light strip of 2 m: at midspan, P L/4 + q b (2 L - b)/8, under the axle; +1 counts first."""
    train = train_of(Vehicle("axle", np.array([0.0, 80e3]), [1.0], strips=(Strip(0.0, 2.0, 5e3),)))
    assert uniform_stands(6.0, train)[0] == SpanStand(2.0, -1, 1, 3.0)
    assert_allclose(uniform_values(6.0, train)[0], 120e3 + 5e3 * 2.0 * 10.0 / 8.0, rtol=ROUND_OFF)


def test_shares_and_factor_count() -> None:
    """Axles by their shares, strips and tail by theirs, the factor on all; what counts of relief does not matter."""
    vehicle = Vehicle("all", np.array([20.0, 60.0]), [1.5], strips=(Strip(3.0, 2.0, 9.0),), tail=Tail(6.0, 7.0))
    ready = Vehicle("all", np.array([30.0, 90.0]), [1.5], strips=(Strip(3.0, 2.0, 5.4),), tail=Tail(6.0, 4.2))
    shared = train_of(vehicle, axles=0.75, uniform=0.3, factor=2.0)
    assert_allclose(uniform_values(5.0, shared), uniform_values(5.0, train_of(ready)), rtol=ROUND_OFF)
    assert uniform_values(5.0, replace(shared, relieving=0.0)) == uniform_values(5.0, shared)


def test_what_weighs_nothing_stands_nowhere() -> None:
    train = alone(Strip(0.0, 2.0, 0.0), tail=Tail(3.0, 0.0))
    assert uniform_values(5.0, train) == (0.0, 0.0)
    for stand in uniform_stands(5.0, train):
        assert (stand.heading, stand.axle) == (0, -1)
        assert math.isnan(stand.position)
        assert math.isnan(stand.section)


@pytest.mark.parametrize(
    ("span", "moment", "shear"),
    [
        (10.0, 112.50, 60.0),
        (40.0, 1311.3, 150.80),
        (50.0, 1901.8, 174.40),
        (60.0, 2597.8, 196.0),
        (100.0, 6446.3, 300.0),
    ],
)
def test_e80_by_the_table(span: float, moment: float, shear: float) -> None:
    """AREMA, Table 15-1-15, per rail, kip and foot. FROM MEMORY. 0.03 %: what recomputing it by hand came to."""
    assert_allclose(uniform_values(span, train_of(E80)), [moment, shear], rtol=3e-4)


def test_e80_on_60_ft_as_read() -> None:
    """Unsworth, Ex. 5.9: end shear 196, maximum moment 2599 per rail. READ. 0.05 %: statics give 2597.8."""
    assert_allclose(uniform_values(60.0, train_of(E80)), [2599.0, 196.0], rtol=5e-4)


def test_e80_on_24_ft_needs_both_ends() -> None:
    """AREMA, Table 15-1-15: end shear 110.83 of 24 ft, reached only with the train reversed. FROM MEMORY.

    An end shear here is the larger of both ends', so one heading gives it too. Half the last digit.
    """
    assert_allclose(uniform_values(24.0, train_of(E80))[1], 110.83, rtol=0.0, atol=5e-3)
    for heading in (1, -1):
        _, shear = uniform_stands(24.0, train_of(replace(E80, headings=(heading,))))
        assert (shear.heading, shear.section) == (heading, 0.0 if heading > 0 else 24.0)


@pytest.mark.parametrize("span", [6.4, 10.0, 20.0, 100.0])
def test_lm71_placed_at_midspan(span: float) -> None:
    """The train centred: 250 (L - 3.2) + 40 (L/2 - 3.2)^2 at midspan. DERIVED; placed there, so below the peak."""
    train = train_of(LM71)
    placed = 250.0 * (span - 3.2) + 40.0 * (0.5 * span - 3.2) ** 2
    centred = Beam(span, train).moment(np.array(0.5 * span - 2.4), -1, np.array(0.5 * span))
    assert_allclose(centred, placed, rtol=ROUND_OFF)
    assert uniform_values(span, train)[0] > placed


@pytest.mark.parametrize(
    ("span", "moment", "shear", "digit"),
    [
        (2.0, 125.9, 300.0, 0.1), (5.0, 537.7, 520.0, 0.1), (10.0, 1859.5, 837.4, 0.1), (15.0, 3717.5, 1075.6, 0.1),
        (20.0, 6076.7, 1294.7, 0.1), (30.0, 12295.9, 1713.8, 0.1), (50.0, 30735.0, 2529.0, 1.0),
        (100.0, 111835.0, 4540.5, 1.0),
    ],
)  # fmt: skip
def test_lm71_as_derived_before(span: float, moment: float, shear: float, digit: float) -> None:
    """Regression values, kN m and kN per track, DERIVED by stepping: one last digit, as steps fall short of a peak."""
    assert_allclose(uniform_values(span, train_of(LM71)), [moment, shear], rtol=0.0, atol=digit)


@pytest.mark.parametrize(
    ("length", "changes", "message"),
    [
        (0.0, {}, r"length: a span must be above 0 and finite, got 0 m"),
        (math.inf, {}, r"length: .* got inf m"),
        (math.nan, {}, r"length: .* got nan m"),
        (5.0, {"shares": np.array([-0.5])}, r"uniform: axles\[0\]: a load .* 0 or more and finite, got -0.5 N"),
        (5.0, {"strip_shares": np.array([-2.0])}, r"uniform: uniform loads\[0\]: a load .* got -14 N/m"),
        (5.0, {"tail_share": math.inf}, r"uniform: uniform loads\[1\]: a load .* got inf N/m"),
        (5.0, {"strip_shares": np.ones(2)}, r"uniform: one share for each of 1 strips, got 2"),
    ],
)
def test_what_cannot_be_answered_is_refused(length: float, changes: dict[str, object], message: str) -> None:
    train = replace(alone(Strip(0.0, 1.0, 7.0), tail=Tail(2.0, 3.0)), **changes)
    for function in (uniform_values, uniform_stands):
        with pytest.raises(InputError, match=message):
            function(length, train)
