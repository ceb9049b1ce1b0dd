from __future__ import annotations

from itertools import combinations

import numpy as np
import pytest
from PySide6.QtCore import QPointF
from PySide6.QtGui import QColor

from app.drawing.pen import draw_mark
from core.wording.judgements import MARKS, MEANINGS, WORDS
from tests.app.drawing.readback import picture

pytestmark = pytest.mark.usefixtures("qapp")

SIDE, SIZE = 60, 40
BLACK = QColor("#000000")


def mark(code: str, *, size: float = SIZE, colour: QColor = BLACK) -> np.ndarray:
    centre = QPointF(SIDE / 2, SIDE / 2)
    drawn = picture(SIDE, SIDE, lambda painter: draw_mark(painter, centre, size, code, colour))
    return drawn[..., 0] < 128


def test_every_judgement_has_a_word_a_mark_and_a_meaning():
    assert set(WORDS) == set(MARKS) == set(MEANINGS)
    assert len(set(WORDS.values())) == len(set(MARKS.values())) == len(WORDS)


@pytest.mark.parametrize("pair", list(combinations(WORDS, 2)), ids=" and ".join)
def test_two_marks_differ_in_shape_and_not_by_colour_alone(pair):
    one, other = (mark(code) for code in pair)
    # A tenth of the larger mark: the edges alone, half a pixel off, would be under a twentieth.
    assert (one ^ other).sum() > 0.1 * max(one.sum(), other.sum())


@pytest.mark.parametrize("code", WORDS)
def test_a_mark_keeps_within_its_size(code):
    rows, columns = np.nonzero(mark(code))
    reach = np.abs(np.concatenate([rows, columns]) + 0.5 - SIDE / 2).max()
    # Half the size, half the outline of 0.16 of it, and its mitred corners.
    assert SIZE * 0.3 < reach <= SIZE * (0.5 + 0.16)


def test_the_mark_of_an_unbacked_change_is_open():
    centre = SIDE // 2
    assert not mark("in-reach-unbacked")[centre, centre]
    assert mark("in-reach-backed")[centre, centre]


@pytest.mark.parametrize("code", WORDS)
def test_a_mark_has_the_colour_that_it_is_given(code):
    drawn = picture(
        SIDE,
        SIDE,
        lambda painter: draw_mark(
            painter, QPointF(SIDE / 2, SIDE / 2), SIZE, code, QColor("#A63D00")
        ),
    )
    assert (drawn == (0xA6, 0x3D, 0x00)).all(axis=-1).any()
