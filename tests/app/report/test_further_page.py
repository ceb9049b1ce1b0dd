"""The page of the further leads."""

from __future__ import annotations

import pytest

from app.report.page import MARGIN_MM
from app.report.report import write_report
from core.wording.caution import CAUTION, PLACEMENT_CAVEAT
from core.wording.further import HEADING, MEANING, VALUES, values_of_further_lead
from tests.app.drawing.readback import Piece, lying_on_each_other, pieces_of, words
from tests.app.report.pages import POINTS_PER_MM, open_pdf, texts
from tests.app.report.subjects import with_notices

MARGIN = MARGIN_MM * POINTS_PER_MM


@pytest.fixture(scope="module")
def pages(qapp, further) -> list[list[Piece]]:
    return [pieces_of(page) for page in open_pdf(write_report(further)).pages]


def test_it_is_the_third_page_and_cautions_like_the_others(pages):
    assert len(pages) == 3
    said = words(pages[2])
    assert said.startswith(HEADING)
    for part in (VALUES, MEANING, CAUTION, PLACEMENT_CAVEAT, "page 3 of 3"):
        assert part in said


def test_it_names_every_further_lead_with_its_values(pages, further):
    drawn = [piece.text for piece in pages[2]]
    for lead, shown in further.further.items():
        at = drawn.index(lead)
        values = values_of_further_lead(shown.earlier, shown.later)
        assert drawn[at : at + 4] == [lead, "not judged", *values]


def test_its_words_keep_apart_and_within_the_margins(pages):
    assert lying_on_each_other(pages[2]) == []
    for piece in pages[2]:
        assert piece.left >= MARGIN - 1.0, piece.text  # points: the side bearing of a glyph
        assert piece.right <= 210.0 * POINTS_PER_MM - MARGIN + 1.0, piece.text


def test_the_first_two_pages_are_those_of_a_pair_without(pages, raised_pdf):
    without = [pieces_of(page) for page in open_pdf(raised_pdf).pages]

    def cells(page: list[Piece]) -> list[str]:
        # All but what tells the files apart: fingerprints, times of making, page numbers.
        return [p.text for p in page if not {"SHA-256", "page", "made"} & set(p.text.split())]

    assert cells(pages[0]) == cells(without[0])
    assert cells(pages[1]) == cells(without[1])


def test_notices_that_do_not_fit_have_a_page_of_their_own(qapp, further):
    pages = texts(write_report(with_notices(further, 20)))
    assert len(pages) == 4
    for number in range(20):
        assert sum(f"number{number} " in page for page in pages) == 1
    assert "page 4 of 4" in pages[3]
