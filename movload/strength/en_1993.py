"""Steel bars and beams by partial factors: EN 1993-1-1, cross-sections of classes 1 to 3.

phi is 1/gamma_M by name: "tension" 1/gamma_M0 of yield and of squash, "fracture" 1/gamma_M2, "compression" 1/gamma_M1
of every buckling, "moment", "hogging" and "shear" 1/gamma_M0. Axes are ours, x across and y up, and principal.

Not covered: class 4 (effective widths), round tubes, laced and battened bars (6.4), holes in a tension flange (6.16),
forces that act together (6.2.8 to 6.2.10, 6.3.3), shear buckling (EN 1993-1-5), block tearing and connections.

References
----------
EN 1993-1-1:2005, Design of steel structures, General rules and rules for buildings: 6.3.1.2 and alpha of Table 6.1
read; every other equation, table and limit from memory.
EN 1993-1-8:2005, 3.10.3; EN 1993-1-3:2006, 6.2.3: from memory.
"""

from __future__ import annotations

import math
from typing import TYPE_CHECKING, Final

from movload.errors import InputError, MissingDataError, UnknownNameError, nearest_name
from movload.strength.aashto_floor import elastic_moment
from movload.strength.aashto_lrfd import elastic_buckling, least
from movload.strength.strength import Step, Strength
from movload.strength.warnings import factor_of

if TYPE_CHECKING:
    from collections.abc import Mapping, Sequence

    from movload.strength.aashto_floor import Beam, Lateral, Sense, Web
    from movload.strength.aashto_lrfd import Plate, Tie
    from movload.strength.beam_column import Column

TITLE: Final = "EN 1993-1-1"
CURVES: Final = {"a0": 0.13, "a": 0.21, "b": 0.34, "c": 0.49, "d": 0.76}
"""Imperfection factor alpha of each buckling curve, Table 6.1; Table 6.3 for sideways has the same but for a0."""
_PLATEAU: Final = 0.2  # slenderness up to which buckling takes nothing off, 6.3.1.2(4)
_REFERENCE: Final = 235e6  # Pa, of epsilon, Table 5.2
_PLATES: Final = {"flange": 14.0, "stem": 14.0, "angle leg": 11.5, "web": 42.0, "cover": 42.0}
"""Greatest c/t over epsilon of class 3, all in compression, Table 5.2; each leg by that of their mean, (b + h)/2t."""
_FLANGE: Final = (9.0, 10.0, 14.0)  # c/t over epsilon of an outstand, classes 1 to 3, Table 5.2
_EVEN_WEB: Final = (72.0, 83.0, 124.0)  # of a web in bending about its middle
_ANY_WEB: Final = (66.0, 76.0, 84.0)  # of twice the depth in compression: the least over every neutral axis
_EVEN: Final = 1e-3  # relative difference of S up to which flanges count as equal: rounding of tables
_STOCKY: Final = 72.0  # h_w/t_w over epsilon/eta, (6.22), eta = 1


def tension(tie: Tie, phi: Mapping[str, float]) -> Strength:
    """Return N_t,Rd [N], the lesser of A fy/gamma_M0 (6.6) and 0.9 Anet fu/gamma_M2 (6.7).

    The net area counts by its U: for an angle by one leg EN 1993-1-8 3.10.3 has beta in place of 0.9 U, so U is
    beta/0.9. Nothing more is taken off for punched holes.

    Raises
    ------
    MissingDataError
        No net area, no ultimate strength, or a phi that the level does not give.
    """
    yielded = factor_of(phi, "tension") * tie.fy * tie.gross
    broken = factor_of(phi, "fracture") * 0.9 * tie.rupture(f"{TITLE} 6.2.3")
    steps = (
        Step("U", "shear lag, beta/0.9 for an angle by one leg (EN 1993-1-8 3.10.3)", tie.shear_lag, "-", TITLE),
        Step("Npl,Rd", "A fy / gamma_M0 (6.6)", yielded, "N", TITLE),
        Step("Nu,Rd", "0.9 U Anet fu / gamma_M2 (6.7)", broken, "N", TITLE),
    )
    return least({"yield of the gross section": yielded, "fracture of the net section": broken}, "Nt,Rd", steps)


