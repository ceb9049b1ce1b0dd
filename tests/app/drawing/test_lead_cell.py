from __future__ import annotations

import re

import numpy as np
import pytest
from PySide6.QtCore import QRectF

from app.drawing.lead_cell import NOTE_OF_CELLS, draw_lead_cell
from app.drawing.palette import DARK, LIGHT
from app.drawing.pen import Style
from core.recordings.leads import TWELVE_LEADS
from core.wording.further import values_of_further_lead
from core.wording.judgements import WORDS
from core.wording.numbers import signed
from tests.app.drawing.changed import (
    with_all_beats,
    with_judgement,
    with_later,
    without_later,
)
from tests.app.drawing.readback import drawn_by, lying_on_each_other, picture

CELL = QRectF(20, 20, 150, 120)
WIDE, HIGH = 190, 160


@pytest.fixture
def style(qapp) -> Style:
    return Style(LIGHT, 1.0, qapp.font().family(), caption=12, body=13, heading=16)


def seen(comparison, lead, style, *, cell=CELL, selected=False) -> np.ndarray:
    return picture(
        WIDE,
        HIGH,
        lambda p: draw_lead_cell(p, cell, comparison, lead, style, selected=selected),
    )


def read(comparison, lead, style, *, cell=CELL):
    return drawn_by(WIDE, HIGH, lambda p: draw_lead_cell(p, cell, comparison, lead, style))


@pytest.mark.parametrize("lead", TWELVE_LEADS)
def test_a_cell_names_its_lead_its_judgement_and_its_changes(raised, style, lead):
    drawn = [piece.text for piece in read(raised, lead, style)]
    result = raised.leads[lead]
    assert lead in drawn
    assert WORDS[result.judgement] in drawn
    changes = drawn[-1]
    for name, measure in (("ST", "st_mv"), ("T", "t_mv")):
        assert f"{name} {signed(result.measures[measure].change)}" in changes


def test_the_same_comparison_gives_the_same_picture(raised, style):
    assert (seen(raised, "V2", style) == seen(raised, "V2", style)).all()


@pytest.mark.parametrize("lead", [lead for lead in TWELVE_LEADS if lead != "V2"])
def test_another_lead_gives_another_picture(raised, style, lead):
    assert (seen(raised, lead, style) != seen(raised, "V2", style)).any()


def test_another_later_beat_is_seen(raised, style):
    assert (seen(with_later(raised, "V3", plus_mv=0.1), "V3", style) != seen(raised, "V3", style))[
        40:120
    ].any()


def test_a_change_of_another_lead_is_not_seen(raised, style):
    changed = with_later(raised, "V4", times=2.0)
    assert (seen(changed, "V3", style) == seen(raised, "V3", style)).all()


@pytest.mark.parametrize("judgement", [code for code in WORDS if code != "steady"])
def test_another_judgement_is_seen(raised, style, judgement):
    changed = with_judgement(raised, "V5", judgement)
    assert (seen(changed, "V5", style) != seen(raised, "V5", style)).any()
    assert WORDS[judgement] in [piece.text for piece in read(changed, "V5", style)]


def test_the_selected_cell_is_seen_to_be_selected(raised, style):
    assert (seen(raised, "V2", style, selected=True) != seen(raised, "V2", style)).any()


def test_dark_is_not_light(raised, style):
    dark = Style(DARK, 1.0, style.family, caption=12, body=13, heading=16)
    lit = seen(raised, "V2", style)[30:130, 30:160].mean()
    assert seen(raised, "V2", dark)[30:130, 30:160].mean() < 100 < lit


@pytest.mark.parametrize("times", [1.0, 50.0])
@pytest.mark.parametrize("lead", TWELVE_LEADS)
def test_nothing_is_drawn_outside_the_cell(raised, style, lead, times):
    outside = np.ones((HIGH, WIDE), bool)
    outside[20:140, 20:170] = False
    drawn = seen(with_all_beats(raised, times), lead, style)
    assert (drawn[outside] == 255).all()
    assert (drawn[~outside] != 255).any()


@pytest.mark.parametrize("width", [60.0, 90.0, 130.0])
def test_a_narrow_cell_keeps_its_words_inside_and_apart(inferior, style, width):
    cell = QRectF(20, 20, width, 110)
    drawn = read(inferior, "aVF", style, cell=cell)
    assert max(piece.right for piece in drawn) <= cell.right()
    assert min(piece.left for piece in drawn) >= cell.left()
    assert lying_on_each_other(drawn) == []


def test_a_lead_without_samples_is_still_named_and_judged(raised, style):
    empty = with_judgement(without_later(raised, "V1"), "V1", "not-judged")
    assert {"V1", "not judged"} <= {piece.text for piece in read(empty, "V1", style)}


@pytest.mark.parametrize("lead", ["V3R", "V4R", "V7", "V9", "X"])
def test_a_further_lead_is_called_not_judged_and_tells_its_values(further, style, lead):
    drawn = [piece.text for piece in read(further, lead, style)]
    shown = further.further[lead]
    assert drawn == [lead, "not judged", *values_of_further_lead(shown.earlier, shown.later)]


def test_a_further_lead_has_no_mark(further, style):
    colour = LIGHT.judgement("not-judged").getRgb()[:3]
    # The mark of a lead that is not judged is a dash of some width, in the colour of its word.
    word = next(piece for piece in read(further, "V7", style) if piece.text == "not judged")
    beside = seen(further, "V7", style)[22:48, 60 : int(word.left) - 1]
    unjudged = seen(with_judgement(further, "V1", "not-judged"), "V1", style)
    assert not (beside == colour).all(axis=-1).any()
    assert (unjudged[22:48, 60 : int(word.left) - 1] == colour).all(axis=-1).any()


@pytest.mark.parametrize(("lead", "beats"), [("V7", 2), ("V3R", 1), ("X", 1), ("V9", 1)])
def test_a_further_lead_draws_the_beats_that_there_are(further, style, lead, beats):
    drawn = seen(further, lead, style)[40:110]
    inked = [
        (np.abs(drawn.astype(int) - LIGHT.colour(role).getRgb()[:3]).sum(axis=-1) < 30).any()
        for role in ("earlier", "later")
    ]
    assert sum(inked) == beats


@pytest.mark.parametrize("width", [124.0, 135.0, 160.0])
def test_all_cells_of_a_wall_tell_their_changes_in_one_form(raised, inferior, style, width):
    cell = QRectF(20, 20, width, 110)
    forms = {
        re.sub(r"[+−]?\d\.\d\d", "", read(comparison, lead, style, cell=cell)[-1].text)
        for comparison in (raised, inferior)
        for lead in TWELVE_LEADS
    }
    assert len(forms) == 1
    assert "mV" not in forms.pop()


def test_the_note_says_what_the_numbers_are(style):
    assert NOTE_OF_CELLS.endswith("ST, T: change in mV")
