"""A lead's two representative beats on each other, and their difference."""

from __future__ import annotations

import numpy as np
from PySide6.QtCore import QPointF, QRectF, Qt
from PySide6.QtGui import QPainter, QPen

from app.drawing.pen import Style, draw_curve, draw_mark, draw_text, fill_between, text_width
from app.drawing.scale import Scale, voltage_range
from core.comparison.results import Comparison
from core.recordings.leads import TWELVE_LEADS
from core.wording.judgements import WORDS
from core.wording.numbers import NARROW, signed

SMALL_SQUARE_MS, SMALL_SQUARE_MV = 40.0, 0.1
CELL_EVERY = 5  # small squares to a line of a cell's grid
GRID_OF_CELLS = (
    f"grid {SMALL_SQUARE_MS * CELL_EVERY / 1000:g} s × {SMALL_SQUARE_MV * CELL_EVERY:g} mV"
)
LEAST_HEIGHT_MV = 0.9
TIME_STEP_MS = 200.0
MOST_LEVELS = 7
RIGHT = Qt.AlignmentFlag.AlignRight | Qt.AlignmentFlag.AlignVCenter
CENTRE = Qt.AlignmentFlag.AlignHCenter | Qt.AlignmentFlag.AlignVCenter


def shown_times_ms(comparison: Comparison) -> tuple[float, float]:
    """Stretch of the beat that is shown: a little before P to a little after T."""
    f, time = comparison.earlier.points.fiducials, comparison.laid.time_ms
    first = time[f.p_onset] - 40.0 if f.p_onset is not None else time[f.qrs_onset] - 120.0
    return max(float(first), float(time[0])), min(float(time[f.t_offset]) + 60.0, float(time[-1]))


def draw_grid(painter: QPainter, scale: Scale, style: Style, *, every: int = 1) -> None:
    """ECG paper: lines each 40 ms and 0.1 mV (or each *every* of them), 0 mV stronger."""
    palette, unit = style.palette, style.unit
    painter.setPen(QPen(palette.colour("grid"), 0.8 * unit))
    step_ms, step_mv = SMALL_SQUARE_MS * every, SMALL_SQUARE_MV * every
    for time in np.arange(np.ceil(scale.first_ms / step_ms), scale.last_ms / step_ms) * step_ms:
        x = float(scale.x(time))
        painter.drawLine(QPointF(x, scale.rect.top()), QPointF(x, scale.rect.bottom()))
    for level in np.arange(np.ceil(scale.low_mv / step_mv), scale.high_mv / step_mv) * step_mv:
        y = float(scale.y(level))
        painter.drawLine(QPointF(scale.rect.left(), y), QPointF(scale.rect.right(), y))
    painter.setPen(QPen(palette.colour("line"), unit))
    zero = float(scale.y(0.0))
    painter.drawLine(QPointF(scale.rect.left(), zero), QPointF(scale.rect.right(), zero))


def axis_room(style: Style) -> tuple[float, float]:
    """Width at the left and height below that the numbers of `draw_axes` take."""
    widest = f"{signed(-1000.0, 0)}{NARROW}mV"
    return text_width(widest, style.font(style.caption)) + 6, style.caption * 1.3


def _round_step(least_mv: float) -> float:
    """The smallest of 0.1, 0.2, 0.5, 1, 2, 5, 10 … mV that is not less."""
    decade = 10.0 ** max(-1.0, np.floor(np.log10(max(least_mv, 1e-9))))
    return float(next(decade * m for m in (1.0, 2.0, 5.0, 10.0) if decade * m >= least_mv))


