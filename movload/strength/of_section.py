"""What the rules ask of a section as found: its axes, edges, plates and buckling curves, in the rules' own words."""

from __future__ import annotations

import math
import re
from dataclasses import dataclass
from typing import TYPE_CHECKING, Final

from movload.bridge.section import Section
from movload.errors import InputError, MissingDataError
from movload.strength.aashto_lrfd import Plate
from movload.strength.en_1993 import CURVES
from movload.strength.strength import Step

if TYPE_CHECKING:
    from movload.bridge.loss import CrossSection
    from movload.bridge.made import Held, Made
    from movload.bridge.section_piece import PlateElement
    from movload.bridge.section_properties import Properties

_OWN: Final = "movload"
_BARE: Final = re.compile("[A-Za-z0-9_-]+")  # what TOML writes without quotes
_PRINCIPAL: Final = 1e-6  # I_xy over I_max up to which x and y are the principal axes: places typed to a micrometre
_SKEW: Final = math.radians(15.0)  # tilt beyond which neither principal axis is called x or y (own choice)
_ROUND_WALL: Final = 0.11  # E/Fy times it is the greatest D/t of a round tube, AASHTO LRFD 6.9.4.2 (from memory)
_PLATE_KINDS: Final = {
    ("angle", 1): "angle leg", ("channel", 1): "flange", ("channel", 2): "web", ("I", 1): "flange", ("I", 2): "web",
    ("rectangular tube", 2): "cover", ("plate", 1): "flange", ("plate", 2): "cover",
}  # fmt: skip
"""What the rules call a part, by the kind of its shape and how many of its edges are held."""
_CURVES: Final = {
    "angle": ("b", "b"), "channel": ("c", "c"), "flat": ("c", "c"), "eyebar": ("c", "c"), "plate": ("c", "c"),
    "round bar": ("c", "c"), "threaded rod": ("c", "c"), "rectangular tube": ("c", "c"), "round tube": ("c", "c"),
}  # fmt: skip
"""Of EN 1993-1-1 Table 6.2 (from memory), the worse where it depends on how the shape was made."""
_THICK_FLANGE: Final = 0.040  # m, Table 6.2


@dataclass(frozen=True, slots=True)
class Axes:
    """The two axes a bar buckles about: x and y, or where they are not principal the two that stand in for them.

    Attributes
    ----------
    kl_x, kl_y, r_x, r_y
        Effective lengths and radii of gyration [m].
    offset_turn
        Turn of the first axis from x [radians].
    skew
        Whether neither axis can be called x or y.
    steps
        How they were found; empty where x and y are principal.
    """

    kl_x: float
    kl_y: float
    r_x: float
    r_y: float
    offset_turn: float = 0.0
    skew: bool = False
    steps: tuple[Step, ...] = ()

    def turned(self, offset: tuple[float, float]) -> tuple[float, float]:
        """Return a point given in x and y in these axes."""
        cosine, sine = math.cos(self.offset_turn), math.sin(self.offset_turn)
        return offset[0] * cosine + offset[1] * sine, offset[1] * cosine - offset[0] * sine


def key_of(made: Made, name: str) -> str:
    """Return where a value of a part is to be typed."""
    return f"{made.place}.{name}" if made.place else name


def material_key(made: Made, name: str) -> str:
    """Return where a value of a part's material is to be typed: in a file, the table that bears its name."""
    title = made.material.title
    if not made.place:
        return f'material "{title}".{name}'
    key = title if _BARE.fullmatch(title) else f'"{title}"'
    return f"materials.{key}.{name}"


