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
from core.recordings.comments import Comments
from core.recordings.fingerprint import sha256_of_files
from core.recordings.held import Held, held_in_memory
from core.recordings.leads import TWELVE_LEADS, lead_of_label
from core.recordings.quietly import quietly
from core.recordings.recording import Recording, Source
from core.recordings.refusing import refusing
from core.recordings.shown import shown
from core.recordings.units import MILLIVOLTS_PER_UNIT
from core.recordings.wfdb_claims import parts_of, refuse_claims
from core.recordings.wfdb_files import files_of_record

FORMAT_NAME = "WFDB"

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
        If the header cannot be read, a signal file is missing or shorter than the header says,
        or it contradicts itself.
    OSError
        If a file cannot be opened.
    """
    # The wfdb package takes names, so the header must end in .hea.
    if header_path.suffix != ".hea":
        raise RecordingError(
            f"{header_path.name}: this is a WFDB header without the ending .hea. Rename it."
        )
    paths = files_of_record(header_path)
    stem = header_path.with_suffix("")
    header = _header(header_path, paths)
    rate_hz = float(header.fs)
    source = Source(stem.name, FORMAT_NAME, sha256_of_files(paths))

    def read(first: int, last: int | None, start_s: float) -> Recording:
        said = Comments(header.comments or [])
        return assemble_recording(
            _read(header_path, first, last),
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

    def between(start_s: float, stop_s: float) -> Recording:
        first = min(round(start_s * rate_hz), n_samples - 1)
        return read(first, min(max(round(stop_s * rate_hz), first + 1), n_samples), start_s)

    return Held(
        name=stem.name,
        duration_s=n_samples / rate_hz,
        n_leads=max(int(header.n_sig or 0), len(TWELVE_LEADS)),
        sampling_rate_hz=rate_hz * _most_samples_a_frame(header),
        between=between,
    )


def _header(header_path: Path, paths: list[Path]) -> Any:
    import wfdb

    with refusing(_unreadable(header_path)), quietly():
        header: Any = wfdb.rdheader(str(header_path.with_suffix("")), rd_segments=True)
        refuse_claims(header_path.name, header, paths)
    return header


def _read(header_path: Path, first: int, last: int | None) -> list[Channel]:
    """The leads from one sample up to another."""
    import wfdb

    with refusing(_unreadable(header_path)), quietly():
        record: Any = wfdb.rdrecord(
            str(header_path.with_suffix("")),
            sampfrom=first,
            sampto=last,
            physical=True,
            smooth_frames=False,  # leads keep their own rates
        )
        return list(_channels(header_path.name, record))


def _unreadable(header_path: Path) -> RecordingError:
    return RecordingError(
        f"{header_path.name}: the signals cannot be read as the WFDB header describes them. "
        "Copy the whole record again, header and signal files, or export it again."
    )


def _most_samples_a_frame(header: Any) -> int:
    numbers = [number or 1 for part in parts_of(header) for number in part.samps_per_frame or []]
    return max(numbers, default=1)


def _channels(name: str, record: Any) -> Iterable[Channel]:
    signals = record.e_p_signal or []
    # Segments that state different ones leave none for the whole.
    unstated = [None] * len(signals)
    for samples, label, unit, gain, a_frame in zip(
        signals,
        record.sig_name,
        record.units or unstated,
        record.adc_gain or unstated,
        record.samps_per_frame or unstated,
        strict=True,
    ):
        found = lead_of_label(label or "")
        if found is None:
            continue
        lead, sign = found
        factor = MILLIVOLTS_PER_UNIT.get((unit or "").strip().lower())
        if factor is None:
            stated = (
                f"in the unit '{shown(unit)}', which is no voltage"
                if unit
                else "without a unit, or in several"
            )
            raise RecordingError(
                f"{name}: lead {lead} is {stated}. "
                "Export the record in mV, with the unit in its header."
            )
        samples_mv = np.asarray(samples, dtype=np.float64)
        if factor != 1.0 or sign != 1.0:
            samples_mv = samples_mv * (factor * sign)
        step = abs(float(gain)) / factor if gain else float("nan")
        counts_per_mv = step if np.isfinite(step) and step > 0 else 1000.0
        yield Channel(lead, samples_mv, counts_per_mv, float(record.fs) * (a_frame or 1))
