from __future__ import annotations

import sys

import numpy as np
import pytest
from PySide6.QtCore import QPointF, QRectF
from PySide6.QtGui import QColor

from app.drawing.palette import LIGHT
from app.drawing.pen import (
    Style,
    draw_curve,
    draw_paragraph,
    draw_text,
    fill_between,
    text_width,
)
from tests.app.drawing.readback import drawn_by, picture

BLACK = QColor("#000000")


@pytest.fixture
def style(qapp) -> Style:
    return Style(LIGHT, 1.0, qapp.font().family(), caption=12, body=13, heading=16)


def test_a_line_that_fits_is_drawn_whole(style):
    room = QRectF(5, 5, 300, 20)
    drawn = drawn_by(400, 40, lambda p: draw_text(p, room, "V2 in depth", style.font(13), BLACK))
    assert [piece.text for piece in drawn] == ["V2 in depth"]


def test_a_line_that_does_not_fit_is_shortened_with_a_sign_of_it(style):
    room, text = QRectF(5, 5, 90, 20), "a recording with a very long name"
    (piece,) = drawn_by(400, 40, lambda p: draw_text(p, room, text, style.font(13), BLACK))
    assert piece.text.endswith("…")
    assert text.startswith(piece.text[:-1].rstrip())
    assert piece.right <= room.right() + 1.0  # px: a glyph's advance is rounded


def test_a_paragraph_says_how_high_it_became(style):
    text, heights = "one two three four five six seven eight nine ten " * 3, []

    def draw(painter):
        rect = QRectF(10, 10, 150, 0)
        heights.append(draw_paragraph(painter, rect, text, style.font(13), BLACK))

    drawn = drawn_by(400, 600, draw)
    assert " ".join(piece.text for piece in drawn) == text.strip()
    last = max(piece.baseline for piece in drawn)
    # The last baseline lies in the last line: above the bottom, by less than a line's height.
    assert 10 + heights[0] - 20 < last < 10 + heights[0]


def test_a_paragraph_keeps_within_its_width(style):
    text = "one two three four five six seven eight nine ten"
    drawn = drawn_by(
        400,
        200,
        lambda p: draw_paragraph(p, QRectF(10, 10, 100, 0), text, style.font(13), BLACK),
    )
    assert len(drawn) > 2
    assert max(piece.right for piece in drawn) <= 111.0  # px: a glyph's advance is rounded


def test_text_is_as_wide_as_measured(style):
    font = style.font(13)
    (piece,) = drawn_by(
        300, 40, lambda p: draw_text(p, QRectF(0, 0, 300, 40), "repeat noise", font, BLACK)
    )
    # Hinting moves each glyph by up to half a pixel; over a word that mostly cancels.
    assert text_width("repeat noise", font) == pytest.approx(piece.width, abs=3.0)


def test_a_gap_in_the_samples_is_a_gap_in_the_curve(qapp):
    x = np.arange(0.0, 100.0)
    y = np.full(100, 20.0)
    y[40:60] = np.nan
    drawn = picture(100, 40, lambda p: draw_curve(p, x, y, BLACK, 3.0))
    inked = (drawn[..., 0] < 128).any(axis=0)
    assert inked[5:39].all()
    assert inked[61:95].all()
    assert not inked[41:59].any()


def test_a_band_lies_between_its_two_lines(qapp):
    x = np.array([0.0, 100.0])
    drawn = picture(
        100, 60, lambda p: fill_between(p, x, np.full(2, 20.0), np.full(2, 40.0), BLACK)
    )
    inked = (drawn[..., 0] < 128).all(axis=1)
    assert np.flatnonzero(inked).tolist() == list(range(20, 40))


def test_a_band_of_one_known_point_is_no_band(qapp):
    x, low = np.array([0.0, 50.0, 100.0]), np.array([np.nan, 20.0, np.nan])
    drawn = picture(100, 60, lambda p: fill_between(p, x, low, low + 9.0, BLACK))
    assert (drawn == 255).all()


def test_painting_takes_nothing_from_python_itself(qapp):
    # PySide6 6.12.0 under Python 3.11 gives back a None at every stroke that it never took, and
    # the process dies when none is left: after about eighty paintings of the bench.
    strokes, at = 500, QPointF(1.0, 1.0)

    def draw(painter):
        for _ in range(strokes):
            painter.drawLine(at, at)

    before = sys.getrefcount(None)
    picture(9, 9, draw)
    # Whatever else goes on here holds or drops a few dozen at most.
    assert abs(sys.getrefcount(None) - before) < strokes / 5
