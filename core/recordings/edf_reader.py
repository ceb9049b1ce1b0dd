"""EDF, EDF+ and BDF files, decoded by the edfio package a few data records at a time.

Value in a signal's unit = physical minimum + (stored sample - digital minimum) x (physical
range / digital range) (Kemp & Olivan 2003, Clin Neurophysiol 114:1755). BDF is the same with
samples of 24 bits.

edfio is imported when a file is opened. It maps EDF but loads BDF whole, at several times its
size, so both are handed to it in blocks.
"""

from __future__ import annotations

from dataclasses import dataclass
from pathlib import Path
from typing import TYPE_CHECKING, BinaryIO

import numpy as np
from numpy.typing import NDArray

from core.errors import RecordingError
from core.recordings.assemble import (
    STEP_RANGE_MV,
    Channel,
    assemble_recording,
    refuse_missing_leads,
    refuse_rate,
)
from core.recordings.edf_layout import (
    Layout,
    damaged,
    first_onset_s,
    read_layout,
    record_blocks,
    record_onsets_s,
)
from core.recordings.edf_layout import looks_like_edf as looks_like_edf
from core.recordings.edf_subject import filters_of, recorded_at_of, subject_of, text_of
from core.recordings.fingerprint import sha256_of_files
from core.recordings.held import Held
from core.recordings.leads import TWELVE_LEADS, lead_of_label
from core.recordings.quietly import quietly
from core.recordings.recording import Recording, Source
from core.recordings.refusing import refusing
from core.recordings.shown import shown
from core.recordings.units import MILLIVOLTS_PER_UNIT

if TYPE_CHECKING:
    from edfio import Bdf, BdfSignal, Edf, EdfSignal

# Records of an interrupted recording that follow each other within so many samples follow on:
# their times are rounded to what the writer found worth writing.
FOLLOWS_ON_SAMPLES = 0.5


@dataclass(frozen=True, slots=True)
class _Lead:
    """A signal that is a lead: its place among the ordinary signals, and how it is scaled."""

    place: int
    lead: str
    sign: float
    step_mv: float
    zero_mv: float  # what the sample 0 stands for
    rate_hz: float
    samples_a_record: int
    prefiltering: str


def open_edf(path: Path) -> Held:
    """The ECG leads of an EDF, EDF+ or BDF file.

    Interruptions of an EDF+D file become gaps (NaN).

    Raises
    ------
    RecordingError
        If the file contradicts itself, a lead is not in volts, the recording is interrupted for
        longer than it lasts, or the leads are not those of a 12-lead ECG.
    OSError
        If the file cannot be opened.
    """
    name = path.name
    contradiction = damaged(name, "its header contradicts itself")
    with refusing(contradiction), quietly(), path.open("rb") as file:
        layout = read_layout(name, file, path.stat().st_size)
        return _held(path, file, layout)


def _held(path: Path, file: BinaryIO, layout: Layout) -> Held:
    name = path.name
    header = _decoded(layout, b"", 0)
    leads = _leads(name, layout, header)
    onsets_s = record_onsets_s(name, file, layout) if layout.is_interrupted else None
    first_s = first_onset_s(file, layout) if onsets_s is None else float(onsets_s[0])
    refuse_missing_leads(name, [lead.lead for lead in leads])
    for lead in leads:
        refuse_rate(name, lead.rate_hz)
    rate_hz = max(lead.rate_hz for lead in leads)
    starts_s = _starts_s(name, layout, onsets_s, rate_hz)
    recorded_at = recorded_at_of(header, layout.header, onset_s=first_s)
    source = Source(name, layout.kind + ("+" if layout.is_plus else ""), sha256_of_files([path]))

    def between(start_s: float, stop_s: float) -> Recording:
        with refusing(damaged(name, "its samples cannot be decoded")), quietly():
            channels = _channels(path, layout, leads, starts_s, start_s, stop_s)
        return assemble_recording(
            channels,
            sampling_rate_hz=rate_hz,
            source=source,
            subject=subject_of(header, is_plus=layout.is_plus, recorded_at=recorded_at),
            recorded_at=recorded_at,
            filters=filters_of(lead.prefiltering for lead in leads),
            start_s=start_s,
        )

    return Held(
        name=name,
        duration_s=float(starts_s[-1]) + layout.record_s,
        n_leads=max(len(leads), len(TWELVE_LEADS)),
        sampling_rate_hz=rate_hz,
        between=between,
    )


def _decoded(layout: Layout, data: bytes, n_records: int) -> Edf | Bdf:
    """Some data records as edfio reads a file of just these."""
    import edfio

    read = edfio.read_edf if layout.kind == "EDF" else edfio.read_bdf
    # Header text is ASCII by the standards; a micro sign is common, and no byte is refused.
    return read(layout.header_for(n_records) + data, header_encoding="latin-1")


