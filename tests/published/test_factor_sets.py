"""The shipped factor sets against the published factors they hold.

Sources, and how each number is known:

- M. A. Khan, *Bridge and Highway Structure Rehabilitation and Repair*, McGraw-Hill 2010, p. 187: the LRFR equation, its
  floor of 0.85 and the posting curve. READ.
- AASHTO, *Manual for Bridge Evaluation*, sections 6A (LRFR, later editions) and 6B (load factor, allowable stress);
  AASHTO LRFD *Bridge Design Specifications*; *Standard Specifications*, 17th ed. FROM MEMORY, no page read again.
- EN 1990 and EN 1993-2, recommended values. FROM MEMORY; national annexes differ.

A factor from memory that is checked against a number from the same memory proves only that the file was typed right:
these are checks of the data, and the sets say "from memory" in every answer.
"""

from __future__ import annotations

import numpy as np
import pytest
from numpy.testing import assert_allclose

from movload.files.factor_sets import read_factor_set
from movload.rating.factor_sets import FactorSet, Level, capacity_factor, sign_weight
from movload.rating.kernel import pushed_by_permanent, rating_factors
from movload.traffic.loading import KINDS

LRFR, LOAD_FACTOR, ALLOWABLE_STRESS, EN = map(read_factor_set, ("lrfr", "load factor", "allowable stress", "en"))
CLASSES = ("components", "surfacing", "other", "settlement")
TYPED = 1e-15  # relative: a quotient as printed, rounded once
PERMITS = ("permit, single trip, escorted", "permit, single trip, in traffic", "permit, under 100 trips")


def level(method: FactorSet, title: str) -> Level:
    """Return a level of a set by its title."""
    return next(one for one in method.levels if one.title == title)


def test_capacity_factor_and_its_floor() -> None:
    """KHAN p. 187, READ: phi_c phi_s is at least 0.85. Poor 0.85 x riveted 0.90 = 0.765 counts 0.85."""
    assert capacity_factor(0.85, 0.90) == 0.85
    assert_allclose(capacity_factor(0.95, 0.90), 0.855, rtol=TYPED)
    assert capacity_factor(1.0, 1.0) == 1.0


def test_posting_curve() -> None:
    """KHAN p. 187, READ: (W / 0.7) (RF - 0.3); below RF = 0.3 that vehicle may not cross.

    W = 40 t, RF = 0.75: 40 x 0.45 / 0.7 = 25.71 t (arithmetic done here). Half the last digit.
    """
    legal = level(LRFR, "legal")
    assert_allclose(sign_weight(legal, 0.75, 40.0), 25.71, rtol=0.0, atol=5e-3)
    assert sign_weight(legal, 0.29, 40.0) == 0.0
    assert [one.title for one in LRFR.levels if one.posting] == ["legal"]  # the curve is for legal loads only


def test_lrfr_permanent_load() -> None:
    """LRFD, FROM MEMORY: DC 1.25 / 0.90, DW 1.50 / 0.65. Other loads as DW, settlement plain: own choice."""
    for one in LRFR.levels:
        margins = one.permanent_margins(CLASSES)
        assert margins.tolist() == [[1.25, 0.90], [1.50, 0.65], [1.50, 0.65], [1.0, 1.0]]


@pytest.mark.parametrize(
    ("title", "kind", "live"),
    [
        ("design inventory", "design", 1.75),
        ("design operating", "design", 1.35),
        (PERMITS[0], "permit", 1.10),
        (PERMITS[1], "permit", 1.20),
        (PERMITS[2], "permit", 1.40),
    ],
)
def test_lrfr_live_load(title: str, kind: str, live: float) -> None:
    """MBE 6A, FROM MEMORY; the permit factors, of later editions, with low confidence."""
    one = level(LRFR, title)
    assert one.kinds == (kind,)
    assert one.live_margin(kind) == live
    assert not one.needs_traffic


@pytest.mark.parametrize(
    ("traffic", "live"), [(100.0, 1.30), (1000.0, 1.30), (3000.0, 1.375), (5000.0, 1.45), (None, 1.45)]
)
def test_lrfr_legal_load_by_traffic(traffic: float | None, live: float) -> None:
    """MBE 6A, later editions, FROM MEMORY: 1.45 (5000 and more, or unknown), 1.30 (1000 and less), linear between.

    Its own kinds beside routine and legal are movload's own choice.
    """
    legal = level(LRFR, "legal")
    assert legal.kinds == ("routine", "legal", "emergency", "farm", "forest", "trail", "crowd")
    for kind in legal.kinds:
        assert_allclose(legal.live_margin(kind, traffic), live, rtol=TYPED)


