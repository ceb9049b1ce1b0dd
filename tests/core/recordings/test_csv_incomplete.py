"""Tables that leave their unit or their rate to whoever opens them."""

from __future__ import annotations

from pathlib import Path

import numpy as np
import pytest

from core import RecordingError, TableIncomplete, read_recording
from core.recordings.leads import TWELVE_LEADS

UNIT, RATE = "# unit: uV\n", "# sampling_rate_hz: 500\n"


def table(folder: Path, above: str = "", leads: tuple[str, ...] = TWELVE_LEADS) -> Path:
    values = np.random.default_rng(7).integers(-900, 900, (300, len(leads)))
    rows = [",".join(str(value) for value in row) for row in values]
    path = folder / "table.csv"
    path.write_text("\n".join([above + ",".join(leads), *rows]) + "\n")
    return path


def refused(path: Path, **given) -> TableIncomplete:
    with pytest.raises(TableIncomplete) as caught:
        read_recording(path, **given)
    return caught.value


@pytest.mark.parametrize(
    ("above", "given", "missing"),
    [
        ("", {}, ("unit", "rate")),
        (UNIT, {}, ("rate",)),
        (RATE, {}, ("unit",)),
        ("", {"unit": "uV"}, ("rate",)),
        ("", {"sampling_rate_hz": 500.0}, ("unit",)),
    ],
)
def test_all_that_is_missing_is_told_at_once(tmp_path, above, given, missing):
    path = table(tmp_path, above)
    error = refused(path, **given)
    assert (error.path, error.missing) == (path, missing)
    said = str(error)
    assert said.startswith("table.csv: the file ")
    assert ("in which unit lead I is" in said) == ("unit" in missing)
    assert ("no sampling rate" in said) == ("rate" in missing)
    assert said.endswith("when it is opened.")
    assert str(tmp_path) not in said


def test_the_first_lead_without_a_unit_is_named(tmp_path):
    leads = (*(f"{lead} (uV)" for lead in TWELVE_LEADS[:-1]), "V6")
    assert "in which unit lead V6 is" in str(refused(table(tmp_path, RATE, leads)))


def test_the_way_to_state_it_is_the_callers(tmp_path):
    error = refused(table(tmp_path))
    assert error.stating_it("by word of mouth").endswith("or state both by word of mouth.")
    assert refused(table(tmp_path, RATE)).stating_it("aloud").endswith("or state it aloud.")


def test_a_table_that_lacks_leads_is_not_asked_about_in_vain(tmp_path):
    path = table(tmp_path, leads=TWELVE_LEADS[:8])
    with pytest.raises(RecordingError, match="the file holds 8 leads") as caught:
        read_recording(path)
    assert not isinstance(caught.value, TableIncomplete)


@pytest.mark.parametrize(
    ("above", "given", "told"),
    [
        ("", {"unit": "mV", "sampling_rate_hz": 250.0}, "the unit mV and 250 samples a second"),
        (UNIT, {"sampling_rate_hz": 250.0}, "stated by the user: 250 samples a second."),
        (RATE, {"unit": "µV"}, "stated by the user: the unit µV."),
    ],
)
def test_what_the_caller_stated_is_said_in_the_result(tmp_path, above, given, told):
    recording = read_recording(table(tmp_path, above), **given)
    (notice,) = recording.notices
    assert (notice.code, notice.severity) == ("stated-by-user", "info")
    assert told in notice.text


def test_what_the_file_states_itself_is_no_statement_of_the_caller(tmp_path):
    path = table(tmp_path, UNIT + RATE)
    assert read_recording(path, unit="uV", sampling_rate_hz=500.0).notices == ()
