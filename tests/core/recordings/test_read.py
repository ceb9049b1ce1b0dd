from __future__ import annotations

import numpy as np
import pytest

from core import RecordingError, read_recording
from core.recordings.subject_words import age_of_word, sex_of_word
from tests.helpers.wfdb_files import write_record


def refusal(path) -> str:
    with pytest.raises(RecordingError) as caught:
        read_recording(path)
    message = str(caught.value)
    assert "\n" not in message
    return message


def test_a_missing_file(tmp_path):
    assert "no such file" in refusal(tmp_path / "nobody.dcm")


def test_a_folder(tmp_path):
    assert "folder" in refusal(tmp_path)


def test_an_empty_file(tmp_path):
    (tmp_path / "empty.dcm").touch()
    assert "empty" in refusal(tmp_path / "empty.dcm")


def test_a_text_file_renamed(tmp_path):
    (tmp_path / "notes.dcm").write_text("Dear colleague,\nplease find attached ...\n")
    assert "not that of any readable format" in refusal(tmp_path / "notes.dcm")


def test_a_header_without_its_signal_file(tmp_path):
    write_record(tmp_path, "lone", np.zeros((1000, 1)), ["II"])
    (tmp_path / "lone.dat").unlink()
    assert "signal file lone.dat, which is not beside" in refusal(tmp_path / "lone.hea")


def test_a_record_of_one_lead(tmp_path):
    record = write_record(tmp_path, "single", np.zeros((1000, 1)), ["II"])
    assert "only lead II" in refusal(record)


def test_an_impossible_voltage(tmp_path):
    leads = ["I", "II", "V1", "V2", "V3", "V4", "V5", "V6"]
    record = write_record(tmp_path, "huge", np.full((1000, 8), 30000), leads, gain=1.0)
    assert "no ECG does" in refusal(record)


@pytest.mark.parametrize(
    ("word", "years"),
    [
        ("81", 81),
        ("042Y", 42),
        ("018M", 1.5),
        ("52w", 0.997),
        ("", None),
        ("old", None),
        ("300", None),
    ],
)
def test_ages_as_files_write_them(word, years):
    # Days are counted as 365.25 a year, so weeks come out a little under.
    assert age_of_word(word) == (None if years is None else pytest.approx(years, abs=0.001))


def test_sexes_as_files_write_them():
    assert [sex_of_word(word) for word in ("F", "female", "M", "O", None)] == [
        "female",
        "female",
        "male",
        None,
        None,
    ]
