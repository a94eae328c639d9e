"""Permanent items taken across to trusses, stringers and floorbeams: each number by hand, on invented bridges.

The trusses stand at z = +-S/2 and share a load at z by the lever rule, 1/2 +- z/S; a floorbeam is a simple beam
between them.
"""

from __future__ import annotations

import re
from typing import TYPE_CHECKING, Any

import numpy as np
import pytest
from numpy.testing import assert_allclose, assert_array_equal
from oracles.trusses import bottom, pratt, simple_span, truss_of

from movload import Bridge, Deck, influence_lines
from movload.bridge.across import Across
from movload.bridge.floor import Floor, Floorbeams, Stringers
from movload.bridge.permanent import CLASSES, Item
from movload.bridge.roadway import Roadway
from movload.errors import InputError, UnknownNameError
from movload.statics.floor import floor_parts, truss_lines
from movload.statics.influence import InfluenceLines
from movload.statics.part import Effect, Part
from movload.statics.spread import item_effects, share_across

if TYPE_CHECKING:
    from collections.abc import Sequence

    from numpy.typing import NDArray

    Floats = NDArray[np.float64]

PANELS, DEPTHS, SPACING = [4.1, 3.7, 4.3, 3.9], [2.3, 3.1, 2.7], 5.2
SPAN = sum(PANELS)
POINTS = bottom(4)
EDGES = (-0.5 * SPACING, 0.5 * SPACING)
LEFT, RIGHT = truss_lines(SPACING, EDGES)
COMPONENTS, SURFACING, OTHER = (CLASSES.index(kind) for kind in ("components", "surfacing", "other"))
EXACT = 1e-13  # a few sums and products of numbers near 1
SOLVED = 1e-12  # and a small truss's solution
WHERE: dict[str, Any] = {"low": -1.6, "high": 1.6}


def truss_part(across: Across = LEFT) -> Part:
    """Return one of the two trusses of an invented Parker span of four panels."""
    return Part("left truss", influence_lines(truss_of(pratt(PANELS, DEPTHS), simple_span(4)), POINTS), across)


def row(part: Part, name: str) -> int:
    """Return the number of a row."""
    return [effect.name for effect in part.response.effects].index(name)


def effects(part: Part, *items: Item, points: Sequence[str] = POINTS) -> Floats:
    """Return the items' effects by class."""
    return np.asarray(item_effects(part, items, points))


# Across


def test_a_railing_on_the_left_kerb_by_the_lever_rule() -> None:
    """1.85 m left of the middle of 5.2 m: 0.5 + 1.85/5.2 = 0.855769 on the left truss, 0.144231 on the right."""
    left, right = share_across(LEFT, 1.85, 1.85), share_across(RIGHT, 1.85, 1.85)
    assert_allclose((left, right), (0.8557692307692307, 0.1442307692307692), rtol=EXACT)
    assert left + right == pytest.approx(1.0, rel=EXACT)


def test_what_stands_over_a_truss_reaches_that_truss_alone() -> None:
    assert_allclose((share_across(LEFT, 2.6, 2.6), share_across(RIGHT, 2.6, 2.6)), (1.0, 0.0), atol=EXACT)


def test_full_width_between_symmetrical_kerbs_is_one_half_each() -> None:
    assert_allclose((share_across(LEFT, -1.9, 1.9), share_across(RIGHT, -1.9, 1.9)), 0.5, rtol=EXACT)


def test_full_width_between_kerbs_off_the_middle() -> None:
    """From 1.6 m right to 2.1 m left the resultant stands 0.25 m left: 0.5 + 0.25/5.2."""
    assert share_across(LEFT, -1.6, 2.1) == pytest.approx(0.5 + 0.25 / 5.2, rel=EXACT)


def test_a_footway_outside_the_truss_lifts_the_other() -> None:
    """On brackets from 2.6 to 4.2 m: resultant at 3.4 m, 0.5 + 3.4/5.2 = 1.153846 and -0.153846."""
    left, right = truss_lines(SPACING, (-2.6, 4.2))
    assert_allclose((share_across(left, 2.6, 4.2), share_across(right, 2.6, 4.2)), (1.15384615385, -0.15384615385),
                    rtol=1e-10)  # fmt: skip  # the digits written here


