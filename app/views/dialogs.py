"""Every modal dialog, behind functions that a test can replace."""

from __future__ import annotations

from pathlib import Path

from PySide6.QtWidgets import QFileDialog, QMessageBox, QWidget

RECORDINGS = "Recordings (*.hea *.dcm *.edf *.bdf *.scp *.xml *.csv *.tsv);;All files (*)"


def ask_recording(parent: QWidget, title: str) -> Path | None:
    """Ask for one recording."""
    name, _ = QFileDialog.getOpenFileName(parent, title, "", RECORDINGS)
    return Path(name) if name else None


def ask_file_to_write(parent: QWidget, title: str, suggestion: str, kind: str) -> Path | None:
    """Ask where to write."""
    name, _ = QFileDialog.getSaveFileName(parent, title, suggestion, kind)
    return Path(name) if name else None


def tell(parent: QWidget, title: str, text: str) -> None:
    """Show a text."""
    QMessageBox.information(parent, title, text)
