"""Layouts written out as joints and bars: names, webs, determinacy, stability, symmetry, and what is refused.

Stability is checked with a dense equilibrium matrix made here, which shares nothing with ``movload.statics``.
All trusses are invented.
"""

from __future__ import annotations

import pickle
import re
from typing import TYPE_CHECKING, Any

import numpy as np
import pytest
from hypothesis import given
from hypothesis import strategies as st
from numpy.testing import assert_allclose

from movload.bridge.layout import DECKS, FORMS, ROLES, Bar, LaidOut, Layout, lay_out
from movload.bridge.truss import Member, Support, Truss
from movload.errors import InputError, MissingDataError, UnknownNameError

if TYPE_CHECKING:
    from movload.arrays import Floats

ENDS = ((True, True), (False, False), (True, False), (False, True))
COUNTS = {
    "pratt": (2, 3, 6, 7),
    "howe": (2, 3, 6, 7),
    "warren": (2, 3, 6, 7),
    "warren with verticals": (2, 6),
    "k": (4, 6, 8),
    "baltimore": (8, 12),
}
CASES = [
    (form, deck, count, ends)
    for form in FORMS
    for deck in DECKS
    for count in COUNTS[form]
    for ends in (ENDS[:1] if form == "warren" else ENDS)
]
CASES += [("warren with verticals", deck, n, ends) for deck in DECKS for n in (3, 5, 7) for ends in ENDS[2:]]
TURNED = {"falling": "rising", "rising": "falling", "crossed": "crossed", None: None}


