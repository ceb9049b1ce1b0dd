"""The lead wall on paper: the twelve, what their colours mean, and the further leads."""

from __future__ import annotations

from collections.abc import Sequence

from PySide6.QtCore import QPointF, QRectF
from PySide6.QtGui import QPen

from app.drawing.lead_cell import GRID_OF_CELLS, NOTE_OF_CELLS, draw_lead_cell
from app.drawing.pen import draw_text, text_width
from app.report.page import Page, mm
from core.comparison.results import Comparison
from core.recordings.leads import TWELVE_LEADS
from core.wording.further import HEADING, MEANING, VALUES

COLUMNS = 4
GAP_MM = 1.5
CELL_HEIGHT_MM = 36.0
BEATS = (("earlier", "earlier beat"), ("later", "later beat"))
BANDS = (("noise", "repeat noise, 95 %"), ("reach", "placement reach, 95 %"))


def draw_wall(page: Page, comparison: Comparison) -> None:
    """The twelve leads and their legend."""
    # Down the columns, as leads stand on a printed sheet.
    places = [(index % 3, index // 3) for index in range(len(TWELVE_LEADS))]
    _draw_cells(page, comparison, TWELVE_LEADS, places)
    _draw_legend(page, (*BEATS, *BANDS), NOTE_OF_CELLS)


def draw_further_leads(page: Page, comparison: Comparison) -> None:
    """The further leads under their own heading, row by row, and their legend."""
    page.heading(HEADING)
    places = [divmod(index, COLUMNS) for index in range(len(comparison.further))]
    _draw_cells(page, comparison, list(comparison.further), places)
    _draw_legend(page, BEATS, f"{GRID_OF_CELLS} · {VALUES}")
    page.paragraph(MEANING, soft=True)


def _draw_cells(
    page: Page,
    comparison: Comparison,
    leads: Sequence[str],
    places: Sequence[tuple[int, int]],
) -> None:
    """One cell a lead, at its row and column."""
    height, gap = mm(CELL_HEIGHT_MM), mm(GAP_MM)
    rows = 1 + max(row for row, _ in places)
    strip = page.take(rows * (height + gap) - gap, mm(1.2))
    width = (strip.width() - (COLUMNS - 1) * gap) / COLUMNS
    for lead, (row, column) in zip(leads, places, strict=True):
        left = strip.left() + column * (width + gap)
        cell = QRectF(left, strip.top() + row * (height + gap), width, height)
        draw_lead_cell(page.painter, cell, comparison, lead, page.style)


def _draw_legend(page: Page, items: Sequence[tuple[str, str]], note: str) -> None:
    """What the colours mean, and a note behind it."""
    style, painter, palette = page.style, page.painter, page.style.palette
    strip = page.take(style.caption * 1.5, mm(2.0))
    font, soft = style.font(style.caption), palette.colour("soft_ink")
    x, middle = strip.left(), strip.center().y()
    for role, text in items:
        if role in ("noise", "reach"):
            painter.fillRect(QRectF(x, middle - mm(1.0), mm(6), mm(2.0)), palette.band(role))
        else:
            painter.setPen(QPen(palette.colour(role), mm(0.45)))
            painter.drawLine(QPointF(x, middle), QPointF(x + mm(6), middle))
        box = QRectF(x + mm(7), strip.top(), text_width(text, font) + mm(0.5), strip.height())
        draw_text(painter, box, text, font, soft)
        x = box.right() + mm(4)
    box = QRectF(x, strip.top(), strip.right() - x, strip.height())
    draw_text(painter, box, note, font, soft)
