from __future__ import annotations

import pytest
from PySide6.QtCore import Qt

from app.views.labels import label
from app.views.theme import CAPTION, HEADING
from tests.app.drawing.readback import drawn_on, words

TEXT = "When in doubt, check the electrode sites and record again. " * 4


@pytest.fixture
def wrapped(qtbot, light):
    made = label(TEXT.strip(), size=CAPTION, wrap=True)
    qtbot.addWidget(made)
    made.show()
    return made


@pytest.mark.parametrize("width", [120, 300, 700, 1256])
def test_a_wrapped_label_has_the_height_that_its_text_needs_and_no_more(wrapped, width):
    wrapped.resize(width, wrapped.height())
    drawn = drawn_on(wrapped)
    assert words(drawn) == TEXT.strip()
    last = max(piece.baseline for piece in drawn)
    # The last line's baseline is less than a line's height above the bottom.
    line = wrapped.fontMetrics().lineSpacing()
    assert wrapped.height() - line < last < wrapped.height()


def test_a_longer_text_makes_room_for_itself(wrapped):
    wrapped.resize(300, wrapped.height())
    before = wrapped.height()
    wrapped.setText(TEXT * 2)
    assert wrapped.height() > 1.5 * before


def test_a_label_is_plain_text(qtbot, light):
    made = label("<b>bold</b>", size=HEADING, bold=True)
    qtbot.addWidget(made)
    made.resize(made.sizeHint())
    assert words(drawn_on(made)) == "<b>bold</b>"
    assert made.textFormat() is Qt.TextFormat.PlainText
