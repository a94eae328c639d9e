"""A plane truss: joints, members that only pull or push, and bearings that may stand on an inclined bed.

x runs along the bridge, y upward; a member force is positive in tension. A bearing's own axes are *along* its bed,
(cos a, sin a), and *normal* to it, (-sin a, cos a), with a the bed's angle from +x; a pinned bearing has a = 0.
"""

from __future__ import annotations

import math
from dataclasses import dataclass, field
from functools import cached_property
from types import MappingProxyType
from typing import TYPE_CHECKING, Final

import numpy as np

from movload.arrays import Floats, Ints, held
from movload.errors import InputError, UnknownNameError, nearest_name

if TYPE_CHECKING:
    from collections.abc import Mapping, Sequence

_SOFTEST: Final = 1e-11  # of the stiffest member: forces still hold 7 figures here, below they are soon lost
_SHORTEST: Final = 1e-9  # of the truss's extent: below it two joints are one (round-off of typed coordinates)


@dataclass(frozen=True, slots=True)
class Member:
    """A bar between two joints.

    Parameters
    ----------
    start, end
        Names of its joints.
    area
        Cross-section [m2], > 0.
    modulus
        Modulus of elasticity [Pa], > 0.
    name
        Its own name; "start-end" when not given.
    density
        Mass per volume [kg/m3], >= 0; None when nobody has typed it (self-weight is then refused).
    role
        What the trade calls it ("top chord", "diagonals"); only for grouping and drawing.
    """

    start: str
    end: str
    area: float
    modulus: float
    name: str = field(default="", kw_only=True)
    density: float | None = field(default=None, kw_only=True)
    role: str = field(default="", kw_only=True)

    def __post_init__(self) -> None:
        """Give the name and refuse what no bar can be."""
        if not self.name:
            object.__setattr__(self, "name", f"{self.start}-{self.end}")
        if self.start == self.end:
            raise InputError(f'joins joint "{self.start}" to itself', place=f"member {self.name}")
        _require_positive(self.area, "area", "m2", self.name)
        _require_positive(self.modulus, "modulus", "Pa", self.name)
        if self.density is not None and not (math.isfinite(self.density) and self.density >= 0):
            raise InputError(f"density must be 0 or more, got {self.density} kg/m3", place=f"member {self.name}")


@dataclass(frozen=True, slots=True)
class Support:
    """A bearing under one joint.

    Parameters
    ----------
    joint
        Name of the joint it holds.
    slides
        None holds both directions (pinned). An angle [degrees, anticlockwise from +x] lets the joint move only along
        that direction: 0 a level roller, 90 a vertical one, 30 an inclined bed.
    settlement
        Movement of the bearing against its bed's normal [m]: positive sinks.
    movement
        Movement imposed along the bed [m]; None lets a sliding bearing slide freely and holds a pinned one at 0.
    normal_stiffness, slide_stiffness
        Spring stiffness [N/m] in the two directions; None is rigid across the bed, and along it free for a sliding
        bearing and rigid for a pinned one.
    """

    joint: str
    slides: float | None = None
    settlement: float = field(default=0.0, kw_only=True)
    movement: float | None = field(default=None, kw_only=True)
    normal_stiffness: float | None = field(default=None, kw_only=True)
    slide_stiffness: float | None = field(default=None, kw_only=True)

    def __post_init__(self) -> None:
        """Refuse movements that are not numbers and springs that do not push back."""
        place = f"support {self.joint}"
        for word, value in (("slides", self.slides), ("settlement", self.settlement), ("movement", self.movement)):
            if value is not None and not math.isfinite(value):
                raise InputError(f"{word} must be a finite number, got {value}", place=place)
        if self.slides is not None and abs(self.slides) > 360.0:
            raise InputError(f"a bed stands at -360 to 360 degrees, got {self.slides:g} degrees", place=place)
        for word in ("normal_stiffness", "slide_stiffness"):
            stiffness = getattr(self, word)
            if stiffness is not None:
                _require_positive(stiffness, word, "N/m", self.joint, kind="support")

    @property
    def bed_angle(self) -> float:
        """Angle of the bed from +x [radians]; 0 when pinned."""
        return math.radians(self.slides or 0.0)

    @property
    def holds_along(self) -> bool:
        """Whether anything (pin, spring or an imposed movement) acts along the bed."""
        return self.slides is None or self.movement is not None or self.slide_stiffness is not None

    @property
    def reaction_names(self) -> tuple[str, ...]:
        """Row names of its reactions: along the bed first, then normal to it."""
        if self.slides is None:
            return (f"{self.joint} x", f"{self.joint} y")
        return (f"{self.joint} along", f"{self.joint} normal") if self.holds_along else (f"{self.joint} normal",)


