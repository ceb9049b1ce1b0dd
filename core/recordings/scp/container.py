"""The container of an SCP-ECG record: its checksum, its sections and their pointers.

A record is a checksum (CRC-16, polynomial 0x1021, start 0xFFFF), its length, and sections of
a 16-byte header and content each; section 0 points to the others (EN 1064, 5.2 to 5.4).
"""

from __future__ import annotations

import binascii
import struct
from dataclasses import dataclass

from core.errors import RecordingError

SECTION_HEADER_BYTES = 16
POINTER_BYTES = 10
MOST_SECTIONS = 64
# 42 minutes of twelve leads at 500 Hz in 16 bits are 30 MB.
LARGEST_BYTES = 50_000_000
_PROTOCOL_BYTE = 9
_RECORD_HEADER_BYTES = 6


@dataclass(frozen=True, slots=True)
class Section:
    """One section: its number, protocol version and content without the header."""

    number: int
    protocol: int
    content: bytes


def looks_like_scp(start: bytes) -> bool:
    """Whether the first bytes of a file are a record header and the pointers of section 0."""
    if len(start) < _RECORD_HEADER_BYTES + SECTION_HEADER_BYTES:
        return False
    (length,) = struct.unpack_from("<I", start, 2)
    number, section_length = struct.unpack_from("<HI", start, _RECORD_HEADER_BYTES + 2)
    named = start[_RECORD_HEADER_BYTES + 10 : _RECORD_HEADER_BYTES + 16] == b"SCPECG"
    plausible = number == 0 and section_length % POINTER_BYTES == 6 and length > section_length > 16
    return plausible and (named or section_length >= SECTION_HEADER_BYTES + 12 * POINTER_BYTES)


def read_sections(name: str, record: bytes) -> dict[int, Section]:
    """The sections of a record that hold anything, by their number.

    Raises
    ------
    RecordingError
        If a checksum, a length or a pointer does not agree with the bytes.
    """
    if len(record) < _RECORD_HEADER_BYTES:
        raise _damaged(name, "it is cut off within its header")
    stated_crc, length = struct.unpack_from("<HI", record)
    if length > len(record):
        raise _damaged(name, f"it states {length} bytes and holds {len(record)}")
    record = record[:length]
    if binascii.crc_hqx(record[2:], 0xFFFF) != stated_crc:
        raise _damaged(name, "its checksum does not agree with its content")
    pointers = _section_at(name, record, 0, _RECORD_HEADER_BYTES)
    found: dict[int, Section] = {}
    n_bytes = 0
    for at in range(0, len(pointers.content) - POINTER_BYTES + 1, POINTER_BYTES):
        number, section_length, index = struct.unpack_from("<HII", pointers.content, at)
        if number == 0 or section_length == 0 or number in found:
            continue
        if len(found) >= MOST_SECTIONS:
            raise _damaged(name, "it points to more sections than there are")
        n_bytes += section_length
        if n_bytes > length:
            raise _damaged(name, "its sections lie upon each other")
        found[number] = _section_at(name, record, number, index - 1)
    return found


def _section_at(name: str, record: bytes, number: int, start: int) -> Section:
    if not 0 <= start <= len(record) - SECTION_HEADER_BYTES:
        raise _damaged(name, f"section {number} lies outside the file")
    crc, stated_number, length = struct.unpack_from("<HHI", record, start)
    if stated_number != number or not SECTION_HEADER_BYTES <= length <= len(record) - start:
        raise _damaged(name, f"section {number} is not where it should be")
    whole = record[start : start + length]
    if binascii.crc_hqx(whole[2:], 0xFFFF) != crc:
        raise _damaged(name, f"the checksum of section {number} does not agree with its content")
    return Section(number, whole[_PROTOCOL_BYTE], whole[SECTION_HEADER_BYTES:])


def _damaged(name: str, what: str) -> RecordingError:
    return RecordingError(
        f"{name}: the SCP-ECG file is damaged: {what}. Export it again from where it is stored."
    )
