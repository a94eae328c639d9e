"""The standard streams, which may be closed, full, cut off by their reader, or unable to show a sign."""

from __future__ import annotations

import contextlib
import io
import os
import sys
from typing import TextIO


def readied() -> None:
    """Let a closed standard stream swallow what it gets, and one that cannot show a sign show a question mark."""
    for name in ("stdin", "stdout", "stderr"):
        stream = getattr(sys, name)
        if stream is None:
            setattr(sys, name, io.StringIO())
        elif name != "stdin" and hasattr(stream, "reconfigure"):
            stream.reconfigure(errors="replace")


def abandoned(stream: TextIO) -> None:
    """Let a stream that takes nothing more lead nowhere, so that Python does not try it again when it ends."""
    with contextlib.suppress(OSError, ValueError):
        nowhere = os.open(os.devnull, os.O_WRONLY)
        os.dup2(nowhere, stream.fileno())
        os.close(nowhere)
