"""A whole run, solve and sweep, against stepping 20 vehicles across in steps of 50 mm."""

from __future__ import annotations

from typing import TYPE_CHECKING

import numpy as np
import pytest
from benchmarks.plain_scripts import lil, member_lines
from benchmarks.ratios import IN_PROCESS, Course, raced
from benchmarks.spans import span_of
from benchmarks.stepping_scripts import (
    Stepped,
    all_axles_at_once,
    axle_by_axle,
    by_interpolation,
    by_one_product,
    by_product_a_passage,
)
from benchmarks.test_rate_crossings import is_rigid
from benchmarks.vectorised_script import all_lines, free_part

from movload.files.library import read_vehicle, vehicle_names
from movload.peaks.sweep import sweep
from movload.statics.influence import influence_lines

if TYPE_CHECKING:
    from collections.abc import Callable, Sequence

    from pytest_benchmark.fixture import BenchmarkFixture

    from movload.peaks.peaks import Peaks
    from movload.traffic.loading import Loading
    from movload.traffic.vehicle import Vehicle

pytestmark = IN_PROCESS

PANELS = 20
ROUND_OFF = 1e-12  # of the largest peak: what an unrefined solve leaves in the steppers' lines, idle bars included
STEPPED_PAST = 0.02  # of the row's peak: half a step, 25 mm, beside a kink of a line on panels of 4 to 5 m


@pytest.fixture(scope="module")
def loadings() -> list[Loading]:
    """Return the first 20 rigid road vehicles of the library, 69 axles together."""
    return [one for one in map(read_vehicle, vehicle_names()) if is_rigid(one) and one.kind != "rail"][:20]


@pytest.fixture(scope="module")
def vehicles(loadings: list[Loading]) -> list[Vehicle]:
    """Return what moves: each of them has one case."""
    return [case.moving for loading in loadings for case in loading.cases if case.moving is not None]


def whole_run(loadings: Sequence[Loading], course: Course) -> Callable[[], list[Peaks]]:
    """Return our side: every line of a truss never asked before, then the exact peaks of every vehicle and row."""
    span = span_of(PANELS)
    fresh = span.copies(course.turns)
    return lambda: sweep(influence_lines(fresh.pop(), span.panel_points), loadings)


def never_beaten(exact: Sequence[Peaks], stepped: Stepped) -> None:
    """Check that stepping never finds more than the exact peaks, and finds them to within a few per cent."""
    rows = stepped.highest.shape[1]  # a plain script has the members only
    highest = np.array([peaks.highest[:rows] for peaks in exact])
    lowest = np.array([peaks.lowest[:rows] for peaks in exact])
    size = np.maximum(highest, -lowest)
    for missed in (highest - stepped.highest, stepped.lowest - lowest):
        assert (missed >= -ROUND_OFF * size.max()).all()
        assert (missed <= STEPPED_PAST * size + ROUND_OFF * size.max()).all()


def test_whole_run_against_interpolation(
    benchmark: BenchmarkFixture, loadings: list[Loading], vehicles: list[Vehicle]
) -> None:
    """At least 120 times faster than a plain script for the lines and ``np.interp`` for the steps.

    Theirs, "plain script": forces of 77 bars in a ``lil_matrix`` with ``spsolve`` for each load position; then for each
    vehicle, heading, bar and axle ``np.interp`` at every step, all steps at once. "numpy script" is the leanest, told
    and not asserted: vectorised assembly, all 101 rows, and all axles in one ``np.interp``. Ours: see ``whole_run``.
    """
    span, course = span_of(PANELS), Course(rounds=7)
    x = np.array([span.truss.joints[point][0] for point in span.panel_points])

    def plain() -> Stepped:
        return by_interpolation((x, member_lines(span.truss, span.panel_points, lil)), vehicles, axle_by_axle)

    def leanest() -> Stepped:
        return by_interpolation((x, all_lines(span.truss, span.panel_points, free_part)), vehicles, all_axles_at_once)

    race = raced(benchmark, whole_run(loadings, course), {"plain script": plain, "numpy script": leanest}, course)
    for stepped in race.theirs.values():
        never_beaten(race.ours, stepped)
    race.require_faster("plain script", 120)


def test_whole_run_against_one_product(
    benchmark: BenchmarkFixture, loadings: list[Loading], vehicles: list[Vehicle]
) -> None:
    """At least 20 times faster, the solve included, than the steps alone as one matrix product.

    Theirs: lines given; all axles of all steps of all vehicles as hat weights without a loop, one product, maxima and
    minima; all 101 rows. "a product a passage" is told and not asserted: the same in 40 products, each small enough
    for the cache. Ours: see ``whole_run``.
    """
    course, span = Course(rounds=21), span_of(PANELS)
    lines = influence_lines(span.truss, span.panel_points)
    given = lines.stations, lines.ordinates
    theirs: dict[str, Callable[[], Stepped]] = {
        "one product": lambda: by_one_product(given, vehicles),
        "a product a passage": lambda: by_product_a_passage(given, vehicles),
    }
    race = raced(benchmark, whole_run(loadings, course), theirs, course)
    for stepped in race.theirs.values():
        never_beaten(race.ours, stepped)
    race.require_faster("one product", 20)
