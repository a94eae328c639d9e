"""Three ratings re-added with a pocket calculator, term by term: a tie, a strut that reverses, a floorbeam.

An invented farm bridge over the Alderwater, so shaped that every number can be followed by hand: panels of 4, 4, 5 and
3 m, 3 m deep (U1-L2 is a 3-4-5 triangle), trusses 4.6 m apart, kerbs at +-2.0, wheels at least 0.45 m from a kerb.
kN and m in all docstrings.

Permanent load, reaching panel points by simple beams (L1 takes 4 m of deck, L2 4.5 m, L3 4 m):

    planks      6.0 /m, kerb to kerb          one truss gets 3.0 /m     components
    railings    0.4 /m over each truss                       0.4 /m     components
    stringers   5 x 0.4 /m                                   1.0 /m     components
    floorbeams  1.0 /m of beam, 4.6 m long                   2.3 each   components
    gravel      2.0 /m, kerb to kerb                         1.0 /m     surfacing

    on one truss  components L1 4.4 x 4 + 2.3 = 19.9, L2 4.4 x 4.5 + 2.3 = 22.1, L3 19.9; surfacing 4, 4.5, 4

Bars weigh nothing beyond that. The trailer: 30, 70 and 70 on axles 3 and 1.5 m apart, front gauge 1.5, the others 1.8.
Its middle keeps within 2.0 - 0.45 - 0.9 = +-0.65; two do not fit.

Factors, all FROM MEMORY but the floor of 0.85, which is READ (M. A. Khan, Bridge and Highway Structure Rehabilitation
and Repair, McGraw-Hill 2010, p. 187): components 1.25 or 0.90, surfacing 1.50 or 0.65; live, at 3000 trucks a day,
1.30 + 0.15 x 2000/4000 = 1.375; one vehicle alone 1.2; impact on a minor surface 0.20; phi 0.95 on bars, 1 on beams.
"""

from __future__ import annotations

from typing import TYPE_CHECKING, Final

from numpy.testing import assert_allclose
from oracles.trusses import bottom, pratt, simple_span

from movload import Bridge, Deck, Loading, Member, Truss, Vehicle, rate
from movload.bridge.floor import Floor, Floorbeams, Stringers
from movload.bridge.permanent import Item, PermanentItems
from movload.bridge.roadway import Roadway
from movload.bridge.strengths import TypedStrength
from movload.files.factor_sets import read_factor_set
from movload.review.hand import explained
from movload.statics.part import row_of

if TYPE_CHECKING:
    from movload.review.hand import Explanation

HAND: Final = 1e-12  # relative: the hand formulas carry all digits
WRITTEN: Final = 5e-5  # half of the fourth decimal, which the docstrings write
LIVE: Final = 1.375
TRAILER: Final = Loading.of(Vehicle("trailer", [30e3, 70e3, 70e3], [3.0, 1.5], gauges=(1.5, 1.8, 1.8)), "legal")
PLANKS: Final = Item("planks", "components", line=6e3, low=-2.0, high=2.0)
RAILINGS: Final = tuple(Item("railing", "components", line=0.4e3, low=z, high=z) for z in (-2.3, 2.3))
GRAVEL: Final = Item("gravel", "surfacing", line=2e3, low=-2.0, high=2.0)
BARS: Final = {
    "L1-L2": TypedStrength(nominal={"tension": 300e3}, condition="fair", measured=True, system="riveted members"),
    "U1-L2": TypedStrength(nominal={"compression": 50e3}, condition="poor", system="riveted members"),
}
BEAM: Final = TypedStrength(
    nominal={"moment": 240e3, "shear": 200e3}, condition="fair", system="floorbeams over 12 ft apart"
)


def farm_bridge(*items: Item) -> Bridge:
    """Return the bridge with items that lie on it."""
    joints, ends = pratt((4.0, 4.0, 5.0, 3.0), [3.0] * 3)
    truss = Truss(joints, [Member(start, end, 5e-3, 200e9, density=0.0) for start, end in ends], simple_span(4))
    return Bridge(
        "Alderwater farm bridge, invented",
        truss,
        Deck(tuple(bottom(4)), truss_spacing=4.6, roadway=Roadway(-2.0, 2.0, clearance=0.45)),
        permanent=PermanentItems(items),
        strengths=BARS,
        floor=Floor(Stringers((-1.6, -0.8, 0.0, 0.8, 1.6), weight=0.4e3), Floorbeams(weight=1e3, strength=BEAM)),
        surface="minor",
        traffic=3000.0,
    )


