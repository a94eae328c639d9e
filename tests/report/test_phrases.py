"""What a number is called in a table: letters beside signs, nothing rounded the flattering way, no signed zero."""

from __future__ import annotations

import math
from dataclasses import replace

import pytest
from hypothesis import given
from hypothesis import strategies as st
from rating.bridges import CART, brook, one_bar, part_of

from movload import Vehicle, influence_lines, judge, rate, sweep
from movload.bridge.across import Across
from movload.rating.rating import Coverage
from movload.report.phrases import (
    CAUTIONS,
    coverage_text,
    effect_text,
    factor_text,
    number_text,
    place_text,
    quantity_of,
    rounded_down,
    span_ratio_text,
    standing_text,
    uplift_texts,
    use_text,
    verdict_text,
    weight_text,
)
from movload.statics.part import Effect
from movload.units import UnitSystem

SI = UnitSystem("m", "kN", "mm")
US = UnitSystem("ft", "kip", "in")
BAR = Effect("truss", "U1-L2", "axial", "N")
REACTION = Effect("truss", "L0 y", "reaction", "N")
DOWN = Effect("truss", "L3 down", "down", "m")
MOMENT = Effect("stringer S1", "L0-L1 moment", "moment", "N m")
SHEAR = Effect("stringer S1", "L0-L1 shear", "shear", "N")
KIP = 4448.2216152605  # N, exact (NIST SP 811, B.8, from memory)
TONNE = 9806.65  # N
SHORT_TON = 2000 * 4.4482216152605  # N


@pytest.mark.parametrize(
    ("effect", "value", "units", "text"),
    [
        (BAR, 212.44e3, SI, "212.4 T"),
        (BAR, -88.06e3, SI, "-88.1 C"),
        (BAR, -19.539 * KIP, US, "-19.5 C"),
        (BAR, 0.0, SI, "0"),
        (BAR, -0.0, SI, "0"),
        (BAR, -49.0, SI, "0"),
        (BAR, 49.0, SI, "0"),
        (BAR, -51.0, SI, "-0.1 C"),
        (REACTION, -120e3, SI, "-120.0"),
        (REACTION, 120e3, SI, "120.0"),
        (REACTION, -1.0, SI, "0"),
        (DOWN, 12.345e-3, SI, "12.35"),
        (DOWN, -4e-6, SI, "0"),
        (DOWN, 0.5 * 0.0254, US, "0.50"),
        (MOMENT, 82.36e3, SI, "82.4 kN m"),
        (MOMENT, -82.36e3, SI, "-82.4 kN m"),  # hogging: moments have no letters
        (MOMENT, 100 * KIP * 0.3048, US, "100.0 kip ft"),
        (MOMENT, -1.0, SI, "0"),
        (SHEAR, 120e3, SI, "120.0"),
    ],
)
def test_a_bars_force_has_its_letter_and_zero_has_nothing(
    effect: Effect, value: float, units: UnitSystem, text: str
) -> None:
    assert effect_text(effect, value, units) == text


@given(st.floats(-1e7, 1e7), st.sampled_from(["N", "kN", "MN", "kip", "t"]))
def test_the_letter_always_agrees_with_the_sign(value: float, force: str) -> None:
    text = effect_text(BAR, value, UnitSystem("m", force, "mm"))
    if text != "0":
        number, letter = text.split(" ")
        assert float(number) * value > 0
        assert letter == ("T" if value > 0 else "C")


@pytest.mark.parametrize(
    ("units", "force", "deflection"),
    [(UnitSystem("m", "MN", "m"), "0.040 T", "0.012"), (UnitSystem("ft", "t", "ft"), "4.1 T", "0.040")],
)
def test_coarse_units_get_more_decimals(units: UnitSystem, force: str, deflection: str) -> None:
    """40 kN and 12 mm are no zeros in a file that is written in MN and m."""
    assert effect_text(BAR, 40e3, units) == force
    assert effect_text(DOWN, 0.0121, units) == deflection


@pytest.mark.parametrize(
    ("value", "sign", "text"), [(-1e-9, "-", "0.00"), (1e-9, "+", "0.00"), (-0.0, "+", "0.00"), (0.006, "+", "+0.01")]
)
def test_a_number_shown_as_zero_has_no_sign(value: float, sign: str, text: str) -> None:
    assert number_text(value, "length", SI, sign=sign) == text


def test_what_an_effect_is_measured_in() -> None:
    effects = (BAR, REACTION, DOWN, MOMENT, SHEAR)
    assert [quantity_of(effect) for effect in effects] == ["force", "force", "section", "moment", "force"]


