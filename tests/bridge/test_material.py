"""What parts are made of: metals as typed and by the year built, timber, cast iron, and every one that is refused."""

from __future__ import annotations

import math
import pickle
from dataclasses import FrozenInstanceError
from typing import Any

import pytest

from movload.bridge.material import KINDS, Material, Period, Timber, material_by_year
from movload.errors import InputError, MissingDataError, UnknownNameError

IRON = {"modulus": 193e9, "density": 7690.0, "source": "three coupons, invented", "fy": 179e6, "fu": 331e6}
SAWN = Timber("sawn", {"tension": 6e6, "stability": 4e9}, {"tension": {"CM": 0.9, "Ct": 1.0}})
LARCH = {"modulus": 11e9, "density": 560.0, "source": "graded on site, invented", "timber": SAWN}
PERIODS = (
    Period("steel", 1856, 1904, 180e6, fu=360e6, modulus=200e9, density=7850.0, source="old"),
    Period("steel", 1905, 1936, 207e6, fu=414e6, modulus=200e9, density=7850.0, source="middle"),
    Period("steel", 1937, math.inf, 228e6, fu=455e6, modulus=201e9, density=7849.0, source="new"),
    Period("wrought iron", 1779, 1910, 179e6, fu=331e6, modulus=193e9, density=7690.0, source="iron"),
)


def by_year(kind: str, year: int) -> Material:
    """Return what the periods above say in 2026."""
    return material_by_year(PERIODS, kind, year, today=2026)


def test_a_metal_keeps_what_was_typed() -> None:
    iron = Material("eyebars", "wrought iron", **IRON)
    assert (iron.fy, iron.fu, iron.modulus, iron.density) == (179e6, 331e6, 193e9, 7690.0)
    assert (iron.assumed, iron.timber, iron.source) == (False, None, "three coupons, invented")
    assert iron.notes("L0-L1") == ()
    with pytest.raises(FrozenInstanceError):
        iron.fy = 1.0  # type: ignore[misc]  # what must fail


def test_a_timber_has_reference_stresses_and_no_yield() -> None:
    larch = Material("larch", "timber", **LARCH)
    assert larch.timber is SAWN
    assert math.isnan(larch.fy)
    assert math.isnan(larch.fu)


def test_materials_survive_pickling_and_keep_copies() -> None:
    factors = {"CM": 0.9}
    timber = Timber("sawn", {"shear": 1e6}, {"shear": factors})
    factors["CM"] = 0.1
    again = pickle.loads(pickle.dumps(Material("larch", "timber", **LARCH | {"timber": timber})))  # noqa: S301  # ours
    assert again.timber.stresses == {"shear": 1e6}
    assert again.timber.factors == {"shear": {"CM": 0.9}}
    with pytest.raises(TypeError):
        again.timber.factors["shear"]["CM"] = 1.0


@pytest.mark.parametrize(
    ("kind", "changes", "error", "message"),
    [
        ("steal", {}, UnknownNameError, r'material "x": kind: "steal" is not one of steel, .* \(nearest: "steel"\)'),
        ("steel", {"fy": math.nan}, MissingDataError, r'material "x": fy: steel needs it'),
        ("steel", {"fu": math.nan}, MissingDataError, r'material "x": fu: steel needs it'),
        ("cast iron", {"fy": math.nan}, MissingDataError, r"fy: cast iron needs it"),
        ("steel", {"fy": 0.0}, InputError, r"fy: must be a finite number above 0, got 0 Pa"),
        ("steel", {"fu": math.inf}, InputError, r"fu: must be a finite number above 0, got inf Pa"),
        ("steel", {"fu": 178e6}, InputError, r"fu: the ultimate stress is at least fy, 1.79e\+08 Pa, got 1.78e\+08 Pa"),
        ("steel", {"modulus": -1.0}, InputError, r"modulus: must be a finite number above 0, got -1 Pa"),
        ("steel", {"density": 0.0}, InputError, r"density: must be a finite number above 0, got 0 kg/m3"),
        ("steel", {"source": " "}, MissingDataError, r"source: say where the values come from"),
        ("steel", {"timber": SAWN}, InputError, r"timber: steel has no timber's reference stresses"),
        ("timber", {}, MissingDataError, r"timber: a timber needs its reference stresses"),
        ("timber", {"timber": SAWN}, InputError, r"fy: a timber has reference stresses instead, got 1.79e\+08 Pa"),
        ("timber", {"timber": SAWN, "fy": math.nan}, InputError, r"fu: a timber has reference stresses instead"),
    ],
)  # fmt: skip
def test_an_impossible_material(kind: str, changes: dict[str, Any], error: type[InputError], message: str) -> None:
    with pytest.raises(error, match=message):
        Material("x", kind, **IRON | changes)


def test_an_ultimate_stress_may_equal_the_yield_stress() -> None:
    assert Material("x", "steel", **IRON | {"fu": 179e6}).fu == 179e6


