"""Steel bars and beams by partial factors: EN 1993-1-1, classes 1 to 3.

phi is 1/gamma_M by name: "tension" 1/gamma_M0 of yield and squash, "fracture" 1/gamma_M2, "compression" 1/gamma_M1 of
every kind of buckling, "moment", "hogging" and "shear" 1/gamma_M0. Axes are ours: x across, y upward, both principal.
Not covered: class 4, laced and battened members as such (6.4; a laced plane's K L must hold its shear flexibility),
forces that act together (6.2.8 to 6.2.10, 6.3.3), holes in a flange that fail (6.16), stiffened webs.

References
----------
EN 1993-1-1:2005, Design of steel structures, General rules and rules for buildings: 6.3.1.2 and Table 6.1 read,
everything else from memory. Critical moment and torsional critical force: elastic stability, from memory.
"""

from __future__ import annotations

import math
from dataclasses import dataclass
from typing import TYPE_CHECKING, Final

import numpy as np

from movload.errors import InputError, MissingDataError, UnknownNameError, nearest_name
from movload.strength.strength import Step, Strength

if TYPE_CHECKING:
    from collections.abc import Mapping

SOURCE: Final = "EN 1993-1-1"
IMPERFECTION: Final = {"a0": 0.13, "a": 0.21, "b": 0.34, "c": 0.49, "d": 0.76}
"""alpha of Tables 6.1 and 6.3 by buckling curve; a0 is not one of Table 6.3's."""
_PLATEAU: Final = 0.2  # slenderness up to which nothing is taken off, 6.3.1.2(4)
_POISSON: Final = 0.3  # 3.2.6
_REFERENCE_YIELD: Final = 235e6  # Pa, of epsilon, Table 5.2
_STOCKY_WEB: Final = 72.0  # h_w/t_w over epsilon/eta, (6.22), eta = 1


@dataclass(frozen=True, slots=True)
class Torsion:
    """A section's torsion constant [m4], warping constant [m6], and shear centre from the centroid [m]."""

    constant: float
    warping: float
    x0: float
    y0: float

    def __post_init__(self) -> None:
        """Refuse what no section has; an angle or a tee does not warp."""
        _require_positive(torsion_constant=self.constant)
        if not self.warping >= 0.0:
            raise InputError(f"must be 0 or more, got {self.warping:g} m6", place="warping")


@dataclass(frozen=True, slots=True)
class Sideways:
    """How a beam may buckle sideways between its braces.

    ``unbraced`` length of the flange in compression [m], ``inertia`` I_y [m4], ``torsion``, buckling ``curve`` of Table
    6.4 (a to d), ``load_height`` of the load above the shear centre [m]; ``c1`` for the moment's shape (1 is an even
    moment, the least) and ``c2`` for a load's height, needed unless that is 0.
    """

    unbraced: float
    inertia: float
    torsion: Torsion
    curve: str
    load_height: float
    c1: float = 1.0
    c2: float = math.nan

    def __post_init__(self) -> None:
        """Refuse what the critical moment does not hold for."""
        _require_positive(unbraced=self.unbraced, inertia=self.inertia, c1=self.c1)
        if self.torsion.y0:
            raise InputError(f"unequal flanges are not covered, got {self.torsion.y0:g} m", place="y0")
        if self.load_height and math.isnan(self.c2):
            raise MissingDataError("a load off the shear centre needs C2", place="c2")