@pytest.mark.parametrize(
    ("factor", "text"),
    [
        (0.0, "0.00"),
        (0.0099, "0.00"),
        (0.29, "0.29"),  # 0.29 x 100 is a hair below 29
        (0.57, "0.57"),
        (0.996, "0.99"),
        (0.9999999, "0.99"),
        (math.nextafter(1.0, 0.0), "0.99"),
        (1.0, "1.00"),
        (1.005, "1.00"),
        (1.0099999, "1.00"),
        (1.15, "1.15"),
        (2.999, "2.99"),
        (99.999, "99.99"),
        (100.0, "over 100"),
        (1e9, "over 100"),
        (math.inf, "no live effect"),
        (math.nan, "not rated"),
    ],
)
def test_a_rating_is_rounded_down(factor: float, text: str) -> None:
    assert factor_text(factor) == text


@given(st.floats(0.0, 99.9))
def test_a_rating_never_reads_more_than_it_is(factor: float) -> None:
    said = float(factor_text(factor))
    assert said <= factor * (1 + 1e-9)  # a hair of round-off may reach its digit
    assert said > factor - 0.01 - 1e-12
    assert (said >= 1.0) == (factor >= 1.0)


@given(st.integers(0, 9999))
def test_two_typed_decimals_are_read_as_typed(hundredths: int) -> None:
    """No rating of two decimals loses its last digit to the binary form of that number."""
    assert factor_text(hundredths / 100) == f"{hundredths / 100:.2f}"


def test_cut_to_decimals() -> None:
    assert [rounded_down(value, 1) for value in (18.89, 18.9, 0.3, 0.04)] == [18.8, 18.9, 0.3, 0.0]
    assert rounded_down(103.99, 0) == 103.0


@pytest.mark.parametrize(
    ("weight", "units", "text"),
    [
        # 185 kN = 18.8648 t = 20.7948 short tons: 20.7, though 18.8 t alone would give 20.72 and 18.9 t 20.8
        (185e3, SI, "18.8 t (20.7 short tons)"),
        (185e3, US, "20.7 short tons (18.8 t)"),
        (185e3, UnitSystem("in", "kN", "mm"), "20.7 short tons (18.8 t)"),
        (40 * TONNE, SI, "40.0 t (44.0 short tons)"),
        (27.99 * TONNE, SI, "27.9 t (30.8 short tons)"),
        (36 * SHORT_TON, US, "36.0 short tons (32.6 t)"),
        (0.0, SI, "0.0 t (0.0 short tons)"),
        (math.inf, SI, "-"),
        (math.nan, SI, "-"),
    ],
)
def test_a_weight_is_rounded_down_in_each_unit_from_the_unrounded_value(
    weight: float, units: UnitSystem, text: str
) -> None:
    assert weight_text(weight, units) == text


@given(st.floats(0.0, 1e7))
def test_a_weight_never_reads_more_than_it_is(weight: float) -> None:
    first, second = weight_text(weight, SI).removesuffix(" short tons)").split(" t (")
    assert float(first) * TONNE <= weight * (1 + 1e-8)
    assert float(second) * SHORT_TON <= weight * (1 + 1e-8)


@pytest.mark.parametrize(
    ("permanent", "strength", "text"),
    [
        (104e3, 100e3, "permanent load alone uses 104 %"),
        (115e3, 100e3, "permanent load alone uses 115 %"),  # 1.15 x 100 is a hair below 115
        (100e3, 100e3, "permanent load alone uses 100 %"),
        (100.9e3, 100e3, "permanent load alone uses 100 %"),
        (5e3, 0.0, "permanent load alone; no strength"),
        (0.0, 0.0, "no strength"),
        (99e3, 100e3, ""),
    ],
)
def test_how_much_permanent_load_uses(permanent: float, strength: float, text: str) -> None:
    worst = judge(one_bar(permanent=permanent, strength=(strength, 1e9)), [Vehicle("axle", [40e3], [])]).rating(0, 0, 0)
    assert use_text(worst) == text


def test_where_a_vehicle_stands() -> None:
    truss = brook().truss
    points = ["L0", "L1", "L2", "L3", "L4"]
    peaks = sweep(influence_lines(truss, points), CART)
    hanger, never = peaks["U1-L1"].highest, peaks["L0-L1"].lowest
    assert place_text(hanger, SI) == "2.00 m ←"
    assert place_text(hanger, US) == "6.56 ft ←"
    assert standing_text(hanger, tuple(points)) == "axle 2 on L1"
    assert place_text(never, SI) == "off the bridge"
    assert standing_text(never, tuple(points)) == ""
    assert standing_text(replace(hanger, lost=True), tuple(points)) == "axle 2 just off L1"
    assert standing_text(replace(hanger, station=-1), tuple(points)) == "moment under axle 2"  # a stringer's
    assert place_text(replace(hanger, heading=1), SI) == "2.00 m →"
    assert place_text(replace(hanger, position=-3.2e-11), SI) == "0.00 m ←"


@pytest.mark.parametrize(
    ("ratio", "text"),
    [(500.0, "1/500"), (799.9, "1/799"), (800.0 * (1 - 1e-12), "1/800"), (0.5, "1/0"), (math.inf, "-")],
)
def test_span_over_deflection_is_rounded_down(ratio: float, text: str) -> None:
    assert span_ratio_text(ratio) == text


