"""The program: its commands, and what the outside sees when something is wrong.

Exit codes: 0 done; 1 bad input; 2 wrong usage; 3 (only with --gate) some rating below 1 or some
member unrated in a sense it feels.
"""

from __future__ import annotations

import sys
from typing import TYPE_CHECKING

import typer

from movload.cli import draw, influence, rate, schema, start, sweep, vehicles
from movload.errors import MovloadError

if TYPE_CHECKING:
    import io

app = typer.Typer(
    name="movload",
    help="May this vehicle cross that truss bridge? Influence lines, exact worst positions and ratings.",
    epilog="Exit codes: 0 done, 1 bad input, 2 wrong usage, 3 with --gate: a rating below 1 or a member unrated.",
    add_completion=False,
    pretty_exceptions_enable=False,
    context_settings={"help_option_names": ["-h", "--help"]},
)
for command in (start.start, draw.draw, influence.influence, sweep.sweep, rate.rate, vehicles.vehicles, schema.schema):
    app.command(no_args_is_help=command is not vehicles.vehicles)(command)


@app.callback(invoke_without_command=True)
def movload(
    context: typer.Context, *, version: bool = typer.Option(False, "--version", help="Print the version and stop.")
) -> None:
    """May this vehicle cross that truss bridge? Influence lines, exact worst positions and ratings."""
    if version:
        from movload import __version__

        typer.echo(f"movload {__version__}")
        raise typer.Exit
    if context.invoked_subcommand is None:
        typer.echo(context.get_help())


def run() -> None:
    """Run the program: an error that a person can act on becomes one line on stderr and exit code 1."""
    for stream in (sys.stdout, sys.stderr):
        _say_what_it_can(stream)  # type: ignore[arg-type]  # the standard streams are text streams here
    try:
        app()
    except MovloadError as error:
        typer.echo(f"movload: {error}", err=True)
        sys.exit(1)
    except KeyboardInterrupt:
        sys.exit(130)


def _say_what_it_can(stream: io.TextIOWrapper) -> None:
    """Let a terminal that cannot show a sign show a question mark instead of failing."""
    if hasattr(stream, "reconfigure"):
        stream.reconfigure(errors="replace")
