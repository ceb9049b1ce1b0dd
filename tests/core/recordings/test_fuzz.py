"""Damaged files of every format: read, or refused in one line, soon and without a word.

A seeded slice of what ``python -m tests.fuzz`` does by the hundred thousand.
"""

from __future__ import annotations

import numpy as np
import pytest

from core import read_recording
from tests.helpers.damage import FORMATS
from tests.helpers.watched import read_watched
from tests.helpers.wfdb_files import write_small_records

FILES = 440


@pytest.mark.parametrize("name", list(FORMATS))
def test_a_damaged_file_is_read_or_refused_in_one_line(tmp_path, capfd, name):
    write = FORMATS[name](tmp_path)
    n_read = n_refused = 0
    for seed in range(FILES):
        reading = read_watched(write(np.random.default_rng(seed)))
        assert reading.faults == [], seed
        if reading.refusal is None:
            n_read += 1
        else:
            n_refused += 1
    assert min(n_read, n_refused) > FILES // 20
    assert capfd.readouterr() == ("", "")


@pytest.mark.parametrize("name", [name for name in FORMATS if not name.startswith("wfdb")])
def test_the_files_that_are_damaged_are_sound_before(tmp_path, monkeypatch, name):
    """Else the campaigns would try the refusals alone."""
    for damage in ("mutated", "mutated_text", "damaged"):
        monkeypatch.setattr(f"tests.helpers.damage.{damage}", lambda content, _rng: content)
    write = FORMATS[name](tmp_path)
    for seed in range(40):
        assert read_recording(write(np.random.default_rng(seed))).n_samples > 0


def test_the_records_that_are_damaged_are_sound_before(tmp_path):
    for header in write_small_records(tmp_path):
        assert read_recording(header).n_samples > 0, header.name
