"""Ask what a table of samples does not say: the unit of its leads, its rate, or both."""

from __future__ import annotations

from collections.abc import Collection

from PySide6.QtCore import Qt
from PySide6.QtWidgets import (
    QButtonGroup,
    QDialog,
    QDialogButtonBox,
    QGridLayout,
    QHBoxLayout,
    QLabel,
    QLineEdit,
    QRadioButton,
    QVBoxLayout,
    QWidget,
)

from app.state.stated import HIGHEST_RATE_HZ, LOWEST_RATE_HZ, UNITS, Stated, rate_of_text
from app.views.labels import label, plain_tool_tip
from app.views.theme import BODY, HEADING, current_palette
from core.errors import Unstated

WIDTH = 460
MARGIN = 20
WHY = "Not stated in the file, and not guessed: a wrong answer makes ST and T wrong."
UNIT, RATE = "Unit of the leads", "Samples a second"


class TableDialog(QDialog):
    """Nothing is chosen to begin with; the file can be read once all is answered."""

    def __init__(self, parent: QWidget | None, name: str, missing: Collection[Unstated]) -> None:
        super().__init__(parent)
        self.setWindowTitle("Not stated in the table")
        self.setFixedWidth(WIDTH)
        self.setStyleSheet(visible_outlines())
        heading = file_heading(name)
        self._missing = missing
        self.units = QButtonGroup(self)
        self.rate = QLineEdit()
        self.rate.setFixedWidth(110)
        self.rate.setAccessibleName(RATE)
        self.rate.textChanged.connect(self._refresh)
        self.buttons = QDialogButtonBox(QDialogButtonBox.StandardButton.Cancel)
        self.read = self.buttons.addButton("Read the file", QDialogButtonBox.ButtonRole.AcceptRole)
        self.buttons.accepted.connect(self.accept)
        self.buttons.rejected.connect(self.reject)

        questions = QGridLayout()
        questions.setHorizontalSpacing(16)
        questions.setVerticalSpacing(12)
        questions.setColumnStretch(1, 1)
        if "unit" in missing:
            questions.addWidget(label(UNIT), 0, 0)
            questions.addLayout(self._unit_buttons(), 0, 1)
        if "rate" in missing:
            questions.addWidget(label(RATE), 1, 0)
            questions.addLayout(self._rate_field(), 1, 1)
        layout = QVBoxLayout(self)
        layout.setContentsMargins(MARGIN, 16, MARGIN, 16)
        layout.setSpacing(14)
        layout.addWidget(heading)
        layout.addWidget(label(WHY, size=BODY, wrap=True))
        layout.addLayout(questions)
        layout.addWidget(self.buttons)
        self._refresh()

    def _unit_buttons(self) -> QHBoxLayout:
        row = QHBoxLayout()
        row.setSpacing(16)
        for unit in UNITS:
            button = QRadioButton(unit)
            button.setAccessibleName(f"{UNIT}: {unit}")
            button.toggled.connect(self._refresh)
            self.units.addButton(button)
            row.addWidget(button)
        row.addStretch(1)
        return row

    def _rate_field(self) -> QHBoxLayout:
        row = QHBoxLayout()
        row.setSpacing(12)
        row.addWidget(self.rate)
        row.addWidget(label(f"{LOWEST_RATE_HZ:g} to {HIGHEST_RATE_HZ:g}"))
        row.addStretch(1)
        return row

    def stated(self) -> Stated:
        """What has been answered so far."""
        chosen = self.units.checkedButton()
        return Stated(None if chosen is None else chosen.text(), rate_of_text(self.rate.text()))

    def _refresh(self) -> None:
        stated = self.stated()
        answered = {"unit": stated.unit, "rate": stated.sampling_rate_hz}
        self.read.setEnabled(all(answered[what] is not None for what in self._missing))


def file_heading(name: str) -> QLabel:
    """A file's name over a dialog; the middle of a long one is left out."""
    heading = label(size=HEADING, bold=True)
    # Names of one person's files differ at their ends.
    room = WIDTH - 2 * MARGIN - 4
    heading.setText(heading.fontMetrics().elidedText(name, Qt.TextElideMode.ElideMiddle, room))
    heading.setToolTip(plain_tool_tip(name))
    return heading


def visible_outlines() -> str:
    """The platform's own outlines hardly stand out from a dark ground."""
    palette = current_palette()
    return (
        f"QLineEdit {{ border: 1px solid {palette.soft_ink}; padding: 3px 6px; "
        f"background: {palette.card}; }} QLineEdit:focus {{ border-color: {palette.earlier}; }}"
        "QRadioButton::indicator { width: 12px; height: 12px; border-radius: 7px; "
        f"border: 1px solid {palette.soft_ink}; background: {palette.card}; }}"
        f"QRadioButton::indicator:focus {{ border-color: {palette.earlier}; }}"
        "QRadioButton::indicator:checked { width: 6px; height: 6px; "
        f"border: 4px solid {palette.earlier}; }}"
    )
