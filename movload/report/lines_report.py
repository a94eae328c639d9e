"""Influence lines as table, CSV and JSON."""

from __future__ import annotations

import csv
import io
from typing import TYPE_CHECKING, Final

from movload.report.columns import json_text
from movload.report.table import grid

if TYPE_CHECKING:
    from collections.abc import Sequence

    from rich.console import RenderableType

    from movload.bridge.deck import PanelPoint
    from movload.statics.influence import InfluenceLine
    from movload.statics.part import Effect
    from movload.units import UnitSystem

FORMAT: Final = "movload.influence/1"
_ABREAST: Final = 7  # lines side by side in one table


def station_names(panel_points: Sequence[PanelPoint]) -> tuple[str, ...]:
    """Return what a person calls each station: its joint, or abutment."""
    return tuple(point if isinstance(point, str) else "abutment" for point in panel_points)


def ordinate_factor(effect: Effect, units: UnitSystem) -> tuple[float, str]:
    """Return what an SI ordinate is multiplied by to be shown, and its unit."""
    if effect.kind != "down":
        return 1.0, "-"
    symbol = f"{units.symbol('section')}/{units.symbol('force')}"
    return units.factor("force") / units.factor("section"), symbol


def lines_tables(
    title: str, lines: Sequence[InfluenceLine], names: Sequence[str], units: UnitSystem
) -> list[RenderableType | str]:
    """Return ordinates with the stations down the side, a few lines to a table."""
    parts: list[RenderableType | str] = [f"{title}: influence lines, effect per unit downward load"]
    for first in range(0, len(lines), _ABREAST):
        some = lines[first : first + _ABREAST]
        scales = [ordinate_factor(line.effect, units) for line in some]
        heads = [f"x [{units.symbol('length')}]", "at"]
        heads += [f"{line.effect.name}\n[{unit}]" for line, (_, unit) in zip(some, scales, strict=True)]
        stations = some[0].stations
        body = [
            [f"{units.shown(x, 'length'):.3f}", names[number]]
            + [_ordinate(line.ordinates[number] * scale) for line, (scale, _) in zip(some, scales, strict=True)]
            for number, x in enumerate(stations)
        ]
        parts += ["", grid(heads, body, right=[True, False] + [True] * len(some))]
    parts += ["", "Straight between stations, 0 beyond them. Member forces: + tension. [-] is force per force."]
    return parts


def _ordinate(value: float) -> str:
    """Return an ordinate with its sign, zero without."""
    return f"{value:+.4f}" if abs(value) >= 5e-5 else "0"


def lines_csv(lines: Sequence[InfluenceLine], units: UnitSystem) -> str:
    """Return one line of CSV per row: name, kind, unit, then the ordinate at each station."""
    sheet = io.StringIO()
    writer = csv.writer(sheet, lineterminator="\n")
    symbol = units.symbol("length")
    heads = [f"x = {units.shown(x, 'length'):.6g} {symbol}" for x in lines[0].stations] if lines else []
    writer.writerow(["part", "row", "kind", "unit", *heads])
    for line in lines:
        scale, unit = ordinate_factor(line.effect, units)
        writer.writerow([line.effect.part, line.effect.name, line.effect.kind, unit, *(line.ordinates * scale)])
    return sheet.getvalue()


def lines_json(title: str, lines: Sequence[InfluenceLine], names: Sequence[str]) -> str:
    """Return the document movload.influence/1."""
    stations = lines[0].stations if lines else ()
    return json_text(
        {
            "format": FORMAT,
            "title": title,
            "units": {"station": "m", "ordinate": "unit of the effect per N"},
            "stations": [{"x": float(x), "name": name} for x, name in zip(stations, names, strict=True)],
            "rows": [
                {
                    "part": line.effect.part, "row": line.effect.name, "kind": line.effect.kind,
                    "unit": f"{line.effect.unit}/N", "ordinates": line.ordinates,
                }
                for line in lines
            ],
        }
    )  # fmt: skip
