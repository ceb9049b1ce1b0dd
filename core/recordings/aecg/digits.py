"""Numbers as an annotated ECG writes them: in attributes, and in long lists of samples."""

from __future__ import annotations

import math
import re

import numpy as np
from numpy.typing import NDArray

from core.recordings.shown import shown

# Python's own float() takes more: underscores, digits of any script, "nan" and "infinity".
_NUMBER = re.compile(r"[+-]?(?:[0-9]+\.?[0-9]*|\.[0-9]+)(?:[eE][+-]?[0-9]+)?")
_NO_PART_OF_A_NUMBER = re.compile(r"[^0-9eE+.\s-]", re.ASCII)
_LONGEST_NUMBER = 40
# Split into words, text takes some twenty times its size; a list is read in blocks of it.
_BLOCK_CHARACTERS = 1 << 18
_SPACES = " \n\r\t"


def number_of(text: str | None) -> float | None:
    """The finite number that a text is, else None."""
    text = (text or "").strip()
    if len(text) > _LONGEST_NUMBER or not _NUMBER.fullmatch(text):
        return None
    number = float(text)
    return number if math.isfinite(number) else None


class Digits:
    """The numbers of one list, read while the XML is parsed.

    Attributes
    ----------
    n_values : int
        Numbers read so far.
    fault : str, optional
        The first word that is no finite number; what follows it isn't read.
    """

    __slots__ = ("_n_pending", "_parts", "_pending", "fault", "n_values")

    def __init__(self) -> None:
        self.n_values = 0
        self.fault: str | None = None
        self._parts: list[NDArray[np.float64]] = []
        self._pending: list[str] = []
        self._n_pending = 0

    def add(self, text: str) -> None:
        """Take the next piece of text; a number may be cut between two pieces."""
        if self.fault is not None:
            return
        self._pending.append(text)
        self._n_pending += len(text)
        if self._n_pending >= _BLOCK_CHARACTERS:
            joined = "".join(self._pending)
            cut = 1 + max(joined.rfind(space) for space in _SPACES)
            # Where no space is found, the whole is one word, and too long for a number.
            self._read(joined[:cut] if cut else joined)
            self._pending = [joined[cut:]] if cut else []
            self._n_pending = len(joined) - cut if cut else 0

    def end(self) -> None:
        """Read what is left."""
        self._read("".join(self._pending))
        self._pending = []

    def take(self) -> NDArray[np.float64]:
        """All numbers, shape (n_values,), once: they are given away, not copied and kept."""
        parts, self._parts = self._parts, []
        return np.concatenate([np.empty(0), *parts])

    def _read(self, text: str) -> None:
        words = text.split()
        if self.fault is not None or not words:
            return
        values = _numbers_of(text, words)
        if values is None:
            self.fault = shown(next((word for word in words if number_of(word) is None), words[0]))
            self._parts = []
            self.n_values = 0
            return
        self._parts.append(values)
        self.n_values += values.size


def _numbers_of(text: str, words: list[str]) -> NDArray[np.float64] | None:
    if _NO_PART_OF_A_NUMBER.search(text) or max(map(len, words)) > _LONGEST_NUMBER:
        return None
    try:
        values = np.fromiter(map(float, words), dtype=np.float64, count=len(words))
    except ValueError:
        return None
    return values if np.isfinite(values).all() else None
