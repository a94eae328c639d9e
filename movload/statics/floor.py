"""The floor as parts: what each stringer and each section of the floorbeams feels of a wheel at z.

Wheels reach the stringers by the deck's simple spans across (lever rule), stringers the floorbeams, floorbeams the
trusses. So every line across is straight between stringers; beyond the outermost one the deck overhangs.
"""

from __future__ import annotations

from itertools import pairwise
from typing import TYPE_CHECKING, Final

import numpy as np

from movload.arrays import Floats, held
from movload.bridge.across import Across
from movload.bridge.deck import stations_of
from movload.statics.influence import InfluenceLines
from movload.statics.part import Effect, Kind, Part
from movload.statics.spans import PlankSpan, SimpleSpans

if TYPE_CHECKING:
    from movload.bridge.bridge import Bridge
    from movload.bridge.floor import Stringers


def truss_lines(spacing: float, edges: tuple[float, float]) -> tuple[Across, Across]:
    """Return the share of a wheel at z that reaches the left and the right truss: 1/2 + z/S and 1/2 - z/S.

    Parameters
    ----------
    spacing
        S [m] between the trusses, which stand at +-S/2.
    edges
        Right and left edge of the deck [m].
    """
    z = np.array(edges)
    return Across(z, 0.5 + z / spacing), Across(z, 0.5 - z / spacing)


def floor_parts(bridge: Bridge) -> tuple[Part, ...]:
    """Return the parts of a bridge's floor: stringers from the right, then the floorbeams' sections; none untyped."""
    stringers = bridge.floor.stringers
    if stringers is None:
        return ()
    return (*_stringer_parts(bridge, stringers), *_floorbeam_parts(bridge, stringers), *_planks(bridge, stringers))


def with_floorbeams(bridge: Bridge, lines: InfluenceLines) -> InfluenceLines:
    """Return a truss's lines and, after them, what each floorbeam gets of a whole axle, where there are floorbeams."""
    if bridge.floor.floorbeams is None:
        return lines
    points = bridge.deck.panel_points
    standing = [number for number, point in enumerate(points) if isinstance(point, str)]
    effects = [Effect(f"floorbeam {points[number]}", f"{points[number]} load", "reaction", "N") for number in standing]
    hats = np.eye(lines.stations.size)[standing]
    return InfluenceLines((*lines.effects, *effects), lines.stations, held(np.concatenate((lines.ordinates, hats))))


def _stringer_parts(bridge: Bridge, stringers: Stringers) -> tuple[Part, ...]:
    """Return a part for each stringer: its spans and its share of a wheel, which cannot be negative."""
    stations = stations_of(bridge.truss, bridge.deck.panel_points)
    points = _names(bridge)
    parts = []
    for number, name in enumerate(stringers.names):
        title = f"stringer {name}"
        effects = tuple(
            Effect(title, f"{first}-{last} {kind}", kind, unit)
            for first, last in pairwise(points)
            for kind, unit in _ROWS
        )
        at_stringers = np.zeros(len(stringers.z))
        at_stringers[number] = 1.0
        line = _over_stringers(stringers, at_stringers, bridge.edges)
        lever = Across(line.z, np.maximum(line.ordinate, 0.0))  # the deck rests on it and cannot pull it up
        across = lever if stringers.fraction is None else Across.typed(stringers.fraction)
        parts.append(Part(title, SimpleSpans(effects, stations), across, bears=lever))
    return tuple(parts)


_ROWS: tuple[tuple[Kind, str], ...] = (("moment", "N m"), ("shear", "N"))


