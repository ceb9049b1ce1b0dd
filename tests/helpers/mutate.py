"""Damaged copies of a file: the same seed gives the same damage."""

from __future__ import annotations

import re
import struct

import numpy as np

# Counts and sizes that parsers stumble over.
_AWKWARD = [0, 1, 0x7F, 0x80, 0xFF, 0x7FFF, 0x8000, 0xFFFF, 0x7FFFFFFF, 0x80000000, 0xFFFFFFFF]
_AWKWARD_TEXT = [b"-1", b"0", b"nan", b"inf", b"1e999", b"99999999999", b"../x", b"\x00", b"%s"]
_AWKWARD_WORDS = [
    *_AWKWARD_TEXT,
    b"",
    b".",
    b"~",
    b"1e9",
    b"1e-300",
    b"-0",
    b"1,5",
    b"65536",
    b"/x",
]
_WORD = re.compile(rb"[^\s,;/()+:x\"]+")
LARGEST_BLOCK = 64


def mutated(content: bytes, rng: np.random.Generator) -> bytes:
    """A copy with one to eight random faults; most fall into the first kilobyte."""
    damaged = bytearray(content)
    for _ in range(int(rng.integers(1, 9))):
        if not damaged:
            break
        near_start = rng.random() < 0.6
        at = int(rng.integers(0, min(len(damaged), 1024) if near_start else len(damaged)))
        _FAULTS[int(rng.integers(len(_FAULTS)))](damaged, at, rng)
    return bytes(damaged)


def mutated_text(content: bytes, rng: np.random.Generator) -> bytes:
    """A copy with faults: half of the copies in their bytes, half in whole words and lines."""
    if rng.random() < 0.5:
        return mutated(content, rng)
    for _ in range(int(rng.integers(1, 5))):
        lines = content.split(b"\n")
        # What the first lines say decides how all others are read.
        nth = int(rng.integers(min(len(lines), 4) if rng.random() < 0.5 else len(lines)))
        if rng.random() < 0.75:
            lines[nth] = _other_word(lines[nth], rng)
        elif rng.random() < 0.5:
            del lines[nth]
        else:
            lines.insert(int(rng.integers(len(lines) + 1)), lines[nth])
        content = b"\n".join(lines)
    return content


def _other_word(line: bytes, rng: np.random.Generator) -> bytes:
    """The line with one of its words replaced, by an awkward one or another of its own."""
    words = list(_WORD.finditer(line))
    if not words:
        return line
    at = words[int(rng.integers(len(words)))]
    if rng.random() < 0.7:
        new = _AWKWARD_WORDS[int(rng.integers(len(_AWKWARD_WORDS)))]
    else:
        new = words[int(rng.integers(len(words)))][0]
    return line[: at.start()] + new + line[at.end() :]


def _flip_bit(damaged: bytearray, at: int, rng: np.random.Generator) -> None:
    damaged[at] ^= 1 << int(rng.integers(8))


def _any_byte(damaged: bytearray, at: int, rng: np.random.Generator) -> None:
    damaged[at] = int(rng.integers(256))


def _awkward_number(damaged: bytearray, at: int, rng: np.random.Generator) -> None:
    value = _AWKWARD[int(rng.integers(len(_AWKWARD)))]
    size = int(rng.choice([1, 2, 4]))
    damaged[at : at + size] = struct.pack("<I", value)[:size]


def _awkward_text(damaged: bytearray, at: int, rng: np.random.Generator) -> None:
    damaged[at : at + int(rng.integers(0, 4))] = _AWKWARD_TEXT[
        int(rng.integers(len(_AWKWARD_TEXT)))
    ]


def _cut_off(damaged: bytearray, at: int, rng: np.random.Generator) -> None:
    del damaged[at:]


def _cut_out(damaged: bytearray, at: int, rng: np.random.Generator) -> None:
    del damaged[at : at + int(rng.integers(1, LARGEST_BLOCK))]


def _repeat(damaged: bytearray, at: int, rng: np.random.Generator) -> None:
    block = damaged[at : at + int(rng.integers(1, LARGEST_BLOCK))]
    damaged[at:at] = bytes(block)


_FAULTS = (
    _flip_bit,
    _any_byte,
    _awkward_number,
    _awkward_number,
    _awkward_text,
    _cut_off,
    _cut_out,
    _repeat,
)
