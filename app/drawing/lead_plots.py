"""A lead's two representative beats on each other, and their difference."""

from __future__ import annotations

import numpy as np
from numpy.typing import NDArray
from PySide6.QtCore import QPointF, QRectF, Qt
from PySide6.QtGui import QPainter, QPen

from app.drawing.lead_curves import LeadBands, curves_of, shown_times_ms
from app.drawing.pen import Style, draw_curve, draw_text, fill_between, text_width
from app.drawing.scale import Scale, voltage_range
from core.comparison.results import Comparison
from core.wording.numbers import NARROW, signed

SMALL_SQUARE_MS, SMALL_SQUARE_MV = 40.0, 0.1
CELL_EVERY = 5  # small squares to a line of a cell's grid
LEAST_HEIGHT_MV = 0.9
TIME_STEP_MS = 200.0
MOST_LEVELS = 7
RIGHT = Qt.AlignmentFlag.AlignRight | Qt.AlignmentFlag.AlignVCenter
CENTRE = Qt.AlignmentFlag.AlignHCenter | Qt.AlignmentFlag.AlignVCenter


def draw_grid(painter: QPainter, scale: Scale, style: Style, *, every: int = 1) -> None:
    """ECG paper: lines each 40 ms and 0.1 mV (or each *every* of them), 0 mV stronger."""
    palette, unit = style.palette, style.unit
    painter.setPen(QPen(palette.colour("grid"), 0.8 * unit))
    step_ms, step_mv = SMALL_SQUARE_MS * every, SMALL_SQUARE_MV * every
    for time in np.arange(np.ceil(scale.first_ms / step_ms), scale.last_ms / step_ms) * step_ms:
        x = float(scale.x(time))
        painter.drawLine(QPointF(x, scale.rect.top()), QPointF(x, scale.rect.bottom()))
    for level in _multiples(scale, step_mv):
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


def _level_step(scale: Scale, line: float) -> float:
    """A round step between the numbers of an axis, which keeps them apart but for two of them."""
    most = min(MOST_LEVELS, scale.rect.height() / (1.15 * line))
    step_mv = _round_step((scale.high_mv - scale.low_mv) / most)
    # The next finer round step is 0.4 or 0.5 of it.
    return step_mv if _multiples(scale, step_mv).size > 1 else _round_step(0.4 * step_mv)


def _multiples(scale: Scale, step_mv: float) -> NDArray[np.float64]:
    """Voltages of a plot that are whole steps."""
    return np.arange(np.ceil(scale.low_mv / step_mv), scale.high_mv / step_mv) * step_mv


def draw_axes(painter: QPainter, scale: Scale, style: Style) -> None:
    """Numbers to the left of a plot and below it: mV, and ms from R."""
    font, colour = style.font(style.caption), style.palette.colour("soft_ink")
    left_room, line = axis_room(style)
    step_mv = _level_step(scale, line)
    levels = _multiples(scale, step_mv)
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
    curves, palette = curves_of(comparison, lead), style.palette
    earlier, later, bands = curves.earlier_mv, curves.later_mv, curves.bands
    drawn = [earlier, later]
    if bands is not None:
        drawn += [earlier + bands.reach_low, earlier + bands.reach_high]
    low, high = voltage_range(*drawn, least_mv=LEAST_HEIGHT_MV)
    scale = Scale(rect, *shown_times_ms(comparison), low, high)
    painter.save()
    painter.setClipRect(rect)
    draw_grid(painter, scale, style, every=every)
    x = scale.x(curves.time_ms)
    if bands is not None:
        _draw_bands(painter, scale, x, bands, style, around=earlier)
    draw_curve(painter, x, scale.y(earlier), palette.colour("earlier"), 1.6 * style.unit)
    draw_curve(painter, x, scale.y(later), palette.colour("later"), 1.6 * style.unit)
    painter.restore()
    return scale


def _draw_bands(
    painter: QPainter,
    scale: Scale,
    x: NDArray[np.float64],
    bands: LeadBands,
    style: Style,
    *,
    around: NDArray[np.float64] | float,
) -> None:
    """Reach, and repeat noise on it."""
    reach = scale.y(around + bands.reach_low), scale.y(around + bands.reach_high)
    noise = scale.y(around - bands.noise), scale.y(around + bands.noise)
    fill_between(painter, x, *reach, style.palette.band("reach"))
    fill_between(painter, x, *noise, style.palette.band("noise"))


def draw_difference(
    painter: QPainter, rect: QRectF, comparison: Comparison, lead: str, style: Style
) -> Scale:
    """Later less earlier, in the bands of noise and reach, and what the shift would make."""
    curves, width = curves_of(comparison, lead), 1.6 * style.unit
    change, bands = curves.later_mv - curves.earlier_mv, curves.bands
    drawn = [change] if bands is None else [change, bands.reach_low, bands.reach_high]
    low, high = voltage_range(*drawn, least_mv=0.3)
    scale = Scale(rect, *shown_times_ms(comparison), low, high)
    painter.save()
    painter.setClipRect(rect)
    draw_grid(painter, scale, style, every=CELL_EVERY)
    x = scale.x(curves.time_ms)
    if bands is not None:
        _draw_bands(painter, scale, x, bands, style, around=0.0)
    draw_curve(painter, x, scale.y(change), style.palette.colour("ink"), width)
    if bands is not None:
        colour, dash = style.palette.colour("in_reach"), Qt.PenStyle.DashLine
        draw_curve(painter, x, scale.y(bands.expected), colour, width, dash)
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
