"""File names and identifiers as others made them."""

from __future__ import annotations

import json
import os
import shutil
import sys

import pytest

from app.command_line.main import main
from core.shipped_files import samples_folder
from tests.helpers.schemas import validate

MEDIAL = [samples_folder() / f"medial-{which}.dcm" for which in ("earlier", "later")]
RAISED = samples_folder() / "raised-earlier"
MOVE = ["--electrode", "V2", "--up-mm", "9"]


def harmless(text: str) -> bool:
    """Whether a terminal shows it and does nothing else."""
    return all(mark.isprintable() or mark in "\n\N{NO-BREAK SPACE}" for mark in text)


@pytest.mark.parametrize("name", ["with space.dcm", "Fünfter März.dcm", "心電図.dcm", "-dash.dcm"])
def test_a_name_of_any_letters_is_read_and_told(name, tmp_path, capsysbinary):
    path = tmp_path / name
    shutil.copy(MEDIAL[0], path)
    assert main(["measure", str(path), "--json", "-"]) == 0
    content = json.loads(capsysbinary.readouterr().out)
    validate("recording", content)
    assert content["source"]["name"] == name


@pytest.fixture
def latin_1_name(tmp_path):
    """A name that an old system left behind, which is no UTF-8."""
    path = tmp_path / os.fsdecode(b"M\xe4rz.dcm")
    try:
        shutil.copy(MEDIAL[0], path)
    except OSError:
        pytest.skip("this file system takes no such name")
    return path


@pytest.mark.skipif(sys.platform == "win32", reason="names are text there")
@pytest.mark.parametrize("option", ["--json", "--csv", "--pdf"])
def test_a_name_that_is_no_text_is_compared(latin_1_name, tmp_path, option):
    target = tmp_path / "out"
    assert main(["compare", str(latin_1_name), str(MEDIAL[1]), option, str(target)]) == 0
    assert target.stat().st_size > 0


@pytest.mark.skipif(sys.platform == "win32", reason="names are text there")
def test_a_name_that_is_no_text_is_told_in_valid_json(latin_1_name, capsysbinary):
    assert main(["measure", str(latin_1_name), "--json", "-"]) == 0
    content = json.loads(capsysbinary.readouterr().out)
    validate("recording", content)
    assert content["source"]["name"].endswith("rz.dcm")


@pytest.mark.skipif(sys.platform == "win32", reason="such names cannot be made there")
def test_an_error_line_shows_a_name_and_obeys_it_not(tmp_path, capsys):
    path = tmp_path / "letter\x1b[31m\n\x07.dcm"
    path.write_text("Dear colleague")
    for arguments in (["measure", str(path)], ["move", str(path), *MOVE, "--out", "x"]):
        assert main(arguments) == 2
        error = capsys.readouterr().err
        assert len(error.splitlines()) == 1
        assert "letter" in error
        assert harmless(error)


def test_a_summary_shows_an_identifier_and_obeys_it_not(tmp_path, capsys):
    for ending in (".hea", ".dat"):
        shutil.copy(RAISED.with_suffix(ending), tmp_path)
    header = tmp_path / "raised-earlier.hea"
    header.write_text(header.read_text().replace("INVENTED-01", "INVENTED\x1b[31m\x07-01"))
    assert main(["measure", str(header)]) == 0
    out = capsys.readouterr().out
    assert "INVENTED" in out
    assert harmless(out)
