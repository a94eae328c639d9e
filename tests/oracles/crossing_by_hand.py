"""A crossing by hand: every wheel followed by statics through deck, stringer and floorbeam to both trusses.

Nothing here is an influence line across or along: a wheel at (x, z) is a load on the deck, which spans from stringer to
stringer and overhangs beyond the outermost; the stringers span from floorbeam to floorbeam; a floorbeam is a beam on
two supports, the trusses, that may reach beyond them; its two reactions load the trusses. Forces inside a beam are
found by cutting it and adding up what stands to the right of the cut. Only the members' forces come from elsewhere:
``oracles.lagrange`` solves the plane truss.

Wheels are taken one by one; arrays run over K positions at once. x along the bridge, z across it to the left looking
toward +x, from the middle between the trusses. Loads down; sagging moments, and shears of a part that is pressed up on
the cut's right, are positive.
"""

from __future__ import annotations

from dataclasses import dataclass
from itertools import pairwise
from typing import TYPE_CHECKING

import numpy as np
from oracles.lagrange import line_ordinates

if TYPE_CHECKING:
    from collections.abc import Iterator, Sequence

    from numpy.typing import NDArray

    from movload.bridge.bridge import Bridge
    from movload.bridge.roadway import Roadway
    from movload.traffic.vehicle import Vehicle

    Floats = NDArray[np.float64]

ON_THE_END = 3e-13  # of the largest x: summed spacings round; a tenth of a nanometre further out an axle is off


@dataclass(frozen=True, slots=True, eq=False)
class Wheel:
    """One wheel, or any point load: where it stands (K,) [m] (nan: nowhere) and its load (K,) [N]."""

    x: Floats
    z: Floats
    load: Floats


def axles_at(vehicle: Vehicle, front: Floats, heading: Floats) -> Floats:
    """Return where the axles stand (A, K) [m], the front one at ``front`` (K,), heading +1 or -1 (K,)."""
    behind, places = 0.0, [front]
    for gap in vehicle.spacings:
        behind += float(np.asarray(gap))
        places.append(front - heading * behind)
    return np.array(places)


def wheels_of(vehicle: Vehicle, x: Floats, middle: Floats, heading: Floats, times: Floats) -> Iterator[Wheel]:
    """Yield the wheels of a vehicle whose axles stand at x (A, K) and whose middle at z = ``middle`` (K,) [m].

    Its own left is toward +z when it heads toward +x, and toward -z when it comes back. ``times`` (K,) multiplies.
    """
    for number, load in enumerate(vehicle.loads):
        on_left = vehicle.left_shares[number] if vehicle.left_shares else 0.5
        out = 0.5 * vehicle.gauges[number] * heading
        yield Wheel(x[number], middle + out, on_left * load * times)
        yield Wheel(x[number], middle - out, (1.0 - on_left) * load * times)


