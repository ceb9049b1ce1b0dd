"""HL7 annotated ECG (ANSI/HL7 V3 aECG R1, 2004), parsed without entities and DTDs.

A series holds sequence sets; a set holds one time sequence (head and increment) and a sequence
for each lead (origin, scale and digits: value = origin + digit * scale).
"""

from __future__ import annotations

import re
from dataclasses import dataclass
from datetime import date, datetime
from pathlib import Path
from typing import Any
from xml.etree.ElementTree import Element

import numpy as np

from core.errors import RecordingError
from core.recordings.assemble import Channel, assemble_recording
from core.recordings.fingerprint import sha256_of_files
from core.recordings.leads import CHEST_LEADS, can_derive_limb_leads, lead_of_label
from core.recordings.recording import Filters, Recording, Source, Subject
from core.recordings.subject_words import OLDEST_YEARS, known_word, sex_of_word
from core.recordings.units import MILLIVOLTS_PER_UNIT

FORMAT_NAME = "HL7 aECG"
# Eight leads of 33 minutes at 500 Hz; a file of this size needs under 500 MB and two seconds.
LARGEST_BYTES = 40_000_000
_ROOT = re.compile(r"<(?:[\w.-]+:)?AnnotatedECG[\s>/]")
_LEAD = "MDC_ECG_LEAD_"
_SECONDS = {"s": 1.0, "ms": 1e-3, "us": 1e-6}
_RHYTHM = "RHYTHM"
_FILTERS = {
    "MDC_ATTR_FILTER_HIGH_PASS": "high_pass_hz",
    "MDC_ATTR_FILTER_LOW_PASS": "low_pass_hz",
    "MDC_ATTR_FILTER_NOTCH": "notch_hz",
}


class _BadContentError(ValueError):
    """What is wrong with the file, as a clause."""


def looks_like_aecg(start: bytes) -> bool:
    """Whether the first bytes of a file are XML whose root is an annotated ECG."""
    encoding = "utf-16" if start[:2] in (b"\xff\xfe", b"\xfe\xff") else "utf-8-sig"
    text = start.decode(encoding, errors="ignore").lstrip()
    return text.startswith("<") and _ROOT.search(text) is not None


def read_aecg(path: Path) -> Recording:
    """Read the rhythm of an annotated ECG.

    Raises
    ------
    RecordingError
        If the file is damaged, or holds no 12-lead rhythm.
    """
    name = path.name
    if path.stat().st_size > LARGEST_BYTES:
        raise RecordingError(
            f"{name}: the annotated ECG is larger than {LARGEST_BYTES // 10**6} MB. "
            "Export a shorter stretch of it."
        )
    try:
        return _read(path)
    except (RecordingError, OSError, MemoryError):
        raise
    except _BadContentError as error:
        raise RecordingError(
            f"{name}: the annotated ECG {error}. Export it again from where it is stored."
        ) from error
    except Exception as error:  # any kind: the parser meets bytes that nobody has checked
        raise RecordingError(
            f"{name}: the annotated ECG is damaged. Export it again from where it is stored."
        ) from error


def _read(path: Path) -> Recording:
    from defusedxml.ElementTree import parse

    root: Element = parse(path, forbid_dtd=True).getroot()
    series = _rhythm_series(root)
    channels, rate_hz = _channels(series)
    recorded_at = _moment(
        _value_of(series, "effectiveTime", "low") or _value_of(root, "effectiveTime", "low")
    )
    return assemble_recording(
        channels,
        sampling_rate_hz=rate_hz,
        source=Source(path.name, FORMAT_NAME, sha256_of_files([path])),
        subject=_subject(root, recorded_at),
        recorded_at=recorded_at,
        filters=_filters(series),
    )


def _tag(element: Element) -> str:
    return element.tag.rpartition("}")[2]


def _children(element: Element, name: str) -> list[Element]:
    return [child for child in element if _tag(child) == name]


def _descendants(element: Element, name: str) -> list[Element]:
    return [found for found in element.iter() if _tag(found) == name]


def _code(element: Element) -> str:
    return next((child.get("code") or "" for child in _children(element, "code")), "")


def _value_of(element: Element, *path: str) -> str | None:
    """The value attribute at the end of a path of children."""
    for name in path:
        following = _children(element, name)
        if not following:
            return None
        element = following[0]
    return element.get("value")


def _rhythm_series(root: Element) -> Element:
    """The rhythm with most samples that holds a 12-lead ECG; a representative beat is none."""
    series = [one for one in _descendants(root, "series") if _code(one) == _RHYTHM]
    if not series:
        kinds = sorted({_code(one) for one in _descendants(root, "series")} - {""})
        raise _BadContentError(f"holds no rhythm (series: {', '.join(kinds) or 'none'})")
    return max(series, key=lambda one: sum(len(d.text or "") for d in _descendants(one, "digits")))


@dataclass(frozen=True, slots=True)
class _Set:
    """Leads recorded at once."""

    channels: dict[str, Channel]
    start: str
    rate_hz: float


