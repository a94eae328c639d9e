"""From a metal beam of the floor as made to its strength in bending and in shear, by each standard.

A beam goes by the worst of every property anywhere along it: least moduli, least web, slenderest flange. Holes are left
out of it (AASHTO LRFD 6.10.1.8 is not covered); a note says so.
"""

from __future__ import annotations

import math
from dataclasses import dataclass, replace
from typing import TYPE_CHECKING, Final, Literal, TypedDict

from movload.bridge.loss import PLACES, place_text, with_loss
from movload.bridge.section import Section
from movload.bridge.section_plastic import halving_level
from movload.errors import MissingDataError
from movload.strength import aashto_floor, en_1993, mbe_stress
from movload.strength.aashto_floor import Beam, Lateral, Web
from movload.strength.of_section import edge_moduli, key_of
from movload.strength.of_web import Webbed, webbed
from movload.strength.strength import Step, Strength

if TYPE_CHECKING:
    from collections.abc import Mapping, Sequence

    from movload.bridge.loss import CrossSection
    from movload.bridge.made import Made, Sideways

Sense = Literal["moment", "hogging"]
_UNKNOWN: Final = 1.0  # of plates that nobody knows; the section's notes say that they are not checked


_HELD: Final = (math.inf, math.inf, math.inf)
"""I_y, J and Cw where nothing buckles sideways."""


class _Typed(TypedDict):
    """What EN 1993-1-1 asks of a beam that may buckle sideways."""

    curve: str
    lever: float


@dataclass(frozen=True, slots=True)
class _Bent:
    """A section's numbers in bending at one place: moduli [m3], ratios [-], and what keeps it upright."""

    s_c: float
    s_t: float
    z: float | None
    flange_ratio: float
    web_ratio: float
    sideways: tuple[float, float, float] = _HELD


def beam_strength(made: Made, sense: str, standard: str, phi: Mapping[str, float]) -> Strength:
    """Return a metal beam's strength in "moment", "hogging" [N m] or "shear" [N].

    Raises
    ------
    MissingDataError
        What the rule needs was not typed.
    InputError
        A section or a case that the standard's rules do not cover.
    """
    if sense == "shear":
        return _shear(made, standard, phi)
    return _bending(made, "moment" if sense == "moment" else "hogging", standard, phi)


def sideways_of(made: Made) -> Sideways:
    """Return how a beam is held against buckling sideways, or ask for it."""
    if made.sideways is None:
        rule = 'bending needs the length between points that hold the edge in compression, or "held" for all along'
        raise MissingDataError(rule, place=key_of(made, "unbraced"))
    return made.sideways


def beam_of(made: Made, sense: Sense) -> tuple[Beam, tuple[Step, ...]]:
    """Return what bending asks for, the worst of every place along, and the steps to it."""
    held, material, section = sideways_of(made), made.material, made.section.section
    apart = held.unbraced is not None
    places = [_bent(with_loss(section, made.section.losses, place), sense, apart=apart) for place in PLACES]
    worst = _worst(places)
    lateral = None
    if held.unbraced is not None:
        i_y, j, c_w = worst.sideways
        lateral = Lateral(unbraced=held.unbraced, i_y=i_y, j=j, c_w=c_w, c_b=held.c_b)
    beam = Beam(
        s_c=worst.s_c, s_t=worst.s_t, z=worst.z, flange_ratio=worst.flange_ratio, web_ratio=worst.web_ratio,
        fy=material.fy, modulus=material.modulus, lateral=lateral,
    )  # fmt: skip
    return beam, _beam_steps(made, sense, beam)


def _bending(made: Made, sense: Sense, standard: str, phi: Mapping[str, float]) -> Strength:
    """Return the strength in bending."""
    beam, steps = beam_of(made, sense)
    if standard == "aashto_lrfd":
        found = aashto_floor.bending(beam, phi, sense)
    elif standard == "en_1993":
        found = en_1993.bending(beam, phi, sense, **_of_table(made, beam))
    else:
        found = mbe_stress.bending(beam, phi, sense, plastic=standard == "mbe_load_factor")
    return replace(found, steps=(*steps, *found.steps))


def _of_table(made: Made, beam: Beam) -> _Typed:
    """Return the curve and the lever that EN 1993-1-1 needs of a beam that may buckle sideways."""
    if beam.lateral is None:
        return {"curve": "", "lever": math.nan}
    if not made.curves:
        rule = f"the curve of Table 6.4 is needed by {en_1993.TITLE} 6.3.2.2: type curves, the first of which counts"
        raise MissingDataError(rule, place=key_of(made, "curves"))
    lever = sideways_of(made).lever
    if lever is None:
        rule = f"C2 zg of the load is needed by {en_1993.TITLE} 6.3.2.2: 0 where its flange is held or it hangs there"
        raise MissingDataError(rule, place=key_of(made, "lever"))
    return {"curve": made.curves[0], "lever": lever}


