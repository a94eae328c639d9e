"""What room across a place leaves a vehicle."""

from __future__ import annotations

from typing import TYPE_CHECKING

from movload.bridge.roadway import span_of_place
from movload.errors import MissingDataError, MovloadError

if TYPE_CHECKING:
    from movload.bridge.roadway import Roadway
    from movload.traffic.crossing import Crossing
    from movload.traffic.vehicle import Vehicle


def gauges_of(vehicle: Vehicle) -> tuple[float, ...]:
    """Return every axle's gauge [m], which a place across needs."""
    if not vehicle.gauges:
        raise MissingDataError(
            "is needed to place it across the deck: type gauge (between wheel centres) on every axle of its file",
            place=f"{vehicle.title}: axles[0].gauge",
        )
    return vehicle.gauges


def headings_of(vehicle: Vehicle, crossing: Crossing) -> tuple[tuple[int, ...], ...]:
    """Return the vehicle's headings, apart where its room depends on them."""
    if crossing.place == "own lane":
        return tuple((heading,) for heading in vehicle.headings)
    return (vehicle.headings,)


def room_of(crossing: Crossing, roadway: Roadway, width: float, heading: int) -> tuple[float, float]:
    """Return the range of the vehicle's middle [m]; errors name what crosses."""
    try:
        return span_of_place(
            roadway, crossing.place, gauge=width, heading=heading, z=crossing.z, wander=crossing.wander
        )
    except MovloadError as error:
        raise error.at(crossing.title) from None
