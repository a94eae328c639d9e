"""Published rating rules through the whole path: bridge, statics, sweep, factors, rating factor and sign weight.

- M. A. Khan, *Bridge and Highway Structure Rehabilitation and Repair*, McGraw-Hill 2010, p. 187: LRFR,
  RF = (C - gDC DC - gDW DW)/(gLL (LL + IM)) with C = phi_c phi_s phi Rn, phi_c phi_s at least 0.85, and the posting
  curve W (RF - 0.3)/0.7. READ. Table 6.7, p. 251: H20-44 on simple spans. READ.
- AASHTO, *Manual for Bridge Evaluation*, section 6B: RF = (C - A1 D)/(A2 L (1 + I)), with A1 = A2 = 1 (allowable
  stress), A1 = 1.3 and A2 = 2.17 or 1.3 (load factor). FROM MEMORY.
- AASHTO, *Standard Specifications for Highway Bridges*, 17th ed., Appendix A: HS20-44 on simple spans; art. 3.8.2:
  I = 50/(L + 125), at most 0.30, L in feet. FROM MEMORY.

The factors themselves are those of test_factor_sets.py, the truck those of the library, FROM MEMORY. Kip and foot, as
in the sources; the bridges are invented.
"""

from __future__ import annotations

from typing import TYPE_CHECKING, Final

import pytest
from numpy.testing import assert_allclose
from oracles.trusses import bottom, pratt, simple_span

from movload import Bridge, Deck, Loading, Member, Truss, Vehicle, rate, read_vehicle
from movload.bridge.floor import Floor, Stringers
from movload.bridge.permanent import Item, PermanentItems
from movload.bridge.roadway import Roadway
from movload.bridge.strengths import TypedStrength
from movload.files.factor_sets import read_factor_set
from movload.rating.factor_sets import sign_weight
from movload.statics.part import row_of
from movload.units import unit_factor

if TYPE_CHECKING:
    from collections.abc import Sequence

    from movload import Rating, Ratings

FOOT, KIP = unit_factor("ft", "length"), unit_factor("kip", "force")
TONNE: Final = unit_factor("t", "force")
HAND: Final = 1e-12  # relative: the hand formulas carry all digits
HALF_TENTH, HALF_HUNDREDTH = 0.05, 0.005  # half of the last printed digit
DC, DW = (Item(title, kind, line=klf * KIP / FOOT, share=0.5)
          for title, kind, klf in (("steel and planks", "components", 1.0), ("asphalt", "surfacing", 0.4)))  # fmt: skip


def truss_of(panels: Sequence[float], depth: float) -> Truss:
    """Return a weightless Pratt truss of 4 panels [ft]."""
    joints, ends = pratt([panel * FOOT for panel in panels], [depth * FOOT] * 3)
    return Truss(joints, [Member(start, end, 5e-3, 200e9, density=0.0) for start, end in ends], simple_span(4))


def creek_bridge(footing: str = "nominal", chord: float = 200.0) -> Bridge:
    """Return an invented bridge, 4 x 40 ft, 30 ft deep; half of an axle, of DC and of DW reaches the truss.

    Chord and hanger are typed 200 kip, the end post 300 kip, good, in no system that is reduced.
    """
    typed = {"L1-L2": ("tension", chord), "U1-L1": ("tension", 200.0), "L0-U1": ("compression", 300.0)}
    strengths = {
        bar: TypedStrength(**{footing: {sense: kips * KIP}}, condition="good", system="other")
        for bar, (sense, kips) in typed.items()
    }
    return Bridge(
        "Alder creek bridge, invented",
        truss_of([40.0] * 4, 30.0),
        Deck(tuple(bottom(4)), truss_share=0.5),
        permanent=PermanentItems((DC, DW)),
        strengths=strengths,
        surface="smooth",
        traffic=float("inf"),
    )


def rated(ratings: Ratings, name: str | tuple[str, str], *, level: str = "", side: int = 0) -> Rating:
    """Return one row's rating at a level."""
    number = ratings.levels.index(level) if level else 0
    return ratings.rating(0, row_of(ratings.solved.effects, name), side, level=number)


# Live load of HS20 on the truss, half of each axle, with the axles that are worst where they are worst:
# L1-L2, M at U1 over 30 ft, is 1 at L1 and falls to 0 over 120 ft: (32 + 32 x (1 - 14/120) + 8 x (1 - 28/120))/2 = 33.2
# U1-L1 is 1 at L1 and falls to 0 over 40 ft either way: (32 + (32 + 8) x (1 - 14/40))/2 = 29
# L0-U1 is 5/3 of the reaction, -1.25 at L1, so 1.25 times the chord: 41.5
CHORD, HANGER, POST = 33.2, 29.0, 41.5


