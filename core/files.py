"""Files written whole or not at all."""

from __future__ import annotations

import os
import secrets
from pathlib import Path


def write_atomically(path: Path, content: bytes) -> None:
    """Write a file beside its place and move it there; an existing one is kept until then.

    Raises
    ------
    OSError
        If the folder cannot be written to.
    """
    temporary = path.with_name(f".{path.name}-{secrets.token_hex(4)}")
    try:
        with temporary.open("xb") as file:
            file.write(content)
            file.flush()
            os.fsync(file.fileno())
        temporary.replace(path)
    finally:
        temporary.unlink(missing_ok=True)
