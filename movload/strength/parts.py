"""From a part as made to its strength by a standard: which rule it goes by, with no metal gone beside it, and notes.

A case that no rule here covers is refused by its name; a strength can always be typed instead.
"""

from __future__ import annotations

from dataclasses import replace
from typing import TYPE_CHECKING, Final

from movload.bridge.loss import PLACES, AsFound, with_loss
from movload.bridge.section import Section
from movload.errors import InputError, MovloadError, Note, UnknownNameError, nearest_name
from movload.strength.of_bars import bar_strength
from movload.strength.of_beams import beam_strength
from movload.strength.of_section import axes_of
from movload.strength.of_timber import timber_strength
from movload.strength.standards import STANDARDS, TITLES
from movload.strength.strength import Step, Strength
from movload.strength.warnings import slenderness_notes

if TYPE_CHECKING:
    from collections.abc import Collection, Mapping, Sequence

    from movload.bridge.loss import CrossSection
    from movload.bridge.made import Made

SENSES: Final = ("tension", "compression", "moment", "hogging", "shear")
_AXIAL: Final = frozenset({"tension", "compression"})
_EXEMPT: Final = frozenset({"bar", "round"})  # eyebars, rods and plates may be as slender as they are in tension
_OWN: Final = "movload"


def part_strength(made: Made, sense: str, standard: str, phi: Mapping[str, float], *, subject: str) -> Strength:
    """Return what a part carries in one sense by a standard, with every step to it.

    Parameters
    ----------
    made
        The part as made.
    sense
        One of SENSES.
    standard
        One of STANDARDS; "mbe_allowable_stress" is the one that covers timber.
    phi
        The level's factors by name (tension, fracture, compression, moment, hogging, shear), condition and system
        factors on them.
    subject
        What errors call the part where it was typed in no file.

    Raises
    ------
    UnknownNameError
        No such sense or standard.
    MissingDataError
        What the rule needs was not typed; the message says where to.
    InputError
        A case that the standard's rules do not cover.
    """
    _require_known(sense, SENSES, "sense")
    _require_known(standard, STANDARDS, "standard")
    try:
        found = _shared(made, _strength(made, sense, standard, phi, subject=subject))
        if not made.section.losses:
            return replace(found, as_new=found.value)
        whole = replace(made, section=AsFound(made.section.section))
        new = _shared(whole, _strength(whole, sense, standard, phi, subject=subject))
    except InputError as error:
        raise _placed(error, made.place or subject) from None
    return _no_more_than(found, new)


def part_notes(made: Made, subject: str, senses: Collection[str]) -> tuple[Note, ...]:
    """Return what a reader of a part's strengths must know, in the senses it feels."""
    section = made.section.section
    found = [with_loss(section, made.section.losses, place) for place in PLACES]
    notes = [note for each in found for note in each.notes]
    notes += [replace(note, subject=subject) for note in made.section.notes if note not in section.notes]
    notes += made.material.notes(subject)
    if made.material.kind != "timber":
        notes += _slenderness(made, subject, senses)
    if made.bent and _AXIAL & set(senses):
        text = "What bends it beside its axial force: buckling sideways of the bent bar is not checked."
        notes.append(Note("bent-sideways-not-checked", subject, text))
    if "compression" in senses and not made.bent and _is_single_angle(section):
        text = "A single angle joined by one leg is pushed off its axis: unless that is typed, it is not checked."
        notes.append(Note("angle-taken-as-central", subject, text, "AASHTO LRFD 6.9.4.4 is not covered"))
    if isinstance(section, Section) and section.holes and {"moment", "hogging"} & set(senses):
        text = "Holes are left out of its strength in bending."
        notes.append(Note("holes-left-out-of-bending", subject, text, "AASHTO LRFD 6.10.1.8 is not covered"))
    return tuple(dict.fromkeys(notes))


def _strength(made: Made, sense: str, standard: str, phi: Mapping[str, float], *, subject: str) -> Strength:
    """Return the strength of one bar or beam, before several share the force."""
    material, section = made.material, made.section.section
    material.require_sense(sense, subject)
    if material.kind == "timber":
        return timber_strength(made, sense, standard, phi)
    if isinstance(section, Section) and any(piece.shape.kind == "timber" for piece in section.pieces):
        raise InputError(f"a sawn timber is not of {material.kind}", place=section.title)
    if material.kind == "cast iron":
        rule = f"no formula of {TITLES[standard]} is for cast iron: type nominal or reduced strengths"
        raise InputError(rule, place=material.title)
    return (bar_strength if sense in _AXIAL else beam_strength)(made, sense, standard, phi)


def _shared(made: Made, strength: Strength) -> Strength:
    """Return what several bars carry together where the worst takes more than its share."""
    sharing, unit = made.section.section.sharing, strength.steps[-1].unit
    if sharing == 1.0:
        return strength
    value = strength.value / sharing
    steps = (
        Step("sharing", "stress in the worst bar over their mean, as typed", sharing, "-", made.section.section.title),
        Step("shared", "strength / sharing", value, unit, _OWN),
    )
    return replace(strength, value=value, steps=(*strength.steps, *steps), permanent=strength.permanent / sharing)


def _no_more_than(found: Strength, new: Strength) -> Strength:
    """Return a strength as found beside that as new: losing metal adds nothing, whatever a curve's corner says."""
    if found.value <= new.value:
        return replace(found, as_new=new.value)
    step = Step("as new", "no more than with no metal gone", new.value, found.steps[-1].unit, _OWN)
    return replace(found, value=new.value, steps=(*found.steps, step), as_new=new.value)


def _slenderness(made: Made, subject: str, senses: Collection[str]) -> Sequence[Note]:
    """Return the notes of a metal bar that is slenderer than a new one may be; none where its lengths are unknown."""
    if made.held is None:
        return ()
    notes: list[Note] = []
    middle = made.section.middle
    if "compression" in senses:
        axes = axes_of(middle.properties, made.held)
        notes += slenderness_notes(subject, max(axes.kl_x / axes.r_x, axes.kl_y / axes.r_y), "compression")
    exempt = isinstance(middle, Section) and {piece.shape.form for piece in middle.pieces} <= _EXEMPT
    if "tension" in senses and not exempt:
        free = replace(made.held, k_x=1.0, k_y=1.0)
        axes = axes_of(middle.properties, free)
        slenderness = max(axes.kl_x / axes.r_x, axes.kl_y / axes.r_y)
        notes += slenderness_notes(subject, slenderness, "tension", reverses="compression" in senses)
    return notes


def _is_single_angle(section: CrossSection) -> bool:
    """Whether a section is one angle."""
    return isinstance(section, Section) and [piece.shape.kind for piece in section.pieces] == ["angle"]


def _placed(error: MovloadError, place: str) -> MovloadError:
    """Return an error with a part's place before its own, once; a material has a place of its own."""
    return error if error.place.startswith((place, "materials.", 'material "')) else error.at(place)


def _require_known(name: str, known: Sequence[str], place: str) -> None:
    """Refuse a name that is not one of those known."""
    if name not in known:
        rule = f'"{name}" is not one of {", ".join(known)}'
        raise UnknownNameError(rule, place=place, nearest=nearest_name(name, known))
