"""From the channels of a file to a `Recording`: the one door that all readers use."""

from __future__ import annotations

import math
from dataclasses import dataclass
from datetime import datetime

import numpy as np
from numpy.typing import NDArray

from core.errors import RecordingError
from core.recordings.leads import (
    CHEST_LEADS,
    LIMB_LEADS,
    TWELVE_LEADS,
    can_derive_limb_leads,
    complete_limb_leads,
)
from core.recordings.recording import Recording, Source, Subject
from core.wording import notices as say

# Below 100 Hz the QRS is not resolved; above 8 kHz no electrocardiograph records.
SAMPLING_RATE_RANGE_HZ = (100.0, 8000.0)
# A larger value is no ECG but a wrong unit: an electrode's half-cell offset reaches a few
# hundred mV (common practice, no source).
LARGEST_PLAUSIBLE_MV = 1000.0


@dataclass(frozen=True, slots=True, eq=False)
class Channel:
    """One lead as a reader found it: samples in mV (NaN where missing), and its step."""

    lead: str
    samples_mv: NDArray[np.float64]
    counts_per_mv: float


def assemble_recording(
    channels: list[Channel],
    *,
    sampling_rate_hz: float,
    source: Source,
    subject: Subject,
    recorded_at: datetime | None,
) -> Recording:
    """Check the channels and order them as the twelve leads, deriving limb leads if needed.

    Raises
    ------
    RecordingError
        If the rate is out of range, a chest lead or all but one limb lead is missing, or the
        voltages are impossible.
    """
    name = source.name
    low_hz, high_hz = SAMPLING_RATE_RANGE_HZ
    if not (math.isfinite(sampling_rate_hz) and low_hz <= sampling_rate_hz <= high_hz):
        raise RecordingError(
            f"{name}: the file states {sampling_rate_hz:g} samples a second; "
            f"{low_hz:g} to {high_hz:g} can be read. Export the recording again at 500 Hz."
        )
    by_lead: dict[str, Channel] = {}
    for channel in channels:
        by_lead.setdefault(channel.lead, channel)
    _refuse_missing_leads(name, by_lead)
    longest = max(channel.samples_mv.size for channel in by_lead.values())
    if longest == 0:
        raise RecordingError(f"{name}: the file holds no samples. Export the recording again.")
    for channel in by_lead.values():
        _refuse_impossible_voltage(name, channel)

    limb = complete_limb_leads({lead: c.samples_mv for lead, c in by_lead.items()})
    present = tuple(lead for lead in TWELVE_LEADS if lead in by_lead)
    derived = tuple(lead for lead in LIMB_LEADS if lead not in by_lead)
    columns = [limb[lead] if lead in limb else by_lead[lead].samples_mv for lead in TWELVE_LEADS]
    # Halving in the limb-lead algebra needs twice the steps of the leads it starts from.
    finest = 2 * max(channel.counts_per_mv for channel in by_lead.values())
    steps = tuple(
        by_lead[lead].counts_per_mv if lead in by_lead else finest for lead in TWELVE_LEADS
    )
    notices = (say.limb_leads_derived(derived),) if derived else ()
    signal_mv = np.stack(columns, axis=1)
    signal_mv.setflags(write=False)
    return Recording(
        signal_mv=signal_mv,
        sampling_rate_hz=float(sampling_rate_hz),
        leads_present=present,
        leads_derived=derived,
        counts_per_mv=steps,
        source=source,
        subject=subject,
        recorded_at=recorded_at,
        notices=notices,
    )


def _refuse_missing_leads(name: str, by_lead: dict[str, Channel]) -> None:
    missing_chest = [lead for lead in CHEST_LEADS if lead not in by_lead]
    if not missing_chest and can_derive_limb_leads(by_lead):
        return
    found = [lead for lead in TWELVE_LEADS if lead in by_lead]
    if not found:
        holds = "none of the twelve leads"
    elif len(found) == 1:
        holds = f"only lead {found[0]}"
    else:
        holds = f"{len(found)} leads ({', '.join(found)})"
    raise RecordingError(
        f"{name}: the file holds {holds}; a comparison needs V1 to V6 and at least two limb "
        "leads, recorded together. Choose a 12-lead recording."
    )


def _refuse_impossible_voltage(name: str, channel: Channel) -> None:
    largest = float(
        np.max(np.abs(channel.samples_mv), initial=0.0, where=~np.isnan(channel.samples_mv))
    )
    if not largest <= LARGEST_PLAUSIBLE_MV:
        raise RecordingError(
            f"{name}: lead {channel.lead} reaches {largest:.3g} mV, which no ECG does. "
            "The unit or the gain in the file is wrong; export it again with both stated."
        )
