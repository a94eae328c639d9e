"""Steel stringers and floorbeams by load and resistance factors: AASHTO LRFD 6.10, A6 and 6.10.9.

Covered: straight rolled or riveted I-beams and channels bent about x, yield up to 70 ksi, webs that are not slender.
Not covered: slender webs (6.10.8), composite slabs (6.10.7), holes in the tension flange (6.10.1.8), web crippling,
loads hung above the shear centre, tension-field action, coped ends.

References
----------
AASHTO LRFD Bridge Design Specifications, 7th and 8th editions: articles 6.10.9, A6.2, A6.3, D6.1 (from memory).
S. P. Timoshenko, J. M. Gere, Theory of Elastic Stability, 2nd edition: 6.3, lateral buckling (from memory).
"""

from __future__ import annotations

import math
from dataclasses import dataclass
from typing import TYPE_CHECKING, Final, Literal, Self

from movload.errors import InputError
from movload.strength.aashto_lrfd import SHEAR_RATIO, least
from movload.strength.beam_column import STABILITY, TITLE
from movload.strength.strength import Step, Strength
from movload.strength.warnings import factor_of, require_not_negative, require_positive

if TYPE_CHECKING:
    from collections.abc import Mapping

Sense = Literal["moment", "hogging"]
SLENDER_WEB: Final = 5.7  # 2 Dc / tw sqrt(Fy / E), A6.1-1
_UNIFORM, _MOST_UNEVEN = 1.0, 2.3  # bounds of Cb, A6.3.3-7
_RESIDUAL: Final = 0.7  # share of yield at which residual stress starts yielding, A6.3
_HIGHEST_YIELD: Final = 70e3 * 6894.757  # Pa, 70 ksi, A6.1
_STOCKY_FLANGE, _SLENDER_FLANGE = 0.38, 0.95  # bf / 2 tf sqrt(Fy / E), A6.3.2-4 and -5
_EDGES: Final = (0.35, 0.76)  # bounds of kc, A6.3.2-6


@dataclass(frozen=True, slots=True, kw_only=True)
class Lateral:
    """How a beam may buckle sideways between its braces.

    Attributes
    ----------
    unbraced
        Length between points where the compression flange is held [m].
    i_y, j, c_w
        Second moment about y and torsion constant [m4], warping constant [m6]; an I of unequal flanges by
        ``of_flange``.
    c_b
        For the moment's shape, 1 (even) to 2.3 [-].
    """

    unbraced: float
    i_y: float
    j: float
    c_w: float
    c_b: float = 1.0

    def __post_init__(self) -> None:
        """Refuse what no beam has."""
        require_positive(unbraced=self.unbraced, i_y=self.i_y, c_w=self.c_w)
        require_not_negative(j=self.j)
        if not _UNIFORM <= self.c_b <= _MOST_UNEVEN:
            raise InputError(f"Cb must be 1 to 2.3 ({TITLE} A6.3.3), got {self.c_b:g}", place="c_b")

    @classmethod
    def of_flange(cls, unbraced: float, i_yc: float, j: float, depth: float) -> Self:
        """Return it for an I by its compression flange's I about y [m4] and the ``depth`` between flanges [m].

        I_y = 2 I_yc and Cw = I_yc h^2 / 2: exact for equal flanges, the standard's own stand-in for unequal ones.
        """
        return cls(unbraced=unbraced, i_y=2.0 * i_yc, j=j, c_w=0.5 * i_yc * depth**2)


@dataclass(frozen=True, slots=True, kw_only=True)
class Beam:
    """A beam's cross-section for one sense of moment.

    Attributes
    ----------
    s_c, s_t
        Elastic section modulus at the compression and at the tension flange [m3].
    z
        Plastic section modulus [m3]; None keeps to the yield moment.
    flange_ratio
        Compression flange's half width over its thickness [-].
    web_ratio
        Twice the greater of the web's elastic and plastic depth in compression, over its thickness [-].
    fy, modulus
        [Pa].
    lateral
        None states that the compression flange is held all along.
    """

    s_c: float
    s_t: float
    z: float | None
    flange_ratio: float
    web_ratio: float
    fy: float
    modulus: float
    lateral: Lateral | None

    def __post_init__(self) -> None:
        """Refuse impossible numbers and a web too slender for these rules."""
        require_positive(s_c=self.s_c, s_t=self.s_t, z=self.z, fy=self.fy, modulus=self.modulus)
        require_positive(flange_ratio=self.flange_ratio, web_ratio=self.web_ratio)
        if self.z is not None and self.z < min(self.s_c, self.s_t):
            raise InputError(f"a plastic modulus is at least the elastic one, got {self.z:g} m3", place="z")
        limit = SLENDER_WEB * math.sqrt(self.modulus / self.fy)
        if self.web_ratio > limit:
            raise InputError(f"2 Dc/tw must be {limit:.1f} at most ({TITLE} A6.1, MBE alike): "
                             f"slender webs are not covered, got {self.web_ratio:.1f}", place="web_ratio")  # fmt: skip

    @property
    def yield_moment(self) -> float:
        """My = Fy min(Sxc, Sxt) [N m]."""
        return self.fy * min(self.s_c, self.s_t)


