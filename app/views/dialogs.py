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
    """Ask where to write; a name without the suggestion's ending is given it."""
    ending = Path(suggestion).suffix
    dialog = QFileDialog(parent, title, "", kind)
    dialog.setAcceptMode(QFileDialog.AcceptMode.AcceptSave)
    # The dialog itself asks before an older file is written over, and with the ending.
    dialog.setDefaultSuffix(ending.lstrip("."))
    dialog.selectFile(suggestion)
    accepted = dialog.exec() == QDialog.DialogCode.Accepted
    chosen = dialog.selectedFiles()
    dialog.deleteLater()
    if not accepted or not chosen:
        return None
    path = Path(chosen[0])
    if path.suffix.lower() == ending:
        return path
    # To the dialog anything behind a dot is an ending, such as the year of a date.
    whole = path.with_name(path.name + ending)
    return whole if not whole.exists() or _may_replace(parent, title, whole) else None


def _may_replace(parent: QWidget, title: str, path: Path) -> bool:
    question = f"{path.name} is there already. Replace it?"
    return QMessageBox.question(parent, title, question) == QMessageBox.StandardButton.Yes


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