def _shear(made: Made, standard: str, phi: Mapping[str, float]) -> Strength:
    """Return the strength in shear, the least of every place along."""
    section, material = made.section.section, made.material
    stiffeners = None if made.sideways is None else made.sideways.stiffeners
    found = []
    for place in PLACES:
        parts = webbed(with_loss(section, made.section.losses, place))
        web = Web(depth=parts.depth, thickness=parts.thickness, fy=material.fy, modulus=material.modulus,
                  stiffeners=stiffeners)  # fmt: skip
        found.append((_shear_of(web, standard, phi), parts, place))
    strength, parts, place = min(found, key=lambda each: each[0].value)
    where = place_text(place if made.section.losses else "")
    steps = (
        Step("tw new", "web as new", webbed(section).thickness, "m", section.title),
        Step("tw", f"web as found, {where}", parts.thickness, "m", section.title),
        Step("D", "its depth", parts.depth, "m", section.title),
        Step("Fy", "yield stress", material.fy, "Pa", material.source),
    )
    return replace(strength, steps=(*steps, *strength.steps))


def _shear_of(web: Web, standard: str, phi: Mapping[str, float]) -> Strength:
    """Return a web's strength by a standard."""
    rules = {"aashto_lrfd": aashto_floor.shear, "en_1993": en_1993.shear}
    return rules.get(standard, mbe_stress.shear)(web, phi)


def _bent(section: CrossSection, sense: Sense, *, apart: bool) -> _Bent:
    """Return a section's numbers in bending; ``apart`` where it is held at points only."""
    properties = section.properties
    top, bottom = edge_moduli(properties, "x")
    s_c, s_t = (top, bottom) if sense == "moment" else (bottom, top)
    if not isinstance(section, Section):
        sideways = (properties.i_y, properties.torsion, properties.warping) if apart else _HELD
        return _Bent(s_c, s_t, None, _UNKNOWN, _UNKNOWN, sideways)
    parts = webbed(section)
    plastic = properties.z_x * min(s_c, s_t) / properties.s_x  # lessened as the elastic one where x is not principal
    return _Bent(
        s_c, s_t, max(plastic, min(s_c, s_t)), parts.flange_ratio(sense),
        _web_ratio(section, parts, sense), _sideways(section, parts, sense) if apart else _HELD,
    )  # fmt: skip


def _web_ratio(section: Section, parts: Webbed, sense: Sense) -> float:
    """Return twice the web's depth in compression, elastic or plastic, over its thickness; 1 where none is."""
    regions = [region for piece in section.pieces for region in piece.regions]
    plastic = halving_level(regions, section.properties.area)
    levels = (section.properties.y, plastic)
    depth = max(parts.web.top - level if sense == "moment" else level - parts.web.bottom for level in levels)
    return max(2.0 * depth / parts.thickness, 1.0)


def _sideways(section: Section, parts: Webbed, sense: Sense) -> tuple[float, float, float]:
    """Return I_y, J and Cw: a channel's own, an I's by its flange in compression."""
    properties = section.properties
    if section.pieces[0].shape.kind == "channel":
        return properties.i_y, properties.torsion, properties.warping
    inertia = parts.flange_inertia(sense)
    held = Lateral.of_flange(1.0, inertia, properties.torsion, parts.between)
    return held.i_y, held.j, held.c_w


def _worst(places: Sequence[_Bent]) -> _Bent:
    """Return the worst of every number over all places."""
    plastic = [place.z for place in places if place.z is not None]
    i_y, j, c_w = (min(place.sideways[each] for place in places) for each in range(3))
    return _Bent(
        min(place.s_c for place in places), min(place.s_t for place in places), min(plastic, default=None),
        max(place.flange_ratio for place in places), max(place.web_ratio for place in places), (i_y, j, c_w),
    )  # fmt: skip


def _beam_steps(made: Made, sense: Sense, beam: Beam) -> tuple[Step, ...]:
    """Return the steps to what bending asks for."""
    section, material = made.section.section, made.material
    top, bottom = edge_moduli(section.properties, "x")
    new = top if sense == "moment" else bottom
    where = "least of every place along" if made.section.losses else "the same all along"
    steps = [
        Step("Sxc new", "elastic modulus of the edge in compression as new", new, "m3", section.title),
        Step("Sxc", f"as found, {where}", beam.s_c, "m3", section.title),
        Step("Sxt", f"of the edge in tension as found, {where}", beam.s_t, "m3", section.title),
    ]
    if beam.z is not None:
        steps += [
            Step("Z", f"plastic modulus as found, {where}", beam.z, "m3", section.title),
            Step("b/2t", "flange in compression, slenderest place", beam.flange_ratio, "-", section.title),
            Step("2Dc/tw", "web, slenderest place", beam.web_ratio, "-", section.title),
        ]
    if beam.lateral is not None:
        steps += [
            Step("Lb", "between points that hold the edge in compression", beam.lateral.unbraced, "m", "typed"),
            Step("Iy", "an I's is twice its flange's in compression", beam.lateral.i_y, "m4", section.title),
            Step("J", "torsion constant", beam.lateral.j, "m4", section.title),
            Step("Cw", "warping constant", beam.lateral.c_w, "m6", section.title),
        ]
    return (*steps, Step("Fy", "yield stress", material.fy, "Pa", material.source))
