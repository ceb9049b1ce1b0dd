"""What was really drawn: pixels of a picture, and the words of a page or of a widget.

A widget is painted on a PDF page of its own size, so that its words can be read back with their
places and colours, those that the widget draws by itself as well as those of its labels.
"""

from __future__ import annotations

import io
from collections.abc import Callable, Iterable
from dataclasses import dataclass
from functools import lru_cache
from itertools import combinations
from unicodedata import normalize

import numpy as np
from numpy.typing import NDArray
from pypdf import PageObject, PdfReader
from PySide6.QtCore import QBuffer, QIODevice, QMarginsF, QPoint, QRectF, QSizeF
from PySide6.QtGui import (
    QFont,
    QFontDatabase,
    QFontMetricsF,
    QGuiApplication,
    QImage,
    QPageLayout,
    QPageSize,
    QPainter,
    QPdfWriter,
)
from PySide6.QtWidgets import QWidget

# Fonts are measured this large, so that no rounding to whole pixels is left.
MEASURED_AT = 1000


@dataclass(frozen=True, slots=True)
class Piece:
    """One run of text: its words, where it stands (from the page's top left), its colour."""

    text: str
    left: float
    baseline: float
    size: float
    font: str
    colour: str

    @property
    def right(self) -> float:
        return self.left + self.width

    @property
    def width(self) -> float:
        return _metrics(self.font).horizontalAdvance(self.text) * self.size / MEASURED_AT

    @property
    def box(self) -> QRectF:
        """The ink of capitals and descenders, less than the line that holds it."""
        # Capitals are about 0.7 of a size high, descenders 0.2.
        return QRectF(self.left, self.baseline - 0.7 * self.size, self.width, 0.9 * self.size)


@lru_cache
def _metrics(font_name: str) -> QFontMetricsF:
    name, _, weight = font_name.partition("-")
    families = {family.replace(" ", ""): family for family in QFontDatabase.families()}
    font = QFont(families.get(name, QGuiApplication.font().family()))
    font.setPixelSize(MEASURED_AT)
    font.setBold(weight == "Bold")
    return QFontMetricsF(font)


def pieces_of(page: PageObject) -> list[Piece]:
    """Every run of text on a page of a PDF that Qt wrote."""
    found: list[Piece] = []
    colour = ["#000000"]
    height = float(page.mediabox.height)

    def note_colour(operator: bytes, operands: list, _: object, __: object) -> None:
        if operator == b"scn" and len(operands) == 3:
            channels = [round(255 * float(value)) for value in operands]
            colour[0] = "#" + "".join(f"{value:02X}" for value in channels)

    def note_text(text: str, cm: list, tm: list, font: dict | None, size: float) -> None:
        if not text.strip() or font is None:
            return
        x = tm[4] * cm[0] + tm[5] * cm[2] + cm[4]
        y = tm[4] * cm[1] + tm[5] * cm[3] + cm[5]
        name = str(font["/BaseFont"]).lstrip("/")
        scale = abs(tm[3] * cm[3])
        found.append(Piece(_plain(text), x, height - y, size * scale, name, colour[0]))

    page.extract_text(visitor_operand_before=note_colour, visitor_text=note_text)
    return found


def _plain(text: str) -> str:
    """Latin ligatures taken apart, and every kind of space a plain one."""
    apart = (normalize("NFKC", sign) if "\ufb00" <= sign <= "\ufb06" else sign for sign in text)
    return " ".join("".join(apart).split())


def words(pieces: Iterable[Piece]) -> str:
    """All text, in the order in which it was drawn."""
    return " ".join(piece.text for piece in pieces)


def drawn_on(widget: QWidget) -> list[Piece]:
    """Every run of text that a widget and its children draw, in its own coordinates."""
    return _on_paper(
        widget.width(), widget.height(), lambda painter: widget.render(painter, QPoint(0, 0))
    )


def drawn_by(width: float, height: float, draw: Callable[[QPainter], object]) -> list[Piece]:
    """Every run of text that strokes on a painter draw."""
    return _on_paper(width, height, draw)


def _on_paper(width: float, height: float, draw: Callable[[QPainter], object]) -> list[Piece]:
    buffer = QBuffer()
    buffer.open(QIODevice.OpenModeFlag.WriteOnly)
    writer = QPdfWriter(buffer)
    writer.setResolution(72)  # one point a pixel
    size = QPageSize(QSizeF(width, height), QPageSize.Unit.Point)
    writer.setPageLayout(QPageLayout(size, QPageLayout.Orientation.Portrait, QMarginsF()))
    painter = QPainter(writer)
    try:
        draw(painter)
    finally:
        painter.end()
    return pieces_of(PdfReader(io.BytesIO(bytes(buffer.data().data()))).pages[0])


def lying_on_each_other(pieces: Iterable[Piece]) -> list[tuple[str, str]]:
    """Pairs of runs whose ink meets."""
    boxes = [(piece.text, piece.box) for piece in pieces]
    return [
        (one, other)
        for (one, its_box), (other, others_box) in combinations(boxes, 2)
        if its_box.intersects(others_box)
    ]


def picture(
    width: int, height: int, draw: Callable[[QPainter], object], *, ground: str = "#FFFFFF"
) -> NDArray[np.uint8]:
    """Pixels of what is drawn, shape (height, width, 3)."""
    image = QImage(width, height, QImage.Format.Format_RGB32)
    image.fill(ground)
    painter = QPainter(image)
    painter.setRenderHint(QPainter.RenderHint.Antialiasing)
    try:
        draw(painter)
    finally:
        painter.end()
    return pixels(image)


def pixels(image: QImage) -> NDArray[np.uint8]:
    """Pixels of an image, shape (height, width, 3)."""
    plain = image.convertToFormat(QImage.Format.Format_RGB888)
    rows = np.frombuffer(plain.constBits(), np.uint8).reshape(plain.height(), -1)
    return rows[:, : 3 * plain.width()].reshape(plain.height(), plain.width(), 3).copy()
