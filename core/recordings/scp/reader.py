"""SCP-ECG records to recordings."""

from __future__ import annotations

from pathlib import Path

import numpy as np

from core.errors import RecordingError
from core.recordings.assemble import Channel, assemble_recording, refuse_rate
from core.recordings.fingerprint import sha256_of_files
from core.recordings.lead_numbers import lead_of_scp_number
from core.recordings.leads import TWELVE_LEADS
from core.recordings.recording import Recording, Source
from core.recordings.scp.container import LARGEST_BYTES, read_sections
from core.recordings.scp.signals import SignalError, Signals, read_signals
from core.recordings.scp.subject import read_header
from core.recordings.size_limit import refuse_too_long

FORMAT_NAME = "SCP-ECG"
HEADER_SECTION = 1


def read_scp(path: Path) -> Recording:
    """Read the rhythm of an SCP-ECG record.

    Raises
    ------
    RecordingError
        If the record is damaged, or holds no 12-lead rhythm.
    """
    if path.stat().st_size > LARGEST_BYTES:
        raise RecordingError(
            f"{path.name}: the SCP-ECG file is larger than {LARGEST_BYTES // 10**6} MB, too "
            "much to hold in memory. Export a shorter stretch of it."
        )
    sections = read_sections(path.name, path.read_bytes())
    try:
        signals = read_signals(sections)
    except SignalError as error:
        raise RecordingError(
            f"{path.name}: the SCP-ECG file cannot be decoded: {error}. "
            "Export it again, with the rhythm uncompressed or losslessly compressed."
        ) from error
    header = sections.get(HEADER_SECTION)
    said = read_header(b"" if header is None else header.content)
    return assemble_recording(
        _channels(path.name, signals),
        sampling_rate_hz=signals.sampling_rate_hz,
        source=Source(path.name, FORMAT_NAME, sha256_of_files([path])),
        subject=said.subject,
        recorded_at=said.recorded_at,
        filters=said.filters,
    )


def _channels(name: str, signals: Signals) -> list[Channel]:
    """Leads in mV on one time axis, each once; NaN where a lead was not recorded."""
    n_samples = max(
        start + values.size for start, values in zip(signals.starts, signals.values, strict=True)
    )
    refuse_rate(name, signals.sampling_rate_hz)
    n_leads = len({lead_of_scp_number(number) for number in signals.lead_numbers})
    refuse_too_long(
        name,
        n_leads=max(n_leads, len(TWELVE_LEADS)),
        n_samples=n_samples,
        rate_hz=signals.sampling_rate_hz,
    )
    channels: dict[str, Channel] = {}
    for number, values, start, step_mv in zip(
        signals.lead_numbers, signals.values, signals.starts, signals.step_mv, strict=True
    ):
        found = lead_of_scp_number(number)
        if found is None or found[0] in channels:
            continue
        lead, sign = found
        samples_mv = np.full(n_samples, np.nan)
        samples_mv[start : start + values.size] = sign * step_mv * values
        channels[lead] = Channel(lead, samples_mv, 1.0 / step_mv)
    return list(channels.values())
