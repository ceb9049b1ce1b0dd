"""The chest map in the window."""

from __future__ import annotations

from PySide6.QtCore import QRectF, QSize
from PySide6.QtGui import QPainter, QPaintEvent, QPen
from PySide6.QtWidgets import QSizePolicy, QWidget

from app.drawing.chest_map import draw_chest_map
from app.drawing.pen import draw_paragraph, draw_text
from app.state.bench_state import BenchState
from app.views.theme import screen_style

NOTE = "Ring: where it belongs. Disc, ellipse: estimate for the later recording, 95 %."


class ChestPanel(QWidget):
    """Sites, estimated shifts and their ranges; the selected lead's electrode ringed."""

    def __init__(self, state: BenchState) -> None:
        super().__init__()
        self._state = state
        self.setMinimumSize(280, 230)
        self.setSizePolicy(QSizePolicy.Policy.Expanding, QSizePolicy.Policy.Expanding)
        self.setAccessibleName("Chest map")
        state.phase_changed.connect(self.update)
        state.lead_changed.connect(self.update)

    def sizeHint(self) -> QSize:
        """About as wide as a third of the window."""
        return QSize(380, 300)

    def paintEvent(self, event: QPaintEvent) -> None:
        """Draw heading, map and note."""
        comparison = self._state.comparison
        if comparison is None:
            return
        style = screen_style()
        palette = style.palette
        painter = QPainter(self)
        painter.setRenderHint(QPainter.RenderHint.Antialiasing)
        painter.setPen(QPen(palette.colour("line"), 1))
        painter.setBrush(palette.colour("card"))
        painter.drawRect(QRectF(self.rect()).adjusted(0.5, 0.5, -0.5, -0.5))
        inside = QRectF(self.rect()).adjusted(14, 10, -14, -10)
        top = QRectF(inside.left(), inside.top(), inside.width(), 26)
        heading = style.font(style.heading, bold=True)
        draw_text(painter, top, "Chest map", heading, palette.colour("ink"))
        note = QRectF(inside.left(), inside.bottom() - 34, inside.width(), 34)
        draw_paragraph(painter, note, NOTE, style.font(style.caption), palette.colour("soft_ink"))
        draw_chest_map(
            painter,
            QRectF(inside.left(), top.bottom(), inside.width(), note.top() - top.bottom() - 4),
            comparison,
            style,
            selected=self._state.lead,
        )
        painter.end()
