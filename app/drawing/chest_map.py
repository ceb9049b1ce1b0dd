"""The chest map: where V1 to V6 belong, and where the QRS puts them in the later recording.

The skin of the chest laid flat: distances along it are true in every direction.
"""

from __future__ import annotations

import math
from dataclasses import dataclass

from PySide6.QtCore import QPointF, QRectF, QSizeF, Qt
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
DISC = 0.85 * RADIUS


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
    electrodes = comparison.placement.electrodes
    shifts = {
        electrode: shift
        for electrode in sites
        if (shift := electrodes.get(electrode)) is not None and shift.worth_naming()
    }
    for electrode, shift in shifts.items():
        _draw_shift(painter, layout, sites[electrode], shift, style)
    for electrode, site in sites.items():
        _draw_site(painter, layout.at(*site), electrode, style)
        if electrode == selected:
            _ring(painter, layout.at(*site), style)
    discs = {name: _estimate(layout, sites[name], shift) for name, shift in shifts.items()}
    taken = [
        box
        for electrode, site in sites.items()
        for box in _boxes_of_site(layout.at(*site), electrode, style)
    ]
    taken += [_around(there, DISC * style.unit) for there in discs.values()]
    labels: list[QRectF] = []
    for electrode, shift in shifts.items():
        labels.append(_name_shift(painter, rect, discs[electrode], shift, style, taken, labels))
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


def _estimate(layout: _Layout, site: tuple[float, float], shift: ElectrodeShift) -> QPointF:
    """Where the electrode is estimated to have been."""
    return layout.at(site[0] + shift.left_mm.estimate, site[1] + shift.up_mm.estimate)


def _draw_shift(
    painter: QPainter,
    layout: _Layout,
    site: tuple[float, float],
    shift: ElectrodeShift,
    style: Style,
) -> None:
    """The estimate as a disc, its range as an ellipse, and the way from the site."""
    unit, later = style.unit, style.palette.colour("later")
    there, left, up = _estimate(layout, site, shift), shift.left_mm, shift.up_mm
    middle = layout.at(site[0] + (left.low + left.high) / 2, site[1] + (up.low + up.high) / 2)
    half = [(size.high - size.low) / 2 * layout.scale for size in (left, up)]
    faint = style.palette.colour("later")
    faint.setAlphaF(0.13)
    painter.setPen(QPen(later, 0.8 * unit))
    painter.setBrush(faint)
    painter.drawEllipse(middle, *half)
    painter.setPen(QPen(later, 1.6 * unit))
    painter.drawLine(layout.at(*site), there)
    painter.setPen(Qt.PenStyle.NoPen)
    painter.setBrush(later)
    painter.drawEllipse(there, DISC * unit, DISC * unit)


def _draw_site(painter: QPainter, here: QPointF, electrode: str, style: Style) -> None:
    """The ring of an electrode's site, and its name under it."""
    palette, unit = style.palette, style.unit
    painter.setPen(QPen(palette.colour("earlier"), 2.0 * unit))
    painter.setBrush(palette.colour("card"))
    painter.drawEllipse(here, RADIUS * unit, RADIUS * unit)
    _, name = _boxes_of_site(here, electrode, style)
    font = style.font(style.caption, bold=True)
    draw_text(painter, name, electrode, font, palette.colour("ink"), CENTRE)


def _boxes_of_site(here: QPointF, electrode: str, style: Style) -> tuple[QRectF, QRectF]:
    """What the ring and the name of a site take."""
    unit, font = style.unit, style.font(style.caption, bold=True)
    width, top = text_width(electrode, font) + 2 * unit, here.y() + (RADIUS + 2) * unit
    name = QRectF(here.x() - width / 2, top, width, style.caption * 1.35)
    return _around(here, RADIUS * unit), name


def _around(middle: QPointF, radius: float) -> QRectF:
    return QRectF(middle.x() - radius, middle.y() - radius, 2 * radius, 2 * radius)


def _name_shift(
    painter: QPainter,
    rect: QRectF,
    there: QPointF,
    shift: ElectrodeShift,
    style: Style,
    taken: list[QRectF],
    labels: list[QRectF],
) -> QRectF:
    """How far, beside its own disc and as clear as can be of what stands already; the box."""
    certain = shift.worth_naming().values()
    text = f"{plain(math.hypot(*(size.estimate for size in certain)))} mm"
    font = style.font(style.caption, bold=True)
    size = QSizeF(text_width(text, font) + 4 * style.unit, style.caption * 1.3)

    def hidden(box: QRectF) -> float:
        # Another distance, or the map's edge, would hide it; a ring or a name is only crowded.
        inside = _shared(box, rect)
        outside = box.width() * box.height() - inside
        hides = 10 * (outside + sum(_shared(box, label) for label in labels))
        # Rounded: what the arithmetic leaves over must not decide between clear places.
        return round(hides + sum(_shared(box, one) for one in taken), 3)

    box = min(_beside(there, size, (DISC + 3) * style.unit), key=hidden)
    draw_text(painter, box, text, font, style.palette.colour("ink"), CENTRE)
    return box


def _beside(there: QPointF, size: QSizeF, away: float) -> list[QRectF]:
    """Places for a label next to a disc, the best first: over it, under it, at its sides."""
    width, height = size.width(), size.height()
    over, under = there.y() - away - height, there.y() + away
    slides = [0.0, 0.25, -0.25, 0.5, -0.5]
    corners = [(there.x() + (slide - 0.5) * width, over) for slide in slides]
    corners += [(there.x() + (slide - 0.5) * width, under) for slide in slides]
    level = there.y() - height / 2
    corners += [(there.x() + away, level), (there.x() - away - width, level)]
    return [QRectF(QPointF(*corner), size) for corner in corners]


def _shared(one: QRectF, other: QRectF) -> float:
    """Area that two boxes have in common."""
    common = one.intersected(other)
    return common.width() * common.height()


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
