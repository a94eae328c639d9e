"""How one piece twists: torsion constant, shear centre, warping constant, by the closed formulas of thin parts.

Open shapes: J is the sum of b t^3 / 3 over the parts; shear centre and warping constant follow from the sectorial area
along the parts' middle lines. Tubes: Bredt's J = 4 A^2 / (sum of b / t) on the middle lines. A single rectangle has
J = b t^3 (1/3 - 0.21 t/b (1 - t^4 / (12 b^4))), a round its polar moment of inertia.

References
----------
W. C. Young and R. G. Budynas, *Roark's Formulas for Stress and Strain*, torsion of solid sections (from memory).
P. A. Seaburg and C. J. Carter, *Torsional Analysis of Structural Steel Members*, AISC Design Guide 9 (from memory):
the warping constants and shear centres of angles, channels and I shapes, which the middle lines reproduce.
"""

from __future__ import annotations

import math
from typing import TYPE_CHECKING, NamedTuple

from movload.bridge.section_elements import Rect, Round
from movload.bridge.section_sectorial import Line, sectorial
from movload.errors import InputError

if TYPE_CHECKING:
    from collections.abc import Mapping, Sequence

    from movload.bridge.section_elements import Element
    from movload.bridge.section_shape import Form


class Twist(NamedTuple):
    """Shear centre in the shape's own axes [m] and warping constant [m6]."""

    x: float
    y: float
    warping: float


def torsion_constant(form: Form, elements: Sequence[Element]) -> float:
    """Return the torsion constant J of one piece [m4]."""
    rounds = [part for part in elements if isinstance(part, Round)]
    rects = [part for part in elements if isinstance(part, Rect) and part.area > 0]
    if rounds:
        return sum(math.pi / 2 * (part.outer**4 - part.inner**4) for part in rounds)
    if form == "tube" and len(rects) == 4:
        return _bredt({part.part: part for part in rects})
    if form == "bar":
        return sum(_single_rectangle(*sorted(part.sizes)) for part in rects)
    return sum(part.sizes[1] * part.sizes[0] ** 3 / 3 for part in rects)


def twist(form: Form, elements: Sequence[Element]) -> Twist:
    """Return shear centre and warping constant of one piece.

    Raises
    ------
    InputError
        What is left of it has no closed formula: a leg, web or flange is gone, the walls of a tube differ.
    """
    if form == "round":
        return Twist(0.0, 0.0, 0.0)
    rects = {part.part: part for part in elements if isinstance(part, Rect)}
    gone = [name for name, part in rects.items() if not part.area]
    if gone:
        raise InputError(f"nothing is left of the {gone[0]}: no closed formula covers what remains")
    if form == "bar":
        (bar,) = rects.values()
        return Twist(*bar.middle, 0.0)  # left out as for tubes: the thin (b t)^3 / 144 is too much for stout bars
    if form == "tube":
        return _tube(rects)
    return _angle(rects) if form == "angle" else _flanged(rects)


def _single_rectangle(thickness: float, width: float) -> float:
    """Return J of one rectangle (Roark)."""
    slim = thickness / width
    return width * thickness**3 * (1 / 3 - 0.21 * slim * (1 - slim**4 / 12))


def _bredt(walls: Mapping[str, Rect]) -> float:
    """Return J of a rectangular tube: 4 A^2 over the sum of b/t, on the walls' middle lines."""
    width = walls["right wall"].middle[0] - walls["left wall"].middle[0]
    depth = walls["top wall"].middle[1] - walls["bottom wall"].middle[1]
    around = sum((depth if part.thin == "x" else width) / part.thickness for part in walls.values())
    return 4 * (width * depth) ** 2 / around


def _tube(walls: Mapping[str, Rect]) -> Twist:
    """Return the centre of a tube whose opposite walls are alike; its warping is left out (a closed wall hardly warps).

    Leaving it out is on the safe side: warping only stiffens.
    """
    for one, other in (("left wall", "right wall"), ("top wall", "bottom wall")):
        if not math.isclose(walls[one].thickness, walls[other].thickness, rel_tol=1e-9):
            raise InputError(f"its {one} and {other} differ: no closed formula covers that")
    x = (walls["left wall"].middle[0] + walls["right wall"].middle[0]) / 2
    y = (walls["top wall"].middle[1] + walls["bottom wall"].middle[1]) / 2
    return Twist(x, y, 0.0)


def _angle(legs: Mapping[str, Rect]) -> Twist:
    """Return where the legs' middle lines meet, and the warping across their thickness, sum of b^3 t^3 / 36."""
    lying, upright = legs["first leg"], legs["second leg"]
    x, y = upright.middle[0], lying.middle[1]
    warping = sum((b * t) ** 3 for b, t in ((lying.right - x, lying.thickness), (upright.top - y, upright.thickness)))
    return Twist(x, y, warping / 36)


def _flanged(parts: Mapping[str, Rect]) -> Twist:
    """Return shear centre and warping constant of a web with two flanges, by the sectorial area."""
    web, top, bottom = parts["web"], parts["top flange"], parts["bottom flange"]
    x, half_web = web.middle[0], web.thickness / 2
    ends = ((x, bottom.middle[1]), (x, top.middle[1]))
    lines = [Line(*ends, web.thickness)]
    for flange, root in zip((bottom, top), ends, strict=True):
        # A tip inside the web (the back of a channel) is no outstand.
        tips = [tip for tip in (flange.left, flange.right) if abs(tip - x) > half_web * (1 + 1e-9)]
        lines += [Line(root, (tip, root[1]), flange.thickness) for tip in tips]
    return Twist(*sectorial(lines))
