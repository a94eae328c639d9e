"""What a county engineer and a tester met across the deck: answers that must agree, and input that must be refused."""

from __future__ import annotations

import csv
from typing import TYPE_CHECKING

import pytest
from cli_run import CART, EXAMPLES, KETTLE_FORD, assert_refused, changed, movload, written

if TYPE_CHECKING:
    from pathlib import Path

HOLLIS_MILL, STAG_LEDGE, TANNER_GORGE, WITHY_ISLAND = (
    EXAMPLES / f"{name}.toml" for name in ("hollis_mill", "stag_ledge", "tanner_gorge", "withy_island")
)
EN = KETTLE_FORD.parents[1] / "movload" / "data" / "factor_sets" / "en.toml"
SHORT_TON = 2000 * 4.4482216152605  # N (NIST SP 811, B.8, from memory)


def _spoiled(folder: Path, source: Path, *pairs: tuple[str, str]) -> Path:
    """Return a copy of a file with some of its text changed."""
    return written(folder, changed(source.read_text(encoding="utf-8"), *pairs), "spoiled.toml")


def _after(text: str, head: str, first: str) -> list[str]:
    """Return the words of the first line after ``head`` that starts with ``first``."""
    lines = text[text.index(head) :].splitlines()
    return next(line.split() for line in lines if line.split()[:1] == [first])


@pytest.mark.xfail(reason="the column counts what would fit, not what was asked for", strict=True)
def test_one_abreast_is_said_to_be_one() -> None:
    asked = ["rate", HOLLIS_MILL, "type_3", "--abreast", "1"]
    assert "Up to 1 vehicle(s) side by side" in movload(*asked).out
    assert movload(*asked, "--json").json()["crossings"][0]["most_abreast"] == 1


def test_the_safe_weight_is_the_same_in_the_table_and_the_document() -> None:
    asked = ["rate", TANNER_GORGE, "ev3", "--method", "lrfr"]
    row = movload(*asked, "--json").json()["rows"][0]
    assert row["factor"] == pytest.approx(0.9136, abs=1e-4)  # as printed: M5-L5
    # W (RF - 0.3)/0.7 with W = 86 kip = 43 short tons (Khan 2010, p. 187): 37.69, which the table prints as 37.6
    assert "37.6 short tons" in movload(*asked).out
    assert row["safe_weight"] / SHORT_TON == pytest.approx(43 * (row["factor"] - 0.3) / 0.7, rel=1e-9)


@pytest.mark.xfail(reason="the picture's headline is the worst bar's RF though the floor governs", strict=True)
def test_the_picture_says_what_governs(tmp_path: Path) -> None:
    asked = ["rate", WITHY_ISLAND, "en_footbridge_service_vehicle", "--plot", tmp_path / "a.svg"]
    assert _after(movload(*asked).out, "crossing", "EN")[6] == "0.48"  # a stringer governs, the worst bar has 0.96
    assert "0.48" in (tmp_path / "a.svg").read_text(encoding="utf-8")


@pytest.mark.xfail(reason="the share holds the moment in metres, the ordinate is scaled to feet", strict=True)
def test_a_floorbeam_sum_in_feet_has_its_beam_at_ordinate_one() -> None:
    asked = ["rate", HOLLIS_MILL, "type_3", "--at", "0 ft", "--explain", "floorbeam L2 moment at S3"]
    heads = movload(*asked).out
    on_beam = _after(heads, "x ordinate", "2")  # the axle on L2 gives the beam all of itself
    wheels_at = 3.0  # ft, half of the gauge of 6 ft; trusses at +-10 ft, S3 at -1.625 ft
    # straight between the stringers at +-1.625 and +-4.875 ft: M at S3 of half an axle there, /20 ft
    near, far = (0.5 * (10 - 1.625) ** 2 / 20, 0.5 * (10 - 4.875) * (10 - 1.625) / 20)
    own = 0.5 * (10 - 1.625) * (10 + 1.625) / 20
    part = (wheels_at - 1.625) / 3.25
    moment = (1 - part) * (own + near) + part * 2 * 0.5 * (far + 0.5 * (10 - 4.875) * (10 + 1.625) / 20)
    assert f"{moment:.4f}" in on_beam or f"{moment:+.5f}" in on_beam
    assert "+3.28084" not in on_beam


@pytest.mark.parametrize("vehicle", ["h5", "included"])
@pytest.mark.xfail(reason="the column holds the bridge's impact though none is added to this vehicle", strict=True)
def test_the_impact_shown_is_the_impact_taken(tmp_path: Path, vehicle: str) -> None:
    if vehicle == "included":
        text = changed(CART, ('kind = "farm"', 'kind = "farm"\nimpact = "included"'))
        vehicle = str(written(tmp_path, text, "cart.toml"))
    for row in movload("rate", KETTLE_FORD, vehicle, "--json").json()["rows"]:
        if row["live"]:
            assert row["impact"] == max(row["placement"]["impact"]), (row["part"], row["row"])


@pytest.mark.xfail(reason="rows of two places differ only in a number", strict=True)
def test_the_csv_says_where_and_how_fast(tmp_path: Path) -> None:
    asked = ["rate", KETTLE_FORD, "h5", "--at", "anywhere", "--at", "centre line", "--speed", "8 km/h"]
    assert movload(*asked, "--csv", tmp_path / "a.csv").code == 0
    with (tmp_path / "a.csv").open(newline="", encoding="utf-8") as lines:
        assert any("centre line" in str(row.values()) for row in csv.DictReader(lines))


