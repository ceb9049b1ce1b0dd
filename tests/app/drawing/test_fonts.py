from __future__ import annotations

import pytest
from PySide6.QtGui import QFont, QFontDatabase, QFontInfo, QRawFont

from app.drawing.fonts import report_family
from app.report.page import report_style
from core.shipped_files import resources_folder

FILES = sorted((resources_folder() / "fonts").glob("*.ttf"))


def test_a_regular_and_a_bold_face_ship_with_the_program(qapp):
    faces = {QRawFont(str(path), 12.0).weight() for path in FILES}
    assert {QFont.Weight.Normal.value, QFont.Weight.Bold.value} <= faces


def test_the_report_is_set_in_the_shipped_family(qapp):
    family = report_family()
    assert family in QFontDatabase.families()
    assert {QRawFont(str(path), 12.0).familyName() for path in FILES} == {family}
    assert report_style().family == family
    assert QFontInfo(report_style().font(250.0)).family() == family
    assert QFontInfo(report_style().font(250.0, bold=True)).bold()


@pytest.mark.parametrize("path", FILES, ids=lambda path: path.stem)
def test_every_sign_of_our_sentences_is_in_the_shipped_fonts(qapp, path):
    font = QRawFont(str(path), 12.0)
    # The true minus, dashes, a no-break space and what stands between parts of a line.
    for sign in "−–·±×…µ\N{NO-BREAK SPACE}'%":
        assert font.supportsCharacter(ord(sign)), sign


def test_licence_texts_ship_with_the_fonts():
    licences = resources_folder() / "licences"
    assert "Apache License" in (licences / "Open-Sans-Apache-2.0.txt").read_text(encoding="utf-8")
