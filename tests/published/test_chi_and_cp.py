"""Columns against two published curves: the reduction chi of EN 1993-1-1 and the factor C_P of the NDS.

- EN 1993-1-1:2005, 6.3.1.2: formula and alpha of the five curves READ. The table beside this file (``en1993_chi.csv``)
  holds the formula's values to four places for lambda = 0.2, 0.3 ... 3.0; they are also those of ENV 1993-1-1:1992,
  Table 5.5.2, FROM MEMORY.
- American Wood Council, National Design Specification for Wood Construction, 2018, 3.7.1: formula READ; its values, and
  those of the example, are DERIVED from it and not published.
"""

from __future__ import annotations

import csv
from pathlib import Path
from typing import Final

import pytest

from movload.bridge.material import Timber
from movload.strength import nds
from movload.strength.en_1993 import CURVES, chi
from movload.strength.nds import Post, column_factor
from movload.units import to_si

HALF_LAST_DIGIT: Final = 5e-5  # four places are printed
ROUNDED: Final = 1e-12  # the table's own digits as floats
with (Path(__file__).parent / "en1993_chi.csv").open(encoding="utf-8") as file:
    TABLE: Final = [{key: float(value) for key, value in row.items()} for row in csv.DictReader(file)]


@pytest.mark.parametrize("curve", ["a0", "a", "b", "c", "d"])
def test_chi_is_the_table_on_every_curve(curve: str) -> None:
    """EN 1993-1-1 6.3.1.2, all 29 slendernesses: chi = 1/(Phi + sqrt(Phi^2 - lambda^2)), half the last digit."""
    assert len(TABLE) == 29
    for row in TABLE:
        assert chi(row["lambda_bar"], curve) == pytest.approx(row[curve], rel=0.0, abs=HALF_LAST_DIGIT + ROUNDED), row


def test_the_curves_are_those_of_table_6_1() -> None:
    """EN 1993-1-1 Table 6.1, READ: alpha 0.13, 0.21, 0.34, 0.49, 0.76."""
    assert CURVES == {"a0": 0.13, "a": 0.21, "b": 0.34, "c": 0.49, "d": 0.76}


@pytest.mark.parametrize(
    ("evenness", "ratio", "factor"),
    [
        (0.80, 0.5, 0.4336), (0.80, 1.0, 0.6910), (0.80, 2.0, 0.8672),
        (0.85, 0.5, 0.4461), (0.85, 1.0, 0.7208), (0.85, 2.0, 0.8922),
        (0.90, 0.5, 0.4607), (0.90, 1.0, 0.7597), (0.90, 2.0, 0.9213),
    ],
)  # fmt: skip
def test_column_factor(evenness: float, ratio: float, factor: float) -> None:
    """NDS 2018 (3.7-1) for FcE/Fc* = 0.5, 1, 2, c of sawn timber, round poles and glued timber; half a last digit."""
    assert column_factor(ratio, evenness) == pytest.approx(factor, rel=0.0, abs=HALF_LAST_DIGIT)


def test_a_six_by_six_of_ten_feet() -> None:
    """NDS 2018 3.7.1: 5.5 in x 5.5 in, 10 ft, Fc* 1000 psi, Emin' 580 000 psi.

    le/d 21.82, FcE 1001.5 psi, CP 0.6915, P = 20.9 kip, each to half its last digit.
    """
    psi, inch, kip = to_si("1 psi", "stress"), to_si("1 in", "length"), to_si("1 kip", "force")
    on_stress = {"CM": 1.0, "Ct": 1.0, "CF": 1.0, "Ci": 1.0}
    on_modulus = {"CM": 1.0, "Ct": 1.0, "Ci": 1.0, "CT": 1.0}
    stresses = {"compression": 1000.0 * psi, "stability": 580e3 * psi}
    timber = Timber("sawn", stresses, {"compression": on_stress, "stability": on_modulus})
    area, side, length = (5.5 * inch) ** 2, 5.5 * inch, 120.0 * inch
    post = Post(area=area, net=area, depth=side, breadth=side, kl_x=length, kl_y=length)
    found = nds.compression(timber, post, 1.0, {"compression": 1.0})
    steps = {step.symbol: step.value for step in found.steps}
    assert steps["le/d"] == pytest.approx(21.82, rel=0.0, abs=0.005)
    assert steps["FcE"] / psi == pytest.approx(1001.5, rel=0.0, abs=0.05)
    assert steps["CP"] == pytest.approx(0.6915, rel=0.0, abs=HALF_LAST_DIGIT)
    assert found.value / kip == pytest.approx(20.9, rel=0.0, abs=0.05)