def explanation(name: str | tuple[str, str], side: int = 0, bridge: Bridge | None = None) -> Explanation:
    """Return one row's rating as a legal load, taken apart."""
    method = read_factor_set("lrfr")
    ratings = rate(bridge or farm_bridge(PLANKS, *RAILINGS, GRAVEL), [TRAILER], method)
    level = ratings.levels.index("legal")
    return explained(ratings, ratings.rating(0, row_of(ratings.solved.effects, name), side, level=level))


def steps(told: Explanation) -> dict[str, float]:
    """Return the steps of a strength by symbol [-, N, N m]."""
    return {step.symbol: step.value for step in told.strength.steps}


def check_permanent(told: Explanation, expected: dict[str, tuple[float, float, float]]) -> None:
    """Compare the permanent classes: what each pushes [kN, kN m], its margin, and the product."""
    assert [term.title for term in told.permanent] == list(expected)
    found = [(term.pushed / 1e3, term.margin, term.used / 1e3) for term in told.permanent]
    assert_allclose(found, list(expected.values()), rtol=HAND)
    assert_allclose(told.used / 1e3, sum(used for _, _, used in expected.values()), rtol=HAND)


def check_axles(told: Explanation, x: list[float], share: float, ordinates: list[float]) -> None:
    """Compare axle by axle: where it stands, load x presence x share x (1 + I) x ordinate, and the sum."""
    loads, presence, impact = (30.0, 70.0, 70.0), 1.2, 0.20
    assert [(term.vehicle, term.axle) for term in told.terms] == [(1, 1), (1, 2), (1, 3)]
    assert_allclose([term.x for term in told.terms], x, rtol=HAND)
    for term, load, ordinate in zip(told.terms, loads, ordinates, strict=True):
        factors = (term.load / 1e3, term.factor, term.share, term.impact)
        assert_allclose(factors, (load, presence, share, impact), rtol=HAND)
        assert_allclose(term.ordinate, ordinate, rtol=HAND, atol=1e-15)
        effect = load * presence * share * (1.0 + impact) * ordinate
        assert_allclose(term.effect / 1e3, effect, rtol=HAND, atol=1e-15)
    assert_allclose(sum(term.effect for term in told.terms), told.rating.live, rtol=HAND)
    assert told.live == abs(told.rating.live)
    assert told.live_margin == LIVE


def test_a_tension_member() -> None:
    """L1-L2 pulls with M at U1 over 3 m: 12/16 x 4/3 = 1 with a load at L1, 8/16 x 4/3 = 2/3 at L2, 0.25 at L3.

        Rn                                                                  300
        phi_c   fair 0.95, loss measured + 0.05 = 1;  phi_s riveted 0.90    x 0.90
        phi     0.95                                                    C = 256.5
        components  19.9 x 1 + 22.1 x 2/3 + 19.9 x 0.25 = 39.6083   x 1.25 = 49.5104
        surfacing    4.0 x 1 +  4.5 x 2/3 +  4.0 x 0.25 =  8        x 1.50 = 12
                                                                      used = 61.5104

    The rear axle stands on L1, the trailer heading toward +x, its middle at 0.65: share 0.5 + 0.65/4.6 = 0.6413.

        30 at 8.5   x 1.2 x 0.6413 x 1.2 x (1 - 4.5/12 = 0.625)   17.3152
        70 at 5.5                        x (1 - 1.5/12 = 0.875)   56.5630
        70 at 4.0                        x  1                     64.6435
                                                             L = 138.5217

        RF = (256.5 - 61.5104)/(1.375 x 138.5217) = 194.9896/190.4674 = 1.0237
    """
    told, share = explanation("L1-L2"), 0.5 + 0.65 / 4.6
    found = steps(told)
    assert [found[symbol] for symbol in ("Rn", "phi", "phi_c", "phi_s", "k")] == [300e3, 0.95, 1.0, 0.90, 0.90]
    assert_allclose([found["C"], told.strength.value, told.rating.strength], [256.5e3] * 3, rtol=HAND)
    check_permanent(told, {
        "components": (19.9 + 22.1 * 2 / 3 + 19.9 / 4, 1.25, 1.25 * (19.9 + 22.1 * 2 / 3 + 19.9 / 4)),
        "surfacing": (8.0, 1.50, 12.0),
    })  # fmt: skip
    check_axles(told, [8.5, 5.5, 4.0], share, [0.625, 0.875, 1.0])
    assert_allclose([term.effect / 1e3 for term in told.terms], [17.3152, 56.5630, 64.6435], rtol=0.0, atol=WRITTEN)
    assert_allclose([term.z for term in told.terms], [0.65] * 3, rtol=HAND)
    assert_allclose(told.live / 1e3, 150.0 * 1.44 * share, rtol=HAND)
    assert_allclose([told.used / 1e3, told.spare / 1e3], [61.5104, 194.9896], rtol=0.0, atol=WRITTEN)
    by_hand = (256.5 - 1.25 * (19.9 + 22.1 * 2 / 3 + 19.9 / 4) - 12.0) / (LIVE * 150.0 * 1.44 * share)
    assert_allclose(told.rating.factor, by_hand, rtol=HAND)
    assert_allclose(told.rating.factor, 1.0237, rtol=0.0, atol=WRITTEN)


