from __future__ import annotations

import numpy as np
import pytest

from core import RecordingError, read_recording
from core.recordings.comments import Comments
from core.recordings.leads import TWELVE_LEADS
from tests.helpers.wfdb_files import write_record


@pytest.fixture
def counts() -> np.ndarray:
    return np.random.default_rng(2).integers(-900, 900, (2000, 12))


def test_every_sample_is_read_in_mv(tmp_path, counts):
    record = write_record(tmp_path, "plain", counts, list(TWELVE_LEADS), gain=400, baseline=17)
    recording = read_recording(record)
    np.testing.assert_array_equal(recording.signal_mv, (counts - 17) / 400)
    assert recording.sampling_rate_hz == 500
    assert recording.leads_present == TWELVE_LEADS
    assert recording.source.name == "plain"


@pytest.mark.parametrize("name", ["plain", "plain.hea", "plain.dat"])
def test_a_record_can_be_named_in_three_ways(tmp_path, counts, name):
    write_record(tmp_path, "plain", counts, list(TWELVE_LEADS))
    assert read_recording(tmp_path / name).n_samples == 2000


def test_microvolts_are_brought_to_mv(tmp_path, counts):
    record = write_record(tmp_path, "micro", counts, list(TWELVE_LEADS), gain=1.0, unit="uV")
    np.testing.assert_allclose(read_recording(record).signal_mv, counts / 1000, rtol=1e-12)


def test_leads_in_any_order_and_spelling(tmp_path, counts):
    order = ["v6", "V5", "v4", "v3", "v2", "v1", "AVF", "avl", "avr", "MLIII", "ii", "i"]
    record = write_record(tmp_path, "mixed", counts, order)
    np.testing.assert_array_equal(read_recording(record).signal_mv[:, 0], counts[:, 11] / 1000)


def test_an_inverted_lead_is_turned_round(tmp_path, counts):
    leads = [*TWELVE_LEADS]
    leads[3] = "-aVR"
    record = write_record(tmp_path, "turned", counts, leads)
    np.testing.assert_array_equal(read_recording(record).signal_mv[:, 3], -counts[:, 3] / 1000)


def test_missing_limb_leads_are_derived_and_said_so(tmp_path, counts):
    leads = ["II", "III", "V1", "V2", "V3", "V4", "V5", "V6"]
    recording = read_recording(write_record(tmp_path, "eight", counts[:, :8], leads))
    assert recording.leads_derived == ("I", "aVR", "aVL", "aVF")
    np.testing.assert_allclose(
        recording.signal_mv[:, 0], (counts[:, 0] - counts[:, 1]) / 1000, atol=1e-12
    )
    assert [notice.code for notice in recording.notices] == ["limb-leads-derived"]
    assert "I, aVR, aVL and aVF" in recording.notices[0].text


def test_a_sample_that_is_not_there_is_nan(tmp_path, counts):
    counts[100, 4] = -32768  # the mark of 16-bit WFDB samples for "no sample"
    recording = read_recording(write_record(tmp_path, "gap", counts, list(TWELVE_LEADS)))
    assert np.isnan(recording.signal_mv[100, 4])
    assert np.isnan(recording.signal_mv).sum() == 1


def test_header_comments_tell_of_the_person():
    styles = (["<age>: 51", "<sex>: F"], ["age: 51", "sex: female"], ["Age: 51", "Gender: w"])
    for comments in styles:
        subject = Comments(comments).subject(None)
        assert (subject.age_years, subject.sex) == (51.0, "female")
    assert Comments(["Diagnosis: none", "no colon here"]).subject(None).id is None


@pytest.mark.parametrize(
    ("spoilt", "reason"),
    [
        (lambda text: text.replace("16 1000", "16 0/nan"), "."),
        (lambda text: text.replace("bad.dat", "../bad.dat"), "'../bad.dat'; only plain names"),
        (lambda text: text.replace("bad.dat", "/etc/bad.dat"), "'/etc/bad.dat'; only plain names"),
        (
            lambda text: text.replace("bad.dat", "other.dat"),
            "line 2 .* other.dat, which is not beside",
        ),
        (lambda text: text.replace(" 2000 ", " 99999 ").replace(" 2000\n", " 99999\n"), "copy"),
        (lambda text: text.replace("mV", "mmHg"), "no voltage"),
        (lambda text: text.replace("bad 12 500", "bad 12 3"), "samples a second"),
    ],
)
def test_spoilt_headers_are_refused_in_one_line(tmp_path, counts, spoilt, reason):
    write_record(tmp_path, "bad", counts, list(TWELVE_LEADS))
    header = tmp_path / "bad.hea"
    text = header.read_text()
    assert spoilt(text) != text
    header.write_text(spoilt(text))
    with pytest.raises(RecordingError, match=f"(?i){reason}") as caught:
        read_recording(header)
    assert "\n" not in str(caught.value)
    assert str(tmp_path) not in str(caught.value)


def test_leads_of_different_rates_in_one_file(tmp_path):
    """Limb leads at 250 Hz, chest leads at 500 Hz: two samples of theirs in every frame."""
    limb_s, both_s = np.arange(1000) / 250.0, np.arange(2000) / 500.0
    chest = np.random.default_rng(9).integers(-900, 900, (1000, 6, 2))
    limb = np.rint(800 * np.sin(2 * np.pi * 3 * limb_s))
    frames = np.column_stack([limb, -limb, chest.reshape(1000, 12)])
    frames.astype("<i2").tofile(tmp_path / "mixed.dat")
    leads = [f"mixed.dat 16 1000(0)/mV 16 0 0 0 0 {lead}" for lead in ("I", "II")]
    leads += [f"mixed.dat 16x2 1000(0)/mV 16 0 0 0 0 V{k}" for k in range(1, 7)]
    (tmp_path / "mixed.hea").write_text("\n".join(["mixed 8 250 1000", *leads]) + "\n")

    recording = read_recording(tmp_path / "mixed")
    assert (recording.sampling_rate_hz, recording.n_samples) == (500.0, 2000)
    np.testing.assert_allclose(
        recording.signal_mv[:, 6:], chest.transpose(0, 2, 1).reshape(2000, 6) / 1000, atol=1e-12
    )
    # Brought to 500 Hz: a step of rounding, and the ends, where nothing is known beyond.
    inside = slice(50, -50)
    wave = 0.8 * np.sin(2 * np.pi * 3 * both_s)
    np.testing.assert_allclose(recording.signal_mv[inside, 0], wave[inside], atol=0.001)
    part = read_recording(tmp_path / "mixed", stretch_s=(1.0, 3.0))
    np.testing.assert_array_equal(part.signal_mv[:, 6:], recording.signal_mv[500:1500, 6:])
