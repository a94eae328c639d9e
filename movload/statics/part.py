"""What flows out of statics: an effect, how it answers loads at its stations, and the part that holds both.

Everything to the right of this file sees only these three, whatever the part is.
"""

from __future__ import annotations

from dataclasses import dataclass
from typing import TYPE_CHECKING, Literal, NamedTuple, Protocol, TypeAlias

from movload.errors import UnknownNameError, nearest_name

if TYPE_CHECKING:
    from collections.abc import Sequence

    from movload.arrays import Floats
    from movload.bridge.across import Across
    from movload.statics.condensed import Condensed

Kind: TypeAlias = Literal["axial", "reaction", "moment", "shear", "down"]


class Effect(NamedTuple):
    """One row: what is felt, where, and in which unit.

    A named tuple and not a dataclass: a truss has hundreds and they are made on every solve.
    """

    part: str
    name: str
    kind: Kind
    unit: str
    joints: str = ""  # the joints of a member that has a name of its own, by which it may be asked for too

    @property
    def presses(self) -> bool:
        """Whether it is a reaction across its bed, which lifts when negative (named by `Support.reaction_names`)."""
        return self.kind == "reaction" and self.name.rpartition(" ")[2] in {"y", "normal"}

    @property
    def key(self) -> tuple[str, str]:
        """Part and name: unique in a bridge."""
        return (self.part, self.name)


class Response(Protocol):
    """How effects answer loads standing on stations.

    A linear response multiplies; another (members that only pull) may solve. Nobody downstream asks which.
    """

    @property
    def effects(self) -> tuple[Effect, ...]:
        """The rows (R)."""
        ...

    @property
    def stations(self) -> Floats:
        """Their stations (B,) [m], increasing."""
        ...

    @property
    def alike(self) -> object:
        """The same for responses that answer alike, whatever their rows are called: swept once for all of them."""
        ...

    @property
    def per_metre(self) -> Floats:
        """Effect of 1 N/m on the whole deck (R,)."""
        ...

    def under(self, loads: Floats) -> Floats:
        """Return live effects (R, K) under downward panel-point loads (B, K) [N]."""
        ...


class AtStations(Response, Protocol):
    """A response whose peaks stand where some axle is on a station: lines, or bars that only pull between them."""

    @property
    def condensed(self) -> Condensed:
        """The fewest rows that must be swept, and how all rows follow from them; the response itself if none follow."""
        ...

    def __hash__(self) -> int:
        """By identity: what was found for a response is remembered."""
        ...


@dataclass(frozen=True, slots=True, eq=False)
class Part:
    """Something that is rated: a truss, a stringer, a section of the floorbeams, the planks.

    Attributes
    ----------
    title
        Its name.
    response
        How it answers along the bridge.
    across
        Its share of a wheel by the wheel's place across.
    bears
        Its share of what stands for good, where that differs: a typed fraction of an axle says nothing of a deck's
        weight.
    beam
        Of a floorbeam's section: its share of what lies on the beam itself, the beam's own weight.
    """

    title: str
    response: Response
    across: Across
    bears: Across | None = None
    beam: Across | None = None


def row_of(effects: Sequence[Effect], key: str | tuple[str, str]) -> int:
    """Return the row of an effect by its name, by "part name" or by (part, name); a member's joints in either order.

    A name that several parts share means the first of them.

    Raises
    ------
    UnknownNameError
        No such row; the nearest name is given.
    """
    part, name = ("", key) if isinstance(key, str) else key
    start, dash, end = name.rpartition(" ")[2].partition("-")
    turned = f"{name.removesuffix(f'{start}-{end}')}{end}-{start}"
    for wanted in (name, turned) if dash else (name,):
        for row, effect in enumerate(effects):
            named = wanted and wanted in {effect.name, effect.joints, f"{effect.part} {effect.name}"}
            if named and part in {"", effect.part}:
                return row
    known = [word for effect in effects for word in (effect.name, f"{effect.part} {effect.name}")]
    raise UnknownNameError(f'row "{name}" is not known', nearest=nearest_name(name, known))
