"""Write twelve leads as a DICOM 12-Lead ECG object, by pydicom."""

from __future__ import annotations

from copy import deepcopy
from datetime import datetime
from pathlib import Path

import numpy as np
from numpy.typing import NDArray
from pydicom.dataset import Dataset, FileMetaDataset
from pydicom.sequence import Sequence
from pydicom.uid import UID, ExplicitVRBigEndian, ExplicitVRLittleEndian, generate_uid

TWELVE_LEAD_CLASS = "1.2.840.10008.5.1.4.1.1.9.1.1"
# MDC codes of the leads, DICOM CID 3001.
MDC_CODES = {
    "I": "2:1",
    "II": "2:2",
    "V1": "2:3",
    "V2": "2:4",
    "V3": "2:5",
    "V4": "2:6",
    "V5": "2:7",
    "V6": "2:8",
    "III": "2:61",
    "aVR": "2:62",
    "aVL": "2:63",
    "aVF": "2:64",
}


def coded(value: str, scheme: str, meaning: str) -> Sequence:
    """A sequence of one coded entry."""
    entry = Dataset()
    entry.CodeValue, entry.CodingSchemeDesignator, entry.CodeMeaning = value, scheme, meaning
    return Sequence([entry])


def waveform_group(
    counts: NDArray[np.int16], leads: list[str], rate_hz: float, *, step_uv: float
) -> Dataset:
    """One multiplex group of 16-bit samples, shape (n_samples, n_leads)."""
    group = Dataset()
    group.WaveformOriginality = "ORIGINAL"
    group.MultiplexGroupLabel = "RHYTHM"
    group.MultiplexGroupTimeOffset = "0"
    group.NumberOfWaveformChannels = len(leads)
    group.NumberOfWaveformSamples = counts.shape[0]
    group.SamplingFrequency = f"{rate_hz:g}"
    group.WaveformBitsAllocated = 16
    group.WaveformSampleInterpretation = "SS"
    group.ChannelDefinitionSequence = Sequence([_channel(lead, step_uv) for lead in leads])
    group.WaveformData = counts.astype("<i2").tobytes()
    return group


def _channel(lead: str, step_uv: float) -> Dataset:
    channel = Dataset()
    channel.ChannelSourceSequence = coded(MDC_CODES[lead], "MDC", f"Lead {lead}")
    channel.ChannelSensitivity = f"{step_uv:g}"
    channel.ChannelSensitivityUnitsSequence = coded("uV", "UCUM", "microvolt")
    channel.ChannelSensitivityCorrectionFactor = "1"
    channel.ChannelBaseline = "0"
    channel.ChannelSampleSkew = "0"
    channel.WaveformBitsStored = 16
    return channel


def write_dicom(
    path: Path,
    groups: list[Dataset],
    *,
    patient_id: str,
    patient_name: str,
    sex: str,
    age_years: int,
    recorded_at: datetime,
    syntax: UID = ExplicitVRLittleEndian,
) -> None:
    """Write an object with the given waveform groups; the same input gives the same bytes."""
    dataset = Dataset()
    uid = generate_uid(entropy_srcs=[path.stem, recorded_at.isoformat()])
    dataset.SOPClassUID, dataset.SOPInstanceUID = TWELVE_LEAD_CLASS, uid
    dataset.StudyInstanceUID = generate_uid(entropy_srcs=["study", path.stem])
    dataset.SeriesInstanceUID = generate_uid(entropy_srcs=["series", path.stem])
    dataset.Modality = "ECG"
    dataset.PatientID, dataset.PatientName = patient_id, patient_name
    dataset.PatientSex, dataset.PatientAge = sex, f"{age_years:03d}Y"
    dataset.PatientBirthDate = ""
    dataset.StudyDate = dataset.ContentDate = recorded_at.strftime("%Y%m%d")
    dataset.StudyTime = dataset.ContentTime = recorded_at.strftime("%H%M%S")
    dataset.AcquisitionDateTime = recorded_at.strftime("%Y%m%d%H%M%S")
    if syntax == ExplicitVRBigEndian:  # pydicom writes samples as they are
        groups = [deepcopy(group) for group in groups]
        for group in groups:
            group.WaveformData = np.frombuffer(group.WaveformData, "<i2").astype(">i2").tobytes()
    dataset.WaveformSequence = Sequence(groups)
    dataset.file_meta = FileMetaDataset()
    dataset.file_meta.TransferSyntaxUID = syntax
    dataset.save_as(path, enforce_file_format=True)