@pytest.mark.xfail(reason="an effect's name is asked for without its sense, which the table prints behind it", strict=True)
def test_a_row_may_be_copied_from_the_table() -> None:
    assert movload("rate", KETTLE_FORD, "h5", "--explain", "L3-L4 tension").code == 0


@pytest.mark.parametrize("words", [["rate", "--explain", "floorbeam L2 moment at S3"], ["influence"]])
@pytest.mark.xfail(reason="a narrow table breaks numbers in two", strict=True)
def test_no_number_is_broken_at_80_columns(monkeypatch: pytest.MonkeyPatch, words: list[str]) -> None:
    from movload.report import table

    monkeypatch.setattr(table, "WIDTH", 80, raising=False)
    command, *more = words
    done = _narrow(monkeypatch, command, HOLLIS_MILL, *(["type_3"] if command == "rate" else []), *more)
    # a fraction that goes on alone in a line below stands right under its own number's end
    assert not [line for line in done.splitlines() if line.strip() and set(line) <= set(" 0123456789")]


def _narrow(monkeypatch: pytest.MonkeyPatch, *words: object) -> str:
    """Return what a command prints in a window of 80 columns."""
    import os
    import subprocess
    import sys

    monkeypatch.setenv("COLUMNS", "80")
    done = subprocess.run(
        [sys.executable, "-m", "movload", *map(str, words)], capture_output=True, check=True, env=dict(os.environ)
    )
    return done.stdout.decode("utf-8")


@pytest.mark.xfail(reason="the sheet of a vehicle leaves its left shares out", strict=True)
def test_a_vehicle_sheet_shows_what_its_left_wheels_carry(tmp_path: Path) -> None:
    cart = written(tmp_path, changed(CART, ("load = 45,", "load = 45, left = 0.7,")), "cart.toml")
    assert "0.7" in movload("vehicles", cart).out


@pytest.mark.parametrize("command", ["sweep", "rate"])
@pytest.mark.xfail(reason="an end so far off that an axle is lost in round-off: IndexError", strict=True, raises=IndexError)
def test_an_abutment_beyond_all_reason_gives_one_line(tmp_path: Path, command: str) -> None:
    path = _spoiled(tmp_path, STAG_LEDGE, ("right_abutment = 30.55", "right_abutment = 1e17"))
    assert_refused(movload(command, path, "hs20", *(["--method", "en"] if command == "rate" else [])), "right_abutment")


@pytest.mark.parametrize("contact", ["0.70", "550"])  # the stringers stand 0.65 m apart; 550 is mm in a file in metres
@pytest.mark.xfail(reason="a contact longer than the plank's span thins the wheel out without end", strict=True)
def test_a_contact_longer_than_the_planks_span(tmp_path: Path, contact: str) -> None:
    path = _spoiled(tmp_path, KETTLE_FORD, ("contact = 0.55", f"contact = {contact}"))
    assert_refused(movload("rate", path, "h5"), "floor.planks.contact", place=path)


@pytest.mark.parametrize("left", ["", "tension = 1.0"])
@pytest.mark.xfail(reason="a resistance factor that is left out counts as 1, and the set is named as its source", strict=True)
def test_a_set_without_a_resistance_factor_is_refused(tmp_path: Path, left: str) -> None:
    typed = "tension = 1.0, compression = \"1/1.10\", moment = 1.0, hogging = 1.0, shear = 1.0"
    path = _spoiled(tmp_path, EN, (typed, left))
    done = movload("rate", KETTLE_FORD, "tractor_slurry_tanker", "--method", path)
    assert_refused(done, "levels[0].resistance", "compression", place=path)


REFUSED = {
    "a moment below 0": (KETTLE_FORD, "moment = 98,", "moment = -98,", "got -98000 N m"),
    "a place twice": (KETTLE_FORD, "", "", "anywhere"),
}  # fmt: skip


@pytest.mark.xfail(reason='says "N or N m"', strict=True)
def test_a_negative_moment_has_its_unit(tmp_path: Path) -> None:
    path = _spoiled(tmp_path, KETTLE_FORD, ("moment = 98,", "moment = -98,"))
    assert_refused(movload("rate", path, "h5"), "permits.moment", "got -98000 N m", place=path)


@pytest.mark.parametrize(
    ("words", "parts"),
    [
        (["--at", "anywhere", "--at", "anywhere"], ["--at"]),
        (["--at", "centre line", "--wander", "5 m"], ["--wander"]),
        (["--speed", "1e30 mph"], ["--speed"]),
        (["--speed", "-8 mph"], ["--speed", "-8 mph"]),
        (["--abreast", "-1"], ["--abreast"]),
    ],
    ids=["a place twice", "straying over the kerbs", "faster than light", "backwards", "fewer than none"],
)
@pytest.mark.xfail(reason="accepted, or refused without naming the option", strict=True)
def test_options_beyond_the_road_are_refused(words: list[str], parts: list[str]) -> None:
    assert_refused(movload("rate", KETTLE_FORD, "h5", *words), *parts)


@pytest.mark.xfail(reason='speaks of +1 and -1; the file says "+x" and "-x"', strict=True)
def test_no_heading_at_all(tmp_path: Path) -> None:
    cart = written(tmp_path, changed(CART, ('kind = "farm"', 'kind = "farm"\nheadings = []')), "cart.toml")
    assert_refused(movload("rate", KETTLE_FORD, cart), "headings", '"+x"', place=cart)
