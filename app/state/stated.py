"""What the reader states of a file: what a table lacks, and which stretch is wanted."""

from __future__ import annotations

import math
from dataclasses import dataclass

from core.recordings import cleanest, held
from core.recordings.assemble import SAMPLING_RATE_RANGE_HZ

UNITS = ("mV", "µV", "V", "nV")
LOWEST_RATE_HZ, HIGHEST_RATE_HZ = SAMPLING_RATE_RANGE_HZ
LONGEST_WHOLE_S, USUAL_STRETCH_S = cleanest.LONGEST_WHOLE_S, cleanest.STRETCH_S
SHORTEST_STRETCH_S = held.SHORTEST_STRETCH_S


@dataclass(frozen=True, slots=True)
class Stated:
    """Unit and rate of one table; None where the file states it, or nobody has.

    ``stretch_s`` is from when to when to read, in s from the recording's start; None for all.
    """

    unit: str | None = None
    sampling_rate_hz: float | None = None
    stretch_s: tuple[float, float] | None = None

    def joined(self, later: Stated) -> Stated:
        """What was stated, with what was stated later in its place."""
        return Stated(
            later.unit or self.unit,
            later.sampling_rate_hz or self.sampling_rate_hz,
            later.stretch_s or self.stretch_s,
        )


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


def seconds_of_text(text: str) -> float | None:
    """The time that a reader typed: ``1:02:03``, ``2:30`` or ``90``; None where it is none."""
    parts = text.strip().replace(",", ".").split(":")
    try:
        numbers = [float(part) for part in parts]
    except ValueError:
        return None
    plausible = all(math.isfinite(number) and number >= 0 for number in numbers)
    if len(numbers) > 3 or not plausible or any(number >= 60 for number in numbers[1:]):
        return None
    return sum(number * 60.0**place for place, number in enumerate(reversed(numbers)))