@pytest.mark.parametrize(
    ("kind", "level", "live", "impact"),
    [
        ("design", "design inventory", 1.75, 0.33),
        ("design", "design operating", 1.35, 0.33),
        ("legal", "legal", 1.45, 0.10),
    ],
)
def test_lrfr(kind: str, level: str, live: float, impact: float) -> None:
    """KHAN p. 187, READ: two classes with factors of their own.

    Chord: area of its line 160 x 1/2 = 80 ft, so DC = 0.5 x 1.0 x 80 = 40 and DW = 0.5 x 0.4 x 80 = 16 kip, C = 0.95 x
    200 = 190: RF = (190 - 1.25 x 40 - 1.50 x 16)/(g x 33.2 (1 + IM)). Hanger: 40 ft, DC 20, DW 8. To round-off.
    """
    (case,) = read_vehicle("hs20").cases
    ratings = rate(creek_bridge(), [Loading("HS20", kind, (case,))], read_factor_set("lrfr"))
    chord, hanger = (rated(ratings, name, level=level).factor for name in ("L1-L2", "U1-L1"))
    assert_allclose(chord, (190 - 1.25 * 40 - 1.50 * 16) / (live * CHORD * (1 + impact)), rtol=HAND)
    assert_allclose(hanger, (190 - 1.25 * 20 - 1.50 * 8) / (live * HANGER * (1 + impact)), rtol=HAND)


@pytest.mark.parametrize(
    ("method", "level", "margins", "fractions"),
    [
        ("load factor", "inventory", (1.3, 2.17), (1.0, 0.85)),
        ("load factor", "operating", (1.3, 1.3), (1.0, 0.85)),
        ("allowable stress", "inventory", (1.0, 1.0), (0.55, 1 / 2.12)),
        ("allowable stress", "operating", (1.0, 1.0), (0.75, 1 / 1.70)),
    ],
)
def test_load_factor_and_allowable_stress(
    method: str, level: str, margins: tuple[float, float], fractions: tuple[float, float]
) -> None:
    """RF = (C - A1 D)/(A2 L (1 + I)), FROM MEMORY, C = 200 or 300 kip times a fraction. To round-off.

    Chord: D = 56, L = 33.2, loaded over 160 ft: I = 50/285. Hanger: D = 28, L = 29, over 80 ft: I = 50/205. End post:
    D = 70, L = 41.5, over 160 ft.
    """
    (a1, a2), (tension, compression) = margins, fractions
    ratings = rate(creek_bridge(), [read_vehicle("hs20")], read_factor_set(method))
    for name, side, strength, dead, live, length in (
        ("L1-L2", 0, tension * 200, 56.0, CHORD, 160.0),
        ("U1-L1", 0, tension * 200, 28.0, HANGER, 80.0),
        ("L0-U1", 1, compression * 300, 70.0, POST, 160.0),
    ):
        one = rated(ratings, name, level=level, side=side)
        assert_allclose(one.impact, 50 / (length + 125), rtol=HAND)
        assert_allclose(one.factor, (strength - a1 * dead) / (a2 * live * (1 + 50 / (length + 125))), rtol=HAND)


@pytest.mark.parametrize(
    ("factor", "sign"), [(1.2, 48.0), (1.0, 40.0), (0.75, 25.71), (0.65, 20.0), (0.3001, 0.01), (0.29, 0.0), (0.0, 0.0)]
)
def test_posting_curve(factor: float, sign: float) -> None:
    """KHAN p. 187, READ: W (RF - 0.3)/0.7; W = 40 t, RF = 0.75: 40 x 0.45/0.7 = 25.71 t. Half of the last digit.

    A truck of 16 and 24 t, 5 m apart, on a chord whose strength gives just that RF: L = 0.5 (24 + 16 (1 - 5/36.576)) t.
    Below 0.3 it may not cross; from 1 on its safe weight is W RF.
    """
    truck = Vehicle("truck", [16 * TONNE, 24 * TONNE], [5.0])
    live = 0.5 * (24 + 16 * (1 - 5 / (120 * FOOT))) * TONNE
    strength = (1.25 * 40 + 1.50 * 16) * KIP + factor * 1.45 * 1.10 * live
    method = read_factor_set("lrfr")
    ratings = rate(creek_bridge("reduced", strength / KIP), [Loading.of(truck, "legal")], method)
    one = rated(ratings, "L1-L2", level="legal")
    assert_allclose(one.factor, factor, rtol=HAND, atol=HAND)
    level = method.levels[ratings.levels.index("legal")]
    assert_allclose(sign_weight(level, one.factor, one.gross) / TONNE, sign, rtol=0.0, atol=HALF_HUNDREDTH)


