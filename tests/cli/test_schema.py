"""``movload schema``: JSON Schemas of the three files and of the ratings document."""

from __future__ import annotations

from typing import Any

import pytest
from cli_run import movload

SUBJECTS = {
    "bridge": (
        ["title", "units", "layout", "joints", "supports", "members", "deck", "floor", "permanent", "rating"],
        ["title", "units", "supports", "members"],
    ),
    "vehicle": (["title", "kind", "source", "units", "axles", "headings"], ["title", "kind", "units"]),
    "ratings": (
        [
            "format", "title", "method", "statement", "units", "crossings", "coverage", "notes", "deflections",
            "uplifts", "cautions", "sources", "rows", "explanations",
        ],
    )
    * 2,
    "factor_set": (
        [
            "title", "edition", "statement", "sources", "multiple_presence", "presence_by_kind", "condition",
            "measured_gain", "system", "impact", "impact_values", "crawl_speed", "crawl_kinds", "closure", "levels",
        ],
        ["title", "edition", "statement", "sources", "levels"],
    ),
}  # fmt: skip


@pytest.mark.parametrize("subject", SUBJECTS)
def test_a_schema_names_every_key_and_which_are_needed(subject: str) -> None:
    done = movload("schema", subject)
    assert (done.code, done.err) == (0, "")
    schema = done.json()
    keys, needed = SUBJECTS[subject]
    assert schema["$schema"] == "https://json-schema.org/draft/2020-12/schema"
    assert [key for key in schema["properties"] if key in keys] == keys  # keys are only ever added
    assert schema["required"] == needed


def test_a_quantity_is_a_number_or_a_string_with_a_unit() -> None:
    parts = movload("schema", "bridge").json()["$defs"]
    area = next(one for one in parts["MemberGroup"]["properties"]["area"]["anyOf"] if "description" in one)
    assert area["type"] == ["number", "string"]
    assert "units.section squared" in area["description"]
    after = movload("schema", "vehicle").json()["$defs"]["AxleTable"]["properties"]["after"]
    assert {"number", "string", "array"} <= {kind for choice in after["anyOf"] for kind in _types(choice)}


def _types(choice: dict[str, Any]) -> list[str]:
    """Return the types a choice allows."""
    kinds = choice["type"]
    return kinds if isinstance(kinds, list) else [kinds]
