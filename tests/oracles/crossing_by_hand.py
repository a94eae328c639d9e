"""A crossing by hand: every wheel followed by statics through deck, stringer and floorbeam to both trusses.

Nothing here is an influence line across or along: a wheel at (x, z) is a load on the deck, which spans from stringer to
stringer and overhangs beyond the outermost; the stringers span from floorbeam to floorbeam; a floorbeam is a beam on
two supports, the trusses, that may reach beyond them; its two reactions load the trusses. Forces inside a beam are
found by cutting it and adding up what stands to the right of the cut. Only the members' forces come from elsewhere:
``oracles.lagrange`` solves the plane truss.

Wheels are taken one by one; arrays run over K positions at once. x along the bridge, z across it to the left looking
toward +x, from the middle between the trusses. Loads act down, a moment that sags is positive, and the shear beside a
truss is what that truss pushes up less what stands on its bracket.
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
    """One wheel, or any point load: where it stands (K,) [m] (x nan: nowhere) and its load (K,) [N]."""

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


def wheels_of(vehicle: Vehicle, x: Floats, middle: Floats, heading: Floats, times: Floats | float) -> Iterator[Wheel]:
    """Yield the wheels of a vehicle whose axles stand at x (A, K) and whose middle at z = ``middle`` (K,) [m].

    Its own left is toward +z when it heads toward +x, and toward -z when it comes back. ``times`` multiplies loads.
    """
    for number, load in enumerate(vehicle.loads):
        on_left = vehicle.left_shares[number] if vehicle.left_shares else 0.5
        out, whole = 0.5 * vehicle.gauges[number] * heading, load * times * np.ones(middle.size)
        yield Wheel(x[number], middle + out, on_left * whole)
        yield Wheel(x[number], middle - out, (1.0 - on_left) * whole)


@dataclass(frozen=True, slots=True, eq=False)
class Standing:
    """A bridge with loads on it.

    ``x`` (B,) of the stringers' ends, ``beams`` which of them are floorbeams (others are abutments), ``stringers`` (N,)
    their z, ``half`` the trusses' distance from the middle, ``ordinates`` (R, B) of one truss; ``on_beams`` (B, N, K)
    what stringers bring to floorbeams, ``on_stringers`` (W, N, K) what each load at ``along`` (W, K) brings to them.
    """

    x: Floats
    beams: list[int]
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

    def rows(self, title: str, *, at_midspan: bool = False) -> Floats:
        """Return a part's rows (R, K), the part named as a table names it; ``at_midspan``: see `stringer`."""
        if title.endswith("truss") and "," not in title:
            forces: Floats = self.ordinates @ self.reactions[0 if title == "left truss" else 1]
            return forces
        if title.startswith("stringer S"):
            return self.stringer(int(title.removeprefix("stringer S")) - 1, at_midspan=at_midspan)
        kind, _, where = title.removeprefix("floorbeams, ").partition(" ")
        if kind == "moment" and where.startswith("at S"):
            return self.moment(float(self.stringers[int(where.removeprefix("at S")) - 1]))
        side = -1.0 if "right" in where else 1.0
        if kind == "moment":
            return self.moment(side * self.half)
        bracket = self.on_beams[:, side * self.stringers > self.half].sum(axis=1)
        shear: Floats = bracket if "bracket" in where else self.reactions[0 if side > 0.0 else 1] - bracket
        return shear[self.beams]

    def moment(self, s: float) -> Floats:
        """Return each floorbeam's moment (beams, K) at z = s: reactions and loads to the right of the cut, times arms.

        Over a truss its own reaction has no arm.
        """
        left, right = self.reactions
        up = right * max(s + self.half, 0.0) + left * max(s - self.half, 0.0)
        arms = np.maximum(s - self.stringers, 0.0)[None, :, None]
        moments: Floats = up - (self.on_beams * arms).sum(axis=1)
        return moments[self.beams]

    def stringer(self, number: int, *, at_midspan: bool = False) -> Floats:
        """Return a stringer's moment and end shear, span by span (2 P, K); loads that would lift it are left out.

        The moment is the greatest under any load, or that at midspan.
        """
        loads = np.maximum(self.on_stringers[:, number], 0.0)
        return np.concatenate([self._span(loads, *ends, at_midspan=at_midspan) for ends in pairwise(self.x.tolist())])

    def _span(self, loads: Floats, begin: float, end: float, *, at_midspan: bool) -> Floats:
        """Return one simple span's moment and greater end shear (2, K) under loads (W, K)."""
        near, length = ON_THE_END * float(np.abs(self.x).max()), end - begin
        inside = (self.along >= begin - near) & (self.along <= end + near)
        at, load = np.where(inside, self.along - begin, 0.0), np.where(inside, loads, 0.0)
        right = (load * at).sum(axis=0) / length
        left = load.sum(axis=0) - right
        sections = [np.full(left.shape, 0.5 * length)] if at_midspan else np.unique(at, axis=0)
        moments = [left * s - (load * np.maximum(s - at, 0.0)).sum(axis=0) for s in sections]
        return np.array([np.max(moments, axis=0), np.maximum(left, right)])


