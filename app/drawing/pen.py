"""The few strokes that all pictures are made of."""

from __future__ import annotations

from dataclasses import dataclass

import numpy as np
from numpy.typing import NDArray
from PySide6.QtCore import QPointF, QRectF, Qt
from PySide6.QtGui import QColor, QFont, QFontMetricsF, QPainter, QPen, QPolygonF

from app.drawing.palette import Palette


@dataclass(frozen=True, slots=True)
class Style:
    """How large and in which colours a picture is drawn, in the painter's own units.

    ``unit`` is one screen pixel on the screen and about a quarter of a millimetre on paper;
    every margin and line width is given in it.
    """

    palette: Palette
    unit: float
    family: str
    caption: float
    body: float
    heading: float

    def font(self, size: float, *, bold: bool = False) -> QFont:
        """A font of one of the style's sizes."""
        font = QFont(self.family)
        font.setPixelSize(max(1, round(size)))
        font.setBold(bold)
        # A joined "ff" in a PDF is one sign, which a search for the word does not find.
        font.setFeature(QFont.Tag("liga"), 0)
        return font


def draw_text(
    painter: QPainter,
    rect: QRectF,
    text: str,
    font: QFont,
    colour: QColor,
    align: Qt.AlignmentFlag = Qt.AlignmentFlag.AlignLeft | Qt.AlignmentFlag.AlignVCenter,
) -> None:
    """One line of text, shortened at its end if it does not fit."""
    painter.setFont(font)
    painter.setPen(QPen(colour))
    metrics = QFontMetricsF(font)
    shown = metrics.elidedText(text, Qt.TextElideMode.ElideRight, rect.width() + 0.5)
    painter.drawText(rect, int(align | Qt.TextFlag.TextSingleLine), shown)


def draw_paragraph(
    painter: QPainter, rect: QRectF, text: str, font: QFont, colour: QColor
) -> float:
    """Text over as many lines as it needs, from the top of a rectangle; the height it took."""
    flags = int(Qt.AlignmentFlag.AlignLeft | Qt.AlignmentFlag.AlignTop | Qt.TextFlag.TextWordWrap)
    painter.setFont(font)
    painter.setPen(QPen(colour))
    tall = QRectF(rect.left(), rect.top(), rect.width(), max(rect.height(), font.pixelSize() * 60))
    return painter.drawText(tall, flags, text).height()


def paragraph_height(text: str, font: QFont, width: float) -> float:
    """Height of a text over as many lines as it needs.

    By layout alone: what a painter answers depends on where it paints.
    """
    flags = int(Qt.AlignmentFlag.AlignLeft | Qt.AlignmentFlag.AlignTop | Qt.TextFlag.TextWordWrap)
    room = QRectF(0.0, 0.0, width, font.pixelSize() * 60.0)
    return QFontMetricsF(font).boundingRect(room, flags, text).height()


def text_width(text: str, font: QFont) -> float:
    """Width of one line of text."""
    return QFontMetricsF(font).horizontalAdvance(text)


def draw_curve(
    painter: QPainter,
    x: NDArray[np.float64],
    y: NDArray[np.float64],
    colour: QColor,
    width: float,
    style: Qt.PenStyle = Qt.PenStyle.SolidLine,
) -> None:
    """A line through the points that are known; NaN interrupts it."""
    pen = QPen(colour, width, style)
    pen.setJoinStyle(Qt.PenJoinStyle.RoundJoin)
    pen.setCapStyle(Qt.PenCapStyle.FlatCap)
    painter.setPen(pen)
    painter.setBrush(Qt.BrushStyle.NoBrush)
    known = ~(np.isnan(x) | np.isnan(y))
    edges = np.flatnonzero(np.diff(np.concatenate([[False], known, [False]]).astype(np.int8)))
    for start, stop in zip(edges[::2], edges[1::2], strict=True):
        points = zip(x[start:stop].tolist(), y[start:stop].tolist(), strict=True)
        painter.drawPolyline(QPolygonF([QPointF(a, b) for a, b in points]))


def fill_between(
    painter: QPainter,
    x: NDArray[np.float64],
    low: NDArray[np.float64],
    high: NDArray[np.float64],
    colour: QColor,
) -> None:
    """A band between two lines, where both are known."""
    known = ~(np.isnan(x) | np.isnan(low) | np.isnan(high))
    if known.sum() < 2:
        return
    x, low, high = x[known], low[known], high[known]
    outline = [QPointF(a, b) for a, b in zip(x.tolist(), low.tolist(), strict=True)]
    outline += [QPointF(a, b) for a, b in zip(x[::-1].tolist(), high[::-1].tolist(), strict=True)]
    painter.setPen(Qt.PenStyle.NoPen)
    painter.setBrush(colour)
    painter.drawPolygon(QPolygonF(outline))


def draw_mark(painter: QPainter, centre: QPointF, size: float, code: str, colour: QColor) -> None:
    """The mark of a judgement: disc, diamond, open diamond, triangle or dash."""
    half = size / 2
    x, y = centre.x(), centre.y()
    filled = code != "in-reach-unbacked"
    painter.setPen(QPen(colour, size * 0.16))
    painter.setBrush(colour if filled else Qt.BrushStyle.NoBrush)
    if code == "steady":
        painter.setPen(Qt.PenStyle.NoPen)
        painter.drawEllipse(centre, half * 0.8, half * 0.8)
    elif code in ("in-reach-backed", "in-reach-unbacked"):
        corners = [(x, y - half), (x + half, y), (x, y + half), (x - half, y)]
        painter.drawPolygon(QPolygonF([QPointF(*corner) for corner in corners]))
    elif code == "beyond-reach":
        corners = [(x, y - half), (x + half, y + half * 0.8), (x - half, y + half * 0.8)]
        painter.drawPolygon(QPolygonF([QPointF(*corner) for corner in corners]))
    else:
        painter.drawLine(QPointF(x - half, y), QPointF(x + half, y))
