"""From a bridge and its crossings to ratings: by hand, and by the laws that any rating must keep."""

from __future__ import annotations

import math
from dataclasses import replace

import numpy as np
import pytest
from hypothesis import given
from hypothesis import strategies as st
from numpy.testing import assert_allclose, assert_array_equal
from rating.bridges import (
    AREA,
    CART,
    DENSITY,
    DEPTH,
    IMPACT,
    PANELS,
    SHARE,
    brook,
    deck_weight,
    part_of,
    rated,
    solved_by_hand,
    weightless,
)
from strategies import vehicles

from movload import Crossing, Loading, Support, Truss, Vehicle, judge, rate, solve
from movload.bridge.across import Across
from movload.bridge.strengths import permitted
from movload.errors import InputError
from movload.rating.factor_sets import FactorSet, Level
from movload.review.hand import terms
from movload.statics.part import row_of
from movload.traffic.loading import Case

GRAVITY = 9.80665  # m/s2, standard
HAND = 1e-12  # relative: the hand formulas carry all digits


def by_hand() -> dict[str, float]:
    """Return permanent forces [N] of the brook bridge by sections and joints.

    Each joint carries half of the bars that meet there; each panel point also 4.5 kN/m of deck over half the two panels
    beside it. A half panel at each end stands on the bearing itself. Between L1 and L2 the shear is what the left
    bearing pushes, less all that stands on L0, L1 and U1.
    """
    a, b, c, d = PANELS
    span = a + b + c + d
    chord, post = AREA * DENSITY * GRAVITY * np.array([1.0, DEPTH])  # N/m of any bar; N of a post
    end_left, end_right = math.hypot(a, DEPTH), math.hypot(d, DEPTH)
    fall_left, fall_right = math.hypot(b, DEPTH), math.hypot(c, DEPTH)
    deck = 9e3 * 0.5 / 2
    lower = np.array([
        deck * a + chord * (a + end_left) / 2,
        deck * (a + b) + chord * (a + b) / 2 + post / 2,
        deck * (b + c) + chord * (b + c + fall_left + fall_right) / 2 + post / 2,
        deck * (c + d) + chord * (c + d) / 2 + post / 2,
        deck * d + chord * (d + end_right) / 2,
    ])  # fmt: skip
    upper = np.array([
        chord * (end_left + b + fall_left) / 2 + post / 2,
        chord * (b + c) / 2 + post / 2,
        chord * (c + fall_right + end_right) / 2 + post / 2,
    ])  # fmt: skip
    x = np.array([0.0, a, a + b, a + b + c, span])
    left = float(lower @ (span - x) + upper @ (span - x[1:4])) / span
    shear = left - lower[0] - lower[1] - upper[0]
    return {
        "L0 y": left,
        "L4 normal": float(lower.sum() + upper.sum()) - left,
        "L0-U1": -(left - lower[0]) * end_left / DEPTH,
        "L0-L1": (left - lower[0]) * a / DEPTH,
        "L1-L2": (left - lower[0]) * a / DEPTH,
        "U1-U2": -((left - lower[0]) * (a + b) - (lower[1] + upper[0]) * b) / DEPTH,
        "U1-L1": float(lower[1]),
        "U2-L2": -float(upper[1]),
        "U1-L2": shear * fall_left / DEPTH,
    }


@pytest.mark.parametrize("name", by_hand())
def test_permanent_forces_by_sections(name: str) -> None:
    solved = solve(brook())
    assert_allclose(solved.permanent.sum(axis=0)[row_of(solved.effects, name)], by_hand()[name], rtol=HAND)


def test_rating_of_a_hanger_by_hand() -> None:
    """Hanger U1-L1: its line is 1 at L1 and 0 at L0 and L2.

    The 50 kN axle stands on L1, the 30 kN one 2.1 m off toward L0, the longer panel: 50 + 30 (1 - 2.1 / 4.1) kN.
    """
    live = (50e3 + 30e3 * (1 - 2.1 / 4.1)) * SHARE * (1 + IMPACT)
    hanger = rated(rate(brook(), [CART]), "U1-L1", "tension")
    assert_allclose(hanger.live, live, rtol=HAND)
    assert_allclose(hanger.factor, (400e3 - by_hand()["U1-L1"]) / live, rtol=HAND)
    assert (hanger.peak.axle, hanger.peak.station, hanger.peak.heading) == (1, 1, -1)


def test_ratings_of_a_reversing_diagonal_by_hand() -> None:
    """Diagonal U1-L2: the shear of panel 2 is 1 - x/16 right of L2, -x/16 left of L1, straight between; T = V l / h.

    Tension: 50 kN on L2 (7.8), 30 kN 2.1 m on toward L4. Compression: 50 kN on L1 (4.1), 30 kN 2.1 m nearer L0.
    """
    csc = math.hypot(3.7, DEPTH) / DEPTH
    felt = csc * SHARE * (1 + IMPACT)
    pulled = (50e3 * (1 - 7.8 / 16) + 30e3 * (1 - 9.9 / 16)) * felt
    pushed = (50e3 * 4.1 / 16 + 30e3 * 2.0 / 16) * felt
    permanent = by_hand()["U1-L2"]
    ratings = rate(brook(), [CART])
    tension, compression = (rated(ratings, "U1-L2", sense) for sense in ("tension", "compression"))
    assert_allclose([tension.live, compression.live], [pulled, -pushed], rtol=HAND)
    assert_allclose(tension.factor, (400e3 - permanent) / pulled, rtol=HAND)
    assert_allclose(compression.factor, (300e3 + permanent) / pushed, rtol=HAND)


