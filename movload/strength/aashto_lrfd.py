"""Steel bars in tension and compression by load and resistance factors: AASHTO LRFD 6.8.2 and 6.9.4.

Covered: yielding and fracture; buckling about x, about y and with twist; slender plates by Q; built-up bars. Not
covered: pins and eyebar heads (6.8.7), block shear, connections, hybrid bars, single angles by 6.9.4.4. Axes x (across
the bridge) and y (up) must be principal: an unsymmetrical angle goes by its own two.

References
----------
AASHTO LRFD Bridge Design Specifications, 7th and 8th editions: articles 6.8.2, 6.9.2, 6.9.4, their equation numbers
and coefficients (from memory).
S. P. Timoshenko, J. M. Gere, Theory of Elastic Stability, 2nd edition, section 2.18: laced struts (from memory).
"""

from __future__ import annotations

import math
from dataclasses import dataclass
from typing import TYPE_CHECKING, Final, Literal

import numpy as np

from movload.errors import InputError, MissingDataError
from movload.strength.strength import Step, Strength

if TYPE_CHECKING:
    from collections.abc import Mapping, Sequence

TITLE: Final = "AASHTO LRFD"
SHEAR_RATIO: Final = 0.385  # G / E, 6.9.4.1.3
_PUNCHED: Final = 0.90  # Rp of holes punched full size, 6.8.2.1
_ELASTIC: Final = 2.25  # Po / Pe above which a column buckles elastically, 6.9.4.1.1
_COMPONENT: Final = 0.75  # greatest slenderness of a part over that of the whole bar, 6.9.4.3.1


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


@dataclass(frozen=True, slots=True, kw_only=True)
class Torsion:
    """What twist asks for: K L of twist [m], J [m4], Cw [m6], shear centre from the centroid x0, y0 [m]."""

    kl_z: float
    j: float
    c_w: float
    x0: float = 0.0
    y0: float = 0.0


@dataclass(frozen=True, slots=True, kw_only=True)
class Connectors:
    """Battens or stitches every ``spacing`` between parts of own ``radius``, ``apart`` between centroids [m].

    They weaken buckling about ``axis``, across which the parts stand.
    """

    axis: Literal["x", "y"]
    spacing: float
    radius: float
    apart: float


@dataclass(frozen=True, slots=True, kw_only=True)
class Lacing:
    """Lacing of a shear ``stiffness`` [N] (force per radian of shear), which weakens buckling about ``axis``."""

    axis: Literal["x", "y"]
    stiffness: float


@dataclass(frozen=True, slots=True, kw_only=True)
class Column:
    """A bar in compression.

    Attributes
    ----------
    area, gross
        Gross area at mid length, which buckles, and the least one anywhere, which squashes [m2].
    kl_x, kl_y, r_x, r_y
        Effective lengths K L and radii of gyration about x and y [m].
    fy, modulus
        [Pa].
    torsion
        None states that twist cannot govern: a closed bar, or a doubly symmetric I as free to bend as to twist.
    built_up
        How its parts are held together where that is not solid.
    slender
        Q, above 0, to 1 [-]; 1 for stocky plates, else see movload.strength.warnings.
    """

    area: float
    gross: float
    kl_x: float
    kl_y: float
    r_x: float
    r_y: float
    fy: float
    modulus: float
    torsion: Torsion | None
    built_up: Connectors | Lacing | None = None
    slender: float = 1.0

    def __post_init__(self) -> None:
        """Refuse what no bar can be."""
        names = ("area", "gross", "kl_x", "kl_y", "r_x", "r_y", "fy", "modulus")
        require_positive(**{name: getattr(self, name) for name in names})
        require_fraction("slender", self.slender)
        if self.torsion is not None:
            require_positive(kl_z=self.torsion.kl_z, j=self.torsion.j)
        if isinstance(self.built_up, Lacing):
            require_positive(stiffness=self.built_up.stiffness)
        if isinstance(self.built_up, Connectors):
            held = self.built_up
            require_positive(spacing=held.spacing, radius=held.radius, apart=held.apart)


