"""A bridge solved for a method: what it holds, what it asks for, and what it says about itself."""

from __future__ import annotations

import pickle
from dataclasses import replace
from typing import TYPE_CHECKING

import numpy as np
import pytest
from numpy.testing import assert_array_equal
from oracles.trusses import bottom, pratt, simple_span
from rating.bridges import AREA, CART, DENSITY, DEPTH, IMPACT, PANELS, SHARE, brook, brook_truss

from movload import Deck, Member, Support, Truss, judge, solve
from movload.bridge.strengths import permitted
from movload.errors import MissingDataError, UnstableError
from movload.rating.factor_sets import FactorSet, Level
from movload.statics.permanent import PERMANENT_CLASSES

if TYPE_CHECKING:
    from movload import Bridge

TWO_LEVELS = FactorSet("two", (Level("lower", 1.3, 2.17), Level("upper", 1.3, 1.3)), "Two levels.", "invented")


def asked(bridge: Bridge) -> list[str]:
    """Return what a bridge is told to fill in, item by item."""
    with pytest.raises(MissingDataError, match="a rating needs data that is not there yet") as caught:
        solve(bridge)
    assert caught.value.place == "Brook bridge"
    return caught.value.rule.partition(": ")[2].split("; ")


PERMITS = 'permits of at least one member group for method "permitted forces": { tension = ..., compression = ... }'


def test_rows_are_members_then_reactions_then_deflections() -> None:
    solved = solve(brook())
    names = [effect.name for effect in solved.effects]
    truss = brook_truss()
    assert names[: len(truss.members)] == [member.name for member in truss.members]
    assert names[len(truss.members) :] == ["L0 x", "L0 y", "L4 normal", *(f"L{i} down" for i in range(5))]
    rows = len(names)
    assert solved.permanent.shape == (len(PERMANENT_CLASSES), rows)
    assert solved.strength.shape == (1, rows, 2)
    assert_array_equal(solved.impact.of("farm", None), np.full((rows, 2), IMPACT))
    assert solved.classes == PERMANENT_CLASSES
    assert solved.sources == ("brook.toml",)


def test_the_typed_share_holds_wherever_the_wheel_stands() -> None:
    (part,) = solve(brook()).parts
    assert_array_equal(part.across.at(np.array([-3.0, 0.0, 7.0])), SHARE)


def test_only_members_have_strengths() -> None:
    solved = solve(brook())
    axial = np.array([effect.kind == "axial" for effect in solved.effects])
    assert_array_equal(solved.strength[0, axial], [(400e3, 300e3)] * int(axial.sum()))
    assert np.isnan(solved.strength[0, ~axial]).all()


def test_a_permit_finds_its_bar_by_its_joints_in_either_order() -> None:
    truss = brook_truss()
    members = [replace(m, name="tie") if m.name == "L1-L2" else m for m in truss.members]
    permits = {"U1-L0": permitted(1e3, 2e3), "L2-L1": permitted(tension=3e3)}
    solved = solve(brook(truss=Truss(truss.joints, members, truss.supports), strengths=permits))
    rows = {effect.name: row for row, effect in enumerate(solved.effects)}
    assert_array_equal(solved.strength[0, rows["L0-U1"]], [1e3, 2e3])
    assert_array_equal(solved.strength[0, rows["tie"]], [3e3, np.nan])
    assert int((~np.isnan(solved.strength)).sum()) == 3


def test_typed_strengths_hold_at_every_level() -> None:
    solved = solve(brook(), TWO_LEVELS)
    assert solved.strength.shape[0] == 2
    assert_array_equal(solved.strength[0], solved.strength[1])
    assert solved.method is TWO_LEVELS


def test_nothing_in_it_can_be_changed() -> None:
    solved = solve(brook())
    for array in (solved.permanent, solved.strength, solved.impact.of("farm", None)):
        with pytest.raises(ValueError, match="read-only"):
            array[0] = 1.0


def test_it_travels_between_processes() -> None:
    solved = solve(brook())
    travelled = pickle.loads(pickle.dumps(solved))  # noqa: S301  # what this test wrote itself
    assert_array_equal(judge(travelled, [CART]).factor, judge(solved, [CART]).factor)


@pytest.mark.parametrize(
    ("changes", "words"),
    [
        (
            {"permanent": None},
            "permanent.deck and permanent.truss_share (weight per length of the whole deck, 0 if none)",
        ),
        (
            {"deck": Deck(tuple(bottom(4)))},
            "deck.truss_share (share of a whole axle that reaches one truss), or deck.truss_spacing and deck.kerbs",
        ),
        ({"impact": None}, "rating.impact (dynamic allowance, e.g. 0.30, and 0 only if a rule allows it)"),
        ({"truss": brook_truss(None)}, "density of L0-L1, L1-L2, L2-L3 ... (0 if in deck weight)"),
        ({"strengths": {}}, PERMITS),
        ({"strengths": {"L0-L1": permitted()}}, PERMITS),
    ],
    ids=["permanent", "share", "impact", "density", "permits", "permits without a force"],
)
def test_what_is_not_typed_is_asked_for_by_its_place(changes: dict[str, object], words: str) -> None:
    assert asked(brook(**changes)) == [words]


