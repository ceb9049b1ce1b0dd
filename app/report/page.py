"""A page in millimetres: margins, running foot, and a cursor that goes down it."""

from __future__ import annotations

from dataclasses import dataclass

from PySide6.QtCore import QRectF
from PySide6.QtGui import QPainter, QPdfWriter, QPen

from app.drawing.fonts import report_family
from app.drawing.lead_plots import RIGHT
from app.drawing.palette import LIGHT
from app.drawing.pen import Style, draw_paragraph, draw_text, paragraph_height
from core.wording.caution import CAUTION, PLACEMENT_CAVEAT

# The painter's units, so many to a millimetre; fonts are sized in whole ones.
PER_MM = 100.0
MM_PER_POINT = 25.4 / 72.0
MARGIN_MM = 14.0
PAGE_NUMBER_MM = 20.0
FOOT = f"{PLACEMENT_CAVEAT}\n{CAUTION}"


def mm(length: float) -> float:
    """Millimetres in the painter's units."""
    return length * PER_MM


def points(size: float) -> float:
    """Typographic points in the painter's units."""
    return size * MM_PER_POINT * PER_MM


def report_style() -> Style:
    """Sizes and colours on paper."""
    return Style(
        palette=LIGHT,
        unit=mm(0.24),
        family=report_family(),
        caption=points(7),
        body=points(8),
        heading=points(11),
    )


@dataclass(slots=True)
class Page:
    """One page while it is drawn.

    Attributes
    ----------
    top : float
        Where the next piece goes, in the painter's units.
    """

    painter: QPainter
    style: Style
    width: float
    height: float
    top: float = mm(MARGIN_MM)

    @property
    def left(self) -> float:
        """Left edge of what may be drawn on."""
        return mm(MARGIN_MM)

    @property
    def inner_width(self) -> float:
        """Width between the margins."""
        return self.width - 2 * mm(MARGIN_MM)

    def take(self, height: float, gap: float = 0.0) -> QRectF:
        """The next strip of the page, from margin to margin."""
        strip = QRectF(self.left, self.top, self.inner_width, height)
        self.top += height + gap
        return strip

    def heading(self, text: str) -> None:
        """A heading over the next piece."""
        strip = self.take(self.style.heading * 1.35, mm(0.8))
        font = self.style.font(self.style.heading, bold=True)
        draw_text(self.painter, strip, text, font, self.style.palette.colour("ink"))

    def paragraph(self, text: str, *, gap: float = 1.2, soft: bool = False) -> None:
        """A paragraph over the whole width."""
        colour = self.style.palette.colour("soft_ink" if soft else "ink")
        rect = QRectF(self.left, self.top, self.inner_width, 0.0)
        taken = draw_paragraph(self.painter, rect, text, self.style.font(self.style.body), colour)
        self.top += taken + mm(gap)

    @property
    def bottom(self) -> float:
        """Where the foot begins; nothing else may be drawn below."""
        return self.height - mm(MARGIN_MM) - self._last_line - self._foot_height - mm(1.5)

    def height_of(self, text: str) -> float:
        """Height of a paragraph over the whole width."""
        return paragraph_height(text, self.style.font(self.style.body), self.inner_width)

    def foot(self, number: int, of: int, made: str) -> None:
        """Caveat and cautions, and the page's number: on every page."""
        style, painter = self.style, self.painter
        soft = style.palette.colour("soft_ink")
        font = style.font(style.caption)
        top = self.bottom
        painter.setPen(QPen(style.palette.colour("line"), mm(0.2)))
        painter.drawLine(int(self.left), int(top), int(self.left + self.inner_width), int(top))
        draw_paragraph(
            painter,
            QRectF(self.left, top + mm(1.0), self.inner_width, self._foot_height),
            FOOT,
            font,
            style.palette.colour("ink"),
        )
        line = self._last_line
        last = QRectF(self.left, self.height - mm(MARGIN_MM) - line, self.inner_width, line)
        draw_text(painter, last.adjusted(0, 0, -mm(PAGE_NUMBER_MM), 0), made, font, soft)
        draw_text(painter, last, f"page {number} of {of}", font, soft, RIGHT)

    @property
    def _foot_height(self) -> float:
        return paragraph_height(FOOT, self.style.font(self.style.caption), self.inner_width)

    @property
    def _last_line(self) -> float:
        return self.style.caption * 1.5


def start_page(writer: QPdfWriter, painter: QPainter, *, first: bool) -> Page:
    """A fresh page, the painter scaled to its units."""
    if not first:
        writer.newPage()
    per_mm = writer.resolution() / 25.4
    painter.resetTransform()
    painter.scale(per_mm / PER_MM, per_mm / PER_MM)
    size = writer.pageLayout().fullRect(writer.pageLayout().Unit.Millimeter)
    return Page(painter, report_style(), mm(size.width()), mm(size.height()))