def tension(
    *, gross: float, net: float, shear_lag: float, fy: float, fu: float, phi: Mapping[str, float]
) -> Strength:  # fmt: skip
    """Return N_t,Rd [N], the lesser of (6.6) on the least gross area and (6.7) on the net area (both [m2]).

    ``shear_lag`` is U [-], 1 where every element is connected. EN 1993-1-8 3.10.3 has, for an angle by one leg, beta in
    place of 0.9 U: type beta/0.9. There is no factor on punched holes.

    Raises
    ------
    InputError
        An area or a stress that is not above 0, fu below fy, U outside 0 to 1.
    MissingDataError
        A phi that the level does not hold.
    """
    _require_positive(gross=gross, net=net, shear_lag=shear_lag, fy=fy, fu=fu)
    if shear_lag > 1.0:
        raise InputError(f"is 1 at most, got {shear_lag:g}", place="shear_lag")
    if fu < fy:
        raise InputError(f"is at least fy, {fy:g} Pa, got {fu:g} Pa", place="fu")
    plastic = _phi(phi, "tension") * gross * fy
    ultimate = _phi(phi, "fracture") * 0.9 * shear_lag * net * fu
    steps = [
        _step("Npl,Rd", "A fy / gamma_M0 (6.6)", plastic, "N"),
        _step("Nu,Rd", "0.9 U Anet fu / gamma_M2 (6.7)", ultimate, "N"),
    ]
    return _least("Nt,Rd", {"yield of the gross section": plastic, "fracture of the net section": ultimate}, steps)


def compression(  # noqa: PLR0913  # what 6.3.1 asks for
    *, gross: float, area: float, kl_x: float, kl_y: float, r_x: float, r_y: float, curve_x: str, curve_y: str,
    fy: float, modulus: float, section_class: int, phi: Mapping[str, float],
    torsion: Torsion | None = None, kl_z: float = math.nan,
) -> Strength:  # fmt: skip
    """Return N_Rd [N] in compression, the lesser of squash on the least gross area (6.10) and buckling (6.47).

    Parameters
    ----------
    gross, area
        Least gross area anywhere, and at mid length [m2].
    kl_x, kl_y, r_x, r_y
        Buckling lengths and radii [m] of bending about x (in the truss's plane) and y.
    curve_x, curve_y
        Buckling curves of Table 6.2, "a0" to "d"; twisting takes the worse of them.
    section_class
        1 to 3, Table 5.2.
    torsion, kl_z
        For torsional and flexural-torsional buckling, 6.3.1.4, with its length [m]; without them it is not looked at,
        which only a closed or a doubly symmetric section may do.

    Raises
    ------
    InputError
        Class 4, an unknown curve, or a number that is not above 0.
    MissingDataError
        A torsion without its length, a phi that the level does not hold.
    """
    _require_positive(gross=gross, area=area, kl_x=kl_x, kl_y=kl_y, r_x=r_x, r_y=r_y, fy=fy, modulus=modulus)
    _require_class(section_class)
    steps = [_step("lambda_1", "pi sqrt(E / fy) (6.50)", math.pi * math.sqrt(modulus / fy), "-")]
    modes = {}
    for axis, length, radius, curve in (("x", kl_x, r_x, curve_x), ("y", kl_y, r_y, curve_y)):
        slenderness = length / radius / steps[0].value
        steps.append(_step(f"lambda_{axis}", f"(Lcr / i) / lambda_1 about {axis} (6.50)", slenderness, "-"))
        modes[f"buckling about {axis}"] = (f"chi_{axis}", slenderness, curve)
    if torsion is not None:
        flexural = (
            math.pi**2 * modulus * area * (radius / length) ** 2 for radius, length in ((r_x, kl_x), (r_y, kl_y))
        )
        critical = critical_force(*flexural, torsion, kl_z=kl_z, modulus=modulus, polar=r_x**2 + r_y**2)
        slenderness = math.sqrt(area * fy / critical)
        steps += [
            _step("Ncr,TF", "least root with twist, shear centre off the centroid, 6.3.1.4", critical, "N"),
            _step("lambda_T", "sqrt(A fy / Ncr,TF) (6.52)", slenderness, "-"),
        ]
        modes["flexural-torsional buckling"] = ("chi_T", slenderness, max(curve_x, curve_y, key=_imperfection))
    found = {"squash": _phi(phi, "tension") * gross * fy}
    for mode, (symbol, slenderness, curve) in modes.items():
        reduction = chi(slenderness, curve)
        steps.append(_step(symbol, f"1 / (Phi + sqrt(Phi^2 - lambda^2)), curve {curve} (6.49)", reduction, "-"))
        found[mode] = _phi(phi, "compression") * reduction * area * fy
    steps.append(_step("Nc,Rd", "A fy / gamma_M0, least A anywhere (6.10)", found["squash"], "N"))
    return _least("Nb,Rd", found, steps, "; chi A fy / gamma_M1 (6.47)")


