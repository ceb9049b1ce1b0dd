"""The lead wall: twelve small plots, one selection."""

from __future__ import annotations

from PySide6.QtCore import QRectF, QSize, Qt
from PySide6.QtGui import QKeyEvent, QMouseEvent, QPainter, QPaintEvent, QPen
from PySide6.QtWidgets import QSizePolicy, QToolTip, QWidget

from app.drawing.lead_plots import GRID_OF_CELLS, draw_lead_cell
from app.drawing.pen import draw_text
from app.state.bench_state import BenchState
from app.views.theme import screen_style
from core.wording.judgements import WORDS

# By wall of the heart: inferior, lateral, septal to anterior, and on to the side.
BY_WALL = (
    ("II", "aVF", "III"),
    ("I", "aVL", "V6"),
    ("V1", "V2", "V3"),
    ("V4", "V5", "aVR"),
)
GAP = 4
NOTE_HEIGHT = 18


class LeadWall(QWidget):
    """Every lead with its two beats and its judgement; a click or an arrow key selects one."""

    def __init__(self, state: BenchState) -> None:
        super().__init__()
        self._state = state
        self.setFocusPolicy(Qt.FocusPolicy.StrongFocus)
        self.setMouseTracking(True)
        self.setMinimumSize(400, 330)
        self.setSizePolicy(QSizePolicy.Policy.Expanding, QSizePolicy.Policy.Expanding)
        self.setAccessibleName("Lead wall")
        state.phase_changed.connect(self._follow)
        state.lead_changed.connect(self._follow)
        self._follow()

    def sizeHint(self) -> QSize:
        """Comfortable cells."""
        return QSize(470, 560)

    def cell(self, row: int, column: int) -> QRectF:
        """Where a cell lies."""
        rows, columns = len(BY_WALL), len(BY_WALL[0])
        width = (self.width() - (columns - 1) * GAP) / columns
        height = (self.height() - NOTE_HEIGHT - (rows - 1) * GAP) / rows
        return QRectF(column * (width + GAP), row * (height + GAP), width, height)

    def cell_of(self, lead: str) -> QRectF:
        """Where a lead's cell lies."""
        row = next(index for index, leads in enumerate(BY_WALL) if lead in leads)
        return self.cell(row, BY_WALL[row].index(lead))

    def lead_at(self, x: float, y: float) -> str | None:
        """The lead under a point."""
        for row, leads in enumerate(BY_WALL):
            for column, lead in enumerate(leads):
                if self.cell(row, column).contains(x, y):
                    return lead
        return None

    def paintEvent(self, event: QPaintEvent) -> None:
        """Draw all cells."""
        comparison = self._state.comparison
        if comparison is None:
            return
        painter = QPainter(self)
        painter.setRenderHint(QPainter.RenderHint.Antialiasing)
        style = screen_style()
        for row, leads in enumerate(BY_WALL):
            for column, lead in enumerate(leads):
                draw_lead_cell(
                    painter,
                    self.cell(row, column),
                    comparison,
                    lead,
                    style,
                    selected=lead == self._state.lead,
                )
        if self.hasFocus():
            painter.setPen(QPen(style.palette.colour("earlier"), 2, Qt.PenStyle.DotLine))
            painter.setBrush(Qt.BrushStyle.NoBrush)
            painter.drawRect(self.cell_of(self._state.lead).adjusted(4, 4, -4, -4))
        note = QRectF(0, self.height() - NOTE_HEIGHT, self.width(), NOTE_HEIGHT)
        font = style.font(style.caption)
        draw_text(painter, note, GRID_OF_CELLS, font, style.palette.colour("soft_ink"))
        painter.end()

    def mousePressEvent(self, event: QMouseEvent) -> None:
        """Select the lead that is clicked."""
        lead = self.lead_at(event.position().x(), event.position().y())
        if lead is not None:
            self._state.select_lead(lead)

    def mouseMoveEvent(self, event: QMouseEvent) -> None:
        """Tell the judgement's reason under the mouse."""
        comparison = self._state.comparison
        lead = self.lead_at(event.position().x(), event.position().y())
        text = "" if comparison is None or lead is None else comparison.leads[lead].reason
        QToolTip.showText(event.globalPosition().toPoint(), text, self)

    def keyPressEvent(self, event: QKeyEvent) -> None:
        """Move the selection by the arrow keys."""
        steps = {
            Qt.Key.Key_Left: (0, -1),
            Qt.Key.Key_Right: (0, 1),
            Qt.Key.Key_Up: (-1, 0),
            Qt.Key.Key_Down: (1, 0),
        }
        step = steps.get(Qt.Key(event.key()))
        if step is None:
            super().keyPressEvent(event)
            return
        for row, leads in enumerate(BY_WALL):
            if self._state.lead in leads:
                column = leads.index(self._state.lead)
                row = (row + step[0]) % len(BY_WALL)
                self._state.select_lead(BY_WALL[row][(column + step[1]) % len(leads)])
                return

    def _follow(self) -> None:
        comparison, lead = self._state.comparison, self._state.lead
        said = ""
        if comparison is not None:
            result = comparison.leads[lead]
            said = f"{lead}, {WORDS[result.judgement]}. {result.reason}"
        self.setAccessibleDescription(said)
        self.update()
