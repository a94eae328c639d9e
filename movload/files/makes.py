"""What members and parts of the floor are made of and how they are held, from a bridge file."""

from __future__ import annotations

import math
from typing import TYPE_CHECKING, Final

from movload.bridge.loss import AsFound, Loss
from movload.bridge.made import Bent, Held, Joined, Made, Sideways
from movload.bridge.section import Section
from movload.errors import InputError, MissingDataError, UnknownNameError, nearest_name
from movload.files.bars import groups_of, joints_of
from movload.files.places import in_file, require_one_of
from movload.files.schema.makes import HELD, JOINT_TO_JOINT, MakeKeys, MemberMake, PartMake
from movload.files.toml import written_key

if TYPE_CHECKING:
    from collections.abc import Mapping, Sequence

    from movload.bridge.layout import LaidOut
    from movload.bridge.loss import CrossSection
    from movload.bridge.truss import Truss
    from movload.files.schema.bridge import BridgeFile, MemberGroup
    from movload.files.schema.makes import BentTable, JoinedTable, LossTable
    from movload.files.sections import Catalogue

_HELD: Final = ("unbraced_x", "unbraced_y", "k_x", "k_y", "unbraced_z", "k_z")
_NEEDED: Final = _HELD[:4]
_SIDEWAYS: Final = ("c_b", "stiffeners", "lever")
_TOGETHER: Final = 1e-3  # m; centroids that near stand in one line
_DIGITS: Final = 9  # of a length in metres: bars that differ by round-off alone are alike


def made_of(table: BridgeFile, laid_out: LaidOut, truss: Truss, catalogue: Catalogue) -> dict[str, tuple[Made, Made]]:
    """Return what each bar is made of in the left and in the right truss; bars that are alike share one Made.

    Raises
    ------
    MissingDataError
        What goes with something typed and is not there.
    InputError
        A length, a factor, a loss or a part that cannot be.
    UnknownNameError
        A bar, a curve, a piece or a part that is not there.
    """
    groups = groups_of(table, laid_out)
    lengths = {
        member.name: round(math.dist(truss.joints[member.start], truss.joints[member.end]), _DIGITS)
        for member in truss.members
    }
    made: dict[str, tuple[Made, Made]] = {}
    for title, group in table.members.items():
        place = f"members.{written_key(title)}"
        if _is_known(group, place, catalogue, MemberMake):
            bars = {name: lengths[name] for name, (its, _) in groups.items() if its == title}
            made |= _of_group(group, bars, place, catalogue)
    return made


def made_of_part(table: PartMake, place: str, catalogue: Catalogue) -> Made | None:
    """Return what a part of the floor is made of; None while nobody has typed it. Raises as ``made_of``."""
    if not _is_known(table, place, catalogue, PartMake):
        return None
    losses = [_loss(loss, f"{place}.losses[{number}]") for number, loss in enumerate(table.losses or ())]
    sideways = _sideways(table, place)
    return _made(table, place, catalogue, list(enumerate(losses)), sideways=sideways)


def _is_known(table: MakeKeys, place: str, catalogue: Catalogue, keys: type[MakeKeys]) -> bool:
    """Whether a part's section and material are said, and nothing of what it is made of waits for a "?"."""
    if table.section is None or table.material is None:
        said = [key for key in keys.model_fields if getattr(table, key) is not None]
        needed = "section" if table.section is None else "material"
        if said and not catalogue.waits(f"{place}.{needed}"):
            raise MissingDataError(f"is needed beside {said[0]}", place=f"{place}.{needed}")
        return False
    waits = any(catalogue.waits(f"{place}.{key}") for key in keys.model_fields)
    return not waits and table.section in catalogue.sections and table.material in catalogue.materials


def _of_group(
    group: MemberGroup, bars: Mapping[str, float], place: str, catalogue: Catalogue
) -> dict[str, tuple[Made, Made]]:
    """Return what each bar of a group is made of; ``bars`` are their lengths [m]."""
    joined = _joined(group.joined, f"{place}.joined") if group.joined is not None else None
    bent = tuple(_bent(one, f"{place}.bent[{number}]") for number, one in enumerate(group.bent or ()))
    losses = _losses_of_bars(group, bars, place)
    alike: dict[object, Made] = {}
    made: dict[str, tuple[Made, Made]] = {}
    for name, length in bars.items():
        held = _held(group, length, place)
        both = []
        for truss in ("left", "right"):
            mine = [(number, loss) for number, loss, on in losses if (name, truss) in on]
            key = (held, tuple(number for number, _ in mine))
            if key not in alike:
                alike[key] = _made(group, place, catalogue, mine, held=held, joined=joined, bent=bent)
            both.append(alike[key])
        made[name] = (both[0], both[1])
    return made


def _made(
    table: MakeKeys, place: str, catalogue: Catalogue, losses: Sequence[tuple[int, Loss]], **how: object
) -> Made:  # fmt: skip
    """Return a Made with some of its group's losses, each with its number in the file."""
    section, material = catalogue.sections[table.section or ""], catalogue.materials[table.material or ""]
    for number in range(len(losses)):
        with in_file(f"{place}.losses[{losses[number][0]}]", table):
            AsFound(section, tuple(loss for _, loss in losses[: number + 1]))
    _require_joints(section, how.get("joined"), f"{place}.joined")
    typed = catalogue.tables[table.material or ""]
    _require_curves(table.curves or (), f"{place}.curves")
    with in_file(place, table):
        return Made(
            section=AsFound(section, tuple(loss for _, loss in losses)),
            material=material,
            curves=tuple(table.curves or ()),
            durations=tuple(typed.durations or ()),
            treated=typed.treated,
            place=place,
            **how,  # type: ignore[arg-type]  # held, joined, bent or sideways
        )


