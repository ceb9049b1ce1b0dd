"""The lead wall: small plots of every lead, one selection."""

from __future__ import annotations

from PySide6.QtCore import QRectF, QSize, Qt
from PySide6.QtGui import QKeyEvent, QMouseEvent, QPainter, QPaintEvent, QPen
from PySide6.QtWidgets import QSizePolicy, QToolTip, QWidget

from app.drawing.lead_cell import NOTE_OF_CELLS, draw_lead_cell
from app.drawing.pen import Style, draw_text
from app.state.bench_state import BenchState
from app.views.theme import screen_style
from core.comparison.judge import NOT_JUDGED
from core.wording.further import HEADING, VALUES
from core.wording.judgements import WORDS

# By wall of the heart: inferior, lateral, septal to anterior, and on to the side.
BY_WALL = (
    ("II", "aVF", "III"),
    ("I", "aVL", "V6"),
    ("V1", "V2", "V3"),
    ("V4", "V5", "aVR"),
)
COLUMNS = len(BY_WALL[0])
GAP = 4
NOTE_HEIGHT = 18
HEADING_HEIGHT = 46  # of the further leads: what they are, and what their numbers are
LEAST_WIDTH, LEAST_HEIGHT = 380, 330
# Where the wall scrolls in any case, its cells keep room for a beat over two lines of numbers.
LEAST_CELL = 90
# Of the first row of further leads so much is in view, that a reader sees to go on.
PEEK = 0.35