@pytest.mark.parametrize(
    ("product", "stresses", "factors", "error", "message"),
    [
        ("swan", {}, {}, UnknownNameError, r'product: "swan" is not one of sawn, glued laminated \(nearest: "sawn"\)'),
        ("sawn", {"tensoin": 1.0}, {}, UnknownNameError, r'stresses.tensoin: .*\(nearest: "tension"\)'),
        ("sawn", {"tension": 0.0}, {}, InputError, r"stresses.tension: must be a finite number above 0, got 0 Pa"),
        ("sawn", {}, {"sheer": {}}, UnknownNameError, r'factors.sheer: .*\(nearest: "shear"\)'),
        ("sawn", {}, {"shear": {"CM": -0.9}}, InputError, r"factors.shear.CM: must be .* above 0, got -0.9$"),
        ("sawn", {}, {"shear": {"CM": math.nan}}, InputError, r"factors.shear.CM: must be .* above 0, got nan$"),
    ],
)  # fmt: skip
def test_an_impossible_timber(
    product: str, stresses: dict[str, float], factors: dict[str, dict[str, float]], error: type, message: str
) -> None:
    with pytest.raises(error, match=message):
        Timber(product, stresses, factors)


@pytest.mark.parametrize("sense", ["tension", "moment", "hogging"])
def test_cast_iron_is_refused_wherever_a_fibre_is_pulled(sense: str) -> None:
    shoe = Material("shoe", "cast iron", **IRON | {"fu": math.nan})
    with pytest.raises(InputError, match=rf'L0: cast iron breaks without warning .* no strength in {sense} .* "shoe"'):
        shoe.require_sense(sense, "L0")


def test_cast_iron_may_be_pressed_under_caution_and_other_kinds_may_be_pulled() -> None:
    shoe = Material("shoe", "cast iron", **IRON)
    for sense in ("compression", "shear"):
        shoe.require_sense(sense, "L0")
    (note,) = shoe.notes("L0")
    assert (note.code, note.subject) == ("cast-iron", "L0")
    assert "not relied on in tension" in note.text
    for kind in ("steel", "wrought iron"):
        Material("x", kind, **IRON).require_sense("tension", "L0")


@pytest.mark.parametrize(
    ("kind", "year", "fy", "source"),
    [
        ("steel", 1856, 180e6, "old"), ("steel", 1904, 180e6, "old"), ("steel", 1905, 207e6, "middle"),
        ("steel", 1936, 207e6, "middle"), ("steel", 1937, 228e6, "new"), ("steel", 2026, 228e6, "new"),
        ("wrought iron", 1779, 179e6, "iron"), ("wrought iron", 1910, 179e6, "iron"),
    ],
)  # fmt: skip
def test_a_metal_by_the_year_built(kind: str, year: int, fy: float, source: str) -> None:
    found = by_year(kind, year)
    assert (found.kind, found.fy, found.source, found.assumed) == (kind, fy, source, True)
    assert found.title == f"{kind} of unknown grade, {year}"
    (note,) = found.notes("U1-U2")
    assert (note.code, note.subject, note.source) == ("material-assumed", "U1-U2", source)
    assert "assumed from metal and year built" in note.text


def test_every_value_of_a_period_arrives() -> None:
    found = by_year("steel", 1950)
    assert (found.fy, found.fu, found.modulus, found.density) == (228e6, 455e6, 201e9, 7849.0)


@pytest.mark.parametrize(
    ("kind", "year", "error", "message"),
    [
        ("steel", 1855, InputError, r"year: nothing was built of steel before 1856, got 1855"),
        ("wrought iron", 1778, InputError, r"year: nothing was built of wrought iron before 1779, got 1778"),
        ("steel", 2027, InputError, r"year: nothing is built yet after 2026, got 2027"),
        ("wrought iron", 1911, InputError, r"year: no strength of wrought iron is known for that year, got 1911"),
        ("cast iron", 1880, InputError, r"cast iron: .* not relied on in tension; type what was measured"),
        ("timber", 1880, InputError, r"timber: .* have the grade identified, type its reference stresses"),
        ("wrougt iron", 1880, UnknownNameError, r'kind: "wrougt iron" .*\(nearest: "wrought iron"\)'),
    ],
)
def test_a_year_or_a_kind_without_a_strength(kind: str, year: int, error: type[InputError], message: str) -> None:
    with pytest.raises(error, match=message):
        by_year(kind, year)


def test_a_period_of_one_year_and_one_that_ends_before_it_begins() -> None:
    assert Period("steel", 1900, 1900, 1e8, fu=2e8, modulus=2e11, density=7850.0, source="one").last == 1900
    with pytest.raises(InputError, match=r"steel from 1900: ends before it begins, 1899"):
        Period("steel", 1900, 1899, 1e8, fu=2e8, modulus=2e11, density=7850.0, source="none")


def test_a_metal_that_no_period_holds() -> None:
    with pytest.raises(InputError, match=r"steel: no strength is known by the year built"):
        material_by_year((), "steel", 1900, today=2026)


def test_the_kinds_are_these() -> None:
    assert KINDS == ("steel", "wrought iron", "cast iron", "timber")
