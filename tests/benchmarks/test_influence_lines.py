"""All influence lines of a truss against scripts that solve anew for each load position."""

from __future__ import annotations

from functools import partial
from typing import TYPE_CHECKING

import pytest
from benchmarks.plain_scripts import dense, lil, lists, member_lines
from benchmarks.ratios import IN_PROCESS, Course, raced
from benchmarks.spans import span_of
from benchmarks.vectorised_script import all_lines, free_part, whole_then_cut
from numpy.testing import assert_allclose

from movload.statics.influence import influence_lines

if TYPE_CHECKING:
    from pytest_benchmark.fixture import BenchmarkFixture

    from movload.statics.influence import InfluenceLines

pytestmark = IN_PROCESS

SAME = 1e-9  # of the largest ordinate: the scripts' own error, u being solved once and never refined


def test_20_panels_against_plain_scripts(benchmark: BenchmarkFixture) -> None:
    """At least 100 times faster than the plain script in a ``lil_matrix``.

    Theirs: names to numbers once; then for each of 21 load positions a loop over 77 bars to assemble, ``spsolve``, and
    a loop over the bars for their forces; no reactions, no deflections. Ours: ``influence_lines`` with all 101 rows,
    from a truss that nothing has been asked of yet. The dense and the lists variants are told, not asserted.
    """
    span, course = span_of(20), Course(rounds=9)
    fresh = span.copies(course.turns)

    def ours() -> InfluenceLines:
        return influence_lines(fresh.pop(), span.panel_points)

    theirs = {
        script.__name__: partial(member_lines, span.truss, span.panel_points, script) for script in (lil, dense, lists)
    }
    race = raced(benchmark, ours, theirs, course)
    for forces in race.theirs.values():
        assert_allclose(race.ours.ordinates[: len(forces)], forces, rtol=0, atol=SAME)
    race.require_faster("lil", 100)


@pytest.mark.parametrize(("panels", "times"), [(20, 10), (60, 20)])
def test_against_a_vectorised_script(benchmark: BenchmarkFixture, panels: int, times: float) -> None:
    """At least 10 (20 panels) and 20 (60 panels) times faster than a script without a loop over bars.

    Theirs, "whole_then_cut": names to numbers once; then for each load position all of K from arrays through
    ``coo_matrix`` to compressed columns, its free part, ``spsolve``, forces and reactions as arrays; all rows. The
    leaner "free_part" is told, not asserted. Ours as above.
    """
    span, course = span_of(panels), Course(rounds=21)
    fresh = span.copies(course.turns)

    def ours() -> InfluenceLines:
        return influence_lines(fresh.pop(), span.panel_points)

    theirs = {
        script.__name__: partial(all_lines, span.truss, span.panel_points, script)
        for script in (whole_then_cut, free_part)
    }
    race = raced(benchmark, ours, theirs, course)
    for ordinates in race.theirs.values():
        assert_allclose(race.ours.ordinates, ordinates, rtol=0, atol=SAME)
    race.require_faster("whole_then_cut", times)
