"""Where results go: files written whole, or standard output for ``-``."""

from __future__ import annotations

import sys
from pathlib import Path

from app.command_line.failures import CommandFailed
from core.files import write_atomically

STANDARD_OUTPUT = "-"


def write_output(target: str, content: bytes) -> None:
    """Write to a file or to standard output.

    Raises
    ------
    CommandFailed
        If the file cannot be written.
    """
    if target == STANDARD_OUTPUT:
        sys.stdout.flush()
        sys.stdout.buffer.write(content)
        sys.stdout.buffer.flush()
        return
    try:
        write_atomically(Path(target), content)
    except OSError as error:
        raise CommandFailed(
            f"{target}: cannot be written ({error.strerror or error}). "
            "Choose another file or folder."
        ) from error


def refuse_two_to_standard_output(*targets: str | None) -> None:
    """Two results cannot share standard output."""
    if sum(target == STANDARD_OUTPUT for target in targets) > 1:
        raise CommandFailed("only one output can be '-'. Give the others a file name.")


def say(line: str) -> None:
    """Progress and messages, which never mix with the output."""
    sys.stderr.write(f"{line}\n")
