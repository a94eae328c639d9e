"""A bridge's truss as tables, CSV and JSON: joints, members, bearings, panel points."""

from __future__ import annotations

from dataclasses import asdict, dataclass
from typing import TYPE_CHECKING, Final

from movload.report.columns import Column, csv_text, json_rows, json_text
from movload.report.table import grid, table_of

if TYPE_CHECKING:
    from rich.console import RenderableType

    from movload.bridge.bridge import Bridge
    from movload.bridge.truss import Member, Support
    from movload.units import Quantity, UnitSystem

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


def _density(value: float | None, units: UnitSystem) -> str:
    """Return a density, or a dash where nobody has typed one."""
    return "-" if value is None else f"{units.shown(value, 'density'):.6g}"


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
        "density", "density", lambda bar: bar.member.density, "density", right=True,
        text=lambda bar, units: _density(bar.member.density, units),
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
    permits = [bridge.strengths[name].permits if name in bridge.strengths else {} for name in _names(bridge)]
    return [
        Bar(member, float(length), one.get("tension"), one.get("compression"))
        for member, length, one in zip(bridge.truss.members, bridge.truss.lengths, permits, strict=True)
    ]


def _names(bridge: Bridge) -> list[str]:
    """Return the members' names."""
    return [member.name for member in bridge.truss.members]


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
            f"densities in {units.symbol('density')}, forces in {units.symbol('force')}."
        ),
        f"Panel points: {', '.join(points)}",
        *(_support_text(support, units) for support in truss.supports),
        *([f'Still to be filled ("?"): {", ".join(bridge.missing)}'] if bridge.missing else []),
    ]


def _support_text(support: Support, units: UnitSystem) -> str:
    """Return one bearing in words: its bed, what it is moved by, and its springs."""
    is_level = (support.slides or 0.0) % 360 == 0
    across, along = ("upright", "along x") if is_level else ("square to its bed", "along its bed")
    parts = [_bed_text(support)]
    if support.settlement:
        verb = "settles" if support.settlement > 0 else "rises"
        parts.append(f"{verb} {_shift(abs(support.settlement), units)}{'' if is_level else f' {across}'}")
    if support.movement is not None:
        parts.append(f"imposed movement of {_shift(support.movement, units)} {along}")
    for direction, stiffness in ((across, support.normal_stiffness), (along, support.slide_stiffness)):
        if stiffness is not None:
            spring = f"{units.shown(stiffness, 'stiffness'):.6g} {units.symbol('stiffness')}"
            parts.append(f"spring of {spring} {direction}")
    return f"Bearing {support.joint}: {', '.join(parts)}"


def _bed_text(support: Support) -> str:
    """Return what a bearing holds, in words."""
    if support.slides is None:
        return "pinned"
    if support.slides % 360 == 0:
        return "slides along the bridge"
    return f"slides along a bed at {support.slides:g} degrees"


def _shift(metres: float, units: UnitSystem) -> str:
    """Return a bearing's movement with its unit: the section's while it is short of one unit of length."""
    quantity: Quantity = "section" if abs(units.shown(metres, "length")) < 1 else "length"
    return f"{units.shown(metres, quantity):.6g} {units.symbol(quantity)}"


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
            "units": {
                "length": "m", "area": "m2", "modulus": "Pa", "density": "kg/m3", "force": "N", "stiffness": "N/m",
                "slides": "degrees",
            },
            "redundancy": truss.redundancy,
            "joints": {name: list(point) for name, point in truss.joints.items()},
            "supports": [asdict(support) for support in truss.supports],
            "panel_points": list(bridge.deck.panel_points),
            "missing": bridge.missing,
            "rows": json_rows(COLUMNS, bars_of(bridge)),
        }
    )  # fmt: skip
