"""Damaged copies of a file: the same seed gives the same damage."""

from __future__ import annotations

import struct

import numpy as np

# Counts and sizes that parsers stumble over.
_AWKWARD = [0, 1, 0x7F, 0x80, 0xFF, 0x7FFF, 0x8000, 0xFFFF, 0x7FFFFFFF, 0x80000000, 0xFFFFFFFF]
_AWKWARD_TEXT = [b"-1", b"0", b"nan", b"inf", b"1e999", b"99999999999", b"../x", b"\x00", b"%s"]
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
