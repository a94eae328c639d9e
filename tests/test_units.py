r"""Quantities as people write them, against pint as the independent reference.

pint, https://pint.readthedocs.io, units by its own default registry. It shares no table with movload.
"""

from __future__ import annotations

import re
from typing import Any

import pint
import pytest
from hypothesis import given
from hypothesis import strategies as st

from movload.errors import InputError, UnknownNameError
from movload.units import GRAVITY, SI_UNITS, Quantity, UnitSystem, to_si, unit_factor

REGISTRY: pint.UnitRegistry[Any] = pint.UnitRegistry()

# movload's symbol, what is measured, and the same unit in pint's words; a mass as a weight is times standard gravity.
SYMBOLS: list[tuple[str, Quantity, str]] = [
    ("m", "length", "m"),
    ("cm", "length", "cm"),
    ("mm", "section", "mm"),
    ("km", "length", "km"),
    ("ft", "length", "foot"),
    ("feet", "length", "foot"),
    ("'", "length", "foot"),
    ("in", "section", "inch"),
    ("inches", "section", "inch"),
    ('"', "section", "inch"),
    ("N", "force", "N"),
    ("kN", "force", "kN"),
    ("MN", "force", "MN"),
    ("lb", "force", "pound_force"),
    ("lbs", "force", "pound_force"),
    ("lbf", "force", "pound_force"),
    ("kip", "force", "kip"),
    ("kips", "force", "kip"),
    ("kg", "force", "kg * standard_gravity"),
    ("t", "force", "tonne * standard_gravity"),
    ("tonnes", "force", "tonne * standard_gravity"),
    ("short ton", "force", "short_ton * standard_gravity"),
    ("short tons", "force", "short_ton * standard_gravity"),
    ("long ton", "force", "long_ton * standard_gravity"),
    ("kN/m", "line load", "kN/m"),
    ("kN / m", "line load", "kN/m"),
    ("t/m", "line load", "tonne * standard_gravity / m"),
    ("lb/ft", "line load", "pound_force/foot"),
    ("klf", "line load", "kip/foot"),
    ("plf", "line load", "pound_force/foot"),
    ("mm2", "area", "mm**2"),
    ("cm²", "area", "cm**2"),
    ("in2", "area", "inch**2"),
    ("Pa", "stress", "Pa"),
    ("MPa", "stress", "MPa"),
    ("GPa", "stress", "GPa"),
    ("N/mm2", "stress", "N/mm**2"),
    ("kN/cm²", "stress", "kN/cm**2"),
    ("psi", "stress", "pound_force/inch**2"),
    ("ksi", "stress", "kip/inch**2"),
    ("psf", "stress", "pound_force/foot**2"),
    ("kip/in2", "stress", "kip/inch**2"),
    ("kg/m3", "density", "kg/m**3"),
    ("t/m3", "density", "tonne/m**3"),
    ("pcf", "density", "pound/foot**3"),
    ("lb/ft3", "density", "pound/foot**3"),
    ("kN/m3", "density", "kN/m**3/standard_gravity"),
    ("kN/mm", "stiffness", "kN/mm"),
    ("kip/in", "stiffness", "kip/inch"),
    ("kN/m2", "pressure", "kN/m**2"),
    ("kPa", "pressure", "kPa"),
    ("psf", "pressure", "pound_force/foot**2"),
    ("kN m", "moment", "kN*m"),
    ("kN-m", "moment", "kN*m"),
    ("kNm", "moment", "kN*m"),
    ("t m", "moment", "tonne * standard_gravity * m"),
    ("kip ft", "moment", "kip*foot"),
    ("kip-in", "moment", "kip*inch"),
    ("m/s", "speed", "m/s"),
    ("km/h", "speed", "km/hour"),
    ("mph", "speed", "mile/hour"),
    ("mm3", "section modulus", "mm**3"),
    ("cm³", "section modulus", "cm**3"),
    ("in3", "section modulus", "inch**3"),
    ("cm4", "torsion", "cm**4"),
    ("in⁴", "torsion", "inch**4"),
    ("cm6", "warping", "cm**6"),
    ("in6", "warping", "inch**6"),
    ("%", "fraction", "0.01"),
]
SI: dict[Quantity, str] = {
    "length": "m", "section": "m", "force": "N", "line load": "N/m", "area": "m**2", "stress": "Pa",
    "density": "kg/m**3", "stiffness": "N/m", "fraction": "",
    "pressure": "Pa", "moment": "N*m", "speed": "m/s", "section modulus": "m**3", "torsion": "m**4", "warping": "m**6",
}  # fmt: skip


