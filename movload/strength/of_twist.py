"""Whether a bar may buckle with twist, and what that takes of its section: always with the case in words.

Closed and solid sections, and those that lacing or battens make a box, do not. All others do: by closed formulas, by
what was typed, or as an open section of middle lines (`movload.bridge.section_open`).
"""

from __future__ import annotations

from typing import TYPE_CHECKING, Final

from movload.bridge.section import Section
from movload.bridge.section_builtup import is_mirrored
from movload.bridge.section_open import groups, is_closed, open_twist
from movload.errors import InputError, MissingDataError
from movload.strength.beam_column import Torsion
from movload.strength.strength import Step

if TYPE_CHECKING:
    from movload.bridge.loss import CrossSection
    from movload.bridge.made import Held, Joined, Made
    from movload.bridge.section_piece import Piece
    from movload.bridge.section_properties import Properties
    from movload.strength.of_section import Axes

_OWN: Final = "movload"
_VLASOV: Final = "Vlasov, Thin-Walled Elastic Beams, from memory"
_HINT: Final = "type torsion, warping and the shear centre in the section"
_SOLID: Final = frozenset({"bar", "round"})


def twist_of(made: Made, held: Held, axes: Axes) -> tuple[Torsion | None, tuple[Step, ...]]:
    """Return what twist asks for, None where it cannot govern, and the steps that say which case it is.

    Raises
    ------
    MissingDataError
        A shape that no formula covers and of which nothing was typed.
    """
    section, found = made.section.section, made.section.middle
    stated = _no_twist(section.pieces, made.joined) if isinstance(section, Section) else ""
    if stated and not _part_gone(found):
        return None, (Step("twist", f"{stated}: twist cannot govern; K l of twist", held.kl_z, "m", _OWN),)
    properties = found.properties
    try:
        x_0, y_0, warped = _constants(found, properties)
        torsion = properties.torsion
    except InputError as error:
        raise MissingDataError(f"buckling with twist: {error.rule}; {_HINT}", place=error.place) from None
    polar = x_0**2 + y_0**2 + (properties.i_x + properties.i_y) / properties.area
    x_0, y_0 = axes.turned((x_0, y_0))
    steps = (
        warped,
        Step("J", "torsion constant, of a built-up section the sum over its pieces", torsion, "m4", properties.title),
        Step("x0", "shear centre from the centroid, along the first axis", x_0, "m", properties.title),
        Step("y0", "along the second axis", y_0, "m", properties.title),
    )
    return Torsion(kl_z=held.kl_z, j=torsion, c_w=warped.value, x0=x_0, y0=y_0, polar=polar), steps


def _no_twist(pieces: tuple[Piece, ...], joined: Joined | None) -> str:
    """Return why a section as new cannot buckle with twist, "" where it can."""
    forms = {piece.shape.form for piece in pieces}
    if len(pieces) == 1:
        if forms <= _SOLID:
            return "solid, or a round tube"
        return "closed" if forms == {"tube"} else ""
    if joined is not None and _is_box(pieces, joined):
        return "a box by its lacing" if joined.laced else "a box by its battens"
    try:
        return "closed by its plates" if is_closed(pieces) else ""
    except InputError:  # what has no middle lines is settled by what was typed
        return ""


def _is_box(pieces: tuple[Piece, ...], joined: Joined) -> bool:
    """Whether lacing or battens close a section's open sides: on both faces, or on the one without a cover plate.

    Their shear stiffness works as a thin plate would (Kollbrunner and Basler, *Torsion in Structures*, from memory),
    and a cell's torsion constant is hundreds of times that of its open parts.
    """
    if not is_mirrored(pieces, joined.axis):
        return False
    if len(groups(pieces)) > 1:
        two_angles = len(pieces) == 2 and {piece.shape.form for piece in pieces} == {"angle"}
        return not two_angles and (not joined.laced or joined.planes > 1)
    return not is_mirrored(pieces, "x" if joined.axis == "y" else "y")  # no I: its parts have no open side to close


def _part_gone(found: CrossSection) -> bool:
    """Whether a part of a section is wholly gone at mid length: what was closed may be open."""
    if not isinstance(found, Section):
        return False
    return any(not part.area for piece in found.pieces for part, _ in piece.parts_and_new)


def _constants(found: CrossSection, properties: Properties) -> tuple[float, float, Step]:
    """Return shear centre from the centroid [m], and the step to the warping constant."""
    if not properties.has("x_0"):
        return _as_open(found, properties)
    x_0, y_0 = properties.shear_offset
    if properties.has("warping"):
        return x_0, y_0, Step("Cw", "warping constant", properties.warping, "m6", properties.title)
    by_symmetry = isinstance(found, Section) and found.shear_centre is None
    if isinstance(found, Section) and by_symmetry and len(groups(found.pieces)) == 1:
        return x_0, y_0, _as_open(found, properties)[2]
    return x_0, y_0, Step("Cw", "left out (safe): not typed", 0.0, "m6", _OWN)


def _as_open(found: CrossSection, properties: Properties) -> tuple[float, float, Step]:
    """Return the same by the middle lines of a section's pieces, lacing and cells left out."""
    if not isinstance(found, Section) or len(found.pieces) == 1:
        x_0, y_0 = properties.shear_offset  # says why there is none
        return x_0, y_0, Step("Cw", "warping constant", properties.warping, "m6", properties.title)
    x, y, warping = open_twist(found.pieces)
    said = "integral of the sectorial area's square along the middle lines, as an open section (safe)"
    return x - properties.x, y - properties.y, Step("Cw", said, warping, "m6", _VLASOV)