def test_an_axle_that_has_just_left_is_not_said_to_stand_there() -> None:
    """A line of 0, 1 and -1: 40 kN at midspan, 10 kN 4 m before it. On the last station it would relieve.

    30 kN with it there, 10 kN when it stands at midspan itself: 40 kN at the most, with the front axle just off.
    """
    part = part_of("truss", {"L0-L1": [0.0, 1.0, -1.0]}, [0.0, 4.0, 8.0], Across.typed(1.0))
    peak = sweep(part.response, Vehicle("pair", [10e3, 40e3], [4.0], headings=(1,)))["L0-L1"].highest
    assert peak.value == pytest.approx(40e3, rel=1e-6)  # the rear axle is a hair beyond midspan
    assert (peak.lost, peak.axle, peak.station) == (True, 0, 2)
    assert standing_text(peak, ("L0", "L1", "L2")) == "axle 1 just off L2"
    assert place_text(peak, SI) == "8.00 m →"
    beside = sweep(part.response, Vehicle("pair", [10e3, 40e3], [3.0], headings=(-1,)))["L0-L1"].highest
    assert (beside.lost, standing_text(beside, ("L0", "L1", "L2"))) == (False, "axle 2 on L1")


@pytest.mark.parametrize(
    ("coverage", "text", "verdict"),
    [
        (
            Coverage(("a", "b"), (), (), ("floor", "deck")),
            "2 of 2 members and beams rated in every sense they feel; floor, deck not rated.",
            "adequate, for the parts rated",
        ),
        (
            Coverage(("a",), ("b",), (), ("floor",)),
            "1 of 2 members and beams rated in every sense they feel; 1 in one sense only (b); floor not rated.",
            "adequate only if the part not fully rated is",
        ),
        (
            Coverage((), ("a",), tuple("bcdefgh"), ("floor", "deck")),
            (
                "0 of 8 members and beams rated in every sense they feel; 1 in one sense only (a); "
                "7 not rated (b, c, d, e, f, g ...); floor, deck not rated."
            ),
            "adequate only if the 8 parts not fully rated are",
        ),
    ],
)
def test_what_an_answer_covers(coverage: Coverage, text: str, verdict: str) -> None:
    assert coverage_text(coverage) == text
    assert verdict_text(1.0, coverage, {}) == verdict
    assert verdict_text(math.inf, coverage, {}) == verdict
    for uplifts in ({}, {"L0 y": 5e3}):
        assert verdict_text(math.nextafter(1.0, 0.0), coverage, uplifts) == "not adequate"
        assert verdict_text(0.0, coverage, uplifts) == "not adequate"


@pytest.mark.parametrize(
    ("missing", "uplifts", "verdict"),
    [
        ((), {"L0 y": 5e3}, "adequate only if L0 is held down"),
        ((), {"L0 y": 5e3, "L9 normal": 2e3}, "adequate only if L0, L9 are held down"),
        (("a",), {"L0 y": 5e3}, "adequate only if the part not fully rated is and L0 is held down"),
        (("a", "b"), {"L0 y": 1.0}, "adequate only if the 2 parts not fully rated are and L0 is held down"),
    ],
)
def test_a_bearing_that_lifts_makes_a_condition(
    missing: tuple[str, ...], uplifts: dict[str, float], verdict: str
) -> None:
    assert verdict_text(1.0, Coverage(("z",), (), missing, ("floor",)), uplifts) == verdict


def test_uplift_is_said_with_its_pull() -> None:
    first, second = uplift_texts({"L0 y": 5.77e3, "L9 normal": 2 * KIP}, SI)
    assert first == (
        "Uplift: L0 y is pulled up with 5.8 kN (permanent and live); whether anything holds it down is not checked."
    )
    assert second.startswith("Uplift: L9 normal is pulled up with 8.9 kN")
    assert uplift_texts({"L9 normal": 2 * KIP}, US)[0].startswith("Uplift: L9 normal is pulled up with 2.0 kip")
    assert uplift_texts({}, SI) == []


def test_the_verdict_is_the_ratings_own() -> None:
    """What is told as adequate without a condition is exactly what passes."""
    for load in (40e3, 4e5, 4e6):
        ratings = rate(brook(), [Vehicle("axle", [load], [])])
        adequate = verdict_text(ratings.worst.factor, ratings.coverage, ratings.uplifts).startswith("adequate, ")
        assert adequate is ratings.passes


def test_the_cautions_say_what_was_not_checked() -> None:
    said = " ".join(CAUTIONS)
    for word in ("qualified engineer", "connections", "bearings", "foundations", "hidden section loss", "local codes"):
        assert word in said
    assert "Bars are taken to pull and to push: rods that only pull (counters) are not modelled." in CAUTIONS
