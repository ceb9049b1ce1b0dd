"""From the channels of a file to a `Recording`: the one door that all readers use."""

from __future__ import annotations

import math
from collections.abc import Collection
from dataclasses import dataclass
from datetime import datetime, timedelta

import numpy as np
from numpy.typing import NDArray

from core.errors import RecordingError
from core.recordings.leads import (
    CHEST_LEADS,
    FURTHER_LEADS,
    LIMB_LEADS,
    TWELVE_LEADS,
    can_derive_limb_leads,
    complete_limb_leads,
)
from core.recordings.recording import Filters, Recording, Source, Subject
from core.recordings.resampling import resampled
from core.wording import notices as say

# Below 100 Hz the QRS is not resolved; above 8 kHz no electrocardiograph records.
SAMPLING_RATE_RANGE_HZ = (100.0, 8000.0)
# A larger value is no ECG but a wrong unit: an electrode's half-cell offset reaches a few
# hundred mV (common practice, no source).
LARGEST_PLAUSIBLE_MV = 1000.0
# No converter is finer or coarser; beyond lies a gain that means something else.
STEP_RANGE_MV = (1e-9, 1e3)


@dataclass(frozen=True, slots=True, eq=False)
class Channel:
    """One lead as a reader found it.

    Attributes
    ----------
    samples_mv : ndarray, shape (n_samples,)
        NaN where the file holds no sample.
    counts_per_mv : float
        Steps of the file's quantisation in one mV.
    sampling_rate_hz : float, optional
        Where it differs from the other leads'.
    """

    lead: str
    samples_mv: NDArray[np.float64]
    counts_per_mv: float
    sampling_rate_hz: float | None = None


def assemble_recording(
    channels: list[Channel],
    *,
    sampling_rate_hz: float,
    source: Source,
    subject: Subject,
    recorded_at: datetime | None,
    filters: Filters | None = None,
    electrode_placement: str | None = None,
    start_s: float = 0.0,
) -> Recording:
    """Check the channels and order them as the twelve leads, deriving limb leads if needed.

    Channels of different rates are brought to the highest.

    Parameters
    ----------
    channels : list of Channel
    recorded_at : datetime, optional
        When the recording in the file begins.
    start_s : float
        Where in it the channels begin.

    Raises
    ------
    RecordingError
        If the rate is out of range, a chest lead or all but one limb lead is missing, or the
        voltages are impossible.
    """
    name = source.name
    by_lead: dict[str, Channel] = {}
    for channel in channels:
        refuse_rate(name, channel.sampling_rate_hz or sampling_rate_hz)
        by_lead.setdefault(channel.lead, channel)
    refuse_missing_leads(name, by_lead)
    if max(channel.samples_mv.size for channel in by_lead.values()) == 0:
        raise RecordingError(f"{name}: the file holds no samples. Export the recording again.")
    for channel in by_lead.values():
        _refuse_impossible_step(name, channel)
        _refuse_impossible_voltage(name, channel)
    rate_hz = max(channel.sampling_rate_hz or sampling_rate_hz for channel in by_lead.values())
    samples = on_one_time_axis(by_lead, sampling_rate_hz, rate_hz)

    limb = complete_limb_leads(samples)
    present = tuple(lead for lead in TWELVE_LEADS if lead in by_lead)
    derived = tuple(lead for lead in LIMB_LEADS if lead not in by_lead)
    columns = [limb[lead] if lead in limb else samples[lead] for lead in TWELVE_LEADS]
    # Halving in the limb-lead algebra needs twice the steps of the leads it starts from.
    finest = 2 * max(channel.counts_per_mv for channel in by_lead.values())
    steps = tuple(
        by_lead[lead].counts_per_mv if lead in by_lead else finest for lead in TWELVE_LEADS
    )
    further = tuple(lead for lead in FURTHER_LEADS if lead in by_lead)
    return Recording(
        signal_mv=_frozen(columns),
        sampling_rate_hz=float(rate_hz),
        leads_present=present,
        leads_derived=derived,
        counts_per_mv=steps,
        source=source,
        subject=subject,
        recorded_at=None if recorded_at is None else recorded_at + timedelta(seconds=start_s),
        notices=(say.limb_leads_derived(derived),) if derived else (),
        filters=filters or Filters(),
        electrode_placement=electrode_placement,
        further_leads=further,
        further_mv=_frozen([samples[lead] for lead in further]),
    )


def on_one_time_axis(
    by_lead: dict[str, Channel], usual_rate_hz: float, rate_hz: float
) -> dict[str, NDArray[np.float64]]:
    """Samples of every channel at one rate and of one length; NaN after a channel's end."""
    samples = {}
    for lead, channel in by_lead.items():
        own_hz = channel.sampling_rate_hz or usual_rate_hz
        samples[lead] = (
            channel.samples_mv
            if own_hz == rate_hz
            else resampled(channel.samples_mv, own_hz, rate_hz)
        )
    longest = max(values.size for values in samples.values())
    return {
        lead: values
        if values.size == longest
        else np.pad(values, (0, longest - values.size), constant_values=np.nan)
        for lead, values in samples.items()
    }


def _frozen(columns: list[NDArray[np.float64]]) -> NDArray[np.float64]:
    table = np.stack(columns, axis=1) if columns else np.empty((0, 0))
    table.setflags(write=False)
    return table


def refuse_rate(name: str, rate_hz: float) -> None:
    """Refuse a rate that no ECG has.

    Raises
    ------
    RecordingError
        If it is outside `SAMPLING_RATE_RANGE_HZ`.
    """
    low_hz, high_hz = SAMPLING_RATE_RANGE_HZ
    if not (math.isfinite(rate_hz) and low_hz <= rate_hz <= high_hz):
        raise RecordingError(
            f"{name}: the file states {rate_hz:g} samples a second; "
            f"{low_hz:g} to {high_hz:g} can be read. Correct the rate or the unit "
            "of time in the file, or export the recording again at 500 Hz."
        )


def refuse_missing_leads(name: str, held: Collection[str]) -> None:
    """Refuse what is no 12-lead ECG.

    Raises
    ------
    RecordingError
        If a chest lead or all but one limb lead is missing.
    """
    missing_chest = [lead for lead in CHEST_LEADS if lead not in held]
    if not missing_chest and can_derive_limb_leads(held):
        return
    found = [lead for lead in TWELVE_LEADS if lead in held]
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


def _refuse_impossible_step(name: str, channel: Channel) -> None:
    step_mv = 1.0 / channel.counts_per_mv if channel.counts_per_mv else math.inf
    smallest_mv, largest_mv = STEP_RANGE_MV
    if not smallest_mv <= step_mv <= largest_mv:
        raise RecordingError(
            f"{name}: lead {channel.lead} is stored in steps of {step_mv:.3g} mV, which no "
            "recorder has. The unit or the gain in the file is wrong; export it again with both "
            "stated."
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
