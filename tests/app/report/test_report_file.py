from __future__ import annotations

import re
from dataclasses import replace
from datetime import timedelta
from pathlib import Path

import pytest

from app.report.report import write_report
from core.shipped_files import samples_folder
from core.version import PROGRAM_NAME, program_version
from tests.app.report.pages import POINTS_PER_MM, open_pdf, texts


def test_it_is_a_pdf(raised_pdf):
    assert raised_pdf.startswith(b"%PDF-")
    assert raised_pdf.rstrip().endswith(b"%%EOF")


def test_it_has_two_pages_of_a4(raised_pdf):
    pages = open_pdf(raised_pdf).pages
    assert len(pages) == 2
    for page in pages:
        # ISO 216: 210 x 297 mm; PDF writers round to whole points.
        assert float(page.mediabox.width) == pytest.approx(210 * POINTS_PER_MM, abs=0.5)
        assert float(page.mediabox.height) == pytest.approx(297 * POINTS_PER_MM, abs=0.5)


def test_it_is_small_enough_to_send(raised_pdf):
    assert len(raised_pdf) < 2_000_000  # bytes


def test_every_font_is_one_of_ours_and_travels_with_it(raised_pdf):
    names = set()
    for page in open_pdf(raised_pdf).pages:
        for font in page["/Resources"]["/Font"].values():
            (shape,) = font.get_object()["/DescendantFonts"]
            description = shape.get_object()["/FontDescriptor"].get_object()
            assert len(description["/FontFile2"].get_object().get_data()) > 1000  # bytes
            names.add(re.sub(r"^[A-Z]{6}\+", "", str(description["/FontName"]).lstrip("/")))
    assert names == {"OpenSans", "OpenSans-Bold"}


def test_it_says_what_made_it(raised_pdf):
    said = open_pdf(raised_pdf).metadata
    assert said is not None
    assert said.creator == f"{PROGRAM_NAME} {program_version()}"
    assert said.title == "ECG comparison report"


def test_no_folder_is_named_anywhere(raised_pdf):
    reader = open_pdf(raised_pdf)
    said = " ".join([*texts(raised_pdf), *map(str, (reader.metadata or {}).values())])
    for page in reader.pages:
        said += page.get_contents().get_data().decode("latin-1")
    said += raised_pdf.decode("latin-1")  # XMP lies uncompressed
    for folder in (samples_folder(), Path.home(), Path.cwd()):
        if len(folder.parts) > 1:
            assert str(folder) not in said
            assert folder.as_uri() not in said


def test_no_name_of_a_person_is_in_the_metadata(raised, raised_pdf):
    name = raised.earlier.recording.subject.name
    assert name
    said = open_pdf(raised_pdf).metadata or {}
    assert not any(name in str(value) for value in said.values())
    assert name.encode() not in raised_pdf


def test_the_same_comparison_gives_the_same_pages(raised, raised_pdf):
    again = open_pdf(write_report(raised))
    for one, other in zip(open_pdf(raised_pdf).pages, again.pages, strict=True):
        assert one.get_contents().get_data() == other.get_contents().get_data()


def test_another_time_of_making_changes_that_time_alone(raised, raised_pdf):
    later = replace(raised, made_at=raised.made_at + timedelta(days=400))
    for one, other in zip(texts(raised_pdf), texts(write_report(later)), strict=True):
        without = [re.sub(r"made \d+ \w+ \d+, \d\d:\d\d", "made", text) for text in (one, other)]
        assert one != other
        assert without[0] == without[1]