def made(form: str, deck: str, count: int, ends: tuple[bool, bool], middle: str = "falling") -> Layout:
    """Return a layout with unequal panels and a chord that is not level; ``ends`` says which of them taper."""
    panels = 3.0 + 0.37 * np.sin(np.arange(count) * 1.9)
    size = {"warren": count, "baltimore": count // 2 + 1}.get(form, count + 1)
    depths = 2.9 + 1.3 * np.sin(np.pi * np.arange(size) / (size + 1.3)) ** 2
    if form != "warren":
        depths[[0, -1]] *= [not ends[0], not ends[1]]
    odd = form in {"pratt", "howe"} and count % 2 == 1
    return Layout(form, panels, depths, deck=deck, middle=middle if odd else None)


def level(form: str, deck: str, count: int, *, tapers: bool) -> LaidOut:
    """Return a truss of 3 m panels, 4 m deep everywhere but at tapered ends."""
    size = {"warren": count, "baltimore": count // 2 + 1}.get(form, count + 1)
    depths = np.full(size, 4.0)
    if tapers and form != "warren":
        depths[[0, -1]] = 0
    return lay_out(Layout(form, np.full(count, 3.0), depths, deck=deck))


def equilibrium(truss: LaidOut) -> Floats:
    """Return what bars and reactions of unit tension add at each joint (2J, M + 3): x rows, then y rows.

    Held at the loaded chord's ends: the first pinned, the last on a level roller.
    """
    number = {name: i for i, name in enumerate(truss.joints)}
    joints, bars = len(number), len(truss.bars)
    matrix = np.zeros((2 * joints, bars + 3))
    for column, bar in enumerate(truss.bars):
        step = np.subtract(truss.joints[bar.end], truss.joints[bar.start])
        step = step / np.hypot(*step)
        i, j = number[bar.start], number[bar.end]
        matrix[[i, joints + i], column] = step
        matrix[[j, joints + j], column] = -step
    first, last = number[truss.panel_points[0]], number[truss.panel_points[-1]]
    matrix[first, bars] = matrix[joints + first, bars + 1] = matrix[joints + last, bars + 2] = 1
    return matrix


def is_stable(truss: LaidOut) -> bool:
    """Whether the equilibrium matrix has full row rank.

    1e-9 of the largest singular value: a mechanism leaves about 1e-16, the weakest of 3000 trusses drawn below 7e-4.
    """
    matrix = equilibrium(truss)
    return bool(np.linalg.matrix_rank(matrix, rtol=1e-9) == matrix.shape[0])


def forces(truss: LaidOut) -> dict[str, float]:
    """Return bar forces (+ tension) under a unit load down on every inner panel point, by bar name."""
    matrix = equilibrium(truss)
    number = {name: i for i, name in enumerate(truss.joints)}
    load = np.zeros(matrix.shape[0])
    load[[len(number) + number[name] for name in truss.panel_points[1:-1]]] = -1
    found = np.linalg.solve(matrix, -load)
    return {f"{bar.start}-{bar.end}": float(force) for bar, force in zip(truss.bars, found, strict=False)}


def names(truss: LaidOut, *roles: str) -> list[str]:
    """Return names of the bars of some roles, in order."""
    return [f"{bar.start}-{bar.end}" for bar in truss.bars if bar.role in roles]


def test_the_stability_check_sees_a_mechanism() -> None:
    whole = level("pratt", "through", 4, tapers=True)
    # As many bars as before, but a panel without its diagonal can rack.
    racking = [Bar("L0", "L4", "bottom chord") if bar == Bar("U1", "L2", "diagonals") else bar for bar in whole.bars]
    assert is_stable(whole)
    assert not is_stable(LaidOut(whole.joints, tuple(racking), whole.panel_points))


@pytest.mark.parametrize(("form", "deck", "count", "ends"), CASES)
def test_every_form_is_determinate_and_stable(form: str, deck: str, count: int, ends: tuple[bool, bool]) -> None:
    truss = lay_out(made(form, deck, count, ends))
    assert len(truss.bars) + 3 == 2 * len(truss.joints)
    assert is_stable(truss)


@pytest.mark.parametrize("form", ["pratt", "howe"])
@pytest.mark.parametrize("deck", DECKS)
@pytest.mark.parametrize("ends", ENDS)
def test_a_crossed_middle_adds_one_redundant(form: str, deck: str, ends: tuple[bool, bool]) -> None:
    truss = lay_out(made(form, deck, 5, ends, "crossed"))
    assert len(truss.bars) + 3 == 2 * len(truss.joints) + 1
    assert is_stable(truss)
    assert {"U2-L3", "L2-U3"} <= set(names(truss, "diagonals"))


@pytest.mark.parametrize(("form", "deck", "count", "ends"), CASES)
def test_joints_stand_where_the_layout_says(form: str, deck: str, count: int, ends: tuple[bool, bool]) -> None:
    layout = made(form, deck, count, ends)
    truss = lay_out(layout)
    near, far, side = ("U", "L", -1) if deck == "deck" else ("L", "U", 1)
    x = [sum(layout.panels[:i]) for i in range(count + 1)]
    assert truss.panel_points == tuple(f"{near}{i}" for i in range(count + 1))
    # 1e-12: the same sums of a dozen numbers in another order.
    assert_allclose([truss.joints[name] for name in truss.panel_points], [(at, 0) for at in x], rtol=1e-12)
    if form == "warren":
        expected = {f"{far}{i + 1}": ((x[i] + x[i + 1]) / 2, side * d) for i, d in enumerate(layout.depths)}
    else:
        step = 2 if form == "baltimore" else 1
        expected = {f"{far}{i * step}": (x[i * step], side * d) for i, d in enumerate(layout.depths) if d}
    assert {name for name in truss.joints if name[0] == far} == set(expected)
    for name, place in expected.items():
        assert_allclose(truss.joints[name], place, rtol=1e-12)


@pytest.mark.parametrize(("form", "deck", "count", "ends"), CASES)
def test_roles_say_what_a_bar_is(form: str, deck: str, count: int, ends: tuple[bool, bool]) -> None:
    truss = lay_out(made(form, deck, count, ends))
    last = truss.joints[truss.panel_points[-1]][0]
    for bar in truss.bars:
        left, right = truss.joints[bar.start][0], truss.joints[bar.end][0]
        letters = bar.start[0] + bar.end[0]
        assert (letters == "UU") == (bar.role == "top chord")
        assert (letters == "LL") == (bar.role == "bottom chord")
        if bar.role in {"verticals", "sub-verticals"}:
            assert 0 < left == right < last
        elif bar.role != "end posts":
            assert left < right
    # A tapered end of a "baltimore" has its end post in two halves.
    halves = 2 if form == "baltimore" else 1
    assert len(names(truss, "end posts")) == sum(halves if taper else 1 for taper in ends)
    order = [(ROLES.index(bar.role), truss.joints[bar.start][0] + truss.joints[bar.end][0]) for bar in truss.bars]
    assert order == sorted(order)


def test_a_pratt_is_the_truss_written_by_hand() -> None:
    truss = lay_out(Layout("pratt", np.array([3.35, 3.1, 3.2, 3.0]), np.array([0, 2.1, 2.6, 2.2, 0]), deck="pony"))
    joints = {
        "L0": (0, 0), "L1": (3.35, 0), "L2": (6.45, 0), "L3": (9.65, 0), "L4": (12.65, 0),
        "U1": (3.35, 2.1), "U2": (6.45, 2.6), "U3": (9.65, 2.2),
    }  # fmt: skip
    assert list(truss.joints) == list(joints)
    assert_allclose(list(truss.joints.values()), list(joints.values()), rtol=1e-14)  # one rounding a sum
    assert truss.bars == (
        Bar("U1", "U2", "top chord"),
        Bar("U2", "U3", "top chord"),
        Bar("L0", "L1", "bottom chord"),
        Bar("L1", "L2", "bottom chord"),
        Bar("L2", "L3", "bottom chord"),
        Bar("L3", "L4", "bottom chord"),
        Bar("L0", "U1", "end posts"),
        Bar("U3", "L4", "end posts"),
        Bar("U1", "L1", "verticals"),
        Bar("U2", "L2", "verticals"),
        Bar("U3", "L3", "verticals"),
        Bar("U1", "L2", "diagonals"),
        Bar("L2", "U3", "diagonals"),
    )
    assert truss.panel_points == ("L0", "L1", "L2", "L3", "L4")


WEBS = [
    ("pratt", "through", True, "L0-U1 U1-L2 L2-U3 U3-L4"),
    ("pratt", "through", False, "U0-L1 U1-L2 L2-U3 L3-U4"),
    ("pratt", "deck", True, "U0-L1 U1-L2 L2-U3 L3-U4"),
    ("pratt", "deck", False, "U0-L1 U1-L2 L2-U3 L3-U4"),
    ("howe", "through", True, "L0-U1 L1-U2 U2-L3 U3-L4"),
    ("howe", "deck", True, "U0-L1 L1-U2 U2-L3 L3-U4"),
    ("howe", "through", False, "L0-U1 L1-U2 U2-L3 U3-L4"),
    ("warren", "through", True, "L0-U1 U1-L1 L1-U2 U2-L2 L2-U3 U3-L3"),
    ("warren", "deck", True, "U0-L1 L1-U1 U1-L2 L2-U2"),
    ("warren with verticals", "through", True, "L0-U1 U1-L2 L2-U3 U3-L4"),
    ("warren with verticals", "through", False, "L0-U1 U1-L2 L2-U3 U3-L4 L4-U5 U5-L6"),
    ("warren with verticals", "deck", True, "U0-L1 L1-U2 U2-L3 L3-U4 U4-L5 L5-U6"),
    ("warren with verticals", "deck", False, "U0-L1 L1-U2 U2-L3 L3-U4"),
    ("k", "through", True, "L0-U1 M1-U2 M1-L2 M2-U3 M2-L3 U3-M4 L3-M4 U4-M5 L4-M5 U5-L6"),
    ("k", "deck", True, "U0-L1 M1-U2 M1-L2 U2-M3 L2-M3 L3-U4"),
    ("k", "deck", False, "U0-L1 M1-U2 M1-L2 U2-M3 L2-M3 L3-U4"),
    ("baltimore", "through", True, "L0-M1 M1-U2 U2-M3 M3-L4 L4-M5 M5-U6 U6-M7 M7-L8"),
    ("baltimore", "through", False, "U0-M1 M1-L2 U2-M3 M3-L4 L4-M5 M5-U6 L6-M7 M7-U8"),
    ("baltimore", "deck", True, "U0-M1 M1-L2 U2-M3 M3-L4 L4-M5 M5-U6 L6-M7 M7-U8"),
]


@pytest.mark.parametrize(("form", "deck", "tapers", "web"), WEBS)
def test_inclined_bars_of_the_web(form: str, deck: str, tapers: bool, web: str) -> None:
    count = int(web[-1])
    truss = level(form, deck, count, tapers=tapers)
    upright = {f"U{i}-L{i}" for i in (0, count)} if not tapers else set()
    assert set(names(truss, "end posts", "diagonals")) - upright == set(web.split())


def test_bars_that_a_baltimore_adds() -> None:
    through, deck = (level("baltimore", kind, 8, tapers=True) for kind in ("through", "deck"))
    assert names(through, "verticals") == ["U2-L2", "U4-L4", "U6-L6"]
    assert names(through, "sub-verticals") == ["M1-L1", "M3-L3", "M5-L5", "M7-L7"]
    assert names(through, "sub-diagonals") == ["M1-L2", "L2-M3", "M5-L6", "L6-M7"]
    assert names(deck, "sub-verticals") == ["U1-M1", "U3-M3", "U5-M5", "U7-M7"]
    assert names(deck, "sub-diagonals") == ["M1-U2", "M3-U4", "U4-M5", "U6-M7"]
    # Half-way along a main panel of 2 x 3 m, the main diagonal of a level truss is at half its 4 m.
    assert_allclose([through.joints["M1"], through.joints["M3"], deck.joints["M3"]], [(3, 2), (9, 2), (9, -2)])


def test_a_k_halves_its_verticals_but_not_at_midspan() -> None:
    truss = level("k", "deck", 6, tapers=True)
    halves = [f"U{i}-M{i} M{i}-L{i}" for i in (1, 2, 4, 5)]
    assert names(truss, "verticals") == " ".join([*halves[:2], "U3-L3", *halves[2:]]).split()
    assert truss.joints["M2"] == (6.0, -2.0)


@pytest.mark.parametrize(
    ("ends", "first", "last"), [((True, False), "L0-U1", "L4-U5"), ((False, True), "U0-L1", "U4-L5")]
)
def test_an_odd_warren_with_verticals_starts_at_its_tapered_end(ends: tuple[bool, bool], first: str, last: str) -> None:
    truss = lay_out(made("warren with verticals", "through", 5, ends))
    assert {first, last} <= set(names(truss, "end posts", "diagonals"))


# What the trade means by the forms, beyond names: common practice, no source. Forces under a unit load at every inner
# panel point of a level truss; 1e-9 is far above the round-off of the solution and far below any force.


@pytest.mark.parametrize(("form", "sign"), [("pratt", 1), ("howe", -1)])
@pytest.mark.parametrize("deck", DECKS)
@pytest.mark.parametrize("tapers", [True, False])
def test_pratt_diagonals_pull_and_howe_diagonals_push(form: str, sign: int, deck: str, tapers: bool) -> None:
    truss = level(form, deck, 8, tapers=tapers)
    force = forces(truss)
    assert all(sign * force[bar] > 1e-9 for bar in names(truss, "diagonals"))


def test_warren_diagonals_pull_and_push_in_turn() -> None:
    truss = level("warren with verticals", "through", 8, tapers=True)
    force = forces(truss)
    assert [force[bar] > 0 for bar in names(truss, "diagonals")] == [True, False, True, True, False, True]
    # Hangers where two diagonals meet above, idle where they meet below.
    assert_allclose([force[bar] for bar in names(truss, "verticals")], [1, 0, 1, 0, 1, 0, 1], atol=1e-9)


def test_the_two_diagonals_of_a_k_share_the_shear() -> None:
    force = forces(level("k", "through", 8, tapers=True))
    # Shear of panel L2-L3: 3.5 less the loads at L1 and L2; each diagonal is 3 m along, 2 m up.
    assert_allclose([force["M2-L3"], force["M2-U3"]], np.array([1, -1]) * 1.5 / 2 * np.hypot(3, 2) / 2, atol=1e-9)


@pytest.mark.parametrize(("deck", "sign"), [("through", 1), ("pony", 1), ("deck", -1)])
def test_the_sub_members_of_a_baltimore_carry_the_added_panel_points(deck: str, sign: int) -> None:
    truss = level("baltimore", deck, 12, tapers=True)
    force = forces(truss)
    assert_allclose([force[bar] for bar in names(truss, "sub-verticals")], sign, atol=1e-9)
    # Half of the panel load goes up or down each sub-diagonal of a truss with equal panels.
    slope = np.hypot(3, 2) / 2
    assert_allclose([force[bar] for bar in names(truss, "sub-diagonals")], -sign * slope / 2, atol=1e-9)


@st.composite
def layouts(draw: st.DrawFn, *, symmetric: bool) -> Layout:
    """Any layout; the same from both ends when asked for."""
    form, deck = draw(st.sampled_from(FORMS)), draw(st.sampled_from(DECKS))
    counts = {"k": (4, 6, 8), "baltimore": (8, 12), "warren with verticals": (2, 4, 6, 8)}.get(form, range(2, 9))
    count = draw(st.sampled_from(counts))
    size = {"warren": count, "baltimore": count // 2 + 1}.get(form, count + 1)
    panels, depths = (np.array(draw(st.lists(st.floats(1, 10), min_size=n, max_size=n))) for n in (count, size))
    tapers = draw(st.tuples(st.booleans(), st.booleans())) if form != "warren" else (False, False)
    depths[[0, -1]] *= [not tapers[0], not tapers[1]]
    if symmetric:
        panels, depths = (np.where(np.arange(len(row)) < len(row) / 2, row, row[::-1]) for row in (panels, depths))
    odd = form in {"pratt", "howe"} and count % 2 == 1
    middles = ["crossed"] if symmetric else ["falling", "rising", "crossed"]
    return Layout(form, panels, depths, deck=deck, middle=draw(st.sampled_from(middles)) if odd else None)


def mirrored(layout: Layout, truss: LaidOut) -> dict[str, str]:
    """Return the name each joint has when the truss is seen from the other side."""
    count = layout.panels.size
    over_panels = layout.form == "warren"
    return {
        name: f"{name[0]}{count + (over_panels and name[0] != layout.loaded) - int(name[1:])}" for name in truss.joints
    }


def check_mirror(layout: Layout, truss: LaidOut, image: LaidOut) -> None:
    """Fail unless ``image`` is the truss seen from the other side."""
    other = mirrored(layout, truss)
    span = layout.panels.sum()
    assert set(other.values()) == set(image.joints)
    for name, (x, y) in truss.joints.items():
        # 1e-12 of the span: the same panel lengths are added from the other end.
        assert_allclose(image.joints[other[name]], (span - x, y), rtol=0, atol=1e-12 * span)
    seen = {(frozenset((other[bar.start], other[bar.end])), bar.role) for bar in truss.bars}
    assert seen == {(frozenset((bar.start, bar.end)), bar.role) for bar in image.bars}


def check_reversed(layout: Layout) -> None:
    """Fail unless the layout typed from the right end is the same truss seen from the other side."""
    middle = TURNED[layout.middle]
    image = Layout(layout.form, layout.panels[::-1], layout.depths[::-1], deck=layout.deck, middle=middle)
    check_mirror(layout, lay_out(layout), lay_out(image))


@given(layouts(symmetric=True))
def test_a_symmetric_layout_gives_a_symmetric_truss(layout: Layout) -> None:
    truss = lay_out(layout)
    check_mirror(layout, truss, truss)


@given(layouts(symmetric=False))
def test_any_layout_is_stable_and_reversible(layout: Layout) -> None:
    truss = lay_out(layout)
    assert len(truss.bars) + 3 == 2 * len(truss.joints) + (layout.middle == "crossed")
    assert is_stable(truss)
    check_reversed(layout)


@pytest.mark.parametrize(("form", "deck", "count", "ends"), CASES)
def test_a_layout_typed_from_the_other_end(form: str, deck: str, count: int, ends: tuple[bool, bool]) -> None:
    check_reversed(made(form, deck, count, ends))


def test_the_middle_diagonal_is_as_stated() -> None:
    for form in ("pratt", "howe"):
        for middle, diagonals in (("falling", {"U1-L2"}), ("rising", {"L1-U2"}), ("crossed", {"U1-L2", "L1-U2"})):
            truss = lay_out(Layout(form, np.array([3, 3.2, 3]), np.array([0, 2, 2, 0.0]), deck="pony", middle=middle))
            assert set(names(truss, "diagonals")) == diagonals


def test_a_laid_out_truss_is_a_truss() -> None:
    laid_out = lay_out(made("baltimore", "deck", 12, (True, False)))
    members = [Member(bar.start, bar.end, 1e-3, 2e11, role=bar.role) for bar in laid_out.bars]
    supports = [Support("U0"), Support("U12", slides=0)]
    truss = Truss(laid_out.joints, members, supports)
    assert truss.redundancy == 0
    assert truss.member("U0-M1").role == "end posts"


def test_values_are_kept_and_travel() -> None:
    depths = np.array([0.0, 2, 0])
    layout = Layout("howe", np.array([3.0, 3.0]), depths, deck="deck")
    depths[1] = 9
    again = pickle.loads(pickle.dumps(layout))  # noqa: S301 - our own bytes
    assert lay_out(again) == lay_out(layout)
    assert lay_out(layout).joints["L1"] == (3.0, -2.0)
    with pytest.raises(ValueError, match="read-only"):
        layout.depths[1] = 9


GOOD: dict[str, Any] = {"form": "pratt", "panels": [3] * 4, "depths": [0, 2, 2, 2, 0], "deck": "through"}
FIVE: dict[str, Any] = {"panels": [3] * 5, "depths": [2] * 6}
K: dict[str, Any] = {"form": "k"}
WARREN: dict[str, Any] = {"form": "warren", "depths": [2] * 4}
ODD: dict[str, Any] = {"form": "warren with verticals", "panels": [3] * 3}
EIGHT: dict[str, Any] = {"form": "baltimore", "panels": [3] * 8}


def refused(change: dict[str, Any], kind: type[InputError], message: str) -> None:
    """Fail unless the changed layout is refused with this kind of error and this message from its start."""
    with pytest.raises(kind, match="^" + re.escape(message)) as caught:
        Layout(**(GOOD | change))
    assert type(caught.value) is kind
    assert caught.value.place.startswith("layout.")


@pytest.mark.parametrize(
    ("change", "message"),
    [
        ({"form": "Prat"}, '"pratt", "howe", "warren", "warren with verticals", "k", "baltimore" (nearest: "pratt")'),
        ({"deck": "trough"}, '"through", "pony", "deck" (nearest: "through")'),
        (FIVE | {"middle": "raising"}, '"falling", "rising", "crossed" (nearest: "rising")'),
    ],
)
def test_unknown_words_name_the_choices(change: dict[str, Any], message: str) -> None:
    word, given_word = list(change.items())[-1]
    refused(change, UnknownNameError, f'layout.{word}: "{given_word}" is not known; choose one of {message}')


def test_a_middle_panel_must_be_stated_and_only_there() -> None:
    asked = 'middle panel, L2-L3, whose diagonal must be stated: "falling" (toward +x), "rising" or "crossed"'
    refused(FIVE, MissingDataError, f'layout.middle: form "pratt" with 5 panels has a {asked}')
    only = 'layout.middle: only a "pratt" or "howe" with an odd number of panels has a middle diagonal, got '
    refused({"middle": "crossed"}, InputError, only + '"crossed" for form "pratt" with 4 panels')
    odd = WARREN | {"panels": [3] * 3, "depths": [2] * 3, "middle": "falling"}
    refused(odd, InputError, only + '"falling" for form "warren" with 3 panels')


@pytest.mark.parametrize(
    ("panels", "message"),
    [
        ([3, 3, 0, 3], "[2]: panel L2-L3 must be longer than 0 and finite, got 0 m"),
        ([-3, 3, 3, 3], "[0]: panel L0-L1 must be longer than 0 and finite, got -3 m"),
        ([3, 3, 3, np.nan], "[3]: panel L3-L4 must be longer than 0 and finite, got nan m"),
        ([3, np.inf, 3, 3], "[1]: panel L1-L2 must be longer than 0 and finite, got inf m"),
        ([[3, 3], [3, 3]], ": must be one row of numbers [m], got an array of shape (2, 2)"),
    ],
)
def test_panels_that_are_refused(panels: list[Any], message: str) -> None:
    refused({"panels": panels}, InputError, f"layout.panels{message}")
    if "L" in message:  # a deck truss names its panels by the upper chord
        refused({"panels": panels, "deck": "deck"}, InputError, f"layout.panels{message}".replace("L", "U"))


@pytest.mark.parametrize(
    ("change", "rule"),
    [
        ({"panels": [3]}, '"pratt" needs at least 2 panels, got 1'),
        ({"panels": []}, '"pratt" needs at least 2 panels, got 0'),
        (WARREN | {"panels": [3]}, '"warren" needs at least 2 panels, got 1'),
        (K | {"panels": [3] * 5}, '"k" needs an even number, at least 4 panels, got 5'),
        (K | {"panels": [3] * 2}, '"k" needs an even number, at least 4 panels, got 2'),
        (EIGHT | {"panels": [3] * 10}, '"baltimore" needs a multiple of 4, at least 8 panels, got 10'),
        (EIGHT | {"panels": [3] * 4}, '"baltimore" needs a multiple of 4, at least 8 panels, got 4'),
        (ODD | {"depths": [0, 2, 2, 0]}, '"warren with verticals" needs an even number of panels (both ends start at'),
        (ODD | {"depths": [2, 2, 2, 2]}, '"warren with verticals" needs an even number of panels (both ends start at'),
    ],
)
def test_numbers_of_panels_that_are_refused(change: dict[str, Any], rule: str) -> None:
    refused(change, InputError, f"layout.panels: form {rule}")


NOT_INSIDE = "finite and above 0, since only an end may taper to a point; got"


@pytest.mark.parametrize(
    ("change", "message"),
    [
        ({"depths": [0, 2, 2, 0]}, ': form "pratt" needs one depth at each panel point: 5 for 4 panels, got 4'),
        (
            WARREN | {"depths": [2] * 5},
            ': form "warren" needs one depth at the middle of each panel: 4 for 4 panels, got 5',
        ),
        (
            EIGHT | {"depths": [2] * 9},
            ': form "baltimore" needs one depth at each main (every second) panel point: 5 for 8 panels, got 9',
        ),
        ({"depths": 2}, ": must be one row of numbers [m], got an array of shape ()"),
        ({"depths": [0, 2, 0, 2, 0]}, f"[2]: the depth at panel point L2 must be {NOT_INSIDE} 0 m"),
        ({"depths": [0, np.nan, 2, 2, 0]}, f"[1]: the depth at panel point L1 must be {NOT_INSIDE} nan m"),
        (EIGHT | {"depths": [0, 2, 2, -2, 0]}, f"[3]: the depth at panel point L6 must be {NOT_INSIDE} -2 m"),
        ({"depths": [-1, 2, 2, 2, 0]}, "[0]: the depth at panel point L0 must be finite and 0 or more; got -1 m"),
        ({"depths": [0, 2, 2, 2, np.inf]}, "[4]: the depth at panel point L4 must be finite and 0 or more; got inf m"),
        (
            WARREN | {"depths": [0, 2, 2, 2]},
            "[0]: the depth at the middle of panel L0-L1 must be finite and above 0; got 0 m",
        ),
    ],
)
def test_depths_that_are_refused(change: dict[str, Any], message: str) -> None:
    refused(change, InputError, f"layout.depths{message}")
