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
from core.recordings.assemble import Channel, assemble_recording
from core.recordings.fingerprint import sha256_of_files
from core.recordings.leads import lead_of_label
from core.recordings.recording import Recording, Source
from core.recordings.subject_words import subject_of_comments
from core.recordings.units import MILLIVOLTS_PER_UNIT

FORMAT_NAME = "WFDB"

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
        or the leads are not those of a 12-lead ECG.
    """
    # The wfdb package takes names, so the header must end in .hea.
    if header_path.suffix != ".hea":
        raise RecordingError(
            f"{header_path.name}: this is a WFDB header without the ending .hea. Rename it."
        )
    import wfdb

    stem = header_path.with_suffix("")
    name = stem.name
    try:
        header: Any = wfdb.rdheader(str(stem), rd_segments=True)
    except Exception as error:  # any kind: the parser meets bytes that nobody has checked
        raise RecordingError(
            f"{header_path.name}: the WFDB header cannot be read ({_first_line(error)}). "
            "Export the recording again."
        ) from error
    signal_paths = _signal_paths(header_path, header)
    try:
        record: Any = wfdb.rdrecord(str(stem), physical=True)
    except Exception as error:  # as above
        raise RecordingError(
            f"{header_path.name}: the signals cannot be read as the header describes them "
            f"({_first_line(error)}). Copy the whole record again, header and signal files."
        ) from error
    if record.p_signal is None or record.fs is None:
        raise RecordingError(f"{header_path.name}: the record holds no signals. Choose another.")
    return assemble_recording(
        list(_channels(name, record)),
        sampling_rate_hz=float(record.fs),
        source=Source(name, FORMAT_NAME, sha256_of_files([header_path, *signal_paths])),
        subject=subject_of_comments(record.comments or []),
        recorded_at=record.base_datetime,
    )


def _signal_paths(header_path: Path, header: Any) -> list[Path]:
    """Files that the header names, each once, in its order; all must lie beside the header.

    The names are plain: the wfdb package refuses a header whose file names hold a path.
    """
    names: list[str] = []
    for part in [header, *(getattr(header, "segments", None) or [])]:
        names += getattr(part, "file_name", None) or []
    paths = []
    for name in dict.fromkeys(name for name in names if name and name != "~"):
        path = header_path.with_name(name)
        if not path.is_file():
            raise RecordingError(
                f"{header_path.name}: the signal file {name} is not beside the header. "
                "Copy it into the same folder."
            )
        paths.append(path)
    return paths


def _channels(name: str, record: Any) -> Iterable[Channel]:
    gains = record.adc_gain or [float("nan")] * record.n_sig
    for column, (label, unit, gain) in enumerate(
        zip(record.sig_name, record.units, gains, strict=True)
    ):
        found = lead_of_label(label or "")
        if found is None:
            continue
        lead, sign = found
        factor = MILLIVOLTS_PER_UNIT.get((unit or "").strip().lower())
        if factor is None:
            raise RecordingError(
                f"{name}: lead {lead} is in the unit '{unit}', which is no voltage. "
                "Write the record in mV."
            )
        samples_mv = np.asarray(record.p_signal[:, column], dtype=np.float64)
        if factor != 1.0 or sign != 1.0:
            samples_mv = samples_mv * (factor * sign)
        step = abs(float(gain)) / factor if gain else float("nan")
        yield Channel(lead, samples_mv, step if np.isfinite(step) and step > 0 else 1000.0)


def _first_line(error: Exception) -> str:
    text = str(error).strip().splitlines()
    return text[0].rstrip(".")[:160] if text else type(error).__name__
