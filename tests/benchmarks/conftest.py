"""Prints every ratio that was measured, whatever pytest captures."""

from __future__ import annotations

from typing import TYPE_CHECKING

import pytest

if TYPE_CHECKING:
    from collections.abc import Iterator

    from pytest_benchmark.fixture import BenchmarkFixture


@pytest.fixture(autouse=True)
def _said_aloud(request: pytest.FixtureRequest, capsys: pytest.CaptureFixture[str]) -> Iterator[None]:
    """Say the ratios of a test when it has ended, passed or failed."""
    if "benchmark" not in request.fixturenames:
        yield
        return
    benchmark: BenchmarkFixture = request.getfixturevalue("benchmark")
    yield
    writer = request.config.get_terminal_writer()
    with capsys.disabled():
        for told in benchmark.extra_info.values():
            writer.line(f"\n  {request.node.name}: {told}")
