"""Shear centre and warping constant of an open thin section from the middle lines of its parts.

The sectorial area w grows along a middle line by the cross product of the place and the step. About the centroid,

    a = integral of w y dA, b = integral of w x dA,
    x0 = (a I_y - b I_xy) / (I_x I_y - I_xy^2),   y0 = (a I_xy - b I_x) / (I_x I_y - I_xy^2),

and Cw is the integral of (w0 - its mean)^2 with w0 about the shear centre. Every integrand is a product of two linear
functions on each line, so nothing is approximated beyond the parts being thin.

References
----------
V. Z. Vlasov, *Thin-Walled Elastic Beams* (from memory).
"""

from __future__ import annotations

from typing import TYPE_CHECKING, Final, NamedTuple

from movload.errors import InputError

if TYPE_CHECKING:
    from collections.abc import Sequence

    from movload.bridge.section_regions import Point

_FLAT: Final = 1e-9  # of I_x I_y: below it all lines lie on one line


class Line(NamedTuple):
    """A part's middle line from one point to another, and its thickness [m]."""

    start: Point
    end: Point
    thickness: float

    @property
    def area(self) -> float:
        """Length times thickness [m2]."""
        (xa, ya), (xb, yb) = self.start, self.end
        return self.thickness * float(((xb - xa) ** 2 + (yb - ya) ** 2) ** 0.5)


Ends = tuple[float, float]


def sectorial(lines: Sequence[Line]) -> tuple[float, float, float]:
    """Return shear centre x, y [m] and warping constant [m6].

    Parameters
    ----------
    lines
        Each starts where an earlier one starts or ends, so that one walk reaches all.

    Raises
    ------
    InputError
        All lines lie on one line.
    """
    area = sum(line.area for line in lines)
    x_mean = sum(line.area * (line.start[0] + line.end[0]) / 2 for line in lines) / area
    y_mean = sum(line.area * (line.start[1] + line.end[1]) / 2 for line in lines) / area
    xs = [(line.start[0] - x_mean, line.end[0] - x_mean) for line in lines]
    ys = [(line.start[1] - y_mean, line.end[1] - y_mean) for line in lines]
    swept = _sectorial_areas(lines, (x_mean, y_mean))
    i_x, i_y, i_xy = _integral(lines, ys, ys), _integral(lines, xs, xs), _integral(lines, xs, ys)
    a, b = _integral(lines, swept, ys), _integral(lines, swept, xs)
    spread = i_x * i_y - i_xy**2
    if spread <= _FLAT * max(i_x, i_y) ** 2:
        raise InputError("its parts lie on one line: no closed formula covers that")
    x, y = x_mean + (a * i_y - b * i_xy) / spread, y_mean + (a * i_xy - b * i_x) / spread
    about_it = _sectorial_areas(lines, (x, y))
    mean = sum(line.area * (start + end) / 2 for line, (start, end) in zip(lines, about_it, strict=True)) / area
    warped = [(start - mean, end - mean) for start, end in about_it]
    return x, y, _integral(lines, warped, warped)


def _sectorial_areas(lines: Sequence[Line], pole: Point) -> list[Ends]:
    """Return the sectorial area about a pole at both ends of each line [m2], 0 where the first one starts."""
    reached = {lines[0].start: 0.0}
    swept: list[Ends] = []
    for line in lines:
        (xa, ya), (xb, yb) = line.start, line.end
        start = reached[line.start]
        end = start + (xa - pole[0]) * (yb - pole[1]) - (xb - pole[0]) * (ya - pole[1])
        reached[line.end] = end
        swept.append((start, end))
    return swept


def _integral(lines: Sequence[Line], one: Sequence[Ends], other: Sequence[Ends]) -> float:
    """Return the integral over the area of two functions that are linear along each line, given by their ends."""
    return sum(
        line.area / 6 * (2 * u[0] * v[0] + u[0] * v[1] + u[1] * v[0] + 2 * u[1] * v[1])
        for line, u, v in zip(lines, one, other, strict=True)
    )
