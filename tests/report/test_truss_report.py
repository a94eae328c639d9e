"""A truss in words: every field of a bearing with its unit, and only the fields that say something."""

from __future__ import annotations

import json
from dataclasses import asdict

import pytest
from rating.bridges import brook, brook_truss

from movload.bridge.bridge import Bridge
from movload.bridge.truss import Support, Truss
from movload.report.table import rendered
from movload.report.truss_report import truss_json, truss_tables
from movload.units import UnitSystem

US = UnitSystem("ft", "kip", "in")
KIP_IN = 4448.2216152605 / 0.0254  # N/m, exact (NIST SP 811, B.8, from memory)
WORDS = {
    "pinned": (Support("L4"), "pinned"),
    "level": (Support("L4", 0), "slides along the bridge"),
    "a full turn": (Support("L4", 360), "slides along the bridge"),
    "upside down": (Support("L4", 180), "slides along a bed at 180 degrees"),
    "settled": (Support("L4", 0, settlement=0.012), "slides along the bridge, settles 12 mm"),
    "lifted": (Support("L4", settlement=-0.0125), "pinned, rises 12.5 mm"),
    "far": (Support("L4", settlement=1.25), "pinned, settles 1.25 m"),
    "moved": (Support("L4", movement=-0.003), "pinned, imposed movement of -3 mm along x"),
    "held": (Support("L4", 0, movement=0.0), "slides along the bridge, imposed movement of 0 mm along x"),
    "springs": (
        Support("L4", 0, normal_stiffness=50e6, slide_stiffness=2.5e5),
        "slides along the bridge, spring of 50 kN/mm upright, spring of 0.25 kN/mm along x",
    ),
    "all": (
        Support("L4", -30, settlement=0.012, movement=0.003, normal_stiffness=50e6, slide_stiffness=1e6),
        (
            "slides along a bed at -30 degrees, settles 12 mm square to its bed, imposed movement of 3 mm along its "
            "bed, spring of 50 kN/mm square to its bed, spring of 1 kN/mm along its bed"
        ),
    ),
}  # fmt: skip


def on(support: Support, units: UnitSystem | None = None) -> Bridge:
    """Return the brook bridge on another bearing."""
    stands = brook()
    truss = Truss(stands.truss.joints, stands.truss.members, [Support("L0"), support])
    return Bridge(stands.title, truss, stands.deck, units=units or UnitSystem())


def lines(bridge: Bridge) -> list[str]:
    """Return the text as a very wide terminal shows it."""
    return rendered(truss_tables(bridge), width=300, colour=False).splitlines()


@pytest.mark.parametrize(("support", "said"), WORDS.values(), ids=WORDS)
def test_a_bearing_in_words(support: Support, said: str) -> None:
    assert f"Bearing L4: {said}" in lines(on(support))


def test_a_bearing_in_us_units() -> None:
    support = Support("L4", 0, settlement=0.0127, movement=0.6096, normal_stiffness=280 * KIP_IN)
    said = "settles 0.5 in, imposed movement of 2 ft along x, spring of 280 kip/in upright"
    assert f"Bearing L4: slides along the bridge, {said}" in lines(on(support, US))


def test_json_has_every_field_of_a_bearing_in_si() -> None:
    support, _ = WORDS["all"]
    read = json.loads(truss_json(on(support, US)))
    assert read["supports"] == [asdict(Support("L0")), asdict(support)]
    assert read["supports"][1] == {
        "joint": "L4", "slides": -30, "settlement": 0.012, "movement": 0.003, "normal_stiffness": 50e6,
        "slide_stiffness": 1e6,
    }  # fmt: skip


@pytest.mark.parametrize(
    ("density", "units", "said"), [(None, None, "-"), (7850.0, None, "7850"), (7850.0, US, "490.059"), (0.0, None, "0")]
)
def test_a_density_nobody_typed_is_a_dash(density: float | None, units: UnitSystem | None, said: str) -> None:
    """7850 kg/m3 / (0.45359237 kg/lb) x (0.3048 m/ft)^3 = 490.059 lb/ft3."""
    stands = brook(truss=brook_truss(density), units=units or UnitSystem())
    shown = lines(stands)
    heads = next(line for line in shown if line.startswith("member "))
    (row,) = (line for line in shown if line.startswith("U1-L2 "))
    column = heads.index("density") + len("density")
    assert row[:column].split()[-1] == said
    assert f"densities in {'lb/ft3' if units else 'kg/m3'}" in next(line for line in shown if "Lengths" in line)
