"""The dialog that asks where to write, as a reader uses it."""

from __future__ import annotations

from collections.abc import Callable
from pathlib import Path

import pytest
from PySide6.QtCore import QTimer
from PySide6.QtWidgets import QApplication, QDialog, QFileDialog, QLineEdit, QMessageBox

from app.views import dialogs


@pytest.fixture
def save(bench, tmp_path) -> Callable[..., Path | None]:
    """Type a name into the dialog and accept it; questions are answered by *replace*."""

    def type_and_accept(name: str, *, replace: bool | None = None) -> Path | None:
        asked: list[str] = []

        def answer() -> None:
            box = QApplication.activeModalWidget()
            assert isinstance(box, QMessageBox)
            asked.append(box.text())
            yes, no = QMessageBox.StandardButton.Yes, QMessageBox.StandardButton.No
            box.button(yes if replace else no).click()
            # The dialog stays open where an older file is to be kept.
            again = QApplication.activeModalWidget()
            if isinstance(again, QFileDialog):
                QTimer.singleShot(0, again.reject)

        def fill() -> None:
            dialog = QApplication.activeModalWidget()
            assert isinstance(dialog, QFileDialog)
            dialog.setDirectory(str(tmp_path))
            dialog.findChild(QLineEdit, "fileNameEdit").setText(name)
            if replace is not None:
                QTimer.singleShot(0, answer)
            dialog.accept()

        QTimer.singleShot(0, fill)
        chosen = dialogs.ask_file_to_write(bench, "Export", "comparison.pdf", "PDF (*.pdf)")
        assert len(asked) == (replace is not None)
        return chosen

    return type_and_accept


@pytest.mark.parametrize(
    ("typed", "written"),
    [
        ("report", "report.pdf"),
        ("report.pdf", "report.pdf"),
        ("REPORT.PDF", "REPORT.PDF"),
        ("ward 12.3.2031", "ward 12.3.2031.pdf"),
        ("report.", "report..pdf"),
        ("report.txt", "report.txt.pdf"),
    ],
)
def test_an_ending_that_was_left_out_is_added(save, tmp_path, typed, written):
    assert save(typed) == tmp_path / written


@pytest.mark.parametrize("typed", ["report", "report.pdf", "ward 12.3.2031"])
@pytest.mark.parametrize("replace", [True, False])
def test_an_older_file_is_written_over_only_if_that_is_wanted(save, tmp_path, typed, replace):
    older = tmp_path / (typed if typed.endswith(".pdf") else f"{typed}.pdf")
    older.write_text("older")
    assert save(typed, replace=replace) == (older if replace else None)


def test_the_name_that_is_suggested_can_be_taken_as_it_is(bench):
    QTimer.singleShot(0, lambda: QApplication.activeModalWidget().accept())
    chosen = dialogs.ask_file_to_write(bench, "Export", "comparison.csv", "CSV (*.csv)")
    assert chosen is not None
    assert chosen.name == "comparison.csv"


def test_leaving_the_dialog_writes_nowhere(bench):
    QTimer.singleShot(0, lambda: QDialog.reject(QApplication.activeModalWidget()))
    assert dialogs.ask_file_to_write(bench, "Export", "comparison.json", "JSON (*.json)") is None
