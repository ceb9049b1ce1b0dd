"""HL7 annotated ECGs to recordings."""

from __future__ import annotations

import math
from pathlib import Path

from core.errors import RecordingError
from core.recordings.aecg.document import read_document
from core.recordings.aecg.errors import EXPORT_AGAIN, AecgError
from core.recordings.aecg.recognition import looks_like_aecg as looks_like_aecg
from core.recordings.aecg.sequences import LeadSet
from core.recordings.aecg.series import rhythm_of
from core.recordings.aecg.subject import filters_of, recorded_at_of, subject_of
from core.recordings.assemble import SAMPLING_RATE_RANGE_HZ, assemble_recording
from core.recordings.fingerprint import sha256_of_files
from core.recordings.leads import TWELVE_LEADS
from core.recordings.recording import Recording, Source
from core.recordings.refusing import refusing
from core.recordings.size_limit import refuse_too_long

FORMAT_NAME = "HL7 aECG"


def read_aecg(path: Path) -> Recording:
    """Read the rhythm of an annotated ECG.

    Parameters
    ----------
    path : Path
        XML in UTF-8, UTF-16 or an encoding of single bytes that it declares.

    Returns
    -------
    Recording
        Leads in mV. Leads of one series are joined where their sets begin at the same time; a
        lead that ends earlier has gaps (NaN).

    Raises
    ------
    RecordingError
        If the file is damaged, declares entities, is too large, states no unit of voltage or of
        time, or holds no original rhythm with twelve leads at once.
    OSError
        If the file cannot be opened.

    References
    ----------
    ANSI/HL7 V3 ECG, R1-2004: Annotated ECG.
    """
    name = path.name
    with refusing(RecordingError(f"{name}: the annotated ECG is damaged. {EXPORT_AGAIN}")):
        try:
            return _read(path)
        except AecgError as error:
            raise RecordingError(f"{name}: the annotated ECG {error.what}. {error.mend}") from error


def _read(path: Path) -> Recording:
    root = read_document(path)
    rhythm = rhythm_of(root)
    _refuse_length(path.name, rhythm.leads)
    recorded_at = recorded_at_of(root, rhythm.series)
    return assemble_recording(
        rhythm.leads.channels(),
        sampling_rate_hz=rhythm.leads.rate_hz,
        source=Source(path.name, FORMAT_NAME, sha256_of_files([path])),
        subject=subject_of(root, recorded_at),
        recorded_at=recorded_at,
        filters=filters_of(root, rhythm.series),
    )


def _refuse_length(name: str, held: LeadSet) -> None:
    """Refuse what would not fit, at the rate to which all leads will be brought."""
    leads = held.leads.values()
    # A lead of an impossible rate is refused by name, later.
    rate_hz = min(max((lead.rate_hz for lead in leads), default=1.0), SAMPLING_RATE_RANGE_HZ[1])
    longest_s = max((lead.duration_s for lead in leads), default=0.0)
    n_samples = math.ceil(longest_s * rate_hz)
    # Limb leads that are derived take as much memory as others.
    n_leads = max(len(leads), len(TWELVE_LEADS))
    refuse_too_long(name, n_leads=n_leads, n_samples=n_samples, rate_hz=rate_hz)
