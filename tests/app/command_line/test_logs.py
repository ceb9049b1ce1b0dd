"""Recordings are patient data: no record of the log names a person or a file."""

from __future__ import annotations

import pytest

from app.command_line.main import main
from core import read_recording
from core.shipped_files import samples_folder

RAISED = [str(samples_folder() / f"raised-{which}") for which in ("earlier", "later")]
MEDIAL = [str(samples_folder() / f"medial-{which}.dcm") for which in ("earlier", "later")]
# It names every file that the wfdb package opens, at DEBUG alone; nothing of ours shows that.
NAMES_FILES_AT_DEBUG = "fsspec.local"


@pytest.fixture
def damaged(tmp_path):
    path = tmp_path / "damaged.dcm"
    whole = (samples_folder() / "medial-earlier.dcm").read_bytes()
    path.write_bytes(whole[: len(whole) // 3])
    return str(path)


def records(caplog) -> list[str]:
    return [
        f"{record.getMessage()} {record.exc_text or ''}"
        for record in caplog.records
        if record.name != NAMES_FILES_AT_DEBUG or record.levelname != "DEBUG"
    ]


def everything(caplog) -> str:
    return " ".join(f"{record.getMessage()} {record.exc_text or ''}" for record in caplog.records)


@pytest.mark.parametrize(
    "arguments",
    [
        ["compare", *RAISED],
        ["compare", *MEDIAL, "--pdf", "{out}.pdf"],
        ["compare", RAISED[0], MEDIAL[1], "--json", "{out}.json"],
        ["measure", MEDIAL[0]],
        ["move", RAISED[0], "--electrode", "V2", "--up-mm", "9", "--out", "{out}"],
        ["measure", "{damaged}"],
        ["measure", "{out}"],
    ],
    ids=["compare", "pdf", "mixed", "measure", "move", "damaged", "missing"],
)
def test_no_person_and_no_file_is_logged(arguments, damaged, tmp_path, caplog, capsys):
    caplog.set_level("DEBUG")
    out = str(tmp_path / "out")
    main([argument.format(out=out, damaged=damaged) for argument in arguments])
    for known in (read_recording(path).subject for path in (RAISED[0], MEDIAL[0])):
        for word in (known.id, *known.name.split()):
            assert word not in everything(caplog)
    for told in records(caplog):
        assert not any(part in told for part in ("raised", "medial", "damaged", str(tmp_path)))
        assert str(samples_folder()) not in told


def test_the_log_is_looked_at_at_all(caplog):
    """The library's own DEBUG line, which the test above leaves out, is seen by it."""
    caplog.set_level("DEBUG")
    assert main(["measure", RAISED[0]]) == 0
    assert "raised-earlier" in everything(caplog)
