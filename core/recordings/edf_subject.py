"""What the header of an EDF or BDF file says of the person, the time and the filters."""

from __future__ import annotations

import contextlib
import re
from collections.abc import Iterable
from datetime import date, datetime, timedelta
from typing import TYPE_CHECKING

from core.recordings.recording import Filters, Subject
from core.recordings.subject_words import OLDEST_YEARS, sex_of_word

if TYPE_CHECKING:
    from edfio import Bdf, Edf

# EDF+ orders the patient field: code, sex, birth date, name; "X" stands for what is unknown.
# Writers of plain EDF often keep to that order too.
_ORDERED = re.compile(r"\S+ [FMXfmx] (?:X|\d{1,2}-[A-Za-z]{3}-\d{4}) \S+(?: .*)?")
_CLOCK = re.compile(r"(\d{1,2})[.:](\d{1,2})[.:](\d{1,2})")
# The date that EDF+ prescribes where the true one is unknown.
_NO_DATE = date(1985, 1, 1)
_CUTOFF = re.compile(r"(HP|LP|N)\s*:\s*(\d+(?:[.,]\d+)?)\s*(mHz|Hz)", re.IGNORECASE)


def text_of(field: str) -> str:
    """A header field that was decoded byte by byte, which some writers fill with UTF-8."""
    with contextlib.suppress(UnicodeError):
        field = field.encode("latin-1").decode("utf-8")
    return field.strip(" \0")


def subject_of(edf: Edf | Bdf, *, is_plus: bool, recorded_at: datetime | None) -> Subject:
    """The person, by EDF+'s ordered field; a plain EDF's free text is taken as an identifier."""
    text = text_of(edf.local_patient_identification)
    if not (is_plus or _ORDERED.fullmatch(text)):
        return Subject(id=_known(text))
    patient = edf.patient
    born_on = None
    with contextlib.suppress(ValueError):
        born_on = patient.birthdate
    return Subject(
        id=_known(text_of(patient.code)),
        name=_known(text_of(patient.name)),
        sex=sex_of_word(patient.sex),
        age_years=_age_years(born_on, recorded_at),
        born_on=born_on,
    )


def recorded_at_of(edf: Edf | Bdf, header: bytes, *, onset_s: float) -> datetime | None:
    """Start of the first data record; None where the file's date is left open.

    Parameters
    ----------
    header : bytes
        The file's own, which holds the time of day.
    onset_s : float
        What the first data record adds to it.
    """
    day = _day_of(edf)
    if day is None:
        return None
    found = _CLOCK.fullmatch(header[176:184].decode("latin-1").strip(" \0"))
    hour, minute, second = (int(part) for part in found.groups()) if found else (0, 0, 0)
    # An impossible time of day leaves the date standing.
    start = datetime(day.year, day.month, day.day)
    with contextlib.suppress(ValueError, OverflowError):
        start = start.replace(hour=hour, minute=minute, second=second)
        start += timedelta(seconds=onset_s)
    return start


def filters_of(prefilterings: Iterable[str]) -> Filters:
    """The narrowest band that any lead states, as in ``"HP:0.05Hz LP:150Hz N:50Hz"``."""
    cutoffs: dict[str, list[float]] = {"HP": [], "LP": [], "N": []}
    for said in prefilterings:
        for kind, number, unit in _CUTOFF.findall(said):
            hz = float(number.replace(",", ".")) * (1e-3 if unit.lower() == "mhz" else 1.0)
            if hz > 0:
                cutoffs[kind.upper()].append(hz)
    return Filters(
        high_pass_hz=max(cutoffs["HP"], default=None),
        low_pass_hz=min(cutoffs["LP"], default=None),
        notch_hz=max(cutoffs["N"], default=None),
    )


def _day_of(edf: Edf | Bdf) -> date | None:
    """The date of EDF+'s recording field, which has four digits of the year; else the header's."""
    words = text_of(edf.local_recording_identification).split()
    if words[:1] == ["Startdate"]:
        if words[1:2] == ["X"]:
            return None
        with contextlib.suppress(ValueError):
            return edf.recording.startdate
    try:
        day = edf.startdate
    except ValueError:
        return None
    return None if day == _NO_DATE else day


def _known(text: str) -> str | None:
    """The text, EDF+'s underscores back as spaces; None where it is only ``X`` and spaces."""
    return None if not text.strip("Xx _") else text.replace("_", " ").strip()


def _age_years(born_on: date | None, recorded_at: datetime | None) -> float | None:
    if born_on is None or recorded_at is None:
        return None
    years = (recorded_at.date() - born_on).days / 365.25
    return years if 0 <= years <= OLDEST_YEARS else None
