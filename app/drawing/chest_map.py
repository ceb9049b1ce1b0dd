"""The chest map: where V1 to V6 belong, and where the QRS puts them in the later recording.

The skin of the chest laid flat: distances along it are true in every direction.
"""

from __future__ import annotations

import math
from dataclasses import dataclass

from PySide6.QtCore import QPointF, QRectF, Qt
from PySide6.QtGui import QPainter, QPen

from app.drawing.lead_plots import CENTRE
from app.drawing.pen import Style, draw_text, text_width
from core.comparison.results import Comparison, ElectrodeShift
from core.wording.numbers import plain

LEFT_MARGIN_MM, RIGHT_MARGIN_MM = 62.0, 40.0
LOWEST_MM, HIGHEST_MM = -95.0, 100.0
SCALE_BAR_MM = 50.0
STERNUM_HALF_MM = 18.0
INTERSPACE_MM = 29.0
RADIUS = 5.5


@dataclass(frozen=True, slots=True)
class _Layout:
    """Where a site of the skin lies in the picture."""

    centre: QPointF
    first_mm: float
    last_mm: float
    scale: float

    def at(self, left_mm: float, up_mm: float) -> QPointF:
        # The patient faces the reader, so the patient's left is on the right.
        x = self.centre.x() + (left_mm - (self.first_mm + self.last_mm) / 2) * self.scale
        return QPointF(x, self.centre.y() - (up_mm - (LOWEST_MM + HIGHEST_MM) / 2) * self.scale)


def draw_chest_map(
    painter: QPainter,
    rect: QRectF,
    comparison: Comparison,
    style: Style,
    *,
    selected: str | None = None,
) -> None:
    """Draw the map into a rectangle, as large as fits."""
    sites = comparison.placement.sites_mm
    lefts = [left for left, _ in sites.values()]
    first, last = min(lefts) - LEFT_MARGIN_MM, max(lefts) + RIGHT_MARGIN_MM
    scale = min(rect.width() / (last - first), rect.height() / (HIGHEST_MM - LOWEST_MM))
    layout = _Layout(rect.center(), first, last, scale)
    painter.save()
    painter.setClipRect(rect)
    _draw_landmarks(painter, layout, sites, style)
    labels: list[QRectF] = []
    for electrode, site in sites.items():
        shift = comparison.placement.electrodes.get(electrode)
        _draw_electrode(painter, layout, electrode, site, shift, style, labels)
        if electrode == selected:
            _ring(painter, layout.at(*site), style)
    _draw_scale_bar(painter, rect, scale, style)
    painter.restore()


def _draw_landmarks(
    painter: QPainter, layout: _Layout, sites: dict[str, tuple[float, float]], style: Style
) -> None:
    palette, unit, at = style.palette, style.unit, layout.at
    sternum = QRectF(at(-STERNUM_HALF_MM, HIGHEST_MM), at(STERNUM_HALF_MM, LOWEST_MM + 20.0))
    painter.setPen(Qt.PenStyle.NoPen)
    painter.setBrush(palette.colour("line"))
    painter.setOpacity(0.55)
    painter.drawRoundedRect(sternum, 4 * unit, 4 * unit)
    painter.setOpacity(1.0)
    rib = QPen(palette.colour("line"), 5 * unit)
    rib.setCapStyle(Qt.PenCapStyle.RoundCap)
    painter.setPen(rib)
    painter.setOpacity(0.45)
    for space in range(-2, 4):
        level = (space - 0.5) * INTERSPACE_MM
        painter.drawLine(at(STERNUM_HALF_MM + 6, level), at(layout.last_mm, level - 22.0))
        painter.drawLine(at(-STERNUM_HALF_MM - 6, level), at(layout.first_mm, level - 6.0))
    painter.setOpacity(1.0)
    font = style.font(style.caption)
    names = {"V4": "midclavicular", "V6": "midaxillary"}
    for electrode, name in names.items():
        left, up = sites[electrode]
        painter.setPen(QPen(palette.colour("soft_ink"), 0.8 * unit, Qt.PenStyle.DotLine))
        painter.drawLine(at(left, LOWEST_MM + 24.0), at(left, up - 26.0))
        width = text_width(name, font) + 4 * unit
        x = min(at(left, 0).x() - width / 2, at(layout.last_mm, 0).x() - width)
        box = QRectF(x, at(0, LOWEST_MM + 24.0).y(), width, style.caption * 1.5)
        draw_text(painter, box, name, font, palette.colour("soft_ink"), CENTRE)


