"""A new bridge file, commented, from a form, panel lengths and depths: the first thing a newcomer writes."""

from __future__ import annotations

import re
from typing import TYPE_CHECKING, Final

from movload.arrays import Floats, frozen_floats
from movload.bridge.layout import lay_out
from movload.errors import InputError, MovloadError
from movload.files.schema.quantities import number
from movload.files.toml import short

if TYPE_CHECKING:
    from movload.bridge.layout import Layout
    from movload.units import UnitSystem

_MOST_REPEATS: Final = 1000
_DIGITS: Final = 9  # of a count are read: with more than four it is refused anyway
# Area, modulus and density of steel, with their units: right beside any units that the file may have.
_STAND_IN: Final = ("2000 mm2", "200 GPa", "7850 kg/m3")
_EYEBAR_US: Final = tuple(0.0254 * inches for inches in (3.0, 1.0, 7.5, 3.25, 2.0))  # m; an example's sizes
_EYEBAR: Final = (0.075, 0.025, 0.190, 0.080, 0.050)
_STAND_IN_US: Final = ("3 in2", "29000 ksi", "490 lb/ft3")


def lengths_from(text: str, units: UnitSystem, place: str) -> Floats:
    """Return typed lengths [m]: ``4.2 4.35 4.2``, ``6x3.5``, or with commas when units have spaces.

    Raises
    ------
    InputError
        Nothing typed, or something that is not a length.
    """
    words = [word.strip() for word in (text.split(",") if "," in text else text.split())]
    lengths: list[float] = []
    for index, word in enumerate(words):
        here = f"{place}[{index}]"
        repeat = re.fullmatch(r"([0-9]+)\s*[x*×]\s*(.+)", word)
        count, one = (int(repeat[1][:_DIGITS]), repeat[2]) if repeat else (1, word)
        if not 1 <= count <= _MOST_REPEATS:
            raise InputError(f'1 to {_MOST_REPEATS} repeats may be asked for, got "{short(word)}"', place=here)
        lengths += [_length(one, units, here)] * count
    if not lengths:
        raise InputError("no length is typed", place=place)
    return frozen_floats(lengths)


def _length(word: str, units: UnitSystem, place: str) -> float:
    """Return one length [m]; a bare number is in the file's units."""
    try:
        typed: float | str = float(word)
    except ValueError:
        typed = word
    try:
        return number(typed, "length", units)
    except MovloadError as error:
        raise error.at(place) from None


def depths_question(form: str, panels: int) -> str:
    """Return how to ask for the depths that a form needs over ``panels`` panels: where, and how many."""
    if form == "warren":
        return f"Depths at the middle of each panel ({panels})"
    if form == "baltimore":
        return f"Depths at the main panel points, every second one ({panels // 2 + 1}; 0 = tapers to a point)"
    return f"Depths at the panel points ({panels + 1}; 0 = tapers to a point)"


