"""A bearing that a crossing pulls up: an overhanging span by moments, and what it does to the answer."""

from __future__ import annotations

from typing import TYPE_CHECKING

import pytest
from numpy.testing import assert_allclose
from rating.bridges import IMPACT, PANELS, SHARE, brook, brook_truss

from movload import Support, Truss, Vehicle, rate
from movload.report.phrases import verdict_text

if TYPE_CHECKING:
    from movload import Ratings

HAND = 1e-12  # relative: the hand figures carry all digits
SPAN, TOTAL = sum(PANELS[:3]), sum(PANELS)  # L0 to the bearing L3; to the tip L4 [m]


def overhung(*loads: float, slides: float = 0.0, pinned: str = "L0") -> Ratings:
    """Return the ratings of the brook bridge with bearings at L0 and L3, bars without weight, under single axles."""
    bars = brook_truss(0.0)
    other = "L3" if pinned == "L0" else "L0"
    truss = Truss(bars.joints, bars.members, [Support(pinned), Support(other, slides)])
    return rate(brook(truss=truss), [Vehicle(f"{load:g}", [load], []) for load in loads])


def pull(load: float) -> float:
    """Return what pulls at L0 by moments about L3 [N]: an axle on the tip, less half of 9 kN/m of deck's own moment."""
    live = load * SHARE * (1 + IMPACT) * (TOTAL - SPAN) / SPAN
    return live - 9e3 * 0.5 * TOTAL * (SPAN - TOTAL / 2) / SPAN


@pytest.mark.parametrize("pinned", ["L0", "L3"])
def test_uplift_by_moments(pinned: str) -> None:
    """120 kN on the overhang's tip lift L0 off, whether it is the pin ("L0 y") or the roller ("L0 normal")."""
    ratings = overhung(120e3, pinned=pinned)
    ((name, lifted),) = ratings.uplifts.items()
    assert name == ("L0 y" if pinned == "L0" else "L0 normal")
    assert pull(120e3) > 5e3
    assert_allclose(lifted, pull(120e3), rtol=HAND)


def test_uplift_starts_where_live_load_undoes_permanent_load() -> None:
    """A hair above that load there is uplift, a hair below none."""
    even = 120e3 * pull(0.0) / (pull(0.0) - pull(120e3))
    assert_allclose(pull(even), 0.0, atol=1e-9)  # N: the load itself was found by division
    assert overhung(even * (1 + 1e-6)).uplifts
    assert not overhung(even * (1 - 1e-6)).uplifts


def test_the_worst_crossing_lifts_in_whichever_order() -> None:
    for loads in ((50e3, 120e3, 130e3), (130e3, 120e3, 50e3)):
        assert overhung(*loads).uplifts == {"L0 y": pytest.approx(pull(130e3), rel=HAND)}


def test_a_span_that_lifts_does_not_pass_though_every_bar_does() -> None:
    held, lifted = overhung(50e3), overhung(120e3)
    assert (held.passes, lifted.passes) == (True, False)
    assert lifted.worst.factor > 1
    assert lifted.coverage.complete
    said = [verdict_text(one.worst.factor, one.coverage, one.uplifts) for one in (held, lifted)]
    assert said == ["adequate, for the parts rated", "adequate only if L0 is held down"]


def test_a_bearing_that_is_only_pushed_along_does_not_lift() -> None:
    """An inclined bed at L4 makes L0 push toward -x or +x, with a negative reaction in one of them: no uplift."""
    bars, pushed = brook_truss(0.0), []
    for angle in (-20.0, 20.0):
        truss = Truss(bars.joints, bars.members, [Support("L0"), Support("L4", angle)])
        ratings = rate(brook(truss=truss), [Vehicle("axle", [50e3], [])])
        pushed.append(ratings.peaks[0]["L0 x"].lowest.value)
        assert ratings.uplifts == {}
    assert min(pushed) < -5e3


def test_permanent_load_alone_may_lift_a_bearing() -> None:
    """Bearings at L1 and L2, the deck's middle 0.2 m beyond L2: L1 is held down before the axle stands on L4."""
    bars = brook_truss(0.0)
    truss = Truss(bars.joints, bars.members, [Support("L1"), Support("L2", 0)])
    ratings = rate(brook(truss=truss), [Vehicle("axle", [1e3], [])])
    weight, arm = 9e3 * 0.5 * TOTAL, PANELS[1]
    beyond = TOTAL / 2 - PANELS[0] - PANELS[1]
    live = 1e3 * SHARE * (1 + IMPACT) * (PANELS[2] + PANELS[3]) / arm
    assert_allclose(ratings.uplifts["L1 y"], weight * beyond / arm + live, rtol=HAND)
