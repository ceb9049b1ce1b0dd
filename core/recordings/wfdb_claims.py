"""What a WFDB header claims, held against its signal files before the wfdb package makes room."""

from __future__ import annotations

import math
from pathlib import Path
from typing import Any

from core.errors import RecordingError
from core.recordings.assemble import refuse_rate
from core.recordings.shown import shown
from core.recordings.size_limit import refuse_too_long
from core.recordings.wfdb_files import NO_FILE

# By storage form; what compressed forms take differs from sample to sample.
_BYTES_A_SAMPLE = dict.fromkeys(("8", "80"), 1.0) | dict.fromkeys(("16", "61", "160"), 2.0)
_BYTES_A_SAMPLE |= {"24": 3.0, "32": 4.0, "212": 1.5, "310": 4 / 3, "311": 4 / 3}
# Losslessly compressed (FLAC), a moving ECG takes some bits a sample (common practice, no source);
# flat lines alone take a thousandth of that, and a small file of them would be hours of reading.
MOST_SAMPLES_A_FLAC_BYTE = 50


def parts_of(header: Any) -> list[Any]:
    """The record itself, or its segments without the gaps between them."""
    segments = getattr(header, "segments", None) or [header]
    return [part for part in segments if part is not None]


def samples_a_frame(part: Any) -> int:
    """Samples of all signals in one frame."""
    return sum(number or 1 for number in part.samps_per_frame or [])


def refuse_claims(name: str, header: Any, paths: list[Path]) -> None:
    """Refuse a header that contradicts itself, or states more than its signal files hold.

    Raises
    ------
    RecordingError
        If a rate is impossible or differs between segments, a signal file is cut off, more of
        the record is missing than recorded, or one that states no length is too long for memory.
    """
    refuse_rate(name, float(header.fs))
    sizes = {path.name: path.stat().st_size for path in paths}
    for part in parts_of(header):
        if float(part.fs) != float(header.fs):
            raise RecordingError(
                f"{name}: segment {shown(part.record_name)} states {part.fs:g} samples a second "
                f"and the record {header.fs:g}. Export the record again at one rate."
            )
        _refuse_skew(name, header, part)
        if part.sig_len:
            _refuse_cut_off(name, part, sizes)
        else:
            _refuse_unstated_length(name, header, part, sizes)
    if header.sig_len:
        _refuse_gaps(name, header)


def _refuse_skew(name: str, header: Any, part: Any) -> None:
    skew = max((number or 0 for number in part.skew or []), default=0)
    n_leads = max(samples_a_frame(part), 1)
    refuse_too_long(name, n_leads=n_leads, n_samples=skew, rate_hz=float(header.fs))


def _refuse_cut_off(name: str, part: Any, sizes: dict[str, int]) -> None:
    needed: dict[str, float] = {}
    compressed: set[str] = set()
    for file_name, form, number, offset in zip(
        part.file_name, part.fmt, part.samps_per_frame, part.byte_offset, strict=True
    ):
        if file_name == NO_FILE:
            continue
        begun = needed.get(file_name, float(offset or 0))
        a_sample = _BYTES_A_SAMPLE.get(form, 1 / MOST_SAMPLES_A_FLAC_BYTE)
        if form not in _BYTES_A_SAMPLE:
            compressed.add(file_name)
        needed[file_name] = begun + part.sig_len * (number or 1) * a_sample
    for file_name, n_bytes in needed.items():
        # Samples that share bytes may end within one.
        if sizes[file_name] < math.floor(n_bytes):
            flat = ", or holds flat lines alone" if file_name in compressed else ""
            raise RecordingError(
                f"{name}: the signal file {shown(file_name)} holds {sizes[file_name]} bytes and "
                f"the header states samples of {math.floor(n_bytes)}; it is cut off{flat}. Copy "
                "the whole record again, header and signal files."
            )


def _refuse_unstated_length(name: str, header: Any, part: Any, sizes: dict[str, int]) -> None:
    """Refuse as many samples as the files can hold at most."""
    smallest = min((_BYTES_A_SAMPLE.get(form, 2.0) for form in part.fmt or []), default=2.0)
    a_frame = max(samples_a_frame(part), 1)
    n_samples = int(sum(sizes.values()) / smallest / a_frame)
    n_leads = max(a_frame, header.n_sig, 1)
    refuse_too_long(name, n_leads=n_leads, n_samples=n_samples, rate_hz=float(header.fs))


def _refuse_gaps(name: str, header: Any) -> None:
    recorded = sum(part.sig_len or 0 for part in parts_of(header))
    if recorded < header.sig_len / 2:
        raise RecordingError(
            f"{name}: more of the record is missing than was recorded. Export one uninterrupted "
            "stretch of it."
        )
