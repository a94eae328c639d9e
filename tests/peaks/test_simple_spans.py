"""Simple spans under trains whose maxima are known in closed form, the order of ties, padding, long trains, errors."""

from __future__ import annotations

import math
import tracemalloc
from typing import TYPE_CHECKING

import numpy as np
import pytest
from numpy.testing import assert_allclose

from movload.errors import InputError
from movload.peaks import span_maxima as module
from movload.peaks.span_maxima import Stands, span_maxima, span_values

if TYPE_CHECKING:
    from movload.arrays import Floats

BOTH = (1, -1)
# 8, 32, 32 kip at 14 ft: used here as plain numbers, foot and kip
TRUCK = (np.array([0.0, 14.0, 28.0]), np.array([8.0, 32.0, 32.0]))


def floats(*values: float) -> Floats:
    """Return numbers as an array."""
    return np.array(values)


def stand(stands: Stands, span: int = 0) -> tuple[float, int, int, float]:
    """Return position, heading, axle and section of one span, as plain numbers."""
    return (
        float(stands.position[span]), int(stands.heading[span]), int(stands.axle[span]), float(stands.section[span]),
    )  # fmt: skip


def test_one_axle_is_worst_at_midspan_and_at_an_end() -> None:
    """PL/4 and P. Both headings are alike: +1 counts, and the end with the smaller position."""
    maxima = span_maxima(floats(6.0, 3.5), floats(0.0), floats(80e3), BOTH)
    assert_allclose(maxima.moment, [120e3, 70e3], rtol=1e-15)
    assert_allclose(maxima.shear, [80e3, 80e3], rtol=1e-15)
    assert stand(maxima.moment_stands) == (3.0, 1, 0, 3.0)
    assert stand(maxima.moment_stands, 1) == (1.75, 1, 0, 1.75)
    assert stand(maxima.shear_stands) == (0.0, 1, 0, 0.0)


@pytest.mark.parametrize("apart", [0.0, 1.7, 3.4, 5.8])
def test_two_equal_axles_close_together(apart: float) -> None:
    """M = P (L - c/2)^2 / (2L), either axle c/4 from midspan, while c < (2 - sqrt 2) L; V = 2P - P c/L."""
    load, length = 50e3, 10.0
    maxima = span_maxima(floats(length), floats(0.0, apart), floats(load, load), BOTH)
    assert_allclose(maxima.moment, [load * (length - apart / 2.0) ** 2 / (2.0 * length)], rtol=1e-14)
    assert_allclose(maxima.shear, [2.0 * load - load * apart / length], rtol=1e-14)


@pytest.mark.parametrize("apart", [5.9, 9.9, 10.0, 63.0])
def test_two_equal_axles_far_apart(apart: float) -> None:
    """Beyond (2 - sqrt 2) L = 5.86 m one axle alone at midspan is worse, PL/4, whether the other is on or not."""
    maxima = span_maxima(floats(10.0), floats(0.0, apart), floats(50e3, 50e3), BOTH)
    assert_allclose(maxima.moment, [125e3], rtol=1e-14)
    assert_allclose(maxima.shear, [50e3 * (2.0 - min(apart / 10.0, 1.0))], rtol=1e-14)
    assert stand(maxima.moment_stands)[3] == 5.0


def test_the_limit_between_one_axle_and_two() -> None:
    """At c = (2 - sqrt 2) L both give PL/4: positions as bad as each other, and the smallest counts."""
    apart = (2.0 - math.sqrt(2.0)) * 10.0
    maxima = span_maxima(floats(10.0), floats(0.0, apart), floats(50e3, 50e3), (1,))
    assert_allclose(maxima.moment, [125e3], rtol=1e-14)
    # front axle alone at midspan: 5 m; both, front axle at 5 + c/4; rear axle alone 5 + c
    assert_allclose(maxima.moment_stands.position, [5.0], rtol=1e-12)


def test_a_truck_under_its_middle_axle() -> None:
    """M = 72 (L/2 - 7/3)^2/L - 8 x 14, the middle axle 7/3 off midspan on the light axle's side; L = 40: 449.8."""
    maxima = span_maxima(floats(40.0), *TRUCK, BOTH)
    assert_allclose(maxima.moment, [72.0 * (20.0 - 7 / 3) ** 2 / 40.0 - 112.0], rtol=1e-14)
    position, heading, axle, section = stand(maxima.moment_stands)
    assert (heading, axle) == (-1, 1)
    assert_allclose([position, section], [20.0 - 7 / 3 - 14.0, 20.0 - 7 / 3], rtol=1e-14)