@dataclass(frozen=True, slots=True, eq=False)
class Standing:
    """A bridge with loads on it.

    ``x`` (B,) of the stringers' ends, ``beams`` which of them are floorbeams (others are abutments), ``stringers``
    (N,) their z, ``half`` the trusses' distance from the middle, ``ordinates`` (R, B) of one truss; ``on_beams``
    (B, N, K) what the stringers bring to each floorbeam, ``on_stringers`` (W, N, K) what each load at ``along`` (W, K)
    brings to each stringer.
    """

    x: Floats
    beams: tuple[int, ...]
    stringers: Floats
    half: float
    ordinates: Floats
    along: Floats
    on_stringers: Floats
    on_beams: Floats

    @property
    def reactions(self) -> tuple[Floats, Floats]:
        """What the left and the right truss push up at each floorbeam (B, K): moments about the other truss."""
        arms = self.half + self.stringers[None, :, None]
        left = (self.on_beams * arms).sum(axis=1) / (2.0 * self.half)
        return left, self.on_beams.sum(axis=1) - left

    @property
    def trusses(self) -> dict[str, Floats]:
        """Every row (R, K) of both trusses under what the floorbeams bring."""
        left, right = self.reactions
        return {"left truss": self.ordinates @ left, "right truss": self.ordinates @ right}

    def beam(self, section: str) -> Floats:
        """Return a section's moment or shear (beams, K), the section named as a table names it."""
        kind, _, where = section.partition(" ")
        if kind == "moment" and where.startswith("at S"):
            return self.moment(float(self.stringers[int(where.removeprefix("at S")) - 1]))
        side = -1.0 if "right" in where else 1.0
        if kind == "moment":
            return self.moment(side * self.half)
        beyond = self._beyond(side)
        return beyond if where.endswith("bracket") else self.reactions[0 if side > 0.0 else 1][[*self.beams]] - beyond

    def moment(self, s: float) -> Floats:
        """Return each floorbeam's moment (beams, K) at z = s: reactions and loads to the right of the cut, times arms.

        Over a truss its own reaction has no arm.
        """
        left, right = self.reactions
        up = right * max(s + self.half, 0.0) + left * max(s - self.half, 0.0)
        arms = np.maximum(s - self.stringers, 0.0)[None, :, None]
        return (up - (self.on_beams * arms).sum(axis=1))[[*self.beams]]

    def _beyond(self, side: float) -> Floats:
        """Return what stands on each floorbeam's bracket (beams, K) beyond the left (+1) or the right (-1) truss."""
        out = side * self.stringers > self.half
        return self.on_beams[[*self.beams]][:, out].sum(axis=1)

    def stringer(self, number: int, *, middle: bool = False) -> Floats:
        """Return a stringer's moment and end shear, span by span (2 P, K); loads that would lift it are left out.

        The moment is the greatest under any load, or that at midspan.
        """
        loads = np.maximum(self.on_stringers[:, number], 0.0)
        return np.concatenate([self._span(loads, *ends, middle=middle) for ends in pairwise(self.x.tolist())])

    def _span(self, loads: Floats, begin: float, end: float, *, middle: bool) -> Floats:
        """Return one simple span's moment and greater end shear (2, K) under loads (W, K)."""
        near, length = ON_THE_END * float(np.abs(self.x).max()), end - begin
        inside = (self.along >= begin - near) & (self.along <= end + near)
        at, load = np.where(inside, self.along - begin, 0.0), np.where(inside, loads, 0.0)
        right = (load * at).sum(axis=0) / length
        left = load.sum(axis=0) - right
        sections = [np.full(left.shape, 0.5 * length)] if middle else np.unique(at, axis=0)
        moments = [left * s - (load * np.maximum(s - at, 0.0)).sum(axis=0) for s in sections]
        return np.array([np.max(moments, axis=0), np.maximum(left, right)])


def standing(bridge: Bridge, loads: Sequence[Wheel]) -> Standing:
    """Return a bridge with loads on it, each brought to the stringers and by them to the floorbeams."""
    points, stringers = bridge.deck.panel_points, bridge.floor.stringers
    x = np.array([bridge.truss.joints[one][0] if isinstance(one, str) else one for one in points])
    beams = tuple(number for number, point in enumerate(points) if isinstance(point, str))
    z = np.array(stringers.z if stringers else ())
    positions = np.arange(loads[0].x.size)
    on_beams, on_stringers = np.zeros((x.size, z.size, positions.size)), []
    near = ON_THE_END * float(np.abs(x).max())
    for one in loads:
        on = (one.x >= x[0] - near) & (one.x <= x[-1] + near)
        across = _on_two(z, one.z, np.where(on, one.load, 0.0))
        on_stringers.append(across)
        panel, onward = _bay(x, np.where(on, one.x, x[0]))
        on_beams[panel, :, positions] += (across * (1.0 - onward)).T
        on_beams[panel + 1, :, positions] += (across * onward).T
    ordinates = line_ordinates(bridge.truss, points)
    along = np.array([one.x for one in loads])
    half = 0.5 * (bridge.deck.truss_spacing or 0.0)
    return Standing(x, beams, z, half, ordinates, along, np.array(on_stringers), on_beams)


