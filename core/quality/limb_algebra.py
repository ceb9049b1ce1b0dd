"""Whether recorded limb leads satisfy the algebra that ties them together."""

from __future__ import annotations

import numpy as np

from core.recordings.leads import LIMB_FROM_I_AND_II, LIMB_LEADS, TWELVE_LEADS
from core.recordings.recording import Recording

# Two steps of rounding in each lead, and what a recorder's own arithmetic may add.
LARGEST_STEPS = 4.0
LEAST_MV = 0.020


def limb_lead_contradiction_mv(recording: Recording) -> float | None:
    """How far the recorded limb leads contradict I and II, where that is beyond rounding.

    Leads of one source file satisfy III = II - I and its like at every instant; a file that
    was rescaled lead by lead does not.

    Returns
    -------
    float or None
        Largest contradiction in mV after each lead's own constant offset is taken out; None
        where the leads agree.
    """
    columns = [TWELVE_LEADS.index(lead) for lead in LIMB_LEADS]
    limb = recording.signal_mv[:, columns]
    foretold = limb[:, :2] @ LIMB_FROM_I_AND_II.T
    off = limb - foretold
    off = off[~np.isnan(off).any(axis=1)]
    if off.shape[0] == 0:
        return None
    largest = float(np.abs(off - np.median(off, axis=0)).max())
    allowed = max(LEAST_MV, LARGEST_STEPS / min(recording.counts_per_mv[c] for c in columns))
    return largest if largest > allowed else None