@given(st.floats(0.0, 0.999))
def test_less_permanent_load_lowers_the_compression_rating_of_a_reversing_diagonal(kept: float) -> None:
    full, lighter = (
        rate(brook(permanent=deck_weight(9e3 * part, 0.5)), [CART]) for part in (1.0, kept)
    )  # fmt: skip
    for name in ("U1-L2", "L2-U3"):
        assert rated(lighter, name, "compression").factor < rated(full, name, "compression").factor
        assert rated(lighter, name, "tension").factor > rated(full, name, "tension").factor


def test_settlement_counts_as_permanent_load() -> None:
    """A prop at L2 that sank 2 mm: every rating is that of components and settlement added."""
    truss = brook().truss
    ratings = rate(
        brook(truss=Truss(truss.joints, truss.members, [*truss.supports, Support("L2", 0, settlement=0.002)])), [CART]
    )
    components, settlement = ratings.solved.permanent[[0, -1]]
    felt = 0
    for rating in ratings.rows(0):
        sign = 1 if rating.sense == "tension" else -1
        permanent = components[rating.row] + settlement[rating.row]
        assert rating.permanent == permanent
        if rating.live and rating.factor > 0:
            assert_allclose(rating.factor, (rating.strength - sign * permanent) / abs(rating.live), rtol=HAND)
            felt += bool(settlement[rating.row])
    assert felt > 10


def test_impact_enters_once_and_only_on_live_load() -> None:
    still, moving = (rate(brook(impact=impact), [CART]) for impact in (0.0, 0.25))
    assert_array_equal(moving.solved.permanent, still.solved.permanent)
    for side in (0, 1):
        one, other = ([p.highest, p.lowest][side] for p in (moving.peaks[0], still.peaks[0]))
        assert_array_equal(one, 1.25 * other)
    finite = np.isfinite(still.factor)
    assert finite.any()
    assert_allclose(moving.factor[finite], still.factor[finite] / 1.25, rtol=HAND)
    assert rated(moving, "U1-L1", "tension").impact == 0.25


def test_each_share_enters_once_and_on_its_own_load() -> None:
    near, half = rate(brook(), [CART]), rate(brook(deck=replace(brook().deck, truss_share=SHARE / 2)), [CART])
    assert_array_equal(near.solved.permanent, half.solved.permanent)
    assert_allclose(near.peaks[0].highest, 2 * half.peaks[0].highest, rtol=HAND)
    more_deck = rate(brook(permanent=deck_weight(9e3, 0.7)), [CART])
    assert_array_equal(near.peaks[0].highest, more_deck.peaks[0].highest)
    assert more_deck.solved.permanent.sum() > near.solved.permanent.sum()


@given(vehicles(), st.integers(0, 12), st.integers(0, 1))
def test_a_vehicle_times_its_rating_rates_one(vehicle: Vehicle, row: int, side: int) -> None:
    """A rating is the multiple of the vehicle, axle by axle, that uses the strength exactly."""
    solved = solve(brook())
    before = judge(solved, [vehicle]).rating(0, row, side)
    if not math.isfinite(before.factor):
        assert before.live == 0.0
        return
    scaled = Vehicle("scaled", vehicle.loads * before.factor, vehicle.spacings, headings=vehicle.headings)
    after = judge(solved, [scaled]).rating(0, row, side)
    # each axle is rounded once when it is multiplied; what is left of a strength is 30 % of it or more here
    assert_allclose(after.factor, 1.0, rtol=HAND)
    assert_allclose(before.safe_weight, scaled.gross, rtol=HAND)


@given(vehicles())
def test_every_live_effect_follows_from_its_placement(vehicle: Vehicle) -> None:
    """The loads as they stand, share and impact on them, on the same lines: the same number."""
    ratings = judge(solve(brook()), [vehicle])
    (part,) = ratings.solved.parts
    size = vehicle.gross * np.abs(part.response.ordinates).max(axis=1)  # type: ignore[attr-defined]  # lines have them
    for row, effect in enumerate(ratings.solved.effects):
        for side in (0, 1):
            one = ratings.rating(0, row, side)
            if not one.peak.placement.x.size:
                assert one.live == 0.0
                continue
            again = part.response.under(one.peak.placement.panel_loads(part.response.stations)[:, None])[row, 0]
            # axles that pull and push cancel: round-off is that of the largest of them
            assert_allclose(one.live, again, rtol=HAND, atol=1e-14 * size[row], err_msg=str(effect))


