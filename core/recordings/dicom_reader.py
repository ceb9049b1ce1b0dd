"""DICOM waveform objects, read through pydicom: 12-Lead ECG and General ECG.

A waveform object holds one or more multiplex groups, each with channels of one sampling
rate. Value in a channel's unit = (stored sample x sensitivity x correction factor) +
baseline (DICOM PS3.3, C.10.9.1.4.2).
"""

from __future__ import annotations

import re
from dataclasses import dataclass
from datetime import date, datetime
from pathlib import Path
from typing import Any

import numpy as np
from numpy.typing import NDArray

from core.errors import RecordingError
from core.recordings.assemble import Channel, assemble_recording, refuse_rate
from core.recordings.dicom_file import is_big_endian, read_dataset_of
from core.recordings.fingerprint import sha256_of_files
from core.recordings.lead_numbers import lead_of_code
from core.recordings.leads import (
    CHEST_LEADS,
    can_derive_limb_leads,
    lead_in_sentence,
)
from core.recordings.quietly import quietly
from core.recordings.recording import Filters, Recording, Source, Subject
from core.recordings.shown import shown
from core.recordings.size_limit import MOST_VALUES, refuse_too_long
from core.recordings.subject_words import age_of_word, sex_of_word

FORMAT_NAME = "DICOM"
TWELVE_LEAD_CLASS = "1.2.840.10008.5.1.4.1.1.9.1.1"
GENERAL_CLASS = "1.2.840.10008.5.1.4.1.1.9.1.2"

# Codes of CID 3263 (MDC partition 10): standard, Mason-Likar, raised one interspace, and others.
ELECTRODE_PLACEMENTS = frozenset(str(code) for code in range(666624, 666656))
# UCUM codes; the writing with a micro sign is common in real files.
MILLIVOLTS_PER_UNIT = {"uV": 1e-3, "µV": 1e-3, "μV": 1e-3, "mV": 1.0, "V": 1e3, "nV": 1e-6}


def looks_like_dicom(start: bytes) -> bool:
    """Whether the first bytes of a file are those of a DICOM file."""
    return start[128:132] == b"DICM"


@dataclass(frozen=True, slots=True, eq=False)
class _Group:
    """One multiplex group, decoded."""

    channels: dict[str, Channel]
    sampling_rate_hz: float
    n_samples: int
    offset_ms: float
    original: bool
    filters: Filters

    @property
    def complete(self) -> bool:
        has_chest = all(lead in self.channels for lead in CHEST_LEADS)
        return has_chest and can_derive_limb_leads(self.channels)

    @property
    def duration_s(self) -> float:
        # A rate of zero is refused by name, later.
        return self.n_samples / self.sampling_rate_hz if self.sampling_rate_hz > 0 else 0.0

    def simultaneous_with(self, other: _Group) -> bool:
        return (self.sampling_rate_hz, self.n_samples, self.offset_ms, self.original) == (
            other.sampling_rate_hz,
            other.n_samples,
            other.offset_ms,
            other.original,
        )


def read_dicom(path: Path) -> Recording:
    """Read the rhythm group of a DICOM ECG waveform object.

    Raises
    ------
    RecordingError
        If the object is damaged, too large or no ECG waveform, or no group holds twelve leads at
        once.
    OSError
        If the file cannot be opened.
    """
    name = path.name
    try:
        with quietly():  # pydicom warns of much that it mends, or that is refused below
            return _recording(path)
    except (RecordingError, OSError, MemoryError):
        raise
    except Exception as error:  # any kind: the parser meets bytes that nobody has checked
        raise RecordingError(
            f"{name}: the DICOM file is damaged. Export it again from where it is stored."
        ) from error


def _recording(path: Path) -> Recording:
    name = path.name
    dataset = read_dataset_of(path)
    _refuse_size(name, dataset)
    groups = [
        _decode_group(name, dataset, index)
        for index in range(len(dataset.get("WaveformSequence") or []))
    ]
    if not groups:
        kind = shown(str(dataset.get("Modality") or "")) or "no modality"
        raise RecordingError(
            f"{name}: this DICOM object ({kind}) holds no waveform. Choose the ECG waveform object."
        )
    group = _rhythm_group(name, groups)
    return assemble_recording(
        list(group.channels.values()),
        sampling_rate_hz=group.sampling_rate_hz,
        source=Source(name, FORMAT_NAME, sha256_of_files([path])),
        subject=_subject(dataset),
        recorded_at=_recorded_at(dataset),
        filters=group.filters,
        electrode_placement=_electrode_placement(dataset),
    )


def _refuse_size(name: str, dataset: Any) -> None:
    """Refuse more samples than fit, in all groups together."""
    for group in dataset.get("WaveformSequence") or []:
        n_leads, n_samples = int(group.NumberOfWaveformChannels), int(group.NumberOfWaveformSamples)
        rate_hz = float(group.SamplingFrequency)
        if n_leads * n_samples > MOST_VALUES:
            refuse_rate(name, rate_hz)
        refuse_too_long(name, n_leads=n_leads, n_samples=n_samples, rate_hz=rate_hz)


