"""Name and version of this program, as results state them."""

from __future__ import annotations

from functools import lru_cache
from importlib.metadata import PackageNotFoundError, version

PROGRAM_NAME = "Samespot"


@lru_cache(maxsize=1)
def program_version() -> str:
    """Version of the installed package; ``"not installed"`` from a bare source tree."""
    try:
        return version("samespot")
    except PackageNotFoundError:
        return "not installed"
