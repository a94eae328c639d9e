"""Steel by allowable stress and by load factor: AASHTO Manual for Bridge Evaluation, section 6B.

Both columns have the same strengths; what differs is the factor of the level, phi by name:

| name | allowable stress, inventory and operating | load factor |
|---|---|---|
| "tension" | 0.55, 0.75 of Fy Ag | 1 |
| "fracture" | 0.50, 0.67 of Fu An | its own choice |
| "compression" | 1/2.12, 1/1.70 | 0.85 |
| "moment", "hogging" | 0.55, 0.75 of Fy S | 1 |
| "shear" | 0.33/0.58, 0.45/0.58 | 1 |

Not covered: slender plates (these standards limit b/t instead), pins and eyebar heads, connections, composite slabs;
of beams what aashto_floor leaves out too, and flanges with b/2t above 12.

References
----------
AASHTO, Manual for Bridge Evaluation, 6B.5.2, 6B.5.3; Standard Specifications for Highway Bridges, 17th edition, Table
10.32.1A, 10.48.1, 10.48.4, 10.48.8, 10.54.1 (from memory).
"""

from __future__ import annotations

import math
from typing import TYPE_CHECKING, Final

from movload.errors import InputError
from movload.strength import aashto_floor
from movload.strength.aashto_floor import WebLimits, elastic_moment
from movload.strength.aashto_lrfd import elastic_buckling, least
from movload.strength.strength import Step, Strength
from movload.strength.warnings import factor_of

if TYPE_CHECKING:
    from collections.abc import Mapping

    from movload.strength.aashto_floor import Beam, Sense, Web
    from movload.strength.aashto_lrfd import Tie
    from movload.strength.beam_column import Column

TITLE: Final = "MBE 6B"
_WIDEST_FLANGE: Final = 12.0  # b/t of 24 on the whole flange, 10.48.2.1
_COMPACT_FLANGE, _COMPACT_WEB = 2055.0, 19230.0  # over sqrt(Fy [psi]), 10.48.1.1; the flange's by half its width
_PSI: Final = 6894.757293  # Pa
_REFERENCE: Final = 29e6  # psi, the modulus that the standard's numbers hold
_ROOT: Final = math.sqrt(_REFERENCE)
_SHEAR_LIMITS: Final = WebLimits(6000.0 / _ROOT, 7500.0 / _ROOT, 4.5e7 / _REFERENCE, TITLE, "10.48.8")


def tension(tie: Tie, phi: Mapping[str, float]) -> Strength:
    """Return the lesser of phi Fy Ag and phi Fu An [N]; phi by name: "tension" and "fracture".

    The net area counts by its U; nothing more is taken off for punched holes.

    Raises
    ------
    MissingDataError
        No net area, no ultimate strength, or a phi that the level does not give.
    """
    broken = factor_of(phi, "fracture") * tie.rupture(f"{TITLE}.5.2")
    yielded = factor_of(phi, "tension") * tie.fy * tie.gross
    steps = (
        Step("C gross", "phi Fy Ag (6B.5.2)", yielded, "N", TITLE),
        Step("C net", "phi Fu An U (6B.5.2)", broken, "N", TITLE),
    )
    return least({"yield of the gross section": yielded, "fracture of the net section": broken}, "C", steps)


def compression(column: Column, phi: Mapping[str, float]) -> Strength:
    """Return phi Fcr Ag [N], at most phi Fy on the least section; phi by name: "compression".

    Fcr = Fy (1 - Fy (K L/r)^2 / (4 pi^2 E)) up to Cc = sqrt(2 pi^2 E/Fy) and pi^2 E / (K L/r)^2 beyond. Twist counts by
    the slenderness pi sqrt(E Ag/Pe) that buckles elastically at the same load.

    Raises
    ------
    InputError
        A bar of slender plates.
    """
    if column.slender < 1.0:
        raise InputError(f"slender plates are not covered by {TITLE}: Q must be 1, got {column.slender:g}",
                         place="slender")  # fmt: skip
    factor, (elastic, found) = factor_of(phi, "compression"), elastic_buckling(column)
    slenderness = math.pi * math.sqrt(column.modulus * column.area / elastic)
    limit = math.pi * math.sqrt(2.0 * column.modulus / column.fy)
    euler = elastic / column.area
    if slenderness <= limit:
        stress, said = column.fy * (1.0 - column.fy / (4.0 * euler)), "Fy (1 - Fy (K L/r)^2 / (4 pi^2 E)) (10-151)"
    else:
        stress, said = euler, "pi^2 E / (K L/r)^2, K L/r above Cc (10-153)"
    buckled, crushed = factor * stress * column.area, factor * column.fy * column.gross
    steps = (
        *found,
        Step("K L/r", "pi sqrt(E Ag/Pe), the governing one", slenderness, "-", TITLE),
        Step("Cc", "sqrt(2 pi^2 E/Fy) (10-152)", limit, "-", TITLE),
        Step("Fcr", said, stress, "Pa", TITLE),
        Step("C column", "phi Fcr Ag", buckled, "N", TITLE),
        Step("C squash", "phi Fy Ag of the least section", crushed, "N", TITLE),
    )
    return least({"buckling": buckled, "squash of the least section": crushed}, "C", steps)


def bending(beam: Beam, phi: Mapping[str, float], sense: Sense = "moment", *, plastic: bool = False) -> Strength:
    """Return phi times the lesser of yield moment and lateral-torsional buckling [N m]; phi by the name of ``sense``.

    Parameters
    ----------
    plastic
        Whether the method takes Fy Z of a compact section held all along (load factor does, allowable stress not).
    """
    if beam.flange_ratio > _WIDEST_FLANGE:
        raise InputError(f"b/2t must be 12 at most (AASHTO 10.48.2.1), got {beam.flange_ratio:.1f}",
                         place="flange_ratio")  # fmt: skip
    factor, yielded = factor_of(phi, sense), beam.yield_moment
    steps = [Step("phi", f"level's factor, {sense}", factor, "-", TITLE),
             Step("My", "Fy min(Sxc, Sxt)", yielded, "N m", TITLE)]  # fmt: skip
    states = {"yield": yielded}
    if beam.lateral is not None:
        states["lateral-torsional buckling"] = elastic_moment(beam.lateral, beam.modulus)
        said = "Cb pi/L sqrt(E Iy G J + (pi E/L)^2 Iy Cw), as 91e6 Cb (Iyc/L) sqrt(...) (10.48.4.1)"
        steps.append(Step("Mcr", said, states["lateral-torsional buckling"], "N m", TITLE))
    elif plastic and beam.z is not None and _is_compact(beam):
        states = {"plastic moment": beam.fy * beam.z}
        steps.append(Step("Mp", "Fy Z, compact and held all along (10.48.1)", beam.fy * beam.z, "N m", TITLE))
    return least({name: factor * moment for name, moment in states.items()}, "C", steps)


def shear(web: Web, phi: Mapping[str, float]) -> Strength:
    """Return phi C 0.58 Fy D tw [N]; phi by name: "shear"."""
    return aashto_floor.shear(web, phi, _SHEAR_LIMITS)


def _is_compact(beam: Beam) -> bool:
    """Return whether flange and web may yield throughout, 10.48.1.1."""
    root = math.sqrt(beam.fy / _PSI)
    return beam.flange_ratio <= _COMPACT_FLANGE / root and beam.web_ratio <= _COMPACT_WEB / root
