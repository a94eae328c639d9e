"""A small invented bridge of the Alder valley with its width, its floor and its weights item by item, to ask and spoil.

Its trusses are those of ``cli_run.BY_JOINTS``, 6.4 m apart. Between the kerbs two of ``cli_run.CART`` fit side by side:
6.0 - 2 x 0.4 m leave 5.2 m for 1.9 + 1.2 + 1.9 m, and the middle of one keeps within +-1.65 m.
"""

from __future__ import annotations

from typing import TYPE_CHECKING, Any

from cli_run import BY_JOINTS, assert_refused, changed, movload, names_in, without, written

if TYPE_CHECKING:
    from pathlib import Path

_NOMINAL = {
    "tension = 200, compression = 150": "tension = 360, compression = 270",
    "tension = 180, compression = 40": "tension = 330, compression = 75",
    "tension = 180, compression = 140": "tension = 330, compression = 250",
    "tension = 90, compression = 60": "tension = 165, compression = 110",
}

_ACROSS = """\
[deck]
kind = "pony"
panel_points = ["L0", "L1", "L2", "L3"]
truss_spacing = 6.4
kerbs = [-3.0, 3.0]
clearance = 0.4

[floor.stringers]
z = [-2.4, -0.8, 0.8, 2.4]
weight = 0.5
permits = { moment = 60, shear = 90 }
nominal = { moment = 100, shear = 150 }
condition = "good"
system = "other"

[floor.floorbeams]
weight = 0.9
permits = { moment = 190, shear = 170 }
nominal = { moment = 340, shear = 300 }
condition = "good"
system = "floorbeams over 12 ft apart"

[floor.planks]
contact = 0.2
sharing = 0.7
permits = { moment = 12, shear = 60 }
nominal = { moment = 20, shear = 100 }
condition = "good"
system = "other"
timber = true

[permanent]
detail_allowance = "10 %"

[[permanent.items]]
title = "planks"
kind = "components"
thickness = 60
density = 800
across = "full width"

[[permanent.items]]
title = "gravel"
kind = "surfacing"
per_area = 0.4
across = [-2.5, 2.5]

[[permanent.items]]
title = "kerb and railing, left"
kind = "components"
line = 0.3
across = "left"

[[permanent.items]]
title = "kerb and railing, right"
kind = "components"
line = 0.3
across = "right"

[[permanent.items]]
title = "gauge post"
kind = "other"
points = { L1 = 0.8 }
across = 0

[rating]
impact = 0.3
surface = "minor"
traffic = 100
deflection = 400
"""


def _trusses() -> str:
    """Return joints, bearings and bars, with nominal strengths beside the permitted ones."""
    text = BY_JOINTS
    for permitted, nominal in _NOMINAL.items():
        line = f"permits = {{ {permitted} }}\n"
        state = 'condition = "fair"\nsystem = "riveted members"\n'
        text = changed(text, (line, f"{line}nominal = {{ {nominal} }}\n{state}"))
    for table in ("deck", "permanent", "rating"):
        text = without(text, table)
    return changed(text, ("Alder footpath", "Alder weir road"))


ACROSS = _trusses() + _ACROSS
SPACING = 6.4  # m between the trusses
ROOM = 1.65  # m to either side for the middle of the cart
FORTH = 45e3 + 20e3 * 0.6 / 3.3  # N on hanger U1-L1 toward +x: 45 kN over L1, 20 kN 2.7 m off in the 3.3 m panel
BACK = 45e3 + 20e3 * 0.4 / 3.1  # and toward -x, in the 3.1 m panel
HAND = 1e-12  # relative: round-off of a solve with a handful of unknowns


def row_in(read: Any, part: str, name: str, sense: str, *, crossing: int = 0) -> dict[str, Any]:
    """Return the only row of a document with these words."""
    (found,) = (
        row
        for row in read["rows"]
        if (row["part"], row["row"], row["sense"], row["crossing_number"]) == (part, name, sense, crossing)
    )
    one: dict[str, Any] = found
    return one


def hangers(read: Any, *, crossing: int = 0) -> list[float]:
    """Return the live pull on U1-L1 of the left and of the right truss [N], impact of 0.3 taken off."""
    left = row_in(read, "left truss", "U1-L1", "tension", crossing=crossing)
    alike = left["stands_for"] == "either truss"
    right = left if alike else row_in(read, "right truss", "U1-L1", "tension", crossing=crossing)
    return [left["live"] / 1.3, right["live"] / 1.3]


def share(z: float) -> float:
    """Return what of an axle at z reaches the left truss."""
    return 0.5 + z / SPACING


def assert_spoiled(folder: Path, text: str, *parts: str) -> None:
    """Check that a bridge file with a text is refused whatever is asked of its rating, and that nothing is written."""
    path = written(folder, text)
    for words in ((), ("--json", "--csv", folder / "new.csv"), ("--method", "lrfr", "--at", "centre line")):
        assert_refused(movload("rate", path, "h5", *words), *parts, place=path)
    assert names_in(folder) == {path.name}
