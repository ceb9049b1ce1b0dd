"""``samespot export``: a copy of any recording as a record and as a table."""

from __future__ import annotations

from dataclasses import replace

import numpy as np
import pytest

from app.command_line.main import main
from core import read_recording
from core.recordings.wfdb_writer import write_wfdb
from tests.helpers.every_format import STEP_MV, WRITERS, tracing
from tests.helpers.synthetic import synthetic

LARGEST = {"WFDB 80": 50}


@pytest.mark.parametrize("form", list(WRITERS))
def test_any_recording_is_written_as_record_and_table(tmp_path, form):
    source = WRITERS[form].write(tmp_path, tracing(largest=LARGEST.get(form, 900)))
    original = read_recording(source)
    record, table = tmp_path / "copy", tmp_path / "copy.csv"
    assert main(["export", str(source), "--wfdb", str(record), "--csv", str(table)]) == 0
    for copy in (read_recording(record), read_recording(table)):
        # Half a step of what the file itself was quantised with.
        half_steps_mv = 0.5 / np.array(original.counts_per_mv) + 1e-9
        assert (np.abs(copy.signal_mv - original.signal_mv) <= half_steps_mv).all()
        # An age is written with six figures.
        age_years = pytest.approx(original.subject.age_years, abs=0.001)
        assert copy.subject.age_years == age_years
        assert replace(copy.subject, age_years=None) == replace(original.subject, age_years=None)
        assert copy.recorded_at == original.recorded_at


@pytest.mark.parametrize("form", list(WRITERS))
def test_electrodes_are_moved_in_any_recording(tmp_path, form):
    counts = np.rint(synthetic().recording.signal_mv / STEP_MV).astype(np.int64)
    if form == "WFDB 80":  # eight bits
        counts = counts // 8
    source = WRITERS[form].write(tmp_path, counts)
    out = tmp_path / "moved"
    move = ["--electrode", "V2", "--up-mm", "24", "--out", str(out)]
    assert main(["move", str(source), *move]) == 0
    before, after = read_recording(source), read_recording(out)
    assert (after.sampling_rate_hz, after.n_samples) == (before.sampling_rate_hz, before.n_samples)
    moved = np.abs(after.signal_mv - before.signal_mv).max(axis=0)
    step_mv = 1 / min(before.counts_per_mv)
    assert moved[7] > 4 * step_mv
    assert np.delete(moved, 7).max() <= step_mv / 2 + 1e-9


def test_further_leads_and_a_stretch_are_kept(tmp_path):
    made = synthetic().recording
    further = np.round(np.random.default_rng(1).normal(0, 0.2, (made.n_samples, 2)), 3)
    made = replace(made, further_leads=("V7", "X"), further_mv=further)
    write_wfdb(made, tmp_path / "more")
    stretch = ["--stretch", "2", "6", "--csv", str(tmp_path / "part.csv")]
    assert main(["export", str(tmp_path / "more"), *stretch]) == 0
    part = read_recording(tmp_path / "part.csv")
    assert part.further_leads == ("V7", "X")
    np.testing.assert_allclose(part.further_mv, further[1000:3000], atol=1e-9)


def test_a_table_may_go_to_standard_output(tmp_path, capfdbinary):
    source = WRITERS["WFDB 16"].write(tmp_path, tracing(1))
    assert main(["export", str(source), "--csv", "-"]) == 0
    (tmp_path / "said.csv").write_bytes(capfdbinary.readouterr().out)
    said = read_recording(tmp_path / "said.csv")
    np.testing.assert_array_equal(said.signal_mv, read_recording(source).signal_mv)


@pytest.mark.parametrize(
    ("targets", "says"),
    [([], "--wfdb or --csv"), (["--wfdb", "nowhere/copy"], "Choose another folder")],
)
def test_what_cannot_be_written_is_said(tmp_path, capsys, monkeypatch, targets, says):
    monkeypatch.chdir(tmp_path)
    source = WRITERS["WFDB 16"].write(tmp_path, tracing(1))
    assert main(["export", str(source), *targets]) == 2
    assert says in capsys.readouterr().err
