"""Published column curves again, all the way: from a round bar or a timber as made to its strength.

``test_column_tables`` and ``test_chi_and_cp`` ask the rules themselves; here shapes, radii, lengths and the choice of
the rule stand between the table and the answer.

- American Institute of Steel Construction, *Manual of Steel Construction, Load and Resistance Factor Design*, 2nd ed.,
  Table 3-36: phi Fcr, phi 0.85, Fy 36 ksi. READ. MISPRINT at K l/r = 24, 26.69 for 29.69.
- EN 1993-1-1:2005, 6.3.1.2: chi by its formula and alpha, READ; the same rows in ENV 1993-1-1:1992, Table 5.5.2, FROM
  MEMORY.
- American Wood Council, National Design Specification for Wood Construction, 2018, 3.7.1: formula READ, the example's
  numbers DERIVED from it.
"""

from __future__ import annotations

import csv
import math
from pathlib import Path
from typing import Final

import pytest

from movload.bridge.loss import AsFound
from movload.bridge.made import Held, Made
from movload.bridge.material import Material, Timber
from movload.bridge.section import Section
from movload.bridge.section_bars import RoundBar, SawnTimber
from movload.bridge.section_piece import Piece
from movload.strength.parts import part_strength
from movload.units import unit_factor

KIP, KSI, PSI = unit_factor("kip", "force"), unit_factor("ksi", "stress"), unit_factor("psi", "stress")
INCH: Final = unit_factor("in", "section")
PRINTED: Final = 0.0075  # ksi: half the last digit, and what the table's makers lost by rounding on their way
HALF_LAST_DIGIT: Final = 5e-5  # four places are printed
MISPRINTED: Final = {24: 29.69}  # what the equation and the neighbours 29.76 and 29.61 ask for in place of 26.69
ROD: Final = Section("rod", (Piece(RoundBar(0.080)),))  # r = 20 mm
AREA: Final = math.pi * 0.040**2
RADIUS: Final = 0.020
CHI: Final = {
    0.2: (1.0, 1.0, 1.0, 1.0, 1.0),
    0.5: (0.9513, 0.9243, 0.8842, 0.8430, 0.7793),
    0.8: (0.8533, 0.7957, 0.7245, 0.6622, 0.5797),
    1.0: (0.7253, 0.6656, 0.5970, 0.5399, 0.4671),
    1.2: (0.5732, 0.5300, 0.4781, 0.4338, 0.3762),
    1.5: (0.3953, 0.3724, 0.3422, 0.3145, 0.2766),
    2.0: (0.2323, 0.2229, 0.2095, 0.1962, 0.1766),
    3.0: (0.1063, 0.1036, 0.0994, 0.0951, 0.0882),
}
"""Of curves a0, a, b, c, d by slenderness."""


def rod(slenderness: float, *, fy: float, modulus: float, curve: str = "") -> Made:
    """Return a round bar of steel of a slenderness K l/r about both axes, K = 0.8."""
    length = slenderness * RADIUS / 0.8
    steel = Material("steel", "steel", modulus=modulus, density=7850, source="invented", fy=fy, fu=1.6 * fy)
    return Made(
        section=AsFound(ROD), material=steel, held=Held(unbraced_x=length, unbraced_y=length, k_x=0.8, k_y=0.8),
        curves=(curve, curve) if curve else (),
    )  # fmt: skip


def test_every_row_of_the_column_table() -> None:
    """AISC Table 3-36, READ, K l/r 1 to 199, by AASHTO LRFD's rule, which took that equation over; E 29 000 ksi."""
    with (Path(__file__).parent / "aisc_lrfd_table_3_36.csv").open(encoding="utf-8") as table:
        rows = [*csv.DictReader(line for line in table if not line.startswith("#"))]
    assert len(rows) == 199
    for row in rows:
        slenderness = int(row["slenderness"])
        part = rod(slenderness, fy=36 * KSI, modulus=29e3 * KSI)
        found = part_strength(part, "compression", "aashto_lrfd", {"compression": 0.85}, subject="rod")
        asked = MISPRINTED.get(slenderness, float(row["ksi"]))
        assert found.value / AREA / KSI == pytest.approx(asked, rel=0.0, abs=PRINTED), slenderness


@pytest.mark.parametrize("slenderness", CHI)
def test_chi_of_a_round_bar(slenderness: float) -> None:
    """EN 1993-1-1 6.3.1.2: chi = N/(A fy), typed here a second time; lambda_1 = pi sqrt(E/fy); half the last digit."""
    base = math.pi * math.sqrt(210e9 / 235e6)
    for curve, printed in zip(("a0", "a", "b", "c", "d"), CHI[slenderness], strict=True):
        part = rod(slenderness * base, fy=235e6, modulus=210e9, curve=curve)
        phi = {"compression": 1.0, "tension": 1.0}
        found = part_strength(part, "compression", "en_1993", phi, subject="rod")
        assert found.value / (AREA * 235e6) == pytest.approx(printed, rel=0.0, abs=HALF_LAST_DIGIT), curve


def test_a_six_by_six_of_ten_feet() -> None:
    """NDS 2018 3.7.1: 5.5 in x 5.5 in, 10 ft, Fc* 1000 psi (C_D 1), Emin' 580 000 psi: C_P 0.6915, P 20.9 kip."""
    factors = {
        "compression": {"CM": 1.0, "Ct": 1.0, "CF": 1.0, "Ci": 1.0},
        "stability": {"CM": 1.0, "Ct": 1.0, "Ci": 1.0, "CT": 1.0},
    }
    sawn = Timber("sawn", {"compression": 1000 * PSI, "stability": 580e3 * PSI}, factors)
    post = Made(
        section=AsFound(Section("6 x 6", (Piece(SawnTimber(5.5 * INCH, 5.5 * INCH)),))),
        material=Material("fir", "timber", modulus=11e9, density=500, source="invented", timber=sawn),
        held=Held(unbraced_x=120 * INCH, unbraced_y=120 * INCH, k_x=1.0, k_y=1.0), durations=("ten years",),
        treated=False,
    )  # fmt: skip
    found = part_strength(post, "compression", "mbe_allowable_stress", {"compression": 1.0}, subject="post")
    steps = {step.symbol: step.value for step in found.steps}
    assert steps["CP"] == pytest.approx(0.6915, rel=0.0, abs=HALF_LAST_DIGIT)
    assert found.value / KIP == pytest.approx(20.9, rel=0.0, abs=0.05)
