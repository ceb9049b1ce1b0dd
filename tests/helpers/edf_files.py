"""EDF and BDF files built byte by byte from their layout, apart from edfio and the reader.

256 bytes of header: version (8), patient (80), recording (80), date (8), time (8), header bytes
(8), reserved (44), number of data records (8), duration of one in s (8), number of signals (4).
Then for all signals their labels (16 each), transducers (80), units (8), physical minimum (8) and
maximum (8), digital minimum (8) and maximum (8), filters (80), samples a record (8), reserved (32).
Then the data records: each signal's samples in turn, little-endian, 2 bytes (EDF) or 3 (BDF).
"""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import dataclass, field

import numpy as np
from numpy.typing import NDArray

EDF, BDF = b"0       ", b"\xffBIOSEMI"
EIGHT = ["I", "II", "V1", "V2", "V3", "V4", "V5", "V6"]


@dataclass
class Signal:
    """One signal; ``records`` has a row of whole numbers for each data record."""

    label: str
    records: NDArray[np.int64]
    unit: str | bytes = "uV"
    physical: tuple[object, object] = (-3276.8, 3276.7)
    digital: tuple[object, object] = (-32768, 32767)
    filters: str = ""


@dataclass
class Annotations:
    """An annotation signal: for each data record its bytes, padded with zeros."""

    texts: Sequence[bytes]
    width: int = 30
    label: str = field(default="EDF Annotations")


def starts(times_s: Sequence[object]) -> Annotations:
    """Annotations that say no more than when each record starts: ``+12.5 <20> <20> <0>``."""
    return Annotations([f"+{time}".encode() + b"\x14\x14\0" for time in times_s])


def counts(n_records: int = 4, a_record: int = 500, seed: int = 2) -> NDArray[np.int64]:
    """Eight leads of whole numbers, shape (8, n_records, a_record)."""
    return np.random.default_rng(seed).integers(-20000, 20000, (8, n_records, a_record))


def signals(values: NDArray[np.int64], leads: list[str] = EIGHT, **said: object) -> list[Signal]:
    return [Signal(lead, records, **said) for lead, records in zip(leads, values, strict=True)]


def edf_bytes(
    signals: Sequence[Signal | Annotations],
    *,
    version: bytes = EDF,
    patient: str = "X X X X",
    recording: str = "Startdate X X X X",
    date: str = "01.01.85",
    time: str = "00.00.00",
    reserved: str = "",
    record_s: object = 1,
    n_records: object = None,
    n_signals: object = None,
    header_bytes: object = None,
) -> bytes:
    """A whole file; what the header states may be given to contradict what follows."""
    size = 2 if version == EDF else 3
    held = [len(s.texts) if isinstance(s, Annotations) else s.records.shape[0] for s in signals]
    if n_records is None:
        n_records = held[0]
    header = version + _field(patient, 80) + _field(recording, 80) + _field(date, 8)
    header += _field(time, 8)
    header += _field(256 * (1 + len(signals)) if header_bytes is None else header_bytes, 8)
    header += _field(reserved, 44) + _field(n_records, 8) + _field(record_s, 8)
    header += _field(len(signals) if n_signals is None else n_signals, 4)
    rows = [_signal_fields(signal, size) for signal in signals]
    for column in zip(*rows, strict=True):
        header += b"".join(column)
    body = b"".join(
        _record(signal, number, size) for number in range(held[0]) for signal in signals
    )
    return header + body


def small_file(version: bytes, reserved: str) -> bytes:
    """Eight leads in three data records, the third of them late where the file is EDF+D."""
    kind = "EDF" if version == EDF else "BDF"
    told = starts([0, 1, 2.5])
    told.label = f"{kind} Annotations"
    return edf_bytes(
        [*signals(counts(3, 120)), told],
        version=version,
        reserved=reserved.replace("EDF", kind),
        patient="P-9 F 09-MAR-1950 Invented_Ash",
        recording="Startdate 12-NOV-2031 X X X",
    )


def _field(value: object, width: int) -> bytes:
    raw = value if isinstance(value, bytes) else str(value).encode("latin-1")
    return raw[:width].ljust(width)


def _signal_fields(signal: Signal | Annotations, size: int) -> list[bytes]:
    widths = (16, 80, 8, 8, 8, 8, 8, 80, 8, 32)
    if isinstance(signal, Annotations):
        said = [signal.label, "", "", -1, 1, -32768, 32767, "", signal.width // size, ""]
    else:
        said = [signal.label, "", signal.unit, *signal.physical, *signal.digital, signal.filters]
        said += [signal.records.shape[1], ""]
    return [_field(value, width) for value, width in zip(said, widths, strict=True)]


def _record(signal: Signal | Annotations, number: int, size: int) -> bytes:
    if isinstance(signal, Annotations):
        return signal.texts[number].ljust(signal.width // size * size, b"\0")
    return b"".join(
        (int(value) % (1 << 8 * size)).to_bytes(size, "little") for value in signal.records[number]
    )