def test_several_crossings_are_each_rated_as_if_alone() -> None:
    solved = solve(brook())
    lorry = Vehicle("lorry", [60e3, 90e3, 90e3], [3.3, 1.4])
    both = judge(solved, [CART, lorry])
    assert [crossing.title for crossing in both.crossings] == ["cart", "lorry"]
    assert both.factor.shape == (1, 2, len(solved.effects), 2)
    for number, vehicle in enumerate((CART, lorry)):
        # one batch is another matrix product: its last digit may differ
        assert_allclose(both.factor[0, number], judge(solved, [vehicle]).factor[0, 0], rtol=HAND)
    assert both.governing(1).crossing == "lorry"


def test_a_vehicle_a_loading_and_a_crossing_are_rated_alike() -> None:
    solved = solve(brook())
    forms: list[Vehicle | Loading | Crossing] = [CART, Loading.of(CART), Crossing(Loading.of(CART))]
    alone, *others = (judge(solved, [form]).factor for form in forms)
    for factor in others:
        assert_array_equal(factor, alone)


def test_nothing_crosses() -> None:
    with pytest.raises(InputError, match="crossings: nothing crosses: at least one vehicle is needed"):
        judge(solve(brook()), [])


def test_a_spacing_that_may_vary_is_no_better_than_any_of_its_own() -> None:
    """Between 3 and 5 m: each rating is the least of many rigid vehicles, or less by no more than a step."""
    solved = solve(brook())
    gaps = np.linspace(3.0, 5.0, 41)
    rigid = judge(solved, [Vehicle(f"at {gap:g}", [30e3, 50e3], [gap]) for gap in gaps])
    ranged = judge(solved, [Vehicle("stretch", [30e3, 50e3], [(3.0, 5.0)])])
    least = rigid.factor.min(axis=1)
    rated = np.isfinite(least)
    assert rated.any()
    assert (ranged.factor[:, 0][rated] <= least[rated] * (1 + 1e-9)).all()
    assert (ranged.factor[:, 0][rated] >= least[rated] * 0.98).all()  # a step of 50 mm changes no line by more
    for rating in ranged.rows(0):
        if rating.live:
            assert_allclose(sum(term.effect for term in terms(rating.peaks, rating.row, rating.side)), rating.live,
                            rtol=1e-9)  # fmt: skip
            assert 3.0 - 1e-9 <= rating.peak.spacings[0] <= 5.0 + 1e-9


@given(st.floats(0.0, 1.0), st.booleans())
def test_what_counts_less_where_it_relieves(relieving: float, ranged: bool) -> None:
    """No rating rises above that of the whole vehicle, none falls below that which drops relief; terms add up."""
    spacing = (3.0, 5.0) if ranged else 4.2
    vehicle = Vehicle("model", [40e3, 90e3, 90e3], [spacing, 4.3])
    solved = solve(brook())
    whole, some, none = (
        judge(solved, [Loading("model", "design", (Case("model", vehicle, relieving=part),))])
        for part in (1.0, relieving, 0.0)
    )
    rated = np.isfinite(whole.factor)
    assert (some.factor[rated] <= whole.factor[rated] * (1 + 1e-9)).all()
    assert (some.factor[rated] >= none.factor[rated] * (1 - 1e-9)).all()
    for rating in some.rows(0):
        if rating.live:
            found = sum(term.effect for term in terms(rating.peaks, rating.row, rating.side))
            assert_allclose(found, rating.live, rtol=1e-9)


def test_levels_take_their_own_margins() -> None:
    method = FactorSet(
        "lf", (Level("inventory", 1.3, 2.17), Level("operating", 1.3, 1.3)), "Two levels.", "from memory"
    )
    ratings = judge(solve(brook(), method), [CART])
    assert ratings.levels == ("inventory", "operating")
    for level, live_margin in enumerate((2.17, 1.3)):
        hanger = rated(ratings, "U1-L1", "tension", level=level)
        assert hanger.level == ratings.levels[level]
        assert_allclose(hanger.factor, (400e3 - 1.3 * by_hand()["U1-L1"]) / (live_margin * hanger.live), rtol=HAND)
    assert_array_equal(ratings.factor[0] < ratings.factor[1], np.isfinite(ratings.factor[0]))


def test_strength_zero_lets_nothing_cross_that_compresses() -> None:
    """Eyebars that take no compression, no permanent load to undo first: the reversing diagonals rate 0."""
    names = [member.name for member in brook().truss.members]
    ratings = rate(weightless(strengths={name: permitted(400e3, 0.0) for name in names}), [CART])
    assert rated(ratings, "U1-L2", "compression").factor == 0.0
    assert rated(ratings, "L0-L1", "compression").factor == math.inf  # never compressed: needs none
    assert not ratings.passes


def test_a_live_effect_that_is_no_number_is_refused() -> None:
    part = part_of("truss", {"L0-L1": [0.0, 1.0, 0.0]}, [0.0, 4.0, 8.0], Across.typed(1.0))
    with pytest.raises(InputError, match=r"^Hand bridge: a live effect is not a finite number$"):
        judge(solved_by_hand([part], impact=[(math.nan, 0.0)]), [CART])
