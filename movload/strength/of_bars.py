"""From a metal bar as made to its strength in tension and in compression, bent or not, by each standard.

Areas, holes and losses come from the section as found, each where its limit looks for it: the least gross section
anywhere along yields and squashes, the net section at the ends breaks, the section at mid length buckles.
"""

from __future__ import annotations

import math
from dataclasses import dataclass, replace
from typing import TYPE_CHECKING, Final

from movload.bridge.section import Section
from movload.bridge.section_open import groups
from movload.errors import InputError, MissingDataError
from movload.strength import aashto_lrfd, en_1993, mbe_stress
from movload.strength.aashto_lrfd import elastic_buckling, lacing_stiffness, slender_reduction
from movload.strength.beam_column import Bending, Column, Connectors, Lacing, flexural_loads, with_bending
from movload.strength.of_section import axes_of, curves_of, edge_moduli, key_of, plates_of
from movload.strength.of_ties import tie_of, where
from movload.strength.of_twist import twist_of
from movload.strength.strength import Step, Strength
from movload.strength.warnings import factor_of

if TYPE_CHECKING:
    from collections.abc import Mapping

    from movload.bridge.made import Bent, Held, Made
    from movload.strength.aashto_lrfd import Plate
from movload.strength.of_section import Axes

_PACKED: Final = 15.0  # imin between packing plates of closely spaced parts, EN 1993-1-1 Table 6.9 (from memory)
_AMPLIFIED: Final = 0.75  # phi_K on Pe of an amplified moment, AASHTO LRFD 4.5.3.2.2b (from memory)


@dataclass(frozen=True, slots=True)
class Pushed:
    """A bar in compression as the rules want it: column, plates, axes, and the steps to all of them."""

    column: Column
    plates: tuple[Plate, ...]
    axes: Axes
    steps: tuple[Step, ...]


def bar_strength(made: Made, sense: str, standard: str, phi: Mapping[str, float]) -> Strength:
    """Return a metal bar's strength in tension or compression [N], with what bends it.

    Raises
    ------
    MissingDataError
        What the rule needs was not typed.
    InputError
        A section or a case that the standard's rules do not cover.
    """
    if made.bent and standard == "en_1993":
        rule = f"a bar bent beside its axial force ({en_1993.TITLE} 6.2.9, 6.3.3) is not covered: type its strength"
        raise InputError(rule, place=key_of(made, "bent"))
    if sense == "tension":
        axial, planes = _tension(made, standard, phi), _planes(made, standard, phi, None)
    else:
        pushed = pushed_bar(made, standard)
        axial, planes = _compression(made, pushed, standard, phi), _planes(made, standard, phi, pushed)
    return with_bending(axial, planes, linear=standard != "aashto_lrfd") if planes else axial


def pushed_bar(made: Made, standard: str) -> Pushed:
    """Return a bar in compression as the rules want it.

    Raises
    ------
    MissingDataError
        Nobody has typed how it is held, how its parts are joined, or what twist needs.
    """
    held = held_of(made)
    _require_joined(made)
    properties, material, gross = made.section.middle.properties, made.material, made.section.gross
    axes = axes_of(properties, held)
    plates = plates_of(made.section.middle, material.fy, material.modulus)
    slender, of_plates = _slender(made, plates, standard)
    built_up, of_joints = _built_up(made, axes, standard)
    column = Column(
        area=properties.area, gross=gross.area, kl_x=axes.kl_x, kl_y=axes.kl_y, r_x=axes.r_x, r_y=axes.r_y,
        fy=material.fy, modulus=material.modulus, torsion=None, built_up=built_up, slender=slender,
    )  # fmt: skip
    column, of_twist = _with_twist(made, held, axes, column)
    title = made.section.section.title
    steps = (
        Step("A new", "gross area as new", gross.as_new, "m2", title),
        Step("A", "gross area at mid length as found", properties.area, "m2", title),
        Step("A least", f"least gross area as found, {where(gross)}", gross.area, "m2", title),
        Step("rx", "radius of gyration at mid length, sqrt(Ix / A)", properties.r_x, "m", title),
        Step("ry", "sqrt(Iy / A)", properties.r_y, "m", title),
        Step("Fy", "yield stress", material.fy, "Pa", material.source),
        Step("E", "modulus of elasticity", material.modulus, "Pa", material.source),
        Step("K l x", "effective length for buckling about x", held.kl_x, "m", "typed"),
        Step("K l y", "effective length for buckling about y", held.kl_y, "m", "typed"),
        *axes.steps, *of_twist, *of_plates, *of_joints,
    )  # fmt: skip
    return Pushed(column, tuple(plates), axes, steps)


def held_of(made: Made) -> Held:
    """Return how a bar is held, or ask for it."""
    if made.held is None:
        rule = "compression needs the free lengths unbraced_x and unbraced_y and the factors k_x and k_y: type all four"
        raise MissingDataError(rule, place=key_of(made, "unbraced_x"))
    return made.held


def _tension(made: Made, standard: str, phi: Mapping[str, float]) -> Strength:
    """Return the strength in tension alone."""
    tie, steps = tie_of(made)
    rules = {"aashto_lrfd": aashto_lrfd.tension, "en_1993": en_1993.tension}
    return _after(steps, rules.get(standard, mbe_stress.tension)(tie, phi))


def _compression(made: Made, pushed: Pushed, standard: str, phi: Mapping[str, float]) -> Strength:
    """Return the strength in compression alone."""
    if standard != "en_1993":
        rule = aashto_lrfd.compression if standard == "aashto_lrfd" else mbe_stress.compression
        return _after(pushed.steps, rule(pushed.column, phi))
    if any(part.edges == 0 for part in made.section.section.plates):
        raise InputError(f"round tubes by {en_1993.TITLE} are not covered: type its strength",
                         place=made.section.section.title)  # fmt: skip
    curves = curves_of(made, skew=pushed.axes.skew)
    return _after(pushed.steps, en_1993.compression(pushed.column, phi, curves=curves, plates=pushed.plates))


