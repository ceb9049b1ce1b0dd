"""Time stamps of HL7: ``YYYYMMDDHHMMSS.ffff+ZZZZ``, cut off where less is known."""

from __future__ import annotations

import re
from datetime import datetime

_STAMP = re.compile(
    r"(\d{4})(\d\d)(\d\d)(?:(\d\d)(?:(\d\d)(?:(\d\d)(?:\.(\d+))?)?)?)?(?:[+-]\d{2,4}|Z)?",
    re.ASCII,
)


def moment_of(text: str | None) -> datetime | None:
    """The wall clock's time, zone dropped; None where the day is not stated or impossible."""
    found = _STAMP.fullmatch((text or "").strip()[:40])
    if found is None:
        return None
    year, month, day, hour, minute, second = (int(part or 0) for part in found.groups()[:6])
    micro = int((found[7] or "0")[:6].ljust(6, "0"))
    try:
        return datetime(year, month, day, hour, minute, second, micro)
    except ValueError:
        return None
