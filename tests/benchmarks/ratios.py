"""How fast, compared with what: both sides of every comparison measured in one run, turn by turn, and told as a ratio.

What runs when
--------------
``python -m pytest``
    Nothing is timed. Each side runs once and the answers are compared; accuracy and memory are asserted.
``OPENBLAS_NUM_THREADS=1 python -m pytest tests/benchmarks --benchmark-enable``
    Everything is timed and each ratio is printed, and kept in ``extra_info`` (for ``--benchmark-json``).
``MOVLOAD_BENCH=1 OPENBLAS_NUM_THREADS=1 python -m pytest tests/benchmarks --benchmark-enable``
    The ratios are asserted as well. Meant for a machine that is otherwise idle: under a load that changes from second
    to second a ratio can miss its mark although nothing is wrong, so the ordinary run leaves this out.

How it is measured
------------------
One round runs every other side once and then ours a few times, so that a slow spell of the machine meets both. Ours
runs once untimed before its first timed turn in each round: the other side's arrays have just pushed it out of the
cache, which is no part of the question. A ratio is the median of theirs over the median of ours; the quartiles of the
ratios round by round are its spread. One BLAS thread: at these sizes more of them hurt, and would hurt unequally.

Inside one process the clock is the process's own (``IN_PROCESS``): on an idle machine it shows what any clock shows.
On a shared one a turn of half a second is interrupted by other work and a turn of a millisecond hardly ever is, so a
clock on the wall would flatter whoever is fast. Whole commands (``rate`` against an empty one) are timed by the wall.
"""

from __future__ import annotations

import os
import time
from dataclasses import dataclass
from itertools import count
from statistics import median, quantiles
from typing import TYPE_CHECKING, Final, Generic, TypeVar

import pytest

if TYPE_CHECKING:
    from collections.abc import Callable, Mapping

    from pytest_benchmark.fixture import BenchmarkFixture

Ours = TypeVar("Ours")
Theirs = TypeVar("Theirs")
Seconds = tuple[float, ...]

IN_PROCESS: Final = pytest.mark.benchmark(timer=time.process_time, disable_gc=True)
ASSERTED: Final = os.environ.get("MOVLOAD_BENCH") == "1"


@dataclass(frozen=True, slots=True)
class Course:
    """How often: ``rounds`` turns of every other side, ``each`` turns of ours a round, warmed first or not."""

    rounds: int
    each: int = 10
    warmed: bool = True

    @property
    def turns(self) -> int:
        """Most turns of ours, the warming ones included."""
        return self.rounds * (self.each + self.warmed)


@dataclass(frozen=True, slots=True)
class Ratio:
    """Seconds of one other side, round by round, and of ours (the median turn of each round)."""

    name: str
    theirs: Seconds
    ours: Seconds
    our_median: float

    @property
    def value(self) -> float:
        """Median of theirs over the median of ours: how many times faster we are."""
        return median(self.theirs) / self.our_median

    @property
    def spread(self) -> tuple[float, float]:
        """Lower and upper quartile of the ratio, round by round."""
        lower, _, upper = quantiles([t / o for t, o in zip(self.theirs, self.ours, strict=True)], n=4)
        return lower, upper

    def __str__(self) -> str:
        lower, upper = self.spread
        return (
            f"{self.name}: {1e3 * median(self.theirs):.4g} ms / {1e3 * self.our_median:.4g} ms = {self.value:.3g} "
            f"(quartiles {lower:.3g} to {upper:.3g}, {len(self.theirs)} rounds)"
        )


@dataclass(frozen=True, slots=True)
class Race(Generic[Ours, Theirs]):
    """What each side answered, and how they compare; no ratios when nothing was timed."""

    ours: Ours
    theirs: Mapping[str, Theirs]
    ratios: Mapping[str, Ratio]

    def require_faster(self, name: str, times: float) -> None:
        """Fail unless ours is at least so many times faster than side ``name``."""
        if ASSERTED:
            _require_a_fair_start(measured=bool(self.ratios))
            assert self.ratios[name].value >= times, f"at least {times:g} times faster is asked: {self.ratios[name]}"

    def require_no_slower(self, name: str, times: float) -> None:
        """Fail if ours takes more than so many times as long as side ``name``."""
        if ASSERTED:
            _require_a_fair_start(measured=bool(self.ratios))
            slower = 1.0 / self.ratios[name].value
            assert slower <= times, f"at most {times:g} times the time is asked, got {slower:.3f}: {self.ratios[name]}"


def raced(
    benchmark: BenchmarkFixture, ours: Callable[[], Ours], theirs: Mapping[str, Callable[[], Theirs]], course: Course
) -> Race[Ours, Theirs]:
    """Run every side by turns (see the module's text); once each when benchmarks are disabled."""
    turn, answers = count(), dict[str, Theirs]()
    seconds: dict[str, list[float]] = {name: [] for name in theirs}
    clock: Callable[[], float] = benchmark._timer  # the one that pytest-benchmark times ours with

    def others_first() -> None:
        if next(turn) % course.each:
            return
        for name, other in theirs.items():
            start = clock()
            answers[name] = other()
            seconds[name].append(clock() - start)
        if course.warmed and benchmark.enabled:
            ours()

    race_on: Callable[..., Ours] = benchmark.pedantic
    mine = race_on(ours, setup=others_first, rounds=course.rounds * course.each)
    if benchmark.stats is None:  # disabled
        return Race(mine, answers, {})
    data: list[float] = benchmark.stats.stats.data
    by_round = tuple(median(data[first : first + course.each]) for first in range(0, len(data), course.each))
    ratios = {name: Ratio(name, tuple(took), by_round, median(data)) for name, took in seconds.items()}
    benchmark.extra_info.update({name: str(ratio) for name, ratio in ratios.items()})
    return Race(mine, answers, ratios)


def _require_a_fair_start(*, measured: bool) -> None:
    """Refuse to assert ratios that were not measured, or were measured with more BLAS threads than one."""
    if not measured:
        pytest.fail("MOVLOAD_BENCH=1 asserts ratios, which are only measured with --benchmark-enable")
    if os.environ.get("OPENBLAS_NUM_THREADS") != "1":
        pytest.fail("MOVLOAD_BENCH=1 needs OPENBLAS_NUM_THREADS=1, set before Python starts")
