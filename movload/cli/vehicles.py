"""``movload vehicles``: the library, or one vehicle axle by axle."""

from __future__ import annotations

from typing import Annotated

import typer

from movload.cli.options import CsvFile, Force, Json, check_outputs, deliver

Name = Annotated[str | None, typer.Argument(metavar="NAME", help="A library name or a vehicle file (.toml).")]


def vehicles(name: Name = None, *, json: Json = False, csv: CsvFile = None, force: Force = False) -> None:
    """List the vehicles that come with movload, or show one axle by axle."""
    check_outputs(csv, None, force=force, inputs=[] if name is None else [name])
    from movload.files.library import read_vehicle, vehicle_names
    from movload.report.vehicles_report import list_csv, list_json, list_tables, one_csv, one_tables

    if name is None:
        loadings = {one: read_vehicle(one) for one in vehicle_names()}
        deliver(
            text=lambda: list_tables(loadings),
            json=(lambda: list_json(loadings)) if json else None,
            files={csv: lambda: list_csv(loadings).encode()},
            force=force,
        )
        return
    loading = read_vehicle(name)
    deliver(
        text=lambda: one_tables(loading),
        json=(lambda: list_json({name: loading})) if json else None,
        files={csv: lambda: one_csv(loading).encode()},
        force=force,
    )
