"""The card of one recording: when, whose, its key numbers, what limits it."""

from __future__ import annotations

from PySide6.QtCore import QRectF, QSize, Qt
from PySide6.QtGui import QFontMetricsF, QPainter, QPaintEvent, QPen
from PySide6.QtWidgets import QSizePolicy, QWidget

from app.drawing.lead_plots import RIGHT
from app.drawing.pen import draw_text, text_width
from app.state.bench_state import BenchState
from app.views.labels import plain_tool_tip
from app.views.theme import BODY, screen_style
from core.measures.report import RecordingReport
from core.wording.recordings import beats_used, key_numbers, person, when

NAMES = {"earlier": "Earlier", "later": "Later"}


class RecordingCard(QWidget):
    """Shows the earlier or the later recording of the open pair."""

    def __init__(self, state: BenchState, role: str) -> None:
        super().__init__()
        self._state, self._role = state, role
        self.setMinimumWidth(240)
        self.setSizePolicy(QSizePolicy.Policy.Expanding, QSizePolicy.Policy.Fixed)
        state.phase_changed.connect(self._refresh)
        state.pair_changed.connect(self._refresh)
        self._refresh()

    def sizeHint(self) -> QSize:
        """As high as its three lines."""
        return QSize(420, 78)

    def lines(self) -> list[str]:
        """What the card says beside and under its name."""
        report = self._report()
        if report is None:
            path = getattr(self._state, self._role)
            return [path.name if path is not None else "no recording yet"]
        recording, subject = report.recording, report.recording.subject
        return [
            f"{when(recording.recorded_at)} · {recording.source.name}",
            person(subject.name, subject.id, subject.sex, subject.age_years),
            key_numbers(report.heart_rate_per_min, report.pr_ms, report.qrs_ms, report.qtc_ms),
        ]

    def limits(self) -> str:
        """What limits the recording: how many beats are used, which leads cannot be."""
        report = self._report()
        if report is None:
            return ""
        used = beats_used(len(report.analysis.used), len(report.analysis.beats))
        unusable = [f"{g.lead} {g.reason}" for g in report.quality if not g.usable]
        return " · ".join([*unusable, used])

    def paintEvent(self, event: QPaintEvent) -> None:
        """Draw the card."""
        style = screen_style()
        palette = style.palette
        painter = QPainter(self)
        box = QRectF(self.rect()).adjusted(0.5, 0.5, -0.5, -0.5)
        painter.setPen(QPen(palette.colour("line"), 1))
        painter.setBrush(palette.colour("card"))
        painter.drawRect(box)
        painter.fillRect(QRectF(0, 0, 5, self.height()), palette.colour(self._role))
        bold, plain = style.font(BODY, bold=True), style.font(BODY)
        line = QRectF(16, 8, self.width() - 28, 21)
        draw_text(painter, line, NAMES[self._role], bold, palette.colour(self._role))
        first, *rest = self.lines()
        # The time stands whole; what limits the recording gives way to it, the file's name to both.
        beside = line.adjusted(66, 0, 0, 0)
        time, dot, name = first.partition(" · ")
        least = text_width(f"{time}{dot}…", bold) + 12
        limits = self.limits()
        room = min(text_width(limits, plain) + 12, beside.width() - least) if limits else 0
        right = QRectF(line.right() - room, line.top(), room, line.height())
        draw_text(painter, right, limits, plain, palette.colour("soft_ink"), RIGHT)
        # Names of one person's files differ at their ends, so the middle is left out.
        for_name = beside.width() - room - text_width(time + dot, bold)
        name = QFontMetricsF(bold).elidedText(name, Qt.TextElideMode.ElideMiddle, for_name)
        shown = beside.adjusted(0, 0, -room, 0)
        draw_text(painter, shown, time + dot + name, bold, palette.colour("ink"))
        for text in rest:
            line.translate(0, 21)
            draw_text(painter, line, text, plain, palette.colour("soft_ink"))
        painter.end()

    def _report(self) -> RecordingReport | None:
        comparison = self._state.comparison
        return None if comparison is None else getattr(comparison, self._role)

    def _refresh(self) -> None:
        text = "\n".join([*self.lines(), self.limits()])
        self.setToolTip(plain_tool_tip(text))
        self.setAccessibleName(f"{NAMES[self._role]} recording")
        self.setAccessibleDescription(text)
        self.update()
