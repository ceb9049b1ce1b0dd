"""What the panels of a judged bench write, at the two sizes that it is made for."""

from __future__ import annotations

from collections.abc import Iterator
from dataclasses import dataclass
from itertools import product

import pytest
from PySide6.QtCore import Qt
from PySide6.QtWidgets import QWidget

from app.views.bench_window import BenchWindow
from app.views.chest_panel import ChestPanel
from app.views.lead_depth import LeadDepth
from app.views.lead_wall import LeadWall
from app.views.recording_card import RecordingCard
from app.views.theme import dress, use_scheme
from core import Comparison
from tests.app.drawing.readback import Piece, drawn_on, lying_on_each_other, words
from tests.app.views.showing import show

PANELS = (RecordingCard, LeadWall, LeadDepth, ChestPanel)
SIZES = ((1280, 720), (1440, 900))
NAMES = ("raised", "inferior", "steady", "medial", "four_flat", "further")
# The rounding of a glyph's advance, over a line of text, in px.
SLACK = 2.0


@dataclass(frozen=True)
class Written:
    """A panel, and every run of text on it."""

    panel: QWidget
    pieces: list[Piece]

    def inside(self) -> list[Piece]:
        """Those that are whole; descenders reach a fifth of the size below the line."""
        bottom = self.panel.height()
        return [piece for piece in self.pieces if piece.baseline + 0.2 * piece.size <= bottom]


@dataclass(frozen=True)
class Judged:
    """A comparison, its panels, and the lead in depth for each lead."""

    comparison: Comparison
    panels: list[Written]
    depths: dict[str, Written]


@pytest.fixture(
    scope="module",
    params=product(NAMES, SIZES),
    ids=lambda given: f"{given[0]}-{given[1][0]}x{given[1][1]}",
)
def judged(qapp, request) -> Iterator[Judged]:
    """One window for all tests of one result and one size."""
    name, size = request.param
    comparison = request.getfixturevalue(name)
    use_scheme(Qt.ColorScheme.Light)
    dress(qapp)
    bench = BenchWindow()
    bench.resize(*size)
    show(bench, comparison)
    bench.show()
    qapp.processEvents()
    assert (bench.width(), bench.height()) == size
    shown = [one for kind in PANELS for one in bench.findChildren(kind) if one.isVisible()]
    assert len(shown) == len(PANELS) + 1  # two cards
    panels, depths = [Written(one, drawn_on(one)) for one in shown], {}
    for lead in [*comparison.leads, *comparison.further]:
        bench.state.select_lead(lead)
        depths[lead] = Written(bench.lead_depth, drawn_on(bench.lead_depth))
    yield Judged(comparison, panels, depths)
    bench.close()
    use_scheme(None)


def test_every_word_keeps_inside_its_panel(judged):
    for written in [*judged.panels, *judged.depths.values()]:
        for piece in written.pieces:
            assert piece.left >= 0
            assert piece.right <= written.panel.width() + SLACK, piece.text
        assert written.inside() == written.pieces


def test_no_words_lie_on_each_other(judged):
    for written in [*judged.panels, *judged.depths.values()]:
        assert lying_on_each_other(written.pieces) == []


def test_nothing_but_a_files_own_words_is_ever_shortened(judged):
    for written in [*judged.panels, *judged.depths.values()]:
        if not isinstance(written.panel, RecordingCard):
            assert "…" not in words(written.pieces)


def test_the_reason_stands_whole_under_each_lead_in_depth(judged):
    cut = [
        lead
        for lead, written in judged.depths.items()
        if " ".join(judged.comparison.reason_of(lead).split()) not in words(written.inside())
    ]
    assert cut == []
