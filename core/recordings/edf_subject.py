"""What the header of an EDF or BDF file says of the person, the time and the filters."""

from __future__ import annotations

import contextlib
import re
from collections.abc import Iterable
from datetime import date, datetime, timedelta
from typing import TYPE_CHECKING

from core.recordings.recording import Filters, Subject
from core.recordings.subject_words import OLDEST_YEARS, known_word, sex_of_word

if TYPE_CHECKING:
    from edfio import Bdf, Edf

# EDF+ orders the patient field: code, sex, birth date, name; "X" stands for what is unknown.
# Writers of plain EDF often keep to that order too; some of EDF+ stop halfway.
_BIRTH_DATE = r"(?:X|\d{1,2}-[A-Za-z]{3}-\d{4})"
_ORDERED = re.compile(rf"\S+ [FMXfmx] {_BIRTH_DATE} \S+(?: .*)?")
_BEGUN = re.compile(rf"\S+(?: [FMXfmx](?: {_BIRTH_DATE})?)?")
# Day, month and year, or hour, minute and second.
_THREE_NUMBERS = re.compile(r" ?(\d{1,2})[.:/-] ?(\d{1,2})[.:/-] ?(\d{1,2})")
_FIRST_CENTURY_YEAR = 85
# The date that EDF+ prescribes where the true one is unknown.
_NO_DATE = date(1985, 1, 1)
_CUTOFF = re.compile(r"(HP|LP|N)\s*:\s*(\d+(?:[.,]\d+)?)\s*(mHz|Hz)", re.IGNORECASE)


def text_of(field: str) -> str:
    """A header field that was decoded byte by byte, which some writers fill with UTF-8."""
    with contextlib.suppress(UnicodeError):
        field = field.encode("latin-1").decode("utf-8")
    return field.strip(" \0")


def subject_of(edf: Edf | Bdf, *, is_plus: bool, recorded_at: datetime | None) -> Subject:
    """The person, by EDF+'s ordered field; free text is taken as an identifier."""
    text = text_of(edf.local_patient_identification)
    if not (_ORDERED.fullmatch(text) or (is_plus and _BEGUN.fullmatch(text))):
        return Subject(id=known_word(text))
    patient = edf.patient
    born_on = None
    with contextlib.suppress(ValueError):
        born_on = patient.birthdate
    return Subject(
        id=known_word(text_of(patient.code)),
        # EDF+ writes spaces as underscores; an identifier may have some of its own.
        name=known_word(text_of(patient.name).replace("_", " ")),
        sex=sex_of_word(patient.sex),
        age_years=_age_years(born_on, recorded_at),
        born_on=born_on,
    )


def recorded_at_of(edf: Edf | Bdf, header: bytes, *, onset_s: float) -> datetime | None:
    """Start of the first data record; None where the file's date is left open.

    Parameters
    ----------
    header : bytes
        The file's own, which holds the plain date and the time of day.
    onset_s : float
        What the first data record adds to it.
    """
    day = _day_of(edf, header)
    if day is None:
        return None
    start = datetime(day.year, day.month, day.day)
    # An impossible time of day leaves the date standing.
    with contextlib.suppress(ValueError, OverflowError):
        hour, minute, second = _three_numbers(header[176:184])
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


def _day_of(edf: Edf | Bdf, header: bytes) -> date | None:
    """The date of EDF+'s recording field, which has four digits of the year; else the header's."""
    words = text_of(edf.local_recording_identification).split()
    if words[:2] == ["Startdate", "X"]:
        return None
    with contextlib.suppress(ValueError):
        return edf.recording.startdate
    try:
        day, month, year = _three_numbers(header[168:176])
        plain = date(year + (1900 if year >= _FIRST_CENTURY_YEAR else 2000), month, day)
    except ValueError:
        return None
    return None if plain == _NO_DATE else plain


def _three_numbers(field: bytes) -> tuple[int, int, int]:
    found = _THREE_NUMBERS.fullmatch(field.decode("latin-1").strip("\0"))
    if found is None:
        raise ValueError(field)
    return int(found[1]), int(found[2]), int(found[3])


def _age_years(born_on: date | None, recorded_at: datetime | None) -> float | None:
    if born_on is None or recorded_at is None:
        return None
    years = (recorded_at.date() - born_on).days / 365.25
    return years if 0 <= years <= OLDEST_YEARS else None