def test_lrfr_resistance() -> None:
    """LRFD, FROM MEMORY: tension yielding 0.95, compression 0.95 (0.90 in older editions), bending and shear 1.0."""
    for one in LRFR.levels:
        assert one.resistance == {
            "tension": 0.95, "fracture": 0.80, "compression": 0.95, "moment": 1.0, "hogging": 1.0, "shear": 1.0,
        }  # fmt: skip
        assert one.condition_factors


def test_lrfr_condition_and_system() -> None:
    """MBE 6A, FROM MEMORY."""
    assert LRFR.condition == {"good": 1.00, "fair": 0.95, "poor": 0.85}
    assert LRFR.measured_gain == 0.05
    assert LRFR.system == {
        "welded members": 0.85,
        "riveted members": 0.90,
        "multiple eyebars": 0.90,
        "floorbeams over 12 ft apart": 0.85,
        "other": 1.00,
    }


def test_lrfr_impact_and_multiple_presence() -> None:
    """MBE 6A and LRFD, FROM MEMORY: 33 % design; 33 / 20 / 10 % legal by surface; none at 10 mph for permits."""
    assert LRFR.impact == "by riding surface"
    assert LRFR.impact_values == {"design": 0.33, "smooth": 0.10, "minor": 0.20, "severe": 0.33}
    assert LRFR.crawl_kinds == ("permit",)
    assert_allclose(LRFR.crawl_speed, 10 * 1609.344 / 3600, rtol=TYPED)
    assert [LRFR.presence("legal", count) for count in (1, 2, 3, 4, 5)] == [1.20, 1.00, 0.85, 0.65, 0.65]
    assert [LRFR.presence("permit", count) for count in (1, 2, 3, 4)] == [1.00, 1.00, 0.85, 0.65]


@pytest.mark.parametrize(("title", "live"), [("inventory", 2.17), ("operating", 1.3)])
def test_load_factor(title: str, live: float) -> None:
    """MBE 6B, FROM MEMORY: A1 = 1.3, A2 = 2.17 or 1.3, column 0.85. Relief and fracture 0.80: own choice, no source."""
    one = level(LOAD_FACTOR, title)
    assert one.live_margin("routine") == live
    assert one.permanent_margins(CLASSES).tolist() == [[1.3, 1.0]] * 4
    assert one.resistance == {
        "tension": 1.0, "fracture": 0.80, "compression": 0.85, "moment": 1.0, "hogging": 1.0, "shear": 1.0,
    }  # fmt: skip
    assert not one.condition_factors


@pytest.mark.parametrize(
    ("title", "of_yield", "safety", "of_shear"), [("inventory", 0.55, 2.12, 0.33), ("operating", 0.75, 1.70, 0.45)]
)
def test_allowable_stress(title: str, of_yield: float, safety: float, of_shear: float) -> None:
    """MBE 6B, FROM MEMORY: 0.55 or 0.75 Fy, columns 1/2.12 or 1/1.70, shear 0.33 or 0.45 Fy on a nominal 0.58 Fy.

    0.50 or 0.67 of the ultimate on net sections; timber 1 or 1.33 times the NDS: FROM MEMORY too.
    """
    one = level(ALLOWABLE_STRESS, title)
    assert one.live_margin("routine") == 1.0
    assert one.permanent_margins(CLASSES).tolist() == [[1.0, 1.0]] * 4
    assert [one.resistance[sense] for sense in ("tension", "moment", "hogging")] == [of_yield] * 3
    assert_allclose(one.resistance["compression"], 1 / safety, rtol=TYPED)
    assert one.resistance["fracture"] == {0.55: 0.50, 0.75: 0.67}[of_yield]
    assert set(one.timber.values()) == {{0.55: 1.0, 0.75: 1.33}[of_yield]}
    assert_allclose(one.resistance["shear"], of_shear / 0.58, rtol=TYPED)
    assert not one.condition_factors


@pytest.mark.parametrize("method", [LOAD_FACTOR, ALLOWABLE_STRESS], ids=["load factor", "allowable stress"])
def test_impact_and_multiple_presence_of_the_standard_specifications(method: FactorSet) -> None:
    """AASHTO Standard Specifications, 17th ed., FROM MEMORY: 50 / (L + 125), and 1.0, 1.0, 0.90, 0.75."""
    assert method.impact == "by loaded length"
    assert [method.presence("routine", count) for count in (1, 2, 3, 4, 5)] == [1.0, 1.0, 0.90, 0.75, 0.75]
    assert method.crawl_kinds == ()


