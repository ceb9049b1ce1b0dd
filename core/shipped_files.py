"""Where the files that ship with the program lie: beside the code, or inside the wheel."""

from __future__ import annotations

from pathlib import Path

_CORE = Path(__file__).resolve().parent


def resources_folder() -> Path:
    """Folder with the torso ensemble, icons, fonts and licence texts."""
    return _shipped("resources")


def samples_folder() -> Path:
    """Folder with the sample recordings."""
    return _shipped("sample_records") / "records"


def _shipped(name: str) -> Path:
    installed = _CORE / "shipped" / name
    return installed if installed.is_dir() else _CORE.parent / name
