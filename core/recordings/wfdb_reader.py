"""WFDB records, read through the wfdb package.

wfdb is imported when a record is opened: its import costs more than reading one.
"""

from __future__ import annotations

import re
from collections.abc import Iterable
from pathlib import Path
from typing import Any

import numpy as np

from core.errors import RecordingError
from core.recordings.assemble import Channel, assemble_recording, refuse_rate
from core.recordings.fingerprint import sha256_of_files
from core.recordings.leads import lead_of_label
from core.recordings.quietly import quietly
from core.recordings.recording import Recording, Source
from core.recordings.shown import shown
from core.recordings.size_limit import refuse_too_long
from core.recordings.subject_words import subject_of_comments
from core.recordings.units import MILLIVOLTS_PER_UNIT
from core.recordings.wfdb_files import files_of_record

FORMAT_NAME = "WFDB"

# Of the storage forms that take more or less than two; compressed ones must state their length.
_BYTES_A_SAMPLE = {"8": 1, "80": 1, "212": 1.5, "310": 4 / 3, "311": 4 / 3, "24": 3, "32": 4}
# First line of a header: record name (with its number of segments), number of signals, ...
_RECORD_LINE = re.compile(rb"^[^\s/]+(?:/\d+)?[ \t]+\d+(?:[ \t]|$)")


def looks_like_wfdb_header(start: bytes) -> bool:
    """Whether the first bytes of a file are those of a WFDB header."""
    for line in start.splitlines():
        if line.strip() and not line.startswith(b"#"):
            return _RECORD_LINE.match(line) is not None
    return False


def read_wfdb(header_path: Path) -> Recording:
    """Read the WFDB record whose header is *header_path*.

    Raises
    ------
    RecordingError
        If the header cannot be read, a signal file is missing or shorter than the header says,
        it claims more than fits into memory, or the leads are not those of a 12-lead ECG.
    OSError
        If a file cannot be opened.
    """
    # The wfdb package takes names, so the header must end in .hea.
    if header_path.suffix != ".hea":
        raise RecordingError(
            f"{header_path.name}: this is a WFDB header without the ending .hea. Rename it."
        )
    name = header_path.name
    paths = files_of_record(header_path)
    import wfdb

    stem = header_path.with_suffix("")
    try:
        with quietly():
            header: Any = wfdb.rdheader(str(stem), rd_segments=True)
        _refuse_size(name, header, paths)
        with quietly():
            record: Any = wfdb.rdrecord(str(stem), physical=True)
        channels = list(_channels(name, record))
    except (RecordingError, OSError, MemoryError):
        raise
    except Exception as error:  # any kind: the parser meets bytes that nobody has checked
        raise RecordingError(
            f"{name}: the signals cannot be read as the WFDB header describes them. "
            "Copy the whole record again, header and signal files, or export it again."
        ) from error
    return assemble_recording(
        channels,
        sampling_rate_hz=float(record.fs),
        source=Source(stem.name, FORMAT_NAME, sha256_of_files(paths)),
        subject=subject_of_comments(record.comments or []),
        recorded_at=record.base_datetime,
    )


def _refuse_size(name: str, header: Any, paths: list[Path]) -> None:
    """Refuse what would not fit: the wfdb package makes room for all that a header claims."""
    refuse_rate(name, float(header.fs))
    segments = [part for part in getattr(header, "segments", None) or [header] if part is not None]
    for part in segments:
        if float(part.fs) != float(header.fs):
            raise RecordingError(
                f"{name}: segment {shown(part.record_name)} states {part.fs:g} samples a second "
                f"and the record {header.fs:g}. Export the record again at one rate."
            )
    n_frames = max([header.sig_len or 0, sum(getattr(header, "seg_len", None) or [])])
    for part in segments:
        a_frame = sum(number or 1 for number in part.samps_per_frame or [])
        skew = max((number or 0 for number in part.skew or []), default=0)
        held = part.sig_len or 0
        if part.sig_len is None:
            # As many as the files can hold.
            smallest = min((_BYTES_A_SAMPLE.get(form, 2.0) for form in part.fmt or []), default=2)
            held = int(sum(path.stat().st_size for path in paths) / smallest / max(a_frame, 1))
        refuse_too_long(
            name,
            n_leads=max(a_frame, header.n_sig, 1),
            n_samples=max(held, n_frames) + skew,
            rate_hz=float(header.fs),
        )


def _channels(name: str, record: Any) -> Iterable[Channel]:
    n_sig = record.p_signal.shape[1]
    # Segments that state different ones leave none for the whole.
    gains = record.adc_gain or [None] * n_sig
    units = record.units or [None] * n_sig
    for column, (label, unit, gain) in enumerate(zip(record.sig_name, units, gains, strict=True)):
        found = lead_of_label(label or "")
        if found is None:
            continue
        lead, sign = found
        factor = MILLIVOLTS_PER_UNIT.get((unit or "").strip().lower())
        if factor is None:
            stated = (
                f"in the unit '{shown(unit)}', which is no voltage" if unit else "in no one unit"
            )
            raise RecordingError(
                f"{name}: lead {lead} is {stated}. "
                "Export the record in mV, with the unit in its header."
            )
        samples_mv = np.asarray(record.p_signal[:, column], dtype=np.float64)
        if factor != 1.0 or sign != 1.0:
            samples_mv = samples_mv * (factor * sign)
        step = abs(float(gain)) / factor if gain else float("nan")
        yield Channel(lead, samples_mv, step if np.isfinite(step) and step > 0 else 1000.0)
