"""What a reader has to know besides the numbers."""

from __future__ import annotations

from PySide6.QtCore import QRectF, Qt
from PySide6.QtGui import QPainter, QPaintEvent, QPen
from PySide6.QtWidgets import QFrame, QScrollArea, QVBoxLayout, QWidget

from app.state.bench_state import BenchState
from app.views.labels import label
from app.views.theme import BODY, HEADING, current_palette
from core.wording.notices import NOTICE_WORDS


class NoticesPanel(QWidget):
    """The notices of the pair, the gravest first."""

    def __init__(self, state: BenchState) -> None:
        super().__init__()
        self._state = state
        self.setMinimumHeight(96)
        self.setAccessibleName("Notices")
        self._texts = QVBoxLayout()
        self._texts.setContentsMargins(0, 0, 8, 0)
        self._texts.setSpacing(6)
        inner = QWidget()
        inner.setLayout(self._texts)
        scroll = QScrollArea()
        scroll.setWidget(inner)
        scroll.setWidgetResizable(True)
        scroll.setFrameShape(QFrame.Shape.NoFrame)
        scroll.setHorizontalScrollBarPolicy(Qt.ScrollBarPolicy.ScrollBarAlwaysOff)
        for widget in (scroll.viewport(), inner):
            widget.setAutoFillBackground(False)
        layout = QVBoxLayout(self)
        layout.setContentsMargins(14, 10, 6, 10)
        layout.setSpacing(6)
        layout.addWidget(label("Notices", size=HEADING, bold=True))
        layout.addWidget(scroll, 1)
        state.phase_changed.connect(self._refresh)
        self._refresh()

    def texts(self) -> list[str]:
        """The notices as they are shown."""
        comparison = self._state.comparison
        if comparison is None:
            return []
        notices = comparison.notices
        return [f"{NOTICE_WORDS[notice.severity]}: {notice.text}" for notice in notices] or [
            "Nothing in the files or the tracings limits this comparison."
        ]

    def _refresh(self) -> None:
        while (item := self._texts.takeAt(0)) is not None:
            if (widget := item.widget()) is not None:
                widget.deleteLater()
        for text in self.texts():
            self._texts.addWidget(label(text, size=BODY, wrap=True))
        self._texts.addStretch(1)

    def paintEvent(self, event: QPaintEvent) -> None:
        """Draw the panel's ground and border."""
        palette = current_palette()
        painter = QPainter(self)
        painter.setPen(QPen(palette.colour("line"), 1))
        painter.setBrush(palette.colour("card"))
        painter.drawRect(QRectF(self.rect()).adjusted(0.5, 0.5, -0.5, -0.5))
        painter.end()