@dataclass(frozen=True, slots=True, kw_only=True)
class Web:
    """A web in shear: clear ``depth`` and least ``thickness`` [m], fy, modulus [Pa], ``stiffeners`` apart or None."""

    depth: float
    thickness: float
    fy: float
    modulus: float
    stiffeners: float | None

    def __post_init__(self) -> None:
        """Refuse what no web can be."""
        require_positive(depth=self.depth, thickness=self.thickness, fy=self.fy, modulus=self.modulus)
        require_positive(stiffeners=self.stiffeners)
        if self.thickness > self.depth / 2:
            raise InputError(f"must be at most half the depth, got {self.thickness:g} m", place="thickness")


def bending(beam: Beam, phi: Mapping[str, float], sense: Sense = "moment") -> Strength:
    """Return Mr = phi_f Mn [N m], the least of full section, flange buckling and lateral-torsional buckling.

    phi by the name of ``sense``. Raises InputError for a yield above 70 ksi or a flange too slender.
    """
    if beam.fy > _HIGHEST_YIELD:
        raise InputError(f"must be 70 ksi (482.6 MPa) at most ({TITLE} A6.1), got {beam.fy:g} Pa", place="fy")
    factor, (full, found) = factor_of(phi, sense), _full(beam)
    flange, sideways = _flange(beam, full), _sideways(beam, full)
    steps = [Step("phi_f", f"resistance factor, {sense} (6.5.4.2)", factor, "-", TITLE), *found, flange, *sideways]
    states = {"full section": full, "flange buckling": flange.value, "lateral-torsional buckling": sideways[-1].value}
    return least({name: factor * moment for name, moment in states.items()}, "Mr", steps)


@dataclass(frozen=True, slots=True)
class WebLimits:
    """A standard's C: with s = D/tw sqrt(Fyw/(E k)) 1 up to s = a, a/s up to b, c/s^2 beyond; its title and article."""

    a: float
    b: float
    c: float
    title: str = TITLE
    article: str = "6.10.9"


def shear(web: Web, phi: Mapping[str, float], limits: WebLimits = WebLimits(1.12, 1.40, 1.57)) -> Strength:
    """Return Vr = phi_v C 0.58 Fyw D tw [N]; phi by name: "shear".

    k of ``limits`` is 5 + 5/(do/D)^2 where stiffeners stand at most 3 D apart, else 5.
    """
    factor, title = factor_of(phi, "shear"), limits.title
    stiffened = web.stiffeners is not None and web.stiffeners <= 3.0 * web.depth
    restraint = 5.0 + (5.0 / ((web.stiffeners or 1.0) / web.depth) ** 2 if stiffened else 0.0)
    ratio = web.depth / web.thickness * math.sqrt(web.fy / (web.modulus * restraint))
    share = 1.0 if ratio <= limits.a else limits.a / ratio if ratio <= limits.b else limits.c / ratio**2
    plastic = 0.58 * web.fy * web.depth * web.thickness
    steps = (
        Step(
            "C", f"by D/tw sqrt(Fyw / (E k)) = {ratio:.3f}, k = {restraint:.2f} ({limits.article})", share, "-", title
        ),
        Step("phi_v", "resistance factor, shear", factor, "-", title),
        Step("Vp", f"0.58 Fyw D tw ({limits.article})", plastic, "N", title),
    )
    return least({"web buckling" if share < 1 else "web yield": factor * share * plastic}, "Vr = phi_v C Vp", steps)


def elastic_moment(lateral: Lateral, modulus: float) -> float:
    """Return Mcr = Cb pi/L sqrt(E Iy G J + (pi E/L)^2 Iy Cw) [N m], G = 0.385 E."""
    twisting = SHEAR_RATIO * modulus**2 * lateral.i_y * lateral.j
    warping = (math.pi * modulus / lateral.unbraced) ** 2 * lateral.i_y * lateral.c_w
    return lateral.c_b * math.pi / lateral.unbraced * math.sqrt(twisting + warping)