def axes_of(properties: Properties, held: Held) -> Axes:
    """Return the axes a bar buckles about.

    With I_xy the two planes buckle together. The loads are at least the eigenvalues of
    pi^2 E [[I_x/(K l)_x^2, -c], [-c, I_y/(K l)_y^2]], c = I_xy/((K l)_x (K l)_y), by Schwarz's inequality; with
    (K l)_x = (K l)_y these are the loads about the principal axes. Radii are such that K l / r gives those loads.
    """
    if not _coupled(properties):
        return Axes(held.kl_x, held.kl_y, properties.r_x, properties.r_y)
    x, y = properties.i_x / held.kl_x**2, properties.i_y / held.kl_y**2
    shared = properties.i_xy / (held.kl_x * held.kl_y)
    middle, spread = (x + y) / 2.0, math.hypot((x - y) / 2.0, shared)
    turn = math.atan2(-2.0 * shared, x - y) / 2.0  # of the greater one's axis
    skew = min(abs(turn), math.pi / 2.0 - abs(turn)) > _SKEW
    loads = [middle + spread, (x * y - shared**2) / (middle + spread)]
    lengths = [max(held.kl_x, held.kl_y)] * 2 if skew else [held.kl_x, held.kl_y]
    if not skew and abs(turn) > math.pi / 4.0:  # the greater one's axis is nearly y
        loads.reverse()
        turn -= math.copysign(math.pi / 2.0, turn)
    first, second = (length * math.sqrt(load / properties.area) for length, load in zip(lengths, loads, strict=True))
    rule = "{} axis, K l sqrt(a load of it / A), of a = Ix/(K l x)^2, b = Iy/(K l y)^2, c = Ixy/(K l x K l y)"
    steps = (
        Step("Ixy", "x and y are not principal: both planes buckle together", properties.i_xy, "m4", properties.title),
        Step("turn", "of the first axis from x, atan2(-2 c, a - b)/2 to a quarter turn", math.degrees(turn), "degrees",
             _OWN),
        Step("r_1", rule.format("first"), first, "m", _OWN),
        Step("r_2", f"{rule.format('second')}; loads from [[a, -c], [-c, b]]", second, "m", _OWN),
    )  # fmt: skip
    return Axes(lengths[0], lengths[1], first, second, turn, skew, steps)


def _coupled(properties: Properties) -> bool:
    """Whether x and y are not the principal axes."""
    return abs(properties.i_xy) > _PRINCIPAL * properties.i_max


def edge_moduli(properties: Properties, axis: str) -> tuple[float, float]:
    """Return the elastic moduli [m3] of top and bottom (axis x) or left and right (axis y).

    Where x and y are not principal, a lower bound of it: the edge's farthest corner is taken to be as far across as any
    of the section, S = (I_x I_y - I_xy^2) / (I_other d + |I_xy| d_other).
    """
    along_x = axis == "x"
    own = _moduli(properties, along_x=along_x)
    if not _coupled(properties):
        return own
    inertia, other = (properties.i_x, properties.i_y) if along_x else (properties.i_y, properties.i_x)
    across = other / min(_moduli(properties, along_x=not along_x))
    free = properties.i_x * properties.i_y - properties.i_xy**2
    one, two = (free / (other * inertia / modulus + abs(properties.i_xy) * across) for modulus in own)
    return one, two


def _moduli(properties: Properties, *, along_x: bool) -> tuple[float, float]:
    """Return the moduli of both edges about x or about y."""
    if along_x:
        return properties.s_x_top, properties.s_x_bottom
    return properties.s_y_left, properties.s_y_right


def plates_of(section: CrossSection, fy: float, modulus: float) -> list[Plate]:
    """Return a section's plates as the rules name them, each as often as it is there; empty where none is known.

    Raises
    ------
    InputError
        A round tube whose wall is slender.
    """
    plates = []
    for part in section.plates:
        if part.edges == 0:
            _require_stout_wall(part, fy, modulus)
        else:
            plates.append(Plate(_PLATE_KINDS[part.shape, part.edges], part.width, part.thickness))
    return plates


def _require_stout_wall(wall: PlateElement, fy: float, modulus: float) -> None:
    """Refuse a round wall that may buckle before it yields."""
    ratio, limit = wall.width / wall.thickness, _ROUND_WALL * modulus / fy
    if ratio > limit:
        rule = f"D/t of a round tube is {limit:.1f} at most (AASHTO LRFD 6.9.4.2): slender ones are not covered"
        raise InputError(f"{rule}, got {ratio:.1f}", place=wall.piece)


def curves_of(made: Made, *, skew: bool) -> tuple[str, str]:
    """Return the buckling curves of EN 1993-1-1 about x and about y: as typed, or of the shape by Table 6.2.

    Raises
    ------
    MissingDataError
        A section of which no shape is known.
    """
    curves = made.curves or _curves_of_shape(made)
    worse = max(curves, key=lambda curve: CURVES.get(curve, math.inf))  # an unknown one is for the rule to refuse
    return (worse, worse) if skew else (curves[0], curves[1])


def _curves_of_shape(made: Made) -> tuple[str, str]:
    """Return the curves by Table 6.2."""
    section = made.section.section
    if not isinstance(section, Section):
        rule = "its shape is not known: type the buckling curves of Table 6.2 about x and y"
        raise MissingDataError(rule, place=key_of(made, "curves"))
    if len(section.pieces) > 1:
        return "c", "c"
    (piece,) = section.pieces
    if piece.shape.kind != "I":
        return _CURVES[piece.shape.kind]
    flanges = [part.thickness for part in piece.shape.elements() if part.part != "web"]
    strong, weak = ("b", "c") if max(flanges) <= _THICK_FLANGE else ("d", "d")
    return (weak, strong) if piece.turn % 180 else (strong, weak)
