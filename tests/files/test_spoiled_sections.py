"""Sections and materials of a bridge file spoiled one by one: each is refused at its place, in one line."""

from __future__ import annotations

import copy
import math
import random
import re
import tomllib
from typing import Any

import pytest
from cli_run import changed
from files.made import MADE

from movload.errors import InputError, MovloadError
from movload.files.read import _bridge, bridge_from
from movload.files.schema.bridge import BridgeFile
from movload.files.schema.checked import checked
from movload.files.toml import without_placeholders

STEEL = 'fu = "380 MPa"\nmodulus = 200\ndensity = 7850\n'
CHANNEL = "depth = 180, width = 70, web = 8, flange = 11, x = -140"
OAK = 'product = "sawn"\n'
HOLE = 'part = "web", number = 2, punched = true, gauge = 60'
ROD = 'shape = "threaded rod"\ndiameter = 32\nroot = 27'

SECTIONS = {
    "thick flange": (
        CHANNEL, CHANNEL.replace("11", "90"),
        '"top chord".pieces[0].flange: must be below half the depth',
    ),
    "thick leg": (
        "thickness = 6, x = 4", "thickness = 25, x = 4",
        "angles.pieces[0].thickness: must be below half the",
    ),
    "negative": (CHANNEL, CHANNEL.replace("180", "-180"), '"top chord".pieces[0].depth: must be above 0, got -0.18 m'),
    "zero": ("root = 27", "root = 0", "rod.root: must be above 0, got 0 m"),
    "metres": (
        "root = 27", 'root = "27 m"',
        "rod.root: beyond any cross-section's, 0.0001 to 20 m is asked for, got 27",
    ),
    "wrong shape": ('"threaded rod"', '"threded rod"', 'rod.shape: "threded rod" is no shape: angle, channel, I, rect'),
    "wrong size": (
        ROD, 'shape = "round bar"\nwidth = 32\n',
        'rod: "width" is not a size of a round bar, which has diameter',
    ),
    "near size": (
        "root = 27", "rooot = 27",
        'rod: "rooot" is not a size of a threaded rod, which has diameter, root (n',
    ),
    "no size": ("root = 27\n", "", "rod.root: is missing: a threaded rod needs diameter, root"),
    "an I": ("width = 110\nweb = 8\n", "width = 110\n", "joist.web: is missing: an I needs depth, width, web, flange"),
    "no shape": (
        'shape = "angle", first_leg = 60, second_leg = 50, thickness = 6, x = 4', "x = 4",
        "angles.pieces[0].shape: is missing",
    ),
    "nothing": (ROD, "", "rod: is said by its pieces, by one shape, or by area, r_x and r_y; none is there"),
    "two ways": (
        "area = 1800", 'area = 1800\nshape = "I"',
        "post: is said in one way: pieces, shape or area; got shape",
    ),
    "half a way": ("r_y = 30\n", "", "post.r_y: is missing: area, r_x and r_y go together"),
    "of another way": ("r_y = 30", "r_y = 30\nholes = []", 'post: key "holes" does not go with area'),
    "of no way": ("sharing = 1.15", "sharring = 1.15", '"top chord": key "sharring" is not known (nearest: "sharing")'),
    "size beside pieces": ("sharing = 1.15", "depth = 3", '"top chord": key "depth" does not go with pieces'),
    "edges": ("clear = 240", "edges = 3", '"top chord".pieces[2].edges: 1 or 2 is asked for, got 3'),
    "edges, said": ("clear = 240", "edges = true", '"top chord".pieces[2].edges: a whole number up to 99 is asked'),
    "turn": ("clear = 240", "turn = nan", '"top chord".pieces[2].turn: must be a finite number, got nan degrees'),
    "wide clear": ("clear = 240", "clear = 300", '"top chord".pieces[2].clear: must be at most its width, 0.28 m'),
    "one name": (
        'mirror = true },\n  { shape = "plate"', 'name = "left channel", mirror = true },\n  { shape = "plate"',
        'sections."top chord".pieces: two pieces are named "left channel"',
    ),
    "in one place": (
        "x = 140, mirror = true", "x = -140",
        '"top chord": channel 2: "left channel" and "channel 2" lie',
    ),
    "wide holes": (
        HOLE, HOLE.replace("60", "160"),
        '"top chord".holes[0]: hole in left channel: web: holes 0.181 m wide',
    ),
    "hole of nothing": (
        HOLE, HOLE.replace("2", "0"),
        '"top chord".holes[0].number: at least 1 hole is in a line, got 0',
    ),
    "half a hole": (HOLE, HOLE.replace("2", "1.5"), "holes[0].number: a whole number up to 99 is asked for, got 1.5"),
    "hole nowhere": (HOLE, 'part = "wbe"', '"top chord".holes[0].part: "wbe" is no part that can be holed'),
    "hole in no piece": ('piece = "plate"', 'piece = "plaet"', '"plaet" is no piece of the section (nearest: "plate")'),
    "stagger alone": (HOLE, 'part = "web", stagger = 40', "holes[0].stagger: a stagger of 0.04 m needs a gauge and at"),
    "sharing": ("sharing = 1.15", "sharing = 0.9", '"top chord".sharing: worst bar over mean is at least 1, got 0.9'),
    "lag": ("shear_lag = 0.85", "shear_lag = 85", '"top chord".shear_lag: U is above 0 and at most 1, got 85'),
    "net": ("net = 1500", "net = 1900", "post.net: the net area is at most the gross, 0.0018 m2, got 0.0019 m2"),
    "unit": ('"4 cm4"', '"4 cm3"', 'post.torsion: "4 cm3" is a section modulus; a torsion constant is asked for, e.g.'),
    "not used": ('section = "rod"', 'section = "post"', "sections.rod: is used by no part"),
}  # fmt: skip

