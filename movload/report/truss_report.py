"""A bridge's truss as tables, CSV and JSON: joints, members, bearings, panel points."""

from __future__ import annotations

from dataclasses import dataclass
from typing import TYPE_CHECKING, Final

from movload.report.columns import Column, csv_text, json_rows, json_text
from movload.report.table import grid, table_of

if TYPE_CHECKING:
    from rich.console import RenderableType

    from movload.bridge.bridge import Bridge
    from movload.bridge.truss import Member, Support
    from movload.units import UnitSystem

FORMAT: Final = "movload.truss/1"


@dataclass(frozen=True, slots=True)
class Bar:
    """One row: a member, its length, and what it may carry."""

    member: Member
    length: float
    tension: float | None
    compression: float | None


def _force(value: float | None, units: UnitSystem) -> str:
    """Return a permitted force, or a dash."""
    return "-" if value is None else f"{units.shown(value, 'force'):.1f}"


COLUMNS: Final[list[Column[Bar]]] = [
    Column("row", "member", lambda bar: bar.member.name),
    Column("role", "role", lambda bar: bar.member.role),
    Column(
        "length", "length", lambda bar: bar.length, "length", right=True,
        text=lambda bar, units: f"{units.shown(bar.length, 'length'):.3f}",
    ),
    Column(
        "area", "area", lambda bar: bar.member.area, "area", right=True,
        text=lambda bar, units: f"{units.shown(bar.member.area, 'area'):.6g}",
    ),
    Column(
        "modulus", "modulus", lambda bar: bar.member.modulus, "stress", right=True,
        text=lambda bar, units: f"{units.shown(bar.member.modulus, 'stress'):.6g}",
    ),
    Column(
        "permitted_tension", "permitted T", lambda bar: bar.tension, "force", right=True,
        text=lambda bar, units: _force(bar.tension, units),
    ),
    Column(
        "permitted_compression", "permitted C", lambda bar: bar.compression, "force", right=True,
        text=lambda bar, units: _force(bar.compression, units),
    ),
]  # fmt: skip


def bars_of(bridge: Bridge) -> list[Bar]:
    """Return a bridge's members with their lengths and permitted forces."""
    permits = [bridge.permits.get(member.name) for member in bridge.truss.members]
    return [
        Bar(member, float(length), one.tension if one else None, one.compression if one else None)
        for member, length, one in zip(bridge.truss.members, bridge.truss.lengths, permits, strict=True)
    ]


def truss_tables(bridge: Bridge) -> list[RenderableType | str]:
    """Return members, panel points and bearings for a terminal."""
    units, truss = bridge.units, bridge.truss
    length = units.symbol("length")
    xs = [point for point, _ in truss.joints.values()]
    points = [point if isinstance(point, str) else f"abutment at {units.shown(point, 'length'):.3f}"
              for point in bridge.deck.panel_points]  # fmt: skip
    redundancy = truss.redundancy
    kind = "statically determinate" if redundancy == 0 else f"{redundancy} redundant"
    joints = [
        [name, f"{units.shown(x, 'length'):.3f}", f"{units.shown(y, 'length'):.3f}"]
        for name, (x, y) in truss.joints.items()
    ]
    return [
        bridge.title,
        (
            f"{len(truss.joints)} joints, {len(truss.members)} members, {kind}; "
            f"{units.shown(max(xs) - min(xs), 'length'):.3f} {length} from end to end"
        ),
        "",
        table_of(COLUMNS, bars_of(bridge), units),
        "",
        grid(["joint", f"x [{length}]", f"y [{length}]"], joints, right=[False, True, True]),
        "",
        (
            f"Lengths in {length}, areas in {units.symbol('area')}, moduli in {units.symbol('stress')}, "
            f"forces in {units.symbol('force')}."
        ),
        f"Panel points: {', '.join(points)}",
        *(_support_text(support) for support in truss.supports),
        *([f'Still to be filled ("?"): {", ".join(bridge.missing)}'] if bridge.missing else []),
    ]


def _support_text(support: Support) -> str:
    """Return one bearing in words."""
    if support.slides is None:
        text = "pinned"
    elif support.slides % 180 == 0:
        text = "slides along the bridge"
    else:
        text = f"slides along a bed at {support.slides:g} degrees"
    springs = support.normal_stiffness is not None or support.slide_stiffness is not None
    return f"Bearing {support.joint}: {text}{', on springs' if springs else ''}"


def truss_csv(bridge: Bridge) -> str:
    """Return the members as CSV."""
    return csv_text(COLUMNS, bars_of(bridge), bridge.units)


def truss_json(bridge: Bridge) -> str:
    """Return the document movload.truss/1."""
    truss = bridge.truss
    return json_text(
        {
            "format": FORMAT,
            "title": bridge.title,
            "units": {"length": "m", "area": "m2", "modulus": "Pa", "force": "N", "slides": "degrees"},
            "redundancy": truss.redundancy,
            "joints": {name: list(point) for name, point in truss.joints.items()},
            "supports": [{"joint": support.joint, "slides": support.slides} for support in truss.supports],
            "panel_points": list(bridge.deck.panel_points),
            "missing": bridge.missing,
            "rows": json_rows(COLUMNS, bars_of(bridge)),
        }
    )
