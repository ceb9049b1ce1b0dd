"""Errors that a caller can act on.

SamespotError
  RecordingError     the file cannot be used (also a ValueError)
  ComparisonError    the recording was read, but cannot be measured or compared
    NotEnoughBeats   too short, too noisy or too irregular to measure
    Stopped          the caller asked for the work to end
  ModelError         the torso ensemble is missing, damaged or of another version

A wrong argument stays a plain ValueError. Every message is one line: what is
wrong, where, and what would mend it.
"""

from __future__ import annotations


class SamespotError(Exception):
    """Base of every error of this program."""


class RecordingError(SamespotError, ValueError):
    """A file cannot be used as a recording."""


class ComparisonError(SamespotError):
    """The recordings were read, but cannot be measured or compared."""


class NotEnoughBeats(ComparisonError):  # noqa: N818, it reads as what happened
    """Fewer usable beats than a measurement needs."""


class Stopped(ComparisonError):  # noqa: N818, as above
    """The caller asked for the work to end before it was done."""


class ModelError(SamespotError):
    """The torso ensemble is missing, damaged or of another version."""