def test_en_partial_factors() -> None:
    """EN 1990 and EN 1993-2, FROM MEMORY: G 1.35 / 1.00; Q 1.35 road and crowd, 1.45 rail, 1.50 other.

    M0 1.00, M1 1.10. Which kinds are "other" is movload's own choice.
    """
    (ultimate,) = EN.levels
    assert ultimate.permanent_margins(CLASSES).tolist() == [[1.35, 1.00]] * 3 + [[1.0, 1.0]]
    live = {kind: ultimate.live_margin(kind) for kind in KINDS}
    others = dict.fromkeys(("farm", "forest", "trail"), 1.50)
    assert live == {**dict.fromkeys(KINDS, 1.35), "rail": 1.45, **others}
    assert_allclose(ultimate.resistance["compression"], 1 / 1.10, rtol=TYPED)
    assert_allclose(ultimate.resistance["fracture"], 1 / 1.25, rtol=TYPED)
    assert [ultimate.resistance[sense] for sense in ("tension", "moment", "hogging", "shear")] == [1.0] * 4
    assert EN.impact == ""
    assert [EN.presence("routine", count) for count in (1, 2, 3)] == [1.0] * 3


@pytest.mark.parametrize("method", [LRFR, LOAD_FACTOR, ALLOWABLE_STRESS], ids=["lrfr", "load factor", "asr"])
def test_highway_sets_rate_every_kind_but_rail_and_close_below_three_short_tons(method: FactorSet) -> None:
    """Practice of US owners, FROM MEMORY: a bridge that cannot carry 3 short tons (26.7 kN) is closed to vehicles."""
    assert [kind for kind in KINDS if not method.levels_for(kind)] == ["rail"]
    assert_allclose(method.closure, 6000 * 0.45359237 * 9.80665, rtol=TYPED)
    assert (EN.levels_for("rail"), EN.closure) == ((0,), 0.0)


def test_what_was_read_is_not_called_recalled() -> None:
    """Only the floor and the posting curve were READ (KHAN p. 187); all other published values are from memory."""
    read = [name for name, said in LRFR.sources.items() if said.endswith("Khan 2010, p. 187, read")]
    assert read == ["floor 0.85 of phi_c phi_s", "legal curve W (RF - 0.3)/0.7"]
    for method in (LRFR, LOAD_FACTOR, ALLOWABLE_STRESS, EN):
        chosen = [name for name, said in method.sources.items() if said.startswith("own choice, no source")]
        assert set(method.sources) - {*read, *chosen} == set(method.from_memory)


@pytest.mark.parametrize(
    ("method", "title", "kind", "rating"),
    [
        (LRFR, "design inventory", "design", (0.855 * 0.95 * 1000 - 1.25 * 200 - 1.50 * 40) / (1.75 * 300)),
        (LRFR, "legal", "routine", (0.855 * 0.95 * 1000 - 1.25 * 200 - 1.50 * 40) / (1.45 * 300)),
        (LOAD_FACTOR, "inventory", "routine", (1000 - 1.3 * 240) / (2.17 * 300)),
        (ALLOWABLE_STRESS, "operating", "routine", (750 - 240) / 300),
        (EN, "ultimate", "routine", (1000 - 1.35 * 240) / (1.35 * 300)),
    ],
    ids=["lrfr inventory", "lrfr legal", "load factor", "allowable stress", "en"],
)
def test_the_rating_equation_with_each_sets_factors(method: FactorSet, title: str, kind: str, rating: float) -> None:
    """KHAN p. 187 (READ) and the other sets' equations, E1: a fair riveted tie, Rn 1000, DC 200, DW 40, L (1 + I) 300.

    phi_c phi_s = 0.95 x 0.90 = 0.855.
    """
    one = level(method, title)
    both = capacity_factor(method.condition["fair"], method.system["riveted members"]) if one.condition_factors else 1.0
    strength = np.array([[both * one.resistance["tension"] * 1000.0, 0.0]])
    permanent = np.array([[200.0], [40.0], [0.0], [0.0]])
    pushed = pushed_by_permanent(permanent, one.permanent_margins(CLASSES))
    rated = rating_factors(strength, pushed, one.live_margin(kind) * np.array([[300.0, 0.0]]))
    assert_allclose(rated[0, 0], rating, rtol=1e-14)  # a handful of operations
