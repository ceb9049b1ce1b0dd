"""The lead wall's view: it scrolls where a pair holds further leads."""

from __future__ import annotations

import math

from PySide6.QtCore import QSize, Qt
from PySide6.QtGui import QResizeEvent
from PySide6.QtWidgets import QFrame, QScrollArea, QSizePolicy

from app.state.bench_state import BenchState
from app.views.lead_wall import GAP, LEAST_HEIGHT, LEAST_WIDTH, LeadWall


class WallScroll(QScrollArea):
    """Shows the twelve leads at once, and the further ones below them."""

    def __init__(self, wall: LeadWall, state: BenchState) -> None:
        super().__init__()
        self._wall, self._state = wall, state
        self.setWidget(wall)
        self.setWidgetResizable(True)
        self.setFrameShape(QFrame.Shape.NoFrame)
        self.setFocusPolicy(Qt.FocusPolicy.NoFocus)
        self.setHorizontalScrollBarPolicy(Qt.ScrollBarPolicy.ScrollBarAlwaysOff)
        self.setSizePolicy(QSizePolicy.Policy.Expanding, QSizePolicy.Policy.Expanding)
        self.setMinimumSize(LEAST_WIDTH + 20, LEAST_HEIGHT)
        for widget in (self.viewport(), wall):
            widget.setAutoFillBackground(False)
        state.phase_changed.connect(self._fit)
        state.lead_changed.connect(self._bring_into_view)

    def sizeHint(self) -> QSize:
        """That of the wall."""
        return self._wall.sizeHint()

    def resizeEvent(self, event: QResizeEvent) -> None:
        """Keep the twelve leads in view."""
        super().resizeEvent(event)
        self._fit()

    def _fit(self) -> None:
        self._wall.setMinimumHeight(math.floor(self._wall.height_in(self.viewport().height())))

    def _bring_into_view(self) -> None:
        if self._state.comparison is None:
            return
        cell = self._wall.cell_of(self._state.lead).toAlignedRect()
        middle = cell.center()
        self.ensureVisible(middle.x(), middle.y(), 0, cell.height() // 2 + GAP)
