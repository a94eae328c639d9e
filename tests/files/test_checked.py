"""Where in a file something is wrong: every step that the file has is named, whatever joints and groups are called."""

from __future__ import annotations

import re
import tomllib
from typing import Any

import pytest
from cli_run import BY_JOINTS, CART

from movload.errors import InputError
from movload.files.schema.bridge import BridgeFile
from movload.files.schema.checked import checked
from movload.files.schema.vehicle import VehicleFile
from movload.files.toml import written_key

# What pydantic calls kinds of values, and keys, in the places it gives; a joint may be called so too.
NAMES = (
    "float", "SupportTable", "tuple[float,float]", "literal['pinned']", "[key]", "U[1]",
    "function-after[_one_kind(), SupportTable]", "area", "settlement", "L3",
)  # fmt: skip
WRONG: dict[str, tuple[str, Any]] = {
    "joints.{}": ("a list is asked for", {"joints": 3}),
    "joints.{}[1]": ('"much" is not a number', {"joints": [0, "much"]}),
    "supports.{}": ('key "settled" is not known (nearest: "settlement")', {"supports": {"settled": 1}}),
    "supports.{}.slides": ("a number is asked for", {"supports": {"slides": "0"}}),
    "supports.{}.settlement": ('"much" is not a number', {"supports": {"slides": 0, "settlement": "much"}}),
    "members.{}": ("a table of keys is asked for", {"members": 3}),
    "members.{}.area": ("is missing", {"members": {"modulus": 200}}),
    "members.{}.modulus": ('"much" is not a number', {"members": {"area": 1, "modulus": "much"}}),
    "members.{}.bars[1]": (
        "text in quotes is asked for",
        {"members": {"area": 1, "modulus": 200, "bars": ["U1-U2", 3]}},
    ),
    "members.{}.permits.tension": (
        "is a length; a force is asked for",
        {"members": {"area": 1, "modulus": 200, "permits": {"tension": "1 m"}}},
    ),
}


@pytest.mark.parametrize("name", NAMES)
@pytest.mark.parametrize("place", WRONG)
def test_a_name_stays_in_the_place_whatever_it_is(place: str, name: str) -> None:
    said, wrong = WRONG[place]
    data: Any = tomllib.loads(BY_JOINTS)
    for table, value in wrong.items():
        data[table] = {name: value}
    with pytest.raises(InputError, match=re.escape(said)) as caught:
        checked(BridgeFile, data)
    assert caught.value.place == place.format(written_key(name))


def test_pydantics_own_words_are_in_no_place() -> None:
    """A key that is no text for a name, and a bearing that is tried as two kinds."""
    data: Any = tomllib.loads(BY_JOINTS)
    data["joints"]["U\n1"] = [3.1, 2.2]
    with pytest.raises(InputError, match="must be one line without control characters") as caught:
        checked(BridgeFile, data)
    assert caught.value.place == 'joints."U\n1"'
    data = tomllib.loads(BY_JOINTS)
    data["supports"]["U\n1"] = data["supports"].pop("L3")
    with pytest.raises(InputError, match="must be one line without control characters") as caught:
        checked(BridgeFile, data)
    assert caught.value.place == 'supports."U\n1"'


@pytest.mark.parametrize(
    ("key", "value", "place"),
    [
        ("load", "much", "axles[1].load"),
        ("after", "much", "axles[1].after"),
        ("after", [4, "much"], "axles[1].after"),
        ("gauge", True, "axles[1].gauge"),
        ("float", 1, "axles[1]"),
    ],
)
def test_a_place_in_a_vehicle(key: str, value: object, place: str) -> None:
    data: Any = tomllib.loads(CART)
    data["axles"][1][key] = value
    with pytest.raises(InputError, match=r"is not a number|is asked for|is not known") as caught:
        checked(VehicleFile, data)
    assert caught.value.place == place
