"""Figures by what is drawn: lines over stations, wheels where the axles stand, and words that never touch.

All bridges and vehicles are invented, in the invented Alder valley.
"""

from __future__ import annotations

import itertools
import re
import subprocess
import sys
from dataclasses import replace
from functools import lru_cache
from typing import TYPE_CHECKING, Any

import matplotlib as mpl
import numpy as np
import pytest
from matplotlib.collections import LineCollection
from matplotlib.colors import to_rgb, to_rgba
from matplotlib.lines import Line2D
from matplotlib.patches import Circle, Patch, Polygon
from matplotlib.text import Text
from numpy.testing import assert_allclose

from movload.bridge.layout import Layout, lay_out
from movload.bridge.truss import Member, Support, Truss
from movload.errors import InputError, UnknownNameError
from movload.peaks.sweep import sweep
from movload.report.drawing.ink import ACCENT, INK, LEAST_SIZE, PAPER
from movload.report.drawing.labels import Board, Lettering, Spot, squeezed, wrapped
from movload.report.drawing.left_out import DEPTH, ORDINATE, LeftOut, told_left_out
from movload.report.drawing.line_strip import kinks, with_zeros
from movload.report.drawing.train import load_levels
from movload.report.drawing.words import figures, lengths
from movload.report.figures import SUFFIXES, elevation_figure, figure_bytes, influence_figure, peak_figure
from movload.statics.influence import InfluenceLines, influence_lines
from movload.traffic.vehicle import Vehicle
from movload.units import UnitSystem

if TYPE_CHECKING:
    from collections.abc import Callable

    from matplotlib.figure import Figure

METRIC = UnitSystem("m", "kN", "mm")
US = UnitSystem("ft", "kip", "in")
TANKER = Vehicle("tractor + tanker", np.array([28e3, 62e3, 85e3, 85e3]), [2.8, 4.1, 1.5])
LOW_LOADER = Vehicle("low-loader", np.array([60e3, 90e3, 90e3, 110e3, 110e3, 110e3]), [3.4, 1.4, 6.0, 1.5, 1.5])
WORKS_TRAIN = Vehicle(
    "works train",
    1e3 * np.array([80, 160, 160, 160, 104, 104, 104, 104, 90, 90, 90, 90]),
    [2.4, 1.2, 1.2, 2.7, 1.2, 1.2, 1.2, 2.6, 1.2, 1.2, 1.2],
)
LAYOUTS = (("pratt", 4), ("pratt", 6), ("warren", 12), ("pratt", 20), ("k", 8), ("baltimore", 16))
WORST = {
    ("pratt", 4): "L1-L2",
    ("pratt", 6): "U2-L3",
    ("warren", 12): "L2-U3",
    ("pratt", 20): "U2-L3",
    ("k", 8): "U2-M2",
    ("baltimore", 16): "U2-M3",
    ("pratt", 48): "U2-L3",
}


