"""The header row of a table of samples, and the comment lines around it."""

from __future__ import annotations

import csv
import math
import re
from collections.abc import Iterable
from dataclasses import dataclass
from datetime import date, datetime

from core.recordings.leads import TWELVE_LEADS, lead_of_label
from core.recordings.recording import Filters, Subject
from core.recordings.subject_words import subject_of_comments
from core.recordings.units import MILLIVOLTS_PER_UNIT

DELIMITERS = ("\t", ";", ",")
FEWEST_LEADS = 3
LONGEST_HEADING = 80
COMMENT_MARK = "#"

_UNIT_WORDS = MILLIVOLTS_PER_UNIT | {
    f"{prefix}volt{plural}": factor
    for prefix, factor in {"": 1e3, "milli": 1.0, "micro": 1e-3, "nano": 1e-6}.items()
    for plural in ("", "s")
}
_SECONDS_PER_UNIT = {
    **dict.fromkeys(("s", "sec", "secs", "second", "seconds"), 1.0),
    **dict.fromkeys(("ms", "msec", "msecs", "millisecond", "milliseconds"), 1e-3),
    **dict.fromkeys(("us", "µs", "μs", "usec", "microsecond", "microseconds"), 1e-6),
}
_TIME_WORDS = {"time", "t", "timestamp", "elapsed", "elapsed time", "zeit"}
# "I (mV)" and "V1 [uV]"; "V1_uV", "V1/uV" and "V1 uV".
_BRACKETED = re.compile(r"([^(\[]*)[(\[]([^)\]]*)[)\]]\s*")
_APPENDED = re.compile(r"(.+)[\s_/]([^\s_/]+)")
_RATE_KEYS = (
    "sampling rate hz", "sampling rate", "sample rate hz", "sample rate", "sampling frequency hz",
    "sampling frequency", "rate hz", "fs",
)  # fmt: skip
_RATE = re.compile(r"(\d{1,9}(?:[.,]\d{1,17})?)\s*(k?hz)?", re.IGNORECASE)


@dataclass(frozen=True, slots=True)
class LeadColumn:
    """A column that holds a lead, and the unit that its heading states."""

    place: int
    heading: str
    lead: str
    sign: float
    unit: str | None

    @property
    def is_judged(self) -> bool:
        """Whether it is one of the twelve; X, Y and Z name the axes of other sensors as well."""
        return self.lead in TWELVE_LEADS


@dataclass(frozen=True, slots=True)
class TimeColumn:
    """The column that holds the time; None where its heading states no unit."""

    place: int
    heading: str
    seconds_per_unit: float | None


@dataclass(frozen=True, slots=True)
class Header:
    """What the header row says of the columns; those it doesn't name as known are left out."""

    delimiter: str
    n_cells: int
    leads: tuple[LeadColumn, ...]
    time: TimeColumn | None


def millivolts_per(unit: str) -> float | None:
    """The factor of a unit's name or sign; None for what is no voltage."""
    return _UNIT_WORDS.get(unit.strip(" ()[]").lower())


def is_comment(line: str) -> bool:
    """Whether a line is a comment; a spreadsheet may have put it in quotation marks."""
    return line.lstrip(' \t"').startswith(COMMENT_MARK)


def header_of_line(line: str) -> Header | None:
    """The columns of a header row; None where it names fewer than three leads.

    The delimiter is the one that separates the most leads.
    """
    headers = [_header(cells_of(line, delimiter), delimiter) for delimiter in DELIMITERS]
    best = max(headers, key=lambda header: len(header.leads))
    return best if len(best.leads) >= FEWEST_LEADS else None


def cells_of(line: str, delimiter: str) -> list[str]:
    """The cells of one line, without quotation marks."""
    if '"' not in line:
        return line.split(delimiter)
    return next(csv.reader([line], delimiter=delimiter), [""])


def _header(cells: list[str], delimiter: str) -> Header:
    leads: list[LeadColumn] = []
    time: TimeColumn | None = None
    for place, cell in enumerate(cells):
        heading = cell.strip()
        if len(heading) > LONGEST_HEADING:
            continue
        name, unit = _name_and_unit(heading)
        lead = lead_of_label(name)
        if lead is not None:
            leads.append(LeadColumn(place, heading, *lead, unit))
        elif time is None and _is_time(name, unit):
            factor = _SECONDS_PER_UNIT.get((unit or name).lower())
            time = TimeColumn(place, heading, factor)
    return Header(delimiter, len(cells), tuple(leads), time)


def _name_and_unit(heading: str) -> tuple[str, str | None]:
    bracketed = _BRACKETED.fullmatch(heading)
    if bracketed is not None:
        return bracketed[1].strip(" _"), bracketed[2].strip()
    appended = _APPENDED.fullmatch(heading)
    if appended is not None and appended[2].lower() in _UNIT_WORDS | _SECONDS_PER_UNIT:
        return appended[1].rstrip(" _/"), appended[2]
    return heading, None


def _is_time(name: str, unit: str | None) -> bool:
    lower = name.lower()
    if lower in _TIME_WORDS:
        return unit is None or unit.lower() in _SECONDS_PER_UNIT
    return unit is None and lower in _SECONDS_PER_UNIT


class Comments:
    """What comment lines say, written as ``# key: value`` in any style."""

    def __init__(self, lines: Iterable[str]) -> None:
        self._lines = [self._plain(line) for line in lines]
        self._said: dict[str, str] = {}
        for line in self._lines:
            key, colon, value = line.partition(":")
            if colon and value.strip():
                self._said.setdefault(key.strip(), value.strip())

    @staticmethod
    def _plain(line: str) -> str:
        """``key: value``; a spreadsheet fills a comment line up with empty cells."""
        text = line.strip().rstrip("".join(DELIMITERS)).strip('" \t').lstrip(COMMENT_MARK)
        key, colon, value = text.partition(":")
        if not colon:
            key, colon, value = text.partition("=")
        # What is a comment on its own may be long; a key is not.
        words = re.sub(r"[\s_-]+", " ", key[:LONGEST_HEADING]).strip().lower()
        return f"{words}:{value}" if colon else ""

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

    def subject(self) -> Subject:
        """The person; a birth date gives the age where none is stated."""
        said = subject_of_comments(self._lines)
        born_on, recorded_at = self._born_on(), self.recorded_at
        age_years = said.age_years
        if age_years is None and born_on is not None and recorded_at is not None:
            age_years = max(0.0, (recorded_at.date() - born_on).days / 365.25)
        return Subject(said.id, said.name, said.sex, age_years, born_on)

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
