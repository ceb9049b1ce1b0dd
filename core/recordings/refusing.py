"""One refusal for whatever else a parser may raise."""

from __future__ import annotations

from collections.abc import Iterator
from contextlib import contextmanager

from core.errors import RecordingError


@contextmanager
def refusing(refusal: RecordingError) -> Iterator[None]:
    """Turn any fault but a refusal, a file that cannot be opened or a full memory into a refusal.

    Of any kind, because parsers meet bytes that nobody has checked.

    Raises
    ------
    RecordingError
        The one given, in the place of what was raised.
    """
    try:
        yield
    except (RecordingError, OSError, MemoryError):
        raise
    except Exception as error:
        raise refusal from error