def test_the_mean_of_a_line_with_kinks() -> None:
    """A stringer between neighbours 1.5 m off, a strip from -1 to 2: (2/3 + 0.75 + 0)/3 = 0.472222."""
    across = Across(np.array([-3.0, -1.5, 0.0, 1.5, 3.0]), np.array([0.0, 0.0, 1.0, 0.0, 0.0]))
    assert share_across(across, -1.0, 2.0) == pytest.approx(17 / 36, rel=EXACT)
    assert share_across(across, -1.5, 1.5) == pytest.approx(0.5, rel=EXACT)  # both ends on points of the line
    assert share_across(across, 0.3, 0.9) == pytest.approx(0.6, rel=EXACT)  # no point between


def test_a_strip_of_next_to_no_width_is_a_line() -> None:
    assert share_across(LEFT, 1.0, np.nextafter(1.0, 2.0)) == pytest.approx(0.5 + 1.0 / 5.2, rel=EXACT)
    assert share_across(LEFT, 0.0, 5e-324) == pytest.approx(0.5, rel=EXACT)


def test_a_typed_share_is_the_same_wherever_the_load_lies() -> None:
    across = Across.typed(0.56)
    assert [share_across(across, *z) for z in [(0.0, 0.0), (-9.0, 30.0), (4.0, 4.0)]] == [0.56] * 3


@pytest.mark.parametrize(
    ("low", "high", "beyond"), [(-2.7, 1.0, "-2.7"), (0.0, 2.9, "2.9"), (3.0, 3.0, "3"), (-4.0, 4.0, "-4")]
)
def test_a_load_beyond_the_deck_is_refused(low: float, high: float, beyond: str) -> None:
    message = f"across: a load at z = {beyond} m lies beyond the deck, which reaches from -2.6 to 2.6 m"
    with pytest.raises(InputError, match=f"^{re.escape(message)}$"):
        share_across(LEFT, low, high)


def test_round_off_at_the_deck_s_edge_is_not_beyond_it() -> None:
    over = np.nextafter(2.6, 3.0)
    assert share_across(LEFT, -over, over) == pytest.approx(0.5, rel=EXACT)
    assert share_across(LEFT, over, over) == pytest.approx(1.0, rel=EXACT)
    with pytest.raises(InputError, match=r"beyond the deck"):
        share_across(LEFT, 0.0, 2.6 + 2e-9)


# Along: trusses


def test_a_layer_on_a_truss_by_hand() -> None:
    """Gravel 0.1 m x 1900 kg/m3 from 1.6 m right to 2.1 m left: reaction w L/2; end chord w x1 (L - x1)/2 / depth."""
    part = truss_part()
    found = effects(part, Item.layer("gravel", "surfacing", thickness=0.1, density=1900.0, across=(-1.6, 2.1)))[
        SURFACING
    ]
    w = 0.1 * 1900.0 * 9.80665 * 3.7 * (0.5 + 0.25 / 5.2)
    x = PANELS[0]
    assert found[row(part, "L0 y")] == pytest.approx(w * SPAN / 2, rel=SOLVED)
    assert found[row(part, "L4 normal")] == pytest.approx(w * SPAN / 2, rel=SOLVED)
    assert found[row(part, "L0-L1")] == pytest.approx(w * x * (SPAN - x) / 2 / DEPTHS[0], rel=SOLVED)


def test_a_hanger_takes_half_of_the_panels_beside_it() -> None:
    """U1-L1 hangs L1: 4.1/2 + 3.7/2 = 3.9 m of a railing of 400 N/m, 0.855769 of it."""
    part = truss_part()
    found = effects(part, Item("railing", "components", line=400.0, low=1.85, high=1.85))[COMPONENTS]
    assert found[row(part, "U1-L1")] == pytest.approx(400.0 * 3.9 * (0.5 + 1.85 / 5.2), rel=SOLVED)


