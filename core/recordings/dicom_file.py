"""The data set of a DICOM file, within bounds."""

from __future__ import annotations

import io
import zlib
from pathlib import Path
from typing import Any

from core.errors import RecordingError

# Two days of twelve leads at 250 Hz in 16 bits; a file is held in memory while it is read.
LARGEST_BYTES = 1_100_000_000
# 42 minutes of twelve leads at 500 Hz in 32 bits, and room for the rest.
LARGEST_INFLATED_BYTES = 100_000_000
_PREAMBLE_BYTES = 132
_META_GROUP = 2


def read_dataset_of(path: Path) -> Any:
    """The data set without its pixels.

    A deflated one is inflated here: pydicom would make room for whatever comes out, a thousand
    times the file.

    Raises
    ------
    RecordingError
        If the file is larger than `LARGEST_BYTES`, or than `LARGEST_INFLATED_BYTES` once unpacked.
    Exception
        Of any kind, if the file is damaged.
    """
    import pydicom
    from pydicom.filereader import read_file_meta_info
    from pydicom.uid import DeflatedExplicitVRLittleEndian

    if path.stat().st_size > LARGEST_BYTES:
        raise _too_large(path.name, LARGEST_BYTES)
    # Read as dcmread reads it, so that the two cannot disagree.
    syntax = read_file_meta_info(path).get("TransferSyntaxUID")
    if syntax == DeflatedExplicitVRLittleEndian:
        return _inflated(path)
    return pydicom.dcmread(path, stop_before_pixels=True)


def is_big_endian(dataset: Any) -> bool:
    """Whether numbers were written with their high byte first: a syntax retired in 2006."""
    from pydicom.uid import ExplicitVRBigEndian

    meta = getattr(dataset, "file_meta", None)
    return meta is not None and meta.get("TransferSyntaxUID") == ExplicitVRBigEndian


def _inflated(path: Path) -> Any:
    from pydicom.filereader import read_dataset

    with path.open("rb") as file:
        file.seek(_PREAMBLE_BYTES)
        read_dataset(file, False, True, stop_when=_ends_meta)
        whole = zlib.decompressobj(-zlib.MAX_WBITS).decompress(
            file.read(), LARGEST_INFLATED_BYTES + 1
        )
    if len(whole) > LARGEST_INFLATED_BYTES:
        raise _too_large(path.name, LARGEST_INFLATED_BYTES)
    return read_dataset(io.BytesIO(whole), False, True)


def _ends_meta(tag: Any, _vr: str | None, _length: int) -> bool:
    return bool(tag.group != _META_GROUP)


def _too_large(name: str, most_bytes: int) -> RecordingError:
    return RecordingError(
        f"{name}: the DICOM object holds more than {most_bytes // 10**6} MB, which is too much to "
        "hold in memory. Choose the ECG waveform object, or export some hours of it."
    )
