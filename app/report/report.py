"""The comparison report: one page that answers, one of evidence.

Where there are further leads, or more notices than the first has room for, a page of each follows.
"""

from __future__ import annotations

from collections.abc import Callable, Sequence

from PySide6.QtCore import QBuffer, QIODevice, QMarginsF, QPointF, QRectF, Qt
from PySide6.QtGui import QPageLayout, QPageSize, QPainter, QPdfWriter, QPen

from app.drawing.chest_map import draw_chest_map
from app.drawing.pen import draw_mark, draw_paragraph, draw_text
from app.report.page import Page, mm, start_page
from app.report.tables import Column, draw_table
from app.report.wall import draw_further_leads, draw_wall
from core.comparison.results import Comparison
from core.measures.report import RecordingReport
from core.notices import Notice
from core.version import PROGRAM_NAME, program_version
from core.wording.caution import KNOWN_LIMITS
from core.wording.judgements import MEANINGS, WORDS
from core.wording.notices import NOTICE_WORDS
from core.wording.numbers import plain, signed, signed_range
from core.wording.recordings import beats_used, key_numbers, person, when

TITLE = "ECG comparison report"
RESOLUTION_DPI = 1200


def write_report(comparison: Comparison) -> bytes:
    """The report as the bytes of a PDF. Needs a QGuiApplication."""
    buffer = QBuffer()
    buffer.open(QIODevice.OpenModeFlag.WriteOnly)
    writer = QPdfWriter(buffer)
    writer.setResolution(RESOLUTION_DPI)
    writer.setTitle(TITLE)
    writer.setCreator(f"{PROGRAM_NAME} {program_version()}")
    layout = QPageLayout(
        QPageSize(QPageSize.PageSizeId.A4), QPageLayout.Orientation.Portrait, QMarginsF()
    )
    layout.setMode(QPageLayout.Mode.FullPageMode)
    writer.setPageLayout(layout)
    painter = QPainter(writer)
    painter.setRenderHint(QPainter.RenderHint.Antialiasing)
    try:
        page = start_page(writer, painter, first=True)
        left_over = _answer_page(page, comparison)
        after: list[Callable[[Page], None]] = [lambda page: _evidence_page(page, comparison)]
        if comparison.further:
            after.append(lambda page: draw_further_leads(page, comparison))
        if left_over:
            after.append(lambda page: _further_notices(page, left_over))
        n_pages = 1 + len(after)
        page.foot(1, n_pages, _made(comparison))
        for number, draw in enumerate(after, start=2):
            page = start_page(writer, painter, first=False)
            draw(page)
            page.foot(number, n_pages, _made(comparison))
    finally:
        painter.end()
    buffer.close()
    return bytes(buffer.data().data())


def _made(comparison: Comparison) -> str:
    """Whose recordings, by what and when: a page that is parted from the others tells them."""
    model = comparison.placement
    identifiers = dict.fromkeys(
        report.recording.subject.id or "no identifier"
        for report in (comparison.earlier, comparison.later)
    )
    return (
        f"{' and '.join(identifiers)} · {PROGRAM_NAME} {program_version()} · "
        f"{model.model_name} {model.model_version} · made {when(comparison.made_at)}"
    )


def _answer_page(page: Page, comparison: Comparison) -> Sequence[Notice]:
    """Draw the page that answers; the notices that it has no room for."""
    _title(page)
    _recordings(page, comparison)
    _verdict(page, comparison)
    page.heading("Representative beats")
    draw_wall(page, comparison)
    return _notices(page, comparison.notices)


def _notices(page: Page, notices: Sequence[Notice]) -> Sequence[Notice]:
    """Draw notices as far as the page goes; the rest."""
    for drawn, notice in enumerate(notices):
        text = f"{NOTICE_WORDS[notice.severity]}: {notice.text}"
        if page.top + page.height_of(text) > page.bottom:
            return notices[drawn:]
        page.paragraph(text, gap=0.6)
    return ()


