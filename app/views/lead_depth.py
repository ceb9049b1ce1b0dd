"""One lead in depth: both beats, their difference in its bands, and the reason."""

from __future__ import annotations

from PySide6.QtCore import QPointF, QRectF, QSize, Qt
from PySide6.QtGui import QPainter, QPaintEvent, QPen
from PySide6.QtWidgets import QSizePolicy, QWidget

from app.drawing.lead_curves import curves_of
from app.drawing.lead_plots import (
    RIGHT,
    axis_room,
    draw_axes,
    draw_difference,
    draw_fiducials,
    draw_overlay,
)
from app.drawing.pen import (
    Style,
    draw_mark,
    draw_paragraph,
    draw_text,
    paragraph_height,
    text_width,
)
from app.state.bench_state import BenchState
from app.views.theme import screen_style
from core.comparison.judge import NOT_JUDGED
from core.comparison.results import Comparison
from core.wording.judgements import WORDS

PAD = 14
Legend = tuple[tuple[str, str], ...]
BEATS: Legend = (("earlier", "earlier"), ("later", "later"))
LEGEND: Legend = (*BEATS, ("noise", "repeat noise"), ("reach", "reach"))
CHANGE: Legend = (("ink", "change: later less earlier"),)
DIFFERENCE_LEGEND: Legend = (*CHANGE, ("in_reach", "expected"))


class LeadDepth(QWidget):
    """The selected lead, large."""

    def __init__(self, state: BenchState) -> None:
        super().__init__()
        self._state = state
        self.setMinimumSize(340, 330)
        self.setSizePolicy(QSizePolicy.Policy.Expanding, QSizePolicy.Policy.Expanding)
        self.setAccessibleName("One lead in depth")
        state.phase_changed.connect(self.update)
        state.lead_changed.connect(self.update)

    def sizeHint(self) -> QSize:
        """Wider than a cell of the wall, and as high as the wall."""
        return QSize(520, 560)

    def paintEvent(self, event: QPaintEvent) -> None:
        """Draw heading, overlay, difference and reason, top to bottom."""
        comparison, lead = self._state.comparison, self._state.lead
        if comparison is None:
            return
        style = screen_style()
        palette = style.palette
        painter = QPainter(self)
        painter.setRenderHint(QPainter.RenderHint.Antialiasing)
        painter.setPen(QPen(palette.colour("line"), 1))
        painter.setBrush(palette.colour("card"))
        painter.drawRect(QRectF(self.rect()).adjusted(0.5, 0.5, -0.5, -0.5))
        reason = comparison.reason_of(lead)
        inside = QRectF(self.rect()).adjusted(PAD, 10, -PAD, -10)
        self._draw_heading(painter, inside, style, comparison, lead)

        reason_height = self._reason_height(painter, inside, style, reason)
        across, below = axis_room(style)
        plots = inside.adjusted(across, 32, 0, -reason_height - 8)
        labels = QRectF(plots.left(), plots.top(), plots.width(), 18)
        legend = 20.0
        gap = below / 2  # the topmost number of an axis rises by half its height above the plot
        curves = curves_of(comparison, lead)
        beats, change = LEGEND, DIFFERENCE_LEGEND
        if curves.bands is None:
            beats = tuple(item for item in BEATS if item[0] in curves.roles)
            change = CHANGE if len(beats) == len(BEATS) else ()
        n_plots = 2 if change else 1
        for_plots = plots.height() - labels.height() - n_plots * (below + legend) - gap
        share = 0.60 if change else 1.0
        overlay = QRectF(plots.left(), labels.bottom(), plots.width(), for_plots * share)
        scale = draw_overlay(painter, overlay, comparison, lead, style, every=1)
        draw_axes(painter, scale, style)
        draw_fiducials(painter, scale, comparison, style, labels)
        row = QRectF(inside.left(), overlay.bottom() + below, inside.width(), legend)
        _draw_legend(painter, row, style, beats)
        if change:
            height = for_plots - overlay.height()
            difference = QRectF(plots.left(), row.bottom() + gap, plots.width(), height)
            draw_axes(painter, draw_difference(painter, difference, comparison, lead, style), style)
            row.moveTop(difference.bottom() + below)
            _draw_legend(painter, row, style, change)
        painter.end()

    def _draw_heading(
        self, painter: QPainter, inside: QRectF, style: Style, comparison: Comparison, lead: str
    ) -> None:
        top = QRectF(inside.left(), inside.top(), inside.width(), 26)
        heading = style.font(style.heading, bold=True)
        draw_text(painter, top, f"{lead} in depth", heading, style.palette.colour("ink"))
        judged = lead in comparison.leads
        code = comparison.leads[lead].judgement if judged else NOT_JUDGED
        colour, font = style.palette.judgement(code), style.font(style.body)
        draw_text(painter, top, WORDS[code], font, colour, RIGHT)
        if judged:
            at = QPointF(top.right() - text_width(WORDS[code], font) - 12, top.center().y())
            draw_mark(painter, at, 11, code, colour)

    def _reason_height(self, painter: QPainter, inside: QRectF, style: Style, reason: str) -> float:
        """Draw the reason at the bottom; the height that it takes."""
        font = style.font(style.body)
        height = paragraph_height(reason, font, inside.width())
        at = QRectF(inside.left(), inside.bottom() - height, inside.width(), height)
        draw_paragraph(painter, at, reason, font, style.palette.colour("ink"))
        return height


def _draw_legend(painter: QPainter, row: QRectF, style: Style, items: Legend) -> None:
    """Short samples of lines and bands with their names."""
    palette, font = style.palette, style.font(style.caption)
    x, middle = row.left(), row.center().y()
    for role, text in items:
        if role in ("noise", "reach"):
            painter.fillRect(QRectF(x, middle - 5, 16, 10), palette.band(role))
        else:
            dash = Qt.PenStyle.DashLine if role == "in_reach" else Qt.PenStyle.SolidLine
            painter.setPen(QPen(palette.colour(role), 2, dash))
            painter.drawLine(QPointF(x, middle), QPointF(x + 16, middle))
        width = text_width(text, font) + 2
        box = QRectF(x + 21, row.top(), width, row.height())
        draw_text(painter, box, text, font, palette.colour("soft_ink"))
        x += 21 + width + 12
