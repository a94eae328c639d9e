"""Member groups to members: a group named after a role takes that role's bars, a group with bars takes those."""

from __future__ import annotations

from typing import TYPE_CHECKING

from movload.bridge.strengths import FOOTINGS, TypedStrength
from movload.bridge.truss import Member
from movload.errors import InputError, MovloadError, UnknownNameError, nearest_name
from movload.files.places import in_file
from movload.files.toml import written_key

if TYPE_CHECKING:
    from collections.abc import Iterator, Mapping

    from movload.bridge.layout import LaidOut
    from movload.files.schema.bridge import BridgeFile, MemberGroup, PartTable
    from movload.files.sections import Catalogue


def members_of(
    table: BridgeFile, laid_out: LaidOut, joints: Mapping[str, tuple[float, float]], catalogue: Catalogue
) -> dict[str, Member]:
    """Return every member by name, the layout's first and in its order.

    Raises
    ------
    InputError
        A bar given twice, a group that takes no bar, a bar that no group takes.
    UnknownNameError
        A joint or a role that is not there.
    """
    groups = groups_of(table, laid_out)
    roles = {f"{bar.start}-{bar.end}": bar.role for bar in laid_out.bars}
    members: dict[str, Member] = {}
    for name in (*roles, *(name for name in groups if name not in roles)):
        if name not in groups:
            raise InputError(
                f'no group takes bar "{name}"; add [members.{written_key(roles[name])}] or bars = ["{name}"]',
                place="members",
            )
        title, place = groups[name]
        ends = _ends(name, joints, place)
        with in_file(place, table.members[title]):
            members[name] = _member(ends, table.members[title], catalogue, roles.get(name, title))
    return members


def strengths_of(table: BridgeFile, laid_out: LaidOut, catalogue: Catalogue) -> dict[str, TypedStrength]:
    """Return typed strengths by member; a group without any leaves its members unrated.

    Raises
    ------
    InputError
        A strength below 0, or given twice; a metal said to be timber.
    """
    of_group = {
        title: strength_of(group, f"members.{written_key(title)}", catalogue) for title, group in table.members.items()
    }
    groups = groups_of(table, laid_out)
    return {name: of_group[title] for name, (title, _) in groups.items() if of_group[title].typed}


def strength_of(table: MemberGroup | PartTable, place: str, catalogue: Catalogue) -> TypedStrength:
    """Return a group's or a floor part's typed strengths; ``place`` is its key. A timber's material says timber."""
    said = [getattr(table, footing) for footing in FOOTINGS]
    if table.timber and table.material is not None and not catalogue.is_timber(table):
        kind = catalogue.tables[table.material].kind
        raise InputError(f"its material is {kind}: impact is left out on timber alone", place=f"{place}.timber")
    try:
        return TypedStrength(
            *({} if one is None else one.model_dump(exclude_none=True) for one in said),
            condition=table.condition or "",
            measured=table.measured,
            system=table.system or "",
            timber=table.timber or catalogue.is_timber(table),
            place=place,
        )
    except MovloadError as error:
        raise error.at(place) from None


def groups_of(table: BridgeFile, laid_out: LaidOut) -> dict[str, tuple[str, str]]:
    """Return for each bar the title of its group and the place that says so; bars by name win over roles."""
    of_role: dict[str, tuple[str, str]] = {}
    by_name: dict[str, tuple[str, str]] = {}
    names = {frozenset((bar.start, bar.end)): f"{bar.start}-{bar.end}" for bar in laid_out.bars}
    for title, group in table.members.items():
        place = f"members.{written_key(title)}"
        if group.bars is None:
            for name in _bars_of_role(title, laid_out, place):
                of_role[name] = (title, place)
            continue
        if not group.bars:
            raise InputError("the list of bars is empty", place=f"{place}.bars")
        for number, bar in enumerate(group.bars):
            here = f"{place}.bars[{number}]"
            start, end = joints_of(bar, here)
            name = names.setdefault(frozenset((start, end)), f"{start}-{end}")
            if name in by_name:
                raise InputError(f'bar "{bar}" is given twice (also at {by_name[name][1]})', place=here)
            by_name[name] = (title, here)
    of_each = of_role | by_name
    taken = {title for title, _ in of_each.values()}
    for title in table.members:
        if title not in taken:
            raise InputError("takes no bar: other groups name all of its role's", place=f"members.{written_key(title)}")
    return of_each


def _bars_of_role(title: str, laid_out: LaidOut, place: str) -> Iterator[str]:
    """Return the layout's bars with the role that a group is named after."""
    roles = {bar.role for bar in laid_out.bars}
    if not roles:
        raise InputError('without a [layout] a group needs its bars: bars = ["L0-U1", ...]', place=place)
    if title not in roles:
        raise UnknownNameError(
            f"a group without bars carries the name of a role of the layout ({', '.join(sorted(roles))})",
            place=place,
            nearest=nearest_name(title, roles),
        )
    return (f"{bar.start}-{bar.end}" for bar in laid_out.bars if bar.role == title)


def joints_of(bar: str, place: str) -> tuple[str, str]:
    """Return the two joints that a bar's name joins."""
    start, dash, end = (part.strip() for part in bar.partition("-"))
    if not (dash and start and end) or "-" in end:
        raise InputError(f'a bar is written as its two joints, "U1-L2", got "{bar}"', place=place)
    return start, end


def _ends(name: str, joints: Mapping[str, tuple[float, float]], place: str) -> tuple[str, str]:
    """Return a bar's two joints, which must be there."""
    start, end = joints_of(name, place)
    for joint in (start, end):
        if joint not in joints:
            raise UnknownNameError(f'joint "{joint}" is not defined', place=place, nearest=nearest_name(joint, joints))
    return start, end


def _member(ends: tuple[str, str], group: MemberGroup, catalogue: Catalogue, role: str) -> Member:
    """Return one member of a group, by area and modulus or by section and material."""
    area, modulus, density = group.area or 0.0, group.modulus or 0.0, group.density
    if group.section is not None and group.material is not None:
        area = catalogue.areas[group.section]
        modulus, density = catalogue.elastic(group.material)
    return Member(*ends, area, modulus, density=density, role=role)
