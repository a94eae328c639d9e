"""Vehicles in words: ranges of spacings in both units, and how far a source may be trusted."""

from __future__ import annotations

import csv
import io
import json

import pytest

from movload.report.table import rendered
from movload.report.vehicles_report import list_json, list_tables, one_csv, one_tables
from movload.traffic.loading import Loading
from movload.traffic.vehicle import Vehicle

FOOT = 0.3048  # m, exact (NIST SP 811, B.8, from memory)
TRAILER = Vehicle("trailer", [30e3, 80e3, 80e3], [4.5, (14 * FOOT, 30 * FOOT)], gauges=(1.8, 1.9, 1.9))  # type: ignore[arg-type]  # lists become arrays

SOURCES = {
    "invented": "invented",
    "Invented, but like one that was read": "invented",
    "a manual, 3rd ed.; from memory": "from memory",
    "From memory": "from memory",
    "weights read (an act of 1987); spacings from memory": "partly from memory",
    "axle loads from memory, gauges read": "partly from memory",
    "read at the weighbridge": "read",
    "a table, read": "read",
    "load spread over two tracks": "not said",
    "already weighed": "not said",
    "reads well": "not said",
    "from memoryless sources": "not said",
    "reinvented": "not said",
    "": "not said",
}


def trust(source: str) -> str:
    """Return the last cell of the list's only row."""
    loading = Loading.of(TRAILER, "farm", source=source)
    text = rendered(list_tables({"trailer": loading}), width=200, colour=False)
    row = next(line for line in text.splitlines() if line.startswith("trailer "))
    return row[row.index("190.0") + len("190.0") :].strip()


@pytest.mark.parametrize("source", SOURCES)
def test_how_far_a_source_may_be_trusted_goes_by_whole_words(source: str) -> None:
    assert trust(source) == SOURCES[source]


def test_a_range_is_told_from_least_to_greatest_in_both_units() -> None:
    shown = rendered(one_tables(Loading.of(TRAILER, "farm")), width=200, colour=False).splitlines()
    front, middle, last = shown[-3:]
    assert front.split()[-5:] == ["-", "1.80", "m", "(5.91", "ft)"]
    assert "4.50 m (14.76 ft)" in middle
    assert "4.27 to 9.14 m (14.00 to 30.00 ft)" in last


def test_csv_has_the_two_ends_of_every_spacing() -> None:
    heads, *rows = csv.reader(io.StringIO(one_csv(Loading.of(TRAILER, "farm"))))
    assert heads == ["axle", "load [kN]", "after [m]", "gauge [m]", "after_least [m]", "after_greatest [m]"]
    assert [row[2] for row in rows] == ["", "4.5", ""]
    assert [row[4:] for row in rows] == [["", ""], ["4.5", "4.5"], [str(14 * FOOT), str(30 * FOOT)]]


def test_json_keeps_the_pair() -> None:
    (row,) = json.loads(list_json({"trailer": Loading.of(TRAILER, "farm")}))["rows"]
    assert row["cases"][0]["spacings"] == [4.5, [14 * FOOT, 30 * FOOT]]
