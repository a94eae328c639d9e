"""Shipped names to files: the vehicle library."""

from __future__ import annotations

from functools import cache
from pathlib import Path
from typing import TYPE_CHECKING

from movload.errors import UnknownNameError, UnknownVehicleError, nearest_name
from movload.files.read import vehicle_from
from movload.files.toml import read_text

if TYPE_CHECKING:
    from movload.traffic.loading import Loading


@cache
def vehicle_folder() -> Path:
    """Return the folder of shipped vehicles: inside an installed package, or beside it in a checkout."""
    package = Path(__file__).resolve().parent.parent
    inside = package / "vehicles"
    return inside if inside.is_dir() else package.parent / "vehicles"


def vehicle_names() -> list[str]:
    """Return the names of all shipped vehicles."""
    return sorted(path.stem for path in vehicle_folder().glob("*.toml"))


def read_vehicle(vehicle: str | Path) -> Loading:
    """Return a vehicle by its library name or from its file.

    A name is read without regard to case, spaces and hyphens: "HS20", "type 3-3". Anything that ends in .toml or
    holds a path separator is a file.

    Raises
    ------
    UnknownVehicleError
        Neither in the library nor a file; the nearest name is given.
    InputError
        The file cannot be read, or something in it is wrong.
    """
    text = str(vehicle)
    if is_file_name(vehicle):
        return _from_file(Path(vehicle))
    names = {folded(name): name for name in vehicle_names()}
    found = names.get(folded(text))
    if found is None:
        raise UnknownVehicleError(
            f'vehicle "{text}" is not in the library and is no .toml file; "movload vehicles" lists them',
            nearest=nearest_name(text, names.values()),
        )
    path = vehicle_folder() / f"{found}.toml"
    return vehicle_from(read_text(path), f"vehicles/{path.name}")


def _from_file(path: Path) -> Loading:
    """Return the vehicle in a file; a file that is not there may be meant for one of the library."""
    try:
        text = read_text(path)
    except UnknownNameError as error:
        near = error.nearest or nearest_name(path.stem, vehicle_names())
        raise UnknownVehicleError(error.rule, place=error.place, nearest=near) from None
    return vehicle_from(text, str(path))


def is_file_name(name: str | Path) -> bool:
    """Return whether a file is meant and not a shipped name."""
    text = str(name)
    return isinstance(name, Path) or text.lower().endswith(".toml") or "/" in text or "\\" in text or "\0" in text


def folded(name: str) -> str:
    """Return a name without case, spaces, hyphens and underscores."""
    return "".join(character for character in name.casefold() if character.isalnum())
