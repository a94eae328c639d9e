"""Laws of simple spans under strips and tails: nothing sampled beats a maximum, which is reached where it says.

What is compared with are the statics of a beam on two supports (`oracles.beam`), and for axles alone the closed form of
`movload.peaks.span_maxima`.
"""

from __future__ import annotations

from dataclasses import replace

import numpy as np
import pytest
from hypothesis import assume, given, settings
from hypothesis import strategies as st
from numpy.testing import assert_allclose
from oracles.beam import Beam
from strategies import axle_loads, gaps, vehicles

from movload.errors import InputError
from movload.peaks.span_maxima import span_values
from movload.peaks.span_uniform import least_spacings, uniform_stands, uniform_values
from movload.traffic.crossing import Train
from movload.traffic.vehicle import Strip, Tail, Vehicle

EXACT = 1e-12  # of all that is ever on the span, at midspan or at an end: sums of some 20 products, in another order
spans = st.floats(2.9, 31.0)  # m
dense = st.floats(0.0, 60e3).map(lambda load: load if load > 1e-6 else 0.0)  # N/m; a micronewton is nothing
shares = st.floats(0.1, 1.3)


@st.composite
def trains(draw: st.DrawFn, *, tails: bool = True) -> Train:
    """Draw axles, or none that is felt, with up to four strips beside, over and before them, and perhaps a tail."""
    vehicle = draw(vehicles())
    longest = float(vehicle.distances[-1]) + 3.0
    strips = tuple(
        Strip(draw(st.floats(-9.0, longest)), draw(st.floats(0.2, 20.0)), draw(dense))
        for _ in range(draw(st.integers(0, 4)))
    )
    tail = Tail(draw(st.floats(-3.0, longest)), draw(dense)) if tails and draw(st.booleans()) else None
    vehicle = replace(vehicle, strips=strips, tail=tail)
    felt = draw(shares) if draw(st.booleans()) or not (strips or tail) else 0.0
    return Train(
        "drawn", vehicle, np.full(vehicle.loads.size, felt), headings=vehicle.headings, factor=draw(shares),
        strip_shares=np.array([draw(shares) for _ in strips]), tail_share=draw(shares) if tail else 0.0,
    )  # fmt: skip


def under(vehicle: Vehicle) -> Train:
    """Return the train of a vehicle's whole axles."""
    return Train("whole", vehicle, np.ones(vehicle.loads.size), headings=vehicle.headings)


@settings(max_examples=120)
@given(spans, trains())
def test_nothing_sampled_beats_a_maximum_and_some_come_close(length: float, train: Train) -> None:
    """The best sample is refined about its place, so that a maximum too small by a millionth would be beaten.

    Moving all loads by half a step, or the section, changes a moment by no more than all that is on the span times
    that. A shear jumps where an axle leaves: the step on one side only is near, and loses a step over L.
    """
    bending, shearing = uniform_values(length, train)
    beam = Beam(length, train)
    for heading in (1, -1):  # the values hold for both, whichever the train may take
        moment, shear, step, apart = beam.sampled(heading)
        assert moment <= bending + EXACT * beam.heaviest * length
        assert shear <= shearing + EXACT * beam.heaviest
        assert moment >= bending - beam.heaviest * 0.5 * (step + apart)
        assert shear >= shearing - beam.heaviest * step / length


@settings(max_examples=150)
@given(spans, trains())
def test_a_maximum_is_what_statics_give_where_it_says(length: float, train: Train) -> None:
    """An axle that stands just inside an end may be a hair outside by round-off: all is drawn in by 1e-13 m there."""
    beam = Beam(length, train)
    assume(beam.heaviest > 1.0)
    values, stands = uniform_values(length, train), uniform_stands(length, train)
    for stand in stands:
        assert stand.heading in train.headings
        if stand.axle >= 0:
            assert train.felt[stand.axle] > 0.0
            assert stand.position == stand.section + stand.heading * train.vehicle.distances[stand.axle]
    bent, sheared = stands
    assert 0.0 < bent.section < length
    moment = beam.moment(np.array(bent.position), bent.heading, np.array(bent.section))
    assert_allclose(moment, values[0], rtol=0.0, atol=EXACT * beam.heaviest * length)
    assert sheared.section in {0.0, length}
    inside = sheared.position + (1e-13 if sheared.section == 0.0 else -1e-13)
    shear = beam.reaction(np.array(inside), sheared.heading, sheared.section)
    assert_allclose(shear, values[1], rtol=0.0, atol=EXACT * beam.heaviest)


@given(spans, vehicles())
def test_axles_alone_are_as_the_closed_form_says(length: float, vehicle: Vehicle) -> None:
    moment, shear = span_values(np.array([length]), vehicle.distances[None], vehicle.loads[None])
    bending, shearing = uniform_values(length, under(vehicle))
    assert_allclose(bending, moment[0, 0], rtol=0.0, atol=EXACT * vehicle.loads.sum() * length)
    assert_allclose(shearing, shear[0, 0], rtol=0.0, atol=EXACT * vehicle.loads.sum())


