"""A recording in its file: how long it is, and any stretch of it on request."""

from __future__ import annotations

from collections.abc import Callable
from dataclasses import dataclass, replace

from core.errors import RecordingError
from core.recordings.recording import Recording
from core.recordings.size_limit import MOST_VALUES, fits_memory
from core.wording import notices as say

# A shorter stretch cannot even hold a whole beat.
SHORTEST_STRETCH_S = 1.0


@dataclass(frozen=True, slots=True, eq=False)
class Held:
    """What a reader found without taking all samples into memory.

    Attributes
    ----------
    duration_s : float
    n_leads : int
        Leads held, those to be derived among them.
    sampling_rate_hz : float
        The rate to which all leads are brought.
    between : callable
        The part of the recording from one time to another, in s.
    """

    name: str
    duration_s: float
    n_leads: int
    sampling_rate_hz: float
    between: Callable[[float, float], Recording]

    @property
    def fits_memory(self) -> bool:
        """Whether all of it can be held in memory at once."""
        n_samples = round(self.duration_s * self.sampling_rate_hz)
        return fits_memory(n_leads=self.n_leads, n_samples=n_samples)

    def whole(self) -> Recording:
        """All of it."""
        return self.between(0.0, self.duration_s)


def held_in_memory(recording: Recording) -> Held:
    """A recording whose reader took it whole."""
    return Held(
        name=recording.source.name,
        duration_s=recording.duration_s,
        n_leads=len(recording.leads) + len(recording.further_leads),
        sampling_rate_hz=recording.sampling_rate_hz,
        between=recording.stretch,
    )


def asked_stretch(held: Held, start_s: float, stop_s: float) -> Recording:
    """The part from one time to another that a reader asked for, with a notice that says so.

    Raises
    ------
    RecordingError
        If it is not within the recording, shorter than a second or too long for memory.
    """
    asked = f"{held.name}: a stretch from {start_s:g} to {stop_s:g} s was asked for"
    if not 0 <= start_s < stop_s <= held.duration_s + 0.5 / held.sampling_rate_hz:
        raise RecordingError(
            f"{asked}; the recording lasts {held.duration_s:.0f} s. Choose a stretch within it."
        )
    if stop_s - start_s < SHORTEST_STRETCH_S:
        raise RecordingError(f"{asked}, which is too short. Choose ten seconds or more.")
    longest_s = MOST_VALUES / held.n_leads / held.sampling_rate_hz
    if stop_s - start_s > longest_s:
        raise RecordingError(
            f"{asked}, which is too much to hold in memory. Choose at most {longest_s:.0f} s."
        )
    part = held.between(start_s, stop_s)
    notice = say.stretch_asked(start_s, stop_s, held.duration_s)
    return replace(part, notices=(*part.notices, notice))
