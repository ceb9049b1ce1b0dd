"""What the gate says of a pair, and what it stops."""

from __future__ import annotations

from dataclasses import replace
from datetime import date, datetime, timedelta

import numpy as np
import pytest

from core import NotComparable, Settings, compare
from core.comparison.gate import pair_notices
from core.recordings.recording import Filters, Recording, Subject


@pytest.fixture
def pair(steady):
    return steady.earlier, steady.later


def with_recording(report, **changes):
    return replace(report, recording=replace(report.recording, **changes))


def codes(earlier, later, **lifted) -> list[str]:
    return [notice.code for notice in pair_notices(earlier, later, Settings(**lifted))]


def subject(recording: Recording, **changes) -> Subject:
    return replace(recording.subject, **changes)


def changed(pair, **changes):
    """The later recording with its subject changed."""
    earlier, later = pair
    return earlier, with_recording(later, subject=subject(later.recording, **changes))


def test_a_plain_pair_has_no_caution(pair):
    assert {n.severity for n in pair_notices(*pair, Settings())} <= {"info"}


def test_other_identifiers_stop_until_lifted(pair):
    earlier, later = changed(pair, id="INVENTED-99")
    with pytest.raises(NotComparable, match="different identifiers") as refusal:
        pair_notices(earlier, later, Settings())
    assert refusal.value.stops == ("identifiers-differ",)
    lifted = pair_notices(earlier, later, Settings(lifted_stops=("identifiers-differ",)))
    notice = lifted[0]
    assert (notice.code, notice.severity) == ("identifiers-differ", "stop")
    assert "lifted by the user" in notice.text


def test_a_lifted_stop_is_printed_with_the_result(steady):
    earlier, later = steady.earlier.recording, steady.later.recording
    other = replace(later, subject=subject(later, id="X"))
    settings = Settings(lifted_stops=("identifiers-differ",))
    content = compare(earlier, other, settings).to_dict()
    assert content["settings"]["lifted_stops"] == ["identifiers-differ"]
    assert any("lifted by the user" in notice["text"] for notice in content["notices"])


@pytest.mark.parametrize("written", ["invented-03", " INVENTED-03 ", "00INVENTED-03"])
def test_one_identifier_written_otherwise_is_no_stop(pair, written):
    assert "identifiers-differ" not in codes(*changed(pair, id=written))


def test_an_unknown_identifier_stops_nothing(pair):
    assert "identifiers-differ" not in codes(*changed(pair, id=None))


@pytest.mark.parametrize(
    ("changes", "code"),
    [
        ({"sex": "male"}, "person-differs"),
        ({"age_years": 71.0}, "age-against-dates"),
        ({"age_years": 12.0}, "not-adult"),
    ],
)
def test_what_does_not_fit_one_person_is_a_caution(pair, changes, code):
    assert code in codes(*changed(pair, **changes))


def test_birth_dates_that_differ_are_a_caution(pair):
    earlier, later = pair
    first = with_recording(earlier, subject=subject(earlier.recording, born_on=date(1984, 1, 2)))
    second = with_recording(later, subject=subject(later.recording, born_on=date(1984, 2, 1)))
    assert "person-differs" in codes(first, second)
    assert "person-differs" not in codes(first, first)


def test_the_order_is_checked_where_both_times_are_known(pair):
    earlier, later = pair
    assert "order-reversed" in codes(later, earlier)
    assert "time-unknown" in codes(with_recording(earlier, recorded_at=None), later)
    same = with_recording(later, recorded_at=earlier.recording.recorded_at)
    assert "order-reversed" not in codes(earlier, same)


def test_an_age_a_year_on_fits_its_date(pair):
    earlier, later = pair
    at = earlier.recording.recorded_at or datetime(2031, 3, 3)
    later = with_recording(
        later,
        recorded_at=at + timedelta(days=365),
        subject=subject(later.recording, age_years=earlier.recording.subject.age_years + 1),
    )
    assert "age-against-dates" not in codes(earlier, later)


def test_an_age_that_one_file_does_not_state_is_held_against_no_date(pair):
    for lacking in (changed(pair, age_years=None), changed(pair[::-1], age_years=None)[::-1]):
        assert "age-against-dates" not in codes(*lacking)


@pytest.mark.parametrize(("older_by", "told"), [(5, False), (0, True), (10, True)])
def test_ages_must_follow_the_dates_over_years(pair, older_by, told):
    earlier, later = pair
    at = earlier.recording.recorded_at.replace(year=2026)
    first = with_recording(earlier, recorded_at=at)
    second = with_recording(
        later,
        recorded_at=at.replace(year=2031),
        subject=subject(later.recording, age_years=earlier.recording.subject.age_years + older_by),
    )
    assert ("age-against-dates" in codes(first, second)) == told


@pytest.mark.parametrize(
    ("high_pass", "code"),
    [
        ((0.05, 0.05), None),
        ((0.05, None), None),
        ((0.05, 0.25), "high-pass-differs"),
        ((0.05, 0.5), "monitoring-filter"),
        ((0.67, 0.67), "monitoring-filter"),
    ],
)
def test_high_pass_filters(pair, high_pass, code):
    earlier, later = (
        with_recording(report, filters=Filters(high_pass_hz=hz))
        for report, hz in zip(pair, high_pass, strict=True)
    )
    found = codes(earlier, later, lifted_stops=("monitoring-filter",))
    known = {"high-pass-differs", "monitoring-filter"}
    assert set(found) & known == ({code} if code else set())


