"""What the comment lines of a table or a WFDB header say, and what a written copy says in them."""

from __future__ import annotations

import math
import re
from collections.abc import Iterable, Iterator
from datetime import date, datetime

from core.recordings.recording import Filters, Recording, Subject
from core.recordings.subject_words import age_of_word, sex_of_word

DELIMITERS = ("\t", ";", ",")
COMMENT_MARK = "#"
LONGEST_HEADING = 80
_RATE_KEYS = (
    "sampling rate hz", "sampling rate", "sample rate hz", "sample rate", "sampling frequency hz",
    "sampling frequency", "rate hz", "fs",
)  # fmt: skip
_RATE = re.compile(r"(\d{1,9}(?:[.,]\d{1,17})?)\s*(k?hz)?", re.IGNORECASE)


class Comments:
    """What comment lines say, as ``# key: value``, ``<key>: value`` or ``key=value``."""

    def __init__(self, lines: Iterable[str]) -> None:
        self._said: dict[str, str] = {}
        for line in lines:
            key, value = self._key_and_value(line)
            if key and value:
                self._said.setdefault(key, value)

    @staticmethod
    def _key_and_value(line: str) -> tuple[str, str]:
        """Both plain; a spreadsheet fills a comment line up with empty cells."""
        text = line.strip().rstrip("".join(DELIMITERS)).strip('" \t').lstrip(COMMENT_MARK)
        key, colon, value = text.partition(":")
        if not colon:
            key, colon, value = text.partition("=")
        # What is a comment on its own may be long; a key is not.
        words = re.sub(r"[\s_<>-]+", " ", key[:LONGEST_HEADING]).strip().lower()
        return (words, value.strip()) if colon else ("", "")

    def first(self, *keys: str) -> str | None:
        """The value of the first of the keys that is stated."""
        return next((self._said[key] for key in keys if key in self._said), None)

    @property
    def unit(self) -> str | None:
        """The unit of all leads, as written."""
        return self.first("unit", "units")

    @property
    def sampling_rate_hz(self) -> float | None:
        """The stated rate."""
        found = _RATE.fullmatch(self.first(*_RATE_KEYS) or "")
        if found is None:
            return None
        rate = float(found[1].replace(",", "."))
        return rate * 1000 if (found[2] or "").lower() == "khz" else rate

    @property
    def counts_per_mv(self) -> list[float]:
        """Steps of the quantisation in one mV, of all leads or one a lead; empty where unsaid."""
        numbers = [_positive(word) for word in (self.first("counts per mv") or "").split()]
        return [number for number in numbers if number is not None]

    @property
    def leads_derived(self) -> list[str]:
        """Leads that were computed from the others when the file was written."""
        return (self.first("leads derived") or "").replace(",", " ").split()

    @property
    def recorded_at(self) -> datetime | None:
        """Start of the recording; the offset from UTC is dropped."""
        said = self.first("recorded at", "recorded", "recording date", "start time", "date")
        try:
            return datetime.fromisoformat(said or "").replace(tzinfo=None)
        except ValueError:
            return None

    @property
    def filters(self) -> Filters:
        """The filters that the signal went through."""
        return Filters(
            *(_positive(self.first(f"{kind} hz")) for kind in ("high pass", "low pass", "notch"))
        )

    @property
    def electrode_placement(self) -> str | None:
        """Code of the electrode placement."""
        return self.first("electrode placement")

    def subject(self, recorded_at: datetime | None) -> Subject:
        """The person; a birth date gives the age where none is stated."""
        born_on = self._born_on()
        age_years = age_of_word(self.first("age"))
        if age_years is None and born_on is not None and recorded_at is not None:
            age_years = max(0.0, (recorded_at.date() - born_on).days / 365.25)
        return Subject(
            id=self.first("patient id", "subject id", "patient", "subject"),
            name=self.first("name", "patient name"),
            sex=sex_of_word(self.first("sex", "gender")),
            age_years=age_years,
            born_on=born_on,
        )

    def _born_on(self) -> date | None:
        try:
            return date.fromisoformat(self.first("birth date", "date of birth", "born on") or "")
        except ValueError:
            return None


def _positive(word: str | None) -> float | None:
    try:
        number = float(word or "")
    except ValueError:
        return None
    return number if math.isfinite(number) and number > 0 else None


def said_of(recording: Recording) -> Iterator[tuple[str, str]]:
    """Keys and values of what is known of the person, the filters and the electrodes."""
    subject, filters = recording.subject, recording.filters
    said = {
        "patient id": subject.id,
        "name": subject.name,
        "sex": subject.sex,
        "age": None if subject.age_years is None else f"{subject.age_years:g}",
        "birth date": subject.born_on and subject.born_on.isoformat(),
        "high_pass_hz": filters.high_pass_hz and repr(filters.high_pass_hz),
        "low_pass_hz": filters.low_pass_hz and repr(filters.low_pass_hz),
        "notch_hz": filters.notch_hz and repr(filters.notch_hz),
        "electrode placement": recording.electrode_placement,
    }
    for key, value in said.items():
        # A value of several lines would end up among what follows.
        plain = " ".join((value or "").split())
        if plain:
            yield key, plain
