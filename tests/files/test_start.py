"""The starter text: it reads back for every form, asks for what is missing by place, and rates once it is filled."""

from __future__ import annotations

import re
from typing import Any

import numpy as np
import pytest
from numpy.testing import assert_allclose

import movload
from movload.bridge.layout import DECKS, FORMS, Layout, lay_out
from movload.errors import InputError, MissingDataError
from movload.files.factor_sets import read_factor_set
from movload.files.read import bridge_from
from movload.files.start import depths_question, lengths_from, starter_text
from movload.units import UnitSystem

METRIC, US = UnitSystem("m", "kN", "mm"), UnitSystem("ft", "kip", "in")
COUNTS = {"pratt": 5, "howe": 4, "warren": 5, "warren with verticals": 4, "k": 6, "baltimore": 8}
ANSWERS = {
    "density": '"7850 kg/m3"', "tension": '"400 kN"', "compression": '"300 kN"', "truss_spacing": '"4.6 m"',
    "kerbs": '["-1.9 m", "1.9 m"]', "clearance": '"0.35 m"', "deck": '"4 kN/m"', "detail_allowance": '"15 %"',
    "impact": '"30 %"',
}  # fmt: skip


def layout(form: str, deck: str) -> Layout:
    """Return a layout of a form with unequal panels, of lengths that no few decimals hold."""
    count = COUNTS[form]
    panels = 3.0 + np.sin(np.arange(count) * 1.9) / 3
    size = {"warren": count, "baltimore": count // 2 + 1}.get(form, count + 1)
    depths = 2.9 + np.sin(np.arange(size)) / 7
    if form != "warren":
        depths[[0, -1]] = 0.0
    return Layout(form, panels, depths, deck=deck, middle="falling" if form == "pratt" else None)


def filled(text: str) -> str:
    """Return a starter with every "?" outside comments answered."""
    for name, answer in ANSWERS.items():
        text = re.sub(rf'(?m)^([^#\n]*\b{name} = )"\?"', rf"\g<1>{answer}", text)
    return text


@pytest.mark.parametrize("units", [METRIC, US], ids=["metric", "US"])
@pytest.mark.parametrize("deck", DECKS)
@pytest.mark.parametrize("form", FORMS)
def test_every_form_reads_back(form: str, deck: str, units: UnitSystem) -> None:
    begun = layout(form, deck)
    bridge = bridge_from(starter_text("A bridge", begun, units), "begun.toml")
    laid_out = lay_out(begun)
    assert list(bridge.truss.joints) == list(laid_out.joints)
    assert [member.name for member in bridge.truss.members] == [f"{bar.start}-{bar.end}" for bar in laid_out.bars]
    assert [member.role for member in bridge.truss.members] == [bar.role for bar in laid_out.bars]
    assert bridge.deck.panel_points == laid_out.panel_points
    # atol: lengths are written with ten digits, and up to eight of them are added
    assert_allclose(bridge.truss.coordinates, list(laid_out.joints.values()), rtol=0, atol=1e-8)
    assert bridge.truss.redundancy == 0
    assert bridge.units == units
    movload.influence_lines(bridge.truss, bridge.deck.panel_points)


@pytest.mark.parametrize("form", FORMS)
def test_a_rating_names_every_open_place_until_it_is_filled(form: str) -> None:
    begun = layout(form, "pony")
    text = starter_text("A bridge", begun, METRIC)
    bridge = bridge_from(text, "begun.toml")
    roles = dict.fromkeys(bar.role for bar in lay_out(begun).bars)
    named = [f'members."{role}"' if " " in role else f"members.{role}" for role in roles]
    places = [f"{role}.{key}" for role in named for key in ("density", "permits.tension", "permits.compression")]
    places += ["deck.truss_spacing", "deck.kerbs", "deck.clearance"]
    places += ["permanent.deck", "permanent.detail_allowance", "rating.impact"]
    assert bridge.missing == tuple(places)
    with pytest.raises(MissingDataError, match="a rating needs data that is not there yet") as caught:
        movload.solve(bridge)
    for place in places:
        assert f'{place} (still holds "?")' in str(caught.value)


@pytest.mark.parametrize("form", FORMS)
def test_filled_it_rates(form: str) -> None:
    bridge = bridge_from(filled(starter_text("A bridge", layout(form, "through"), METRIC)), "filled.toml")
    assert bridge.missing == ()
    ratings = movload.rate(bridge, [movload.read_vehicle("h5")])
    assert ratings.coverage.complete
    assert ratings.coverage.not_rated == ("floor", "deck")
    assert ratings.worst.factor > 0


@pytest.mark.parametrize("units", [METRIC, US], ids=["metric", "US"])
def test_the_floor_is_there_to_be_uncommented(units: UnitSystem) -> None:
    """Its "?" wait for their values like all others, and filled it is rated with the trusses."""
    text = starter_text("A bridge", layout("pratt", "through"), units)
    with_floor = re.sub(r"(?m)^# (\[floor\.|z = |weight = |permits = \{)", r"\1", text)
    assert with_floor.count("\n[floor.") == 2
    bridge = bridge_from(with_floor, "begun.toml")
    asked = [place for place in bridge.missing if place.startswith("floor.")]
    assert asked == [
        f"floor.{part}.permits.{sense}" for part in ("stringers", "floorbeams") for sense in ("moment", "shear")
    ]
    with_strengths = re.sub(r'moment = "\?", shear = "\?"', 'moment = "90 kN m", shear = "200 kN"', with_floor)
    ratings = movload.rate(bridge_from(filled(with_strengths), "filled.toml"), [movload.read_vehicle("h5")])
    assert ratings.coverage.complete
    assert ratings.coverage.not_rated == ("deck planks", "deck")


@pytest.mark.parametrize("units", [METRIC, US], ids=["metric", "US"])
def test_sections_are_there_to_be_uncommented(units: UnitSystem) -> None:
    """A group by section and material, as its comment shows, is rated by the rules, its loss on one truss only."""
    text = starter_text("A bridge", layout("pratt", "through"), units)
    tables = re.sub(r"(?m)^# (\[materials|\[sections|kind = \"wrought|built = |pieces = |  \{ shape|\])", r"\1", text)
    keys = "\n".join(line[4:] for line in re.findall(r"(?m)^#   .*$", text) if "shape" not in line)
    group = re.search(r'(?s)\[members\."bottom chord"\]\n(.*?)\n\n', tables)
    assert group is not None
    named = f'condition = "good"\nsystem = "other"\n{keys}'
    made = tables.replace(group[0], group[0].replace(group[1], named))
    bridge = bridge_from(filled(made), "filled.toml")
    assert sorted({both[0] is both[1] for both in bridge.made.values()}) == [False, True]
    ratings = movload.rate(bridge, [movload.read_vehicle("type_3")], read_factor_set("load_factor"))
    assert any(row.as_new > row.strength for row in ratings.rows(0))


@pytest.mark.parametrize("number", range(21))
def test_one_open_place_is_enough_to_refuse(number: int) -> None:
    text = re.sub(r"(?m)^#.*\n", "", filled(starter_text("A bridge", layout("howe", "through"), METRIC)))
    written = "|".join(f"(?<== ){re.escape(answer)}" for answer in ANSWERS.values())
    answers = [match.span() for match in re.finditer(written, text)]
    assert len(answers) == 21  # three of each of 5 groups, three of the deck, two permanent, one impact
    start, end = answers[number]
    bridge = bridge_from(f'{text[:start]}"?"{text[end:]}', "begun.toml")
    assert len(bridge.missing) == 1
    with pytest.raises(MissingDataError, match=re.escape(f'yet: {bridge.missing[0]} (still holds "?")')):
        movload.solve(bridge)


@pytest.mark.parametrize(("length", "force"), [("m", "kN"), ("ft", "kip"), ("ft", "kN"), ("m", "t"), ("m", "N")])
@pytest.mark.parametrize("section", ["", "cm", "m", "in"])
def test_steel_is_steel_in_any_units(length: str, force: str, section: str) -> None:
    """Stand-ins of modulus (200 GPa), density (7850 kg/m3) and area (about 2000 mm2), read back.

    rtol: 29000 ksi is 199.95 GPa and 490 lb/ft3 is 7849 kg/m3; an area of 3 in2 is 1935 mm2.
    """
    units = UnitSystem.beside(length, force=force, section=section)
    text = starter_text("A bridge", layout("pratt", "pony"), units)
    common = re.search(r'density: ("[^"]+") is common for steel', text)
    assert common
    bridge = bridge_from(text.replace('density = "?"', f"density = {common[1]}"), "begun.toml")
    assert bridge.units == units
    for member in bridge.truss.members:
        assert_allclose(member.modulus, 200e9, rtol=0.01)
        assert_allclose(member.area, 2000e-6, rtol=0.05)
        assert member.density is not None
        assert_allclose(member.density, 7850, rtol=0.01)


@pytest.mark.parametrize("form", FORMS)
def test_the_question_for_depths_says_how_many_the_form_takes(form: str) -> None:
    """The number asked for is the one that a layout takes, and one more is refused."""
    begun = layout(form, "pony")
    question = depths_question(form, begun.panels.size)
    (count,) = re.findall(r"\d+(?=[;)])", question)
    assert int(count) == begun.depths.size
    where = {"warren": "middle of each panel", "baltimore": "main panel points, every second one"}
    assert where.get(form, "Depths at the panel points") in question
    assert ("tapers" in question) == (form != "warren")  # every depth of a warren is above 0


def test_comments_say_what_the_units_are_and_what_is_common() -> None:
    text = starter_text("A bridge", layout("pratt", "pony"), METRIC)
    assert text.startswith('# A bridge: begun with "movload start". Fill every "?"')
    assert "areas in mm2, moduli in kN/mm2" in text
    assert 'density: "7850 kg/m3" is common for steel' in text
    assert "never assume them equal" in text


@pytest.mark.parametrize("title", ['a "b" \\ c', "tab\tand\nline", "ünïcödé 😀", "# not a comment"])
def test_a_title_cannot_break_the_file(title: str) -> None:
    text = starter_text(title, layout("pratt", "pony"), METRIC)
    if title.isprintable():
        assert bridge_from(text, "begun.toml").title == title
    else:
        with pytest.raises(InputError, match=r"begun.toml: title: must be one line without control characters"):
            bridge_from(text, "begun.toml")


LENGTHS: dict[str, list[Any]] = {
    "4.2 4.35": [4.2, 4.35],
    "4.2,4.35": [4.2, 4.35],
    "3x4.2": [4.2] * 3,
    "2×4.2 4": [4.2, 4.2, 4],
    "14 ft, 4.2 m": [14 * 0.3048, 4.2],
    "12'-6 1/2\", 1": [150.5 * 0.0254, 1],
}


@pytest.mark.parametrize("text", LENGTHS)
def test_lengths(text: str) -> None:
    assert_allclose(lengths_from(text, METRIC, "--panels"), LENGTHS[text], rtol=1e-15)


def test_bare_lengths_are_in_the_units_asked_for() -> None:
    assert_allclose(lengths_from("10 2x5", US, "--panels"), [3.048, 1.524, 1.524], rtol=1e-15)