def compression(
    column: Column, phi: Mapping[str, float], *, curves: tuple[str, str], plates: Sequence[Plate]
) -> Strength:  # fmt: skip
    """Return [N] the least of buckling chi A fy/gamma_M1 (6.47), in every mode, and squash A fy/gamma_M0 (6.10).

    lambda = (Lcr/i)/(pi sqrt(E/fy)) (6.50) about each axis; with twist sqrt(A fy/Ncr) (6.52), whose Ncr is the elastic
    load of bending and twisting together, on the worse of the two curves.

    Parameters
    ----------
    curves
        Of Table 6.2, about x and about y: "a0", "a", "b", "c" or "d".
    plates
        Of the cross-section, each checked against class 3; none for a solid bar.

    Raises
    ------
    InputError
        A plate of class 4, a laced or battened bar, a curve that is none, or a phi that the level does not give.
    """
    _require_covered(column, plates)
    base = math.pi * math.sqrt(column.modulus / column.fy)
    about = {"x": column.kl_x / column.r_x / base, "y": column.kl_y / column.r_y / base}
    steps = [Step("lambda_1", "pi sqrt(E / fy) (6.50)", base, "-", TITLE)]
    steps += [Step(f"lambda_{axis}", "(Lcr / i) / lambda_1 (6.50)", value, "-", TITLE) for axis, value in about.items()]
    modes = {f"buckling about {axis}": (about[axis], curve) for axis, curve in zip("xy", curves, strict=True)}
    if column.torsion is not None:
        critical = elastic_buckling(column)[0]
        with_twist = math.sqrt(column.area * column.fy / critical)
        steps.append(Step("Ncr,TF", "least elastic load of bending and twist together (6.3.1.4)", critical, "N", TITLE))
        steps.append(Step("lambda_T", "sqrt(A fy / Ncr,TF) (6.52)", with_twist, "-", TITLE))
        modes["buckling with twist"] = (with_twist, max(curves, key=_imperfection))
    return _least_of(modes, column, phi, steps)


def _least_of(
    modes: Mapping[str, tuple[float, str]], column: Column, phi: Mapping[str, float], steps: list[Step]
) -> Strength:  # fmt: skip
    """Return the least of squash and of each mode by its slenderness and curve."""
    factor, squash = factor_of(phi, "compression"), column.fy * column.area
    states = {"squash of the least section": factor_of(phi, "tension") * column.fy * column.gross}
    for mode, (slenderness, curve) in modes.items():
        reduction = chi(slenderness, curve)
        states[mode] = factor * reduction * squash
        said = f"{mode}, curve {curve}, 1 / (Phi + sqrt(Phi^2 - lambda^2)) (6.49)"
        steps.append(Step("chi", said, reduction, "-", TITLE))
        steps.append(Step("Nb,Rd", "chi A fy / gamma_M1 (6.47)", states[mode], "N", TITLE))
    steps.append(Step("Nc,Rd", "A fy / gamma_M0 (6.10)", states["squash of the least section"], "N", TITLE))
    return least(states, "N,Rd", steps)


def chi(slenderness: float, curve: str) -> float:
    """Return what buckling leaves, 1/(Phi + sqrt(Phi^2 - lambda^2)) (6.49) and (6.56), 1 up to lambda = 0.2.

    Phi = (1 + alpha (lambda - 0.2) + lambda^2)/2. Raises UnknownNameError for a curve that is none of CURVES.
    """
    alpha = _imperfection(curve)
    if slenderness <= _PLATEAU:
        return 1.0
    half = 0.5 * (1.0 + alpha * (slenderness - _PLATEAU) + slenderness**2)
    return 1.0 / (half + math.sqrt(half**2 - slenderness**2))


def bending(
    beam: Beam, phi: Mapping[str, float], sense: Sense = "moment", *, curve: str = "", lever: float = math.nan
) -> Strength:  # fmt: skip
    """Return M_Rd [N m] about x, the lesser of W fy/gamma_M0 (6.13, 6.14) and chi_LT W fy/gamma_M1 (6.55).

    W is plastic in classes 1 and 2, elastic in class 3. An I of unequal flanges goes by ``Lateral.of_flange``, which is
    a stand-in and not this standard's.

    Parameters
    ----------
    curve
        Of Table 6.4, "a" to "d"; needed where the beam may buckle sideways.
    lever
        C2 zg [m], zg how far above the shear centre the load pushes; 0 where its flange is held or it pushes there.

    Raises
    ------
    InputError
        A beam of class 4, or curve a0.
    MissingDataError
        No curve or no lever where the beam may buckle sideways, or a phi that the level does not give.
    """
    number = section_class(beam)
    section, said = (min(beam.s_c, beam.s_t), "6.14") if beam.z is None or number == 3 else (beam.z, "6.13")
    states = {"full section": factor_of(phi, sense) * section * beam.fy}
    steps = [Step("class", "flange and web in bending, Table 5.2", number, "-", TITLE)]
    if beam.lateral is not None:
        reduction = _sideways(beam.lateral, section * beam.fy, beam.modulus, (curve, lever), steps)
        states["lateral-torsional buckling"] = factor_of(phi, "compression") * reduction * section * beam.fy
        steps.append(Step("Mb,Rd", "chi_LT W fy / gamma_M1 (6.55)", states["lateral-torsional buckling"], "N m", TITLE))
    steps.append(Step("Mc,Rd", f"W fy / gamma_M0 ({said})", states["full section"], "N m", TITLE))
    return least(states, "M,Rd", steps)


