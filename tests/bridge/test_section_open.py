"""Built-up sections that touch: shear centre and warping of their middle lines, cells, and what hangs together.

R. van Leeuwen and C. Ferster, *sectionproperties*, Journal of Open Source Software 8 (90), 6105, 2023, doi
10.21105/joss.06105 (title from memory): its finite elements hold without the assumption that parts are thin. Sections
are invented.
"""

from __future__ import annotations

from functools import reduce
from operator import add
from typing import TYPE_CHECKING, Final

import pytest
from numpy.testing import assert_allclose
from sectionproperties.analysis.section import Section as Meshed
from sectionproperties.pre.library.primitive_sections import rectangular_section

from movload.bridge.section import Section
from movload.bridge.section_bars import RoundBar
from movload.bridge.section_elements import Cut
from movload.bridge.section_open import groups, is_closed, open_twist
from movload.bridge.section_piece import Piece
from movload.bridge.shapes import Angle, Channel, Plate, RectangularTube
from movload.errors import InputError

if TYPE_CHECKING:
    from sectionproperties.pre.geometry import Geometry

    from movload.bridge.section_regions import Polygon, Ring

CHANNEL: Final = Channel(0.300, 0.090, 0.009, 0.0135)
SIDES: Final = (Piece(CHANNEL, -0.120, name="left"), Piece(CHANNEL, 0.120, mirror=True, name="right"))
COVER: Final = Piece(Plate(0.300, 0.010), 0.0, 0.155, name="cover")
BELOW: Final = Piece(Plate(0.300, 0.010), 0.0, -0.155, name="below")
CHORD: Final = Section("chord", (*SIDES, COVER))
LEG: Final = Angle(0.100, 0.100, 0.012)
GIRDER: Final = Section(
    "girder",
    (
        Piece(Plate(0.600, 0.010), turn=90), Piece(LEG, 0.005, 0.300, turn=-90), Piece(LEG, -0.005, 0.300, turn=180),
        Piece(LEG, 0.005, -0.300), Piece(LEG, -0.005, -0.300, turn=90), Piece(Plate(0.250, 0.012), 0.0, 0.306),
    ),
)  # fmt: skip


def meshed(region: Polygon | Ring) -> Geometry:
    """Return an upright rectangle as the package has it [mm]."""
    left, right, bottom, top = (1e3 * edge for edge in region.extent)
    return rectangular_section(d=top - bottom, b=right - left).shift_section(left, bottom)


@pytest.mark.parametrize(("section", "depth"), [(CHORD, 0.310), (GIRDER, 0.612)], ids=["chord", "girder"])
def test_middle_lines_against_finite_elements(section: Section, depth: float) -> None:
    """Thin parts against the whole metal: the place to 1.2 % of the depth (rolled shapes: 1 %), Cw to 3 %."""
    theirs = Meshed(
        reduce(add, (meshed(region) for piece in section.pieces for region in piece.regions)).create_mesh([60])
    )
    theirs.calculate_geometric_properties()
    theirs.calculate_warping_properties()
    ours = open_twist(section.pieces)
    assert_allclose([ours.x, ours.y], [1e-3 * float(place) for place in theirs.get_sc()], rtol=0, atol=0.012 * depth)
    assert_allclose(ours.warping, 1e-18 * theirs.get_gamma(), rtol=0.03)


def test_three_plates_are_a_channel() -> None:
    """The closed formula of a channel joins middle lines at corners, the plates at their faces: 2 %."""
    web, flange = Plate(0.268, 0.010), Plate(0.100, 0.016)
    plates = (Piece(web, 0.005, turn=90), Piece(flange, 0.050, 0.142), Piece(flange, 0.050, -0.142))
    ours, rolled = open_twist(plates), Section("channel", (Piece(Channel(0.300, 0.100, 0.010, 0.016)),)).properties
    assert_allclose(ours.x, rolled.shear_centre[0], rtol=0.02)
    assert_allclose(ours.warping, rolled.warping, rtol=0.02)


def test_what_hangs_together_as_new() -> None:
    assert groups(SIDES) == (("left",), ("right",))
    assert groups(CHORD.pieces) == (("left", "right", "cover"),)
    eaten = CHORD.with_cut("cover", Cut(amount=0.006))  # 3 mm off either face: still riveted to the flanges
    assert groups(eaten.pieces) == groups(CHORD.pieces)
    assert open_twist(eaten.pieces).warping < open_twist(CHORD.pieces).warping


def test_cells() -> None:
    assert is_closed((*CHORD.pieces, BELOW))
    assert not is_closed(CHORD.pieces)
    assert not is_closed(GIRDER.pieces)
    assert is_closed((Piece(RectangularTube(0.2, 0.2, 0.01)),))


@pytest.mark.parametrize(
    ("pieces", "said"),
    [
        (SIDES, "its pieces stand apart"),
        ((Piece(CHANNEL, turn=30, name="left"),), "left is turned by 30 degrees: only quarter turns are covered"),
        ((Piece(RoundBar(0.03), name="rod"),), "rod is round: no closed formula covers it"),
        (CHORD.with_cut("left", Cut("web", fraction=1.0)).pieces, "nothing is left of the web of left"),
    ],
)
def test_what_has_no_middle_lines(pieces: tuple[Piece, ...], said: str) -> None:
    with pytest.raises(InputError, match=said):
        open_twist(pieces)