def _draw_electrode(
    painter: QPainter,
    layout: _Layout,
    electrode: str,
    site: tuple[float, float],
    shift: ElectrodeShift | None,
    style: Style,
    labels: list[QRectF],
) -> None:
    palette, unit, at = style.palette, style.unit, layout.at
    here = at(*site)
    radius = RADIUS * unit
    if shift is not None and shift.worth_naming():
        there = at(site[0] + shift.left_mm.estimate, site[1] + shift.up_mm.estimate)
        middle = at(
            site[0] + (shift.left_mm.low + shift.left_mm.high) / 2,
            site[1] + (shift.up_mm.low + shift.up_mm.high) / 2,
        )
        half = (
            (shift.left_mm.high - shift.left_mm.low) / 2 * layout.scale,
            (shift.up_mm.high - shift.up_mm.low) / 2 * layout.scale,
        )
        later = palette.colour("later")
        painter.setPen(QPen(later, 0.8 * unit))
        faint = palette.colour("later")
        faint.setAlphaF(0.13)
        painter.setBrush(faint)
        painter.drawEllipse(middle, *half)
        painter.setPen(QPen(later, 1.6 * unit))
        painter.drawLine(here, there)
        painter.setPen(Qt.PenStyle.NoPen)
        painter.setBrush(later)
        painter.drawEllipse(there, radius * 0.85, radius * 0.85)
        _name_shift(painter, there, shift, style, labels)
    painter.setPen(QPen(palette.colour("earlier"), 2.0 * unit))
    painter.setBrush(palette.colour("card"))
    painter.drawEllipse(here, radius, radius)
    font = style.font(style.caption, bold=True)
    width = 30 * unit
    box = QRectF(here.x() - width / 2, here.y() + radius + 2 * unit, width, style.caption * 1.35)
    draw_text(painter, box, electrode, font, palette.colour("ink"), CENTRE)


def _name_shift(
    painter: QPainter,
    there: QPointF,
    shift: ElectrodeShift,
    style: Style,
    labels: list[QRectF],
) -> None:
    """How far, over the disc and clear of the labels that stand already."""
    certain = shift.worth_naming().values()
    text = f"{plain(math.hypot(*(size.estimate for size in certain)))} mm"
    font = style.font(style.caption, bold=True)
    width, height = text_width(text, font) + 4 * style.unit, style.caption * 1.3
    top = there.y() - (RADIUS + 3) * style.unit - height
    box = QRectF(there.x() - width / 2, top, width, height)
    while any(box.intersects(label) for label in labels):
        box.translate(0, -height)
    labels.append(box)
    draw_text(painter, box, text, font, style.palette.colour("ink"), CENTRE)


def _ring(painter: QPainter, at: QPointF, style: Style) -> None:
    painter.setPen(QPen(style.palette.colour("selection"), 1.4 * style.unit))
    painter.setBrush(Qt.BrushStyle.NoBrush)
    radius = (RADIUS + 3.5) * style.unit
    painter.drawEllipse(at, radius, radius)


def _draw_scale_bar(painter: QPainter, rect: QRectF, scale: float, style: Style) -> None:
    palette, unit = style.palette, style.unit
    y = rect.bottom() - 5 * unit
    start, stop = rect.left() + 4 * unit, rect.left() + 4 * unit + SCALE_BAR_MM * scale
    painter.setPen(QPen(palette.colour("soft_ink"), 1.4 * unit))
    painter.drawLine(QPointF(start, y), QPointF(stop, y))
    box = QRectF(stop + 5 * unit, y - style.caption * 0.75, 60 * unit, style.caption * 1.5)
    text = f"{plain(SCALE_BAR_MM)} mm"
    draw_text(painter, box, text, style.font(style.caption), palette.colour("soft_ink"))
