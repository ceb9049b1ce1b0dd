"""Each format, written by independent writers, comes back within one quantisation step."""

from __future__ import annotations

from datetime import timedelta
from pathlib import Path

import numpy as np
import pytest

from core import RecordingError, read_recording
from tests.helpers.every_format import RATE_HZ, STEP_MV, WRITERS, tracing

FORMATS = Path(__file__).resolve().parents[3].parent / "shared" / "data" / "formats"
# The 80 format holds 8 bits; the others at least 12.
LARGEST = {"WFDB 80": 50}
# EDF and BDF by edfio are quantised anew, to 20 mV in 16 or 24 bits; the others hold the counts.
STEPS = {"EDF": 20 / 65535, "BDF": 20 / (2**24 - 1)}


@pytest.mark.parametrize("form", list(WRITERS))
def test_a_file_comes_back_within_one_step(tmp_path, form):
    counts = tracing(largest=LARGEST.get(form, 900))
    recording = read_recording(WRITERS[form].write(tmp_path, counts))
    assert recording.sampling_rate_hz == RATE_HZ
    assert recording.leads_derived == ()
    # Rounding in the arithmetic of doubles is all that is added where the counts are held.
    allowed_mv = STEPS.get(form, 1e-9)
    np.testing.assert_allclose(recording.signal_mv, counts * STEP_MV, rtol=0, atol=allowed_mv)


@pytest.mark.parametrize("form", list(WRITERS))
def test_a_stretch_is_that_part_of_the_whole(tmp_path, form):
    path = WRITERS[form].write(tmp_path, tracing(largest=LARGEST.get(form, 900)))
    whole = read_recording(path)
    part = read_recording(path, stretch_s=(3.5, 8.002))
    np.testing.assert_array_equal(part.signal_mv, whole.signal_mv[1750:4001])
    assert part.source == whole.source
    assert part.notices[-1].code == "stretch-asked"
    if whole.recorded_at is not None:
        assert part.recorded_at == whole.recorded_at + timedelta(seconds=3.5)


@pytest.mark.parametrize("form", ["WFDB 16", "DICOM", "EDF", "EDF+D", "table"])
@pytest.mark.parametrize(
    ("stretch_s", "says"),
    [
        ((5, 12.5), "lasts 12 s. Choose a stretch within it"),
        ((-1, 5), "within it"),
        ((8, 5), "within it"),
        ((float("nan"), 5), "within it"),
        ((5, 5.5), "too short"),
    ],
)
def test_a_stretch_that_is_not_there_is_refused(tmp_path, form, stretch_s, says):
    path = WRITERS[form].write(tmp_path, tracing())
    with pytest.raises(RecordingError, match=says):
        read_recording(path, stretch_s=stretch_s)


@pytest.mark.skipif(not FORMATS.is_dir(), reason="the files of independent writers are not here")
@pytest.mark.parametrize(
    ("name", "step_mv"),
    # edfio: +-6 mV in 16 bits. biosig-tools: the record's own 0.5 uV.
    [("healthy.edf", 12 / 65535), ("healthy.aecg.xml", 0.0005)],
)
def test_files_of_independent_writers(name, step_mv):
    truth = read_recording(FORMATS.parent / "ptb" / "s0460_re_10s")
    found = read_recording(FORMATS / name)
    np.testing.assert_allclose(found.signal_mv, truth.signal_mv, rtol=0, atol=step_mv)


@pytest.mark.skipif(not FORMATS.is_dir(), reason="the files of independent writers are not here")
def test_an_scp_file_whose_writer_rounded_its_step():
    """biosig-tools scaled by 12 mV / 65536 = 183.1 nV and states 184; the samples are the truth's.

    Nothing in the file tells of it: read as stated, they are too large by 184 / 183.1.
    """
    truth = read_recording(FORMATS.parent / "ptb" / "s0460_re_10s").signal_mv
    found = read_recording(FORMATS / "healthy.scp").signal_mv
    scaled = found * (12e6 / 65536 / 184)
    np.testing.assert_allclose(scaled, truth, rtol=0, atol=0.0005)  # the record's own step
