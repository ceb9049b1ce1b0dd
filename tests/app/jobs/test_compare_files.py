from __future__ import annotations

import shutil
from pathlib import Path

import pytest

from app.jobs.compare_job import CompareRequest, compare_files
from core import Settings
from core.errors import RecordingError, Stopped
from core.shipped_files import samples_folder


def request(*paths: Path, **options) -> CompareRequest:
    return CompareRequest(*paths, Settings(), **options)


def never() -> bool:
    return False


def ignore(share: float, words: str) -> None:
    pass


def sample(name: str) -> Path:
    return samples_folder() / name


def test_progress_rises_from_nothing_to_all_and_is_told_in_words():
    told = []
    compare_files(
        request(sample("raised-earlier.hea"), sample("raised-later.hea")),
        lambda share, words: told.append((share, words)),
        never,
    )
    shares = [share for share, _ in told]
    assert shares == sorted(shares)
    assert (shares[0], shares[-1]) == (0.0, 1.0)
    assert all(words for _, words in told)
    assert "reading" in told[0][1]


def test_it_stops_when_it_is_asked_to():
    told = []

    def stop_after_three() -> bool:
        return len(told) >= 3

    with pytest.raises(Stopped):
        compare_files(
            request(sample("raised-earlier.hea"), sample("raised-later.hea")),
            lambda share, words: told.append(share),
            stop_after_three,
        )
    assert len(told) == 3


def test_a_file_that_is_not_there_is_told_by_its_name(tmp_path):
    with pytest.raises(RecordingError, match=r"nowhere\.dcm"):
        compare_files(
            request(sample("raised-earlier.hea"), tmp_path / "nowhere.dcm"), ignore, never
        )


def test_two_files_without_times_keep_the_order_that_was_given(tmp_path):
    for name in ("raised-earlier", "raised-later"):
        shutil.copy(sample(f"{name}.dat"), tmp_path)
        lines = sample(f"{name}.hea").read_text().splitlines()
        first = " ".join(lines[0].split()[:4])  # record, leads, rate, samples: no time, no date
        (tmp_path / f"{name}.hea").write_text("\n".join([first, *lines[1:]]) + "\n")
    given = tmp_path / "raised-later.hea", tmp_path / "raised-earlier.hea"
    comparison = compare_files(request(*given, order_by_time=True), ignore, never)
    assert comparison.earlier.recording.recorded_at is None
    assert comparison.earlier.recording.source.name == "raised-later"
