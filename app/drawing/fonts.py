"""The fonts that ship with the program, so that a report looks the same everywhere."""

from __future__ import annotations

from functools import lru_cache

from PySide6.QtGui import QFontDatabase

from core.shipped_files import resources_folder

REPORT_FAMILY = "Open Sans"


@lru_cache(maxsize=1)
def report_family() -> str:
    """Register the shipped fonts and answer their family's name. Needs a QGuiApplication."""
    for path in sorted((resources_folder() / "fonts").glob("*.ttf")):
        QFontDatabase.addApplicationFont(str(path))
    return REPORT_FAMILY
