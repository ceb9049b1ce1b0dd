"""What the bench shows before there is a pair: the samples to try."""

from __future__ import annotations

from PySide6.QtCore import Qt, Signal
from PySide6.QtWidgets import QGridLayout, QPushButton, QVBoxLayout, QWidget

from app.samples import SAMPLE_PAIRS
from app.views.labels import label
from app.views.theme import BODY, HEADING


class StartView(QWidget):
    """One button for each sample pair."""

    pair_wanted = Signal(object, object)

    def __init__(self) -> None:
        super().__init__()
        layout = QVBoxLayout(self)
        layout.setAlignment(Qt.AlignmentFlag.AlignCenter)
        layout.setSpacing(12)
        layout.addWidget(
            label("No recordings at hand? Try an invented pair.", size=HEADING, bold=True)
        )
        grid = QGridLayout()
        grid.setSpacing(8)
        self.buttons = []
        for row, pair in enumerate(SAMPLE_PAIRS):
            button = QPushButton(pair.title)
            button.setMinimumWidth(220)
            button.clicked.connect(
                lambda _=False, pair=pair: self.pair_wanted.emit(pair.earlier, pair.later)
            )
            grid.addWidget(button, row, 0)
            grid.addWidget(label(pair.story, size=BODY), row, 1)
            self.buttons.append(button)
        layout.addLayout(grid)
