"""A whole rating with its floor: 12 panels, 30 vehicles both ways in three places, against the sweeps it needs."""

from __future__ import annotations

from dataclasses import replace
from typing import TYPE_CHECKING

import numpy as np
from benchmarks.ratios import ASSERTED, IN_PROCESS, Course, raced
from benchmarks.spans import span_of
from numpy.testing import assert_allclose

from movload import Crossing, Loading, judge, solve
from movload.bridge.bridge import Bridge
from movload.bridge.deck import Deck
from movload.bridge.floor import Floor, Floorbeams, Stringers
from movload.bridge.permanent import Item, PermanentItems
from movload.bridge.roadway import Roadway
from movload.bridge.strengths import TypedStrength, permitted
from movload.bridge.truss import Truss
from movload.files.library import read_vehicle, vehicle_names
from movload.peaks.extremes import _swept
from movload.peaks.span_maxima import span_values
from movload.statics.spans import SimpleSpans
from movload.traffic.formations import formations_on

if TYPE_CHECKING:
    from pytest_benchmark.fixture import BenchmarkFixture

    from movload import Ratings
    from movload.arrays import Floats
    from movload.traffic.crossing import Train

pytestmark = IN_PROCESS

PLACES = ("anywhere", "centre line", "right kerb")
LONGEST = 0.3  # s, after imports
MOST = 3.0  # times the sweeps alone


def bridge() -> Bridge:
    """Return 12 panels with seven floorbeam sections and five stringers, invented."""
    span = span_of(12)
    members = [replace(member, density=7850.0) for member in span.truss.members]
    beam = TypedStrength({"moment": 400e3, "shear": 300e3})
    return Bridge(
        "Twelve panels",
        Truss(span.truss.joints, members, span.truss.supports),
        Deck(tuple(span.panel_points), truss_spacing=4.8, kind="through",
             roadway=Roadway(-2.1, 2.1, clearance=0.3)),
        permanent=PermanentItems((Item("deck", "components", line=8e3, low=-2.1, high=2.1),), 0.15),
        strengths={member.name: permitted(900e3, 700e3) for member in members},
        floor=Floor(Stringers((-1.8, -0.9, 0.0, 0.9, 1.8), strength=beam), Floorbeams(strength=beam)),
        impact=0.3,
    )  # fmt: skip


def is_rigid(loading: Loading) -> bool:
    """Whether it is one vehicle of axles at fixed distances, all of which count wherever they stand."""
    (case, *more) = loading.cases
    moving = case.moving
    plain = moving is not None and not (more or case.fills or case.convoy or moving.strips or moving.tail)
    return plain and not moving.has_ranges and case.relieving == 1.0


def loadings() -> list[Loading]:
    """Return the rigid vehicles of the library, and its first vehicles again a tenth heavier: 30 in all."""
    shipped = [one for one in map(read_vehicle, vehicle_names()) if is_rigid(one)]
    again = [
        Loading.of(replace(moving, title=f"{moving.title}, heavier", loads=1.1 * moving.loads), one.kind)
        for one in shipped
        for moving in (one.cases[0].moving,)
        if moving is not None
    ]
    return (shipped + again)[:30]


def by_shares(trains: list[Train]) -> list[Train]:
    """Return one train for each vehicle and distinct set of axle shares."""
    return list({(id(one.vehicle), one.headings, one.shares.tobytes()): one for one in trains}.values())


def padded(trains: list[Train]) -> tuple[Floats, Floats]:
    """Return distances and felt loads of trains (V, A), shorter ones padded with nothing."""
    distances, felt = np.zeros((2, len(trains), max(one.felt.size for one in trains)))
    for number, one in enumerate(trains):
        distances[number, : one.felt.size], felt[number, : one.felt.size] = one.vehicle.distances, one.felt
    return distances, felt


def test_a_rating_costs_little_more_than_its_sweeps(benchmark: BenchmarkFixture) -> None:
    """At most 3 times the sweeps alone, one for each vehicle, part and distinct set of axle shares; at most 0.3 s.

    Theirs: the exact extremes of every response under every distinct set of axle shares that its parts feel, swept in
    one batch a response, shares and formations given; no permanent load, no strengths, no envelope over formations.
    Ours: `solve` and `judge`. Shares alike on all axles
    differ by one number only, which ours never sweeps twice.
    """
    stands, crossings = bridge(), [Crossing(one, place) for one in loadings() for place in PLACES]
    solved, course = solve(stands), Course(rounds=7, each=3)
    felt: dict[object, list[Train]] = {}
    responses = {part.response.alike: part.response for part in solved.parts}
    for part in solved.parts:
        felt.setdefault(part.response.alike, []).extend(
            train
            for one in crossings
            for formation in formations_on(part.across, one, solved.roadway)
            for train in formation
        )
    swept = {key: by_shares(trains) for key, trains in felt.items()}

    def sweeps() -> int:
        count = 0
        for key, trains in swept.items():
            response = responses[key]
            if isinstance(response, SimpleSpans):
                span_values(response.lengths, *padded(trains))
            else:
                _swept(response, trains)  # type: ignore[arg-type]  # lines
            count += len(trains)
        return count

    race = raced(benchmark, lambda: judge(solve(stands), crossings), {"sweeps alone": sweeps}, course)
    ratings: Ratings = race.ours
    assert ratings.factor.shape[1] == 90
    assert race.theirs["sweeps alone"] > 500
    alone = judge(solved, [crossings[7]])
    assert_allclose(ratings.factor[:, 7], alone.factor[:, 0], rtol=1e-12)
    assert np.isfinite(ratings.peaks[0].highest).all()
    race.require_no_slower("sweeps alone", MOST)
    if ASSERTED:
        took = benchmark.stats.stats.median
        assert took <= LONGEST, f"at most {LONGEST} s is asked, got {took:.3f} s"


def test_the_bridge_is_whole() -> None:
    """Every part is rated, so that the time measured is that of a real answer."""
    assert judge(solve(bridge()), [loadings()[0]]).coverage.complete
