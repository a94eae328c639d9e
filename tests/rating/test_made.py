"""Ratings from sections and materials: strengths by the rules at every level, two trusses that differ, what is asked.

The invented road bridge of test_beside; an eyebar chord of typed iron, 26 and 48 ksi.
"""

from __future__ import annotations

import math
from dataclasses import replace
from typing import TYPE_CHECKING, Final

import numpy as np
import pytest
from numpy.testing import assert_allclose
from rating.test_beside import WAGON, two_lanes

from movload import rate
from movload.bridge.floor import Floor, Stringers
from movload.bridge.loss import AsFound, Loss
from movload.bridge.made import Bent, Held, Joined, Made, Sideways
from movload.bridge.material import Material, Timber
from movload.bridge.section import Section
from movload.bridge.section_bars import Eyebar, Flat, SawnTimber
from movload.bridge.section_piece import Piece
from movload.bridge.shapes import RectangularTube
from movload.bridge.strengths import TypedStrength
from movload.errors import InputError, MissingDataError
from movload.files.factor_sets import read_factor_set
from movload.rating.kernel import rating_factors
from movload.review.hand import explained
from movload.statics.part import row_of

if TYPE_CHECKING:
    from movload.bridge.bridge import Bridge
    from movload.rating.ratings import Ratings

HAND: Final = 1e-12  # relative: the hand formulas carry all digits
FY, FU = 179e6, 331e6  # Pa
IRON: Final = Material("iron", "wrought iron", modulus=193e9, density=7700.0, source="a coupon, invented", fy=FY, fu=FU)
EYEBAR: Final = Eyebar(0.1, 0.02, head_width=0.25, pin_hole=0.08)
PAIR: Final = Section("eyebars", (Piece(EYEBAR, -0.05), Piece(EYEBAR, 0.05)), sharing=1.1)
NEW: Final = Made(section=AsFound(PAIR), material=IRON, place="members.eyebars")
LOST: Final = replace(NEW, section=AsFound(PAIR, (Loss("start end", fraction=0.3, part="shank"),)))
WORDS: Final = TypedStrength(condition="poor", measured=True, system="multiple eyebars", place="members.eyebars")
TUBE: Final = Made(
    section=AsFound(Section("tube", (Piece(RectangularTube(0.2, 0.2, 0.008)),))),
    material=Material("steel", "steel", modulus=200e9, density=7850.0, source="typed, invented", fy=250e6, fu=400e6),
    held=Held(unbraced_x=5.0, unbraced_y=5.0, k_x=1.0, k_y=1.0), place="members.diagonals",
)  # fmt: skip


def chord(left: Made = LOST, right: Made = NEW, words: TypedStrength | None = WORDS, bar: str = "L1-L2") -> Bridge:
    """Return the bridge with one bar made of sections."""
    return two_lanes(
        floor=False, impact=0.25, traffic=100.0, strengths={} if words is None else {bar: words},
        made={bar: (left, right)},
    )  # fmt: skip


def rated(bridge: Bridge, method: str = "lrfr") -> Ratings:
    """Return the wagon's ratings."""
    return rate(bridge, [WAGON], read_factor_set(method))


def at(ratings: Ratings, part: str, bar: str, side: int = 0, level: int = -1) -> float:
    """Return a strength [N] at a level."""
    return float(ratings.solved.strength[level, row_of(ratings.solved.effects, (part, bar)), side])


@pytest.mark.parametrize(
    ("method", "of_yield", "of_fracture"),
    [("lrfr", 0.9 * 0.95, 0.9 * 0.80), ("load_factor", 1.0, 0.80), ("allowable_stress", 0.75, 0.67),
     ("en", 1.0, 0.9 / 1.25)],
)  # fmt: skip
def test_each_method_takes_its_own_rules_and_factors(method: str, of_yield: float, of_fracture: float) -> None:
    """Two shanks of 100 x 20 less 30 % at one end, A = 2800 mm2; heads (250 - 80) x 20 x 2 = 6800 mm2, An the shanks'.

    C = min(yield x 179 x 2800, fracture x 331 x An)/1.1. LRFR: poor 0.85 + 0.05 measured = 0.90, eyebars 0.90:
    0.81, at least 0.85, so k = 0.85 (the floor of 0.85: KHAN p. 187, READ; the others FROM MEMORY).
    """
    area, sharing = 2800e-6, 1.1
    k = 0.85 / 0.9 if method == "lrfr" else 1.0
    ratings = rated(chord(), method)
    expected = [k * min(of_yield * FY * one, of_fracture * FU * one) / sharing for one in (area, 4000e-6)]
    found = [at(ratings, part, "L1-L2") for part in ("left truss", "right truss")]
    assert_allclose(found, expected, rtol=HAND)


