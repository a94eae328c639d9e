"""The program: its commands, and what the outside sees when something is wrong.

Exit codes: 0 done; 1 bad input; 2 wrong usage; 3 (only with --gate) some rating below 1 or some
member unrated in a sense it feels.
"""

from __future__ import annotations

import os
import sys
from contextlib import suppress

import typer

from movload.cli import draw, influence, rate, schema, start, sweep, vehicles
from movload.cli.options import one_line
from movload.errors import MovloadError
from movload.files.streams import abandoned, readied

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
    readied()
    os.environ["MPLBACKEND"] = "agg"  # nothing is ever shown in a window, whatever the environment asks for
    sys.exit(_ended())


def _ended() -> int:
    """Return the exit code of what was asked for."""
    code: object = 0
    try:
        try:
            app(prog_name="movload")
        except SystemExit as end:
            code = end.code
        sys.stdout.flush()
    except MovloadError as error:
        return _failed(str(error))
    except KeyboardInterrupt:
        return 130
    except BrokenPipeError:  # the reader has seen enough
        abandoned(sys.stdout)
        return 1
    except OSError as error:  # files/ says what is wrong with files; what is left is the output
        abandoned(sys.stdout)
        return _failed(f"standard output: cannot be written: {error.strerror or error}")
    return code if isinstance(code, int) else 0


def _failed(message: str) -> int:
    """Say on one line what is wrong, if anyone listens."""
    with suppress(OSError):
        typer.echo(f"movload: {one_line(message)}", err=True)
    return 1
