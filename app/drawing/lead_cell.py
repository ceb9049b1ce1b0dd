"""One cell of the lead wall: name, judgement, both beats, and the numbers of ST and T."""

from __future__ import annotations

from collections.abc import Callable

from PySide6.QtCore import QPointF, QRectF
from PySide6.QtGui import QPainter, QPen

from app.drawing.lead_plots import CELL_EVERY, RIGHT, SMALL_SQUARE_MS, SMALL_SQUARE_MV, draw_overlay
from app.drawing.pen import Style, draw_mark, draw_text, text_width
from core.comparison.judge import NOT_JUDGED
from core.comparison.results import Comparison
from core.wording.further import values_of_further_lead
from core.wording.judgements import WORDS
from core.wording.numbers import NARROW, signed

GRID_OF_CELLS = (
    f"grid {SMALL_SQUARE_MS * CELL_EVERY / 1000:g} s × {SMALL_SQUARE_MV * CELL_EVERY:g} mV"
)
NOTE_OF_CELLS = f"{GRID_OF_CELLS} · ST, T: change in mV"


def draw_lead_cell(
    painter: QPainter,
    rect: QRectF,
    comparison: Comparison,
    lead: str,
    style: Style,
    *,
    selected: bool = False,
) -> None:
    """Draw the cell of one of the twelve leads, or of a further one."""
    palette, unit = style.palette, style.unit
    border = QPen(
        palette.colour("selection" if selected else "line"), (2 if selected else 1) * unit
    )
    painter.setPen(border)
    painter.setBrush(palette.colour("card"))
    painter.drawRect(rect.adjusted(unit, unit, -unit, -unit))

    inside = rect.adjusted(9 * unit, 6 * unit, -9 * unit, -6 * unit)
    top = _draw_head(painter, inside, comparison, lead, style)
    bottom = _draw_foot(painter, inside, comparison, lead, style)
    plot = QRectF(inside.left(), top, inside.width(), bottom - top)
    draw_overlay(painter, plot, comparison, lead, style, every=CELL_EVERY)


def _draw_head(
    painter: QPainter, inside: QRectF, comparison: Comparison, lead: str, style: Style
) -> float:
    """The lead's name, and its judgement's word and mark; where they end."""
    palette = style.palette
    top = QRectF(inside.left(), inside.top(), inside.width(), style.body * 1.45)
    name_font, word_font = style.font(style.body, bold=True), style.font(style.caption)
    draw_text(painter, top, lead, name_font, palette.colour("ink"))
    judged = lead in comparison.leads
    code = comparison.leads[lead].judgement if judged else NOT_JUDGED
    colour, word = palette.judgement(code), WORDS[code]
    needed = text_width(word, word_font) + style.caption * (1.4 if judged else 0.7)
    if needed + text_width(lead, name_font) > inside.width():
        # No room beside the name: the word gets a line of its own.
        top.translate(0, style.caption * 1.3)
    draw_text(painter, top, word, word_font, colour, RIGHT)
    if judged:
        x = top.right() - text_width(word, word_font) - 9 * style.unit
        draw_mark(painter, QPointF(x, top.center().y()), style.caption * 0.72, code, colour)
    return top.bottom()


def _draw_foot(
    painter: QPainter, inside: QRectF, comparison: Comparison, lead: str, style: Style
) -> float:
    """The numbers of ST and T; where they begin."""
    font, colour = style.font(style.caption), style.palette.colour("soft_ink")
    line = QRectF(inside.left(), inside.bottom(), inside.width(), style.body * 1.45)
    if lead in comparison.leads:
        lines = [_changes(comparison, lead, lambda text: text_width(text, font) <= line.width())]
    else:
        further = comparison.further[lead]
        lines = values_of_further_lead(further.earlier, further.later)
        line.setHeight(style.caption * 1.3)
    line.moveTop(inside.bottom() - len(lines) * line.height())
    begins = line.top()
    for text in lines:
        # Where there is no room, no number stands rather than part of one.
        if text_width(text, font) <= line.width():
            draw_text(painter, line, text, font, colour, RIGHT)
        line.translate(0, line.height())
    return begins


def _changes(comparison: Comparison, lead: str, fits: Callable[[str], bool]) -> str:
    """The changes of ST and T in mV, in the same form in all cells of one width."""
    measures = comparison.leads[lead].measures
    st, t = signed(measures["st_mv"].change), signed(measures["t_mv"].change)
    forms = (f"ST{NARROW}{{}} · T{NARROW}{{}}", f"ST{NARROW}{{}} T{NARROW}{{}}", "ST{} T{}")
    usual = signed(-0.88)
    form = next((form for form in forms if fits(form.format(usual, usual))), forms[-1])
    return form.format(st, t)
