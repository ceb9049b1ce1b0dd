from __future__ import annotations

import shutil
from dataclasses import replace

import pytest
from PySide6.QtCore import Qt

from app.state.bench_state import Phase
from core import read_recording
from core.recordings.wfdb_writer import write_wfdb
from tests.journeys.stories import on_show, pair


def one_second_record(folder):
    return write_wfdb(read_recording(pair("raised")[1]).stretch(0.0, 1.0), folder / "short")[0]


def text_file(folder):
    path = folder / "letter.txt"
    path.write_text("Dear colleague, the tracing is enclosed.\n")
    return path


def empty_file(folder):
    path = folder / "empty.dcm"
    path.touch()
    return path


def missing_file(folder):
    return folder / "nowhere.hea"


def header_without_signal(folder):
    return shutil.copy(pair("raised")[0], folder)


def broken_dicom(folder):
    path = folder / "broken.dcm"
    path.write_bytes(pair("medial")[1].read_bytes()[:5000])
    return path


FILES = (
    one_second_record,
    text_file,
    empty_file,
    missing_file,
    header_without_signal,
    broken_dicom,
)


@pytest.mark.parametrize("make", FILES)
def test_a_pair_that_cannot_be_compared_is_told_in_one_line_and_nothing_old_stays(
    bench, until, tmp_path, inferior, make
):
    bench.state.choose(*pair("inferior"))
    bench.state.finish(inferior)
    bench.open_pair(pair("raised")[0], make(tmp_path))
    until(Phase.REFUSED)
    reason = bench.verdict.sentence.text()
    assert 20 < len(reason) < 400
    assert reason.endswith((".", ".)"))
    for trace in ("\n", "Traceback", "fault of the program"):
        assert trace not in reason
    said = on_show(bench)
    assert " ".join(reason.split()) in said
    assert bench.state.comparison is None
    for old in ("beyond reach", "Invented Birch", "in depth", "Chest map"):
        assert old not in said
    assert not bench.report_button.isEnabled()


def test_after_a_refusal_a_readable_pair_is_judged(bench, until, tmp_path):
    bench.open_pair(pair("raised")[0], text_file(tmp_path))
    until(Phase.REFUSED)
    bench.open_dropped([pair("raised")[1]])
    until(Phase.JUDGED)
    assert bench.state.comparison.overall.judgement == "in-reach-backed"


def test_a_lifted_stop_keeps_two_dropped_files_in_their_order(bench, until, tmp_path, qtbot):
    earlier, later = pair("raised")
    recording = read_recording(later)
    other = replace(recording, subject=replace(recording.subject, id="INVENTED-99"))
    stranger, _ = write_wfdb(other, tmp_path / "stranger")
    bench.open_dropped([stranger, earlier])
    until(Phase.REFUSED)
    qtbot.mouseClick(bench.verdict.lift, Qt.MouseButton.LeftButton)
    until(Phase.JUDGED)
    assert bench.state.comparison.earlier.recording.source.name == "raised-earlier"
