"""Pictures differ where what they show differs, and stay inside their frames."""

from __future__ import annotations

import numpy as np
import pytest
from PySide6.QtCore import QPointF, QRectF, QSize
from PySide6.QtGui import QColor, QImage, QPainter

from app.drawing.chest_map import draw_chest_map
from app.drawing.lead_plots import draw_difference, draw_lead_cell, draw_overlay
from app.drawing.palette import LIGHT
from app.drawing.pen import Style, draw_mark
from core.wording.judgements import WORDS

SIZE = QSize(240, 180)
FRAME = QRectF(20, 20, 200, 140)


@pytest.fixture
def style(qapp) -> Style:
    return Style(LIGHT, 1.0, qapp.font().family(), caption=12, body=13, heading=16)


def picture(draw) -> np.ndarray:
    image = QImage(SIZE, QImage.Format.Format_RGB32)
    image.fill(QColor("white"))
    painter = QPainter(image)
    draw(painter)
    painter.end()
    pixels = np.frombuffer(image.constBits(), np.uint8)
    return pixels.reshape(SIZE.height(), SIZE.width(), 4)[..., :3].copy()


PICTURES = {
    "cell": lambda p, c, lead, s: draw_lead_cell(p, FRAME, c, lead, s),
    "overlay": lambda p, c, lead, s: draw_overlay(p, FRAME, c, lead, s, every=1),
    "difference": lambda p, c, lead, s: draw_difference(p, FRAME, c, lead, s),
}


@pytest.mark.parametrize("kind", PICTURES)
def test_another_lead_is_another_picture(kind, style, raised):
    drawn = [
        picture(lambda p, lead=lead: PICTURES[kind](p, raised, lead, style))
        for lead in ("V2", "V2", "V5")
    ]
    np.testing.assert_array_equal(drawn[0], drawn[1])
    assert (drawn[0] != drawn[2]).any(axis=2).sum() > 100


@pytest.mark.parametrize("kind", PICTURES)
def test_nothing_is_drawn_outside_the_frame(kind, style, raised, inferior):
    for comparison in (raised, inferior):
        drawn = picture(lambda p, c=comparison: PICTURES[kind](p, c, "V2", style))
        outside = np.ones(drawn.shape[:2], dtype=bool)
        outside[20:161, 20:221] = False
        assert (drawn[outside] == 255).all()


def test_both_beats_are_in_their_colours(style, raised):
    drawn = picture(lambda p: draw_overlay(p, FRAME, raised, "V2", style, every=1))
    for role in ("earlier", "later"):
        colour = QColor(getattr(LIGHT, role))
        rgb = np.array([colour.blue(), colour.green(), colour.red()])
        assert (np.abs(drawn.astype(int) - rgb).max(axis=2) < 30).sum() > 50


def test_the_chest_map_shows_a_shift_where_there_is_one(style, raised, steady):
    maps = [picture(lambda p, c=c: draw_chest_map(p, FRAME, c, style)) for c in (raised, steady)]
    later = QColor(LIGHT.later)
    rgb = np.array([later.blue(), later.green(), later.red()])
    counts = [(np.abs(m.astype(int) - rgb).max(axis=2) < 30).sum() for m in maps]
    assert counts[0] > 30
    assert counts[1] == 0


def test_the_marks_of_the_judgements_differ_in_shape():
    """Drawn in one colour, no two are alike."""
    drawn = {
        code: picture(lambda p, code=code: draw_mark(p, QPointF(60, 60), 40, code, QColor("black")))
        for code in WORDS
    }
    codes = list(drawn)
    for position, one in enumerate(codes):
        for other in codes[position + 1 :]:
            assert (drawn[one] != drawn[other]).any(axis=2).sum() > 100, (one, other)
