"""What the bench shows while a pair is being compared: whose files, and how far it is."""

from __future__ import annotations

from PySide6.QtCore import QRectF, Qt
from PySide6.QtGui import QFontMetricsF, QPainter, QPaintEvent
from PySide6.QtWidgets import QWidget

from app.drawing.pen import Style, draw_text
from app.state.bench_state import BenchState
from app.views.theme import screen_style

WIDTH, MARGIN = 560.0, 24.0
FILE_LINE, STEP_LINE, GAP = 30.0, 22.0, 18.0
NAME_FROM = 96.0
ROLES = (("earlier", "Earlier"), ("later", "Later"))


class WorkingView(QWidget):
    """The names of the two files, and the steps so far, the present one last and in bold."""

    def __init__(self, state: BenchState) -> None:
        super().__init__()
        self._state = state
        self.setAccessibleName("Comparison at work")
        for signal in (state.phase_changed, state.pair_changed, state.progress_changed):
            signal.connect(self._follow)
        self._follow()

    def paintEvent(self, event: QPaintEvent) -> None:
        """Draw the files, and the steps below them."""
        painter = QPainter(self)
        style = screen_style()
        width = min(WIDTH, self.width() - 2 * MARGIN)
        line = QRectF((self.width() - width) / 2, self.height() * 0.18, width, FILE_LINE)
        for role, name in ROLES:
            self._draw_file(painter, line, role, name, style)
            line.translate(0, FILE_LINE + 4)
        line.translate(NAME_FROM, GAP)
        line.setSize(QRectF(0, 0, width - NAME_FROM, STEP_LINE).size())
        room = int((self.height() - line.top()) / STEP_LINE)
        steps = self._state.steps[-max(room, 1) :]  # where not all have room, the latest
        for step in steps:
            present = step == steps[-1]
            font = style.font(style.body, bold=present)
            ink = style.palette.colour("ink" if present else "soft_ink")
            draw_text(painter, line, f"{step} …" if present else step, font, ink)
            line.translate(0, STEP_LINE)
        painter.end()

    def _draw_file(
        self, painter: QPainter, line: QRectF, role: str, name: str, style: Style
    ) -> None:
        colour = style.palette.colour(role)
        painter.fillRect(QRectF(line.left(), line.top(), 5, line.height()), colour)
        bold = style.font(style.heading, bold=True)
        draw_text(painter, line.adjusted(16, 0, 0, 0), name, bold, colour)
        beside, font = line.adjusted(NAME_FROM, 0, 0, 0), style.font(style.heading)
        # Names of one person's files differ at their ends, so the middle is left out.
        text = QFontMetricsF(font).elidedText(
            self._file(role), Qt.TextElideMode.ElideMiddle, beside.width()
        )
        draw_text(painter, beside, text, font, style.palette.colour("ink"))

    def _file(self, role: str) -> str:
        path = getattr(self._state, role)
        return "" if path is None else path.name

    def _follow(self) -> None:
        steps = self._state.steps
        files = ", ".join(f"{role} {self._file(role)}" for role, _ in ROLES)
        self.setAccessibleDescription(f"{files}: {steps[-1]}" if steps else files)
        self.update()
