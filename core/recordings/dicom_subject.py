"""What a DICOM object says of the person, the time and where the electrodes were put."""

from __future__ import annotations

from datetime import date, datetime
from typing import Any

from core.recordings.recording import Subject
from core.recordings.subject_words import age_of_word, sex_of_word

# Codes of CID 3263 (MDC partition 10): standard, Mason-Likar, raised one interspace, and others.
ELECTRODE_PLACEMENTS = frozenset(str(code) for code in range(666624, 666656))


def subject_of(dataset: Any) -> Subject:
    """The person."""
    age_years = age_of_word(str(dataset.get("PatientAge") or ""))
    born = _date_of(dataset.get("PatientBirthDate"))
    recorded = recorded_at_of(dataset)
    if age_years is None and born is not None and recorded is not None:
        age_years = max(0.0, (recorded.date() - born).days / 365.25)
    return Subject(
        id=str(dataset.get("PatientID") or "").strip() or None,
        name=_readable_name(dataset.get("PatientName")),
        sex=sex_of_word(str(dataset.get("PatientSex") or "")),
        age_years=age_years,
        born_on=born,
    )


def electrode_placement_of(dataset: Any) -> str | None:
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


def recorded_at_of(dataset: Any) -> datetime | None:
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
