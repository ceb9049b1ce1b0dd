from __future__ import annotations

import numpy as np
import pytest
from PySide6.QtCore import QPoint, QRect, Qt
from PySide6.QtWidgets import QLabel, QPushButton

from app.drawing.palette import contrast
from app.views.caution_bar import CautionBar
from app.views.chest_panel import ChestPanel
from app.views.lead_depth import LeadDepth
from app.views.lead_wall import LeadWall
from app.views.recording_card import RecordingCard
from app.views.start_view import StartView
from app.views.theme import dress, use_scheme
from app.views.verdict_panel import VerdictPanel
from core.wording.caution import CAUTION, PLACEMENT_CAVEAT
from tests.app.drawing.readback import drawn_on, lying_on_each_other, pixels, words
from tests.app.views.showing import PHASES, show

SIZES = pytest.mark.parametrize("size", [(1280, 720), (1440, 900)], ids=str)
PANELS = (RecordingCard, LeadWall, LeadDepth, ChestPanel)
RESULTS = pytest.mark.parametrize("name", ["raised", "inferior", "steady", "medial", "four_flat"])
# The rounding of a glyph's advance, over a line of text, in px.
SLACK = 2.0


@pytest.fixture
def judged(request, bench, qtbot, name, size):
    bench.resize(*size)
    show(bench, request.getfixturevalue(name))
    qtbot.wait(1)  # lets the layout settle
    return bench


def panels(bench, *kinds):
    shown = [one for kind in kinds for one in bench.findChildren(kind) if one.isVisible()]
    assert len(shown) >= len(kinds)
    return shown


@SIZES
@RESULTS
def test_words_of_a_panel_keep_inside_it(judged):
    for panel in panels(judged, *PANELS):
        for piece in drawn_on(panel):
            assert piece.left >= 0
            assert piece.right <= panel.width() + SLACK, piece.text
            # Descenders reach a fifth of the size below the line.
            assert piece.baseline + 0.2 * piece.size <= panel.height(), piece.text


@SIZES
@RESULTS
def test_words_of_a_panel_do_not_lie_on_each_other(judged):
    for panel in panels(judged, *PANELS):
        assert lying_on_each_other(drawn_on(panel)) == []


@SIZES
@RESULTS
def test_nothing_but_a_files_own_words_is_ever_shortened(judged):
    for panel in panels(judged, LeadWall, LeadDepth, ChestPanel):
        assert "…" not in words(drawn_on(panel))


@SIZES
@pytest.mark.parametrize("name", ["raised", "steady", "inferior"])
def test_the_reason_stands_whole_under_the_lead_in_depth(judged):
    depth, cut = judged.lead_depth, []
    for lead, result in judged.state.comparison.leads.items():
        judged.state.select_lead(lead)
        inside = [
            piece
            for piece in drawn_on(depth)
            if piece.baseline + 0.2 * piece.size <= depth.height()
        ]
        if " ".join(result.reason.split()) not in words(inside):
            cut.append(lead)
    assert cut == []


@SIZES
@pytest.mark.parametrize("phase", PHASES)
def test_the_cautions_are_drawn_whole_in_every_phase(bench, raised, qtbot, phase, size):
    bench.resize(*size)
    phase(bench, raised)
    qtbot.wait(1)
    assert (bench.width(), bench.height()) == size
    drawn = [piece for piece in drawn_on(bench) if piece.baseline <= bench.height()]
    assert CAUTION in words(drawn)
    if bench.state.comparison is not None:
        assert PLACEMENT_CAVEAT in words(drawn)


@SIZES
@pytest.mark.parametrize("phase", PHASES)
def test_no_label_is_clipped(bench, raised, qtbot, phase, size):
    bench.resize(*size)
    phase(bench, raised)
    qtbot.wait(1)
    shown = [one for one in bench.findChildren(QLabel) if one.isVisible() and one.text()]
    assert shown
    for one in shown:
        flags = int(Qt.TextFlag.TextWordWrap) if one.wordWrap() else 0
        room = QRect(0, 0, one.width(), 10_000)
        needed = one.fontMetrics().boundingRect(room, flags, one.text())
        assert needed.width() <= one.width(), one.text()
        assert needed.height() <= one.height(), one.text()


@SIZES
@pytest.mark.parametrize("phase", PHASES)
def test_every_button_has_room_for_its_words_and_lies_in_the_window(
    bench, raised, qtbot, phase, size
):
    bench.resize(*size)
    phase(bench, raised)
    qtbot.wait(1)
    for button in bench.findChildren(QPushButton):
        if button.isVisible():
            assert button.fontMetrics().horizontalAdvance(button.text()) <= button.width()
            corner = button.mapTo(bench, QPoint(button.width(), button.height()))
            assert corner.x() <= bench.width()
            assert corner.y() <= bench.height()


@pytest.mark.parametrize("scheme", [Qt.ColorScheme.Light, Qt.ColorScheme.Dark], ids=str)
@pytest.mark.parametrize("phase", PHASES)
@pytest.mark.parametrize("name", ["raised", "inferior"])
def test_every_word_that_is_drawn_can_be_read(request, bench, qapp, qtbot, scheme, phase, name):
    use_scheme(scheme)
    dress(qapp)
    phase(bench, request.getfixturevalue(name))
    qtbot.wait(1)
    off = {one.text() for one in bench.findChildren(QPushButton) if not one.isEnabled()}
    kinds = (*PANELS, VerdictPanel, CautionBar, StartView)
    shown = [one for kind in kinds for one in bench.findChildren(kind) if one.isVisible()]
    for panel in shown:
        seen = pixels(panel.grab().toImage())
        for piece in drawn_on(panel):
            # WCAG 2.2, 1.4.3; it excepts what cannot be used.
            if piece.text not in off:
                assert contrast(piece.colour, ground_of(piece, seen)) >= 4.5, piece.text


def ground_of(piece, seen) -> str:
    """The commonest colour where a run of text stands, besides the text's own."""
    box = piece.box.toAlignedRect()
    part = seen[max(box.top(), 0) : box.bottom(), max(box.left(), 0) : box.right()]
    colours, counts = np.unique(part.reshape(-1, 3), axis=0, return_counts=True)
    named = ["#" + "".join(f"{value:02X}" for value in colour) for colour in colours]
    return next(named[at] for at in counts.argsort()[::-1] if named[at] != piece.colour)
