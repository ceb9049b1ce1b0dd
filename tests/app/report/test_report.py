"""The comparison report, read back from its PDF."""

from __future__ import annotations

import io
import re
import subprocess
import sys
from dataclasses import replace
from datetime import datetime

import pytest
from pypdf import PdfReader

from app.report.report import write_report
from core.comparison.results import Comparison
from core.notices import Notice
from core.recordings.leads import TWELVE_LEADS
from core.wording.caution import CAUTIONS, PLACEMENT_CAVEAT
from core.wording.judgements import WORDS

A4_POINTS = (595.28, 841.89)


def text_of(page) -> str:
    """The words of a page, one space between them."""
    return " ".join(page.extract_text().split())


def plain(text: str) -> str:
    return " ".join(text.split())


def read(comparison: Comparison) -> PdfReader:
    return PdfReader(io.BytesIO(write_report(comparison)))


@pytest.fixture(scope="module")
def reader(qapp, raised) -> PdfReader:
    return read(raised)


def test_it_is_two_pages_of_a4(reader):
    assert len(reader.pages) == 2
    for page in reader.pages:
        size = float(page.mediabox.width), float(page.mediabox.height)
        assert size == pytest.approx(A4_POINTS, abs=1.0)


def test_caveat_and_cautions_stand_on_every_page(reader):
    for page in reader.pages:
        text = text_of(page)
        assert PLACEMENT_CAVEAT in text
        for caution in CAUTIONS:
            assert caution in text


def test_it_says_who_when_and_what(reader, raised):
    first = text_of(reader.pages[0])
    subject = raised.earlier.recording.subject
    for part in (subject.name, subject.id, "14 October 2031", "12 November 2031", "Fridericia"):
        assert part in first
    assert plain(raised.overall.sentence) in first
    assert raised.overall.next_step in first


def test_its_table_has_every_lead_with_its_judgement(reader, raised):
    text = text_of(reader.pages[1])
    for lead in TWELVE_LEADS:
        word = WORDS[raised.leads[lead].judgement]
        assert re.search(rf"\b{lead} {re.escape(word)}", text), lead


def test_it_says_where_the_electrodes_are(reader, raised):
    text = text_of(reader.pages[1])
    up = raised.placement.electrodes["V1"].up_mm
    assert f"+{up.estimate:.0f} (+{up.low:.0f} to +{up.high:.0f})" in text


def test_every_notice_is_printed(reader, raised):
    text = " ".join(text_of(page) for page in reader.pages)
    for notice in raised.notices:
        assert notice.text in text


def test_its_fonts_are_embedded(reader):
    fonts = [
        font.get_object() for page in reader.pages for font in page["/Resources"]["/Font"].values()
    ]
    assert fonts
    for font in fonts:
        descendant = font["/DescendantFonts"][0].get_object()
        descriptor = descendant["/FontDescriptor"].get_object()
        assert {"/FontFile2", "/FontFile3", "/FontFile"} & set(descriptor)


def test_it_is_small_and_names_no_folder(raised, qapp):
    content = write_report(raised)
    assert len(content) < 2_000_000
    reader = PdfReader(io.BytesIO(content))
    said = " ".join(text_of(page) for page in reader.pages) + str(reader.metadata)
    assert "sample_records" not in said
    assert not re.search(r"(^|\s)/\w+/\w+", said)


def test_the_same_comparison_gives_the_same_pages(raised, qapp):
    one, other = ([text_of(page) for page in read(raised).pages] for _ in range(2))
    assert one == other


def with_recordings(comparison: Comparison, **subject) -> Comparison:
    def changed(report):
        recording = report.recording
        other = replace(recording.subject, **subject)
        return replace(report, recording=replace(recording, subject=other))

    return replace(comparison, earlier=changed(comparison.earlier), later=changed(comparison.later))


@pytest.mark.parametrize(
    "name", ["N" * 60, "A very long invented name " * 6, None, "Ωμέγα Ж", "李雷", "مريم"]
)
def test_any_name_leaves_the_report_whole(raised, qapp, name):
    reader = read(with_recordings(raised, name=name))
    assert len(reader.pages) == 2
    assert PLACEMENT_CAVEAT in text_of(reader.pages[0])


def test_no_dates_and_many_notices_leave_the_report_whole(raised, qapp):
    def undated(report):
        return replace(report, recording=replace(report.recording, recorded_at=None))

    many = tuple(
        Notice(f"invented-{k}", "caution", f"Invented notice {k}: {'long words ' * 15}end.")
        for k in range(12)
    )
    comparison = replace(
        raised,
        earlier=undated(raised.earlier),
        later=undated(raised.later),
        notices=many,
        made_at=datetime(2031, 12, 1),
    )
    reader = read(comparison)
    text = " ".join(text_of(page) for page in reader.pages)
    for notice in many:
        assert notice.text in text
    assert len(reader.pages) == 3
    for page in reader.pages:
        assert PLACEMENT_CAVEAT in text_of(page)


@pytest.mark.parametrize("pair", ["inferior", "steady", "medial"])
def test_the_other_samples_are_written_too(request, qapp, pair):
    comparison = request.getfixturevalue(pair)
    text = text_of(read(comparison).pages[0])
    assert comparison.overall.next_step in text


def test_it_is_written_without_any_display(tmp_path, monkeypatch):
    for name in ("DISPLAY", "WAYLAND_DISPLAY", "QT_QPA_PLATFORM"):
        monkeypatch.delenv(name, raising=False)
    program = "import sys; from app.command_line.main import main; sys.exit(main())"
    out = tmp_path / "demo"
    done = subprocess.run(
        [sys.executable, "-W", "ignore", "-c", program, "demo", "--no-window", "--out", str(out)],
        capture_output=True,
        text=True,
        check=False,
    )
    assert done.returncode == 0, done.stderr
    assert len(PdfReader(out / "comparison.pdf").pages) == 2
