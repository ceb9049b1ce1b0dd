"""Recordings with leads beyond the twelve, each a share of one of the twelve."""

from __future__ import annotations

from dataclasses import replace

import numpy as np

from core.recordings.leads import FURTHER_LEADS, TWELVE_LEADS
from core.recordings.recording import Recording

# No person's: something of a plausible size and sign for each lead.
MADE_OF = {
    "V3R": ("V1", 0.8),
    "V4R": ("V1", 0.6),
    "V5R": ("V1", 0.45),
    "V6R": ("V1", 0.35),
    "V7": ("V6", 0.8),
    "V8": ("V6", 0.6),
    "V9": ("V6", 0.45),
    "X": ("V6", 0.9),
    "Y": ("aVF", 0.9),
    "Z": ("V2", -0.8),
}


def with_further(
    recording: Recording, *leads: str, times: float = 1.0, flat: tuple[str, ...] = ()
) -> Recording:
    """The recording with further leads; *times* as large, *flat* ones without a tracing."""
    held = [lead for lead in FURTHER_LEADS if lead in leads]
    columns = []
    for lead in held:
        source, share = MADE_OF[lead]
        samples = share * recording.signal_mv[:, TWELVE_LEADS.index(source)]
        columns.append(0.0 * samples if lead in flat else samples * times)
    return replace(recording, further_leads=tuple(held), further_mv=np.stack(columns, axis=1))
