"""Steel bars in tension and compression by load and resistance factors: AASHTO LRFD 6.8.2 and 6.9.4.

Covered: yielding and fracture; buckling about x, about y and with twist; slender plates by Q; built-up bars. Not
covered: pins and eyebar heads (6.8.7), block shear, connections, hybrid bars, single angles by 6.9.4.4, round tubes
slender by 6.9.4.2. The bar itself is a ``Column`` of movload.strength.beam_column.

References
----------
AASHTO LRFD Bridge Design Specifications, 7th and 8th editions: articles 6.8.2, 6.9.2, 6.9.4, their equation numbers
and coefficients (from memory).
S. P. Timoshenko, J. M. Gere, Theory of Elastic Stability, 2nd edition: section 2.18, laced struts (from memory).
"""

from __future__ import annotations

import math
from dataclasses import dataclass
from typing import TYPE_CHECKING, Final

import numpy as np

from movload.errors import InputError, MissingDataError, UnknownNameError, nearest_name
from movload.strength.beam_column import STABILITY, TITLE, flexural_loads
from movload.strength.strength import Step, Strength
from movload.strength.warnings import factor_of, require_fraction, require_positive

if TYPE_CHECKING:
    from collections.abc import Mapping, Sequence

    from movload.strength.beam_column import Column

SHEAR_RATIO: Final = 0.385  # G / E, 6.9.4.1.3
_PUNCHED: Final = 0.90  # Rp of holes punched full size, 6.8.2.1
_ELASTIC: Final = 2.25  # Po / Pe above which a column buckles elastically, 6.9.4.1.1
_OUTSTANDING: Final = {
    "flange": (0.56, 1.03, 1.415, 0.74, 0.69),
    "angle leg": (0.45, 0.91, 1.34, 0.76, 0.53),
    "stem": (0.75, 1.03, 1.908, 1.22, 0.69),
}
"""Plates held along one edge, 6.9.4.2: by s = b/t sqrt(Fy/E) the two limits of s, a and c of a - c s, d of d/s^2."""
_HELD: Final = {"web": (1.49, 0.34), "cover": (1.40, 0.38)}
"""Plates held along both edges, 6.9.4.2: limit of s, and c of the effective width."""


@dataclass(frozen=True, slots=True, kw_only=True)
class Tie:
    """A bar in tension: what its two limit states ask for.

    Attributes
    ----------
    gross, net
        Least gross area anywhere along it, and net area at its connection [m2]; net may exceed gross (an eyebar's
        head with loss beside it) and is None while nobody has found it.
    fy, fu
        Yield and ultimate strength [Pa]; fu None where unknown.
    shear_lag
        U, above 0, to 1 [-].
    punched
        Whether its holes were punched full size.
    """

    gross: float
    net: float | None
    fy: float
    fu: float | None
    shear_lag: float
    punched: bool

    def __post_init__(self) -> None:
        """Refuse what no bar can be."""
        require_positive(gross=self.gross, net=self.net, fy=self.fy, fu=self.fu)
        require_fraction("shear_lag", self.shear_lag)
        if self.fu is not None and self.fu < self.fy:
            raise InputError(f"must be at least the yield strength {self.fy:g} Pa, got {self.fu:g} Pa", place="fu")

    def rupture(self, standard: str) -> float:
        """Return Fu An U [N], or ask for what it needs by a standard's article."""
        if self.net is None:
            raise MissingDataError(f"the net area at the connection is needed by {standard}", place="net")
        if self.fu is None:
            raise MissingDataError(f"the ultimate strength is needed by {standard}", place="fu")
        return self.fu * self.net * self.shear_lag


@dataclass(frozen=True, slots=True)
class Plate:
    """One plate of a cross-section: ``kind`` "flange", "angle leg", "stem", "web" or "cover"; width, thickness [m].

    A cover is a plate between lines of rivets, or the wall of a box.
    """

    kind: str
    width: float
    thickness: float

    def __post_init__(self) -> None:
        """Refuse an unknown kind and impossible dimensions."""
        known = (*_OUTSTANDING, *_HELD)
        if self.kind not in known:
            near = nearest_name(self.kind, known)
            raise UnknownNameError(f'"{self.kind}" is not one of {", ".join(known)}', place="kind", nearest=near)
        require_positive(width=self.width, thickness=self.thickness)


