"""What a rating covers: a bar needs a strength in every sense that something brings about, and in no other."""

from __future__ import annotations

import math

import numpy as np
from oracles.trusses import simple_span
from rating.bridges import CART, bars, brook, brook_truss, part_of, solved_by_hand

from movload import Crossing, Loading, Member, Truss, Vehicle, judge, rate
from movload.bridge.across import Across
from movload.bridge.roadway import Roadway
from movload.bridge.strengths import permitted

AXLE = Vehicle("axle", [40e3], [], gauges=(0.5,))
NAN = math.nan


def test_coverage_tells_full_partly_and_none_apart() -> None:
    """B0 feels one sense and has it; B1 feels both and has one; B2 has none; B3 feels nothing and needs none.

    B4 feels tension by live load and compression by permanent load; B5 has only the sense that it does not feel.
    """
    solved = bars(
        [1.0, -1.0, 1.0, 0.0, 1.0, 1.0],
        permanent=[5e3, 5e3, 5e3, 0.0, -5e3, 5e3],
        strength=[(100e3, NAN), (100e3, NAN), (NAN, NAN), (NAN, NAN), (100e3, NAN), (NAN, 100e3)],
    )
    ratings = judge(solved, [AXLE])
    coverage = ratings.coverage
    assert (coverage.full, coverage.partly, coverage.none) == (("B0", "B3"), ("B1", "B4"), ("B2", "B5"))
    assert coverage.not_rated == ("floor", "deck")
    assert not coverage.complete
    assert not ratings.passes
    assert ratings.worst.factor > 1


def test_coverage_asks_for_what_any_crossing_makes_felt() -> None:
    """Across the left half B0 is pulled, across the right half pushed; one vehicle keeps to where nothing pushes."""
    across = Across(np.array([0.0, 1.0, 2.0]), np.array([1.0, 0.0, -1.0]))
    part = part_of("truss", {"B0": [0.0, 1.0, 0.0]}, [0.0, 4.0, 8.0], across)
    solved = solved_by_hand([part], strength=[(100e3, NAN)], roadway=Roadway(0.0, 2.0, clearance=0.0))
    pulls, pushes = (Crossing(Loading.of(AXLE), "offset", z) for z in (0.25, 1.75))
    assert judge(solved, [pulls]).passes
    assert judge(solved, [pulls, pushes]).coverage.partly == ("B0",)
    assert judge(solved, [pushes]).coverage.none == ("B0",)


def test_a_bar_that_carries_nothing_needs_no_strength() -> None:
    """Joint U0 stands on two bars not in line: without a weight of their own they carry exactly nothing."""
    plain = brook_truss()
    permits = {member.name: permitted(400e3, 300e3) for member in plain.members}
    stub = {"U0-L0", "U0-U1"}
    for density, key in ((0.0, "full"), (7850.0, "none")):
        members = [*plain.members, *(Member("U0", end, 5e-3, 200e9, density=density) for end in ("L0", "U1"))]
        truss = Truss({**plain.joints, "U0": (0.3, 3.9)}, members, simple_span(4))
        ratings = rate(brook(truss=truss, strengths=permits), [CART])
        assert stub <= set(getattr(ratings.coverage, key))
        assert ratings.passes is (density == 0.0)


def test_only_members_are_counted_as_members() -> None:
    coverage = rate(brook(), [CART]).coverage
    assert coverage.full == tuple(member.name for member in brook_truss().members)
    assert coverage.complete
