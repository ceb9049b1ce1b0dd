from __future__ import annotations

import pytest

from app.report.page import MARGIN_MM
from app.report.report import write_report
from core.recordings.recording import Subject
from core.wording.caution import PLACEMENT_CAVEAT
from tests.app.drawing.readback import Piece, lying_on_each_other, pieces_of, words
from tests.app.report.pages import POINTS_PER_MM, open_pdf, texts
from tests.app.report.subjects import of_person, with_notices

LONG_NAME = "Invented " + "Longname" * 6 + "Ash"  # 60 letters
LONG_FILE = "recording-of-a-very-long-name-from-some-ward-on-some-day-in-autumn.hea"
WIDTH, HEIGHT, MARGIN = (mm * POINTS_PER_MM for mm in (210.0, 297.0, MARGIN_MM))
# The rounding of a glyph's advance, over a line of a hundred.
SLACK_POINTS = 1.0


def ordinary(comparison):
    return comparison


def long_names(comparison):
    subject = Subject("INVENTED-0123456789", LONG_NAME, "female", 61.0)
    return of_person(comparison, subject, file_name=LONG_FILE)


def nobody(comparison):
    return of_person(comparison, Subject())


def written_from_right_to_left(comparison):
    return of_person(comparison, Subject("INVENTED-01", "شخص مخترع", "male", 40.0))


def chinese(comparison):
    return of_person(comparison, Subject("INVENTED-01", "虚构的人", "female", 40.0))


def with_signs_of_markup(comparison):
    return of_person(comparison, Subject("<b>1</b>", "A & B <i>%s</i> \\n (c", None, None))


def eight_notices(comparison):
    return with_notices(comparison, 8)


def thirty_notices(comparison):
    return with_notices(comparison, 30)


KINDS = (
    ordinary,
    long_names,
    nobody,
    written_from_right_to_left,
    chinese,
    with_signs_of_markup,
    eight_notices,
    thirty_notices,
)


@pytest.fixture(scope="module", params=KINDS, ids=lambda kind: kind.__name__)
def pages(qapp, inferior, request) -> list[list[Piece]]:
    """Each page's runs of text, in points."""
    made = open_pdf(write_report(request.param(inferior)))
    return [pieces_of(page) for page in made.pages]


def test_every_word_keeps_within_the_margins(pages):
    for page in pages:
        for piece in page:
            assert piece.left >= MARGIN - SLACK_POINTS, piece.text
            assert piece.right <= WIDTH - MARGIN + SLACK_POINTS, piece.text
            assert MARGIN <= piece.baseline <= HEIGHT - MARGIN, piece.text


def test_no_words_lie_on_each_other(pages):
    for page in pages:
        assert lying_on_each_other(page) == []


def test_nothing_but_the_cautions_stands_in_the_foot(pages):
    for page in pages:
        start = next(piece for piece in page if PLACEMENT_CAVEAT.startswith(piece.text))
        below = [piece for piece in page if piece.baseline >= start.baseline]
        # Three lines of caveat, two of cautions, and the line that says what made it.
        assert len({round(piece.baseline, 1) for piece in below}) == 6


def test_an_identifier_is_printed_however_long_the_name(qapp, inferior):
    assert "INVENTED-0123456789" in texts(write_report(long_names(inferior)))[0]


def test_a_fingerprint_is_printed_however_long_the_files_name(qapp, inferior):
    fingerprint = inferior.later.recording.source.sha256[:16]
    assert fingerprint in texts(write_report(long_names(inferior)))[0]


def test_a_long_name_is_shortened_with_a_sign_of_it(qapp, inferior):
    drawn = pieces_of(open_pdf(write_report(long_names(inferior))).pages[0])
    shown = [piece.text for piece in drawn if piece.text.startswith("Invented Longname")]
    assert len(shown) == 2
    assert all(text.endswith("…") or LONG_NAME in text for text in shown)


def test_an_unnamed_person_and_an_unknown_time_are_called_so(qapp, inferior):
    first = words(pieces_of(open_pdf(write_report(nobody(inferior))).pages[0]))
    assert first.count("no identification in the file") == 2
    assert first.count("time not stated") == 2
    assert "None" not in first


def test_markup_in_a_name_stays_a_name(qapp, inferior):
    first = words(pieces_of(open_pdf(write_report(with_signs_of_markup(inferior))).pages[0]))
    assert "A & B <i>%s</i> \\n (c" in first
    assert "<b>1</b>" in first


def test_a_sentence_in_arabic_letters_keeps_its_identifier(qapp, inferior):
    first = words(pieces_of(open_pdf(write_report(written_from_right_to_left(inferior))).pages[0]))
    assert first.count("INVENTED-01") == 3  # on both cards and in the page's last line
