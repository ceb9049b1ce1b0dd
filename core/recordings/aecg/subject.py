"""What an annotated ECG says of the person, the time and the filters."""

from __future__ import annotations

from datetime import datetime

from core.recordings.aecg.digits import number_of
from core.recordings.aecg.document import Node
from core.recordings.aecg.times import moment_of
from core.recordings.recording import Filters, Subject
from core.recordings.subject_words import OLDEST_YEARS, known_word, sex_of_word

_FILTERS = _HIGH_PASS, _LOW_PASS, _NOTCH = (
    "MDC_ATTR_FILTER_HIGH_PASS",
    "MDC_ATTR_FILTER_LOW_PASS",
    "MDC_ATTR_FILTER_NOTCH",
)
_CUTOFFS = frozenset(
    ["MDC_ATTR_FILTER_CUTOFF_FREQ", "MDC_ATTR_NOTCH_FREQ", "MDC_ATTR_FILTER_NOTCH_FREQ"]
)
_HERTZ = {"hz": 1.0, "mhz": 1e-3, "khz": 1e3}


def subject_of(root: Node, recorded_at: datetime | None) -> Subject:
    """The trial's subject; ``X`` and spaces stand for what is unknown."""
    trial = next(root.within("trialSubject"), None)
    if trial is None:
        return Subject()
    person = trial.first("subjectDemographicPerson") or trial
    born_on = None
    if (born := moment_of(person.attribute("value", "birthTime"))) is not None:
        born_on = born.date()
    age_years = None
    if born_on is not None and recorded_at is not None:
        age_years = (recorded_at.date() - born_on).days / 365.25
        if not 0 <= age_years <= OLDEST_YEARS:
            age_years = None
    return Subject(
        id=next((word for node in trial.all("id") if (word := _identifier(node))), None),
        name=_name(person.first("name")),
        sex=sex_of_word(person.attribute("code", "administrativeGenderCode")),
        age_years=age_years,
        born_on=born_on,
    )


def recorded_at_of(root: Node, series: Node) -> datetime | None:
    """When the series began, else the whole; to the second, as other formats state it."""
    for node in (series, root):
        time = node.first("effectiveTime")
        if time is None:
            continue
        for stated in (time.attribute("value", "low"), time.attribute("value")):
            moment = moment_of(stated)
            if moment is not None:
                return moment.replace(microsecond=0)
    return None


def filters_of(root: Node, series: Node) -> Filters:
    """The narrowest band that the series, or the file for all series, states."""
    stated: dict[str, list[float]] = {code: [] for code in _FILTERS}
    for owner in (root, series):
        for outer in owner.all("controlVariable"):
            for node in (outer, *outer.within("controlVariable")):
                if node.code in stated:
                    stated[node.code] += _cutoffs_hz(node)
    return Filters(
        high_pass_hz=max(stated[_HIGH_PASS], default=None),
        low_pass_hz=min(stated[_LOW_PASS], default=None),
        notch_hz=max(stated[_NOTCH], default=None),
    )


def _cutoffs_hz(node: Node) -> list[float]:
    """Cutoffs of a filter; it has other values too, its order and its width among them."""
    inner = [*node.children, *(part for child in node.children for part in child.children)]
    holders = [node, *(part for part in inner if part.code in _CUTOFFS)]
    cutoffs_hz = []
    for value in (value for holder in holders for value in holder.all("value")):
        number = number_of(value.attribute("value"))
        per_unit = _HERTZ.get((value.attribute("unit") or "").strip().lower())
        if number is not None and number > 0 and per_unit is not None:
            cutoffs_hz.append(number * per_unit)
    return cutoffs_hz


def _identifier(node: Node) -> str | None:
    """The extension; beside one, the root only names who gave it."""
    for key in ("extension", "root"):
        stated = (node.attribute(key) or "").strip()
        if stated:
            return known_word(stated)
    return None


def _name(node: Node | None) -> str | None:
    if node is None:
        return None
    words = " ".join([node.text, *(part.text for part in node.children)]).split()
    return known_word(" ".join(words))