def _sideways(
    lateral: Lateral, full: float, modulus: float, typed: tuple[str, float], steps: list[Step]
) -> float:  # fmt: skip
    """Return chi_LT by the typed curve and lever, and write its steps; ``full`` is W fy [N m]."""
    curve, lever = typed
    if not curve or math.isnan(lever):
        rule, place = ("the curve of Table 6.4", "curve") if not curve else ("C2 zg of the load", "lever")
        raise MissingDataError(f"{rule} is needed by {TITLE} 6.3.2.2", place=place)
    if curve == "a0":
        raise InputError(f"{TITLE} Table 6.3 has the curves a to d, got a0", place="curve")
    critical = critical_moment(lateral, modulus, lever)
    slenderness = math.sqrt(full / critical)
    reduction = chi(slenderness, curve)
    steps += [
        Step("Mcr", "C1 N (sqrt(Iw/Iz + G It/N + (C2 zg)^2) - C2 zg), N = pi^2 E Iz/L^2", critical, "N m", TITLE),
        Step("lambda_LT", "sqrt(W fy / Mcr) (6.3.2.2)", slenderness, "-", TITLE),
        Step("chi_LT", f"1 / (Phi + sqrt(Phi^2 - lambda^2)), curve {curve} (6.56)", reduction, "-", TITLE),
    ]
    return reduction


def critical_moment(lateral: Lateral, modulus: float, lever: float) -> float:
    """Return M_cr = C1 N (sqrt(Iw/Iz + G It/N + lever^2) - lever) [N m], N = pi^2 E Iz/L^2, C1 = ``lateral.c_b``."""
    euler = math.pi**2 * modulus * lateral.i_y / lateral.unbraced**2
    even = elastic_moment(lateral, modulus) / lateral.c_b  # N sqrt(Iw/Iz + G It/N)
    return lateral.c_b * (math.hypot(even, euler * lever) - euler * lever)


def section_class(beam: Beam) -> int:
    """Return the class of a beam in bending, 1 to 3, by its compression flange and its web (Table 5.2).

    Raises InputError for class 4.
    """
    unit = math.sqrt(_REFERENCE / beam.fy)
    webs = _EVEN_WEB if math.isclose(beam.s_c, beam.s_t, rel_tol=_EVEN) else _ANY_WEB
    for number, (flange, web) in enumerate(zip(_FLANGE, webs, strict=True), start=1):
        if beam.flange_ratio <= flange * unit and beam.web_ratio <= web * unit:
            return number
    flange, web = _FLANGE[-1] * unit, webs[-1] * unit
    said = f"b/2t is {flange:.1f} and 2 Dc/tw {web:.1f} at most, got {beam.flange_ratio:.1f} and {beam.web_ratio:.1f}"
    raise InputError(f"{TITLE} class 4 is not covered: {said}", place="beam")


def shear(web: Web, phi: Mapping[str, float]) -> Strength:
    """Return V_pl,Rd = h_w t_w fy/(sqrt(3) gamma_M0) [N] (6.18); phi by name: "shear".

    Raises
    ------
    InputError
        A web that may buckle in shear (6.22); stiffeners between its ends do not count.
    """
    ratio, limit = web.depth / web.thickness, _STOCKY * math.sqrt(_REFERENCE / web.fy)
    if ratio > limit:
        said = f"h_w/t_w is {limit:.1f} at most ({TITLE} (6.22)), got {ratio:.1f}"
        raise InputError(f"shear buckling is not covered: {said}", place="web")
    plastic = factor_of(phi, "shear") * web.depth * web.thickness * web.fy / math.sqrt(3.0)
    steps = (
        Step("hw/tw", f"at most 72 epsilon = {limit:.1f}, eta = 1 (6.22)", ratio, "-", TITLE),
        Step("Vpl,Rd", "hw tw fy / (sqrt(3) gamma_M0) (6.18)", plastic, "N", TITLE),
    )
    return least({"web yield": plastic}, "V,Rd", steps)


def _imperfection(curve: str) -> float:
    """Return alpha of a buckling curve."""
    if curve not in CURVES:
        rule = f'"{curve}" is no buckling curve of {TITLE} Table 6.1: {", ".join(CURVES)}'
        raise UnknownNameError(rule, place="curve", nearest=nearest_name(curve, CURVES))
    return CURVES[curve]


def _require_covered(column: Column, plates: Sequence[Plate]) -> None:
    """Refuse a bar of laced or battened parts, and one with a plate that buckles before it yields."""
    if column.built_up is not None:
        raise InputError(f"laced and battened bars ({TITLE} 6.4) are not covered", place="built_up")
    if column.slender < 1.0:
        raise InputError(f"{TITLE} class 4 is not covered, got Q = {column.slender:g}", place="slender")
    for plate in plates:
        ratio, limit = plate.width / plate.thickness, _PLATES[plate.kind] * math.sqrt(_REFERENCE / column.fy)
        if ratio > limit:
            said = f"c/t of a {plate.kind} is {limit:.1f} at most, got {ratio:.1f}"
            raise InputError(f"{TITLE} class 4 is not covered: {said}", place="plates")