def _slender(made: Made, plates: list[Plate], standard: str) -> tuple[float, tuple[Step, ...]]:
    """Return Q of a section's plates and its steps; EN 1993-1-1 looks at each plate itself."""
    if not plates or standard == "en_1993":
        return 1.0, ()
    area = made.section.middle.properties.area
    return slender_reduction(plates, area, made.material.fy, made.material.modulus)


def _built_up(made: Made, axes: Axes, standard: str) -> tuple[Connectors | Lacing | None, tuple[Step, ...]]:
    """Return how a bar's parts are held together; between skew axes the weaker one is weakened, which is safe."""
    joined = made.joined
    if joined is None:
        return None, ()
    if standard == "en_1993" and not joined.laced and joined.spacing <= _PACKED * joined.radius:
        said = "packing plates at most 15 imin apart make it one bar (6.4.4, Table 6.9)"
        return None, (Step("a / imin", said, joined.spacing / joined.radius, "-", en_1993.TITLE),)
    axis = joined.axis
    if axes.skew:
        axis = "x" if axes.kl_x / axes.r_x > axes.kl_y / axes.r_y else "y"
    if not joined.laced:
        held = Connectors(axis=axis, spacing=joined.spacing, radius=joined.radius, apart=joined.apart)
        return held, ()
    stiffness, step = lacing_stiffness(
        joined.lacing_area, joined.spacing, joined.apart, bars=joined.planes, modulus=made.material.modulus
    )
    return Lacing(axis=axis, stiffness=stiffness), (step,)


def _with_twist(made: Made, held: Held, axes: Axes, column: Column) -> tuple[Column, tuple[Step, ...]]:
    """Return the column with twist, of typed radii by the worse sign of I_xy, and the steps to it."""
    tilts = [axes.offset_turn]
    if axes.steps and not isinstance(made.section.section, Section):
        tilts.append(-axes.offset_turn)
    found = []
    for tilt in tilts:
        torsion, steps = twist_of(made, held, replace(axes, offset_turn=tilt))
        found.append((replace(column, torsion=torsion), steps))
    return found[0] if len(found) == 1 else min(found, key=lambda each: elastic_buckling(each[0])[0])


def _require_joined(made: Made) -> None:
    """Refuse a bar whose parts stand apart and are joined by nothing that was typed."""
    section = made.section.section
    if made.joined is not None or not isinstance(section, Section):
        return
    parts = groups(section.pieces)
    if len(parts) > 1:
        rule = "say how they are joined (lacing, battens or stitches)"
        raise MissingDataError(f'"{parts[0][0]}" and "{parts[1][0]}" stand apart: {rule}', place=key_of(made, "joined"))


def _planes(made: Made, standard: str, phi: Mapping[str, float], pushed: Pushed | None) -> list[Bending]:
    """Return what bends a bar, plane by plane; ``pushed`` is None in tension, which never buckles it."""
    return [_plane(made, bent, (standard, phi), pushed) for bent in made.bent]


def _plane(made: Made, bent: Bent, level: tuple[str, Mapping[str, float]], pushed: Pushed | None) -> Bending:
    """Return what bends a bar about one axis; between skew axes its elastic load is the lesser one."""
    standard, phi = level
    elastic = math.inf
    if pushed is not None:
        about_x, about_y, _ = flexural_loads(pushed.column)
        least = min(about_x, about_y)
        elastic = _margin(standard, phi) * (least if pushed.axes.skew else about_x if bent.axis == "x" else about_y)
    return Bending(
        strength=_bending_alone(made, bent.axis, standard, phi), moment=bent.moment, eccentricity=bent.eccentricity,
        bow=bent.bow, elastic=elastic, evenness=bent.evenness,
    )  # fmt: skip


def _margin(standard: str, phi: Mapping[str, float]) -> float:
    """Return what a standard takes of the elastic load that amplifies a moment.

    0.75 (AASHTO LRFD 4.5.3.2.2b); 1/2.12 or 1/1.70, the columns' own, by allowable stress (Standard Specifications
    10.36); all of it by load factor (10.54.2); all from memory.
    """
    if standard == "aashto_lrfd":
        return _AMPLIFIED
    return factor_of(phi, "compression") if standard == "mbe_allowable_stress" else 1.0


def _bending_alone(made: Made, axis: str, standard: str, phi: Mapping[str, float]) -> Strength:
    """Return the elastic strength in bending alone at mid length [N m]: phi Q Fy S of the worse edge."""
    middle, material, factor = made.section.middle, made.material, factor_of(phi, "moment")
    plates = plates_of(middle, material.fy, material.modulus)
    slender = _slender(made, plates, standard)[0] if standard == "aashto_lrfd" else 1.0
    modulus = min(edge_moduli(middle.properties, axis))
    value = factor * slender * material.fy * modulus
    said = f"phi Q Fy S about {axis}, elastic; buckling sideways of a bent bar is not covered"
    return Strength(
        value,
        (
            Step(f"S{axis}", "elastic modulus at mid length, worse edge", modulus, "m3", middle.title),
            Step(f"phi {axis}", "level's factor, moment", factor, "-", standard),
            Step(f"Mr{axis}", said, value, "N m", material.source),
        ),
    )


def _after(steps: tuple[Step, ...], strength: Strength) -> Strength:
    """Return a strength with earlier steps put before its own."""
    return replace(strength, steps=(*steps, *strength.steps))
