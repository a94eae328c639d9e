"""Columns, old steels' stresses and a beam against published tables.

- American Institute of Steel Construction, *Manual of Steel Construction, Load and Resistance Factor Design*, 2nd ed.,
  Table 3-36: phi Fcr, phi 0.85, Fy 36 ksi, K l/r 1 to 199. READ (``aisc_lrfd_table_3_36.csv``, as printed). The column
  equation is the one AASHTO LRFD 6.9.4.1.1 took over. MISPRINT: at K l/r = 24 the table has 26.69; its neighbours 29.76
  and 29.61 and the equation ask for 29.69.
- AASHTO, *Standard Specifications for Highway Bridges*, 17th ed., Table 10.32.1A, and *Manual for Bridge Evaluation*,
  Tables 6B.5.2.1-1 and -2: allowable column stresses in psi at inventory (2.12) and operating (1.70). FROM MEMORY.
- The same manual: 0.55 and 0.75 of yield and 0.50 and 0.67 of ultimate in tension, 0.85 As Fcr by load factor. FROM
  MEMORY.
- American Institute of Steel Construction, *Steel Construction Manual*, 13th ed. and later, Table 3-2, with Table 1-1
  for the section: W18x50, Fy 50 ksi: Lr = 16.9 ft, phi Mp = 379 kip ft (phi 0.90). FROM MEMORY.
"""

from __future__ import annotations

import csv
import math
from pathlib import Path
from typing import Final

import pytest
from numpy.testing import assert_allclose

from movload.files.factor_sets import read_factor_set
from movload.strength import aashto_floor, aashto_lrfd, mbe_stress
from movload.strength.aashto_floor import Beam, Lateral
from movload.strength.aashto_lrfd import Tie
from movload.strength.beam_column import Column
from movload.units import unit_factor

KIP, KSI, INCH = unit_factor("kip", "force"), unit_factor("ksi", "stress"), unit_factor("in", "section")
PSI: Final = unit_factor("psi", "stress")
MODULUS: Final = 29e3 * KSI
MISPRINTED: Final = {24: (26.69, 29.69)}  # printed, and what the equation and the neighbours ask for
PRINTED: Final = 0.0075  # ksi: half the last digit, and what the table's makers lost by rounding on their way


def printed_stresses() -> dict[int, float]:
    """Return the table, phi Fcr [ksi] by slenderness, as printed."""
    with (Path(__file__).parent / "aisc_lrfd_table_3_36.csv").open(encoding="utf-8") as table:
        rows = csv.DictReader(line for line in table if not line.startswith("#"))
        return {int(row["slenderness"]): float(row["ksi"]) for row in rows}


def bar(slenderness: float, fy: float) -> Column:
    """Return a bar of 1 m2, r = 1 m, as slender as asked about both axes; fy [Pa]."""
    return Column(
        area=1.0, gross=1.0, kl_x=slenderness, kl_y=slenderness, r_x=1.0, r_y=1.0, fy=fy, modulus=MODULUS, torsion=None
    )


def test_the_whole_column_table() -> None:
    """AISC Table 3-36, K l/r 1 to 199: 0.85 0.658^(Po/Pe) 36 and 0.85 0.877 Pe/A, within what printing rounds."""
    stresses = printed_stresses()
    assert list(stresses) == list(range(1, 200))
    off = {}
    for slenderness, printed in stresses.items():
        found = aashto_lrfd.compression(bar(slenderness, 36 * KSI), {"compression": 0.85}).value / KSI
        if abs(found - printed) > PRINTED:
            off[slenderness] = (printed, round(found, 2))
    assert off == MISPRINTED


@pytest.mark.parametrize(("slenderness", "ksi"), [(20, 29.96), (60, 25.32), (100, 18.08), (120, 14.34), (150, 9.48)])
def test_spot_values_of_the_column_table(slenderness: int, ksi: float) -> None:
    """References to the same table, typed a second time against a slip in the copy."""
    assert printed_stresses()[slenderness] == ksi