MATERIALS = {
    "before iron": (
        "built = 1887", "built = 1600",
        "iron.built: nothing was built of wrought iron before 1779, got 1600",
    ),
    "to come": ("built = 1887", "built = 2999", "iron.built: nothing is built yet after "),
    "no year": ("built = 1887", 'built = "1887"', 'iron.built: a year of four digits is asked for, got "1887"'),
    "year and yield": (
        "built = 1887", 'built = 1887\nfy = "200 MPa"',
        "iron.fy: is given twice: typed, and by the year",
    ),
    "year of timber": (OAK, "built = 1900\n" + OAK, "oak.modulus: is given twice: typed, and by the year built"),
    "kind": (
        '"wrought iron"', '"wrougt iron"',
        'iron.kind: "wrougt iron" is not one of steel, wrought iron, cast iron,',
    ),
    "no fu": (
        STEEL, "modulus = 200\ndensity = 7850\n",
        "steel.fu: is missing: steel needs fy, fu, modulus, density, sou",
    ),
    "no source": ('source = "two coupons of 1998, invented"\n', "", "steel.source: is missing"),
    "fu below": ('"380 MPa"', '"180 MPa"', "steel.fu: the ultimate stress is at least fy, 2.3e+08 Pa, got 1.8e+08 Pa"),
    "bare yield": (
        '"230 MPa"', "230",
        'steel.fy: a stress (say its unit: "230 MPa") of 1e+06 to 1.5e+09 Pa is asked for',
    ),
    "bare modulus": (
        "modulus = 200\ndensity = 7850\nsource", "modulus = 2e5\ndensity = 7850\nsource",
        'steel.modulus: a modulus (say its unit: "200 GPa") of 1e+08 to 1e+12 Pa is asked for, got 2e+14 Pa',
    ),
    "bare stress": (
        '"8.5 MPa"', "8.5",
        'oak.stresses.bending: a stress (say its unit: "8.5 MPa") of 10000 to 4e+07 Pa',
    ),
    "density": (
        "density = 800\nsource", "density = 8e5\nsource",
        "oak.density: a density of 50 to 25000 kg/m3 is asked",
    ),
    "steel's timber": (STEEL, f"{STEEL}treated = true\n", "steel.treated: is a timber's, and steel is none"),
    "timber's yield": (OAK, f'{OAK}fy = "200 MPa"\n', "oak.fy: a timber has reference stresses instead, got 2e+08 Pa"),
    "product": ('"sawn"', '"swan"', 'oak.product: "swan" is not one of sawn, glued laminated (nearest: "sawn")'),
    "stress": ("{ bending =", "{ bendnig =", 'oak.stresses: key "bendnig" is not known (nearest: "bending")'),
    "factor": ("Cr = 1.0", "Cr = 0", "oak.factors.bending.Cr: must be a finite number above 0, got 0"),
    "duration": (
        '"two months"', '"two moths"',
        'oak.durations[0]: "two moths" is not one of permanent, ten years, two',
    ),
    "not used": ('material = "oak"', 'material = "steel"', "materials.oak: is used by no part"),
}  # fmt: skip

ALL = {f"section: {what}": SECTIONS[what] for what in SECTIONS} | {
    f"material: {what}": MATERIALS[what] for what in MATERIALS
}


@pytest.mark.parametrize("what", ALL)
def test_what_cannot_be_is_refused_at_its_place(what: str) -> None:
    old, new, said = ALL[what]
    with pytest.raises(InputError, match=re.escape(said)) as caught:
        bridge_from(changed(MADE, (old, new)), "b.toml")
    assert str(caught.value).startswith("b.toml: ")


WRONG: list[object] = [
    0, 1, -1, 0.5, 17.0, 1e-300, 5e-324, 1e17, 1e19, 1e308, 10**400, math.nan, math.inf, True, False, "", " ", "?", "a",
    "1 mm", "-2 mm", "3 kN", "1e300 m", "30 %", "x" * 300, "\x1b", [], [0], [1, 2], ["c", "c"], [{}], [[1]], {},
    {"a": 1}, "left", "timber", "plate", "cast iron", 1800, 2999, "web", "top chord", "joint to joint", "held", "rod",
]  # fmt: skip
GONE = object()


def places(data: Any) -> list[tuple[Any, ...]]:
    """Return the path to everything within some data."""
    items = data.items() if isinstance(data, dict) else enumerate(data) if isinstance(data, list) else ()
    return [path for key, value in items for path in ((key,), *((key, *rest) for rest in places(value)))]


def test_no_spoiled_table_leaves_a_traceback() -> None:
    """Each place of every table of a part takes a wrong value, or goes; when this was written, each of WRONG."""
    dice, whole = random.Random("sections"), tomllib.loads(MADE)  # noqa: S311  # nothing here is a secret
    paths = [path for path in places(whole) if path[0] in {"sections", "materials", "members", "floor"}]
    said = [refusal(whole, path, wrong) for path in paths for wrong in (dice.choice(WRONG), GONE)]
    refused = [one for one in said if one is not None]
    assert all(one.place and "\n" not in str(one) for one in refused)
    assert len(refused) > len(paths)


def refusal(whole: Any, path: tuple[Any, ...], wrong: object) -> MovloadError | None:
    """Return what a file is refused with when one of its places holds a wrong value, or None when it is read."""
    data = copy.deepcopy(whole)
    within: Any = data
    for key in path[:-1]:
        within = within[key]
    if wrong is GONE:
        del within[path[-1]]
    else:
        within[path[-1]] = wrong
    try:
        kept, missing = without_placeholders(data)
        table, units = checked(BridgeFile, kept)
        _bridge(table, units, missing, "b")
    except MovloadError as error:
        return error
    return None
