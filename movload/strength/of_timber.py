"""From a timber part as made to its strength: a tie, a post or a joist of one sawn or glued timber, by the NDS.

A loss takes off its width and its depth. Every strength comes twice: under all loads, by the shortest of them, and
under permanent load alone, which timber carries less of for a long time.
"""

from __future__ import annotations

from dataclasses import replace
from typing import TYPE_CHECKING, Final, cast

from movload.bridge.loss import PLACES, place_text, with_loss
from movload.bridge.section import Section
from movload.bridge.section_bars import SawnTimber
from movload.errors import InputError, MissingDataError
from movload.strength import nds
from movload.strength.nds import Joist, Post
from movload.strength.of_section import key_of, material_key
from movload.strength.standards import TITLES
from movload.strength.strength import Step, Strength

if TYPE_CHECKING:
    from collections.abc import Callable, Mapping

    from movload.bridge.loss import CrossSection
    from movload.bridge.made import Made
    from movload.bridge.material import Timber
    from movload.strength.aashto_floor import Sense

_STANDARD: Final = "mbe_allowable_stress"
_OF_MATERIAL: Final = frozenset({"stresses", "factors"})


def timber_strength(made: Made, sense: str, standard: str, phi: Mapping[str, float]) -> Strength:
    """Return a timber's strength [N, N m] in any sense, with what permanent load alone may use of it.

    Raises
    ------
    MissingDataError
        How long the loads stand, whether it is treated, how it is held, or what the NDS asks for was not typed.
    InputError
        Another standard, a section that is not one timber, a bent or a joined bar.
    """
    _require_covered(made, standard)
    duration = _duration(made)
    steps, rule = _rule(made, sense, phi)
    try:
        whole, permanent = nds.in_combination(rule, duration)
    except InputError as error:
        if error.place.partition(".")[0] not in _OF_MATERIAL:
            raise
        raise type(error)(error.rule, place=material_key(made, error.place), nearest=error.nearest) from None
    typed = [replace(step, source=made.material.source) if step.equation.startswith("reference") else step
             for step in whole.steps]  # fmt: skip
    return replace(whole, steps=(*steps, *typed), permanent=permanent.value)


def _rule(
    made: Made, sense: str, phi: Mapping[str, float]
) -> tuple[tuple[Step, ...], Callable[[float], Strength]]:  # fmt: skip
    """Return the steps to a timber's sizes, and its strength as a function of C_D."""
    timber, title = cast("Timber", made.material.timber), made.section.section.title
    if sense == "tension":
        net = _least_area(made)
        return _areas(made, net), lambda duration: nds.tension(timber, net, duration, phi)
    if sense == "compression":
        post = post_of(made)
        steps = (*_areas(made, post.net), Step("A", "area at mid length", post.area, "m2", title),
                 Step("K l x", "effective length about x", post.kl_x, "m", "typed"),
                 Step("K l y", "effective length about y", post.kl_y, "m", "typed"))  # fmt: skip
        return steps, lambda duration: nds.compression(timber, post, duration, phi)
    joist = joist_of(made, sense)
    steps = (Step("d", "depth, least along", joist.depth, "m", title),
             Step("b", "breadth, least along", joist.breadth, "m", title))  # fmt: skip
    if sense == "shear":
        return steps, lambda duration: nds.shear(timber, joist, duration, phi)
    bent: Sense = "moment" if sense == "moment" else "hogging"
    return steps, lambda duration: nds.bending(timber, joist, duration, phi, bent)


def post_of(made: Made) -> Post:
    """Return a timber in compression as the rule wants it."""
    if made.held is None:
        rule = "compression needs the free lengths unbraced_x and unbraced_y and the factors k_x and k_y: type all four"
        raise MissingDataError(rule, place=key_of(made, "unbraced_x"))
    breadth, depth = _sizes(made.section.middle)
    return Post(
        area=made.section.middle.gross_area, net=_least_area(made), depth=depth, breadth=breadth, kl_x=made.held.kl_x,
        kl_y=made.held.kl_y,
    )  # fmt: skip


def joist_of(made: Made, sense: str) -> Joist:
    """Return a timber in bending or in shear as the rule wants it: the least sizes anywhere along."""
    if made.sideways is None and sense != "shear":
        rule = 'bending needs the length between points that hold the edge in compression, or "held" for all along'
        raise MissingDataError(rule, place=key_of(made, "unbraced"))
    sizes = [_sizes(with_loss(made.section.section, made.section.losses, place)) for place in PLACES]
    breadth, depth = (min(size[each] for size in sizes) for each in range(2))
    return Joist(depth=depth, breadth=breadth, unbraced=None if made.sideways is None else made.sideways.unbraced)


def _require_covered(made: Made, standard: str) -> None:
    """Refuse what the NDS's rules here do not cover."""
    section = made.section.section
    if standard != _STANDARD:
        raise InputError(f"timber by {TITLES[standard]} is not covered: type its strength", place=made.material.title)
    if not (isinstance(section, Section) and [type(piece.shape) for piece in section.pieces] == [SawnTimber]):
        raise InputError("a timber's section is one timber of a width and a depth: type its strength",
                         place=section.title)  # fmt: skip
    if section.pieces[0].turn % 90:
        raise InputError(f"a timber stands or lies, got turned by {section.pieces[0].turn:g} degrees",
                         place=section.title)  # fmt: skip
    if made.bent or made.joined is not None:
        key = "bent" if made.bent else "joined"
        raise InputError(f"bent and built-up timbers are not covered by {nds.TITLE} here: type its strength",
                         place=key_of(made, key))  # fmt: skip


def _duration(made: Made) -> float:
    """Return C_D, or ask for what it follows from."""
    if not made.durations:
        known = ", ".join(nds.DURATIONS)
        raise MissingDataError(f"{nds.TITLE} 2.3.2 needs how long the loads stand: {known}",
                               place=material_key(made, "durations"))  # fmt: skip
    if made.treated is None:
        raise MissingDataError(f"{nds.TITLE} 2.3.2 needs whether it is treated under pressure: true or false",
                               place=material_key(made, "treated"))  # fmt: skip
    return nds.duration_factor(made.durations, treated=made.treated)


def _sizes(section: CrossSection) -> tuple[float, float]:
    """Return breadth along x and depth along y as found [m]."""
    left, right, bottom, top = cast("Section", section).pieces[0].regions[0].extent
    return right - left, top - bottom


def _least_area(made: Made) -> float:
    """Return the least area anywhere, holes at the ends out of it [m2]."""
    return min(made.section.net.area, made.section.gross.area)


def _areas(made: Made, net: float) -> tuple[Step, ...]:
    """Return the steps to the least area."""
    gross, title = made.section.gross, made.section.section.title
    where = place_text(gross.place)
    return (
        Step("A new", "gross area as new", gross.as_new, "m2", title),
        Step("A least", f"least gross area as found, {where}", gross.area, "m2", title),
        Step("An", "least area with holes out of it, of the ends and along", net, "m2", title),
    )
