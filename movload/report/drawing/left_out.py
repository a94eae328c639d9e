"""Labels that find no room on a sheet, counted by what they say, and the caption's sentence that owns up to them."""

from __future__ import annotations

from collections import Counter
from typing import Final, NamedTuple, TypeAlias


class Label(NamedTuple):
    """What a label says, as one calls a single one and several of them."""

    one: str
    many: str


LeftOut: TypeAlias = Counter[Label]

ANGLE: Final = Label("bed's angle", "beds' angles")
AXLE_LOAD: Final = Label("axle load", "axle loads")
AXLE_SPACING: Final = Label("axle spacing", "axle spacings")
AXLES_BEYOND: Final = Label("count of axles further out", "counts of axles further out")
BAR_NAME: Final = Label("bar's name", "bars' names")
DEPTH: Final = Label("depth", "depths")
FRAMED_NAME: Final = Label("framed name", "framed names")
JOINT_NAME: Final = Label("joint's name", "joints' names")
LENGTH: Final = Label("length between joints", "lengths between joints")
ORDINATE: Final = Label("influence ordinate", "influence ordinates")
STATION: Final = Label("panel point's x", "panel points' x")
STATION_NAME: Final = Label("panel point's name under the line", "panel points' names under the line")
ZERO: Final = Label("x of a zero", "x of zeros")


def forces_left_out(largest: str) -> Label:
    """Return the label of bar forces of which ``largest`` (as it is written) is the largest."""
    return Label(f"bar force, {largest}", f"bar forces, up to {largest}")


def told_left_out(missing: LeftOut) -> str:
    """Return what is not written, as a sentence for the caption; "" when everything is.

    >>> told_left_out(Counter({ORDINATE: 2, AXLE_SPACING: 1}))
    'Not written for want of room: 2 influence ordinates; 1 axle spacing.'
    """
    parts = [f"{count} {label.one if count == 1 else label.many}" for label, count in missing.items() if count]
    return f"Not written for want of room: {'; '.join(parts)}." if parts else ""
