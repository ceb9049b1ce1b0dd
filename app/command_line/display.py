"""Whether a window can be opened here."""

from __future__ import annotations

import os
import subprocess
import sys

from app.command_line.failures import CommandFailed

_PROBE = "from PySide6.QtWidgets import QApplication; QApplication(['samespot'])"
# A display that answers does so at once; one that doesn't must not hold the program up.
_PROBE_SECONDS = 20


def display_named() -> bool:
    """Whether the system names a display; where windows are always there, True."""
    if sys.platform in ("win32", "darwin"):
        return True
    return any(os.environ.get(name) for name in ("DISPLAY", "WAYLAND_DISPLAY", "QT_QPA_PLATFORM"))


def display_answers() -> bool:
    """Whether a window system really answers.

    Asked in a process of its own, because Qt ends the process when it finds none.
    """
    if not display_named():
        return False
    try:
        probe = subprocess.run(
            [sys.executable, "-c", _PROBE], capture_output=True, timeout=_PROBE_SECONDS, check=False
        )
    except (OSError, subprocess.TimeoutExpired):
        return False
    return probe.returncode == 0


def refuse_without_display() -> None:
    """Raise `CommandFailed` where no display is named."""
    if not display_named():
        raise CommandFailed(
            "no display to open a window on. Use 'samespot compare EARLIER LATER --pdf FILE', "
            "or 'samespot demo' to try it."
        )