def _bay(supports: Floats, place: Floats) -> tuple[NDArray[np.intp], Floats]:
    """Return the bay that holds each place, the outermost for one beyond, and how far along it stands [-]."""
    bay = np.clip(np.searchsorted(supports, place, side="right") - 1, 0, supports.size - 2)
    return bay, (place - supports[bay]) / (supports[bay + 1] - supports[bay])


def _on_two(supports: Floats, place: Floats, load: Floats) -> Floats:
    """Return what simple spans, overhanging beyond the outermost supports, bring of a load to each support (N, K)."""
    bay, onward = _bay(supports, place)
    reactions = np.zeros((supports.size, place.size))
    positions = np.arange(place.size)
    reactions[bay, positions] = load * (1.0 - onward)
    reactions[bay + 1, positions] = load * onward
    return reactions


def room_of(roadway: Roadway, place: str, width: float, heading: int, offset: float = 0.0) -> tuple[float, float]:
    """Return the least and greatest z of the middle of a vehicle ``width`` wide; the least is greater if it cannot fit.

    Looking its own way a vehicle has the bridge's left on its left when it heads toward +x. The centre line is half way
    between the kerbs, and it strays by 0.3 m.
    """
    low, high = roadway.right + roadway.clearance + width / 2, roadway.left - roadway.clearance - width / 2
    middle, inner = (roadway.right + roadway.left) / 2, (width + roadway.between) / 2
    if place == "own lane":
        on_bridge_left = (roadway.keeps == "left") == (heading == 1)
        return (middle + inner, high) if on_bridge_left else (low, middle - inner)
    named = {
        "left kerb": (high, high),
        "right kerb": (low, low),
        "offset": (offset, offset),
        "centre line": (max(low, middle - 0.3), min(high, middle + 0.3)),
    }
    return named.get(place, (low, high))


def how_many(roadway: Roadway, width: float) -> int:
    """Return how many vehicles fit side by side, by trying one more and one more."""
    free, count = roadway.left - roadway.right - 2 * roadway.clearance, 1
    while (count + 1) * width + count * roadway.between <= free + 1e-9:  # m: a sum of typed widths rounds
        count += 1
    return count


def fitting_beside(room: tuple[float, float], middles: Sequence[float], apart: float) -> int:
    """Return how many vehicles stand there at most when some stand at ``middles`` and all keep ``apart`` [m]."""
    low, high = room
    walls = [low - apart, *sorted(middles), high + apart]
    return len(middles) + sum(int((b - a + 1e-8) // apart) - 1 for a, b in pairwise(walls))


def points_of(bridge: Bridge, weight: float, across: tuple[float, float], cells: int = 5) -> list[Wheel]:
    """Return ``weight`` [N/m along the bridge], spread evenly between two z, as a grid of small point loads.

    Cells end at floorbeams, midspans and stringers, so that in each of them everything is straight and its middle
    stands for it.
    """
    points = bridge.deck.panel_points
    ends = [bridge.truss.joints[one][0] if isinstance(one, str) else one for one in points]
    middles = [(a + b) / 2 for a, b in pairwise(ends)]
    x = np.unique([*ends, *middles, *np.linspace(ends[0], ends[-1], cells)])
    low, high = across
    inner = [z for z in (bridge.floor.stringers.z if bridge.floor.stringers else ()) if low < z < high]
    z = np.unique([low, *inner, *np.linspace(low, high, cells), high])
    rows = [((a + b) / 2, (b - a) / (high - low)) for a, b in pairwise(z)] if high > low else [(low, 1.0)]
    return [
        Wheel(np.array([(a + b) / 2]), np.array([place]), np.array([weight * (b - a) * part]))
        for a, b in pairwise(x)
        for place, part in rows
    ]
