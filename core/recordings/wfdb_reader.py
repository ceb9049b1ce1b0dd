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
from core.recordings.comments import Comments
from core.recordings.fingerprint import sha256_of_files
from core.recordings.held import Held, held_in_memory
from core.recordings.leads import TWELVE_LEADS, lead_of_label
from core.recordings.recording import Recording, Source
from core.recordings.units import MILLIVOLTS_PER_UNIT

FORMAT_NAME = "WFDB"
# Formats that wfdb stores compressed (FLAC); in all others a sample takes a byte or more.
FLAC_FORMATS = ("508", "516", "524")
# A frame of a FLAC stream holds at most 65 535 samples in no fewer than 10 bytes.
MOST_SAMPLES_A_FLAC_BYTE = 6554

# First line of a header: record name (with its number of segments), number of signals, ...
_RECORD_LINE = re.compile(rb"^[^\s/]+(?:/\d+)?[ \t]+\d+(?:[ \t]|$)")


def looks_like_wfdb_header(start: bytes) -> bool:
    """Whether the first bytes of a file are those of a WFDB header."""
    for line in start.splitlines():
        if line.strip() and not line.startswith(b"#"):
            return _RECORD_LINE.match(line) is not None
    return False


def open_wfdb(header_path: Path) -> Held:
    """The WFDB record whose header is *header_path*.

    Raises
    ------
    RecordingError
        If the header cannot be read or a signal file is missing.
    """
    # The wfdb package takes names, so the header must end in .hea.
    if header_path.suffix != ".hea":
        raise RecordingError(
            f"{header_path.name}: this is a WFDB header without the ending .hea. Rename it."
        )
    import wfdb

    stem = header_path.with_suffix("")
    try:
        header: Any = wfdb.rdheader(str(stem), rd_segments=True)
        n_signals, rate_hz = int(header.n_sig or 0), float(header.fs or 0.0)
    except Exception as error:  # any kind: the parser meets bytes that nobody has checked
        raise RecordingError(
            f"{header_path.name}: the WFDB header cannot be read ({_first_line(error)}). "
            "Export the recording again."
        ) from error
    signal_paths = _signal_paths(header_path, header)
    source = Source(stem.name, FORMAT_NAME, sha256_of_files([header_path, *signal_paths]))

    def read(first: int, last: int | None, start_s: float) -> Recording:
        record = _read(header_path, first, last)
        channels = list(_channels(stem.name, record))
        said = Comments(record.comments or [])
        return assemble_recording(
            channels,
            sampling_rate_hz=rate_hz,
            source=source,
            subject=said.subject(header.base_datetime),
            recorded_at=header.base_datetime,
            filters=said.filters,
            electrode_placement=said.electrode_placement,
            start_s=start_s,
        )

    if not header.sig_len:  # the files' own lengths decide
        return held_in_memory(read(0, None, 0.0))
    n_samples = int(header.sig_len)
    refuse_rate(stem.name, rate_hz)
    _refuse_claims(header_path, header)

    def between(start_s: float, stop_s: float) -> Recording:
        first = min(round(start_s * rate_hz), n_samples - 1)
        return read(first, min(max(round(stop_s * rate_hz), first + 1), n_samples), start_s)

    return Held(
        name=stem.name,
        duration_s=n_samples / rate_hz,
        n_leads=max(n_signals, len(TWELVE_LEADS)),
        sampling_rate_hz=rate_hz * _most_samples_a_frame(header),
        between=between,
    )


def _read(header_path: Path, first: int, last: int | None) -> Any:
    """The samples from one up to another, by the wfdb package."""
    import wfdb

    try:
        record: Any = wfdb.rdrecord(
            str(header_path.with_suffix("")),
            sampfrom=first,
            sampto=last,
            physical=True,
            smooth_frames=False,  # leads keep their own rates
        )
    except Exception as error:  # any kind: the parser meets bytes that nobody has checked
        raise RecordingError(
            f"{header_path.name}: the signals cannot be read as the header describes them "
            f"({_first_line(error)}). Copy the whole record again, header and signal files."
        ) from error
    if not record.e_p_signal:
        raise RecordingError(f"{header_path.name}: the record holds no signals. Choose another.")
    return record


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


def _parts(header: Any) -> list[Any]:
    """The record itself, or its segments; None stands for a gap."""
    return getattr(header, "segments", None) or [header]


def _most_samples_a_frame(header: Any) -> int:
    return max(
        (int(n) for part in _parts(header) if part for n in part.samps_per_frame or []), default=1
    )


def _refuse_claims(header_path: Path, header: Any) -> None:
    """Refuse a header that states more samples than its signal files can hold."""
    for part in _parts(header):
        if part is None or not part.sig_len:
            continue
        for name, form in zip(part.file_name or [], part.fmt or [], strict=False):
            held = header_path.with_name(name).stat().st_size if name != "~" else part.sig_len
            most = held * (MOST_SAMPLES_A_FLAC_BYTE if form in FLAC_FORMATS else 1)
            if part.sig_len > most:
                raise RecordingError(
                    f"{header_path.name}: the header states {part.sig_len} samples, and {name} "
                    f"holds {held} bytes. Copy the whole record again, header and signal files."
                )
    in_gaps = header.sig_len - sum(part.sig_len or 0 for part in _parts(header) if part)
    if in_gaps > header.sig_len / 2:
        raise RecordingError(
            f"{header_path.name}: more of the record is missing than was recorded. Export one "
            "uninterrupted stretch of it."
        )


def _channels(name: str, record: Any) -> Iterable[Channel]:
    gains = record.adc_gain or [float("nan")] * record.n_sig
    frames = record.samps_per_frame or [1] * record.n_sig
    for samples, label, unit, gain, a_frame in zip(
        record.e_p_signal, record.sig_name, record.units, gains, frames, strict=True
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
        samples_mv = np.asarray(samples, dtype=np.float64)
        if factor != 1.0 or sign != 1.0:
            samples_mv = samples_mv * (factor * sign)
        step = abs(float(gain)) / factor if gain else float("nan")
        counts_per_mv = step if np.isfinite(step) and step > 0 else 1000.0
        yield Channel(lead, samples_mv, counts_per_mv, float(record.fs) * (a_frame or 1))


def _first_line(error: Exception) -> str:
    text = str(error).strip().splitlines()
    return text[0].rstrip(".")[:160] if text else type(error).__name__
