"""What section 1 of an SCP-ECG record says of the person and the recording."""

from __future__ import annotations

import struct
from collections.abc import Iterator
from dataclasses import dataclass
from datetime import date, datetime

from core.recordings.recording import Filters, Subject
from core.recordings.subject_words import OLDEST_YEARS, known_word

LAST_NAME, FIRST_NAME, PATIENT_ID, AGE, BIRTH_DATE, SEX = 0, 1, 2, 4, 5, 8
RECORDED_ON, RECORDED_AT, HIGH_PASS, LOW_PASS = 25, 26, 27, 28
END = 255
_DAYS_IN_UNIT = {1: 365.25, 2: 365.25 / 12, 3: 7.0, 4: 1.0, 5: 1.0 / 24}
_SEXES = {1: "male", 2: "female"}


@dataclass(frozen=True, slots=True)
class Said:
    """Subject, time, and the filters that the recorder applied."""

    subject: Subject
    recorded_at: datetime | None
    filters: Filters


def read_header(content: bytes) -> Said:
    """Read the tags of section 1; what is cut off or impossible counts as unsaid."""
    said: dict[int, bytes] = {}
    for tag, value in _tags(content):
        said.setdefault(tag, value)
    recorded_on, born_on = (_date(said.get(tag, b"")) for tag in (RECORDED_ON, BIRTH_DATE))
    name = " ".join(
        word for word in (_text(said.get(FIRST_NAME)), _text(said.get(LAST_NAME))) if word
    )
    return Said(
        subject=Subject(
            id=known_word(_text(said.get(PATIENT_ID))),
            name=name or None,
            sex=_SEXES.get(said[SEX][0]) if said.get(SEX) else None,
            age_years=_age(said.get(AGE, b""), born_on, recorded_on),
            born_on=born_on,
        ),
        recorded_at=_moment(recorded_on, said.get(RECORDED_AT, b"")),
        filters=Filters(
            high_pass_hz=_number(said.get(HIGH_PASS), 0.01),
            low_pass_hz=_number(said.get(LOW_PASS), 1.0),
        ),
    )


def _tags(content: bytes) -> Iterator[tuple[int, bytes]]:
    at = 0
    while at + 3 <= len(content) and content[at] != END:
        (length,) = struct.unpack_from("<H", content, at + 1)
        yield content[at], content[at + 3 : at + 3 + length]
        at += 3 + length


def _text(value: bytes | None) -> str | None:
    text = (value or b"").split(b"\0")[0].decode("latin-1").strip()
    return text or None


def _number(value: bytes | None, unit: float) -> float | None:
    if value is None or len(value) < 2:
        return None
    number = struct.unpack_from("<H", value)[0] * unit
    return number or None


def _date(value: bytes) -> date | None:
    try:
        return date(*struct.unpack_from("<HBB", value))
    except (struct.error, ValueError):
        return None


def _moment(day: date | None, value: bytes) -> datetime | None:
    if day is None:
        return None
    try:
        hour, minute, second = struct.unpack_from("<BBB", value)
        return datetime(day.year, day.month, day.day, hour, minute, second)
    except (struct.error, ValueError):
        return datetime(day.year, day.month, day.day)


def _age(value: bytes, born: date | None, recorded_on: date | None) -> float | None:
    years: float | None = None
    if len(value) >= 3:
        number, unit = struct.unpack_from("<HB", value)
        if number and unit in _DAYS_IN_UNIT:
            years = number * _DAYS_IN_UNIT[unit] / 365.25
    if years is None and born is not None and recorded_on is not None:
        years = (recorded_on - born).days / 365.25
    return years if years is not None and 0 <= years <= OLDEST_YEARS else None