def _require_joints(section: CrossSection, joined: object, place: str) -> None:
    """Refuse what joins parts that do not stand apart that way, and a part that is stiffer than the whole."""
    if not (isinstance(joined, Joined) and isinstance(section, Section)):
        return
    least = math.sqrt(section.properties.i_min / section.properties.area)
    if joined.radius > least * (1 + 1e-6):  # round-off; sum of parts about their own axes is less than the whole
        said = f"the least radius of one part is at most that of the whole section, {least:.4g} m"
        raise InputError(f"{said}, got {joined.radius:.4g} m", place=f"{place}.radius")
    parts = [piece for piece in section.pieces if piece.shape.kind != "plate"]  # a cover plate lies across the others
    middles = [Section("", (piece,)).properties for piece in (parts if len(parts) > 1 else section.pieces)]
    apart = {axis: max(places) - min(places) for axis, places in (
        ("y", [middle.x for middle in middles]), ("x", [middle.y for middle in middles])
    )}  # fmt: skip
    other = "x" if joined.axis == "y" else "y"
    if apart[joined.axis] < _TOGETHER <= apart[other]:
        said = f'its parts stand apart across "{other}" and not across "{joined.axis}"'
        raise InputError(said, place=f"{place}.axis")


def _require_curves(curves: Sequence[str], place: str) -> None:
    """Refuse a buckling curve that is none."""
    if curves:
        from movload.strength.en_1993 import CURVES

        for number, curve in enumerate(curves):
            require_one_of(curve, CURVES, f"{place}[{number}]")


def _losses_of_bars(
    group: MemberGroup, bars: Mapping[str, float], place: str
) -> list[tuple[int, Loss, set[tuple[str, str]]]]:  # fmt: skip
    """Return a group's losses: number in the file, loss, and the bars by name and truss that have it."""
    by_joints = {frozenset(name.split("-")): name for name in bars}
    found = []
    for number, table in enumerate(group.losses or ()):
        here = f"{place}.losses[{number}]"
        meant = list(bars)
        if table.bar is not None:
            name = by_joints.get(frozenset(joints_of(table.bar, f"{here}.bar")))
            if name is None:
                said = f'"{table.bar}" is no bar of this group: {", ".join(bars)}'
                raise UnknownNameError(said, place=f"{here}.bar", nearest=nearest_name(table.bar, bars))
            meant = [name]
        trusses = ("left", "right") if table.truss is None else (table.truss,)
        found.append((number, _loss(table, here), {(name, truss) for name in meant for truss in trusses}))
    return found


def _loss(table: LossTable, place: str) -> Loss:
    """Return metal gone."""
    with in_file(place, table, "loss"):
        return Loss(
            table.where,
            piece=table.piece or "",
            part=table.part or "",
            amount=table.amount or 0.0,
            fraction=table.fraction or 0.0,
            inside_connection=table.inside_connection,
        )


def _held(group: MemberGroup, length: float, place: str) -> Held | None:
    """Return how a bar of a length [m] between its joints is held; None where nothing is typed."""
    typed = {key: getattr(group, key) for key in _HELD if getattr(group, key) is not None}
    if not typed:
        return None
    for key in _NEEDED:
        if key not in typed:
            raise MissingDataError(f"is needed beside {next(iter(typed))}", place=f"{place}.{key}")
    with in_file(place, group):
        return Held(**{key: length if value == JOINT_TO_JOINT else value for key, value in typed.items()})


def _joined(table: JoinedTable, place: str) -> Joined:
    """Return what holds the parts of a bar together."""
    for key in ("lacing_area", "planes", "radius"):
        value = getattr(table, key)
        unit = {"lacing_area": " m2", "radius": " m"}.get(key, "")
        if value is not None and not value > 0:
            raise InputError(f"must be above 0, got {value:g}{unit}", place=f"{place}.{key}")
        if value is not None and key != "radius" and table.radius is not None:
            raise InputError(f"is of lacing, and radius of battens or stitches: keep one, got {value:g}{unit}",
                             place=f"{place}.{key}")  # fmt: skip
    with in_file(place, table, "joined"):
        return Joined(
            axis=table.axis,  # type: ignore[arg-type]  # Joined refuses any but x and y
            spacing=table.spacing,
            apart=table.apart,
            lacing_area=table.lacing_area or 0.0,
            planes=table.planes or 0,
            radius=table.radius or 0.0,
        )


def _bent(table: BentTable, place: str) -> Bent:
    """Return what bends a bar about one axis."""
    with in_file(place, table, "bent"):
        return Bent(**table.model_dump())


def _sideways(table: PartMake, place: str) -> Sideways | None:
    """Return how a beam is held sideways; None where nobody has typed it."""
    typed = {key: getattr(table, key) for key in _SIDEWAYS if getattr(table, key) is not None}
    if table.unbraced is None:
        if typed:
            said = f'is needed beside {next(iter(typed))}: a length, or "{HELD}"'
            raise MissingDataError(said, place=f"{place}.unbraced")
        return None
    with in_file(place, table):
        return Sideways(unbraced=None if table.unbraced == HELD else float(table.unbraced), **typed)