def floor_bridge(spans: tuple[float, float, float, float], impact: float | None = 0.0) -> Bridge:
    """Return an invented bridge on these spans [ft]; stringers of 500 kip ft and 80 kip take a whole axle each."""
    both = {"moment": 500.0 * KIP * FOOT, "shear": 80.0 * KIP}
    stringers = Stringers((-4 * FOOT, 0.0, 4 * FOOT), fraction=1.0, weight=0.1 * KIP / FOOT,
                          strength=TypedStrength(both, both))  # fmt: skip
    truss = truss_of(spans, 20.0)
    return Bridge(
        "Alder mill bridge, invented",
        truss,
        Deck(tuple(bottom(4)), truss_spacing=16 * FOOT, roadway=Roadway(-7 * FOOT, 7 * FOOT, clearance=2 * FOOT)),
        permanent=PermanentItems(()),
        strengths={"L0-L1": TypedStrength({"tension": 1e6}, {"tension": 1e6})},
        floor=Floor(stringers),
        impact=impact,
    )


PANELS: Final = ("L0-L1", "L1-L2", "L2-L3", "L3-L4")


def test_stringers_under_hs20() -> None:
    """Appendix A, HS20-44, 20 to 40 ft: moment and end shear. FROM MEMORY. Half of the last digit.

    RF = (500 - 0.1 L^2/8)/M, the permanent moment that at midspan.
    """
    spans, moments, shears = (20.0, 30.0, 35.0, 40.0), (160.0, 282.1, 361.2, 449.8), (41.6, 49.6, 52.8, 55.2)
    ratings = rate(floor_bridge(spans), [read_vehicle("hs20")])
    for panel, span, moment, shear in zip(PANELS, spans, moments, shears, strict=True):
        bent, sheared = (rated(ratings, ("stringer S2", f"{panel} {kind}")) for kind in ("moment", "shear"))
        assert_allclose(bent.live / (KIP * FOOT), moment, rtol=0.0, atol=HALF_TENTH)
        assert_allclose(sheared.live / KIP, shear, rtol=0.0, atol=HALF_TENTH)
        assert_allclose(bent.factor, (500 - 0.1 * span**2 / 8) / (bent.live / (KIP * FOOT)), rtol=HAND)
        assert_allclose(sheared.factor, (80 - 0.1 * span / 2) / (sheared.live / KIP), rtol=HAND)


@pytest.mark.parametrize(
    ("spans", "printed"),
    [
        ((28.0, 30.0, 32.0, 34.0), (226.80, 246.61, 266.45, 286.31)),
        ((36.0, 38.0, 40.0, 42.0), (306.18, 326.06, 345.96, 365.87)),
    ],
)
def test_stringers_under_h20(spans: tuple[float, float, float, float], printed: tuple[float, ...]) -> None:
    """KHAN Table 6.7, H20-44, moments. READ. Half of the last digit; spans below 28 ft are misprinted there."""
    ratings = rate(floor_bridge(spans), [read_vehicle("h20")])
    moments = [rated(ratings, ("stringer S1", f"{panel} moment")).live / (KIP * FOOT) for panel in PANELS]
    assert_allclose(moments, printed, rtol=0.0, atol=HALF_HUNDREDTH)


def test_a_stringer_by_load_factor() -> None:
    """30 ft under HS20, both 32 kip axles on it: M = 64 (15 - 3.5)^2/30 = 282.13; I = 50/155 = 0.32, at most 0.30.

    RF = (500 - 1.3 x 0.1 x 30^2/8)/(A2 x 282.13 x 1.30), A2 = 2.17 and 1.3. FROM MEMORY. To round-off.
    """
    ratings = rate(floor_bridge((30.0, 31.0, 32.0, 33.0), None), [read_vehicle("hs20")], read_factor_set("load factor"))
    for level, a2 in (("inventory", 2.17), ("operating", 1.3)):
        one = rated(ratings, ("stringer S2", "L0-L1 moment"), level=level)
        assert_allclose(one.factor, (500 - 1.3 * 0.1 * 30**2 / 8) / (a2 * 64 * 11.5**2 / 30 * 1.30), rtol=HAND)