def test_a_compression_member_that_permanent_load_relieves() -> None:
    """U1-L2 pulls with the shear of panel 2 times 5/3: -0.25 x 5/3 = -0.4167 with a load at L1, 0.8333 at L2, 0.3125.

        Rn                                                               50
        phi_c   poor 0.85;  phi_s riveted 0.90: 0.765, at least 0.85     x 0.85
        phi     0.95                                                 C = 40.375
        components  -(-19.9 x 0.4167 + 22.1 x 0.8333 + 19.9 x 0.3125) = -16.3438   x 0.90 = -14.7094
        surfacing   -( -4.0 x 0.4167 +  4.5 x 0.8333 +  4.0 x 0.3125) =  -3.3333   x 0.65 =  -2.1667
                                                                                 used = -16.8760

    The rear axle stands on L1, heading toward -x, the front one has left the bridge. At 2.5: -0.4167 x 2.5/4 = -0.2604.

        30 at -0.5   x 1.2 x 0.6413 x 1.2 x  0          0
        70 at  2.5                        x -0.2604   -16.8342
        70 at  4.0                        x -0.4167   -26.9348
                                                 L = -43.7690

        RF = (40.375 + 16.8760)/(1.375 x 43.7690) = 57.2510/60.1824 = 0.9513

    Reversal: without the gravel (40.375 + 14.7094)/60.1824 = 0.9153, without planks and railings as well only stringers
    (1 /m: 3.3333, as the gravel) and floorbeams (2.3 x 0.7292 = 1.6771) relieve: (40.375 + 4.5094)/60.1824 = 0.7458.
    """
    told, share = explanation("U1-L2", 1), 0.5 + 0.65 / 4.6
    found = steps(told)
    assert [found[symbol] for symbol in ("Rn", "phi", "phi_c", "phi_s", "k")] == [50e3, 0.95, 0.85, 0.90, 0.85]
    assert_allclose([found["C"], told.strength.value, told.rating.strength], [40.375e3] * 3, rtol=HAND)
    components = -(-19.9 * 5 / 12 + 22.1 * 5 / 6 + 19.9 * 5 / 16)
    surfacing = -(-4 * 5 / 12 + 4.5 * 5 / 6 + 4 * 5 / 16)
    check_permanent(told, {
        "components": (components, 0.90, 0.90 * components), "surfacing": (surfacing, 0.65, 0.65 * surfacing),
    })  # fmt: skip
    check_axles(told, [-0.5, 2.5, 4.0], share, [0.0, -25 / 96, -5 / 12])
    assert_allclose([term.effect / 1e3 for term in told.terms], [0.0, -16.8342, -26.9348], rtol=0.0, atol=WRITTEN)
    assert_allclose([told.used / 1e3, told.spare / 1e3], [-16.8760, 57.2510], rtol=0.0, atol=WRITTEN)
    live = 1.44 * share * 70.0 * (25 / 96 + 5 / 12)
    assert_allclose(told.rating.factor, (40.375 - 0.90 * components - 0.65 * surfacing) / (LIVE * live), rtol=HAND)
    lighter = [explanation("U1-L2", 1, farm_bridge(*items)) for items in ((PLANKS, *RAILINGS), ())]
    rated = [one.rating.factor for one in (told, *lighter)]
    assert_allclose(rated, [0.9513, 0.9153, 0.7458], rtol=0.0, atol=WRITTEN)