def test_weights_at_panel_points_by_hand() -> None:
    """12 kN at L1 and 5 kN at L3, both at z = -1.3: a quarter reaches the left truss, levers of the span along it."""
    part = truss_part()
    item = Item("valve chambers", "other", points=(("L1", 12e3), ("L3", 5e3)), low=-1.3, high=-1.3)
    found = effects(part, item)[OTHER]
    left = 0.25 * (12e3 * (SPAN - PANELS[0]) + 5e3 * PANELS[3]) / SPAN
    assert found[row(part, "L0 y")] == pytest.approx(left, rel=SOLVED)
    assert found[row(part, "L4 normal")] == pytest.approx(0.25 * 17e3 - left, rel=SOLVED)
    assert found[row(part, "U1-L1")] == pytest.approx(0.25 * 12e3, rel=SOLVED)


def test_a_weight_over_a_bearing_reaches_it_and_strains_no_bar() -> None:
    part = truss_part()
    found = effects(part, Item("gate", "other", points=(("L0", 8e3),), low=0.0, high=0.0))[OTHER]
    assert found[row(part, "L0 y")] == pytest.approx(4e3, rel=SOLVED)
    assert_allclose(np.delete(found, row(part, "L0 y")), 0.0, atol=SOLVED * 8e3)


def test_a_typed_share_takes_the_place_of_the_line_across() -> None:
    """At any z: 0.56 of 9 kN/m, whatever the part's own line says."""
    part = truss_part()
    found = effects(part, Item("deck", "components", line=9e3, share=0.56))[COMPONENTS]
    assert found[row(part, "L0 y")] == pytest.approx(0.56 * 9e3 * SPAN / 2, rel=SOLVED)


def test_an_end_stringer_on_the_abutment_takes_its_half_away() -> None:
    """The deck starts 1.9 m before L1 on the abutment: the truss gets half that panel, the abutment the rest."""
    truss = truss_of(pratt(PANELS, DEPTHS), simple_span(4))
    deck: list[str | float] = [PANELS[0] - 1.9, "L1", "L2"]
    part = Part("left truss", influence_lines(truss, deck), LEFT)
    found = effects(part, Item("planks", "components", line=2e3, **WHERE), points=["2.2", "L1", "L2"])[COMPONENTS]
    bearings = found[row(part, "L0 y")] + found[row(part, "L4 normal")]
    assert bearings == pytest.approx(0.5 * 2e3 * (1.9 / 2 + PANELS[1]), rel=SOLVED)


def test_classes_stay_apart() -> None:
    part = truss_part()
    one = {kind: Item(kind, kind, line=1e3 * (number + 1), **WHERE) for number, kind in enumerate(CLASSES)}
    together = effects(part, *one.values(), one["other"])
    for number, kind in enumerate(CLASSES):
        alone = effects(part, one[kind])
        assert alone[number].any()
        assert_array_equal(np.delete(alone, number, axis=0), 0.0)
        assert_allclose(together[number], alone[number] * (2.0 if kind == "other" else 1.0), rtol=EXACT)


def test_nothing_on_the_bridge_does_nothing() -> None:
    part = truss_part()
    assert_array_equal(effects(part), np.zeros((len(CLASSES), len(part.response.effects))))


def test_a_panel_point_that_is_not_there_is_named_with_the_nearest() -> None:
    item = Item("gauge house", "other", points=(("L2", 1e3), ("L9", 1e3)), **WHERE)
    message = r'^permanent, gauge house: points: panel point "L9" is not there \(nearest: "L\d"\)$'
    with pytest.raises(UnknownNameError, match=message):
        effects(truss_part(), item)


def test_an_item_beyond_the_deck_is_named() -> None:
    message = r"^permanent, water main: across: a load at z = 3.1 m lies beyond the deck, which reaches from -2.6 to "
    with pytest.raises(InputError, match=message):
        effects(truss_part(), Item("water main", "other", line=1.0, low=3.1, high=3.1))


# Floorbeams and stringers


def floorbeam(section: float) -> Part:
    """Return the moment at a section s of a floorbeam at L1 loaded all along: (S/2 + s)(S/2 - s)/S per N there."""
    half = 0.5 * SPACING
    across = Across(
        np.array([-half, section, half]), np.array([0.0, (half + section) * (half - section) / SPACING, 0.0])
    )
    stations = np.concatenate(([0.0], np.cumsum(PANELS)))
    hat = InfluenceLines((Effect("floorbeam L1", "moment", "moment", "N m"),), stations, np.eye(5)[[1]])
    return Part("floorbeams, moment", hat, across)


