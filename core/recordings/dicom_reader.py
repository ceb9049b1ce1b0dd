"""DICOM waveform objects, read through pydicom: 12-Lead, General and Ambulatory ECG.

pydicom is imported when a file is opened.
"""

from __future__ import annotations

import math
from contextlib import AbstractContextManager
from pathlib import Path

from core.errors import RecordingError
from core.recordings.assemble import assemble_recording, refuse_rate
from core.recordings.dicom_file import is_big_endian, read_dataset_of
from core.recordings.dicom_group import Group, read_group
from core.recordings.dicom_subject import electrode_placement_of, recorded_at_of, subject_of
from core.recordings.fingerprint import sha256_of_files
from core.recordings.held import Held
from core.recordings.leads import TWELVE_LEADS
from core.recordings.quietly import quietly
from core.recordings.recording import Recording, Source
from core.recordings.refusing import refusing
from core.recordings.shown import shown

FORMAT_NAME = "DICOM"


def looks_like_dicom(start: bytes) -> bool:
    """Whether the first bytes of a file are those of a DICOM file."""
    return start[128:132] == b"DICM"


def open_dicom(path: Path) -> Held:
    """The rhythm group of a DICOM ECG waveform object.

    Raises
    ------
    RecordingError
        If the object is damaged, too large or no ECG waveform, or no group holds twelve leads at
        once.
    OSError
        If the file cannot be opened.
    """
    # pydicom warns of much that it mends, or that is refused
    with _guarded(path.name), quietly():
        return _held(path)


def _guarded(name: str) -> AbstractContextManager[None]:
    return refusing(
        RecordingError(
            f"{name}: the DICOM file is damaged. Export it again from where it is stored."
        )
    )


def _held(path: Path) -> Held:
    name = path.name
    dataset = read_dataset_of(path)
    items = dataset.get("WaveformSequence") or []
    big_endian = is_big_endian(dataset)
    groups = [
        read_group(name, item, number, big_endian=big_endian)
        for number, item in enumerate(items, 1)
    ]
    if not groups:
        kind = shown(str(dataset.get("Modality") or "")) or "no modality"
        raise RecordingError(
            f"{name}: this DICOM object ({kind}) holds no waveform. Choose the ECG waveform object."
        )
    subject, recorded_at = subject_of(dataset), recorded_at_of(dataset)
    group = _rhythm_group(name, groups)
    rate_hz = group.sampling_rate_hz
    source = Source(name, FORMAT_NAME, sha256_of_files([path]))
    placement = electrode_placement_of(dataset)

    def between(start_s: float, stop_s: float) -> Recording:
        first, last = round(start_s * rate_hz), math.ceil(stop_s * rate_hz - 0.5)
        with _guarded(name):
            channels = group.channels(first, last)
        return assemble_recording(
            channels,
            sampling_rate_hz=rate_hz,
            source=source,
            subject=subject,
            recorded_at=recorded_at,
            filters=group.filters,
            electrode_placement=placement,
            start_s=start_s,
        )

    further = len(set(group.leads) - set(TWELVE_LEADS))
    return Held(name, group.duration_s, len(TWELVE_LEADS) + further, rate_hz, between)


def _rhythm_group(name: str, groups: list[Group]) -> Group:
    """The longest group recorded as such that holds a 12-lead ECG.

    Leads spread over several groups are joined where the groups were recorded at once. A
    derived group (a representative beat) is never taken for the rhythm.
    """
    joined: list[Group] = []
    for group in groups:
        partner = next((j for j in joined if j.simultaneous_with(group)), None)
        if partner is None:
            joined.append(group)
        else:
            for lead, scaling in group.leads.items():
                partner.leads.setdefault(lead, scaling)
    usable = [group for group in joined if group.complete and group.original]
    for group in usable:
        refuse_rate(name, group.sampling_rate_hz)
    if usable:
        return max(usable, key=lambda group: group.duration_s)
    if any(group.complete for group in joined):
        raise RecordingError(
            f"{name}: the file holds only a derived beat, no rhythm. "
            "Export the object with its rhythm waveform."
        )
    found = sorted({lead for group in joined for lead in group.leads})
    raise RecordingError(
        f"{name}: no waveform group of the file holds V1 to V6 and two limb leads recorded "
        f"together (leads found: {', '.join(found) or 'none'}). Choose a 12-lead recording."
    )