def test_the_high_pass_caution_says_how_far_j_moves(pair):
    """Isaksen 2017: -0.277 uV per uV s at 0.05 Hz, so four times as much from 0.05 to 0.25."""
    earlier, later = (
        with_recording(report, filters=Filters(high_pass_hz=hz))
        for report, hz in zip(pair, (0.05, 0.25), strict=True)
    )
    area = np.nanmax(np.abs(earlier.values["qrs_net_mv_ms"]))
    moved_uv = 0.277 * 4 * area
    text = next(
        n.text for n in pair_notices(earlier, later, Settings()) if n.code == "high-pass-differs"
    )
    assert f"{moved_uv:.0f} µV" in text


@pytest.mark.parametrize(
    ("low_pass", "told"),
    [((150, 150), False), ((150, 300), False), ((40, 150), True), ((40, None), True)],
)
def test_low_pass_filters(pair, low_pass, told):
    earlier, later = (
        with_recording(report, filters=Filters(low_pass_hz=hz))
        for report, hz in zip(pair, low_pass, strict=True)
    )
    assert ("low-pass-differs" in codes(earlier, later)) == told


@pytest.mark.parametrize(
    ("rates_hz", "told"), [((500, 1000), False), ((500, 250), False), ((500, 125), True)]
)
def test_a_low_sampling_rate_is_a_filter(pair, rates_hz, told):
    earlier, later = (
        with_recording(report, sampling_rate_hz=hz)
        for report, hz in zip(pair, rates_hz, strict=True)
    )
    assert ("low-pass-differs" in codes(earlier, later)) == told


def test_a_filter_notice_names_both_filters_in_their_order(pair):
    for kind, code, hz, words in (
        ("low_pass_hz", "low-pass-differs", (40, 150), "up to {} Hz, the later up to {} Hz"),
        ("high_pass_hz", "high-pass-differs", (0.05, 0.25), "{} Hz against {} Hz"),
    ):
        for first, second in (hz, hz[::-1]):
            earlier, later = (
                with_recording(report, filters=Filters(**{kind: cutoff}))
                for report, cutoff in zip(pair, (first, second), strict=True)
            )
            found = {n.code: n.text for n in pair_notices(earlier, later, Settings())}
            assert words.format(first, second) in found[code]


def test_other_stated_placements_are_a_caution(pair):
    earlier, later = pair
    standard, torso = (
        with_recording(report, electrode_placement=code)
        for report, code in ((earlier, "666625"), (later, "666626"))
    )
    assert "placement-stated-differs" in codes(standard, torso)
    assert "placement-stated-differs" not in codes(standard, later)


def test_a_rate_far_off_is_a_caution(pair):
    earlier, later = pair
    assert "rate-differs" in codes(earlier, replace(later, rr_s=earlier.rr_s / 1.4))
    assert "rate-differs" not in codes(earlier, replace(later, rr_s=earlier.rr_s / 1.1))
    assert "rate-differs" in codes(replace(earlier, rr_s=later.rr_s / 1.4), later)


def test_lifting_one_stop_leaves_the_other(pair):
    earlier, later = changed(pair, id="INVENTED-99")
    later = with_recording(later, filters=Filters(high_pass_hz=0.67))
    both = ("identifiers-differ", "monitoring-filter")
    for lifted, standing in (both, both[::-1]):
        with pytest.raises(NotComparable) as refusal:
            pair_notices(earlier, later, Settings(lifted_stops=(lifted,)))
        by_code = {notice.code: notice.text for notice in refusal.value.notices}
        assert str(refusal.value) == by_code[standing]
        assert by_code.keys() >= set(both)
    assert set(codes(earlier, later, lifted_stops=both)) >= set(both)


@pytest.mark.parametrize(
    ("filtered", "words"), [((1, 0), "Earlier"), ((0, 1), "Later"), ((1, 1), "Earlier and later")]
)
def test_a_monitoring_filter_is_said_of_the_recording_that_has_it(pair, filtered, words):
    earlier, later = (
        with_recording(report, filters=Filters(high_pass_hz=0.67 if it else 0.05))
        for report, it in zip(pair, filtered, strict=True)
    )
    with pytest.raises(NotComparable, match=f"^{words} recording"):
        pair_notices(earlier, later, Settings())


def test_a_recordings_own_notices_say_whose_they_are(raised):
    own = [
        (which, notice)
        for which, report in (("Earlier", raised.earlier), ("Later", raised.later))
        for notice in report.notices
    ]
    assert own
    told = [notice.text for notice in raised.notices]
    for which, notice in own:
        assert f"{which} recording: {notice.text}" in told


def test_a_small_high_pass_difference_is_not_told(pair):
    earlier, later = (
        with_recording(report, filters=Filters(high_pass_hz=hz))
        for report, hz in zip(pair, (0.05, 0.051), strict=True)
    )
    # A thousandth of a Hz moves J by 5.5 nV for each mV ms of QRS area: under 1 uV.
    assert "high-pass-differs" not in codes(earlier, later)


def test_notices_come_gravest_first(pair):
    earlier, later = changed(pair, sex="male", id="X")
    found = pair_notices(earlier, later, Settings(lifted_stops=("identifiers-differ",)))
    order = [("stop", "caution", "info").index(notice.severity) for notice in found]
    assert order == sorted(order)
    assert order[0] == 0
