"""The header row of a table of samples."""

from __future__ import annotations

import csv
import re
from dataclasses import dataclass

from core.recordings.comments import COMMENT_MARK, DELIMITERS, LONGEST_HEADING
from core.recordings.leads import TWELVE_LEADS, lead_of_label
from core.recordings.units import MILLIVOLTS_PER_UNIT

FEWEST_LEADS = 3

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
