"""Every modal dialog, behind functions that a test can replace."""

from __future__ import annotations

from pathlib import Path

from PySide6.QtWidgets import QDialog, QFileDialog, QMessageBox, QWidget

from app.state.stated import Stated
from app.views.stretch_dialog import StretchDialog
from app.views.table_dialog import TableDialog
from core.errors import TableIncomplete

RECORDINGS = "Recordings (*.hea *.dcm *.edf *.bdf *.scp *.xml *.csv *.tsv);;All files (*)"


def ask_recording(parent: QWidget, title: str) -> Path | None:
    """Ask for one recording."""
    name, _ = QFileDialog.getOpenFileName(parent, title, "", RECORDINGS)
    return Path(name) if name else None


def ask_file_to_write(parent: QWidget, title: str, suggestion: str, kind: str) -> Path | None:
    """Ask where to write."""
    name, _ = QFileDialog.getSaveFileName(parent, title, suggestion, kind)
    return Path(name) if name else None


def ask_unstated(parent: QWidget, error: TableIncomplete) -> Stated | None:
    """Ask for what a table does not say of itself."""
    dialog = TableDialog(parent, error.path.name, error.missing)
    answered = dialog.exec() == QDialog.DialogCode.Accepted
    dialog.deleteLater()
    return dialog.stated() if answered else None


def ask_stretch(parent: QWidget, name: str) -> Stated | None:
    """Ask which part of a recording to use."""
    dialog = StretchDialog(parent, name)
    answered = dialog.exec() == QDialog.DialogCode.Accepted
    dialog.deleteLater()
    return dialog.stated() if answered else None


def tell(parent: QWidget, title: str, text: str) -> None:
    """Show a text."""
    QMessageBox.information(parent, title, text)
