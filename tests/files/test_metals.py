"""Metals of unknown grade by the year built: the shipped table value by value, and every way a file can be wrong.

AASHTO, Manual for Bridge Evaluation: yield and ultimate stress of unknown steel by date built (26/52, 30/60, 33/66,
36/66 ksi) and of unknown wrought iron (26/48 ksi). FROM MEMORY, and the data say so. Modulus and density of steel,
29 000 ksi and 490 lb/ft3: AASHTO, FROM MEMORY; of wrought iron, 28 000 ksi and 480 lb/ft3: common practice, FROM
MEMORY.
"""

from __future__ import annotations

import datetime as dt
import math
from typing import Any

import pytest

from movload.errors import InputError, UnknownNameError
from movload.files.metals import metals_from, read_metal
from movload.units import to_si

EXACT = 1e-14  # one product
TODAY = dt.datetime.now(dt.UTC).year

ONE = """\
[[metals]]
kind = "steel"
first = 1856
last = 1904
fy = "180 MPa"
fu = "360 MPa"
modulus = "200 GPa"
density = "7850 kg/m3"
source = "Alder valley ledger, invented, read"
others = "own choice"
"""
TWO = ONE + ONE.replace("first = 1856", "first = 1905").replace("last = 1904\n", "")


@pytest.mark.parametrize(
    ("kind", "year", "fy", "fu", "said"),
    [
        ("wrought iron", 1779, 26, 48, "wrought iron of unknown strength"),
        ("wrought iron", 1885, 26, 48, "wrought iron of unknown strength"),
        ("steel", 1856, 26, 52, "before 1905"), ("steel", 1904, 26, 52, "before 1905"),
        ("steel", 1905, 30, 60, "1905 to 1936"), ("steel", 1936, 30, 60, "1905 to 1936"),
        ("steel", 1937, 33, 66, "1936 to 1963"), ("steel", 1963, 33, 66, "1936 to 1963"),
        ("steel", 1964, 36, 66, "after 1963"), ("steel", TODAY, 36, 66, "after 1963"),
    ],
)  # fmt: skip
def test_the_shipped_strengths(kind: str, year: int, fy: float, fu: float, said: str) -> None:
    """Manual for Bridge Evaluation, unknown metals, ksi; a shared year (1936, 1963) takes the weaker period."""
    found = read_metal(kind, year)
    assert found.fy == pytest.approx(to_si(f"{fy} ksi", "stress"), rel=EXACT)
    assert found.fu == pytest.approx(to_si(f"{fu} ksi", "stress"), rel=EXACT)
    assert (found.kind, found.assumed) == (kind, True)
    assert said in found.source
    assert "from memory" in found.source


def test_the_other_shipped_values() -> None:
    """29 000 ksi and 490 lb/ft3 of steel, 28 000 ksi and 480 lb/ft3 of wrought iron."""
    for kind, modulus, density in (("steel", 29e3, 490), ("wrought iron", 28e3, 480)):
        found = read_metal(kind, 1890)
        assert found.modulus == pytest.approx(to_si(f"{modulus} ksi", "stress"), rel=EXACT)
        assert found.density == pytest.approx(to_si(f"{density} lb/ft3", "density"), rel=EXACT)


@pytest.mark.parametrize(
    ("kind", "year", "error", "message"),
    [
        ("wrought iron", 1778, InputError, r"^year: nothing was built of wrought iron before 1779, got 1778"),
        ("steel", 1855, InputError, r"^year: nothing was built of steel before 1856, got 1855"),
        ("steel", TODAY + 1, InputError, rf"^year: nothing is built yet after {TODAY}, got {TODAY + 1}"),
        ("cast iron", 1880, InputError, r"^cast iron: no strength is taken .* not relied on in tension"),
        ("timber", 1880, InputError, r"^timber: no strength is taken from the year built"),
        ("steell", 1900, UnknownNameError, r'^kind: "steell" is not one of .* \(nearest: "steel"\)'),
        ("steel", 1900.5, InputError, r"^year: a whole year is asked for, got 1900.5"),
        ("steel", True, InputError, r"^year: a whole year is asked for, got True"),
    ],
)
def test_what_no_metal_is_read_for(kind: str, year: Any, error: type[InputError], message: str) -> None:
    with pytest.raises(error, match=message):
        read_metal(kind, year)


def test_a_file_of_ones_own() -> None:
    old, new = metals_from(TWO, "mine.toml")
    assert (old.kind, old.first, old.last, old.fy, old.fu) == ("steel", 1856, 1904, 180e6, 360e6)
    assert (new.first, new.last, new.modulus, new.density) == (1905, math.inf, 200e9, 7850.0)
    assert old.source == "Alder valley ledger, invented, read; own choice"


@pytest.mark.parametrize(
    ("old", "new", "message"),
    [
        ('"180 MPa"', "180", r'metals\[0\].fy: a quantity with its unit is asked for, e.g. "26 ksi", got 180'),
        ('"180 MPa"', '"180 m"', r'metals\[0\].fy: "180 m" is a length; a stress is asked for'),
        ('"7850 kg/m3"', "7850", r"metals\[0\].density: a quantity with its unit"),
        ('"200 GPa"', '"-200 GPa"', r"modulus: must be a finite number above 0"),
        ('"360 MPa"', '"170 MPa"', r"fu: the ultimate stress is at least fy"),
        ('kind = "steel"', 'kind = "cast iron"', r'kind: "steel" or "wrought iron" is asked for, got "cast iron"'),
        ("first = 1856", 'first = "1856"', r'metals\[0\].first: a year of four digits is asked for, got "1856"'),
        ("first = 1856", "first = true", r"metals\[0\].first: a year of four digits is asked for, got true"),
        ("first = 1856", "first = 856", r"metals\[0\].first: a year of four digits is asked for, got 856"),
        ("first = 1905", "first = 1906", r"metals: steel: a period begins the year after .* ends, 1904, got 1906"),
        ("first = 1905", "first = 1904", r"metals: steel: a period begins the year after .* ends, 1904, got 1904"),
        ("last = 1904\n", "", r"metals: steel: a period begins the year after .* ends, inf, got 1905"),
        ("last = 1904", "last = 1855", r"steel from 1856: ends before it begins, 1855"),
        ('others = "own choice"', 'others = "hearsay"', r'others: must say "read", "from memory" or "own choice"'),
        ('others = "own choice"\n', "", r"metals\[0\].others: is missing"),
        ("fu = ", "fuu = ", r'metals\[0\]: key "fuu" is not known \(nearest: "fu"\)'),
        (TWO, "metals = []\n", r"metals: at least one metal is asked for"),
        (TWO, "metals = [\n", r"is not TOML"),
    ],
)
def test_a_file_that_is_wrong(old: str, new: str, message: str) -> None:
    assert old in TWO
    with pytest.raises(InputError, match=rf"^mine.toml: .*{message}"):
        metals_from(TWO.replace(old, new, 1), "mine.toml")
