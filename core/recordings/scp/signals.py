"""Samples of an SCP-ECG record: leads, differences, and the reference beat put back.

Section 3 names the leads, section 6 holds the rhythm; where a reference beat was subtracted
from it, section 5 holds that beat and section 4 where (EN 1064, 5.6 to 5.9). In protocol version
3 a record may hold its rhythm in section 12 instead, sample by sample.
"""

from __future__ import annotations

import struct
from dataclasses import dataclass

import numpy as np
from numpy.typing import NDArray

from core.recordings.scp.container import Section
from core.recordings.scp.huffman import HuffmanError, Table, decode, read_tables

LEAD_DEFINITIONS, BEAT_LOCATIONS, REFERENCE_BEAT, RHYTHM, LONG_RHYTHM = 3, 4, 5, 6, 12
HUFFMAN_TABLES = 2
MOST_LEADS = 85
LONGEST_RECORD_SAMPLES = 100_000_000
# Decoded one by one: five minutes of twelve leads at 500 Hz take about a second.
MOST_COMPRESSED_SAMPLES = 2_000_000
# As many in those five minutes as no heart makes.
MOST_BEATS = 2000
# Leads recorded one group after another span so many times the longest of them at most.
FARTHEST_APART = 12


class SignalError(ValueError):
    """Sections that cannot be decoded; the message names what is wrong."""


@dataclass(frozen=True, slots=True, eq=False)
class Signals:
    """Leads by their SCP numbers.

    Attributes
    ----------
    lead_numbers : tuple of int
    values : list of ndarray
        One array a lead, in steps. Doubles, because damaged differences add up past any integer.
    starts : tuple of int
        Sample of the record that each array begins at, from 0.
    step_mv : tuple of float
        One for each lead.
    """

    lead_numbers: tuple[int, ...]
    values: list[NDArray[np.float64]]
    starts: tuple[int, ...]
    step_mv: tuple[float, ...]
    sampling_rate_hz: float


@dataclass(frozen=True, slots=True)
class _Lead:
    number: int
    first: int  # sample number, from 1
    last: int

    @property
    def n_samples(self) -> int:
        return self.last - self.first + 1


@dataclass(frozen=True, slots=True, eq=False)
class _Coded:
    """A section of coded leads: step, interval, how many differences, and each lead's bytes."""

    step_nv: int
    interval_us: int
    differences: int
    bimodal: bool
    data: list[bytes]


def read_signals(sections: dict[int, Section]) -> Signals:
    """The rhythm of a record.

    Raises
    ------
    SignalError
        If sections are missing, cut off, or contradict each other.
    """
    try:
        if LONG_RHYTHM in sections and RHYTHM not in sections:
            return _long_rhythm(sections[LONG_RHYTHM].content)
        return _rhythm(sections)
    except struct.error as error:
        raise SignalError("a section is cut off") from error
    except HuffmanError as error:
        raise SignalError(f"its compressed samples are damaged ({error})") from error


def _rhythm(sections: dict[int, Section]) -> Signals:
    for needed, what in ((LEAD_DEFINITIONS, "lead definitions"), (RHYTHM, "rhythm data")):
        if needed not in sections:
            raise SignalError(f"it holds no {what}")
    leads, subtracted = _leads(sections[LEAD_DEFINITIONS].content)
    tables = None
    if HUFFMAN_TABLES in sections:
        tables = read_tables(sections[HUFFMAN_TABLES].content)
        n_samples = sum(lead.n_samples for lead in leads)
        if n_samples > MOST_COMPRESSED_SAMPLES:
            raise SignalError(f"it states {n_samples} compressed samples, too many to decode")
    coded = _coded(sections[RHYTHM].content, len(leads))
    if coded.bimodal:
        raise SignalError("its rhythm is thinned out between the beats (bimodal compression)")
    values = [
        _undo_differences(_decoded(data, lead.n_samples, tables), coded.differences)
        for data, lead in zip(coded.data, leads, strict=True)
    ]
    step_nv = coded.step_nv
    if subtracted:
        values, step_nv = _with_reference_beat(sections, leads, values, coded, tables)
    return Signals(
        lead_numbers=tuple(lead.number for lead in leads),
        values=values,
        starts=tuple(lead.first - min(other.first for other in leads) for lead in leads),
        step_mv=(step_nv * 1e-6,) * len(leads),
        sampling_rate_hz=1e6 / coded.interval_us,
    )


def _leads(content: bytes) -> tuple[list[_Lead], bool]:
    """Section 3: the leads, and whether a reference beat was subtracted."""
    n_leads, flags = struct.unpack_from("<BB", content)
    if not 1 <= n_leads <= MOST_LEADS:
        raise SignalError(f"it states {n_leads} leads, where 1 to {MOST_LEADS} can be")
    leads = []
    for position in range(n_leads):
        first, last, number = struct.unpack_from("<IIB", content, 2 + 9 * position)
        if not 1 <= first <= last <= LONGEST_RECORD_SAMPLES:
            raise SignalError(f"it states that a lead runs from sample {first} to {last}")
        leads.append(_Lead(number, first, last))
    span = max(lead.last for lead in leads) - min(lead.first for lead in leads) + 1
    if span > FARTHEST_APART * max(lead.n_samples for lead in leads):
        raise SignalError("its leads lie far apart in time")
    return leads, bool(flags & 1)


