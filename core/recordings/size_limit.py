"""How much of a recording is held in memory at once."""

from __future__ import annotations

from core.errors import RecordingError

# 42 minutes of twelve leads at 500 Hz: 120 MB as doubles, of which reading holds up to four
# copies. No resting recording comes near it.
MOST_VALUES = 15_000_000


def fits_memory(*, n_leads: int, n_samples: int) -> bool:
    """Whether so many samples can be held in memory at once."""
    return n_leads * n_samples <= MOST_VALUES


def refuse_too_long(name: str, *, n_leads: int, n_samples: int, rate_hz: float) -> None:
    """Refuse what would not fit, before anything is allocated for it.

    Raises
    ------
    RecordingError
        If leads times samples are more than `MOST_VALUES`.
    """
    if fits_memory(n_leads=n_leads, n_samples=n_samples):
        return
    longest_s = MOST_VALUES / n_leads / rate_hz
    raise RecordingError(
        f"{name}: {n_leads} leads of {n_samples / rate_hz:.0f} s at {rate_hz:g} Hz are too much "
        f"to hold in memory. Cut out a stretch of at most {longest_s:.0f} s and open that."
    )