def test_a_loss_on_one_truss_only_gives_two_strengths_and_governs() -> None:
    """The wagon may be on either side, so both trusses feel the same; the one with the loss rates lower."""
    ratings = rated(chord(), "load_factor")
    worst = ratings.governing(0)
    assert not ratings.alike
    assert (worst.part, worst.effect.name, worst.sense) == ("left truss", "L1-L2", "tension")
    assert_allclose(worst.strength / worst.as_new, 0.7, rtol=HAND)
    sound = ratings.rating(0, row_of(ratings.solved.effects, ("right truss", "L1-L2")), 0)
    assert sound.factor > worst.factor
    assert_allclose(sound.strength, sound.as_new, rtol=HAND)
    assert rated(chord(NEW, NEW), "load_factor").alike


def test_each_step_is_told_and_the_last_is_the_strength() -> None:
    ratings = rated(chord())
    row = row_of(ratings.solved.effects, ("left truss", "L1-L2"))
    level = next(number for number in range(len(ratings.levels)) if ratings.rates(0, number))
    told = explained(ratings, ratings.rating(0, row, 0, level=level))
    steps = {step.symbol: step for step in told.strength.steps}
    assert_allclose(
        [steps[name].value for name in ("phi tension", "phi fracture", "phi_c", "phi_s", "k", "k phi tension")],
        [0.95, 0.80, 0.90, 0.90, 0.85, 0.85 * 0.95], rtol=HAND,
    )  # fmt: skip
    assert told.strength.steps[-1].value == told.strength.value == told.rating.strength
    assert all(step.equation and step.source for step in told.strength.steps)


def test_levels_with_the_same_factors_on_strength_share_one() -> None:
    """LRFR's six levels differ in their loads alone: two makes are worked out twice, not twelve times."""
    solved = rated(chord()).solved
    assert len(solved.method.levels) == 6
    assert len(solved.strengths) == 1 + 2  # none at all, the left and the right bar's
    assert_allclose(solved.strength, np.broadcast_to(solved.strength[:1], solved.strength.shape), rtol=0)


@pytest.mark.parametrize(
    "half", [{"radius": 0.01, "lacing_area": 1e-4}, {"lacing_area": 1e-4}, {"planes": 2, "radius": 0.01}, {}]
)
def test_half_of_lacing_and_half_of_battens_is_refused(half: dict[str, float]) -> None:
    with pytest.raises(InputError, match="lacing says lacing_area and planes"):
        Joined(axis="y", spacing=0.3, apart=0.2, **half)  # type: ignore[arg-type]  # planes is whole


def test_typed_strengths_come_before_the_rules() -> None:
    typed = replace(WORDS, nominal={"tension": 100e3})
    ratings = rated(chord(words=typed), "load_factor")
    assert at(ratings, "left truss", "L1-L2") == 100e3
    assert math.isnan(ratings.rating(0, row_of(ratings.solved.effects, ("left truss", "L1-L2")), 0).as_new)


def test_a_sense_that_cannot_come_asks_for_nothing() -> None:
    """L1-L2 is never compressed: its free lengths are not asked for, and it is rated in full."""
    ratings = rated(chord(), "load_factor")
    assert math.isnan(at(ratings, "left truss", "L1-L2", side=1))
    assert "left truss L1-L2" in ratings.coverage.full


def test_a_sense_that_may_come_asks_by_place() -> None:
    """L2-U3 is pulled and pushed as the wagon crosses."""
    with pytest.raises(MissingDataError, match=r"members\.eyebars.*unbraced_x"):
        rated(chord(bar="L2-U3"), "load_factor")


def test_what_a_level_asks_is_named() -> None:
    with pytest.raises(MissingDataError, match=r"the condition of L1-L2 is needed"):
        rated(chord(words=None))


