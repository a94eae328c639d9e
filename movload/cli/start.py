"""``movload start``: a commented bridge file from a form, panel lengths and depths."""

from __future__ import annotations

from pathlib import Path
from typing import Annotated

import typer

from movload.cli.options import Force

NewFile = Annotated[Path, typer.Argument(metavar="FILE", help="The bridge file to write (.toml).", show_default=False)]
Form = Annotated[
    str,
    typer.Option("--form", prompt="Form", help="pratt, howe, warren, warren with verticals, k or baltimore."),
]
Panels = Annotated[
    str,
    typer.Option("--panels", prompt="Panel lengths from the left", help='"4.2 4.35 4.2" or "6x3.5".'),
]
Depths = Annotated[
    str | None,
    typer.Option(
        "--depths",
        help='"0 2.1 2.6 2.1 0", 0 at a pointed end: one a panel point; warren: one a panel; baltimore: one a main '
        "panel point. Asked for when left out.",
        show_default=False,
    ),
]
Chord = Annotated[
    str, typer.Option("--deck", prompt="Deck (through, pony, deck)", help="Which chord carries the deck.")
]
Middle = Annotated[
    str | None, typer.Option("--middle", help="Middle diagonal of an odd number of panels: falling, rising, crossed.")
]
Length = Annotated[str, typer.Option("--length-unit", help="Unit of bare lengths: m or ft.")]
Forces = Annotated[
    str | None, typer.Option("--force-unit", help="Unit of loads: kN beside m, kip beside ft when left out.")
]
Title = Annotated[str, typer.Option("--title", help="The bridge's name.")]


def start(
    file: NewFile,
    *,
    form: Form,
    panels: Panels,
    deck: Chord,
    depths: Depths = None,
    middle: Middle = None,
    length: Length = "m",
    loads: Forces = None,
    title: Title = "A bridge",
    force: Force = False,
) -> None:
    """Write a commented bridge file; what is still to be measured or decided stands in it as "?"."""
    from movload.bridge.layout import Layout
    from movload.errors import InputError, MovloadError
    from movload.files.read import bridge_from
    from movload.files.start import depths_question, lengths_from, starter_text
    from movload.files.write import check_writable, write_files
    from movload.units import UnitSystem

    if file.suffix.lower() != ".toml":
        raise InputError(f'a bridge file ends in .toml, got "{file.suffix}"', place=str(file))
    check_writable([file], force=force)
    units = UnitSystem.beside(length, force=loads or "")
    lengths = lengths_from(panels, units, "--panels")
    if depths is None:  # what is asked for depends on the form
        depths = typer.prompt(depths_question(form, lengths.size))
    heights = lengths_from(depths, units, "--depths")
    try:
        layout = Layout(form, lengths, heights, deck=deck, middle=middle)
    except MovloadError as error:  # layout.panels[2] was typed as --panels
        raise type(error)(error.rule, place=error.place.replace("layout.", "--"), nearest=error.nearest) from None
    text = starter_text(title, layout, units)
    bridge_from(text, str(file))  # what was written must read back
    write_files({file: text.encode()}, force=force)
    typer.echo(f"wrote {file}; see it with: movload draw {file} --plot {file.with_suffix('.png').name}")
