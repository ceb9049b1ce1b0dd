"""Where an EDF or BDF file holds what, checked against its size before anything is read.

A file is a header of 256 bytes, 256 more for each signal, then data records of equal length:
so many samples of the first signal, so many of the second, ... as signed little-endian numbers
of 16 bits (EDF: Kemp et al. 1992, Electroencephalogr Clin Neurophysiol 82:391; EDF+: Kemp &
Olivan 2003, Clin Neurophysiol 114:1755) or 24 bits (BDF, which is EDF otherwise). Header fields
are text of fixed width.
"""

from __future__ import annotations

import math
import re
from collections.abc import Iterator
from dataclasses import dataclass
from typing import BinaryIO

import numpy as np
from numpy.typing import NDArray

from core.errors import RecordingError

EDF_VERSION = b"0       "
BDF_VERSION = b"\xffBIOSEMI"
HEADER_BYTES = 256
BYTES_A_SIGNAL = 256
# Where the signals' own fields begin within their part of the header, in bytes a signal.
_SAMPLES_AT = 216
_LABEL_WIDTH, _NUMBER_WIDTH = 16, 8
_N_RECORDS = slice(236, 244)
# EDF advises 61 440 bytes. A 10 s tracing in one record is common, an hour in one is not.
LARGEST_RECORD_BYTES = 32 << 20
BLOCK_BYTES = 4 << 20
# From one sample at the highest rate of an amplifier to more than a day.
PLAUSIBLE_RECORD_S = (1e-6, 1e5)
# The first annotation of a data record is empty and says when the record starts.
_ONSET = re.compile(rb"([+-]\d{1,12}(?:\.\d{0,12})?)(?:\x15[\d.]*)?\x14")


def looks_like_edf(start: bytes) -> bool:
    """Whether the first bytes of a file are the header of an EDF, EDF+ or BDF file."""
    if len(start) < HEADER_BYTES or start[:8] not in (EDF_VERSION, BDF_VERSION):
        return False
    header_bytes, n_signals = whole_number(start[184:192]), whole_number(start[252:256])
    return header_bytes is not None and n_signals is not None and header_bytes >= HEADER_BYTES


def whole_number(field: bytes) -> int | None:
    """The number in a header field; None where it holds anything else."""
    text = field.strip(b" \0")
    return int(text) if re.fullmatch(rb"[+-]?\d{1,8}", text) else None


@dataclass(frozen=True, slots=True)
class Layout:
    """The header and the measures of the data records behind it.

    Attributes
    ----------
    header : bytes
        As the file holds it, of all signals.
    samples : tuple of int
        Samples of every signal in a data record, annotation signals among them.
    record_s : float
    """

    header: bytes
    samples: tuple[int, ...]
    bytes_a_sample: int
    n_records: int
    record_s: float

    @property
    def kind(self) -> str:
        """``"EDF"`` or ``"BDF"``."""
        return "EDF" if self.bytes_a_sample == 2 else "BDF"

    @property
    def reserved(self) -> str:
        """The field that says ``"EDF+C"`` or ``"EDF+D"`` in an EDF+ file."""
        return self.header[192:236].decode("latin-1").strip(" \0")

    @property
    def is_plus(self) -> bool:
        """Whether the file keeps to EDF+ or BDF+."""
        return self.reserved.startswith(f"{self.kind}+")

    @property
    def is_interrupted(self) -> bool:
        """Whether time may pass between two data records."""
        return self.reserved.startswith(f"{self.kind}+D")

    @property
    def record_bytes(self) -> int:
        """Length of one data record."""
        return sum(self.samples) * self.bytes_a_sample

    def header_for(self, n_records: int) -> bytes:
        """The header, of so many data records; fields that were padded with zeros have spaces."""
        stated = str(n_records).encode().ljust(_NUMBER_WIDTH)
        header = self.header[: _N_RECORDS.start] + stated + self.header[_N_RECORDS.stop :]
        return header.replace(b"\0", b" ")

    def timekeeping_bytes(self) -> slice | None:
        """Where a data record says when it starts: its first annotation signal."""
        wanted = f"{self.kind} Annotations".encode()
        for signal in range(len(self.samples)):
            at = HEADER_BYTES + signal * _LABEL_WIDTH
            if self.header[at : at + _LABEL_WIDTH].rstrip(b" \0") == wanted:
                first = sum(self.samples[:signal]) * self.bytes_a_sample
                return slice(first, first + self.samples[signal] * self.bytes_a_sample)
        return None


