"""``movload start``: a commented file that reads back, prompts for what was left out, and never half a file."""

from __future__ import annotations

from typing import TYPE_CHECKING

import pytest
from cli_run import assert_refused, movload, names_in

if TYPE_CHECKING:
    from pathlib import Path

    from cli_run import Done

GIVEN = {"--form": "pratt", "--panels": "4x3.2", "--depths": "0 2 2.2 2 0", "--deck": "pony"}


def start(path: Path, **given: str) -> Done:
    """Run the command with the options given, the others as in GIVEN."""
    options = GIVEN | {f"--{name.replace('_', '-')}": value for name, value in given.items()}
    return movload("start", path, *(f"{name}={value}" for name, value in options.items()))


def test_it_writes_a_file_that_can_be_drawn_and_says_how(tmp_path: Path) -> None:
    path = tmp_path / "mill.toml"
    done = start(path, title="Alder mill")
    assert (done.code, done.err) == (0, "")
    assert done.out == f"wrote {path}; see it with: movload draw {path} --plot mill.png\n"
    drawn = movload("draw", path)
    assert drawn.out.startswith("Alder mill\n8 joints, 13 members, statically determinate; 12.800 m")
    assert 'Still to be filled ("?"): members."top chord".density' in drawn.out
    assert movload("influence", path).code == movload("sweep", path, "h5").code == 0


def test_it_asks_for_what_was_left_out(tmp_path: Path) -> None:
    path = tmp_path / "mill.toml"
    done = movload("start", path, stdin="pratt\n4x3.2\npony\n0 2 2.2 2 0\n")
    assert done.code == 0
    for question in (
        "Form",
        "Panel lengths from the left",
        "Depths at the panel points (5",
        "Deck (through, pony, deck)",
    ):
        assert question in done.out
    again = tmp_path / "again.toml"
    assert start(again).code == 0
    assert again.read_text() == path.read_text()


@pytest.mark.parametrize(
    ("form", "panels", "depths", "question"),
    [
        ("warren", "4x3.2", "2 2.2 2.2 2", "Depths at the middle of each panel (4): "),
        ("baltimore", "8x3.2", "0 4 4.4 4 0", "Depths at the main panel points, every second one (5; 0 = tapers"),
        ("k", "6x3.2", "0 4 4.4 4.6 4.4 4 0", "Depths at the panel points (7; 0 = tapers to a point): "),
    ],
)
def test_it_asks_for_the_depths_that_the_form_takes(
    tmp_path: Path, form: str, panels: str, depths: str, question: str
) -> None:
    path = tmp_path / "mill.toml"
    done = movload("start", path, "--form", form, "--panels", panels, "--deck", "through", stdin=f"{depths}\n")
    assert (done.code, done.err) == (0, "")
    assert question in done.out
    assert movload("draw", path).code == 0


def test_what_was_given_is_refused_before_depths_are_asked_for(tmp_path: Path) -> None:
    given = {"--form": "pratt", "--panels": "4xthree", "--deck": "pony"}
    done = movload("start", tmp_path / "mill.toml", *(word for pair in given.items() for word in pair))
    assert_refused(done, '--panels[0]: "three" is not a number with a unit')


def test_nobody_answers(tmp_path: Path) -> None:
    done = movload("start", tmp_path / "mill.toml", stdin="")
    assert done.code == 1
    assert "Traceback" not in done.err
    assert names_in(tmp_path) == set()


