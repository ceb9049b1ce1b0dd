from __future__ import annotations

import os
import pickle
import subprocess
import sys
from pathlib import Path

import pytest

from app.command_line.failures import CommandFailed
from app.report.without_display import make_report
from tests.app.report.pages import open_pdf, texts

SCREENS = ("DISPLAY", "WAYLAND_DISPLAY", "QT_QPA_PLATFORM", "XDG_RUNTIME_DIR")
PROGRAM = """
import pickle, sys
from pathlib import Path
from app.report.without_display import make_report

comparison = pickle.loads(Path(sys.argv[1]).read_bytes())
Path(sys.argv[2]).write_bytes(make_report(comparison))
"""


def test_a_report_is_made_where_there_is_no_display(raised, raised_pdf, tmp_path):
    given, made = tmp_path / "comparison.pickle", tmp_path / "report.pdf"
    given.write_bytes(pickle.dumps(raised))
    environment = {name: value for name, value in os.environ.items() if name not in SCREENS}
    checkout = Path(__file__).resolve().parents[3]
    done = subprocess.run(
        [sys.executable, "-W", "error", "-c", PROGRAM, given, made],
        cwd=checkout,
        env=environment,
        capture_output=True,
        text=True,
        timeout=120,
        check=False,
    )
    assert (done.returncode, done.stdout, done.stderr) == (0, "", "")
    assert texts(made.read_bytes()) == texts(raised_pdf)


def test_a_report_is_made_beside_a_window(qapp, raised):
    assert len(open_pdf(make_report(raised)).pages) == 2


def test_where_qt_cannot_be_loaded_it_says_so_in_one_line(raised, monkeypatch):
    monkeypatch.setitem(sys.modules, "PySide6.QtGui", None)
    with pytest.raises(CommandFailed, match="Qt does not load") as caught:
        make_report(raised)
    assert "\n" not in str(caught.value)
