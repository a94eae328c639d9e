"""The way in: ``movload`` and ``python -m movload`` both come through here."""

from __future__ import annotations

import gc


def run() -> None:
    """Run the program without the garbage collector's passes over what start-up makes and never drops.

    A command lives for a second and its thousands of module objects to the end; collecting among them costs a fifth of
    that second. What is alive when it ends is left for the system to take back.
    """
    gc.disable()
    from movload.cli.main import run as run_program

    try:
        run_program()
    finally:
        gc.freeze()


if __name__ == "__main__":
    run()
