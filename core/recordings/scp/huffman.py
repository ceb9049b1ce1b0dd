"""Huffman coding of SCP-ECG samples (EN 1064, annex C).

A code is a prefix, followed where the code is longer than its prefix by the value itself as a
signed number. Bits are read from the top of each byte; tables state codes bottom bit first.
"""

from __future__ import annotations

import struct
from dataclasses import dataclass

import numpy as np
from numpy.typing import NDArray

DEFAULT_TABLE_MARK = 19999
LONGEST_PREFIX = 16
LONGEST_CODE = 32
# A table takes up to half a megabyte when it is spread out, and eleven bytes in the file.
MOST_TABLES = 32
_ALL_64 = (1 << 64) - 1


class HuffmanError(ValueError):
    """A table or a stream that cannot be decoded; the message names what is wrong."""


@dataclass(frozen=True, slots=True)
class Code:
    """One code: prefix length, whole length, whether it stands for a value or another table.

    ``value`` is the value where the code is a prefix alone, or the table to switch to.
    """

    prefix_bits: int
    whole_bits: int
    is_value: bool
    value: int
    reversed_prefix: int

    def __post_init__(self) -> None:
        if not (1 <= self.prefix_bits <= LONGEST_PREFIX):
            raise HuffmanError(f"a prefix of {self.prefix_bits} bits")
        if not (self.prefix_bits <= self.whole_bits <= LONGEST_CODE):
            raise HuffmanError(f"a code of {self.whole_bits} bits with its prefix")


def _default_codes() -> list[Code]:
    """0; then ones, a zero and a sign for 1 to 8; two long prefixes for 8 and 16 bits."""
    codes = [Code(1, 1, True, 0, 0)]
    for size in range(1, 9):
        bits = size + 2
        ones = (1 << size) - 1
        codes.append(Code(bits, bits, True, size, ones))
        codes.append(Code(bits, bits, True, -size, ones | 1 << (bits - 1)))
    codes.append(Code(10, 18, True, 0, 0b0111111111))
    codes.append(Code(10, 26, True, 0, 0b1111111111))
    return codes


class Table:
    """Codes, looked up by the next bits of a stream; `entries` holds -1 where there is none."""

    def __init__(self, codes: list[Code]) -> None:
        if not codes:
            raise HuffmanError("a table without codes")
        self.codes = codes
        self.width = max(code.prefix_bits for code in codes)
        self.entries = [-1] * (1 << self.width)
        for index, code in enumerate(codes):
            text = format(code.reversed_prefix, f"0{code.prefix_bits}b")[::-1]
            if len(text) != code.prefix_bits:
                raise HuffmanError("a prefix longer than it states")
            first = int(text, 2) << (self.width - code.prefix_bits)
            last = first + (1 << (self.width - code.prefix_bits))
            if any(entry >= 0 for entry in self.entries[first:last]):
                raise HuffmanError("two codes that begin alike")
            self.entries[first:last] = [index] * (last - first)


DEFAULT_TABLE = Table(_default_codes())


def read_tables(content: bytes) -> list[Table]:
    """The tables of section 2.

    Raises
    ------
    HuffmanError
        If a table is cut off or not a prefix code.
    """
    if len(content) < 2:
        raise HuffmanError("no tables")
    (n_tables,) = struct.unpack_from("<H", content)
    if n_tables == DEFAULT_TABLE_MARK:
        return [DEFAULT_TABLE]
    if n_tables > MOST_TABLES:
        raise HuffmanError(f"{n_tables} code tables")
    tables, at = [], 2
    for _ in range(n_tables):
        if at + 2 > len(content):
            raise HuffmanError("tables that are cut off")
        (n_codes,) = struct.unpack_from("<H", content, at)
        at += 2
        if at + 9 * n_codes > len(content):
            raise HuffmanError("a table that is cut off")
        codes = []
        for _ in range(n_codes):
            prefix, whole, mode, value, base = struct.unpack_from("<BBBhI", content, at)
            codes.append(Code(prefix, whole, mode != 0, value, base))
            at += 9
        tables.append(Table(codes))
    if not tables:
        raise HuffmanError("no tables")
    return tables


def decode(data: bytes, n_values: int, tables: list[Table]) -> NDArray[np.int64]:
    """Decode a number of values.

    Raises
    ------
    HuffmanError
        If the stream ends early or meets bits that are no code.
    """
    n_bits = 8 * len(data)
    if n_values > n_bits:
        raise HuffmanError(f"only {len(data)} bytes for {n_values} samples")
    padded = data + bytes(8)
    values = np.empty(n_values, dtype=np.int64)
    table, at, done, n_switches = tables[0], 0, 0, 0
    while done < n_values:
        # The next 57 to 64 bits, from the top.
        first = at >> 3
        ahead = int.from_bytes(padded[first : first + 8], "big") << (at & 7) & _ALL_64
        index = table.entries[ahead >> (64 - table.width)]
        if index < 0:
            raise HuffmanError("bits that are no code")
        code = table.codes[index]
        at += code.whole_bits
        if at > n_bits:
            raise HuffmanError("a stream that ends early")
        if not code.is_value:
            if not 1 <= code.value <= len(tables):
                raise HuffmanError("a switch to a table that isn't there")
            n_switches += 1
            if n_switches > n_values:
                raise HuffmanError("more switches of the table than samples")
            table = tables[code.value - 1]
            continue
        extra = code.whole_bits - code.prefix_bits
        if extra == 0:
            values[done] = code.value
        else:
            raw = ahead >> (64 - code.whole_bits) & ((1 << extra) - 1)
            values[done] = raw - (1 << extra) if raw >> (extra - 1) else raw
        done += 1
    return values