def test_a_truck_with_one_heading_only() -> None:
    maxima = span_maxima(floats(40.0), *TRUCK, (1,))
    position, heading, axle, section = stand(maxima.moment_stands)
    assert (heading, axle) == (1, 1)
    assert_allclose([position, section], [20.0 + 7 / 3 + 14.0, 20.0 + 7 / 3], rtol=1e-14)
    assert stand(maxima.shear_stands) == (28.0, 1, 2, 0.0)


def test_a_truck_at_an_end() -> None:
    """V = 72 - 672/L with the rear axle just inside: 55.2 for L = 40. Heading -1 has the smaller position, 12."""
    maxima = span_maxima(floats(40.0), *TRUCK, BOTH)
    assert_allclose(maxima.shear, [55.2], rtol=1e-14)
    assert stand(maxima.shear_stands) == (12.0, -1, 2, 40.0)


def test_the_heaviest_axle_need_not_govern_nor_the_one_nearest_the_resultant() -> None:
    """Axles 60, 0.1, 40 at 0, 1, 10 m on 30 m: the resultant is 4 m behind the first, the slight one 1 m, no worse."""
    maxima = span_maxima(floats(30.0), floats(0.0, 1.0, 10.0), floats(60.0, 0.1, 40.0), (1,))
    assert stand(maxima.moment_stands)[2] == 0
    resultant = 400.1 / 100.1
    assert_allclose(maxima.moment, 100.1 * (30.0 + resultant**2 / 30.0) / 4.0 - 400.1 / 2.0, rtol=1e-14)


def test_ties_go_to_the_smallest_position_then_heading_then_the_front_axle() -> None:
    pair = span_maxima(floats(10.0), floats(0.0, 2.0), floats(50e3, 50e3), BOTH)
    # front axles: heading +1 5.5 (under it) and 6.5 (under the rear one at 4.5); heading -1 4.5 and 3.5 (rear at 5.5)
    assert stand(pair.moment_stands) == (3.5, -1, 1, 5.5)
    on_one_spot = span_maxima(floats(10.0), floats(0.0, 0.0), floats(30e3, 50e3), BOTH)
    assert stand(on_one_spot.moment_stands) == (5.0, 1, 0, 5.0)
    assert stand(on_one_spot.shear_stands) == (0.0, 1, 0, 0.0)


def test_axles_of_no_weight_count_for_nothing_wherever_they_are() -> None:
    lengths = floats(3.0, 7.0, 20.0)
    bare = span_values(lengths, floats(0.0, 4.0, 5.2)[None], floats(6e3, 9e3, 8e3)[None])
    padded = span_values(
        lengths,
        floats(-5.0, 0.0, math.inf, 4.0, 1.0, 5.2, 0.0, 0.0)[None],
        floats(0.0, 6e3, 0.0, 9e3, 0.0, 8e3, 0.0, 0.0)[None],
    )
    for one, other in zip(bare, padded, strict=True):
        assert (one == other).all()


def test_an_axle_of_no_weight_is_never_the_one_that_governs() -> None:
    maxima = span_maxima(floats(10.0), floats(0.0, 0.0, 3.0), floats(0.0, 50e3, 0.0), BOTH)
    assert stand(maxima.moment_stands) == (5.0, 1, 1, 5.0)
    assert stand(maxima.shear_stands) == (0.0, 1, 1, 0.0)


def test_a_train_that_weighs_nothing_stands_nowhere() -> None:
    maxima = span_maxima(floats(10.0, 5.0), floats(0.0, 3.0), floats(0.0, 0.0), BOTH)
    assert (maxima.moment == 0.0).all()
    assert (maxima.shear == 0.0).all()
    for stands in (maxima.moment_stands, maxima.shear_stands):
        assert np.isnan(stands.position).all()
        assert np.isnan(stands.section).all()
        assert list(stands.heading) == [0, 0]
        assert list(stands.axle) == [-1, -1]
    moment, shear = span_values(floats(10.0), np.zeros((2, 2)), np.array([[0.0, 0.0], [0.0, 40.0]]))
    assert_allclose(moment, [[0.0], [100.0]], rtol=1e-15)
    assert_allclose(shear, [[0.0], [40.0]], rtol=1e-15)