def _coded(content: bytes, n_leads: int) -> _Coded:
    """The common form of sections 5 and 6."""
    step_nv, interval_us, differences, bimodal = struct.unpack_from("<HHBB", content)
    if step_nv == 0 or interval_us == 0 or differences > 2:
        raise SignalError(
            f"it states steps of {step_nv} nV, {interval_us} us a sample and "
            f"{differences} differences"
        )
    sizes = struct.unpack_from(f"<{n_leads}H", content, 6)
    data, at = [], 6 + 2 * n_leads
    for size in sizes:
        if at + size > len(content):
            raise SignalError("its samples are cut off")
        data.append(content[at : at + size])
        at += size
    return _Coded(step_nv, interval_us, differences, bool(bimodal & 1), data)


def _decoded(data: bytes, n_samples: int, tables: list[Table] | None) -> NDArray[np.float64]:
    if tables is not None:
        return decode(data, n_samples, tables).astype(np.float64)
    if n_samples > len(data) // 2:
        raise SignalError(f"a lead of {n_samples} samples has only {len(data)} bytes")
    return np.frombuffer(data, "<i2", n_samples).astype(np.float64)


def _undo_differences(values: NDArray[np.float64], order: int) -> NDArray[np.float64]:
    """Samples of their differences; the first *order* values are samples themselves."""
    if order == 1 or (order == 2 and values.size <= 2):
        return np.cumsum(values) if order == 1 else values
    if order == 2:
        slope = np.cumsum(np.concatenate([values[1:2] - values[:1], values[2:]]))
        return np.asarray(values[0] + np.concatenate([[0], np.cumsum(slope)]))
    return values


def _with_reference_beat(
    sections: dict[int, Section],
    leads: list[_Lead],
    residual: list[NDArray[np.float64]],
    coded: _Coded,
    tables: list[Table] | None,
) -> tuple[list[NDArray[np.float64]], int]:
    """The rhythm with the reference beat put back, and its step in nV."""
    for needed in (BEAT_LOCATIONS, REFERENCE_BEAT):
        if needed not in sections:
            raise SignalError("the reference beat that was subtracted is missing")
    locations = sections[BEAT_LOCATIONS].content
    length_ms, fiducial, n_beats = struct.unpack_from("<HHH", locations)
    beat = _coded(sections[REFERENCE_BEAT].content, len(leads))
    if beat.interval_us != coded.interval_us:
        raise SignalError("its reference beat is sampled at another rate than its rhythm")
    n_beat = round(length_ms * 1000.0 / beat.interval_us)
    shapes = [
        _undo_differences(_decoded(data, n_beat, tables), beat.differences) * beat.step_nv
        for data in beat.data
    ]
    if n_beats > MOST_BEATS:
        raise SignalError(f"it states {n_beats} beats, more than it can hold")
    whole = [values * coded.step_nv for values in residual]
    n_put_back = [0] * len(leads)
    for position in range(n_beats):
        kind, first, at, last = struct.unpack_from("<HIII", locations, 6 + 14 * position)
        if kind != 0:
            continue
        for place, (lead, values, shape) in enumerate(zip(leads, whole, shapes, strict=True)):
            # Sample of the record that the beat's own first sample falls on.
            begin = at - fiducial + 1
            low = max(first, lead.first, begin)
            high = min(last, lead.last, begin + shape.size - 1)
            if high < low:
                continue
            n_put_back[place] += high - low + 1
            if n_put_back[place] > 2 * values.size:
                raise SignalError("its beats lie upon each other")
            there = slice(low - lead.first, high - lead.first + 1)
            values[there] += shape[low - begin : high - begin + 1]
    return whole, 1


def _long_rhythm(content: bytes) -> Signals:
    """Section 12 of protocol version 3: leads side by side, sample after sample."""
    rate_hz, n_leads, n_samples, n_bytes = struct.unpack_from("<IBIB", content)
    if n_bytes != 2 or not 1 <= n_leads <= MOST_LEADS or not n_samples >= 1:
        raise SignalError(f"it states {n_samples} samples of {n_leads} leads in {n_bytes} bytes")
    numbers, steps_nv = [], []
    for position in range(n_leads):
        number, step_nv = struct.unpack_from("<BH", content, _LONG_HEADER_BYTES + 4 * position)
        numbers.append(number)
        steps_nv.append(step_nv)
    start = _LONG_HEADER_BYTES + 4 * n_leads
    if start + 2 * n_samples * n_leads > len(content):
        raise SignalError("its samples are cut off")
    if 0 in steps_nv or rate_hz == 0:
        raise SignalError("it states no step or no rate")
    table = np.frombuffer(content, "<i2", n_samples * n_leads, start).reshape(n_samples, n_leads)
    return Signals(
        lead_numbers=tuple(numbers),
        values=[table[:, column].astype(np.float64) for column in range(n_leads)],
        starts=(0,) * n_leads,
        step_mv=tuple(step * 1e-6 for step in steps_nv),
        sampling_rate_hz=float(rate_hz),
    )


# Rate, leads, samples, bytes a sample, date, time, and room for what this program doesn't use.
_LONG_HEADER_BYTES = 70