REFUSED = {
    "form": ({"form": "prat"}, '--form: "prat" is not known; choose one of "pratt", "howe"', '(nearest: "pratt")'),
    "no form": ({"form": ""}, '--form: "" is not known; choose one of'),
    "deck": ({"deck": "ponny"}, '--deck: "ponny" is not known', '(nearest: "pony")'),
    "middle": ({"panels": "3x3", "depths": "0 2 2 0"}, "--middle: ", 'must be stated: "falling"'),
    "middle, none there": ({"middle": "falling"}, "--middle: only a", "with 4 panels"),
    "middle, unknown": ({"panels": "3x3", "depths": "0 2 2 0", "middle": "fall"}, '(nearest: "falling")'),
    "no panels": ({"panels": ""}, "--panels: no length is typed"),
    "blank panels": ({"panels": "  "}, "--panels: no length is typed"),
    "panel of 0": ({"panels": "3 0 3 3"}, "--panels[1]: panel L1-L2 must be longer than 0 and finite, got 0 m"),
    "panel below 0": ({"panels": "3 -3 3 3"}, "--panels[1]: panel L1-L2", "got -3 m"),
    "panel nan": ({"panels": "3 nan 3 3"}, "--panels[1]: a finite number within 1e+18 in SI is asked for, got nan m"),
    "panel inf": ({"panels": "4xinf"}, "--panels[0]: a finite number within 1e+18 in SI is asked for, got inf m"),
    "panel 1e308": ({"panels": "4x1e308"}, "--panels[0]: a finite number within 1e+18 in SI", "got 1e+308 m"),
    "panel 1e999": ({"panels": "4x1e999"}, "--panels[0]: a finite number within 1e+18 in SI"),
    "panel 1e-300": ({"panels": "4x1e-300"}, "has no length"),
    "panel in kN": ({"panels": "4x3kN"}, '--panels[0]: "3kN" is a force; a length is asked for'),
    "panel, a word": ({"panels": "3 three 3 3"}, '--panels[1]: "three" is not a number with a unit'),
    "panel, endless": ({"panels": f"1/{'9' * 5000}in"}, "--panels[0]: "),
    "repeats of 0": ({"panels": "0x3"}, '--panels[0]: 1 to 1000 repeats may be asked for, got "0x3"'),
    "repeats": ({"panels": "1001x3"}, '--panels[0]: 1 to 1000 repeats may be asked for, got "1001x3"'),
    "repeats, endless": ({"panels": f"{'9' * 5000}x3"}, "--panels[0]: 1 to 1000 repeats may be asked for"),
    "twice a repeat": ({"panels": "4x3x3"}, '--panels[0]: "3x3": unit "x3" is not known for a length'),
    "comma at the end": ({"panels": "3,3,3,3,"}, '--panels[4]: "" is not a number with a unit'),
    "decimal commas": ({"panels": "3,2 3,2"}, "--panels[1]: "),
    "a depth fewer": ({"depths": "0 2 2 0"}, '--depths: form "pratt" needs one depth', "5 for 4 panels, got 4"),
    "inner depth of 0": ({"depths": "0 2 0 2 0"}, "--depths[2]: ", "since only an end may taper to a point; got 0 m"),
    "depth in ton": ({"depths": "0 2ton 2 2 0"}, '--depths[1]: "2ton": "ton" can mean three weights'),
    "length unit": ({"length_unit": "mtr"}, 'units.length: "mtr": unit "mtr" is not known', '(nearest: "m")'),
    "length unit kN": ({"length_unit": "kN"}, 'units.length: "kN" is a force; a length is asked for'),
    "force unit": ({"force_unit": "ton"}, 'units.force: "ton": "ton" can mean three weights'),
    "no title": ({"title": ""}, 'title: text that is not empty is asked for, got ""'),
    "open title": ({"title": "?"}, 'title: still holds "?"'),
    "two lines": ({"title": "a\nb"}, "title: must be one line without control characters"),
    "half a sign": ({"title": "\ud800"}, "title: text that can be written is asked for"),
}


@pytest.mark.parametrize(("given", "parts"), [(given, parts) for given, *parts in REFUSED.values()], ids=REFUSED)
def test_it_refuses_and_writes_nothing(tmp_path: Path, given: dict[str, str], parts: list[str]) -> None:
    assert_refused(start(tmp_path / "mill.toml", **given), *parts)
    assert names_in(tmp_path) == set()


@pytest.mark.parametrize(
    ("name", "message"),
    [("mill.txt", 'a bridge file ends in .toml, got ".txt"'), ("mill", 'got ""'), ("no/mill.toml", "does not exist")],
)
def test_it_writes_only_toml_where_there_is_a_folder(tmp_path: Path, name: str, message: str) -> None:
    assert_refused(start(tmp_path / name), message, place=tmp_path / name)
    assert names_in(tmp_path) == set()


SPELLINGS = [
    "3.2 3.2 3.2 3.2",
    "3.2,3.2,3.2,3.2",
    "2x3.2 2×3.2",
    "4x320cm",
    "3.2 m, 320 cm, 3200 mm, 3.2",
    "2 * 3.2, 2 x 3.2",
]


@pytest.mark.parametrize("panels", SPELLINGS)
def test_lengths_in_many_spellings(tmp_path: Path, panels: str) -> None:
    path = tmp_path / "mill.toml"
    assert start(path, panels=panels).code == 0
    assert "panels = [3.2, 3.2, 3.2, 3.2]" in path.read_text()


def test_feet_bring_kips_and_inches(tmp_path: Path) -> None:
    path = tmp_path / "mill.toml"
    done = start(path, panels="16'-1 1/2\",16,16,16", depths="0 7 7.5 7 0", length_unit="ft")
    assert done.code == 0
    text = path.read_text()
    for line in (
        'length = "ft"',
        'force = "kip"',
        'section = "in" ',
        "panels = [16.125, 16, 16, 16]",
        'area = "3 in2"',
        'modulus = "29000 ksi"',
    ):
        assert line in text
    assert '"490 lb/ft3" is common for steel' in text
    assert movload("draw", path).code == 0


@pytest.mark.parametrize("title", ['Alder "old" mill', "back\\slash", "Mühle 橋 😀", "# no comment", "x" * 3000, "'''"])
def test_any_title_reads_back(tmp_path: Path, title: str) -> None:
    path = tmp_path / "mill.toml"
    assert start(path, title=title).code == 0
    assert movload("draw", path, "--json").json()["title"] == title
