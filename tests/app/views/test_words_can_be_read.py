from __future__ import annotations

import numpy as np
import pytest
from PySide6.QtCore import Qt
from PySide6.QtWidgets import QPushButton

from app.drawing.palette import contrast
from app.views.caution_bar import CautionBar
from app.views.chest_panel import ChestPanel
from app.views.lead_depth import LeadDepth
from app.views.lead_wall import LeadWall
from app.views.recording_card import RecordingCard
from app.views.start_view import StartView
from app.views.theme import dress, use_scheme
from app.views.verdict_panel import VerdictPanel
from app.views.working_view import WorkingView
from tests.app.drawing.readback import drawn_on, pixels
from tests.app.views.showing import PHASES, show

PANELS = (
    *(RecordingCard, VerdictPanel, StartView, WorkingView),
    *(LeadWall, LeadDepth, ChestPanel, CautionBar),
)


@pytest.mark.parametrize("scheme", [Qt.ColorScheme.Light, Qt.ColorScheme.Dark], ids=str)
@pytest.mark.parametrize(
    ("phase", "name"), [*[(phase, "raised") for phase in PHASES], (show, "inferior")]
)
def test_every_word_that_is_drawn_can_be_read(request, bench, qapp, qtbot, scheme, phase, name):
    use_scheme(scheme)
    dress(qapp)
    phase(bench, request.getfixturevalue(name))
    qtbot.wait(1)
    off = {one.text() for one in bench.findChildren(QPushButton) if not one.isEnabled()}
    shown = [one for kind in PANELS for one in bench.findChildren(kind) if one.isVisible()]
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