class LeadWall(QWidget):
    """Every lead with its two beats and its judgement; a click or an arrow key selects one.

    The twelve leads fill it, unless the pair holds further ones; those follow under a heading of
    their own.
    """

    def __init__(self, state: BenchState) -> None:
        super().__init__()
        self._state = state
        self.setFocusPolicy(Qt.FocusPolicy.StrongFocus)
        self.setMouseTracking(True)
        self.setMinimumSize(LEAST_WIDTH, LEAST_HEIGHT)
        self.setSizePolicy(QSizePolicy.Policy.Expanding, QSizePolicy.Policy.Expanding)
        self.setAccessibleName("Lead wall")
        state.phase_changed.connect(self._follow)
        state.lead_changed.connect(self._follow)
        self._follow()

    def sizeHint(self) -> QSize:
        """Comfortable cells."""
        return QSize(470, 560)

    def rows(self) -> list[tuple[str, ...]]:
        """The leads of each row: the twelve, then the further ones of the pair."""
        comparison = self._state.comparison
        further = () if comparison is None else tuple(comparison.further)
        starts = range(0, len(further), COLUMNS)
        return [*BY_WALL, *(further[start : start + COLUMNS] for start in starts)]

    def height_in(self, view_height: float) -> float:
        """The height at which the twelve leads fill a view, less a peek at further ones."""
        further = len(self.rows()) - len(BY_WALL)
        if not further:
            return LEAST_HEIGHT
        of_twelve = view_height - NOTE_HEIGHT - HEADING_HEIGHT - 3 * GAP
        cell = max(LEAST_CELL, of_twelve / (len(BY_WALL) + PEEK))
        return (len(BY_WALL) + further) * cell + self._between_cells(further)

    def _between_cells(self, further: int) -> float:
        """Height that is no cell's, with so many rows of further leads."""
        gaps = len(BY_WALL) - 1 + max(0, further - 1)
        return gaps * GAP + NOTE_HEIGHT + (HEADING_HEIGHT if further else 0)

    def _cell_height(self) -> float:
        rows = len(self.rows())
        return (self.height() - self._between_cells(rows - len(BY_WALL))) / rows

    def _note_top(self) -> float:
        """Where the twelve leads end."""
        return len(BY_WALL) * (self._cell_height() + GAP) - GAP

    def cell(self, row: int, column: int) -> QRectF:
        """Where a cell lies."""
        width = (self.width() - (COLUMNS - 1) * GAP) / COLUMNS
        height = self._cell_height()
        top = row * (height + GAP)
        if row >= len(BY_WALL):
            top += NOTE_HEIGHT + HEADING_HEIGHT - GAP
        return QRectF(column * (width + GAP), top, width, height)

    def cell_of(self, lead: str) -> QRectF:
        """Where a lead's cell lies."""
        rows = self.rows()
        row = next(index for index, leads in enumerate(rows) if lead in leads)
        return self.cell(row, rows[row].index(lead))

    def lead_at(self, x: float, y: float) -> str | None:
        """The lead under a point."""
        for row, leads in enumerate(self.rows()):
            for column, lead in enumerate(leads):
                if self.cell(row, column).contains(x, y):
                    return lead
        return None

    def paintEvent(self, event: QPaintEvent) -> None:
        """Draw all cells."""
        comparison, selected = self._state.comparison, self._state.lead
        if comparison is None:
            return
        painter = QPainter(self)
        painter.setRenderHint(QPainter.RenderHint.Antialiasing)
        style = screen_style()
        for row, leads in enumerate(self.rows()):
            for column, lead in enumerate(leads):
                cell = self.cell(row, column)
                draw_lead_cell(painter, cell, comparison, lead, style, selected=lead == selected)
        if self.hasFocus():
            painter.setPen(QPen(style.palette.colour("earlier"), 2, Qt.PenStyle.DotLine))
            painter.setBrush(Qt.BrushStyle.NoBrush)
            painter.drawRect(self.cell_of(selected).adjusted(4, 4, -4, -4))
        note = QRectF(0, self._note_top(), self.width(), NOTE_HEIGHT)
        soft = style.palette.colour("soft_ink")
        draw_text(painter, note, NOTE_OF_CELLS, style.font(style.caption), soft)
        if comparison.further:
            self._draw_heading(painter, note.bottom(), style)
        painter.end()

    def _draw_heading(self, painter: QPainter, top: float, style: Style) -> None:
        """What the further leads are, and what their numbers are."""
        heading = QRectF(0, top + 4, self.width(), HEADING_HEIGHT - NOTE_HEIGHT - 6)
        numbers = QRectF(0, heading.bottom(), self.width(), NOTE_HEIGHT)
        ink, soft = (style.palette.colour(role) for role in ("ink", "soft_ink"))
        draw_text(painter, heading, HEADING, style.font(style.body, bold=True), ink)
        draw_text(painter, numbers, VALUES, style.font(style.caption), soft)

    def mousePressEvent(self, event: QMouseEvent) -> None:
        """Select the lead that is clicked."""
        lead = self.lead_at(event.position().x(), event.position().y())
        if lead is not None:
            self._state.select_lead(lead)

    def mouseMoveEvent(self, event: QMouseEvent) -> None:
        """Tell the reason of the lead under the mouse."""
        comparison = self._state.comparison
        lead = self.lead_at(event.position().x(), event.position().y())
        text = "" if comparison is None or lead is None else comparison.reason_of(lead)
        QToolTip.showText(event.globalPosition().toPoint(), text, self)

    def keyPressEvent(self, event: QKeyEvent) -> None:
        """Move the selection by the arrow keys."""
        steps = {
            Qt.Key.Key_Left: (0, -1),
            Qt.Key.Key_Right: (0, 1),
            Qt.Key.Key_Up: (-1, 0),
            Qt.Key.Key_Down: (1, 0),
        }
        step = steps.get(Qt.Key(event.key()))
        if step is None:
            super().keyPressEvent(event)
            return
        rows = self.rows()
        for row, leads in enumerate(rows):
            if self._state.lead in leads:
                column = leads.index(self._state.lead)
                to = rows[(row + step[0]) % len(rows)]
                # Past the ends of its own row the selection goes round; a shorter row is met at
                # its end.
                column = (column + step[1]) % len(leads)
                self._state.select_lead(to[min(column, len(to) - 1)])
                return

    def _follow(self) -> None:
        comparison, lead = self._state.comparison, self._state.lead
        said = ""
        if comparison is not None:
            judged = lead in comparison.leads
            code = comparison.leads[lead].judgement if judged else NOT_JUDGED
            said = f"{lead}, {WORDS[code]}. {comparison.reason_of(lead)}"
        self.setAccessibleDescription(said)
        self.update()
