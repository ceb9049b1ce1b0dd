"""Multiplex groups of a DICOM waveform object: channels of one sampling rate.

Value in a channel's unit = (stored sample x sensitivity x correction factor) + baseline (DICOM
PS3.3, C.10.9.1.4.2).
"""

from __future__ import annotations

import re
from dataclasses import dataclass
from typing import Any

import numpy as np
from numpy.typing import NDArray

from core.errors import RecordingError
from core.recordings.assemble import Channel
from core.recordings.lead_numbers import lead_of_code
from core.recordings.leads import CHEST_LEADS, can_derive_limb_leads, lead_in_sentence
from core.recordings.recording import Filters
from core.recordings.shown import shown

# UCUM codes; the writing with a micro sign is common in real files.
MILLIVOLTS_PER_UNIT = {"uV": 1e-3, "µV": 1e-3, "μV": 1e-3, "mV": 1.0, "V": 1e3, "nV": 1e-6}
NEEDED = (
    "ChannelDefinitionSequence",
    "NumberOfWaveformChannels",
    "NumberOfWaveformSamples",
    "SamplingFrequency",
    "WaveformBitsAllocated",
    "WaveformData",
)
# Sample interpretations whose stored numbers are no linear measure of the voltage.
COMPANDED = {"MB": "mu-law", "AB": "A-law"}


@dataclass(frozen=True, slots=True, eq=False)
class _Scaling:
    """A column of stored samples that is a lead."""

    stored: NDArray[Any]  # (n_samples, n_columns), of the group it stands in
    column: int
    sign: float
    step_mv: float
    baseline_mv: float
    unused_bits: int
    padding: float | None


@dataclass(frozen=True, slots=True, eq=False)
class Group:
    """One multiplex group; its samples stay as the file stores them until they are asked for."""

    leads: dict[str, _Scaling]
    sampling_rate_hz: float
    n_samples: int
    offset_ms: float
    original: bool
    filters: Filters

    @property
    def complete(self) -> bool:
        """Whether it holds a 12-lead ECG."""
        return all(lead in self.leads for lead in CHEST_LEADS) and can_derive_limb_leads(self.leads)

    @property
    def duration_s(self) -> float:
        """How long it lasts."""
        # A rate of zero is refused by name, later.
        return self.n_samples / self.sampling_rate_hz if self.sampling_rate_hz > 0 else 0.0

    def simultaneous_with(self, other: Group) -> bool:
        """Whether its samples were taken at the same times as another's."""
        return (self.sampling_rate_hz, self.n_samples, self.offset_ms, self.original) == (
            other.sampling_rate_hz,
            other.n_samples,
            other.offset_ms,
            other.original,
        )

    def channels(self, first: int, last: int) -> list[Channel]:
        """Its leads from one sample up to another."""
        return [
            Channel(lead, _in_mv(scaling, first, last), 1.0 / abs(scaling.step_mv))
            for lead, scaling in self.leads.items()
        ]


def read_group(name: str, item: Any, number: int, *, big_endian: bool) -> Group:
    """A multiplex group of the waveform sequence.

    Parameters
    ----------
    item : pydicom.Dataset
    number : int
        Its place in the sequence, from 1.
    big_endian : bool
        Whether its samples were written with their high byte first.

    Raises
    ------
    RecordingError
        If it does not say what it holds, is cut off, or lacks a lead's scaling.
    """
    _refuse_incomplete(name, item, number)
    stored = _stored(name, item, big_endian)
    definitions = item.ChannelDefinitionSequence
    unused_bits = stored.dtype.itemsize * 8 - _bits_stored(definitions, stored)
    padding = item.get("WaveformPaddingValue")
    leads: dict[str, _Scaling] = {}
    for column, definition in enumerate(definitions):
        found = _lead_of(definition)
        if found is None or found[0] in leads:
            continue
        lead, sign = found
        unit_mv = _unit_mv(name, lead, definition)
        correction = _number(definition, "ChannelSensitivityCorrectionFactor", 1.0)
        step_mv = _number(definition, "ChannelSensitivity", 1.0) * correction * unit_mv
        baseline_mv = _number(definition, "ChannelBaseline", 0.0) * unit_mv
        if not (np.isfinite(step_mv) and step_mv != 0 and np.isfinite(baseline_mv)):
            raise RecordingError(
                f"{name}: lead {lead} states a sensitivity or a baseline of zero or of no number. "
                "Export the file again, calibrated."
            )
        leads[lead] = _Scaling(
            stored=stored,
            column=column,
            sign=sign,
            step_mv=step_mv,
            baseline_mv=baseline_mv,
            unused_bits=max(unused_bits, 0),
            padding=None if padding is None else _padding_number(padding, item),
        )
    return Group(
        leads=leads,
        sampling_rate_hz=float(item.SamplingFrequency),
        n_samples=int(stored.shape[0]),
        offset_ms=float(item.get("MultiplexGroupTimeOffset") or 0.0),
        original=str(item.get("WaveformOriginality") or "ORIGINAL").upper() == "ORIGINAL",
        filters=_filters(definitions),
    )