def tension(tie: Tie, phi: Mapping[str, float]) -> Strength:
    """Return Pr = min(phi_y Fy Ag, phi_u Fu An Rp U) [N]; phi by name: "tension" and "fracture".

    Raises
    ------
    MissingDataError
        No net area, no ultimate strength, or a phi that the level does not give.
    """
    holes = _PUNCHED if tie.punched else 1.0
    broken = factor_of(phi, "fracture") * tie.rupture(f"{TITLE} 6.8.2.1") * holes
    yielded = factor_of(phi, "tension") * tie.fy * tie.gross
    steps = (
        Step("phi_y Pny", "phi_y Fy Ag (6.8.2.1-1)", yielded, "N", TITLE),
        Step("Rp", "0.90 punched full size, 1 drilled or reamed (6.8.2.1)", holes, "-", TITLE),
        Step("U", "shear lag (6.8.2.2)", tie.shear_lag, "-", TITLE),
        Step("phi_u Pnu", "phi_u Fu An Rp U (6.8.2.1-2)", broken, "N", TITLE),
    )
    return least({"yield of the gross section": yielded, "fracture of the net section": broken}, "Pr", steps)


def compression(column: Column, phi: Mapping[str, float]) -> Strength:
    """Return Pr = phi_c Pn [N], at most what squashes the least section; phi by name: "compression".

    Pn = 0.658^(Po/Pe) Po up to Po/Pe = 2.25 and 0.877 Pe beyond, with Po = Q Fy Ag.
    """
    factor, (elastic, found) = factor_of(phi, "compression"), elastic_buckling(column)
    squash = column.slender * column.fy * column.area
    if squash / elastic <= _ELASTIC:
        nominal, said = math.pow(0.658, squash / elastic) * squash, "0.658^(Po/Pe) Po (6.9.4.1.1-1)"
    else:
        nominal, said = 0.877 * elastic, "0.877 Pe, Po/Pe above 2.25 (6.9.4.1.1-2)"
    crushed = factor * column.slender * column.fy * column.gross
    steps = (
        *found,
        Step("Q", "slender plates (6.9.4.2)", column.slender, "-", TITLE),
        Step("Po", "Q Fy Ag (6.9.4.1.1)", squash, "N", TITLE),
        Step("Pn", said, nominal, "N", TITLE),
        Step("phi_c Pn", "phi_c Pn (6.9.2.1-1)", factor * nominal, "N", TITLE),
        Step("phi_c Ps", "phi_c Q Fy Ag of the least section (6.9.4.1.1)", crushed, "N", TITLE),
    )
    return least({"buckling": factor * nominal, "squash of the least section": crushed}, "Pr", steps)


def elastic_buckling(column: Column) -> tuple[float, tuple[Step, ...]]:
    """Return the least elastic buckling load Pe [N] of a bar, and its steps.

    With twist it is the lowest root of (Pe - Pex)(Pe - Pey)(Pe - Pez) - Pe^2 (Pe - Pey)(x0/r0)^2
    - Pe^2 (Pe - Pex)(y0/r0)^2 = 0 (6.9.4.1.3-7), which is 6.9.4.1.3-2 where x0 or y0 is 0.
    """
    about_x, about_y, steps = flexural_loads(column)
    twist = column.torsion
    if twist is None:
        least = min(about_x, about_y)
        return least, (*steps, Step("Pe", "least of Pex, Pey; twist stated not to govern", least, "N", TITLE))
    polar = twist.polar or twist.x0**2 + twist.y0**2 + column.r_x**2 + column.r_y**2
    warping = math.pi**2 * column.modulus * twist.c_w / twist.kl_z**2
    alone = (warping + SHEAR_RATIO * column.modulus * twist.j) / polar
    # The equation is det(diag(P) - Pe C) = 0 with C below, so 1/Pe is the greatest eigenvalue of P^-1/2 C P^-1/2.
    x, y = twist.x0 / math.sqrt(polar), twist.y0 / math.sqrt(polar)
    coupled = np.array([[1.0, 0.0, x], [0.0, 1.0, y], [x, y, 1.0]])
    root = np.sqrt([about_x, about_y, alone])
    least = 1.0 / float(np.linalg.eigvalsh(coupled / np.outer(root, root))[-1])
    return least, (
        *steps,
        Step("r0^2", "x0^2 + y0^2 + rx^2 + ry^2 (6.9.4.1.3-6)", polar, "m2", TITLE),
        Step("Pez", "(pi^2 E Cw / (Kz lz)^2 + G J) / r0^2, G = 0.385 E (6.9.4.1.3-5)", alone, "N", TITLE),
        Step("Pe", "lowest root with twist (6.9.4.1.3-7)", least, "N", TITLE),
    )