@lru_cache(maxsize=16)
def standing(form: str, count: int) -> tuple[Truss, tuple[str, ...], InfluenceLines]:
    """Return a truss of unequal panels with a curved chord, its panel points and its lines."""
    panels = 4.3 + 0.05 * np.round(3 * np.sin(np.arange(count) * 1.9))
    size = {"warren": count, "baltimore": count // 2 + 1}.get(form, count + 1)
    depth = 0.13 * panels.sum()
    depths = np.round(depth * (0.75 + 0.25 * np.sin(np.pi * np.arange(size) / (size - 1))), 2)
    if form != "warren":
        depths[[0, -1]] = 0.0
    laid = lay_out(Layout(form, panels, depths, deck="through"))
    members = [Member(bar.start, bar.end, 1e-3, 2e11, role=bar.role) for bar in laid.bars]
    truss = Truss(laid.joints, members, [Support(laid.panel_points[0]), Support(laid.panel_points[-1], 0)])
    return truss, laid.panel_points, influence_lines(truss, laid.panel_points)


def drawn(figure: Figure, kind: type[Any], label: str) -> list[Any]:
    """Return the artists of a kind whose label starts so."""
    return [artist for artist in figure.findobj(kind) if str(artist.get_label()).startswith(label)]


def words(figure: Figure) -> list[Text]:
    """Return the texts that can be read."""
    return [text for text in figure.findobj(Text) if text.get_text() and text.get_visible() and on_sheet(text)]


def on_sheet(text: Text) -> bool:
    """Say whether a text is the figure's own (axes without a frame keep empty titles and ticks)."""
    figure = text.get_figure(root=True)
    return figure is not None and text in figure.texts


def texts(figure: Figure) -> list[str]:
    return [text.get_text() for text in words(figure)]


@lru_cache(maxsize=32)
def shared(made: Callable[[str, int], Figure], form: str, count: int) -> Figure:
    """Return a figure made once for the tests that only look at it."""
    return made(form, count)


def tanker_peak(form: str, count: int) -> Figure:
    return peak_of(form, count, WORST[form, count])


def peak_of(form: str, count: int, key: str, **given: Any) -> Figure:
    truss, _, lines = standing(form, count)
    return peak_figure(truss, lines, sweep(lines, TANKER)[key].highest, key, METRIC, title="Alderwater", **given)


def elevation(form: str, count: int) -> Figure:
    truss, points, _ = standing(form, count)
    return elevation_figure(truss, points, METRIC, title="Alderwater")


def three_lines(form: str, count: int) -> Figure:
    truss, points, lines = standing(form, count)
    keys = [WORST[form, count], f"{points[0]} y", f"{points[2]} down"]
    return influence_figure(truss, lines, keys, METRIC, title="Alderwater")


def assert_readable(figure: Figure) -> None:
    """No two boxes of words meet, none leaves the paper, none is smaller than the least size."""
    boxes = np.array([text.get_window_extent().extents for text in words(figure)])
    width, height = figure.bbox.size
    assert (boxes[:, :2] >= 0).all()
    assert (boxes[:, 2:] <= (width, height)).all()
    apart = (boxes[:, None, :2] >= boxes[None, :, 2:]) | (boxes[:, None, 2:] <= boxes[None, :, :2])
    meeting = np.argwhere(~apart.any(axis=2) & ~np.eye(len(boxes), dtype=bool))
    assert not meeting.size, [(texts(figure)[a], texts(figure)[b]) for a, b in meeting if a < b]
    assert min(float(text.get_fontsize()) for text in words(figure)) >= LEAST_SIZE


@pytest.mark.parametrize(("form", "count"), LAYOUTS)
@pytest.mark.parametrize("made", [elevation, three_lines, tanker_peak])
def test_words_never_touch(made: Callable[[str, int], Figure], form: str, count: int) -> None:
    figure = shared(made, form, count)
    assert_readable(figure)
    assert 299 <= figure.get_size_inches()[0] * 25.4 <= 421  # mm: the widths the rules allow


@pytest.mark.parametrize(("form", "count"), LAYOUTS)
def test_every_joint_and_every_stressed_bar_is_labelled(form: str, count: int) -> None:
    truss, _, lines = standing(form, count)
    figure = shared(tanker_peak, form, count)
    said = texts(figure)
    assert set(truss.joints) <= set(said)
    peak = sweep(lines, TANKER)[WORST[form, count]].highest
    forces = lines.under(peak.placement.panel_loads(lines.stations)[:, None])[: len(truss.members), 0]
    stressed = int((np.abs(forces) >= 0.005 * np.abs(forces).max()).sum())
    assert sum(text.endswith((" T", " C")) and "kN" not in text for text in said) == stressed
    assert not announced(figure)


def announced(figure: Figure) -> dict[str, int]:
    """Return how many labels of each kind the caption says are not written, by the kind in the singular or plural."""
    lead = "Not written for want of room:".replace(" ", r"\s+")  # the caption is broken into lines anywhere
    told = re.search(rf"{lead}\s+(.*?)\.$", "\n".join(texts(figure)), re.DOTALL | re.MULTILINE)
    parts = [part.split(" ", 1) for part in " ".join(told[1].split()).split("; ")] if told else []
    return {kind.split(",")[0].removesuffix("s"): int(count) for count, kind in parts}


def test_crowded_labels_are_left_out_and_the_figure_says_so() -> None:
    """32 panels do not fit: the governing bar stays, what is left out is counted, nothing touches."""
    truss, _, lines = standing("pratt", 32)
    peak = sweep(lines, TANKER)["U2-L3"].highest
    forces = 1e3 * np.round(123456.0 + np.arange(len(truss.members)))
    figure = peak_figure(truss, lines, peak, "U2-L3", METRIC, title="Alderwater", forces=forces)
    assert_readable(figure)
    assert "up to 1235" in " ".join(texts(figure))  # the largest of them, 123 5.. T
    written = [text for text in texts(figure) if re.fullmatch(r"1235\d\d T", text)]
    assert len(written) + announced(figure)["bar force"] == len(truss.members) - 1
    assert [text for text in words(figure) if to_rgb(text.get_color()) == to_rgb(ACCENT)]


@pytest.mark.parametrize("count", [20, 32])
def test_what_is_not_written_is_counted_kind_by_kind(count: int) -> None:
    """A long works train: what is written and what the caption says is not are all there is, with nothing twice."""
    truss, _, lines = standing("pratt", count)
    peak = sweep(lines, WORKS_TRAIN)["U2-L3"].highest
    figure = peak_figure(truss, lines, peak, "U2-L3", METRIC, title="Alderwater")
    assert_readable(figure)
    said, missing, x = texts(figure), announced(figure), peak.placement.x
    spacings = {f"{gap:.2f}" for gap in WORKS_TRAIN.spacings}
    assert sum(text in spacings for text in said) + missing.get("axle spacing", 0) == x.size - 1
    kinked = [station for station in lines.stations[kinks(lines["U2-L3"])] if not np.isclose(x, station).any()]
    ordinates = [text for text in said if re.fullmatch(r"[+−]\d\.\d{3}", text)]
    assert len(ordinates) + missing.get("influence ordinate", 0) == x.size + len(kinked)
    black = [text.get_text() for text in words(figure) if to_rgb(text.get_color()) == to_rgb(INK)]
    forces = lines.under(peak.placement.panel_loads(lines.stations)[:, None])[: len(truss.members), 0]
    stressed = int((np.abs(forces) >= 0.005 * np.abs(forces).max()).sum())
    assert sum(bool(re.fullmatch(r"\d+ [TC]", text)) for text in black) + missing.get("bar force", 0) == stressed - 1
    assert missing["axle spacing"] > 0  # or there would be nothing to own up to
    assert set(missing) <= {"axle spacing", "influence ordinate", "bar force"}


@pytest.mark.parametrize("made", [elevation, three_lines])
def test_an_elevation_and_influence_lines_own_up_too(made: Callable[[str, int], Figure]) -> None:
    """48 panels: not every x finds room in its row."""
    figure = made("pratt", 48)
    assert_readable(figure)
    (head,) = (text for text in words(figure) if text.get_text() == "x, m")
    level = head.get_position()[1]
    row = [text for text in words(figure) if abs(text.get_position()[1] - level) < 0.5]  # mm
    missing = announced(figure)
    assert missing["panel points' x"] > 0
    assert len(row) - 1 + missing["panel points' x"] == 49


def test_nothing_left_out_is_not_spoken_of() -> None:
    for made in (elevation, three_lines, tanker_peak):
        assert announced(shared(made, "pratt", 6)) == {}
    assert told_left_out(LeftOut()) == told_left_out(LeftOut({ORDINATE: 0})) == ""
    assert told_left_out(LeftOut({ORDINATE: 1, DEPTH: 2})) == (
        "Not written for want of room: 1 influence ordinate; 2 depths."
    )


@pytest.mark.parametrize("form", ["pratt", "baltimore"])
def test_lines_are_drawn_over_their_stations(form: str) -> None:
    truss, points, lines = standing(form, 6 if form == "pratt" else 16)
    keys = ["U2-L2", f"{points[-1]} normal", f"{points[2]} down"]
    figure = influence_figure(truss, lines, keys, METRIC, title="Alderwater")
    places = []
    for key in keys:
        (line,) = drawn(figure, Line2D, f"influence line of {key}")
        assert_allclose(line.get_xdata(), lines.stations, rtol=0)
        assert_allclose(line.get_ydata(), lines[key].ordinates, rtol=0)
        places.append(line.get_transform().transform(np.column_stack((line.get_xdata(), line.get_ydata())))[:, 0])
    assert_allclose(places[1], places[0], rtol=1e-12)  # one x scale; round-off of the transforms only
    assert_allclose(places[2], places[0], rtol=1e-12)


def test_the_elevation_stands_over_its_lines_on_the_same_scale_both_ways() -> None:
    truss, _, _ = standing("pratt", 6)
    figure = shared(three_lines, "pratt", 6)
    (bar,) = drawn(figure, Line2D, "bar U3-L3")
    pixels = bar.get_transform().transform(bar.get_xydata())
    (line,) = drawn(figure, Line2D, "influence line of U2-L3")
    station = line.get_transform().transform((truss.joints["L3"][0], 0.0))[0]
    assert_allclose(pixels[:, 0], station, rtol=1e-12)  # round-off of the transforms only
    (chord,) = drawn(figure, Line2D, "bar L2-L3")
    metres, wide = np.ptp(chord.get_xdata()), np.ptp(chord.get_transform().transform(chord.get_xydata())[:, 0])
    assert_allclose(np.ptp(pixels[:, 1]) / np.ptp(bar.get_ydata()), wide / metres, rtol=1e-9)  # the same


def test_positive_is_filled_upward_and_negative_is_hatched() -> None:
    figure = shared(three_lines, "pratt", 6)
    (positive,) = drawn(figure, Polygon, "positive area of U2-L3")
    (negative,) = drawn(figure, Polygon, "negative area of U2-L3")
    assert positive.get_xy()[:, 1].min() == 0 < positive.get_xy()[:, 1].max()
    assert negative.get_xy()[:, 1].max() == 0 > negative.get_xy()[:, 1].min()
    hatched = drawn(figure, LineCollection, "hatching of")
    assert [artist.get_label() for artist in hatched] == ["hatching of U2-L3"]
    (line,) = drawn(figure, Line2D, "influence line of U2-L3")
    assert line.get_transform().transform((0, 1))[1] > line.get_transform().transform((0, 0))[1]


def test_a_zero_inside_a_panel_is_marked_where_the_line_crosses() -> None:
    _, _, lines = standing("pratt", 6)
    figure = shared(three_lines, "pratt", 6)
    x, y = lines.stations[2:4], lines["U2-L3"].ordinates[2:4]
    zero = x[0] - y[0] * (x[1] - x[0]) / (y[1] - y[0])
    (ring,) = drawn(figure, Circle, "zero of U2-L3")
    (line,) = drawn(figure, Line2D, "influence line of U2-L3")
    place = line.get_transform().transform((zero, 0.0))
    assert_allclose(ring.get_transform().transform_path(ring.get_path()).get_extents().get_points().mean(axis=0), place)
    assert f"x = {zero:.2f}" in texts(figure)


def test_kinks_are_found_and_written() -> None:
    _, _, lines = standing("pratt", 6)
    assert sorted(kinks(lines["U2-L3"])) == [2, 3]
    assert sorted(kinks(lines["L0 y"])) == [0]
    said = texts(shared(three_lines, "pratt", 6))
    for station in (2, 3):
        ordinate = lines["U2-L3"].ordinates[station]
        assert f"{'+' if ordinate > 0 else '−'}{abs(ordinate):.3f}" in said
    assert {"+T", "C", "+up", "+down", "kN/kN", "mm/kN"} <= set(said)
    millimetres = 1e6 * lines["L2 down"].ordinates[2]  # m/N to mm/kN
    assert f"+{millimetres:.3f}" in said


def test_zeros_are_inserted_only_where_the_sign_changes() -> None:
    x, y = with_zeros(np.array([0.0, 2.0, 3.0, 5.0]), np.array([0.0, -1.0, 1.0, 0.0]))
    assert_allclose(x, [0.0, 2.0, 2.5, 3.0, 5.0], rtol=0)
    assert_allclose(y, [0.0, -1.0, 0.0, 1.0, 0.0], rtol=0)


@pytest.mark.parametrize("side", ["highest", "lowest"])
def test_wheels_and_stems_stand_where_the_axles_do(side: str) -> None:
    truss, _, lines = standing("pratt", 6)
    peak = getattr(sweep(lines, TANKER)["U2-L3"], side)
    figure = peak_figure(truss, lines, peak, "U2-L3", METRIC, title="Alderwater")
    wheels = sorted(drawn(figure, Circle, "wheel"), key=lambda wheel: wheel.get_label())
    assert_allclose(np.array([wheel.center[0] for wheel in wheels]), peak.placement.x, rtol=0)
    assert {wheel.get_facecolor()[:3] for wheel in wheels} == {to_rgb(INK)}
    stems = drawn(figure, Line2D, "stem")
    assert_allclose(sorted(stem.get_xdata()[0] for stem in stems), np.sort(peak.placement.x), rtol=0)
    for stem in stems:
        assert_allclose(stem.get_ydata(), [0.0, float(lines["U2-L3"].at(stem.get_xdata()[0]))], rtol=0)
        ordinate = stem.get_ydata()[1]
        assert f"{'+' if ordinate > 0 else '−'}{abs(ordinate):.3f}" in texts(figure)
    assert {"28", "62", "85", "2.80", "4.10", "1.50", "tractor + tanker, 260 kN"} <= set(texts(figure))


@pytest.mark.parametrize("side", ["highest", "lowest"])
def test_the_arrow_points_where_the_vehicle_goes(side: str) -> None:
    truss, _, lines = standing("pratt", 6)
    peak = getattr(sweep(lines, TANKER)["U2-L3"], side)
    figure = peak_figure(truss, lines, peak, "U2-L3", METRIC, title="Alderwater")
    (arrow,) = drawn(figure, Polygon, "heading arrow")
    tip, *back = arrow.get_xy()[:3]
    assert np.sign(tip[0] - back[0][0]) == peak.heading
    toward = {1: "heading right →", -1: "heading left ←"}[peak.heading]
    (placed,) = [text for text in texts(figure) if text.startswith("front axle")]
    assert placed.startswith(f"front axle at x = {peak.position:.2f} m, {toward}")
    assert placed.endswith(f"axle {peak.axle + 1} on L{peak.station}")


def test_wheels_off_the_bridge_are_open_and_grey_and_those_far_off_are_counted() -> None:
    truss, _, lines = standing("pratt", 4)
    peak = sweep(lines, LOW_LOADER)["U1-L1"].highest
    figure = peak_figure(truss, lines, peak, "U1-L1", METRIC, title="Alderwater")
    x = peak.placement.x
    off = (x < lines.stations[0]) | (x > lines.stations[-1])
    far = (x < -0.25 * lines.stations[-1]) | (x > 1.25 * lines.stations[-1])
    assert far.any()
    assert (off & ~far).any()
    wheels = {int(wheel.get_label().split()[1]): wheel for wheel in drawn(figure, Circle, "wheel")}
    assert sorted(wheels) == list(np.flatnonzero(~far))
    for number, wheel in wheels.items():
        assert (to_rgb(wheel.get_facecolor()[:3]) == to_rgb(PAPER)) == off[number]
        assert wheel.center[0] == x[number]
    assert [text for text in texts(figure) if f"{far.sum()} more" in text]
    assert len(drawn(figure, Line2D, "stem")) == (~off).sum()
    assert_readable(figure)


def test_tension_is_open_compression_solid_and_idle_dotted_and_weight_grows_with_force() -> None:
    truss, _, _ = standing("pratt", 6)
    forces = np.linspace(-200e3, 200e3, len(truss.members))
    forces[len(forces) // 2 :: 2] *= 0.5
    forces[3] = 0.0
    figure = peak_of("pratt", 6, "U2-L3", forces=forces, caption="Bar forces: invented")
    by_name = {line.get_label().removeprefix("bar "): line for line in drawn(figure, Line2D, "bar ")}
    for member, force in zip(truss.members, forces, strict=True):
        line = by_name[member.name]
        assert (f"{member.name} open" in by_name) == (force > 1e3)
        assert (line.get_linestyle() == "--") == (abs(force) < 1e3)
    black = [
        number for number, member in enumerate(truss.members) if member.name != "U2-L3" and abs(forces[number]) > 1e3
    ]
    for sign in (1, -1):
        order = sorted((n for n in black if np.sign(forces[n]) == sign), key=lambda n: abs(forces[n]))
        weights = [by_name[truss.members[n].name].get_linewidth() for n in order]
        assert weights == sorted(weights)
        assert weights[-1] > 2 * weights[0] if sign < 0 else weights[-1] > 1.5 * weights[0]
    assert {"200 C", "200 T"} & set(texts(figure))
    assert [text for text in texts(figure) if text.startswith("Bar forces: invented. Influence line")]


def test_default_forces_are_those_of_the_placement() -> None:
    _, _, lines = standing("pratt", 6)
    peak = sweep(lines, TANKER)["U2-L3"].highest
    said = texts(shared(tanker_peak, "pratt", 6))
    for name in ("U1-U2", "L3-L4"):
        force = float(lines[name].at(peak.placement.x) @ peak.placement.load) / 1e3
        assert f"{abs(force):.0f} {'T' if force > 0 else 'C'}" in said
    assert f"U2-L3   {peak.value / 1e3:.1f} kN T" in said
    assert f"U2-L3  {peak.value / 1e3:.0f} T" in said


def accented(figure: Figure) -> set[str]:
    """Return what is drawn in the accent: labels of strokes and shapes, texts."""
    shown = {artist for artist in figure.findobj() if to_rgb(ACCENT) in colours(artist)}
    return {artist.get_text() if isinstance(artist, Text) else str(artist.get_label()) for artist in shown}


def colours(artist: Any) -> list[tuple[float, ...]]:
    """Return every colour an artist shows."""
    if isinstance(artist, (Line2D, Text)):
        return [to_rgb(artist.get_color())]
    if isinstance(artist, Patch):
        both: list[Any] = [artist.get_facecolor(), artist.get_edgecolor()]
        return [to_rgb(colour) for colour in both if to_rgba(colour)[3]]
    return [to_rgb(colour) for colour in np.asarray(artist.get_colors())] if isinstance(artist, LineCollection) else []


@pytest.mark.parametrize("made", [elevation, three_lines, tanker_peak])
def test_all_is_grey_but_the_one_accent(made: Callable[[str, int], Figure]) -> None:
    shown = {colour for artist in shared(made, "pratt", 6).findobj() for colour in colours(artist)}
    coloured = {colour for colour in shown if len(set(colour)) > 1}
    assert coloured == (set() if made is elevation else {to_rgb(ACCENT)})


def test_only_the_governing_bar_is_accented_and_it_is_framed_too() -> None:
    figure = shared(tanker_peak, "pratt", 6)
    assert {label for label in accented(figure) if label.startswith(("bar", "wheel", "stem"))} == {"bar U2-L3"}
    assert len([frame for frame in figure.findobj(Polygon) if to_rgb(ACCENT) in colours(frame)]) == 1


@pytest.mark.parametrize(("key", "joint"), [("L0 y", "L0"), ("L6 normal", "L6"), ("L3 down", "L3")])
def test_a_reaction_or_deflection_accents_its_joint_and_no_bar(key: str, joint: str) -> None:
    figure = peak_of("pratt", 6, key)
    marked = accented(figure)
    assert f"mark {joint}" in marked
    assert joint in marked
    assert not [label for label in marked if label.startswith("bar")]
    unit = "mm" if key.endswith("down") else "kN"
    assert [text for text in marked if text.startswith(f"{key}   ") and text.endswith(unit)]


def test_a_zero_peak_is_drawn_without_a_train() -> None:
    truss, _, lines = standing("pratt", 6)
    off = sweep(lines, TANKER)["L2-L3"].lowest
    assert off.heading == 0
    figure = peak_figure(truss, lines, off, "L2-L3", METRIC, title="Alderwater")
    assert "no position of this vehicle gives any" in texts(figure)
    assert not drawn(figure, Circle, "wheel")
    assert not drawn(figure, Line2D, "deck")
    assert not drawn(figure, Line2D, "stem")
    assert len(drawn(figure, Line2D, "bar ")) == len(truss.members)
    assert_readable(figure)


def test_us_units_are_shown() -> None:
    truss, points, lines = standing("pratt", 6)
    peak = sweep(lines, TANKER)["L3 down"].highest
    said = texts(peak_figure(truss, lines, peak, "L3 down", US, title="Alderwater"))
    assert "in/kip" in said
    assert f"L3 down   {peak.value / 0.0254:.3f} in" in said
    assert "tractor + tanker, 58.5 kip" in said
    said = texts(elevation_figure(truss, points, US, title="Alderwater"))
    assert f"{25.9 / 0.3048:.3f}" in said
    assert "x, ft" in said


def test_panel_lengths_overall_length_and_depths_are_written() -> None:
    truss, points, _ = standing("pratt", 6)
    said = texts(shared(elevation, "pratt", 6))
    x = [truss.joints[point][0] for point in points]
    for length in [*np.diff(x), x[-1]]:
        assert f"{length:.2f}" in said
    for number in range(1, 6):
        assert f"{truss.joints[f'U{number}'][1]:.2f}" in said
    assert said.count(f"{truss.joints['U3'][1]:.2f}") == 2  # in its row and as the upright dimension
    assert [text for text in said if "x = 0 at L0; left = start of x" in text]


def test_a_subdivided_end_post_has_no_depth() -> None:
    truss, _, _ = standing("baltimore", 16)
    said = texts(shared(elevation, "baltimore", 16))
    assert f"{truss.joints['U2'][1]:.2f}" in said
    assert not [text for text in said if text.startswith(f"{truss.joints['M1'][1]:.2f}")]


@pytest.mark.parametrize(
    ("slides", "drawn_at"),
    [(0.0, (0, -1)), (30.0, (0.5, -0.866)), (-45.0, (-0.707, -0.707)), (180.0, (0, 1)), (90.0, (1, 0))],
)
def test_a_roller_stands_on_its_bed(slides: float, drawn_at: tuple[float, float]) -> None:
    """The roller is on the side it pushes from; a steep one on the side the truss leaves free."""
    truss, points, _ = standing("pratt", 6)
    held = Truss(truss.joints, truss.members, [Support("L0"), Support("L6", slides), Support("L3", 0)])
    figure = elevation_figure(held, points, METRIC, title="Alderwater")
    (roller,) = drawn(figure, Circle, "roller L6")
    (joint,) = drawn(figure, Circle, "joint L6")
    away = np.subtract(roller.center, joint.center)
    assert_allclose(away / np.hypot(*away), drawn_at, atol=1e-3)  # the expected values have 3 decimals
    (bed,) = drawn(figure, Line2D, "bed L6")
    along = np.ptp(bed.get_xdata()), np.ptp(bed.get_ydata())
    assert_allclose(np.dot(np.abs(away), (along[0], -along[1])), 0, atol=1e-9) if slides in {0, 180, 90} else None
    assert (f"{slides:.0f}°".replace("-", "−") in texts(figure)) == (slides != 0)
    assert drawn(figure, Polygon, "pinned L0")
    assert_readable(figure)


def test_abutments_and_named_bars_are_drawn() -> None:
    laid = lay_out(Layout("pratt", np.full(4, 4.0), np.full(5, 3.0), deck="deck"))
    members = [
        Member(bar.start, bar.end, 1e-3, 2e11, name={"U1-L2": "main tie"}.get(f"{bar.start}-{bar.end}", ""))
        for bar in laid.bars
    ]
    truss = Truss(laid.joints, members, [Support("L0"), Support("L4", 0)])
    points: list[str | float] = [-2.5, *laid.panel_points, 18.0]
    figure = elevation_figure(truss, points, METRIC, title="Alderwater")
    assert len(drawn(figure, Polygon, "abutment")) == len(drawn(figure, Line2D, "stringer")) == 2
    assert {"main tie", "2.50", "−2.50"} <= set(texts(figure))
    lines = influence_lines(truss, points)
    figure = peak_figure(truss, lines, sweep(lines, TANKER)["main tie"].highest, "main tie", METRIC, title="Alderwater")
    assert len(drawn(figure, Polygon, "abutment")) == 2
    assert texts(figure).count("abut.") == 2
    assert_readable(figure)


@pytest.mark.parametrize(
    ("made", "suffix"),
    [*((tanker_peak, suffix) for suffix in SUFFIXES), (elevation, ".svg"), (three_lines, ".svg")],
)
def test_same_input_same_bytes(made: Callable[[str, int], Figure], suffix: str) -> None:
    figure = shared(made, "pratt", 4)
    first = figure_bytes(figure, suffix)
    assert first == figure_bytes(figure, suffix)
    with mpl.rc_context({"lines.linewidth": 7.0, "font.size": 30.0, "savefig.dpi": 30, "text.color": "red"}):
        assert first == figure_bytes(made("pratt", 4), suffix)  # nobody's settings reach a figure
    assert first.startswith({".png": b"\x89PNG", ".svg": b"<?xml", ".pdf": b"%PDF"}[suffix])
    assert b"Date" not in first


def test_an_unknown_suffix_names_the_three() -> None:
    with pytest.raises(InputError, match=r'figure: a figure is written as \.png, \.svg, \.pdf, got "\.gif"'):
        figure_bytes(shared(elevation, "pratt", 4), ".gif")


def test_matplotlibs_settings_stay_as_they_were() -> None:
    before = dict(mpl.rcParams)
    figure_bytes(shared(tanker_peak, "pratt", 4), ".svg")
    assert dict(mpl.rcParams) == before


def test_pyplot_is_never_loaded_and_matplotlib_only_with_the_figures() -> None:
    code = (
        "import sys, movload.report, movload.report.columns; assert 'matplotlib' not in sys.modules; "
        "import movload.report.figures; assert 'matplotlib' in sys.modules; "
        "assert 'matplotlib.pyplot' not in sys.modules"
    )
    subprocess.run([sys.executable, "-c", code], check=True)


@pytest.mark.parametrize("keys", [[], ["U1-U2"] * 7, "U1-U2"])
def test_one_to_six_lines(keys: Any) -> None:
    truss, _, lines = standing("pratt", 6)
    with pytest.raises(InputError, match="keys: a figure holds 1 to 6 influence lines, got"):
        influence_figure(truss, lines, keys, METRIC, title="Alderwater")


def test_an_unknown_row_is_refused() -> None:
    truss, _, lines = standing("pratt", 6)
    with pytest.raises(UnknownNameError, match='row "U1-U9" is not known'):
        influence_figure(truss, lines, ["U1-U9"], METRIC, title="Alderwater")


@pytest.mark.parametrize("forces", [np.zeros(3), np.full(21, np.nan)])
def test_forces_must_be_one_finite_number_a_member(forces: Any) -> None:
    with pytest.raises(InputError, match="forces: one finite force a member is needed, 21 in all, got"):
        peak_of("pratt", 6, "U2-L3", forces=forces)


def test_share_and_impact_are_told() -> None:
    truss, _, lines = standing("pratt", 6)
    peak = sweep(lines, TANKER)["U2-L3"].highest
    placement = replace(peak.placement, share=np.full(4, 0.62), impact=np.full(4, 0.3))
    shared = type(peak)(
        peak.value, peak.position, peak.heading, peak.spacings, peak.axle, peak.station, peak.case, placement
    )
    said = texts(peak_figure(truss, lines, shared, "U2-L3", METRIC, title="Alderwater"))
    assert [text for text in said if "share 0.62 and impact 0.3 included" in text]


def test_a_long_title_is_squeezed_onto_the_sheet() -> None:
    truss, points, _ = standing("pratt", 6)
    figure = elevation_figure(truss, points, METRIC, title="Alderwater " * 40)
    assert_readable(figure)
    assert [text for text in texts(figure) if text.endswith("…")]


def test_lettering_is_wrapped_squeezed_and_measured() -> None:
    assert " ".join(wrapped("one two three four", 9.0, 15.0)) == "one two three four"
    assert max(Lettering(line, 9.0).width for line in wrapped("one two three four", 9.0, 15.0)) <= 15.0
    assert squeezed("U1-U2", 9.0, 100.0).size == 9.0
    assert LEAST_SIZE <= squeezed("U10-U11", 9.0, 13.0).size < 9.0
    assert squeezed("a name much too long", 9.0, 13.0).width <= 13.0


def test_the_board_keeps_words_off_lines_words_and_edges() -> None:
    board = Board(100.0, 100.0)
    board.keep_clear([(0.0, 50.0), (100.0, 50.0)], 1.0)
    word = Lettering("212 T", 9.0)
    assert not board.free(word, [Spot(50.0, 50.0), Spot(50.0, 52.0), Spot(1.0, 80.0), Spot(50.0, 49.0, 90.0)])
    assert board.free(word, [Spot(50.0, 54.0)])
    board.claim(word, Spot(50.0, 54.0))
    assert not board.free(word, [Spot(55.0, 55.0)])
    assert board.free(word, [Spot(55.0, 55.0), Spot(50.0, 60.0)]) == [Spot(50.0, 60.0)]


def test_axle_loads_rise_where_they_would_touch() -> None:
    assert load_levels([0.0, 20.0, 40.0], [6.0, 6.0, 6.0]) == [0, 0, 0]
    assert load_levels([0.0, 4.0, 8.0], [6.0, 6.0, 6.0]) == [0, 1, 0]
    assert load_levels([0.0, 1.0], [6.0, 6.0]) == [0, -1]


def test_numbers_are_written_with_the_digits_they_need() -> None:
    assert lengths([4.3, 4.45], METRIC) == ["4.30", "4.45"]
    assert lengths([4.3, 4.455], METRIC) == ["4.300", "4.455"]
    assert lengths([1 / 3], METRIC, rounded=True) == ["0.33"]
    assert lengths([-2.5], UnitSystem("mm", "kN", "mm")) == ["−2500"]
    assert [figures(value) for value in (212.0, 21.2, 0.0212, 0.0)] == [0, 1, 4, 0]


def test_close_axles_of_a_train_are_readable() -> None:
    truss, _, lines = standing("pratt", 6)
    train = Vehicle(
        "works train", 1e3 * np.array([80, 160, 160, 160, 104, 104, 90, 90]), [2.4, 1.5, 1.5, 2.7, 1.5, 4.2, 1.6]
    )
    peak = sweep(lines, train)["U2-U3"].lowest
    figure = peak_figure(truss, lines, peak, "U2-U3", METRIC, title="Alderwater")
    assert_readable(figure)
    assert texts(figure).count("160") == 3


def test_dimension_pieces_meet_end_to_end() -> None:
    strings = drawn(shared(elevation, "pratt", 6), Line2D, "dimension string")
    levels = sorted({line.get_ydata()[0] for line in strings})
    assert len(levels) == 2
    assert all(a < b for a, b in itertools.pairwise(levels))
    assert_allclose(strings[0].get_xdata(), strings[1].get_xdata(), rtol=1e-9)  # panels and whole span the same
