"""SCP-ECG records built byte by byte from EN 1064, apart from the reader's code.

Codes are written out as strings of bits; checksums are worked out from their polynomial.
"""

from __future__ import annotations

import struct
from collections.abc import Sequence
from dataclasses import dataclass, field
from itertools import pairwise

import numpy as np
from numpy.typing import NDArray

# Annex C's default table as bit strings, first bit first.
DEFAULT_BITS = {0: "0"} | {
    sign * size: "1" * size + "0" + ("0" if sign > 0 else "1")
    for size in range(1, 9)
    for sign in (1, -1)
}
EIGHT_BITS_FOLLOW, SIXTEEN_BITS_FOLLOW = "1111111110", "1111111111"


def _crc_of_byte(byte: int) -> int:
    crc = byte << 8
    for _ in range(8):
        crc = (crc << 1 ^ (0x1021 if crc & 0x8000 else 0)) & 0xFFFF
    return crc


_CRC_OF_BYTE = [_crc_of_byte(byte) for byte in range(256)]


def crc16(data: bytes) -> int:
    """CRC-16 of the CCITT: polynomial x^16 + x^12 + x^5 + 1, start all ones."""
    crc = 0xFFFF
    for byte in data:
        crc = crc << 8 & 0xFFFF ^ _CRC_OF_BYTE[crc >> 8 ^ byte]
    return crc


def section(number: int, content: bytes, *, protocol: int = 20, reserved: bytes = b"") -> bytes:
    """A section with its header: checksum, number, length, two versions, six reserved bytes."""
    content += b"\0" * (len(content) % 2)
    body = struct.pack("<HIBB", number, 16 + len(content), protocol, protocol)
    body += reserved.ljust(6, b"\0") + content
    return struct.pack("<H", crc16(body)) + body


def record(sections: dict[int, bytes], *, protocol: int = 20) -> bytes:
    """A record: checksum, length, section 0 with a pointer to every section, the sections."""
    numbers = sorted({*range(12), *sections} - {0})
    built = {n: section(n, sections[n], protocol=protocol) for n in numbers if n in sections}
    pointers_length = 16 + 10 * (1 + len(numbers))
    at = 6 + pointers_length
    pointers = struct.pack("<HII", 0, pointers_length, 7)
    for number in numbers:
        size = len(built.get(number, b""))
        pointers += struct.pack("<HII", number, size, at + 1 if size else 0)
        at += size
    named = b"SCPECG" if protocol >= 13 else b""
    body = section(0, pointers, protocol=protocol, reserved=named) + b"".join(built.values())
    whole = struct.pack("<I", 6 + len(body)) + body
    return struct.pack("<H", crc16(whole)) + whole


def sealed(record: bytes) -> bytes:
    """A record with the checksums that its content asks for, wherever its pointers lead.

    Lengths, numbers and pointers stay as they are: only what would hide a damage is put right.
    """
    whole = bytearray(record)
    if len(whole) < 22:
        return record
    (length,) = struct.unpack_from("<I", whole, 2)
    starts = [6]
    (n_bytes,) = struct.unpack_from("<I", whole, 10)
    for at in range(22, min(6 + n_bytes, len(whole)) - 9, 10):
        number, size, index = struct.unpack_from("<HII", whole, at)
        if number and size:
            starts.append(index - 1)
    # Section 0 last: it may have been taken for another one's place.
    for start in reversed(starts[:100]):
        if 0 <= start <= len(whole) - 8:
            (size,) = struct.unpack_from("<I", whole, start + 4)
            content = bytes(whole[start + 2 : start + size])
            whole[start : start + 2] = struct.pack("<H", crc16(content))
    whole[:2] = struct.pack("<H", crc16(bytes(whole[2:length])))
    return bytes(whole)


def tags() -> bytes:
    """Section 1 of an invented person, born in 1950, recorded on 12 November 2031."""
    said = [
        (0, b"Ash\0"),
        (1, b"Invented\0"),
        (2, b"INVENTED-01\0"),
        (4, struct.pack("<HB", 61, 1)),
        (5, struct.pack("<HBB", 1950, 3, 9)),
        (8, b"\x02"),
        (25, struct.pack("<HBB", 2031, 11, 12)),
        (26, bytes([22, 40, 5])),
        (27, struct.pack("<H", 5)),
        (28, struct.pack("<H", 150)),
    ]
    content = b"".join(struct.pack("<BH", tag, len(value)) + value for tag, value in said)
    return content + struct.pack("<BH", 255, 0)


def lead_definitions(
    spans: Sequence[tuple[int, int, int]], *, reference_beat_subtracted: bool = False
) -> bytes:
    """Section 3: for every lead its first and last sample (from 1) and its number."""
    flags = 0b100 | (1 if reference_beat_subtracted else 0) | min(len(spans), 31) << 3
    content = struct.pack("<BB", len(spans), flags)
    for number, first, last in spans:
        content += struct.pack("<IIB", first, last, number)
    return content


def differences(values: Sequence[int], order: int) -> list[int]:
    """First or second differences; the first *order* values stay as they are."""
    values = [int(value) for value in values]
    if order == 0:
        return values
    if order == 1:
        return [values[0], *(b - a for a, b in pairwise(values))]
    return values[:2] + [
        c - 2 * b + a for a, b, c in zip(values, values[1:], values[2:], strict=False)
    ]


