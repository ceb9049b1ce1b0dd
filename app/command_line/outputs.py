"""Where results go: files written whole, or standard output for ``-``."""

from __future__ import annotations

import codecs
import sys
from pathlib import Path

from app.command_line.failures import CommandFailed
from core import Recording
from core.files import write_atomically
from core.recordings.wfdb_writer import write_wfdb

STANDARD_OUTPUT = "-"


PLAINER_SIGNS = "samespot.plainer"
_PLAINER = str.maketrans(
    {"−": "-", "–": "-", "·": "-", "●": "o", "◆": "#", "◇": "*", "▲": "^", "±": "+-", "µ": "u"}
    | {"…": "...", "×": "x", "\N{NO-BREAK SPACE}": " "}
)


def _plainer(error: UnicodeError) -> tuple[str, int]:
    """What stands for signs that a terminal lacks."""
    if not isinstance(error, UnicodeEncodeError):
        raise error
    lacking = error.object[error.start : error.end].translate(_PLAINER)
    return lacking.encode("ascii", "replace").decode(), error.end


codecs.register_error(PLAINER_SIGNS, _plainer)


def harmless(text: str) -> str:
    """A text without the signs that a terminal obeys rather than shows."""
    allowed = "\n\N{NO-BREAK SPACE}"
    return "".join(sign if sign.isprintable() or sign in allowed else "?" for sign in text)


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
    if not Path(target).name:
        raise CommandFailed(f"{target}: this is a folder. Name a file to write.")
    try:
        write_atomically(Path(target), content)
    except OSError as error:
        raise CommandFailed(
            f"{target}: cannot be written ({error.strerror or error}). "
            "Choose another file or folder."
        ) from error


def writing_record(recording: Recording, stem: Path) -> str:
    """Write a WFDB record; what to say of it.

    Raises
    ------
    CommandFailed
        If the record cannot be written.
    """
    try:
        header, _ = write_wfdb(recording, stem)
    except OSError as error:
        raise CommandFailed(
            f"{stem}: cannot be written ({error.strerror or error}). Choose another folder."
        ) from error
    return f"wrote {header.name} beside its signal file"


def refuse_two_to_standard_output(*targets: str | None) -> None:
    """Two results cannot share standard output."""
    if sum(target == STANDARD_OUTPUT for target in targets) > 1:
        raise CommandFailed("only one output can be '-'. Give the others a file name.")


def say(line: str) -> None:
    """Progress and messages, which never mix with the output."""
    sys.stderr.write(f"{line}\n")
