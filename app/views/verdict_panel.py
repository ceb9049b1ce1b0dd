"""What changed and how sure: one sentence and the next step, always in the same place."""

from __future__ import annotations

from PySide6.QtCore import QPointF, QRectF, Signal
from PySide6.QtGui import QPainter, QPaintEvent, QPen
from PySide6.QtWidgets import QHBoxLayout, QProgressBar, QPushButton, QVBoxLayout, QWidget

from app.drawing.pen import draw_mark
from app.state.bench_state import BenchState, Phase
from app.views.labels import label
from app.views.theme import BODY, SENTENCE, current_palette

QUESTION = "Two ECGs of one person differ: is it the heart, or did the electrodes move?"
BOTH_MISSING = (
    "Drop two recordings here, or open them from the File menu: WFDB, DICOM, EDF, BDF, SCP-ECG, "
    "HL7 aECG or a table (CSV)."
)
STOPPED = "The comparison was stopped. Swap the two, or open either again, to compare them."
ONE_MISSING = "One recording is chosen. Drop the other here, or open it from the File menu."


class VerdictPanel(QWidget):
    """The overall sentence; the progress while there is none; the reason where there can't be."""

    cancelled = Signal()
    lift_wanted = Signal()

    def __init__(self, state: BenchState) -> None:
        super().__init__()
        self._state = state
        self.sentence = label(size=SENTENCE, bold=True, wrap=True)
        self.next_step = label(size=BODY, wrap=True)
        self.bar = QProgressBar()
        self.bar.setRange(0, 100)
        self.bar.setTextVisible(False)
        self.bar.setFixedHeight(8)
        self.cancel = QPushButton("Stop")
        self.cancel.clicked.connect(self.cancelled)
        self.lift = QPushButton("Compare all the same")
        self.lift.clicked.connect(self.lift_wanted)

        words = QVBoxLayout()
        words.setSpacing(4)
        words.addWidget(self.sentence)
        words.addWidget(self.next_step)
        words.addWidget(self.bar)
        layout = QHBoxLayout(self)
        layout.setContentsMargins(48, 12, 16, 12)
        layout.setSpacing(16)
        layout.addLayout(words, 1)
        layout.addWidget(self.cancel)
        layout.addWidget(self.lift)

        state.phase_changed.connect(self._refresh)
        state.progress_changed.connect(self._refresh)
        self._refresh()

    def _refresh(self) -> None:
        state = self._state
        working = state.phase is Phase.WORKING
        self.bar.setVisible(working)
        self.cancel.setVisible(working)
        self.lift.setVisible(state.phase is Phase.REFUSED and bool(state.liftable_stops))
        if working:
            self._show("Comparing the two recordings", f"{state.progress_words} …")
            self.bar.setValue(round(100 * state.progress))
        elif state.phase is Phase.REFUSED:
            self._show(state.refusal, "Choose other recordings, or mend what the sentence names.")
        elif state.comparison is not None:
            overall = state.comparison.overall
            self._show(overall.sentence, overall.next_step)
        else:
            missing = ONE_MISSING if state.earlier or state.later else BOTH_MISSING
            self._show(QUESTION, STOPPED if state.has_pair else missing)
        self.update()

    def _show(self, sentence: str, next_step: str) -> None:
        self.sentence.setText(sentence)
        self.next_step.setText(next_step)

    def paintEvent(self, event: QPaintEvent) -> None:
        """Draw the panel's ground, its border and the judgement's mark."""
        palette = current_palette()
        painter = QPainter(self)
        painter.setRenderHint(QPainter.RenderHint.Antialiasing)
        comparison = self._state.comparison
        code = comparison.overall.judgement if comparison is not None else "not-judged"
        judged = comparison is not None
        colour = palette.judgement(code) if judged else palette.colour("line")
        painter.setPen(QPen(colour, 1.5 if judged else 1))
        painter.setBrush(palette.colour("card"))
        painter.drawRect(QRectF(self.rect()).adjusted(1, 1, -1, -1))
        if judged:
            at = QPointF(26, self.sentence.geometry().top() + SENTENCE * 0.72)
            draw_mark(painter, at, 15, code, colour)
        painter.end()
