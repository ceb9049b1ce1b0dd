"""What the reader states of a table of samples that does not state it itself."""

from __future__ import annotations

import math
from dataclasses import dataclass

from core.recordings.assemble import SAMPLING_RATE_RANGE_HZ

UNITS = ("mV", "µV", "V", "nV")
LOWEST_RATE_HZ, HIGHEST_RATE_HZ = SAMPLING_RATE_RANGE_HZ


@dataclass(frozen=True, slots=True)
class Stated:
    """Unit and rate of one table; None where the file states it, or nobody has."""

    unit: str | None = None
    sampling_rate_hz: float | None = None


def rate_of_text(text: str) -> float | None:
    """The samples a second that a reader typed, with either decimal mark.

    None where it is no number, or no rate that can be read.
    """
    try:
        rate_hz = float(text.strip().replace(",", "."))
    except ValueError:
        return None
    possible = math.isfinite(rate_hz) and LOWEST_RATE_HZ <= rate_hz <= HIGHEST_RATE_HZ
    return rate_hz if possible else None