def _channels(series: Element) -> tuple[list[Channel], float]:
    sets: dict[tuple[str, float], _Set] = {}
    for element in _descendants(series, "sequenceSet"):
        found = _read_set(element)
        held = sets.setdefault((found.start, found.rate_hz), found)
        for lead, channel in found.channels.items():
            held.channels.setdefault(lead, channel)
    whole = [
        one
        for one in sets.values()
        if all(lead in one.channels for lead in CHEST_LEADS) and can_derive_limb_leads(one.channels)
    ]
    if not whole and len(sets) > 1:
        raise _BadContentError("was recorded lead group by lead group, not all leads at once")
    best = max(whole or sets.values(), key=lambda one: _longest(one), default=None)
    if best is None:
        raise _BadContentError("holds no sequences")
    return list(best.channels.values()), best.rate_hz


def _longest(one: _Set) -> int:
    return max((channel.samples_mv.size for channel in one.channels.values()), default=0)


def _read_set(element: Element) -> _Set:
    start, rate_hz = "", 0.0
    channels: dict[str, Channel] = {}
    for sequence in _descendants(element, "sequence"):
        code = _code(sequence)
        value = next(iter(_children(sequence, "value")), None)
        if value is None:
            continue
        if code.startswith("TIME_"):
            start = _value_of(value, "head") or ""
            rate_hz = 1.0 / _quantity(value, "increment", _SECONDS, "the time between samples")
        elif code.startswith(_LEAD):
            found = lead_of_label(code.removeprefix(_LEAD))
            if found is not None:
                lead, sign = found
                channels.setdefault(lead, _channel(lead, sign, value))
    if rate_hz <= 0 or not np.isfinite(rate_hz):
        raise _BadContentError("states no time between samples")
    return _Set(channels, start, rate_hz)


def _channel(lead: str, sign: float, value: Element) -> Channel:
    scale_mv = _quantity(value, "scale", MILLIVOLTS_PER_UNIT, f"the scale of lead {lead}")
    origin = next(iter(_children(value, "origin")), None)
    origin_mv = 0.0
    if origin is not None and float(origin.get("value") or 0) != 0:
        origin_mv = _quantity(value, "origin", MILLIVOLTS_PER_UNIT, f"the origin of lead {lead}")
    text = "".join(digits.text or "" for digits in _children(value, "digits"))
    try:
        digits = np.array(text.split(), dtype=np.float64)
    except ValueError as error:
        raise _BadContentError(f"has a sample of lead {lead} that is no number") from error
    if scale_mv == 0 or not np.isfinite(digits).all():
        raise _BadContentError(f"has no scale, or a sample that is no number, in lead {lead}")
    return Channel(lead, sign * (origin_mv + digits * scale_mv), 1.0 / abs(scale_mv))


def _quantity(element: Element, name: str, units: dict[str, float], what: str) -> float:
    """A value with its unit, in the table's own unit."""
    found = next(iter(_children(element, name)), None)
    if found is None:
        raise _BadContentError(f"does not state {what}")
    unit = found.get("unit") or ""
    factor = units.get(unit, units.get(unit.lower()))
    if factor is None:
        raise _BadContentError(f"states {what} in the unit '{unit[:20]}', which cannot be read")
    try:
        number = float(found.get("value") or "")
    except ValueError as error:
        raise _BadContentError(f"states {what} as something that is no number") from error
    if not np.isfinite(number):
        raise _BadContentError(f"states {what} as something that is no number")
    return number * factor


def _subject(root: Element, recorded_at: datetime | None) -> Subject:
    trial = next(iter(_descendants(root, "trialSubject")), None)
    if trial is None:
        return Subject()
    identifier = next(iter(_children(trial, "id")), None)
    person = next(iter(_descendants(trial, "subjectDemographicPerson")), trial)
    gender = next(iter(_children(person, "administrativeGenderCode")), None)
    named = next(iter(_children(person, "name")), None)
    born = _moment(_value_of(person, "birthTime"))
    born_on: date | None = None if born is None else born.date()
    age = None
    if born_on is not None and recorded_at is not None:
        age = (recorded_at.date() - born_on).days / 365.25
    words = "" if named is None else " ".join(" ".join(named.itertext()).split())
    stated = None if identifier is None else identifier.get("extension") or identifier.get("root")
    return Subject(
        id=known_word(stated),
        name=words or None,
        sex=None if gender is None else sex_of_word(gender.get("code")),
        age_years=age if age is not None and 0 <= age <= OLDEST_YEARS else None,
        born_on=born_on,
    )


def _filters(series: Element) -> Filters:
    stated: dict[str, Any] = {}
    for variable in _descendants(series, "controlVariable"):
        field = _FILTERS.get(_code(variable))
        if field is None:
            continue
        for value in _descendants(variable, "value"):
            try:
                cutoff_hz = float(value.get("value") or "nan")
            except ValueError:
                continue
            if np.isfinite(cutoff_hz) and cutoff_hz > 0 and value.get("unit") == "Hz":
                stated.setdefault(field, cutoff_hz)
    return Filters(**stated)


def _moment(text: str | None) -> datetime | None:
    """An HL7 time stamp; the wall clock is kept, fraction and zone are dropped."""
    digits = re.match(r"\d+", text or "")
    if digits is None:
        return None
    for length, form in ((14, "%Y%m%d%H%M%S"), (12, "%Y%m%d%H%M"), (8, "%Y%m%d")):
        if len(digits[0]) >= length:
            try:
                return datetime.strptime(digits[0][:length], form)
            except ValueError:
                return None
    return None
