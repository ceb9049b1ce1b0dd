"""What free words in a file's header say of sex and age."""

from __future__ import annotations

import re

_FEMALE = {"f", "female", "w", "woman"}
_MALE = {"m", "male", "man"}
# Older than anybody has grown; a header that says more holds something else.
OLDEST_YEARS = 125.0


def known_word(text: str | None) -> str | None:
    """The text; None where it is only ``X`` and spaces, which stand for unknown."""
    return text if (text or "").strip("Xx ") else None


def sex_of_word(word: str | None) -> str | None:
    """``"female"``, ``"male"`` or None for a header's word."""
    lower = (word or "").strip().lower()
    if lower in _FEMALE:
        return "female"
    return "male" if lower in _MALE else None


def age_of_word(word: str | None) -> float | None:
    """Years for ``"81"``, ``"81 y"``, and DICOM's ``"042Y"``, ``"018M"`` or ``"010D"``."""
    found = re.fullmatch(r"\s*(\d{1,3}(?:\.\d+)?)\s*([ymwd]?)\S*\s*", (word or "").lower())
    if found is None:
        return None
    days_in = {"": 365.25, "y": 365.25, "m": 365.25 / 12, "w": 7.0, "d": 1.0}
    years = float(found[1]) * days_in[found[2]] / 365.25
    return years if years <= OLDEST_YEARS else None