def critical_force(  # noqa: PLR0913  # one equation's terms
    about_x: float, about_y: float, torsion: Torsion, *, kl_z: float, modulus: float, polar: float
) -> float:  # fmt: skip
    """Return the elastic critical force N [N] of bending about both axes and twisting together.

    It is the least root of det(K - N M) = 0 with K = diag(Nx, Ny, i0^2 NT) and M = [[1, 0, y0], [0, 1, -x0], [y0, -x0,
    i0^2]]; i0^2 = ix^2 + iy^2 + x0^2 + y0^2, NT = (G J + pi^2 E Cw / LT^2) / i0^2. ``polar`` is ix^2 + iy^2 [m2],
    ``about_x`` and ``about_y`` are Nx and Ny [N]. With one axis of symmetry that is Ncr,TF of EN 1993-1-3 (6.35).

    Raises
    ------
    MissingDataError
        No length for twisting.
    """
    if math.isnan(kl_z):
        raise MissingDataError("torsion needs the length between points held against twisting", place="kl_z")
    _require_positive(kl_z=kl_z)
    square = polar + torsion.x0**2 + torsion.y0**2
    shear = modulus / (2.0 * (1.0 + _POISSON))
    twisting = shear * torsion.constant + math.pi**2 * modulus * torsion.warping / kl_z**2  # i0^2 NT
    scale = 1.0 / np.sqrt([about_x, about_y, twisting])
    mass = np.array([[1.0, 0.0, torsion.y0], [0.0, 1.0, -torsion.x0], [torsion.y0, -torsion.x0, square]])
    return float(1.0 / np.linalg.eigvalsh(mass * np.outer(scale, scale))[-1])


def chi(slenderness: float, curve: str) -> float:
    """Return the reduction for buckling (6.49), (6.56): 1 / (Phi + sqrt(Phi^2 - lambda^2)), 1 up to lambda = 0.2.

    Phi = (1 + alpha (lambda - 0.2) + lambda^2) / 2.
    """
    alpha = _imperfection(curve)
    if slenderness <= _PLATEAU:
        return 1.0
    half = 0.5 * (1.0 + alpha * (slenderness - _PLATEAU) + slenderness**2)
    return 1.0 / (half + math.sqrt(half**2 - slenderness**2))


def bending(  # noqa: PLR0913  # what 6.2.5 and 6.3.2 ask for
    *, plastic: float, elastic: float, section_class: int, fy: float, modulus: float,
    sideways: Sideways | None, phi: Mapping[str, float], sense: str = "moment",
) -> Strength:  # fmt: skip
    """Return M_Rd [N m] about x, the lesser of the section's (6.13), (6.14) and lateral torsional buckling's (6.55).

    ``plastic`` and ``elastic`` are W_x [m3], holes that fail (6.16) taken off; class 3 takes the elastic one.
    ``sideways`` is None only where the flange in compression is held all along, or for a closed section. ``sense`` is
    "moment" or "hogging".

    Raises
    ------
    InputError
        Class 4, curve a0, unequal flanges, a number that is not above 0, a plastic modulus below the elastic one.
    MissingDataError
        A phi that the level does not hold.
    """
    _require_positive(plastic=plastic, elastic=elastic, fy=fy, modulus=modulus)
    _require_class(section_class)
    if plastic < elastic:
        raise InputError(f"is at least the elastic one, {elastic:g} m3, got {plastic:g} m3", place="plastic")
    section, number = (plastic, "6.13") if section_class < 3 else (elastic, "6.14")
    found = {"the section": _phi(phi, sense) * section * fy}
    steps = [_step("Mc,Rd", f"W fy / gamma_M0, class {section_class} ({number})", found["the section"], "N m")]
    if sideways is not None:
        critical = critical_moment(sideways, modulus)
        slenderness = math.sqrt(section * fy / critical)
        if sideways.curve == "a0":
            raise InputError("Table 6.3 has the curves a to d", place="curve")
        reduction = chi(slenderness, sideways.curve)
        found["lateral torsional buckling"] = _phi(phi, "compression") * reduction * section * fy
        steps += [
            _step("Mcr", "C1 pi^2 E Iy / L^2 (sqrt(Cw/Iy + L^2 G J/(pi^2 E Iy) + (C2 zg)^2) - C2 zg)", critical, "N m"),
            _step("lambda_LT", "sqrt(W fy / Mcr) 6.3.2.2", slenderness, "-"),
            _step("chi_LT", f"general case, curve {sideways.curve} (6.56)", reduction, "-"),
        ]
    return _least("Mb,Rd", found, steps, "; chi_LT W fy / gamma_M1 (6.55)")