def slender_reduction(plates: Sequence[Plate], area: float, fy: float, modulus: float
) -> tuple[float, tuple[Step, ...]]:  # fmt: skip
    """Return Q = Qs Qa [-] of a cross-section's plates, each named as often as it is there, and its steps.

    Qs is the least of the plates held along one edge; Qa = Aeff / Ag, at Fy, which no column's stress exceeds.
    """
    require_positive(area=area, fy=fy, modulus=modulus)
    root = math.sqrt(modulus / fy)
    outstanding = [_outstanding(plate, root) for plate in plates if plate.kind in _OUTSTANDING]
    lost = sum(_lost(plate, root) for plate in plates if plate.kind in _HELD)
    if lost >= area:
        raise InputError(f"must exceed what its slender plates lose, {lost:g} m2, got {area:g} m2", place="area")
    of_edges, of_widths = min(outstanding, default=1.0), 1.0 - lost / area
    return of_edges * of_widths, (
        Step("Qs", "least of the plates held along one edge (6.9.4.2.2)", of_edges, "-", TITLE),
        Step("Qa", "Aeff / Ag, be = 1.92 t sqrt(E/f) (1 - c t/b sqrt(E/f)), f = Fy (6.9.4.2.2)", of_widths, "-", TITLE),
        Step("Q", "Qs Qa (6.9.4.2.2)", of_edges * of_widths, "-", TITLE),
    )


def lacing_stiffness(bar_area: float, pitch: float, apart: float, *, bars: int, modulus: float) -> tuple[float, Step]:
    """Return Sv = n E Ad p b^2 / d^3 [N] of lacing bars, d^2 = p^2 + b^2, and its step.

    Parameters
    ----------
    bar_area
        Of one lacing bar, Ad [m2].
    pitch, apart
        What one bar spans along the member, p, and across it, b, between rivets [m].
    bars
        n that one cut across the member meets: 2 for single lacing on two faces, 4 for double lacing.
    """
    require_positive(bar_area=bar_area, pitch=pitch, apart=apart, bars=bars, modulus=modulus)
    stiffness = bars * modulus * bar_area * pitch * apart**2 / math.hypot(pitch, apart) ** 3
    return stiffness, Step("Sv", "n E Ad p b^2 / d^3 (2.18)", stiffness, "N", STABILITY)


def least(states: Mapping[str, float], symbol: str, steps: Sequence[Step]) -> Strength:
    """Return the least of some limit states by name; the last step, in the unit of the one before, says which."""
    governing = min(states, key=lambda state: states[state])
    last = Step(symbol, f"least of the above: {governing}", states[governing], steps[-1].unit, steps[-1].source)
    return Strength(states[governing], (*steps, last))


def _outstanding(plate: Plate, root: float) -> float:
    """Return Qs of a plate held along one edge; ``root`` is sqrt(E/Fy)."""
    stocky, slender, start, slope, elastic = _OUTSTANDING[plate.kind]
    ratio = plate.width / plate.thickness / root
    if ratio <= stocky:
        return 1.0
    return min(1.0, start - slope * ratio) if ratio <= slender else elastic / ratio**2


def _lost(plate: Plate, root: float) -> float:
    """Return the area [m2] that a plate held along both edges loses to local buckling; ``root`` is sqrt(E/Fy)."""
    stocky, bend = _HELD[plate.kind]
    ratio = plate.width / plate.thickness / root
    effective = 1.92 * plate.thickness * root * (1.0 - bend / ratio)
    return 0.0 if ratio <= stocky else max(0.0, plate.width - effective) * plate.thickness
