"""Spoiled sections, materials and parts through the command line: one line with file, key, rule, value, nearest name.

``tests/files/test_spoiled_sections.py`` and ``test_spoiled_makes.py`` have every rule; here is what each command does.
"""

from __future__ import annotations

from typing import TYPE_CHECKING

import pytest
from cli.across import assert_spoiled
from cli_run import assert_refused, changed, movload, written
from files.made import MADE

if TYPE_CHECKING:
    from pathlib import Path

LOSS = '{ where = "middle", fraction = 0.2, truss = "left", bar = "L2-L1" }'

SPOILED = {
    "thickness": (
        "flange = 11, x = -140", "flange = 90, x = -140",
        'sections."top chord".pieces[0].flange: must be below half the depth, 0.09 m, got 0.09 m',
    ),
    "loss": (
        "amount = 3", "amount = 9",
        'members."top chord".losses[0]: start end: ', "losses of 0.009 m together are more than the 0.008 m of metal",
    ),
    "holes": (
        "gauge = 60", "gauge = 160",
        'sections."top chord".holes[0]: hole in left channel: web: holes 0.181 m wide over all do not fit its width',
    ),
    "K": ("k_x = 1.0", "k_x = 0", 'members."top chord".k_x: must be above 0 and at most 10, got 0'),
    "unbraced length": (
        '"4.2 m"', "-4.2",
        'members."top chord".unbraced_y: must be above 0 and at most 200 m, got -4.2 m',
    ),
    "before iron": ("1887", "1600", "materials.iron.built: nothing was built of wrought iron before 1779, got 1600"),
    "after today": ("1887", "2999", "materials.iron.built: nothing is built yet after "),
    "section": (
        'section = "rod"', 'section = "rood"',
        'members."bottom chord".section: "rood" is not in [sections] (nearest: "rod")',
    ),
    "material": (
        'material = "oak"', 'material = "oack"',
        'floor.planks.material: "oack" is not in [materials] (nearest: "oak")',
    ),
    "nobody's section": ('section = "rod"', 'section = "post"', "sections.rod: is used by no part"),
    "nobody's material": ('material = "oak"', 'material = "steel"', "materials.oak: is used by no part"),
    "shape": (
        '"threaded rod"', '"threded rod"',
        'sections.rod.shape: "threded rod" is no shape', '(nearest: "threaded rod")',
    ),
    "part": (
        'part = "flange" }', 'part = "flnage" }',
        'members."top chord".losses[1]: all along: ', '"flnage" is no part of the channel',
    ),
    "piece": (
        'piece = "left channel", part', 'piece = "left chanel", part',
        'members."top chord".losses[0]: start end: ', '(nearest: "left channel")',
    ),
    "sizes": (
        "diameter = 32\nroot = 27", "width = 32\nthickness = 27",
        'sections.rod: "width" is not a size of a threaded rod, which has diameter, root',
    ),
    "missing size": ("root = 27\n", "", "sections.rod.root: is missing: a threaded rod needs diameter, root"),
    "year and yield": (
        "built = 1887", 'built = 1887\nfy = "200 MPa"',
        "materials.iron.fy: is given twice: typed, and by the year built",
    ),
    "bar": (
        LOSS, LOSS.replace("L2-L1", "U1-U2"),
        'losses[0].bar: "U1-U2" is no bar of this group: L0-L1, L1-L2, L2-L3',
    ),
    "truss": (LOSS, LOSS.replace("left", "middle"), 'losses[0].truss: "left" or "right" is asked for, got "middle"'),
    "half held": ("k_y = 1\nk_z = 1\n", "", 'members."end posts".k_y: is needed beside unbraced_x'),
    "half made": ('section = "rod"\n', "", 'members."bottom chord".section: is needed beside material'),
    "made twice": (
        'section = "rod"\n', 'section = "rod"\narea = 3\n',
        'members."bottom chord".area: is given twice: typed',
    ),
}  # fmt: skip


@pytest.mark.parametrize("what", SPOILED)
def test_spoiled_sections_materials_and_parts(tmp_path: Path, what: str) -> None:
    old, new, *parts = SPOILED[what]
    assert_spoiled(tmp_path, changed(MADE, (old, new)), *parts)


def test_the_unspoiled_file_is_taken(tmp_path: Path) -> None:
    """Or nothing above would prove anything."""
    path = written(tmp_path, MADE)
    for words in (("draw", path), ("influence", path)):
        assert movload(*words).code == 0


def test_what_still_holds_a_placeholder_is_drawn_and_not_rated(tmp_path: Path) -> None:
    path = written(tmp_path, changed(MADE, ('fy = "230 MPa"', 'fy = "?"'), ("k_x = 1.0", 'k_x = "?"')))
    assert movload("draw", path).code == 0
    done = movload("rate", path, "h5")
    assert_refused(done, 'materials.steel.fy (still holds "?")', 'members."top chord".k_x (still holds "?")')


def test_what_the_truss_needs_names_its_place(tmp_path: Path) -> None:
    path = written(tmp_path, changed(MADE, ("root = 27", 'root = "?"')))
    assert_refused(movload("draw", path), 'sections.rod.root: still holds "?" and is needed here', place=path)