def test_a_floorbeam() -> None:
    """Moment of floorbeam L2 at S4 (z = 0.8), 3.1 m from its right end and 1.5 m from its left. Panels of 4 and 5 m.

        Rn                                                                           240
        phi_c   fair 0.95;  phi_s floorbeams over 12 ft apart 0.85: 0.8075, at least   x 0.85
        phi     1                                                                C = 204

    A load at z bends it by (2.3 + z) 1.5/4.6 right of S4, (2.3 - z) 3.1/4.6 left of it. Planks, 1.5 /m2 x 4.5 m: by the
    mean from -2 to 0.8 (0.0978 to 1.0109) and on to 2 (0.2022), (0.5543 x 2.8 + 0.6065 x 1.2)/4 = 0.57: 27 x 0.57 =
    15.39. Stringers 0.4 x 4.5 = 1.8 each x (0.2283 + 0.4891 + 0.75 + 1.0109 + 0.4717 = 2.95) = 5.31. Its own weight
    1.0 x 3.1 x 1.5/2 = 2.325. Railings over the trusses bend nothing. Gravel 9 x 0.57 = 5.13.

        components  15.39 + 5.31 + 2.325 = 23.025   x 1.25 = 28.7813
        surfacing                           5.13    x 1.50 =  7.695
                                                      used = 36.4763

    Along, the middle axle on L2, heading toward -x: 70 at 8, 70 at 9.5 (1 - 1.5/5 = 0.7), 30 at 5 (1 - 3/4 = 0.25).
    Across, its middle at -0.1: gauge 1.8 has a wheel on S4 and one at -1.0, ((3.1 + 1.3) x 1.5/4.6)/2 = 0.7174; gauge
    1.5 has them at 0.65 and -0.85, ((2.95 + 1.45) x 1.5/4.6)/2, the same.

        (30 x 0.25 + 70 + 70 x 0.7 = 126.5) x 1.2 x 0.7174 x 1.2                 L = 130.68

        RF = (204 - 36.4763)/(1.375 x 130.68) = 167.5238/179.685 = 0.9323
    """
    told, share = explanation(("floorbeam L2", "moment at S4")), 3.3 / 4.6
    found = steps(told)
    assert [found[symbol] for symbol in ("Rn", "phi", "phi_c", "phi_s", "k")] == [240e3, 1.0, 0.95, 0.85, 0.85]
    assert_allclose([found["C"], told.strength.value, told.rating.strength], [204e3] * 3, rtol=HAND)
    check_permanent(told, {"components": (23.025, 1.25, 28.78125), "surfacing": (5.13, 1.50, 7.695)})
    check_axles(told, [5.0, 8.0, 9.5], share, [0.25, 1.0, 0.7])
    assert_allclose([term.z for term in told.terms], [-0.1] * 3, rtol=HAND)
    assert_allclose([told.live / 1e3, told.spare / 1e3], [130.68, 167.52375], rtol=HAND)
    assert_allclose(told.rating.factor, 167.52375 / 179.685, rtol=HAND)
    assert_allclose(told.rating.factor, 0.9323, rtol=0.0, atol=WRITTEN)


def test_shear_takes_no_system_factor() -> None:
    """Shear of the same floorbeam, fair: max(0.95 x 1, 0.85) x 1 x 200 = 190."""
    found = steps(explanation(("floorbeam L2", "shear at left truss")))
    assert [found[symbol] for symbol in ("Rn", "phi", "phi_c", "phi_s", "k")] == [200e3, 1.0, 0.95, 1.0, 0.95]
    assert_allclose(found["C"], 190e3, rtol=HAND)
