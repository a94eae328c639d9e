"""A bridge with a floor for tests of ratings: the brook bridge's truss twice, 4.6 m apart. Invented."""

from __future__ import annotations

from dataclasses import replace
from typing import TYPE_CHECKING, Final

import numpy as np
from oracles.trusses import bottom
from rating.bridges import brook

from movload.bridge.deck import Deck
from movload.bridge.floor import Floor, Floorbeams, Planks, Stringers
from movload.bridge.permanent import Item, PermanentItems
from movload.bridge.roadway import Roadway
from movload.bridge.strengths import TypedStrength
from movload.traffic.vehicle import Vehicle

if TYPE_CHECKING:
    from movload.bridge.bridge import Bridge

SPACING: Final = 4.6
KERB: Final = 1.9
Z: Final = (-1.6, -0.8, 0.0, 0.8, 1.6)
CART: Final = Vehicle("cart", np.array([30e3, 50e3]), [2.1], gauges=(1.7, 1.7))
BEAM: Final = TypedStrength({"moment": 220e3, "shear": 230e3, "hogging": 60e3})
STRINGER: Final = TypedStrength({"moment": 95e3, "shear": 120e3})
PLANK: Final = TypedStrength({"moment": 4.2e3, "shear": 40e3}, timber=True)


def fitted(**changes: object) -> Bridge:
    """Return the bridge with kerbs, stringers, floorbeams and planks; fields may be changed."""
    roadway = Roadway(-KERB, KERB, clearance=0.35)
    whole = brook(
        deck=Deck(tuple(bottom(4)), truss_spacing=SPACING, roadway=roadway, kind="pony"),
        floor=Floor(Stringers(Z, strength=STRINGER), Floorbeams(strength=BEAM), Planks(0.25, 0.8, strength=PLANK)),
        permanent=PermanentItems((Item("deck", "components", line=9e3, low=-KERB, high=KERB),), 0.1),
    )
    return replace(whole, **changes)  # type: ignore[arg-type]  # fields by name