def standing(bridge: Bridge, loads: Sequence[Wheel]) -> Standing:
    """Return a bridge with loads on it, each brought to the stringers and by them to the floorbeams."""
    x, z = _measured(bridge)
    on_beams, on_stringers = np.zeros((x.size, z.size, loads[0].x.size)), []
    near = ON_THE_END * float(np.abs(x).max())
    for one in loads:
        on = (one.x >= x[0] - near) & (one.x <= x[-1] + near)
        on_stringers.append(_on_supports(z, one.z) * np.where(on, one.load, 0.0))
        on_beams += _on_supports(x, np.where(on, one.x, x[0]))[:, None] * on_stringers[-1][None]
    points, half = bridge.deck.panel_points, 0.5 * (bridge.deck.truss_spacing or 0.0)
    beams = [number for number, point in enumerate(points) if isinstance(point, str)]
    along = np.array([one.x for one in loads])
    return Standing(x, beams, z, half, line_ordinates(bridge.truss, points), along, np.array(on_stringers), on_beams)


def _measured(bridge: Bridge) -> tuple[Floats, Floats]:
    """Return the x of the stringers' ends and the z of the stringers [m]."""
    x = [bridge.truss.joints[one][0] if isinstance(one, str) else one for one in bridge.deck.panel_points]
    return np.array(x), np.array(bridge.floor.stringers.z if bridge.floor.stringers else ())


def _on_supports(supports: Floats, place: Floats) -> Floats:
    """Return what simple spans, overhanging beyond the outermost supports, bring of 1 N to each support (N, K)."""
    bay = np.clip(np.searchsorted(supports, place, side="right") - 1, 0, supports.size - 2)
    onward = (place - supports[bay]) / (supports[bay + 1] - supports[bay])
    numbers = np.arange(supports.size)[:, None]
    reactions: Floats = np.where(numbers == bay, 1.0 - onward, 0.0) + np.where(numbers == bay + 1, onward, 0.0)
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
    straying = (max(low, middle - 0.3), min(high, middle + 0.3))
    named = {"left kerb": (high, high), "right kerb": (low, low), "offset": (offset, offset), "centre line": straying}
    return named.get(place, (low, high))


def how_many(roadway: Roadway, width: float) -> int:
    """Return how many vehicles fit side by side, by trying one more and one more."""
    free, count = roadway.left - roadway.right - 2 * roadway.clearance, 1
    while (count + 1) * width + count * roadway.between <= free + 1e-9:  # m: a sum of typed widths rounds
        count += 1
    return count


def fitting_beside(room: tuple[float, float], middles: Sequence[float], apart: float) -> int:
    """Return how many vehicles stand there at most when some stand at ``middles`` and all keep ``apart`` [m]."""
    walls = [room[0] - apart, *sorted(middles), room[1] + apart]
    return len(middles) + sum(int((b - a + 1e-8) // apart) - 1 for a, b in pairwise(walls))


def tried_along(bridge: Bridge, vehicle: Vehicle, heading: Floats, random: np.random.Generator) -> Floats:
    """Return front axles' x (K,): four of five times some axle stands at a floorbeam or just beside, else anywhere."""
    x, size = _measured(bridge)[0], heading.size
    behind = -axles_at(vehicle, np.zeros(1), np.ones(1))[:, 0]
    on = random.choice(x, size) + heading * random.choice(behind, size) + random.choice([0.0, 0.0, 1e-7, -1e-7], size)
    return np.where(random.random(size) < 0.8, on, random.uniform(x[0] - behind[-1], x[-1] + behind[-1], size))


def tried_across(
    bridge: Bridge, gauges: Sequence[float], rooms: Floats, apart: Sequence[float], random: np.random.Generator
) -> Floats:
    """Return the middles' z (V, K) of vehicles within ``rooms`` (2, K), the next ``apart`` further left than the last.

    Half of the rows touch; half are then moved as one until a wheel of one stands on a stringer or a truss, if it may.
    """
    low, free = rooms[0], np.maximum(rooms[1] - rooms[0] - apart[-1], 0.0)
    shifts = np.sort(random.choice([0.0, 1.0, *random.random(6)], (len(apart), low.size)), axis=0)
    z = low + free * np.where(random.random(low.size) < 0.5, shifts[0], shifts) + np.array(apart)[:, None]
    half = 0.5 * (bridge.deck.truss_spacing or 0.0)
    on = random.choice([half, -half, *_measured(bridge)[1]], low.size)
    on += 0.5 * random.choice(np.array(gauges), low.size) * random.choice([1.0, -1.0], low.size)
    moved = z + on - z[random.integers(len(apart), size=low.size), np.arange(low.size)]
    may = (moved[0] >= rooms[0]) & (moved[-1] <= rooms[1]) & (random.random(low.size) < 0.5)
    tried: Floats = np.where(may, moved, z)
    return tried


def points_of(bridge: Bridge, weight: float, low: float, high: float, cells: int = 5) -> list[Wheel]:
    """Return ``weight`` [N/m along the bridge], spread evenly from z = low to high, as a grid of small point loads.

    Cells end at floorbeams, midspans and stringers: within one everything is straight, its middle stands for it.
    """
    ends, stringers = _measured(bridge)
    x = np.unique([*ends, *((a + b) / 2 for a, b in pairwise(ends)), *np.linspace(ends[0], ends[-1], cells)])
    z = np.unique([*np.linspace(low, high, cells), *stringers[(stringers > low) & (stringers < high)]])
    rows = [((a + b) / 2, (b - a) / (high - low)) for a, b in pairwise(z)] or [(low, 1.0)]
    places = [((a + b) / 2, b - a, place, part) for a, b in pairwise(x) for place, part in rows]
    return [Wheel(np.array([at]), np.array([y]), np.array([weight * long * part])) for at, long, y, part in places]