def draw_axes(painter: QPainter, scale: Scale, style: Style) -> None:
    """Numbers to the left of a plot and below it: mV, and ms from R."""
    font, colour = style.font(style.caption), style.palette.colour("soft_ink")
    left_room, line = axis_room(style)
    step_mv = _round_step((scale.high_mv - scale.low_mv) / MOST_LEVELS)
    levels = np.arange(np.ceil(scale.low_mv / step_mv), scale.high_mv / step_mv) * step_mv
    for level in levels.tolist():
        digits = 1 if level and step_mv < 1.0 else 0
        text = f"{signed(level, digits)}{NARROW}mV"
        top = float(scale.y(level)) - line / 2
        box = QRectF(scale.rect.left() - left_room, top, left_room - 4, line)
        draw_text(painter, box, text, font, colour, RIGHT)
    steps = np.arange(np.ceil(scale.first_ms / TIME_STEP_MS), scale.last_ms / TIME_STEP_MS)
    for time in (steps * TIME_STEP_MS).tolist():
        text = "R" if time == 0 else f"{signed(time, 0)}{NARROW}ms"
        width = text_width(text, font) + 2
        box = QRectF(float(scale.x(time)) - width / 2, scale.rect.bottom(), width, line)
        draw_text(painter, box, text, font, colour, CENTRE)


def draw_overlay(
    painter: QPainter, rect: QRectF, comparison: Comparison, lead: str, style: Style, *, every: int
) -> Scale:
    """Both beats, with the noise and reach bands around the earlier one."""
    row = TWELVE_LEADS.index(lead)
    laid, bands, palette = comparison.laid, comparison.bands, style.palette
    first, last = shown_times_ms(comparison)
    shown = (laid.time_ms >= first) & (laid.time_ms <= last)
    time = laid.time_ms[shown]
    earlier, later = laid.earlier_mv[row, shown], laid.later_mv[row, shown]
    reach = (earlier + bands.reach_low_mv[row, shown], earlier + bands.reach_high_mv[row, shown])
    low, high = voltage_range(earlier, later, *reach, least_mv=LEAST_HEIGHT_MV)
    scale = Scale(rect, first, last, low, high)
    painter.save()
    painter.setClipRect(rect)
    draw_grid(painter, scale, style, every=every)
    x = scale.x(time)
    fill_between(painter, x, scale.y(reach[0]), scale.y(reach[1]), palette.band("reach"))
    noise = bands.noise_mv[row, shown]
    fill_between(
        painter, x, scale.y(earlier - noise), scale.y(earlier + noise), palette.band("noise")
    )
    draw_curve(painter, x, scale.y(earlier), palette.colour("earlier"), 1.6 * style.unit)
    draw_curve(painter, x, scale.y(later), palette.colour("later"), 1.6 * style.unit)
    painter.restore()
    return scale


def draw_lead_cell(
    painter: QPainter,
    rect: QRectF,
    comparison: Comparison,
    lead: str,
    style: Style,
    *,
    selected: bool = False,
) -> None:
    """One cell of the lead wall: name, judgement, overlay, change of ST and T."""
    palette, unit = style.palette, style.unit
    result = comparison.leads[lead]
    border = QPen(
        palette.colour("selection" if selected else "line"), (2 if selected else 1) * unit
    )
    painter.setPen(border)
    painter.setBrush(palette.colour("card"))
    painter.drawRect(rect.adjusted(unit, unit, -unit, -unit))

    inside = rect.adjusted(9 * unit, 6 * unit, -9 * unit, -6 * unit)
    line = style.body * 1.45
    top = QRectF(inside.left(), inside.top(), inside.width(), line)
    name_font, word_font = style.font(style.body, bold=True), style.font(style.caption)
    draw_text(painter, top, lead, name_font, palette.colour("ink"))
    colour = palette.judgement(result.judgement)
    word = WORDS[result.judgement]
    needed = text_width(word, word_font) + style.caption * 1.4
    if needed + text_width(lead, name_font) > inside.width():
        # No room beside the name: the word gets a line of its own.
        top.translate(0, style.caption * 1.3)
    draw_text(painter, top, word, word_font, colour, RIGHT)
    mark_at = QPointF(top.right() - text_width(word, word_font) - 9 * unit, top.center().y())
    draw_mark(painter, mark_at, style.caption * 0.72, result.judgement, colour)

    foot = QRectF(inside.left(), inside.bottom() - line, inside.width(), line)
    changes = next(
        (
            text
            for text in _changes(comparison, lead)
            if text_width(text, word_font) <= foot.width()
        ),
        "",
    )
    draw_text(painter, foot, changes, word_font, palette.colour("soft_ink"), RIGHT)
    plot = QRectF(inside.left(), top.bottom(), inside.width(), foot.top() - top.bottom())
    draw_overlay(painter, plot, comparison, lead, style, every=CELL_EVERY)


