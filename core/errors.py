"""Errors that a caller can act on.

SamespotError
  RecordingError     the file cannot be used (also a ValueError)
    TableIncomplete  a table states no unit or no rate, which the caller may state
  ComparisonError    the recording was read, but cannot be measured or compared
    NoTracing        a lead that is needed is flat, clipped or missing
    NotEnoughBeats   too short, too noisy or too irregular to measure
    NotComparable    a stop stands between the two recordings, such as two identifiers
    Stopped          the caller asked for the work to end
  ModelError         the torso ensemble is missing, damaged or of another version

A wrong argument stays a plain ValueError. Every message is one line: what is
wrong, where, and what would mend it.
"""

from __future__ import annotations

from pathlib import Path
from typing import Literal

from core.notices import Notice

Unstated = Literal["unit", "rate"]


class SamespotError(Exception):
    """Base of every error of this program."""


class RecordingError(SamespotError, ValueError):
    """A file cannot be used as a recording."""

    def __init__(self, message: str) -> None:
        # A file's name may hold bytes that are no text, line ends, and what a terminal acts upon.
        super().__init__("".join(mark if mark.isprintable() else "?" for mark in message))


class TableIncomplete(RecordingError):  # noqa: N818, it reads as what is wrong
    """A table of samples does not say its unit or its rate; the caller may say it.

    Attributes
    ----------
    path : Path
        The table, as the caller named it.
    missing : tuple of "unit" and "rate"
        All that would have to be stated.
    """

    def __init__(self, path: Path, missing: tuple[Unstated, ...], lacks: str, mend: str) -> None:
        self.path, self.missing = path, missing
        them = "it" if len(missing) == 1 else "both"
        mend = f"{mend[0].upper()}{mend[1:]}"
        self._told = f"{path.name}: the file {lacks}. {mend}, or state {them}"
        super().__init__(self.stating_it("when it is opened"))

    def stating_it(self, how: str) -> str:
        """The sentence where *how* is the way to state it, such as ``"with --unit mV"``."""
        return f"{self._told} {how}."


class ComparisonError(SamespotError):
    """The recordings were read, but cannot be measured or compared."""


class NotEnoughBeats(ComparisonError):  # noqa: N818, it reads as what happened
    """Fewer usable beats than a measurement needs."""


class NoTracing(ComparisonError):  # noqa: N818, as above
    """A lead that is needed holds no usable tracing."""


class NotComparable(ComparisonError):  # noqa: N818, as above
    """A stop stands between the two recordings; the caller may lift it.

    Attributes
    ----------
    notices : tuple of Notice
        All that was found, the stops first.
    """

    def __init__(self, message: str, notices: tuple[Notice, ...]) -> None:
        super().__init__(message)
        self.notices = notices

    @property
    def stops(self) -> tuple[str, ...]:
        """Codes that `Settings.lifted_stops` would have to name."""
        return tuple(notice.code for notice in self.notices if notice.severity == "stop")


class Stopped(ComparisonError):  # noqa: N818, as above
    """The caller asked for the work to end before it was done."""


class ModelError(SamespotError):
    """The torso ensemble is missing, damaged or of another version."""
