"""What makes two recordings hard to compare, besides their electrodes."""

from __future__ import annotations

from dataclasses import replace

from core.measures.report import RecordingReport
from core.notices import Notice
from core.wording import notices as say

# Rates farther apart than this change ST and T by themselves (common practice, no source).
RATE_RATIO = 1.25
# A QRS this much longer or shorter means another conduction (common practice, no source; twice
# the 11.6 ms within which expert readers place the end of a QRS, CSE 1985, from memory).
QRS_DIFFERENCE_MS = 25.0
ADULT_FROM_YEARS = 16.0


def pair_notices(earlier: RecordingReport, later: RecordingReport) -> tuple[Notice, ...]:
    """Notices of both recordings and of the pair, the gravest first."""
    found = [
        replace(notice, text=f"{which} recording: {notice.text}")
        for which, report in (("Earlier", earlier), ("Later", later))
        for notice in report.notices
    ]
    found += [notice for notice in _of_the_pair(earlier, later) if notice is not None]
    order = {"stop": 0, "caution": 1, "info": 2}
    return tuple(sorted(found, key=lambda notice: order[notice.severity]))


def _of_the_pair(earlier: RecordingReport, later: RecordingReport) -> list[Notice | None]:
    first, second = earlier.recording, later.recording
    notices: list[Notice | None] = []
    ids = first.subject.id, second.subject.id
    if None not in ids and ids[0] != ids[1]:
        notices.append(say.another_person("identifiers"))
    sexes = first.subject.sex, second.subject.sex
    if None not in sexes and sexes[0] != sexes[1]:
        notices.append(say.another_person("sexes"))
    times = first.recorded_at, second.recorded_at
    if times[0] is None or times[1] is None:
        notices.append(say.time_unknown())
    elif times[0] > times[1]:
        notices.append(say.order_reversed())
    ages = [age for age in (first.subject.age_years, second.subject.age_years) if age is not None]
    if ages and min(ages) < ADULT_FROM_YEARS:
        notices.append(say.not_adult())
    rates = sorted((earlier.heart_rate_per_min, later.heart_rate_per_min))
    if rates[1] > RATE_RATIO * rates[0]:
        notices.append(say.rates_differ(earlier.heart_rate_per_min, later.heart_rate_per_min))
    if abs(earlier.qrs_ms - later.qrs_ms) > QRS_DIFFERENCE_MS:
        notices.append(say.qrs_differs(earlier.qrs_ms, later.qrs_ms))
    return notices