def tension(tie: Tie, phi: Mapping[str, float]) -> Strength:
    """Return Pr = min(phi_y Fy Ag, phi_u Fu An Rp U) [N]; phi by name: "tension" and "fracture".

    Raises
    ------
    MissingDataError
        No net area, no ultimate strength, or a phi that the level does not give.
    """
    for name, value in (("net", tie.net), ("fu", tie.fu)):
        if value is None:
            raise MissingDataError(f"{name} is needed for fracture by {TITLE} 6.8.2.1", place=name)
    yielding, fracture = factor_of(phi, "tension"), factor_of(phi, "fracture")
    holes = _PUNCHED if tie.punched else 1.0
    values = (
        Step("phi_y Pny", "phi_y Fy Ag (6.8.2.1-1)", yielding * tie.fy * tie.gross, "N", TITLE),
        Step("Rp", "0.90 punched full size, 1 drilled or reamed (6.8.2.1)", holes, "-", TITLE),
        Step("U", "shear lag (6.8.2.2)", tie.shear_lag, "-", TITLE),
        Step("phi_u Pnu", "phi_u Fu An Rp U (6.8.2.1-2)",
             fracture * (tie.fu or 0.0) * (tie.net or 0.0) * holes * tie.shear_lag, "N", TITLE),
    )  # fmt: skip
    return least({"yield of the gross section": values[0], "fracture of the net section": values[3]}, values)


def compression(column: Column, phi: Mapping[str, float]) -> Strength:
    """Return Pr = phi_c Pn [N], at most what squashes the least section; phi by name: "compression".

    Pn = 0.658^(Po/Pe) Po up to Po/Pe = 2.25 and 0.877 Pe beyond, with Po = Q Fy Ag.
    """
    factor, (elastic, found) = factor_of(phi, "compression"), elastic_buckling(column)
    squash = column.slender * column.fy * column.area
    ratio = squash / elastic
    stocky = ratio <= _ELASTIC
    nominal = math.pow(0.658, ratio) * squash if stocky else 0.877 * elastic
    said = "0.658^(Po/Pe) Po (6.9.4.1.1-1)" if stocky else "0.877 Pe, Po/Pe above 2.25 (6.9.4.1.1-2)"
    buckling = Step("phi_c Pn", "phi_c Pn (6.9.2.1-1)", factor * nominal, "N", TITLE)
    crushing = Step("phi_c Psq", "phi_c Q Fy Ag of the least section (6.9.4.1.1)",
                    factor * column.slender * column.fy * column.gross, "N", TITLE)  # fmt: skip
    own = (
        Step("Q", "slender plates (6.9.4.2)", column.slender, "-", TITLE),
        Step("Po", "Q Fy Ag (6.9.4.1.1)", squash, "N", TITLE),
        Step("Pn", said, nominal, "N", TITLE),
    )
    return least({"buckling": buckling, "squash of the least section": crushing}, (*found, *own, buckling, crushing))


def elastic_buckling(column: Column) -> tuple[float, tuple[Step, ...]]:
    """Return the least elastic buckling load Pe [N] of a bar, and its steps.

    With twist Pe is the lowest root of 6.9.4.1.3-7, which becomes 6.9.4.1.3-2 where one of x0, y0 is 0:
    (Pe - Pex)(Pe - Pey)(Pe - Pez) - Pe^2 (Pe - Pey)(x0/r0)^2 - Pe^2 (Pe - Pex)(y0/r0)^2 = 0.
    """
    steps: list[Step] = []
    planes = []
    for axis in ("x", "y"):
        slenderness, found = _slenderness(column, axis)
        planes.append(math.pi**2 * column.modulus * column.area / slenderness**2)
        steps += [*found, Step(f"Pe{axis}", "pi^2 E Ag / (K l / r)^2 (6.9.4.1.2-1)", planes[-1], "N", TITLE)]
    twist = column.torsion
    if twist is None:
        least_load = min(planes)
        return least_load, (*steps, Step("Pe", "least of Pex, Pey; twist stated not to govern", least_load, "N", TITLE))
    polar = twist.x0**2 + twist.y0**2 + column.r_x**2 + column.r_y**2
    warping = math.pi**2 * column.modulus * twist.c_w / twist.kl_z**2
    own = (warping + SHEAR_RATIO * column.modulus * twist.j) / polar
    # The cubic is det(diag(Pex, Pey, Pez) - Pe C) = 0: its lowest root is the inverse of the greatest eigenvalue below.
    coupled = np.array([[1, 0, twist.x0], [0, 1, twist.y0], [twist.x0, twist.y0, 0]]) / [1, 1, 1]
    raise NotImplementedError(coupled, own)