def _changes(comparison: Comparison, lead: str) -> list[str]:
    """The changes of ST and T in words, from the longest to the shortest way to say them."""
    measures = comparison.leads[lead].measures
    st, t = signed(measures["st_mv"].change), signed(measures["t_mv"].change)
    return [
        f"ST{NARROW}{st} · T{NARROW}{t}{NARROW}mV",
        f"ST{NARROW}{st} · T{NARROW}{t}",
        f"ST{st} T{t}",
    ]


def draw_difference(
    painter: QPainter, rect: QRectF, comparison: Comparison, lead: str, style: Style
) -> Scale:
    """Later less earlier, in the bands of noise and reach, and what the shift would make."""
    row = TWELVE_LEADS.index(lead)
    laid, bands, palette = comparison.laid, comparison.bands, style.palette
    first, last = shown_times_ms(comparison)
    shown = (laid.time_ms >= first) & (laid.time_ms <= last)
    change = (laid.later_mv - laid.earlier_mv)[row, shown]
    reach = bands.reach_low_mv[row, shown], bands.reach_high_mv[row, shown]
    low, high = voltage_range(change, *reach, least_mv=0.3)
    scale = Scale(rect, first, last, low, high)
    painter.save()
    painter.setClipRect(rect)
    draw_grid(painter, scale, style, every=CELL_EVERY)
    x = scale.x(laid.time_ms[shown])
    noise = bands.noise_mv[row, shown]
    fill_between(painter, x, scale.y(reach[0]), scale.y(reach[1]), palette.band("reach"))
    fill_between(painter, x, scale.y(-noise), scale.y(noise), palette.band("noise"))
    draw_curve(painter, x, scale.y(change), palette.colour("ink"), 1.6 * style.unit)
    draw_curve(
        painter,
        x,
        scale.y(bands.expected_mv[row, shown]),
        palette.colour("in_reach"),
        1.6 * style.unit,
        Qt.PenStyle.DashLine,
    )
    painter.restore()
    return scale


def draw_fiducials(
    painter: QPainter, scale: Scale, comparison: Comparison, style: Style, label_rect: QRectF
) -> None:
    """Upright lines at the QRS onset, J, the ST point and the end of T, named above the plot."""
    points, time = comparison.earlier.points, comparison.laid.time_ms
    st_name = f"J+{comparison.settings.st_point_ms:g}"
    marks = [
        (points.fiducials.qrs_onset, "QRS on", RIGHT),
        (points.j, "J", RIGHT),
        (points.st, st_name, Qt.AlignmentFlag.AlignLeft | Qt.AlignmentFlag.AlignVCenter),
        (points.fiducials.t_offset, "T end", CENTRE),
    ]
    font, palette = style.font(style.caption), style.palette
    for sample, name, align in marks:
        x = float(scale.x(time[min(sample, time.size - 1)]))
        painter.setPen(QPen(palette.colour("soft_ink"), 0.9 * style.unit, Qt.PenStyle.DashLine))
        painter.drawLine(QPointF(x, scale.rect.top()), QPointF(x, scale.rect.bottom()))
        width = text_width(name, font) + 2 * style.unit
        left = {RIGHT: x - width, CENTRE: x - width / 2}.get(align, x)
        left = min(max(left, label_rect.left()), label_rect.right() - width)
        box = QRectF(left, label_rect.top(), width, label_rect.height())
        draw_text(painter, box, name, font, palette.colour("soft_ink"), CENTRE)