def _further_notices(page: Page, notices: Sequence[Notice]) -> None:
    page.heading("Further notices")
    _notices(page, notices)


def _title(page: Page) -> None:
    strip = page.take(page.style.heading * 1.6, mm(1.5))
    font = page.style.font(page.style.heading * 1.25, bold=True)
    draw_text(page.painter, strip, TITLE, font, page.style.palette.colour("ink"))


def _recordings(page: Page, comparison: Comparison) -> None:
    height, gap = mm(29.6), mm(4.0)
    strip = page.take(height, mm(2.5))
    width = (strip.width() - gap) / 2
    for place, (role, name, report) in enumerate(
        (("earlier", "Earlier", comparison.earlier), ("later", "Later", comparison.later))
    ):
        card = QRectF(strip.left() + place * (width + gap), strip.top(), width, height)
        _recording_card(page, card, role, name, report)


def _recording_card(
    page: Page, card: QRectF, role: str, name: str, report: RecordingReport
) -> None:
    style, painter = page.style, page.painter
    palette = style.palette
    painter.setPen(QPen(palette.colour("line"), mm(0.25)))
    painter.setBrush(Qt.BrushStyle.NoBrush)
    painter.drawRect(card)
    painter.fillRect(QRectF(card.left(), card.top(), mm(1.2), card.height()), palette.colour(role))
    recording, subject = report.recording, report.recording.subject
    title = style.font(style.body * 1.1, bold=True)
    line = QRectF(card.left() + mm(3.5), card.top() + mm(1.2), card.width() - mm(5), mm(4.4))
    draw_text(painter, line, name, title, palette.colour(role))
    after_name = line.adjusted(mm(16), 0, 0, 0)
    draw_text(painter, after_name, when(recording.recorded_at), title, palette.colour("ink"))
    lines = [
        subject.name or "no name in the file",
        person(None, subject.id, subject.sex, subject.age_years),
        key_numbers(report.heart_rate_per_min, report.pr_ms, report.qrs_ms, report.qtc_ms),
        f"{beats_used(len(report.analysis.used), len(report.analysis.beats))} · "
        f"{plain(recording.duration_s, 1)} s at {recording.sampling_rate_hz:g} Hz",
        f"SHA-256 {recording.source.sha256[:16]}… · {recording.source.format} · "
        f"{recording.source.name}",
    ]
    font = style.font(style.body)
    for text in lines:
        line.translate(0, mm(4.6))
        draw_text(painter, line, text, font, palette.colour("ink"))


def _verdict(page: Page, comparison: Comparison) -> None:
    style, painter = page.style, page.painter
    overall, palette = comparison.overall, page.style.palette
    inside_left = page.left + mm(9.0)
    width = page.inner_width - mm(12.0)
    top = page.top
    heading = style.font(style.heading, bold=True)
    rect = QRectF(inside_left, top + mm(2.0), width, 0.0)
    used = draw_paragraph(painter, rect, overall.sentence, heading, palette.colour("ink"))
    rect.translate(0, used + mm(1.0))
    used += draw_paragraph(
        painter, rect, overall.next_step, style.font(style.body * 1.1), palette.colour("ink")
    )
    box = QRectF(page.left, top, page.inner_width, used + mm(5.0))
    painter.setPen(QPen(palette.judgement(overall.judgement), mm(0.4)))
    painter.setBrush(Qt.BrushStyle.NoBrush)
    painter.drawRect(box)
    at = QPointF(page.left + mm(4.6), top + mm(2.0) + style.heading * 0.62)
    draw_mark(painter, at, mm(3.2), overall.judgement, palette.judgement(overall.judgement))
    page.top = box.bottom() + mm(3.0)


def _evidence_page(page: Page, comparison: Comparison) -> None:
    page.heading("Changes of ST and T, in mV")
    _changes_table(page, comparison)
    page.heading("Electrodes of the later recording against the earlier, by the QRS")
    _placement(page, comparison)
    page.heading("What the words mean")
    for code, meaning in MEANINGS.items():
        page.paragraph(f"{WORDS[code].capitalize()}: {meaning}", gap=0.4)
    page.top += mm(1.5)
    page.heading("How it was made")
    page.paragraph(_method(comparison), gap=0.8)
    page.paragraph(KNOWN_LIMITS)


