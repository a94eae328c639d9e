"""How exact, and in how much memory, the lines of very long trusses are."""

from __future__ import annotations

import tracemalloc

import numpy as np
import pytest
from benchmarks.closed_form import member_and_reaction_lines
from benchmarks.spans import DEPTH, span_of

from movload.statics.influence import influence_lines


@pytest.mark.parametrize("panels", [7, 20, 600])
def test_lines_agree_with_statics(panels: int) -> None:
    """Members and reactions by the method of sections (``closed_form``), within 1e-12 of each row's largest ordinate.

    What is left is round-off: the closed form's own is a few 1e-16, and K's condition number, which grows as the
    fourth power of the panels, must not enter.
    """
    span = span_of(panels)
    exact = member_and_reaction_lines(span.truss, DEPTH, span.panel_points)
    found = influence_lines(span.truss, span.panel_points).ordinates[: len(exact)]
    largest = np.abs(exact).max(axis=1, keepdims=True)
    carries = largest[:, 0] > 0.0
    assert carries.sum() >= len(exact) - 2  # only L0 x and, over an even number of panels, the middle post are idle
    assert (np.abs(found - exact)[carries] / largest[carries]).max() <= 1e-12
    assert not found[~carries].any()


def test_memory_at_2000_panels() -> None:
    """At most three times the answer's size is ever held at once, the answer included (numpy tells tracemalloc)."""
    span = span_of(2000)
    tracemalloc.start()
    try:
        lines = influence_lines(span.truss, span.panel_points)
        _, peak = tracemalloc.get_traced_memory()
    finally:
        tracemalloc.stop()
    assert lines.ordinates.shape == (4 * 2000 - 3 + 3 + 2001, 2001)
    assert lines.ordinates.nbytes < peak <= 3 * lines.ordinates.nbytes