@given(spans, trains(), st.floats(0.1, 9.0), dense)
def test_more_load_is_never_less_and_adds_no_more_than_itself(
    length: float, train: Train, reach: float, load: float
) -> None:
    """One more strip of q over b adds at most its own q b (2 L - b)/8 and q b (1 - b/(2 L)), b as much as fits."""
    vehicle = replace(train.vehicle, strips=(*train.vehicle.strips, Strip(1.0, reach, load)))
    more = replace(train, vehicle=vehicle, strip_shares=np.append(train.strip_shares, 1.0))
    before, after = uniform_values(length, train), uniform_values(length, more)
    fits, weight = min(reach, length), load * train.factor
    own = weight * fits * (2.0 * length - fits) / 8.0, weight * fits * (1.0 - 0.5 * fits / length)
    slack = EXACT * Beam(length, more).heaviest
    for one, other, added, arm in zip(before, after, own, (length, 1.0), strict=True):
        assert one - slack * arm <= other <= one + added + slack * arm


@given(spans, trains(tails=False))
def test_a_reversed_train_is_as_bad(length: float, train: Train) -> None:
    """Mirrored about its front axle's place: the last axle first, every strip on the other side."""
    last = float(train.vehicle.distances[-1])
    strips = tuple(Strip(last - one.start - one.length, one.length, one.load) for one in train.vehicle.strips)
    turned = replace(
        train.vehicle, loads=train.vehicle.loads[::-1], spacings=train.vehicle.spacings[::-1], strips=strips
    )
    ahead, back = uniform_values(length, train), uniform_values(length, replace(train, vehicle=turned))
    slack = EXACT * Beam(length, train).heaviest * 10.0  # places are differences of up to some hundred metres
    assert_allclose(back, ahead, rtol=0.0, atol=slack * max(length, 1.0))


@st.composite
def loose(draw: st.DrawFn) -> Vehicle:
    """Draw two to four axles of which one gap or more may vary."""
    loads = draw(st.lists(axle_loads, min_size=2, max_size=4))
    assume(sum(loads) > 1.0)
    spacings: list[float | tuple[float, float]] = []
    for _ in loads[1:]:
        least = draw(gaps)
        spacings.append((least, least + draw(st.floats(0.1, 8.0))) if draw(st.booleans()) else least)
    assume(any(isinstance(gap, tuple) for gap in spacings))
    return Vehicle("loose", np.array(loads), spacings)


@given(spans, loose())
def test_no_spacings_of_a_grid_beat_the_least(length: float, vehicle: Vehicle) -> None:
    """Five of each range in every combination, the least among them: it gives the greatest of both."""
    tried = [np.linspace(*gap, 5) if isinstance(gap, tuple) else np.array([gap]) for gap in vehicle.spacings]
    grid = np.stack(np.meshgrid(*tried), axis=-1).reshape(-1, len(tried))
    distances = np.concatenate((np.zeros((len(grid), 1)), np.cumsum(grid, axis=1)), axis=1)
    moment, shear = span_values(np.array([length]), distances, np.tile(vehicle.loads, (len(grid), 1)))
    bending, shearing = uniform_values(length, under(least_spacings(vehicle)))
    assert_allclose(moment.max(), bending, rtol=0.0, atol=EXACT * vehicle.loads.sum() * length)
    assert_allclose(shear.max(), shearing, rtol=0.0, atol=EXACT * vehicle.loads.sum())


def test_least_spacings_of_what_does_not_vary_are_its_own() -> None:
    vehicle = Vehicle("stiff", np.array([20e3, 30e3]), [4.0], strips=(Strip(0.0, 2.0, 1e3),), tail=Tail(9.0, 1e3))
    assert least_spacings(vehicle) is vehicle
    ranged = Vehicle("loose", np.array([20e3, 30e3, 10e3]), [(3.0, 5.0), 2.0], headings=(-1,), gauges=(1.8, 1.9, 2.0))
    least = least_spacings(ranged)
    assert least.spacings == (3.0, 2.0)
    assert (least.title, least.headings, least.gauges) == (ranged.title, ranged.headings, ranged.gauges)


@pytest.mark.parametrize("beside", [{"strips": (Strip(9.0, 4.0, 50e3),)}, {"tail": Tail(9.0, 50e3)}])
def test_spacings_that_vary_beside_uniform_loads_are_refused(beside: dict[str, object]) -> None:
    """For the least may not be the worst: the axle behind a gap of 1 to 9 m stands in the strip only if it is wide."""
    vehicle = Vehicle("both", np.array([1e3, 90e3]), [(1.0, 9.0)], **beside)
    with pytest.raises(InputError, match=r"both: a spacing that may vary beside uniform loads has no least that is"):
        least_spacings(vehicle)
    close, wide = (
        uniform_values(6.0, Train("both", replace(vehicle, spacings=[gap]), np.ones(2),
                                  strip_shares=np.ones(len(vehicle.strips)), tail_share=1.0))
        for gap in (1.0, 9.0)
    )  # fmt: skip
    assert wide > close