def _rhythm_group(name: str, groups: list[_Group]) -> _Group:
    """The longest group recorded as such that holds a 12-lead ECG.

    Leads spread over several groups are joined where the groups were recorded at once. A
    derived group (a representative beat) is never taken for the rhythm.
    """
    joined: list[_Group] = []
    for group in groups:
        partner = next((j for j in joined if j.simultaneous_with(group)), None)
        if partner is None:
            joined.append(group)
        else:
            for lead, channel in group.channels.items():
                partner.channels.setdefault(lead, channel)
    usable = [group for group in joined if group.complete and group.original]
    if usable:
        return max(usable, key=lambda group: group.duration_s)
    if any(group.complete for group in joined):
        raise RecordingError(
            f"{name}: the file holds only a derived beat, no rhythm. "
            "Export the object with its rhythm waveform."
        )
    found = sorted({lead for group in joined for lead in group.channels})
    raise RecordingError(
        f"{name}: no waveform group of the file holds V1 to V6 and two limb leads recorded "
        f"together (leads found: {', '.join(found) or 'none'}). Choose a 12-lead recording."
    )


def _decode_group(name: str, dataset: Any, index: int) -> _Group:
    from pydicom.waveforms.numpy_handler import multiplex_array

    group = dataset.WaveformSequence[index]
    raw = multiplex_array(dataset, index, as_raw=True)
    if is_big_endian(dataset):  # pydicom takes all samples for little-endian
        raw = raw.byteswap()
    stored = _sign_extended(raw, group)
    channels: dict[str, Channel] = {}
    for column, definition in enumerate(group.ChannelDefinitionSequence):
        found = _lead_of(definition)
        if found is None or found[0] in channels:
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
        samples_mv = sign * (stored[:, column] * step_mv + baseline_mv)
        padding = group.get("WaveformPaddingValue")
        if padding is not None:
            samples_mv[stored[:, column] == _padding_number(padding, group)] = np.nan
        channels[lead] = Channel(lead, samples_mv, 1.0 / abs(step_mv))
    return _Group(
        channels=channels,
        sampling_rate_hz=float(group.SamplingFrequency),
        n_samples=int(stored.shape[0]),
        offset_ms=float(group.get("MultiplexGroupTimeOffset") or 0.0),
        original=str(group.get("WaveformOriginality") or "ORIGINAL").upper() == "ORIGINAL",
        filters=_filters(group.ChannelDefinitionSequence),
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


def _sign_extended(stored: NDArray[Any], group: Any) -> NDArray[np.float64]:
    """Samples as floats, bits above the stored ones replaced by the sign.

    12- to 15-bit samples lie in the low bits of 16; a writer may leave the high ones empty.
    """
    bits = min(
        (
            int(definition.WaveformBitsStored)
            for definition in group.ChannelDefinitionSequence
            if definition.get("WaveformBitsStored")
        ),
        default=stored.dtype.itemsize * 8,
    )
    unused = stored.dtype.itemsize * 8 - bits
    if unused > 0:
        stored = (stored << unused) >> unused
    return stored.astype(np.float64)


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


def _subject(dataset: Any) -> Subject:
    age_years = age_of_word(str(dataset.get("PatientAge") or ""))
    born = _date_of(dataset.get("PatientBirthDate"))
    recorded = _recorded_at(dataset)
    if age_years is None and born is not None and recorded is not None:
        age_years = max(0.0, (recorded.date() - born).days / 365.25)
    return Subject(
        id=str(dataset.get("PatientID") or "").strip() or None,
        name=_readable_name(dataset.get("PatientName")),
        sex=sex_of_word(str(dataset.get("PatientSex") or "")),
        age_years=age_years,
        born_on=born,
    )


def _electrode_placement(dataset: Any) -> str | None:
    """Code of the electrode placement that the acquisition context states."""
    for item in dataset.get("AcquisitionContextSequence") or []:
        for code in item.get("ConceptCodeSequence") or []:
            value = str(code.get("CodeValue") or "").removeprefix("10:")
            if value in ELECTRODE_PLACEMENTS:
                return value
    return None


def _readable_name(person: Any) -> str | None:
    parts = str(person or "").replace("^", " ").split()
    return " ".join(parts) or None


def _date_of(text: Any) -> date | None:
    try:
        return datetime.strptime(str(text or "").strip(), "%Y%m%d").date()
    except ValueError:
        return None


def _recorded_at(dataset: Any) -> datetime | None:
    """Acquisition time, else the content's, else the study's; the offset from UTC is dropped."""
    candidates = [str(dataset.get("AcquisitionDateTime") or "")]
    for kind in ("Acquisition", "Content", "Study"):
        day = str(dataset.get(f"{kind}Date") or "")
        candidates.append(day + str(dataset.get(f"{kind}Time") or "") if day else "")
    for candidate in candidates:
        digits = candidate.split(".")[0].split("+")[0].split("-")[0].strip()
        for form in ("%Y%m%d%H%M%S", "%Y%m%d%H%M", "%Y%m%d"):
            try:
                return datetime.strptime(digits, form)
            except ValueError:
                continue
    return None