def _leads(name: str, layout: Layout, header: Edf | Bdf) -> list[_Lead]:
    leads: dict[str, _Lead] = {}
    signals: tuple[EdfSignal | BdfSignal, ...] = header.signals
    for place, signal in enumerate(signals):
        found = lead_of_label(text_of(signal.label))
        if found is None or found[0] in leads:
            continue
        lead, sign = found
        unit = text_of(signal.physical_dimension)
        unit_mv = MILLIVOLTS_PER_UNIT.get(unit.lower())
        if unit_mv is None:
            # X, Y and Z name the axes of other sensors as well.
            if lead not in TWELVE_LEADS:
                continue
            stated = (
                f"in the unit '{shown(unit)}', which is no voltage" if unit else "without a unit"
            )
            raise RecordingError(
                f"{name}: lead {lead} is stored {stated}. Export it in uV or mV, with the unit in "
                "its physical dimension."
            )
        step_mv, zero_mv = _scale_mv(name, lead, signal, unit_mv)
        leads[lead] = _Lead(
            place=place,
            lead=lead,
            sign=sign,
            step_mv=step_mv,
            zero_mv=zero_mv,
            rate_hz=signal.samples_per_data_record / layout.record_s,
            samples_a_record=signal.samples_per_data_record,
            prefiltering=text_of(signal.prefiltering),
        )
    return list(leads.values())


def _scale_mv(
    name: str, lead: str, signal: EdfSignal | BdfSignal, unit_mv: float
) -> tuple[float, float]:
    """The quantisation step and the value of the sample 0."""
    try:
        physical, digital = signal.physical_range, signal.digital_range
    except ValueError as error:
        raise RecordingError(
            f"{name}: the smallest and largest values of lead {lead} are not written as plain "
            "numbers. Export the file again."
        ) from error
    steps = digital.max - digital.min
    step_mv = (physical.max - physical.min) / steps * unit_mv if steps > 0 else 0.0
    smallest_mv, largest_mv = STEP_RANGE_MV
    if not smallest_mv <= abs(step_mv) <= largest_mv:
        raise RecordingError(
            f"{name}: lead {lead} is not calibrated: it states {physical.min:g} to "
            f"{physical.max:g} for samples of {digital.min} to {digital.max}. "
            "Export the file again with its true range."
        )
    return step_mv, physical.min * unit_mv - digital.min * step_mv


def _starts_s(
    name: str, layout: Layout, onsets_s: NDArray[np.float64] | None, rate_hz: float
) -> NDArray[np.float64]:
    """When each data record starts, from the first one's start; rounding of its time left out.

    Raises
    ------
    RecordingError
        If records overlap, or less was recorded than left out.
    """
    numbers = np.arange(layout.n_records)
    if onsets_s is None:
        return np.asarray(numbers * layout.record_s, dtype=np.float64)
    slack_s = FOLLOWS_ON_SAMPLES / rate_hz
    lateness_s = onsets_s - onsets_s[0] - numbers * layout.record_s
    delays_s = np.empty_like(lateness_s)
    delay_s = late_before_s = 0.0
    for record, late_s in enumerate(lateness_s.tolist()):
        # From record to record: a clock that gains a little is no overlap.
        if late_s < late_before_s - slack_s:
            raise damaged(name, f"data record {record + 1} starts before the one before it ends")
        if late_s > delay_s + slack_s:
            delay_s = late_s
        delays_s[record], late_before_s = delay_s, late_s
    recorded_s = layout.n_records * layout.record_s
    if delay_s > recorded_s:
        raise RecordingError(
            f"{name}: the recording is interrupted for {delay_s:.0f} s and holds {recorded_s:.0f} "
            "s in all. Export one uninterrupted stretch of it."
        )
    return np.asarray(numbers * layout.record_s + delays_s, dtype=np.float64)


def _channels(
    path: Path,
    layout: Layout,
    leads: list[_Lead],
    starts_s: NDArray[np.float64],
    start_s: float,
    stop_s: float,
) -> list[Channel]:
    """The leads from one time to another."""
    # Half a sample: a stretch that begins where a record ends does not begin within it.
    slack_s = 0.5 / max(lead.rate_hz for lead in leads)
    first = int(np.searchsorted(starts_s + layout.record_s - slack_s, start_s, side="right"))
    last = int(np.searchsorted(starts_s + slack_s, stop_s, side="left"))
    wanted = range(first, max(first, last))
    origins = [round(start_s * lead.rate_hz) for lead in leads]
    lengths = [
        round(stop_s * lead.rate_hz) - origin for lead, origin in zip(leads, origins, strict=True)
    ]
    samples_mv = [np.full(length, np.nan) for length in lengths]
    firsts = [_first_samples(lead, starts_s) for lead in leads]
    with path.open("rb") as file:
        for records, data in record_blocks(path.name, file, layout, wanted):
            signals = _decoded(layout, data, records.stop - records.start).signals
            for lead, at, origin, values_mv in zip(leads, firsts, origins, samples_mv, strict=True):
                stored = np.asarray(signals[lead.place].digital, dtype=np.float64)
                where = at[records, np.newaxis] + np.arange(lead.samples_a_record) - origin
                inside = (where.ravel() >= 0) & (where.ravel() < values_mv.size)
                values_mv[where.ravel()[inside]] = lead.sign * (
                    lead.zero_mv + lead.step_mv * stored[inside]
                )
    return [
        Channel(lead.lead, values_mv, 1.0 / abs(lead.step_mv), lead.rate_hz)
        for lead, values_mv in zip(leads, samples_mv, strict=True)
    ]


def _first_samples(lead: _Lead, starts_s: NDArray[np.float64]) -> NDArray[np.int64]:
    """The place of each record's first sample; a record never overwrites the one before it."""
    numbers = np.arange(starts_s.size) * lead.samples_a_record
    placed = np.rint(starts_s * lead.rate_hz).astype(np.int64)
    return np.asarray(numbers + np.maximum.accumulate(placed - numbers), dtype=np.int64)
