"""Errors that a caller can act on.

SamespotError
  RecordingError     the file cannot be used (also a ValueError)
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

from core.notices import Notice


class SamespotError(Exception):
    """Base of every error of this program."""


class RecordingError(SamespotError, ValueError):
    """A file cannot be used as a recording."""

    def __init__(self, message: str) -> None:
        # A file's name may hold bytes that are no text, line ends, and what a terminal acts upon.
        super().__init__("".join(mark if mark.isprintable() else "?" for mark in message))


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