def _changes_table(page: Page, comparison: Comparison) -> None:
    columns = [
        Column("lead", 8.5),
        Column("judgement", 29.0),
        *[
            Column(what, width, right=True, group=name)
            for name in ("ST", "T")
            for what, width in (
                ("later", 12.5),
                ("change", 12.5),
                ("noise ±", 11.5),
                ("reach", 20.0),
                ("remainder", 15.5),
            )
        ],
    ]
    rows: list[tuple[str | None, list[str]]] = []
    for lead, result in comparison.leads.items():
        cells = [lead, WORDS[result.judgement]]
        for name in ("st_mv", "t_mv"):
            m = result.measures[name]
            cells += [
                signed(m.later),
                signed(m.change),
                plain(m.noise_high, 2),
                signed_range(m.reach_low, m.reach_high),
                signed(m.remainder),
            ]
        rows.append((result.judgement, cells))
    draw_table(page, columns, rows)


def _placement(page: Page, comparison: Comparison) -> None:
    style, painter = page.style, page.painter
    strip = page.take(mm(62.0), mm(3.0))
    map_rect = QRectF(strip.left(), strip.top(), strip.width() * 0.56, strip.height())
    draw_chest_map(painter, map_rect, comparison, style)
    side = Page(painter, style, page.width, page.height, strip.top())
    columns = [
        Column("electrode", 16.0),
        Column("up, mm (95 %)", 29.0, right=True),
        Column("left, mm (95 %)", 29.0, right=True),
    ]
    rows: list[tuple[str | None, list[str]]] = []
    for electrode, shift in comparison.placement.electrodes.items():
        if shift is None:
            rows.append(("not-judged", [electrode, "not judged", ""]))
            continue
        cells = [
            f"{signed(size.estimate, 0)} ({signed_range(size.low, size.high, 0)})"
            for size in (shift.up_mm, shift.left_mm)
        ]
        rows.append((None, [electrode, *cells]))
    draw_table(side, columns, rows, left=map_rect.right() + mm(2.0))
    tail = comparison.placement.tail_probability
    text = (
        "Open ring: where the electrode belongs. Disc and ellipse: estimate for the later "
        "recording and its 95 % range, where the QRS surely points to a shift."
    )
    if tail is not None:
        text += (
            " With the shift that the QRS points to, placement and repeat noise alone give "
            f"ST and T changes at least this unusual in {_share(tail)} of cases."
        )
    note = QRectF(map_rect.right() + mm(2.0), side.top, strip.right() - map_rect.right() - mm(2), 0)
    draw_paragraph(painter, note, text, style.font(style.caption), style.palette.colour("soft_ink"))


def _share(probability: float) -> str:
    percent = 100.0 * probability
    return (
        "over 99 %"
        if percent > 99
        else "under 0.1 %"
        if percent < 0.1
        else f"{percent:.1f} %"
        if percent < 10
        else f"{percent:.0f} %"
    )


def _method(comparison: Comparison) -> str:
    settings = comparison.settings
    return (
        f"ST is read {settings.st_point_ms:g} ms after J against the level just before the QRS, on "
        "a representative beat (trimmed mean of aligned beats). Repeat noise joins the spread of "
        "the beats and published day-to-day variability. Placement reach: "
        f"{settings.draws} draws of electrode shifts with a spread of "
        f"{settings.spread_mm.up:g} mm up and {settings.spread_mm.left:g} mm left in each "
        "recording, foretold by a boundary-element torso ensemble weighed by this person's own "
        "leads. The shift is estimated from the QRS alone; ST and T never enter it. Chest "
        f"electrode shifts cannot change a limb lead. Ranges hold {100 * settings.confidence:g} %."
    )
