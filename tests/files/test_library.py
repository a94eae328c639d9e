"""Shipped vehicles by name, in any spelling, and vehicle files by path."""

from __future__ import annotations

from typing import TYPE_CHECKING

import pytest
from cli_run import CART, ROOT, written

from movload.errors import InputError, UnknownVehicleError
from movload.files.library import read_vehicle, vehicle_folder, vehicle_names

if TYPE_CHECKING:
    from pathlib import Path


def test_the_library_is_the_folder() -> None:
    assert vehicle_names() == sorted(path.stem for path in (ROOT / "vehicles").glob("*.toml"))
    assert vehicle_folder().name == "vehicles"


@pytest.mark.parametrize("name", vehicle_names())
def test_every_vehicle_is_found_by_its_name_in_any_spelling(name: str) -> None:
    title = read_vehicle(name).title
    for spelled in (name.upper(), name.replace("_", " "), name.replace("_", "-"), f" {name} ", name.replace("_", "")):
        assert read_vehicle(spelled).title == title
    assert read_vehicle(vehicle_folder() / f"{name}.toml").title == title
    assert read_vehicle(str(vehicle_folder() / f"{name}.toml")).title == title


def test_no_two_names_are_spelled_alike() -> None:
    folded = ["".join(sign for sign in name if sign.isalnum()) for name in vehicle_names()]
    assert len(set(folded)) == len(folded)


def test_a_path_is_a_file_whatever_it_ends_in(tmp_path: Path) -> None:
    assert read_vehicle(written(tmp_path, CART, "cart")).title == "Alder hay cart"
    assert read_vehicle(str(tmp_path / "cart")).title == "Alder hay cart"


@pytest.mark.parametrize(
    ("name", "message"),
    [
        ("hs21", r'^vehicle "hs21" is not in the library and is no \.toml file; .* \(nearest: "hs20"\)$'),
        ("hs20.toml", r'^hs20\.toml: no such file \(nearest: "hs20"\)$'),
        ("no/hs20", r'^no/hs20: no such file \(nearest: "hs20"\)$'),
        ("", r'^vehicle "" is not in the library'),
    ],
)
def test_an_unknown_vehicle_and_the_nearest(name: str, message: str) -> None:
    with pytest.raises(UnknownVehicleError, match=message) as caught:
        read_vehicle(name)
    assert isinstance(caught.value, LookupError)


def test_a_file_beside_a_missing_one_is_nearer_than_the_library(tmp_path: Path) -> None:
    path = written(tmp_path, CART, "hs_cart.toml")
    with pytest.raises(UnknownVehicleError, match=rf'no such file \(nearest: "{path}"\)$'):
        read_vehicle(tmp_path / "hs_crat.toml")


def test_a_library_vehicle_names_its_file_when_something_is_wrong(
    tmp_path: Path, monkeypatch: pytest.MonkeyPatch
) -> None:
    written(tmp_path, CART.replace("load = 45", "load = -45"), "cart.toml")
    monkeypatch.setattr("movload.files.library.vehicle_folder", lambda: tmp_path)
    with pytest.raises(InputError, match=r"^vehicles/cart\.toml: axles\[1\]\.load: a load must be a finite number"):
        read_vehicle("cart")
