"""Words of a file as a message may show them."""

from __future__ import annotations

MOST_CHARACTERS = 20


def shown(text: str) -> str:
    """The beginning of a text, on one line and without what a terminal would act upon."""
    return "".join(mark if mark.isprintable() else "?" for mark in text.strip()[:MOST_CHARACTERS])