@pytest.mark.parametrize(("symbol", "quantity", "words"), SYMBOLS)
def test_every_unit_agrees_with_pint(symbol: str, quantity: Quantity, words: str) -> None:
    expected = REGISTRY.Quantity(1.0, words if words[0].isalpha() else "").to(SI[quantity]).magnitude
    expected = expected if words[0].isalpha() else float(words)
    # both are products of a few exactly defined numbers: some units in the last place
    assert to_si(f"1 {symbol}", quantity) == pytest.approx(expected, rel=1e-14)
    assert unit_factor(symbol, quantity) == pytest.approx(expected, rel=1e-14)


@pytest.mark.parametrize(
    ("text", "feet", "inches"),
    [
        ("12'-6 1/2\"", 12, 6.5),
        ("12' 6 1/2\"", 12, 6.5),
        ("12'6\"", 12, 6),
        ("12'-6.25\"", 12, 6.25),
        ("0'-3/4\"", 0, 0.75),
        ("-2'-6\"", -2, -6),
        ("12 ft 6 in", 12, 6),
        ("12'", 12, 0),
        ('6 1/2"', 0, 6.5),
        ("3/8 in", 0, 0.375),
        ("6-1/2 in", 0, 6.5),
        ('7"', 0, 7),
        ("  12'-6\" ", 12, 6),
    ],
)
def test_feet_and_inches(text: str, feet: float, inches: float) -> None:
    metres = (feet * REGISTRY.foot + inches * REGISTRY.inch).to("m").magnitude
    assert to_si(text, "length") == pytest.approx(metres, rel=1e-14)
    assert to_si(text, "section") == to_si(text, "length")


@given(st.integers(0, 999), st.integers(0, 11), st.integers(0, 15))
def test_any_tape_measure_reading(feet: int, inches: int, sixteenths: int) -> None:
    expected = (feet * 12 + inches + sixteenths / 16) * 0.0254
    # a foot is not twelve inches to the last bit in binary: up to two roundings
    assert to_si(f"{feet}'-{inches} {sixteenths}/16\"", "length") == pytest.approx(expected, rel=1e-15, abs=1e-17)


@given(st.floats(-1e9, 1e9), st.sampled_from(SYMBOLS))
def test_any_number_is_read_as_python_reads_it(number: float, unit: tuple[str, Quantity, str]) -> None:
    symbol, quantity, _ = unit
    assert to_si(f"{number!r} {symbol}", quantity) == number * unit_factor(symbol, quantity)
    assert to_si(f"{number!r}{symbol}", quantity) == number * unit_factor(symbol, quantity)


@pytest.mark.parametrize(
    ("text", "expected"), [("+5 m", 5.0), (".5 m", 0.5), ("5. m", 5.0), ("1e3 mm", 1.0), ("-2 m", -2.0)]
)
def test_numbers(text: str, expected: float) -> None:
    assert to_si(text, "length") == pytest.approx(expected, rel=1e-15)


@pytest.mark.parametrize("unit", ["ton", "tons", "T"])
def test_a_bare_ton_is_refused(unit: str) -> None:
    with pytest.raises(InputError, match=rf'"9.5 {unit}".*three weights; write t \(tonne\), short ton or long ton'):
        to_si(f"9.5 {unit}", "force")


def test_a_bare_ton_per_metre_is_refused() -> None:
    with pytest.raises(InputError, match=r'"2 ton/m".*three weights'):
        to_si("2 ton/m", "line load")