@pytest.mark.parametrize(
    ("fy", "inventory", "slope", "operating", "steeper", "limit"),
    [
        (26, 12260, 0.28, 15290, 0.35, 148.4),
        (30, 14150, 0.37, 17650, 0.46, 138.1),
        (33, 15570, 0.45, 19410, 0.56, 131.7),
        (36, 16980, 0.53, 21180, 0.67, 126.1),
        (50, 23580, 1.03, 29410, 1.28, 107.0),
    ],
)
def test_allowable_column_stresses_of_old_steels(
    fy: float, *, inventory: float, slope: float, operating: float, steeper: float, limit: float
) -> None:
    """Tables of the manual: a - b (K l/r)^2 psi up to Cc; a is rounded to ten, b to two decimals, Cc to one."""
    for level, start, fall in (("inventory", inventory, slope), ("operating", operating, steeper)):
        phi = {"compression": {"inventory": 1 / 2.12, "operating": 1 / 1.70}[level]}
        for slenderness in (1.0, 60.0, 100.0):
            stress = mbe_stress.compression(bar(slenderness, fy * KSI), phi).value / PSI
            rounded = 10.0 + 0.0055 * slenderness**2  # the printed a are cut as often as rounded
            assert_allclose(stress, start - fall * slenderness**2, rtol=0, atol=rounded)
    steps = mbe_stress.compression(bar(1.0, fy * KSI), {"compression": 1.0}).steps
    assert_allclose(
        next(step.value for step in steps if step.symbol == "Cc"), limit, rtol=0, atol=0.06
    )  # cut or rounded


def test_allowable_stress_of_slender_columns() -> None:
    """Table 10.32.1A: 135 000 740/(K l/r)^2 psi above Cc; pi^2 29e6/2.12 is 135 008 739: rounded on its way."""
    found = mbe_stress.compression(bar(150.0, 36 * KSI), {"compression": 1 / 2.12}).value / PSI
    assert_allclose(found, 135_000_740 / 150**2, rtol=1e-4)


@pytest.mark.parametrize(("level", "gross", "net"), [(0, 0.55, 0.50), (1, 0.75, 0.67)])
def test_allowable_tension(level: int, gross: float, net: float) -> None:
    """0.55 and 0.75 Fy Ag by the shipped factor set; 0.50 and 0.67 Fu An."""
    phi = {**read_factor_set("allowable_stress").levels[level].resistance, "fracture": net}
    wide, narrow = (
        mbe_stress.tension(Tie(gross=1.0, net=area, fy=30e6, fu=60e6, shear_lag=1.0, punched=False), phi).value
        for area in (2.0, 0.1)
    )
    assert_allclose(wide, gross * 30e6, rtol=1e-12)  # hand
    assert_allclose(narrow, net * 60e6 * 0.1, rtol=1e-12)  # hand


def test_load_factor_column_by_the_shipped_factor_set() -> None:
    """0.85 As Fcr with Fcr = Fy (1 - Fy (K l/r)^2/(4 pi^2 E)); Fy 33 ksi (1936 to 1963), K l/r 80."""
    for level in read_factor_set("load_factor").levels:
        found = mbe_stress.compression(bar(80.0, 33 * KSI), level.resistance).value / KSI
        assert_allclose(found, 0.85 * 33 * (1 - 33 * 80**2 / (4 * math.pi**2 * 29e3)), rtol=1e-12)  # hand


def test_a_rolled_beam() -> None:
    """W18x50: Lr 16.9 ft to its last digit, 0.90 Mp 379 kip ft. Lp differs: rt sqrt(E/Fy) here, 1.76 ry sqrt(E/Fy)."""
    lateral = Lateral(unbraced=1 * INCH, i_y=40.1 * INCH**4, j=1.24 * INCH**4, c_w=3040 * INCH**6)
    modulus = 88.9 * INCH**3
    beam = Beam(
        s_c=modulus, s_t=modulus, z=101 * INCH**3, flange_ratio=6.57, web_ratio=45.2, fy=50 * KSI, modulus=MODULUS,
        lateral=lateral,
    )  # fmt: skip
    found = aashto_floor.bending(beam, {"moment": 0.90})
    longest = next(step.value for step in found.steps if step.symbol == "Lr")
    assert_allclose(longest / (12 * INCH), 16.9, rtol=0, atol=0.05)
    assert_allclose(found.value / (KIP * 12 * INCH), 379, rtol=0, atol=0.5)
