"""``movload schema``: the JSON Schema of a file or a result."""

from __future__ import annotations

import sys
from enum import StrEnum
from typing import Annotated

import typer


class Subject(StrEnum):
    """What has a schema."""

    bridge = "bridge"
    vehicle = "vehicle"
    ratings = "ratings"
    factor_set = "factor_set"


def schema(subject: Annotated[Subject, typer.Argument(help="Whose schema.")]) -> None:
    """Print the JSON Schema of a bridge file, a vehicle file, a factor set or the ratings document."""
    from movload.files.schema.published import schema_of
    from movload.report.columns import json_text

    sys.stdout.write(json_text(schema_of(subject.value)))