def read_layout(name: str, file: BinaryIO, file_bytes: int) -> Layout:
    """The layout of a file that is open at its start.

    Raises
    ------
    RecordingError
        If a number in the header is none, or does not agree with the size of the file.
    """
    header = file.read(HEADER_BYTES)
    if len(header) < HEADER_BYTES or header[:8] not in (EDF_VERSION, BDF_VERSION):
        raise damaged(name, "it is cut off within its header, or is no EDF or BDF file")
    n_signals = whole_number(header[252:256])
    if n_signals is None or n_signals < 1:
        raise damaged(name, "it states no number of signals")
    header_bytes = HEADER_BYTES + BYTES_A_SIGNAL * n_signals
    if whole_number(header[184:192]) != header_bytes:
        raise damaged(name, f"its header is not as long as that of {n_signals} signals")
    header += file.read(header_bytes - HEADER_BYTES)
    if len(header) < header_bytes:
        raise damaged(name, "it is cut off within its header")
    layout = Layout(
        header=header,
        samples=_samples(name, header, n_signals),
        bytes_a_sample=2 if header[:8] == EDF_VERSION else 3,
        n_records=0,
        record_s=_record_duration(name, header),
    )
    return Layout(
        header=header,
        samples=layout.samples,
        bytes_a_sample=layout.bytes_a_sample,
        n_records=_n_records(name, layout, file_bytes - header_bytes),
        record_s=layout.record_s,
    )


def record_blocks(
    name: str, file: BinaryIO, layout: Layout, wanted: range | None = None
) -> Iterator[tuple[slice, bytes]]:
    """The data records, a few MB of them at a time, and which they are.

    Parameters
    ----------
    wanted : range, optional
        Consecutive records; all unless stated.

    Raises
    ------
    RecordingError
        If the file became shorter since its layout was read.
    """
    records = range(layout.n_records) if wanted is None else wanted
    at_once = max(1, BLOCK_BYTES // layout.record_bytes)
    file.seek(len(layout.header) + records.start * layout.record_bytes)
    for first in records[::at_once]:
        n = min(at_once, records.stop - first)
        data = file.read(n * layout.record_bytes)
        if len(data) < n * layout.record_bytes:
            raise damaged(name, "it became shorter while it was read")
        yield slice(first, first + n), data


def record_onsets_s(name: str, file: BinaryIO, layout: Layout) -> NDArray[np.float64]:
    """When each data record of an interrupted recording starts, as the record itself says.

    Returns
    -------
    ndarray, shape (n_records,)
        Seconds after the start time in the header.

    Raises
    ------
    RecordingError
        If a record does not say it.
    """
    where = layout.timekeeping_bytes()
    if where is None:
        raise damaged(name, f"it is {layout.kind}+ and holds no annotations to tell the time by")
    onsets_s = np.empty(layout.n_records)
    for records, data in record_blocks(name, file, layout):
        for number in range(records.start, records.stop):
            at = (number - records.start) * layout.record_bytes
            onset_s = _onset_s(data[at + where.start : at + where.stop])
            if onset_s is None:
                raise damaged(name, f"data record {number + 1} does not say when it starts")
            onsets_s[number] = onset_s
    return onsets_s


def first_onset_s(file: BinaryIO, layout: Layout) -> float:
    """What an uninterrupted EDF+ file adds to its start: a fraction of a second, if anything."""
    where = layout.timekeeping_bytes() if layout.is_plus else None
    if where is None:
        return 0.0
    file.seek(len(layout.header) + where.start)
    # The samples can be read without it.
    return _onset_s(file.read(where.stop - where.start)) or 0.0


def _onset_s(annotations: bytes) -> float | None:
    found = _ONSET.match(annotations)
    return None if found is None else float(found[1])


def damaged(name: str, what: str) -> RecordingError:
    """The refusal of a file that contradicts itself."""
    return RecordingError(
        f"{name}: the EDF or BDF file is damaged: {what}. Export it again from where it is stored."
    )


def _samples(name: str, header: bytes, n_signals: int) -> tuple[int, ...]:
    at = HEADER_BYTES + _SAMPLES_AT * n_signals
    samples = []
    for signal in range(n_signals):
        field = header[at + signal * _NUMBER_WIDTH : at + (signal + 1) * _NUMBER_WIDTH]
        number = whole_number(field)
        if number is None or number < 0:
            raise damaged(name, f"signal {signal + 1} states no number of samples")
        samples.append(number)
    return tuple(samples)


def _record_duration(name: str, header: bytes) -> float:
    try:
        duration_s = float(header[244:252].strip(b" \0"))
    except ValueError:
        duration_s = math.nan
    shortest_s, longest_s = PLAUSIBLE_RECORD_S
    if not shortest_s <= duration_s <= longest_s:
        raise damaged(name, "it does not say how long a data record lasts")
    return duration_s


def _n_records(name: str, layout: Layout, data_bytes: int) -> int:
    """Data records in the file, which its header must agree to unless it leaves them open."""
    if layout.record_bytes == 0:
        raise damaged(name, "its data records hold no samples")
    if layout.record_bytes > LARGEST_RECORD_BYTES:
        raise RecordingError(
            f"{name}: one data record of the file holds {layout.record_bytes / 1e6:.0f} MB, more "
            "than can be read at once. Export it again in records of 1 s."
        )
    held = data_bytes // layout.record_bytes
    stated = whole_number(layout.header[_N_RECORDS])
    # -1 stands in a file that was never closed.
    if stated not in (held, -1):
        states = "no number of" if stated is None else f"{stated}"
        raise damaged(name, f"it states {states} data records and holds {held}")
    if held == 0:
        raise RecordingError(f"{name}: the file holds no samples. Export the recording again.")
    return held
