"""The fonts that ship with the program, so that a report looks the same everywhere."""

from __future__ import annotations

from PySide6.QtGui import QFontDatabase

from core.shipped_files import resources_folder

REPORT_FAMILY = "Open Sans"


def report_family() -> str:
    """Register the shipped fonts and answer their family's name. Needs a QGuiApplication.

    Qt forgets them when an application ends, so they are looked for each time.
    """
    if REPORT_FAMILY in QFontDatabase.families():
        return REPORT_FAMILY
    for path in sorted((resources_folder() / "fonts").glob("*.ttf")):
        QFontDatabase.addApplicationFont(str(path))
    return REPORT_FAMILY
