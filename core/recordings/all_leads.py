"""The twelve leads and the further ones side by side, as a written copy holds them."""

from __future__ import annotations

import numpy as np
from numpy.typing import NDArray

from core.recordings.recording import Recording


def all_leads_mv(recording: Recording) -> NDArray[np.float64]:
    """Shape (n_samples, 12 + n_further)."""
    if not recording.further_leads:
        return recording.signal_mv
    return np.hstack([recording.signal_mv, recording.further_mv])


def steps_of_all_leads(recording: Recording) -> list[float]:
    """Steps in one mV of every such lead; the further ones take the finest."""
    finest = max(recording.counts_per_mv)
    return [*recording.counts_per_mv, *[finest] * len(recording.further_leads)]