def _full(beam: Beam) -> tuple[float, tuple[Step, ...]]:
    """Return Rpc My, between Mp of a compact web and My of a noncompact one, and its steps."""
    yielding = beam.yield_moment
    first = Step("My", "Fy min(Sxc, Sxt) (D6.2.1)", yielding, "N m", TITLE)
    if beam.z is None:
        return yielding, (first,)
    plastic, root = beam.fy * beam.z, math.sqrt(beam.modulus / beam.fy)
    noncompact = SLENDER_WEB * root
    compact = min(root / max(0.54 * plastic / yielding - 0.09, 1e-9) ** 2, noncompact)
    along = min(max(beam.web_ratio - compact, 0.0) / max(noncompact - compact, 1e-9), 1.0)
    value = plastic - (plastic - yielding) * along
    return value, (
        first,
        Step("Mp", "Fy Z (D6.1)", plastic, "N m", TITLE),
        Step("lambda_pw", "sqrt(E/Fy) / (0.54 Mp/My - 0.09)^2 (A6.2.1-2)", compact, "-", TITLE),
        Step("Rpc My", "Mp for a compact web, straight to My at 5.7 sqrt(E/Fy) (A6.2.2-4)", value, "N m", TITLE),
    )


def _flange(beam: Beam, full: float) -> Step:
    """Return the moment at which the compression flange buckles locally, or refuse a slender one."""
    root = math.sqrt(beam.modulus / beam.fy)
    edge = min(max(4.0 / math.sqrt(beam.web_ratio), _EDGES[0]), _EDGES[1])
    stocky, slender = _STOCKY_FLANGE * root, _SLENDER_FLANGE * root * math.sqrt(edge / _RESIDUAL)
    if beam.flange_ratio > slender:
        raise InputError(f"b/2t must be {slender:.1f} at most ({TITLE} A6.3.2), got {beam.flange_ratio:.1f}",
                         place="flange_ratio")  # fmt: skip
    along = max(beam.flange_ratio - stocky, 0.0) / (slender - stocky)
    value = full - (full - _RESIDUAL * beam.yield_moment) * along
    return Step("Mn flange", "Rpc My, straight to 0.7 My at the slender limit (A6.3.2-1, -2)", value, "N m", TITLE)


def _sideways(beam: Beam, full: float) -> tuple[Step, ...]:
    """Return the steps to the moment of lateral-torsional buckling, which is the last one's value.

    Lr is where the elastic moment at Cb = 1 falls to 0.7 My: its square is the positive root of
    Mr^2 u^2 - pi^2 E Iy G J u - pi^4 E^2 Iy Cw = 0.
    """
    lateral = beam.lateral
    if lateral is None:
        return (Step("Mn sideways", "Rpc My, held all along (A6.3.3-1)", full, "N m", TITLE),)
    residual = _RESIDUAL * beam.yield_moment
    radius = math.sqrt(math.sqrt(lateral.i_y * lateral.c_w) / beam.s_c)
    short = radius * math.sqrt(beam.modulus / beam.fy)
    twisting = math.pi**2 * SHEAR_RATIO * beam.modulus**2 * lateral.i_y * lateral.j
    warping = math.pi**4 * beam.modulus**2 * lateral.i_y * lateral.c_w
    long = math.sqrt((twisting + math.sqrt(twisting**2 + 4.0 * residual**2 * warping)) / 2.0) / residual
    along = max(lateral.unbraced - short, 0.0) / (long - short)
    elastic = elastic_moment(lateral, beam.modulus)
    between = lateral.c_b * (full - (full - residual) * along)
    value, said = (elastic, "Mcr") if lateral.unbraced > long else (between, "Cb times straight from Rpc My to 0.7 My")
    return (
        Step("Lp", "rt sqrt(E/Fy), rt^2 = sqrt(Iy Cw) / Sxc (A6.3.3-4)", short, "m", TITLE),
        Step("Lr", "where Mcr at Cb = 1 is 0.7 My (A6.3.3-5)", long, "m", TITLE),
        Step("Mcr", "Cb pi/L sqrt(E Iy G J + (pi E/L)^2 Iy Cw)", elastic, "N m", STABILITY),
        Step("Mn sideways", f"{said}, at most Rpc My (A6.3.3-1 to -3)", min(value, full), "N m", TITLE),
    )
