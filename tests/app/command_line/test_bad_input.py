"""Whatever is wrong with a file: one sentence, the right status, no traceback."""

from __future__ import annotations

import json
import shutil
from pathlib import Path

import numpy as np
import pytest

from app.command_line.main import main
from core.recordings.leads import TWELVE_LEADS
from core.shipped_files import samples_folder
from tests.helpers.schemas import validate
from tests.helpers.synthetic import synthetic
from tests.helpers.wfdb_files import write_record

GOOD = str(samples_folder() / "raised-earlier")


def counts(seconds: float) -> np.ndarray:
    return np.rint(1000 * synthetic().recording.signal_mv[: round(500 * seconds)]).astype(int)


def missing(folder: Path) -> Path:
    return folder / "missing.hea"


def a_folder(folder: Path) -> Path:
    (folder / "records").mkdir()
    return folder / "records"


def empty(folder: Path) -> Path:
    (folder / "empty.dcm").touch()
    return folder / "empty.dcm"


def text_named_dcm(folder: Path) -> Path:
    path = folder / "letter.dcm"
    path.write_text("Dear colleague,\nplease find the tracing enclosed.\n")
    return path


def header_alone(folder: Path) -> Path:
    path = write_record(folder, "alone", counts(10), list(TWELVE_LEADS))
    path.with_suffix(".dat").unlink()
    return path.with_suffix(".hea")


def cut_short(folder: Path) -> Path:
    path = write_record(folder, "short", counts(10), list(TWELVE_LEADS))
    data = path.with_suffix(".dat")
    data.write_bytes(data.read_bytes()[:5000])
    return path


def garbage_header(folder: Path) -> Path:
    path = folder / "garbage.hea"
    path.write_bytes(np.random.default_rng(1).bytes(3000))
    return path


def one_lead(folder: Path) -> Path:
    return write_record(folder, "single", counts(10)[:, :1], ["II"])


