"""What goes to standard output, and that nothing else does."""

from __future__ import annotations

import csv
import io
import json
import sys

import pytest

from app.command_line import compare_command
from app.command_line.main import main
from core.shipped_files import samples_folder
from core.wording.caution import CAUTION, CAUTIONS
from tests.helpers.schemas import validate

PAIR = [str(samples_folder() / f"raised-{which}") for which in ("earlier", "later")]
OTHER_PERSON = str(samples_folder() / "steady-later")


@pytest.fixture
def compared(raised, monkeypatch):
    """The comparison at hand instead of one more of the same."""
    monkeypatch.setattr(compare_command, "compare", lambda *_: raised)


@pytest.mark.usefixtures("compared")
def test_json_alone(capsysbinary):
    assert main(["compare", *PAIR, "--json", "-"]) == 0
    captured = capsysbinary.readouterr()
    assert captured.err == b""
    validate("comparison", json.loads(captured.out))
    assert captured.out.endswith(b"}\n")


@pytest.mark.usefixtures("compared")
def test_csv_alone(capsysbinary):
    assert main(["compare", *PAIR, "--csv", "-"]) == 0
    rows = list(csv.reader(io.StringIO(capsysbinary.readouterr().out.decode())))
    assert {len(row) for row in rows} == {len(rows[0])}
    assert rows[0][0] == "lead"


@pytest.mark.usefixtures("compared")
def test_pdf_alone(capsysbinary):
    assert main(["compare", *PAIR, "--pdf", "-"]) == 0
    written = capsysbinary.readouterr().out
    assert written.startswith(b"%PDF")
    assert written.rstrip().endswith(b"%%EOF")


@pytest.mark.usefixtures("compared")
def test_one_output_on_standard_output_and_another_in_a_file(capsysbinary, tmp_path):
    target = tmp_path / "table.csv"
    assert main(["compare", *PAIR, "--json", "-", "--csv", str(target)]) == 0
    validate("comparison", json.loads(capsysbinary.readouterr().out))
    assert target.read_text().startswith("lead,")


def test_a_refusal_is_json_on_standard_output_and_a_line_on_standard_error(capsysbinary):
    assert main(["compare", PAIR[0], OTHER_PERSON, "--json", "-"]) == 1
    captured = capsysbinary.readouterr()
    content = json.loads(captured.out)
    validate("comparison", content)
    assert "stop" in {notice["severity"] for notice in content["notices"]}
    assert len(captured.err.splitlines()) == 1
    assert content["overall"]["sentence"].encode() in captured.err


def test_a_refusal_writes_no_table_and_no_report(capsys, tmp_path):
    targets = tmp_path / "out.csv", tmp_path / "out.pdf"
    options = ["--csv", str(targets[0]), "--pdf", str(targets[1])]
    assert main(["compare", PAIR[0], OTHER_PERSON, *options]) == 1
    assert capsys.readouterr().out == ""
    assert list(tmp_path.iterdir()) == []


def test_a_measurement_alone(capsysbinary):
    assert main(["measure", PAIR[0], "--json", "-"]) == 0
    captured = capsysbinary.readouterr()
    validate("recording", json.loads(captured.out))
    assert captured.err == b""


@pytest.mark.parametrize("outputs", [("json", "csv"), ("csv", "pdf"), ("json", "csv", "pdf")])
def test_two_outputs_never_share_it_and_nothing_is_read_for_them(outputs, monkeypatch, capsys):
    def read(*_: object) -> None:
        raise AssertionError("read")

    monkeypatch.setattr(compare_command, "read_pair", read)
    options = [part for kind in outputs for part in (f"--{kind}", "-")]
    assert main(["compare", *PAIR, *options]) == 2
    captured = capsys.readouterr()
    assert captured.out == ""
    assert len(captured.err.splitlines()) == 1
    assert "only one output" in captured.err


@pytest.mark.usefixtures("compared")
def test_the_cautions_stand_in_every_output_that_holds_a_result(capsysbinary):
    assert main(["compare", *PAIR, "--json", "-"]) == 0
    content = json.loads(capsysbinary.readouterr().out)
    assert " ".join(content["cautions"]) == CAUTION
    assert main(["compare", *PAIR]) == 0
    out = capsysbinary.readouterr().out.decode()
    assert all(caution in out for caution in CAUTIONS)


@pytest.mark.usefixtures("compared")
@pytest.mark.parametrize("encoding", ["utf-8", "cp1252", "ascii"])
def test_a_terminal_that_lacks_a_character_still_gets_the_summary(monkeypatch, encoding):
    """A minus sign that is lost would turn a fall into a number without a sign."""
    raw = io.BytesIO()
    monkeypatch.setattr(sys, "stdout", io.TextIOWrapper(raw, encoding=encoding))
    assert main(["compare", *PAIR]) == 0
    sys.stdout.flush()
    text = raw.getvalue().decode(sys.stdout.encoding)
    assert CAUTIONS[0] in text
    assert "?" not in text