def _floorbeam_parts(bridge: Bridge, stringers: Stringers) -> tuple[Part, ...]:
    """Return a part for each section of the floorbeams; its rows are that section in every floorbeam."""
    beams, spacing = bridge.floor.floorbeams, bridge.deck.truss_spacing
    if beams is None or spacing is None:
        return ()
    stations, points = stations_of(bridge.truss, bridge.deck.panel_points), bridge.deck.panel_points
    standing = [number for number, point in enumerate(points) if isinstance(point, str)]
    hats = held(np.eye(stations.size)[standing])  # a stringer's load between two floorbeams reaches both by the lever
    parts = []
    for name, kind, beam in _sections(stringers, spacing, beams.brackets):
        unit = "N m" if kind == "moment" else "N"
        effects = tuple(Effect(f"floorbeam {points[number]}", name, kind, unit) for number in standing)
        across = _over_stringers(stringers, beam.at(np.array(stringers.z)), bridge.edges)
        parts.append(Part(f"floorbeams, {name}", InfluenceLines(effects, stations, hats), across, beam=beam))
    return tuple(parts)


def _planks(bridge: Bridge, stringers: Stringers) -> tuple[Part, ...]:
    """Return the planks as a part: the widest span between two stringers under one wheel."""
    planks = bridge.floor.planks
    if planks is None:
        return ()
    effects = tuple(Effect("planks", kind, kind, unit) for kind, unit in _ROWS)
    stations = stations_of(bridge.truss, bridge.deck.panel_points)
    span = float(np.diff(stringers.z).max())
    return (Part("planks", PlankSpan(effects, stations, span, planks.contact), Across.typed(planks.sharing)),)


def _sections(stringers: Stringers, spacing: float, brackets: tuple[float, float]) -> list[tuple[str, Kind, Across]]:
    """Return name, kind and the beam's own line of every section of a floorbeam that may be the worst.

    Loads stand at the stringers, so a moment is greatest under one of them and a shear beside a truss. With the trusses
    at +-S/2 and a load at z: M at s = (S/2 + z)(S/2 - s)/S where z is right of s, (S/2 - z)(S/2 + s)/S left of it; the
    shear inside the left truss is (S/2 + z)/S. A load on a bracket is carried over its truss: M there = -(|z| - S/2).
    """
    half = 0.5 * spacing
    right, left = -half - brackets[0], half + brackets[1]
    ends = np.unique([right, -half, half, left])
    found: list[tuple[str, Kind, Across]] = []
    for name, s in zip(stringers.names, stringers.z, strict=True):
        if -half < s < half:
            z = np.unique([right, s, left])
            line = np.where(z <= s, (half + z) * (half - s), (half - z) * (half + s)) / spacing
            found.append((f"moment at {name}", "moment", Across(z, line)))
    steps = np.unique([right, -half - _STEP, -half, half, half + _STEP, left])
    beyond = steps[(steps >= right) & (steps <= left)]
    found.append(("shear at right truss", "shear", Across(beyond, (half - beyond) / spacing - (beyond < -half))))
    found.append(("shear at left truss", "shear", Across(beyond, (half + beyond) / spacing - (beyond > half))))
    for side, reach in zip(("right", "left"), brackets, strict=True):
        if reach > 0.0:
            arm = np.maximum(-half - ends if side == "right" else ends - half, 0.0)
            found.append((f"moment over {side} truss", "moment", Across(ends, -arm)))
            past = beyond < -half if side == "right" else beyond > half
            found.append((f"shear of {side} bracket", "shear", Across(beyond, past.astype(np.float64))))
    return found


_STEP: Final = 1e-9  # m: a shear steps where the beam stands on a truss; a load there counts as inside


def _over_stringers(stringers: Stringers, at_stringers: Floats, edges: tuple[float, float]) -> Across:
    """Return a line across from its ordinates at the stringers: straight between, and straight on to the edges."""
    z = np.array(stringers.z)
    slope = np.diff(at_stringers) / np.diff(z)
    right, left = edges
    if right < z[0]:
        z, at_stringers = np.append(right, z), np.append(at_stringers[0] + slope[0] * (right - z[0]), at_stringers)
    if left > z[-1]:
        z, at_stringers = np.append(z, left), np.append(at_stringers, at_stringers[-1] + slope[-1] * (left - z[-1]))
    return Across(z, at_stringers)


def _names(bridge: Bridge) -> tuple[str, ...]:
    """Return what a person calls the panel points."""
    return tuple(point if isinstance(point, str) else "abutment" for point in bridge.deck.panel_points)
