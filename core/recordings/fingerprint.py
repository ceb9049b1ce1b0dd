"""Fingerprint of the files a recording came from."""

from __future__ import annotations

import hashlib
from collections.abc import Iterable
from pathlib import Path


def sha256_of_files(paths: Iterable[Path]) -> str:
    """SHA-256 over the bytes of the files, one after the other, as hexadecimal digits."""
    digest = hashlib.sha256()
    for path in paths:
        with path.open("rb") as file:
            while block := file.read(1 << 20):
                digest.update(block)
    return digest.hexdigest()
