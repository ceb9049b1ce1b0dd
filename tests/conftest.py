from __future__ import annotations

import os

# Before Qt is imported anywhere: tests open no window on a screen.
os.environ["QT_QPA_PLATFORM"] = "offscreen"

from pathlib import Path

import pytest
from pydicom.data import get_testdata_file

from core import Comparison, Recording, compare, read_recording
from core.shipped_files import samples_folder
from tests.helpers.further import with_further


def pytest_collection_modifyitems(items: list[pytest.Item]) -> None:
    for item in items:
        if {"qtbot", "qapp"} & set(getattr(item, "fixturenames", ())):
            item.add_marker("gui")


def _sample_pair(story: str, ending: str = "") -> tuple[Recording, Recording]:
    return tuple(  # type: ignore[return-value]
        read_recording(samples_folder() / f"{story}-{which}{ending}")
        for which in ("earlier", "later")
    )


@pytest.fixture(scope="session")
def raised() -> Comparison:
    """V1 and V2 two spaces too high in the later tracing."""
    return compare(*_sample_pair("raised"))


@pytest.fixture(scope="session")
def inferior() -> Comparison:
    """New inferior ST elevation with reciprocal change."""
    return compare(*_sample_pair("inferior"))


@pytest.fixture(scope="session")
def steady() -> Comparison:
    """Nothing new but rate and noise."""
    return compare(*_sample_pair("steady"))


@pytest.fixture(scope="session")
def medial() -> Comparison:
    """V5 and V6 not lateral enough in the later tracing."""
    return compare(*_sample_pair("medial", ".dcm"))


@pytest.fixture(scope="session")
def further() -> Comparison:
    """The raised pair with further leads: V3R and X in one recording only, V9 flat in the later."""
    earlier, later = _sample_pair("raised")
    return compare(
        with_further(earlier, "V4R", "V7", "V9", "X"),
        with_further(later, "V3R", "V4R", "V7", "V9", times=1.2, flat=("V9",)),
    )


@pytest.fixture(scope="session")
def real_file() -> Path:
    """The one real recording that every checkout can test against: pydicom ships it."""
    return Path(get_testdata_file("waveform_ecg.dcm"))


@pytest.fixture(scope="session")
def real_recording(real_file: Path) -> Recording:
    return read_recording(real_file)
