"""What a loading is made of beside its axles, and how its pieces go together, in sentences."""

from __future__ import annotations

import math
from typing import TYPE_CHECKING, Final

from movload.units import UnitSystem

if TYPE_CHECKING:
    from collections.abc import Iterator

    from movload.traffic.loading import Case, Fill, Following
    from movload.traffic.vehicle import Vehicle
    from movload.units import Quantity

METRIC: Final = UnitSystem("m", "kN", "mm")
US: Final = UnitSystem("ft", "kip", "in")
_ACROSS: Final = {
    "lane": "in its lane",
    "full width": "on the full width",
    "left half": "on the left half",
    "right half": "on the right half",
}


def both(value: float | tuple[float, float] | None, quantity: Quantity) -> str:
    """Return a value, or a range of it, in SI and US units."""
    if value is None:
        return "-"
    ends = value if isinstance(value, tuple) else (value,)
    metric, us = (
        f"{' to '.join(f'{units.shown(end, quantity):.2f}' for end in ends)} {units.symbol(quantity)}"
        for units in (METRIC, US)
    )
    return f"{metric} ({us})"


def case_words(case: Case) -> str:
    """Return what is said of a whole case: its factor, when it counts, who follows, what relieves; "" for nothing."""
    words = []
    if case.factor != 1.0:
        words.append(f"all of it x {case.factor:g}")
    if case.above:
        words.append(f"only for lengths above {both(case.above, 'length')}")
    if case.continuous:
        words.append("only for trusses over more than two bearings")
    if case.convoy is not None:
        words.append(_convoy_words(case.convoy))
    if case.moving is not None and case.relieving == 0.0:
        words.append("what relieves is left out")
    elif case.relieving < 1.0:
        words.append(f"what relieves counts {100 * case.relieving:.4g} %")
    return "; ".join(words)


def _convoy_words(convoy: Following) -> str:
    """Return how many follow each other, and how far apart."""
    apart = "without end" if math.isinf(convoy.headway) else f"{both(convoy.headway, 'length')} or more"
    return f"up to {convoy.most} of it in a lane, {apart} from last axle to first"


def piece_words(case: Case) -> Iterator[str]:
    """Yield a sentence for each uniform load of a case: what moves with its vehicle, then what fills."""
    if case.moving is not None:
        yield from _moving_words(case.moving)
    for fill in case.fills:
        what, kinds = _fill_load(fill), (_place_words(fill), _ACROSS[fill.across], _gauge_words(fill.gauge))
        yield f"{', '.join(filter(None, (what, *kinds)))}{'' if fill.impact else ', no impact on it'}"


def _moving_words(vehicle: Vehicle) -> Iterator[str]:
    """Yield a sentence for each strip and the tail."""
    front = "front axle" if vehicle.loads.size else "front"
    for strip in vehicle.strips:
        side = f"{both(abs(strip.start), 'length')} {'before' if strip.start < 0 else 'behind'} the {front}"
        yield (
            f"Moving: {both(strip.load, 'line load')} over {both(strip.length, 'length')}, its front end "
            f"{side if strip.start else f'at the {front}'}{_comma(_gauge_words(strip.gauge))}"
        )
    tail = vehicle.tail
    if tail is not None:
        yield (
            f"Following without end: {both(tail.load, 'line load')}, from {both(tail.start, 'length')} behind the "
            f"{front} on{_comma(_gauge_words(tail.gauge))}"
        )


def _fill_load(fill: Fill) -> str:
    """Return what kind of load fills, and how much of it."""
    if fill.density:
        return f"Filling: {both(fill.load, 'pressure')}, less the longer it is ({fill.density})"
    if fill.shape == "uniform":
        return f"Filling: {both(fill.load, 'pressure' if fill.per_area else 'line load')}"
    webs = "" if math.isnan(fill.web_load) else f", {both(fill.web_load, 'force')} for webs, shears and reactions"
    return f"Knife edge: {both(fill.load, 'force')}{webs}"


def _place_words(fill: Fill) -> str:
    """Return where along the bridge a load lies."""
    if fill.x is not None:
        return f"at x = {both(fill.x if fill.x[0] != fill.x[1] else fill.x[0], 'length')}"
    if fill.where == "adverse":
        return "wherever adverse"
    before, behind = (both(clear, "length") for clear in fill.clear)
    clear = f"{before} clear of it" if before == behind else f"{before} clear before and {behind} behind it"
    return f"outside the vehicle wherever adverse, {clear}"


def _gauge_words(gauge: float) -> str:
    """Return how far apart a load's two sides are; "" when it is not stated."""
    return "" if math.isnan(gauge) else f"gauge {both(gauge, 'length')}"


def _comma(words: str) -> str:
    """Return words after a comma, or nothing."""
    return f", {words}" if words else ""
