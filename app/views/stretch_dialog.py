"""Ask which part of a long recording to use."""

from __future__ import annotations

from PySide6.QtWidgets import (
    QDialog,
    QDialogButtonBox,
    QGridLayout,
    QLineEdit,
    QVBoxLayout,
    QWidget,
)

from app.state.stated import (
    LONGEST_WHOLE_S,
    SHORTEST_STRETCH_S,
    USUAL_STRETCH_S,
    Stated,
    seconds_of_text,
)
from app.views.labels import label
from app.views.table_dialog import MARGIN, WIDTH, file_heading, visible_outlines
from app.views.theme import BODY

START, LENGTH = "From (h:min:s)", "Length (s)"
WHY = (
    "Counted from the start of the recording. Ten seconds are usual; of more than "
    f"{LONGEST_WHOLE_S / 60:.0f} minutes the cleanest ten seconds are taken."
)


class StretchDialog(QDialog):
    """Where the stretch starts, and how long it is."""

    def __init__(self, parent: QWidget | None, name: str) -> None:
        super().__init__(parent)
        self.setWindowTitle("Use a stretch")
        self.setFixedWidth(WIDTH)
        self.setStyleSheet(visible_outlines())
        self.start, self.length = QLineEdit(), QLineEdit(f"{USUAL_STRETCH_S:g}")
        questions = QGridLayout()
        questions.setHorizontalSpacing(16)
        questions.setVerticalSpacing(12)
        questions.setColumnStretch(1, 1)
        for row, (words, field) in enumerate(((START, self.start), (LENGTH, self.length))):
            field.setFixedWidth(110)
            field.setAccessibleName(words)
            field.textChanged.connect(self._refresh)
            questions.addWidget(label(words), row, 0)
            questions.addWidget(field, row, 1)
        self.start.setPlaceholderText("0:00:00")
        self.buttons = QDialogButtonBox(QDialogButtonBox.StandardButton.Cancel)
        self.use = self.buttons.addButton("Use it", QDialogButtonBox.ButtonRole.AcceptRole)
        self.buttons.accepted.connect(self.accept)
        self.buttons.rejected.connect(self.reject)
        layout = QVBoxLayout(self)
        layout.setContentsMargins(MARGIN, 16, MARGIN, 16)
        layout.setSpacing(14)
        layout.addWidget(file_heading(name))
        layout.addWidget(label(WHY, size=BODY, wrap=True))
        layout.addLayout(questions)
        layout.addWidget(self.buttons)
        self._refresh()

    def stated(self) -> Stated | None:
        """The stretch as typed; None as long as it is none."""
        start_s, length_s = seconds_of_text(self.start.text()), seconds_of_text(self.length.text())
        if start_s is None or length_s is None or length_s < SHORTEST_STRETCH_S:
            return None
        return Stated(stretch_s=(start_s, start_s + length_s))

    def _refresh(self) -> None:
        self.use.setEnabled(self.stated() is not None)
