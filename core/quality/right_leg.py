"""An arm cable interchanged with the right leg's: one limb lead is flat.

The potential hardly varies along the legs, so the lead between what is then taken for an arm and
the left leg is nearly nothing: II where the right arm's cable is on the right leg, III where the
left arm's is. Wilson's terminal is wrong too, and with it the chest leads.
"""

from __future__ import annotations

import numpy as np
from numpy.typing import NDArray

# Peak to peak from P to T. A single limb lead under 0.1 mV points to the right leg's cable
# (review of lead reversals, PMC10902517); of LUDB records 1-100 none is under 0.2 mV.
FLAT_MV = 0.1
LARGE_MV = 0.3


def right_leg_interchange(waves_mv: NDArray[np.float64]) -> tuple[str, str] | None:
    """The arm whose cable a flat limb lead points to, if II or III alone is flat.

    Parameters
    ----------
    waves_mv : ndarray, shape (3, n)
        Leads I, II and III of the representative beat from P to T.

    Returns
    -------
    tuple of (flat lead, arm electrode), or None
    """
    size = np.ptp(waves_mv, axis=1)
    for row, lead, arm in ((1, "II", "RA"), (2, "III", "LA")):
        if size[row] < FLAT_MV and np.delete(size, row).min() > LARGE_MV:
            return lead, arm
    return None
