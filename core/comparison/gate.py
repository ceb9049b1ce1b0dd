"""What makes two recordings hard to compare, besides their electrodes."""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import replace
from itertools import pairwise

import numpy as np

from core.errors import NotComparable
from core.measures.report import RecordingReport
from core.notices import Notice
from core.quality.interchange import Interchange
from core.recordings.leads import TWELVE_LEADS
from core.recordings.recording import Recording
from core.settings import Settings
from core.wording import notices as say

# Rates farther apart than this change ST and T by themselves (common practice, no source).
RATE_RATIO = 1.25
# A QRS this much longer or shorter means another conduction (common practice, no source; twice
# the 11.6 ms within which expert readers place the end of a QRS, CSE 1985, from memory).
QRS_DIFFERENCE_MS = 25.0
WIDE_QRS_MS = 120.0
ADULT_FROM_YEARS = 16.0
# Ages are stated in whole years; recorders' clocks are off by more than that only by a fault.
AGE_SLACK_YEARS = 1.6
# A single-pass 0.5 Hz filter distorted ST in 42 of 45 recordings (Buendia-Fuentes 2012).
MONITORING_HZ = 0.5
# J moves by so much for each mV ms of QRS area and each Hz of a first-order high-pass
# (Isaksen 2017: -0.277 uV per uV s at 0.05 Hz).
J_PER_AREA_AND_HZ = -0.277e-3 / 0.05
LEAST_SHIFT_MV = 0.010
# Below 100 Hz the errors of R reach 0.12 to 0.2 mV (Berson 1977); above, they don't count.
LOW_PASS_COUNTS_HZ = 100.0
# What a recorder keeps free of aliasing (common practice, no source).
BAND_SHARE_OF_RATE = 0.4
# Intervals that scatter by more than this share of their mean, and no P wave.
IRREGULAR_SHARE = 0.12


def pair_notices(
    earlier: RecordingReport,
    later: RecordingReport,
    settings: Settings,
    chest_interchange: Interchange | None = None,
) -> tuple[Notice, ...]:
    """Notices of both recordings and of the pair, the gravest first.

    Raises
    ------
    NotComparable
        If one is a stop that `Settings.lifted_stops` does not name.
    """
    found = [
        replace(notice, text=f"{which} recording: {notice.text}")
        for which, report in (("Earlier", earlier), ("Later", later))
        for notice in report.notices
    ]
    found += _of_identity(earlier.recording, later.recording)
    found += _of_filters(earlier, later)
    found += _of_rhythm(earlier, later)
    if chest_interchange is not None:
        found.append(say.chest_interchanged(chest_interchange.electrodes))
    order = {"stop": 0, "caution": 1, "info": 2}
    found.sort(key=lambda notice: order[notice.severity])
    standing = [
        notice
        for notice in found
        if notice.severity == "stop" and notice.code not in settings.lifted_stops
    ]
    if standing:
        raise NotComparable(standing[0].text, tuple(found))
    return tuple(
        say.stop_lifted(notice) if notice.severity == "stop" else notice for notice in found
    )


def _of_identity(first: Recording, second: Recording) -> list[Notice]:
    notices = []
    ids = [_plain_identifier(recording.subject.id) for recording in (first, second)]
    if None not in ids and ids[0] != ids[1]:
        notices.append(say.other_identifier())
    sexes = first.subject.sex, second.subject.sex
    if None not in sexes and sexes[0] != sexes[1]:
        notices.append(say.another_person("sexes"))
    births = first.subject.born_on, second.subject.born_on
    if None not in births and births[0] != births[1]:
        notices.append(say.another_person("birth dates"))
    times = first.recorded_at, second.recorded_at
    ages = first.subject.age_years, second.subject.age_years
    if times[0] is None or times[1] is None:
        notices.append(say.time_unknown())
    else:
        if times[0] > times[1]:
            notices.append(say.order_reversed())
        if ages[0] is not None and ages[1] is not None:
            off = ages[1] - ages[0] - (times[1] - times[0]).days / 365.25
            if abs(off) > AGE_SLACK_YEARS:
                notices.append(say.age_against_dates(abs(off)))
    known_ages = [age for age in ages if age is not None]
    if known_ages and min(known_ages) < ADULT_FROM_YEARS:
        notices.append(say.not_adult())
    placements = first.electrode_placement, second.electrode_placement
    if None not in placements and placements[0] != placements[1]:
        notices.append(say.electrodes_elsewhere())
    return notices


