"""Damaged files of the formats whose readers are tried nowhere else: nothing but RecordingError.

A seeded slice; ``FILES`` may be raised for a night's run.
"""

from __future__ import annotations

import shutil
import time
from pathlib import Path

import numpy as np
import pytest

from core import RecordingError, read_recording
from core.shipped_files import samples_folder
from tests.core.recordings.test_scp_reader import CODERS, leads, sections
from tests.helpers import scp_files as scp
from tests.helpers.mutate import mutated

FILES = 440
SLOWEST_S = 2.0


def scp_content(folder: Path, rng: np.random.Generator) -> Path:
    """A section damaged and sealed again, or a whole record damaged with its seal."""
    coder = CODERS[str(rng.choice(list(CODERS)))]()
    made = sections(leads(200), order=int(rng.integers(3)), coder=coder)
    if rng.random() < 0.75:
        number = int(rng.choice(list(made)))
        content = scp.record(made | {number: mutated(made[number], rng)})
    else:
        content = mutated(scp.record(made), rng)
    path = folder / "damaged.scp"
    path.write_bytes(content)
    return path


def wfdb_header(folder: Path, rng: np.random.Generator) -> Path:
    name = "steady-earlier"
    shutil.copy(samples_folder() / f"{name}.dat", folder)
    path = folder / f"{name}.hea"
    path.write_bytes(mutated((samples_folder() / path.name).read_bytes(), rng))
    return path


def wfdb_signal(folder: Path, rng: np.random.Generator) -> Path:
    name = "steady-earlier"
    path = folder / f"{name}.hea"
    shutil.copy(samples_folder() / path.name, folder)
    data = (samples_folder() / f"{name}.dat").read_bytes()
    path.with_suffix(".dat").write_bytes(mutated(data, rng))
    return path


def dicom(folder: Path, rng: np.random.Generator) -> Path:
    path = folder / "damaged.dcm"
    path.write_bytes(mutated((samples_folder() / "medial-earlier.dcm").read_bytes(), rng))
    return path


# pydicom says much about damaged values; what it says is not what is tested here.
@pytest.mark.filterwarnings("ignore")
@pytest.mark.parametrize("damage", [scp_content, wfdb_header, wfdb_signal, dicom])
def test_a_damaged_file_is_read_or_refused_in_one_line(tmp_path, damage):
    outcomes = {"read": 0, "refused": 0}
    for seed in range(FILES):
        path = damage(tmp_path, np.random.default_rng(seed))
        started, said = time.monotonic(), ""
        try:
            read_recording(path)
            outcomes["read"] += 1
        except RecordingError as error:
            said = str(error)
            outcomes["refused"] += 1
        assert "\n" not in said, seed
        assert time.monotonic() - started < SLOWEST_S, seed
    assert min(outcomes.values()) > 0