def _require_positive(value: float, word: str, unit: str, name: str, *, kind: str = "member") -> None:
    """Refuse a value that is not a finite number above zero."""
    if not (math.isfinite(value) and value > 0):
        raise InputError(f"{word} must be above 0, got {value} {unit}", place=f"{kind} {name}")


@dataclass(frozen=True, eq=False)
class Truss:
    """Joints, members and supports, checked; determinate or not.

    Parameters
    ----------
    joints
        ``{"L0": (x, y)}`` [m].
    members, supports
        In any order. The order of members is the order of rows in every result.

    Raises
    ------
    InputError
        Duplicate members, a member of no length, a joint no member reaches, too few supports, a value not finite,
        stiffnesses too far apart to be added.
    UnknownNameError
        A member or support names a joint that is not there.
    """

    joints: Mapping[str, tuple[float, float]]
    members: Sequence[Member]
    supports: Sequence[Support]

    def __post_init__(self) -> None:
        """Copy what was given and check it joint by joint, member by member, support by support."""
        object.__setattr__(
            self, "joints", MappingProxyType({k: (float(x), float(y)) for k, (x, y) in self.joints.items()})
        )
        object.__setattr__(self, "members", tuple(self.members))
        object.__setattr__(self, "supports", tuple(self.supports))
        self._check_joints()
        self._check_members()
        self._check_supports()
        self._check_stiffness()

    def __reduce__(self) -> tuple[object, ...]:
        """Pickle by the three parts (a read-only mapping cannot be pickled)."""
        return (Truss, (dict(self.joints), self.members, self.supports))

    def member(self, name: str) -> Member:
        """Return a member by its name or its two joints in either order.

        Raises
        ------
        UnknownNameError
            No such member.
        """
        found = self._member_index.get(name)
        if found is None:
            raise UnknownNameError(
                f'member "{name}" is not in the truss', nearest=nearest_name(name, (m.name for m in self.members))
            )
        return self.members[found]

    def require_joint(self, name: str, place: str) -> None:
        """Raise UnknownNameError at ``place`` unless ``name`` is a joint."""
        if name not in self.joints:
            raise UnknownNameError(
                f'joint "{name}" is not defined', place=place, nearest=nearest_name(name, self.joints)
            )

    @cached_property
    def _member_index(self) -> dict[str, int]:
        """Row of each member under its name and both orders of its joints."""
        rows: dict[str, int] = {}
        for row, member in enumerate(self.members):
            rows[f"{member.start}-{member.end}"] = rows[f"{member.end}-{member.start}"] = row
        return rows | {member.name: row for row, member in enumerate(self.members)}

    @cached_property
    def named_by_hand(self) -> tuple[str, ...]:
        """The joints "U1-L2" of each member that has a name of its own, "" for the others (M)."""
        joints = (f"{member.start}-{member.end}" for member in self.members)
        return tuple("" if member.name == both else both for member, both in zip(self.members, joints, strict=True))

    @cached_property
    def joint_index(self) -> Mapping[str, int]:
        """Number of each joint in the order given."""
        return {name: number for number, name in enumerate(self.joints)}

    @cached_property
    def coordinates(self) -> Floats:
        """Joint coordinates (J, 2) [m]."""
        return held(np.array(list(self.joints.values()), dtype=np.float64).reshape(-1, 2))

    @cached_property
    def ends(self) -> Ints:
        """Joint numbers of each member's start and end (M, 2)."""
        index = self.joint_index
        return np.array([(index[m.start], index[m.end]) for m in self.members], dtype=np.intp).reshape(-1, 2)

    @cached_property
    def spans(self) -> Floats:
        """Vector from start to end of each member (M, 2) [m]."""
        start, end = self.ends.T
        return held(self.coordinates[end] - self.coordinates[start])

    @cached_property
    def lengths(self) -> Floats:
        """Member lengths (M,) [m]."""
        return held(np.hypot(self.spans[:, 0], self.spans[:, 1]))

    @cached_property
    def axial_stiffness(self) -> Floats:
        """E A / length of each member (M,) [N/m]."""
        product = np.array([m.area * m.modulus for m in self.members])
        return held(product / self.lengths)

    @property
    def redundancy(self) -> int:
        """Members and reactions beyond what the joints' equilibrium can find: 0 is determinate if stable."""
        reactions = sum(len(support.reaction_names) for support in self.supports)
        return len(self.members) + reactions - 2 * len(self.joints)

    def _check_joints(self) -> None:
        if not self.joints:
            raise InputError("a truss needs joints, none given", place="joints")
        for name, point in self.joints.items():
            if not name.isprintable() or "-" in name or name.split() != [name]:
                raise InputError(
                    f'a joint\'s name may not be empty or hold a space or "-", got "{name}"', place="joints"
                )
            if not all(map(math.isfinite, point)):
                raise InputError(f"coordinates must be finite, got {point} m", place=f"joint {name}")

    def _check_members(self) -> None:
        if not self.members:
            raise InputError("a truss needs members, none given", place="members")
        seen: dict[object, str] = {}
        for member in self.members:
            for joint in (member.start, member.end):
                self.require_joint(joint, f"member {member.name}")
            for key in (member.name, frozenset((member.start, member.end))):
                if key in seen:
                    raise InputError(f'is given twice (the other is "{seen[key]}")', place=f"member {member.name}")
                seen[key] = member.name
        self._check_names_of_their_own()
        self._check_lengths()
        reached = {joint for member in self.members for joint in (member.start, member.end)}
        for name in self.joints:
            if name not in reached:
                near = nearest_name(name, reached)
                raise InputError("no member reaches it", place=f"joint {name}", nearest=near)

    def _check_names_of_their_own(self) -> None:
        """Refuse a member's name that another row of the results is called by."""
        taken = {f"{joint} {word}" for joint in self.joints for word in ("x", "y", "normal", "along", "down")}
        for member, joints in zip(self.members, self.named_by_hand, strict=True):
            if joints:
                both_ways = {f"{one.start}-{one.end}" for one in self.members if one is not member}
                both_ways |= {f"{one.end}-{one.start}" for one in self.members if one is not member}
                if member.name in taken | both_ways:
                    raise InputError("is also what another row is called by", place=f"member {member.name}")

    def _check_lengths(self) -> None:
        extent = float(np.ptp(self.coordinates, axis=0).max())
        short = np.flatnonzero(self.lengths <= _SHORTEST * extent)
        if short.size:
            member = self.members[short[0]]
            (x, y), end = self.joints[member.start], self.joints[member.end]
            rule = f'has no length: joints "{member.start}" and "{member.end}" both stand at ({x:g}, {y:g}) m'
            if (f"{x:g}", f"{y:g}") != (f"{end[0]:g}", f"{end[1]:g}"):
                length = self.lengths[short[0]]
                rule = f"has no length to speak of, {length:g} m in a truss of {extent:g} m; check the coordinates"
            raise InputError(rule, place=f"member {member.name}")

    def _check_supports(self) -> None:
        seen: set[str] = set()
        for support in self.supports:
            self.require_joint(support.joint, f"support {support.joint}")
            if support.joint in seen:
                raise InputError("is given twice", place=f"support {support.joint}")
            seen.add(support.joint)
        held_directions = sum(len(support.reaction_names) for support in self.supports)
        if held_directions < 3:
            raise InputError(
                f"{held_directions} direction(s) held; a truss needs at least 3 "
                "(a pinned support holds 2, a sliding one 1)",
                place="supports",
            )

    def _check_stiffness(self) -> None:
        """Refuse members and springs so soft beside the stiffest member that sums would lose them."""
        stiffness = self.axial_stiffness
        stiffest, softest = int(np.argmax(stiffness)), int(np.argmin(stiffness))
        springs = [
            (f"support {support.joint}", word.replace("_", " "), getattr(support, word))
            for support in self.supports
            for word in ("normal_stiffness", "slide_stiffness")
            if getattr(support, word) is not None
        ]
        bars = [(f"member {self.members[softest].name}", "E A / length", float(stiffness[softest]))]
        for place, word, soft in bars + springs:
            if soft < _SOFTEST * stiffness[stiffest]:
                raise InputError(
                    f"{word} is {soft:.3g} N/m, too little beside the {stiffness[stiffest]:.3g} N/m of member "
                    f"{self.members[stiffest].name}; check areas, moduli and their units",
                    place=place,
                )
