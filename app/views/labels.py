"""Labels in the four sizes of type."""

from __future__ import annotations

from html import escape

from PySide6 import QtGui
from PySide6.QtCore import QRect, QSize, Qt
from PySide6.QtGui import QResizeEvent
from PySide6.QtWidgets import QLabel, QWidget

from app.views.theme import BODY


class WrappedLabel(QLabel):
    """A label that is as high as its text needs at the width it is given, and no higher."""

    def __init__(self, parent: QWidget | None = None) -> None:
        super().__init__(parent)
        self.setWordWrap(True)

    def heightForWidth(self, width: int) -> int:
        """What the text takes; Qt's own answer for selectable text is a line too high."""
        box = QRect(0, 0, max(width, 80), 1 << 20)
        flags = int(Qt.TextFlag.TextWordWrap | Qt.AlignmentFlag.AlignLeft)
        return self.fontMetrics().boundingRect(box, flags, self.text()).height()

    def minimumSizeHint(self) -> QSize:
        """Small: Qt's own guess, for a narrow column, would make the window too high."""
        return QSize(80, self.fontMetrics().height())

    def sizeHint(self) -> QSize:
        """What the text needs at the present width."""
        width = max(self.width(), 80)
        return QSize(width, self.heightForWidth(width))

    def setText(self, text: str) -> None:
        """Show a text and make room for it."""
        super().setText(text)
        self._make_room()

    def resizeEvent(self, event: QResizeEvent) -> None:
        """Make room for the text at the new width."""
        super().resizeEvent(event)
        self._make_room()

    def _make_room(self) -> None:
        self.setFixedHeight(max(self.heightForWidth(max(self.width(), 80)), 1))


def plain_tool_tip(text: str) -> str:
    """A tool tip that shows a text as it is, though it may look like markup."""
    if not QtGui.Qt.mightBeRichText(text):
        return text
    return f"<qt>{escape(text).replace(chr(10), '<br>')}</qt>"


def label(
    text: str = "",
    *,
    size: int = BODY,
    bold: bool = False,
    wrap: bool = False,
    parent: QWidget | None = None,
) -> QLabel:
    """A label of plain text, which can be selected and copied."""
    made = WrappedLabel(parent) if wrap else QLabel(parent)
    made.setTextFormat(Qt.TextFormat.PlainText)
    font = made.font()
    font.setPixelSize(size)
    font.setBold(bold)
    made.setFont(font)
    made.setTextInteractionFlags(Qt.TextInteractionFlag.TextSelectableByMouse)
    made.setText(text)
    return made