@dataclass
class Coder:
    """Codes of single values; anything else follows a prefix in so many bits."""

    bits: dict[int, str]
    escapes: list[tuple[str, int]]
    table: bytes = field(default=b"")

    def encode(self, values: Sequence[int]) -> bytes:
        """The bit stream, filled up to whole bytes."""
        text = "".join(self._one(int(value)) for value in values)
        text += "0" * (-len(text) % 8)
        return int(text or "0", 2).to_bytes(len(text) // 8, "big")

    def _one(self, value: int) -> str:
        if value in self.bits:
            return self.bits[value]
        for prefix, n in self.escapes:
            if -(1 << (n - 1)) <= value < 1 << (n - 1):
                return prefix + format(value & (1 << n) - 1, f"0{n}b")
        raise ValueError(value)


def default_coder() -> Coder:
    """The default table, named by its mark alone."""
    return Coder(
        DEFAULT_BITS,
        [(EIGHT_BITS_FOLLOW, 8), (SIXTEEN_BITS_FOLLOW, 16)],
        struct.pack("<H", 19999),
    )


def own_coder() -> Coder:
    """A table of the record's own: 0, two steps either way, and 16 bits for the rest."""
    bits = {0: "00", 1: "01", -1: "100", 2: "101", -2: "1100"}
    rows = [(len(code), len(code), value, code) for value, code in bits.items()]
    rows.append((4, 20, 0, "1101"))
    table = struct.pack("<HH", 1, len(rows))
    for prefix, whole, value, code in rows:
        table += struct.pack("<BBBhI", prefix, whole, 1, value, int(code[::-1], 2))
    return Coder(bits, [("1101", 16)], table)


def coded_leads(
    leads: Sequence[Sequence[int]],
    *,
    step_nv: int,
    interval_us: int,
    order: int = 0,
    coder: Coder | None = None,
) -> bytes:
    """Sections 5 and 6: step, interval, how many differences, bytes of each lead, the bytes."""
    streams = []
    for values in leads:
        coded = differences(values, order)
        streams.append(coder.encode(coded) if coder else struct.pack(f"<{len(coded)}h", *coded))
    content = struct.pack("<HHBB", step_nv, interval_us, order, 0)
    content += struct.pack(f"<{len(streams)}H", *(len(stream) for stream in streams))
    return content + b"".join(streams)


CODERS = {"plain": lambda: None, "default table": default_coder, "own table": own_coder}
STEP_NV, INTERVAL_US = 2500, 2000
NUMBERS = (1, 2, 3, 4, 5, 6, 7, 8)  # I, II, V1 to V6


def leads(n: int = 700, seed: int = 3) -> NDArray[np.int64]:
    """Eight leads of smooth waves in steps, with jumps that need the long codes."""
    rng = np.random.default_rng(seed)
    time = np.arange(n)
    waves = [150 * np.sin(time / (7.0 + k)) + 400 * (time % 190 == 40 + k) for k in range(8)]
    return np.rint(np.array(waves) + rng.normal(0, 2, (8, n))).astype(int)


def sections(
    values: NDArray[np.int64], *, order: int = 0, coder: Coder | None = None
) -> dict[int, bytes]:
    """A rhythm of the eight leads, with the person; a table of codes where there is a coder."""
    n = values.shape[1]
    found = {
        1: tags(),
        3: lead_definitions([(number, 1, n) for number in NUMBERS]),
        6: coded_leads(values, step_nv=STEP_NV, interval_us=INTERVAL_US, order=order, coder=coder),
    }
    if coder is not None:
        found[2] = coder.table
    return found


def with_reference_beat(
    made: dict[int, bytes],
    shape: NDArray[np.int64],
    beats: Sequence[tuple[int, int, int, int]],
    *,
    n: int,
    fiducial: int,
    step_nv: int = STEP_NV,
    coder: Coder | None = None,
) -> dict[int, bytes]:
    """The sections with a reference beat, shape (8, n_beat), said to have been subtracted."""
    spans = [(number, 1, n) for number in NUMBERS]
    return made | {
        3: lead_definitions(spans, reference_beat_subtracted=True),
        4: beat_locations(shape.shape[1] * INTERVAL_US // 1000, fiducial, beats),
        5: coded_leads(shape, step_nv=step_nv, interval_us=INTERVAL_US, order=1, coder=coder),
    }


def long_rhythm(values: NDArray[np.int64], *, rate_hz: int = 500) -> bytes:
    """Section 12 of protocol 3: rate, leads, samples, bytes a sample; the leads; the samples."""
    n_leads, n = values.shape
    content = struct.pack("<IBIB", rate_hz, n_leads, n, 2).ljust(70, b"\0")
    content += b"".join(struct.pack("<BHB", number, STEP_NV, 0) for number in NUMBERS[:n_leads])
    return content + values.T.astype("<i2").tobytes()


def beat_locations(
    length_ms: int, fiducial: int, beats: Sequence[tuple[int, int, int, int]]
) -> bytes:
    """Section 4: the reference beat's length and R, and each beat's kind, start, R and end."""
    content = struct.pack("<HHH", length_ms, fiducial, len(beats))
    return content + b"".join(struct.pack("<HIII", *beat) for beat in beats)