def wagons(count: int) -> tuple[Floats, Floats]:
    """Return distances and loads of a train of wagons with four equal axles each, one after another."""
    at = np.arange(count)[:, None] * 11.3 + np.array([0.0, 1.8, 7.1, 8.9])
    return at.reshape(-1), np.full(4 * count, 90e3)


def test_a_train_of_240_axles_is_worst_where_its_first_wagons_are_and_needs_little_memory() -> None:
    """At most three wagons stand on 24 m, so eight of them hold every group there is: equal to round-off."""
    lengths = np.linspace(4.0, 24.0, 12)
    distances, felt = wagons(60)
    tracemalloc.start()
    whole = span_maxima(lengths, distances, felt, BOTH)
    _, peak = tracemalloc.get_traced_memory()
    tracemalloc.stop()
    assert peak < 32e6  # bytes; all triples of 240 axles would be 2.3 million, on 12 spans 220 MB an array
    few = span_maxima(lengths, distances[:32], felt[:32], (1,))
    assert_allclose(whole.moment, few.moment, rtol=1e-13)
    assert_allclose(whole.shear, few.shear, rtol=1e-13)
    forward = span_maxima(lengths, distances, felt, (1,))
    assert (forward.moment_stands.axle == few.moment_stands.axle).all()
    assert (forward.shear_stands.axle == few.shear_stands.axle).all()


def test_pieces_change_nothing(monkeypatch: pytest.MonkeyPatch) -> None:
    lengths = floats(5.0, 12.0)
    distances, felt = wagons(9)
    at_once = span_maxima(lengths, distances, felt, BOTH)
    monkeypatch.setattr(module, "_IN_CACHE", 1)
    in_pieces = span_maxima(lengths, distances, felt, BOTH)
    assert (at_once.moment == in_pieces.moment).all()
    assert (at_once.shear == in_pieces.shear).all()
    for span in range(2):
        assert stand(at_once.moment_stands, span) == stand(in_pieces.moment_stands, span)
        assert stand(at_once.shear_stands, span) == stand(in_pieces.shear_stands, span)


def test_results_cannot_be_changed() -> None:
    maxima = span_maxima(floats(40.0), *TRUCK, BOTH)
    for array in (maxima.moment, maxima.shear, maxima.moment_stands.position, maxima.shear_stands.section):
        with pytest.raises(ValueError, match="read-only"):
            array[0] = 1.0


@pytest.mark.parametrize(
    ("lengths", "distances", "felt", "headings", "message"),
    [
        ([40.0], [0.0, 3.0], [10.0, -0.5], BOTH, r"felt\[0, 1\]: a load .* 0 or more and finite, got -0.5 N"),
        ([40.0], [0.0, 3.0], [math.nan, 1.0], BOTH, r"felt\[0, 0\]: .* got nan N"),
        ([40.0], [0.0, 3.0], [10.0, math.inf], BOTH, r"felt\[0, 1\]: .* got inf N"),
        ([40.0, 0.0], [0.0], [10.0], BOTH, r"lengths\[1\]: a span must be above 0 .*, got 0 m"),
        ([math.inf], [0.0], [10.0], BOTH, r"lengths\[0\]: a span must be above 0 .*, got inf m"),
        ([40.0], [0.0, 3.0, 2.9], [1.0, 1.0, 1.0], BOTH, r"distances\[0, 2\]: axles are counted .*, got 2.9 m"),
        ([40.0], [0.0, math.nan], [1.0, 1.0], BOTH, r"distances\[0, 1\]: .*, got nan m"),
        ([40.0], [0.0, 3.0], [1.0], BOTH, r"spans: .* got \(1,\), \(1, 2\) and \(1, 1\)"),
        ([], [0.0], [1.0], BOTH, r"spans: .* got \(0,\)"),
        ([40.0], [0.0], [1.0], (), r"headings: headings are \+1, -1 or both, got \(\)"),
        ([40.0], [0.0], [1.0], (1, 1), r"headings: .* got \(1, 1\)"),
        ([40.0], [0.0], [1.0], (2,), r"headings: .* got \(2,\)"),
    ],
)
def test_what_cannot_be_answered_is_refused(
    lengths: list[float], distances: list[float], felt: list[float], headings: tuple[int, ...], message: str
) -> None:
    with pytest.raises(InputError, match=message):
        span_maxima(floats(*lengths), floats(*distances), floats(*felt), headings)