@pytest.mark.parametrize(
    ("text", "quantity", "message"),
    [
        ("4.2 m", "force", '"4.2 m" is a length; a force is asked for, e.g. "62 kN" or "18 kip"'),
        ("62 kN", "length", '"62 kN" is a force; a length is asked for, e.g. "4.2 m"'),
        ("62 kN", "line load", '"62 kN" is a force; a load per length is asked for, e.g. "9 kN/m" or "0.64 klf"'),
        ("9 kN/m", "force", '"9 kN/m" is a load per length; a force is asked for'),
        ("20 mm", "area", '"20 mm" is a length; an area is asked for, e.g. "2400 mm2"'),
        ("200 GPa", "density", '"200 GPa" is a stress; a density is asked for'),
        ("7850 kg/m3", "stress", '"7850 kg/m3" is a density; a stress is asked for, e.g. "200 GPa"'),
        ("5", "length", '"5" has no unit; a length is asked for, e.g. "4.2 m" or'),
        ("about 5 m", "length", '"about 5 m" is not a number with a unit; a length is asked for'),
        ("", "force", '"" is not a number with a unit; a force is asked for'),
        ("nan m", "length", '"nan m" is not a number with a unit'),
        ("1e999 m", "length", '"1e999 m" is too large a number'),
        ("12'-6 1/0\"", "length", "divides by zero"),
    ],
)
def test_what_is_refused(text: str, quantity: Quantity, message: str) -> None:
    with pytest.raises(InputError, match=re.escape(message)):
        to_si(text, quantity)


@pytest.mark.parametrize(
    ("text", "quantity", "nearest"),
    [
        ("4 KN", "force", "kN"),
        ("4 kipp", "force", "kip"),
        ("4 mmm", "length", "mm"),
        ("30 kpsi", "stress", "psi"),
        ("1,5 m", "length", ""),
    ],
)
def test_an_unknown_unit_names_the_nearest(text: str, quantity: Quantity, nearest: str) -> None:
    with pytest.raises(UnknownNameError, match=f'unit ".*" is not known for a {quantity}') as caught:
        to_si(text, quantity)
    assert caught.value.nearest == nearest


@pytest.mark.parametrize(
    ("length", "force", "section"), [("m", "kN", "mm"), ("ft", "kip", "in"), ("m", "t", "cm"), ("m", "N", "m")]
)
def test_a_unit_system_follows_from_three(length: str, force: str, section: str) -> None:
    system = UnitSystem(length, force, section)
    for quantity in SI:
        symbol = system.symbol(quantity)
        assert system.factor(quantity) == pytest.approx(unit_factor(symbol, quantity), rel=1e-15)
        assert system.shown(system.factor(quantity) * 3.7, quantity) == pytest.approx(3.7, rel=1e-15)


def test_si_is_its_own_system() -> None:
    """But for speeds, which are shown in km/h."""
    own = [SI_UNITS.factor(quantity) for quantity in SI if quantity != "speed"]
    assert own == [1.0] * (len(SI) - 1)


@pytest.mark.parametrize("name", ["length", "force", "section"])
def test_a_unit_system_refuses_a_unit_of_another_kind(name: str) -> None:
    with pytest.raises(InputError, match=rf'^units.{name}: "ksi" is a stress'):
        UnitSystem(**{name: "ksi"})


def test_a_density_beside_metres_is_metric_however_they_are_spelled() -> None:
    assert UnitSystem("metre", "kN", "mm").factor("density") == 1.0


@pytest.mark.parametrize(
    ("length", "given", "expected"),
    [
        ("m", {}, ("m", "kN", "mm")),
        ("cm", {"force": "t"}, ("cm", "t", "mm")),
        ("metre", {"section": "m"}, ("m", "kN", "m")),
        ("ft", {}, ("ft", "kip", "in")),
        ("feet", {"force": "kN"}, ("ft", "kN", "in")),
        ("in", {"force": "lb", "section": "ft"}, ("in", "lb", "ft")),
        ("'", {}, ("'", "kip", "in")),
    ],
)
def test_what_is_left_out_goes_with_the_length(
    length: str, given: dict[str, str], expected: tuple[str, str, str]
) -> None:
    system = UnitSystem.beside(length, **given)
    assert system == UnitSystem(*expected)
    assert system.is_us == (expected[0] in {"ft", "in", "'"}) == (system.symbol("density") == "lb/ft3")


@pytest.mark.parametrize(("length", "message"), [("mtr", r'"mtr" is not known .*"m"'), ("kN", '"kN" is a force')])
def test_no_units_go_with_what_is_no_length(length: str, message: str) -> None:
    with pytest.raises(InputError, match=rf"^units.length: .*{message}"):
        UnitSystem.beside(length)


def test_gravity_is_standard() -> None:
    """Standard gravity is 9.80665 m/s2 by definition (NIST SP 811, B.8, from memory)."""
    assert REGISTRY.Quantity(1.0, "standard_gravity").to("m/s**2").magnitude == GRAVITY