def _plain_identifier(identifier: str | None) -> str | None:
    """An identifier without what systems add to it: spaces, case, leading zeros."""
    plain = "".join((identifier or "").split()).casefold().lstrip("0")
    return plain or None


def _of_filters(earlier: RecordingReport, later: RecordingReport) -> list[Notice]:
    notices = []
    filters = earlier.recording.filters, later.recording.filters
    high = filters[0].high_pass_hz, filters[1].high_pass_hz
    monitoring = [hz for hz in high if hz is not None and hz >= MONITORING_HZ]
    if monitoring:
        which = [
            word
            for word, hz in zip(("earlier", "later"), high, strict=True)
            if hz is not None and hz >= MONITORING_HZ
        ]
        notices.append(say.monitoring_filter(_capital(which), max(monitoring)))
    elif high[0] is not None and high[1] is not None and high[0] != high[1]:
        moved = J_PER_AREA_AND_HZ * (high[1] - high[0]) * earlier.values["qrs_net_mv_ms"]
        row = int(np.nanargmax(np.abs(moved)))
        if abs(moved[row]) > LEAST_SHIFT_MV:
            notices.append(
                say.high_pass_differs(high[0], high[1], TWELVE_LEADS[row], float(moved[row]))
            )
    ends = _band_end_hz(earlier.recording), _band_end_hz(later.recording)
    if ends[0] != ends[1] and min(ends) < LOW_PASS_COUNTS_HZ:
        notices.append(say.bands_differ(*ends))
    return notices


def _band_end_hz(recording: Recording) -> float:
    """The highest frequency that a recording holds."""
    by_rate = BAND_SHARE_OF_RATE * recording.sampling_rate_hz
    return min(by_rate, recording.filters.low_pass_hz or by_rate)


def _capital(words: Sequence[str]) -> list[str]:
    return [words[0].capitalize(), *words[1:]]


def _of_rhythm(earlier: RecordingReport, later: RecordingReport) -> list[Notice]:
    notices = []
    pair = (("earlier", earlier), ("later", later))
    paced = [which for which, report in pair if report.analysis.paced]
    if len(paced) == 1:
        notices.append(say.paced_in_one(paced[0]))
    notices += [say.irregular(which.capitalize()) for which, report in pair if _irregular(report)]
    rates = sorted((earlier.heart_rate_per_min, later.heart_rate_per_min))
    if rates[1] > RATE_RATIO * rates[0]:
        notices.append(say.rates_differ(earlier.heart_rate_per_min, later.heart_rate_per_min))
    if abs(earlier.qrs_ms - later.qrs_ms) > QRS_DIFFERENCE_MS:
        notices.append(say.qrs_differs(earlier.qrs_ms, later.qrs_ms))
        wide = [which for which, report in pair if report.qrs_ms >= WIDE_QRS_MS]
        if len(wide) == 1:
            notices.append(say.block_in_one(wide[0]))
    return notices


def _irregular(report: RecordingReport) -> bool:
    """No P wave and scattered intervals, between beats of the dominant shape alone."""
    beats = report.analysis.beats
    intervals = np.array(
        [
            after.r_time_s - before.r_time_s
            for before, after in pairwise(beats)
            if "another shape" not in (before.why_not, after.why_not)
        ]
    )
    if report.points.fiducials.p_onset is not None or intervals.size < 3:
        return False
    return bool(np.std(intervals) > IRREGULAR_SHARE * np.mean(intervals))