def damaged_dicom(folder: Path) -> Path:
    path = folder / "damaged.dcm"
    whole = (samples_folder() / "medial-earlier.dcm").read_bytes()
    path.write_bytes(whole[: len(whole) // 3])
    return path


def wrong_unit(folder: Path) -> Path:
    return write_record(folder, "pressure", counts(10), list(TWELVE_LEADS), unit="mmHg")


def slow(folder: Path) -> Path:
    return write_record(folder, "slow", counts(10), list(TWELVE_LEADS), rate_hz=50.0)


def unknown_ending(folder: Path) -> Path:
    path = folder / "tracing.xyz"
    path.write_text("This is no recording.\n")
    return path


def garbage(folder: Path) -> Path:
    path = folder / "noise.dat"
    path.write_bytes(np.random.default_rng(2).bytes(3000))
    return path


def a_chest_lead_short(folder: Path) -> Path:
    return write_record(folder, "eleven", counts(10)[:, :11], list(TWELVE_LEADS[:11]))


def leads_without_names(folder: Path) -> Path:
    return write_record(folder, "nameless", counts(10), [f"channel {n}" for n in range(12)])


def one_second(folder: Path) -> Path:
    return write_record(folder, "second", counts(1), list(TWELVE_LEADS))


def nothing_recorded(folder: Path) -> Path:
    missing_samples = np.full((5000, 12), -(1 << 15))  # WFDB's mark for a sample that isn't there
    return write_record(folder, "nothing", missing_samples, list(TWELVE_LEADS))


def flat(folder: Path) -> Path:
    return write_record(folder, "flat", np.zeros((5000, 12)), list(TWELVE_LEADS))


UNREADABLE = [
    missing,
    a_folder,
    empty,
    text_named_dcm,
    header_alone,
    cut_short,
    garbage_header,
    one_lead,
    damaged_dicom,
    wrong_unit,
    slow,
    unknown_ending,
    garbage,
    a_chest_lead_short,
    leads_without_names,
]
NOT_COMPARABLE = [one_second, nothing_recorded, flat]


def run(arguments, capsys) -> tuple[int, str]:
    """Exit status and the one line on standard error; nothing may be on standard output."""
    status = main(arguments)
    captured = capsys.readouterr()
    assert captured.out == ""
    lines = captured.err.splitlines()
    assert len(lines) == 1, captured.err
    assert lines[0].startswith("samespot: ")
    assert "Traceback" not in lines[0]
    return status, lines[0]


def commands(path: Path, folder: Path) -> list[list[str]]:
    move = ["--electrode", "V2", "--up-mm", "20", "--out", str(folder / "moved")]
    return [
        ["compare", GOOD, str(path)],
        ["compare", str(path), GOOD],
        ["measure", str(path)],
        ["move", str(path), *move],
    ]


@pytest.mark.parametrize("make", UNREADABLE, ids=lambda make: make.__name__)
def test_a_file_that_cannot_be_read(make, tmp_path, capsys):
    path = make(tmp_path)
    for arguments in commands(path, tmp_path):
        status, line = run(arguments, capsys)
        assert status == 2
        assert path.stem in line
        # A name that was typed is repeated as it was typed; no other folder is told.
        assert make is missing or str(tmp_path) not in line
        assert line.endswith(".")
        assert line.count(". ") >= 1  # what is wrong, then what to do


@pytest.mark.parametrize("make", NOT_COMPARABLE, ids=lambda make: make.__name__)
def test_a_recording_that_can_be_read_but_not_measured(make, tmp_path, capsys):
    path = make(tmp_path)
    for arguments in commands(path, tmp_path):
        status, line = run(arguments, capsys)
        assert status == 1
        assert "at least 3" in line
        assert "Record 10 s" in line


@pytest.mark.parametrize("make", NOT_COMPARABLE, ids=lambda make: make.__name__)
def test_the_json_that_was_asked_for_says_why(make, tmp_path, capsys):
    target = tmp_path / "out.json"
    status, line = run(["compare", GOOD, str(make(tmp_path)), "--json", str(target)], capsys)
    content = json.loads(target.read_text())
    validate("comparison", content)
    stops = [notice["text"] for notice in content["notices"] if notice["severity"] == "stop"]
    assert (status, len(stops)) == (1, 1)
    assert stops[0] in line


@pytest.mark.parametrize("make", [cut_short, empty], ids=lambda make: make.__name__)
def test_no_json_is_written_of_what_could_not_be_read(make, tmp_path, capsys):
    target = tmp_path / "out.json"
    assert run(["compare", GOOD, str(make(tmp_path)), "--json", str(target)], capsys)[0] == 2
    assert not target.exists()


@pytest.fixture
def locked(tmp_path, monkeypatch) -> Path:
    """A file that may not be read, not even by a root user."""
    path = tmp_path / "locked.dcm"
    shutil.copy(samples_folder() / "medial-earlier.dcm", path)
    path.chmod(0)
    opened = Path.open

    def refuse(self: Path, *arguments: object, **options: object) -> object:
        if self == path:
            raise PermissionError(13, "Permission denied")
        return opened(self, *arguments, **options)

    monkeypatch.setattr(Path, "open", refuse)
    return path


def test_a_file_that_may_not_be_read(locked, tmp_path, capsys):
    for arguments in commands(locked, tmp_path):
        status, line = run(arguments, capsys)
        assert status == 2
        assert "locked.dcm" in line
        assert "you may read it" in line
        assert str(tmp_path) not in line


def test_a_header_that_names_a_file_elsewhere_is_refused(tmp_path, capsys):
    inside = tmp_path / "inside"
    inside.mkdir()
    write_record(tmp_path, "outside", counts(10), list(TWELVE_LEADS))
    header = (tmp_path / "outside.hea").read_text()
    for way in ("../outside.dat", str(tmp_path / "outside.dat")):
        path = inside / "trick.hea"
        path.write_text(header.replace("outside.dat", way).replace("outside ", "trick "))
        assert run(["measure", str(path)], capsys)[0] == 2