def test_everything_that_is_not_typed_is_asked_for_at_once() -> None:
    bare = brook(
        permanent=None, impact=None, strengths={}, deck=Deck(tuple(bottom(4))), truss=brook_truss(None),
        missing=('members."end posts".area', "layout.middle"),
    )  # fmt: skip
    places = [words.split(" ")[0] for words in asked(bare)]
    assert places == [
        'members."end', "layout.middle", "deck.truss_share", "permanent.deck", "rating.impact", "density", "permits",
    ]  # fmt: skip


def test_what_still_holds_a_question_mark_is_named_once() -> None:
    """A group's name may hold a space, and the bars of another group, without any density, are named beside it."""
    joints, bars = pratt(PANELS, [DEPTH] * 3)
    members = [
        Member(start, end, AREA, 200e9, density=None if "L4" in (start, end) or "L0" in (start, end) else DENSITY,
               role="end bars" if "L0" in (start, end) else "others")
        for start, end in bars
    ]  # fmt: skip
    places = (
        'members."end bars".density', 'members."end bars".permits.tension', "deck.truss_share", "permanent.deck",
        "rating.impact",
    )  # fmt: skip
    bare = brook(
        truss=Truss(joints, members, simple_span(4)),
        permanent=None, impact=None, strengths={}, deck=Deck(tuple(bottom(4))), missing=places,
    )  # fmt: skip
    assert asked(bare) == [
        *(f'{place} (still holds "?")' for place in places), "density of L3-L4, U3-L4 (0 if in deck weight)",
    ]  # fmt: skip


def test_a_question_mark_stops_a_rating_wherever_it_stands() -> None:
    assert asked(brook(missing=("supports.L4.settlement",))) == ['supports.L4.settlement (still holds "?")']


@pytest.mark.parametrize("place", ["deck", "deck.left_abutment"])
def test_a_question_mark_hides_only_what_it_stands_for(place: str) -> None:
    """The share of an axle and the deck's weight are not typed just because another place says "deck"."""
    words = asked(brook(permanent=None, deck=Deck(tuple(bottom(4))), missing=(place,)))
    assert [word.split(" ")[0] for word in words] == [place, "deck.truss_share", "permanent.deck"]


def test_zero_is_an_answer() -> None:
    """No deck weight, no impact, no density and a strength of 0 are typed values, not missing ones."""
    bridge = brook(truss=brook_truss(0.0), impact=0.0, strengths={"L0-L1": permitted(compression=0.0)})
    assert solve(bridge).strength[0, 0, 1] == 0.0


def test_a_mechanism_is_named() -> None:
    truss = brook_truss()
    loose = Truss(truss.joints, [m for m in truss.members if m.name != "U1-L2"], truss.supports)
    permits = {"L0-L1": permitted(1.0)}
    with pytest.raises(UnstableError, match="is a mechanism"):
        solve(brook(truss=loose, strengths=permits))


def test_the_note_says_the_typed_shares() -> None:
    note = solve(brook()).notes[0]
    assert (note.code, note.subject) == ("shares-typed", "truss")
    assert "0.6 of a whole axle and 0.5 of the deck's weight reach it" in note.text


def test_a_redundant_truss_says_so() -> None:
    truss = brook_truss()
    propped = Truss(truss.joints, truss.members, [*truss.supports, Support("L2", 0)])
    notes = solve(brook(truss=propped)).notes
    assert [note.code for note in notes] == ["shares-typed", "detail-allowance", "redundant"]
    assert notes[2].text.startswith("1 member(s) or reaction(s) beyond what equilibrium can find")


def test_settlement_is_a_class_of_its_own() -> None:
    truss = brook_truss()
    supports = [*truss.supports, Support("L2", 0, settlement=0.01)]
    level = [*truss.supports, Support("L2", 0)]
    sunk, flat = (solve(brook(truss=Truss(truss.joints, truss.members, one))) for one in (supports, level))
    components, settlement = (PERMANENT_CLASSES.index(name) for name in ("components", "settlement"))
    assert_array_equal(sunk.permanent[components], flat.permanent[components])
    assert not flat.permanent[settlement].any()
    reactions = [row for row, effect in enumerate(sunk.effects) if effect.kind == "reaction"]
    assert sunk.permanent[settlement, reactions].any()


def test_settlement_does_not_strain_a_determinate_truss() -> None:
    truss = brook_truss()
    supports = [Support("L0"), Support("L4", 0, settlement=0.02)]
    solved = solve(brook(truss=Truss(truss.joints, truss.members, supports)))
    forces = [row for row, effect in enumerate(solved.effects) if effect.kind != "down"]
    assert not solved.permanent[PERMANENT_CLASSES.index("settlement"), forces].any()


def test_solving_knows_no_vehicle() -> None:
    solved = solve(brook())
    assert judge(solved, [CART]).solved is solved
    assert replace(solved, title="other").effects == solved.effects