@pytest.mark.parametrize("section", [0.0, -1.1, 1.7])
def test_a_floorbeam_under_a_full_layer_is_a_simple_beam(section: float) -> None:
    """A layer q x 3.9 m along gives w per metre of beam, M = w (S^2/4 - s^2)/2: w S^2/8 in the middle."""
    found = effects(floorbeam(section), Item.per_area("planks", "components", 600.0, EDGES))[COMPONENTS]
    assert_allclose(found, 600.0 * 3.9 * (SPACING**2 / 4 - section**2) / 2, rtol=EXACT)


def test_a_floorbeam_under_a_strip_by_hand() -> None:
    """A strip 2 m wide in the middle, w = 600 x 3.9: each end w x 1, M = w x 1 x 2.6 - w x 1 x 0.5 = 2.1 w."""
    found = effects(floorbeam(0.0), Item.per_area("ballast", "surfacing", 600.0, (-1.0, 1.0)))[SURFACING]
    assert_allclose(found, 2.1 * 600.0 * 3.9, rtol=EXACT)


def test_a_floorbeam_feels_only_the_weight_at_its_own_panel_point() -> None:
    """10 kN at the quarter point 1.3 m off: at the middle half of it x (2.6 - 1.3)."""
    found = effects(floorbeam(0.0), Item("pump", "other", points=(("L1", 10e3), ("L2", 50e3)), low=1.3, high=1.3))
    assert_allclose(found[OTHER], 10e3 * 0.5 * (2.6 - 1.3), rtol=EXACT)


def floor_of(z: tuple[float, ...]) -> dict[str, Part]:
    """Return the parts of a floor with stringers at z."""
    deck = Deck(tuple(POINTS), truss_spacing=SPACING, roadway=Roadway(min(z), max(z), clearance=0.3), kind="through")
    truss = truss_of(pratt(PANELS, DEPTHS), simple_span(4))
    bridge = Bridge("Alderwater mill bridge", truss, deck, floor=Floor(Stringers(z), Floorbeams()))
    return {part.title: part for part in floor_parts(bridge)}


def test_layers_on_stringers_and_the_floorbeam_under_them() -> None:
    """Stringers at +-0.6 and +-1.8 m get 0.6, 1.2, 1.2, 0.6 m of q; ends of the beam 1.8 q b each, b = 3.9 m at L1.

    Stringer S2 in panel L1-L2: 1.2 q L^2/8 and 1.2 q L/2. Floorbeam at S2: 1.8 (2.6 - 0.6) - 0.6 x 1.2 = 2.88 q b.
    """
    parts = floor_of((-1.8, -0.6, 0.6, 1.8))
    item, q, panel = Item.per_area("planks", "components", 600.0, (-1.8, 1.8)), 600.0, PANELS[1]
    for name, width in (("S1", 0.6), ("S2", 1.2), ("S3", 1.2), ("S4", 0.6)):
        found = effects(parts[f"stringer {name}"], item)[COMPONENTS]
        assert_allclose(found[2:4], (width * q * panel**2 / 8, width * q * panel / 2), rtol=EXACT)
    moment = effects(parts["floorbeams, moment at S2"], item)[COMPONENTS]
    assert moment[1] == pytest.approx(2.88 * q * 3.9, rel=EXACT)
    shear = effects(parts["floorbeams, shear at left truss"], item)[COMPONENTS]
    assert shear[1] == pytest.approx(1.8 * q * 3.9, rel=EXACT)


def test_a_weight_at_a_panel_point_stands_on_the_floorbeam_not_on_a_stringer() -> None:
    parts = floor_of((-1.8, 0.0, 1.8))
    item = Item("valve chamber", "other", points=(("L1", 10e3),), low=0.0, high=0.0)
    assert not effects(parts["stringer S2"], item).any()
    assert effects(parts["floorbeams, moment at S2"], item)[OTHER, 1] == pytest.approx(10e3 * SPACING / 4, rel=EXACT)