def test_what_no_rule_covers_is_not_rated_and_says_why() -> None:
    """Cast iron in tension: refused by name, the bar is not rated, and the answer is no longer complete."""
    cast = replace(NEW, material=replace(IRON, kind="cast iron", title="grey iron"))
    both = two_lanes(
        floor=False, made={"L1-L2": (cast, cast), "U1-L2": (TUBE, TUBE)}, traffic=1.0, strengths={}
    )  # fmt: skip
    ratings = rated(both, "load_factor")
    (note,) = [one for one in ratings.notes if one.code == "not-covered"]
    assert "cast iron" in note.text
    assert note.subject == "L1-L2"
    assert not ratings.coverage.complete
    assert "L1-L2" in ratings.coverage.none
    assert "U1-L2" in ratings.coverage.full


def test_what_bends_a_bar_stands_beside_its_axial_force_with_the_same_k() -> None:
    """A flat bar 0.15 x 0.03 pulled 20 mm off its axis in the truss's plane, LRFR: P/Pr + 8/9 P e/Mr = 1, k on both."""
    flat = Section("flat", (Piece(Flat(0.15, 0.03)),))
    made = Made(section=AsFound(flat), material=IRON, bent=(Bent(axis="x", eccentricity=0.02),), place="members.flat")
    area, modulus = 0.15 * 0.03, 0.03 * 0.15**2 / 6
    k = 0.85
    axial, moment = k * min(0.95 * FY, 0.80 * FU) * area, k * 1.0 * FY * modulus
    expected = 1 / (1 / axial + 8 / 9 * 0.02 / moment)
    assert_allclose(at(rated(chord(made, made)), "left truss", "L1-L2"), expected, rtol=HAND)


def test_permanent_load_alone_has_its_own_limit() -> None:
    """Timber carries 0.9 of its reference stress for good, 1.15 for two months: D = 1 within 1.15 R but not within 0.9.

    Both sides of the limit, and no limit: RF = (1.15 - 1)/0.1.
    """
    strength, pushed, live = np.array([[1.15, np.nan]]), np.array([[1.0, -1.0]]), np.array([[0.1, 0.0]])
    limits = [np.array([[limit, np.inf]]) for limit in (0.9, 1.0, np.inf)]
    found = [rating_factors(strength, pushed, live, alone=limit)[0, 0] for limit in limits]
    assert_allclose(found, [0.0, 1.5, 1.5], rtol=HAND)


def test_timber_stringers_by_the_nds_and_their_limit_for_good() -> None:
    """Fb' S with every factor typed 1 but CD: 10 MPa x 1.15 x 0.2 x 0.4^2/6 at inventory, x 1.33 at operating.

    From memory: CD 1.15 of two months and 0.9 for good (NDS Table 2.3.2). A deck of 40 kN/m leaves nothing for good.
    """
    ones = {"CM": 1.0, "Ct": 1.0, "CF": 1.0, "Cfu": 1.0, "Ci": 1.0, "Cr": 1.0}
    oak = Timber(
        "sawn", {"bending": 10e6, "shear": 1e6},
        {"bending": ones, "shear": {"CM": 1.0, "Ct": 1.0, "Ci": 1.0}},
    )  # fmt: skip
    timber = Material("oak", "timber", modulus=10e9, density=800.0, source="typed, invented", timber=oak)
    beam = Made(
        section=AsFound(Section("beam", (Piece(SawnTimber(0.2, 0.4)),))), material=timber,
        sideways=Sideways(unbraced=None), durations=("two months",), treated=False, place="floor.stringers",
    )  # fmt: skip
    words = TypedStrength(timber=True, place="floor.stringers")
    floor = Floor(Stringers((-3.0, -1.5, 0.0, 1.5, 3.0), strength=words, made=beam))
    bridge = replace(two_lanes(strengths={}), floor=floor)
    ratings = rated(bridge, "allowable_stress")
    row = row_of(ratings.solved.effects, ("stringer S3", "L1-L2 moment"))
    plain = 10e6 * 0.2 * 0.4**2 / 6
    inventory, operating = (ratings.rating(0, row, 0, level=level) for level in range(2))
    assert_allclose([inventory.strength, operating.strength], [1.15 * plain, 1.15 * 1.33 * plain], rtol=HAND)
    assert_allclose([inventory.alone, operating.alone], [0.9 * plain, 0.9 * 1.33 * plain], rtol=HAND)
    heavy = replace(bridge.permanent.items[0], line=120e3)
    loaded = rated(replace(bridge, permanent=replace(bridge.permanent, items=(heavy,))), "allowable_stress")
    weighed = loaded.rating(0, row, 0, level=0)
    assert inventory.factor > 0.0
    assert weighed.pushed > weighed.alone
    assert weighed.factor == 0.0