def critical_moment(sideways: Sideways, modulus: float) -> float:
    """Return M_cr [N m] of a beam with equal flanges, its ends held against twist and free to warp."""
    flexural = math.pi**2 * modulus * sideways.inertia / sideways.unbraced**2
    twisting = modulus / (2.0 * (1.0 + _POISSON)) * sideways.torsion.constant
    lever = sideways.c2 * sideways.load_height if sideways.load_height else 0.0
    square = sideways.torsion.warping / sideways.inertia + twisting / flexural + lever**2
    return sideways.c1 * flexural * (math.sqrt(square) - lever)


def shear(*, area: float, web_slenderness: float, fy: float, phi: Mapping[str, float]) -> Strength:
    """Return V_pl,Rd [N] (6.18) of a shear area [m2] of 6.2.6(3); ``web_slenderness`` is h_w/t_w [-].

    Raises
    ------
    InputError
        A web beyond (6.22), whose buckling (EN 1993-1-5) is not covered; a number that is not above 0.
    """
    _require_positive(area=area, web_slenderness=web_slenderness, fy=fy)
    limit = _STOCKY_WEB * math.sqrt(_REFERENCE_YIELD / fy)
    if web_slenderness > limit:
        raise InputError(
            f"{SOURCE} (6.22): h_w/t_w up to {limit:.3g} is covered, shear buckling is not; got {web_slenderness:g}",
            place="web_slenderness",
        )
    value = _phi(phi, "shear") * area * fy / math.sqrt(3.0)
    steps = [_step("hw/tw", "at most 72 epsilon / eta, eta = 1 (6.22)", web_slenderness, "-")]
    return _least("Vpl,Rd", {"yield of the web": value}, steps, "; Av fy / (sqrt(3) gamma_M0) (6.18)")


def _imperfection(curve: str) -> float:
    """Return alpha of a buckling curve."""
    if curve not in IMPERFECTION:
        known = ", ".join(IMPERFECTION)
        raise UnknownNameError(
            f'"{curve}" is no buckling curve of {SOURCE}; known: {known}', nearest=nearest_name(curve, IMPERFECTION)
        )
    return IMPERFECTION[curve]


def _require_class(section_class: int) -> None:
    """Refuse class 4, whose effective widths are not covered, and what is no class."""
    if section_class not in {1, 2, 3}:
        raise InputError(f"{SOURCE} 5.5.2: classes 1 to 3 are covered, got {section_class}", place="section_class")


def _require_positive(**values: float) -> None:
    """Refuse what is not a finite number above 0."""
    for name, value in values.items():
        if not (math.isfinite(value) and value > 0.0):
            raise InputError(f"must be a finite number above 0, got {value:g}", place=name)


def _phi(phi: Mapping[str, float], name: str) -> float:
    """Return 1/gamma_M by name; one that nobody gave is not 1."""
    if name not in phi:
        raise MissingDataError(f"{SOURCE} needs 1/gamma_M by this name", place=f"resistance.{name}")
    return phi[name]


def _step(symbol: str, equation: str, value: float, unit: str) -> Step:
    """Return a step of this standard."""
    return Step(symbol, equation, value, unit, SOURCE)


def _least(symbol: str, found: Mapping[str, float], steps: list[Step], equation: str = "") -> Strength:
    """Return the least of the limit states; the last step says which."""
    governs = min(found, key=lambda name: found[name])
    unit = {"N": "N", "V": "N", "M": "N m"}[symbol[0]]
    return Strength(found[governs], (*steps, _step(symbol, f"{governs} governs{equation}", found[governs], unit)))
