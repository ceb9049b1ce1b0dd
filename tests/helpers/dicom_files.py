"""DICOM objects of an invented person, written by pydicom."""

from __future__ import annotations

from datetime import datetime
from pathlib import Path

from pydicom.dataset import Dataset

from sample_records.maker.dicom_file import write_dicom


def write_object(
    path: Path,
    *groups: Dataset,
    recorded_at: datetime = datetime(2030, 5, 6, 7, 8, 9),
    **said: object,
) -> Path:
    """An object with these waveform groups; its path. *said* goes to `write_dicom`."""
    write_dicom(
        path,
        list(groups),
        patient_id="P-7",
        patient_name="Tester^Tess",
        sex="F",
        age_years=42,
        recorded_at=recorded_at,
        **said,
    )
    return path
