from __future__ import annotations

import pytest

from app.report.report import write_report
from core import Comparison
from core.recordings.leads import CHEST_LEADS, TWELVE_LEADS
from core.wording.caution import CAUTION, CAUTIONS, KNOWN_LIMITS, PLACEMENT_CAVEAT
from core.wording.judgements import MEANINGS, WORDS
from core.wording.numbers import plain, signed, signed_range
from core.wording.recordings import key_numbers, when
from tests.app.drawing.readback import Piece, pieces_of, words
from tests.app.report.pages import open_pdf, rows_of, texts
from tests.app.report.subjects import with_notices


@pytest.fixture(scope="module", params=["raised", "inferior", "steady", "medial"])
def comparison(request) -> Comparison:
    return request.getfixturevalue(request.param)


@pytest.fixture(scope="module")
def pages(qapp, comparison) -> list[list[Piece]]:
    """Each page's runs of text."""
    return [pieces_of(page) for page in open_pdf(write_report(comparison)).pages]


def test_caveat_and_cautions_stand_on_every_page(pages):
    assert len(pages) == 2
    for page in map(words, pages):
        assert PLACEMENT_CAVEAT in page
        assert CAUTION in page
        for caution in CAUTIONS:
            assert caution in page


def test_the_first_page_says_what_was_found_and_what_to_do(comparison, pages):
    first = words(pages[0])
    assert " ".join(comparison.overall.sentence.split()) in first
    assert comparison.overall.next_step in first


def test_the_first_page_says_whose_recordings_from_which_files(comparison, pages):
    first = words(pages[0])
    for report in (comparison.earlier, comparison.later):
        recording, subject = report.recording, report.recording.subject
        assert subject.id
        for said in (subject.id, subject.name, subject.sex, f"{plain(subject.age_years)} years"):
            assert said in first
        assert when(recording.recorded_at) in first
        assert recording.source.name in first
        assert recording.source.sha256[:16] in first
        numbers = report.heart_rate_per_min, report.pr_ms, report.qrs_ms, report.qtc_ms
        assert key_numbers(*numbers) in first


def test_the_table_holds_every_lead_with_its_word_and_numbers(comparison, pages):
    rows = rows_of(pages[1])
    for lead in TWELVE_LEADS:
        result = comparison.leads[lead]
        expected = [lead, WORDS[result.judgement]]
        for name in ("st_mv", "t_mv"):
            m = result.measures[name]
            expected += [signed(m.later), signed(m.change), plain(m.noise_high, 2)]
            expected += [signed_range(m.reach_low, m.reach_high), signed(m.remainder)]
        assert expected in rows


def test_the_electrodes_table_holds_every_shift_with_its_range(comparison, pages):
    said = [" ".join(row) for row in rows_of(pages[1])]
    for electrode in CHEST_LEADS:
        shift = comparison.placement.electrodes[electrode]
        cells = [
            f"{signed(size.estimate, 0)} ({signed_range(size.low, size.high, 0)})"
            for size in (shift.up_mm, shift.left_mm)
        ]
        assert any(row.endswith(" ".join([electrode, *cells])) for row in said)


def test_the_wall_names_and_judges_every_lead(comparison, pages):
    drawn = [piece.text for piece in pages[0]]
    for lead in TWELVE_LEADS:
        assert lead in drawn
    for code, word in WORDS.items():
        held = [lead for lead in TWELVE_LEADS if comparison.leads[lead].judgement == code]
        assert drawn.count(word) == len(held)


def test_every_notice_is_in_it(comparison, pages):
    said = " ".join(map(words, pages))
    for notice in comparison.notices:
        assert notice.text in said


@pytest.mark.parametrize("count", [1, 8, 20])
def test_many_notices_are_all_in_it(qapp, raised, count):
    pages = texts(write_report(with_notices(raised, count)))
    for number in range(count):
        assert sum(f"number{number} " in page for page in pages) == 1
    for page in pages:
        assert CAUTION in page


def test_the_words_and_the_limits_are_explained(raised_pdf):
    second = texts(raised_pdf)[1]
    for code, meaning in MEANINGS.items():
        assert f"{WORDS[code].capitalize()}: {meaning}" in second
    assert KNOWN_LIMITS in second


def test_the_method_states_the_settings_that_were_used(raised, raised_pdf):
    settings, second = raised.settings, texts(raised_pdf)[1]
    assert f"{settings.st_point_ms:g} ms after J" in second
    assert f"{settings.draws} draws" in second
    assert f"{settings.spread_mm.up:g} mm up and {settings.spread_mm.left:g} mm left" in second


def test_pages_are_numbered_to_the_last(raised_pdf):
    pages = texts(raised_pdf)
    for number, page in enumerate(pages, start=1):
        assert f"page {number} of {len(pages)}" in page