def starter_text(title: str, layout: Layout, units: UnitSystem) -> str:
    """Return the text of a bridge file for a layout.

    What nobody can know yet (strengths, densities, weights, shares) stands as "?": `movload rate` refuses until each
    is filled. Areas are stand-ins: the forces of a determinate truss do not depend on them. They and the modulus carry
    their own units.
    """
    laid_out = lay_out(layout)
    area, modulus, density = _STAND_IN_US if units.is_us else _STAND_IN
    first, last = laid_out.panel_points[0], laid_out.panel_points[-1]
    roles = dict.fromkeys(bar.role for bar in laid_out.bars)
    tie = next((one for one in laid_out.bars if one.role == "bottom chord"), laid_out.bars[0])
    bar = f"{tie.start}-{tie.end}"
    left, out = ("6", "5, -2.5, 0, 2.5, 5") if units.is_us else ("1.9", "1.6, -0.8, 0, 0.8, 1.6")
    right, stringers = f"-{left}", f"-{out}"
    groups = "\n".join(_group(role, area, modulus) for role in roles)
    middle = f"middle = {_quoted(layout.middle)}\n" if layout.middle else ""
    return f"""# {_comment(title)}: begun with "movload start". Fill every "?"; "movload rate" asks until none is left.
title = {_quoted(title)}

[units]                     # of bare numbers; a string carries its own: "12'-6 1/2\\"", "18 kip", "9.5 t"
length = {_quoted(units.length)}
force = {_quoted(units.force)}
section = {_quoted(units.section)}              # areas in {units.symbol("area")}, moduli in {units.symbol("stress")}

[layout]                    # L0, L1 ... lower joints, U0, U1 ... upper ones, counted along +x
form = {_quoted(layout.form)}
deck = {_quoted(layout.deck)}
panels = {_numbers(layout.panels, units)}   # measured, one by one: never assume them equal
depths = {_numbers(layout.depths, units)}
{middle}
[supports]                  # "pinned", or {{ slides = 0 }}: degrees of its bed from +x
{first} = "pinned"
{last} = {{ slides = 0 }}

# One group for the bars of each role; bars = ["U1-L2"] in a group of its own gives single bars their own values.
# area: a stand-in, put the measured one. modulus: that of steel. density: "{density}" is common for steel.
# permits: the axial force each bar may carry, margin included, in {units.symbol("force")}.
{_made_of(bar, units)}{groups}
[deck]                      # looking toward +x, z across from the bridge's centre line, + to the left
truss_spacing = "?"         # between the trusses' middle planes
kerbs = "?"                 # [right, left], e.g. [{right}, {left}]
clearance = "?"             # from a kerb to the outermost wheel's centre

# The floor: take the # away from what was measured; what is left out is said to be unrated.
# [floor.stringers]
# z = [{stringers}]      # from the right
# weight = 0                # of one stringer, {units.symbol("line load")}
# permits = {{ moment = "?", shear = "?" }}   # {units.symbol("moment")}, {units.symbol("force")}
# [floor.floorbeams]
# weight = 0                # per length of beam
# permits = {{ moment = "?", shear = "?" }}

[permanent]
deck = "?"                  # {units.symbol("line load")}, kerb to kerb: deck, surfacing, floor beams not weighed above
detail_allowance = "?"      # of the members' weight, for lacing, rivets, pins and gussets, e.g. "15 %"

[rating]
impact = "?"                # a fraction, e.g. 0.30, or "by loaded length"
"""


def _made_of(bar: str, units: UnitSystem) -> str:
    """Return comment lines that say how a group is written by section and material; the sizes are an example's."""
    sizes = _EYEBAR_US if units.is_us else _EYEBAR
    width, thickness, head, pin, off = (f"{units.shown(size, 'section'):.4g}" for size in sizes)
    small = units.symbol("section")
    shape = f'shape = "eyebar", width = {width}, thickness = {thickness}, head_width = {head}, pin_hole = {pin}'
    return f"""#
# Or say what a group is made of, and the factor set's standard finds its strengths: in place of area, modulus, density
# and permits it then has section and material, and the tables below stand without their #. Sizes in {small}.
#   section = "tie"
#   material = "iron"
#   unbraced_x = "joint to joint"   # only where it is compressed: free length in the truss's plane, and
#   unbraced_y = "joint to joint"   # out of it
#   k_x = 1.0
#   k_y = 1.0
#   losses = [{{ where = "start end", fraction = "30 %", bar = "{bar}", truss = "left" }}]
# [materials.iron]
# kind = "wrought iron"             # or steel
# built = 1889                      # or fy, fu, modulus, density and source
# [sections.tie]
# pieces = [
#   {{ {shape}, x = -{off} }},
#   {{ {shape}, x = {off} }},
# ]
"""


def _group(role: str, area: str, modulus: str) -> str:
    """Return one member group with its placeholders."""
    return (
        f'[members.{_quoted(role)}]\narea = "{area}"\nmodulus = "{modulus}"\ndensity = "?"\n'
        'permits = { tension = "?", compression = "?" }\n'
    )


def _numbers(values: Floats, units: UnitSystem) -> str:
    """Return lengths as a TOML list in the file's units."""
    return "[" + ", ".join(f"{units.shown(float(value), 'length'):.10g}" for value in values) + "]"


def _quoted(text: str) -> str:
    """Return text as a TOML string."""
    escaped = text.replace("\\", "\\\\").replace('"', '\\"')
    return (
        '"' + "".join(f"\\u{ord(sign):04x}" if ord(sign) < 32 or ord(sign) == 127 else sign for sign in escaped) + '"'
    )


def _comment(text: str) -> str:
    """Return text as one line of a comment."""
    return "".join(" " if ord(sign) < 32 or ord(sign) == 127 else sign for sign in text)
