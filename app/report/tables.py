"""Tables of the report."""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import dataclass
from itertools import groupby

from PySide6.QtCore import QPointF, QRectF, Qt
from PySide6.QtGui import QFont, QPen

from app.drawing.lead_plots import CENTRE, RIGHT
from app.drawing.pen import draw_mark, draw_text
from app.report.page import Page, mm

LEFT = Qt.AlignmentFlag.AlignLeft | Qt.AlignmentFlag.AlignVCenter
ROW_MM = 4.3
MARK_MM = 4.0


@dataclass(frozen=True, slots=True)
class Column:
    """One column: its title, its width, whether it holds numbers, and the group over it."""

    title: str
    width_mm: float
    right: bool = False
    group: str = ""


def draw_table(
    page: Page,
    columns: list[Column],
    rows: Sequence[tuple[str | None, list[str]]],
    *,
    left: float | None = None,
) -> None:
    """Draw a table at the page's cursor.

    Parameters
    ----------
    rows : list of (judgement, cells)
        A judgement puts its mark before the second cell.
    left : float, optional
        Left edge, if not the margin.
    """
    style, painter, palette = page.style, page.painter, page.style.palette
    head, body = style.font(style.caption, bold=True), style.font(style.caption)
    width = sum(mm(column.width_mm) for column in columns)
    line = QRectF(page.left if left is None else left, page.top, width, mm(ROW_MM))
    if any(column.group for column in columns):
        _draw_groups(page, line, columns, head)
        line.translate(0, mm(ROW_MM))
    _draw_row(page, line, columns, [column.title for column in columns], head, None)
    painter.setPen(QPen(palette.colour("ink"), mm(0.25)))
    painter.drawLine(line.bottomLeft(), line.bottomRight())
    for judgement, cells in rows:
        line.translate(0, mm(ROW_MM))
        _draw_row(page, line, columns, cells, body, judgement)
        painter.setPen(QPen(palette.colour("line"), mm(0.15)))
        painter.drawLine(line.bottomLeft(), line.bottomRight())
    page.top = line.bottom() + mm(3.0)


def _draw_groups(page: Page, line: QRectF, columns: list[Column], font: QFont) -> None:
    """Names over neighbouring columns, each with a rule as wide as they are."""
    palette = page.style.palette
    x = line.left()
    for group, members in groupby(columns, key=lambda column: column.group):
        width = sum(mm(column.width_mm) for column in members)
        box = QRectF(x, line.top(), width, line.height()).adjusted(mm(1.5), 0, -mm(0.6), 0)
        if group:
            draw_text(page.painter, box, group, font, palette.colour("ink"), CENTRE)
            page.painter.setPen(QPen(palette.colour("line"), mm(0.2)))
            page.painter.drawLine(box.bottomLeft(), box.bottomRight())
        x += width


def _draw_row(
    page: Page,
    line: QRectF,
    columns: list[Column],
    cells: list[str],
    font: QFont,
    judgement: str | None,
) -> None:
    palette = page.style.palette
    x = line.left()
    for place, (column, text) in enumerate(zip(columns, cells, strict=True)):
        box = QRectF(x, line.top(), mm(column.width_mm), line.height())
        box.adjust(mm(0.6), 0, -mm(0.6), 0)
        colour = palette.colour("ink")
        if judgement is not None and place == 1:
            colour = palette.judgement(judgement)
            at = QPointF(box.left() + mm(MARK_MM) / 2 - mm(0.4), box.center().y())
            draw_mark(page.painter, at, mm(1.9), judgement, colour)
            box.adjust(mm(MARK_MM), 0, 0, 0)
        draw_text(page.painter, box, text, font, colour, RIGHT if column.right else LEFT)
        x += mm(column.width_mm)