def _refuse_incomplete(name: str, item: Any, number: int) -> None:
    where = f"{name}: waveform group {number} of the DICOM object"
    for keyword in NEEDED:
        if item.get(keyword) in (None, ""):
            words = " ".join(re.findall("[A-Z][a-z]+", keyword)).lower()
            raise RecordingError(
                f"{where} states no {words}. Export it again from where it is stored."
            )
    n_samples, n_channels = int(item.NumberOfWaveformSamples), int(item.NumberOfWaveformChannels)
    needed = n_samples * n_channels * int(item.WaveformBitsAllocated) // 8
    described = len(item.ChannelDefinitionSequence)
    if described > n_channels:
        raise RecordingError(
            f"{where} describes {described} channels and holds {n_channels}. Export it again from "
            "where it is stored."
        )
    held = len(item.WaveformData)
    if not 0 < needed <= held:
        raise RecordingError(
            f"{where} states {n_samples} samples of {n_channels} channels in {needed} bytes and "
            f"holds {held}. Export it again from where it is stored."
        )


def _stored(name: str, item: Any, big_endian: bool) -> NDArray[Any]:
    """Samples as stored, shape (n_samples, n_columns); a view of the file's bytes."""
    from pydicom.waveforms.numpy_handler import WAVEFORM_DTYPES

    interpretation = str(item.WaveformSampleInterpretation)
    if interpretation in COMPANDED:
        raise RecordingError(
            f"{name}: the samples are companded ({COMPANDED[interpretation]}), which an ECG's are "
            "not. Export the recording again with 16-bit samples."
        )
    form = np.dtype(WAVEFORM_DTYPES[(int(item.WaveformBitsAllocated), interpretation)])
    if big_endian:
        form = form.newbyteorder(">")
    shape = int(item.NumberOfWaveformSamples), int(item.NumberOfWaveformChannels)
    count = shape[0] * shape[1]
    return np.frombuffer(item.WaveformData, form, count=count).reshape(shape)


def _in_mv(scaling: _Scaling, first: int, last: int) -> NDArray[np.float64]:
    stored = scaling.stored[first:last, scaling.column]
    # 12- to 15-bit samples lie in the low bits of 16; a writer may leave the high ones empty.
    if scaling.unused_bits > 0:
        stored = (stored << scaling.unused_bits) >> scaling.unused_bits
    samples = stored.astype(np.float64)
    samples_mv = scaling.sign * (samples * scaling.step_mv + scaling.baseline_mv)
    if scaling.padding is not None:
        samples_mv[samples == scaling.padding] = np.nan
    return samples_mv


def _bits_stored(definitions: Any, stored: NDArray[Any]) -> int:
    return min(
        (
            int(definition.WaveformBitsStored)
            for definition in definitions
            if definition.get("WaveformBitsStored")
        ),
        default=stored.dtype.itemsize * 8,
    )


def _filters(definitions: Any) -> Filters:
    """The narrowest band that any channel states: its most filtered lead limits a recording."""

    def stated(keyword: str) -> list[float]:
        numbers = [_number(definition, keyword, 0.0) for definition in definitions]
        return [number for number in numbers if np.isfinite(number) and number > 0]

    return Filters(
        high_pass_hz=max(stated("FilterLowFrequency"), default=None),
        low_pass_hz=min(stated("FilterHighFrequency"), default=None),
        notch_hz=max(stated("NotchFilterFrequency"), default=None),
    )


def _padding_number(padding: Any, group: Any) -> float:
    if isinstance(padding, bytes):
        signed = str(group.WaveformSampleInterpretation).startswith("S")
        return float(int.from_bytes(padding, "little", signed=signed))
    return float(padding)


def _lead_of(definition: Any) -> tuple[str, float] | None:
    """The lead of a channel, by its code if that is known, else by the code's meaning."""
    for code in definition.get("ChannelSourceSequence") or []:
        by_code = _lead_of_code(str(code.get("CodeValue") or ""))
        if by_code is not None:
            return by_code
        by_meaning = lead_in_sentence(str(code.get("CodeMeaning") or ""))
        if by_meaning is not None:
            return by_meaning
    return lead_in_sentence(str(definition.get("ChannelLabel") or ""))


def _lead_of_code(code: str) -> tuple[str, float] | None:
    """The lead of ``"2:131079"`` or ``"2:7"`` (MDC) and of ``"5.6.3-9-7"`` (SCP-ECG)."""
    found = re.fullmatch(r"(?:2:|5\.6\.3-9-)?(\d+)", code.strip())
    return None if found is None else lead_of_code(int(found[1]))


def _unit_mv(name: str, lead: str, definition: Any) -> float:
    units = definition.get("ChannelSensitivityUnitsSequence") or []
    code = str(units[0].get("CodeValue") or "") if units else ""
    factor = MILLIVOLTS_PER_UNIT.get(code)
    if factor is None:
        stated = f"in the unit '{shown(code)}', which is no voltage" if code else "without a unit"
        raise RecordingError(f"{name}: lead {lead} is stored {stated}. Export it in microvolts.")
    return factor


def _number(definition: Any, keyword: str, default: float) -> float:
    value = definition.get(keyword)
    return default if value is None else float(value)
